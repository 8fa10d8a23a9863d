#include "arrange.h"

#include <math.h>

#include "fragment.h"
#include "places.h"
#include "plan-edit.h"
#include "wall-edits.h"

const char *const ut_align_words[] = { "left", "middle-x", "right", "bottom", "middle-y", "top", NULL };

typedef struct
{
  double low[2], high[2]; /* x, y in metres */
} Box;

static gboolean
box_of (const UtPlan *plan, const UtPick *pick, Box *box)
{
  const UtRadio *radio = ut_plan_radio (plan, pick->kind, pick->id);
  guint storey, index;

  if (radio != NULL)
    {
      *box = (Box){ { radio->x_m, radio->y_m }, { radio->x_m, radio->y_m } };
      return TRUE;
    }
  if (pick->kind != UT_KIND_WALL || !ut_plan_find_picked_wall (plan, pick->id, &storey, &index))
    return FALSE;
  const UtWall *wall = ut_plan_storey (plan, storey)->walls->pdata[index];
  *box = (Box){ { INFINITY, INFINITY }, { -INFINITY, -INFINITY } };
  for (guint i = 0; i < wall->points->len; i++)
    {
      const double at[2] = { g_array_index (wall->points, UtPoint, i).x_m, g_array_index (wall->points, UtPoint, i).y_m };

      for (int k = 0; k < 2; k++)
        {
          box->low[k] = fmin (box->low[k], at[k]);
          box->high[k] = fmax (box->high[k], at[k]);
        }
    }
  return TRUE;
}

static void
move_radio (UtRadio *radio, double dx_m, double dy_m)
{
  radio->x_m = ut_to_mm (radio->x_m + dx_m);
  radio->y_m = ut_to_mm (radio->y_m + dy_m);
}

const UtPlan *
ut_plan_with_pick_moved (const UtPlan *plan, const UtPick *pick, double dx_m, double dy_m)
{
  guint storey, wall;
  int index;

  switch (pick->kind)
    {
    case UT_KIND_CELL:
      if ((index = ut_plan_find_cell (plan, pick->id)) >= 0)
        {
          UtCell *cell = ut_cell_copy (ut_plan_cell (plan, (guint) index));

          move_radio (&cell->radio, dx_m, dy_m);
          return ut_plan_with_cell (plan, index, cell);
        }
      break;
    case UT_KIND_TERMINAL:
      if ((index = ut_plan_find_terminal (plan, pick->id)) >= 0)
        {
          UtTerminal *terminal = ut_terminal_copy (ut_plan_terminal (plan, (guint) index));

          move_radio (&terminal->radio, dx_m, dy_m);
          return ut_plan_with_terminal (plan, index, terminal);
        }
      break;
    case UT_KIND_WALL:
      if (ut_plan_find_picked_wall (plan, pick->id, &storey, &wall))
        return ut_plan_with_wall_moved (plan, storey, wall, dx_m, dy_m);
      break;
    }
  return ut_plan_ref (plan);
}

static void
move (const UtPlan **plan, const UtPick *pick, guint axis, double by_m)
{
  const UtPlan *next = ut_plan_with_pick_moved (*plan, pick, axis == 0 ? by_m : 0, axis == 1 ? by_m : 0);

  ut_plan_unref (*plan);
  *plan = next;
}

const UtPlan *
ut_plan_aligned (const UtPlan *plan, UtSelection *selection, UtAlign align)
{
  const UtPlan *aligned = ut_plan_ref (plan);
  Box whole = { { INFINITY, INFINITY }, { -INFINITY, -INFINITY } }, box;
  guint axis = align >= UT_ALIGN_BOTTOM, side = align % 3; /* low, middle, high */

  for (guint i = 0; i < ut_selection_size (selection); i++)
    if (box_of (plan, ut_selection_pick (selection, i), &box))
      {
        whole.low[axis] = fmin (whole.low[axis], box.low[axis]);
        whole.high[axis] = fmax (whole.high[axis], box.high[axis]);
      }
  for (guint i = 0; i < ut_selection_size (selection); i++)
    if (box_of (plan, ut_selection_pick (selection, i), &box))
      {
        double by_low_m = whole.low[axis] - box.low[axis], by_high_m = whole.high[axis] - box.high[axis];

        move (&aligned, ut_selection_pick (selection, i), axis, side == 0 ? by_low_m : side == 2 ? by_high_m : (by_low_m + by_high_m) / 2);
      }
  return aligned;
}

typedef struct
{
  const UtPick *pick;
  double middle_m;
} Placed;

static int
compare_middles (gconstpointer one, gconstpointer other)
{
  double a = ((const Placed *) one)->middle_m, b = ((const Placed *) other)->middle_m;

  return (a > b) - (a < b);
}

const UtPlan *
ut_plan_distributed (const UtPlan *plan, UtSelection *selection, gboolean along_x)
{
  const UtPlan *distributed = ut_plan_ref (plan);
  g_autoptr (GArray) placed = g_array_new (FALSE, FALSE, sizeof (Placed));
  guint axis = along_x ? 0 : 1;
  Box box;

  for (guint i = 0; i < ut_selection_size (selection); i++)
    if (box_of (plan, ut_selection_pick (selection, i), &box))
      {
        Placed one = { ut_selection_pick (selection, i), (box.low[axis] + box.high[axis]) / 2 };

        g_array_append_val (placed, one);
      }
  if (placed->len < 3)
    return distributed;
  g_array_sort (placed, compare_middles);
  double first_m = g_array_index (placed, Placed, 0).middle_m, last_m = g_array_index (placed, Placed, placed->len - 1).middle_m;
  for (guint i = 1; i + 1 < placed->len; i++)
    {
      const Placed *one = &g_array_index (placed, Placed, i);

      move (&distributed, one->pick, axis, first_m + (last_m - first_m) * i / (placed->len - 1) - one->middle_m);
    }
  return distributed;
}

const UtPlan *
ut_plan_repeated (const UtPlan *plan, UtSelection *selection, guint storey, guint columns, guint rows, double dx_m, double dy_m, char **added)
{
  g_autoptr (UtPlan) fragment = (UtPlan *) ut_plan_fragment (plan, selection);
  const UtPlan *repeated = ut_plan_ref (plan);
  GString *all = g_string_new (NULL);

  for (guint row = 0; row < rows; row++)
    for (guint column = 0; column < columns; column++)
      {
        g_autofree char *one = NULL;
        const UtPlan *next;

        if (row == 0 && column == 0)
          continue;
        next = ut_plan_with_fragment (repeated, fragment, storey, column * dx_m, row * dy_m, TRUE, &one);
        g_string_append (all, one);
        ut_plan_step (&repeated, next);
      }
  *added = g_string_free (all, FALSE);
  return repeated;
}
