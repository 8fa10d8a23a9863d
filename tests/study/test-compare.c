/* Two answers beside each other: what was changed is told, and nothing else; figures are those of the answers. */
#include <math.h>

#include "compare.h"
#include "plan-edit.h"
#include "plan-read.h"

static const UtComparisonRow *
row_of (const GPtrArray *rows, const char *name)
{
  for (guint i = 0; i < rows->len; i++)
    if (g_str_equal (((const UtComparisonRow *) rows->pdata[i])->name, name))
      return rows->pdata[i];
  return NULL;
}

static guint
n_of (const GPtrArray *rows, UtComparisonKind kind)
{
  guint n = 0;

  for (guint i = 0; i < rows->len; i++)
    n += ((const UtComparisonRow *) rows->pdata[i])->kind == kind;
  return n;
}

static void
test_compare (void)
{
  g_autofree char *path = g_build_filename (g_getenv ("UT_EXAMPLES"), "cold-store.undertone", NULL);
  g_autoptr (GFile) file = g_file_new_for_path (path);
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  g_autoptr (UtPlan) plan = (UtPlan *) ut_plan_read_file (file, faults, NULL);
  UtQuestion question = { .direction = UT_DIRECTION_DOWN };
  g_autoptr (UtStudy) before = ut_study_new (plan, &question, NULL);
  g_autoptr (GPtrArray) same = ut_comparison_new (before, before);
  const UtComparisonRow *row;

  g_assert_cmpuint (same->len, ==, 3); /* the summary alone */
  UtCell *cell = ut_cell_copy (ut_plan_cell (plan, 2));
  cell->radio.x_m += 3;
  cell->radio.y_m -= 4;
  g_autoptr (UtPlan) moved = (UtPlan *) ut_plan_with_cell (plan, 2, cell);
  g_autoptr (UtPlan) without = (UtPlan *) ut_plan_without_terminal (moved, 5);
  g_autoptr (UtPlan) changed = (UtPlan *) ut_plan_without_wall (without, 0, 1);
  g_autoptr (UtStudy) after = ut_study_new (changed, &question, before);
  g_autoptr (GPtrArray) rows = ut_comparison_new (before, after);
  g_autofree char *csv = ut_comparison_csv (rows);
  g_autofree char *wall = g_strdup_printf ("wall %s", ((const UtWall *) ut_plan_storey (plan, 0)->walls->pdata[1])->id);

  row = row_of (rows, "headroom, dB");
  g_assert_cmpfloat (row->before, ==, before->headroom_db);
  g_assert_cmpfloat (row->after, ==, after->headroom_db);
  g_assert_cmpuint (n_of (rows, UT_ROW_PLAN), ==, 3);
  g_assert_cmpstr (row_of (rows, "C3")->words, ==, "moved by 5.00 m");
  g_assert_cmpstr (row_of (rows, ut_plan_terminal (plan, 5)->radio.id)->words, ==, "removed");
  g_assert_cmpstr (row_of (rows, wall)->words, ==, "removed");
  for (guint i = 0; i < after->links->len; i++)
    {
      const UtLinkAnswer *link = ut_study_link (after, i);
      g_autofree char *name = g_strdup_printf ("margin of %s, dB", ut_plan_terminal (changed, link->terminal)->radio.id);

      row = row_of (rows, name);
      if (row != NULL)
        g_assert_cmpfloat (row->after, ==, link->margin_db);
    }
  g_assert_cmpuint (n_of (rows, UT_ROW_MARGIN), >, 0);
  g_assert_true (g_str_has_prefix (csv, "what,before,after,change\r\n\"headroom, dB\","));
}

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  g_test_add_func ("/compare/rows", test_compare);
  return g_test_run ();
}
