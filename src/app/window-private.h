/* What the parts of the window share: window.c (its widgets), window-files.c (opening, saving, closing), window-edits.c (clipboard, order, storeys), window-backdrop.c. */
#pragma once

#include "budget-panel.h"
#include "details.h"
#include "links-panel.h"
#include "recovery.h"
#include "start-page.h"
#include "things-panel.h"
#include "window.h"

struct _UtWindow
{
  GtkApplicationWindow parent;
  UtDesk *desk;
  gboolean closing; /* the question about unsaved changes was answered */
  UtSheet *sheet;
  UtLinksPanel *links;
  UtBudgetPanel *budget;
  GtkStack *panels;
  GtkPaned *bottom_paned;
  UtDetails *details;
  GtkLabel *title_label, *subtitle_label, *verdict_label, *hold_label;
  GtkBox *tray;
  GtkWidget *undo_button, *redo_button;
  GtkDropDown *aim_drop, *storey_drop;
  GtkAdjustment *hold_adjustment;
  GtkScale *hold_scale;
  GMenu *recent_menu;
  GMenuModel *sheet_menu;
  UtRecovery *recovery;
  GFileMonitor *monitor; /* of the document's file; NULL: it has none */
  GtkStack *pages;
  UtStartPage *start_page;
  GtkWidget *notice;
  GtkLabel *notice_label;
  GtkWidget *notice_reload;
  gboolean showing; /* widgets are being brought to the desk's state */
};

/* Another document takes the desk's place. */
void ut_window_set_document (UtWindow *window, UtDocument *document);

/* Actions of window-files.c, to be added to the window's. */
void ut_window_add_file_actions (UtWindow *window);

/* Actions of window-edits.c; and which of them have anything to act on. */
void ut_window_add_edit_actions (UtWindow *window);
void ut_window_show_edits (UtWindow *window);

/* Actions of window-backdrop.c.  A file that is a picture or a PDF by its type becomes the storey's backdrop; FALSE: it is something else. */
void ut_window_add_backdrop_actions (UtWindow *window);
gboolean ut_window_take_picture (UtWindow *window, GFile *file);

/* Actions of window-print.c. */
void ut_window_add_print_actions (UtWindow *window);

/* A line under the header that stays until it is closed; reload: with a button for that. */
void ut_window_show_notice (UtWindow *window, const char *text, gboolean reload);

/* The document became another one, or lies in another file: copies of unsaved work, and an eye on the file. */
void ut_window_watch_document (UtWindow *window);
void ut_window_stop_watching (UtWindow *window);

/* Asks when there is something unsaved; TRUE: the window stays for now. */
gboolean ut_window_asks_before_closing (UtWindow *window);

/* Fills the menu of recent plans. */
void ut_window_fill_recent (UtWindow *window);
