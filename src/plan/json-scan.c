/* One pass makes the tree and checks the text: json-glib's own parser is lax (it takes comments,
 * text after the value and numbers such as .5) and overflows its stack on deep nesting, so only its
 * tree types are used. */
#include "json-scan.h"

#include <string.h>

#define INTEGER_MOST G_GINT64_CONSTANT (9007199254740992)

/* An array or object being filled. */
typedef struct
{
  JsonNode *node; /* owned by the frame below it, or by the scanner */
  char *key;      /* of the member whose value comes next */
} Frame;

typedef struct
{
  const char *start, *at;
  const char *limit; /* end of what is good UTF-8 */
  const char *end;
  UtJsonFault *fault;
  JsonNode *root;
  Frame frames[UT_JSON_NESTING_MOST];
  guint depth;
} Scanner;

/* Refuses the text at `where`.  Always FALSE, so that scanners can return it. */
static gboolean
refuse_at (Scanner *scanner, const char *where, char *message)
{
  guint line = 1, column = 1;
  for (const char *p = scanner->start; p < where; p++)
    if (*p == '\n')
      {
        line++;
        column = 1;
      }
    else if (((guchar)*p & 0xc0) != 0x80)
      column++;
  *scanner->fault = (UtJsonFault){ line, column, message };
  return FALSE;
}

/* Refuses the character the scanner is at, or the end of the text. */
static gboolean
refuse (Scanner *scanner, const char *expected)
{
  const char *at = scanner->at;
  g_autofree char *found = NULL;
  if (at == scanner->end)
    found = g_strdup (scanner->start == scanner->end ? "the text is empty" : "the text ends");
  else if (at == scanner->limit && *at != '\0')
    found = g_strdup ("this is not UTF-8");
  else if ((guchar)*at < 0x20 || *at == 0x7f)
    found = g_strdup_printf ("unexpected control character U+%04X", (guint)(guchar)*at);
  else if (g_str_has_prefix (at, "\xef\xbb\xbf"))
    found = g_strdup ("unexpected byte order mark");
  else
    found = g_strdup_printf ("unexpected \"%.*s\"", (int)(g_utf8_next_char (at) - at), at);
  return refuse_at (scanner, at, g_strdup_printf ("%s; expected %s", found, expected));
}

static int
peek (const Scanner *scanner)
{
  return scanner->at < scanner->limit ? (guchar)*scanner->at : -1;
}

static gboolean
accept (Scanner *scanner, char c)
{
  if (peek (scanner) != c)
    return FALSE;
  scanner->at++;
  return TRUE;
}

static void
skip_space (Scanner *scanner)
{
  while (scanner->at < scanner->limit && strchr (" \t\n\r", *scanner->at) != NULL
         && *scanner->at != '\0')
    scanner->at++;
}

static gboolean
scan_hex4 (Scanner *scanner, guint *unit)
{
  *unit = 0;
  for (int i = 0; i < 4; i++, scanner->at++)
    {
      int c = peek (scanner);
      if (c < 0 || !g_ascii_isxdigit ((char)c))
        return refuse (scanner, "four hexadecimal digits");
      *unit = *unit * 16 + (guint)g_ascii_xdigit_value ((char)c);
    }
  return TRUE;
}

/* The part of an escape after \u; `escape` is where its backslash stands. */
static gboolean
scan_unicode_escape (Scanner *scanner, const char *escape, GString *text)
{
  guint unit;
  if (!scan_hex4 (scanner, &unit))
    return FALSE;
  if (unit == 0)
    return refuse_at (scanner, escape, g_strdup ("the character U+0000; expected another"));
  if (unit >= 0xdc00 && unit <= 0xdfff)
    return refuse_at (
        scanner,
        escape,
        g_strdup ("the second half of a surrogate pair; expected its first half before it"));
  if (unit >= 0xd800 && unit <= 0xdbff)
    {
      const char *second = scanner->at;
      guint low = 0;
      if (!accept (scanner, '\\') || !accept (scanner, 'u'))
        return refuse (scanner, "the second half of a surrogate pair");
      if (!scan_hex4 (scanner, &low))
        return FALSE;
      if (low < 0xdc00 || low > 0xdfff)
        return refuse_at (
            scanner,
            second,
            g_strdup ("the first half of a surrogate pair stands alone; expected its second half"));
      unit = 0x10000 + ((unit - 0xd800) << 10) + (low - 0xdc00);
    }
  g_string_append_unichar (text, unit);
  return TRUE;
}

static gboolean
scan_escape (Scanner *scanner, GString *text)
{
  static const char from[] = "\"\\/bfnrt", to[] = "\"\\/\b\f\n\r\t";
  const char *escape = scanner->at++;
  if (accept (scanner, 'u'))
    return scan_unicode_escape (scanner, escape, text);
  int c = peek (scanner);
  const char *known = c > 0 ? strchr (from, c) : NULL;
  if (known == NULL)
    return refuse (scanner, "one of \" \\ / b f n r t u after a backslash");
  g_string_append_c (text, to[known - from]);
  scanner->at++;
  return TRUE;
}

/* The string the scanner stands before, decoded: transfer full, NULL when refused. */
static char *
scan_string (Scanner *scanner)
{
  g_autoptr (GString) text = g_string_new (NULL);
  scanner->at++;
  while (!accept (scanner, '"'))
    {
      const char *run = scanner->at;
      while (peek (scanner) >= 0x20 && *scanner->at != '"' && *scanner->at != '\\')
        scanner->at++;
      g_string_append_len (text, run, scanner->at - run);
      if (peek (scanner) == '\\')
        {
          if (!scan_escape (scanner, text))
            return NULL;
        }
      else if (peek (scanner) != '"')
        {
          refuse (scanner, "the string to go on or its closing quote");
          return NULL;
        }
    }
  return g_string_free (g_steal_pointer (&text), FALSE);
}

static gboolean
scan_digits (Scanner *scanner)
{
  if (!g_ascii_isdigit ((char)peek (scanner)))
    return refuse (scanner, "a digit");
  while (g_ascii_isdigit ((char)peek (scanner)))
    scanner->at++;
  return TRUE;
}

static JsonNode *
scan_number (Scanner *scanner)
{
  const char *start = scanner->at;
  gboolean whole = TRUE;
  accept (scanner, '-');
  if (!accept (scanner, '0') && !scan_digits (scanner))
    return NULL;
  if (accept (scanner, '.'))
    {
      whole = FALSE;
      if (!scan_digits (scanner))
        return NULL;
    }
  if (accept (scanner, 'e') || accept (scanner, 'E'))
    {
      whole = FALSE;
      if (!accept (scanner, '+'))
        accept (scanner, '-');
      if (!scan_digits (scanner))
        return NULL;
    }
  g_autofree char *digits = g_strndup (start, (gsize)(scanner->at - start));
  if (!whole)
    return json_node_init_double (json_node_alloc (), g_ascii_strtod (digits, NULL));
  /* Saturates beyond 64 bits. */
  gint64 value = g_ascii_strtoll (digits, NULL, 10);
  if (value > INTEGER_MOST || value < -INTEGER_MOST)
    {
      refuse_at (
          scanner,
          start,
          g_strdup (
              "an integer beyond 9007199254740992; expected a smaller one or a decimal fraction"));
      return NULL;
    }
  return json_node_init_int (json_node_alloc (), value);
}

static JsonNode *
scan_word (Scanner *scanner)
{
  static const char *const words[] = { "true", "false", "null" };
  guint which = peek (scanner) == 't' ? 0 : peek (scanner) == 'f' ? 1 : 2;
  for (const char *c = words[which]; *c != '\0'; c++)
    if (!accept (scanner, *c))
      {
        g_autofree char *expected = g_strdup_printf ("the word %s", words[which]);
        refuse (scanner, expected);
        return NULL;
      }
  return which == 2 ? json_node_init_null (json_node_alloc ())
                    : json_node_init_boolean (json_node_alloc (), which == 0);
}

static JsonNode *
scan_opening (Scanner *scanner)
{
  if (scanner->depth == UT_JSON_NESTING_MOST)
    {
      refuse_at (
          scanner,
          scanner->at,
          g_strdup_printf ("nested deeper than %d; expected fewer levels", UT_JSON_NESTING_MOST));
      return NULL;
    }
  JsonNode *node = json_node_alloc ();
  if (*scanner->at++ == '[')
    {
      g_autoptr (JsonArray) array = json_array_new ();
      return json_node_init_array (node, array);
    }
  g_autoptr (JsonObject) object = json_object_new ();
  return json_node_init_object (node, object);
}

/* What begins at the scanner: a whole scalar, or an array or object that is still empty.  NULL when
 * refused. */
static JsonNode *
scan_value (Scanner *scanner, const char *expected)
{
  int c = peek (scanner);
  if (c == '{' || c == '[')
    return scan_opening (scanner);
  if (c == '-' || g_ascii_isdigit ((char)c))
    return scan_number (scanner);
  if (c == 't' || c == 'f' || c == 'n')
    return scan_word (scanner);
  if (c != '"')
    {
      refuse (scanner, expected);
      return NULL;
    }
  char *text = scan_string (scanner);
  if (text == NULL)
    return NULL;
  JsonNode *node = json_node_init_string (json_node_alloc (), text);
  g_free (text);
  return node;
}

/* Puts a value where it belongs, and begins to fill it if it is an array or object. */
static void
place (Scanner *scanner, JsonNode *node)
{
  if (scanner->depth == 0)
    scanner->root = node;
  else
    {
      Frame *frame = &scanner->frames[scanner->depth - 1];
      if (JSON_NODE_HOLDS_ARRAY (frame->node))
        json_array_add_element (json_node_get_array (frame->node), node);
      else
        json_object_set_member (json_node_get_object (frame->node), frame->key, node);
      g_clear_pointer (&frame->key, g_free);
    }
  if (JSON_NODE_HOLDS_ARRAY (node) || JSON_NODE_HOLDS_OBJECT (node))
    scanner->frames[scanner->depth++] = (Frame){ .node = node };
}

/* The key of the next member and its colon. */
static gboolean
scan_key (Scanner *scanner, Frame *frame, const char *expected)
{
  const char *start = scanner->at;
  if (peek (scanner) != '"')
    return refuse (scanner, expected);
  frame->key = scan_string (scanner);
  if (frame->key == NULL)
    return FALSE;
  if (json_object_has_member (json_node_get_object (frame->node), frame->key))
    return refuse_at (
        scanner, start, g_strdup ("this key stands twice in its object; expected it once"));
  skip_space (scanner);
  if (!accept (scanner, ':'))
    return refuse (scanner, "\":\" after a key");
  skip_space (scanner);
  return TRUE;
}

/* Goes on inside the innermost array or object: to its end or through its next value. */
static gboolean
scan_on (Scanner *scanner)
{
  Frame *frame = &scanner->frames[scanner->depth - 1];
  gboolean array = JSON_NODE_HOLDS_ARRAY (frame->node);
  guint filled = array ? json_array_get_length (json_node_get_array (frame->node))
                       : json_object_get_size (json_node_get_object (frame->node));

  skip_space (scanner);
  if (accept (scanner, array ? ']' : '}'))
    {
      scanner->depth--;
      return TRUE;
    }
  if (filled > 0)
    {
      if (!accept (scanner, ','))
        return refuse (scanner, array ? "\",\" or \"]\"" : "\",\" or \"}\"");
      skip_space (scanner);
    }
  if (!array
      && !scan_key (scanner,
                    frame,
                    filled > 0 ? "a key in double quotes" : "a key in double quotes or \"}\""))
    return FALSE;
  JsonNode *node = scan_value (scanner, array && filled == 0 ? "a value or \"]\"" : "a value");
  if (node == NULL)
    return FALSE;
  place (scanner, node);
  return TRUE;
}

static gboolean
scan_text (Scanner *scanner)
{
  skip_space (scanner);
  JsonNode *node = scan_value (scanner, "a value");
  if (node == NULL)
    return FALSE;
  place (scanner, node);
  while (scanner->depth > 0)
    if (!scan_on (scanner))
      return FALSE;
  skip_space (scanner);
  return scanner->at == scanner->end || refuse (scanner, "nothing after the value");
}

JsonNode *
ut_json_scan (const char *text, gsize length, UtJsonFault *fault)
{
  Scanner scanner = { .start = text, .at = text, .end = text + length, .fault = fault };
  g_utf8_validate_len (text, length, &scanner.limit);
  if (scan_text (&scanner))
    return scanner.root;

  for (guint i = 0; i < scanner.depth; i++)
    g_free (scanner.frames[i].key);
  if (scanner.root != NULL)
    json_node_unref (scanner.root);
  return NULL;
}
