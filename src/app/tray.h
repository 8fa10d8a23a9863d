/* The tray: what can be dragged onto the sheet. */
#pragma once

#include <gtk/gtk.h>

#include "selection.h"

/* The type that travels in a drag from the tray: an enumeration whose values are those of UtRadioKind. */
#define UT_TYPE_TRAY_ITEM (ut_tray_item_get_type ())
GType ut_tray_item_get_type (void);

/* Makes `widget` something to drag out: a radio of this kind. */
void ut_tray_make_source (GtkWidget *widget, UtRadioKind kind);
