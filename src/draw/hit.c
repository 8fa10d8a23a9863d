#include "hit.h"

#include <math.h>

static gboolean
is_near (const UtPlan *plan, const UtRadio *radio, guint storey, double x_m, double y_m, double tolerance_m)
{
  return ut_plan_find_storey (plan, radio->storey) == (int) storey && hypot (radio->x_m - x_m, radio->y_m - y_m) <= tolerance_m;
}

/* Distance of a point from the stretch between two radios. */
static double
distance_m (const UtRadio *one, const UtRadio *other, double x_m, double y_m)
{
  double dx = other->x_m - one->x_m, dy = other->y_m - one->y_m;
  double squared = dx * dx + dy * dy;
  double along = squared > 0 ? CLAMP (((x_m - one->x_m) * dx + (y_m - one->y_m) * dy) / squared, 0, 1) : 0;

  return hypot (one->x_m + along * dx - x_m, one->y_m + along * dy - y_m);
}

static void
find_links (const UtPlan *plan, const UtStudy *study, guint storey, double x_m, double y_m, double tolerance_m, GArray *found)
{
  for (guint i = 0; i < study->links->len; i++)
    {
      const UtLinkAnswer *link = ut_study_link (study, i);
      UtHit hit = { UT_HIT_LINK, link->terminal };

      if (link->cell < 0 || link->terminal >= plan->terminals->len || (guint) link->cell >= plan->cells->len)
        continue;
      const UtRadio *terminal = &ut_plan_terminal (plan, link->terminal)->radio;
      const UtRadio *cell = &ut_plan_cell (plan, (guint) link->cell)->radio;
      if (ut_plan_find_storey (plan, terminal->storey) == (int) storey && ut_plan_find_storey (plan, cell->storey) == (int) storey
          && distance_m (terminal, cell, x_m, y_m) <= tolerance_m)
        g_array_append_val (found, hit);
    }
}

double
ut_wall_distance_m (const UtWall *wall, double x_m, double y_m, double *along_m, guint *piece)
{
  double nearest = INFINITY, before = 0;

  for (guint i = 0; i + 1 < wall->points->len; i++)
    {
      const UtPoint *a = &g_array_index (wall->points, UtPoint, i), *b = a + 1;
      double dx = b->x_m - a->x_m, dy = b->y_m - a->y_m, length = hypot (dx, dy);
      double share = length > 0 ? CLAMP (((x_m - a->x_m) * dx + (y_m - a->y_m) * dy) / (length * length), 0, 1) : 0;
      double distance = hypot (a->x_m + share * dx - x_m, a->y_m + share * dy - y_m);

      if (distance < nearest)
        {
          nearest = distance;
          if (along_m != NULL)
            *along_m = before + share * length;
          if (piece != NULL)
            *piece = i;
        }
      before += length;
    }
  return nearest;
}

static void
find_walls (const UtStorey *storey, double x_m, double y_m, double tolerance_m, GArray *found)
{
  for (guint i = storey->walls->len; i-- > 0;)
    if (ut_wall_distance_m (storey->walls->pdata[i], x_m, y_m, NULL, NULL) <= tolerance_m)
      g_array_append_val (found, ((UtHit){ UT_HIT_WALL, i }));
}

UtHit
ut_hit (const UtPlan *plan, const UtStudy *study, guint storey, double x_m, double y_m, double tolerance_m, guint skip)
{
  g_autoptr (GArray) found = g_array_new (FALSE, FALSE, sizeof (UtHit));

  for (guint i = plan->terminals->len; i-- > 0;)
    if (is_near (plan, &ut_plan_terminal (plan, i)->radio, storey, x_m, y_m, tolerance_m))
      g_array_append_val (found, ((UtHit){ UT_HIT_TERMINAL, i }));
  for (guint i = plan->cells->len; i-- > 0;)
    if (is_near (plan, &ut_plan_cell (plan, i)->radio, storey, x_m, y_m, tolerance_m))
      g_array_append_val (found, ((UtHit){ UT_HIT_CELL, i }));
  if (study != NULL)
    find_links (plan, study, storey, x_m, y_m, tolerance_m / 2, found);
  if (storey < plan->storeys->len)
    find_walls (ut_plan_storey (plan, storey), x_m, y_m, tolerance_m / 2, found);
  if (found->len == 0)
    return (UtHit){ UT_HIT_NOTHING, 0 };
  return g_array_index (found, UtHit, skip % found->len);
}
