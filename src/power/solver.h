/* Policy iteration from below, one component after another; what least powers, spectral radius and
 * headroom are made of. */
#pragma once

#include "policy.h"

/* Working memory, reused from one factor to the next. */
typedef struct
{
  const UtSystem *system;
  UtComponents components;
  UtPolicy policy;
  double *power;   /* n_unknowns: the powers found */
  double *a, *b;   /* the largest component's matrix and right-hand side */
  unsigned passes; /* policy passes so far */
} UtSolver;

/* Returns UT_POWER_OK, UT_POWER_INVALID (system not finished) or UT_POWER_NO_MEMORY; to be cleared
 * in any case. */
UtPowerStatus ut_solver_init (UtSolver *solver, const UtSystem *system);
void ut_solver_clear (UtSolver *solver);

/* The least p of one component with p_i = max (floor_i, factor * J_i (p)) + extra_i, the others as
 * they stand in solver->power; extra (n_unknowns) may be NULL. It begins with the policy it finds.
 * Any policy is a valid start: its powers, if it has any, are at most the least powers, and if it
 * has none the system has none.  Policies then only improve and powers only rise, so the iteration
 * ends (Howard 1960; as Newton's method: Puterman & Brumelle, Math. Oper. Res. 4, 1979). Returns
 * UT_POWER_OK; UT_POWER_UNBOUNDED (proved by a pivot); UT_POWER_UNSETTLED (out of range). */
UtPowerStatus ut_solver_settle (
    UtSolver *solver, size_t component, double factor, UtLift lift, const double *extra);

/* The same for all components, in order. */
UtPowerStatus ut_solver_run (UtSolver *solver, double factor, UtLift lift);
