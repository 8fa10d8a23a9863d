#include "plan-schema.h"

#include <math.h>

static const char *const sharing_words[] = { "orthogonal", "simultaneous", NULL };
static const char *const polarization_words[] = { "vertical", "horizontal", "mixed", NULL };
static const char *const slab_words[] = { "coherent", "averaged", NULL };
static const char *const law_words[]
    = { "free-space",    "log-distance",   "site-general", "distance-coefficient",
        "indoor-office", "indoor-factory", "multi-wall",   NULL };
static const char *const environment_words[] = { "office", "corridor", "industrial", NULL };
static const char *const sight_words[] = { "los", "nlos", "by-walls", NULL };
static const char *const clutter_words[] = { "sl", "dl", "sh", "dh", NULL };
static const char *const class_words[] = { "light", "heavy", NULL };
static const char *const pattern_words[] = { "isotropic", "sector", "dipole", "cuts", NULL };
static const char *const picture_words[] = { "image/png", "image/jpeg", NULL };
static const char *const material_words[]
    = { "concrete",  "brick",   "plasterboard", "wood",       "glass", "ceiling-board",
        "chipboard", "plywood", "marble",       "floorboard", "metal", "air",
        NULL };

/* Ranges. */
#define ANY .lowest = -INFINITY, .highest = INFINITY
#define ABOVE_0 .lowest = 0, .highest = INFINITY, .above = TRUE
#define FROM_0 .lowest = 0, .highest = INFINITY
#define DECIBELS .lowest = -400, .highest = 400
#define LOSS_DB .lowest = 0, .highest = 400
#define SHARE .lowest = 0, .highest = 1
#define COUNT .lowest = 1, .highest = G_MAXINT

/* Rows. */
#define FIELD(Struct, field) .offset = G_STRUCT_OFFSET (Struct, field)
#define REQUIRED .flags = UT_KEY_REQUIRED
#define NULLABLE .flags = UT_KEY_NULLABLE, .value = NAN
#define ONLY(variant) .variants = 1u << (variant)
#define SIGHTED                                                                                    \
  .variants = 1u << UT_BASE_SITE_GENERAL | 1u << UT_BASE_INDOOR_OFFICE | 1u << UT_BASE_INDOOR_FACTORY
#define ONE_GAIN .variants = 1u << UT_ANTENNA_ISOTROPIC | 1u << UT_ANTENNA_SECTOR
#define NUMBER(Struct, field) .name = #field, .type = UT_KEY_NUMBER, FIELD (Struct, field)
#define TEXT(Struct, field) .name = #field, .type = UT_KEY_TEXT, FIELD (Struct, field), .text = ""
#define FLAG(Struct, field, on)                                                                    \
  .name = #field, .type = UT_KEY_FLAG, FIELD (Struct, field), .value = on
#define ID(Struct) .name = "id", .type = UT_KEY_ID, FIELD (Struct, id), .text = "", REQUIRED
#define NAME(Struct) .name = "name", .type = UT_KEY_TEXT, FIELD (Struct, name), .flags = UT_KEY_NAME
#define REFERENCE(Struct, field, to)                                                               \
  .name = #field, .type = UT_KEY_REFERENCE, FIELD (Struct, field), .list = to
#define CHOICE(Struct, field, choices)                                                             \
  .name = #field, .type = UT_KEY_CHOICE, FIELD (Struct, field), .words = choices
#define LIST(Struct, field, of)                                                                    \
  .name = #field, .type = UT_KEY_LIST, FIELD (Struct, field), .kind = &of

#define KIND(Struct, type, described)                                                              \
  static void type##_release (gpointer item) { type##_unref (item); }                              \
  const UtKind ut_kind_##described

#define KEYS(table) .keys = table, .n_keys = G_N_ELEMENTS (table)

static const UtKey site_keys[] = {
  { NUMBER (UtSite, north_deg), ANY },
  { NUMBER (UtSite, latitude), .lowest = -90, .highest = 90, NULLABLE },
  { NUMBER (UtSite, longitude), .lowest = -180, .highest = 180, NULLABLE },
  { TEXT (UtSite, datum) },
};
KIND (UtSite, ut_site, site) = { .label = "a site",
                                 .size = sizeof (UtSite),
                                 KEYS (site_keys),
                                 .has_source = TRUE,
                                 .unref = ut_site_release };

static const UtKey carrier_keys[] = {
  { NUMBER (UtCarrier, frequency_mhz), ABOVE_0, REQUIRED, .value = 3750 },
  { NUMBER (UtCarrier, bandwidth_mhz), ABOVE_0, REQUIRED, .value = 20 },
  { CHOICE (UtCarrier, sharing, sharing_words), REQUIRED },
  { NUMBER (UtCarrier, processing_gain_db), LOSS_DB },
  { NUMBER (UtCarrier, downlink_orthogonality), SHARE },
  { .name = "channels", .type = UT_KEY_INTEGER, FIELD (UtCarrier, channels), COUNT, .value = 1 },
  { .name = "channel_isolation_db",
    .type = UT_KEY_NUMBERS,
    FIELD (UtCarrier, channel_isolation_db),
    LOSS_DB },
  { CHOICE (UtCarrier, polarization, polarization_words) },
  { NUMBER (UtCarrier, noise_temperature_k), ABOVE_0, .value = 290 },
  { NUMBER (UtCarrier, margin_db), DECIBELS },
  { NUMBER (UtCarrier, eirp_limit_dbm), DECIBELS, NULLABLE },
  { .name = "resource_blocks",
    .type = UT_KEY_INTEGER,
    FIELD (UtCarrier, resource_blocks),
    COUNT,
    .flags = UT_KEY_NULLABLE },
};
KIND (UtCarrier, ut_carrier, carrier) = { .label = "a carrier",
                                          .size = sizeof (UtCarrier),
                                          KEYS (carrier_keys),
                                          .has_source = TRUE,
                                          .unref = ut_carrier_release };

/* A new law: its word above, its keys here. */
static const UtKey base_keys[] = {
  { CHOICE (UtPropagation, law, law_words), REQUIRED },
  { NUMBER (UtPropagation, exponent), ABOVE_0, REQUIRED, .value = 2, ONLY (UT_BASE_LOG_DISTANCE) },
  { NUMBER (UtPropagation, reference_m), ABOVE_0, .value = 1, ONLY (UT_BASE_LOG_DISTANCE) },
  { CHOICE (UtPropagation, environment, environment_words), REQUIRED, ONLY (UT_BASE_SITE_GENERAL) },
  { CHOICE (UtPropagation, sight, sight_words), .value = UT_BASE_BY_WALLS, SIGHTED },
  { CHOICE (UtPropagation, clutter, clutter_words), REQUIRED, ONLY (UT_BASE_INDOOR_FACTORY) },
  { NUMBER (UtPropagation, coefficient),
    ABOVE_0,
    REQUIRED,
    .value = 30,
    ONLY (UT_BASE_DISTANCE_COEFFICIENT) },
  { .name = "floor_loss_db",
    .type = UT_KEY_NUMBERS,
    FIELD (UtPropagation, floor_loss_db),
    LOSS_DB,
    ONLY (UT_BASE_DISTANCE_COEFFICIENT) },
  { NUMBER (UtPropagation, light_db), LOSS_DB, .value = 3.4, ONLY (UT_BASE_MULTI_WALL) },
  { NUMBER (UtPropagation, heavy_db), LOSS_DB, .value = 6.9, ONLY (UT_BASE_MULTI_WALL) },
  { NUMBER (UtPropagation, floor_db), LOSS_DB, .value = 18.3, ONLY (UT_BASE_MULTI_WALL) },
  { NUMBER (UtPropagation, b), FROM_0, .value = 0.46, ONLY (UT_BASE_MULTI_WALL) },
};
static const UtKind base_kind = { .label = "a base law",
                                  KEYS (base_keys),
                                  .has_source = TRUE,
                                  .source = G_STRUCT_OFFSET (UtPropagation, base_source),
                                  .variant = &base_keys[0] };

static const UtKey propagation_keys[] = {
  { .name = "base", .type = UT_KEY_INLINE, REQUIRED, .kind = &base_kind },
  { FLAG (UtPropagation, walls, TRUE) },
  { NUMBER (UtPropagation, wall_loss_limit_db), LOSS_DB, .value = 40 },
  { NUMBER (UtPropagation, excess_loss_limit_db), DECIBELS, NULLABLE },
  { CHOICE (UtPropagation, slab, slab_words) },
  { NUMBER (UtPropagation, shadowing_db), LOSS_DB },
  { NUMBER (UtPropagation, correlation_m), ABOVE_0, .value = 6 },
};
KIND (UtPropagation, ut_propagation, propagation) = { .label = "a propagation model",
                                                      .size = sizeof (UtPropagation),
                                                      KEYS (propagation_keys),
                                                      .has_source = TRUE,
                                                      .unref = ut_propagation_release };

static const UtKey own_material_keys[] = {
  { NUMBER (UtConstructionLayer, relative_permittivity),
    .lowest = 1,
    .highest = INFINITY,
    REQUIRED,
    .value = 1 },
  { NUMBER (UtConstructionLayer, conductivity_s_m), FROM_0, REQUIRED },
};
static const UtKind own_material_kind
    = { .label = "a material",
        KEYS (own_material_keys),
        .has_source = TRUE,
        .source = G_STRUCT_OFFSET (UtConstructionLayer, material_source) };

static const UtKey construction_layer_keys[] = {
  { .name = "material",
    .type = UT_KEY_MATERIAL,
    FIELD (UtConstructionLayer, material),
    REQUIRED,
    .text = "concrete",
    .words = material_words,
    .kind = &own_material_kind },
  { NUMBER (UtConstructionLayer, thickness_mm), ABOVE_0, REQUIRED, .value = 100 },
};
KIND (UtConstructionLayer, ut_construction_layer, construction_layer)
    = { .label = "a layer",
        .size = sizeof (UtConstructionLayer),
        KEYS (construction_layer_keys),
        .has_source = TRUE,
        .unref = ut_construction_layer_release };

static const UtKey construction_keys[] = {
  { ID (UtConstruction) },
  { NAME (UtConstruction) },
  { LIST (UtConstruction, layers, ut_kind_construction_layer), .flags = UT_KEY_SPARSE },
  { NUMBER (UtConstruction, loss_db), LOSS_DB, .flags = UT_KEY_SPARSE, .value = NAN },
  { .name = "class",
    .type = UT_KEY_WORD,
    FIELD (UtConstruction, wall_class),
    .flags = UT_KEY_SPARSE | UT_KEY_NULLABLE,
    .words = class_words },
};
KIND (UtConstruction, ut_construction, construction) = { .label = "a construction",
                                                         .size = sizeof (UtConstruction),
                                                         KEYS (construction_keys),
                                                         .has_source = TRUE,
                                                         .unref = ut_construction_release };

static const UtKey opening_keys[] = {
  { NUMBER (UtOpening, at_m), FROM_0, REQUIRED },
  { NUMBER (UtOpening, width_m), ABOVE_0, REQUIRED, .value = 1 },
  { REFERENCE (UtOpening, construction, UT_LIST_CONSTRUCTIONS), REQUIRED, .text = "" },
  { FLAG (UtOpening, shut, TRUE) },
  { NUMBER (UtOpening, sill_m), FROM_0 },
  { NUMBER (UtOpening, head_m), ANY, NULLABLE },
};
KIND (UtOpening, ut_opening, opening) = { .label = "an opening",
                                          .size = sizeof (UtOpening),
                                          KEYS (opening_keys),
                                          .has_source = TRUE,
                                          .unref = ut_opening_release };

static const UtKey wall_keys[] = {
  { ID (UtWall) },
  { REFERENCE (UtWall, construction, UT_LIST_CONSTRUCTIONS), REQUIRED, .text = "" },
  { NUMBER (UtWall, height_m), ABOVE_0, NULLABLE },
  { .name = "points", .type = UT_KEY_POINTS, FIELD (UtWall, points), ANY, REQUIRED },
  { LIST (UtWall, openings, ut_kind_opening) },
};
KIND (UtWall, ut_wall, wall) = { .label = "a wall",
                                 .size = sizeof (UtWall),
                                 KEYS (wall_keys),
                                 .has_source = TRUE,
                                 .unref = ut_wall_release };

static const UtKey backdrop_keys[] = {
  { .name = "media_type",
    .type = UT_KEY_WORD,
    FIELD (UtBackdrop, media_type),
    REQUIRED,
    .text = "image/png",
    .words = picture_words },
  { NUMBER (UtBackdrop, x_m), ANY },
  { NUMBER (UtBackdrop, y_m), ANY },
  { NUMBER (UtBackdrop, width_m), ABOVE_0, REQUIRED, .value = 1 },
  { NUMBER (UtBackdrop, height_m), ABOVE_0, REQUIRED, .value = 1 },
  { NUMBER (UtBackdrop, turn_deg), ANY },
  { NUMBER (UtBackdrop, opacity), SHARE, .value = 1 },
  { FLAG (UtBackdrop, locked, FALSE) },
  { .name = "data", .type = UT_KEY_DATA, FIELD (UtBackdrop, data), REQUIRED },
};
KIND (UtBackdrop, ut_backdrop, backdrop) = { .label = "a backdrop",
                                             .size = sizeof (UtBackdrop),
                                             KEYS (backdrop_keys),
                                             .has_source = TRUE,
                                             .unref = ut_backdrop_release };

static const UtKey storey_keys[] = {
  { ID (UtStorey) },
  { NAME (UtStorey) },
  { NUMBER (UtStorey, elevation_m), ANY, REQUIRED },
  { NUMBER (UtStorey, height_m), ABOVE_0, REQUIRED, .value = 3 },
  { REFERENCE (UtStorey, floor, UT_LIST_CONSTRUCTIONS), .flags = UT_KEY_NULLABLE },
  { LIST (UtStorey, walls, ut_kind_wall) },
  { .name = "backdrop",
    .type = UT_KEY_OBJECT,
    FIELD (UtStorey, backdrop),
    .flags = UT_KEY_NULLABLE,
    .kind = &ut_kind_backdrop },
};
KIND (UtStorey, ut_storey, storey) = { .label = "a storey",
                                       .size = sizeof (UtStorey),
                                       KEYS (storey_keys),
                                       .has_source = TRUE,
                                       .unref = ut_storey_release };

/* A new pattern: its word above, its keys here. */
static const UtKey antenna_keys[] = {
  { ID (UtAntenna) },
  { CHOICE (UtAntenna, pattern, pattern_words), REQUIRED },
  { NUMBER (UtAntenna, gain_dbi), DECIBELS, ONE_GAIN },
  { NUMBER (UtAntenna, beamwidth_h_deg), ABOVE_0, REQUIRED, .value = 65, ONLY (UT_ANTENNA_SECTOR) },
  { NUMBER (UtAntenna, beamwidth_v_deg), ABOVE_0, REQUIRED, .value = 65, ONLY (UT_ANTENNA_SECTOR) },
  { .name = "horizontal_dbi",
    .type = UT_KEY_NUMBERS,
    FIELD (UtAntenna, horizontal_dbi),
    DECIBELS,
    REQUIRED,
    .least = 2,
    ONLY (UT_ANTENNA_CUTS) },
  { .name = "vertical_dbi",
    .type = UT_KEY_NUMBERS,
    FIELD (UtAntenna, vertical_dbi),
    DECIBELS,
    REQUIRED,
    .least = 2,
    ONLY (UT_ANTENNA_CUTS) },
};
KIND (UtAntenna, ut_antenna, antenna) = { .label = "an antenna",
                                          .size = sizeof (UtAntenna),
                                          KEYS (antenna_keys),
                                          .has_source = TRUE,
                                          .variant = &antenna_keys[1],
                                          .unref = ut_antenna_release };

#define RADIO_PLACE_KEYS(height)                                                                   \
  { ID (UtRadio) }, { NAME (UtRadio) },                                                            \
      { REFERENCE (UtRadio, storey, UT_LIST_STOREYS), REQUIRED, .text = "" },                      \
      { NUMBER (UtRadio, x_m), ANY, REQUIRED }, { NUMBER (UtRadio, y_m), ANY, REQUIRED },          \
      { NUMBER (UtRadio, height_m), ANY, REQUIRED, .value = height },                              \
      { REFERENCE (UtRadio, antenna, UT_LIST_ANTENNAS), .text = "isotropic" },                     \
      { NUMBER (UtRadio, azimuth_deg), ANY },                                                      \
  {                                                                                                \
    NUMBER (UtRadio, downtilt_deg), .lowest = -90, .highest = 90                                   \
  }
#define RADIO_POWER_KEYS(power, lowest_power)                                                      \
  { NUMBER (UtRadio, power_dbm), DECIBELS, REQUIRED, .value = power },                             \
      { NUMBER (UtRadio, power_min_dbm), DECIBELS, REQUIRED, .value = lowest_power },              \
      { NUMBER (UtRadio, power_max_dbm), DECIBELS, REQUIRED, .value = power },                     \
      { NUMBER (UtRadio, power_step_db), LOSS_DB, REQUIRED },                                      \
  {                                                                                                \
    NUMBER (UtRadio, feeder_loss_db), LOSS_DB                                                      \
  }
#define FIELDS_KEY                                                                                 \
  {                                                                                                \
    .name = "fields", .type = UT_KEY_FIELDS, FIELD (UtRadio, fields), .flags = UT_KEY_SPARSE       \
  }

static const UtKey cell_keys[] = {
  RADIO_PLACE_KEYS (4),
  RADIO_POWER_KEYS (24, -10),
  { NUMBER (UtRadio, noise_figure_db), LOSS_DB, .value = 5 },
  { .name = "channel", .type = UT_KEY_INTEGER, FIELD (UtCell, channel), COUNT, .value = 1 },
  { NUMBER (UtRadio, activity), SHARE, .value = 1 },
  { FLAG (UtRadio, on, TRUE) },
  FIELDS_KEY,
};
KIND (UtCell, ut_cell, cell) = { .label = "a cell",
                                 .size = sizeof (UtCell),
                                 KEYS (cell_keys),
                                 .has_source = TRUE,
                                 .unref = ut_cell_release };

static const UtKey terminal_keys[] = {
  RADIO_PLACE_KEYS (1.5),
  RADIO_POWER_KEYS (23, -40),
  { NUMBER (UtTerminal, body_loss_db), LOSS_DB },
  { NUMBER (UtRadio, noise_figure_db), LOSS_DB, .value = 9 },
  { NUMBER (UtRadio, activity), SHARE, .value = 1 },
  { FLAG (UtRadio, on, TRUE) },
  { REFERENCE (UtTerminal, cell, UT_LIST_CELLS), .flags = UT_KEY_NULLABLE },
  { NUMBER (UtTerminal, level_down_dbm), DECIBELS, NULLABLE },
  { NUMBER (UtTerminal, level_up_dbm), DECIBELS, NULLABLE },
  { NUMBER (UtTerminal, target_down_db),
    DECIBELS,
    .flags = UT_KEY_REQUIRED | UT_KEY_NULLABLE,
    .value = 6 },
  { NUMBER (UtTerminal, target_up_db),
    DECIBELS,
    .flags = UT_KEY_REQUIRED | UT_KEY_NULLABLE,
    .value = 3 },
  { NUMBER (UtTerminal, priority), ABOVE_0, .value = 1 },
  FIELDS_KEY,
};
KIND (UtTerminal, ut_terminal, terminal) = { .label = "a terminal",
                                             .size = sizeof (UtTerminal),
                                             KEYS (terminal_keys),
                                             .has_source = TRUE,
                                             .unref = ut_terminal_release };

/* Not an object of the file: see UT_KEY_GAINS. */
static const UtKey measured_gain_keys[] = {
  { TEXT (UtMeasuredGain, terminal) },
  { TEXT (UtMeasuredGain, cell) },
  { NUMBER (UtMeasuredGain, gain_db), DECIBELS },
};
KIND (UtMeasuredGain, ut_measured_gain, measured_gain) = { .label = "a measured gain",
                                                           .size = sizeof (UtMeasuredGain),
                                                           KEYS (measured_gain_keys),
                                                           .unref = ut_measured_gain_release };

static const UtKey plan_keys[] = {
  { .name = "undertone", .type = UT_KEY_VERSION, REQUIRED, .value = UT_PLAN_VERSION },
  { TEXT (UtPlan, title) },
  { TEXT (UtPlan, client) },
  { TEXT (UtPlan, prepared_by) },
  { TEXT (UtPlan, revision) },
  { TEXT (UtPlan, date) },
  { TEXT (UtPlan, notes) },
  { .name = "site", .type = UT_KEY_OBJECT, FIELD (UtPlan, site), .kind = &ut_kind_site },
  { .name = "carrier",
    .type = UT_KEY_OBJECT,
    FIELD (UtPlan, carrier),
    REQUIRED,
    .kind = &ut_kind_carrier },
  { .name = "propagation",
    .type = UT_KEY_OBJECT,
    FIELD (UtPlan, propagation),
    REQUIRED,
    .kind = &ut_kind_propagation },
  { LIST (UtPlan, constructions, ut_kind_construction) },
  { LIST (UtPlan, storeys, ut_kind_storey), REQUIRED },
  { LIST (UtPlan, antennas, ut_kind_antenna) },
  { LIST (UtPlan, cells, ut_kind_cell), REQUIRED },
  { LIST (UtPlan, terminals, ut_kind_terminal), REQUIRED },
  { .name = "measured_gains_db",
    .type = UT_KEY_GAINS,
    FIELD (UtPlan, measured_gains),
    DECIBELS,
    .kind = &ut_kind_measured_gain },
};
KIND (UtPlan, ut_plan, plan) = { .label = "a plan",
                                 .size = sizeof (UtPlan),
                                 KEYS (plan_keys),
                                 .has_source = TRUE,
                                 .unref = ut_plan_release };

const UtKey *
ut_kind_find (const UtKind *kind, const char *name)
{
  for (guint i = 0; i < kind->n_keys; i++)
    if (g_str_equal (kind->keys[i].name, name))
      return &kind->keys[i];
  return NULL;
}

gboolean
ut_kind_has (const UtKind *kind, const UtKey *key, gconstpointer item)
{
  return key->variants == 0
         || (key->variants & (1u << UT_FIELD (const guint, item, kind->variant))) != 0;
}
