/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The disc at one radius: chains of relations against published rings and the minimum-mass nebula, integrals and extrema that
   are known exactly, inverses, scalings and limits. Single relations have their checks in tests/reference/checks_disc.csv. */
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include <gsl/gsl_deriv.h>
#include <gsl/gsl_errno.h>
#include <gsl/gsl_integration.h>
#include <gsl/gsl_min.h>

#include "check.h"
#include "lacuna/constants.h"
#include "lacuna/disc.h"

#define PI 3.14159265358979323846
enum { TRIALS = 200, INTERVALS = 200 };

/* Ten roundings, each half an epsilon, with room for a library call or two. */
#define FEW_ROUNDINGS (10 * DBL_EPSILON)
#define QUADRATURE 1e-9
#define GRAM_PER_SQUARE_CENTIMETRE 10.0

/* A disc drawn at random: a star, a place, and the gas there. */
typedef struct {
  double stellar_mass, luminosity, radius, flaring_angle, molecular_weight, disc_mass, characteristic_radius, index;
} disc;

static disc any_disc(uint64_t *state) {
  return (disc){.stellar_mass = check_log_uniform(state, 0.1, 5) * LAC_SOLAR_MASS,
                .luminosity = check_log_uniform(state, 0.01, 1000) * LAC_SOLAR_LUMINOSITY,
                .radius = check_log_uniform(state, 0.05, 300) * LAC_AU,
                .flaring_angle = check_log_uniform(state, 0.005, 0.3),
                .molecular_weight = check_uniform(state, 2.2, 2.5),
                .disc_mass = check_log_uniform(state, 1e-4, 0.1) * LAC_SOLAR_MASS,
                .characteristic_radius = check_log_uniform(state, 10, 300) * LAC_AU,
                .index = check_uniform(state, -0.5, 1.8)};
}

static double scale_height_at(const disc *d, double temperature, double radius) {
  return lac_scale_height(lac_sound_speed(temperature, d->molecular_weight), lac_keplerian_frequency(d->stellar_mass, radius));
}

/* The scale height to 0.3 %, as the paper's constants differ; the surface density for Q = 2 to its two digits. */
static void rings_match_the_paper(void **state) {
  (void)state;
  FILE *file = fopen("tests/reference/rings_dullemond_2018.csv", "r");
  if (file == NULL) fail_msg("tests/reference/rings_dullemond_2018.csv is missing: run from the repository's top directory");
  char line[256], star, height[16];
  double mass, luminosity, radius, density;
  int rings = 0, heights = 0;
  while (fgets(line, sizeof line, file)) {
    if (sscanf(line, "%c,%lf,%lf,%lf,%15[^,],%lf", &star, &mass, &luminosity, &radius, height, &density) != 6) continue;
    double temperature = lac_midplane_temperature_dullemond_2018(0.02, luminosity * LAC_SOLAR_LUMINOSITY, radius * LAC_AU);
    double sound_speed = lac_sound_speed(temperature, 2.3), frequency = lac_keplerian_frequency(mass * LAC_SOLAR_MASS, radius * LAC_AU);
    if (strcmp(height, "-") != 0) {
      check_within(strtod(height, NULL), lac_scale_height(sound_speed, frequency) / LAC_AU, 0.003, line);
      heights++;
    }
    check_within(density, lac_critical_surface_density(sound_speed, frequency) / 2 / GRAM_PER_SQUARE_CENTIMETRE, 0.05, line);
    check_within(2, lac_toomre_q(sound_speed, frequency, density * GRAM_PER_SQUARE_CENTIMETRE), 0.05, line);
    rings++;
  }
  fclose(file);
  assert_int_equal(rings, 8);
  assert_int_equal(heights, 5);
}

/* Hayashi 1981 and Nakagawa, Sekiya & Hayashi 1986, recalled from memory (0.033: as quoted in a later text), with 280 K and a molecular
   weight of 2.34: printed digits. The two Q are an independent evaluation of the same disc, with three digits. */
static void nebula_matches_the_papers(void **state) {
  (void)state;
  double sound_speed = lac_sound_speed(280, 2.34), frequency = lac_keplerian_frequency(LAC_SOLAR_MASS, LAC_AU);
  double height = lac_scale_height(sound_speed, frequency), density = lac_surface_density_hayashi_1981(LAC_AU);
  double aspect_ratio = lac_aspect_ratio(height, LAC_AU), speed = lac_keplerian_speed(LAC_SOLAR_MASS, LAC_AU);
  double headwind = lac_headwind_speed(aspect_ratio, lac_pressure_slope_hayashi_1981(LAC_AU), speed);
  check_near(0.047, sqrt(2) * height / LAC_AU, 0.0005, "z0 in au");
  check_near(0.033, aspect_ratio, 0.0005, "aspect ratio");
  check_near(1.4e-9, lac_gas_density(density, height) / 1000, 5e-11, "midplane density in g cm^-3");
  check_near(1.81e-3, headwind / speed, 5e-6, "eta");
  check_near(54, headwind, 0.5, "headwind in m/s");
  check_near(55.5, lac_toomre_q(sound_speed, frequency, density), 0.05, "Q at 1 au");
  double far = 30 * LAC_AU, far_sound_speed = lac_sound_speed(280 / sqrt(30), 2.34);
  check_near(23.7, lac_toomre_q(far_sound_speed, lac_keplerian_frequency(LAC_SOLAR_MASS, far), lac_surface_density_hayashi_1981(far)), 0.05,
             "Q at 30 au");
}

static double integral(double (*integrand)(double, void *), void *context, double from, double to) {
  gsl_integration_workspace *workspace = gsl_integration_workspace_alloc(INTERVALS);
  gsl_function function = {integrand, context};
  double result = (double)NAN, error;
  int status = isinf(to) ? gsl_integration_qagiu(&function, from, 0, QUADRATURE / 10, INTERVALS, workspace, &result, &error)
                         : gsl_integration_qags(&function, from, to, 0, QUADRATURE / 10, INTERVALS, workspace, &result, &error);
  gsl_integration_workspace_free(workspace);
  if (status) fail_msg("quadrature: %s", gsl_strerror(status));
  return result;
}

static double nebula_ring_mass(double radius, void *context) {
  (void)context;
  return 2 * PI * radius * lac_surface_density_hayashi_1981(radius);
}

/* Hayashi 1981, recalled from memory: 0.013 solar masses of gas between 0.35 and 36 au. */
static void nebula_has_its_mass(void **state) {
  (void)state;
  check_near(0.013, integral(nebula_ring_mass, NULL, 0.35 * LAC_AU, 36 * LAC_AU) / LAC_SOLAR_MASS, 0.0005, "mass of the nebula");
}

/* Mass per unit of u = (r/r_c)^(2 - index), which takes the singularity at the star away. */
static double self_similar_ring_mass(double u, void *context) {
  const disc *d = context;
  double steepness = 2 - d->index, radius = d->characteristic_radius * pow(u, 1 / steepness);
  return 2 * PI * radius * radius / (steepness * u) *
         lac_surface_density_self_similar(d->disc_mass, d->characteristic_radius, d->index, radius);
}

/* Exact for any index: 1 - 1/e within the characteristic radius, all of it within infinity. */
static void self_similar_disc_has_its_mass(void **state) {
  (void)state;
  uint64_t seed = 1;
  for (int i = 0; i < TRIALS; i++) {
    disc d = any_disc(&seed);
    check_within(0.632120558828557678, integral(self_similar_ring_mass, &d, 0, 1) / d.disc_mass, QUADRATURE, "mass within r_c");
    check_within(1, integral(self_similar_ring_mass, &d, 0, INFINITY) / d.disc_mass, QUADRATURE, "whole mass");
  }
}

typedef struct {
  double stellar_mass, accretion_rate, edge;
} accreting_disc;

static accreting_disc any_accreting_disc(uint64_t *state) {
  return (accreting_disc){.stellar_mass = check_log_uniform(state, 0.1, 5) * LAC_SOLAR_MASS,
                          .accretion_rate = check_log_uniform(state, 1e-11, 1e-5) * LAC_SOLAR_MASS / LAC_YEAR,
                          .edge = check_log_uniform(state, 1, 30) * LAC_SOLAR_RADIUS};
}

static double viscous_temperature(const accreting_disc *d, double radius) {
  return lac_viscous_effective_temperature(d->stellar_mass, d->accretion_rate, d->edge, radius);
}

static double viscous_coolness(double scaled_radius, void *context) {
  const accreting_disc *d = context;
  return -viscous_temperature(d, scaled_radius * d->edge);
}

/* Both faces of a ring, per unit of r/R. */
static double viscous_ring_luminosity(double scaled_radius, void *context) {
  const accreting_disc *d = context;
  double temperature = viscous_temperature(d, scaled_radius * d->edge);
  return 4 * PI * scaled_radius * d->edge * d->edge * LAC_STEFAN_BOLTZMANN * pow(temperature, 4);
}

/* Exact: hottest at 49/36 R, with (36/49)^(3/4) 7^(-1/4) = 0.488 of [3GM Mdot/(8 pi sigma R^3)]^(1/4). A maximum's place is
   found to the square root of epsilon only. */
static void accreting_disc_is_hottest_where_it_should(void **state) {
  (void)state;
  uint64_t seed = 2;
  for (int i = 0; i < TRIALS; i++) {
    accreting_disc d = any_accreting_disc(&seed);
    gsl_function coolness = {viscous_coolness, &d};
    gsl_min_fminimizer *minimizer = gsl_min_fminimizer_alloc(gsl_min_fminimizer_brent);
    assert_int_equal(gsl_min_fminimizer_set(minimizer, &coolness, 1.3, 1.001, 3), GSL_SUCCESS);
    for (int step = 0; step < 100; step++) gsl_min_fminimizer_iterate(minimizer);
    double place = gsl_min_fminimizer_x_minimum(minimizer);
    gsl_min_fminimizer_free(minimizer);
    double reference =
        pow(3 * LAC_GRAVITATION * d.stellar_mass * d.accretion_rate / (8 * PI * LAC_STEFAN_BOLTZMANN * pow(d.edge, 3)), 0.25);
    check_within(49.0 / 36, place, 10 * sqrt(DBL_EPSILON), "hottest place");
    check_near(0.488, viscous_temperature(&d, place * d.edge) / reference, 0.0005, "hottest temperature");
    check_near(0, viscous_temperature(&d, d.edge), 0, "temperature at the edge");
    check_undefined(viscous_temperature(&d, d.edge * (1 - DBL_EPSILON)), "temperature inside the edge");
  }
}

/* Exact: half of what the matter lost in falling to the edge. */
static void accreting_disc_has_its_luminosity(void **state) {
  (void)state;
  uint64_t seed = 3;
  for (int i = 0; i < TRIALS; i++) {
    accreting_disc d = any_accreting_disc(&seed);
    double fallen = LAC_GRAVITATION * d.stellar_mass * d.accretion_rate / d.edge;
    check_within(fallen / 2, integral(viscous_ring_luminosity, &d, 1, INFINITY), QUADRATURE, "luminosity of the accreting disc");
  }
}

static void inverses_return(void **state) {
  (void)state;
  uint64_t seed = 4;
  for (int i = 0; i < TRIALS; i++) {
    disc d = any_disc(&seed);
    double ratio = check_log_uniform(&seed, 0.01, 0.3), temperature = check_uniform(&seed, 90, 200);
    check_within(ratio, lac_aspect_ratio(lac_scale_height_from_aspect_ratio(ratio, d.radius), d.radius), FEW_ROUNDINGS, "aspect ratio");
    double snow_line = lac_snow_line_radius(d.flaring_angle, d.luminosity, temperature);
    check_within(temperature, lac_midplane_temperature_dullemond_2018(d.flaring_angle, d.luminosity, snow_line), FEW_ROUNDINGS,
                 "snow line");
  }
}

/* Half of the light that a surface at 30 degrees takes in is what a black sphere takes in: a quarter of the flux. */
static void temperatures_scale(void **state) {
  (void)state;
  uint64_t seed = 5;
  for (int i = 0; i < TRIALS; i++) {
    disc d = any_disc(&seed);
    double factor = check_log_uniform(&seed, 0.01, 100);
    double temperature = lac_midplane_temperature_dullemond_2018(d.flaring_angle, d.luminosity, d.radius);
    check_within(temperature, lac_midplane_temperature_dullemond_2018(d.flaring_angle, d.luminosity * factor * factor, d.radius * factor),
                 FEW_ROUNDINGS, "equal flux, equal temperature");
    check_within(lac_blackbody_grain_temperature(d.luminosity, d.radius),
                 lac_midplane_temperature_dullemond_2018(0.5, d.luminosity, d.radius), FEW_ROUNDINGS, "black grain");
    check_within(3 * lac_midplane_temperature_chiang_goldreich_1997(LAC_SOLAR_RADIUS, 4000, d.radius),
                 lac_midplane_temperature_chiang_goldreich_1997(9 * LAC_SOLAR_RADIUS, 4000, d.radius), FEW_ROUNDINGS, "larger star");
    check_within(sqrt(factor) * lac_sound_speed(temperature, d.molecular_weight), lac_sound_speed(temperature * factor, d.molecular_weight),
                 FEW_ROUNDINGS, "sound speed");
  }
}

/* Chiang & Goldreich 1997 Eq. 14 fits the interior with a^(-3/7), which their law has where flaring alone catches light. */
static void flared_interior_falls_with_three_sevenths(void **state) {
  (void)state;
  double near = lac_midplane_temperature_chiang_goldreich_1997(LAC_SOLAR_RADIUS, 4000, 1e4 * LAC_AU);
  double far = lac_midplane_temperature_chiang_goldreich_1997(LAC_SOLAR_RADIUS, 4000, 1e6 * LAC_AU);
  check_near(-3.0 / 7, log(far / near) / log(100), 1e-6, "slope of the interior temperature");
}

static void orbits_are_keplerian(void **state) {
  (void)state;
  uint64_t seed = 6;
  for (int i = 0; i < TRIALS; i++) {
    disc d = any_disc(&seed);
    double frequency = lac_keplerian_frequency(d.stellar_mass, d.radius), period = lac_orbital_period(frequency);
    check_within(frequency * d.radius, lac_keplerian_speed(d.stellar_mass, d.radius), FEW_ROUNDINGS, "speed is frequency times radius");
    check_within(8 * period, lac_orbital_period(lac_keplerian_frequency(d.stellar_mass, 4 * d.radius)), FEW_ROUNDINGS, "third law");
  }
}

static void stability_is_marginal_at_the_critical_density(void **state) {
  (void)state;
  uint64_t seed = 7;
  for (int i = 0; i < TRIALS; i++) {
    disc d = any_disc(&seed);
    double sound_speed = lac_sound_speed(check_log_uniform(&seed, 5, 1500), d.molecular_weight);
    double frequency = lac_keplerian_frequency(d.stellar_mass, d.radius);
    check_within(1, lac_toomre_q(sound_speed, frequency, lac_critical_surface_density(sound_speed, frequency)), FEW_ROUNDINGS, "Q");
  }
}

static double gas_column(double height, void *context) {
  const double *density_and_scale_height = context;
  double scaled = height / density_and_scale_height[1];
  return density_and_scale_height[0] * exp(-scaled * scaled / 2);
}

/* The Gaussian of that midplane density and scale height holds the surface density. */
static void gas_column_adds_up(void **state) {
  (void)state;
  double surface_density = 170, scale_height = 5 * LAC_AU;
  double gas[] = {lac_gas_density(surface_density, scale_height), scale_height};
  check_within(surface_density, 2 * integral(gas_column, gas, 0, 12 * scale_height), QUADRATURE, "surface density");
}

/* The logarithm of the midplane pressure, through the chain of relations. */
static double log_pressure(const disc *d, double surface_density, double radius) {
  double temperature = lac_midplane_temperature_dullemond_2018(d->flaring_angle, d->luminosity, radius);
  double sound_speed = lac_sound_speed(temperature, d->molecular_weight);
  return log(lac_gas_density(surface_density, scale_height_at(d, temperature, radius)) * sound_speed * sound_speed);
}

static double self_similar_log_pressure(double log_radius, void *context) {
  const disc *d = context;
  double radius = exp(log_radius);
  return log_pressure(d, lac_surface_density_self_similar(d->disc_mass, d->characteristic_radius, d->index, radius), radius);
}

static double nebula_log_pressure(double log_radius, void *context) {
  return log_pressure(context, lac_surface_density_hayashi_1981(exp(log_radius)), exp(log_radius));
}

static double slope(double (*f)(double, void *), void *context, double radius) {
  gsl_function function = {f, context};
  double result, error;
  assert_int_equal(gsl_deriv_central(&function, log(radius), 1e-3, &result, &error), GSL_SUCCESS);
  return result;
}

/* A numerical derivative keeps some nine digits. */
static void pressure_slope_is_that_of_the_pressure(void **state) {
  (void)state;
  uint64_t seed = 8;
  for (int i = 0; i < TRIALS; i++) {
    disc d = any_disc(&seed);
    d.radius = d.characteristic_radius * check_log_uniform(&seed, 1e-3, 5);
    check_within(slope(self_similar_log_pressure, &d, d.radius),
                 lac_pressure_slope_self_similar(d.radius, d.characteristic_radius, d.index), 1e-8, "slope of the self-similar disc");
    check_within(slope(nebula_log_pressure, &d, d.radius), lac_pressure_slope_hayashi_1981(d.radius), 1e-8, "slope of the nebula");
  }
}

/* Weidenschilling 1977: fastest for a Stokes number of one, where it is the headwind; even in its logarithm; slow at both ends. */
static void drift_peaks_at_one(void **state) {
  (void)state;
  uint64_t seed = 9;
  for (int i = 0; i < TRIALS; i++) {
    double headwind = check_log_uniform(&seed, 1, 100), stokes = check_log_uniform(&seed, 1e-6, 0.99);
    double drift = lac_radial_drift_speed(stokes, headwind);
    check_within(-headwind, lac_radial_drift_speed(1, headwind), FEW_ROUNDINGS, "drift of the fastest grains");
    check_within(drift, lac_radial_drift_speed(1 / stokes, headwind), FEW_ROUNDINGS, "drift of the inverse Stokes number");
    check_within(-drift, lac_radial_drift_speed(stokes, -headwind), FEW_ROUNDINGS, "outwards where the pressure rises");
    assert_true(drift < 0 && drift > -headwind);
    check_within(-2e-9 * headwind, lac_radial_drift_speed(1e-9, headwind), FEW_ROUNDINGS, "small grains");
  }
}

int main(void) {
  cmocka_set_message_output(CM_OUTPUT_TAP);
  gsl_set_error_handler_off();
  const struct CMUnitTest tests[] = {
      cmocka_unit_test(rings_match_the_paper),
      cmocka_unit_test(nebula_matches_the_papers),
      cmocka_unit_test(nebula_has_its_mass),
      cmocka_unit_test(self_similar_disc_has_its_mass),
      cmocka_unit_test(accreting_disc_is_hottest_where_it_should),
      cmocka_unit_test(accreting_disc_has_its_luminosity),
      cmocka_unit_test(inverses_return),
      cmocka_unit_test(temperatures_scale),
      cmocka_unit_test(flared_interior_falls_with_three_sevenths),
      cmocka_unit_test(orbits_are_keplerian),
      cmocka_unit_test(stability_is_marginal_at_the_critical_density),
      cmocka_unit_test(gas_column_adds_up),
      cmocka_unit_test(pressure_slope_is_that_of_the_pressure),
      cmocka_unit_test(drift_peaks_at_one),
  };
  return cmocka_run_group_tests_name("disc", tests, NULL, NULL);
}
