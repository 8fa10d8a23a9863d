#include "marks.h"

#include <math.h>

#include <glib/gi18n.h>

#include "labels.h"
#include "report.h"
#include "text.h"

void
ut_scene_colour (cairo_t *cr, const UtColour *colour, double alpha)
{
  cairo_set_source_rgba (cr, colour->red, colour->green, colour->blue, alpha);
}

void
ut_scene_place (const UtScene *scene, const UtRadio *radio, double *x_px, double *y_px)
{
  ut_view_to_sheet (scene->view, radio->x_m, radio->y_m, x_px, y_px);
}

gboolean
ut_scene_has (const UtScene *scene, const UtPlan *plan, const UtRadio *radio)
{
  return ut_plan_find_storey (plan, radio->storey) == (int) scene->storey;
}

/* ---- marks of what is selected ---- */

static void
draw_power_handle (const UtScene *scene, cairo_t *cr, const UtRadio *cell)
{
  double x_px, y_px, knob_px = ut_power_handle_px (cell, cell->power_dbm);
  g_autofree char *figure = ut_report_figure (cell->power_dbm, 1);
  g_autofree char *text = g_strdup_printf (_ ("set %s dBm"), figure);

  ut_scene_place (scene, cell, &x_px, &y_px);
  x_px += UT_POWER_HANDLE_X_PX;
  ut_scene_colour (cr, &scene->palette->ink, 1);
  cairo_set_line_width (cr, 2);
  cairo_move_to (cr, x_px, y_px);
  cairo_line_to (cr, x_px, y_px - UT_POWER_HANDLE_PX);
  cairo_stroke (cr);
  cairo_arc (cr, x_px, y_px - knob_px, 5, 0, 2 * G_PI);
  ut_scene_colour (cr, &scene->palette->sheet, 1);
  cairo_fill_preserve (cr);
  ut_scene_colour (cr, &scene->palette->ink, 1);
  cairo_stroke (cr);
  ut_text_draw (cr, text, x_px + 9, y_px - knob_px - 7, 12, &scene->palette->ink, &scene->palette->sheet);
}

/* Along the boresight; it turns the antenna. */
static void
draw_turn_handle (const UtScene *scene, cairo_t *cr, const UtRadio *radio)
{
  double x_px, y_px, azimuth = radio->azimuth_deg * G_PI / 180, knob_x, knob_y;
  g_autofree char *figure = ut_report_figure (radio->azimuth_deg, 0);
  g_autofree char *text = g_strconcat (figure, "°", NULL);

  ut_scene_place (scene, radio, &x_px, &y_px);
  knob_x = x_px + UT_TURN_HANDLE_PX * sin (azimuth);
  knob_y = y_px - UT_TURN_HANDLE_PX * cos (azimuth);
  ut_scene_colour (cr, &scene->palette->ink, 1);
  cairo_set_line_width (cr, 1.5);
  cairo_move_to (cr, x_px, y_px);
  cairo_line_to (cr, knob_x, knob_y);
  cairo_stroke (cr);
  cairo_rectangle (cr, knob_x - 4.5, knob_y - 4.5, 9, 9);
  ut_scene_colour (cr, &scene->palette->sheet, 1);
  cairo_fill_preserve (cr);
  ut_scene_colour (cr, &scene->palette->ink, 1);
  cairo_stroke (cr);
  if (scene->drag->kind == UT_DRAG_TURN)
    ut_text_draw (cr, text, knob_x + 9, knob_y - 7, 12, &scene->palette->ink, &scene->palette->sheet);
}

/* A link whose end is being dragged to another cell. */
static void
draw_serve (const UtScene *scene, cairo_t *cr)
{
  const UtRadio *terminal;
  double x0, y0, x1, y1;

  if (scene->drag->kind != UT_DRAG_SERVE)
    return;
  terminal = ut_plan_radio (ut_desk_plan (scene->desk), UT_KIND_TERMINAL, scene->drag->id);
  if (terminal == NULL)
    return;
  ut_scene_place (scene, terminal, &x0, &y0);
  ut_view_to_sheet (scene->view, scene->drag->x1_m, scene->drag->y1_m, &x1, &y1);
  ut_scene_colour (cr, &scene->palette->ink, 0.8);
  cairo_set_line_width (cr, 2);
  cairo_set_dash (cr, (double[]){ 6, 4 }, 2, 0);
  cairo_move_to (cr, x0, y0);
  cairo_line_to (cr, x1, y1);
  cairo_stroke (cr);
  cairo_set_dash (cr, NULL, 0, 0);
  cairo_arc (cr, x1, y1, 6, 0, 2 * G_PI);
  cairo_stroke (cr);
}

/* Labels leave the power handle alone. */
static void
take_power_handle (const UtScene *scene, GArray *boxes)
{
  UtSelection *selection = ut_desk_selection (scene->desk);
  const UtRadio *cell;
  double x_px, y_px;

  if (ut_selection_size (selection) != 1 || ut_selection_pick (selection, 0)->kind != UT_KIND_CELL)
    return;
  cell = ut_plan_radio (ut_desk_plan (scene->desk), UT_KIND_CELL, ut_selection_pick (selection, 0)->id);
  if (cell == NULL || !ut_scene_has (scene, ut_desk_plan (scene->desk), cell))
    return;
  ut_scene_place (scene, cell, &x_px, &y_px);
  ut_boxes_take (boxes, x_px + UT_POWER_HANDLE_X_PX - 7, y_px - UT_POWER_HANDLE_PX - 8, 110, UT_POWER_HANDLE_PX + 8);
}

/* ---- walls: what is selected, what is being drawn ---- */

static void
trace (const UtScene *scene, cairo_t *cr, const GArray *points)
{
  for (guint i = 0; i < points->len; i++)
    {
      double x, y;

      ut_view_to_sheet (scene->view, g_array_index (points, UtPoint, i).x_m, g_array_index (points, UtPoint, i).y_m, &x, &y);
      if (i == 0)
        cairo_move_to (cr, x, y);
      else
        cairo_line_to (cr, x, y);
    }
}

static void
draw_corner (const UtScene *scene, cairo_t *cr, double x_m, double y_m, double size_px)
{
  double x, y;

  ut_view_to_sheet (scene->view, x_m, y_m, &x, &y);
  cairo_rectangle (cr, x - size_px, y - size_px, 2 * size_px, 2 * size_px);
  ut_scene_colour (cr, &scene->palette->sheet, 1);
  cairo_fill_preserve (cr);
  ut_scene_colour (cr, &scene->palette->ink, 1);
  cairo_set_line_width (cr, 1.5);
  cairo_stroke (cr);
}

/* A selected wall is underlaid; the only one shows its corners, to be dragged. */
static void
draw_selected_wall (const UtScene *scene, cairo_t *cr, const char *pick_id, gboolean only)
{
  const UtPlan *plan = ut_desk_plan (scene->desk);
  guint storey, index;

  if (!ut_plan_find_picked_wall (plan, pick_id, &storey, &index) || storey != scene->storey)
    return;
  const UtWall *wall = ut_plan_storey (plan, storey)->walls->pdata[index];
  trace (scene, cr, wall->points);
  cairo_set_line_width (cr, 9);
  cairo_set_line_join (cr, CAIRO_LINE_JOIN_ROUND);
  ut_scene_colour (cr, &scene->palette->ink, 0.22);
  cairo_stroke (cr);
  for (guint i = 0; i < wall->points->len && only; i++)
    draw_corner (scene, cr, g_array_index (wall->points, UtPoint, i).x_m, g_array_index (wall->points, UtPoint, i).y_m, 4.5);
}

/* What the next point is drawn to, by a mark of its own. */
static void
draw_snap (const UtScene *scene, cairo_t *cr, double x, double y, UtSnap snap)
{
  ut_scene_colour (cr, &scene->palette->ink, 1);
  cairo_set_line_width (cr, 1.5);
  switch (snap)
    {
    case UT_SNAP_END:
    case UT_SNAP_CLOSE:
      cairo_rectangle (cr, x - 7, y - 7, 14, 14);
      break;
    case UT_SNAP_WALL:
      cairo_move_to (cr, x - 7, y - 7);
      cairo_line_to (cr, x + 7, y + 7);
      cairo_move_to (cr, x - 7, y + 7);
      cairo_line_to (cr, x + 7, y - 7);
      break;
    case UT_SNAP_RIGHT_ANGLE:
      cairo_move_to (cr, x - 9, y);
      cairo_line_to (cr, x - 9, y - 9);
      cairo_line_to (cr, x, y - 9);
      break;
    case UT_SNAP_GRID:
    case UT_SNAP_NONE:
      cairo_arc (cr, x, y, 3, 0, 2 * G_PI);
      break;
    }
  cairo_stroke (cr);
}

/* Labels leave the figure of the piece being drawn alone. */
static void
take_wall_figure (const UtScene *scene, GArray *boxes)
{
  double x, y, length_m, direction_deg;

  if (scene->wall == NULL || !ut_wall_draw_piece (scene->wall, &length_m, &direction_deg))
    return;
  ut_view_to_sheet (scene->view, scene->wall->next.x_m, scene->wall->next.y_m, &x, &y);
  ut_boxes_take (boxes, x - 10, y - 10, 120, 36);
}

static void
draw_wall_in_progress (const UtScene *scene, cairo_t *cr)
{
  const UtWallDraw *draw = scene->wall;
  double x, y, length_m, direction_deg;

  if (draw == NULL)
    return;
  if (draw->points != NULL && draw->points->len > 0)
    {
      trace (scene, cr, draw->points);
      cairo_set_line_width (cr, 3);
      ut_scene_colour (cr, &scene->palette->ink, 0.8);
      cairo_stroke_preserve (cr);
      cairo_new_path (cr);
      for (guint i = 0; i < draw->points->len; i++)
        draw_corner (scene, cr, g_array_index (draw->points, UtPoint, i).x_m, g_array_index (draw->points, UtPoint, i).y_m, 3.5);
    }
  if (!draw->has_next)
    return;
  ut_view_to_sheet (scene->view, draw->next.x_m, draw->next.y_m, &x, &y);
  if (ut_wall_draw_piece (draw, &length_m, &direction_deg))
    {
      const UtPoint *from = &g_array_index (draw->points, UtPoint, draw->points->len - 1);
      g_autofree char *length = ut_report_figure (length_m, 2), *direction = ut_report_figure (direction_deg, 0);
      g_autofree char *text = draw->typed != NULL ? g_strdup_printf ("%s| m, %s°", draw->typed->str, direction) : g_strdup_printf ("%s m, %s°", length, direction);
      double from_x, from_y;

      ut_view_to_sheet (scene->view, from->x_m, from->y_m, &from_x, &from_y);
      cairo_set_dash (cr, (double[]){ 6, 4 }, 2, 0);
      cairo_set_line_width (cr, 2);
      ut_scene_colour (cr, &scene->palette->ink, 0.8);
      cairo_move_to (cr, from_x, from_y);
      cairo_line_to (cr, x, y);
      cairo_stroke (cr);
      cairo_set_dash (cr, NULL, 0, 0);
      ut_text_draw (cr, text, x + 12, y + 8, 12, &scene->palette->ink, &scene->palette->sheet);
    }
  draw_snap (scene, cr, x, y, draw->snap);
}

/* The part of the wall that the opening will take. */
static void
draw_opening_in_progress (const UtScene *scene, cairo_t *cr)
{
  const UtOpeningDraw *draw = scene->opening;
  const UtPlan *plan = ut_desk_plan (scene->desk);
  double before_m = 0;

  if (draw == NULL || !draw->active || draw->storey != scene->storey || draw->wall >= ut_plan_storey (plan, draw->storey)->walls->len)
    return;
  const GArray *points = ((const UtWall *) ut_plan_storey (plan, draw->storey)->walls->pdata[draw->wall])->points;
  double from_m = MIN (draw->from_m, draw->to_m), to_m = MAX (draw->from_m, draw->to_m);
  g_autofree char *length = ut_report_figure (to_m - from_m, 2);
  g_autofree char *text = g_strconcat (length, " m", NULL);
  for (guint i = 0; i + 1 < points->len; i++)
    {
      UtPoint a = g_array_index (points, UtPoint, i), b = g_array_index (points, UtPoint, i + 1);
      double piece_m = hypot (b.x_m - a.x_m, b.y_m - a.y_m), first = (from_m - before_m) / piece_m, last = (to_m - before_m) / piece_m, x, y;

      if (last > 0 && first < 1)
        {
          ut_view_to_sheet (scene->view, a.x_m + CLAMP (first, 0, 1) * (b.x_m - a.x_m), a.y_m + CLAMP (first, 0, 1) * (b.y_m - a.y_m), &x, &y);
          cairo_move_to (cr, x, y);
          ut_view_to_sheet (scene->view, a.x_m + CLAMP (last, 0, 1) * (b.x_m - a.x_m), a.y_m + CLAMP (last, 0, 1) * (b.y_m - a.y_m), &x, &y);
          cairo_line_to (cr, x, y);
          ut_scene_colour (cr, &scene->palette->ink, 0.5);
          cairo_set_line_width (cr, 8);
          cairo_stroke (cr);
          ut_text_draw (cr, text, x + 10, y + 6, 12, &scene->palette->ink, &scene->palette->sheet);
        }
      before_m += piece_m;
    }
}

/* A line from cross to cross, with what it measures beside its end. */
static void
draw_measure (const UtScene *scene, cairo_t *cr)
{
  const UtMeasure *measure = scene->measure;
  g_autofree char *text = measure != NULL && measure->storey == scene->storey ? ut_measure_text (measure, scene->desk) : NULL;
  double x0, y0, x1, y1, width_px;

  if (text == NULL)
    return;
  ut_view_to_sheet (scene->view, measure->from.x_m, measure->from.y_m, &x0, &y0);
  ut_view_to_sheet (scene->view, measure->to.x_m, measure->to.y_m, &x1, &y1);
  ut_scene_colour (cr, &scene->palette->ink, 1);
  cairo_set_line_width (cr, 1.5);
  cairo_move_to (cr, x0, y0);
  cairo_line_to (cr, x1, y1);
  for (int end = 0; end < 2; end++)
    {
      double x = end == 0 ? x0 : x1, y = end == 0 ? y0 : y1;

      cairo_move_to (cr, x - 6, y);
      cairo_line_to (cr, x + 6, y);
      cairo_move_to (cr, x, y - 6);
      cairo_line_to (cr, x, y + 6);
    }
  cairo_stroke (cr);
  width_px = ut_text_width (text, 12);
  ut_text_draw (cr, text, CLAMP (x1 + 12, 4, MAX (scene->view->width_px - width_px - 8, 4)), y1 + 8, 12, &scene->palette->ink, &scene->palette->sheet);
}

/* What to do next, along the upper edge. */
static void
draw_hint (const UtScene *scene, cairo_t *cr, const char *text)
{
  UtTextStyle style = { .size = 13, .width = MAX (scene->view->width_px - 120, 100), .wrap = TRUE, .plate = TRUE };

  ut_text_place (cr, text, &style, UT_CORNER_PX, UT_CORNER_PX, &scene->palette->ink, &scene->palette->sheet);
}

static void
draw_backdrop_work (const UtScene *scene, cairo_t *cr)
{
  const UtBackdropWork *work = scene->backdrop;
  double x0, y0, x1, y1;

  if (work == NULL)
    return;
  if (work->n_points > 0)
    {
      UtPoint to = work->n_points == 2 ? work->points[1] : work->next;

      ut_view_to_sheet (scene->view, work->points[0].x_m, work->points[0].y_m, &x0, &y0);
      ut_view_to_sheet (scene->view, to.x_m, to.y_m, &x1, &y1);
      ut_scene_colour (cr, &scene->palette->sheet, 0.8);
      cairo_set_line_width (cr, 4);
      cairo_move_to (cr, x0, y0);
      cairo_line_to (cr, x1, y1);
      cairo_stroke_preserve (cr);
      ut_scene_colour (cr, &scene->palette->ink, 1);
      cairo_set_line_width (cr, 1.5);
      cairo_stroke (cr);
      draw_corner (scene, cr, work->points[0].x_m, work->points[0].y_m, 3.5);
      draw_corner (scene, cr, to.x_m, to.y_m, 3.5);
    }
  g_autofree char *text = ut_backdrop_work_text (work, scene->desk);
  draw_hint (scene, cr, text);
}

static void
draw_selection (const UtScene *scene, cairo_t *cr)
{
  const UtPlan *plan = ut_desk_plan (scene->desk);
  UtSelection *selection = ut_desk_selection (scene->desk);

  for (guint i = 0; i < ut_selection_size (selection); i++)
    {
      const UtPick *pick = ut_selection_pick (selection, i);
      const UtRadio *radio = ut_plan_radio (plan, pick->kind, pick->id);
      double x_px, y_px;

      if (pick->kind == UT_KIND_WALL)
        draw_selected_wall (scene, cr, pick->id, ut_selection_size (selection) == 1);
      if (radio == NULL || !ut_scene_has (scene, plan, radio))
        continue;
      ut_scene_place (scene, radio, &x_px, &y_px);
      cairo_set_line_width (cr, 2);
      ut_scene_colour (cr, &scene->palette->ink, 1);
      cairo_rectangle (cr, x_px - UT_MARK_PX, y_px - UT_MARK_PX, 2 * UT_MARK_PX, 2 * UT_MARK_PX);
      cairo_stroke (cr);
      if (pick->kind == UT_KIND_CELL && ut_selection_size (selection) == 1)
        draw_power_handle (scene, cr, radio);
      if (ut_selection_size (selection) == 1 && ut_is_directional (plan, radio))
        draw_turn_handle (scene, cr, radio);
    }
}

static void
draw_band (const UtScene *scene, cairo_t *cr)
{
  double x0, y0, x1, y1;

  if (scene->drag->kind != UT_DRAG_BAND)
    return;
  ut_view_to_sheet (scene->view, scene->drag->x0_m, scene->drag->y0_m, &x0, &y0);
  ut_view_to_sheet (scene->view, scene->drag->x1_m, scene->drag->y1_m, &x1, &y1);
  cairo_rectangle (cr, MIN (x0, x1), MIN (y0, y1), fabs (x1 - x0), fabs (y1 - y0));
  ut_scene_colour (cr, &scene->palette->ink, 0.08);
  cairo_fill_preserve (cr);
  ut_scene_colour (cr, &scene->palette->ink, 1);
  cairo_set_line_width (cr, 1);
  cairo_set_dash (cr, (double[]){ 4, 3 }, 2, 0);
  cairo_stroke (cr);
  cairo_set_dash (cr, NULL, 0, 0);
}

void
ut_scene_take_marks (const UtScene *scene, GArray *boxes)
{
  take_power_handle (scene, boxes);
  take_wall_figure (scene, boxes);
}

/* The place of tools that are worked by keys. */
static void
draw_cursor (const UtScene *scene, cairo_t *cr)
{
  double x, y;

  if (!scene->cursor)
    return;
  ut_view_to_sheet (scene->view, scene->cursor_x_m, scene->cursor_y_m, &x, &y);
  for (int halo = 1; halo >= 0; halo--)
    {
      ut_scene_colour (cr, halo ? &scene->palette->sheet : &scene->palette->ink, 1);
      cairo_set_line_width (cr, halo ? 5 : 2);
      cairo_move_to (cr, x - 14, y);
      cairo_line_to (cr, x + 14, y);
      cairo_move_to (cr, x, y - 14);
      cairo_line_to (cr, x, y + 14);
      cairo_stroke (cr);
    }
}

void
ut_scene_draw_marks (const UtScene *scene, cairo_t *cr)
{
  draw_selection (scene, cr);
  draw_band (scene, cr);
  draw_serve (scene, cr);
  draw_wall_in_progress (scene, cr);
  draw_opening_in_progress (scene, cr);
  draw_measure (scene, cr);
  draw_backdrop_work (scene, cr);
  draw_cursor (scene, cr);
}
