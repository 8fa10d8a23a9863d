#include "bench-site.h"

#include "plan-read.h"

static void
add_item (GString *text, const char *before, gboolean first)
{
  g_string_append (text, first ? "" : ", ");
  g_string_append (text, before);
}

const UtPlan *
bench_site (int n_cells, int n_terminals)
{
  g_autoptr (GRand) rand = g_rand_new_with_seed (20);
  GString *text = g_string_new ("{\"undertone\": 1, \"carrier\": {\"frequency_mhz\": 3750, \"bandwidth_mhz\": 20, \"sharing\": \"orthogonal\"},"
                                "\"propagation\": {\"base\": {\"law\": \"free-space\"}},"
                                "\"constructions\": [{\"id\": \"stud\", \"layers\": [{\"material\": \"plasterboard\", \"thickness_mm\": 12.5},"
                                "{\"material\": \"air\", \"thickness_mm\": 75}, {\"material\": \"plasterboard\", \"thickness_mm\": 12.5}]},"
                                "{\"id\": \"panel\", \"loss_db\": 6}], \"antennas\": [],"
                                "\"storeys\": [{\"id\": \"S1\", \"elevation_m\": 0, \"height_m\": 4, \"walls\": [");
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  int columns = n_cells <= 20 ? 5 : 10, rows = (n_cells + columns - 1) / columns;
  const UtPlan *plan;

  for (int i = 0; i < N_WALLS; i++)
    {
      int x = g_rand_int_range (rand, 0, 115), y = g_rand_int_range (rand, 0, 76), w = g_rand_int_range (rand, 3, 6);

      add_item (text, "", i == 0);
      g_string_append_printf (text,
                              "{\"id\": \"W%d\", \"construction\": \"%s\", \"points\": [[%d, %d], [%d, %d], [%d, %d], [%d, %d], [%d, %d]]}",
                              i, i % 2 ? "stud" : "panel", x, y, x + w, y, x + w, y + 4, x, y + 4, x, y);
    }
  g_string_append (text, "]}], \"cells\": [");
  for (int i = 0; i < n_cells + n_terminals; i++)
    {
      gboolean cell = i < n_cells;

      if (i == n_cells)
        g_string_append (text, "], \"terminals\": [");
      add_item (text, "", i == 0 || i == n_cells);
      g_string_append_printf (text,
                              "{\"id\": \"R%d\", \"storey\": \"S1\", \"x_m\": %d.%d, \"y_m\": %d.%d, \"height_m\": %s, \"power_dbm\": 20, "
                              "\"power_min_dbm\": -20, \"power_max_dbm\": 24, \"power_step_db\": 0%s}",
                              i,
                              cell ? 120 / columns / 2 + 120 / columns * (i % columns) : g_rand_int_range (rand, 0, 120),
                              g_rand_int_range (rand, 0, 10),
                              cell ? 80 / rows / 2 + 80 / rows * (i / columns) : g_rand_int_range (rand, 0, 80),
                              g_rand_int_range (rand, 0, 10),
                              cell ? "3.5" : "1.2",
                              cell ? "" : ", \"target_down_db\": -4, \"target_up_db\": -4");
    }
  g_string_append (text, "], \"measured_gains_db\": {}}");
  plan = ut_plan_read (text->str, text->len, faults);
  if (plan == NULL)
    g_error ("the bench plan is refused: %s", ((UtFault *) faults->pdata[0])->message);
  g_string_free (text, TRUE);
  return plan;
}

