/* Places are kept to the millimetre: what a drag or a turn gives below that is noise. */
#pragma once

#include <math.h>

static inline double
ut_to_mm (double value_m)
{
  return round (value_m * 1e3) / 1e3;
}
