/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Black bodies: last digits against tests/reference/planck_fine.csv (mpmath, 40 digits, by evaluate_kernels.py), the wider table
   planck.csv, tables of the fraction, inverses, integrals, limits. Single values of the relations are in tests/reference/checks_planck.csv.
 */
#include <string.h>

#include <gsl/gsl_errno.h>
#include <gsl/gsl_integration.h>
#include <gsl/gsl_min.h>

#include "check_table.h"
#include "lacuna/constants.h"
#include "lacuna/planck.h"
#include "relation.h"

#define PI 3.14159265358979323846
enum { TRIALS = 3000, INTERVALS = 300 };

typedef double of_body(double wavelength, double temperature);

/* The columns of planck_fine.csv and planck.csv from the third and the fifth on, and units of 2^-53 allowed. */
static const struct {
  of_body *function;
  double units;
  const char *label;
} functions[] = {
    {lac_planck_nu, 5, "planck_nu"},
    {lac_planck_lambda, 7, "planck_lambda"},
    {lac_photon_radiance_nu, 5, "photon_radiance_nu"},
    {lac_photon_radiance_lambda, 7, "photon_radiance_lambda"},
    {lac_planck_nu_slope, 9, "planck_nu_slope"},
};
enum { FUNCTIONS = sizeof functions / sizeof functions[0] };

static void last_digits(void **state) {
  (void)state;
  check_table *table = check_read_table("tests/reference/planck_fine.csv");
  for (size_t i = 0; i < table->rows; i++) {
    const long double *row = table->cell[i];
    for (int f = 0; f < FUNCTIONS; f++)
      check_units(row[2 + f], functions[f].function((double)row[0], (double)row[1]), functions[f].units, 0, functions[f].label);
    check_units(row[2 + FUNCTIONS], lac_blackbody_fraction((double)row[0], (double)row[1]), 8, 0, "blackbody_fraction");
  }
  free(table);
}

/* planck.csv has decimals for arguments; rounding each to a double moves x by a unit at most, and the result by x units for each. Results
   below the normal range are known to the smallest double. */
static void wide_table(void **state) {
  (void)state;
  check_table *table = check_read_table("tests/reference/planck.csv");
  for (size_t i = 0; i < table->rows; i++) {
    const long double *row = table->cell[i];
    double wavelength = (double)row[1], temperature = (double)row[2], moved = 8 + 2 * (double)row[3];
    for (int f = 0; f < FUNCTIONS; f++) {
      double got = functions[f].function(wavelength, temperature), want = (double)row[4 + f];
      check_near(want, got, (functions[f].units + moved) * 0x1p-53 * want + 2 * 0x1p-1074, functions[f].label);
    }
    if (row[4] > 1e-290L)
      check_within((double)row[9], lac_rayleigh_jeans_temperature((double)row[4], wavelength), 8 * 0x1p-53, "Rayleigh-Jeans temperature");
  }
  free(table);
}

/* The fraction against a table computed with 40 digits, and a handbook's printed digits (Kutz, ed., Mechanical Engineers' Handbook, vol. 4,
   Table 16), made with older constants: two units of its last digit, four at 600 um K. */
static void fraction_tables(void **state) {
  (void)state;
  check_table *table = check_read_table("tests/reference/planck_fraction.csv");
  for (size_t i = 0; i < table->rows; i++) {
    double wavelength = (double)table->cell[i][0] * 1e-6, x = LAC_SECOND_RADIATION / wavelength;
    check_units(table->cell[i][1], lac_blackbody_fraction(wavelength, 1), 8 + 2 * x, 0, "fraction");
  }
  free(table);
  table = check_read_table("tests/reference/planck_fraction_handbook.csv");
  for (size_t i = 0; i < table->rows; i++) {
    const long double *row = table->cell[i];
    double digits = row[0] == 600 ? 4 : 2;
    check_near((double)row[1], lac_blackbody_fraction((double)row[0] * 1e-6, 1), digits * (double)row[3], "handbook's fraction");
  }
  free(table);
}

/* A body seen at a wavelength, x = h c/(lambda k T) from low to high. */
static void any_body(uint64_t *seed, double low, double high, double *wavelength, double *temperature) {
  *wavelength = check_log_uniform(seed, 1e-7, 1e-2);
  *temperature = LAC_SECOND_RADIATION / (*wavelength * check_log_uniform(seed, low, high));
}

static void inverses(void **state) {
  (void)state;
  uint64_t seed = 1;
  for (int i = 0; i < TRIALS; i++) {
    double wavelength, t;
    any_body(&seed, 1e-4, 400, &wavelength, &t);
    /* for small x the temperature is proportional to the intensity, whose rounding it takes over */
    check_within(t, lac_brightness_temperature(lac_planck_nu(wavelength, t), wavelength), 16 * 0x1p-53, "T from B_nu");
    check_within(t, lac_temperature_from_planck_lambda(lac_planck_lambda(wavelength, t), wavelength), 18 * 0x1p-53, "T from B_lambda");
    check_within(wavelength, lac_wavelength(lac_frequency(wavelength)), 4 * 0x1p-53, "wavelength from frequency");
    double fraction = check_uniform(&seed, 0, 0.5);
    check_within(fraction, lac_blackbody_fraction(lac_wavelength_of_blackbody_fraction(fraction, t), t), 128 * 0x1p-53, "fraction");
    double upper = check_uniform(&seed, 0.5, 1);
    check_within(upper, lac_blackbody_fraction(lac_wavelength_of_blackbody_fraction(upper, t), t), 8 * 0x1p-53, "upper fraction");
  }
}

/* The two Planck functions, and the photons, are one quantity in different measures. */
static void measures(void **state) {
  (void)state;
  uint64_t seed = 2;
  for (int i = 0; i < TRIALS; i++) {
    double l, t;
    any_body(&seed, 1e-5, 600, &l, &t);
    double nu = lac_planck_nu(l, t), photon = LAC_PLANCK_CONSTANT * LAC_SPEED_OF_LIGHT / l;
    check_within(nu * LAC_SPEED_OF_LIGHT / (l * l), lac_planck_lambda(l, t), 20 * 0x1p-53, "B_lambda from B_nu");
    check_within(nu / photon, lac_photon_radiance_nu(l, t), 20 * 0x1p-53, "photons per frequency");
    check_within(lac_planck_lambda(l, t) / photon, lac_photon_radiance_lambda(l, t), 20 * 0x1p-53, "photons per wavelength");
    double step = 1e-4 * t, difference = (lac_planck_nu(l, t + step) - lac_planck_nu(l, t - step)) / (2 * step);
    double x = LAC_SECOND_RADIATION / (l * t);
    check_within(difference, lac_planck_nu_slope(l, t), (1 + x) * (1 + x) * 1e-8, "slope by differences"); /* next term of the series */
  }
}

/* Rayleigh and Jeans for small x: B_nu = 2 k T/lambda^2 (1 - x/2 + x^2/12); Wien for large x. */
static void limits(void **state) {
  (void)state;
  uint64_t seed = 3;
  for (int i = 0; i < TRIALS; i++) {
    double l, t;
    any_body(&seed, 1e-6, 1e-4, &l, &t);
    double x = LAC_SECOND_RADIATION / (l * t);
    check_within(t * (1 - x / 2 + x * x / 12), lac_rayleigh_jeans_temperature(lac_planck_nu(l, t), l), 20 * 0x1p-53, "Rayleigh-Jeans");
    any_body(&seed, 40, 600, &l, &t);
    x = LAC_SECOND_RADIATION / (l * t);
    check_within(2 * LAC_PLANCK_CONSTANT * LAC_SPEED_OF_LIGHT / (l * l * l) * exp(-x), lac_planck_nu(l, t), (20 + 4 * x) * 0x1p-53, "Wien");
  }
  assert_true(lac_planck_nu(1e-7, 1) == 0 && lac_planck_lambda(1e-7, 1e-30) == 0 && lac_blackbody_fraction(1e-7, 1) == 0);
  assert_true(lac_blackbody_fraction(1e10, 1e10) == 1);
}

/* In y = ln lambda, at one temperature. */
static double exitance_by_wavelength(double y, void *temperature) {
  return PI * exp(y) * lac_planck_lambda(exp(y), *(const double *)temperature);
}
static double photons_by_wavelength(double y, void *temperature) {
  return PI * exp(y) * lac_photon_radiance_lambda(exp(y), *(const double *)temperature);
}

static double integral(double (*function)(double, void *), double temperature, double x_low, double x_high) {
  gsl_function f = {function, &temperature};
  double c2 = LAC_SECOND_RADIATION / temperature, result, error;
  gsl_integration_workspace *workspace = gsl_integration_workspace_alloc(INTERVALS);
  assert_int_equal(
      gsl_integration_qag(&f, log(c2 / x_high), log(c2 / x_low), 0, 1e-11, INTERVALS, GSL_INTEG_GAUSS31, workspace, &result, &error),
      GSL_SUCCESS);
  gsl_integration_workspace_free(workspace);
  return result;
}

/* Printed as 1.52e11 T^3 photons s^-1 cm^-2 (textbook). */
static void photons_of_textbook(void **state) {
  (void)state;
  check_near(1.52e15, lac_photon_exitance(1), 0.005e15, "photon exitance");
}

/* Stefan's law, the photons, and the share below a wavelength are integrals of Planck's; left out beyond x = 100 and below 1e-6: less than
 * 1e-11. */
static void integrals(void **state) {
  (void)state;
  static const double temperatures[] = {30, 1500, 9750};
  for (int i = 0; i < 3; i++) {
    double t = temperatures[i], c2 = LAC_SECOND_RADIATION / t;
    check_within(lac_blackbody_exitance(t), integral(exitance_by_wavelength, t, 1e-6, 100), 1e-10, "Stefan and Boltzmann");
    check_within(lac_photon_exitance(t), integral(photons_by_wavelength, t, 1e-7, 100), 1e-10, "photon exitance");
    for (double x = 0.25; x < 30; x *= 1.7)
      check_within(lac_blackbody_fraction(c2 / x, t), integral(exitance_by_wavelength, t, x, 200) / lac_blackbody_exitance(t), 1e-10,
                   "share");
  }
}

static double minus_b_lambda(double y, void *t) { return -lac_planck_lambda(exp(y), *(const double *)t); }
static double minus_b_nu(double y, void *t) { return -lac_planck_nu(exp(y), *(const double *)t); }
static double minus_power(double y, void *t) { return -exp(y) * lac_planck_lambda(exp(y), *(const double *)t); }

static double wavelength_of_minimum(double (*function)(double, void *), double temperature) {
  gsl_function f = {function, &temperature};
  double c2 = LAC_SECOND_RADIATION / temperature;
  gsl_min_fminimizer *search = gsl_min_fminimizer_alloc(gsl_min_fminimizer_brent);
  assert_int_equal(gsl_min_fminimizer_set(search, &f, log(c2 / 3.5), log(c2 / 12), log(c2 / 1)), GSL_SUCCESS);
  for (int i = 0; i < 60; i++) gsl_min_fminimizer_iterate(search);
  double wavelength = exp(gsl_min_fminimizer_x_minimum(search));
  gsl_min_fminimizer_free(search);
  return wavelength;
}

/* A search finds a flat maximum to the root of epsilon. */
static void peaks(void **state) {
  (void)state;
  double t = 1234;
  check_within(wavelength_of_minimum(minus_b_lambda, t), lac_peak_wavelength(t), 1e-7, "peak of B_lambda");
  check_within(LAC_SPEED_OF_LIGHT / wavelength_of_minimum(minus_b_nu, t), lac_peak_frequency(t), 1e-7, "peak of B_nu");
  check_within(wavelength_of_minimum(minus_power, t), lac_peak_wavelength_power(t), 1e-7, "peak of lambda B_lambda");
}

static void out_of_range(void **state) {
  (void)state;
  static const double bad[] = {0, -1, -(double)INFINITY, (double)NAN};
  for (size_t i = 0; i < sizeof bad / sizeof bad[0]; i++) {
    for (int f = 0; f < FUNCTIONS; f++) {
      check_undefined(functions[f].function(bad[i], 1500), functions[f].label);
      check_undefined(functions[f].function(1e-6, bad[i]), functions[f].label);
    }
    check_undefined(lac_blackbody_fraction(bad[i], 1500), "fraction");
    check_undefined(lac_brightness_temperature(bad[i], 1e-6), "brightness temperature");
    check_undefined(lac_temperature_from_planck_lambda(bad[i], 1e-6), "temperature from B_lambda");
    check_undefined(lac_temperature_from_planck_lambda(1, bad[i]), "temperature from B_lambda");
    check_undefined(lac_rayleigh_jeans_temperature(1, bad[i]), "Rayleigh-Jeans temperature");
    check_undefined(lac_photon_exitance(bad[i]), "photon exitance");
    check_undefined(lac_wavelength_of_blackbody_fraction(bad[i], 1500), "wavelength of a fraction");
    check_undefined(lac_wavelength_of_blackbody_fraction(0.5, bad[i]), "wavelength of a fraction");
  }
  check_undefined(lac_rayleigh_jeans_temperature(-1, 1e-6), "Rayleigh-Jeans temperature");
  check_undefined(lac_wavelength_of_blackbody_fraction(1, 1500), "wavelength of the whole");
}

/* Every form of a function gives the same bits: scalar, block of a row, public block, whatever the length. */
static void blocks_alike(void **state) {
  (void)state;
  enum { N = 203 };
  double wavelength[N], temperature[N], out[N], constant[N];
  uint64_t seed = 4;
  for (int i = 0; i < N; i++) any_body(&seed, 1e-6, 800, &wavelength[i], &temperature[i]), constant[i] = 1500;
  const double *in[] = {wavelength, temperature};
  int rows = 0;
  for (const lac_relation *row = lac_planck_relations; row->gives; row++) {
    if (!row->from[1] || strcmp(row->from[1], "body_temperature") != 0) continue;
    of_body *function = (of_body *)row->function;
    for (size_t n = 1; n <= N; n += 13) {
      row->block(n, out, in);
      for (size_t i = 0; i < n; i++) assert_true(out[i] == function(wavelength[i], temperature[i]));
    }
    rows++;
  }
  assert_int_equal(rows, 5);
  memcpy(out, wavelength, sizeof out);
  lac_planck_nu_block(N, out, out, constant[0]);
  for (int i = 0; i < N; i++) assert_true(out[i] == lac_planck_nu(wavelength[i], constant[i]));
  lac_planck_lambda_block(N, out, wavelength, constant[0]);
  for (int i = 0; i < N; i++) assert_true(out[i] == lac_planck_lambda(wavelength[i], constant[i]));
}

int main(void) {
  cmocka_set_message_output(CM_OUTPUT_TAP);
  gsl_set_error_handler_off();
  const struct CMUnitTest tests[] = {
      cmocka_unit_test(last_digits),  cmocka_unit_test(wide_table),   cmocka_unit_test(fraction_tables),
      cmocka_unit_test(inverses),     cmocka_unit_test(measures),     cmocka_unit_test(limits),
      cmocka_unit_test(integrals),    cmocka_unit_test(peaks),        cmocka_unit_test(photons_of_textbook),
      cmocka_unit_test(out_of_range), cmocka_unit_test(blocks_alike),
  };
  return cmocka_run_group_tests_name("planck", tests, NULL, NULL);
}
