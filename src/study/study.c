#include "study.h"

#include <math.h>
#include <string.h>

#include "base-law.h"
#include "decibel.h"
#include "exposure.h"
#include "headroom.h"
#include "least.h"
#include "links.h"
#include "perron.h"
#include "plan-check.h"
#include "plan-read.h"
#include "rate.h"
#include "remedies.h"
#include "verdict.h"

static void
warn (UtStudy *study, const char *format, ...) G_GNUC_PRINTF (2, 3);

static void
warn (UtStudy *study, const char *format, ...)
{
  va_list arguments;

  va_start (arguments, format);
  g_ptr_array_add (study->warnings, g_strdup_vprintf (format, arguments));
  va_end (arguments);
}

static double
dbm_or_nan (double mw)
{
  return mw > 0 ? ut_dbm_from_mw (mw) : NAN;
}

/* What a link lacks at full power with everyone else silent, as a ratio (> 1: it lacks): against noise, and of its level. */
static double
noise_lack (const UtLink *link)
{
  return link->need * link->noise_mw / (link->limit_mw * link->gain);
}

static double
level_lack (const UtLink *link)
{
  return link->level_mw / (link->limit_mw * link->gain);
}

static void
add_failing (UtStudy *study, const UtLink *link, double lack)
{
  double lack_db = ut_db_from_ratio (lack);

  g_array_append_val (study->limiting_group, link->terminal);
  g_array_append_val (study->lacks_db, lack_db);
}

/* Links that fail whatever the others do: those without a cell first, then those that lack signal against noise alone, or
 * where there are none, those that lack level. */
static UtVerdict
judge_alone (UtStudy *study, const UtLinks *links)
{
  for (guint i = 0; i < links->links->len; i++)
    if (ut_links_link (links, i)->cell < 0)
      add_failing (study, ut_links_link (links, i), NAN);
  for (guint i = 0; i < links->links->len; i++)
    if (ut_links_link (links, i)->cell >= 0 && noise_lack (ut_links_link (links, i)) > 1 + UT_LIMIT_SLACK)
      add_failing (study, ut_links_link (links, i), noise_lack (ut_links_link (links, i)));
  if (study->limiting_group->len > 0)
    return UT_VERDICT_NOISE_LIMITED;
  for (guint i = 0; i < links->links->len; i++)
    if (level_lack (ut_links_link (links, i)) > 1 + UT_LIMIT_SLACK)
      add_failing (study, ut_links_link (links, i), level_lack (ut_links_link (links, i)));
  return study->limiting_group->len > 0 ? UT_VERDICT_LEVEL_LIMITED : UT_VERDICT_MET;
}

/* A link's level cannot be met by any power it may use: no common change of the targets heals that. */
static gboolean
level_out_of_reach (const UtLinks *links)
{
  for (guint i = 0; i < links->links->len; i++)
    if (ut_links_link (links, i)->cell >= 0 && level_lack (ut_links_link (links, i)) > 1 + UT_LIMIT_SLACK)
      return TRUE;
  return FALSE;
}

static void
set_headroom (UtStudy *study, const UtHeadroom *headroom)
{
  study->headroom_db = ut_db_from_ratio (headroom->factor);
  study->headroom_error_db = 0.5 * ut_db_from_ratio (headroom->upper / headroom->lower);
  /* The certificate's width is no statement about an edge that is met exactly. */
  if (fabs (study->headroom_db) < 1e-11)
    study->headroom_db = 0;
}

static UtVerdict
verdict_of (UtFeasibility feasibility)
{
  switch (feasibility)
    {
    case UT_INTERFERENCE_LIMITED:
      return UT_VERDICT_INTERFERENCE_LIMITED;
    case UT_POWER_LIMITED:
      return UT_VERDICT_POWER_LIMITED;
    case UT_MINIMUM_LIMITED:
      return UT_VERDICT_MINIMUM_LIMITED;
    case UT_FEASIBLE:
      break;
    }
  return UT_VERDICT_MET;
}

/* Powers left the range of numbers before anything was proved: far past every limit at any rate. */
static UtVerdict
verdict_beyond_numbers (UtStudy *study)
{
  warn (study, "the powers asked for leave the range of numbers; the verdict rests on the spectral radius alone");
  return study->spectral_radius < 1 ? UT_VERDICT_POWER_LIMITED : UT_VERDICT_INTERFERENCE_LIMITED;
}

/* What is known of the system, once solved. */
typedef struct
{
  UtSystem system;      /* of the plan as it stands */
  gboolean has_headroom;
  UtHeadroom headroom;
  double *at_headroom;  /* feasible with factor headroom.lower */
} Solution;

static void
solution_clear (Solution *solution)
{
  ut_system_clear (&solution->system);
  g_free (solution->at_headroom);
}

/* Who sets the headroom or, where no powers whatever will do, the spectral radius.  Links that fail alone are the limiting group already. */
static void
find_edge (UtStudy *study, const UtLinks *links, const Solution *solution)
{
  g_autoptr (GArray) terminals = g_array_new (FALSE, FALSE, sizeof (guint));

  if (study->verdict == UT_VERDICT_INTERFERENCE_LIMITED)
    ut_links_edge_of_interference (links, &solution->system, terminals, &study->edge);
  else if (solution->has_headroom)
    ut_links_edge_of_headroom (links, &solution->system, solution->headroom.lower, solution->at_headroom, terminals, &study->edge);
  if (study->limiting_group->len == 0)
    g_array_append_vals (study->limiting_group, terminals->data, terminals->len);
}

/* Verdict, radius and headroom: the plan's own, the same for every aim. */
static void
judge (UtStudy *study, const UtLinks *links, Solution *solution)
{
  UtFeasibility feasibility = UT_FEASIBLE;
  UtRadius radius;
  UtPowerStatus status = ut_links_system (links, FALSE, &solution->system);

  g_assert (status == UT_POWER_OK); /* a checked plan makes a valid system */
  study->verdict = judge_alone (study, links);
  if (links->n_unknowns == 0)
    return;
  if (ut_spectral_radius (&solution->system, &radius) == UT_POWER_OK)
    study->spectral_radius = radius.value;
  if (study->verdict == UT_VERDICT_MET)
    {
      status = ut_feasibility (&solution->system, &feasibility, NULL);
      study->verdict = status == UT_POWER_OK ? verdict_of (feasibility) : verdict_beyond_numbers (study);
    }
  if (study->verdict == UT_VERDICT_MET && ut_links_have_steps (links))
    {
      UtPowers levels = ut_powers_new (links);

      if (!ut_links_least_levels (links, 1, &levels))
        study->verdict = UT_VERDICT_STEP_LIMITED;
      ut_powers_clear (&levels);
    }
  solution->at_headroom = g_new0 (double, links->n_unknowns);
  if (!level_out_of_reach (links))
    solution->has_headroom = ut_headroom (&solution->system, solution->at_headroom, &solution->headroom) == UT_POWER_OK;
  if (solution->has_headroom)
    set_headroom (study, &solution->headroom);
  /* What proves the headroom may be more than the least powers there. */
  if (solution->has_headroom)
    ut_least_powers (&solution->system, solution->headroom.lower, UT_LIFT_NOTHING, solution->at_headroom, NULL);
  find_edge (study, links, solution);
}

/* Every unknown at its floor: what is shown where nothing better can be computed. */
static void
at_floors (const UtSystem *system, double *p)
{
  for (size_t i = 0; i < system->n_unknowns; i++)
    p[i] = ut_system_floor (system, i, UT_LIFT_NOTHING);
}

/* Least powers with all targets raised by the headroom.  Where no headroom exists (minima or levels alone pass a limit) those are
 * held down to what the limits allow, so that there is something to show. */
static void
choose_equal_margin (const UtLinks *links, Solution *solution, UtPowers *powers)
{
  UtSystem clipped = { 0 };
  const UtSystem *system = &solution->system;
  UtHeadroom headroom = solution->headroom;
  gboolean found = solution->has_headroom;
  g_autofree double *p = g_new0 (double, MAX (links->n_unknowns, 1));

  if (links->n_unknowns > 0 && !found)
    {
      UtPowerStatus status = ut_links_system (links, TRUE, &clipped);

      g_assert (status == UT_POWER_OK); /* a checked plan makes a valid system */
      system = &clipped;
      found = ut_headroom (system, solution->at_headroom, &headroom) == UT_POWER_OK;
    }
  if (!found)
    at_floors (system, p);
  else if (ut_least_powers (system, headroom.lower, UT_LIFT_NOTHING, p, NULL) != UT_POWER_OK)
    memcpy (p, solution->at_headroom, links->n_unknowns * sizeof *p);
  ut_links_powers (links, p, powers);
  ut_system_clear (&clipped);
}

/* Least powers with the targets raised by hold_db, on the ladders where a step is set.  FALSE where there are none. */
static gboolean
least_held (const UtLinks *links, const Solution *solution, double hold_db, UtPowers *powers)
{
  g_autofree double *p = g_new0 (double, MAX (links->n_unknowns, 1));

  if (ut_links_have_steps (links))
    return ut_links_least_levels (links, ut_ratio_from_db (hold_db), powers);
  if (links->n_unknowns > 0
      && ut_least_powers (&solution->system, ut_ratio_from_db (hold_db), UT_LIFT_NOTHING, p, NULL) != UT_POWER_OK)
    return FALSE;
  ut_links_powers (links, p, powers);
  return TRUE;
}

static void
choose_least (UtStudy *study, const UtLinks *links, Solution *solution, UtPowers *powers)
{
  double hold_db = study->question.hold_db;
  gboolean dropping = study->question.aim == UT_AIM_FEWEST_DROPPED; /* what is left can be met */
  double headroom_db = !dropping ? study->headroom_db : solution->has_headroom ? ut_db_from_ratio (solution->headroom.factor) : INFINITY;

  if (study->verdict == UT_VERDICT_STEP_LIMITED && !dropping)
    {
      study->fallback = UT_FALLBACK_CLIPPED_STEPS;
      ut_links_clipped_levels (links, powers);
      return;
    }
  if (study->verdict != UT_VERDICT_MET && !dropping)
    study->fallback = UT_FALLBACK_EQUAL_MARGIN;
  else if (links->n_unknowns > 0 && hold_db > 0 && hold_db > headroom_db)
    {
      study->fallback = UT_FALLBACK_EQUAL_MARGIN;
      warn (study,
            "%.3g dB cannot be kept in hand: the headroom is %.3g dB; every target is raised by the headroom instead",
            hold_db,
            headroom_db);
    }
  else if (!least_held (links, solution, hold_db, powers))
    {
      study->fallback = UT_FALLBACK_EQUAL_MARGIN;
      if (ut_links_have_steps (links))
        warn (study, "%.3g dB cannot be kept in hand on the radios' power steps; every target is raised by the headroom instead, steps ignored", hold_db);
    }
  if (study->fallback == UT_FALLBACK_EQUAL_MARGIN)
    choose_equal_margin (links, solution, powers);
}

static void
choose_powers (UtStudy *study, const UtLinks *links, Solution *solution, UtPowers *powers)
{
  switch (study->question.aim)
    {
    case UT_AIM_AS_SET:
      ut_links_powers_as_set (links, powers);
      break;
    case UT_AIM_EQUAL_MARGIN:
      choose_equal_margin (links, solution, powers);
      break;
    case UT_AIM_LEAST_POWER:
    case UT_AIM_FEWEST_DROPPED:
      choose_least (study, links, solution, powers);
      break;
    }
}

static void
clear_link_answer (gpointer data)
{
  g_array_unref (((UtLinkAnswer *) data)->interferers);
}

/* Interferers by name; returns their sum. */
static double
name_interferers (const UtLinks *links, const GArray *heard, GArray *interferers)
{
  const UtPlan *plan = links->gains->plan;
  double sum_mw = 0;

  for (guint i = 0; i < heard->len; i++)
    {
      const UtInterference *one = &g_array_index (heard, UtInterference, i);
      UtInterferer named = {
        .id = links->direction == UT_DIRECTION_DOWN ? ut_plan_cell (plan, one->index)->radio.id
                                                    : ut_plan_terminal (plan, one->index)->radio.id,
        .dbm = ut_dbm_from_mw (one->mw),
      };

      g_array_append_val (interferers, named);
      sum_mw += one->mw;
    }
  return sum_mw;
}

/* What a link has at these powers. */
static void
fill_figures (const UtLinks *links, const UtPowers *powers, guint index, gboolean chances, UtLinkAnswer *answer)
{
  const UtLink *link = ut_links_link (links, index);
  g_autoptr (GArray) heard = g_array_new (FALSE, FALSE, sizeof (UtInterference));

  ut_links_interference (links, powers, index, heard);
  double interference_mw = name_interferers (links, heard, answer->interferers);
  double signal_mw = powers->link_mw[index] * link->gain;

  answer->power_dbm = dbm_or_nan (powers->link_mw[index]);
  answer->signal_dbm = dbm_or_nan (signal_mw);
  answer->noise_dbm = ut_dbm_from_mw (link->noise_mw);
  answer->interference_dbm = dbm_or_nan (interference_mw);
  answer->sinr_db = dbm_or_nan (links->processing_gain * signal_mw / (interference_mw + link->noise_mw));
  answer->margin_db = answer->sinr_db - answer->target_db;
  if (chances)
    answer->chance = ut_links_chance (links, index, heard, answer->margin_db);
}

/* kept: the links that are not dropped, in the same order; index: the place among them, used where the link is kept and has a cell. */
static void
answer_link (UtStudy *study, const UtLink *link, gboolean dropped, const UtLinks *kept, const UtPowers *powers, guint index)
{
  UtLinkAnswer answer = {
    .terminal = link->terminal,
    .cell = link->cell,
    .power_dbm = NAN,
    .target_db = ut_db_from_ratio (link->target),
    .level_target_dbm = dbm_or_nan (link->level_mw),
    .sinr_db = NAN,
    .margin_db = NAN,
    .signal_dbm = NAN,
    .noise_dbm = NAN,
    .interference_dbm = NAN,
    .reserve_db = NAN,
    .chance = NAN,
    .dropped = dropped,
    .interferers = g_array_new (FALSE, FALSE, sizeof (UtInterferer)),
  };

  if (!dropped && link->cell >= 0)
    fill_figures (kept, powers, index, study->question.chances, &answer);
  g_array_append_val (study->links, answer);
}

static void
add_transmitter (UtStudy *study, gboolean is_cell, guint index, gboolean idle, double mw)
{
  const UtPlan *plan = study->gains->plan;
  const UtRadio *radio = is_cell ? &ut_plan_cell (plan, index)->radio : &ut_plan_terminal (plan, index)->radio;
  UtTransmitterAnswer answer = {
    .is_cell = is_cell,
    .index = index,
    .idle = idle,
    .power_dbm = dbm_or_nan (mw),
    .power_min_dbm = radio->power_min_dbm,
    .power_max_dbm = radio->power_max_dbm,
    .element_dbm = NAN,
    .compliance_m = NAN,
  };
  double peak_db = ut_radio_peak_dbi (plan, radio) - radio->feeder_loss_db;
  UtExposureLimit governing;

  answer.eirp_dbm = answer.power_dbm + peak_db;
  if (plan->carrier->resource_blocks > 0)
    answer.element_dbm = ut_element_dbm (answer.power_dbm, (unsigned) plan->carrier->resource_blocks);
  if (ut_compliance_distance_m (radio->power_max_dbm + peak_db, plan->carrier->frequency_mhz * 1e6, &answer.compliance_m, &governing) == UT_RADIO_OK)
    answer.compliance_limit = ut_exposure_limit_name (governing);
  g_array_append_val (study->transmitters, answer);
}

static void
answer_transmitters (UtStudy *study, const UtLinks *links, const UtPowers *powers)
{
  const UtPlan *plan = study->gains->plan;

  if (links->direction == UT_DIRECTION_UP)
    {
      for (guint i = 0; i < study->links->len; i++)
        add_transmitter (study, FALSE, ut_study_link (study, i)->terminal, FALSE, ut_mw_from_dbm (ut_study_link (study, i)->power_dbm));
      return;
    }
  for (guint c = 0; c < plan->cells->len; c++)
    if (ut_plan_cell (plan, c)->radio.on)
      add_transmitter (study, TRUE, c, links->idle[c], powers->cell_mw[c]);
}

/* Radios above the EIRP limit: possible with powers as set, and for idle cells. */
static void
warn_of_eirp (UtStudy *study)
{
  const UtPlan *plan = study->gains->plan;
  double limit_dbm = plan->carrier->eirp_limit_dbm;

  for (guint i = 0; i < study->transmitters->len; i++)
    {
      const UtTransmitterAnswer *sender = ut_study_transmitter (study, i);

      if (!isnan (limit_dbm) && sender->eirp_dbm > limit_dbm + 1e-6)
        warn (study,
              "%s %s sends %.1f dBm EIRP%s, above the limit of %.1f dBm",
              sender->is_cell ? "cell" : "terminal",
              sender->is_cell ? ut_plan_cell (plan, sender->index)->radio.id : ut_plan_terminal (plan, sender->index)->radio.id,
              sender->eirp_dbm,
              sender->idle ? " while idle" : "",
              limit_dbm);
    }
}

/* Simultaneous downlink: a cell's own minimum and steps are not part of the system. */
static void
warn_of_shared_cells (UtStudy *study, const UtLinks *links)
{
  const UtPlan *plan = study->gains->plan;

  if (links->direction != UT_DIRECTION_DOWN || !links->simultaneous)
    return;
  for (guint i = 0; i < study->transmitters->len; i++)
    {
      const UtTransmitterAnswer *sender = ut_study_transmitter (study, i);
      const UtRadio *cell = &ut_plan_cell (plan, sender->index)->radio;

      if (sender->idle)
        continue;
      if (sender->power_dbm < cell->power_min_dbm - 1e-6)
        warn (study,
              "cell %s: the powers of its links add up to %.1f dBm, below its power_min_dbm of %.1f dBm",
              cell->id,
              sender->power_dbm,
              cell->power_min_dbm);
      if (cell->power_step_db > 0)
        warn (study, "cell %s: its power step is not applied, a cell shares its power freely between its links", cell->id);
    }
}

static void
warn_of_plan (UtStudy *study)
{
  const UtGains *gains = study->gains;
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  GPtrArray *materials = ut_wall_index_warnings (gains->index);

  ut_plan_warnings (gains->plan, faults);
  for (guint i = 0; i < faults->len; i++)
    {
      const UtFault *fault = faults->pdata[i];
      warn (study, "%s: %s", fault->path, fault->message);
    }
  g_autofree char *range = ut_gains_range_warning (gains);

  for (guint i = 0; i < materials->len; i++)
    warn (study, "%s", (const char *) materials->pdata[i]);
  if (range != NULL)
    warn (study, "%s", range);
  for (guint t = 0; t < gains->n_terminals; t++)
    for (guint c = 0; c < gains->n_cells; c++)
      if (gains->wall_at_antenna[ut_gains_at (gains, t, c)])
        warn (study,
              "a wall passes through an antenna of the pair %s, %s; it is counted",
              ut_plan_cell (gains->plan, c)->radio.id,
              ut_plan_terminal (gains->plan, t)->radio.id);
}

static UtStudy *
study_alloc (const UtPlan *plan, const UtQuestion *question, const UtStudy *previous, GCancellable *cancellable)
{
  UtStudy *study = g_atomic_rc_box_new0 (UtStudy);

  study->question = *question;
  study->gains = ut_gains_new_cancellable (plan, previous != NULL ? previous->gains : NULL, cancellable);
  study->spectral_radius = study->headroom_db = study->headroom_error_db = NAN;
  study->transmitters = g_array_new (FALSE, FALSE, sizeof (UtTransmitterAnswer));
  study->links = g_array_new (FALSE, FALSE, sizeof (UtLinkAnswer));
  g_array_set_clear_func (study->links, clear_link_answer);
  study->limiting_group = g_array_new (FALSE, FALSE, sizeof (guint));
  study->lacks_db = g_array_new (FALSE, FALSE, sizeof (double));
  study->edge = (UtEdgeAnswer){
    .blame = g_array_new (FALSE, FALSE, sizeof (UtBlame)),
    .chain = g_array_new (FALSE, FALSE, sizeof (UtCause)),
    .at_limit = -1,
  };
  study->dropped = g_array_new (FALSE, FALSE, sizeof (guint));
  study->warnings = g_ptr_array_new_with_free_func (g_free);
  return study;
}

/* The reserve of every link that is kept; none has any where a link has no cell or a level cannot be reached: then no change of one target heals
 * the plan. */
static void
answer_reserves (UtStudy *study, const UtLinks *kept, GCancellable *cancellable)
{
  g_autofree double *reserve_db = g_new0 (double, MAX (kept->links->len, 1));
  gboolean met = study->verdict == UT_VERDICT_MET || study->dropped->len > 0;
  guint index = 0;

  for (guint i = 0; i < kept->links->len; i++)
    if (ut_links_link (kept, i)->cell < 0)
      return;
  if (level_out_of_reach (kept))
    return;
  ut_links_reserves_db (kept, cancellable, reserve_db);
  for (guint i = 0; i < study->links->len && !g_cancellable_is_cancelled (cancellable); i++)
    if (!ut_study_link (study, i)->dropped)
      {
        /* Limits count as kept up to a slack; at the very edge it must not show as a lack. */
        double shown_db = met && reserve_db[index] < 0 && reserve_db[index] > UT_MARGIN_MET_DB ? 0 : reserve_db[index];

        g_array_index (study->links, UtLinkAnswer, i).reserve_db = shown_db;
        index++;
      }
}

/* Headroom of the links that are left, as far as choosing their powers needs it. */
static void
solve_kept (const UtLinks *kept, Solution *solution)
{
  UtPowerStatus status = ut_links_system (kept, FALSE, &solution->system);

  g_assert (status == UT_POWER_OK); /* a part of a valid plan */
  solution->at_headroom = g_new0 (double, MAX (kept->n_unknowns, 1));
  solution->has_headroom = kept->n_unknowns > 0 && ut_headroom (&solution->system, solution->at_headroom, &solution->headroom) == UT_POWER_OK;
}

/* Leaves out what must be left out: the links that stay, and what is known of their system in place of the plan's.  NULL: cancelled. */
static UtLinks *
drop_links (UtStudy *study, const UtLinks *links, gboolean *keep, Solution *solution, GCancellable *cancellable)
{
  UtLinks *kept;

  if (!ut_links_fewest_dropped (links, cancellable, keep, &study->dropping))
    return NULL;
  for (guint i = 0; i < links->links->len; i++)
    if (!keep[i])
      g_array_append_val (study->dropped, ut_links_link (links, i)->terminal);
  kept = ut_links_subset (links, keep, FALSE);
  solution_clear (solution);
  solve_kept (kept, solution);
  return kept;
}

static void
answer (UtStudy *study, GCancellable *cancellable)
{
  g_autoptr (UtLinks) links = ut_links_new (study->gains, study->question.direction);
  g_autoptr (UtLinks) rest = NULL;
  g_autofree gboolean *keep = g_new (gboolean, MAX (links->links->len, 1));
  const UtLinks *kept = links;
  Solution solution = { 0 };
  guint index = 0;

  for (guint i = 0; i < links->links->len; i++)
    keep[i] = TRUE;
  judge (study, links, &solution);
  study->dropping.proved = TRUE;
  if (study->question.aim == UT_AIM_FEWEST_DROPPED && study->verdict != UT_VERDICT_MET)
    kept = rest = drop_links (study, links, keep, &solution, cancellable);
  if (kept != NULL)
    {
      UtPowers powers = ut_powers_new (kept);

      choose_powers (study, kept, &solution, &powers);
      for (guint i = 0; i < links->links->len; i++)
        answer_link (study, ut_links_link (links, i), !keep[i], kept, &powers, keep[i] ? index++ : 0);
      if (study->question.reserves)
        answer_reserves (study, kept, cancellable);
      answer_transmitters (study, kept, &powers);
      warn_of_plan (study);
      warn_of_eirp (study);
      warn_of_shared_cells (study, kept);
      ut_powers_clear (&powers);
    }
  solution_clear (&solution);
}

UtStudy *
ut_study_new_cancellable (const UtPlan *plan, const UtQuestion *question, const UtStudy *previous, GCancellable *cancellable)
{
  UtStudy *study = study_alloc (plan, question, previous, cancellable);

  if (!g_cancellable_is_cancelled (cancellable))
    answer (study, cancellable);
  if (question->remedies && !g_cancellable_is_cancelled (cancellable))
    study->remedies = ut_remedies_new (study, cancellable);
  if (g_cancellable_is_cancelled (cancellable))
    g_clear_pointer (&study, ut_study_unref);
  return study;
}

UtStudy *
ut_study_new (const UtPlan *plan, const UtQuestion *question, const UtStudy *previous)
{
  return ut_study_new_cancellable (plan, question, previous, NULL);
}

UtStudy *
ut_study_ref (UtStudy *study)
{
  return g_atomic_rc_box_acquire (study);
}

static void
study_clear (gpointer data)
{
  UtStudy *study = data;

  ut_gains_unref (study->gains);
  g_array_unref (study->transmitters);
  g_array_unref (study->links);
  g_array_unref (study->limiting_group);
  g_array_unref (study->lacks_db);
  g_array_unref (study->edge.blame);
  g_array_unref (study->edge.chain);
  g_array_unref (study->dropped);
  g_ptr_array_unref (study->warnings);
  g_clear_pointer (&study->remedies, g_ptr_array_unref);
}

void
ut_study_unref (UtStudy *study)
{
  g_atomic_rc_box_release_full (study, study_clear);
}

char *
ut_study_law_text (const UtStudy *study)
{
  return ut_base_law_text (study->gains->plan->propagation);
}

gboolean
ut_study_all_met (const UtStudy *study)
{
  if (study->question.aim == UT_AIM_FEWEST_DROPPED)
    return study->dropped->len == 0;
  if (study->question.aim != UT_AIM_AS_SET)
    return study->verdict == UT_VERDICT_MET;
  for (guint i = 0; i < study->links->len; i++)
    {
      const UtLinkAnswer *link = ut_study_link (study, i);

      if (!(link->margin_db >= UT_MARGIN_MET_DB)
          || (!isnan (link->level_target_dbm) && !(link->signal_dbm - link->level_target_dbm >= UT_MARGIN_MET_DB)))
        return FALSE;
    }
  return TRUE;
}
