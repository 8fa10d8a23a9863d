#include "page-file.h"

#include <math.h>

#include <cairo-pdf.h>
#include <cairo-svg.h>
#include <gio/gio.h>

#define POINTS_PER_MM (72 / 25.4)
#define PNG_DPI 150

typedef enum { FILE_PDF, FILE_SVG, FILE_PNG, FILE_UNKNOWN } FileKind;

static FileKind
kind_of (const char *path)
{
  g_autofree char *small = g_ascii_strdown (path, -1);

  if (g_str_has_suffix (small, ".pdf"))
    return FILE_PDF;
  if (g_str_has_suffix (small, ".svg"))
    return FILE_SVG;
  return g_str_has_suffix (small, ".png") ? FILE_PNG : FILE_UNKNOWN;
}

static cairo_status_t
append_cb (void *closure, const unsigned char *data, unsigned int length)
{
  g_byte_array_append (closure, data, length);
  return CAIRO_STATUS_SUCCESS;
}

static cairo_surface_t *
make_surface (FileKind kind, double width_mm, double height_mm, const UtStudy *study, GByteArray *bytes)
{
  cairo_surface_t *surface;

  switch (kind)
    {
    case FILE_PDF:
      surface = cairo_pdf_surface_create_for_stream (append_cb, bytes, width_mm * POINTS_PER_MM, height_mm * POINTS_PER_MM);
      cairo_pdf_surface_set_metadata (surface, CAIRO_PDF_METADATA_TITLE, study->gains->plan->title);
      cairo_pdf_surface_set_metadata (surface, CAIRO_PDF_METADATA_AUTHOR, study->gains->plan->prepared_by);
      cairo_pdf_surface_set_metadata (surface, CAIRO_PDF_METADATA_CREATOR, "Undertone");
      return surface;
    case FILE_SVG:
      surface = cairo_svg_surface_create_for_stream (append_cb, bytes, width_mm * POINTS_PER_MM, height_mm * POINTS_PER_MM);
      cairo_svg_surface_set_document_unit (surface, CAIRO_SVG_UNIT_PT);
      return surface;
    case FILE_PNG:
    case FILE_UNKNOWN:
      break;
    }
  return cairo_image_surface_create (CAIRO_FORMAT_RGB24, (int) lround (width_mm / 25.4 * PNG_DPI), (int) lround (height_mm / 25.4 * PNG_DPI));
}

/* The whole page in memory, so that a file appears whole or not at all. */
static cairo_status_t
draw_page (FileKind kind, const UtStudy *study, const UtPageSetup *setup, GByteArray *bytes)
{
  double width_mm, height_mm, scale = kind == FILE_PNG ? PNG_DPI / 25.4 : POINTS_PER_MM;
  cairo_surface_t *surface;
  cairo_status_t status;
  cairo_t *cr;

  ut_page_size_mm (setup, &width_mm, &height_mm);
  surface = make_surface (kind, width_mm, height_mm, study, bytes);
  cr = cairo_create (surface);
  cairo_scale (cr, scale, scale);
  if (kind == FILE_PNG)
    {
      cairo_set_source_rgb (cr, 1, 1, 1);
      cairo_paint (cr);
    }
  ut_compose_page (cr, study, setup);
  cairo_show_page (cr);
  status = cairo_status (cr);
  cairo_destroy (cr);
  if (kind == FILE_PNG && status == CAIRO_STATUS_SUCCESS)
    status = cairo_surface_write_to_png_stream (surface, append_cb, bytes);
  cairo_surface_finish (surface);
  if (status == CAIRO_STATUS_SUCCESS)
    status = cairo_surface_status (surface);
  cairo_surface_destroy (surface);
  return status;
}

gboolean
ut_page_write_file (const UtStudy *study, const UtPageSetup *setup, const char *path, GError **error)
{
  FileKind kind = kind_of (path);
  g_autoptr (GByteArray) bytes = g_byte_array_new ();
  g_autoptr (GFile) file = g_file_new_for_path (path);
  cairo_status_t status;

  if (kind == FILE_UNKNOWN)
    {
      g_set_error (error, G_IO_ERROR, G_IO_ERROR_INVALID_ARGUMENT, "this ending names no kind of page; expected .pdf, .svg or .png");
      return FALSE;
    }
  status = draw_page (kind, study, setup, bytes);
  if (status != CAIRO_STATUS_SUCCESS)
    {
      g_set_error (error, G_IO_ERROR, G_IO_ERROR_FAILED, "the page cannot be drawn: %s", cairo_status_to_string (status));
      return FALSE;
    }
  return g_file_replace_contents (file, (const char *) bytes->data, bytes->len, NULL, FALSE, G_FILE_CREATE_NONE, NULL, NULL, error);
}
