/* A small table of texts, shown aligned for people or as CSV. */
#pragma once

#include <glib.h>

typedef struct _UtTable UtTable;

/* header: NULL-terminated column titles; a title beginning with '>' (not shown) makes its column right-aligned in text. */
UtTable *ut_table_new (const char *const *header) G_GNUC_WARN_UNUSED_RESULT;
void ut_table_free (UtTable *table);
G_DEFINE_AUTOPTR_CLEANUP_FUNC (UtTable, ut_table_free)

/* Next cell, row by row; takes the text over. */
void ut_table_add (UtTable *table, char *text);

/* Appends the table to `out`, columns two spaces apart, each line ended. */
void ut_table_text (const UtTable *table, GString *out);

/* Appends the table as RFC 4180 CSV with line feeds, header first. */
void ut_table_csv (const UtTable *table, GString *out);
