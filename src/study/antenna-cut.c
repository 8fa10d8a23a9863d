#include "antenna-cut.h"

#include <math.h>

#include "base-law.h"

void
ut_antenna_cut_dbi (const UtPlan *plan, const char *antenna, gboolean vertical, guint n, double *dbi)
{
  UtAntennaShape shape = ut_antenna_shape (plan, antenna);

  for (guint k = 0; k < n; k++)
    {
      double angle = 2 * G_PI * k / n;
      /* Boresight of an antenna turned nowhere is +y. */
      const double direction[3] = { vertical ? 0 : sin (angle), cos (angle), vertical ? sin (angle) : 0 };
      UtRadioStatus status = ut_antenna_gain_dbi (&shape, 0, 0, direction, &dbi[k]);

      g_assert (status == UT_RADIO_OK); /* the plan was checked */
    }
}
