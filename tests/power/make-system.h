/* Systems for the tests: from a plain description, or random from a seed. */
#pragma once

#include <glib.h>

#include "system.h"

/* Rows of F x + u with one piece a row and one limit an unknown (limits may be NULL: 1e300 each).
 * f is n x n, row after row; entries of 0 make no term. */
void make_linear (UtSystem *system,
                  guint n,
                  const double *f,
                  const double *u,
                  const double *minimum,
                  const double *limit);

/* A link i to its receiver i: F_ij = target g_ij / g_ii, u_i = target noise / g_ii. */
void make_links (UtSystem *system,
                 guint n,
                 const double *gain,
                 double noise,
                 double target,
                 double minimum,
                 double limit);

/* What a random system may hold. */
typedef enum
{
  RANDOM_PIECES = 1 << 0,
  RANDOM_GROUPS = 1 << 1,
  RANDOM_FLOORS = 1 << 2,
  RANDOM_SUMS = 1 << 3,
  RANDOM_SPARSE = 1 << 4,
  RANDOM_WILD = 1 << 5, /* weights over seventeen powers of ten */
  RANDOM_ALL = (1 << 6) - 1,
} RandomKind;

void make_random (UtSystem *system, GRand *rand, guint n, RandomKind kind);

/* The same system with every weight times `weight` and every constant, floors and limits included,
 * times `constant`. */
void make_scaled (UtSystem *system, const UtSystem *from, double weight, double constant);

double log_uniform (GRand *rand, double low, double high);

/* |a / b - 1|, for tolerances. */
double relative_gap (double a, double b);

#define assert_near(a, b, tolerance) g_assert_cmpfloat (relative_gap ((a), (b)), <=, (tolerance))
