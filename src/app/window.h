/* A window: one document on one desk. */
#pragma once

#include <gtk/gtk.h>

#include "application.h"
#include "desk.h"
#include "document.h"
#include "sheet.h"

#define UT_TYPE_WINDOW (ut_window_get_type ())
G_DECLARE_FINAL_TYPE (UtWindow, ut_window, UT, WINDOW, GtkApplicationWindow)

UtWindow *ut_window_new (UtApplication *application, UtDocument *document);

/* Opens a file: in `window` when that holds an untouched, unsaved plan, else in a window of its own. A file that cannot be opened is told of
 * in a message and changes nothing.  window may be NULL. */
void ut_window_open_file (UtApplication *application, UtWindow *window, GFile *file);

/* The page to begin with, until something is opened or begun. */
void ut_window_show_start (UtWindow *window);

/* Windows for what a program that was killed left unsaved; TRUE: there was some. */
gboolean ut_window_recover (UtApplication *application);

UtDesk *ut_window_desk (UtWindow *window);
UtSheet *ut_window_sheet (UtWindow *window);
