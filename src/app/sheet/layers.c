#include "layers.h"

#include <math.h>
#include <string.h>

#include <glib/gi18n.h>

#include "labels.h"
#include "plan-painter.h"
#include "report.h"
#include "storey-edits.h"
#include "text.h"

#define MARK_PX 10.0
#define CORNER_PX 12.0

void
ut_still_layer_clear (UtStillLayer *layer)
{
  g_clear_pointer (&layer->node, gsk_render_node_unref);
  g_clear_pointer (&layer->plan, ut_plan_unref);
}

static UtPaintOptions
paint_options (const UtScene *scene)
{
  return (UtPaintOptions){
    .storey = scene->storey,
    .units_per_m = scene->view->scale_px_m,
    .origin_x = scene->view->origin_x_px,
    .origin_y = scene->view->origin_y_px,
    .mark = MARK_PX,
    .palette = scene->palette,
  };
}

static gboolean
same_view (const UtView *one, const UtView *other)
{
  return !(one->width_px < other->width_px || one->width_px > other->width_px || one->height_px < other->height_px
           || one->height_px > other->height_px || one->scale_px_m < other->scale_px_m || one->scale_px_m > other->scale_px_m
           || one->origin_x_px < other->origin_x_px || one->origin_x_px > other->origin_x_px || one->origin_y_px < other->origin_y_px
           || one->origin_y_px > other->origin_y_px);
}

static gboolean
same_ghost (const UtStillLayer *layer, const UtScene *scene, const UtPlan *plan)
{
  int below = ut_plan_storey_below (plan, scene->storey);

  return !scene->ghost
         || (ut_plan_storey_below (layer->plan, scene->storey) == below
             && (below < 0 || layer->plan->storeys->pdata[below] == plan->storeys->pdata[below]));
}

/* The kept picture still shows what it should: moving a radio changes neither storeys nor constructions. */
static gboolean
still_holds (const UtStillLayer *layer, const UtScene *scene, const UtPlan *plan)
{
  return layer->node != NULL && layer->storey == scene->storey && layer->palette == scene->palette && layer->device_scale == scene->device_scale
         && same_view (&layer->view, scene->view) && layer->plan->storeys->len == plan->storeys->len
         && layer->plan->storeys->pdata[scene->storey] == plan->storeys->pdata[scene->storey] && same_ghost (layer, scene, plan) && layer->plan->constructions->len == plan->constructions->len
         && memcmp (layer->plan->constructions->pdata, plan->constructions->pdata, plan->constructions->len * sizeof (gpointer)) == 0;
}

/* The walls of the storey below, faint. */
static void
draw_ghost (cairo_t *cr, const UtPlan *plan, UtPaintOptions options)
{
  int below = ut_plan_storey_below (plan, options.storey);

  if (below < 0)
    return;
  options.storey = (guint) below;
  options.grid = FALSE;
  cairo_push_group (cr);
  ut_paint_plan (cr, plan, NULL, &options);
  cairo_pop_group_to_source (cr);
  cairo_paint_with_alpha (cr, 0.22);
}

static void
make_still_layer (UtStillLayer *layer, const UtScene *scene, const UtPlan *plan)
{
  UtPaintOptions options = paint_options (scene);
  graphene_rect_t bounds = GRAPHENE_RECT_INIT (0, 0, (float) scene->view->width_px, (float) scene->view->height_px);
  int width = MAX ((int) ceil (scene->view->width_px), 1) * scene->device_scale, height = MAX ((int) ceil (scene->view->height_px), 1) * scene->device_scale;
  cairo_surface_t *picture = cairo_image_surface_create (CAIRO_FORMAT_RGB24, width, height);
  cairo_t *cr;

  cairo_surface_set_device_scale (picture, scene->device_scale, scene->device_scale);
  cr = cairo_create (picture);
  cairo_set_source_rgb (cr, scene->palette->sheet.red, scene->palette->sheet.green, scene->palette->sheet.blue);
  cairo_paint (cr);
  options.grid = options.walls = options.plates = TRUE;
  if (scene->ghost)
    draw_ghost (cr, plan, options);
  ut_paint_plan (cr, plan, NULL, &options);
  cairo_destroy (cr);

  ut_still_layer_clear (layer);
  layer->node = gsk_cairo_node_new (&bounds);
  cr = gsk_cairo_node_get_draw_context (layer->node);
  cairo_set_source_surface (cr, picture, 0, 0);
  cairo_paint (cr);
  cairo_destroy (cr);
  cairo_surface_destroy (picture);
  layer->plan = ut_plan_ref (plan);
  layer->view = *scene->view;
  layer->palette = scene->palette;
  layer->storey = scene->storey;
  layer->device_scale = scene->device_scale;
}

static void
set_colour (cairo_t *cr, const UtColour *colour, double alpha)
{
  cairo_set_source_rgba (cr, colour->red, colour->green, colour->blue, alpha);
}

static void
place_of (const UtScene *scene, const UtRadio *radio, double *x_px, double *y_px)
{
  ut_view_to_sheet (scene->view, radio->x_m, radio->y_m, x_px, y_px);
}

static gboolean
is_here (const UtScene *scene, const UtPlan *plan, const UtRadio *radio)
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

  place_of (scene, cell, &x_px, &y_px);
  x_px += UT_POWER_HANDLE_X_PX;
  set_colour (cr, &scene->palette->ink, 1);
  cairo_set_line_width (cr, 2);
  cairo_move_to (cr, x_px, y_px);
  cairo_line_to (cr, x_px, y_px - UT_POWER_HANDLE_PX);
  cairo_stroke (cr);
  cairo_arc (cr, x_px, y_px - knob_px, 5, 0, 2 * G_PI);
  set_colour (cr, &scene->palette->sheet, 1);
  cairo_fill_preserve (cr);
  set_colour (cr, &scene->palette->ink, 1);
  cairo_stroke (cr);
  ut_text_draw (cr, text, x_px + 9, y_px - knob_px - 7, 12, &scene->palette->ink, &scene->palette->sheet);
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
  if (cell == NULL || !is_here (scene, ut_desk_plan (scene->desk), cell))
    return;
  place_of (scene, cell, &x_px, &y_px);
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
  set_colour (cr, &scene->palette->sheet, 1);
  cairo_fill_preserve (cr);
  set_colour (cr, &scene->palette->ink, 1);
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
  set_colour (cr, &scene->palette->ink, 0.22);
  cairo_stroke (cr);
  for (guint i = 0; i < wall->points->len && only; i++)
    draw_corner (scene, cr, g_array_index (wall->points, UtPoint, i).x_m, g_array_index (wall->points, UtPoint, i).y_m, 4.5);
}

/* What the next point is drawn to, by a mark of its own. */
static void
draw_snap (const UtScene *scene, cairo_t *cr, double x, double y, UtSnap snap)
{
  set_colour (cr, &scene->palette->ink, 1);
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
      set_colour (cr, &scene->palette->ink, 0.8);
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
      set_colour (cr, &scene->palette->ink, 0.8);
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
          set_colour (cr, &scene->palette->ink, 0.5);
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
  set_colour (cr, &scene->palette->ink, 1);
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

  ut_text_place (cr, text, &style, CORNER_PX, CORNER_PX, &scene->palette->ink, &scene->palette->sheet);
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
      set_colour (cr, &scene->palette->sheet, 0.8);
      cairo_set_line_width (cr, 4);
      cairo_move_to (cr, x0, y0);
      cairo_line_to (cr, x1, y1);
      cairo_stroke_preserve (cr);
      set_colour (cr, &scene->palette->ink, 1);
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
      if (radio == NULL || !is_here (scene, plan, radio))
        continue;
      place_of (scene, radio, &x_px, &y_px);
      cairo_set_line_width (cr, 2);
      set_colour (cr, &scene->palette->ink, 1);
      cairo_rectangle (cr, x_px - MARK_PX, y_px - MARK_PX, 2 * MARK_PX, 2 * MARK_PX);
      cairo_stroke (cr);
      if (pick->kind == UT_KIND_CELL && ut_selection_size (selection) == 1)
        draw_power_handle (scene, cr, radio);
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
  set_colour (cr, &scene->palette->ink, 0.08);
  cairo_fill_preserve (cr);
  set_colour (cr, &scene->palette->ink, 1);
  cairo_set_line_width (cr, 1);
  cairo_set_dash (cr, (double[]){ 4, 3 }, 2, 0);
  cairo_stroke (cr);
  cairo_set_dash (cr, NULL, 0, 0);
}

/* ---- who interferes with the selected link ---- */

static void
draw_arrow (cairo_t *cr, double x0, double y0, double x1, double y1, double width)
{
  double length = hypot (x1 - x0, y1 - y0), head = MIN (6 + 2 * width, length / 2);
  double ux = (x1 - x0) / MAX (length, 1), uy = (y1 - y0) / MAX (length, 1);

  cairo_set_line_width (cr, width);
  cairo_move_to (cr, x0, y0);
  cairo_line_to (cr, x1 - ux * head, y1 - uy * head);
  cairo_stroke (cr);
  cairo_move_to (cr, x1, y1);
  cairo_line_to (cr, x1 - ux * head - uy * head / 2, y1 - uy * head + ux * head / 2);
  cairo_line_to (cr, x1 - ux * head + uy * head / 2, y1 - uy * head - ux * head / 2);
  cairo_close_path (cr);
  cairo_fill (cr);
}

/* The link of the one terminal that is selected, or NULL. */
static const UtLinkAnswer *
selected_link (const UtScene *scene, const UtStudy *study)
{
  UtSelection *selection = ut_desk_selection (scene->desk);

  if (study == NULL || ut_selection_size (selection) != 1 || ut_selection_pick (selection, 0)->kind != UT_KIND_TERMINAL)
    return NULL;
  for (guint i = 0; i < study->links->len; i++)
    {
      const UtLinkAnswer *link = ut_study_link (study, i);

      if (g_str_equal (ut_plan_terminal (study->gains->plan, link->terminal)->radio.id, ut_selection_pick (selection, 0)->id))
        return link->cell >= 0 ? link : NULL;
    }
  return NULL;
}

/* Beside the arrow, where it is free. */
static void
label_arrow (const UtScene *scene, cairo_t *cr, GArray *boxes, const char *text, double x0, double y0, double x1, double y1)
{
  static const double parts[] = { 0.35, 0.25, 0.45, 0.55, 0.15 };
  double corners[2 * G_N_ELEMENTS (parts)][2], width = ut_text_width (text, 12), x, y;

  for (gsize i = 0; i < G_N_ELEMENTS (parts); i++)
    {
      double on_x = x0 + parts[i] * (x1 - x0), on_y = y0 + parts[i] * (y1 - y0);

      corners[2 * i][0] = on_x + 6;
      corners[2 * i][1] = on_y - 7;
      corners[2 * i + 1][0] = on_x - width - 6;
      corners[2 * i + 1][1] = on_y - 7;
    }
  if (ut_boxes_place (boxes, (const double (*)[2]) corners, G_N_ELEMENTS (corners), width, 16, &x, &y))
    ut_text_draw (cr, text, x, y, 12, &scene->palette->ink, &scene->palette->sheet);
}

/* An arrow from each interferer to the receiver: its width the share of the interference, its dBm beside it. Those under a hundredth are left out. */
static void
draw_interferers (const UtScene *scene, cairo_t *cr, GArray *boxes)
{
  const UtStudy *study = ut_desk_answer (scene->desk);
  const UtLinkAnswer *link = selected_link (scene, study);
  const UtPlan *plan = ut_desk_plan (scene->desk);
  gboolean down;
  const UtRadio *receiver;
  double x1, y1;

  if (link == NULL)
    return;
  down = study->question.direction == UT_DIRECTION_DOWN;
  receiver = down ? &ut_plan_terminal (plan, link->terminal)->radio : &ut_plan_cell (plan, (guint) link->cell)->radio;
  place_of (scene, receiver, &x1, &y1);
  for (guint i = link->interferers->len; i-- > 0;)
    {
      const UtInterferer *one = &g_array_index (link->interferers, UtInterferer, i);
      const UtRadio *sender = ut_plan_radio (plan, down ? UT_KIND_CELL : UT_KIND_TERMINAL, one->id);
      double share = pow (10, (one->dbm - link->interference_dbm) / 10), x0, y0;
      g_autofree char *figure = ut_report_figure (one->dbm, 1);
      g_autofree char *text = g_strdup_printf ("%s %s dBm", one->id, figure);

      if (sender == NULL || share < 0.01 || !is_here (scene, plan, sender) || !is_here (scene, plan, receiver))
        continue;
      place_of (scene, sender, &x0, &y0);
      set_colour (cr, &scene->palette->ink, 0.45);
      draw_arrow (cr, x0, y0, x1, y1, 1 + 7 * share);
      label_arrow (scene, cr, boxes, text, x0, y0, x1, y1);
    }
}

/* ---- corner: key, scale bar, north ---- */

#define KEY_TEXT_PX 11.0
#define KEY_ROW_PX 20.0
#define KEY_LINE_PX 28.0
static const UtMarginClass key_classes[] = { UT_MARGIN_FAR_SHORT, UT_MARGIN_SHORT, UT_MARGIN_TIGHT, UT_MARGIN_EASY };

static double
key_entry_width (UtMarginClass margin)
{
  return KEY_LINE_PX + 6 + ut_text_width (ut_margin_words (margin), KEY_TEXT_PX) + 14;
}

/* The key is a strip along the lower edge, in as many rows as the width asks for: it hides nothing of the plan that a fitted view shows. */
static guint
key_rows (double width_px)
{
  double x = 0;
  guint rows = 1;

  for (gsize i = 0; i < G_N_ELEMENTS (key_classes); i++)
    {
      double entry = key_entry_width (key_classes[i]);

      if (x + entry > width_px - 2 * CORNER_PX && x > 0)
        {
          rows++;
          x = 0;
        }
      x += entry;
    }
  return rows;
}

double
ut_scene_key_height (double width_px)
{
  return KEY_ROW_PX * key_rows (width_px) + 6;
}

static void
draw_key_entry (const UtScene *scene, cairo_t *cr, UtMarginClass margin, double x, double y)
{
  double dashes[4], width;
  int n_dashes;

  ut_margin_line (margin, dashes, &n_dashes, &width);
  for (int k = 0; k < n_dashes; k++)
    dashes[k] *= MARK_PX;
  cairo_set_dash (cr, dashes, n_dashes, 0);
  cairo_set_line_width (cr, width * MARK_PX);
  set_colour (cr, &scene->palette->margin[margin], 1);
  cairo_move_to (cr, x, y);
  cairo_line_to (cr, x + KEY_LINE_PX, y);
  cairo_stroke (cr);
  cairo_set_dash (cr, NULL, 0, 0);
  ut_text_draw (cr, ut_margin_words (margin), x + KEY_LINE_PX + 6, y - 7, KEY_TEXT_PX, &scene->palette->ink, NULL);
}

static void
draw_key (const UtScene *scene, cairo_t *cr)
{
  double width_px = scene->view->width_px, height_px = ut_scene_key_height (width_px), top_px = scene->view->height_px - height_px;
  double x = CORNER_PX, y = top_px + 3 + KEY_ROW_PX / 2;

  set_colour (cr, &scene->palette->sheet, 1);
  cairo_rectangle (cr, 0, top_px, width_px, height_px);
  cairo_fill (cr);
  set_colour (cr, &scene->palette->faint_ink, 0.5);
  cairo_set_line_width (cr, 1);
  cairo_move_to (cr, 0, top_px + 0.5);
  cairo_line_to (cr, width_px, top_px + 0.5);
  cairo_stroke (cr);
  for (gsize i = 0; i < G_N_ELEMENTS (key_classes); i++)
    {
      double entry = key_entry_width (key_classes[i]);

      if (x + entry > width_px - CORNER_PX && x > CORNER_PX)
        {
          x = CORNER_PX;
          y += KEY_ROW_PX;
        }
      draw_key_entry (scene, cr, key_classes[i], x, y);
      x += entry;
    }
}

static void
draw_scale_bar (const UtScene *scene, cairo_t *cr)
{
  double length_m = ut_view_round_length_m (scene->view, 120), length_px = length_m * scene->view->scale_px_m;
  double x = CORNER_PX, y = scene->view->height_px - ut_scene_key_height (scene->view->width_px) - CORNER_PX;
  g_autofree char *text = length_m < 1 ? g_strdup_printf ("%g cm", length_m * 100) : g_strdup_printf ("%g m", length_m);

  set_colour (cr, &scene->palette->ink, 1);
  cairo_set_line_width (cr, 2);
  cairo_move_to (cr, x, y - 6);
  cairo_line_to (cr, x, y);
  cairo_line_to (cr, x + length_px, y);
  cairo_line_to (cr, x + length_px, y - 6);
  cairo_stroke (cr);
  ut_text_draw (cr, text, x + length_px + 8, y - 11, 12, &scene->palette->ink, &scene->palette->sheet);
}

static void
draw_north (const UtScene *scene, cairo_t *cr)
{
  double turn = ut_desk_plan (scene->desk)->site->north_deg * G_PI / 180;

  cairo_save (cr);
  cairo_translate (cr, scene->view->width_px - 28, 34);
  cairo_rotate (cr, turn);
  set_colour (cr, &scene->palette->ink, 1);
  cairo_move_to (cr, 0, -16);
  cairo_line_to (cr, 6, 10);
  cairo_line_to (cr, 0, 5);
  cairo_line_to (cr, -6, 10);
  cairo_close_path (cr);
  cairo_fill (cr);
  cairo_restore (cr);
  ut_text_draw (cr, "N", scene->view->width_px - 32, 48, 12, &scene->palette->ink, &scene->palette->sheet);
}

/* ---- all of it ---- */

/* While an answer is being renewed the links of the old one stay, faint and without figures, where they were. */
static void
draw_old_links (const UtScene *scene, cairo_t *cr, UtPaintOptions options)
{
  UtStudy *old = ut_solving_study (ut_desk_solving (scene->desk));

  if (ut_desk_answer (scene->desk) != NULL || old == NULL || scene->storey >= old->gains->plan->storeys->len)
    return;
  options.radios = options.labels = FALSE;
  cairo_push_group (cr);
  ut_paint_plan (cr, old->gains->plan, old, &options);
  cairo_pop_group_to_source (cr);
  cairo_paint_with_alpha (cr, 0.3);
}

static void
draw_living (const UtScene *scene, cairo_t *cr)
{
  const UtPlan *plan = ut_desk_plan (scene->desk);
  UtPaintOptions options = paint_options (scene);

  g_autoptr (GArray) boxes = ut_boxes_new ();

  options.links = options.radios = options.labels = TRUE;
  options.plates = TRUE;
  options.boxes = boxes;
  ut_paint_take_radios (boxes, plan, &options);
  take_power_handle (scene, boxes);
  take_wall_figure (scene, boxes);
  draw_interferers (scene, cr, boxes);
  draw_old_links (scene, cr, options);
  ut_paint_plan (cr, plan, ut_desk_answer (scene->desk), &options);
  draw_selection (scene, cr);
  draw_band (scene, cr);
  draw_wall_in_progress (scene, cr);
  draw_opening_in_progress (scene, cr);
  draw_measure (scene, cr);
  draw_backdrop_work (scene, cr);
  draw_key (scene, cr);
  draw_scale_bar (scene, cr);
  draw_north (scene, cr);
  if (scene->focused)
    {
      set_colour (cr, &scene->palette->ink, 0.6);
      cairo_set_line_width (cr, 2);
      cairo_rectangle (cr, 1, 1, scene->view->width_px - 2, scene->view->height_px - 2);
      cairo_stroke (cr);
    }
}

void
ut_scene_snapshot (const UtScene *scene, UtStillLayer *still, GtkSnapshot *snapshot)
{
  const UtPlan *plan = ut_desk_plan (scene->desk);
  graphene_rect_t bounds = GRAPHENE_RECT_INIT (0, 0, (float) scene->view->width_px, (float) scene->view->height_px);
  cairo_t *cr;

  if (!still_holds (still, scene, plan))
    make_still_layer (still, scene, plan);
  gtk_snapshot_append_node (snapshot, still->node);
  cr = gtk_snapshot_append_cairo (snapshot, &bounds);
  draw_living (scene, cr);
  cairo_destroy (cr);
}
