/* Changes of one construction, from plan to plan. No widgets. */
#pragma once

#include "plan.h"

/* Materials by their id, in the order of choices; NULL-terminated. A layer of the plan's own figures comes after them. */
const char *const *ut_material_choices (void);
guint ut_n_material_choices (void);

/* All take the index of the construction, and give a plan (transfer full) or NULL with *refusal (transfer full) where it would be none. */
const UtPlan *ut_plan_with_construction_name (const UtPlan *plan, guint index, const char *name, char **refusal) G_GNUC_WARN_UNUSED_RESULT;
/* text: a loss in dB, or nothing: by layers (one of concrete where there were none). */
const UtPlan *ut_plan_with_construction_loss (const UtPlan *plan, guint index, const char *text, char **refusal) G_GNUC_WARN_UNUSED_RESULT;
/* "" | "light" | "heavy" */
const UtPlan *ut_plan_with_construction_class (const UtPlan *plan, guint index, const char *word, char **refusal) G_GNUC_WARN_UNUSED_RESULT;
const UtPlan *ut_plan_with_layer_added (const UtPlan *plan, guint index, char **refusal) G_GNUC_WARN_UNUSED_RESULT;
const UtPlan *ut_plan_without_layer (const UtPlan *plan, guint index, guint layer, char **refusal) G_GNUC_WARN_UNUSED_RESULT;
const UtPlan *ut_plan_with_layer_material (const UtPlan *plan, guint index, guint layer, guint choice, char **refusal) G_GNUC_WARN_UNUSED_RESULT;
const UtPlan *ut_plan_with_layer_thickness (const UtPlan *plan, guint index, guint layer, const char *text_mm, char **refusal) G_GNUC_WARN_UNUSED_RESULT;
/* Of a layer with figures of its own: relative permittivity, conductivity in S/m. */
const UtPlan *ut_plan_with_layer_figures (const UtPlan *plan, guint index, guint layer, const char *permittivity, const char *conductivity, char **refusal)
  G_GNUC_WARN_UNUSED_RESULT;

/* A new one, a copy of `like` (an index, or -1: one layer of concrete). */
const UtPlan *ut_plan_with_new_construction (const UtPlan *plan, int like) G_GNUC_WARN_UNUSED_RESULT;
