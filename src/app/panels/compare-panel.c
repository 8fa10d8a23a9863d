#include "compare-panel.h"

#include <math.h>

#include <glib/gi18n.h>

#include "compare.h"
#include "report.h"

struct _UtComparePanel
{
  UtPanel parent;
  GtkLabel *words;
  GtkWidget *copy;
  GtkWidget *scroller;
  UtStudy *pinned;
  UtStudy *shown; /* what it is compared with in the grid */
  GPtrArray *rows;
};

G_DEFINE_FINAL_TYPE (UtComparePanel, ut_compare_panel, UT_TYPE_PANEL)

static void
attach (GtkGrid *grid, const char *text, int column, int row, gboolean figure, gboolean head)
{
  GtkWidget *label = gtk_label_new (text);

  gtk_label_set_xalign (GTK_LABEL (label), figure ? 1 : 0);
  if (figure)
    gtk_widget_add_css_class (label, "numeric");
  if (head)
    gtk_widget_add_css_class (label, "heading");
  gtk_grid_attach (grid, label, column, row, 1, 1);
}

static void
attach_row (GtkGrid *grid, const UtComparisonRow *row, int at)
{
  double change = row->after - row->before;
  g_autofree char *before = ut_report_figure (row->before, (int) row->decimals), *after = ut_report_figure (row->after, (int) row->decimals);
  g_autofree char *figure = ut_report_figure (change, (int) row->decimals), *signed_figure = g_strconcat (change > 0 ? "+" : "", figure, NULL);

  attach (grid, row->name, 0, at, FALSE, FALSE);
  if (row->words != NULL)
    {
      attach (grid, row->words, 1, at, FALSE, FALSE);
      return;
    }
  attach (grid, before, 1, at, TRUE, FALSE);
  attach (grid, after, 2, at, TRUE, FALSE);
  attach (grid, signed_figure, 3, at, TRUE, FALSE);
}

static void
show_rows (UtComparePanel *self)
{
  GtkWidget *grid = gtk_grid_new ();

  gtk_grid_set_column_spacing (GTK_GRID (grid), 24);
  gtk_grid_set_row_spacing (GTK_GRID (grid), 2);
  gtk_widget_add_css_class (grid, "words");
  attach (GTK_GRID (grid), _ ("pinned"), 1, 0, TRUE, TRUE);
  attach (GTK_GRID (grid), _ ("now"), 2, 0, TRUE, TRUE);
  attach (GTK_GRID (grid), _ ("change"), 3, 0, TRUE, TRUE);
  for (guint i = 0; i < self->rows->len; i++)
    attach_row (GTK_GRID (grid), self->rows->pdata[i], (int) i + 1);
  gtk_scrolled_window_set_child (GTK_SCROLLED_WINDOW (self->scroller), grid);
}

static void
ut_compare_panel_refresh (UtPanel *panel)
{
  UtComparePanel *self = UT_COMPARE_PANEL (panel);
  UtStudy *study = ut_desk_answer (ut_panel_desk (panel));

  gtk_widget_set_sensitive (self->copy, self->pinned != NULL);
  if (self->pinned == NULL || study == NULL || study == self->shown)
    return;
  g_clear_pointer (&self->shown, ut_study_unref);
  g_clear_pointer (&self->rows, g_ptr_array_unref);
  self->shown = ut_study_ref (study);
  self->rows = ut_comparison_new (self->pinned, study);
  gtk_label_set_text (self->words, self->pinned->question.direction == study->question.direction ? _ ("Beside the plan that was pinned:")
                                                                                               : _ ("Pinned in the other direction: the figures are of different links."));
  show_rows (self);
}

static void
ut_compare_panel_let_go (UtPanel *panel)
{
  UtComparePanel *self = UT_COMPARE_PANEL (panel);

  g_clear_pointer (&self->pinned, ut_study_unref);
  g_clear_pointer (&self->shown, ut_study_unref);
  g_clear_pointer (&self->rows, g_ptr_array_unref);
  gtk_scrolled_window_set_child (GTK_SCROLLED_WINDOW (self->scroller), NULL);
  gtk_label_set_text (self->words, _ ("Pin the plan as it is now, change it, and see what that gives."));
}

static void
pin_cb (UtComparePanel *self)
{
  UtDesk *desk = ut_panel_desk (UT_PANEL (self));
  UtStudy *study = desk != NULL ? ut_desk_answer (desk) : NULL;

  if (study == NULL)
    return;
  g_clear_pointer (&self->pinned, ut_study_unref);
  g_clear_pointer (&self->shown, ut_study_unref);
  self->pinned = ut_study_ref (study);
  ut_panel_refresh (UT_PANEL (self));
}

static void
copy_cb (UtComparePanel *self)
{
  g_autofree char *csv = self->rows != NULL ? ut_comparison_csv (self->rows) : NULL;

  if (csv != NULL)
    gdk_clipboard_set_text (gtk_widget_get_clipboard (GTK_WIDGET (self)), csv);
}

static void
ut_compare_panel_class_init (UtComparePanelClass *class)
{
  UT_PANEL_CLASS (class)->refresh = ut_compare_panel_refresh;
  UT_PANEL_CLASS (class)->let_go = ut_compare_panel_let_go;
}

static void
ut_compare_panel_init (UtComparePanel *self)
{
  GtkWidget *box = gtk_box_new (GTK_ORIENTATION_VERTICAL, 6), *bar = gtk_box_new (GTK_ORIENTATION_HORIZONTAL, 8), *pin = gtk_button_new_with_mnemonic (_ ("_Pin the Plan"));

  self->words = GTK_LABEL (gtk_label_new (_ ("Pin the plan as it is now, change it, and see what that gives.")));
  self->copy = gtk_button_new_with_label (_ ("Copy as CSV"));
  self->scroller = gtk_scrolled_window_new ();
  gtk_label_set_xalign (self->words, 0);
  gtk_label_set_ellipsize (self->words, PANGO_ELLIPSIZE_END);
  gtk_widget_set_hexpand (GTK_WIDGET (self->words), TRUE);
  g_signal_connect_swapped (pin, "clicked", G_CALLBACK (pin_cb), self);
  g_signal_connect_swapped (self->copy, "clicked", G_CALLBACK (copy_cb), self);
  gtk_widget_add_css_class (bar, "words");
  gtk_box_append (GTK_BOX (bar), GTK_WIDGET (self->words));
  gtk_box_append (GTK_BOX (bar), self->copy);
  gtk_box_append (GTK_BOX (bar), pin);
  gtk_widget_set_vexpand (self->scroller, TRUE);
  gtk_box_append (GTK_BOX (box), bar);
  gtk_box_append (GTK_BOX (box), self->scroller);
  ut_panel_set_child (UT_PANEL (self), box);
}
