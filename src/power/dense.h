/* Elimination of the dense matrices I - F, and what its pivots prove. */
#pragma once

#include <stdbool.h>
#include <stddef.h>

/* Matrices are n x n, column after column, with no entry above 0 off the diagonal and none above 1
 * (before rounding) on it.
 *
 * Such a matrix is eliminated without exchanging rows: it is a nonsingular M-matrix, that is rho
 * (F) < 1, exactly when every pivot is above 0 (Berman & Plemmons 1979, theorem 6.2.3, leading
 * principal minors), so the pivots decide feasibility.  Off the diagonal, and in the substitutions
 * for a right-hand side >= 0, only numbers of one sign are added: nothing cancels, scaling of the
 * unknowns does not matter, and a solution is never negative.  Exchanging rows, as dgetrf does,
 * would give all this away.
 *
 * A pivot d proves rho (F) >= 1 - d.  Pivots of less than about 4 n units of the last place are
 * rounding and count as 0.
 */

/* Call once at the entry of a solve with up to n unknowns: one BLAS thread below 500, so that
 * threads do not cost more than they bring and sums keep their order.  OpenBLAS keeps this for the
 * process. */
void ut_dense_threads (size_t n);

/* Replaces a by its factors L (unit diagonal) and U.  False: not a nonsingular M-matrix; a is
 * spoilt. */
bool ut_dense_factor (size_t n, double *a);

/* Solves with the factors, b (n x n_columns, >= 0) in place. */
bool ut_dense_solve (size_t n, const double *lu, size_t n_columns, double *b);
