/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Constants of nature and of the sky, each with its source. One list, so that a program can print what was used.
   Columns: C name, value in SI, unit (VOUnits), source. */
#ifndef LACUNA_CONSTANTS_H
#define LACUNA_CONSTANTS_H

#include <stddef.h>

#ifdef __cplusplus
extern "C" {
#endif

#define LAC_CONSTANT_LIST(X)                                                                                                      \
  X(LAC_SPEED_OF_LIGHT, 299792458.0, "m.s**-1", "SI 2019, exact")                                                                 \
  X(LAC_PLANCK_CONSTANT, 6.62607015e-34, "J.s", "SI 2019, exact")                                                                 \
  X(LAC_BOLTZMANN, 1.380649e-23, "J.K**-1", "SI 2019, exact")                                                                     \
  X(LAC_STEFAN_BOLTZMANN, 5.670374419184429454e-8, "W.m**-2.K**-4", "2 pi^5 k^4/(15 h^3 c^2), exact from SI 2019")                \
  X(LAC_SECOND_RADIATION, 1.4387768775039338e-2, "m.K", "h c/k, exact from SI 2019")                                              \
  X(LAC_GRAVITATION, 6.67430e-11, "m**3.kg**-1.s**-2", "CODATA 2018 and 2022")                                                    \
  X(LAC_ATOMIC_MASS, 1.66053906660e-27, "kg", "CODATA 2018")                                                                      \
  X(LAC_ELECTRON_VOLT, 1.602176634e-19, "J", "SI 2019, exact")                                                                    \
  X(LAC_PROTON_MASS, 1.67262192369e-27, "kg", "CODATA 2018")                                                                      \
  X(LAC_AU, 149597870700.0, "m", "IAU 2012 Resolution B2, exact")                                                                 \
  X(LAC_PC, 3.0856775814913673e16, "m", "IAU 2015 Resolution B2: 648000/pi au")                                                   \
  X(LAC_SOLAR_GM, 1.3271244e20, "m**3.s**-2", "IAU 2015 Resolution B3, nominal")                                                  \
  X(LAC_SOLAR_MASS, 1.988409870698051e30, "kg", "nominal GM of IAU 2015 B3 over CODATA 2018 G")                                   \
  X(LAC_SOLAR_LUMINOSITY, 3.828e26, "W", "IAU 2015 Resolution B3, nominal")                                                       \
  X(LAC_SOLAR_RADIUS, 6.957e8, "m", "IAU 2015 Resolution B3, nominal")                                                            \
  X(LAC_JUPITER_MASS, 1.8981245973360502e27, "kg", "nominal GM 1.2668653e17 of IAU 2015 B3 over CODATA 2018 G")                   \
  X(LAC_JUPITER_RADIUS, 7.1492e7, "m", "IAU 2015 Resolution B3, nominal equatorial")                                              \
  X(LAC_EARTH_MASS, 5.9721678677913789e24, "kg", "nominal GM 3.986004e14 of IAU 2015 B3 over CODATA 2018 G")                      \
  X(LAC_EARTH_RADIUS, 6.3781e6, "m", "IAU 2015 Resolution B3, nominal equatorial")                                                \
  X(LAC_YEAR, 31557600.0, "s", "Julian year of 365.25 days, IAU")                                                                 \
  X(LAC_DAY, 86400.0, "s", "IAU")                                                                                                 \
  X(LAC_ARCSEC, 4.8481368110953599e-6, "rad", "pi/648000")                                                                        \
  X(LAC_MAS, 4.8481368110953599e-9, "rad", "pi/648000000")                                                                        \
  X(LAC_JY, 1e-26, "W.m**-2.Hz**-1", "IAU")

#define LAC_CONSTANT_DEFINED(name, value, unit, source) static const double name = value;
LAC_CONSTANT_LIST(LAC_CONSTANT_DEFINED)
#undef LAC_CONSTANT_DEFINED

/* The list as data, for programs that print it. Given: an index from 0. Returned: NULL past the last. */
typedef struct {
  const char *name;
  double value;
  const char *unit, *source;
} lac_constant;
const lac_constant *lac_constant_at(size_t index);

#ifdef __cplusplus
}
#endif

#endif
