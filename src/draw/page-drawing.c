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
draw_storey (cairo_t *cr, const UtStudy *study, const UtPageDrawing *drawing, double scale)
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
  ut_text_place (cr, caption, &style, drawing->frame_mm.x + 2, drawing->frame_mm.y + 1.2, &black, &ut_palette_paper.sheet);
  cairo_restore (cr);
}

void
ut_page_draw_drawings (cairo_t *cr, const UtStudy *study, const UtPageSetup *setup)
{
  g_autoptr (GArray) drawings = g_array_new (FALSE, FALSE, sizeof (UtPageDrawing));
  double scale = ut_page_drawings (study->gains->plan, setup, drawings);

  for (guint i = 0; i < drawings->len; i++)
    draw_storey (cr, study, &g_array_index (drawings, UtPageDrawing, i), scale);
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
