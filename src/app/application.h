/* The application: opens windows, holds what concerns all of them. */
#pragma once

#include <gtk/gtk.h>

#define UT_APPLICATION_ID "io.undertone.Undertone"

#define UT_TYPE_APPLICATION (ut_application_get_type ())
G_DECLARE_FINAL_TYPE (UtApplication, ut_application, UT, APPLICATION, GtkApplication)

UtApplication *ut_application_new (void);
