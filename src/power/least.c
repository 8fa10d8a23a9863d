#include "least.h"

#include "perron.h"
#include "solver.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

/* How much of a failure of the check below is rounding: ties kept by the policy, and the sums. */
#define CHECK_ROUNDING 1e-12

/* Largest relative gap, either way, between p and what is asked at p. */
static double
residual (const UtSystem *system, double factor, UtLift lift, const double *p)
{
  double most = 0;
  for (size_t i = 0; i < system->n_unknowns; i++)
    {
      double asked
          = fmax (ut_system_floor (system, i, lift), factor * ut_system_need (system, i, p, lift));
      most = fmax (most, fabs (asked / p[i] - 1));
    }
  return most;
}

/* The proof of success that owes nothing to the solver: raised by 1e-9, p meets everything; that
 * bounds the least powers from above.  `raised` is room for n_unknowns. */
static bool
raised_powers_suffice (
    const UtSystem *system, double factor, UtLift lift, const double *p, double *raised)
{
  for (size_t i = 0; i < system->n_unknowns; i++)
    raised[i] = p[i] * (1 + 1e-9);
  for (size_t i = 0; i < system->n_unknowns; i++)
    {
      double asked = fmax (ut_system_floor (system, i, lift),
                           factor * ut_system_need (system, i, raised, lift));
      if (!(raised[i] * (1 + CHECK_ROUNDING) >= asked))
        return false;
    }
  return true;
}

/* The limit passed by most; n_limits where all are kept. */
static size_t
passed_limit (const UtSystem *system, const double *p)
{
  double most = 1 + UT_LIMIT_SLACK;
  size_t worst = system->n_limits;
  for (size_t k = 0; k < system->n_limits; k++)
    {
      double fill = ut_system_limit_sum (system, k, p) / system->limits[k].limit;
      if (fill > most)
        {
          most = fill;
          worst = k;
        }
    }
  return worst;
}

/* Powers left the range of doubles: finite or not is then the spectral radius's business, and
 * any limit of a double is passed. */
static UtPowerStatus
settle_by_radius (const UtSystem *system, double factor, UtLift lift)
{
  UtRadius radius;
  UtPowerStatus status = ut_spectral_radius (system, &radius);
  if (status == UT_POWER_OK && factor * radius.lower >= 1)
    return UT_POWER_UNBOUNDED;
  if (status == UT_POWER_OK && factor * radius.upper < 1 && !(lift & UT_LIFT_LIMITS))
    return UT_POWER_LIMIT;
  return status == UT_POWER_OK ? UT_POWER_UNSETTLED : status;
}

static UtPowerStatus
solve (UtSolver *solver, double factor, UtLift lift, double *raised, UtLeastInfo *info)
{
  const UtSystem *system = solver->system;
  UtPowerStatus status = ut_solver_run (solver, factor, lift);
  info->passes = solver->passes;
  if (status == UT_POWER_UNSETTLED)
    return settle_by_radius (system, factor, lift);
  if (status != UT_POWER_OK)
    return status;
  info->residual = residual (system, factor, lift, solver->power);
  if (!raised_powers_suffice (system, factor, lift, solver->power, raised))
    return UT_POWER_UNSETTLED;
  if (lift & UT_LIFT_LIMITS)
    return UT_POWER_OK;
  info->limit = passed_limit (system, solver->power);
  return info->limit < system->n_limits ? UT_POWER_LIMIT : UT_POWER_OK;
}

UtPowerStatus
ut_least_powers (
    const UtSystem *system, double factor, UtLift lift, double *power, UtLeastInfo *info)
{
  if (!isfinite (factor) || factor <= 0)
    return UT_POWER_INVALID;
  UtSolver solver;
  UtLeastInfo own = { .limit = system->n_limits };
  double *raised = malloc ((system->n_unknowns + 1) * sizeof *raised);
  UtPowerStatus status = ut_solver_init (&solver, system);
  if (status == UT_POWER_OK && raised == NULL)
    status = UT_POWER_NO_MEMORY;
  if (status == UT_POWER_OK)
    status = solve (&solver, factor, lift, raised, &own);
  if (status == UT_POWER_OK && system->n_unknowns > 0)
    memcpy (power, solver.power, system->n_unknowns * sizeof *power);
  if (info != NULL)
    *info = own;
  free (raised);
  ut_solver_clear (&solver);
  return status;
}
