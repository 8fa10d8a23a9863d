/* The site that is measured: a hall of 120 x 80 m with seeded random rooms. */
#pragma once

#include "plan.h"

#define N_WALLS 250 /* of four pieces */

/* Cells on a grid, terminals anywhere.  Transfer full. */
const UtPlan *bench_site (int n_cells, int n_terminals);
