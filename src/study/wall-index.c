#include "wall-index.h"

#include <math.h>

#include "construction-slab.h"
#include "material.h"
#include "slab-fit.h"
#include "wall-grid.h"

/* Points closer to a line than this count as on it. Far below any drawing accuracy, far above rounding at site scale. */
#define ON_LINE_M 1e-9

typedef struct
{
  UtConstructionSlab of;
  UtSlabFit *wall_fit, *floor_fit; /* of the averaged loss; NULL: evaluated each time */
} Slab;

typedef struct
{
  double at_m, end_m, sill_m, head_m;
  int construction; /* -1: not shut, nothing is crossed */
  guint index;
} Opening;

/* From so many pairs on the loss of averaged slabs is fitted once, instead of averaged at each crossing. */
#define PAIRS_TO_FIT 1000

/* From so many pieces on the grid is quicker than looking at all. */
#define PIECES_FOR_GRID 48

/* One piece of a wall's polyline.  What the crossing test needs for every ray is in the arrays of the index. */
typedef struct
{
  guint storey, wall, construction;
  double along_m; /* of the piece's start along the polyline */
  double length_m;
  double bottom_m, top_m;
  guint first_opening, n_openings;
} Piece;

typedef struct
{
  double elevation_m;
  guint storey, construction;
} Floor;

struct _UtWallIndex
{
  gatomicrefcount refs;
  double frequency_hz, loss_limit_db;
  gboolean averaged;
  double te_share_wall, te_share_floor;
  guint n_slabs;
  Slab *slabs;                      /* by construction */
  double *start_x, *start_y, *end_x, *end_y; /* of the pieces */
  UtWallGrid *grid;                 /* NULL: few pieces */
  GArray *pieces;                   /* of Piece */
  GArray *openings;                 /* of Opening */
  GArray *floors;                   /* of Floor */
  GPtrArray *warnings;
};

/* Warns of each material of a construction in use that is outside its stated range, once a material. */
static void
warn_of_range (UtWallIndex *index, const UtConstruction *construction, GHashTable *told)
{
  double frequency_ghz = index->frequency_hz / 1e9;

  for (guint i = 0; i < construction->layers->len; i++)
    {
      const UtConstructionLayer *layer = construction->layers->pdata[i];
      const UtMaterial *material = layer->material != NULL ? ut_material_find (layer->material) : NULL;

      if (material == NULL || (frequency_ghz >= material->lowest_ghz && frequency_ghz <= material->highest_ghz)
          || !g_hash_table_add (told, (gpointer) material->id))
        continue;
      g_ptr_array_add (index->warnings,
                       g_strdup_printf ("material %s is used at %g GHz, outside the %g to %g GHz its figures are stated for "
                                        "(ITU-R P.2040-3)",
                                        material->id,
                                        frequency_ghz,
                                        material->lowest_ghz,
                                        material->highest_ghz));
    }
}

static void
add_openings (UtWallIndex *index, const UtPlan *plan, const UtWall *wall, double height_m)
{
  for (guint i = 0; i < wall->openings->len; i++)
    {
      const UtOpening *from = wall->openings->pdata[i];
      Opening opening = {
        .at_m = from->at_m,
        .end_m = from->at_m + from->width_m,
        .sill_m = from->sill_m,
        .head_m = isnan (from->head_m) ? height_m : from->head_m,
        .construction = from->shut ? ut_plan_find_construction (plan, from->construction) : -1,
        .index = i,
      };

      g_array_append_val (index->openings, opening);
    }
}

static void
add_wall (UtWallIndex *index, const UtPlan *plan, guint storey_index, guint wall_index, GArray *points)
{
  const UtStorey *storey = ut_plan_storey (plan, storey_index);
  const UtWall *wall = storey->walls->pdata[wall_index];
  double height_m = isnan (wall->height_m) ? storey->height_m : wall->height_m;
  guint first_opening = index->openings->len;
  double along_m = 0;

  add_openings (index, plan, wall, height_m);
  for (guint i = 0; i + 1 < wall->points->len; i++)
    {
      UtPoint ends[2] = { g_array_index (wall->points, UtPoint, i), g_array_index (wall->points, UtPoint, i + 1) };
      Piece piece = {
        .storey = storey_index,
        .wall = wall_index,
        .construction = (guint) ut_plan_find_construction (plan, wall->construction),
        .along_m = along_m,
        .length_m = hypot (ends[1].x_m - ends[0].x_m, ends[1].y_m - ends[0].y_m),
        .bottom_m = storey->elevation_m,
        .top_m = storey->elevation_m + height_m,
        .first_opening = first_opening,
        .n_openings = wall->openings->len,
      };

      if (piece.length_m > 0)
        {
          g_array_append_val (index->pieces, piece);
          g_array_append_vals (points, ends, 2);
        }
      along_m += piece.length_m;
    }
}

/* Splits the piece ends into the four arrays that the crossing test runs through. */
static void
set_points (UtWallIndex *index, const GArray *points)
{
  guint n = index->pieces->len;

  index->start_x = g_new (double, n);
  index->start_y = g_new (double, n);
  index->end_x = g_new (double, n);
  index->end_y = g_new (double, n);
  for (guint i = 0; i < n; i++)
    {
      index->start_x[i] = g_array_index (points, UtPoint, 2 * i).x_m;
      index->start_y[i] = g_array_index (points, UtPoint, 2 * i).y_m;
      index->end_x[i] = g_array_index (points, UtPoint, 2 * i + 1).x_m;
      index->end_y[i] = g_array_index (points, UtPoint, 2 * i + 1).y_m;
    }
}

static void
add_storeys (UtWallIndex *index, const UtPlan *plan)
{
  g_autoptr (GArray) points = g_array_new (FALSE, FALSE, sizeof (UtPoint));

  for (guint s = 0; s < plan->storeys->len; s++)
    {
      const UtStorey *storey = ut_plan_storey (plan, s);

      for (guint w = 0; w < storey->walls->len; w++)
        add_wall (index, plan, s, w, points);
      if (storey->floor != NULL)
        {
          Floor floor = { storey->elevation_m, s, (guint) ut_plan_find_construction (plan, storey->floor) };
          g_array_append_val (index->floors, floor);
        }
    }
  set_points (index, points);
}

static void
add_warnings (UtWallIndex *index, const UtPlan *plan)
{
  g_autoptr (GHashTable) told = g_hash_table_new (g_str_hash, g_str_equal);

  for (guint i = 0; i < index->pieces->len; i++)
    warn_of_range (index, ut_plan_construction (plan, g_array_index (index->pieces, Piece, i).construction), told);
  for (guint i = 0; i < index->openings->len; i++)
    if (g_array_index (index->openings, Opening, i).construction >= 0)
      warn_of_range (index,
                     ut_plan_construction (plan, (guint) g_array_index (index->openings, Opening, i).construction),
                     told);
  for (guint i = 0; i < index->floors->len; i++)
    warn_of_range (index, ut_plan_construction (plan, g_array_index (index->floors, Floor, i).construction), told);
}

static UtSlabFit *
fit_new (const UtSlab *slab, double te_share)
{
  UtSlabFit *fit = g_new0 (UtSlabFit, 1);

  ut_slab_fit (slab, te_share, fit);
  if (fit->n == 0)
    g_clear_pointer (&fit, g_free);
  return fit;
}

static void
fit_slab (UtWallIndex *index, Slab *slab)
{
  if (slab->of.layers == NULL || !isnan (slab->of.loss_db))
    return;
  slab->wall_fit = fit_new (&slab->of.slab, index->te_share_wall);
  slab->floor_fit = fit_new (&slab->of.slab, index->te_share_floor);
}

UtWallIndex *
ut_wall_index_new (const UtPlan *plan)
{
  /* Vertical polarization is TE on walls and TM on floors; horizontal the other way round. */
  static const double te_share_wall[] = {
    [UT_POLARIZATION_VERTICAL] = 1,
    [UT_POLARIZATION_HORIZONTAL] = 0,
    [UT_POLARIZATION_MIXED] = 0.5,
  };
  UtWallIndex *index = g_new0 (UtWallIndex, 1);

  g_atomic_ref_count_init (&index->refs);
  index->frequency_hz = plan->carrier->frequency_mhz * 1e6;
  index->loss_limit_db = plan->propagation->wall_loss_limit_db;
  index->averaged = plan->propagation->slab == UT_SLAB_AVERAGED;
  index->te_share_wall = te_share_wall[plan->carrier->polarization];
  index->te_share_floor = 1 - index->te_share_wall;
  index->n_slabs = plan->constructions->len;
  index->slabs = g_new0 (Slab, index->n_slabs);
  for (guint i = 0; i < index->n_slabs; i++)
    ut_construction_slab_init (&index->slabs[i].of, ut_plan_construction (plan, i), index->frequency_hz);
  index->pieces = g_array_new (FALSE, FALSE, sizeof (Piece));
  index->openings = g_array_new (FALSE, FALSE, sizeof (Opening));
  index->floors = g_array_new (FALSE, FALSE, sizeof (Floor));
  index->warnings = g_ptr_array_new_with_free_func (g_free);
  add_storeys (index, plan);
  add_warnings (index, plan);
  if (index->pieces->len >= PIECES_FOR_GRID)
    index->grid = ut_wall_grid_new (index->pieces->len, index->start_x, index->start_y, index->end_x, index->end_y);
  if (index->averaged && (gsize) plan->cells->len * plan->terminals->len >= PAIRS_TO_FIT)
    for (guint i = 0; i < index->n_slabs; i++)
      fit_slab (index, &index->slabs[i]);
  return index;
}

UtWallIndex *
ut_wall_index_ref (UtWallIndex *index)
{
  g_atomic_ref_count_inc (&index->refs);
  return index;
}

void
ut_wall_index_unref (UtWallIndex *index)
{
  if (!g_atomic_ref_count_dec (&index->refs))
    return;
  for (guint i = 0; i < index->n_slabs; i++)
    {
      ut_construction_slab_clear (&index->slabs[i].of);
      g_free (index->slabs[i].wall_fit);
      g_free (index->slabs[i].floor_fit);
    }
  g_clear_pointer (&index->grid, ut_wall_grid_free);
  g_free (index->slabs);
  g_free (index->start_x);
  g_free (index->start_y);
  g_free (index->end_x);
  g_free (index->end_y);
  g_array_unref (index->pieces);
  g_array_unref (index->openings);
  g_array_unref (index->floors);
  g_ptr_array_unref (index->warnings);
  g_free (index);
}

static gboolean
same_items (const GPtrArray *one, const GPtrArray *other)
{
  if (one == other)
    return TRUE;
  if (one->len != other->len)
    return FALSE;
  for (guint i = 0; i < one->len; i++)
    if (one->pdata[i] != other->pdata[i])
      return FALSE;
  return TRUE;
}

gboolean
ut_wall_index_holds (const UtPlan *from, const UtPlan *plan)
{
  return from->carrier == plan->carrier && from->propagation == plan->propagation
         && same_items (from->constructions, plan->constructions) && same_items (from->storeys, plan->storeys);
}

GPtrArray *
ut_wall_index_warnings (const UtWallIndex *index)
{
  return index->warnings;
}

guint
ut_wall_index_n_pieces (const UtWallIndex *index)
{
  return index->pieces->len;
}

typedef struct
{
  const double *from_m, *to_m;
  double dx, dy, dz;
  double ground_m; /* length of the plan projection */
  double length_m;
  gboolean spreads; /* loss_min_db and loss_max_db are wanted too */
  UtCrossingVisitor visitor;
  void *user;
} Ray;

/* Fills in the loss of a crossing whose construction and angle are known. */
static void
set_loss (const UtWallIndex *index, const Ray *ray, UtCrossing *crossing, double cos_incidence, double te_share)
{
  const Slab *slab = &index->slabs[crossing->construction];
  const UtSlabFit *fit = crossing->kind == UT_CROSSING_WALL ? slab->wall_fit : slab->floor_fit;
  double incidence_rad = acos (CLAMP (cos_incidence, 0, 1));

  crossing->incidence_deg = incidence_rad * (180 / G_PI);
  if (isnan (slab->of.loss_db) && fit != NULL && !ray->spreads)
    crossing->loss_db = crossing->loss_min_db = crossing->loss_max_db = ut_slab_fit_loss_db (fit, incidence_rad);
  else if (isnan (slab->of.loss_db))
    {
      UtSlabLoss loss;
      UtRadioStatus status = ut_slab_evaluate (&slab->of.slab, incidence_rad, te_share, index->averaged, &loss);

      g_assert (status == UT_RADIO_OK);
      crossing->loss_db = loss.loss_db;
      crossing->loss_min_db = loss.loss_min_db;
      crossing->loss_max_db = loss.loss_max_db;
    }
  else
    crossing->loss_db = crossing->loss_min_db = crossing->loss_max_db = slab->of.loss_db;
  crossing->loss_db = CLAMP (crossing->loss_db, 0, index->loss_limit_db);
  crossing->heavy = slab->of.heavy;
}

/* What stands at this spot of the piece: *construction is -1 for an opening that is not shut. */
static void
what_is_there (const UtWallIndex *index, const Piece *piece, double along_m, double above_m, int *construction, int *opening)
{
  *construction = (int) piece->construction;
  *opening = -1;
  for (guint i = piece->n_openings; i-- > 0;) /* the last in the list counts */
    {
      const Opening *at = &g_array_index (index->openings, Opening, piece->first_opening + i);

      if (along_m >= at->at_m && along_m < at->end_m && above_m >= at->sill_m && above_m < at->head_m)
        {
          *construction = at->construction;
          *opening = (int) at->index;
          return;
        }
    }
}

/* A piece whose line the ray's projection is known to cross between its ends. */
static void
visit_piece (const UtWallIndex *index, const Ray *ray, guint i, double start_side, double end_side, gboolean *at_end)
{
  const Piece *piece = &g_array_index (index->pieces, Piece, i);
  double px = index->end_x[i] - index->start_x[i], py = index->end_y[i] - index->start_y[i];
  /* Distances of the ray's ends from the piece's line, signed. */
  double from_side = (px * (ray->from_m[1] - index->start_y[i]) - py * (ray->from_m[0] - index->start_x[i])) / piece->length_m;
  double to_side = (px * (ray->to_m[1] - index->start_y[i]) - py * (ray->to_m[0] - index->start_x[i])) / piece->length_m;
  gboolean from_on = fabs (from_side) <= ON_LINE_M, to_on = fabs (to_side) <= ON_LINE_M;

  /* Both ends on its line: along the wall, or along its line somewhere else. */
  if ((from_on && to_on) || (!from_on && !to_on && (from_side > 0) == (to_side > 0)))
    return;
  double along = from_on ? 0 : to_on ? 1 : from_side / (from_side - to_side);
  double z_m = ray->from_m[2] + along * ray->dz;
  if (z_m < piece->bottom_m || z_m >= piece->top_m)
    return;

  double on_piece = start_side == 0 ? 0 : start_side / (start_side - end_side);
  int construction;
  UtCrossing crossing = { .kind = UT_CROSSING_WALL, .storey = piece->storey, .wall = piece->wall, .along = along };
  what_is_there (index,
                 piece,
                 piece->along_m + on_piece * piece->length_m,
                 z_m - piece->bottom_m,
                 &construction,
                 &crossing.opening);
  if (construction < 0)
    return;
  if (from_on || to_on)
    *at_end = TRUE;
  crossing.construction = (guint) construction;
  /* The wall's normal is horizontal. */
  set_loss (index, ray, &crossing, fabs (px * ray->dy - py * ray->dx) / (piece->length_m * ray->length_m), index->te_share_wall);
  ray->visitor (&crossing, ray->user);
}

/* Pieces up to 64 times this need no memory of their own for a ray. */
#define WORDS_ON_STACK 128

static inline void
test_piece (const UtWallIndex *index, const Ray *ray, guint i, double near, gboolean *at_end)
{
  /* Which side of the ray's line each end of the piece is on; a shared corner gets the same figure in both pieces. */
  double start = ray->dx * (index->start_y[i] - ray->from_m[1]) - ray->dy * (index->start_x[i] - ray->from_m[0]);
  double end = ray->dx * (index->end_y[i] - ray->from_m[1]) - ray->dy * (index->end_x[i] - ray->from_m[0]);

  if ((start > near && end > near) || (start < -near && end < -near) || fabs (end) <= near)
    return;
  visit_piece (index, ray, i, fabs (start) <= near ? 0 : start, end, at_end);
}

static gboolean
visit_walls (const UtWallIndex *index, const Ray *ray)
{
  gboolean at_end = FALSE;
  const double near = ON_LINE_M * ray->ground_m;

  if (ray->ground_m <= ON_LINE_M)
    return FALSE; /* straight up or down: along every wall, across none */
  if (index->grid == NULL)
    {
      for (guint i = 0; i < index->pieces->len; i++)
        test_piece (index, ray, i, near, &at_end);
      return at_end;
    }
  guint n_words = ut_wall_grid_n_words (index->grid);
  guint64 on_stack[WORDS_ON_STACK] = { 0 };
  g_autofree guint64 *on_heap = n_words > WORDS_ON_STACK ? g_new0 (guint64, n_words) : NULL;
  guint64 *bits = on_heap != NULL ? on_heap : on_stack;

  /* By bits, so that pieces come in their own order, each once: sums are the same as without the grid, to the last digit. */
  ut_wall_grid_gather (index->grid, ray->from_m[0], ray->from_m[1], ray->to_m[0], ray->to_m[1], bits);
  for (guint word = 0; word < n_words; word++)
    for (guint64 rest = bits[word]; rest != 0; rest &= rest - 1)
      test_piece (index, ray, 64 * word + (guint) __builtin_ctzll (rest), near, &at_end);
  return at_end;
}

static void
visit_floors (const UtWallIndex *index, const Ray *ray)
{
  double low_m = MIN (ray->from_m[2], ray->to_m[2]), high_m = MAX (ray->from_m[2], ray->to_m[2]);

  for (guint i = 0; i < index->floors->len; i++)
    {
      const Floor *floor = &g_array_index (index->floors, Floor, i);
      UtCrossing crossing = { .kind = UT_CROSSING_FLOOR, .storey = floor->storey, .opening = -1 };

      if (!(low_m < floor->elevation_m && floor->elevation_m <= high_m))
        continue;
      crossing.construction = floor->construction;
      crossing.along = (floor->elevation_m - ray->from_m[2]) / ray->dz;
      set_loss (index, ray, &crossing, fabs (ray->dz) / ray->length_m, index->te_share_floor);
      ray->visitor (&crossing, ray->user);
    }
}

gboolean
ut_wall_index_walk (const UtWallIndex *index,
                    const double from_m[3],
                    const double to_m[3],
                    gboolean spreads,
                    UtCrossingVisitor visitor,
                    void *user)
{
  Ray ray = {
    .spreads = spreads,
    .from_m = from_m,
    .to_m = to_m,
    .dx = to_m[0] - from_m[0],
    .dy = to_m[1] - from_m[1],
    .dz = to_m[2] - from_m[2],
    .visitor = visitor,
    .user = user,
  };

  ray.ground_m = hypot (ray.dx, ray.dy);
  ray.length_m = hypot (ray.ground_m, ray.dz);
  visit_floors (index, &ray);
  return visit_walls (index, &ray);
}
