/* Pictures under the sketch: taking a file over, and drawing what a plan holds. */
#pragma once

#include <cairo.h>
#include <gio/gio.h>

/* A picture as a plan carries it. */
typedef struct
{
  const char *media_type; /* "image/png" or "image/jpeg"; static */
  GBytes *data;
  int width_px, height_px;
  double width_mm; /* on paper, where the file says so (a page of a PDF); else 0 */
} UtPicture;

void ut_picture_clear (UtPicture *picture);

/* Pages of a PDF; 1 for anything else. */
guint ut_picture_n_pages (GBytes *file);

/* PNG and JPEG are taken over byte for byte; SVG, a page (from 0) of a PDF, and what else gdk-pixbuf reads become PNG.  FALSE with *error where it is no
 * picture, or has more than 100 million pixels. */
gboolean ut_picture_import (GBytes *file, guint page, UtPicture *picture, GError **error);

/* The picture of these bytes at least `width_px` wide, where it is that wide itself; NULL when it is none.  The last one asked for is kept, with smaller versions
 * of itself.  Transfer full. */
cairo_surface_t *ut_picture_surface (GBytes *data, double width_px);
