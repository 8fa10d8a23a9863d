/* The plan: one site as an immutable value.
 *
 * A UtPlan and everything in it is reference-counted and never changes once it is part of a plan.
 * An edit (plan-edit.h) makes a new plan that shares all untouched items, so that two revisions are
 * compared by comparing pointers. Threads may read one plan at a time without a lock.  Field names
 * and units are the plan file's (docs/plan-file.md). A number that may be null is NAN where it is.
 */
#pragma once

#include <glib.h>
#include <json-glib/json-glib.h>

#define UT_PLAN_VERSION 1
#define UT_PLAN_MEDIA_TYPE "application/vnd.undertone.plan+json"

typedef enum
{
  UT_SHARING_ORTHOGONAL,
  UT_SHARING_SIMULTANEOUS
} UtSharing;
typedef enum
{
  UT_POLARIZATION_VERTICAL,
  UT_POLARIZATION_HORIZONTAL,
  UT_POLARIZATION_MIXED
} UtPolarization;
typedef enum
{
  UT_SLAB_COHERENT,
  UT_SLAB_AVERAGED
} UtSlabMode;
typedef enum
{
  UT_BASE_FREE_SPACE,
  UT_BASE_LOG_DISTANCE,
  UT_BASE_SITE_GENERAL,
  UT_BASE_DISTANCE_COEFFICIENT,
  UT_BASE_INDOOR_OFFICE,
  UT_BASE_INDOOR_FACTORY,
  UT_BASE_MULTI_WALL
} UtBaseLaw;
typedef enum
{
  UT_BASE_OFFICE,
  UT_BASE_CORRIDOR,
  UT_BASE_INDUSTRIAL
} UtBaseEnvironment;
typedef enum
{
  UT_BASE_LOS,
  UT_BASE_NLOS,
  UT_BASE_BY_WALLS
} UtBaseSight;
typedef enum
{
  UT_BASE_SL,
  UT_BASE_DL,
  UT_BASE_SH,
  UT_BASE_DH
} UtBaseClutter;
typedef enum
{
  UT_ANTENNA_ISOTROPIC,
  UT_ANTENNA_SECTOR,
  UT_ANTENNA_DIPOLE,
  UT_ANTENNA_CUTS
} UtAntennaPattern;

/* Every item keeps the JSON object it was read from (NULL when made by the program): key order and
 * unknown keys survive through it.  Nobody but plan-read and plan-write looks at `source`. */

typedef struct
{
  JsonObject *source;
  double north_deg;
  double latitude, longitude; /* NAN: null */
  char *datum;
} UtSite;

typedef struct
{
  JsonObject *source;
  double frequency_mhz, bandwidth_mhz;
  UtSharing sharing;
  double processing_gain_db, downlink_orthogonality;
  int channels;
  GArray *channel_isolation_db; /* of double */
  UtPolarization polarization;
  double noise_temperature_k, margin_db;
  double eirp_limit_dbm; /* NAN: null */
  int resource_blocks;   /* 0: null */
} UtCarrier;

typedef struct
{
  JsonObject *source, *base_source;
  UtBaseLaw law;
  double exponent, reference_m; /* log-distance */
  UtBaseEnvironment environment; /* site-general */
  UtBaseSight sight;             /* site-general, indoor-office, indoor-factory */
  UtBaseClutter clutter;         /* indoor-factory */
  double coefficient;            /* distance-coefficient */
  GArray *floor_loss_db;         /* the same; of double */
  double light_db, heavy_db, floor_db, b; /* multi-wall */
  gboolean walls;
  double wall_loss_limit_db;
  double excess_loss_limit_db; /* NAN: null */
  UtSlabMode slab;
  double shadowing_db, correlation_m;
} UtPropagation;

typedef struct
{
  JsonObject *source, *material_source;
  char *material;               /* NULL: the plan's own, by the next two */
  double relative_permittivity; /* >= 1 */
  double conductivity_s_m;      /* >= 0 */
  double thickness_mm;
} UtConstructionLayer;

typedef struct
{
  JsonObject *source;
  char *id, *name;
  double loss_db;    /* NAN: by layers */
  GPtrArray *layers; /* of const UtConstructionLayer; empty when loss_db is given */
  char *wall_class;  /* "light" or "heavy", for the multi-wall law; NULL: by its layers */
} UtConstruction;

typedef struct
{
  JsonObject *source;
  double at_m, width_m;
  char *construction;
  gboolean shut;
  double sill_m;
  double head_m; /* NAN: the wall's height */
} UtOpening;

typedef struct
{
  double x_m, y_m;
} UtPoint;

typedef struct
{
  JsonObject *source;
  char *id, *construction;
  double height_m;     /* NAN: the storey's height */
  GArray *points;      /* of UtPoint, two or more */
  GPtrArray *openings; /* of const UtOpening */
} UtWall;

/* A picture under the sketch, with its place: the lower left corner at (x_m, y_m), turned about it.
 */
typedef struct
{
  JsonObject *source;
  char *media_type; /* "image/png" or "image/jpeg" */
  GBytes *data;     /* the picture's bytes as imported; base64 in the file */
  double x_m, y_m, width_m, height_m;
  double turn_deg; /* clockwise */
  double opacity;  /* 0..1 */
  gboolean locked;
} UtBackdrop;

typedef struct
{
  JsonObject *source;
  char *id, *name;
  double elevation_m, height_m;
  char *floor;          /* construction under this storey; NULL: none */
  GPtrArray *walls;     /* of const UtWall */
  UtBackdrop *backdrop; /* NULL: none */
} UtStorey;

typedef struct
{
  JsonObject *source;
  char *id;
  UtAntennaPattern pattern;
  double gain_dbi;
  double beamwidth_h_deg, beamwidth_v_deg; /* sector */
  GArray *horizontal_dbi, *vertical_dbi;   /* cuts; of double */
} UtAntenna;

/* What cells and terminals have in common.  The file's key of each field is its name. */
typedef struct
{
  JsonObject *source;
  char *id, *name, *storey;
  double x_m, y_m, height_m;
  char *antenna; /* "isotropic" is built in */
  double azimuth_deg, downtilt_deg;
  double power_dbm, power_min_dbm, power_max_dbm, power_step_db;
  double feeder_loss_db, noise_figure_db;
  double activity;
  gboolean on;
  JsonObject *fields; /* the planner's own columns; NULL: none */
} UtRadio;

typedef struct
{
  UtRadio radio; /* first, so that a UtCell is a UtRadio */
  int channel;
} UtCell;

typedef struct
{
  UtRadio radio;
  double body_loss_db;
  char *cell;                          /* serving cell; NULL: the one with the largest gain */
  double level_down_dbm, level_up_dbm; /* NAN: null */
  double target_down_db, target_up_db; /* NAN: null */
  double priority;
} UtTerminal;

typedef struct
{
  char *terminal, *cell;
  double gain_db;
} UtMeasuredGain;

typedef struct
{
  JsonObject *source;
  char *title, *client, *prepared_by, *revision, *date, *notes;
  UtSite *site;
  UtCarrier *carrier;
  UtPropagation *propagation;
  GPtrArray *constructions;  /* of const UtConstruction */
  GPtrArray *storeys;        /* of const UtStorey */
  GPtrArray *antennas;       /* of const UtAntenna */
  GPtrArray *cells;          /* of const UtCell */
  GPtrArray *terminals;      /* of const UtTerminal */
  GPtrArray *measured_gains; /* of const UtMeasuredGain, in file order */
} UtPlan;

/* References.  Items are allocated as atomic reference-counted boxes; ref and unref work on const
 * pointers because a plan's parts are never written to.  *_new () and *_copy () give an item of
 * one's own, to be filled in before it joins a plan; text fields are owned (g_free/g_strdup),
 * arrays are owned (a copy shares the items, not the array). New items carry the file format's
 * defaults; text defaults to "", name to NULL until ut_..._set_defaults gives it the id. */
const UtPlan *ut_plan_ref (const UtPlan *plan);
void ut_plan_unref (const UtPlan *plan);
G_DEFINE_AUTOPTR_CLEANUP_FUNC (UtPlan, ut_plan_unref)

#define UT_DECLARE_ITEM(Type, type)                                                                \
  Type *type##_new (void) G_GNUC_WARN_UNUSED_RESULT;                                               \
  Type *type##_copy (const Type *item) G_GNUC_WARN_UNUSED_RESULT;                                  \
  const Type *type##_ref (const Type *item);                                                       \
  void type##_unref (const Type *item);                                                            \
  G_DEFINE_AUTOPTR_CLEANUP_FUNC (Type, type##_unref)

UT_DECLARE_ITEM (UtSite, ut_site)
UT_DECLARE_ITEM (UtCarrier, ut_carrier)
UT_DECLARE_ITEM (UtPropagation, ut_propagation)
UT_DECLARE_ITEM (UtConstructionLayer, ut_construction_layer)
UT_DECLARE_ITEM (UtConstruction, ut_construction)
UT_DECLARE_ITEM (UtOpening, ut_opening)
UT_DECLARE_ITEM (UtWall, ut_wall)
UT_DECLARE_ITEM (UtBackdrop, ut_backdrop)
UT_DECLARE_ITEM (UtStorey, ut_storey)
UT_DECLARE_ITEM (UtAntenna, ut_antenna)
UT_DECLARE_ITEM (UtCell, ut_cell)
UT_DECLARE_ITEM (UtTerminal, ut_terminal)
UT_DECLARE_ITEM (UtMeasuredGain, ut_measured_gain)

/* The planner's own columns of a radio that is not part of a plan yet; takes over `fields` (NULL: none). */
void ut_radio_set_fields (UtRadio *radio, JsonObject *fields);

/* An empty plan: 3750 MHz, 20 MHz, margin 3 dB, free space, averaged slabs, one storey "S1"; what
 * the window's New begins with. */
const UtPlan *ut_plan_new_empty (void) G_GNUC_WARN_UNUSED_RESULT;

/* Typed access; index below the array's len. */
static inline const UtCell *
ut_plan_cell (const UtPlan *plan, guint index)
{
  return (const UtCell *)plan->cells->pdata[index];
}
static inline const UtTerminal *
ut_plan_terminal (const UtPlan *plan, guint index)
{
  return (const UtTerminal *)plan->terminals->pdata[index];
}
static inline const UtStorey *
ut_plan_storey (const UtPlan *plan, guint index)
{
  return (const UtStorey *)plan->storeys->pdata[index];
}
static inline const UtConstruction *
ut_plan_construction (const UtPlan *plan, guint index)
{
  return (const UtConstruction *)plan->constructions->pdata[index];
}
static inline const UtAntenna *
ut_plan_antenna (const UtPlan *plan, guint index)
{
  return (const UtAntenna *)plan->antennas->pdata[index];
}

/* Index of the item of that id, or -1. */
int ut_plan_find_cell (const UtPlan *plan, const char *id);
int ut_plan_find_terminal (const UtPlan *plan, const char *id);
int ut_plan_find_storey (const UtPlan *plan, const char *id);
int ut_plan_find_construction (const UtPlan *plan, const char *id);
int ut_storey_find_wall (const UtStorey *storey, const char *id);
int ut_plan_find_antenna (const UtPlan *plan,
                          const char *id); /* -1 for the built-in "isotropic" too */
