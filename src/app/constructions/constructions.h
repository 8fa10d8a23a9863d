/* The window in which the plan's constructions are made and changed: what they are of, what they take, and how that depends on the angle. */
#pragma once

#include <gtk/gtk.h>

#include "desk.h"

#define UT_TYPE_CONSTRUCTIONS (ut_constructions_get_type ())
G_DECLARE_FINAL_TYPE (UtConstructions, ut_constructions, UT, CONSTRUCTIONS, GtkWindow)

/* For one desk; every change is a step of its document. */
GtkWidget *ut_constructions_new (UtDesk *desk, GtkWindow *parent);
