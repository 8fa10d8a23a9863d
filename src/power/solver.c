#include "solver.h"

#include "dense.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

/* A guard, no more: 4000 random systems of up to 29 unknowns never took more than 28 passes, all
 * components together. */
#define MAX_PASSES 10000

/* Powers that rise by less are rounding: the policy has settled. */
#define RISE 5e-14

UtPowerStatus
ut_solver_init (UtSolver *solver, const UtSystem *system)
{
  memset (solver, 0, sizeof *solver);
  solver->system = system;
  if (system->failed || system->malformed || system->first_piece == NULL
      || system->limit_of == NULL)
    return UT_POWER_INVALID;
  UtPowerStatus status = ut_components_init (&solver->components, system);
  if (status == UT_POWER_OK)
    status = ut_policy_init (&solver->policy, system);
  if (status != UT_POWER_OK)
    return status;
  size_t n = solver->components.largest;
  solver->power = calloc (system->n_unknowns + 1, sizeof *solver->power);
  solver->b = calloc (n + 1, sizeof *solver->b);
  if (n == 0 || n <= SIZE_MAX / n)
    solver->a = calloc (n * n + 1, sizeof *solver->a);
  if (solver->power == NULL || solver->a == NULL || solver->b == NULL)
    return UT_POWER_NO_MEMORY;
  ut_dense_threads (n);
  return UT_POWER_OK;
}

void
ut_solver_clear (UtSolver *solver)
{
  ut_components_clear (&solver->components);
  ut_policy_clear (&solver->policy);
  free (solver->power);
  free (solver->a);
  free (solver->b);
  memset (solver, 0, sizeof *solver);
}

/* True while no row of the component follows a piece: nothing to eliminate. */
static bool
all_at_floor (const UtSolver *solver, const uint32_t *rows, size_t n)
{
  for (size_t r = 0; r < n; r++)
    if (solver->policy.piece[rows[r]] != UT_POLICY_FLOOR)
      return false;
  return true;
}

UtPowerStatus
ut_solver_settle (
    UtSolver *solver, size_t component, double factor, UtLift lift, const double *extra)
{
  const UtComponents *components = &solver->components;
  const uint32_t *rows = &components->rows[components->first[component]];
  size_t n = components->first[component + 1] - components->first[component];
  for (unsigned pass = 0; pass < MAX_PASSES; pass++)
    {
      ut_policy_build (&solver->policy,
                       solver->system,
                       components,
                       component,
                       lift,
                       factor,
                       solver->power,
                       solver->a,
                       solver->b);
      if (extra != NULL)
        for (size_t r = 0; r < n; r++)
          solver->b[r] += extra[rows[r]];
      if (!all_at_floor (solver, rows, n))
        {
          solver->passes++;
          if (!ut_dense_factor (n, solver->a))
            return UT_POWER_UNBOUNDED;
          ut_dense_solve (n, solver->a, 1, solver->b);
        }
      bool rose = pass == 0;
      for (size_t r = 0; r < n; r++)
        {
          if (!isfinite (solver->b[r]))
            return UT_POWER_UNSETTLED;
          rose = rose || solver->b[r] > solver->power[rows[r]] * (1 + RISE);
          solver->power[rows[r]] = solver->b[r];
        }
      if (!ut_policy_improve (&solver->policy, solver->system, lift, factor, solver->power, rows, n)
          || !rose)
        return UT_POWER_OK;
    }
  return UT_POWER_UNSETTLED;
}

UtPowerStatus
ut_solver_run (UtSolver *solver, double factor, UtLift lift)
{
  for (size_t c = 0; c < solver->components.n; c++)
    {
      UtPowerStatus status = ut_solver_settle (solver, c, factor, lift, NULL);
      if (status != UT_POWER_OK)
        return status;
    }
  return UT_POWER_OK;
}
