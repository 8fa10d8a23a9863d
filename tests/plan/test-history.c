/* Undo and redo: a table of commands with the state expected after each, and long random runs. */
#include "history.h"
#include "plan-edit.h"
#include "plan-text.h"

typedef enum
{
  PUSH,      /* a plan titled `title` */
  PUSH_SAME, /* the present plan again */
  UNDO,
  REDO,
  SAVE,
} Command;

typedef struct
{
  Command command;
  const char *title, *label, *coalesce, *selection;
  gint64 at_us;
  gboolean done; /* what undo and redo return */
  /* Afterwards: */
  const char *title_now, *undo_label, *redo_label, *selection_now;
  gboolean saved;
} Line;

#define SECOND G_USEC_PER_SEC

static const Line lines[] = {
  { UNDO, .title_now = "", .saved = TRUE },
  { REDO, .title_now = "", .saved = TRUE },
  { PUSH_SAME, .label = "Nothing", .title_now = "", .saved = TRUE },
  { PUSH,
    "a",
    "Type a",
    NULL,
    "C1",
    .title_now = "a",
    .undo_label = "Type a",
    .selection_now = "C1" },
  { PUSH,
    "b",
    "Type b",
    NULL,
    "C2",
    .title_now = "b",
    .undo_label = "Type b",
    .selection_now = "C2" },
  { UNDO,
    .done = TRUE,
    .title_now = "a",
    .undo_label = "Type a",
    .redo_label = "Type b",
    .selection_now = "C1" },
  { UNDO, .done = TRUE, .title_now = "", .redo_label = "Type a", .saved = TRUE },
  { UNDO, .title_now = "", .redo_label = "Type a", .saved = TRUE },
  { REDO,
    .done = TRUE,
    .title_now = "a",
    .undo_label = "Type a",
    .redo_label = "Type b",
    .selection_now = "C1" },
  { PUSH_SAME,
    .label = "Nothing",
    .title_now = "a",
    .undo_label = "Type a",
    .redo_label = "Type b",
    .selection_now = "C1" },
  { REDO, .done = TRUE, .title_now = "b", .undo_label = "Type b", .selection_now = "C2" },
  { REDO, .title_now = "b", .undo_label = "Type b", .selection_now = "C2" },
  { UNDO,
    .done = TRUE,
    .title_now = "a",
    .undo_label = "Type a",
    .redo_label = "Type b",
    .selection_now = "C1" },
  /* A new step: what could be redone is gone. */
  { PUSH, "c", "Type c", NULL, NULL, .title_now = "c", .undo_label = "Type c" },
  { REDO, .title_now = "c", .undo_label = "Type c" },
  { SAVE, .title_now = "c", .undo_label = "Type c", .saved = TRUE },
  /* The saved plan is no step to be replaced, its successors are, within a second. */
  { PUSH, "d", "Nudge", "x", NULL, 10 * SECOND, .title_now = "d", .undo_label = "Nudge" },
  { PUSH,
    "e",
    "Nudge on",
    "x",
    "T1",
    11 * SECOND,
    .title_now = "e",
    .undo_label = "Nudge on",
    .selection_now = "T1" },
  { PUSH, "f", "Nudge on", "x", NULL, 12 * SECOND, .title_now = "f", .undo_label = "Nudge on" },
  { UNDO,
    .done = TRUE,
    .title_now = "c",
    .undo_label = "Type c",
    .redo_label = "Nudge on",
    .saved = TRUE },
  { REDO, .done = TRUE, .title_now = "f", .undo_label = "Nudge on" },
  /* Too late; another key; no key. */
  { PUSH,
    "g",
    "Nudge late",
    "x",
    NULL,
    13 * SECOND + 1,
    .title_now = "g",
    .undo_label = "Nudge late" },
  { PUSH, "h", "Turn", "y", NULL, 13 * SECOND + 2, .title_now = "h", .undo_label = "Turn" },
  { PUSH, "i", "Name", NULL, NULL, 13 * SECOND + 3, .title_now = "i", .undo_label = "Name" },
  { PUSH, "j", "Name", NULL, NULL, 13 * SECOND + 4, .title_now = "j", .undo_label = "Name" },
  { UNDO, .done = TRUE, .title_now = "i", .undo_label = "Name", .redo_label = "Name" },
  { UNDO, .done = TRUE, .title_now = "h", .undo_label = "Turn", .redo_label = "Name" },
  /* While something can be redone, nothing is replaced. */
  { PUSH, "k", "Turn on", "y", NULL, 13 * SECOND + 5, .title_now = "k", .undo_label = "Turn on" },
  { UNDO, .done = TRUE, .title_now = "h", .undo_label = "Turn", .redo_label = "Turn on" },
  { SAVE, .title_now = "h", .undo_label = "Turn", .redo_label = "Turn on", .saved = TRUE },
  { REDO, .done = TRUE, .title_now = "k", .undo_label = "Turn on" },
  { SAVE, .title_now = "k", .undo_label = "Turn on", .saved = TRUE },
  { PUSH, "l", "Turn on", "y", NULL, 13 * SECOND + 6, .title_now = "l", .undo_label = "Turn on" },
  { UNDO,
    .done = TRUE,
    .title_now = "k",
    .undo_label = "Turn on",
    .redo_label = "Turn on",
    .saved = TRUE },
};

static void
run (UtHistory *history, const Line *line)
{
  const UtPlan *plan = NULL;
  switch (line->command)
    {
    case PUSH:
      plan = ut_plan_with_title (ut_history_plan (history), line->title);
      ut_history_push (history, plan, line->label, line->coalesce, line->selection, line->at_us);
      ut_plan_unref (plan);
      break;
    case PUSH_SAME:
      ut_history_push (history,
                       ut_history_plan (history),
                       line->label,
                       line->coalesce,
                       line->selection,
                       line->at_us);
      break;
    case UNDO:
      g_assert_cmpint (ut_history_undo (history), ==, line->done);
      break;
    case REDO:
      g_assert_cmpint (ut_history_redo (history), ==, line->done);
      break;
    case SAVE:
      ut_history_mark_saved (history);
      break;
    }
}

static void
test_table (void)
{
  g_autoptr (UtPlan) plan = (UtPlan *)read_valid (small_plan);
  g_autoptr (UtHistory) history = ut_history_new (plan);
  for (guint i = 0; i < G_N_ELEMENTS (lines); i++)
    {
      g_test_message ("line %u", i);
      run (history, &lines[i]);
      g_assert_cmpstr (ut_history_plan (history)->title, ==, lines[i].title_now);
      g_assert_cmpstr (ut_history_undo_label (history), ==, lines[i].undo_label);
      g_assert_cmpstr (ut_history_redo_label (history), ==, lines[i].redo_label);
      g_assert_cmpstr (ut_history_selection (history), ==, lines[i].selection_now);
      g_assert_cmpint (ut_history_is_saved (history), ==, lines[i].saved);
    }
}

/* One edit of many, whatever the plan has become. */
static const UtPlan *
random_edit (const UtPlan *plan)
{
  int cells = (int)plan->cells->len, terminals = (int)plan->terminals->len;
  UtCell *cell;
  UtTerminal *terminal;
  UtCarrier *carrier;
  switch (g_test_rand_int_range (0, 6))
    {
    case 0:
      cell = ut_cell_new ();
      g_free (cell->radio.id);
      cell->radio.id = ut_plan_free_cell_id (plan);
      g_free (cell->radio.storey);
      cell->radio.storey = g_strdup ("S1");
      return ut_plan_with_cell (plan, -1, cell);
    case 1:
      terminal = ut_terminal_new ();
      g_free (terminal->radio.id);
      terminal->radio.id = ut_plan_free_terminal_id (plan);
      g_free (terminal->radio.storey);
      terminal->radio.storey = g_strdup ("S1");
      if (cells > 0)
        terminal->cell
            = g_strdup (ut_plan_cell (plan, (guint)g_test_rand_int_range (0, cells))->radio.id);
      return ut_plan_with_terminal (plan, -1, terminal);
    case 2:
      if (cells > 0)
        return ut_plan_without_cell (plan, g_test_rand_int_range (0, cells));
      break;
    case 3:
      if (terminals > 0)
        return ut_plan_without_terminal (plan, g_test_rand_int_range (0, terminals));
      break;
    case 4:
      if (cells > 0)
        {
          int index = g_test_rand_int_range (0, cells);
          cell = ut_cell_copy (ut_plan_cell (plan, (guint)index));
          cell->radio.x_m = g_test_rand_double_range (-100, 100);
          return ut_plan_with_cell (plan, index, cell);
        }
      break;
    default:
      break;
    }
  carrier = ut_carrier_copy (plan->carrier);
  carrier->margin_db = g_test_rand_double_range (-10, 10);
  return ut_plan_with_carrier (plan, carrier);
}

static void
test_random (void)
{
  for (guint run_index = 0; run_index < 20; run_index++)
    {
      g_autoptr (UtPlan) plan = (UtPlan *)read_valid (small_plan);
      g_autoptr (UtHistory) history = ut_history_new (plan);
      for (guint i = 0; i < 200; i++)
        {
          int what = g_test_rand_int_range (0, 8);
          if (what == 0)
            ut_history_undo (history);
          else if (what == 1)
            ut_history_redo (history);
          else
            {
              g_autoptr (UtPlan) next = (UtPlan *)random_edit (ut_history_plan (history));
              ut_history_push (
                  history, next, "Edit", what == 2 ? "key" : NULL, NULL, (gint64)i * SECOND / 2);
            }
        }
      while (ut_history_redo (history))
        ;
      g_autofree char *end = written (ut_history_plan (history));
      g_autoptr (UtPlan) valid = (UtPlan *)read_valid (end);
      while (ut_history_undo (history))
        ;
      g_autofree char *start = written (ut_history_plan (history));
      g_assert_cmpstr (start, ==, small_plan);
      g_assert_true (ut_history_is_saved (history));
      while (ut_history_redo (history))
        ;
      g_autofree char *end_again = written (ut_history_plan (history));
      g_assert_cmpstr (end_again, ==, end);
    }
}

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  g_test_add_func ("/history/table", test_table);
  g_test_add_func ("/history/random", test_random);
  return g_test_run ();
}
