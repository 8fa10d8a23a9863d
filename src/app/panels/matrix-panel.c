#include "matrix-panel.h"

#include <glib/gi18n.h>

#include "gain-matrix.h"
#include "plot.h"
#include "report.h"

struct _UtMatrixPanel
{
  UtPanel parent;
  UtPlot *plot;
  UtStudy *study; /* shown */
  UtMatrixOptions options;
};

G_DEFINE_FINAL_TYPE (UtMatrixPanel, ut_matrix_panel, UT_TYPE_PANEL)

static void
paint (cairo_t *cr, double width, double height, double text_size, const UtPalette *palette, gpointer data)
{
  UtMatrixPanel *self = data;
  UtDesk *desk = ut_panel_desk (UT_PANEL (self));
  g_autofree gboolean *marked = NULL;

  if (self->study == NULL || desk == NULL)
    return;
  marked = g_new0 (gboolean, self->study->gains->n_terminals + 1);
  for (guint t = 0; t < self->study->gains->n_terminals; t++)
    marked[t] = ut_selection_has (ut_desk_selection (desk), UT_KIND_TERMINAL, ut_plan_terminal (self->study->gains->plan, t)->radio.id);
  ut_matrix_paint (cr, self->study, &self->options, marked, width, height, text_size, palette);
}

static char *
csv (gpointer data)
{
  UtMatrixPanel *self = data;

  return self->study != NULL ? ut_report_gains_csv (self->study->gains) : g_strdup ("");
}

static gboolean
pair_at (UtMatrixPanel *self, double x, double y, double width, double height, double text_size, guint *terminal, guint *cell)
{
  UtMatrixLayout layout;
  gboolean found;

  if (self->study == NULL)
    return FALSE;
  ut_matrix_layout (self->study, &self->options, width, height, text_size, &layout);
  found = ut_matrix_at (&layout, x, y, terminal, cell);
  ut_matrix_layout_clear (&layout);
  return found;
}

static char *
hover (double x, double y, double width, double height, double text_size, gpointer data)
{
  UtMatrixPanel *self = data;
  guint terminal, cell;

  return pair_at (self, x, y, width, height, text_size, &terminal, &cell) ? ut_matrix_text (self->study, &self->options, terminal, cell) : NULL;
}

/* A click selects the pair. */
static void
released_cb (GtkGestureClick *gesture, int n_press, double x, double y, UtMatrixPanel *self)
{
  UtSelection *selection = ut_desk_selection (ut_panel_desk (UT_PANEL (self)));
  guint terminal, cell;

  (void) gesture;
  (void) n_press;
  if (!pair_at (self, x, y, gtk_widget_get_width (GTK_WIDGET (self->plot)), gtk_widget_get_height (GTK_WIDGET (self->plot)), ut_plot_text_size (self->plot), &terminal, &cell))
    return;
  ut_selection_freeze (selection);
  ut_selection_set_one (selection, UT_KIND_TERMINAL, ut_plan_terminal (self->study->gains->plan, terminal)->radio.id);
  ut_selection_add (selection, UT_KIND_CELL, ut_plan_cell (self->study->gains->plan, cell)->radio.id);
  ut_selection_thaw (selection);
}

static void
ut_matrix_panel_refresh (UtPanel *panel)
{
  UtMatrixPanel *self = UT_MATRIX_PANEL (panel);
  UtStudy *study = ut_desk_answer (ut_panel_desk (panel));

  if (study == NULL)
    return;
  if (study != self->study)
    {
      g_clear_pointer (&self->study, ut_study_unref);
      self->study = ut_study_ref (study);
    }
  ut_plot_changed (self->plot, _ ("Gain matrix: coupling losses between cells and terminals"));
}

static void
ut_matrix_panel_let_go (UtPanel *panel)
{
  g_clear_pointer (&UT_MATRIX_PANEL (panel)->study, ut_study_unref);
}

static void
blame_cb (GtkCheckButton *button, GParamSpec *spec, UtMatrixPanel *self)
{
  (void) spec;
  self->options.view = gtk_check_button_get_active (button) ? UT_MATRIX_BLAME : UT_MATRIX_GAINS;
  ut_panel_refresh (UT_PANEL (self));
}

static void
order_cb (GtkCheckButton *button, GParamSpec *spec, UtMatrixPanel *self)
{
  (void) spec;
  self->options.by_strength = gtk_check_button_get_active (button);
  ut_panel_refresh (UT_PANEL (self));
}

static void
ut_matrix_panel_class_init (UtMatrixPanelClass *class)
{
  UT_PANEL_CLASS (class)->refresh = ut_matrix_panel_refresh;
  UT_PANEL_CLASS (class)->let_go = ut_matrix_panel_let_go;
}

static void
ut_matrix_panel_init (UtMatrixPanel *self)
{
  GtkWidget *box = gtk_box_new (GTK_ORIENTATION_VERTICAL, 4), *bar = gtk_box_new (GTK_ORIENTATION_HORIZONTAL, 12);
  GtkWidget *blame = gtk_check_button_new_with_mnemonic (_ ("_Parts of what sets the headroom")), *order = gtk_check_button_new_with_mnemonic (_ ("_Strongest first"));
  GtkGesture *click = gtk_gesture_click_new ();

  self->plot = g_object_new (UT_TYPE_PLOT, NULL);
  ut_plot_set_up (self->plot, "gain-matrix", paint, csv, hover, self);
  g_signal_connect (blame, "notify::active", G_CALLBACK (blame_cb), self);
  g_signal_connect (order, "notify::active", G_CALLBACK (order_cb), self);
  g_signal_connect (click, "released", G_CALLBACK (released_cb), self);
  gtk_widget_add_controller (GTK_WIDGET (self->plot), GTK_EVENT_CONTROLLER (click));
  gtk_widget_set_margin_start (bar, 12);
  gtk_box_append (GTK_BOX (bar), order);
  gtk_box_append (GTK_BOX (bar), blame);
  gtk_box_append (GTK_BOX (box), bar);
  gtk_box_append (GTK_BOX (box), GTK_WIDGET (self->plot));
  ut_panel_set_child (UT_PANEL (self), box);
}
