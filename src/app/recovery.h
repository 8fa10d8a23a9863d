/* Unsaved work on disk, so that a crash loses seconds of it: a copy of each modified document in a folder of the user's, gone when it is saved or given up.
 * No widgets. */
#pragma once

#include "document.h"

#define UT_TYPE_RECOVERY (ut_recovery_get_type ())
G_DECLARE_FINAL_TYPE (UtRecovery, ut_recovery, UT, RECOVERY, GObject)

/* Between a change and its copy on disk. */
#define UT_RECOVERY_MS 2000

/* The usual folder, to be freed. */
char *ut_recovery_folder (void);

/* Watches the document until the object is disposed of, which is to give up what is unsaved.  Copies are written in a thread, interval_ms after a change. */
UtRecovery *ut_recovery_new (UtDocument *document, const char *folder, guint interval_ms);

/* Writes what is unsaved now. */
void ut_recovery_write_now (UtRecovery *recovery);

/* Gives up what is unsaved, whoever still holds the object. */
void ut_recovery_close (UtRecovery *recovery);

/* What a program that is no more left behind. */
typedef struct
{
  char *plan_path;
  GFile *origin; /* the file it was opened from or saved to; NULL: none */
} UtLeft;

/* All of them, of UtLeft; of programs that still run none. */
GPtrArray *ut_recovery_find (const char *folder);

/* The document as it was left: the saved plan with the unsaved one as a step on it, so that Undo shows the saved one.  NULL where the copy cannot be read. */
UtDocument *ut_recovery_open (const UtLeft *left);

/* Removes the copy; once the work is safe elsewhere. */
void ut_recovery_forget (const UtLeft *left);
