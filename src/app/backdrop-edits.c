#include "backdrop-edits.h"

#include <math.h>

#include "places.h"
#include "plan-edit.h"

/* Of a picture that says nothing of its size. */
#define WIDTH_M 30.0
#define PAPER_SCALE 100.0

/* Smaller than anything an eye sees of a hundred metres. */
static double
to_micrometre (double value_m)
{
  return round (value_m * 1e6) / 1e6;
}

const UtPlan *
ut_plan_with_backdrop (const UtPlan *plan, guint index, UtBackdrop *backdrop)
{
  UtStorey *storey = ut_storey_copy (ut_plan_storey (plan, index));

  if (storey->backdrop != NULL)
    ut_backdrop_unref (storey->backdrop);
  storey->backdrop = backdrop;
  return ut_plan_with_storey (plan, (int) index, storey);
}

/* Lower left corner and width of the storey's walls; FALSE: it has none. */
static gboolean
walls_extent (const UtStorey *storey, double *x_m, double *y_m, double *width_m)
{
  double low_x = INFINITY, low_y = INFINITY, high_x = -INFINITY;

  for (guint w = 0; w < storey->walls->len; w++)
    {
      const GArray *points = ((const UtWall *) storey->walls->pdata[w])->points;

      for (guint i = 0; i < points->len; i++)
        {
          low_x = fmin (low_x, g_array_index (points, UtPoint, i).x_m);
          high_x = fmax (high_x, g_array_index (points, UtPoint, i).x_m);
          low_y = fmin (low_y, g_array_index (points, UtPoint, i).y_m);
        }
    }
  *x_m = low_x;
  *y_m = low_y;
  *width_m = high_x - low_x;
  return *width_m > 0 && isfinite (low_x);
}

const UtPlan *
ut_plan_with_picture (const UtPlan *plan, guint index, const UtPicture *picture)
{
  const UtStorey *storey = ut_plan_storey (plan, index);
  UtBackdrop *backdrop = ut_backdrop_new ();

  g_free (backdrop->media_type);
  backdrop->media_type = g_strdup (picture->media_type);
  g_clear_pointer (&backdrop->data, g_bytes_unref);
  backdrop->data = g_bytes_ref (picture->data);
  backdrop->opacity = 0.5;
  if (storey->backdrop != NULL)
    {
      backdrop->x_m = storey->backdrop->x_m;
      backdrop->y_m = storey->backdrop->y_m;
      backdrop->width_m = storey->backdrop->width_m;
      backdrop->turn_deg = storey->backdrop->turn_deg;
      backdrop->opacity = storey->backdrop->opacity;
    }
  else if (!walls_extent (storey, &backdrop->x_m, &backdrop->y_m, &backdrop->width_m))
    {
      backdrop->x_m = backdrop->y_m = 0;
      backdrop->width_m = picture->width_mm > 0 ? ut_to_mm (picture->width_mm / 1e3 * PAPER_SCALE) : WIDTH_M;
    }
  backdrop->height_m = to_micrometre (backdrop->width_m * picture->height_px / picture->width_px);
  return ut_plan_with_backdrop (plan, index, backdrop);
}

static UtBackdrop *
copy_of (const UtPlan *plan, guint storey)
{
  return ut_backdrop_copy (ut_plan_storey (plan, storey)->backdrop);
}

const UtPlan *
ut_plan_with_backdrop_moved (const UtPlan *plan, guint storey, double dx_m, double dy_m)
{
  UtBackdrop *backdrop = copy_of (plan, storey);

  backdrop->x_m = ut_to_mm (backdrop->x_m + dx_m);
  backdrop->y_m = ut_to_mm (backdrop->y_m + dy_m);
  return ut_plan_with_backdrop (plan, storey, backdrop);
}

/* From metres along the picture's width and height to the plan; it is turned clockwise about its lower left corner. */
static UtPoint
to_plan (const UtBackdrop *backdrop, double along_m, double up_m)
{
  double turn = backdrop->turn_deg * G_PI / 180;

  return (UtPoint){ backdrop->x_m + cos (turn) * along_m + sin (turn) * up_m, backdrop->y_m - sin (turn) * along_m + cos (turn) * up_m };
}

static void
to_picture (const UtBackdrop *backdrop, UtPoint point, double *along_m, double *up_m)
{
  double turn = backdrop->turn_deg * G_PI / 180, x = point.x_m - backdrop->x_m, y = point.y_m - backdrop->y_m;

  *along_m = cos (turn) * x - sin (turn) * y;
  *up_m = sin (turn) * x + cos (turn) * y;
}

const UtPlan *
ut_plan_with_backdrop_turned (const UtPlan *plan, guint storey, double by_deg)
{
  UtBackdrop *backdrop = copy_of (plan, storey);
  UtPoint middle = to_plan (backdrop, backdrop->width_m / 2, backdrop->height_m / 2), moved;

  backdrop->turn_deg = fmod (backdrop->turn_deg + by_deg + 360, 360);
  moved = to_plan (backdrop, backdrop->width_m / 2, backdrop->height_m / 2);
  backdrop->x_m = ut_to_mm (backdrop->x_m + middle.x_m - moved.x_m);
  backdrop->y_m = ut_to_mm (backdrop->y_m + middle.y_m - moved.y_m);
  return ut_plan_with_backdrop (plan, storey, backdrop);
}

/* Scaled by these factors along width and height, `fixed` stays. Takes over `backdrop`. */
static const UtPlan *
scaled (const UtPlan *plan, guint storey, UtBackdrop *backdrop, double along, double up, UtPoint fixed)
{
  double along_m, up_m;
  UtPoint moved;

  to_picture (backdrop, fixed, &along_m, &up_m);
  backdrop->width_m = to_micrometre (backdrop->width_m * along);
  backdrop->height_m = to_micrometre (backdrop->height_m * up);
  moved = to_plan (backdrop, along_m * along, up_m * up);
  backdrop->x_m = to_micrometre (backdrop->x_m + fixed.x_m - moved.x_m);
  backdrop->y_m = to_micrometre (backdrop->y_m + fixed.y_m - moved.y_m);
  return ut_plan_with_backdrop (plan, storey, backdrop);
}

const UtPlan *
ut_plan_with_backdrop_scaled (const UtPlan *plan, guint storey, const UtKnownLength *known)
{
  double now_m = hypot (known->to.x_m - known->from.x_m, known->to.y_m - known->from.y_m);

  if (!(now_m > 0) || !(known->length_m > 0))
    return ut_plan_ref (plan);
  return scaled (plan, storey, copy_of (plan, storey), known->length_m / now_m, known->length_m / now_m, known->from);
}

/* With a and b the squared factors along width and height, each length says a du^2 + b dv^2 = L^2. */
const UtPlan *
ut_plan_with_backdrop_stretched (const UtPlan *plan, guint storey, const UtKnownLength known[2])
{
  UtBackdrop *backdrop = copy_of (plan, storey);
  double squares[2][2], wanted[2], determinant, a, b;

  for (int i = 0; i < 2; i++)
    {
      double from_along, from_up, to_along, to_up;

      to_picture (backdrop, known[i].from, &from_along, &from_up);
      to_picture (backdrop, known[i].to, &to_along, &to_up);
      squares[i][0] = (to_along - from_along) * (to_along - from_along);
      squares[i][1] = (to_up - from_up) * (to_up - from_up);
      wanted[i] = known[i].length_m * known[i].length_m;
    }
  determinant = squares[0][0] * squares[1][1] - squares[0][1] * squares[1][0];
  a = (wanted[0] * squares[1][1] - wanted[1] * squares[0][1]) / determinant;
  b = (squares[0][0] * wanted[1] - squares[1][0] * wanted[0]) / determinant;
  /* Nearly parallel lengths would turn a small error of a click into a large stretch. */
  if (fabs (determinant) < 0.1 * (squares[0][0] + squares[0][1]) * (squares[1][0] + squares[1][1]) || !(a > 0) || !(b > 0))
    {
      ut_backdrop_unref (backdrop);
      return NULL;
    }
  return scaled (plan, storey, backdrop, sqrt (a), sqrt (b), known[0].from);
}
