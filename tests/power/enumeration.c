/* Tiny systems against the enumeration of every policy with dense routines (dgeev, dgesv). */
#include "make-system.h"
#include "test-power.h"

#include "least.h"
#include "perron.h"

#include <lapacke.h>
#include <math.h>
#include <string.h>

#define MAX_N 4
#define MAX_POLICIES 3000

/* One way to replace a row by an affine one. */
typedef struct
{
  double f[MAX_N];
  double u;
} Row;

static void
expand_groups (GArray *rows, const UtSystem *system, const UtPiece *piece, gsize g, Row row)
{
  if (g == piece->first_group + piece->n_groups)
    {
      g_array_append_val (rows, row);
      return;
    }
  const UtGroup *group = &system->groups[g];
  Row next = row;
  next.u += fmax (group->minimum, group->level);
  expand_groups (rows, system, piece, g + 1, next);
  for (gsize l = group->first_term; l < group->first_term + group->n_terms; l++)
    {
      next = row;
      next.f[system->terms[l].unknown] += system->terms[l].weight;
      expand_groups (rows, system, piece, g + 1, next);
    }
}

static GArray *
rows_of (const UtSystem *system, guint unknown)
{
  GArray *rows = g_array_new (FALSE, FALSE, sizeof (Row));
  Row at_floor = { .u = fmax (system->minimum[unknown], system->level[unknown]) };
  g_array_append_val (rows, at_floor);
  for (gsize k = system->first_piece[unknown]; k < system->first_piece[unknown + 1]; k++)
    {
      Row row = { .u = system->pieces[k].noise + system->pieces[k].idle };
      expand_groups (rows, system, &system->pieces[k], system->pieces[k].first_group, row);
    }
  return rows;
}

/* The _work variants take their memory from here; the others would allocate at every call. */
static double
dense_radius (guint n, const double *f)
{
  double a[MAX_N * MAX_N], real[MAX_N], imaginary[MAX_N], work[16 * MAX_N], radius = 0;
  memcpy (a, f, n * n * sizeof *a); /* transposed: the eigenvalues are the same */
  g_assert_cmpint (LAPACKE_dgeev_work (LAPACK_COL_MAJOR,
                                       'N',
                                       'N',
                                       (int)n,
                                       a,
                                       (int)n,
                                       real,
                                       imaginary,
                                       NULL,
                                       1,
                                       NULL,
                                       1,
                                       work,
                                       16 * MAX_N),
                   ==,
                   0);
  for (guint i = 0; i < n; i++)
    radius = fmax (radius, hypot (real[i], imaginary[i]));
  return radius;
}

static void
dense_solve (guint n, const double *f, double *u)
{
  double a[MAX_N * MAX_N];
  lapack_int pivots[MAX_N];
  for (guint i = 0; i < n; i++)
    for (guint j = 0; j < n; j++)
      a[j * n + i] = (i == j) - f[i * n + j];
  g_assert_cmpint (
      LAPACKE_dgesv_work (LAPACK_COL_MAJOR, (int)n, 1, a, (int)n, pivots, u, (int)n), ==, 0);
}

typedef struct
{
  double radius;
  double power[MAX_N]; /* meaningful where radius < 1 */
} Answer;

static void
enumerate (const UtSystem *system, GArray **rows, gsize n_policies, Answer *answer)
{
  guint n = (guint)system->n_unknowns;
  memset (answer, 0, sizeof *answer);
  for (gsize policy = 0; policy < n_policies; policy++)
    {
      double f[MAX_N * MAX_N], u[MAX_N];
      gsize rest = policy;
      for (guint i = 0; i < n; i++)
        {
          const Row *row = &g_array_index (rows[i], Row, rest % rows[i]->len);
          rest /= rows[i]->len;
          memcpy (&f[i * n], row->f, n * sizeof *f);
          u[i] = row->u;
        }
      double radius = dense_radius (n, f);
      answer->radius = fmax (answer->radius, radius);
      if (radius >= 1)
        continue;
      dense_solve (n, f, u);
      for (guint i = 0; i < n; i++)
        answer->power[i] = fmax (answer->power[i], u[i]);
    }
}

/* Returns whether the system was small enough to be enumerated. */
static gboolean
compare (const UtSystem *system)
{
  guint n = (guint)system->n_unknowns;
  GArray *rows[MAX_N];
  gsize n_policies = 1;
  for (guint i = 0; i < n; i++)
    {
      rows[i] = rows_of (system, i);
      n_policies *= rows[i]->len;
    }
  gboolean small = n_policies <= MAX_POLICIES;
  if (small)
    {
      Answer answer;
      UtRadius radius;
      double p[MAX_N];
      enumerate (system, rows, n_policies, &answer);
      g_assert_cmpint (ut_spectral_radius (system, &radius), ==, UT_POWER_OK);
      g_assert_cmpfloat (fabs (radius.value - answer.radius), <=, 1e-11 * answer.radius + 1e-14);
      UtPowerStatus status = ut_least_powers (system, 1, UT_LIFT_LIMITS, p, NULL);
      if (answer.radius >= 1 + 1e-9)
        g_assert_cmpint (status, ==, UT_POWER_UNBOUNDED);
      else if (answer.radius <= 1 - 1e-9)
        {
          g_assert_cmpint (status, ==, UT_POWER_OK);
          for (guint i = 0; i < n; i++)
            assert_near (p[i], answer.power[i], 1e-12 / (1 - answer.radius));
        }
    }
  for (guint i = 0; i < n; i++)
    g_array_unref (rows[i]);
  return small;
}

static void
test_enumeration (void)
{
  GRand *rand = g_rand_new_with_seed (20250301);
  guint compared = 0, unbounded = 0;
  for (guint trial = 0; trial < 300; trial++)
    {
      UtSystem random, system;
      UtRadius radius;
      guint n = (guint)g_rand_int_range (rand, 1, MAX_N + 1);
      RandomKind kind = RANDOM_PIECES | RANDOM_FLOORS;
      if (n <= 3 && g_rand_boolean (rand))
        kind |= RANDOM_GROUPS;
      if (g_rand_int_range (rand, 0, 3) == 0)
        kind |= RANDOM_SPARSE;
      make_random (&random, rand, n, kind);
      /* Spread the radii about 1. */
      g_assert_cmpint (ut_spectral_radius (&random, &radius), ==, UT_POWER_OK);
      double aim = log_uniform (rand, 0.4, 1.4);
      make_scaled (&system, &random, radius.value > 0 ? aim / radius.value : 1, 1);
      if (compare (&system))
        {
          compared++;
          unbounded += radius.value > 0 && aim > 1;
        }
      ut_system_clear (&system);
      ut_system_clear (&random);
    }
  g_assert_cmpuint (compared, >, 150);
  g_assert_cmpuint (unbounded, >, 30);
  g_rand_free (rand);
}

void
add_enumeration_tests (void)
{
  g_test_add_func ("/power/enumeration", test_enumeration);
}
