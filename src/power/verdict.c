#include "verdict.h"

#include "least.h"

#include <stdlib.h>
#include <string.h>

/* Whether finite powers exist at all does not hang on floors, idle cells or limits.  So one solve
 * with nothing lifted tells interference-limited and feasible from the rest, and a second splits
 * the rest. */
static UtPowerStatus
decide (const UtSystem *system, UtFeasibility *feasibility, double *power)
{
  UtPowerStatus status = ut_least_powers (system, 1, UT_LIFT_NOTHING, power, NULL);
  if (status == UT_POWER_UNBOUNDED)
    {
      *feasibility = UT_INTERFERENCE_LIMITED;
      return UT_POWER_OK;
    }
  if (status == UT_POWER_OK)
    {
      *feasibility = system->minimum_above_limit ? UT_MINIMUM_LIMITED : UT_FEASIBLE;
      return UT_POWER_OK;
    }
  if (status != UT_POWER_LIMIT)
    return status;
  status = ut_least_powers (system, 1, UT_LIFT_MINIMA | UT_LIFT_IDLE, power, NULL);
  if (status != UT_POWER_OK && status != UT_POWER_LIMIT)
    return status;
  *feasibility = status == UT_POWER_OK ? UT_MINIMUM_LIMITED : UT_POWER_LIMITED;
  return UT_POWER_OK;
}

UtPowerStatus
ut_feasibility (const UtSystem *system, UtFeasibility *feasibility, double *power)
{
  size_t n = system->n_unknowns;
  double *least = malloc ((n + 1) * sizeof *least);
  if (least == NULL)
    return UT_POWER_NO_MEMORY;
  UtFeasibility found = UT_FEASIBLE;
  UtPowerStatus status = decide (system, &found, least);
  if (status == UT_POWER_OK)
    {
      *feasibility = found;
      if (found == UT_FEASIBLE && power != NULL && n > 0)
        memcpy (power, least, n * sizeof *power);
    }
  free (least);
  return status;
}
