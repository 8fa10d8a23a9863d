#include "commissioning.h"

#include <math.h>

#include "plan-edit.h"

static const double ladders_db[] = { 0.1, 0.01, 0.001 };

/* Limits moved inwards to the ladder, which begins at the lowest power.  Radios with steps of their own, and those whose range holds no rung, stay as they are. */
static gboolean
put_on_ladder (UtRadio *radio, gconstpointer user)
{
  double ladder_db = *(const double *) user;
  double low = ceil (radio->power_min_dbm / ladder_db - 1e-9) * ladder_db, high = floor (radio->power_max_dbm / ladder_db + 1e-9) * ladder_db;

  if (radio->power_step_db > 0 || low > high)
    return FALSE;
  radio->power_min_dbm = low;
  radio->power_max_dbm = high;
  radio->power_step_db = ladder_db;
  radio->power_dbm = fmin (fmax (radio->power_dbm, low), high);
  return TRUE;
}

double
ut_commissioning_dbm (const UtCommissioning *commissioning, guint transmitter)
{
  double power_dbm = ut_study_transmitter (commissioning->study, transmitter)->power_dbm;

  return isnan (commissioning->ladder_db) ? ceil (power_dbm * 100 - 1e-7) / 100 : power_dbm;
}

/* What is typed into a sender, by its id. */
static gboolean
type_in (UtRadio *radio, gconstpointer user)
{
  const UtCommissioning *commissioning = user;
  const UtStudy *study = commissioning->study;

  for (guint i = 0; i < study->transmitters->len; i++)
    {
      const UtTransmitterAnswer *sender = ut_study_transmitter (study, i);
      const UtRadio *own = sender->is_cell ? &ut_plan_cell (study->gains->plan, sender->index)->radio : &ut_plan_terminal (study->gains->plan, sender->index)->radio;

      if (!g_str_equal (own->id, radio->id) || isnan (sender->power_dbm))
        continue;
      radio->power_dbm = ut_commissioning_dbm (commissioning, i);
      return TRUE;
    }
  return FALSE;
}

/* Every power set to what is typed in; whatever limits say, the question is only whether links are met. */
static gboolean
keeps (const UtCommissioning *commissioning)
{
  const UtStudy *study = commissioning->study;
  UtQuestion as_set = { .direction = study->question.direction, .aim = UT_AIM_AS_SET };
  g_autoptr (UtPlan) typed = (UtPlan *) ut_plan_with_each_radio (study->gains->plan, type_in, commissioning);
  gboolean kept = TRUE;

  g_autoptr (UtStudy) again = ut_study_new (typed, &as_set, study);
  for (guint i = 0; i < study->links->len; i++)
    kept = kept && (!(ut_study_link (study, i)->margin_db >= UT_MARGIN_MET_DB) || ut_study_link (again, i)->margin_db >= UT_MARGIN_MET_DB);
  return kept;
}

void
ut_commissioning_make (const UtStudy *study, UtCommissioning *commissioning)
{
  const UtCarrier *carrier = study->gains->plan->carrier;
  gboolean shared = carrier->sharing == UT_SHARING_SIMULTANEOUS && study->question.direction == UT_DIRECTION_DOWN;
  gboolean climbs = study->question.aim == UT_AIM_LEAST_POWER && study->verdict == UT_VERDICT_MET && !shared;

  *commissioning = (UtCommissioning){ .ladder_db = NAN, .shared = shared };
  for (gsize i = 0; i < G_N_ELEMENTS (ladders_db) && climbs && commissioning->study == NULL; i++)
    {
      g_autoptr (UtPlan) plan = (UtPlan *) ut_plan_with_each_radio (study->gains->plan, put_on_ladder, &ladders_db[i]);
      g_autoptr (UtStudy) on_ladder = ut_study_new (plan, &study->question, study);

      if (on_ladder->verdict == UT_VERDICT_MET && on_ladder->fallback == UT_FALLBACK_NONE)
        {
          commissioning->study = ut_study_ref (on_ladder);
          commissioning->ladder_db = ladders_db[i];
        }
    }
  if (commissioning->study == NULL)
    commissioning->study = ut_study_ref ((UtStudy *) study);
  commissioning->kept = !shared && keeps (commissioning);
}

void
ut_commissioning_clear (UtCommissioning *commissioning)
{
  g_clear_pointer (&commissioning->study, ut_study_unref);
}
