/* Part of a plan as a plan of its own, and its way into another: for the clipboard and for duplicates.  No widgets. */
#pragma once

#include "selection.h"

/* What is selected, with the constructions and antennas it needs, on its storeys, which hold nothing else.  It can be written and read as any plan; a
 * terminal whose serving cell is not part of it chooses for itself.  Transfer full. */
const UtPlan *ut_plan_fragment (const UtPlan *plan, UtSelection *selection) G_GNUC_WARN_UNUSED_RESULT;

/* Middle of all corners and radios; FALSE when there is nothing. */
gboolean ut_fragment_middle (const UtPlan *fragment, double *x_m, double *y_m);

/* The plan with everything of `fragment` in it, moved.  Everything gets an id of its own; constructions and antennas that the plan has already are not added
 * again.  Things of a fragment with one storey come to `storey`; else to the storey of the same id, where there is one.  `own`: the fragment was taken from
 * this very plan, and its terminals keep the serving cells that they name there.  *added: what came, as selection text (transfer full). */
const UtPlan *ut_plan_with_fragment (const UtPlan *plan, const UtPlan *fragment, guint storey, double dx_m, double dy_m, gboolean own, char **added)
  G_GNUC_WARN_UNUSED_RESULT;
