/* Strongly connected components of who disturbs whom. */
#pragma once

#include "system.h"

/* The union graph has an arc from j to i where any piece of i has a term of j with a weight above
 * 0. Components come in topological order: each after all it hears from.  Rows ascend inside one.
 */
typedef struct
{
  size_t n;       /* components */
  size_t *first;  /* n + 1: rows of component c are rows[first[c]] .. rows[first[c + 1] - 1] */
  uint32_t *rows; /* n_unknowns */
  size_t *of;     /* n_unknowns: the component of each unknown */
  size_t *place;  /* n_unknowns: its place in that component */
  size_t largest; /* unknowns in the largest component */
} UtComponents;

/* Tarjan's algorithm (SIAM J. Comput. 1(2), 1972) with a stack of its own; linear time.
 * Returns UT_POWER_OK or UT_POWER_NO_MEMORY; to be cleared in either case. */
UtPowerStatus ut_components_init (UtComponents *components, const UtSystem *system);
void ut_components_clear (UtComponents *components);
