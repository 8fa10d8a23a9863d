/* The scanner against the grammar of RFC 8259: what it takes, and the exact place of what it does
 * not. */
#include <math.h>
#include <string.h>

#include "json-scan.h"

static const char *const good_texts[] = {
  "0",
  "-0",
  "1.5e+3",
  "-1E-2",
  "123456789",
  "9007199254740992",
  "-9007199254740992",
  "90071992547409930.0",
  "true",
  "false",
  "null",
  " \t\r\n[ ] \n",
  "{}",
  "[1, \"a\", null, true, {\"b\": []}]",
  "\"\\\"\\\\\\/\\b\\f\\n\\r\\t\\u00e9\"",
  "\"\\ud83d\\ude00\"",
  "\"\x7f\"",
  "\"\xc3\xa9 \xf0\x9f\x98\x80\"",
  "{\"\": 1, \" \": 2}",
  "{\"a\": {\"a\": 1}, \"b\": {\"a\": 1}}",
};

typedef struct
{
  const char *text;
  guint line, column;
  const char *word; /* of the message */
} Bad;

static const Bad bad_texts[] = {
  { "{\n  \"undertone\": 1,\n  oops\n}", 3, 3, "expected a key" },
  { "", 1, 1, "empty" },
  { " \n ", 2, 2, "the text ends" },
  { "\xef\xbb\xbf{}", 1, 1, "byte order mark" },
  { "{} x", 1, 4, "nothing after" },
  { "{}\n{}", 2, 1, "nothing after" },
  { "[1,]", 1, 4, "a value" },
  { "[,1]", 1, 2, "a value" },
  { "[1 2]", 1, 4, "\",\" or \"]\"" },
  { "[1}", 1, 3, "\",\" or \"]\"" },
  { "{\"a\":1,}", 1, 8, "a key" },
  { "{\"a\" 1}", 1, 6, "\":\"" },
  { "{\"a\":}", 1, 6, "a value" },
  { "{a:1}", 1, 2, "a key" },
  { "{'a':1}", 1, 2, "a key" },
  { "{1:1}", 1, 2, "a key" },
  { "{\"a\":1", 1, 7, "the text ends" },
  { "[", 1, 2, "the text ends" },
  { "]", 1, 1, "a value" },
  { "// c\n1", 1, 1, "a value" },
  { "[1 /* c */]", 1, 4, "\",\"" },
  { ".5", 1, 1, "a value" },
  { "+1", 1, 1, "a value" },
  { "-", 1, 2, "a digit" },
  { "-.5", 1, 2, "a digit" },
  { "01", 1, 2, "nothing after" },
  { "0x10", 1, 2, "nothing after" },
  { "1.", 1, 3, "a digit" },
  { "1.e5", 1, 3, "a digit" },
  { "[1e]", 1, 4, "a digit" },
  { "1e+", 1, 4, "a digit" },
  { "NaN", 1, 1, "a value" },
  { "nan", 1, 2, "the word null" },
  { "Infinity", 1, 1, "a value" },
  { "tru", 1, 4, "the word true" },
  { "[nul]", 1, 5, "the word null" },
  { "nulll", 1, 5, "nothing after" },
  { "True", 1, 1, "a value" },
  { "9007199254740993", 1, 1, "an integer beyond" },
  { "[0, -9223372036854775808000]", 1, 5, "an integer beyond" },
  { "\"abc", 1, 5, "the text ends" },
  { "\"a\nb\"", 1, 3, "control character U+000A" },
  { "\"a\tb\"", 1, 3, "control character U+0009" },
  { "\"\\x41\"", 1, 3, "after a backslash" },
  { "\"\\u12g4\"", 1, 6, "hexadecimal" },
  { "\"\\u0000\"", 1, 2, "U+0000" },
  { "\"\\ud800\"", 1, 8, "second half" },
  { "\"\\ud800\\n\"", 1, 9, "second half" },
  { "\"\\ud800\\u0041\"", 1, 8, "stands alone" },
  { "\"a\\udc00\"", 1, 3, "first half" },
  { "\"\xc3\xa9\xc3\xa9\x80\"", 1, 4, "not UTF-8" },
  { "\"\xc0\xaf\"", 1, 2, "not UTF-8" },
  { "\"\xed\xa0\x80\"", 1, 2, "not UTF-8" },
  { "\"\xf4\x90\x80\x80\"", 1, 2, "not UTF-8" },
  { "\"\xc3", 1, 2, "not UTF-8" },
  { "[oops, \"\xff\"]", 1, 2, "a value" }, /* the first fault, not the coding behind it */
  { "{\"a\": 1, \"b\": 2, \"a\": 3}", 1, 18, "twice" },
  { "{\"a\": 1,\n \"\\u0061\": 3}", 2, 2, "twice" },
  { "[\"\xc3\xa9\xf0\x9f\x98\x80\", x]", 1, 8, "a value" }, /* characters, not bytes */
  { "\v1", 1, 1, "control character U+000B" },
};

static void
test_good (void)
{
  for (guint i = 0; i < G_N_ELEMENTS (good_texts); i++)
    {
      UtJsonFault fault = { 0 };
      g_autofree char *shown = g_strescape (good_texts[i], NULL);
      g_test_message ("%s", shown);
      g_autoptr (JsonNode) root = ut_json_scan (good_texts[i], strlen (good_texts[i]), &fault);
      g_assert_nonnull (root);
    }
}

static void
test_bad (void)
{
  for (guint i = 0; i < G_N_ELEMENTS (bad_texts); i++)
    {
      const Bad *bad = &bad_texts[i];
      UtJsonFault fault = { 0 };
      /* Exactly as many bytes as there are, so that a sanitizer sees a step beyond. */
      g_autofree char *bytes = g_memdup2 (bad->text, MAX (strlen (bad->text), 1));
      g_assert_null (ut_json_scan (bytes, strlen (bad->text), &fault));
      g_autofree char *shown = g_strescape (bad->text, NULL);
      g_test_message ("%s: line %u, column %u: %s", shown, fault.line, fault.column, fault.message);
      g_assert_cmpuint (fault.line, ==, bad->line);
      g_assert_cmpuint (fault.column, ==, bad->column);
      g_assert_nonnull (strstr (fault.message, bad->word));
      g_assert_nonnull (strstr (fault.message, "; expected "));
      g_assert_true (g_utf8_validate (fault.message, -1, NULL));
      g_free (fault.message);
    }
}

static void
test_zero_byte (void)
{
  UtJsonFault fault = { 0 };
  g_assert_null (ut_json_scan ("[1,\0002]", 6, &fault));
  g_assert_cmpuint (fault.column, ==, 4);
  g_assert_nonnull (strstr (fault.message, "U+0000"));
  g_free (fault.message);
}

static void
test_values (void)
{
  UtJsonFault fault;
  const char text[] = "{\"z\": -0, \"a\": \"\\ud83d\\ude00\\u00e9\\/\", \"m\": [1e999, -1e999, "
                      "1.0, 0.1, 1e-400]}";
  g_autoptr (JsonNode) root = ut_json_scan (text, strlen (text), &fault);
  g_assert_nonnull (root);
  JsonObject *object = json_node_get_object (root);
  g_autoptr (GList) keys = json_object_get_members (object);
  g_assert_cmpstr (keys->data, ==, "z");
  g_assert_cmpstr (keys->next->data, ==, "a");
  g_assert_cmpstr (keys->next->next->data, ==, "m");
  g_assert_cmpint (json_object_get_int_member (object, "z"), ==, 0);
  g_assert_cmpstr (json_object_get_string_member (object, "a"), ==, "\xf0\x9f\x98\x80\xc3\xa9/");
  JsonArray *numbers = json_object_get_array_member (object, "m");
  g_assert_true (json_array_get_double_element (numbers, 0) == INFINITY);
  g_assert_true (json_array_get_double_element (numbers, 1) == -INFINITY);
  g_assert_true (json_node_get_value_type (json_array_get_element (numbers, 2)) == G_TYPE_DOUBLE);
  g_assert_true (json_array_get_double_element (numbers, 3) == 0.1);
  g_assert_true (json_array_get_double_element (numbers, 4) == 0);
}

static char *
nested (guint depth, const char *open, const char *middle, const char *close)
{
  GString *text = g_string_new (NULL);
  for (guint i = 0; i < depth; i++)
    g_string_append (text, open);
  g_string_append (text, middle);
  for (guint i = 0; i < depth; i++)
    g_string_append (text, close);
  return g_string_free (text, FALSE);
}

static void
test_nesting (void)
{
  UtJsonFault fault;
  g_autofree char *deep = nested (64, "[", "1", "]");
  g_autoptr (JsonNode) root = ut_json_scan (deep, strlen (deep), &fault);
  g_assert_nonnull (root);

  g_autofree char *deeper = nested (65, "[", "1", "]");
  g_assert_null (ut_json_scan (deeper, strlen (deeper), &fault));
  g_assert_cmpuint (fault.column, ==, 65);
  g_assert_nonnull (strstr (fault.message, "nested deeper than 64"));
  g_free (fault.message);

  g_autofree char *objects = nested (65, "{\"a\":", "1", "}");
  g_assert_null (ut_json_scan (objects, strlen (objects), &fault));
  g_assert_cmpuint (fault.column, ==, 64 * 5 + 1);
  g_free (fault.message);

  g_autofree char *deepest = nested (100000, "[", "", "]");
  g_assert_null (ut_json_scan (deepest, strlen (deepest), &fault));
  g_assert_cmpuint (fault.column, ==, 65);
  g_free (fault.message);
}

/* Looking for a key's twin among 50,000 others must not take the square of that. */
static void
test_many_keys (void)
{
  g_autoptr (GString) text = g_string_new ("{");
  for (guint i = 0; i < 50000; i++)
    g_string_append_printf (text, "\"k%u\":%u,", i, i);
  g_string_append (text, "\"k49999\":0}");
  UtJsonFault fault;
  gint64 begin_us = g_get_monotonic_time ();
  g_assert_null (ut_json_scan (text->str, text->len, &fault));
  g_assert_cmpint (g_get_monotonic_time () - begin_us, <, 20 * G_USEC_PER_SEC);
  g_assert_nonnull (strstr (fault.message, "twice"));
  g_free (fault.message);
}

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  g_test_add_func ("/json-scan/good", test_good);
  g_test_add_func ("/json-scan/bad", test_bad);
  g_test_add_func ("/json-scan/zero-byte", test_zero_byte);
  g_test_add_func ("/json-scan/values", test_values);
  g_test_add_func ("/json-scan/nesting", test_nesting);
  g_test_add_func ("/json-scan/many-keys", test_many_keys);
  return g_test_run ();
}
