#include "dense.h"

#include <cblas.h>
#include <float.h>
#include <lapacke.h>

/* Columns handled at once.  Below two of these plain loops are as fast as dgetrf or faster (two to
 * three times at 8 and 16, level at 32); above, the block form is within a third of it. */
#define BLOCK 32

void
ut_dense_threads (size_t n)
{
  int threads = n < 500 ? 1 : openblas_get_num_procs ();
  if (openblas_get_num_threads () != threads)
    openblas_set_num_threads (threads);
}

/* Eliminates `columns` columns of a panel with `rows` rows and leading dimension n.  The diagonal
 * block is at its top. */
static bool
factor_panel (size_t rows, size_t columns, size_t n, double *a, double least_pivot)
{
  for (size_t k = 0; k < columns; k++)
    {
      double *column = a + k * n;
      double pivot = column[k];
      if (!(pivot > least_pivot))
        return false;
      double inverse = 1 / pivot;
      for (size_t i = k + 1; i < rows; i++)
        column[i] *= inverse;
      for (size_t j = k + 1; j < columns; j++)
        {
          double *other = a + j * n;
          double head = other[k];
          if (head == 0)
            continue;
          for (size_t i = k + 1; i < rows; i++)
            other[i] -= column[i] * head;
        }
    }
  return true;
}

bool
ut_dense_factor (size_t n, double *a)
{
  double least_pivot = 4 * (double)n * DBL_EPSILON;
  if (n < 2 * BLOCK)
    return factor_panel (n, n, n, a, least_pivot);
  for (size_t k = 0; k < n; k += BLOCK)
    {
      size_t width = n - k < BLOCK ? n - k : BLOCK;
      size_t rest = n - k - width;
      double *corner = a + k * n + k;
      double *right = corner + width * n;
      if (!factor_panel (n - k, width, n, corner, least_pivot))
        return false;
      if (rest == 0)
        break;
      cblas_dtrsm (CblasColMajor,
                   CblasLeft,
                   CblasLower,
                   CblasNoTrans,
                   CblasUnit,
                   (int)width,
                   (int)rest,
                   1,
                   corner,
                   (int)n,
                   right,
                   (int)n);
      cblas_dgemm (CblasColMajor,
                   CblasNoTrans,
                   CblasNoTrans,
                   (int)rest,
                   (int)rest,
                   (int)width,
                   -1,
                   corner + width,
                   (int)n,
                   right,
                   (int)n,
                   1,
                   right + width,
                   (int)n);
    }
  return true;
}

static void
substitute (size_t n, const double *lu, double *b)
{
  for (size_t k = 0; k < n; k++)
    for (size_t i = k + 1; i < n; i++)
      b[i] -= lu[k * n + i] * b[k];
  for (size_t k = n; k-- > 0;)
    {
      b[k] /= lu[k * n + k];
      for (size_t i = 0; i < k; i++)
        b[i] -= lu[k * n + i] * b[k];
    }
}

bool
ut_dense_solve (size_t n, const double *lu, size_t n_columns, double *b)
{
  if (n == 0 || n_columns == 0)
    return true;
  if (n < 2 * BLOCK || n_columns == 1)
    {
      for (size_t j = 0; j < n_columns; j++)
        substitute (n, lu, b + j * n);
      return true;
    }
  return LAPACKE_dtrtrs (
             LAPACK_COL_MAJOR, 'L', 'N', 'U', (int)n, (int)n_columns, lu, (int)n, b, (int)n)
             == 0
         && LAPACKE_dtrtrs (
                LAPACK_COL_MAJOR, 'U', 'N', 'N', (int)n, (int)n_columns, lu, (int)n, b, (int)n)
                == 0;
}
