/* UtDocument: a plan being worked on: its history, its file and whether it is saved. */
#pragma once

#include <gio/gio.h>

#include "plan.h"

#define UT_TYPE_DOCUMENT (ut_document_get_type ())
G_DECLARE_FINAL_TYPE (UtDocument, ut_document, UT, DOCUMENT, GObject)

/* Properties: "file" (GFile, read), "modified" (boolean, read), "undo-label", "redo-label"
 * (strings, read, NULL: nothing). Signal "changed" (old plan, new plan as gpointer) after the
 * present plan became another one. */
UtDocument *ut_document_new (const UtPlan *plan);

/* Reads a file. NULL: faults or *error as in ut_plan_read_file (). */
UtDocument *ut_document_open (GFile *file, GPtrArray *faults, GError **error);

const UtPlan *ut_document_plan (UtDocument *document);
GFile *ut_document_file (UtDocument *document); /* NULL: never saved */
gboolean ut_document_is_modified (UtDocument *document);

/* One step; takes over `plan`. */
void ut_document_apply (UtDocument *document,
                        const UtPlan *plan,
                        const char *label,
                        const char *coalesce,
                        const char *selection);
gboolean ut_document_undo (UtDocument *document);
gboolean ut_document_redo (UtDocument *document);
const char *ut_document_undo_label (UtDocument *document);
const char *ut_document_redo_label (UtDocument *document);
const char *ut_document_selection (UtDocument *document);

/* Writes to the document's file (file NULL) or to another, which then becomes the document's.
 * Notices a file that was changed by somebody else (G_IO_ERROR_WRONG_ETAG) unless force. On failure
 * document and old file stay as they were. */
gboolean ut_document_save (UtDocument *document, GFile *file, gboolean force, GError **error);

/* What became of the document's file since it was read or written. */
typedef enum
{
  UT_FILE_NONE, /* never saved */
  UT_FILE_SAME,
  UT_FILE_CHANGED, /* by somebody else */
  UT_FILE_MISSING,
  UT_FILE_READ_ONLY /* the same, but it cannot be written to */
} UtFileState;
UtFileState ut_document_file_state (UtDocument *document);

/* Reads the file again, as one step of that name, so that Undo shows what was there before. FALSE: faults or
 * *error as in ut_plan_read_file (), and nothing is changed. */
gboolean ut_document_reload (UtDocument *document,
                             const char *label,
                             GPtrArray *faults,
                             GError **error);
