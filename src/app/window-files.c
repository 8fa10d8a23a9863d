/* Opening, saving, closing. */
#include "window-private.h"

#include <glib/gi18n.h>

#include "commissioning.h"
#include "compat.h"
#include "page-file.h"
#include "plan-read.h"

#define SUFFIX ".undertone"
#define RECENT_MOST 8

static void
remember (GFile *file)
{
  g_autofree char *uri = g_file_get_uri (file);
  char *no_groups[] = { NULL };
  GtkRecentData data = {
    .mime_type = (char *) UT_PLAN_MEDIA_TYPE,
    .app_name = (char *) "Undertone",
    .app_exec = (char *) "undertone %f",
    .groups = no_groups,
  };

  gtk_recent_manager_add_full (gtk_recent_manager_get_default (), uri, &data);
}

static void
tell_faults (GtkWindow *parent, GFile *file, const GPtrArray *faults, const GError *error)
{
  g_autofree char *name = g_file_get_basename (file);
  g_autofree char *heading = g_strdup_printf (_ ("“%s” cannot be opened"), name);
  GString *text = g_string_new (error != NULL ? error->message : NULL);
  guint shown = MIN (faults->len, 6);

  for (guint i = 0; i < shown; i++)
    {
      const UtFault *fault = faults->pdata[i];
      g_string_append_printf (text, "%s%s%s%s", i > 0 ? "\n" : "", fault->path, fault->path[0] != '\0' ? ": " : "", fault->message);
    }
  if (shown < faults->len)
    g_string_append_printf (text, _ ("\nand %u more"), faults->len - shown);
  ut_compat_tell (parent, heading, text->str);
  g_string_free (text, TRUE);
}

/* Nothing was done in it yet: its place may be taken. */
static gboolean
is_untouched (UtWindow *window)
{
  UtDocument *document = ut_desk_document (window->desk);

  return ut_document_file (document) == NULL && !ut_document_is_modified (document) && ut_document_undo_label (document) == NULL
         && ut_document_redo_label (document) == NULL;
}

static UtWindow *
window_of (UtApplication *application, GFile *file)
{
  for (GList *item = gtk_application_get_windows (GTK_APPLICATION (application)); item != NULL; item = item->next)
    if (UT_IS_WINDOW (item->data))
      {
        GFile *open = ut_document_file (ut_desk_document (UT_WINDOW (item->data)->desk));
        if (open != NULL && g_file_equal (open, file))
          return item->data;
      }
  return NULL;
}

void
ut_window_open_file (UtApplication *application, UtWindow *window, GFile *file)
{
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  g_autoptr (GError) error = NULL;
  g_autoptr (UtDocument) document = NULL;

  if (window_of (application, file) != NULL)
    {
      gtk_window_present (GTK_WINDOW (window_of (application, file)));
      return;
    }
  document = ut_document_open (file, faults, &error);
  if (document == NULL)
    {
      if (window == NULL)
        {
          g_autoptr (UtPlan) plan = (UtPlan *) ut_plan_new_empty ();
          g_autoptr (UtDocument) empty = ut_document_new (plan);

          window = ut_window_new (application, empty);
          gtk_window_present (GTK_WINDOW (window));
        }
      tell_faults (GTK_WINDOW (window), file, faults, error);
      return;
    }
  remember (file);
  if (window != NULL && is_untouched (window))
    ut_window_set_document (window, document);
  else
    window = ut_window_new (application, document);
  gtk_window_present (GTK_WINDOW (window));
}

/* ---- saving ---- */

static gboolean
save_to (UtWindow *self, GFile *file)
{
  UtDocument *document = ut_desk_document (self->desk);
  g_autoptr (GError) error = NULL;

  ut_desk_drop_draft (self->desk);
  if (ut_document_save (document, file, FALSE, &error))
    {
      remember (ut_document_file (document));
      return TRUE;
    }
  if (g_error_matches (error, G_IO_ERROR, G_IO_ERROR_WRONG_ETAG))
    ut_compat_tell (GTK_WINDOW (self),
                    _ ("The file was changed by somebody else"),
                    _ ("Save under another name, or open the file again to see what changed. Nothing was written."));
  else
    ut_compat_tell (GTK_WINDOW (self), _ ("The plan could not be saved"), error->message);
  return FALSE;
}

static void
save_chosen (GFile *file, gpointer self)
{
  gboolean saved = save_to (self, file);

  if (saved && UT_WINDOW (self)->closing)
    gtk_window_close (self);
  UT_WINDOW (self)->closing = FALSE;
}

static void
save_as (UtWindow *self)
{
  GFile *file = ut_document_file (ut_desk_document (self->desk));
  g_autofree char *name = file != NULL ? g_file_get_basename (file) : g_strconcat (_ ("plan"), SUFFIX, NULL);

  ut_compat_choose_file (GTK_WINDOW (self), TRUE, _ ("Save Plan"), name, SUFFIX, save_chosen, self);
}

static void
save_cb (GSimpleAction *action, GVariant *parameter, gpointer data)
{
  UtWindow *self = data;

  (void) action;
  (void) parameter;
  if (ut_document_file (ut_desk_document (self->desk)) != NULL)
    save_to (self, NULL);
  else
    save_as (self);
}

static void
save_as_cb (GSimpleAction *action, GVariant *parameter, gpointer self)
{
  (void) action;
  (void) parameter;
  save_as (self);
}

/* For drivers and scripts: saves under the given path without asking. */
static void
save_to_cb (GSimpleAction *action, GVariant *parameter, gpointer self)
{
  g_autoptr (GFile) file = g_file_new_for_path (g_variant_get_string (parameter, NULL));

  (void) action;
  save_to (self, file);
}

static void
page_chosen (GFile *file, gpointer data)
{
  UtWindow *self = data;
  UtStudy *study = ut_desk_answer (self->desk);
  GFile *plan_file = ut_document_file (ut_desk_document (self->desk));
  g_autofree char *name = plan_file != NULL ? g_file_get_basename (plan_file) : NULL;
  g_autofree char *path = g_file_get_path (file);
  UtPageSetup setup = { .paper = UT_PAPER_A4, .orientation = UT_LANDSCAPE, .file_name = name };
  g_autoptr (GError) error = NULL;

  if (study == NULL)
    ut_compat_tell (GTK_WINDOW (self), _ ("The page could not be saved"), _ ("The answer is still being computed; try again in a moment."));
  else if (path == NULL)
    ut_compat_tell (GTK_WINDOW (self), _ ("The page could not be saved"), _ ("Only a local file can be written."));
  else if (!ut_page_write_file (study, &setup, path, &error))
    ut_compat_tell (GTK_WINDOW (self), _ ("The page could not be saved"), error->message);
}

static void
save_page_cb (GSimpleAction *action, GVariant *parameter, gpointer self)
{
  (void) action;
  (void) parameter;
  ut_compat_choose_file (self, TRUE, _ ("Save Page"), "page.pdf", ".pdf", page_chosen, self);
}

/* What is typed into the radios, as CSV or JSON by the name's ending. */
static void
powers_chosen (GFile *file, gpointer data)
{
  UtWindow *self = data;
  UtStudy *study = ut_desk_answer (self->desk);
  g_autofree char *path = g_file_get_path (file), *text = NULL;
  g_autoptr (GError) error = NULL;
  UtCommissioning commissioning;

  if (study == NULL || path == NULL)
    {
      ut_compat_tell (GTK_WINDOW (self), _ ("The power sheet could not be saved"),
                      study == NULL ? _ ("The answer is still being computed; try again in a moment.") : _ ("Only a local file can be written."));
      return;
    }
  ut_commissioning_make (study, &commissioning);
  text = g_str_has_suffix (path, ".json") ? ut_report_powers_json (&commissioning, 1) : ut_report_powers_csv (&commissioning, 1);
  ut_commissioning_clear (&commissioning);
  if (!g_file_set_contents (path, text, -1, &error))
    ut_compat_tell (GTK_WINDOW (self), _ ("The power sheet could not be saved"), error->message);
}

static void
save_powers_cb (GSimpleAction *action, GVariant *parameter, gpointer self)
{
  (void) action;
  (void) parameter;
  ut_compat_choose_file (self, TRUE, _ ("Save Power Sheet"), "powers.csv", ".csv", powers_chosen, self);
}

/* For drivers and scripts: at this path, without asking. */
static void
powers_to_cb (GSimpleAction *action, GVariant *parameter, gpointer self)
{
  g_autoptr (GFile) file = g_file_new_for_path (g_variant_get_string (parameter, NULL));

  (void) action;
  powers_chosen (file, self);
}

/* ---- opening ---- */

static void
open_chosen (GFile *file, gpointer self)
{
  ut_window_open_file (UT_APPLICATION (gtk_window_get_application (self)), self, file);
}

static void
open_cb (GSimpleAction *action, GVariant *parameter, gpointer self)
{
  (void) action;
  (void) parameter;
  ut_compat_choose_file (self, FALSE, _ ("Open Plan"), NULL, SUFFIX, open_chosen, self);
}

static void
open_uri_cb (GSimpleAction *action, GVariant *parameter, gpointer self)
{
  g_autoptr (GFile) file = g_file_new_for_uri (g_variant_get_string (parameter, NULL));

  (void) action;
  open_chosen (file, self);
}

static void
start_new_cb (GSimpleAction *action, GVariant *parameter, gpointer data)
{
  UtWindow *self = data;

  (void) action;
  (void) parameter;
  gtk_stack_set_visible_child_name (self->pages, "work");
  gtk_widget_grab_focus (GTK_WIDGET (self->sheet));
}

/* An example by its name becomes a plan that was never saved. */
static void
open_example_cb (GSimpleAction *action, GVariant *name, gpointer data)
{
  UtWindow *self = data;
  g_autofree char *path = g_strconcat (UT_EXAMPLES_PATH, g_variant_get_string (name, NULL), NULL);
  g_autoptr (GBytes) text = g_resources_lookup_data (path, G_RESOURCE_LOOKUP_FLAGS_NONE, NULL);
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  g_autoptr (UtPlan) plan = text != NULL ? (UtPlan *) ut_plan_read (g_bytes_get_data (text, NULL), g_bytes_get_size (text), faults) : NULL;
  g_autoptr (UtDocument) document = plan != NULL ? ut_document_new (plan) : NULL;

  (void) action;
  if (document == NULL)
    return;
  if (is_untouched (self))
    ut_window_set_document (self, document);
  else
    gtk_window_present (GTK_WINDOW (ut_window_new (UT_APPLICATION (gtk_window_get_application (data)), document)));
  gtk_widget_grab_focus (GTK_WIDGET (self->sheet));
}

void
ut_window_fill_recent (UtWindow *self)
{
  GList *items = gtk_recent_manager_get_items (gtk_recent_manager_get_default ());
  guint n = 0;

  g_menu_remove_all (self->recent_menu);
  for (GList *item = items; item != NULL && n < RECENT_MOST; item = item->next)
    if (g_strcmp0 (gtk_recent_info_get_mime_type (item->data), UT_PLAN_MEDIA_TYPE) == 0 && gtk_recent_info_exists (item->data))
      {
        g_autoptr (GMenuItem) entry = g_menu_item_new (gtk_recent_info_get_display_name (item->data), NULL);

        g_menu_item_set_action_and_target (entry, "win.open-uri", "s", gtk_recent_info_get_uri (item->data));
        g_menu_append_item (self->recent_menu, entry);
        n++;
      }
  g_list_free_full (items, (GDestroyNotify) gtk_recent_info_unref);
}

/* ---- the file and copies of unsaved work ---- */

void
ut_window_show_notice (UtWindow *self, const char *text, gboolean reload)
{
  gtk_label_set_text (self->notice_label, text);
  gtk_widget_set_tooltip_text (GTK_WIDGET (self->notice_label), text);
  gtk_widget_set_visible (self->notice_reload, reload);
  gtk_widget_set_visible (self->notice, TRUE);
}

static void
close_notice_cb (GSimpleAction *action, GVariant *parameter, gpointer self)
{
  (void) action;
  (void) parameter;
  gtk_widget_set_visible (UT_WINDOW (self)->notice, FALSE);
}

static void
reload_cb (GSimpleAction *action, GVariant *parameter, gpointer data)
{
  UtWindow *self = data;
  UtDocument *document = ut_desk_document (self->desk);
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  g_autoptr (GError) error = NULL;

  (void) action;
  (void) parameter;
  ut_desk_drop_draft (self->desk);
  if (ut_document_file (document) == NULL)
    return;
  if (ut_document_reload (document, _ ("Reload"), faults, &error))
    gtk_widget_set_visible (self->notice, FALSE);
  else
    tell_faults (GTK_WINDOW (self), ut_document_file (document), faults, error);
}

/* What the state of the file asks for; nothing is said twice. */
static void
look_at_file (UtWindow *self)
{
  switch (ut_document_file_state (ut_desk_document (self->desk)))
    {
    case UT_FILE_CHANGED:
      ut_window_show_notice (self, _ ("Another program has changed the file. Reload shows its version; Undo brings yours back."), TRUE);
      break;
    case UT_FILE_MISSING:
      ut_window_show_notice (self, _ ("The file is no longer there. Save writes it again."), FALSE);
      break;
    case UT_FILE_READ_ONLY:
      ut_window_show_notice (self, _ ("This file cannot be written to. Save As keeps what you change."), FALSE);
      break;
    case UT_FILE_SAME:
      if (gtk_widget_get_visible (self->notice_reload))
        gtk_widget_set_visible (self->notice, FALSE);
      break;
    case UT_FILE_NONE:
      break;
    }
}

static void
file_changed_cb (GFileMonitor *monitor, GFile *file, GFile *other, GFileMonitorEvent event, UtWindow *self)
{
  (void) monitor;
  (void) file;
  (void) other;
  if (event == G_FILE_MONITOR_EVENT_CHANGES_DONE_HINT || event == G_FILE_MONITOR_EVENT_DELETED || event == G_FILE_MONITOR_EVENT_RENAMED
      || event == G_FILE_MONITOR_EVENT_MOVED_IN || event == G_FILE_MONITOR_EVENT_MOVED_OUT)
    look_at_file (self);
}

static void
watch_file (UtWindow *self)
{
  GFile *file = ut_document_file (ut_desk_document (self->desk));

  g_clear_object (&self->monitor);
  gtk_widget_set_visible (self->notice, FALSE);
  if (file == NULL)
    return;
  self->monitor = g_file_monitor_file (file, G_FILE_MONITOR_WATCH_MOVES, NULL, NULL);
  if (self->monitor != NULL)
    g_signal_connect_object (self->monitor, "changed", G_CALLBACK (file_changed_cb), self, 0);
  look_at_file (self);
}

void
ut_window_stop_watching (UtWindow *self)
{
  g_clear_object (&self->monitor);
  if (self->recovery != NULL)
    ut_recovery_close (self->recovery);
  g_clear_object (&self->recovery);
}

void
ut_window_watch_document (UtWindow *self)
{
  g_autofree char *folder = ut_recovery_folder ();
  UtDocument *document = ut_desk_document (self->desk);

  ut_window_stop_watching (self);
  self->recovery = ut_recovery_new (document, folder, UT_RECOVERY_MS);
  ut_recovery_write_now (self->recovery);
  g_signal_connect_object (document, "notify::file", G_CALLBACK (watch_file), self, G_CONNECT_SWAPPED);
  watch_file (self);
}

gboolean
ut_window_recover (UtApplication *application)
{
  g_autofree char *folder = ut_recovery_folder ();
  g_autoptr (GPtrArray) left = ut_recovery_find (folder);
  gboolean any = FALSE;

  for (guint i = 0; i < left->len; i++)
    {
      g_autoptr (UtDocument) document = ut_recovery_open (left->pdata[i]);
      UtWindow *window;

      if (document == NULL)
        continue; /* it stays for a program that can read it */
      window = ut_window_new (application, document);
      ut_recovery_forget (left->pdata[i]);
      ut_window_show_notice (window, _ ("Unsaved work was recovered. Undo shows the plan as it was saved."), FALSE);
      gtk_window_present (GTK_WINDOW (window));
      any = TRUE;
    }
  return any;
}

/* ---- closing ---- */

static void
close_answered (UtAnswer answer, gpointer data)
{
  UtWindow *self = data;

  switch (answer)
    {
    case UT_ANSWER_CANCEL:
      break;
    case UT_ANSWER_DISCARD:
      self->closing = TRUE;
      gtk_window_close (GTK_WINDOW (self));
      break;
    case UT_ANSWER_SAVE:
      self->closing = ut_document_file (ut_desk_document (self->desk)) == NULL;
      if (self->closing)
        save_as (self);
      else if (save_to (self, NULL))
        gtk_window_close (GTK_WINDOW (self));
      break;
    }
}

gboolean
ut_window_asks_before_closing (UtWindow *self)
{
  UtDocument *document = ut_desk_document (self->desk);
  GFile *file = ut_document_file (document);
  g_autofree char *name = file != NULL ? g_file_get_basename (file) : g_strdup (_ ("New Plan"));

  ut_desk_drop_draft (self->desk);
  if (self->closing || !ut_document_is_modified (document))
    return FALSE;
  ut_compat_ask_save (GTK_WINDOW (self), name, close_answered, self);
  return TRUE;
}

void
ut_window_add_file_actions (UtWindow *self)
{
  static const GActionEntry actions[] = {
    { .name = "open", .activate = open_cb },       { .name = "open-uri", .activate = open_uri_cb, .parameter_type = "s" },
    { .name = "save", .activate = save_cb },       { .name = "save-as", .activate = save_as_cb },
    { .name = "save-to", .activate = save_to_cb, .parameter_type = "s" }, { .name = "save-page", .activate = save_page_cb },
    { .name = "save-powers", .activate = save_powers_cb }, { .name = "powers-to", .activate = powers_to_cb, .parameter_type = "s" },
    { .name = "start-new", .activate = start_new_cb }, { .name = "open-example", .activate = open_example_cb, .parameter_type = "s" },
    { .name = "reload", .activate = reload_cb },   { .name = "close-notice", .activate = close_notice_cb },
  };

  g_action_map_add_action_entries (G_ACTION_MAP (self), actions, G_N_ELEMENTS (actions), self);
}
