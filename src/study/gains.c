#include "gains.h"

#include "decibel.h"
#include "path.h"

/* Where each item of `now` stood in `before`: its index, or -1 where the item is another value. */
static int *
where_before (const GPtrArray *now, const GPtrArray *before)
{
  g_autoptr (GHashTable) places = g_hash_table_new (NULL, NULL);
  int *where = g_new (int, now->len);

  for (guint i = 0; i < before->len; i++)
    g_hash_table_insert (places, before->pdata[i], GINT_TO_POINTER (i + 1));
  for (guint i = 0; i < now->len; i++)
    where[i] = GPOINTER_TO_INT (g_hash_table_lookup (places, now->pdata[i])) - 1;
  return where;
}

static gboolean
same_antennas (const UtPlan *one, const UtPlan *other)
{
  if (one->antennas->len != other->antennas->len)
    return FALSE;
  for (guint i = 0; i < one->antennas->len; i++)
    if (one->antennas->pdata[i] != other->antennas->pdata[i])
      return FALSE;
  return TRUE;
}

static void
compute_pair (UtGains *gains, guint terminal, guint cell)
{
  gsize at = ut_gains_at (gains, terminal, cell);
  UtPath path;

  ut_path_compute (gains->plan, gains->index, ut_plan_cell (gains->plan, cell), ut_plan_terminal (gains->plan, terminal), &path);
  gains->computed_db[at] = gains->gain_db[at] = path.gain_db;
  gains->gain[at] = ut_ratio_from_db (path.gain_db);
  gains->wall_at_antenna[at] = path.wall_at_antenna;
  gains->outside_range[at] = path.outside_range;
  gains->computed_pairs++;
}

static void
keep_pair (UtGains *gains, gsize at, const UtGains *previous, gsize before)
{
  /* A measured gain of the earlier revision may be gone by now. */
  gains->computed_db[at] = gains->gain_db[at] = previous->computed_db[before];
  gains->gain[at] = previous->computed_db[before] == previous->gain_db[before] ? previous->gain[before]
                                                                              : ut_ratio_from_db (gains->gain_db[at]);
  gains->wall_at_antenna[at] = previous->wall_at_antenna[before];
  gains->outside_range[at] = previous->outside_range[before];
}

static void
compute_all (UtGains *gains, const UtGains *previous, GCancellable *cancellable)
{
  const UtPlan *plan = gains->plan;
  g_autofree int *cells_before = NULL, *terminals_before = NULL;

  if (previous != NULL)
    {
      cells_before = where_before (plan->cells, previous->plan->cells);
      terminals_before = where_before (plan->terminals, previous->plan->terminals);
    }
  for (guint t = 0; t < gains->n_terminals && !g_cancellable_is_cancelled (cancellable); t++)
    for (guint c = 0; c < gains->n_cells; c++)
      if (previous != NULL && cells_before[c] >= 0 && terminals_before[t] >= 0)
        keep_pair (gains,
                   ut_gains_at (gains, t, c),
                   previous,
                   ut_gains_at (previous, (guint) terminals_before[t], (guint) cells_before[c]));
      else
        compute_pair (gains, t, c);
}

static void
put_measured (UtGains *gains)
{
  const UtPlan *plan = gains->plan;

  for (guint i = 0; i < plan->measured_gains->len; i++)
    {
      const UtMeasuredGain *measured = plan->measured_gains->pdata[i];
      gsize at = ut_gains_at (gains,
                              (guint) ut_plan_find_terminal (plan, measured->terminal),
                              (guint) ut_plan_find_cell (plan, measured->cell));

      gains->gain_db[at] = measured->gain_db;
      gains->gain[at] = ut_ratio_from_db (measured->gain_db);
    }
}

UtGains *
ut_gains_new_cancellable (const UtPlan *plan, const UtGains *previous, GCancellable *cancellable)
{
  UtGains *gains = g_atomic_rc_box_new0 (UtGains);
  gsize n;

  gains->plan = ut_plan_ref (plan);
  gains->n_cells = plan->cells->len;
  gains->n_terminals = plan->terminals->len;
  n = (gsize) gains->n_cells * gains->n_terminals;
  gains->gain_db = g_new0 (double, n);
  gains->gain = g_new0 (double, n);
  gains->computed_db = g_new0 (double, n);
  gains->wall_at_antenna = g_new0 (guint8, n);
  gains->outside_range = g_new0 (guint8, n);
  if (previous != NULL && !ut_wall_index_holds (previous->plan, plan))
    previous = NULL;
  gains->index = previous != NULL ? ut_wall_index_ref (previous->index) : ut_wall_index_new (plan);
  if (previous != NULL && !same_antennas (previous->plan, plan))
    previous = NULL;
  compute_all (gains, previous, cancellable);
  put_measured (gains);
  return gains;
}

UtGains *
ut_gains_new (const UtPlan *plan, const UtGains *previous)
{
  return ut_gains_new_cancellable (plan, previous, NULL);
}

UtGains *
ut_gains_ref (UtGains *gains)
{
  return g_atomic_rc_box_acquire (gains);
}

static void
gains_clear (gpointer data)
{
  UtGains *gains = data;

  ut_plan_unref (gains->plan);
  ut_wall_index_unref (gains->index);
  g_free (gains->gain_db);
  g_free (gains->gain);
  g_free (gains->computed_db);
  g_free (gains->wall_at_antenna);
  g_free (gains->outside_range);
}

void
ut_gains_unref (UtGains *gains)
{
  g_atomic_rc_box_release_full (gains, gains_clear);
}

char *
ut_gains_range_warning (const UtGains *gains)
{
  const UtPlan *plan = gains->plan;
  guint count = 0;
  gsize first = 0;
  UtPath path;

  for (gsize at = (gsize) gains->n_terminals * gains->n_cells; at-- > 0;)
    if (gains->outside_range[at] && gains->gain_db[at] == gains->computed_db[at])
      {
        count++;
        first = at;
      }
  if (count == 0)
    return NULL;
  const UtCell *cell = ut_plan_cell (plan, (guint) (first % gains->n_cells));
  const UtTerminal *terminal = ut_plan_terminal (plan, (guint) (first / gains->n_cells));
  ut_path_compute (plan, gains->index, cell, terminal, &path);
  g_autofree char *range = ut_path_range_text (plan, &path);
  return g_strdup_printf ("the law %s; %u pair%s outside, the first %s, %s at %.1f m and %g GHz",
                          range,
                          count,
                          count == 1 ? " lies" : "s lie",
                          cell->radio.id,
                          terminal->radio.id,
                          path.distance_m,
                          plan->carrier->frequency_mhz / 1e3);
}
