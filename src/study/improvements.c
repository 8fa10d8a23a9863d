#include "improvements.h"

#include <math.h>

#include <glib/gi18n-lib.h>

#include "plan-edit.h"
#include "report.h"

#define LEAST_GAIN_DB 0.1
/* A place is looked for from so far down to so near; further is another plan. */
#define FARTHEST_M 8.0
#define NEAREST_M 0.5
#define TURN_DEG 30.0
/* Walls times constructions, at most. */
#define MOST_WALLS_TRIED 400

typedef struct
{
  const UtStudy *study;
  const UtPlan *plan;
  GCancellable *cancellable;
  GPtrArray *found;
  double start_db;
  UtImprovementProgress progress;
  gpointer user;
  guint done, all; /* things looked at */
} Search;

static void
improvement_free (gpointer data)
{
  UtImprovement *one = data;

  g_free (one->what);
  ut_plan_unref (one->plan);
  g_free (one);
}

static gboolean
stopped (const Search *search)
{
  return g_cancellable_is_cancelled (search->cancellable);
}

static void
tell (Search *search)
{
  search->done++;
  if (search->progress != NULL)
    search->progress (fmin ((double) search->done / MAX (search->all, 1), 1), search->user);
}

/* Headroom of a plan, and whether it is met; -INFINITY where no common change of the targets helps. */
static double
headroom_of (const Search *search, const UtPlan *plan, gboolean *met)
{
  UtQuestion question = { .direction = search->study->question.direction };
  g_autoptr (UtStudy) study = ut_study_new_cancellable (plan, &question, search->study, search->cancellable);

  *met = study != NULL && study->verdict == UT_VERDICT_MET;
  return study == NULL || isnan (study->headroom_db) ? -INFINITY : study->headroom_db;
}

/* The best change of one thing so far. */
typedef struct
{
  const UtPlan *plan;
  char *what;
  double headroom_db;
  gboolean met;
} Best;

static void
best_clear (Best *best)
{
  g_clear_pointer (&best->plan, ut_plan_unref);
  g_clear_pointer (&best->what, g_free);
  best->headroom_db = -INFINITY;
}

/* Takes over plan and what. TRUE: it is better than the best so far. */
static gboolean
try_plan (Search *search, Best *best, const UtPlan *plan, char *what)
{
  gboolean met = FALSE;
  double headroom_db = stopped (search) ? -INFINITY : headroom_of (search, plan, &met);

  if (!(headroom_db > fmax (best->headroom_db, search->start_db) + 1e-6))
    {
      ut_plan_unref (plan);
      g_free (what);
      return FALSE;
    }
  best_clear (best);
  *best = (Best){ plan, what, headroom_db, met };
  return TRUE;
}

/* What one thing's best change gives is kept, if it is worth it. */
static void
keep (Search *search, UtImprovementKind kind, Best *best)
{
  UtImprovement *one;

  if (best->plan == NULL || best->headroom_db < search->start_db + LEAST_GAIN_DB)
    {
      best_clear (best);
      return;
    }
  one = g_new (UtImprovement, 1);
  *one = (UtImprovement){ kind, best->what, best->headroom_db, best->headroom_db - search->start_db, best->met, best->plan };
  g_ptr_array_add (search->found, one);
  *best = (Best){ NULL, NULL, -INFINITY, FALSE };
}

/* ---- cells ---- */

static const UtPlan *
with_cell_at (const UtPlan *plan, guint index, double x_m, double y_m)
{
  UtCell *cell = ut_cell_copy (ut_plan_cell (plan, index));

  cell->radio.x_m = round (x_m * 100) / 100;
  cell->radio.y_m = round (y_m * 100) / 100;
  return ut_plan_with_cell (plan, (int) index, cell);
}

/* The storey's walls bound where a cell may go; without walls its radios do. */
static gboolean
is_inside (const UtPlan *plan, const char *storey_id, double x_m, double y_m)
{
  const UtStorey *storey = ut_plan_storey (plan, (guint) ut_plan_find_storey (plan, storey_id));
  double low_x = INFINITY, low_y = INFINITY, high_x = -INFINITY, high_y = -INFINITY;

  for (guint w = 0; w < storey->walls->len; w++)
    {
      const GArray *points = ((const UtWall *) storey->walls->pdata[w])->points;

      for (guint i = 0; i < points->len; i++)
        {
          low_x = fmin (low_x, g_array_index (points, UtPoint, i).x_m);
          high_x = fmax (high_x, g_array_index (points, UtPoint, i).x_m);
          low_y = fmin (low_y, g_array_index (points, UtPoint, i).y_m);
          high_y = fmax (high_y, g_array_index (points, UtPoint, i).y_m);
        }
    }
  return storey->walls->len == 0 || (x_m > low_x + 0.2 && x_m < high_x - 0.2 && y_m > low_y + 0.2 && y_m < high_y - 0.2);
}

/* Eight neighbours at a step, from where the best is; on while one is better, then with half the step. */
static void
move_cell (Search *search, guint index)
{
  const UtRadio *cell = &ut_plan_cell (search->plan, index)->radio;
  double x_m = cell->x_m, y_m = cell->y_m, step_m = FARTHEST_M / 2;
  Best best = { NULL, NULL, -INFINITY, FALSE };

  while (step_m >= NEAREST_M && !stopped (search))
    {
      double at_x = x_m, at_y = y_m;

      for (int k = 0; k < 8; k++)
        {
          double to_x = at_x + step_m * (double[]){ 1, 1, 0, -1, -1, -1, 0, 1 }[k], to_y = at_y + step_m * (double[]){ 0, 1, 1, 1, 0, -1, -1, -1 }[k];

          if (hypot (to_x - cell->x_m, to_y - cell->y_m) > FARTHEST_M || !is_inside (search->plan, cell->storey, to_x, to_y))
            continue;
          g_autofree char *x = ut_report_figure (to_x, 2), *y = ut_report_figure (to_y, 2);
          if (try_plan (search, &best, with_cell_at (search->plan, index, to_x, to_y), g_strdup_printf (_ ("Move %s to %s, %s m"), cell->id, x, y)))
            {
              x_m = to_x;
              y_m = to_y;
            }
        }
      if (!(hypot (x_m - at_x, y_m - at_y) > 0))
        step_m /= 2;
    }
  keep (search, UT_IMPROVE_MOVE, &best);
  tell (search);
}

static void
change_channel (Search *search, guint index)
{
  const UtCell *cell = ut_plan_cell (search->plan, index);
  Best best = { NULL, NULL, -INFINITY, FALSE };

  for (int channel = 1; channel <= search->plan->carrier->channels && !stopped (search); channel++)
    {
      UtCell *changed;

      if (channel == cell->channel)
        continue;
      changed = ut_cell_copy (cell);
      changed->channel = channel;
      try_plan (search, &best, ut_plan_with_cell (search->plan, (int) index, changed), g_strdup_printf (_ ("Put %s on channel %d"), cell->radio.id, channel));
    }
  keep (search, UT_IMPROVE_CHANNEL, &best);
  tell (search);
}

static void
turn_cell (Search *search, guint index)
{
  const UtCell *cell = ut_plan_cell (search->plan, index);
  int antenna = ut_plan_find_antenna (search->plan, cell->radio.antenna);
  double azimuth_deg = cell->radio.azimuth_deg;
  Best best = { NULL, NULL, -INFINITY, FALSE };

  if (antenna >= 0 && ut_plan_antenna (search->plan, (guint) antenna)->pattern != UT_ANTENNA_ISOTROPIC)
    for (double step_deg = TURN_DEG; step_deg > 5 && !stopped (search); step_deg /= 3)
      {
        double from_deg = azimuth_deg;
        int n = step_deg < TURN_DEG ? 2 : 6;

        for (int k = -n; k <= n; k++)
          {
            double to_deg = fmod (round (from_deg + k * step_deg) + 720, 360);
            UtCell *turned;

            if (k == 0)
              continue;
            turned = ut_cell_copy (cell);
            turned->radio.azimuth_deg = to_deg;
            if (try_plan (search, &best, ut_plan_with_cell (search->plan, (int) index, turned), g_strdup_printf (_ ("Turn the antenna of %s to %.0f°"), cell->radio.id, to_deg)))
              azimuth_deg = to_deg;
          }
      }
  keep (search, UT_IMPROVE_TURN, &best);
  tell (search);
}

static void
leave_cell_out (Search *search, guint index)
{
  Best best = { NULL, NULL, -INFINITY, FALSE };

  if (search->plan->cells->len > 1)
    try_plan (search, &best, ut_plan_without_cell (search->plan, (int) index), g_strdup_printf (_ ("Leave %s out"), ut_plan_cell (search->plan, index)->radio.id));
  keep (search, UT_IMPROVE_LEAVE_OUT, &best);
  tell (search);
}

/* ---- walls ---- */

static void
turn_doors (Search *search, guint storey, guint index)
{
  const UtWall *wall = ut_plan_storey (search->plan, storey)->walls->pdata[index];

  for (guint i = 0; i < wall->openings->len && !stopped (search); i++)
    {
      const UtOpening *opening = wall->openings->pdata[i];
      UtWall *changed = ut_wall_copy (wall);
      UtOpening *turned = ut_opening_copy (opening);
      Best best = { NULL, NULL, -INFINITY, FALSE };
      g_autofree char *at = ut_report_figure (opening->at_m, 1);

      turned->shut = !turned->shut;
      ut_opening_unref (changed->openings->pdata[i]);
      changed->openings->pdata[i] = turned;
      try_plan (search,
                &best,
                ut_plan_with_wall (search->plan, storey, (int) index, changed),
                g_strdup_printf (opening->shut ? _ ("Open the door %s m along wall %s") : _ ("Shut the door %s m along wall %s"), at, wall->id));
      keep (search, UT_IMPROVE_DOOR, &best);
      tell (search);
    }
}

static void
rebuild_wall (Search *search, guint storey, guint index)
{
  const UtWall *wall = ut_plan_storey (search->plan, storey)->walls->pdata[index];
  Best best = { NULL, NULL, -INFINITY, FALSE };

  for (guint i = 0; i < search->plan->constructions->len && !stopped (search); i++)
    {
      const UtConstruction *construction = ut_plan_construction (search->plan, i);
      UtWall *changed;

      if (g_str_equal (construction->id, wall->construction))
        continue;
      changed = ut_wall_copy (wall);
      g_free (changed->construction);
      changed->construction = g_strdup (construction->id);
      try_plan (search, &best, ut_plan_with_wall (search->plan, storey, (int) index, changed), g_strdup_printf (_ ("Build wall %s as: %s"), wall->id, construction->name));
    }
  keep (search, UT_IMPROVE_CONSTRUCTION, &best);
  tell (search);
}

static int
compare_improvements (gconstpointer one, gconstpointer other)
{
  const UtImprovement *a = *(const UtImprovement *const *) one, *b = *(const UtImprovement *const *) other;

  return a->headroom_db < b->headroom_db ? 1 : a->headroom_db > b->headroom_db ? -1 : (int) a->kind - (int) b->kind;
}

GPtrArray *
ut_improvements_new (const UtStudy *study, GCancellable *cancellable, UtImprovementProgress progress, gpointer user)
{
  const UtPlan *plan = study->gains->plan;
  Search search = {
    .study = study,
    .plan = plan,
    .cancellable = cancellable,
    .found = g_ptr_array_new_with_free_func (improvement_free),
    .start_db = isnan (study->headroom_db) ? -INFINITY : study->headroom_db,
    .progress = progress,
    .user = user,
    .all = 4 * plan->cells->len,
  };
  guint n_walls = 0;

  for (guint s = 0; s < plan->storeys->len; s++)
    for (guint w = 0; w < ut_plan_storey (plan, s)->walls->len; w++)
      {
        n_walls++;
        search.all += ((const UtWall *) ut_plan_storey (plan, s)->walls->pdata[w])->openings->len;
      }
  gboolean walls_too = plan->propagation->walls && n_walls * plan->constructions->len <= MOST_WALLS_TRIED;
  search.all += walls_too ? n_walls : 0;
  for (guint c = 0; c < plan->cells->len && !stopped (&search); c++)
    {
      move_cell (&search, c);
      change_channel (&search, c);
      turn_cell (&search, c);
      leave_cell_out (&search, c);
    }
  for (guint s = 0; s < plan->storeys->len; s++)
    for (guint w = 0; w < ut_plan_storey (plan, s)->walls->len && !stopped (&search); w++)
      {
        turn_doors (&search, s, w);
        if (walls_too)
          rebuild_wall (&search, s, w);
      }
  g_ptr_array_sort (search.found, compare_improvements);
  return search.found;
}
