#include "rate-target.h"

#include <math.h>

#include "rate.h"

double
ut_target_for_rate_db (const UtPlan *plan, UtDirection direction, double mbit_s, double *most_mbit_s)
{
  const UtShannon *shannon = direction == UT_DIRECTION_UP ? &ut_shannon_up : &ut_shannon_down;
  double sinr_db;

  if (most_mbit_s != NULL)
    *most_mbit_s = shannon->most_bit_s_hz * plan->carrier->bandwidth_mhz;
  if (ut_shannon_sinr_db (shannon, mbit_s / plan->carrier->bandwidth_mhz, &sinr_db) != UT_RADIO_OK)
    return NAN;
  return ceil (sinr_db * 100 - 1e-9) / 100;
}
