/* The desk without a window: selection, drags, steps, fields, and answers that are never stale. */
#include <math.h>

#include "desk.h"
#include "fields.h"
#include "plan-read.h"
#include "plan-write.h"
#include "tool.h"

static UtDesk *
open_desk (const char *name)
{
  g_autofree char *path = g_build_filename (g_getenv ("UT_EXAMPLES"), name, NULL);
  g_autoptr (GFile) file = g_file_new_for_path (path);
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  g_autoptr (GError) error = NULL;
  g_autoptr (UtDocument) document = ut_document_open (file, faults, &error);

  g_assert_no_error (error);
  g_assert_nonnull (document);
  return ut_desk_new (document);
}

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
  static const struct { UtSubject subject; const char *id; } subjects[] = { { UT_SUBJECT_PLAN, NULL }, { UT_SUBJECT_CELL, "C2" }, { UT_SUBJECT_TERMINAL, "T4" } };

  for (gsize s = 0; s < G_N_ELEMENTS (subjects); s++)
    for (guint i = 0; i < ut_fields_count (subjects[s].subject); i++)
      {
        g_autofree char *text = ut_fields_text (plan, subjects[s].subject, subjects[s].id, i), *refusal = NULL;
        g_autoptr (UtPlan) same = (UtPlan *) ut_fields_with (plan, subjects[s].subject, subjects[s].id, i, text, &refusal);
        g_autofree char *after = NULL;

        g_assert_null (refusal);
        g_assert_nonnull (same);
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
        g_assert_cmpint (ut_fields_applies (chosen, UT_SUBJECT_PLAN, field_index (UT_SUBJECT_PLAN, parameters[k])), ==, g_strv_contains (own[law], parameters[k]));
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
  return g_test_run ();
}
