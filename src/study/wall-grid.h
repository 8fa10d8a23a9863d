/* A square grid over wall pieces: which of them a ray can meet. */
#pragma once

#include <glib.h>

typedef struct _UtWallGrid UtWallGrid;

/* The four arrays hold n ends; they are read here only. */
UtWallGrid *ut_wall_grid_new (guint n, const double *start_x, const double *start_y, const double *end_x, const double *end_y) G_GNUC_WARN_UNUSED_RESULT;
void ut_wall_grid_free (UtWallGrid *grid);

/* Words of 64 bits that hold one bit a piece. */
guint ut_wall_grid_n_words (const UtWallGrid *grid);

/* Sets the bit of every piece that comes within a micrometre of the ray's projection, and of some that do not; `bits` (n_words) must be clear. */
void ut_wall_grid_gather (const UtWallGrid *grid, double from_x, double from_y, double to_x, double to_y, guint64 *bits);
