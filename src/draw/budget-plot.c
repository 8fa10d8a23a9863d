#include "budget-plot.h"

#include <math.h>

#include <glib/gi18n-lib.h>

#include "labels.h"
#include "report.h"
#include "text.h"

/* Interferers shown one by one; the rest is in the sum beside them. */
#define MOST_INTERFERERS 4
/* Of the width, the way's part. */
#define WAY_SHARE 0.42

static double
lowest_dbm (const UtBudget *budget)
{
  double low = INFINITY;

  for (int i = 0; i < UT_N_CASES; i++)
    {
      const UtBudgetCase *one = &budget->cases[i];

      low = isfinite (one->noise_dbm) ? fmin (low, one->noise_dbm) : low;
      low = isfinite (one->signal_dbm) ? fmin (low, one->signal_dbm) : low;
    }
  return low;
}

/* The way may rise above the power where antennas gain. */
static double
highest_dbm (const UtBudget *budget)
{
  double level = 0, high = -INFINITY;

  for (guint i = 0; i < budget->parts->len; i++)
    {
      level += g_array_index (budget->parts, UtBudgetPart, i).db;
      high = isfinite (level) ? fmax (high, level) : high;
    }
  for (int i = 0; i < UT_N_CASES; i++)
    {
      const UtBudgetCase *one = &budget->cases[i];

      high = isfinite (one->signal_dbm) ? fmax (high, one->signal_dbm) : high;
      high = isfinite (one->needed_dbm) ? fmax (high, one->needed_dbm) : high;
      high = isfinite (one->background_dbm) ? fmax (high, one->background_dbm) : high;
      high = one->interferers->len > 0 ? fmax (high, g_array_index (one->interferers, UtInterferer, 0).dbm) : high;
    }
  return high;
}

double
ut_budget_y (const UtBudgetLayout *layout, double dbm)
{
  return layout->top + layout->height * (layout->high_dbm - dbm) / (layout->high_dbm - layout->low_dbm);
}

static void
add_bar (UtBudgetLayout *layout, UtBudgetBarKind kind, int of_case, guint index, double from_dbm, double to_dbm, double x, double width)
{
  UtBudgetBar bar = { kind, of_case, index, from_dbm, to_dbm, x, 0, width, 0 };

  if (!isfinite (from_dbm) || !isfinite (to_dbm))
    return;
  bar.y = ut_budget_y (layout, fmax (from_dbm, to_dbm));
  bar.height = ut_budget_y (layout, fmin (from_dbm, to_dbm)) - bar.y;
  g_array_append_val (layout->bars, bar);
}

static void
lay_way (const UtBudget *budget, UtBudgetLayout *layout, double width)
{
  guint n = budget->parts->len + 1;
  double pitch = width / n, level = 0, bar = 0.7 * pitch;

  for (guint i = 0; i < budget->parts->len; i++)
    {
      const UtBudgetPart *part = &g_array_index (budget->parts, UtBudgetPart, i);
      double before = i == 0 ? layout->low_dbm : level;

      level += part->db;
      add_bar (layout, UT_BAR_STEP, -1, i, before, level, layout->left + i * pitch + 0.15 * pitch, bar);
    }
  add_bar (layout, UT_BAR_RECEIVED, -1, 0, layout->low_dbm, level, layout->left + (n - 1) * pitch + 0.15 * pitch, bar);
}

static void
lay_case (const UtBudget *budget, UtBudgetLayout *layout, int of_case, double x, double width)
{
  const UtBudgetCase *one = &budget->cases[of_case];
  guint n_others = MIN (one->interferers->len, MOST_INTERFERERS), n = n_others + 3;
  double pitch = width / (n + 0.6), bar = 0.76 * pitch;

  add_bar (layout, UT_BAR_SIGNAL, of_case, 0, layout->low_dbm, one->signal_dbm, x, bar);
  for (guint i = 0; i < n_others; i++)
    add_bar (layout, UT_BAR_INTERFERER, of_case, i, layout->low_dbm, g_array_index (one->interferers, UtInterferer, i).dbm, x + (i + 1) * pitch, bar);
  add_bar (layout, UT_BAR_NOISE, of_case, 0, layout->low_dbm, one->noise_dbm, x + (n_others + 1) * pitch, bar);
  add_bar (layout, UT_BAR_BACKGROUND, of_case, 0, layout->low_dbm, one->background_dbm, x + (n_others + 2) * pitch, bar);
  add_bar (layout, UT_BAR_NEEDED, of_case, 0, one->needed_dbm, one->needed_dbm, x, width - 0.6 * pitch - 0.24 * pitch);
}

void
ut_budget_layout (const UtBudget *budget, double width, double height, double text_size, UtBudgetLayout *layout)
{
  double low = lowest_dbm (budget), high = highest_dbm (budget), right, gap;

  *layout = (UtBudgetLayout){
    .left = 4.5 * text_size,
    .top = 1.8 * text_size,
    .width = fmax (width - 5.5 * text_size, 10),
    .height = fmax (height - 9.8 * text_size, 10),
    .low_dbm = isfinite (low) ? floor ((low - 4) / 10) * 10 : -100,
    .high_dbm = isfinite (high) ? ceil ((high + 2) / 10) * 10 : 0,
    .bars = g_array_new (FALSE, FALSE, sizeof (UtBudgetBar)),
  };
  lay_way (budget, layout, WAY_SHARE * layout->width);
  gap = 0.03 * layout->width;
  right = (layout->width * (1 - WAY_SHARE) - gap) / UT_N_CASES;
  for (int i = 0; i < UT_N_CASES; i++)
    lay_case (budget, layout, i, layout->left + WAY_SHARE * layout->width + gap + i * right, right);
}

void
ut_budget_layout_clear (UtBudgetLayout *layout)
{
  g_clear_pointer (&layout->bars, g_array_unref);
}

/* ---- painting ---- */

static void
set_colour (cairo_t *cr, const UtColour *colour, double alpha)
{
  cairo_set_source_rgba (cr, colour->red, colour->green, colour->blue, alpha);
}

static void
paint_scale (cairo_t *cr, const UtBudgetLayout *layout, double text_size, const UtPalette *palette)
{
  double step = layout->height / (layout->high_dbm - layout->low_dbm) * 10 < 1.6 * text_size ? 20 : 10;

  cairo_set_line_width (cr, text_size / 12);
  for (double dbm = layout->low_dbm; dbm <= layout->high_dbm + 0.5; dbm += step)
    {
      g_autofree char *text = ut_report_figure (dbm, 0);
      double y = ut_budget_y (layout, dbm);

      set_colour (cr, &palette->grid, 1);
      cairo_move_to (cr, layout->left, y);
      cairo_line_to (cr, layout->left + layout->width, y);
      cairo_stroke (cr);
      ut_text_draw (cr, text, layout->left - ut_text_width (text, text_size) - text_size / 2, y - 0.65 * text_size, text_size, &palette->ink, NULL);
    }
  ut_text_draw (cr, "dBm", 0.3 * text_size, 0.2 * text_size, text_size, &palette->ink, NULL);
}

/* A case is coloured by how it ends. */
static const UtColour *
colour_of (const UtBudget *budget, const UtBudgetBar *bar, const UtPalette *palette)
{
  switch (bar->kind)
    {
    case UT_BAR_STEP:
      return bar->index == 0 ? &palette->cell : &palette->faint_ink;
    case UT_BAR_RECEIVED:
      return &palette->margin[ut_margin_class (budget->cases[UT_CASE_PLANNED].margin_db)];
    case UT_BAR_SIGNAL:
      return &palette->margin[ut_margin_class (budget->cases[bar->of_case].margin_db)];
    case UT_BAR_INTERFERER:
    case UT_BAR_NOISE:
      return &palette->faint_ink;
    case UT_BAR_BACKGROUND:
    case UT_BAR_NEEDED:
      return &palette->ink;
    }
  return &palette->ink;
}

static char *
bar_text (const UtBudget *budget, const UtBudgetBar *bar)
{
  switch (bar->kind)
    {
    case UT_BAR_STEP:
      return ut_budget_part_text (&g_array_index (budget->parts, UtBudgetPart, bar->index));
    case UT_BAR_RECEIVED:
      return g_strdup (_ ("received"));
    case UT_BAR_SIGNAL:
      return g_strdup (budget->down ? budget->cell : budget->terminal);
    case UT_BAR_INTERFERER:
      return g_strdup (g_array_index (budget->cases[bar->of_case].interferers, UtInterferer, bar->index).id);
    case UT_BAR_NOISE:
      return g_strdup (_ ("noise"));
    case UT_BAR_BACKGROUND:
      return g_strdup (_ ("together"));
    case UT_BAR_NEEDED:
      break;
    }
  return g_strdup ("");
}

/* What a bar amounts to: a step its dB, any other its level. */
static char *
bar_figure (const UtBudget *budget, const UtBudgetBar *bar)
{
  double db = bar->kind == UT_BAR_STEP ? g_array_index (budget->parts, UtBudgetPart, bar->index).db : bar->to_dbm;
  g_autofree char *figure = ut_report_figure (db, 1);

  return g_strconcat (bar->kind == UT_BAR_STEP && bar->index > 0 && db > 0 ? "+" : "", figure, NULL);
}

/* Names stand upright where the bars are narrow. */
static void
paint_name (cairo_t *cr, const char *text, double x, double y, double width, double room, double text_size, const UtPalette *palette)
{
  if (ut_text_width (text, text_size) <= width * 1.25)
    {
      ut_text_draw (cr, text, x + width / 2 - ut_text_width (text, text_size) / 2, y, text_size, &palette->ink, NULL);
      return;
    }
  cairo_save (cr);
  cairo_translate (cr, x + width / 2 + 0.7 * text_size, y + 0.2 * text_size);
  cairo_rotate (cr, G_PI / 2);
  ut_text_place (cr, text, &(UtTextStyle){ .size = text_size, .width = room }, 0, 0, &palette->ink, NULL);
  cairo_restore (cr);
}

/* Level of the dashed line of a case, in the units of the target; NAN: there is none. */
static double
needed_y (const UtBudgetLayout *layout, int of_case)
{
  for (guint i = 0; i < layout->bars->len; i++)
    {
      const UtBudgetBar *bar = &g_array_index (layout->bars, UtBudgetBar, i);

      if (bar->kind == UT_BAR_NEEDED && bar->of_case == of_case)
        return bar->y;
    }
  return NAN;
}

/* In a wide bar, else above it, else above the dashed line, else nowhere: no figure lies on another, on a bar or on the line. */
static void
paint_figure (cairo_t *cr, const UtBudget *budget, const UtBudgetLayout *layout, const UtBudgetBar *bar, GArray *boxes, double text_size, const UtPalette *palette)
{
  g_autofree char *figure = bar_figure (budget, bar);
  double small = 0.85 * text_size, width = ut_text_width (figure, small), height = 1.25 * small, x = bar->x + bar->width / 2 - width / 2, line_y = needed_y (layout, bar->of_case);
  const double corners[2][2] = { { x, bar->y - height }, { x, (isnan (line_y) ? bar->y : line_y) - 1.2 * height } };
  double place_x, place_y;

  if (ut_boxes_place (boxes, corners, bar->kind == UT_BAR_SIGNAL || bar->kind == UT_BAR_BACKGROUND ? 2 : 1, width, height, &place_x, &place_y))
    ut_text_draw (cr, figure, place_x, place_y, small, &palette->ink, NULL);
  else if (bar->height > 1.6 * small && width < bar->width && bar->kind != UT_BAR_NOISE)
    ut_text_draw (cr, figure, x, bar->y + 0.2 * small, small, &palette->sheet, NULL);
}

static void
paint_bar (cairo_t *cr, const UtBudget *budget, const UtBudgetLayout *layout, const UtBudgetBar *bar, double text_size, const UtPalette *palette)
{
  g_autofree char *text = bar_text (budget, bar);
  double small = 0.85 * text_size, below = layout->top + layout->height + 0.3 * text_size;

  if (bar->kind == UT_BAR_NEEDED)
    {
      set_colour (cr, &palette->ink, 1);
      cairo_set_line_width (cr, text_size / 6);
      cairo_set_dash (cr, (double[]){ text_size / 2, text_size / 4 }, 2, 0);
      cairo_move_to (cr, bar->x - 0.2 * text_size, bar->y);
      cairo_line_to (cr, bar->x + bar->width, bar->y);
      cairo_stroke (cr);
      cairo_set_dash (cr, NULL, 0, 0);
      return;
    }
  set_colour (cr, colour_of (budget, bar, palette), bar->kind == UT_BAR_INTERFERER ? 0.8 : 1);
  cairo_rectangle (cr, bar->x, bar->y, bar->width, fmax (bar->height, text_size / 10));
  if (bar->kind == UT_BAR_NOISE)
    {
      cairo_set_line_width (cr, text_size / 10);
      cairo_stroke (cr);
    }
  else
    cairo_fill (cr);
  paint_name (cr, text, bar->x, below, bar->width, 4.6 * text_size, small, palette);
}

/* What counts most gets its figure first. */
static void
paint_figures (cairo_t *cr, const UtBudget *budget, const UtBudgetLayout *layout, double text_size, const UtPalette *palette)
{
  static const UtBudgetBarKind order[] = { UT_BAR_SIGNAL, UT_BAR_BACKGROUND, UT_BAR_RECEIVED, UT_BAR_STEP, UT_BAR_INTERFERER, UT_BAR_NOISE };
  g_autoptr (GArray) boxes = ut_boxes_new ();

  for (guint i = 0; i < layout->bars->len; i++)
    {
      const UtBudgetBar *bar = &g_array_index (layout->bars, UtBudgetBar, i);

      if (bar->kind == UT_BAR_NEEDED)
        ut_boxes_take (boxes, bar->x, bar->y - text_size / 10, bar->width, text_size / 5);
      else
        ut_boxes_take (boxes, bar->x, bar->y, bar->width, bar->height);
    }
  for (gsize k = 0; k < G_N_ELEMENTS (order); k++)
    for (guint i = 0; i < layout->bars->len; i++)
      if (g_array_index (layout->bars, UtBudgetBar, i).kind == order[k])
        paint_figure (cr, budget, layout, &g_array_index (layout->bars, UtBudgetBar, i), boxes, text_size, palette);
}

/* Above a case its name, below it how it ends. */
static void
paint_case (cairo_t *cr, const UtBudget *budget, const UtBudgetLayout *layout, int of_case, double x, double width, double text_size, const UtPalette *palette)
{
  const UtBudgetCase *one = &budget->cases[of_case];
  g_autofree char *sinr = ut_report_figure (one->sinr_db, 1), *margin = ut_report_figure (fabs (one->margin_db), 1);
  g_autofree char *outcome = g_strdup_printf (one->margin_db >= UT_MARGIN_MET_DB ? _ ("SINR %s dB\n%s dB to spare") : _ ("SINR %s dB\n%s dB short"), sinr, margin);
  UtTextStyle head = { .size = text_size, .bold = TRUE, .width = width }, foot = { .size = text_size, .bold = TRUE, .width = width, .wrap = TRUE };

  ut_text_place (cr, ut_budget_case_text ((UtBudgetCaseKind) of_case), &head, x, 0.1 * text_size, &palette->ink, NULL);
  ut_text_place (cr, outcome, &foot, x, layout->top + layout->height + 5.2 * text_size, &palette->margin[ut_margin_class (one->margin_db)], NULL);
}

void
ut_budget_paint (cairo_t *cr, const UtBudget *budget, double width, double height, double text_size, const UtPalette *palette)
{
  UtBudgetLayout layout;

  set_colour (cr, &palette->sheet, 1);
  cairo_paint (cr);
  ut_budget_layout (budget, width, height, text_size, &layout);
  paint_scale (cr, &layout, text_size, palette);
  for (guint i = 0; i < layout.bars->len; i++)
    paint_bar (cr, budget, &layout, &g_array_index (layout.bars, UtBudgetBar, i), text_size, palette);
  paint_figures (cr, budget, &layout, text_size, palette);
  double gap = 0.03 * layout.width, right = (layout.width * (1 - WAY_SHARE) - gap) / UT_N_CASES;
  for (int i = 0; i < UT_N_CASES; i++)
    paint_case (cr, budget, &layout, i, layout.left + WAY_SHARE * layout.width + gap + i * right, right - 0.5 * text_size, text_size, palette);
  g_autofree char *head = g_strdup_printf (_ ("from %s to %s, as planned"), budget->down ? budget->cell : budget->terminal, budget->down ? budget->terminal : budget->cell);
  ut_text_place (cr, head, &(UtTextStyle){ .size = text_size, .bold = TRUE, .width = WAY_SHARE * layout.width }, layout.left, 0.1 * text_size, &palette->ink, NULL);
  g_autofree char *foot = g_strdup (_ ("dashed: the level that the target asks for"));
  ut_text_place (cr, foot, &(UtTextStyle){ .size = 0.85 * text_size, .width = WAY_SHARE * layout.width }, layout.left, layout.top + layout.height + 5.3 * text_size, &palette->ink, NULL);
  ut_budget_layout_clear (&layout);
}

static void
append_figure (GString *csv, double value)
{
  g_autofree char *figure = isfinite (value) ? ut_report_figure (value, 3) : g_strdup ("");

  g_string_append_printf (csv, ",%s", figure);
}

char *
ut_budget_csv (const UtBudget *budget)
{
  GString *csv = g_string_new ("terminal,cell,part,db\r\n");

  for (guint i = 0; i < budget->parts->len; i++)
    {
      const UtBudgetPart *part = &g_array_index (budget->parts, UtBudgetPart, i);
      g_autofree char *text = ut_budget_part_text (part);
      g_auto (GStrv) quotes = g_strsplit (text, "\"", -1);
      g_autofree char *quoted = g_strjoinv ("\"\"", quotes);

      g_string_append_printf (csv, "%s,%s,\"%s\"", budget->terminal, budget->cell, quoted);
      append_figure (csv, part->db);
      g_string_append (csv, "\r\n");
    }
  g_string_append (csv, "\r\ncase,power_dbm,signal_dbm,interference_dbm,noise_dbm,sinr_db,target_db,margin_db\r\n");
  for (int i = 0; i < UT_N_CASES; i++)
    {
      const UtBudgetCase *one = &budget->cases[i];
      const double figures[] = { one->power_dbm, one->signal_dbm, one->interference_dbm, one->noise_dbm, one->sinr_db, one->target_db, one->margin_db };

      g_string_append (csv, ut_budget_case_text ((UtBudgetCaseKind) i));
      for (gsize k = 0; k < G_N_ELEMENTS (figures); k++)
        append_figure (csv, figures[k]);
      g_string_append (csv, "\r\n");
    }
  return g_string_free (csv, FALSE);
}
