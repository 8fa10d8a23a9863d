#include "path.h"

#include <math.h>

#include "base-law.h"

/* Gain of a radio's antenna towards `direction`. */
static double
antenna_dbi (const UtPlan *plan, const UtRadio *radio, const double direction[3])
{
  UtAntennaShape shape = ut_antenna_shape (plan, radio->antenna);
  double gain_dbi = 0;
  UtRadioStatus status = ut_antenna_gain_dbi (&shape, radio->azimuth_deg, radio->downtilt_deg, direction, &gain_dbi);

  g_assert (status == UT_RADIO_OK); /* the plan was checked */
  return gain_dbi;
}

static void
place (const UtPlan *plan, const UtRadio *radio, double at_m[3])
{
  const UtStorey *storey = ut_plan_storey (plan, (guint) ut_plan_find_storey (plan, radio->storey));

  at_m[0] = radio->x_m;
  at_m[1] = radio->y_m;
  at_m[2] = storey->elevation_m + radio->height_m;
}

/* From this loss on a crossing obstructs the view. */
#define OBSTRUCTS_DB 1

typedef struct
{
  UtLawPath *law_path;
  double loss_db;
} Crossed;

static void
count_crossing (const UtCrossing *crossing, void *user)
{
  Crossed *crossed = user;

  crossed->loss_db += crossing->loss_db;
  crossed->law_path->obstructed = crossed->law_path->obstructed || crossing->loss_db >= OBSTRUCTS_DB;
  if (crossing->kind == UT_CROSSING_FLOOR)
    crossed->law_path->n_floors++;
  else if (crossing->heavy)
    crossed->law_path->n_heavy++;
  else
    crossed->law_path->n_light++;
}

/* Whether the law itself asks what is crossed. */
static gboolean
law_asks (const UtPropagation *propagation)
{
  switch (propagation->law)
    {
    case UT_BASE_SITE_GENERAL:
    case UT_BASE_INDOOR_OFFICE:
    case UT_BASE_INDOOR_FACTORY:
      return propagation->sight == UT_BASE_BY_WALLS;
    case UT_BASE_DISTANCE_COEFFICIENT:
    case UT_BASE_MULTI_WALL:
      return TRUE;
    case UT_BASE_FREE_SPACE:
    case UT_BASE_LOG_DISTANCE:
      break;
    }
  return FALSE;
}

static void
judge_range (UtPath *path, UtLawRange range, double frequency_hz)
{
  path->lowest_hz = range.lowest_hz;
  path->highest_hz = range.highest_hz;
  path->nearest_m = range.nearest_m;
  path->farthest_m = range.farthest_m;
  path->outside_range = frequency_hz < range.lowest_hz || frequency_hz > range.highest_hz || path->distance_m < range.nearest_m
                        || path->distance_m > range.farthest_m;
}

/* Base loss and crossings of the ray. */
static void
fill_losses (const UtPlan *plan, const UtWallIndex *index, const double from_m[3], const double to_m[3], UtPath *path)
{
  const UtPropagation *propagation = plan->propagation;
  UtLaw law = ut_base_law (propagation);
  UtLawPath law_path = { .frequency_hz = plan->carrier->frequency_mhz * 1e6, .distance_m = path->distance_m };
  Crossed crossed = { &law_path, 0 };

  if (propagation->walls || law_asks (propagation))
    path->wall_at_antenna = ut_wall_index_walk (index, from_m, to_m, FALSE, count_crossing, &crossed);
  UtRadioStatus status = ut_law_loss_db (&law, &law_path, &path->base_loss_db);
  g_assert (status == UT_RADIO_OK); /* the plan was checked */
  path->nlos = ut_law_is_nlos (&law, &law_path);
  path->law_holds_walls = ut_law_holds_walls (&law, &law_path);
  judge_range (path, ut_law_range (&law, &law_path), law_path.frequency_hz);
  path->crossings_db = propagation->walls && !path->law_holds_walls ? crossed.loss_db : 0;
  if (!isnan (propagation->excess_loss_limit_db))
    path->crossings_db = MIN (path->crossings_db, propagation->excess_loss_limit_db);
}

static void
keep_crossing (const UtCrossing *crossing, void *user)
{
  g_array_append_vals (user, crossing, 1);
}

static int
compare_along (gconstpointer one, gconstpointer other)
{
  double a = ((const UtCrossing *) one)->along, b = ((const UtCrossing *) other)->along;

  return (a > b) - (a < b);
}

void
ut_path_compute (const UtPlan *plan, const UtWallIndex *index, const UtCell *cell, const UtTerminal *terminal, UtPath *path)
{
  double from_m[3], to_m[3], there[3], back[3];

  place (plan, &cell->radio, from_m);
  place (plan, &terminal->radio, to_m);
  for (int i = 0; i < 3; i++)
    there[i] = to_m[i] - from_m[i];
  if (there[0] == 0 && there[1] == 0 && there[2] == 0)
    there[2] = -1; /* two antennas at one place: the terminal counts as straight below */
  for (int i = 0; i < 3; i++)
    back[i] = -there[i];

  *path = (UtPath){
    .distance_m = hypot (hypot (to_m[0] - from_m[0], to_m[1] - from_m[1]), to_m[2] - from_m[2]),
    .cell_antenna_dbi = antenna_dbi (plan, &cell->radio, there),
    .terminal_antenna_dbi = antenna_dbi (plan, &terminal->radio, back),
    .feeders_db = cell->radio.feeder_loss_db + terminal->radio.feeder_loss_db,
    .body_db = terminal->body_loss_db,
  };
  fill_losses (plan, index, from_m, to_m, path);
  path->gain_db = -(path->base_loss_db + path->crossings_db) + path->cell_antenna_dbi + path->terminal_antenna_dbi
                  - path->feeders_db - path->body_db;
}

void
ut_path_trace (const UtPlan *plan, const UtWallIndex *index, guint cell_index, guint terminal_index, UtPath *path)
{
  const UtCell *cell = ut_plan_cell (plan, cell_index);
  const UtTerminal *terminal = ut_plan_terminal (plan, terminal_index);
  double from_m[3], to_m[3];

  ut_path_compute (plan, index, cell, terminal, path);
  path->crossings = g_array_new (FALSE, FALSE, sizeof (UtCrossing));
  place (plan, &cell->radio, from_m);
  place (plan, &terminal->radio, to_m);
  if (plan->propagation->walls)
    ut_wall_index_walk (index, from_m, to_m, TRUE, keep_crossing, path->crossings);
  g_array_sort (path->crossings, compare_along);
  for (guint i = 0; i < path->crossings->len && path->law_holds_walls; i++)
    {
      UtCrossing *crossing = &g_array_index (path->crossings, UtCrossing, i);

      crossing->loss_db = crossing->loss_min_db = crossing->loss_max_db = 0;
    }

  double measured_db = ut_measured_gain_db (plan, cell->radio.id, terminal->radio.id);
  if (!isnan (measured_db))
    {
      path->measured = TRUE;
      path->gain_db = measured_db;
    }
}

void
ut_path_clear (UtPath *path)
{
  g_clear_pointer (&path->crossings, g_array_unref);
}

double
ut_measured_gain_db (const UtPlan *plan, const char *cell, const char *terminal)
{
  for (guint i = 0; i < plan->measured_gains->len; i++)
    {
      const UtMeasuredGain *measured = plan->measured_gains->pdata[i];

      if (g_str_equal (measured->cell, cell) && g_str_equal (measured->terminal, terminal))
        return measured->gain_db;
    }
  return NAN;
}

/* "0.3 to 82 GHz and 4 to 30 m" */
static char *
range_text (const UtPath *path)
{
  if (isfinite (path->farthest_m))
    return g_strdup_printf ("%g to %g GHz and %g to %g m",
                            path->lowest_hz / 1e9, path->highest_hz / 1e9, path->nearest_m, path->farthest_m);
  return g_strdup_printf ("%g to %g GHz and from %g m on", path->lowest_hz / 1e9, path->highest_hz / 1e9, path->nearest_m);
}

char *
ut_path_range_text (const UtPlan *plan, const UtPath *path)
{
  g_autofree char *range = range_text (path);
  UtLaw law = ut_base_law (plan->propagation);

  return g_strdup_printf ("%s%s is made for %s", ut_law_name (law.kind), path->nlos ? " (nlos)" : "", range);
}
