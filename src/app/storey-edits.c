#include "storey-edits.h"

#include <math.h>

#include <glib/gi18n.h>

#include "places.h"
#include "plan-edit.h"
#include "wall-edits.h"

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
  storey->elevation_m = ut_to_mm (top->elevation_m + top->height_m);
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

typedef struct
{
  const char *storey;
  double dx_m, dy_m;
} Move;

static gboolean
move_radio (UtRadio *radio, gconstpointer user)
{
  const Move *move = user;

  if (!g_str_equal (radio->storey, move->storey))
    return FALSE;
  radio->x_m = ut_to_mm (radio->x_m + move->dx_m);
  radio->y_m = ut_to_mm (radio->y_m + move->dy_m);
  return TRUE;
}

const UtPlan *
ut_plan_with_storey_moved (const UtPlan *plan, guint index, double dx_m, double dy_m)
{
  const UtPlan *moved = ut_plan_with_each_radio (plan, move_radio, &(Move){ ut_plan_storey (plan, index)->id, dx_m, dy_m });

  for (guint w = 0; w < ut_plan_storey (plan, index)->walls->len; w++)
    ut_plan_step (&moved, ut_plan_with_wall_moved (moved, index, w, dx_m, dy_m));
  if (ut_plan_storey (plan, index)->backdrop != NULL)
    {
      UtStorey *storey = ut_storey_copy (ut_plan_storey (moved, index));
      UtBackdrop *backdrop = ut_backdrop_copy (storey->backdrop);

      backdrop->x_m = ut_to_mm (backdrop->x_m + dx_m);
      backdrop->y_m = ut_to_mm (backdrop->y_m + dy_m);
      ut_backdrop_unref (storey->backdrop);
      storey->backdrop = backdrop;
      ut_plan_step (&moved, ut_plan_with_storey (moved, (int) index, storey));
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
