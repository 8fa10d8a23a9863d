/* Storeys of a plan: new ones, copies, their order and place.  From plan to plan, no widgets. */
#pragma once

#include "plan.h"

/* A new storey on top of the highest one, as high and on as much floor as that; *index: where it is in the list. */
const UtPlan *ut_plan_with_new_storey (const UtPlan *plan, guint *index) G_GNUC_WARN_UNUSED_RESULT;

/* The same with the walls, openings and backdrop of `storey`; without its radios. */
const UtPlan *ut_plan_with_storey_copied (const UtPlan *plan, guint storey, guint *index) G_GNUC_WARN_UNUSED_RESULT;

/* Walls, radios and backdrop of the storey moved by so much. */
const UtPlan *ut_plan_with_storey_moved (const UtPlan *plan, guint storey, double dx_m, double dy_m) G_GNUC_WARN_UNUSED_RESULT;

/* The storey next below by elevation, or -1. */
int ut_plan_storey_below (const UtPlan *plan, guint storey);
