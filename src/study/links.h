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
  guint *served;          /* their indices, cell after cell, ascending: those of cell c from first_served[c] on */
  guint *first_served;
  gboolean *idle;         /* of each cell: on, and serves no live link; in the downlink it sends its lowest power */
  double *coupling;       /* [cell * n_cells + cell]: the isolation of their channels as a ratio, 1 on one channel, 0 where infinite */
  int *unknown;           /* orthogonal: of each cell, -1: serves nobody */
  int *link_unknown;      /* simultaneous: of each link; -1: no cell, or orthogonal */
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

/* The links of a cell, one after another: k < links->n_served[cell]. */
static inline guint
ut_links_served (const UtLinks *links, guint cell, guint k)
{
  return links->served[links->first_served[cell] + k];
}

static inline double
ut_links_coupling (const UtLinks *links, guint one, guint other)
{
  return links->coupling[(gsize) one * links->gains->n_cells + other];
}

/* The unknown that a link's power is, or follows; -1: none. */
static inline int
ut_links_unknown (const UtLinks *links, guint index)
{
  int cell = ut_links_link (links, index)->cell;

  return links->simultaneous || cell < 0 ? links->link_unknown[index] : links->unknown[cell];
}

/* Only the links that are kept, in their order. silence: cells that lose their last link are silent instead of idle. */
UtLinks *ut_links_subset (const UtLinks *links, const gboolean *keep, gboolean silence) G_GNUC_WARN_UNUSED_RESULT;

/* Moves the cells to these channels (one of each cell, from 1). */
void ut_links_set_channels (UtLinks *links, const int *channels);

/* The largest power of a radio in mW, the plan's EIRP limit counted in. */
double ut_radio_limit_mw (const UtPlan *plan, const UtRadio *radio);

/* Fills `system` (to be cleared by the caller) with what must hold, methods-of-the-plan: docs/methods.md, "The system".
 * clip: minima and levels above what the limits allow are held down to them, so that some powers always exist. */
UtPowerStatus ut_links_system (const UtLinks *links, gboolean clip, UtSystem *system);

/* The same with one unknown for every power that a radio sets by itself: a cell (orthogonal downlink), else a link. All links must have a cell; minima
 * and levels are held down to the limits. */
UtPowerStatus ut_links_radio_system (const UtLinks *links, UtSystem *system);

/* The unknown of a link in that system. */
guint ut_links_radio_unknown (const UtLinks *links, guint index);

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

/* The links that set the headroom, the most involved first (terminal indices appended), and who is to blame. factor and p (n_unknowns): the
 * headroom's lower end.  FALSE where there is no such edge. */
gboolean ut_links_edge_of_headroom (const UtLinks *links,
                                    const UtSystem *system,
                                    double factor,
                                    const double *p,
                                    GArray *terminals,
                                    UtEdgeAnswer *answer);

/* The same for interference alone, whatever the limits. */
gboolean ut_links_edge_of_interference (const UtLinks *links, const UtSystem *system, GArray *terminals, UtEdgeAnswer *answer);

/* Whether all of these links can be met at once, on the radios' power steps where they have any. */
gboolean ut_links_can_be_met (const UtLinks *links);

/* Headroom in dB; INFINITY where there are no links, -INFINITY where no common change of the targets helps. */
double ut_links_headroom_db (const UtLinks *links);

/* The links to leave out, of least total priority.  keep: one flag a link.  FALSE: cancelled. */
gboolean ut_links_fewest_dropped (const UtLinks *links, GCancellable *cancellable, gboolean *keep, UtDroppingAnswer *answer);

/* The supremum in dB by which each link's target alone can change so that all targets are met, serving cells fixed, limits and minima kept,
 * continuous powers; NAN where no change of it helps. Every link must have a cell.  reserve_db: one of each link; unset once cancelled. */
void ut_links_reserves_db (const UtLinks *links, GCancellable *cancellable, double *reserve_db);

/* The chance (0..1) that a link keeps its SINR target at the powers that gave it this margin and `heard` (of UtInterference), every path shadowed by the plan's
 * shadowing_db; NAN where that is 0. */
double ut_links_chance (const UtLinks *links, guint index, const GArray *heard, double margin_db);

/* Who disturbs link `index` at these powers: appended to `interference` (of UtInterference), strongest first, nothing that is 0. */
void ut_links_interference (const UtLinks *links, const UtPowers *powers, guint index, GArray *interference);
