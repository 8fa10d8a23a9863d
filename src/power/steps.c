#include "steps.h"

#include <math.h>

#include "system.h"

#define STEP_SLACK 1e-9

static double
level_at (const UtLadder *ladder, double k)
{
  return ladder->lowest * pow (10, k * ladder->step_db / 10);
}

bool
ut_ladder_level (const UtLadder *ladder, double need, double *level)
{
  double k = need > ladder->lowest ? ceil (10 * log10 (need / ladder->lowest) / ladder->step_db - STEP_SLACK) : 0;
  double found = level_at (ladder, k);

  if (!(found <= ladder->limit * (1 + UT_LIMIT_SLACK)))
    return false;
  *level = found;
  return true;
}

double
ut_ladder_top (const UtLadder *ladder)
{
  double k = ladder->limit > ladder->lowest ? floor (10 * log10 (ladder->limit / ladder->lowest) / ladder->step_db + STEP_SLACK) : 0;

  return level_at (ladder, k);
}
