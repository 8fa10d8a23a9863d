/* From what the plan says of propagation and antennas to what radio/ computes with. */
#pragma once

#include "antenna.h"
#include "laws.h"
#include "plan.h"

/* The plan's base law; its floor losses are borrowed from the plan. */
UtLaw ut_base_law (const UtPropagation *propagation);

/* The law and its parameters in a few words, to be freed. */
char *ut_base_law_text (const UtPropagation *propagation);

/* The shape of an antenna by its id ("isotropic" is built in); cuts are borrowed from the plan. */
UtAntennaShape ut_antenna_shape (const UtPlan *plan, const char *id);

/* Gain in dBi of a radio's antenna where it is largest: what its EIRP counts. */
double ut_radio_peak_dbi (const UtPlan *plan, const UtRadio *radio);
