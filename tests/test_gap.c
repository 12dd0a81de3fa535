/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Gaps: inverses, exponents, limits, and what the recipes must have in common. Single relations have their checks in
   tests/reference/checks_gap.csv. */
#include "check.h"
#include "lacuna/constants.h"
#include "lacuna/gap.h"
#include "lacuna/orbit.h"

enum { TRIALS = 1000 };

/* Ten roundings, each half an epsilon, with room for a library call or two. */
#define FEW_ROUNDINGS (10 * DBL_EPSILON)

/* A planet, its place and its star, drawn at random. */
typedef struct {
  double a, q, h, alpha, stellar_mass;
} planet;

static planet any_planet(uint64_t *state) {
  return (planet){.a = check_log_uniform(state, 0.1, 200) * LAC_AU,
                  .q = check_log_uniform(state, 1e-6, 1e-2),
                  .h = check_log_uniform(state, 0.02, 0.15),
                  .alpha = check_log_uniform(state, 1e-5, 0.05),
                  .stellar_mass = check_log_uniform(state, 0.1, 5) * LAC_SOLAR_MASS};
}

static void mass_from_width_returns(void **state) {
  (void)state;
  uint64_t seed = 1;
  for (int i = 0; i < TRIALS; i++) {
    planet p = any_planet(&seed);
    double width = lac_gap_width(p.a, p.q, p.h, p.alpha);
    check_within(p.q * p.stellar_mass, lac_inferred_planet_mass_kanagawa_2016(width, p.a, p.h, p.alpha, p.stellar_mass), FEW_ROUNDINGS,
                 "mass from the width");
  }
}

/* A depth near one keeps little of the mass: the error grows by 1/(1 - depth). */
static void mass_from_depth_returns(void **state) {
  (void)state;
  uint64_t seed = 2;
  for (int i = 0; i < TRIALS; i++) {
    planet p = any_planet(&seed);
    double depth = lac_gap_depth_kanagawa_2015(p.q, p.h, p.alpha);
    if (depth == 1) continue;
    check_within(p.q * p.stellar_mass, lac_inferred_planet_mass_kanagawa_2015(depth, p.h, p.alpha, p.stellar_mass),
                 FEW_ROUNDINGS / (1 - depth), "mass from the depth");
  }
}

/* Kanagawa et al. 2016, abstract: the exponents 1/2, -3/4 and -1/4; the width is so many times the semi-major axis. */
static void width_scales_as_published(void **state) {
  (void)state;
  uint64_t seed = 3;
  for (int i = 0; i < TRIALS; i++) {
    planet p = any_planet(&seed);
    double width = lac_gap_width(p.a, p.q, p.h, p.alpha);
    check_within(3 * width, lac_gap_width(3 * p.a, p.q, p.h, p.alpha), FEW_ROUNDINGS, "semi-major axis");
    check_within(2 * width, lac_gap_width(p.a, 4 * p.q, p.h, p.alpha), FEW_ROUNDINGS, "mass");
    check_within(width / 8, lac_gap_width(p.a, p.q, 16 * p.h, p.alpha), FEW_ROUNDINGS, "aspect ratio");
    check_within(width / 2, lac_gap_width(p.a, p.q, p.h, 16 * p.alpha), FEW_ROUNDINGS, "viscosity");
  }
}

static void edges_are_a_width_apart(void **state) {
  (void)state;
  uint64_t seed = 4;
  for (int i = 0; i < TRIALS; i++) {
    planet p = any_planet(&seed);
    double width = check_uniform(&seed, 0.01, 1.9) * p.a;
    double inner = lac_gap_inner_radius(p.a, width), outer = lac_gap_outer_radius(p.a, width);
    check_near(width, outer - inner, FEW_ROUNDINGS * p.a, "outer less inner edge");
    check_within(p.a, (inner + outer) / 2, FEW_ROUNDINGS, "middle of the gap");
    check_undefined(lac_gap_inner_radius(p.a, 2 * p.a), "gap that reaches the star");
  }
}

/* The laws of the form 1/(1 + c K) differ in c alone; K = q^2 h^-5 alpha^-1 (Kanagawa et al. 2015, abstract). */
static void depth_laws_share_their_measure(void **state) {
  (void)state;
  uint64_t seed = 5;
  double (*const laws[])(double, double, double) = {lac_gap_depth_kanagawa_2015, lac_gap_depth_yun_2019, lac_gap_depth_duffell_2013};
  const double coefficients[] = {0.04, 0.046, 0.45 / (3 * 3.14159265358979323846)};
  for (int i = 0; i < TRIALS; i++) {
    planet p = any_planet(&seed);
    for (int law = 0; law < 3; law++) {
      double half = sqrt(pow(p.h, 5) * p.alpha / coefficients[law]), depth = laws[law](p.q, p.h, p.alpha);
      check_within(0.5, laws[law](half, p.h, p.alpha), FEW_ROUNDINGS, "half empty where c K = 1");
      check_within(depth, laws[law](32 * p.q, 4 * p.h, p.alpha), FEW_ROUNDINGS, "same K: heavier and thicker");
      check_within(depth, laws[law](2 * p.q, p.h, 4 * p.alpha), FEW_ROUNDINGS, "same K: heavier and more viscous");
      check_within(1, laws[law](1e-12 * half, p.h, p.alpha), FEW_ROUNDINGS, "no planet, no gap");
      assert_true(laws[law](half, p.h, p.alpha) > laws[law](2 * half, p.h, p.alpha));
    }
  }
}

/* Fung, Shi & Chiang 2014, abstract: depth as q^-2.2 alpha^1.4 h^6.6 for light planets, q^-1 alpha^1.3 h^6.1 for heavy ones, two digits. */
static void fung_has_the_published_exponents(void **state) {
  (void)state;
  uint64_t seed = 6;
  for (int i = 0; i < TRIALS; i++) {
    int heavy = i % 2;
    double q = heavy ? check_log_uniform(&seed, 5.1e-3, 9e-3) : check_log_uniform(&seed, 1e-3, 4.5e-3);
    double h = check_uniform(&seed, 0.03, 0.05), alpha = check_log_uniform(&seed, 1e-4, 1e-2), step = 1.1;
    double depth = lac_gap_depth_fung_2014(q, h, alpha);
    check_near(heavy ? -1.0 : -2.2, log(lac_gap_depth_fung_2014(q * step, h, alpha) / depth) / log(step), 0.05, "exponent of the mass");
    check_near(heavy ? 1.3 : 1.4, log(lac_gap_depth_fung_2014(q, h, alpha * step) / depth) / log(step), 0.05, "exponent of the viscosity");
    check_near(heavy ? 6.1 : 6.6, log(lac_gap_depth_fung_2014(q, h * step, alpha) / depth) / log(step), 0.05,
               "exponent of the aspect ratio");
  }
}

/* Lin & Papaloizou 1993: at the thermal mass the Hill radius is the scale height. */
static void thermal_mass_fills_the_scale_height(void **state) {
  (void)state;
  uint64_t seed = 7;
  for (int i = 0; i < TRIALS; i++) {
    planet p = any_planet(&seed);
    double q = lac_planet_star_mass_ratio(lac_thermal_gap_mass(p.h, p.stellar_mass), p.stellar_mass);
    check_within(p.h * p.a, lac_hill_radius(p.a, q), FEW_ROUNDINGS, "Hill radius");
    check_within(4 * lac_viscous_gap_mass(p.h, p.alpha, p.stellar_mass), lac_viscous_gap_mass(2 * p.h, p.alpha, p.stellar_mass),
                 FEW_ROUNDINGS, "viscous mass goes with the square of the aspect ratio");
  }
}

/* Without viscosity P is three quarters at the thermal mass, without pressure it is 50 over 40 at the viscous mass. */
static void crida_joins_both_criteria(void **state) {
  (void)state;
  uint64_t seed = 8;
  for (int i = 0; i < TRIALS; i++) {
    planet p = any_planet(&seed);
    check_within(0.75, lac_crida_parameter(p.h, 3 * p.h * p.h * p.h, 1e-20 * p.h), FEW_ROUNDINGS, "thermal criterion");
    double viscous = lac_viscous_gap_mass(p.h, p.alpha, 1), pressure = 0.75 * p.h / cbrt(viscous / 3);
    check_within(1.25, lac_crida_parameter(p.h, viscous, p.alpha) - pressure, FEW_ROUNDINGS * (1 + pressure), "viscous criterion");
  }
}

static void separation_counts_hill_radii(void **state) {
  (void)state;
  uint64_t seed = 9;
  for (int i = 0; i < TRIALS; i++) {
    planet p = any_planet(&seed);
    double factor = check_uniform(&seed, 4, 8);
    double separation = lac_ring_planet_separation(lac_hill_radius(p.a, p.q), factor);
    check_within(p.q, 3 * pow(separation / (factor * p.a), 3), FEW_ROUNDINGS, "mass ratio from the separation");
  }
}

/* Bitsch et al. 2018, abstract: the cube of the aspect ratio. The turbulence factor, recalled from memory, is one at
   alpha = 1e-3 and 0.34 (3/4)^4 + 0.66 at a tenth of that; the slope's factor is linear. */
static void isolation_mass_scales(void **state) {
  (void)state;
  uint64_t seed = 10;
  for (int i = 0; i < TRIALS; i++) {
    planet p = any_planet(&seed);
    double slope = check_uniform(&seed, -4, 1), mass = lac_pebble_isolation_mass_bitsch_2018(p.h, p.alpha, slope, p.stellar_mass);
    check_within(8 * mass, lac_pebble_isolation_mass_bitsch_2018(2 * p.h, p.alpha, slope, p.stellar_mass), FEW_ROUNDINGS, "aspect ratio");
    check_within(3 * mass, lac_pebble_isolation_mass_bitsch_2018(p.h, p.alpha, slope, 3 * p.stellar_mass), FEW_ROUNDINGS, "stellar mass");
    check_within(1.25,
                 lac_pebble_isolation_mass_bitsch_2018(p.h, 1e-3, slope, LAC_SOLAR_MASS) / (1 - (slope + 2.5) / 6) /
                     lac_pebble_isolation_mass_lambrechts_2014(p.h),
                 FEW_ROUNDINGS, "25 over 20 Earth masses");
    check_within(0.767578125,
                 lac_pebble_isolation_mass_bitsch_2018(p.h, 1e-4, -2.5, LAC_SOLAR_MASS) /
                     lac_pebble_isolation_mass_bitsch_2018(p.h, 1e-3, -2.5, LAC_SOLAR_MASS),
                 FEW_ROUNDINGS, "a tenth of the turbulence");
  }
}

int main(void) {
  cmocka_set_message_output(CM_OUTPUT_TAP);
  const struct CMUnitTest tests[] = {
      cmocka_unit_test(mass_from_width_returns),
      cmocka_unit_test(mass_from_depth_returns),
      cmocka_unit_test(width_scales_as_published),
      cmocka_unit_test(edges_are_a_width_apart),
      cmocka_unit_test(depth_laws_share_their_measure),
      cmocka_unit_test(fung_has_the_published_exponents),
      cmocka_unit_test(thermal_mass_fills_the_scale_height),
      cmocka_unit_test(crida_joins_both_criteria),
      cmocka_unit_test(separation_counts_hill_radii),
      cmocka_unit_test(isolation_mass_scales),
  };
  return cmocka_run_group_tests_name("gap", tests, NULL, NULL);
}
