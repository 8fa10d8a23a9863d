#include "fragment.h"

#include <math.h>

#include "places.h"
#include "plan-edit.h"

/* ---- taking a part ---- */

/* Walls that are not selected go, and with them backdrop and floor. */
static const UtPlan *
bare_storey (const UtPlan *part, const UtPlan *plan, guint index, UtSelection *selection)
{
  UtStorey *storey = ut_storey_copy (ut_plan_storey (part, index));

  g_clear_pointer (&storey->backdrop, ut_backdrop_unref);
  g_clear_pointer (&storey->floor, g_free);
  for (guint w = storey->walls->len; w-- > 0;)
    {
      g_autofree char *pick = ut_wall_pick_id (plan, index, w);

      if (!ut_selection_has (selection, UT_KIND_WALL, pick))
        g_ptr_array_remove_index (storey->walls, w);
    }
  return ut_plan_with_storey (part, (int) index, storey);
}

static gboolean
is_empty (const UtPlan *plan, guint storey)
{
  const char *id = ut_plan_storey (plan, storey)->id;

  if (ut_plan_storey (plan, storey)->walls->len > 0)
    return FALSE;
  for (guint i = 0; i < plan->cells->len; i++)
    if (g_str_equal (ut_plan_cell (plan, i)->radio.storey, id))
      return FALSE;
  for (guint i = 0; i < plan->terminals->len; i++)
    if (g_str_equal (ut_plan_terminal (plan, i)->radio.storey, id))
      return FALSE;
  return TRUE;
}

const UtPlan *
ut_plan_fragment (const UtPlan *plan, UtSelection *selection)
{
  const UtPlan *part = ut_plan_ref (plan);

  for (guint i = plan->cells->len; i-- > 0;)
    if (!ut_selection_has (selection, UT_KIND_CELL, ut_plan_cell (plan, i)->radio.id))
      ut_plan_step (&part, ut_plan_without_cell (part, (int) i));
  for (guint i = plan->terminals->len; i-- > 0;)
    if (!ut_selection_has (selection, UT_KIND_TERMINAL, ut_plan_terminal (plan, i)->radio.id))
      ut_plan_step (&part, ut_plan_without_terminal (part, (int) i));
  for (guint i = 0; i < plan->storeys->len; i++)
    ut_plan_step (&part, bare_storey (part, plan, i, selection));
  for (guint i = plan->storeys->len; i-- > 0;)
    if (part->storeys->len > 1 && is_empty (part, i))
      ut_plan_step (&part, ut_plan_without_storey (part, i));
  for (guint i = plan->constructions->len; i-- > 0;)
    if (ut_plan_uses_of_construction (part, ut_plan_construction (plan, i)->id) == 0)
      ut_plan_step (&part, ut_plan_without_construction (part, (int) i));
  for (guint i = plan->antennas->len; i-- > 0;)
    if (ut_plan_uses_of_antenna (part, ut_plan_antenna (plan, i)->id) == 0)
      ut_plan_step (&part, ut_plan_without_antenna (part, (int) i));
  return part;
}

gboolean
ut_fragment_middle (const UtPlan *fragment, double *x_m, double *y_m)
{
  double low_x = INFINITY, low_y = INFINITY, high_x = -INFINITY, high_y = -INFINITY;

  for (guint i = 0; i < fragment->cells->len + fragment->terminals->len; i++)
    {
      const UtRadio *radio = i < fragment->cells->len ? &ut_plan_cell (fragment, i)->radio
                                                      : &ut_plan_terminal (fragment, i - fragment->cells->len)->radio;

      low_x = fmin (low_x, radio->x_m);
      low_y = fmin (low_y, radio->y_m);
      high_x = fmax (high_x, radio->x_m);
      high_y = fmax (high_y, radio->y_m);
    }
  for (guint s = 0; s < fragment->storeys->len; s++)
    for (guint w = 0; w < ut_plan_storey (fragment, s)->walls->len; w++)
      {
        const UtWall *wall = ut_plan_storey (fragment, s)->walls->pdata[w];

        for (guint i = 0; i < wall->points->len; i++)
          {
            UtPoint point = g_array_index (wall->points, UtPoint, i);

            low_x = fmin (low_x, point.x_m);
            low_y = fmin (low_y, point.y_m);
            high_x = fmax (high_x, point.x_m);
            high_y = fmax (high_y, point.y_m);
          }
      }
  *x_m = (low_x + high_x) / 2;
  *y_m = (low_y + high_y) / 2;
  return isfinite (low_x);
}

/* ---- putting it in ---- */

static gboolean
same_number (double one, double other)
{
  return (isnan (one) && isnan (other)) || !(one < other || one > other || isnan (one) || isnan (other));
}

static gboolean
same_numbers (const GArray *one, const GArray *other)
{
  if (one->len != other->len)
    return FALSE;
  for (guint i = 0; i < one->len; i++)
    if (!same_number (g_array_index (one, double, i), g_array_index (other, double, i)))
      return FALSE;
  return TRUE;
}

static gboolean
same_construction (const UtConstruction *one, const UtConstruction *other)
{
  if (one == other)
    return TRUE;
  if (g_strcmp0 (one->name, other->name) != 0 || g_strcmp0 (one->wall_class, other->wall_class) != 0 || !same_number (one->loss_db, other->loss_db)
      || one->layers->len != other->layers->len)
    return FALSE;
  for (guint i = 0; i < one->layers->len; i++)
    {
      const UtConstructionLayer *a = one->layers->pdata[i], *b = other->layers->pdata[i];

      if (g_strcmp0 (a->material, b->material) != 0 || !same_number (a->thickness_mm, b->thickness_mm)
          || (a->material == NULL && (!same_number (a->relative_permittivity, b->relative_permittivity) || !same_number (a->conductivity_s_m, b->conductivity_s_m))))
        return FALSE;
    }
  return TRUE;
}

static gboolean
same_antenna (const UtAntenna *one, const UtAntenna *other)
{
  return one == other
         || (one->pattern == other->pattern && same_number (one->gain_dbi, other->gain_dbi) && same_number (one->beamwidth_h_deg, other->beamwidth_h_deg)
             && same_number (one->beamwidth_v_deg, other->beamwidth_v_deg) && same_numbers (one->horizontal_dbi, other->horizontal_dbi)
             && same_numbers (one->vertical_dbi, other->vertical_dbi));
}

static void
replace_text (char **text, const char *by)
{
  char *copy = g_strdup (by);

  g_free (*text);
  *text = copy;
}

/* What the ids of the fragment become; of each kind a table of texts, from the fragment's id to the plan's. */
typedef struct
{
  const UtPlan *plan, *fragment;
  GHashTable *constructions, *antennas, *cells;
  GString *added;
  double dx_m, dy_m;
  guint storey;
  gboolean own;
} Coming;

static void
bring_constructions (Coming *coming)
{
  for (guint i = 0; i < coming->fragment->constructions->len; i++)
    {
      const UtConstruction *construction = ut_plan_construction (coming->fragment, i);
      int there = ut_plan_find_construction (coming->plan, construction->id);
      UtConstruction *copy;

      if (there >= 0 && same_construction (ut_plan_construction (coming->plan, (guint) there), construction))
        {
          g_hash_table_insert (coming->constructions, g_strdup (construction->id), g_strdup (construction->id));
          continue;
        }
      copy = ut_construction_copy (construction);
      if (there >= 0)
        {
          g_free (copy->id);
          copy->id = ut_plan_free_construction_id (coming->plan);
        }
      g_hash_table_insert (coming->constructions, g_strdup (construction->id), g_strdup (copy->id));
      ut_plan_step (&coming->plan, ut_plan_with_construction (coming->plan, -1, copy));
    }
}

static void
bring_antennas (Coming *coming)
{
  for (guint i = 0; i < coming->fragment->antennas->len; i++)
    {
      const UtAntenna *antenna = ut_plan_antenna (coming->fragment, i);
      int there = ut_plan_find_antenna (coming->plan, antenna->id);
      UtAntenna *copy;

      if (there >= 0 && same_antenna (ut_plan_antenna (coming->plan, (guint) there), antenna))
        {
          g_hash_table_insert (coming->antennas, g_strdup (antenna->id), g_strdup (antenna->id));
          continue;
        }
      copy = ut_antenna_copy (antenna);
      if (there >= 0)
        {
          g_free (copy->id);
          copy->id = ut_plan_free_antenna_id (coming->plan);
        }
      g_hash_table_insert (coming->antennas, g_strdup (antenna->id), g_strdup (copy->id));
      ut_plan_step (&coming->plan, ut_plan_with_antenna (coming->plan, -1, copy));
    }
}

/* Index of the storey in the plan that things of this one come to. */
static guint
storey_for (const Coming *coming, const char *id)
{
  int same = coming->fragment->storeys->len > 1 ? ut_plan_find_storey (coming->plan, id) : -1;

  return same >= 0 ? (guint) same : coming->storey;
}

static void
bring_walls (Coming *coming, const UtStorey *from)
{
  guint storey = storey_for (coming, from->id);

  for (guint w = 0; w < from->walls->len; w++)
    {
      UtWall *wall = ut_wall_copy (from->walls->pdata[w]);

      g_free (wall->id);
      wall->id = ut_plan_free_wall_id (coming->plan, storey);
      replace_text (&wall->construction, g_hash_table_lookup (coming->constructions, wall->construction));
      for (guint i = 0; i < wall->points->len; i++)
        {
          UtPoint *point = &g_array_index (wall->points, UtPoint, i);

          *point = (UtPoint){ ut_to_mm (point->x_m + coming->dx_m), ut_to_mm (point->y_m + coming->dy_m) };
        }
      for (guint i = 0; i < wall->openings->len; i++)
        {
          UtOpening *opening = ut_opening_copy (wall->openings->pdata[i]);

          replace_text (&opening->construction, g_hash_table_lookup (coming->constructions, opening->construction));
          ut_opening_unref (wall->openings->pdata[i]);
          wall->openings->pdata[i] = opening;
        }
      g_string_append_printf (coming->added, "wall %s%c%s\n", ut_plan_storey (coming->plan, storey)->id, UT_WALL_PICK_BREAK, wall->id);
      ut_plan_step (&coming->plan, ut_plan_with_wall (coming->plan, storey, -1, wall));
    }
}

/* Takes over `id`. */
static void
settle (const Coming *coming, UtRadio *radio, char *id)
{
  const char *antenna = g_hash_table_lookup (coming->antennas, radio->antenna);

  if (g_strcmp0 (radio->name, radio->id) == 0)
    replace_text (&radio->name, id);
  g_free (radio->id);
  radio->id = id;
  replace_text (&radio->storey, ut_plan_storey (coming->plan, storey_for (coming, radio->storey))->id);
  if (antenna != NULL)
    replace_text (&radio->antenna, antenna);
  radio->x_m = ut_to_mm (radio->x_m + coming->dx_m);
  radio->y_m = ut_to_mm (radio->y_m + coming->dy_m);
}

static void
bring_radios (Coming *coming, const UtPlan *origin)
{
  for (guint i = 0; i < coming->fragment->cells->len; i++)
    {
      UtCell *cell = ut_cell_copy (ut_plan_cell (coming->fragment, i));

      settle (coming, &cell->radio, ut_plan_free_cell_id (coming->plan));
      cell->channel = MIN (cell->channel, MAX (coming->plan->carrier->channels, 1));
      g_hash_table_insert (coming->cells, g_strdup (ut_plan_cell (coming->fragment, i)->radio.id), g_strdup (cell->radio.id));
      g_string_append_printf (coming->added, "cell %s\n", cell->radio.id);
      ut_plan_step (&coming->plan, ut_plan_with_cell (coming->plan, -1, cell));
    }
  for (guint i = 0; i < coming->fragment->terminals->len; i++)
    {
      const UtTerminal *from = ut_plan_terminal (coming->fragment, i);
      int before = coming->own ? ut_plan_find_terminal (origin, from->radio.id) : -1;
      UtTerminal *terminal = ut_terminal_copy (from);

      settle (coming, &terminal->radio, ut_plan_free_terminal_id (coming->plan));
      if (terminal->cell != NULL)
        replace_text (&terminal->cell, g_hash_table_lookup (coming->cells, terminal->cell));
      else if (before >= 0)
        replace_text (&terminal->cell, ut_plan_terminal (origin, (guint) before)->cell);
      g_string_append_printf (coming->added, "terminal %s\n", terminal->radio.id);
      ut_plan_step (&coming->plan, ut_plan_with_terminal (coming->plan, -1, terminal));
    }
}

const UtPlan *
ut_plan_with_fragment (const UtPlan *plan, const UtPlan *fragment, guint storey, double dx_m, double dy_m, gboolean own, char **added)
{
  g_autoptr (GHashTable) constructions = g_hash_table_new_full (g_str_hash, g_str_equal, g_free, g_free);
  g_autoptr (GHashTable) antennas = g_hash_table_new_full (g_str_hash, g_str_equal, g_free, g_free);
  g_autoptr (GHashTable) cells = g_hash_table_new_full (g_str_hash, g_str_equal, g_free, g_free);
  Coming coming = { ut_plan_ref (plan), fragment, constructions, antennas, cells, g_string_new (NULL), dx_m, dy_m, storey, own };

  bring_constructions (&coming);
  bring_antennas (&coming);
  for (guint i = 0; i < fragment->storeys->len; i++)
    bring_walls (&coming, ut_plan_storey (fragment, i));
  bring_radios (&coming, plan);
  *added = g_string_free (coming.added, FALSE);
  return coming.plan;
}
