/* One painter of the plan for screen and paper: geometry in metres, marks and text in a unit of the target. */
#pragma once

#include <cairo.h>

#include "palette.h"
#include "study.h"

typedef struct
{
  guint storey;              /* index: which storey is drawn */
  double units_per_m;        /* target units (px or mm) a metre; the plan's y points up, the target's down */
  double origin_x, origin_y; /* where the plan's (0, 0) lies, in target units */
  double mark;               /* size of a cell's square in target units; lines and text follow from it */
  const UtPalette *palette;
  gboolean grid, walls;      /* what does not move: with walls the backdrop and the openings */
  gboolean links, radios, labels;
  gboolean plates; /* labels are set off by plates instead of outlines: for screens */
  gboolean reserves; /* behind a link's margin its reserve, where the study has it: for screens */
  GArray *boxes; /* places that labels must leave alone (labels.h), and gets theirs; NULL: none but the radios' own */
} UtPaintOptions;

/* Size of the text that goes with a mark. */
#define UT_TEXT_OF_MARK 1.2

/* Extent of a storey in metres: walls, radios on it, backdrop; FALSE when there is nothing. */
gboolean ut_plan_extent (const UtPlan *plan, guint storey, double *x0_m, double *y0_m, double *x1_m, double *y1_m);

/* Takes the places of the storey's radios, so that no label lies on one. */
void ut_paint_take_radios (GArray *boxes, const UtPlan *plan, const UtPaintOptions *options);

/* Paints what the options ask for. study may be NULL: then no links are drawn. It must be an answer to this very plan's radios. */
void ut_paint_plan (cairo_t *cr, const UtPlan *plan, const UtStudy *study, const UtPaintOptions *options);
