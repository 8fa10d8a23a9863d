/* What items are made of: made, copied and released by the tables of plan-schema.h. */
#include "plan-schema.h"

#include <string.h>

static GMutex source_lock;

JsonObject *
ut_source_ref (JsonObject *source)
{
  if (source == NULL)
    return NULL;
  g_mutex_lock (&source_lock);
  json_object_ref (source);
  g_mutex_unlock (&source_lock);
  return source;
}

void
ut_source_unref (JsonObject *source)
{
  if (source == NULL)
    return;
  g_mutex_lock (&source_lock);
  json_object_unref (source);
  g_mutex_unlock (&source_lock);
}

void
ut_radio_set_fields (UtRadio *radio, JsonObject *fields)
{
  ut_source_unref (radio->fields);
  radio->fields = fields;
}

static void
key_set_default (const UtKey *key, gpointer item)
{
  switch (key->type)
    {
    case UT_KEY_TEXT:
    case UT_KEY_ID:
    case UT_KEY_REFERENCE:
    case UT_KEY_WORD:
      UT_FIELD (char *, item, key) = g_strdup (key->text);
      break;
    case UT_KEY_NUMBER:
      UT_FIELD (double, item, key) = key->value;
      break;
    case UT_KEY_INTEGER:
    case UT_KEY_FLAG:
    case UT_KEY_CHOICE:
      UT_FIELD (int, item, key) = (int)key->value;
      break;
    case UT_KEY_NUMBERS:
      UT_FIELD (GArray *, item, key) = g_array_new (FALSE, FALSE, sizeof (double));
      break;
    case UT_KEY_POINTS:
      UT_FIELD (GArray *, item, key) = g_array_new (FALSE, FALSE, sizeof (UtPoint));
      break;
    case UT_KEY_OBJECT:
      if ((key->flags & UT_KEY_NULLABLE) == 0)
        UT_FIELD (gpointer, item, key) = ut_kind_new (key->kind);
      break;
    case UT_KEY_LIST:
    case UT_KEY_GAINS:
      UT_FIELD (GPtrArray *, item, key) = g_ptr_array_new_with_free_func (key->kind->unref);
      break;
    case UT_KEY_MATERIAL:
      UT_FIELD (char *, item, key) = g_strdup (key->text);
      G_GNUC_FALLTHROUGH;
    case UT_KEY_INLINE:
      for (guint i = 0; i < key->kind->n_keys; i++)
        key_set_default (&key->kind->keys[i], item);
      break;
    case UT_KEY_DATA:
      UT_FIELD (GBytes *, item, key) = g_bytes_new (NULL, 0);
      break;
    case UT_KEY_FIELDS:
    case UT_KEY_VERSION:
      break;
    }
}

gpointer
ut_kind_new (const UtKind *kind)
{
  gpointer item = g_atomic_rc_box_alloc0 (kind->size);
  for (guint i = 0; i < kind->n_keys; i++)
    key_set_default (&kind->keys[i], item);
  return item;
}

static GPtrArray *
copy_list (GPtrArray *list, const UtKind *kind)
{
  GPtrArray *copy = g_ptr_array_new_full (list->len, kind->unref);
  for (guint i = 0; i < list->len; i++)
    g_ptr_array_add (copy, g_atomic_rc_box_acquire (list->pdata[i]));
  return copy;
}

/* Turns a borrowed field, left by a byte-wise copy, into one of the item's own. */
static void
key_own (const UtKey *key, gpointer item, gboolean share_arrays)
{
  switch (key->type)
    {
    case UT_KEY_TEXT:
    case UT_KEY_ID:
    case UT_KEY_REFERENCE:
    case UT_KEY_WORD:
      UT_FIELD (char *, item, key) = g_strdup (UT_FIELD (char *, item, key));
      break;
    case UT_KEY_NUMBERS:
    case UT_KEY_POINTS:
      UT_FIELD (GArray *, item, key) = g_array_copy (UT_FIELD (GArray *, item, key));
      break;
    case UT_KEY_OBJECT:
      if (UT_FIELD (gpointer, item, key) != NULL)
        g_atomic_rc_box_acquire (UT_FIELD (gpointer, item, key));
      break;
    case UT_KEY_LIST:
    case UT_KEY_GAINS:
      UT_FIELD (GPtrArray *, item, key)
          = share_arrays ? g_ptr_array_ref (UT_FIELD (GPtrArray *, item, key))
                         : copy_list (UT_FIELD (GPtrArray *, item, key), key->kind);
      break;
    case UT_KEY_DATA:
      if (UT_FIELD (GBytes *, item, key) != NULL)
        g_bytes_ref (UT_FIELD (GBytes *, item, key));
      break;
    case UT_KEY_FIELDS:
      ut_source_ref (UT_FIELD (JsonObject *, item, key));
      break;
    case UT_KEY_MATERIAL:
      UT_FIELD (char *, item, key) = g_strdup (UT_FIELD (char *, item, key));
      ut_source_ref (UT_SOURCE (key->kind, item));
      break;
    case UT_KEY_INLINE:
      ut_source_ref (UT_SOURCE (key->kind, item));
      for (guint i = 0; i < key->kind->n_keys; i++)
        key_own (&key->kind->keys[i], item, share_arrays);
      break;
    case UT_KEY_NUMBER:
    case UT_KEY_INTEGER:
    case UT_KEY_FLAG:
    case UT_KEY_CHOICE:
    case UT_KEY_VERSION:
      break;
    }
}

gpointer
ut_kind_copy (const UtKind *kind, gconstpointer item, gboolean share_arrays)
{
  gpointer copy = g_atomic_rc_box_dup (kind->size, (gpointer)item);
  if (kind->has_source)
    ut_source_ref (UT_SOURCE (kind, copy));
  for (guint i = 0; i < kind->n_keys; i++)
    key_own (&kind->keys[i], copy, share_arrays);
  return copy;
}

static void
key_clear (const UtKey *key, gpointer item)
{
  switch (key->type)
    {
    case UT_KEY_TEXT:
    case UT_KEY_ID:
    case UT_KEY_REFERENCE:
    case UT_KEY_WORD:
      g_free (UT_FIELD (char *, item, key));
      break;
    case UT_KEY_NUMBERS:
    case UT_KEY_POINTS:
      g_array_unref (UT_FIELD (GArray *, item, key));
      break;
    case UT_KEY_OBJECT:
      if (UT_FIELD (gpointer, item, key) != NULL)
        key->kind->unref (UT_FIELD (gpointer, item, key));
      break;
    case UT_KEY_LIST:
    case UT_KEY_GAINS:
      g_ptr_array_unref (UT_FIELD (GPtrArray *, item, key));
      break;
    case UT_KEY_DATA:
      g_clear_pointer (&UT_FIELD (GBytes *, item, key), g_bytes_unref);
      break;
    case UT_KEY_FIELDS:
      ut_source_unref (UT_FIELD (JsonObject *, item, key));
      break;
    case UT_KEY_MATERIAL:
      g_free (UT_FIELD (char *, item, key));
      ut_source_unref (UT_SOURCE (key->kind, item));
      break;
    case UT_KEY_INLINE:
      ut_kind_clear (key->kind, item);
      break;
    case UT_KEY_NUMBER:
    case UT_KEY_INTEGER:
    case UT_KEY_FLAG:
    case UT_KEY_CHOICE:
    case UT_KEY_VERSION:
      break;
    }
}

void
ut_kind_clear (const UtKind *kind, gpointer item)
{
  for (guint i = 0; i < kind->n_keys; i++)
    key_clear (&kind->keys[i], item);
  if (kind->has_source)
    ut_source_unref (UT_SOURCE (kind, item));
}
