/* Reserves of links that have an unknown each (docs/methods.md, "Reserve"). */
#pragma once

#include "system.h"

typedef enum
{
  UT_RESERVE_FOUND,
  UT_RESERVE_NONE,      /* no change of this target alone helps */
  UT_RESERVE_UNSETTLED, /* not decided here: to be found by solving anew */
} UtReserveStatus;

/* For every unknown the supremum of the factors by which its own piece alone can be scaled so that all is met, limits and floors kept.
 * Needs one piece an unknown and at most one term a group; factor, status: n_unknowns.
 *
 * One inverse serves all: with the power of unknown i held at P instead, everybody else's least powers are linear in P as long as nobody
 * reaches or leaves a floor, and the target that P is worth rises with P. Where a floor does come into play the status is unsettled.
 * Where the spectral radius is 1 or more the same elimination, shared between all unknowns by halves, tells whose row must go for the rest to be finite;
 * those are unsettled, the others have no reserve.
 * Returns UT_POWER_OK, UT_POWER_INVALID (not such a system), UT_POWER_NO_MEMORY. */
UtPowerStatus ut_reserves (const UtSystem *system, double *factor, UtReserveStatus *status);
