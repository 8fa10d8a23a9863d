/* The gain matrix of a plan, kept from revision to revision: only pairs that changed are computed anew. */
#pragma once

#include <gio/gio.h>

#include "plan.h"
#include "wall-index.h"

typedef struct
{
  const UtPlan *plan; /* owned reference */
  UtWallIndex *index; /* owned reference */
  guint n_cells, n_terminals;
  double *gain_db;         /* [terminal * n_cells + cell], measured gains in place */
  double *gain;            /* the same, linear */
  double *computed_db;     /* the same before measured gains */
  guint8 *wall_at_antenna; /* the same layout: a wall passes through an antenna of the pair */
  guint8 *outside_range;   /* the same layout: the pair lies outside what the base law was made for */
  guint computed_pairs;    /* how many were computed anew for this revision */
} UtGains;

/* previous: gains of an earlier revision, or NULL.  Transfer full. */
UtGains *ut_gains_new (const UtPlan *plan, const UtGains *previous) G_GNUC_WARN_UNUSED_RESULT;
/* The same for a thread: once cancelled it leaves the rest of the pairs at 0 and returns early; such gains are to be thrown away. */
UtGains *ut_gains_new_cancellable (const UtPlan *plan, const UtGains *previous, GCancellable *cancellable) G_GNUC_WARN_UNUSED_RESULT;

/* Which pairs lie outside what the base law was made for, in one line to be freed; NULL: none.  Pairs with a measured gain don't count. */
char *ut_gains_range_warning (const UtGains *gains);

UtGains *ut_gains_ref (UtGains *gains);
void ut_gains_unref (UtGains *gains);
G_DEFINE_AUTOPTR_CLEANUP_FUNC (UtGains, ut_gains_unref)

static inline gsize
ut_gains_at (const UtGains *gains, guint terminal, guint cell)
{
  return (gsize) terminal * gains->n_cells + cell;
}
