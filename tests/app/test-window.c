/* The real window in this process: gestures, accessible names, layers that are kept, and that nothing outlives its close. */
#include <gtk/gtk.h>

#include "application.h"
#include "plan-read.h"
#include "window.h"

static UtWindow *
open_window (UtApplication *application, const char *name)
{
  g_autofree char *path = g_build_filename (g_getenv ("UT_EXAMPLES"), name, NULL);
  g_autoptr (GFile) file = g_file_new_for_path (path);
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  g_autoptr (UtDocument) document = ut_document_open (file, faults, NULL);
  UtWindow *window;

  g_assert_nonnull (document);
  window = ut_window_new (application, document);
  gtk_window_present (GTK_WINDOW (window));
  gtk_test_widget_wait_for_draw (GTK_WIDGET (window));
  return window;
}

static GtkEventController *
controller_of (GtkWidget *widget, GType type, guint button)
{
  g_autoptr (GListModel) controllers = gtk_widget_observe_controllers (widget);

  for (guint i = 0; i < g_list_model_get_n_items (controllers); i++)
    {
      g_autoptr (GtkEventController) controller = g_list_model_get_item (controllers, i);

      if (G_TYPE_CHECK_INSTANCE_TYPE (controller, type)
          && (button == 0 || gtk_gesture_single_get_button (GTK_GESTURE_SINGLE (controller)) == button))
        return controller; /* the widget holds it */
    }
  g_assert_not_reached ();
}

static void
test_drag_and_close (gconstpointer data)
{
  UtApplication *application = (UtApplication *) data;
  UtWindow *window = open_window (application, "cold-store.undertone");
  UtSheet *sheet = ut_window_sheet (window);
  GtkEventController *drag = controller_of (GTK_WIDGET (sheet), GTK_TYPE_GESTURE_DRAG, GDK_BUTTON_PRIMARY);
  const UtView *view = ut_sheet_view (sheet);
  gpointer window_pointer = window, sheet_pointer = sheet;
  double x_px, y_px;

  g_object_add_weak_pointer (G_OBJECT (window), &window_pointer);
  g_object_add_weak_pointer (G_OBJECT (sheet), &sheet_pointer);
  gtk_test_accessible_assert_role (GTK_ACCESSIBLE (sheet), GTK_ACCESSIBLE_ROLE_IMG);
  gtk_test_accessible_assert_property (GTK_ACCESSIBLE (sheet), GTK_ACCESSIBLE_PROPERTY_LABEL, "Sheet");

  ut_view_to_sheet (view, 60, 24, &x_px, &y_px);
  g_signal_emit_by_name (drag, "drag-begin", x_px, y_px);
  for (int i = 1; i <= 5; i++)
    {
      g_signal_emit_by_name (drag, "drag-update", 4.0 * i, -2.0 * i);
      gtk_test_widget_wait_for_draw (GTK_WIDGET (sheet));
    }
  g_signal_emit_by_name (drag, "drag-end", 20.0, -10.0);
  g_assert_cmpstr (ut_document_undo_label (ut_desk_document (ut_window_desk (window))), ==, "Move C3");
  gtk_widget_activate_action (GTK_WIDGET (window), "win.undo", NULL);
  g_assert_false (ut_document_is_modified (ut_desk_document (ut_window_desk (window))));

  gtk_window_close (GTK_WINDOW (window));
  for (int i = 0; i < 100 && (window_pointer != NULL || sheet_pointer != NULL); i++)
    g_main_context_iteration (NULL, i % 10 == 9);
  g_assert_null (window_pointer);
  g_assert_null (sheet_pointer);
}

/* The picture drawn is the same whether layers were kept or made anew. */
static void
test_kept_layers (gconstpointer data)
{
  UtWindow *window = open_window ((UtApplication *) data, "clinic-one-channel.undertone");
  UtSheet *sheet = ut_window_sheet (window);
  cairo_surface_t *pictures[2];

  for (int i = 0; i < 2; i++)
    {
      g_autoptr (GdkPaintable) paintable = gtk_widget_paintable_new (GTK_WIDGET (sheet));
      GtkSnapshot *snapshot = gtk_snapshot_new ();
      int width = gtk_widget_get_width (GTK_WIDGET (sheet)), height = gtk_widget_get_height (GTK_WIDGET (sheet));
      cairo_t *cr;

      if (i == 1)
        ut_sheet_forget_layers (sheet);
      gtk_test_widget_wait_for_draw (GTK_WIDGET (sheet));
      gdk_paintable_snapshot (paintable, snapshot, width, height);
      g_autoptr (GskRenderNode) node = gtk_snapshot_free_to_node (snapshot);
      g_assert_nonnull (node);
      pictures[i] = cairo_image_surface_create (CAIRO_FORMAT_RGB24, width, height);
      cr = cairo_create (pictures[i]);
      gsk_render_node_draw (node, cr);
      cairo_destroy (cr);
    }
  g_assert_cmpmem (cairo_image_surface_get_data (pictures[0]),
                   (gsize) cairo_image_surface_get_stride (pictures[0]) * (gsize) cairo_image_surface_get_height (pictures[0]),
                   cairo_image_surface_get_data (pictures[1]),
                   (gsize) cairo_image_surface_get_stride (pictures[1]) * (gsize) cairo_image_surface_get_height (pictures[1]));
  cairo_surface_destroy (pictures[0]);
  cairo_surface_destroy (pictures[1]);
  gtk_window_close (GTK_WINDOW (window));
}

int
main (int argc, char **argv)
{
  g_autoptr (UtApplication) application = NULL;
  int status;

  gtk_test_init (&argc, &argv, NULL);
  application = ut_application_new ();
  g_assert_true (g_application_register (G_APPLICATION (application), NULL, NULL));
  g_test_add_data_func ("/window/drag-and-close", application, test_drag_and_close);
  g_test_add_data_func ("/window/kept-layers", application, test_kept_layers);
  status = g_test_run ();
  return status;
}
