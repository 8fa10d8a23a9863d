/* Degenerate and hand-made systems, refusals, and one larger than a block of the elimination. */
#include "make-system.h"
#include "test-power.h"

#include "dense.h"
#include "headroom.h"
#include "least.h"
#include "perron.h"
#include "verdict.h"

#include <math.h>

static void
test_nothing (void)
{
  UtSystem system;
  UtRadius radius;
  UtHeadroom headroom;
  UtFeasibility verdict = UT_POWER_LIMITED;
  ut_system_init (&system, 0);
  g_assert_cmpint (ut_system_finish (&system), ==, UT_POWER_OK);
  g_assert_cmpint (ut_least_powers (&system, 1, UT_LIFT_NOTHING, NULL, NULL), ==, UT_POWER_OK);
  g_assert_cmpint (ut_spectral_radius (&system, &radius), ==, UT_POWER_OK);
  g_assert_cmpfloat (radius.upper, ==, 0);
  g_assert_cmpint (ut_headroom (&system, NULL, &headroom), ==, UT_POWER_NONE);
  g_assert_cmpint (ut_feasibility (&system, &verdict, NULL), ==, UT_POWER_OK);
  g_assert_cmpint (verdict, ==, UT_FEASIBLE);
  ut_system_clear (&system);
}

static void
make_one (UtSystem *system, double noise, double self, double minimum, double level, double limit)
{
  ut_system_init (system, 1);
  ut_system_set_floor (system, 0, minimum, level);
  ut_system_add_piece (system, 0, noise, 0);
  ut_system_add_group (system, 0, 0);
  ut_system_add_term (system, 0, self);
  ut_system_add_limit (system, limit);
  ut_system_add_member (system, 0);
  g_assert_cmpint (ut_system_finish (system), ==, UT_POWER_OK);
}

static void
assert_one (UtSystem *system, UtFeasibility expected, double factor)
{
  UtHeadroom headroom;
  UtFeasibility verdict;
  g_assert_cmpint (ut_feasibility (system, &verdict, NULL), ==, UT_POWER_OK);
  g_assert_cmpint (verdict, ==, expected);
  UtPowerStatus status = ut_headroom (system, NULL, &headroom);
  g_assert_cmpint (status, ==, factor > 0 ? UT_POWER_OK : UT_POWER_NONE);
  if (factor > 0)
    assert_near (headroom.factor, factor, 1e-10);
  ut_system_clear (system);
}

/* p = t (noise + self p): t* = limit / (noise + self limit). */
static void
test_one_unknown (void)
{
  UtSystem system;
  make_one (&system, 2, 0, 0, 0, 8);
  assert_one (&system, UT_FEASIBLE, 4);
  make_one (&system, 2, 0.5, 0, 0, 8);
  assert_one (&system, UT_FEASIBLE, 8 / 6.0);
  make_one (&system, 2, 0.5, 0, 0, 3);
  assert_one (&system, UT_POWER_LIMITED, 3 / 3.5);
  make_one (&system, 2, 1, 0, 0, 8);
  assert_one (&system, UT_INTERFERENCE_LIMITED, 8 / 10.0);
  make_one (&system, 2, 1e-9, 0, 0, 1e-3);
  assert_one (&system, UT_POWER_LIMITED, 1e-3 / (2 + 1e-12));
  make_one (&system, 1e-12, 0.5, 0, 0, 1e6); /* the limit is far away: t* is 2 but for 4e-18 */
  assert_one (&system, UT_FEASIBLE, 2);
  make_one (&system, 2, 0, 8, 0, 8); /* fixed power */
  assert_one (&system, UT_FEASIBLE, 4);
  make_one (&system, 2, 0, 9, 0, 8);
  assert_one (&system, UT_MINIMUM_LIMITED, 0);
  make_one (&system, 2, 0, 0, 9, 8);
  assert_one (&system, UT_POWER_LIMITED, 0);
  make_one (&system, 2, 0, 8 * (1 + 1e-15), 0, 8); /* fixed power, rounded */
  assert_one (&system, UT_FEASIBLE, 4);
  make_one (&system, 2, 0, 0, 0, 8);
  system.minimum_above_limit = true;
  assert_one (&system, UT_MINIMUM_LIMITED, 0);
  make_one (
      &system, 8, 0, 0, 0, 8); /* exactly at the edge, and a little past it within the slack */
  assert_one (&system, UT_FEASIBLE, 1);
  make_one (&system, 8 * (1 + 9e-10), 0, 0, 0, 8);
  assert_one (&system, UT_FEASIBLE, 1 - 9e-10);
  make_one (&system, 8 * (1 + 2e-9), 0, 0, 0, 8);
  assert_one (&system, UT_POWER_LIMITED, 1 - 2e-9);
}

/* Idle cells alone in the way count like minima; noise does not. */
static void
test_idle_in_the_way (void)
{
  for (guint half = 0; half < 2; half++)
    {
      UtSystem system;
      ut_system_init (&system, 1);
      ut_system_add_piece (&system, 0, half == 0 ? 1 : 7, half == 0 ? 7 : 1);
      ut_system_add_limit (&system, half == 0 ? 4 : 6);
      ut_system_add_member (&system, 0);
      g_assert_cmpint (ut_system_finish (&system), ==, UT_POWER_OK);
      assert_one (
          &system, half == 0 ? UT_MINIMUM_LIMITED : UT_POWER_LIMITED, half == 0 ? 0.5 : 0.75);
    }
}

static void
test_no_coupling (void)
{
  UtSystem system;
  UtRadius radius;
  UtHeadroom headroom;
  const double f[9] = { 0 }, u[] = { 1, 2, 3 }, limit[] = { 5, 5, 5 };
  double p[3];
  make_linear (&system, 3, f, u, NULL, limit);
  g_assert_cmpint (ut_least_powers (&system, 1, UT_LIFT_NOTHING, p, NULL), ==, UT_POWER_OK);
  for (guint i = 0; i < 3; i++)
    g_assert_cmpfloat (p[i], ==, u[i]);
  g_assert_cmpint (ut_spectral_radius (&system, &radius), ==, UT_POWER_OK);
  g_assert_cmpfloat (radius.upper, ==, 0);
  g_assert_cmpint (ut_headroom (&system, NULL, &headroom), ==, UT_POWER_OK);
  assert_near (headroom.factor, 5.0 / 3, 1e-10);
  ut_system_clear (&system);
}

/* Weights of 0 are no coupling; one-way coupling is no loop. */
static void
test_zero_weights (void)
{
  UtSystem system;
  UtRadius radius;
  double p[2];
  ut_system_init (&system, 2);
  for (guint i = 0; i < 2; i++)
    {
      ut_system_add_piece (&system, i, 1, 0);
      ut_system_add_group (&system, 0, 0);
      ut_system_add_term (&system, 1 - i, i == 0 ? 0 : 1e4);
      ut_system_add_group (&system, 0, 0);
      ut_system_add_limit (&system, 1e6);
      ut_system_add_member (&system, i);
    }
  g_assert_cmpint (ut_system_finish (&system), ==, UT_POWER_OK);
  g_assert_cmpint (ut_spectral_radius (&system, &radius), ==, UT_POWER_OK);
  g_assert_cmpfloat (radius.upper, ==, 0);
  g_assert_cmpint (ut_least_powers (&system, 1, UT_LIFT_NOTHING, p, NULL), ==, UT_POWER_OK);
  g_assert_cmpfloat (p[0], ==, 1);
  g_assert_cmpfloat (p[1], ==, 10001);
  ut_system_clear (&system);
}

/* Constants inside groups scale with the factor, floors do not; each lift takes away its own. */
static void
test_factor_and_lifts (void)
{
  UtSystem system;
  double p;
  ut_system_init (&system, 1);
  ut_system_set_floor (&system, 0, 3, 2.5);
  ut_system_add_piece (&system, 0, 1, 0.5);
  ut_system_add_group (&system, 0.75, 0.25);
  ut_system_add_limit (&system, 100);
  ut_system_add_member (&system, 0);
  g_assert_cmpint (ut_system_finish (&system), ==, UT_POWER_OK);
  const struct
  {
    double factor;
    UtLift lift;
    double power;
  } cases[] = {
    { 1, UT_LIFT_NOTHING, 3 },     { 2, UT_LIFT_NOTHING, 4.5 },
    { 1, UT_LIFT_MINIMA, 2.5 },    { 2, UT_LIFT_MINIMA, 3.5 },
    { 4, UT_LIFT_IDLE, 7 },        { 4, UT_LIFT_MINIMA | UT_LIFT_IDLE, 5 },
    { 0.01, UT_LIFT_MINIMA, 2.5 },
  };
  for (guint i = 0; i < G_N_ELEMENTS (cases); i++)
    {
      g_assert_cmpint (
          ut_least_powers (&system, cases[i].factor, cases[i].lift, &p, NULL), ==, UT_POWER_OK);
      assert_near (p, cases[i].power, 1e-15);
    }
  g_assert_cmpint (ut_least_powers (&system, 0, UT_LIFT_NOTHING, &p, NULL), ==, UT_POWER_INVALID);
  g_assert_cmpint (ut_least_powers (&system, NAN, UT_LIFT_NOTHING, &p, NULL), ==, UT_POWER_INVALID);
  ut_system_clear (&system);
}

/* A limit passed in one group of links does not hide that another has no powers at all. */
static void
test_unbounded_before_limit (void)
{
  UtSystem system;
  UtFeasibility verdict;
  const double f[16] = { [1] = 0.1, [4] = 0.1, [11] = 1.1, [14] = 1.0 };
  const double u[] = { 5, 5, 1, 1 }, limit[] = { 1, 1, 100, 100 };
  double p[4] = { -1, -1, -1, -1 };
  make_linear (&system, 4, f, u, NULL, limit);
  g_assert_cmpint (ut_least_powers (&system, 1, UT_LIFT_NOTHING, p, NULL), ==, UT_POWER_UNBOUNDED);
  for (guint i = 0; i < 4; i++)
    g_assert_cmpfloat (p[i], ==, -1);
  g_assert_cmpint (ut_feasibility (&system, &verdict, NULL), ==, UT_POWER_OK);
  g_assert_cmpint (verdict, ==, UT_INTERFERENCE_LIMITED);
  ut_system_clear (&system);
}

/* Loops whose product is exactly 1 have radius 1, whatever the scaling of the unknowns. */
static void
test_radius_one (void)
{
  for (int e = -40; e <= 40; e += 8)
    {
      UtSystem system;
      UtRadius radius;
      double p[2];
      const double f[] = { 0, ldexp (1, e), ldexp (1, -e), 0 }, u[] = { 1, 1 };
      make_linear (&system, 2, f, u, NULL, NULL);
      g_assert_cmpint (
          ut_least_powers (&system, 1, UT_LIFT_LIMITS, p, NULL), ==, UT_POWER_UNBOUNDED);
      g_assert_cmpint (ut_spectral_radius (&system, &radius), ==, UT_POWER_OK);
      assert_near (radius.value, 1, 1e-13);
      ut_system_clear (&system);
    }
}

/* A ring has the geometric mean of its weights as radius; all its eigenvalues have that modulus. */
static void
test_ring (void)
{
  GRand *rand = g_rand_new_with_seed (11);
  for (guint n = 2; n <= 40; n++)
    {
      UtSystem system;
      UtRadius radius;
      double logs = 0;
      g_autofree double *f = g_new0 (double, n *n);
      g_autofree double *u = g_new (double, n);
      for (guint i = 0; i < n; i++)
        {
          f[i * n + (i + 1) % n] = log_uniform (rand, 1e-13, 1e4);
          logs += log (f[i * n + (i + 1) % n]);
          u[i] = 1;
        }
      make_linear (&system, n, f, u, NULL, NULL);
      g_assert_cmpint (ut_spectral_radius (&system, &radius), ==, UT_POWER_OK);
      assert_near (radius.value, exp (logs / n), 1e-12);
      ut_system_clear (&system);
    }
  g_rand_free (rand);
}

/* A chain of loud one-way couplings leaves the range of doubles: powers are finite, yet no limit
 * holds them. */
static void
test_out_of_range (void)
{
  const guint n = 100;
  UtSystem system;
  UtFeasibility verdict;
  g_autofree double *f = g_new0 (double, n *n);
  g_autofree double *u = g_new (double, n);
  g_autofree double *p = g_new (double, n);
  for (guint i = 0; i < n; i++)
    {
      u[i] = 1;
      if (i > 0)
        f[i * n + i - 1] = 1e4;
    }
  make_linear (&system, n, f, u, NULL, NULL);
  g_assert_cmpint (ut_least_powers (&system, 1, UT_LIFT_NOTHING, p, NULL), ==, UT_POWER_LIMIT);
  g_assert_cmpint (ut_least_powers (&system, 1, UT_LIFT_LIMITS, p, NULL), ==, UT_POWER_UNSETTLED);
  g_assert_cmpint (ut_feasibility (&system, &verdict, NULL), ==, UT_POWER_OK);
  g_assert_cmpint (verdict, ==, UT_POWER_LIMITED);
  UtHeadroom headroom;
  g_assert_cmpint (ut_headroom (&system, p, &headroom), ==, UT_POWER_OK);
  g_assert_cmpfloat (headroom.upper, <, 1);
  ut_system_clear (&system);
}

static UtPowerStatus
finish_with (double noise, double idle, double weight, double minimum, double limit, guint term)
{
  UtSystem system;
  ut_system_init (&system, 1);
  ut_system_set_floor (&system, 0, minimum, 0);
  ut_system_add_piece (&system, 0, noise, idle);
  ut_system_add_group (&system, 0, 0);
  ut_system_add_term (&system, term, weight);
  ut_system_add_limit (&system, limit);
  ut_system_add_member (&system, 0);
  UtPowerStatus status = ut_system_finish (&system);
  ut_system_clear (&system);
  return status;
}

static void
test_refusals (void)
{
  g_assert_cmpint (finish_with (1, 0, 1, 0, 1, 0), ==, UT_POWER_OK);
  g_assert_cmpint (finish_with (0, 0, 1, 0, 1, 0), ==, UT_POWER_INVALID);
  g_assert_cmpint (finish_with (-1, 0, 1, 0, 1, 0), ==, UT_POWER_INVALID);
  g_assert_cmpint (finish_with (NAN, 0, 1, 0, 1, 0), ==, UT_POWER_INVALID);
  g_assert_cmpint (finish_with (1, INFINITY, 1, 0, 1, 0), ==, UT_POWER_INVALID);
  g_assert_cmpint (finish_with (1, 0, -1, 0, 1, 0), ==, UT_POWER_INVALID);
  g_assert_cmpint (finish_with (1, 0, INFINITY, 0, 1, 0), ==, UT_POWER_INVALID);
  g_assert_cmpint (finish_with (1, 0, 1, -1, 1, 0), ==, UT_POWER_INVALID);
  g_assert_cmpint (finish_with (1, 0, 1, 0, 0, 0), ==, UT_POWER_INVALID);
  g_assert_cmpint (finish_with (1, 0, 1, 0, INFINITY, 0), ==, UT_POWER_INVALID);
  g_assert_cmpint (finish_with (1, 0, 1, 0, 1, 1), ==, UT_POWER_INVALID);
}

static void
test_malformed (void)
{
  for (guint fault = 0; fault < 7; fault++)
    {
      UtSystem system;
      UtRadius radius;
      ut_system_init (&system, 2);
      if (fault == 0)
        ut_system_add_group (&system, 0, 0);
      ut_system_add_piece (&system, 0, 1, 0);
      if (fault == 1)
        ut_system_add_term (&system, 0, 1);
      if (fault == 2)
        ut_system_add_member (&system, 0);
      if (fault == 3)
        ut_system_set_floor (&system, 2, 0, 0);
      if (fault != 4) /* 4: an unknown without a piece */
        ut_system_add_piece (&system, 1, 1, 0);
      ut_system_add_limit (&system, 1);
      ut_system_add_member (&system, 0);
      if (fault != 5) /* 5: one without a limit, 6: one in two */
        ut_system_add_member (&system, 1);
      if (fault == 6)
        ut_system_add_member (&system, 0);
      g_assert_cmpint (ut_system_finish (&system), ==, UT_POWER_INVALID);
      ut_system_clear (&system);
      g_assert_cmpint (ut_spectral_radius (&system, &radius), ==, UT_POWER_INVALID);
    }
}

/* Factors of matrices larger than a block, against the residual and against what must not be
 * positive definite. */
static void
test_elimination (void)
{
  GRand *rand = g_rand_new_with_seed (12);
  const guint sizes[] = { 1, 2, 31, 63, 64, 65, 97, 200 };
  for (guint s = 0; s < G_N_ELEMENTS (sizes); s++)
    {
      guint n = sizes[s];
      g_autofree double *a = g_new0 (double, n *n);
      g_autofree double *lu = g_new (double, n *n);
      g_autofree double *b = g_new (double, 3 * n);
      g_autofree double *x = g_new (double, 3 * n);
      for (guint i = 0; i < n; i++)
        {
          double sum = 0;
          for (guint j = 0; j < n; j++)
            if (j != i)
              sum += a[j * n + i] = -log_uniform (rand, 1e-6, 1);
          for (guint j = 0; j < n; j++)
            a[j * n + i] *= -0.999 / fmin (sum, -1e-300); /* rows of F sum to 0.999 */
          for (guint j = 0; j < n; j++)
            a[j * n + i] = j == i ? 1 : -fabs (a[j * n + i]);
        }
      for (guint i = 0; i < 3 * n; i++)
        b[i] = x[i] = g_rand_double_range (rand, 0, 1);
      for (guint i = 0; i < n * n; i++)
        lu[i] = a[i];
      g_assert_true (ut_dense_factor (n, lu));
      g_assert_true (ut_dense_solve (n, lu, 3, x));
      for (guint c = 0; c < 3; c++)
        for (guint i = 0; i < n; i++)
          {
            double sum = x[c * n + i];
            for (guint j = 0; j < n; j++)
              if (j != i)
                sum += a[j * n + i] * x[c * n + j];
            g_assert_cmpfloat (fabs (sum - b[c * n + i]), <=, 1e-13 * (1 + x[c * n + i]));
          }
      if (n == 1)
        continue;
      for (guint i = 0; i < n * n; i++) /* rows of F sum to 1.001 */
        lu[i] = i % (n + 1) == 0 ? 1 : a[i] * (1.001 / 0.999);
      g_assert_false (ut_dense_factor (n, lu));
    }
  g_rand_free (rand);
}

/* The same bits twice, also where the elimination goes block by block. */
static void
test_determinism (void)
{
  GRand *rand = g_rand_new_with_seed (13);
  UtSystem system;
  double p[2][150];
  UtHeadroom headroom[2];
  UtRadius radius[2];
  make_random (&system, rand, 150, 0);
  for (guint run = 0; run < 2; run++)
    {
      g_assert_cmpint (ut_spectral_radius (&system, &radius[run]), ==, UT_POWER_OK);
      g_assert_cmpint (ut_headroom (&system, p[run], &headroom[run]), ==, UT_POWER_OK);
    }
  g_assert_cmpmem (p[0], sizeof p[0], p[1], sizeof p[1]);
  g_assert_cmpfloat (headroom[0].factor, ==, headroom[1].factor);
  g_assert_cmpfloat (radius[0].value, ==, radius[1].value);
  ut_system_clear (&system);
  g_rand_free (rand);
}

void
add_small_tests (void)
{
  g_test_add_func ("/power/small/nothing", test_nothing);
  g_test_add_func ("/power/small/one-unknown", test_one_unknown);
  g_test_add_func ("/power/small/idle-in-the-way", test_idle_in_the_way);
  g_test_add_func ("/power/small/no-coupling", test_no_coupling);
  g_test_add_func ("/power/small/zero-weights", test_zero_weights);
  g_test_add_func ("/power/small/factor-and-lifts", test_factor_and_lifts);
  g_test_add_func ("/power/small/unbounded-before-limit", test_unbounded_before_limit);
  g_test_add_func ("/power/small/radius-one", test_radius_one);
  g_test_add_func ("/power/small/ring", test_ring);
  g_test_add_func ("/power/small/out-of-range", test_out_of_range);
  g_test_add_func ("/power/small/refusals", test_refusals);
  g_test_add_func ("/power/small/malformed", test_malformed);
  g_test_add_func ("/power/small/elimination", test_elimination);
  g_test_add_func ("/power/small/determinism", test_determinism);
}
