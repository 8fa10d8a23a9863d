/* Antenna patterns, turned in three dimensions. */
#pragma once

#include <stddef.h>

#include "radio.h"

typedef enum
{
  UT_PATTERN_ISOTROPIC,
  UT_PATTERN_SECTOR, /* 3GPP TR 38.901 table 7.3-1 with free beamwidths; both side-lobe limits 30 dB */
  UT_PATTERN_DIPOLE, /* vertical half-wave, whatever azimuth and tilt; 2.15 dBi, never below 30 dB less */
  UT_PATTERN_CUTS,   /* two measured cuts, combined as in the sector */
} UtPattern;

#define UT_DIPOLE_DBI 2.15


typedef struct
{
  UtPattern pattern;
  double gain_dbi; /* isotropic, sector: of boresight */
  double beamwidth_h_deg, beamwidth_v_deg; /* sector: full half-power widths, > 0 */
  const double *horizontal_dbi, *vertical_dbi; /* cuts: evenly spaced, clockwise from boresight round the full circle (its end, the start, left out), */
  size_t n_horizontal, n_vertical;             /* and from straight down to straight up, both included; 2 or more each */
} UtAntennaShape;

/* The largest gain there is in any direction. */
double ut_antenna_peak_dbi (const UtAntennaShape *shape);

/* Gain in dBi towards `direction` (x right, y up the sheet, z up; any length; the zero vector counts as straight down).
 * azimuth_deg: of boresight, clockwise from +y, any; downtilt_deg: mechanical, -90..90, positive below the horizon. */
UtRadioStatus ut_antenna_gain_dbi (const UtAntennaShape *shape,
                                   double azimuth_deg,
                                   double downtilt_deg,
                                   const double direction[3],
                                   double *gain_dbi);
