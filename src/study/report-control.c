/* The power control loop as JSON, text and CSV. */
#include "report-private.h"

#include <math.h>

#include "json-text.h"
#include "plan-write.h"
#include "table.h"

static const char *
rule_word (const UtControl *control)
{
  return control->setup.rule == UT_CONTROL_EXACT ? "exact" : "steps";
}

/* A column a power, then a column a SINR. */
static UtTable *
row_table (const UtControl *control, gboolean rounded)
{
  g_autoptr (GPtrArray) header = g_ptr_array_new_with_free_func (g_free);
  guint n_senders = control->senders->len, n_links = control->links->len;
  UtTable *table;

  g_ptr_array_add (header, g_strdup (rounded ? ">Round" : "round"));
  for (guint k = 0; k < n_senders; k++)
    g_ptr_array_add (header, g_strdup_printf (rounded ? ">%s dBm" : "power_dbm %s", ut_control_sender_id (control, k)));
  for (guint i = 0; i < n_links; i++)
    g_ptr_array_add (header, g_strdup_printf (rounded ? ">%s dB" : "sinr_db %s", ut_control_link_id (control, i)));
  g_ptr_array_add (header, NULL);
  table = ut_table_new ((const char *const *) header->pdata);
  for (guint row = 0; row < control->n_rows; row++)
    {
      ut_table_add (table, g_strdup_printf ("%u", row));
      for (guint k = 0; k < n_senders + n_links; k++)
        {
          char buffer[G_ASCII_DTOSTR_BUF_SIZE];
          double value = k < n_senders ? control->power_dbm[row * n_senders + k] : control->sinr_db[row * n_links + k - n_senders];

          ut_table_add (table, rounded ? ut_report_figure (value, 2) : g_strdup (ut_number_text (value, buffer)));
        }
    }
  return table;
}

char *
ut_report_control_csv (const UtControl *control)
{
  g_autoptr (UtTable) table = row_table (control, FALSE);
  GString *out = g_string_new (NULL);

  ut_table_csv (table, out);
  return g_string_free (out, FALSE);
}

static void
add_figures (JsonBuilder *builder, const char *key, const double *values, guint n)
{
  json_builder_set_member_name (builder, key);
  if (values == NULL)
    {
      json_builder_add_null_value (builder);
      return;
    }
  json_builder_begin_array (builder);
  for (guint k = 0; k < n; k++)
    json_builder_add_double_value (builder, values[k]);
  json_builder_end_array (builder);
}

static void
add_names (JsonBuilder *builder, const UtControl *control)
{
  json_builder_set_member_name (builder, "senders");
  json_builder_begin_array (builder);
  for (guint k = 0; k < control->senders->len; k++)
    json_builder_add_string_value (builder, ut_control_sender_id (control, k));
  json_builder_end_array (builder);
  json_builder_set_member_name (builder, "links");
  json_builder_begin_array (builder);
  for (guint i = 0; i < control->links->len; i++)
    {
      json_builder_begin_object (builder);
      ut_report_add_text (builder, "terminal", ut_control_link_id (control, i));
      ut_report_add_figure (builder, "target_db", control->target_db[i]);
      json_builder_set_member_name (builder, "met");
      json_builder_add_boolean_value (builder, control->met[i]);
      json_builder_end_object (builder);
    }
  json_builder_end_array (builder);
}

char *
ut_report_control_json (const UtControl *control)
{
  g_autoptr (JsonBuilder) builder = json_builder_new_immutable ();
  guint n_senders = control->senders->len, n_links = control->links->len;

  json_builder_begin_object (builder);
  ut_report_add_text (builder, "direction", control->direction == UT_DIRECTION_DOWN ? "down" : "up");
  ut_report_add_text (builder, "rule", rule_word (control));
  ut_report_add_figure (builder, "step_db", control->setup.rule == UT_CONTROL_STEPS ? control->setup.step_db : NAN);
  json_builder_set_member_name (builder, "delay");
  json_builder_add_int_value (builder, control->setup.delay);
  ut_report_add_figure (builder, "error_db", control->setup.error_db);
  add_names (builder, control);
  json_builder_set_member_name (builder, "rows");
  json_builder_begin_array (builder);
  for (guint row = 0; row < control->n_rows; row++)
    {
      json_builder_begin_object (builder);
      add_figures (builder, "power_dbm", control->power_dbm + (gsize) row * n_senders, n_senders);
      add_figures (builder, "sinr_db", control->sinr_db + (gsize) row * n_links, n_links);
      json_builder_end_object (builder);
    }
  json_builder_end_array (builder);
  add_figures (builder, "end_dbm", control->end_dbm, n_senders);
  json_builder_set_member_name (builder, "end_meets");
  json_builder_add_boolean_value (builder, control->end_meets);
  ut_report_add_figure (builder, "predicted_db_per_round", control->predicted_db);
  ut_report_add_figure (builder, "observed_db_per_round", control->observed_db);
  ut_report_add_figure (builder, "band_db", control->band_db);
  json_builder_set_member_name (builder, "band_holds");
  json_builder_add_boolean_value (builder, control->band_holds);
  add_figures (builder, "band_low_dbm", control->low_dbm, n_senders);
  add_figures (builder, "band_high_dbm", control->high_dbm, n_senders);
  json_builder_end_object (builder);

  g_autoptr (JsonNode) root = json_builder_get_root (builder);
  return ut_json_text (root);
}

static void
append_end (const UtControl *control, GString *out)
{
  g_autofree char *predicted = ut_report_figure (control->predicted_db, 2), *observed = ut_report_figure (control->observed_db, 2);

  if (control->end_dbm == NULL)
    {
      g_string_append (out, "Ends             not known: the sums of the cells' powers are limited and not all can be met\n");
      return;
    }
  g_string_append_printf (out, "Ends             %s\n", control->end_meets ? "with every target met" : "with radios at their limits and targets missed");
  for (guint k = 0; k < control->senders->len; k++)
    {
      g_autofree char *end = ut_report_figure (control->end_dbm[k], 2);

      g_string_append_printf (out, "%s%s %s", k == 0 ? "  at (dBm)       " : ", ", ut_control_sender_id (control, k), end);
    }
  if (control->senders->len > 0)
    g_string_append_c (out, '\n');
  if (isfinite (control->predicted_db))
    g_string_append_printf (out, "Comes nearer by  %s dB a round under exact control, seen: %s dB\n", predicted, observed);
}

static void
append_band (const UtControl *control, GString *out)
{
  g_autofree char *band = ut_report_figure (control->band_db, 2);
  g_autofree char *sinr = ut_report_figure (2 * (control->setup.delay + 1) * control->setup.step_db + control->setup.error_db, 2);

  if (isnan (control->band_db))
    return;
  if (!control->band_holds)
    {
      g_string_append_printf (out,
                              "Band             not guaranteed: it needs a headroom of %s dB; the loop may run into limits though powers exist\n",
                              band);
      return;
    }
  g_string_append_printf (out, "Band             in the end every SINR stays within %s dB of its target, every power within (dBm)\n  ", sinr);
  for (guint k = 0; k < control->senders->len; k++)
    {
      g_autofree char *low = ut_report_figure (control->low_dbm[k], 2), *high = ut_report_figure (control->high_dbm[k], 2);

      g_string_append_printf (out, "%s%s %s to %s", k == 0 ? "               " : ", ", ut_control_sender_id (control, k), low, high);
    }
  g_string_append_c (out, '\n');
}

char *
ut_report_control_text (const UtControl *control)
{
  g_autoptr (UtTable) table = row_table (control, TRUE);
  GString *out = g_string_new (NULL);
  g_autofree char *step = ut_report_figure (control->setup.step_db, 2), *error = ut_report_figure (control->setup.error_db, 2);

  g_string_append_printf (out, "Direction        %slink\n", control->direction == UT_DIRECTION_DOWN ? "down" : "up");
  g_string_append_printf (out, "Rule             %s", rule_word (control));
  if (control->setup.rule == UT_CONTROL_STEPS)
    g_string_append_printf (out, " of %s dB", step);
  g_string_append_printf (out, ", what is seen is %u round%s old, measured to %s dB\n", control->setup.delay, control->setup.delay == 1 ? "" : "s", error);
  append_end (control, out);
  append_band (control, out);
  g_string_append_c (out, '\n');
  ut_table_text (table, out);
  return g_string_free (out, FALSE);
}
