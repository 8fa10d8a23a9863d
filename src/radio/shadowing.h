/* Log-normal shadowing: chances and margins in closed form. */
#pragma once

#include <stddef.h>

#include "radio.h"

/* What a link hears of one other: its share of all that the receiver hears besides its signal (noise has the rest), and how alike the shadowing
 * of its path is to that of the wanted path, and to that of every other one. */
typedef struct
{
  double share;       /* 0..1; all together at most 1 */
  double to_wanted;   /* correlation, -1..1 */
} UtShadowed;

/* Upper tail of the normal distribution and its inverse (0 < probability < 1). */
double ut_normal_tail (double x);
double ut_normal_tail_inverse (double probability);

/* Correlation of two points `distance_m` apart: exp (-d / d_corr) (Gudmundson, Electronics Letters 27(23), 1991). */
double ut_shadow_correlation (double distance_m, double correlation_m);

/* Standard deviation in dB of the difference of two shadowed powers. */
double ut_shadow_difference_db (double one_db, double other_db, double correlation);

/* Standard deviation in dB of the SINR at fixed powers, every path shadowed by sigma_db: first order in the shadowing, that is the interference's own
 * deviation is the mean of its parts' by their shares.  among: correlation of heard[i] and heard[k] at [i * n + k]. */
double ut_shadow_sinr_db (double sigma_db, size_t n, const UtShadowed *heard, const double *among);
