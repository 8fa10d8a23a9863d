#include "angle-plot.h"

#include <math.h>

#include "construction-loss.h"
#include "text.h"

#define N_ANGLES 91
#define TEXT_SIZE 11.0

typedef struct
{
  cairo_t *cr;
  double left, top, width, height; /* of the frame */
  double most_db;                  /* at its top */
} Frame;

static void
set_colour (cairo_t *cr, const UtColour *colour, double alpha)
{
  cairo_set_source_rgba (cr, colour->red, colour->green, colour->blue, alpha);
}

static double
x_of (const Frame *frame, double deg)
{
  return frame->left + frame->width * deg / 90;
}

static double
y_of (const Frame *frame, double db)
{
  return frame->top + frame->height * (1 - db / frame->most_db);
}

/* A round figure not below the value: 1, 2 or 5 times a power of ten. */
static double
round_up (double value)
{
  double power = pow (10, floor (log10 (fmax (value, 1e-3))));

  return value <= power ? power : value <= 2 * power ? 2 * power : value <= 5 * power ? 5 * power : 10 * power;
}

static void
paint_axes (const Frame *frame, const UtPalette *palette)
{
  cairo_t *cr = frame->cr;

  cairo_set_line_width (cr, 1);
  for (int deg = 0; deg <= 90; deg += 30)
    {
      g_autofree char *text = g_strdup_printf ("%d°", deg);

      set_colour (cr, &palette->grid, 1);
      cairo_move_to (cr, x_of (frame, deg), frame->top);
      cairo_line_to (cr, x_of (frame, deg), frame->top + frame->height);
      cairo_stroke (cr);
      ut_text_draw (cr, text, x_of (frame, deg) - ut_text_width (text, TEXT_SIZE) / 2, frame->top + frame->height + 3, TEXT_SIZE, &palette->ink, NULL);
    }
  for (int k = 0; k <= 4; k++)
    {
      double db = frame->most_db * k / 4;
      g_autofree char *text = g_strdup_printf ("%g dB", db);

      set_colour (cr, &palette->grid, 1);
      cairo_move_to (cr, frame->left, y_of (frame, db));
      cairo_line_to (cr, frame->left + frame->width, y_of (frame, db));
      cairo_stroke (cr);
      ut_text_draw (cr, text, frame->left - ut_text_width (text, TEXT_SIZE) - 5, y_of (frame, db) - TEXT_SIZE / 2 - 2, TEXT_SIZE, &palette->ink, NULL);
    }
}

void
ut_angle_plot_paint (cairo_t *cr, const UtPlan *plan, const UtConstruction *construction, double width, double height, const UtPalette *palette)
{
  double deg[N_ANGLES], most_db = 1;
  UtConstructionLoss losses[N_ANGLES];
  Frame frame = { cr, 56, 8, fmax (width - 72, 10), fmax (height - 50, 10), 1 };
  const char *title = "loss against the angle from the normal";

  for (int i = 0; i < N_ANGLES; i++)
    deg[i] = i;
  ut_construction_losses (plan, construction, deg, N_ANGLES, losses);
  /* Grazing losses have no bound: the scale is that of 75 degrees. */
  for (int i = 0; i <= 75; i++)
    most_db = fmax (most_db, fmax (losses[i].exact_db, losses[i].most_db));
  frame.most_db = round_up (most_db);
  set_colour (cr, &palette->sheet, 1);
  cairo_paint (cr);
  paint_axes (&frame, palette);

  cairo_save (cr);
  cairo_rectangle (cr, frame.left, frame.top, frame.width, frame.height);
  cairo_clip (cr);
  for (int i = 0; i < N_ANGLES; i++)
    cairo_line_to (cr, x_of (&frame, deg[i]), y_of (&frame, losses[i].most_db));
  for (int i = N_ANGLES - 1; i >= 0; i--)
    cairo_line_to (cr, x_of (&frame, deg[i]), y_of (&frame, losses[i].least_db));
  cairo_close_path (cr);
  set_colour (cr, &palette->margin[UT_MARGIN_TIGHT], 0.35);
  cairo_fill (cr);
  for (int i = 0; i < N_ANGLES; i++)
    cairo_line_to (cr, x_of (&frame, deg[i]), y_of (&frame, losses[i].exact_db));
  set_colour (cr, &palette->margin[UT_MARGIN_EASY], 1);
  cairo_set_line_width (cr, 2);
  cairo_stroke (cr);
  cairo_restore (cr);
  ut_text_draw (cr, title, frame.left + (frame.width - ut_text_width (title, TEXT_SIZE)) / 2, height - TEXT_SIZE - 7, TEXT_SIZE, &palette->ink, NULL);
}
