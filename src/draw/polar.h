/* The polar plot of an antenna: its two cuts side by side. */
#pragma once

#include <cairo.h>

#include "palette.h"

/* Gains from the largest down to 40 dB less are shown. */
#define UT_POLAR_SPAN_DB 40.0

/* Draws into the rectangle at (0, 0).  antenna: an id of the plan, "isotropic" included; azimuth_deg and downtilt_deg turn the plots as they turn the antenna
 * (a dipole stands as it stands). */
void ut_polar_paint (cairo_t *cr, const UtPlan *plan, const char *antenna, double azimuth_deg, double downtilt_deg, double width, double height, const UtPalette *palette);
