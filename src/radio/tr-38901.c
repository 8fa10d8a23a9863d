/* 3GPP TR 38.901 (V19), table 7.4.1-1: indoor office and indoor factory. Frequencies in GHz there; 0.5 to 100 GHz. */
#include <math.h>

#include "law-families.h"

/* a + b log10 (d) + c log10 (f_GHz), and its scatter */
typedef struct
{
  double a, b, c, sigma_db;
} Line;

static const Line office_los = { 32.4, 17.3, 20, 3 }, office_nlos = { 17.30, 38.3, 24.9, 8.03 };
static const Line factory_los = { 31.84, 21.50, 19.00, 4.3 };
static const Line factory_nlos[] = {
  [UT_CLUTTER_SL] = { 33, 25.5, 20, 5.7 },
  [UT_CLUTTER_DL] = { 18.6, 35.7, 20, 7.2 },
  [UT_CLUTTER_SH] = { 32.4, 23.0, 20, 5.9 },
  [UT_CLUTTER_DH] = { 33.63, 21.9, 20, 4.0 },
};

#define N_CLUTTERS (sizeof factory_nlos / sizeof factory_nlos[0])

static double
line_db (const Line *line, const UtLawPath *path)
{
  return line->a + line->b * log10 (path->distance_m) + line->c * log10 (path->frequency_hz / 1e9);
}

UtRadioStatus
ut_indoor_office_loss (const UtLaw *law, const UtLawPath *path, double *loss_db)
{
  double loss = line_db (&office_los, path);

  *loss_db = ut_law_is_nlos (law, path) ? fmax (loss, line_db (&office_nlos, path)) : loss;
  return UT_RADIO_OK;
}

UtLawRange
ut_indoor_office_range (const UtLaw *law, const UtLawPath *path)
{
  return (UtLawRange){ 0.5e9, 100e9, 1, 150, ut_law_is_nlos (law, path) ? office_nlos.sigma_db : office_los.sigma_db };
}

/* Dense clutter low never loses less than sparse clutter low, and none less than in sight. */
UtRadioStatus
ut_indoor_factory_loss (const UtLaw *law, const UtLawPath *path, double *loss_db)
{
  double loss = line_db (&factory_los, path);

  if ((size_t) law->clutter >= N_CLUTTERS)
    return UT_RADIO_INVALID;
  if (ut_law_is_nlos (law, path))
    {
      loss = fmax (loss, line_db (&factory_nlos[law->clutter], path));
      if (law->clutter == UT_CLUTTER_DL)
        loss = fmax (loss, line_db (&factory_nlos[UT_CLUTTER_SL], path));
    }
  *loss_db = loss;
  return UT_RADIO_OK;
}

UtLawRange
ut_indoor_factory_range (const UtLaw *law, const UtLawPath *path)
{
  return (UtLawRange){ 0.5e9, 100e9, 1, 600, ut_law_is_nlos (law, path) ? factory_nlos[law->clutter].sigma_db : factory_los.sigma_db };
}
