/* The window's actions on what is selected and on storeys: clipboard, order, walls. */
#include "window-private.h"

#include <math.h>

#include <glib/gi18n.h>

#include "arrange.h"
#include "ask.h"
#include "clipboard.h"
#include "compat.h"
#include "fragment.h"
#include "hit.h"
#include "plan-edit.h"
#include "storey-edits.h"
#include "wall-edits.h"

#define ACTION(name) static void name (GSimpleAction *action, GVariant *parameter, gpointer data)
#define IGNORE_ACTION                                                                              \
  (void) action;                                                                                   \
  (void) parameter

static const UtPlan *
plan_of (UtWindow *self)
{
  ut_desk_drop_draft (self->desk);
  return ut_document_plan (ut_desk_document (self->desk));
}

/* ---- clipboard ---- */

ACTION (copy_cb)
{
  IGNORE_ACTION;
  ut_clipboard_copy (data, UT_WINDOW (data)->desk);
}

ACTION (cut_cb)
{
  UtWindow *self = data;

  IGNORE_ACTION;
  if (ut_clipboard_copy (data, self->desk))
    ut_desk_delete_selected (self->desk);
}

/* With its middle under the pointer, on the grid of 0.1 m. */
static void
clipboard_cb (const UtPlan *fragment, gpointer data)
{
  g_autoptr (UtWindow) self = data;
  double middle_x, middle_y, x, y;

  if (self->desk == NULL)
    return;
  if (fragment == NULL || !ut_fragment_middle (fragment, &middle_x, &middle_y))
    {
      gtk_widget_error_bell (GTK_WIDGET (self));
      return;
    }
  ut_sheet_pointer (self->sheet, &x, &y);
  ut_desk_put_fragment (self->desk, fragment, round ((x - middle_x) * 10) / 10, round ((y - middle_y) * 10) / 10, FALSE, _ ("Paste"));
}

ACTION (paste_cb)
{
  IGNORE_ACTION;
  ut_clipboard_read (data, clipboard_cb, g_object_ref (data));
}

ACTION (duplicate_cb)
{
  IGNORE_ACTION;
  ut_desk_duplicate_selected (UT_WINDOW (data)->desk);
}

/* ---- what is selected ---- */

ACTION (select_kind_cb)
{
  UtWindow *self = data;
  UtSelection *selection = ut_desk_selection (self->desk);
  const UtPlan *plan = ut_desk_plan (self->desk);
  const char *word = g_variant_get_string (parameter, NULL);
  guint storey = ut_desk_storey (self->desk);

  (void) action;
  ut_selection_freeze (selection);
  ut_selection_clear (selection);
  for (guint i = 0; i < plan->cells->len && g_str_equal (word, "cells"); i++)
    ut_selection_add (selection, UT_KIND_CELL, ut_plan_cell (plan, i)->radio.id);
  for (guint i = 0; i < plan->terminals->len && g_str_equal (word, "terminals"); i++)
    ut_selection_add (selection, UT_KIND_TERMINAL, ut_plan_terminal (plan, i)->radio.id);
  for (guint w = 0; w < ut_plan_storey (plan, storey)->walls->len && g_str_equal (word, "walls"); w++)
    {
      g_autofree char *pick = ut_wall_pick_id (plan, storey, w);

      ut_selection_add (selection, UT_KIND_WALL, pick);
    }
  ut_selection_thaw (selection);
}

ACTION (align_cb)
{
  UtWindow *self = data;
  g_autofree char *label = ut_desk_step_label (self->desk, _ ("Align"));

  (void) action;
  if (ut_selection_size (ut_desk_selection (self->desk)) < 2)
    return;
  for (guint i = 0; i < UT_N_ALIGNS; i++)
    if (g_str_equal (ut_align_words[i], g_variant_get_string (parameter, NULL)))
      ut_desk_apply (self->desk, ut_plan_aligned (plan_of (self), ut_desk_selection (self->desk), (UtAlign) i), label, NULL);
}

ACTION (distribute_cb)
{
  UtWindow *self = data;
  g_autofree char *label = ut_desk_step_label (self->desk, _ ("Distribute"));
  gboolean along_x = g_str_equal (g_variant_get_string (parameter, NULL), "x");

  (void) action;
  if (ut_selection_size (ut_desk_selection (self->desk)) >= 3)
    ut_desk_apply (self->desk, ut_plan_distributed (plan_of (self), ut_desk_selection (self->desk), along_x), label, NULL);
}

static void
repeat_asked (const double *values, gpointer data)
{
  UtWindow *self = data;
  UtSelection *selection = ut_desk_selection (self->desk);
  g_autofree char *added = NULL;
  const UtPlan *plan = ut_plan_repeated (plan_of (self), selection, ut_desk_storey (self->desk), (guint) values[0], (guint) values[1], values[2], values[3], &added);
  g_autofree char *all = ut_selection_to_text (selection);
  g_autofree char *both = g_strconcat (all, "\n", added, NULL);

  ut_desk_apply_and_select (self->desk, plan, _ ("Repeat"), added);
  if (added[0] != '\0')
    ut_selection_set_text (selection, both);
}

ACTION (repeat_cb)
{
  UtWindow *self = data;
  const UtAskRow rows[] = {
    { _ ("Columns"), 3, 1, 50, 1, 0 },
    { _ ("Rows"), 2, 1, 50, 1, 0 },
    { _ ("Column distance (m)"), 5, -1000, 1000, 0.5, 2 },
    { _ ("Row distance (m)"), 5, -1000, 1000, 0.5, 2 },
  };

  IGNORE_ACTION;
  if (ut_selection_size (ut_desk_selection (self->desk)) > 0)
    ut_ask_numbers (data, _ ("Repeat in Columns and Rows"), _ ("_Repeat"), rows, G_N_ELEMENTS (rows), repeat_asked, data);
}

/* For drivers and scripts: columns, rows, distances in metres. */
ACTION (repeat_by_cb)
{
  double values[4];

  (void) action;
  g_variant_get (parameter, "(dddd)", &values[0], &values[1], &values[2], &values[3]);
  if (ut_selection_size (ut_desk_selection (UT_WINDOW (data)->desk)) > 0)
    repeat_asked (values, data);
}

/* ---- presets ---- */

ACTION (keep_preset_cb)
{
  UtWindow *self = data;
  UtSelection *selection = ut_desk_selection (self->desk);
  g_autoptr (GError) error = NULL;

  IGNORE_ACTION;
  if (ut_selection_size (selection) != 1 || ut_selection_n_radios (selection) != 1)
    return;
  const UtPick *pick = ut_selection_pick (selection, 0);
  if (!ut_presets_add (ut_presets_get_default (), plan_of (self), pick->kind, pick->id, &error))
    ut_compat_tell (data, _ ("The preset could not be kept"), error->message);
}

ACTION (open_presets_cb)
{
  GFile *file = ut_presets_file (ut_presets_get_default ());

  IGNORE_ACTION;
  if (g_file_query_exists (file, NULL))
    ut_window_open_file (UT_APPLICATION (gtk_window_get_application (data)), data, file);
  else
    ut_compat_tell (data, _ ("There are no presets yet"), _ ("Select a radio and keep it as a preset in the menu of the sheet."));
}

/* ---- walls ---- */

ACTION (join_walls_cb)
{
  UtWindow *self = data;
  UtSelection *selection = ut_desk_selection (self->desk);
  const UtPlan *plan = plan_of (self), *joined;
  guint storeys[2], walls[2];
  g_autofree char *label = ut_desk_step_label (self->desk, _ ("Join")), *pick = NULL;

  IGNORE_ACTION;
  if (ut_selection_size (selection) != 2 || ut_selection_n_radios (selection) > 0
      || !ut_plan_find_picked_wall (plan, ut_selection_pick (selection, 0)->id, &storeys[0], &walls[0])
      || !ut_plan_find_picked_wall (plan, ut_selection_pick (selection, 1)->id, &storeys[1], &walls[1]) || storeys[0] != storeys[1])
    {
      ut_compat_tell (data, _ ("Nothing to join"), _ ("Select two walls of one storey that share an end."));
      return;
    }
  joined = ut_plan_with_walls_joined (plan, storeys[0], walls[0], walls[1]);
  if (joined == NULL)
    {
      ut_compat_tell (data, _ ("These walls do not meet"), _ ("Drag an end of one onto an end of the other first."));
      return;
    }
  pick = g_strdup (ut_selection_pick (selection, 0)->id);
  ut_desk_apply (self->desk, joined, label, NULL);
  ut_selection_set_one (selection, UT_KIND_WALL, pick);
}

/* Where the menu was asked for: at the corner there, else at a new one. */
ACTION (split_wall_cb)
{
  UtWindow *self = data;
  UtSelection *selection = ut_desk_selection (self->desk);
  const UtPlan *plan = plan_of (self);
  g_autofree char *label = ut_desk_step_label (self->desk, _ ("Split"));
  double x_m, y_m, reach_m = UT_VERTEX_PX / ut_sheet_view (self->sheet)->scale_px_m;
  guint storey, index, piece, vertex = 0;

  IGNORE_ACTION;
  if (ut_selection_size (selection) != 1 || !ut_plan_find_picked_wall (plan, ut_selection_pick (selection, 0)->id, &storey, &index))
    return;
  const UtWall *wall = ut_plan_storey (plan, storey)->walls->pdata[index];
  ut_sheet_menu_point (self->sheet, &x_m, &y_m);
  for (guint i = 1; i + 1 < wall->points->len; i++)
    if (hypot (g_array_index (wall->points, UtPoint, i).x_m - x_m, g_array_index (wall->points, UtPoint, i).y_m - y_m) <= reach_m)
      vertex = i;
  g_autoptr (UtPlan) with = (UtPlan *) ut_plan_ref (plan);
  if (vertex == 0)
    {
      double along_m, before_m = 0;

      ut_wall_distance_m (wall, x_m, y_m, &along_m, &piece);
      for (guint i = 0; i < piece; i++)
        before_m += hypot (g_array_index (wall->points, UtPoint, i + 1).x_m - g_array_index (wall->points, UtPoint, i).x_m,
                           g_array_index (wall->points, UtPoint, i + 1).y_m - g_array_index (wall->points, UtPoint, i).y_m);
      UtPoint a = g_array_index (wall->points, UtPoint, piece), b = g_array_index (wall->points, UtPoint, piece + 1);
      double length_m = hypot (b.x_m - a.x_m, b.y_m - a.y_m), share = length_m > 0 ? (along_m - before_m) / length_m : 0;

      if (share * length_m < 0.01 || (1 - share) * length_m < 0.01)
        return;
      ut_plan_unref (with);
      with = (UtPlan *) ut_plan_with_vertex_added (plan, storey, index, piece, a.x_m + share * (b.x_m - a.x_m), a.y_m + share * (b.y_m - a.y_m));
      vertex = piece + 1;
    }
  ut_desk_apply (self->desk, ut_plan_with_wall_split (with, storey, index, vertex), label, NULL);
}

/* ---- storeys ---- */

static void
show_new_storey (UtWindow *self, const UtPlan *plan, guint index, const char *verb)
{
  g_autofree char *label = g_strconcat (verb, " ", ut_plan_storey (plan, index)->name, NULL);

  ut_desk_apply (self->desk, plan, label, NULL);
  ut_selection_clear (ut_desk_selection (self->desk));
  ut_desk_set_storey (self->desk, index);
}

ACTION (storey_add_cb)
{
  UtWindow *self = data;
  guint index;
  const UtPlan *plan = ut_plan_with_new_storey (plan_of (self), &index);

  IGNORE_ACTION;
  show_new_storey (self, plan, index, _ ("Add"));
}

ACTION (storey_duplicate_cb)
{
  UtWindow *self = data;
  guint index;
  const UtPlan *plan = ut_plan_with_storey_copied (plan_of (self), ut_desk_storey (self->desk), &index);

  IGNORE_ACTION;
  show_new_storey (self, plan, index, _ ("Duplicate as"));
}

ACTION (storey_remove_cb)
{
  UtWindow *self = data;
  const UtPlan *plan = plan_of (self);
  g_autofree char *label = g_strconcat (_ ("Remove"), " ", ut_plan_storey (plan, ut_desk_storey (self->desk))->name, NULL);

  IGNORE_ACTION;
  if (plan->storeys->len < 2)
    ut_compat_tell (data, _ ("This is the only storey"), _ ("A plan has one storey at least."));
  else
    ut_desk_apply (self->desk, ut_plan_without_storey (plan, ut_desk_storey (self->desk)), label, NULL);
}

/* Up or down in the list. */
ACTION (storey_order_cb)
{
  UtWindow *self = data;
  const UtPlan *plan = plan_of (self);
  guint from = ut_desk_storey (self->desk);
  int to = (int) from + g_variant_get_int32 (parameter);
  g_autofree char *label = g_strconcat (_ ("Reorder"), " ", ut_plan_storey (plan, from)->name, NULL);

  (void) action;
  if (to < 0 || to >= (int) plan->storeys->len)
    return;
  ut_desk_apply (self->desk, ut_plan_with_storey_at (plan, from, (guint) to), label, NULL);
  ut_desk_set_storey (self->desk, (guint) to);
}

/* By what was measured: from a point of this storey to where it belongs over the one below. */
ACTION (storey_shift_cb)
{
  UtWindow *self = data;
  const UtMeasure *measure = ut_sheet_measure (self->sheet);
  const UtPlan *plan = plan_of (self);
  guint storey = ut_desk_storey (self->desk);
  g_autofree char *label = g_strconcat (_ ("Shift"), " ", ut_plan_storey (plan, storey)->name, NULL);

  IGNORE_ACTION;
  if (measure == NULL || measure->storey != storey)
    {
      ut_compat_tell (data, _ ("Nothing is measured"), _ ("Drag with the measure tool from a point of this storey to where it belongs over the storey below."));
      return;
    }
  ut_desk_apply (self->desk, ut_plan_with_storey_moved (plan, storey, measure->to.x_m - measure->from.x_m, measure->to.y_m - measure->from.y_m), label, NULL);
  ut_sheet_set_tool (self->sheet, UT_TOOL_SELECT);
}

static void
ghost_cb (GSimpleAction *action, GVariant *state, gpointer data)
{
  g_simple_action_set_state (action, state);
  ut_sheet_set_ghost (UT_WINDOW (data)->sheet, g_variant_get_boolean (state));
}

void
ut_window_add_edit_actions (UtWindow *self)
{
  static const GActionEntry actions[] = {
    { .name = "copy", .activate = copy_cb },
    { .name = "cut", .activate = cut_cb },
    { .name = "paste", .activate = paste_cb },
    { .name = "duplicate", .activate = duplicate_cb },
    { .name = "select-kind", .activate = select_kind_cb, .parameter_type = "s" },
    { .name = "align", .activate = align_cb, .parameter_type = "s" },
    { .name = "distribute", .activate = distribute_cb, .parameter_type = "s" },
    { .name = "repeat", .activate = repeat_cb },
    { .name = "repeat-by", .activate = repeat_by_cb, .parameter_type = "(dddd)" },
    { .name = "keep-preset", .activate = keep_preset_cb },
    { .name = "open-presets", .activate = open_presets_cb },
    { .name = "join-walls", .activate = join_walls_cb },
    { .name = "split-wall", .activate = split_wall_cb },
    { .name = "storey-add", .activate = storey_add_cb },
    { .name = "storey-duplicate", .activate = storey_duplicate_cb },
    { .name = "storey-remove", .activate = storey_remove_cb },
    { .name = "storey-order", .activate = storey_order_cb, .parameter_type = "i" },
    { .name = "storey-shift", .activate = storey_shift_cb },
    { .name = "storey-ghost", .state = "true", .change_state = ghost_cb },
  };

  g_action_map_add_action_entries (G_ACTION_MAP (self), actions, G_N_ELEMENTS (actions), self);
  ut_sheet_set_ghost (self->sheet, TRUE);
}

/* What acts on a selection acts only where there is one. */
void
ut_window_show_edits (UtWindow *self)
{
  static const struct
  {
    const char *action;
    guint least;
  } needs[] = { { "copy", 1 }, { "cut", 1 }, { "duplicate", 1 }, { "repeat", 1 }, { "align", 2 }, { "distribute", 3 }, { "join-walls", 2 } };
  UtSelection *selection = ut_desk_selection (self->desk);
  guint n = ut_selection_size (selection), n_walls = n - ut_selection_n_radios (selection);

  for (gsize i = 0; i < G_N_ELEMENTS (needs); i++)
    {
      gboolean enough = n >= needs[i].least && (!g_str_equal (needs[i].action, "join-walls") || (n == 2 && n_walls == 2));

      g_simple_action_set_enabled (G_SIMPLE_ACTION (g_action_map_lookup_action (G_ACTION_MAP (self), needs[i].action)), enough);
    }
  g_simple_action_set_enabled (G_SIMPLE_ACTION (g_action_map_lookup_action (G_ACTION_MAP (self), "split-wall")), n == 1 && n_walls == 1);
  g_simple_action_set_enabled (G_SIMPLE_ACTION (g_action_map_lookup_action (G_ACTION_MAP (self), "keep-preset")), n == 1 && n_walls == 0);
}
