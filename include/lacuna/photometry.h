/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Photometry: bands, magnitudes and flux densities, photon rates, extinction, the star's own light in a band, and what its colours tell.
   SI units (flux densities in W m^-2 Hz^-1, angles in rad), magnitudes and extinctions in mag; NaN outside a relation's range. A function
   that belongs to a row of the table of relations is documented by that row, whose key is given. */
#ifndef LACUNA_PHOTOMETRY_H
#define LACUNA_PHOTOMETRY_H

#include <stddef.h>

#include "lacuna/status.h"

#ifdef __cplusplus
extern "C" {
#endif

/* A spectral band. Immutable; may be used from several threads at once. */
typedef struct {
  const char *name;    /* "2MASS H" */
  const char *aliases; /* what it may also be called, apart by spaces: "H"; NULL for a user's band */
  const char *system;  /* of the zero point: "2MASS" */
  const char *source;  /* of the zero point, its id in the table of sources; NULL where the user gave it */
  double wavelength;   /* reference wavelength, m */
  double width;        /* m; NaN where it is not known */
  double zero_point;   /* flux density of magnitude zero, W m^-2 Hz^-1 */
} lac_band;

/* The flux density of AB magnitude zero: 10^(-48.60/2.5) erg s^-1 cm^-2 Hz^-1, in W m^-2 Hz^-1 (Oke & Gunn 1983). */
#define LAC_AB_ZERO_POINT 3.6307805477010134e-23

/* A built-in band by its name or an alias, upper and lower case apart; NULL if there is none. It need not be dropped. */
const lac_band *lac_band_named(const char *name);

/* The built-in bands in order; NULL past the last. */
const lac_band *lac_band_at(size_t index);

/* The names of the built-in bands nearest to a word that is none, best first.
   Given:    room for max names. Returned: how many, at most max. */
int lac_band_nearest(const char *word, const char **names, int max);

/* A band of the user's, freed by lac_band_drop.
   Given:    name        NULL: the system's name
             system      a label; "AB" brings its own zero point, and zero_point must be NaN then
             wavelength  m, > 0
             width       m, > 0, or NaN where it is not known
             zero_point  W m^-2 Hz^-1, > 0
   Result:   LAC_OK and *band. LAC_OUT_OF_RANGE, LAC_NO_MEMORY: *band is NULL. Strings are copied. */
lac_status lac_band_new(const char *name, const char *system, double wavelength, double width, double zero_point, lac_band **band);

/* Gives a band back; nothing to do for a built-in one and for NULL. */
void lac_band_drop(const lac_band *band);

double lac_flux_density(double magnitude, double zero_point_flux);                                        /* flux_density/from_magnitude */
double lac_magnitude(double flux_density, double zero_point_flux);                                        /* magnitude/from_flux_density */
double lac_photon_flux(double flux_density, double wavelength, double bandwidth);                         /* photon_flux/of_flux_density */
double lac_extinction(double wavelength, double visual_extinction, double total_to_selective_extinction); /* extinction/cardelli_1989 */
double lac_stellar_flux_density(double stellar_radius, double effective_temperature, double distance,
                                double wavelength);                                /* stellar_flux_density/black_body */
double lac_stellar_magnitude(double stellar_flux_density, double zero_point_flux); /* stellar_magnitude/of_flux_density */

double lac_stellar_angular_diameter_v_k(double v_magnitude, double k_magnitude, double visual_extinction,
                                        double total_to_selective_extinction); /* stellar_angular_diameter/kervella_2004_v_k */
double lac_stellar_angular_diameter_b_l(double b_magnitude, double l_magnitude, double visual_extinction,
                                        double total_to_selective_extinction); /* stellar_angular_diameter/kervella_2004_b_l */
double lac_stellar_angular_diameter_v_k_no_extinction(double v_magnitude,
                                                      double k_magnitude); /* stellar_angular_diameter/kervella_2004_v_k_no_extinction */
double lac_stellar_angular_diameter_b_l_no_extinction(double b_magnitude,
                                                      double l_magnitude); /* stellar_angular_diameter/kervella_2004_b_l_no_extinction */

double lac_bolometric_flux_v_j_h_k(double v_magnitude, double j_magnitude, double h_magnitude, double k_magnitude,
                                   double effective_temperature, double visual_extinction,
                                   double total_to_selective_extinction); /* bolometric_flux/v_j_h_k */
double lac_bolometric_flux_j_h_k(double j_magnitude, double h_magnitude, double k_magnitude, double effective_temperature,
                                 double visual_extinction, double total_to_selective_extinction); /* bolometric_flux/j_h_k */
double lac_bolometric_flux_h_k(double h_magnitude, double k_magnitude, double effective_temperature, double visual_extinction,
                               double total_to_selective_extinction); /* bolometric_flux/h_k */
double lac_bolometric_flux_k(double k_magnitude, double effective_temperature, double visual_extinction,
                             double total_to_selective_extinction); /* bolometric_flux/k */

#ifdef __cplusplus
}
#endif

#endif
