/* The power control loop as a picture: above the SINR of each link against the round, with its target, below the power of each sender. */
#pragma once

#include <cairo.h>

#include "control.h"
#include "palette.h"

typedef struct
{
  double left, width;
  double sinr_top, sinr_height, sinr_low_db, sinr_high_db;
  double power_top, power_height, power_low_dbm, power_high_dbm;
  guint last; /* round at the right edge */
} UtControlLayout;

void ut_control_layout (const UtControl *control, double width, double height, double text_size, UtControlLayout *layout);

double ut_control_x (const UtControlLayout *layout, double round);
double ut_control_sinr_y (const UtControlLayout *layout, double db);
double ut_control_power_y (const UtControlLayout *layout, double dbm);

/* link: the one drawn strong, -1: none; round: marked by a line, -1: none. */
void ut_control_paint (cairo_t *cr, const UtControl *control, int link, int round, double width, double height, double text_size, const UtPalette *palette);

/* A line a round: SINR of every link, power of every sender. Transfer full. */
char *ut_control_csv (const UtControl *control);
