#include "links-panel.h"

#include <math.h>
#include <string.h>

#include <glib/gi18n.h>

#include "link-row.h"

struct _UtLinksPanel
{
  GtkWidget parent;
  GtkWidget *box;
  GtkColumnView *view;
  GListStore *rows;
  GtkCustomFilter *filter;
  UtLinkShow show;
  GtkSortListModel *sorted;
  GtkMultiSelection *chosen;
  UtSolving *solving;
  UtSelection *selection;
  gboolean coupling; /* one side is being brought to the other's state */
};

G_DEFINE_FINAL_TYPE (UtLinksPanel, ut_links_panel, GTK_TYPE_WIDGET)

static void
row_changed_cb (UtLinkRow *row, GtkListItem *item)
{
  UtLinkColumn column = GPOINTER_TO_UINT (g_object_get_data (G_OBJECT (item), "column"));

  gtk_label_set_text (GTK_LABEL (gtk_list_item_get_child (item)), ut_link_row_text (row, column));
}

static void
setup_cb (GtkSignalListItemFactory *factory, GtkListItem *item, gpointer column)
{
  GtkWidget *label = gtk_label_new (NULL);

  (void) factory;
  gtk_label_set_xalign (GTK_LABEL (label), ut_link_column_is_figure (GPOINTER_TO_UINT (column)) ? 1 : 0);
  gtk_label_set_single_line_mode (GTK_LABEL (label), TRUE);
  if (GPOINTER_TO_UINT (column) == UT_COLUMN_NAME)
    gtk_label_set_ellipsize (GTK_LABEL (label), PANGO_ELLIPSIZE_END);
  if (ut_link_column_is_figure (GPOINTER_TO_UINT (column)))
    gtk_widget_add_css_class (label, "numeric");
  g_object_set_data (G_OBJECT (item), "column", column);
  gtk_list_item_set_child (item, label);
}

static void
bind_cb (GtkSignalListItemFactory *factory, GtkListItem *item, gpointer column)
{
  UtLinkRow *row = gtk_list_item_get_item (item);

  (void) factory;
  (void) column;
  g_signal_connect_object (row, "changed", G_CALLBACK (row_changed_cb), item, 0);
  row_changed_cb (row, item);
}

static void
unbind_cb (GtkSignalListItemFactory *factory, GtkListItem *item, gpointer column)
{
  (void) factory;
  (void) column;
  g_signal_handlers_disconnect_by_func (gtk_list_item_get_item (item), row_changed_cb, item);
}

/* "T9" before "T10": a text's digits count as a number. */
static int
compare_texts (const char *one, const char *other)
{
  g_autofree char *a = g_utf8_collate_key_for_filename (one, -1), *b = g_utf8_collate_key_for_filename (other, -1);

  return g_strcmp0 (a, b);
}

static int
compare_rows (gconstpointer one, gconstpointer other, gpointer data)
{
  UtLinkColumn column = GPOINTER_TO_UINT (data);
  UtLinkRow *a = (UtLinkRow *) one, *b = (UtLinkRow *) other;
  double x, y;

  if (!ut_link_column_is_figure (column))
    return compare_texts (ut_link_row_text (a, column), ut_link_row_text (b, column));
  x = ut_link_row_figure (a, column);
  y = ut_link_row_figure (b, column);
  if (isnan (x) || isnan (y))
    return isnan (x) - isnan (y);
  return (x > y) - (x < y);
}

static void
add_column (UtLinksPanel *self, UtLinkColumn column)
{
  GtkListItemFactory *factory = gtk_signal_list_item_factory_new ();
  GtkColumnViewColumn *view_column;
  g_autoptr (GtkSorter) sorter = GTK_SORTER (gtk_custom_sorter_new (compare_rows, GUINT_TO_POINTER (column), NULL));

  g_signal_connect (factory, "setup", G_CALLBACK (setup_cb), GUINT_TO_POINTER (column));
  g_signal_connect (factory, "bind", G_CALLBACK (bind_cb), GUINT_TO_POINTER (column));
  g_signal_connect (factory, "unbind", G_CALLBACK (unbind_cb), GUINT_TO_POINTER (column));
  view_column = gtk_column_view_column_new (ut_link_column_title (column), factory);
  gtk_column_view_column_set_sorter (view_column, sorter);
  gtk_column_view_column_set_resizable (view_column, TRUE);
  gtk_column_view_column_set_expand (view_column, column == UT_COLUMN_NAME);
  gtk_column_view_append_column (self->view, view_column);
  g_object_unref (view_column);
}

/* Table to sheet. */
static void
chosen_changed_cb (UtLinksPanel *self)
{
  GListModel *shown = G_LIST_MODEL (self->sorted);

  if (self->coupling || self->selection == NULL)
    return;
  self->coupling = TRUE;
  ut_selection_freeze (self->selection);
  ut_selection_clear (self->selection);
  for (guint i = 0; i < g_list_model_get_n_items (shown); i++)
    if (gtk_selection_model_is_selected (GTK_SELECTION_MODEL (self->chosen), i))
      {
        g_autoptr (UtLinkRow) row = g_list_model_get_item (shown, i);
        ut_selection_add (self->selection, UT_KIND_TERMINAL, ut_link_row_terminal (row));
      }
  ut_selection_thaw (self->selection);
  self->coupling = FALSE;
}

/* Sheet to table. */
static void
selection_changed_cb (UtLinksPanel *self)
{
  GListModel *shown = G_LIST_MODEL (self->sorted);
  guint n = g_list_model_get_n_items (shown);
  g_autoptr (GtkBitset) all = gtk_bitset_new_range (0, n), those = gtk_bitset_new_empty ();

  if (self->coupling)
    return;
  for (guint i = 0; i < n; i++)
    {
      g_autoptr (UtLinkRow) row = g_list_model_get_item (shown, i);
      if (ut_selection_has (self->selection, UT_KIND_TERMINAL, ut_link_row_terminal (row)))
        gtk_bitset_add (those, i);
    }
  self->coupling = TRUE;
  gtk_selection_model_set_selection (GTK_SELECTION_MODEL (self->chosen), those, all);
  self->coupling = FALSE;
}

/* Rows are kept where the links are the same ones, so that scrolling, selection and order survive a drag. */
static void
answered_cb (UtLinksPanel *self)
{
  UtStudy *study = ut_solving_study (self->solving);
  guint had = g_list_model_get_n_items (G_LIST_MODEL (self->rows)), has = study != NULL ? study->links->len : 0;

  if (study != NULL && ut_solving_is_stale (self->solving))
    {
      gtk_widget_add_css_class (GTK_WIDGET (self), "stale");
      return;
    }
  gtk_widget_remove_css_class (GTK_WIDGET (self), "stale");
  self->coupling = TRUE;
  for (guint i = 0; i < MIN (had, has); i++)
    {
      g_autoptr (UtLinkRow) row = g_list_model_get_item (G_LIST_MODEL (self->rows), i);
      ut_link_row_set (row, study, i);
    }
  if (had > has)
    g_list_store_splice (self->rows, has, had - has, NULL, 0);
  for (guint i = had; i < has; i++)
    {
      g_autoptr (UtLinkRow) row = ut_link_row_new (study, i);
      g_list_store_append (self->rows, row);
    }
  gtk_filter_changed (GTK_FILTER (self->filter), GTK_FILTER_CHANGE_DIFFERENT);
  gtk_sorter_changed (gtk_column_view_get_sorter (self->view), GTK_SORTER_CHANGE_DIFFERENT);
  self->coupling = FALSE;
  selection_changed_cb (self);
}

void
ut_links_panel_set_up (UtLinksPanel *self, UtSolving *solving, UtSelection *selection)
{
  if (self->solving != NULL)
    {
      g_signal_handlers_disconnect_by_func (self->solving, answered_cb, self);
      g_signal_handlers_disconnect_by_func (self->selection, selection_changed_cb, self);
    }
  g_set_object (&self->solving, solving);
  g_set_object (&self->selection, selection);
  g_signal_connect_object (solving, "answered", G_CALLBACK (answered_cb), self, G_CONNECT_SWAPPED);
  g_signal_connect_object (selection, "changed", G_CALLBACK (selection_changed_cb), self, G_CONNECT_SWAPPED);
  answered_cb (self);
}

GListModel *
ut_links_panel_rows (UtLinksPanel *self)
{
  return G_LIST_MODEL (self->sorted);
}

/* ---- which links, which columns ---- */

static gboolean
passes (gpointer row, gpointer data)
{
  return ut_link_row_passes (row, UT_LINKS_PANEL (data)->show);
}

static void
show_chosen_cb (GtkDropDown *drop, GParamSpec *spec, UtLinksPanel *self)
{
  (void) spec;
  self->show = (UtLinkShow) gtk_drop_down_get_selected (drop);
  self->coupling = TRUE;
  gtk_filter_changed (GTK_FILTER (self->filter), GTK_FILTER_CHANGE_DIFFERENT);
  self->coupling = FALSE;
  if (self->selection != NULL)
    selection_changed_cb (self);
}

/* The rows as shown, with the columns as shown (RFC 4180). */
static char *
csv_of (UtLinksPanel *self)
{
  GString *csv = g_string_new (NULL);
  GListModel *columns = gtk_column_view_get_columns (self->view), *rows = G_LIST_MODEL (self->sorted);

  for (guint row = 0; row <= g_list_model_get_n_items (rows); row++)
    {
      gboolean first = TRUE;

      for (guint column = 0; column < UT_N_COLUMNS; column++)
        {
          g_autoptr (GtkColumnViewColumn) shown = g_list_model_get_item (columns, column);
          g_autoptr (UtLinkRow) link = row > 0 ? g_list_model_get_item (rows, row - 1) : NULL;
          const char *text = link != NULL ? ut_link_row_text (link, (UtLinkColumn) column) : ut_link_column_title ((UtLinkColumn) column);
          g_auto (GStrv) quotes = g_strsplit (text, "\"", -1);
          g_autofree char *quoted = g_strjoinv ("\"\"", quotes);

          if (!gtk_column_view_column_get_visible (shown))
            continue;
          g_string_append_printf (csv, strpbrk (text, ",\"") != NULL ? "%s\"%s\"" : "%s%s", first ? "" : ",", quoted);
          first = FALSE;
        }
      g_string_append (csv, "\r\n");
    }
  return g_string_free (csv, FALSE);
}

static void
copy_cb (UtLinksPanel *self)
{
  g_autofree char *csv = csv_of (self);

  gdk_clipboard_set_text (gtk_widget_get_clipboard (GTK_WIDGET (self)), csv);
}

/* A list of the columns, each to be shown or not. */
static GtkWidget *
columns_button (UtLinksPanel *self)
{
  GtkWidget *button = gtk_menu_button_new (), *popover = gtk_popover_new (), *list = gtk_box_new (GTK_ORIENTATION_VERTICAL, 2);
  GListModel *columns = gtk_column_view_get_columns (self->view);

  for (guint i = 1; i < UT_N_COLUMNS; i++)
    {
      g_autoptr (GtkColumnViewColumn) column = g_list_model_get_item (columns, i);
      GtkWidget *check = gtk_check_button_new_with_label (ut_link_column_title ((UtLinkColumn) i));

      g_object_bind_property (column, "visible", check, "active", G_BINDING_SYNC_CREATE | G_BINDING_BIDIRECTIONAL);
      gtk_box_append (GTK_BOX (list), check);
    }
  gtk_popover_set_child (GTK_POPOVER (popover), list);
  gtk_menu_button_set_popover (GTK_MENU_BUTTON (button), popover);
  gtk_menu_button_set_label (GTK_MENU_BUTTON (button), _ ("Columns"));
  return button;
}

static GtkWidget *
bar_of (UtLinksPanel *self)
{
  const char *shows[] = { _ ("All links"), _ ("Those that fail"), _ ("Those at a limit"), _ ("The limiting group"), NULL };
  GtkWidget *bar = gtk_box_new (GTK_ORIENTATION_HORIZONTAL, 8), *drop = gtk_drop_down_new_from_strings (shows), *copy = gtk_button_new_with_label (_ ("Copy as CSV"));

  gtk_accessible_update_property (GTK_ACCESSIBLE (drop), GTK_ACCESSIBLE_PROPERTY_LABEL, _ ("Links shown"), -1);
  g_signal_connect (drop, "notify::selected", G_CALLBACK (show_chosen_cb), self);
  g_signal_connect_swapped (copy, "clicked", G_CALLBACK (copy_cb), self);
  gtk_widget_add_css_class (bar, "bar");
  gtk_box_append (GTK_BOX (bar), drop);
  gtk_box_append (GTK_BOX (bar), columns_button (self));
  gtk_box_append (GTK_BOX (bar), copy);
  return bar;
}

static void
ut_links_panel_dispose (GObject *object)
{
  UtLinksPanel *self = UT_LINKS_PANEL (object);

  g_clear_pointer (&self->box, gtk_widget_unparent);
  g_clear_object (&self->chosen);
  g_clear_object (&self->sorted);
  g_clear_object (&self->filter);
  g_clear_object (&self->rows);
  g_clear_object (&self->solving);
  g_clear_object (&self->selection);
  G_OBJECT_CLASS (ut_links_panel_parent_class)->dispose (object);
}

static void
ut_links_panel_class_init (UtLinksPanelClass *class)
{
  G_OBJECT_CLASS (class)->dispose = ut_links_panel_dispose;
  gtk_widget_class_set_layout_manager_type (GTK_WIDGET_CLASS (class), GTK_TYPE_BIN_LAYOUT);
  gtk_widget_class_set_accessible_role (GTK_WIDGET_CLASS (class), GTK_ACCESSIBLE_ROLE_GROUP);
  gtk_widget_class_set_css_name (GTK_WIDGET_CLASS (class), "links");
}

static void
ut_links_panel_init (UtLinksPanel *self)
{
  GtkWidget *scroller;

  self->rows = g_list_store_new (UT_TYPE_LINK_ROW);
  self->view = GTK_COLUMN_VIEW (gtk_column_view_new (NULL));
  gtk_column_view_set_show_row_separators (self->view, TRUE);
  gtk_widget_add_css_class (GTK_WIDGET (self->view), "data-table");
  gtk_accessible_update_property (GTK_ACCESSIBLE (self->view), GTK_ACCESSIBLE_PROPERTY_LABEL, _ ("Links"), -1);
  for (UtLinkColumn column = 0; column < UT_N_COLUMNS; column++)
    add_column (self, column);
  self->filter = gtk_custom_filter_new (passes, self, NULL);
  self->sorted = gtk_sort_list_model_new (G_LIST_MODEL (gtk_filter_list_model_new (G_LIST_MODEL (g_object_ref (self->rows)), GTK_FILTER (g_object_ref (self->filter)))),
                                          g_object_ref (gtk_column_view_get_sorter (self->view)));
  self->chosen = gtk_multi_selection_new (G_LIST_MODEL (g_object_ref (self->sorted)));
  g_signal_connect_object (self->chosen, "selection-changed", G_CALLBACK (chosen_changed_cb), self, G_CONNECT_SWAPPED);
  gtk_column_view_set_model (self->view, GTK_SELECTION_MODEL (self->chosen));
  scroller = gtk_scrolled_window_new ();
  gtk_scrolled_window_set_child (GTK_SCROLLED_WINDOW (scroller), GTK_WIDGET (self->view));
  gtk_widget_set_vexpand (scroller, TRUE);
  gtk_widget_set_vexpand (GTK_WIDGET (self), TRUE);
  self->box = gtk_box_new (GTK_ORIENTATION_VERTICAL, 0);
  gtk_box_append (GTK_BOX (self->box), bar_of (self));
  gtk_box_append (GTK_BOX (self->box), scroller);
  gtk_widget_set_parent (self->box, GTK_WIDGET (self));
}
