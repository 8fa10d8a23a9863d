#include "links.h"

#include <math.h>
#include <string.h>

#include "base-law.h"
#include "decibel.h"
#include "noise.h"

static double
channel_coupling (const UtCarrier *carrier, int one_channel, int other_channel)
{
  guint apart = (guint) ABS (one_channel - other_channel);
  const GArray *isolation_db = carrier->channel_isolation_db;

  if (apart == 0)
    return 1;
  if (isolation_db->len == 0)
    return 0;
  return ut_ratio_from_db (-g_array_index (isolation_db, double, MIN (apart, isolation_db->len) - 1));
}

void
ut_links_set_channels (UtLinks *links, const int *channels)
{
  guint n = links->gains->n_cells;

  for (guint c = 0; c < n; c++)
    for (guint d = 0; d < n; d++)
      links->coupling[(gsize) c * n + d] = channel_coupling (links->gains->plan->carrier, channels[c], channels[d]);
}

double
ut_radio_limit_mw (const UtPlan *plan, const UtRadio *radio)
{
  double limit_dbm = radio->power_max_dbm;

  if (!isnan (plan->carrier->eirp_limit_dbm))
    limit_dbm = MIN (limit_dbm, plan->carrier->eirp_limit_dbm - ut_radio_peak_dbi (plan, radio) + radio->feeder_loss_db);
  return ut_mw_from_dbm (limit_dbm);
}

/* The cell that serves a terminal: the named one if it is on, else the one on with the largest gain, the first of equals. */
static int
serving_cell (const UtGains *gains, guint terminal_index)
{
  const UtPlan *plan = gains->plan;
  const UtTerminal *terminal = ut_plan_terminal (plan, terminal_index);
  int best = -1;

  if (terminal->cell != NULL)
    {
      int named = ut_plan_find_cell (plan, terminal->cell);
      return ut_plan_cell (plan, (guint) named)->radio.on ? named : -1;
    }
  for (guint c = 0; c < gains->n_cells; c++)
    if (ut_plan_cell (plan, c)->radio.on
        && (best < 0
            || gains->gain_db[ut_gains_at (gains, terminal_index, c)]
                 > gains->gain_db[ut_gains_at (gains, terminal_index, (guint) best)]))
      best = (int) c;
  return best;
}

static double
noise_mw (const UtCarrier *carrier, const UtRadio *receiver)
{
  double noise_dbm = 0;
  UtRadioStatus status = ut_noise_dbm (carrier->noise_temperature_k,
                                       carrier->bandwidth_mhz * 1e6,
                                       receiver->noise_figure_db,
                                       &noise_dbm);

  g_assert (status == UT_RADIO_OK); /* the plan was checked */
  return ut_mw_from_dbm (noise_dbm);
}

static UtLink
make_link (const UtLinks *links, guint terminal_index, double target_db, double level_dbm)
{
  const UtPlan *plan = links->gains->plan;
  const UtTerminal *terminal = ut_plan_terminal (plan, terminal_index);
  gboolean down = links->direction == UT_DIRECTION_DOWN;
  UtLink link = {
    .terminal = terminal_index,
    .cell = serving_cell (links->gains, terminal_index),
    .target = ut_ratio_from_db (target_db + plan->carrier->margin_db),
    .level_mw = isnan (level_dbm) ? 0 : ut_mw_from_dbm (level_dbm),
  };

  link.need = link.target / links->processing_gain;
  if (link.cell < 0)
    return link;
  const UtRadio *cell = &ut_plan_cell (plan, (guint) link.cell)->radio;
  const UtRadio *sender = down ? cell : &terminal->radio;
  link.gain = links->gains->gain[ut_gains_at (links->gains, terminal_index, (guint) link.cell)];
  link.noise_mw = noise_mw (plan->carrier, down ? &terminal->radio : cell);
  link.minimum_mw = down && links->simultaneous ? 0 : ut_mw_from_dbm (sender->power_min_dbm);
  link.limit_mw = ut_radio_limit_mw (plan, sender);
  return link;
}

/* Lists the links of each cell and numbers the unknowns: a cell each in orthogonal sharing, a link each in simultaneous. */
static void
index_links (UtLinks *links)
{
  guint n_cells = links->gains->n_cells, next = 0;

  links->n_served = g_new0 (guint, n_cells);
  links->first_served = g_new0 (guint, n_cells);
  links->served = g_new (guint, links->links->len);
  links->unknown = g_new (int, n_cells);
  links->link_unknown = g_new (int, links->links->len);
  links->n_unknowns = 0;
  for (guint i = 0; i < links->links->len; i++)
    {
      int cell = ut_links_link (links, i)->cell;

      links->link_unknown[i] = links->simultaneous && cell >= 0 ? (int) links->n_unknowns++ : -1;
      if (cell >= 0)
        links->n_served[cell]++;
    }
  for (guint c = 0; c < n_cells; c++)
    {
      links->first_served[c] = next;
      next += links->n_served[c];
      links->unknown[c] = !links->simultaneous && links->n_served[c] > 0 ? (int) links->n_unknowns++ : -1;
    }
  g_autofree guint *place = g_memdup2 (links->first_served, n_cells * sizeof *place);
  for (guint i = 0; i < links->links->len; i++)
    if (ut_links_link (links, i)->cell >= 0)
      links->served[place[ut_links_link (links, i)->cell]++] = i;
}

/* All but the links. */
static UtLinks *
links_alloc (const UtGains *gains, UtDirection direction)
{
  const UtPlan *plan = gains->plan;
  UtLinks *links = g_new0 (UtLinks, 1);

  links->gains = gains;
  links->direction = direction;
  links->simultaneous = plan->carrier->sharing == UT_SHARING_SIMULTANEOUS;
  links->processing_gain = links->simultaneous ? ut_ratio_from_db (plan->carrier->processing_gain_db) : 1;
  links->links = g_array_new (FALSE, FALSE, sizeof (UtLink));
  links->idle = g_new0 (gboolean, gains->n_cells);
  links->coupling = g_new (double, MAX ((gsize) gains->n_cells * gains->n_cells, 1));
  return links;
}

UtLinks *
ut_links_new (const UtGains *gains, UtDirection direction)
{
  const UtPlan *plan = gains->plan;
  UtLinks *links = links_alloc (gains, direction);
  g_autofree int *channels = g_new (int, gains->n_cells);

  for (guint t = 0; t < plan->terminals->len; t++)
    {
      const UtTerminal *terminal = ut_plan_terminal (plan, t);
      gboolean down = direction == UT_DIRECTION_DOWN;
      double target_db = down ? terminal->target_down_db : terminal->target_up_db;

      if (terminal->radio.on && !isnan (target_db))
        {
          UtLink link = make_link (links, t, target_db, down ? terminal->level_down_dbm : terminal->level_up_dbm);
          g_array_append_val (links->links, link);
        }
    }
  index_links (links);
  for (guint c = 0; c < gains->n_cells; c++)
    {
      links->idle[c] = ut_plan_cell (plan, c)->radio.on && links->n_served[c] == 0;
      channels[c] = ut_plan_cell (plan, c)->channel;
    }
  ut_links_set_channels (links, channels);
  return links;
}

UtLinks *
ut_links_subset (const UtLinks *links, const gboolean *keep, gboolean silence)
{
  guint n_cells = links->gains->n_cells;
  UtLinks *subset = links_alloc (links->gains, links->direction);

  for (guint i = 0; i < links->links->len; i++)
    if (keep[i])
      g_array_append_val (subset->links, g_array_index (links->links, UtLink, i));
  index_links (subset);
  for (guint c = 0; c < n_cells; c++)
    subset->idle[c] = links->idle[c] || (!silence && links->n_served[c] > 0 && subset->n_served[c] == 0);
  memcpy (subset->coupling, links->coupling, (gsize) n_cells * n_cells * sizeof *subset->coupling);
  return subset;
}

void
ut_links_free (UtLinks *links)
{
  g_array_unref (links->links);
  g_free (links->n_served);
  g_free (links->first_served);
  g_free (links->served);
  g_free (links->unknown);
  g_free (links->link_unknown);
  g_free (links->idle);
  g_free (links->coupling);
  g_free (links);
}
