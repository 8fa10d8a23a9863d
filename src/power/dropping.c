#include "dropping.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "hitting.h"

/* Sets tried cost about n^3 + 1000 n^2 operations each; this many in all is a few seconds. */
#define MOST_WORK 1e11

/* Equally good sets looked at, at most. */
#define MOST_TIES 200

/* Ranks closer than this are equal. */
#define EQUAL_RANK 1e-9

typedef struct
{
  size_t n;
  const double *weight;
  const UtKeeping *keeping;
  UtHitting hitting;
  bool *kept, *trial, *candidate, *best; /* flags; best holds what is dropped */
  bool found;
  double rank;
  uint32_t *order; /* in which links are tried for a conflict */
  uint64_t seed;
  UtDropping *result;
} Search;

static bool
keepable (Search *search, const bool *kept)
{
  search->result->tests++;
  return search->keeping->keepable (kept, search->keeping->data);
}

static bool
exhausted (const Search *search)
{
  double n = (double) search->n;

  return search->result->tests * (n * n * n + 1000 * n * n) > MOST_WORK;
}

static bool
cancelled (const Search *search)
{
  return search->keeping->cancelled != NULL && search->keeping->cancelled (search->keeping->data);
}

/* A generator of its own, so that an answer never depends on the machine (Marsaglia, J. Stat. Software 8(14), 2003). */
static uint64_t
random_number (Search *search)
{
  search->seed ^= search->seed << 13;
  search->seed ^= search->seed >> 7;
  search->seed ^= search->seed << 17;
  return search->seed;
}

static size_t
shuffled (Search *search, const bool *members)
{
  size_t n = 0;

  for (size_t i = 0; i < search->n; i++)
    if (members[i])
      search->order[n++] = (uint32_t) i;
  for (size_t i = n; i > 1; i--)
    {
      size_t j = random_number (search) % i;
      uint32_t one = search->order[i - 1];

      search->order[i - 1] = search->order[j];
      search->order[j] = one;
    }
  return n;
}

/* Shrinks search->trial, which is not keepable, to a conflict of which every part is: whole runs of links are taken out at a time, longer ones
 * after each success. */
static void
shrink_to_conflict (Search *search)
{
  size_t n = shuffled (search, search->trial), run = 1;

  for (size_t i = 0; i < n;)
    {
      size_t end = i + run < n ? i + run : n;

      for (size_t k = i; k < end; k++)
        search->trial[search->order[k]] = false;
      if (!keepable (search, search->trial))
        {
          i = end;
          run *= 2;
          continue;
        }
      for (size_t k = i; k < end; k++)
        search->trial[search->order[k]] = true;
      if (end - i == 1)
        i = end; /* the conflict needs it */
      run = (end - i + 1) / 2 > 0 ? (end - i + 1) / 2 : 1;
    }
}

/* Takes disjoint conflicts out of search->kept until it is keepable. */
static bool
add_conflicts (Search *search)
{
  do
    {
      memcpy (search->trial, search->kept, search->n * sizeof *search->trial);
      shrink_to_conflict (search);
      if (!ut_hitting_add_conflict (&search->hitting, search->trial))
        return false;
      for (size_t i = 0; i < search->n; i++)
        search->kept[i] = search->kept[i] && !search->trial[i];
    }
  while (!exhausted (search) && !cancelled (search) && !keepable (search, search->kept));
  return true;
}

/* Of two sets of equal rank, whether the one comes first: the first link on which they differ is in it. */
static bool
comes_first (const bool *one, const bool *other, size_t n)
{
  for (size_t i = 0; i < n; i++)
    if (one[i] != other[i])
      return one[i];
  return false;
}

static void
consider (Search *search, const bool *dropped)
{
  double rank;

  for (size_t i = 0; i < search->n; i++)
    search->kept[i] = !dropped[i];
  if (search->keeping->really != NULL && !search->keeping->really (search->kept, search->keeping->data))
    return;
  rank = search->keeping->rank (search->kept, search->keeping->data);
  if (!search->found || rank > search->rank + EQUAL_RANK
      || (rank > search->rank - EQUAL_RANK && comes_first (dropped, search->best, search->n)))
    {
      memcpy (search->best, dropped, search->n * sizeof *dropped);
      search->rank = rank;
    }
  search->found = true;
}

/* The cheapest sets that hit every conflict known, until one leaves a keepable rest, and then all as cheap as that one. */
static UtPowerStatus
search_hitting_sets (Search *search)
{
  UtHittingCost optimum = { INFINITY, 0 };

  for (unsigned ties = 0; ties < MOST_TIES;)
    {
      UtHittingCost cost;
      UtHittingStatus status;

      if (cancelled (search))
        return UT_POWER_CANCELLED;
      if (exhausted (search))
        return UT_POWER_OK;
      status = ut_hitting_next (&search->hitting, search->candidate, &cost);
      if (status == UT_HITTING_NO_MEMORY)
        return UT_POWER_NO_MEMORY;
      if (status == UT_HITTING_TOO_LONG)
        return UT_POWER_OK;
      if (status == UT_HITTING_NONE || (search->found && ut_hitting_compare (cost, optimum) > 0))
        break;
      if (!search->found)
        search->result->at_least = cost.weight;
      for (size_t i = 0; i < search->n; i++)
        search->kept[i] = !search->candidate[i];
      if (!keepable (search, search->kept))
        {
          if (!add_conflicts (search))
            return UT_POWER_NO_MEMORY;
          continue;
        }
      consider (search, search->candidate);
      if (search->found)
        {
          optimum = cost;
          search->result->proved = true;
          ties++;
        }
      if (!ut_hitting_exclude (&search->hitting, search->candidate))
        return UT_POWER_NO_MEMORY;
    }
  return UT_POWER_OK;
}

static bool
whole_keepable (Search *search, const bool *kept)
{
  return keepable (search, kept) && (search->keeping->really == NULL || search->keeping->really (kept, search->keeping->data));
}

/* Without proof: drops the worst link until the rest is keepable, then puts back what can be, the dearest first. */
static void
drop_stepwise (Search *search)
{
  size_t left = search->n;

  for (size_t i = 0; i < search->n; i++)
    search->kept[i] = true;
  while (left > 0 && !whole_keepable (search, search->kept))
    {
      size_t worst = search->keeping->worst (search->kept, search->keeping->data);

      for (size_t i = 0; worst >= search->n && i < search->n; i++)
        if (search->kept[i])
          worst = i;
      search->kept[worst] = false;
      left--;
    }
  memset (search->trial, 0, search->n * sizeof *search->trial); /* tried already */
  for (;;)
    {
      size_t dearest = SIZE_MAX;

      for (size_t i = 0; i < search->n; i++)
        if (!search->kept[i] && !search->trial[i] && (dearest == SIZE_MAX || search->weight[i] > search->weight[dearest]))
          dearest = i;
      if (dearest == SIZE_MAX)
        break;
      search->trial[dearest] = true;
      search->kept[dearest] = true;
      if (!whole_keepable (search, search->kept))
        search->kept[dearest] = false;
    }
  for (size_t i = 0; i < search->n; i++)
    search->best[i] = !search->kept[i];
}

static bool
search_alloc (Search *search)
{
  search->kept = malloc ((search->n + 1) * sizeof *search->kept);
  search->trial = malloc ((search->n + 1) * sizeof *search->trial);
  search->candidate = malloc ((search->n + 1) * sizeof *search->candidate);
  search->best = malloc ((search->n + 1) * sizeof *search->best);
  search->order = malloc ((search->n + 1) * sizeof *search->order);
  return ut_hitting_init (&search->hitting, search->n, search->weight) && search->kept != NULL && search->trial != NULL
         && search->candidate != NULL && search->best != NULL && search->order != NULL;
}

UtPowerStatus
ut_fewest_dropped (size_t n, const double *weight, const UtKeeping *keeping, bool *dropped, UtDropping *result)
{
  UtDropping outcome = { 0 };
  Search search = { .n = n, .weight = weight, .keeping = keeping, .seed = 88172645463325252u, .result = &outcome };
  UtPowerStatus status = search_alloc (&search) ? search_hitting_sets (&search) : UT_POWER_NO_MEMORY;

  if (status == UT_POWER_OK)
    {
      if (!search.found)
        drop_stepwise (&search);
      for (size_t i = 0; i < n; i++)
        outcome.total += search.best[i] ? weight[i] : 0;
      outcome.proved = outcome.proved || outcome.total <= outcome.at_least * (1 + EQUAL_RANK);
      if (outcome.proved)
        outcome.at_least = outcome.total;
      memcpy (dropped, search.best, n * sizeof *dropped);
      *result = outcome;
    }
  ut_hitting_clear (&search.hitting);
  free (search.kept);
  free (search.trial);
  free (search.candidate);
  free (search.best);
  free (search.order);
  return status;
}
