#include "tray.h"

#include <math.h>

#include <glib/gi18n.h>

GType
ut_tray_item_get_type (void)
{
  static gsize type;
  static const GEnumValue values[] = { { 0, "UT_TRAY_ITEM", "item" }, { 0, NULL, NULL } };

  if (g_once_init_enter (&type))
    g_once_init_leave (&type, g_enum_register_static ("UtTrayItem", values));
  return type;
}

static GdkContentProvider *
prepare_cb (GtkDragSource *source, double x, double y, gpointer index)
{
  GValue value = G_VALUE_INIT;
  GdkContentProvider *content;

  (void) source;
  (void) x;
  (void) y;
  g_value_init (&value, UT_TYPE_TRAY_ITEM);
  g_value_set_enum (&value, GPOINTER_TO_INT (index));
  content = gdk_content_provider_new_for_value (&value);
  g_value_unset (&value);
  return content;
}

static void
begin_cb (GtkDragSource *source, GdkDrag *drag, gpointer index)
{
  g_autoptr (GdkPaintable) picture = gtk_widget_paintable_new (gtk_event_controller_get_widget (GTK_EVENT_CONTROLLER (source)));

  (void) drag;
  (void) index;
  gtk_drag_source_set_icon (source, picture, 8, 8);
}

static void
make_source (GtkWidget *widget, guint index)
{
  GtkDragSource *source = gtk_drag_source_new ();

  gtk_drag_source_set_actions (source, GDK_ACTION_COPY);
  g_signal_connect (source, "prepare", G_CALLBACK (prepare_cb), GUINT_TO_POINTER (index));
  g_signal_connect (source, "drag-begin", G_CALLBACK (begin_cb), GUINT_TO_POINTER (index));
  gtk_widget_add_controller (widget, GTK_EVENT_CONTROLLER (source));
}

static char *
tip (const UtPreset *preset)
{
  if (preset->plan != NULL)
    return g_strdup_printf (_ ("%s: a preset of your own. Drag it onto the sheet."), preset->name);
  if (!isnan (preset->height_m))
    return g_strdup_printf (_ ("A terminal %g m above the floor. Drag it onto the sheet."), preset->height_m);
  return g_strdup (preset->kind == UT_KIND_CELL ? _ ("Drag onto the sheet to place a cell") : _ ("Drag onto the sheet to place a terminal"));
}

static void
fill (GtkBox *box, UtPresets *presets)
{
  GtkWidget *child;

  while ((child = gtk_widget_get_first_child (GTK_WIDGET (box))) != NULL)
    gtk_box_remove (box, child);
  for (guint i = 0; i < ut_presets_count (presets); i++)
    {
      const UtPreset *preset = ut_presets_get (presets, i);
      g_autofree char *text = g_strconcat (preset->kind == UT_KIND_CELL ? "■ " : "○ ", preset->name, NULL), *tooltip = NULL;
      GtkWidget *label = gtk_label_new (text);

      tooltip = tip (preset);
      gtk_label_set_ellipsize (GTK_LABEL (label), PANGO_ELLIPSIZE_END);
      gtk_label_set_width_chars (GTK_LABEL (label), 12);
      gtk_label_set_max_width_chars (GTK_LABEL (label), 12);
      gtk_label_set_xalign (GTK_LABEL (label), 0);
      gtk_widget_set_tooltip_text (label, tooltip);
      gtk_widget_add_css_class (label, "tray-item");
      make_source (label, i);
      gtk_box_append (box, label);
    }
}

static void
changed_cb (UtPresets *presets, GtkBox *box)
{
  fill (box, presets);
}

void
ut_tray_fill (GtkBox *box, UtPresets *presets)
{
  g_signal_connect_object (presets, "changed", G_CALLBACK (changed_cb), box, 0);
  fill (box, presets);
}
