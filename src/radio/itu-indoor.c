/* ITU-R P.1238: the site-general model and the older distance power-loss coefficient. */
#include <math.h>

#include "law-families.h"

/* One row of P.1238-11 table 2 (from memory; agreed with one public excerpt). */
typedef struct
{
  double alpha, beta, gamma;
  double lowest_ghz, highest_ghz, nearest_m, farthest_m, sigma_db;
} Row;

static const Row rows[][2] = {
  [UT_ENVIRONMENT_OFFICE] = { { 1.46, 34.62, 2.03, 0.3, 83.5, 2, 27, 3.76 }, { 2.46, 29.53, 2.38, 0.3, 82, 4, 30, 5.04 } },
  [UT_ENVIRONMENT_CORRIDOR] = { { 1.63, 28.12, 2.25, 0.3, 83.5, 2, 160, 4.07 }, { 2.77, 29.27, 2.48, 0.625, 83.5, 4, 94, 7.63 } },
  [UT_ENVIRONMENT_INDUSTRIAL] = { { 2.31, 24.52, 2.06, 0.625, 70.28, 2, 101, 2.69 }, { 3.79, 21.01, 1.34, 0.625, 70.28, 5, 108, 9.05 } },
};

#define N_ENVIRONMENTS (sizeof rows / sizeof rows[0])

static const Row *
row_of (const UtLaw *law, const UtLawPath *path)
{
  return &rows[law->environment][ut_law_is_nlos (law, path) ? 1 : 0];
}

/* P.1238-11 equation (1), median; frequency in GHz. */
UtRadioStatus
ut_site_general_loss (const UtLaw *law, const UtLawPath *path, double *loss_db)
{
  const Row *row;

  if ((size_t) law->environment >= N_ENVIRONMENTS)
    return UT_RADIO_INVALID;
  row = row_of (law, path);
  *loss_db = 10 * row->alpha * log10 (path->distance_m) + row->beta + 10 * row->gamma * log10 (path->frequency_hz / 1e9);
  return UT_RADIO_OK;
}

UtLawRange
ut_site_general_range (const UtLaw *law, const UtLawPath *path)
{
  const Row *row = row_of (law, path);

  return (UtLawRange){ row->lowest_ghz * 1e9, row->highest_ghz * 1e9, row->nearest_m, row->farthest_m, row->sigma_db };
}

/* The only site-general model up to P.1238-9: 20 log10 f_MHz - 28 + N log10 d + Lf (n). */
UtRadioStatus
ut_distance_coefficient_loss (const UtLaw *law, const UtLawPath *path, double *loss_db)
{
  double floors_db = 0;

  if (!isfinite (law->coefficient) || !(law->coefficient > 0))
    return UT_RADIO_INVALID;
  if (path->n_floors > 0 && law->n_floor_losses > 0)
    floors_db = law->floor_loss_db[path->n_floors < law->n_floor_losses ? path->n_floors - 1 : law->n_floor_losses - 1];
  *loss_db = 20 * log10 (path->frequency_hz / 1e6) - 28 + law->coefficient * log10 (path->distance_m) + floors_db;
  return UT_RADIO_OK;
}

/* P.1238-8: 300 MHz to 100 GHz, from 1 m. */
UtLawRange
ut_distance_coefficient_range (const UtLaw *law, const UtLawPath *path)
{
  (void) law;
  (void) path;
  return (UtLawRange){ 300e6, 100e9, 1, INFINITY, NAN };
}
