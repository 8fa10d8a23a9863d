#include "desk.h"

#include <math.h>

#include <glib/gi18n.h>

#include "arrange.h"
#include "fragment.h"
#include "places.h"
#include "plan-edit.h"

struct _UtDesk
{
  GObject parent;
  UtDocument *document;
  UtSelection *selection;
  UtSolving *solving;
  const UtPlan *draft;
  UtQuestion question;
  guint storey;
  UtStudy *shown; /* in the answer's place; NULL: the answer */
};

G_DEFINE_FINAL_TYPE (UtDesk, ut_desk, G_TYPE_OBJECT)

enum { PLAN_CHANGED, QUESTION_CHANGED, STOREY_CHANGED, SHOWN_CHANGED, N_SIGNALS };
static guint signals[N_SIGNALS];

static void
ut_desk_dispose (GObject *object)
{
  UtDesk *self = UT_DESK (object);

  g_clear_pointer (&self->draft, ut_plan_unref);
  g_clear_pointer (&self->shown, ut_study_unref);
  g_clear_object (&self->document);
  g_clear_object (&self->selection);
  g_clear_object (&self->solving);
  G_OBJECT_CLASS (ut_desk_parent_class)->dispose (object);
}

static void
ut_desk_class_init (UtDeskClass *class)
{
  G_OBJECT_CLASS (class)->dispose = ut_desk_dispose;
  signals[PLAN_CHANGED] = g_signal_new ("plan-changed", UT_TYPE_DESK, G_SIGNAL_RUN_LAST, 0, NULL, NULL, NULL, G_TYPE_NONE, 0);
  signals[SHOWN_CHANGED] = g_signal_new ("shown-changed", UT_TYPE_DESK, G_SIGNAL_RUN_LAST, 0, NULL, NULL, NULL, G_TYPE_NONE, 0);
  signals[STOREY_CHANGED] = g_signal_new ("storey-changed", UT_TYPE_DESK, G_SIGNAL_RUN_LAST, 0, NULL, NULL, NULL, G_TYPE_NONE, 0);
  signals[QUESTION_CHANGED] = g_signal_new ("question-changed", UT_TYPE_DESK, G_SIGNAL_RUN_LAST, 0, NULL, NULL, NULL, G_TYPE_NONE, 0);
}

static void
ut_desk_init (UtDesk *self)
{
  self->selection = ut_selection_new ();
  self->solving = ut_solving_new ();
  self->question = (UtQuestion){ .direction = UT_DIRECTION_DOWN, .aim = UT_AIM_LEAST_POWER };
}

/* While something is dragged only what moves with it: reserves and chances follow when it is put down. */
static void
ask (UtDesk *self)
{
  UtQuestion question = self->question;

  question.reserves = question.chances = self->draft == NULL;
  ut_solving_ask (self->solving, ut_desk_plan (self), &question);
}

/* The plan shown became another: the answer is asked for first, so that whoever is told finds it there when it is quick. */
static void
show_plan (UtDesk *self)
{
  g_clear_pointer (&self->shown, ut_study_unref);
  ask (self);
  if (self->storey >= ut_desk_plan (self)->storeys->len)
    ut_desk_set_storey (self, ut_desk_plan (self)->storeys->len - 1);
  g_signal_emit (self, signals[PLAN_CHANGED], 0);
  ut_selection_keep_to (self->selection, ut_desk_plan (self));
}

UtDesk *
ut_desk_new (UtDocument *document)
{
  UtDesk *self = g_object_new (UT_TYPE_DESK, NULL);

  self->document = g_object_ref (document);
  g_signal_connect_object (document, "changed", G_CALLBACK (show_plan), self, G_CONNECT_SWAPPED);
  ask (self);
  return self;
}

UtDocument *
ut_desk_document (UtDesk *self)
{
  return self->document;
}

UtSelection *
ut_desk_selection (UtDesk *self)
{
  return self->selection;
}

UtSolving *
ut_desk_solving (UtDesk *self)
{
  return self->solving;
}

const UtPlan *
ut_desk_plan (UtDesk *self)
{
  return self->draft != NULL ? self->draft : ut_document_plan (self->document);
}

guint
ut_desk_storey (UtDesk *self)
{
  return self->storey;
}

void
ut_desk_set_storey (UtDesk *self, guint storey)
{
  if (storey == self->storey || storey >= ut_desk_plan (self)->storeys->len)
    return;
  self->storey = storey;
  g_signal_emit (self, signals[STOREY_CHANGED], 0);
}

gboolean
ut_desk_has_draft (UtDesk *self)
{
  return self->draft != NULL;
}

void
ut_desk_set_draft (UtDesk *self, const UtPlan *draft)
{
  g_clear_pointer (&self->draft, ut_plan_unref);
  self->draft = draft;
  show_plan (self);
}

void
ut_desk_commit_draft (UtDesk *self, const char *label, const char *coalesce)
{
  if (self->draft != NULL)
    ut_desk_apply (self, g_steal_pointer (&self->draft), label, coalesce);
}

void
ut_desk_drop_draft (UtDesk *self)
{
  if (self->draft == NULL)
    return;
  g_clear_pointer (&self->draft, ut_plan_unref);
  show_plan (self);
}

void
ut_desk_apply (UtDesk *self, const UtPlan *plan, const char *label, const char *coalesce)
{
  g_autofree char *selected = ut_selection_to_text (self->selection);

  g_clear_pointer (&self->draft, ut_plan_unref);
  ut_document_apply (self->document, plan, label, coalesce, selected);
}

void
ut_desk_undo (UtDesk *self)
{
  ut_desk_drop_draft (self);
  if (ut_document_undo (self->document))
    ut_selection_keep_to (self->selection, ut_desk_plan (self));
}

void
ut_desk_redo (UtDesk *self)
{
  ut_desk_drop_draft (self);
  if (ut_document_redo (self->document))
    ut_selection_set_text (self->selection, ut_document_selection (self->document));
}

const UtQuestion *
ut_desk_question (UtDesk *self)
{
  return &self->question;
}

void
ut_desk_set_question (UtDesk *self, const UtQuestion *question)
{
  if (self->question.direction == question->direction && self->question.aim == question->aim
      && !(self->question.hold_db < question->hold_db) && !(self->question.hold_db > question->hold_db))
    return;
  self->question = *question;
  ask (self);
  g_signal_emit (self, signals[QUESTION_CHANGED], 0);
}

UtStudy *
ut_desk_answer (UtDesk *self)
{
  return ut_solving_is_stale (self->solving) ? NULL : ut_solving_study (self->solving);
}

/* The plan with one radio changed by `change`; transfer full. */
static const UtPlan *
with_radio (const UtPlan *plan, UtRadioKind kind, const char *id, void (*change) (UtRadio *radio, const double *by), const double *by)
{
  int index = kind == UT_KIND_CELL ? ut_plan_find_cell (plan, id) : ut_plan_find_terminal (plan, id);

  if (index < 0)
    return ut_plan_ref (plan);
  if (kind == UT_KIND_CELL)
    {
      UtCell *cell = ut_cell_copy (ut_plan_cell (plan, (guint) index));
      change (&cell->radio, by);
      return ut_plan_with_cell (plan, index, cell);
    }
  UtTerminal *terminal = ut_terminal_copy (ut_plan_terminal (plan, (guint) index));
  change (&terminal->radio, by);
  return ut_plan_with_terminal (plan, index, terminal);
}

UtStudy *
ut_desk_shown (UtDesk *self)
{
  return self->shown != NULL ? self->shown : ut_desk_answer (self);
}

void
ut_desk_set_shown (UtDesk *self, UtStudy *study)
{
  if (self->shown == study)
    return;
  g_clear_pointer (&self->shown, ut_study_unref);
  self->shown = study != NULL ? ut_study_ref (study) : NULL;
  g_signal_emit (self, signals[SHOWN_CHANGED], 0);
}

static void
set_power (UtRadio *radio, const double *power_dbm)
{
  radio->power_dbm = CLAMP (round (*power_dbm * 10) / 10, radio->power_min_dbm, radio->power_max_dbm);
}

const UtPlan *
ut_desk_moved (UtDesk *self, const UtPlan *plan, double dx_m, double dy_m)
{
  const UtPlan *moved = ut_plan_ref (plan);

  for (guint i = 0; i < ut_selection_size (self->selection); i++)
    {
      const UtPlan *next = ut_plan_with_pick_moved (moved, ut_selection_pick (self->selection, i), dx_m, dy_m);

      ut_plan_step (&moved, next);
    }
  return moved;
}

const UtPlan *
ut_plan_with_set_power (const UtPlan *plan, UtRadioKind kind, const char *id, double power_dbm)
{
  return with_radio (plan, kind, id, set_power, &power_dbm);
}

char *
ut_desk_step_label (UtDesk *self, const char *verb)
{
  return ut_selection_step_label (self->selection, verb);
}

/* The plan without one thing; transfer full. */
static const UtPlan *
without (const UtPlan *plan, const UtPick *pick)
{
  guint storey, wall;

  switch (pick->kind)
    {
    case UT_KIND_CELL:
      return ut_plan_without_cell (plan, ut_plan_find_cell (plan, pick->id));
    case UT_KIND_TERMINAL:
      return ut_plan_without_terminal (plan, ut_plan_find_terminal (plan, pick->id));
    case UT_KIND_WALL:
      break;
    }
  return ut_plan_find_picked_wall (plan, pick->id, &storey, &wall) ? ut_plan_without_wall (plan, storey, wall) : ut_plan_ref (plan);
}

void
ut_desk_delete_selected (UtDesk *self)
{
  g_autofree char *label = NULL;
  const UtPlan *plan;

  if (ut_selection_size (self->selection) == 0)
    return;
  label = ut_desk_step_label (self, _ ("Delete"));
  plan = ut_plan_ref (ut_document_plan (self->document));
  for (guint i = 0; i < ut_selection_size (self->selection); i++)
    {
      const UtPlan *next = without (plan, ut_selection_pick (self->selection, i));

      ut_plan_step (&plan, next);
    }
  ut_desk_apply (self, plan, label, NULL);
}

void
ut_desk_nudge_selected (UtDesk *self, double dx_m, double dy_m)
{
  g_autofree char *label = NULL, *selected = NULL, *coalesce = NULL;

  if (ut_selection_size (self->selection) == 0)
    return;
  label = ut_desk_step_label (self, _ ("Nudge"));
  selected = ut_selection_to_text (self->selection);
  coalesce = g_strconcat ("nudge\n", selected, NULL);
  ut_desk_apply (self, ut_desk_moved (self, ut_document_plan (self->document), dx_m, dy_m), label, coalesce);
}

void
ut_desk_put_fragment (UtDesk *self, const UtPlan *fragment, double dx_m, double dy_m, gboolean own, const char *verb)
{
  g_autofree char *added = NULL;
  const UtPlan *plan = ut_plan_with_fragment (ut_document_plan (self->document), fragment, self->storey, dx_m, dy_m, own, &added);

  ut_desk_apply_and_select (self, plan, verb, added);
}

void
ut_desk_apply_and_select (UtDesk *self, const UtPlan *plan, const char *verb, const char *picks)
{
  g_autoptr (UtSelection) coming = ut_selection_new ();
  g_autofree char *label = NULL;

  ut_selection_set_text (coming, picks);
  if (ut_selection_size (coming) == 0)
    {
      ut_plan_unref (plan);
      return;
    }
  label = ut_selection_step_label (coming, verb);
  ut_desk_apply (self, plan, label, NULL);
  ut_selection_set_text (self->selection, picks);
}

void
ut_desk_duplicate_selected (UtDesk *self)
{
  g_autoptr (UtPlan) fragment = NULL;

  if (ut_selection_size (self->selection) == 0)
    return;
  fragment = (UtPlan *) ut_plan_fragment (ut_document_plan (self->document), self->selection);
  ut_desk_put_fragment (self, fragment, UT_DUPLICATE_M, -UT_DUPLICATE_M, TRUE, _ ("Duplicate"));
}

/* A copy gets a name and place of its own. */
static void
settle (UtRadio *radio, const char *id, const char *storey, double x_m, double y_m)
{
  g_free (radio->id);
  g_free (radio->name);
  g_free (radio->storey);
  radio->id = g_strdup (id);
  radio->name = g_strdup (id);
  radio->storey = g_strdup (storey);
  radio->x_m = ut_to_mm (x_m);
  radio->y_m = ut_to_mm (y_m);
  radio->on = TRUE;
}

/* What a new radio is like: the last of its kind in the plan, or the usual small cell and hand-held terminal. */
static const UtPlan *
with_new_cell (const UtPlan *plan, const char *id, const char *storey, double x_m, double y_m)
{
  UtCell *cell = plan->cells->len > 0 ? ut_cell_copy (ut_plan_cell (plan, plan->cells->len - 1)) : ut_cell_new ();
  UtRadio *radio = &cell->radio;

  if (plan->cells->len == 0)
    {
      radio->height_m = 3;
      radio->power_dbm = radio->power_max_dbm = 24;
      radio->power_min_dbm = 0;
    }
  settle (radio, id, storey, x_m, y_m);
  return ut_plan_with_cell (plan, -1, cell);
}

static const UtPlan *
with_new_terminal (const UtPlan *plan, const char *id, const char *storey, double x_m, double y_m)
{
  UtTerminal *terminal = plan->terminals->len > 0 ? ut_terminal_copy (ut_plan_terminal (plan, plan->terminals->len - 1)) : ut_terminal_new ();
  UtRadio *radio = &terminal->radio;

  if (plan->terminals->len == 0)
    {
      radio->height_m = 1.2;
      radio->power_dbm = radio->power_max_dbm = 23;
      radio->power_min_dbm = -40;
      terminal->target_down_db = 6;
      terminal->target_up_db = 3;
    }
  g_clear_pointer (&terminal->cell, g_free);
  settle (radio, id, storey, x_m, y_m);
  return ut_plan_with_terminal (plan, -1, terminal);
}

void
ut_desk_place (UtDesk *self, UtRadioKind kind, const char *storey, double x_m, double y_m)
{
  const UtPlan *plan = ut_document_plan (self->document);
  g_autofree char *id = kind == UT_KIND_CELL ? ut_plan_free_cell_id (plan) : ut_plan_free_terminal_id (plan);
  g_autofree char *label = g_strconcat (_ ("Place"), " ", id, NULL);
  const UtPlan *next = kind == UT_KIND_CELL ? with_new_cell (plan, id, storey, x_m, y_m) : with_new_terminal (plan, id, storey, x_m, y_m);

  ut_desk_apply (self, next, label, NULL);
  ut_selection_set_one (self->selection, kind, id);
}

/* A radio of the user's own presets, as it is there. */
static void
place_own (UtDesk *self, const UtPreset *preset, const char *storey, double x_m, double y_m)
{
  g_autoptr (UtSelection) one = ut_selection_new ();
  const UtRadio *radio = ut_plan_radio (preset->plan, preset->kind, preset->id);
  g_autoptr (UtPlan) fragment = NULL;
  g_autofree char *added = NULL;
  const UtPlan *plan = ut_document_plan (self->document), *next;
  int index = ut_plan_find_storey (plan, storey);

  ut_selection_add (one, preset->kind, preset->id);
  fragment = (UtPlan *) ut_plan_fragment (preset->plan, one);
  next = ut_plan_with_fragment (plan, fragment, (guint) MAX (index, 0), x_m - radio->x_m, y_m - radio->y_m, FALSE, &added);
  ut_desk_apply_and_select (self, next, _ ("Place"), added);
}

void
ut_desk_place_preset (UtDesk *self, const UtPreset *preset, const char *storey, double x_m, double y_m)
{
  const UtPlan *plan = ut_document_plan (self->document), *placed;
  g_autofree char *id = NULL, *label = NULL;
  UtTerminal *terminal;

  if (preset->plan != NULL)
    {
      place_own (self, preset, storey, x_m, y_m);
      return;
    }
  if (isnan (preset->height_m) || preset->kind != UT_KIND_TERMINAL)
    {
      ut_desk_place (self, preset->kind, storey, x_m, y_m);
      return;
    }
  id = ut_plan_free_terminal_id (plan);
  label = g_strconcat (_ ("Place"), " ", id, NULL);
  placed = with_new_terminal (plan, id, storey, x_m, y_m);
  terminal = ut_terminal_copy (ut_plan_terminal (placed, placed->terminals->len - 1));
  terminal->radio.height_m = preset->height_m;
  ut_desk_apply (self, ut_plan_with_terminal (placed, (int) placed->terminals->len - 1, terminal), label, NULL);
  ut_plan_unref (placed);
  ut_selection_set_one (self->selection, UT_KIND_TERMINAL, id);
}
