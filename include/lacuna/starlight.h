/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Starlight: distance, luminosity, radius, temperature, angular diameter, accretion. SI units (angles in rad); NaN outside a
   relation's range. Each function is documented by its row in the table of relations, whose key is given. */
#ifndef LACUNA_STARLIGHT_H
#define LACUNA_STARLIGHT_H

#ifdef __cplusplus
extern "C" {
#endif

double lac_parallax(double distance); /* parallax/distance */
double lac_distance(double parallax); /* distance/parallax */

double lac_stellar_radius_angular_diameter(double stellar_angular_diameter, double distance); /* stellar_radius/angular_diameter */
double lac_stellar_radius_luminosity_and_temperature(double stellar_luminosity,
                                                     double effective_temperature); /* stellar_radius/luminosity_and_temperature */
double lac_effective_temperature(double stellar_luminosity, double stellar_radius); /* effective_temperature/luminosity_and_radius */
double lac_stellar_angular_diameter(double stellar_radius, double distance);        /* stellar_angular_diameter/definition */

double lac_bolometric_flux(double stellar_luminosity, double distance);                   /* bolometric_flux/luminosity_and_distance */
double lac_stellar_luminosity_flux_and_distance(double bolometric_flux, double distance); /* stellar_luminosity/flux_and_distance */
double lac_stellar_luminosity_catalogue(double catalogue_luminosity, double catalogue_distance,
                                        double distance); /* stellar_luminosity/catalogue */
double lac_stellar_luminosity_radius_and_temperature(double stellar_radius,
                                                     double effective_temperature); /* stellar_luminosity/radius_and_temperature */

double lac_magnetospheric_radius(double stellar_radius); /* magnetospheric_radius/gullbring_1998 */
double lac_accretion_luminosity(double mass_accretion_rate, double stellar_mass, double stellar_radius,
                                double magnetospheric_radius); /* accretion_luminosity/gullbring_1998 */
double lac_mass_accretion_rate(double accretion_luminosity, double stellar_mass, double stellar_radius,
                               double magnetospheric_radius); /* mass_accretion_rate/gullbring_1998 */
double lac_heating_luminosity_star_plus_accretion(double stellar_luminosity,
                                                  double accretion_luminosity); /* heating_luminosity/star_plus_accretion */
double lac_heating_luminosity_star_alone(double stellar_luminosity);            /* heating_luminosity/star_alone */

double lac_rotation_period(double stellar_mass, double corotation_radius); /* rotation_period/kepler */
double lac_corotation_radius(double stellar_mass, double rotation_period); /* corotation_radius/kepler */

#ifdef __cplusplus
}
#endif

#endif
