/* What would help: remedies of a plan that cannot be met, each verified by solving again, found in the background; shown while pointed at, applied as one step. */
#pragma once

#include "panel.h"

#define UT_TYPE_REMEDIES_PANEL (ut_remedies_panel_get_type ())
G_DECLARE_FINAL_TYPE (UtRemediesPanel, ut_remedies_panel, UT, REMEDIES_PANEL, UtPanel)
