#include "plan.h"

#include "plan-schema.h"

#define DEFINE_ITEM(Type, type, kind)                                                              \
  Type *type##_new (void) { return ut_kind_new (&kind); }                                          \
  Type *type##_copy (const Type *item) { return ut_kind_copy (&kind, item, FALSE); }               \
  const Type *type##_ref (const Type *item) { return g_atomic_rc_box_acquire ((gpointer)item); }   \
  static void type##_clear (gpointer item) { ut_kind_clear (&kind, item); }                        \
  void type##_unref (const Type *item)                                                             \
  {                                                                                                \
    g_atomic_rc_box_release_full ((gpointer)item, type##_clear);                                   \
  }

DEFINE_ITEM (UtSite, ut_site, ut_kind_site)
DEFINE_ITEM (UtCarrier, ut_carrier, ut_kind_carrier)
DEFINE_ITEM (UtPropagation, ut_propagation, ut_kind_propagation)
DEFINE_ITEM (UtConstructionLayer, ut_construction_layer, ut_kind_construction_layer)
DEFINE_ITEM (UtConstruction, ut_construction, ut_kind_construction)
DEFINE_ITEM (UtOpening, ut_opening, ut_kind_opening)
DEFINE_ITEM (UtWall, ut_wall, ut_kind_wall)
DEFINE_ITEM (UtBackdrop, ut_backdrop, ut_kind_backdrop)
DEFINE_ITEM (UtStorey, ut_storey, ut_kind_storey)
DEFINE_ITEM (UtAntenna, ut_antenna, ut_kind_antenna)
DEFINE_ITEM (UtCell, ut_cell, ut_kind_cell)
DEFINE_ITEM (UtTerminal, ut_terminal, ut_kind_terminal)
DEFINE_ITEM (UtMeasuredGain, ut_measured_gain, ut_kind_measured_gain)

const UtPlan *
ut_plan_ref (const UtPlan *plan)
{
  return g_atomic_rc_box_acquire ((gpointer)plan);
}

static void
plan_clear (gpointer plan)
{
  ut_kind_clear (&ut_kind_plan, plan);
}

void
ut_plan_unref (const UtPlan *plan)
{
  g_atomic_rc_box_release_full ((gpointer)plan, plan_clear);
}

const UtPlan *
ut_plan_new_empty (void)
{
  UtPlan *plan = ut_kind_new (&ut_kind_plan);
  plan->carrier->margin_db = 3;
  plan->propagation->slab = UT_SLAB_AVERAGED;

  UtStorey *storey = ut_storey_new ();
  g_free (storey->id);
  storey->id = g_strdup ("S1");
  storey->name = g_strdup ("S1");
  g_ptr_array_add (plan->storeys, storey);
  return plan;
}

/* Ids are compared in file order: lists are short, and a plan that is shared between threads keeps
 * no cache. */
#define DEFINE_FIND(Type, list, find, id_of)                                                       \
  int find (const UtPlan *plan, const char *id)                                                    \
  {                                                                                                \
    for (guint i = 0; id != NULL && i < plan->list->len; i++)                                      \
      if (g_str_equal (((const Type *)plan->list->pdata[i])->id_of, id))                           \
        return (int)i;                                                                             \
    return -1;                                                                                     \
  }

DEFINE_FIND (UtCell, cells, ut_plan_find_cell, radio.id)
DEFINE_FIND (UtTerminal, terminals, ut_plan_find_terminal, radio.id)
DEFINE_FIND (UtStorey, storeys, ut_plan_find_storey, id)
DEFINE_FIND (UtConstruction, constructions, ut_plan_find_construction, id)
DEFINE_FIND (UtAntenna, antennas, ut_plan_find_antenna, id)

int
ut_storey_find_wall (const UtStorey *storey, const char *id)
{
  for (guint i = 0; i < storey->walls->len; i++)
    if (g_strcmp0 (((const UtWall *)storey->walls->pdata[i])->id, id) == 0)
      return (int)i;
  return -1;
}
