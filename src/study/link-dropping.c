/* Which links to leave out so that the rest is met (docs/methods.md, "Fewest dropped"). */
#include <math.h>

#include "decibel.h"
#include "dropping.h"
#include "edge.h"
#include "headroom.h"
#include "least.h"
#include "links.h"

typedef struct
{
  const UtLinks *links;
  gboolean *keep;
  GCancellable *cancellable;
} Question;

/* The kept links; silence: cells that lose all of theirs fall silent, as if their lowest power were none. */
static UtLinks *
kept_links (Question *question, const bool *kept, gboolean silence)
{
  for (guint i = 0; i < question->links->links->len; i++)
    question->keep[i] = kept[i];
  return ut_links_subset (question->links, question->keep, silence);
}

gboolean
ut_links_can_be_met (const UtLinks *links)
{
  UtSystem system;
  gboolean met = TRUE;
  g_autofree double *p = g_new0 (double, MAX (links->n_unknowns, 1));

  for (guint i = 0; i < links->links->len; i++)
    {
      const UtLink *link = ut_links_link (links, i);

      /* Hopeless alone: no system need be made. */
      if (link->cell < 0 || MAX (link->need * link->noise_mw, link->level_mw) > link->limit_mw * link->gain * (1 + UT_LIMIT_SLACK))
        return FALSE;
    }
  if (links->n_unknowns == 0)
    return TRUE;
  met = ut_links_system (links, FALSE, &system) == UT_POWER_OK && !system.minimum_above_limit
        && ut_least_powers (&system, 1, UT_LIFT_NOTHING, p, NULL) == UT_POWER_OK;
  ut_system_clear (&system);
  if (met && ut_links_have_steps (links))
    {
      UtPowers levels = ut_powers_new (links);

      met = ut_links_least_levels (links, 1, &levels);
      ut_powers_clear (&levels);
    }
  return met;
}

/* In the simultaneous downlink an idle cell's lowest power may be more than it sent for its links, so that leaving links out can harm; elsewhere
 * it was sent before. Silent instead of idle makes the question monotone. */
static gboolean
idle_may_harm (const UtLinks *links)
{
  return links->simultaneous && links->direction == UT_DIRECTION_DOWN;
}

static bool
keepable (const bool *kept, void *data)
{
  Question *question = data;
  g_autoptr (UtLinks) links = kept_links (question, kept, idle_may_harm (question->links));

  return ut_links_can_be_met (links);
}

static bool
really_keepable (const bool *kept, void *data)
{
  Question *question = data;
  g_autoptr (UtLinks) links = kept_links (question, kept, FALSE);

  return ut_links_can_be_met (links);
}

/* The headroom of those kept, in dB; INFINITY where nobody is. */
static double
headroom_of (const bool *kept, void *data)
{
  g_autoptr (UtLinks) links = kept_links (data, kept, FALSE);

  return ut_links_headroom_db (links);
}

double
ut_links_headroom_db (const UtLinks *links)
{
  UtSystem system;
  UtHeadroom headroom;
  double headroom_db = -INFINITY;

  for (guint i = 0; i < links->links->len; i++)
    if (ut_links_link (links, i)->cell < 0)
      return -INFINITY;
  if (links->n_unknowns == 0)
    return INFINITY;
  if (ut_links_system (links, FALSE, &system) == UT_POWER_OK && ut_headroom (&system, NULL, &headroom) == UT_POWER_OK)
    headroom_db = ut_db_from_ratio (headroom.factor);
  ut_system_clear (&system);
  return headroom_db;
}

/* Hopeless links first, then the most involved for its priority. */
static size_t
worst_kept (const bool *kept, void *data)
{
  Question *question = data;
  const UtPlan *plan = question->links->gains->plan;
  g_autoptr (UtLinks) links = kept_links (question, kept, FALSE);
  g_autofree double *vector = g_new0 (double, MAX (links->n_unknowns, 1));
  UtSystem system;
  UtHeadroom headroom;
  UtEdge edge = { 0 };
  guint worst = 0, at = 0;
  double most = -1;
  gboolean found = ut_links_system (links, FALSE, &system) == UT_POWER_OK && ut_headroom (&system, vector, &headroom) == UT_POWER_OK
                   && ut_edge_of_headroom (&system, headroom.lower, vector, &edge) == UT_POWER_OK;

  for (guint i = 0; i < links->links->len; i++)
    {
      const UtLink *link = ut_links_link (links, i);
      int unknown = ut_links_unknown (links, i);
      double harm = unknown < 0 || link->need * link->noise_mw > link->limit_mw * link->gain ? INFINITY : !found ? 0 : edge.involvement[unknown];

      /* Of a cell's links the one that asks for the most against noise stands for it. */
      if (isfinite (harm) && !links->simultaneous)
        harm *= link->need * link->noise_mw / (link->limit_mw * link->gain);
      harm /= ut_plan_terminal (plan, link->terminal)->priority;
      if (harm > most)
        {
          most = harm;
          worst = i;
        }
    }
  /* Back from the place among those kept to the place among all. */
  for (guint i = 0; i < question->links->links->len; i++)
    if (kept[i] && at++ == worst)
      {
        worst = i;
        break;
      }
  ut_edge_clear (&edge);
  ut_system_clear (&system);
  return worst;
}

static bool
is_cancelled (void *data)
{
  return g_cancellable_is_cancelled (((Question *) data)->cancellable);
}

gboolean
ut_links_fewest_dropped (const UtLinks *links, GCancellable *cancellable, gboolean *keep, UtDroppingAnswer *answer)
{
  guint n = links->links->len;
  Question question = { links, g_new0 (gboolean, MAX (n, 1)), cancellable };
  g_autofree double *weight = g_new0 (double, MAX (n, 1));
  g_autofree bool *dropped = g_new0 (bool, MAX (n, 1));
  UtDropping result = { 0 };
  UtKeeping keeping = {
    .keepable = keepable,
    .really = idle_may_harm (links) ? really_keepable : NULL,
    .rank = headroom_of,
    .worst = worst_kept,
    .cancelled = is_cancelled,
    .data = &question,
  };
  UtPowerStatus status;

  for (guint i = 0; i < n; i++)
    weight[i] = ut_plan_terminal (links->gains->plan, ut_links_link (links, i)->terminal)->priority;
  status = ut_fewest_dropped (n, weight, &keeping, dropped, &result);
  g_free (question.keep);
  if (status == UT_POWER_NO_MEMORY)
    g_error ("out of memory");
  if (status != UT_POWER_OK)
    return FALSE;
  for (guint i = 0; i < n; i++)
    keep[i] = !dropped[i];
  *answer = (UtDroppingAnswer){ result.proved, result.at_least, result.total };
  return TRUE;
}
