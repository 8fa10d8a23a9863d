/* Where the parts of the page lie, and the parts themselves; for the rooms of the page only. All in millimetres. */
#pragma once

#include "commissioning.h"
#include "page.h"
#include "text.h"

typedef struct
{
  UtBox title, verdict, drawing, tables, key, notes;
} UtPageLayout;

void ut_page_layout (const UtPlan *plan, const UtPageSetup *setup, UtPageLayout *layout);

/* Height of a table with its head and this many rows. */
double ut_page_table_height (guint n_rows);

void ut_page_draw_drawings (cairo_t *cr, const UtStudy *study, const UtPageSetup *setup);
void ut_page_draw_key (cairo_t *cr, const UtPlan *plan, const UtBox *box, double scale);
/* With the powers that are to be typed in, and what they give. */
void ut_page_draw_tables (cairo_t *cr, const UtCommissioning *commissioning, const UtPageSetup *setup, const UtBox *box);
void ut_page_draw_notes (cairo_t *cr, const UtStudy *study, const UtBox *box);

/* A figure for paper: with a real minus sign. */
char *ut_page_figure (double value, int decimals);
