/* Where radios end up that each go for their own target, and stop at their limit (docs/methods.md, "Power control loop"). */
#pragma once

#include "system.h"

/* The one fixed point of p = min (limit, max (floor, J (p))): it always exists. Links below their limit there meet their target exactly (or stand at
 * their floor), links at it miss theirs or just meet it (Grandhi, Zander & Yates, Wireless Personal Communications 1, 1995, from memory).
 * Every limit must hold down one unknown alone.  power: n_unknowns.
 * Returns UT_POWER_OK, UT_POWER_INVALID (a limit on a sum), UT_POWER_NO_MEMORY, or what ut_least_powers () says. */
UtPowerStatus ut_capped_powers (const UtSystem *system, double *power);

/* By how much an error about that point shrinks with every round in which all radios act on what they have just seen: the spectral radius of what is
 * active there. */
UtPowerStatus ut_capped_rate (const UtSystem *system, const double *power, double *rate);
