/* The gain matrix as a picture: a row a terminal, a column a cell, shaded by the gain between them, the serving pairs outlined. */
#pragma once

#include <cairo.h>

#include "palette.h"
#include "study.h"

typedef enum { UT_MATRIX_GAINS, UT_MATRIX_BLAME } UtMatrixView;

typedef struct
{
  UtMatrixView view;
  gboolean by_strength; /* terminals by their largest gain, the largest first; else as in the plan */
} UtMatrixOptions;

typedef struct
{
  double left, top, cell_width, row_height;
  guint n_cells, n_terminals;
  guint *terminals; /* of each row: which terminal of the plan */
} UtMatrixLayout;

void ut_matrix_layout (const UtStudy *study, const UtMatrixOptions *options, double width, double height, double text_size, UtMatrixLayout *layout);
void ut_matrix_layout_clear (UtMatrixLayout *layout);

/* The pair at a point; FALSE: none. */
gboolean ut_matrix_at (const UtMatrixLayout *layout, double x, double y, guint *terminal, guint *cell);

/* marked: bit by terminal of the plan, NULL: none is marked. */
void ut_matrix_paint (cairo_t *cr, const UtStudy *study, const UtMatrixOptions *options, const gboolean *marked, double width, double height, double text_size, const UtPalette *palette);

/* What there is to be said of a pair. Transfer full. */
char *ut_matrix_text (const UtStudy *study, const UtMatrixOptions *options, guint terminal, guint cell);
