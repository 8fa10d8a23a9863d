#include "channels.h"

#include <math.h>

#include "links.h"
#include "plan-edit.h"

/* Random starts of the local search, besides the plan's own channels. */
#define N_STARTS 8

typedef struct
{
  const UtLinks *links;
  guint n_channels;
  GArray *cells;       /* of guint: the cells to be given channels, the most coupled first */
  int *channel;        /* of each cell, as tried at present */
  int *best;
  double best_db;
  double open_db;      /* the largest bound of what was not looked into */
  gboolean alike;      /* all pairs of different channels are isolated alike: only who shares one matters */
  guint64 tried, most_tried;
  GCancellable *cancellable;
} Search;

static gboolean
cancelled (const Search *search)
{
  return g_cancellable_is_cancelled (search->cancellable);
}

/* Headroom with the channels as tried at present, of the first `n_cells` cells in order alone: the others absent and silent, which never gives less. */
static double
headroom_db (Search *search, guint n_cells)
{
  const UtLinks *links = search->links;
  g_autofree gboolean *keep = g_new (gboolean, MAX (links->links->len, 1));
  g_autofree gboolean *present = g_new0 (gboolean, links->gains->n_cells);
  g_autoptr (UtLinks) subset = NULL;

  search->tried++;
  for (guint k = 0; k < n_cells; k++)
    present[g_array_index (search->cells, guint, k)] = TRUE;
  for (guint i = 0; i < links->links->len; i++)
    keep[i] = ut_links_link (links, i)->cell >= 0 && present[ut_links_link (links, i)->cell];
  subset = ut_links_subset (links, keep, TRUE);
  for (guint c = 0; c < links->gains->n_cells; c++)
    subset->idle[c] = links->idle[c] && present[c];
  ut_links_set_channels (subset, search->channel);
  return ut_links_headroom_db (subset);
}

static double
whole_headroom_db (Search *search)
{
  return headroom_db (search, search->cells->len);
}

static void
keep_if_better (Search *search, double found_db)
{
  if (!(found_db > search->best_db))
    return;
  search->best_db = found_db;
  memcpy (search->best, search->channel, search->links->gains->n_cells * sizeof *search->best);
}

/* ---- local search ---- */

static int *
channel_of (const Search *search, guint k)
{
  return &search->channel[g_array_index (search->cells, guint, k)];
}

static void
exchange (Search *search, guint one, guint other)
{
  int channel = *channel_of (search, one);

  *channel_of (search, one) = *channel_of (search, other);
  *channel_of (search, other) = channel;
}

/* The best change of one cell's channel; FALSE where none is better. */
static gboolean
move (Search *search, double *now_db)
{
  guint best_cell = 0;
  int best_channel = 0;
  double best_db = *now_db + 1e-9;

  for (guint k = 0; k < search->cells->len && !cancelled (search); k++)
    for (int channel = 1; channel <= (int) search->n_channels; channel++)
      {
        int old = *channel_of (search, k);
        double found_db;

        if (channel == old)
          continue;
        *channel_of (search, k) = channel;
        found_db = whole_headroom_db (search);
        *channel_of (search, k) = old;
        if (found_db > best_db)
          {
            best_db = found_db;
            best_cell = k;
            best_channel = channel;
          }
      }
  if (best_channel == 0)
    return FALSE;
  *channel_of (search, best_cell) = best_channel;
  *now_db = best_db;
  return TRUE;
}

/* The best exchange of two cells' channels; FALSE where none is better. */
static gboolean
swap (Search *search, double *now_db)
{
  guint n = search->cells->len, best_one = 0, best_other = 0;
  double best_db = *now_db + 1e-9;

  for (guint k = 0; k < n && !cancelled (search); k++)
    for (guint m = k + 1; m < n; m++)
      {
        double found_db;

        if (*channel_of (search, k) == *channel_of (search, m))
          continue;
        exchange (search, k, m);
        found_db = whole_headroom_db (search);
        exchange (search, k, m);
        if (found_db > best_db)
          {
            best_db = found_db;
            best_one = k;
            best_other = m;
          }
      }
  if (best_other == 0)
    return FALSE;
  exchange (search, best_one, best_other);
  *now_db = best_db;
  return TRUE;
}

static void
climb (Search *search)
{
  double now_db = whole_headroom_db (search);

  while (!cancelled (search) && (move (search, &now_db) || swap (search, &now_db)))
    ;
  keep_if_better (search, now_db);
}

static void
search_locally (Search *search, guint32 seed)
{
  GRand *random = g_rand_new_with_seed (seed);

  climb (search);
  for (guint start = 0; start < N_STARTS && !cancelled (search); start++)
    {
      for (guint k = 0; k < search->cells->len; k++)
        *channel_of (search, k) = g_rand_int_range (random, 1, (gint32) search->n_channels + 1);
      climb (search);
    }
  g_rand_free (random);
}

/* ---- proof ---- */

typedef struct
{
  int channel;
  double bound_db;
} Child;

static int
compare_children (gconstpointer one, gconstpointer other)
{
  const Child *a = one, *b = other;

  if (a->bound_db > b->bound_db || a->bound_db < b->bound_db)
    return a->bound_db > b->bound_db ? -1 : 1;
  return a->channel - b->channel;
}

/* Cells from `depth` on have no channel yet; `used`: the highest channel in use. */
static void
branch (Search *search, guint depth, int used)
{
  g_autofree Child *children = NULL;
  /* Where channels are alike, the next one not used yet stands for all that are not. Where they are not, the first cell's may be mirrored. */
  int last = search->alike ? MIN (used + 1, (int) search->n_channels) : depth == 0 ? ((int) search->n_channels + 1) / 2 : (int) search->n_channels;

  if (depth == search->cells->len)
    {
      keep_if_better (search, whole_headroom_db (search));
      return;
    }
  children = g_new0 (Child, (gsize) last);
  for (int c = 0; c < last; c++)
    {
      *channel_of (search, depth) = c + 1;
      children[c] = (Child){ c + 1, headroom_db (search, depth + 1) };
    }
  qsort (children, (gsize) last, sizeof *children, compare_children);
  for (int c = 0; c < last; c++)
    {
      if (children[c].bound_db <= search->best_db + UT_CHANNELS_TOLERANCE_DB)
        break;
      if (search->tried >= search->most_tried || cancelled (search))
        {
          search->open_db = fmax (search->open_db, children[c].bound_db);
          break;
        }
      *channel_of (search, depth) = children[c].channel;
      branch (search, depth + 1, MAX (used, children[c].channel));
    }
}

/* ---- tidying ---- */

/* Another name for each channel, if they are alike, so that as few cells as can be need another one; after that, every cell that may as well keep its own
 * does. */
static void
rename_channels (Search *search, const UtPlan *plan)
{
  gsize n = search->n_channels;
  g_autofree guint *together = g_new0 (guint, n * n);
  g_autofree int *new_name = g_new0 (int, n);
  g_autofree gboolean *taken = g_new0 (gboolean, n);

  for (guint k = 0; k < search->cells->len; k++)
    {
      guint cell = g_array_index (search->cells, guint, k);

      together[(gsize) (search->best[cell] - 1) * n + (gsize) (ut_plan_cell (plan, cell)->channel - 1)]++;
    }
  for (gsize round = 0; round < n; round++)
    {
      gsize best_found = 0, best_own = 0;
      int most = -1;

      for (gsize found = 0; found < n; found++)
        for (gsize own = 0; own < n; own++)
          if (new_name[found] == 0 && !taken[own] && (int) together[found * n + own] > most)
            {
              most = (int) together[found * n + own];
              best_found = found;
              best_own = own;
            }
      new_name[best_found] = (int) best_own + 1;
      taken[best_own] = TRUE;
    }
  for (guint k = 0; k < search->cells->len; k++)
    {
      int *channel = &search->best[g_array_index (search->cells, guint, k)];

      *channel = new_name[*channel - 1];
    }
}

static void
change_little (Search *search, const UtPlan *plan)
{
  if (search->alike)
    rename_channels (search, plan);
  memcpy (search->channel, search->best, search->links->gains->n_cells * sizeof *search->channel);
  for (guint k = 0; k < search->cells->len; k++)
    {
      int found = *channel_of (search, k), own = ut_plan_cell (plan, g_array_index (search->cells, guint, k))->channel;

      *channel_of (search, k) = own;
      if (own != found && whole_headroom_db (search) < search->best_db - 1e-9)
        *channel_of (search, k) = found;
    }
  memcpy (search->best, search->channel, search->links->gains->n_cells * sizeof *search->channel);
}

/* ---- order ---- */

typedef struct
{
  guint cell;
  double coupling;
} Ranked;

static int
compare_ranked (gconstpointer one, gconstpointer other)
{
  const Ranked *a = one, *b = other;

  if (a->coupling > b->coupling || a->coupling < b->coupling)
    return a->coupling > b->coupling ? -1 : 1;
  return (a->cell > b->cell) - (a->cell < b->cell);
}

/* The cells that are on, those first that disturb, and are disturbed by, the others most when all share one channel. */
static GArray *
order_cells (const UtLinks *links)
{
  const UtGains *gains = links->gains;
  g_autoptr (GArray) ranked = g_array_new (FALSE, FALSE, sizeof (Ranked));
  GArray *cells = g_array_new (FALSE, FALSE, sizeof (guint));
  g_autofree double *coupling = g_new0 (double, MAX (gains->n_cells, 1));

  for (guint i = 0; i < links->links->len; i++)
    {
      const UtLink *link = ut_links_link (links, i);

      for (guint c = 0; c < gains->n_cells && link->cell >= 0; c++)
        if (c != (guint) link->cell && (links->n_served[c] > 0 || links->idle[c]))
          {
            double ratio = gains->gain[ut_gains_at (gains, link->terminal, c)] / link->gain;

            coupling[c] += ratio;
            coupling[link->cell] += ratio;
          }
    }
  for (guint c = 0; c < gains->n_cells; c++)
    if (links->n_served[c] > 0 || links->idle[c])
      {
        Ranked one = { c, coupling[c] };

        g_array_append_val (ranked, one);
      }
  g_array_sort (ranked, compare_ranked);
  for (guint k = 0; k < ranked->len; k++)
    g_array_append_val (cells, g_array_index (ranked, Ranked, k).cell);
  return cells;
}

static const UtPlan *
plan_with (const UtPlan *plan, const int *channel)
{
  const UtPlan *found = ut_plan_ref (plan);

  for (guint c = 0; c < plan->cells->len; c++)
    if (ut_plan_cell (plan, c)->channel != channel[c])
      {
        UtCell *cell = ut_cell_copy (ut_plan_cell (plan, c));
        const UtPlan *next;

        cell->channel = channel[c];
        next = ut_plan_with_cell (found, (int) c, cell);
        ut_plan_step (&found, next);
      }
  return found;
}

UtChannels *
ut_channels_new (const UtGains *gains, UtDirection direction, guint32 seed, guint64 most_tried, GCancellable *cancellable)
{
  const UtPlan *plan = gains->plan;
  g_autoptr (UtLinks) links = ut_links_new (gains, direction);
  g_autoptr (GArray) cells = order_cells (links);
  g_autofree int *channel = g_new (int, MAX (gains->n_cells, 1));
  UtChannels *found = g_new0 (UtChannels, 1);
  Search search = {
    .links = links,
    .n_channels = (guint) plan->carrier->channels,
    .cells = cells,
    .channel = channel,
    .best = g_new (int, MAX (gains->n_cells, 1)),
    .best_db = -INFINITY,
    .open_db = -INFINITY,
    .alike = plan->carrier->channel_isolation_db->len <= 1 || plan->carrier->channels <= 2,
    .cancellable = cancellable,
  };

  for (guint c = 0; c < gains->n_cells; c++)
    channel[c] = search.best[c] = ut_plan_cell (plan, c)->channel;
  found->before_db = search.best_db = whole_headroom_db (&search);
  found->channel = search.best;
  /* A link without a cell is nobody's business here; but no channels change that the plan cannot be met. */
  for (guint i = 0; i < links->links->len; i++)
    if (ut_links_link (links, i)->cell < 0)
      found->before_db = -INFINITY;
  if (cells->len > 0 && search.n_channels > 1)
    {
      search_locally (&search, seed);
      search.most_tried = search.tried + most_tried;
      branch (&search, 0, 0);
      change_little (&search, plan);
    }
  found->headroom_db = search.best_db;
  found->proved = !(search.open_db > search.best_db + UT_CHANNELS_TOLERANCE_DB);
  found->bound_db = found->proved ? search.best_db : search.open_db;
  found->tried = search.tried;
  found->plan = plan_with (plan, found->channel);
  if (cancelled (&search))
    g_clear_pointer (&found, ut_channels_free);
  return found;
}

void
ut_channels_free (UtChannels *channels)
{
  ut_plan_unref (channels->plan);
  g_free (channels->channel);
  g_free (channels);
}
