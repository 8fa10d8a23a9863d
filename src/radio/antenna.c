#include "antenna.h"

#include <math.h>
#include <stdbool.h>

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

/* TR 38.901 table 7.3-1: how the falls of the two cuts make one. */
static double
combined_fall_db (double vertical_db, double horizontal_db)
{
  return fmin (fmin (vertical_db, LARGEST_FALL_DB) + fmin (horizontal_db, LARGEST_FALL_DB), LARGEST_FALL_DB);
}

static double
sector_fall_db (const UtAntennaShape *shape, double vertical_deg, double horizontal_deg)
{
  double v = vertical_deg / shape->beamwidth_v_deg, h = horizontal_deg / shape->beamwidth_h_deg;

  return combined_fall_db (12 * v * v, 12 * h * h);
}

/* Linear in dB between the samples; position in steps from the first one. */
static double
cut_dbi (const double *dbi, size_t n, double position, bool round)
{
  size_t before = (size_t) fmin (floor (position), (double) (round ? n - 1 : n - 2)), after = before + 1 < n ? before + 1 : 0;
  double share = position - (double) before;

  return dbi[before] + share * (dbi[after] - dbi[before]);
}

static double
largest (const double *dbi, size_t n)
{
  double most = -INFINITY;

  for (size_t i = 0; i < n; i++)
    most = fmax (most, dbi[i]);
  return most;
}

static double
cuts_fall_db (const UtAntennaShape *shape, double vertical_deg, double horizontal_deg)
{
  /* Leftwards is anticlockwise. */
  double clockwise = fmod (360 - horizontal_deg, 360) / 360 * (double) shape->n_horizontal;
  double up = (vertical_deg + 90) / 180 * (double) (shape->n_vertical - 1);

  return combined_fall_db (largest (shape->vertical_dbi, shape->n_vertical) - cut_dbi (shape->vertical_dbi, shape->n_vertical, up, false),
                           largest (shape->horizontal_dbi, shape->n_horizontal)
                             - cut_dbi (shape->horizontal_dbi, shape->n_horizontal, fmin (clockwise, (double) shape->n_horizontal), true));
}

/* Field cos (90 deg cos theta) / sin theta, theta from the vertical: 1 on the horizon (any handbook of antennas; common practice). */
static double
dipole_fall_db (const double direction[3], double length)
{
  double cosine = fmax (-1, fmin (1, direction[2] / length)), sine = sqrt (1 - cosine * cosine);
  double field = sine > 1e-9 ? cos (M_PI / 2 * cosine) / sine : 0;

  return fmin (-20 * log10 (fmax (fabs (field), 1e-10)), LARGEST_FALL_DB);
}

double
ut_antenna_peak_dbi (const UtAntennaShape *shape)
{
  if (shape->pattern == UT_PATTERN_DIPOLE)
    return UT_DIPOLE_DBI;
  if (shape->pattern == UT_PATTERN_CUTS)
    return fmax (largest (shape->horizontal_dbi, shape->n_horizontal), largest (shape->vertical_dbi, shape->n_vertical));
  return shape->gain_dbi;
}

static bool
is_cut (const double *dbi, size_t n)
{
  if (dbi == NULL || n < 2)
    return false;
  for (size_t i = 0; i < n; i++)
    if (!isfinite (dbi[i]))
      return false;
  return true;
}

static bool
is_shape (const UtAntennaShape *shape)
{
  switch (shape->pattern)
    {
    case UT_PATTERN_ISOTROPIC:
      return isfinite (shape->gain_dbi);
    case UT_PATTERN_SECTOR:
      return isfinite (shape->gain_dbi) && isfinite (shape->beamwidth_h_deg) && shape->beamwidth_h_deg > 0 && isfinite (shape->beamwidth_v_deg)
             && shape->beamwidth_v_deg > 0;
    case UT_PATTERN_DIPOLE:
      return true;
    case UT_PATTERN_CUTS:
      return is_cut (shape->horizontal_dbi, shape->n_horizontal) && is_cut (shape->vertical_dbi, shape->n_vertical);
    }
  return false;
}

UtRadioStatus
ut_antenna_gain_dbi (const UtAntennaShape *shape, double azimuth_deg, double downtilt_deg, const double direction[3], double *gain_dbi)
{
  static const double down[3] = { 0, 0, -1 };
  double length = hypot (hypot (direction[0], direction[1]), direction[2]);
  double turned[3], vertical_deg, horizontal_deg;

  if (!is_shape (shape) || !isfinite (azimuth_deg) || !(fabs (downtilt_deg) <= 90) || !isfinite (length))
    return UT_RADIO_INVALID;
  if (!(length > 0))
    {
      direction = down;
      length = 1;
    }
  turn (azimuth_deg, downtilt_deg, direction, turned);
  vertical_deg = asin (fmax (-1, fmin (1, turned[2] / length))) / rad_per_deg;
  horizontal_deg = atan2 (turned[1], turned[0]) / rad_per_deg;
  *gain_dbi = ut_antenna_peak_dbi (shape);
  switch (shape->pattern)
    {
    case UT_PATTERN_ISOTROPIC:
      break;
    case UT_PATTERN_SECTOR:
      *gain_dbi -= sector_fall_db (shape, vertical_deg, horizontal_deg);
      break;
    case UT_PATTERN_DIPOLE:
      *gain_dbi -= dipole_fall_db (direction, length);
      break;
    case UT_PATTERN_CUTS:
      *gain_dbi -= cuts_fall_db (shape, vertical_deg, horizontal_deg);
      break;
    }
  return UT_RADIO_OK;
}
