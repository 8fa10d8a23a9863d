/* What the panels under the sheet have in common: they show a desk's answer while they are mapped, and are told when it, or the selection, becomes another. */
#pragma once

#include <gtk/gtk.h>

#include "desk.h"

#define UT_TYPE_PANEL (ut_panel_get_type ())
G_DECLARE_DERIVABLE_TYPE (UtPanel, ut_panel, UT, PANEL, GtkWidget)

struct _UtPanelClass
{
  GtkWidgetClass parent;
  void (*refresh) (UtPanel *panel); /* mapped, with a desk: plan, answer or selection may be others */
  void (*let_go) (UtPanel *panel);  /* the desk goes: what is being computed for it is given up; may be NULL */
};

void ut_panel_set_desk (UtPanel *panel, UtDesk *desk);
UtDesk *ut_panel_desk (UtPanel *panel); /* NULL: none */

/* The one child, which fills the panel. */
void ut_panel_set_child (UtPanel *panel, GtkWidget *child);

/* Refreshes, if it is shown. */
void ut_panel_refresh (UtPanel *panel);

/* The first terminal selected that has a link in the study: its place among the links, or -1. */
int ut_panel_selected_link (UtPanel *panel, const UtStudy *study);
