#include "start-page.h"

#include <glib/gi18n.h>

#include "plan-read.h"

#define RECENT_MOST 5

struct _UtStartPage
{
  GtkWidget parent;
  GtkWidget *child, *first;
};

G_DEFINE_FINAL_TYPE (UtStartPage, ut_start_page, GTK_TYPE_WIDGET)

static GtkWidget *
line (const char *text, const char *style)
{
  GtkWidget *label = gtk_label_new (text);

  gtk_label_set_xalign (GTK_LABEL (label), 0);
  gtk_label_set_wrap (GTK_LABEL (label), TRUE);
  gtk_label_set_max_width_chars (GTK_LABEL (label), 60);
  if (style != NULL)
    gtk_widget_add_css_class (label, style);
  return label;
}

/* A button with a heading and, under it, some words. */
static GtkWidget *
choice (const char *heading, const char *words, const char *action, const char *target)
{
  GtkWidget *button = gtk_button_new (), *box = gtk_box_new (GTK_ORIENTATION_VERTICAL, 2);

  gtk_box_append (GTK_BOX (box), line (heading, "heading"));
  if (words != NULL && words[0] != '\0')
    {
      GtkWidget *more = line (words, "dim-label");

      gtk_label_set_ellipsize (GTK_LABEL (more), PANGO_ELLIPSIZE_END);
      gtk_label_set_lines (GTK_LABEL (more), 2);
      gtk_box_append (GTK_BOX (box), more);
    }
  gtk_button_set_child (GTK_BUTTON (button), box);
  gtk_accessible_update_property (GTK_ACCESSIBLE (button), GTK_ACCESSIBLE_PROPERTY_LABEL, heading, -1);
  if (target != NULL)
    gtk_actionable_set_action_target (GTK_ACTIONABLE (button), "s", target);
  gtk_actionable_set_action_name (GTK_ACTIONABLE (button), action);
  return button;
}

static void
add_recent (GtkBox *box)
{
  GList *items = gtk_recent_manager_get_items (gtk_recent_manager_get_default ());
  guint n = 0;

  for (GList *item = items; item != NULL && n < RECENT_MOST; item = item->next)
    if (g_strcmp0 (gtk_recent_info_get_mime_type (item->data), UT_PLAN_MEDIA_TYPE) == 0 && gtk_recent_info_exists (item->data))
      {
        if (n++ == 0)
          gtk_box_append (box, line (_ ("Plans of late"), "group"));
        g_autofree char *place = gtk_recent_info_get_uri_display (item->data);
        gtk_box_append (box, choice (gtk_recent_info_get_display_name (item->data), place, "win.open-uri", gtk_recent_info_get_uri (item->data)));
      }
  g_list_free_full (items, (GDestroyNotify) gtk_recent_info_unref);
}

static void
add_examples (GtkBox *box)
{
  g_auto (GStrv) names = g_resources_enumerate_children (UT_EXAMPLES_PATH, G_RESOURCE_LOOKUP_FLAGS_NONE, NULL);

  gtk_box_append (box, line (_ ("Examples, invented: each opens as a plan of your own"), "group"));
  for (guint i = 0; names != NULL && names[i] != NULL; i++)
    {
      g_autofree char *path = g_strconcat (UT_EXAMPLES_PATH, names[i], NULL);
      g_autoptr (GBytes) text = g_resources_lookup_data (path, G_RESOURCE_LOOKUP_FLAGS_NONE, NULL);
      g_autoptr (GPtrArray) faults = ut_faults_new ();
      g_autoptr (UtPlan) plan = text != NULL ? (UtPlan *) ut_plan_read (g_bytes_get_data (text, NULL), g_bytes_get_size (text), faults) : NULL;

      if (plan != NULL)
        gtk_box_append (box, choice (plan->title, plan->notes, "win.open-example", names[i]));
    }
}

static void
ut_start_page_dispose (GObject *object)
{
  g_clear_pointer (&UT_START_PAGE (object)->child, gtk_widget_unparent);
  G_OBJECT_CLASS (ut_start_page_parent_class)->dispose (object);
}

static void
ut_start_page_class_init (UtStartPageClass *class)
{
  G_OBJECT_CLASS (class)->dispose = ut_start_page_dispose;
  gtk_widget_class_set_layout_manager_type (GTK_WIDGET_CLASS (class), GTK_TYPE_BIN_LAYOUT);
}

static void
ut_start_page_init (UtStartPage *self)
{
  GtkWidget *box = gtk_box_new (GTK_ORIENTATION_VERTICAL, 8);

  self->child = gtk_scrolled_window_new ();
  gtk_scrolled_window_set_policy (GTK_SCROLLED_WINDOW (self->child), GTK_POLICY_NEVER, GTK_POLICY_AUTOMATIC);
  gtk_widget_set_halign (box, GTK_ALIGN_CENTER);
  gtk_widget_set_valign (box, GTK_ALIGN_CENTER);
  gtk_widget_add_css_class (box, "start-page");
  gtk_box_append (GTK_BOX (box), line (_ ("Sketch a floor, place cells and terminals, and see whether every target can be met and with which least powers."), "heading"));
  self->first = choice (_ ("New plan"), _ ("An empty storey; drop a picture of the floor on it, or draw walls."), "win.start-new", NULL);
  gtk_box_append (GTK_BOX (box), self->first);
  gtk_box_append (GTK_BOX (box), choice (_ ("Open a plan…"), NULL, "win.open", NULL));
  add_recent (GTK_BOX (box));
  add_examples (GTK_BOX (box));
  gtk_scrolled_window_set_child (GTK_SCROLLED_WINDOW (self->child), box);
  gtk_widget_set_parent (self->child, GTK_WIDGET (self));
}

void
ut_start_page_focus (UtStartPage *self)
{
  gtk_widget_grab_focus (self->first);
}
