/* The picture under a storey: taken in, placed, brought to scale.  From plan to plan, no widgets. */
#pragma once

#include "picture.h"
#include "plan.h"

/* The storey with the picture as its backdrop.  Where it had one the new one takes its place and width; else it is as wide as the storey's walls, or as the page
 * says at 1:100, or 30 m.  Keeps a reference to the picture's bytes. */
const UtPlan *ut_plan_with_picture (const UtPlan *plan, guint storey, const UtPicture *picture) G_GNUC_WARN_UNUSED_RESULT;

/* NULL backdrop: none; else takes it over. */
const UtPlan *ut_plan_with_backdrop (const UtPlan *plan, guint storey, UtBackdrop *backdrop) G_GNUC_WARN_UNUSED_RESULT;

const UtPlan *ut_plan_with_backdrop_moved (const UtPlan *plan, guint storey, double dx_m, double dy_m) G_GNUC_WARN_UNUSED_RESULT;

/* Turned clockwise about its middle. */
const UtPlan *ut_plan_with_backdrop_turned (const UtPlan *plan, guint storey, double by_deg) G_GNUC_WARN_UNUSED_RESULT;

/* A length known on the picture: from one point of the plan to another it is truly length_m (> 0). */
typedef struct
{
  UtPoint from, to;
  double length_m;
} UtKnownLength;

/* Scaled so that the length is true; its first point stays. */
const UtPlan *ut_plan_with_backdrop_scaled (const UtPlan *plan, guint storey, const UtKnownLength *known) G_GNUC_WARN_UNUSED_RESULT;

/* Scaled along its width and its height apart so that both lengths are true; the first one's first point stays.  NULL: they lie along the same direction of the
 * picture, or no stretching does it. */
const UtPlan *ut_plan_with_backdrop_stretched (const UtPlan *plan, guint storey, const UtKnownLength known[2]) G_GNUC_WARN_UNUSED_RESULT;
