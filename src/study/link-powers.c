/* From solutions to what is sent, and from what is sent to what is heard. */
#include "links.h"

#include "decibel.h"

UtPowers
ut_powers_new (const UtLinks *links)
{
  return (UtPowers){
    .link_mw = g_new0 (double, links->links->len),
    .cell_mw = g_new0 (double, links->gains->n_cells),
  };
}

void
ut_powers_clear (UtPowers *powers)
{
  g_clear_pointer (&powers->link_mw, g_free);
  g_clear_pointer (&powers->cell_mw, g_free);
}

/* The least power with which an uplink terminal meets minimum, level and the interference q its cell hears. */
static double
uplink_mw (const UtLink *link, double q_mw)
{
  double asked_mw = MAX (link->need * q_mw / link->gain, link->level_mw / link->gain);

  /* The limit is kept by q up to rounding; minima and levels above it are held down to it. */
  return MIN (MAX (asked_mw, link->minimum_mw), MAX (link->limit_mw, link->need * q_mw / link->gain));
}

void
ut_links_powers (const UtLinks *links, const double *solution, UtPowers *powers)
{
  const UtPlan *plan = links->gains->plan;

  for (guint c = 0; c < links->gains->n_cells; c++)
    powers->cell_mw[c] = links->idle[c] ? ut_mw_from_dbm (ut_plan_cell (plan, c)->radio.power_min_dbm) : 0;
  for (guint i = 0; i < links->links->len; i++)
    {
      const UtLink *link = ut_links_link (links, i);

      if (link->cell < 0)
        continue;
      if (links->simultaneous)
        {
          powers->link_mw[i] = solution[links->link_unknown[i]];
          powers->cell_mw[link->cell] += powers->link_mw[i];
          continue;
        }
      double of_cell = solution[links->unknown[link->cell]];
      if (links->direction == UT_DIRECTION_DOWN)
        powers->link_mw[i] = powers->cell_mw[link->cell] = of_cell;
      else
        powers->link_mw[i] = uplink_mw (link, of_cell);
    }
}

void
ut_links_powers_as_set (const UtLinks *links, UtPowers *powers)
{
  const UtPlan *plan = links->gains->plan;
  gboolean down = links->direction == UT_DIRECTION_DOWN;

  for (guint c = 0; c < links->gains->n_cells; c++)
    {
      const UtRadio *cell = &ut_plan_cell (plan, c)->radio;
      powers->cell_mw[c] = cell->on ? ut_mw_from_dbm (cell->power_dbm) : 0;
    }
  for (guint i = 0; i < links->links->len; i++)
    {
      const UtLink *link = ut_links_link (links, i);

      if (link->cell < 0)
        continue;
      if (!down)
        powers->link_mw[i] = ut_mw_from_dbm (ut_plan_terminal (plan, link->terminal)->radio.power_dbm);
      else
        powers->link_mw[i] = powers->cell_mw[link->cell] / (links->simultaneous ? links->n_served[link->cell] : 1);
    }
}

static void
add_interference (GArray *interference, guint index, double mw)
{
  UtInterference one = { index, mw };

  if (mw > 0)
    g_array_append_val (interference, one);
}

/* Another cell's terminals reach a cell one at a time: the worst counts. */
static void
hear_worst_terminals (const UtLinks *links, const UtPowers *powers, guint at, GArray *interference)
{
  const UtPlan *plan = links->gains->plan;
  g_autofree UtInterference *worst = g_new0 (UtInterference, links->gains->n_cells);

  for (guint j = 0; j < links->links->len; j++)
    {
      const UtLink *other = ut_links_link (links, j);

      if (other->cell < 0 || other->cell == (int) at)
        continue;
      double mw = ut_links_coupling (links, at, (guint) other->cell)
                  * ut_plan_terminal (plan, other->terminal)->radio.activity * powers->link_mw[j]
                  * links->gains->gain[ut_gains_at (links->gains, other->terminal, at)];
      if (mw > worst[other->cell].mw)
        worst[other->cell] = (UtInterference){ other->terminal, mw };
    }
  for (guint c = 0; c < links->gains->n_cells; c++)
    add_interference (interference, worst[c].index, worst[c].mw);
}

static void
hear_all_terminals (const UtLinks *links, const UtPowers *powers, guint index, GArray *interference)
{
  const UtPlan *plan = links->gains->plan;
  guint at = (guint) ut_links_link (links, index)->cell;

  for (guint j = 0; j < links->links->len; j++)
    {
      const UtLink *other = ut_links_link (links, j);

      if (j == index || other->cell < 0)
        continue;
      add_interference (interference,
                        other->terminal,
                        ut_links_coupling (links, at, (guint) other->cell)
                          * ut_plan_terminal (plan, other->terminal)->radio.activity * powers->link_mw[j]
                          * links->gains->gain[ut_gains_at (links->gains, other->terminal, at)]);
    }
}

/* Mean power a cell sends, seen by link `index`: in simultaneous sharing the sum over the links it serves, the link itself left out. */
static double
sent_mean_mw (const UtLinks *links, const UtPowers *powers, guint cell, guint index)
{
  const UtPlan *plan = links->gains->plan;
  double sum_mw = 0;

  if (!links->simultaneous || links->n_served[cell] == 0)
    return ut_plan_cell (plan, cell)->radio.activity * powers->cell_mw[cell];
  for (guint k = 0; k < links->n_served[cell]; k++)
    {
      guint j = ut_links_served (links, cell, k);

      if (j != index)
        sum_mw += ut_plan_terminal (plan, ut_links_link (links, j)->terminal)->radio.activity * powers->link_mw[j];
    }
  return sum_mw;
}

static void
hear_cells (const UtLinks *links, const UtPowers *powers, guint index, GArray *interference)
{
  const UtPlan *plan = links->gains->plan;
  const UtLink *link = ut_links_link (links, index);

  for (guint c = 0; c < links->gains->n_cells; c++)
    {
      gboolean own = link->cell == (int) c;
      double share;

      if ((links->n_served[c] == 0 && !links->idle[c]) || (own && !links->simultaneous))
        continue;
      share = own ? 1 - plan->carrier->downlink_orthogonality
                  : ut_links_coupling (links, (guint) link->cell, c);
      add_interference (interference,
                        c,
                        share * sent_mean_mw (links, powers, c, index)
                          * links->gains->gain[ut_gains_at (links->gains, link->terminal, c)]);
    }
}

static int
compare_strength (gconstpointer one, gconstpointer other)
{
  const UtInterference *a = one, *b = other;

  if (a->mw > b->mw || a->mw < b->mw)
    return a->mw > b->mw ? -1 : 1;
  return (a->index > b->index) - (a->index < b->index);
}

void
ut_links_interference (const UtLinks *links, const UtPowers *powers, guint index, GArray *interference)
{
  const UtLink *link = ut_links_link (links, index);

  if (link->cell < 0)
    return;
  if (links->direction == UT_DIRECTION_DOWN)
    hear_cells (links, powers, index, interference);
  else if (links->simultaneous)
    hear_all_terminals (links, powers, index, interference);
  else
    hear_worst_terminals (links, powers, (guint) link->cell, interference);
  g_array_sort (interference, compare_strength);
}
