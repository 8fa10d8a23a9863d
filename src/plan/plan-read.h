/* Reading a plan, strictly (RFC 8259) and whole: either a valid plan or a list of faults. */
#pragma once

#include <gio/gio.h>

#include "plan.h"

/* One fault or warning of a plan. */
typedef struct
{
  char *path;    /* as in "cells[0].x_m"; "" where the whole text is meant ("line 3, column 3" for
                    syntax) */
  char *message; /* "what is wrong; what is expected" */
} UtFault;

void ut_fault_free (UtFault *fault);

#define UT_FAULTS_MOST 20

/* Parses and validates `text` (length bytes, need not end in NUL).
 * faults: an array made with ut_faults_new (); gets at most UT_FAULTS_MOST, in file order; a
 * mistake's consequences are not reported again.  Returns NULL exactly when there is a fault. */
GPtrArray *ut_faults_new (void);
const UtPlan *
ut_plan_read (const char *text, gsize length, GPtrArray *faults) G_GNUC_WARN_UNUSED_RESULT;

/* The same from a file.  *error is set (GIO domain) only when the file cannot be opened or read;
 * faults otherwise. */
const UtPlan *
ut_plan_read_file (GFile *file, GPtrArray *faults, GError **error) G_GNUC_WARN_UNUSED_RESULT;
