/* Where the plan lies on the sheet: scale, place and the conversions between metres and pixels.  No drawing, no widget.
 * The plan's y points up, the sheet's y down. */
#pragma once

#include <glib.h>

#define UT_VIEW_LEAST_PX_M 0.05
#define UT_VIEW_MOST_PX_M 2000.0

typedef struct
{
  double width_px, height_px; /* of the sheet */
  double scale_px_m;
  double origin_x_px, origin_y_px; /* where the plan's (0, 0) lies on the sheet */
} UtView;

/* 10 px a metre, the plan's origin in the lower left corner. */
void ut_view_init (UtView *view, double width_px, double height_px);

/* The sheet's size changed: what lies in its middle stays there. */
void ut_view_resize (UtView *view, double width_px, double height_px);

void ut_view_to_sheet (const UtView *view, double x_m, double y_m, double *x_px, double *y_px);
void ut_view_to_plan (const UtView *view, double x_px, double y_px, double *x_m, double *y_m);

/* Multiplies the scale by `factor` (> 0), held within the limits; the plan's point under (x_px, y_px) stays there. */
void ut_view_zoom (UtView *view, double factor, double x_px, double y_px);

void ut_view_pan (UtView *view, double dx_px, double dy_px);

/* Shows the whole rectangle with margin_px around it; a rectangle without extent is shown at 50 px a metre at most. */
void ut_view_fit (UtView *view, double x0_m, double y0_m, double x1_m, double y1_m, double margin_px);

/* A round length (1, 2 or 5 times a power of ten) that is at most most_px long on the sheet. */
double ut_view_round_length_m (const UtView *view, double most_px);
