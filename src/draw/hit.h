/* What lies under a point of the drawing: the same answer for hover, click and tests. */
#pragma once

#include "study.h"

typedef enum { UT_HIT_NOTHING, UT_HIT_TERMINAL, UT_HIT_CELL, UT_HIT_LINK, UT_HIT_WALL } UtHitKind;

typedef struct
{
  UtHitKind kind;
  guint index; /* of the terminal (also of a link) or the cell in the plan, or of the wall in its storey */
} UtHit;

/* The topmost thing of storey `storey` within tolerance_m of (x_m, y_m): terminals before cells before links before walls.  `skip`: how many of those
 * found are passed over, so that repeated clicks go through what lies on top of each other (it wraps around).  study may be NULL: no links. */
/* The place along a wall's polyline that is nearest to a point: its distance from it, its length along, the piece it is on (pointers may be NULL). */
double ut_wall_distance_m (const UtWall *wall, double x_m, double y_m, double *along_m, guint *piece);

UtHit ut_hit (const UtPlan *plan, const UtStudy *study, guint storey, double x_m, double y_m, double tolerance_m, guint skip);
