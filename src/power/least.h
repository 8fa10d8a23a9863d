/* Least powers by policy iteration from below (docs/methods.md, "Least powers"). */
#pragma once

#include "system.h"

typedef struct
{
  unsigned passes; /* policy passes over all components */
  size_t
      limit; /* UT_POWER_LIMIT: the limit passed by most, relative; n_limits: none, or not known */
  double residual; /* largest relative gap between p and what the system asks at p */
} UtLeastInfo;

/* The componentwise least powers with factor `factor` (> 0) on every target.
 * power: n_unknowns, in the system's unit; untouched unless UT_POWER_OK.  info may be NULL.
 * Returns UT_POWER_OK; UT_POWER_UNBOUNDED (no finite powers at all, limits or not); UT_POWER_LIMIT
 * (finite, but a limit is passed by more than UT_LIMIT_SLACK); UT_POWER_INVALID;
 * UT_POWER_NO_MEMORY; UT_POWER_UNSETTLED (finite, but out of the range of doubles, with limits
 * lifted). `factor` scales the pieces, group constants included, but not the unknowns' minima and
 * levels; `minimum_above_limit` is not looked at here.
 *
 * Strongly connected components are solved one after another in topological order; the pivots of
 * each elimination are the proof (Berman & Plemmons, Nonnegative Matrices in the Mathematical
 * Sciences, 1979, chapter 6).  Success is checked once more without the solver: the powers, raised
 * by 1e-9, meet everything (up to the rounding of that check). */
UtPowerStatus ut_least_powers (
    const UtSystem *system, double factor, UtLift lift, double *power, UtLeastInfo *info);
