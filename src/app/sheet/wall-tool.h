/* Drawing walls point by point, and openings along them: state machines without GTK, like those of tool.h. */
#pragma once

#include "tool.h"

/* What the point under the pointer was drawn to. */
typedef enum { UT_SNAP_NONE, UT_SNAP_GRID, UT_SNAP_END, UT_SNAP_WALL, UT_SNAP_RIGHT_ANGLE, UT_SNAP_CLOSE } UtSnap;

typedef struct
{
  GArray *points; /* of UtPoint, so far; NULL: nothing drawn */
  UtPoint next;   /* where a click would put the next one */
  gboolean has_next;
  UtSnap snap;
  guint storey;
  GString *typed; /* a length being typed; NULL: none */
} UtWallDraw;

void ut_wall_draw_clear (UtWallDraw *draw);

/* The pointer moved: finds the next point. */
void ut_wall_draw_hover (UtWallDraw *draw, UtDesk *desk, const UtPointer *pointer);

/* A click puts the point; on the first one it closes the room, `again` (a double click) ends the wall. TRUE: the wall is drawn, a step was made. */
gboolean ut_wall_draw_click (UtWallDraw *draw, UtDesk *desk, const UtPointer *pointer, gboolean again);

/* Ends the wall with the points so far, if two or more. */
gboolean ut_wall_draw_end (UtWallDraw *draw, UtDesk *desk);

/* A character of a length in metres ('\b': back). FALSE: not one. */
gboolean ut_wall_draw_type (UtWallDraw *draw, gunichar character);

/* Enter: the length typed is taken in the direction of the pointer, else the wall ends. */
gboolean ut_wall_draw_enter (UtWallDraw *draw, UtDesk *desk);

/* Escape: what was typed goes, else the last point.  FALSE: there was nothing. */
gboolean ut_wall_draw_back (UtWallDraw *draw);

/* Length in metres and direction in degrees, clockwise from +y, of the piece that a click would add; FALSE: there is none. */
gboolean ut_wall_draw_piece (const UtWallDraw *draw, double *length_m, double *direction_deg);

/* An opening being drawn along a wall. */
typedef struct
{
  gboolean active;
  guint storey, wall;
  double from_m, to_m; /* along the wall */
} UtOpeningDraw;

/* A press on a wall begins, a drag goes on along it; the end makes a step.  Hardly moved it is a click: an opening that is there is shut or opened, else a
 * door 0.9 m wide is put there. */
void ut_opening_draw_begin (UtOpeningDraw *draw, UtDesk *desk, const UtPointer *pointer);
void ut_opening_draw_update (UtOpeningDraw *draw, UtDesk *desk, const UtPointer *pointer);
void ut_opening_draw_end (UtOpeningDraw *draw, UtDesk *desk);

/* Where the pointer is drawn to: ends of the storey's walls (but of wall `except`, or G_MAXUINT), right angles from `from` and the piece before->from (both may be
 * NULL), walls, the grid. */
UtPoint ut_snap_point (const UtPlan *plan, const UtPointer *pointer, guint except, const UtPoint *from, const UtPoint *before, UtSnap *snap);
