/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The rim: sublimation temperature and radius in closed forms. SI units; NaN outside a relation's range.
   Each function is documented by its row in the table of relations, whose key is given. */
#ifndef LACUNA_RIM_H
#define LACUNA_RIM_H

#ifdef __cplusplus
extern "C" {
#endif

double lac_sublimation_temperature_isella_natta_2005(double rim_gas_density);    /* sublimation_temperature/isella_natta_2005 */
double lac_sublimation_temperature_pollack_1994_olivine(double rim_gas_density); /* sublimation_temperature/pollack_1994_olivine */
double
lac_sublimation_temperature_pollack_1994_orthopyroxene(double rim_gas_density); /* sublimation_temperature/pollack_1994_orthopyroxene */
double lac_sublimation_temperature_pollack_1994_iron(double rim_gas_density);   /* sublimation_temperature/pollack_1994_iron */

double lac_absorption_efficiency_ratio(double cooling_efficiency); /* absorption_efficiency_ratio/definition */
double lac_cooling_efficiency(double absorption_efficiency_ratio); /* cooling_efficiency/definition */

double lac_sublimation_radius_kama_2009(double heating_luminosity, double sublimation_temperature, double cooling_efficiency,
                                        double backwarming_factor); /* sublimation_radius/kama_2009 */
double lac_sublimation_radius_isella_natta_2005(double heating_luminosity, double sublimation_temperature, double cooling_efficiency,
                                                double backwarming_term); /* sublimation_radius/isella_natta_2005 */
double lac_sublimation_radius_dullemond_2001(double heating_luminosity, double sublimation_temperature,
                                             double rim_height_ratio); /* sublimation_radius/dullemond_2001 */
double lac_sublimation_radius_monnier_2002(double heating_luminosity, double sublimation_temperature,
                                           double absorption_efficiency_ratio);                       /* sublimation_radius/monnier_2002 */
double lac_sublimation_radius_grey_grains(double heating_luminosity, double sublimation_temperature); /* sublimation_radius/grey_grains */
double lac_rim_radius(double sublimation_radius);                                                     /* rim_radius/at_sublimation_radius */

#ifdef __cplusplus
}
#endif

#endif
