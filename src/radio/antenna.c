#include "antenna.h"

#include <math.h>

#include "decibel.h"

/* Both side-lobe limits of TR 38.901 table 7.3-1. */
#define LARGEST_FALL_DB 30.0

static const double rad_per_deg = M_PI / 180;

/* The direction as the antenna sees it: forward along boresight, left, up. */
static void
turn (double azimuth_deg, double downtilt_deg, const double direction[3], double turned[3])
{
  double azimuth = azimuth_deg * rad_per_deg, tilt = downtilt_deg * rad_per_deg;
  /* Azimuth runs clockwise from +y: boresight on the ground is (sin, cos). */
  double ahead = sin (azimuth) * direction[0] + cos (azimuth) * direction[1];

  turned[1] = -cos (azimuth) * direction[0] + sin (azimuth) * direction[1];
  turned[0] = cos (tilt) * ahead - sin (tilt) * direction[2];
  turned[2] = sin (tilt) * ahead + cos (tilt) * direction[2];
}

static double
sector_fall_db (const UtAntennaShape *shape, const double turned[3], double length)
{
  double vertical_deg = asin (fmax (-1, fmin (1, turned[2] / length))) / rad_per_deg;
  double horizontal_deg = atan2 (turned[1], turned[0]) / rad_per_deg;
  double v = vertical_deg / shape->beamwidth_v_deg, h = horizontal_deg / shape->beamwidth_h_deg;

  return fmin (fmin (12 * v * v, LARGEST_FALL_DB) + fmin (12 * h * h, LARGEST_FALL_DB), LARGEST_FALL_DB);
}

UtRadioStatus
ut_antenna_gain_dbi (const UtAntennaShape *shape, double azimuth_deg, double downtilt_deg, const double direction[3], double *gain_dbi)
{
  static const double down[3] = { 0, 0, -1 };
  double length = hypot (hypot (direction[0], direction[1]), direction[2]);
  double turned[3];

  if (!isfinite (shape->gain_dbi) || !isfinite (azimuth_deg) || !(fabs (downtilt_deg) <= 90) || !isfinite (length))
    return UT_RADIO_INVALID;
  if (shape->pattern == UT_PATTERN_ISOTROPIC)
    {
      *gain_dbi = shape->gain_dbi;
      return UT_RADIO_OK;
    }
  if (!isfinite (shape->beamwidth_h_deg) || !(shape->beamwidth_h_deg > 0) || !isfinite (shape->beamwidth_v_deg)
      || !(shape->beamwidth_v_deg > 0))
    return UT_RADIO_INVALID;
  if (!(length > 0))
    {
      direction = down;
      length = 1;
    }
  turn (azimuth_deg, downtilt_deg, direction, turned);
  *gain_dbi = shape->gain_dbi - sector_fall_db (shape, turned, length);
  return UT_RADIO_OK;
}
