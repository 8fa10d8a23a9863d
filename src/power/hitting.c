#include "hitting.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#define MOST_NODES 20000000u

/* Sums of weights closer than this, relative, are equal. */
#define EQUAL_WEIGHT 1e-9

bool
ut_hitting_init (UtHitting *hitting, size_t n, const double *weight)
{
  memset (hitting, 0, sizeof *hitting);
  hitting->n = n;
  hitting->n_words = (n + 63) / 64 + (n == 0);
  hitting->weight = weight;
  hitting->nodes_left = MOST_NODES;
  return true;
}

void
ut_hitting_clear (UtHitting *hitting)
{
  free (hitting->conflicts);
  free (hitting->excluded);
  memset (hitting, 0, sizeof *hitting);
}

static bool
append (const UtHitting *hitting, uint64_t **sets, size_t *n_sets, size_t *room, const bool *items)
{
  uint64_t *set;

  if (*n_sets == *room)
    {
      size_t more = *room > 0 ? 2 * *room : 32;
      uint64_t *moved = realloc (*sets, more * hitting->n_words * sizeof **sets);

      if (moved == NULL)
        return false;
      *sets = moved;
      *room = more;
    }
  set = *sets + (*n_sets)++ * hitting->n_words;
  memset (set, 0, hitting->n_words * sizeof *set);
  for (size_t i = 0; i < hitting->n; i++)
    if (items[i])
      set[i / 64] |= (uint64_t) 1 << i % 64;
  return true;
}

bool
ut_hitting_add_conflict (UtHitting *hitting, const bool *items)
{
  return append (hitting, &hitting->conflicts, &hitting->n_conflicts, &hitting->room_conflicts, items);
}

bool
ut_hitting_exclude (UtHitting *hitting, const bool *items)
{
  return append (hitting, &hitting->excluded, &hitting->n_excluded, &hitting->room_excluded, items);
}

int
ut_hitting_compare (UtHittingCost one, UtHittingCost other)
{
  double equal = EQUAL_WEIGHT * fmax (one.weight, other.weight);

  if (fabs (one.weight - other.weight) > equal)
    return one.weight < other.weight ? -1 : 1;
  return (one.count > other.count) - (one.count < other.count);
}

static bool
has (const uint64_t *set, size_t item)
{
  return set[item / 64] >> item % 64 & 1;
}

static bool
meets (const uint64_t *one, const uint64_t *other, size_t n_words)
{
  for (size_t w = 0; w < n_words; w++)
    if (one[w] & other[w])
      return true;
  return false;
}

typedef struct
{
  UtHitting *hitting;
  uint64_t *chosen, *best, *used; /* used: room for the bound */
  bool found;
  UtHittingCost best_cost;
} Search;

/* Items of a conflict that may still be chosen. */
static size_t
n_allowed (const UtHitting *hitting, const uint64_t *conflict, const uint64_t *forbidden)
{
  size_t n = 0;

  for (size_t w = 0; w < hitting->n_words; w++)
    n += (size_t) __builtin_popcountll (conflict[w] & ~forbidden[w]);
  return n;
}

static double
cheapest (const UtHitting *hitting, const uint64_t *conflict, const uint64_t *forbidden)
{
  double least = INFINITY;

  for (size_t w = 0; w < hitting->n_words; w++)
    for (uint64_t bits = conflict[w] & ~forbidden[w]; bits != 0; bits &= bits - 1)
      least = fmin (least, hitting->weight[64 * w + (size_t) __builtin_ctzll (bits)]);
  return least;
}

/* What must be added at the least: conflicts not hit yet that share no item each need one of their own. Also finds the conflict with the fewest items to
 * choose from (n_conflicts: all are hit). */
static UtHittingCost
still_needed (Search *search, const uint64_t *forbidden, size_t *tightest)
{
  const UtHitting *hitting = search->hitting;
  UtHittingCost needed = { 0, 0 };
  size_t fewest = SIZE_MAX;

  memset (search->used, 0, hitting->n_words * sizeof *search->used);
  *tightest = hitting->n_conflicts;
  for (size_t k = 0; k < hitting->n_conflicts; k++)
    {
      const uint64_t *conflict = hitting->conflicts + k * hitting->n_words;
      size_t allowed;

      if (meets (conflict, search->chosen, hitting->n_words))
        continue;
      allowed = n_allowed (hitting, conflict, forbidden);
      if (allowed < fewest)
        {
          fewest = allowed;
          *tightest = k;
        }
      if (meets (conflict, search->used, hitting->n_words))
        continue;
      for (size_t w = 0; w < hitting->n_words; w++)
        search->used[w] |= conflict[w];
      needed.weight += cheapest (hitting, conflict, forbidden);
      needed.count++;
    }
  return needed;
}

static bool
is_excluded (const Search *search)
{
  const UtHitting *hitting = search->hitting;

  for (size_t k = 0; k < hitting->n_excluded; k++)
    if (memcmp (hitting->excluded + k * hitting->n_words, search->chosen, hitting->n_words * sizeof *search->chosen) == 0)
      return true;
  return false;
}

/* Tries to add each allowed item of `from`, one branch each; earlier branches' items are forbidden in later ones, so that no set comes twice.
 * Depth is bounded by the number of items. */
static UtHittingStatus explore (Search *search, const uint64_t *forbidden, UtHittingCost cost);

static UtHittingStatus
branch (Search *search, const uint64_t *from, const uint64_t *forbidden, UtHittingCost cost)
{
  const UtHitting *hitting = search->hitting;
  uint64_t *narrower = malloc (hitting->n_words * sizeof *narrower);
  UtHittingStatus status = narrower == NULL ? UT_HITTING_NO_MEMORY : UT_HITTING_NONE;

  if (narrower != NULL)
    memcpy (narrower, forbidden, hitting->n_words * sizeof *narrower);
  for (size_t i = 0; i < hitting->n && status == UT_HITTING_NONE; i++)
    {
      if (!has (from, i) || has (narrower, i) || has (search->chosen, i))
        continue;
      search->chosen[i / 64] |= (uint64_t) 1 << i % 64;
      status = explore (search, narrower, (UtHittingCost){ cost.weight + hitting->weight[i], cost.count + 1 });
      search->chosen[i / 64] &= ~((uint64_t) 1 << i % 64);
      narrower[i / 64] |= (uint64_t) 1 << i % 64;
    }
  free (narrower);
  return status;
}

/* UT_HITTING_NONE: done with this part of the search, whatever it found. */
static UtHittingStatus
explore (Search *search, const uint64_t *forbidden, UtHittingCost cost)
{
  UtHitting *hitting = search->hitting;
  size_t tightest;
  UtHittingCost needed;

  if (hitting->nodes_left == 0)
    return UT_HITTING_TOO_LONG;
  hitting->nodes_left--;
  needed = still_needed (search, forbidden, &tightest);
  needed.weight += cost.weight;
  needed.count += cost.count;
  if (!isfinite (needed.weight) || (search->found && ut_hitting_compare (needed, search->best_cost) >= 0))
    return UT_HITTING_NONE;
  if (tightest < hitting->n_conflicts)
    return branch (search, hitting->conflicts + tightest * hitting->n_words, forbidden, cost);
  if (!is_excluded (search))
    {
      memcpy (search->best, search->chosen, hitting->n_words * sizeof *search->best);
      search->best_cost = cost;
      search->found = true;
      return UT_HITTING_NONE;
    }
  /* Hit already, but not wanted: any further item makes another set. */
  uint64_t *all = malloc (hitting->n_words * sizeof *all);
  UtHittingStatus status = UT_HITTING_NO_MEMORY;
  if (all != NULL)
    {
      memset (all, 0xff, hitting->n_words * sizeof *all);
      status = branch (search, all, forbidden, cost);
    }
  free (all);
  return status;
}

UtHittingStatus
ut_hitting_next (UtHitting *hitting, bool *items, UtHittingCost *cost)
{
  uint64_t *room = calloc (4 * hitting->n_words, sizeof *room);
  Search search = { .hitting = hitting };
  UtHittingStatus status;

  if (room == NULL)
    return UT_HITTING_NO_MEMORY;
  search.chosen = room;
  search.best = room + hitting->n_words;
  search.used = room + 2 * hitting->n_words;
  status = explore (&search, room + 3 * hitting->n_words, (UtHittingCost){ 0, 0 });
  if (status == UT_HITTING_NONE && search.found)
    {
      for (size_t i = 0; i < hitting->n; i++)
        items[i] = has (search.best, i);
      *cost = search.best_cost;
      status = UT_HITTING_FOUND;
    }
  free (room);
  return status;
}
