/* Transmission through a layered slab in air (ITU-R P.2040-3, equations (31), (32), (43), (44) and the layered method).
 *
 * A slab is prepared once a frequency and evaluated once a crossing.  Waves inside are followed as decaying exponentials only, with
 * the attenuation kept as a logarithm, so that no thickness, material or angle overflows or underflows. */
#pragma once

#include <complex.h>
#include <stdbool.h>
#include <stddef.h>

#include "radio.h"

/* Every loss is held below this: far more than any measurement can tell from opaque. */
#define UT_SLAB_LARGEST_LOSS_DB 1e6

typedef enum
{
  UT_WAVE_TE, /* electric field perpendicular to the plane of incidence */
  UT_WAVE_TM, /* electric field in the plane of incidence */
} UtWave;

typedef struct
{
  double relative_permittivity; /* >= 1 */
  double conductivity_s_m;      /* >= 0 */
  double thickness_m;           /* > 0 */
} UtLayer;

typedef struct
{
  double loss_db;                  /* of what was asked for */
  double loss_min_db, loss_max_db; /* spread over the scalings; equal to loss_db for a coherent slab */
} UtSlabLoss;

typedef struct
{
  double complex permittivity; /* eps' - j eps'' */
  double phase_thickness;      /* 2 pi d / lambda */
} UtSlabLayer;

typedef struct
{
  const UtSlabLayer *layers; /* the caller's */
  size_t n_layers;
} UtSlab;

/* Complex relative permittivity eps' - j eps'' at frequency_hz (> 0); eps'' = sigma / (2 pi f eps0). */
double complex ut_complex_permittivity (double relative_permittivity, double conductivity_s_m, double frequency_hz);

/* Field reflection and transmission coefficients of the interface air -> medium, equations (31) and (32); incidence_rad
 * 0 .. pi/2 from the normal. */
UtRadioStatus ut_fresnel (double complex permittivity,
                          double incidence_rad,
                          UtWave wave,
                          double complex *reflection,
                          double complex *transmission);

/* Prepares n_layers (>= 1) layers at frequency_hz into `prepared` (room for n_layers, must live as long as the slab). */
UtRadioStatus ut_slab_prepare (const UtLayer *layers, size_t n_layers, double frequency_hz, UtSlabLayer *prepared, UtSlab *slab);

/* Loss of one wave in dB, 0 .. UT_SLAB_LARGEST_LOSS_DB up to rounding; thickness_scale (> 0) multiplies every thickness. At grazing
 * incidence (pi/2) the angle counts as a microradian less.  *reflection (may be NULL): the field's. */
UtRadioStatus ut_slab_wave_loss_db (const UtSlab *slab,
                                    double incidence_rad,
                                    UtWave wave,
                                    double thickness_scale,
                                    double *loss_db,
                                    double complex *reflection);

/* The loss a plan counts.  te_share: share of the power that is TE: 1, 0, or between for the mean of both power transmissions.
 * averaged: mean of the power transmission over 31 equally spaced scalings 0.85 .. 1.15 of all thicknesses, at an angle of at
 * most 75 degrees (common practice); otherwise coherent, at the angle given.  Held to no plan's limit. */
UtRadioStatus ut_slab_evaluate (const UtSlab *slab, double incidence_rad, double te_share, bool averaged, UtSlabLoss *loss);
