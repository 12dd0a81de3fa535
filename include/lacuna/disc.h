/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The disc at one radius: temperature, scale height, surface density, stability, drift of grains; and its snow line.
   SI units; NaN outside a relation's range. Each function is documented by its row in the table of relations, whose key is
   given; <at> stands for nothing, planet_ or ring_, as the row is present at each of these places. */
#ifndef LACUNA_DISC_H
#define LACUNA_DISC_H

#ifdef __cplusplus
extern "C" {
#endif

/* <at>midplane_temperature/dullemond_2018 */
double lac_midplane_temperature_dullemond_2018(double flaring_angle, double heating_luminosity, double radius);
/* <at>midplane_temperature/chiang_goldreich_1997 */
double lac_midplane_temperature_chiang_goldreich_1997(double stellar_radius, double effective_temperature, double radius);
/* <at>blackbody_grain_temperature/wyatt_2008 */
double lac_blackbody_grain_temperature(double heating_luminosity, double radius);
/* <at>viscous_effective_temperature/lynden_bell_pringle_1974 */
double lac_viscous_effective_temperature(double stellar_mass, double mass_accretion_rate, double magnetospheric_radius, double radius);

double lac_sound_speed(double midplane_temperature, double mean_molecular_weight); /* <at>sound_speed/definition */
double lac_keplerian_frequency(double stellar_mass, double radius);                /* <at>keplerian_frequency/definition */
double lac_keplerian_speed(double stellar_mass, double radius);                    /* <at>keplerian_speed/definition */
double lac_orbital_period(double keplerian_frequency);                             /* <at>orbital_period/definition */
double lac_scale_height_from_aspect_ratio(double aspect_ratio, double radius);     /* <at>scale_height/from_aspect_ratio */
double lac_scale_height(double sound_speed, double keplerian_frequency);           /* <at>scale_height/definition */
double lac_aspect_ratio(double scale_height, double radius);                       /* <at>aspect_ratio/definition */

/* <at>surface_density/self_similar */
double lac_surface_density_self_similar(double disc_mass, double characteristic_radius, double surface_density_index, double radius);
double lac_surface_density_hayashi_1981(double radius);              /* <at>surface_density/hayashi_1981 */
double lac_gas_density(double surface_density, double scale_height); /* <at>gas_density/definition */
/* <at>toomre_q/toomre_1964 */
double lac_toomre_q(double sound_speed, double keplerian_frequency, double surface_density);
/* <at>critical_surface_density/toomre_1964 */
double lac_critical_surface_density(double sound_speed, double keplerian_frequency);

/* <at>stokes_number/dullemond_2018 */
double lac_stokes_number(double grain_size, double grain_density, double surface_density);
/* <at>pressure_slope/self_similar */
double lac_pressure_slope_self_similar(double radius, double characteristic_radius, double surface_density_index);
double lac_pressure_slope_hayashi_1981(double radius);                                         /* <at>pressure_slope/hayashi_1981 */
double lac_headwind_speed(double aspect_ratio, double pressure_slope, double keplerian_speed); /* <at>headwind_speed/nakagawa_1986 */
double lac_radial_drift_speed(double stokes_number, double headwind_speed); /* <at>radial_drift_speed/weidenschilling_1977 */

/* snow_line_radius/dullemond_2018 */
double lac_snow_line_radius(double flaring_angle, double heating_luminosity, double snow_temperature);

#ifdef __cplusplus
}
#endif

#endif
