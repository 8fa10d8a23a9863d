/* Headroom: the largest common factor on all targets (docs/methods.md, "Headroom"). */
#pragma once

#include "system.h"

typedef struct
{
  double factor;       /* t*, linear; within lower .. upper */
  double lower, upper; /* two-sided certificate */
  unsigned passes;
} UtHeadroom;

/* The supremum of factors t for which powers within limits, minima, levels and idle cells exist.
 * power (n_unknowns, may be NULL): powers that keep every limit and meet all with factor `lower`.
 * Limits are taken without slack, except that floors which pass a limit by no more than
 * UT_LIMIT_SLACK (a fixed power, rounded) are taken to fill it.  upper / lower <= 1 + 1e-10.
 * Returns UT_POWER_OK; UT_POWER_NONE where no t > 0 is feasible or there are no unknowns;
 * UT_POWER_UNSETTLED (the bounds did not close); UT_POWER_INVALID; UT_POWER_NO_MEMORY. */
UtPowerStatus ut_headroom (const UtSystem *system, double *power, UtHeadroom *headroom);
