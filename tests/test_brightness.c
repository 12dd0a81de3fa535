/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Closed forms of visibilities against two-dimensional integrals, high-precision evaluations, published nulls and half-power
   points, and each other; the deprojection; the rim's rows as functions of them. */
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "check.h"
#include "lacuna/brightness.h"
#include "lacuna/constants.h"
#include "relation.h"

#define PI 3.14159265358979323846
#define DEGREE (PI / 180)

/* Results are of order 1, so tolerances are absolute, in units of the rounding of numbers just below 1. */
#define UNIT (DBL_EPSILON / 2)

static FILE *open_reference(const char *path) {
  FILE *file = fopen(path, "r");
  if (file == NULL) fail_msg("%s is missing: run from the repository's top directory", path);
  return file;
}

/* The number after "name=" in a list apart by semicolons; absent: the other number. */
static double parameter(const char *list, const char *name, double absent) {
  size_t length = strlen(name);
  for (const char *at = list; at != NULL; at = strchr(at, ';')) {
    if (*at == ';') at++;
    if (strncmp(at, name, length) == 0 && at[length] == '=') return strtod(at + length + 1, NULL);
  }
  return absent;
}

/* A model of the reference file at a spatial frequency; sizes in mas. */
static double model_visibility(const char *model, const char *parameters, double q) {
  double diameter = parameter(parameters, "d", NAN) * LAC_MAS;
  if (strcmp(model, "ud") == 0) return lac_uniform_disc_visibility(q, diameter);
  if (strcmp(model, "ldlin") == 0) return lac_linear_limb_darkened_visibility(q, diameter, parameter(parameters, "c", NAN));
  if (strcmp(model, "ldpow") == 0) return lac_power_law_limb_darkened_visibility(q, diameter, parameter(parameters, "a", NAN));
  if (strcmp(model, "ring") == 0) return lac_thin_ring_visibility(q, diameter);
  if (strcmp(model, "gauss") == 0) return lac_gaussian_visibility(q, parameter(parameters, "fwhm", NAN) * LAC_MAS);
  if (strcmp(model, "annulus") == 0)
    return lac_annulus_visibility(q, parameter(parameters, "din", NAN) * LAC_MAS, parameter(parameters, "dout", NAN) * LAC_MAS);
  return (double)NAN;
}

/* The integral's own error stands in the file's last column: 12 printed digits, or what its grid reached (limb darkening by a power law).
 */
static void visibilities_match_two_dimensional_integrals(void **state) {
  (void)state;
  FILE *file = open_reference("tests/reference/visibility.csv");
  char line[512], model[32], parameters[128];
  double number, micrometres, east, north, closed, integral, difference;
  int checked = 0;
  while (fgets(line, sizeof line, file)) {
    if (sscanf(line, "%lf,%31[^,],%127[^,],%lf,%lf,%lf,%lf,%*f,%*f,%*f,%lf,%*f,%lf", &number, model, parameters, &micrometres, &east,
               &north, &closed, &integral, &difference) != 9)
      continue;
    double inclination = parameter(parameters, "inc", 0) * DEGREE, disc = parameter(parameters, "pa", 0) * DEGREE;
    double baseline = hypot(east, north), angle = atan2(east, north), wavelength = micrometres * 1e-6;
    double got = model_visibility(model, parameters, lac_deprojected_frequency(baseline, angle, inclination, disc, wavelength));
    check_near(closed, got, 1e-14, line);
    check_near(integral, got, 1e-12 + 1.1 * difference, line);
    if (strcmp(model, "ring") == 0)
      check_near(closed,
                 lac_rim_visibility(0, 0, parameter(parameters, "d", NAN) / 2 * LAC_MAS, inclination, disc, baseline, angle, wavelength),
                 1e-14, line);
    checked++;
  }
  fclose(file);
  assert_int_equal(checked, 53);
}

static double closed_form(const char *model, double value, double q) {
  if (strcmp(model, "uniform") == 0) return lac_uniform_disc_visibility(q, 1);
  if (strcmp(model, "ring") == 0) return lac_thin_ring_visibility(q, 1);
  if (strcmp(model, "gaussian") == 0) return lac_gaussian_visibility(q, 1);
  if (strcmp(model, "linear") == 0) return lac_linear_limb_darkened_visibility(q, 1, value);
  if (strcmp(model, "power_law") == 0) return lac_power_law_limb_darkened_visibility(q, 1, value);
  if (strcmp(model, "annulus") == 0) return lac_annulus_visibility(q, value, 1);
  return (double)NAN;
}

/* As the header promises: some 1e-15. */
static void closed_forms_reach_their_accuracy(void **state) {
  (void)state;
  FILE *file = open_reference("tests/reference/evaluated_closed_forms.csv");
  char line[256], model[32];
  double value, q, want;
  int checked = 0;
  while (fgets(line, sizeof line, file)) {
    if (sscanf(line, "%31[^,],%lf,%lf,%lf", model, &value, &q, &want) != 4) continue;
    check_near(want, closed_form(model, value, q), 8 * UNIT, line);
    checked++;
  }
  fclose(file);
  assert_int_equal(checked, 15 * 12);
}

/* Where visibilities vanish or reach a half; B theta/lambda, 15 digits. Airy 1835 and optics books print 1.22, 2.233, 3.238; zeros of
   Bessel functions over pi: Abramowitz & Stegun 1964 Table 9.5. */
static void nulls_and_half_power_points_lie_where_published(void **state) {
  (void)state;
  const double digits = 4e-15;
  check_near(0, lac_uniform_disc_visibility(1.21966989126650, 1), digits, "uniform disc, first null");
  check_near(0, lac_uniform_disc_visibility(2.23313059438153, 1), digits, "uniform disc, second null");
  check_near(0, lac_uniform_disc_visibility(3.23831548416624, 1), digits, "uniform disc, third null");
  check_near(0, lac_thin_ring_visibility(0.765479749562012, 1), digits, "ring, first null");
  check_near(0, lac_thin_ring_visibility(1.75709543501087, 1), 2 * digits, "ring, second null");
  check_near(0, lac_linear_limb_darkened_visibility(1.43029665312420, 1, 1), digits, "fully darkened disc, first null: tan x = x");
  check_near(0.5, lac_uniform_disc_visibility(0.705084844527225, 1), digits, "uniform disc, V = 1/2");
  check_near(sqrt(0.5), lac_uniform_disc_visibility(0.514496984981094, 1), digits, "uniform disc, V^2 = 1/2");
  check_near(0.5, lac_thin_ring_visibility(0.484195191865694, 1), digits, "ring, V = 1/2");
  check_near(sqrt(0.5), lac_thin_ring_visibility(0.358532872837667, 1), digits, "ring, V^2 = 1/2");
  check_near(0.5, lac_gaussian_visibility(0.441271200305303, 1), digits, "Gaussian, V = 1/2");
  check_near(sqrt(0.5), lac_gaussian_visibility(0.312025858078207, 1), digits, "Gaussian, V^2 = 1/2");
  check_near(0.1, lac_gaussian_visibility(0.804267830345105, 1), digits, "Gaussian, V = 0.1");
  check_near(-0.132279487396100, lac_uniform_disc_visibility(1.63471935, 1), digits, "uniform disc, second lobe");
  check_near(-0.402759395702553, lac_thin_ring_visibility(1.21966989126650, 1), digits, "ring, second lobe");
}

/* One dark-limbed disc, whichever law names it; the annulus between the disc and the ring. */
static void models_agree_where_they_meet(void **state) {
  (void)state;
  uint64_t seed = 20260401;
  for (int i = 0; i < 2000; i++) {
    double diameter = check_log_uniform(&seed, 0.1, 100) * LAC_MAS, q = check_log_uniform(&seed, 1e-6, 30) / diameter;
    double uniform = lac_uniform_disc_visibility(q, diameter);
    check_near(uniform, lac_linear_limb_darkened_visibility(q, diameter, 0), 4 * UNIT, "linear darkening of 0");
    check_near(uniform, lac_power_law_limb_darkened_visibility(q, diameter, 0), 16 * UNIT, "exponent 0");
    check_near(uniform, lac_annulus_visibility(q, 0, diameter), 8 * UNIT, "annulus without a hole");
    check_near(lac_linear_limb_darkened_visibility(q, diameter, 1), lac_power_law_limb_darkened_visibility(q, diameter, 1), 16 * UNIT,
               "mu = 1 - (1 - mu)");
    check_near(lac_thin_ring_visibility(q, diameter), lac_annulus_visibility(q, diameter, diameter), 8 * UNIT, "annulus without width");
    double inner = check_uniform(&seed, 0, 1) * diameter, hole = inner * inner / (diameter * diameter);
    check_near(uniform, hole * lac_uniform_disc_visibility(q, inner) + (1 - hole) * lac_annulus_visibility(q, inner, diameter), 16 * UNIT,
               "disc = hole + annulus");
  }
}

/* The annulus tends to the ring with the square of its width: the mean over the area of J0 to second order. */
static void narrow_annulus_tends_to_the_ring(void **state) {
  (void)state;
  double q = 0.9, previous = INFINITY;
  for (double width = 0.02; width > 1e-4; width /= 2) {
    double middle_error = fabs(lac_annulus_visibility(q, 1 - width, 1 + width) - lac_thin_ring_visibility(q, 1));
    assert_true(middle_error > 0);
    if (isfinite(previous)) check_within(4, previous / middle_error, 1e-2, "a quarter of the error for half the width");
    previous = middle_error;
  }
}

/* V is 1 at q = 0, and falls from it by (pi q)^2 <theta^2>/4, the mean taken over the brightness: series of J0. */
static void visibility_starts_at_one(void **state) {
  (void)state;
  const double q = 1e-3;
  const struct {
    const char *model;
    double value, mean_square;
  } cases[] = {{"uniform", 0, 0.5},   {"ring", 0, 1},        {"gaussian", 0, 1 / log(2)}, {"linear", 0, 0.5},     {"linear", 1, 0.4},
               {"power_law", 0, 0.5}, {"power_law", 1, 0.4}, {"power_law", 20, 1.0 / 12}, {"annulus", 0.5, 0.625}};
  for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
    check_near(1, closed_form(cases[i].model, cases[i].value, 0), UNIT, cases[i].model);
    check_within(cases[i].mean_square * PI * q * PI * q / 4, 1 - closed_form(cases[i].model, cases[i].value, q), 1e-5, cases[i].model);
  }
}

static void gaussian_is_inverted(void **state) {
  (void)state;
  uint64_t seed = 77;
  for (int i = 0; i < 200; i++) {
    double v = check_uniform(&seed, 0.01, 0.99), fwhm = check_log_uniform(&seed, 1e-9, 1e-7);
    check_within(v, lac_gaussian_visibility(2 * sqrt(log(2) * -log(v)) / (PI * fwhm), fwhm), 32 * UNIT,
                 "q = 2 sqrt(ln 2 ln(1/V))/(pi fwhm)");
  }
}

static void deprojection_shortens_the_minor_axis_alone(void **state) {
  (void)state;
  uint64_t seed = 5;
  for (int i = 0; i < 1000; i++) {
    double baseline = check_log_uniform(&seed, 5, 500), wavelength = check_log_uniform(&seed, 1e-6, 1e-5);
    double inclination = check_uniform(&seed, 0, PI / 2), disc = check_uniform(&seed, -7, 7), angle = check_uniform(&seed, -7, 7);
    double full = baseline / wavelength, q = lac_deprojected_frequency(baseline, angle, inclination, disc, wavelength);
    check_within(full, lac_deprojected_frequency(baseline, disc, inclination, disc, wavelength), 8 * UNIT, "along the major axis");
    check_near(1, lac_deprojected_frequency(baseline, disc + PI / 2, inclination, disc, wavelength) / full / cos(inclination), 1e-12,
               "along the minor axis");
    check_within(full, lac_deprojected_frequency(baseline, angle, 0, disc, wavelength), 8 * UNIT, "face on");
    /* Two roundings of angles of up to 10 rad, at most 1e-15 each, move q by as much of the whole. */
    check_near(q / full, lac_deprojected_frequency(baseline, angle + PI, inclination, disc, wavelength) / full, 1e-14, "reversed baseline");
    check_near(q / full, lac_deprojected_frequency(baseline, 2 * disc - angle, inclination, disc, wavelength) / full, 1e-14,
               "mirrored at the major axis");
    check_within(2 * q, lac_deprojected_frequency(2 * baseline, angle, inclination, disc, wavelength), 2 * UNIT, "twice the baseline");
  }
  check_undefined(lac_deprojected_frequency(0, 0, 0, 0, 1e-6), "no baseline");
  check_undefined(lac_deprojected_frequency(100, 0, 1.6, 0, 1e-6), "beyond edge on");
  check_undefined(lac_deprojected_frequency(100, 0, -0.1, 0, 1e-6), "below face on");
  check_undefined(lac_deprojected_frequency(100, NAN, 0.3, 0, 1e-6), "baseline of undefined position angle");
}

/* Star, ring and halo add up as their shares of the flux; a row's block form says what its function says. */
static void rim_is_star_plus_ring(void **state) {
  (void)state;
  enum { COUNT = 1000 };
  static double input[8][COUNT], out[COUNT];
  const double *in[8];
  uint64_t seed = 11;
  for (int k = 0; k < 8; k++) in[k] = input[k];
  for (size_t i = 0; i < COUNT; i++) {
    input[0][i] = check_uniform(&seed, 0, 1);
    input[1][i] = check_uniform(&seed, 0, 1 - input[0][i]);
    input[2][i] = check_log_uniform(&seed, 0.05, 20) * LAC_MAS;
    input[3][i] = check_uniform(&seed, 0, PI / 2);
    input[4][i] = check_uniform(&seed, -4, 4);
    input[5][i] = check_log_uniform(&seed, 10, 300);
    input[6][i] = check_uniform(&seed, -4, 4);
    input[7][i] = check_log_uniform(&seed, 1.2e-6, 1e-5);
  }
  lac_brightness_relations[0].block(COUNT, out, in);
  for (size_t i = 0; i < COUNT; i++) {
    double star = input[0][i], halo = input[1][i], radius = input[2][i];
    double q = lac_deprojected_frequency(input[5][i], input[6][i], input[3][i], input[4][i], input[7][i]);
    double ring = lac_thin_ring_visibility(q, 2 * radius);
    double with_halo = lac_rim_visibility(star, halo, radius, input[3][i], input[4][i], input[5][i], input[6][i], input[7][i]);
    double without = lac_rim_visibility_without_halo(star, radius, input[3][i], input[4][i], input[5][i], input[6][i], input[7][i]);
    /* The argument of J0, up to 150, is rounded in its own ways: some 100 units of rounding. */
    check_near(star + (1 - star - halo) * ring, with_halo, 100 * UNIT, "star + ring");
    check_near(halo * ring, without - with_halo, 100 * UNIT, "what the halo takes from the ring");
    check_near(with_halo, out[i], 100 * UNIT, "block form");
  }
}

static void rim_wants_flux_shares_that_add_up(void **state) {
  (void)state;
  for (int tenths = 0; tenths <= 10; tenths++)
    check_near(tenths / 10.0, lac_rim_visibility(tenths / 10.0, (10 - tenths) / 10.0, 1e-8, 0.5, 0, 100, 1, 2e-6), UNIT, "no ring left");
  check_undefined(lac_rim_visibility(0.7, 0.31, 1e-8, 0.5, 0, 100, 1, 2e-6), "shares above 1");
  check_undefined(lac_rim_visibility(0.7, -0.1, 1e-8, 0.5, 0, 100, 1, 2e-6), "a negative share");
  check_undefined(lac_rim_visibility_without_halo(1.01, 1e-8, 0.5, 0, 100, 1, 2e-6), "a share above 1");
  check_undefined(lac_rim_visibility(0.7, 0.1, 1e-8, 0.5, NAN, 100, 1, 2e-6), "an undefined position angle");
}

/* A rim well below the resolution is detected all the same: with a drop of about 2 f_disc (pi q theta)^2/4, many errors of V^2. */
static void small_rim_is_detected_before_it_is_resolved(void **state) {
  (void)state;
  double radius = 0.3 * LAC_MAS, baseline = 130, wavelength = 1.65e-6, star = 0.5, error = 0.01;
  double z = 2 * PI * radius * baseline / wavelength;
  double v = lac_rim_visibility_without_halo(star, radius, 0, 0, baseline, 0, wavelength);
  double drop = lac_rim_visibility_drop(lac_rim_squared_visibility(v));
  check_within(2 * (1 - star) * z * z / 4, drop, z * z / 4, "drop of a small ring");
  assert_true(2 * radius < wavelength / (2 * baseline));
  assert_true(lac_rim_drop_significance(drop, error) > 5);
}

static void outside_the_domain_is_undefined(void **state) {
  (void)state;
  const char *models[] = {"uniform", "ring", "gaussian", "linear", "power_law", "annulus"};
  for (size_t i = 0; i < sizeof models / sizeof *models; i++) {
    check_undefined(closed_form(models[i], 0.5, -1), models[i]);
    check_undefined(closed_form(models[i], 0.5, NAN), models[i]);
    check_undefined(closed_form(models[i], 0.5, INFINITY), models[i]);
  }
  check_undefined(lac_uniform_disc_visibility(1, 0), "uniform disc without size");
  check_undefined(lac_thin_ring_visibility(1, -1), "ring of negative size");
  check_undefined(lac_gaussian_visibility(1, NAN), "Gaussian of undefined size");
  check_undefined(lac_linear_limb_darkened_visibility(1, 1, 1.01), "limb darker than dark");
  check_undefined(lac_linear_limb_darkened_visibility(1, 1, NAN), "undefined darkening");
  check_undefined(lac_power_law_limb_darkened_visibility(1, 1, -0.1), "limb brightening");
  check_undefined(lac_power_law_limb_darkened_visibility(1, 1, 21), "exponent too large");
  check_undefined(lac_annulus_visibility(1, 1.1, 1), "inner above outer diameter");
  check_undefined(lac_annulus_visibility(1, NAN, 1), "undefined inner diameter");
  check_undefined(lac_annulus_visibility(1, 0, 0), "annulus without size");
}

int main(void) {
  cmocka_set_message_output(CM_OUTPUT_TAP);
  const struct CMUnitTest tests[] = {
      cmocka_unit_test(visibilities_match_two_dimensional_integrals),
      cmocka_unit_test(closed_forms_reach_their_accuracy),
      cmocka_unit_test(nulls_and_half_power_points_lie_where_published),
      cmocka_unit_test(models_agree_where_they_meet),
      cmocka_unit_test(narrow_annulus_tends_to_the_ring),
      cmocka_unit_test(visibility_starts_at_one),
      cmocka_unit_test(gaussian_is_inverted),
      cmocka_unit_test(deprojection_shortens_the_minor_axis_alone),
      cmocka_unit_test(rim_is_star_plus_ring),
      cmocka_unit_test(rim_wants_flux_shares_that_add_up),
      cmocka_unit_test(small_rim_is_detected_before_it_is_resolved),
      cmocka_unit_test(outside_the_domain_is_undefined),
  };
  return cmocka_run_group_tests_name("brightness", tests, NULL, NULL);
}
