/* Printing the page through the system's dialog, with a preview of our own. */
#include "window-private.h"

#include <math.h>

#include <glib/gi18n.h>

#include "compat.h"
#include "page.h"

/* What one print knows: the answer is held, so that what is printed is what was shown. */
typedef struct
{
  UtWindow *window; /* owned */
  UtStudy *study;
  char *file_name;
} Print;

static void
print_free (gpointer data, GClosure *closure)
{
  Print *print = data;

  (void) closure;
  g_object_unref (print->window);
  ut_study_unref (print->study);
  g_free (print->file_name);
  g_free (print);
}

/* ---- paper ---- */

/* The page that fits the printer's paper: the nearest of ours by width and height. */
static UtPageSetup
setup_for (GtkPageSetup *paper, const char *file_name)
{
  double width_mm = gtk_page_setup_get_paper_width (paper, GTK_UNIT_MM), height_mm = gtk_page_setup_get_paper_height (paper, GTK_UNIT_MM), nearest_mm = INFINITY;
  UtPageSetup best = { .file_name = file_name };

  for (UtPaper size = UT_PAPER_A4; size <= UT_PAPER_TABLOID; size++)
    for (UtOrientation orientation = UT_PORTRAIT; orientation <= UT_LANDSCAPE; orientation++)
      {
        UtPageSetup setup = { size, orientation, file_name };
        double own_width_mm, own_height_mm, off_mm;

        ut_page_size_mm (&setup, &own_width_mm, &own_height_mm);
        off_mm = fabs (own_width_mm - width_mm) + fabs (own_height_mm - height_mm);
        if (off_mm < nearest_mm)
          {
            nearest_mm = off_mm;
            best = setup;
          }
      }
  return best;
}

static char *
remembered (const char *name)
{
  return g_build_filename (g_get_user_config_dir (), "undertone", name, NULL);
}

static GtkPageSetup *
last_paper (void)
{
  g_autofree char *path = remembered ("paper.ini");
  GtkPageSetup *paper = gtk_page_setup_new_from_file (path, NULL);

  if (paper != NULL)
    return paper;
  paper = gtk_page_setup_new ();
  gtk_page_setup_set_orientation (paper, GTK_PAGE_ORIENTATION_LANDSCAPE);
  return paper;
}

/* Kept for the next time; that it cannot be is nothing to be told of. */
static void
remember (GtkPrintOperation *operation)
{
  g_autofree char *paper = remembered ("paper.ini"), *settings = remembered ("printer.ini"), *folder = g_path_get_dirname (paper);

  g_mkdir_with_parents (folder, 0700);
  if (gtk_print_operation_get_default_page_setup (operation) != NULL)
    gtk_page_setup_to_file (gtk_print_operation_get_default_page_setup (operation), paper, NULL);
  if (gtk_print_operation_get_print_settings (operation) != NULL)
    gtk_print_settings_to_file (gtk_print_operation_get_print_settings (operation), settings, NULL);
}

/* ---- drawing ---- */

static void
draw_page_cb (GtkPrintOperation *operation, GtkPrintContext *context, int page, Print *print)
{
  UtPageSetup setup = setup_for (gtk_print_context_get_page_setup (context), print->file_name);

  (void) operation;
  (void) page;
  ut_compose_page (gtk_print_context_get_cairo_context (context), print->study, &setup);
}

/* ---- preview ---- */

typedef struct
{
  GtkPrintOperationPreview *preview;
  Print *print;
  GtkPageSetup *paper;
} Shown;

static void
shown_free (gpointer data)
{
  Shown *shown = data;

  gtk_print_operation_preview_end_preview (shown->preview);
  g_object_unref (shown->preview);
  g_object_unref (shown->paper);
  g_free (shown);
}

/* The sheet of paper, as large as fits. */
static void
paint_preview (GtkDrawingArea *area, cairo_t *cr, int width, int height, gpointer data)
{
  Shown *shown = data;
  UtPageSetup setup = setup_for (shown->paper, shown->print->file_name);
  double width_mm, height_mm, scale;

  (void) area;
  ut_page_size_mm (&setup, &width_mm, &height_mm);
  scale = fmin ((width - 32) / width_mm, (height - 32) / height_mm);
  cairo_translate (cr, (width - scale * width_mm) / 2, (height - scale * height_mm) / 2);
  cairo_scale (cr, scale, scale);
  cairo_rectangle (cr, 0, 0, width_mm, height_mm);
  cairo_set_source_rgb (cr, 1, 1, 1);
  cairo_fill (cr);
  ut_compose_page (cr, shown->print->study, &setup);
}

static gboolean
close_cb (GtkWidget *widget, GVariant *arguments, gpointer window)
{
  (void) widget;
  (void) arguments;
  gtk_window_destroy (window);
  return TRUE;
}

static gboolean
preview_cb (GtkPrintOperation *operation, GtkPrintOperationPreview *preview, GtkPrintContext *context, GtkWindow *parent, Print *print)
{
  GtkWidget *window = gtk_window_new (), *area = gtk_drawing_area_new ();
  GtkEventController *keys = gtk_shortcut_controller_new ();
  Shown *shown = g_new (Shown, 1);
  /* The operation wants something to measure by, though the preview draws for itself. */
  cairo_surface_t *surface = cairo_image_surface_create (CAIRO_FORMAT_A8, 1, 1);
  cairo_t *cr = cairo_create (surface);

  gtk_print_context_set_cairo_context (context, cr, 72, 72);
  cairo_destroy (cr);
  cairo_surface_destroy (surface);

  *shown = (Shown){ g_object_ref (preview), print, g_object_ref (gtk_print_context_get_page_setup (context)) };
  (void) operation;
  gtk_window_set_title (GTK_WINDOW (window), _ ("Print Preview"));
  gtk_window_set_transient_for (GTK_WINDOW (window), parent);
  gtk_window_set_default_size (GTK_WINDOW (window), 1000, 740);
  gtk_drawing_area_set_draw_func (GTK_DRAWING_AREA (area), paint_preview, shown, NULL);
  gtk_accessible_update_property (GTK_ACCESSIBLE (area), GTK_ACCESSIBLE_PROPERTY_LABEL, _ ("The page as it will be printed"), -1);
  gtk_window_set_child (GTK_WINDOW (window), area);
  gtk_window_set_destroy_with_parent (GTK_WINDOW (window), TRUE);
  gtk_shortcut_controller_add_shortcut (GTK_SHORTCUT_CONTROLLER (keys),
                                        gtk_shortcut_new (gtk_keyval_trigger_new (GDK_KEY_Escape, 0), gtk_callback_action_new (close_cb, window, NULL)));
  gtk_widget_add_controller (window, keys);
  g_object_set_data_full (G_OBJECT (area), "shown", shown, shown_free);
  gtk_window_present (GTK_WINDOW (window));
  return TRUE;
}

/* ---- running ---- */

static void
done_cb (GtkPrintOperation *operation, GtkPrintOperationResult result, Print *print)
{
  g_autoptr (GError) error = NULL;

  if (result == GTK_PRINT_OPERATION_RESULT_ERROR)
    {
      gtk_print_operation_get_error (operation, &error);
      ut_compat_tell (GTK_WINDOW (print->window), _ ("The page could not be printed"), error->message);
    }
  else if (result == GTK_PRINT_OPERATION_RESULT_APPLY)
    remember (operation);
  g_object_unref (operation); /* held since run () */
}

static void
run (UtWindow *self, GtkPrintOperationAction action, const char *export_path)
{
  g_autoptr (GtkPrintOperation) operation = gtk_print_operation_new ();
  g_autoptr (GtkPageSetup) paper = last_paper ();
  g_autofree char *settings_path = remembered ("printer.ini");
  g_autoptr (GtkPrintSettings) settings = gtk_print_settings_new_from_file (settings_path, NULL);
  UtStudy *study = ut_desk_answer (self->desk);
  GFile *file = ut_document_file (ut_desk_document (self->desk));
  Print *print;

  if (study == NULL)
    {
      ut_compat_tell (GTK_WINDOW (self), _ ("The page could not be printed"), _ ("The answer is still being computed; try again in a moment."));
      return;
    }
  print = g_new (Print, 1);
  *print = (Print){ g_object_ref (self), ut_study_ref (study), file != NULL ? g_file_get_basename (file) : NULL };
  gtk_print_operation_set_n_pages (operation, 1);
  gtk_print_operation_set_unit (operation, GTK_UNIT_MM);
  gtk_print_operation_set_use_full_page (operation, TRUE);
  gtk_print_operation_set_embed_page_setup (operation, TRUE);
  gtk_print_operation_set_default_page_setup (operation, paper);
  gtk_print_operation_set_job_name (operation, print->file_name != NULL ? print->file_name : _ ("New Plan"));
  if (settings != NULL)
    gtk_print_operation_set_print_settings (operation, settings);
  if (export_path != NULL)
    gtk_print_operation_set_export_filename (operation, export_path);
  g_signal_connect (operation, "draw-page", G_CALLBACK (draw_page_cb), print);
  g_signal_connect (operation, "preview", G_CALLBACK (preview_cb), print);
  g_signal_connect_data (operation, "done", G_CALLBACK (done_cb), print, print_free, 0);
  /* The window goes on while the dialog or the preview is open. */
  gtk_print_operation_set_allow_async (operation, TRUE);
  gtk_print_operation_run (g_object_ref (operation), action, GTK_WINDOW (self), NULL);
}

static void
print_cb (GSimpleAction *action, GVariant *parameter, gpointer self)
{
  (void) action;
  (void) parameter;
  run (self, GTK_PRINT_OPERATION_ACTION_PRINT_DIALOG, NULL);
}

static void
preview_page_cb (GSimpleAction *action, GVariant *parameter, gpointer self)
{
  (void) action;
  (void) parameter;
  run (self, GTK_PRINT_OPERATION_ACTION_PREVIEW, NULL);
}

/* For drivers and scripts: what would be printed, as a PDF at this path. */
static void
print_to_cb (GSimpleAction *action, GVariant *parameter, gpointer self)
{
  (void) action;
  run (self, GTK_PRINT_OPERATION_ACTION_EXPORT, g_variant_get_string (parameter, NULL));
}

void
ut_window_add_print_actions (UtWindow *self)
{
  static const GActionEntry actions[] = {
    { .name = "print", .activate = print_cb },
    { .name = "print-preview", .activate = preview_page_cb },
    { .name = "print-to", .activate = print_to_cb, .parameter_type = "s" },
  };

  g_action_map_add_action_entries (G_ACTION_MAP (self), actions, G_N_ELEMENTS (actions), self);
}
