/* Times what is solved on one system that bench-power.py wrote: n, F (row after row), u, limits, as doubles.  Prints "name milliseconds". */
#include <math.h>
#include <stdio.h>
#include <stdlib.h>

#include <glib.h>

#include "edge.h"
#include "headroom.h"
#include "least.h"
#include "perron.h"
#include "reserve.h"

typedef struct
{
  UtSystem system;
  double *p, *other, *vector;
  UtReserveStatus *status;
  UtHeadroom headroom;
} Bench;

static void
read_system (const char *name, UtSystem *system)
{
  g_autofree char *bytes = NULL;
  const double *data;
  size_t n;

  if (!g_file_get_contents (name, &bytes, NULL, NULL))
    g_error ("%s cannot be read", name);
  data = (const double *) (const void *) bytes;
  n = (size_t) data[0];
  ut_system_init (system, n);
  for (size_t i = 0; i < n; i++)
    {
      const double *row = data + 1 + i * n;

      ut_system_add_piece (system, (uint32_t) i, data[1 + n * n + i], 0);
      for (size_t j = 0; j < n; j++)
        if (row[j] > 0)
          {
            ut_system_add_group (system, 0, 0);
            ut_system_add_term (system, (uint32_t) j, row[j]);
          }
      ut_system_add_limit (system, data[1 + n * n + n + i]);
      ut_system_add_member (system, (uint32_t) i);
    }
  if (ut_system_finish (system) != UT_POWER_OK)
    g_error ("not a system");
}

static void
powers (Bench *bench)
{
  if (ut_least_powers (&bench->system, 1, UT_LIFT_NOTHING, bench->p, NULL) != UT_POWER_OK)
    g_error ("no powers");
}

static void
radius (Bench *bench)
{
  UtRadius radius;

  if (ut_spectral_radius (&bench->system, &radius) != UT_POWER_OK)
    g_error ("no radius");
}

static void
headroom (Bench *bench)
{
  if (ut_headroom (&bench->system, bench->vector, &bench->headroom) != UT_POWER_OK)
    g_error ("no headroom");
}

static void
group (Bench *bench)
{
  UtEdge edge;

  if (ut_edge_of_headroom (&bench->system, bench->headroom.lower, bench->vector, &edge) != UT_POWER_OK)
    g_error ("no edge");
  ut_edge_clear (&edge);
}

static void
reserves (Bench *bench)
{
  if (ut_reserves (&bench->system, bench->other, bench->status) != UT_POWER_OK || bench->status[0] != UT_RESERVE_FOUND)
    g_error ("no reserves");
}

static int
compare (const void *one, const void *other)
{
  return (*(const double *) one > *(const double *) other) - (*(const double *) one < *(const double *) other);
}

int
main (int argc, char **argv)
{
  static const struct
  {
    const char *name;
    void (*run) (Bench *bench);
  } parts[] = { { "powers", powers }, { "radius", radius }, { "headroom", headroom }, { "group", group }, { "reserves", reserves } };
  Bench bench;
  int runs;

  g_assert (argc == 2);
  read_system (argv[1], &bench.system);
  runs = bench.system.n_unknowns >= 1000 ? 3 : 21;
  bench.p = g_new0 (double, bench.system.n_unknowns);
  bench.other = g_new0 (double, bench.system.n_unknowns);
  bench.vector = g_new0 (double, bench.system.n_unknowns);
  bench.status = g_new0 (UtReserveStatus, bench.system.n_unknowns);
  for (gsize k = 0; k < G_N_ELEMENTS (parts); k++)
    {
      double times_ms[21];

      for (int run = 0; run < runs; run++)
        {
          gint64 start = g_get_monotonic_time ();

          parts[k].run (&bench);
          times_ms[run] = (double) (g_get_monotonic_time () - start) / 1e3;
        }
      qsort (times_ms, (size_t) runs, sizeof *times_ms, compare);
      printf ("%s %.4f\n", parts[k].name, times_ms[runs / 2]);
    }
  printf ("# total power %.12g headroom %.12g reserve %.12g\n", bench.p[0], bench.headroom.factor, bench.other[0]);
  ut_system_clear (&bench.system);
  return 0;
}
