#include "noise.h"

#include <math.h>

#include "decibel.h"

UtRadioStatus
ut_noise_dbm (double temperature_k, double bandwidth_hz, double noise_figure_db, double *noise_dbm)
{
  if (!isfinite (temperature_k) || !(temperature_k > 0) || !isfinite (bandwidth_hz) || !(bandwidth_hz > 0)
      || !isfinite (noise_figure_db) || !(noise_figure_db >= 0))
    return UT_RADIO_INVALID;
  *noise_dbm = ut_dbm_from_mw (UT_BOLTZMANN_J_K * temperature_k * bandwidth_hz * 1e3) + noise_figure_db;
  return UT_RADIO_OK;
}
