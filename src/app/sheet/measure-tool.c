#include "measure-tool.h"

#include <math.h>

#include <glib/gi18n.h>

#include "path.h"
#include "report.h"
#include "wall-tool.h"

static UtPoint
snapped (UtDesk *desk, const UtPointer *pointer, const UtPoint *from)
{
  UtSnap snap;
  UtPoint point = ut_snap_point (ut_desk_plan (desk), pointer, G_MAXUINT, from, NULL, &snap);

  /* A measure is taken between things: where there is none the pointer itself is meant. */
  return snap == UT_SNAP_GRID ? (UtPoint){ pointer->x_m, pointer->y_m } : point;
}

void
ut_measure_begin (UtMeasure *measure, UtDesk *desk, const UtPointer *pointer)
{
  measure->active = TRUE;
  measure->storey = pointer->storey;
  measure->from = measure->to = snapped (desk, pointer, NULL);
}

void
ut_measure_update (UtMeasure *measure, UtDesk *desk, const UtPointer *pointer)
{
  if (measure->active)
    measure->to = snapped (desk, pointer, &measure->from);
}

static void
count_crossing (const UtCrossing *crossing, void *user)
{
  UtMeasured *measured = user;

  if (crossing->kind == UT_CROSSING_WALL)
    measured->n_walls++;
}

static void
place (UtRadio *radio, const UtStorey *storey, UtPoint at)
{
  g_free (radio->storey);
  radio->storey = g_strdup (storey->id);
  radio->x_m = at.x_m;
  radio->y_m = at.y_m;
  radio->height_m = UT_MEASURE_HEIGHT_M;
}

gboolean
ut_measure_result (const UtMeasure *measure, UtDesk *desk, UtMeasured *measured)
{
  const UtPlan *plan = ut_desk_plan (desk);
  UtStudy *study = ut_desk_answer (desk);
  double dx_m = measure->to.x_m - measure->from.x_m, dy_m = measure->to.y_m - measure->from.y_m;

  *measured = (UtMeasured){ .length_m = hypot (dx_m, dy_m), .direction_deg = fmod (atan2 (dx_m, dy_m) * 180 / G_PI + 360, 360) };
  if (!measure->active || measure->storey >= plan->storeys->len || !(measured->length_m > 1e-3))
    return FALSE;
  const UtStorey *storey = ut_plan_storey (plan, measure->storey);
  g_autoptr (UtWallIndex) index = study != NULL && ut_wall_index_holds (study->gains->plan, plan) ? ut_wall_index_ref (study->gains->index) : ut_wall_index_new (plan);
  g_autoptr (UtCell) cell = ut_cell_new ();
  g_autoptr (UtTerminal) terminal = ut_terminal_new ();
  UtPath path = { 0 };
  double z_m = storey->elevation_m + UT_MEASURE_HEIGHT_M;

  place (&cell->radio, storey, measure->from);
  place (&terminal->radio, storey, measure->to);
  ut_path_compute (plan, index, cell, terminal, &path);
  ut_wall_index_walk (index, (double[]){ measure->from.x_m, measure->from.y_m, z_m }, (double[]){ measure->to.x_m, measure->to.y_m, z_m }, FALSE, count_crossing, measured);
  measured->base_loss_db = path.base_loss_db;
  measured->crossings_db = path.crossings_db;
  return TRUE;
}

char *
ut_measure_text (const UtMeasure *measure, UtDesk *desk)
{
  UtMeasured measured;

  if (!ut_measure_result (measure, desk, &measured))
    return NULL;
  g_autofree char *length = ut_report_figure (measured.length_m, 2), *direction = ut_report_figure (measured.direction_deg, 0);
  g_autofree char *base = ut_report_figure (measured.base_loss_db, 1), *walls = ut_report_figure (measured.crossings_db, 1);
  return g_strdup_printf (ngettext ("%s m, %s°; distance %s dB, %u wall %s dB", "%s m, %s°; distance %s dB, %u walls %s dB", measured.n_walls),
                          length,
                          direction,
                          base,
                          measured.n_walls,
                          walls);
}
