#include "base-law.h"

/* The enumerations of both rooms have their members in one order. */
G_STATIC_ASSERT ((int) UT_BASE_MULTI_WALL == (int) UT_LAW_MULTI_WALL && (int) UT_BASE_SITE_GENERAL == (int) UT_LAW_SITE_GENERAL
                 && (int) UT_BASE_INDOOR_OFFICE == (int) UT_LAW_INDOOR_OFFICE);
G_STATIC_ASSERT ((int) UT_BASE_INDUSTRIAL == (int) UT_ENVIRONMENT_INDUSTRIAL && (int) UT_BASE_BY_WALLS == (int) UT_SIGHT_BY_WALLS
                 && (int) UT_BASE_DH == (int) UT_CLUTTER_DH && (int) UT_BASE_SH == (int) UT_CLUTTER_SH);
G_STATIC_ASSERT ((int) UT_ANTENNA_CUTS == (int) UT_PATTERN_CUTS && (int) UT_ANTENNA_DIPOLE == (int) UT_PATTERN_DIPOLE
                 && (int) UT_ANTENNA_SECTOR == (int) UT_PATTERN_SECTOR);

UtLaw
ut_base_law (const UtPropagation *propagation)
{
  return (UtLaw){
    .kind = (UtLawKind) propagation->law,
    .exponent = propagation->exponent,
    .reference_m = propagation->reference_m,
    .environment = (UtEnvironment) propagation->environment,
    .sight = (UtSight) propagation->sight,
    .clutter = (UtClutter) propagation->clutter,
    .coefficient = propagation->coefficient,
    .floor_loss_db = (const double *) (const void *) propagation->floor_loss_db->data,
    .n_floor_losses = propagation->floor_loss_db->len,
    .light_db = propagation->light_db,
    .heavy_db = propagation->heavy_db,
    .floor_db = propagation->floor_db,
    .b = propagation->b,
  };
}

char *
ut_base_law_text (const UtPropagation *propagation)
{
  static const char *const environments[] = { "office", "corridor", "industrial" };
  static const char *const sights[] = { "in sight", "out of sight", "out of sight behind walls" };
  static const char *const clutters[] = { "sparse clutter, low cell", "dense clutter, low cell", "sparse clutter, high cell", "dense clutter, high cell" };

  switch (propagation->law)
    {
    case UT_BASE_FREE_SPACE:
      break;
    case UT_BASE_LOG_DISTANCE:
      return g_strdup_printf ("log-distance, exponent %g from %g m", propagation->exponent, propagation->reference_m);
    case UT_BASE_SITE_GENERAL:
      return g_strdup_printf ("site-general (ITU-R P.1238-11), %s, %s", environments[propagation->environment], sights[propagation->sight]);
    case UT_BASE_DISTANCE_COEFFICIENT:
      return g_strdup_printf ("distance coefficient %g (ITU-R P.1238-8)", propagation->coefficient);
    case UT_BASE_INDOOR_OFFICE:
      return g_strdup_printf ("indoor office (3GPP TR 38.901), %s", sights[propagation->sight]);
    case UT_BASE_INDOOR_FACTORY:
      return g_strdup_printf ("indoor factory (3GPP TR 38.901), %s, %s", clutters[propagation->clutter], sights[propagation->sight]);
    case UT_BASE_MULTI_WALL:
      return g_strdup_printf ("multi-wall (COST 231), light walls %g dB, heavy ones %g dB, floors %g dB",
                              propagation->light_db,
                              propagation->heavy_db,
                              propagation->floor_db);
    }
  return g_strdup ("free space (ITU-R P.525)");
}

UtAntennaShape
ut_antenna_shape (const UtPlan *plan, const char *id)
{
  int index = ut_plan_find_antenna (plan, id);
  const UtAntenna *antenna;

  if (index < 0)
    return (UtAntennaShape){ .pattern = UT_PATTERN_ISOTROPIC };
  antenna = ut_plan_antenna (plan, (guint) index);
  return (UtAntennaShape){
    .pattern = (UtPattern) antenna->pattern,
    .gain_dbi = antenna->gain_dbi,
    .beamwidth_h_deg = antenna->beamwidth_h_deg,
    .beamwidth_v_deg = antenna->beamwidth_v_deg,
    .horizontal_dbi = (const double *) (const void *) antenna->horizontal_dbi->data,
    .n_horizontal = antenna->horizontal_dbi->len,
    .vertical_dbi = (const double *) (const void *) antenna->vertical_dbi->data,
    .n_vertical = antenna->vertical_dbi->len,
  };
}

double
ut_radio_peak_dbi (const UtPlan *plan, const UtRadio *radio)
{
  UtAntennaShape shape = ut_antenna_shape (plan, radio->antenna);

  return ut_antenna_peak_dbi (&shape);
}
