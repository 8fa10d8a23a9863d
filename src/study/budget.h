/* The budget of one link in three cases: powers as set, all of them turned down alike, as planned. */
#pragma once

#include "study.h"

typedef enum { UT_CASE_AS_SET, UT_CASE_ALL_DOWN, UT_CASE_PLANNED, UT_N_CASES } UtBudgetCaseKind;

/* The answers that the budgets of all links are read from. */
typedef struct
{
  UtStudy *studies[UT_N_CASES];
  double down_db; /* by which all are turned down: to the sum of the planned powers, or 10 dB where that is no less */
} UtBudgetCases;

/* From an answer; two more plans are solved, from the same gains.  FALSE, and nothing to clear, once cancelled. */
gboolean ut_budget_cases_make (UtStudy *planned, GCancellable *cancellable, UtBudgetCases *cases);
void ut_budget_cases_clear (UtBudgetCases *cases);

typedef enum { UT_PART_POWER, UT_PART_ANTENNA, UT_PART_FEEDER, UT_PART_BODY, UT_PART_DISTANCE, UT_PART_CROSSING, UT_PART_LIMIT, UT_PART_MEASURED } UtBudgetPartKind;

/* One step from the sender's power to what is received. */
typedef struct
{
  UtBudgetPartKind kind;
  char *name; /* of the wall's construction and its id; NULL: the kind says all */
  double db;  /* to be added; of the power: dBm */
} UtBudgetPart;

typedef struct
{
  double power_dbm, signal_dbm, noise_dbm, interference_dbm, sinr_db, target_db, margin_db;
  double needed_dbm;   /* what the signal would have to be for the target, all else being as it is */
  double background_dbm; /* noise and interference together, as the signal's receiver hears them: signal - SINR */
  GArray *interferers; /* of UtInterferer, borrowed from the study, strongest first */
} UtBudgetCase;

typedef struct
{
  const char *terminal, *cell; /* ids, borrowed */
  gboolean down;               /* the cell sends */
  GArray *parts;               /* of UtBudgetPart; their sum is what is received in the planned case */
  UtBudgetCase cases[UT_N_CASES];
  double down_db;
} UtBudget;

/* Of link `index` of the planned study; NULL where it has no cell.  The cases must outlive it. */
UtBudget *ut_budget_new (const UtBudgetCases *cases, guint index) G_GNUC_WARN_UNUSED_RESULT;
void ut_budget_free (UtBudget *budget);
G_DEFINE_AUTOPTR_CLEANUP_FUNC (UtBudget, ut_budget_free)

/* "power", "antennas", "distance", the wall's name: for whoever is shown it. Transfer full. */
char *ut_budget_part_text (const UtBudgetPart *part);

const char *ut_budget_case_text (UtBudgetCaseKind kind);

/* A few plain sentences for the client: who hears whom, why it fails or not, and what turning down does. Transfer full. */
char *ut_budget_words (const UtBudget *budget);
