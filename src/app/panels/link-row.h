/* One row of the links table: a link's figures as the study gives them, told anew when they change. */
#pragma once

#include "study.h"

#define UT_TYPE_LINK_ROW (ut_link_row_get_type ())
G_DECLARE_FINAL_TYPE (UtLinkRow, ut_link_row, UT, LINK_ROW, GObject)

/* Columns of the table, in the order shown. */
typedef enum
{
  UT_COLUMN_TERMINAL,
  UT_COLUMN_CELL,
  UT_COLUMN_POWER,
  UT_COLUMN_TARGET,
  UT_COLUMN_SINR,
  UT_COLUMN_MARGIN,
  UT_COLUMN_SIGNAL,
  UT_COLUMN_INTERFERENCE,
  UT_COLUMN_RESERVE,
  UT_COLUMN_CHANCE,
  UT_COLUMN_LIMIT,
  UT_COLUMN_NAME,
  UT_N_COLUMNS
} UtLinkColumn;

/* Which links the table shows. */
typedef enum { UT_SHOW_ALL, UT_SHOW_FAILING, UT_SHOW_AT_LIMIT, UT_SHOW_LIMITING, UT_N_SHOWS } UtLinkShow;

/* Signal "changed". */
UtLinkRow *ut_link_row_new (UtStudy *study, guint index);

/* The row now stands for this link; tells when any text became another one. */
void ut_link_row_set (UtLinkRow *row, UtStudy *study, guint index);

const char *ut_link_row_terminal (UtLinkRow *row); /* the id */
const char *ut_link_row_text (UtLinkRow *row, UtLinkColumn column);

/* For sorting: the figure of a numeric column (NAN sorts last), 0 for others. */
double ut_link_row_figure (UtLinkRow *row, UtLinkColumn column);

gboolean ut_link_row_passes (UtLinkRow *row, UtLinkShow show);

const char *ut_link_column_title (UtLinkColumn column);
gboolean ut_link_column_is_figure (UtLinkColumn column);
