/* What lies under a point of the drawing: the same answer for hover, click and tests. */
#pragma once

#include "study.h"

typedef enum { UT_HIT_NOTHING, UT_HIT_TERMINAL, UT_HIT_CELL, UT_HIT_LINK } UtHitKind;

typedef struct
{
  UtHitKind kind;
  guint index; /* of the terminal (also of a link) or the cell in the plan */
} UtHit;

/* The topmost thing of storey `storey` within tolerance_m of (x_m, y_m): terminals before cells before links.  `skip`: how many of those
 * found are passed over, so that repeated clicks go through what lies on top of each other (it wraps around).  study may be NULL: no links. */
UtHit ut_hit (const UtPlan *plan, const UtStudy *study, guint storey, double x_m, double y_m, double tolerance_m, guint skip);
