/* The page as a file. */
#pragma once

#include "page.h"

/* Writes .pdf, .svg or .png by the name's ending (case ignored; PNG at 150 dpi); the file appears whole or not at all.
 * G_IO_ERROR_INVALID_ARGUMENT for another ending; otherwise the writing error. */
gboolean ut_page_write_file (const UtStudy *study, const UtPageSetup *setup, const char *path, GError **error);
