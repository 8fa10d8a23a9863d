/* Channels found, as JSON and text. */
#include "report-private.h"

#include "json-text.h"
#include "table.h"

char *
ut_report_channels_json (const UtChannels *channels)
{
  g_autoptr (JsonBuilder) builder = json_builder_new_immutable ();
  const UtPlan *plan = channels->plan;

  json_builder_begin_object (builder);
  json_builder_set_member_name (builder, "channels");
  json_builder_begin_array (builder);
  for (guint c = 0; c < plan->cells->len; c++)
    {
      json_builder_begin_object (builder);
      ut_report_add_text (builder, "cell", ut_plan_cell (plan, c)->radio.id);
      json_builder_set_member_name (builder, "channel");
      json_builder_add_int_value (builder, channels->channel[c]);
      json_builder_end_object (builder);
    }
  json_builder_end_array (builder);
  ut_report_add_figure (builder, "headroom_before_db", channels->before_db);
  ut_report_add_figure (builder, "headroom_db", channels->headroom_db);
  json_builder_set_member_name (builder, "proved");
  json_builder_add_boolean_value (builder, channels->proved);
  ut_report_add_figure (builder, "bound_db", channels->bound_db);
  json_builder_set_member_name (builder, "tried");
  json_builder_add_int_value (builder, (gint64) channels->tried);
  json_builder_end_object (builder);

  g_autoptr (JsonNode) root = json_builder_get_root (builder);
  return ut_json_text (root);
}

char *
ut_report_channels_text (const UtChannels *channels, const UtPlan *plan)
{
  static const char *const header[] = { "Cell", ">Channel", ">Before", "Name", NULL };
  g_autoptr (UtTable) table = ut_table_new (header);
  GString *out = g_string_new (NULL);
  g_autofree char *before = ut_report_figure (channels->before_db, 2);
  g_autofree char *headroom = ut_report_figure (channels->headroom_db, 2);
  g_autofree char *bound = ut_report_figure (channels->bound_db, 2);

  for (guint c = 0; c < plan->cells->len; c++)
    {
      const UtCell *cell = ut_plan_cell (plan, c);

      ut_table_add (table, g_strdup (cell->radio.id));
      ut_table_add (table, g_strdup_printf ("%d", channels->channel[c]));
      ut_table_add (table, g_strdup_printf ("%d", cell->channel));
      ut_table_add (table, g_strconcat (cell->radio.name, cell->radio.on ? "" : " (off)", NULL));
    }
  g_string_append_printf (out, "Headroom  %s dB, before %s dB\n", headroom, before);
  if (channels->proved)
    g_string_append_printf (out, "Proved    no other channels give more, up to %g dB (%" G_GUINT64_FORMAT " assignments worked out)\n",
                            UT_CHANNELS_TOLERANCE_DB, channels->tried);
  else
    g_string_append_printf (out,
                            "Not proved to be the best: the best of a search, after %" G_GUINT64_FORMAT " assignments; none gives more than %s dB\n",
                            channels->tried,
                            bound);
  g_string_append_c (out, '\n');
  ut_table_text (table, out);
  return g_string_free (out, FALSE);
}
