#include "plan-painter.h"

#include <math.h>

#include "labels.h"
#include "picture.h"
#include "report.h"
#include "text.h"
#include "walls.h"

static void
set_colour (cairo_t *cr, const UtColour *colour)
{
  cairo_set_source_rgb (cr, colour->red, colour->green, colour->blue);
}

static void
to_target (const UtPaintOptions *options, double x_m, double y_m, double *x, double *y)
{
  *x = options->origin_x + x_m * options->units_per_m;
  *y = options->origin_y - y_m * options->units_per_m;
}

static gboolean
is_on_storey (const UtPlan *plan, const UtRadio *radio, guint storey)
{
  return g_str_equal (radio->storey, ut_plan_storey (plan, storey)->id);
}

/* ---- extent ---- */

typedef struct { double x0, y0, x1, y1; gboolean any; } Extent;

static void
include_point (Extent *extent, double x, double y)
{
  extent->x0 = extent->any ? MIN (extent->x0, x) : x;
  extent->y0 = extent->any ? MIN (extent->y0, y) : y;
  extent->x1 = extent->any ? MAX (extent->x1, x) : x;
  extent->y1 = extent->any ? MAX (extent->y1, y) : y;
  extent->any = TRUE;
}

static void
include_radios (Extent *extent, const UtPlan *plan, const GPtrArray *radios, guint storey)
{
  for (guint i = 0; i < radios->len; i++)
    {
      const UtRadio *radio = radios->pdata[i]; /* cells and terminals begin with it */
      if (is_on_storey (plan, radio, storey))
        include_point (extent, radio->x_m, radio->y_m);
    }
}

/* The corners of the backdrop, which is turned about its lower left one, clockwise. */
static void
backdrop_corner (const UtBackdrop *backdrop, int corner, double *x_m, double *y_m)
{
  double turn = backdrop->turn_deg * G_PI / 180;
  double x = corner % 2 ? backdrop->width_m : 0, y = corner / 2 ? backdrop->height_m : 0;

  *x_m = backdrop->x_m + cos (turn) * x + sin (turn) * y;
  *y_m = backdrop->y_m - sin (turn) * x + cos (turn) * y;
}

gboolean
ut_plan_extent (const UtPlan *plan, guint storey_index, double *x0_m, double *y0_m, double *x1_m, double *y1_m)
{
  Extent extent = { 0 };
  const UtStorey *storey;

  if (storey_index >= plan->storeys->len)
    return FALSE;
  storey = ut_plan_storey (plan, storey_index);
  for (guint w = 0; w < storey->walls->len; w++)
    {
      const UtWall *wall = storey->walls->pdata[w];
      for (guint i = 0; i < wall->points->len; i++)
        include_point (&extent, g_array_index (wall->points, UtPoint, i).x_m, g_array_index (wall->points, UtPoint, i).y_m);
    }
  include_radios (&extent, plan, plan->cells, storey_index);
  include_radios (&extent, plan, plan->terminals, storey_index);
  for (int corner = 0; corner < 4 && storey->backdrop != NULL; corner++)
    {
      double x, y;
      backdrop_corner (storey->backdrop, corner, &x, &y);
      include_point (&extent, x, y);
    }
  *x0_m = extent.x0;
  *y0_m = extent.y0;
  *x1_m = extent.x1;
  *y1_m = extent.y1;
  return extent.any;
}

/* ---- what does not move ---- */

static void
paint_grid (cairo_t *cr, const UtPaintOptions *options)
{
  double x0, y0, x1, y1, step_m = 1;

  cairo_clip_extents (cr, &x0, &y0, &x1, &y1);
  while (step_m * options->units_per_m < 1.5 * options->mark)
    step_m *= step_m * options->units_per_m * 2 < 1.5 * options->mark ? 10 : 5;
  set_colour (cr, &options->palette->grid);
  cairo_set_line_width (cr, 0.08 * options->mark);
  for (double x = ceil ((x0 - options->origin_x) / options->units_per_m / step_m) * step_m;; x += step_m)
    {
      double at = options->origin_x + x * options->units_per_m;
      if (!(at <= x1))
        break;
      cairo_move_to (cr, at, y0);
      cairo_line_to (cr, at, y1);
    }
  for (double y = ceil ((options->origin_y - y1) / options->units_per_m / step_m) * step_m;; y += step_m)
    {
      double at = options->origin_y - y * options->units_per_m;
      if (!(at >= y0))
        break;
      cairo_move_to (cr, x0, at);
      cairo_line_to (cr, x1, at);
    }
  cairo_stroke (cr);
}

static void
paint_backdrop (cairo_t *cr, const UtBackdrop *backdrop, const UtPaintOptions *options)
{
  double x, y, width_x = backdrop->width_m * options->units_per_m, width_y = 0;

  /* On paper, where a unit is a millimetre and not a pixel, the whole picture. */
  cairo_user_to_device_distance (cr, &width_x, &width_y);
  cairo_surface_t *picture = ut_picture_surface (backdrop->data, options->plates ? hypot (width_x, width_y) : INFINITY);

  if (picture == NULL)
    return;
  to_target (options, backdrop->x_m, backdrop->y_m, &x, &y);
  cairo_save (cr);
  cairo_translate (cr, x, y);
  cairo_rotate (cr, backdrop->turn_deg * G_PI / 180);
  cairo_scale (cr,
               backdrop->width_m * options->units_per_m / cairo_image_surface_get_width (picture),
               backdrop->height_m * options->units_per_m / cairo_image_surface_get_height (picture));
  cairo_set_source_surface (cr, picture, 0, -cairo_image_surface_get_height (picture));
  cairo_paint_with_alpha (cr, backdrop->opacity);
  cairo_restore (cr);
  cairo_surface_destroy (picture);
}

/* ---- links ---- */

static void
set_link_line (cairo_t *cr, UtMarginClass margin, const UtPaintOptions *options)
{
  double dashes[4], width;
  int n;

  ut_margin_line (margin, dashes, &n, &width);
  for (int i = 0; i < n; i++)
    dashes[i] *= options->mark;
  cairo_set_dash (cr, dashes, n, 0);
  cairo_set_line_width (cr, width * options->mark);
  cairo_set_line_cap (cr, CAIRO_LINE_CAP_BUTT);
  set_colour (cr, &options->palette->margin[margin]);
}

/* The ends of a link as drawn: from the radio on this storey; a partner on another storey is a stub straight up. */
static gboolean
link_ends (const UtPlan *plan, const UtLinkAnswer *link, const UtPaintOptions *options, double at[4], const char **elsewhere)
{
  const UtRadio *terminal = &ut_plan_terminal (plan, link->terminal)->radio;
  const UtRadio *cell = link->cell < 0 ? NULL : &ut_plan_cell (plan, (guint) link->cell)->radio;
  gboolean terminal_here = is_on_storey (plan, terminal, options->storey), cell_here = cell != NULL && is_on_storey (plan, cell, options->storey);
  const UtRadio *other;

  *elsewhere = NULL;
  if (cell == NULL || !terminal_here)
    return FALSE; /* drawn on the terminal's storey */
  to_target (options, terminal->x_m, terminal->y_m, &at[0], &at[1]);
  to_target (options, cell->x_m, cell->y_m, &at[2], &at[3]);
  if (cell_here)
    return TRUE;
  other = cell;
  *elsewhere = ut_plan_storey (plan, (guint) ut_plan_find_storey (plan, other->storey))->name;
  at[2] = at[0] + 1.6 * options->mark;
  at[3] = at[1] - 1.6 * options->mark;
  return TRUE;
}

static void
paint_links (cairo_t *cr, const UtPlan *plan, const UtStudy *study, const UtPaintOptions *options)
{
  if (options->plates)
    cairo_set_antialias (cr, CAIRO_ANTIALIAS_FAST);
  for (guint i = 0; i < study->links->len; i++)
    {
      const UtLinkAnswer *link = ut_study_link (study, i);
      const char *elsewhere;
      double at[4];

      if (!link_ends (plan, link, options, at, &elsewhere))
        continue;
      set_link_line (cr, ut_margin_class (link->margin_db), options);
      cairo_move_to (cr, at[0], at[1]);
      cairo_line_to (cr, at[2], at[3]);
      cairo_stroke (cr);
    }
  cairo_set_dash (cr, NULL, 0, 0);
  cairo_set_antialias (cr, CAIRO_ANTIALIAS_DEFAULT);
}

/* ---- radios ---- */

/* A wedge along boresight, as wide as the beam, only where the antenna has one. */
static void
paint_wedge (cairo_t *cr, const UtPlan *plan, const UtRadio *radio, double x, double y, const UtPaintOptions *options)
{
  int index = ut_plan_find_antenna (plan, radio->antenna);
  const UtAntenna *antenna = index < 0 ? NULL : ut_plan_antenna (plan, (guint) index);
  double boresight, half;

  if (antenna == NULL || antenna->pattern == UT_ANTENNA_ISOTROPIC)
    return;
  /* Azimuth runs clockwise from up; cairo's angles clockwise from the right. */
  boresight = (radio->azimuth_deg - 90) * G_PI / 180;
  half = MIN (antenna->beamwidth_h_deg / 2, 180) * G_PI / 180;
  cairo_move_to (cr, x, y);
  cairo_arc (cr, x, y, 2 * options->mark, boresight - half, boresight + half);
  cairo_close_path (cr);
  cairo_set_source_rgba (cr, options->palette->cell.red, options->palette->cell.green, options->palette->cell.blue, 0.25);
  cairo_fill (cr);
}

static void
paint_radios (cairo_t *cr, const UtPlan *plan, const UtPaintOptions *options)
{
  double mark = options->mark, x, y;

  for (guint i = 0; i < plan->cells->len; i++)
    {
      const UtRadio *radio = &ut_plan_cell (plan, i)->radio;

      if (!is_on_storey (plan, radio, options->storey))
        continue;
      to_target (options, radio->x_m, radio->y_m, &x, &y);
      paint_wedge (cr, plan, radio, x, y, options);
      cairo_rectangle (cr, x - mark / 2, y - mark / 2, mark, mark);
      set_colour (cr, radio->on ? &options->palette->cell : &options->palette->sheet);
      cairo_fill_preserve (cr);
      set_colour (cr, &options->palette->cell);
      cairo_set_line_width (cr, 0.14 * mark);
      cairo_stroke (cr);
    }
  for (guint i = 0; i < plan->terminals->len; i++)
    {
      const UtRadio *radio = &ut_plan_terminal (plan, i)->radio;

      if (!is_on_storey (plan, radio, options->storey))
        continue;
      to_target (options, radio->x_m, radio->y_m, &x, &y);
      paint_wedge (cr, plan, radio, x, y, options);
      cairo_arc (cr, x, y, 0.36 * mark, 0, 2 * G_PI);
      set_colour (cr, &options->palette->sheet);
      cairo_fill_preserve (cr);
      set_colour (cr, radio->on ? &options->palette->terminal : &options->palette->faint_ink);
      cairo_set_line_width (cr, 0.16 * mark);
      cairo_stroke (cr);
    }
}

/* ---- labels ---- */

static void
take_radios (GArray *boxes, const UtPlan *plan, const GPtrArray *radios, const UtPaintOptions *options)
{
  double mark = options->mark, x, y;

  for (guint i = 0; i < radios->len; i++)
    {
      const UtRadio *radio = radios->pdata[i];

      if (!is_on_storey (plan, radio, options->storey))
        continue;
      to_target (options, radio->x_m, radio->y_m, &x, &y);
      ut_boxes_take (boxes, x - mark / 2, y - mark / 2, mark, mark);
    }
}

void
ut_paint_take_radios (GArray *boxes, const UtPlan *plan, const UtPaintOptions *options)
{
  take_radios (boxes, plan, plan->cells, options);
  take_radios (boxes, plan, plan->terminals, options);
}

static void
label_radio (cairo_t *cr, GArray *boxes, const UtRadio *radio, gboolean bold, const UtPaintOptions *options)
{
  UtTextStyle style = { .size = UT_TEXT_OF_MARK * options->mark, .bold = bold, .plate = options->plates };
  double x, y, width, height, gap = 0.65 * options->mark;

  to_target (options, radio->x_m, radio->y_m, &x, &y);
  ut_text_extent (radio->id, &style, &width, &height);
  const double corners[][2] = {
    { x + gap, y - height - gap / 4 }, { x + gap, y - height / 2 },         { x + gap, y + gap / 4 },
    { x - gap - width, y - height - gap / 4 }, { x - gap - width, y - height / 2 }, { x - gap - width, y + gap / 4 },
    { x - width / 2, y - gap - height }, { x - width / 2, y + gap },
    { x + 2 * gap, y - height - gap }, { x - 2 * gap - width, y - height - gap }, { x + 2 * gap, y + gap }, { x - 2 * gap - width, y + gap },
  };
  if (ut_boxes_place (boxes, corners, G_N_ELEMENTS (corners), width, height, &x, &y))
    ut_text_place (cr, radio->id, &style, x, y, &options->palette->ink, &options->palette->sheet);
}

static void
label_radios (cairo_t *cr, GArray *boxes, const UtPlan *plan, const UtPaintOptions *options)
{
  for (guint i = 0; i < plan->cells->len; i++)
    if (is_on_storey (plan, &ut_plan_cell (plan, i)->radio, options->storey))
      label_radio (cr, boxes, &ut_plan_cell (plan, i)->radio, TRUE, options);
  for (guint i = 0; i < plan->terminals->len; i++)
    if (is_on_storey (plan, &ut_plan_terminal (plan, i)->radio, options->storey))
      label_radio (cr, boxes, &ut_plan_terminal (plan, i)->radio, FALSE, options);
}

/* The margin beside a link, with its sign; where the cell is on another storey, that storey's name too. */
static char *
link_text (const UtLinkAnswer *link, const char *elsewhere, gboolean reserves)
{
  g_autofree char *figure = ut_report_figure (link->margin_db, 1);
  g_autofree char *sign = figure[0] == '-' ? g_strconcat ("−", figure + 1, NULL) : g_strconcat ("+", figure, NULL);

  g_autofree char *reserve = ut_report_figure (link->reserve_db, 1);
  g_autofree char *both = reserves && isfinite (link->reserve_db) ? g_strdup_printf ("%s (%s)", sign, reserve) : g_strdup (sign);

  return elsewhere != NULL ? g_strdup_printf ("%s, %s", both, elsewhere) : g_steal_pointer (&both);
}

static void
label_links (cairo_t *cr, GArray *boxes, const UtPlan *plan, const UtStudy *study, const UtPaintOptions *options)
{
  UtTextStyle style = { .size = UT_TEXT_OF_MARK * options->mark * 0.9, .plate = options->plates };

  for (guint i = 0; i < study->links->len; i++)
    {
      static const double parts[] = { 0.4, 0.3, 0.5, 0.22, 0.6, 0.7 };
      const UtLinkAnswer *link = ut_study_link (study, i);
      const char *elsewhere;
      double at[4], corners[2 * G_N_ELEMENTS (parts)][2], width, height, x, y;

      if (!link_ends (plan, link, options, at, &elsewhere) || isnan (link->margin_db))
        continue;
      g_autofree char *text = link_text (link, elsewhere, options->reserves);
      ut_text_extent (text, &style, &width, &height);
      for (guint k = 0; k < G_N_ELEMENTS (parts); k++)
        {
          double on_x = at[0] + parts[k] * (at[2] - at[0]), on_y = at[1] + parts[k] * (at[3] - at[1]);

          corners[2 * k][0] = on_x + 0.3 * options->mark;
          corners[2 * k][1] = on_y - height;
          corners[2 * k + 1][0] = on_x - width - 0.3 * options->mark;
          corners[2 * k + 1][1] = on_y - height / 2;
        }
      if (ut_boxes_place (boxes, (const double (*)[2]) corners, G_N_ELEMENTS (corners), width, height, &x, &y))
        ut_text_place (cr, text, &style, x, y, &options->palette->ink, &options->palette->sheet);
    }
}

void
ut_paint_plan (cairo_t *cr, const UtPlan *plan, const UtStudy *study, const UtPaintOptions *options)
{
  if (options->storey >= plan->storeys->len)
    return;
  cairo_save (cr);
  cairo_new_path (cr);
  if (options->walls && ut_plan_storey (plan, options->storey)->backdrop != NULL)
    paint_backdrop (cr, ut_plan_storey (plan, options->storey)->backdrop, options);
  if (options->grid)
    paint_grid (cr, options);
  if (options->walls)
    ut_walls_paint (cr, plan, options);
  if (options->links && study != NULL)
    paint_links (cr, plan, study, options);
  if (options->radios)
    paint_radios (cr, plan, options);
  if (options->labels)
    {
      g_autoptr (GArray) boxes = options->boxes != NULL ? g_array_ref (options->boxes) : ut_boxes_new ();

      if (options->boxes == NULL)
        ut_paint_take_radios (boxes, plan, options);
      label_radios (cr, boxes, plan, options);
      if (options->links && study != NULL)
        label_links (cr, boxes, plan, study, options);
    }
  cairo_restore (cr);
}
