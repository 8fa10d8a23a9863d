/* Limiting group, blame and remedies as JSON and text. */
#include "report-private.h"

#include <math.h>

#include "remedies.h"

void
ut_report_add_figure (JsonBuilder *builder, const char *key, double value)
{
  json_builder_set_member_name (builder, key);
  if (isfinite (value))
    json_builder_add_double_value (builder, value);
  else
    json_builder_add_null_value (builder);
}

void
ut_report_add_text (JsonBuilder *builder, const char *key, const char *text)
{
  json_builder_set_member_name (builder, key);
  if (text != NULL)
    json_builder_add_string_value (builder, text);
  else
    json_builder_add_null_value (builder);
}

/* A transmitter of the answer's direction. */
static const char *
transmitter_id (const UtStudy *study, int index)
{
  const UtPlan *plan = study->gains->plan;

  if (index < 0)
    return NULL;
  return study->question.direction == UT_DIRECTION_DOWN ? ut_plan_cell (plan, (guint) index)->radio.id
                                                        : ut_plan_terminal (plan, (guint) index)->radio.id;
}

static const char *
terminal_id (const UtStudy *study, guint index)
{
  return ut_plan_terminal (study->gains->plan, index)->radio.id;
}

static void
add_edge (JsonBuilder *builder, const UtStudy *study)
{
  const UtEdgeAnswer *edge = &study->edge;

  json_builder_set_member_name (builder, "edge");
  if (!edge->known)
    {
      json_builder_add_null_value (builder);
      return;
    }
  json_builder_begin_object (builder);
  ut_report_add_text (builder, "set_by", edge->by_interference ? "interference" : "limit");
  ut_report_add_text (builder, "at_limit", transmitter_id (study, edge->at_limit));
  ut_report_add_figure (builder, "noise_part", edge->noise_part);
  json_builder_set_member_name (builder, "blame");
  json_builder_begin_array (builder);
  for (guint i = 0; i < edge->blame->len; i++)
    {
      const UtBlame *blame = &g_array_index (edge->blame, UtBlame, i);

      json_builder_begin_object (builder);
      ut_report_add_text (builder, "terminal", terminal_id (study, blame->terminal));
      ut_report_add_text (builder, "because_of", transmitter_id (study, blame->because_of));
      ut_report_add_figure (builder, "part", blame->part);
      json_builder_end_object (builder);
    }
  json_builder_end_array (builder);
  json_builder_set_member_name (builder, "chain");
  json_builder_begin_array (builder);
  for (guint i = 0; i < edge->chain->len; i++)
    {
      const UtCause *cause = &g_array_index (edge->chain, UtCause, i);

      json_builder_begin_object (builder);
      ut_report_add_text (builder, "transmitter", transmitter_id (study, (int) cause->transmitter));
      ut_report_add_text (builder, "terminal", terminal_id (study, cause->terminal));
      ut_report_add_text (builder, "because_of", transmitter_id (study, cause->because_of));
      ut_report_add_figure (builder, "part", cause->part);
      json_builder_end_object (builder);
    }
  json_builder_end_array (builder);
  json_builder_end_object (builder);
}

/* What each noise- or level-limited link lacks, beside limiting_group. */
static void
add_lacks (JsonBuilder *builder, const UtStudy *study)
{
  json_builder_set_member_name (builder, "limiting_lacks_db");
  json_builder_begin_array (builder);
  for (guint i = 0; i < study->lacks_db->len; i++)
    {
      double lacks_db = g_array_index (study->lacks_db, double, i);

      if (isfinite (lacks_db))
        json_builder_add_double_value (builder, lacks_db);
      else
        json_builder_add_null_value (builder);
    }
  json_builder_end_array (builder);
}

void
ut_report_add_edge (JsonBuilder *builder, const UtStudy *study)
{
  add_lacks (builder, study);
  add_edge (builder, study);
}

static void
add_transmitters (JsonBuilder *builder, const UtStudy *study, const UtRemedy *remedy)
{
  json_builder_set_member_name (builder, "transmitters");
  json_builder_begin_array (builder);
  for (guint i = 0; i < remedy->transmitters->len; i++)
    {
      json_builder_begin_object (builder);
      ut_report_add_text (builder, "id", transmitter_id (study, (int) g_array_index (remedy->transmitters, guint, i)));
      ut_report_add_figure (builder, "to_dbm", i < remedy->to_dbm->len ? g_array_index (remedy->to_dbm, double, i) : NAN);
      json_builder_end_object (builder);
    }
  json_builder_end_array (builder);
}

void
ut_report_add_remedies (JsonBuilder *builder, const UtStudy *study)
{
  json_builder_set_member_name (builder, "remedies");
  json_builder_begin_array (builder);
  for (guint i = 0; study->remedies != NULL && i < study->remedies->len; i++)
    {
      const UtRemedy *remedy = study->remedies->pdata[i];
      g_autofree char *sentence = ut_remedy_sentence (study, remedy);

      json_builder_begin_object (builder);
      ut_report_add_text (builder, "kind", ut_remedy_word (remedy->kind));
      ut_report_add_text (builder, "terminal", remedy->terminal < 0 ? NULL : terminal_id (study, (guint) remedy->terminal));
      ut_report_add_text (builder, "cell", remedy->cell < 0 ? NULL : ut_plan_cell (study->gains->plan, (guint) remedy->cell)->radio.id);
      add_transmitters (builder, study, remedy);
      ut_report_add_figure (builder, "by_db", remedy->by_db);
      ut_report_add_figure (builder, "headroom_db", remedy->headroom_db);
      ut_report_add_text (builder, "text", sentence);
      json_builder_end_object (builder);
    }
  json_builder_end_array (builder);
}

/* "45 %" */
static char *
per_cent (double part)
{
  g_autofree char *figure = ut_report_figure (100 * part, part < 0.0995 ? 1 : 0);

  return g_strconcat (figure, " %", NULL);
}

static void
append_blame (const UtStudy *study, GString *out)
{
  const UtEdgeAnswer *edge = &study->edge;
  g_autofree char *noise = per_cent (edge->noise_part);
  guint shown = MIN (edge->blame->len, 5);

  g_string_append (out, "Set by           ");
  for (guint i = 0; i < shown; i++)
    {
      const UtBlame *blame = &g_array_index (edge->blame, UtBlame, i);
      g_autofree char *part = per_cent (blame->part);

      g_string_append_printf (out,
                              "%s%s at %s (%s)",
                              i == 0 ? "" : ", ",
                              transmitter_id (study, blame->because_of),
                              terminal_id (study, blame->terminal),
                              part);
    }
  if (edge->noise_part >= 5e-4)
    g_string_append_printf (out, "%snoise (%s)", shown > 0 ? ", " : "", noise);
  g_string_append_c (out, '\n');
}

static void
append_chain (const UtStudy *study, GString *out)
{
  const GArray *chain = study->edge.chain;

  if (chain->len == 0)
    return;
  g_string_append (out, "At its limit     ");
  for (guint i = 0; i < chain->len; i++)
    {
      const UtCause *cause = &g_array_index (chain, UtCause, i);
      const char *because_of = transmitter_id (study, cause->because_of);
      g_autofree char *part = per_cent (cause->part);

      g_string_append_printf (out,
                              "%s%s%s%s, mostly because of %s (%s)",
                              i == 0 ? "" : "; ",
                              transmitter_id (study, (int) cause->transmitter),
                              study->question.direction == UT_DIRECTION_DOWN ? " for " : "",
                              study->question.direction == UT_DIRECTION_DOWN ? terminal_id (study, cause->terminal) : "",
                              because_of != NULL ? because_of : "noise",
                              part);
    }
  g_string_append_c (out, '\n');
}

void
ut_report_append_edge (const UtStudy *study, GString *out)
{
  g_string_append_c (out, '\n');
  g_string_append (out, "Limiting group   ");
  for (guint i = 0; i < study->limiting_group->len; i++)
    {
      double lacks_db = i < study->lacks_db->len ? g_array_index (study->lacks_db, double, i) : NAN;
      g_autofree char *lacks = ut_report_figure (lacks_db, 1);

      g_string_append_printf (out, "%s%s", i == 0 ? "" : ", ", terminal_id (study, g_array_index (study->limiting_group, guint, i)));
      if (i < study->lacks_db->len)
        g_string_append_printf (out, isnan (lacks_db) ? " (no cell)" : " (lacks %s dB)", lacks);
    }
  g_string_append (out, study->limiting_group->len > 0 ? "\n" : "–\n");
  if (study->edge.known)
    {
      append_blame (study, out);
      append_chain (study, out);
    }
  if (study->remedies == NULL || study->remedies->len == 0)
    return;
  g_string_append (out, "\nWhat would help, each verified by solving again\n");
  for (guint i = 0; i < study->remedies->len; i++)
    {
      g_autofree char *sentence = ut_remedy_sentence (study, study->remedies->pdata[i]);

      g_string_append_printf (out, "  %s\n", sentence);
    }
}
