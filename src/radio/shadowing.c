#include "shadowing.h"

#include <math.h>

double
ut_normal_tail (double x)
{
  return 0.5 * erfc (x / M_SQRT2);
}

/* By halving on the tail itself: no table of constants to trust. */
double
ut_normal_tail_inverse (double probability)
{
  double low = -40, high = 40;

  for (int round = 0; round < 200 && high - low > 1e-14 * (1 + fabs (low)); round++)
    {
      double middle = 0.5 * (low + high);

      if (ut_normal_tail (middle) > probability)
        low = middle;
      else
        high = middle;
    }
  return 0.5 * (low + high);
}

double
ut_shadow_correlation (double distance_m, double correlation_m)
{
  return exp (-fabs (distance_m) / correlation_m);
}

double
ut_shadow_difference_db (double one_db, double other_db, double correlation)
{
  return sqrt (fmax (one_db * one_db + other_db * other_db - 2 * correlation * one_db * other_db, 0));
}

double
ut_shadow_sinr_db (double sigma_db, size_t n, const UtShadowed *heard, const double *among)
{
  double variance = 1;

  for (size_t i = 0; i < n; i++)
    {
      variance -= 2 * heard[i].share * heard[i].to_wanted;
      for (size_t k = 0; k < n; k++)
        variance += heard[i].share * heard[k].share * among[i * n + k];
    }
  return sigma_db * sqrt (fmax (variance, 0));
}
