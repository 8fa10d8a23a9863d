#include <math.h>

#include <glib/gi18n.h>

#include "hit.h"
#include "plan-edit.h"
#include "tool.h"
#include "wall-tool.h"
#include "wall-edits.h"

double
ut_power_handle_px (const UtRadio *cell, double power_dbm)
{
  double range_db = cell->power_max_dbm - cell->power_min_dbm;

  return range_db > 0 ? UT_POWER_HANDLE_PX * CLAMP ((power_dbm - cell->power_min_dbm) / range_db, 0, 1) : 0;
}

double
ut_snap_step_m (double px_per_m)
{
  static const double steps_m[] = { 0.01, 0.05, 0.1, 0.5, 1 };

  for (gsize i = 0; i < G_N_ELEMENTS (steps_m); i++)
    if (steps_m[i] * px_per_m >= 2)
      return steps_m[i];
  return steps_m[G_N_ELEMENTS (steps_m) - 1];
}

static UtHit
hit_at (UtDesk *desk, const UtPointer *pointer, guint skip)
{
  return ut_hit (ut_desk_plan (desk),
                 ut_desk_answer (desk),
                 pointer->storey,
                 pointer->x_m,
                 pointer->y_m,
                 UT_REACH_PX / pointer->px_per_m,
                 skip);
}

/* Kind and id (to be freed) of what was hit; a link stands for its terminal. */
static gboolean
picked (UtDesk *desk, const UtHit *hit, guint storey, UtRadioKind *kind, char **id)
{
  const UtPlan *plan = ut_desk_plan (desk);

  switch (hit->kind)
    {
    case UT_HIT_NOTHING:
      return FALSE;
    case UT_HIT_WALL:
      *kind = UT_KIND_WALL;
      *id = ut_wall_pick_id (plan, storey, hit->index);
      break;
    case UT_HIT_CELL:
      *kind = UT_KIND_CELL;
      *id = g_strdup (ut_plan_cell (plan, hit->index)->radio.id);
      break;
    case UT_HIT_TERMINAL:
    case UT_HIT_LINK:
      *kind = UT_KIND_TERMINAL;
      *id = g_strdup (ut_plan_terminal (plan, hit->index)->radio.id);
      break;
    }
  return TRUE;
}

/* The one selected wall, if it is of this storey. */
static gboolean
one_wall (UtDesk *desk, guint storey, guint *wall)
{
  UtSelection *selection = ut_desk_selection (desk);
  guint in_storey;

  return ut_selection_size (selection) == 1 && ut_selection_pick (selection, 0)->kind == UT_KIND_WALL
         && ut_plan_find_picked_wall (ut_desk_plan (desk), ut_selection_pick (selection, 0)->id, &in_storey, wall) && in_storey == storey;
}

gboolean
ut_vertex_at (UtDesk *desk, const UtPointer *pointer, guint *wall, guint *vertex)
{
  const UtWall *at;

  if (!one_wall (desk, pointer->storey, wall))
    return FALSE;
  at = ut_plan_storey (ut_desk_plan (desk), pointer->storey)->walls->pdata[*wall];
  for (guint i = 0; i < at->points->len; i++)
    {
      const UtPoint *point = &g_array_index (at->points, UtPoint, i);

      if (hypot (point->x_m - pointer->x_m, point->y_m - pointer->y_m) * pointer->px_per_m <= UT_VERTEX_PX)
        {
          *vertex = i;
          return TRUE;
        }
    }
  return FALSE;
}

gboolean
ut_select_edit_wall (UtDesk *desk, const UtPointer *pointer, guint repeat)
{
  const UtPlan *plan = ut_document_plan (ut_desk_document (desk));
  g_autofree char *label = NULL;
  guint index, vertex, piece;

  if (pointer->add && ut_vertex_at (desk, pointer, &index, &vertex))
    {
      const UtWall *wall = ut_plan_storey (plan, pointer->storey)->walls->pdata[index];

      if (wall->points->len > 2)
        {
          label = g_strconcat (_ ("Take Corner out of"), " ", wall->id, NULL);
          ut_desk_apply (desk, ut_plan_without_vertex (plan, pointer->storey, index, vertex), label, NULL);
        }
      return TRUE;
    }
  if (repeat == 0 || !one_wall (desk, pointer->storey, &index) || ut_vertex_at (desk, pointer, &index, &vertex))
    return FALSE;
  const UtWall *wall = ut_plan_storey (plan, pointer->storey)->walls->pdata[index];
  if (ut_wall_distance_m (wall, pointer->x_m, pointer->y_m, NULL, &piece) * pointer->px_per_m > UT_REACH_PX)
    return FALSE;
  label = g_strconcat (_ ("Put Corner into"), " ", wall->id, NULL);
  ut_desk_apply (desk, ut_plan_with_vertex_added (plan, pointer->storey, index, piece, pointer->x_m, pointer->y_m), label, NULL);
  return TRUE;
}

void
ut_select_click (UtDesk *desk, const UtPointer *pointer, guint repeat)
{
  UtSelection *selection = ut_desk_selection (desk);
  UtHit hit = hit_at (desk, pointer, repeat);
  UtRadioKind kind;
  g_autofree char *id = NULL;

  if (ut_select_edit_wall (desk, pointer, repeat))
    return;
  if (!picked (desk, &hit, pointer->storey, &kind, &id))
    {
      if (!pointer->add)
        ut_selection_clear (selection);
      return;
    }
  if (pointer->add)
    ut_selection_toggle (selection, kind, id);
  else
    ut_selection_set_one (selection, kind, id);
}

void
ut_select_for_menu (UtDesk *desk, const UtPointer *pointer)
{
  UtHit hit = hit_at (desk, pointer, 0);
  UtRadioKind kind;
  g_autofree char *id = NULL;

  if (picked (desk, &hit, pointer->storey, &kind, &id) && !ut_selection_has (ut_desk_selection (desk), kind, id))
    ut_selection_set_one (ut_desk_selection (desk), kind, id);
}

/* The one selected cell whose power knob is under the pointer, or NULL. */
static const UtRadio *
knob_at (UtDesk *desk, const UtPointer *pointer)
{
  UtSelection *selection = ut_desk_selection (desk);
  const UtPlan *plan = ut_desk_plan (desk);
  const UtRadio *cell;

  if (ut_selection_size (selection) != 1 || ut_selection_pick (selection, 0)->kind != UT_KIND_CELL)
    return NULL;
  cell = ut_plan_radio (plan, UT_KIND_CELL, ut_selection_pick (selection, 0)->id);
  if (cell == NULL || ut_plan_find_storey (plan, cell->storey) != (int) pointer->storey)
    return NULL;
  double dx_px = (pointer->x_m - cell->x_m) * pointer->px_per_m - UT_POWER_HANDLE_X_PX;
  double dy_px = (pointer->y_m - cell->y_m) * pointer->px_per_m - ut_power_handle_px (cell, cell->power_dbm);
  return hypot (dx_px, dy_px) <= 8 ? cell : NULL;
}

gboolean
ut_is_directional (const UtPlan *plan, const UtRadio *radio)
{
  int index = ut_plan_find_antenna (plan, radio->antenna);

  return index >= 0 && ut_plan_antenna (plan, (guint) index)->pattern != UT_ANTENNA_ISOTROPIC;
}

/* The one selected radio whose turning handle is under the pointer, or NULL. */
static const UtRadio *
turn_handle_at (UtDesk *desk, const UtPointer *pointer, UtRadioKind *kind)
{
  UtSelection *selection = ut_desk_selection (desk);
  const UtPlan *plan = ut_desk_plan (desk);
  const UtRadio *radio;

  if (ut_selection_size (selection) != 1)
    return NULL;
  *kind = ut_selection_pick (selection, 0)->kind;
  radio = ut_plan_radio (plan, *kind, ut_selection_pick (selection, 0)->id);
  if (radio == NULL || !ut_is_directional (plan, radio) || ut_plan_find_storey (plan, radio->storey) != (int) pointer->storey)
    return NULL;
  double azimuth = radio->azimuth_deg * G_PI / 180;
  double dx_px = (pointer->x_m - radio->x_m) * pointer->px_per_m - UT_TURN_HANDLE_PX * sin (azimuth);
  double dy_px = (pointer->y_m - radio->y_m) * pointer->px_per_m - UT_TURN_HANDLE_PX * cos (azimuth);
  return hypot (dx_px, dy_px) <= 8 ? radio : NULL;
}

/* The terminal whose link is under the pointer in the half that its cell has. */
static const UtRadio *
link_end_at (UtDesk *desk, const UtPointer *pointer, const UtHit *hit)
{
  const UtPlan *plan = ut_desk_plan (desk);
  UtStudy *study = ut_desk_answer (desk);

  if (hit->kind != UT_HIT_LINK || study == NULL)
    return NULL;
  for (guint i = 0; i < study->links->len; i++)
    {
      const UtLinkAnswer *link = ut_study_link (study, i);

      if (link->terminal != hit->index || link->cell < 0)
        continue;
      const UtRadio *terminal = &ut_plan_terminal (plan, link->terminal)->radio, *cell = &ut_plan_cell (plan, (guint) link->cell)->radio;
      if (hypot (cell->x_m - pointer->x_m, cell->y_m - pointer->y_m) < hypot (terminal->x_m - pointer->x_m, terminal->y_m - pointer->y_m))
        return terminal;
    }
  return NULL;
}

/* The plan with the terminal served by the cell under the pointer; NULL: there is none. */
static const UtPlan *
with_served (const UtSelectDrag *drag, UtDesk *desk, const UtPointer *pointer)
{
  UtHit hit = ut_hit (drag->plan, NULL, pointer->storey, pointer->x_m, pointer->y_m, 2 * UT_REACH_PX / pointer->px_per_m, 0);
  int index = ut_plan_find_terminal (drag->plan, drag->id);
  UtTerminal *terminal;

  (void) desk;
  for (guint skip = 1; hit.kind != UT_HIT_CELL && hit.kind != UT_HIT_NOTHING && skip < 8; skip++)
    hit = ut_hit (drag->plan, NULL, pointer->storey, pointer->x_m, pointer->y_m, 2 * UT_REACH_PX / pointer->px_per_m, skip);
  if (hit.kind != UT_HIT_CELL || index < 0)
    return NULL;
  terminal = ut_terminal_copy (ut_plan_terminal (drag->plan, (guint) index));
  g_free (terminal->cell);
  terminal->cell = g_strdup (ut_plan_cell (drag->plan, hit.index)->radio.id);
  return ut_plan_with_terminal (drag->plan, index, terminal);
}

/* Towards the pointer, in steps of 5 degrees unless it is held off the grid. */
static const UtPlan *
with_turned (const UtSelectDrag *drag, const UtPointer *pointer)
{
  const UtRadio *radio = ut_plan_radio (drag->plan, drag->radio, drag->id);
  double azimuth_deg = fmod (atan2 (pointer->x_m - radio->x_m, pointer->y_m - radio->y_m) * 180 / G_PI + 360, 360), step_deg = pointer->no_snap ? 0.1 : 5;
  int index = drag->radio == UT_KIND_CELL ? ut_plan_find_cell (drag->plan, drag->id) : ut_plan_find_terminal (drag->plan, drag->id);

  azimuth_deg = fmod (round (azimuth_deg / step_deg) * step_deg, 360);
  azimuth_deg = round (azimuth_deg * 10) / 10;
  if (drag->radio == UT_KIND_CELL)
    {
      UtCell *cell = ut_cell_copy (ut_plan_cell (drag->plan, (guint) index));

      cell->radio.azimuth_deg = azimuth_deg;
      return ut_plan_with_cell (drag->plan, index, cell);
    }
  UtTerminal *terminal = ut_terminal_copy (ut_plan_terminal (drag->plan, (guint) index));
  terminal->radio.azimuth_deg = azimuth_deg;
  return ut_plan_with_terminal (drag->plan, index, terminal);
}

void
ut_select_begin (UtSelectDrag *drag, UtDesk *desk, const UtPointer *pointer)
{
  const UtRadio *cell = knob_at (desk, pointer);
  UtHit hit = hit_at (desk, pointer, 0);
  UtRadioKind kind;
  g_autofree char *id = NULL;

  *drag = (UtSelectDrag){
    .x0_m = pointer->x_m,
    .y0_m = pointer->y_m,
    .x1_m = pointer->x_m,
    .y1_m = pointer->y_m,
    .plan = ut_plan_ref (ut_desk_plan (desk)),
  };
  if (cell != NULL)
    {
      drag->kind = UT_DRAG_POWER;
      drag->id = g_strdup (cell->id);
      drag->power0_dbm = cell->power_dbm;
      return;
    }
  const UtRadio *turned = turn_handle_at (desk, pointer, &drag->radio);
  if (turned != NULL)
    {
      drag->kind = UT_DRAG_TURN;
      drag->id = g_strdup (turned->id);
      return;
    }
  const UtRadio *served = link_end_at (desk, pointer, &hit);
  if (served != NULL)
    {
      drag->kind = UT_DRAG_SERVE;
      drag->id = g_strdup (served->id);
      return;
    }
  if (ut_vertex_at (desk, pointer, &drag->wall, &drag->vertex))
    {
      drag->kind = UT_DRAG_VERTEX;
      drag->storey = pointer->storey;
      return;
    }
  if (hit.kind == UT_HIT_LINK || !picked (desk, &hit, pointer->storey, &kind, &id))
    {
      drag->kind = UT_DRAG_BAND;
      return;
    }
  drag->kind = UT_DRAG_MOVE;
  if (!ut_selection_has (ut_desk_selection (desk), kind, id))
    {
      if (pointer->add)
        ut_selection_add (ut_desk_selection (desk), kind, id);
      else
        ut_selection_set_one (ut_desk_selection (desk), kind, id);
    }
}

/* A move in whole steps of the snap grid. */
static double
snapped (double value_m, const UtPointer *pointer)
{
  double step_m = ut_snap_step_m (pointer->px_per_m);

  return pointer->no_snap ? value_m : round (value_m / step_m) * step_m;
}

/* Walls that lie in the band with all their corners. */
static void
select_walls_in_band (const UtPlan *plan, UtSelection *selection, guint storey, double low_x, double high_x, double low_y, double high_y)
{
  const UtStorey *of = ut_plan_storey (plan, storey);

  for (guint w = 0; w < of->walls->len; w++)
    {
      const UtWall *wall = of->walls->pdata[w];
      gboolean inside = TRUE;

      for (guint i = 0; i < wall->points->len && inside; i++)
        {
          const UtPoint *point = &g_array_index (wall->points, UtPoint, i);

          inside = point->x_m >= low_x && point->x_m <= high_x && point->y_m >= low_y && point->y_m <= high_y;
        }
      if (inside)
        {
          g_autofree char *id = ut_wall_pick_id (plan, storey, w);

          ut_selection_add (selection, UT_KIND_WALL, id);
        }
    }
}

static void
select_in_band (const UtSelectDrag *drag, UtDesk *desk, const UtPointer *pointer)
{
  const UtPlan *plan = ut_desk_plan (desk);
  UtSelection *selection = ut_desk_selection (desk);
  double low_x = MIN (drag->x0_m, drag->x1_m), high_x = MAX (drag->x0_m, drag->x1_m);
  double low_y = MIN (drag->y0_m, drag->y1_m), high_y = MAX (drag->y0_m, drag->y1_m);

  ut_selection_freeze (selection);
  if (!pointer->add)
    ut_selection_clear (selection);
  for (guint i = 0; i < plan->cells->len + plan->terminals->len; i++)
    {
      gboolean is_cell = i < plan->cells->len;
      const UtRadio *radio = is_cell ? &ut_plan_cell (plan, i)->radio : &ut_plan_terminal (plan, i - plan->cells->len)->radio;

      if (ut_plan_find_storey (plan, radio->storey) == (int) pointer->storey && radio->x_m >= low_x && radio->x_m <= high_x
          && radio->y_m >= low_y && radio->y_m <= high_y)
        ut_selection_add (selection, is_cell ? UT_KIND_CELL : UT_KIND_TERMINAL, radio->id);
    }
  select_walls_in_band (plan, selection, pointer->storey, low_x, high_x, low_y, high_y);
  ut_selection_thaw (selection);
}

void
ut_select_update (UtSelectDrag *drag, UtDesk *desk, const UtPointer *pointer)
{
  drag->x1_m = pointer->x_m;
  drag->y1_m = pointer->y_m;
  switch (drag->kind)
    {
    case UT_DRAG_MOVE:
      ut_desk_set_draft (desk,
                         ut_desk_moved (desk,
                                        drag->plan,
                                        snapped (drag->x1_m - drag->x0_m, pointer),
                                        snapped (drag->y1_m - drag->y0_m, pointer)));
      break;
    case UT_DRAG_BAND:
      select_in_band (drag, desk, pointer);
      break;
    case UT_DRAG_POWER:
      {
        const UtRadio *cell = ut_plan_radio (drag->plan, UT_KIND_CELL, drag->id);
        double db_per_px = (cell->power_max_dbm - cell->power_min_dbm) / UT_POWER_HANDLE_PX;

        ut_desk_set_draft (desk,
                           ut_plan_with_set_power (drag->plan,
                                                   UT_KIND_CELL,
                                                   drag->id,
                                                   drag->power0_dbm + (drag->y1_m - drag->y0_m) * pointer->px_per_m * db_per_px));
        break;
      }
    case UT_DRAG_VERTEX:
      {
        const GArray *points = ((const UtWall *) ut_plan_storey (drag->plan, drag->storey)->walls->pdata[drag->wall])->points;
        guint beside = drag->vertex > 0 ? drag->vertex - 1 : 1;
        UtSnap snap;
        UtPoint to = ut_snap_point (drag->plan, pointer, drag->wall, &g_array_index (points, UtPoint, beside), NULL, &snap);

        ut_desk_set_draft (desk, ut_plan_with_vertex (drag->plan, drag->storey, drag->wall, drag->vertex, to.x_m, to.y_m));
        break;
      }
    case UT_DRAG_TURN:
      ut_desk_set_draft (desk, with_turned (drag, pointer));
      break;
    case UT_DRAG_SERVE:
      {
        const UtPlan *served = with_served (drag, desk, pointer);

        if (served != NULL)
          ut_desk_set_draft (desk, served);
        else
          ut_desk_drop_draft (desk);
        break;
      }
    case UT_DRAG_NONE:
      break;
    }
}

static void
drag_clear (UtSelectDrag *drag)
{
  g_clear_pointer (&drag->plan, ut_plan_unref);
  g_clear_pointer (&drag->id, g_free);
  drag->kind = UT_DRAG_NONE;
}

void
ut_select_end (UtSelectDrag *drag, UtDesk *desk)
{
  g_autofree char *label = NULL;

  if (drag->kind == UT_DRAG_MOVE && ut_desk_has_draft (desk))
    label = ut_desk_step_label (desk, _ ("Move"));
  else if (drag->kind == UT_DRAG_VERTEX && ut_desk_has_draft (desk))
    label = ut_desk_step_label (desk, _ ("Move Corner of"));
  else if (drag->kind == UT_DRAG_TURN && ut_desk_has_draft (desk))
    label = g_strconcat (_ ("Turn"), " ", drag->id, NULL);
  else if (drag->kind == UT_DRAG_SERVE && ut_desk_has_draft (desk))
    label = g_strconcat (_ ("Choose Cell of"), " ", drag->id, NULL);
  else if (drag->kind == UT_DRAG_POWER && ut_desk_has_draft (desk))
    label = g_strconcat (_ ("Set Power of"), " ", drag->id, NULL);
  if (label != NULL)
    ut_desk_commit_draft (desk, label, NULL);
  drag_clear (drag);
}

void
ut_select_cancel (UtSelectDrag *drag, UtDesk *desk)
{
  ut_desk_drop_draft (desk);
  drag_clear (drag);
}
