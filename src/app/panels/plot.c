#include "plot.h"

#include <string.h>

#include <cairo-svg.h>
#include <glib/gi18n.h>
#include <gio/gio.h>

#include "compat.h"

struct _UtPlot
{
  GtkWidget parent;
  GtkWidget *area, *menu;
  char *name;
  UtPlotPaint paint;
  UtPlotCsv csv;
  UtPlotHover hover;
  gpointer data;
  double text_size;
};

G_DEFINE_FINAL_TYPE (UtPlot, ut_plot, GTK_TYPE_WIDGET)

static void
draw_cb (GtkDrawingArea *area, cairo_t *cr, int width, int height, gpointer data)
{
  UtPlot *self = data;

  (void) area;
  if (self->paint != NULL)
    self->paint (cr, width, height, self->text_size, ut_compat_palette (), self->data);
}

static gboolean
tooltip_cb (GtkWidget *widget, int x, int y, gboolean keyboard, GtkTooltip *tooltip, UtPlot *self)
{
  g_autofree char *text = NULL;

  if (keyboard || self->hover == NULL)
    return FALSE;
  text = self->hover (x, y, gtk_widget_get_width (widget), gtk_widget_get_height (widget), self->text_size, self->data);
  gtk_tooltip_set_text (tooltip, text);
  return text != NULL;
}

/* ---- leaving the screen: on paper colours, at a size that does not depend on the window's ---- */

#define PICTURE_WIDTH 1200.0
#define PICTURE_TEXT 15.0
#define PNG_SCALE 2.0

static double
picture_height (UtPlot *self)
{
  int width = gtk_widget_get_width (self->area), height = gtk_widget_get_height (self->area);

  return width > 0 && height > 0 ? CLAMP (PICTURE_WIDTH * height / width, 300, 1200) : 600;
}

static cairo_status_t
write_cb (void *bytes, const unsigned char *data, unsigned int length)
{
  g_byte_array_append (bytes, data, length);
  return CAIRO_STATUS_SUCCESS;
}

static GBytes *
picture (UtPlot *self, gboolean svg)
{
  GByteArray *bytes = g_byte_array_new ();
  double height = picture_height (self);
  cairo_surface_t *surface = svg ? cairo_svg_surface_create_for_stream (write_cb, bytes, PICTURE_WIDTH, height)
                                 : cairo_image_surface_create (CAIRO_FORMAT_RGB24, (int) (PICTURE_WIDTH * PNG_SCALE), (int) (height * PNG_SCALE));
  cairo_t *cr;

  if (!svg)
    cairo_surface_set_device_scale (surface, PNG_SCALE, PNG_SCALE);
  cr = cairo_create (surface);
  cairo_set_source_rgb (cr, 1, 1, 1);
  cairo_paint (cr);
  self->paint (cr, PICTURE_WIDTH, height, PICTURE_TEXT, &ut_palette_paper, self->data);
  cairo_destroy (cr);
  if (!svg)
    cairo_surface_write_to_png_stream (surface, write_cb, bytes);
  cairo_surface_finish (surface);
  cairo_surface_destroy (surface);
  return g_byte_array_free_to_bytes (bytes);
}

gboolean
ut_plot_save (UtPlot *self, const char *path, GError **error)
{
  g_autoptr (GBytes) bytes = NULL;
  gsize length;
  const char *contents;

  if (g_str_has_suffix (path, ".csv") && self->csv != NULL)
    {
      char *text = self->csv (self->data);

      bytes = g_bytes_new_take (text, strlen (text));
    }
  else if (g_str_has_suffix (path, ".svg") || g_str_has_suffix (path, ".png"))
    bytes = picture (self, g_str_has_suffix (path, ".svg"));
  else
    {
      g_set_error_literal (error, G_IO_ERROR, G_IO_ERROR_INVALID_ARGUMENT, _ ("The ending tells the kind: .svg, .png or .csv is expected."));
      return FALSE;
    }
  contents = g_bytes_get_data (bytes, &length);
  return g_file_set_contents (path, contents, (gssize) length, error);
}

static void
save_chosen (GFile *file, gpointer data)
{
  UtPlot *self = data;
  g_autofree char *path = g_file_get_path (file);
  g_autoptr (GError) error = NULL;

  if (path != NULL && !ut_plot_save (self, path, &error))
    ut_compat_tell (GTK_WINDOW (gtk_widget_get_root (GTK_WIDGET (self))), _ ("The plot could not be saved"), error->message);
}

static void
save_cb (GtkWidget *widget, const char *action, GVariant *parameter)
{
  UtPlot *self = UT_PLOT (widget);
  g_autofree char *name = g_strconcat (self->name, g_variant_get_string (parameter, NULL), NULL);

  (void) action;
  ut_compat_choose_file (GTK_WINDOW (gtk_widget_get_root (widget)), TRUE, _ ("Save Plot"), name, g_variant_get_string (parameter, NULL), save_chosen, self);
}

static void
copy_cb (GtkWidget *widget, const char *action, GVariant *parameter)
{
  UtPlot *self = UT_PLOT (widget);
  g_autoptr (GBytes) png = picture (self, FALSE), svg = picture (self, TRUE), text = NULL;
  GdkContentProvider *providers[3], *all;
  gsize n = 0;

  (void) action;
  (void) parameter;
  providers[n++] = gdk_content_provider_new_for_bytes ("image/png", png);
  providers[n++] = gdk_content_provider_new_for_bytes ("image/svg+xml", svg);
  if (self->csv != NULL)
    {
      char *csv = self->csv (self->data);

      text = g_bytes_new_take (csv, strlen (csv));
      providers[n++] = gdk_content_provider_new_for_bytes ("text/plain;charset=utf-8", text);
    }
  all = gdk_content_provider_new_union (providers, n);
  gdk_clipboard_set_content (gtk_widget_get_clipboard (widget), all);
  g_object_unref (all);
}

static void
pressed_cb (GtkGestureClick *gesture, int n_press, double x, double y, UtPlot *self)
{
  (void) gesture;
  (void) n_press;
  gtk_popover_set_pointing_to (GTK_POPOVER (self->menu), &(GdkRectangle){ (int) x, (int) y, 1, 1 });
  gtk_popover_popup (GTK_POPOVER (self->menu));
}

static void
menu_cb (GtkWidget *widget, const char *action, GVariant *parameter)
{
  (void) action;
  (void) parameter;
  gtk_popover_popup (GTK_POPOVER (UT_PLOT (widget)->menu));
}

static void
ut_plot_dispose (GObject *object)
{
  UtPlot *self = UT_PLOT (object);

  g_clear_pointer (&self->menu, gtk_widget_unparent);
  g_clear_pointer (&self->area, gtk_widget_unparent);
  G_OBJECT_CLASS (ut_plot_parent_class)->dispose (object);
}

static void
ut_plot_finalize (GObject *object)
{
  g_free (UT_PLOT (object)->name);
  G_OBJECT_CLASS (ut_plot_parent_class)->finalize (object);
}

static void
ut_plot_class_init (UtPlotClass *class)
{
  GtkWidgetClass *widget_class = GTK_WIDGET_CLASS (class);

  G_OBJECT_CLASS (class)->dispose = ut_plot_dispose;
  G_OBJECT_CLASS (class)->finalize = ut_plot_finalize;
  gtk_widget_class_set_layout_manager_type (widget_class, GTK_TYPE_BIN_LAYOUT);
  gtk_widget_class_set_accessible_role (widget_class, GTK_ACCESSIBLE_ROLE_IMG);
  gtk_widget_class_install_action (widget_class, "plot.copy", NULL, copy_cb);
  gtk_widget_class_install_action (widget_class, "plot.save", "s", save_cb);
  gtk_widget_class_install_action (widget_class, "plot.menu", NULL, menu_cb);
  gtk_widget_class_add_binding_action (widget_class, GDK_KEY_Menu, 0, "plot.menu", NULL);
  gtk_widget_class_add_binding_action (widget_class, GDK_KEY_F10, GDK_SHIFT_MASK, "plot.menu", NULL);
  gtk_widget_class_add_binding_action (widget_class, GDK_KEY_c, GDK_CONTROL_MASK, "plot.copy", NULL);
}

static void
ut_plot_init (UtPlot *self)
{
  GtkGesture *click = gtk_gesture_click_new ();
  g_autoptr (GMenu) menu = g_menu_new (), ways = g_menu_new ();

  self->text_size = 11;
  self->area = gtk_drawing_area_new ();
  gtk_drawing_area_set_draw_func (GTK_DRAWING_AREA (self->area), draw_cb, self, NULL);
  gtk_widget_set_has_tooltip (self->area, TRUE);
  g_signal_connect (self->area, "query-tooltip", G_CALLBACK (tooltip_cb), self);
  gtk_widget_set_parent (self->area, GTK_WIDGET (self));
  gtk_widget_set_focusable (GTK_WIDGET (self), TRUE);
  gtk_widget_set_hexpand (GTK_WIDGET (self), TRUE);
  gtk_widget_set_vexpand (GTK_WIDGET (self), TRUE);
  g_menu_append (menu, _ ("_Copy"), "plot.copy");
  g_menu_append (ways, _ ("Save as _SVG…"), "plot.save::.svg");
  g_menu_append (ways, _ ("Save as _PNG…"), "plot.save::.png");
  g_menu_append (ways, _ ("Save Figures as _CSV…"), "plot.save::.csv");
  g_menu_append_section (menu, NULL, G_MENU_MODEL (ways));
  self->menu = gtk_popover_menu_new_from_model (G_MENU_MODEL (menu));
  gtk_popover_set_has_arrow (GTK_POPOVER (self->menu), FALSE);
  gtk_widget_set_halign (self->menu, GTK_ALIGN_START);
  gtk_widget_set_parent (self->menu, GTK_WIDGET (self));
  gtk_gesture_single_set_button (GTK_GESTURE_SINGLE (click), GDK_BUTTON_SECONDARY);
  g_signal_connect (click, "pressed", G_CALLBACK (pressed_cb), self);
  gtk_widget_add_controller (GTK_WIDGET (self), GTK_EVENT_CONTROLLER (click));
}

void
ut_plot_set_up (UtPlot *self, const char *name, UtPlotPaint paint, UtPlotCsv csv, UtPlotHover hover, gpointer data)
{
  g_free (self->name);
  self->name = g_strdup (name);
  self->paint = paint;
  self->csv = csv;
  self->hover = hover;
  self->data = data;
}

void
ut_plot_set_text_size (UtPlot *self, double text_size)
{
  self->text_size = text_size;
  gtk_widget_queue_draw (self->area);
}

double
ut_plot_text_size (UtPlot *self)
{
  return self->text_size;
}

void
ut_plot_changed (UtPlot *self, const char *description)
{
  gtk_widget_queue_draw (self->area);
  gtk_accessible_update_property (GTK_ACCESSIBLE (self), GTK_ACCESSIBLE_PROPERTY_LABEL, description, -1);
}
