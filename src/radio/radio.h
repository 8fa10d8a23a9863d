/* What all of radio/ shares: status codes and physical constants. */
#pragma once

typedef enum
{
  UT_RADIO_OK = 0,
  UT_RADIO_INVALID, /* an argument is not finite or out of its range */
  UT_RADIO_UNKNOWN, /* no such law or material */
} UtRadioStatus;

#define UT_SPEED_OF_LIGHT_M_S 299792458.0           /* exact (SI) */
#define UT_BOLTZMANN_J_K 1.380649e-23               /* exact (SI) */
#define UT_VACUUM_PERMITTIVITY_F_M 8.8541878128e-12 /* CODATA 2018 */
