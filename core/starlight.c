/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Starlight: distance, luminosity, radius, temperature, angular diameter, and what accretion adds.
   A luminosity comes from a flux or from a catalogue, so that it scales with the square of the distance, and angles that go with
   the root of the luminosity (the rim's) hardly depend on the distance. */
#include "lacuna/starlight.h"

#include "relation.h"

/* L = SPHERE R^2 sigma T^4, and L = SPHERE d^2 F. */
#define SPHERE (4 * M_PI)

/* The field lines lift the gas off the disc at this many stellar radii (Gullbring et al. 1998). */
#define MAGNETOSPHERE 5

LAC_INLINE double squared(double x) { return x * x; }

LAC_RELATION(distance, parallax) { return lac_where(parallax > 0, LAC_AU / parallax); }

LAC_RELATION(parallax, distance) { return lac_where(distance > 0, LAC_AU / distance); }

LAC_RELATION(stellar_radius_angular_diameter, stellar_angular_diameter, distance) {
  return lac_where((stellar_angular_diameter > 0) & (distance > 0), stellar_angular_diameter * distance / 2);
}

LAC_RELATION(stellar_radius_luminosity_and_temperature, stellar_luminosity, effective_temperature) {
  return lac_where((stellar_luminosity > 0) & (effective_temperature > 0),
                   sqrt(stellar_luminosity / (SPHERE * LAC_STEFAN_BOLTZMANN)) / squared(effective_temperature));
}

LAC_RELATION(effective_temperature, stellar_luminosity, stellar_radius) {
  return lac_where((stellar_luminosity > 0) & (stellar_radius > 0),
                   sqrt(sqrt(stellar_luminosity / (SPHERE * LAC_STEFAN_BOLTZMANN)) / stellar_radius));
}

LAC_RELATION(stellar_luminosity_radius_and_temperature, stellar_radius, effective_temperature) {
  return lac_where((stellar_radius > 0) & (effective_temperature > 0),
                   SPHERE * LAC_STEFAN_BOLTZMANN * squared(stellar_radius * squared(effective_temperature)));
}

LAC_RELATION(bolometric_flux, stellar_luminosity, distance) {
  return lac_where((stellar_luminosity > 0) & (distance > 0), stellar_luminosity / (SPHERE * squared(distance)));
}

LAC_RELATION(stellar_luminosity_flux_and_distance, bolometric_flux, distance) {
  return lac_where((bolometric_flux > 0) & (distance > 0), bolometric_flux * (SPHERE * squared(distance)));
}

LAC_RELATION(stellar_luminosity_catalogue, catalogue_luminosity, catalogue_distance, distance) {
  return lac_where((catalogue_luminosity > 0) & (catalogue_distance > 0) & (distance > 0),
                   catalogue_luminosity * squared(distance / catalogue_distance));
}

LAC_RELATION(magnetospheric_radius, stellar_radius) { return lac_where(stellar_radius > 0, MAGNETOSPHERE * stellar_radius); }

/* Luminosity over accretion rate: what a unit of mass releases between the magnetosphere's edge and the star. */
LAC_INLINE double released(double stellar_mass, double stellar_radius, double magnetospheric_radius) {
  return LAC_GRAVITATION * stellar_mass * (magnetospheric_radius - stellar_radius) / (stellar_radius * magnetospheric_radius);
}

LAC_RELATION(accretion_luminosity, mass_accretion_rate, stellar_mass, stellar_radius, magnetospheric_radius) {
  return lac_where((mass_accretion_rate >= 0) & (stellar_mass > 0) & (stellar_radius > 0) & (magnetospheric_radius >= stellar_radius),
                   mass_accretion_rate * released(stellar_mass, stellar_radius, magnetospheric_radius));
}

LAC_RELATION(mass_accretion_rate, accretion_luminosity, stellar_mass, stellar_radius, magnetospheric_radius) {
  return lac_where((accretion_luminosity >= 0) & (stellar_mass > 0) & (stellar_radius > 0) & (magnetospheric_radius > stellar_radius),
                   accretion_luminosity / released(stellar_mass, stellar_radius, magnetospheric_radius));
}

LAC_RELATION(heating_luminosity_star_plus_accretion, stellar_luminosity, accretion_luminosity) {
  return lac_where((stellar_luminosity > 0) & (accretion_luminosity >= 0), stellar_luminosity + accretion_luminosity);
}

LAC_RELATION(heating_luminosity_star_alone, stellar_luminosity) { return lac_where(stellar_luminosity > 0, stellar_luminosity); }

LAC_RELATION(rotation_period, stellar_mass, corotation_radius) {
  return lac_where((stellar_mass > 0) & (corotation_radius > 0),
                   2 * M_PI * corotation_radius * sqrt(corotation_radius / (LAC_GRAVITATION * stellar_mass)));
}

LAC_RELATION(corotation_radius, stellar_mass, rotation_period) {
  return lac_where((stellar_mass > 0) & (rotation_period > 0),
                   cbrt(LAC_GRAVITATION * stellar_mass * squared(rotation_period / (2 * M_PI))));
}

LAC_RELATION(stellar_angular_diameter, stellar_radius, distance) {
  return lac_where((stellar_radius > 0) & (distance > 0), 2 * stellar_radius / distance);
}

const lac_relation lac_starlight_relations[] = {
    {.gives = "parallax",
     .by = "distance",
     .from = {"distance"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(parallax),
     .source = "definition",
     .equation = "[parallax] = 1 \\mathrm{arcsec} \\frac{1 \\mathrm{pc}}{[distance]}"},
    {.gives = "distance",
     .by = "parallax",
     .from = {"parallax"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(distance),
     .source = "definition",
     .equation = "[distance] = 1 \\mathrm{pc} \\frac{1 \\mathrm{arcsec}}{[parallax]}",
     .supposes = "a parallax much larger than its error; the zero point is corrected already",
     .inverse_of = "parallax/distance"},
    {.gives = "stellar_radius",
     .by = "luminosity_and_temperature",
     .from = {"stellar_luminosity", "effective_temperature"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(stellar_radius_luminosity_and_temperature),
     .source = "definition",
     .place_in_source = "of the effective temperature",
     .equation = "[stellar_radius] = \\sqrt{\\frac{[stellar_luminosity]}{4 \\pi \\sigma_{SB} [effective_temperature]^{4}}}"},
    {.gives = "stellar_radius",
     .by = "angular_diameter",
     .from = {"stellar_angular_diameter", "distance"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(stellar_radius_angular_diameter),
     .source = "definition",
     .equation = "[stellar_radius] = \\frac{[stellar_angular_diameter] [distance]}{2}",
     .inverse_of = "stellar_angular_diameter/definition"},
    {.gives = "effective_temperature",
     .by = "luminosity_and_radius",
     .from = {"stellar_luminosity", "stellar_radius"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(effective_temperature),
     .source = "definition",
     .place_in_source = "of the effective temperature",
     .equation = "[effective_temperature] = \\left(\\frac{[stellar_luminosity]}{4 \\pi \\sigma_{SB} [stellar_radius]^{2}}\\right)^{1/4}",
     .inverse_of = "stellar_radius/luminosity_and_temperature"},
    {.gives = "bolometric_flux",
     .by = "luminosity_and_distance",
     .from = {"stellar_luminosity", "distance"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(bolometric_flux),
     .source = "definition",
     .equation = "[bolometric_flux] = \\frac{[stellar_luminosity]}{4 \\pi [distance]^{2}}",
     .inverse_of = "stellar_luminosity/flux_and_distance"},
    {.gives = "stellar_luminosity",
     .by = "flux_and_distance",
     .from = {"bolometric_flux", "distance"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(stellar_luminosity_flux_and_distance),
     .source = "definition",
     .equation = "[stellar_luminosity] = 4 \\pi [distance]^{2} [bolometric_flux]"},
    {.gives = "stellar_luminosity",
     .by = "catalogue",
     .from = {"catalogue_luminosity", "catalogue_distance", "distance"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(stellar_luminosity_catalogue),
     .source = "definition",
     .equation = "[stellar_luminosity] = [catalogue_luminosity] \\left(\\frac{[distance]}{[catalogue_distance]}\\right)^{2}",
     .supposes = "the published luminosity was derived from a flux, so that it goes with the square of the distance"},
    {.gives = "stellar_luminosity",
     .by = "radius_and_temperature",
     .from = {"stellar_radius", "effective_temperature"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(stellar_luminosity_radius_and_temperature),
     .source = "definition",
     .place_in_source = "of the effective temperature",
     .equation = "[stellar_luminosity] = 4 \\pi [stellar_radius]^{2} \\sigma_{SB} [effective_temperature]^{4}",
     .inverse_of = "stellar_radius/luminosity_and_temperature"},
    {.gives = "magnetospheric_radius",
     .by = "gullbring_1998",
     .from = {"stellar_radius"},
     .kind = LAC_RECIPE,
     .LAC_ROW(magnetospheric_radius),
     .source = "gullbring_1998",
     .equation = "[magnetospheric_radius] = 5 [stellar_radius]",
     .supposes = "a magnetosphere of five stellar radii, whatever the field and the accretion rate"},
    {.gives = "accretion_luminosity",
     .by = "gullbring_1998",
     .from = {"mass_accretion_rate", "stellar_mass", "stellar_radius", "magnetospheric_radius"},
     .kind = LAC_RECIPE,
     .LAC_ROW(accretion_luminosity),
     .source = "gullbring_1998",
     .place_in_source = "Eq. 8",
     .equation = "[accretion_luminosity] = \\frac{G [stellar_mass] [mass_accretion_rate]}{[stellar_radius]} "
                 "\\left(1 - \\frac{[stellar_radius]}{[magnetospheric_radius]}\\right)",
     .supposes = "gas that falls freely from the magnetosphere's edge and radiates all it gains at the star"},
    {.gives = "mass_accretion_rate",
     .by = "gullbring_1998",
     .from = {"accretion_luminosity", "stellar_mass", "stellar_radius", "magnetospheric_radius"},
     .kind = LAC_RECIPE,
     .LAC_ROW(mass_accretion_rate),
     .source = "gullbring_1998",
     .place_in_source = "Eq. 8",
     .equation = "[mass_accretion_rate] = \\frac{[accretion_luminosity] [stellar_radius]}{G [stellar_mass]} "
                 "\\left(1 - \\frac{[stellar_radius]}{[magnetospheric_radius]}\\right)^{-1}",
     .supposes = "gas that falls freely from the magnetosphere's edge and radiates all it gains at the star",
     .inverse_of = "accretion_luminosity/gullbring_1998"},
    {.gives = "heating_luminosity",
     .by = "star_plus_accretion",
     .from = {"stellar_luminosity", "accretion_luminosity"},
     .kind = LAC_RECIPE,
     .LAC_ROW(heating_luminosity_star_plus_accretion),
     .source = "common_practice",
     .equation = "[heating_luminosity] = [stellar_luminosity] + [accretion_luminosity]",
     .supposes = "that rim and disc see the light of accretion as they see the star's"},
    {.gives = "heating_luminosity",
     .by = "star_alone",
     .from = {"stellar_luminosity"},
     .kind = LAC_RECIPE,
     .LAC_ROW(heating_luminosity_star_alone),
     .source = "common_practice",
     .equation = "[heating_luminosity] = [stellar_luminosity]",
     .supposes = "no accretion luminosity"},
    {.gives = "rotation_period",
     .by = "kepler",
     .from = {"stellar_mass", "corotation_radius"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(rotation_period),
     .source = "kepler_1619",
     .place_in_source = "third law",
     .equation = "[rotation_period] = 2 \\pi \\sqrt{\\frac{[corotation_radius]^{3}}{G [stellar_mass]}}",
     .inverse_of = "corotation_radius/kepler"},
    {.gives = "corotation_radius",
     .by = "kepler",
     .from = {"stellar_mass", "rotation_period"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(corotation_radius),
     .source = "kepler_1619",
     .place_in_source = "third law",
     .equation = "[corotation_radius] = \\left(\\frac{G [stellar_mass] [rotation_period]^{2}}{4 \\pi^{2}}\\right)^{1/3}"},
    {.gives = "stellar_angular_diameter",
     .by = "definition",
     .from = {"stellar_radius", "distance"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(stellar_angular_diameter),
     .source = "definition",
     .equation = "[stellar_angular_diameter] = \\frac{2 [stellar_radius]}{[distance]}"},
    {.gives = NULL},
};
