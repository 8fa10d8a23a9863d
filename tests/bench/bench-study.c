/* Time of a whole answer (gains, verdict, powers, headroom) for 20 cells, 200 terminals and 1,000 wall pieces, and for 60 and 600, and of the next one after
 * one cell was moved, beside a recomputation of everything in the same run.  Prints medians and 95th percentiles; never fails for a time. */
#include <math.h>
#include <stdio.h>
#include <stdlib.h>

#include "bench-site.h"
#include "plan-edit.h"
#include "study.h"

#define RUNS 31

static int
compare_times (const void *one, const void *other)
{
  double a = *(const double *) one, b = *(const double *) other;

  return (a > b) - (a < b);
}

static void
print_times (const char *what, double *times_ms)
{
  qsort (times_ms, RUNS, sizeof *times_ms, compare_times);
  printf ("  %-34s median %7.2f ms   95th %7.2f ms\n", what, times_ms[RUNS / 2], times_ms[RUNS * 95 / 100]);
}

static const UtPlan *
move_cell (const UtPlan *plan, int run)
{
  UtCell *cell = ut_cell_copy (ut_plan_cell (plan, (guint) run % plan->cells->len));

  cell->radio.x_m += run % 2 ? 0.3 : -0.3;
  return ut_plan_with_cell (plan, (int) ((guint) run % plan->cells->len), cell);
}

static void
bench (const UtPlan *start, const UtQuestion *question, const char *title)
{
  double whole_ms[RUNS], moved_ms[RUNS], gains_ms[RUNS];
  const UtPlan *plan = ut_plan_ref (start);
  UtStudy *study = ut_study_new (plan, question, NULL);

  printf ("%s: verdict %d, headroom %.3f dB, radius %.3f\n", title, (int) study->verdict, study->headroom_db, study->spectral_radius);
  for (int run = 0; run < RUNS; run++)
    {
      const UtPlan *next = move_cell (plan, run);
      gint64 t0 = g_get_monotonic_time ();
      UtStudy *renewed = ut_study_new (next, question, study);
      gint64 t1 = g_get_monotonic_time ();
      UtStudy *fresh = ut_study_new (next, question, NULL);
      gint64 t2 = g_get_monotonic_time ();
      UtGains *gains = ut_gains_new (next, study->gains);
      gint64 t3 = g_get_monotonic_time ();

      moved_ms[run] = (double) (t1 - t0) / 1e3;
      whole_ms[run] = (double) (t2 - t1) / 1e3;
      gains_ms[run] = (double) (t3 - t2) / 1e3;
      if (!(fabs (renewed->headroom_db - fresh->headroom_db) <= 1e-9))
        g_error ("the renewed answer differs from the fresh one");
      ut_gains_unref (gains);
      ut_study_unref (fresh);
      ut_study_unref (study);
      ut_plan_unref (plan);
      study = renewed;
      plan = next;
    }
  print_times ("whole answer, everything computed", whole_ms);
  print_times ("after one cell moved", moved_ms);
  print_times ("  of that, gains", gains_ms);
  printf ("  ratio of the medians: %.1f\n", whole_ms[RUNS / 2] / moved_ms[RUNS / 2]);
  ut_study_unref (study);
  ut_plan_unref (plan);
}

static void
bench_plan (int n_cells, int n_terminals)
{
  g_autoptr (UtPlan) plan = (UtPlan *) bench_site (n_cells, n_terminals);
  UtQuestion question = { .direction = UT_DIRECTION_DOWN, .aim = UT_AIM_LEAST_POWER };

  printf ("%d cells, %d terminals, 1,000 wall pieces; %d runs\n", n_cells, n_terminals, RUNS);
  bench (plan, &question, "orthogonal downlink");
  question.direction = UT_DIRECTION_UP;
  bench (plan, &question, "orthogonal uplink");

  UtCarrier *carrier = ut_carrier_copy (plan->carrier);
  carrier->sharing = UT_SHARING_SIMULTANEOUS;
  carrier->processing_gain_db = 21;
  carrier->downlink_orthogonality = 0.6;
  g_autoptr (UtPlan) simultaneous = (UtPlan *) ut_plan_with_carrier (plan, carrier);
  bench (simultaneous, &question, "simultaneous uplink");
  question.direction = UT_DIRECTION_DOWN;
  bench (simultaneous, &question, "simultaneous downlink");
  question.reserves = TRUE;
  bench (simultaneous, &question, "simultaneous downlink with every reserve");
}

int
main (void)
{
  bench_plan (20, 200);
  bench_plan (60, 600);
  return 0;
}
