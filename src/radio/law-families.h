/* The laws behind the table of laws.c; one file a family.  Each gets a path of at least 1 m and finite, positive numbers, checks its
 * own parameters and leaves the result untouched when they are wrong. */
#pragma once

#include "laws.h"

typedef UtRadioStatus (*UtLawLoss) (const UtLaw *law, const UtLawPath *path, double *loss_db);
typedef UtLawRange (*UtLawRanges) (const UtLaw *law, const UtLawPath *path);

/* free-space.c */
double ut_free_space_db (double frequency_hz, double distance_m);
UtRadioStatus ut_free_space_loss (const UtLaw *law, const UtLawPath *path, double *loss_db);
UtRadioStatus ut_log_distance_loss (const UtLaw *law, const UtLawPath *path, double *loss_db);

/* itu-indoor.c: ITU-R P.1238 */
UtRadioStatus ut_site_general_loss (const UtLaw *law, const UtLawPath *path, double *loss_db);
UtLawRange ut_site_general_range (const UtLaw *law, const UtLawPath *path);
UtRadioStatus ut_distance_coefficient_loss (const UtLaw *law, const UtLawPath *path, double *loss_db);
UtLawRange ut_distance_coefficient_range (const UtLaw *law, const UtLawPath *path);

/* tr-38901.c: 3GPP TR 38.901 */
UtRadioStatus ut_indoor_office_loss (const UtLaw *law, const UtLawPath *path, double *loss_db);
UtLawRange ut_indoor_office_range (const UtLaw *law, const UtLawPath *path);
UtRadioStatus ut_indoor_factory_loss (const UtLaw *law, const UtLawPath *path, double *loss_db);
UtLawRange ut_indoor_factory_range (const UtLaw *law, const UtLawPath *path);

/* multi-wall.c: COST 231 */
UtRadioStatus ut_multi_wall_loss (const UtLaw *law, const UtLawPath *path, double *loss_db);
UtLawRange ut_multi_wall_range (const UtLaw *law, const UtLawPath *path);
