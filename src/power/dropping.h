/* Which links to leave out so that the rest can be met (docs/methods.md, "Fewest dropped"). */
#pragma once

#include "system.h"

/* How the search asks about a set of links.  kept: n flags. */
typedef struct
{
  /* Whether all of these can be met together.  Must be monotone: what holds of a set holds of every part of it. */
  bool (*keepable) (const bool *kept, void *data);
  /* The same where that is only nearly so: asked of sets that passed keepable, and may refuse them; NULL: never refuses. */
  bool (*really) (const bool *kept, void *data);
  /* Of equally cheap sets the one with the larger rank is preferred. */
  double (*rank) (const bool *kept, void *data);
  /* The kept link whose loss promises most, for the search without proof. */
  size_t (*worst) (const bool *kept, void *data);
  bool (*cancelled) (void *data); /* may be NULL */
  void *data;
} UtKeeping;

typedef struct
{
  double total;    /* weight of what is dropped */
  double at_least; /* proved: no smaller weight will do */
  bool proved;     /* total is the least there is */
  unsigned tests;  /* sets tried */
} UtDropping;

/* Finds the links of least total weight (> 0 each, finite) without which the rest is keepable; of equal totals the fewest links, then the
 * larger rank, then the set that comes first.  dropped: n flags, untouched unless UT_POWER_OK.
 *
 * By minimum hitting sets of minimal conflicts (Reiter, Artificial Intelligence 32, 1987; Moreno-Centeno & Karp, Operations Research 61(2), 2013; both
 * from memory).  Ends early when the work gets too much (it counts sets, not seconds, so that the answer is always the same): then
 * !proved, and the optimum lies between at_least and total.
 * Returns UT_POWER_OK, UT_POWER_NO_MEMORY or UT_POWER_CANCELLED. */
UtPowerStatus ut_fewest_dropped (size_t n, const double *weight, const UtKeeping *keeping, bool *dropped, UtDropping *result);
