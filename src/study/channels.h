/* Channels for the cells: which one each should use so that the headroom is largest (docs/methods.md, "Channels"). */
#pragma once

#include "study.h"

typedef struct
{
  const UtPlan *plan;    /* owned: the plan with the channels found */
  int *channel;          /* of each cell, from 1; of cells that are off the plan's own */
  double before_db;      /* headroom with the plan's own channels; -INFINITY: no common change of the targets helps, INFINITY: nobody to serve */
  double headroom_db;    /* with the channels found */
  double bound_db;       /* no channels whatever give more */
  gboolean proved;       /* the headroom is the largest there is, up to UT_CHANNELS_TOLERANCE_DB */
  guint64 tried;         /* headrooms worked out */
} UtChannels;

/* Proved optima are optima up to this. */
#define UT_CHANNELS_TOLERANCE_DB 0.0005

/* Beyond this many headrooms the search for the optimum is given up, and the best one found stands. */
#define UT_CHANNELS_MOST_TRIED 20000

/* seed: of the random starts.  most_tried: headrooms to be worked out at most in the proof.  NULL: cancelled. */
UtChannels *ut_channels_new (const UtGains *gains, UtDirection direction, guint32 seed, guint64 most_tried, GCancellable *cancellable) G_GNUC_WARN_UNUSED_RESULT;
void ut_channels_free (UtChannels *channels);
G_DEFINE_AUTOPTR_CLEANUP_FUNC (UtChannels, ut_channels_free)
