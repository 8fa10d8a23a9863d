/* The list of everything on the plan, coupled with the selection: the sheet for whoever cannot see it, or has no pointer. */
#pragma once

#include <gtk/gtk.h>

#include "panel.h"

#define UT_TYPE_THINGS_PANEL (ut_things_panel_get_type ())
G_DECLARE_FINAL_TYPE (UtThingsPanel, ut_things_panel, UT, THINGS_PANEL, UtPanel)
