/* A construction of the plan, prepared for its loss at one frequency. */
#pragma once

#include "plan.h"
#include "slab.h"

typedef struct
{
  double loss_db; /* NAN: by layers */
  gboolean heavy; /* of the two classes that the multi-wall law knows */
  UtSlab slab;
  UtSlabLayer *layers;
} UtConstructionSlab;

void ut_construction_slab_init (UtConstructionSlab *slab, const UtConstruction *construction, double frequency_hz);
void ut_construction_slab_clear (UtConstructionSlab *slab);
