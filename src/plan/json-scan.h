/* JSON from bytes, by the letter of RFC 8259 and a little stricter.  For the rooms of this folder
 * only. */
#pragma once

#include <json-glib/json-glib.h>

#define UT_JSON_NESTING_MOST 64

typedef struct
{
  guint line, column; /* from 1; of the first character that cannot continue the text; columns count
                         characters */
  char *message;      /* "what is wrong; what is expected"; g_free */
} UtJsonFault;

/* The value that `text` (length bytes, UTF-8, need not end in NUL) stands for: transfer full, or
 * NULL and *fault filled in. Refused beyond the grammar: a byte order mark, nesting deeper than
 * UT_JSON_NESTING_MOST, a key twice in one object, \u0000, a lone surrogate, an integer beyond
 * +-2^53.  A number too large for a double becomes an infinity: the caller reports it by its place
 * in the document.  Objects keep the order of their keys.  Linear in length. */
JsonNode *
ut_json_scan (const char *text, gsize length, UtJsonFault *fault) G_GNUC_WARN_UNUSED_RESULT;
