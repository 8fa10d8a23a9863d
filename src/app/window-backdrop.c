/* The window's actions on the picture under the storey. */
#include "window-private.h"

#include <string.h>

#include <glib/gi18n.h>

#include "ask.h"
#include "backdrop-edits.h"
#include "compat.h"

#define ACTION(name) static void name (GSimpleAction *action, GVariant *parameter, gpointer data)

/* Files larger than this are no floor plans. */
#define MOST_BYTES (200 << 20)

static const UtPlan *
plan_of (UtWindow *self)
{
  ut_desk_drop_draft (self->desk);
  return ut_document_plan (ut_desk_document (self->desk));
}

/* A file chosen, waiting for its page to be told. */
typedef struct
{
  UtWindow *window;
  GBytes *file;
  char *name;
} Pages;

static void
take (UtWindow *self, GBytes *file, guint page, const char *name)
{
  UtPicture picture = { 0 };
  g_autoptr (GError) error = NULL;
  const UtPlan *plan;
  gboolean first;

  if (!ut_picture_import (file, page, &picture, &error))
    {
      g_autofree char *heading = g_strdup_printf (_ ("“%s” is no picture that can be read"), name);

      ut_compat_tell (GTK_WINDOW (self), heading, error->message);
      return;
    }
  plan = plan_of (self);
  first = ut_plan_storey (plan, ut_desk_storey (self->desk))->backdrop == NULL;
  ut_desk_apply (self->desk, ut_plan_with_picture (plan, ut_desk_storey (self->desk), &picture), first ? _ ("Add Backdrop") : _ ("Replace Backdrop"), NULL);
  ut_picture_clear (&picture);
  ut_selection_clear (ut_desk_selection (self->desk));
  ut_sheet_fit (self->sheet);
  ut_sheet_set_tool (self->sheet, UT_TOOL_BACKDROP);
  gtk_widget_grab_focus (GTK_WIDGET (self->sheet));
}

static void
pages_free (Pages *pages)
{
  g_bytes_unref (pages->file);
  g_free (pages->name);
  g_free (pages);
}

static void
page_asked (const double *values, gpointer data)
{
  Pages *pages = g_object_get_data (data, "backdrop-pages");

  take (data, pages->file, (guint) values[0] - 1, pages->name);
  g_object_set_data (data, "backdrop-pages", NULL);
}

static void
take_file (GFile *file, gpointer data)
{
  UtWindow *self = data;
  g_autofree char *name = g_file_get_basename (file), *contents = NULL;
  g_autoptr (GError) error = NULL;
  g_autoptr (GBytes) bytes = NULL;
  gsize length = 0;
  guint n_pages;

  if (!g_file_load_contents (file, NULL, &contents, &length, NULL, &error) || length > MOST_BYTES)
    {
      ut_compat_tell (GTK_WINDOW (self), _ ("The picture could not be read"), error != NULL ? error->message : _ ("It is larger than 200 MB."));
      return;
    }
  bytes = g_bytes_new_take (g_steal_pointer (&contents), length);
  n_pages = ut_picture_n_pages (bytes);
  if (n_pages == 1)
    {
      take (self, bytes, 0, name);
      return;
    }
  Pages *pages = g_new (Pages, 1);
  const UtAskRow rows[] = { { _ ("Page"), 1, 1, n_pages, 1, 0 } };
  *pages = (Pages){ self, g_bytes_ref (bytes), g_strdup (name) };
  g_object_set_data_full (data, "backdrop-pages", pages, (GDestroyNotify) pages_free);
  ut_ask_numbers (data, _ ("Which Page?"), _ ("_Take"), rows, 1, page_asked, data);
}

gboolean
ut_window_take_picture (UtWindow *self, GFile *file)
{
  g_autoptr (GFileInfo) info = g_file_query_info (file, G_FILE_ATTRIBUTE_STANDARD_CONTENT_TYPE, G_FILE_QUERY_INFO_NONE, NULL, NULL);
  const char *type = info != NULL ? g_file_info_get_content_type (info) : NULL;
  g_autofree char *media = type != NULL ? g_content_type_get_mime_type (type) : NULL;

  if (media == NULL || !(g_str_has_prefix (media, "image/") || g_str_equal (media, "application/pdf")))
    return FALSE;
  take_file (file, self);
  return TRUE;
}

ACTION (choose_cb)
{
  static const char *const types[] = { "image/*", "application/pdf", NULL };

  (void) action;
  (void) parameter;
  ut_compat_choose_picture (data, _ ("Choose Backdrop"), _ ("Pictures and PDF"), types, take_file, data);
}

/* For drivers and scripts: the file at this path. */
ACTION (take_cb)
{
  g_autoptr (GFile) file = g_file_new_for_path (g_variant_get_string (parameter, NULL));

  (void) action;
  take_file (file, data);
}

static gboolean
has_backdrop (UtWindow *self)
{
  if (ut_plan_storey (plan_of (self), ut_desk_storey (self->desk))->backdrop != NULL)
    return TRUE;
  ut_compat_tell (GTK_WINDOW (self), _ ("This storey has no backdrop"), _ ("Drop a picture or a PDF on the sheet, or choose one in the menu."));
  return FALSE;
}

ACTION (turn_cb)
{
  UtWindow *self = data;

  (void) action;
  if (has_backdrop (self))
    ut_desk_apply (self->desk, ut_plan_with_backdrop_turned (plan_of (self), ut_desk_storey (self->desk), g_variant_get_double (parameter)), _ ("Turn Backdrop"), NULL);
}

ACTION (remove_cb)
{
  UtWindow *self = data;

  (void) action;
  (void) parameter;
  if (has_backdrop (self))
    ut_desk_apply (self->desk, ut_plan_with_backdrop (plan_of (self), ut_desk_storey (self->desk), NULL), _ ("Remove Backdrop"), NULL);
}

void
ut_window_add_backdrop_actions (UtWindow *self)
{
  static const GActionEntry actions[] = {
    { .name = "backdrop-choose", .activate = choose_cb },
    { .name = "backdrop-take", .activate = take_cb, .parameter_type = "s" },
    { .name = "backdrop-turn", .activate = turn_cb, .parameter_type = "d" },
    { .name = "backdrop-remove", .activate = remove_cb },
  };

  g_action_map_add_action_entries (G_ACTION_MAP (self), actions, G_N_ELEMENTS (actions), self);
}
