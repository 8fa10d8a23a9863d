/* What the two halves of the sheet share: sheet.c (the widget) and sheet-gestures.c (what pointer and keys do). */
#pragma once

#include "layers.h"
#include "sheet.h"
#include "wall-tool.h"

struct _UtSheet
{
  GtkWidget parent;
  UtDesk *desk;
  UtView view;
  gboolean fitted; /* the whole storey is shown, and stays so when the size changes */
  const UtPalette *palette;
  UtToolKind tool;
  UtSelectDrag drag;
  UtWallDraw wall;       /* of the wall tool */
  UtOpeningDraw opening; /* of the opening tool */
  UtMeasure measure;     /* of the measure tool */
  UtBackdropWork backdrop; /* of the backdrop tool */
  UtStillLayer still;
  double pointer_x_px, pointer_y_px; /* last seen */
  double begin_x_px, begin_y_px;     /* of the drag, on the sheet */
  double pan_x_px, pan_y_px;         /* how far the pan in progress has gone */
  gboolean panning, space_held, pointer_inside, ghost;
  guint repeats; /* clicks on one place */
  double pinch_scale;
  gboolean cursor_begun;       /* a measure by keys */
  gboolean cursor;             /* a place for tools without a pointer is shown */
  double cursor_x_m, cursor_y_m;
  double menu_x_px, menu_y_px; /* where the menu was asked for */
  GtkWidget *menu; /* popover of what can be done here; NULL: none was set */
};

/* Index of the storey shown; 0 without a desk. */
guint ut_sheet_storey (UtSheet *sheet);

/* Brings the accessible description to what is shown. */
void ut_sheet_describe (UtSheet *sheet);

void ut_sheet_show_view (UtSheet *sheet);
void ut_sheet_zoom_about (UtSheet *sheet, double factor, double x_px, double y_px);

/* Of sheet-gestures.c.  The keyboard's cursor moves, or does what a click there would. */
void ut_sheet_move_cursor (UtSheet *sheet, double dx_m, double dy_m);
void ut_sheet_click_cursor (UtSheet *sheet);
void ut_sheet_add_gestures (UtSheet *sheet);
void ut_sheet_menu_cb (GtkWidget *widget, const char *name, GVariant *parameter);
