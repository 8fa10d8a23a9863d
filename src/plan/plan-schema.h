/* The plan file's format as tables: every key is declared once, here, and made, copied, freed, read
 * and written from that one row. For the rooms of this folder only. */
#pragma once

#include "plan.h"

/* Lists whose items other keys may name. */
typedef enum
{
  UT_LIST_NONE,
  UT_LIST_CONSTRUCTIONS,
  UT_LIST_STOREYS,
  UT_LIST_ANTENNAS,
  UT_LIST_CELLS,
  UT_LIST_TERMINALS,
  UT_N_LISTS
} UtListName;

/* What a key holds, and the type of the field at its offset. */
typedef enum
{
  UT_KEY_VERSION,   /* the file version; no field */
  UT_KEY_TEXT,      /* char * */
  UT_KEY_ID,        /* char *, not empty, once in its list */
  UT_KEY_REFERENCE, /* char *, an id of `list`; NULL: null */
  UT_KEY_WORD,      /* char *, one of `words` */
  UT_KEY_NUMBER,    /* double; NAN: null */
  UT_KEY_INTEGER,   /* int; 0: null */
  UT_KEY_FLAG,      /* gboolean */
  UT_KEY_CHOICE,    /* an enumeration, its words in `words` */
  UT_KEY_NUMBERS,   /* GArray of double */
  UT_KEY_POINTS,    /* GArray of UtPoint */
  UT_KEY_DATA,      /* GBytes, base64 in the file */
  UT_KEY_FIELDS,    /* JsonObject, kept as it is; NULL: none */
  UT_KEY_OBJECT,    /* pointer to an item of `kind`; NULL: null */
  UT_KEY_INLINE,    /* an object whose fields lie in the same struct */
  UT_KEY_LIST,      /* GPtrArray of items of `kind` */
  UT_KEY_MATERIAL, /* char *, one of `words`; NULL: an object whose fields lie in the same struct */
  UT_KEY_GAINS     /* GPtrArray of UtMeasuredGain, by terminal and cell in the file */
} UtKeyType;

enum
{
  UT_KEY_REQUIRED = 1 << 0,
  UT_KEY_NULLABLE = 1 << 1,
  UT_KEY_SPARSE = 1 << 2, /* not written at its default, even for an item made by the program */
  UT_KEY_NAME = 1 << 3,   /* a text whose default is the item's id */
};

typedef struct _UtKind UtKind;

typedef struct
{
  const char *name;
  UtKeyType type;
  guint flags;
  gsize offset;
  double value; /* number, integer, flag, choice: of a new item, and of a file that leaves the key
                   out */
  const char *text;       /* the same for texts */
  double lowest, highest; /* number, integer */
  gboolean above;         /* lowest itself is not allowed */
  guint least;            /* numbers: so many at least */
  guint variants;         /* bits of the variants that have this key; 0: all */
  const char *const *words;
  const UtKind *kind;
  UtListName list;
} UtKey;

/* One kind of object.  Where some keys belong to one law or pattern only, `variant` is the choice
 * that tells which. */
struct _UtKind
{
  const char *label; /* "a cell" */
  gsize size;        /* 0: lies in another kind's struct */
  const UtKey *keys;
  guint n_keys;
  gboolean has_source;
  gsize source; /* offset of the JsonObject it was read from */
  const UtKey *variant;
  void (*unref) (gpointer item);
};

extern const UtKind ut_kind_site, ut_kind_carrier, ut_kind_propagation, ut_kind_construction_layer,
    ut_kind_construction, ut_kind_opening, ut_kind_wall, ut_kind_backdrop, ut_kind_storey,
    ut_kind_antenna, ut_kind_cell, ut_kind_terminal, ut_kind_measured_gain, ut_kind_plan;

/* The field of a key, as an lvalue of `type`. */
#define UT_FIELD(type, item, key) (*(type *)(void *)((char *)(item) + (key)->offset))
#define UT_SOURCE(kind, item) (*(JsonObject **)(void *)((char *)(item) + (kind)->source))

/* NULL: a key of somebody else's. */
const UtKey *ut_kind_find (const UtKind *kind, const char *name);

/* Whether the item, being of its variant, has this key. */
gboolean ut_kind_has (const UtKind *kind, const UtKey *key, gconstpointer item);

/* Items by their tables: a new one with all defaults, a copy, the release of what an item owns. */
gpointer ut_kind_new (const UtKind *kind);
gpointer ut_kind_copy (const UtKind *kind, gconstpointer item, gboolean share_arrays);
void ut_kind_clear (const UtKind *kind, gpointer item);

/* JsonObject counts its references without atomics, and the last reference to a plan may go in any
 * thread: plans take and drop theirs under one lock. */
JsonObject *ut_source_ref (JsonObject *source);
void ut_source_unref (JsonObject *source);
