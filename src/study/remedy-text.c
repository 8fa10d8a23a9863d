/* Remedies in words. */
#include "remedies.h"

#include <math.h>

#include "report.h"

static const char *const kind_words[] = {
  [UT_REMEDY_LOWER_TARGETS] = "lower-targets",
  [UT_REMEDY_LOWER_TARGET] = "lower-target",
  [UT_REMEDY_DROP_LINK] = "drop-link",
  [UT_REMEDY_OTHER_CELL] = "other-cell",
  [UT_REMEDY_LEAVE_OUT_CELL] = "leave-out-cell",
  [UT_REMEDY_WEAKEN_PATH] = "weaken-path",
  [UT_REMEDY_RAISE_LIMITS] = "raise-limits",
  [UT_REMEDY_PADS] = "pads",
};

const char *
ut_remedy_word (UtRemedyKind kind)
{
  return kind_words[kind];
}

/* Up to the next tenth: what is told must heal too. */
static char *
tenths_up (double value)
{
  return ut_report_figure (ceil (value * 10 - 1e-9) / 10, 1);
}

static const char *
transmitter_id (const UtStudy *study, const UtRemedy *remedy, guint k)
{
  guint index = g_array_index (remedy->transmitters, guint, k);

  return study->question.direction == UT_DIRECTION_DOWN ? ut_plan_cell (study->gains->plan, index)->radio.id
                                                        : ut_plan_terminal (study->gains->plan, index)->radio.id;
}

/* A sentence names no more. */
#define MOST_NAMES 6

static char *
list_transmitters (const UtStudy *study, const UtRemedy *remedy)
{
  GString *names = g_string_new (NULL);

  for (guint k = 0; k < remedy->transmitters->len; k++)
    {
      if (k == MOST_NAMES && remedy->transmitters->len > MOST_NAMES + 1)
        {
          g_string_append_printf (names, " and %u more", remedy->transmitters->len - k);
          break;
        }
      g_string_append_printf (names, "%s%s", k == 0 ? "" : ", ", transmitter_id (study, remedy, k));
      if (remedy->to_dbm->len > k)
        {
          g_autofree char *dbm = tenths_up (g_array_index (remedy->to_dbm, double, k));

          g_string_append_printf (names, " to %s dBm", dbm);
        }
    }
  return g_string_free (names, FALSE);
}

static char *
what_to_do (const UtStudy *study, const UtRemedy *remedy)
{
  const UtPlan *plan = study->gains->plan;
  const char *terminal = remedy->terminal < 0 ? NULL : ut_plan_terminal (plan, (guint) remedy->terminal)->radio.id;
  const char *cell = remedy->cell < 0 ? NULL : ut_plan_cell (plan, (guint) remedy->cell)->radio.id;
  g_autofree char *by = isnan (remedy->by_db) ? NULL : tenths_up (remedy->by_db);
  g_autofree char *names = list_transmitters (study, remedy);

  switch (remedy->kind)
    {
    case UT_REMEDY_LOWER_TARGETS:
      return g_strdup_printf ("Lower every target by %s dB", by);
    case UT_REMEDY_LOWER_TARGET:
      return g_strdup_printf ("Lower the target of %s alone by %s dB", terminal, by);
    case UT_REMEDY_DROP_LINK:
      return g_strdup_printf ("Leave out %s", terminal);
    case UT_REMEDY_OTHER_CELL:
      return g_strdup_printf ("Serve %s from %s", terminal, cell);
    case UT_REMEDY_LEAVE_OUT_CELL:
      return g_strdup_printf ("Leave out cell %s altogether", cell);
    case UT_REMEDY_WEAKEN_PATH:
      return g_strdup_printf ("Weaken the path between %s and %s by %s dB", cell, terminal, by);
    case UT_REMEDY_RAISE_LIMITS:
      return g_strdup_printf ("Allow more power: %s", names);
    case UT_REMEDY_PADS:
      return g_strdup_printf ("Put %s of %g dB behind %s", remedy->transmitters->len > 1 ? "attenuators" : "an attenuator", remedy->by_db, names);
    }
  g_return_val_if_reached (NULL);
}

char *
ut_remedy_sentence (const UtStudy *study, const UtRemedy *remedy)
{
  g_autofree char *what = what_to_do (study, remedy);
  g_autofree char *headroom = ut_report_figure (remedy->headroom_db, 1);

  if (!isfinite (remedy->headroom_db) || remedy->headroom_db < 0.05)
    return g_strdup_printf ("%s.", what);
  return g_strdup_printf ("%s: %s dB to spare then.", what, headroom);
}
