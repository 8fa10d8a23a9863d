#include "json-text.h"

#include <math.h>
#include <string.h>

#include "plan-write.h"

static void
new_line (GString *out, guint depth)
{
  g_string_append_printf (out, "\n%*s", (int)(2 * depth), "");
}

void
ut_json_append_string (GString *out, const char *text)
{
  static const char from[] = "\"\\\b\f\n\r\t", to[] = "\"\\bfnrt";

  g_string_append_c (out, '"');
  for (const char *p = text; *p != '\0'; p++)
    {
      const char *known = strchr (from, *p);

      if (known != NULL)
        {
          g_string_append_c (out, '\\');
          g_string_append_c (out, to[known - from]);
        }
      else if ((guchar)*p < 0x20)
        g_string_append_printf (out, "\\u%04x", (guint)(guchar)*p);
      else
        g_string_append_c (out, *p);
    }
  g_string_append_c (out, '"');
}

static void
append_array (GString *out, JsonArray *array, guint depth)
{
  guint n = json_array_get_length (array);
  gboolean scalars = TRUE;

  for (guint i = 0; i < n && scalars; i++)
    scalars = JSON_NODE_HOLDS_VALUE (json_array_get_element (array, i))
              || JSON_NODE_HOLDS_NULL (json_array_get_element (array, i));
  g_string_append_c (out, '[');
  for (guint i = 0; i < n; i++)
    {
      if (scalars)
        g_string_append (out, i > 0 ? ", " : "");
      else
        {
          g_string_append (out, i > 0 ? "," : "");
          new_line (out, depth + 1);
        }
      ut_json_append (out, json_array_get_element (array, i), depth + 1);
    }
  if (!scalars)
    new_line (out, depth);
  g_string_append_c (out, ']');
}

void
ut_json_append_object (GString *out, JsonObject *object, guint depth)
{
  JsonObjectIter iter;
  const char *name;
  JsonNode *member;
  gboolean filled = FALSE;

  g_string_append_c (out, '{');
  json_object_iter_init_ordered (&iter, object);
  while (json_object_iter_next_ordered (&iter, &name, &member))
    {
      g_string_append (out, filled ? "," : "");
      filled = TRUE;
      new_line (out, depth + 1);
      ut_json_append_string (out, name);
      g_string_append (out, ": ");
      ut_json_append (out, member, depth + 1);
    }
  if (filled)
    new_line (out, depth);
  g_string_append_c (out, '}');
}

void
ut_json_append (GString *out, JsonNode *node, guint depth)
{
  char buffer[G_ASCII_DTOSTR_BUF_SIZE];

  if (JSON_NODE_HOLDS_OBJECT (node))
    ut_json_append_object (out, json_node_get_object (node), depth);
  else if (JSON_NODE_HOLDS_ARRAY (node))
    append_array (out, json_node_get_array (node), depth);
  else if (JSON_NODE_HOLDS_NULL (node))
    g_string_append (out, "null");
  else if (json_node_get_value_type (node) == G_TYPE_STRING)
    ut_json_append_string (out, json_node_get_string (node));
  else if (json_node_get_value_type (node) == G_TYPE_BOOLEAN)
    g_string_append (out, json_node_get_boolean (node) ? "true" : "false");
  else if (json_node_get_value_type (node) == G_TYPE_INT64)
    g_string_append_printf (out, "%" G_GINT64_FORMAT, json_node_get_int (node));
  else if (isfinite (json_node_get_double (node)))
    g_string_append (out, ut_number_text (json_node_get_double (node), buffer));
  else
    g_string_append (out, "null"); /* JSON has no other word for it */
}

char *
ut_json_text (JsonNode *root)
{
  GString *out = g_string_new (NULL);

  ut_json_append (out, root, 0);
  g_string_append_c (out, '\n');
  return g_string_free (out, FALSE);
}
