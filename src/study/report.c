#include "report.h"

#include <math.h>

#include "decibel.h"
#include "words.h"

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
        g_string_append (names, i + 1 == terminals->len ? " and " : ", ");
      g_string_append (names, ut_plan_terminal (plan, g_array_index (terminals, guint, i))->radio.id);
    }
  if (shown < terminals->len)
    g_string_append_printf (names, " and %u more", terminals->len - shown);
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

/* As set: who falls short, and that other powers would heal it. */
static char *
as_set_sentence (const UtStudy *study, const char *all, const char *headroom)
{
  g_autoptr (GArray) failing = g_array_new (FALSE, FALSE, sizeof (guint));
  double worst_db = 0;

  for (guint i = 0; i < study->links->len; i++)
    {
      const UtLinkAnswer *link = ut_study_link (study, i);

      if (link->margin_db >= UT_MARGIN_MET_DB)
        continue;
      g_array_append_val (failing, link->terminal);
      worst_db = fmin (worst_db, link->margin_db);
    }
  if (failing->len == 0)
    return g_strdup_printf ("%s %s met as set; with powers that suit there would be %s dB to spare.",
                            all,
                            study->links->len == 1 ? "is" : "are",
                            headroom);
  g_autofree char *names = name_terminals (study, failing);
  g_autofree char *short_by = ut_report_figure (-worst_db, 1);
  g_autofree char *all_small = g_strdup_printf ("%c%s", g_ascii_tolower (all[0]), all + 1);
  return g_strdup_printf ("As set %s fall%s short, %s%s dB; with powers that suit %s can be met, with %s dB to spare.",
                          names,
                          failing->len == 1 ? "s" : "",
                          failing->len == 1 ? "by " : "the worst by ",
                          short_by,
                          all_small,
                          headroom);
}

static char *
met_sentence (const UtStudy *study)
{
  g_autofree char *headroom = ut_report_figure (study->headroom_db, 1);
  g_autofree char *saved = ut_report_figure (fabs (saved_db (study)), 1);
  const char *more_or_less = saved_db (study) >= 0 ? "less" : "more";
  g_autofree char *all = study->links->len == 1   ? g_strdup ("The one target")
                         : study->links->len == 2 ? g_strdup ("Both targets")
                                                  : g_strdup_printf ("All %u targets", study->links->len);
  const char *rise = study->links->len == 1 ? "it" : "every one";

  if (study->question.aim == UT_AIM_AS_SET)
    return as_set_sentence (study, all, headroom);
  return g_strdup_printf ("%s %s met. The powers add up to %s dB %s than set; %s could rise by %s dB.",
                          all,
                          study->links->len == 1 ? "is" : "are",
                          saved,
                          more_or_less,
                          rise,
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
    return g_strdup_printf ("Without a cell that is on to serve, or out of reach even at full power: %s.", names);
  g_autofree char *lack = ut_report_figure (worst_db, 1);
  if (study->verdict == UT_VERDICT_LEVEL_LIMITED)
    return g_strdup_printf ("The level asked for cannot be reached at full power: %s; the worst lacks %s dB.", names, lack);
  return g_strdup_printf ("Out of reach even at full power with everyone else silent: %s; the worst lacks %s dB.", names, lack);
}

char *
ut_report_verdict_sentence (const UtStudy *study)
{
  g_autofree char *lower = ut_report_figure (-study->headroom_db, 1);
  g_autofree char *heals = isnan (study->headroom_db)
                             ? g_strdup ("No common change of the targets heals that.")
                             : g_strdup_printf ("Lowering every target by %s dB would heal it.", lower);
  g_autofree char *group = name_terminals (study, study->limiting_group);
  guint n = study->links->len;

  if (n == 0)
    return g_strdup_printf ("There is no %slink target to meet.", ut_direction_word (study->question.direction));
  switch (study->verdict)
    {
    case UT_VERDICT_MET:
      return met_sentence (study);
    case UT_VERDICT_NOISE_LIMITED:
    case UT_VERDICT_LEVEL_LIMITED:
      return alone_sentence (study);
    case UT_VERDICT_INTERFERENCE_LIMITED:
      return g_strdup_printf ("No powers whatever can meet all %u targets: %s hold each other back. %s",
                              n,
                              study->limiting_group->len > 1 ? group : "the links",
                              heals);
    case UT_VERDICT_POWER_LIMITED:
      return g_strdup_printf ("The %u targets need more power than the limits allow. %s", n, heals);
    case UT_VERDICT_MINIMUM_LIMITED:
      return g_strdup_printf ("Only the lowest powers of the radios stand in the way of the %u targets: some cannot be turned down "
                              "far enough. %s",
                              n,
                              heals);
    case UT_VERDICT_STEP_LIMITED:
      return g_strdup_printf ("Powers for all %u targets exist, but not on the radios' steps.", n);
    }
  g_return_val_if_reached (NULL);
}
