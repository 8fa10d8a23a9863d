#include "history.h"

#define COALESCE_MOST_US G_USEC_PER_SEC

/* A plan and how it came about.  The first has no label. */
typedef struct
{
  const UtPlan *plan;
  char *label, *coalesce, *selection;
  gint64 at_us;
} Step;

struct _UtHistory
{
  GPtrArray *steps; /* of Step */
  guint present;    /* index of the present plan */
  const UtPlan *saved;
};

static void
step_free (gpointer data)
{
  Step *step = data;
  ut_plan_unref (step->plan);
  g_free (step->label);
  g_free (step->coalesce);
  g_free (step->selection);
  g_free (step);
}

static Step *
step_new (const UtPlan *plan,
          const char *label,
          const char *coalesce,
          const char *selection,
          gint64 at_us)
{
  Step *step = g_new (Step, 1);
  *step = (Step){
    ut_plan_ref (plan), g_strdup (label), g_strdup (coalesce), g_strdup (selection), at_us
  };
  return step;
}

static Step *
present (const UtHistory *history)
{
  return history->steps->pdata[history->present];
}

UtHistory *
ut_history_new (const UtPlan *plan)
{
  UtHistory *history = g_new0 (UtHistory, 1);
  history->steps = g_ptr_array_new_with_free_func (step_free);
  g_ptr_array_add (history->steps, step_new (plan, NULL, NULL, NULL, 0));
  history->saved = ut_plan_ref (plan);
  return history;
}

void
ut_history_free (UtHistory *history)
{
  g_ptr_array_unref (history->steps);
  ut_plan_unref (history->saved);
  g_free (history);
}

const UtPlan *
ut_history_plan (const UtHistory *history)
{
  return present (history)->plan;
}

static gboolean
can_redo (const UtHistory *history)
{
  return history->present + 1 < history->steps->len;
}

static gboolean
continues_present (const UtHistory *history, const char *coalesce, gint64 now_us)
{
  return coalesce != NULL && history->present > 0 && !can_redo (history)
         && g_strcmp0 (present (history)->coalesce, coalesce) == 0 && !ut_history_is_saved (history)
         && now_us - present (history)->at_us <= COALESCE_MOST_US;
}

void
ut_history_push (UtHistory *history,
                 const UtPlan *plan,
                 const char *label,
                 const char *coalesce,
                 const char *selection,
                 gint64 now_us)
{
  if (plan == ut_history_plan (history))
    return;
  Step *step = step_new (plan, label, coalesce, selection, now_us);
  if (!continues_present (history, coalesce, now_us))
    history->present++;
  g_ptr_array_set_size (history->steps, (int)history->present);
  g_ptr_array_add (history->steps, step);
}

const char *
ut_history_undo_label (const UtHistory *history)
{
  return history->present > 0 ? present (history)->label : NULL;
}

const char *
ut_history_redo_label (const UtHistory *history)
{
  return can_redo (history) ? ((const Step *)history->steps->pdata[history->present + 1])->label
                            : NULL;
}

gboolean
ut_history_undo (UtHistory *history)
{
  if (history->present == 0)
    return FALSE;
  history->present--;
  return TRUE;
}

gboolean
ut_history_redo (UtHistory *history)
{
  if (!can_redo (history))
    return FALSE;
  history->present++;
  return TRUE;
}

const char *
ut_history_selection (const UtHistory *history)
{
  return present (history)->selection;
}

void
ut_history_mark_saved (UtHistory *history)
{
  const UtPlan *saved = ut_plan_ref (ut_history_plan (history));
  ut_plan_unref (history->saved);
  history->saved = saved;
}

gboolean
ut_history_is_saved (const UtHistory *history)
{
  return history->saved == ut_history_plan (history);
}
