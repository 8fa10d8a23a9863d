/* A plot: drawn with cairo by whoever gives its painter, copied and saved as SVG, PNG or CSV. */
#pragma once

#include <gtk/gtk.h>

#include "palette.h"

#define UT_TYPE_PLOT (ut_plot_get_type ())
G_DECLARE_FINAL_TYPE (UtPlot, ut_plot, UT, PLOT, GtkWidget)

/* Paints into the rectangle at (0, 0), texts of that size. */
typedef void (*UtPlotPaint) (cairo_t *cr, double width, double height, double text_size, const UtPalette *palette, gpointer data);
/* The figures of it. Transfer full. */
typedef char *(*UtPlotCsv) (gpointer data);
/* What is there to be said of that point, NULL: nothing. Transfer full. */
typedef char *(*UtPlotHover) (double x, double y, double width, double height, double text_size, gpointer data);

/* name: of the file suggested, without its ending.  csv and hover may be NULL. */
void ut_plot_set_up (UtPlot *plot, const char *name, UtPlotPaint paint, UtPlotCsv csv, UtPlotHover hover, gpointer data);

void ut_plot_set_text_size (UtPlot *plot, double text_size);
double ut_plot_text_size (UtPlot *plot);

/* What it shows became another; its accessible description. */
void ut_plot_changed (UtPlot *plot, const char *description);

/* For tests and drivers: written by the path's ending. */
gboolean ut_plot_save (UtPlot *plot, const char *path, GError **error);
