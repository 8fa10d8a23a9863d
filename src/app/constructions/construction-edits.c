#include "construction-edits.h"

#include <math.h>
#include <string.h>

#include <glib/gi18n.h>

#include "plan-edit.h"
#include "plan-read.h"
#include "plan-write.h"

/* What plan/ knows: a test compares. */
static const char *const materials[] = { "concrete", "brick", "plasterboard", "wood", "glass", "ceiling-board", "chipboard", "plywood", "marble", "floorboard", "metal", "air", NULL };

const char *const *
ut_material_choices (void)
{
  return materials;
}

guint
ut_n_material_choices (void)
{
  return G_N_ELEMENTS (materials) - 1;
}

/* The reader is the one judge of what a plan may hold. */
static const UtPlan *
judged (const UtPlan *plan, char **refusal)
{
  gsize length;
  g_autofree char *text = ut_plan_write (plan, &length);
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  g_autoptr (UtPlan) again = (UtPlan *) ut_plan_read (text, length, faults);

  if (again != NULL)
    return plan;
  *refusal = g_strdup (((const UtFault *) faults->pdata[0])->message);
  ut_plan_unref (plan);
  return NULL;
}

static const UtPlan *
with (const UtPlan *plan, guint index, UtConstruction *construction, char **refusal)
{
  return judged (ut_plan_with_construction (plan, (int) index, construction), refusal);
}

static UtConstruction *
copy_of (const UtPlan *plan, guint index)
{
  return ut_construction_copy (ut_plan_construction (plan, index));
}

/* A copy of a layer in its place, to be changed. */
static UtConstructionLayer *
own_layer (UtConstruction *construction, guint layer)
{
  UtConstructionLayer *own = ut_construction_layer_copy (construction->layers->pdata[layer]);

  ut_construction_layer_unref (construction->layers->pdata[layer]);
  construction->layers->pdata[layer] = own;
  return own;
}

static gboolean
parse (const char *text, double *value, char **refusal)
{
  g_autoptr (GString) plain = g_string_new (text);
  char *end;

  g_string_replace (plain, ",", ".", 0);
  g_strstrip (plain->str);
  *value = g_ascii_strtod (plain->str, &end);
  if (end != plain->str && *end == '\0' && isfinite (*value))
    return TRUE;
  *refusal = g_strdup_printf (_ ("“%s” is no value for this; expected a number"), text);
  return FALSE;
}

const UtPlan *
ut_plan_with_construction_name (const UtPlan *plan, guint index, const char *name, char **refusal)
{
  UtConstruction *construction = copy_of (plan, index);

  g_free (construction->name);
  construction->name = g_strdup (name[0] != '\0' ? name : construction->id);
  return with (plan, index, construction, refusal);
}

static void
add_layer (UtConstruction *construction)
{
  UtConstructionLayer *layer = ut_construction_layer_new ();

  g_ptr_array_add (construction->layers, layer);
}

const UtPlan *
ut_plan_with_construction_loss (const UtPlan *plan, guint index, const char *text, char **refusal)
{
  UtConstruction *construction;
  double loss_db = NAN;

  if (text[strspn (text, " ")] != '\0' && !parse (text, &loss_db, refusal))
    return NULL;
  construction = copy_of (plan, index);
  construction->loss_db = loss_db;
  if (isnan (loss_db) && construction->layers->len == 0)
    add_layer (construction);
  else if (!isnan (loss_db))
    g_ptr_array_set_size (construction->layers, 0);
  return with (plan, index, construction, refusal);
}

const UtPlan *
ut_plan_with_construction_class (const UtPlan *plan, guint index, const char *word, char **refusal)
{
  UtConstruction *construction = copy_of (plan, index);

  g_free (construction->wall_class);
  construction->wall_class = word[0] != '\0' ? g_strdup (word) : NULL;
  return with (plan, index, construction, refusal);
}

const UtPlan *
ut_plan_with_layer_added (const UtPlan *plan, guint index, char **refusal)
{
  UtConstruction *construction = copy_of (plan, index);

  add_layer (construction);
  construction->loss_db = NAN;
  return with (plan, index, construction, refusal);
}

const UtPlan *
ut_plan_without_layer (const UtPlan *plan, guint index, guint layer, char **refusal)
{
  UtConstruction *construction = copy_of (plan, index);

  g_ptr_array_remove_index (construction->layers, layer);
  return with (plan, index, construction, refusal);
}

const UtPlan *
ut_plan_with_layer_material (const UtPlan *plan, guint index, guint layer, guint choice, char **refusal)
{
  UtConstruction *construction = copy_of (plan, index);
  UtConstructionLayer *own = own_layer (construction, layer);

  g_clear_pointer (&own->material, g_free);
  if (choice < ut_n_material_choices ())
    own->material = g_strdup (materials[choice]);
  else
    {
      /* Something to begin with, about that of dry timber (common practice). */
      own->relative_permittivity = MAX (own->relative_permittivity, 2);
      own->conductivity_s_m = own->conductivity_s_m > 0 ? own->conductivity_s_m : 0.02;
    }
  return with (plan, index, construction, refusal);
}

const UtPlan *
ut_plan_with_layer_thickness (const UtPlan *plan, guint index, guint layer, const char *text_mm, char **refusal)
{
  UtConstruction *construction;
  double thickness_mm;

  if (!parse (text_mm, &thickness_mm, refusal))
    return NULL;
  construction = copy_of (plan, index);
  own_layer (construction, layer)->thickness_mm = thickness_mm;
  return with (plan, index, construction, refusal);
}

const UtPlan *
ut_plan_with_layer_figures (const UtPlan *plan, guint index, guint layer, const char *permittivity, const char *conductivity, char **refusal)
{
  UtConstruction *construction;
  double relative_permittivity, conductivity_s_m;

  if (!parse (permittivity, &relative_permittivity, refusal) || !parse (conductivity, &conductivity_s_m, refusal))
    return NULL;
  construction = copy_of (plan, index);
  UtConstructionLayer *own = own_layer (construction, layer);
  own->relative_permittivity = relative_permittivity;
  own->conductivity_s_m = conductivity_s_m;
  return with (plan, index, construction, refusal);
}

const UtPlan *
ut_plan_with_new_construction (const UtPlan *plan, int like)
{
  UtConstruction *construction = like >= 0 ? copy_of (plan, (guint) like) : ut_construction_new ();
  g_autofree char *id = ut_plan_free_construction_id (plan);

  g_free (construction->id);
  g_free (construction->name);
  construction->id = g_strdup (id);
  construction->name = like >= 0 ? g_strdup_printf (_ ("%s, copy"), ut_plan_construction (plan, (guint) like)->name) : g_strdup (_ ("New construction"));
  if (like < 0)
    add_layer (construction);
  return ut_plan_with_construction (plan, -1, construction);
}
