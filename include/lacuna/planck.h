/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Black bodies: Planck functions, their peaks, integrals and inverses. SI units: wavelengths in vacuum in m, intensities per sr.
   NaN outside a function's range. Accurate in the last digits for h c/(lambda k T) from 1e-6 to 700, for the exponent is carried in two
   doubles; above 700 results fall to 0 as they must. lambda T, lambda^5 and their reciprocals must be normal doubles, which holds for
   wavelengths from 1e-60 to 1e60 m and temperatures from 1e-200 to 1e200 K. A function that belongs to a row of the table of relations is
   documented by the row, whose key is given. */
#ifndef LACUNA_PLANCK_H
#define LACUNA_PLANCK_H

#include <stddef.h>

#ifdef __cplusplus
extern "C" {
#endif

double lac_wavelength(double frequency);                                         /* wavelength/definition */
double lac_frequency(double wavelength);                                         /* frequency/definition */
double lac_planck_nu(double wavelength, double body_temperature);                /* planck_nu/planck */
double lac_planck_lambda(double wavelength, double body_temperature);            /* planck_lambda/planck */
double lac_photon_radiance_nu(double wavelength, double body_temperature);       /* photon_radiance_nu/planck */
double lac_photon_radiance_lambda(double wavelength, double body_temperature);   /* photon_radiance_lambda/planck */
double lac_peak_wavelength(double body_temperature);                             /* peak_wavelength/wien */
double lac_peak_frequency(double body_temperature);                              /* peak_frequency/wien */
double lac_peak_wavelength_power(double body_temperature);                       /* peak_wavelength_power/wien */
double lac_blackbody_fraction(double wavelength, double body_temperature);       /* blackbody_fraction/planck */
double lac_brightness_temperature(double specific_intensity, double wavelength); /* brightness_temperature/inverse_planck */
double lac_blackbody_exitance(double body_temperature);                          /* blackbody_exitance/stefan_boltzmann */

/* The Planck function per unit frequency for many wavelengths at one temperature.
   Given:    n           how many
             out         n results; may be wavelength itself, but must not overlap it otherwise
             wavelength  n wavelengths, m, > 0
             body_temperature  K, > 0
   Result:   out[i] = B_nu in W m^-2 Hz^-1 sr^-1, the same bits as lac_planck_nu; NaN where an argument is out of range.
   Accuracy: 5 units of 2^-53 for h c/(lambda k T) from 1e-6 to 700.
   Source:   Planck 1901, Annalen der Physik 309, 553, Eq. 10-13; constants exact in the SI of 2019.
   Inverse:  lac_brightness_temperature. */
void lac_planck_nu_block(size_t n, double *out, const double *wavelength, double body_temperature);

/* The same per unit wavelength: out[i] = B_lambda in W m^-3 sr^-1, the same bits as lac_planck_lambda. Accuracy: 7 units of 2^-53.
   Inverse: lac_temperature_from_planck_lambda. */
void lac_planck_lambda_block(size_t n, double *out, const double *wavelength, double body_temperature);

/* The slope of the Planck function with temperature.
   Given:    wavelength        m, > 0
             body_temperature  K, > 0
   Result:   d B_nu/dT in W m^-2 Hz^-1 sr^-1 K^-1: what a weighting by temperature (Rosseland's mean) needs.
   Accuracy: 9 units of 2^-53 for h c/(lambda k T) from 1e-6 to 700.
   Source:   derivative of Planck 1901: B_nu (x/T)/(1 - exp(-x)), x = h c/(lambda k T). */
double lac_planck_nu_slope(double wavelength, double body_temperature);

/* The temperature of the black body that has a given B_lambda.
   Given:    planck_lambda  W m^-3 sr^-1, > 0
             wavelength     m, > 0
   Result:   temperature in K; NaN also where 2 h c^2/(lambda^5 B_lambda) passes the range of doubles.
   Accuracy: 7 units of 2^-53, most of it from lambda^5.
   Source:   Planck 1901, solved for T: (h c/(lambda k))/ln(1 + 2 h c^2/(lambda^5 B_lambda)).
   Inverse:  lac_planck_lambda. That of lac_planck_nu is lac_brightness_temperature. */
double lac_temperature_from_planck_lambda(double planck_lambda, double wavelength);

/* The brightness temperature in the sense of Rayleigh and Jeans: linear in the intensity, and no body's temperature unless
   h c/(lambda k T) is small.
   Given:    specific_intensity  W m^-2 Hz^-1 sr^-1, >= 0
             wavelength          m, > 0
   Result:   lambda^2 I/(2 k), in K.
   Accuracy: 3 units of 2^-53.
   Source:   Rayleigh 1900, Philosophical Magazine 49, 539; Jeans 1905, Philosophical Magazine 10, 91. */
double lac_rayleigh_jeans_temperature(double specific_intensity, double wavelength);

/* How many photons a black body sends out.
   Given:    body_temperature  K, > 0
   Result:   photons s^-1 m^-2 into the half space, over all wavelengths: 4 pi zeta(3) k^3 T^3/(h^3 c^2).
   Accuracy: 4 units of 2^-53.
   Source:   integral of Planck 1901 over h nu. */
double lac_photon_exitance(double body_temperature);

/* The wavelength below which a black body sends out a given share of its power.
   Given:    blackbody_fraction  0 < fraction < 1
             body_temperature    K, > 0
   Result:   wavelength in m.
   Accuracy: 4 units of 2^-53 up to a fraction of 1/2; above, what the fraction itself leaves: (1 - F) is known to 2^-53.
   Source:   inverse of lac_blackbody_fraction, by Newton's method within a bracket. */
double lac_wavelength_of_blackbody_fraction(double blackbody_fraction, double body_temperature);

#ifdef __cplusplus
}
#endif

#endif
