/* What the sheet shows, layer by layer.  Walls and grid change seldom and are kept as one picture at the view's scale; links, radios and marks are
 * drawn anew. */
#pragma once

#include <gtk/gtk.h>

#include "backdrop-tool.h"
#include "desk.h"
#include "measure-tool.h"
#include "palette.h"
#include "tool.h"
#include "view.h"
#include "wall-tool.h"

typedef struct
{
  UtDesk *desk;
  const UtView *view;
  const UtPalette *palette;
  guint storey;
  const UtSelectDrag *drag; /* for the band and the knob */
  const UtWallDraw *wall;       /* being drawn; NULL: not this tool */
  const UtOpeningDraw *opening;
  const UtMeasure *measure;
  const UtBackdropWork *backdrop;
  gboolean cursor; /* the keyboard's, at this place */
  double cursor_x_m, cursor_y_m;
  gboolean focused;
  gboolean ghost; /* the storey below is shown faintly */
  int device_scale;
} UtScene;

/* Room between what is fixed and the sheet's edges. */
#define UT_CORNER_PX 12.0
/* Size of a cell's mark. */
#define UT_MARK_PX 10.0

void ut_scene_colour (cairo_t *cr, const UtColour *colour, double alpha);
void ut_scene_place (const UtScene *scene, const UtRadio *radio, double *x_px, double *y_px);
gboolean ut_scene_has (const UtScene *scene, const UtPlan *plan, const UtRadio *radio); /* on the storey shown */

/* The kept picture, and for what it was made. */
typedef struct
{
  GskRenderNode *node;
  const UtPlan *plan; /* owned */
  UtView view;
  const UtPalette *palette;
  guint storey;
  int device_scale;
} UtStillLayer;

void ut_still_layer_clear (UtStillLayer *layer);

/* Height of the key along the lower edge of a sheet this wide, in pixels. */
double ut_scene_key_height (double width_px);

/* Appends all layers. */
void ut_scene_snapshot (const UtScene *scene, UtStillLayer *still, GtkSnapshot *snapshot);
