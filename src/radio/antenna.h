/* Antenna patterns, turned in three dimensions. */
#pragma once

#include "radio.h"

typedef enum
{
  UT_PATTERN_ISOTROPIC,
  UT_PATTERN_SECTOR, /* 3GPP TR 38.901 table 7.3-1 with free beamwidths; both side-lobe limits 30 dB */
} UtPattern;

typedef struct
{
  UtPattern pattern;
  double gain_dbi;
  double beamwidth_h_deg, beamwidth_v_deg; /* sector: full half-power widths, > 0 */
} UtAntennaShape;

/* Gain in dBi towards `direction` (x right, y up the sheet, z up; any length; the zero vector counts as straight down).
 * azimuth_deg: of boresight, clockwise from +y, any; downtilt_deg: mechanical, -90..90, positive below the horizon. */
UtRadioStatus ut_antenna_gain_dbi (const UtAntennaShape *shape,
                                   double azimuth_deg,
                                   double downtilt_deg,
                                   const double direction[3],
                                   double *gain_dbi);
