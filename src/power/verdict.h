/* Whether the system can be met at all, and what stands in the way. */
#pragma once

#include "system.h"

typedef enum
{
  UT_FEASIBLE = 0,
  UT_INTERFERENCE_LIMITED, /* no powers whatever: radius >= 1 */
  UT_POWER_LIMITED,        /* least powers pass a limit with minima lifted and idle cells silent */
  UT_MINIMUM_LIMITED,      /* only minima and idle cells stand in the way */
} UtFeasibility;

/* Decides in the order above, each by a solve that proves it.  power (n_unknowns, may be NULL): the
 * least powers, written only when *feasibility is UT_FEASIBLE.  No unknowns: feasible. */
UtPowerStatus ut_feasibility (const UtSystem *system, UtFeasibility *feasibility, double *power);
