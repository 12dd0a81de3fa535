/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The light of star, rim and disc together: the rim's black surface, sums and shares, what extinction and magnitudes make of them,
   and the mass of dust behind an optically thin flux density. The disc's own integrals are in disc_emission.c.

   The rim is a black surface at the sublimation temperature, which ends where the disc's dust casts its shadow: at a height of
   f = rim_height_ratio times its radius R above and below the midplane. Two shapes stand for what is not known of it.

   A vertical wall, which is seen from inside alone: through the opening above, an ellipse of semi-axes R and R cos i, we see the wall's
   far side and, framed by it, the opening below, an ellipse of the same size that is 2 f R sin i lower. The wall is what of the upper
   ellipse the lower one doesn't cover: with c = f tan i (at most 1), 2 R^2 cos i (arcsin c + c sqrt(1 - c^2)). For small f tan i this is
   4 f R^2 sin i, half the wall with every part foreshortened; at c = 1 the far wall fills the opening.

   A rounded rim, whose section is a half circle of radius f R turned towards the star: for small f, each short stretch of it is half a
   cylinder. It shows the width f R (m + c), where c is the part of the direction towards us along its inward normal, and m what of that
   direction lies across the stretch, m^2 = cos^2 i + c^2. All round, c cancels and m adds up to 4 f R^2 E(sin i), with the complete
   elliptic integral of the second kind: 2 pi f R^2 face on, and edge on 4 f R^2 as the wall would have if its near side hid nothing. */
#include "lacuna/emission.h"

#include <gsl/gsl_sf_ellint.h>

#include "kernels_inline.h"
#include "lacuna/planck.h"
#include "relation.h"

LAC_INLINE int is_rim(double temperature, double radius, double height_ratio, double inclination, double distance, double wavelength) {
  return (temperature > 0) & (radius > 0) & (height_ratio >= 0) & (inclination >= 0) & (inclination <= M_PI_2) & (distance > 0) &
         (wavelength > 0);
}

LAC_RELATION(rim_flux_density_vertical_wall, sublimation_temperature, rim_radius, rim_height_ratio, inclination, distance, wavelength) {
  double offset = rim_height_ratio * tan(inclination), ratio = rim_radius / distance;
  double c = lac_choose(offset < 1, offset, 1);
  double solid_angle = 2 * ratio * ratio * cos(inclination) * (asin(c) + c * sqrt(1 - c * c));
  return lac_where(is_rim(sublimation_temperature, rim_radius, rim_height_ratio, inclination, distance, wavelength),
                   solid_angle * lac_planck_nu(wavelength, sublimation_temperature));
}

/* E(sin i); the library takes no modulus of 1. */
static double elliptic_integral(double inclination) {
  double modulus = sin(inclination);
  if (!(modulus < 1)) return 1;
  gsl_sf_result result;
  return gsl_sf_ellint_Ecomp_e(modulus, GSL_PREC_DOUBLE, &result) ? (double)NAN : result.val;
}

LAC_RELATION(rim_flux_density_rounded_rim, sublimation_temperature, rim_radius, rim_height_ratio, inclination, distance, wavelength) {
  double ratio = rim_radius / distance, solid_angle = 4 * rim_height_ratio * ratio * ratio * elliptic_integral(inclination);
  return lac_where(is_rim(sublimation_temperature, rim_radius, rim_height_ratio, inclination, distance, wavelength),
                   solid_angle * lac_planck_nu(wavelength, sublimation_temperature));
}

/* What leaves through the wall's two openings: they see each other under the view factor 1 + 2 f^2 - 2 f sqrt(1 + f^2) of two equal
   coaxial circles 2 f R apart, and the rest of what passes through them comes from the wall. */
LAC_RELATION(near_infrared_excess, sublimation_temperature, rim_radius, rim_height_ratio, stellar_luminosity) {
  double f = rim_height_ratio, area = 4 * M_PI * rim_radius * rim_radius * (f * (sqrt(1 + f * f) - f));
  double share = lac_blackbody_fraction(5e-6, sublimation_temperature) - lac_blackbody_fraction(1e-6, sublimation_temperature);
  return lac_where((sublimation_temperature > 0) & (rim_radius > 0) & (f >= 0) & (stellar_luminosity > 0),
                   area * lac_blackbody_exitance(sublimation_temperature) * share / stellar_luminosity);
}

/* Star, rim and disc. */

LAC_RELATION(total_flux_density_star_rim_disc, stellar_flux_density, rim_flux_density, disc_flux_density) {
  return lac_where((stellar_flux_density > 0) & (rim_flux_density >= 0) & (disc_flux_density >= 0),
                   stellar_flux_density + rim_flux_density + disc_flux_density);
}

LAC_RELATION(total_flux_density_star_and_rim, stellar_flux_density, rim_flux_density) {
  return lac_where((stellar_flux_density > 0) & (rim_flux_density >= 0), stellar_flux_density + rim_flux_density);
}

LAC_RELATION(total_flux_density_star_and_disc, stellar_flux_density, disc_flux_density) {
  return lac_where((stellar_flux_density > 0) & (disc_flux_density >= 0), stellar_flux_density + disc_flux_density);
}

LAC_RELATION(stellar_flux_fraction, stellar_flux_density, total_flux_density) {
  return lac_where((stellar_flux_density > 0) & (total_flux_density >= stellar_flux_density), stellar_flux_density / total_flux_density);
}

#define LN_10 2.302585092994045684

LAC_RELATION(observed_flux_density_extincted, total_flux_density, extinction) {
  return lac_where((total_flux_density > 0) & (extinction >= 0), total_flux_density * exp(-0.4 * LN_10 * extinction));
}

LAC_RELATION(observed_flux_density_unextincted, total_flux_density) { return lac_where(total_flux_density > 0, total_flux_density); }

LAC_RELATION(observed_magnitude, observed_flux_density, zero_point_flux) {
  return lac_where((observed_flux_density > 0) & (zero_point_flux > 0), -2.5 * log10(observed_flux_density / zero_point_flux));
}

LAC_RELATION(correlated_magnitude, observed_magnitude, rim_visibility) {
  double size = fabs(rim_visibility);
  return lac_where((observed_magnitude == observed_magnitude) & (size > 0) & (size <= 1), observed_magnitude - 2.5 * log10(size));
}

/* Optically thin dust of one temperature. */

LAC_RELATION(dust_mass_hildebrand_1983, dust_flux_density, distance, dust_opacity, dust_temperature, wavelength) {
  return lac_where((dust_flux_density > 0) & (distance > 0) & (dust_opacity > 0) & (dust_temperature > 0) & (wavelength > 0),
                   dust_flux_density * distance * distance / (dust_opacity * lac_planck_nu(wavelength, dust_temperature)));
}

LAC_RELATION(dust_flux_density, dust_mass, distance, dust_opacity, dust_temperature, wavelength) {
  return lac_where((dust_mass > 0) & (distance > 0) & (dust_opacity > 0) & (dust_temperature > 0) & (wavelength > 0),
                   dust_mass * dust_opacity * lac_planck_nu(wavelength, dust_temperature) / (distance * distance));
}

LAC_RELATION(dust_mass_gas_to_dust, disc_mass, gas_to_dust_ratio) {
  return lac_where((disc_mass > 0) & (gas_to_dust_ratio > 0), disc_mass / gas_to_dust_ratio);
}

LAC_RELATION(disc_mass_gas_to_dust, dust_mass, gas_to_dust_ratio) {
  return lac_where((dust_mass > 0) & (gas_to_dust_ratio > 0), dust_mass * gas_to_dust_ratio);
}

/* What the rows share. */
#define BLACK_RIM "a black rim of one temperature; the far disc rises no higher than the rim does"
#define THIN_DUST "optically thin dust of one temperature, without scattering; an opacity per gram of dust, not of gas and dust"

const lac_relation lac_emission_relations[] = {
    {.gives = "rim_flux_density",
     .by = "vertical_wall",
     .from = {"sublimation_temperature", "rim_radius", "rim_height_ratio", "inclination", "distance", "wavelength"},
     .kind = LAC_RECIPE,
     .LAC_ROW(rim_flux_density_vertical_wall),
     .source = "dullemond_2001",
     .place_in_source = "their vertical wall; the near side's shadow on our view by geometry",
     .from_memory = true,
     .equation =
         "[rim_flux_density] = 2 \\frac{[rim_radius]^{2}}{[distance]^{2}} \\cos\\left([inclination]\\right) "
         "\\left(\\arcsin\\left(c\\right) + c \\sqrt{1 - c^{2}}\\right) B_\\nu\\left([wavelength], [sublimation_temperature]\\right), "
         "c = \\min\\left(1, [rim_height_ratio] \\tan\\left([inclination]\\right)\\right)",
     .supposes = "a vertical wall, so nothing of it is seen face on; " BLACK_RIM},
    {.gives = "rim_flux_density",
     .by = "rounded_rim",
     .from = {"sublimation_temperature", "rim_radius", "rim_height_ratio", "inclination", "distance", "wavelength"},
     .kind = LAC_RECIPE,
     .LAC_ROW(rim_flux_density_rounded_rim),
     .source = "isella_natta_2005",
     .place_in_source = "their rounded rim, its section taken as a circle",
     .from_memory = true,
     .equation = "[rim_flux_density] = 4 [rim_height_ratio] \\frac{[rim_radius]^{2}}{[distance]^{2}} E\\left(\\sin [inclination]\\right) "
                 "B_\\nu\\left([wavelength], [sublimation_temperature]\\right), "
                 "E\\left(k\\right) = \\int \\sqrt{1 - k^{2} \\sin^{2}\\left(\\phi\\right)} \\mathrm{d} \\phi, "
                 "0 \\le \\phi \\le \\frac{\\pi}{2}",
     .supposes = "a rim low against its radius, with a circular section of that height, all of it lit; nothing of it hidden by the near "
                 "side; " BLACK_RIM,
     .holds = {{"rim_height_ratio", 0, 0.3}, {"inclination", 0, 70 * M_PI / 180}}},
    {.gives = "near_infrared_excess",
     .by = "vertical_wall",
     .from = {"sublimation_temperature", "rim_radius", "rim_height_ratio", "stellar_luminosity"},
     .kind = LAC_RECIPE,
     .LAC_ROW(near_infrared_excess),
     .source = "dullemond_2001",
     .place_in_source = "their vertical wall; what it keeps to itself by geometry",
     .from_memory = true,
     .equation = "[near_infrared_excess] = 4 \\pi [rim_radius]^{2} [rim_height_ratio] "
                 "\\left(\\sqrt{1 + [rim_height_ratio]^{2}} - [rim_height_ratio]\\right) "
                 "\\frac{\\sigma_{SB} [sublimation_temperature]^{4}}{[stellar_luminosity]} "
                 "\\left(F_{0-5 \\mathrm{um}}\\left([sublimation_temperature]\\right) - "
                 "F_{0-1 \\mathrm{um}}\\left([sublimation_temperature]\\right)\\right)",
     .supposes = "a black vertical wall; its light in all directions, not that towards us"},

    {.gives = "total_flux_density",
     .by = "star_rim_disc",
     .from = {"stellar_flux_density", "rim_flux_density", "disc_flux_density"},
     .kind = LAC_RECIPE,
     .LAC_ROW(total_flux_density_star_rim_disc),
     .source = "common_practice",
     .equation = "[total_flux_density] = [stellar_flux_density] + [rim_flux_density] + [disc_flux_density]",
     .supposes = "that none of the three hides another; no scattered light, no envelope"},
    {.gives = "total_flux_density",
     .by = "star_and_rim",
     .from = {"stellar_flux_density", "rim_flux_density"},
     .kind = LAC_RECIPE,
     .LAC_ROW(total_flux_density_star_and_rim),
     .source = "common_practice",
     .equation = "[total_flux_density] = [stellar_flux_density] + [rim_flux_density]",
     .supposes = "no light of the disc outside the rim; no scattered light"},
    {.gives = "total_flux_density",
     .by = "star_and_disc",
     .from = {"stellar_flux_density", "disc_flux_density"},
     .kind = LAC_RECIPE,
     .LAC_ROW(total_flux_density_star_and_disc),
     .source = "common_practice",
     .equation = "[total_flux_density] = [stellar_flux_density] + [disc_flux_density]",
     .supposes = "no light of a rim; no scattered light"},
    {.gives = "stellar_flux_fraction",
     .by = "of_sed",
     .from = {"stellar_flux_density", "total_flux_density"},
     .kind = LAC_RECIPE,
     .LAC_ROW(stellar_flux_fraction),
     .source = "definition",
     .equation = "[stellar_flux_fraction] = \\frac{[stellar_flux_density]}{[total_flux_density]}",
     .supposes = "the same extinction for star, rim and disc; the share at wavelength for that in the band",
     .aside = true},
    {.gives = "observed_flux_density",
     .by = "extincted",
     .from = {"total_flux_density", "extinction"},
     .kind = LAC_RECIPE,
     .LAC_ROW(observed_flux_density_extincted),
     .source = "definition",
     .place_in_source = "of extinction",
     .equation = "[observed_flux_density] = [total_flux_density] \\cdot 10^{-0.4 [extinction]}",
     .supposes = "the same extinction for star, rim and disc"},
    {.gives = "observed_flux_density",
     .by = "unextincted",
     .from = {"total_flux_density"},
     .kind = LAC_RECIPE,
     .LAC_ROW(observed_flux_density_unextincted),
     .source = "common_practice",
     .equation = "[observed_flux_density] = [total_flux_density]",
     .supposes = "no extinction"},
    {.gives = "observed_magnitude",
     .by = "definition",
     .from = {"observed_flux_density", "zero_point_flux"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(observed_magnitude),
     .source = "pogson_1856",
     .equation = "[observed_magnitude] = -2.5 \\log_{10}\\left(\\frac{[observed_flux_density]}{[zero_point_flux]}\\right)",
     .supposes = "the flux density at wavelength for that in the band"},
    {.gives = "correlated_magnitude",
     .by = "definition",
     .from = {"observed_magnitude", "rim_visibility"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(correlated_magnitude),
     .source = "pogson_1856",
     .equation = "[correlated_magnitude] = [observed_magnitude] - 2.5 \\log_{10}\\left(\\sqrt{[rim_visibility]^{2}}\\right)"},

    {.gives = "dust_mass",
     .by = "gas_to_dust_ratio",
     .from = {"disc_mass", "gas_to_dust_ratio"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(dust_mass_gas_to_dust),
     .source = "definition",
     .equation = "[dust_mass] = \\frac{[disc_mass]}{[gas_to_dust_ratio]}"},
    {.gives = "disc_mass",
     .by = "gas_to_dust_ratio",
     .from = {"dust_mass", "gas_to_dust_ratio"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(disc_mass_gas_to_dust),
     .source = "definition",
     .equation = "[disc_mass] = [gas_to_dust_ratio] [dust_mass]",
     .inverse_of = "dust_mass/gas_to_dust_ratio"},
    {.gives = "dust_mass",
     .by = "hildebrand_1983",
     .from = {"dust_flux_density", "distance", "dust_opacity", "dust_temperature", "wavelength"},
     .kind = LAC_RECIPE,
     .LAC_ROW(dust_mass_hildebrand_1983),
     .source = "hildebrand_1983",
     .equation =
         "[dust_mass] = \\frac{[dust_flux_density] [distance]^{2}}{[dust_opacity] B_\\nu\\left([wavelength], [dust_temperature]\\right)}",
     .supposes = THIN_DUST},
    {.gives = "dust_flux_density",
     .by = "hildebrand_1983",
     .from = {"dust_mass", "distance", "dust_opacity", "dust_temperature", "wavelength"},
     .kind = LAC_RECIPE,
     .LAC_ROW(dust_flux_density),
     .source = "hildebrand_1983",
     .equation =
         "[dust_flux_density] = \\frac{[dust_mass] [dust_opacity] B_\\nu\\left([wavelength], [dust_temperature]\\right)}{[distance]^{2}}",
     .supposes = THIN_DUST,
     .inverse_of = "dust_mass/hildebrand_1983"},
    {.gives = NULL},
};
