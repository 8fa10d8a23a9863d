/* Who sets the headroom (docs/methods.md, "Limiting group"). */
#pragma once

#include "system.h"

/* The involvement of each unknown in the edge at `factor` (the headroom's lower end, with the powers p found there):
 * y_i p_i over their sum, y the left Perron vector of the linear system that is active there, the full limit taken in. 1 dB on everything
 * that unknown i asks for moves the headroom by about involvement_i dB; unknowns at their floor have 0.
 * involvement: n_unknowns, sums to 1.  full_limit (may be NULL): the limit that is full.
 * Returns UT_POWER_OK, UT_POWER_NO_MEMORY, or UT_POWER_NONE where nothing is above its floor. */
UtPowerStatus ut_involvement (const UtSystem *system, double factor, const double *p, double *involvement, size_t *full_limit);
