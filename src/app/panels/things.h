/* Everything on a plan in words, one line a thing: the sheet's accessible twin.  No widgets. */
#pragma once

#include "desk.h"

/* All things of the plan in order, cells, terminals, walls storey by storey; of UtPick. */
GArray *ut_things (const UtPlan *plan);

/* What there is to say of one: where it is, of what, what it does.  study may be NULL.  Transfer full. */
char *ut_thing_text (const UtPlan *plan, UtStudy *study, const UtPick *pick);
