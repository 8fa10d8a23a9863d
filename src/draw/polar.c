#include "polar.h"

#include <math.h>

#include "antenna-cut.h"
#include "text.h"

#define N_POINTS 360
#define RING_DB 10.0

typedef struct
{
  cairo_t *cr;
  const UtPalette *palette;
  double x, y, radius; /* of the outermost ring */
  double text_size;
} Plot;

static void
set_colour (cairo_t *cr, const UtColour *colour)
{
  cairo_set_source_rgb (cr, colour->red, colour->green, colour->blue);
}

/* Rings 10 dB apart under the peak, and the axes. */
static void
paint_rings (const Plot *plot, double peak_dbi)
{
  cairo_t *cr = plot->cr;

  set_colour (cr, &plot->palette->grid);
  cairo_set_line_width (cr, plot->radius / 60);
  for (double down_db = 0; down_db < UT_POLAR_SPAN_DB; down_db += RING_DB)
    {
      cairo_new_sub_path (cr);
      cairo_arc (cr, plot->x, plot->y, plot->radius * (1 - down_db / UT_POLAR_SPAN_DB), 0, 2 * M_PI);
    }
  cairo_move_to (cr, plot->x - plot->radius, plot->y);
  cairo_line_to (cr, plot->x + plot->radius, plot->y);
  cairo_move_to (cr, plot->x, plot->y - plot->radius);
  cairo_line_to (cr, plot->x, plot->y + plot->radius);
  cairo_stroke (cr);

  g_autofree char *peak = g_strdup_printf ("%.1f dBi", peak_dbi);
  g_autofree char *inner = g_strdup_printf ("%.1f", peak_dbi - 2 * RING_DB);
  ut_text_draw (cr, peak, plot->x + 0.05 * plot->radius, plot->y - plot->radius, plot->text_size, &plot->palette->faint_ink, NULL);
  ut_text_draw (cr, inner, plot->x + 0.05 * plot->radius, plot->y - plot->radius / 2, plot->text_size, &plot->palette->faint_ink, NULL);
}

/* One cut; `start` is where its first point lies, clockwise from straight up, `step` the sense in which the others follow. */
static void
paint_cut (const Plot *plot, const double *dbi, double peak_dbi, double start_rad, double step)
{
  cairo_t *cr = plot->cr;

  for (int k = 0; k < N_POINTS; k++)
    {
      double angle = start_rad + step * 2 * M_PI * k / N_POINTS;
      double r = plot->radius * fmax (1 - (peak_dbi - dbi[k]) / UT_POLAR_SPAN_DB, 0);

      cairo_line_to (cr, plot->x + r * sin (angle), plot->y - r * cos (angle));
    }
  cairo_close_path (cr);
  set_colour (cr, &plot->palette->margin[UT_MARGIN_EASY]);
  cairo_set_line_width (cr, plot->radius / 30);
  cairo_stroke (cr);
}

void
ut_polar_paint (cairo_t *cr, const UtPlan *plan, const char *antenna, double azimuth_deg, double downtilt_deg, double width, double height, const UtPalette *palette)
{
  double horizontal[N_POINTS], vertical[N_POINTS], peak_dbi = -INFINITY;
  double text_size = height / 12, side = fmin (width / 2, height - 1.6 * text_size);
  int index = ut_plan_find_antenna (plan, antenna);
  gboolean turns = index < 0 || ut_plan_antenna (plan, (guint) index)->pattern != UT_ANTENNA_DIPOLE;

  set_colour (cr, &palette->sheet);
  cairo_paint (cr);
  ut_antenna_cut_dbi (plan, antenna, FALSE, N_POINTS, horizontal);
  ut_antenna_cut_dbi (plan, antenna, TRUE, N_POINTS, vertical);
  for (int k = 0; k < N_POINTS; k++)
    peak_dbi = fmax (peak_dbi, fmax (horizontal[k], vertical[k]));
  for (int k = 0; k < 2; k++)
    {
      Plot plot = { cr, palette, width * (0.25 + 0.5 * k), side / 2, 0.46 * side, text_size };
      const char *title = k == 0 ? "horizontal" : "vertical";

      paint_rings (&plot, peak_dbi);
      /* From above azimuths run clockwise from +y; from the side boresight lies to the right, up is anticlockwise, downtilt clockwise. */
      if (k == 0)
        paint_cut (&plot, horizontal, peak_dbi, turns ? azimuth_deg * M_PI / 180 : 0, 1);
      else
        paint_cut (&plot, vertical, peak_dbi, M_PI / 2 + (turns ? downtilt_deg * M_PI / 180 : 0), -1);
      ut_text_draw (cr, title, plot.x - ut_text_width (title, text_size) / 2, side + 0.2 * text_size, text_size, &palette->ink, NULL);
    }
}
