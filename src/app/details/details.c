#include "details.h"

#include <string.h>

#include <glib/gi18n.h>

#include "compat.h"
#include "fields.h"
#include "polar.h"

struct _UtDetails
{
  GtkWidget parent;
  UtDesk *desk;
  GtkWidget *box;
  GPtrArray *editors; /* GtkWidget of each field of the subject */
  GtkLabel *heading, *refusal;
  GtkWidget *polar; /* the antenna of the radio shown */
  UtSubject subject;
  char *id;         /* of the radio shown */
  gboolean built;
  gboolean showing; /* editors are being brought to the plan's state */
};

G_DEFINE_FINAL_TYPE (UtDetails, ut_details, GTK_TYPE_WIDGET)

static guint
index_of (GtkWidget *editor)
{
  return GPOINTER_TO_UINT (g_object_get_data (G_OBJECT (editor), "field"));
}

/* What the editor holds, in the words of fields.h. */
static char *
editor_text (GtkWidget *editor)
{
  if (GTK_IS_SWITCH (editor))
    return g_strdup (gtk_switch_get_active (GTK_SWITCH (editor)) ? "1" : "0");
  if (GTK_IS_DROP_DOWN (editor))
    return g_strdup_printf ("%u", gtk_drop_down_get_selected (GTK_DROP_DOWN (editor)));
  return g_strdup (gtk_editable_get_text (GTK_EDITABLE (editor)));
}

/* What the editor shows of the plan: nothing, where the things selected differ in it. */
static char *
shown_text (UtDetails *self, GtkWidget *editor)
{
  const UtPlan *plan = ut_desk_plan (self->desk);

  if (!GTK_IS_SWITCH (editor) && ut_fields_mixed (plan, self->subject, self->id, index_of (editor)))
    return GTK_IS_DROP_DOWN (editor) ? g_strdup_printf ("%u", GTK_INVALID_LIST_POSITION) : g_strdup ("");
  return ut_fields_text (plan, self->subject, self->id, index_of (editor));
}

static void
show_in_editor (UtDetails *self, GtkWidget *editor)
{
  g_autofree char *text = shown_text (self, editor);
  gboolean applies = ut_fields_applies (ut_desk_plan (self->desk), self->subject, self->id, index_of (editor));
  gboolean mixed = ut_fields_mixed (ut_desk_plan (self->desk), self->subject, self->id, index_of (editor));
  GtkWidget *group = g_object_get_data (G_OBJECT (editor), "group");

  gtk_widget_remove_css_class (editor, "refused");
  gtk_widget_set_visible (editor, applies);
  gtk_widget_set_visible (g_object_get_data (G_OBJECT (editor), "label"), applies);
  if (group != NULL)
    gtk_widget_set_visible (group, applies);
  if (GTK_IS_ENTRY (editor))
    gtk_entry_set_placeholder_text (GTK_ENTRY (editor), mixed ? _ ("mixed") : NULL);
  if (GTK_IS_SWITCH (editor))
    gtk_switch_set_active (GTK_SWITCH (editor), text[0] == '1');
  else if (GTK_IS_DROP_DOWN (editor))
    gtk_drop_down_set_selected (GTK_DROP_DOWN (editor), (guint) g_ascii_strtoull (text, NULL, 10));
  else if (g_strcmp0 (gtk_editable_get_text (GTK_EDITABLE (editor)), text) != 0)
    gtk_editable_set_text (GTK_EDITABLE (editor), text);
}

/* The editor's value becomes a step, or is refused and stays to be mended. */
static void
commit (UtDetails *self, GtkWidget *editor)
{
  g_autofree char *text = NULL, *before = NULL, *refusal = NULL, *label = NULL;
  const UtPlan *plan;

  if (self->showing || self->desk == NULL)
    return;
  text = editor_text (editor);
  before = shown_text (self, editor);
  if (g_str_equal (text, before))
    {
      gtk_widget_remove_css_class (editor, "refused");
      gtk_label_set_text (self->refusal, "");
      return;
    }
  plan = ut_fields_with (ut_desk_plan (self->desk), self->subject, self->id, index_of (editor), text, &refusal);
  gtk_label_set_text (self->refusal, refusal != NULL ? refusal : "");
  gtk_widget_set_visible (GTK_WIDGET (self->refusal), refusal != NULL);
  if (plan == NULL)
    {
      gtk_widget_add_css_class (editor, "refused");
      return;
    }
  if (self->subject == UT_SUBJECT_PLAN)
    label = g_strconcat (_ ("Change"), " ", _ (ut_fields_field (self->subject, index_of (editor))->label), NULL);
  else
    {
      g_autofree char *of = ut_desk_step_label (self->desk, _ ("Change"));

      label = g_strconcat (of, " ", _ (ut_fields_field (self->subject, index_of (editor))->label), NULL);
    }
  ut_desk_apply (self->desk, plan, label, NULL);
}

static void
editor_done_cb (GtkWidget *editor, UtDetails *self)
{
  commit (self, editor);
}

static void
editor_notify_cb (GtkWidget *editor, GParamSpec *spec, UtDetails *self)
{
  (void) spec;
  commit (self, editor);
}

static void
focus_left_cb (GtkEventControllerFocus *controller, UtDetails *self)
{
  commit (self, gtk_event_controller_get_widget (GTK_EVENT_CONTROLLER (controller)));
}

/* The wheel over a drop-down scrolls the pane. */
static gboolean
ignore_wheel_cb (GtkEventControllerScroll *controller, double dx, double dy, UtDetails *self)
{
  GtkWidget *scroller = gtk_widget_get_ancestor (GTK_WIDGET (self), GTK_TYPE_SCROLLED_WINDOW);
  GtkAdjustment *adjustment = scroller != NULL ? gtk_scrolled_window_get_vadjustment (GTK_SCROLLED_WINDOW (scroller)) : NULL;

  (void) controller;
  (void) dx;
  if (adjustment != NULL)
    gtk_adjustment_set_value (adjustment, gtk_adjustment_get_value (adjustment) + 40 * dy);
  return GDK_EVENT_STOP;
}

static void
setup_choice_cb (GtkSignalListItemFactory *factory, GtkListItem *item)
{
  GtkWidget *label = gtk_label_new (NULL);

  (void) factory;
  gtk_label_set_xalign (GTK_LABEL (label), 0);
  gtk_label_set_ellipsize (GTK_LABEL (label), PANGO_ELLIPSIZE_END);
  gtk_label_set_width_chars (GTK_LABEL (label), 8);
  gtk_label_set_max_width_chars (GTK_LABEL (label), 8);
  gtk_widget_set_hexpand (label, TRUE);
  gtk_list_item_set_child (item, label);
}

static void
bind_choice_cb (GtkSignalListItemFactory *factory, GtkListItem *item)
{
  const char *text = gtk_string_object_get_string (gtk_list_item_get_item (item));

  (void) factory;
  gtk_label_set_text (GTK_LABEL (gtk_list_item_get_child (item)), text);
  gtk_widget_set_tooltip_text (gtk_list_item_get_child (item), text);
}

/* The button shows what fits, so that a long choice does not widen the pane; the list shows all of it. */
static GtkWidget *
make_drop_down (char **choices)
{
  GtkWidget *drop = gtk_drop_down_new_from_strings ((const char *const *) choices);
  g_autoptr (GtkListItemFactory) narrow = gtk_signal_list_item_factory_new ();
  g_autoptr (GtkListItemFactory) wide = g_object_ref (gtk_drop_down_get_factory (GTK_DROP_DOWN (drop)));

  g_signal_connect (narrow, "setup", G_CALLBACK (setup_choice_cb), NULL);
  g_signal_connect (narrow, "bind", G_CALLBACK (bind_choice_cb), NULL);
  gtk_drop_down_set_list_factory (GTK_DROP_DOWN (drop), wide);
  gtk_drop_down_set_factory (GTK_DROP_DOWN (drop), narrow);
  return drop;
}

static GtkWidget *
make_editor (UtDetails *self, guint index)
{
  const UtField *field = ut_fields_field (self->subject, index);
  GtkWidget *editor;

  if (field->kind == UT_FIELD_SWITCH)
    {
      editor = gtk_switch_new ();
      gtk_widget_set_halign (editor, GTK_ALIGN_START);
      g_signal_connect (editor, "notify::active", G_CALLBACK (editor_notify_cb), self);
    }
  else if (field->kind == UT_FIELD_CHOICE)
    {
      g_auto (GStrv) choices = ut_fields_choices (ut_desk_plan (self->desk), self->subject, index);
      GtkEventController *wheel = gtk_event_controller_scroll_new (GTK_EVENT_CONTROLLER_SCROLL_VERTICAL);

      editor = make_drop_down (choices);
      gtk_event_controller_set_propagation_phase (wheel, GTK_PHASE_CAPTURE);
      g_signal_connect (wheel, "scroll", G_CALLBACK (ignore_wheel_cb), self);
      gtk_widget_add_controller (editor, wheel);
      g_signal_connect (editor, "notify::selected", G_CALLBACK (editor_notify_cb), self);
    }
  else
    {
      GtkEventController *focus = gtk_event_controller_focus_new ();

      editor = gtk_entry_new ();
      gtk_editable_set_width_chars (GTK_EDITABLE (editor), 8);
      g_signal_connect (editor, "activate", G_CALLBACK (editor_done_cb), self);
      g_signal_connect (focus, "leave", G_CALLBACK (focus_left_cb), self);
      gtk_widget_add_controller (editor, focus);
    }
  g_object_set_data (G_OBJECT (editor), "field", GUINT_TO_POINTER (index));
  gtk_widget_set_hexpand (editor, field->kind != UT_FIELD_SWITCH);
  return editor;
}

static void
add_field (UtDetails *self, GtkGrid *grid, guint index)
{
  const UtField *field = ut_fields_field (self->subject, index);
  g_autofree char *text = field->unit != NULL ? g_strdup_printf ("%s (%s)", _ (field->label), field->unit) : g_strdup (_ (field->label));
  GtkWidget *label = gtk_label_new (text), *editor = make_editor (self, index);

  gtk_label_set_xalign (GTK_LABEL (label), 0);
  /* As wide for every subject: the sheet keeps its size when the selection changes. */
  gtk_label_set_width_chars (GTK_LABEL (label), 20);
  gtk_label_set_max_width_chars (GTK_LABEL (label), 20);
  gtk_label_set_ellipsize (GTK_LABEL (label), PANGO_ELLIPSIZE_END);
  gtk_widget_set_tooltip_text (label, text);
  gtk_label_set_mnemonic_widget (GTK_LABEL (label), editor);
  gtk_accessible_update_property (GTK_ACCESSIBLE (editor), GTK_ACCESSIBLE_PROPERTY_LABEL, text, -1);
  if (field->group != NULL)
    {
      GtkWidget *group = gtk_label_new (_ (field->group));

      gtk_label_set_xalign (GTK_LABEL (group), 0);
      gtk_widget_add_css_class (group, "group");
      gtk_grid_attach (grid, group, 0, (int) (2 * index), 2, 1);
      g_object_set_data (G_OBJECT (editor), "group", group);
    }
  gtk_grid_attach (grid, label, 0, (int) (2 * index + 1), 1, 1);
  gtk_grid_attach (grid, editor, 1, (int) (2 * index + 1), 1, 1);
  g_object_set_data (G_OBJECT (editor), "label", label);
  g_ptr_array_add (self->editors, editor);
}

static void
show_heading (UtDetails *self)
{
  guint n = ut_selection_size (ut_desk_selection (self->desk));
  g_autofree char *text = NULL;

  switch (self->subject)
    {
    case UT_SUBJECT_PLAN:
      text = g_strdup (_ ("Plan"));
      break;
    case UT_SUBJECT_CELL:
      text = n == 1 ? g_strdup_printf (_ ("Cell %s"), self->id) : g_strdup_printf (ngettext ("%u cell selected", "%u cells selected", n), n);
      break;
    case UT_SUBJECT_TERMINAL:
      text = n == 1 ? g_strdup_printf (_ ("Terminal %s"), self->id) : g_strdup_printf (ngettext ("%u terminal selected", "%u terminals selected", n), n);
      break;
    case UT_SUBJECT_WALL:
      text = n == 1 ? g_strdup_printf (_ ("Wall %s"), strchr (self->id, UT_WALL_PICK_BREAK) + 1) : g_strdup_printf (ngettext ("%u wall selected", "%u walls selected", n), n);
      break;
    case UT_SUBJECT_RADIOS:
      text = g_strdup_printf (ngettext ("%u radio selected", "%u radios selected", n), n);
      break;
    case UT_SUBJECT_MANY:
      text = g_strdup_printf (ngettext ("%u thing selected", "%u things selected", n), n);
      break;
    }
  gtk_label_set_text (self->heading, text);
}

static void
build (UtDetails *self)
{
  GtkWidget *old = gtk_widget_get_next_sibling (GTK_WIDGET (self->refusal)), *grid = gtk_grid_new ();

  self->subject = ut_fields_subject (self->desk);
  g_free (self->id);
  self->id = ut_fields_id (self->desk);
  self->showing = TRUE; /* editors that go lose their focus: that is no edit */
  g_ptr_array_set_size (self->editors, 0);
  if (GTK_IS_GRID (old))
    gtk_box_remove (GTK_BOX (self->box), old);
  gtk_grid_set_row_spacing (GTK_GRID (grid), 4);
  gtk_grid_set_column_spacing (GTK_GRID (grid), 8);
  for (guint i = 0; i < ut_fields_count (self->subject); i++)
    add_field (self, GTK_GRID (grid), i);
  gtk_box_insert_child_after (GTK_BOX (self->box), grid, GTK_WIDGET (self->refusal));
  gtk_label_set_text (self->refusal, "");
  gtk_widget_set_visible (GTK_WIDGET (self->refusal), FALSE);
  show_heading (self);
  self->showing = FALSE;
}

/* Choices that come from the plan are made anew only where the plan's lists are others: then all is. */
static gboolean
choices_hold (UtDetails *self)
{
  for (guint i = 0; i < self->editors->len; i++)
    {
      GtkWidget *editor = self->editors->pdata[i];
      g_auto (GStrv) choices = ut_fields_choices (ut_desk_plan (self->desk), self->subject, index_of (editor));
      GListModel *model = GTK_IS_DROP_DOWN (editor) ? gtk_drop_down_get_model (GTK_DROP_DOWN (editor)) : NULL;

      if (model == NULL)
        continue;
      if (g_list_model_get_n_items (model) != g_strv_length (choices))
        return FALSE;
      for (guint k = 0; choices[k] != NULL; k++)
        if (!g_str_equal (choices[k], gtk_string_list_get_string (GTK_STRING_LIST (model), k)))
          return FALSE;
    }
  return TRUE;
}

/* The one radio shown, or NULL. */
static const UtRadio *
shown_radio (UtDetails *self)
{
  if (self->desk == NULL || ut_selection_size (ut_desk_selection (self->desk)) != 1 || (self->subject != UT_SUBJECT_CELL && self->subject != UT_SUBJECT_TERMINAL))
    return NULL;
  return ut_plan_radio (ut_desk_plan (self->desk), self->subject == UT_SUBJECT_CELL ? UT_KIND_CELL : UT_KIND_TERMINAL, self->id);
}

static void
polar_draw_cb (GtkDrawingArea *area, cairo_t *cr, int width, int height, gpointer data)
{
  const UtRadio *radio = shown_radio (UT_DETAILS (data));
  const UtPalette *palette = ut_compat_palette ();

  (void) area;
  if (radio != NULL)
    ut_polar_paint (cr, ut_desk_plan (UT_DETAILS (data)->desk), radio->antenna, radio->azimuth_deg, radio->downtilt_deg, width, height, palette);
}

static void
show_polar (UtDetails *self)
{
  const UtRadio *radio = shown_radio (self);

  gtk_widget_set_visible (self->polar, radio != NULL);
  if (radio == NULL)
    return;
  g_autofree char *label = g_strdup_printf (_ ("Pattern of antenna %s: horizontal and vertical cut"), radio->antenna);
  gtk_accessible_update_property (GTK_ACCESSIBLE (self->polar), GTK_ACCESSIBLE_PROPERTY_LABEL, label, -1);
  gtk_widget_queue_draw (self->polar);
}

static void
refresh (UtDetails *self)
{
  UtSubject subject = ut_fields_subject (self->desk);
  g_autofree char *id = ut_fields_id (self->desk);

  if (!ut_fields_held (ut_desk_plan (self->desk), subject, id))
    return; /* about to be dropped from the selection */
  if (!self->built || subject != self->subject || g_strcmp0 (id, self->id) != 0 || !choices_hold (self))
    build (self);
  self->built = TRUE;
  self->showing = TRUE;
  for (guint i = 0; i < self->editors->len; i++)
    show_in_editor (self, self->editors->pdata[i]);
  show_heading (self);
  show_polar (self);
  self->showing = FALSE;
}

void
ut_details_set_desk (UtDetails *self, UtDesk *desk)
{
  if (self->desk != NULL)
    {
      g_signal_handlers_disconnect_by_func (self->desk, refresh, self);
      g_signal_handlers_disconnect_by_func (ut_desk_selection (self->desk), refresh, self);
    }
  g_set_object (&self->desk, desk);
  self->built = FALSE;
  if (desk == NULL)
    return;
  g_signal_connect_object (desk, "plan-changed", G_CALLBACK (refresh), self, G_CONNECT_SWAPPED);
  g_signal_connect_object (desk, "storey-changed", G_CALLBACK (refresh), self, G_CONNECT_SWAPPED);
  g_signal_connect_object (ut_desk_selection (desk), "changed", G_CALLBACK (refresh), self, G_CONNECT_SWAPPED);
  refresh (self);
}

static void
ut_details_dispose (GObject *object)
{
  UtDetails *self = UT_DETAILS (object);

  self->showing = TRUE;
  ut_details_set_desk (self, NULL);
  g_clear_pointer (&self->box, gtk_widget_unparent);
  G_OBJECT_CLASS (ut_details_parent_class)->dispose (object);
}

static void
ut_details_finalize (GObject *object)
{
  g_ptr_array_unref (UT_DETAILS (object)->editors);
  g_free (UT_DETAILS (object)->id);
  G_OBJECT_CLASS (ut_details_parent_class)->finalize (object);
}

static void
ut_details_class_init (UtDetailsClass *class)
{
  G_OBJECT_CLASS (class)->dispose = ut_details_dispose;
  G_OBJECT_CLASS (class)->finalize = ut_details_finalize;
  gtk_widget_class_set_layout_manager_type (GTK_WIDGET_CLASS (class), GTK_TYPE_BIN_LAYOUT);
  gtk_widget_class_set_accessible_role (GTK_WIDGET_CLASS (class), GTK_ACCESSIBLE_ROLE_GROUP);
}

static void
ut_details_init (UtDetails *self)
{
  self->editors = g_ptr_array_new ();
  self->box = gtk_box_new (GTK_ORIENTATION_VERTICAL, 8);
  gtk_widget_add_css_class (self->box, "details");
  self->heading = GTK_LABEL (gtk_label_new (NULL));
  gtk_label_set_xalign (self->heading, 0);
  gtk_widget_add_css_class (GTK_WIDGET (self->heading), "heading");
  self->refusal = GTK_LABEL (gtk_label_new (NULL));
  gtk_label_set_wrap (self->refusal, TRUE);
  gtk_label_set_xalign (self->refusal, 0);
  gtk_widget_add_css_class (GTK_WIDGET (self->refusal), "refusal");
  gtk_widget_set_visible (GTK_WIDGET (self->refusal), FALSE);
  gtk_box_append (GTK_BOX (self->box), GTK_WIDGET (self->heading));
  gtk_box_append (GTK_BOX (self->box), GTK_WIDGET (self->refusal));
  self->polar = g_object_new (GTK_TYPE_DRAWING_AREA, "accessible-role", GTK_ACCESSIBLE_ROLE_IMG, "content-height", 150, NULL);
  gtk_drawing_area_set_draw_func (GTK_DRAWING_AREA (self->polar), polar_draw_cb, self, NULL);
  gtk_box_append (GTK_BOX (self->box), self->polar);
  gtk_widget_set_parent (self->box, GTK_WIDGET (self));
  gtk_accessible_update_property (GTK_ACCESSIBLE (self), GTK_ACCESSIBLE_PROPERTY_LABEL, _ ("Details"), -1);
}
