/* How the radios would find these powers by themselves: SINR and power round after round. */
#pragma once

#include "panel.h"

#define UT_TYPE_CONTROL_PANEL (ut_control_panel_get_type ())
G_DECLARE_FINAL_TYPE (UtControlPanel, ut_control_panel, UT, CONTROL_PANEL, UtPanel)
