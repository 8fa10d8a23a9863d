/* One pair of a cell and a terminal: how its gain comes about, every dB kept. */
#pragma once

#include "plan.h"
#include "wall-index.h"

typedef struct
{
  double distance_m; /* true 3D distance */
  double base_loss_db;
  GArray *crossings;    /* of UtCrossing, from cell to terminal; NULL unless ut_path_trace () made it */
  double crossings_db;  /* their sum as counted, held to the excess limit */
  double cell_antenna_dbi, terminal_antenna_dbi;
  double feeders_db, body_db;
  gboolean measured;        /* gain_db is the plan's measured one */
  gboolean wall_at_antenna; /* a wall passes through one of the two antennas */
  gboolean nlos;            /* the law's row without line of sight is the one taken */
  gboolean law_holds_walls; /* the base loss holds the walls already: crossings count 0 */
  double lowest_hz, highest_hz, nearest_m, farthest_m; /* what that row was made for */
  gboolean outside_range;
  double gain_db;
} UtPath;

/* The computed gain of the pair and its parts, without the list of crossings and without allocation: for the matrix.
 * The plan's measured gain is not looked at. */
void ut_path_compute (const UtPlan *plan, const UtWallIndex *index, const UtCell *cell, const UtTerminal *terminal, UtPath *path);

/* Everything about the pair, crossings and measured gain included; indices of the plan. ut_path_clear () afterwards. */
void ut_path_trace (const UtPlan *plan, const UtWallIndex *index, guint cell, guint terminal, UtPath *path);
void ut_path_clear (UtPath *path);

/* What the row of the law that the pair takes was made for, to be freed: "site-general (nlos) is made for ...". */
char *ut_path_range_text (const UtPlan *plan, const UtPath *path);

/* The plan's measured gain of the pair in dB, NAN where there is none. */
double ut_measured_gain_db (const UtPlan *plan, const char *cell, const char *terminal);
