#include "backdrop-tool.h"

#include <math.h>
#include <string.h>

#include <glib/gi18n.h>

#include "report.h"

static const UtBackdrop *
backdrop_of (UtDesk *desk, guint storey)
{
  const UtPlan *plan = ut_document_plan (ut_desk_document (desk));

  return storey < plan->storeys->len ? ut_plan_storey (plan, storey)->backdrop : NULL;
}

static void
look (const UtBackdrop *backdrop, double seen[5])
{
  seen[0] = backdrop->x_m;
  seen[1] = backdrop->y_m;
  seen[2] = backdrop->width_m;
  seen[3] = backdrop->height_m;
  seen[4] = backdrop->turn_deg;
}

/* The length that set the scale lies where it did: nothing was moved, undone or replaced since. */
static gboolean
known_holds (const UtBackdropWork *work, const UtBackdrop *backdrop)
{
  double seen[5];

  look (backdrop, seen);
  return work->has_known && memcmp (seen, work->seen, sizeof seen) == 0;
}

static void
forget_typed (UtBackdropWork *work)
{
  if (work->typed != NULL)
    g_string_free (g_steal_pointer (&work->typed), TRUE);
}

void
ut_backdrop_work_clear (UtBackdropWork *work)
{
  forget_typed (work);
  g_clear_pointer (&work->plan, ut_plan_unref);
  *work = (UtBackdropWork){ 0 };
}

void
ut_backdrop_work_hover (UtBackdropWork *work, UtDesk *desk, const UtPointer *pointer)
{
  (void) desk;
  work->storey = pointer->storey;
  work->next = (UtPoint){ pointer->x_m, pointer->y_m };
}

void
ut_backdrop_work_click (UtBackdropWork *work, UtDesk *desk, const UtPointer *pointer)
{
  ut_backdrop_work_hover (work, desk, pointer);
  if (backdrop_of (desk, pointer->storey) == NULL)
    return;
  forget_typed (work);
  work->refused = FALSE;
  if (work->n_points == 2)
    work->n_points = 0;
  work->points[work->n_points++] = work->next;
}

static double
marked_m (const UtBackdropWork *work)
{
  return hypot (work->points[1].x_m - work->points[0].x_m, work->points[1].y_m - work->points[0].y_m);
}

static double
typed_m (const UtBackdropWork *work)
{
  double value = work->typed != NULL ? g_ascii_strtod (work->typed->str, NULL) : NAN;

  return value > 0 && value < 1e6 ? value : NAN;
}

gboolean
ut_backdrop_work_type (UtBackdropWork *work, gunichar character)
{
  if (character == ',')
    character = '.';
  if (work->n_points < 2)
    return FALSE;
  work->refused = FALSE;
  if (character == '\b' && work->typed != NULL)
    {
      g_string_truncate (work->typed, work->typed->len - 1);
      if (work->typed->len == 0)
        forget_typed (work);
      return TRUE;
    }
  if (!((character >= '0' && character <= '9') || character == '.') || (work->typed != NULL && work->typed->len >= 9))
    return FALSE;
  if (work->typed == NULL)
    work->typed = g_string_new (NULL);
  g_string_append_unichar (work->typed, character);
  return TRUE;
}

/* The far end of the known length after scaling, its first point being where it was. */
static UtPoint
far_end (const UtKnownLength *known)
{
  double now_m = hypot (known->to.x_m - known->from.x_m, known->to.y_m - known->from.y_m), by = known->length_m / now_m;

  return (UtPoint){ known->from.x_m + (known->to.x_m - known->from.x_m) * by, known->from.y_m + (known->to.y_m - known->from.y_m) * by };
}

void
ut_backdrop_work_enter (UtBackdropWork *work, UtDesk *desk, gboolean stretch)
{
  const UtPlan *plan = ut_document_plan (ut_desk_document (desk)), *next;
  UtKnownLength known = { work->points[0], work->points[1], typed_m (work) };

  if (work->n_points < 2 || isnan (known.length_m) || !(marked_m (work) > 0) || backdrop_of (desk, work->storey) == NULL)
    return;
  if (!known_holds (work, backdrop_of (desk, work->storey)))
    {
      ut_desk_apply (desk, ut_plan_with_backdrop_scaled (plan, work->storey, &known), _ ("Scale Backdrop"), NULL);
      known.to = far_end (&known);
      work->known = known;
      work->has_known = TRUE;
      look (backdrop_of (desk, work->storey), work->seen);
    }
  else if (stretch)
    {
      next = ut_plan_with_backdrop_stretched (plan, work->storey, (UtKnownLength[]){ work->known, known });
      work->refused = next == NULL;
      if (next == NULL)
        return;
      ut_desk_apply (desk, next, _ ("Stretch Backdrop"), NULL);
      work->has_known = FALSE; /* marks lie elsewhere on it now */
    }
  forget_typed (work);
  work->n_points = 0;
}

gboolean
ut_backdrop_work_back (UtBackdropWork *work)
{
  work->refused = FALSE;
  if (work->typed != NULL)
    forget_typed (work);
  else if (work->n_points > 0)
    work->n_points--;
  else
    return FALSE;
  return TRUE;
}

void
ut_backdrop_work_drag (UtBackdropWork *work, UtDesk *desk, const UtPointer *pointer, gboolean begins)
{
  const UtBackdrop *backdrop = backdrop_of (desk, pointer->storey);

  work->storey = pointer->storey;
  if (backdrop == NULL || backdrop->locked)
    return;
  if (begins)
    {
      g_clear_pointer (&work->plan, ut_plan_unref);
      work->plan = ut_plan_ref (ut_document_plan (ut_desk_document (desk)));
      work->x0_m = pointer->x_m;
      work->y0_m = pointer->y_m;
    }
  else if (work->plan != NULL)
    ut_desk_set_draft (desk, ut_plan_with_backdrop_moved (work->plan, work->storey, pointer->x_m - work->x0_m, pointer->y_m - work->y0_m));
}

void
ut_backdrop_work_drop (UtBackdropWork *work, UtDesk *desk)
{
  if (work->plan == NULL)
    return;
  g_clear_pointer (&work->plan, ut_plan_unref);
  if (ut_desk_has_draft (desk))
    {
      ut_desk_commit_draft (desk, _ ("Move Backdrop"), NULL);
      work->n_points = 0;
      work->has_known = FALSE;
    }
}

char *
ut_backdrop_work_text (const UtBackdropWork *work, UtDesk *desk)
{
  const UtBackdrop *backdrop = backdrop_of (desk, work->storey);
  double length_m = typed_m (work);

  if (backdrop == NULL)
    return g_strdup (_ ("Drop a picture or a PDF on the sheet, or choose one in the menu."));
  if (work->n_points < 2)
    return g_strdup (work->n_points == 1 ? _ ("Click the other end of the length that you know.")
                     : known_holds (work, backdrop) ? _ ("In scale. Click both ends of a second length to check it, or drag the picture.")
                     : backdrop->locked  ? _ ("Locked. Click both ends of a length that you know to set the scale.")
                                         : _ ("Drag the picture, or click both ends of a length that you know."));
  if (work->refused)
    return g_strdup (_ ("Both lengths run the same way, or no stretching fits: mark one across the other."));
  g_autofree char *marked = ut_report_figure (marked_m (work), 3);
  if (isnan (length_m))
    return g_strdup_printf (_ ("%s m as drawn. Type the true length in metres."), marked);
  if (!known_holds (work, backdrop))
    return g_strdup_printf (_ ("%s m as drawn, %s m in truth: Enter scales the picture."), marked, work->typed->str);
  g_autofree char *residual = ut_report_figure ((marked_m (work) / length_m - 1) * 100, 2);
  return g_strdup_printf (_ ("%s m as drawn, %s m in truth: off by %s %%. Enter leaves it; Shift+Enter stretches width and height apart."), marked, work->typed->str, residual);
}
