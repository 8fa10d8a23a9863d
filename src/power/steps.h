/* Power steps: the levels a radio can be set to (docs/methods.md, "Power steps"). */
#pragma once

#include <stdbool.h>

/* Levels lowest * 10^(k step / 10), k = 0, 1, ...; all in one linear unit. */
typedef struct
{
  double lowest;  /* > 0 */
  double step_db; /* > 0 */
  double limit;   /* no level above it counts, up to UT_LIMIT_SLACK */
} UtLadder;

/* The smallest level of the ladder that is at least `need` (up to a billionth of a step); *level untouched and false where
 * there is none within the limit. */
bool ut_ladder_level (const UtLadder *ladder, double need, double *level);

/* The largest level within the limit; the lowest one where even that passes it. */
double ut_ladder_top (const UtLadder *ladder);
