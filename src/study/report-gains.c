/* The gain matrix as JSON, text and CSV. */
#include "report.h"

#include "json-text.h"
#include "plan-write.h"
#include "table.h"

static void
add_ids (JsonBuilder *builder, const char *key, const GPtrArray *radios)
{
  json_builder_set_member_name (builder, key);
  json_builder_begin_array (builder);
  for (guint i = 0; i < radios->len; i++)
    json_builder_add_string_value (builder, ((const UtRadio *) radios->pdata[i])->id);
  json_builder_end_array (builder);
}

char *
ut_report_gains_json (const UtGains *gains)
{
  g_autoptr (JsonBuilder) builder = json_builder_new_immutable ();

  json_builder_begin_object (builder);
  add_ids (builder, "cells", gains->plan->cells);
  add_ids (builder, "terminals", gains->plan->terminals);
  json_builder_set_member_name (builder, "gain_db");
  json_builder_begin_array (builder);
  for (guint t = 0; t < gains->n_terminals; t++)
    {
      json_builder_begin_array (builder);
      for (guint c = 0; c < gains->n_cells; c++)
        json_builder_add_double_value (builder, gains->gain_db[ut_gains_at (gains, t, c)]);
      json_builder_end_array (builder);
    }
  json_builder_end_array (builder);
  json_builder_end_object (builder);

  g_autoptr (JsonNode) root = json_builder_get_root (builder);
  return ut_json_text (root);
}

/* The matrix with a row a terminal and a column a cell; `rounded` for people. */
static UtTable *
gain_table (const UtGains *gains, gboolean rounded)
{
  g_autoptr (GPtrArray) header = g_ptr_array_new_with_free_func (g_free);

  g_ptr_array_add (header, g_strdup (rounded ? "Gain dB" : "terminal"));
  for (guint c = 0; c < gains->n_cells; c++)
    g_ptr_array_add (header, g_strconcat (">", ut_plan_cell (gains->plan, c)->radio.id, NULL));
  g_ptr_array_add (header, NULL);

  UtTable *table = ut_table_new ((const char *const *) header->pdata);
  for (guint t = 0; t < gains->n_terminals; t++)
    {
      ut_table_add (table, g_strdup (ut_plan_terminal (gains->plan, t)->radio.id));
      for (guint c = 0; c < gains->n_cells; c++)
        {
          char buffer[G_ASCII_DTOSTR_BUF_SIZE];
          double gain_db = gains->gain_db[ut_gains_at (gains, t, c)];

          ut_table_add (table, rounded ? ut_report_figure (gain_db, 1) : g_strdup (ut_number_text (gain_db, buffer)));
        }
    }
  return table;
}

char *
ut_report_gains_text (const UtGains *gains)
{
  g_autoptr (UtTable) table = gain_table (gains, TRUE);
  GString *out = g_string_new (NULL);

  ut_table_text (table, out);
  return g_string_free (out, FALSE);
}

char *
ut_report_gains_csv (const UtGains *gains)
{
  g_autoptr (UtTable) table = gain_table (gains, FALSE);
  GString *out = g_string_new (NULL);

  ut_table_csv (table, out);
  return g_string_free (out, FALSE);
}
