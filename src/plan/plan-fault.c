/* What is wrong with a plan, where, and what was expected instead. */
#include "plan-reader.h"

#include <math.h>
#include <string.h>

const char *const ut_list_items[UT_N_LISTS]
    = { NULL, "a construction", "a storey", "an antenna", "a cell", "a terminal" };

void
ut_fault_free (UtFault *fault)
{
  g_free (fault->path);
  g_free (fault->message);
  g_free (fault);
}

GPtrArray *
ut_faults_new (void)
{
  return g_ptr_array_new_with_free_func ((GDestroyNotify)ut_fault_free);
}

void
ut_faults_add (GPtrArray *faults, const char *path, char *message)
{
  if (faults->len < UT_FAULTS_MOST)
    {
      UtFault *fault = g_new (UtFault, 1);
      *fault = (UtFault){ g_strdup (path), message };
      g_ptr_array_add (faults, fault);
    }
  else
    g_free (message);
}

void
ut_reader_fault (UtReader *reader, const char *format, ...)
{
  va_list arguments;
  va_start (arguments, format);
  ut_faults_add (reader->faults, reader->path->str, g_strdup_vprintf (format, arguments));
  va_end (arguments);
  reader->faulty = TRUE;
}

/* A text of the file for a message: ut_reader_quote, on one line, not endless.  Transfer full. */
char *
ut_reader_quote (const char *text)
{
  const glong most = 60;
  GString *out = g_string_new ("\"");
  glong n = 0;
  for (const char *p = text; *p != '\0' && n < most; p = g_utf8_next_char (p), n++)
    {
      gunichar c = g_utf8_get_char (p);
      if (g_unichar_iscntrl (c) || c == 0x2028 || c == 0x2029)
        g_string_append_printf (out, "\\u%04x", c);
      else
        g_string_append_unichar (out, c);
    }
  g_string_append (out, g_utf8_strlen (text, -1) > most ? "…\"" : "\"");
  return g_string_free (out, FALSE);
}

/* The path grows by a key or an index and is cut back to the length it had. */
gsize
ut_reader_enter_key (UtReader *reader, const char *key)
{
  gsize before = reader->path->len;
  gboolean plain = *key != '\0' && strpbrk (key, ".[]\"") == NULL;
  for (const char *p = key; plain && *p != '\0'; p = g_utf8_next_char (p))
    plain = g_unichar_isprint (g_utf8_get_char (p));
  if (plain)
    g_string_append_printf (reader->path, before > 0 ? ".%s" : "%s", key);
  else
    {
      g_autofree char *text = ut_reader_quote (key);
      g_string_append_printf (reader->path, "[%s]", text);
    }
  return before;
}

gsize
ut_reader_enter_index (UtReader *reader, guint index)
{
  gsize before = reader->path->len;
  g_string_append_printf (reader->path, "[%u]", index);
  return before;
}

void
ut_reader_leave (UtReader *reader, gsize before)
{
  g_string_truncate (reader->path, before);
}

const char *
ut_reader_noun (JsonNode *node)
{
  if (JSON_NODE_HOLDS_OBJECT (node))
    return "an object";
  if (JSON_NODE_HOLDS_ARRAY (node))
    return "a list";
  if (JSON_NODE_HOLDS_NULL (node))
    return "null";
  GType type = json_node_get_value_type (node);
  return type == G_TYPE_STRING ? "a text" : type == G_TYPE_BOOLEAN ? "true or false" : "a number";
}

gboolean
ut_reader_holds_number (JsonNode *node)
{
  return JSON_NODE_HOLDS_VALUE (node)
         && (json_node_get_value_type (node) == G_TYPE_INT64
             || json_node_get_value_type (node) == G_TYPE_DOUBLE);
}

gboolean
ut_reader_holds_text (JsonNode *node)
{
  return JSON_NODE_HOLDS_VALUE (node) && json_node_get_value_type (node) == G_TYPE_STRING;
}

/* ---- what a key expects, in words ---- */

static void
append_range (GString *out, const UtKey *key, double highest)
{
  if (isfinite (key->lowest) && isfinite (highest))
    g_string_append_printf (out, " from %.0f to %.0f", key->lowest, highest);
  else if (isfinite (key->lowest))
    g_string_append_printf (out, key->above ? " above %.0f" : " of at least %.0f", key->lowest);
}

static void
append_words (GString *out, const char *const *words)
{
  g_string_append (out, "one of ");
  for (guint i = 0; words[i] != NULL; i++)
    g_string_append_printf (out, i > 0 ? ", %s" : "%s", words[i]);
}

/* Transfer full. */
char *
ut_reader_expectation (const UtKey *key)
{
  GString *out = g_string_new (NULL);
  switch (key->type)
    {
    case UT_KEY_VERSION:
      g_string_append_printf (out, "the file version, %d", UT_PLAN_VERSION);
      break;
    case UT_KEY_TEXT:
      g_string_append (out, "a text");
      break;
    case UT_KEY_ID:
      g_string_append (out, "an id: a text that is not empty");
      break;
    case UT_KEY_REFERENCE:
      g_string_append_printf (out, "the id of %s", ut_list_items[key->list]);
      break;
    case UT_KEY_WORD:
    case UT_KEY_CHOICE:
      append_words (out, key->words);
      break;
    case UT_KEY_NUMBER:
      g_string_append (out, "a number");
      append_range (out, key, key->highest);
      break;
    case UT_KEY_INTEGER:
      g_string_append (out, "a whole number");
      append_range (out, key, key->highest < G_MAXINT ? key->highest : INFINITY);
      break;
    case UT_KEY_FLAG:
      g_string_append (out, "true or false");
      break;
    case UT_KEY_NUMBERS:
      g_string_append (out, "a list of numbers");
      append_range (out, key, key->highest);
      break;
    case UT_KEY_POINTS:
      g_string_append (out, "a list of two or more different points [x, y]");
      break;
    case UT_KEY_DATA:
      g_string_append (out, "a picture in base64");
      break;
    case UT_KEY_FIELDS:
    case UT_KEY_OBJECT:
    case UT_KEY_INLINE:
    case UT_KEY_GAINS:
      g_string_append (out, "an object");
      break;
    case UT_KEY_LIST:
      g_string_append (out, "a list");
      break;
    case UT_KEY_MATERIAL:
      append_words (out, key->words);
      g_string_append (out, ", or an object with relative_permittivity and conductivity_s_m");
      break;
    }
  if ((key->flags & UT_KEY_NULLABLE) != 0)
    g_string_append (out, ", or null");
  return g_string_free (out, FALSE);
}

gboolean
ut_reader_fault_type (UtReader *reader, const UtKey *key, JsonNode *node)
{
  g_autofree char *expected = ut_reader_expectation (key);
  ut_reader_fault (reader, "wrong type, %s; expected %s", ut_reader_noun (node), expected);
  return FALSE;
}
