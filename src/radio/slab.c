#include "slab.h"

#include <math.h>

#include "decibel.h"

#define GRAZING_RAD (M_PI / 2 - 1e-6)
#define AVERAGED_MOST_RAD (75 * M_PI / 180)
#define N_SCALINGS 31
#define LOWEST_SCALING 0.85
#define HIGHEST_SCALING 1.15

double complex
ut_complex_permittivity (double relative_permittivity, double conductivity_s_m, double frequency_hz)
{
  return relative_permittivity - I * conductivity_s_m / (2 * M_PI * frequency_hz * UT_VACUUM_PERMITTIVITY_F_M);
}

/* Normal component of the wave number in a medium over that in free space: sqrt (eps - sin^2 t), decaying into the medium. */
static double complex
normal_wave_number (double complex permittivity, double sin2)
{
  double complex root = csqrt (permittivity - sin2);

  /* With eps = eps' - j eps'' a decaying wave has Im <= 0; csqrt gives Re >= 0 and Im of the right sign. */
  return root;
}

UtRadioStatus
ut_fresnel (double complex permittivity, double incidence_rad, UtWave wave, double complex *reflection, double complex *transmission)
{
  double cos_t = cos (incidence_rad), sin_t = sin (incidence_rad);
  double complex root;

  if (!isfinite (creal (permittivity)) || !isfinite (cimag (permittivity)) || !(incidence_rad >= 0 && incidence_rad <= M_PI / 2))
    return UT_RADIO_INVALID;
  root = normal_wave_number (permittivity, sin_t * sin_t);
  if (wave == UT_WAVE_TE)
    {
      *reflection = (cos_t - root) / (cos_t + root);
      *transmission = 2 * cos_t / (cos_t + root);
    }
  else
    {
      *reflection = (permittivity * cos_t - root) / (permittivity * cos_t + root);
      *transmission = 2 * csqrt (permittivity) * cos_t / (permittivity * cos_t + root);
    }
  return UT_RADIO_OK;
}

UtRadioStatus
ut_slab_prepare (const UtLayer *layers, size_t n_layers, double frequency_hz, UtSlabLayer *prepared, UtSlab *slab)
{
  if (n_layers == 0 || !isfinite (frequency_hz) || !(frequency_hz > 0))
    return UT_RADIO_INVALID;
  for (size_t i = 0; i < n_layers; i++)
    if (!isfinite (layers[i].relative_permittivity) || !(layers[i].relative_permittivity >= 1)
        || !isfinite (layers[i].conductivity_s_m) || !(layers[i].conductivity_s_m >= 0) || !isfinite (layers[i].thickness_m)
        || !(layers[i].thickness_m > 0))
      return UT_RADIO_INVALID;
  for (size_t i = 0; i < n_layers; i++)
    {
      prepared[i].permittivity = ut_complex_permittivity (layers[i].relative_permittivity, layers[i].conductivity_s_m, frequency_hz);
      prepared[i].phase_thickness = 2 * M_PI * layers[i].thickness_m * frequency_hz / UT_SPEED_OF_LIGHT_M_S;
    }
  *slab = (UtSlab){ prepared, n_layers };
  return UT_RADIO_OK;
}

/* Plain complex arithmetic: the operators would go through library calls that look for infinities, which cannot occur here. */
typedef struct
{
  double re, im;
} Complex;

static Complex
times (Complex a, Complex b)
{
  return (Complex){ a.re * b.re - a.im * b.im, a.re * b.im + a.im * b.re };
}

static Complex
over (Complex a, Complex b)
{
  double norm = b.re * b.re + b.im * b.im;

  return (Complex){ (a.re * b.re + a.im * b.im) / norm, (a.im * b.re - a.re * b.im) / norm };
}

static Complex
of (double complex z)
{
  return (Complex){ creal (z), cimag (z) };
}

/* Wave admittance of a medium, up to the factor common to all. */
static Complex
admittance (double complex permittivity, double complex normal, UtWave wave)
{
  return wave == UT_WAVE_TE ? of (normal) : over (of (permittivity), of (normal));
}

/* Follows the wave from the far side to the near one.  At each interface the reflection of all that lies behind is known; the
 * transmitted amplitude is gathered as a logarithm.  Only exp (-j 2 q), which decays, is formed. */
UtRadioStatus
ut_slab_wave_loss_db (const UtSlab *slab,
                      double incidence_rad,
                      UtWave wave,
                      double thickness_scale,
                      double *loss_db,
                      double complex *reflection)
{
  double sin_t, cos_t, loss = 0;
  Complex behind = { 0, 0 }; /* reflection just inside the far face, looking on */
  Complex next;              /* admittance of the medium beyond */

  if (!(incidence_rad >= 0 && incidence_rad <= M_PI / 2) || !isfinite (thickness_scale) || !(thickness_scale > 0))
    return UT_RADIO_INVALID;
  incidence_rad = fmin (incidence_rad, GRAZING_RAD);
  sin_t = sin (incidence_rad);
  cos_t = cos (incidence_rad);
  next = wave == UT_WAVE_TE ? (Complex){ cos_t, 0 } : (Complex){ 1 / cos_t, 0 };
  Complex air = next;
  for (size_t i = slab->n_layers + 1; i-- > 0;)
    {
      /* From medium i - 1 (air before the first layer) into medium i: first the interface ... */
      bool first = i == 0;
      double complex normal = 0;
      Complex here;

      if (first)
        here = air;
      else
        {
          normal = normal_wave_number (slab->layers[i - 1].permittivity, sin_t * sin_t);
          here = admittance (slab->layers[i - 1].permittivity, normal, wave);
        }
      Complex sum = { here.re + next.re, here.im + next.im };
      Complex r = over ((Complex){ here.re - next.re, here.im - next.im }, sum);
      Complex t = over ((Complex){ 2 * here.re, 2 * here.im }, sum);
      Complex echo = times (r, behind);
      Complex loop = { 1 + echo.re, echo.im };

      t = over (t, loop);
      loss -= ut_db_from_ratio (t.re * t.re + t.im * t.im);
      behind = over ((Complex){ r.re + behind.re, r.im + behind.im }, loop);
      next = here;
      if (first)
        break;
      /* ... then back through layer i - 1 to its near face. */
      double phase = creal (normal) * slab->layers[i - 1].phase_thickness * thickness_scale;
      double decay = -cimag (normal) * slab->layers[i - 1].phase_thickness * thickness_scale;
      double shrink = exp (-2 * decay);

      loss += 20 * M_LOG10E * decay;
      behind = times (behind, (Complex){ shrink * cos (2 * phase), -shrink * sin (2 * phase) });
    }
  *loss_db = fmin (loss, UT_SLAB_LARGEST_LOSS_DB);
  if (reflection != NULL)
    *reflection = behind.re + I * behind.im;
  return UT_RADIO_OK;
}

/* Loss of the power that is te_share TE and else TM. */
static UtRadioStatus
shared_loss_db (const UtSlab *slab, double incidence_rad, double te_share, double thickness_scale, double *loss_db)
{
  double te_db = 0, tm_db = 0;
  UtRadioStatus status = UT_RADIO_OK;

  if (te_share > 0)
    status = ut_slab_wave_loss_db (slab, incidence_rad, UT_WAVE_TE, thickness_scale, &te_db, NULL);
  if (status == UT_RADIO_OK && te_share < 1)
    status = ut_slab_wave_loss_db (slab, incidence_rad, UT_WAVE_TM, thickness_scale, &tm_db, NULL);
  if (status != UT_RADIO_OK)
    return status;
  if (te_share >= 1)
    *loss_db = te_db;
  else if (te_share <= 0)
    *loss_db = tm_db;
  else
    {
      /* Relative to the smaller loss, so that two opaque waves do not underflow. */
      double least_db = fmin (te_db, tm_db);

      *loss_db = least_db
                 - ut_db_from_ratio (te_share * ut_ratio_from_db (least_db - te_db) + (1 - te_share) * ut_ratio_from_db (least_db - tm_db));
    }
  return UT_RADIO_OK;
}

static UtRadioStatus
averaged_loss (const UtSlab *slab, double incidence_rad, double te_share, UtSlabLoss *loss)
{
  double losses_db[N_SCALINGS], least_db = INFINITY, most_db = -INFINITY, sum = 0;

  incidence_rad = fmin (incidence_rad, AVERAGED_MOST_RAD);
  for (int i = 0; i < N_SCALINGS; i++)
    {
      double scale = LOWEST_SCALING + (HIGHEST_SCALING - LOWEST_SCALING) * i / (N_SCALINGS - 1);
      UtRadioStatus status = shared_loss_db (slab, incidence_rad, te_share, scale, &losses_db[i]);

      if (status != UT_RADIO_OK)
        return status;
      least_db = fmin (least_db, losses_db[i]);
      most_db = fmax (most_db, losses_db[i]);
    }
  for (int i = 0; i < N_SCALINGS; i++)
    sum += ut_ratio_from_db (least_db - losses_db[i]);
  *loss = (UtSlabLoss){ least_db - ut_db_from_ratio (sum / N_SCALINGS), least_db, most_db };
  return UT_RADIO_OK;
}

UtRadioStatus
ut_slab_evaluate (const UtSlab *slab, double incidence_rad, double te_share, bool averaged, UtSlabLoss *loss)
{
  double loss_db;
  UtRadioStatus status;

  if (!(te_share >= 0 && te_share <= 1) || !(incidence_rad >= 0 && incidence_rad <= M_PI / 2))
    return UT_RADIO_INVALID;
  if (averaged)
    return averaged_loss (slab, incidence_rad, te_share, loss);
  status = shared_loss_db (slab, incidence_rad, te_share, 1, &loss_db);
  if (status == UT_RADIO_OK)
    *loss = (UtSlabLoss){ loss_db, loss_db, loss_db };
  return status;
}
