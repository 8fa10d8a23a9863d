/* Palette, text, labels, scales, and where the plan lies on the page. */
#include <math.h>
#include <string.h>

#include "hit.h"
#include "labels.h"
#include "page-file.h"
#include "plan-painter.h"
#include "plan-read.h"
#include "polar.h"
#include "text.h"

static const UtPlan *
example (const char *name)
{
  g_autofree char *path = g_build_filename (g_getenv ("UT_EXAMPLES"), name, NULL);
  g_autoptr (GFile) file = g_file_new_for_path (path);
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  g_autoptr (GError) error = NULL;
  const UtPlan *plan = ut_plan_read_file (file, faults, &error);

  g_assert_no_error (error);
  g_assert_nonnull (plan);
  return plan;
}

static UtStudy *
answer (const UtPlan *plan)
{
  const UtQuestion question = { .direction = UT_DIRECTION_DOWN, .aim = UT_AIM_LEAST_POWER };

  return ut_study_new (plan, &question, NULL);
}

static void
test_margin_classes (void)
{
  const struct { double margin_db; UtMarginClass expected; } cases[] = {
    { -3.01, UT_MARGIN_FAR_SHORT }, { -3, UT_MARGIN_SHORT }, { -0.01, UT_MARGIN_SHORT }, { -1e-7, UT_MARGIN_TIGHT }, { 0, UT_MARGIN_TIGHT },
    { 2.99, UT_MARGIN_TIGHT }, { 3, UT_MARGIN_EASY }, { NAN, UT_MARGIN_UNKNOWN },
  };

  for (gsize i = 0; i < G_N_ELEMENTS (cases); i++)
    g_assert_cmpint (ut_margin_class (cases[i].margin_db), ==, cases[i].expected);
  /* Told apart without colour: no two classes share dash and width. */
  for (int a = 0; a < UT_N_MARGINS; a++)
    for (int b = 0; b < a; b++)
      {
        double dashes_a[4] = { 0 }, dashes_b[4] = { 0 }, width_a, width_b;
        int n_a, n_b;

        ut_margin_line ((UtMarginClass) a, dashes_a, &n_a, &width_a);
        ut_margin_line ((UtMarginClass) b, dashes_b, &n_b, &width_b);
        g_assert_true (n_a != n_b || memcmp (dashes_a, dashes_b, sizeof dashes_a) != 0);
      }
}

/* The same text takes the same place at every scale of the target. */
static void
test_text_scales (void)
{
  double plain, again;

  ut_text_extent ("Power plan −12.5 dBm", &(UtTextStyle){ .size = 3 }, &plain, NULL);
  for (double scale = 0.5; scale < 8; scale *= 1.37)
    {
      ut_text_extent ("Power plan −12.5 dBm", &(UtTextStyle){ .size = 3 * scale }, &again, NULL);
      g_assert_cmpfloat (fabs (again / scale - plain), <, 0.01 * plain);
    }
}

static void
test_labels_apart (void)
{
  g_autoptr (GRand) rand = g_rand_new_with_seed (7);
  g_autoptr (GArray) boxes = ut_boxes_new ();
  guint placed = 0;

  for (int i = 0; i < 400; i++)
    {
      double at = g_rand_double_range (rand, 0, 200), up = g_rand_double_range (rand, 0, 100), x, y;
      const double corners[][2] = { { at, up }, { at + 5, up }, { at, up + 5 }, { at - 5, up - 5 } };

      placed += ut_boxes_place (boxes, corners, G_N_ELEMENTS (corners), 6, 3, &x, &y);
    }
  g_assert_cmpuint (placed, ==, boxes->len);
  g_assert_cmpuint (placed, >, 150);
  g_assert_cmpuint (placed, <, 400); /* crowded enough that some found no room */
  for (guint a = 0; a < boxes->len; a++)
    for (guint b = 0; b < a; b++)
      g_assert_false (ut_boxes_overlap (&g_array_index (boxes, UtBox, a), &g_array_index (boxes, UtBox, b)));
}

static void
test_scales (void)
{
  g_assert_cmpfloat (ut_page_scale (84, 168), ==, 500);
  g_assert_cmpfloat (ut_page_scale (84.1, 168), ==, 1000);
  g_assert_cmpfloat (ut_page_scale (12, 168), ==, 100);
  g_assert_cmpfloat (ut_page_scale (40, 168), ==, 250);
  g_assert_cmpfloat (ut_page_scale (1, 168), ==, 10);
  g_assert_cmpfloat (ut_page_scale (0, 168), ==, 10);
}

/* On every sheet everything drawn lies inside its frame, at the stated scale. */
static void
test_drawing_fits (void)
{
  static const char *const names[] = { "cold-store.undertone", "clinic-one-channel.undertone", "farm.undertone", "two-rooms.undertone" };

  for (gsize i = 0; i < G_N_ELEMENTS (names); i++)
    for (int paper = UT_PAPER_A4; paper <= UT_PAPER_TABLOID; paper++)
      for (int orientation = UT_PORTRAIT; orientation <= UT_LANDSCAPE; orientation++)
        {
          g_autoptr (UtPlan) plan = (UtPlan *) example (names[i]);
          g_autoptr (GArray) drawings = g_array_new (FALSE, FALSE, sizeof (UtPageDrawing));
          UtPageSetup setup = { (UtPaper) paper, (UtOrientation) orientation, NULL };
          double scale = ut_page_drawings (plan, &setup, drawings), width, height;

          ut_page_size_mm (&setup, &width, &height);
          g_assert_cmpuint (drawings->len, ==, plan->storeys->len);
          for (guint k = 0; k < drawings->len; k++)
            {
              const UtPageDrawing *drawing = &g_array_index (drawings, UtPageDrawing, k);
              double x0, y0, x1, y1;

              g_assert_true (ut_plan_extent (plan, drawing->storey, &x0, &y0, &x1, &y1));
              g_assert_cmpfloat (drawing->origin_x_mm + x0 * 1e3 / scale, >=, drawing->frame_mm.x);
              g_assert_cmpfloat (drawing->origin_x_mm + x1 * 1e3 / scale, <=, drawing->frame_mm.x + drawing->frame_mm.width);
              g_assert_cmpfloat (drawing->origin_y_mm - y1 * 1e3 / scale, >=, drawing->frame_mm.y);
              g_assert_cmpfloat (drawing->origin_y_mm - y0 * 1e3 / scale, <=, drawing->frame_mm.y + drawing->frame_mm.height);
              g_assert_cmpfloat (drawing->frame_mm.x + drawing->frame_mm.width, <=, width - 9.9);
              g_assert_cmpfloat (drawing->frame_mm.y + drawing->frame_mm.height, <=, height - 9.9);
            }
        }
}

/* Crowded and empty plans still give one page without a complaint of cairo's. */
static void
test_stress (void)
{
  GString *text = g_string_new ("{\"undertone\": 1, \"title\": \"\", \"carrier\": {\"frequency_mhz\": 3750, \"bandwidth_mhz\": 20, \"sharing\": \"orthogonal\"},"
                                "\"propagation\": {\"base\": {\"law\": \"free-space\"}}, \"constructions\": [], \"antennas\": [],"
                                "\"storeys\": [{\"id\": \"S1\", \"name\": \"\\u0637\\u0627\\u0628\\u0642\", \"elevation_m\": 0, \"height_m\": 3, \"walls\": []}], \"cells\": [");
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  UtPageSetup setup = { UT_PAPER_A4, UT_LANDSCAPE, "x" };

  for (int i = 0; i < 660; i++)
    g_string_append_printf (text,
                            "%s{\"id\": \"R%d\", \"name\": \"A rather long name for radio number %d in the Größe of things\", \"storey\": \"S1\", \"x_m\": %d, \"y_m\": %d, \"height_m\": 2, "
                            "\"power_dbm\": 0, \"power_min_dbm\": -40, \"power_max_dbm\": 20, \"power_step_db\": 0%s}",
                            i == 0 ? "" : i == 60 ? "], \"terminals\": [" : ", ", i, i, i * 7 % 90, i * 11 % 50,
                            i < 60 ? "" : ", \"target_down_db\": 3, \"target_up_db\": null");
  g_string_append (text, "], \"measured_gains_db\": {}}");
  g_autoptr (UtPlan) crowded = (UtPlan *) ut_plan_read (text->str, text->len, faults);
  g_autoptr (UtPlan) empty = (UtPlan *) ut_plan_new_empty ();
  g_assert_nonnull (crowded);
  g_string_free (text, TRUE);
  for (int i = 0; i < 2; i++)
    {
      UtStudy *study = answer (i ? empty : crowded);
      cairo_surface_t *surface = cairo_recording_surface_create (CAIRO_CONTENT_COLOR_ALPHA, NULL);
      cairo_t *cr = cairo_create (surface);
      double x, y, width, height, page_width, page_height;

      ut_compose_page (cr, study, &setup);
      g_assert_cmpint (cairo_status (cr), ==, CAIRO_STATUS_SUCCESS);
      cairo_recording_surface_ink_extents (surface, &x, &y, &width, &height);
      ut_page_size_mm (&setup, &page_width, &page_height);
      g_assert_cmpfloat (x, >=, 9);
      g_assert_cmpfloat (y, >=, 9);
      g_assert_cmpfloat (x + width, <=, page_width - 9);
      g_assert_cmpfloat (y + height, <=, page_height - 9);
      cairo_destroy (cr);
      cairo_surface_destroy (surface);
      ut_study_unref (study);
    }
}

static void
test_hit (void)
{
  g_autoptr (UtPlan) plan = (UtPlan *) example ("two-rooms.undertone");
  g_autoptr (UtStudy) study = answer (plan);
  const UtRadio *cell = &ut_plan_cell (plan, 0)->radio, *terminal = &ut_plan_terminal (plan, 0)->radio;
  UtHit hit = ut_hit (plan, study, 0, cell->x_m + 0.1, cell->y_m, 0.3, 0);

  g_assert_cmpint (hit.kind, ==, UT_HIT_CELL);
  g_assert_cmpuint (hit.index, ==, 0);
  hit = ut_hit (plan, study, 0, terminal->x_m, terminal->y_m - 0.2, 0.3, 0);
  g_assert_cmpint (hit.kind, ==, UT_HIT_TERMINAL);
  hit = ut_hit (plan, study, 0, (cell->x_m + terminal->x_m) / 2, (cell->y_m + terminal->y_m) / 2, 0.3, 0);
  g_assert_cmpint (hit.kind, ==, UT_HIT_LINK);
  g_assert_cmpuint (hit.index, ==, 0);
  g_assert_cmpint (ut_hit (plan, NULL, 0, (cell->x_m + terminal->x_m) / 2, (cell->y_m + terminal->y_m) / 2, 0.3, 0).kind, ==, UT_HIT_NOTHING);
  g_assert_cmpint (ut_hit (plan, study, 0, -50, -50, 0.3, 0).kind, ==, UT_HIT_NOTHING);
  /* Repeated looks go through what lies there: terminal, then the link under it, then the terminal again. */
  g_assert_cmpint (ut_hit (plan, study, 0, terminal->x_m, terminal->y_m, 0.3, 1).kind, ==, UT_HIT_LINK);
  g_assert_cmpint (ut_hit (plan, study, 0, terminal->x_m, terminal->y_m, 0.3, 2).kind, ==, UT_HIT_TERMINAL);
}

static void
test_refused_endings (void)
{
  g_autoptr (UtPlan) plan = (UtPlan *) example ("two-rooms.undertone");
  g_autoptr (UtStudy) study = answer (plan);
  UtPageSetup setup = { UT_PAPER_A4, UT_LANDSCAPE, NULL };
  g_autoptr (GError) error = NULL;

  g_assert_false (ut_page_write_file (study, &setup, "page.doc", &error));
  g_assert_error (error, G_IO_ERROR, G_IO_ERROR_INVALID_ARGUMENT);
  g_assert_false (g_file_test ("page.doc", G_FILE_TEST_EXISTS));
}

/* Whether the curve's colour, or nearly, is at this place. */
static gboolean
has_curve (cairo_surface_t *surface, int x, int y)
{
  const UtColour *colour = &ut_palette_paper.margin[UT_MARGIN_EASY];

  for (int dy = -2; dy <= 2; dy++)
    for (int dx = -2; dx <= 2; dx++)
      {
        const unsigned char *pixel
          = cairo_image_surface_get_data (surface) + (y + dy) * cairo_image_surface_get_stride (surface) + (x + dx) * 4;

        if (fabs (pixel[0] / 255.0 - colour->blue) + fabs (pixel[1] / 255.0 - colour->green) + fabs (pixel[2] / 255.0 - colour->red) < 0.1)
          return TRUE;
      }
  return FALSE;
}

/* A sector of the cold store turned to the right: full gain there, 30 dB less behind it; tilted by 90 degrees it looks down. */
static void
test_polar (void)
{
  g_autoptr (UtPlan) plan = (UtPlan *) example ("cold-store.undertone");
  const int width = 600, height = 300;
  cairo_surface_t *surface = cairo_image_surface_create (CAIRO_FORMAT_RGB24, width, height);
  cairo_t *cr = cairo_create (surface);
  double side = height - 1.6 * height / 12, radius = 0.46 * side;
  int x = width / 4, y = (int) (side / 2);

  ut_polar_paint (cr, plan, "hall-65", 90, 90, width, height, &ut_palette_paper);
  cairo_surface_flush (surface);
  g_assert_true (has_curve (surface, (int) (x + radius), y));
  g_assert_true (has_curve (surface, (int) (x - radius * (1 - 30 / UT_POLAR_SPAN_DB)), y));
  g_assert_false (has_curve (surface, (int) (x - radius), y));
  g_assert_true (has_curve (surface, 3 * width / 4, (int) (y + radius)));
  g_assert_false (has_curve (surface, 3 * width / 4, (int) (y - radius)));
  cairo_destroy (cr);
  cairo_surface_destroy (surface);
}

/* Squares are lettered and numbered from the lower left, A to Z and on with AA; a place on a line belongs to the square right of it and above. */
static void
test_grid_refs (void)
{
  UtPageGrid grid = { 10, -20, 5 };
  static const struct { double x_m, y_m; const char *ref; } places[] = {
    { -20, 5, "A1" }, { -10.01, 14.99, "A1" }, { -10, 15, "B2" }, { 239.9, 5, "Z1" }, { 240, 5, "AA1" }, { 510, 1005, "BB101" }, { -21, 5, "" },
  };

  for (gsize i = 0; i < G_N_ELEMENTS (places); i++)
    {
      g_autofree char *ref = ut_page_grid_ref (&grid, places[i].x_m, places[i].y_m);

      g_assert_cmpstr (ref, ==, places[i].ref);
    }
}

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  g_test_add_func ("/draw/margin-classes", test_margin_classes);
  g_test_add_func ("/page/grid-refs", test_grid_refs);
  g_test_add_func ("/draw/text-scales", test_text_scales);
  g_test_add_func ("/draw/labels-apart", test_labels_apart);
  g_test_add_func ("/draw/scales", test_scales);
  g_test_add_func ("/draw/drawing-fits", test_drawing_fits);
  g_test_add_func ("/draw/stress", test_stress);
  g_test_add_func ("/draw/hit", test_hit);
  g_test_add_func ("/draw/polar", test_polar);
  g_test_add_func ("/draw/refused-endings", test_refused_endings);
  return g_test_run ();
}
