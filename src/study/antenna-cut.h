/* What an antenna of the plan radiates round a circle: for plots. */
#pragma once

#include "plan.h"

/* Gains in dBi at n (> 0) even steps round the full circle, untilted: horizontal, clockwise from boresight; vertical, in the plane of boresight, from it
 * upwards.  antenna: its id, "isotropic" included. */
void ut_antenna_cut_dbi (const UtPlan *plan, const char *antenna, gboolean vertical, guint n, double *dbi);
