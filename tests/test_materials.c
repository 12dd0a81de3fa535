/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Refractive indices of the materials: against an independent evaluation of the same formulas, against Kramers and Kronig, and the far
   infrared of ice against published numbers; users' tables. */
#include "check.h"

#include <stdio.h>
#include <string.h>

#include "lacuna/dust.h"

enum { POINTS = 200000 };
#define UM 1e-6

/* materials_check.csv: ten digits, evaluated in Python from the parameters as printed. k far from any band underflows. */
static void indices_as_evaluated_elsewhere(void **state) {
  (void)state;
  FILE *file = fopen("tests/reference/materials_check.csv", "r");
  assert_non_null(file);
  char line[400], name[40];
  double wavelength, n, k, got_n, got_k;
  int rows = 0;
  while (fgets(line, sizeof line, file)) {
    if (sscanf(line, "%39[^,],%lf,%lf,%lf", name, &wavelength, &n, &k) != 4) continue;
    const lac_material *material = lac_material_named(name);
    assert_non_null(material);
    const lac_status status = lac_material_index(material, wavelength * UM, (double)NAN, false, &got_n, &got_k);
    assert_int_equal(status, LAC_OK);
    check_within(n, got_n, 1e-9, line);
    check_near(k, got_k, 1e-8 * k + 1e-300, line);
    rows++;
  }
  fclose(file);
  assert_int_equal(rows, 75);
}

static void eps(const lac_material *material, double wavenumber, double *real, double *imaginary) {
  double n, k;
  const lac_status status = lac_material_index(material, 0.01 / wavenumber, (double)NAN, true, &n, &k);
  assert_true(status == LAC_OK || status == LAC_DOUBTFUL);
  *real = n * n - k * k;
  *imaginary = 2 * n * k;
}

/* Kramers and Kronig: Re eps(w) - Re eps(infinity) = (2/pi) P int w' Im eps(w')/(w'^2 - w^2) dw'; the pole is taken out with
   P int dw'/(w'^2 - w^2) = 0. Differences of two frequencies, so that the value at infinity isn't needed. From 1e-3 to 1e9 cm^-1; the
   tolerance is what the step of 1.4e-4 in ln w leaves. */
static double dispersion(const lac_material *material, double w) {
  double real, at_pole, sum = 0;
  eps(material, w, &real, &at_pole);
  const double low = log(1e-3), step = (log(1e9) - low) / POINTS;
  for (int i = 0; i < POINTS; i++) {
    const double v = exp(low + step * (i + 0.5));
    double imaginary;
    eps(material, v, &real, &imaginary);
    sum += v * (v * imaginary - w * at_pole) / (v * v - w * w) * step;
  }
  return M_2_PI * sum;
}

static void kramers_and_kronig(void **state) {
  (void)state;
  static const double wavenumbers[] = {31, 480, 1010, 3210, 17000};
  for (size_t m = 0; lac_material_at(m); m++) {
    const lac_material *material = lac_material_at(m);
    double first_real = 0, first = 0;
    for (int i = 0; i < 5; i++) {
      double real, imaginary;
      eps(material, wavenumbers[i], &real, &imaginary);
      const double got = dispersion(material, wavenumbers[i]);
      if (i == 0) first_real = real, first = got;
      else check_near(first_real - real, first - got, 1e-5 * (fabs(first_real) + fabs(real)), lac_material_about(material).name);
      assert_true(imaginary >= 0);
    }
  }
}

/* Maetzler et al. 2006 at 266 K and 100 K, evaluated independently; four digits. */
static void cold_ice(void **state) {
  (void)state;
  static const double table[][4] = {
      {266, 300, 1.784, 0.02547}, {266, 1000, 1.784, 0.00676}, {266, 3000, 1.784, 0.002227}, {100, 1000, (double)NAN, 7.6e-4}};
  for (size_t i = 0; i < 4; i++) {
    double n, k;
    assert_int_equal(lac_material_index(lac_material_named("water_ice"), table[i][1] * UM, table[i][0], false, &n, &k), LAC_OK);
    if (i < 3) check_near(table[i][2], n, 6e-4, "n of ice");
    check_near(table[i][3], k, i < 3 ? 0.5e-3 * table[i][3] + 5e-6 : 0.5e-5, "k of ice");
  }
  /* Warren & Brandt 2008 at 266 K and the formula at 266 K are two sources: within 4 % of each other in k. */
  double n, warm, cold;
  lac_material_index(lac_material_named("water_ice"), 1e-3, (double)NAN, false, &n, &warm);
  lac_material_index(lac_material_named("water_ice"), 1e-3, 266, false, &n, &cold);
  check_within(warm, cold, 0.04, "two sources");
  /* No jump where they meet. */
  double above, below;
  lac_material_index(lac_material_named("water_ice"), 100.0001 * UM, 100, false, &n, &above);
  lac_material_index(lac_material_named("water_ice"), 99.9999 * UM, 100, false, &n, &below);
  check_within(above, below, 1e-3, "k at 100 um");
}

/* Malitson 1965, J. Opt. Soc. Am. 55, 1205: fused silica, 0.21 to 6.7 um; the fit is to another sample. */
static void silica_by_malitson(void **state) {
  (void)state;
  static const double wavelengths[] = {0.3, 0.55, 1, 2};
  for (size_t i = 0; i < 4; i++) {
    const double l = wavelengths[i] * wavelengths[i];
    const double square = 1 + 0.6961663 * l / (l - 0.0684043 * 0.0684043) + 0.4079426 * l / (l - 0.1162414 * 0.1162414) +
                          0.8974794 * l / (l - 9.896161 * 9.896161);
    double n, k;
    assert_int_equal(lac_material_index(lac_material_named("silica_glass"), wavelengths[i] * UM, (double)NAN, false, &n, &k), LAC_OK);
    check_within(sqrt(square), n, 5e-4, "silica");
  }
}

static void ranges(void **state) {
  (void)state;
  double n, k;
  for (size_t m = 0; lac_material_at(m); m++) {
    assert_int_equal(lac_material_index(lac_material_at(m), 0.19 * UM, (double)NAN, false, &n, &k), LAC_OUT_OF_RANGE);
    check_undefined(n, "outside");
    assert_int_equal(lac_material_index(lac_material_at(m), 0.19 * UM, (double)NAN, true, &n, &k), LAC_DOUBTFUL);
    assert_true(n > 0 && k >= 0);
  }
  assert_null(lac_material_named("graphite"));
}

static void tables_of_users(void **state) {
  (void)state;
  const double wavelength[] = {1e-6, 2e-6, 4e-6}, n[] = {1.5, 1.7, 1.9}, k[] = {0.01, 0.04, 0};
  lac_material *material;
  size_t where;
  double got_n, got_k;
  assert_int_equal(lac_material_table("mine", 2000, 3, wavelength, n, k, &material, &where), LAC_OK);
  assert_int_equal(lac_material_index(material, sqrt(2) * 1e-6, (double)NAN, false, &got_n, &got_k), LAC_OK);
  check_within(1.6, got_n, 1e-14, "halfway in ln lambda");
  check_within(0.02, got_k, 1e-14, "geometric mean");
  assert_int_equal(lac_material_index(material, 5e-6, (double)NAN, false, &got_n, &got_k), LAC_OUT_OF_RANGE);
  assert_int_equal(lac_material_index(material, 5e-6, (double)NAN, true, &got_n, &got_k), LAC_DOUBTFUL);
  check_within(1.9, got_n, 1e-14, "held");
  lac_material_drop(lac_material_keep(material));
  lac_material_drop(material);
  const double falling[] = {1e-6, 1e-6, 4e-6}, negative[] = {0.1, -0.1, 0.1}, hole[] = {1.5, 1.6, (double)NAN};
  assert_int_equal(lac_material_table("bad", 2000, 3, falling, n, k, &material, &where), LAC_OUT_OF_RANGE);
  assert_int_equal(where, 1);
  assert_int_equal(lac_material_table("bad", 2000, 3, wavelength, n, negative, &material, &where), LAC_OUT_OF_RANGE);
  assert_int_equal(where, 1);
  assert_int_equal(lac_material_table("bad", 2000, 3, wavelength, hole, k, &material, &where), LAC_OUT_OF_RANGE);
  assert_int_equal(where, 2);
  assert_int_equal(lac_material_table("bad", -1, 3, wavelength, n, k, &material, &where), LAC_OUT_OF_RANGE);
  assert_int_equal(where, 3);
}

int main(void) {
  cmocka_set_message_output(CM_OUTPUT_TAP);
  const struct CMUnitTest tests[] = {
      cmocka_unit_test(indices_as_evaluated_elsewhere),
      cmocka_unit_test(kramers_and_kronig),
      cmocka_unit_test(cold_ice),
      cmocka_unit_test(silica_by_malitson),
      cmocka_unit_test(ranges),
      cmocka_unit_test(tables_of_users),
  };
  return cmocka_run_group_tests_name("materials", tests, NULL, NULL);
}
