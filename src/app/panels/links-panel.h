/* The links table: sortable, its selection coupled with the sheet's. */
#pragma once

#include <gtk/gtk.h>

#include "selection.h"
#include "solving.h"

#define UT_TYPE_LINKS_PANEL (ut_links_panel_get_type ())
G_DECLARE_FINAL_TYPE (UtLinksPanel, ut_links_panel, UT, LINKS_PANEL, GtkWidget)

/* Both are kept by reference; others may be set later. */
void ut_links_panel_set_up (UtLinksPanel *panel, UtSolving *solving, UtSelection *selection);

/* The rows as shown (sorted), of UtLinkRow; borrowed. */
GListModel *ut_links_panel_rows (UtLinksPanel *panel);
