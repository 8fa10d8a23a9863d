/* Nanoseconds a ray through 200, 2,000 and 20,000 wall pieces, beside a loop over all pieces in the same run; then the gains of 20 cells, 1,000 terminals
 * and 5,000 pieces. Prints; never fails for a time. */
#include <math.h>
#include <stdio.h>

#include "gains.h"
#include "plan-read.h"
#include "wall-index.h"

#define N_RAYS 2000

/* Rooms of four pieces spread over a square with about the same number of pieces in every 100 m2. */
static const UtPlan *
site (guint n_pieces, guint n_cells, guint n_terminals, const char *slab)
{
  g_autoptr (GRand) rand = g_rand_new_with_seed (n_pieces);
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  double side = 5 * sqrt (n_pieces);
  GString *text = g_string_new (NULL);
  const UtPlan *plan;

  g_string_append_printf (text,
                          "{\"undertone\": 1, \"carrier\": {\"frequency_mhz\": 3750, \"bandwidth_mhz\": 20, \"sharing\": \"orthogonal\"},"
                          "\"propagation\": {\"base\": {\"law\": \"free-space\"}, \"slab\": \"%s\"}, \"constructions\": [{\"id\": \"stud\", \"layers\": "
                          "[{\"material\": \"plasterboard\", \"thickness_mm\": 12.5}, {\"material\": \"air\", \"thickness_mm\": 75},"
                          "{\"material\": \"plasterboard\", \"thickness_mm\": 12.5}]}], \"storeys\": [{\"id\": \"S1\", \"elevation_m\": 0, \"height_m\": 4, \"walls\": [",
                          slab);
  for (guint i = 0; i < n_pieces / 4; i++)
    {
      double x = g_rand_double_range (rand, 0, side), y = g_rand_double_range (rand, 0, side), w = g_rand_double_range (rand, 3, 6);

      g_string_append_printf (text,
                              "%s{\"id\": \"W%u\", \"construction\": \"stud\", \"points\": [[%.3f, %.3f], [%.3f, %.3f], [%.3f, %.3f], [%.3f, %.3f], [%.3f, %.3f]]}",
                              i > 0 ? ", " : "", i, x, y, x + w, y, x + w, y + 4, x, y + 4, x, y);
    }
  g_string_append (text, "]}], \"cells\": [");
  for (guint i = 0; i < n_cells + n_terminals; i++)
    {
      if (i == n_cells)
        g_string_append (text, "], \"terminals\": [");
      g_string_append_printf (text,
                              "%s{\"id\": \"R%u\", \"storey\": \"S1\", \"x_m\": %.3f, \"y_m\": %.3f, \"height_m\": %s, \"power_dbm\": 20, \"power_min_dbm\": -20, "
                              "\"power_max_dbm\": 24, \"power_step_db\": 0%s}",
                              i > 0 && i != n_cells ? ", " : "", i, g_rand_double_range (rand, 0, side), g_rand_double_range (rand, 0, side), i < n_cells ? "3" : "1",
                              i < n_cells ? "" : ", \"target_down_db\": 0, \"target_up_db\": 0");
    }
  if (n_cells + n_terminals == 0)
    g_string_append (text, "], \"terminals\": [");
  g_string_append (text, "]}");
  plan = ut_plan_read (text->str, text->len, faults);
  if (plan == NULL)
    g_error ("the bench plan is refused: %s", ((UtFault *) faults->pdata[0])->message);
  g_string_free (text, TRUE);
  return plan;
}

static void
count (const UtCrossing *crossing, void *user)
{
  (void) crossing;
  (*(guint *) user)++;
}

/* The loop that the index saves: both pairs of ends on different sides of the other's line, height not looked at. */
static guint
loop (const double *pieces, guint n, double ax, double ay, double bx, double by)
{
  guint found = 0;

  for (guint i = 0; i < n; i++)
    {
      const double *p = pieces + 4 * i;
      double dx = bx - ax, dy = by - ay, start = dx * (p[1] - ay) - dy * (p[0] - ax), end = dx * (p[3] - ay) - dy * (p[2] - ax);

      if ((start > 0) != (end > 0))
        {
          double px = p[2] - p[0], py = p[3] - p[1];

          found += (px * (ay - p[1]) - py * (ax - p[0]) > 0) != (px * (by - p[1]) - py * (bx - p[0]) > 0);
        }
    }
  return found;
}

static double *
all_pieces (const UtPlan *plan, guint n)
{
  double *pieces = g_new (double, 4 * n), *next = pieces;
  const UtStorey *storey = ut_plan_storey (plan, 0);

  for (guint w = 0; w < storey->walls->len; w++)
    {
      const GArray *points = ((const UtWall *) storey->walls->pdata[w])->points;

      for (guint k = 0; k + 1 < points->len; k++)
        for (guint e = 0; e < 2; e++)
          {
            *next++ = g_array_index (points, UtPoint, k + e).x_m;
            *next++ = g_array_index (points, UtPoint, k + e).y_m;
          }
    }
  return pieces;
}

static void
bench_rays (guint n)
{
  g_autoptr (UtPlan) plan = (UtPlan *) site (n, 0, 0, "coherent");
  g_autoptr (UtWallIndex) index = ut_wall_index_new (plan);
  g_autoptr (GRand) rand = g_rand_new_with_seed (3);
  guint n_pieces = ut_wall_index_n_pieces (index), by_index = 0, by_loop = 0;
  g_autofree double *pieces = all_pieces (plan, n_pieces), *rays = g_new (double, 4 * N_RAYS);
  double side = 5 * sqrt (n);

  /* Rays of up to 60 m, as in a building. */
  for (guint i = 0; i < N_RAYS; i++)
    for (guint k = 0; k < 2; k++)
      {
        rays[4 * i + k] = g_rand_double_range (rand, 0, side);
        rays[4 * i + 2 + k] = rays[4 * i + k] + g_rand_double_range (rand, -42, 42);
      }
  gint64 t0 = g_get_monotonic_time ();
  for (guint i = 0; i < N_RAYS; i++)
    ut_wall_index_walk (index, (double[]){ rays[4 * i], rays[4 * i + 1], 1 }, (double[]){ rays[4 * i + 2], rays[4 * i + 3], 1.5 }, FALSE, count, &by_index);
  gint64 t1 = g_get_monotonic_time ();
  for (guint i = 0; i < N_RAYS; i++)
    by_loop += loop (pieces, n_pieces, rays[4 * i], rays[4 * i + 1], rays[4 * i + 2], rays[4 * i + 3]);
  gint64 t2 = g_get_monotonic_time ();
  printf ("%6u pieces: index, losses worked out %8.0f ns a ray   loop without losses %8.0f ns   %.1f times   (%.1f crossings a ray)\n",
          n_pieces, (double) (t1 - t0) * 1e3 / N_RAYS, (double) (t2 - t1) * 1e3 / N_RAYS, (double) (t2 - t1) / (double) MAX (t1 - t0, 1), (double) by_index / N_RAYS);
  if (by_index != by_loop)
    g_error ("%u crossings by the index, %u by the loop", by_index, by_loop);
}

static void
bench_gains (const char *slab)
{
  g_autoptr (UtPlan) plan = (UtPlan *) site (5000, 20, 1000, slab);
  gint64 start = g_get_monotonic_time ();
  g_autoptr (UtGains) gains = ut_gains_new (plan, NULL);

  printf ("20 cells, 1,000 terminals, 5,000 pieces, %s slabs: %.0f ms\n", slab, (double) (g_get_monotonic_time () - start) / 1e3);
}

int
main (void)
{
  bench_rays (200);
  bench_rays (2000);
  bench_rays (20000);
  bench_gains ("coherent");
  bench_gains ("averaged");
  return 0;
}
