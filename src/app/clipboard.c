#include "clipboard.h"

#include "fragment.h"
#include "plan-painter.h"
#include "plan-read.h"
#include "plan-write.h"

#define PICTURE_PX 1200.0
#define MARGIN_PX 40.0
#define MARK_PX 12.0

static cairo_status_t
write_cb (void *bytes, const unsigned char *data, unsigned int length)
{
  g_byte_array_append (bytes, data, length);
  return CAIRO_STATUS_SUCCESS;
}

/* The part alone, on paper colours; NULL when there is nothing to see. */
static GBytes *
picture_of (const UtPlan *fragment, guint storey)
{
  double x0_m, y0_m, x1_m, y1_m, scale;
  GByteArray *png = g_byte_array_new ();
  cairo_surface_t *surface;
  cairo_t *cr;

  if (!ut_plan_extent (fragment, storey, &x0_m, &y0_m, &x1_m, &y1_m))
    {
      g_byte_array_unref (png);
      return NULL;
    }
  scale = MIN (100, (PICTURE_PX - 2 * MARGIN_PX) / MAX (MAX (x1_m - x0_m, y1_m - y0_m), 0.1));
  surface = cairo_image_surface_create (CAIRO_FORMAT_ARGB32, (int) ((x1_m - x0_m) * scale + 2 * MARGIN_PX), (int) ((y1_m - y0_m) * scale + 2 * MARGIN_PX));
  cr = cairo_create (surface);
  cairo_set_source_rgb (cr, 1, 1, 1);
  cairo_paint (cr);
  ut_paint_plan (cr,
                 fragment,
                 NULL,
                 &(UtPaintOptions){
                   .storey = storey,
                   .units_per_m = scale,
                   .origin_x = MARGIN_PX - x0_m * scale,
                   .origin_y = MARGIN_PX + y1_m * scale,
                   .mark = MARK_PX,
                   .palette = &ut_palette_paper,
                   .walls = TRUE,
                   .radios = TRUE,
                   .labels = TRUE,
                 });
  cairo_destroy (cr);
  cairo_surface_write_to_png_stream (surface, write_cb, png);
  cairo_surface_destroy (surface);
  return g_byte_array_free_to_bytes (png);
}

gboolean
ut_clipboard_copy (GtkWidget *widget, UtDesk *desk)
{
  const UtPlan *plan = ut_desk_plan (desk);
  g_autoptr (UtPlan) fragment = NULL;
  g_autoptr (GBytes) text = NULL, picture = NULL;
  GdkContentProvider *providers[2], *all;
  guint n = 0;
  int shown;
  gsize length;
  char *written;

  if (ut_selection_size (ut_desk_selection (desk)) == 0)
    return FALSE;
  fragment = (UtPlan *) ut_plan_fragment (plan, ut_desk_selection (desk));
  written = ut_plan_write (fragment, &length);
  text = g_bytes_new_take (written, length);
  shown = ut_plan_find_storey (fragment, ut_plan_storey (plan, ut_desk_storey (desk))->id);
  picture = picture_of (fragment, (guint) MAX (shown, 0));
  providers[n++] = gdk_content_provider_new_for_bytes (UT_PLAN_MEDIA_TYPE, text);
  if (picture != NULL)
    providers[n++] = gdk_content_provider_new_for_bytes ("image/png", picture);
  all = gdk_content_provider_new_union (providers, n);
  gdk_clipboard_set_content (gtk_widget_get_clipboard (widget), all);
  g_object_unref (all);
  return TRUE;
}

typedef struct
{
  UtClipboardRead read;
  gpointer data;
} Reading;

static void
tell_read (Reading *reading, const UtPlan *fragment)
{
  reading->read (fragment, reading->data);
  g_free (reading);
}

static void
spliced_cb (GObject *stream, GAsyncResult *result, gpointer data)
{
  GMemoryOutputStream *memory = G_MEMORY_OUTPUT_STREAM (stream);
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  g_autoptr (UtPlan) fragment = NULL;

  if (g_output_stream_splice_finish (G_OUTPUT_STREAM (stream), result, NULL) >= 0)
    fragment = (UtPlan *) ut_plan_read (g_memory_output_stream_get_data (memory), g_memory_output_stream_get_data_size (memory), faults);
  tell_read (data, fragment);
}

static void
opened_cb (GObject *clipboard, GAsyncResult *result, gpointer data)
{
  g_autoptr (GInputStream) stream = gdk_clipboard_read_finish (GDK_CLIPBOARD (clipboard), result, NULL, NULL);
  g_autoptr (GOutputStream) memory = NULL;

  if (stream == NULL)
    {
      tell_read (data, NULL);
      return;
    }
  memory = g_memory_output_stream_new_resizable ();
  g_output_stream_splice_async (memory, stream, G_OUTPUT_STREAM_SPLICE_CLOSE_SOURCE | G_OUTPUT_STREAM_SPLICE_CLOSE_TARGET, G_PRIORITY_DEFAULT, NULL, spliced_cb, data);
}

void
ut_clipboard_read (GtkWidget *widget, UtClipboardRead read, gpointer data)
{
  static const char *types[] = { UT_PLAN_MEDIA_TYPE, NULL };
  Reading *reading = g_new (Reading, 1);

  *reading = (Reading){ read, data };
  gdk_clipboard_read_async (gtk_widget_get_clipboard (widget), types, G_PRIORITY_DEFAULT, NULL, opened_cb, reading);
}
