/* Presets of radios for the tray: a few built in, by use, and the user's own, which are the radios of one plan file in the config folder; whoever opens that
 * file edits them.  No widgets. */
#pragma once

#include "selection.h"

typedef struct
{
  char *name;
  UtRadioKind kind;
  double height_m;    /* of one built in by use; NAN: as the last of its kind in the plan */
  const UtPlan *plan; /* of the user's own: where it is from; NULL: built in */
  char *id;           /* there */
} UtPreset;

#define UT_TYPE_PRESETS (ut_presets_get_type ())
G_DECLARE_FINAL_TYPE (UtPresets, ut_presets, UT, PRESETS, GObject)

/* Those of a file, which need not exist; watched.  Signal "changed". */
UtPresets *ut_presets_new (GFile *file);

/* Those of the program: ui of all windows shares them.  Borrowed. */
UtPresets *ut_presets_get_default (void);

GFile *ut_presets_file (UtPresets *presets);

/* The first two are a cell and a terminal as the plan has them. */
guint ut_presets_count (UtPresets *presets);
const UtPreset *ut_presets_get (UtPresets *presets, guint index);

/* Adds the radio to the file, by its name; one of the same name is replaced.  FALSE with *error where it cannot be written, or the file holds no plan. */
gboolean ut_presets_add (UtPresets *presets, const UtPlan *plan, UtRadioKind kind, const char *id, GError **error);
