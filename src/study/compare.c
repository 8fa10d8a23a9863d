#include "compare.h"

#include <math.h>

#include <glib/gi18n-lib.h>

#include "decibel.h"
#include "report.h"

#define SAME_DB 0.005

static void
row_free (gpointer data)
{
  UtComparisonRow *row = data;

  g_free (row->name);
  g_free (row->words);
  g_free (row);
}

/* Takes over name and words. */
static void
add (GPtrArray *rows, UtComparisonKind kind, char *name, double before, double after, guint decimals, char *words)
{
  UtComparisonRow *row = g_new (UtComparisonRow, 1);

  *row = (UtComparisonRow){ kind, name, before, after, decimals, words };
  g_ptr_array_add (rows, row);
}

static gboolean
differ (double before, double after)
{
  return isnan (before) != isnan (after) || fabs (before - after) >= SAME_DB;
}

/* ---- summary ---- */

static double
sum_dbm (const UtStudy *study)
{
  double sum_mw = 0;

  for (guint i = 0; i < study->transmitters->len; i++)
    if (!isnan (ut_study_transmitter (study, i)->power_dbm))
      sum_mw += ut_mw_from_dbm (ut_study_transmitter (study, i)->power_dbm);
  return sum_mw > 0 ? ut_dbm_from_mw (sum_mw) : NAN;
}

static double
n_met (const UtStudy *study)
{
  guint n = 0;

  for (guint i = 0; i < study->links->len; i++)
    n += ut_study_link (study, i)->margin_db >= UT_MARGIN_MET_DB;
  return n;
}

/* ---- the plan ---- */

static void
tell_radio (GPtrArray *rows, const UtRadio *before, const UtRadio *after, gboolean same_otherwise)
{
  const char *id = before != NULL ? before->id : after->id;

  if (before == NULL || after == NULL)
    {
      add (rows, UT_ROW_PLAN, g_strdup (id), NAN, NAN, 0, g_strdup (before == NULL ? _ ("added") : _ ("removed")));
      return;
    }
  double moved_m = hypot (after->x_m - before->x_m, after->y_m - before->y_m);
  if (moved_m > 5e-4)
    {
      g_autofree char *by = ut_report_figure (moved_m, 2);

      add (rows, UT_ROW_PLAN, g_strdup (id), NAN, NAN, 0, g_strdup_printf (_ ("moved by %s m"), by));
    }
  else if (!same_otherwise)
    add (rows, UT_ROW_PLAN, g_strdup (id), NAN, NAN, 0, g_strdup (_ ("changed")));
}

/* Items are compared by reference: an edit shares all it leaves alone. */
static void
tell_radios (GPtrArray *rows, const GPtrArray *before, const GPtrArray *after)
{
  g_autoptr (GHashTable) later = g_hash_table_new (g_str_hash, g_str_equal);

  for (guint i = 0; i < after->len; i++)
    g_hash_table_insert (later, ((const UtRadio *) after->pdata[i])->id, after->pdata[i]);
  for (guint i = 0; i < before->len; i++)
    {
      const UtRadio *was = before->pdata[i], *is = g_hash_table_lookup (later, was->id);

      if (was != is)
        tell_radio (rows, was, is, FALSE);
      g_hash_table_remove (later, was->id);
    }
  for (guint i = 0; i < after->len; i++)
    if (g_hash_table_contains (later, ((const UtRadio *) after->pdata[i])->id))
      tell_radio (rows, NULL, after->pdata[i], FALSE);
}

static void
tell_walls (GPtrArray *rows, const UtStorey *before, const UtStorey *after)
{
  for (guint i = 0; i < after->walls->len; i++)
    {
      const UtWall *is = after->walls->pdata[i];
      int was = ut_storey_find_wall (before, is->id);

      if (was < 0 || before->walls->pdata[was] != is)
        add (rows, UT_ROW_PLAN, g_strdup_printf (_ ("wall %s"), is->id), NAN, NAN, 0, g_strdup (was < 0 ? _ ("added") : _ ("changed")));
    }
  for (guint i = 0; i < before->walls->len; i++)
    {
      const UtWall *was = before->walls->pdata[i];

      if (ut_storey_find_wall (after, was->id) < 0)
        add (rows, UT_ROW_PLAN, g_strdup_printf (_ ("wall %s"), was->id), NAN, NAN, 0, g_strdup (_ ("removed")));
    }
}

static void
tell_plan (GPtrArray *rows, const UtPlan *before, const UtPlan *after)
{
  tell_radios (rows, before->cells, after->cells);
  tell_radios (rows, before->terminals, after->terminals);
  for (guint i = 0; i < after->storeys->len; i++)
    {
      const UtStorey *is = ut_plan_storey (after, i);
      int was = ut_plan_find_storey (before, is->id);

      if (was < 0)
        add (rows, UT_ROW_PLAN, g_strdup (is->name), NAN, NAN, 0, g_strdup (_ ("added")));
      else if (ut_plan_storey (before, (guint) was) != is)
        tell_walls (rows, ut_plan_storey (before, (guint) was), is);
    }
  if (before->carrier != after->carrier)
    add (rows, UT_ROW_PLAN, g_strdup (_ ("carrier")), NAN, NAN, 0, g_strdup (_ ("changed")));
  if (before->propagation != after->propagation)
    add (rows, UT_ROW_PLAN, g_strdup (_ ("propagation")), NAN, NAN, 0, g_strdup (_ ("changed")));
}

/* ---- powers and margins ---- */

static const char *
sender_id (const UtStudy *study, guint i)
{
  const UtTransmitterAnswer *sender = ut_study_transmitter (study, i);

  return sender->is_cell ? ut_plan_cell (study->gains->plan, sender->index)->radio.id : ut_plan_terminal (study->gains->plan, sender->index)->radio.id;
}

static double
power_of (const UtStudy *study, const char *id)
{
  for (guint i = 0; i < study->transmitters->len; i++)
    if (g_str_equal (sender_id (study, i), id))
      return ut_study_transmitter (study, i)->power_dbm;
  return NAN;
}

static const char *
link_id (const UtStudy *study, guint i)
{
  return ut_plan_terminal (study->gains->plan, ut_study_link (study, i)->terminal)->radio.id;
}

static double
margin_of (const UtStudy *study, const char *id)
{
  for (guint i = 0; i < study->links->len; i++)
    if (g_str_equal (link_id (study, i), id))
      return ut_study_link (study, i)->margin_db;
  return NAN;
}

GPtrArray *
ut_comparison_new (const UtStudy *before, const UtStudy *after)
{
  GPtrArray *rows = g_ptr_array_new_with_free_func (row_free);

  add (rows, UT_ROW_SUMMARY, g_strdup (_ ("headroom, dB")), before->headroom_db, after->headroom_db, 2, NULL);
  add (rows, UT_ROW_SUMMARY, g_strdup (_ ("sum of powers, dBm")), sum_dbm (before), sum_dbm (after), 2, NULL);
  add (rows, UT_ROW_SUMMARY, g_strdup (_ ("targets met")), n_met (before), n_met (after), 0, NULL);
  tell_plan (rows, before->gains->plan, after->gains->plan);
  for (guint i = 0; i < after->transmitters->len; i++)
    {
      double was = power_of (before, sender_id (after, i)), is = ut_study_transmitter (after, i)->power_dbm;

      if (differ (was, is))
        add (rows, UT_ROW_POWER, g_strdup_printf (_ ("power of %s, dBm"), sender_id (after, i)), was, is, 2, NULL);
    }
  for (guint i = 0; i < after->links->len; i++)
    {
      double was = margin_of (before, link_id (after, i)), is = ut_study_link (after, i)->margin_db;

      if (differ (was, is))
        add (rows, UT_ROW_MARGIN, g_strdup_printf (_ ("margin of %s, dB"), link_id (after, i)), was, is, 2, NULL);
    }
  return rows;
}

char *
ut_comparison_csv (const GPtrArray *rows)
{
  GString *csv = g_string_new ("what,before,after,change\r\n");

  for (guint i = 0; i < rows->len; i++)
    {
      const UtComparisonRow *row = rows->pdata[i];
      g_auto (GStrv) quotes = g_strsplit (row->name, "\"", -1);
      g_autofree char *name = g_strjoinv ("\"\"", quotes);
      g_autofree char *before = isnan (row->before) ? g_strdup ("") : ut_report_figure (row->before, (int) row->decimals);
      g_autofree char *after = isnan (row->after) ? g_strdup ("") : ut_report_figure (row->after, (int) row->decimals);
      g_autofree char *change = isnan (row->after - row->before) ? g_strdup (row->words != NULL ? row->words : "") : ut_report_figure (row->after - row->before, (int) row->decimals);

      g_string_append_printf (csv, "\"%s\",%s,%s,%s\r\n", name, before, after, change);
    }
  return g_string_free (csv, FALSE);
}
