/* Pictures under the sketch: what comes in, at which size, and what is refused. */
#include <string.h>

#include <cairo-pdf.h>
#include <glib/gstdio.h>

#include "picture.h"

static cairo_status_t
write_cb (void *bytes, const unsigned char *data, unsigned int length)
{
  g_byte_array_append (bytes, data, length);
  return CAIRO_STATUS_SUCCESS;
}

/* A4 landscape, three pages; the second is black. */
static GBytes *
pdf (void)
{
  GByteArray *bytes = g_byte_array_new ();
  cairo_surface_t *surface = cairo_pdf_surface_create_for_stream (write_cb, bytes, 297 / 25.4 * 72, 210 / 25.4 * 72);
  cairo_t *cr = cairo_create (surface);

  for (int page = 0; page < 3; page++)
    {
      if (page == 1)
        cairo_paint (cr);
      cairo_show_page (cr);
    }
  cairo_destroy (cr);
  cairo_surface_destroy (surface);
  return g_byte_array_free_to_bytes (bytes);
}

/* Red, green and blue of a pixel. */
static guint32
pixel (cairo_surface_t *surface, int x, int y)
{
  const guchar *row = cairo_image_surface_get_data (surface) + y * cairo_image_surface_get_stride (surface);

  return ((const guint32 *) (const void *) row)[x] & 0xffffff;
}

static void
test_pdf (void)
{
  g_autoptr (GBytes) file = pdf ();
  g_autoptr (GError) error = NULL;
  UtPicture picture = { 0 };
  cairo_surface_t *surface;

  g_assert_cmpuint (ut_picture_n_pages (file), ==, 3);
  for (guint page = 0; page < 2; page++)
    {
      g_assert_true (ut_picture_import (file, page, &picture, &error));
      g_assert_cmpstr (picture.media_type, ==, "image/png");
      g_assert_cmpfloat_with_epsilon (picture.width_mm, 297, 0.01); /* ISO 216 */
      g_assert_cmpfloat_with_epsilon ((double) picture.width_px / picture.height_px, 297.0 / 210, 1e-3);
      surface = ut_picture_surface (picture.data, 1e9);
      g_assert_cmpint (cairo_image_surface_get_width (surface), ==, picture.width_px);
      g_assert_cmphex (pixel (surface, 30, 30), ==, page == 1 ? 0 : 0xffffff);
      cairo_surface_destroy (surface);
      ut_picture_clear (&picture);
    }
  g_assert_false (ut_picture_import (file, 3, &picture, &error));
  g_assert_nonnull (strstr (error->message, "expected 1 to 3"));
}

static void
test_svg (void)
{
  static const char text[] = "<svg xmlns='http://www.w3.org/2000/svg' width='40' height='20'><rect width='40' height='20' fill='#0000ff'/></svg>";
  g_autoptr (GBytes) file = g_bytes_new_static (text, strlen (text));
  g_autoptr (GError) error = NULL;
  UtPicture picture = { 0 };
  cairo_surface_t *surface;

  g_assert_true (ut_picture_import (file, 0, &picture, &error));
  g_assert_no_error (error);
  g_assert_cmpstr (picture.media_type, ==, "image/png");
  g_assert_cmpint (picture.width_px, ==, 2 * picture.height_px);
  g_assert_cmpint (picture.width_px, >=, 1000); /* drawn fine enough to be traced */
  surface = ut_picture_surface (picture.data, 1e9);
  g_assert_cmphex (pixel (surface, picture.width_px / 2, picture.height_px / 2), ==, 0x0000ff);
  cairo_surface_destroy (surface);
  ut_picture_clear (&picture);
}

/* PNG comes in byte for byte; where it is shown small a smaller version is drawn, never one smaller than its place. */
static void
test_png (void)
{
  GByteArray *bytes = g_byte_array_new ();
  cairo_surface_t *surface = cairo_image_surface_create (CAIRO_FORMAT_ARGB32, 1000, 400);
  UtPicture picture = { 0 };
  g_autoptr (GError) error = NULL;

  cairo_surface_write_to_png_stream (surface, write_cb, bytes);
  cairo_surface_destroy (surface);
  g_autoptr (GBytes) file = g_byte_array_free_to_bytes (bytes);
  g_assert_true (ut_picture_import (file, 0, &picture, &error));
  g_assert_true (g_bytes_equal (picture.data, file));
  for (double width = 20; width < 3000; width *= 1.7)
    {
      cairo_surface_t *shown = ut_picture_surface (file, width);
      int shown_px = cairo_image_surface_get_width (shown);

      g_assert_true (shown_px >= MIN (width, 1000));
      g_assert_true (shown_px <= MAX (2 * width + 2, 1000.0 / 32 + 1) || shown_px == 1000);
      cairo_surface_destroy (shown);
    }
  ut_picture_clear (&picture);
}

static void
test_broken (void)
{
  static const char *const texts[] = { "", "no picture", "\x89PNG\r\n\x1a\nbroken", "%PDF-1.7 broken", "\xff\xd8\xff broken", "<svg" };

  for (gsize i = 0; i < G_N_ELEMENTS (texts); i++)
    {
      g_autoptr (GBytes) file = g_bytes_new_static (texts[i], strlen (texts[i]));
      g_autoptr (GError) error = NULL;
      UtPicture picture = { 0 };

      g_assert_false (ut_picture_import (file, 0, &picture, &error));
      g_assert_nonnull (error);
      g_assert_null (picture.data);
      g_assert_null (ut_picture_surface (file, 100));
    }
}

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  g_test_add_func ("/picture/pdf", test_pdf);
  g_test_add_func ("/picture/svg", test_svg);
  g_test_add_func ("/picture/png", test_png);
  g_test_add_func ("/picture/broken", test_broken);
  return g_test_run ();
}
