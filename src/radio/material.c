#include "material.h"

#include <math.h>
#include <string.h>

static const UtMaterial materials[] = {
  { "concrete", 5.24, 0, 0.0462, 0.7822, 1, 100 },    { "brick", 3.91, 0, 0.0238, 0.16, 1, 40 },
  { "plasterboard", 2.73, 0, 0.0085, 0.9395, 1, 100 }, { "wood", 1.99, 0, 0.0047, 1.0718, 0.001, 100 },
  { "glass", 6.31, 0, 0.0036, 1.3394, 0.1, 100 },     { "ceiling-board", 1.48, 0, 0.0011, 1.0750, 1, 100 },
  { "chipboard", 2.58, 0, 0.0217, 0.7800, 1, 100 },   { "plywood", 2.71, 0, 0.33, 0, 1, 40 },
  { "marble", 7.074, 0, 0.0055, 0.9262, 1, 60 },      { "floorboard", 3.66, 0, 0.0044, 1.3515, 50, 100 },
  { "metal", 1, 0, 1e7, 0, 1, 100 },                  { "air", 1, 0, 0, 0, 0.001, 100 },
};

const UtMaterial *
ut_materials (size_t *count)
{
  *count = sizeof materials / sizeof materials[0];
  return materials;
}

const UtMaterial *
ut_material_find (const char *id)
{
  for (size_t i = 0; i < sizeof materials / sizeof materials[0]; i++)
    if (strcmp (materials[i].id, id) == 0)
      return &materials[i];
  return NULL;
}

UtRadioStatus
ut_material_at (const UtMaterial *material, double frequency_hz, double *relative_permittivity, double *conductivity_s_m)
{
  double frequency_ghz = frequency_hz / 1e9;

  if (!isfinite (frequency_hz) || !(frequency_hz > 0))
    return UT_RADIO_INVALID;
  *relative_permittivity = material->a * pow (frequency_ghz, material->b);
  *conductivity_s_m = material->c * pow (frequency_ghz, material->d);
  return UT_RADIO_OK;
}
