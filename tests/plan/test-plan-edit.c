/* Edits share what they do not touch and leave the plan they begin with as it was. */
#include <math.h>

#include "plan-check.h"
#include "plan-edit.h"
#include "plan-text.h"

typedef const UtPlan *(*Edit) (const UtPlan *plan);

static void
set_text (char **field, const char *text)
{
  g_free (*field);
  *field = g_strdup (text);
}

static const UtPlan *
edit_title (const UtPlan *plan)
{
  return ut_plan_with_title (plan, "Dock");
}

static const UtPlan *
edit_carrier (const UtPlan *plan)
{
  UtCarrier *carrier = ut_carrier_copy (plan->carrier);
  carrier->margin_db = 4;
  g_array_set_size (carrier->channel_isolation_db, 0);
  return ut_plan_with_carrier (plan, carrier);
}

static const UtPlan *
edit_law (const UtPlan *plan)
{
  UtPropagation *propagation = ut_propagation_copy (plan->propagation);
  propagation->law = UT_BASE_FREE_SPACE;
  return ut_plan_with_propagation (plan, propagation);
}

static const UtPlan *
edit_cell_id (const UtPlan *plan)
{
  UtCell *cell = ut_cell_copy (ut_plan_cell (plan, 0));
  set_text (&cell->radio.id, "Dock");
  return ut_plan_with_cell (plan, 0, cell);
}

static const UtPlan *
add_cell (const UtPlan *plan)
{
  UtCell *cell = ut_cell_new ();
  g_free (cell->radio.id);
  cell->radio.id = ut_plan_free_cell_id (plan);
  set_text (&cell->radio.storey, "S1");
  return ut_plan_with_cell (plan, -1, cell);
}

static const UtPlan *
add_terminal (const UtPlan *plan)
{
  UtTerminal *terminal = ut_terminal_new ();
  g_free (terminal->radio.id);
  terminal->radio.id = ut_plan_free_terminal_id (plan);
  set_text (&terminal->radio.storey, "S1");
  return ut_plan_with_terminal (plan, -1, terminal);
}

static const UtPlan *
edit_terminal_id (const UtPlan *plan)
{
  UtTerminal *terminal = ut_terminal_copy (ut_plan_terminal (plan, 0));
  set_text (&terminal->radio.id, "Lift");
  terminal->target_down_db = NAN;
  return ut_plan_with_terminal (plan, 0, terminal);
}

static const UtPlan *
edit_storey_id (const UtPlan *plan)
{
  UtStorey *storey = ut_storey_copy (ut_plan_storey (plan, 0));
  set_text (&storey->id, "Ground");
  return ut_plan_with_storey (plan, 0, storey);
}

/* From a typed-in loss to layers, under another id. */
static const UtPlan *
edit_construction (const UtPlan *plan)
{
  UtConstruction *construction = ut_construction_copy (ut_plan_construction (plan, 1));
  set_text (&construction->id, "glazing");
  construction->loss_db = NAN;
  UtConstructionLayer *layer = ut_construction_layer_new ();
  set_text (&layer->material, "glass");
  layer->thickness_mm = 4;
  g_ptr_array_add (construction->layers, layer);
  return ut_plan_with_construction (plan, 1, construction);
}

static const UtPlan *
remove_cell (const UtPlan *plan)
{
  return ut_plan_without_cell (plan, 0);
}

static const UtPlan *
remove_terminal (const UtPlan *plan)
{
  return ut_plan_without_terminal (plan, 0);
}

static const struct
{
  const char *name;
  Edit edit;
  const char *expected; /* in the text afterwards */
  const char *gone;     /* from the text */
} edits[] = {
  { "title", edit_title, "  },\n  \"title\": \"Dock\"\n}\n", NULL },
  { "carrier", edit_carrier, "\"channel_isolation_db\": [],\n    \"margin_db\": 4\n", "45.5" },
  { "law", edit_law, "\"law\": \"free-space\"", "log-distance" },
  { "cell-id", edit_cell_id, "\"Dock\": -78.2", "\"C1\": -" },
  { "add-cell",
    add_cell,
    "\"id\": \"C2\",\n      \"name\": \"C2\",\n      \"storey\": \"S1\"",
    NULL },
  { "add-terminal",
    add_terminal,
    "\"id\": \"T2\",\n      \"name\": \"T2\",\n      \"storey\": \"S1\"",
    NULL },
  { "terminal-id", edit_terminal_id, "\"Lift\": {\n      \"C1\": -78.2", "\"T1\": {" },
  { "storey-id", edit_storey_id, "\"storey\": \"Ground\"", "\"storey\": \"S1\"" },
  { "construction", edit_construction, "\"construction\": \"glazing\"", "loss_db" },
  { "remove-cell", remove_cell, "\"cell\": null", "-78.2" },
  { "remove-terminal",
    remove_terminal,
    "\"terminals\": [],\n  \"measured_gains_db\": {}",
    "-78.2" },
};

static void
test_edits (void)
{
  for (guint i = 0; i < G_N_ELEMENTS (edits); i++)
    {
      g_test_message ("%s", edits[i].name);
      g_autoptr (UtPlan) before = (UtPlan *)read_valid (small_plan);
      g_autoptr (UtPlan) after = (UtPlan *)edits[i].edit (before);
      g_autofree char *text_before = written (before);
      g_assert_cmpstr (text_before, ==, small_plan);

      g_autofree char *text = written (after);
      g_assert_nonnull (strstr (text, edits[i].expected));
      if (edits[i].gone != NULL)
        g_assert_null (strstr (text, edits[i].gone));
      /* What edits make is valid, and reads back to itself. */
      g_autoptr (UtPlan) again = (UtPlan *)read_valid (text);
      g_autofree char *text_again = written (again);
      g_assert_cmpstr (text_again, ==, text);
    }
}

static void
test_sharing (void)
{
  g_autoptr (UtPlan) plan = (UtPlan *)read_valid (small_plan);
  g_autoptr (UtPlan) two = (UtPlan *)add_cell (plan);
  g_assert_true (ut_plan_cell (two, 0) == ut_plan_cell (plan, 0));
  g_assert_true (ut_plan_terminal (two, 0) == ut_plan_terminal (plan, 0));
  g_assert_true (two->carrier == plan->carrier && two->propagation == plan->propagation
                 && two->site == plan->site);
  g_assert_true (ut_plan_storey (two, 0) == ut_plan_storey (plan, 0));

  /* Only the terminal that named the cell becomes another. */
  g_autoptr (UtPlan) three = (UtPlan *)add_terminal (two);
  g_autoptr (UtPlan) without = (UtPlan *)ut_plan_without_cell (three, 0);
  g_assert_true (ut_plan_terminal (without, 0) != ut_plan_terminal (three, 0));
  g_assert_true (ut_plan_terminal (without, 1) == ut_plan_terminal (three, 1));
  g_assert_true (ut_plan_cell (without, 0) == ut_plan_cell (three, 1));
  g_assert_cmpuint (three->measured_gains->len, ==, 1);
  g_assert_cmpuint (without->measured_gains->len, ==, 0);
  g_autoptr (UtPlan) other = (UtPlan *)ut_plan_without_cell (three, 1);
  g_assert_true (ut_plan_terminal (other, 0) == ut_plan_terminal (three, 0));
  g_assert_true (other->measured_gains->pdata[0] == three->measured_gains->pdata[0]);

  /* A copy's lists are its own, their items are shared. */
  UtStorey *storey = ut_storey_copy (ut_plan_storey (plan, 0));
  g_assert_true (storey->walls != ut_plan_storey (plan, 0)->walls);
  g_assert_true (storey->walls->pdata[0] == ut_plan_storey (plan, 0)->walls->pdata[0]);
  ut_storey_unref (storey);
}

static void
test_free_ids (void)
{
  g_autoptr (UtPlan) plan = (UtPlan *)read_valid (small_plan);
  g_autoptr (UtPlan) renamed = (UtPlan *)edit_cell_id (plan);
  g_autofree char *second = ut_plan_free_cell_id (plan), *first = ut_plan_free_cell_id (renamed);
  g_assert_cmpstr (second, ==, "C2");
  g_assert_cmpstr (first, ==, "C1");
}

/* A new item of every kind carries the file's defaults and leaves nothing behind. */
static void
test_new_items (void)
{
#define CHECK_ITEM(Type, type)                                                                     \
  {                                                                                                \
    Type *item = type##_new ();                                                                    \
    Type *copy = type##_copy (item);                                                               \
    g_assert_true (type##_ref (copy) == copy);                                                     \
    type##_unref (copy);                                                                           \
    type##_unref (item);                                                                           \
    type##_unref (copy);                                                                           \
  }
  CHECK_ITEM (UtSite, ut_site)
  CHECK_ITEM (UtCarrier, ut_carrier)
  CHECK_ITEM (UtPropagation, ut_propagation)
  CHECK_ITEM (UtConstructionLayer, ut_construction_layer)
  CHECK_ITEM (UtConstruction, ut_construction)
  CHECK_ITEM (UtOpening, ut_opening)
  CHECK_ITEM (UtWall, ut_wall)
  CHECK_ITEM (UtBackdrop, ut_backdrop)
  CHECK_ITEM (UtStorey, ut_storey)
  CHECK_ITEM (UtAntenna, ut_antenna)
  CHECK_ITEM (UtCell, ut_cell)
  CHECK_ITEM (UtTerminal, ut_terminal)
  CHECK_ITEM (UtMeasuredGain, ut_measured_gain)
  g_autoptr (UtOpening) opening = ut_opening_new ();
  g_assert_true (opening->shut && opening->sill_m == 0 && isnan (opening->head_m));
}

/* Warnings: the change that brings it, its path and a word of it; NULL: none. */
static void
test_warnings (void)
{
  static const struct
  {
    const char *from, *to, *path, *word;
  } cases[] = {
    { "\"x_m\": 5", "\"x_m\": 6", NULL, NULL },
    { "\"power_dbm\": 24,",
      "\"power_dbm\": 25,",
      "cells[0].power_dbm",
      "25 dBm is outside its limits; expected -10 to 24.5 dBm" },
    { "\"power_dbm\": 24,", "\"power_dbm\": -11,", "cells[0].power_dbm", "outside" },
    { "\"power_dbm\": 23,", "\"power_dbm\": 22.5,", NULL, NULL },
    { "\"power_dbm\": 23,", "\"power_dbm\": 22.7,", "terminals[0].power_dbm", "steps of 0.5 dB" },
    { "\"id\": \"C1\"", "\"id\": \"C1\", \"on\": false", "terminals[0].cell", "\"C1\" is off" },
    { "\"at_m\": 3", "\"at_m\": 40", "storeys[0].walls[0].openings[0].at_m", "less than 40 m" },
    { "\"at_m\": 3", "\"at_m\": 39", NULL, NULL },
    { "\"at_m\": 3",
      "\"at_m\": 3, \"sill_m\": 2, \"head_m\": 2",
      "storeys[0].walls[0].openings[0].head_m",
      "no height" },
  };
  for (guint i = 0; i < G_N_ELEMENTS (cases); i++)
    {
      g_autofree char *text = replaced (small_plan, cases[i].from, cases[i].to);
      g_autoptr (UtPlan) plan = (UtPlan *)read_valid (text);
      g_autoptr (GPtrArray) warnings = ut_faults_new ();
      ut_plan_warnings (plan, warnings);
      g_assert_cmpuint (warnings->len, ==, cases[i].path != NULL ? 1 : 0);
      if (cases[i].path == NULL)
        continue;
      const UtFault *warning = warnings->pdata[0];
      g_assert_cmpstr (warning->path, ==, cases[i].path);
      g_assert_nonnull (strstr (warning->message, cases[i].word));
    }
}

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  g_test_add_func ("/plan-edit/edits", test_edits);
  g_test_add_func ("/plan-edit/sharing", test_sharing);
  g_test_add_func ("/plan-edit/free-ids", test_free_ids);
  g_test_add_func ("/plan-edit/new-items", test_new_items);
  g_test_add_func ("/plan-check/warnings", test_warnings);
  return g_test_run ();
}
