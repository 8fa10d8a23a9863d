#include "report.h"

#include <math.h>

#include <glib/gi18n-lib.h>

#include "decibel.h"

char *
ut_report_figure (double value, int decimals)
{
  char format[] = "%.1f", buffer[G_ASCII_DTOSTR_BUF_SIZE];
  double half = 0.5 * pow (10, -decimals);

  if (!isfinite (value))
    return g_strdup ("–");
  format[2] = (char) ('0' + CLAMP (decimals, 0, 9));
  /* What rounds to nothing has no sign. */
  return g_strdup (g_ascii_formatd (buffer, sizeof buffer, format, fabs (value) < half ? 0 : value));
}

/* "T3", "T3 and T7", "T3, T7 and 4 more". */
static char *
name_terminals (const UtStudy *study, const GArray *terminals)
{
  const UtPlan *plan = study->gains->plan;
  GString *names = g_string_new (NULL);
  guint shown = terminals->len <= 4 ? terminals->len : 3;

  for (guint i = 0; i < shown; i++)
    {
      if (i > 0)
        g_string_append (names, i + 1 == terminals->len ? _ (" and ") : ", ");
      g_string_append (names, ut_plan_terminal (plan, g_array_index (terminals, guint, i))->radio.id);
    }
  if (shown < terminals->len)
    g_string_append_printf (names, _ (" and %u more"), terminals->len - shown);
  return g_string_free (names, FALSE);
}

/* By how many dB the sum of what transmits lies under the sum as set; NAN where nothing transmits. */
static double
saved_db (const UtStudy *study)
{
  const UtPlan *plan = study->gains->plan;
  double set_mw = 0, chosen_mw = 0;

  for (guint i = 0; i < study->transmitters->len; i++)
    {
      const UtTransmitterAnswer *sender = ut_study_transmitter (study, i);
      const UtRadio *radio = sender->is_cell ? &ut_plan_cell (plan, sender->index)->radio
                                             : &ut_plan_terminal (plan, sender->index)->radio;

      set_mw += ut_mw_from_dbm (radio->power_dbm);
      chosen_mw += isnan (sender->power_dbm) ? 0 : ut_mw_from_dbm (sender->power_dbm);
    }
  return chosen_mw > 0 && set_mw > 0 ? ut_db_from_ratio (set_mw / chosen_mw) : NAN;
}

/* "the one target", within a sentence. */
static char *
all_targets (guint n)
{
  return n == 1 ? g_strdup (_ ("the one target")) : n == 2 ? g_strdup (_ ("both targets")) : g_strdup_printf (_ ("all %u targets"), n);
}

/* As set: who falls short, and that other powers would heal it. */
static char *
as_set_sentence (const UtStudy *study, const char *headroom)
{
  g_autoptr (GArray) failing = g_array_new (FALSE, FALSE, sizeof (guint));
  double worst_db = 0;
  guint n = study->links->len;

  for (guint i = 0; i < n; i++)
    {
      const UtLinkAnswer *link = ut_study_link (study, i);

      if (link->margin_db >= UT_MARGIN_MET_DB)
        continue;
      g_array_append_val (failing, link->terminal);
      worst_db = fmin (worst_db, link->margin_db);
    }
  if (failing->len == 0 && n == 1)
    return g_strdup_printf (_ ("The one target is met as set; with powers that suit there would be %s dB to spare."), headroom);
  if (failing->len == 0 && n == 2)
    return g_strdup_printf (_ ("Both targets are met as set; with powers that suit there would be %s dB to spare."), headroom);
  if (failing->len == 0)
    return g_strdup_printf (_ ("All %u targets are met as set; with powers that suit there would be %s dB to spare."), n, headroom);
  g_autofree char *names = name_terminals (study, failing);
  g_autofree char *short_by = ut_report_figure (-worst_db, 1);
  g_autofree char *all = all_targets (n);
  return g_strdup_printf (failing->len == 1 ? _ ("As set %s falls short, by %s dB; with powers that suit %s can be met, with %s dB to spare.")
                                            : _ ("As set %s fall short, the worst by %s dB; with powers that suit %s can be met, with %s dB to spare."),
                          names,
                          short_by,
                          all,
                          headroom);
}

static char *
met_sentence (const UtStudy *study)
{
  g_autofree char *headroom = ut_report_figure (study->headroom_db, 1);
  g_autofree char *saved = ut_report_figure (fabs (saved_db (study)), 1);
  gboolean less = saved_db (study) >= 0;
  guint n = study->links->len;

  if (study->question.aim == UT_AIM_AS_SET)
    return as_set_sentence (study, headroom);
  if (n == 1)
    return g_strdup_printf (less ? _ ("The one target is met. The powers add up to %s dB less than set; it could rise by %s dB.")
                                 : _ ("The one target is met. The powers add up to %s dB more than set; it could rise by %s dB."),
                            saved,
                            headroom);
  if (n == 2)
    return g_strdup_printf (less ? _ ("Both targets are met. The powers add up to %s dB less than set; every one could rise by %s dB.")
                                 : _ ("Both targets are met. The powers add up to %s dB more than set; every one could rise by %s dB."),
                            saved,
                            headroom);
  return g_strdup_printf (less ? _ ("All %u targets are met. The powers add up to %s dB less than set; every one could rise by %s dB.")
                               : _ ("All %u targets are met. The powers add up to %s dB more than set; every one could rise by %s dB."),
                          n,
                          saved,
                          headroom);
}

/* Noise- or level-limited: who, and by how much the worst. */
static char *
alone_sentence (const UtStudy *study)
{
  g_autofree char *names = name_terminals (study, study->limiting_group);
  double worst_db = -INFINITY;
  gboolean no_cell = FALSE;

  for (guint i = 0; i < study->lacks_db->len; i++)
    if (isnan (g_array_index (study->lacks_db, double, i)))
      no_cell = TRUE;
    else
      worst_db = fmax (worst_db, g_array_index (study->lacks_db, double, i));
  if (no_cell)
    return g_strdup_printf (_ ("Without a cell that is on to serve, or out of reach even at full power: %s."), names);
  g_autofree char *lack = ut_report_figure (worst_db, 1);
  if (study->verdict == UT_VERDICT_LEVEL_LIMITED)
    return g_strdup_printf (_ ("The level asked for cannot be reached at full power: %s; the worst lacks %s dB."), names, lack);
  return g_strdup_printf (_ ("Out of reach even at full power with everyone else silent: %s; the worst lacks %s dB."), names, lack);
}

char *
ut_report_verdict_sentence (const UtStudy *study)
{
  g_autofree char *lower = ut_report_figure (-study->headroom_db, 1);
  g_autofree char *heals = isnan (study->headroom_db)
                             ? g_strdup (_ ("No common change of the targets heals that."))
                             : g_strdup_printf (_ ("Lowering every target by %s dB would heal it."), lower);
  g_autofree char *group = name_terminals (study, study->limiting_group);
  guint n = study->links->len;

  if (n == 0)
    return g_strdup (study->question.direction == UT_DIRECTION_UP ? _ ("There is no uplink target to meet.") : _ ("There is no downlink target to meet."));
  switch (study->verdict)
    {
    case UT_VERDICT_MET:
      return met_sentence (study);
    case UT_VERDICT_NOISE_LIMITED:
    case UT_VERDICT_LEVEL_LIMITED:
      return alone_sentence (study);
    case UT_VERDICT_INTERFERENCE_LIMITED:
      return g_strdup_printf (_ ("No powers whatever can meet all %u targets: %s hold each other back. %s"),
                              n,
                              study->limiting_group->len > 1 ? group : _ ("the links"),
                              heals);
    case UT_VERDICT_POWER_LIMITED:
      return g_strdup_printf (_ ("The %u targets need more power than the limits allow. %s"), n, heals);
    case UT_VERDICT_MINIMUM_LIMITED:
      return g_strdup_printf (_ ("Only the lowest powers of the radios stand in the way of the %u targets: some cannot be turned down far enough. %s"),
                              n,
                              heals);
    case UT_VERDICT_STEP_LIMITED:
      return g_strdup_printf (_ ("Powers for all %u targets exist, but not on the radios' steps."), n);
    }
  g_return_val_if_reached (NULL);
}
