#include "fields.h"

#include <math.h>
#include <string.h>

#include <glib/gi18n.h>

#include "plan-edit.h"
#include "plan-read.h"
#include "plan-write.h"
#include "rate-target.h"

/* Which struct a field lies in. */
typedef enum { IN_PLAN, IN_SITE, IN_CARRIER, IN_PROPAGATION, IN_STOREY, IN_BACKDROP, IN_RADIO, IN_CELL, IN_TERMINAL, IN_WALL } Home;

/* Choices whose words come from the plan. */
typedef enum { FIXED, ANTENNAS, SERVING, CONSTRUCTIONS, FLOORS } Source;

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
#define RADIO(label, unit, kind, member) { { N_ (label), unit, kind, NULL, NULL }, IN_RADIO, AT (UtRadio, member), FIXED, 0 }

#define PLACE                                                                                      \
  RADIO ("Name", NULL, UT_FIELD_TEXT, name), RADIO ("x", "m", UT_FIELD_NUMBER, x_m), RADIO ("y", "m", UT_FIELD_NUMBER, y_m),                \
    RADIO ("Height", "m", UT_FIELD_NUMBER, height_m),                                              \
    { { N_ ("Antenna"), NULL, UT_FIELD_CHOICE, NULL, NULL }, IN_RADIO, AT (UtRadio, antenna), ANTENNAS, 0 }, \
    RADIO ("Azimuth", "°", UT_FIELD_NUMBER, azimuth_deg), RADIO ("Downtilt", "°", UT_FIELD_NUMBER, downtilt_deg),                           \
    RADIO ("Feeder loss", "dB", UT_FIELD_NUMBER, feeder_loss_db)

#define POWERS                                                                                     \
  RADIO ("Set power", "dBm", UT_FIELD_NUMBER, power_dbm), RADIO ("Lowest power", "dBm", UT_FIELD_NUMBER, power_min_dbm),                    \
    RADIO ("Highest power", "dBm", UT_FIELD_NUMBER, power_max_dbm), RADIO ("Power step", "dB", UT_FIELD_NUMBER, power_step_db),             \
    RADIO ("Noise figure", "dB", UT_FIELD_NUMBER, noise_figure_db), RADIO ("Activity", NULL, UT_FIELD_NUMBER, activity),                    \
    RADIO ("On", NULL, UT_FIELD_SWITCH, on), RADIO ("Own columns", NULL, UT_FIELD_COLUMNS, fields)

#define CELL(label, unit, kind, member) { { N_ (label), unit, kind, NULL, NULL }, IN_CELL, AT (UtCell, member), FIXED, 0 }
#define TERMINAL(label, unit, kind, member) { { N_ (label), unit, kind, NULL, NULL }, IN_TERMINAL, AT (UtTerminal, member), FIXED, 0 }
#define CARRIER(label, unit, kind, choices, member) { { N_ (label), unit, kind, NULL, choices }, IN_CARRIER, AT (UtCarrier, member), FIXED, 0 }
#define PROPAGATION(label, unit, kind, choices, member) { { N_ (label), unit, kind, NULL, choices }, IN_PROPAGATION, AT (UtPropagation, member), FIXED, 0 }
#define PARAMETER(label, unit, kind, choices, member, of) { { N_ (label), unit, kind, NULL, choices }, IN_PROPAGATION, AT (UtPropagation, member), FIXED, of }
#define SIGHTED (1u << UT_BASE_SITE_GENERAL | 1u << UT_BASE_INDOOR_OFFICE | 1u << UT_BASE_INDOOR_FACTORY)

static const Row cell_rows[] = { PLACE, POWERS, CELL ("Channel", NULL, UT_FIELD_WHOLE, channel) };

static const Row terminal_rows[] = {
  { { N_ ("Served by"), NULL, UT_FIELD_CHOICE, NULL, NULL }, IN_TERMINAL, AT (UtTerminal, cell), SERVING, 0 },
  TERMINAL ("Downlink target", "dB", UT_FIELD_TARGET, target_down_db),
  TERMINAL ("Uplink target", "dB", UT_FIELD_TARGET, target_up_db),
  TERMINAL ("Downlink level", "dBm", UT_FIELD_NUMBER_OR_NONE, level_down_dbm),
  TERMINAL ("Uplink level", "dBm", UT_FIELD_NUMBER_OR_NONE, level_up_dbm),
  PLACE,
  TERMINAL ("Body loss", "dB", UT_FIELD_NUMBER, body_loss_db),
  POWERS,
  TERMINAL ("Priority", NULL, UT_FIELD_NUMBER, priority),
};

#define TEXT(label, group, member) { { N_ (label), NULL, UT_FIELD_TEXT, group, NULL }, IN_PLAN, AT (UtPlan, member), FIXED, 0 }
#define SITE(label, unit, kind, member) { { N_ (label), unit, kind, NULL, NULL }, IN_SITE, AT (UtSite, member), FIXED, 0 }
#define STOREY(label, unit, kind, group, member) { { N_ (label), unit, kind, group, NULL }, IN_STOREY, AT (UtStorey, member), FIXED, 0 }
#define BACKDROP(label, unit, kind, group, member) { { N_ (label), unit, kind, group, NULL }, IN_BACKDROP, AT (UtBackdrop, member), FIXED, 0 }

static const Row plan_rows[] = {
  TEXT ("Title", N_ ("Title block"), title),
  TEXT ("Client", NULL, client),
  TEXT ("Prepared by", NULL, prepared_by),
  TEXT ("Revision", NULL, revision),
  TEXT ("Date", NULL, date),
  TEXT ("Notes", NULL, notes),
  STOREY ("Name", NULL, UT_FIELD_TEXT, N_ ("Storey shown"), name),
  STOREY ("Elevation", "m", UT_FIELD_NUMBER, NULL, elevation_m),
  STOREY ("Height", "m", UT_FIELD_NUMBER, NULL, height_m),
  { { N_ ("Floor under it"), NULL, UT_FIELD_CHOICE, NULL, NULL }, IN_STOREY, AT (UtStorey, floor), FLOORS, 0 },
  BACKDROP ("Left edge x", "m", UT_FIELD_NUMBER, N_ ("Backdrop"), x_m),
  BACKDROP ("Lower edge y", "m", UT_FIELD_NUMBER, NULL, y_m),
  BACKDROP ("Width", "m", UT_FIELD_NUMBER, NULL, width_m),
  BACKDROP ("Height", "m", UT_FIELD_NUMBER, NULL, height_m),
  BACKDROP ("Turned", "°", UT_FIELD_NUMBER, NULL, turn_deg),
  BACKDROP ("Opacity (0 to 1)", NULL, UT_FIELD_NUMBER, NULL, opacity),
  BACKDROP ("Locked", NULL, UT_FIELD_SWITCH, NULL, locked),
  { { N_ ("Frequency"), "MHz", UT_FIELD_NUMBER, N_ ("Carrier"), NULL }, IN_CARRIER, AT (UtCarrier, frequency_mhz), FIXED, 0 },
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
  { { N_ ("Law"), NULL, UT_FIELD_CHOICE, N_ ("Propagation"), law_words }, IN_PROPAGATION, AT (UtPropagation, law), FIXED, 0 },
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
  { { N_ ("North, clockwise from +y"), "°", UT_FIELD_NUMBER, N_ ("Site"), NULL }, IN_SITE, AT (UtSite, north_deg), FIXED, 0 },
  SITE ("Latitude", "°", UT_FIELD_NUMBER_OR_NONE, latitude),
  SITE ("Longitude", "°", UT_FIELD_NUMBER_OR_NONE, longitude),
  SITE ("Datum", NULL, UT_FIELD_TEXT, datum),
};

static const Row radio_rows[] = { PLACE, POWERS };

static const Row wall_rows[] = {
  { { N_ ("Construction"), NULL, UT_FIELD_CHOICE, NULL, NULL }, IN_WALL, AT (UtWall, construction), CONSTRUCTIONS, 0 },
  { { N_ ("Height"), "m", UT_FIELD_NUMBER_OR_NONE, NULL, NULL }, IN_WALL, AT (UtWall, height_m), FIXED, 0 },
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
  [UT_SUBJECT_RADIOS] = { radio_rows, G_N_ELEMENTS (radio_rows) },
  [UT_SUBJECT_MANY] = { NULL, 0 },
};

#define FIELD(type, item, row) (*(type *) (void *) ((char *) (item) + (row)->offset))

UtSubject
ut_fields_subject (UtDesk *desk)
{
  UtSelection *selection = ut_desk_selection (desk);
  guint n = ut_selection_size (selection), n_radios = ut_selection_n_radios (selection), n_cells = 0;

  for (guint i = 0; i < n; i++)
    n_cells += ut_selection_pick (selection, i)->kind == UT_KIND_CELL;
  if (n == 0)
    return UT_SUBJECT_PLAN;
  if (n_radios == 0)
    return UT_SUBJECT_WALL;
  if (n_radios < n)
    return UT_SUBJECT_MANY;
  return n_cells == n ? UT_SUBJECT_CELL : n_cells == 0 ? UT_SUBJECT_TERMINAL : UT_SUBJECT_RADIOS;
}

char *
ut_fields_id (UtDesk *desk)
{
  UtSelection *selection = ut_desk_selection (desk);
  GString *ids;

  switch (ut_fields_subject (desk))
    {
    case UT_SUBJECT_PLAN:
      return g_strdup (ut_plan_storey (ut_desk_plan (desk), ut_desk_storey (desk))->id);
    case UT_SUBJECT_CELL:
    case UT_SUBJECT_TERMINAL:
    case UT_SUBJECT_WALL:
      ids = g_string_new (NULL);
      for (guint i = 0; i < ut_selection_size (selection); i++)
        g_string_append_printf (ids, "%s%s", i > 0 ? "\n" : "", ut_selection_pick (selection, i)->id);
      return g_string_free (ids, FALSE);
    case UT_SUBJECT_RADIOS:
      return ut_selection_to_text (selection);
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

/* Kind and own id (within `line`) of one line of the subject's id. */
static const char *
radio_of_line (UtSubject subject, const char *line, UtRadioKind *kind)
{
  *kind = subject == UT_SUBJECT_CELL || g_str_has_prefix (line, "cell ") ? UT_KIND_CELL : UT_KIND_TERMINAL;
  return subject == UT_SUBJECT_RADIOS ? strchr (line, ' ') + 1 : line;
}

/* The struct of one thing that a row's field lies in, or NULL when it is gone. */
static const void *
home_of_line (const UtPlan *plan, const Row *row, UtSubject subject, const char *line)
{
  UtRadioKind kind;
  guint storey, wall;
  int index;

  switch (row->home)
    {
    case IN_PLAN:
      return plan;
    case IN_SITE:
      return plan->site;
    case IN_CARRIER:
      return plan->carrier;
    case IN_PROPAGATION:
      return plan->propagation;
    case IN_STOREY:
    case IN_BACKDROP:
      index = line != NULL ? ut_plan_find_storey (plan, line) : -1;
      if (index < 0)
        return NULL;
      return row->home == IN_STOREY ? (const void *) ut_plan_storey (plan, (guint) index) : ut_plan_storey (plan, (guint) index)->backdrop;
    case IN_WALL:
      return ut_plan_find_picked_wall (plan, line, &storey, &wall) ? ut_plan_storey (plan, storey)->walls->pdata[wall] : NULL;
    case IN_RADIO:
    case IN_CELL:
    case IN_TERMINAL:
      break;
    }
  /* Cells and terminals begin with their radio. */
  line = radio_of_line (subject, line, &kind);
  return ut_plan_radio (plan, kind, line);
}

/* The same of the first thing. */
static const void *
home_of (const UtPlan *plan, const Row *row, UtSubject subject, const char *id)
{
  const char *end = id != NULL ? strchr (id, '\n') : NULL;
  g_autofree char *first = end != NULL ? g_strndup (id, (gsize) (end - id)) : g_strdup (id);

  return home_of_line (plan, row, subject, first);
}

gboolean
ut_fields_applies (const UtPlan *plan, UtSubject subject, const char *id, guint index)
{
  const Row *row = &subjects[subject].rows[index];

  return (row->laws == 0 || (row->laws & 1u << plan->propagation->law) != 0) && home_of (plan, row, subject, id) != NULL;
}

gboolean
ut_fields_held (const UtPlan *plan, UtSubject subject, const char *id)
{
  return subjects[subject].n == 0 || home_of (plan, &subjects[subject].rows[0], subject, id) != NULL;
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
    case FLOORS:
      g_strv_builder_add (choices, _ ("none"));
      /* fall through */
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

/* The planner's own columns as they are typed; what is no text is shown as it is in the file. */
static char *
columns_text (JsonObject *columns)
{
  GString *text = g_string_new (NULL);
  JsonObjectIter iter;
  const char *key;
  JsonNode *node;

  if (columns == NULL)
    return g_string_free (text, FALSE);
  json_object_iter_init_ordered (&iter, columns);
  while (json_object_iter_next_ordered (&iter, &key, &node))
    {
      g_autofree char *value = JSON_NODE_HOLDS_VALUE (node) && json_node_get_value_type (node) == G_TYPE_STRING ? g_strdup (json_node_get_string (node))
                                                                                                              : json_to_string (node, FALSE);

      g_string_append_printf (text, "%s%s: %s", text->len > 0 ? "; " : "", key, value);
    }
  return g_string_free (text, FALSE);
}

/* The field of one thing as text. */
static char *
text_of (const UtPlan *plan, const Row *row, const void *home)
{
  switch (row->field.kind)
    {
    case UT_FIELD_TEXT:
      return g_strdup (FIELD (char *, home, row));
    case UT_FIELD_NUMBER:
    case UT_FIELD_NUMBER_OR_NONE:
    case UT_FIELD_TARGET:
      return number_text (FIELD (double, home, row));
    case UT_FIELD_NUMBERS:
      return numbers_text (FIELD (GArray *, home, row));
    case UT_FIELD_WHOLE:
      return g_strdup_printf ("%d", FIELD (int, home, row));
    case UT_FIELD_SWITCH:
      return g_strdup (FIELD (gboolean, home, row) ? "1" : "0");
    case UT_FIELD_COLUMNS:
      return columns_text (FIELD (JsonObject *, home, row));
    case UT_FIELD_CHOICE:
      break;
    }
  const char *word = row->source != FIXED ? FIELD (char *, home, row) : NULL;
  switch (row->source)
    {
    case ANTENNAS:
      return g_strdup_printf ("%d", ut_plan_find_antenna (plan, word) + 1);
    case SERVING:
      return g_strdup_printf ("%d", word == NULL ? 0 : ut_plan_find_cell (plan, word) + 1);
    case FLOORS:
      return g_strdup_printf ("%d", word == NULL ? 0 : ut_plan_find_construction (plan, word) + 1);
    case CONSTRUCTIONS:
      return g_strdup_printf ("%d", ut_plan_find_construction (plan, word));
    case FIXED:
      break;
    }
  return g_strdup_printf ("%u", FIELD (guint, home, row));
}

char *
ut_fields_text (const UtPlan *plan, UtSubject subject, const char *id, guint index)
{
  const Row *row = &subjects[subject].rows[index];
  const void *home = home_of (plan, row, subject, id);

  return home != NULL ? text_of (plan, row, home) : g_strdup ("");
}

gboolean
ut_fields_mixed (const UtPlan *plan, UtSubject subject, const char *id, guint index)
{
  const Row *row = &subjects[subject].rows[index];
  g_autofree char *first = ut_fields_text (plan, subject, id, index);
  g_auto (GStrv) lines = g_strsplit (id != NULL ? id : "", "\n", -1);

  for (guint i = 1; lines[0] != NULL && lines[i] != NULL; i++)
    {
      const void *home = home_of_line (plan, row, subject, lines[i]);
      g_autofree char *text = home != NULL ? text_of (plan, row, home) : NULL;

      if (text != NULL && !g_str_equal (text, first))
        return TRUE;
    }
  return FALSE;
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

/* A SINR in dB, or a bit rate with its unit, in the carrier's bandwidth and direction; empty: none. */
static gboolean
set_target (const UtPlan *plan, const Row *row, double *target_db, const char *text, char **refusal)
{
  UtDirection direction = row->offset == AT (UtTerminal, target_up_db) ? UT_DIRECTION_UP : UT_DIRECTION_DOWN;
  g_autofree char *plain = g_strstrip (g_strdup (text));
  double value, most_mbit_s;

  if (plain[0] == '\0')
    {
      *target_db = NAN;
      return TRUE;
    }
  if (g_str_has_suffix (plain, "bit/s"))
    {
      char *unit = strstr (plain, "bit/s");
      double factor = unit > plain && unit[-1] == 'M' ? 1 : unit > plain && unit[-1] == 'k' ? 1e-3 : unit > plain && unit[-1] == 'G' ? 1e3 : 1e-6;

      *(factor > 1e-6 ? unit - 1 : unit) = '\0';
      *target_db = parse_number (plain, &value) ? ut_target_for_rate_db (plan, direction, value * factor, &most_mbit_s) : NAN;
      if (!isnan (*target_db))
        return TRUE;
      ut_target_for_rate_db (plan, direction, 1, &most_mbit_s);
      *refusal = g_strdup_printf (_ ("“%s” cannot be had; expected a rate above 0 and at most %.4g Mbit/s in this bandwidth"), text, most_mbit_s);
      return FALSE;
    }
  if (parse_number (plain, target_db))
    return TRUE;
  *refusal = g_strdup_printf (_ ("“%s” is no target; expected dB, or a bit rate such as “20 Mbit/s”, or nothing"), text);
  return FALSE;
}

/* "cable tag: A-07; rack: 3"; values that were no texts and stay as they are keep their kind. */
static gboolean
set_columns (UtRadio *radio, const char *text, char **refusal)
{
  g_auto (GStrv) parts = g_strsplit (text, ";", -1);
  JsonObject *next = json_object_new ();

  for (guint i = 0; parts[i] != NULL; i++)
    {
      char *key = g_strstrip (parts[i]), *colon = strchr (key, ':'), *value;

      if (key[0] == '\0')
        continue;
      if (colon == NULL || colon == key)
        {
          *refusal = g_strdup_printf (_ ("“%s” is no column; expected “name: text”, several with semicolons between"), parts[i]);
          json_object_unref (next);
          return FALSE;
        }
      *colon = '\0';
      value = g_strstrip (colon + 1);
      g_strchomp (key);
      JsonNode *old = radio->fields != NULL ? json_object_get_member (radio->fields, key) : NULL;
      g_autofree char *was = old != NULL && !(JSON_NODE_HOLDS_VALUE (old) && json_node_get_value_type (old) == G_TYPE_STRING) ? json_to_string (old, FALSE) : NULL;
      if (g_strcmp0 (was, value) == 0)
        json_object_set_member (next, key, json_node_copy (old));
      else
        json_object_set_string_member (next, key, value);
    }
  if (json_object_get_size (next) == 0)
    g_clear_pointer (&next, json_object_unref);
  ut_radio_set_fields (radio, next);
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
      else if (row->source == FLOORS)
        set_word (&FIELD (char *, home, row), position == 0 ? NULL : ut_plan_construction (plan, (guint) position - 1)->id);
      else if (row->source == SERVING)
        set_word (&FIELD (char *, home, row), position == 0 ? NULL : ut_plan_cell (plan, (guint) position - 1)->radio.id);
      else
        FIELD (guint, home, row) = (guint) position;
      return TRUE;
    case UT_FIELD_TARGET:
      return set_target (plan, row, &FIELD (double, home, row), text, refusal);
    case UT_FIELD_COLUMNS:
      return set_columns (home, text, refusal); /* cells and terminals begin with their radio */
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

/* The field set in one wall or radio; NULL where the text is refused. */
static const UtPlan *
with_line (const UtPlan *plan, const Row *row, UtSubject subject, const char *line, const char *text, char **refusal)
{
  UtRadioKind kind;
  guint storey, index;
  int at;

  if (row->home == IN_WALL)
    {
      if (!ut_plan_find_picked_wall (plan, line, &storey, &index))
        return ut_plan_ref (plan);
      g_autoptr (UtWall) wall = ut_wall_copy (ut_plan_storey (plan, storey)->walls->pdata[index]);
      return set_field (plan, row, wall, text, refusal) ? ut_plan_with_wall (plan, storey, (int) index, g_steal_pointer (&wall)) : NULL;
    }
  line = radio_of_line (subject, line, &kind);
  at = kind == UT_KIND_CELL ? ut_plan_find_cell (plan, line) : ut_plan_find_terminal (plan, line);
  if (at < 0)
    return ut_plan_ref (plan);
  if (kind == UT_KIND_CELL)
    {
      g_autoptr (UtCell) cell = ut_cell_copy (ut_plan_cell (plan, (guint) at));
      return set_field (plan, row, cell, text, refusal) ? ut_plan_with_cell (plan, at, g_steal_pointer (&cell)) : NULL;
    }
  g_autoptr (UtTerminal) terminal = ut_terminal_copy (ut_plan_terminal (plan, (guint) at));
  return set_field (plan, row, terminal, text, refusal) ? ut_plan_with_terminal (plan, at, g_steal_pointer (&terminal)) : NULL;
}

static const UtPlan *
with_lines (const UtPlan *plan, const Row *row, UtSubject subject, const char *id, const char *text, char **refusal)
{
  g_auto (GStrv) lines = g_strsplit (id, "\n", -1);
  const UtPlan *with = ut_plan_ref (plan);

  for (guint i = 0; lines[i] != NULL && with != NULL; i++)
    {
      const UtPlan *next = with_line (with, row, subject, lines[i], text, refusal);

      ut_plan_step (&with, next);
    }
  return with;
}

static const UtPlan *
with_text (const UtPlan *plan, const Row *row, const char *text)
{
  static const gsize offsets[] = { AT (UtPlan, title), AT (UtPlan, client), AT (UtPlan, prepared_by), AT (UtPlan, revision), AT (UtPlan, date), AT (UtPlan, notes) };

  for (guint i = 0; i < G_N_ELEMENTS (offsets); i++)
    if (offsets[i] == row->offset)
      return ut_plan_with_text (plan, (UtPlanText) i, text);
  g_assert_not_reached ();
}

/* The storey of that id with the field set, in itself or in its backdrop. */
static const UtPlan *
with_storey_field (const UtPlan *plan, const Row *row, const char *id, const char *text, char **refusal)
{
  int index = ut_plan_find_storey (plan, id);
  g_autoptr (UtStorey) storey = ut_storey_copy (ut_plan_storey (plan, (guint) index));

  if (row->home == IN_STOREY)
    return set_field (plan, row, storey, text, refusal) ? ut_plan_with_storey (plan, index, g_steal_pointer (&storey)) : NULL;
  g_autoptr (UtBackdrop) backdrop = ut_backdrop_copy (storey->backdrop);
  if (!set_field (plan, row, backdrop, text, refusal))
    return NULL;
  ut_backdrop_unref (storey->backdrop);
  storey->backdrop = g_steal_pointer (&backdrop);
  return ut_plan_with_storey (plan, index, g_steal_pointer (&storey));
}

static const UtPlan *
with_field (const UtPlan *plan, const Row *row, UtSubject subject, const char *id, const char *text, char **refusal)
{
  switch (row->home)
    {
    case IN_PLAN:
      return with_text (plan, row, text);
    case IN_SITE:
      {
        g_autoptr (UtSite) site = ut_site_copy (plan->site);
        return set_field (plan, row, site, text, refusal) ? ut_plan_with_site (plan, g_steal_pointer (&site)) : NULL;
      }
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
    case IN_STOREY:
    case IN_BACKDROP:
      return with_storey_field (plan, row, id, text, refusal);
    case IN_WALL:
    case IN_RADIO:
    case IN_CELL:
    case IN_TERMINAL:
      break;
    }
  return with_lines (plan, row, subject, id, text, refusal);
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
