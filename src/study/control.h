/* The power control loop: the radios finding their powers by themselves, round after round (docs/methods.md, "Power control loop"). */
#pragma once

#include "study.h"

typedef enum
{
  UT_CONTROL_EXACT, /* every radio goes straight to the power it needs at what it sees */
  UT_CONTROL_STEPS, /* up a step or down a step, by the sign of what it lacks */
} UtControlRule;

typedef enum { UT_START_SET, UT_START_LEAST, UT_START_MOST } UtControlStart;

typedef struct
{
  UtControlRule rule;
  UtControlStart start; /* powers as set (held within the limits), the lowest, or the highest */
  double step_db;       /* > 0; UT_CONTROL_STEPS */
  guint delay;          /* rounds by which what a radio sees is old */
  double error_db;      /* >= 0: what it measures is off by up to so much, evenly spread */
  guint32 seed;         /* of the measurement errors */
  guint rounds;
} UtControlSetup;

typedef struct
{
  UtGains *gains;
  UtDirection direction;
  UtControlSetup setup;
  gboolean simultaneous;
  GArray *senders;     /* of guint, what has a power of its own: cells (orthogonal downlink, by index), else the terminals of the links */
  GArray *links;       /* of guint: terminals */
  guint n_rows;        /* rounds + 1: the start is row 0 */
  double *power_dbm;   /* [row * senders + k] */
  double *sinr_db;     /* [row * links + i] */
  double *target_db;   /* of each link */
  gboolean *met;       /* of each link: SINR and level, in the last row */

  double *end_dbm;     /* of each sender: where exact control ends; NULL: not known (sums of a cell's links are limited) */
  gboolean end_meets;  /* all targets are met there */
  double predicted_db; /* by which the distance from there shrinks each round under exact control; NAN: not known, INFINITY: gone at once */
  double observed_db;  /* the same, as seen; NAN: too few rounds, or not approached */

  double band_db;      /* UT_CONTROL_STEPS: (delay + 1) step + error; else NAN */
  gboolean band_holds; /* targets and levels could rise by that: in the end every power stays between these, every SINR within 2 (delay + 1) step + error */
  double *low_dbm, *high_dbm; /* of each sender; NULL unless band_holds */
} UtControl;

UtControl *ut_control_new (const UtStudy *study, const UtControlSetup *setup) G_GNUC_WARN_UNUSED_RESULT;
void ut_control_free (UtControl *control);
G_DEFINE_AUTOPTR_CLEANUP_FUNC (UtControl, ut_control_free)

/* The id of a sender or of a link's terminal. */
const char *ut_control_sender_id (const UtControl *control, guint k);
const char *ut_control_link_id (const UtControl *control, guint i);
