/* Tables on the page: the power plan and the links, tightest first. */
#include <math.h>
#include <string.h>

#include "page-layout.h"
#include "report.h"

#define ROW_MM 3.3
#define TEXT_MM 2.3

static const UtColour black = { 0, 0, 0 };

char *
ut_page_figure (double value, int decimals)
{
  g_autofree char *plain = ut_report_figure (value, decimals);

  return plain[0] == '-' ? g_strconcat ("−", plain + 1, NULL) : g_strdup (plain);
}

typedef struct
{
  const char *title;
  double part;      /* of the table's width */
  gboolean figure;  /* right-aligned */
} Column;

typedef struct
{
  cairo_t *cr;
  const Column *columns;
  guint n_columns;
  double x, y, width;
} Table;

static void
draw_cell (const Table *table, guint column, double x, double width, const char *text, gboolean bold)
{
  UtTextStyle style = { .size = TEXT_MM, .bold = bold, .width = width - 0.8 };
  double text_width;

  ut_text_extent (text, &style, &text_width, NULL);
  ut_text_place (table->cr,
                 text,
                 &style,
                 table->columns[column].figure ? x + MAX (width - 0.8 - text_width, 0) : x,
                 table->y + 0.2,
                 &black,
                 NULL);
}

static void
draw_row (Table *table, char *const *texts, gboolean bold)
{
  double x = table->x;

  for (guint i = 0; i < table->n_columns; i++)
    {
      double width = table->columns[i].part * table->width;
      draw_cell (table, i, x, width, texts != NULL ? texts[i] : table->columns[i].title, bold);
      x += width;
    }
  table->y += ROW_MM;
}

static void
draw_head (Table *table, const char *title)
{
  ut_text_place (table->cr, title, &(UtTextStyle){ .size = 2.9, .bold = TRUE, .width = table->width }, table->x, table->y, &black, NULL);
  table->y += 4.2;
  draw_row (table, NULL, TRUE);
  cairo_set_source_rgb (table->cr, 0, 0, 0);
  cairo_set_line_width (table->cr, 0.2);
  cairo_move_to (table->cr, table->x, table->y);
  cairo_line_to (table->cr, table->x + table->width, table->y);
  cairo_stroke (table->cr);
  table->y += 0.5;
}

#define HEAD_MM 8.2

double
ut_page_table_height (guint n_rows)
{
  return HEAD_MM + n_rows * ROW_MM;
}

/* How many of n rows fit into room_mm below a head; where not all do, one line is kept for saying so. */
static guint
rows_that_fit (guint n, double room_mm)
{
  double rows = floor ((room_mm - HEAD_MM) / ROW_MM);

  if (rows < 1)
    return 0;
  return n <= rows ? n : (guint) rows - 1;
}

static void
say_left_out (Table *table, guint n, const char *what)
{
  g_autofree char *text = g_strdup_printf ("and %u more %s, not shown for want of room", n, what);

  if (n > 0)
    ut_text_place (table->cr, text, &(UtTextStyle){ .size = TEXT_MM, .width = table->width }, table->x, table->y + 0.2, &black, NULL);
  table->y += n > 0 ? ROW_MM : 0;
}

/* ---- power plan ---- */

/* The distance to keep off is at full power. */
static const Column power_columns[] = {
  { "Radio", 0.09, FALSE }, { "Name", 0.205, FALSE }, { "Grid", 0.075, FALSE }, { "x m", 0.095, TRUE }, { "y m", 0.095, TRUE },
  { "h m", 0.07, TRUE },    { "Ch.", 0.06, TRUE },    { "dBm", 0.115, TRUE },   { "EIRP", 0.1, TRUE },  { "Off m", 0.095, TRUE },
};

/* The planner's own columns of a radio: "; cable tag A-07". */
static void
append_own (GString *text, const UtRadio *radio)
{
  JsonObjectIter iter;
  const char *key;
  JsonNode *node;

  if (radio->fields == NULL)
    return;
  json_object_iter_init_ordered (&iter, radio->fields);
  while (json_object_iter_next_ordered (&iter, &key, &node))
    {
      g_autofree char *value = JSON_NODE_HOLDS_VALUE (node) && json_node_get_value_type (node) == G_TYPE_STRING ? json_node_dup_string (node) : json_to_string (node, FALSE);

      g_string_append_printf (text, "; %s %s", key, value);
    }
}

/* Under a cell's row what else its installer needs. */
static char *
mounting (const UtPlan *plan, const UtRadio *radio, const UtTransmitterAnswer *sender)
{
  g_autofree char *azimuth = ut_page_figure (radio->azimuth_deg, 0), *from_north = ut_page_figure (fmod (fmod (radio->azimuth_deg - plan->site->north_deg, 360) + 360, 360), 0);
  g_autofree char *tilt = ut_page_figure (radio->downtilt_deg, 0), *element = ut_page_figure (sender->element_dbm, 2);
  GString *text = g_string_new (radio->antenna);

  g_string_append_printf (text, ", %s° from +y, %s° from north, tilt %s°", azimuth, from_north, tilt);
  if (isfinite (sender->element_dbm))
    g_string_append_printf (text, "; %s dBm per element", element);
  append_own (text, radio);
  return g_string_free (text, FALSE);
}

/* Lines that a sender takes. */
static guint
lines_of (const UtStudy *study)
{
  return study->transmitters->len > 0 && ut_study_transmitter (study, 0)->is_cell ? 2 : 1;
}

static void
draw_powers (cairo_t *cr, const UtCommissioning *commissioning, const UtPageSetup *setup, const UtBox *box, guint n)
{
  const UtStudy *study = commissioning->study;
  const UtPlan *plan = study->gains->plan;
  Table table = { cr, power_columns, G_N_ELEMENTS (power_columns), box->x, box->y, box->width };

  UtPageGrid grid;
  gboolean has_grid = ut_page_grid (plan, setup, &grid);

  draw_head (&table, "Power plan (dBm conducted, all ports; EIRP; keep off)");
  for (guint i = 0; i < n; i++)
    {
      const UtTransmitterAnswer *sender = ut_study_transmitter (study, i);
      const UtRadio *radio = sender->is_cell ? &ut_plan_cell (plan, sender->index)->radio : &ut_plan_terminal (plan, sender->index)->radio;
      double power_dbm = ut_commissioning_dbm (commissioning, i);
      g_autofree char *x = ut_page_figure (radio->x_m, 1), *y = ut_page_figure (radio->y_m, 1), *height = ut_page_figure (radio->height_m, 1);
      g_autofree char *power = ut_page_figure (power_dbm, 2), *eirp = ut_page_figure (sender->eirp_dbm + power_dbm - sender->power_dbm, 1);
      g_autofree char *off = ut_page_figure (sender->compliance_m, 2), *more = NULL;
      g_autofree char *channel = sender->is_cell ? g_strdup_printf ("%d", ut_plan_cell (plan, sender->index)->channel) : g_strdup ("");
      g_autofree char *ref = has_grid ? ut_page_grid_ref (&grid, radio->x_m, radio->y_m) : g_strdup ("");
      char *const texts[] = { radio->id, radio->name, ref, x, y, height, channel, power, eirp, off };

      draw_row (&table, texts, FALSE);
      if (lines_of (study) == 1)
        continue;
      more = mounting (plan, radio, sender);
      ut_text_place (cr, more, &(UtTextStyle){ .size = 0.92 * TEXT_MM, .width = 0.91 * table.width }, table.x + 0.09 * table.width, table.y - 0.1, &black, NULL);
      table.y += ROW_MM;
    }
  say_left_out (&table, study->transmitters->len - n, "radios");
}

/* ---- links ---- */

static const Column link_columns[] = {
  { "Term.", 0.09, FALSE }, { "Name", 0.235, FALSE }, { "Cell", 0.075, FALSE }, { "dBm", 0.115, TRUE }, { "Target", 0.105, TRUE },
  { "SINR", 0.095, TRUE },  { "Margin", 0.11, TRUE }, { "Res.", 0.115, TRUE }, { "%", 0.06, TRUE },
};

typedef struct { double margin_db; guint index; } Order;

static int
compare_margins (gconstpointer one, gconstpointer other)
{
  const Order *a = one, *b = other;

  if (isnan (a->margin_db) != isnan (b->margin_db))
    return isnan (a->margin_db) ? -1 : 1;
  if (a->margin_db < b->margin_db || a->margin_db > b->margin_db)
    return a->margin_db < b->margin_db ? -1 : 1;
  return (a->index > b->index) - (a->index < b->index);
}

static void
draw_links (cairo_t *cr, const UtStudy *study, const UtBox *box, guint n)
{
  const UtPlan *plan = study->gains->plan;
  Table table = { cr, link_columns, G_N_ELEMENTS (link_columns), box->x, box->y, box->width };
  g_autoptr (GArray) order = g_array_new (FALSE, FALSE, sizeof (Order));

  for (guint i = 0; i < study->links->len; i++)
    g_array_append_val (order, ((Order){ ut_study_link (study, i)->margin_db, i }));
  g_array_sort (order, compare_margins);
  draw_head (&table, "Links, the tightest first (dB; % of places)");
  for (guint i = 0; i < n; i++)
    {
      const UtLinkAnswer *link = ut_study_link (study, g_array_index (order, Order, i).index);
      const UtRadio *terminal = &ut_plan_terminal (plan, link->terminal)->radio;
      g_autofree char *power = ut_page_figure (link->power_dbm, 2), *target = ut_page_figure (link->target_db, 1);
      g_autofree char *sinr = ut_page_figure (link->sinr_db, 1), *margin = ut_page_figure (link->margin_db, 1);
      g_autofree char *reserve = ut_page_figure (link->reserve_db, 1), *chance = isfinite (link->chance) ? ut_page_figure (100 * link->chance, 0) : g_strdup ("");
      char *const texts[] = { terminal->id, terminal->name, link->cell < 0 ? (char *) "–" : ut_plan_cell (plan, (guint) link->cell)->radio.id, power, target, sinr, margin, reserve, chance };

      draw_row (&table, texts, FALSE);
    }
  say_left_out (&table, study->links->len - n, "links, each with more to spare,");
}

static guint
senders_that_fit (const UtStudy *study, double room_mm)
{
  guint lines = lines_of (study), n = study->transmitters->len, fit = rows_that_fit (lines * n, room_mm);

  return fit == lines * n ? n : fit / lines;
}

/* Under each other, or side by side where the page is upright; the power plan gets at most half of the height before links are cut. */
void
ut_page_draw_tables (cairo_t *cr, const UtCommissioning *commissioning, const UtPageSetup *setup, const UtBox *box)
{
  const UtStudy *study = commissioning->study;
  guint senders = study->transmitters->len, links = study->links->len, n_senders, n_links;
  UtBox powers_box = *box, links_box = *box;

  if (setup->orientation == UT_PORTRAIT)
    {
      powers_box.width = box->width * 0.52;
      links_box.x = box->x + box->width * 0.54;
      links_box.width = box->width * 0.46;
      n_senders = senders_that_fit (study, box->height);
      n_links = rows_that_fit (links, box->height);
    }
  else
    {
      double links_need = ut_page_table_height (links + 1);

      n_senders = senders_that_fit (study, MAX (box->height - links_need - 4, box->height / 2 - 2));
      links_box.y = box->y + ut_page_table_height (lines_of (study) * n_senders) + (n_senders < senders ? ROW_MM : 0) + 4;
      n_links = rows_that_fit (links, box->y + box->height - links_box.y);
    }
  draw_powers (cr, commissioning, setup, &powers_box, n_senders);
  draw_links (cr, study, &links_box, n_links);
}
