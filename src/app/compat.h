/* The places where GTK 4.8 and later ones differ, and what only GTK settings know.  Everything that a later GTK deprecates is in here. */
#pragma once

#include <gtk/gtk.h>

#include "palette.h"

typedef enum { UT_STYLE_DARK, UT_STYLE_CONTRAST } UtStyle;

/* Switches a style on or off for the whole program. */
void ut_compat_set_style (UtStyle style, gboolean on);

/* The palette that goes with the program's present style. */
const UtPalette *ut_compat_palette (void);

/* The file chosen, or NULL; takes place while the program goes on. data goes to the callback. */
typedef void (*UtFileChosen) (GFile *file, gpointer data);
void ut_compat_choose_file (GtkWindow *parent, gboolean save, const char *title, const char *name, const char *suffix, UtFileChosen chosen, gpointer data);

/* The same for opening, among files of these media types ("image/" and "image/png" alike begin one), under this name. */
void ut_compat_choose_picture (GtkWindow *parent, const char *title, const char *kind, const char *const *types, UtFileChosen chosen, gpointer data);

/* A message with one button. */
void ut_compat_tell (GtkWindow *parent, const char *heading, const char *text);

/* The question before unsaved work goes. */
typedef enum { UT_ANSWER_CANCEL, UT_ANSWER_DISCARD, UT_ANSWER_SAVE } UtAnswer;
typedef void (*UtAnswered) (UtAnswer answer, gpointer data);
void ut_compat_ask_save (GtkWindow *parent, const char *name, UtAnswered answered, gpointer data);
