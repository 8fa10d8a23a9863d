/* Walls as an architect draws them: each construction has a line style of its own. */
#pragma once

#include <cairo.h>

#include "plan-painter.h"

/* All walls of the storey with their openings. */
void ut_walls_paint (cairo_t *cr, const UtPlan *plan, const UtPaintOptions *options);

/* A sample of a construction's line from (x, y) to the right, for a key. */
void ut_walls_sample (cairo_t *cr, guint construction, const UtPaintOptions *options, double x, double y, double length);
