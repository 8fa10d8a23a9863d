/* Text at absolute sizes, laid out alike on screen, paper and picture: no hinting, no rounding of glyph places. */
#pragma once

#include <cairo.h>

#include "palette.h"

typedef struct
{
  double size;     /* of the font, in target units */
  gboolean bold;
  double width;    /* > 0: cut with an ellipsis beyond this width; 0: as long as it is */
  gboolean wrap;   /* with width > 0: broken into lines instead */
  gboolean plate;  /* a halo is a plate behind the text instead of an outline: for screens, where it is drawn in every frame */
} UtTextStyle;

/* Size of the text as it will be drawn. height may be NULL. */
void ut_text_extent (const char *text, const UtTextStyle *style, double *width, double *height);

/* Draws with the upper left corner at (x, y).  halo (may be NULL): the text is set off by an outline of this colour.  Returns its height. */
double ut_text_place (cairo_t *cr, const char *text, const UtTextStyle *style, double x, double y, const UtColour *ink, const UtColour *halo);

/* The two above for plain texts on a screen: a halo is a plate. */
void ut_text_draw (cairo_t *cr, const char *text, double x, double y, double size, const UtColour *ink, const UtColour *halo);
double ut_text_width (const char *text, double size);
