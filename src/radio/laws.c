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
} Law;

/* One line a law. */
static const Law laws[] = {
  [UT_LAW_FREE_SPACE] = { "free-space", "ITU-R P.525-5, free-space basic transmission loss", ut_free_space_loss },
  [UT_LAW_LOG_DISTANCE] = { "log-distance", "free space (ITU-R P.525-5) to the reference distance, then 10 n log10 (d / d0); common practice",
                            ut_log_distance_loss },
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
