/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The disc at one radius: temperature, scale height, surface density, stability, drift of grains; and its snow line.
   The disc is thin and Keplerian, its gas isothermal in the vertical direction. The rows are templates, present at radius, at
   the planet and at the ring. Where a name has several rows, the first that can be had is taken: a given aspect ratio comes
   before the temperature, a disc of known mass before the minimum-mass nebula. */
#include "lacuna/disc.h"

#include "relation.h"

/* Temperatures. Quarter powers are square roots of square roots, which blocks evaluate without a library call. */

LAC_RELATION(midplane_temperature_dullemond_2018, flaring_angle, heating_luminosity, radius) {
  double fourth_power = flaring_angle * heating_luminosity / (8 * M_PI * LAC_STEFAN_BOLTZMANN * radius * radius);
  return lac_where((flaring_angle > 0) & (heating_luminosity > 0) & (radius > 0), sqrt(sqrt(fourth_power)));
}

LAC_RELATION(midplane_temperature_chiang_goldreich_1997, stellar_radius, effective_temperature, radius) {
  double radius_in_au = radius / LAC_AU;
  double grazing_angle = 0.005 / radius_in_au + 0.05 * pow(radius_in_au, 2.0 / 7);
  double ratio = sqrt(sqrt(grazing_angle / 4)) * sqrt(stellar_radius / radius);
  return lac_where((stellar_radius > 0) & (effective_temperature > 0) & (radius > 0), ratio * effective_temperature);
}

LAC_RELATION(blackbody_grain_temperature, heating_luminosity, radius) {
  double fourth_power = heating_luminosity / (16 * M_PI * LAC_STEFAN_BOLTZMANN * radius * radius);
  return lac_where((heating_luminosity > 0) & (radius > 0), sqrt(sqrt(fourth_power)));
}

LAC_RELATION(viscous_effective_temperature, stellar_mass, mass_accretion_rate, magnetospheric_radius, radius) {
  double without_edge =
      3 * LAC_GRAVITATION * stellar_mass * mass_accretion_rate / (8 * M_PI * LAC_STEFAN_BOLTZMANN * radius * radius * radius);
  double edge = 1 - sqrt(magnetospheric_radius / radius);
  return lac_where((stellar_mass > 0) & (mass_accretion_rate >= 0) & (magnetospheric_radius > 0) & (radius >= magnetospheric_radius),
                   sqrt(sqrt(without_edge * edge)));
}

/* Gas in hydrostatic balance on Keplerian orbits. */

LAC_RELATION(sound_speed, midplane_temperature, mean_molecular_weight) {
  return lac_where((midplane_temperature > 0) & (mean_molecular_weight > 0),
                   sqrt(LAC_BOLTZMANN * midplane_temperature / (mean_molecular_weight * LAC_PROTON_MASS)));
}

LAC_RELATION(keplerian_frequency, stellar_mass, radius) {
  return lac_where((stellar_mass > 0) & (radius > 0), sqrt(LAC_GRAVITATION * stellar_mass / (radius * radius * radius)));
}

LAC_RELATION(keplerian_speed, stellar_mass, radius) {
  return lac_where((stellar_mass > 0) & (radius > 0), sqrt(LAC_GRAVITATION * stellar_mass / radius));
}

LAC_RELATION(orbital_period, keplerian_frequency) { return lac_where(keplerian_frequency > 0, 2 * M_PI / keplerian_frequency); }

LAC_RELATION(scale_height_from_aspect_ratio, aspect_ratio, radius) {
  return lac_where((aspect_ratio > 0) & (radius > 0), aspect_ratio * radius);
}

LAC_RELATION(scale_height, sound_speed, keplerian_frequency) {
  return lac_where((sound_speed > 0) & (keplerian_frequency > 0), sound_speed / keplerian_frequency);
}

LAC_RELATION(aspect_ratio, scale_height, radius) { return lac_where((scale_height > 0) & (radius > 0), scale_height / radius); }

LAC_SCALED_RELATION(surface_density_self_similar, disc_mass, characteristic_radius, surface_density_index, radius) {
  double steepness = 2 - surface_density_index; /* at zero the disc's mass diverges at the star */
  double scaled_radius = radius / characteristic_radius;
  double shape = pow(scaled_radius, -surface_density_index) * exp(-pow(scaled_radius, steepness));
  return lac_where((characteristic_radius > 0) & (steepness > 0) & (radius > 0),
                   steepness / (2 * M_PI * characteristic_radius * characteristic_radius) * shape);
}

LAC_RELATION(surface_density_hayashi_1981, radius) {
  double radius_in_au = radius / LAC_AU;
  return lac_where(radius > 0, 17000 / (radius_in_au * sqrt(radius_in_au)));
}

LAC_RELATION(gas_density, surface_density, scale_height) {
  return lac_where((surface_density > 0) & (scale_height > 0), surface_density / (sqrt(2 * M_PI) * scale_height));
}

LAC_RELATION(toomre_q, sound_speed, keplerian_frequency, surface_density) {
  return lac_where((sound_speed > 0) & (keplerian_frequency > 0) & (surface_density > 0),
                   sound_speed * keplerian_frequency / (M_PI * LAC_GRAVITATION * surface_density));
}

LAC_RELATION(critical_surface_density, sound_speed, keplerian_frequency) {
  return lac_where((sound_speed > 0) & (keplerian_frequency > 0), sound_speed * keplerian_frequency / (M_PI * LAC_GRAVITATION));
}

/* Grains and gas. */

LAC_RELATION(stokes_number, grain_size, grain_density, surface_density) {
  return lac_where((grain_size > 0) & (grain_density > 0) & (surface_density > 0), M_PI / 2 * grain_density * grain_size / surface_density);
}

/* P is proportional to Sigma c_s Omega, so the slopes of T^(1/2) = r^(-1/4) and Omega = r^(-3/2) add -7/4 to that of Sigma. */
LAC_RELATION(pressure_slope_self_similar, radius, characteristic_radius, surface_density_index) {
  double steepness = 2 - surface_density_index;
  double surface_density_slope = -surface_density_index - steepness * pow(radius / characteristic_radius, steepness);
  return lac_where((radius > 0) & (characteristic_radius > 0) & (steepness > 0), surface_density_slope - 1.75);
}

LAC_RELATION(pressure_slope_hayashi_1981, radius) { return lac_where(radius > 0, -3.25); }

LAC_RELATION(headwind_speed, aspect_ratio, pressure_slope, keplerian_speed) {
  double eta = -0.5 * aspect_ratio * aspect_ratio * pressure_slope;
  return lac_where((aspect_ratio > 0) & (keplerian_speed > 0), eta * keplerian_speed);
}

LAC_RELATION(radial_drift_speed, stokes_number, headwind_speed) {
  return lac_where(stokes_number > 0, -2 * headwind_speed / (stokes_number + 1 / stokes_number));
}

LAC_RELATION(snow_line_radius, flaring_angle, heating_luminosity, snow_temperature) {
  double temperature_squared = snow_temperature * snow_temperature;
  double square = flaring_angle * heating_luminosity / (8 * M_PI * LAC_STEFAN_BOLTZMANN * temperature_squared * temperature_squared);
  return lac_where((flaring_angle > 0) & (heating_luminosity > 0) & (snow_temperature > 0), sqrt(square));
}

/* What several rows take for granted; and where the minimum-mass nebula ends, 0.35 and 36 au. */
#define IRRADIATED                                                                                                                         \
  "an opaque disc heated by starlight alone, half of it sent inwards; the same flaring angle everywhere, known to a factor of some 4"
#define THIN_GAS "a thin disc of gas (pi where stars have 3.36) whose epicyclic frequency is the Keplerian one"
#define NEBULA "the minimum-mass nebula around a star of one solar mass"
#define NEBULA_INNER_EDGE (0.35 * 149597870700.0)
#define NEBULA_OUTER_EDGE (36 * 149597870700.0)

const lac_relation lac_disc_relations[] = {
    {.gives = "<at>midplane_temperature",
     .by = "dullemond_2018",
     .from = {"flaring_angle", "heating_luminosity", "<radius>"},
     .kind = LAC_RECIPE,
     .presence = LAC_AT_EACH_PLACE,
     .LAC_ROW(midplane_temperature_dullemond_2018),
     .source = "dullemond_2018",
     .place_in_source = "Eq. 5 of the preprint",
     .equation = "[<at>midplane_temperature] = "
                 "\\left(\\frac{[flaring_angle] [heating_luminosity]}{8 \\pi [<radius>]^{2} \\sigma_{SB}}\\right)^{1/4}",
     .supposes = IRRADIATED},
    {.gives = "<at>midplane_temperature",
     .by = "chiang_goldreich_1997",
     .from = {"stellar_radius", "effective_temperature", "<radius>"},
     .kind = LAC_RECIPE,
     .presence = LAC_AT_EACH_PLACE,
     .LAC_ROW(midplane_temperature_chiang_goldreich_1997),
     .source = "chiang_goldreich_1997",
     .place_in_source = "Eqs. 5 and 12",
     .from_memory = true,
     .equation = "[<at>midplane_temperature] = \\left[\\frac{1}{4} \\left(0.005 \\frac{\\mathrm{au}}{[<radius>]} + "
                 "0.05 \\left(\\frac{[<radius>]}{\\mathrm{au}}\\right)^{2/7}\\right)\\right]^{1/4} "
                 "\\left(\\frac{[stellar_radius]}{[<radius>]}\\right)^{1/2} [effective_temperature]",
     .supposes = "an interior opaque to starlight and to its own radiation, heated by starlight alone; the grazing angle of the paper's "
                 "star (0.5 Msun, 2.5 Rsun, 4000 K)"},
    {.gives = "<at>blackbody_grain_temperature",
     .by = "wyatt_2008",
     .from = {"heating_luminosity", "<radius>"},
     .kind = LAC_RECIPE,
     .presence = LAC_AT_EACH_PLACE,
     .LAC_ROW(blackbody_grain_temperature),
     .source = "wyatt_2008",
     .place_in_source = "Eq. 3",
     .equation =
         "[<at>blackbody_grain_temperature] = \\left(\\frac{[heating_luminosity]}{16 \\pi [<radius>]^{2} \\sigma_{SB}}\\right)^{1/4}",
     .supposes = "a black grain in unobscured starlight"},
    {.gives = "<at>viscous_effective_temperature",
     .by = "lynden_bell_pringle_1974",
     .from = {"stellar_mass", "mass_accretion_rate", "magnetospheric_radius", "<radius>"},
     .kind = LAC_RECIPE,
     .presence = LAC_AT_EACH_PLACE,
     .LAC_ROW(viscous_effective_temperature),
     .source = "lynden_bell_pringle_1974",
     .equation = "[<at>viscous_effective_temperature] = "
                 "\\left[\\frac{3 G [stellar_mass] [mass_accretion_rate]}{8 \\pi \\sigma_{SB} [<radius>]^{3}} "
                 "\\left(1 - \\sqrt{\\frac{[magnetospheric_radius]}{[<radius>]}}\\right)\\right]^{1/4}",
     .supposes = "steady accretion, no torque at the disc's inner edge, which is at the magnetospheric radius; heated by viscosity alone"},

    {.gives = "<at>sound_speed",
     .by = "definition",
     .from = {"<at>midplane_temperature", "mean_molecular_weight"},
     .kind = LAC_DEFINITION,
     .presence = LAC_AT_EACH_PLACE,
     .LAC_ROW(sound_speed),
     .source = "definition",
     .equation = "[<at>sound_speed] = \\sqrt{\\frac{k_B [<at>midplane_temperature]}{[mean_molecular_weight] m_p}}"},
    {.gives = "<at>keplerian_frequency",
     .by = "definition",
     .from = {"stellar_mass", "<radius>"},
     .kind = LAC_DEFINITION,
     .presence = LAC_AT_EACH_PLACE,
     .LAC_ROW(keplerian_frequency),
     .source = "definition",
     .equation = "[<at>keplerian_frequency] = \\sqrt{\\frac{G [stellar_mass]}{[<radius>]^{3}}}"},
    {.gives = "<at>keplerian_speed",
     .by = "definition",
     .from = {"stellar_mass", "<radius>"},
     .kind = LAC_DEFINITION,
     .presence = LAC_AT_EACH_PLACE,
     .LAC_ROW(keplerian_speed),
     .source = "definition",
     .equation = "[<at>keplerian_speed] = \\sqrt{\\frac{G [stellar_mass]}{[<radius>]}}"},
    {.gives = "<at>orbital_period",
     .by = "definition",
     .from = {"<at>keplerian_frequency"},
     .kind = LAC_DEFINITION,
     .presence = LAC_AT_EACH_PLACE,
     .LAC_ROW(orbital_period),
     .source = "definition",
     .equation = "[<at>orbital_period] = \\frac{2 \\pi}{[<at>keplerian_frequency]}"},

    {.gives = "<at>scale_height",
     .by = "from_aspect_ratio",
     .from = {"<at>aspect_ratio", "<radius>"},
     .kind = LAC_DEFINITION,
     .presence = LAC_AT_EACH_PLACE,
     .LAC_ROW(scale_height_from_aspect_ratio),
     .source = "definition",
     .equation = "[<at>scale_height] = [<at>aspect_ratio] [<radius>]",
     .inverse_of = "<at>aspect_ratio/definition"},
    {.gives = "<at>scale_height",
     .by = "definition",
     .from = {"<at>sound_speed", "<at>keplerian_frequency"},
     .kind = LAC_DEFINITION,
     .presence = LAC_AT_EACH_PLACE,
     .LAC_ROW(scale_height),
     .source = "definition",
     .equation = "[<at>scale_height] = \\frac{[<at>sound_speed]}{[<at>keplerian_frequency]}"},
    {.gives = "<at>aspect_ratio",
     .by = "definition",
     .from = {"<at>scale_height", "<radius>"},
     .kind = LAC_DEFINITION,
     .presence = LAC_AT_EACH_PLACE,
     .LAC_ROW(aspect_ratio),
     .source = "definition",
     .equation = "[<at>aspect_ratio] = \\frac{[<at>scale_height]}{[<radius>]}"},

    {.gives = "<at>surface_density",
     .by = "self_similar",
     .from = {"disc_mass", "characteristic_radius", "surface_density_index", "<radius>"},
     .kind = LAC_RECIPE,
     .presence = LAC_AT_EACH_PLACE,
     .LAC_SCALED_ROW(surface_density_self_similar),
     .source = "andrews_2009",
     .place_in_source = "Eq. 4, after Lynden-Bell and Pringle 1974",
     .equation =
         "[<at>surface_density] = \\frac{\\left(2 - [surface_density_index]\\right) [disc_mass]}{2 \\pi [characteristic_radius]^{2}} "
         "\\left(\\frac{[<radius>]}{[characteristic_radius]}\\right)^{-[surface_density_index]} "
         "\\exp\\left[-\\left(\\frac{[<radius>]}{[characteristic_radius]}\\right)^{2 - [surface_density_index]}\\right]",
     .supposes = "a viscosity that is a power of the radius; no gaps; an index below 2"},
    {.gives = "<at>surface_density",
     .by = "hayashi_1981",
     .from = {"<radius>"},
     .kind = LAC_RECIPE,
     .presence = LAC_AT_EACH_PLACE,
     .LAC_ROW(surface_density_hayashi_1981),
     .source = "hayashi_1981",
     .equation =
         "[<at>surface_density] = 1700 \\mathrm{g} \\cdot \\mathrm{cm}^{-2} \\cdot \\left(\\frac{[<radius>]}{\\mathrm{au}}\\right)^{-3/2}",
     .supposes = NEBULA,
     .holds = {{"<radius>", NEBULA_INNER_EDGE, NEBULA_OUTER_EDGE}}},
    {.gives = "<at>gas_density",
     .by = "definition",
     .from = {"<at>surface_density", "<at>scale_height"},
     .kind = LAC_DEFINITION,
     .presence = LAC_AT_EACH_PLACE,
     .LAC_ROW(gas_density),
     .source = "definition",
     .equation = "[<at>gas_density] = \\frac{[<at>surface_density]}{\\sqrt{2 \\pi} [<at>scale_height]}",
     .supposes = "hydrostatic balance, the same temperature at all heights"},
    {.gives = "<at>toomre_q",
     .by = "toomre_1964",
     .from = {"<at>sound_speed", "<at>keplerian_frequency", "<at>surface_density"},
     .kind = LAC_RECIPE,
     .presence = LAC_AT_EACH_PLACE,
     .LAC_ROW(toomre_q),
     .source = "toomre_1964",
     .equation = "[<at>toomre_q] = \\frac{[<at>sound_speed] [<at>keplerian_frequency]}{\\pi G [<at>surface_density]}",
     .supposes = THIN_GAS},
    {.gives = "<at>critical_surface_density",
     .by = "toomre_1964",
     .from = {"<at>sound_speed", "<at>keplerian_frequency"},
     .kind = LAC_RECIPE,
     .presence = LAC_AT_EACH_PLACE,
     .LAC_ROW(critical_surface_density),
     .source = "toomre_1964",
     .equation = "[<at>critical_surface_density] = \\frac{[<at>sound_speed] [<at>keplerian_frequency]}{\\pi G}",
     .supposes = THIN_GAS},

    {.gives = "<at>stokes_number",
     .by = "dullemond_2018",
     .from = {"grain_size", "grain_density", "<at>surface_density"},
     .kind = LAC_RECIPE,
     .presence = LAC_AT_EACH_PLACE,
     .LAC_ROW(stokes_number),
     .source = "dullemond_2018",
     .place_in_source = "Eq. 18 of the preprint",
     .equation = "[<at>stokes_number] = \\frac{\\pi}{2} \\frac{[grain_density] [grain_size]}{[<at>surface_density]}",
     .supposes = "compact spheres in the midplane, smaller than the free path of the gas (Epstein drag)"},
    {.gives = "<at>pressure_slope",
     .by = "self_similar",
     .from = {"<radius>", "characteristic_radius", "surface_density_index"},
     .kind = LAC_RECIPE,
     .presence = LAC_AT_EACH_PLACE,
     .LAC_ROW(pressure_slope_self_similar),
     .source = "andrews_2009",
     .place_in_source = "Eq. 4, its logarithmic slope",
     .equation = "[<at>pressure_slope] = -[surface_density_index] - \\left(2 - [surface_density_index]\\right) "
                 "\\left(\\frac{[<radius>]}{[characteristic_radius]}\\right)^{2 - [surface_density_index]} - \\frac{1}{4} - \\frac{3}{2}",
     .supposes = "the self-similar disc, an index below 2; the same flaring angle everywhere, so that the temperature falls as the square "
                 "root of the radius"},
    {.gives = "<at>pressure_slope",
     .by = "hayashi_1981",
     .from = {"<radius>"},
     .kind = LAC_RECIPE,
     .presence = LAC_AT_EACH_PLACE,
     .LAC_ROW(pressure_slope_hayashi_1981),
     .source = "hayashi_1981",
     .place_in_source = "slopes of its surface density and temperature",
     .equation = "[<at>pressure_slope] = -\\frac{3}{2} - \\frac{1}{4} - \\frac{3}{2} = -\\frac{13}{4}, P \\propto [<radius>]^{-13/4}",
     .supposes = NEBULA,
     .holds = {{"<radius>", NEBULA_INNER_EDGE, NEBULA_OUTER_EDGE}}},
    {.gives = "<at>headwind_speed",
     .by = "nakagawa_1986",
     .from = {"<at>aspect_ratio", "<at>pressure_slope", "<at>keplerian_speed"},
     .kind = LAC_RECIPE,
     .presence = LAC_AT_EACH_PLACE,
     .LAC_ROW(headwind_speed),
     .source = "nakagawa_1986",
     .equation = "[<at>headwind_speed] = -\\frac{1}{2} [<at>aspect_ratio]^{2} [<at>pressure_slope] [<at>keplerian_speed]",
     .supposes = "a thin disc, little dust beside the gas"},
    {.gives = "<at>radial_drift_speed",
     .by = "weidenschilling_1977",
     .from = {"<at>stokes_number", "<at>headwind_speed"},
     .kind = LAC_RECIPE,
     .presence = LAC_AT_EACH_PLACE,
     .LAC_ROW(radial_drift_speed),
     .source = "weidenschilling_1977",
     .equation = "[<at>radial_drift_speed] = -\\frac{2 [<at>stokes_number]}{1 + [<at>stokes_number]^{2}} [<at>headwind_speed]",
     .supposes = "little dust beside the gas, gas that itself does not drift"},

    {.gives = "snow_line_radius",
     .by = "dullemond_2018",
     .from = {"flaring_angle", "heating_luminosity", "snow_temperature"},
     .kind = LAC_RECIPE,
     .LAC_ROW(snow_line_radius),
     .source = "dullemond_2018",
     .place_in_source = "Eq. 5 of the preprint, solved for the radius",
     .equation = "[snow_line_radius] = \\sqrt{\\frac{[flaring_angle] [heating_luminosity]}{8 \\pi \\sigma_{SB} [snow_temperature]^{4}}}",
     .supposes = IRRADIATED},
    {.gives = "flaring_angle",
     .by = "dullemond_2018",
     .kind = LAC_ASSUMED,
     .assumes = "0.02",
     .source = "dullemond_2018",
     .place_in_source = "with Eq. 5 of the preprint",
     .equation = "[flaring_angle] = 0.02"},
    {.gives = "mean_molecular_weight",
     .by = "dullemond_2018",
     .kind = LAC_ASSUMED,
     .assumes = "2.3",
     .source = "dullemond_2018",
     .equation = "[mean_molecular_weight] = 2.3"},
    {.gives = "snow_temperature",
     .by = "hayashi_1981",
     .kind = LAC_ASSUMED,
     .assumes = "170 K",
     .source = "hayashi_1981",
     .equation = "[snow_temperature] = 170 \\mathrm{K}"},
    {.gives = NULL},
};
