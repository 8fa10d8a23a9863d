#include "wall-tool.h"

#include <math.h>

#include <glib/gi18n.h>

#include "hit.h"
#include "wall-edits.h"

/* A door, where a click is all there is (common practice). */
#define DOOR_M 0.9

static double
distance_m (UtPoint one, UtPoint other)
{
  return hypot (one.x_m - other.x_m, one.y_m - other.y_m);
}

static double
to_grid (double value_m, double step_m)
{
  return round (value_m / step_m) * step_m;
}

/* The nearest vertex within reach. */
static gboolean
snap_to_end (const UtPlan *plan, const UtPointer *pointer, guint except, UtPoint *point)
{
  const UtStorey *storey = ut_plan_storey (plan, pointer->storey);
  double nearest_m = UT_REACH_PX / pointer->px_per_m;
  UtPoint here = { pointer->x_m, pointer->y_m };
  gboolean found = FALSE;

  for (guint w = 0; w < storey->walls->len; w++)
    {
      const UtWall *wall = storey->walls->pdata[w];

      for (guint i = 0; i < wall->points->len && w != except; i++)
        if (distance_m (here, g_array_index (wall->points, UtPoint, i)) <= nearest_m)
          {
            *point = g_array_index (wall->points, UtPoint, i);
            nearest_m = distance_m (here, *point);
            found = TRUE;
          }
    }
  return found;
}

/* The nearest place on a wall within half the reach. */
static gboolean
snap_to_wall (const UtPlan *plan, const UtPointer *pointer, guint except, UtPoint *point)
{
  const UtStorey *storey = ut_plan_storey (plan, pointer->storey);
  double nearest_m = UT_REACH_PX / 2 / pointer->px_per_m;
  gboolean found = FALSE;

  for (guint w = 0; w < storey->walls->len; w++)
    {
      const UtWall *wall = storey->walls->pdata[w];
      guint piece;
      double from_m = ut_wall_distance_m (wall, pointer->x_m, pointer->y_m, NULL, &piece);

      if (w == except || from_m > nearest_m)
        continue;
      UtPoint a = g_array_index (wall->points, UtPoint, piece), b = g_array_index (wall->points, UtPoint, piece + 1);
      double dx = b.x_m - a.x_m, dy = b.y_m - a.y_m, squared = dx * dx + dy * dy;
      double share = squared > 0 ? CLAMP (((pointer->x_m - a.x_m) * dx + (pointer->y_m - a.y_m) * dy) / squared, 0, 1) : 0;
      *point = (UtPoint){ a.x_m + share * dx, a.y_m + share * dy };
      nearest_m = from_m;
      found = TRUE;
    }
  return found;
}

/* Nearly straight on from `from` along the sheet's axes, or along or across the piece that ends there (it begins at `before`, if there is one): then exactly so,
 * in whole steps. */
static gboolean
snap_to_right_angle (const UtPointer *pointer, const UtPoint *from, const UtPoint *before, double step_m, UtPoint *point)
{
  double dx = pointer->x_m - from->x_m, dy = pointer->y_m - from->y_m, nearest_m = UT_REACH_PX / pointer->px_per_m;
  double length_m = before != NULL ? distance_m (*before, *from) : 0;
  UtPoint along = { 1, 0 };
  gboolean found = FALSE;

  if (hypot (dx, dy) <= nearest_m)
    return FALSE;
  for (int k = 0; k < (length_m > 0 ? 4 : 2); k++)
    {
      if (k == 2)
        along = (UtPoint){ (from->x_m - before->x_m) / length_m, (from->y_m - before->y_m) / length_m };
      UtPoint unit = k % 2 == 0 ? along : (UtPoint){ -along.y_m, along.x_m };
      double off_m = fabs (dx * unit.y_m - dy * unit.x_m);

      if (off_m > nearest_m || (found && off_m > nearest_m - 1e-12))
        continue;
      double forward_m = to_grid (dx * unit.x_m + dy * unit.y_m, step_m);
      nearest_m = off_m;
      *point = (UtPoint){ from->x_m + forward_m * unit.x_m, from->y_m + forward_m * unit.y_m };
      found = TRUE;
    }
  return found;
}

UtPoint
ut_snap_point (const UtPlan *plan, const UtPointer *pointer, guint except, const UtPoint *from, const UtPoint *before, UtSnap *snap)
{
  double step_m = ut_snap_step_m (pointer->px_per_m);
  UtPoint point = { pointer->x_m, pointer->y_m };

  *snap = UT_SNAP_NONE;
  if (pointer->no_snap)
    return point;
  if (snap_to_end (plan, pointer, except, &point))
    *snap = UT_SNAP_END;
  else if (from != NULL && snap_to_right_angle (pointer, from, before, step_m, &point))
    *snap = UT_SNAP_RIGHT_ANGLE;
  else if (snap_to_wall (plan, pointer, except, &point))
    *snap = UT_SNAP_WALL;
  else
    {
      *snap = UT_SNAP_GRID;
      point = (UtPoint){ to_grid (pointer->x_m, step_m), to_grid (pointer->y_m, step_m) };
    }
  return point;
}

/* ---- walls ---- */

static guint
n_points (const UtWallDraw *draw)
{
  return draw->points != NULL ? draw->points->len : 0;
}

static const UtPoint *
last_point (const UtWallDraw *draw)
{
  return n_points (draw) > 0 ? &g_array_index (draw->points, UtPoint, draw->points->len - 1) : NULL;
}

void
ut_wall_draw_clear (UtWallDraw *draw)
{
  g_clear_pointer (&draw->points, g_array_unref);
  if (draw->typed != NULL)
    g_string_free (draw->typed, TRUE);
  *draw = (UtWallDraw){ 0 };
}

/* The length typed, or NAN. */
static double
typed_m (const UtWallDraw *draw)
{
  double value = draw->typed != NULL ? g_ascii_strtod (draw->typed->str, NULL) : NAN;

  return value > 0 && value < 1e6 ? value : NAN;
}

/* Holds the next point to the length typed. */
static void
apply_typed (UtWallDraw *draw)
{
  const UtPoint *from = last_point (draw);
  double length_m = typed_m (draw), now_m;

  if (from == NULL || isnan (length_m) || !draw->has_next)
    return;
  now_m = distance_m (*from, draw->next);
  if (!(now_m > 0))
    return;
  draw->next.x_m = from->x_m + (draw->next.x_m - from->x_m) * length_m / now_m;
  draw->next.y_m = from->y_m + (draw->next.y_m - from->y_m) * length_m / now_m;
}

void
ut_wall_draw_hover (UtWallDraw *draw, UtDesk *desk, const UtPointer *pointer)
{
  UtPoint here = { pointer->x_m, pointer->y_m };

  const UtPoint *before = n_points (draw) > 1 ? last_point (draw) - 1 : NULL;

  draw->has_next = TRUE;
  draw->storey = pointer->storey;
  draw->next = ut_snap_point (ut_desk_plan (desk), pointer, G_MAXUINT, last_point (draw), before, &draw->snap);
  if (n_points (draw) >= 3 && distance_m (here, g_array_index (draw->points, UtPoint, 0)) <= UT_REACH_PX / pointer->px_per_m)
    {
      draw->next = g_array_index (draw->points, UtPoint, 0);
      draw->snap = UT_SNAP_CLOSE;
    }
  apply_typed (draw);
}

gboolean
ut_wall_draw_end (UtWallDraw *draw, UtDesk *desk)
{
  g_autofree char *id = NULL, *label = NULL, *pick = NULL;
  const UtPlan *plan = ut_document_plan (ut_desk_document (desk));
  guint storey = draw->storey;

  if (n_points (draw) < 2)
    return FALSE;
  plan = ut_plan_with_new_wall (plan, storey, draw->points, &id);
  label = g_strconcat (_ ("Draw Wall"), " ", id, NULL);
  pick = ut_wall_pick_id (plan, storey, ut_plan_storey (plan, storey)->walls->len - 1);
  ut_desk_apply (desk, plan, label, NULL);
  ut_selection_set_one (ut_desk_selection (desk), UT_KIND_WALL, pick);
  ut_wall_draw_clear (draw);
  return TRUE;
}

/* Takes the next point; FALSE where it is the last one again. */
static gboolean
take_next (UtWallDraw *draw)
{
  const UtPoint *from = last_point (draw);

  if (from != NULL && distance_m (*from, draw->next) < 1e-3)
    return FALSE;
  if (draw->points == NULL)
    draw->points = g_array_new (FALSE, FALSE, sizeof (UtPoint));
  g_array_append_val (draw->points, draw->next);
  if (draw->typed != NULL)
    g_string_free (g_steal_pointer (&draw->typed), TRUE);
  return TRUE;
}

gboolean
ut_wall_draw_click (UtWallDraw *draw, UtDesk *desk, const UtPointer *pointer, gboolean again)
{
  gboolean closes;

  if (again && n_points (draw) >= 2)
    return ut_wall_draw_end (draw, desk);
  ut_wall_draw_hover (draw, desk, pointer);
  closes = draw->snap == UT_SNAP_CLOSE && draw->typed == NULL;
  take_next (draw);
  return closes && ut_wall_draw_end (draw, desk);
}

gboolean
ut_wall_draw_type (UtWallDraw *draw, gunichar character)
{
  if (character == ',')
    character = '.';
  if (n_points (draw) == 0)
    return FALSE;
  if (character == '\b' && draw->typed != NULL && draw->typed->len > 0)
    {
      g_string_truncate (draw->typed, draw->typed->len - 1);
      if (draw->typed->len == 0)
        g_string_free (g_steal_pointer (&draw->typed), TRUE);
      apply_typed (draw);
      return TRUE;
    }
  if (!((character >= '0' && character <= '9') || character == '.') || (draw->typed != NULL && draw->typed->len >= 9))
    return FALSE;
  if (draw->typed == NULL)
    draw->typed = g_string_new (NULL);
  g_string_append_unichar (draw->typed, character);
  apply_typed (draw);
  return TRUE;
}

gboolean
ut_wall_draw_enter (UtWallDraw *draw, UtDesk *desk)
{
  if (draw->typed == NULL)
    return ut_wall_draw_end (draw, desk);
  apply_typed (draw);
  if (draw->has_next && !isnan (typed_m (draw)))
    take_next (draw);
  return FALSE;
}

gboolean
ut_wall_draw_back (UtWallDraw *draw)
{
  if (draw->typed != NULL)
    {
      g_string_free (g_steal_pointer (&draw->typed), TRUE);
      return TRUE;
    }
  if (n_points (draw) == 0)
    return FALSE;
  g_array_set_size (draw->points, draw->points->len - 1);
  return TRUE;
}

gboolean
ut_wall_draw_piece (const UtWallDraw *draw, double *length_m, double *direction_deg)
{
  const UtPoint *from = last_point (draw);

  if (from == NULL || !draw->has_next)
    return FALSE;
  *length_m = distance_m (*from, draw->next);
  *direction_deg = fmod (atan2 (draw->next.x_m - from->x_m, draw->next.y_m - from->y_m) * 180 / G_PI + 360, 360);
  return *length_m > 0;
}

/* ---- openings ---- */

static const UtWall *
wall_of (const UtOpeningDraw *draw, UtDesk *desk)
{
  return ut_plan_storey (ut_desk_plan (desk), draw->storey)->walls->pdata[draw->wall];
}

static double
along_at (const UtOpeningDraw *draw, UtDesk *desk, const UtPointer *pointer)
{
  double along_m = 0, step_m = ut_snap_step_m (pointer->px_per_m);

  ut_wall_distance_m (wall_of (draw, desk), pointer->x_m, pointer->y_m, &along_m, NULL);
  return pointer->no_snap ? along_m : CLAMP (to_grid (along_m, step_m), 0, ut_wall_length_m (wall_of (draw, desk)));
}

void
ut_opening_draw_begin (UtOpeningDraw *draw, UtDesk *desk, const UtPointer *pointer)
{
  const UtStorey *storey = ut_plan_storey (ut_desk_plan (desk), pointer->storey);
  double nearest_m = UT_REACH_PX / pointer->px_per_m;

  *draw = (UtOpeningDraw){ .storey = pointer->storey };
  for (guint w = 0; w < storey->walls->len; w++)
    {
      double from_m = ut_wall_distance_m (storey->walls->pdata[w], pointer->x_m, pointer->y_m, NULL, NULL);

      if (from_m <= nearest_m)
        {
          nearest_m = from_m;
          draw->wall = w;
          draw->active = TRUE;
        }
    }
  if (draw->active)
    draw->from_m = draw->to_m = along_at (draw, desk, pointer);
}

void
ut_opening_draw_update (UtOpeningDraw *draw, UtDesk *desk, const UtPointer *pointer)
{
  if (draw->active)
    draw->to_m = along_at (draw, desk, pointer);
}

void
ut_opening_draw_end (UtOpeningDraw *draw, UtDesk *desk)
{
  const UtPlan *plan = ut_document_plan (ut_desk_document (desk));
  g_autofree char *label = NULL;
  const UtWall *wall;
  int there;

  if (!draw->active || draw->storey >= plan->storeys->len || draw->wall >= ut_plan_storey (plan, draw->storey)->walls->len)
    return;
  draw->active = FALSE;
  wall = wall_of (draw, desk);
  there = ut_wall_opening_at (wall, draw->from_m);
  if (fabs (draw->to_m - draw->from_m) < 0.1 && there >= 0)
    {
      const UtOpening *opening = wall->openings->pdata[there];

      label = g_strconcat (opening->shut ? _ ("Open Door in") : _ ("Shut Door in"), " ", wall->id, NULL);
      ut_desk_apply (desk, ut_plan_with_opening_turned (plan, draw->storey, draw->wall, (guint) there), label, NULL);
      return;
    }
  if (fabs (draw->to_m - draw->from_m) < 0.1)
    {
      draw->from_m = MAX (draw->from_m - DOOR_M / 2, 0);
      draw->to_m = draw->from_m + DOOR_M;
    }
  label = g_strconcat (_ ("Draw Opening in"), " ", wall->id, NULL);
  ut_desk_apply (desk, ut_plan_with_opening (plan, draw->storey, draw->wall, draw->from_m, draw->to_m), label, NULL);
}
