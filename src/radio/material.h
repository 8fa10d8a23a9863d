/* Building materials: permittivity and conductivity over frequency (ITU-R P.2040-3, table 3, equations (28), (29), (59)). */
#pragma once

#include <stddef.h>

#include "radio.h"

typedef struct
{
  const char *id;                   /* as the plan file writes it */
  double a, b;                      /* relative permittivity = a f_GHz^b */
  double c, d;                      /* conductivity = c f_GHz^d, S/m */
  double lowest_ghz, highest_ghz;   /* range the recommendation states */
} UtMaterial;

/* All materials, in the recommendation's order; *count of them. */
const UtMaterial *ut_materials (size_t *count);

/* NULL where there is none of that id. */
const UtMaterial *ut_material_find (const char *id);

/* Relative permittivity and conductivity (S/m) at frequency_hz (> 0). */
UtRadioStatus ut_material_at (const UtMaterial *material,
                              double frequency_hz,
                              double *relative_permittivity,
                              double *conductivity_s_m);
