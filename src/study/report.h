/* Answers as text, JSON and CSV (docs/command-line.md).  All return text to be freed, ending in a newline. */
#pragma once

#include "channels.h"
#include "control.h"
#include "study.h"
#include "path.h"

char *ut_report_study_json (const UtStudy *study);
char *ut_report_study_text (const UtStudy *study);
char *ut_report_study_csv (const UtStudy *study);

char *ut_report_channels_json (const UtChannels *channels);
char *ut_report_channels_text (const UtChannels *channels, const UtPlan *plan);

char *ut_report_control_json (const UtControl *control);
char *ut_report_control_text (const UtControl *control);
char *ut_report_control_csv (const UtControl *control);

char *ut_report_gains_json (const UtGains *gains);
char *ut_report_gains_text (const UtGains *gains);
char *ut_report_gains_csv (const UtGains *gains);

char *ut_report_path_json (const UtPlan *plan, guint cell, guint terminal, const UtPath *path);
char *ut_report_path_text (const UtPlan *plan, guint cell, guint terminal, const UtPath *path);

/* One plain sentence: whether, how much, and who.  Used by text, page and window alike. */
char *ut_report_verdict_sentence (const UtStudy *study);

/* A dB or dBm figure rounded to `decimals`, never "-0.0"; NAN: an en dash. */
char *ut_report_figure (double value, int decimals);
