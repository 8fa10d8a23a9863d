#include "remedies.h"

#include <math.h>

#include "decibel.h"
#include "least.h"
#include "links.h"
#include "plan-edit.h"

/* Of each kind at most this many are told. */
#define MOST_OF_A_KIND 5

/* Up to so many links, and cells, each is tried for itself; beyond, so many of the limiting group, the most involved, and their cells. */
#define FEW 64
#define MOST_TRIED 24

/* A path cannot be asked to lose more than this. */
#define MOST_LOSS_DB 80

/* An amount is found to this, and told on the safe side. */
#define AMOUNT_DB 1e-6

typedef struct
{
  const UtStudy *study;
  const UtPlan *plan;
  GCancellable *cancellable;
  GPtrArray *found; /* of the present kind */
  GPtrArray *all;
} Search;

static void
remedy_free (gpointer data)
{
  UtRemedy *remedy = data;

  g_array_unref (remedy->transmitters);
  g_array_unref (remedy->to_dbm);
  ut_plan_unref (remedy->plan);
  g_free (remedy);
}

static gboolean
stopped (const Search *search)
{
  return g_cancellable_is_cancelled (search->cancellable);
}

static gboolean
is_down (const Search *search)
{
  return search->study->question.direction == UT_DIRECTION_DOWN;
}

/* Headroom in dB of a changed plan; *met: whether its verdict is "met". */
static double
solve_again (const Search *search, const UtPlan *plan, gboolean *met)
{
  UtQuestion question = { .direction = search->study->question.direction };
  g_autoptr (UtStudy) again = ut_study_new_cancellable (plan, &question, search->study, search->cancellable);

  *met = again != NULL && again->verdict == UT_VERDICT_MET;
  if (again == NULL)
    return NAN;
  return again->links->len == 0 ? INFINITY : again->headroom_db;
}

/* Takes over the changed plan; keeps it as a remedy if it can be met. Returns the remedy, to be completed, or NULL. */
static UtRemedy *
try_plan (Search *search, UtRemedyKind kind, const UtPlan *plan)
{
  gboolean met;
  double headroom_db = solve_again (search, plan, &met);
  UtRemedy *remedy;

  if (!met)
    {
      ut_plan_unref (plan);
      return NULL;
    }
  remedy = g_new0 (UtRemedy, 1);
  *remedy = (UtRemedy){
    .kind = kind,
    .terminal = -1,
    .cell = -1,
    .transmitters = g_array_new (FALSE, FALSE, sizeof (guint)),
    .to_dbm = g_array_new (FALSE, FALSE, sizeof (double)),
    .by_db = NAN,
    .headroom_db = headroom_db,
    .plan = plan,
  };
  g_ptr_array_add (search->found, remedy);
  return remedy;
}

/* ---- changed plans ---- */

static const UtRadio *
transmitter (const Search *search, guint index)
{
  return is_down (search) ? &ut_plan_cell (search->plan, index)->radio : &ut_plan_terminal (search->plan, index)->radio;
}

static double *
target_of (const Search *search, UtTerminal *terminal)
{
  return is_down (search) ? &terminal->target_down_db : &terminal->target_up_db;
}

static const UtPlan *
with_target_lower (const Search *search, const UtPlan *plan, guint index, double by_db)
{
  UtTerminal *terminal = ut_terminal_copy (ut_plan_terminal (plan, index));

  *target_of (search, terminal) -= by_db;
  return ut_plan_with_terminal (plan, (int) index, terminal);
}

static const UtPlan *
with_all_targets_lower (const Search *search, double by_db)
{
  const UtPlan *plan = ut_plan_ref (search->plan);

  for (guint i = 0; i < search->study->links->len; i++)
    {
      const UtPlan *next = with_target_lower (search, plan, ut_study_link (search->study, i)->terminal, by_db);

      ut_plan_step (&plan, next);
    }
  return plan;
}

static const UtPlan *
with_terminal_off (const Search *search, guint index)
{
  UtTerminal *terminal = ut_terminal_copy (ut_plan_terminal (search->plan, index));

  terminal->radio.on = FALSE;
  return ut_plan_with_terminal (search->plan, (int) index, terminal);
}

static const UtPlan *
with_serving_cell (const UtPlan *plan, guint index, const char *cell)
{
  UtTerminal *terminal = ut_terminal_copy (ut_plan_terminal (plan, index));

  g_free (terminal->cell);
  terminal->cell = g_strdup (cell);
  return ut_plan_with_terminal (plan, (int) index, terminal);
}

static const UtPlan *
with_cell_off (const Search *search, guint index)
{
  UtCell *cell = ut_cell_copy (ut_plan_cell (search->plan, index));
  const UtPlan *plan;

  cell->radio.on = FALSE;
  plan = ut_plan_with_cell (search->plan, (int) index, cell);
  for (guint t = 0; t < plan->terminals->len; t++)
    if (g_strcmp0 (ut_plan_terminal (plan, t)->cell, ut_plan_cell (plan, index)->radio.id) == 0)
      {
        const UtPlan *next = with_serving_cell (plan, t, NULL);

        ut_plan_step (&plan, next);
      }
  return plan;
}

static const UtPlan *
with_path_weaker (const Search *search, guint terminal, guint cell, double by_db)
{
  const UtGains *gains = search->study->gains;

  return ut_plan_with_measured_gain (search->plan,
                                     ut_plan_terminal (search->plan, terminal)->radio.id,
                                     ut_plan_cell (search->plan, cell)->radio.id,
                                     gains->gain_db[ut_gains_at (gains, terminal, cell)] - by_db);
}

/* A transmitter of the direction with another highest power, or an attenuator behind it. */
static const UtPlan *
with_transmitter (const Search *search, const UtPlan *plan, guint index, double power_max_dbm, double pad_db)
{
  UtCell *cell = is_down (search) ? ut_cell_copy (ut_plan_cell (plan, index)) : NULL;
  UtTerminal *terminal = is_down (search) ? NULL : ut_terminal_copy (ut_plan_terminal (plan, index));
  UtRadio *radio = is_down (search) ? &cell->radio : &terminal->radio;

  radio->feeder_loss_db += pad_db;
  if (isfinite (power_max_dbm))
    radio->power_max_dbm = power_max_dbm;
  return is_down (search) ? ut_plan_with_cell (plan, (int) index, cell) : ut_plan_with_terminal (plan, (int) index, terminal);
}

/* ---- kinds ---- */

/* A change by an amount. */
typedef struct
{
  guint terminal, cell;
} Place;

typedef const UtPlan *(*Change) (const Search *search, Place place, double by_db);

static const UtPlan *
lower_all (const Search *search, Place place, double by_db)
{
  (void) place;
  return with_all_targets_lower (search, by_db);
}

static const UtPlan *
lower_one (const Search *search, Place place, double by_db)
{
  return with_target_lower (search, search->plan, place.terminal, by_db);
}

static const UtPlan *
weaken (const Search *search, Place place, double by_db)
{
  return with_path_weaker (search, place.terminal, place.cell, by_db);
}

/* The least amount with which the plan can be met, between low_db (the least that may do) and high_db; more must do what less does.  NAN: none does. */
static double
least_amount (const Search *search, Change change, Place place, double low_db, double high_db)
{
  const double tries_db[] = { low_db, high_db };
  gboolean met = FALSE;

  for (guint k = 0; k < G_N_ELEMENTS (tries_db) && !met && !stopped (search); k++)
    {
      g_autoptr (UtPlan) plan = (UtPlan *) change (search, place, tries_db[k]);

      solve_again (search, plan, &met);
      if (met && k == 0)
        return low_db;
    }
  if (!met)
    return NAN;
  while (high_db - low_db > AMOUNT_DB && !stopped (search))
    {
      double middle_db = 0.5 * (low_db + high_db);
      g_autoptr (UtPlan) plan = (UtPlan *) change (search, place, middle_db);

      solve_again (search, plan, &met);
      *(met ? &high_db : &low_db) = middle_db;
    }
  return high_db;
}

static UtRemedy *
try_amount (Search *search, UtRemedyKind kind, Change change, Place place, double low_db, double high_db)
{
  double by_db = least_amount (search, change, place, low_db, high_db);
  UtRemedy *remedy = isnan (by_db) ? NULL : try_plan (search, kind, change (search, place, by_db));

  if (remedy != NULL)
    remedy->by_db = by_db;
  return remedy;
}

/* What power steps may ask for beyond what continuous powers do: headroom of the largest step is enough for any. */
static double
largest_step_db (const Search *search)
{
  double most_db = 0;

  for (guint i = 0; i < search->study->transmitters->len; i++)
    {
      const UtTransmitterAnswer *sender = ut_study_transmitter (search->study, i);

      most_db = MAX (most_db, transmitter (search, sender->index)->power_step_db);
    }
  return most_db;
}

static void
try_lower_targets (Search *search)
{
  double by_db = MAX (search->study->headroom_error_db - search->study->headroom_db, 0);

  /* Top levels may lie a step below the limits, and levels a step apart. */
  if (isfinite (by_db))
    try_amount (search, UT_REMEDY_LOWER_TARGETS, lower_all, (Place){ 0, 0 }, by_db, by_db + 2 * largest_step_db (search) + AMOUNT_DB);
}

static void
try_lower_target (Search *search)
{
  for (guint i = 0; i < search->study->links->len && !stopped (search); i++)
    {
      const UtLinkAnswer *link = ut_study_link (search->study, i);
      UtRemedy *remedy;

      /* Step-limited: continuous powers leave a reserve, and yet a little less may be what the steps need. */
      if (isnan (link->reserve_db) || (link->reserve_db >= 0 && search->study->verdict != UT_VERDICT_STEP_LIMITED))
        continue;
      remedy = try_amount (search,
                           UT_REMEDY_LOWER_TARGET,
                           lower_one,
                           (Place){ link->terminal, 0 },
                           MAX (AMOUNT_DB / 10 - link->reserve_db, 0),
                           MAX (-link->reserve_db, 0) + 4 * largest_step_db (search) + AMOUNT_DB);
      if (remedy != NULL)
        remedy->terminal = (int) link->terminal;
    }
}

static gboolean
worth_trying (const Search *search, guint terminal)
{
  const GArray *group = search->study->limiting_group;

  if (search->study->links->len <= FEW)
    return TRUE;
  for (guint i = 0; i < MIN (group->len, MOST_TRIED); i++)
    if (g_array_index (group, guint, i) == terminal)
      return TRUE;
  return FALSE;
}

static void
try_drop_link (Search *search)
{
  for (guint i = 0; i < search->study->links->len && !stopped (search); i++)
    {
      guint terminal = ut_study_link (search->study, i)->terminal;
      UtRemedy *remedy = worth_trying (search, terminal) ? try_plan (search, UT_REMEDY_DROP_LINK, with_terminal_off (search, terminal)) : NULL;

      if (remedy != NULL)
        remedy->terminal = (int) terminal;
    }
}

static int
serving_cell (const Search *search, guint terminal)
{
  for (guint i = 0; i < search->study->links->len; i++)
    if (ut_study_link (search->study, i)->terminal == terminal)
      return ut_study_link (search->study, i)->cell;
  return -1;
}

/* One of the three cells that a terminal hears best besides its own; with few cells any. */
static gboolean
among_best (const Search *search, guint terminal, guint cell)
{
  const UtGains *gains = search->study->gains;
  guint better = 0;

  for (guint c = 0; c < gains->n_cells; c++)
    if (ut_plan_cell (search->plan, c)->radio.on && (int) c != serving_cell (search, terminal)
        && gains->gain_db[ut_gains_at (gains, terminal, c)] > gains->gain_db[ut_gains_at (gains, terminal, cell)])
      better++;
  return better < 3 || (gains->n_cells <= 12 && search->study->links->len <= FEW);
}

static void
try_other_cell (Search *search)
{
  const GArray *group = search->study->limiting_group;

  for (guint i = 0; i < MIN (group->len, MOST_TRIED); i++)
    for (guint c = 0; c < search->plan->cells->len && !stopped (search); c++)
      {
        guint terminal = g_array_index (group, guint, i);
        UtRemedy *remedy;

        if (!ut_plan_cell (search->plan, c)->radio.on || serving_cell (search, terminal) == (int) c || !among_best (search, terminal, c))
          continue;
        remedy = try_plan (search,
                           UT_REMEDY_OTHER_CELL,
                           with_serving_cell (search->plan, terminal, ut_plan_cell (search->plan, c)->radio.id));
        if (remedy != NULL)
          {
            remedy->terminal = (int) terminal;
            remedy->cell = (int) c;
          }
      }
}

static gboolean
serves_group (const Search *search, guint cell)
{
  const GArray *group = search->study->limiting_group;

  for (guint i = 0; i < MIN (group->len, MOST_TRIED); i++)
    if (serving_cell (search, g_array_index (group, guint, i)) == (int) cell)
      return TRUE;
  return FALSE;
}

static void
try_leave_out_cell (Search *search)
{
  for (guint c = 0; c < search->plan->cells->len && !stopped (search); c++)
    {
      UtRemedy *remedy = NULL;

      if (ut_plan_cell (search->plan, c)->radio.on && (search->plan->cells->len <= FEW || serves_group (search, c)))
        remedy = try_plan (search, UT_REMEDY_LEAVE_OUT_CELL, with_cell_off (search, c));

      if (remedy != NULL)
        remedy->cell = (int) c;
    }
}

/* The paths to blame, each once. */
static void
try_weaken_path (Search *search)
{
  const GArray *blame = search->study->edge.blame;
  g_autoptr (GHashTable) seen = g_hash_table_new_full (g_int64_hash, g_int64_equal, g_free, NULL);

  for (guint i = 0; i < blame->len && g_hash_table_size (seen) < 2 * MOST_OF_A_KIND && !stopped (search); i++)
    {
      const UtBlame *one = &g_array_index (blame, UtBlame, i);
      int served = serving_cell (search, one->terminal);
      guint terminal = is_down (search) ? one->terminal : (guint) one->because_of;
      int cell = is_down (search) ? one->because_of : served;
      gint64 *key = g_new (gint64, 1);
      UtRemedy *remedy;

      *key = (gint64) terminal << 32 | cell;
      if (cell < 0 || serving_cell (search, terminal) == cell || !g_hash_table_add (seen, key))
        {
          if (cell < 0 || serving_cell (search, terminal) == cell)
            g_free (key);
          continue;
        }
      remedy = try_amount (search, UT_REMEDY_WEAKEN_PATH, weaken, (Place){ terminal, (guint) cell }, 0, MOST_LOSS_DB);
      if (remedy != NULL)
        {
          remedy->terminal = (int) terminal;
          remedy->cell = cell;
        }
    }
}

/* What every transmitter must be able to send if there were no limits; FALSE where no powers whatever will do.  mw: cells or terminals. */
static gboolean
powers_without_limits (const Search *search, double *mw)
{
  g_autoptr (UtLinks) links = ut_links_new (search->study->gains, search->study->question.direction);
  g_autofree double *p = g_new0 (double, MAX (links->n_unknowns, 1));
  UtPowers powers = ut_powers_new (links);
  UtSystem system;
  gboolean found;

  /* Terminals must not be held to their limits when their powers are worked out of what their cell hears. */
  for (guint i = 0; i < links->links->len; i++)
    g_array_index (links->links, UtLink, i).limit_mw = 1e300;
  found = ut_links_system (links, FALSE, &system) == UT_POWER_OK && ut_least_powers (&system, 1, UT_LIFT_LIMITS, p, NULL) == UT_POWER_OK;
  ut_system_clear (&system);
  if (found && ut_links_have_steps (links))
    found = ut_links_least_levels (links, 1, &powers);
  else if (found)
    ut_links_powers (links, p, &powers);
  for (guint i = 0; i < links->links->len && found; i++)
    {
      const UtLink *link = ut_links_link (links, i);

      if (link->cell < 0)
        found = FALSE;
      else if (is_down (search))
        mw[link->cell] = powers.cell_mw[link->cell];
      else
        mw[link->terminal] = powers.link_mw[i];
    }
  ut_powers_clear (&powers);
  return found;
}

static void
try_raise_limits (Search *search)
{
  guint n = is_down (search) ? search->plan->cells->len : search->plan->terminals->len;
  g_autofree double *mw = g_new0 (double, MAX (n, 1));
  g_autoptr (GArray) transmitters = g_array_new (FALSE, FALSE, sizeof (guint)), to_dbm = g_array_new (FALSE, FALSE, sizeof (double));
  const UtPlan *plan;
  UtRemedy *remedy;

  if (search->study->verdict == UT_VERDICT_INTERFERENCE_LIMITED || !powers_without_limits (search, mw))
    return;
  plan = ut_plan_ref (search->plan);
  for (guint i = 0; i < n; i++)
    if (mw[i] > ut_radio_limit_mw (search->plan, transmitter (search, i)) * (1 + UT_LIMIT_SLACK))
      {
        double dbm = ut_dbm_from_mw (mw[i]) + AMOUNT_DB / 10;
        const UtPlan *next = with_transmitter (search, plan, i, dbm, 0);

        ut_plan_step (&plan, next);
        g_array_append_val (transmitters, i);
        g_array_append_val (to_dbm, dbm);
      }
  /* A rule's EIRP limit is not the planner's to raise: with it in the way the changed plan is not met. */
  remedy = try_plan (search, UT_REMEDY_RAISE_LIMITS, plan);
  if (remedy != NULL)
    {
      g_array_append_vals (remedy->transmitters, transmitters->data, transmitters->len);
      g_array_append_vals (remedy->to_dbm, to_dbm->data, to_dbm->len);
    }
}

/* Attenuators as they are sold (common practice). */
static const double pads_db[] = { 1, 2, 3, 6, 10, 15, 20, 30 };

static void
try_pads_at (Search *search, const guint *transmitters, guint n)
{
  for (guint k = 0; k < G_N_ELEMENTS (pads_db) && !stopped (search); k++)
    {
      const UtPlan *plan = ut_plan_ref (search->plan);
      UtRemedy *remedy;

      for (guint i = 0; i < n; i++)
        {
          const UtPlan *next = with_transmitter (search, plan, transmitters[i], NAN, pads_db[k]);

          ut_plan_step (&plan, next);
        }
      remedy = try_plan (search, UT_REMEDY_PADS, plan);
      if (remedy != NULL)
        {
          remedy->by_db = pads_db[k];
          g_array_append_vals (remedy->transmitters, transmitters, n);
          return;
        }
    }
}

static gboolean
holds (const GArray *indices, guint index)
{
  for (guint i = 0; i < indices->len; i++)
    if (g_array_index (indices, guint, i) == index)
      return TRUE;
  return FALSE;
}

/* Transmitters that stand at their lowest power in the answer, those with most of the blame first. */
static GArray *
transmitters_at_lowest (const Search *search)
{
  g_autoptr (GArray) lowest = g_array_new (FALSE, FALSE, sizeof (guint));
  GArray *ordered = g_array_new (FALSE, FALSE, sizeof (guint));

  for (guint i = 0; i < search->study->transmitters->len; i++)
    {
      const UtTransmitterAnswer *sender = ut_study_transmitter (search->study, i);

      if (sender->power_dbm <= sender->power_min_dbm + 1e-6)
        g_array_append_val (lowest, sender->index);
    }
  for (guint i = 0; i < search->study->edge.blame->len; i++)
    {
      guint index = (guint) g_array_index (search->study->edge.blame, UtBlame, i).because_of;

      if (holds (lowest, index) && !holds (ordered, index))
        g_array_append_val (ordered, index);
    }
  for (guint i = 0; i < lowest->len; i++)
    if (!holds (ordered, g_array_index (lowest, guint, i)))
      g_array_append_val (ordered, g_array_index (lowest, guint, i));
  return ordered;
}

/* Attenuators at one alone, else at the first two, four, ... of them, else at all. */
static void
try_pads (Search *search)
{
  g_autoptr (GArray) lowest = NULL;
  const guint *indices;

  if (search->study->verdict != UT_VERDICT_MINIMUM_LIMITED)
    return;
  lowest = transmitters_at_lowest (search);
  indices = (const guint *) (const void *) lowest->data;
  for (guint i = 0; i < lowest->len && (search->study->links->len <= FEW || i < MOST_OF_A_KIND); i++)
    try_pads_at (search, &indices[i], 1);
  for (guint n = 2; search->found->len == 0 && n < 2 * lowest->len; n *= 2)
    try_pads_at (search, indices, MIN (n, lowest->len));
}

/* ---- order ---- */

/* The smaller amount first; of links the one of less priority; then the larger headroom. */
static int
compare_remedies (gconstpointer one, gconstpointer other, gpointer data)
{
  const UtRemedy *a = *(UtRemedy *const *) one, *b = *(UtRemedy *const *) other;
  const Search *search = data;

  if (!isnan (a->by_db) && fabs (a->by_db - b->by_db) > AMOUNT_DB)
    return a->by_db < b->by_db ? -1 : 1;
  if (a->kind == UT_REMEDY_DROP_LINK)
    {
      double priorities[] = { ut_plan_terminal (search->plan, (guint) a->terminal)->priority,
                              ut_plan_terminal (search->plan, (guint) b->terminal)->priority };

      if (priorities[0] < priorities[1] || priorities[0] > priorities[1])
        return priorities[0] < priorities[1] ? -1 : 1;
    }
  return (a->headroom_db < b->headroom_db) - (a->headroom_db > b->headroom_db);
}

static void
collect (Search *search, void (*try_kind) (Search *search))
{
  if (stopped (search))
    return;
  search->found = g_ptr_array_new ();
  try_kind (search);
  g_ptr_array_sort_with_data (search->found, compare_remedies, search);
  for (guint i = 0; i < search->found->len; i++)
    if (i < MOST_OF_A_KIND)
      g_ptr_array_add (search->all, search->found->pdata[i]);
    else
      remedy_free (search->found->pdata[i]);
  g_ptr_array_unref (search->found);
}

/* The study that the search starts from: least powers, with reserves. */
static UtStudy *
starting_study (const UtStudy *study, GCancellable *cancellable)
{
  UtQuestion question = { .direction = study->question.direction, .reserves = TRUE };

  if (study->question.aim == UT_AIM_LEAST_POWER && !(study->question.hold_db > 0) && study->question.reserves)
    return ut_study_ref ((UtStudy *) study);
  return ut_study_new_cancellable (study->gains->plan, &question, study, cancellable);
}

GPtrArray *
ut_remedies_new (const UtStudy *study, GCancellable *cancellable)
{
  g_autoptr (UtStudy) start = study->verdict == UT_VERDICT_MET ? NULL : starting_study (study, cancellable);
  Search search = {
    .study = start,
    .plan = study->gains->plan,
    .cancellable = cancellable,
    .all = g_ptr_array_new_with_free_func (remedy_free),
  };

  if (start == NULL)
    return search.all;
  collect (&search, try_lower_targets);
  collect (&search, try_lower_target);
  collect (&search, try_drop_link);
  collect (&search, try_other_cell);
  collect (&search, try_leave_out_cell);
  collect (&search, try_weaken_path);
  collect (&search, try_raise_limits);
  collect (&search, try_pads);
  return search.all;
}
