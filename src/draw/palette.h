/* Colours by meaning. The paper palette is used for everything that leaves the screen. */
#pragma once

#include "study.h"

typedef struct { double red, green, blue; } UtColour;

/* Classes of a link's margin. */
typedef enum { UT_MARGIN_FAR_SHORT, UT_MARGIN_SHORT, UT_MARGIN_TIGHT, UT_MARGIN_EASY, UT_MARGIN_UNKNOWN, UT_N_MARGINS } UtMarginClass;

/* A link that is met with less to spare is tight, one that is short by more is far short. */
#define UT_MARGIN_BORDER_DB 3.0

typedef struct
{
  UtColour sheet, ink, faint_ink, grid, wall, opening, cell, terminal;
  UtColour margin[UT_N_MARGINS];
} UtPalette;

extern const UtPalette ut_palette_paper, ut_palette_light, ut_palette_dark, ut_palette_contrast;

/* The class of a margin; NAN: unknown.  Met counts from UT_MARGIN_MET_DB up, as everywhere. */
UtMarginClass ut_margin_class (double margin_db);

/* The class's line, for a mark of size 1: dash pattern (dashes has room for 4; *n_dashes 0: solid) and width. */
void ut_margin_line (UtMarginClass margin, double dashes[4], int *n_dashes, double *width);

/* What the class says, for the key. */
const char *ut_margin_words (UtMarginClass margin);
