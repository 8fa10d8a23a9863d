/* Things about a valid plan that its user should know: never a refusal. */
#pragma once

#include "plan.h"

/* Appends UtFaults (plan-read.h): power_dbm outside its limits or off its ladder, a terminal's
 * named cell that is off, ... */
void ut_plan_warnings (const UtPlan *plan, GPtrArray *warnings);
