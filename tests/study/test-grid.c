/* The grid over wall pieces finds exactly what looking at every piece finds: rays at random, through corners, along walls. */
#include <string.h>

#include "site.h"
#include "wall-index.h"

#define N_WALLS 120
#define N_RAYS 10000
#define WALLS_A_PART 10 /* of three pieces: too few for a grid */

static void
add_wall (GString *text, GRand *rand, guint id)
{
  /* Whole metres, so that rays meet corners and run along walls. */
  int x = g_rand_int_range (rand, 0, 40), y = g_rand_int_range (rand, 0, 30);

  g_string_append_printf (text, "%s{\"id\": \"W%u\", \"construction\": \"%s\", \"points\": [[%d, %d]", text->len > 0 ? ", " : "", id, id % 3 == 0 ? "panel" : "stud", x, y);
  for (guint k = 0; k < 3; k++)
    {
      int dx = g_rand_int_range (rand, -6, 7), dy = g_rand_int_range (rand, -6, 7);

      if (g_rand_boolean (rand))
        *(g_rand_boolean (rand) ? &dx : &dy) = 0;
      if (dx == 0 && dy == 0)
        dx = 3;
      x += dx;
      y += dy;
      g_string_append_printf (text, ", [%d, %d]", x, y);
    }
  g_string_append (text, "]");
  if (id % 4 == 0)
    g_string_append (text, ", \"openings\": [{\"at_m\": 1, \"width_m\": 1.5, \"construction\": \"door\", \"shut\": true}, {\"at_m\": 2, \"width_m\": 2, \"construction\": \"door\", \"shut\": false}]");
  g_string_append (text, "}");
}

/* One index over all walls, and several over a few each. */
static const UtPlan *
plan_of (const GPtrArray *walls, guint first, guint n)
{
  GString *list = g_string_new (NULL);
  const UtPlan *plan;

  for (guint i = first; i < first + n; i++)
    g_string_append_printf (list, "%s%s", i > first ? ", " : "", (const char *) walls->pdata[i]);
  g_autofree char *storey = g_strdup_printf ("{\"id\": \"S1\", \"elevation_m\": 0, \"height_m\": 3, \"walls\": [%s]}", list->str);
  plan = site_plan (NULL, storey, "", "");
  g_string_free (list, TRUE);
  return plan;
}

typedef struct
{
  GArray *found;
  guint first_wall;
} Finding;

static void
keep (const UtCrossing *crossing, void *user)
{
  Finding *finding = user;
  UtCrossing kept = *crossing;

  kept.wall += finding->first_wall;
  g_array_append_val (finding->found, kept);
}

static double
end_of_ray (GRand *rand, int most)
{
  double whole = g_rand_int_range (rand, -3, most + 4);

  switch (g_rand_int_range (rand, 0, 3))
    {
    case 0:
      return whole;
    case 1:
      return whole + 1e-10;
    default:
      return g_rand_double_range (rand, -3, most + 4);
    }
}

static void
test_grid (void)
{
  GRand *rand = g_rand_new_with_seed (7);
  g_autoptr (GPtrArray) walls = g_ptr_array_new_with_free_func (g_free);
  UtWallIndex *parts[N_WALLS / WALLS_A_PART];
  guint crossings = 0;

  for (guint i = 0; i < N_WALLS; i++)
    {
      GString *text = g_string_new (NULL);

      add_wall (text, rand, i);
      g_ptr_array_add (walls, g_string_free (text, FALSE));
    }
  g_autoptr (UtPlan) whole = (UtPlan *) plan_of (walls, 0, N_WALLS);
  g_autoptr (UtWallIndex) index = ut_wall_index_new (whole);
  for (guint k = 0; k < G_N_ELEMENTS (parts); k++)
    {
      g_autoptr (UtPlan) part = (UtPlan *) plan_of (walls, k * WALLS_A_PART, WALLS_A_PART);

      parts[k] = ut_wall_index_new (part);
      g_assert_cmpuint (ut_wall_index_n_pieces (parts[k]), <, 48);
    }
  g_assert_cmpuint (ut_wall_index_n_pieces (index), >, 300);
  for (guint ray = 0; ray < N_RAYS; ray++)
    {
      const double from_m[3] = { end_of_ray (rand, 46), end_of_ray (rand, 36), g_rand_double_range (rand, 0, 3.5) };
      double to_m[3] = { end_of_ray (rand, 46), end_of_ray (rand, 36), g_rand_double_range (rand, 0, 3.5) };
      g_autoptr (GArray) by_grid = g_array_new (FALSE, FALSE, sizeof (UtCrossing)), one_by_one = g_array_new (FALSE, FALSE, sizeof (UtCrossing));
      gboolean at_end = FALSE;

      if (ray % 5 == 0)
        to_m[ray % 2] = from_m[ray % 2]; /* along the walls' own directions */
      gboolean grid_at_end = ut_wall_index_walk (index, from_m, to_m, FALSE, keep, &(Finding){ by_grid, 0 });
      for (guint k = 0; k < G_N_ELEMENTS (parts); k++)
        at_end |= ut_wall_index_walk (parts[k], from_m, to_m, FALSE, keep, &(Finding){ one_by_one, k * WALLS_A_PART });
      g_assert_cmpuint (by_grid->len, ==, one_by_one->len);
      g_assert_cmpint (grid_at_end, ==, at_end);
      for (guint i = 0; i < by_grid->len; i++)
        {
          const UtCrossing *a = &g_array_index (by_grid, UtCrossing, i), *b = &g_array_index (one_by_one, UtCrossing, i);

          g_assert_true (a->wall == b->wall && a->opening == b->opening && a->along == b->along && a->incidence_deg == b->incidence_deg && a->loss_db == b->loss_db);
        }
      crossings += by_grid->len;
    }
  g_test_message ("%u crossings", crossings);
  g_assert_cmpuint (crossings, >, 5 * N_RAYS);
  for (guint k = 0; k < G_N_ELEMENTS (parts); k++)
    ut_wall_index_unref (parts[k]);
  g_rand_free (rand);
}

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  g_test_add_func ("/grid/exactly-the-same-crossings", test_grid);
  return g_test_run ();
}
