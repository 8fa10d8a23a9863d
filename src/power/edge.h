/* What sets the edge of what is feasible: who is involved, and who disturbs whom (docs/methods.md, "Limiting group"). */
#pragma once

#include "system.h"

#define UT_NO_CULPRIT UINT32_MAX

/* A part of the edge: 1 dB less on what `victim` hears of `culprit` moves the edge by about `part` dB. */
typedef struct
{
  uint32_t victim, culprit;
  double part;
} UtEdgePart;

typedef struct
{
  double *involvement; /* n_unknowns, sums to 1: 1 dB less on all that the unknown asks for moves the edge by about that many dB */
  double *constant;    /* n_unknowns: the part of it that is noise, idle cells included; 0 at the edge of interference */
  size_t n_parts;
  UtEdgePart *parts;   /* the rest of it, one for each pair, the largest first, those above 1e-6; adds up to 1 with the constants */
  size_t full_limit;   /* the limit that is full; n_limits at the edge of interference */
} UtEdge;

/* The edge at the headroom: `factor` its lower end, p the powers found there.  Unknowns at their floor are not involved, unless their limit leaves them no more.
 *
 * With B the linear system that is active there, its constants taken as coming from the limit that is full, B p = p / factor; y is its
 * left Perron vector.  Then y_i B_ij p_j / (y B p) is the elasticity of the edge to B_ij (Perron root sensitivity; Berman & Plemmons 1979).
 * Returns UT_POWER_OK, UT_POWER_NO_MEMORY, or UT_POWER_NONE where nothing is above its floor.  To be cleared in any case. */
UtPowerStatus ut_edge_of_headroom (const UtSystem *system, double factor, const double *p, UtEdge *edge);

/* The edge of interference alone, limits and constants lifted: the strongly connected part with the largest spectral radius.
 * vector (n_unknowns): its right Perron vector, 0 outside it.  UT_POWER_NONE where the radius is 0. */
UtPowerStatus ut_edge_of_interference (const UtSystem *system, double *vector, UtEdge *edge);

void ut_edge_clear (UtEdge *edge);
