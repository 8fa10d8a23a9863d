/* Tools of the sheet: small state machines that get points in metres and act on the desk.  No GTK in here. */
#pragma once

#include "desk.h"

/* What a tool knows of the gesture. */
typedef struct
{
  double x_m, y_m;
  double px_per_m;   /* scale of the sheet */
  guint storey;
  gboolean add;      /* Shift: add to the selection */
  gboolean no_snap;  /* Alt */
} UtPointer;

typedef enum { UT_TOOL_SELECT, UT_TOOL_WALL, UT_TOOL_OPENING, UT_TOOL_CELL, UT_TOOL_TERMINAL, UT_TOOL_MEASURE, UT_TOOL_BACKDROP, UT_N_TOOLS } UtToolKind;

/* What a drag with the select tool is about. */
typedef enum { UT_DRAG_NONE, UT_DRAG_MOVE, UT_DRAG_BAND, UT_DRAG_POWER, UT_DRAG_VERTEX, UT_DRAG_TURN, UT_DRAG_SERVE } UtDragKind;

typedef struct
{
  UtDragKind kind;
  double x0_m, y0_m, x1_m, y1_m; /* where the drag began and is */
  double power0_dbm;             /* power drag: at its beginning */
  char *id;                      /* power drag: of the cell; turn drag: of the radio; serve drag: of the terminal */
  UtRadioKind radio;             /* turn drag: its kind */
  const UtPlan *plan;            /* as it was when the drag began */
  guint storey, wall, vertex;    /* vertex drag */
} UtSelectDrag;

/* Length of the power handle between lowest and highest power, and the place of its knob above the cell, in pixels. */
#define UT_POWER_HANDLE_PX 64.0
#define UT_POWER_HANDLE_X_PX 16.0
double ut_power_handle_px (const UtRadio *cell, double power_dbm);

/* Where the handle that turns a directional antenna lies, from its radio. */
#define UT_TURN_HANDLE_PX 42.0
gboolean ut_is_directional (const UtPlan *plan, const UtRadio *radio);

/* Pointers closer than this to a radio mean it. */
#define UT_REACH_PX 12.0
#define UT_VERTEX_PX 9.0

/* Grid that moves snap to, fitted to the scale so that a step stays some pixels wide. */
double ut_snap_step_m (double px_per_m);

/* A click selects what is under it; `repeat`: how often the same place was clicked before. */
void ut_select_click (UtDesk *desk, const UtPointer *pointer, guint repeat);

/* A menu was asked for there: what is under the pointer is selected, unless it is among what is selected already. */
void ut_select_for_menu (UtDesk *desk, const UtPointer *pointer);

/* The vertex of the one selected wall that is under the pointer; FALSE: none is. */
gboolean ut_vertex_at (UtDesk *desk, const UtPointer *pointer, guint *wall, guint *vertex);

/* A double click on the one selected wall puts a vertex there; Shift+click on a vertex takes it out.  FALSE: neither was meant. */
gboolean ut_select_edit_wall (UtDesk *desk, const UtPointer *pointer, guint repeat);

/* A drag moves what is selected, or a vertex of the one selected wall, turns a selected cell's power up and down by its handle, or a directional antenna by its,
 * leads a link's cell end to another cell, or draws a band that selects. */
void ut_select_begin (UtSelectDrag *drag, UtDesk *desk, const UtPointer *pointer);
void ut_select_update (UtSelectDrag *drag, UtDesk *desk, const UtPointer *pointer);
void ut_select_end (UtSelectDrag *drag, UtDesk *desk);
void ut_select_cancel (UtSelectDrag *drag, UtDesk *desk);
