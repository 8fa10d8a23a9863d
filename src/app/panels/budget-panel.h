/* Why a link fails, or does not: its budget as set, all turned down alike, and planned, with plain words for the client. */
#pragma once

#include <gtk/gtk.h>

#include "desk.h"

#define UT_TYPE_BUDGET_PANEL (ut_budget_panel_get_type ())
G_DECLARE_FINAL_TYPE (UtBudgetPanel, ut_budget_panel, UT, BUDGET_PANEL, GtkWidget)

/* Shows the first terminal selected, else the link with the least margin. */
void ut_budget_panel_set_desk (UtBudgetPanel *panel, UtDesk *desk);

/* Large type, for turning the screen round: on a window of its own, for as long as that is open. */
void ut_budget_panel_present (UtBudgetPanel *panel, GtkWindow *parent);
