/* What a window shows before there is a plan: new, open, those of late, and the examples. */
#pragma once

#include <gtk/gtk.h>

#define UT_EXAMPLES_PATH "/io/undertone/Undertone/examples/"

#define UT_TYPE_START_PAGE (ut_start_page_get_type ())
G_DECLARE_FINAL_TYPE (UtStartPage, ut_start_page, UT, START_PAGE, GtkWidget)

/* The keyboard's focus goes to the first choice. */
void ut_start_page_focus (UtStartPage *page);
