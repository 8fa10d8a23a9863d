/* Plans for the tests of study/, written as text. */
#pragma once

#include "plan.h"

/* A valid plan around the given parts (JSON texts without the outer brackets); propagation is free space with walls unless
 * given. Constructions: "panel" (10 dB typed in), "door" (3 dB typed in), "slab" (concrete 200 mm), "stud" (plasterboard).
 * Fails the test when the plan is refused. */
const UtPlan *site_plan (const char *propagation, const char *storeys, const char *cells, const char *terminals);

/* One radio as JSON: id, storey S1, place; more is inserted before the closing brace (begin with a comma). */
char *site_cell (const char *id, double x_m, double y_m, double height_m, const char *more);
char *site_terminal (const char *id, double x_m, double y_m, double height_m, const char *more);

/* One storey "S1", 3 m high, with the given walls. */
char *site_storey (const char *walls);

/* The plan with this text; fails the test when it is refused. */
const UtPlan *site_read (const char *text);

/* An example of data/examples by its name. */
const UtPlan *site_example (const char *name);
