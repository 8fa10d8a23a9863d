#include "ask.h"

#include <glib/gi18n.h>

typedef struct
{
  GtkWindow *window;
  GtkSpinButton *spins[UT_ASK_MOST];
  guint n;
  UtAsked asked;
  gpointer data;
} Ask;

static void
taken_cb (Ask *ask)
{
  double values[UT_ASK_MOST] = { 0 };

  for (guint i = 0; i < ask->n; i++)
    {
      gtk_spin_button_update (ask->spins[i]);
      values[i] = gtk_spin_button_get_value (ask->spins[i]);
    }
  UtAsked asked = ask->asked;
  gpointer data = ask->data;
  gtk_window_destroy (ask->window);
  asked (values, data);
}

static gboolean
enter_cb (GtkWidget *widget, GVariant *arguments, gpointer ask)
{
  (void) widget;
  (void) arguments;
  taken_cb (ask);
  return TRUE;
}

static gboolean
escape_cb (GtkWidget *widget, GVariant *arguments, gpointer window)
{
  (void) widget;
  (void) arguments;
  gtk_window_destroy (window);
  return TRUE;
}

static void
add_row (Ask *ask, GtkGrid *grid, const UtAskRow *row, guint index)
{
  GtkWidget *label = gtk_label_new (row->label), *spin = gtk_spin_button_new_with_range (row->lowest, row->highest, row->step);

  gtk_label_set_xalign (GTK_LABEL (label), 0);
  gtk_spin_button_set_digits (GTK_SPIN_BUTTON (spin), row->digits);
  gtk_spin_button_set_value (GTK_SPIN_BUTTON (spin), row->value);
  gtk_accessible_update_property (GTK_ACCESSIBLE (spin), GTK_ACCESSIBLE_PROPERTY_LABEL, row->label, -1);
  gtk_grid_attach (grid, label, 0, (int) index, 1, 1);
  gtk_grid_attach (grid, spin, 1, (int) index, 1, 1);
  ask->spins[index] = GTK_SPIN_BUTTON (spin);
}

void
ut_ask_numbers (GtkWindow *parent, const char *title, const char *verb, const UtAskRow *rows, guint n, UtAsked asked, gpointer data)
{
  GtkWidget *window = gtk_window_new (), *box = gtk_box_new (GTK_ORIENTATION_VERTICAL, 12), *grid = gtk_grid_new (), *take = gtk_button_new_with_mnemonic (verb);
  GtkEventController *keys = gtk_shortcut_controller_new ();
  Ask *ask = g_new0 (Ask, 1);

  *ask = (Ask){ .window = GTK_WINDOW (window), .n = MIN (n, UT_ASK_MOST), .asked = asked, .data = data };
  g_object_set_data_full (G_OBJECT (window), "ask", ask, g_free);
  gtk_window_set_title (GTK_WINDOW (window), title);
  gtk_window_set_transient_for (GTK_WINDOW (window), parent);
  gtk_window_set_modal (GTK_WINDOW (window), TRUE);
  gtk_window_set_destroy_with_parent (GTK_WINDOW (window), TRUE);
  gtk_window_set_resizable (GTK_WINDOW (window), FALSE);
  gtk_widget_add_css_class (box, "details");
  gtk_grid_set_row_spacing (GTK_GRID (grid), 6);
  gtk_grid_set_column_spacing (GTK_GRID (grid), 12);
  for (guint i = 0; i < ask->n; i++)
    add_row (ask, GTK_GRID (grid), &rows[i], i);
  gtk_widget_add_css_class (take, "suggested-action");
  gtk_widget_set_halign (take, GTK_ALIGN_END);
  g_signal_connect_swapped (take, "clicked", G_CALLBACK (taken_cb), ask);
  gtk_box_append (GTK_BOX (box), grid);
  gtk_box_append (GTK_BOX (box), take);
  gtk_window_set_child (GTK_WINDOW (window), box);
  gtk_window_set_default_widget (GTK_WINDOW (window), take);
  gtk_shortcut_controller_add_shortcut (GTK_SHORTCUT_CONTROLLER (keys),
                                        gtk_shortcut_new (gtk_keyval_trigger_new (GDK_KEY_Escape, 0), gtk_callback_action_new (escape_cb, window, NULL)));
  /* Before the spin buttons, which keep Enter for themselves. */
  gtk_event_controller_set_propagation_phase (keys, GTK_PHASE_CAPTURE);
  gtk_shortcut_controller_add_shortcut (GTK_SHORTCUT_CONTROLLER (keys),
                                        gtk_shortcut_new (gtk_alternative_trigger_new (gtk_keyval_trigger_new (GDK_KEY_Return, 0), gtk_keyval_trigger_new (GDK_KEY_KP_Enter, 0)),
                                                          gtk_callback_action_new (enter_cb, ask, NULL)));
  gtk_widget_add_controller (window, keys);
  gtk_window_present (GTK_WINDOW (window));
}
