#include "sheet-private.h"

#include <math.h>

#include <glib/gi18n.h>

#include "tray.h"

#define ZOOM_STEP 1.2

/* ---- gestures: they only translate events ---- */

static UtPointer
pointer_at (UtSheet *self, double x_px, double y_px, GdkModifierType state)
{
  UtPointer pointer = {
    .px_per_m = self->view.scale_px_m,
    .storey = ut_sheet_storey (self),
    .add = (state & GDK_SHIFT_MASK) != 0,
    .no_snap = (state & GDK_ALT_MASK) != 0,
  };

  ut_view_to_plan (&self->view, x_px, y_px, &pointer.x_m, &pointer.y_m);
  return pointer;
}

static void
place_at (UtSheet *self, const UtPreset *preset, double x_px, double y_px)
{
  const UtPlan *plan = ut_desk_plan (self->desk);
  double x_m, y_m, step_m = ut_snap_step_m (self->view.scale_px_m);

  ut_view_to_plan (&self->view, x_px, y_px, &x_m, &y_m);
  ut_desk_place_preset (self->desk, preset, ut_plan_storey (plan, ut_sheet_storey (self))->id, round (x_m / step_m) * step_m, round (y_m / step_m) * step_m);
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
      ut_sheet_describe (self);
      gtk_widget_queue_draw (GTK_WIDGET (self));
    }
  else if (self->tool == UT_TOOL_CELL || self->tool == UT_TOOL_TERMINAL)
    {
      place_at (self, ut_presets_get (ut_presets_get_default (), self->tool == UT_TOOL_CELL ? 0 : 1), x_px, y_px);
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
  ut_sheet_show_view (self);
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
      ut_sheet_describe (self);
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
  if (self->drag.kind == UT_DRAG_NONE || (!ut_desk_has_draft (self->desk) && self->drag.kind != UT_DRAG_BAND && self->drag.kind != UT_DRAG_SERVE && hypot (dx_px, dy_px) < 4))
    return;
  gtk_gesture_set_state (GTK_GESTURE (gesture), GTK_EVENT_SEQUENCE_CLAIMED);
  pointer = pointer_at (self,
                        self->begin_x_px + dx_px,
                        self->begin_y_px + dy_px,
                        gtk_event_controller_get_current_event_state (GTK_EVENT_CONTROLLER (gesture)));
  if ((self->drag.kind == UT_DRAG_BAND || self->drag.kind == UT_DRAG_SERVE) && hypot (dx_px, dy_px) < 4)
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

void
ut_sheet_menu_cb (GtkWidget *widget, const char *name, GVariant *parameter)
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
  self->pointer_inside = TRUE;
  /* What has not moved is no motion: the keyboard's cursor stays. */
  if (fabs (x_px - self->pointer_x_px) < 1 && fabs (y_px - self->pointer_y_px) < 1)
    return;
  self->pointer_x_px = x_px;
  self->pointer_y_px = y_px;
  self->cursor = FALSE;
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
  if (cell == NULL || ut_plan_find_storey (plan, cell->storey) != (int) ut_sheet_storey (self))
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
  ut_sheet_zoom_about (self, pow (ZOOM_STEP, -dy), self->pointer_x_px, self->pointer_y_px);
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
  ut_sheet_zoom_about (self, self->pinch_scale * scale / self->view.scale_px_m, x_px, y_px);
}

/* ---- tools without a pointer ---- */

static UtPointer
pointer_at_cursor (UtSheet *self)
{
  return (UtPointer){ .x_m = self->cursor_x_m, .y_m = self->cursor_y_m, .px_per_m = self->view.scale_px_m, .storey = ut_sheet_storey (self) };
}

static void
show_at_cursor (UtSheet *self)
{
  UtPointer pointer = pointer_at_cursor (self);

  if (self->tool == UT_TOOL_WALL)
    ut_wall_draw_hover (&self->wall, self->desk, &pointer);
  else if (self->tool == UT_TOOL_OPENING)
    ut_opening_draw_update (&self->opening, self->desk, &pointer);
  else if (self->tool == UT_TOOL_MEASURE && self->cursor_begun)
    ut_measure_update (&self->measure, self->desk, &pointer);
  else if (self->tool == UT_TOOL_BACKDROP)
    ut_backdrop_work_hover (&self->backdrop, self->desk, &pointer);
  ut_sheet_describe (self);
  gtk_widget_queue_draw (GTK_WIDGET (self));
}

/* It begins in the middle of what is seen, on the grid, and pulls the view along. */
void
ut_sheet_move_cursor (UtSheet *self, double dx_m, double dy_m)
{
  double x_px, y_px, edge_px = 24;

  if (!self->cursor)
    {
      ut_view_to_plan (&self->view, self->view.width_px / 2, self->view.height_px / 2, &self->cursor_x_m, &self->cursor_y_m);
      self->cursor_x_m = round (self->cursor_x_m * 2) / 2;
      self->cursor_y_m = round (self->cursor_y_m * 2) / 2;
      self->cursor = TRUE;
    }
  else
    {
      self->cursor_x_m = round ((self->cursor_x_m + dx_m) * 1000) / 1000;
      self->cursor_y_m = round ((self->cursor_y_m + dy_m) * 1000) / 1000;
    }
  ut_view_to_sheet (&self->view, self->cursor_x_m, self->cursor_y_m, &x_px, &y_px);
  if (x_px < edge_px || y_px < edge_px || x_px > self->view.width_px - edge_px || y_px > self->view.height_px - edge_px)
    {
      self->fitted = FALSE;
      ut_view_pan (&self->view, self->view.width_px / 2 - x_px, self->view.height_px / 2 - y_px);
      ut_sheet_show_view (self);
    }
  show_at_cursor (self);
}

void
ut_sheet_click_cursor (UtSheet *self)
{
  UtPointer pointer = pointer_at_cursor (self);

  switch (self->tool)
    {
    case UT_TOOL_WALL:
      ut_wall_draw_click (&self->wall, self->desk, &pointer, FALSE);
      break;
    case UT_TOOL_OPENING:
      if (self->opening.active)
        ut_opening_draw_end (&self->opening, self->desk);
      else
        ut_opening_draw_begin (&self->opening, self->desk, &pointer);
      break;
    case UT_TOOL_MEASURE:
      if (!self->cursor_begun)
        ut_measure_begin (&self->measure, self->desk, &pointer);
      self->cursor_begun = !self->cursor_begun;
      break;
    case UT_TOOL_BACKDROP:
      ut_backdrop_work_click (&self->backdrop, self->desk, &pointer);
      break;
    case UT_TOOL_CELL:
    case UT_TOOL_TERMINAL:
      ut_desk_place_preset (self->desk,
                            ut_presets_get (ut_presets_get_default (), self->tool == UT_TOOL_CELL ? 0 : 1),
                            ut_plan_storey (ut_desk_plan (self->desk), pointer.storey)->id,
                            pointer.x_m,
                            pointer.y_m);
      break;
    case UT_TOOL_SELECT:
    case UT_N_TOOLS:
      break;
    }
  show_at_cursor (self);
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
      if (self->cursor && self->wall.points != NULL && self->wall.points->len > 0)
        {
          UtPoint last = g_array_index (self->wall.points, UtPoint, self->wall.points->len - 1);

          self->cursor_x_m = last.x_m;
          self->cursor_y_m = last.y_m;
        }
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
      ut_sheet_describe (self);
      gtk_widget_queue_draw (GTK_WIDGET (self));
      return GDK_EVENT_STOP;
    }
  if (key == GDK_KEY_space && self->cursor && self->desk != NULL && self->tool != UT_TOOL_SELECT && (state & (GDK_CONTROL_MASK | GDK_ALT_MASK)) == 0)
    {
      ut_sheet_click_cursor (self);
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
  if ((guint) g_value_get_enum (value) >= ut_presets_count (ut_presets_get_default ()))
    return FALSE;
  place_at (self, ut_presets_get (ut_presets_get_default (), (guint) g_value_get_enum (value)), x_px, y_px);
  gtk_widget_grab_focus (GTK_WIDGET (self));
  return TRUE;
}

void
ut_sheet_add_gestures (UtSheet *self)
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
