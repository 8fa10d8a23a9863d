#include "fields.h"

#include <math.h>
#include <string.h>

#include <glib/gi18n.h>

#include "plan-edit.h"
#include "plan-read.h"
#include "plan-write.h"

/* Which struct a field lies in. */
typedef enum { IN_PLAN, IN_CARRIER, IN_PROPAGATION, IN_RADIO, IN_CELL, IN_TERMINAL, IN_WALL } Home;

/* Choices whose words come from the plan. */
typedef enum { FIXED, ANTENNAS, SERVING, CONSTRUCTIONS } Source;

typedef struct
{
  UtField field;
  Home home;
  gsize offset;
  Source source;
  guint laws; /* bits of the base laws that have this parameter; 0: not a parameter */
} Row;

static const char *const sharing_words[] = { N_ ("orthogonal"), N_ ("simultaneous"), NULL };
static const char *const polarization_words[] = { N_ ("vertical"), N_ ("horizontal"), N_ ("mixed"), NULL };
static const char *const slab_words[] = { N_ ("coherent"), N_ ("averaged"), NULL };
/* In the order of the enumerations of plan.h. */
static const char *const law_words[] = { N_ ("free space"),    N_ ("log-distance"),   N_ ("site-general"), N_ ("distance coefficient"),
                                         N_ ("indoor office"), N_ ("indoor factory"), N_ ("multi-wall"),   NULL };
static const char *const environment_words[] = { N_ ("office"), N_ ("corridor"), N_ ("industrial"), NULL };
static const char *const sight_words[] = { N_ ("in sight"), N_ ("out of sight"), N_ ("by walls"), NULL };
static const char *const clutter_words[] = { N_ ("sparse, low cell"), N_ ("dense, low cell"), N_ ("sparse, high cell"), N_ ("dense, high cell"), NULL };

#define AT(Struct, member) G_STRUCT_OFFSET (Struct, member)
#define RADIO(label, unit, kind, member) { { N_ (label), unit, kind, NULL }, IN_RADIO, AT (UtRadio, member), FIXED, 0 }

#define PLACE                                                                                      \
  RADIO ("Name", NULL, UT_FIELD_TEXT, name), RADIO ("x", "m", UT_FIELD_NUMBER, x_m), RADIO ("y", "m", UT_FIELD_NUMBER, y_m),                \
    RADIO ("Height", "m", UT_FIELD_NUMBER, height_m),                                              \
    { { N_ ("Antenna"), NULL, UT_FIELD_CHOICE, NULL }, IN_RADIO, AT (UtRadio, antenna), ANTENNAS, 0 }, \
    RADIO ("Azimuth", "°", UT_FIELD_NUMBER, azimuth_deg), RADIO ("Downtilt", "°", UT_FIELD_NUMBER, downtilt_deg),                           \
    RADIO ("Feeder loss", "dB", UT_FIELD_NUMBER, feeder_loss_db)

#define POWERS                                                                                     \
  RADIO ("Set power", "dBm", UT_FIELD_NUMBER, power_dbm), RADIO ("Lowest power", "dBm", UT_FIELD_NUMBER, power_min_dbm),                    \
    RADIO ("Highest power", "dBm", UT_FIELD_NUMBER, power_max_dbm), RADIO ("Power step", "dB", UT_FIELD_NUMBER, power_step_db),             \
    RADIO ("Noise figure", "dB", UT_FIELD_NUMBER, noise_figure_db), RADIO ("Activity", NULL, UT_FIELD_NUMBER, activity),                    \
    RADIO ("On", NULL, UT_FIELD_SWITCH, on)

#define CELL(label, unit, kind, member) { { N_ (label), unit, kind, NULL }, IN_CELL, AT (UtCell, member), FIXED, 0 }
#define TERMINAL(label, unit, kind, member) { { N_ (label), unit, kind, NULL }, IN_TERMINAL, AT (UtTerminal, member), FIXED, 0 }
#define CARRIER(label, unit, kind, choices, member) { { N_ (label), unit, kind, choices }, IN_CARRIER, AT (UtCarrier, member), FIXED, 0 }
#define PROPAGATION(label, unit, kind, choices, member) { { N_ (label), unit, kind, choices }, IN_PROPAGATION, AT (UtPropagation, member), FIXED, 0 }
#define PARAMETER(label, unit, kind, choices, member, of) { { N_ (label), unit, kind, choices }, IN_PROPAGATION, AT (UtPropagation, member), FIXED, of }
#define SIGHTED (1u << UT_BASE_SITE_GENERAL | 1u << UT_BASE_INDOOR_OFFICE | 1u << UT_BASE_INDOOR_FACTORY)

static const Row cell_rows[] = { PLACE, POWERS, CELL ("Channel", NULL, UT_FIELD_WHOLE, channel) };

static const Row terminal_rows[] = {
  { { N_ ("Served by"), NULL, UT_FIELD_CHOICE, NULL }, IN_TERMINAL, AT (UtTerminal, cell), SERVING, 0 },
  TERMINAL ("Downlink target", "dB", UT_FIELD_NUMBER_OR_NONE, target_down_db),
  TERMINAL ("Uplink target", "dB", UT_FIELD_NUMBER_OR_NONE, target_up_db),
  TERMINAL ("Downlink level", "dBm", UT_FIELD_NUMBER_OR_NONE, level_down_dbm),
  TERMINAL ("Uplink level", "dBm", UT_FIELD_NUMBER_OR_NONE, level_up_dbm),
  PLACE,
  TERMINAL ("Body loss", "dB", UT_FIELD_NUMBER, body_loss_db),
  POWERS,
  TERMINAL ("Priority", NULL, UT_FIELD_NUMBER, priority),
};

static const Row plan_rows[] = {
  { { N_ ("Title"), NULL, UT_FIELD_TEXT, NULL }, IN_PLAN, AT (UtPlan, title), FIXED, 0 },
  CARRIER ("Frequency", "MHz", UT_FIELD_NUMBER, NULL, frequency_mhz),
  CARRIER ("Bandwidth", "MHz", UT_FIELD_NUMBER, NULL, bandwidth_mhz),
  CARRIER ("Sharing", NULL, UT_FIELD_CHOICE, sharing_words, sharing),
  CARRIER ("Processing gain", "dB", UT_FIELD_NUMBER, NULL, processing_gain_db),
  CARRIER ("Downlink orthogonality", NULL, UT_FIELD_NUMBER, NULL, downlink_orthogonality),
  CARRIER ("Channels", NULL, UT_FIELD_WHOLE, NULL, channels),
  CARRIER ("Channel isolation", "dB", UT_FIELD_NUMBERS, NULL, channel_isolation_db),
  CARRIER ("Polarization", NULL, UT_FIELD_CHOICE, polarization_words, polarization),
  CARRIER ("Noise temperature", "K", UT_FIELD_NUMBER, NULL, noise_temperature_k),
  CARRIER ("Design margin", "dB", UT_FIELD_NUMBER, NULL, margin_db),
  CARRIER ("EIRP limit", "dBm", UT_FIELD_NUMBER_OR_NONE, NULL, eirp_limit_dbm),
  PROPAGATION ("Law", NULL, UT_FIELD_CHOICE, law_words, law),
  PARAMETER ("Exponent", NULL, UT_FIELD_NUMBER, NULL, exponent, 1u << UT_BASE_LOG_DISTANCE),
  PARAMETER ("Reference distance", "m", UT_FIELD_NUMBER, NULL, reference_m, 1u << UT_BASE_LOG_DISTANCE),
  PARAMETER ("Environment", NULL, UT_FIELD_CHOICE, environment_words, environment, 1u << UT_BASE_SITE_GENERAL),
  PARAMETER ("Line of sight", NULL, UT_FIELD_CHOICE, sight_words, sight, SIGHTED),
  PARAMETER ("Clutter", NULL, UT_FIELD_CHOICE, clutter_words, clutter, 1u << UT_BASE_INDOOR_FACTORY),
  PARAMETER ("Coefficient", NULL, UT_FIELD_NUMBER, NULL, coefficient, 1u << UT_BASE_DISTANCE_COEFFICIENT),
  PARAMETER ("1, 2, 3 … floors", "dB", UT_FIELD_NUMBERS, NULL, floor_loss_db, 1u << UT_BASE_DISTANCE_COEFFICIENT),
  PARAMETER ("Light wall", "dB", UT_FIELD_NUMBER, NULL, light_db, 1u << UT_BASE_MULTI_WALL),
  PARAMETER ("Heavy wall", "dB", UT_FIELD_NUMBER, NULL, heavy_db, 1u << UT_BASE_MULTI_WALL),
  PARAMETER ("Floor", "dB", UT_FIELD_NUMBER, NULL, floor_db, 1u << UT_BASE_MULTI_WALL),
  PARAMETER ("Floor exponent b", NULL, UT_FIELD_NUMBER, NULL, b, 1u << UT_BASE_MULTI_WALL),
  PROPAGATION ("Count walls", NULL, UT_FIELD_SWITCH, NULL, walls),
  PROPAGATION ("Limit of one crossing", "dB", UT_FIELD_NUMBER, NULL, wall_loss_limit_db),
  PROPAGATION ("Limit of all crossings", "dB", UT_FIELD_NUMBER_OR_NONE, NULL, excess_loss_limit_db),
  PROPAGATION ("Layered walls", NULL, UT_FIELD_CHOICE, slab_words, slab),
  PROPAGATION ("Shadowing", "dB", UT_FIELD_NUMBER, NULL, shadowing_db),
  PROPAGATION ("Correlation distance", "m", UT_FIELD_NUMBER, NULL, correlation_m),
};

static const Row wall_rows[] = {
  { { N_ ("Construction"), NULL, UT_FIELD_CHOICE, NULL }, IN_WALL, AT (UtWall, construction), CONSTRUCTIONS, 0 },
  { { N_ ("Height"), "m", UT_FIELD_NUMBER_OR_NONE, NULL }, IN_WALL, AT (UtWall, height_m), FIXED, 0 },
};

static const struct
{
  const Row *rows;
  guint n;
} subjects[] = {
  [UT_SUBJECT_PLAN] = { plan_rows, G_N_ELEMENTS (plan_rows) },
  [UT_SUBJECT_CELL] = { cell_rows, G_N_ELEMENTS (cell_rows) },
  [UT_SUBJECT_TERMINAL] = { terminal_rows, G_N_ELEMENTS (terminal_rows) },
  [UT_SUBJECT_WALL] = { wall_rows, G_N_ELEMENTS (wall_rows) },
  [UT_SUBJECT_MANY] = { NULL, 0 },
};

#define FIELD(type, item, row) (*(type *) (void *) ((char *) (item) + (row)->offset))

UtSubject
ut_fields_subject (UtDesk *desk)
{
  UtSelection *selection = ut_desk_selection (desk);

  if (ut_selection_size (selection) == 0)
    return UT_SUBJECT_PLAN;
  if (ut_selection_n_radios (selection) == 0)
    return UT_SUBJECT_WALL;
  if (ut_selection_size (selection) > 1)
    return UT_SUBJECT_MANY;
  return ut_selection_pick (selection, 0)->kind == UT_KIND_CELL ? UT_SUBJECT_CELL : UT_SUBJECT_TERMINAL;
}

char *
ut_fields_id (UtDesk *desk)
{
  UtSelection *selection = ut_desk_selection (desk);
  GString *ids;

  switch (ut_fields_subject (desk))
    {
    case UT_SUBJECT_CELL:
    case UT_SUBJECT_TERMINAL:
      return g_strdup (ut_selection_pick (selection, 0)->id);
    case UT_SUBJECT_WALL:
      ids = g_string_new (NULL);
      for (guint i = 0; i < ut_selection_size (selection); i++)
        g_string_append_printf (ids, "%s%s", i > 0 ? "\n" : "", ut_selection_pick (selection, i)->id);
      return g_string_free (ids, FALSE);
    case UT_SUBJECT_PLAN:
    case UT_SUBJECT_MANY:
      break;
    }
  return NULL;
}

guint
ut_fields_count (UtSubject subject)
{
  return subjects[subject].n;
}

const UtField *
ut_fields_field (UtSubject subject, guint index)
{
  return &subjects[subject].rows[index].field;
}

gboolean
ut_fields_applies (const UtPlan *plan, UtSubject subject, guint index)
{
  guint laws = subjects[subject].rows[index].laws;

  return laws == 0 || (laws & 1u << plan->propagation->law) != 0;
}

/* The first of the walls picked, or NULL. */
static const UtWall *
first_wall (const UtPlan *plan, const char *ids)
{
  g_auto (GStrv) picks = g_strsplit (ids, "\n", -1);
  guint storey, wall;

  if (picks[0] == NULL || !ut_plan_find_picked_wall (plan, picks[0], &storey, &wall))
    return NULL;
  return ut_plan_storey (plan, storey)->walls->pdata[wall];
}

/* The struct a row's field lies in, or NULL when the radio is gone. */
static const void *
home_of (const UtPlan *plan, const Row *row, UtSubject subject, const char *id)
{
  switch (row->home)
    {
    case IN_PLAN:
      return plan;
    case IN_CARRIER:
      return plan->carrier;
    case IN_PROPAGATION:
      return plan->propagation;
    case IN_WALL:
      return first_wall (plan, id);
    case IN_RADIO:
    case IN_CELL:
    case IN_TERMINAL:
      break;
    }
  /* Cells and terminals begin with their radio. */
  return ut_plan_radio (plan, subject == UT_SUBJECT_CELL ? UT_KIND_CELL : UT_KIND_TERMINAL, id);
}

char **
ut_fields_choices (const UtPlan *plan, UtSubject subject, guint index)
{
  const Row *row = &subjects[subject].rows[index];
  g_autoptr (GStrvBuilder) choices = g_strv_builder_new ();

  if (row->field.kind != UT_FIELD_CHOICE)
    return NULL;
  switch (row->source)
    {
    case FIXED:
      for (guint i = 0; row->field.words[i] != NULL; i++)
        g_strv_builder_add (choices, _ (row->field.words[i]));
      break;
    case ANTENNAS:
      g_strv_builder_add (choices, _ ("isotropic"));
      for (guint i = 0; i < plan->antennas->len; i++)
        g_strv_builder_add (choices, ut_plan_antenna (plan, i)->id);
      break;
    case CONSTRUCTIONS:
      for (guint i = 0; i < plan->constructions->len; i++)
        g_strv_builder_add (choices, ut_plan_construction (plan, i)->name);
      break;
    case SERVING:
      g_strv_builder_add (choices, _ ("the strongest"));
      for (guint i = 0; i < plan->cells->len; i++)
        g_strv_builder_add (choices, ut_plan_cell (plan, i)->radio.id);
      break;
    }
  return g_strv_builder_end (choices);
}

static char *
number_text (double value)
{
  char buffer[G_ASCII_DTOSTR_BUF_SIZE];

  return g_strdup (isnan (value) ? "" : ut_number_text (value, buffer));
}

static char *
numbers_text (const GArray *numbers)
{
  GString *text = g_string_new (NULL);

  for (guint i = 0; i < numbers->len; i++)
    {
      g_autofree char *number = number_text (g_array_index (numbers, double, i));

      g_string_append_printf (text, "%s%s", i > 0 ? " " : "", number);
    }
  return g_string_free (text, FALSE);
}

char *
ut_fields_text (const UtPlan *plan, UtSubject subject, const char *id, guint index)
{
  const Row *row = &subjects[subject].rows[index];
  const void *home = home_of (plan, row, subject, id);

  if (home == NULL)
    return g_strdup ("");
  switch (row->field.kind)
    {
    case UT_FIELD_TEXT:
      return g_strdup (FIELD (char *, home, row));
    case UT_FIELD_NUMBER:
    case UT_FIELD_NUMBER_OR_NONE:
      return number_text (FIELD (double, home, row));
    case UT_FIELD_NUMBERS:
      return numbers_text (FIELD (GArray *, home, row));
    case UT_FIELD_WHOLE:
      return g_strdup_printf ("%d", FIELD (int, home, row));
    case UT_FIELD_SWITCH:
      return g_strdup (FIELD (gboolean, home, row) ? "1" : "0");
    case UT_FIELD_CHOICE:
      break;
    }
  switch (row->source)
    {
    case ANTENNAS:
      return g_strdup_printf ("%d", ut_plan_find_antenna (plan, FIELD (char *, home, row)) + 1);
    case SERVING:
      return g_strdup_printf ("%d", FIELD (char *, home, row) == NULL ? 0 : ut_plan_find_cell (plan, FIELD (char *, home, row)) + 1);
    case CONSTRUCTIONS:
      return g_strdup_printf ("%d", ut_plan_find_construction (plan, FIELD (char *, home, row)));
    case FIXED:
      break;
    }
  return g_strdup_printf ("%u", FIELD (guint, home, row));
}

/* Numbers may be typed with a decimal comma or a minus sign. */
static gboolean
parse_number (const char *text, double *value)
{
  g_autoptr (GString) plain = g_string_new (text);
  char *end;

  g_string_replace (plain, "−", "-", 0);
  g_string_replace (plain, ",", ".", 0);
  g_strstrip (plain->str);
  *value = g_ascii_strtod (plain->str, &end);
  return end != plain->str && *end == '\0' && isfinite (*value);
}

static gboolean
set_numbers (GArray *numbers, const char *text)
{
  g_auto (GStrv) words = g_strsplit_set (text, " ;", -1);

  g_array_set_size (numbers, 0);
  for (guint i = 0; words[i] != NULL; i++)
    {
      double value;

      if (words[i][0] == '\0')
        continue;
      if (!parse_number (words[i], &value))
        return FALSE;
      g_array_append_val (numbers, value);
    }
  return TRUE;
}

static void
set_word (char **place, const char *word)
{
  g_free (*place);
  *place = g_strdup (word);
}

/* Sets the field in a copy that is not part of a plan yet. */
static gboolean
set_field (const UtPlan *plan, const Row *row, void *home, const char *text, char **refusal)
{
  guint64 position = g_ascii_strtoull (text, NULL, 10);
  double value = NAN;

  switch (row->field.kind)
    {
    case UT_FIELD_TEXT:
      set_word (&FIELD (char *, home, row), text);
      return TRUE;
    case UT_FIELD_SWITCH:
      FIELD (gboolean, home, row) = text[0] == '1';
      return TRUE;
    case UT_FIELD_CHOICE:
      if (row->source == ANTENNAS)
        set_word (&FIELD (char *, home, row), position == 0 ? "isotropic" : ut_plan_antenna (plan, (guint) position - 1)->id);
      else if (row->source == CONSTRUCTIONS)
        set_word (&FIELD (char *, home, row), ut_plan_construction (plan, (guint) MIN (position, plan->constructions->len - 1))->id);
      else if (row->source == SERVING)
        set_word (&FIELD (char *, home, row), position == 0 ? NULL : ut_plan_cell (plan, (guint) position - 1)->radio.id);
      else
        FIELD (guint, home, row) = (guint) position;
      return TRUE;
    case UT_FIELD_NUMBER_OR_NONE:
      if (text[strspn (text, " ")] != '\0' && !parse_number (text, &value))
        break;
      FIELD (double, home, row) = value;
      return TRUE;
    case UT_FIELD_NUMBER:
      if (!parse_number (text, &value))
        break;
      FIELD (double, home, row) = value;
      return TRUE;
    case UT_FIELD_NUMBERS:
      if (set_numbers (FIELD (GArray *, home, row), text))
        return TRUE;
      *refusal = g_strdup_printf (_ ("“%s” is no list of numbers; expected numbers with spaces between, or nothing"), text);
      return FALSE;
    case UT_FIELD_WHOLE:
      if (!parse_number (text, &value) || fabs (value) > 1e6 || value < floor (value) || value > floor (value))
        break;
      FIELD (int, home, row) = (int) value;
      return TRUE;
    }
  *refusal = g_strdup_printf (_ ("“%s” is no value for this; expected a number"), text);
  return FALSE;
}

/* The field set in all walls picked; NULL where the text is refused. */
static const UtPlan *
with_walls (const UtPlan *plan, const Row *row, const char *ids, const char *text, char **refusal)
{
  g_auto (GStrv) picks = g_strsplit (ids, "\n", -1);
  const UtPlan *with = ut_plan_ref (plan);

  for (guint i = 0; picks[i] != NULL; i++)
    {
      guint storey, index;
      const UtPlan *next;

      if (!ut_plan_find_picked_wall (with, picks[i], &storey, &index))
        continue;
      g_autoptr (UtWall) wall = ut_wall_copy (ut_plan_storey (with, storey)->walls->pdata[index]);
      if (!set_field (plan, row, wall, text, refusal))
        {
          ut_plan_unref (with);
          return NULL;
        }
      next = ut_plan_with_wall (with, storey, (int) index, g_steal_pointer (&wall));
      ut_plan_unref (with);
      with = next;
    }
  return with;
}

static const UtPlan *
with_field (const UtPlan *plan, const Row *row, UtSubject subject, const char *id, const char *text, char **refusal)
{
  int index;

  switch (row->home)
    {
    case IN_PLAN:
      return ut_plan_with_title (plan, text);
    case IN_CARRIER:
      {
        g_autoptr (UtCarrier) carrier = ut_carrier_copy (plan->carrier);
        return set_field (plan, row, carrier, text, refusal) ? ut_plan_with_carrier (plan, g_steal_pointer (&carrier)) : NULL;
      }
    case IN_PROPAGATION:
      {
        g_autoptr (UtPropagation) propagation = ut_propagation_copy (plan->propagation);
        return set_field (plan, row, propagation, text, refusal) ? ut_plan_with_propagation (plan, g_steal_pointer (&propagation)) : NULL;
      }
    case IN_WALL:
      return with_walls (plan, row, id, text, refusal);
    case IN_RADIO:
    case IN_CELL:
    case IN_TERMINAL:
      break;
    }
  if (subject == UT_SUBJECT_CELL)
    {
      index = ut_plan_find_cell (plan, id);
      g_autoptr (UtCell) cell = ut_cell_copy (ut_plan_cell (plan, (guint) index));
      return set_field (plan, row, cell, text, refusal) ? ut_plan_with_cell (plan, index, g_steal_pointer (&cell)) : NULL;
    }
  index = ut_plan_find_terminal (plan, id);
  g_autoptr (UtTerminal) terminal = ut_terminal_copy (ut_plan_terminal (plan, (guint) index));
  return set_field (plan, row, terminal, text, refusal) ? ut_plan_with_terminal (plan, index, g_steal_pointer (&terminal)) : NULL;
}

/* The reader is the one judge of what a plan may hold: what it would refuse is refused here, in its words. */
static char *
refusal_of (const UtPlan *plan)
{
  gsize length;
  g_autofree char *text = ut_plan_write (plan, &length);
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  g_autoptr (UtPlan) again = (UtPlan *) ut_plan_read (text, length, faults);

  return again != NULL ? NULL : g_strdup (((const UtFault *) faults->pdata[0])->message);
}

const UtPlan *
ut_fields_with (const UtPlan *plan, UtSubject subject, const char *id, guint index, const char *text, char **refusal)
{
  const Row *row = &subjects[subject].rows[index];
  const UtPlan *changed = home_of (plan, row, subject, id) != NULL ? with_field (plan, row, subject, id, text, refusal) : NULL;

  if (changed == NULL)
    return NULL;
  *refusal = refusal_of (changed);
  if (*refusal != NULL)
    g_clear_pointer (&changed, ut_plan_unref);
  return changed;
}
