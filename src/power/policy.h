/* A policy: which piece each unknown follows, and which member of each group. */
#pragma once

#include "component.h"

#define UT_POLICY_FLOOR SIZE_MAX    /* instead of a piece: the unknown's floor */
#define UT_POLICY_CONSTANT SIZE_MAX /* instead of a term: the group's constant */

typedef struct
{
  size_t *piece; /* n_unknowns */
  size_t *term;  /* n_groups */
} UtPolicy;

/* All at their floors and constants.  Returns UT_POWER_OK or UT_POWER_NO_MEMORY; to be cleared in
 * either case. */
UtPowerStatus ut_policy_init (UtPolicy *policy, const UtSystem *system);
void ut_policy_clear (UtPolicy *policy);

/* Takes the best choices at p for the given rows, with factor `factor` on the pieces.  A choice
 * that is within 1e-13 (relative) of the best is kept, so that ties do not flip for ever. Returns
 * whether any choice that matters changed. */
bool ut_policy_improve (UtPolicy *policy,
                        const UtSystem *system,
                        UtLift lift,
                        double factor,
                        const double *p,
                        const uint32_t *rows,
                        size_t n_rows);

/* The linear system of one component under the policy: a = I - factor * F, column after column, b
 * the constants; p is read for the unknowns of other components only. */
void ut_policy_build (const UtPolicy *policy,
                      const UtSystem *system,
                      const UtComponents *components,
                      size_t component,
                      UtLift lift,
                      double factor,
                      const double *p,
                      double *a,
                      double *b);
