#include "control-panel.h"

#include <math.h>
#include <string.h>

#include <glib/gi18n.h>

#include "control-plot.h"
#include "plan-edit.h"
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
  GtkWidget *play;
  GtkScale *at;
  guint timer;
  int round; /* that the sheet shows; -1: none */
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
    ut_control_paint (cr, self->control, marked_link (self), self->round, width, height, text_size, palette);
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

/* ---- the sheet in a round ---- */

/* The plan with the senders' powers of a round as set.  In the simultaneous downlink a power is a link's and no cell's. */
static const UtPlan *
plan_in_round (const UtControl *control, guint round)
{
  const UtPlan *plan = ut_plan_ref (control->gains->plan);

  for (guint k = 0; k < control->senders->len; k++)
    {
      double power_dbm = control->power_dbm[(gsize) round * control->senders->len + k];
      guint index = g_array_index (control->senders, guint, k);
      const UtPlan *next;

      if (control->direction == UT_DIRECTION_DOWN)
        {
          UtCell *cell = ut_cell_copy (ut_plan_cell (plan, index));

          cell->radio.power_dbm = power_dbm;
          next = ut_plan_with_cell (plan, (int) index, cell);
        }
      else
        {
          UtTerminal *terminal = ut_terminal_copy (ut_plan_terminal (plan, index));

          terminal->radio.power_dbm = power_dbm;
          next = ut_plan_with_terminal (plan, (int) index, terminal);
        }
      ut_plan_step (&plan, next);
    }
  return plan;
}

static gboolean
can_play (UtControlPanel *self)
{
  return self->control != NULL && self->control->links->len > 0 && !(self->control->simultaneous && self->control->direction == UT_DIRECTION_DOWN);
}

static void
show_round (UtControlPanel *self, int round)
{
  UtDesk *desk = ut_panel_desk (UT_PANEL (self));
  UtQuestion question = { .aim = UT_AIM_AS_SET };

  self->round = round;
  gtk_widget_queue_draw (GTK_WIDGET (self));
  ut_plot_changed (self->plot, gtk_label_get_text (self->words));
  if (desk == NULL)
    return;
  if (round < 0 || !can_play (self) || ut_desk_has_draft (desk))
    {
      ut_desk_set_shown (desk, NULL);
      return;
    }
  question.direction = self->control->direction;
  g_autoptr (UtPlan) plan = (UtPlan *) plan_in_round (self->control, (guint) round);
  g_autoptr (UtStudy) study = ut_study_new (plan, &question, self->study);
  ut_desk_set_shown (desk, study);
}

static void
stop_playing (UtControlPanel *self)
{
  g_clear_handle_id (&self->timer, g_source_remove);
  gtk_toggle_button_set_active (GTK_TOGGLE_BUTTON (self->play), FALSE);
}

static gboolean
next_round_cb (gpointer data)
{
  UtControlPanel *self = data;

  if (!can_play (self) || self->round >= (int) self->control->n_rows - 1)
    {
      self->timer = 0;
      gtk_toggle_button_set_active (GTK_TOGGLE_BUTTON (self->play), FALSE);
      return G_SOURCE_REMOVE;
    }
  gtk_range_set_value (GTK_RANGE (self->at), self->round + 1);
  return G_SOURCE_CONTINUE;
}

static void
play_cb (UtControlPanel *self)
{
  if (!gtk_toggle_button_get_active (GTK_TOGGLE_BUTTON (self->play)))
    g_clear_handle_id (&self->timer, g_source_remove);
  else if (self->timer == 0 && can_play (self))
    {
      if (self->round >= (int) self->control->n_rows - 1 || self->round < 0)
        {
          gtk_range_set_value (GTK_RANGE (self->at), 0);
          show_round (self, 0);
        }
      self->timer = g_timeout_add (250, next_round_cb, self);
    }
}

static void
at_cb (UtControlPanel *self)
{
  show_round (self, (int) gtk_range_get_value (GTK_RANGE (self->at)));
}

/* Out of sight the sheet shows the answer again. */
static void
ut_control_panel_unmap (GtkWidget *widget)
{
  UtControlPanel *self = UT_CONTROL_PANEL (widget);

  stop_playing (self);
  show_round (self, -1);
  GTK_WIDGET_CLASS (ut_control_panel_parent_class)->unmap (widget);
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
      stop_playing (self);
      show_round (self, -1);
      gtk_widget_set_sensitive (self->play, can_play (self));
      gtk_widget_set_sensitive (GTK_WIDGET (self->at), can_play (self));
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

  g_clear_handle_id (&self->timer, g_source_remove);
  self->round = -1;
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
  GTK_WIDGET_CLASS (class)->unmap = ut_control_panel_unmap;
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
  self->round = -1;
  self->play = gtk_toggle_button_new_with_label (_ ("Play on the sheet"));
  g_signal_connect_swapped (self->play, "toggled", G_CALLBACK (play_cb), self);
  self->at = GTK_SCALE (gtk_scale_new_with_range (GTK_ORIENTATION_HORIZONTAL, 0, ROUNDS, 1));
  gtk_widget_set_hexpand (GTK_WIDGET (self->at), TRUE);
  name (GTK_WIDGET (self->at), _ ("Round that the sheet shows"));
  g_signal_connect_swapped (self->at, "value-changed", G_CALLBACK (at_cb), self);
  GtkWidget *foot = gtk_box_new (GTK_ORIENTATION_HORIZONTAL, 8);
  gtk_widget_add_css_class (foot, "bar");
  gtk_box_append (GTK_BOX (foot), self->play);
  gtk_box_append (GTK_BOX (foot), GTK_WIDGET (self->at));
  gtk_box_append (GTK_BOX (box), scroller);
  gtk_box_append (GTK_BOX (box), GTK_WIDGET (self->plot));
  gtk_box_append (GTK_BOX (box), foot);
  gtk_box_append (GTK_BOX (box), GTK_WIDGET (self->words));
  ut_panel_set_child (UT_PANEL (self), box);
}
