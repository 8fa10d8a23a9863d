/* Single changes of the plan that give more headroom, found by trying: a cell at a better place nearby, on another channel, its antenna turned, left out; a door shut
 * or opened; a wall of another construction.  A search, not a proof: each one found was solved, but better ones may exist. */
#pragma once

#include "study.h"

typedef enum { UT_IMPROVE_MOVE, UT_IMPROVE_CHANNEL, UT_IMPROVE_TURN, UT_IMPROVE_LEAVE_OUT, UT_IMPROVE_DOOR, UT_IMPROVE_CONSTRUCTION, UT_N_IMPROVEMENTS } UtImprovementKind;

typedef struct
{
  UtImprovementKind kind;
  char *what;          /* what to do, in words */
  double headroom_db;  /* of the plan with it, in the study's direction */
  double gained_db;    /* beside the study's; INFINITY where that had none */
  gboolean met;        /* its verdict is "met" */
  const UtPlan *plan;  /* the plan with it */
} UtImprovement;

/* done: 0..1, from the thread that looks. */
typedef void (*UtImprovementProgress) (double done, gpointer user);

/* The best of each cell, door and wall that gain 0.1 dB or more, the best first; of UtImprovement.  Once cancelled those found so far. progress may be NULL. */
GPtrArray *ut_improvements_new (const UtStudy *study, GCancellable *cancellable, UtImprovementProgress progress, gpointer user) G_GNUC_WARN_UNUSED_RESULT;
