/* What is selected: radios and walls by kind and id, so that a selection outlives the revision it was made in. */
#pragma once

#include "plan.h"

typedef enum { UT_KIND_CELL, UT_KIND_TERMINAL, UT_KIND_WALL } UtRadioKind;

/* A wall's id is once in its storey only: a pick holds both, the storey's first, with this between (no id of a file can hold it: it is no text). */
#define UT_WALL_PICK_BREAK '\x1f'

typedef struct
{
  UtRadioKind kind;
  char *id;
} UtPick;

#define UT_TYPE_SELECTION (ut_selection_get_type ())
G_DECLARE_FINAL_TYPE (UtSelection, ut_selection, UT, SELECTION, GObject)

/* Signal "changed" after the set became another one. */
UtSelection *ut_selection_new (void);

guint ut_selection_size (UtSelection *selection);
const UtPick *ut_selection_pick (UtSelection *selection, guint index); /* in the order they were added */
gboolean ut_selection_has (UtSelection *selection, UtRadioKind kind, const char *id);

void ut_selection_clear (UtSelection *selection);
void ut_selection_set_one (UtSelection *selection, UtRadioKind kind, const char *id);
void ut_selection_add (UtSelection *selection, UtRadioKind kind, const char *id);
void ut_selection_toggle (UtSelection *selection, UtRadioKind kind, const char *id);

/* Drops what the plan no longer holds. */
void ut_selection_keep_to (UtSelection *selection, const UtPlan *plan);

/* As text for the document's steps ("cell C1\nterminal T4"), and back. */
char *ut_selection_to_text (UtSelection *selection);
void ut_selection_set_text (UtSelection *selection, const char *text);

/* "Move C2", "Move 3 Radios": for steps about what is selected; verb is translated already. Transfer full. */
char *ut_selection_step_label (UtSelection *selection, const char *verb);

/* Begin a change of several parts that is told once, and end it. */
void ut_selection_freeze (UtSelection *selection);
void ut_selection_thaw (UtSelection *selection);

/* The pick of a wall: its storey's and its own id. Transfer full. */
char *ut_wall_pick_id (const UtPlan *plan, guint storey, guint wall);

/* Where a picked wall is; FALSE when the plan does not hold it. */
gboolean ut_plan_find_picked_wall (const UtPlan *plan, const char *pick_id, guint *storey, guint *wall);

/* Index of the storey that a picked thing is on, or -1. */
int ut_plan_storey_of_pick (const UtPlan *plan, const UtPick *pick);

/* Radios among what is selected. */
guint ut_selection_n_radios (UtSelection *selection);

/* The radio picked, or NULL when the plan does not hold it, or for a wall. */
const UtRadio *ut_plan_radio (const UtPlan *plan, UtRadioKind kind, const char *id);
