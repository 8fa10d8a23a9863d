/* What is found to help does help: every change of every example is solved again, is one change, and the list is in order. */
#include <math.h>

#include "improvements.h"
#include "plan-read.h"

static double last_done;

static void
progress (double done, gpointer user)
{
  (void) user;
  g_assert_cmpfloat (done, >=, last_done);
  g_assert_cmpfloat (done, <=, 1);
  last_done = done;
}

static UtStudy *
study_of (const char *name, UtDirection direction)
{
  g_autofree char *path = g_build_filename (g_getenv ("UT_EXAMPLES"), name, NULL);
  g_autoptr (GFile) file = g_file_new_for_path (path);
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  g_autoptr (UtPlan) plan = (UtPlan *) ut_plan_read_file (file, faults, NULL);
  UtQuestion question = { .direction = direction };

  g_assert_nonnull (plan);
  return ut_study_new (plan, &question, NULL);
}

static void
test_examples (void)
{
  static const char *const names[] = { "two-rooms.undertone", "cold-store.undertone", "farm.undertone" };
  guint n = 0;

  for (gsize i = 0; i < G_N_ELEMENTS (names); i++)
    {
      g_autoptr (UtStudy) study = study_of (names[i], UT_DIRECTION_UP);
      g_autoptr (GPtrArray) found = NULL;
      double before_db = INFINITY;

      last_done = 0;
      found = ut_improvements_new (study, NULL, progress, NULL);
      g_assert_cmpfloat_with_epsilon (last_done, 1, 1e-12);
      for (guint k = 0; k < found->len; k++)
        {
          const UtImprovement *one = found->pdata[k];
          UtQuestion question = { .direction = UT_DIRECTION_UP };
          g_autoptr (UtStudy) again = ut_study_new (one->plan, &question, NULL); /* from nothing, not from kept gains */

          g_test_message ("%s: %s, %.2f dB", names[i], one->what, one->headroom_db);
          g_assert_cmpfloat_with_epsilon (again->headroom_db, one->headroom_db, 1e-6);
          g_assert_cmpfloat (one->headroom_db, >=, study->headroom_db + 0.1 - 1e-9);
          g_assert_cmpfloat (one->headroom_db, <=, before_db);
          g_assert_cmpint (one->met, ==, again->verdict == UT_VERDICT_MET);
          before_db = one->headroom_db;
          n++;
        }
    }
  g_assert_cmpuint (n, >, 5);
}

/* Where the best move is known: one cell serves two terminals beside each other behind nothing; nearer is better, so the cell goes towards them. */
static void
test_known_move (void)
{
  static const char text[]
      = "{\"undertone\": 1, \"carrier\": {\"frequency_mhz\": 3500, \"bandwidth_mhz\": 20, \"sharing\": \"orthogonal\"},"
        "\"propagation\": {\"base\": {\"law\": \"free-space\"}},"
        "\"storeys\": [{\"id\": \"S1\", \"elevation_m\": 0, \"height_m\": 3}],"
        "\"cells\": [{\"id\": \"C1\", \"storey\": \"S1\", \"x_m\": 0, \"y_m\": 0, \"height_m\": 2, \"antenna\": \"isotropic\","
        "\"power_dbm\": 0, \"power_min_dbm\": -40, \"power_max_dbm\": 0, \"power_step_db\": 0}],"
        "\"terminals\": [{\"id\": \"T1\", \"storey\": \"S1\", \"x_m\": 40, \"y_m\": 0, \"height_m\": 2, \"antenna\": \"isotropic\","
        "\"power_dbm\": 0, \"power_min_dbm\": -40, \"power_max_dbm\": 0, \"power_step_db\": 0, \"target_down_db\": 10, \"target_up_db\": 10}]}";
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  g_autoptr (UtPlan) plan = (UtPlan *) ut_plan_read (text, sizeof text - 1, faults);
  UtQuestion question = { .direction = UT_DIRECTION_DOWN };

  for (guint i = 0; i < faults->len; i++)
    g_test_message ("%s: %s", ((UtFault *) faults->pdata[i])->path, ((UtFault *) faults->pdata[i])->message);
  g_assert_nonnull (plan);
  g_autoptr (UtStudy) study = ut_study_new (plan, &question, NULL);
  g_autoptr (GPtrArray) found = ut_improvements_new (study, NULL, NULL, NULL);
  const UtImprovement *best = found->pdata[0];
  const UtRadio *cell = &ut_plan_cell (best->plan, 0)->radio;

  g_assert_cmpint (best->kind, ==, UT_IMPROVE_MOVE);
  g_assert_cmpfloat_with_epsilon (cell->x_m, 8, 1e-9); /* as far as it looks */
  g_assert_cmpfloat_with_epsilon (cell->y_m, 0, 1e-9);
  /* Free space: 20 log10 of the distances' ratio. */
  g_assert_cmpfloat_with_epsilon (best->gained_db, 20 * log10 (40.0 / 32.0), 1e-6);
}

static void
test_cancel (void)
{
  g_autoptr (UtStudy) study = study_of ("cold-store.undertone", UT_DIRECTION_DOWN);
  g_autoptr (GCancellable) cancellable = g_cancellable_new ();

  g_cancellable_cancel (cancellable);
  g_autoptr (GPtrArray) found = ut_improvements_new (study, cancellable, NULL, NULL);
  g_assert_cmpuint (found->len, ==, 0);
}

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  g_test_add_func ("/improvements/examples", test_examples);
  g_test_add_func ("/improvements/known-move", test_known_move);
  g_test_add_func ("/improvements/cancel", test_cancel);
  return g_test_run ();
}
