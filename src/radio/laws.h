/* Base laws: the loss of a path before walls, floors and antennas.  One table, one file a family. */
#pragma once

#include <stdbool.h>
#include <stddef.h>

#include "radio.h"

typedef enum
{
  UT_LAW_FREE_SPACE,
  UT_LAW_LOG_DISTANCE,
  UT_LAW_SITE_GENERAL,
  UT_LAW_DISTANCE_COEFFICIENT,
  UT_LAW_INDOOR_OFFICE,
  UT_LAW_INDOOR_FACTORY,
  UT_LAW_MULTI_WALL,
} UtLawKind;

typedef enum { UT_ENVIRONMENT_OFFICE, UT_ENVIRONMENT_CORRIDOR, UT_ENVIRONMENT_INDUSTRIAL } UtEnvironment;

typedef enum
{
  UT_SIGHT_LOS,
  UT_SIGHT_NLOS,
  UT_SIGHT_BY_WALLS, /* nlos where the path is obstructed */
} UtSight;

/* Indoor factory: clutter sparse or dense, the cell's antenna in it (low) or above it (high). */
typedef enum { UT_CLUTTER_SL, UT_CLUTTER_DL, UT_CLUTTER_SH, UT_CLUTTER_DH } UtClutter;

/* Parameters of a law; each law reads its own and ignores the rest. */
typedef struct
{
  UtLawKind kind;
  double exponent;           /* log-distance: > 0 */
  double reference_m;        /* log-distance: > 0 */
  UtEnvironment environment; /* site-general */
  UtSight sight;             /* site-general, indoor-office, indoor-factory */
  UtClutter clutter;         /* indoor-factory */
  double coefficient;        /* distance-coefficient: N, > 0 */
  const double *floor_loss_db; /* distance-coefficient: >= 0, for 1, 2, 3 ... floors, the last repeats; none: 0 */
  size_t n_floor_losses;
  double light_db, heavy_db, floor_db, b; /* multi-wall: >= 0 */
} UtLaw;

typedef struct
{
  double frequency_hz;        /* > 0 */
  double distance_m;          /* 3D, >= 0; never counted below 1 m */
  bool obstructed;            /* crosses a wall or floor of 1 dB or more: by-walls takes the nlos row */
  unsigned n_floors;          /* floors crossed */
  unsigned n_light, n_heavy;  /* walls crossed, by class */
} UtLawPath;

/* What a law was made for, infinite where nothing is stated, and by how much single paths scatter about its median (log-normal; NAN: not stated). */
typedef struct
{
  double lowest_hz, highest_hz;
  double nearest_m, farthest_m;
  double sigma_db;
} UtLawRange;

/* The law's name as the plan file writes it; NULL for an unknown kind. */
const char *ut_law_name (UtLawKind kind);

/* One line that says where the law comes from (document, equation); NULL for an unknown kind. */
const char *ut_law_source (UtLawKind kind);

/* Looks a law up by its name.  UT_RADIO_UNKNOWN leaves *kind untouched. */
UtRadioStatus ut_law_find (const char *name, UtLawKind *kind);

/* Median basic transmission loss in dB.  Out untouched on failure. */
UtRadioStatus ut_law_loss_db (const UtLaw *law, const UtLawPath *path, double *loss_db);

/* Whether the law's row for this path is the one without line of sight. */
bool ut_law_is_nlos (const UtLaw *law, const UtLawPath *path);

/* Whether the loss holds the walls and floors of the path already, so that adding them would count them twice. */
bool ut_law_holds_walls (const UtLaw *law, const UtLawPath *path);

/* The range of validity of the row that this path takes. */
UtLawRange ut_law_range (const UtLaw *law, const UtLawPath *path);

/* COST 231's floor term: n^((n + 2) / (n + 1) - b) times the loss of one floor; 0 for none. */
double ut_floor_term_db (unsigned n_floors, double floor_db, double b);
