/* Marks on the sheet: what is selected, with its handles, and what a tool is at. */
#pragma once

#include "layers.h"

/* Labels leave these places alone. */
void ut_scene_take_marks (const UtScene *scene, GArray *boxes);

void ut_scene_draw_marks (const UtScene *scene, cairo_t *cr);
