/* The document and its file: what it tells, what it saves, and what it refuses to overwrite. */
#include <glib/gstdio.h>

#include "document.h"
#include "plan-edit.h"
#include "plan-text.h"

typedef struct
{
  char *directory;
  GFile *file, *other;
  UtDocument *document;
  GString *told; /* names of the notifications since the last look */
} Fixture;

static void
notify_cb (GObject *object, GParamSpec *spec, gpointer user_data)
{
  (void)object;
  g_string_append_printf (user_data, "%s ", spec->name);
}

static void
changed_cb (UtDocument *document, const UtPlan *before, const UtPlan *after, gpointer user_data)
{
  g_assert_true (after == ut_document_plan (document));
  g_assert_true (before != after);
  g_string_append (user_data, "changed ");
}

static void
set_up (Fixture *fixture, gconstpointer data)
{
  (void)data;
  g_autoptr (GError) error = NULL;
  fixture->directory = g_dir_make_tmp ("undertone-XXXXXX", &error);
  g_assert_no_error (error);
  g_autofree char *path = g_build_filename (fixture->directory, "a.undertone", NULL);
  g_autofree char *other = g_build_filename (fixture->directory, "b.undertone", NULL);
  fixture->file = g_file_new_for_path (path);
  fixture->other = g_file_new_for_path (other);
  fixture->told = g_string_new (NULL);
  g_autoptr (UtPlan) plan = (UtPlan *)read_valid (small_plan);
  fixture->document = ut_document_new (plan);
  g_signal_connect (fixture->document, "notify", G_CALLBACK (notify_cb), fixture->told);
  g_signal_connect (fixture->document, "changed", G_CALLBACK (changed_cb), fixture->told);
}

static void
tear_down (Fixture *fixture, gconstpointer data)
{
  (void)data;
  g_object_unref (fixture->document);
  g_file_delete (fixture->file, NULL, NULL);
  g_file_delete (fixture->other, NULL, NULL);
  g_assert_cmpint (g_rmdir (fixture->directory), ==, 0); /* no backups, no leavings */
  g_object_unref (fixture->file);
  g_object_unref (fixture->other);
  g_free (fixture->directory);
  g_string_free (fixture->told, TRUE);
}

static void
assert_told (Fixture *fixture, const char *expected)
{
  g_assert_cmpstr (fixture->told->str, ==, expected);
  g_string_truncate (fixture->told, 0);
}

static void
apply_title (Fixture *fixture, const char *title)
{
  ut_document_apply (fixture->document,
                     ut_plan_with_title (ut_document_plan (fixture->document), title),
                     title,
                     NULL,
                     "C1");
}

static void
assert_file_title (GFile *file, const char *title)
{
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  g_autoptr (GError) error = NULL;
  g_autoptr (UtDocument) document = ut_document_open (file, faults, &error);
  g_assert_no_error (error);
  g_assert_nonnull (document);
  g_assert_false (ut_document_is_modified (document));
  g_assert_true (g_file_equal (ut_document_file (document), file));
  g_assert_cmpstr (ut_document_plan (document)->title, ==, title);
}

static void
save (Fixture *fixture, GFile *file, gboolean force)
{
  g_autoptr (GError) error = NULL;
  g_assert_true (ut_document_save (fixture->document, file, force, &error));
  g_assert_no_error (error);
}

static void
test_steps (Fixture *fixture, gconstpointer data)
{
  (void)data;
  UtDocument *document = fixture->document;
  g_assert_false (ut_document_is_modified (document));
  g_assert_false (ut_document_undo (document));
  assert_told (fixture, "");
  apply_title (fixture, "a");
  assert_told (fixture, "changed modified undo-label ");
  g_assert_cmpstr (ut_document_selection (document), ==, "C1");
  apply_title (fixture, "b");
  assert_told (fixture, "changed undo-label ");
  g_assert_true (ut_document_undo (document));
  assert_told (fixture, "changed undo-label redo-label ");
  g_assert_true (ut_document_undo (document));
  assert_told (fixture, "changed modified undo-label redo-label ");
  g_assert_true (ut_document_redo (document));

  g_autofree char *undo = NULL, *redo = NULL;
  gboolean modified;
  g_object_get (document, "undo-label", &undo, "redo-label", &redo, "modified", &modified, NULL);
  g_assert_cmpstr (undo, ==, "a");
  g_assert_cmpstr (redo, ==, "b");
  g_assert_true (modified);

  /* The present plan once more is no step. */
  g_string_truncate (fixture->told, 0);
  ut_document_apply (document, ut_plan_ref (ut_document_plan (document)), "again", NULL, NULL);
  assert_told (fixture, "");
}

static void
test_save (Fixture *fixture, gconstpointer data)
{
  (void)data;
  UtDocument *document = fixture->document;
  g_assert_null (ut_document_file (document));
  apply_title (fixture, "a");
  g_string_truncate (fixture->told, 0);
  save (fixture, fixture->file, FALSE);
  assert_told (fixture, "file modified ");
  assert_file_title (fixture->file, "a");
  apply_title (fixture, "b");
  save (fixture, NULL, FALSE);
  assert_file_title (fixture->file, "b");

  /* Under another name: the old file stays. */
  apply_title (fixture, "c");
  save (fixture, fixture->other, FALSE);
  g_assert_true (g_file_equal (ut_document_file (document), fixture->other));
  assert_file_title (fixture->file, "b");
  assert_file_title (fixture->other, "c");
}

static void
test_changed_outside (Fixture *fixture, gconstpointer data)
{
  (void)data;
  g_autoptr (GError) error = NULL;
  save (fixture, fixture->file, FALSE);
  g_autofree char *path = g_file_get_path (fixture->file);
  g_autofree char *text = replaced (
      small_plan, "\"undertone\": 1", "\"undertone\": 1, \"title\": \"theirs, longer\"");
  /* A time that differs whatever the clock's grain. */
  g_assert_true (g_file_set_contents (path, text, -1, NULL));
  g_assert_true (g_file_set_attribute_uint64 (fixture->file,
                                              G_FILE_ATTRIBUTE_TIME_MODIFIED,
                                              1000000000,
                                              G_FILE_QUERY_INFO_NONE,
                                              NULL,
                                              NULL));

  apply_title (fixture, "ours");
  g_assert_false (ut_document_save (fixture->document, NULL, FALSE, &error));
  g_assert_error (error, G_IO_ERROR, G_IO_ERROR_WRONG_ETAG);
  g_assert_true (ut_document_is_modified (fixture->document));
  assert_file_title (fixture->file, "theirs, longer");

  save (fixture, NULL, TRUE);
  assert_file_title (fixture->file, "ours");
  apply_title (fixture, "ours again");
  save (fixture, NULL, FALSE);
}

static void
test_failure (Fixture *fixture, gconstpointer data)
{
  (void)data;
  g_autoptr (GError) error = NULL;
  save (fixture, fixture->file, FALSE);
  apply_title (fixture, "b");
  g_string_truncate (fixture->told, 0);
  const UtPlan *plan = ut_document_plan (fixture->document);
  g_autoptr (GFile) nowhere = g_file_new_for_path ("/nonexistent/folder/c.undertone");
  g_assert_false (ut_document_save (fixture->document, nowhere, FALSE, &error));
  g_assert_error (error, G_IO_ERROR, G_IO_ERROR_NOT_FOUND);
  assert_told (fixture, "");
  g_assert_true (ut_document_plan (fixture->document) == plan);
  g_assert_true (ut_document_is_modified (fixture->document));
  g_assert_true (g_file_equal (ut_document_file (fixture->document), fixture->file));
  assert_file_title (fixture->file, "");
}

static void
test_open_faults (Fixture *fixture, gconstpointer data)
{
  (void)data;
  g_autoptr (GError) error = NULL;
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  g_assert_null (ut_document_open (fixture->file, faults, &error));
  g_assert_error (error, G_IO_ERROR, G_IO_ERROR_NOT_FOUND);
  g_clear_error (&error);

  g_autofree char *path = g_file_get_path (fixture->file);
  g_assert_true (g_file_set_contents (path, "{", -1, NULL));
  g_assert_null (ut_document_open (fixture->file, faults, &error));
  g_assert_no_error (error);
  g_assert_cmpuint (faults->len, ==, 1);
}

/* The file's fate is told, and reading it again is a step. */
static void
test_file_state (Fixture *fixture, gconstpointer data)
{
  (void)data;
  UtDocument *document = fixture->document;
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  g_autoptr (GError) error = NULL;
  g_autofree char *path = g_file_get_path (fixture->file);
  g_assert_cmpint (ut_document_file_state (document), ==, UT_FILE_NONE);
  save (fixture, fixture->file, FALSE);
  g_assert_cmpint (ut_document_file_state (document), ==, UT_FILE_SAME);

  g_autoptr (UtDocument) other = ut_document_open (fixture->file, faults, &error);
  ut_document_apply (
      other, ut_plan_with_title (ut_document_plan (other), "theirs"), "theirs", NULL, "");
  g_usleep (20000); /* etags are made of times */
  g_assert_true (ut_document_save (other, NULL, FALSE, &error));
  g_assert_cmpint (ut_document_file_state (document), ==, UT_FILE_CHANGED);
  apply_title (fixture, "mine");
  g_assert_true (ut_document_reload (document, "Reload", faults, &error));
  g_assert_cmpstr (ut_document_plan (document)->title, ==, "theirs");
  g_assert_false (ut_document_is_modified (document));
  g_assert_cmpint (ut_document_file_state (document), ==, UT_FILE_SAME);
  g_assert_true (ut_document_undo (document));
  g_assert_cmpstr (ut_document_plan (document)->title, ==, "mine");
  g_assert_true (ut_document_is_modified (document));

  g_assert_true (g_file_set_contents (path, "{", -1, &error));
  g_assert_false (ut_document_reload (document, "Reload", faults, &error));
  g_assert_cmpuint (faults->len, >, 0);
  g_assert_cmpstr (ut_document_plan (document)->title, ==, "mine");
  g_remove (path);
  g_assert_cmpint (ut_document_file_state (document), ==, UT_FILE_MISSING);
}

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  g_test_add ("/document/steps", Fixture, NULL, set_up, test_steps, tear_down);
  g_test_add ("/document/save", Fixture, NULL, set_up, test_save, tear_down);
  g_test_add ("/document/changed-outside", Fixture, NULL, set_up, test_changed_outside, tear_down);
  g_test_add ("/document/file-state", Fixture, NULL, set_up, test_file_state, tear_down);
  g_test_add ("/document/failure", Fixture, NULL, set_up, test_failure, tear_down);
  g_test_add ("/document/open-faults", Fixture, NULL, set_up, test_open_faults, tear_down);
  return g_test_run ();
}
