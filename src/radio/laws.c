#include "laws.h"

#include <math.h>
#include <stddef.h>
#include <string.h>

#include "law-families.h"

typedef struct
{
  const char *name;
  const char *source;
  UtLawLoss loss;
  UtLawRanges range; /* NULL: none is stated */
} Law;

/* One line a law. */
static const Law laws[] = {
  [UT_LAW_FREE_SPACE] = { "free-space", "ITU-R P.525-5, free-space basic transmission loss", ut_free_space_loss, NULL },
  [UT_LAW_LOG_DISTANCE] = { "log-distance", "free space (ITU-R P.525-5) to the reference distance, then 10 n log10 (d / d0); common practice",
                            ut_log_distance_loss, NULL },
  [UT_LAW_SITE_GENERAL] = { "site-general", "ITU-R P.1238-11 equation (1), table 2", ut_site_general_loss, ut_site_general_range },
  [UT_LAW_DISTANCE_COEFFICIENT] = { "distance-coefficient", "distance power-loss coefficient and floors, ITU-R P.1238-8",
                                    ut_distance_coefficient_loss, ut_distance_coefficient_range },
  [UT_LAW_INDOOR_OFFICE] = { "indoor-office", "3GPP TR 38.901 table 7.4.1-1, InH", ut_indoor_office_loss, ut_indoor_office_range },
  [UT_LAW_INDOOR_FACTORY] = { "indoor-factory", "3GPP TR 38.901 table 7.4.1-1, InF", ut_indoor_factory_loss, ut_indoor_factory_range },
  [UT_LAW_MULTI_WALL] = { "multi-wall", "COST 231 Final Report, section 4.7", ut_multi_wall_loss, ut_multi_wall_range },
};

#define N_LAWS (sizeof laws / sizeof laws[0])

static const Law *
law_of (UtLawKind kind)
{
  return (size_t) kind < N_LAWS ? &laws[kind] : NULL;
}

const char *
ut_law_name (UtLawKind kind)
{
  return law_of (kind) != NULL ? law_of (kind)->name : NULL;
}

const char *
ut_law_source (UtLawKind kind)
{
  return law_of (kind) != NULL ? law_of (kind)->source : NULL;
}

UtRadioStatus
ut_law_find (const char *name, UtLawKind *kind)
{
  for (size_t i = 0; i < N_LAWS; i++)
    if (strcmp (laws[i].name, name) == 0)
      {
        *kind = (UtLawKind) i;
        return UT_RADIO_OK;
      }
  return UT_RADIO_UNKNOWN;
}

UtRadioStatus
ut_law_loss_db (const UtLaw *law, const UtLawPath *path, double *loss_db)
{
  const Law *entry = law_of (law->kind);
  UtLawPath clamped = *path;

  if (entry == NULL)
    return UT_RADIO_UNKNOWN;
  if (!isfinite (path->frequency_hz) || !(path->frequency_hz > 0) || !isfinite (path->distance_m) || !(path->distance_m >= 0))
    return UT_RADIO_INVALID;
  /* Below a metre the far field ends and the laws with it. */
  clamped.distance_m = fmax (path->distance_m, 1);
  return entry->loss (law, &clamped, loss_db);
}

static bool
has_rows (const UtLaw *law)
{
  return law->kind == UT_LAW_SITE_GENERAL || law->kind == UT_LAW_INDOOR_OFFICE || law->kind == UT_LAW_INDOOR_FACTORY;
}

bool
ut_law_is_nlos (const UtLaw *law, const UtLawPath *path)
{
  return has_rows (law) && (law->sight == UT_SIGHT_NLOS || (law->sight == UT_SIGHT_BY_WALLS && path->obstructed));
}

bool
ut_law_holds_walls (const UtLaw *law, const UtLawPath *path)
{
  return law->kind == UT_LAW_DISTANCE_COEFFICIENT || law->kind == UT_LAW_MULTI_WALL || ut_law_is_nlos (law, path);
}

UtLawRange
ut_law_range (const UtLaw *law, const UtLawPath *path)
{
  const Law *entry = law_of (law->kind);

  if (entry == NULL || entry->range == NULL)
    return (UtLawRange){ 0, INFINITY, 0, INFINITY, NAN };
  return entry->range (law, path);
}
