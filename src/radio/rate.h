/* Between SINR, spectral efficiency and bit rate; occupied bandwidth; power per resource element. */
#pragma once

#include "radio.h"

/* How much of Shannon's bound a link reaches, and where that ends: 3GPP TR 36.942 annex A. */
typedef struct
{
  double attenuation;      /* 0..1 */
  double least_sinr_db;    /* below it nothing */
  double most_bit_s_hz;    /* > 0 */
} UtShannon;

extern const UtShannon ut_shannon_down; /* 0.6, -10 dB, 4.4 bit/s/Hz */
extern const UtShannon ut_shannon_up;   /* 0.4, -10 dB, 2.0 bit/s/Hz (from memory) */

/* Spectral efficiency at a SINR: 0 below the least SINR, never above the most. */
double ut_shannon_efficiency (const UtShannon *shannon, double sinr_db);

/* The SINR that an efficiency in bit/s/Hz needs.  UT_RADIO_INVALID unless 0 < efficiency <= the most; never less than the least SINR. */
UtRadioStatus ut_shannon_sinr_db (const UtShannon *shannon, double bit_s_hz, double *sinr_db);

/* A row of the CQI table: 3GPP TS 38.214 table 5.2.2.1-2 (= TS 36.213 table 7.2.3-1). */
typedef struct
{
  unsigned bits;            /* a symbol: 2 QPSK, 4 16QAM, 6 64QAM */
  double code_rate;         /* x 1024, as printed */
  double bit_s_hz;          /* as printed */
  double sinr_db;           /* for 10 % block errors; not in the standard: common practice */
} UtCqi;

#define UT_N_CQIS 15
extern const UtCqi ut_cqis[UT_N_CQIS]; /* index 1 of the standard is [0] */

/* The lowest index (1..15) whose efficiency is at least that; 0: none is. */
unsigned ut_cqi_for_efficiency (double bit_s_hz);

/* Resource blocks of a channel: TS 38.101-1/38.104 table 5.3.2-1 (15, 30, 60 kHz below 7 GHz), TS 38.101-2 (60, 120 kHz above).  0: no such. */
unsigned ut_resource_blocks (double channel_mhz, double subcarrier_khz);

/* Occupied bandwidth of so many resource blocks, 12 sub-carriers each. */
double ut_occupied_hz (unsigned resource_blocks, double subcarrier_khz);

/* Power per resource element beside the power over the whole band: - 10 log10 (12 N_RB).  resource_blocks > 0. */
double ut_element_dbm (double power_dbm, unsigned resource_blocks);
