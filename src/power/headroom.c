#include "headroom.h"

#include "perron.h"
#include "solver.h"

#include <float.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

/* With p (t) the least powers at factor t and nu (t) the fill of the fullest limit there, t is
 * feasible exactly when p (t) exists and nu (t) <= 1.  So each policy solve proves a lower or an
 * upper bound, whatever t it is given; the choice of t only decides how fast the two meet.  In s =
 * 1/t the function 1/nu is nearly straight: exactly so for one link, and 0 at s = rho, beyond which
 * there are no powers; root finding on it takes a handful of solves. The root finder is
 * Chandrupatla's (Advances in Engineering Software 28(3), 1997): inverse quadratic steps, bisection
 * where those are not trusted. */

#define CLOSE 1e-10
/* No step ends nearer than this to an end of the bracket, so that the two ends meet. */
#define NUDGE 4e-11
#define MAX_STEPS 300

typedef struct
{
  UtSolver solver;
  double *capacity; /* n_limits: the limit, or floors that pass it within the slack */
  double *room;     /* n_limits: what the floors leave of it */
  double *best;     /* powers that prove `lower` */
  double lower, upper;
  double rounding; /* by which a factor may be refused for rounding alone, see dense.h */
} Search;

/* One bracketing point: s = 1/t and 1/nu - 1 there. */
typedef struct
{
  double s, f;
} Point;

/* False where floors alone pass a limit, or leave nothing for an unknown without floor. */
static bool
find_room (Search *search)
{
  const UtSystem *system = search->solver.system;
  for (size_t i = 0; i < system->n_unknowns; i++)
    search->best[i] = ut_system_floor (system, i, UT_LIFT_NOTHING);
  for (size_t k = 0; k < system->n_limits; k++)
    {
      double sum = ut_system_limit_sum (system, k, search->best);
      double limit = system->limits[k].limit;
      if (sum > limit * (1 + UT_LIMIT_SLACK))
        return false;
      search->capacity[k] = fmax (limit, sum);
      search->room[k] = search->capacity[k] - sum;
    }
  for (size_t i = 0; i < system->n_unknowns; i++)
    if (search->best[i] <= 0 && search->room[system->limit_of[i]] <= 0)
      return false;
  return true;
}

/* Bounds that need no solve.  Above: what each row needs with all others at their floors (best
 * holds them). Below: the rooms shared out evenly; best holds those powers afterwards. */
static void
find_first_bounds (Search *search)
{
  const UtSystem *system = search->solver.system;
  search->upper = INFINITY;
  search->lower = INFINITY;
  for (size_t i = 0; i < system->n_unknowns; i++)
    {
      double most = search->best[i] + search->room[system->limit_of[i]];
      double need = ut_system_need (system, i, search->best, UT_LIFT_NOTHING);
      search->upper = fmin (search->upper, most / need);
    }
  for (size_t i = 0; i < system->n_unknowns; i++)
    {
      size_t k = system->limit_of[i];
      search->best[i] += search->room[k] / (double)system->limits[k].n_members;
    }
  for (size_t i = 0; i < system->n_unknowns; i++)
    {
      double need = ut_system_need (system, i, search->best, UT_LIFT_NOTHING);
      search->lower = fmin (search->lower, search->best[i] / need);
    }
  search->lower *= 1 - 1e-12; /* a fixed power must not be asked for a rounding more than it has */
  search->upper *= 1 + 4 * DBL_EPSILON;
}

/* The fill of the fullest limit at p. */
static double
fullest (const Search *search, const double *p)
{
  double most = 0;
  for (size_t k = 0; k < search->solver.system->n_limits; k++)
    most = fmax (most, ut_system_limit_sum (search->solver.system, k, p) / search->capacity[k]);
  return most;
}

/* Solves at factor 1/s and takes the bound it proves. */
static Point
probe (Search *search, double s)
{
  double t = 1 / s;
  UtSolver *solver = &search->solver;
  UtPowerStatus status = ut_solver_run (solver, t, UT_LIFT_NOTHING);
  double fill = status == UT_POWER_OK ? fullest (search, solver->power) : INFINITY;
  if (fill <= 1)
    {
      if (t >= search->lower)
        {
          search->lower = t;
          memcpy (search->best, solver->power, solver->system->n_unknowns * sizeof *search->best);
        }
      search->upper = fmax (search->upper, t); /* passed only where the first bound is reached */
    }
  else
    search->upper = fmin (search->upper, t * (1 + search->rounding));
  return (Point){ s, 1 / fill - 1 };
}

/* Where the next probe lies between a (the newest) and b, as a share of the way; c is the one
 * before. */
static double
chandrupatla_share (Point a, Point b, Point c)
{
  double xi = (a.s - b.s) / (c.s - b.s), phi = (a.f - b.f) / (c.f - b.f);
  if (phi * phi < xi && (1 - phi) * (1 - phi) < 1 - xi)
    return a.f / (b.f - a.f) * c.f / (b.f - c.f)
           + (c.s - a.s) / (b.s - a.s) * a.f / (c.f - a.f) * b.f / (c.f - b.f);
  return 0.5;
}

static void
close_bracket (Search *search, Point a, Point b)
{
  Point c = b;
  double share = a.f / (a.f - b.f); /* the first step: the chord */
  for (int step = 0; step < MAX_STEPS && search->upper > search->lower * (1 + CLOSE); step++)
    {
      double least = NUDGE * fmax (a.s, b.s) / fabs (b.s - a.s);
      share = fmin (fmax (share, least), 1 - least);
      if (least > 0.5)
        share = 0.5;
      double s = a.s + share * (b.s - a.s);
      if (share == 0.5)
        s = sqrt (a.s) * sqrt (b.s);
      Point next = probe (search, s);
      if ((next.f >= 0) == (a.f >= 0))
        c = a;
      else
        {
          c = b;
          b = a;
        }
      a = next;
      share = chandrupatla_share (a, b, c);
    }
}

static UtPowerStatus
solve (Search *search)
{
  const UtSystem *system = search->solver.system;
  if (!find_room (search))
    return UT_POWER_NONE;
  search->rounding = 8 * (double)system->n_unknowns * DBL_EPSILON;
  find_first_bounds (search);
  UtRadius radius;
  UtPowerStatus status = ut_spectral_radius (system, &radius);
  if (status != UT_POWER_OK && status != UT_POWER_UNSETTLED)
    return status;

  Point above;
  if (radius.lower * search->upper > 1)
    {
      search->upper = 1 / radius.lower;
      above = (Point){ radius.lower, -1 };
    }
  else
    above = probe (search, 1 / search->upper);
  if (above.f < 0 && search->upper > search->lower * (1 + CLOSE))
    {
      double upper = search->upper;
      Point below = probe (search, 1 / search->lower);
      if (below.f < 0) /* only by rounding: the powers at hand prove the bound */
        {
          below.f = 0;
          search->upper = upper;
        }
      close_bracket (search, below, above);
    }
  return search->upper <= search->lower * (1 + 1e-9) ? UT_POWER_OK : UT_POWER_UNSETTLED;
}

UtPowerStatus
ut_headroom (const UtSystem *system, double *power, UtHeadroom *headroom)
{
  size_t n = system->n_unknowns;
  Search search = {
    .capacity = calloc (system->n_limits + 1, sizeof (double)),
    .room = calloc (system->n_limits + 1, sizeof (double)),
    .best = calloc (n + 1, sizeof (double)),
  };
  UtPowerStatus status = ut_solver_init (&search.solver, system);
  if (status == UT_POWER_OK && !(search.capacity && search.room && search.best))
    status = UT_POWER_NO_MEMORY;
  if (status == UT_POWER_OK)
    status = n == 0 || system->minimum_above_limit ? UT_POWER_NONE : solve (&search);
  if (status == UT_POWER_OK || status == UT_POWER_UNSETTLED)
    *headroom = (UtHeadroom){
      .factor = search.lower + (search.upper - search.lower) / 2,
      .lower = search.lower,
      .upper = search.upper,
      .passes = search.solver.passes,
    };
  if (status == UT_POWER_OK && power != NULL)
    memcpy (power, search.best, n * sizeof *power);
  ut_solver_clear (&search.solver);
  free (search.capacity);
  free (search.room);
  free (search.best);
  return status;
}
