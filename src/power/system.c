/* Building, checking and evaluating the interference system. */
#include "system.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

static bool
is_amount (double x)
{
  return isfinite (x) && x >= 0;
}

/* calloc that never asks for nothing, so that NULL always means trouble. */
static void *
new_array (size_t n, size_t size)
{
  return calloc (n > 0 ? n : 1, size);
}

void
ut_system_init (UtSystem *system, size_t n_unknowns)
{
  memset (system, 0, sizeof *system);
  system->n_unknowns = n_unknowns;
  system->minimum = new_array (n_unknowns, sizeof *system->minimum);
  system->level = new_array (n_unknowns, sizeof *system->level);
  system->failed = system->minimum == NULL || system->level == NULL;
}

void
ut_system_clear (UtSystem *system)
{
  free (system->minimum);
  free (system->level);
  free (system->pieces);
  free (system->first_piece);
  free (system->groups);
  free (system->terms);
  free (system->limits);
  free (system->members);
  free (system->limit_of);
  memset (system, 0, sizeof *system);
}

/* Makes room for one more item; items is the address of the array's pointer, passed by value and
 * returned, so that one function serves every array. */
static void *
grown (UtSystem *system, void *items, size_t n, size_t *room, size_t size)
{
  if (system->failed)
    return items;
  if (n < *room)
    return items;
  size_t more = *room > 0 ? 2 * *room : 32;
  void *moved = more > SIZE_MAX / size ? NULL : realloc (items, more * size);
  if (moved == NULL)
    {
      system->failed = true;
      return items;
    }
  *room = more;
  return moved;
}

void
ut_system_set_floor (UtSystem *system, uint32_t unknown, double minimum, double level)
{
  if (system->failed)
    return;
  if (unknown >= system->n_unknowns)
    {
      system->malformed = true;
      return;
    }
  system->minimum[unknown] = minimum;
  system->level[unknown] = level;
}

void
ut_system_add_piece (UtSystem *system, uint32_t unknown, double noise, double idle)
{
  system->pieces = grown (
      system, system->pieces, system->n_pieces, &system->room_pieces, sizeof *system->pieces);
  if (system->failed)
    return;
  system->pieces[system->n_pieces++] = (UtPiece){
    .unknown = unknown, .noise = noise, .idle = idle, .first_group = system->n_groups
  };
}

void
ut_system_add_group (UtSystem *system, double minimum, double level)
{
  system->groups = grown (
      system, system->groups, system->n_groups, &system->room_groups, sizeof *system->groups);
  if (system->failed)
    return;
  if (system->n_pieces == 0)
    {
      system->malformed = true;
      return;
    }
  system->groups[system->n_groups++]
      = (UtGroup){ .minimum = minimum, .level = level, .first_term = system->n_terms };
  system->pieces[system->n_pieces - 1].n_groups++;
}

void
ut_system_add_term (UtSystem *system, uint32_t unknown, double weight)
{
  system->terms
      = grown (system, system->terms, system->n_terms, &system->room_terms, sizeof *system->terms);
  if (system->failed)
    return;
  /* A term right after a piece would silently join the previous piece's last group. */
  if (system->n_pieces == 0 || system->pieces[system->n_pieces - 1].n_groups == 0)
    {
      system->malformed = true;
      return;
    }
  system->terms[system->n_terms++] = (UtTerm){ .unknown = unknown, .weight = weight };
  system->groups[system->n_groups - 1].n_terms++;
}

void
ut_system_add_limit (UtSystem *system, double limit)
{
  system->limits = grown (
      system, system->limits, system->n_limits, &system->room_limits, sizeof *system->limits);
  if (system->failed)
    return;
  system->limits[system->n_limits++]
      = (UtLimit){ .limit = limit, .first_member = system->n_members };
}

void
ut_system_add_member (UtSystem *system, uint32_t unknown)
{
  system->members = grown (
      system, system->members, system->n_members, &system->room_members, sizeof *system->members);
  if (system->failed)
    return;
  if (system->n_limits == 0)
    {
      system->malformed = true;
      return;
    }
  system->members[system->n_members++] = unknown;
  system->limits[system->n_limits - 1].n_members++;
}

static bool
numbers_are_sound (const UtSystem *system)
{
  for (size_t i = 0; i < system->n_unknowns; i++)
    if (!is_amount (system->minimum[i]) || !is_amount (system->level[i]))
      return false;
  for (size_t k = 0; k < system->n_pieces; k++)
    {
      const UtPiece *piece = &system->pieces[k];
      if (piece->unknown >= system->n_unknowns || !is_amount (piece->idle)
          || !is_amount (piece->noise) || piece->noise <= 0)
        return false;
    }
  for (size_t g = 0; g < system->n_groups; g++)
    if (!is_amount (system->groups[g].minimum) || !is_amount (system->groups[g].level))
      return false;
  for (size_t l = 0; l < system->n_terms; l++)
    if (system->terms[l].unknown >= system->n_unknowns || !is_amount (system->terms[l].weight))
      return false;
  return true;
}

/* Counting sort: stable, linear. */
static UtPowerStatus
sort_pieces (UtSystem *system)
{
  size_t n = system->n_unknowns;
  size_t *first = new_array (n + 1, sizeof *first);
  size_t *next = new_array (n, sizeof *next);
  UtPiece *sorted = new_array (system->n_pieces, sizeof *sorted);
  if (first == NULL || next == NULL || sorted == NULL)
    {
      free (first);
      free (next);
      free (sorted);
      return UT_POWER_NO_MEMORY;
    }
  for (size_t k = 0; k < system->n_pieces; k++)
    first[system->pieces[k].unknown + 1]++;
  bool every_unknown = true;
  for (size_t i = 0; i < n; i++)
    {
      every_unknown = every_unknown && first[i + 1] > 0;
      first[i + 1] += first[i];
      next[i] = first[i];
    }
  for (size_t k = 0; k < system->n_pieces; k++)
    sorted[next[system->pieces[k].unknown]++] = system->pieces[k];
  free (next);
  free (system->pieces);
  free (system->first_piece);
  system->pieces = sorted;
  system->room_pieces = system->n_pieces;
  system->first_piece = first;
  return every_unknown ? UT_POWER_OK : UT_POWER_INVALID;
}

static UtPowerStatus
find_limits (UtSystem *system)
{
  size_t *limit_of = new_array (system->n_unknowns, sizeof *limit_of);
  if (limit_of == NULL)
    return UT_POWER_NO_MEMORY;
  free (system->limit_of);
  system->limit_of = limit_of;
  for (size_t i = 0; i < system->n_unknowns; i++)
    limit_of[i] = SIZE_MAX;
  for (size_t k = 0; k < system->n_limits; k++)
    {
      const UtLimit *limit = &system->limits[k];
      if (!is_amount (limit->limit) || limit->limit <= 0)
        return UT_POWER_INVALID;
      for (size_t m = 0; m < limit->n_members; m++)
        {
          uint32_t i = system->members[limit->first_member + m];
          if (i >= system->n_unknowns || limit_of[i] != SIZE_MAX)
            return UT_POWER_INVALID;
          limit_of[i] = k;
        }
    }
  for (size_t i = 0; i < system->n_unknowns; i++)
    if (limit_of[i] == SIZE_MAX)
      return UT_POWER_INVALID;
  return UT_POWER_OK;
}

UtPowerStatus
ut_system_finish (UtSystem *system)
{
  if (system->failed)
    return UT_POWER_NO_MEMORY;
  if (system->malformed || system->n_unknowns > UINT32_MAX || !numbers_are_sound (system))
    return UT_POWER_INVALID;
  UtPowerStatus status = sort_pieces (system);
  return status == UT_POWER_OK ? find_limits (system) : status;
}

double
ut_system_piece_value (const UtSystem *system, const UtPiece *piece, const double *p, UtLift lift)
{
  double sum = ut_system_piece_constant (piece, lift);
  for (size_t g = piece->first_group; g < piece->first_group + piece->n_groups; g++)
    {
      const UtGroup *group = &system->groups[g];
      double most = ut_system_group_constant (group, lift);
      for (size_t l = group->first_term; l < group->first_term + group->n_terms; l++)
        {
          double value = system->terms[l].weight * p[system->terms[l].unknown];
          if (value > most)
            most = value;
        }
      sum += most;
    }
  return sum;
}

double
ut_system_need (const UtSystem *system, size_t unknown, const double *p, UtLift lift)
{
  double most = 0;
  for (size_t k = system->first_piece[unknown]; k < system->first_piece[unknown + 1]; k++)
    {
      double value = ut_system_piece_value (system, &system->pieces[k], p, lift);
      if (value > most)
        most = value;
    }
  return most;
}

double
ut_system_floor (const UtSystem *system, size_t unknown, UtLift lift)
{
  if (lift & UT_LIFT_CONSTANTS)
    return 0;
  return lift & UT_LIFT_MINIMA ? system->level[unknown]
                               : fmax (system->minimum[unknown], system->level[unknown]);
}

double
ut_system_limit_sum (const UtSystem *system, size_t limit, const double *p)
{
  const UtLimit *l = &system->limits[limit];
  double sum = 0;
  for (size_t m = 0; m < l->n_members; m++)
    sum += p[system->members[l->first_member + m]];
  return sum;
}
