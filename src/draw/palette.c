#include "palette.h"

#include <glib/gi18n-lib.h>

#include <math.h>

#define RGB(hex) { ((hex) >> 16 & 255) / 255.0, ((hex) >> 8 & 255) / 255.0, ((hex) & 255) / 255.0 }

/* The margin colours are two oranges and two blues from M. Okabe & K. Ito, Color Universal Design, 2008 (vermilion, orange, sky blue,
 * blue; values from memory), lightened or darkened for the sheet they lie on. */
#define MARGINS(far_short, short, tight, easy, unknown) { RGB (far_short), RGB (short), RGB (tight), RGB (easy), RGB (unknown) }

const UtPalette ut_palette_paper = {
  RGB (0xffffff), RGB (0x000000), RGB (0x707070), RGB (0xe6e6e6), RGB (0x303030), RGB (0x303030), RGB (0x000000), RGB (0x000000),
  MARGINS (0xd55e00, 0xe69f00, 0x56b4e9, 0x0072b2, 0x808080),
};

const UtPalette ut_palette_light = {
  RGB (0xfcfcfa), RGB (0x1c1c1c), RGB (0x77767b), RGB (0xebebe8), RGB (0x4a4a4a), RGB (0x4a4a4a), RGB (0x1c1c1c), RGB (0x1c1c1c),
  MARGINS (0xd55e00, 0xe69f00, 0x3a9bd6, 0x0072b2, 0x8a8a8a),
};

const UtPalette ut_palette_dark = {
  RGB (0x1e1e22), RGB (0xf2f2f2), RGB (0x9a9996), RGB (0x2c2c31), RGB (0xb8b8b8), RGB (0xb8b8b8), RGB (0xffffff), RGB (0xffffff),
  MARGINS (0xff7f2a, 0xf5b82e, 0x7cc8f5, 0x3f9fe0, 0x909090),
};

const UtPalette ut_palette_contrast = {
  RGB (0xffffff), RGB (0x000000), RGB (0x000000), RGB (0xd0d0d0), RGB (0x000000), RGB (0x000000), RGB (0x000000), RGB (0x000000),
  MARGINS (0xa03c00, 0xb86e00, 0x0080b8, 0x004080, 0x404040),
};

UtMarginClass
ut_margin_class (double margin_db)
{
  if (isnan (margin_db))
    return UT_MARGIN_UNKNOWN;
  if (margin_db >= UT_MARGIN_BORDER_DB)
    return UT_MARGIN_EASY;
  if (margin_db >= UT_MARGIN_MET_DB)
    return UT_MARGIN_TIGHT;
  return margin_db >= -UT_MARGIN_BORDER_DB ? UT_MARGIN_SHORT : UT_MARGIN_FAR_SHORT;
}

void
ut_margin_line (UtMarginClass margin, double dashes[4], int *n_dashes, double *width)
{
  static const struct
  {
    double dashes[4];
    int n;
    double width;
  } lines[] = {
    [UT_MARGIN_FAR_SHORT] = { { 0.25, 0.3 }, 2, 0.34 }, [UT_MARGIN_SHORT] = { { 0.8, 0.35 }, 2, 0.26 },
    [UT_MARGIN_TIGHT] = { { 1.6, 0.3, 0.3, 0.3 }, 4, 0.18 }, [UT_MARGIN_EASY] = { { 0 }, 0, 0.14 },
    [UT_MARGIN_UNKNOWN] = { { 0.1, 0.4 }, 2, 0.1 },
  };

  for (int i = 0; i < 4; i++)
    dashes[i] = lines[margin].dashes[i];
  *n_dashes = lines[margin].n;
  *width = lines[margin].width;
}

const char *
ut_margin_words (UtMarginClass margin)
{
  static const char *const words[] = {
    [UT_MARGIN_FAR_SHORT] = N_ ("short by over 3 dB"),
    [UT_MARGIN_SHORT] = N_ ("short"),
    [UT_MARGIN_TIGHT] = N_ ("met, under 3 dB to spare"),
    [UT_MARGIN_EASY] = N_ ("met, more to spare"),
    [UT_MARGIN_UNKNOWN] = N_ ("no cell"),
  };

  return _ (words[margin]);
}
