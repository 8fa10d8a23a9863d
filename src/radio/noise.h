/* Thermal noise. */
#pragma once

#include "radio.h"

/* k T B F in dBm: temperature_k > 0, bandwidth_hz > 0, noise_figure_db >= 0. */
UtRadioStatus ut_noise_dbm (double temperature_k, double bandwidth_hz, double noise_figure_db, double *noise_dbm);
