/* The present plan beside one that was pinned: headroom, powers, margins, and what is another in the plan. */
#pragma once

#include "panel.h"

#define UT_TYPE_COMPARE_PANEL (ut_compare_panel_get_type ())
G_DECLARE_FINAL_TYPE (UtComparePanel, ut_compare_panel, UT, COMPARE_PANEL, UtPanel)
