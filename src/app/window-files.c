/* Opening, saving, closing. */
#include "window-private.h"

#include <glib/gi18n.h>

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

void
ut_window_add_file_actions (UtWindow *self)
{
  static const GActionEntry actions[] = {
    { .name = "open", .activate = open_cb },       { .name = "open-uri", .activate = open_uri_cb, .parameter_type = "s" },
    { .name = "save", .activate = save_cb },       { .name = "save-as", .activate = save_as_cb },
    { .name = "save-to", .activate = save_to_cb, .parameter_type = "s" }, { .name = "save-page", .activate = save_page_cb },
  };

  g_action_map_add_action_entries (G_ACTION_MAP (self), actions, G_N_ELEMENTS (actions), self);
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
