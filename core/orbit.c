/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Orbits: Hill radii of planets, Roche lobes, truncation of the disc by a companion.
   Three mass ratios have three names: planet over star, companion over star, companion over both. */
#include "lacuna/orbit.h"

#include "relation.h"

#define TEXT(...) #__VA_ARGS__
#define QUOTED(...) TEXT(__VA_ARGS__)

LAC_RELATION(planet_star_mass_ratio, planet_mass, stellar_mass) {
  return lac_where((planet_mass > 0) & (stellar_mass > 0), planet_mass / stellar_mass);
}

LAC_RELATION(planet_mass, planet_star_mass_ratio, stellar_mass) {
  return lac_where((planet_star_mass_ratio > 0) & (stellar_mass > 0), planet_star_mass_ratio * stellar_mass);
}

LAC_SCALED_RELATION(hill_radius, planet_semi_major_axis, planet_star_mass_ratio) {
  return lac_where(planet_star_mass_ratio > 0, cbrt(planet_star_mass_ratio / 3));
}

LAC_RELATION(mutual_hill_radius, planet_mass, second_planet_mass, stellar_mass, planet_semi_major_axis, second_planet_semi_major_axis) {
  double ratio = (planet_mass + second_planet_mass) / stellar_mass;
  double mean_axis = (planet_semi_major_axis + second_planet_semi_major_axis) / 2;
  return lac_where((planet_mass > 0) & (second_planet_mass > 0) & (stellar_mass > 0) & (planet_semi_major_axis > 0) &
                       (second_planet_semi_major_axis > 0),
                   cbrt(ratio / 3) * mean_axis);
}

LAC_RELATION(companion_mass_ratio, companion_mass, stellar_mass) {
  return lac_where((companion_mass > 0) & (stellar_mass > 0), companion_mass / stellar_mass);
}

LAC_RELATION(companion_mass_fraction, companion_mass, stellar_mass) {
  return lac_where((companion_mass > 0) & (stellar_mass > 0), companion_mass / (companion_mass + stellar_mass));
}

LAC_RELATION(companion_mass, companion_mass_ratio, stellar_mass) {
  return lac_where((companion_mass_ratio > 0) & (stellar_mass > 0), companion_mass_ratio * stellar_mass);
}

/* Eggleton's q is the star's mass over the companion's, the inverse of ours: divided through by q^(2/3). */
LAC_SCALED_RELATION(roche_lobe_radius, companion_separation, companion_mass_ratio) {
  double root = cbrt(companion_mass_ratio);
  return lac_where(companion_mass_ratio > 0, 0.49 / (0.6 + root * root * log1p(1 / root)));
}

/* Manara et al. (2019), Table C.1, circumprimary: b and c at companion mass fractions 0.1, 0.2 ... 0.5, for three Reynolds
   numbers. */
enum { FRACTIONS = 5 };
#define LEAST_FRACTION 0.1
#define GREATEST_FRACTION 0.5
#define B_RE1E4 -0.66, -0.72, -0.76, -0.77, -0.78
#define C_RE1E4 0.84, 0.88, 0.92, 0.95, 0.94
#define B_RE1E5 -0.75, -0.78, -0.80, -0.81, -0.81
#define C_RE1E5 0.68, 0.72, 0.75, 0.78, 0.78
#define B_RE1E6 -0.78, -0.80, -0.81, -0.82, -0.82
#define C_RE1E6 0.56, 0.60, 0.63, 0.66, 0.66

static const double b_re1e4[FRACTIONS] = {B_RE1E4}, c_re1e4[FRACTIONS] = {C_RE1E4};
static const double b_re1e5[FRACTIONS] = {B_RE1E5}, c_re1e5[FRACTIONS] = {C_RE1E5};
static const double b_re1e6[FRACTIONS] = {B_RE1E6}, c_re1e6[FRACTIONS] = {C_RE1E6};

/* Truncation radius over Roche lobe. A circular orbit needs no table and has no bounds; an eccentric one is not extrapolated. */
LAC_INLINE double truncation(const double *b, const double *c, double fraction, double eccentricity) {
  double in_table = fraction > LEAST_FRACTION ? fraction : LEAST_FRACTION; /* also for NaN, which the condition refuses */
  in_table = in_table < GREATEST_FRACTION ? in_table : GREATEST_FRACTION;
  double step = (in_table - LEAST_FRACTION) * ((FRACTIONS - 1) / (GREATEST_FRACTION - LEAST_FRACTION));
  int i = step < FRACTIONS - 2 ? (int)step : FRACTIONS - 2;
  double b_here = b[i] + (step - i) * (b[i + 1] - b[i]), c_here = c[i] + (step - i) * (c[i + 1] - c[i]);
  int covered = (eccentricity == 0) | ((fraction >= LEAST_FRACTION) & (fraction <= GREATEST_FRACTION));
  return lac_where((fraction > 0) & (fraction < 1) & (eccentricity >= 0) & (eccentricity < 1) & covered,
                   b_here * pow(eccentricity, c_here) + 0.88 * pow(fraction, 0.01));
}

LAC_SCALED_RELATION(truncation_radius_manara_2019_re1e5, roche_lobe_radius, companion_mass_fraction, companion_eccentricity) {
  return truncation(b_re1e5, c_re1e5, companion_mass_fraction, companion_eccentricity);
}

LAC_SCALED_RELATION(truncation_radius_manara_2019_re1e4, roche_lobe_radius, companion_mass_fraction, companion_eccentricity) {
  return truncation(b_re1e4, c_re1e4, companion_mass_fraction, companion_eccentricity);
}

LAC_SCALED_RELATION(truncation_radius_manara_2019_re1e6, roche_lobe_radius, companion_mass_fraction, companion_eccentricity) {
  return truncation(b_re1e6, c_re1e6, companion_mass_fraction, companion_eccentricity);
}

/* clang-format off */
#define MANARA_ROW(reynolds, reynolds_number, b, c)                                                                                \
  {.gives = "truncation_radius", .by = "manara_2019_" #reynolds,                                                                   \
   .from = {"roche_lobe_radius", "companion_mass_fraction", "companion_eccentricity"}, .kind = LAC_RECIPE,                         \
   .LAC_SCALED_ROW(truncation_radius_manara_2019_##reynolds), .source = "manara_2019",                                             \
   .place_in_source = "Eqs. C.1-C.3, Table C.1",                                                                                   \
   .equation = "[truncation_radius] = [roche_lobe_radius] "                                                                        \
               "\\left(\\beta [companion_eccentricity]^{\\gamma} + 0.88 [companion_mass_fraction]^{0.01}\\right)",                   \
   .supposes = "a Reynolds number of " reynolds_number " in the disc, a companion in the disc's plane; for mass fractions "        \
               "0.1, 0.2, 0.3, 0.4, 0.5 (linear between) beta = " QUOTED(b) " and gamma = " QUOTED(c)                              \
               " (b and c of the table, circumprimary); a circular orbit needs neither"}
/* clang-format on */

const lac_relation lac_orbit_relations[] = {
    {.gives = "planet_star_mass_ratio",
     .by = "definition",
     .from = {"planet_mass", "stellar_mass"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(planet_star_mass_ratio),
     .source = "definition",
     .equation = "[planet_star_mass_ratio] = \\frac{[planet_mass]}{[stellar_mass]}"},
    {.gives = "planet_mass",
     .by = "definition",
     .from = {"planet_star_mass_ratio", "stellar_mass"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(planet_mass),
     .source = "definition",
     .equation = "[planet_mass] = [planet_star_mass_ratio] [stellar_mass]",
     .inverse_of = "planet_star_mass_ratio/definition"},
    {.gives = "hill_radius",
     .by = "hill",
     .from = {"planet_semi_major_axis", "planet_star_mass_ratio"},
     .kind = LAC_RECIPE,
     .LAC_SCALED_ROW(hill_radius),
     .source = "hill_1878",
     .equation = "[hill_radius] = [planet_semi_major_axis] \\left(\\frac{[planet_star_mass_ratio]}{3}\\right)^{1/3}",
     .supposes = "a circular orbit, a planet much lighter than the star"},
    {.gives = "mutual_hill_radius",
     .by = "gladman_1993",
     .from = {"planet_mass", "second_planet_mass", "stellar_mass", "planet_semi_major_axis", "second_planet_semi_major_axis"},
     .kind = LAC_RECIPE,
     .LAC_ROW(mutual_hill_radius),
     .source = "gladman_1993",
     .from_memory = true,
     .equation = "[mutual_hill_radius] = \\left(\\frac{[planet_mass] + [second_planet_mass]}{3 [stellar_mass]}\\right)^{1/3} "
                 "\\frac{[planet_semi_major_axis] + [second_planet_semi_major_axis]}{2}",
     .supposes = "circular orbits in one plane, planets much lighter than the star"},
    {.gives = "companion_mass_ratio",
     .by = "definition",
     .from = {"companion_mass", "stellar_mass"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(companion_mass_ratio),
     .source = "definition",
     .equation = "[companion_mass_ratio] = \\frac{[companion_mass]}{[stellar_mass]}"},
    {.gives = "companion_mass_fraction",
     .by = "definition",
     .from = {"companion_mass", "stellar_mass"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(companion_mass_fraction),
     .source = "definition",
     .equation = "[companion_mass_fraction] = \\frac{[companion_mass]}{[companion_mass] + [stellar_mass]}"},
    {.gives = "companion_mass",
     .by = "definition",
     .from = {"companion_mass_ratio", "stellar_mass"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(companion_mass),
     .source = "definition",
     .equation = "[companion_mass] = [companion_mass_ratio] [stellar_mass]",
     .inverse_of = "companion_mass_ratio/definition"},
    {.gives = "roche_lobe_radius",
     .by = "eggleton_1983",
     .from = {"companion_separation", "companion_mass_ratio"},
     .kind = LAC_RECIPE,
     .LAC_SCALED_ROW(roche_lobe_radius),
     .source = "eggleton_1983",
     .place_in_source = "Eq. 2, for the star: its mass over the companion's is the inverse of the ratio here",
     .equation = "[roche_lobe_radius] = [companion_separation] "
                 "\\frac{0.49}{0.6 + [companion_mass_ratio]^{2/3} \\ln\\left(1 + [companion_mass_ratio]^{-1/3}\\right)}",
     .supposes = "a circular orbit; a fit good to 1 %"},
    MANARA_ROW(re1e5, "1e5", B_RE1E5, C_RE1E5),
    MANARA_ROW(re1e4, "1e4", B_RE1E4, C_RE1E4),
    MANARA_ROW(re1e6, "1e6", B_RE1E6, C_RE1E6),
    {.gives = NULL},
};
