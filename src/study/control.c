#include "control.h"

#include <math.h>
#include <string.h>

#include "capped.h"
#include "decibel.h"
#include "least.h"
#include "links.h"

/* What has a power of its own. */
typedef struct
{
  guint first_link; /* one of those it sends for */
  double minimum_mw, limit_mw;
} Sender;

typedef struct
{
  UtControl *control;
  const UtLinks *links; /* all with a cell */
  guint n_senders;
  Sender *senders;
  guint *sender_of;   /* of each link */
  double *sent_mw;    /* [row * senders + k] */
  UtPowers seen;      /* at the row looked at */
  GRand *random;
} Loop;

static gboolean
one_per_cell (const UtLinks *links)
{
  return links->direction == UT_DIRECTION_DOWN && !links->simultaneous;
}

static void
add_sender (Loop *loop, guint first_link, guint shown)
{
  const UtLink *link = ut_links_link (loop->links, first_link);

  loop->senders[loop->n_senders++] = (Sender){ first_link, MIN (link->minimum_mw, link->limit_mw), link->limit_mw };
  g_array_append_val (loop->control->senders, shown);
}

static void
list_senders (Loop *loop)
{
  const UtLinks *links = loop->links;

  loop->senders = g_new0 (Sender, MAX (links->links->len, 1));
  loop->sender_of = g_new0 (guint, MAX (links->links->len, 1));
  for (guint c = 0; c < links->gains->n_cells && one_per_cell (links); c++)
    {
      for (guint k = 0; k < links->n_served[c]; k++)
        loop->sender_of[ut_links_served (links, c, k)] = loop->n_senders;
      if (links->n_served[c] > 0)
        add_sender (loop, ut_links_served (links, c, 0), c);
    }
  for (guint i = 0; i < links->links->len; i++)
    {
      guint terminal = ut_links_link (links, i)->terminal;

      g_array_append_val (loop->control->links, terminal);
      if (one_per_cell (links))
        continue;
      loop->sender_of[i] = loop->n_senders;
      add_sender (loop, i, terminal);
    }
}

/* The powers of a row, as the links take them. */
static void
look_at (Loop *loop, guint row)
{
  const UtLinks *links = loop->links;

  for (guint c = 0; c < links->gains->n_cells; c++)
    loop->seen.cell_mw[c] = links->idle[c] ? ut_mw_from_dbm (ut_plan_cell (links->gains->plan, c)->radio.power_min_dbm) : 0;
  for (guint i = 0; i < links->links->len; i++)
    {
      double *cell_mw = &loop->seen.cell_mw[ut_links_link (links, i)->cell];

      loop->seen.link_mw[i] = loop->sent_mw[row * loop->n_senders + loop->sender_of[i]];
      *cell_mw = one_per_cell (links) ? loop->seen.link_mw[i] : *cell_mw + loop->seen.link_mw[i];
    }
}

/* Interference plus noise of a link at the row looked at. */
static double
heard_mw (Loop *loop, guint index)
{
  g_autoptr (GArray) heard = g_array_new (FALSE, FALSE, sizeof (UtInterference));
  double sum_mw = ut_links_link (loop->links, index)->noise_mw;

  ut_links_interference (loop->links, &loop->seen, index, heard);
  for (guint k = 0; k < heard->len; k++)
    sum_mw += g_array_index (heard, UtInterference, k).mw;
  return sum_mw;
}

static void
record (Loop *loop, guint row)
{
  UtControl *control = loop->control;

  look_at (loop, row);
  for (guint k = 0; k < loop->n_senders; k++)
    control->power_dbm[row * loop->n_senders + k] = ut_dbm_from_mw (loop->sent_mw[row * loop->n_senders + k]);
  for (guint i = 0; i < loop->links->links->len; i++)
    {
      const UtLink *link = ut_links_link (loop->links, i);
      double signal_mw = loop->seen.link_mw[i] * link->gain;
      double sinr_db = ut_db_from_ratio (loop->links->processing_gain * signal_mw / heard_mw (loop, i));

      control->sinr_db[row * loop->links->links->len + i] = sinr_db;
      control->met[i] = sinr_db - control->target_db[i] >= UT_MARGIN_MET_DB && signal_mw >= link->level_mw * ut_ratio_from_db (UT_MARGIN_MET_DB);
    }
}

/* In the simultaneous downlink a cell that would send more than it can turns all its links down by one factor. */
static void
keep_sums (Loop *loop, double *sent_mw)
{
  const UtLinks *links = loop->links;
  g_autofree double *sum_mw = g_new0 (double, MAX (links->gains->n_cells, 1));

  if (!links->simultaneous || links->direction != UT_DIRECTION_DOWN)
    return;
  for (guint i = 0; i < links->links->len; i++)
    sum_mw[ut_links_link (links, i)->cell] += sent_mw[i];
  for (guint i = 0; i < links->links->len; i++)
    {
      const UtLink *link = ut_links_link (links, i);

      if (sum_mw[link->cell] > link->limit_mw)
        sent_mw[i] *= link->limit_mw / sum_mw[link->cell];
    }
}

/* One round: what each radio does, having seen row `seen`. */
static void
act (Loop *loop, guint row, guint seen)
{
  const UtControlSetup *setup = &loop->control->setup;
  const double *now_mw = loop->sent_mw + (gsize) row * loop->n_senders;
  double *next_mw = loop->sent_mw + (gsize) (row + 1) * loop->n_senders;
  g_autofree double *wanted_mw = g_new0 (double, MAX (loop->n_senders, 1));
  double step = ut_ratio_from_db (setup->step_db);

  look_at (loop, seen);
  for (guint i = 0; i < loop->links->links->len; i++)
    {
      const UtLink *link = ut_links_link (loop->links, i);
      double off_db = setup->error_db > 0 ? g_rand_double_range (loop->random, -setup->error_db, setup->error_db) : 0;
      double needed_mw = MAX (link->need * heard_mw (loop, i), link->level_mw) / link->gain * ut_ratio_from_db (off_db);

      wanted_mw[loop->sender_of[i]] = MAX (wanted_mw[loop->sender_of[i]], needed_mw);
    }
  for (guint k = 0; k < loop->n_senders; k++)
    {
      double sent_mw = loop->sent_mw[(gsize) seen * loop->n_senders + k];

      if (setup->rule == UT_CONTROL_EXACT)
        next_mw[k] = wanted_mw[k];
      else
        next_mw[k] = wanted_mw[k] > sent_mw ? now_mw[k] * step : now_mw[k] / step;
      next_mw[k] = CLAMP (next_mw[k], loop->senders[k].minimum_mw, loop->senders[k].limit_mw);
    }
  keep_sums (loop, next_mw);
}

static void
set_out (Loop *loop)
{
  UtPowers set = ut_powers_new (loop->links);

  ut_links_powers_as_set (loop->links, &set);
  for (guint k = 0; k < loop->n_senders; k++)
    {
      const Sender *sender = &loop->senders[k];
      /* A cell of the simultaneous downlink has no lowest power for a link of its own: its lowest is shared out. */
      double least_mw = sender->minimum_mw;

      if (least_mw <= 0)
        {
          const UtLink *link = ut_links_link (loop->links, sender->first_link);

          least_mw = ut_mw_from_dbm (ut_plan_cell (loop->links->gains->plan, (guint) link->cell)->radio.power_min_dbm)
                     / loop->links->n_served[link->cell];
        }
      loop->sent_mw[k] = loop->control->setup.start == UT_START_LEAST  ? least_mw
                         : loop->control->setup.start == UT_START_MOST ? sender->limit_mw
                                                                       : set.link_mw[sender->first_link];
      loop->sent_mw[k] = CLAMP (loop->sent_mw[k], sender->minimum_mw, sender->limit_mw);
    }
  keep_sums (loop, loop->sent_mw);
  ut_powers_clear (&set);
}

/* ---- what theory says ---- */

/* Powers in dBm, one a sender, from a solution with one unknown a sender. */
static double *
in_dbm (const Loop *loop, const double *p)
{
  double *dbm = g_new0 (double, MAX (loop->n_senders, 1));

  for (guint k = 0; k < loop->n_senders; k++)
    dbm[k] = ut_dbm_from_mw (p[ut_links_radio_unknown (loop->links, loop->senders[k].first_link)]);
  return dbm;
}

static void
find_end (Loop *loop, const UtSystem *system)
{
  UtControl *control = loop->control;
  g_autofree double *p = g_new0 (double, MAX (system->n_unknowns, 1));
  double rate;

  /* With limits on sums the end is known only where all can be met. */
  if (ut_capped_powers (system, p) != UT_POWER_OK && ut_least_powers (system, 1, UT_LIFT_NOTHING, p, NULL) != UT_POWER_OK)
    return;
  control->end_dbm = in_dbm (loop, p);
  control->end_meets = TRUE;
  for (guint i = 0; i < loop->links->links->len; i++)
    {
      const UtLink *link = ut_links_link (loop->links, i);
      guint unknown = ut_links_radio_unknown (loop->links, i);

      /* Levels were held down to the limits in the system; here they count as asked for. */
      if (ut_system_need (system, unknown, p, UT_LIFT_NOTHING) > p[unknown] * (1 + UT_LIMIT_SLACK)
          || link->level_mw > p[unknown] * link->gain * (1 + UT_LIMIT_SLACK))
        control->end_meets = FALSE;
    }
  if (ut_capped_rate (system, p, &rate) == UT_POWER_OK)
    control->predicted_db = -ut_db_from_ratio (rate) / (control->setup.delay + 1);
}

/* Least powers with targets and levels alike changed by by_db; NULL where there are none. */
static double *
powers_at (Loop *loop, double by_db)
{
  UtLinks trial = *loop->links;
  UtSystem system;
  double *dbm = NULL;
  g_autofree double *p = g_new0 (double, MAX (loop->links->links->len, 1));

  trial.links = g_array_copy (loop->links->links);
  for (guint i = 0; i < trial.links->len; i++)
    {
      UtLink *link = &g_array_index (trial.links, UtLink, i);

      link->need *= ut_ratio_from_db (by_db);
      link->level_mw *= ut_ratio_from_db (by_db);
      if (link->level_mw > link->limit_mw * link->gain)
        p[0] = NAN; /* held down to the limit in the system, and so not kept */
    }
  if (!isnan (p[0]) && ut_links_radio_system (&trial, &system) == UT_POWER_OK)
    {
      if (ut_least_powers (&system, 1, UT_LIFT_NOTHING, p, NULL) == UT_POWER_OK)
        dbm = in_dbm (loop, p);
      ut_system_clear (&system);
    }
  g_array_unref (trial.links);
  return dbm;
}

static void
find_band (Loop *loop)
{
  UtControl *control = loop->control;

  if (control->setup.rule != UT_CONTROL_STEPS)
    return;
  control->band_db = (control->setup.delay + 1) * control->setup.step_db + control->setup.error_db;
  control->high_dbm = powers_at (loop, control->band_db);
  control->low_dbm = control->high_dbm != NULL ? powers_at (loop, -control->band_db) : NULL;
  control->band_holds = control->low_dbm != NULL;
}

/* The mean decline of the distance from the end, over about the second half of the rounds in which it is more than rounding: whole turns of two
 * actions on what was seen, because a pair of links alternates about its end. */
static void
observe_rate (Loop *loop)
{
  UtControl *control = loop->control;
  g_autofree double *away_db = g_new0 (double, control->n_rows);
  guint last = 0, turn = 2 * (control->setup.delay + 1), first;

  for (guint row = 0; row < control->n_rows; row++)
    for (guint k = 0; k < loop->n_senders; k++)
      away_db[row] = MAX (away_db[row], fabs (control->power_dbm[row * loop->n_senders + k] - control->end_dbm[k]));
  while (last + 1 < control->n_rows && away_db[last + 1] > 1e-9)
    last++;
  if (last / 2 < turn)
    return;
  first = last - last / 2 / turn * turn;
  if (away_db[last] < away_db[first])
    control->observed_db = ut_db_from_ratio (away_db[first] / away_db[last]) / (last - first);
}

static void
compare_with_theory (Loop *loop)
{
  UtSystem system;

  if (ut_links_radio_system (loop->links, &system) == UT_POWER_OK)
    find_end (loop, &system);
  ut_system_clear (&system);
  find_band (loop);
  if (loop->control->end_dbm != NULL && loop->control->setup.rule == UT_CONTROL_EXACT && !(loop->control->setup.error_db > 0))
    observe_rate (loop);
}

UtControl *
ut_control_new (const UtStudy *study, const UtControlSetup *setup)
{
  UtControl *control = g_new0 (UtControl, 1);
  g_autoptr (UtLinks) all = ut_links_new (study->gains, study->question.direction);
  g_autofree gboolean *keep = g_new (gboolean, MAX (all->links->len, 1));
  g_autoptr (UtLinks) links = NULL;
  Loop loop = { .control = control };

  for (guint i = 0; i < all->links->len; i++)
    keep[i] = ut_links_link (all, i)->cell >= 0;
  loop.links = links = ut_links_subset (all, keep, FALSE);
  *control = (UtControl){
    .gains = ut_gains_ref (study->gains),
    .direction = study->question.direction,
    .setup = *setup,
    .simultaneous = links->simultaneous,
    .senders = g_array_new (FALSE, FALSE, sizeof (guint)),
    .links = g_array_new (FALSE, FALSE, sizeof (guint)),
    .n_rows = setup->rounds + 1,
    .predicted_db = NAN,
    .observed_db = NAN,
    .band_db = NAN,
  };
  list_senders (&loop);
  control->power_dbm = g_new0 (double, (gsize) control->n_rows * MAX (loop.n_senders, 1));
  control->sinr_db = g_new0 (double, (gsize) control->n_rows * MAX (links->links->len, 1));
  control->target_db = g_new0 (double, MAX (links->links->len, 1));
  control->met = g_new0 (gboolean, MAX (links->links->len, 1));
  for (guint i = 0; i < links->links->len; i++)
    control->target_db[i] = ut_db_from_ratio (ut_links_link (links, i)->target);
  loop.sent_mw = g_new0 (double, (gsize) control->n_rows * MAX (loop.n_senders, 1));
  loop.seen = ut_powers_new (links);
  loop.random = g_rand_new_with_seed (setup->seed);
  set_out (&loop);
  record (&loop, 0);
  for (guint row = 0; row + 1 < control->n_rows; row++)
    {
      act (&loop, row, row > setup->delay ? row - setup->delay : 0);
      record (&loop, row + 1);
    }
  compare_with_theory (&loop);
  g_free (loop.senders);
  g_free (loop.sender_of);
  g_free (loop.sent_mw);
  ut_powers_clear (&loop.seen);
  g_rand_free (loop.random);
  return control;
}

void
ut_control_free (UtControl *control)
{
  ut_gains_unref (control->gains);
  g_array_unref (control->senders);
  g_array_unref (control->links);
  g_free (control->power_dbm);
  g_free (control->sinr_db);
  g_free (control->target_db);
  g_free (control->met);
  g_free (control->end_dbm);
  g_free (control->low_dbm);
  g_free (control->high_dbm);
  g_free (control);
}

const char *
ut_control_sender_id (const UtControl *control, guint k)
{
  const UtPlan *plan = control->gains->plan;
  guint index = g_array_index (control->senders, guint, k);

  return control->direction == UT_DIRECTION_DOWN && !control->simultaneous ? ut_plan_cell (plan, index)->radio.id
                                                                           : ut_plan_terminal (plan, index)->radio.id;
}

const char *
ut_control_link_id (const UtControl *control, guint i)
{
  return ut_plan_terminal (control->gains->plan, g_array_index (control->links, guint, i))->radio.id;
}
