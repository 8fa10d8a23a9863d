/* What must hold of laws, slabs, antennas and noise whatever the figures, and what they refuse. */
#include <math.h>

#include <glib.h>

#include "antenna.h"
#include "exposure.h"
#include "decibel.h"
#include "laws.h"
#include "material.h"
#include "noise.h"
#include "rate.h"
#include "slab-fit.h"
#include "slab.h"

#define UNTOUCHED 12345.5

static void
test_decibels (void)
{
  g_assert_cmpfloat_with_epsilon (ut_db_from_ratio (2), 3.0103, 1e-4);
  g_assert_cmpfloat_with_epsilon (ut_mw_from_dbm (20), 100, 1e-12);
  for (double db = -390; db <= 390; db += 13)
    g_assert_cmpfloat_with_epsilon (ut_db_from_ratio (ut_ratio_from_db (db)), db, 1e-10);
}

static void
test_law_table (void)
{
  UtLawKind kind = UT_LAW_LOG_DISTANCE;

  g_assert_cmpint (ut_law_find ("free-space", &kind), ==, UT_RADIO_OK);
  g_assert_cmpint (kind, ==, UT_LAW_FREE_SPACE);
  g_assert_cmpint (ut_law_find ("no such law", &kind), ==, UT_RADIO_UNKNOWN);
  g_assert_cmpint (kind, ==, UT_LAW_FREE_SPACE);
  g_assert_cmpstr (ut_law_name (UT_LAW_LOG_DISTANCE), ==, "log-distance");
  g_assert_nonnull (ut_law_source (UT_LAW_LOG_DISTANCE));
  g_assert_null (ut_law_name ((UtLawKind) 99));
}

static double
loss_db (UtLaw law, double frequency_hz, double distance_m)
{
  UtLawPath path = { frequency_hz, distance_m };
  double loss = NAN;

  g_assert_cmpint (ut_law_loss_db (&law, &path, &loss), ==, UT_RADIO_OK);
  return loss;
}

static void
test_laws (void)
{
  const UtLaw free_space = { .kind = UT_LAW_FREE_SPACE };
  const UtLaw square = { UT_LAW_LOG_DISTANCE, 2, 1 }, steep = { UT_LAW_LOG_DISTANCE, 3.5, 5 };

  for (double d = 1; d < 1000; d *= 1.7) /* exponent 2 is free space */
    g_assert_cmpfloat_with_epsilon (loss_db (square, 2e9, d), loss_db (free_space, 2e9, d), 1e-9);
  g_assert_cmpfloat_with_epsilon (loss_db (steep, 2e9, 50) - loss_db (steep, 2e9, 5), 35, 1e-9);
  g_assert_cmpfloat_with_epsilon (loss_db (steep, 2e9, 3), loss_db (free_space, 2e9, 5), 1e-9); /* not below the reference */
  g_assert_cmpfloat_with_epsilon (loss_db (free_space, 2e9, 0), loss_db (free_space, 2e9, 1), 1e-12); /* not below a metre */
}

static void
test_law_refusals (void)
{
  const UtLaw good = { UT_LAW_LOG_DISTANCE, 2, 1 };
  const UtLawPath path = { 1e9, 10 };
  const UtLaw bad_laws[] = { { UT_LAW_LOG_DISTANCE, 0, 1 }, { UT_LAW_LOG_DISTANCE, NAN, 1 }, { UT_LAW_LOG_DISTANCE, 2, 0 }, { UT_LAW_LOG_DISTANCE, 2, INFINITY } };
  const UtLawPath bad_paths[] = { { 0, 10 }, { NAN, 10 }, { 1e9, -1 }, { 1e9, NAN }, { 1e9, INFINITY } };
  const UtLaw unknown = { .kind = (UtLawKind) 99 };
  double loss = UNTOUCHED;

  for (gsize i = 0; i < G_N_ELEMENTS (bad_laws); i++)
    g_assert_cmpint (ut_law_loss_db (&bad_laws[i], &path, &loss), ==, UT_RADIO_INVALID);
  for (gsize i = 0; i < G_N_ELEMENTS (bad_paths); i++)
    g_assert_cmpint (ut_law_loss_db (&good, &bad_paths[i], &loss), ==, UT_RADIO_INVALID);
  g_assert_cmpint (ut_law_loss_db (&unknown, &path, &loss), ==, UT_RADIO_UNKNOWN);
  g_assert_cmpfloat (loss, ==, UNTOUCHED);
}

static UtLayer
random_layer (GRand *rand, gboolean lossless)
{
  return (UtLayer){
    g_rand_double_range (rand, 1, 8),
    lossless ? 0 : exp (g_rand_double_range (rand, -7, 2)),
    exp (g_rand_double_range (rand, log (1e-3), log (0.4))),
  };
}

static double
wave_loss_db (const UtLayer *layers, gsize n, double frequency_hz, double angle, UtWave wave, double *reflected)
{
  UtSlabLayer prepared[16];
  UtSlab slab;
  double complex reflection;
  double loss = NAN;

  g_assert_cmpint (ut_slab_prepare (layers, n, frequency_hz, prepared, &slab), ==, UT_RADIO_OK);
  g_assert_cmpint (ut_slab_wave_loss_db (&slab, angle, wave, 1, &loss, &reflection), ==, UT_RADIO_OK);
  *reflected = cabs (reflection) * cabs (reflection);
  return loss;
}

static void
test_slab_properties (void)
{
  g_autoptr (GRand) rand = g_rand_new_with_seed (2040);

  for (int i = 0; i < 2000; i++)
    {
      gboolean lossless = i % 2;
      gsize n = (gsize) g_rand_int_range (rand, 1, 6);
      UtLayer layers[6], turned[6], split[7];
      double frequency_hz = exp (g_rand_double_range (rand, log (1e8), log (1e11)));
      double angle = g_rand_double_range (rand, 0, 1.5), r, ignored;
      UtWave wave = i % 3 ? UT_WAVE_TE : UT_WAVE_TM;

      for (gsize k = 0; k < n; k++)
        layers[k] = turned[n - 1 - k] = split[k + 1] = random_layer (rand, lossless);
      split[0] = split[1];
      split[0].thickness_m *= 0.25;
      split[1].thickness_m *= 0.75;
      double loss = wave_loss_db (layers, n, frequency_hz, angle, wave, &r);

      g_assert_true (isfinite (loss));
      g_assert_cmpfloat (loss, >=, -1e-9);
      if (lossless) /* what is not transmitted is reflected */
        g_assert_cmpfloat_with_epsilon (ut_ratio_from_db (-loss) + r, 1, 1e-9);
      /* The same from the other side, and with a layer cut in two. */
      g_assert_cmpfloat_with_epsilon (wave_loss_db (turned, n, frequency_hz, angle, wave, &ignored), loss, 1e-6 * (1 + loss));
      g_assert_cmpfloat_with_epsilon (wave_loss_db (split, n + 1, frequency_hz, angle, wave, &ignored), loss, 1e-6 * (1 + loss));
    }
}

static void
test_slab_air (void)
{
  const UtLayer air = { 1, 0, 0.3 };
  double r;

  for (double angle = 0; angle < 1.5; angle += 0.1)
    {
      g_assert_cmpfloat_with_epsilon (wave_loss_db (&air, 1, 3e9, angle, UT_WAVE_TE, &r), 0, 1e-9);
      g_assert_cmpfloat_with_epsilon (wave_loss_db (&air, 1, 3e9, angle, UT_WAVE_TM, &r), 0, 1e-9);
    }
}

/* Thick metal, grazing rays and the ends of the frequency range stay finite, and more metal never loses less. */
static void
test_slab_safety (void)
{
  static const double frequencies_hz[] = { 1e8, 1e9, 1e10, 1e11 };

  for (gsize f = 0; f < G_N_ELEMENTS (frequencies_hz); f++)
    {
      double before = 0;

      for (double thickness_m = 1e-6; thickness_m <= 0.1; thickness_m *= 10)
        {
          UtLayer metal = { 1, 1e7, thickness_m };
          double r, loss = wave_loss_db (&metal, 1, frequencies_hz[f], 0, UT_WAVE_TE, &r);

          g_assert_true (isfinite (loss));
          g_assert_cmpfloat (loss, >, before);
          before = loss;
          for (int wave = 0; wave < 2; wave++)
            {
              double grazing = wave_loss_db (&metal, 1, frequencies_hz[f], G_PI / 2, (UtWave) wave, &r);
              g_assert_true (isfinite (grazing) && isfinite (r));
            }
        }
    }
}

static void
test_slab_averaged (void)
{
  g_autoptr (GRand) rand = g_rand_new_with_seed (31);

  for (int i = 0; i < 300; i++)
    {
      UtLayer layers[3] = { random_layer (rand, FALSE), random_layer (rand, FALSE), random_layer (rand, FALSE) };
      UtSlabLayer prepared[3];
      UtSlab slab;
      UtSlabLoss te, tm, mixed, averaged, steep;
      double angle = g_rand_double_range (rand, 0, 1.2), sum = 0;

      g_assert_cmpint (ut_slab_prepare (layers, 3, 3.6e9, prepared, &slab), ==, UT_RADIO_OK);
      ut_slab_evaluate (&slab, angle, 1, false, &te);
      ut_slab_evaluate (&slab, angle, 0, false, &tm);
      ut_slab_evaluate (&slab, angle, 0.5, false, &mixed);
      g_assert_cmpfloat_with_epsilon (ut_ratio_from_db (-mixed.loss_db),
                                      (ut_ratio_from_db (-te.loss_db) + ut_ratio_from_db (-tm.loss_db)) / 2,
                                      1e-12);
      /* The mean of 31 transmissions, counted here by hand. */
      ut_slab_evaluate (&slab, angle, 1, true, &averaged);
      for (int k = 0; k <= 30; k++)
        {
          double loss;
          ut_slab_wave_loss_db (&slab, angle, UT_WAVE_TE, 0.85 + 0.01 * k, &loss, NULL);
          sum += ut_ratio_from_db (-loss);
        }
      g_assert_cmpfloat_with_epsilon (averaged.loss_db, -ut_db_from_ratio (sum / 31), 1e-9);
      g_assert_cmpfloat (averaged.loss_min_db, <=, averaged.loss_db + 1e-12);
      g_assert_cmpfloat (averaged.loss_max_db, >=, averaged.loss_db - 1e-12);
      /* No steeper than 75 degrees. */
      ut_slab_evaluate (&slab, 75 * G_PI / 180, 1, true, &averaged);
      ut_slab_evaluate (&slab, 89 * G_PI / 180, 1, true, &steep);
      g_assert_cmpfloat (averaged.loss_db, ==, steep.loss_db);
    }
}

static void
test_slab_refusals (void)
{
  const UtLayer bad[] = { { 0.5, 0, 1 }, { NAN, 0, 1 }, { 2, -1, 1 }, { 2, NAN, 1 }, { 2, 0, 0 }, { 2, 0, INFINITY } };
  const UtLayer good = { 2, 0, 0.1 };
  UtSlabLayer prepared;
  UtSlab slab;
  UtSlabLoss loss = { UNTOUCHED, UNTOUCHED, UNTOUCHED };
  double complex r, t;

  for (gsize i = 0; i < G_N_ELEMENTS (bad); i++)
    g_assert_cmpint (ut_slab_prepare (&bad[i], 1, 1e9, &prepared, &slab), ==, UT_RADIO_INVALID);
  g_assert_cmpint (ut_slab_prepare (&good, 0, 1e9, &prepared, &slab), ==, UT_RADIO_INVALID);
  g_assert_cmpint (ut_slab_prepare (&good, 1, NAN, &prepared, &slab), ==, UT_RADIO_INVALID);
  g_assert_cmpint (ut_slab_prepare (&good, 1, 1e9, &prepared, &slab), ==, UT_RADIO_OK);
  g_assert_cmpint (ut_slab_evaluate (&slab, NAN, 1, false, &loss), ==, UT_RADIO_INVALID);
  g_assert_cmpint (ut_slab_evaluate (&slab, 2, 1, true, &loss), ==, UT_RADIO_INVALID);
  g_assert_cmpint (ut_slab_evaluate (&slab, 0, 1.5, false, &loss), ==, UT_RADIO_INVALID);
  g_assert_cmpfloat (loss.loss_db, ==, UNTOUCHED);
  g_assert_cmpint (ut_fresnel (NAN, 0, UT_WAVE_TE, &r, &t), ==, UT_RADIO_INVALID);
}

static void
test_materials (void)
{
  gsize n;
  const UtMaterial *all = ut_materials (&n);
  double permittivity = UNTOUCHED, conductivity = UNTOUCHED;

  g_assert_cmpuint (n, ==, 12);
  for (gsize i = 0; i < n; i++)
    {
      g_assert_true (ut_material_find (all[i].id) == &all[i]);
      g_assert_cmpfloat (all[i].lowest_ghz, <, all[i].highest_ghz);
    }
  g_assert_null (ut_material_find ("cheese"));
  g_assert_cmpint (ut_material_at (all, -1, &permittivity, &conductivity), ==, UT_RADIO_INVALID);
  g_assert_cmpfloat (permittivity, ==, UNTOUCHED);
}

static double
sector_dbi (double azimuth_deg, double downtilt_deg, double x, double y, double z)
{
  const UtAntennaShape shape = { UT_PATTERN_SECTOR, 8, 65, 30 };
  const double direction[3] = { x, y, z };
  double gain = NAN;

  g_assert_cmpint (ut_antenna_gain_dbi (&shape, azimuth_deg, downtilt_deg, direction, &gain), ==, UT_RADIO_OK);
  return gain;
}

static void
test_sector (void)
{
  double rad = G_PI / 180;

  g_assert_cmpfloat_with_epsilon (sector_dbi (90, 0, 1, 0, 0), 8, 1e-9);        /* azimuth is clockwise from +y */
  g_assert_cmpfloat_with_epsilon (sector_dbi (0, 0, sin (32.5 * rad), cos (32.5 * rad), 0), 5, 1e-9); /* half power at half the width */
  g_assert_cmpfloat_with_epsilon (sector_dbi (0, 0, -sin (32.5 * rad), cos (32.5 * rad), 0), 5, 1e-9);
  g_assert_cmpfloat_with_epsilon (sector_dbi (0, 0, 0, cos (15 * rad), sin (15 * rad)), 5, 1e-9);
  g_assert_cmpfloat_with_epsilon (sector_dbi (0, 10, 0, cos (10 * rad), -sin (10 * rad)), 8, 1e-9); /* downtilt looks down */
  g_assert_cmpfloat_with_epsilon (sector_dbi (0, 0, 0, -1, 0), 8 - 30, 1e-9);   /* behind */
  g_assert_cmpfloat_with_epsilon (sector_dbi (30, 20, 0, 0, 0), sector_dbi (30, 20, 0, 0, -1), 1e-12); /* no direction: straight down */
  for (int turn = 0; turn < 360; turn += 17) /* turning antenna and direction together changes nothing */
    {
      double x = 0.3, y = 0.8, z = -0.2, a = turn * rad;

      g_assert_cmpfloat_with_epsilon (sector_dbi (25 + turn, 12, cos (a) * x + sin (a) * y, -sin (a) * x + cos (a) * y, z),
                                      sector_dbi (25, 12, x, y, z),
                                      1e-9);
    }
}

static void
test_antenna_refusals (void)
{
  const UtAntennaShape bad = { UT_PATTERN_SECTOR, 8, 0, 65 }, good = { UT_PATTERN_ISOTROPIC, 2, 0, 0 };
  const double ahead[3] = { 0, 1, 0 }, nowhere[3] = { NAN, 0, 0 };
  double gain = UNTOUCHED;

  g_assert_cmpint (ut_antenna_gain_dbi (&bad, 0, 0, ahead, &gain), ==, UT_RADIO_INVALID);
  g_assert_cmpint (ut_antenna_gain_dbi (&good, NAN, 0, ahead, &gain), ==, UT_RADIO_INVALID);
  g_assert_cmpint (ut_antenna_gain_dbi (&good, 0, 91, ahead, &gain), ==, UT_RADIO_INVALID);
  g_assert_cmpint (ut_antenna_gain_dbi (&good, 0, 0, nowhere, &gain), ==, UT_RADIO_INVALID);
  g_assert_cmpfloat (gain, ==, UNTOUCHED);
  g_assert_cmpint (ut_antenna_gain_dbi (&good, 700, -90, ahead, &gain), ==, UT_RADIO_OK);
  g_assert_cmpfloat (gain, ==, 2);
}

static void
test_noise_refusals (void)
{
  double noise = UNTOUCHED;

  g_assert_cmpint (ut_noise_dbm (0, 1e6, 5, &noise), ==, UT_RADIO_INVALID);
  g_assert_cmpint (ut_noise_dbm (290, 0, 5, &noise), ==, UT_RADIO_INVALID);
  g_assert_cmpint (ut_noise_dbm (290, 1e6, -1, &noise), ==, UT_RADIO_INVALID);
  g_assert_cmpint (ut_noise_dbm (290, NAN, 1, &noise), ==, UT_RADIO_INVALID);
  g_assert_cmpfloat (noise, ==, UNTOUCHED);
}

#define RAD_PER_DEG (G_PI / 180)

/* ---- antennas, rates and fits ---- */

static double
dipole_dbi (double elevation_rad)
{
  const UtAntennaShape shape = { .pattern = UT_PATTERN_DIPOLE };
  double gain_dbi = NAN;

  g_assert_cmpint (ut_antenna_gain_dbi (&shape, 77, 30, (double[]){ 3 * cos (elevation_rad), 0, 3 * sin (elevation_rad) }, &gain_dbi), ==, UT_RADIO_OK);
  return gain_dbi;
}

/* What a lossless antenna radiates in all directions together is what it is fed: the mean gain over the sphere is 1.  The half-wave dipole's
 * half-power width is 78 degrees (any handbook of antennas; from memory). */
static void
test_dipole (void)
{
  const int n = 20000;
  double sum = 0;

  for (int k = 0; k < n; k++)
    sum += pow (10, dipole_dbi (asin (-1 + (2 * k + 1.0) / n)) / 10) / n;
  g_assert_cmpfloat_with_epsilon (sum, 1, 2e-3);
  g_assert_cmpfloat (dipole_dbi (0), ==, UT_DIPOLE_DBI);
  g_assert_cmpfloat_with_epsilon (dipole_dbi (39 * RAD_PER_DEG), UT_DIPOLE_DBI - 3.01, 0.02);
  g_assert_cmpfloat_with_epsilon (dipole_dbi (90 * RAD_PER_DEG), UT_DIPOLE_DBI - 30, 1e-9);
}

/* Cuts taken of a sector give the sector back. */
static void
test_cuts (void)
{
  const UtAntennaShape sector = { .pattern = UT_PATTERN_SECTOR, .gain_dbi = 8, .beamwidth_h_deg = 65, .beamwidth_v_deg = 30 };
  double horizontal[720], vertical[361];
  UtAntennaShape cuts = { .pattern = UT_PATTERN_CUTS, .horizontal_dbi = horizontal, .n_horizontal = 720, .vertical_dbi = vertical, .n_vertical = 361 };
  GRand *rand = g_rand_new_with_seed (9);

  for (int k = 0; k < 720; k++)
    g_assert_cmpint (ut_antenna_gain_dbi (&sector, 0, 0, (double[]){ sin (k / 2.0 * RAD_PER_DEG), cos (k / 2.0 * RAD_PER_DEG), 0 }, &horizontal[k]), ==, UT_RADIO_OK);
  for (int k = 0; k < 361; k++)
    {
      double up = (k / 2.0 - 90) * RAD_PER_DEG;

      g_assert_cmpint (ut_antenna_gain_dbi (&sector, 0, 0, (double[]){ 0, fmax (cos (up), 1e-12), sin (up) }, &vertical[k]), ==, UT_RADIO_OK);
    }
  g_assert_cmpfloat (ut_antenna_peak_dbi (&cuts), ==, 8);
  for (int trial = 0; trial < 2000; trial++)
    {
      double direction[3] = { g_rand_double_range (rand, -1, 1), g_rand_double_range (rand, -1, 1), g_rand_double_range (rand, -1, 1) }, a = NAN, b = NAN;
      double azimuth = g_rand_double_range (rand, -200, 400), tilt = g_rand_double_range (rand, -90, 90);

      ut_antenna_gain_dbi (&sector, azimuth, tilt, direction, &a);
      g_assert_cmpint (ut_antenna_gain_dbi (&cuts, azimuth, tilt, direction, &b), ==, UT_RADIO_OK);
      g_assert_cmpfloat_with_epsilon (a, b, 0.02);
    }
  cuts.n_vertical = 1;
  double untouched = 5;
  g_assert_cmpint (ut_antenna_gain_dbi (&cuts, 0, 0, (double[]){ 0, 1, 0 }, &untouched), ==, UT_RADIO_INVALID);
  g_assert_cmpfloat (untouched, ==, 5);
  g_rand_free (rand);
}

/* 3GPP TS 38.101-1 table 5.3.2-1: no channel's resource blocks fill more than 99 % of it, and twice the sub-carriers take about half the blocks. */
static void
test_channels (void)
{
  static const double widths[] = { 5, 10, 15, 20, 25, 30, 35, 40, 45, 50, 60, 70, 80, 90, 100 };

  for (gsize i = 0; i < G_N_ELEMENTS (widths); i++)
    for (int khz = 15; khz <= 60; khz *= 2)
      {
        unsigned blocks = ut_resource_blocks (widths[i], khz);

        if (blocks == 0)
          {
            g_assert_true ((khz == 15 && widths[i] > 50) || (khz == 60 && widths[i] < 10));
            continue;
          }
        g_assert_cmpfloat (ut_occupied_hz (blocks, khz), <, 0.99e6 * widths[i]);
        g_assert_cmpfloat (ut_occupied_hz (blocks, khz), >, 0.79e6 * widths[i] - 12e3 * khz);
        if (khz < 60 && ut_resource_blocks (widths[i], 2 * khz) > 0)
          g_assert_cmpint (ABS ((int) blocks - 2 * (int) ut_resource_blocks (widths[i], 2 * khz)), <=, 6);
      }
  /* Published: 51 blocks of 30 kHz in 20 MHz are 18.36 MHz, 273 in 100 MHz are 98.28 MHz. */
  g_assert_cmpfloat_with_epsilon (ut_occupied_hz (ut_resource_blocks (20, 30), 30), 18.36e6, 1);
  g_assert_cmpfloat_with_epsilon (ut_occupied_hz (ut_resource_blocks (100, 30), 30), 98.28e6, 1);
  g_assert_cmpuint (ut_resource_blocks (7, 30), ==, 0);
  g_assert_cmpfloat_with_epsilon (ut_element_dbm (0, 51), -27.868, 1e-3);
}

static void
test_shannon_there_and_back (void)
{
  for (double efficiency = 0.09; efficiency <= 4.4; efficiency += 0.01)
    {
      double sinr_db = NAN;

      g_assert_cmpint (ut_shannon_sinr_db (&ut_shannon_down, efficiency, &sinr_db), ==, UT_RADIO_OK);
      g_assert_cmpfloat_with_epsilon (ut_shannon_efficiency (&ut_shannon_down, sinr_db), efficiency, 1e-12);
      g_assert_cmpuint (ut_cqi_for_efficiency (efficiency), >=, 1);
      g_assert_cmpfloat (ut_cqis[ut_cqi_for_efficiency (efficiency) - 1].bit_s_hz, >=, efficiency);
    }
  g_assert_cmpuint (ut_cqi_for_efficiency (5.6), ==, 0);
}

/* The series says what averaging says. */
static void
test_fit (void)
{
  static const struct { const char *material[3]; double thickness_m[3]; gsize n; } stacks[] = {
    { { "concrete" }, { 0.2 }, 1 }, { { "plasterboard", "air", "plasterboard" }, { 0.0125, 0.075, 0.0125 }, 3 },
    { { "glass", "air", "glass" }, { 0.006, 0.016, 0.006 }, 3 }, { { "chipboard" }, { 0.02 }, 1 }, { { "brick" }, { 0.1 }, 1 }, { { "metal" }, { 0.001 }, 1 },
  };
  GRand *rand = g_rand_new_with_seed (4);
  guint fitted = 0;

  for (gsize i = 0; i < G_N_ELEMENTS (stacks); i++)
    for (int ghz = 1; ghz <= 7; ghz += 3)
      for (int te = 0; te <= 2; te++)
        {
          UtLayer layers[3];
          UtSlabLayer prepared[3];
          UtSlab slab;
          UtSlabFit fit;

          for (gsize k = 0; k < stacks[i].n; k++)
            {
              layers[k].thickness_m = stacks[i].thickness_m[k];
              ut_material_at (ut_material_find (stacks[i].material[k]), ghz * 1e9, &layers[k].relative_permittivity, &layers[k].conductivity_s_m);
            }
          ut_slab_prepare (layers, stacks[i].n, ghz * 1e9, prepared, &slab);
          ut_slab_fit (&slab, te / 2.0, &fit);
          fitted += fit.n > 0;
          for (int trial = 0; fit.n > 0 && trial < 200; trial++)
            {
              double angle = g_rand_double_range (rand, 0, G_PI / 2);
              UtSlabLoss loss;

              ut_slab_evaluate (&slab, angle, te / 2.0, true, &loss);
              g_assert_cmpfloat_with_epsilon (ut_slab_fit_loss_db (&fit, angle), loss.loss_db, 1e-3);
            }
        }
  g_assert_cmpuint (fitted, >=, 45);
  g_rand_free (rand);
}

/* Nothing is stated below 30 MHz; the near field is the least there is. */
static void
test_exposure_edges (void)
{
  double distance_m = 7;
  UtExposureLimit governing;

  g_assert_cmpint (ut_compliance_distance_m (30, 20e6, &distance_m, &governing), ==, UT_RADIO_UNKNOWN);
  g_assert_cmpfloat (distance_m, ==, 7);
  g_assert_cmpint (ut_compliance_distance_m (-30, 900e6, &distance_m, &governing), ==, UT_RADIO_OK);
  g_assert_true (governing == UT_EXPOSURE_NEAR_FIELD && fabs (distance_m - 0.0530) < 1e-4);
  g_assert_cmpint (ut_compliance_distance_m (24, 3600e6, &distance_m, &governing), ==, UT_RADIO_OK);
  g_assert_cmpfloat_with_epsilon (distance_m, 0.0447, 5e-5);
  g_assert_cmpint (ut_compliance_distance_m (40, 900e6, &distance_m, &governing), ==, UT_RADIO_OK);
  g_assert_cmpstr (ut_exposure_limit_name (governing), ==, "ICNIRP 2020 whole body");
}

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  g_test_add_func ("/decibels", test_decibels);
  g_test_add_func ("/laws/table", test_law_table);
  g_test_add_func ("/laws/figures", test_laws);
  g_test_add_func ("/laws/refusals", test_law_refusals);
  g_test_add_func ("/slab/properties", test_slab_properties);
  g_test_add_func ("/slab/air", test_slab_air);
  g_test_add_func ("/slab/safety", test_slab_safety);
  g_test_add_func ("/slab/averaged", test_slab_averaged);
  g_test_add_func ("/slab/refusals", test_slab_refusals);
  g_test_add_func ("/material", test_materials);
  g_test_add_func ("/antenna/sector", test_sector);
  g_test_add_func ("/antenna/refusals", test_antenna_refusals);
  g_test_add_func ("/noise/refusals", test_noise_refusals);
  g_test_add_func ("/antenna/dipole", test_dipole);
  g_test_add_func ("/antenna/cuts", test_cuts);
  g_test_add_func ("/rate/channels", test_channels);
  g_test_add_func ("/rate/there-and-back", test_shannon_there_and_back);
  g_test_add_func ("/slab/fit", test_fit);
  g_test_add_func ("/exposure/edges", test_exposure_edges);
  return g_test_run ();
}
