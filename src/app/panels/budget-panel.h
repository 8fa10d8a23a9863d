/* Why a link fails, or does not: its budget as set, all turned down alike, and planned, with plain words for the client.  The link of the first terminal
 * selected, else that with the least margin. */
#pragma once

#include <gtk/gtk.h>

#include "panel.h"

#define UT_TYPE_BUDGET_PANEL (ut_budget_panel_get_type ())
G_DECLARE_FINAL_TYPE (UtBudgetPanel, ut_budget_panel, UT, BUDGET_PANEL, UtPanel)

/* Large type, for turning the screen round: on a window of its own, for as long as that is open. */
void ut_budget_panel_present (UtBudgetPanel *panel, GtkWindow *parent);
