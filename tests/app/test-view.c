/* Where the plan lies on the sheet. */
#include <math.h>

#include "view.h"

static void
assert_at (const UtView *view, double x_m, double y_m, double x_px, double y_px)
{
  double x, y;

  ut_view_to_sheet (view, x_m, y_m, &x, &y);
  g_assert_cmpfloat_with_epsilon (x, x_px, 1e-9);
  g_assert_cmpfloat_with_epsilon (y, y_px, 1e-9);
  ut_view_to_plan (view, x_px, y_px, &x, &y);
  g_assert_cmpfloat_with_epsilon (x, x_m, 1e-9);
  g_assert_cmpfloat_with_epsilon (y, y_m, 1e-9);
}

static void
test_conversions (void)
{
  UtView view;

  ut_view_init (&view, 400, 300);
  assert_at (&view, 0, 0, 0, 300); /* y points up the plan and down the sheet */
  assert_at (&view, 2, 5, 20, 250);
  ut_view_pan (&view, 7, -3);
  assert_at (&view, 2, 5, 27, 247);
}

static void
test_zoom (void)
{
  UtView view;
  double x_m, y_m;

  ut_view_init (&view, 400, 300);
  ut_view_to_plan (&view, 123, 45, &x_m, &y_m);
  for (int i = 0; i < 60; i++)
    {
      ut_view_zoom (&view, i < 40 ? 1.3 : 0.6, 123, 45);
      g_assert_cmpfloat (view.scale_px_m, >=, UT_VIEW_LEAST_PX_M);
      g_assert_cmpfloat (view.scale_px_m, <=, UT_VIEW_MOST_PX_M);
      assert_at (&view, x_m, y_m, 123, 45); /* also where the limits hold the scale */
    }
}

static void
test_fit (void)
{
  UtView view;
  double x, y;

  ut_view_init (&view, 400, 300);
  ut_view_fit (&view, -10, 5, 30, 25, 20);
  g_assert_cmpfloat_with_epsilon (view.scale_px_m, 9, 1e-12); /* 360 px for 40 m */
  assert_at (&view, 10, 15, 200, 150);
  ut_view_to_sheet (&view, -10, 5, &x, &y);
  g_assert_cmpfloat_with_epsilon (x, 20, 1e-9);
  ut_view_fit (&view, 3, 3, 3, 3, 20);
  assert_at (&view, 3, 3, 200, 150);
  g_assert_cmpfloat_with_epsilon (view.scale_px_m, 50, 1e-12);
}

static void
test_resize (void)
{
  UtView view;
  double x_m, y_m;

  ut_view_init (&view, 400, 300);
  ut_view_to_plan (&view, 200, 150, &x_m, &y_m);
  ut_view_resize (&view, 1000, 500);
  assert_at (&view, x_m, y_m, 500, 250);
}

static void
test_round_length (void)
{
  UtView view;

  ut_view_init (&view, 400, 300);
  for (double scale = 0.06; scale < 1900; scale *= 1.17)
    {
      double length_m, mantissa;

      view.scale_px_m = scale;
      length_m = ut_view_round_length_m (&view, 120);
      g_assert_cmpfloat (length_m * scale, <=, 120 + 1e-9);
      g_assert_cmpfloat (length_m * scale, >, 120 / 2.5 - 1e-9);
      mantissa = length_m / pow (10, floor (log10 (length_m) + 1e-12));
      g_assert_true (fabs (mantissa - 1) < 1e-9 || fabs (mantissa - 2) < 1e-9 || fabs (mantissa - 5) < 1e-9);
    }
}

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  g_test_add_func ("/view/conversions", test_conversions);
  g_test_add_func ("/view/zoom", test_zoom);
  g_test_add_func ("/view/fit", test_fit);
  g_test_add_func ("/view/resize", test_resize);
  g_test_add_func ("/view/round-length", test_round_length);
  return g_test_run ();
}
