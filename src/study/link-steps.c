/* Least powers on the radios' own ladders (docs/methods.md, "Power steps"). */
#include "links.h"

#include "decibel.h"
#include "least.h"
#include "steps.h"

/* The radios that send, one of each: cells in the orthogonal downlink, terminals in the uplink.  In the simultaneous downlink a cell shares its
 * power freely and steps are not applied. */
typedef struct
{
  const UtRadio *radio;
  UtLadder ladder; /* step_db 0: continuous */
  double level_mw; /* where it stands */
} Sender;

static gboolean
steps_apply (const UtLinks *links)
{
  return !(links->simultaneous && links->direction == UT_DIRECTION_DOWN);
}

/* Index of the sender of a link: its cell or itself. */
static guint
sender_of (const UtLinks *links, guint link)
{
  return links->direction == UT_DIRECTION_DOWN ? (guint) ut_links_link (links, link)->cell : link;
}

static guint
n_senders (const UtLinks *links)
{
  return links->direction == UT_DIRECTION_DOWN ? links->gains->n_cells : links->links->len;
}

static Sender *
senders_new (const UtLinks *links)
{
  const UtPlan *plan = links->gains->plan;
  Sender *senders = g_new0 (Sender, n_senders (links));

  for (guint i = 0; i < links->links->len; i++)
    {
      const UtLink *link = ut_links_link (links, i);

      if (link->cell < 0)
        continue;
      Sender *sender = &senders[sender_of (links, i)];
      sender->radio = links->direction == UT_DIRECTION_DOWN ? &ut_plan_cell (plan, (guint) link->cell)->radio
                                                            : &ut_plan_terminal (plan, link->terminal)->radio;
      sender->ladder = (UtLadder){ link->minimum_mw, sender->radio->power_step_db, link->limit_mw };
      sender->level_mw = link->minimum_mw;
    }
  return senders;
}

gboolean
ut_links_have_steps (const UtLinks *links)
{
  g_autofree Sender *senders = senders_new (links);

  if (!steps_apply (links))
    return FALSE;
  for (guint s = 0; s < n_senders (links); s++)
    if (senders[s].radio != NULL && senders[s].ladder.step_db > 0)
      return TRUE;
  return FALSE;
}

/* Least powers with each stepped radio at its present level or more. */
static gboolean
least_from_levels (UtLinks *trial, const Sender *senders, UtPowers *powers)
{
  UtSystem system;
  g_autofree double *p = g_new0 (double, MAX (trial->n_unknowns, 1));
  gboolean found;

  for (guint i = 0; i < trial->links->len; i++)
    if (ut_links_link (trial, i)->cell >= 0)
      g_array_index (trial->links, UtLink, i).minimum_mw = senders[sender_of (trial, i)].level_mw;
  found = ut_links_system (trial, FALSE, &system) == UT_POWER_OK
          && ut_least_powers (&system, 1, UT_LIFT_NOTHING, p, NULL) == UT_POWER_OK;
  if (found)
    ut_links_powers (trial, p, powers);
  ut_system_clear (&system);
  return found;
}

/* Raises every stepped radio to the level its power asks for.  -1: a radio has no such level; else whether any was raised. */
static int
raise_levels (const UtLinks *trial, Sender *senders, const UtPowers *powers)
{
  int raised = 0;

  for (guint i = 0; i < trial->links->len; i++)
    {
      Sender *sender;
      double level_mw;

      if (ut_links_link (trial, i)->cell < 0)
        continue;
      sender = &senders[sender_of (trial, i)];
      if (!(sender->ladder.step_db > 0))
        continue;
      if (!ut_ladder_level (&sender->ladder, powers->link_mw[i], &level_mw))
        return -1;
      if (level_mw > sender->level_mw)
        {
          sender->level_mw = level_mw;
          raised = 1;
        }
    }
  return raised;
}

/* A copy whose links may be changed; the rest is shared. */
static UtLinks
trial_of (const UtLinks *links, double factor)
{
  UtLinks trial = *links;

  trial.links = g_array_copy (links->links);
  for (guint i = 0; i < trial.links->len; i++)
    g_array_index (trial.links, UtLink, i).need *= factor;
  return trial;
}

/* From the bottom: continuous least powers above the present levels, every stepped radio up to its next level, until nothing moves. No level is
 * ever higher than in any solution, so what is found is the least one, and a radio without a level proves that there is none. */
gboolean
ut_links_least_levels (const UtLinks *links, double factor, UtPowers *powers)
{
  UtLinks trial = trial_of (links, factor);
  g_autofree Sender *senders = senders_new (links);
  int raised = 1;

  while (raised > 0)
    raised = least_from_levels (&trial, senders, powers) ? raise_levels (&trial, senders, powers) : -1;
  g_array_unref (trial.links);
  return raised == 0;
}

/* What each link would need at these powers, its level included. */
static double
need_mw (const UtLinks *links, const UtPowers *powers, guint index, GArray *heard)
{
  const UtLink *link = ut_links_link (links, index);
  double sum_mw = link->noise_mw;

  g_array_set_size (heard, 0);
  ut_links_interference (links, powers, index, heard);
  for (guint i = 0; i < heard->len; i++)
    sum_mw += g_array_index (heard, UtInterference, i).mw;
  return MAX (link->need * sum_mw, link->level_mw) / link->gain;
}

/* One round of every radio going to the smaller of its top level and the level it needs; returns the largest relative rise. */
static double
clip_round (const UtLinks *links, Sender *senders, UtPowers *powers, GArray *heard)
{
  double most = 0;

  for (guint i = 0; i < links->links->len; i++)
    {
      Sender *sender;
      double level_mw;

      if (ut_links_link (links, i)->cell < 0)
        continue;
      sender = &senders[sender_of (links, i)];
      double wanted_mw = need_mw (links, powers, i, heard);
      if (sender->ladder.step_db > 0)
        level_mw = ut_ladder_level (&sender->ladder, wanted_mw, &level_mw) ? level_mw : ut_ladder_top (&sender->ladder);
      else
        level_mw = MIN (wanted_mw, sender->ladder.limit);
      if (level_mw > sender->level_mw)
        {
          most = MAX (most, level_mw / sender->level_mw - 1);
          sender->level_mw = level_mw;
        }
    }
  for (guint i = 0; i < links->links->len; i++)
    if (ut_links_link (links, i)->cell >= 0)
      {
        powers->link_mw[i] = senders[sender_of (links, i)].level_mw;
        if (links->direction == UT_DIRECTION_DOWN)
          powers->cell_mw[ut_links_link (links, i)->cell] = powers->link_mw[i];
      }
  return most;
}

void
ut_links_clipped_levels (const UtLinks *links, UtPowers *powers)
{
  g_autofree Sender *senders = senders_new (links);
  g_autofree double *nothing = g_new0 (double, MAX (links->n_unknowns, 1));
  g_autoptr (GArray) heard = g_array_new (FALSE, FALSE, sizeof (UtInterference));

  ut_links_powers (links, nothing, powers); /* idle cells */
  for (guint i = 0; i < links->links->len; i++)
    if (ut_links_link (links, i)->cell >= 0)
      {
        powers->link_mw[i] = senders[sender_of (links, i)].level_mw;
        if (links->direction == UT_DIRECTION_DOWN)
          powers->cell_mw[ut_links_link (links, i)->cell] = powers->link_mw[i];
      }
  /* Levels are finitely many; continuous radios among them close in on their limit. */
  for (int round = 0; round < 100000 && clip_round (links, senders, powers, heard) > 1e-13; round++)
    ;
}
