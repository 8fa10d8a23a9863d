/* Undo and redo over whole plans.  No GObject, no signals: document.h has those. */
#pragma once

#include "plan.h"

typedef struct _UtHistory UtHistory;

/* Begins at `plan` (takes its own reference), which counts as saved. */
UtHistory *ut_history_new (const UtPlan *plan);
void ut_history_free (UtHistory *history);
G_DEFINE_AUTOPTR_CLEANUP_FUNC (UtHistory, ut_history_free)

const UtPlan *ut_history_plan (const UtHistory *history); /* the present plan, borrowed */

/* Adds a step named `label` (already translated) that leads to `plan`; what could be redone is
 * gone.  Where `coalesce` is not NULL, equals the last step's key, nothing can be redone, the last
 * step is no saved mark and at most a second has passed (now_us, monotonic), the last step is
 * replaced. A plan equal by pointer to the present one adds nothing. selection: text kept with the
 * step, may be NULL. */
void ut_history_push (UtHistory *history,
                      const UtPlan *plan,
                      const char *label,
                      const char *coalesce,
                      const char *selection,
                      gint64 now_us);

/* Labels of what would be undone or redone; NULL when there is nothing.  Borrowed. */
const char *ut_history_undo_label (const UtHistory *history);
const char *ut_history_redo_label (const UtHistory *history);
gboolean ut_history_undo (UtHistory *history); /* FALSE: nothing to undo */
gboolean ut_history_redo (UtHistory *history);
const char *ut_history_selection (
    const UtHistory *history); /* of the step that is now on top; borrowed, may be NULL */

void ut_history_mark_saved (UtHistory *history);
gboolean
ut_history_is_saved (const UtHistory *history); /* the present plan is the saved one, by pointer */
