#include "budget-panel.h"

#include <math.h>

#include <glib/gi18n.h>

#include "budget-plot.h"
#include "plot.h"

#define PRESENT_TEXT 20.0

struct _UtBudgetPanel
{
  UtPanel parent;
  GtkWidget *box;
  UtPlot *plot;
  GtkLabel *words;
  GCancellable *computing; /* NULL: nothing is */
  UtStudy *asked;          /* whose cases are there or being made */
  UtBudgetCases cases;
  gboolean has_cases;
  UtBudget *budget;
};

G_DEFINE_FINAL_TYPE (UtBudgetPanel, ut_budget_panel, UT_TYPE_PANEL)

static void
paint (cairo_t *cr, double width, double height, double text_size, const UtPalette *palette, gpointer data)
{
  UtBudgetPanel *self = data;

  if (self->budget != NULL)
    ut_budget_paint (cr, self->budget, width, height, text_size, palette);
}

static char *
csv (gpointer data)
{
  UtBudgetPanel *self = data;

  return self->budget != NULL ? ut_budget_csv (self->budget) : g_strdup ("");
}

/* ---- which link ---- */

static int
shown_link (UtBudgetPanel *self, UtStudy *study)
{
  int worst = ut_panel_selected_link (UT_PANEL (self), study);

  for (guint i = 0; i < study->links->len && ut_panel_selected_link (UT_PANEL (self), study) < 0; i++)
    {
      const UtLinkAnswer *link = ut_study_link (study, i);

      if (link->cell >= 0 && !isnan (link->margin_db) && (worst < 0 || link->margin_db < ut_study_link (study, (guint) worst)->margin_db))
        worst = (int) i;
    }
  return worst;
}

static void
show (UtBudgetPanel *self)
{
  int link = self->has_cases ? shown_link (self, self->cases.studies[UT_CASE_PLANNED]) : -1;
  g_autofree char *words = NULL;

  g_clear_pointer (&self->budget, ut_budget_free);
  if (link >= 0)
    self->budget = ut_budget_new (&self->cases, (guint) link);
  words = self->budget != NULL ? ut_budget_words (self->budget) : g_strdup (_ ("There is no link to look at: place a cell and a terminal with a target."));
  gtk_label_set_text (self->words, words);
  ut_plot_changed (self->plot, words);
}

/* ---- the cases, in a thread ---- */

typedef struct
{
  UtStudy *study;
  UtBudgetCases cases;
  gboolean made;
} Job;

static void
job_free (gpointer data)
{
  Job *job = data;

  if (job->made)
    ut_budget_cases_clear (&job->cases);
  ut_study_unref (job->study);
  g_free (job);
}

static void
make_in_thread (GTask *task, gpointer source, gpointer data, GCancellable *cancellable)
{
  Job *job = data;

  (void) source;
  job->made = ut_budget_cases_make (job->study, cancellable, &job->cases);
  g_task_return_boolean (task, job->made);
}

static void
made_cb (GObject *source, GAsyncResult *result, gpointer data)
{
  UtBudgetPanel *self = UT_BUDGET_PANEL (source);
  Job *job = g_task_get_task_data (G_TASK (result));

  (void) data;
  if (g_task_get_cancellable (G_TASK (result)) != self->computing)
    return;
  g_clear_object (&self->computing);
  if (!job->made || ut_panel_desk (UT_PANEL (self)) == NULL)
    return;
  if (self->has_cases)
    ut_budget_cases_clear (&self->cases);
  self->cases = job->cases;
  self->has_cases = TRUE;
  job->made = FALSE;
  show (self);
}

static void
ut_budget_panel_let_go (UtPanel *panel)
{
  UtBudgetPanel *self = UT_BUDGET_PANEL (panel);

  if (self->computing != NULL)
    g_cancellable_cancel (self->computing);
  g_clear_object (&self->computing);
  g_clear_pointer (&self->asked, ut_study_unref);
}

static void
ut_budget_panel_refresh (UtPanel *panel)
{
  UtBudgetPanel *self = UT_BUDGET_PANEL (panel);
  UtStudy *study = ut_desk_answer (ut_panel_desk (panel));
  g_autoptr (GTask) task = NULL;
  Job *job;

  if (study == NULL)
    return;
  if (study == self->asked)
    {
      if (self->computing == NULL)
        show (self);
      return;
    }
  ut_budget_panel_let_go (panel);
  self->asked = ut_study_ref (study);
  self->computing = g_cancellable_new ();
  job = g_new0 (Job, 1);
  job->study = ut_study_ref (study);
  task = g_task_new (self, self->computing, made_cb, NULL);
  g_task_set_task_data (task, job, job_free);
  g_task_run_in_thread (task, make_in_thread);
}

/* ---- large type ---- */

static gboolean
close_cb (GtkWidget *widget, GVariant *arguments, gpointer window)
{
  (void) widget;
  (void) arguments;
  gtk_window_destroy (window);
  return TRUE;
}

void
ut_budget_panel_present (UtBudgetPanel *self, GtkWindow *parent)
{
  GtkWidget *window = gtk_window_new ();
  UtBudgetPanel *large = g_object_new (UT_TYPE_BUDGET_PANEL, NULL);
  GtkEventController *keys = gtk_shortcut_controller_new ();

  ut_plot_set_text_size (large->plot, PRESENT_TEXT);
  gtk_orientable_set_orientation (GTK_ORIENTABLE (large->box), GTK_ORIENTATION_VERTICAL);
  gtk_widget_set_size_request (gtk_widget_get_last_child (large->box), -1, 200);
  gtk_window_set_default_size (GTK_WINDOW (window), 1280, 800);
  gtk_widget_add_css_class (GTK_WIDGET (large), "presentation");
  gtk_window_set_title (GTK_WINDOW (window), _ ("Budget"));
  gtk_window_set_transient_for (GTK_WINDOW (window), parent);
  gtk_window_set_destroy_with_parent (GTK_WINDOW (window), TRUE);
  gtk_window_set_child (GTK_WINDOW (window), GTK_WIDGET (large));
  gtk_shortcut_controller_add_shortcut (GTK_SHORTCUT_CONTROLLER (keys),
                                        gtk_shortcut_new (gtk_alternative_trigger_new (gtk_keyval_trigger_new (GDK_KEY_Escape, 0), gtk_keyval_trigger_new (GDK_KEY_F5, 0)),
                                                          gtk_callback_action_new (close_cb, window, NULL)));
  gtk_widget_add_controller (window, keys);
  ut_panel_set_desk (UT_PANEL (large), ut_panel_desk (UT_PANEL (self)));
  gtk_window_fullscreen (GTK_WINDOW (window));
  gtk_window_present (GTK_WINDOW (window));
}

static void
ut_budget_panel_dispose (GObject *object)
{
  UtBudgetPanel *self = UT_BUDGET_PANEL (object);

  G_OBJECT_CLASS (ut_budget_panel_parent_class)->dispose (object);
  g_clear_pointer (&self->budget, ut_budget_free);
  if (self->has_cases)
    ut_budget_cases_clear (&self->cases);
  self->has_cases = FALSE;
}

static void
ut_budget_panel_class_init (UtBudgetPanelClass *class)
{
  G_OBJECT_CLASS (class)->dispose = ut_budget_panel_dispose;
  UT_PANEL_CLASS (class)->refresh = ut_budget_panel_refresh;
  UT_PANEL_CLASS (class)->let_go = ut_budget_panel_let_go;
}

static void
ut_budget_panel_init (UtBudgetPanel *self)
{
  GtkWidget *scroller = gtk_scrolled_window_new ();

  self->box = gtk_box_new (GTK_ORIENTATION_HORIZONTAL, 4);
  self->plot = g_object_new (UT_TYPE_PLOT, NULL);
  ut_plot_set_up (self->plot, "budget", paint, csv, NULL, self);
  gtk_widget_set_size_request (GTK_WIDGET (self->plot), -1, 120);
  self->words = GTK_LABEL (gtk_label_new (NULL));
  gtk_label_set_wrap (self->words, TRUE);
  gtk_label_set_xalign (self->words, 0);
  gtk_label_set_yalign (self->words, 0);
  gtk_label_set_selectable (self->words, TRUE);
  gtk_widget_add_css_class (GTK_WIDGET (self->words), "words");
  /* The scroller keeps the words from asking for room that the sheet needs. */
  gtk_scrolled_window_set_policy (GTK_SCROLLED_WINDOW (scroller), GTK_POLICY_EXTERNAL, GTK_POLICY_AUTOMATIC);
  gtk_scrolled_window_set_child (GTK_SCROLLED_WINDOW (scroller), GTK_WIDGET (self->words));
  gtk_widget_set_size_request (scroller, 230, -1);
  gtk_box_append (GTK_BOX (self->box), GTK_WIDGET (self->plot));
  gtk_box_append (GTK_BOX (self->box), scroller);
  ut_panel_set_child (UT_PANEL (self), self->box);
}
