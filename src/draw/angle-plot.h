/* The loss of a construction against the angle of incidence. */
#pragma once

#include <cairo.h>

#include "palette.h"

/* Draws into the rectangle at (0, 0): the loss at the thicknesses as they stand as a line, the spread over 0.85 .. 1.15 of them as a band; at the plan's carrier and
 * polarization. */
void ut_angle_plot_paint (cairo_t *cr, const UtPlan *plan, const UtConstruction *construction, double width, double height, const UtPalette *palette);
