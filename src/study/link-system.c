/* The interference system of the four cases (docs/methods.md, "The system"). */
#include "links.h"

#include <math.h>

#include "decibel.h"

static double
gain_to (const UtLinks *links, guint terminal, guint cell)
{
  return links->gains->gain[ut_gains_at (links->gains, terminal, cell)];
}

static double
cell_activity (const UtLinks *links, guint cell)
{
  return ut_plan_cell (links->gains->plan, cell)->radio.activity;
}

static double
link_activity (const UtLinks *links, const UtLink *link)
{
  return ut_plan_terminal (links->gains->plan, link->terminal)->radio.activity;
}

/* What idle cells put into the receiver of a downlink. */
static double
idle_mw (const UtLinks *links, const UtLink *link)
{
  double sum_mw = 0;

  for (guint c = 0; c < links->gains->n_cells; c++)
    if (links->idle[c])
      sum_mw += cell_activity (links, c) * ut_links_coupling (links, (guint) link->cell, c)
                * ut_mw_from_dbm (ut_plan_cell (links->gains->plan, c)->radio.power_min_dbm) * gain_to (links, link->terminal, c);
  return sum_mw;
}

static void
add_weight (UtSystem *system, int unknown, double weight)
{
  if (weight <= 0)
    return;
  ut_system_add_group (system, 0, 0);
  ut_system_add_term (system, (uint32_t) unknown, weight);
}

/* A link's own limit: minimum and level, held to what the radio can do where asked for. */
static double
held (double value_mw, double limit_mw, gboolean clip)
{
  return clip ? MIN (value_mw, limit_mw) : value_mw;
}

/* Orthogonal downlink: a power a cell, a piece a terminal. */
static void
fill_orthogonal_down (const UtLinks *links, gboolean clip, UtSystem *system)
{
  for (guint i = 0; i < links->links->len; i++)
    {
      const UtLink *link = ut_links_link (links, i);
      guint own = (guint) link->cell;
      double per_mw;

      if (link->cell < 0)
        continue;
      per_mw = link->need / link->gain;
      ut_system_add_piece (system, (uint32_t) links->unknown[own], per_mw * link->noise_mw, per_mw * idle_mw (links, link));
      for (guint c = 0; c < links->gains->n_cells; c++)
        if (c != own && links->unknown[c] >= 0)
          add_weight (system,
                      links->unknown[c],
                      cell_activity (links, c) * ut_links_coupling (links, own, c) * (gain_to (links, link->terminal, c) * per_mw));
    }
  for (guint c = 0; c < links->gains->n_cells; c++)
    {
      double minimum_mw = 0, level_mw = 0, limit_mw = 0;

      if (links->unknown[c] < 0)
        continue;
      for (guint k = 0; k < links->n_served[c]; k++)
        {
          const UtLink *link = ut_links_link (links, ut_links_served (links, c, k));

          minimum_mw = link->minimum_mw;
          limit_mw = link->limit_mw;
          level_mw = MAX (level_mw, link->level_mw / link->gain);
        }
      if (minimum_mw > limit_mw * (1 + UT_LIMIT_SLACK) && !clip)
        system->minimum_above_limit = true;
      ut_system_set_floor (system,
                           (uint32_t) links->unknown[c],
                           held (minimum_mw, limit_mw, clip),
                           held (level_mw, limit_mw, clip));
      ut_system_add_limit (system, limit_mw);
      ut_system_add_member (system, (uint32_t) links->unknown[c]);
    }
}

/* Orthogonal uplink: the unknown of cell d is q_d, interference plus noise at its receiver (times the common factor on the
 * targets); terminal m of d then sends max (minimum, level, need_m q_d / H_dm).  At another cell the worst of
 * d's terminals counts; those that follow q_d are all proportional to it, so one term stands for them. */
static void
add_uplink_group (const UtLinks *links, gboolean clip, guint at, guint from, UtSystem *system)
{
  double minimum_mw = 0, level_mw = 0, weight = 0;
  double isolation = ut_links_coupling (links, at, from);

  for (guint k = 0; k < links->n_served[from]; k++)
    {
      const UtLink *link = ut_links_link (links, ut_links_served (links, from, k));
      double arrives;

      arrives = isolation * link_activity (links, link) * gain_to (links, link->terminal, at);
      minimum_mw = MAX (minimum_mw, arrives * held (link->minimum_mw, link->limit_mw, clip));
      level_mw = MAX (level_mw, arrives * held (link->level_mw / link->gain, link->limit_mw, clip));
      weight = MAX (weight, arrives / link->gain * link->need);
    }
  if (weight <= 0)
    return;
  ut_system_add_group (system, minimum_mw, level_mw);
  ut_system_add_term (system, (uint32_t) links->unknown[from], weight);
}

static void
fill_orthogonal_up (const UtLinks *links, gboolean clip, UtSystem *system)
{
  for (guint c = 0; c < links->gains->n_cells; c++)
    {
      double noise_mw = 0, limit = INFINITY;

      if (links->unknown[c] < 0)
        continue;
      for (guint k = 0; k < links->n_served[c]; k++)
        {
          const UtLink *link = ut_links_link (links, ut_links_served (links, c, k));

          noise_mw = link->noise_mw;
          limit = MIN (limit, link->limit_mw * link->gain / link->need);
          if (link->minimum_mw > link->limit_mw * (1 + UT_LIMIT_SLACK) && !clip)
            system->minimum_above_limit = true;
        }
      ut_system_add_piece (system, (uint32_t) links->unknown[c], noise_mw, 0);
      for (guint d = 0; d < links->gains->n_cells; d++)
        if (d != c && links->unknown[d] >= 0)
          add_uplink_group (links, clip, c, d, system);
      ut_system_add_limit (system, limit);
      ut_system_add_member (system, (uint32_t) links->unknown[c]);
    }
}

/* Simultaneous downlink: a power a link, one limit on the sum of a cell's. */
static void
fill_simultaneous_down (const UtLinks *links, gboolean clip, UtSystem *system)
{
  double crosstalk = 1 - links->gains->plan->carrier->downlink_orthogonality;
  g_autofree double *levels_mw = g_new0 (double, links->gains->n_cells);

  for (guint i = 0; i < links->links->len; i++)
    if (ut_links_link (links, i)->cell >= 0)
      levels_mw[ut_links_link (links, i)->cell] += ut_links_link (links, i)->level_mw / ut_links_link (links, i)->gain;
  for (guint i = 0; i < links->links->len; i++)
    {
      const UtLink *link = ut_links_link (links, i);
      double per_mw;

      if (link->cell < 0)
        continue;
      per_mw = link->need / link->gain;
      double level_mw = link->level_mw / link->gain;
      if (clip && levels_mw[link->cell] > link->limit_mw)
        level_mw *= (1 - UT_LIMIT_SLACK) * link->limit_mw / levels_mw[link->cell];
      ut_system_set_floor (system, (uint32_t) links->link_unknown[i], 0, level_mw);
      ut_system_add_piece (system,
                           (uint32_t) links->link_unknown[i],
                           per_mw * link->noise_mw,
                           per_mw * idle_mw (links, link));
      for (guint j = 0; j < links->links->len; j++)
        {
          const UtLink *other = ut_links_link (links, j);
          double arrives;

          if (j == i || other->cell < 0)
            continue;
          arrives = other->cell == link->cell ? crosstalk * link->gain
                                              : ut_links_coupling (links, (guint) link->cell, (guint) other->cell)
                                                  * gain_to (links, link->terminal, (guint) other->cell);
          add_weight (system, links->link_unknown[j], link_activity (links, other) * (arrives * per_mw));
        }
    }
  for (guint c = 0; c < links->gains->n_cells; c++)
    {
      if (links->n_served[c] == 0)
        continue;
      ut_system_add_limit (system, ut_radio_limit_mw (links->gains->plan, &ut_plan_cell (links->gains->plan, c)->radio));
      for (guint k = 0; k < links->n_served[c]; k++)
        ut_system_add_member (system, (uint32_t) links->link_unknown[ut_links_served (links, c, k)]);
    }
}

/* Simultaneous uplink: a power a terminal, everybody heard by everybody's cell. */
static void
fill_simultaneous_up (const UtLinks *links, gboolean clip, UtSystem *system)
{
  for (guint i = 0; i < links->links->len; i++)
    {
      const UtLink *link = ut_links_link (links, i);
      uint32_t own = (uint32_t) links->link_unknown[i];

      if (link->cell < 0)
        continue;
      double per_mw = link->need / link->gain;
      if (link->minimum_mw > link->limit_mw * (1 + UT_LIMIT_SLACK) && !clip)
        system->minimum_above_limit = true;
      ut_system_set_floor (system,
                           own,
                           held (link->minimum_mw, link->limit_mw, clip),
                           held (link->level_mw / link->gain, link->limit_mw, clip));
      ut_system_add_piece (system, own, per_mw * link->noise_mw, 0);
      for (guint j = 0; j < links->links->len; j++)
        {
          const UtLink *other = ut_links_link (links, j);

          if (j != i && other->cell >= 0)
            add_weight (system,
                        links->link_unknown[j],
                        ut_links_coupling (links, (guint) link->cell, (guint) other->cell) * link_activity (links, other)
                          * (gain_to (links, other->terminal, (guint) link->cell) * per_mw));
        }
      ut_system_add_limit (system, link->limit_mw);
      ut_system_add_member (system, own);
    }
}

UtPowerStatus
ut_links_system (const UtLinks *links, gboolean clip, UtSystem *system)
{
  ut_system_init (system, links->n_unknowns);
  if (links->simultaneous)
    (links->direction == UT_DIRECTION_DOWN ? fill_simultaneous_down : fill_simultaneous_up) (links, clip, system);
  else
    (links->direction == UT_DIRECTION_DOWN ? fill_orthogonal_down : fill_orthogonal_up) (links, clip, system);
  return ut_system_finish (system);
}

/* Orthogonal uplink with an unknown a terminal: of every other cell's the loudest counts. */
static void
fill_uplink_radios (const UtLinks *links, UtSystem *system)
{
  for (guint i = 0; i < links->links->len; i++)
    {
      const UtLink *link = ut_links_link (links, i);
      double per_mw = link->need / link->gain;

      ut_system_set_floor (system, i, held (link->minimum_mw, link->limit_mw, TRUE), held (link->level_mw / link->gain, link->limit_mw, TRUE));
      ut_system_add_piece (system, i, per_mw * link->noise_mw, 0);
      for (guint c = 0; c < links->gains->n_cells; c++)
        {
          double isolation = ut_links_coupling (links, (guint) link->cell, c);

          if (c == (guint) link->cell || links->n_served[c] == 0 || isolation <= 0)
            continue;
          ut_system_add_group (system, 0, 0);
          for (guint k = 0; k < links->n_served[c]; k++)
            {
              guint j = ut_links_served (links, c, k);
              const UtLink *other = ut_links_link (links, j);

              ut_system_add_term (system, j, isolation * link_activity (links, other) * gain_to (links, other->terminal, (guint) link->cell) * per_mw);
            }
        }
      ut_system_add_limit (system, link->limit_mw);
      ut_system_add_member (system, i);
    }
}

UtPowerStatus
ut_links_radio_system (const UtLinks *links, UtSystem *system)
{
  if (links->simultaneous || links->direction == UT_DIRECTION_DOWN)
    return ut_links_system (links, TRUE, system);
  ut_system_init (system, links->links->len);
  fill_uplink_radios (links, system);
  return ut_system_finish (system);
}

guint
ut_links_radio_unknown (const UtLinks *links, guint index)
{
  return links->simultaneous || links->direction == UT_DIRECTION_DOWN ? (guint) ut_links_unknown (links, index) : index;
}
