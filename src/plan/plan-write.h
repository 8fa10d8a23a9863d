/* Writing a plan: the same plan always gives the same bytes, and a file of our own comes back as it
 * was. */
#pragma once

#include <gio/gio.h>

#include "plan.h"

/* The plan as text: UTF-8 JSON, two-space indent, a newline at the end. Transfer full. */
char *ut_plan_write (const UtPlan *plan, gsize *length) G_GNUC_WARN_UNUSED_RESULT;

/* Atomic: the file is either the old or the new one.  etag: of what is being replaced (NULL: do not
 * compare); *new_etag gets the new one (transfer full; may be NULL).  G_IO_ERROR_WRONG_ETAG when
 * somebody else changed the file meanwhile. */
gboolean ut_plan_write_file (
    const UtPlan *plan, GFile *file, const char *etag, char **new_etag, GError **error);

/* The shortest decimal that reads back to the same double, locale-free, never "-0"; value must be
 * finite. Buffer of at least G_ASCII_DTOSTR_BUF_SIZE. */
char *ut_number_text (double value, char *buffer);

/* First 12 hex digits of the SHA-256 of the plan's bytes.  Transfer full. */
char *ut_plan_fingerprint (const UtPlan *plan) G_GNUC_WARN_UNUSED_RESULT;
