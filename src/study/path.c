#include "path.h"

#include <math.h>

#include "antenna.h"
#include "laws.h"

static double
base_loss_db (const UtPlan *plan, double distance_m)
{
  const UtPropagation *propagation = plan->propagation;
  UtLaw law = { .exponent = propagation->exponent, .reference_m = propagation->reference_m };
  UtLawPath path = { .frequency_hz = plan->carrier->frequency_mhz * 1e6, .distance_m = distance_m };
  double loss_db = 0;

  switch (propagation->law)
    {
    case UT_BASE_FREE_SPACE:
      law.kind = UT_LAW_FREE_SPACE;
      break;
    case UT_BASE_LOG_DISTANCE:
      law.kind = UT_LAW_LOG_DISTANCE;
      break;
    }
  UtRadioStatus status = ut_law_loss_db (&law, &path, &loss_db);
  g_assert (status == UT_RADIO_OK); /* the plan was checked */
  return loss_db;
}

/* Gain of a radio's antenna towards `direction`. */
static double
antenna_dbi (const UtPlan *plan, const UtRadio *radio, const double direction[3])
{
  UtAntennaShape shape = { .pattern = UT_PATTERN_ISOTROPIC };
  int index = ut_plan_find_antenna (plan, radio->antenna);
  double gain_dbi = 0;

  if (index >= 0)
    {
      const UtAntenna *antenna = ut_plan_antenna (plan, (guint) index);

      shape.pattern = antenna->pattern == UT_ANTENNA_SECTOR ? UT_PATTERN_SECTOR : UT_PATTERN_ISOTROPIC;
      shape.gain_dbi = antenna->gain_dbi;
      shape.beamwidth_h_deg = antenna->beamwidth_h_deg;
      shape.beamwidth_v_deg = antenna->beamwidth_v_deg;
    }
  UtRadioStatus status = ut_antenna_gain_dbi (&shape, radio->azimuth_deg, radio->downtilt_deg, direction, &gain_dbi);
  g_assert (status == UT_RADIO_OK);
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

static void
add_loss (const UtCrossing *crossing, void *user)
{
  *(double *) user += crossing->loss_db;
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
  const UtPropagation *propagation = plan->propagation;
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
  path->base_loss_db = base_loss_db (plan, path->distance_m);
  if (propagation->walls)
    path->wall_at_antenna = ut_wall_index_walk (index, from_m, to_m, add_loss, &path->crossings_db);
  if (!isnan (propagation->excess_loss_limit_db))
    path->crossings_db = MIN (path->crossings_db, propagation->excess_loss_limit_db);
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
    ut_wall_index_walk (index, from_m, to_m, keep_crossing, path->crossings);
  g_array_sort (path->crossings, compare_along);

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
