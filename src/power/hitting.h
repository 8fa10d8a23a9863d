/* Minimum-weight hitting sets: the cheapest choice of items with at least one out of every conflict. */
#pragma once

#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>

typedef struct
{
  double weight;
  size_t count;
} UtHittingCost;

typedef enum
{
  UT_HITTING_FOUND,
  UT_HITTING_NONE,
  UT_HITTING_TOO_LONG, /* the search was given up; nothing is claimed */
  UT_HITTING_NO_MEMORY,
} UtHittingStatus;

/* Sets of items are bits, n_words words each. */
typedef struct
{
  size_t n, n_words;
  const double *weight; /* borrowed */
  uint64_t *conflicts;
  size_t n_conflicts, room_conflicts;
  uint64_t *excluded;
  size_t n_excluded, room_excluded;
  size_t nodes_left; /* of the search, over all calls */
} UtHitting;

bool ut_hitting_init (UtHitting *hitting, size_t n, const double *weight);
void ut_hitting_clear (UtHitting *hitting);

/* Both take n flags and return false where memory is short.  An excluded set is never found again, sets with more items may be. */
bool ut_hitting_add_conflict (UtHitting *hitting, const bool *items);
bool ut_hitting_exclude (UtHitting *hitting, const bool *items);

/* By weight, up to rounding, then by count. */
int ut_hitting_compare (UtHittingCost one, UtHittingCost other);

/* The cheapest set that hits every conflict and is not excluded; items: n flags, written only when found. */
UtHittingStatus ut_hitting_next (UtHitting *hitting, bool *items, UtHittingCost *cost);
