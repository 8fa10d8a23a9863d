/* What must hold of every system, on seeded random ones. */
#include "make-system.h"
#include "test-power.h"

#include "headroom.h"
#include "least.h"
#include "perron.h"
#include "verdict.h"

#include <math.h>

#define N_SYSTEMS 300
#define MAX_N 24

typedef void (*Property) (const UtSystem *system, GRand *rand);

/* Runs a property over systems of every kind, their radii brought about 1. */
static void
for_random_systems (guint seed, Property property)
{
  GRand *rand = g_rand_new_with_seed (seed);
  for (guint trial = 0; trial < N_SYSTEMS; trial++)
    {
      UtSystem random, system;
      UtRadius radius;
      guint n = (guint)g_rand_int_range (rand, 1, MAX_N + 1);
      RandomKind kind = trial % 8 == 0 ? 0 : (RandomKind)g_rand_int_range (rand, 0, RANDOM_ALL + 1);
      make_random (&random, rand, n, kind);
      g_assert_cmpint (ut_spectral_radius (&random, &radius), ==, UT_POWER_OK);
      double weight = radius.value > 0 ? log_uniform (rand, 0.2, 1.3) / radius.value : 1;
      make_scaled (&system, &random, weight, 1);
      property (&system, rand);
      ut_system_clear (&system);
      ut_system_clear (&random);
    }
  g_rand_free (rand);
}

static double
asked (const UtSystem *system, guint i, double factor, UtLift lift, const double *p)
{
  return fmax (ut_system_floor (system, i, lift), factor * ut_system_need (system, i, p, lift));
}

/* p solves the system with equality, which makes it the fixed point; fixed points of a standard
 * interference function are unique, so it is the least solution (Yates 1995). */
static void
powers_are_least (const UtSystem *system, GRand *rand)
{
  double p[MAX_N];
  UtLeastInfo info;
  double factor = log_uniform (rand, 0.5, 1.5);
  UtLift lift = (UtLift)g_rand_int_range (rand, 0, 4) | UT_LIFT_LIMITS;
  UtPowerStatus status = ut_least_powers (system, factor, lift, p, &info);
  UtRadius radius;
  g_assert_cmpint (ut_spectral_radius (system, &radius), ==, UT_POWER_OK);
  if (status == UT_POWER_UNBOUNDED)
    {
      g_assert_cmpfloat (factor * radius.upper, >, 1 - 1e-12);
      return;
    }
  g_assert_cmpint (status, ==, UT_POWER_OK);
  g_assert_cmpfloat (factor * radius.lower, <, 1);
  for (guint i = 0; i < system->n_unknowns; i++)
    {
      double need = asked (system, i, factor, lift, p);
      g_assert_cmpfloat (p[i] * (1 + 1e-12), >=, need);
      /* Lowered alone, it would miss: what is asked of i does not fall by as much. */
      double kept = p[i];
      p[i] *= 1 - 1e-6;
      double slack = 1e-12 * kept;
      g_assert_cmpfloat (asked (system, i, factor, lift, p) + slack, >, p[i]);
      p[i] = kept;
      assert_near (p[i], need, 1e-12);
    }
}

static void
test_least (void)
{
  for_random_systems (1, powers_are_least);
}

static void
limits_are_told (const UtSystem *system, GRand *rand)
{
  double p[MAX_N], lifted[MAX_N];
  UtLeastInfo info;
  (void)rand;
  UtPowerStatus free_status = ut_least_powers (system, 1, UT_LIFT_LIMITS, lifted, NULL);
  UtPowerStatus status = ut_least_powers (system, 1, UT_LIFT_NOTHING, p, &info);
  if (free_status == UT_POWER_UNBOUNDED)
    {
      g_assert_cmpint (status, ==, UT_POWER_UNBOUNDED);
      return;
    }
  g_assert_cmpint (free_status, ==, UT_POWER_OK);
  double worst = 0;
  for (gsize k = 0; k < system->n_limits; k++)
    worst = fmax (worst, ut_system_limit_sum (system, k, lifted) / system->limits[k].limit);
  g_assert_cmpint (status, ==, worst > 1 + UT_LIMIT_SLACK ? UT_POWER_LIMIT : UT_POWER_OK);
  if (status == UT_POWER_LIMIT)
    g_assert_cmpfloat (ut_system_limit_sum (system, info.limit, lifted)
                           / system->limits[info.limit].limit,
                       ==,
                       worst);
}

static void
test_limits (void)
{
  for_random_systems (2, limits_are_told);
}

static gboolean
keeps_everything (const UtSystem *system, double factor, const double *p)
{
  for (guint i = 0; i < system->n_unknowns; i++)
    if (p[i] * (1 + 1e-12) < asked (system, i, factor, UT_LIFT_NOTHING, p))
      return FALSE;
  for (gsize k = 0; k < system->n_limits; k++)
    if (ut_system_limit_sum (system, k, p) > system->limits[k].limit * (1 + 1e-12))
      return FALSE;
  return TRUE;
}

static void
headroom_is_certified (const UtSystem *system, GRand *rand)
{
  double p[MAX_N], q[MAX_N];
  UtHeadroom headroom;
  (void)rand;
  UtPowerStatus status = ut_headroom (system, p, &headroom);
  if (status == UT_POWER_NONE)
    {
      /* Even the smallest factor passes a limit. */
      g_assert_cmpint (
          ut_least_powers (system, 1e-12, UT_LIFT_NOTHING, q, NULL), ==, UT_POWER_LIMIT);
      return;
    }
  g_assert_cmpint (status, ==, UT_POWER_OK);
  g_assert_cmpfloat (headroom.lower, <=, headroom.factor);
  g_assert_cmpfloat (headroom.factor, <=, headroom.upper);
  g_assert_cmpfloat (headroom.upper, <=, headroom.lower * (1 + 1e-9));
  g_assert_true (keeps_everything (system, headroom.lower, p));
  g_assert_cmpint (ut_least_powers (system, headroom.lower * (1 - 1e-9), UT_LIFT_NOTHING, q, NULL),
                   ==,
                   UT_POWER_OK);
  /* The limits' slack of 1e-9 is worth at most as much in the factor. */
  status = ut_least_powers (system, headroom.upper * (1 + 1e-6), UT_LIFT_NOTHING, q, NULL);
  g_assert_true (status == UT_POWER_LIMIT || status == UT_POWER_UNBOUNDED);
}

static void
test_headroom (void)
{
  for_random_systems (3, headroom_is_certified);
}

/* Upper bound of the headroom from any powers at which a limit is full, floors kept: independent of
 * every solve. */
static void
headroom_keeps_its_bound (const UtSystem *system, GRand *rand)
{
  guint n = (guint)system->n_unknowns;
  double p[MAX_N], upper = INFINITY, above_floor = 0;
  UtHeadroom headroom;
  if (ut_headroom (system, NULL, &headroom) != UT_POWER_OK)
    return;
  for (gsize k = 0; k < system->n_limits; k++)
    {
      const UtLimit *limit = &system->limits[k];
      double room = limit->limit, shares = 0;
      for (gsize m = 0; m < limit->n_members; m++)
        {
          guint i = system->members[limit->first_member + m];
          room -= ut_system_floor (system, i, UT_LIFT_NOTHING);
          shares += p[i] = log_uniform (rand, 0.01, 1);
        }
      for (gsize m = 0; m < limit->n_members; m++)
        {
          guint i = system->members[limit->first_member + m];
          p[i] = ut_system_floor (system, i, UT_LIFT_NOTHING) + p[i] / shares * room;
        }
    }
  double lower = INFINITY;
  for (guint i = 0; i < n; i++)
    {
      double ratio = p[i] / ut_system_need (system, i, p, UT_LIFT_NOTHING);
      lower = fmin (lower, ratio);
      above_floor = fmax (above_floor, ratio);
    }
  upper = above_floor; /* every limit is full */
  g_assert_cmpfloat (headroom.upper, >=, lower * (1 - 1e-12));
  g_assert_cmpfloat (headroom.lower, <=, upper * (1 + 1e-12));
}

static void
test_headroom_bound (void)
{
  for_random_systems (4, headroom_keeps_its_bound);
}

static void
radius_is_the_edge (const UtSystem *system, GRand *rand)
{
  double p[MAX_N];
  UtRadius radius;
  (void)rand;
  g_assert_cmpint (ut_spectral_radius (system, &radius), ==, UT_POWER_OK);
  g_assert_cmpfloat (radius.lower, <=, radius.value);
  g_assert_cmpfloat (radius.value, <=, radius.upper);
  if (radius.value == 0)
    {
      g_assert_cmpint (ut_least_powers (system, 1e9, UT_LIFT_LIMITS, p, NULL), ==, UT_POWER_OK);
      return;
    }
  g_assert_cmpfloat (radius.upper / radius.lower, <=, 1 + 1e-12);
  g_assert_cmpint (ut_least_powers (system, (1 - 1e-11) / radius.upper, UT_LIFT_LIMITS, p, NULL),
                   ==,
                   UT_POWER_OK);
  g_assert_cmpint (ut_least_powers (system, (1 + 1e-11) / radius.lower, UT_LIFT_LIMITS, p, NULL),
                   ==,
                   UT_POWER_UNBOUNDED);
}

static void
test_radius (void)
{
  for_random_systems (5, radius_is_the_edge);
}

static void
scaling_only_scales (const UtSystem *system, GRand *rand)
{
  double p[MAX_N], q[MAX_N];
  UtSystem scaled;
  UtHeadroom a, b;
  double scale = log_uniform (rand, 1e-12, 1e12);
  make_scaled (&scaled, system, 1, scale);
  UtPowerStatus status = ut_least_powers (system, 1, UT_LIFT_LIMITS, p, NULL);
  g_assert_cmpint (ut_least_powers (&scaled, 1, UT_LIFT_LIMITS, q, NULL), ==, status);
  if (status == UT_POWER_OK)
    {
      UtRadius radius;
      g_assert_cmpint (ut_spectral_radius (system, &radius), ==, UT_POWER_OK);
      for (guint i = 0; i < system->n_unknowns; i++)
        assert_near (q[i], scale * p[i], 1e-11 / (1 - radius.value));
    }
  status = ut_headroom (system, NULL, &a);
  g_assert_cmpint (ut_headroom (&scaled, NULL, &b), ==, status);
  if (status == UT_POWER_OK)
    assert_near (a.factor, b.factor, 2e-10);
  ut_system_clear (&scaled);
}

static void
test_scaling (void)
{
  for_random_systems (6, scaling_only_scales);
}

/* The verdict against its definition, solve by solve. */
static void
verdict_follows_its_order (const UtSystem *system, GRand *rand)
{
  double p[MAX_N];
  UtFeasibility verdict, expected = UT_FEASIBLE;
  (void)rand;
  if (ut_least_powers (system, 1, UT_LIFT_MINIMA | UT_LIFT_IDLE | UT_LIFT_LIMITS, p, NULL)
      == UT_POWER_UNBOUNDED)
    expected = UT_INTERFERENCE_LIMITED;
  else if (ut_least_powers (system, 1, UT_LIFT_MINIMA | UT_LIFT_IDLE, p, NULL) == UT_POWER_LIMIT)
    expected = UT_POWER_LIMITED;
  else if (ut_least_powers (system, 1, UT_LIFT_NOTHING, p, NULL) == UT_POWER_LIMIT)
    expected = UT_MINIMUM_LIMITED;
  g_assert_cmpint (ut_feasibility (system, &verdict, p), ==, UT_POWER_OK);
  g_assert_cmpint (verdict, ==, expected);
  UtHeadroom headroom;
  UtPowerStatus status = ut_headroom (system, NULL, &headroom);
  if (status == UT_POWER_OK && headroom.lower > 1 + 1e-8)
    g_assert_cmpint (verdict, ==, UT_FEASIBLE);
  if (status == UT_POWER_NONE || headroom.upper < 1 - 1e-8)
    g_assert_cmpint (verdict, !=, UT_FEASIBLE);
  if (verdict == UT_FEASIBLE)
    for (guint i = 0; i < system->n_unknowns; i++)
      g_assert_cmpfloat (
          p[i] * (1 + 1e-9) * (1 + 1e-12), >=, asked (system, i, 1, UT_LIFT_NOTHING, p));
}

static void
test_verdict (void)
{
  for_random_systems (7, verdict_follows_its_order);
}

/* F and its transpose have the same radius, in any scaling, dense or not. */
static void
test_duality (void)
{
  GRand *rand = g_rand_new_with_seed (8);
  for (guint trial = 0; trial < 200; trial++)
    {
      guint n = (guint)g_rand_int_range (rand, 2, 30);
      gboolean sparse = g_rand_boolean (rand), wild = g_rand_boolean (rand);
      g_autofree double *f = g_new0 (double, n *n);
      g_autofree double *transposed = g_new0 (double, n *n);
      g_autofree double *u = g_new (double, n);
      for (guint i = 0; i < n; i++)
        {
          u[i] = 1;
          for (guint j = 0; j < n; j++)
            if (j != i && (!sparse || g_rand_double (rand) < 2.5 / n))
              f[i * n + j] = transposed[j * n + i]
                  = wild ? log_uniform (rand, 1e-13, 1e4) : log_uniform (rand, 1e-3, 1);
        }
      UtSystem a, b;
      UtRadius down, up;
      make_linear (&a, n, f, u, NULL, NULL);
      make_linear (&b, n, transposed, u, NULL, NULL);
      g_assert_cmpint (ut_spectral_radius (&a, &down), ==, UT_POWER_OK);
      g_assert_cmpint (ut_spectral_radius (&b, &up), ==, UT_POWER_OK);
      assert_near (down.value, up.value, 1e-12);
      ut_system_clear (&a);
      ut_system_clear (&b);
    }
  g_rand_free (rand);
}

void
add_property_tests (void)
{
  g_test_add_func ("/power/property/least-powers", test_least);
  g_test_add_func ("/power/property/limits", test_limits);
  g_test_add_func ("/power/property/headroom-certificate", test_headroom);
  g_test_add_func ("/power/property/headroom-bound", test_headroom_bound);
  g_test_add_func ("/power/property/radius", test_radius);
  g_test_add_func ("/power/property/scaling", test_scaling);
  g_test_add_func ("/power/property/verdict", test_verdict);
  g_test_add_func ("/power/property/duality", test_duality);
}
