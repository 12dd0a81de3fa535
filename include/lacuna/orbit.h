/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Orbits: Hill radii of planets, Roche lobes, truncation of the disc by a companion. SI units; NaN outside a relation's range.
   Each function is documented by its row in the table of relations, whose key is given. */
#ifndef LACUNA_ORBIT_H
#define LACUNA_ORBIT_H

#ifdef __cplusplus
extern "C" {
#endif

double lac_planet_star_mass_ratio(double planet_mass, double stellar_mass);           /* planet_star_mass_ratio/definition */
double lac_planet_mass(double planet_star_mass_ratio, double stellar_mass);           /* planet_mass/definition */
double lac_hill_radius(double planet_semi_major_axis, double planet_star_mass_ratio); /* hill_radius/hill */
double lac_mutual_hill_radius(double planet_mass, double second_planet_mass, double stellar_mass, double planet_semi_major_axis,
                              double second_planet_semi_major_axis); /* mutual_hill_radius/gladman_1993 */

double lac_companion_mass_ratio(double companion_mass, double stellar_mass);            /* companion_mass_ratio/definition */
double lac_companion_mass_fraction(double companion_mass, double stellar_mass);         /* companion_mass_fraction/definition */
double lac_companion_mass(double companion_mass_ratio, double stellar_mass);            /* companion_mass/definition */
double lac_roche_lobe_radius(double companion_separation, double companion_mass_ratio); /* roche_lobe_radius/eggleton_1983 */
double lac_truncation_radius_manara_2019_re1e5(double roche_lobe_radius, double companion_mass_fraction,
                                               double companion_eccentricity); /* truncation_radius/manara_2019_re1e5 */
double lac_truncation_radius_manara_2019_re1e4(double roche_lobe_radius, double companion_mass_fraction,
                                               double companion_eccentricity); /* truncation_radius/manara_2019_re1e4 */
double lac_truncation_radius_manara_2019_re1e6(double roche_lobe_radius, double companion_mass_fraction,
                                               double companion_eccentricity); /* truncation_radius/manara_2019_re1e6 */

#ifdef __cplusplus
}
#endif

#endif
