#include "exposure.h"

#include <math.h>
#include <stddef.h>

#include "decibel.h"

/* One band of a limit, its upper end included: factor * (f / unit)^power W/m2. */
typedef struct
{
  UtExposureLimit limit;
  double above_mhz, to_mhz, factor, power, unit_mhz;
} Band;

static const Band bands[] = {
  { UT_EXPOSURE_ICNIRP_BODY, 30, 400, 2, 0, 1 },
  { UT_EXPOSURE_ICNIRP_BODY, 400, 2000, 1.0 / 200, 1, 1 },
  { UT_EXPOSURE_ICNIRP_BODY, 2000, 300e3, 10, 0, 1 },
  { UT_EXPOSURE_ICNIRP_LOCAL, 30, 400, 10, 0, 1 },
  { UT_EXPOSURE_ICNIRP_LOCAL, 400, 2000, 0.058, 0.86, 1 },
  { UT_EXPOSURE_ICNIRP_LOCAL, 2000, 6000, 40, 0, 1 },
  { UT_EXPOSURE_ICNIRP_LOCAL, 6000, 300e3, 55, -0.177, 1000 },
  { UT_EXPOSURE_CFR, 30, 300, 2, 0, 1 },
  { UT_EXPOSURE_CFR, 300, 1500, 1.0 / 150, 1, 1 },
  { UT_EXPOSURE_CFR, 1500, 100e3, 10, 0, 1 },
};

static const char *const names[] = {
  [UT_EXPOSURE_ICNIRP_BODY] = "ICNIRP 2020 whole body",
  [UT_EXPOSURE_ICNIRP_LOCAL] = "ICNIRP 2020 local",
  [UT_EXPOSURE_CFR] = "47 CFR 1.1310",
  [UT_EXPOSURE_NEAR_FIELD] = "wavelength / 2 pi",
};

UtRadioStatus
ut_exposure_limit_w_m2 (UtExposureLimit limit, double frequency_hz, double *w_m2)
{
  double mhz = frequency_hz / 1e6;

  for (size_t i = 0; i < sizeof bands / sizeof bands[0]; i++)
    if (bands[i].limit == limit && (mhz > bands[i].above_mhz || (mhz >= 30 && bands[i].above_mhz <= 30)) && mhz <= bands[i].to_mhz)
      {
        *w_m2 = bands[i].factor * pow (mhz / bands[i].unit_mhz, bands[i].power);
        return UT_RADIO_OK;
      }
  return UT_RADIO_UNKNOWN;
}

double
ut_power_density_w_m2 (double eirp_w, double distance_m)
{
  return eirp_w / (4 * M_PI * distance_m * distance_m);
}

double
ut_field_strength_v_m (double eirp_w, double distance_m)
{
  return sqrt (30 * eirp_w) / distance_m;
}

UtRadioStatus
ut_compliance_distance_m (double eirp_dbm, double frequency_hz, double *distance_m, UtExposureLimit *governing)
{
  double eirp_w = ut_mw_from_dbm (eirp_dbm) / 1e3, most = -1;

  for (UtExposureLimit limit = UT_EXPOSURE_ICNIRP_BODY; limit <= UT_EXPOSURE_CFR; limit++)
    {
      double w_m2;

      if (ut_exposure_limit_w_m2 (limit, frequency_hz, &w_m2) != UT_RADIO_OK)
        continue;
      if (sqrt (eirp_w / (4 * M_PI * w_m2)) > most)
        {
          most = sqrt (eirp_w / (4 * M_PI * w_m2));
          *governing = limit;
        }
    }
  if (most < 0)
    return UT_RADIO_UNKNOWN;
  if (most < UT_SPEED_OF_LIGHT_M_S / frequency_hz / (2 * M_PI))
    {
      most = UT_SPEED_OF_LIGHT_M_S / frequency_hz / (2 * M_PI);
      *governing = UT_EXPOSURE_NEAR_FIELD;
    }
  *distance_m = most;
  return UT_RADIO_OK;
}

const char *
ut_exposure_limit_name (UtExposureLimit limit)
{
  return names[limit];
}
