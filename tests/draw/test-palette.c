/* The margin colours hold for whoever sees colours otherwise, and on grey paper together with their lines. */
#include <math.h>

#include "palette.h"

/* Simulated dichromacy, severity 1, on linear RGB: Machado, Oliveira, Fernandes, "A Physiologically-based Model for Simulation of Color Vision Deficiency", IEEE
 * TVCG 15 (2009), table 1 (from memory). */
static const double kinds[][3][3] = {
  { { 1, 0, 0 }, { 0, 1, 0 }, { 0, 0, 1 } },
  { { 0.152286, 1.052583, -0.204868 }, { 0.114503, 0.786281, 0.099216 }, { -0.003882, -0.048116, 1.051998 } },
  { { 0.367322, 0.860646, -0.227968 }, { 0.280085, 0.672501, 0.047413 }, { -0.011820, 0.042940, 0.968881 } },
  { { 1.255528, -0.076749, -0.178779 }, { -0.078411, 0.930809, 0.147602 }, { 0.004733, 0.691367, 0.303900 } },
};
static const char *const names[] = { "usual sight", "protanopia", "deuteranopia", "tritanopia" };

/* IEC 61966-2-1. */
static double
linear (double value)
{
  return value <= 0.04045 ? value / 12.92 : pow ((value + 0.055) / 1.055, 2.4);
}

static double
lab_f (double t)
{
  return t > 216.0 / 24389 ? cbrt (t) : (24389.0 / 27 * t + 16) / 116;
}

/* CIE 1976 L*a*b*, D65, as that kind of sight has it. */
static void
lab_of (const UtColour *colour, int kind, double lab[3])
{
  const double rgb[3] = { linear (colour->red), linear (colour->green), linear (colour->blue) };
  static const double to_xyz[3][3] = { { 0.4124, 0.3576, 0.1805 }, { 0.2126, 0.7152, 0.0722 }, { 0.0193, 0.1192, 0.9505 } };
  static const double white[3] = { 0.9505, 1, 1.089 };
  double seen[3], f[3];

  for (int i = 0; i < 3; i++)
    {
      seen[i] = 0;
      for (int k = 0; k < 3; k++)
        seen[i] += kinds[kind][i][k] * rgb[k];
      seen[i] = fmin (fmax (seen[i], 0), 1);
    }
  for (int i = 0; i < 3; i++)
    {
      double xyz = 0;

      for (int k = 0; k < 3; k++)
        xyz += to_xyz[i][k] * seen[k];
      f[i] = lab_f (xyz / white[i]);
    }
  lab[0] = 116 * f[1] - 16;
  lab[1] = 500 * (f[0] - f[1]);
  lab[2] = 200 * (f[1] - f[2]);
}

static double
apart (const UtColour *one, const UtColour *other, int kind)
{
  double a[3], b[3];

  lab_of (one, kind, a);
  lab_of (other, kind, b);
  return sqrt ((a[0] - b[0]) * (a[0] - b[0]) + (a[1] - b[1]) * (a[1] - b[1]) + (a[2] - b[2]) * (a[2] - b[2]));
}

static const UtPalette *const palettes[] = { &ut_palette_paper, &ut_palette_light, &ut_palette_dark, &ut_palette_contrast };

/* Short and met never look alike, nor does a link sink into the sheet. Differences of 10 are seen at a glance (common practice: about 2.3 is just noticeable). */
static void
test_sights (void)
{
  for (gsize p = 0; p < G_N_ELEMENTS (palettes); p++)
    for (int kind = 0; kind < 4; kind++)
      for (int a = UT_MARGIN_FAR_SHORT; a <= UT_MARGIN_EASY; a++)
        {
          g_assert_cmpfloat (apart (&palettes[p]->margin[a], &palettes[p]->sheet, kind), >, 20);
          for (int b = UT_MARGIN_TIGHT; a <= UT_MARGIN_SHORT && b <= UT_MARGIN_EASY; b++)
            {
              double distance = apart (&palettes[p]->margin[a], &palettes[p]->margin[b], kind);

              g_test_message ("palette %u, %s: %d and %d are %.0f apart", (guint) p, names[kind], a, b, distance);
              g_assert_cmpfloat (distance, >, 10);
            }
        }
}

/* Without any colour the lines tell the classes: no two have the same dashes and width. */
static void
test_lines (void)
{
  for (int a = 0; a < UT_N_MARGINS; a++)
    for (int b = a + 1; b < UT_N_MARGINS; b++)
      {
        double dashes_a[4], dashes_b[4], width_a, width_b;
        int n_a, n_b;
        gboolean same;

        ut_margin_line ((UtMarginClass) a, dashes_a, &n_a, &width_a);
        ut_margin_line ((UtMarginClass) b, dashes_b, &n_b, &width_b);
        same = n_a == n_b;
        for (int k = 0; k < n_a && same; k++)
          same = fabs (dashes_a[k] - dashes_b[k]) < 0.1;
        g_assert_false (same);
      }
}

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  g_test_add_func ("/palette/sights", test_sights);
  g_test_add_func ("/palette/lines", test_lines);
  return g_test_run ();
}
