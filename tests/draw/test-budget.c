/* The budget of a link: its figures are the answer's, its bars lie where its figures say, on every example plan. */
#include <math.h>

#include "budget-plot.h"
#include "plan-read.h"

static UtPlan *
open_plan (const char *name)
{
  g_autofree char *path = g_build_filename (g_getenv ("UT_EXAMPLES"), name, NULL);
  g_autoptr (GFile) file = g_file_new_for_path (path);
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  UtPlan *plan = (UtPlan *) ut_plan_read_file (file, faults, NULL);

  g_assert_nonnull (plan);
  return plan;
}

typedef void (*Look) (const UtBudgetCases *cases, guint link, const UtBudget *budget);

/* Every link of every example, both ways. */
static void
look_at_all (Look look)
{
  g_autoptr (GDir) folder = g_dir_open (g_getenv ("UT_EXAMPLES"), 0, NULL);
  const char *name;
  guint n = 0;

  while ((name = g_dir_read_name (folder)) != NULL)
    for (int direction = 0; direction < 2; direction++)
      {
        g_autoptr (UtPlan) plan = open_plan (name);
        UtQuestion question = { .direction = (UtDirection) direction };
        g_autoptr (UtStudy) study = ut_study_new (plan, &question, NULL);
        UtBudgetCases cases;

        g_assert_true (ut_budget_cases_make (study, NULL, &cases));
        for (guint i = 0; i < study->links->len; i++)
          {
            g_autoptr (UtBudget) budget = ut_budget_new (&cases, i);

            if (budget == NULL)
              continue;
            look (&cases, i, budget);
            n++;
          }
        ut_budget_cases_clear (&cases);
      }
  g_assert_cmpuint (n, >, 100);
}

static void
look_at_figures (const UtBudgetCases *cases, guint index, const UtBudget *budget)
{
  double received_dbm = 0;

  /* Step by step from the power to what is received. */
  for (guint i = 0; i < budget->parts->len; i++)
    received_dbm += g_array_index (budget->parts, UtBudgetPart, i).db;
  g_assert_cmpfloat_with_epsilon (received_dbm, budget->cases[UT_CASE_PLANNED].signal_dbm, 0.02);
  for (int i = 0; i < UT_N_CASES; i++)
    {
      const UtLinkAnswer *link = ut_study_link (cases->studies[i], index);
      const UtBudgetCase *one = &budget->cases[i];

      g_assert_cmpfloat_with_epsilon (one->sinr_db, link->sinr_db, 1e-12);
      g_assert_cmpfloat_with_epsilon (one->signal_dbm - one->background_dbm, one->sinr_db, 1e-9);
      g_assert_cmpfloat_with_epsilon (one->signal_dbm - one->needed_dbm, one->margin_db, 1e-6);
    }
  /* Turned down alike: every power by the same, so that the signal sinks by it and the SINR never rises. */
  const UtBudgetCase *set = &budget->cases[UT_CASE_AS_SET], *down = &budget->cases[UT_CASE_ALL_DOWN];
  g_assert_cmpfloat_with_epsilon (set->signal_dbm - down->signal_dbm, budget->down_db, 1e-9);
  g_assert_cmpfloat (down->sinr_db, <=, set->sinr_db + 1e-9);
}

static void
test_figures (void)
{
  look_at_all (look_at_figures);
}

static void
look_at_bars (const UtBudgetCases *cases, guint index, const UtBudget *budget)
{
  UtBudgetLayout layout;
  double right = 0;

  (void) cases;
  (void) index;
  ut_budget_layout (budget, 900, 400, 11, &layout);
  g_assert_cmpuint (layout.bars->len, >=, budget->parts->len + 1 + 3 * UT_N_CASES);
  for (guint i = 0; i < layout.bars->len; i++)
    {
      const UtBudgetBar *bar = &g_array_index (layout.bars, UtBudgetBar, i);
      double px_per_db = layout.height / (layout.high_dbm - layout.low_dbm);

      g_assert_cmpfloat_with_epsilon (bar->height, fabs (bar->to_dbm - bar->from_dbm) * px_per_db, 1e-6);
      g_assert_cmpfloat_with_epsilon (bar->y, layout.top + (layout.high_dbm - fmax (bar->from_dbm, bar->to_dbm)) * px_per_db, 1e-6);
      g_assert_cmpfloat (bar->x + bar->width, <=, layout.left + layout.width + 1e-9);
      g_assert_cmpfloat (bar->y, >=, layout.top - 1e-9);
      /* From left to right, none on another. */
      if (bar->kind != UT_BAR_NEEDED)
        {
          g_assert_cmpfloat (bar->x, >=, right - 1e-9);
          right = bar->x + bar->width;
        }
    }
  ut_budget_layout_clear (&layout);
}

static void
test_bars (void)
{
  look_at_all (look_at_bars);
}

/* The picture for the client, in words: who drowns T4 of the cold store, that turning all down heals nothing, and that the plan does. */
static void
test_words (void)
{
  g_autoptr (UtPlan) plan = open_plan ("cold-store.undertone");
  UtQuestion question = { .direction = UT_DIRECTION_DOWN };
  g_autoptr (UtStudy) study = ut_study_new (plan, &question, NULL);
  UtBudgetCases cases;

  g_assert_true (ut_budget_cases_make (study, NULL, &cases));
  for (guint i = 0; i < study->links->len; i++)
    {
      g_autoptr (UtBudget) budget = ut_budget_new (&cases, i);
      g_autofree char *words = ut_budget_words (budget), *csv = ut_budget_csv (budget);

      if (!g_str_equal (budget->terminal, "T4"))
        continue;
      g_assert_cmpfloat (budget->cases[UT_CASE_AS_SET].margin_db, <, 0);
      g_assert_cmpfloat (budget->cases[UT_CASE_ALL_DOWN].margin_db, <, 0);
      g_assert_cmpfloat (budget->cases[UT_CASE_PLANNED].margin_db, >=, UT_MARGIN_MET_DB);
      g_assert_true (g_regex_match_simple ("^As set, T4 hears its cell C1 at -[0-9.]+ dBm; against it stand C2 at .* it fails by .* sink together: .* it fails by .*: met, with", words, 0, 0));
      g_assert_true (g_str_has_prefix (csv, "terminal,cell,part,db\r\nT4,C1,\"power\","));
    }
  ut_budget_cases_clear (&cases);
}

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  g_test_add_func ("/budget/figures", test_figures);
  g_test_add_func ("/budget/bars", test_bars);
  g_test_add_func ("/budget/words", test_words);
  return g_test_run ();
}
