/* The drawing sheet: one storey of the plan with its links, to be looked at and worked on. */
#pragma once

#include <gtk/gtk.h>

#include "desk.h"
#include "measure-tool.h"
#include "palette.h"
#include "tool.h"
#include "view.h"

#define UT_TYPE_SHEET (ut_sheet_get_type ())
G_DECLARE_FINAL_TYPE (UtSheet, ut_sheet, UT, SHEET, GtkWidget)

/* The desk is kept by reference; another one may be set later. */
void ut_sheet_set_desk (UtSheet *sheet, UtDesk *desk);

void ut_sheet_set_tool (UtSheet *sheet, UtToolKind tool);
UtToolKind ut_sheet_tool (UtSheet *sheet);

/* Signals "tool-changed", "view-changed". */

/* The menu of the second button and the menu key; and the plan's point that it was asked for at. */
void ut_sheet_set_menu (UtSheet *sheet, GMenuModel *menu);
void ut_sheet_menu_point (UtSheet *sheet, double *x_m, double *y_m);

/* What was measured last, or NULL; borrowed. */
const UtMeasure *ut_sheet_measure (UtSheet *sheet);

/* Whether the walls of the storey below are shown. */
void ut_sheet_set_ghost (UtSheet *sheet, gboolean ghost);

void ut_sheet_set_palette (UtSheet *sheet, const UtPalette *palette);

void ut_sheet_fit (UtSheet *sheet);
void ut_sheet_zoom (UtSheet *sheet, double factor); /* about the middle */

/* The plan's point under the pointer, or in the middle of the sheet when the pointer is elsewhere. */
void ut_sheet_pointer (UtSheet *sheet, double *x_m, double *y_m);

/* For tests and for placing by keyboard: conversions between the plan and the widget. */
const UtView *ut_sheet_view (UtSheet *sheet);

/* Frees the cached picture of what does not move; the next frame makes it anew. */
void ut_sheet_forget_layers (UtSheet *sheet);
