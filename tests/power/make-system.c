#include "make-system.h"

#include <math.h>

double
relative_gap (double a, double b)
{
  return a == b ? 0 : fabs (a / b - 1);
}

double
log_uniform (GRand *rand, double low, double high)
{
  return exp (g_rand_double_range (rand, log (low), log (high)));
}

void
make_linear (UtSystem *system,
             guint n,
             const double *f,
             const double *u,
             const double *minimum,
             const double *limit)
{
  ut_system_init (system, n);
  for (guint i = 0; i < n; i++)
    {
      ut_system_set_floor (system, i, minimum != NULL ? minimum[i] : 0, 0);
      ut_system_add_piece (system, i, u[i], 0);
      for (guint j = 0; j < n; j++)
        if (f[i * n + j] > 0)
          {
            ut_system_add_group (system, 0, 0);
            ut_system_add_term (system, j, f[i * n + j]);
          }
      ut_system_add_limit (system, limit != NULL ? limit[i] : 1e300);
      ut_system_add_member (system, i);
    }
  g_assert_cmpint (ut_system_finish (system), ==, UT_POWER_OK);
}

void
make_links (UtSystem *system,
            guint n,
            const double *gain,
            double noise,
            double target,
            double minimum,
            double limit)
{
  g_autofree double *f = g_new0 (double, n *n);
  g_autofree double *u = g_new (double, n);
  g_autofree double *minima = g_new (double, n);
  g_autofree double *limits = g_new (double, n);
  for (guint i = 0; i < n; i++)
    {
      for (guint j = 0; j < n; j++)
        if (j != i)
          f[i * n + j] = target * gain[i * n + j] / gain[i * n + i];
      u[i] = target * noise / gain[i * n + i];
      minima[i] = minimum;
      limits[i] = limit;
    }
  make_linear (system, n, f, u, minima, limits);
}

static double
random_weight (GRand *rand, RandomKind kind)
{
  return kind & RANDOM_WILD ? log_uniform (rand, 1e-13, 1e4) : log_uniform (rand, 1e-3, 1);
}

static void
add_random_piece (UtSystem *system, GRand *rand, guint n, guint row, RandomKind kind)
{
  ut_system_add_piece (system,
                       row,
                       log_uniform (rand, 0.01, 1),
                       kind & RANDOM_FLOORS && g_rand_boolean (rand) ? log_uniform (rand, 1e-3, 0.1)
                                                                     : 0);
  for (guint j = 0; j < n; j++)
    {
      if (j == row || (kind & RANDOM_SPARSE && g_rand_double (rand) > 1.6 / n))
        continue;
      ut_system_add_group (
          system,
          kind & RANDOM_GROUPS && g_rand_boolean (rand) ? log_uniform (rand, 1e-3, 0.3) : 0,
          kind & RANDOM_GROUPS && g_rand_int_range (rand, 0, 5) == 0 ? log_uniform (rand, 1e-3, 0.3)
                                                                     : 0);
      ut_system_add_term (system, j, random_weight (rand, kind));
      while (kind & RANDOM_GROUPS && g_rand_boolean (rand))
        ut_system_add_term (
            system, (guint)g_rand_int_range (rand, 0, (int)n), random_weight (rand, kind));
    }
}

void
make_random (UtSystem *system, GRand *rand, guint n, RandomKind kind)
{
  ut_system_init (system, n);
  for (guint i = 0; i < n; i++)
    if (kind & RANDOM_FLOORS)
      ut_system_set_floor (system,
                           i,
                           g_rand_boolean (rand) ? log_uniform (rand, 1e-3, 3) : 0,
                           g_rand_int_range (rand, 0, 4) == 0 ? log_uniform (rand, 1e-3, 3) : 0);
  guint pieces = kind & RANDOM_PIECES ? 3 : 1;
  /* Out of order on purpose: finishing must sort. */
  for (guint k = 0; k < pieces; k++)
    for (guint i = n; i-- > 0;)
      if (k == 0 || g_rand_boolean (rand))
        add_random_piece (system, rand, n, i, kind);
  for (guint i = 0; i < n; i++)
    {
      if (i == 0 || !(kind & RANDOM_SUMS) || g_rand_int_range (rand, 0, 3) == 0)
        ut_system_add_limit (system, log_uniform (rand, 5, 100));
      ut_system_add_member (system, i);
    }
  g_assert_cmpint (ut_system_finish (system), ==, UT_POWER_OK);
}

void
make_scaled (UtSystem *system, const UtSystem *from, double weight, double constant)
{
  ut_system_init (system, from->n_unknowns);
  for (guint i = 0; i < from->n_unknowns; i++)
    ut_system_set_floor (system, i, constant * from->minimum[i], constant * from->level[i]);
  for (gsize k = 0; k < from->n_pieces; k++)
    {
      const UtPiece *piece = &from->pieces[k];
      ut_system_add_piece (system, piece->unknown, constant * piece->noise, constant * piece->idle);
      for (gsize g = piece->first_group; g < piece->first_group + piece->n_groups; g++)
        {
          const UtGroup *group = &from->groups[g];
          ut_system_add_group (system, constant * group->minimum, constant * group->level);
          for (gsize l = group->first_term; l < group->first_term + group->n_terms; l++)
            ut_system_add_term (system, from->terms[l].unknown, weight * from->terms[l].weight);
        }
    }
  for (gsize k = 0; k < from->n_limits; k++)
    {
      ut_system_add_limit (system, constant * from->limits[k].limit);
      for (gsize m = 0; m < from->limits[k].n_members; m++)
        ut_system_add_member (system, from->members[from->limits[k].first_member + m]);
    }
  system->minimum_above_limit = from->minimum_above_limit;
  g_assert_cmpint (ut_system_finish (system), ==, UT_POWER_OK);
}
