#include "panel.h"

typedef struct
{
  UtDesk *desk;
  GtkWidget *child;
} UtPanelPrivate;

G_DEFINE_ABSTRACT_TYPE_WITH_PRIVATE (UtPanel, ut_panel, GTK_TYPE_WIDGET)

static UtPanelPrivate *
own (UtPanel *self)
{
  return ut_panel_get_instance_private (self);
}

void
ut_panel_refresh (UtPanel *self)
{
  if (own (self)->desk != NULL && gtk_widget_get_mapped (GTK_WIDGET (self)))
    UT_PANEL_GET_CLASS (self)->refresh (self);
}

static void
ut_panel_map (GtkWidget *widget)
{
  GTK_WIDGET_CLASS (ut_panel_parent_class)->map (widget);
  ut_panel_refresh (UT_PANEL (widget));
}

void
ut_panel_set_desk (UtPanel *self, UtDesk *desk)
{
  UtDesk *old = own (self)->desk;

  if (old != NULL)
    {
      g_signal_handlers_disconnect_by_func (old, ut_panel_refresh, self);
      g_signal_handlers_disconnect_by_func (ut_desk_solving (old), ut_panel_refresh, self);
      g_signal_handlers_disconnect_by_func (ut_desk_selection (old), ut_panel_refresh, self);
      if (UT_PANEL_GET_CLASS (self)->let_go != NULL)
        UT_PANEL_GET_CLASS (self)->let_go (self);
    }
  g_set_object (&own (self)->desk, desk);
  if (desk == NULL)
    return;
  g_signal_connect_object (desk, "plan-changed", G_CALLBACK (ut_panel_refresh), self, G_CONNECT_SWAPPED);
  g_signal_connect_object (ut_desk_solving (desk), "answered", G_CALLBACK (ut_panel_refresh), self, G_CONNECT_SWAPPED);
  g_signal_connect_object (ut_desk_selection (desk), "changed", G_CALLBACK (ut_panel_refresh), self, G_CONNECT_SWAPPED);
  ut_panel_refresh (self);
}

UtDesk *
ut_panel_desk (UtPanel *self)
{
  return own (self)->desk;
}

void
ut_panel_set_child (UtPanel *self, GtkWidget *child)
{
  own (self)->child = child;
  gtk_widget_set_parent (child, GTK_WIDGET (self));
}

int
ut_panel_selected_link (UtPanel *self, const UtStudy *study)
{
  UtSelection *selection = ut_desk_selection (own (self)->desk);

  for (guint i = 0; i < study->links->len; i++)
    if (ut_selection_has (selection, UT_KIND_TERMINAL, ut_plan_terminal (study->gains->plan, ut_study_link (study, i)->terminal)->radio.id))
      return (int) i;
  return -1;
}

static void
ut_panel_dispose (GObject *object)
{
  UtPanel *self = UT_PANEL (object);

  ut_panel_set_desk (self, NULL);
  g_clear_pointer (&own (self)->child, gtk_widget_unparent);
  G_OBJECT_CLASS (ut_panel_parent_class)->dispose (object);
}

static void
ut_panel_class_init (UtPanelClass *class)
{
  G_OBJECT_CLASS (class)->dispose = ut_panel_dispose;
  GTK_WIDGET_CLASS (class)->map = ut_panel_map;
  gtk_widget_class_set_layout_manager_type (GTK_WIDGET_CLASS (class), GTK_TYPE_BIN_LAYOUT);
  gtk_widget_class_set_accessible_role (GTK_WIDGET_CLASS (class), GTK_ACCESSIBLE_ROLE_GROUP);
}

static void
ut_panel_init (UtPanel *self)
{
  (void) self;
}
