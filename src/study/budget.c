#include "budget.h"

#include <math.h>

#include <glib/gi18n-lib.h>

#include "decibel.h"
#include "path.h"
#include "plan-edit.h"
#include "report.h"

#define USUAL_DOWN_DB 10.0

/* ---- cases ---- */

/* By how many dB the sum of all planned powers lies under the sum of those set; NAN where nothing transmits. */
static double
saved_db (const UtStudy *planned)
{
  const UtPlan *plan = planned->gains->plan;
  double set_mw = 0, chosen_mw = 0;

  for (guint i = 0; i < planned->transmitters->len; i++)
    {
      const UtTransmitterAnswer *sender = ut_study_transmitter (planned, i);
      const UtRadio *radio = sender->is_cell ? &ut_plan_cell (plan, sender->index)->radio : &ut_plan_terminal (plan, sender->index)->radio;

      if (isnan (sender->power_dbm))
        continue;
      set_mw += ut_mw_from_dbm (radio->power_dbm);
      chosen_mw += ut_mw_from_dbm (sender->power_dbm);
    }
  return set_mw > 0 && chosen_mw > 0 ? ut_db_from_ratio (set_mw / chosen_mw) : NAN;
}

/* So many dB lower, whatever its lowest power: what would be, if it could. */
static gboolean
turn_down (UtRadio *radio, gconstpointer by_db)
{
  radio->power_dbm -= *(const double *) by_db;
  radio->power_min_dbm = fmin (radio->power_min_dbm, radio->power_dbm);
  radio->power_step_db = 0;
  return TRUE;
}

gboolean
ut_budget_cases_make (UtStudy *planned, GCancellable *cancellable, UtBudgetCases *cases)
{
  UtQuestion as_set = { .direction = planned->question.direction, .aim = UT_AIM_AS_SET };
  double down_db = saved_db (planned);
  g_autoptr (UtPlan) down = NULL;

  *cases = (UtBudgetCases){ .down_db = down_db > 0.05 ? down_db : USUAL_DOWN_DB };
  down = (UtPlan *) ut_plan_with_each_radio (planned->gains->plan, turn_down, &cases->down_db);
  cases->studies[UT_CASE_PLANNED] = ut_study_ref (planned);
  cases->studies[UT_CASE_AS_SET] = ut_study_new_cancellable (planned->gains->plan, &as_set, planned, cancellable);
  cases->studies[UT_CASE_ALL_DOWN] = cases->studies[UT_CASE_AS_SET] == NULL ? NULL : ut_study_new_cancellable (down, &as_set, planned, cancellable);
  if (cases->studies[UT_CASE_ALL_DOWN] != NULL)
    return TRUE;
  ut_budget_cases_clear (cases);
  return FALSE;
}

void
ut_budget_cases_clear (UtBudgetCases *cases)
{
  for (int i = 0; i < UT_N_CASES; i++)
    g_clear_pointer (&cases->studies[i], ut_study_unref);
}

/* ---- the way of the signal ---- */

static void
clear_part (gpointer part)
{
  g_free (((UtBudgetPart *) part)->name);
}

/* Parts of nothing are left out. */
static void
add_part (GArray *parts, UtBudgetPartKind kind, char *name, double db)
{
  UtBudgetPart part = { kind, name, db };

  if (fabs (db) < 0.005 && kind != UT_PART_POWER)
    {
      g_free (name);
      return;
    }
  g_array_append_val (parts, part);
}

static char *
crossing_name (const UtPlan *plan, const UtCrossing *crossing)
{
  const char *construction = ut_plan_construction (plan, crossing->construction)->name;

  if (crossing->kind == UT_CROSSING_FLOOR)
    return g_strdup_printf (_ ("floor: %s"), construction);
  const UtWall *wall = ut_plan_storey (plan, crossing->storey)->walls->pdata[crossing->wall];
  return g_strdup_printf ("%s: %s", wall->id, construction);
}

static GArray *
way (const UtStudy *study, const UtLinkAnswer *link)
{
  const UtPlan *plan = study->gains->plan;
  GArray *parts = g_array_new (FALSE, FALSE, sizeof (UtBudgetPart));
  UtPath path = { 0 };
  double crossed_db = 0;

  g_array_set_clear_func (parts, clear_part);
  ut_path_trace (plan, study->gains->index, (guint) link->cell, link->terminal, &path);
  add_part (parts, UT_PART_POWER, NULL, link->power_dbm);
  if (path.measured)
    add_part (parts, UT_PART_MEASURED, NULL, path.gain_db);
  else
    {
      add_part (parts, UT_PART_ANTENNA, NULL, path.cell_antenna_dbi + path.terminal_antenna_dbi);
      add_part (parts, UT_PART_FEEDER, NULL, -path.feeders_db);
      add_part (parts, UT_PART_DISTANCE, NULL, -path.base_loss_db);
      for (guint i = 0; path.crossings != NULL && i < path.crossings->len && !path.law_holds_walls; i++)
        {
          const UtCrossing *crossing = &g_array_index (path.crossings, UtCrossing, i);

          crossed_db += crossing->loss_db;
          add_part (parts, UT_PART_CROSSING, crossing_name (plan, crossing), -crossing->loss_db);
        }
      add_part (parts, UT_PART_LIMIT, NULL, crossed_db - (path.law_holds_walls ? 0 : path.crossings_db));
      add_part (parts, UT_PART_BODY, NULL, -path.body_db);
    }
  ut_path_clear (&path);
  return parts;
}

static UtBudgetCase
case_of (const UtLinkAnswer *link)
{
  return (UtBudgetCase){
    .power_dbm = link->power_dbm,
    .signal_dbm = link->signal_dbm,
    .noise_dbm = link->noise_dbm,
    .interference_dbm = link->interference_dbm,
    .sinr_db = link->sinr_db,
    .target_db = link->target_db,
    .margin_db = link->margin_db,
    .background_dbm = link->signal_dbm - link->sinr_db,
    .needed_dbm = link->signal_dbm - link->sinr_db + link->target_db,
    .interferers = link->interferers,
  };
}

UtBudget *
ut_budget_new (const UtBudgetCases *cases, guint index)
{
  UtStudy *planned = cases->studies[UT_CASE_PLANNED];
  const UtLinkAnswer *link = index < planned->links->len ? ut_study_link (planned, index) : NULL;
  UtBudget *budget;

  if (link == NULL || link->cell < 0)
    return NULL;
  budget = g_new0 (UtBudget, 1);
  budget->terminal = ut_plan_terminal (planned->gains->plan, link->terminal)->radio.id;
  budget->cell = ut_plan_cell (planned->gains->plan, (guint) link->cell)->radio.id;
  budget->down = planned->question.direction == UT_DIRECTION_DOWN;
  budget->down_db = cases->down_db;
  budget->parts = way (planned, link);
  for (int i = 0; i < UT_N_CASES; i++)
    budget->cases[i] = case_of (ut_study_link (cases->studies[i], index));
  return budget;
}

void
ut_budget_free (UtBudget *budget)
{
  if (budget->parts != NULL)
    g_array_unref (budget->parts);
  g_free (budget);
}

/* ---- words ---- */

char *
ut_budget_part_text (const UtBudgetPart *part)
{
  switch (part->kind)
    {
    case UT_PART_POWER:
      return g_strdup (_ ("power"));
    case UT_PART_ANTENNA:
      return g_strdup (_ ("antennas"));
    case UT_PART_FEEDER:
      return g_strdup (_ ("feeders"));
    case UT_PART_BODY:
      return g_strdup (_ ("body"));
    case UT_PART_DISTANCE:
      return g_strdup (_ ("distance"));
    case UT_PART_LIMIT:
      return g_strdup (_ ("limit of all crossings"));
    case UT_PART_MEASURED:
      return g_strdup (_ ("measured gain"));
    case UT_PART_CROSSING:
      return g_strdup (part->name);
    }
  g_return_val_if_reached (NULL);
}

const char *
ut_budget_case_text (UtBudgetCaseKind kind)
{
  static const char *const texts[] = { [UT_CASE_AS_SET] = N_ ("as set"), [UT_CASE_ALL_DOWN] = N_ ("all turned down"), [UT_CASE_PLANNED] = N_ ("planned") };

  return _ (texts[kind]);
}

/* Who is heard besides, the loudest first, with its part of the interference. */
static char *
others (const UtBudgetCase *one)
{
  GString *text = g_string_new (NULL);

  for (guint i = 0; i < MIN (one->interferers->len, 3); i++)
    {
      const UtInterferer *interferer = &g_array_index (one->interferers, UtInterferer, i);
      double share = 100 * ut_ratio_from_db (interferer->dbm - one->interference_dbm);
      g_autofree char *dbm = ut_report_figure (interferer->dbm, 1);

      if (share < 1)
        break;
      g_string_append_printf (text, _ ("%s%s at %s dBm (%.0f %% of the interference)"), text->len > 0 ? ", " : "", interferer->id, dbm, share);
    }
  return g_string_free (text, FALSE);
}

static void
add_outcome (GString *text, const UtBudgetCase *one, const char *met, const char *failed)
{
  g_autofree char *sinr = ut_report_figure (one->sinr_db, 1), *target = ut_report_figure (one->target_db, 1), *margin = ut_report_figure (fabs (one->margin_db), 1);

  g_string_append_printf (text, one->margin_db >= UT_MARGIN_MET_DB ? met : failed, sinr, target, margin);
}

char *
ut_budget_words (const UtBudget *budget)
{
  const UtBudgetCase *set = &budget->cases[UT_CASE_AS_SET], *down = &budget->cases[UT_CASE_ALL_DOWN], *planned = &budget->cases[UT_CASE_PLANNED];
  GString *text = g_string_new (NULL);
  g_autofree char *signal = ut_report_figure (set->signal_dbm, 1), *noise = ut_report_figure (set->noise_dbm, 1), *by = ut_report_figure (budget->down_db, 1);
  g_autofree char *rest = others (set), *change = ut_report_figure (fabs (planned->power_dbm - set->power_dbm), 1);

  g_string_append_printf (text, budget->down ? _ ("As set, %s hears its cell %s at %s dBm") : _ ("As set, %s reaches its cell %s at %s dBm"), budget->terminal, budget->cell, signal);
  if (rest[0] != '\0')
    g_string_append_printf (text, _ ("; against it stand %s, and noise at %s dBm. "), rest, noise);
  else
    g_string_append_printf (text, _ ("; nobody else is heard, only noise at %s dBm. "), noise);
  add_outcome (text,
               set,
               _ ("That leaves %s dB, and %s dB are needed: met, with %s dB to spare. "),
               _ ("That leaves %s dB, but %s dB are needed: it fails by %s dB. "));
  g_string_append_printf (text, _ ("With all radios turned down alike, by %s dB, signal and interference sink together: "), by);
  add_outcome (text, down, _ ("%s dB, where %s dB are needed: met, with %s dB to spare. "), _ ("%s dB, where %s dB are needed: it fails by %s dB. "));
  if (isnan (planned->power_dbm))
    g_string_append (text, _ ("There is no plan of powers to compare with."));
  else
    {
      if (planned->power_dbm < set->power_dbm - 0.05)
        g_string_append_printf (text, _ ("As planned, its sender goes down by %s dB and the others by what suits them: "), change);
      else if (planned->power_dbm > set->power_dbm + 0.05)
        g_string_append_printf (text, _ ("As planned, its sender goes up by %s dB and the others change by what suits them: "), change);
      else
        g_string_append (text, _ ("As planned, its sender stays and the others change by what suits them: "));
      add_outcome (text, planned, _ ("%s dB, where %s dB are needed: met, with %s dB to spare."), _ ("%s dB, where %s dB are needed: it fails by %s dB."));
    }
  return g_string_free (text, FALSE);
}
