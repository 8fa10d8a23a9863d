/* The powers to be typed into the equipment: allowed levels that keep every target as they are printed, never the nearest ones. */
#pragma once

#include "study.h"

typedef struct
{
  UtStudy *study;   /* with the powers to be typed in */
  double ladder_db; /* radios without steps of their own take whole multiples of this; NAN: their powers are continuous ones, rounded up */
  gboolean shared;  /* simultaneous downlink: a cell shares its power among its links by its own power control, and what is typed in is only the sum */
  gboolean kept;    /* unless shared: solved again with these very powers as set, every link of the study that was met is met */
} UtCommissioning;

/* For the study's plan, direction, aim and hold.  Radios without a power step get the least levels of a ladder of 0.1 dB; where that has none 0.01, then 0.001 dB.
 * Where the ladder cannot be climbed (simultaneous downlink, other aims than least powers, verdicts other than "met") the study's powers, rounded up to 0.01 dB. */
void ut_commissioning_make (const UtStudy *study, UtCommissioning *commissioning);
void ut_commissioning_clear (UtCommissioning *commissioning);

/* One sender's power as it is to be typed: of the study, or rounded up. */
double ut_commissioning_dbm (const UtCommissioning *commissioning, guint transmitter);

/* A row a radio: place, antenna, direction from true north, channel, power in dBm and mW over all ports and per port (ports >= 1), per resource element, EIRP, how
 * far to keep off, and the planner's own columns. */
char *ut_report_powers_text (const UtCommissioning *commissioning, guint ports);
char *ut_report_powers_csv (const UtCommissioning *commissioning, guint ports);
char *ut_report_powers_json (const UtCommissioning *commissioning, guint ports);
