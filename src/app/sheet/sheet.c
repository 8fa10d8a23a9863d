#include "sheet.h"

#include <math.h>

#include <glib/gi18n.h>

#include "hit.h"
#include "layers.h"
#include "measure-tool.h"
#include "plan-painter.h"
#include "report.h"
#include "tray.h"
#include "wall-tool.h"

#define FIT_MARGIN_PX 48
#define ZOOM_STEP 1.2
#define NUDGE_M 0.1

struct _UtSheet
{
  GtkWidget parent;
  UtDesk *desk;
  UtView view;
  gboolean fitted; /* the whole storey is shown, and stays so when the size changes */
  const UtPalette *palette;
  UtToolKind tool;
  UtSelectDrag drag;
  UtWallDraw wall;       /* of the wall tool */
  UtOpeningDraw opening; /* of the opening tool */
  UtMeasure measure;     /* of the measure tool */
  UtBackdropWork backdrop; /* of the backdrop tool */
  UtStillLayer still;
  double pointer_x_px, pointer_y_px; /* last seen */
  double begin_x_px, begin_y_px;     /* of the drag, on the sheet */
  double pan_x_px, pan_y_px;         /* how far the pan in progress has gone */
  gboolean panning, space_held, pointer_inside, ghost;
  guint repeats; /* clicks on one place */
  double pinch_scale;
  double menu_x_px, menu_y_px; /* where the menu was asked for */
  GtkWidget *menu; /* popover of what can be done here; NULL: none was set */
};

G_DEFINE_FINAL_TYPE (UtSheet, ut_sheet, GTK_TYPE_WIDGET)

enum { TOOL_CHANGED, VIEW_CHANGED, N_SIGNALS };
static guint signals[N_SIGNALS];

static guint
shown_storey (UtSheet *self)
{
  return self->desk != NULL ? ut_desk_storey (self->desk) : 0;
}

/* ---- what it says of itself ---- */

static void
describe (UtSheet *self)
{
  const UtPlan *plan = ut_desk_plan (self->desk);
  UtSelection *selection = ut_desk_selection (self->desk);
  UtStudy *study = ut_desk_answer (self->desk);
  GString *text = g_string_new (NULL);
  g_autofree char *sentence = study != NULL ? ut_report_verdict_sentence (study) : g_strdup (_ ("Being renewed."));

  g_string_append_printf (text, _ ("%u cells, %u terminals"), plan->cells->len, plan->terminals->len);
  for (guint i = 0; i < MIN (ut_selection_size (selection), 3); i++)
    {
      const UtPick *pick = ut_selection_pick (selection, i);
      const UtRadio *radio = ut_plan_radio (plan, pick->kind, pick->id);
      guint storey, wall;

      if (pick->kind == UT_KIND_WALL && ut_plan_find_picked_wall (plan, pick->id, &storey, &wall))
        g_string_append_printf (text, _ ("; wall %s selected"), ((const UtWall *) ut_plan_storey (plan, storey)->walls->pdata[wall])->id);
      if (radio == NULL)
        continue;
      g_autofree char *x = ut_report_figure (radio->x_m, 2), *y = ut_report_figure (radio->y_m, 2);
      g_string_append_printf (text, _ ("; %s selected at %s, %s m"), radio->id, x, y);
    }
  if (self->tool == UT_TOOL_MEASURE)
    {
      g_autofree char *measured = ut_measure_text (&self->measure, self->desk);

      if (measured != NULL)
        g_string_append_printf (text, "; %s", measured);
    }
  if (self->tool == UT_TOOL_BACKDROP)
    {
      g_autofree char *work = ut_backdrop_work_text (&self->backdrop, self->desk);

      g_string_append_printf (text, "; %s", work);
    }
  g_string_append_printf (text, ". %s", sentence);
  gtk_accessible_update_property (GTK_ACCESSIBLE (self), GTK_ACCESSIBLE_PROPERTY_DESCRIPTION, text->str, -1);
  g_string_free (text, TRUE);
}

static void
refresh (UtSheet *self)
{
  if (self->desk == NULL)
    return;
  describe (self);
  gtk_widget_queue_draw (GTK_WIDGET (self));
}

/* ---- view ---- */

static void
show_view (UtSheet *self)
{
  gtk_widget_queue_draw (GTK_WIDGET (self));
  g_signal_emit (self, signals[VIEW_CHANGED], 0);
}

void
ut_sheet_fit (UtSheet *self)
{
  double x0, y0, x1, y1;

  self->fitted = TRUE;
  if (self->desk == NULL || !ut_plan_extent (ut_desk_plan (self->desk), shown_storey (self), &x0, &y0, &x1, &y1))
    ut_view_init (&self->view, self->view.width_px, self->view.height_px);
  else
    {
      /* Above the key. */
      UtView above = self->view;

      above.height_px -= ut_scene_key_height (above.width_px);
      ut_view_fit (&above, x0, y0, x1, y1, FIT_MARGIN_PX);
      above.height_px = self->view.height_px;
      self->view = above;
    }
  show_view (self);
}

static void
zoom_about (UtSheet *self, double factor, double x_px, double y_px)
{
  self->fitted = FALSE;
  ut_view_zoom (&self->view, factor, x_px, y_px);
  show_view (self);
}

void
ut_sheet_zoom (UtSheet *self, double factor)
{
  zoom_about (self, factor, self->view.width_px / 2, self->view.height_px / 2);
}

const UtView *
ut_sheet_view (UtSheet *self)
{
  return &self->view;
}

void
ut_sheet_pointer (UtSheet *self, double *x_m, double *y_m)
{
  gboolean inside = self->pointer_inside;

  ut_view_to_plan (&self->view, inside ? self->pointer_x_px : self->view.width_px / 2, inside ? self->pointer_y_px : self->view.height_px / 2, x_m, y_m);
}

void
ut_sheet_forget_layers (UtSheet *self)
{
  ut_still_layer_clear (&self->still);
  gtk_widget_queue_draw (GTK_WIDGET (self));
}

/* Another storey: all of it. */
static void
show_storey (UtSheet *self)
{
  ut_select_cancel (&self->drag, self->desk);
  ut_wall_draw_clear (&self->wall);
  ut_backdrop_work_clear (&self->backdrop);
  self->backdrop.storey = shown_storey (self);
  self->opening.active = self->measure.active = FALSE;
  ut_sheet_fit (self);
  refresh (self);
}

static void
ut_sheet_size_allocate (GtkWidget *widget, int width, int height, int baseline)
{
  UtSheet *self = UT_SHEET (widget);

  (void) baseline;
  if (self->menu != NULL)
    gtk_popover_present (GTK_POPOVER (self->menu));
  if (self->drag.kind != UT_DRAG_NONE)
    {
      /* The plan stays where the pointer holds it. */
      self->view.width_px = width;
      self->view.height_px = height;
    }
  else
    ut_view_resize (&self->view, width, height);
  if (self->fitted && self->drag.kind == UT_DRAG_NONE)
    ut_sheet_fit (self);
  else
    show_view (self);
}

static void
ut_sheet_snapshot (GtkWidget *widget, GtkSnapshot *snapshot)
{
  UtSheet *self = UT_SHEET (widget);
  UtScene scene = {
    .desk = self->desk,
    .view = &self->view,
    .palette = self->palette,
    .storey = shown_storey (self),
    .drag = &self->drag,
    .wall = self->tool == UT_TOOL_WALL ? &self->wall : NULL,
    .opening = self->tool == UT_TOOL_OPENING ? &self->opening : NULL,
    .measure = self->tool == UT_TOOL_MEASURE ? &self->measure : NULL,
    .backdrop = self->tool == UT_TOOL_BACKDROP ? &self->backdrop : NULL,
    .ghost = self->ghost,
    .focused = gtk_widget_has_visible_focus (widget),
    .device_scale = gtk_widget_get_scale_factor (widget),
  };

  if (self->desk == NULL || ut_desk_plan (self->desk)->storeys->len == 0)
    return;
  gtk_snapshot_push_clip (snapshot, &GRAPHENE_RECT_INIT (0, 0, (float) self->view.width_px, (float) self->view.height_px));
  ut_scene_snapshot (&scene, &self->still, snapshot);
  gtk_snapshot_pop (snapshot);
}

/* ---- gestures: they only translate events ---- */

static UtPointer
pointer_at (UtSheet *self, double x_px, double y_px, GdkModifierType state)
{
  UtPointer pointer = {
    .px_per_m = self->view.scale_px_m,
    .storey = shown_storey (self),
    .add = (state & GDK_SHIFT_MASK) != 0,
    .no_snap = (state & GDK_ALT_MASK) != 0,
  };

  ut_view_to_plan (&self->view, x_px, y_px, &pointer.x_m, &pointer.y_m);
  return pointer;
}

static void
place_at (UtSheet *self, UtRadioKind kind, double x_px, double y_px)
{
  const UtPlan *plan = ut_desk_plan (self->desk);
  double x_m, y_m, step_m = ut_snap_step_m (self->view.scale_px_m);

  ut_view_to_plan (&self->view, x_px, y_px, &x_m, &y_m);
  ut_desk_place (self->desk, kind, ut_plan_storey (plan, shown_storey (self))->id, round (x_m / step_m) * step_m, round (y_m / step_m) * step_m);
}

static void
pressed_cb (GtkGestureClick *gesture, int n_press, double x_px, double y_px, UtSheet *self)
{
  (void) gesture;
  (void) x_px;
  (void) y_px;
  self->repeats = (guint) MAX (n_press - 1, 0);
  gtk_widget_grab_focus (GTK_WIDGET (self));
}

static void
released_cb (GtkGestureClick *gesture, int n_press, double x_px, double y_px, UtSheet *self)
{
  UtPointer pointer = pointer_at (self, x_px, y_px, gtk_event_controller_get_current_event_state (GTK_EVENT_CONTROLLER (gesture)));

  (void) n_press;
  if (self->desk == NULL || self->space_held)
    return;
  if (self->tool == UT_TOOL_SELECT)
    ut_select_click (self->desk, &pointer, self->repeats);
  else if (self->tool == UT_TOOL_WALL)
    {
      ut_wall_draw_click (&self->wall, self->desk, &pointer, self->repeats > 0);
      gtk_widget_queue_draw (GTK_WIDGET (self));
    }
  else if (self->tool == UT_TOOL_BACKDROP)
    {
      ut_backdrop_work_click (&self->backdrop, self->desk, &pointer);
      describe (self);
      gtk_widget_queue_draw (GTK_WIDGET (self));
    }
  else if (self->tool == UT_TOOL_CELL || self->tool == UT_TOOL_TERMINAL)
    {
      place_at (self, self->tool == UT_TOOL_CELL ? UT_KIND_CELL : UT_KIND_TERMINAL, x_px, y_px);
      ut_sheet_set_tool (self, UT_TOOL_SELECT);
    }
}

static void
drag_begin_cb (GtkGestureDrag *gesture, double x_px, double y_px, UtSheet *self)
{
  UtPointer pointer = pointer_at (self, x_px, y_px, gtk_event_controller_get_current_event_state (GTK_EVENT_CONTROLLER (gesture)));

  gtk_widget_grab_focus (GTK_WIDGET (self));
  self->panning = self->space_held;
  self->pan_x_px = self->pan_y_px = 0;
  self->begin_x_px = x_px;
  self->begin_y_px = y_px;
  if (self->desk != NULL && !self->panning && self->tool == UT_TOOL_SELECT)
    {
      ut_select_cancel (&self->drag, self->desk);
      ut_select_begin (&self->drag, self->desk, &pointer);
    }
  if (self->desk != NULL && !self->panning && self->tool == UT_TOOL_OPENING)
    ut_opening_draw_begin (&self->opening, self->desk, &pointer);
  if (self->desk != NULL && !self->panning && self->tool == UT_TOOL_MEASURE)
    {
      ut_measure_begin (&self->measure, self->desk, &pointer);
      gtk_widget_queue_draw (GTK_WIDGET (self));
    }
  if (self->desk != NULL && !self->panning && self->tool == UT_TOOL_BACKDROP)
    ut_backdrop_work_drag (&self->backdrop, self->desk, &pointer, TRUE);
}

static void
pan_to (UtSheet *self, double x_px, double y_px)
{
  self->fitted = FALSE;
  ut_view_pan (&self->view, x_px - self->pan_x_px, y_px - self->pan_y_px);
  self->pan_x_px = x_px;
  self->pan_y_px = y_px;
  show_view (self);
}

static void
drag_update_cb (GtkGestureDrag *gesture, double dx_px, double dy_px, UtSheet *self)
{
  UtPointer pointer;

  if (self->panning)
    {
      pan_to (self, dx_px, dy_px);
      return;
    }
  if (self->opening.active || (self->tool == UT_TOOL_MEASURE && self->measure.active))
    {
      pointer = pointer_at (self, self->begin_x_px + dx_px, self->begin_y_px + dy_px,
                            gtk_event_controller_get_current_event_state (GTK_EVENT_CONTROLLER (gesture)));
      if (self->opening.active)
        ut_opening_draw_update (&self->opening, self->desk, &pointer);
      else
        ut_measure_update (&self->measure, self->desk, &pointer);
      describe (self);
      gtk_widget_queue_draw (GTK_WIDGET (self));
      return;
    }
  if (self->tool == UT_TOOL_BACKDROP && (ut_desk_has_draft (self->desk) || hypot (dx_px, dy_px) >= 4))
    {
      gtk_gesture_set_state (GTK_GESTURE (gesture), GTK_EVENT_SEQUENCE_CLAIMED);
      pointer = pointer_at (self, self->begin_x_px + dx_px, self->begin_y_px + dy_px, 0);
      ut_backdrop_work_drag (&self->backdrop, self->desk, &pointer, FALSE);
      return;
    }
  /* What moves less than this is still a click. */
  if (self->drag.kind == UT_DRAG_NONE || (!ut_desk_has_draft (self->desk) && self->drag.kind != UT_DRAG_BAND && hypot (dx_px, dy_px) < 4))
    return;
  gtk_gesture_set_state (GTK_GESTURE (gesture), GTK_EVENT_SEQUENCE_CLAIMED);
  pointer = pointer_at (self,
                        self->begin_x_px + dx_px,
                        self->begin_y_px + dy_px,
                        gtk_event_controller_get_current_event_state (GTK_EVENT_CONTROLLER (gesture)));
  if (self->drag.kind == UT_DRAG_BAND && hypot (dx_px, dy_px) < 4)
    return;
  ut_select_update (&self->drag, self->desk, &pointer);
  gtk_widget_queue_draw (GTK_WIDGET (self));
}

static void
drag_end_cb (GtkGestureDrag *gesture, double dx_px, double dy_px, UtSheet *self)
{
  (void) gesture;
  (void) dx_px;
  (void) dy_px;
  self->panning = FALSE;
  if (self->drag.kind != UT_DRAG_NONE)
    ut_select_end (&self->drag, self->desk);
  if (self->opening.active)
    ut_opening_draw_end (&self->opening, self->desk);
  if (self->desk != NULL)
    ut_backdrop_work_drop (&self->backdrop, self->desk);
  gtk_widget_queue_draw (GTK_WIDGET (self));
}

static void
drag_cancel_cb (GtkGesture *gesture, GdkEventSequence *sequence, UtSheet *self)
{
  (void) gesture;
  (void) sequence;
  self->panning = self->opening.active = FALSE;
  if (self->desk != NULL)
    ut_select_cancel (&self->drag, self->desk);
}

/* ---- the menu ---- */

static void
show_menu (UtSheet *self, double x_px, double y_px)
{
  if (self->menu == NULL)
    return;
  self->menu_x_px = x_px;
  self->menu_y_px = y_px;
  gtk_popover_set_pointing_to (GTK_POPOVER (self->menu), &(GdkRectangle){ (int) x_px, (int) y_px, 1, 1 });
  gtk_popover_popup (GTK_POPOVER (self->menu));
}

/* What is under the pointer is selected first, unless it is already. */
static void
menu_pressed_cb (GtkGestureClick *gesture, int n_press, double x_px, double y_px, UtSheet *self)
{
  UtPointer pointer = pointer_at (self, x_px, y_px, 0);

  (void) n_press;
  if (self->desk == NULL)
    return;
  gtk_gesture_set_state (GTK_GESTURE (gesture), GTK_EVENT_SEQUENCE_CLAIMED);
  gtk_widget_grab_focus (GTK_WIDGET (self));
  ut_select_for_menu (self->desk, &pointer);
  show_menu (self, x_px, y_px);
}

static void
menu_cb (GtkWidget *widget, const char *name, GVariant *parameter)
{
  UtSheet *self = UT_SHEET (widget);

  (void) name;
  (void) parameter;
  show_menu (self, self->view.width_px / 2, self->view.height_px / 2);
}

void
ut_sheet_set_menu (UtSheet *self, GMenuModel *menu)
{
  g_clear_pointer (&self->menu, gtk_widget_unparent);
  self->menu = gtk_popover_menu_new_from_model (menu);
  gtk_popover_set_has_arrow (GTK_POPOVER (self->menu), FALSE);
  gtk_widget_set_halign (self->menu, GTK_ALIGN_START);
  gtk_widget_set_parent (self->menu, GTK_WIDGET (self));
}

void
ut_sheet_menu_point (UtSheet *self, double *x_m, double *y_m)
{
  ut_view_to_plan (&self->view, self->menu_x_px, self->menu_y_px, x_m, y_m);
}

static void
pan_begin_cb (GtkGestureDrag *gesture, double x_px, double y_px, UtSheet *self)
{
  (void) gesture;
  (void) x_px;
  (void) y_px;
  self->pan_x_px = self->pan_y_px = 0;
}

static void
pan_update_cb (GtkGestureDrag *gesture, double dx_px, double dy_px, UtSheet *self)
{
  (void) gesture;
  pan_to (self, dx_px, dy_px);
}

static void
motion_cb (GtkEventControllerMotion *controller, double x_px, double y_px, UtSheet *self)
{
  self->pointer_x_px = x_px;
  self->pointer_y_px = y_px;
  self->pointer_inside = TRUE;
  if (self->desk != NULL && self->tool == UT_TOOL_WALL)
    {
      UtPointer pointer = pointer_at (self, x_px, y_px, gtk_event_controller_get_current_event_state (GTK_EVENT_CONTROLLER (controller)));

      ut_wall_draw_hover (&self->wall, self->desk, &pointer);
      gtk_widget_queue_draw (GTK_WIDGET (self));
    }
  if (self->desk != NULL && self->tool == UT_TOOL_BACKDROP)
    {
      UtPointer pointer = pointer_at (self, x_px, y_px, 0);

      ut_backdrop_work_hover (&self->backdrop, self->desk, &pointer);
      gtk_widget_queue_draw (GTK_WIDGET (self));
    }
}

static void
left_cb (GtkEventControllerMotion *controller, UtSheet *self)
{
  (void) controller;
  self->pointer_inside = FALSE;
}

/* The wheel over the knob's cell, when it is the one selected, turns its power. */
static gboolean
scroll_power (UtSheet *self, double dy)
{
  UtSelection *selection = ut_desk_selection (self->desk);
  const UtPlan *plan = ut_desk_plan (self->desk);
  const UtRadio *cell;
  double x_px, y_px;

  if (ut_selection_size (selection) != 1 || ut_selection_pick (selection, 0)->kind != UT_KIND_CELL)
    return FALSE;
  cell = ut_plan_radio (plan, UT_KIND_CELL, ut_selection_pick (selection, 0)->id);
  if (cell == NULL || ut_plan_find_storey (plan, cell->storey) != (int) shown_storey (self))
    return FALSE;
  ut_view_to_sheet (&self->view, cell->x_m, cell->y_m, &x_px, &y_px);
  if (fabs (self->pointer_x_px - x_px - UT_POWER_HANDLE_X_PX) > 10 || self->pointer_y_px > y_px + 10 || self->pointer_y_px < y_px - UT_POWER_HANDLE_PX - 10)
    return FALSE;
  g_autofree char *label = g_strconcat (_ ("Set Power of"), " ", cell->id, NULL);
  g_autofree char *coalesce = g_strconcat ("power\n", cell->id, NULL);
  ut_desk_apply (self->desk,
                 ut_plan_with_set_power (plan, UT_KIND_CELL, cell->id, cell->power_dbm - dy),
                 label,
                 coalesce);
  return TRUE;
}

static gboolean
scroll_cb (GtkEventControllerScroll *controller, double dx, double dy, UtSheet *self)
{
  (void) dx;
  if (self->desk == NULL)
    return GDK_EVENT_PROPAGATE;
  /* A touchpad gives pixels, a wheel gives clicks. */
  if (gtk_event_controller_scroll_get_unit (controller) == GDK_SCROLL_UNIT_SURFACE)
    dy /= 40;
  else if (scroll_power (self, dy))
    return GDK_EVENT_STOP;
  zoom_about (self, pow (ZOOM_STEP, -dy), self->pointer_x_px, self->pointer_y_px);
  return GDK_EVENT_STOP;
}

static void
pinch_begin_cb (GtkGesture *gesture, GdkEventSequence *sequence, UtSheet *self)
{
  (void) sequence;
  self->pinch_scale = self->view.scale_px_m;
  gtk_gesture_set_state (gesture, GTK_EVENT_SEQUENCE_CLAIMED);
}

static void
pinch_cb (GtkGestureZoom *gesture, double scale, UtSheet *self)
{
  double x_px = self->view.width_px / 2, y_px = self->view.height_px / 2;

  gtk_gesture_get_bounding_box_center (GTK_GESTURE (gesture), &x_px, &y_px);
  if (!(self->pinch_scale > 0))
    self->pinch_scale = self->view.scale_px_m;
  zoom_about (self, self->pinch_scale * scale / self->view.scale_px_m, x_px, y_px);
}

/* Keys of the wall tool: a length, Enter, Escape. */
static gboolean
wall_key (UtSheet *self, guint key, GdkModifierType state)
{
  if ((state & (GDK_CONTROL_MASK | GDK_ALT_MASK)) != 0)
    return FALSE;
  switch (key)
    {
    case GDK_KEY_Return:
    case GDK_KEY_KP_Enter:
      ut_wall_draw_enter (&self->wall, self->desk);
      return TRUE;
    case GDK_KEY_Escape:
      return ut_wall_draw_back (&self->wall);
    case GDK_KEY_BackSpace:
      if (!ut_wall_draw_type (&self->wall, '\b'))
        ut_wall_draw_back (&self->wall);
      return TRUE; /* never Delete of what is selected */
    default:
      return ut_wall_draw_type (&self->wall, gdk_keyval_to_unicode (key));
    }
}

/* Keys of the backdrop tool: a length, Enter, Escape. */
static gboolean
backdrop_key (UtSheet *self, guint key, GdkModifierType state)
{
  if ((state & (GDK_CONTROL_MASK | GDK_ALT_MASK)) != 0)
    return FALSE;
  switch (key)
    {
    case GDK_KEY_Return:
    case GDK_KEY_KP_Enter:
      ut_backdrop_work_enter (&self->backdrop, self->desk, (state & GDK_SHIFT_MASK) != 0);
      return TRUE;
    case GDK_KEY_Escape:
      return ut_backdrop_work_back (&self->backdrop);
    case GDK_KEY_BackSpace:
      ut_backdrop_work_type (&self->backdrop, '\b');
      return TRUE; /* never Delete of what is selected */
    default:
      return ut_backdrop_work_type (&self->backdrop, gdk_keyval_to_unicode (key));
    }
}

static gboolean
key_cb (GtkEventControllerKey *controller, guint key, guint code, GdkModifierType state, UtSheet *self)
{
  (void) controller;
  (void) code;
  if (self->tool == UT_TOOL_WALL && self->desk != NULL && wall_key (self, key, state))
    {
      gtk_widget_queue_draw (GTK_WIDGET (self));
      return GDK_EVENT_STOP;
    }
  if (self->tool == UT_TOOL_BACKDROP && self->desk != NULL && backdrop_key (self, key, state))
    {
      describe (self);
      gtk_widget_queue_draw (GTK_WIDGET (self));
      return GDK_EVENT_STOP;
    }
  if (key == GDK_KEY_space && (state & (GDK_CONTROL_MASK | GDK_ALT_MASK)) == 0)
    {
      self->space_held = TRUE;
      return GDK_EVENT_STOP;
    }
  if (key == GDK_KEY_Escape && self->desk != NULL)
    {
      if (self->drag.kind != UT_DRAG_NONE)
        ut_select_cancel (&self->drag, self->desk);
      else if (self->tool != UT_TOOL_SELECT)
        ut_sheet_set_tool (self, UT_TOOL_SELECT);
      else
        ut_selection_clear (ut_desk_selection (self->desk));
      return GDK_EVENT_STOP;
    }
  return GDK_EVENT_PROPAGATE;
}

static void
key_released_cb (GtkEventControllerKey *controller, guint key, guint code, GdkModifierType state, UtSheet *self)
{
  (void) controller;
  (void) code;
  (void) state;
  if (key == GDK_KEY_space)
    self->space_held = FALSE;
}

static gboolean
drop_cb (GtkDropTarget *target, const GValue *value, double x_px, double y_px, UtSheet *self)
{
  (void) target;
  if (self->desk == NULL || !G_VALUE_HOLDS (value, UT_TYPE_TRAY_ITEM))
    return FALSE;
  place_at (self, (UtRadioKind) g_value_get_enum (value), x_px, y_px);
  gtk_widget_grab_focus (GTK_WIDGET (self));
  return TRUE;
}

/* ---- keys as widget actions ---- */

static void
nudge_cb (GtkWidget *widget, const char *name, GVariant *parameter)
{
  UtSheet *self = UT_SHEET (widget);
  double dx, dy;

  (void) name;
  g_variant_get (parameter, "(dd)", &dx, &dy);
  if (self->desk != NULL)
    ut_desk_nudge_selected (self->desk, dx, dy);
}

/* Tab walks through the radios of the storey, cells first. */
static void
walk_cb (GtkWidget *widget, const char *name, GVariant *parameter)
{
  UtSheet *self = UT_SHEET (widget);
  UtSelection *selection;
  const UtPlan *plan;
  g_autoptr (GPtrArray) radios = g_ptr_array_new ();
  guint n_cells, at = G_MAXUINT;

  (void) name;
  if (self->desk == NULL)
    return;
  selection = ut_desk_selection (self->desk);
  plan = ut_desk_plan (self->desk);
  for (guint i = 0; i < plan->cells->len; i++)
    if (ut_plan_find_storey (plan, ut_plan_cell (plan, i)->radio.storey) == (int) shown_storey (self))
      g_ptr_array_add (radios, plan->cells->pdata[i]);
  n_cells = radios->len;
  for (guint i = 0; i < plan->terminals->len; i++)
    if (ut_plan_find_storey (plan, ut_plan_terminal (plan, i)->radio.storey) == (int) shown_storey (self))
      g_ptr_array_add (radios, plan->terminals->pdata[i]);
  if (radios->len == 0)
    return;
  for (guint i = 0; i < radios->len && ut_selection_size (selection) > 0; i++)
    if (ut_selection_has (selection, i < n_cells ? UT_KIND_CELL : UT_KIND_TERMINAL, ((const UtRadio *) radios->pdata[i])->id))
      at = i;
  if (g_variant_get_int32 (parameter) > 0)
    at = at == G_MAXUINT ? 0 : (at + 1) % radios->len;
  else
    at = at == G_MAXUINT || at == 0 ? radios->len - 1 : at - 1;
  ut_selection_set_one (selection, at < n_cells ? UT_KIND_CELL : UT_KIND_TERMINAL, ((const UtRadio *) radios->pdata[at])->id);
}

static void
bind_arrows (GtkWidgetClass *class, guint key, guint keypad, double dx, double dy)
{
  gtk_widget_class_add_binding_action (class, key, 0, "sheet.nudge", "(dd)", dx * NUDGE_M, dy * NUDGE_M);
  gtk_widget_class_add_binding_action (class, keypad, 0, "sheet.nudge", "(dd)", dx * NUDGE_M, dy * NUDGE_M);
  gtk_widget_class_add_binding_action (class, key, GDK_SHIFT_MASK, "sheet.nudge", "(dd)", dx, dy);
  gtk_widget_class_add_binding_action (class, keypad, GDK_SHIFT_MASK, "sheet.nudge", "(dd)", dx, dy);
  gtk_widget_class_add_binding_action (class, key, GDK_ALT_MASK, "sheet.nudge", "(dd)", dx * NUDGE_M / 10, dy * NUDGE_M / 10);
}

/* ---- life ---- */

static void
ut_sheet_dispose (GObject *object)
{
  UtSheet *self = UT_SHEET (object);

  ut_wall_draw_clear (&self->wall);
  ut_backdrop_work_clear (&self->backdrop);

  if (self->desk != NULL)
    ut_select_cancel (&self->drag, self->desk);
  ut_sheet_set_desk (self, NULL);
  ut_still_layer_clear (&self->still);
  g_clear_pointer (&self->menu, gtk_widget_unparent);
  G_OBJECT_CLASS (ut_sheet_parent_class)->dispose (object);
}

static void
ut_sheet_class_init (UtSheetClass *class)
{
  GtkWidgetClass *widget_class = GTK_WIDGET_CLASS (class);

  G_OBJECT_CLASS (class)->dispose = ut_sheet_dispose;
  widget_class->size_allocate = ut_sheet_size_allocate;
  widget_class->snapshot = ut_sheet_snapshot;
  gtk_widget_class_set_accessible_role (widget_class, GTK_ACCESSIBLE_ROLE_IMG);
  gtk_widget_class_set_css_name (widget_class, "sheet");
  gtk_widget_class_install_action (widget_class, "sheet.nudge", "(dd)", nudge_cb);
  gtk_widget_class_install_action (widget_class, "sheet.walk", "i", walk_cb);
  gtk_widget_class_install_action (widget_class, "sheet.menu", NULL, menu_cb);
  gtk_widget_class_add_binding_action (widget_class, GDK_KEY_Menu, 0, "sheet.menu", NULL);
  gtk_widget_class_add_binding_action (widget_class, GDK_KEY_F10, GDK_SHIFT_MASK, "sheet.menu", NULL);
  bind_arrows (widget_class, GDK_KEY_Left, GDK_KEY_KP_Left, -1, 0);
  bind_arrows (widget_class, GDK_KEY_Right, GDK_KEY_KP_Right, 1, 0);
  bind_arrows (widget_class, GDK_KEY_Up, GDK_KEY_KP_Up, 0, 1);
  bind_arrows (widget_class, GDK_KEY_Down, GDK_KEY_KP_Down, 0, -1);
  gtk_widget_class_add_binding_action (widget_class, GDK_KEY_n, 0, "sheet.walk", "i", 1);
  gtk_widget_class_add_binding_action (widget_class, GDK_KEY_p, 0, "sheet.walk", "i", -1);
  signals[VIEW_CHANGED] = g_signal_new ("view-changed", UT_TYPE_SHEET, G_SIGNAL_RUN_LAST, 0, NULL, NULL, NULL, G_TYPE_NONE, 0);
  signals[TOOL_CHANGED] = g_signal_new ("tool-changed", UT_TYPE_SHEET, G_SIGNAL_RUN_LAST, 0, NULL, NULL, NULL, G_TYPE_NONE, 0);
}

static void
add_gestures (UtSheet *self)
{
  GtkWidget *widget = GTK_WIDGET (self);
  GtkGesture *click = gtk_gesture_click_new (), *menu = gtk_gesture_click_new (), *drag = gtk_gesture_drag_new (), *pan = gtk_gesture_drag_new (), *pinch = gtk_gesture_zoom_new ();
  GtkEventController *motion = gtk_event_controller_motion_new (), *key = gtk_event_controller_key_new ();
  GtkEventController *scroll = gtk_event_controller_scroll_new (GTK_EVENT_CONTROLLER_SCROLL_VERTICAL);
  GtkDropTarget *drop = gtk_drop_target_new (UT_TYPE_TRAY_ITEM, GDK_ACTION_COPY);

  gtk_gesture_single_set_button (GTK_GESTURE_SINGLE (click), GDK_BUTTON_PRIMARY);
  gtk_gesture_single_set_button (GTK_GESTURE_SINGLE (drag), GDK_BUTTON_PRIMARY);
  gtk_gesture_single_set_button (GTK_GESTURE_SINGLE (pan), GDK_BUTTON_MIDDLE);
  gtk_gesture_single_set_button (GTK_GESTURE_SINGLE (menu), GDK_BUTTON_SECONDARY);
  g_signal_connect (menu, "pressed", G_CALLBACK (menu_pressed_cb), self);
  gtk_widget_add_controller (widget, GTK_EVENT_CONTROLLER (menu));
  g_signal_connect (click, "pressed", G_CALLBACK (pressed_cb), self);
  g_signal_connect (click, "released", G_CALLBACK (released_cb), self);
  g_signal_connect (drag, "drag-begin", G_CALLBACK (drag_begin_cb), self);
  g_signal_connect (drag, "drag-update", G_CALLBACK (drag_update_cb), self);
  g_signal_connect (drag, "drag-end", G_CALLBACK (drag_end_cb), self);
  g_signal_connect (drag, "cancel", G_CALLBACK (drag_cancel_cb), self);
  g_signal_connect (pan, "drag-begin", G_CALLBACK (pan_begin_cb), self);
  g_signal_connect (pan, "drag-update", G_CALLBACK (pan_update_cb), self);
  g_signal_connect (pinch, "begin", G_CALLBACK (pinch_begin_cb), self);
  g_signal_connect (pinch, "scale-changed", G_CALLBACK (pinch_cb), self);
  g_signal_connect (motion, "motion", G_CALLBACK (motion_cb), self);
  g_signal_connect (motion, "enter", G_CALLBACK (motion_cb), self);
  g_signal_connect (motion, "leave", G_CALLBACK (left_cb), self);
  g_signal_connect (scroll, "scroll", G_CALLBACK (scroll_cb), self);
  g_signal_connect (key, "key-pressed", G_CALLBACK (key_cb), self);
  g_signal_connect (key, "key-released", G_CALLBACK (key_released_cb), self);
  g_signal_connect (drop, "drop", G_CALLBACK (drop_cb), self);
  gtk_widget_add_controller (widget, GTK_EVENT_CONTROLLER (drag));
  gtk_widget_add_controller (widget, GTK_EVENT_CONTROLLER (click));
  gtk_widget_add_controller (widget, GTK_EVENT_CONTROLLER (pan));
  gtk_widget_add_controller (widget, GTK_EVENT_CONTROLLER (pinch));
  gtk_widget_add_controller (widget, motion);
  gtk_widget_add_controller (widget, scroll);
  gtk_widget_add_controller (widget, key);
  gtk_widget_add_controller (widget, GTK_EVENT_CONTROLLER (drop));
}

static void
ut_sheet_init (UtSheet *self)
{
  self->palette = &ut_palette_light;
  ut_view_init (&self->view, 1, 1);
  gtk_widget_set_focusable (GTK_WIDGET (self), TRUE);
  gtk_widget_set_hexpand (GTK_WIDGET (self), TRUE);
  gtk_widget_set_vexpand (GTK_WIDGET (self), TRUE);
  gtk_accessible_update_property (GTK_ACCESSIBLE (self), GTK_ACCESSIBLE_PROPERTY_LABEL, _ ("Sheet"), -1);
  add_gestures (self);
}

void
ut_sheet_set_desk (UtSheet *self, UtDesk *desk)
{
  if (self->desk == desk)
    return;
  if (self->desk != NULL)
    {
      g_signal_handlers_disconnect_by_func (self->desk, refresh, self);
      g_signal_handlers_disconnect_by_func (self->desk, show_storey, self);
      g_signal_handlers_disconnect_by_func (ut_desk_selection (self->desk), refresh, self);
      g_signal_handlers_disconnect_by_func (ut_desk_solving (self->desk), refresh, self);
    }
  g_set_object (&self->desk, desk);
  if (desk == NULL)
    return;
  g_signal_connect_object (desk, "plan-changed", G_CALLBACK (refresh), self, G_CONNECT_SWAPPED);
  g_signal_connect_object (desk, "storey-changed", G_CALLBACK (show_storey), self, G_CONNECT_SWAPPED);
  g_signal_connect_object (ut_desk_selection (desk), "changed", G_CALLBACK (refresh), self, G_CONNECT_SWAPPED);
  g_signal_connect_object (ut_desk_solving (desk), "answered", G_CALLBACK (refresh), self, G_CONNECT_SWAPPED);
  ut_sheet_fit (self);
  refresh (self);
}

void
ut_sheet_set_tool (UtSheet *self, UtToolKind tool)
{
  if (self->tool == tool)
    return;
  self->tool = tool;
  ut_wall_draw_clear (&self->wall);
  ut_backdrop_work_clear (&self->backdrop);
  self->backdrop.storey = shown_storey (self);
  self->opening.active = self->measure.active = FALSE;
  gtk_widget_queue_draw (GTK_WIDGET (self));
  gtk_widget_set_cursor_from_name (GTK_WIDGET (self), tool == UT_TOOL_SELECT ? NULL : "crosshair");
  g_signal_emit (self, signals[TOOL_CHANGED], 0);
}

UtToolKind
ut_sheet_tool (UtSheet *self)
{
  return self->tool;
}

const UtMeasure *
ut_sheet_measure (UtSheet *self)
{
  return self->measure.active ? &self->measure : NULL;
}

void
ut_sheet_set_ghost (UtSheet *self, gboolean ghost)
{
  self->ghost = ghost;
  ut_sheet_forget_layers (self);
}

void
ut_sheet_set_palette (UtSheet *self, const UtPalette *palette)
{
  self->palette = palette;
  ut_sheet_forget_layers (self);
}
