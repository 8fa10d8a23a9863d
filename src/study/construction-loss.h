/* What a construction of the plan takes from a wave, for whoever draws or edits it. */
#pragma once

#include "plan.h"

typedef struct
{
  double exact_db;                            /* at the thicknesses as they stand */
  double averaged_db, least_db, most_db;      /* mean and spread over 0.85 .. 1.15 of them */
} UtConstructionLoss;

/* Of a wall at the plan's carrier and polarization, at n angles from its normal; a loss typed in is the same at all. Not held to the plan's limit. */
void ut_construction_losses (const UtPlan *plan, const UtConstruction *construction, const double *incidence_deg, guint n, UtConstructionLoss *losses);
