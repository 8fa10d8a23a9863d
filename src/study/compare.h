/* Two answers beside each other: what is another in the plan, and what comes of it. */
#pragma once

#include "study.h"

typedef enum { UT_ROW_SUMMARY, UT_ROW_PLAN, UT_ROW_POWER, UT_ROW_MARGIN } UtComparisonKind;

typedef struct
{
  UtComparisonKind kind;
  char *name;              /* translated */
  double before, after;    /* figures in dB or dBm, or counts; NAN: not there */
  guint decimals;          /* they are shown with */
  char *words;             /* of a UT_ROW_PLAN instead of figures; NULL for the others */
} UtComparisonRow;

/* Summary, changes of the plan, powers and margins that are another by 0.005 dB or more; of UtComparisonRow. */
GPtrArray *ut_comparison_new (const UtStudy *before, const UtStudy *after) G_GNUC_WARN_UNUSED_RESULT;

/* As CSV. Transfer full. */
char *ut_comparison_csv (const GPtrArray *rows);
