/* The tray: presets that can be dragged onto the sheet. */
#pragma once

#include <gtk/gtk.h>

#include "presets.h"

/* The type that travels in a drag from the tray: the preset's place in the list. */
#define UT_TYPE_TRAY_ITEM (ut_tray_item_get_type ())
GType ut_tray_item_get_type (void);

/* Fills the box with what can be dragged out, now and whenever the presets change. */
void ut_tray_fill (GtkBox *box, UtPresets *presets);
