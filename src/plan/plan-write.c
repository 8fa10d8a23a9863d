#include "plan-write.h"

#include "json-text.h"
#include "plan-schema.h"

#include <math.h>

/* Text being made, and how deep it is. */
typedef struct
{
  GString *out;
  guint depth;
  gboolean filled; /* the innermost object has a member already */
} Writer;

/* ---- JSON ---- */

static void
new_line (Writer *writer)
{
  g_string_append_printf (writer->out, "\n%*s", (int)(2 * writer->depth), "");
}

static void
write_text (Writer *writer, const char *text)
{
  ut_json_append_string (writer->out, text != NULL ? text : "");
}

static void
write_number (Writer *writer, double value)
{
  char buffer[G_ASCII_DTOSTR_BUF_SIZE];
  g_string_append (writer->out, isnan (value) ? "null" : ut_number_text (value, buffer));
}

/* Members come between begin_object () and end_object (), each begun with begin_member (). */
static gboolean
begin_object (Writer *writer)
{
  gboolean outer = writer->filled;
  g_string_append_c (writer->out, '{');
  writer->depth++;
  writer->filled = FALSE;
  return outer;
}

static void
begin_member (Writer *writer, const char *name)
{
  if (writer->filled)
    g_string_append_c (writer->out, ',');
  writer->filled = TRUE;
  new_line (writer);
  write_text (writer, name);
  g_string_append (writer->out, ": ");
}

static void
end_object (Writer *writer, gboolean outer)
{
  writer->depth--;
  if (writer->filled)
    new_line (writer);
  g_string_append_c (writer->out, '}');
  writer->filled = outer;
}

/* A list of objects or lists has one a line: next_row () before each, end_rows () after the last.
 */
static void
next_row (Writer *writer, guint index)
{
  g_string_append (writer->out, index == 0 ? "[" : ",");
  writer->depth += index == 0;
  new_line (writer);
}

static void
end_rows (Writer *writer, guint n)
{
  if (n == 0)
    {
      g_string_append (writer->out, "[]");
      return;
    }
  writer->depth--;
  new_line (writer);
  g_string_append_c (writer->out, ']');
}

/* ---- items by their tables ---- */

static void write_item (Writer *writer, const UtKind *kind, gconstpointer item);

static void
write_numbers (Writer *writer, const GArray *numbers)
{
  g_string_append_c (writer->out, '[');
  for (guint i = 0; i < numbers->len; i++)
    {
      g_string_append (writer->out, i > 0 ? ", " : "");
      write_number (writer, g_array_index (numbers, double, i));
    }
  g_string_append_c (writer->out, ']');
}

static void
write_points (Writer *writer, const GArray *points)
{
  for (guint i = 0; i < points->len; i++)
    {
      const UtPoint *point = &g_array_index (points, UtPoint, i);
      next_row (writer, i);
      g_string_append_c (writer->out, '[');
      write_number (writer, point->x_m);
      g_string_append (writer->out, ", ");
      write_number (writer, point->y_m);
      g_string_append_c (writer->out, ']');
    }
  end_rows (writer, points->len);
}

static void
write_list (Writer *writer, const UtKind *kind, const GPtrArray *list)
{
  for (guint i = 0; i < list->len; i++)
    {
      next_row (writer, i);
      write_item (writer, kind, list->pdata[i]);
    }
  end_rows (writer, list->len);
}

/* One object a terminal, where its first gain stands; the gains of a pair by cell. */
static void
write_gains (Writer *writer, const GPtrArray *gains)
{
  g_autoptr (GHashTable) done = g_hash_table_new (g_str_hash, g_str_equal);
  gboolean outer = begin_object (writer);
  for (guint i = 0; i < gains->len; i++)
    {
      const UtMeasuredGain *first = gains->pdata[i];
      if (!g_hash_table_add (done, first->terminal))
        continue;
      begin_member (writer, first->terminal);
      gboolean outer_member = begin_object (writer);
      for (guint j = i; j < gains->len; j++)
        {
          const UtMeasuredGain *gain = gains->pdata[j];
          if (!g_str_equal (gain->terminal, first->terminal))
            continue;
          begin_member (writer, gain->cell);
          write_number (writer, gain->gain_db);
        }
      end_object (writer, outer_member);
    }
  end_object (writer, outer);
}

static void
write_data (Writer *writer, GBytes *data)
{
  gsize length;
  const guchar *bytes = g_bytes_get_data (data, &length);
  g_autofree char *text = g_base64_encode (bytes, length);
  write_text (writer, text);
}

static void
write_text_or_null (Writer *writer, const char *text)
{
  if (text != NULL)
    write_text (writer, text);
  else
    g_string_append (writer->out, "null");
}

static void
write_value (Writer *writer, const UtKey *key, gconstpointer item)
{
  switch (key->type)
    {
    case UT_KEY_VERSION:
      write_number (writer, UT_PLAN_VERSION);
      break;
    case UT_KEY_TEXT:
    case UT_KEY_ID:
      write_text (writer, UT_FIELD (char *, item, key));
      break;
    case UT_KEY_WORD:
    case UT_KEY_REFERENCE:
      write_text_or_null (writer, UT_FIELD (char *, item, key));
      break;
    case UT_KEY_NUMBER:
      write_number (writer, UT_FIELD (double, item, key));
      break;
    case UT_KEY_INTEGER:
      write_number (writer, UT_FIELD (int, item, key) == 0 ? NAN : UT_FIELD (int, item, key));
      break;
    case UT_KEY_FLAG:
      g_string_append (writer->out, UT_FIELD (gboolean, item, key) ? "true" : "false");
      break;
    case UT_KEY_CHOICE:
      write_text (writer, key->words[UT_FIELD (guint, item, key)]);
      break;
    case UT_KEY_NUMBERS:
      write_numbers (writer, UT_FIELD (GArray *, item, key));
      break;
    case UT_KEY_POINTS:
      write_points (writer, UT_FIELD (GArray *, item, key));
      break;
    case UT_KEY_DATA:
      write_data (writer, UT_FIELD (GBytes *, item, key));
      break;
    case UT_KEY_FIELDS:
      ut_json_append_object (writer->out, UT_FIELD (JsonObject *, item, key), writer->depth);
      break;
    case UT_KEY_OBJECT:
      if (UT_FIELD (gpointer, item, key) != NULL)
        write_item (writer, key->kind, UT_FIELD (gpointer, item, key));
      else
        g_string_append (writer->out, "null");
      break;
    case UT_KEY_INLINE:
      write_item (writer, key->kind, item);
      break;
    case UT_KEY_LIST:
      write_list (writer, key->kind, UT_FIELD (GPtrArray *, item, key));
      break;
    case UT_KEY_MATERIAL:
      if (UT_FIELD (char *, item, key) != NULL)
        write_text (writer, UT_FIELD (char *, item, key));
      else
        write_item (writer, key->kind, item);
      break;
    case UT_KEY_GAINS:
      write_gains (writer, UT_FIELD (GPtrArray *, item, key));
      break;
    }
}

static gboolean is_default (const UtKind *kind, const UtKey *key, gconstpointer item);

/* Whether a whole item says nothing that its absence would not say. */
static gboolean
is_default_item (const UtKind *kind, gconstpointer item)
{
  if (kind->has_source && UT_SOURCE (kind, item) != NULL)
    return FALSE;
  for (guint i = 0; i < kind->n_keys; i++)
    if (!is_default (kind, &kind->keys[i], item))
      return FALSE;
  return TRUE;
}

static gboolean
is_default (const UtKind *kind, const UtKey *key, gconstpointer item)
{
  double number;
  switch (key->type)
    {
    case UT_KEY_TEXT:
      if ((key->flags & UT_KEY_NAME) != 0)
        return UT_FIELD (char *, item, key) == NULL
               || g_strcmp0 (UT_FIELD (char *, item, key),
                             UT_FIELD (char *, item, ut_kind_find (kind, "id")))
                      == 0;
      G_GNUC_FALLTHROUGH;
    case UT_KEY_REFERENCE:
    case UT_KEY_WORD:
      return g_strcmp0 (UT_FIELD (char *, item, key), key->text) == 0;
    case UT_KEY_NUMBER:
      number = UT_FIELD (double, item, key);
      return number == key->value || (isnan (number) && isnan (key->value));
    case UT_KEY_INTEGER:
    case UT_KEY_FLAG:
    case UT_KEY_CHOICE:
      return UT_FIELD (int, item, key) == (int)key->value;
    case UT_KEY_NUMBERS:
    case UT_KEY_POINTS:
      return UT_FIELD (GArray *, item, key)->len == 0;
    case UT_KEY_LIST:
    case UT_KEY_GAINS:
      return UT_FIELD (GPtrArray *, item, key)->len == 0;
    case UT_KEY_FIELDS:
      return UT_FIELD (JsonObject *, item, key) == NULL;
    case UT_KEY_OBJECT:
      return UT_FIELD (gpointer, item, key) == NULL
             || is_default_item (key->kind, UT_FIELD (gpointer, item, key));
    default: /* always there */
      return FALSE;
    }
}

/* A value that was in the file and cannot be written any more: the loss of a construction that now
 * has layers, fields that were removed. */
static gboolean
is_gone (const UtKey *key, gconstpointer item)
{
  if (key->type == UT_KEY_FIELDS)
    return UT_FIELD (JsonObject *, item, key) == NULL;
  return key->type == UT_KEY_NUMBER && (key->flags & UT_KEY_NULLABLE) == 0
         && isnan (UT_FIELD (double, item, key));
}

/* A key the file did not have.  An item made by the program shows all of its keys; one that was
 * read keeps silent about defaults. */
static gboolean
is_news (const UtKind *kind, const UtKey *key, gconstpointer item, gboolean was_read)
{
  if (!ut_kind_has (kind, key, item) || is_gone (key, item))
    return FALSE;
  if (was_read && (key->flags & UT_KEY_REQUIRED) != 0)
    return TRUE; /* of a law or pattern chosen since */
  if (was_read || (key->flags & UT_KEY_SPARSE) != 0)
    return !is_default (kind, key, item);
  return TRUE;
}

static void
write_key (Writer *writer, const UtKind *kind, const UtKey *key, gconstpointer item)
{
  begin_member (writer, key->name);
  if ((key->flags & UT_KEY_NAME) != 0 && UT_FIELD (char *, item, key) == NULL)
    write_text (writer, UT_FIELD (char *, item, ut_kind_find (kind, "id")));
  else
    write_value (writer, key, item);
}

/* The keys that were read in their order, understood or not, then those that are new. */
static void
write_item (Writer *writer, const UtKind *kind, gconstpointer item)
{
  JsonObject *source = UT_SOURCE (kind, item);
  gboolean outer = begin_object (writer);
  if (source != NULL)
    {
      JsonObjectIter iter;
      const char *name;
      JsonNode *node;
      json_object_iter_init_ordered (&iter, source);
      while (json_object_iter_next_ordered (&iter, &name, &node))
        {
          const UtKey *key = ut_kind_find (kind, name);
          if (key == NULL)
            {
              begin_member (writer, name);
              ut_json_append (writer->out, node, writer->depth);
            }
          else if (!is_gone (key, item))
            write_key (writer, kind, key, item);
        }
    }
  for (guint i = 0; i < kind->n_keys; i++)
    {
      const UtKey *key = &kind->keys[i];
      if (source != NULL && json_object_has_member (source, key->name))
        continue;
      if (is_news (kind, key, item, source != NULL))
        write_key (writer, kind, key, item);
    }
  end_object (writer, outer);
}

char *
ut_plan_write (const UtPlan *plan, gsize *length)
{
  Writer writer = { .out = g_string_new (NULL) };
  write_item (&writer, &ut_kind_plan, plan);
  g_string_append_c (writer.out, '\n');
  if (length != NULL)
    *length = writer.out->len;
  return g_string_free (writer.out, FALSE);
}

gboolean
ut_plan_write_file (
    const UtPlan *plan, GFile *file, const char *etag, char **new_etag, GError **error)
{
  gsize length;
  g_autofree char *text = ut_plan_write (plan, &length);
  return g_file_replace_contents (
      file, text, length, etag, FALSE, G_FILE_CREATE_NONE, new_etag, NULL, error);
}

char *
ut_plan_fingerprint (const UtPlan *plan)
{
  gsize length;
  g_autofree char *text = ut_plan_write (plan, &length);
  char *digest = g_compute_checksum_for_data (G_CHECKSUM_SHA256, (const guchar *)text, length);
  digest[12] = '\0';
  return digest;
}
