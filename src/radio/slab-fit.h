/* An averaged slab's loss over the angle as a short series, for plans with many rays. */
#pragma once

#include "slab.h"

#define UT_SLAB_FIT_MOST 256

/* Loss at angle a: a Chebyshev series in it from 0 to 75 degrees, constant beyond. */
typedef struct
{
  size_t n; /* 0: no fit */
  double coefficient[UT_SLAB_FIT_MOST];
} UtSlabFit;

/* Fits the averaged loss so that it is off by less than 1e-4 dB where it was compared, between the fit's own points; n is 0 where no series of that length is. */
void ut_slab_fit (const UtSlab *slab, double te_share, UtSlabFit *fit);

/* incidence_rad 0 .. pi/2; fit->n > 0. */
double ut_slab_fit_loss_db (const UtSlabFit *fit, double incidence_rad);
