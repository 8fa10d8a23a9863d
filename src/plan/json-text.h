/* JSON as text, the way every file and answer of this program is written: two-space indent, one key
 * a line, arrays of scalars on one line, numbers as the shortest decimal that reads back to the
 * same double. */
#pragma once

#include <json-glib/json-glib.h>

/* Appends a value; `depth`: how deep it lies, for the indent of its lines. */
void ut_json_append (GString *out, JsonNode *node, guint depth);
void ut_json_append_object (GString *out, JsonObject *object, guint depth);
void ut_json_append_string (GString *out, const char *text); /* with its quotes */

/* A whole text, ending in a newline. */
char *ut_json_text (JsonNode *root) G_GNUC_WARN_UNUSED_RESULT;
