/* The clipboard: part of a plan as a plan file, and as a picture for other programs. */
#pragma once

#include <gtk/gtk.h>

#include "desk.h"

/* Puts what is selected on the widget's clipboard.  FALSE: nothing is selected. */
gboolean ut_clipboard_copy (GtkWidget *widget, UtDesk *desk);

/* Reads it.  fragment is NULL where the clipboard holds no part of a plan, or one that cannot be read; it is borrowed. */
typedef void (*UtClipboardRead) (const UtPlan *fragment, gpointer data);
void ut_clipboard_read (GtkWidget *widget, UtClipboardRead read, gpointer data);
