/* Unsaved work outlives the program: killed at any moment it loses what is younger than the interval, and never the file. */
#include <math.h>
#include <signal.h>
#include <string.h>
#include <sys/types.h>
#include <sys/wait.h>

#include <glib/gstdio.h>

#include "plan-edit.h"
#include "plan-read.h"
#include "recovery.h"

#define INTERVAL_MS 100
/* What a loaded machine under a sanitizer may add to it. */
#define SLACK_US (5 * G_USEC_PER_SEC - INTERVAL_MS * 1000)

static const char *program;

static UtDocument *
new_document (void)
{
  g_autoptr (UtPlan) plan = (UtPlan *) ut_plan_new_empty ();

  return ut_document_new (plan);
}

static void
set_title (UtDocument *document, const char *title)
{
  ut_document_apply (document, ut_plan_with_title (ut_document_plan (document), title), title, NULL, "");
}

static guint
n_files (const char *folder, const char *suffix)
{
  g_autoptr (GDir) names = g_dir_open (folder, 0, NULL);
  const char *name;
  guint n = 0;

  while (names != NULL && (name = g_dir_read_name (names)) != NULL)
    n += g_str_has_suffix (name, suffix);
  return n;
}

static void
run_for (guint ms)
{
  gint64 end = g_get_monotonic_time () + 1000 * (gint64) ms;

  while (g_get_monotonic_time () < end)
    {
      g_main_context_iteration (NULL, FALSE);
      g_usleep (2000);
    }
}

static void
wait_for_files (const char *folder, guint n)
{
  for (int i = 0; i < 500 && n_files (folder, ".undertone") != n; i++)
    run_for (10);
  g_assert_cmpuint (n_files (folder, ".undertone"), ==, n);
}

/* A copy comes after a change, and goes when the work is saved, undone or given up. */
static void
test_life (void)
{
  g_autofree char *folder = g_dir_make_tmp ("recovery-XXXXXX", NULL), *path = g_build_filename (folder, "saved.plan", NULL);
  g_autoptr (GFile) file = g_file_new_for_path (path);
  g_autoptr (UtDocument) document = new_document ();
  g_autoptr (GError) error = NULL;
  UtRecovery *recovery = ut_recovery_new (document, folder, INTERVAL_MS);

  run_for (3 * INTERVAL_MS);
  g_assert_cmpuint (n_files (folder, ".undertone"), ==, 0);
  set_title (document, "a");
  wait_for_files (folder, 1);
  g_assert_true (ut_document_undo (document));
  wait_for_files (folder, 0);
  set_title (document, "b");
  wait_for_files (folder, 1);
  g_assert_true (ut_document_save (document, file, FALSE, &error));
  wait_for_files (folder, 0);
  set_title (document, "c");
  wait_for_files (folder, 1);
  /* This program lives: nothing of it is left behind. */
  g_autoptr (GPtrArray) left = ut_recovery_find (folder);
  g_assert_cmpuint (left->len, ==, 0);
  ut_recovery_close (recovery);
  g_assert_cmpuint (n_files (folder, ".undertone"), ==, 0);
  g_object_unref (recovery);
  g_remove (path);
}

/* The program that is killed: a step every few milliseconds, each title the time of its making. */
static G_NORETURN void
edit_for_ever (const char *folder, const char *path)
{
  g_autoptr (GFile) file = g_file_new_for_path (path);
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  g_autoptr (UtDocument) document = ut_document_open (file, faults, NULL);
  g_autoptr (UtRecovery) recovery = ut_recovery_new (document, folder, INTERVAL_MS);

  for (guint step = 0;; step++)
    {
      g_autofree char *title = g_strdup_printf ("%" G_GINT64_FORMAT, g_get_monotonic_time ());

      set_title (document, title);
      /* Now and then it is saved: the file must be whole as well. */
      if (step % 40 == 39)
        ut_document_save (document, NULL, FALSE, NULL);
      run_for (5);
    }
}

static void
test_kills (void)
{
  g_autofree char *folder = g_dir_make_tmp ("recovery-XXXXXX", NULL), *path = g_build_filename (folder, "site.plan", NULL);
  g_autoptr (GFile) file = g_file_new_for_path (path);
  const char *const words[] = { program, "--edit", folder, path, NULL };
  GRand *rand = g_rand_new_with_seed (23);
  guint n_left = 0;

  for (int kill_number = 0; kill_number < 50; kill_number++)
    {
      g_autoptr (UtDocument) start = new_document ();
      g_autoptr (GError) error = NULL;
      g_autoptr (GPtrArray) faults = ut_faults_new ();
      GPid pid;
      gint64 killed_us;

      g_remove (path);
      set_title (start, "0");
      g_assert_true (ut_document_save (start, file, TRUE, &error));
      g_assert_true (g_spawn_async (NULL, (char **) words, NULL, G_SPAWN_DO_NOT_REAP_CHILD, NULL, NULL, &pid, &error));
      g_usleep ((gulong) g_rand_int_range (rand, 50, 700) * 1000);
      kill (pid, SIGKILL);
      killed_us = g_get_monotonic_time ();
      g_assert_cmpint (waitpid (pid, NULL, 0), ==, pid);

      g_autoptr (UtDocument) saved = ut_document_open (file, faults, &error);
      g_assert_no_error (error);
      g_assert_nonnull (saved);
      g_autoptr (GPtrArray) left = ut_recovery_find (folder);
      g_assert_cmpuint (left->len, <=, 1);
      if (left->len == 0)
        continue;
      g_autoptr (UtDocument) recovered = ut_recovery_open (left->pdata[0]);
      g_assert_nonnull (recovered);
      g_assert_true (ut_document_is_modified (recovered));
      g_assert_true (g_file_equal (ut_document_file (recovered), file));
      gint64 age_us = killed_us - g_ascii_strtoll (ut_document_plan (recovered)->title, NULL, 10);
      g_test_message ("killed after its last copy by %" G_GINT64_FORMAT " ms", age_us / 1000);
      g_assert_cmpint (age_us, <, INTERVAL_MS * 1000 + SLACK_US);
      g_assert_true (ut_document_undo (recovered));
      g_assert_false (ut_document_is_modified (recovered));
      n_left++;
      ut_recovery_forget (left->pdata[0]);
    }
  g_assert_cmpuint (n_left, >, 10);
  g_remove (path);
  g_rand_free (rand);
}

int
main (int argc, char **argv)
{
  program = argv[0];
  if (argc == 4 && g_str_equal (argv[1], "--edit"))
    edit_for_ever (argv[2], argv[3]);
  g_test_init (&argc, &argv, NULL);
  g_test_add_func ("/recovery/life", test_life);
  g_test_add_func ("/recovery/kills", test_kills);
  return g_test_run ();
}
