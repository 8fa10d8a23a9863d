/* What would heal a plan that cannot be met (docs/methods.md, "Remedies"). */
#pragma once

#include "study.h"

typedef enum
{
  UT_REMEDY_LOWER_TARGETS, /* every target of the direction by by_db */
  UT_REMEDY_LOWER_TARGET,  /* that of one terminal by by_db */
  UT_REMEDY_DROP_LINK,     /* leave one terminal out */
  UT_REMEDY_OTHER_CELL,    /* serve one terminal from another cell */
  UT_REMEDY_LEAVE_OUT_CELL, /* switch one cell off; terminals that name it become automatic */
  UT_REMEDY_WEAKEN_PATH,   /* the gain between a cell and a terminal that it does not serve has to fall by by_db */
  UT_REMEDY_RAISE_LIMITS,  /* power_max of the transmitters has to rise, to to_dbm each */
  UT_REMEDY_PADS,          /* an attenuator of by_db at each of the transmitters, because their lowest power is too much */
} UtRemedyKind;

typedef struct
{
  UtRemedyKind kind;
  int terminal, cell;   /* by their index in the plan; -1: none */
  GArray *transmitters; /* of guint: cells (downlink) or terminals (uplink) */
  GArray *to_dbm;       /* of double, beside transmitters; empty: not about powers */
  double by_db;         /* NAN: not about an amount */
  double headroom_db;   /* of the plan with it */
  const UtPlan *plan;   /* the plan with it: solved again, its verdict is "met" */
} UtRemedy;

/* The remedies of a study whose verdict is not "met", kind after kind; of each kind the best few, best first.  Every one was verified by solving
 * the changed plan. Of type UtRemedy; empty when nothing single helps, or once cancelled. */
GPtrArray *ut_remedies_new (const UtStudy *study, GCancellable *cancellable) G_GNUC_WARN_UNUSED_RESULT;

/* One sentence, to be freed. */
char *ut_remedy_sentence (const UtStudy *study, const UtRemedy *remedy);

/* The kind as results name it. */
const char *ut_remedy_word (UtRemedyKind kind);
