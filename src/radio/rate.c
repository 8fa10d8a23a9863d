#include "rate.h"

#include <math.h>
#include <stddef.h>

#include "decibel.h"

const UtShannon ut_shannon_down = { 0.6, -10, 4.4 };
const UtShannon ut_shannon_up = { 0.4, -10, 2.0 };

double
ut_shannon_efficiency (const UtShannon *shannon, double sinr_db)
{
  if (!(sinr_db >= shannon->least_sinr_db))
    return 0;
  return fmin (shannon->attenuation * log2 (1 + ut_ratio_from_db (sinr_db)), shannon->most_bit_s_hz);
}

UtRadioStatus
ut_shannon_sinr_db (const UtShannon *shannon, double bit_s_hz, double *sinr_db)
{
  if (!(bit_s_hz > 0) || !(bit_s_hz <= shannon->most_bit_s_hz))
    return UT_RADIO_INVALID;
  *sinr_db = fmax (ut_db_from_ratio (exp2 (bit_s_hz / shannon->attenuation) - 1), shannon->least_sinr_db);
  return UT_RADIO_OK;
}

const UtCqi ut_cqis[UT_N_CQIS] = {
  { 2, 78, 0.1523, -6.7 },  { 2, 120, 0.2344, -4.7 }, { 2, 193, 0.3770, -2.3 }, { 2, 308, 0.6016, 0.2 },  { 2, 449, 0.8770, 2.4 },
  { 2, 602, 1.1758, 4.3 },  { 4, 378, 1.4766, 5.9 },  { 4, 490, 1.9141, 8.1 },  { 4, 616, 2.4063, 10.3 }, { 6, 466, 2.7305, 11.7 },
  { 6, 567, 3.3223, 14.1 }, { 6, 666, 3.9023, 16.3 }, { 6, 772, 4.5234, 18.7 }, { 6, 873, 5.1152, 21.0 }, { 6, 948, 5.5547, 22.7 },
};

unsigned
ut_cqi_for_efficiency (double bit_s_hz)
{
  for (unsigned i = 0; i < UT_N_CQIS; i++)
    if (ut_cqis[i].bit_s_hz >= bit_s_hz)
      return i + 1;
  return 0;
}

typedef struct
{
  double subcarrier_khz, channel_mhz;
  unsigned blocks;
} Channel;

static const Channel channels[] = {
  { 15, 5, 25 },    { 15, 10, 52 },   { 15, 15, 79 },    { 15, 20, 106 },   { 15, 25, 133 },  { 15, 30, 160 },  { 15, 35, 188 },
  { 15, 40, 216 },  { 15, 45, 242 },  { 15, 50, 270 },   { 30, 5, 11 },     { 30, 10, 24 },   { 30, 15, 38 },   { 30, 20, 51 },
  { 30, 25, 65 },   { 30, 30, 78 },   { 30, 35, 92 },    { 30, 40, 106 },   { 30, 45, 119 },  { 30, 50, 133 },  { 30, 60, 162 },
  { 30, 70, 189 },  { 30, 80, 217 },  { 30, 90, 245 },   { 30, 100, 273 },  { 60, 10, 11 },   { 60, 15, 18 },   { 60, 20, 24 },
  { 60, 25, 31 },   { 60, 30, 38 },   { 60, 35, 44 },    { 60, 40, 51 },    { 60, 45, 58 },   { 60, 50, 65 },   { 60, 60, 79 },
  { 60, 70, 93 },   { 60, 80, 107 },  { 60, 90, 121 },   { 60, 100, 135 },  { 60, 200, 264 }, { 120, 50, 32 },  { 120, 100, 66 },
  { 120, 200, 132 }, { 120, 400, 264 },
};

unsigned
ut_resource_blocks (double channel_mhz, double subcarrier_khz)
{
  for (size_t i = 0; i < sizeof channels / sizeof channels[0]; i++)
    if (fabs (channels[i].channel_mhz - channel_mhz) < 1e-9 && fabs (channels[i].subcarrier_khz - subcarrier_khz) < 1e-9)
      return channels[i].blocks;
  return 0;
}

double
ut_occupied_hz (unsigned resource_blocks, double subcarrier_khz)
{
  return 12.0 * resource_blocks * subcarrier_khz * 1e3;
}

double
ut_element_dbm (double power_dbm, unsigned resource_blocks)
{
  return power_dbm - ut_db_from_ratio (12.0 * resource_blocks);
}
