#include "recovery.h"

#include <errno.h>
#include <fcntl.h>
#include <string.h>
#include <unistd.h>

#include <glib/gi18n.h>
#include <glib/gstdio.h>

#include "plan-read.h"
#include "plan-write.h"

#define PLAN_SUFFIX ".undertone"
#define ORIGIN_SUFFIX ".origin"
#define LOCK_SUFFIX ".lock"

/* What the object and the thread that writes share: whoever holds the lock may touch the files. */
typedef struct
{
  GMutex lock;
  gboolean closed;
  char *plan_path, *origin_path;
} Files;

struct _UtRecovery
{
  GObject parent;
  UtDocument *document;
  Files *files;
  guint interval_ms, timeout;
  gboolean writing;
};

G_DEFINE_FINAL_TYPE (UtRecovery, ut_recovery, G_TYPE_OBJECT)

char *
ut_recovery_folder (void)
{
  return g_build_filename (g_get_user_state_dir (), "undertone", "recovery", NULL);
}

/* ---- who is alive ---- */

static gboolean
take_lock (int file)
{
  struct flock lock = { .l_type = F_WRLCK, .l_whence = SEEK_SET };

  return fcntl (file, F_SETLK, &lock) == 0;
}

/* Names of this program's files in the folder begin with this.  Its lock is held as long as the program lives: the system gives it back, however the program
 * ends. */
static const char *
own_prefix (const char *folder)
{
  static char *prefix;
  static GMutex guard;

  g_mutex_lock (&guard);
  if (prefix == NULL)
    {
      prefix = g_strdup_printf ("%d-%" G_GINT64_FORMAT, (int) getpid (), g_get_real_time ());
      g_autofree char *name = g_strconcat (prefix, LOCK_SUFFIX, NULL), *path = g_build_filename (folder, name, NULL);
      int file;

      g_mkdir_with_parents (folder, 0700);
      file = g_open (path, O_RDWR | O_CREAT | O_CLOEXEC, 0600);
      if (file >= 0)
        take_lock (file); /* open till the end */
    }
  g_mutex_unlock (&guard);
  return prefix;
}

static gboolean
is_dead (const char *lock_path)
{
  int file = g_open (lock_path, O_RDWR | O_CLOEXEC, 0);
  gboolean dead = file >= 0 && take_lock (file);

  if (file >= 0)
    close (file);
  return dead;
}

/* ---- writing ---- */

static void
files_clear (gpointer data)
{
  Files *files = data;

  g_mutex_clear (&files->lock);
  g_free (files->plan_path);
  g_free (files->origin_path);
}

static void
files_unref (Files *files)
{
  g_atomic_rc_box_release_full (files, files_clear);
}

typedef struct
{
  Files *files;
  const UtPlan *plan;
  char *origin;
} Job;

static void
job_free (gpointer data)
{
  Job *job = data;

  files_unref (job->files);
  ut_plan_unref (job->plan);
  g_free (job->origin);
  g_free (job);
}

static void
write_job (Job *job)
{
  gsize length;
  g_autofree char *text = ut_plan_write (job->plan, &length);

  g_mutex_lock (&job->files->lock);
  if (!job->files->closed && g_file_set_contents_full (job->files->origin_path, job->origin, -1, G_FILE_SET_CONTENTS_CONSISTENT, 0600, NULL))
    g_file_set_contents_full (job->files->plan_path, text, (gssize) length, G_FILE_SET_CONTENTS_CONSISTENT, 0600, NULL);
  g_mutex_unlock (&job->files->lock);
}

static void
write_in_thread (GTask *task, gpointer source, gpointer data, GCancellable *cancellable)
{
  (void) source;
  (void) cancellable;
  write_job (data);
  g_task_return_boolean (task, TRUE);
}

static void
remove_files (Files *files)
{
  g_mutex_lock (&files->lock);
  g_remove (files->plan_path);
  g_remove (files->origin_path);
  g_mutex_unlock (&files->lock);
}

static void watch (UtRecovery *self);

static void
written_cb (GObject *source, GAsyncResult *result, gpointer data)
{
  UtRecovery *self = UT_RECOVERY (source);
  const UtPlan *written = data;

  (void) result;
  self->writing = FALSE;
  if (self->document != NULL && !ut_document_is_modified (self->document))
    remove_files (self->files);
  else if (self->document != NULL && ut_document_plan (self->document) != written)
    watch (self);
  ut_plan_unref (written);
}

static Job *
job_new (UtRecovery *self)
{
  GFile *file = ut_document_file (self->document);
  Job *job = g_new (Job, 1);

  *job = (Job){ g_atomic_rc_box_acquire (self->files), ut_plan_ref (ut_document_plan (self->document)), file != NULL ? g_file_get_uri (file) : g_strdup ("") };
  return job;
}

void
ut_recovery_write_now (UtRecovery *self)
{
  Job *job;

  if (self->document == NULL || !ut_document_is_modified (self->document))
    return;
  job = job_new (self);
  write_job (job);
  job_free (job);
}

static gboolean
write_cb (gpointer data)
{
  UtRecovery *self = data;
  Job *job = job_new (self);
  g_autoptr (GTask) task = g_task_new (self, NULL, written_cb, (gpointer) ut_plan_ref (job->plan));

  self->timeout = 0;
  self->writing = TRUE;
  g_task_set_task_data (task, job, job_free);
  g_task_run_in_thread (task, write_in_thread);
  return G_SOURCE_REMOVE;
}

/* Changes in a row wait for the first one's time only: what is on disk is never older than that. */
static void
watch (UtRecovery *self)
{
  if (!ut_document_is_modified (self->document))
    {
      g_clear_handle_id (&self->timeout, g_source_remove);
      if (!self->writing)
        remove_files (self->files);
    }
  else if (self->timeout == 0 && !self->writing)
    self->timeout = g_timeout_add (self->interval_ms, write_cb, self);
}

static void
ut_recovery_dispose (GObject *object)
{
  UtRecovery *self = UT_RECOVERY (object);

  g_clear_handle_id (&self->timeout, g_source_remove);
  if (self->files != NULL)
    {
      g_mutex_lock (&self->files->lock);
      self->files->closed = TRUE;
      g_mutex_unlock (&self->files->lock);
      remove_files (self->files);
    }
  g_clear_pointer (&self->files, files_unref);
  g_clear_object (&self->document);
  G_OBJECT_CLASS (ut_recovery_parent_class)->dispose (object);
}

void
ut_recovery_close (UtRecovery *self)
{
  g_object_run_dispose (G_OBJECT (self));
}

static void
ut_recovery_class_init (UtRecoveryClass *class)
{
  G_OBJECT_CLASS (class)->dispose = ut_recovery_dispose;
}

static void
ut_recovery_init (UtRecovery *self)
{
  (void) self;
}

UtRecovery *
ut_recovery_new (UtDocument *document, const char *folder, guint interval_ms)
{
  static guint number;
  UtRecovery *self = g_object_new (UT_TYPE_RECOVERY, NULL);
  g_autofree char *name = g_strdup_printf ("%s-%u", own_prefix (folder), ++number), *path = g_build_filename (folder, name, NULL);

  self->document = g_object_ref (document);
  self->interval_ms = interval_ms;
  self->files = g_atomic_rc_box_new0 (Files);
  g_mutex_init (&self->files->lock);
  self->files->plan_path = g_strconcat (path, PLAN_SUFFIX, NULL);
  self->files->origin_path = g_strconcat (path, ORIGIN_SUFFIX, NULL);
  g_signal_connect_object (document, "changed", G_CALLBACK (watch), self, G_CONNECT_SWAPPED);
  g_signal_connect_object (document, "notify::modified", G_CALLBACK (watch), self, G_CONNECT_SWAPPED);
  watch (self);
  return self;
}

/* ---- finding ---- */

static void
left_free (gpointer data)
{
  UtLeft *left = data;

  g_free (left->plan_path);
  g_clear_object (&left->origin);
  g_free (left);
}

static void
add_left (GPtrArray *found, const char *folder, const char *prefix)
{
  g_autoptr (GDir) names = g_dir_open (folder, 0, NULL);
  const char *name;

  while (names != NULL && (name = g_dir_read_name (names)) != NULL)
    if (g_str_has_prefix (name, prefix) && g_str_has_suffix (name, PLAN_SUFFIX))
      {
        UtLeft *left = g_new0 (UtLeft, 1);
        g_autofree char *stem = g_strndup (name, strlen (name) - strlen (PLAN_SUFFIX));
        g_autofree char *origin_name = g_strconcat (stem, ORIGIN_SUFFIX, NULL), *origin_path = g_build_filename (folder, origin_name, NULL), *uri = NULL;

        left->plan_path = g_build_filename (folder, name, NULL);
        if (g_file_get_contents (origin_path, &uri, NULL, NULL) && uri[0] != '\0')
          left->origin = g_file_new_for_uri (uri);
        g_ptr_array_add (found, left);
      }
}

GPtrArray *
ut_recovery_find (const char *folder)
{
  GPtrArray *found = g_ptr_array_new_with_free_func (left_free);
  g_autoptr (GDir) names = g_dir_open (folder, 0, NULL);
  const char *own = own_prefix (folder), *name;

  while (names != NULL && (name = g_dir_read_name (names)) != NULL)
    {
      g_autofree char *prefix = g_str_has_suffix (name, LOCK_SUFFIX) ? g_strndup (name, strlen (name) - strlen (LOCK_SUFFIX)) : NULL;
      g_autofree char *path = g_build_filename (folder, name, NULL);
      guint before = found->len;

      if (prefix == NULL || g_str_equal (prefix, own) || !is_dead (path))
        continue;
      g_autofree char *dash = g_strconcat (prefix, "-", NULL);
      add_left (found, folder, dash);
      if (found->len == before)
        g_remove (path);
    }
  return found;
}

UtDocument *
ut_recovery_open (const UtLeft *left)
{
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  g_autofree char *text = NULL;
  gsize length;
  UtDocument *document = NULL;
  const UtPlan *plan;

  if (!g_file_get_contents (left->plan_path, &text, &length, NULL))
    return NULL;
  plan = ut_plan_read (text, length, faults);
  if (plan == NULL)
    return NULL;
  if (left->origin != NULL)
    document = ut_document_open (left->origin, faults, NULL);
  if (document == NULL)
    {
      const UtPlan *empty = ut_plan_new_empty ();

      document = ut_document_new (empty);
      ut_plan_unref (empty);
    }
  ut_document_apply (document, plan, _ ("Recover Unsaved Work"), NULL, "");
  return document;
}

void
ut_recovery_forget (const UtLeft *left)
{
  g_autofree char *stem = g_strndup (left->plan_path, strlen (left->plan_path) - strlen (PLAN_SUFFIX)), *origin_path = g_strconcat (stem, ORIGIN_SUFFIX, NULL);

  g_remove (left->plan_path);
  g_remove (origin_path);
}
