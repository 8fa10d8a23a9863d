/* The answer of `solve` as JSON, text and CSV. */
#include "report-private.h"

#include <math.h>

#include "json-text.h"
#include "plan-write.h"
#include "table.h"
#include "words.h"

static const char *
cell_id (const UtStudy *study, int cell)
{
  return cell < 0 ? NULL : ut_plan_cell (study->gains->plan, (guint) cell)->radio.id;
}

static const UtRadio *
transmitter_radio (const UtStudy *study, const UtTransmitterAnswer *sender)
{
  return sender->is_cell ? &ut_plan_cell (study->gains->plan, sender->index)->radio
                         : &ut_plan_terminal (study->gains->plan, sender->index)->radio;
}

static void
add_transmitters (JsonBuilder *builder, const UtStudy *study)
{
  json_builder_set_member_name (builder, "transmitters");
  json_builder_begin_array (builder);
  for (guint i = 0; i < study->transmitters->len; i++)
    {
      const UtTransmitterAnswer *sender = ut_study_transmitter (study, i);

      json_builder_begin_object (builder);
      ut_report_add_text (builder, "id", transmitter_radio (study, sender)->id);
      ut_report_add_figure (builder, "power_dbm", sender->power_dbm);
      ut_report_add_figure (builder, "power_min_dbm", sender->power_min_dbm);
      ut_report_add_figure (builder, "power_max_dbm", sender->power_max_dbm);
      ut_report_add_figure (builder, "eirp_dbm", sender->eirp_dbm);
      ut_report_add_figure (builder, "element_dbm", sender->element_dbm);
      ut_report_add_figure (builder, "compliance_distance_m", sender->compliance_m);
      ut_report_add_text (builder, "compliance_limit", sender->compliance_limit);
      json_builder_end_object (builder);
    }
  json_builder_end_array (builder);
}

static void
add_interferers (JsonBuilder *builder, const UtLinkAnswer *link)
{
  json_builder_set_member_name (builder, "interferers");
  json_builder_begin_array (builder);
  for (guint i = 0; i < link->interferers->len; i++)
    {
      const UtInterferer *one = &g_array_index (link->interferers, UtInterferer, i);

      json_builder_begin_object (builder);
      ut_report_add_text (builder, "id", one->id);
      ut_report_add_figure (builder, "dbm", one->dbm);
      json_builder_end_object (builder);
    }
  json_builder_end_array (builder);
}

static void
add_links (JsonBuilder *builder, const UtStudy *study)
{
  json_builder_set_member_name (builder, "links");
  json_builder_begin_array (builder);
  for (guint i = 0; i < study->links->len; i++)
    {
      const UtLinkAnswer *link = ut_study_link (study, i);

      json_builder_begin_object (builder);
      ut_report_add_text (builder, "terminal", ut_plan_terminal (study->gains->plan, link->terminal)->radio.id);
      ut_report_add_text (builder, "cell", cell_id (study, link->cell));
      ut_report_add_figure (builder, "power_dbm", link->power_dbm);
      ut_report_add_figure (builder, "target_db", link->target_db);
      ut_report_add_figure (builder, "level_target_dbm", link->level_target_dbm);
      ut_report_add_figure (builder, "sinr_db", link->sinr_db);
      ut_report_add_figure (builder, "margin_db", link->margin_db);
      ut_report_add_figure (builder, "signal_dbm", link->signal_dbm);
      ut_report_add_figure (builder, "noise_dbm", link->noise_dbm);
      ut_report_add_figure (builder, "interference_dbm", link->interference_dbm);
      add_interferers (builder, link);
      ut_report_add_figure (builder, "reserve_db", link->reserve_db);
      ut_report_add_figure (builder, "probability", link->chance);
      json_builder_set_member_name (builder, "dropped");
      json_builder_add_boolean_value (builder, link->dropped);
      json_builder_end_object (builder);
    }
  json_builder_end_array (builder);
}

static void
add_terminals (JsonBuilder *builder, const char *key, const UtStudy *study, const GArray *terminals)
{
  json_builder_set_member_name (builder, key);
  json_builder_begin_array (builder);
  for (guint i = 0; i < terminals->len; i++)
    json_builder_add_string_value (builder,
                                   ut_plan_terminal (study->gains->plan, g_array_index (terminals, guint, i))->radio.id);
  json_builder_end_array (builder);
}

char *
ut_report_study_json (const UtStudy *study)
{
  g_autoptr (JsonBuilder) builder = json_builder_new_immutable ();

  json_builder_begin_object (builder);
  ut_report_add_text (builder, "title", study->gains->plan->title);
  ut_report_add_text (builder, "direction", ut_direction_word (study->question.direction));
  ut_report_add_text (builder, "aim", ut_aim_word (study->question.aim));
  ut_report_add_text (builder, "fallback", ut_fallback_word (study->fallback));
  ut_report_add_text (builder, "verdict", ut_verdict_word (study->verdict));
  ut_report_add_figure (builder, "spectral_radius", study->spectral_radius);
  ut_report_add_figure (builder, "headroom_db", study->headroom_db);
  ut_report_add_figure (builder, "headroom_error_db", study->headroom_error_db);
  ut_report_add_figure (builder, "hold_db", study->question.hold_db);
  add_transmitters (builder, study);
  add_links (builder, study);
  add_terminals (builder, "limiting_group", study, study->limiting_group);
  ut_report_add_edge (builder, study);
  add_terminals (builder, "dropped", study, study->dropped);
  ut_report_add_remedies (builder, study);
  json_builder_set_member_name (builder, "drop_proved");
  json_builder_add_boolean_value (builder, study->dropping.proved);
  json_builder_set_member_name (builder, "drop_bounds");
  json_builder_begin_array (builder);
  json_builder_add_double_value (builder, study->dropping.at_least);
  json_builder_add_double_value (builder, study->dropping.total);
  json_builder_end_array (builder);
  json_builder_set_member_name (builder, "warnings");
  json_builder_begin_array (builder);
  for (guint i = 0; i < study->warnings->len; i++)
    json_builder_add_string_value (builder, study->warnings->pdata[i]);
  json_builder_end_array (builder);
  json_builder_end_object (builder);

  g_autoptr (JsonNode) root = json_builder_get_root (builder);
  return ut_json_text (root);
}

static char *
number_or_empty (double value)
{
  char buffer[G_ASCII_DTOSTR_BUF_SIZE];

  return g_strdup (isfinite (value) ? ut_number_text (value, buffer) : "");
}

char *
ut_report_study_csv (const UtStudy *study)
{
  static const char *const header[] = { "terminal",   "cell",       "power_dbm",        "target_db",  "level_target_dbm",
                                        "sinr_db",    "margin_db",  "signal_dbm",       "noise_dbm",  "interference_dbm",
                                        "reserve_db", "dropped",    "probability", NULL };
  g_autoptr (UtTable) table = ut_table_new (header);
  GString *out = g_string_new (NULL);

  for (guint i = 0; i < study->links->len; i++)
    {
      const UtLinkAnswer *link = ut_study_link (study, i);
      const double figures[] = { link->power_dbm,  link->target_db, link->level_target_dbm, link->sinr_db,   link->margin_db,
                                 link->signal_dbm, link->noise_dbm, link->interference_dbm, link->reserve_db };

      ut_table_add (table, g_strdup (ut_plan_terminal (study->gains->plan, link->terminal)->radio.id));
      ut_table_add (table, g_strdup (link->cell < 0 ? "" : cell_id (study, link->cell)));
      for (guint k = 0; k < G_N_ELEMENTS (figures); k++)
        ut_table_add (table, number_or_empty (figures[k]));
      ut_table_add (table, g_strdup (link->dropped ? "true" : "false"));
      ut_table_add (table, number_or_empty (link->chance));
    }
  ut_table_csv (table, out);
  return g_string_free (out, FALSE);
}

static void
append_transmitters (const UtStudy *study, GString *out)
{
  gboolean elements = study->gains->plan->carrier->resource_blocks > 0;
  const char *const header[] = { "Sends", ">Power dBm", ">least", ">most", ">EIRP dBm", ">Keep off m", elements ? ">Element dBm" : "Name", elements ? "Name" : NULL, NULL };
  g_autoptr (UtTable) table = ut_table_new (header);

  for (guint i = 0; i < study->transmitters->len; i++)
    {
      const UtTransmitterAnswer *sender = ut_study_transmitter (study, i);
      const UtRadio *radio = transmitter_radio (study, sender);

      ut_table_add (table, g_strdup (radio->id));
      ut_table_add (table, ut_report_figure (sender->power_dbm, 2));
      ut_table_add (table, ut_report_figure (sender->power_min_dbm, 1));
      ut_table_add (table, ut_report_figure (sender->power_max_dbm, 1));
      ut_table_add (table, ut_report_figure (sender->eirp_dbm, 2));
      ut_table_add (table, ut_report_figure (sender->compliance_m, 2));
      if (elements)
        ut_table_add (table, ut_report_figure (sender->element_dbm, 2));
      ut_table_add (table, g_strconcat (radio->name, sender->idle ? " (serves nobody)" : "", NULL));
    }
  ut_table_text (table, out);
  g_string_append (out, "Keep off: a screening estimate of the general public's exposure distance at full power; local rules take precedence.\n");
}

static char *
strongest_interferer (const UtLinkAnswer *link)
{
  if (link->interferers->len == 0)
    return g_strdup ("–");
  const UtInterferer *one = &g_array_index (link->interferers, UtInterferer, 0);
  g_autofree char *dbm = ut_report_figure (one->dbm, 1);
  return g_strdup_printf ("%s %s", one->id, dbm);
}

static void
append_links (const UtStudy *study, GString *out)
{
  gboolean chances = study->gains->plan->propagation->shadowing_db > 0;
  const char *const header[] = { "Terminal",     "Cell",         ">Power dBm",  ">Target dB",   ">SINR dB",           ">Margin dB",
                                 ">Reserve dB",  ">Signal dBm",  ">Noise dBm",  ">Interf. dBm", "Loudest interferer", chances ? ">Chance %" : "Name",
                                 chances ? "Name" : NULL, NULL };
  g_autoptr (UtTable) table = ut_table_new (header);

  for (guint i = 0; i < study->links->len; i++)
    {
      const UtLinkAnswer *link = ut_study_link (study, i);
      const UtRadio *terminal = &ut_plan_terminal (study->gains->plan, link->terminal)->radio;

      ut_table_add (table, g_strdup (terminal->id));
      ut_table_add (table, g_strdup (link->cell < 0 ? "–" : cell_id (study, link->cell)));
      ut_table_add (table, ut_report_figure (link->power_dbm, 2));
      ut_table_add (table, ut_report_figure (link->target_db, 1));
      ut_table_add (table, ut_report_figure (link->sinr_db, 2));
      ut_table_add (table, ut_report_figure (link->margin_db, 2));
      ut_table_add (table, ut_report_figure (link->reserve_db, 2));
      ut_table_add (table, ut_report_figure (link->signal_dbm, 1));
      ut_table_add (table, ut_report_figure (link->noise_dbm, 1));
      ut_table_add (table, ut_report_figure (link->interference_dbm, 1));
      ut_table_add (table, strongest_interferer (link));
      if (chances)
        ut_table_add (table, ut_report_figure (100 * link->chance, 1));
      ut_table_add (table, g_strdup (terminal->name));
    }
  ut_table_text (table, out);
  if (chances)
    g_string_append_printf (out,
                            "Chance: to keep the SINR target at these powers when every path scatters by %g dB about its median; to first order.\n",
                            study->gains->plan->propagation->shadowing_db);
}

char *
ut_report_study_text (const UtStudy *study)
{
  GString *out = g_string_new (NULL);
  g_autofree char *sentence = ut_report_verdict_sentence (study);
  g_autofree char *headroom = ut_report_figure (study->headroom_db, 2);
  g_autofree char *radius = ut_report_figure (study->spectral_radius, 4);
  g_autofree char *hold = ut_report_figure (study->question.hold_db, 1);

  if (study->gains->plan->title[0] != '\0')
    g_string_append_printf (out, "%s\n\n", study->gains->plan->title);
  g_string_append_printf (out, "%s\n\n", sentence);
  g_string_append_printf (out, "Verdict          %s\n", ut_verdict_word (study->verdict));
  g_string_append_printf (out, "Headroom         %s dB\n", headroom);
  g_string_append_printf (out, "Spectral radius  %s\n", radius);
  g_string_append_printf (out, "Direction        %slink\n", ut_direction_word (study->question.direction));
  g_string_append_printf (out, "Aim              %s", ut_aim_word (study->question.aim));
  if (study->question.hold_db > 0)
    g_string_append_printf (out, ", %s dB in hand", hold);
  if (study->fallback != UT_FALLBACK_NONE)
    g_string_append_printf (out, "; has no answer, shown instead: %s", ut_fallback_word (study->fallback));
  g_string_append (out, "\n\n");
  append_transmitters (study, out);
  g_string_append_c (out, '\n');
  append_links (study, out);
  ut_report_append_edge (study, out);
  return g_string_free (out, FALSE);
}
