#include "constructions.h"

#include <math.h>
#include <string.h>

#include <glib/gi18n.h>

#include "angle-plot.h"
#include "compat.h"
#include "construction-edits.h"
#include "construction-loss.h"
#include "plan-edit.h"
#include "plan-write.h"
#include "report.h"

struct _UtConstructions
{
  GtkWindow parent;
  UtDesk *desk;
  GtkListBox *list;
  GtkWidget *remove_button, *form, *layers, *plot;
  GtkEditable *name, *loss;
  GtkDropDown *wall_class;
  GtkLabel *told, *refusal;
  guint chosen;
  gboolean showing; /* widgets are being brought to the plan's state */
};

G_DEFINE_FINAL_TYPE (UtConstructions, ut_constructions, GTK_TYPE_WINDOW)

static const char *const class_words[] = { "", "light", "heavy" };

static const UtConstruction *
chosen (UtConstructions *self)
{
  const UtPlan *plan = ut_desk_plan (self->desk);

  return self->chosen < plan->constructions->len ? ut_plan_construction (plan, self->chosen) : NULL;
}

/* ---- what is shown ---- */

static void
show_text (GtkEditable *editable, const char *text)
{
  if (g_strcmp0 (gtk_editable_get_text (editable), text) != 0)
    gtk_editable_set_text (editable, text);
}

static void
show_number (GtkEditable *editable, double value)
{
  char buffer[G_ASCII_DTOSTR_BUF_SIZE];

  show_text (editable, isnan (value) ? "" : ut_number_text (value, buffer));
}

static void
show_list (UtConstructions *self)
{
  const UtPlan *plan = ut_desk_plan (self->desk);
  GtkWidget *row;

  while ((row = GTK_WIDGET (gtk_list_box_get_row_at_index (self->list, (int) plan->constructions->len))) != NULL)
    gtk_list_box_remove (self->list, row);
  for (guint i = 0; i < plan->constructions->len; i++)
    {
      GtkListBoxRow *at = gtk_list_box_get_row_at_index (self->list, (int) i);
      GtkWidget *label;

      if (at == NULL)
        {
          label = gtk_label_new (NULL);
          gtk_label_set_xalign (GTK_LABEL (label), 0);
          gtk_label_set_ellipsize (GTK_LABEL (label), PANGO_ELLIPSIZE_END);
          gtk_list_box_append (self->list, label);
          at = gtk_list_box_get_row_at_index (self->list, (int) i);
        }
      label = gtk_list_box_row_get_child (at);
      gtk_label_set_text (GTK_LABEL (label), ut_plan_construction (plan, i)->name);
    }
  if (self->chosen >= plan->constructions->len)
    self->chosen = plan->constructions->len > 0 ? plan->constructions->len - 1 : 0;
  gtk_list_box_select_row (self->list, gtk_list_box_get_row_at_index (self->list, (int) self->chosen));
}

static void
tell_loss (UtConstructions *self)
{
  const UtPlan *plan = ut_desk_plan (self->desk);
  const UtConstruction *construction = chosen (self);
  const double normal[] = { 0 };
  UtConstructionLoss loss;

  ut_construction_losses (plan, construction, normal, 1, &loss);
  g_autofree char *exact = ut_report_figure (loss.exact_db, 1), *mean = ut_report_figure (loss.averaged_db, 1);
  g_autofree char *least = ut_report_figure (loss.least_db, 1), *most = ut_report_figure (loss.most_db, 1);
  g_autofree char *text
    = isnan (construction->loss_db)
        ? g_strdup_printf (_ ("At %g MHz, straight through: %s dB at these thicknesses; %s dB on average, %s to %s dB, with all of them 15 %% less to 15 %% more. Layers by ITU-R P.2040-3."),
                           plan->carrier->frequency_mhz, exact, mean, least, most)
        : g_strdup_printf (_ ("%s dB, as typed in, at every frequency and angle."), exact);
  gtk_label_set_text (self->told, text);
}

static void refresh (UtConstructions *self);

/* A change becomes a step, or is refused with its reason. */
static void
apply (UtConstructions *self, const UtPlan *plan, char *refusal, const char *verb)
{
  const UtConstruction *construction = chosen (self);
  g_autofree char *label = g_strconcat (verb, " ", construction != NULL ? construction->name : "", NULL);

  gtk_label_set_text (self->refusal, refusal != NULL ? refusal : "");
  gtk_widget_set_visible (GTK_WIDGET (self->refusal), refusal != NULL);
  g_free (refusal);
  if (plan != NULL)
    ut_desk_apply (self->desk, plan, label, NULL);
  else
    refresh (self);
}

/* ---- layers ---- */

typedef struct
{
  UtConstructions *self;
  guint layer;
  GtkEditable *permittivity, *conductivity;
} LayerRow;

static gboolean
may_change (UtConstructions *self, guint layer)
{
  return !self->showing && chosen (self) != NULL && layer < chosen (self)->layers->len;
}

static void
material_cb (GtkDropDown *drop, GParamSpec *spec, LayerRow *row)
{
  char *refusal = NULL;

  (void) spec;
  if (may_change (row->self, row->layer))
    {
      const UtPlan *plan = ut_plan_with_layer_material (ut_desk_plan (row->self->desk), row->self->chosen, row->layer, gtk_drop_down_get_selected (drop), &refusal);

      apply (row->self, plan, refusal, _ ("Change Layer of"));
    }
}

static void
thickness_cb (GtkEditable *entry, LayerRow *row)
{
  char *refusal = NULL, buffer[G_ASCII_DTOSTR_BUF_SIZE];

  if (!may_change (row->self, row->layer)
      || g_str_equal (gtk_editable_get_text (entry),
                      ut_number_text (((const UtConstructionLayer *) chosen (row->self)->layers->pdata[row->layer])->thickness_mm, buffer)))
    return;
  const UtPlan *plan
    = ut_plan_with_layer_thickness (ut_desk_plan (row->self->desk), row->self->chosen, row->layer, gtk_editable_get_text (entry), &refusal);
  apply (row->self, plan, refusal, _ ("Change Layer of"));
}

static void
figures_cb (GtkEditable *entry, LayerRow *row)
{
  char *refusal = NULL;

  if (!may_change (row->self, row->layer))
    return;
  const UtConstructionLayer *layer = chosen (row->self)->layers->pdata[row->layer];
  char buffer[G_ASCII_DTOSTR_BUF_SIZE];
  if (g_str_equal (gtk_editable_get_text (entry), ut_number_text (entry == row->permittivity ? layer->relative_permittivity : layer->conductivity_s_m, buffer)))
    return;
  const UtPlan *plan = ut_plan_with_layer_figures (ut_desk_plan (row->self->desk),
                                                   row->self->chosen,
                                                   row->layer,
                                                   gtk_editable_get_text (row->permittivity),
                                                   gtk_editable_get_text (row->conductivity),
                                                   &refusal);
  apply (row->self, plan, refusal, _ ("Change Layer of"));
}

static void
remove_layer_cb (GtkButton *button, LayerRow *row)
{
  char *refusal = NULL;

  (void) button;
  if (may_change (row->self, row->layer))
    {
      const UtPlan *plan = ut_plan_without_layer (ut_desk_plan (row->self->desk), row->self->chosen, row->layer, &refusal);

      apply (row->self, plan, refusal, _ ("Take Layer out of"));
    }
}

static void
left_cb (GtkEventControllerFocus *controller, UtConstructions *self)
{
  if (!self->showing)
    g_signal_emit_by_name (gtk_event_controller_get_widget (GTK_EVENT_CONTROLLER (controller)), "activate");
}

/* What was typed counts when the entry is left, too. */
static void
commit_when_left (UtConstructions *self, GtkWidget *entry)
{
  GtkEventController *focus = gtk_event_controller_focus_new ();

  g_signal_connect (focus, "leave", G_CALLBACK (left_cb), self);
  gtk_widget_add_controller (entry, focus);
}

static GtkWidget *
make_entry (const char *label, double value, GCallback done, LayerRow *row)
{
  GtkWidget *entry = gtk_entry_new ();

  gtk_editable_set_width_chars (GTK_EDITABLE (entry), 7);
  show_number (GTK_EDITABLE (entry), value);
  gtk_widget_set_tooltip_text (entry, label);
  gtk_accessible_update_property (GTK_ACCESSIBLE (entry), GTK_ACCESSIBLE_PROPERTY_LABEL, label, -1);
  g_signal_connect (entry, "activate", done, row);
  commit_when_left (row->self, entry);
  return entry;
}

static GtkWidget *
make_layer_row (UtConstructions *self, guint index)
{
  const UtConstructionLayer *layer = chosen (self)->layers->pdata[index];
  GtkWidget *box = gtk_box_new (GTK_ORIENTATION_HORIZONTAL, 6), *drop, *button = gtk_button_new_from_icon_name ("list-remove-symbolic");
  g_autoptr (GtkStringList) names = gtk_string_list_new (ut_material_choices ());
  LayerRow *row = g_new0 (LayerRow, 1);
  guint at = 0;

  *row = (LayerRow){ .self = self, .layer = index };
  g_object_set_data_full (G_OBJECT (box), "row", row, g_free);
  gtk_string_list_append (names, _ ("own figures"));
  drop = gtk_drop_down_new (g_object_ref (G_LIST_MODEL (names)), NULL);
  while (at < ut_n_material_choices () && g_strcmp0 (layer->material, ut_material_choices ()[at]) != 0)
    at++;
  gtk_drop_down_set_selected (GTK_DROP_DOWN (drop), at);
  gtk_accessible_update_property (GTK_ACCESSIBLE (drop), GTK_ACCESSIBLE_PROPERTY_LABEL, _ ("Material"), -1);
  gtk_widget_set_hexpand (drop, TRUE);
  g_signal_connect (drop, "notify::selected", G_CALLBACK (material_cb), row);
  gtk_box_append (GTK_BOX (box), drop);
  gtk_box_append (GTK_BOX (box), make_entry (_ ("Thickness, mm"), layer->thickness_mm, G_CALLBACK (thickness_cb), row));
  gtk_box_append (GTK_BOX (box), gtk_label_new ("mm"));
  if (layer->material == NULL)
    {
      row->permittivity = GTK_EDITABLE (make_entry (_ ("Relative permittivity"), layer->relative_permittivity, G_CALLBACK (figures_cb), row));
      row->conductivity = GTK_EDITABLE (make_entry (_ ("Conductivity, S/m"), layer->conductivity_s_m, G_CALLBACK (figures_cb), row));
      gtk_box_append (GTK_BOX (box), GTK_WIDGET (row->permittivity));
      gtk_box_append (GTK_BOX (box), GTK_WIDGET (row->conductivity));
    }
  gtk_widget_set_sensitive (button, chosen (self)->layers->len > 1);
  gtk_accessible_update_property (GTK_ACCESSIBLE (button), GTK_ACCESSIBLE_PROPERTY_LABEL, _ ("Take this layer out"), -1);
  g_signal_connect (button, "clicked", G_CALLBACK (remove_layer_cb), row);
  gtk_box_append (GTK_BOX (box), button);
  return box;
}

static void
show_layers (UtConstructions *self)
{
  GtkWidget *child;

  while ((child = gtk_widget_get_first_child (self->layers)) != NULL)
    gtk_box_remove (GTK_BOX (self->layers), child);
  for (guint i = 0; i < chosen (self)->layers->len; i++)
    gtk_box_append (GTK_BOX (self->layers), make_layer_row (self, i));
}

static void
refresh (UtConstructions *self)
{
  const UtConstruction *construction;

  self->showing = TRUE;
  show_list (self);
  construction = chosen (self);
  gtk_widget_set_visible (self->form, construction != NULL);
  gtk_widget_set_sensitive (self->remove_button,
                            construction != NULL && ut_plan_uses_of_construction (ut_desk_plan (self->desk), construction->id) == 0);
  if (construction != NULL)
    {
      guint at = 0;

      show_text (self->name, construction->name);
      show_number (self->loss, construction->loss_db);
      while (at + 1 < G_N_ELEMENTS (class_words) && g_strcmp0 (construction->wall_class != NULL ? construction->wall_class : "", class_words[at]) != 0)
        at++;
      gtk_drop_down_set_selected (self->wall_class, at);
      show_layers (self);
      tell_loss (self);
      gtk_widget_queue_draw (self->plot);
    }
  self->showing = FALSE;
}

/* ---- what the user does ---- */

static void
row_chosen_cb (GtkListBox *list, GtkListBoxRow *row, UtConstructions *self)
{
  (void) list;
  if (self->showing || row == NULL)
    return;
  self->chosen = (guint) gtk_list_box_row_get_index (row);
  gtk_widget_set_visible (GTK_WIDGET (self->refusal), FALSE);
  refresh (self);
}

static void
name_cb (GtkEditable *entry, UtConstructions *self)
{
  char *refusal = NULL;

  if (self->showing || chosen (self) == NULL || g_str_equal (gtk_editable_get_text (entry), chosen (self)->name))
    return;
  const UtPlan *plan = ut_plan_with_construction_name (ut_desk_plan (self->desk), self->chosen, gtk_editable_get_text (entry), &refusal);
  apply (self, plan, refusal, _ ("Rename"));
}

static void
loss_cb (GtkEditable *entry, UtConstructions *self)
{
  char *refusal = NULL;

  char buffer[G_ASCII_DTOSTR_BUF_SIZE];

  if (self->showing || chosen (self) == NULL
      || g_str_equal (gtk_editable_get_text (entry), isnan (chosen (self)->loss_db) ? "" : ut_number_text (chosen (self)->loss_db, buffer)))
    return;
  const UtPlan *plan = ut_plan_with_construction_loss (ut_desk_plan (self->desk), self->chosen, gtk_editable_get_text (entry), &refusal);
  apply (self, plan, refusal, _ ("Change Loss of"));
}

static void
class_cb (GtkDropDown *drop, GParamSpec *spec, UtConstructions *self)
{
  char *refusal = NULL;
  guint at = gtk_drop_down_get_selected (drop);

  (void) spec;
  if (self->showing || chosen (self) == NULL || at >= G_N_ELEMENTS (class_words))
    return;
  const UtPlan *plan = ut_plan_with_construction_class (ut_desk_plan (self->desk), self->chosen, class_words[at], &refusal);
  apply (self, plan, refusal, _ ("Change Class of"));
}

static void
add_layer_cb (GtkButton *button, UtConstructions *self)
{
  char *refusal = NULL;

  (void) button;
  if (chosen (self) == NULL)
    return;
  const UtPlan *plan = ut_plan_with_layer_added (ut_desk_plan (self->desk), self->chosen, &refusal);
  apply (self, plan, refusal, _ ("Add Layer to"));
}

static void
add_cb (GtkButton *button, UtConstructions *self)
{
  (void) button;
  self->chosen = ut_desk_plan (self->desk)->constructions->len;
  ut_desk_apply (self->desk, ut_plan_with_new_construction (ut_desk_plan (self->desk), -1), _ ("Add Construction"), NULL);
}

static void
copy_cb (GtkButton *button, UtConstructions *self)
{
  int like = chosen (self) != NULL ? (int) self->chosen : -1;

  (void) button;
  self->chosen = ut_desk_plan (self->desk)->constructions->len;
  ut_desk_apply (self->desk, ut_plan_with_new_construction (ut_desk_plan (self->desk), like), _ ("Copy Construction"), NULL);
}

static void
remove_cb (GtkButton *button, UtConstructions *self)
{
  (void) button;
  if (chosen (self) != NULL && ut_plan_uses_of_construction (ut_desk_plan (self->desk), chosen (self)->id) == 0)
    ut_desk_apply (self->desk, ut_plan_without_construction (ut_desk_plan (self->desk), (int) self->chosen), _ ("Delete Construction"), NULL);
}

static void
plot_cb (GtkDrawingArea *area, cairo_t *cr, int width, int height, gpointer data)
{
  UtConstructions *self = data;

  (void) area;
  if (self->desk != NULL && chosen (self) != NULL)
    ut_angle_plot_paint (cr, ut_desk_plan (self->desk), chosen (self), width, height, ut_compat_palette ());
}

/* ---- life ---- */

static void
ut_constructions_dispose (GObject *object)
{
  UtConstructions *self = UT_CONSTRUCTIONS (object);

  self->showing = TRUE;
  if (self->desk != NULL)
    g_signal_handlers_disconnect_by_func (self->desk, refresh, self);
  g_clear_object (&self->desk);
  G_OBJECT_CLASS (ut_constructions_parent_class)->dispose (object);
}

static void
ut_constructions_class_init (UtConstructionsClass *class)
{
  G_OBJECT_CLASS (class)->dispose = ut_constructions_dispose;
  gtk_widget_class_add_binding_action (GTK_WIDGET_CLASS (class), GDK_KEY_Escape, 0, "window.close", NULL);
}

static GtkWidget *
icon_button (const char *icon, const char *label, GCallback clicked, UtConstructions *self)
{
  GtkWidget *button = gtk_button_new_from_icon_name (icon);

  gtk_widget_set_tooltip_text (button, label);
  gtk_accessible_update_property (GTK_ACCESSIBLE (button), GTK_ACCESSIBLE_PROPERTY_LABEL, label, -1);
  g_signal_connect (button, "clicked", clicked, self);
  return button;
}

static GtkWidget *
make_list_side (UtConstructions *self)
{
  GtkWidget *side = gtk_box_new (GTK_ORIENTATION_VERTICAL, 6), *buttons = gtk_box_new (GTK_ORIENTATION_HORIZONTAL, 6), *scroller = gtk_scrolled_window_new ();

  self->list = GTK_LIST_BOX (gtk_list_box_new ());
  gtk_list_box_set_selection_mode (self->list, GTK_SELECTION_BROWSE);
  g_signal_connect (self->list, "row-selected", G_CALLBACK (row_chosen_cb), self);
  gtk_scrolled_window_set_child (GTK_SCROLLED_WINDOW (scroller), GTK_WIDGET (self->list));
  gtk_scrolled_window_set_policy (GTK_SCROLLED_WINDOW (scroller), GTK_POLICY_NEVER, GTK_POLICY_AUTOMATIC);
  gtk_widget_set_vexpand (scroller, TRUE);
  gtk_widget_set_size_request (scroller, 190, -1);
  gtk_box_append (GTK_BOX (side), scroller);
  gtk_box_append (GTK_BOX (buttons), icon_button ("list-add-symbolic", _ ("Add a construction"), G_CALLBACK (add_cb), self));
  gtk_box_append (GTK_BOX (buttons), icon_button ("edit-copy-symbolic", _ ("Copy this construction"), G_CALLBACK (copy_cb), self));
  self->remove_button = icon_button ("list-remove-symbolic", _ ("Delete this construction, which nothing uses"), G_CALLBACK (remove_cb), self);
  gtk_box_append (GTK_BOX (buttons), self->remove_button);
  gtk_box_append (GTK_BOX (side), buttons);
  return side;
}

static void
add_labelled (GtkGrid *grid, int row, const char *text, GtkWidget *widget)
{
  GtkWidget *label = gtk_label_new (text);

  gtk_label_set_xalign (GTK_LABEL (label), 0);
  gtk_label_set_mnemonic_widget (GTK_LABEL (label), widget);
  gtk_accessible_update_property (GTK_ACCESSIBLE (widget), GTK_ACCESSIBLE_PROPERTY_LABEL, text, -1);
  gtk_widget_set_hexpand (widget, TRUE);
  gtk_grid_attach (grid, label, 0, row, 1, 1);
  gtk_grid_attach (grid, widget, 1, row, 1, 1);
}

static GtkLabel *
wrapping_label (const char *css_class)
{
  GtkLabel *label = GTK_LABEL (gtk_label_new (NULL));

  gtk_label_set_wrap (label, TRUE);
  gtk_label_set_xalign (label, 0);
  gtk_label_set_max_width_chars (label, 50);
  if (css_class != NULL)
    gtk_widget_add_css_class (GTK_WIDGET (label), css_class);
  return label;
}

static GtkWidget *
make_form (UtConstructions *self)
{
  GtkWidget *form = gtk_box_new (GTK_ORIENTATION_VERTICAL, 8), *grid = gtk_grid_new (), *add = gtk_button_new_with_label (_ ("Add a Layer"));
  const char *const classes[] = { _ ("by thickness"), _ ("light"), _ ("heavy"), NULL };

  gtk_grid_set_row_spacing (GTK_GRID (grid), 4);
  gtk_grid_set_column_spacing (GTK_GRID (grid), 8);
  self->name = GTK_EDITABLE (gtk_entry_new ());
  self->loss = GTK_EDITABLE (gtk_entry_new ());
  gtk_entry_set_placeholder_text (GTK_ENTRY (self->loss), _ ("by its layers"));
  self->wall_class = GTK_DROP_DOWN (gtk_drop_down_new_from_strings (classes));
  g_signal_connect (self->name, "activate", G_CALLBACK (name_cb), self);
  g_signal_connect (self->loss, "activate", G_CALLBACK (loss_cb), self);
  g_signal_connect (self->wall_class, "notify::selected", G_CALLBACK (class_cb), self);
  commit_when_left (self, GTK_WIDGET (self->name));
  commit_when_left (self, GTK_WIDGET (self->loss));
  add_labelled (GTK_GRID (grid), 0, _ ("Name"), GTK_WIDGET (self->name));
  add_labelled (GTK_GRID (grid), 1, _ ("Measured loss (dB)"), GTK_WIDGET (self->loss));
  add_labelled (GTK_GRID (grid), 2, _ ("Class (multi-wall law)"), GTK_WIDGET (self->wall_class));
  self->layers = gtk_box_new (GTK_ORIENTATION_VERTICAL, 4);
  self->told = wrapping_label (NULL);
  self->refusal = wrapping_label ("refusal");
  gtk_widget_set_visible (GTK_WIDGET (self->refusal), FALSE);
  self->plot = g_object_new (GTK_TYPE_DRAWING_AREA, "accessible-role", GTK_ACCESSIBLE_ROLE_IMG, "content-width", 420, "content-height", 210, NULL);
  gtk_widget_set_vexpand (self->plot, TRUE);
  gtk_accessible_update_property (GTK_ACCESSIBLE (self->plot), GTK_ACCESSIBLE_PROPERTY_LABEL, _ ("Loss against the angle from the normal"), -1);
  gtk_drawing_area_set_draw_func (GTK_DRAWING_AREA (self->plot), plot_cb, self, NULL);
  gtk_widget_set_halign (add, GTK_ALIGN_START);
  g_signal_connect (add, "clicked", G_CALLBACK (add_layer_cb), self);
  gtk_box_append (GTK_BOX (form), grid);
  gtk_box_append (GTK_BOX (form), self->layers);
  gtk_box_append (GTK_BOX (form), add);
  gtk_box_append (GTK_BOX (form), GTK_WIDGET (self->refusal));
  gtk_box_append (GTK_BOX (form), GTK_WIDGET (self->told));
  gtk_box_append (GTK_BOX (form), self->plot);
  return form;
}

static void
ut_constructions_init (UtConstructions *self)
{
  GtkWidget *box = gtk_box_new (GTK_ORIENTATION_HORIZONTAL, 12);

  gtk_window_set_title (GTK_WINDOW (self), _ ("Constructions"));
  gtk_window_set_default_size (GTK_WINDOW (self), 720, 560);
  gtk_widget_set_margin_start (box, 12);
  gtk_widget_set_margin_end (box, 12);
  gtk_widget_set_margin_top (box, 12);
  gtk_widget_set_margin_bottom (box, 12);
  gtk_box_append (GTK_BOX (box), make_list_side (self));
  self->form = make_form (self);
  gtk_widget_set_hexpand (self->form, TRUE);
  gtk_box_append (GTK_BOX (box), self->form);
  gtk_window_set_child (GTK_WINDOW (self), box);
}

GtkWidget *
ut_constructions_new (UtDesk *desk, GtkWindow *parent)
{
  UtConstructions *self = g_object_new (UT_TYPE_CONSTRUCTIONS, "transient-for", parent, "destroy-with-parent", TRUE, NULL);

  self->desk = g_object_ref (desk);
  g_signal_connect_object (desk, "plan-changed", G_CALLBACK (refresh), self, G_CONNECT_SWAPPED);
  refresh (self);
  return GTK_WIDGET (self);
}
