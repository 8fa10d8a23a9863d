/* The desk without a window: selection, drags, steps, fields, and answers that are never stale. */
#include <math.h>
#include <string.h>

#include "construction-edits.h"
#include "construction-loss.h"
#include "desks.h"
#include "fields.h"
#include "plan-edit.h"
#include "plan-read.h"
#include "plan-write.h"
#include "tool.h"
#include "wall-tool.h"
#include "wall-edits.h"

static UtPointer
at (double x_m, double y_m)
{
  return (UtPointer){ .x_m = x_m, .y_m = y_m, .px_per_m = 40 };
}

static void
assert_place (UtDesk *desk, UtRadioKind kind, const char *id, double x_m, double y_m)
{
  const UtRadio *radio = ut_plan_radio (ut_desk_plan (desk), kind, id);

  g_assert_nonnull (radio);
  g_assert_cmpfloat_with_epsilon (radio->x_m, x_m, 1e-9);
  g_assert_cmpfloat_with_epsilon (radio->y_m, y_m, 1e-9);
}

/* The answer is the one that solving the shown plan anew gives. */
static void
assert_answered (UtDesk *desk)
{
  UtStudy *shown = ut_desk_answer (desk);
  g_autoptr (UtStudy) fresh = ut_study_new (ut_desk_plan (desk), ut_desk_question (desk), NULL);

  g_assert_nonnull (shown);
  g_assert_true (shown->gains->plan == ut_desk_plan (desk));
  g_assert_cmpint (shown->verdict, ==, fresh->verdict);
  g_assert_cmpfloat_with_epsilon (shown->headroom_db, fresh->headroom_db, 1e-9);
}

static void
test_clicks (void)
{
  g_autoptr (UtDesk) desk = open_desk ("two-rooms.undertone");
  UtSelection *selection = ut_desk_selection (desk);
  const UtRadio *cell = &ut_plan_cell (ut_desk_plan (desk), 0)->radio, *terminal = &ut_plan_terminal (ut_desk_plan (desk), 0)->radio;
  UtPointer on_cell = at (cell->x_m, cell->y_m), on_terminal = at (terminal->x_m, terminal->y_m), nowhere = at (-30, -30);

  ut_select_click (desk, &on_cell, 0);
  g_assert_true (ut_selection_has (selection, UT_KIND_CELL, cell->id));
  ut_select_click (desk, &on_terminal, 0);
  g_assert_cmpuint (ut_selection_size (selection), ==, 1);
  g_assert_true (ut_selection_has (selection, UT_KIND_TERMINAL, terminal->id));
  on_cell.add = TRUE;
  ut_select_click (desk, &on_cell, 0);
  g_assert_cmpuint (ut_selection_size (selection), ==, 2);
  ut_select_click (desk, &on_cell, 0); /* once more takes it out */
  g_assert_cmpuint (ut_selection_size (selection), ==, 1);
  ut_select_click (desk, &nowhere, 0);
  g_assert_cmpuint (ut_selection_size (selection), ==, 0);
}

static void
test_move (void)
{
  g_autoptr (UtDesk) desk = open_desk ("cold-store.undertone");
  UtDocument *document = ut_desk_document (desk);
  g_autofree char *before = ut_plan_write (ut_desk_plan (desk), NULL), *after = NULL;
  UtSelectDrag drag;
  UtPointer pointer = at (60, 24);

  ut_select_begin (&drag, desk, &pointer);
  g_assert_cmpint (drag.kind, ==, UT_DRAG_MOVE);
  for (int i = 1; i <= 10; i++)
    {
      pointer = at (60 + i, 24 + 0.5 * i);
      ut_select_update (&drag, desk, &pointer);
      assert_answered (desk);
    }
  assert_place (desk, UT_KIND_CELL, "C3", 70, 29);
  g_assert_null (ut_document_undo_label (document)); /* a draft is no step */
  ut_select_end (&drag, desk);
  g_assert_cmpstr (ut_document_undo_label (document), ==, "Move C3");
  assert_answered (desk);
  ut_desk_undo (desk);
  assert_place (desk, UT_KIND_CELL, "C3", 60, 24);
  assert_answered (desk);
  ut_desk_redo (desk);
  assert_place (desk, UT_KIND_CELL, "C3", 70, 29);
  ut_desk_undo (desk);

  pointer = at (60, 24);
  ut_select_begin (&drag, desk, &pointer);
  pointer = at (20, 20);
  ut_select_update (&drag, desk, &pointer);
  ut_select_cancel (&drag, desk);
  after = ut_plan_write (ut_desk_plan (desk), NULL);
  g_assert_cmpstr (after, ==, before);
  assert_answered (desk);
}

static void
test_band (void)
{
  g_autoptr (UtDesk) desk = open_desk ("cold-store.undertone");
  UtSelectDrag drag;
  UtPointer pointer = at (53, 1);

  ut_select_begin (&drag, desk, &pointer);
  g_assert_cmpint (drag.kind, ==, UT_DRAG_BAND);
  pointer = at (67, 47);
  ut_select_update (&drag, desk, &pointer);
  ut_select_end (&drag, desk);
  g_assert_true (ut_selection_has (ut_desk_selection (desk), UT_KIND_CELL, "C3"));
  g_assert_false (ut_selection_has (ut_desk_selection (desk), UT_KIND_CELL, "C4"));
  g_assert_cmpuint (ut_selection_size (ut_desk_selection (desk)), >, 3);
  ut_desk_delete_selected (desk);
  g_assert_cmpuint (ut_selection_size (ut_desk_selection (desk)), ==, 0);
  g_assert_cmpuint (ut_desk_plan (desk)->cells->len, ==, 3);
  ut_desk_undo (desk);
  g_assert_cmpuint (ut_desk_plan (desk)->cells->len, ==, 4);
}

static void
test_power_handle (void)
{
  g_autoptr (UtDesk) desk = open_desk ("cold-store.undertone");
  const UtRadio *cell = ut_plan_radio (ut_desk_plan (desk), UT_KIND_CELL, "C1");
  UtQuestion question = { .direction = UT_DIRECTION_DOWN, .aim = UT_AIM_AS_SET };
  double knob_px = ut_power_handle_px (cell, cell->power_dbm);
  UtPointer pointer = at (cell->x_m + UT_POWER_HANDLE_X_PX / 40, cell->y_m + knob_px / 40);
  UtSelectDrag drag;

  ut_desk_set_question (desk, &question);
  ut_selection_set_one (ut_desk_selection (desk), UT_KIND_CELL, "C1");
  ut_select_begin (&drag, desk, &pointer);
  g_assert_cmpint (drag.kind, ==, UT_DRAG_POWER);
  pointer.y_m -= UT_POWER_HANDLE_PX / 40 / 2; /* half of the handle: half of the range */
  ut_select_update (&drag, desk, &pointer);
  g_assert_cmpfloat_with_epsilon (ut_plan_radio (ut_desk_plan (desk), UT_KIND_CELL, "C1")->power_dbm, 12, 0.06);
  assert_answered (desk);
  pointer.y_m -= 100; /* far below: the lowest power */
  ut_select_update (&drag, desk, &pointer);
  ut_select_end (&drag, desk);
  g_assert_cmpfloat_with_epsilon (ut_plan_radio (ut_desk_plan (desk), UT_KIND_CELL, "C1")->power_dbm, 0, 1e-9);
  g_assert_cmpstr (ut_document_undo_label (ut_desk_document (desk)), ==, "Set Power of C1");
}

static void
test_place_and_nudge (void)
{
  g_autoptr (UtDesk) desk = open_desk ("two-rooms.undertone");
  g_autofree char *before = ut_plan_write (ut_desk_plan (desk), NULL), *after = NULL;

  ut_desk_place (desk, UT_KIND_TERMINAL, "S1", 3, 4);
  assert_place (desk, UT_KIND_TERMINAL, "T3", 3, 4);
  for (int i = 0; i < 5; i++)
    ut_desk_nudge_selected (desk, 0.1, 0);
  assert_place (desk, UT_KIND_TERMINAL, "T3", 3.5, 4);
  assert_answered (desk);
  g_assert_cmpstr (ut_document_undo_label (ut_desk_document (desk)), ==, "Nudge T3");
  ut_desk_undo (desk); /* nudges in a row are one step */
  assert_place (desk, UT_KIND_TERMINAL, "T3", 3, 4);
  ut_desk_undo (desk);
  after = ut_plan_write (ut_desk_plan (desk), NULL);
  g_assert_cmpstr (after, ==, before);
  g_assert_false (ut_document_is_modified (ut_desk_document (desk)));
}

/* Every field of every subject gives back what it shows, takes a new value, and refuses what the reader would refuse. */
static void
test_fields (void)
{
  g_autoptr (UtDesk) desk = open_desk ("cold-store.undertone");
  const UtPlan *plan = ut_desk_plan (desk);
  g_autofree char *before = ut_plan_write (plan, NULL);
  static const struct { UtSubject subject; const char *id; } subjects[] = { { UT_SUBJECT_PLAN, "S1" }, { UT_SUBJECT_CELL, "C2" }, { UT_SUBJECT_TERMINAL, "T4" },
                                                                            { UT_SUBJECT_CELL, "C1\nC2" } };

  for (gsize s = 0; s < G_N_ELEMENTS (subjects); s++)
    for (guint i = 0; i < ut_fields_count (subjects[s].subject); i++)
      {
        g_autofree char *text = ut_fields_text (plan, subjects[s].subject, subjects[s].id, i), *refusal = NULL;
        g_autoptr (UtPlan) same = (UtPlan *) ut_fields_with (plan, subjects[s].subject, subjects[s].id, i, text, &refusal);
        g_autofree char *after = NULL;

        g_assert_null (refusal);
        if (same == NULL)
          {
            /* Fields of a backdrop where there is none. */
            g_assert_false (ut_fields_applies (plan, subjects[s].subject, subjects[s].id, i));
            continue;
          }
        if (ut_fields_mixed (plan, subjects[s].subject, subjects[s].id, i))
          continue;
        after = ut_plan_write (same, NULL);
        g_assert_cmpstr (after, ==, before);
        if (ut_fields_field (subjects[s].subject, i)->kind == UT_FIELD_NUMBER)
          {
            g_autofree char *no_number = NULL, *too_much = NULL;

            g_assert_null (ut_fields_with (plan, subjects[s].subject, subjects[s].id, i, "much", &no_number));
            g_assert_nonnull (no_number);
            g_assert_null (ut_fields_with (plan, subjects[s].subject, subjects[s].id, i, "1e999", &too_much));
            g_assert_nonnull (too_much);
          }
      }
}

static guint
field_index (UtSubject subject, const char *label)
{
  for (guint i = 0; i < ut_fields_count (subject); i++)
    if (g_str_equal (ut_fields_field (subject, i)->label, label))
      return i;
  g_assert_not_reached ();
}

static void
test_field_edits (void)
{
  g_autoptr (UtDesk) desk = open_desk ("cold-store.undertone");
  const UtPlan *plan = ut_desk_plan (desk);
  g_autofree char *refusal = NULL;
  g_autoptr (UtPlan) comma = (UtPlan *) ut_fields_with (plan, UT_SUBJECT_CELL, "C1", field_index (UT_SUBJECT_CELL, "x"), "12,5", &refusal);
  g_autoptr (UtPlan) none = (UtPlan *) ut_fields_with (plan, UT_SUBJECT_TERMINAL, "T1", field_index (UT_SUBJECT_TERMINAL, "Downlink target"), "", &refusal);
  g_autoptr (UtPlan) served = (UtPlan *) ut_fields_with (plan, UT_SUBJECT_TERMINAL, "T1", field_index (UT_SUBJECT_TERMINAL, "Served by"), "2", &refusal);

  g_assert_null (refusal);
  g_assert_cmpfloat_with_epsilon (ut_plan_cell (comma, 0)->radio.x_m, 12.5, 1e-12);
  g_assert_true (isnan (ut_plan_terminal (none, 0)->target_down_db));
  g_assert_cmpstr (ut_plan_terminal (served, 0)->cell, ==, "C2");
  g_assert_null (ut_fields_with (plan, UT_SUBJECT_CELL, "C1", field_index (UT_SUBJECT_CELL, "Lowest power"), "99", &refusal)); /* above the highest */
  g_assert_nonnull (refusal);
}

/* With no time in the frame answers come from a thread; what was asked before is dropped, and the old answer never passes for the new. */
static void
test_thread (void)
{
  g_autoptr (UtDesk) desk = open_desk ("cold-store.undertone");
  UtSolving *solving = ut_desk_solving (desk);
  UtQuestion question = { .direction = UT_DIRECTION_DOWN, .aim = UT_AIM_LEAST_POWER };

  ut_solving_set_budget (solving, 0);
  for (int i = 0; i < 20; i++)
    {
      question.direction = i % 2 ? UT_DIRECTION_DOWN : UT_DIRECTION_UP;
      ut_desk_set_question (desk, &question);
      g_assert_true (ut_solving_is_stale (solving));
      g_assert_null (ut_desk_answer (desk));
      g_assert_nonnull (ut_solving_study (solving)); /* the old one stays to be shown as old */
    }
  while (ut_solving_is_stale (solving))
    g_main_context_iteration (NULL, TRUE);
  g_assert_cmpint (ut_desk_answer (desk)->question.direction, ==, UT_DIRECTION_DOWN);
  assert_answered (desk);
}

static const UtPlan *
with (const UtPlan *plan, const char *label, const char *text)
{
  g_autofree char *refusal = NULL;
  const UtPlan *next = ut_fields_with (plan, UT_SUBJECT_PLAN, NULL, field_index (UT_SUBJECT_PLAN, label), text, &refusal);

  g_test_message ("%s: %s", label, refusal != NULL ? refusal : "taken");
  return next;
}

/* Every law can be chosen, shows its own parameters and no others, and lists are typed with spaces. */
static void
test_law_fields (void)
{
  static const char *const own[][6] = {
    { NULL }, { "Exponent", "Reference distance", NULL }, { "Environment", "Line of sight", NULL }, { "Coefficient", "1, 2, 3 … floors", NULL },
    { "Line of sight", NULL }, { "Line of sight", "Clutter", NULL }, { "Light wall", "Heavy wall", "Floor", "Floor exponent b", NULL },
  };
  static const char *const parameters[] = { "Exponent", "Reference distance", "Environment", "Line of sight", "Clutter", "Coefficient", "1, 2, 3 … floors",
                                            "Light wall", "Heavy wall", "Floor", "Floor exponent b" };
  g_autoptr (UtPlan) plan = (UtPlan *) ut_plan_new_empty ();

  for (guint law = 0; law < G_N_ELEMENTS (own); law++)
    {
      char position[] = { (char) ('0' + law), '\0' };
      g_autoptr (UtPlan) chosen = law == plan->propagation->law ? (UtPlan *) ut_plan_ref (plan) : (UtPlan *) with (plan, "Law", position);

      g_assert_nonnull (chosen);
      g_assert_cmpint (chosen->propagation->law, ==, law);
      for (guint k = 0; k < G_N_ELEMENTS (parameters); k++)
        g_assert_cmpint (ut_fields_applies (chosen, UT_SUBJECT_PLAN, NULL, field_index (UT_SUBJECT_PLAN, parameters[k])), ==, g_strv_contains (own[law], parameters[k]));
    }
  g_autoptr (UtPlan) coefficient = (UtPlan *) with (plan, "Law", "3");
  g_autoptr (UtPlan) floors = (UtPlan *) with (coefficient, "1, 2, 3 … floors", "9 19,5; 24");
  g_assert_nonnull (floors);
  g_assert_cmpuint (floors->propagation->floor_loss_db->len, ==, 3);
  g_assert_cmpfloat (g_array_index (floors->propagation->floor_loss_db, double, 1), ==, 19.5);
  g_autofree char *text = ut_fields_text (floors, UT_SUBJECT_PLAN, NULL, field_index (UT_SUBJECT_PLAN, "1, 2, 3 … floors"));
  g_assert_cmpstr (text, ==, "9 19.5 24");
  g_assert_null (with (coefficient, "1, 2, 3 … floors", "9 many"));
  g_assert_null (with (coefficient, "1, 2, 3 … floors", "9 -1"));
}

/* ---- walls ---- */

static const UtWall *
wall_of (UtDesk *desk, guint index)
{
  const UtStorey *storey = ut_plan_storey (ut_desk_plan (desk), 0);

  g_assert_cmpuint (index, <, storey->walls->len);
  return storey->walls->pdata[index];
}

static void
assert_points (const UtWall *wall, const double (*points)[2], guint n)
{
  g_assert_cmpuint (wall->points->len, ==, n);
  for (guint i = 0; i < n; i++)
    {
      g_assert_cmpfloat_with_epsilon (g_array_index (wall->points, UtPoint, i).x_m, points[i][0], 1e-9);
      g_assert_cmpfloat_with_epsilon (g_array_index (wall->points, UtPoint, i).y_m, points[i][1], 1e-9);
    }
}

static void
click_wall (UtWallDraw *draw, UtDesk *desk, double x_m, double y_m)
{
  UtPointer pointer = at (x_m, y_m);

  ut_wall_draw_hover (draw, desk, &pointer);
  ut_wall_draw_click (draw, desk, &pointer, FALSE);
}

static void
type (UtWallDraw *draw, const char *text)
{
  for (; *text != '\0'; text++)
    g_assert_true (ut_wall_draw_type (draw, (gunichar) *text));
}

/* A room of 5 by 4 m: clicks near the right places, a length typed, closed on its first corner; then a door in it. */
static void
test_draw_room (void)
{
  g_autoptr (UtDesk) desk = empty_desk ();
  g_autofree char *before = ut_plan_write (ut_desk_plan (desk), NULL), *after = NULL, *drawn = NULL, *redrawn = NULL;
  UtWallDraw draw = { 0 };
  UtOpeningDraw opening;
  double length_m, direction_deg;

  click_wall (&draw, desk, 1.01, 0.99);
  UtPointer pointer = at (4, 1.1);
  ut_wall_draw_hover (&draw, desk, &pointer);
  g_assert_cmpint (draw.snap, ==, UT_SNAP_RIGHT_ANGLE);
  type (&draw, "55");
  g_assert_true (ut_wall_draw_type (&draw, '\b'));
  g_assert_true (ut_wall_draw_piece (&draw, &length_m, &direction_deg));
  g_assert_cmpfloat_with_epsilon (length_m, 5, 1e-9);
  g_assert_cmpfloat_with_epsilon (direction_deg, 90, 1e-9);
  ut_wall_draw_enter (&draw, desk);
  click_wall (&draw, desk, 6.1, 5.02);
  click_wall (&draw, desk, 3, 3); /* a mistake, taken back */
  g_assert_true (ut_wall_draw_back (&draw));
  click_wall (&draw, desk, 1.01, 4.95);
  g_assert_cmpuint (ut_document_undo_label (ut_desk_document (desk)) == NULL, ==, TRUE);
  click_wall (&draw, desk, 1.1, 1.1);
  g_assert_cmpstr (ut_document_undo_label (ut_desk_document (desk)), ==, "Draw Wall W1");
  assert_points (wall_of (desk, 0), (const double[][2]){ { 1, 1 }, { 6, 1 }, { 6, 5 }, { 1, 5 }, { 1, 1 } }, 5);
  g_assert_cmpuint (ut_desk_plan (desk)->constructions->len, >=, 4);
  g_assert_true (ut_selection_pick (ut_desk_selection (desk), 0)->kind == UT_KIND_WALL);
  drawn = ut_plan_write (ut_desk_plan (desk), NULL);

  pointer = at (6.05, 2);
  ut_opening_draw_begin (&opening, desk, &pointer);
  g_assert_true (opening.active);
  pointer = at (5.9, 3.5);
  ut_opening_draw_update (&opening, desk, &pointer);
  ut_opening_draw_end (&opening, desk);
  const UtOpening *door = wall_of (desk, 0)->openings->pdata[0];
  g_assert_cmpfloat_with_epsilon (door->at_m, 6, 1e-9);
  g_assert_cmpfloat_with_epsilon (door->width_m, 1.5, 1e-9);
  g_assert_cmpstr (door->construction, ==, "door-40");
  g_assert_true (door->shut);
  pointer = at (6, 3);
  ut_opening_draw_begin (&opening, desk, &pointer);
  ut_opening_draw_end (&opening, desk);
  g_assert_false (((const UtOpening *) wall_of (desk, 0)->openings->pdata[0])->shut);
  g_assert_cmpstr (ut_document_undo_label (ut_desk_document (desk)), ==, "Open Door in W1");
  pointer = at (3, 1);
  ut_opening_draw_begin (&opening, desk, &pointer);
  ut_opening_draw_end (&opening, desk);
  g_assert_cmpfloat_with_epsilon (((const UtOpening *) wall_of (desk, 0)->openings->pdata[1])->width_m, 0.9, 1e-9);
  for (int i = 0; i < 3; i++)
    ut_desk_undo (desk);
  redrawn = ut_plan_write (ut_desk_plan (desk), NULL);
  g_assert_cmpstr (redrawn, ==, drawn);
  ut_desk_undo (desk);
  after = ut_plan_write (ut_desk_plan (desk), NULL);
  g_assert_cmpstr (after, ==, before);
  ut_wall_draw_clear (&draw);
}

/* Corners are dragged, put in and taken out; openings keep their place on their piece; walls are moved, cut, changed together and deleted. */
static void
test_edit_walls (void)
{
  g_autoptr (UtDesk) desk = empty_desk ();
  UtWallDraw draw = { 0 };
  UtSelectDrag drag;
  UtPointer pointer = at (0, 0);
  g_autofree char *refusal = NULL;

  for (int i = 0; i < 3; i++)
    click_wall (&draw, desk, (const double[]){ 0, 10, 10 }[i], (const double[]){ 0, 0, 8 }[i]);
  g_assert_true (ut_wall_draw_end (&draw, desk));
  ut_desk_apply (desk, ut_plan_with_opening (ut_desk_plan (desk), 0, 0, 12, 13), "Door", NULL);
  g_assert_cmpfloat_with_epsilon (ut_wall_length_m (wall_of (desk, 0)), 18, 1e-9);

  pointer = at (10.02, 0.05);
  ut_select_begin (&drag, desk, &pointer);
  g_assert_cmpint (drag.kind, ==, UT_DRAG_VERTEX);
  pointer = at (12.01, 0.03);
  ut_select_update (&drag, desk, &pointer);
  ut_select_end (&drag, desk);
  assert_points (wall_of (desk, 0), (const double[][2]){ { 0, 0 }, { 12, 0 }, { 10, 8 } }, 3);
  /* The door stands 2 m along its piece, as before. */
  g_assert_cmpfloat_with_epsilon (((const UtOpening *) wall_of (desk, 0)->openings->pdata[0])->at_m, 14, 1e-3);
  g_assert_cmpstr (ut_document_undo_label (ut_desk_document (desk)), ==, "Move Corner of W1");

  pointer = at (5, 0.05);
  g_assert_true (ut_select_edit_wall (desk, &pointer, 1));
  assert_points (wall_of (desk, 0), (const double[][2]){ { 0, 0 }, { 5, 0.05 }, { 12, 0 }, { 10, 8 } }, 4);
  pointer = at (5, 0.05);
  pointer.add = TRUE;
  ut_select_click (desk, &pointer, 0);
  assert_points (wall_of (desk, 0), (const double[][2]){ { 0, 0 }, { 12, 0 }, { 10, 8 } }, 3);
  g_assert_cmpfloat_with_epsilon (((const UtOpening *) wall_of (desk, 0)->openings->pdata[0])->at_m, 14, 1e-2);

  pointer = at (3, 0);
  ut_select_begin (&drag, desk, &pointer);
  g_assert_cmpint (drag.kind, ==, UT_DRAG_MOVE);
  pointer = at (4, 2);
  ut_select_update (&drag, desk, &pointer);
  ut_select_end (&drag, desk);
  assert_points (wall_of (desk, 0), (const double[][2]){ { 1, 2 }, { 13, 2 }, { 11, 10 } }, 3);
  g_assert_cmpstr (ut_document_undo_label (ut_desk_document (desk)), ==, "Move W1");

  ut_desk_apply (desk, ut_plan_with_wall_split (ut_desk_plan (desk), 0, 0, 1), "Cut", NULL);
  assert_points (wall_of (desk, 0), (const double[][2]){ { 1, 2 }, { 13, 2 } }, 2);
  assert_points (wall_of (desk, 1), (const double[][2]){ { 13, 2 }, { 11, 10 } }, 2);
  g_assert_cmpuint (wall_of (desk, 0)->openings->len, ==, 0);
  g_assert_cmpfloat_with_epsilon (((const UtOpening *) wall_of (desk, 1)->openings->pdata[0])->at_m, 2, 1e-2);

  /* Both in a band; their construction is changed in one step. */
  pointer = at (-1, -1);
  ut_selection_clear (ut_desk_selection (desk));
  ut_select_begin (&drag, desk, &pointer);
  pointer = at (20, 20);
  ut_select_update (&drag, desk, &pointer);
  ut_select_end (&drag, desk);
  g_assert_cmpuint (ut_selection_size (ut_desk_selection (desk)), ==, 2);
  g_assert_cmpint (ut_fields_subject (desk), ==, UT_SUBJECT_WALL);
  g_autofree char *ids = ut_fields_id (desk);
  ut_desk_apply (desk, ut_fields_with (ut_desk_plan (desk), UT_SUBJECT_WALL, ids, field_index (UT_SUBJECT_WALL, "Construction"), "2", &refusal), "Change", NULL);
  g_assert_cmpstr (wall_of (desk, 0)->construction, ==, "concrete-200");
  g_assert_cmpstr (wall_of (desk, 1)->construction, ==, "concrete-200");
  g_assert_null (ut_fields_with (ut_desk_plan (desk), UT_SUBJECT_WALL, ids, field_index (UT_SUBJECT_WALL, "Height"), "0", &refusal));
  ut_desk_delete_selected (desk);
  g_assert_cmpstr (ut_document_undo_label (ut_desk_document (desk)), ==, "Delete 2 Walls");
  g_assert_cmpuint (ut_plan_storey (ut_desk_plan (desk), 0)->walls->len, ==, 0);
  ut_desk_undo (desk);
  g_assert_cmpuint (ut_plan_storey (ut_desk_plan (desk), 0)->walls->len, ==, 2);
}

/* What a point is drawn to, and that Alt leaves it where it is. */
static void
test_snap (void)
{
  g_autoptr (UtDesk) desk = empty_desk ();
  UtWallDraw draw = { 0 };
  UtPointer pointer;
  UtSnap snap;
  UtPoint point, from = { 3, 3 }, before = { 0, 0 };

  click_wall (&draw, desk, 0, 0);
  click_wall (&draw, desk, 8, 6);
  g_assert_true (ut_wall_draw_end (&draw, desk));
  pointer = at (7.9, 6.1);
  point = ut_snap_point (ut_desk_plan (desk), &pointer, G_MAXUINT, NULL, NULL, &snap);
  g_assert_true (snap == UT_SNAP_END && fabs (point.x_m - 8) < 1e-12 && fabs (point.y_m - 6) < 1e-12);
  pointer = at (4.05, 3);
  point = ut_snap_point (ut_desk_plan (desk), &pointer, G_MAXUINT, NULL, NULL, &snap);
  g_assert_true (snap == UT_SNAP_WALL && fabs (point.y_m - 0.75 * point.x_m) < 1e-9);
  pointer = at (1.03, 5.02); /* across the piece from (0, 0) to (3, 3) */
  point = ut_snap_point (ut_desk_plan (desk), &pointer, 0, &from, &before, &snap);
  g_assert_true (snap == UT_SNAP_RIGHT_ANGLE && fabs ((point.x_m - 3) + (point.y_m - 3)) < 1e-9);
  pointer = at (20.004, 19.98);
  point = ut_snap_point (ut_desk_plan (desk), &pointer, G_MAXUINT, NULL, NULL, &snap);
  g_assert_true (snap == UT_SNAP_GRID && fabs (point.x_m - 20) < 1e-9 && fabs (point.y_m - 20) < 1e-9);
  pointer.no_snap = TRUE;
  point = ut_snap_point (ut_desk_plan (desk), &pointer, G_MAXUINT, NULL, NULL, &snap);
  g_assert_true (snap == UT_SNAP_NONE && !(point.x_m > 20.004) && !(point.x_m < 20.004));
}

/* Random edits of every kind, undone until nothing is left: the first bytes again; redone: the last. */
static void
test_random_edits (void)
{
  g_autoptr (UtDesk) desk = empty_desk ();
  GRand *rand = g_rand_new_with_seed (11);
  g_autofree char *before = ut_plan_write (ut_desk_plan (desk), NULL), *undone = NULL, *last = NULL, *redone = NULL;

  for (int edit = 0; edit < 2000; edit++)
    {
      const UtStorey *storey = ut_plan_storey (ut_desk_plan (desk), 0);
      guint wall = storey->walls->len > 0 ? (guint) g_rand_int_range (rand, 0, (gint32) storey->walls->len) : 0;
      const UtWall *at_wall = storey->walls->len > 0 ? storey->walls->pdata[wall] : NULL;
      double x = g_rand_double_range (rand, 0, 30), y = g_rand_double_range (rand, 0, 20);
      UtWallDraw draw = { 0 };

      switch (at_wall == NULL ? 0 : g_rand_int_range (rand, 0, 9))
        {
        case 0:
          for (int i = 0; i < 3; i++)
            click_wall (&draw, desk, x + 3 * i, y + g_rand_double_range (rand, -2, 2));
          ut_wall_draw_end (&draw, desk);
          ut_wall_draw_clear (&draw);
          break;
        case 1:
          ut_desk_apply (desk, ut_plan_with_vertex (ut_desk_plan (desk), 0, wall, (guint) g_rand_int_range (rand, 0, (gint32) at_wall->points->len), x, y), "v", NULL);
          break;
        case 2:
          ut_desk_apply (desk, ut_plan_with_vertex_added (ut_desk_plan (desk), 0, wall, 0, x, y), "a", NULL);
          break;
        case 3:
          ut_desk_apply (desk, ut_plan_without_vertex (ut_desk_plan (desk), 0, wall, 0), "r", NULL);
          break;
        case 4:
          ut_desk_apply (desk, ut_plan_with_opening (ut_desk_plan (desk), 0, wall, 0.3, 1.2), "o", NULL);
          break;
        case 5:
          ut_desk_apply (desk, ut_plan_with_wall_split (ut_desk_plan (desk), 0, wall, 1), "s", NULL);
          break;
        case 6:
          ut_desk_place (desk, edit % 2 ? UT_KIND_CELL : UT_KIND_TERMINAL, storey->id, x, y);
          break;
        case 7:
          ut_desk_nudge_selected (desk, 0.1, 0);
          break;
        default:
          if (edit % 3 == 0)
            ut_desk_delete_selected (desk);
          break;
        }
    }
  last = ut_plan_write (ut_desk_plan (desk), NULL);
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  g_autoptr (UtPlan) again = (UtPlan *) ut_plan_read (last, strlen (last), faults);
  g_assert_nonnull (again); /* whatever was done, it is a plan */
  while (ut_document_undo_label (ut_desk_document (desk)) != NULL)
    ut_desk_undo (desk);
  undone = ut_plan_write (ut_desk_plan (desk), NULL);
  g_assert_cmpstr (undone, ==, before);
  while (ut_document_redo_label (ut_desk_document (desk)) != NULL)
    ut_desk_redo (desk);
  redone = ut_plan_write (ut_desk_plan (desk), NULL);
  g_assert_cmpstr (redone, ==, last);
  g_rand_free (rand);
}

/* Applies a change that must be taken. */
static void
change (UtDesk *desk, const UtPlan *plan, const char *refusal)
{
  g_test_message ("%s", refusal != NULL ? refusal : "taken");
  g_assert_nonnull (plan);
  ut_desk_apply (desk, plan, "Change", NULL);
}

/* Constructions are added, given layers of every material and figures of their own, measured losses and classes; what would be no plan is refused. */
static void
test_constructions (void)
{
  g_autoptr (UtDesk) desk = empty_desk ();
  g_autofree char *before = ut_plan_write (ut_desk_plan (desk), NULL), *after = NULL;
  char *refusal = NULL;
  const double normal[] = { 0, 60 };
  UtConstructionLoss losses[2];

  change (desk, ut_plan_with_new_construction (ut_desk_plan (desk), -1), NULL);
  const UtConstruction *one = ut_plan_construction (ut_desk_plan (desk), 0);
  g_assert_cmpstr (one->id, ==, "K1");
  g_assert_cmpuint (one->layers->len, ==, 1);
  for (guint material = 0; material <= ut_n_material_choices (); material++)
    if (g_strcmp0 (ut_material_choices ()[material], "concrete") != 0)
      change (desk, ut_plan_with_layer_material (ut_desk_plan (desk), 0, 0, material, &refusal), refusal);
  g_assert_null (((const UtConstructionLayer *) ut_plan_construction (ut_desk_plan (desk), 0)->layers->pdata[0])->material);
  change (desk, ut_plan_with_layer_figures (ut_desk_plan (desk), 0, 0, "4", "0", &refusal), refusal);
  g_assert_null (ut_plan_with_layer_figures (ut_desk_plan (desk), 0, 0, "0.5", "0", &refusal));
  g_clear_pointer (&refusal, g_free);
  /* A lossless layer of permittivity 4, half a wave thick inside (a quarter outside), lets all through: known to be exact. */
  double wave_mm = 299792.458 / ut_desk_plan (desk)->carrier->frequency_mhz;
  char thickness[G_ASCII_DTOSTR_BUF_SIZE];
  change (desk, ut_plan_with_layer_thickness (ut_desk_plan (desk), 0, 0, g_ascii_dtostr (thickness, sizeof thickness, wave_mm / 4), &refusal), refusal);
  ut_construction_losses (ut_desk_plan (desk), ut_plan_construction (ut_desk_plan (desk), 0), normal, 2, losses);
  g_assert_cmpfloat_with_epsilon (losses[0].exact_db, 0, 1e-9);
  g_assert_cmpfloat (losses[0].averaged_db, >, 0.01);
  g_assert_cmpfloat (losses[0].least_db, <=, losses[0].averaged_db);
  g_assert_cmpfloat (losses[0].most_db, >=, losses[0].averaged_db);
  g_assert_null (ut_plan_with_layer_thickness (ut_desk_plan (desk), 0, 0, "0", &refusal));
  g_clear_pointer (&refusal, g_free);
  g_assert_null (ut_plan_with_layer_thickness (ut_desk_plan (desk), 0, 0, "thick", &refusal));
  g_clear_pointer (&refusal, g_free);
  g_assert_null (ut_plan_without_layer (ut_desk_plan (desk), 0, 0, &refusal)); /* the last one */
  g_clear_pointer (&refusal, g_free);
  change (desk, ut_plan_with_layer_added (ut_desk_plan (desk), 0, &refusal), refusal);
  change (desk, ut_plan_without_layer (ut_desk_plan (desk), 0, 0, &refusal), refusal);
  change (desk, ut_plan_with_construction_class (ut_desk_plan (desk), 0, "heavy", &refusal), refusal);
  change (desk, ut_plan_with_construction_name (ut_desk_plan (desk), 0, "Old wall", &refusal), refusal);
  change (desk, ut_plan_with_construction_loss (ut_desk_plan (desk), 0, "12,5", &refusal), refusal);
  ut_construction_losses (ut_desk_plan (desk), ut_plan_construction (ut_desk_plan (desk), 0), normal, 2, losses);
  g_assert_true (!(losses[1].exact_db < 12.5) && !(losses[1].exact_db > 12.5));
  change (desk, ut_plan_with_construction_loss (ut_desk_plan (desk), 0, "", &refusal), refusal);
  g_assert_cmpuint (ut_plan_construction (ut_desk_plan (desk), 0)->layers->len, ==, 1);
  change (desk, ut_plan_with_new_construction (ut_desk_plan (desk), 0), NULL);
  g_assert_cmpstr (ut_plan_construction (ut_desk_plan (desk), 1)->id, ==, "K2");
  g_assert_cmpstr (ut_plan_construction (ut_desk_plan (desk), 1)->wall_class, ==, "heavy");
  g_assert_cmpuint (ut_plan_uses_of_construction (ut_desk_plan (desk), "K2"), ==, 0);
  change (desk, ut_plan_without_construction (ut_desk_plan (desk), 1), NULL);
  while (ut_document_undo_label (ut_desk_document (desk)) != NULL)
    ut_desk_undo (desk);
  after = ut_plan_write (ut_desk_plan (desk), NULL);
  g_assert_cmpstr (after, ==, before);
}

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  g_test_add_func ("/desk/clicks", test_clicks);
  g_test_add_func ("/desk/move", test_move);
  g_test_add_func ("/desk/band", test_band);
  g_test_add_func ("/desk/power-handle", test_power_handle);
  g_test_add_func ("/desk/place-and-nudge", test_place_and_nudge);
  g_test_add_func ("/desk/fields", test_fields);
  g_test_add_func ("/desk/field-edits", test_field_edits);
  g_test_add_func ("/desk/thread", test_thread);
  g_test_add_func ("/fields/laws", test_law_fields);
  g_test_add_func ("/constructions", test_constructions);
  g_test_add_func ("/walls/room", test_draw_room);
  g_test_add_func ("/walls/edits", test_edit_walls);
  g_test_add_func ("/walls/snap", test_snap);
  g_test_add_func ("/walls/random-edits", test_random_edits);
  return g_test_run ();
}
