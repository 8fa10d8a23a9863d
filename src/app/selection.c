#include "selection.h"

#include <string.h>

#include <glib/gi18n.h>

struct _UtSelection
{
  GObject parent;
  GArray *picks; /* of UtPick */
  guint frozen;
  gboolean changed;
};

G_DEFINE_FINAL_TYPE (UtSelection, ut_selection, G_TYPE_OBJECT)

enum { CHANGED, N_SIGNALS };
static guint signals[N_SIGNALS];

static const char *const kind_words[] = { [UT_KIND_CELL] = "cell", [UT_KIND_TERMINAL] = "terminal", [UT_KIND_WALL] = "wall" };

static void
clear_pick (gpointer data)
{
  g_free (((UtPick *) data)->id);
}

static void
ut_selection_finalize (GObject *object)
{
  g_array_unref (UT_SELECTION (object)->picks);
  G_OBJECT_CLASS (ut_selection_parent_class)->finalize (object);
}

static void
ut_selection_class_init (UtSelectionClass *class)
{
  G_OBJECT_CLASS (class)->finalize = ut_selection_finalize;
  signals[CHANGED] = g_signal_new ("changed", UT_TYPE_SELECTION, G_SIGNAL_RUN_LAST, 0, NULL, NULL, NULL, G_TYPE_NONE, 0);
}

static void
ut_selection_init (UtSelection *self)
{
  self->picks = g_array_new (FALSE, FALSE, sizeof (UtPick));
  g_array_set_clear_func (self->picks, clear_pick);
}

UtSelection *
ut_selection_new (void)
{
  return g_object_new (UT_TYPE_SELECTION, NULL);
}

static void
tell (UtSelection *self)
{
  self->changed = TRUE;
  if (self->frozen > 0)
    return;
  self->changed = FALSE;
  g_signal_emit (self, signals[CHANGED], 0);
}

void
ut_selection_freeze (UtSelection *self)
{
  self->frozen++;
}

void
ut_selection_thaw (UtSelection *self)
{
  g_return_if_fail (self->frozen > 0);
  if (--self->frozen == 0 && self->changed)
    tell (self);
}

guint
ut_selection_size (UtSelection *self)
{
  return self->picks->len;
}

const UtPick *
ut_selection_pick (UtSelection *self, guint index)
{
  return &g_array_index (self->picks, UtPick, index);
}

static int
find (UtSelection *self, UtRadioKind kind, const char *id)
{
  for (guint i = 0; i < self->picks->len; i++)
    if (ut_selection_pick (self, i)->kind == kind && g_str_equal (ut_selection_pick (self, i)->id, id))
      return (int) i;
  return -1;
}

gboolean
ut_selection_has (UtSelection *self, UtRadioKind kind, const char *id)
{
  return find (self, kind, id) >= 0;
}

void
ut_selection_clear (UtSelection *self)
{
  if (self->picks->len == 0)
    return;
  g_array_set_size (self->picks, 0);
  tell (self);
}

void
ut_selection_add (UtSelection *self, UtRadioKind kind, const char *id)
{
  UtPick pick = { kind, NULL };

  if (ut_selection_has (self, kind, id))
    return;
  pick.id = g_strdup (id);
  g_array_append_val (self->picks, pick);
  tell (self);
}

void
ut_selection_set_one (UtSelection *self, UtRadioKind kind, const char *id)
{
  g_autofree char *kept = g_strdup (id); /* it may be one of those that go */

  if (self->picks->len == 1 && ut_selection_has (self, kind, kept))
    return;
  ut_selection_freeze (self);
  ut_selection_clear (self);
  ut_selection_add (self, kind, kept);
  ut_selection_thaw (self);
}

void
ut_selection_toggle (UtSelection *self, UtRadioKind kind, const char *id)
{
  int at = find (self, kind, id);

  if (at < 0)
    {
      ut_selection_add (self, kind, id);
      return;
    }
  g_array_remove_index (self->picks, (guint) at);
  tell (self);
}

static gboolean
is_held (const UtPlan *plan, const UtPick *pick)
{
  guint storey, wall;

  if (pick->kind == UT_KIND_WALL)
    return ut_plan_find_picked_wall (plan, pick->id, &storey, &wall);
  return ut_plan_radio (plan, pick->kind, pick->id) != NULL;
}

void
ut_selection_keep_to (UtSelection *self, const UtPlan *plan)
{
  guint before = self->picks->len;

  for (guint i = self->picks->len; i-- > 0;)
    if (!is_held (plan, ut_selection_pick (self, i)))
      g_array_remove_index (self->picks, i);
  if (self->picks->len != before)
    tell (self);
}

char *
ut_selection_to_text (UtSelection *self)
{
  GString *text = g_string_new (NULL);

  for (guint i = 0; i < self->picks->len; i++)
    g_string_append_printf (text, "%s%s %s", i > 0 ? "\n" : "", kind_words[ut_selection_pick (self, i)->kind], ut_selection_pick (self, i)->id);
  return g_string_free (text, FALSE);
}

void
ut_selection_set_text (UtSelection *self, const char *text)
{
  g_auto (GStrv) lines = g_strsplit (text != NULL ? text : "", "\n", -1);

  ut_selection_freeze (self);
  ut_selection_clear (self);
  for (guint i = 0; lines[i] != NULL; i++)
    for (guint kind = 0; kind < G_N_ELEMENTS (kind_words); kind++)
      {
        gsize length = strlen (kind_words[kind]);

        if (strncmp (lines[i], kind_words[kind], length) == 0 && lines[i][length] == ' ')
          ut_selection_add (self, (UtRadioKind) kind, lines[i] + length + 1);
      }
  ut_selection_thaw (self);
}

char *
ut_selection_step_label (UtSelection *self, const char *verb)
{
  guint n = ut_selection_size (self);
  g_autofree char *many = ut_selection_n_radios (self) == n   ? g_strdup_printf (ngettext ("%u Radio", "%u Radios", n), n)
                          : ut_selection_n_radios (self) == 0 ? g_strdup_printf (ngettext ("%u Wall", "%u Walls", n), n)
                                                              : g_strdup_printf (ngettext ("%u Thing", "%u Things", n), n);
  const char *one = n == 1 ? ut_selection_pick (self, 0)->id : many;

  /* Of a wall the own id alone. */
  if (n == 1 && ut_selection_n_radios (self) == 0)
    one = strchr (one, UT_WALL_PICK_BREAK) + 1;
  return g_strconcat (verb, " ", one, NULL);
}

char *
ut_wall_pick_id (const UtPlan *plan, guint storey, guint wall)
{
  const UtStorey *of = ut_plan_storey (plan, storey);

  return g_strdup_printf ("%s%c%s", of->id, UT_WALL_PICK_BREAK, ((const UtWall *) of->walls->pdata[wall])->id);
}

gboolean
ut_plan_find_picked_wall (const UtPlan *plan, const char *pick_id, guint *storey, guint *wall)
{
  const char *end = strchr (pick_id, UT_WALL_PICK_BREAK);
  g_autofree char *storey_id = end != NULL ? g_strndup (pick_id, (gsize) (end - pick_id)) : NULL;
  int in_storey, index;

  if (end == NULL || (in_storey = ut_plan_find_storey (plan, storey_id)) < 0)
    return FALSE;
  index = ut_storey_find_wall (ut_plan_storey (plan, (guint) in_storey), end + 1);
  *storey = (guint) in_storey;
  *wall = (guint) index;
  return index >= 0;
}

int
ut_plan_storey_of_pick (const UtPlan *plan, const UtPick *pick)
{
  const UtRadio *radio = ut_plan_radio (plan, pick->kind, pick->id);
  guint storey, wall;

  if (radio != NULL)
    return ut_plan_find_storey (plan, radio->storey);
  return pick->kind == UT_KIND_WALL && ut_plan_find_picked_wall (plan, pick->id, &storey, &wall) ? (int) storey : -1;
}

guint
ut_selection_n_radios (UtSelection *self)
{
  guint n = 0;

  for (guint i = 0; i < self->picks->len; i++)
    n += ut_selection_pick (self, i)->kind != UT_KIND_WALL;
  return n;
}

const UtRadio *
ut_plan_radio (const UtPlan *plan, UtRadioKind kind, const char *id)
{
  int index = kind == UT_KIND_WALL ? -1 : kind == UT_KIND_CELL ? ut_plan_find_cell (plan, id) : ut_plan_find_terminal (plan, id);

  if (index < 0)
    return NULL;
  return kind == UT_KIND_CELL ? &ut_plan_cell (plan, (guint) index)->radio : &ut_plan_terminal (plan, (guint) index)->radio;
}
