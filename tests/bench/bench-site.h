/* The site that is measured: a hall of 120 x 80 m with seeded random rooms. */
#pragma once

#include "plan.h"

#define N_CELLS 20
#define N_TERMINALS 200
#define N_WALLS 250 /* of four pieces */

/* Transfer full. */
const UtPlan *bench_site (void);
