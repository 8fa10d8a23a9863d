/* The verbs of the command line: one function each, one line each in the table of main.c. */
#pragma once

#include "control.h"
#include "page.h"
#include "study.h"

typedef enum { UT_FORMAT_TEXT, UT_FORMAT_JSON, UT_FORMAT_CSV } UtFormat;

/* Exit codes (docs/command-line.md). */
typedef enum
{
  UT_EXIT_DONE = 0,
  UT_EXIT_NOT_ALL_MET = 1,
  UT_EXIT_WRONG_USE = 2,
  UT_EXIT_BAD_PLAN = 3,
  UT_EXIT_NOT_WRITTEN = 4,
} UtExit;

/* Of the verb target: what is wanted; NAN: not given. */
typedef struct
{
  double bit_s_hz, rate_mbit_s, sinr_db;
  double bandwidth_mhz, channel_mhz, subcarrier_khz;
  double level_dbm;
} UtWish;

/* What was asked for on the command line. */
typedef struct
{
  char **arguments; /* after the verb's name: PLAN and what else the verb takes */
  UtFormat format;
  UtQuestion question;
  UtPageSetup page;
  UtControlSetup loop; /* its seed is the order's seed */
  UtWish wish;
  guint ports;        /* of the verb powers: each radio's power is shared by so many */
  const char *output; /* NULL: not given */
} UtOrder;

UtExit ut_verb_check (const UtOrder *order);
UtExit ut_verb_gains (const UtOrder *order);
UtExit ut_verb_path (const UtOrder *order);
UtExit ut_verb_solve (const UtOrder *order);
UtExit ut_verb_channels (const UtOrder *order);
UtExit ut_verb_control (const UtOrder *order);
UtExit ut_verb_page (const UtOrder *order);
UtExit ut_verb_powers (const UtOrder *order);

UtExit ut_verb_target (const UtOrder *order);

/* Takes the text over and prints it; UT_EXIT_NOT_WRITTEN, and a complaint, where that fails. */
UtExit ut_print_text (char *text);

/* One line on standard error, with the program's name before it. */
void ut_complain (const char *format, ...) G_GNUC_PRINTF (1, 2);
