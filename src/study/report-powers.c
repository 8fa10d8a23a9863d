/* The commissioning sheet as text, CSV and JSON. */
#include "report-private.h"

#include <math.h>

#include "commissioning.h"
#include "decibel.h"
#include "json-text.h"
#include "table.h"
#include "words.h"

/* What one row says. */
typedef struct
{
  const UtRadio *radio;
  const char *storey;
  int channel; /* 0: a terminal's, which has none of its own */
  double true_azimuth_deg, power_dbm, power_mw, port_dbm, element_dbm, eirp_dbm, compliance_m;
} Row;

static Row
row_of (const UtCommissioning *commissioning, guint i, guint ports)
{
  const UtStudy *study = commissioning->study;
  const UtPlan *plan = study->gains->plan;
  const UtTransmitterAnswer *sender = ut_study_transmitter (study, i);
  const UtRadio *radio = sender->is_cell ? &ut_plan_cell (plan, sender->index)->radio : &ut_plan_terminal (plan, sender->index)->radio;
  double power_dbm = ut_commissioning_dbm (commissioning, i), rounded_db = power_dbm - sender->power_dbm;

  return (Row){
    .radio = radio,
    .storey = ut_plan_storey (plan, (guint) ut_plan_find_storey (plan, radio->storey))->name,
    .channel = sender->is_cell ? ut_plan_cell (plan, sender->index)->channel : 0,
    /* The plan's north lies so far clockwise from +y: a direction from +y is less by that, from north. */
    .true_azimuth_deg = fmod (fmod (radio->azimuth_deg - plan->site->north_deg, 360) + 360, 360),
    .power_dbm = power_dbm,
    .power_mw = isnan (power_dbm) ? NAN : ut_mw_from_dbm (power_dbm),
    .port_dbm = power_dbm - ut_db_from_ratio (ports),
    .element_dbm = sender->element_dbm + rounded_db,
    .eirp_dbm = sender->eirp_dbm + rounded_db,
    .compliance_m = sender->compliance_m,
  };
}

/* Names of the planner's own columns, in the order they come. Borrowed texts. */
static GPtrArray *
own_columns (const UtCommissioning *commissioning)
{
  GPtrArray *names = g_ptr_array_new ();

  for (guint i = 0; i < commissioning->study->transmitters->len; i++)
    {
      const UtRadio *radio = row_of (commissioning, i, 1).radio;
      JsonObjectIter iter;
      const char *key;
      JsonNode *value;

      if (radio->fields == NULL)
        continue;
      json_object_iter_init_ordered (&iter, radio->fields);
      while (json_object_iter_next_ordered (&iter, &key, &value))
        if (!g_ptr_array_find_with_equal_func (names, key, g_str_equal, NULL))
          g_ptr_array_add (names, (gpointer) key);
    }
  return names;
}

static char *
own_value (const UtRadio *radio, const char *name)
{
  JsonNode *node = radio->fields != NULL ? json_object_get_member (radio->fields, name) : NULL;

  if (node == NULL)
    return g_strdup ("");
  return JSON_NODE_HOLDS_VALUE (node) && json_node_get_value_type (node) == G_TYPE_STRING ? json_node_dup_string (node) : json_to_string (node, FALSE);
}

static char *
figure_or_empty (double value, int decimals)
{
  return isfinite (value) ? ut_report_figure (value, decimals) : g_strdup ("");
}

static void
fill (UtTable *table, const UtCommissioning *commissioning, guint ports, const GPtrArray *own)
{
  for (guint i = 0; i < commissioning->study->transmitters->len; i++)
    {
      Row row = row_of (commissioning, i, ports);

      ut_table_add (table, g_strdup (row.radio->id));
      ut_table_add (table, g_strdup (row.radio->name));
      ut_table_add (table, g_strdup (row.storey));
      ut_table_add (table, ut_report_figure (row.radio->x_m, 2));
      ut_table_add (table, ut_report_figure (row.radio->y_m, 2));
      ut_table_add (table, ut_report_figure (row.radio->height_m, 2));
      ut_table_add (table, g_strdup (row.radio->antenna));
      ut_table_add (table, ut_report_figure (row.radio->azimuth_deg, 1));
      ut_table_add (table, ut_report_figure (row.true_azimuth_deg, 1));
      ut_table_add (table, ut_report_figure (row.radio->downtilt_deg, 1));
      ut_table_add (table, row.channel > 0 ? g_strdup_printf ("%d", row.channel) : g_strdup (""));
      ut_table_add (table, figure_or_empty (row.power_dbm, 3));
      ut_table_add (table, figure_or_empty (row.power_mw, 4));
      ut_table_add (table, figure_or_empty (row.port_dbm, 3));
      ut_table_add (table, figure_or_empty (row.element_dbm, 3));
      ut_table_add (table, figure_or_empty (row.eirp_dbm, 2));
      ut_table_add (table, figure_or_empty (row.compliance_m, 2));
      for (guint k = 0; k < own->len; k++)
        ut_table_add (table, own_value (row.radio, own->pdata[k]));
    }
}

static UtTable *
table_of (const UtCommissioning *commissioning, guint ports, const char *const *fixed)
{
  g_autoptr (GPtrArray) own = own_columns (commissioning), header = g_ptr_array_new ();
  UtTable *table;

  for (guint i = 0; fixed[i] != NULL; i++)
    g_ptr_array_add (header, (gpointer) fixed[i]);
  for (guint k = 0; k < own->len; k++)
    g_ptr_array_add (header, own->pdata[k]);
  g_ptr_array_add (header, NULL);
  table = ut_table_new ((const char *const *) header->pdata);
  fill (table, commissioning, ports, own);
  return table;
}

char *
ut_report_powers_csv (const UtCommissioning *commissioning, guint ports)
{
  static const char *const header[] = { "id",           "name",    "storey",    "x_m",      "y_m",           "height_m",    "antenna",  "azimuth_deg",          "true_azimuth_deg",
                                        "downtilt_deg", "channel", "power_dbm", "power_mw", "port_power_dbm", "element_dbm", "eirp_dbm", "compliance_distance_m", NULL };
  g_autoptr (UtTable) table = table_of (commissioning, ports, header);
  GString *out = g_string_new (NULL);

  ut_table_csv (table, out);
  return g_string_free (out, FALSE);
}

/* What the powers are, in a line. */
static char *
note (const UtCommissioning *commissioning)
{
  const char *kept = commissioning->kept ? "solved again with these very powers, every link that the plan meets is met" : "with these very powers not every link that the plan meets is met";

  if (commissioning->shared)
    return g_strdup ("Powers rounded up to 0.01 dB: the sum over a cell's links, which it shares among them by its own power control.");
  if (isnan (commissioning->ladder_db))
    return g_strdup_printf ("Powers rounded up to 0.01 dB; %s.", kept);
  return g_strdup_printf ("Least allowed levels: each radio's own steps, or %g dB where it has none; %s.", commissioning->ladder_db, kept);
}

char *
ut_report_powers_text (const UtCommissioning *commissioning, guint ports)
{
  g_autofree char *port = g_strdup_printf (">1 of %u ports", ports), *words = note (commissioning);
  const char *const header[] = { "Radio",   "Name",     "Storey",    ">x m",      ">y m", ">h m",         "Antenna",    ">from +y °", ">from N °",
                                 ">tilt °", ">Channel", ">Set dBm", ">mW",       port,   ">Element dBm", ">EIRP dBm", ">Keep off m", NULL };
  g_autoptr (UtTable) table = table_of (commissioning, ports, header);
  GString *out = g_string_new (NULL);

  ut_table_text (table, out);
  g_string_append_printf (out, "%s\n", words);
  g_string_append (out, "Conducted power over all ports. Transmit power, EIRP and exposure are subject to local rules and licences; keep people outside the distance.\n");
  return g_string_free (out, FALSE);
}

char *
ut_report_powers_json (const UtCommissioning *commissioning, guint ports)
{
  const UtStudy *study = commissioning->study;
  g_autoptr (JsonBuilder) builder = json_builder_new_immutable ();

  json_builder_begin_object (builder);
  ut_report_add_text (builder, "verdict", ut_verdict_word (study->verdict));
  ut_report_add_text (builder, "direction", ut_direction_word (study->question.direction));
  ut_report_add_figure (builder, "ladder_db", commissioning->ladder_db);
  json_builder_set_member_name (builder, "kept");
  if (commissioning->shared)
    json_builder_add_null_value (builder);
  else
    json_builder_add_boolean_value (builder, commissioning->kept);
  json_builder_set_member_name (builder, "ports");
  json_builder_add_int_value (builder, ports);
  json_builder_set_member_name (builder, "radios");
  json_builder_begin_array (builder);
  for (guint i = 0; i < study->transmitters->len; i++)
    {
      Row row = row_of (commissioning, i, ports);

      json_builder_begin_object (builder);
      ut_report_add_text (builder, "id", row.radio->id);
      ut_report_add_text (builder, "name", row.radio->name);
      ut_report_add_text (builder, "storey", row.storey);
      ut_report_add_figure (builder, "x_m", row.radio->x_m);
      ut_report_add_figure (builder, "y_m", row.radio->y_m);
      ut_report_add_figure (builder, "height_m", row.radio->height_m);
      ut_report_add_text (builder, "antenna", row.radio->antenna);
      ut_report_add_figure (builder, "azimuth_deg", row.radio->azimuth_deg);
      ut_report_add_figure (builder, "true_azimuth_deg", row.true_azimuth_deg);
      ut_report_add_figure (builder, "downtilt_deg", row.radio->downtilt_deg);
      json_builder_set_member_name (builder, "channel");
      if (row.channel > 0)
        json_builder_add_int_value (builder, row.channel);
      else
        json_builder_add_null_value (builder);
      ut_report_add_figure (builder, "power_dbm", row.power_dbm);
      ut_report_add_figure (builder, "power_mw", row.power_mw);
      ut_report_add_figure (builder, "port_power_dbm", row.port_dbm);
      ut_report_add_figure (builder, "element_dbm", row.element_dbm);
      ut_report_add_figure (builder, "eirp_dbm", row.eirp_dbm);
      ut_report_add_figure (builder, "compliance_distance_m", row.compliance_m);
      json_builder_set_member_name (builder, "fields");
      if (row.radio->fields != NULL)
        json_builder_add_value (builder, json_node_init_object (json_node_alloc (), row.radio->fields));
      else
        json_builder_add_null_value (builder);
      json_builder_end_object (builder);
    }
  json_builder_end_array (builder);
  json_builder_end_object (builder);
  g_autoptr (JsonNode) root = json_builder_get_root (builder);
  return ut_json_text (root);
}
