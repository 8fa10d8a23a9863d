/* Places labels so that none lies on another. */
#pragma once

#include <glib.h>

typedef struct { double x, y, width, height; } UtBox;

/* What is taken already; of UtBox. */
GArray *ut_boxes_new (void);
void ut_boxes_take (GArray *boxes, double x, double y, double width, double height);

/* The first of n candidate corners at which a box of this size is free; it is taken then. FALSE when none is. */
gboolean ut_boxes_place (GArray *boxes, const double (*corners)[2], guint n, double width, double height, double *x, double *y);

gboolean ut_boxes_overlap (const UtBox *one, const UtBox *other);
