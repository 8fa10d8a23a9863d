#include "plan-read.h"

#include "json-scan.h"
#include "plan-reader.h"

#include <math.h>

static const char *const list_keys[UT_N_LISTS]
    = { NULL, "constructions", "storeys", "antennas", "cells", "terminals" };

/* ---- lists and objects ---- */

static gboolean
read_object (UtReader *reader, const UtKind *kind, JsonObject *object, gpointer item);

static gboolean
read_list (UtReader *reader, const UtKey *key, JsonNode *node, gpointer item)
{
  if (!JSON_NODE_HOLDS_ARRAY (node))
    return ut_reader_fault_type (reader, key, node);
  GHashTable *outer = reader->used;
  reader->used = g_hash_table_new_full (g_str_hash, g_str_equal, NULL, g_free);
  gboolean good = TRUE;
  for (guint i = 0; i < json_array_get_length (json_node_get_array (node)); i++)
    {
      JsonNode *element = json_array_get_element (json_node_get_array (node), i);
      gsize before = ut_reader_enter_index (reader, i);
      if (JSON_NODE_HOLDS_OBJECT (element))
        {
          gpointer child = ut_kind_new (key->kind);
          good = read_object (reader, key->kind, json_node_get_object (element), child) && good;
          g_ptr_array_add (UT_FIELD (GPtrArray *, item, key), child);
        }
      else
        {
          ut_reader_fault (reader,
                           "wrong type, %s; expected %s, an object",
                           ut_reader_noun (element),
                           key->kind->label);
          good = FALSE;
        }
      ut_reader_leave (reader, before);
    }
  g_hash_table_unref (reader->used);
  reader->used = outer;
  return good;
}

static gboolean
read_child (UtReader *reader, const UtKey *key, JsonNode *node, gpointer item)
{
  if (!JSON_NODE_HOLDS_OBJECT (node))
    return ut_reader_fault_type (reader, key, node);
  if (UT_FIELD (gpointer, item, key) == NULL)
    UT_FIELD (gpointer, item, key) = ut_kind_new (key->kind);
  return read_object (
      reader, key->kind, json_node_get_object (node), UT_FIELD (gpointer, item, key));
}

static gboolean
read_material (UtReader *reader, const UtKey *key, JsonNode *node, gpointer item)
{
  if (JSON_NODE_HOLDS_OBJECT (node))
    {
      g_clear_pointer (&UT_FIELD (char *, item, key), g_free);
      return read_object (reader, key->kind, json_node_get_object (node), item);
    }
  return ut_read_word (reader, key, node) >= 0 && ut_read_text (reader, key, node, item);
}

/* ---- one key ---- */

static gboolean
read_null (const UtKey *key, gpointer item)
{
  switch (key->type)
    {
    case UT_KEY_NUMBER:
      UT_FIELD (double, item, key) = NAN;
      break;
    case UT_KEY_INTEGER:
      UT_FIELD (int, item, key) = 0;
      break;
    case UT_KEY_REFERENCE:
    case UT_KEY_WORD:
      g_clear_pointer (&UT_FIELD (char *, item, key), g_free);
      break;
    default: /* an object: a new item has none */
      break;
    }
  return TRUE;
}

/* TRUE: the key's value is good and in its field. */
static gboolean
read_key (UtReader *reader, const UtKey *key, JsonNode *node, gpointer item)
{
  double number;
  int word;
  if (JSON_NODE_HOLDS_NULL (node) && (key->flags & UT_KEY_NULLABLE) != 0)
    return read_null (key, item);
  switch (key->type)
    {
    case UT_KEY_VERSION: /* judged before all else */
      return TRUE;
    case UT_KEY_TEXT:
      return ut_read_text (reader, key, node, item);
    case UT_KEY_ID:
      return ut_read_id (reader, key, node, item);
    case UT_KEY_REFERENCE:
      return ut_read_reference (reader, key, node, item);
    case UT_KEY_WORD:
      return ut_read_word (reader, key, node) >= 0 && ut_read_text (reader, key, node, item);
    case UT_KEY_NUMBER:
      return ut_read_number (reader, key, node, &UT_FIELD (double, item, key));
    case UT_KEY_INTEGER:
      if (!ut_read_number (reader, key, node, &number))
        return FALSE;
      UT_FIELD (int, item, key) = (int)number;
      return TRUE;
    case UT_KEY_FLAG:
      if (!JSON_NODE_HOLDS_VALUE (node) || json_node_get_value_type (node) != G_TYPE_BOOLEAN)
        return ut_reader_fault_type (reader, key, node);
      UT_FIELD (gboolean, item, key) = json_node_get_boolean (node);
      return TRUE;
    case UT_KEY_CHOICE:
      word = ut_read_word (reader, key, node);
      UT_FIELD (int, item, key) = MAX (word, 0);
      return word >= 0;
    case UT_KEY_NUMBERS:
      return ut_read_numbers (reader, key, node, item);
    case UT_KEY_POINTS:
      return ut_read_points (reader, key, node, item);
    case UT_KEY_DATA:
      return ut_read_data (reader, key, node, item);
    case UT_KEY_FIELDS:
      return ut_read_fields (reader, key, node, item);
    case UT_KEY_OBJECT:
      return read_child (reader, key, node, item);
    case UT_KEY_INLINE:
      return JSON_NODE_HOLDS_OBJECT (node)
                 ? read_object (reader, key->kind, json_node_get_object (node), item)
                 : ut_reader_fault_type (reader, key, node);
    case UT_KEY_LIST:
      return read_list (reader, key, node, item);
    case UT_KEY_MATERIAL:
      return read_material (reader, key, node, item);
    case UT_KEY_GAINS:
      return ut_read_gains (reader, key, node, item);
    }
  g_assert_not_reached ();
}

/* ---- rules between the keys of one object ---- */

typedef struct
{
  const UtKind *kind;
  JsonObject *object;
  gpointer item;
  guint64 good; /* bits of the keys that were read without a fault */
} Read;

static gboolean
is_good (const Read *read, const char *name)
{
  const UtKey *key = ut_kind_find (read->kind, name);
  return (read->good >> (key - read->kind->keys) & 1) != 0;
}

static gboolean
check_construction (UtReader *reader, const Read *read)
{
  const UtConstruction *construction = read->item;
  gboolean has_loss = json_object_has_member (read->object, "loss_db");
  gboolean has_layers = json_object_has_member (read->object, "layers");
  if (has_layers && is_good (read, "layers"))
    has_layers = construction->layers->len > 0;
  if (has_loss && has_layers)
    ut_reader_fault (reader, "the construction has both layers and loss_db; expected one of them");
  else if (!has_loss && !has_layers)
    ut_reader_fault (reader,
                     "the construction has neither layers nor loss_db; expected one of them");
  return has_loss != has_layers;
}

static gboolean
check_antenna (UtReader *reader, const Read *read)
{
  const UtAntenna *antenna = read->item;
  if (!is_good (read, "id") || !g_str_equal (antenna->id, UT_BUILT_IN_ANTENNA))
    return TRUE;
  gsize before = ut_reader_enter_key (reader, "id");
  ut_reader_fault (reader,
                   "the id \"" UT_BUILT_IN_ANTENNA
                   "\" is reserved for the built-in antenna; expected another");
  ut_reader_leave (reader, before);
  return FALSE;
}

static gboolean
check_radio (UtReader *reader, const Read *read)
{
  const UtRadio *radio = read->item;
  if (!is_good (read, "power_min_dbm") || !is_good (read, "power_max_dbm")
      || radio->power_min_dbm <= radio->power_max_dbm)
    return TRUE;
  gsize before = ut_reader_enter_key (reader, "power_min_dbm");
  char lowest[G_ASCII_DTOSTR_BUF_SIZE], highest[G_ASCII_DTOSTR_BUF_SIZE];
  g_ascii_formatd (lowest, sizeof lowest, "%.15g", radio->power_min_dbm);
  g_ascii_formatd (highest, sizeof highest, "%.15g", radio->power_max_dbm);
  ut_reader_fault (reader, "%s is above power_max_dbm, %s; expected at most that", lowest, highest);
  ut_reader_leave (reader, before);
  return FALSE;
}

static gboolean
check_cell (UtReader *reader, const Read *read)
{
  const UtCell *cell = read->item;
  gboolean good = check_radio (reader, read);
  if (is_good (read, "channel") && reader->channels > 0 && cell->channel > reader->channels)
    {
      gsize before = ut_reader_enter_key (reader, "channel");
      ut_reader_fault (
          reader,
          "channel %d is not one of the carrier's channels; expected a whole number from 1 to "
          "%" G_GINT64_FORMAT,
          cell->channel,
          reader->channels);
      ut_reader_leave (reader, before);
      good = FALSE;
    }
  return good;
}

static const struct
{
  const UtKind *kind;
  gboolean (*check) (UtReader *reader, const Read *read);
} checks[] = {
  { &ut_kind_construction, check_construction },
  { &ut_kind_antenna, check_antenna },
  { &ut_kind_cell, check_cell },
  { &ut_kind_terminal, check_radio },
};

/* A key that must be there: not where the variant that would need it is itself not known. */
static gboolean
is_needed (const Read *read, const UtKey *key)
{
  if ((key->flags & UT_KEY_REQUIRED) == 0)
    return FALSE;
  return key->variants == 0
         || (is_good (read, read->kind->variant->name)
             && ut_kind_has (read->kind, key, read->item));
}

static gboolean
report_missing (UtReader *reader, const Read *read)
{
  gboolean good = TRUE;
  for (guint i = 0; i < read->kind->n_keys; i++)
    {
      const UtKey *key = &read->kind->keys[i];
      if (!is_needed (read, key) || json_object_has_member (read->object, key->name))
        continue;
      g_autofree char *expected = ut_reader_expectation (key);
      gsize before = ut_reader_enter_key (reader, key->name);
      ut_reader_fault (reader, "missing; expected %s", expected);
      ut_reader_leave (reader, before);
      good = FALSE;
    }
  return good;
}

/* A name that was left out is the id. */
static void
complete_name (const UtKind *kind, gpointer item)
{
  const UtKey *name = ut_kind_find (kind, "name"), *id = ut_kind_find (kind, "id");
  if (name != NULL && UT_FIELD (char *, item, name) == NULL)
    UT_FIELD (char *, item, name) = g_strdup (UT_FIELD (char *, item, id));
}

/* Fills a new item from its object.  TRUE: without a fault. */
static gboolean
read_object (UtReader *reader, const UtKind *kind, JsonObject *object, gpointer item)
{
  Read read = { .kind = kind, .object = object, .item = item };
  gboolean good = TRUE;
  JsonObjectIter iter;
  const char *name;
  JsonNode *node;
  json_object_iter_init_ordered (&iter, object);
  while (json_object_iter_next_ordered (&iter, &name, &node))
    {
      const UtKey *key = ut_kind_find (kind, name);
      gsize before = ut_reader_enter_key (reader, name);
      gboolean key_good
          = key != NULL ? read_key (reader, key, node, item) : ut_read_unknown (reader, node);
      ut_reader_leave (reader, before);
      good = good && key_good;
      if (key != NULL && key_good)
        read.good |= G_GUINT64_CONSTANT (1) << (key - kind->keys);
    }
  UT_SOURCE (kind, item) = ut_source_ref (object);
  complete_name (kind, item);
  good = report_missing (reader, &read) && good;
  for (guint i = 0; i < G_N_ELEMENTS (checks); i++)
    if (checks[i].kind == kind)
      good = checks[i].check (reader, &read) && good;
  return good;
}

/* ---- the whole ---- */

static void
gather_ids (UtReader *reader, JsonObject *root, UtListName list)
{
  reader->ids[list] = g_hash_table_new (g_str_hash, g_str_equal);
  const UtKey *key = ut_kind_find (&ut_kind_plan, list_keys[list]);
  JsonNode *node = json_object_get_member (root, key->name);
  if (node == NULL || !JSON_NODE_HOLDS_ARRAY (node))
    {
      reader->unsure[list] = node != NULL || (key->flags & UT_KEY_REQUIRED) != 0;
      return;
    }
  for (guint i = 0; i < json_array_get_length (json_node_get_array (node)); i++)
    {
      JsonNode *element = json_array_get_element (json_node_get_array (node), i);
      JsonNode *id = JSON_NODE_HOLDS_OBJECT (element)
                         ? json_object_get_member (json_node_get_object (element), "id")
                         : NULL;
      const char *text = id != NULL && ut_reader_holds_text (id) ? json_node_get_string (id) : "";
      gboolean good = *text != '\0' && g_hash_table_add (reader->ids[list], (gpointer)text);
      if (!good || (list == UT_LIST_ANTENNAS && g_str_equal (text, UT_BUILT_IN_ANTENNA)))
        reader->unsure[list] = TRUE;
    }
}

/* The carrier's channels, 0 where they cannot be told. */
static gint64
find_channels (JsonObject *root)
{
  JsonNode *carrier = json_object_get_member (root, "carrier");
  if (carrier == NULL || !JSON_NODE_HOLDS_OBJECT (carrier))
    return 0;
  JsonNode *channels = json_object_get_member (json_node_get_object (carrier), "channels");
  if (channels == NULL)
    return 1;
  double number = ut_reader_holds_number (channels) ? json_node_get_double (channels) : 0;
  return number >= 1 && number <= G_MAXINT && number == floor (number) ? (gint64)number : 0;
}

/* A file of a later version is refused for that alone: what else it holds is not ours to judge. */
static gboolean
check_version (UtReader *reader, JsonObject *root)
{
  JsonNode *node = json_object_get_member (root, "undertone");
  const UtKey *key = ut_kind_find (&ut_kind_plan, "undertone");
  if (node == NULL)
    return TRUE; /* reported as missing with the rest */
  gsize before = ut_reader_enter_key (reader, "undertone");
  double version = ut_reader_holds_number (node) ? json_node_get_double (node) : 0;
  if (!ut_reader_holds_number (node))
    ut_reader_fault_type (reader, key, node);
  else if (version > UT_PLAN_VERSION)
    ut_reader_fault (reader,
                     "the file has a newer version than this program reads; expected %d",
                     UT_PLAN_VERSION);
  else if (version != UT_PLAN_VERSION)
    ut_reader_fault (reader, "there is no such file version; expected %d", UT_PLAN_VERSION);
  ut_reader_leave (reader, before);
  return !(ut_reader_holds_number (node) && version > UT_PLAN_VERSION);
}

static const UtPlan *
read_root (JsonNode *root, GPtrArray *faults)
{
  if (!JSON_NODE_HOLDS_OBJECT (root))
    {
      ut_faults_add (faults,
                     "",
                     g_strdup_printf ("the text holds %s; expected an object, the plan",
                                      ut_reader_noun (root)));
      return NULL;
    }
  UtReader reader = { .faults = faults, .path = g_string_new (NULL) };
  JsonObject *object = json_node_get_object (root);
  UtPlan *plan = ut_kind_new (&ut_kind_plan);
  if (check_version (&reader, object))
    {
      for (UtListName list = UT_LIST_NONE + 1; list < UT_N_LISTS; list++)
        gather_ids (&reader, object, list);
      reader.channels = find_channels (object);
      read_object (&reader, &ut_kind_plan, object, plan);
      for (UtListName list = UT_LIST_NONE + 1; list < UT_N_LISTS; list++)
        g_hash_table_unref (reader.ids[list]);
    }
  g_string_free (reader.path, TRUE);
  if (reader.faulty)
    g_clear_pointer (&plan, ut_plan_unref);
  return plan;
}

const UtPlan *
ut_plan_read (const char *text, gsize length, GPtrArray *faults)
{
  UtJsonFault syntax;
  g_autoptr (JsonNode) root = ut_json_scan (text, length, &syntax);
  if (root != NULL)
    return read_root (root, faults);

  g_autofree char *path = g_strdup_printf ("line %u, column %u", syntax.line, syntax.column);
  ut_faults_add (faults, path, syntax.message);
  return NULL;
}

const UtPlan *
ut_plan_read_file (GFile *file, GPtrArray *faults, GError **error)
{
  g_autofree char *text = NULL;
  gsize length;
  if (!g_file_load_contents (file, NULL, &text, &length, NULL, error))
    return NULL;
  return ut_plan_read (text, length, faults);
}
