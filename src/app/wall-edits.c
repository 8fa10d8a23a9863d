#include "wall-edits.h"

#include <math.h>
#include <string.h>

#include <glib/gi18n.h>

#include "places.h"
#include "plan-edit.h"

/* ---- constructions ---- */

typedef struct
{
  const char *id, *name;
  struct
  {
    const char *material;
    double thickness_mm;
  } layers[3];
} Starter;

/* Invented ids; layers of common make (common practice). */
static const Starter starters[] = {
  { "stud-100", N_ ("Stud wall 100 mm"), { { "plasterboard", 12.5 }, { "air", 75 }, { "plasterboard", 12.5 } } },
  { "brick-115", N_ ("Brick wall 115 mm"), { { "brick", 115 } } },
  { "concrete-200", N_ ("Concrete wall 200 mm"), { { "concrete", 200 } } },
  { "glazing-6", N_ ("Single glazing 6 mm"), { { "glass", 6 } } },
  { "door-40", N_ ("Wooden door 40 mm"), { { "wood", 40 } } },
};

static const UtPlan *
with_starter (const UtPlan *plan, const Starter *starter)
{
  UtConstruction *construction = ut_construction_new ();

  g_free (construction->id);
  construction->id = g_strdup (starter->id);
  construction->name = g_strdup (_ (starter->name));
  for (gsize i = 0; i < G_N_ELEMENTS (starter->layers) && starter->layers[i].material != NULL; i++)
    {
      UtConstructionLayer *layer = ut_construction_layer_new ();

      g_free (layer->material);
      layer->material = g_strdup (starter->layers[i].material);
      layer->thickness_mm = starter->layers[i].thickness_mm;
      g_ptr_array_add (construction->layers, layer);
    }
  return ut_plan_with_construction (plan, -1, construction);
}

const UtPlan *
ut_plan_with_starter_constructions (const UtPlan *plan)
{
  const UtPlan *with = ut_plan_ref (plan);

  for (gsize i = 0; i < G_N_ELEMENTS (starters) && plan->constructions->len == 0; i++)
    {
      const UtPlan *next = with_starter (with, &starters[i]);

      ut_plan_step (&with, next);
    }
  return with;
}

/* The construction of the last wall, or opening, in the plan; NULL: there is none. */
static const char *
last_used (const UtPlan *plan, gboolean opening)
{
  const char *last = NULL;

  for (guint s = 0; s < plan->storeys->len; s++)
    for (guint w = 0; w < ut_plan_storey (plan, s)->walls->len; w++)
      {
        const UtWall *wall = ut_plan_storey (plan, s)->walls->pdata[w];

        if (!opening)
          last = wall->construction;
        else if (wall->openings->len > 0)
          last = ((const UtOpening *) wall->openings->pdata[wall->openings->len - 1])->construction;
      }
  return last;
}

int
ut_plan_usual_construction (const UtPlan *plan, gboolean opening)
{
  const char *last = last_used (plan, opening);

  if (last != NULL)
    return ut_plan_find_construction (plan, last);
  for (guint i = 0; i < plan->constructions->len && opening; i++)
    {
      g_autofree char *name = g_utf8_casefold (ut_plan_construction (plan, i)->name, -1), *door = g_utf8_casefold (_ ("door"), -1);

      if (strstr (name, door) != NULL || strstr (name, "door") != NULL)
        return (int) i;
    }
  return (int) plan->constructions->len - 1 < 0 ? -1 : opening ? (int) plan->constructions->len - 1 : 0;
}

/* ---- walls ---- */

static const UtWall *
wall_at (const UtPlan *plan, guint storey, guint wall)
{
  return ut_plan_storey (plan, storey)->walls->pdata[wall];
}

static UtPoint
point_at (const UtWall *wall, guint i)
{
  return g_array_index (wall->points, UtPoint, i);
}

static double
piece_length_m (const UtWall *wall, guint piece)
{
  UtPoint a = point_at (wall, piece), b = point_at (wall, piece + 1);

  return hypot (b.x_m - a.x_m, b.y_m - a.y_m);
}

/* Length along the wall at which a vertex lies. */
static double
vertex_along_m (const UtWall *wall, guint vertex)
{
  double along_m = 0;

  for (guint i = 0; i < vertex; i++)
    along_m += piece_length_m (wall, i);
  return along_m;
}

double
ut_wall_length_m (const UtWall *wall)
{
  return vertex_along_m (wall, wall->points->len - 1);
}

static guint
piece_at (const UtWall *wall, double along_m)
{
  guint piece = 0;

  while (piece + 2 < wall->points->len && along_m >= vertex_along_m (wall, piece + 1))
    piece++;
  return piece;
}

const UtPlan *
ut_plan_with_new_wall (const UtPlan *plan, guint storey, const GArray *points, char **id)
{
  g_autoptr (UtPlan) with = (UtPlan *) ut_plan_with_starter_constructions (plan);
  UtWall *wall = ut_wall_new ();

  g_free (wall->id);
  g_free (wall->construction);
  wall->id = ut_plan_free_wall_id (with, storey);
  wall->construction = g_strdup (ut_plan_construction (with, (guint) MAX (ut_plan_usual_construction (with, FALSE), 0))->id);
  for (guint i = 0; i < points->len; i++)
    {
      UtPoint point = g_array_index (points, UtPoint, i);

      point = (UtPoint){ ut_to_mm (point.x_m), ut_to_mm (point.y_m) };
      g_array_append_val (wall->points, point);
    }
  *id = g_strdup (wall->id);
  return ut_plan_with_wall (with, storey, -1, wall);
}

const UtPlan *
ut_plan_with_wall_moved (const UtPlan *plan, guint storey, guint index, double dx_m, double dy_m)
{
  UtWall *wall = ut_wall_copy (wall_at (plan, storey, index));

  for (guint i = 0; i < wall->points->len; i++)
    {
      UtPoint *point = &g_array_index (wall->points, UtPoint, i);

      *point = (UtPoint){ ut_to_mm (point->x_m + dx_m), ut_to_mm (point->y_m + dy_m) };
    }
  return ut_plan_with_wall (plan, storey, (int) index, wall);
}

static void
set_at (UtWall *wall, guint index, double at_m)
{
  UtOpening *opening = ut_opening_copy (wall->openings->pdata[index]);

  opening->at_m = MAX (ut_to_mm (at_m), 0);
  ut_opening_unref (wall->openings->pdata[index]);
  wall->openings->pdata[index] = opening;
}

/* Openings of `wall`, a copy of `old` with other points, keep their distance from the beginning of their piece; piece k of the old wall begins at vertex
 * first[k] of the new one. */
static void
keep_openings (UtWall *wall, const UtWall *old, guint (*new_vertex) (guint old_vertex, guint changed), guint changed)
{
  for (guint i = 0; i < old->openings->len; i++)
    {
      double at_m = ((const UtOpening *) old->openings->pdata[i])->at_m;
      guint piece = piece_at (old, at_m), vertex = MIN (new_vertex (piece, changed), wall->points->len - 1);

      set_at (wall, i, vertex_along_m (wall, vertex) + at_m - vertex_along_m (old, piece));
    }
}

static guint
same_vertex (guint old_vertex, guint changed)
{
  (void) changed;
  return old_vertex;
}

static guint
vertex_after_adding (guint old_vertex, guint changed)
{
  return old_vertex > changed ? old_vertex + 1 : old_vertex;
}

static guint
vertex_after_removing (guint old_vertex, guint changed)
{
  return old_vertex >= changed && old_vertex > 0 ? old_vertex - 1 : old_vertex;
}

const UtPlan *
ut_plan_with_vertex (const UtPlan *plan, guint storey, guint index, guint vertex, double x_m, double y_m)
{
  const UtWall *old = wall_at (plan, storey, index);
  UtWall *wall = ut_wall_copy (old);

  g_array_index (wall->points, UtPoint, vertex) = (UtPoint){ ut_to_mm (x_m), ut_to_mm (y_m) };
  keep_openings (wall, old, same_vertex, vertex);
  return ut_plan_with_wall (plan, storey, (int) index, wall);
}

const UtPlan *
ut_plan_with_vertex_added (const UtPlan *plan, guint storey, guint index, guint piece, double x_m, double y_m)
{
  const UtWall *old = wall_at (plan, storey, index);
  UtWall *wall = ut_wall_copy (old);
  UtPoint point = { ut_to_mm (x_m), ut_to_mm (y_m) };

  g_array_insert_val (wall->points, piece + 1, point);
  keep_openings (wall, old, vertex_after_adding, piece);
  return ut_plan_with_wall (plan, storey, (int) index, wall);
}

const UtPlan *
ut_plan_without_vertex (const UtPlan *plan, guint storey, guint index, guint vertex)
{
  const UtWall *old = wall_at (plan, storey, index);
  UtWall *wall;

  if (old->points->len <= 2)
    return ut_plan_ref (plan);
  wall = ut_wall_copy (old);
  g_array_remove_index (wall->points, vertex);
  keep_openings (wall, old, vertex_after_removing, vertex);
  return ut_plan_with_wall (plan, storey, (int) index, wall);
}

const UtPlan *
ut_plan_with_wall_split (const UtPlan *plan, guint storey, guint index, guint vertex)
{
  const UtWall *old = wall_at (plan, storey, index);
  double cut_m = vertex_along_m (old, vertex);
  UtWall *first, *second;

  if (vertex == 0 || vertex + 1 >= old->points->len)
    return ut_plan_ref (plan);
  first = ut_wall_copy (old);
  second = ut_wall_copy (old);
  g_free (second->id);
  second->id = ut_plan_free_wall_id (plan, storey);
  g_array_set_size (first->points, vertex + 1);
  g_array_remove_range (second->points, 0, vertex);
  for (guint i = old->openings->len; i-- > 0;)
    {
      double at_m = ((const UtOpening *) old->openings->pdata[i])->at_m;

      if (at_m >= cut_m)
        {
          g_ptr_array_remove_index (first->openings, i);
          set_at (second, i, at_m - cut_m);
        }
      else
        g_ptr_array_remove_index (second->openings, i);
    }
  g_autoptr (UtPlan) cut = (UtPlan *) ut_plan_with_wall (plan, storey, (int) index, first);
  return ut_plan_with_wall (cut, storey, -1, second);
}

/* The same wall drawn from its other end. */
static UtWall *
turned_about (const UtWall *old)
{
  UtWall *wall = ut_wall_copy (old);
  double length_m = ut_wall_length_m (old);
  guint n = old->points->len;

  for (guint i = 0; i < n; i++)
    g_array_index (wall->points, UtPoint, i) = point_at (old, n - 1 - i);
  for (guint i = 0; i < old->openings->len; i++)
    {
      const UtOpening *opening = old->openings->pdata[i];

      set_at (wall, i, length_m - opening->at_m - opening->width_m);
    }
  return wall;
}

static gboolean
meet (UtPoint one, UtPoint other)
{
  return hypot (one.x_m - other.x_m, one.y_m - other.y_m) < 1.5e-3;
}

const UtPlan *
ut_plan_with_walls_joined (const UtPlan *plan, guint storey, guint first, guint second)
{
  const UtWall *a = wall_at (plan, storey, first), *b = wall_at (plan, storey, second);
  UtPoint a0 = point_at (a, 0), a1 = point_at (a, a->points->len - 1), b0 = point_at (b, 0), b1 = point_at (b, b->points->len - 1);
  gboolean at_beginning = !meet (a1, b0) && !meet (a1, b1);
  g_autoptr (UtWall) head = at_beginning ? turned_about (a) : ut_wall_copy (a);
  g_autoptr (UtWall) tail = meet (at_beginning ? a0 : a1, b0) ? ut_wall_copy (b) : turned_about (b);
  double length_m = ut_wall_length_m (head);
  UtWall *joined;

  if (first == second || !meet (point_at (head, head->points->len - 1), point_at (tail, 0)))
    return NULL;
  joined = ut_wall_copy (head);
  g_array_append_vals (joined->points, &g_array_index (tail->points, UtPoint, 1), tail->points->len - 1);
  for (guint i = 0; i < tail->openings->len; i++)
    {
      g_ptr_array_add (joined->openings, (gpointer) ut_opening_ref (tail->openings->pdata[i]));
      set_at (joined, joined->openings->len - 1, length_m + ((const UtOpening *) tail->openings->pdata[i])->at_m);
    }
  g_autoptr (UtPlan) longer = (UtPlan *) ut_plan_with_wall (plan, storey, (int) first, joined);
  return ut_plan_without_wall (longer, storey, second);
}

/* ---- openings ---- */

int
ut_wall_opening_at (const UtWall *wall, double along_m)
{
  for (guint i = wall->openings->len; i-- > 0;)
    {
      const UtOpening *opening = wall->openings->pdata[i];

      if (along_m >= opening->at_m && along_m < opening->at_m + opening->width_m)
        return (int) i;
    }
  return -1;
}

const UtPlan *
ut_plan_with_opening (const UtPlan *plan, guint storey, guint index, double from_m, double to_m)
{
  g_autoptr (UtPlan) with = (UtPlan *) ut_plan_with_starter_constructions (plan);
  UtWall *wall = ut_wall_copy (wall_at (with, storey, index));
  UtOpening *opening = ut_opening_new ();

  g_free (opening->construction);
  opening->construction = g_strdup (ut_plan_construction (with, (guint) MAX (ut_plan_usual_construction (with, TRUE), 0))->id);
  opening->at_m = MAX (ut_to_mm (MIN (from_m, to_m)), 0);
  opening->width_m = MAX (ut_to_mm (fabs (to_m - from_m)), 0.001);
  /* As high as doors are (common practice), where the storey is higher. */
  if (ut_plan_storey (plan, storey)->height_m > 2.2)
    opening->head_m = 2.1;
  g_ptr_array_add (wall->openings, opening);
  return ut_plan_with_wall (with, storey, (int) index, wall);
}

const UtPlan *
ut_plan_with_opening_turned (const UtPlan *plan, guint storey, guint index, guint opening)
{
  UtWall *wall = ut_wall_copy (wall_at (plan, storey, index));
  UtOpening *turned = ut_opening_copy (wall->openings->pdata[opening]);

  turned->shut = !turned->shut;
  ut_opening_unref (wall->openings->pdata[opening]);
  wall->openings->pdata[opening] = turned;
  return ut_plan_with_wall (plan, storey, (int) index, wall);
}
