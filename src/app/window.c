#include "window-private.h"

#include <math.h>
#include <string.h>

#include <glib/gi18n.h>

#include "compare-panel.h"
#include "compat.h"
#include "constructions.h"
#include "control-panel.h"
#include "matrix-panel.h"
#include "remedies-panel.h"
#include "report.h"
#include "tray.h"
#include "words.h"

G_DEFINE_FINAL_TYPE (UtWindow, ut_window, GTK_TYPE_APPLICATION_WINDOW)

static const char *const tool_words[] = { [UT_TOOL_SELECT] = "select", [UT_TOOL_WALL] = "wall", [UT_TOOL_OPENING] = "opening", [UT_TOOL_CELL] = "cell", [UT_TOOL_TERMINAL] = "terminal", [UT_TOOL_MEASURE] = "measure", [UT_TOOL_BACKDROP] = "backdrop" };
static const UtAim aims[] = { UT_AIM_LEAST_POWER, UT_AIM_EQUAL_MARGIN, UT_AIM_FEWEST_DROPPED, UT_AIM_AS_SET }; /* in the order of the drop-down */

static void
set_enabled (UtWindow *self, const char *action, gboolean enabled)
{
  g_simple_action_set_enabled (G_SIMPLE_ACTION (g_action_map_lookup_action (G_ACTION_MAP (self), action)), enabled);
}

static void
set_state (UtWindow *self, const char *action, const char *word)
{
  g_simple_action_set_state (G_SIMPLE_ACTION (g_action_map_lookup_action (G_ACTION_MAP (self), action)), g_variant_new_string (word));
}

/* ---- showing the desk's state ---- */

static void
show_title (UtWindow *self)
{
  UtDocument *document = ut_desk_document (self->desk);
  GFile *file = ut_document_file (document);
  g_autofree char *name = file != NULL ? g_file_get_basename (file) : g_strdup (_ ("New Plan"));
  g_autofree char *marked = g_strconcat (ut_document_is_modified (document) ? "• " : "", name, NULL);
  const char *title = ut_document_plan (document)->title;

  gtk_label_set_text (self->title_label, marked);
  gtk_label_set_text (self->subtitle_label, title);
  gtk_widget_set_visible (GTK_WIDGET (self->subtitle_label), title[0] != '\0');
  gtk_window_set_title (GTK_WINDOW (self), marked);
}

static void
show_step (GtkWidget *button, const char *verb, const char *label)
{
  g_autofree char *text = label != NULL ? g_strdup_printf ("%s %s", verb, label) : g_strdup (verb);

  gtk_widget_set_tooltip_text (button, text);
}

static void
show_steps (UtWindow *self)
{
  UtDocument *document = ut_desk_document (self->desk);

  set_enabled (self, "undo", ut_document_undo_label (document) != NULL);
  set_enabled (self, "redo", ut_document_redo_label (document) != NULL);
  show_step (self->undo_button, _ ("Undo"), ut_document_undo_label (document));
  show_step (self->redo_button, _ ("Redo"), ut_document_redo_label (document));
}

static void
show_storeys (UtWindow *self)
{
  const UtPlan *plan = ut_desk_plan (self->desk);
  g_autoptr (GtkStringList) names = gtk_string_list_new (NULL);
  GListModel *shown = gtk_drop_down_get_model (self->storey_drop);
  gboolean same = shown != NULL && g_list_model_get_n_items (shown) == plan->storeys->len;

  for (guint i = 0; i < plan->storeys->len; i++)
    {
      const char *name = ut_plan_storey (plan, i)->name;

      gtk_string_list_append (names, name);
      same = same && g_str_equal (gtk_string_list_get_string (GTK_STRING_LIST (shown), i), name);
    }
  self->showing = TRUE;
  if (!same)
    gtk_drop_down_set_model (self->storey_drop, G_LIST_MODEL (names));
  gtk_drop_down_set_selected (self->storey_drop, ut_desk_storey (self->desk));
  gtk_widget_set_visible (GTK_WIDGET (self->storey_drop), plan->storeys->len > 1);
  self->showing = FALSE;
}

static void
plan_changed_cb (UtWindow *self)
{
  show_title (self);
  show_steps (self);
  show_storeys (self);
}

/* What is selected is shown: where none of it is on this storey, the storey of the first is. */
static void
show_selected_storey (UtWindow *self)
{
  UtSelection *selection = ut_desk_selection (self->desk);
  const UtPlan *plan = ut_desk_plan (self->desk);
  int first = -1;

  for (guint i = 0; i < ut_selection_size (selection); i++)
    {
      int storey = ut_plan_storey_of_pick (plan, ut_selection_pick (selection, i));

      if (storey == (int) ut_desk_storey (self->desk))
        return;
      if (first < 0)
        first = storey;
    }
  if (first >= 0)
    ut_desk_set_storey (self->desk, (guint) first);
}

static void
selection_changed_cb (UtWindow *self)
{
  show_selected_storey (self);
  set_enabled (self, "delete", ut_selection_size (ut_desk_selection (self->desk)) > 0);
  ut_window_show_edits (self);
}

/* The hold-in-hand slider goes from nothing to the headroom, where there is any. */
static void
show_hold (UtWindow *self, const UtStudy *study)
{
  double most_db = study->verdict == UT_VERDICT_MET && study->headroom_db > 0 ? floor (study->headroom_db * 10) / 10 : 0;
  double hold_db = ut_desk_question (self->desk)->hold_db;

  self->showing = TRUE;
  gtk_adjustment_set_upper (self->hold_adjustment, MAX (most_db, hold_db));
  gtk_adjustment_set_value (self->hold_adjustment, hold_db);
  gtk_widget_set_sensitive (GTK_WIDGET (self->hold_scale),
                            study->question.aim == UT_AIM_LEAST_POWER && MAX (most_db, hold_db) > 0);
  self->showing = FALSE;
}

/* Whether the answer is about this terminal: one that fails, limits or is left out. */
static gboolean
is_named (const UtStudy *study, const char *id)
{
  for (guint i = 0; i < study->links->len; i++)
    {
      const UtLinkAnswer *link = ut_study_link (study, i);
      gboolean counts = link->dropped || !(link->margin_db >= UT_MARGIN_MET_DB);

      for (guint k = 0; k < study->limiting_group->len && !counts; k++)
        counts = g_array_index (study->limiting_group, guint, k) == link->terminal;
      if (counts && g_str_equal (ut_plan_terminal (study->gains->plan, link->terminal)->radio.id, id))
        return TRUE;
    }
  return FALSE;
}

/* The sentence with the terminals it names as links. Transfer full. */
static char *
verdict_markup (const UtStudy *study, const char *sentence)
{
  GString *markup = g_string_new (NULL);
  const char *end;

  for (const char *at = sentence; *at != '\0'; at = end)
    {
      gboolean word = strchr (" ,.;:", *at) == NULL;
      g_autofree char *token = NULL, *escaped = NULL;

      for (end = at + 1; *end != '\0' && (strchr (" ,.;:", *end) == NULL) == word; end++)
        ;
      token = g_strndup (at, (gsize) (end - at));
      escaped = g_markup_escape_text (token, -1);
      g_string_append_printf (markup, word && is_named (study, token) ? "<a href=\"%1$s\">%1$s</a>" : "%1$s", escaped);
    }
  return g_string_free (markup, FALSE);
}

static gboolean
named_link_cb (GtkLabel *label, const char *id, UtWindow *self)
{
  (void) label;
  ut_selection_set_one (ut_desk_selection (self->desk), UT_KIND_TERMINAL, id);
  return TRUE;
}

static void
answered_cb (UtWindow *self)
{
  UtSolving *solving = ut_desk_solving (self->desk);
  UtStudy *study = ut_solving_study (solving);

  if (ut_solving_is_stale (solving) || study == NULL)
    {
      gtk_widget_add_css_class (GTK_WIDGET (self->verdict_label), "stale");
      gtk_accessible_update_state (GTK_ACCESSIBLE (self->verdict_label), GTK_ACCESSIBLE_STATE_BUSY, TRUE, -1);
      return;
    }
  g_autofree char *sentence = ut_report_verdict_sentence (study), *markup = verdict_markup (study, sentence);
  gtk_widget_remove_css_class (GTK_WIDGET (self->verdict_label), "stale");
  gtk_accessible_update_state (GTK_ACCESSIBLE (self->verdict_label), GTK_ACCESSIBLE_STATE_BUSY, FALSE, -1);
  gtk_label_set_markup (self->verdict_label, markup);
  show_hold (self, study);
}

static void
question_changed_cb (UtWindow *self)
{
  const UtQuestion *question = ut_desk_question (self->desk);

  set_state (self, "direction", ut_direction_word (question->direction));
  set_state (self, "aim", ut_aim_word (question->aim));
  self->showing = TRUE;
  for (guint i = 0; i < G_N_ELEMENTS (aims); i++)
    if (aims[i] == question->aim)
      gtk_drop_down_set_selected (self->aim_drop, i);
  self->showing = FALSE;
}

static void
tool_changed_cb (UtWindow *self)
{
  set_state (self, "tool", tool_words[ut_sheet_tool (self->sheet)]);
}

/* For drivers: where the plan lies on the sheet (px a metre, x and y of the plan's origin in px). */
static void
view_changed_cb (UtWindow *self)
{
  const UtView *view = ut_sheet_view (self->sheet);

  g_simple_action_set_state (G_SIMPLE_ACTION (g_action_map_lookup_action (G_ACTION_MAP (self), "view")),
                             g_variant_new ("(ddd)", view->scale_px_m, view->origin_x_px, view->origin_y_px));
}

static void
style_changed_cb (UtWindow *self)
{
  ut_sheet_set_palette (self->sheet, ut_compat_palette ());
}

/* ---- what the user does ---- */

static void
aim_chosen_cb (UtWindow *self)
{
  UtQuestion question = *ut_desk_question (self->desk);
  guint chosen = gtk_drop_down_get_selected (self->aim_drop);

  if (self->showing || chosen >= G_N_ELEMENTS (aims))
    return;
  question.aim = aims[chosen];
  ut_desk_set_question (self->desk, &question);
}

static void
storey_chosen_cb (UtWindow *self)
{
  guint chosen = gtk_drop_down_get_selected (self->storey_drop);

  if (!self->showing && chosen != GTK_INVALID_LIST_POSITION && chosen != ut_desk_storey (self->desk))
    ut_desk_set_storey (self->desk, chosen);
}

static void
hold_changed_cb (UtWindow *self)
{
  UtQuestion question = *ut_desk_question (self->desk);

  if (self->showing)
    return;
  question.hold_db = round (gtk_adjustment_get_value (self->hold_adjustment) * 10) / 10;
  ut_desk_set_question (self->desk, &question);
}

static void
undo_cb (GSimpleAction *action, GVariant *parameter, gpointer self)
{
  (void) action;
  (void) parameter;
  ut_desk_undo (UT_WINDOW (self)->desk);
}

static void
redo_cb (GSimpleAction *action, GVariant *parameter, gpointer self)
{
  (void) action;
  (void) parameter;
  ut_desk_redo (UT_WINDOW (self)->desk);
}

static void
delete_cb (GSimpleAction *action, GVariant *parameter, gpointer self)
{
  (void) action;
  (void) parameter;
  ut_desk_delete_selected (UT_WINDOW (self)->desk);
}

static void
select_all_cb (GSimpleAction *action, GVariant *parameter, gpointer data)
{
  UtWindow *self = data;
  UtSelection *selection = ut_desk_selection (self->desk);
  const UtPlan *plan = ut_desk_plan (self->desk);

  (void) action;
  (void) parameter;
  ut_selection_freeze (selection);
  ut_selection_clear (selection);
  for (guint i = 0; i < plan->cells->len; i++)
    ut_selection_add (selection, UT_KIND_CELL, ut_plan_cell (plan, i)->radio.id);
  for (guint i = 0; i < plan->terminals->len; i++)
    ut_selection_add (selection, UT_KIND_TERMINAL, ut_plan_terminal (plan, i)->radio.id);
  ut_selection_thaw (selection);
}

static void
select_cb (GSimpleAction *action, GVariant *parameter, gpointer self)
{
  (void) action;
  ut_selection_set_text (ut_desk_selection (UT_WINDOW (self)->desk), g_variant_get_string (parameter, NULL));
}

static void
constructions_cb (GSimpleAction *action, GVariant *parameter, gpointer self)
{
  (void) action;
  (void) parameter;
  gtk_window_present (GTK_WINDOW (ut_constructions_new (UT_WINDOW (self)->desk, self)));
}

static void
present_cb (GSimpleAction *action, GVariant *parameter, gpointer self)
{
  (void) action;
  (void) parameter;
  ut_budget_panel_present (UT_WINDOW (self)->budget, self);
}

/* One of the panels under the sheet. */
static void
panel_cb (GSimpleAction *action, GVariant *word, gpointer self)
{
  (void) action;
  gtk_stack_set_visible_child_name (UT_WINDOW (self)->panels, g_variant_get_string (word, NULL));
}

static void
zoom_in_cb (GSimpleAction *action, GVariant *parameter, gpointer self)
{
  (void) action;
  (void) parameter;
  ut_sheet_zoom (UT_WINDOW (self)->sheet, 1.25);
}

static void
zoom_out_cb (GSimpleAction *action, GVariant *parameter, gpointer self)
{
  (void) action;
  (void) parameter;
  ut_sheet_zoom (UT_WINDOW (self)->sheet, 1 / 1.25);
}

static void
fit_cb (GSimpleAction *action, GVariant *parameter, gpointer self)
{
  (void) action;
  (void) parameter;
  ut_sheet_fit (UT_WINDOW (self)->sheet);
}

static void
close_cb (GSimpleAction *action, GVariant *parameter, gpointer self)
{
  (void) action;
  (void) parameter;
  gtk_window_close (self);
}

static void
direction_cb (GSimpleAction *action, GVariant *word, gpointer self)
{
  UtQuestion question = *ut_desk_question (UT_WINDOW (self)->desk);

  (void) action;
  if (ut_direction_from_word (g_variant_get_string (word, NULL), &question.direction))
    ut_desk_set_question (UT_WINDOW (self)->desk, &question);
}

static void
aim_cb (GSimpleAction *action, GVariant *word, gpointer self)
{
  UtQuestion question = *ut_desk_question (UT_WINDOW (self)->desk);

  (void) action;
  if (ut_aim_from_word (g_variant_get_string (word, NULL), &question.aim))
    ut_desk_set_question (UT_WINDOW (self)->desk, &question);
}

static void
tool_cb (GSimpleAction *action, GVariant *word, gpointer self)
{
  (void) action;
  for (guint i = 0; i < UT_N_TOOLS; i++)
    if (g_str_equal (tool_words[i], g_variant_get_string (word, NULL)))
      ut_sheet_set_tool (UT_WINDOW (self)->sheet, (UtToolKind) i);
}

/* The view's action only tells. */
static void
keep_view_cb (GSimpleAction *action, GVariant *state, gpointer self)
{
  (void) action;
  (void) state;
  (void) self;
}

static const GActionEntry actions[] = {
  { .name = "undo", .activate = undo_cb },
  { .name = "redo", .activate = redo_cb },
  { .name = "delete", .activate = delete_cb },
  { .name = "select-all", .activate = select_all_cb },
  { .name = "select", .activate = select_cb, .parameter_type = "s" },
  { .name = "present", .activate = present_cb },
  { .name = "panel", .activate = panel_cb, .parameter_type = "s" },
  { .name = "zoom-in", .activate = zoom_in_cb },
  { .name = "zoom-out", .activate = zoom_out_cb },
  { .name = "fit", .activate = fit_cb },
  { .name = "close", .activate = close_cb },
  { .name = "direction", .parameter_type = "s", .state = "'down'", .change_state = direction_cb },
  { .name = "aim", .parameter_type = "s", .state = "'least-power'", .change_state = aim_cb },
  { .name = "view", .state = "(1.0, 0.0, 0.0)", .change_state = keep_view_cb },
  { .name = "constructions", .activate = constructions_cb },
  { .name = "tool", .parameter_type = "s", .state = "'select'", .change_state = tool_cb },
};

/* Keys that a text field needs for itself: bound in the bubble phase, so that the field comes first. */
static void
add_shortcuts (UtWindow *self)
{
  static const struct
  {
    const char *trigger, *action;
  } shortcuts[] = {
    { "<Control>z", "win.undo" },   { "<Control><Shift>z", "win.redo" }, { "<Control>y", "win.redo" },
    { "Delete", "win.delete" },     { "BackSpace", "win.delete" },       { "<Control>a", "win.select-all" },
    { "<Control>c", "win.copy" },   { "<Control>x", "win.cut" },         { "<Control>v", "win.paste" },
    { "<Control>d", "win.duplicate" },
  };
  GtkEventController *controller = gtk_shortcut_controller_new ();

  gtk_event_controller_set_propagation_phase (controller, GTK_PHASE_BUBBLE);
  for (gsize i = 0; i < G_N_ELEMENTS (shortcuts); i++)
    gtk_shortcut_controller_add_shortcut (GTK_SHORTCUT_CONTROLLER (controller),
                                          gtk_shortcut_new (gtk_shortcut_trigger_parse_string (shortcuts[i].trigger),
                                                            gtk_named_action_new (shortcuts[i].action)));
  gtk_widget_add_controller (GTK_WIDGET (self), controller);
}

/* A plan dropped on the window is opened, a picture comes under the storey. */
static gboolean
file_dropped_cb (GtkDropTarget *target, const GValue *value, double x, double y, UtWindow *self)
{
  GSList *files = g_value_get_boxed (value);

  (void) target;
  (void) x;
  (void) y;
  for (GSList *item = files; item != NULL; item = item->next)
    if (!ut_window_take_picture (self, item->data))
      ut_window_open_file (UT_APPLICATION (gtk_window_get_application (GTK_WINDOW (self))), self, item->data);
  return files != NULL;
}

/* A plot needs more room than a table: the sheet gives some, where it has it. */
#define PLOT_ROOM_PX 400

static void
panel_shown_cb (UtWindow *self)
{
  const char *name = gtk_stack_get_visible_child_name (self->panels);
  int height = gtk_widget_get_height (GTK_WIDGET (self->bottom_paned)), most = height - MIN (PLOT_ROOM_PX, height / 2);

  if (name != NULL && !g_str_equal (name, "links") && !g_str_equal (name, "things") && gtk_paned_get_position (self->bottom_paned) > most && most > 0)
    gtk_paned_set_position (self->bottom_paned, most);
}

/* The wheel over a drop-down or slider belongs to what is scrolled, unless the widget has been clicked into. */
static gboolean
ignore_wheel_cb (GtkEventControllerScroll *controller, double dx, double dy, gpointer data)
{
  (void) dx;
  (void) dy;
  (void) data;
  return !gtk_widget_has_focus (gtk_event_controller_get_widget (GTK_EVENT_CONTROLLER (controller)));
}

static void
ignore_wheel (GtkWidget *widget)
{
  GtkEventController *controller = gtk_event_controller_scroll_new (GTK_EVENT_CONTROLLER_SCROLL_BOTH_AXES);

  gtk_event_controller_set_propagation_phase (controller, GTK_PHASE_CAPTURE);
  g_signal_connect (controller, "scroll", G_CALLBACK (ignore_wheel_cb), NULL);
  gtk_widget_add_controller (widget, controller);
}

/* ---- life ---- */

static gboolean
ut_window_close_request (GtkWindow *window)
{
  if (ut_window_asks_before_closing (UT_WINDOW (window)))
    return TRUE;
  return GTK_WINDOW_CLASS (ut_window_parent_class)->close_request (window);
}

static void
ut_window_dispose (GObject *object)
{
  UtWindow *self = UT_WINDOW (object);

  ut_window_stop_watching (self);
  gtk_widget_dispose_template (GTK_WIDGET (self), UT_TYPE_WINDOW);
  g_clear_object (&self->desk);
  G_OBJECT_CLASS (ut_window_parent_class)->dispose (object);
}

static void
ut_window_class_init (UtWindowClass *class)
{
  GtkWidgetClass *widget_class = GTK_WIDGET_CLASS (class);

  G_OBJECT_CLASS (class)->dispose = ut_window_dispose;
  GTK_WINDOW_CLASS (class)->close_request = ut_window_close_request;
  g_type_ensure (UT_TYPE_SHEET);
  g_type_ensure (UT_TYPE_LINKS_PANEL);
  g_type_ensure (UT_TYPE_THINGS_PANEL);
  g_type_ensure (UT_TYPE_BUDGET_PANEL);
  g_type_ensure (UT_TYPE_MATRIX_PANEL);
  g_type_ensure (UT_TYPE_CONTROL_PANEL);
  g_type_ensure (UT_TYPE_COMPARE_PANEL);
  g_type_ensure (UT_TYPE_REMEDIES_PANEL);
  g_type_ensure (UT_TYPE_DETAILS);
  g_type_ensure (UT_TYPE_START_PAGE);
  gtk_widget_class_set_template_from_resource (widget_class, "/io/undertone/Undertone/window.ui");
  gtk_widget_class_bind_template_child (widget_class, UtWindow, sheet);
  gtk_widget_class_bind_template_child (widget_class, UtWindow, links);
  gtk_widget_class_bind_template_child (widget_class, UtWindow, budget);
  gtk_widget_class_bind_template_child (widget_class, UtWindow, panels);
  gtk_widget_class_bind_template_child (widget_class, UtWindow, bottom_paned);
  gtk_widget_class_bind_template_child (widget_class, UtWindow, details);
  gtk_widget_class_bind_template_child (widget_class, UtWindow, title_label);
  gtk_widget_class_bind_template_child (widget_class, UtWindow, subtitle_label);
  gtk_widget_class_bind_template_child (widget_class, UtWindow, verdict_label);
  gtk_widget_class_bind_template_child (widget_class, UtWindow, hold_label);
  gtk_widget_class_bind_template_child (widget_class, UtWindow, tray);
  gtk_widget_class_bind_template_child (widget_class, UtWindow, undo_button);
  gtk_widget_class_bind_template_child (widget_class, UtWindow, redo_button);
  gtk_widget_class_bind_template_child (widget_class, UtWindow, aim_drop);
  gtk_widget_class_bind_template_child (widget_class, UtWindow, storey_drop);
  gtk_widget_class_bind_template_child (widget_class, UtWindow, hold_adjustment);
  gtk_widget_class_bind_template_child (widget_class, UtWindow, hold_scale);
  gtk_widget_class_bind_template_child (widget_class, UtWindow, recent_menu);
  gtk_widget_class_bind_template_child (widget_class, UtWindow, sheet_menu);
  gtk_widget_class_bind_template_child (widget_class, UtWindow, notice);
  gtk_widget_class_bind_template_child (widget_class, UtWindow, pages);
  gtk_widget_class_bind_template_child (widget_class, UtWindow, start_page);
  gtk_widget_class_bind_template_child (widget_class, UtWindow, notice_label);
  gtk_widget_class_bind_template_child (widget_class, UtWindow, notice_reload);
}

static void
ut_window_init (UtWindow *self)
{
  GtkDropTarget *drop = gtk_drop_target_new (GDK_TYPE_FILE_LIST, GDK_ACTION_COPY);

  gtk_widget_init_template (GTK_WIDGET (self));
  g_action_map_add_action_entries (G_ACTION_MAP (self), actions, G_N_ELEMENTS (actions), self);
  ut_window_add_file_actions (self);
  ut_window_add_edit_actions (self);
  ut_window_add_backdrop_actions (self);
  ut_window_add_print_actions (self);
  ut_sheet_set_menu (self->sheet, self->sheet_menu);
  ut_window_fill_recent (self);
  add_shortcuts (self);
  ut_tray_fill (self->tray, ut_presets_get_default ());
  g_signal_connect (drop, "drop", G_CALLBACK (file_dropped_cb), self);
  gtk_widget_add_controller (GTK_WIDGET (self), GTK_EVENT_CONTROLLER (drop));
  ignore_wheel (GTK_WIDGET (self->aim_drop));
  ignore_wheel (GTK_WIDGET (self->storey_drop));
  ignore_wheel (GTK_WIDGET (self->hold_scale));
  g_signal_connect (self->verdict_label, "activate-link", G_CALLBACK (named_link_cb), self);
  g_signal_connect_object (self->panels, "notify::visible-child", G_CALLBACK (panel_shown_cb), self, G_CONNECT_SWAPPED);
  g_signal_connect_object (self->aim_drop, "notify::selected", G_CALLBACK (aim_chosen_cb), self, G_CONNECT_SWAPPED);
  g_signal_connect_object (self->storey_drop, "notify::selected", G_CALLBACK (storey_chosen_cb), self, G_CONNECT_SWAPPED);
  g_signal_connect_object (self->hold_adjustment, "value-changed", G_CALLBACK (hold_changed_cb), self, G_CONNECT_SWAPPED);
  g_signal_connect_object (self->sheet, "view-changed", G_CALLBACK (view_changed_cb), self, G_CONNECT_SWAPPED);
  g_signal_connect_object (self->sheet, "tool-changed", G_CALLBACK (tool_changed_cb), self, G_CONNECT_SWAPPED);
  g_signal_connect_object (gtk_settings_get_default (), "notify::gtk-application-prefer-dark-theme", G_CALLBACK (style_changed_cb), self, G_CONNECT_SWAPPED);
  g_signal_connect_object (gtk_settings_get_default (), "notify::gtk-theme-name", G_CALLBACK (style_changed_cb), self, G_CONNECT_SWAPPED);
  style_changed_cb (self);
}

void
ut_window_set_document (UtWindow *self, UtDocument *document)
{
  g_autoptr (UtDesk) desk = ut_desk_new (document);
  UtQuestion question = { .direction = UT_DIRECTION_DOWN, .aim = UT_AIM_LEAST_POWER };

  if (self->desk != NULL)
    question = *ut_desk_question (self->desk);
  question.hold_db = 0;
  ut_desk_set_question (desk, &question);
  g_set_object (&self->desk, desk);
  g_signal_connect_object (desk, "plan-changed", G_CALLBACK (plan_changed_cb), self, G_CONNECT_SWAPPED);
  g_signal_connect_object (desk, "storey-changed", G_CALLBACK (show_storeys), self, G_CONNECT_SWAPPED);
  g_signal_connect_object (desk, "question-changed", G_CALLBACK (question_changed_cb), self, G_CONNECT_SWAPPED);
  g_signal_connect_object (ut_desk_selection (desk), "changed", G_CALLBACK (selection_changed_cb), self, G_CONNECT_SWAPPED);
  g_signal_connect_object (ut_desk_solving (desk), "answered", G_CALLBACK (answered_cb), self, G_CONNECT_SWAPPED);
  g_signal_connect_object (document, "notify::modified", G_CALLBACK (show_title), self, G_CONNECT_SWAPPED);
  ut_window_watch_document (self);
  g_signal_connect_object (document, "notify::file", G_CALLBACK (show_title), self, G_CONNECT_SWAPPED);
  gtk_stack_set_visible_child_name (self->pages, "work");
  ut_sheet_set_desk (self->sheet, desk);
  ut_links_panel_set_up (self->links, ut_desk_solving (desk), ut_desk_selection (desk));
  for (GtkWidget *panel = gtk_widget_get_first_child (GTK_WIDGET (self->panels)); panel != NULL; panel = gtk_widget_get_next_sibling (panel))
    if (UT_IS_PANEL (panel))
      ut_panel_set_desk (UT_PANEL (panel), desk);
  ut_details_set_desk (self->details, desk);
  plan_changed_cb (self);
  selection_changed_cb (self);
  question_changed_cb (self);
  answered_cb (self);
}

UtWindow *
ut_window_new (UtApplication *application, UtDocument *document)
{
  UtWindow *self = g_object_new (UT_TYPE_WINDOW, "application", application, NULL);

  ut_window_set_document (self, document);
  gtk_widget_grab_focus (GTK_WIDGET (self->sheet));
  return self;
}

void
ut_window_show_start (UtWindow *self)
{
  gtk_stack_set_visible_child_name (self->pages, "start");
  ut_start_page_focus (self->start_page);
}

UtDesk *
ut_window_desk (UtWindow *self)
{
  return self->desk;
}

UtSheet *
ut_window_sheet (UtWindow *self)
{
  return self->sheet;
}
