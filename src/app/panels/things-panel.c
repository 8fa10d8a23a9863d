#include "things-panel.h"

#include <glib/gi18n.h>

#include "things.h"

struct _UtThingsPanel
{
  GtkWidget parent;
  GtkWidget *scroller;
  GtkStringList *texts;
  GtkMultiSelection *chosen;
  UtDesk *desk;
  GArray *things; /* of UtPick, one for each text */
  gboolean coupling;
};

G_DEFINE_FINAL_TYPE (UtThingsPanel, ut_things_panel, GTK_TYPE_WIDGET)

static void
setup_cb (GtkSignalListItemFactory *factory, GtkListItem *item)
{
  GtkWidget *label = gtk_label_new (NULL);

  (void) factory;
  gtk_label_set_xalign (GTK_LABEL (label), 0);
  gtk_label_set_ellipsize (GTK_LABEL (label), PANGO_ELLIPSIZE_END);
  gtk_list_item_set_child (item, label);
}

static void
bind_cb (GtkSignalListItemFactory *factory, GtkListItem *item)
{
  (void) factory;
  gtk_label_set_text (GTK_LABEL (gtk_list_item_get_child (item)), gtk_string_object_get_string (gtk_list_item_get_item (item)));
}

/* List to sheet. */
static void
chosen_changed_cb (UtThingsPanel *self)
{
  UtSelection *selection;

  if (self->coupling || self->desk == NULL)
    return;
  selection = ut_desk_selection (self->desk);
  self->coupling = TRUE;
  ut_selection_freeze (selection);
  ut_selection_clear (selection);
  for (guint i = 0; i < self->things->len; i++)
    if (gtk_selection_model_is_selected (GTK_SELECTION_MODEL (self->chosen), i))
      ut_selection_add (selection, g_array_index (self->things, UtPick, i).kind, g_array_index (self->things, UtPick, i).id);
  ut_selection_thaw (selection);
  self->coupling = FALSE;
}

/* Sheet to list. */
static void
show_selection (UtThingsPanel *self)
{
  g_autoptr (GtkBitset) all = gtk_bitset_new_range (0, self->things->len), those = gtk_bitset_new_empty ();

  if (self->coupling || self->desk == NULL)
    return;
  for (guint i = 0; i < self->things->len; i++)
    if (ut_selection_has (ut_desk_selection (self->desk), g_array_index (self->things, UtPick, i).kind, g_array_index (self->things, UtPick, i).id))
      gtk_bitset_add (those, i);
  self->coupling = TRUE;
  gtk_selection_model_set_selection (GTK_SELECTION_MODEL (self->chosen), those, all);
  self->coupling = FALSE;
}

/* Only lines that read otherwise are exchanged, so that the focus stays; and only while the list is shown. */
static void
refresh (UtThingsPanel *self)
{
  guint had = g_list_model_get_n_items (G_LIST_MODEL (self->texts));

  if (self->desk == NULL || !gtk_widget_get_mapped (GTK_WIDGET (self)) || ut_desk_has_draft (self->desk))
    return;
  g_array_unref (self->things);
  self->things = ut_things (ut_desk_plan (self->desk));
  self->coupling = TRUE;
  for (guint i = 0; i < self->things->len; i++)
    {
      g_autofree char *text = ut_thing_text (ut_desk_plan (self->desk), ut_desk_answer (self->desk), &g_array_index (self->things, UtPick, i));
      const char *line[] = { text, NULL };

      if (i >= had)
        gtk_string_list_append (self->texts, text);
      else if (!g_str_equal (gtk_string_list_get_string (self->texts, i), text))
        gtk_string_list_splice (self->texts, i, 1, line);
    }
  if (had > self->things->len)
    gtk_string_list_splice (self->texts, self->things->len, had - self->things->len, NULL);
  self->coupling = FALSE;
  show_selection (self);
}

static void
ut_things_panel_map (GtkWidget *widget)
{
  GTK_WIDGET_CLASS (ut_things_panel_parent_class)->map (widget);
  refresh (UT_THINGS_PANEL (widget));
}

void
ut_things_panel_set_desk (UtThingsPanel *self, UtDesk *desk)
{
  if (self->desk != NULL)
    {
      g_signal_handlers_disconnect_by_func (self->desk, refresh, self);
      g_signal_handlers_disconnect_by_func (ut_desk_solving (self->desk), refresh, self);
      g_signal_handlers_disconnect_by_func (ut_desk_selection (self->desk), show_selection, self);
    }
  g_set_object (&self->desk, desk);
  if (desk == NULL)
    return;
  g_signal_connect_object (desk, "plan-changed", G_CALLBACK (refresh), self, G_CONNECT_SWAPPED);
  g_signal_connect_object (ut_desk_solving (desk), "answered", G_CALLBACK (refresh), self, G_CONNECT_SWAPPED);
  g_signal_connect_object (ut_desk_selection (desk), "changed", G_CALLBACK (show_selection), self, G_CONNECT_SWAPPED);
  refresh (self);
}

static void
ut_things_panel_dispose (GObject *object)
{
  UtThingsPanel *self = UT_THINGS_PANEL (object);

  ut_things_panel_set_desk (self, NULL);
  g_clear_pointer (&self->scroller, gtk_widget_unparent);
  g_clear_object (&self->chosen);
  g_clear_object (&self->texts);
  G_OBJECT_CLASS (ut_things_panel_parent_class)->dispose (object);
}

static void
ut_things_panel_finalize (GObject *object)
{
  g_array_unref (UT_THINGS_PANEL (object)->things);
  G_OBJECT_CLASS (ut_things_panel_parent_class)->finalize (object);
}

static void
ut_things_panel_class_init (UtThingsPanelClass *class)
{
  G_OBJECT_CLASS (class)->dispose = ut_things_panel_dispose;
  G_OBJECT_CLASS (class)->finalize = ut_things_panel_finalize;
  GTK_WIDGET_CLASS (class)->map = ut_things_panel_map;
  gtk_widget_class_set_layout_manager_type (GTK_WIDGET_CLASS (class), GTK_TYPE_BIN_LAYOUT);
  gtk_widget_class_set_accessible_role (GTK_WIDGET_CLASS (class), GTK_ACCESSIBLE_ROLE_GROUP);
}

static void
ut_things_panel_init (UtThingsPanel *self)
{
  GtkListItemFactory *factory = gtk_signal_list_item_factory_new ();
  GtkWidget *view;

  self->things = g_array_new (FALSE, FALSE, sizeof (UtPick));
  self->texts = gtk_string_list_new (NULL);
  self->chosen = gtk_multi_selection_new (G_LIST_MODEL (g_object_ref (self->texts)));
  g_signal_connect (factory, "setup", G_CALLBACK (setup_cb), NULL);
  g_signal_connect (factory, "bind", G_CALLBACK (bind_cb), NULL);
  view = gtk_list_view_new (GTK_SELECTION_MODEL (g_object_ref (self->chosen)), factory);
  gtk_accessible_update_property (GTK_ACCESSIBLE (view), GTK_ACCESSIBLE_PROPERTY_LABEL, _ ("Everything on the plan"), -1);
  g_signal_connect_object (self->chosen, "selection-changed", G_CALLBACK (chosen_changed_cb), self, G_CONNECT_SWAPPED);
  self->scroller = gtk_scrolled_window_new ();
  gtk_scrolled_window_set_child (GTK_SCROLLED_WINDOW (self->scroller), view);
  gtk_widget_set_vexpand (self->scroller, TRUE);
  gtk_widget_set_parent (self->scroller, GTK_WIDGET (self));
}
