#include "presets.h"

#include <math.h>

#include <gio/gio.h>
#include <glib/gi18n.h>

#include "document.h"
#include "fragment.h"
#include "plan-edit.h"
#include "plan-read.h"
#include "plan-write.h"

struct _UtPresets
{
  GObject parent;
  GFile *file;
  GFileMonitor *monitor;
  GArray *presets; /* of UtPreset */
};

G_DEFINE_FINAL_TYPE (UtPresets, ut_presets, G_TYPE_OBJECT)

enum { CHANGED, N_SIGNALS };
static guint signals[N_SIGNALS];

/* Heights by use: common practice. */
static const struct
{
  const char *name;
  UtRadioKind kind;
  double height_m;
} built_in[] = {
  { N_ ("Cell"), UT_KIND_CELL, NAN },
  { N_ ("Terminal"), UT_KIND_TERMINAL, NAN },
  { N_ ("In hand"), UT_KIND_TERMINAL, 1.2 },
  { N_ ("On a vehicle"), UT_KIND_TERMINAL, 2.3 },
  { N_ ("Near the floor"), UT_KIND_TERMINAL, 0.3 },
  { N_ ("On a shelf"), UT_KIND_TERMINAL, 1.8 },
};

static void
clear_preset (gpointer data)
{
  UtPreset *preset = data;

  g_free (preset->name);
  g_free (preset->id);
  g_clear_pointer (&preset->plan, ut_plan_unref);
}

static void
add_radio (UtPresets *self, const UtPlan *plan, const UtRadio *radio, UtRadioKind kind)
{
  UtPreset preset = { g_strdup (radio->name), kind, NAN, ut_plan_ref (plan), g_strdup (radio->id) };

  g_array_append_val (self->presets, preset);
}

static void
load (UtPresets *self)
{
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  g_autoptr (UtPlan) plan = (UtPlan *) ut_plan_read_file (self->file, faults, NULL);

  g_array_set_size (self->presets, 0);
  for (gsize i = 0; i < G_N_ELEMENTS (built_in); i++)
    {
      UtPreset preset = { g_strdup (_ (built_in[i].name)), built_in[i].kind, built_in[i].height_m, NULL, NULL };

      g_array_append_val (self->presets, preset);
    }
  for (guint i = 0; plan != NULL && i < plan->cells->len; i++)
    add_radio (self, plan, &ut_plan_cell (plan, i)->radio, UT_KIND_CELL);
  for (guint i = 0; plan != NULL && i < plan->terminals->len; i++)
    add_radio (self, plan, &ut_plan_terminal (plan, i)->radio, UT_KIND_TERMINAL);
  g_signal_emit (self, signals[CHANGED], 0);
}

static void
file_changed_cb (GFileMonitor *monitor, GFile *file, GFile *other, GFileMonitorEvent event, UtPresets *self)
{
  (void) monitor;
  (void) file;
  (void) other;
  if (event == G_FILE_MONITOR_EVENT_CHANGES_DONE_HINT || event == G_FILE_MONITOR_EVENT_DELETED || event == G_FILE_MONITOR_EVENT_RENAMED)
    load (self);
}

static void
ut_presets_finalize (GObject *object)
{
  UtPresets *self = UT_PRESETS (object);

  g_clear_object (&self->monitor);
  g_clear_object (&self->file);
  g_array_unref (self->presets);
  G_OBJECT_CLASS (ut_presets_parent_class)->finalize (object);
}

static void
ut_presets_class_init (UtPresetsClass *class)
{
  G_OBJECT_CLASS (class)->finalize = ut_presets_finalize;
  signals[CHANGED] = g_signal_new ("changed", UT_TYPE_PRESETS, G_SIGNAL_RUN_LAST, 0, NULL, NULL, NULL, G_TYPE_NONE, 0);
}

static void
ut_presets_init (UtPresets *self)
{
  self->presets = g_array_new (FALSE, FALSE, sizeof (UtPreset));
  g_array_set_clear_func (self->presets, clear_preset);
}

UtPresets *
ut_presets_new (GFile *file)
{
  UtPresets *self = g_object_new (UT_TYPE_PRESETS, NULL);

  self->file = g_object_ref (file);
  self->monitor = g_file_monitor_file (file, G_FILE_MONITOR_NONE, NULL, NULL);
  if (self->monitor != NULL)
    g_signal_connect_object (self->monitor, "changed", G_CALLBACK (file_changed_cb), self, 0);
  load (self);
  return self;
}

UtPresets *
ut_presets_get_default (void)
{
  static UtPresets *presets;

  if (presets == NULL)
    {
      g_autofree char *path = g_build_filename (g_get_user_config_dir (), "undertone", "presets.undertone", NULL);
      g_autoptr (GFile) file = g_file_new_for_path (path);

      presets = ut_presets_new (file);
    }
  return presets;
}

GFile *
ut_presets_file (UtPresets *self)
{
  return self->file;
}

guint
ut_presets_count (UtPresets *self)
{
  return self->presets->len;
}

const UtPreset *
ut_presets_get (UtPresets *self, guint index)
{
  return &g_array_index (self->presets, UtPreset, index);
}

/* The presets' plan without a radio of that kind and name. */
static const UtPlan *
without_name (const UtPlan *plan, UtRadioKind kind, const char *name)
{
  for (guint i = 0; kind == UT_KIND_CELL && i < plan->cells->len; i++)
    if (g_str_equal (ut_plan_cell (plan, i)->radio.name, name))
      return ut_plan_without_cell (plan, (int) i);
  for (guint i = 0; kind == UT_KIND_TERMINAL && i < plan->terminals->len; i++)
    if (g_str_equal (ut_plan_terminal (plan, i)->radio.name, name))
      return ut_plan_without_terminal (plan, (int) i);
  return ut_plan_ref (plan);
}

/* Presets lie side by side on their plan, so that it can be looked at. */
static const UtPlan *
with_radio (const UtPlan *presets, const UtPlan *plan, UtRadioKind kind, const char *id)
{
  g_autoptr (UtSelection) one = ut_selection_new ();
  const UtRadio *radio = ut_plan_radio (plan, kind, id);
  g_autoptr (UtPlan) without = (UtPlan *) without_name (presets, kind, radio->name);
  g_autoptr (UtPlan) fragment = NULL;
  g_autofree char *added = NULL;

  ut_selection_add (one, kind, id);
  fragment = (UtPlan *) ut_plan_fragment (plan, one);
  return ut_plan_with_fragment (without,
                                fragment,
                                0,
                                2.0 * (without->cells->len + without->terminals->len) - radio->x_m,
                                (kind == UT_KIND_CELL ? 2 : 0) - radio->y_m,
                                FALSE,
                                &added);
}

gboolean
ut_presets_add (UtPresets *self, const UtPlan *plan, UtRadioKind kind, const char *id, GError **error)
{
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  g_autoptr (GFile) folder = g_file_get_parent (self->file);
  g_autoptr (UtPlan) presets = NULL, with = NULL;
  gboolean written;

  if (g_file_query_exists (self->file, NULL))
    {
      presets = (UtPlan *) ut_plan_read_file (self->file, faults, error);
      if (presets == NULL && faults->len > 0)
        g_set_error_literal (error, G_IO_ERROR, G_IO_ERROR_INVALID_DATA, ((const UtFault *) faults->pdata[0])->message);
      if (presets == NULL)
        return FALSE;
    }
  else
    {
      g_autoptr (UtPlan) empty = (UtPlan *) ut_plan_new_empty ();

      presets = (UtPlan *) ut_plan_with_title (empty, _ ("Presets of radios"));
      g_file_make_directory_with_parents (folder, NULL, NULL);
    }
  with = (UtPlan *) with_radio (presets, plan, kind, id);
  written = ut_plan_write_file (with, self->file, NULL, NULL, error);
  if (written)
    load (self);
  return written;
}
