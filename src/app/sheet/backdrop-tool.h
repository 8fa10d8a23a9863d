/* Placing the picture under the sketch: drags move it, two clicks and a typed length bring it to scale.  A state machine without GTK, like those of tool.h. */
#pragma once

#include "backdrop-edits.h"
#include "tool.h"

typedef struct
{
  guint storey;
  guint n_points; /* of the length being marked: 0, 1 or 2 */
  UtPoint points[2];
  UtPoint next;     /* under the pointer */
  GString *typed;   /* a length; NULL: none */
  gboolean has_known;
  UtKnownLength known; /* the length that set the scale, where it lies now */
  double seen[5];      /* place, size and turn of the picture then: it holds while they are the same */
  gboolean refused;    /* the two lengths tell no stretching */
  double x0_m, y0_m;   /* where a drag began */
  const UtPlan *plan;  /* as it was then; NULL: no drag */
} UtBackdropWork;

void ut_backdrop_work_clear (UtBackdropWork *work);

/* The pointer is there: where the length being marked would end. */
void ut_backdrop_work_hover (UtBackdropWork *work, UtDesk *desk, const UtPointer *pointer);
void ut_backdrop_work_click (UtBackdropWork *work, UtDesk *desk, const UtPointer *pointer);

/* A character of the length ('\b': back).  FALSE: not one, or nothing is marked. */
gboolean ut_backdrop_work_type (UtBackdropWork *work, gunichar character);

/* Enter: the first length scales the picture; a second one is only compared, and with `stretch` both are made true by scaling width and height apart. */
void ut_backdrop_work_enter (UtBackdropWork *work, UtDesk *desk, gboolean stretch);

/* Escape: what was typed goes, then the marks.  FALSE: there was nothing. */
gboolean ut_backdrop_work_back (UtBackdropWork *work);

/* Moves the picture, unless it is locked. */
void ut_backdrop_work_drag (UtBackdropWork *work, UtDesk *desk, const UtPointer *pointer, gboolean begins);
void ut_backdrop_work_drop (UtBackdropWork *work, UtDesk *desk);

/* What is to be done next, with the figures so far; to be freed. */
char *ut_backdrop_work_text (const UtBackdropWork *work, UtDesk *desk);
