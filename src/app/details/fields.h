/* The fields of the details pane, as a table: what is shown of which thing, and how a text becomes a value and back. No widgets. */
#pragma once

#include "desk.h"

typedef enum
{
  UT_SUBJECT_PLAN,     /* when nothing is selected: title block, site, carrier, propagation, and the storey shown with its backdrop; its id is the storey's */
  UT_SUBJECT_CELL,     /* one, or several at once: the id of each, one a line */
  UT_SUBJECT_TERMINAL, /* the same */
  UT_SUBJECT_WALL,     /* the same, by picks */
  UT_SUBJECT_RADIOS,   /* cells and terminals together: what both have; its id is selection text */
  UT_SUBJECT_MANY,     /* walls and radios together: no fields */
} UtSubject;

typedef enum
{
  UT_FIELD_TEXT,
  UT_FIELD_NUMBER,
  UT_FIELD_NUMBER_OR_NONE, /* empty: none */
  UT_FIELD_NUMBERS,        /* a list, by spaces or semicolons */
  UT_FIELD_WHOLE,
  UT_FIELD_SWITCH,
  UT_FIELD_CHOICE,
  UT_FIELD_TARGET, /* a SINR, or a bit rate as "20 Mbit/s"; empty: none */
  UT_FIELD_COLUMNS, /* the planner's own: "cable tag: A-07; rack: 3" */
} UtFieldKind;

typedef struct
{
  const char *label; /* not translated yet */
  const char *unit;
  UtFieldKind kind;
  const char *group; /* heading above it, not translated yet; NULL: goes on under the one before */
  const char *const *words; /* choices, NULL-terminated, not translated yet; NULL: made from the plan (antennas, cells) */
} UtField;

UtSubject ut_fields_subject (UtDesk *desk);

/* The id of what is selected, for the functions below.  Transfer full, NULL: none. */
char *ut_fields_id (UtDesk *desk);
guint ut_fields_count (UtSubject subject);
const UtField *ut_fields_field (UtSubject subject, guint index);

/* Whether the field has any meaning in this plan: parameters of another base law have none. */
gboolean ut_fields_applies (const UtPlan *plan, UtSubject subject, const char *id, guint index);

/* Several things are selected, and this is not the same for all. */
gboolean ut_fields_mixed (const UtPlan *plan, UtSubject subject, const char *id, guint index);

/* Whether the plan holds what the id names. */
gboolean ut_fields_held (const UtPlan *plan, UtSubject subject, const char *id);

/* The choices of a field in this plan (translated); transfer full, NULL for fields that are no choice. */
char **ut_fields_choices (const UtPlan *plan, UtSubject subject, guint index);

/* The present value as text (of several things: of the first); for switches "1" or "0", for choices the position. Transfer full. */
char *ut_fields_text (const UtPlan *plan, UtSubject subject, const char *id, guint index);

/* The plan with the field set from a text.  NULL with *refusal (transfer full) where the text is no value, or none that the plan may have. */
const UtPlan *ut_fields_with (const UtPlan *plan, UtSubject subject, const char *id, guint index, const char *text, char **refusal) G_GNUC_WARN_UNUSED_RESULT;
