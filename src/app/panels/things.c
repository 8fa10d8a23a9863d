#include "things.h"

#include <math.h>

#include <glib/gi18n.h>

#include "report.h"
#include "wall-edits.h"

static void
clear_pick (gpointer pick)
{
  g_free (((UtPick *) pick)->id);
}

static void
add (GArray *things, UtRadioKind kind, char *id)
{
  UtPick pick = { kind, id };

  g_array_append_val (things, pick);
}

GArray *
ut_things (const UtPlan *plan)
{
  GArray *things = g_array_new (FALSE, FALSE, sizeof (UtPick));

  g_array_set_clear_func (things, clear_pick);
  for (guint i = 0; i < plan->cells->len; i++)
    add (things, UT_KIND_CELL, g_strdup (ut_plan_cell (plan, i)->radio.id));
  for (guint i = 0; i < plan->terminals->len; i++)
    add (things, UT_KIND_TERMINAL, g_strdup (ut_plan_terminal (plan, i)->radio.id));
  for (guint s = 0; s < plan->storeys->len; s++)
    for (guint w = 0; w < ut_plan_storey (plan, s)->walls->len; w++)
      add (things, UT_KIND_WALL, ut_wall_pick_id (plan, s, w));
  return things;
}

static char *
wall_text (const UtPlan *plan, const char *pick_id)
{
  guint storey, index, n_open = 0;

  if (!ut_plan_find_picked_wall (plan, pick_id, &storey, &index))
    return g_strdup ("");
  const UtWall *wall = ut_plan_storey (plan, storey)->walls->pdata[index];
  int construction = ut_plan_find_construction (plan, wall->construction);
  UtPoint from = g_array_index (wall->points, UtPoint, 0), to = g_array_index (wall->points, UtPoint, wall->points->len - 1);
  g_autofree char *length = ut_report_figure (ut_wall_length_m (wall), 2);
  g_autofree char *x0 = ut_report_figure (from.x_m, 1), *y0 = ut_report_figure (from.y_m, 1), *x1 = ut_report_figure (to.x_m, 1), *y1 = ut_report_figure (to.y_m, 1);
  for (guint i = 0; i < wall->openings->len; i++)
    n_open += !((const UtOpening *) wall->openings->pdata[i])->shut;
  g_autofree char *openings = wall->openings->len == 0 ? g_strdup ("")
                                                       : g_strdup_printf (ngettext (", %u opening (%u open)", ", %u openings (%u open)", wall->openings->len), wall->openings->len, n_open);
  return g_strdup_printf (_ ("Wall %s on %s: %s, %s m from %s, %s to %s, %s m%s"),
                          wall->id,
                          ut_plan_storey (plan, storey)->name,
                          construction >= 0 ? ut_plan_construction (plan, (guint) construction)->name : wall->construction,
                          length,
                          x0,
                          y0,
                          x1,
                          y1,
                          openings);
}

/* "C1" or "C1, Corner cell". */
static char *
named (const UtRadio *radio)
{
  return g_strcmp0 (radio->id, radio->name) == 0 ? g_strdup (radio->id) : g_strdup_printf ("%s, %s,", radio->id, radio->name);
}

static const UtLinkAnswer *
link_of (const UtPlan *plan, UtStudy *study, const char *terminal)
{
  for (guint i = 0; study != NULL && i < study->links->len; i++)
    {
      const UtLinkAnswer *link = ut_study_link (study, i);

      if (link->terminal < plan->terminals->len && g_str_equal (ut_plan_terminal (plan, link->terminal)->radio.id, terminal))
        return link;
    }
  return NULL;
}

char *
ut_thing_text (const UtPlan *plan, UtStudy *study, const UtPick *pick)
{
  const UtRadio *radio = ut_plan_radio (plan, pick->kind, pick->id);
  const UtLinkAnswer *link;

  if (radio == NULL)
    return wall_text (plan, pick->id);
  int storey = ut_plan_find_storey (plan, radio->storey);
  const char *on = storey >= 0 ? ut_plan_storey (plan, (guint) storey)->name : radio->storey;
  g_autofree char *name = named (radio), *x = ut_report_figure (radio->x_m, 2), *y = ut_report_figure (radio->y_m, 2), *power = ut_report_figure (radio->power_dbm, 1);
  if (pick->kind == UT_KIND_CELL)
    return g_strdup_printf (radio->on ? _ ("Cell %s on %s at %s, %s m, set to %s dBm") : _ ("Cell %s on %s at %s, %s m, set to %s dBm, switched off"), name, on, x, y, power);
  link = link_of (plan, study, radio->id);
  if (link == NULL || link->cell < 0 || isnan (link->margin_db))
    return g_strdup_printf (_ ("Terminal %s on %s at %s, %s m"), name, on, x, y);
  g_autofree char *margin = ut_report_figure (fabs (link->margin_db), 1);
  return g_strdup_printf (link->margin_db < -5e-7 ? _ ("Terminal %s on %s at %s, %s m, served by %s, short of its target by %s dB")
                                                  : _ ("Terminal %s on %s at %s, %s m, served by %s, above its target by %s dB"),
                          name,
                          on,
                          x,
                          y,
                          ut_plan_cell (plan, (guint) link->cell)->radio.id,
                          margin);
}
