#include "storey-edits.h"

#include <math.h>

#include <glib/gi18n.h>

#include "plan-edit.h"
#include "wall-edits.h"

static double
to_mm (double value_m)
{
  return round (value_m * 1e3) / 1e3;
}

static guint
highest (const UtPlan *plan)
{
  guint top = 0;

  for (guint i = 1; i < plan->storeys->len; i++)
    if (ut_plan_storey (plan, i)->elevation_m > ut_plan_storey (plan, top)->elevation_m)
      top = i;
  return top;
}

/* Puts it on top; takes over `storey`. */
static const UtPlan *
on_top (const UtPlan *plan, UtStorey *storey, guint *index)
{
  const UtStorey *top = ut_plan_storey (plan, highest (plan));

  g_free (storey->id);
  g_free (storey->name);
  storey->id = ut_plan_free_storey_id (plan);
  storey->name = g_strdup_printf (_ ("Storey %u"), plan->storeys->len + 1);
  storey->elevation_m = to_mm (top->elevation_m + top->height_m);
  *index = plan->storeys->len;
  return ut_plan_with_storey (plan, -1, storey);
}

const UtPlan *
ut_plan_with_new_storey (const UtPlan *plan, guint *index)
{
  const UtStorey *top = ut_plan_storey (plan, highest (plan));
  UtStorey *storey = ut_storey_new ();

  storey->height_m = top->height_m;
  storey->floor = g_strdup (top->floor);
  return on_top (plan, storey, index);
}

const UtPlan *
ut_plan_with_storey_copied (const UtPlan *plan, guint from, guint *index)
{
  return on_top (plan, ut_storey_copy (ut_plan_storey (plan, from)), index);
}

static void
step (const UtPlan **plan, const UtPlan *next)
{
  ut_plan_unref (*plan);
  *plan = next;
}

static void
move_radio (UtRadio *radio, double dx_m, double dy_m)
{
  radio->x_m = to_mm (radio->x_m + dx_m);
  radio->y_m = to_mm (radio->y_m + dy_m);
}

const UtPlan *
ut_plan_with_storey_moved (const UtPlan *plan, guint index, double dx_m, double dy_m)
{
  const UtPlan *moved = ut_plan_ref (plan);
  const char *id = ut_plan_storey (plan, index)->id;

  for (guint w = 0; w < ut_plan_storey (plan, index)->walls->len; w++)
    step (&moved, ut_plan_with_wall_moved (moved, index, w, dx_m, dy_m));
  for (guint i = 0; i < plan->cells->len; i++)
    if (g_str_equal (ut_plan_cell (plan, i)->radio.storey, id))
      {
        UtCell *cell = ut_cell_copy (ut_plan_cell (plan, i));

        move_radio (&cell->radio, dx_m, dy_m);
        step (&moved, ut_plan_with_cell (moved, (int) i, cell));
      }
  for (guint i = 0; i < plan->terminals->len; i++)
    if (g_str_equal (ut_plan_terminal (plan, i)->radio.storey, id))
      {
        UtTerminal *terminal = ut_terminal_copy (ut_plan_terminal (plan, i));

        move_radio (&terminal->radio, dx_m, dy_m);
        step (&moved, ut_plan_with_terminal (moved, (int) i, terminal));
      }
  if (ut_plan_storey (plan, index)->backdrop != NULL)
    {
      UtStorey *storey = ut_storey_copy (ut_plan_storey (moved, index));
      UtBackdrop *backdrop = ut_backdrop_copy (storey->backdrop);

      backdrop->x_m = to_mm (backdrop->x_m + dx_m);
      backdrop->y_m = to_mm (backdrop->y_m + dy_m);
      ut_backdrop_unref (storey->backdrop);
      storey->backdrop = backdrop;
      step (&moved, ut_plan_with_storey (moved, (int) index, storey));
    }
  return moved;
}

int
ut_plan_storey_below (const UtPlan *plan, guint storey)
{
  double own_m = ut_plan_storey (plan, storey)->elevation_m;
  int below = -1;

  for (guint i = 0; i < plan->storeys->len; i++)
    if (ut_plan_storey (plan, i)->elevation_m < own_m
        && (below < 0 || ut_plan_storey (plan, i)->elevation_m > ut_plan_storey (plan, (guint) below)->elevation_m))
      below = (int) i;
  return below;
}
