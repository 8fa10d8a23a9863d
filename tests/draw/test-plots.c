/* Gain matrix and power control: what is drawn lies where the figures say, and points lead back to what they show. */
#include <math.h>

#include "control-plot.h"
#include "gain-matrix.h"
#include "plan-read.h"

static UtStudy *
study_of (const char *name, UtDirection direction)
{
  g_autofree char *path = g_build_filename (g_getenv ("UT_EXAMPLES"), name, NULL);
  g_autoptr (GFile) file = g_file_new_for_path (path);
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  g_autoptr (UtPlan) plan = (UtPlan *) ut_plan_read_file (file, faults, NULL);
  UtQuestion question = { .direction = direction };

  g_assert_nonnull (plan);
  return ut_study_new (plan, &question, NULL);
}

/* The middle of every field leads to its pair; by strength no row's largest gain is above that of the row before. */
static void
test_matrix (void)
{
  g_autoptr (UtStudy) study = study_of ("cold-store.undertone", UT_DIRECTION_DOWN);

  for (int by_strength = 0; by_strength < 2; by_strength++)
    {
      UtMatrixOptions options = { UT_MATRIX_GAINS, by_strength };
      UtMatrixLayout layout;
      double before_db = INFINITY;
      guint terminal, cell, seen = 0;

      ut_matrix_layout (study, &options, 700, 400, 11, &layout);
      g_assert_cmpuint (layout.n_cells, ==, 4);
      g_assert_cmpuint (layout.n_terminals, ==, 14);
      for (guint row = 0; row < layout.n_terminals; row++)
        {
          double strongest_db = -INFINITY;

          for (guint c = 0; c < layout.n_cells; c++)
            {
              g_assert_true (ut_matrix_at (&layout, layout.left + (c + 0.5) * layout.cell_width, layout.top + (row + 0.5) * layout.row_height, &terminal, &cell));
              g_assert_cmpuint (cell, ==, c);
              g_assert_cmpuint (terminal, ==, layout.terminals[row]);
              strongest_db = fmax (strongest_db, study->gains->gain_db[ut_gains_at (study->gains, terminal, c)]);
            }
          seen |= 1u << layout.terminals[row];
          if (by_strength)
            g_assert_cmpfloat (strongest_db, <=, before_db);
          before_db = strongest_db;
        }
      g_assert_cmphex (seen, ==, (1u << 14) - 1); /* each once */
      g_assert_false (ut_matrix_at (&layout, layout.left - 1, layout.top + 1, &terminal, &cell));
      g_assert_false (ut_matrix_at (&layout, layout.left + 1, layout.top + layout.n_terminals * layout.row_height + 1, &terminal, &cell));
      ut_matrix_layout_clear (&layout);
    }
}

/* What the table says of a pair is what the matrix holds. */
static void
test_matrix_words (void)
{
  g_autoptr (UtStudy) study = study_of ("two-rooms.undertone", UT_DIRECTION_DOWN);
  UtMatrixOptions gains = { UT_MATRIX_GAINS, FALSE }, blame = { UT_MATRIX_BLAME, FALSE };
  g_autofree char *serves = ut_matrix_text (study, &gains, 0, 0), *other = ut_matrix_text (study, &gains, 0, 1), *part = ut_matrix_text (study, &blame, 0, 1);
  g_autofree char *figure = g_strdup_printf ("%.1f dB", -study->gains->gain_db[ut_gains_at (study->gains, 0, 0)]);

  g_assert_true (g_str_has_prefix (serves, "C1 serves T1: "));
  g_assert_true (g_str_has_suffix (serves, figure));
  g_assert_true (g_str_has_prefix (other, "C2 to T1: "));
  g_assert_true (g_str_has_prefix (part, "C2 and T1: "));
}

static void
test_control (void)
{
  g_autoptr (UtStudy) study = study_of ("cold-store.undertone", UT_DIRECTION_DOWN);
  UtControlSetup setup = { .rule = UT_CONTROL_EXACT, .start = UT_START_SET, .step_db = 1, .seed = 1, .rounds = 40 };
  g_autoptr (UtControl) control = ut_control_new (study, &setup);
  UtControlLayout layout;
  g_autofree char *csv = ut_control_csv (control);
  g_auto (GStrv) lines = g_strsplit (csv, "\r\n", -1);

  ut_control_layout (control, 900, 400, 11, &layout);
  g_assert_cmpuint (layout.last, ==, 40);
  g_assert_cmpfloat_with_epsilon (ut_control_x (&layout, 40), layout.left + layout.width, 1e-9);
  g_assert_cmpfloat (layout.sinr_top + layout.sinr_height, <, layout.power_top);
  for (guint row = 0; row < control->n_rows; row++)
    {
      for (guint k = 0; k < control->links->len; k++)
        {
          double y = ut_control_sinr_y (&layout, control->sinr_db[row * control->links->len + k]);

          g_assert_cmpfloat (y, >=, layout.sinr_top - 1e-9);
          g_assert_cmpfloat (y, <=, layout.sinr_top + layout.sinr_height + 1e-9);
        }
      for (guint k = 0; k < control->senders->len; k++)
        {
          double y = ut_control_power_y (&layout, control->power_dbm[row * control->senders->len + k]);

          g_assert_cmpfloat (y, >=, layout.power_top - 1e-9);
          g_assert_cmpfloat (y, <=, layout.power_top + layout.power_height + 1e-9);
        }
    }
  g_assert_cmpuint (g_strv_length (lines), ==, 1 + control->n_rows + 1);
  g_assert_true (g_str_has_prefix (lines[0], "round,sinr_db T1,"));
}

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  g_test_add_func ("/plots/matrix", test_matrix);
  g_test_add_func ("/plots/matrix-words", test_matrix_words);
  g_test_add_func ("/plots/control", test_control);
  return g_test_run ();
}
