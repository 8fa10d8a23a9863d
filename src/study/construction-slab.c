#include "construction-slab.h"

#include <math.h>

#include "construction-loss.h"
#include "material.h"

/* A construction that says no class is heavy when its layers come to more than this. */
#define HEAVY_MM 100

static gboolean
is_heavy (const UtConstruction *construction)
{
  double thickness_mm = 0;

  if (construction->wall_class != NULL)
    return g_str_equal (construction->wall_class, "heavy");
  for (guint i = 0; i < construction->layers->len; i++)
    thickness_mm += ((const UtConstructionLayer *) construction->layers->pdata[i])->thickness_mm;
  return thickness_mm > HEAVY_MM;
}

void
ut_construction_slab_init (UtConstructionSlab *slab, const UtConstruction *construction, double frequency_hz)
{
  guint n = construction->layers->len;

  *slab = (UtConstructionSlab){ .loss_db = construction->loss_db };
  slab->heavy = is_heavy (construction);
  if (n == 0)
    return;
  g_autofree UtLayer *layers = g_new (UtLayer, n);
  for (guint i = 0; i < n; i++)
    {
      const UtConstructionLayer *from = construction->layers->pdata[i];
      UtLayer *to = &layers[i];

      to->thickness_m = from->thickness_mm / 1e3;
      if (from->material == NULL)
        {
          to->relative_permittivity = from->relative_permittivity;
          to->conductivity_s_m = from->conductivity_s_m;
        }
      else
        {
          UtRadioStatus status = ut_material_at (ut_material_find (from->material),
                                                 frequency_hz,
                                                 &to->relative_permittivity,
                                                 &to->conductivity_s_m);
          g_assert (status == UT_RADIO_OK); /* the plan was checked */
        }
    }
  slab->layers = g_new (UtSlabLayer, n);
  UtRadioStatus status = ut_slab_prepare (layers, n, frequency_hz, slab->layers, &slab->slab);
  g_assert (status == UT_RADIO_OK);
}

void
ut_construction_slab_clear (UtConstructionSlab *slab)
{
  g_clear_pointer (&slab->layers, g_free);
}

void
ut_construction_losses (const UtPlan *plan, const UtConstruction *construction, const double *incidence_deg, guint n, UtConstructionLoss *losses)
{
  static const double te_share[] = { [UT_POLARIZATION_VERTICAL] = 1, [UT_POLARIZATION_HORIZONTAL] = 0, [UT_POLARIZATION_MIXED] = 0.5 };
  UtConstructionSlab slab;

  ut_construction_slab_init (&slab, construction, plan->carrier->frequency_mhz * 1e6);
  for (guint i = 0; i < n; i++)
    {
      double incidence_rad = CLAMP (incidence_deg[i], 0, 90) * G_PI / 180, share = te_share[plan->carrier->polarization];
      UtSlabLoss exact, averaged;

      losses[i] = (UtConstructionLoss){ slab.loss_db, slab.loss_db, slab.loss_db, slab.loss_db };
      if (slab.layers == NULL || ut_slab_evaluate (&slab.slab, incidence_rad, share, FALSE, &exact) != UT_RADIO_OK
          || ut_slab_evaluate (&slab.slab, incidence_rad, share, TRUE, &averaged) != UT_RADIO_OK)
        continue;
      losses[i] = (UtConstructionLoss){ MAX (exact.loss_db, 0), MAX (averaged.loss_db, 0), MAX (averaged.loss_min_db, 0), MAX (averaged.loss_max_db, 0) };
    }
  ut_construction_slab_clear (&slab);
}
