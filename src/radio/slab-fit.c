#include "slab-fit.h"

#include <math.h>

#define WITHIN_DB 1e-4

static const double widest_rad = 75 * M_PI / 180;

static double
angle_at (double x)
{
  return widest_rad * (x + 1) / 2;
}

static double
loss_at (const UtSlab *slab, double te_share, double x)
{
  UtSlabLoss loss;

  return ut_slab_evaluate (slab, angle_at (x), te_share, true, &loss) == UT_RADIO_OK ? loss.loss_db : NAN;
}

/* Clenshaw's recurrence; the first coefficient counts half. */
static double
series (const UtSlabFit *fit, double x)
{
  double one = 0, two = 0;

  for (size_t k = fit->n - 1; k > 0; k--)
    {
      double next = 2 * x * one - two + fit->coefficient[k];

      two = one;
      one = next;
    }
  return x * one - two + fit->coefficient[0] / 2;
}

/* Interpolates at the Chebyshev points; a discrete cosine transform by its definition. */
static void
interpolate (const UtSlab *slab, double te_share, UtSlabFit *fit)
{
  double value[UT_SLAB_FIT_MOST];

  for (size_t j = 0; j < fit->n; j++)
    value[j] = loss_at (slab, te_share, cos (M_PI * ((double) j + 0.5) / (double) fit->n));
  for (size_t k = 0; k < fit->n; k++)
    {
      double sum = 0;

      for (size_t j = 0; j < fit->n; j++)
        sum += value[j] * cos (M_PI * (double) k * ((double) j + 0.5) / (double) fit->n);
      fit->coefficient[k] = 2 * sum / (double) fit->n;
    }
}

/* Between the points, and at the ends. */
static bool
is_close (const UtSlab *slab, double te_share, const UtSlabFit *fit)
{
  for (size_t j = 0; j <= fit->n; j++)
    {
      double x = cos (M_PI * (double) j / (double) fit->n);

      if (!(fabs (series (fit, x) - loss_at (slab, te_share, x)) < WITHIN_DB))
        return false;
    }
  return true;
}

void
ut_slab_fit (const UtSlab *slab, double te_share, UtSlabFit *fit)
{
  for (fit->n = 16; fit->n <= UT_SLAB_FIT_MOST; fit->n *= 2)
    {
      interpolate (slab, te_share, fit);
      if (is_close (slab, te_share, fit))
        return;
    }
  fit->n = 0;
}

double
ut_slab_fit_loss_db (const UtSlabFit *fit, double incidence_rad)
{
  return series (fit, 2 * fmin (incidence_rad, widest_rad) / widest_rad - 1);
}
