/* Spectral radius of the interference system (docs/methods.md, "Spectral radius"). */
#pragma once

#include "system.h"

typedef struct
{
  double value;        /* within lower .. upper */
  double lower, upper; /* Collatz-Wielandt bounds */
} UtRadius;

/* The largest spectral radius over the system's choices of piece and of group member, with limits,
 * minima, levels and constants lifted; 0 where no strongly connected component has two unknowns
 * or an unknown that disturbs itself.  The bounds allow for the rounding of their own evaluation;
 * they are normally 1e-13 apart (relative). Returns UT_POWER_OK; UT_POWER_UNSETTLED (bounds valid
 * but more than 1e-9 apart: the eigenvector does not fit the range of doubles); UT_POWER_INVALID;
 * UT_POWER_NO_MEMORY. */
UtPowerStatus ut_spectral_radius (const UtSystem *system, UtRadius *radius);

/* The same, with the right Perron vector of the first component that has this radius; vector (n_unknowns, may be NULL) is 0 outside it
 * and untouched where the radius is 0. */
UtPowerStatus ut_perron (const UtSystem *system, UtRadius *radius, double *vector);
