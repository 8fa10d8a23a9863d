/* Screening of radio-frequency exposure of the general public.  An estimate that defers to local rules: in the far field, without reflections. */
#pragma once

#include "radio.h"

typedef enum
{
  UT_EXPOSURE_ICNIRP_BODY,  /* ICNIRP 2020, reference level, whole body, 30 min (Health Physics 118(5), table 5) */
  UT_EXPOSURE_ICNIRP_LOCAL, /* ICNIRP 2020, reference level, local, 6 min (table 6) */
  UT_EXPOSURE_CFR,          /* 47 CFR 1.1310, general population, 30 min */
  UT_EXPOSURE_NEAR_FIELD,   /* none of these governs: nearer than lambda / 2 pi nothing is said */
} UtExposureLimit;

/* Power density in W/m2.  30 MHz to 300 GHz (47 CFR: to 100 GHz); UT_RADIO_UNKNOWN outside, where the limit is not stated so. */
UtRadioStatus ut_exposure_limit_w_m2 (UtExposureLimit limit, double frequency_hz, double *w_m2);

/* Power density and field strength of a plane wave at a distance > 0 from an EIRP in watts. */
double ut_power_density_w_m2 (double eirp_w, double distance_m);
double ut_field_strength_v_m (double eirp_w, double distance_m);

/* The largest of the distances sqrt (EIRP / 4 pi S) of the three limits, never below lambda / 2 pi, and which one governs.
 * UT_RADIO_UNKNOWN where no limit is stated for the frequency. */
UtRadioStatus ut_compliance_distance_m (double eirp_dbm, double frequency_hz, double *distance_m, UtExposureLimit *governing);

const char *ut_exposure_limit_name (UtExposureLimit limit);
