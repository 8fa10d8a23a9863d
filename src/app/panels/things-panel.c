#include "things-panel.h"

#include <glib/gi18n.h>

#include "things.h"

struct _UtThingsPanel
{
  UtPanel parent;
  GtkStringList *texts;
  GtkMultiSelection *chosen;
  GArray *things; /* of UtPick, one for each text */
  gboolean coupling;
};

G_DEFINE_FINAL_TYPE (UtThingsPanel, ut_things_panel, UT_TYPE_PANEL)

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

  if (self->coupling || ut_panel_desk (UT_PANEL (self)) == NULL)
    return;
  selection = ut_desk_selection (ut_panel_desk (UT_PANEL (self)));
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

  if (self->coupling || ut_panel_desk (UT_PANEL (self)) == NULL)
    return;
  for (guint i = 0; i < self->things->len; i++)
    if (ut_selection_has (ut_desk_selection (ut_panel_desk (UT_PANEL (self))), g_array_index (self->things, UtPick, i).kind, g_array_index (self->things, UtPick, i).id))
      gtk_bitset_add (those, i);
  self->coupling = TRUE;
  gtk_selection_model_set_selection (GTK_SELECTION_MODEL (self->chosen), those, all);
  self->coupling = FALSE;
}

/* Only lines that read otherwise are exchanged, so that the focus stays. */
static void
ut_things_panel_refresh (UtPanel *panel)
{
  UtThingsPanel *self = UT_THINGS_PANEL (panel);
  guint had = g_list_model_get_n_items (G_LIST_MODEL (self->texts));

  if (ut_desk_has_draft (ut_panel_desk (panel)))
    return;
  g_array_unref (self->things);
  self->things = ut_things (ut_desk_plan (ut_panel_desk (UT_PANEL (self))));
  self->coupling = TRUE;
  for (guint i = 0; i < self->things->len; i++)
    {
      g_autofree char *text = ut_thing_text (ut_desk_plan (ut_panel_desk (UT_PANEL (self))), ut_desk_answer (ut_panel_desk (UT_PANEL (self))), &g_array_index (self->things, UtPick, i));
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
ut_things_panel_dispose (GObject *object)
{
  UtThingsPanel *self = UT_THINGS_PANEL (object);

  G_OBJECT_CLASS (ut_things_panel_parent_class)->dispose (object);
  g_clear_object (&self->chosen);
  g_clear_object (&self->texts);
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
  UT_PANEL_CLASS (class)->refresh = ut_things_panel_refresh;
}

static void
ut_things_panel_init (UtThingsPanel *self)
{
  GtkListItemFactory *factory = gtk_signal_list_item_factory_new ();
  GtkWidget *view, *scroller;

  self->things = g_array_new (FALSE, FALSE, sizeof (UtPick));
  self->texts = gtk_string_list_new (NULL);
  self->chosen = gtk_multi_selection_new (G_LIST_MODEL (g_object_ref (self->texts)));
  g_signal_connect (factory, "setup", G_CALLBACK (setup_cb), NULL);
  g_signal_connect (factory, "bind", G_CALLBACK (bind_cb), NULL);
  view = gtk_list_view_new (GTK_SELECTION_MODEL (g_object_ref (self->chosen)), factory);
  gtk_accessible_update_property (GTK_ACCESSIBLE (view), GTK_ACCESSIBLE_PROPERTY_LABEL, _ ("Everything on the plan"), -1);
  g_signal_connect_object (self->chosen, "selection-changed", G_CALLBACK (chosen_changed_cb), self, G_CONNECT_SWAPPED);
  scroller = gtk_scrolled_window_new ();
  gtk_scrolled_window_set_child (GTK_SCROLLED_WINDOW (scroller), view);
  gtk_widget_set_vexpand (scroller, TRUE);
  ut_panel_set_child (UT_PANEL (self), scroller);
}
