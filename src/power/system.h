/* The interference system: what every case of sharing and direction becomes before it is solved.
 *
 * n unknown powers p (linear, mW or any common unit), each with
 *
 *   p_i >= max (minimum_i, level_i, t * max over its pieces of
 *                 (noise + idle + sum over the piece's groups of
 *                    max (minimum_g, level_g, max over the group's terms of weight * p_j)))
 *
 * and limits  sum of p_j over a limit's members <= limit.  t is the common factor on all targets: 1
 * for the plan as it stands.  A plain linear system has one piece an unknown and groups of one
 * term. Noise is what cannot be switched off, `idle` what cells that serve nobody send, `minimum`
 * what comes of the radios' lowest powers; the last two can be lifted to find out what stands in
 * the way. `level` (a received level asked for) is never lifted and never scaled by t.
 *
 * The right-hand side is monotone, convex and, for factors >= 1, subhomogeneous; everything in this
 * folder rests on that alone (Yates, IEEE JSAC 13(7), 1995; see docs/methods.md).
 */
#pragma once

#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>

typedef enum
{
  UT_POWER_OK = 0,
  UT_POWER_INVALID, /* a coefficient is negative or not finite, an index out of range, no noise */
  UT_POWER_NO_MEMORY,
  UT_POWER_UNBOUNDED, /* no finite powers satisfy the system: radius >= 1 */
  UT_POWER_LIMIT,     /* the least powers pass a limit */
  UT_POWER_NONE,      /* no factor t > 0 is feasible: the minima or levels alone pass a limit */
  UT_POWER_CANCELLED,
  UT_POWER_UNSETTLED, /* beyond what doubles can hold or settle; nothing is claimed */
} UtPowerStatus;

/* What is lifted from the system for a solve; flags. */
typedef enum
{
  UT_LIFT_NOTHING = 0,
  UT_LIFT_MINIMA = 1 << 0, /* minimum_i and minimum_g count as 0 */
  UT_LIFT_IDLE = 1 << 1,   /* idle counts as 0 */
  UT_LIFT_LIMITS = 1 << 2, /* limits are not looked at */
  UT_LIFT_CONSTANTS
  = 1 << 3, /* every constant counts as 0, noise and levels too: the homogeneous part */
} UtLift;

/* Limits count as kept up to this, relative. */
#define UT_LIMIT_SLACK 1e-9

typedef struct
{
  uint32_t unknown;
  double weight; /* >= 0, dimensionless */
} UtTerm;

typedef struct
{
  double minimum; /* >= 0 */
  double level;   /* >= 0 */
  size_t first_term, n_terms;
} UtGroup;

typedef struct
{
  uint32_t unknown; /* the row this piece belongs to */
  double noise;     /* > 0 */
  double idle;      /* >= 0 */
  size_t first_group, n_groups;
} UtPiece;

typedef struct
{
  double limit; /* > 0, finite */
  size_t first_member, n_members;
} UtLimit;

typedef struct
{
  size_t n_unknowns, n_pieces, n_groups, n_terms, n_limits, n_members;
  double *minimum;     /* n_unknowns, >= 0 */
  double *level;       /* n_unknowns, >= 0 */
  UtPiece *pieces;     /* ordered by unknown after ut_system_finish () */
  size_t *first_piece; /* n_unknowns + 1: pieces of unknown i are first_piece[i] .. first_piece[i +
                          1] */
  UtGroup *groups;
  UtTerm *terms;
  UtLimit *limits;
  uint32_t *members;        /* unknowns of the limits */
  size_t *limit_of;         /* n_unknowns: the one limit each unknown belongs to */
  bool minimum_above_limit; /* a radio's own minimum passes its limit: minima can never be kept */
  bool failed;              /* out of memory while building; ut_system_finish () reports it */
  bool malformed;           /* built out of order; ut_system_finish () reports it */
  size_t room_pieces, room_groups, room_terms, room_limits, room_members; /* builder's */
} UtSystem;

/* Building: unknowns first; then for each piece its groups, for each group its terms, in that
 * order. Every unknown belongs to exactly one limit.  Memory trouble is remembered and told by
 * finish. */
void ut_system_init (UtSystem *system, size_t n_unknowns);
void ut_system_clear (UtSystem *system);
void ut_system_set_floor (UtSystem *system, uint32_t unknown, double minimum, double level);
void ut_system_add_piece (UtSystem *system, uint32_t unknown, double noise, double idle);
void ut_system_add_group (UtSystem *system, double minimum, double level);
void ut_system_add_term (UtSystem *system, uint32_t unknown, double weight);
void ut_system_add_limit (UtSystem *system, double limit);
void ut_system_add_member (UtSystem *system, uint32_t unknown);

/* Sorts the pieces by unknown (stable), checks every number and reference; an unknown without a
 * piece or outside every limit is refused, a group without terms (a constant) and no unknowns at
 * all are not. Returns UT_POWER_OK, UT_POWER_INVALID or UT_POWER_NO_MEMORY.  Only a finished system
 * can be solved. */
UtPowerStatus ut_system_finish (UtSystem *system);

/* One piece at powers p with factor 1: noise + idle + groups.  `lift` says what counts as 0. */
double
ut_system_piece_value (const UtSystem *system, const UtPiece *piece, const double *p, UtLift lift);

/* J_i (p): the largest piece of unknown i at p, factor 1, floors of the unknown not included. */
double ut_system_need (const UtSystem *system, size_t unknown, const double *p, UtLift lift);

/* The floor of unknown i under `lift`: max (minimum, level). */
double ut_system_floor (const UtSystem *system, size_t unknown, UtLift lift);

/* The constant of a group, and of a piece (noise and idle), under `lift`; inline because they sit
 * in every inner loop. */
static inline double
ut_system_group_constant (const UtGroup *group, UtLift lift)
{
  if (lift & UT_LIFT_CONSTANTS)
    return 0;
  return lift & UT_LIFT_MINIMA || group->level > group->minimum ? group->level : group->minimum;
}

static inline double
ut_system_piece_constant (const UtPiece *piece, UtLift lift)
{
  if (lift & UT_LIFT_CONSTANTS)
    return 0;
  return lift & UT_LIFT_IDLE ? piece->noise : piece->noise + piece->idle;
}

/* The sum that limit number `limit` holds down, at p. */
double ut_system_limit_sum (const UtSystem *system, size_t limit, const double *p);
