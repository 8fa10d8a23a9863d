/* The budget of a link as a picture: on the left the way from the sender's power to what is received, step by step; on the right, on the same scale, signal, what is
 * against it and what would be needed, as set, all turned down alike and as planned. */
#pragma once

#include <cairo.h>

#include "budget.h"
#include "palette.h"

typedef enum { UT_BAR_STEP, UT_BAR_RECEIVED, UT_BAR_SIGNAL, UT_BAR_INTERFERER, UT_BAR_NOISE, UT_BAR_BACKGROUND, UT_BAR_NEEDED } UtBudgetBarKind;

/* A bar, or for the needed level a line: from from_dbm to to_dbm, in the units of the target. */
typedef struct
{
  UtBudgetBarKind kind;
  int of_case; /* UtBudgetCaseKind; -1: the way */
  guint index; /* of the part, or of the interferer */
  double from_dbm, to_dbm;
  double x, y, width, height;
} UtBudgetBar;

typedef struct
{
  double left, top, width, height; /* of the scale's frame */
  double low_dbm, high_dbm;        /* at its lower and upper edge; multiples of 10 */
  GArray *bars;                    /* of UtBudgetBar */
} UtBudgetLayout;

/* Where everything lies in a rectangle of this size at (0, 0); text_size in the same units. */
void ut_budget_layout (const UtBudget *budget, double width, double height, double text_size, UtBudgetLayout *layout);
void ut_budget_layout_clear (UtBudgetLayout *layout);

/* Height on the scale, in the units of the target. */
double ut_budget_y (const UtBudgetLayout *layout, double dbm);

void ut_budget_paint (cairo_t *cr, const UtBudget *budget, double width, double height, double text_size, const UtPalette *palette);

/* The figures as CSV (RFC 4180, point as decimal sign). Transfer full. */
char *ut_budget_csv (const UtBudget *budget);
