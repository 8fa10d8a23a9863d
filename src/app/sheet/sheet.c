#include "sheet-private.h"

#include <math.h>

#include <glib/gi18n.h>

#include "plan-painter.h"
#include "report.h"

#define FIT_MARGIN_PX 48
#define NUDGE_M 0.1

G_DEFINE_FINAL_TYPE (UtSheet, ut_sheet, GTK_TYPE_WIDGET)

enum { TOOL_CHANGED, VIEW_CHANGED, N_SIGNALS };
static guint signals[N_SIGNALS];

guint
ut_sheet_storey (UtSheet *self)
{
  return self->desk != NULL ? ut_desk_storey (self->desk) : 0;
}

/* ---- what it says of itself ---- */

void
ut_sheet_describe (UtSheet *self)
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
  if (self->cursor && self->tool != UT_TOOL_SELECT)
    {
      g_autofree char *x = ut_report_figure (self->cursor_x_m, 2), *y = ut_report_figure (self->cursor_y_m, 2);

      g_string_append_printf (text, _ ("; cursor at %s, %s m"), x, y);
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
  ut_sheet_describe (self);
  gtk_widget_queue_draw (GTK_WIDGET (self));
}

/* ---- view ---- */

void
ut_sheet_show_view (UtSheet *self)
{
  gtk_widget_queue_draw (GTK_WIDGET (self));
  g_signal_emit (self, signals[VIEW_CHANGED], 0);
}

void
ut_sheet_fit (UtSheet *self)
{
  double x0, y0, x1, y1;

  self->fitted = TRUE;
  if (self->desk == NULL || !ut_plan_extent (ut_desk_plan (self->desk), ut_sheet_storey (self), &x0, &y0, &x1, &y1))
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
  ut_sheet_show_view (self);
}

void
ut_sheet_zoom_about (UtSheet *self, double factor, double x_px, double y_px)
{
  self->fitted = FALSE;
  ut_view_zoom (&self->view, factor, x_px, y_px);
  ut_sheet_show_view (self);
}

void
ut_sheet_zoom (UtSheet *self, double factor)
{
  ut_sheet_zoom_about (self, factor, self->view.width_px / 2, self->view.height_px / 2);
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
  self->backdrop.storey = ut_sheet_storey (self);
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
    ut_sheet_show_view (self);
}

static void
ut_sheet_snapshot (GtkWidget *widget, GtkSnapshot *snapshot)
{
  UtSheet *self = UT_SHEET (widget);
  UtScene scene = {
    .desk = self->desk,
    .view = &self->view,
    .palette = self->palette,
    .storey = ut_sheet_storey (self),
    .drag = &self->drag,
    .wall = self->tool == UT_TOOL_WALL ? &self->wall : NULL,
    .opening = self->tool == UT_TOOL_OPENING ? &self->opening : NULL,
    .measure = self->tool == UT_TOOL_MEASURE ? &self->measure : NULL,
    .backdrop = self->tool == UT_TOOL_BACKDROP ? &self->backdrop : NULL,
    .ghost = self->ghost,
    .cursor = self->cursor && self->tool != UT_TOOL_SELECT,
    .cursor_x_m = self->cursor_x_m,
    .cursor_y_m = self->cursor_y_m,
    .focused = gtk_widget_has_visible_focus (widget),
    .device_scale = gtk_widget_get_scale_factor (widget),
  };

  if (self->desk == NULL || ut_desk_plan (self->desk)->storeys->len == 0)
    return;
  gtk_snapshot_push_clip (snapshot, &GRAPHENE_RECT_INIT (0, 0, (float) self->view.width_px, (float) self->view.height_px));
  ut_scene_snapshot (&scene, &self->still, snapshot);
  gtk_snapshot_pop (snapshot);
}

/* ---- keys as widget actions ---- */

static void
nudge_cb (GtkWidget *widget, const char *name, GVariant *parameter)
{
  UtSheet *self = UT_SHEET (widget);
  double dx, dy;

  (void) name;
  g_variant_get (parameter, "(dd)", &dx, &dy);
  if (self->desk != NULL && self->tool == UT_TOOL_SELECT)
    ut_desk_nudge_selected (self->desk, dx, dy);
  else if (self->desk != NULL)
    ut_sheet_move_cursor (self, dx, dy);
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
    if (ut_plan_find_storey (plan, ut_plan_cell (plan, i)->radio.storey) == (int) ut_sheet_storey (self))
      g_ptr_array_add (radios, plan->cells->pdata[i]);
  n_cells = radios->len;
  for (guint i = 0; i < plan->terminals->len; i++)
    if (ut_plan_find_storey (plan, ut_plan_terminal (plan, i)->radio.storey) == (int) ut_sheet_storey (self))
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
  gtk_widget_class_install_action (widget_class, "sheet.menu", NULL, ut_sheet_menu_cb);
  gtk_widget_class_add_binding_action (widget_class, GDK_KEY_Menu, 0, "sheet.menu", NULL);
  gtk_widget_class_add_binding_action (widget_class, GDK_KEY_F10, GDK_SHIFT_MASK, "sheet.menu", NULL);
  static const struct
  {
    guint key;
    const char *tool;
  } tools[] = { { GDK_KEY_s, "select" }, { GDK_KEY_w, "wall" }, { GDK_KEY_o, "opening" }, { GDK_KEY_c, "cell" }, { GDK_KEY_t, "terminal" }, { GDK_KEY_m, "measure" }, { GDK_KEY_b, "backdrop" } };
  for (gsize i = 0; i < G_N_ELEMENTS (tools); i++)
    gtk_widget_class_add_binding_action (widget_class, tools[i].key, 0, "win.tool", "s", tools[i].tool);
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
ut_sheet_init (UtSheet *self)
{
  self->palette = &ut_palette_light;
  ut_view_init (&self->view, 1, 1);
  gtk_widget_set_focusable (GTK_WIDGET (self), TRUE);
  gtk_widget_set_hexpand (GTK_WIDGET (self), TRUE);
  gtk_widget_set_vexpand (GTK_WIDGET (self), TRUE);
  gtk_accessible_update_property (GTK_ACCESSIBLE (self), GTK_ACCESSIBLE_PROPERTY_LABEL, _ ("Sheet"), -1);
  ut_sheet_add_gestures (self);
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
  g_signal_connect_object (desk, "shown-changed", G_CALLBACK (refresh), self, G_CONNECT_SWAPPED);
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
  self->cursor_begun = FALSE;
  ut_wall_draw_clear (&self->wall);
  ut_backdrop_work_clear (&self->backdrop);
  self->backdrop.storey = ut_sheet_storey (self);
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
