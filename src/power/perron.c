#include "perron.h"

#include "solver.h"

#include <float.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

/* For J0, the system with every constant lifted, and any x > 0:
 *   min J0_i (x) / x_i <= rho <= max J0_i (x) / x_i          (Collatz; Wielandt, Math. Z. 52, 1950)
 * where the right side needs that J0 is monotone and homogeneous, the left that it is reached by a
 * policy. Noda's iteration (Numer. Math. 17, 1971), carried over to J0: with lambda the upper bound
 * at x, the least y with lambda y = J0 (y) + x has J0 (y) / y = lambda - x / y, a smaller upper
 * bound.  Near the end it is quadratic.  While the bounds are far apart, and whenever it stalls,
 * lambda halves the interval (of the logarithm) instead: the solve either gives a y, hence an upper
 * bound below lambda, or a pivot proves that rho >= lambda.  So the interval always closes. */

#define MAX_STEPS 400
#define CLOSE 1e-13
#define ACCEPTED 1e-9

typedef struct
{
  UtSolver *solver;
  size_t component, n;
  const uint32_t *rows;
  double *x;       /* n_unknowns, 0 outside the component */
  double rounding; /* of one J0_i (x) / x_i, relative */
  double lower, upper;
} Search;

/* The widest sum of a row decides how far its rounding goes. */
static double
rounding_of (const UtSystem *system, const uint32_t *rows, size_t n)
{
  size_t most = 0;
  for (size_t r = 0; r < n; r++)
    for (size_t k = system->first_piece[rows[r]]; k < system->first_piece[rows[r] + 1]; k++)
      if (system->pieces[k].n_groups > most)
        most = system->pieces[k].n_groups;
  return (double)(most + 4) * DBL_EPSILON / 2;
}

/* Tightens the bounds with x. */
static void
apply_bounds (Search *search)
{
  double least = INFINITY, most = 0;
  for (size_t r = 0; r < search->n; r++)
    {
      size_t i = search->rows[r];
      double ratio
          = ut_system_need (search->solver->system, i, search->x, UT_LIFT_CONSTANTS) / search->x[i];
      least = fmin (least, ratio);
      most = fmax (most, ratio);
    }
  search->lower = fmax (search->lower, least * (1 - search->rounding));
  search->upper = fmin (search->upper, most * (1 + search->rounding));
}

/* Solves lambda y = J0 (y) + x; y, scaled about 1, becomes x. */
static UtPowerStatus
resolve (Search *search, double lambda)
{
  double *power = search->solver->power;
  for (size_t r = 0; r < search->n; r++)
    search->x[search->rows[r]] /= lambda;
  UtPowerStatus status = ut_solver_settle (
      search->solver, search->component, 1 / lambda, UT_LIFT_CONSTANTS, search->x);
  for (size_t r = 0; r < search->n; r++)
    search->x[search->rows[r]] *= lambda;
  if (status != UT_POWER_OK)
    return status;
  double least = INFINITY, most = 0;
  for (size_t r = 0; r < search->n; r++)
    {
      least = fmin (least, power[search->rows[r]]);
      most = fmax (most, power[search->rows[r]]);
    }
  double scale = sqrt (least) * sqrt (most);
  if (!(least / scale > DBL_MIN) || !isfinite (most / scale))
    return UT_POWER_UNSETTLED;
  for (size_t r = 0; r < search->n; r++)
    search->x[search->rows[r]] = power[search->rows[r]] / scale;
  return UT_POWER_OK;
}

static void
close_interval (Search *search)
{
  double edge = 16 * (double)search->n * DBL_EPSILON;
  double close = CLOSE + 4 * search->rounding;
  bool stalled = false;
  for (int step = 0; step < MAX_STEPS && search->upper > search->lower * (1 + close); step++)
    {
      double width = log (search->upper / search->lower);
      bool halve = stalled || width > 0.7;
      double lambda
          = halve ? sqrt (search->lower) * sqrt (search->upper) : search->upper * (1 + edge);
      UtPowerStatus status = resolve (search, lambda);
      if (status == UT_POWER_UNBOUNDED)
        {
          double proved = lambda * (1 - edge);
          if (proved <= search->lower)
            return;
          search->lower = fmin (proved, search->upper);
        }
      else if (status == UT_POWER_OK)
        apply_bounds (search);
      else
        return;
      stalled = !(log (search->upper / search->lower) < 0.7 * width);
      if (halve && stalled)
        return;
    }
}

static UtPowerStatus
component_radius (UtSolver *solver, size_t component, double *x, UtRadius *radius)
{
  const UtComponents *components = &solver->components;
  Search search = {
    .solver = solver,
    .component = component,
    .n = components->first[component + 1] - components->first[component],
    .rows = &components->rows[components->first[component]],
    .x = x,
    .lower = 0,
    .upper = INFINITY,
  };
  search.rounding = rounding_of (solver->system, search.rows, search.n);
  memset (solver->power, 0, solver->system->n_unknowns * sizeof *solver->power);
  for (size_t r = 0; r < search.n; r++)
    x[search.rows[r]] = 1;
  apply_bounds (&search);
  if (search.upper > 0)
    close_interval (&search);
  *radius = (UtRadius){
    .value = search.lower + (search.upper - search.lower) / 2,
    .lower = search.lower,
    .upper = search.upper,
  };
  return search.upper <= search.lower * (1 + ACCEPTED) ? UT_POWER_OK : UT_POWER_UNSETTLED;
}

UtPowerStatus
ut_perron (const UtSystem *system, UtRadius *radius, double *vector)
{
  UtSolver solver;
  UtRadius most = { 0, 0, 0 };
  size_t n = system->n_unknowns;
  double *x = calloc (n + 1, sizeof *x);
  UtPowerStatus status = ut_solver_init (&solver, system);
  if (status == UT_POWER_OK && x == NULL)
    status = UT_POWER_NO_MEMORY;
  bool settled = true;
  for (size_t c = 0; status == UT_POWER_OK && c < solver.components.n; c++)
    {
      UtRadius one;
      memset (x, 0, n * sizeof *x);
      settled = component_radius (&solver, c, x, &one) == UT_POWER_OK && settled;
      if (vector != NULL && one.value > most.value)
        memcpy (vector, x, n * sizeof *x);
      most.value = fmax (most.value, one.value);
      most.lower = fmax (most.lower, one.lower);
      most.upper = fmax (most.upper, one.upper);
    }
  free (x);
  ut_solver_clear (&solver);
  if (status != UT_POWER_OK)
    return status;
  *radius = most;
  return settled || most.upper <= most.lower * (1 + ACCEPTED) ? UT_POWER_OK : UT_POWER_UNSETTLED;
}

UtPowerStatus
ut_spectral_radius (const UtSystem *system, UtRadius *radius)
{
  return ut_perron (system, radius, NULL);
}
