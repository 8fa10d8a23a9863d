/* Base laws: the loss of a path before walls, floors and antennas.  One table, one file a family. */
#pragma once

#include "radio.h"

typedef enum
{
  UT_LAW_FREE_SPACE,
  UT_LAW_LOG_DISTANCE,
} UtLawKind;

/* Parameters of a law; each law reads its own and ignores the rest. */
typedef struct
{
  UtLawKind kind;
  double exponent;    /* log-distance: > 0 */
  double reference_m; /* log-distance: > 0 */
} UtLaw;

typedef struct
{
  double frequency_hz; /* > 0 */
  double distance_m;   /* 3D, >= 0; never counted below 1 m */
} UtLawPath;

/* The law's name as the plan file writes it; NULL for an unknown kind. */
const char *ut_law_name (UtLawKind kind);

/* One line that says where the law comes from (document, equation); NULL for an unknown kind. */
const char *ut_law_source (UtLawKind kind);

/* Looks a law up by its name.  UT_RADIO_UNKNOWN leaves *kind untouched. */
UtRadioStatus ut_law_find (const char *name, UtLawKind *kind);

/* Median basic transmission loss in dB.  Out untouched on failure. */
UtRadioStatus ut_law_loss_db (const UtLaw *law, const UtLawPath *path, double *loss_db);
