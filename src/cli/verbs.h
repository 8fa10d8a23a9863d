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

/* What was asked for on the command line. */
typedef struct
{
  char **arguments; /* after the verb's name: PLAN and what else the verb takes */
  UtFormat format;
  UtQuestion question;
  UtPageSetup page;
  UtControlSetup loop; /* its seed is the order's seed */
  const char *output; /* NULL: not given */
} UtOrder;

UtExit ut_verb_check (const UtOrder *order);
UtExit ut_verb_gains (const UtOrder *order);
UtExit ut_verb_path (const UtOrder *order);
UtExit ut_verb_solve (const UtOrder *order);
UtExit ut_verb_channels (const UtOrder *order);
UtExit ut_verb_control (const UtOrder *order);
UtExit ut_verb_page (const UtOrder *order);

/* One line on standard error, with the program's name before it. */
void ut_complain (const char *format, ...) G_GNUC_PRINTF (1, 2);
