/* The limiting group: the links that set the headroom (docs/methods.md, "Limiting group"). */
#include <math.h>

#include "limiting.h"
#include "links.h"

/* Part of the edge that a link must have to be named. */
#define LEAST_PART 1e-3

/* Pieces within this of the largest one of their unknown are binding too. */
#define TIE 1e-9

static gboolean
is_unknown_of (const UtLinks *links, guint index, size_t unknown)
{
  const UtLink *link = ut_links_link (links, index);

  if (link->cell < 0)
    return FALSE;
  return (size_t) (links->simultaneous ? links->link_unknown[index] : links->unknown[link->cell]) == unknown;
}

/* Orthogonal uplink: of an involved cell's terminals those that are the loudest at another involved cell, and the one whose limit is full. */
static gboolean
uplink_binds (const UtLinks *links, guint index, const double *involvement, size_t full)
{
  const UtPlan *plan = links->gains->plan;
  const UtLink *link = ut_links_link (links, index);
  double own_ratio = link->limit_mw * link->gain / link->need;
  gboolean at_limit = full == (size_t) links->unknown[link->cell];

  for (guint c = 0; c < links->gains->n_cells; c++)
    {
      gboolean loudest = c != (guint) link->cell && links->unknown[c] >= 0 && involvement[links->unknown[c]] > LEAST_PART;
      double own = plan->cells->len > c ? ut_plan_terminal (plan, link->terminal)->radio.activity * link->need / link->gain
                                            * links->gains->gain[ut_gains_at (links->gains, link->terminal, c)]
                                        : 0;

      for (guint j = 0; j < links->links->len && (loudest || at_limit); j++)
        {
          const UtLink *other = ut_links_link (links, j);

          if (other->cell != link->cell)
            continue;
          if (other->limit_mw * other->gain / other->need < own_ratio * (1 - TIE))
            at_limit = FALSE;
          if (ut_plan_terminal (plan, other->terminal)->radio.activity * other->need / other->gain
                * links->gains->gain[ut_gains_at (links->gains, other->terminal, c)]
              > own * (1 + TIE))
            loudest = FALSE;
        }
      if (loudest)
        return TRUE;
    }
  return at_limit;
}

/* Orthogonal downlink: of an involved cell's terminals those that ask for its power. */
static gboolean
downlink_binds (const UtLinks *links, const UtSystem *system, guint index, const double *p)
{
  size_t unknown = (size_t) links->unknown[ut_links_link (links, index)->cell];
  size_t piece = system->first_piece[unknown];

  /* Pieces of an unknown stand in the order of the links. */
  for (guint i = 0; i < index; i++)
    piece += is_unknown_of (links, i, unknown);
  return ut_system_piece_value (system, &system->pieces[piece], p, UT_LIFT_NOTHING)
         >= ut_system_need (system, unknown, p, UT_LIFT_NOTHING) * (1 - TIE);
}

typedef struct { double part; guint terminal; } Member;

static int
compare_parts (gconstpointer one, gconstpointer other)
{
  const Member *a = one, *b = other;

  if (a->part > b->part || a->part < b->part)
    return a->part > b->part ? -1 : 1;
  return (a->terminal > b->terminal) - (a->terminal < b->terminal);
}

void
ut_links_limiting (const UtLinks *links, const UtSystem *system, double factor, const double *p, GArray *terminals)
{
  g_autofree double *involvement = g_new0 (double, MAX (links->n_unknowns, 1));
  g_autoptr (GArray) members = g_array_new (FALSE, FALSE, sizeof (Member));
  size_t full;

  if (ut_involvement (system, factor, p, involvement, &full) != UT_POWER_OK)
    return;
  for (guint i = 0; i < links->links->len; i++)
    {
      const UtLink *link = ut_links_link (links, i);
      Member member = { 0, link->terminal };

      if (link->cell < 0)
        continue;
      member.part = involvement[links->simultaneous ? links->link_unknown[i] : links->unknown[link->cell]];
      if (member.part <= LEAST_PART)
        continue;
      if (links->simultaneous
          || (links->direction == UT_DIRECTION_DOWN ? downlink_binds (links, system, i, p) : uplink_binds (links, i, involvement, full)))
        g_array_append_val (members, member);
    }
  g_array_sort (members, compare_parts);
  for (guint i = 0; i < members->len; i++)
    g_array_append_val (terminals, g_array_index (members, Member, i).terminal);
}
