#include "remedies-panel.h"

#include <math.h>

#include <glib/gi18n.h>

#include "improvements.h"
#include "remedies.h"
#include "report.h"

struct _UtRemediesPanel
{
  UtPanel parent;
  GtkLabel *words;
  GtkSpinner *spinner;
  GtkWidget *stop;
  GtkBox *list;
  GtkProgressBar *bar;
  GtkWidget *more;    /* looks for what gives more headroom */
  UtStudy *study;     /* whose remedies are there, or looked for */
  GPtrArray *changes; /* of Change, one for each row */
  GCancellable *looking;
  int previewed; /* which one is the draft shown; -1: none */
};

/* What a row stands for. */
typedef struct
{
  char *sentence;
  const UtPlan *plan;
  gboolean doable; /* by a press of a button */
} Change;

G_DEFINE_FINAL_TYPE (UtRemediesPanel, ut_remedies_panel, UT_TYPE_PANEL)

static void
show_state (UtRemediesPanel *self, const char *text)
{
  gtk_label_set_text (self->words, text);
  gtk_widget_set_tooltip_text (GTK_WIDGET (self->words), text);
  gtk_spinner_set_spinning (self->spinner, self->looking != NULL);
  gtk_widget_set_visible (self->stop, self->looking != NULL);
}

static void
clear_list (UtRemediesPanel *self)
{
  GtkWidget *child;

  while ((child = gtk_widget_get_first_child (GTK_WIDGET (self->list))) != NULL)
    gtk_box_remove (self->list, child);
  g_ptr_array_set_size (self->changes, 0);
}

static void
change_free (gpointer data)
{
  Change *change = data;

  g_free (change->sentence);
  ut_plan_unref (change->plan);
  g_free (change);
}

/* ---- one change ---- */

static void
end_preview (UtRemediesPanel *self)
{
  if (self->previewed < 0)
    return;
  self->previewed = -1;
  ut_desk_drop_draft (ut_panel_desk (UT_PANEL (self)));
}

static guint
index_of (GtkWidget *row)
{
  return GPOINTER_TO_UINT (g_object_get_data (G_OBJECT (row), "change"));
}

static void
enter_cb (GtkEventControllerMotion *controller, double x, double y, UtRemediesPanel *self)
{
  guint index = index_of (gtk_event_controller_get_widget (GTK_EVENT_CONTROLLER (controller)));
  UtDesk *desk = ut_panel_desk (UT_PANEL (self));

  (void) x;
  (void) y;
  if (index >= self->changes->len || (ut_desk_has_draft (desk) && self->previewed < 0))
    return;
  self->previewed = (int) index;
  ut_desk_set_draft (desk, ut_plan_ref (((const Change *) self->changes->pdata[index])->plan));
}

static void
leave_cb (GtkEventControllerMotion *controller, UtRemediesPanel *self)
{
  (void) controller;
  end_preview (self);
}

static void
apply_cb (GtkButton *button, UtRemediesPanel *self)
{
  guint index = index_of (GTK_WIDGET (button));
  const Change *change = index < self->changes->len ? self->changes->pdata[index] : NULL;
  g_autofree char *label = change != NULL ? g_strdup (change->sentence) : NULL;

  if (change == NULL)
    return;
  self->previewed = -1;
  ut_desk_apply (ut_panel_desk (UT_PANEL (self)), ut_plan_ref (change->plan), label, NULL);
}

/* Takes over the sentence. */
static void
add_row (UtRemediesPanel *self, char *sentence, const UtPlan *plan, gboolean doable)
{
  GtkWidget *row = gtk_box_new (GTK_ORIENTATION_HORIZONTAL, 8), *label = gtk_label_new (sentence), *apply = gtk_button_new_with_label (_ ("Apply"));
  GtkEventController *motion = gtk_event_controller_motion_new ();
  Change *change = g_new (Change, 1);

  *change = (Change){ sentence, ut_plan_ref (plan), doable };
  g_object_set_data (G_OBJECT (row), "change", GUINT_TO_POINTER (self->changes->len));
  g_object_set_data (G_OBJECT (apply), "change", GUINT_TO_POINTER (self->changes->len));
  g_ptr_array_add (self->changes, change);
  gtk_label_set_xalign (GTK_LABEL (label), 0);
  gtk_label_set_ellipsize (GTK_LABEL (label), PANGO_ELLIPSIZE_END);
  gtk_widget_set_tooltip_text (label, sentence);
  gtk_widget_set_hexpand (label, TRUE);
  gtk_widget_set_sensitive (apply, doable);
  gtk_accessible_update_property (GTK_ACCESSIBLE (apply), GTK_ACCESSIBLE_PROPERTY_DESCRIPTION, sentence, -1);
  g_signal_connect (apply, "clicked", G_CALLBACK (apply_cb), self);
  g_signal_connect (motion, "enter", G_CALLBACK (enter_cb), self);
  g_signal_connect (motion, "leave", G_CALLBACK (leave_cb), self);
  gtk_widget_add_controller (row, motion);
  gtk_box_append (GTK_BOX (row), label);
  gtk_box_append (GTK_BOX (row), apply);
  gtk_box_append (self->list, row);
}

/* ---- looking for them ---- */

/* What a thread looks for, and how far it is. */
typedef struct
{
  UtStudy *study;
  gboolean more;    /* improvements; else remedies */
  GMutex lock;
  double done;
} Job;

static void
job_free (gpointer data)
{
  Job *job = data;

  ut_study_unref (job->study);
  g_mutex_clear (&job->lock);
  g_free (job);
}

static void
progress (double done, gpointer data)
{
  Job *job = data;

  g_mutex_lock (&job->lock);
  job->done = done;
  g_mutex_unlock (&job->lock);
}

static void
look_in_thread (GTask *task, gpointer source, gpointer data, GCancellable *cancellable)
{
  Job *job = data;

  (void) source;
  g_task_return_pointer (task,
                         job->more ? ut_improvements_new (job->study, cancellable, progress, job) : ut_remedies_new (job->study, cancellable),
                         (GDestroyNotify) g_ptr_array_unref);
}

static gboolean
tick_cb (gpointer data)
{
  g_autoptr (GTask) task = g_object_ref (data);
  UtRemediesPanel *self = UT_REMEDIES_PANEL (g_task_get_source_object (task));
  Job *job = g_task_get_task_data (task);
  double done;

  if (g_task_get_completed (task) || g_task_get_cancellable (task) != self->looking)
    return G_SOURCE_REMOVE;
  g_mutex_lock (&job->lock);
  done = job->done;
  g_mutex_unlock (&job->lock);
  if (job->more)
    gtk_progress_bar_set_fraction (self->bar, done);
  return G_SOURCE_CONTINUE;
}

static void
show_remedies (UtRemediesPanel *self, const GPtrArray *found)
{
  for (guint i = 0; i < found->len; i++)
    {
      const UtRemedy *remedy = found->pdata[i];

      /* That a path must lose more is nothing that a press of a button does. */
      add_row (self, ut_remedy_sentence (self->study, remedy), remedy->plan, remedy->kind != UT_REMEDY_WEAKEN_PATH);
    }
  show_state (self, found->len == 0 ? _ ("No single change of targets, limits or service heals this plan.")
                                    : _ ("Each of these heals the plan; it was solved again with it. Point at one to see it on the sheet."));
}

static void
show_improvements (UtRemediesPanel *self, const GPtrArray *found)
{
  for (guint i = 0; i < found->len; i++)
    {
      const UtImprovement *one = found->pdata[i];
      g_autofree char *headroom = ut_report_figure (one->headroom_db, 1), *gained = ut_report_figure (one->gained_db, 1);

      add_row (self,
               isinf (one->gained_db) ? g_strdup_printf (_ ("%s: headroom %s dB"), one->what, headroom) : g_strdup_printf (_ ("%s: headroom %s dB, %s dB more"), one->what, headroom, gained),
               one->plan,
               TRUE);
    }
  show_state (self, found->len == 0 ? _ ("Nothing that was tried gives more headroom.") : _ ("The most headroom first; others may be better still. Point at one to see it on the sheet."));
}

static void
found_cb (GObject *source, GAsyncResult *result, gpointer data)
{
  UtRemediesPanel *self = UT_REMEDIES_PANEL (source);
  Job *job = g_task_get_task_data (G_TASK (result));
  gboolean present = g_task_get_cancellable (G_TASK (result)) == self->looking;
  g_autoptr (GPtrArray) found = g_task_propagate_pointer (G_TASK (result), NULL);

  (void) data;
  if (!present || ut_panel_desk (UT_PANEL (self)) == NULL)
    return;
  g_clear_object (&self->looking);
  gtk_widget_set_visible (GTK_WIDGET (self->bar), FALSE);
  gtk_widget_set_sensitive (self->more, !job->more);
  if (job->more)
    show_improvements (self, found);
  else
    show_remedies (self, found);
}

static void
look (UtRemediesPanel *self, gboolean more)
{
  g_autoptr (GTask) task = NULL;
  Job *job = g_new0 (Job, 1);

  *job = (Job){ .study = ut_study_ref (self->study), .more = more };
  g_mutex_init (&job->lock);
  self->looking = g_cancellable_new ();
  task = g_task_new (self, self->looking, found_cb, NULL);
  g_task_set_check_cancellable (task, FALSE);
  g_task_set_task_data (task, job, job_free);
  g_task_run_in_thread (task, look_in_thread);
  g_timeout_add_full (G_PRIORITY_DEFAULT, 100, tick_cb, g_object_ref (task), g_object_unref);
  gtk_widget_set_visible (GTK_WIDGET (self->bar), more);
  gtk_progress_bar_set_fraction (self->bar, 0);
  gtk_widget_set_sensitive (self->more, FALSE);
}

static void
more_cb (UtRemediesPanel *self)
{
  if (self->study == NULL || self->looking != NULL)
    return;
  end_preview (self);
  clear_list (self);
  look (self, TRUE);
  show_state (self, _ ("Trying places, channels, directions, doors and walls…"));
}

static void
ut_remedies_panel_let_go (UtPanel *panel)
{
  UtRemediesPanel *self = UT_REMEDIES_PANEL (panel);

  if (self->looking != NULL)
    g_cancellable_cancel (self->looking);
  g_clear_object (&self->looking);
  g_clear_pointer (&self->study, ut_study_unref);
  clear_list (self);
  self->previewed = -1;
}

static void
stop_cb (UtRemediesPanel *self)
{
  if (self->looking != NULL)
    g_cancellable_cancel (self->looking);
  g_clear_object (&self->looking);
  gtk_widget_set_visible (GTK_WIDGET (self->bar), FALSE);
  gtk_widget_set_sensitive (self->more, TRUE);
  show_state (self, _ ("Stopped."));
}

static void
ut_remedies_panel_refresh (UtPanel *panel)
{
  UtRemediesPanel *self = UT_REMEDIES_PANEL (panel);
  UtStudy *study = ut_desk_answer (ut_panel_desk (panel));

  /* A draft is either the preview of one of these, or on its way to be a plan. */
  if (study == NULL || ut_desk_has_draft (ut_panel_desk (panel)) || study == self->study)
    return;
  if (self->study != NULL && self->study->gains->plan == study->gains->plan && self->study->question.direction == study->question.direction
      && self->study->question.aim == study->question.aim)
    return; /* the same question answered once more, after a preview */
  ut_remedies_panel_let_go (panel);
  self->study = ut_study_ref (study);
  gtk_widget_set_visible (GTK_WIDGET (self->bar), FALSE);
  gtk_widget_set_sensitive (self->more, TRUE);
  if (study->verdict == UT_VERDICT_MET)
    {
      show_state (self, _ ("All targets can be met: nothing needs to change."));
      return;
    }
  look (self, FALSE);
  show_state (self, _ ("Looking for single changes that heal the plan…"));
}

static void
ut_remedies_panel_finalize (GObject *object)
{
  g_ptr_array_unref (UT_REMEDIES_PANEL (object)->changes);
  G_OBJECT_CLASS (ut_remedies_panel_parent_class)->finalize (object);
}

static void
ut_remedies_panel_class_init (UtRemediesPanelClass *class)
{
  G_OBJECT_CLASS (class)->finalize = ut_remedies_panel_finalize;
  UT_PANEL_CLASS (class)->refresh = ut_remedies_panel_refresh;
  UT_PANEL_CLASS (class)->let_go = ut_remedies_panel_let_go;
}

static void
ut_remedies_panel_init (UtRemediesPanel *self)
{
  GtkWidget *box = gtk_box_new (GTK_ORIENTATION_VERTICAL, 6), *bar = gtk_box_new (GTK_ORIENTATION_HORIZONTAL, 8), *scroller = gtk_scrolled_window_new ();

  self->previewed = -1;
  self->changes = g_ptr_array_new_with_free_func (change_free);
  self->bar = GTK_PROGRESS_BAR (gtk_progress_bar_new ());
  gtk_widget_set_valign (GTK_WIDGET (self->bar), GTK_ALIGN_CENTER);
  self->more = gtk_button_new_with_label (_ ("What would give more?"));
  gtk_widget_set_tooltip_text (self->more, _ ("Try better places nearby, channels, directions, cells left out, doors and walls"));
  g_signal_connect_swapped (self->more, "clicked", G_CALLBACK (more_cb), self);
  self->words = GTK_LABEL (gtk_label_new (NULL));
  self->spinner = GTK_SPINNER (gtk_spinner_new ());
  self->stop = gtk_button_new_with_label (_ ("Stop"));
  self->list = GTK_BOX (gtk_box_new (GTK_ORIENTATION_VERTICAL, 2));
  gtk_label_set_xalign (self->words, 0);
  gtk_label_set_ellipsize (self->words, PANGO_ELLIPSIZE_END);
  gtk_widget_set_hexpand (GTK_WIDGET (self->words), TRUE);
  g_signal_connect_swapped (self->stop, "clicked", G_CALLBACK (stop_cb), self);
  gtk_widget_add_css_class (bar, "words");
  gtk_widget_add_css_class (GTK_WIDGET (self->list), "words");
  gtk_box_append (GTK_BOX (bar), GTK_WIDGET (self->words));
  gtk_box_append (GTK_BOX (bar), GTK_WIDGET (self->spinner));
  gtk_box_append (GTK_BOX (bar), GTK_WIDGET (self->bar));
  gtk_box_append (GTK_BOX (bar), self->stop);
  gtk_box_append (GTK_BOX (bar), self->more);
  gtk_scrolled_window_set_child (GTK_SCROLLED_WINDOW (scroller), GTK_WIDGET (self->list));
  gtk_widget_set_vexpand (scroller, TRUE);
  gtk_box_append (GTK_BOX (box), bar);
  gtk_box_append (GTK_BOX (box), scroller);
  ut_panel_set_child (UT_PANEL (self), box);
}
