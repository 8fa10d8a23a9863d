#include "capped.h"

#include <float.h>
#include <math.h>
#include <stdlib.h>

#include "least.h"
#include "perron.h"

/* Nearer than this to floor or limit is at it. */
#define HAIR 1e-12

/* The same system with some unknowns fixed; what is not written to is borrowed. */
typedef struct
{
  UtSystem system;
  double *minimum;
  UtPiece *pieces;
} Part;

static double
limit_of (const UtSystem *system, size_t i)
{
  return system->limits[system->limit_of[i]].limit;
}

static bool
part_init (Part *part, const UtSystem *system)
{
  part->system = *system;
  part->minimum = malloc ((system->n_unknowns + 1) * sizeof *part->minimum);
  part->pieces = malloc ((system->n_pieces + 1) * sizeof *part->pieces);
  if (part->minimum == NULL || part->pieces == NULL)
    return false;
  for (size_t i = 0; i < system->n_unknowns; i++)
    part->minimum[i] = system->minimum[i];
  for (size_t k = 0; k < system->n_pieces; k++)
    part->pieces[k] = system->pieces[k];
  part->system.minimum = part->minimum;
  part->system.pieces = part->pieces;
  return true;
}

static void
part_clear (Part *part)
{
  free (part->minimum);
  free (part->pieces);
}

/* The unknown stands at `value` whatever the others do. */
static void
fix (Part *part, size_t i, double value)
{
  part->minimum[i] = value;
  for (size_t k = part->system.first_piece[i]; k < part->system.first_piece[i + 1]; k++)
    {
      part->pieces[k].noise = DBL_MIN;
      part->pieces[k].idle = 0;
      part->pieces[k].n_groups = 0;
    }
}

static bool
wants_less_than_limit (const UtSystem *system, size_t i, const double *p)
{
  double wanted = fmax (ut_system_floor (system, i, UT_LIFT_NOTHING), ut_system_need (system, i, p, UT_LIFT_NOTHING));

  return wanted < limit_of (system, i) * (1 - HAIR);
}

/* From all at their limits down: those who want less are let go, the others stand; each round's powers are an upper bound of the fixed point,
 * so whoever is let go never comes back. */
static UtPowerStatus
let_go (const UtSystem *system, double *p, bool *below)
{
  UtPowerStatus status = UT_POWER_OK;
  bool changed = true;

  while (changed && status == UT_POWER_OK)
    {
      Part part;

      changed = false;
      for (size_t i = 0; i < system->n_unknowns; i++)
        if (!below[i] && wants_less_than_limit (system, i, p))
          below[i] = changed = true;
      if (!changed)
        break;
      status = part_init (&part, system) ? UT_POWER_OK : UT_POWER_NO_MEMORY;
      for (size_t i = 0; status == UT_POWER_OK && i < system->n_unknowns; i++)
        if (!below[i])
          fix (&part, i, limit_of (system, i));
      if (status == UT_POWER_OK)
        status = ut_least_powers (&part.system, 1, UT_LIFT_LIMITS, p, NULL);
      part_clear (&part);
    }
  return status;
}

UtPowerStatus
ut_capped_powers (const UtSystem *system, double *power)
{
  bool *below = calloc (system->n_unknowns + 1, sizeof *below);
  UtPowerStatus status = below == NULL ? UT_POWER_NO_MEMORY : UT_POWER_OK;

  for (size_t k = 0; k < system->n_limits; k++)
    if (system->limits[k].n_members != 1)
      status = UT_POWER_INVALID;
  for (size_t i = 0; status == UT_POWER_OK && i < system->n_unknowns; i++)
    power[i] = limit_of (system, i);
  if (status == UT_POWER_OK)
    status = let_go (system, power, below);
  free (below);
  return status;
}

/* Leaves of an unknown's pieces only the largest, and of its groups' terms only the largest. */
static void
keep_active (Part *part, UtGroup *groups, size_t i, const double *p)
{
  const UtSystem *system = &part->system;
  size_t best = system->first_piece[i];

  for (size_t k = best; k < system->first_piece[i + 1]; k++)
    if (ut_system_piece_value (system, &system->pieces[k], p, UT_LIFT_NOTHING)
        > ut_system_piece_value (system, &system->pieces[best], p, UT_LIFT_NOTHING))
      best = k;
  for (size_t k = system->first_piece[i]; k < system->first_piece[i + 1]; k++)
    if (k != best)
      part->pieces[k].n_groups = 0;
  for (size_t g = part->pieces[best].first_group; g < part->pieces[best].first_group + part->pieces[best].n_groups; g++)
    {
      size_t loudest = groups[g].first_term;
      double most = ut_system_group_constant (&groups[g], UT_LIFT_NOTHING);
      bool moves = false;

      for (size_t t = groups[g].first_term; t < groups[g].first_term + groups[g].n_terms; t++)
        if (system->terms[t].weight * p[system->terms[t].unknown] > most)
          {
            most = system->terms[t].weight * p[system->terms[t].unknown];
            loudest = t;
            moves = true;
          }
      groups[g].first_term = loudest;
      groups[g].n_terms = moves ? 1 : 0;
    }
}

UtPowerStatus
ut_capped_rate (const UtSystem *system, const double *power, double *rate)
{
  Part part;
  UtRadius radius;
  UtGroup *groups = malloc ((system->n_groups + 1) * sizeof *groups);
  UtPowerStatus status = part_init (&part, system) && groups != NULL ? UT_POWER_OK : UT_POWER_NO_MEMORY;

  if (status == UT_POWER_OK)
    {
      for (size_t g = 0; g < system->n_groups; g++)
        groups[g] = system->groups[g];
      part.system.groups = groups;
      for (size_t i = 0; i < system->n_unknowns; i++)
        if (!wants_less_than_limit (system, i, power)
            || ut_system_need (system, i, power, UT_LIFT_NOTHING) < ut_system_floor (system, i, UT_LIFT_NOTHING) * (1 - HAIR))
          fix (&part, i, power[i]);
        else
          keep_active (&part, groups, i, power);
      status = ut_spectral_radius (&part.system, &radius);
    }
  if (status == UT_POWER_OK)
    *rate = radius.value;
  part_clear (&part);
  free (groups);
  return status;
}
