#include "gain-matrix.h"

#include <math.h>
#include <stdlib.h>

#include <glib/gi18n-lib.h>

#include "report.h"
#include "text.h"

typedef struct
{
  guint terminal;
  double strongest_db;
} Row;

static int
compare_rows (const void *one, const void *other)
{
  const Row *a = one, *b = other;

  return a->strongest_db < b->strongest_db ? 1 : a->strongest_db > b->strongest_db ? -1 : (a->terminal > b->terminal) - (a->terminal < b->terminal);
}

static guint *
rows_of (const UtGains *gains, gboolean by_strength)
{
  g_autofree Row *rows = g_new (Row, gains->n_terminals + 1);
  guint *terminals = g_new (guint, gains->n_terminals + 1);

  for (guint t = 0; t < gains->n_terminals; t++)
    {
      rows[t] = (Row){ t, -INFINITY };
      for (guint c = 0; c < gains->n_cells; c++)
        rows[t].strongest_db = fmax (rows[t].strongest_db, gains->gain_db[ut_gains_at (gains, t, c)]);
    }
  if (by_strength)
    qsort (rows, gains->n_terminals, sizeof *rows, compare_rows);
  for (guint t = 0; t < gains->n_terminals; t++)
    terminals[t] = rows[t].terminal;
  return terminals;
}

void
ut_matrix_layout (const UtStudy *study, const UtMatrixOptions *options, double width, double height, double text_size, UtMatrixLayout *layout)
{
  const UtGains *gains = study->gains;

  *layout = (UtMatrixLayout){
    .left = 5 * text_size,
    .top = 3.2 * text_size,
    .n_cells = gains->n_cells,
    .n_terminals = gains->n_terminals,
    .terminals = rows_of (gains, options->by_strength),
  };
  layout->cell_width = layout->n_cells > 0 ? fmin (fmax (width - layout->left - text_size, 1) / layout->n_cells, 7 * text_size) : 0;
  layout->row_height = layout->n_terminals > 0 ? fmin (fmax (height - layout->top - 0.5 * text_size, 1) / layout->n_terminals, 2 * text_size) : 0;
}

void
ut_matrix_layout_clear (UtMatrixLayout *layout)
{
  g_clear_pointer (&layout->terminals, g_free);
}

gboolean
ut_matrix_at (const UtMatrixLayout *layout, double x, double y, guint *terminal, guint *cell)
{
  double column = (x - layout->left) / layout->cell_width, row = (y - layout->top) / layout->row_height;

  if (!(column >= 0) || !(row >= 0) || column >= layout->n_cells || row >= layout->n_terminals)
    return FALSE;
  *cell = (guint) column;
  *terminal = layout->terminals[(guint) row];
  return TRUE;
}

static int
serving_cell (const UtStudy *study, guint terminal)
{
  for (guint i = 0; i < study->links->len; i++)
    if (ut_study_link (study, i)->terminal == terminal)
      return ut_study_link (study, i)->cell;
  return -1;
}

/* The part of what sets the headroom that the pair has; uplink blame names terminals, which stand for their own cells' columns. */
static double
blame_of (const UtStudy *study, guint terminal, guint cell)
{
  double part = 0;

  for (guint i = 0; study->edge.blame != NULL && i < study->edge.blame->len; i++)
    {
      const UtBlame *blame = &g_array_index (study->edge.blame, UtBlame, i);
      gboolean down = study->question.direction == UT_DIRECTION_DOWN;

      if (down ? blame->terminal == terminal && blame->because_of == (int) cell
               : blame->because_of == (int) terminal && serving_cell (study, blame->terminal) == (int) cell)
        part += blame->part;
    }
  return part;
}

typedef struct
{
  double low, high;
} Range;

static Range
range_of (const UtStudy *study, const UtMatrixOptions *options)
{
  const UtGains *gains = study->gains;
  Range range = { INFINITY, -INFINITY };

  if (options->view == UT_MATRIX_BLAME)
    return (Range){ 0, 1 };
  for (guint i = 0; i < gains->n_cells * gains->n_terminals; i++)
    {
      range.low = fmin (range.low, gains->gain_db[i]);
      range.high = fmax (range.high, gains->gain_db[i]);
    }
  return range;
}

static double
value_of (const UtStudy *study, const UtMatrixOptions *options, guint terminal, guint cell)
{
  return options->view == UT_MATRIX_BLAME ? blame_of (study, terminal, cell) : study->gains->gain_db[ut_gains_at (study->gains, terminal, cell)];
}

static char *
figure_of (const UtMatrixOptions *options, double value)
{
  if (options->view == UT_MATRIX_BLAME)
    return value < 0.001 ? g_strdup ("") : g_strdup_printf ("%.0f %%", 100 * value);
  return ut_report_figure (-value, 1);
}

static void
set_colour (cairo_t *cr, const UtColour *colour, double alpha)
{
  cairo_set_source_rgba (cr, colour->red, colour->green, colour->blue, alpha);
}

static void
paint_pair (cairo_t *cr, const UtStudy *study, const UtMatrixOptions *options, const UtMatrixLayout *layout, const Range *range, guint row, guint cell, double text_size,
            const UtPalette *palette)
{
  guint terminal = layout->terminals[row];
  double value = value_of (study, options, terminal, cell), x = layout->left + cell * layout->cell_width, y = layout->top + row * layout->row_height;
  double shade = range->high > range->low ? (value - range->low) / (range->high - range->low) : 0.5, size = 0.85 * text_size;
  g_autofree char *figure = figure_of (options, value);

  set_colour (cr, &palette->margin[UT_MARGIN_EASY], 0.06 + 0.74 * CLAMP (shade, 0, 1));
  cairo_rectangle (cr, x, y, layout->cell_width, layout->row_height);
  cairo_fill (cr);
  /* Figures where there is room for them. */
  if (layout->row_height >= 1.15 * size && layout->cell_width >= 1.1 * ut_text_width ("-120.0", size))
    ut_text_draw (cr,
                  figure,
                  x + layout->cell_width / 2 - ut_text_width (figure, size) / 2,
                  y + layout->row_height / 2 - 0.65 * size,
                  size,
                  shade > 0.65 ? &palette->sheet : &palette->ink,
                  NULL);
  if (serving_cell (study, terminal) == (int) cell)
    {
      set_colour (cr, &palette->ink, 1);
      cairo_set_line_width (cr, text_size / 7);
      cairo_rectangle (cr, x + 1, y + 1, layout->cell_width - 2, layout->row_height - 2);
      cairo_stroke (cr);
    }
}

static void
paint_heads (cairo_t *cr, const UtStudy *study, const UtMatrixOptions *options, const UtMatrixLayout *layout, const gboolean *marked, double width, double text_size,
             const UtPalette *palette)
{
  const UtPlan *plan = study->gains->plan;
  double size = 0.9 * text_size;
  const char *title = options->view == UT_MATRIX_BLAME ? _ ("part of what sets the headroom") : _ ("coupling loss in dB; outlined: who serves");

  ut_text_place (cr, title, &(UtTextStyle){ .size = text_size, .bold = TRUE, .width = width - text_size }, 0.4 * text_size, 0.1 * text_size, &palette->ink, NULL);
  for (guint c = 0; c < layout->n_cells && layout->cell_width >= 1.2 * text_size; c++)
    ut_text_place (cr,
                   ut_plan_cell (plan, c)->radio.id,
                   &(UtTextStyle){ .size = size, .width = layout->cell_width },
                   layout->left + c * layout->cell_width + layout->cell_width / 2 - fmin (ut_text_width (ut_plan_cell (plan, c)->radio.id, size), layout->cell_width) / 2,
                   1.7 * text_size,
                   &palette->ink,
                   NULL);
  for (guint row = 0; row < layout->n_terminals; row++)
    {
      guint terminal = layout->terminals[row];
      double y = layout->top + row * layout->row_height;

      if (marked != NULL && marked[terminal])
        {
          set_colour (cr, &palette->ink, 0.15);
          cairo_rectangle (cr, 0, y, layout->left + layout->n_cells * layout->cell_width, layout->row_height);
          cairo_fill (cr);
        }
      if (layout->row_height >= 1.1 * size)
        ut_text_place (cr, ut_plan_terminal (plan, terminal)->radio.id, &(UtTextStyle){ .size = size, .width = layout->left - text_size }, 0.4 * text_size,
                       y + layout->row_height / 2 - 0.65 * size, &palette->ink, NULL);
    }
}

void
ut_matrix_paint (cairo_t *cr, const UtStudy *study, const UtMatrixOptions *options, const gboolean *marked, double width, double height, double text_size, const UtPalette *palette)
{
  UtMatrixLayout layout;
  Range range = range_of (study, options);

  set_colour (cr, &palette->sheet, 1);
  cairo_paint (cr);
  ut_matrix_layout (study, options, width, height, text_size, &layout);
  for (guint row = 0; row < layout.n_terminals; row++)
    for (guint c = 0; c < layout.n_cells; c++)
      paint_pair (cr, study, options, &layout, &range, row, c, text_size, palette);
  paint_heads (cr, study, options, &layout, marked, width, text_size, palette);
  ut_matrix_layout_clear (&layout);
}

char *
ut_matrix_text (const UtStudy *study, const UtMatrixOptions *options, guint terminal, guint cell)
{
  const UtPlan *plan = study->gains->plan;
  const char *terminal_id = ut_plan_terminal (plan, terminal)->radio.id, *cell_id = ut_plan_cell (plan, cell)->radio.id;
  g_autofree char *loss = ut_report_figure (-study->gains->gain_db[ut_gains_at (study->gains, terminal, cell)], 1);

  if (options->view == UT_MATRIX_BLAME)
    return g_strdup_printf (_ ("%s and %s: %.1f %% of what sets the headroom; 1 dB less between them moves it by that part of a dB"), cell_id, terminal_id,
                            100 * blame_of (study, terminal, cell));
  return g_strdup_printf (serving_cell (study, terminal) == (int) cell ? _ ("%s serves %s: %s dB") : _ ("%s to %s: %s dB"), cell_id, terminal_id, loss);
}
