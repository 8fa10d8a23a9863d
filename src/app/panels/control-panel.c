#include "control-panel.h"

#include <math.h>
#include <string.h>

#include <glib/gi18n.h>

#include "control-plot.h"
#include "plot.h"
#include "report.h"

#define ROUNDS 60

struct _UtControlPanel
{
  UtPanel parent;
  UtPlot *plot;
  GtkLabel *words;
  GtkDropDown *rule, *start;
  GtkSpinButton *step, *delay, *error;
  UtStudy *study;
  UtControl *control;
  UtControlSetup setup; /* of it */
};

G_DEFINE_FINAL_TYPE (UtControlPanel, ut_control_panel, UT_TYPE_PANEL)

/* The selected link among those of the loop, or -1. */
static int
marked_link (UtControlPanel *self)
{
  UtSelection *selection = ut_desk_selection (ut_panel_desk (UT_PANEL (self)));

  for (guint k = 0; self->control != NULL && k < self->control->links->len; k++)
    if (ut_selection_has (selection, UT_KIND_TERMINAL, ut_control_link_id (self->control, k)))
      return (int) k;
  return -1;
}

static void
paint (cairo_t *cr, double width, double height, double text_size, const UtPalette *palette, gpointer data)
{
  UtControlPanel *self = data;

  if (self->control != NULL && ut_panel_desk (UT_PANEL (self)) != NULL)
    ut_control_paint (cr, self->control, marked_link (self), -1, width, height, text_size, palette);
}

static char *
csv (gpointer data)
{
  UtControlPanel *self = data;

  return self->control != NULL ? ut_control_csv (self->control) : g_strdup ("");
}

static char *
hover (double x, double y, double width, double height, double text_size, gpointer data)
{
  UtControlPanel *self = data;
  UtControlLayout layout;
  int link = self->control != NULL ? marked_link (self) : -1;
  double at;

  (void) y;
  if (link < 0)
    return NULL;
  ut_control_layout (self->control, width, height, text_size, &layout);
  at = round ((x - layout.left) / layout.width * layout.last);
  if (!(at >= 0) || at > layout.last)
    return NULL;
  g_autofree char *sinr = ut_report_figure (self->control->sinr_db[(gsize) at * self->control->links->len + (guint) link], 2);
  return g_strdup_printf (_ ("%s in round %.0f: %s dB"), ut_control_link_id (self->control, (guint) link), at, sinr);
}

/* Where it ends, in words. */
static char *
outcome (const UtControl *control)
{
  guint n_met = 0;

  for (guint k = 0; k < control->links->len; k++)
    n_met += control->met[k];
  g_autofree char *speed = ut_report_figure (control->predicted_db, 2), *band = ut_report_figure (control->band_db, 1);
  if (control->links->len == 0)
    return g_strdup (_ ("There is no link to control."));
  if (control->setup.rule == UT_CONTROL_STEPS)
    return g_strdup_printf (control->band_holds ? _ ("After %u rounds %u of %u links meet their targets; every power stays within a band of %s dB.")
                                                : _ ("After %u rounds %u of %u links meet their targets; there is no band of %s dB that all powers stay in."),
                            control->n_rows - 1,
                            n_met,
                            control->links->len,
                            band);
  if (isfinite (control->predicted_db))
    return g_strdup_printf (_ ("After %u rounds %u of %u links meet their targets; each round comes %s dB nearer to the end."), control->n_rows - 1, n_met, control->links->len, speed);
  return g_strdup_printf (_ ("After %u rounds %u of %u links meet their targets."), control->n_rows - 1, n_met, control->links->len);
}

static UtControlSetup
asked (UtControlPanel *self)
{
  return (UtControlSetup){
    .rule = (UtControlRule) gtk_drop_down_get_selected (self->rule),
    .start = (UtControlStart) gtk_drop_down_get_selected (self->start),
    .step_db = gtk_spin_button_get_value (self->step),
    .delay = (guint) gtk_spin_button_get_value (self->delay),
    .error_db = gtk_spin_button_get_value (self->error),
    .seed = 1,
    .rounds = ROUNDS,
  };
}

static void
ut_control_panel_refresh (UtPanel *panel)
{
  UtControlPanel *self = UT_CONTROL_PANEL (panel);
  UtStudy *study = ut_desk_answer (ut_panel_desk (panel));
  UtControlSetup setup = asked (self);
  g_autofree char *words = NULL;

  if (study == NULL || ut_desk_has_draft (ut_panel_desk (panel)))
    return;
  if (study != self->study || memcmp (&setup, &self->setup, sizeof setup) != 0)
    {
      g_clear_pointer (&self->control, ut_control_free);
      g_clear_pointer (&self->study, ut_study_unref);
      self->study = ut_study_ref (study);
      self->setup = setup;
      self->control = ut_control_new (study, &setup);
    }
  words = outcome (self->control);
  gtk_label_set_text (self->words, words);
  ut_plot_changed (self->plot, words);
  gtk_widget_set_sensitive (GTK_WIDGET (self->step), setup.rule == UT_CONTROL_STEPS);
}

static void
ut_control_panel_let_go (UtPanel *panel)
{
  UtControlPanel *self = UT_CONTROL_PANEL (panel);

  g_clear_pointer (&self->control, ut_control_free);
  g_clear_pointer (&self->study, ut_study_unref);
}

static void
changed_cb (UtControlPanel *self)
{
  ut_panel_refresh (UT_PANEL (self));
}

static void
ut_control_panel_class_init (UtControlPanelClass *class)
{
  UT_PANEL_CLASS (class)->refresh = ut_control_panel_refresh;
  UT_PANEL_CLASS (class)->let_go = ut_control_panel_let_go;
}

static void
name (GtkWidget *widget, const char *text)
{
  gtk_widget_set_tooltip_text (widget, text);
  gtk_accessible_update_property (GTK_ACCESSIBLE (widget), GTK_ACCESSIBLE_PROPERTY_LABEL, text, -1);
}

static GtkSpinButton *
add_spin (UtControlPanel *self, GtkBox *bar, const char *label, double highest, double step, double value, guint digits)
{
  GtkWidget *spin = gtk_spin_button_new_with_range (step > 0.5 ? 0 : step > 0.05 && value > 0 ? 0.1 : 0, highest, step), *text = gtk_label_new (label);

  gtk_spin_button_set_digits (GTK_SPIN_BUTTON (spin), digits);
  gtk_spin_button_set_value (GTK_SPIN_BUTTON (spin), value);
  gtk_editable_set_width_chars (GTK_EDITABLE (spin), 4);
  name (spin, label);
  g_signal_connect_swapped (spin, "value-changed", G_CALLBACK (changed_cb), self);
  gtk_box_append (bar, text);
  gtk_box_append (bar, spin);
  return GTK_SPIN_BUTTON (spin);
}

static GtkDropDown *
add_drop (UtControlPanel *self, GtkBox *bar, const char *label, const char *const *choices)
{
  GtkWidget *drop = gtk_drop_down_new_from_strings (choices);

  name (drop, label);
  g_signal_connect_swapped (drop, "notify::selected", G_CALLBACK (changed_cb), self);
  gtk_box_append (bar, drop);
  return GTK_DROP_DOWN (drop);
}

static void
ut_control_panel_init (UtControlPanel *self)
{
  GtkWidget *box = gtk_box_new (GTK_ORIENTATION_VERTICAL, 4), *bar = gtk_box_new (GTK_ORIENTATION_HORIZONTAL, 6), *scroller = gtk_scrolled_window_new ();
  const char *rules[] = { _ ("to what is needed"), _ ("up or down a step"), NULL }, *starts[] = { _ ("from as set"), _ ("from lowest"), _ ("from highest"), NULL };

  self->rule = add_drop (self, GTK_BOX (bar), _ ("How a radio changes its power"), rules);
  self->start = add_drop (self, GTK_BOX (bar), _ ("Powers in the beginning"), starts);
  self->step = add_spin (self, GTK_BOX (bar), _ ("Step (dB)"), 10, 0.1, 1, 1);
  self->delay = add_spin (self, GTK_BOX (bar), _ ("Delay (rounds)"), 10, 1, 0, 0);
  self->error = add_spin (self, GTK_BOX (bar), _ ("Error (dB)"), 10, 0.1, 0, 1);
  gtk_widget_set_margin_start (bar, 12);
  gtk_scrolled_window_set_policy (GTK_SCROLLED_WINDOW (scroller), GTK_POLICY_AUTOMATIC, GTK_POLICY_NEVER);
  gtk_scrolled_window_set_child (GTK_SCROLLED_WINDOW (scroller), bar);
  self->plot = g_object_new (UT_TYPE_PLOT, NULL);
  ut_plot_set_up (self->plot, "power-control", paint, csv, hover, self);
  self->words = GTK_LABEL (gtk_label_new (NULL));
  gtk_label_set_xalign (self->words, 0);
  gtk_label_set_ellipsize (self->words, PANGO_ELLIPSIZE_END);
  gtk_widget_add_css_class (GTK_WIDGET (self->words), "words");
  gtk_box_append (GTK_BOX (box), scroller);
  gtk_box_append (GTK_BOX (box), GTK_WIDGET (self->plot));
  gtk_box_append (GTK_BOX (box), GTK_WIDGET (self->words));
  ut_panel_set_child (UT_PANEL (self), box);
}
