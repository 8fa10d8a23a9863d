/* One reading of a plan: where it is, what it knows, what it found wrong.  For the rooms of this
 * folder only. */
#pragma once

#include "plan-read.h"
#include "plan-schema.h"

#define UT_BUILT_IN_ANTENNA "isotropic"

/* The ids of every list are gathered before any item is read, so that references are judged where
 * they stand and faults come in file order. */
typedef struct
{
  GPtrArray *faults;
  gboolean faulty; /* this reading found a fault, listed or beyond the most */
  GString *path;
  GHashTable *ids[UT_N_LISTS]; /* set of text borrowed from the tree */
  gboolean unsure[UT_N_LISTS]; /* an id of the list is faulty: an unknown name may be it */
  GHashTable *used;            /* ids of the list being read, and the path of their first user */
  gint64 channels;             /* 0: could not be read */
} UtReader;

extern const char *const ut_list_items[UT_N_LISTS]; /* "a cell" */

/* plan-fault.c */

/* Adds a fault unless there are UT_FAULTS_MOST; takes over the message. */
void ut_faults_add (GPtrArray *faults, const char *path, char *message);

/* A fault at the place being read. */
void ut_reader_fault (UtReader *reader, const char *format, ...) G_GNUC_PRINTF (2, 3);

/* The node is not of the key's type.  Always FALSE. */
gboolean ut_reader_fault_type (UtReader *reader, const UtKey *key, JsonNode *node);

/* The path grows by a key or an index; leave () cuts it back to the length that enter () gave. */
gsize ut_reader_enter_key (UtReader *reader, const char *key);
gsize ut_reader_enter_index (UtReader *reader, guint index);
void ut_reader_leave (UtReader *reader, gsize before);

char *ut_reader_quote (const char *text);       /* for a message; transfer full */
char *ut_reader_expectation (const UtKey *key); /* "a number above 0"; transfer full */
const char *ut_reader_noun (JsonNode *node);    /* "a list" */
gboolean ut_reader_holds_number (JsonNode *node);
gboolean ut_reader_holds_text (JsonNode *node);

/* plan-values.c: TRUE (a word: its index, not -1): the value is good and in its field; else there
 * is a fault at the place being read. */
gboolean ut_read_number (UtReader *reader, const UtKey *key, JsonNode *node, double *value);
gboolean ut_read_text (UtReader *reader, const UtKey *key, JsonNode *node, gpointer item);
gboolean ut_read_id (UtReader *reader, const UtKey *key, JsonNode *node, gpointer item);
gboolean ut_read_reference (UtReader *reader, const UtKey *key, JsonNode *node, gpointer item);
int ut_read_word (UtReader *reader, const UtKey *key, JsonNode *node);
gboolean ut_read_data (UtReader *reader, const UtKey *key, JsonNode *node, gpointer item);
gboolean ut_read_fields (UtReader *reader, const UtKey *key, JsonNode *node, gpointer item);
gboolean ut_read_numbers (UtReader *reader, const UtKey *key, JsonNode *node, gpointer item);
gboolean ut_read_points (UtReader *reader, const UtKey *key, JsonNode *node, gpointer item);
gboolean ut_read_gains (UtReader *reader, const UtKey *key, JsonNode *node, gpointer item);
gboolean ut_read_unknown (UtReader *reader, JsonNode *node);
