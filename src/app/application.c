#include "application.h"

#include <glib/gi18n.h>

#include "compat.h"
#include "document.h"
#include "plan-read.h"
#include "window.h"

struct _UtApplication
{
  GtkApplication parent;
  gboolean recovered; /* what was left unsaved has been looked for */
};

G_DEFINE_FINAL_TYPE (UtApplication, ut_application, GTK_TYPE_APPLICATION)

static UtWindow *
show_empty (UtApplication *self)
{
  g_autoptr (UtPlan) plan = (UtPlan *) ut_plan_new_empty ();
  g_autoptr (UtDocument) document = ut_document_new (plan);
  UtWindow *window = ut_window_new (self, document);

  gtk_window_present (GTK_WINDOW (window));
  return window;
}

/* Once, before anything else is shown. */
static gboolean
recover (UtApplication *self)
{
  if (self->recovered)
    return FALSE;
  self->recovered = TRUE;
  return ut_window_recover (self);
}

static void
ut_application_activate (GApplication *application)
{
  GtkWindow *window = gtk_application_get_active_window (GTK_APPLICATION (application));

  if (window != NULL)
    gtk_window_present (window);
  else if (!recover (UT_APPLICATION (application)))
    ut_window_show_start (show_empty (UT_APPLICATION (application)));
}

static void
ut_application_open (GApplication *application, GFile **files, int n_files, const char *hint)
{
  (void) hint;
  recover (UT_APPLICATION (application));
  for (int i = 0; i < n_files; i++)
    ut_window_open_file (UT_APPLICATION (application), NULL, files[i]);
  /* Not one of them could be read: the message has its window all the same. */
  if (gtk_application_get_windows (GTK_APPLICATION (application)) == NULL)
    show_empty (UT_APPLICATION (application));
}

static void
new_cb (GSimpleAction *action, GVariant *parameter, gpointer self)
{
  (void) action;
  (void) parameter;
  show_empty (self);
}

static void
quit_cb (GSimpleAction *action, GVariant *parameter, gpointer self)
{
  g_autoptr (GList) windows = g_list_copy (gtk_application_get_windows (self));

  (void) action;
  (void) parameter;
  /* Each asks for itself when something is unsaved; the program ends with the last of them. */
  for (GList *item = windows; item != NULL; item = item->next)
    gtk_window_close (item->data);
}

static void
about_cb (GSimpleAction *action, GVariant *parameter, gpointer self)
{
  (void) action;
  (void) parameter;
  gtk_show_about_dialog (gtk_application_get_active_window (self),
                         "program-name",
                         "Undertone",
                         "version",
                         UT_VERSION,
                         "comments",
                         _ ("Lays out a small network whose radios share spectrum: gains, verdict, least powers, one page.\n\n"
                            "Planning figures are estimates; measure before relying on them. Powers, EIRP, spectrum use and exposure are "
                            "subject to local rules and licences."),
                         "license-type",
                         GTK_LICENSE_GPL_3_0,
                         NULL);
}

/* The state is shown at once by every window: they listen to these settings. */
static void
toggle_cb (GSimpleAction *action, GVariant *state, gpointer self)
{
  (void) self;
  g_simple_action_set_state (action, state);
  ut_compat_set_style (g_str_equal (g_action_get_name (G_ACTION (action)), "dark") ? UT_STYLE_DARK : UT_STYLE_CONTRAST,
                       g_variant_get_boolean (state));
}

static void
ut_application_startup (GApplication *application)
{
  static const GActionEntry actions[] = {
    { .name = "new", .activate = new_cb },
    { .name = "quit", .activate = quit_cb },
    { .name = "about", .activate = about_cb },
    { .name = "dark", .state = "false", .change_state = toggle_cb },
    { .name = "contrast", .state = "false", .change_state = toggle_cb },
  };
  static const struct
  {
    const char *action, *keys[3];
  } accelerators[] = {
    { "app.new", { "<Control>n" } },
    { "app.quit", { "<Control>q" } },
    { "win.open", { "<Control>o" } },
    { "win.save", { "<Control>s" } },
    { "win.save-as", { "<Control><Shift>s" } },
    { "win.close", { "<Control>w" } },
    { "win.zoom-in", { "<Control>plus", "<Control>equal" } },
    { "win.zoom-out", { "<Control>minus" } },
    { "win.print", { "<Control>p" } },
    { "win.present", { "F5" } },
    { "win.fit", { "<Control>0" } },
    { "win.show-help-overlay", { "<Control>question" } },
  };

  g_autoptr (GtkCssProvider) style = gtk_css_provider_new ();

  G_APPLICATION_CLASS (ut_application_parent_class)->startup (application);
  gtk_css_provider_load_from_resource (style, "/io/undertone/Undertone/style.css");
  gtk_style_context_add_provider_for_display (gdk_display_get_default (), GTK_STYLE_PROVIDER (style), GTK_STYLE_PROVIDER_PRIORITY_APPLICATION);
  g_action_map_add_action_entries (G_ACTION_MAP (application), actions, G_N_ELEMENTS (actions), application);
  /* None of these is a key that a text field needs for itself; undo and delete are bound in the window, after the fields. */
  for (gsize i = 0; i < G_N_ELEMENTS (accelerators); i++)
    gtk_application_set_accels_for_action (GTK_APPLICATION (application), accelerators[i].action, (const char *const *) accelerators[i].keys);
}

static void
ut_application_class_init (UtApplicationClass *class)
{
  GApplicationClass *application_class = G_APPLICATION_CLASS (class);

  application_class->startup = ut_application_startup;
  application_class->activate = ut_application_activate;
  application_class->open = ut_application_open;
}

static void
ut_application_init (UtApplication *self)
{
  (void) self;
}

UtApplication *
ut_application_new (void)
{
  return g_object_new (UT_TYPE_APPLICATION,
                       "application-id",
                       UT_APPLICATION_ID,
                       "flags",
                       G_APPLICATION_HANDLES_OPEN,
                       "resource-base-path",
                       "/io/undertone/Undertone",
                       NULL);
}
