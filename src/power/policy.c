#include "policy.h"

#include <stdlib.h>
#include <string.h>

#define KEEP (1 - 1e-13)

UtPowerStatus
ut_policy_init (UtPolicy *policy, const UtSystem *system)
{
  policy->piece = malloc ((system->n_unknowns + 1) * sizeof *policy->piece);
  policy->term = malloc ((system->n_groups + 1) * sizeof *policy->term);
  if (policy->piece == NULL || policy->term == NULL)
    return UT_POWER_NO_MEMORY;
  for (size_t i = 0; i < system->n_unknowns; i++)
    policy->piece[i] = UT_POLICY_FLOOR;
  for (size_t g = 0; g < system->n_groups; g++)
    policy->term[g] = UT_POLICY_CONSTANT;
  return UT_POWER_OK;
}

void
ut_policy_clear (UtPolicy *policy)
{
  free (policy->piece);
  free (policy->term);
  memset (policy, 0, sizeof *policy);
}

static double
term_value (const UtSystem *system, size_t term, const double *p)
{
  return system->terms[term].weight * p[system->terms[term].unknown];
}

/* Chooses inside one group; returns the group's value, the largest there is. */
static double
improve_group (size_t *choice,
               const UtSystem *system,
               const UtGroup *group,
               UtLift lift,
               const double *p,
               bool *changed)
{
  double constant = ut_system_group_constant (group, lift);
  double most = constant;
  size_t best = UT_POLICY_CONSTANT;
  for (size_t l = group->first_term; l < group->first_term + group->n_terms; l++)
    {
      double value = term_value (system, l, p);
      if (value > most)
        {
          most = value;
          best = l;
        }
    }
  if (best == *choice)
    return most;
  double kept = *choice == UT_POLICY_CONSTANT ? constant : term_value (system, *choice, p);
  if (!(kept >= KEEP * most))
    {
      *choice = best;
      *changed = true;
    }
  return most;
}

static bool
improve_row (UtPolicy *policy,
             const UtSystem *system,
             UtLift lift,
             double factor,
             const double *p,
             uint32_t row)
{
  double floor_value = ut_system_floor (system, row, lift);
  size_t old = policy->piece[row], best = UT_POLICY_FLOOR;
  double most = floor_value, kept = floor_value;
  bool changed_inside = false;
  for (size_t k = system->first_piece[row]; k < system->first_piece[row + 1]; k++)
    {
      const UtPiece *piece = &system->pieces[k];
      bool changed = false;
      double value = ut_system_piece_constant (piece, lift);
      for (size_t g = piece->first_group; g < piece->first_group + piece->n_groups; g++)
        value += improve_group (&policy->term[g], system, &system->groups[g], lift, p, &changed);
      value *= factor;
      if (k == old)
        {
          kept = value;
          changed_inside = changed;
        }
      if (value > most)
        {
          most = value;
          best = k;
        }
    }
  if (kept >= KEEP * most)
    return changed_inside;
  policy->piece[row] = best;
  return true;
}

bool
ut_policy_improve (UtPolicy *policy,
                   const UtSystem *system,
                   UtLift lift,
                   double factor,
                   const double *p,
                   const uint32_t *rows,
                   size_t n_rows)
{
  bool changed = false;
  for (size_t r = 0; r < n_rows; r++)
    if (improve_row (policy, system, lift, factor, p, rows[r]))
      changed = true;
  return changed;
}

void
ut_policy_build (const UtPolicy *policy,
                 const UtSystem *system,
                 const UtComponents *components,
                 size_t component,
                 UtLift lift,
                 double factor,
                 const double *p,
                 double *a,
                 double *b)
{
  const uint32_t *rows = &components->rows[components->first[component]];
  size_t n = components->first[component + 1] - components->first[component];
  memset (a, 0, n * n * sizeof *a);
  for (size_t r = 0; r < n; r++)
    {
      size_t chosen = policy->piece[rows[r]];
      a[r * n + r] = 1;
      if (chosen == UT_POLICY_FLOOR)
        {
          b[r] = ut_system_floor (system, rows[r], lift);
          continue;
        }
      const UtPiece *piece = &system->pieces[chosen];
      double constant = ut_system_piece_constant (piece, lift);
      for (size_t g = piece->first_group; g < piece->first_group + piece->n_groups; g++)
        {
          size_t l = policy->term[g];
          if (l == UT_POLICY_CONSTANT)
            constant += ut_system_group_constant (&system->groups[g], lift);
          else if (components->of[system->terms[l].unknown] != component)
            constant += term_value (system, l, p);
          else
            a[components->place[system->terms[l].unknown] * n + r]
                -= factor * system->terms[l].weight;
        }
      b[r] = factor * constant;
    }
}
