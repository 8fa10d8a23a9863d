#include "picture.h"

#include <math.h>
#include <string.h>

#include <gdk-pixbuf/gdk-pixbuf.h>
#include <poppler.h>

/* Dots an inch at which a vector picture is drawn, and the longest side that gives. */
#define DOTS_INCH 200.0
#define MOST_PX 8000.0
#define MOST_PIXELS 100e6
#define MM_INCH 25.4
#define POINTS_INCH 72.0

void
ut_picture_clear (UtPicture *picture)
{
  g_clear_pointer (&picture->data, g_bytes_unref);
}

static gboolean
begins_with (GBytes *file, const char *signature, gsize length)
{
  gsize size;
  const char *data = g_bytes_get_data (file, &size);

  return size >= length && memcmp (data, signature, length) == 0;
}

static gboolean
is_pdf (GBytes *file)
{
  return begins_with (file, "%PDF-", 5);
}

guint
ut_picture_n_pages (GBytes *file)
{
  PopplerDocument *document = is_pdf (file) ? poppler_document_new_from_bytes (file, NULL, NULL) : NULL;
  guint n_pages = document != NULL ? (guint) MAX (poppler_document_get_n_pages (document), 1) : 1;

  g_clear_object (&document);
  return n_pages;
}

static cairo_status_t
write_cb (void *bytes, const unsigned char *data, unsigned int length)
{
  g_byte_array_append (bytes, data, length);
  return CAIRO_STATUS_SUCCESS;
}

static GBytes *
png_of (cairo_surface_t *surface)
{
  GByteArray *bytes = g_byte_array_new ();

  cairo_surface_write_to_png_stream (surface, write_cb, bytes);
  return g_byte_array_free_to_bytes (bytes);
}

/* At DOTS_INCH, on white. */
static void
draw_page (PopplerPage *from, UtPicture *picture)
{
  double width_pt, height_pt, scale;
  cairo_surface_t *surface;
  cairo_t *cr;

  poppler_page_get_size (from, &width_pt, &height_pt);
  scale = fmin (DOTS_INCH / POINTS_INCH, MOST_PX / fmax (width_pt, height_pt));
  surface = cairo_image_surface_create (CAIRO_FORMAT_RGB24, (int) ceil (width_pt * scale), (int) ceil (height_pt * scale));
  cr = cairo_create (surface);
  cairo_set_source_rgb (cr, 1, 1, 1);
  cairo_paint (cr);
  cairo_scale (cr, scale, scale);
  poppler_page_render (from, cr);
  cairo_destroy (cr);
  *picture = (UtPicture){ "image/png", png_of (surface), cairo_image_surface_get_width (surface), cairo_image_surface_get_height (surface), width_pt / POINTS_INCH * MM_INCH };
  cairo_surface_destroy (surface);
}

static gboolean
import_page (GBytes *file, guint page, UtPicture *picture, GError **error)
{
  PopplerDocument *document = poppler_document_new_from_bytes (file, NULL, error);
  PopplerPage *from = document != NULL && page < (guint) MAX (poppler_document_get_n_pages (document), 0) ? poppler_document_get_page (document, (int) page) : NULL;
  gboolean found = from != NULL;

  if (found)
    draw_page (from, picture);
  else if (document != NULL)
    g_set_error (error, G_IO_ERROR, G_IO_ERROR_NOT_FOUND, "the document has no page %u; expected 1 to %d", page + 1, poppler_document_get_n_pages (document));
  g_clear_object (&from);
  g_clear_object (&document);
  return found;
}

/* A drawing without pixels of its own gets some. */
static GdkPixbuf *
load (GBytes *file, gboolean vector, GError **error)
{
  g_autoptr (GInputStream) stream = g_memory_input_stream_new_from_bytes (file);

  return vector ? gdk_pixbuf_new_from_stream_at_scale (stream, 4000, 4000, TRUE, NULL, error) : gdk_pixbuf_new_from_stream (stream, NULL, error);
}

static gboolean
is_vector (GBytes *file)
{
  gsize size;
  const char *data = g_bytes_get_data (file, &size);

  return g_strstr_len (data, (gssize) MIN (size, 4096), "<svg") != NULL;
}

gboolean
ut_picture_import (GBytes *file, guint page, UtPicture *picture, GError **error)
{
  gboolean is_png = begins_with (file, "\x89PNG\r\n\x1a\n", 8), is_jpeg = begins_with (file, "\xff\xd8\xff", 3);
  g_autoptr (GdkPixbuf) pixbuf = NULL;
  char *png;
  gsize length;

  if (is_pdf (file))
    return import_page (file, page, picture, error);
  pixbuf = load (file, is_vector (file), error);
  if (pixbuf == NULL)
    return FALSE;
  *picture = (UtPicture){ is_jpeg ? "image/jpeg" : "image/png", NULL, gdk_pixbuf_get_width (pixbuf), gdk_pixbuf_get_height (pixbuf), 0 };
  if ((double) picture->width_px * picture->height_px > MOST_PIXELS)
    {
      g_set_error (error, G_IO_ERROR, G_IO_ERROR_FAILED, "%d x %d pixels; expected 100 million at most", picture->width_px, picture->height_px);
      return FALSE;
    }
  if (is_png || is_jpeg)
    picture->data = g_bytes_ref (file);
  else if (gdk_pixbuf_save_to_buffer (pixbuf, &png, &length, "png", error, NULL))
    picture->data = g_bytes_new_take (png, length);
  return picture->data != NULL;
}

/* ---- drawing ---- */

/* A picture of cairo's from one of gdk-pixbuf's; NULL when the data is no picture. */
static cairo_surface_t *
decode (GBytes *data)
{
  g_autoptr (GdkPixbuf) pixbuf = load (data, FALSE, NULL);
  cairo_surface_t *surface;
  int n_channels, from_stride, to_stride, width, height;
  const guchar *from;
  guchar *to;

  if (pixbuf == NULL)
    return NULL;
  width = gdk_pixbuf_get_width (pixbuf);
  height = gdk_pixbuf_get_height (pixbuf);
  surface = cairo_image_surface_create (gdk_pixbuf_get_has_alpha (pixbuf) ? CAIRO_FORMAT_ARGB32 : CAIRO_FORMAT_RGB24, width, height);
  n_channels = gdk_pixbuf_get_n_channels (pixbuf);
  from = gdk_pixbuf_read_pixels (pixbuf);
  from_stride = gdk_pixbuf_get_rowstride (pixbuf);
  cairo_surface_flush (surface);
  to = cairo_image_surface_get_data (surface);
  to_stride = cairo_image_surface_get_stride (surface);
  for (int y = 0; to != NULL && y < height; y++)
    for (int x = 0; x < width; x++)
      {
        const guchar *pixel = from + y * from_stride + x * n_channels;
        guint alpha = n_channels == 4 ? pixel[3] : 255;

        ((guint32 *) (void *) (to + y * to_stride))[x] = alpha << 24 | (pixel[0] * alpha / 255) << 16 | (pixel[1] * alpha / 255) << 8 | pixel[2] * alpha / 255;
      }
  cairo_surface_mark_dirty (surface);
  return surface;
}

/* Half as wide and high: four pixels become one. */
static cairo_surface_t *
halved (cairo_surface_t *surface)
{
  int width = MAX (cairo_image_surface_get_width (surface) / 2, 1), height = MAX (cairo_image_surface_get_height (surface) / 2, 1);
  cairo_surface_t *half = cairo_image_surface_create (cairo_image_surface_get_format (surface), width, height);
  cairo_t *cr = cairo_create (half);

  cairo_scale (cr, (double) width / cairo_image_surface_get_width (surface), (double) height / cairo_image_surface_get_height (surface));
  cairo_set_source_surface (cr, surface, 0, 0);
  cairo_pattern_set_filter (cairo_get_source (cr), CAIRO_FILTER_BILINEAR);
  cairo_set_operator (cr, CAIRO_OPERATOR_SOURCE);
  cairo_paint (cr);
  cairo_destroy (cr);
  return half;
}

#define LEVELS 6

/* A floor plan has millions of pixels: it is decoded once, and drawn from a version that is not much larger than its place on the screen. */
static struct
{
  GMutex lock;
  GBytes *data;
  cairo_surface_t *levels[LEVELS];
} kept;

static void
keep (GBytes *data)
{
  for (int i = 0; i < LEVELS; i++)
    g_clear_pointer (&kept.levels[i], cairo_surface_destroy);
  g_clear_pointer (&kept.data, g_bytes_unref);
  kept.levels[0] = decode (data);
  kept.data = g_bytes_ref (data);
}

cairo_surface_t *
ut_picture_surface (GBytes *data, double width_px)
{
  cairo_surface_t *surface = NULL;

  g_mutex_lock (&kept.lock);
  if (kept.data != data)
    keep (data);
  for (int i = 0; i < LEVELS && kept.levels[0] != NULL; i++)
    {
      if (kept.levels[i] == NULL)
        kept.levels[i] = halved (kept.levels[i - 1]);
      if (i > 0 && cairo_image_surface_get_width (kept.levels[i]) < width_px)
        break;
      surface = kept.levels[i];
    }
  if (surface != NULL)
    cairo_surface_reference (surface);
  g_mutex_unlock (&kept.lock);
  return surface;
}
