/* The drawing on the page: scale, scale bar, north, key. */
#include <math.h>

#include "page-layout.h"
#include "plan-painter.h"
#include "walls.h"

#define MARK_MM 1.9
#define INSET_MM 3.0
#define CAPTION_MM 5.0

static const UtColour black = { 0, 0, 0 };

double
ut_page_scale (double length_m, double room_mm)
{
  static const double steps[] = { 1, 2, 2.5, 5 };

  for (double decade = 10; decade < 1e9; decade *= 10)
    for (gsize i = 0; i < G_N_ELEMENTS (steps); i++)
      if (length_m * 1e3 / (steps[i] * decade) <= room_mm)
        return steps[i] * decade;
  return 1e9;
}

/* The scale at which each of the storeys fits into a frame of its own, n frames in columns and rows. */
static double
common_scale (const UtPlan *plan, double frame_width, double frame_height)
{
  double scale = 0;

  for (guint s = 0; s < plan->storeys->len; s++)
    {
      double x0, y0, x1, y1;

      if (!ut_plan_extent (plan, s, &x0, &y0, &x1, &y1))
        continue;
      scale = MAX (scale, ut_page_scale (x1 - x0, frame_width - 2 * INSET_MM));
      scale = MAX (scale, ut_page_scale (y1 - y0, frame_height - 2 * INSET_MM - CAPTION_MM));
    }
  return scale;
}

double
ut_page_drawings (const UtPlan *plan, const UtPageSetup *setup, GArray *drawings)
{
  UtPageLayout layout;
  guint n = plan->storeys->len, best_columns = 1;
  double best = 0;

  ut_page_layout (plan, setup, &layout);
  /* As many columns as give the largest drawing. */
  for (guint columns = 1; columns <= n; columns++)
    {
      guint rows = (n + columns - 1) / columns;
      double scale = common_scale (plan, layout.drawing.width / columns, layout.drawing.height / rows);

      if (columns == 1 || scale < best)
        {
          best = scale;
          best_columns = columns;
        }
    }
  for (guint s = 0; s < n && drawings != NULL && best > 0; s++)
    {
      guint rows = (n + best_columns - 1) / best_columns;
      UtPageDrawing drawing = { .storey = s };
      double x0, y0, x1, y1;

      drawing.frame_mm.width = layout.drawing.width / best_columns;
      drawing.frame_mm.height = layout.drawing.height / rows;
      drawing.frame_mm.x = layout.drawing.x + (s % best_columns) * drawing.frame_mm.width;
      drawing.frame_mm.y = layout.drawing.y + (s / best_columns) * drawing.frame_mm.height;
      if (!ut_plan_extent (plan, s, &x0, &y0, &x1, &y1))
        continue;
      drawing.origin_x_mm = drawing.frame_mm.x + drawing.frame_mm.width / 2 - (x0 + x1) / 2 * 1e3 / best;
      drawing.origin_y_mm = drawing.frame_mm.y + (drawing.frame_mm.height + CAPTION_MM) / 2 + (y0 + y1) / 2 * 1e3 / best;
      g_array_append_val (drawings, drawing);
    }
  return best;
}

/* ---- grid references ---- */

#define LEAST_SQUARE_MM 14.0

gboolean
ut_page_grid (const UtPlan *plan, const UtPageSetup *setup, UtPageGrid *grid)
{
  static const double steps[] = { 1, 2, 5 };
  double scale = ut_page_drawings (plan, setup, NULL), low_x = INFINITY, low_y = INFINITY;

  for (guint s = 0; s < plan->storeys->len; s++)
    {
      double x0, y0, x1, y1;

      if (!ut_plan_extent (plan, s, &x0, &y0, &x1, &y1))
        continue;
      low_x = fmin (low_x, x0);
      low_y = fmin (low_y, y0);
    }
  if (!(scale > 0) || !isfinite (low_x))
    return FALSE;
  grid->step_m = 0;
  for (double decade = 0.1; !(grid->step_m > 0); decade *= 10)
    for (gsize i = 0; i < G_N_ELEMENTS (steps) && !(grid->step_m > 0); i++)
      if (steps[i] * decade * 1e3 / scale >= LEAST_SQUARE_MM)
        grid->step_m = steps[i] * decade;
  grid->x0_m = floor (low_x / grid->step_m) * grid->step_m;
  grid->y0_m = floor (low_y / grid->step_m) * grid->step_m;
  return TRUE;
}

/* A .. Z, AA, AB, ... */
static char *
letters (guint index)
{
  g_autofree char *before = index >= 26 ? letters (index / 26 - 1) : g_strdup ("");

  return g_strdup_printf ("%s%c", before, 'A' + (int) (index % 26));
}

char *
ut_page_grid_ref (const UtPageGrid *grid, double x_m, double y_m)
{
  double column = floor ((x_m - grid->x0_m) / grid->step_m + 1e-9), row = floor ((y_m - grid->y0_m) / grid->step_m + 1e-9);

  if (!(column >= 0 && row >= 0 && column < 1e4 && row < 1e4))
    return g_strdup ("");
  g_autofree char *letter = letters ((guint) column);
  return g_strdup_printf ("%s%.0f", letter, row + 1);
}

/* Ticks and names of the squares along the lower and left edge of a frame. */
static void
draw_grid_refs (cairo_t *cr, const UtPageGrid *grid, const UtPageDrawing *drawing, double scale)
{
  const UtBox *frame = &drawing->frame_mm;
  double step_mm = grid->step_m * 1e3 / scale, x_mm = drawing->origin_x_mm + grid->x0_m * 1e3 / scale, y_mm = drawing->origin_y_mm - grid->y0_m * 1e3 / scale, size = 1.9;

  cairo_set_source_rgb (cr, 0, 0, 0);
  cairo_set_line_width (cr, 0.15);
  for (guint i = 0; x_mm + i * step_mm < frame->x + frame->width; i++)
    {
      g_autofree char *name = letters (i);
      double at = x_mm + i * step_mm, middle = at + step_mm / 2;

      if (at > frame->x)
        {
          cairo_move_to (cr, at, frame->y + frame->height);
          cairo_line_to (cr, at, frame->y + frame->height - 2);
          cairo_stroke (cr);
        }
      if (middle > frame->x + 2 && middle < frame->x + frame->width - 2)
        ut_text_draw (cr, name, middle - ut_text_width (name, size) / 2, frame->y + frame->height - 2.6, size, &black, NULL);
    }
  for (guint i = 0; y_mm - i * step_mm > frame->y; i++)
    {
      g_autofree char *name = g_strdup_printf ("%u", i + 1);
      double at = y_mm - i * step_mm, middle = at - step_mm / 2;

      if (at < frame->y + frame->height)
        {
          cairo_move_to (cr, frame->x, at);
          cairo_line_to (cr, frame->x + 2, at);
          cairo_stroke (cr);
        }
      if (middle > frame->y + CAPTION_MM && middle < frame->y + frame->height - 4)
        ut_text_draw (cr, name, frame->x + 0.6, middle - 0.65 * size, size, &black, NULL);
    }
}

/* A round length of about a quarter of the width, with its quarters marked. */
static void
draw_scale_bar (cairo_t *cr, double x, double y, double scale)
{
  double most_m = 45 * scale / 1e3, decade = pow (10, floor (log10 (most_m)));
  double length_m = most_m >= 5 * decade ? 5 * decade : most_m >= 2 * decade ? 2 * decade : decade;
  double length_mm = length_m * 1e3 / scale;
  g_autofree char *text = g_strdup_printf ("%g m", length_m);

  cairo_set_source_rgb (cr, 0, 0, 0);
  cairo_set_line_width (cr, 0.2);
  cairo_rectangle (cr, x, y, length_mm, 1.2);
  cairo_stroke (cr);
  for (int i = 0; i < 4; i += 2)
    {
      cairo_rectangle (cr, x + i * length_mm / 4, y, length_mm / 4, 1.2);
      cairo_fill (cr);
    }
  ut_text_draw (cr, "0", x - 0.6, y + 1.4, 2.2, &black, NULL);
  ut_text_draw (cr, text, x + length_mm - 1.5, y + 1.4, 2.2, &black, NULL);
}

static void
draw_north (cairo_t *cr, double x, double y, double north_deg)
{
  cairo_save (cr);
  cairo_translate (cr, x, y);
  cairo_rotate (cr, north_deg * G_PI / 180);
  cairo_set_source_rgb (cr, 0, 0, 0);
  cairo_set_line_width (cr, 0.25);
  cairo_move_to (cr, 0, -4);
  cairo_line_to (cr, 1.4, 2.4);
  cairo_line_to (cr, 0, 1.2);
  cairo_close_path (cr);
  cairo_fill (cr);
  cairo_move_to (cr, 0, -4);
  cairo_line_to (cr, -1.4, 2.4);
  cairo_line_to (cr, 0, 1.2);
  cairo_stroke (cr);
  cairo_restore (cr);
  ut_text_draw (cr, "N", x + 2, y - 4.4, 2.8, &black, NULL);
}

static void
draw_storey (cairo_t *cr, const UtStudy *study, const UtPageDrawing *drawing, double scale, const UtPageGrid *grid)
{
  const UtPlan *plan = study->gains->plan;
  const UtStorey *storey = ut_plan_storey (plan, drawing->storey);
  UtPaintOptions options = {
    .storey = drawing->storey,
    .units_per_m = 1e3 / scale,
    .origin_x = drawing->origin_x_mm,
    .origin_y = drawing->origin_y_mm,
    .mark = MARK_MM,
    .palette = &ut_palette_paper,
    .walls = TRUE,
    .links = TRUE,
    .radios = TRUE,
    .labels = TRUE,
  };
  g_autofree char *caption = g_strdup_printf ("%s (floor at %g m)", storey->name, storey->elevation_m);
  UtTextStyle style = { .size = 2.6, .bold = TRUE, .width = drawing->frame_mm.width - 4 };

  cairo_save (cr);
  cairo_rectangle (cr, drawing->frame_mm.x, drawing->frame_mm.y, drawing->frame_mm.width, drawing->frame_mm.height);
  cairo_clip_preserve (cr);
  cairo_set_line_width (cr, 0.3);
  cairo_set_source_rgb (cr, 0, 0, 0);
  cairo_stroke (cr);
  ut_paint_plan (cr, plan, study, &options);
  draw_grid_refs (cr, grid, drawing, scale);
  ut_text_place (cr, caption, &style, drawing->frame_mm.x + 2, drawing->frame_mm.y + 1.2, &black, &ut_palette_paper.sheet);
  cairo_restore (cr);
}

void
ut_page_draw_drawings (cairo_t *cr, const UtStudy *study, const UtPageSetup *setup)
{
  g_autoptr (GArray) drawings = g_array_new (FALSE, FALSE, sizeof (UtPageDrawing));
  double scale = ut_page_drawings (study->gains->plan, setup, drawings);

  UtPageGrid grid;

  for (guint i = 0; i < drawings->len && ut_page_grid (study->gains->plan, setup, &grid); i++)
    draw_storey (cr, study, &g_array_index (drawings, UtPageDrawing, i), scale, &grid);
}

/* Margin classes, then constructions, as many as fit; scale and north to the left. */
void
ut_page_draw_key (cairo_t *cr, const UtPlan *plan, const UtBox *box, double scale)
{
  static const UtMarginClass shown[] = { UT_MARGIN_FAR_SHORT, UT_MARGIN_SHORT, UT_MARGIN_TIGHT, UT_MARGIN_EASY };
  double line_mm = 3.5, x = box->x + 62, columns_mm = (box->width - 64) / 2;
  guint rows = (guint) (box->height / line_mm), n_shown = MIN (plan->constructions->len, rows);
  UtPaintOptions options = { .mark = MARK_MM, .palette = &ut_palette_paper };
  g_autofree char *text = scale > 0 ? g_strdup_printf ("Scale 1:%g", scale) : g_strdup ("Nothing to draw");

  ut_text_place (cr, text, &(UtTextStyle){ .size = 3.2, .bold = TRUE }, box->x, box->y, &black, NULL);
  if (scale > 0)
    draw_scale_bar (cr, box->x + 1, box->y + 6, scale);
  draw_north (cr, box->x + 53, box->y + 6, plan->site->north_deg);
  for (guint i = 0; i < G_N_ELEMENTS (shown) && i < rows; i++)
    {
      double dashes[4], width, y = box->y + i * line_mm + line_mm / 2;
      int n;

      ut_margin_line (shown[i], dashes, &n, &width);
      for (int k = 0; k < n; k++)
        dashes[k] *= MARK_MM;
      cairo_set_dash (cr, dashes, n, 0);
      cairo_set_line_width (cr, width * MARK_MM);
      cairo_set_source_rgb (cr, ut_palette_paper.margin[shown[i]].red, ut_palette_paper.margin[shown[i]].green, ut_palette_paper.margin[shown[i]].blue);
      cairo_move_to (cr, x, y);
      cairo_line_to (cr, x + 9, y);
      cairo_stroke (cr);
      cairo_set_dash (cr, NULL, 0, 0);
      ut_text_place (cr, ut_margin_words (shown[i]), &(UtTextStyle){ .size = 2.2, .width = columns_mm - 12 }, x + 10.5, y - 1.4, &black, NULL);
    }
  for (guint i = 0; i < n_shown; i++)
    {
      double y = box->y + i * line_mm + line_mm / 2;
      gboolean last = i + 1 == n_shown && n_shown < plan->constructions->len;
      g_autofree char *more = g_strdup_printf ("and %u more constructions", plan->constructions->len - i);

      if (!last)
        ut_walls_sample (cr, i, &options, x + columns_mm, y, 8);
      ut_text_place (cr,
                     last ? more : ut_plan_construction (plan, i)->name,
                     &(UtTextStyle){ .size = 2.2, .width = columns_mm - 11 },
                     x + columns_mm + 9.5,
                     y - 1.4,
                     &black,
                     NULL);
    }
}
