/* UtDesk: what the parts of one window share: the document, what is being dragged, what is selected, what is asked, and the answer.  No widgets. */
#pragma once

#include "document.h"
#include "presets.h"
#include "selection.h"
#include "solving.h"

#define UT_TYPE_DESK (ut_desk_get_type ())
G_DECLARE_FINAL_TYPE (UtDesk, ut_desk, UT, DESK, GObject)

/* Signals: "plan-changed" (the plan shown became another: a step, an undo, a draft), "question-changed", "storey-changed" (another storey is shown). */
UtDesk *ut_desk_new (UtDocument *document);

UtDocument *ut_desk_document (UtDesk *desk);
UtSelection *ut_desk_selection (UtDesk *desk);
UtSolving *ut_desk_solving (UtDesk *desk);

/* The plan as shown: the draft while something is dragged, else the document's. Borrowed. */
const UtPlan *ut_desk_plan (UtDesk *desk);

/* Index of the storey that is shown and worked on. */
guint ut_desk_storey (UtDesk *desk);
void ut_desk_set_storey (UtDesk *desk, guint storey);

/* A draft is shown and solved, but no step; it takes over `draft`. */
void ut_desk_set_draft (UtDesk *desk, const UtPlan *draft);
gboolean ut_desk_has_draft (UtDesk *desk);

/* The draft becomes one step, or goes. */
void ut_desk_commit_draft (UtDesk *desk, const char *label, const char *coalesce);
void ut_desk_drop_draft (UtDesk *desk);

/* One step without a draft; takes over `plan`. */
void ut_desk_apply (UtDesk *desk, const UtPlan *plan, const char *label, const char *coalesce);
void ut_desk_undo (UtDesk *desk);
void ut_desk_redo (UtDesk *desk);

const UtQuestion *ut_desk_question (UtDesk *desk);
void ut_desk_set_question (UtDesk *desk, const UtQuestion *question);

/* The answer to what is shown, or NULL while there is none: never an old one. */
UtStudy *ut_desk_answer (UtDesk *desk);

/* What the sheet colours its links by: the answer, unless another study was put in its place for a while, such as a round of power control.  It must be of a plan
 * with the same radios in the same places; NULL ends it, as does any step.  Signal "shown-changed". */
UtStudy *ut_desk_shown (UtDesk *desk);
void ut_desk_set_shown (UtDesk *desk, UtStudy *study);

/* Everything selected moved by (dx_m, dy_m): transfer full, the plan itself (a new reference) where nothing moves. */
const UtPlan *ut_desk_moved (UtDesk *desk, const UtPlan *plan, double dx_m, double dy_m) G_GNUC_WARN_UNUSED_RESULT;

/* "Move C2", "Move 3 Radios": for steps about what is selected; verb is translated already and holds one %s. Transfer full. */
char *ut_desk_step_label (UtDesk *desk, const char *verb);

/* Steps on what is selected; nothing happens when nothing is. */
void ut_desk_delete_selected (UtDesk *desk);
void ut_desk_nudge_selected (UtDesk *desk, double dx_m, double dy_m);

/* A step that adds `picks` (selection text) to the plan, which are selected then; verb: "Paste".  Takes over `plan`.  Nothing happens without picks. */
void ut_desk_apply_and_select (UtDesk *desk, const UtPlan *plan, const char *verb, const char *picks);

/* Puts a fragment on the storey shown (see ut_plan_with_fragment ()), as one step. */
void ut_desk_put_fragment (UtDesk *desk, const UtPlan *fragment, double dx_m, double dy_m, gboolean own, const char *verb);

/* What is selected once more, that much to the right and down. */
#define UT_DUPLICATE_M 1.0
void ut_desk_duplicate_selected (UtDesk *desk);

/* Adds a radio at a place of a storey and selects it. */
void ut_desk_place (UtDesk *desk, UtRadioKind kind, const char *storey, double x_m, double y_m);

/* The same by a preset. */
void ut_desk_place_preset (UtDesk *desk, const UtPreset *preset, const char *storey, double x_m, double y_m);

/* The cell's set power, as one coalesced step or as draft; held to its limits. */
const UtPlan *ut_plan_with_set_power (const UtPlan *plan, UtRadioKind kind, const char *id, double power_dbm) G_GNUC_WARN_UNUSED_RESULT;
