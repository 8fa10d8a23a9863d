/* The chance that a link keeps its target at fixed powers, under shadowing (docs/methods.md, "Shadowing"). */
#include <math.h>

#include "decibel.h"
#include "links.h"
#include "shadowing.h"

/* How alike the shadowing of one terminal towards two cells is: the usual figure for different sites (common practice). */
#define TWO_CELLS 0.5

/* One path: a terminal and a cell of the plan. */
typedef struct
{
  guint terminal, cell;
} Between;

static double
terminal_distance_m (const UtPlan *plan, guint one, guint other)
{
  const UtRadio *a = &ut_plan_terminal (plan, one)->radio, *b = &ut_plan_terminal (plan, other)->radio;
  double rise_m = ut_plan_storey (plan, (guint) ut_plan_find_storey (plan, b->storey))->elevation_m + b->height_m
                  - ut_plan_storey (plan, (guint) ut_plan_find_storey (plan, a->storey))->elevation_m - a->height_m;

  return hypot (hypot (b->x_m - a->x_m, b->y_m - a->y_m), rise_m);
}

/* Half of a path's shadowing is the terminal's own place, half is the pair's; both fade with the distance of the terminals. */
static double
correlation (const UtPlan *plan, Between one, Between other)
{
  double near = one.terminal == other.terminal
                  ? 1
                  : ut_shadow_correlation (terminal_distance_m (plan, one.terminal, other.terminal), plan->propagation->correlation_m);

  return near * (one.cell == other.cell ? 1 : TWO_CELLS);
}

double
ut_links_chance (const UtLinks *links, guint index, const GArray *heard, double margin_db)
{
  const UtPlan *plan = links->gains->plan;
  const UtLink *link = ut_links_link (links, index);
  Between wanted = { link->terminal, (guint) link->cell };
  guint n = 0;
  g_autofree UtShadowed *shadowed = g_new0 (UtShadowed, MAX (heard->len, 1));
  g_autofree Between *paths = g_new0 (Between, MAX (heard->len, 1));
  g_autofree double *among = NULL;
  double own_mw = 0, others_mw = link->noise_mw, spare_mw, sigma_db;

  if (!(plan->propagation->shadowing_db > 0) || isnan (margin_db))
    return NAN;
  for (guint i = 0; i < heard->len; i++)
    {
      const UtInterference *one = &g_array_index (heard, UtInterference, i);

      if (links->direction == UT_DIRECTION_DOWN && one->index == wanted.cell)
        {
          own_mw += one->mw;
          continue;
        }
      paths[n] = links->direction == UT_DIRECTION_DOWN ? (Between){ link->terminal, one->index } : (Between){ one->index, (guint) link->cell };
      shadowed[n] = (UtShadowed){ one->mw, correlation (plan, wanted, paths[n]) };
      n++;
      others_mw += one->mw;
    }
  /* What comes on the wanted path itself rises and falls with the signal: what the signal leaves beyond it has to be enough for the others. */
  spare_mw = (own_mw + others_mw) * ut_ratio_from_db (margin_db) - own_mw;
  if (!(spare_mw > 0))
    return 0;
  among = g_new (double, MAX ((gsize) n * n, 1));
  for (guint i = 0; i < n; i++)
    {
      shadowed[i].share /= others_mw;
      for (guint k = 0; k < n; k++)
        among[(gsize) i * n + k] = i == k ? 1 : correlation (plan, paths[i], paths[k]);
    }
  sigma_db = ut_shadow_sinr_db (plan->propagation->shadowing_db, n, shadowed, among);
  if (!(sigma_db > 0))
    return margin_db >= UT_MARGIN_MET_DB ? 1 : 0;
  return ut_normal_tail (-ut_db_from_ratio (spare_mw / others_mw) / sigma_db);
}
