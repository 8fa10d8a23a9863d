#include "table.h"

#include <string.h>

struct _UtTable
{
  guint n_columns;
  GPtrArray *texts; /* header first, row by row */
  gboolean *right;
};

UtTable *
ut_table_new (const char *const *header)
{
  UtTable *table = g_new0 (UtTable, 1);

  table->n_columns = g_strv_length ((char **) header);
  table->texts = g_ptr_array_new_with_free_func (g_free);
  table->right = g_new0 (gboolean, table->n_columns);
  for (guint i = 0; i < table->n_columns; i++)
    {
      table->right[i] = header[i][0] == '>';
      ut_table_add (table, g_strdup (header[i] + table->right[i]));
    }
  return table;
}

void
ut_table_free (UtTable *table)
{
  g_ptr_array_unref (table->texts);
  g_free (table->right);
  g_free (table);
}

void
ut_table_add (UtTable *table, char *text)
{
  g_ptr_array_add (table->texts, text);
}

static void
add_padding (GString *out, glong n)
{
  while (n-- > 0)
    g_string_append_c (out, ' ');
}

/* One line; no blanks at its end. */
static void
append_row (const UtTable *table, guint first, const glong *widths, GString *out)
{
  for (guint column = 0; column < table->n_columns; column++)
    {
      const char *text = table->texts->pdata[first + column];
      glong padding = widths[column] - g_utf8_strlen (text, -1);

      if (column > 0)
        g_string_append (out, "  ");
      add_padding (out, table->right[column] ? padding : 0);
      g_string_append (out, text);
      if (column + 1 < table->n_columns)
        add_padding (out, table->right[column] ? 0 : padding);
    }
  while (out->len > 0 && out->str[out->len - 1] == ' ')
    g_string_truncate (out, out->len - 1);
  g_string_append_c (out, '\n');
}

void
ut_table_text (const UtTable *table, GString *out)
{
  g_autofree glong *widths = g_new0 (glong, table->n_columns);

  for (guint i = 0; i < table->texts->len; i++)
    widths[i % table->n_columns] = MAX (widths[i % table->n_columns], g_utf8_strlen (table->texts->pdata[i], -1));
  for (guint i = 0; i + table->n_columns <= table->texts->len; i += table->n_columns)
    append_row (table, i, widths, out);
}

static void
append_csv_field (GString *out, const char *text)
{
  if (strpbrk (text, ",\"\r\n") == NULL)
    {
      g_string_append (out, text);
      return;
    }
  g_string_append_c (out, '"');
  for (; *text != '\0'; text++)
    {
      if (*text == '"')
        g_string_append_c (out, '"');
      g_string_append_c (out, *text);
    }
  g_string_append_c (out, '"');
}

void
ut_table_csv (const UtTable *table, GString *out)
{
  for (guint i = 0; i < table->texts->len; i++)
    {
      append_csv_field (out, table->texts->pdata[i]);
      g_string_append_c (out, (i + 1) % table->n_columns == 0 ? '\n' : ',');
    }
}
