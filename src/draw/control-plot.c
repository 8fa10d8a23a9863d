#include "control-plot.h"

#include <math.h>

#include <glib/gi18n-lib.h>

#include "report.h"
#include "text.h"

/* Whole tens around what is shown. */
static void
range_of (const double *values, gsize n, double *low, double *high)
{
  *low = INFINITY;
  *high = -INFINITY;
  for (gsize i = 0; i < n; i++)
    if (isfinite (values[i]))
      {
        *low = fmin (*low, values[i]);
        *high = fmax (*high, values[i]);
      }
  if (!(*low <= *high))
    *low = *high = 0;
  *low = floor ((*low - 1) / 5) * 5;
  *high = ceil ((*high + 1) / 5) * 5;
}

void
ut_control_layout (const UtControl *control, double width, double height, double text_size, UtControlLayout *layout)
{
  double room = fmax (height - 5.2 * text_size, 20), low, high;

  *layout = (UtControlLayout){
    .left = 4.5 * text_size,
    .width = fmax (width - 10 * text_size, 10),
    .sinr_top = 1.6 * text_size,
    .sinr_height = 0.58 * room,
    .power_top = 1.6 * text_size + 0.58 * room + 1.6 * text_size,
    .power_height = 0.42 * room,
    .last = control->n_rows > 0 ? control->n_rows - 1 : 0,
  };
  range_of (control->sinr_db, (gsize) control->n_rows * control->links->len, &layout->sinr_low_db, &layout->sinr_high_db);
  range_of (control->target_db, control->links->len, &low, &high);
  layout->sinr_low_db = fmin (layout->sinr_low_db, low);
  layout->sinr_high_db = fmax (layout->sinr_high_db, high);
  range_of (control->power_dbm, (gsize) control->n_rows * control->senders->len, &layout->power_low_dbm, &layout->power_high_dbm);
}

double
ut_control_x (const UtControlLayout *layout, double round)
{
  return layout->left + (layout->last > 0 ? layout->width * round / layout->last : 0);
}

double
ut_control_sinr_y (const UtControlLayout *layout, double db)
{
  return layout->sinr_top + layout->sinr_height * (layout->sinr_high_db - db) / (layout->sinr_high_db - layout->sinr_low_db);
}

double
ut_control_power_y (const UtControlLayout *layout, double dbm)
{
  return layout->power_top + layout->power_height * (layout->power_high_dbm - dbm) / (layout->power_high_dbm - layout->power_low_dbm);
}

static void
set_colour (cairo_t *cr, const UtColour *colour, double alpha)
{
  cairo_set_source_rgba (cr, colour->red, colour->green, colour->blue, alpha);
}

static void
paint_scale (cairo_t *cr, const UtControlLayout *layout, gboolean power, double text_size, const UtPalette *palette)
{
  double low = power ? layout->power_low_dbm : layout->sinr_low_db, high = power ? layout->power_high_dbm : layout->sinr_high_db;
  double height = power ? layout->power_height : layout->sinr_height, step = 5, size = 0.85 * text_size;

  while (height / (high - low) * step < 1.5 * text_size)
    step += step < 10 ? 5 : 10;
  cairo_set_line_width (cr, text_size / 12);
  for (double value = ceil (low / step) * step; value <= high + 1e-9; value += step)
    {
      double y = power ? ut_control_power_y (layout, value) : ut_control_sinr_y (layout, value);
      g_autofree char *text = ut_report_figure (value, 0);

      set_colour (cr, &palette->grid, 1);
      cairo_move_to (cr, layout->left, y);
      cairo_line_to (cr, layout->left + layout->width, y);
      cairo_stroke (cr);
      ut_text_draw (cr, text, layout->left - ut_text_width (text, size) - text_size / 2, y - 0.65 * size, size, &palette->ink, NULL);
    }
  ut_text_draw (cr, power ? _ ("power, dBm") : _ ("SINR, dB (dashed: targets)"), layout->left, (power ? layout->power_top : layout->sinr_top) - 1.4 * text_size, text_size, &palette->ink, NULL);
}

static void
trace (cairo_t *cr, const UtControl *control, const UtControlLayout *layout, gboolean power, guint k)
{
  const double *values = power ? control->power_dbm : control->sinr_db;
  guint stride = power ? control->senders->len : control->links->len;

  for (guint row = 0; row < control->n_rows; row++)
    {
      double value = values[row * stride + k];

      if (isfinite (value))
        cairo_line_to (cr, ut_control_x (layout, row), power ? ut_control_power_y (layout, value) : ut_control_sinr_y (layout, value));
    }
}

static void
paint_target (cairo_t *cr, const UtControl *control, const UtControlLayout *layout, guint k, double text_size, const UtPalette *palette)
{
  double y = ut_control_sinr_y (layout, control->target_db[k]);

  set_colour (cr, &palette->faint_ink, 1);
  cairo_set_line_width (cr, text_size / 10);
  cairo_set_dash (cr, (double[]){ text_size / 2, text_size / 3 }, 2, 0);
  cairo_move_to (cr, layout->left, y);
  cairo_line_to (cr, layout->left + layout->width, y);
  cairo_stroke (cr);
  cairo_set_dash (cr, NULL, 0, 0);
}

/* Names of lines stand at their right ends, where there is room. */
static void
paint_names (cairo_t *cr, const UtControl *control, const UtControlLayout *layout, gboolean power, double text_size, const UtPalette *palette)
{
  guint n = power ? control->senders->len : control->links->len;
  double size = 0.85 * text_size, last_y = -INFINITY;
  g_autofree guint *order = g_new (guint, n + 1);

  for (guint k = 0; k < n; k++)
    {
      guint at = k;
      const double *end = power ? &control->power_dbm[(gsize) layout->last * n] : &control->sinr_db[(gsize) layout->last * n];

      for (; at > 0 && end[order[at - 1]] < end[k]; at--)
        order[at] = order[at - 1];
      order[at] = k;
    }
  for (guint i = 0; i < n; i++)
    {
      double value = power ? control->power_dbm[(gsize) layout->last * n + order[i]] : control->sinr_db[(gsize) layout->last * n + order[i]];
      double y = power ? ut_control_power_y (layout, value) : ut_control_sinr_y (layout, value);

      if (!isfinite (y) || y < last_y + 1.1 * size)
        continue;
      last_y = y;
      ut_text_draw (cr, power ? ut_control_sender_id (control, order[i]) : ut_control_link_id (control, order[i]), layout->left + layout->width + 0.4 * text_size, y - 0.65 * size, size,
                    &palette->ink, NULL);
    }
}

void
ut_control_paint (cairo_t *cr, const UtControl *control, int link, int round, double width, double height, double text_size, const UtPalette *palette)
{
  UtControlLayout layout;

  set_colour (cr, &palette->sheet, 1);
  cairo_paint (cr);
  ut_control_layout (control, width, height, text_size, &layout);
  paint_scale (cr, &layout, FALSE, text_size, palette);
  paint_scale (cr, &layout, TRUE, text_size, palette);
  for (guint k = 0; k < control->links->len; k++)
    if (link < 0 || (int) k == link)
      paint_target (cr, control, &layout, k, text_size, palette);
  cairo_set_line_join (cr, CAIRO_LINE_JOIN_ROUND);
  for (guint k = 0; k < control->links->len; k++)
    {
      double margin_db = control->sinr_db[(gsize) layout.last * control->links->len + k] - control->target_db[k];

      trace (cr, control, &layout, FALSE, k);
      set_colour (cr, &palette->margin[ut_margin_class (margin_db)], link < 0 || (int) k == link ? 1 : 0.3);
      cairo_set_line_width (cr, (int) k == link ? text_size / 4 : text_size / 8);
      cairo_stroke (cr);
    }
  for (guint k = 0; k < control->senders->len; k++)
    {
      trace (cr, control, &layout, TRUE, k);
      set_colour (cr, &palette->cell, 0.8);
      cairo_set_line_width (cr, text_size / 8);
      cairo_stroke (cr);
    }
  paint_names (cr, control, &layout, FALSE, text_size, palette);
  paint_names (cr, control, &layout, TRUE, text_size, palette);
  if (round >= 0)
    {
      set_colour (cr, &palette->ink, 0.6);
      cairo_set_line_width (cr, text_size / 10);
      cairo_move_to (cr, ut_control_x (&layout, round), layout.sinr_top);
      cairo_line_to (cr, ut_control_x (&layout, round), layout.power_top + layout.power_height);
      cairo_stroke (cr);
    }
  for (guint k = 0; k <= 4; k++)
    {
      double at = floor (layout.last * k / 4.0 + 0.5);
      g_autofree char *text = g_strdup_printf ("%.0f", at);

      ut_text_draw (cr, text, ut_control_x (&layout, at) - ut_text_width (text, 0.85 * text_size) / 2, layout.power_top + layout.power_height + 0.3 * text_size, 0.85 * text_size, &palette->ink, NULL);
    }
  ut_text_draw (cr, _ ("round"), layout.left + layout.width + 0.4 * text_size, layout.power_top + layout.power_height + 0.3 * text_size, 0.85 * text_size, &palette->ink, NULL);
}

char *
ut_control_csv (const UtControl *control)
{
  GString *csv = g_string_new ("round");

  for (guint k = 0; k < control->links->len; k++)
    g_string_append_printf (csv, ",sinr_db %s", ut_control_link_id (control, k));
  for (guint k = 0; k < control->senders->len; k++)
    g_string_append_printf (csv, ",power_dbm %s", ut_control_sender_id (control, k));
  g_string_append (csv, "\r\n");
  for (guint row = 0; row < control->n_rows; row++)
    {
      g_string_append_printf (csv, "%u", row);
      for (guint k = 0; k < control->links->len + control->senders->len; k++)
        {
          gboolean sinr = k < control->links->len;
          double value = sinr ? control->sinr_db[(gsize) row * control->links->len + k] : control->power_dbm[(gsize) row * control->senders->len + k - control->links->len];
          g_autofree char *figure = isfinite (value) ? ut_report_figure (value, 3) : g_strdup ("");

          g_string_append_printf (csv, ",%s", figure);
        }
      g_string_append (csv, "\r\n");
    }
  return g_string_free (csv, FALSE);
}
