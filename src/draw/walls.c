#include "walls.h"

#include <math.h>

typedef enum { LINE_DOUBLE, LINE_HATCHED, LINE_SOLID, LINE_DASHED, LINE_THIN, LINE_DOTTED, N_LINES } Line;

/* Constructions take the styles in turn. */
static Line
line_of (guint construction)
{
  return (Line) (construction % N_LINES);
}

static void
set_colour (cairo_t *cr, const UtColour *colour)
{
  cairo_set_source_rgb (cr, colour->red, colour->green, colour->blue);
}

/* Short strokes across a stretch, one every `step`. */
static void
add_hatches (cairo_t *cr, double x0, double y0, double x1, double y1, double step, double reach)
{
  double length = hypot (x1 - x0, y1 - y0), ux = (x1 - x0) / length, uy = (y1 - y0) / length;

  for (double at = step / 2; at < length; at += step)
    {
      double x = x0 + at * ux, y = y0 + at * uy;

      cairo_move_to (cr, x - reach * (ux - uy), y - reach * (uy + ux));
      cairo_line_to (cr, x + reach * (ux - uy), y + reach * (uy + ux));
    }
}

/* Strokes the path in the style; `stretches` (4 doubles each) for the hatches. */
static void
stroke_style (cairo_t *cr, Line line, const UtPaintOptions *options, const GArray *stretches)
{
  double mark = options->mark;

  cairo_set_dash (cr, NULL, 0, 0);
  cairo_set_line_cap (cr, CAIRO_LINE_CAP_BUTT);
  cairo_set_line_join (cr, CAIRO_LINE_JOIN_MITER);
  set_colour (cr, &options->palette->wall);
  switch (line)
    {
    case LINE_DOUBLE:
    case LINE_HATCHED:
      cairo_set_line_width (cr, 0.42 * mark);
      cairo_stroke_preserve (cr);
      cairo_set_line_width (cr, 0.22 * mark);
      set_colour (cr, &options->palette->sheet);
      cairo_stroke (cr);
      if (line == LINE_DOUBLE)
        break;
      set_colour (cr, &options->palette->wall);
      cairo_set_line_width (cr, 0.08 * mark);
      for (guint i = 0; i + 3 < stretches->len; i += 4)
        {
          const double *at = &g_array_index (stretches, double, i);
          add_hatches (cr, at[0], at[1], at[2], at[3], 0.55 * mark, 0.14 * mark);
        }
      cairo_stroke (cr);
      break;
    case LINE_SOLID:
      cairo_set_line_width (cr, 0.34 * mark);
      cairo_stroke (cr);
      break;
    case LINE_DASHED:
      cairo_set_line_width (cr, 0.26 * mark);
      cairo_set_dash (cr, (double[]){ 0.9 * mark, 0.35 * mark }, 2, 0);
      cairo_stroke (cr);
      break;
    case LINE_THIN:
      cairo_set_line_width (cr, 0.12 * mark);
      cairo_stroke (cr);
      break;
    case LINE_DOTTED:
      cairo_set_line_width (cr, 0.22 * mark);
      cairo_set_dash (cr, (double[]){ 0.25 * mark, 0.25 * mark }, 2, 0);
      cairo_stroke (cr);
      break;
    case N_LINES:
      break;
    }
  cairo_set_dash (cr, NULL, 0, 0);
}

static void
to_target (const UtPaintOptions *options, double x_m, double y_m, double *x, double *y)
{
  *x = options->origin_x + x_m * options->units_per_m;
  *y = options->origin_y - y_m * options->units_per_m;
}

/* Adds the stretch from `from` to `to` of a piece (0..1) to the path and the stretches. */
static void
add_stretch (cairo_t *cr, const UtPaintOptions *options, const UtPoint *ends, double from, double to, gboolean connected, GArray *stretches)
{
  double at[4];

  to_target (options, ends[0].x_m + from * (ends[1].x_m - ends[0].x_m), ends[0].y_m + from * (ends[1].y_m - ends[0].y_m), &at[0], &at[1]);
  to_target (options, ends[0].x_m + to * (ends[1].x_m - ends[0].x_m), ends[0].y_m + to * (ends[1].y_m - ends[0].y_m), &at[2], &at[3]);
  if (!connected)
    cairo_move_to (cr, at[0], at[1]);
  cairo_line_to (cr, at[2], at[3]);
  g_array_append_vals (stretches, at, 4);
}

/* The first opening that begins at or after along_m on the polyline, NULL: none.  Overlapping ones are drawn one after the other. */
static const UtOpening *
next_opening (const UtWall *wall, double along_m)
{
  const UtOpening *next = NULL;

  for (guint i = 0; i < wall->openings->len; i++)
    {
      const UtOpening *one = wall->openings->pdata[i];

      if (one->at_m + one->width_m > along_m && (next == NULL || one->at_m < next->at_m))
        next = one;
    }
  return next;
}

/* Adds a wall without its openings. */
static void
add_wall (cairo_t *cr, const UtPaintOptions *options, const UtWall *wall, GArray *stretches)
{
  double along_m = 0;
  gboolean connected = FALSE;

  for (guint i = 0; i + 1 < wall->points->len; i++)
    {
      const UtPoint *ends = &g_array_index (wall->points, UtPoint, i);
      double length_m = hypot (ends[1].x_m - ends[0].x_m, ends[1].y_m - ends[0].y_m), at_m = along_m;

      if (!(length_m > 0))
        continue;
      while (at_m < along_m + length_m)
        {
          const UtOpening *opening = next_opening (wall, at_m);
          double until_m = opening == NULL ? along_m + length_m : MIN (opening->at_m, along_m + length_m);

          if (until_m > at_m)
            {
              add_stretch (cr, options, ends, (at_m - along_m) / length_m, (until_m - along_m) / length_m, connected, stretches);
              connected = TRUE;
            }
          if (opening == NULL || opening->at_m >= along_m + length_m)
            break;
          connected = FALSE;
          at_m = MAX (at_m, opening->at_m + opening->width_m);
        }
      along_m += length_m;
    }
}

/* The point along_m along a polyline and the direction there, in target units. */
static void
point_along (const UtPaintOptions *options, const UtWall *wall, double along_m, double *x, double *y, double *ux, double *uy)
{
  for (guint i = 0; i + 1 < wall->points->len; i++)
    {
      const UtPoint *ends = &g_array_index (wall->points, UtPoint, i);
      double length_m = hypot (ends[1].x_m - ends[0].x_m, ends[1].y_m - ends[0].y_m);

      if (length_m > 0 && (along_m <= length_m || i + 2 == wall->points->len))
        {
          double part = MIN (along_m / length_m, 1);

          to_target (options, ends[0].x_m + part * (ends[1].x_m - ends[0].x_m), ends[0].y_m + part * (ends[1].y_m - ends[0].y_m), x, y);
          *ux = (ends[1].x_m - ends[0].x_m) / length_m;
          *uy = -(ends[1].y_m - ends[0].y_m) / length_m;
          return;
        }
      along_m -= length_m;
    }
}

/* Shut: a thin line across the gap.  Open: the leaf stands off the wall. Jambs on both sides. */
static void
paint_opening (cairo_t *cr, const UtPaintOptions *options, const UtWall *wall, const UtOpening *opening)
{
  double x0 = 0, y0 = 0, x1 = 0, y1 = 0, ux = 1, uy = 0, jamb = 0.3 * options->mark;

  point_along (options, wall, opening->at_m + opening->width_m, &x1, &y1, &ux, &uy);
  point_along (options, wall, opening->at_m, &x0, &y0, &ux, &uy);
  set_colour (cr, &options->palette->opening);
  cairo_set_line_width (cr, 0.1 * options->mark);
  for (int end = 0; end < 2; end++)
    {
      double x = end ? x1 : x0, y = end ? y1 : y0;

      cairo_move_to (cr, x - jamb * uy, y + jamb * ux);
      cairo_line_to (cr, x + jamb * uy, y - jamb * ux);
    }
  cairo_move_to (cr, x0, y0);
  if (opening->shut)
    cairo_line_to (cr, x1, y1);
  else
    {
      double length = hypot (x1 - x0, y1 - y0);
      cairo_line_to (cr, x0 + 0.5 * length * ux + 0.866 * length * uy, y0 + 0.5 * length * uy - 0.866 * length * ux);
    }
  cairo_stroke (cr);
}

void
ut_walls_paint (cairo_t *cr, const UtPlan *plan, const UtPaintOptions *options)
{
  const UtStorey *storey = ut_plan_storey (plan, options->storey);
  g_autoptr (GArray) stretches = g_array_new (FALSE, FALSE, sizeof (double));

  /* One stroke a construction: thin lines over thick ones. */
  for (guint c = 0; c < plan->constructions->len; c++)
    {
      g_array_set_size (stretches, 0);
      for (guint w = 0; w < storey->walls->len; w++)
        {
          const UtWall *wall = storey->walls->pdata[w];
          if (g_str_equal (wall->construction, ut_plan_construction (plan, c)->id))
            add_wall (cr, options, wall, stretches);
        }
      if (stretches->len > 0)
        stroke_style (cr, line_of (c), options, stretches);
    }
  for (guint w = 0; w < storey->walls->len; w++)
    {
      const UtWall *wall = storey->walls->pdata[w];
      for (guint i = 0; i < wall->openings->len; i++)
        paint_opening (cr, options, wall, wall->openings->pdata[i]);
    }
}

void
ut_walls_sample (cairo_t *cr, guint construction, const UtPaintOptions *options, double x, double y, double length)
{
  g_autoptr (GArray) stretch = g_array_new (FALSE, FALSE, sizeof (double));

  g_array_append_vals (stretch, ((double[]){ x, y, x + length, y }), 4);
  cairo_move_to (cr, x, y);
  cairo_line_to (cr, x + length, y);
  stroke_style (cr, line_of (construction), options, stretch);
}
