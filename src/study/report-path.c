/* How one gain comes about, as JSON and text. */
#include "report.h"

#include <math.h>

#include "base-law.h"
#include "json-text.h"
#include "table.h"

static void
add_number (JsonBuilder *builder, const char *key, double value)
{
  json_builder_set_member_name (builder, key);
  json_builder_add_double_value (builder, value);
}

static void
add_text (JsonBuilder *builder, const char *key, const char *text)
{
  json_builder_set_member_name (builder, key);
  json_builder_add_string_value (builder, text);
}

static void
add_crossing (JsonBuilder *builder, const UtPlan *plan, const UtCrossing *crossing, gboolean in_law)
{
  const UtStorey *storey = ut_plan_storey (plan, crossing->storey);

  json_builder_begin_object (builder);
  add_text (builder, "storey", storey->id);
  if (crossing->kind == UT_CROSSING_WALL)
    add_text (builder, "wall", ((const UtWall *) storey->walls->pdata[crossing->wall])->id);
  if (crossing->opening >= 0)
    {
      json_builder_set_member_name (builder, "opening");
      json_builder_add_int_value (builder, crossing->opening);
    }
  add_text (builder, "construction", ut_plan_construction (plan, crossing->construction)->id);
  add_number (builder, "incidence_deg", crossing->incidence_deg);
  add_number (builder, "loss_db", crossing->loss_db);
  if (plan->propagation->slab == UT_SLAB_AVERAGED)
    {
      add_number (builder, "loss_min_db", crossing->loss_min_db);
      add_number (builder, "loss_max_db", crossing->loss_max_db);
    }
  if (in_law)
    add_text (builder, "note", "counted by the base law");
  json_builder_end_object (builder);
}

static void
add_crossings (JsonBuilder *builder, const char *key, const UtPlan *plan, const UtPath *path, UtCrossingKind kind)
{
  json_builder_set_member_name (builder, key);
  json_builder_begin_array (builder);
  for (guint i = 0; i < path->crossings->len; i++)
    if (g_array_index (path->crossings, UtCrossing, i).kind == kind)
      add_crossing (builder, plan, &g_array_index (path->crossings, UtCrossing, i), path->law_holds_walls);
  json_builder_end_array (builder);
}

char *
ut_report_path_json (const UtPlan *plan, guint cell, guint terminal, const UtPath *path)
{
  g_autoptr (JsonBuilder) builder = json_builder_new_immutable ();

  json_builder_begin_object (builder);
  add_text (builder, "cell", ut_plan_cell (plan, cell)->radio.id);
  add_text (builder, "terminal", ut_plan_terminal (plan, terminal)->radio.id);
  add_number (builder, "distance_m", path->distance_m);
  add_text (builder, "law", ut_law_name (ut_base_law (plan->propagation).kind));
  json_builder_set_member_name (builder, "nlos");
  json_builder_add_boolean_value (builder, path->nlos);
  json_builder_set_member_name (builder, "outside_range");
  json_builder_add_boolean_value (builder, path->outside_range);
  add_number (builder, "base_loss_db", path->base_loss_db);
  add_crossings (builder, "walls", plan, path, UT_CROSSING_WALL);
  add_crossings (builder, "floors", plan, path, UT_CROSSING_FLOOR);
  add_number (builder, "crossings_db", path->crossings_db);
  add_number (builder, "cell_antenna_dbi", path->cell_antenna_dbi);
  add_number (builder, "terminal_antenna_dbi", path->terminal_antenna_dbi);
  add_number (builder, "feeders_db", path->feeders_db);
  add_number (builder, "body_db", path->body_db);
  json_builder_set_member_name (builder, "measured");
  json_builder_add_boolean_value (builder, path->measured);
  add_number (builder, "gain_db", path->gain_db);
  json_builder_end_object (builder);

  g_autoptr (JsonNode) root = json_builder_get_root (builder);
  return ut_json_text (root);
}

static void
add_row (UtTable *table, char *what, double db, char *note)
{
  ut_table_add (table, what);
  ut_table_add (table, ut_report_figure (db, 2));
  ut_table_add (table, note);
}

static void
add_crossing_row (UtTable *table, const UtPlan *plan, const UtCrossing *crossing, gboolean in_law)
{
  const UtStorey *storey = ut_plan_storey (plan, crossing->storey);
  const UtConstruction *construction = ut_plan_construction (plan, crossing->construction);
  g_autofree char *incidence = ut_report_figure (crossing->incidence_deg, 1);
  g_autofree char *least = ut_report_figure (crossing->loss_min_db, 1);
  g_autofree char *most = ut_report_figure (crossing->loss_max_db, 1);
  const char *source = isnan (construction->loss_db) ? "layers, ITU-R P.2040-3" : "loss typed in";
  g_autofree char *spread = plan->propagation->slab == UT_SLAB_AVERAGED && isnan (construction->loss_db)
                              ? g_strdup_printf (", %s to %s dB over the thicknesses tried", least, most)
                              : g_strdup ("");
  char *what = crossing->kind == UT_CROSSING_FLOOR
                 ? g_strdup_printf ("Floor under %s", storey->id)
                 : g_strdup_printf ("%s %s, %s",
                                    crossing->opening >= 0 ? "Opening in wall" : "Wall",
                                    ((const UtWall *) storey->walls->pdata[crossing->wall])->id,
                                    storey->id);

  if (in_law)
    add_row (table, what, 0, g_strdup_printf ("%s: counted by the base law", construction->name));
  else
    add_row (table,
             what,
             -crossing->loss_db,
             g_strdup_printf ("%s at %s° from the normal (%s%s)", construction->name, incidence, source, spread));
}

char *
ut_report_path_text (const UtPlan *plan, guint cell, guint terminal, const UtPath *path)
{
  static const char *const header[] = { "What", ">dB", "How", NULL };
  g_autoptr (UtTable) table = ut_table_new (header);
  GString *out = g_string_new (NULL);
  g_autofree char *distance = ut_report_figure (path->distance_m, 2);
  double crossings_db = 0;

  g_string_append_printf (out,
                          "%s to %s, %s m\n\n",
                          ut_plan_cell (plan, cell)->radio.id,
                          ut_plan_terminal (plan, terminal)->radio.id,
                          distance);
  add_row (table, g_strdup ("Base loss"), -path->base_loss_db, g_strdup_printf ("%s%s", ut_law_source (ut_base_law (plan->propagation).kind),
                                                                                  path->nlos ? ", without line of sight" : ""));
  for (guint i = 0; i < path->crossings->len; i++)
    {
      const UtCrossing *crossing = &g_array_index (path->crossings, UtCrossing, i);

      add_crossing_row (table, plan, crossing, path->law_holds_walls);
      crossings_db += crossing->loss_db;
    }
  if (crossings_db > path->crossings_db)
    add_row (table, g_strdup ("Excess limit"), crossings_db - path->crossings_db, g_strdup ("excess_loss_limit_db of the plan"));
  add_row (table, g_strdup ("Cell antenna"), path->cell_antenna_dbi, g_strdup ("dBi towards the terminal"));
  add_row (table, g_strdup ("Terminal antenna"), path->terminal_antenna_dbi, g_strdup ("dBi towards the cell"));
  add_row (table, g_strdup ("Feeders"), -path->feeders_db, g_strdup ("both ends"));
  add_row (table, g_strdup ("Body"), -path->body_db, g_strdup ("at the terminal"));
  add_row (table,
           g_strdup ("Gain"),
           path->gain_db,
           g_strdup (path->measured ? "measured: replaces the sum above" : "the sum"));
  ut_table_text (table, out);
  return g_string_free (out, FALSE);
}
