/* Targets stated as bit rates. */
#pragma once

#include "plan.h"
#include "study.h"

/* The SINR that so many Mbit/s need in the plan's bandwidth (3GPP TR 36.942 annex A), rounded up to 0.01 dB.  NAN where it cannot be had: expected above 0 and at
 * most *most_mbit_s (may be NULL). */
double ut_target_for_rate_db (const UtPlan *plan, UtDirection direction, double mbit_s, double *most_mbit_s);
