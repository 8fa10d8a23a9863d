/* Putting what is selected in order: on one line, at equal distances, many times over.  From plan to plan, no widgets. */
#pragma once

#include "selection.h"

typedef enum { UT_ALIGN_LEFT, UT_ALIGN_MIDDLE_X, UT_ALIGN_RIGHT, UT_ALIGN_BOTTOM, UT_ALIGN_MIDDLE_Y, UT_ALIGN_TOP, UT_N_ALIGNS } UtAlign;

/* How an action calls it: "left", "middle-x", ... NULL-terminated, in the order of UtAlign. */
extern const char *const ut_align_words[];

/* One thing moved by so much; a new reference to the plan where it does not hold it. */
const UtPlan *ut_plan_with_pick_moved (const UtPlan *plan, const UtPick *pick, double dx_m, double dy_m) G_GNUC_WARN_UNUSED_RESULT;

/* Everything selected moved so that it lies on the outermost one's edge, or middle on middle of the whole. */
const UtPlan *ut_plan_aligned (const UtPlan *plan, UtSelection *selection, UtAlign align) G_GNUC_WARN_UNUSED_RESULT;

/* The middles at equal distances between the two outermost, which stay; three or more things, else a new reference to the plan. */
const UtPlan *ut_plan_distributed (const UtPlan *plan, UtSelection *selection, gboolean along_x) G_GNUC_WARN_UNUSED_RESULT;

/* A grid of copies: columns (>= 1) dx_m apart to the right and rows (>= 1) dy_m apart upwards; what is selected is its first field.  *added as in fragment.h. */
const UtPlan *ut_plan_repeated (const UtPlan *plan, UtSelection *selection, guint storey, guint columns, guint rows, double dx_m, double dy_m, char **added)
  G_GNUC_WARN_UNUSED_RESULT;
