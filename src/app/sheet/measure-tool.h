/* Measuring on the sheet: length, and what a ray at a usual height loses.  A state machine without GTK, like those of tool.h. */
#pragma once

#include "tool.h"

/* Both ends are taken at this height above the storey (common practice: in hand). */
#define UT_MEASURE_HEIGHT_M 1.2

typedef struct
{
  gboolean active; /* from the press on, and after the release until the next press */
  guint storey;
  UtPoint from, to;
} UtMeasure;

/* Ends snap to corners and walls; Alt switches it off. */
void ut_measure_begin (UtMeasure *measure, UtDesk *desk, const UtPointer *pointer);
void ut_measure_update (UtMeasure *measure, UtDesk *desk, const UtPointer *pointer);

typedef struct
{
  double length_m, direction_deg; /* clockwise from +y */
  guint n_walls;                  /* walls and shut openings that the ray meets */
  double base_loss_db, crossings_db;
} UtMeasured;

/* FALSE while there is no length. */
gboolean ut_measure_result (const UtMeasure *measure, UtDesk *desk, UtMeasured *measured);

/* The same in words, to be freed; NULL while there is no length. */
char *ut_measure_text (const UtMeasure *measure, UtDesk *desk);
