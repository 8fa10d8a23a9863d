/* What the tools do to walls: from plan to plan, places to the millimetre. No widgets. */
#pragma once

#include "plan.h"

/* Constructions to begin with, where the plan has none: walls, glazing and doors of common make. A new reference to the plan itself otherwise. */
const UtPlan *ut_plan_with_starter_constructions (const UtPlan *plan) G_GNUC_WARN_UNUSED_RESULT;

/* Index of the construction a new wall, or a new opening, takes: that of the last one drawn, else the first that suits by its name; -1: there is none. */
int ut_plan_usual_construction (const UtPlan *plan, gboolean opening);

/* A new wall through these points (two or more, of UtPoint); *id: what it is called, to be freed. */
const UtPlan *ut_plan_with_new_wall (const UtPlan *plan, guint storey, const GArray *points, char **id) G_GNUC_WARN_UNUSED_RESULT;

const UtPlan *ut_plan_with_wall_moved (const UtPlan *plan, guint storey, guint wall, double dx_m, double dy_m) G_GNUC_WARN_UNUSED_RESULT;

/* A vertex moved, put into a piece, or taken out (two must be left: else a new reference to the plan).  Openings keep their distance from the beginning of the piece
 * that they are on. */
const UtPlan *ut_plan_with_vertex (const UtPlan *plan, guint storey, guint wall, guint vertex, double x_m, double y_m) G_GNUC_WARN_UNUSED_RESULT;
const UtPlan *ut_plan_with_vertex_added (const UtPlan *plan, guint storey, guint wall, guint piece, double x_m, double y_m) G_GNUC_WARN_UNUSED_RESULT;
const UtPlan *ut_plan_without_vertex (const UtPlan *plan, guint storey, guint wall, guint vertex) G_GNUC_WARN_UNUSED_RESULT;

/* The wall cut in two at a vertex that is not an end, openings each to their part; the second part gets a new id. */
const UtPlan *ut_plan_with_wall_split (const UtPlan *plan, guint storey, guint wall, guint vertex) G_GNUC_WARN_UNUSED_RESULT;

/* Two walls that share an end become one, of the first one's construction; the second goes.  NULL: they share none. */
const UtPlan *ut_plan_with_walls_joined (const UtPlan *plan, guint storey, guint first, guint second) G_GNUC_WARN_UNUSED_RESULT;

/* A shut opening from one place along the wall to another; and one that is there, shut or opened. */
const UtPlan *ut_plan_with_opening (const UtPlan *plan, guint storey, guint wall, double from_m, double to_m) G_GNUC_WARN_UNUSED_RESULT;
const UtPlan *ut_plan_with_opening_turned (const UtPlan *plan, guint storey, guint wall, guint opening) G_GNUC_WARN_UNUSED_RESULT;

/* The opening at a place along the wall, or -1. */
int ut_wall_opening_at (const UtWall *wall, double along_m);

double ut_wall_length_m (const UtWall *wall);
