#include "solving.h"

/* A frame has 16.7 ms; drawing needs its share. */
#define BUDGET_MS 10.0
/* A slow answer is only begun once nothing newer was asked for this long. */
#define DEBOUNCE_MS 60

typedef struct
{
  const UtPlan *plan;
  UtQuestion question;
  UtStudy *previous;
  double took_ms;
} Order;

struct _UtSolving
{
  GObject parent;
  UtStudy *study;
  gboolean stale;
  double budget_ms;
  double took_ms[4]; /* of the last answer of each class of cost, see cost_class () */
  Order *waiting; /* asked, not begun */
  guint debounce;
  GCancellable *cancellable; /* of the one in the thread */
};

G_DEFINE_FINAL_TYPE (UtSolving, ut_solving, G_TYPE_OBJECT)

enum { ANSWERED, N_SIGNALS };
static guint signals[N_SIGNALS];

static void
order_free (Order *order)
{
  ut_plan_unref (order->plan);
  g_clear_pointer (&order->previous, ut_study_unref);
  g_free (order);
}

static void
forget_pending (UtSolving *self)
{
  g_clear_handle_id (&self->debounce, g_source_remove);
  g_clear_pointer (&self->waiting, order_free);
  if (self->cancellable != NULL)
    g_cancellable_cancel (self->cancellable);
  g_clear_object (&self->cancellable);
}

static void
ut_solving_dispose (GObject *object)
{
  forget_pending (UT_SOLVING (object));
  g_clear_pointer (&UT_SOLVING (object)->study, ut_study_unref);
  G_OBJECT_CLASS (ut_solving_parent_class)->dispose (object);
}

static void
ut_solving_class_init (UtSolvingClass *class)
{
  G_OBJECT_CLASS (class)->dispose = ut_solving_dispose;
  signals[ANSWERED] = g_signal_new ("answered", UT_TYPE_SOLVING, G_SIGNAL_RUN_LAST, 0, NULL, NULL, NULL, G_TYPE_NONE, 0);
}

static void
ut_solving_init (UtSolving *self)
{
  self->budget_ms = BUDGET_MS;
}

UtSolving *
ut_solving_new (void)
{
  return g_object_new (UT_TYPE_SOLVING, NULL);
}

static UtStudy *
answer (Order *order, GCancellable *cancellable)
{
  gint64 begun = g_get_monotonic_time ();
  UtStudy *study = ut_study_new_cancellable (order->plan, &order->question, order->previous, cancellable);

  order->took_ms = (double) (g_get_monotonic_time () - begun) / 1e3;
  return study;
}

/* Most of an answer to a plan with the same walls is there already. */
static gboolean
is_renewal (const Order *order)
{
  return order->previous != NULL && ut_wall_index_holds (order->previous->gains->plan, order->plan);
}

/* Orders that cost about the same: renewals or not, with reserves and chances or not. */
static guint
cost_class (const Order *order)
{
  return (is_renewal (order) ? 1u : 0u) | (order->question.reserves || order->question.chances ? 2u : 0u);
}

/* Takes the study over. */
static void
accept (UtSolving *self, UtStudy *study, const Order *order)
{
  g_clear_pointer (&self->study, ut_study_unref);
  self->study = study;
  self->took_ms[cost_class (order)] = order->took_ms;
  self->stale = FALSE;
  g_signal_emit (self, signals[ANSWERED], 0);
}

static void
solve_in_thread (GTask *task, gpointer source, gpointer data, GCancellable *cancellable)
{
  UtStudy *study = answer (data, cancellable);

  (void) source;
  if (study != NULL)
    g_task_return_pointer (task, study, (GDestroyNotify) ut_study_unref);
  else
    g_task_return_new_error (task, G_IO_ERROR, G_IO_ERROR_CANCELLED, "asked anew");
}

static void
solved_cb (GObject *source, GAsyncResult *result, gpointer user_data)
{
  UtSolving *self = UT_SOLVING (source);
  Order *order = g_task_get_task_data (G_TASK (result));
  UtStudy *study = g_task_propagate_pointer (G_TASK (result), NULL);

  (void) user_data;
  /* A late answer to an old question comes with a cancelled task and is none. */
  if (study == NULL)
    return;
  g_clear_object (&self->cancellable);
  accept (self, study, order);
}

static gboolean
begin_cb (gpointer data)
{
  UtSolving *self = data;
  g_autoptr (GTask) task = NULL;

  self->debounce = 0;
  self->cancellable = g_cancellable_new ();
  task = g_task_new (self, self->cancellable, solved_cb, NULL);
  g_task_set_source_tag (task, begin_cb);
  g_task_set_task_data (task, g_steal_pointer (&self->waiting), (GDestroyNotify) order_free);
  g_task_run_in_thread (task, solve_in_thread);
  return G_SOURCE_REMOVE;
}

void
ut_solving_ask (UtSolving *self, const UtPlan *plan, const UtQuestion *question)
{
  Order *order = g_new0 (Order, 1);

  forget_pending (self);
  order->plan = ut_plan_ref (plan);
  order->question = *question;
  order->previous = self->study != NULL ? ut_study_ref (self->study) : NULL;
  if (self->took_ms[cost_class (order)] < self->budget_ms)
    {
      accept (self, answer (order, NULL), order);
      order_free (order);
      return;
    }
  self->waiting = order;
  self->debounce = g_timeout_add (DEBOUNCE_MS, begin_cb, self);
  if (!self->stale)
    {
      self->stale = TRUE;
      g_signal_emit (self, signals[ANSWERED], 0);
    }
}

UtStudy *
ut_solving_study (UtSolving *self)
{
  return self->study;
}

gboolean
ut_solving_is_stale (UtSolving *self)
{
  return self->stale;
}

void
ut_solving_set_budget (UtSolving *self, double budget_ms)
{
  self->budget_ms = budget_ms;
}
