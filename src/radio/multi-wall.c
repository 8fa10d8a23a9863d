/* The multi-wall model of COST 231 (Final Report, EUR 18957, 1999, section 4.7), its additive constant taken as 0 (from memory). */
#include <math.h>

#include "law-families.h"

double
ut_floor_term_db (unsigned n_floors, double floor_db, double b)
{
  double n = n_floors;

  return n_floors == 0 ? 0 : pow (n, (n + 2) / (n + 1) - b) * floor_db;
}

static bool
is_loss (double loss_db)
{
  return isfinite (loss_db) && loss_db >= 0;
}

UtRadioStatus
ut_multi_wall_loss (const UtLaw *law, const UtLawPath *path, double *loss_db)
{
  if (!is_loss (law->light_db) || !is_loss (law->heavy_db) || !is_loss (law->floor_db) || !is_loss (law->b))
    return UT_RADIO_INVALID;
  *loss_db = ut_free_space_db (path->frequency_hz, path->distance_m) + path->n_light * law->light_db + path->n_heavy * law->heavy_db
             + ut_floor_term_db (path->n_floors, law->floor_db, law->b);
  return UT_RADIO_OK;
}

/* Its default constants are measured at 1800 MHz; used from 800 to 1900 MHz (common practice). */
UtLawRange
ut_multi_wall_range (const UtLaw *law, const UtLawPath *path)
{
  (void) law;
  (void) path;
  return (UtLawRange){ 800e6, 1900e6, 1, INFINITY, NAN };
}
