/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Gaps that planets open in the gas: whether, how wide, how deep; the planet mass they imply; the mass that stops pebbles.
   SI units; NaN outside a relation's range. Each function is documented by its row in the table of relations, whose key is given. */
#ifndef LACUNA_GAP_H
#define LACUNA_GAP_H

#ifdef __cplusplus
extern "C" {
#endif

double lac_thermal_gap_mass(double planet_aspect_ratio, double stellar_mass); /* thermal_gap_mass/lin_papaloizou_1993 */
/* viscous_gap_mass/lin_papaloizou_1993 */
double lac_viscous_gap_mass(double planet_aspect_ratio, double viscosity_alpha, double stellar_mass);
/* crida_parameter/crida_2006 */
double lac_crida_parameter(double planet_aspect_ratio, double planet_star_mass_ratio, double viscosity_alpha);

/* gap_width/kanagawa_2016 */
double lac_gap_width(double planet_semi_major_axis, double planet_star_mass_ratio, double planet_aspect_ratio, double viscosity_alpha);
/* gap_depth/kanagawa_2015, gap_depth/yun_2019, gap_depth/fung_2014, gap_depth/duffell_2013 */
double lac_gap_depth_kanagawa_2015(double planet_star_mass_ratio, double planet_aspect_ratio, double viscosity_alpha);
double lac_gap_depth_yun_2019(double planet_star_mass_ratio, double planet_aspect_ratio, double viscosity_alpha);
double lac_gap_depth_fung_2014(double planet_star_mass_ratio, double planet_aspect_ratio, double viscosity_alpha);
double lac_gap_depth_duffell_2013(double planet_star_mass_ratio, double planet_aspect_ratio, double viscosity_alpha);
double lac_gap_inner_radius(double planet_semi_major_axis, double gap_width); /* gap_inner_radius/definition */
double lac_gap_outer_radius(double planet_semi_major_axis, double gap_width); /* gap_outer_radius/definition */
/* ring_planet_separation/hill_multiple */
double lac_ring_planet_separation(double hill_radius, double hill_separation_factor);

/* inferred_planet_mass/kanagawa_2016 */
double lac_inferred_planet_mass_kanagawa_2016(double observed_gap_width, double planet_semi_major_axis, double planet_aspect_ratio,
                                              double viscosity_alpha, double stellar_mass);
/* inferred_planet_mass/kanagawa_2015 */
double lac_inferred_planet_mass_kanagawa_2015(double observed_gap_depth, double planet_aspect_ratio, double viscosity_alpha,
                                              double stellar_mass);
/* pebble_isolation_mass/bitsch_2018 */
double lac_pebble_isolation_mass_bitsch_2018(double planet_aspect_ratio, double viscosity_alpha, double planet_pressure_slope,
                                             double stellar_mass);
double lac_pebble_isolation_mass_lambrechts_2014(double planet_aspect_ratio); /* pebble_isolation_mass/lambrechts_2014 */

#ifdef __cplusplus
}
#endif

#endif
