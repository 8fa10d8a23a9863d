#include "view.h"

#include <math.h>

void
ut_view_init (UtView *view, double width_px, double height_px)
{
  *view = (UtView){ .width_px = width_px, .height_px = height_px, .scale_px_m = 10, .origin_y_px = height_px };
}

void
ut_view_resize (UtView *view, double width_px, double height_px)
{
  view->origin_x_px += (width_px - view->width_px) / 2;
  view->origin_y_px += (height_px - view->height_px) / 2;
  view->width_px = width_px;
  view->height_px = height_px;
}

void
ut_view_to_sheet (const UtView *view, double x_m, double y_m, double *x_px, double *y_px)
{
  *x_px = view->origin_x_px + x_m * view->scale_px_m;
  *y_px = view->origin_y_px - y_m * view->scale_px_m;
}

void
ut_view_to_plan (const UtView *view, double x_px, double y_px, double *x_m, double *y_m)
{
  *x_m = (x_px - view->origin_x_px) / view->scale_px_m;
  *y_m = (view->origin_y_px - y_px) / view->scale_px_m;
}

void
ut_view_zoom (UtView *view, double factor, double x_px, double y_px)
{
  double scale_px_m = CLAMP (view->scale_px_m * factor, UT_VIEW_LEAST_PX_M, UT_VIEW_MOST_PX_M);
  double true_factor = scale_px_m / view->scale_px_m;

  view->origin_x_px = x_px + (view->origin_x_px - x_px) * true_factor;
  view->origin_y_px = y_px + (view->origin_y_px - y_px) * true_factor;
  view->scale_px_m = scale_px_m;
}

void
ut_view_pan (UtView *view, double dx_px, double dy_px)
{
  view->origin_x_px += dx_px;
  view->origin_y_px += dy_px;
}

void
ut_view_fit (UtView *view, double x0_m, double y0_m, double x1_m, double y1_m, double margin_px)
{
  double room_x_px = MAX (view->width_px - 2 * margin_px, 1), room_y_px = MAX (view->height_px - 2 * margin_px, 1);
  double width_m = x1_m - x0_m, height_m = y1_m - y0_m;
  double scale_px_m = 50;

  if (width_m > 0 || height_m > 0)
    scale_px_m = MIN (width_m > 0 ? room_x_px / width_m : INFINITY, height_m > 0 ? room_y_px / height_m : INFINITY);
  view->scale_px_m = CLAMP (scale_px_m, UT_VIEW_LEAST_PX_M, UT_VIEW_MOST_PX_M);
  view->origin_x_px = view->width_px / 2 - (x0_m + x1_m) / 2 * view->scale_px_m;
  view->origin_y_px = view->height_px / 2 + (y0_m + y1_m) / 2 * view->scale_px_m;
}

double
ut_view_round_length_m (const UtView *view, double most_px)
{
  double most_m = most_px / view->scale_px_m;
  double decade_m = pow (10, floor (log10 (most_m)));

  for (int i = 0; i < 3; i++)
    {
      static const double steps[] = { 5, 2, 1 };
      if (steps[i] * decade_m <= most_m)
        return steps[i] * decade_m;
    }
  return decade_m;
}
