/* A small window that asks for a few numbers. */
#pragma once

#include <gtk/gtk.h>

#define UT_ASK_MOST 4

typedef struct
{
  const char *label; /* translated, with its unit */
  double value, lowest, highest, step;
  guint digits;
} UtAskRow;

typedef void (*UtAsked) (const double *values, gpointer data);

/* n rows, at most UT_ASK_MOST.  asked is called when they are taken, never when the window is closed otherwise; not after the parent has gone. */
void ut_ask_numbers (GtkWindow *parent, const char *title, const char *verb, const UtAskRow *rows, guint n, UtAsked asked, gpointer data);
