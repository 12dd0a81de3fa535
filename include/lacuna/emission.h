/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The disc's own light: rim, disc, and what they add to the star's; the dust's mass from its flux density. SI units (flux densities in
   W m^-2 Hz^-1, opacities in m^2 per kg of dust); NaN outside a relation's range. Each function is documented by its row in the table
   of relations, whose key is given. The disc's flux densities are integrals over its radius, good to 5e-5 of themselves for the hottest
   dust at h c/(lambda k T) <= 700, indices -2 to 3 and an outer edge up to 10^4 times the inner one. */
#ifndef LACUNA_EMISSION_H
#define LACUNA_EMISSION_H

#ifdef __cplusplus
extern "C" {
#endif

double lac_rim_flux_density_vertical_wall(double sublimation_temperature, double rim_radius, double rim_height_ratio, double inclination,
                                          double distance, double wavelength); /* rim_flux_density/vertical_wall */
double lac_rim_flux_density_rounded_rim(double sublimation_temperature, double rim_radius, double rim_height_ratio, double inclination,
                                        double distance, double wavelength); /* rim_flux_density/rounded_rim */
double lac_near_infrared_excess(double sublimation_temperature, double rim_radius, double rim_height_ratio,
                                double stellar_luminosity); /* near_infrared_excess/vertical_wall */

double lac_disc_flux_density_beckwith_1990_with_gap(double temperature_at_one_au, double temperature_index,
                                                    double dust_surface_density_at_one_au, double dust_surface_density_index,
                                                    double disc_inner_radius, double disc_outer_radius, double dust_opacity,
                                                    double inclination, double distance, double wavelength, double gap_inner_radius,
                                                    double gap_outer_radius); /* disc_flux_density/beckwith_1990_with_gap */
double lac_disc_flux_density_beckwith_1990(double temperature_at_one_au, double temperature_index, double dust_surface_density_at_one_au,
                                           double dust_surface_density_index, double disc_inner_radius, double disc_outer_radius,
                                           double dust_opacity, double inclination, double distance,
                                           double wavelength); /* disc_flux_density/beckwith_1990 */
double lac_disc_flux_density_chiang_goldreich_1997_with_gap(double stellar_radius, double effective_temperature,
                                                            double dust_surface_density_at_one_au, double dust_surface_density_index,
                                                            double disc_inner_radius, double disc_outer_radius, double dust_opacity,
                                                            double inclination, double distance, double wavelength, double gap_inner_radius,
                                                            double gap_outer_radius); /* disc_flux_density/chiang_goldreich_1997_with_gap */
double lac_disc_flux_density_chiang_goldreich_1997(double stellar_radius, double effective_temperature,
                                                   double dust_surface_density_at_one_au, double dust_surface_density_index,
                                                   double disc_inner_radius, double disc_outer_radius, double dust_opacity,
                                                   double inclination, double distance,
                                                   double wavelength); /* disc_flux_density/chiang_goldreich_1997 */

double lac_disc_inner_radius_cavity(double cavity_radius);                         /* disc_inner_radius/cavity */
double lac_disc_inner_radius_rim(double rim_radius);                               /* disc_inner_radius/rim */
double lac_temperature_at_one_au(double flaring_angle, double heating_luminosity); /* temperature_at_one_au/dullemond_2018 */
double lac_temperature_index(double flaring_angle);                                /* temperature_index/dullemond_2018 */
double lac_dust_surface_density_at_one_au(double dust_mass, double dust_surface_density_index, double disc_inner_radius,
                                          double disc_outer_radius); /* dust_surface_density_at_one_au/power_law */

double lac_dust_mass_hildebrand_1983(double dust_flux_density, double distance, double dust_opacity, double dust_temperature,
                                     double wavelength); /* dust_mass/hildebrand_1983 */
double lac_dust_flux_density(double dust_mass, double distance, double dust_opacity, double dust_temperature,
                             double wavelength);                              /* dust_flux_density/hildebrand_1983 */
double lac_dust_mass_gas_to_dust(double disc_mass, double gas_to_dust_ratio); /* dust_mass/gas_to_dust_ratio */
double lac_disc_mass_gas_to_dust(double dust_mass, double gas_to_dust_ratio); /* disc_mass/gas_to_dust_ratio */

double lac_total_flux_density_star_rim_disc(double stellar_flux_density, double rim_flux_density,
                                            double disc_flux_density);                              /* total_flux_density/star_rim_disc */
double lac_total_flux_density_star_and_rim(double stellar_flux_density, double rim_flux_density);   /* total_flux_density/star_and_rim */
double lac_total_flux_density_star_and_disc(double stellar_flux_density, double disc_flux_density); /* total_flux_density/star_and_disc */
double lac_observed_flux_density_extincted(double total_flux_density, double extinction);           /* observed_flux_density/extincted */
double lac_observed_flux_density_unextincted(double total_flux_density);                            /* observed_flux_density/unextincted */
double lac_observed_magnitude(double observed_flux_density, double zero_point_flux);                /* observed_magnitude/definition */
double lac_stellar_flux_fraction(double stellar_flux_density, double total_flux_density);           /* stellar_flux_fraction/of_sed */
double lac_correlated_magnitude(double observed_magnitude, double rim_visibility);                  /* correlated_magnitude/definition */

#ifdef __cplusplus
}
#endif

#endif
