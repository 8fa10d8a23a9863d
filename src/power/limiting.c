#include "limiting.h"

#include <math.h>
#include <stdlib.h>

#include "dense.h"
#include "policy.h"

/* Unknowns closer to their floor than this are at it. */
#define AT_FLOOR 1e-9

/* The edge is where the matrix becomes singular: this far off it is solved. */
#define SHIFT 1e-7

static size_t
fullest_limit (const UtSystem *system, const double *p)
{
  double most = -1;
  size_t fullest = 0;

  for (size_t k = 0; k < system->n_limits; k++)
    if (ut_system_limit_sum (system, k, p) / system->limits[k].limit > most)
      {
        most = ut_system_limit_sum (system, k, p) / system->limits[k].limit;
        fullest = k;
      }
  return fullest;
}

/* Column `row` of a = (1 + SHIFT) I - B^T, that is row `row` of B: what the unknown asks for, its constants as if they came from the full limit's
 * members that are above their floors. */
static void
fill_column (const UtSystem *system, const UtPolicy *policy, double factor, const double *p, const size_t *place, size_t row, size_t n,
             size_t limit, double limit_use, double *a)
{
  const UtPiece *piece = &system->pieces[policy->piece[row]];
  double constant = piece->noise + piece->idle;
  double *column = a + place[row] * n;

  for (size_t g = piece->first_group; g < piece->first_group + piece->n_groups; g++)
    {
      size_t term = policy->term[g];

      if (term == UT_POLICY_CONSTANT)
        constant += ut_system_group_constant (&system->groups[g], UT_LIFT_NOTHING);
      else if (place[system->terms[term].unknown] == SIZE_MAX)
        constant += system->terms[term].weight * p[system->terms[term].unknown];
      else
        column[place[system->terms[term].unknown]] -= factor * system->terms[term].weight;
    }
  for (size_t m = system->limits[limit].first_member; m < system->limits[limit].first_member + system->limits[limit].n_members; m++)
    if (place[system->members[m]] != SIZE_MAX)
      column[place[system->members[m]]] -= factor * constant / limit_use;
  column[place[row]] += 1 + SHIFT;
}

static UtPowerStatus
solve_left (const UtSystem *system, const UtPolicy *policy, double factor, const double *p, const size_t *place, size_t n, size_t limit,
            double limit_use, double *involvement)
{
  double *a = calloc (n * n, sizeof *a), *y = malloc (n * sizeof *y);
  UtPowerStatus status = a == NULL || y == NULL ? UT_POWER_NO_MEMORY : UT_POWER_OK;
  double sum = 0;

  for (size_t i = 0; i < system->n_unknowns && status == UT_POWER_OK; i++)
    if (place[i] != SIZE_MAX)
      {
        fill_column (system, policy, factor, p, place, i, n, limit, limit_use, a);
        y[place[i]] = 1 / p[i];
      }
  if (status == UT_POWER_OK && !ut_dense_factor (n, a))
    status = UT_POWER_NONE;
  if (status == UT_POWER_OK)
    {
      ut_dense_solve (n, a, 1, y);
      for (size_t i = 0; i < system->n_unknowns; i++)
        sum += involvement[i] = place[i] == SIZE_MAX ? 0 : y[place[i]] * p[i];
      for (size_t i = 0; i < system->n_unknowns; i++)
        involvement[i] /= sum;
    }
  free (a);
  free (y);
  return status;
}

UtPowerStatus
ut_involvement (const UtSystem *system, double factor, const double *p, double *involvement, size_t *full_limit)
{
  UtPolicy policy = { 0 };
  size_t *place = malloc ((system->n_unknowns + 1) * sizeof *place), n = 0, limit = fullest_limit (system, p);
  uint32_t *rows = malloc ((system->n_unknowns + 1) * sizeof *rows);
  UtPowerStatus status = place == NULL || rows == NULL ? UT_POWER_NO_MEMORY : ut_policy_init (&policy, system);
  double limit_use = 0;

  if (status == UT_POWER_OK)
    {
      for (size_t i = 0; i < system->n_unknowns; i++)
        rows[i] = (uint32_t) i;
      ut_dense_threads (system->n_unknowns);
      ut_policy_improve (&policy, system, UT_LIFT_NOTHING, factor, p, rows, system->n_unknowns);
      for (size_t i = 0; i < system->n_unknowns; i++)
        {
          bool free_to_move = policy.piece[i] != UT_POLICY_FLOOR && p[i] > ut_system_floor (system, i, UT_LIFT_NOTHING) * (1 + AT_FLOOR);

          place[i] = free_to_move ? n++ : SIZE_MAX;
          if (free_to_move && system->limit_of[i] == limit)
            limit_use += p[i];
        }
      status = n == 0 || !(limit_use > 0) ? UT_POWER_NONE : solve_left (system, &policy, factor, p, place, n, limit, limit_use, involvement);
    }
  if (status == UT_POWER_OK && full_limit != NULL)
    *full_limit = limit;
  ut_policy_clear (&policy);
  free (place);
  free (rows);
  return status;
}
