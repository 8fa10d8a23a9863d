/* The laws behind the table of laws.c; one file a family.  Each gets a path of at least 1 m and finite, positive numbers, checks its
 * own parameters and leaves the result untouched when they are wrong. */
#pragma once

#include "laws.h"

typedef UtRadioStatus (*UtLawLoss) (const UtLaw *law, const UtLawPath *path, double *loss_db);

/* free-space.c */
UtRadioStatus ut_free_space_loss (const UtLaw *law, const UtLawPath *path, double *loss_db);
UtRadioStatus ut_log_distance_loss (const UtLaw *law, const UtLawPath *path, double *loss_db);
