/* The one page: composed in millimetres for any cairo target. */
#pragma once

#include <cairo.h>

#include "labels.h"
#include "study.h"

typedef enum { UT_PAPER_A4, UT_PAPER_A3, UT_PAPER_LETTER, UT_PAPER_TABLOID } UtPaper;
typedef enum { UT_PORTRAIT, UT_LANDSCAPE } UtOrientation;

typedef struct
{
  UtPaper paper;
  UtOrientation orientation;
  const char *file_name; /* of the plan, printed in the title block; may be NULL */
} UtPageSetup;

/* Paper size in mm, orientation applied. */
void ut_page_size_mm (const UtPageSetup *setup, double *width_mm, double *height_mm);

gboolean ut_paper_from_word (const char *word, UtPaper *paper);
gboolean ut_orientation_from_word (const char *word, UtOrientation *orientation);

/* Draws the page; one user unit of `cr` is one millimetre, origin at the sheet's top left corner. */
void ut_compose_page (cairo_t *cr, const UtStudy *study, const UtPageSetup *setup);

/* How one storey lies on the page: 1 : scale, the plan's (0, 0) at origin_mm. */
typedef struct
{
  guint storey;
  UtBox frame_mm;
  double origin_x_mm, origin_y_mm;
} UtPageDrawing;

/* The drawings of a page: their common scale, 0 when there is nothing to draw; drawings (of UtPageDrawing) may be NULL. */
double ut_page_drawings (const UtPlan *plan, const UtPageSetup *setup, GArray *drawings);

/* The grid that places on the page are found by: squares of step_m, lettered from the left (A at x0_m), numbered from below (1 at y0_m), the same on every storey. */
typedef struct { double step_m, x0_m, y0_m; } UtPageGrid;

/* FALSE: there is nothing to draw. */
gboolean ut_page_grid (const UtPlan *plan, const UtPageSetup *setup, UtPageGrid *grid);

/* "B3". Transfer full. */
char *ut_page_grid_ref (const UtPageGrid *grid, double x_m, double y_m);

/* The smallest standard scale (1:10, 1:20, 1:25, 1:50, 1:100, 1:200, 1:250, 1:500, 1:1000, ...) at which this many metres fit into this many millimetres. */
double ut_page_scale (double length_m, double room_mm);
