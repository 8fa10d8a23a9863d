/* The links of a plan in one direction: who serves whom, what each asks for, and the interference system they make. */
#pragma once

#include "gains.h"
#include "study.h"
#include "system.h"

/* Linear units throughout: milliwatts and ratios. */
typedef struct
{
  guint terminal;  /* index in the plan */
  int cell;        /* index of the serving cell; -1: none, the link is outside the system */
  double gain;     /* between the two */
  double target;   /* SINR asked for, design margin included */
  double need;     /* target over processing gain: least ratio of signal to interference plus noise */
  double level_mw; /* received power asked for besides; 0: none */
  double noise_mw; /* at the receiver */
  double minimum_mw, limit_mw; /* of the radio that sends, EIRP limit included; simultaneous downlink: of the whole cell, minimum 0 */
} UtLink;

typedef struct
{
  const UtGains *gains; /* borrowed; the plan is gains->plan */
  UtDirection direction;
  gboolean simultaneous;
  double processing_gain; /* 1 in orthogonal sharing */
  GArray *links;          /* of UtLink, in file order */
  guint *n_served;        /* links of each cell */
  int *unknown;           /* orthogonal: of each cell, -1: serves nobody */
  int *link_unknown;      /* simultaneous: of each link, -1: no cell */
  guint n_unknowns;
} UtLinks;

/* What sends how much: the point at which links are looked at. */
typedef struct
{
  double *link_mw; /* of each link: what its transmitter sends for it; 0 for a link without a cell */
  double *cell_mw; /* downlink: of each cell, idle ones included; 0 for cells that are off */
} UtPowers;

typedef struct
{
  guint index; /* downlink: cell; uplink: terminal; in the plan */
  double mw;   /* as received, after isolation, activity and orthogonality */
} UtInterference;

UtLinks *ut_links_new (const UtGains *gains, UtDirection direction) G_GNUC_WARN_UNUSED_RESULT;
void ut_links_free (UtLinks *links);
G_DEFINE_AUTOPTR_CLEANUP_FUNC (UtLinks, ut_links_free)

static inline const UtLink *
ut_links_link (const UtLinks *links, guint index)
{
  return &g_array_index (links->links, UtLink, index);
}

/* A cell that is on and serves no live link: in the downlink it sends its lowest power. */
gboolean ut_links_is_idle (const UtLinks *links, guint cell);

/* The isolation between two cells' channels as a ratio: 1 on one channel, 0 where it is infinite. */
double ut_channel_coupling (const UtCarrier *carrier, int one_channel, int other_channel);

/* The largest power of a radio in mW, the plan's EIRP limit counted in. */
double ut_radio_limit_mw (const UtPlan *plan, const UtRadio *radio);

/* Fills `system` (to be cleared by the caller) with what must hold, methods-of-the-plan: docs/methods.md, "The system".
 * clip: minima and levels above what the limits allow are held down to them, so that some powers always exist. */
UtPowerStatus ut_links_system (const UtLinks *links, gboolean clip, UtSystem *system);

UtPowers ut_powers_new (const UtLinks *links);
void ut_powers_clear (UtPowers *powers);

/* From a solution of the system to what the radios send. */
void ut_links_powers (const UtLinks *links, const double *solution, UtPowers *powers);

/* As the radios are set in the plan. */
void ut_links_powers_as_set (const UtLinks *links, UtPowers *powers);

/* Whether any sender has power steps that apply. */
gboolean ut_links_have_steps (const UtLinks *links);

/* The least allowed levels with factor `factor` on every target, continuous radios at their least powers; FALSE where there are none. */
gboolean ut_links_least_levels (const UtLinks *links, double factor, UtPowers *powers);

/* Every radio at the smaller of its top level (continuous: its limit) and the level it needs, from the bottom up. */
void ut_links_clipped_levels (const UtLinks *links, UtPowers *powers);

/* The links that set the headroom, the most involved first: terminal indices appended. factor and p (n_unknowns): the headroom's lower end. */
void ut_links_limiting (const UtLinks *links, const UtSystem *system, double factor, const double *p, GArray *terminals);

/* The supremum in dB by which this link's target alone can change so that all targets are met, serving cells fixed, limits and minima kept,
 * continuous powers; NAN where no change of it helps. The link must have a cell. */
double ut_links_reserve_db (const UtLinks *links, guint index);

/* Who disturbs link `index` at these powers: appended to `interference` (of UtInterference), strongest first, nothing that is 0. */
void ut_links_interference (const UtLinks *links, const UtPowers *powers, guint index, GArray *interference);
