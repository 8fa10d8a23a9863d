/* Edits: pure functions from a plan to a new plan that shares everything untouched.
 * The item given is taken over (transfer full) and is immutable from then on. Indices must be
 * valid; -1 where stated appends. */
#pragma once

#include "plan.h"

/* The next plan takes the place of the one before, for chains of edits: *plan is given up, `next` taken over. */
static inline void
ut_plan_step (const UtPlan **plan, const UtPlan *next)
{
  ut_plan_unref (*plan);
  *plan = next;
}

/* The texts of the title block and the notes. */
typedef enum
{
  UT_PLAN_TITLE,
  UT_PLAN_CLIENT,
  UT_PLAN_PREPARED_BY,
  UT_PLAN_REVISION,
  UT_PLAN_DATE,
  UT_PLAN_NOTES
} UtPlanText;
const UtPlan *ut_plan_with_text (const UtPlan *plan, UtPlanText which, const char *text);
const UtPlan *ut_plan_with_title (const UtPlan *plan, const char *title);
const UtPlan *ut_plan_with_site (const UtPlan *plan, UtSite *site);
const UtPlan *ut_plan_with_carrier (const UtPlan *plan, UtCarrier *carrier);
const UtPlan *ut_plan_with_propagation (const UtPlan *plan, UtPropagation *propagation);
const UtPlan *ut_plan_with_cell (const UtPlan *plan, int index, UtCell *cell); /* -1: append */
const UtPlan *
ut_plan_with_terminal (const UtPlan *plan, int index, UtTerminal *terminal); /* -1: append */
/* Every cell and terminal for which the function changes the copy it gets, and says so; the others
 * stay shared. */
const UtPlan *ut_plan_with_each_radio (const UtPlan *plan,
                                       gboolean (*change) (UtRadio *radio, gconstpointer user),
                                       gconstpointer user);
/* Sets the measured gain of a pair, by their ids; it must exist. */
const UtPlan *ut_plan_with_measured_gain (const UtPlan *plan,
                                          const char *terminal,
                                          const char *cell,
                                          double gain_db);
const UtPlan *
ut_plan_with_storey (const UtPlan *plan, int index, UtStorey *storey); /* -1: append */
const UtPlan *ut_plan_with_construction (const UtPlan *plan,
                                         int index,
                                         UtConstruction *construction); /* -1: append */
const UtPlan *ut_plan_without_cell (
    const UtPlan *plan,
    int index); /* terminals that named it become automatic; its measured gains go */
const UtPlan *ut_plan_without_terminal (const UtPlan *plan, int index); /* its measured gains go */

/* A construction that nothing uses goes; see ut_plan_uses_of_construction (). */
const UtPlan *ut_plan_without_construction (const UtPlan *plan, int index);

/* Walls, openings and floors that are made of it. */
guint ut_plan_uses_of_construction (const UtPlan *plan, const char *id);

const UtPlan *ut_plan_with_antenna (const UtPlan *plan, int index, UtAntenna *antenna); /* -1: append */
/* An antenna that nothing uses goes. */
const UtPlan *ut_plan_without_antenna (const UtPlan *plan, int index);
guint ut_plan_uses_of_antenna (const UtPlan *plan, const char *id);

/* A storey goes with the radios on it; one must be left. */
const UtPlan *ut_plan_without_storey (const UtPlan *plan, guint index);
/* The storey at `index` becomes the one at `to` in the list; nothing else changes. */
const UtPlan *ut_plan_with_storey_at (const UtPlan *plan, guint index, guint to);

/* Walls of a storey, by their index there. */
const UtPlan *
ut_plan_with_wall (const UtPlan *plan, guint storey, int index, UtWall *wall); /* -1: append */
const UtPlan *ut_plan_without_wall (const UtPlan *plan, guint storey, guint index);

/* The first free id of the form prefix + number ("C5"). Transfer full. */
char *ut_plan_free_cell_id (const UtPlan *plan);
char *ut_plan_free_terminal_id (const UtPlan *plan);
char *ut_plan_free_wall_id (const UtPlan *plan, guint storey);
char *ut_plan_free_storey_id (const UtPlan *plan);
char *ut_plan_free_antenna_id (const UtPlan *plan);
char *ut_plan_free_construction_id (const UtPlan *plan);
