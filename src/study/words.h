/* The words of the command line and the results for what study.h enumerates (docs/command-line.md). */
#pragma once

#include "study.h"

/* "met", "noise-limited", ...; "least-power", ...; "down", "up"; NULL for no fallback. */
const char *ut_verdict_word (UtVerdict verdict);
const char *ut_aim_word (UtAim aim);
const char *ut_direction_word (UtDirection direction);
const char *ut_fallback_word (UtFallback fallback);

/* FALSE, and nothing written, for a word that is none. */
gboolean ut_aim_from_word (const char *word, UtAim *aim);
gboolean ut_direction_from_word (const char *word, UtDirection *direction);
