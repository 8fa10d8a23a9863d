#include "edge.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "dense.h"
#include "perron.h"
#include "policy.h"

/* Unknowns closer to their floor than this are at it. */
#define AT_FLOOR 1e-9

/* The edge is where the matrix becomes singular: this far off it is solved. */
#define SHIFT 1e-7

/* Each solve brings the vector nearer by about SHIFT over the distance to the next root. */
#define N_SOLVES 3

/* Smaller parts are not listed. */
#define LEAST_PART 1e-6

/* The linear system that is active at p. */
typedef struct
{
  const UtSystem *system;
  UtPolicy policy;
  UtLift lift;
  double factor;
  const double *p;
  size_t *place; /* n_unknowns: row of the unknowns that can move, SIZE_MAX for the others */
  size_t n;
  size_t limit;     /* the full one; n_limits: none */
  double limit_use; /* what its members that can move use of it */
} Active;

static size_t
fullest_limit (const UtSystem *system, const double *p)
{
  double most = -1;
  size_t fullest = 0;

  for (size_t k = 0; k < system->n_limits; k++)
    if (ut_system_limit_sum (system, k, p) / system->limits[k].limit > most)
      {
        most = ut_system_limit_sum (system, k, p) / system->limits[k].limit;
        fullest = k;
      }
  return fullest;
}

/* What unknown `row` asks for whatever the others do, factor included. */
static double
constant_of (const Active *active, size_t row)
{
  const UtSystem *system = active->system;
  const UtPiece *piece = &system->pieces[active->policy.piece[row]];
  double constant = ut_system_piece_constant (piece, active->lift);

  for (size_t g = piece->first_group; g < piece->first_group + piece->n_groups; g++)
    {
      size_t term = active->policy.term[g];

      if (term == UT_POLICY_CONSTANT)
        constant += ut_system_group_constant (&system->groups[g], active->lift);
      else if (active->place[system->terms[term].unknown] == SIZE_MAX)
        constant += system->terms[term].weight * active->p[system->terms[term].unknown];
    }
  return active->factor * constant;
}

/* Calls for what unknown `row` hears of each other one, factor included: `weight` a unit where that one can move, else `fixed`. */
typedef void (*UseHeard) (void *data, size_t row, size_t unknown, double weight, double fixed);

static void
for_heard (const Active *active, size_t row, UseHeard use, void *data)
{
  const UtSystem *system = active->system;
  const UtPiece *piece = &system->pieces[active->policy.piece[row]];

  for (size_t g = piece->first_group; g < piece->first_group + piece->n_groups; g++)
    {
      const UtGroup *group = &system->groups[g];
      const UtTerm *term = &system->terms[active->policy.term[g] == UT_POLICY_CONSTANT ? group->first_term : active->policy.term[g]];

      if (group->n_terms == 0)
        continue;
      if (active->policy.term[g] == UT_POLICY_CONSTANT)
        use (data, row, term->unknown, 0, active->factor * ut_system_group_constant (group, active->lift));
      else if (active->place[term->unknown] == SIZE_MAX)
        use (data, row, term->unknown, 0, active->factor * term->weight * active->p[term->unknown]);
      else
        use (data, row, term->unknown, active->factor * term->weight, 0);
    }
}

typedef struct
{
  const Active *active;
  double *a;
} Fill;

/* a is the transpose of (1 + SHIFT) I - B, column after column: column `row` holds row `row` of B. */
static void
fill_heard (void *data, size_t row, size_t unknown, double weight, double fixed)
{
  Fill *fill = data;

  (void) fixed;
  if (weight > 0)
    fill->a[fill->active->place[row] * fill->active->n + fill->active->place[unknown]] -= weight;
}

static void
fill_matrix (const Active *active, double *a)
{
  const UtSystem *system = active->system;
  Fill fill = { active, a };

  for (size_t i = 0; i < system->n_unknowns; i++)
    if (active->place[i] != SIZE_MAX)
      {
        double *column = a + active->place[i] * active->n;

        for_heard (active, i, fill_heard, &fill);
        if (active->limit < system->n_limits)
          {
            const UtLimit *limit = &system->limits[active->limit];
            double constant = constant_of (active, i);

            for (size_t m = limit->first_member; m < limit->first_member + limit->n_members; m++)
              if (active->place[system->members[m]] != SIZE_MAX)
                column[active->place[system->members[m]]] -= constant / active->limit_use;
          }
        column[active->place[i]] += 1 + SHIFT;
      }
}

/* y, place by place, such that y B is y, near enough. */
static UtPowerStatus
solve_left (const Active *active, double *y)
{
  double *a = calloc (active->n * active->n, sizeof *a);
  UtPowerStatus status = a == NULL ? UT_POWER_NO_MEMORY : UT_POWER_OK;

  for (size_t i = 0; i < active->system->n_unknowns; i++)
    if (active->place[i] != SIZE_MAX)
      y[active->place[i]] = 1 / active->p[i];
  if (status == UT_POWER_OK)
    fill_matrix (active, a);
  if (status == UT_POWER_OK && !ut_dense_factor (active->n, a))
    status = UT_POWER_NONE;
  for (int round = 0; status == UT_POWER_OK && round < N_SOLVES; round++)
    {
      double most = 0;

      ut_dense_solve (active->n, a, 1, y);
      for (size_t i = 0; i < active->n; i++)
        most = fmax (most, y[i]);
      for (size_t i = 0; i < active->n; i++)
        y[i] /= most;
    }
  free (a);
  return status;
}

typedef struct
{
  const Active *active;
  UtEdge *edge;
  double scale; /* y of the row over the sum of all */
} Share;

static void
share_heard (void *data, size_t row, size_t unknown, double weight, double fixed)
{
  Share *share = data;
  double part = share->scale * (weight > 0 ? weight * share->active->p[unknown] : fixed);

  if (part > LEAST_PART)
    share->edge->parts[share->edge->n_parts++] = (UtEdgePart){ (uint32_t) row, (uint32_t) unknown, part };
}

static int
compare_parts (const void *one, const void *other)
{
  const UtEdgePart *a = one, *b = other;

  if (a->part > b->part || a->part < b->part)
    return a->part > b->part ? -1 : 1;
  if (a->victim != b->victim)
    return a->victim > b->victim ? 1 : -1;
  return (a->culprit > b->culprit) - (a->culprit < b->culprit);
}

static UtPowerStatus
share_out (const Active *active, UtEdge *edge)
{
  const UtSystem *system = active->system;
  double *y = malloc ((active->n + 1) * sizeof *y), sum = 0;
  UtPowerStatus status = y == NULL ? UT_POWER_NO_MEMORY : solve_left (active, y);
  Share share = { active, edge, 0 };

  for (size_t i = 0; status == UT_POWER_OK && i < system->n_unknowns; i++)
    if (active->place[i] != SIZE_MAX)
      sum += y[active->place[i]] * active->p[i];
  for (size_t i = 0; status == UT_POWER_OK && i < system->n_unknowns; i++)
    if (active->place[i] != SIZE_MAX)
      {
        share.scale = y[active->place[i]] / sum;
        edge->involvement[i] = share.scale * active->p[i];
        edge->constant[i] = share.scale * active->factor * ut_system_piece_constant (&system->pieces[active->policy.piece[i]], active->lift);
        for_heard (active, i, share_heard, &share);
      }
  if (status == UT_POWER_OK)
    qsort (edge->parts, edge->n_parts, sizeof *edge->parts, compare_parts);
  free (y);
  return status;
}

static bool
edge_alloc (UtEdge *edge, const UtSystem *system)
{
  memset (edge, 0, sizeof *edge);
  edge->involvement = calloc (system->n_unknowns + 1, sizeof *edge->involvement);
  edge->constant = calloc (system->n_unknowns + 1, sizeof *edge->constant);
  edge->parts = malloc ((system->n_groups + 1) * sizeof *edge->parts);
  edge->full_limit = system->n_limits;
  return edge->involvement != NULL && edge->constant != NULL && edge->parts != NULL;
}

void
ut_edge_clear (UtEdge *edge)
{
  free (edge->involvement);
  free (edge->constant);
  free (edge->parts);
  memset (edge, 0, sizeof *edge);
}

/* Whether an unknown takes part: it is above its floor or, fixed by limit and floor alike, asks for all that it has. */
static bool
takes_part (const Active *active, size_t i)
{
  double floor_value = ut_system_floor (active->system, i, active->lift);

  if (active->policy.piece[i] == UT_POLICY_FLOOR || !(active->p[i] > 0))
    return false;
  if (active->p[i] > floor_value * (1 + AT_FLOOR))
    return true;
  return active->system->limit_of[i] == active->limit
         && active->factor * ut_system_need (active->system, i, active->p, active->lift) >= active->p[i] * (1 - AT_FLOOR);
}

/* Chooses what is active at p, and who can move. */
static UtPowerStatus
find_active (Active *active)
{
  const UtSystem *system = active->system;
  uint32_t *rows = malloc ((system->n_unknowns + 1) * sizeof *rows);
  UtPowerStatus status = rows == NULL ? UT_POWER_NO_MEMORY : ut_policy_init (&active->policy, system);

  for (size_t i = 0; rows != NULL && i < system->n_unknowns; i++)
    rows[i] = (uint32_t) i;
  if (status == UT_POWER_OK)
    {
      ut_dense_threads (system->n_unknowns);
      /* A hair more than the factor: where a piece and a floor are equal, the piece is what matters. */
      ut_policy_improve (&active->policy, system, active->lift, active->factor * (1 + 2 * AT_FLOOR), active->p, rows, system->n_unknowns);
      for (size_t i = 0; i < system->n_unknowns; i++)
        {
          bool moves = takes_part (active, i);

          active->place[i] = moves ? active->n++ : SIZE_MAX;
          if (moves && system->limit_of[i] == active->limit)
            active->limit_use += active->p[i];
        }
      if (active->n == 0 || (active->limit < system->n_limits && !(active->limit_use > 0)))
        status = UT_POWER_NONE;
    }
  free (rows);
  return status;
}

static UtPowerStatus
find_edge (const UtSystem *system, UtLift lift, double factor, const double *p, size_t limit, UtEdge *edge)
{
  Active active = { .system = system, .lift = lift, .factor = factor, .p = p, .limit = limit };
  UtPowerStatus status = edge_alloc (edge, system) ? UT_POWER_OK : UT_POWER_NO_MEMORY;

  active.place = malloc ((system->n_unknowns + 1) * sizeof *active.place);
  if (active.place == NULL)
    status = UT_POWER_NO_MEMORY;
  if (status == UT_POWER_OK)
    status = find_active (&active);
  if (status == UT_POWER_OK)
    status = share_out (&active, edge);
  edge->full_limit = limit;
  ut_policy_clear (&active.policy);
  free (active.place);
  return status;
}

UtPowerStatus
ut_edge_of_headroom (const UtSystem *system, double factor, const double *p, UtEdge *edge)
{
  memset (edge, 0, sizeof *edge);
  return system->n_unknowns == 0 ? UT_POWER_NONE : find_edge (system, UT_LIFT_NOTHING, factor, p, fullest_limit (system, p), edge);
}

UtPowerStatus
ut_edge_of_interference (const UtSystem *system, double *vector, UtEdge *edge)
{
  UtRadius radius = { 0 };
  UtPowerStatus status = ut_perron (system, &radius, vector);

  memset (edge, 0, sizeof *edge);
  if (status == UT_POWER_OK && !(radius.value > 0))
    status = UT_POWER_NONE;
  if (status == UT_POWER_OK)
    status = find_edge (system, UT_LIFT_CONSTANTS, 1 / radius.value, vector, system->n_limits, edge);
  return status;
}
