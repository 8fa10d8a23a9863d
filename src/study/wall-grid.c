#include "wall-grid.h"

#include <math.h>

/* What a piece and a ray are widened by: far above rounding and the tolerance of the crossing test. */
#define WIDER_M 1e-6

/* Squares for each piece, about. */
#define SQUARES_A_PIECE 2

struct _UtWallGrid
{
  guint n;
  double left_m, bottom_m, pitch_m;
  int n_columns, n_rows;
  guint *first;  /* n_columns * n_rows + 1: where the pieces of each square begin */
  guint *pieces;
};

typedef struct
{
  double from_x, from_y, to_x, to_y;
} Segment;

static int
clamped (double place, int n)
{
  return place < 0 ? 0 : place >= n ? n - 1 : (int) place;
}

/* Calls for every square that the segment, widened, comes into: row by row, the columns that it passes inside that row. */
static void
for_squares (const UtWallGrid *grid, const Segment *at, void (*use) (const UtWallGrid *grid, guint square, gpointer data), gpointer data)
{
  double low_y = MIN (at->from_y, at->to_y), high_y = MAX (at->from_y, at->to_y);
  double rise = at->to_y - at->from_y, run = at->to_x - at->from_x;
  int first_row = clamped (floor ((low_y - WIDER_M - grid->bottom_m) / grid->pitch_m), grid->n_rows);
  int last_row = clamped (floor ((high_y + WIDER_M - grid->bottom_m) / grid->pitch_m), grid->n_rows);

  for (int row = first_row; row <= last_row; row++)
    {
      /* The outermost rows reach on for ever. */
      double floor_y = row == 0 ? -INFINITY : grid->bottom_m + row * grid->pitch_m - 2 * WIDER_M;
      double top_y = row == grid->n_rows - 1 ? INFINITY : grid->bottom_m + (row + 1) * grid->pitch_m + 2 * WIDER_M;
      double a = 0, b = 1, ends[2];

      /* The part of the segment inside the row. */
      if (fabs (rise) > WIDER_M)
        {
          a = MAX (((rise > 0 ? floor_y : top_y) - at->from_y) / rise, 0);
          b = MIN (((rise > 0 ? top_y : floor_y) - at->from_y) / rise, 1);
        }
      ends[0] = at->from_x + a * run;
      ends[1] = at->from_x + b * run;
      int first = clamped (floor ((MIN (ends[0], ends[1]) - 2 * WIDER_M - grid->left_m) / grid->pitch_m), grid->n_columns);
      int last = clamped (floor ((MAX (ends[0], ends[1]) + 2 * WIDER_M - grid->left_m) / grid->pitch_m), grid->n_columns);
      for (int column = first; column <= last; column++)
        use (grid, (guint) (row * grid->n_columns + column), data);
    }
}

static void
count_piece (const UtWallGrid *grid, guint square, gpointer data)
{
  (void) data;
  grid->first[square + 1]++;
}

typedef struct
{
  guint piece;
  guint *next;
} Filling;

static void
put_piece (const UtWallGrid *grid, guint square, gpointer data)
{
  Filling *filling = data;

  grid->pieces[filling->next[square]++] = filling->piece;
}

static void
measure (UtWallGrid *grid, const double *start_x, const double *start_y, const double *end_x, const double *end_y)
{
  double right_m = -INFINITY, top_m = -INFINITY;

  grid->left_m = grid->bottom_m = INFINITY;
  for (guint i = 0; i < grid->n; i++)
    {
      grid->left_m = MIN (grid->left_m, MIN (start_x[i], end_x[i]));
      grid->bottom_m = MIN (grid->bottom_m, MIN (start_y[i], end_y[i]));
      right_m = MAX (right_m, MAX (start_x[i], end_x[i]));
      top_m = MAX (top_m, MAX (start_y[i], end_y[i]));
    }
  double width_m = MAX (right_m - grid->left_m, 1), height_m = MAX (top_m - grid->bottom_m, 1);
  double squares = SQUARES_A_PIECE * (double) grid->n;

  grid->pitch_m = MAX (sqrt (width_m / squares * height_m), MAX (width_m, height_m) / 1000);
  grid->n_columns = (int) (width_m / grid->pitch_m) + 1;
  grid->n_rows = (int) (height_m / grid->pitch_m) + 1;
}

UtWallGrid *
ut_wall_grid_new (guint n, const double *start_x, const double *start_y, const double *end_x, const double *end_y)
{
  UtWallGrid *grid = g_new0 (UtWallGrid, 1);
  guint n_squares;
  g_autofree guint *next = NULL;

  grid->n = n;
  if (n == 0)
    {
      grid->pitch_m = 1;
      grid->n_columns = grid->n_rows = 1;
    }
  else
    measure (grid, start_x, start_y, end_x, end_y);
  n_squares = (guint) grid->n_columns * (guint) grid->n_rows;
  grid->first = g_new0 (guint, n_squares + 1);
  for (guint i = 0; i < n; i++)
    for_squares (grid, &(Segment){ start_x[i], start_y[i], end_x[i], end_y[i] }, count_piece, NULL);
  for (guint square = 0; square < n_squares; square++)
    grid->first[square + 1] += grid->first[square];
  grid->pieces = g_new (guint, MAX (grid->first[n_squares], 1));
  next = g_memdup2 (grid->first, n_squares * sizeof *next);
  for (guint i = 0; i < n; i++)
    for_squares (grid, &(Segment){ start_x[i], start_y[i], end_x[i], end_y[i] }, put_piece, &(Filling){ i, next });
  return grid;
}

void
ut_wall_grid_free (UtWallGrid *grid)
{
  g_free (grid->first);
  g_free (grid->pieces);
  g_free (grid);
}

guint
ut_wall_grid_n_words (const UtWallGrid *grid)
{
  return grid->n / 64 + 1;
}

static void
gather_square (const UtWallGrid *grid, guint square, gpointer data)
{
  guint64 *bits = data;

  for (guint k = grid->first[square]; k < grid->first[square + 1]; k++)
    bits[grid->pieces[k] / 64] |= G_GUINT64_CONSTANT (1) << grid->pieces[k] % 64;
}

void
ut_wall_grid_gather (const UtWallGrid *grid, double from_x, double from_y, double to_x, double to_y, guint64 *bits)
{
  for_squares (grid, &(Segment){ from_x, from_y, to_x, to_y }, gather_square, bits);
}
