/* Everything of a plan that a ray can meet, prepared for crossing tests: wall pieces, openings, floors, slabs. */
#pragma once

#include "plan.h"

typedef enum
{
  UT_CROSSING_WALL,
  UT_CROSSING_FLOOR,
} UtCrossingKind;

typedef struct
{
  UtCrossingKind kind;
  guint storey;       /* index in the plan; of a floor: the storey above it */
  guint wall;         /* index in its storey; floors: 0 */
  int opening;        /* index in its wall of the shut opening that is crossed; -1: the wall itself */
  guint construction; /* index in the plan: what is crossed */
  gboolean heavy;     /* of the two classes of walls that the multi-wall law knows */
  double along;       /* 0..1 from the ray's start to its end */
  double incidence_deg;
  double loss_db;                  /* held between 0 and the plan's limit for one crossing */
  double loss_min_db, loss_max_db; /* spread of an averaged slab, not held; equal to the loss otherwise */
} UtCrossing;

typedef struct _UtWallIndex UtWallIndex;

UtWallIndex *ut_wall_index_new (const UtPlan *plan) G_GNUC_WARN_UNUSED_RESULT;
UtWallIndex *ut_wall_index_ref (UtWallIndex *index);
void ut_wall_index_unref (UtWallIndex *index);
G_DEFINE_AUTOPTR_CLEANUP_FUNC (UtWallIndex, ut_wall_index_unref)

/* TRUE when an index made from `from` also holds for `plan`: storeys, constructions, carrier and propagation are the very
 * same values. */
gboolean ut_wall_index_holds (const UtPlan *from, const UtPlan *plan);

typedef void (*UtCrossingVisitor) (const UtCrossing *crossing, void *user);

/* Visits what the straight ray from -> to (x, y, z in metres) crosses, in no particular order.  The ray's ends belong to
 * it.  A wall piece counts with its start and without its end, so that a corner of one polyline counts once; a ray along a
 * wall does not cross it (both within a nanometre).  spreads: loss_min_db and loss_max_db of averaged slabs are wanted.  Returns TRUE when a wall passes through one of the ends. */
gboolean ut_wall_index_walk (const UtWallIndex *index,
                             const double from_m[3],
                             const double to_m[3],
                             gboolean spreads,
                             UtCrossingVisitor visitor,
                             void *user);

/* One line for each material in use that the carrier lies outside the stated range of; of char *, borrowed. */
GPtrArray *ut_wall_index_warnings (const UtWallIndex *index);

/* Wall pieces in the index. */
guint ut_wall_index_n_pieces (const UtWallIndex *index);
