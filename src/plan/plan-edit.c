#include "plan-edit.h"

#include "plan-schema.h"

#include <string.h>

/* A plan of one's own that shares every item and every list with `plan`. */
static UtPlan *
begin (const UtPlan *plan)
{
  return ut_kind_copy (&ut_kind_plan, plan, TRUE);
}

/* Gives the plan its own copy of a list, to be changed. */
static GPtrArray *
own_list (GPtrArray **list, const UtKind *kind)
{
  GPtrArray *copy = g_ptr_array_new_full ((*list)->len + 1, kind->unref);
  for (guint i = 0; i < (*list)->len; i++)
    g_ptr_array_add (copy, g_atomic_rc_box_acquire ((*list)->pdata[i]));
  g_ptr_array_unref (*list);
  return *list = copy;
}

static void
set_item (GPtrArray *list, const UtKind *kind, int index, gpointer item)
{
  if (index < 0)
    {
      g_ptr_array_add (list, item);
      return;
    }
  kind->unref (list->pdata[index]);
  list->pdata[index] = item;
}

static void
set_text (char **field, const char *text)
{
  char *copy = g_strdup (text);
  g_free (*field);
  *field = copy;
}

static void
complete_name (char **name, const char *id)
{
  if (*name == NULL)
    *name = g_strdup (id);
}

/* ---- ids that others use ---- */

typedef enum
{
  NAMES_STOREY,
  NAMES_SERVING_CELL,
} RadioName;

static const char *
radio_name (gconstpointer radio, RadioName which)
{
  return which == NAMES_STOREY ? ((const UtRadio *)radio)->storey
                               : ((const UtTerminal *)radio)->cell;
}

/* Lets every radio of a list that names `from` name `to` (NULL: nobody).  Leaves a list alone in
 * which none does. */
static void
rename_in_radios (
    GPtrArray **list, const UtKind *kind, RadioName which, const char *from, const char *to)
{
  gboolean owned = FALSE;
  for (guint i = 0; i < (*list)->len; i++)
    {
      if (g_strcmp0 (radio_name ((*list)->pdata[i], which), from) != 0)
        continue;
      if (!owned)
        own_list (list, kind);
      owned = TRUE;
      UtRadio *radio = ut_kind_copy (kind, (*list)->pdata[i], FALSE);
      set_text (which == NAMES_STOREY ? &radio->storey : &((UtTerminal *)(gpointer)radio)->cell,
                to);
      set_item (*list, kind, (int)i, radio);
    }
}

/* The measured gains of a cell or terminal follow its new id, or go where `to` is NULL. */
static void
rename_in_gains (UtPlan *plan, gboolean of_cell, const char *from, const char *to)
{
  g_autoptr (GPtrArray) kept = g_ptr_array_new_with_free_func (ut_kind_measured_gain.unref);
  gboolean changed = FALSE;
  for (guint i = 0; i < plan->measured_gains->len; i++)
    {
      const UtMeasuredGain *gain = plan->measured_gains->pdata[i];
      gboolean named = g_str_equal (of_cell ? gain->cell : gain->terminal, from);
      changed = changed || named;
      if (!named)
        g_ptr_array_add (kept, (gpointer)ut_measured_gain_ref (gain));
      else if (to != NULL)
        {
          UtMeasuredGain *renamed = ut_measured_gain_copy (gain);
          set_text (of_cell ? &renamed->cell : &renamed->terminal, to);
          g_ptr_array_add (kept, renamed);
        }
    }
  if (!changed)
    return;
  g_ptr_array_unref (plan->measured_gains);
  plan->measured_gains = g_steal_pointer (&kept);
}

static UtWall *
wall_with_construction (const UtWall *wall, const char *from, const char *to)
{
  UtWall *copy = ut_wall_copy (wall);
  if (g_str_equal (copy->construction, from))
    set_text (&copy->construction, to);
  for (guint i = 0; i < copy->openings->len; i++)
    {
      const UtOpening *opening = copy->openings->pdata[i];
      if (!g_str_equal (opening->construction, from))
        continue;
      UtOpening *renamed = ut_opening_copy (opening);
      set_text (&renamed->construction, to);
      set_item (copy->openings, &ut_kind_opening, (int)i, renamed);
    }
  return copy;
}

static gboolean
wall_names (const UtWall *wall, const char *construction)
{
  if (g_str_equal (wall->construction, construction))
    return TRUE;
  for (guint i = 0; i < wall->openings->len; i++)
    if (g_str_equal (((const UtOpening *)wall->openings->pdata[i])->construction, construction))
      return TRUE;
  return FALSE;
}

/* NULL: the storey does not name the construction. */
static UtStorey *
storey_with_construction (const UtStorey *storey, const char *from, const char *to)
{
  UtStorey *copy = NULL;
  if (g_strcmp0 (storey->floor, from) == 0)
    {
      copy = ut_storey_copy (storey);
      set_text (&copy->floor, to);
    }
  for (guint i = 0; i < storey->walls->len; i++)
    {
      const UtWall *wall = storey->walls->pdata[i];
      if (!wall_names (wall, from))
        continue;
      if (copy == NULL)
        copy = ut_storey_copy (storey);
      set_item (copy->walls, &ut_kind_wall, (int)i, wall_with_construction (wall, from, to));
    }
  return copy;
}

static void
rename_in_storeys (UtPlan *plan, const char *from, const char *to)
{
  gboolean owned = FALSE;
  for (guint i = 0; i < plan->storeys->len; i++)
    {
      UtStorey *storey = storey_with_construction (ut_plan_storey (plan, i), from, to);
      if (storey == NULL)
        continue;
      if (!owned)
        own_list (&plan->storeys, &ut_kind_storey);
      owned = TRUE;
      set_item (plan->storeys, &ut_kind_storey, (int)i, storey);
    }
}

/* ---- edits ---- */

const UtPlan *
ut_plan_with_text (const UtPlan *plan, UtPlanText which, const char *text)
{
  UtPlan *next = begin (plan);
  char **const texts[] = { &next->title,    &next->client, &next->prepared_by,
                           &next->revision, &next->date,   &next->notes };
  set_text (texts[which], text);
  return next;
}

const UtPlan *
ut_plan_with_title (const UtPlan *plan, const char *title)
{
  return ut_plan_with_text (plan, UT_PLAN_TITLE, title);
}

const UtPlan *
ut_plan_with_site (const UtPlan *plan, UtSite *site)
{
  UtPlan *next = begin (plan);
  ut_site_unref (next->site);
  next->site = site;
  return next;
}

const UtPlan *
ut_plan_with_carrier (const UtPlan *plan, UtCarrier *carrier)
{
  UtPlan *next = begin (plan);
  ut_carrier_unref (next->carrier);
  next->carrier = carrier;
  return next;
}

const UtPlan *
ut_plan_with_propagation (const UtPlan *plan, UtPropagation *propagation)
{
  UtPlan *next = begin (plan);
  ut_propagation_unref (next->propagation);
  next->propagation = propagation;
  return next;
}

const UtPlan *
ut_plan_with_cell (const UtPlan *plan, int index, UtCell *cell)
{
  UtPlan *next = begin (plan);
  const char *old_id = index >= 0 ? ut_plan_cell (plan, (guint)index)->radio.id : NULL;
  complete_name (&cell->radio.name, cell->radio.id);
  if (old_id != NULL && !g_str_equal (old_id, cell->radio.id))
    {
      rename_in_radios (
          &next->terminals, &ut_kind_terminal, NAMES_SERVING_CELL, old_id, cell->radio.id);
      rename_in_gains (next, TRUE, old_id, cell->radio.id);
    }
  set_item (own_list (&next->cells, &ut_kind_cell), &ut_kind_cell, index, cell);
  return next;
}

const UtPlan *
ut_plan_with_terminal (const UtPlan *plan, int index, UtTerminal *terminal)
{
  UtPlan *next = begin (plan);
  const char *old_id = index >= 0 ? ut_plan_terminal (plan, (guint)index)->radio.id : NULL;
  complete_name (&terminal->radio.name, terminal->radio.id);
  if (old_id != NULL && !g_str_equal (old_id, terminal->radio.id))
    rename_in_gains (next, FALSE, old_id, terminal->radio.id);
  set_item (own_list (&next->terminals, &ut_kind_terminal), &ut_kind_terminal, index, terminal);
  return next;
}

const UtPlan *
ut_plan_with_each_radio (const UtPlan *plan,
                         gboolean (*change) (UtRadio *radio, gconstpointer user),
                         gconstpointer user)
{
  UtPlan *next = begin (plan);
  own_list (&next->cells, &ut_kind_cell);
  own_list (&next->terminals, &ut_kind_terminal);
  for (guint i = 0; i < plan->cells->len; i++)
    {
      g_autoptr (UtCell) cell = ut_cell_copy (ut_plan_cell (plan, i));
      if (change (&cell->radio, user))
        set_item (next->cells, &ut_kind_cell, (int)i, g_steal_pointer (&cell));
    }
  for (guint i = 0; i < plan->terminals->len; i++)
    {
      g_autoptr (UtTerminal) terminal = ut_terminal_copy (ut_plan_terminal (plan, i));
      if (change (&terminal->radio, user))
        set_item (next->terminals, &ut_kind_terminal, (int)i, g_steal_pointer (&terminal));
    }
  return next;
}

const UtPlan *
ut_plan_with_storey (const UtPlan *plan, int index, UtStorey *storey)
{
  UtPlan *next = begin (plan);
  const char *old_id = index >= 0 ? ut_plan_storey (plan, (guint)index)->id : NULL;
  complete_name (&storey->name, storey->id);
  if (old_id != NULL && !g_str_equal (old_id, storey->id))
    {
      rename_in_radios (&next->cells, &ut_kind_cell, NAMES_STOREY, old_id, storey->id);
      rename_in_radios (&next->terminals, &ut_kind_terminal, NAMES_STOREY, old_id, storey->id);
    }
  set_item (own_list (&next->storeys, &ut_kind_storey), &ut_kind_storey, index, storey);
  return next;
}

const UtPlan *
ut_plan_with_construction (const UtPlan *plan, int index, UtConstruction *construction)
{
  UtPlan *next = begin (plan);
  const char *old_id = index >= 0 ? ut_plan_construction (plan, (guint)index)->id : NULL;
  complete_name (&construction->name, construction->id);
  if (old_id != NULL && !g_str_equal (old_id, construction->id))
    rename_in_storeys (next, old_id, construction->id);
  set_item (own_list (&next->constructions, &ut_kind_construction),
            &ut_kind_construction,
            index,
            construction);
  return next;
}

const UtPlan *
ut_plan_with_antenna (const UtPlan *plan, int index, UtAntenna *antenna)
{
  UtPlan *next = begin (plan);
  set_item (own_list (&next->antennas, &ut_kind_antenna), &ut_kind_antenna, index, antenna);
  return next;
}

const UtPlan *
ut_plan_with_measured_gain (const UtPlan *plan,
                            const char *terminal,
                            const char *cell,
                            double gain_db)
{
  UtPlan *next = begin (plan);
  UtMeasuredGain *gain = ut_measured_gain_new ();
  int index = -1;
  g_free (gain->terminal);
  g_free (gain->cell);
  gain->terminal = g_strdup (terminal);
  gain->cell = g_strdup (cell);
  gain->gain_db = gain_db;
  for (guint i = 0; i < plan->measured_gains->len; i++)
    {
      const UtMeasuredGain *old = plan->measured_gains->pdata[i];
      if (g_str_equal (old->terminal, terminal) && g_str_equal (old->cell, cell))
        index = (int)i;
    }
  set_item (own_list (&next->measured_gains, &ut_kind_measured_gain),
            &ut_kind_measured_gain,
            index,
            gain);
  return next;
}

const UtPlan *
ut_plan_without_cell (const UtPlan *plan, int index)
{
  UtPlan *next = begin (plan);
  const char *id = ut_plan_cell (plan, (guint)index)->radio.id;
  rename_in_radios (&next->terminals, &ut_kind_terminal, NAMES_SERVING_CELL, id, NULL);
  rename_in_gains (next, TRUE, id, NULL);
  g_ptr_array_remove_index (own_list (&next->cells, &ut_kind_cell), (guint)index);
  return next;
}

const UtPlan *
ut_plan_without_terminal (const UtPlan *plan, int index)
{
  UtPlan *next = begin (plan);
  rename_in_gains (next, FALSE, ut_plan_terminal (plan, (guint)index)->radio.id, NULL);
  g_ptr_array_remove_index (own_list (&next->terminals, &ut_kind_terminal), (guint)index);
  return next;
}

const UtPlan *
ut_plan_without_construction (const UtPlan *plan, int index)
{
  UtPlan *next = begin (plan);
  g_ptr_array_remove_index (own_list (&next->constructions, &ut_kind_construction), (guint)index);
  return next;
}

const UtPlan *
ut_plan_without_antenna (const UtPlan *plan, int index)
{
  UtPlan *next = begin (plan);
  g_ptr_array_remove_index (own_list (&next->antennas, &ut_kind_antenna), (guint)index);
  return next;
}

guint
ut_plan_uses_of_antenna (const UtPlan *plan, const char *id)
{
  guint uses = 0;
  for (guint i = 0; i < plan->cells->len; i++)
    uses += g_str_equal (ut_plan_cell (plan, i)->radio.antenna, id);
  for (guint i = 0; i < plan->terminals->len; i++)
    uses += g_str_equal (ut_plan_terminal (plan, i)->radio.antenna, id);
  return uses;
}

const UtPlan *
ut_plan_without_storey (const UtPlan *plan, guint index)
{
  const char *id = ut_plan_storey (plan, index)->id;
  const UtPlan *next = ut_plan_ref (plan);
  for (guint i = plan->cells->len; i-- > 0;)
    if (g_str_equal (ut_plan_cell (plan, i)->radio.storey, id))
      {
        const UtPlan *without = ut_plan_without_cell (next, (int)i);
        ut_plan_unref (next);
        next = without;
      }
  for (guint i = plan->terminals->len; i-- > 0;)
    if (g_str_equal (ut_plan_terminal (plan, i)->radio.storey, id))
      {
        const UtPlan *without = ut_plan_without_terminal (next, (int)i);
        ut_plan_unref (next);
        next = without;
      }
  UtPlan *last = begin (next);
  g_ptr_array_remove_index (own_list (&last->storeys, &ut_kind_storey), index);
  ut_plan_unref (next);
  return last;
}

const UtPlan *
ut_plan_with_storey_at (const UtPlan *plan, guint index, guint to)
{
  UtPlan *next = begin (plan);
  GPtrArray *storeys = own_list (&next->storeys, &ut_kind_storey);
  gpointer storey = g_ptr_array_steal_index (storeys, index);
  g_ptr_array_insert (storeys, (int)to, storey);
  return next;
}

guint
ut_plan_uses_of_construction (const UtPlan *plan, const char *id)
{
  guint uses = 0;
  for (guint s = 0; s < plan->storeys->len; s++)
    {
      const UtStorey *storey = ut_plan_storey (plan, s);
      uses += g_strcmp0 (storey->floor, id) == 0;
      for (guint w = 0; w < storey->walls->len; w++)
        {
          const UtWall *wall = storey->walls->pdata[w];
          uses += g_strcmp0 (wall->construction, id) == 0;
          for (guint i = 0; i < wall->openings->len; i++)
            uses += g_strcmp0 (((const UtOpening *)wall->openings->pdata[i])->construction, id) == 0;
        }
    }
  return uses;
}

const UtPlan *
ut_plan_with_wall (const UtPlan *plan, guint storey, int index, UtWall *wall)
{
  UtStorey *changed = ut_storey_copy (ut_plan_storey (plan, storey));
  set_item (own_list (&changed->walls, &ut_kind_wall), &ut_kind_wall, index, wall);
  return ut_plan_with_storey (plan, (int)storey, changed);
}

const UtPlan *
ut_plan_without_wall (const UtPlan *plan, guint storey, guint index)
{
  UtStorey *changed = ut_storey_copy (ut_plan_storey (plan, storey));
  g_ptr_array_remove_index (own_list (&changed->walls, &ut_kind_wall), index);
  return ut_plan_with_storey (plan, (int)storey, changed);
}

/* ---- new ids ---- */

static char *
free_id (const UtPlan *plan, const char *prefix, int (*find) (const UtPlan *, const char *))
{
  for (guint number = 1;; number++)
    {
      g_autofree char *id = g_strdup_printf ("%s%u", prefix, number);
      if (find (plan, id) < 0)
        return g_steal_pointer (&id);
    }
}

char *
ut_plan_free_cell_id (const UtPlan *plan)
{
  return free_id (plan, "C", ut_plan_find_cell);
}

char *
ut_plan_free_terminal_id (const UtPlan *plan)
{
  return free_id (plan, "T", ut_plan_find_terminal);
}

char *
ut_plan_free_storey_id (const UtPlan *plan)
{
  return free_id (plan, "S", ut_plan_find_storey);
}

char *
ut_plan_free_antenna_id (const UtPlan *plan)
{
  return free_id (plan, "A", ut_plan_find_antenna);
}

char *
ut_plan_free_wall_id (const UtPlan *plan, guint storey)
{
  const UtStorey *of = ut_plan_storey (plan, storey);
  for (guint number = 1;; number++)
    {
      g_autofree char *id = g_strdup_printf ("W%u", number);
      if (ut_storey_find_wall (of, id) < 0)
        return g_steal_pointer (&id);
    }
}

char *
ut_plan_free_construction_id (const UtPlan *plan)
{
  return free_id (plan, "K", ut_plan_find_construction);
}
