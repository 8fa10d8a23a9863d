#include "plan-check.h"

#include "plan-read.h"

#include <math.h>

#include "plan-write.h"

/* Steps off the ladder that are only rounding of the file's decimals. */
#define LADDER_SLACK_STEPS 1e-6

static void G_GNUC_PRINTF (3, 4) warn (GPtrArray *warnings, char *path, const char *format, ...)
{
  va_list arguments;
  UtFault *warning = g_new (UtFault, 1);
  va_start (arguments, format);
  *warning = (UtFault){ path, g_strdup_vprintf (format, arguments) };
  va_end (arguments);
  g_ptr_array_add (warnings, warning);
}

static gboolean
is_off_ladder (const UtRadio *radio)
{
  if (radio->power_step_db <= 0)
    return FALSE;
  double steps = (radio->power_dbm - radio->power_min_dbm) / radio->power_step_db;
  return fabs (steps - round (steps)) > LADDER_SLACK_STEPS;
}

static void
check_power (const UtRadio *radio, const char *list, guint index, GPtrArray *warnings)
{
  char power[G_ASCII_DTOSTR_BUF_SIZE], a[G_ASCII_DTOSTR_BUF_SIZE], b[G_ASCII_DTOSTR_BUF_SIZE];
  ut_number_text (radio->power_dbm, power);
  if (radio->power_dbm < radio->power_min_dbm || radio->power_dbm > radio->power_max_dbm)
    warn (warnings,
          g_strdup_printf ("%s[%u].power_dbm", list, index),
          "%s dBm is outside its limits; expected %s to %s dBm",
          power,
          ut_number_text (radio->power_min_dbm, a),
          ut_number_text (radio->power_max_dbm, b));
  else if (is_off_ladder (radio))
    warn (warnings,
          g_strdup_printf ("%s[%u].power_dbm", list, index),
          "%s dBm cannot be set; expected %s dBm and steps of %s dB",
          power,
          ut_number_text (radio->power_min_dbm, a),
          ut_number_text (radio->power_step_db, b));
}

static double
wall_length_m (const UtWall *wall)
{
  double length_m = 0;
  for (guint i = 1; i < wall->points->len; i++)
    {
      const UtPoint *a = &g_array_index (wall->points, UtPoint, i - 1),
                    *b = &g_array_index (wall->points, UtPoint, i);
      length_m += hypot (b->x_m - a->x_m, b->y_m - a->y_m);
    }
  return length_m;
}

static void
check_wall (const UtWall *wall, guint storey, guint index, GPtrArray *warnings)
{
  char text[G_ASCII_DTOSTR_BUF_SIZE];
  double length_m = wall_length_m (wall);
  for (guint i = 0; i < wall->openings->len; i++)
    {
      const UtOpening *opening = wall->openings->pdata[i];
      if (opening->at_m >= length_m)
        warn (warnings,
              g_strdup_printf ("storeys[%u].walls[%u].openings[%u].at_m", storey, index, i),
              "the opening begins where its wall has ended and has no effect; expected less than "
              "%s m",
              g_ascii_formatd (text, sizeof text, "%.6g", length_m));
      if (opening->head_m <= opening->sill_m)
        warn (warnings,
              g_strdup_printf ("storeys[%u].walls[%u].openings[%u].head_m", storey, index, i),
              "the opening has no height and no effect; expected more than its sill, %s m",
              ut_number_text (opening->sill_m, text));
    }
}

static void
check_serving_cell (const UtPlan *plan, guint index, GPtrArray *warnings)
{
  const UtTerminal *terminal = ut_plan_terminal (plan, index);
  int cell = ut_plan_find_cell (plan, terminal->cell);
  if (terminal->radio.on && cell >= 0 && !ut_plan_cell (plan, (guint)cell)->radio.on)
    warn (warnings,
          g_strdup_printf ("terminals[%u].cell", index),
          "the serving cell \"%s\" is off; expected one that is on, or null",
          terminal->cell);
}

void
ut_plan_warnings (const UtPlan *plan, GPtrArray *warnings)
{
  for (guint s = 0; s < plan->storeys->len; s++)
    for (guint w = 0; w < ut_plan_storey (plan, s)->walls->len; w++)
      check_wall (ut_plan_storey (plan, s)->walls->pdata[w], s, w, warnings);
  for (guint i = 0; i < plan->cells->len; i++)
    check_power (&ut_plan_cell (plan, i)->radio, "cells", i, warnings);
  for (guint i = 0; i < plan->terminals->len; i++)
    {
      check_power (&ut_plan_terminal (plan, i)->radio, "terminals", i, warnings);
      check_serving_cell (plan, i, warnings);
    }
}
