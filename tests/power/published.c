/* Published worked examples and exact cases, from tests/cases/power.json; sources stand there. */
#include "make-system.h"
#include "test-power.h"

#include "headroom.h"
#include "least.h"
#include "perron.h"
#include "verdict.h"

#include <json-glib/json-glib.h>
#include <math.h>

typedef struct
{
  JsonParser *parser;
  JsonObject *object;
} Case;

static void
case_open (Case *c, const char *id)
{
  g_autoptr (GError) error = NULL;
  g_autofree char *path = g_build_filename (g_getenv ("UT_TEST_CASES"), "power.json", NULL);
  c->parser = json_parser_new_immutable ();
  json_parser_load_from_file (c->parser, path, &error);
  g_assert_no_error (error);
  JsonArray *cases = json_node_get_array (json_parser_get_root (c->parser));
  c->object = NULL;
  for (guint i = 0; i < json_array_get_length (cases); i++)
    {
      JsonObject *object = json_array_get_object_element (cases, i);
      if (g_str_equal (json_object_get_string_member (object, "id"), id))
        c->object = object;
    }
  g_assert_nonnull (c->object);
}

static void
case_close (Case *c)
{
  g_object_unref (c->parser);
}

static double
number (const Case *c, const char *member)
{
  g_assert_true (json_object_has_member (c->object, member));
  return json_object_get_double_member (c->object, member);
}

/* A list of numbers, or of rows of numbers one after another. */
static double *
numbers (const Case *c, const char *member, guint *n)
{
  JsonArray *array = json_object_get_array_member (c->object, member);
  GArray *out = g_array_new (FALSE, FALSE, sizeof (double));
  *n = json_array_get_length (array);
  for (guint i = 0; i < *n; i++)
    {
      JsonNode *node = json_array_get_element (array, i);
      guint width
          = JSON_NODE_HOLDS_ARRAY (node) ? json_array_get_length (json_node_get_array (node)) : 1;
      for (guint j = 0; j < width; j++)
        {
          double x = JSON_NODE_HOLDS_ARRAY (node)
                         ? json_array_get_double_element (json_node_get_array (node), j)
                         : json_node_get_double (node);
          g_array_append_val (out, x);
        }
    }
  return (double *)g_array_free (out, FALSE);
}

static void
assert_powers (const Case *c, const char *member, const double *p, double tolerance)
{
  guint n;
  g_autofree double *expected = numbers (c, member, &n);
  for (guint i = 0; i < n; i++)
    assert_near (p[i], expected[i], tolerance);
}

static void
assert_radius (const UtSystem *system, double expected, double tolerance)
{
  UtRadius radius;
  g_assert_cmpint (ut_spectral_radius (system, &radius), ==, UT_POWER_OK);
  assert_near (radius.value, expected, tolerance);
  g_assert_cmpfloat (radius.lower, <=, radius.value);
  g_assert_cmpfloat (radius.value, <=, radius.upper);
}

static UtFeasibility
verdict_of (const UtSystem *system, double *power)
{
  UtFeasibility verdict = UT_FEASIBLE;
  g_assert_cmpint (ut_feasibility (system, &verdict, power), ==, UT_POWER_OK);
  return verdict;
}

static double
headroom_of (const UtSystem *system, double *power)
{
  UtHeadroom headroom;
  g_assert_cmpint (ut_headroom (system, power, &headroom), ==, UT_POWER_OK);
  g_assert_cmpfloat (headroom.upper / headroom.lower, <=, 1 + 1e-9);
  return headroom.factor;
}

/* Floors and caps: the two geometric-programming examples. */
static void
test_floors_and_caps (const void *id)
{
  Case c;
  UtSystem system;
  guint n;
  double p[8];
  case_open (&c, id);
  g_autofree double *gain = numbers (&c, "gain", &n);
  make_links (&system,
              n,
              gain,
              number (&c, "noise"),
              number (&c, "target"),
              number (&c, "power_min"),
              number (&c, "power_max"));
  g_assert_cmpint (verdict_of (&system, p), ==, UT_FEASIBLE);
  assert_powers (&c, "power", p, 1e-12);
  assert_radius (&system, number (&c, "radius"), 1e-12);
  if (json_object_has_member (c.object, "headroom_db"))
    g_assert_cmpfloat (
        fabs (10 * log10 (headroom_of (&system, NULL)) - number (&c, "headroom_db")), <, 1e-9);
  ut_system_clear (&system);
  case_close (&c);
}

static void
test_total_power (void)
{
  Case c;
  UtSystem system;
  guint n;
  double p[8];
  case_open (&c, "mosek-max-worst-sinr");
  g_autofree double *gain = numbers (&c, "gain", &n);
  ut_system_init (&system, n);
  for (guint i = 0; i < n; i++)
    {
      ut_system_add_piece (&system, i, number (&c, "noise") / gain[i * n + i], 0);
      for (guint j = 0; j < n; j++)
        if (j != i)
          {
            ut_system_add_group (&system, 0, 0);
            ut_system_add_term (&system, j, gain[i * n + j] / gain[i * n + i]);
          }
    }
  ut_system_add_limit (&system, number (&c, "total_power"));
  for (guint i = 0; i < n; i++)
    ut_system_add_member (&system, i);
  g_assert_cmpint (ut_system_finish (&system), ==, UT_POWER_OK);
  double factor = headroom_of (&system, p);
  assert_near (factor, number (&c, "factor"), 1e-10);
  assert_near (factor, number (&c, "factor_printed"), 1e-7);
  assert_powers (&c, "power", p, 1e-9);
  ut_system_clear (&system);
  case_close (&c);
}

/* Receiver i's limit, sum_j G_ij p_j <= 0.8, is not of the kind the system knows.  At the symmetric
 * optimum it reads (0.6 + 4 x 0.1) p = p <= 0.8, so a cap of 0.8 a link, below the cap of 1, has
 * the same optimum: the limit only forbids more than that, and by symmetry an optimum with equal
 * powers exists. */
static void
test_received_power (void)
{
  Case c;
  UtSystem system;
  guint n;
  double p[8];
  case_open (&c, "cvxpy-bv-4.20");
  g_autofree double *gain = numbers (&c, "gain", &n);
  double row = 0;
  for (guint j = 0; j < n; j++)
    row += gain[j];
  double cap = fmin (number (&c, "power_max"), number (&c, "received_power_limit") / row);
  make_links (&system, n, gain, number (&c, "noise"), 1, 0, cap);
  assert_near (headroom_of (&system, p), 8.0 / 7, 1e-10);
  assert_powers (&c, "power", p, 1e-9);
  ut_system_clear (&system);
  case_close (&c);
}

static void
test_converges_or_not (void)
{
  Case c;
  UtSystem system;
  guint n;
  double p[8];
  case_open (&c, "ee263-2.1-9.9");
  g_autofree double *gain = numbers (&c, "gain", &n);
  double noise = number (&c, "noise"), alpha = number (&c, "alpha");
  make_links (&system, n, gain, noise, 3 * alpha, 0, 1e6);
  g_assert_cmpint (verdict_of (&system, p), ==, UT_FEASIBLE);
  assert_powers (&c, "power_3", p, 1e-12);
  assert_radius (&system, number (&c, "radius_3"), 1e-12);
  ut_system_clear (&system);
  make_links (&system, n, gain, noise, 5 * alpha, 0, 1e6);
  g_assert_cmpint (verdict_of (&system, p), ==, UT_INTERFERENCE_LIMITED);
  g_assert_cmpint (ut_least_powers (&system, 1, UT_LIFT_NOTHING, p, NULL), ==, UT_POWER_UNBOUNDED);
  assert_radius (&system, number (&c, "radius_5"), 1e-12);
  ut_system_clear (&system);
  make_links (&system, n, gain, noise, 1, 0, 1e6);
  assert_radius (&system, number (&c, "radius_unit_target"), 1e-12);
  assert_radius (&system, 1 / (alpha * number (&c, "gamma_critical")), 1e-12);
  ut_system_clear (&system);
  case_close (&c);
}

static void
test_largest_target (void)
{
  Case c;
  UtSystem system;
  guint n;
  double p[8];
  case_open (&c, "ee263-3.29");
  g_autofree double *gain = numbers (&c, "gain", &n);
  make_links (&system, n, gain, number (&c, "noise"), 1, 0, number (&c, "power_max"));
  assert_near (headroom_of (&system, p), number (&c, "factor"), 1e-9);
  double on_grid = number (&c, "largest_on_grid");
  g_assert_cmpint (ut_least_powers (&system, on_grid, UT_LIFT_NOTHING, p, NULL), ==, UT_POWER_OK);
  assert_powers (&c, "power_on_grid", p, 1e-9);
  g_assert_cmpint (
      ut_least_powers (&system, on_grid + 0.1, UT_LIFT_NOTHING, p, NULL), ==, UT_POWER_LIMIT);
  ut_system_clear (&system);
  case_close (&c);
}

/* Without noise the balanced ratio is 1 / radius, the same in both directions. */
static void
test_street (void)
{
  Case c;
  UtSystem system;
  guint n_stations, n;
  case_open (&c, "street-six-base-stations");
  g_autofree double *gain = numbers (&c, "link_gain", &n_stations);
  g_autofree double *serving = numbers (&c, "serving", &n);
  double square[2][16];
  for (guint i = 0; i < n; i++)
    for (guint j = 0; j < n; j++)
      {
        double g = gain[((guint)serving[j] - 1) * n + i];
        square[0][i * n + j] = g; /* down: station of j into mobile i */
        square[1][j * n + i] = g;
      }
  for (guint direction = 0; direction < 2; direction++)
    {
      UtRadius radius;
      make_links (&system, n, square[direction], 1e-12, 1, 0, 1);
      g_assert_cmpint (ut_spectral_radius (&system, &radius), ==, UT_POWER_OK);
      g_assert_cmpfloat (
          fabs (-10 * log10 (radius.value) - number (&c, "balanced_sir_db")), <, 1e-10);
      ut_system_clear (&system);
    }
  case_close (&c);
}

static void
test_identical_groups (void)
{
  Case c;
  UtSystem system;
  UtLeastInfo info;
  guint n;
  case_open (&c, "identical-groups-one-way");
  g_autofree double *f = numbers (&c, "matrix", &n);
  g_autofree double *u = g_new (double, n);
  g_autofree double *p = g_new (double, n);
  for (guint i = 0; i < n; i++)
    u[i] = number (&c, "noise");
  make_linear (&system, n, f, u, NULL, NULL);
  assert_radius (&system, number (&c, "radius"), 1e-15);
  g_assert_cmpint (ut_least_powers (&system, 1, UT_LIFT_NOTHING, p, &info), ==, UT_POWER_OK);
  double most = 0;
  for (guint i = 0; i < n; i++)
    {
      g_assert_cmpfloat (p[i], >, 0);
      most = fmax (most, p[i]);
    }
  assert_near (most, number (&c, "power_largest"), 1e-12);
  g_assert_cmpfloat (info.residual, <, 1e-14);
  ut_system_clear (&system);
  case_close (&c);
}

static void
test_downlink_cells (void)
{
  Case c;
  UtSystem system;
  guint n_receivers, n_serving, n = 3;
  double p[3];
  case_open (&c, "max-linear-3x4");
  g_autofree double *gain = numbers (&c, "receiver_gain", &n_receivers);
  g_autofree double *serving = numbers (&c, "serving", &n_serving);
  double target = number (&c, "target");
  ut_system_init (&system, n);
  for (guint k = 0; k < n_receivers; k++)
    {
      guint own = (guint)serving[k];
      double per_gain = target / gain[k * n + own];
      ut_system_add_piece (&system, own, number (&c, "noise") * per_gain, 0);
      for (guint j = 0; j < n; j++)
        if (j != own)
          {
            ut_system_add_group (&system, 0, 0);
            ut_system_add_term (&system, j, gain[k * n + j] * per_gain);
          }
    }
  for (guint i = 0; i < n; i++)
    {
      ut_system_add_limit (&system, number (&c, "power_max"));
      ut_system_add_member (&system, i);
    }
  g_assert_cmpint (ut_system_finish (&system), ==, UT_POWER_OK);
  g_assert_cmpint (verdict_of (&system, p), ==, UT_FEASIBLE);
  assert_powers (&c, "power", p, 1e-12);
  g_assert_cmpfloat (
      fabs (10 * log10 (headroom_of (&system, NULL)) - number (&c, "headroom_db")), <, 1e-9);
  ut_system_clear (&system);
  case_close (&c);
}

static void
test_pair_conflict (void)
{
  Case c;
  UtSystem system;
  guint n;
  double p[3];
  case_open (&c, "pair-conflict");
  g_autofree double *gain = numbers (&c, "gain", &n);
  make_links (
      &system, n, gain, number (&c, "noise"), number (&c, "target"), 0, number (&c, "power_max"));
  assert_radius (&system, number (&c, "radius"), 1e-12);
  g_assert_cmpint (verdict_of (&system, p), ==, UT_INTERFERENCE_LIMITED);
  g_assert_cmpfloat (
      fabs (10 * log10 (headroom_of (&system, NULL)) - number (&c, "headroom_db")), <, 5e-9);
  ut_system_clear (&system);
  case_close (&c);
}

static void
test_by_hand (void)
{
  Case c;
  UtSystem system;
  guint n;
  double p[2];
  case_open (&c, "hand-2x2");
  g_autofree double *gain = numbers (&c, "gain", &n);
  make_links (&system, n, gain, number (&c, "noise"), number (&c, "target"), 0, 1);
  g_assert_cmpint (verdict_of (&system, p), ==, UT_FEASIBLE);
  assert_powers (&c, "power", p, 1e-15);
  assert_radius (&system, sqrt (0.06), 1e-14);
  ut_system_clear (&system);
  case_close (&c);
}

void
add_published_tests (void)
{
  g_test_add_data_func ("/power/published/cvxpy-dgp", "cvxpy-dgp", test_floors_and_caps);
  g_test_add_data_func ("/power/published/ggplab", "ggplab", test_floors_and_caps);
  g_test_add_func ("/power/published/mosek-max-worst-sinr", test_total_power);
  g_test_add_func ("/power/published/cvxpy-bv-4.20", test_received_power);
  g_test_add_func ("/power/published/ee263-2.1-9.9", test_converges_or_not);
  g_test_add_func ("/power/published/ee263-3.29", test_largest_target);
  g_test_add_func ("/power/published/street-six-base-stations", test_street);
  g_test_add_func ("/power/exact/identical-groups-one-way", test_identical_groups);
  g_test_add_func ("/power/exact/max-linear-3x4", test_downlink_cells);
  g_test_add_func ("/power/exact/pair-conflict", test_pair_conflict);
  g_test_add_func ("/power/exact/hand-2x2", test_by_hand);
}
