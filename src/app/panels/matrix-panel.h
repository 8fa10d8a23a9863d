/* The gain matrix, coupled with the selection; as its second view who has which part of what sets the headroom. */
#pragma once

#include "panel.h"

#define UT_TYPE_MATRIX_PANEL (ut_matrix_panel_get_type ())
G_DECLARE_FINAL_TYPE (UtMatrixPanel, ut_matrix_panel, UT, MATRIX_PANEL, UtPanel)
