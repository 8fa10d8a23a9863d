#include "tray.h"

GType
ut_tray_item_get_type (void)
{
  static gsize type;
  static const GEnumValue values[] = {
    { UT_KIND_CELL, "UT_KIND_CELL", "cell" },
    { UT_KIND_TERMINAL, "UT_KIND_TERMINAL", "terminal" },
    { 0, NULL, NULL },
  };

  if (g_once_init_enter (&type))
    g_once_init_leave (&type, g_enum_register_static ("UtTrayItem", values));
  return type;
}

static GdkContentProvider *
prepare_cb (GtkDragSource *source, double x, double y, gpointer kind)
{
  GValue value = G_VALUE_INIT;
  GdkContentProvider *content;

  (void) source;
  (void) x;
  (void) y;
  g_value_init (&value, UT_TYPE_TRAY_ITEM);
  g_value_set_enum (&value, GPOINTER_TO_INT (kind));
  content = gdk_content_provider_new_for_value (&value);
  g_value_unset (&value);
  return content;
}

static void
begin_cb (GtkDragSource *source, GdkDrag *drag, gpointer kind)
{
  g_autoptr (GdkPaintable) picture = gtk_widget_paintable_new (gtk_event_controller_get_widget (GTK_EVENT_CONTROLLER (source)));

  (void) drag;
  (void) kind;
  gtk_drag_source_set_icon (source, picture, 8, 8);
}

void
ut_tray_make_source (GtkWidget *widget, UtRadioKind kind)
{
  GtkDragSource *source = gtk_drag_source_new ();

  gtk_drag_source_set_actions (source, GDK_ACTION_COPY);
  g_signal_connect (source, "prepare", G_CALLBACK (prepare_cb), GINT_TO_POINTER (kind));
  g_signal_connect (source, "drag-begin", G_CALLBACK (begin_cb), GINT_TO_POINTER (kind));
  gtk_widget_add_controller (widget, GTK_EVENT_CONTROLLER (source));
}
