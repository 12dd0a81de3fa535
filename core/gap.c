/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Gaps that planets open in the gas: whether, how wide, how deep; the planet mass they imply; the mass that stops pebbles.
   With q for the planet's mass over the star's and h for the aspect ratio at the planet, the laws of depth share the measure
   K = q^2 h^-5 alpha^-1. They are fits to simulations of one planet on a circular orbit, and speak of the gas:
   what an image shows of the dust may be wider and deeper. */
#include "lacuna/gap.h"

#include "relation.h"

LAC_RELATION(thermal_gap_mass, planet_aspect_ratio, stellar_mass) {
  double h = planet_aspect_ratio;
  return lac_where((h > 0) & (stellar_mass > 0), 3 * h * h * h * stellar_mass);
}

LAC_RELATION(viscous_gap_mass, planet_aspect_ratio, viscosity_alpha, stellar_mass) {
  double h = planet_aspect_ratio;
  return lac_where((h > 0) & (viscosity_alpha > 0) & (stellar_mass > 0), 40 * viscosity_alpha * h * h * stellar_mass);
}

LAC_RELATION(crida_parameter, planet_aspect_ratio, planet_star_mass_ratio, viscosity_alpha) {
  double h = planet_aspect_ratio, q = planet_star_mass_ratio;
  double height_over_hill_radius = h * cbrt(3 / q);
  double inverse_reynolds_number = viscosity_alpha * h * h;
  return lac_where((h > 0) & (q > 0) & (viscosity_alpha > 0), 0.75 * height_over_hill_radius + 50 * inverse_reynolds_number / q);
}

/* q^(1/2) h^(-3/4) alpha^(-1/4), in square roots. */
LAC_SCALED_RELATION(gap_width, planet_semi_major_axis, planet_star_mass_ratio, planet_aspect_ratio, viscosity_alpha) {
  double h = planet_aspect_ratio;
  return lac_where((planet_star_mass_ratio > 0) & (h > 0) & (viscosity_alpha > 0),
                   0.41 * sqrt(planet_star_mass_ratio / sqrt(h * h * h * viscosity_alpha)));
}

/* The depth 1/(1 + coefficient K), for the recipes that share this form. */
LAC_INLINE double depth_from_torque_balance(double coefficient, double q, double h, double viscosity_alpha) {
  double k = q * q / (h * h * h * h * h * viscosity_alpha);
  return lac_where((q > 0) & (h > 0) & (viscosity_alpha > 0), 1 / (1 + coefficient * k));
}

LAC_RELATION(gap_depth_kanagawa_2015, planet_star_mass_ratio, planet_aspect_ratio, viscosity_alpha) {
  return depth_from_torque_balance(0.04, planet_star_mass_ratio, planet_aspect_ratio, viscosity_alpha);
}

LAC_RELATION(gap_depth_yun_2019, planet_star_mass_ratio, planet_aspect_ratio, viscosity_alpha) {
  return depth_from_torque_balance(0.046, planet_star_mass_ratio, planet_aspect_ratio, viscosity_alpha);
}

/* The exponents are chosen first, so that each power is taken once. A fit above 1 means no gap: undefined. */
LAC_RELATION(gap_depth_fung_2014, planet_star_mass_ratio, planet_aspect_ratio, viscosity_alpha) {
  double q = planet_star_mass_ratio, h = planet_aspect_ratio;
  int heavy = q > 5e-3;
  double depth = (heavy ? 4.7e-3 : 0.14) * pow(q / (heavy ? 5e-3 : 1e-3), heavy ? -1.00 : -2.16) *
                 pow(viscosity_alpha / 1e-2, heavy ? 1.26 : 1.41) * pow(h / 0.05, heavy ? 6.12 : 6.61);
  return lac_where((q > 0) & (h > 0) & (viscosity_alpha > 0) & (depth <= 1), depth);
}

LAC_RELATION(gap_depth_duffell_2013, planet_star_mass_ratio, planet_aspect_ratio, viscosity_alpha) {
  return depth_from_torque_balance(0.45 / (3 * M_PI), planet_star_mass_ratio, planet_aspect_ratio, viscosity_alpha);
}

LAC_RELATION(gap_inner_radius, planet_semi_major_axis, gap_width) {
  double inner = planet_semi_major_axis - gap_width / 2;
  return lac_where((planet_semi_major_axis > 0) & (gap_width > 0) & (inner > 0), inner);
}

LAC_RELATION(gap_outer_radius, planet_semi_major_axis, gap_width) {
  return lac_where((planet_semi_major_axis > 0) & (gap_width > 0), planet_semi_major_axis + gap_width / 2);
}

LAC_RELATION(ring_planet_separation, hill_radius, hill_separation_factor) {
  return lac_where((hill_radius > 0) & (hill_separation_factor > 0), hill_separation_factor * hill_radius);
}

/* The law of gap_width solved for the mass. */
LAC_RELATION(inferred_planet_mass_kanagawa_2016, observed_gap_width, planet_semi_major_axis, planet_aspect_ratio, viscosity_alpha,
             stellar_mass) {
  double h = planet_aspect_ratio;
  double scaled_width = observed_gap_width / (0.41 * planet_semi_major_axis);
  return lac_where((observed_gap_width > 0) & (planet_semi_major_axis > 0) & (h > 0) & (viscosity_alpha > 0) & (stellar_mass > 0),
                   scaled_width * scaled_width * sqrt(h * h * h * viscosity_alpha) * stellar_mass);
}

/* 1 + 0.04 K = 1/depth solved for the mass. */
LAC_RELATION(inferred_planet_mass_kanagawa_2015, observed_gap_depth, planet_aspect_ratio, viscosity_alpha, stellar_mass) {
  double h = planet_aspect_ratio;
  double k = (1 - observed_gap_depth) / (0.04 * observed_gap_depth);
  return lac_where((observed_gap_depth > 0) & (observed_gap_depth < 1) & (h > 0) & (viscosity_alpha > 0) & (stellar_mass > 0),
                   sqrt(k * h * h * h * h * h * viscosity_alpha) * stellar_mass);
}

/* The turbulence factor is a fourth power of a ratio of logarithms, which is 1 at alpha = 1e-3; a linear form that is sometimes
   quoted is not. Above alpha = 1 the ratio's logarithm has the wrong sign, above a pressure slope of 3.5 the mass. */
LAC_RELATION(pebble_isolation_mass_bitsch_2018, planet_aspect_ratio, viscosity_alpha, planet_pressure_slope, stellar_mass) {
  double scaled_height = planet_aspect_ratio / 0.05;
  double log_ratio = -3 / log10(viscosity_alpha);
  double turbulence = 0.34 * log_ratio * log_ratio * log_ratio * log_ratio + 0.66;
  double slope = 1 - (planet_pressure_slope + 2.5) / 6;
  double earth_masses = 25 * scaled_height * scaled_height * scaled_height * turbulence * slope;
  return lac_where((planet_aspect_ratio > 0) & (viscosity_alpha > 0) & (viscosity_alpha < 1) & (slope > 0) & (stellar_mass > 0),
                   earth_masses * LAC_EARTH_MASS * (stellar_mass / LAC_SOLAR_MASS));
}

LAC_RELATION(pebble_isolation_mass_lambrechts_2014, planet_aspect_ratio) {
  double scaled_height = planet_aspect_ratio / 0.05;
  return lac_where(planet_aspect_ratio > 0, 20 * scaled_height * scaled_height * scaled_height * LAC_EARTH_MASS);
}

/* Pieces of equations: K, and quantities over the value at which their law is normalised. */
#define GAP_K "\\frac{[planet_star_mass_ratio]^{2}}{[planet_aspect_ratio]^{5} [viscosity_alpha]}"
#define LIGHT "\\left(\\frac{[planet_star_mass_ratio]}{10^{-3}}\\right)"
#define HEAVY "\\left(\\frac{[planet_star_mass_ratio]}{5 \\times 10^{-3}}\\right)"
#define ALPHA "\\left(\\frac{[viscosity_alpha]}{10^{-2}}\\right)"
#define ASPECT "\\left(\\frac{[planet_aspect_ratio]}{0.05}\\right)"
#define DEPTH_INPUTS "planet_star_mass_ratio", "planet_aspect_ratio", "viscosity_alpha"
/* What most rows take for granted. */
#define ONE_PLANET "one planet on a circular orbit, a thin, locally isothermal disc in a steady state around it"

const lac_relation lac_gap_relations[] = {
    {.gives = "thermal_gap_mass",
     .by = "lin_papaloizou_1993",
     .from = {"planet_aspect_ratio", "stellar_mass"},
     .kind = LAC_RECIPE,
     .LAC_ROW(thermal_gap_mass),
     .source = "lin_papaloizou_1993",
     .equation = "[thermal_gap_mass] = 3 [planet_aspect_ratio]^{3} [stellar_mass]",
     .supposes = "that a gap opens where the Hill radius exceeds the scale height"},
    {.gives = "viscous_gap_mass",
     .by = "lin_papaloizou_1993",
     .from = {"planet_aspect_ratio", "viscosity_alpha", "stellar_mass"},
     .kind = LAC_RECIPE,
     .LAC_ROW(viscous_gap_mass),
     .source = "lin_papaloizou_1993",
     .equation = "[viscous_gap_mass] = 40 [viscosity_alpha] [planet_aspect_ratio]^{2} [stellar_mass]",
     .supposes = "that a gap opens where the planet's torque exceeds the viscous one"},
    {.gives = "crida_parameter",
     .by = "crida_2006",
     .from = {"planet_aspect_ratio", "planet_star_mass_ratio", "viscosity_alpha"},
     .kind = LAC_RECIPE,
     .LAC_ROW(crida_parameter),
     .source = "crida_2006",
     .place_in_source = "Eq. 15",
     .from_memory = true,
     .equation = "[crida_parameter] = \\frac{3}{4} [planet_aspect_ratio] \\left(\\frac{3}{[planet_star_mass_ratio]}\\right)^{1/3} + "
                 "\\frac{50 [viscosity_alpha] [planet_aspect_ratio]^{2}}{[planet_star_mass_ratio]}",
     .supposes = ONE_PLANET},

    {.gives = "gap_width",
     .by = "kanagawa_2016",
     .from = {"planet_semi_major_axis", "planet_star_mass_ratio", "planet_aspect_ratio", "viscosity_alpha"},
     .kind = LAC_RECIPE,
     .LAC_SCALED_ROW(gap_width),
     .source = "kanagawa_2016",
     .place_in_source = "Eq. 4",
     .equation =
         "[gap_width] = 0.41 [planet_semi_major_axis] [planet_star_mass_ratio]^{1/2} [planet_aspect_ratio]^{-3/4} [viscosity_alpha]^{-1/4}",
     .supposes = ONE_PLANET "; the gas, not the dust"},

    /* The depth laws follow K to about 1e4 and mass ratios to a few 1e-3, of which the upper bound here takes three. */
    {.gives = "gap_depth",
     .by = "kanagawa_2015",
     .from = {DEPTH_INPUTS},
     .kind = LAC_RECIPE,
     .LAC_ROW(gap_depth_kanagawa_2015),
     .source = "kanagawa_2015",
     .place_in_source = "Eq. 1",
     .equation = "[gap_depth] = \\frac{1}{1 + 0.04 " GAP_K "}",
     .supposes = ONE_PLANET "; the gas, not the dust",
     .holds = {{"planet_star_mass_ratio", 0, 3e-3}}},
    {.gives = "gap_depth",
     .by = "yun_2019",
     .from = {DEPTH_INPUTS},
     .kind = LAC_RECIPE,
     .LAC_ROW(gap_depth_yun_2019),
     .source = "yun_2019",
     .place_in_source = "abstract",
     .equation = "[gap_depth] = \\frac{1}{1 + 0.046 " GAP_K "}",
     .supposes = ONE_PLANET "; the gas, not the dust"},
    {.gives = "gap_depth",
     .by = "fung_2014",
     .from = {DEPTH_INPUTS},
     .kind = LAC_RECIPE,
     .LAC_ROW(gap_depth_fung_2014),
     .source = "fung_2014",
     .place_in_source = "Eqs. 12 and 14",
     .equation = "[gap_depth] = 0.14 " LIGHT "^{-2.16} " ALPHA "^{1.41} " ASPECT "^{6.61} "
                 "\\mathrm{for} [planet_star_mass_ratio] \\le 5 \\times 10^{-3}, "
                 "4.7 \\times 10^{-3} " HEAVY "^{-1.00} " ALPHA "^{1.26} " ASPECT "^{6.12} \\mathrm{above}",
     .supposes = ONE_PLANET "; the gas, not the dust; a gap (undefined where the fit exceeds 1); "
                            "the two branches differ by 8 % where they meet",
     .holds = {{"planet_star_mass_ratio", 1e-4, 1e-2}}},
    {.gives = "gap_depth",
     .by = "duffell_2013",
     .from = {DEPTH_INPUTS},
     .kind = LAC_RECIPE,
     .LAC_ROW(gap_depth_duffell_2013),
     .source = "duffell_macfadyen_2013",
     .from_memory = true,
     .equation = "[gap_depth] = \\frac{1}{1 + \\frac{0.45}{3 \\pi} " GAP_K "}",
     .supposes = ONE_PLANET "; the gas, not the dust",
     .holds = {{"planet_star_mass_ratio", 0, 3e-3}}},
    {.gives = "gap_inner_radius",
     .by = "definition",
     .from = {"planet_semi_major_axis", "gap_width"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(gap_inner_radius),
     .source = "definition",
     .equation = "[gap_inner_radius] = [planet_semi_major_axis] - \\frac{[gap_width]}{2}",
     .supposes = "a gap as wide inside the planet's orbit as outside it"},
    {.gives = "gap_outer_radius",
     .by = "definition",
     .from = {"planet_semi_major_axis", "gap_width"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(gap_outer_radius),
     .source = "definition",
     .equation = "[gap_outer_radius] = [planet_semi_major_axis] + \\frac{[gap_width]}{2}",
     .supposes = "a gap as wide inside the planet's orbit as outside it"},
    {.gives = "ring_planet_separation",
     .by = "hill_multiple",
     .from = {"hill_radius", "hill_separation_factor"},
     .kind = LAC_RECIPE,
     .LAC_ROW(ring_planet_separation),
     .source = "lodato_2019",
     .from_memory = true,
     .equation = "[ring_planet_separation] = [hill_separation_factor] [hill_radius]",
     .supposes = "that millimetre dust gathers a fixed number of Hill radii outside the planet"},

    {.gives = "inferred_planet_mass",
     .by = "kanagawa_2016",
     .from = {"observed_gap_width", "planet_semi_major_axis", "planet_aspect_ratio", "viscosity_alpha", "stellar_mass"},
     .kind = LAC_RECIPE,
     .LAC_ROW(inferred_planet_mass_kanagawa_2016),
     .source = "kanagawa_2016",
     .place_in_source = "Eq. 4, solved for the mass (Eq. 5 rounds it)",
     .equation = "[inferred_planet_mass] = \\left(\\frac{[observed_gap_width]}{0.41 [planet_semi_major_axis]}\\right)^{2} "
                 "[planet_aspect_ratio]^{3/2} [viscosity_alpha]^{1/2} [stellar_mass]",
     .supposes = ONE_PLANET "; a relation of the gas gap applied to what an image shows"},
    {.gives = "inferred_planet_mass",
     .by = "kanagawa_2015",
     .from = {"observed_gap_depth", "planet_aspect_ratio", "viscosity_alpha", "stellar_mass"},
     .kind = LAC_RECIPE,
     .LAC_ROW(inferred_planet_mass_kanagawa_2015),
     .source = "kanagawa_2015",
     .place_in_source = "Eq. 2",
     .equation = "[inferred_planet_mass] = \\sqrt{\\frac{1}{0.04} \\left(\\frac{1}{[observed_gap_depth]} - 1\\right) "
                 "[planet_aspect_ratio]^{5} [viscosity_alpha]} [stellar_mass]",
     .supposes = ONE_PLANET "; a relation of the gas gap applied to what an image shows"},

    {.gives = "pebble_isolation_mass",
     .by = "bitsch_2018",
     .from = {"planet_aspect_ratio", "viscosity_alpha", "planet_pressure_slope", "stellar_mass"},
     .kind = LAC_RECIPE,
     .LAC_ROW(pebble_isolation_mass_bitsch_2018),
     .source = "bitsch_2018",
     .place_in_source = "Eqs. 10 and 11",
     .from_memory = true,
     .equation = "[pebble_isolation_mass] = 25 M_{\\mathrm{Earth}} \\frac{[stellar_mass]}{M_{\\mathrm{Sun}}} " ASPECT "^{3} "
                 "\\left[0.34 \\left(\\frac{\\log_{10} 10^{-3}}{\\log_{10} [viscosity_alpha]}\\right)^{4} + 0.66\\right] "
                 "\\left(1 - \\frac{[planet_pressure_slope] + 2.5}{6}\\right)",
     .supposes =
         "pebbles that turbulence does not carry past the planet; the pressure slope of the disc without the planet; alpha below 1"},
    {.gives = "pebble_isolation_mass",
     .by = "lambrechts_2014",
     .from = {"planet_aspect_ratio"},
     .kind = LAC_RECIPE,
     .LAC_ROW(pebble_isolation_mass_lambrechts_2014),
     .source = "lambrechts_2014",
     .equation = "[pebble_isolation_mass] = 20 M_{\\mathrm{Earth}} " ASPECT "^{3}",
     .supposes = "a star of one solar mass; pebbles that turbulence does not carry past the planet"},
    {.gives = NULL},
};
