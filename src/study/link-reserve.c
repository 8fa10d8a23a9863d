/* Reserve: how far one target alone can change (docs/methods.md, "Reserve"). */
#include <math.h>

#include "decibel.h"
#include "least.h"
#include "links.h"
#include "reserve.h"

#define MOST_ROUNDS 200

/* The plan without the target of one link, whose sender stands at `power_mw` or more instead. */
typedef struct
{
  UtLinks trial;
  guint index;
  UtPowers powers; /* least ones at the last power tried */
} Question;

static UtLink *
asked (Question *question)
{
  return &g_array_index (question->trial.links, UtLink, question->index);
}

/* Far below any target, and still a number the system takes. */
#define NO_TARGET 1e-200

/* The sender of the link stands at power_mw at least: its cell for all of that cell's links, or itself. */
static void
hold_sender (Question *question, double power_mw)
{
  UtLinks *trial = &question->trial;

  for (guint i = 0; i < trial->links->len; i++)
    if (i == question->index
        || (trial->direction == UT_DIRECTION_DOWN && ut_links_link (trial, i)->cell == asked (question)->cell))
      g_array_index (trial->links, UtLink, i).minimum_mw = power_mw;
}

/* How full the fullest limit is when the link's sender stands at power_mw, least powers otherwise; INFINITY where there are none. */
static double
fullest (Question *question, double power_mw)
{
  UtSystem system;
  g_autofree double *p = g_new0 (double, MAX (question->trial.n_unknowns, 1));
  double most = INFINITY;

  /* In the simultaneous downlink a link's own power is an unknown; its level can stand for "at least". */
  if (question->trial.simultaneous && question->trial.direction == UT_DIRECTION_DOWN)
    asked (question)->level_mw = power_mw * asked (question)->gain;
  else
    hold_sender (question, power_mw);
  if (ut_links_system (&question->trial, FALSE, &system) == UT_POWER_OK
      && ut_least_powers (&system, 1, UT_LIFT_LIMITS, p, NULL) == UT_POWER_OK && !system.minimum_above_limit)
    {
      most = 0;
      for (size_t k = 0; k < system.n_limits; k++)
        most = fmax (most, ut_system_limit_sum (&system, k, p) / system.limits[k].limit);
      ut_links_powers (&question->trial, p, &question->powers);
    }
  ut_system_clear (&system);
  return most;
}

/* SINR over target of the link at the powers last tried. */
static double
achieved (Question *question, const UtLink *link)
{
  g_autoptr (GArray) heard = g_array_new (FALSE, FALSE, sizeof (UtInterference));
  double sum_mw = link->noise_mw;

  ut_links_interference (&question->trial, &question->powers, question->index, heard);
  for (guint i = 0; i < heard->len; i++)
    sum_mw += g_array_index (heard, UtInterference, i).mw;
  return question->powers.link_mw[question->index] * link->gain / (link->need * sum_mw);
}

/* The largest power at which all limits are kept, between low_mw (kept) and high_mw (not): by the convexity of how full they are
 * the chord's crossing keeps them, and halving guards against slow ends. */
static double
largest_kept (Question *question, double low_mw, double low_full, double high_mw, double high_full)
{
  for (int round = 0; round < MOST_ROUNDS && high_mw > low_mw * (1 + 1e-13); round++)
    {
      double middle_mw = round % 3 == 2 || !isfinite (high_full) ? sqrt (low_mw * high_mw)
                                                               : low_mw + (high_mw - low_mw) * (1 - low_full) / (high_full - low_full);
      double full;

      if (!(middle_mw > low_mw && middle_mw < high_mw))
        middle_mw = 0.5 * (low_mw + high_mw);
      full = fullest (question, middle_mw);
      if (full <= 1)
        {
          if (middle_mw <= low_mw)
            break;
          low_mw = middle_mw;
          low_full = full;
          if (full > 1 - 1e-14)
            break;
        }
      else
        {
          high_mw = middle_mw;
          high_full = full;
        }
    }
  return low_mw;
}

/* A link's SINR rises with its sender's power, whatever the others have to do about it: the more power, the smaller the part of the
 * interference that does not follow it. So the largest target goes with the largest power that all limits allow. */
static double
reserve_by_search (const UtLinks *links, guint index)
{
  const UtLink *link = ut_links_link (links, index);
  Question question = { .trial = *links, .index = index, .powers = ut_powers_new (links) };
  double reserve_db = NAN, least_mw, least_full, most_full;

  question.trial.links = g_array_copy (links->links);
  asked (&question)->need = NO_TARGET;
  least_full = fullest (&question, MAX (link->minimum_mw, link->level_mw / link->gain));
  least_mw = question.powers.link_mw[index];
  if (least_full <= 1 + UT_LIMIT_SLACK && link->limit_mw >= least_mw * (1 - UT_LIMIT_SLACK))
    {
      most_full = fullest (&question, link->limit_mw);
      if (most_full > 1 + UT_LIMIT_SLACK && least_full < 1)
        fullest (&question, largest_kept (&question, MAX (least_mw, link->limit_mw * 1e-40), least_full, link->limit_mw, most_full));
      else if (most_full > 1 + UT_LIMIT_SLACK)
        fullest (&question, least_mw);
      reserve_db = ut_db_from_ratio (achieved (&question, link));
    }
  ut_powers_clear (&question.powers);
  g_array_unref (question.trial.links);
  return isfinite (reserve_db) ? reserve_db : NAN;
}

/* With an unknown a link one inverse answers nearly all. */
static void
reserves_at_once (const UtLinks *links, double *factor, UtReserveStatus *status)
{
  UtSystem system;

  if (links->simultaneous && ut_links_system (links, FALSE, &system) == UT_POWER_OK)
    {
      UtPowerStatus outcome = system.minimum_above_limit ? UT_POWER_INVALID : ut_reserves (&system, factor, status);

      for (guint i = 0; i < links->n_unknowns && outcome != UT_POWER_OK; i++)
        status[i] = UT_RESERVE_UNSETTLED;
    }
  if (links->simultaneous)
    ut_system_clear (&system);
}

void
ut_links_reserves_db (const UtLinks *links, GCancellable *cancellable, double *reserve_db)
{
  g_autofree double *factor = g_new0 (double, MAX (links->n_unknowns, 1));
  g_autofree UtReserveStatus *status = g_new0 (UtReserveStatus, MAX (links->n_unknowns, 1));

  reserves_at_once (links, factor, status);
  for (guint i = 0; i < links->links->len && !g_cancellable_is_cancelled (cancellable); i++)
    {
      int unknown = links->simultaneous ? links->link_unknown[i] : -1;

      if (unknown < 0 || status[unknown] == UT_RESERVE_UNSETTLED)
        reserve_db[i] = reserve_by_search (links, i);
      else
        reserve_db[i] = status[unknown] == UT_RESERVE_FOUND ? ut_db_from_ratio (factor[unknown]) : NAN;
    }
}
