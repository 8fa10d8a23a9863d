/* The limiting group: the links that set the headroom, and who is to blame (docs/methods.md, "Limiting group"). */
#include <math.h>

#include "edge.h"
#include "links.h"

/* Part of the edge that a link, or a pair, must have to be named. */
#define LEAST_PART 1e-3

/* Pieces within this of the largest one of their unknown are binding too. */
#define TIE 1e-9

/* The point at which the edge is looked at. */
typedef struct
{
  const UtLinks *links;
  const UtSystem *system;
  const double *p;
  UtPowers powers; /* the same as powers of the radios */
  UtLift lift;
  UtEdge edge;
} Point;

static const UtPlan *
plan_of (const Point *point)
{
  return point->links->gains->plan;
}

static double
involvement_of (const Point *point, guint index)
{
  int unknown = ut_links_unknown (point->links, index);

  return unknown < 0 ? 0 : point->edge.involvement[unknown];
}

/* What a terminal puts into the receiver of cell `at` for every mW that its own cell hears of the others. */
static double
arrives_per_mw (const UtLinks *links, guint index, guint at)
{
  const UtLink *link = ut_links_link (links, index);

  return ut_plan_terminal (links->gains->plan, link->terminal)->radio.activity * link->need / link->gain
         * links->gains->gain[ut_gains_at (links->gains, link->terminal, at)];
}

/* Orthogonal uplink: of an involved cell's terminals those that are the loudest at another involved cell, and the one whose limit is full. */
static gboolean
uplink_binds (const Point *point, guint index)
{
  const UtLinks *links = point->links;
  const UtLink *link = ut_links_link (links, index);
  guint own = (guint) link->cell;
  gboolean at_limit = point->edge.full_limit == (size_t) links->unknown[own];

  for (guint k = 0; k < links->n_served[own] && at_limit; k++)
    {
      const UtLink *other = ut_links_link (links, ut_links_served (links, own, k));

      if (other->limit_mw * other->gain / other->need < link->limit_mw * link->gain / link->need * (1 - TIE))
        at_limit = FALSE;
    }
  for (guint c = 0; c < links->gains->n_cells && !at_limit; c++)
    {
      gboolean loudest = c != own && links->unknown[c] >= 0 && point->edge.involvement[links->unknown[c]] > LEAST_PART;

      for (guint k = 0; k < links->n_served[own] && loudest; k++)
        if (arrives_per_mw (links, ut_links_served (links, own, k), c) > arrives_per_mw (links, index, c) * (1 + TIE))
          loudest = FALSE;
      if (loudest)
        return TRUE;
    }
  return at_limit;
}

/* Pieces of an unknown stand in the order of its cell's links; with an unknown a link there is one. */
static double
piece_value (const Point *point, guint unknown, guint k)
{
  return ut_system_piece_value (point->system, &point->system->pieces[point->system->first_piece[unknown] + k], point->p, point->lift);
}

/* Orthogonal downlink: of an involved cell's terminals those that ask for its power. */
static gboolean
downlink_binds (const Point *point, guint index)
{
  const UtLinks *links = point->links;
  guint cell = (guint) ut_links_link (links, index)->cell, unknown = (guint) links->unknown[cell], k = 0;

  while (ut_links_served (links, cell, k) != index)
    k++;
  return piece_value (point, unknown, k) >= ut_system_need (point->system, unknown, point->p, point->lift) * (1 - TIE);
}

static gboolean
binds (const Point *point, guint index)
{
  if (point->links->simultaneous)
    return TRUE;
  return point->links->direction == UT_DIRECTION_DOWN ? downlink_binds (point, index) : uplink_binds (point, index);
}

typedef struct { double part; guint terminal; } Member;

static int
compare_members (gconstpointer one, gconstpointer other)
{
  const Member *a = one, *b = other;

  if (a->part > b->part || a->part < b->part)
    return a->part > b->part ? -1 : 1;
  return (a->terminal > b->terminal) - (a->terminal < b->terminal);
}

static void
list_members (const Point *point, GArray *terminals)
{
  g_autoptr (GArray) members = g_array_new (FALSE, FALSE, sizeof (Member));

  for (guint i = 0; i < point->links->links->len; i++)
    {
      Member member = { involvement_of (point, i), ut_links_link (point->links, i)->terminal };

      if (member.part > LEAST_PART && binds (point, i))
        g_array_append_val (members, member);
    }
  g_array_sort (members, compare_members);
  for (guint i = 0; i < members->len; i++)
    g_array_append_val (terminals, g_array_index (members, Member, i).terminal);
}

/* The link that stands for an unknown: its own, or of its cell's the one that asks for the power (downlink), or the first one that binds. */
static guint
link_of (const Point *point, guint unknown)
{
  const UtLinks *links = point->links;
  guint cell = 0;

  for (guint i = 0; i < links->links->len && links->simultaneous; i++)
    if (links->link_unknown[i] == (int) unknown)
      return i;
  while (links->unknown[cell] != (int) unknown)
    cell++;
  for (guint k = 0; k < links->n_served[cell]; k++)
    if (binds (point, ut_links_served (links, cell, k)))
      return ut_links_served (links, cell, k);
  return ut_links_served (links, cell, 0);
}

/* Orthogonal uplink: the terminal of cell `from` that is the loudest at cell `at`. */
static guint
loudest (const Point *point, guint from, guint at)
{
  const UtLinks *links = point->links;
  guint best = ut_links_served (links, from, 0);
  double most = -1;

  for (guint k = 0; k < links->n_served[from]; k++)
    {
      guint i = ut_links_served (links, from, k);
      guint terminal = ut_links_link (links, i)->terminal;
      double mw = ut_plan_terminal (plan_of (point), terminal)->radio.activity * point->powers.link_mw[i]
                  * links->gains->gain[ut_gains_at (links->gains, terminal, at)];

      if (mw > most)
        {
          most = mw;
          best = i;
        }
    }
  return best;
}

/* The link for which unknown `culprit` sends what link `victim` hears. */
static guint
sending_link (const Point *point, guint culprit, guint victim)
{
  const UtLinks *links = point->links;
  guint link = link_of (point, culprit);

  if (links->direction == UT_DIRECTION_DOWN || links->simultaneous)
    return link;
  return loudest (point, (guint) ut_links_link (links, link)->cell, (guint) ut_links_link (links, victim)->cell);
}

/* Who sends for a link: cell or terminal, by its index in the plan. */
static guint
transmitter_of (const Point *point, guint link)
{
  const UtLink *of = ut_links_link (point->links, link);

  return point->links->direction == UT_DIRECTION_DOWN ? (guint) of->cell : of->terminal;
}

static int
compare_blame (gconstpointer one, gconstpointer other)
{
  const UtBlame *a = one, *b = other;

  if (a->part > b->part || a->part < b->part)
    return a->part > b->part ? -1 : 1;
  if (a->terminal != b->terminal)
    return a->terminal > b->terminal ? 1 : -1;
  return (a->because_of > b->because_of) - (a->because_of < b->because_of);
}

static void
add_blame (GArray *blame, guint terminal, int because_of, double part)
{
  UtBlame one = { terminal, because_of, part };

  for (guint i = 0; i < blame->len; i++)
    {
      UtBlame *old = &g_array_index (blame, UtBlame, i);

      if (old->terminal == terminal && old->because_of == because_of)
        {
          old->part += part;
          return;
        }
    }
  g_array_append_val (blame, one);
}

/* Parts too small to name are left out; those of a cell's several links (simultaneous downlink) are one. */
static void
list_blame (const Point *point, UtEdgeAnswer *answer)
{
  for (guint i = 0; i < point->system->n_unknowns; i++)
    answer->noise_part += point->edge.constant[i];
  for (size_t i = 0; i < point->edge.n_parts; i++)
    {
      const UtEdgePart *part = &point->edge.parts[i];

      if (part->part < LEAST_PART / 10)
        break;
      guint victim = link_of (point, part->victim);
      add_blame (answer->blame, ut_links_link (point->links, victim)->terminal, (int) transmitter_of (point, sending_link (point, part->culprit, victim)), part->part);
    }
  g_array_sort (answer->blame, compare_blame);
  while (answer->blame->len > 0 && g_array_index (answer->blame, UtBlame, answer->blame->len - 1).part < LEAST_PART)
    g_array_set_size (answer->blame, answer->blame->len - 1);
}

/* The unknown that the full limit holds down; of several the most involved. */
static guint
unknown_at_limit (const Point *point)
{
  const UtLimit *limit = &point->system->limits[point->edge.full_limit];
  guint best = point->system->members[limit->first_member];

  for (size_t m = 0; m < limit->n_members; m++)
    if (point->edge.involvement[point->system->members[limit->first_member + m]] > point->edge.involvement[best])
      best = point->system->members[limit->first_member + m];
  return best;
}

/* Orthogonal uplink: of the cell's terminals the one whose limit it is. */
static guint
link_at_limit (const Point *point, guint unknown)
{
  const UtLinks *links = point->links;
  guint best = link_of (point, unknown), cell = (guint) ut_links_link (links, best)->cell;

  for (guint k = 0; k < links->n_served[cell] && links->direction == UT_DIRECTION_UP && !links->simultaneous; k++)
    {
      const UtLink *link = ut_links_link (links, ut_links_served (links, cell, k)), *other = ut_links_link (links, best);

      if (link->limit_mw * link->gain / link->need < other->limit_mw * other->gain / other->need)
        best = ut_links_served (links, cell, k);
    }
  return best;
}

/* The idle cell that a link hears best. */
static int
loudest_idle (const Point *point, guint link)
{
  const UtLinks *links = point->links;
  g_autoptr (GArray) heard = g_array_new (FALSE, FALSE, sizeof (UtInterference));

  ut_links_interference (links, &point->powers, link, heard);
  for (guint i = 0; i < heard->len; i++)
    if (links->idle[g_array_index (heard, UtInterference, i).index])
      return (int) g_array_index (heard, UtInterference, i).index;
  return -1;
}

/* Who makes an unknown ask for what it asks for, mostly; the unknown that sends it, or -1 where the chain ends. */
static int
largest_cause (const Point *point, guint unknown, guint link, UtCause *cause, guint *next_link)
{
  const UtSystem *system = point->system;
  const UtPiece *piece = &system->pieces[system->first_piece[unknown]];
  double most = piece->noise, total;
  int next = -1;

  for (size_t k = system->first_piece[unknown]; k < system->first_piece[unknown + 1]; k++)
    if (ut_system_piece_value (system, &system->pieces[k], point->p, point->lift)
        > ut_system_piece_value (system, piece, point->p, point->lift))
      piece = &system->pieces[k];
  total = ut_system_piece_value (system, piece, point->p, point->lift);
  most = piece->noise;
  cause->because_of = -1;
  for (size_t g = piece->first_group; g < piece->first_group + piece->n_groups; g++)
    {
      const UtGroup *group = &system->groups[g];
      double value = ut_system_group_constant (group, point->lift);

      for (size_t t = group->first_term; t < group->first_term + group->n_terms; t++)
        value = MAX (value, system->terms[t].weight * point->p[system->terms[t].unknown]);
      if (value > most && group->n_terms > 0)
        {
          most = value;
          next = (int) system->terms[group->first_term].unknown;
        }
    }
  if (next >= 0)
    {
      *next_link = sending_link (point, (guint) next, link);
      cause->because_of = (int) transmitter_of (point, *next_link);
    }
  if (piece->idle > most)
    {
      most = piece->idle;
      next = -1;
      cause->because_of = loudest_idle (point, link);
    }
  cause->part = most / total;
  return next;
}

/* From the radio at its limit to who drives it there, and who drives those, until noise, a lowest power or a circle. */
static void
list_chain (const Point *point, UtEdgeAnswer *answer)
{
  g_autofree gboolean *seen = g_new0 (gboolean, point->system->n_unknowns);
  int unknown = (int) unknown_at_limit (point);
  guint link = link_at_limit (point, (guint) unknown), next_link = link;

  answer->at_limit = (int) transmitter_of (point, link);
  while (unknown >= 0 && !seen[unknown])
    {
      UtCause cause = { .transmitter = transmitter_of (point, link), .terminal = ut_links_link (point->links, link)->terminal };

      seen[unknown] = TRUE;
      if (point->edge.involvement[unknown] <= 0)
        break;
      unknown = largest_cause (point, (guint) unknown, link, &cause, &next_link);
      link = next_link;
      g_array_append_val (answer->chain, cause);
    }
}

gboolean
ut_links_edge_of_headroom (const UtLinks *links, const UtSystem *system, double factor, const double *p, GArray *terminals, UtEdgeAnswer *answer)
{
  Point point = { links, system, p, ut_powers_new (links), UT_LIFT_NOTHING, { 0 } };

  answer->known = ut_edge_of_headroom (system, factor, p, &point.edge) == UT_POWER_OK;
  if (answer->known)
    {
      ut_links_powers (links, p, &point.powers);
      list_members (&point, terminals);
      list_blame (&point, answer);
      list_chain (&point, answer);
    }
  ut_edge_clear (&point.edge);
  ut_powers_clear (&point.powers);
  return answer->known;
}

gboolean
ut_links_edge_of_interference (const UtLinks *links, const UtSystem *system, GArray *terminals, UtEdgeAnswer *answer)
{
  g_autofree double *p = g_new0 (double, MAX (system->n_unknowns, 1));
  Point point = { links, system, p, ut_powers_new (links), UT_LIFT_CONSTANTS, { 0 } };

  answer->known = answer->by_interference = ut_edge_of_interference (system, p, &point.edge) == UT_POWER_OK;
  if (answer->known)
    {
      /* Powers in these ratios, minima lifted: what counts is who is the loudest. */
      for (guint i = 0; i < links->links->len; i++)
        {
          const UtLink *link = ut_links_link (links, i);
          double of_unknown = link->cell < 0 ? 0 : p[ut_links_unknown (links, i)];

          point.powers.link_mw[i] = links->simultaneous || links->direction == UT_DIRECTION_DOWN ? of_unknown : link->need * of_unknown / link->gain;
        }
      list_members (&point, terminals);
      list_blame (&point, answer);
    }
  ut_edge_clear (&point.edge);
  ut_powers_clear (&point.powers);
  return answer->known;
}
