/* The values of single keys: numbers, texts, references, points, gains. */
#include "plan-reader.h"

#include <math.h>
#include <string.h>

/* A number within the key's range. */
gboolean
ut_read_number (UtReader *reader, const UtKey *key, JsonNode *node, double *value)
{
  if (!ut_reader_holds_number (node))
    return ut_reader_fault_type (reader, key, node);
  double number = json_node_get_double (node);
  gboolean whole = key->type == UT_KEY_INTEGER;
  gboolean within = key->above ? number > key->lowest : number >= key->lowest;
  if (isfinite (number) && within && number <= key->highest && (!whole || number == floor (number)))
    {
      *value = number + 0.0; /* -0 becomes 0 */
      return TRUE;
    }
  g_autofree char *expected = ut_reader_expectation (key);
  char digits[G_ASCII_DTOSTR_BUF_SIZE];
  if (!isfinite (number))
    ut_reader_fault (reader, "the number is not finite; expected %s", expected);
  else
    ut_reader_fault (reader,
                     "%s is %s; expected %s",
                     g_ascii_formatd (digits, sizeof digits, "%.15g", number),
                     whole && number != floor (number) ? "not a whole number" : "out of range",
                     expected);
  return FALSE;
}

gboolean
ut_read_text (UtReader *reader, const UtKey *key, JsonNode *node, gpointer item)
{
  if (!ut_reader_holds_text (node))
    return ut_reader_fault_type (reader, key, node);
  g_free (UT_FIELD (char *, item, key));
  UT_FIELD (char *, item, key) = json_node_dup_string (node);
  return TRUE;
}

gboolean
ut_read_id (UtReader *reader, const UtKey *key, JsonNode *node, gpointer item)
{
  const char *id = ut_reader_holds_text (node) ? json_node_get_string (node) : NULL;
  if (id == NULL)
    return ut_reader_fault_type (reader, key, node);
  if (*id == '\0')
    {
      ut_reader_fault (reader, "the id is empty; expected a text that is not empty");
      return FALSE;
    }
  g_autofree char *shown = ut_reader_quote (id);
  const char *first = g_hash_table_lookup (reader->used, id);
  if (first != NULL)
    {
      ut_reader_fault (
          reader, "the id %s is used twice, first at %s; expected an id of its own", shown, first);
      return FALSE;
    }
  g_hash_table_insert (reader->used, (gpointer)id, g_strdup (reader->path->str));
  return ut_read_text (reader, key, node, item);
}

static gboolean
is_known (const UtReader *reader, UtListName list, const char *id)
{
  return reader->unsure[list] || g_hash_table_contains (reader->ids[list], id)
         || (list == UT_LIST_ANTENNAS && g_str_equal (id, UT_BUILT_IN_ANTENNA));
}

gboolean
ut_read_reference (UtReader *reader, const UtKey *key, JsonNode *node, gpointer item)
{
  if (!ut_read_text (reader, key, node, item))
    return FALSE;
  if (is_known (reader, key->list, json_node_get_string (node)))
    return TRUE;
  g_autofree char *shown = ut_reader_quote (json_node_get_string (node));
  g_autofree char *expected = ut_reader_expectation (key);
  ut_reader_fault (reader, "%s refers to nothing; expected %s", shown, expected);
  return FALSE;
}

/* Index of the text among the key's words, -1 with a fault. */
int
ut_read_word (UtReader *reader, const UtKey *key, JsonNode *node)
{
  if (!ut_reader_holds_text (node))
    {
      ut_reader_fault_type (reader, key, node);
      return -1;
    }
  for (int i = 0; key->words[i] != NULL; i++)
    if (g_str_equal (key->words[i], json_node_get_string (node)))
      return i;
  g_autofree char *shown = ut_reader_quote (json_node_get_string (node));
  g_autofree char *expected = ut_reader_expectation (key);
  ut_reader_fault (reader, "%s is unknown; expected %s", shown, expected);
  return -1;
}

gboolean
ut_read_data (UtReader *reader, const UtKey *key, JsonNode *node, gpointer item)
{
  if (!ut_reader_holds_text (node))
    return ut_reader_fault_type (reader, key, node);
  /* GLib's decoder skips what it does not know: only text that it would write itself is taken. */
  const char *text = json_node_get_string (node);
  gsize length;
  guchar *bytes = g_base64_decode (text, &length);
  g_autofree char *again = g_base64_encode (bytes, length);
  if (length == 0 || !g_str_equal (text, again))
    {
      g_free (bytes);
      ut_reader_fault (reader,
                       "%s; expected a picture in base64",
                       *text == '\0' ? "the picture is empty" : "this is not base64");
      return FALSE;
    }
  g_bytes_unref (UT_FIELD (GBytes *, item, key));
  UT_FIELD (GBytes *, item, key) = g_bytes_new_take (bytes, length);
  return TRUE;
}

/* Finds numbers beyond a double in what is kept without being understood. */
gboolean
ut_read_unknown (UtReader *reader, JsonNode *node)
{
  gboolean good = TRUE;
  if (JSON_NODE_HOLDS_OBJECT (node))
    {
      JsonObjectIter iter;
      const char *name;
      JsonNode *member;
      json_object_iter_init_ordered (&iter, json_node_get_object (node));
      while (json_object_iter_next_ordered (&iter, &name, &member))
        {
          gsize before = ut_reader_enter_key (reader, name);
          good = ut_read_unknown (reader, member) && good;
          ut_reader_leave (reader, before);
        }
    }
  else if (JSON_NODE_HOLDS_ARRAY (node))
    for (guint i = 0; i < json_array_get_length (json_node_get_array (node)); i++)
      {
        gsize before = ut_reader_enter_index (reader, i);
        good = ut_read_unknown (reader, json_array_get_element (json_node_get_array (node), i))
               && good;
        ut_reader_leave (reader, before);
      }
  else if (ut_reader_holds_number (node) && !isfinite (json_node_get_double (node)))
    {
      ut_reader_fault (reader, "the number is not finite; expected a smaller one");
      good = FALSE;
    }
  return good;
}

gboolean
ut_read_fields (UtReader *reader, const UtKey *key, JsonNode *node, gpointer item)
{
  if (!JSON_NODE_HOLDS_OBJECT (node))
    return ut_reader_fault_type (reader, key, node);
  ut_source_unref (UT_FIELD (JsonObject *, item, key));
  UT_FIELD (JsonObject *, item, key) = ut_source_ref (json_node_get_object (node));
  return ut_read_unknown (reader, node);
}

/* ---- lists of figures ---- */

gboolean
ut_read_numbers (UtReader *reader, const UtKey *key, JsonNode *node, gpointer item)
{
  if (!JSON_NODE_HOLDS_ARRAY (node))
    return ut_reader_fault_type (reader, key, node);
  GArray *numbers = g_array_set_size (UT_FIELD (GArray *, item, key), 0);
  UtKey number = *key;
  number.type = UT_KEY_NUMBER;
  gboolean good = TRUE;
  for (guint i = 0; i < json_array_get_length (json_node_get_array (node)); i++)
    {
      double value;
      gsize before = ut_reader_enter_index (reader, i);
      if (ut_read_number (
              reader, &number, json_array_get_element (json_node_get_array (node), i), &value))
        g_array_append_val (numbers, value);
      else
        good = FALSE;
      ut_reader_leave (reader, before);
    }
  if (good && numbers->len < key->least)
    {
      ut_reader_fault (reader, "too short, %u figures; expected %u or more", numbers->len, key->least);
      return FALSE;
    }
  return good;
}

static gboolean
read_point (UtReader *reader, const UtKey *key, JsonNode *node, UtPoint *point)
{
  JsonArray *pair = JSON_NODE_HOLDS_ARRAY (node) ? json_node_get_array (node) : NULL;
  if (pair == NULL || json_array_get_length (pair) != 2)
    {
      if (pair == NULL)
        ut_reader_fault (reader, "wrong type, %s; expected a point [x, y]", ut_reader_noun (node));
      else
        ut_reader_fault (
            reader, "the point has %u figures; expected [x, y]", json_array_get_length (pair));
      return FALSE;
    }
  double *const xy[] = { &point->x_m, &point->y_m };
  UtKey number = *key;
  number.type = UT_KEY_NUMBER;
  gboolean good = TRUE;
  for (guint i = 0; i < 2; i++)
    {
      gsize before = ut_reader_enter_index (reader, i);
      good = ut_read_number (reader, &number, json_array_get_element (pair, i), xy[i]) && good;
      ut_reader_leave (reader, before);
    }
  return good;
}

gboolean
ut_read_points (UtReader *reader, const UtKey *key, JsonNode *node, gpointer item)
{
  if (!JSON_NODE_HOLDS_ARRAY (node))
    return ut_reader_fault_type (reader, key, node);
  GArray *points = g_array_set_size (UT_FIELD (GArray *, item, key), 0);
  gboolean good = TRUE, distinct = FALSE;
  for (guint i = 0; i < json_array_get_length (json_node_get_array (node)); i++)
    {
      UtPoint point;
      gsize before = ut_reader_enter_index (reader, i);
      if (read_point (reader, key, json_array_get_element (json_node_get_array (node), i), &point))
        {
          const UtPoint *first = points->len > 0 ? &g_array_index (points, UtPoint, 0) : &point;
          distinct = distinct || point.x_m != first->x_m || point.y_m != first->y_m;
          g_array_append_val (points, point);
        }
      else
        good = FALSE;
      ut_reader_leave (reader, before);
    }
  if (good && !distinct)
    ut_reader_fault (reader, "the wall has fewer than two distinct points; expected two or more");
  return good && distinct;
}

/* ---- measured gains ---- */

/* The name of a pair's end; a fault where there is none of that id. */
static gboolean
check_gain_end (UtReader *reader, UtListName list, const char *id)
{
  if (is_known (reader, list, id))
    return TRUE;
  g_autofree char *shown = ut_reader_quote (id);
  ut_reader_fault (
      reader, "%s refers to nothing; expected the id of %s", shown, ut_list_items[list]);
  return FALSE;
}

static gboolean
read_gains_of (
    UtReader *reader, const UtKey *key, const char *terminal, JsonNode *node, GPtrArray *gains)
{
  if (!check_gain_end (reader, UT_LIST_TERMINALS, terminal))
    return FALSE;
  if (!JSON_NODE_HOLDS_OBJECT (node))
    {
      ut_reader_fault (reader,
                       "wrong type, %s; expected an object with a gain in dB for each cell",
                       ut_reader_noun (node));
      return FALSE;
    }
  UtKey number = *key;
  number.type = UT_KEY_NUMBER;
  JsonObjectIter iter;
  const char *cell;
  JsonNode *member;
  gboolean good = TRUE;
  json_object_iter_init_ordered (&iter, json_node_get_object (node));
  while (json_object_iter_next_ordered (&iter, &cell, &member))
    {
      double gain_db;
      gsize before = ut_reader_enter_key (reader, cell);
      if (check_gain_end (reader, UT_LIST_CELLS, cell)
          && ut_read_number (reader, &number, member, &gain_db))
        {
          UtMeasuredGain *gain = ut_measured_gain_new ();
          g_free (gain->terminal);
          g_free (gain->cell);
          *gain = (UtMeasuredGain){ g_strdup (terminal), g_strdup (cell), gain_db };
          g_ptr_array_add (gains, gain);
        }
      else
        good = FALSE;
      ut_reader_leave (reader, before);
    }
  return good;
}

gboolean
ut_read_gains (UtReader *reader, const UtKey *key, JsonNode *node, gpointer item)
{
  if (!JSON_NODE_HOLDS_OBJECT (node))
    return ut_reader_fault_type (reader, key, node);
  JsonObjectIter iter;
  const char *terminal;
  JsonNode *member;
  gboolean good = TRUE;
  json_object_iter_init_ordered (&iter, json_node_get_object (node));
  while (json_object_iter_next_ordered (&iter, &terminal, &member))
    {
      gsize before = ut_reader_enter_key (reader, terminal);
      good = read_gains_of (reader, key, terminal, member, UT_FIELD (GPtrArray *, item, key))
             && good;
      ut_reader_leave (reader, before);
    }
  return good;
}
