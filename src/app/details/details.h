/* The details pane: the fields of what is selected, of the plan when nothing is. */
#pragma once

#include <gtk/gtk.h>

#include "desk.h"

#define UT_TYPE_DETAILS (ut_details_get_type ())
G_DECLARE_FINAL_TYPE (UtDetails, ut_details, UT, DETAILS, GtkWidget)

void ut_details_set_desk (UtDetails *details, UtDesk *desk);
