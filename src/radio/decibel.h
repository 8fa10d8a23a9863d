/* Decibels and linear ratios; the one place where they are turned into each other. */
#pragma once

#include <math.h>

/* Power ratio (>= 0) to dB; 0 gives -INFINITY. */
static inline double
ut_db_from_ratio (double ratio)
{
  return 10.0 * log10 (ratio);
}

/* dB to power ratio. */
static inline double
ut_ratio_from_db (double db)
{
  return pow (10.0, db / 10.0);
}

/* Milliwatts (>= 0) to dBm; 0 gives -INFINITY. */
static inline double
ut_dbm_from_mw (double mw)
{
  return ut_db_from_ratio (mw);
}

/* dBm to milliwatts. */
static inline double
ut_mw_from_dbm (double dbm)
{
  return ut_ratio_from_db (dbm);
}
