/* UtSolving keeps an answer to the plan at hand: at once when that is quick, else from a thread, and never lets an old answer pass for a new one. */
#pragma once

#include "study.h"

#define UT_TYPE_SOLVING (ut_solving_get_type ())
G_DECLARE_FINAL_TYPE (UtSolving, ut_solving, UT, SOLVING, GObject)

/* Signal "answered": study or staleness became another. */
UtSolving *ut_solving_new (void);

/* Asks for the answer to `plan`. Answered before it returns when the last answer of its kind took less than a frame can bear; otherwise the old answer
 * stays, stale, until the new one arrives. What was asked before and is not answered yet is cancelled. */
void ut_solving_ask (UtSolving *solving, const UtPlan *plan, const UtQuestion *question);

/* The last answer (borrowed; NULL before the first), and whether something newer has been asked since. */
UtStudy *ut_solving_study (UtSolving *solving);
gboolean ut_solving_is_stale (UtSolving *solving);

/* How long an answer may take to be given in the frame, in milliseconds; 0: always from a thread (for tests). */
void ut_solving_set_budget (UtSolving *solving, double budget_ms);
