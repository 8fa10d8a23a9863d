/* Free space and what follows it to a reference distance. */
#include <math.h>

#include "law-families.h"

/* ITU-R P.525-5: 20 log10 (4 pi d f / c), exact; distances in metres. */
double
ut_free_space_db (double frequency_hz, double distance_m)
{
  return 20 * log10 (4 * M_PI * distance_m * frequency_hz / UT_SPEED_OF_LIGHT_M_S);
}

UtRadioStatus
ut_free_space_loss (const UtLaw *law, const UtLawPath *path, double *loss_db)
{
  (void) law;
  *loss_db = ut_free_space_db (path->frequency_hz, path->distance_m);
  return UT_RADIO_OK;
}

UtRadioStatus
ut_log_distance_loss (const UtLaw *law, const UtLawPath *path, double *loss_db)
{
  double distance_m;

  if (!isfinite (law->exponent) || !(law->exponent > 0) || !isfinite (law->reference_m) || !(law->reference_m > 0))
    return UT_RADIO_INVALID;
  distance_m = fmax (path->distance_m, law->reference_m);
  *loss_db = ut_free_space_db (path->frequency_hz, law->reference_m) + 10 * law->exponent * log10 (distance_m / law->reference_m);
  return UT_RADIO_OK;
}
