#include "reserve.h"

#include <float.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "dense.h"
#include "solver.h"

/* Floors are taken as reached, or left, only beyond this. */
#define HAIR 1e-12

static bool
is_linear (const UtSystem *system)
{
  if (system->n_pieces != system->n_unknowns)
    return false;
  for (size_t g = 0; g < system->n_groups; g++)
    if (system->groups[g].n_terms > 1 || system->groups[g].minimum > 0 || system->groups[g].level > 0)
      return false;
  return true;
}

/* I - F, column after column; rows at their floor hear nobody.  policy: NULL, no floors. */
static void
fill (const UtSystem *system, const UtPolicy *policy, double *a)
{
  size_t n = system->n_unknowns;

  memset (a, 0, n * n * sizeof *a);
  for (size_t i = 0; i < n; i++)
    {
      const UtPiece *piece = &system->pieces[system->first_piece[i]];

      a[i * n + i] = 1;
      if (policy != NULL && policy->piece[i] == UT_POLICY_FLOOR)
        continue;
      for (size_t g = piece->first_group; g < piece->first_group + piece->n_groups; g++)
        for (size_t t = system->groups[g].first_term; t < system->groups[g].first_term + system->groups[g].n_terms; t++)
          a[system->terms[t].unknown * n + i] -= system->terms[t].weight;
    }
}

/* ---- radius below 1 ---- */

/* The largest power of unknown i at which every limit is kept, if the others follow p + (P - p_i) d. */
static double
largest_power (const UtSystem *system, size_t i, const double *p, const double *d)
{
  double most = INFINITY;

  for (size_t k = 0; k < system->n_limits; k++)
    {
      const UtLimit *limit = &system->limits[k];
      double rest = limit->limit, slope = 0;

      for (size_t m = limit->first_member; m < limit->first_member + limit->n_members; m++)
        {
          rest -= p[system->members[m]];
          slope += d[system->members[m]];
        }
      if (slope > 0)
        most = fmin (most, p[i] + rest / slope);
      else if (rest < -UT_LIMIT_SLACK * limit->limit)
        return -INFINITY;
    }
  return most;
}

/* Whether everybody still stands on the same side of its floor at q. */
static bool
floors_stand (const UtSystem *system, const UtPolicy *policy, size_t i, const double *q)
{
  for (size_t m = 0; m < system->n_unknowns; m++)
    {
      double floor_value = ut_system_floor (system, m, UT_LIFT_NOTHING);

      if (m == i)
        continue;
      if (policy->piece[m] == UT_POLICY_FLOOR ? ut_system_need (system, m, q, UT_LIFT_NOTHING) > floor_value * (1 + HAIR)
                                              : q[m] < floor_value * (1 - HAIR))
        return false;
    }
  return true;
}

/* d: column i of the inverse; spoilt. q: room for n. */
static UtReserveStatus
reserve_of (const UtSystem *system, const UtPolicy *policy, size_t i, const double *p, double *d, double *q, double *factor)
{
  double own = d[i], most;

  for (size_t m = 0; m < system->n_unknowns; m++)
    d[m] /= own;
  most = largest_power (system, i, p, d);
  if (most < ut_system_floor (system, i, UT_LIFT_NOTHING) * (1 - UT_LIMIT_SLACK) || !(most > 0))
    return policy->piece[i] == UT_POLICY_FLOOR ? UT_RESERVE_NONE : UT_RESERVE_UNSETTLED;
  most = fmax (most, ut_system_floor (system, i, UT_LIFT_NOTHING));
  for (size_t m = 0; m < system->n_unknowns; m++)
    q[m] = fmax (p[m] + (most - p[i]) * d[m], 0);
  q[i] = most;
  if (!floors_stand (system, policy, i, q))
    return UT_RESERVE_UNSETTLED;
  *factor = most / ut_system_need (system, i, q, UT_LIFT_NOTHING);
  return UT_RESERVE_FOUND;
}

static bool
reserves_by_inverse (UtSolver *solver, double *factor, UtReserveStatus *status)
{
  const UtSystem *system = solver->system;
  size_t n = system->n_unknowns;
  double *a = malloc (n * n * sizeof *a), *inverse = calloc (n * n, sizeof *inverse), *q = malloc (n * sizeof *q);
  bool memory = a != NULL && inverse != NULL && q != NULL;

  if (memory)
    {
      fill (system, &solver->policy, a);
      for (size_t i = 0; i < n; i++)
        {
          inverse[i * n + i] = 1;
          status[i] = UT_RESERVE_UNSETTLED;
        }
      if (ut_dense_factor (n, a) && ut_dense_solve (n, a, n, inverse))
        for (size_t i = 0; i < n; i++)
          status[i] = reserve_of (system, &solver->policy, i, solver->power, inverse + i * n, q, &factor[i]);
    }
  free (a);
  free (inverse);
  free (q);
  return memory;
}

/* ---- radius 1 or more ---- */

/* Eliminates rows and columns [from, to) of the n x n matrix a in place. False: a pivot shows that the part is no M-matrix. */
static bool
eliminate (size_t n, double *a, size_t from, size_t to, double least_pivot)
{
  for (size_t k = from; k < to; k++)
    {
      double pivot = a[k * n + k];

      if (!(pivot > least_pivot))
        return false;
      for (size_t j = 0; j < n; j++)
        {
          double head = a[j * n + k] / pivot;

          if (head == 0 || (j >= from && j <= k))
            continue;
          for (size_t i = 0; i < n; i++)
            if (i < from || i > k)
              a[j * n + i] -= a[k * n + i] * head;
        }
    }
  return true;
}

static bool
without_each (size_t n, const double *a, double least_pivot, UtReserveStatus *status);

/* Eliminates one half and asks on in the other: [keep_from, keep_to). */
static bool
without_half (size_t n, const double *a, size_t keep_from, size_t keep_to, double least_pivot, UtReserveStatus *status)
{
  size_t kept = keep_to - keep_from, from = keep_from == 0 ? keep_to : 0, to = keep_from == 0 ? n : keep_from;
  double *copy = malloc (n * n * sizeof *copy), *part = malloc (kept * kept * sizeof *part);
  bool memory = copy != NULL && part != NULL;

  if (memory)
    {
      memcpy (copy, a, n * n * sizeof *copy);
      if (eliminate (n, copy, from, to, least_pivot))
        {
          for (size_t j = 0; j < kept; j++)
            memcpy (part + j * kept, copy + (keep_from + j) * n + keep_from, kept * sizeof *part);
          memory = without_each (kept, part, least_pivot, status + keep_from);
        }
    }
  free (copy);
  free (part);
  return memory;
}

/* Marks the unknowns without whose row the matrix, what is outside it eliminated already, is an M-matrix.  False: no memory. */
static bool
without_each (size_t n, const double *a, double least_pivot, UtReserveStatus *status)
{
  if (n == 1)
    {
      status[0] = UT_RESERVE_UNSETTLED;
      return true;
    }
  return without_half (n, a, 0, n / 2, least_pivot, status) && without_half (n, a, n / 2, n, least_pivot, status);
}

static bool
find_removable (const UtSystem *system, UtReserveStatus *status)
{
  size_t n = system->n_unknowns;
  double *a = malloc (n * n * sizeof *a);
  bool memory = a != NULL;

  for (size_t i = 0; i < n; i++)
    status[i] = UT_RESERVE_NONE;
  if (memory)
    {
      fill (system, NULL, a);
      memory = without_each (n, a, 4 * (double) n * DBL_EPSILON, status);
    }
  free (a);
  return memory;
}

UtPowerStatus
ut_reserves (const UtSystem *system, double *factor, UtReserveStatus *status)
{
  UtSolver solver;
  UtPowerStatus outcome;
  bool memory = true;

  if (system->n_unknowns == 0)
    return UT_POWER_OK;
  if (!is_linear (system))
    return UT_POWER_INVALID;
  outcome = ut_solver_init (&solver, system);
  if (outcome == UT_POWER_OK)
    {
      UtPowerStatus run = ut_solver_run (&solver, 1, UT_LIFT_LIMITS);

      if (run == UT_POWER_OK)
        memory = reserves_by_inverse (&solver, factor, status);
      else if (run == UT_POWER_UNBOUNDED)
        memory = find_removable (system, status);
      else
        for (size_t i = 0; i < system->n_unknowns; i++)
          status[i] = UT_RESERVE_UNSETTLED;
    }
  ut_solver_clear (&solver);
  return memory ? outcome : UT_POWER_NO_MEMORY;
}
