/* What the reports share. */
#pragma once

#include <json-glib/json-glib.h>

#include "report.h"

/* A member of the object being built: null for NAN and infinite, and for NULL. */
void ut_report_add_figure (JsonBuilder *builder, const char *key, double value);
void ut_report_add_text (JsonBuilder *builder, const char *key, const char *text);

/* Why the headroom is what it is, and what would heal the plan. */
void ut_report_add_edge (JsonBuilder *builder, const UtStudy *study);
void ut_report_add_remedies (JsonBuilder *builder, const UtStudy *study);
void ut_report_append_edge (const UtStudy *study, GString *out);
