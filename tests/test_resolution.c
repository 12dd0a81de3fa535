/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Resolution: how resolutions scale, the Airy pattern behind the mirror's factors, and the verdicts against the conditions that
   their rows state in words. */
#include <gsl/gsl_sf_bessel.h>
#include <stdbool.h>
#include <stdio.h>
#include <string.h>

#include "check.h"
#include "lacuna/constants.h"
#include "lacuna/resolution.h"
#include "relation.h"

/* Two or three operations. */
static const double few_roundings = 4 * DBL_EPSILON;

static size_t inputs_of(const lac_relation *row) {
  size_t count = 0;
  while (row->from[count] != NULL) count++;
  return count;
}

static double row_value(const lac_relation *row, const double *input) {
  const double *in[LAC_MAX_ARGUMENTS];
  double out;
  for (size_t k = 0; k < inputs_of(row); k++) in[k] = &input[k];
  row->block(1, &out, in);
  return out;
}

static const lac_relation *find_row(const char *gives, const char *by) {
  for (const lac_relation *row = lac_resolution_relations; row->gives != NULL; row++)
    if (strcmp(row->gives, gives) == 0 && strcmp(row->by, by) == 0) return row;
  fail_msg("no row %s/%s", gives, by);
  return NULL;
}

/* The value of the row's input of that name. */
static double input_named(const lac_relation *row, const double *input, const char *name) {
  for (size_t k = 0; k < inputs_of(row); k++)
    if (strcmp(row->from[k], name) == 0) return input[k];
  fail_msg("%s/%s: a condition names %s, which is no input", row->gives, row->by, name);
  return (double)NAN;
}

/* Whether a condition as the row states it, "[a] >= [b]", "[a] <= [b]" or "2 [a] <= [b]", holds. */
static bool condition_holds(const lac_relation *row, const double *input, const char *condition) {
  double factor = strncmp(condition, "2 ", 2) == 0 ? 2 : 1;
  char left[64], comparison[3], right[64], rest;
  if (sscanf(condition + (factor > 1 ? 2 : 0), "[%63[^]]] %2[<>=] [%63[^]]]%c", left, comparison, right, &rest) != 3)
    fail_msg("%s/%s: cannot read the condition %s", row->gives, row->by, condition);
  double a = factor * input_named(row, input, left), b = input_named(row, input, right);
  if (strcmp(comparison, ">=") == 0) return a >= b;
  assert_string_equal(comparison, "<=");
  return a <= b;
}

/* Powers of two as often as not, so that limits are hit exactly. */
static double some_size(uint64_t *seed) {
  double exponent = check_uniform(seed, -2, 2);
  return check_uniform(seed, 0, 1) < 0.5 ? exp2(round(exponent)) : exp2(exponent);
}

/* Each condition must have been the only one that failed, and all must have held, else this test shows nothing. */
static void check_verdict(const lac_relation *row, uint64_t *seed) {
  int yes = 0, failed_alone[LAC_MAX_CONDITIONS] = {0};
  for (int i = 0; i < 4000; i++) {
    double input[LAC_MAX_ARGUMENTS];
    int failed = 0, which = -1;
    for (size_t k = 0; k < inputs_of(row); k++) input[k] = some_size(seed);
    for (int c = 0; c < LAC_MAX_CONDITIONS && row->conditions[c] != NULL; c++)
      if (!condition_holds(row, input, row->conditions[c])) failed++, which = c;
    check_near(failed == 0 ? 1 : 0, row_value(row, input), 0, row->by);
    if (failed == 0) yes++;
    if (failed == 1) failed_alone[which]++;
  }
  assert_true(yes > 0);
  for (int c = 0; c < LAC_MAX_CONDITIONS && row->conditions[c] != NULL; c++) assert_true(failed_alone[c] > 0);
}

static void verdicts_say_what_their_conditions_say(void **state) {
  (void)state;
  uint64_t seed = 20260402;
  int verdicts = 0;
  for (const lac_relation *row = lac_resolution_relations; row->gives != NULL; row++)
    if (row->conditions[0] != NULL) check_verdict(row, &seed), verdicts++;
  assert_int_equal(verdicts, 6);
}

static void undefined_inputs_leave_verdicts_undefined(void **state) {
  (void)state;
  for (const lac_relation *row = lac_resolution_relations; row->gives != NULL; row++) {
    if (row->conditions[0] == NULL) continue;
    for (size_t k = 0; k < inputs_of(row); k++) {
      const double outside[] = {NAN, -1};
      for (size_t o = 0; o < 2; o++) {
        double input[LAC_MAX_ARGUMENTS] = {1, 1, 1, 1, 1, 1, 1, 1};
        input[k] = outside[o];
        check_undefined(row_value(row, input), row->from[k]);
      }
    }
  }
}

/* The more a row checks, the fewer it lets pass: where all conditions hold, so do those of the rows below it. */
static void rows_that_check_less_never_refuse_more(void **state) {
  (void)state;
  uint64_t seed = 3;
  for (int i = 0; i < 4000; i++) {
    double elements = some_size(&seed), required = some_size(&seed), size = some_size(&seed), scale = some_size(&seed);
    double radius = some_size(&seed), field = some_size(&seed);
    double all = lac_resolved_by_array(elements, required, size, scale, radius, field);
    double without_scale = lac_resolved_by_array_scale_unlimited(elements, required, radius, field);
    double without_field = lac_resolved_by_array_field_unlimited(elements, required, size, scale);
    double enough = lac_elements_suffice(elements, required);
    check_near(without_scale * without_field, all, 0, "both halves are the whole");
    assert_true(all <= without_scale && without_scale <= enough && without_field <= enough);
    check_near(without_scale, lac_resolved_by_array(elements, required, size, INFINITY, radius, field), 0, "boundless scale");
    check_near(without_field, lac_resolved_by_array(elements, required, size, scale, radius, INFINITY), 0, "boundless field");
    check_near(enough, lac_resolved_by_mirror(elements, required, radius, 0), 0, "working angle of zero");
  }
}

/* Rows that leave conditions out say so, and stand after those that leave out less. */
static void rows_say_what_they_leave_out(void **state) {
  (void)state;
  const char *instruments[] = {"<structure>_resolved_by_array", "<structure>_resolved_by_mirror"};
  for (size_t i = 0; i < 2; i++) {
    size_t before = LAC_MAX_CONDITIONS + 1, most = 0;
    for (const lac_relation *row = lac_resolution_relations; row->gives != NULL; row++) {
      if (strcmp(row->gives, instruments[i]) != 0) continue;
      size_t count = 0;
      while (count < LAC_MAX_CONDITIONS && row->conditions[count] != NULL) count++;
      if (most == 0) most = count;
      assert_true(count <= before);
      assert_int_equal(row->unchecked == NULL, count == most);
      before = count;
    }
    assert_int_equal(before, 1);
  }
}

/* Common practice, no source: an array's resolution goes with the separation of its telescopes, not with their size. */
static void array_resolution_goes_with_the_baseline_alone(void **state) {
  (void)state;
  uint64_t seed = 4;
  for (int i = 0; i < 1000; i++) {
    double wavelength = check_log_uniform(&seed, 1e-6, 2e-5), baseline = check_log_uniform(&seed, 5, 500);
    double half = lac_array_resolution_half_fringe(wavelength, baseline), whole = lac_array_resolution_fringe(wavelength, baseline);
    check_within(half / 2, lac_array_resolution_half_fringe(wavelength, 2 * baseline), few_roundings, "half fringe, twice the baseline");
    check_within(whole / 2, lac_array_resolution_fringe(wavelength, 2 * baseline), few_roundings, "fringe, twice the baseline");
    check_within(whole, 2 * half, few_roundings, "two halves of a fringe");
    check_within(2 * whole, lac_array_resolution_fringe(2 * wavelength, baseline), few_roundings, "twice the wavelength");
  }
  for (const lac_relation *row = lac_resolution_relations; row->gives != NULL; row++)
    if (strcmp(row->gives, "array_resolution") == 0)
      for (size_t k = 0; k < inputs_of(row); k++) assert_string_not_equal(row->from[k], "element_diameter");
}

/* What is taken unless another is asked for. */
static void preferred_criteria_stand_first(void **state) {
  (void)state;
  assert_true(find_row("array_resolution", "half_fringe") < find_row("array_resolution", "fringe"));
  assert_true(find_row("mirror_resolution", "fwhm") < find_row("mirror_resolution", "rayleigh"));
  assert_true(find_row("array_field", "both_fields") < find_row("array_field", "bandwidth_alone"));
}

/* [2 J1(v)/v]^2, v = pi theta D/lambda (Born & Wolf, Principles of Optics, Sect. 8.5.2): a half at half the width at half maximum,
   zero at the first dark ring. */
static void mirror_factors_belong_to_the_diffraction_pattern(void **state) {
  (void)state;
  const double pi = 3.14159265358979323846;
  gsl_sf_result j1;
  double v = pi * lac_mirror_resolution_fwhm(1, 1) / 2;
  assert_int_equal(gsl_sf_bessel_J1_e(v, &j1), 0);
  check_within(0.5, 4 * j1.val * j1.val / (v * v), 8 * DBL_EPSILON, "half maximum");
  assert_int_equal(gsl_sf_bessel_J1_e(pi * lac_mirror_resolution_rayleigh(1, 1), &j1), 0);
  check_near(0, j1.val, 4 * DBL_EPSILON, "first dark ring");
}

/* The fringes' contrast over a flat band is sin(pi x)/(pi x), x = path difference over coherence length R lambda: at the edge of
   the field the path difference is one coherence length, and the contrast has its first null. */
static void bandwidth_field_ends_at_the_coherence_length(void **state) {
  (void)state;
  uint64_t seed = 6;
  for (int i = 0; i < 1000; i++) {
    double wavelength = check_log_uniform(&seed, 1e-6, 2e-5), baseline = check_log_uniform(&seed, 5, 500);
    double power = check_log_uniform(&seed, 5, 5000), bandwidth = lac_bandwidth(wavelength, power);
    double field = lac_bandwidth_field(wavelength, power, baseline), beam = lac_beam_field(wavelength, baseline / 50);
    check_within(wavelength * wavelength / bandwidth, field * baseline, few_roundings, "coherence length");
    check_within(power, lac_spectral_resolving_power(wavelength, bandwidth), few_roundings, "resolving power and back");
    check_within(power, field / lac_array_resolution_fringe(wavelength, baseline), few_roundings, "as many fringes as resolving power");
    check_near(fmin(field, beam), lac_array_field_both(field, beam), 0, "the smaller field");
    check_near(fmin(field, beam), lac_array_field_both(beam, field), 0, "the smaller field, whichever it is");
  }
}

/* Definition of the parsec: 1 au at 1 pc is 1 arcsec. */
static void lengths_and_angles_are_each_others_inverse(void **state) {
  (void)state;
  uint64_t seed = 7;
  check_within(LAC_ARCSEC, lac_angle_on_sky(LAC_AU, LAC_PC), few_roundings, "1 au at 1 pc");
  for (int i = 0; i < 1000; i++) {
    double length = check_log_uniform(&seed, 0.01, 1000) * LAC_AU, distance = check_log_uniform(&seed, 10, 1000) * LAC_PC;
    check_within(length, lac_length_on_sky(lac_angle_on_sky(length, distance), distance), few_roundings, "to the sky and back");
    check_within(length, lac_spatial_resolution(lac_angle_on_sky(length, distance), distance), few_roundings, "resolution at the star");
  }
  assert_string_equal(lac_angle_relations[0].gives, "<length>_angle");
  assert_string_equal(lac_angle_relations[1].inverse_of, "<length>_angle/definition");
  assert_null(lac_angle_relations[2].gives);
}

/* Common practice, no source: what an 8 m mirror shows in scattered light of discs at 140 pc lies at Neptune-like distances or further;
   a cavity of 0.2 au there is for arrays of some hundred metres. */
static void orders_of_magnitude_are_those_of_the_trade(void **state) {
  (void)state;
  double distance = 140 * LAC_PC, wavelength = 1.65e-6;
  double mirror = lac_mirror_resolution_fwhm(wavelength, 8), array = lac_array_resolution_half_fringe(wavelength, 200);
  double cavity = lac_size_angle_of_diameter(lac_angle_on_sky(0.2 * LAC_AU, distance));
  double gap_at_neptune = lac_size_angle_of_width(lac_angle_on_sky(0.3 * 30 * LAC_AU, distance));
  double gap_at_jupiter = lac_size_angle_of_width(lac_angle_on_sky(0.3 * 5.2 * LAC_AU, distance));
  check_near(1, lac_elements_suffice(lac_resolution_elements(gap_at_neptune, mirror), 1), 0, "a gap at 30 au by an 8 m mirror");
  check_near(0, lac_elements_suffice(lac_resolution_elements(gap_at_jupiter, mirror), 1), 0, "a gap at 5 au by an 8 m mirror");
  check_near(0, lac_elements_suffice(lac_resolution_elements(cavity, mirror), 1), 0, "a cavity of 0.2 au by an 8 m mirror");
  check_near(1, lac_elements_suffice(lac_resolution_elements(cavity, array), 1), 0, "a cavity of 0.2 au by a 200 m array");
}

int main(void) {
  cmocka_set_message_output(CM_OUTPUT_TAP);
  const struct CMUnitTest tests[] = {
      cmocka_unit_test(verdicts_say_what_their_conditions_say),           cmocka_unit_test(undefined_inputs_leave_verdicts_undefined),
      cmocka_unit_test(rows_that_check_less_never_refuse_more),           cmocka_unit_test(rows_say_what_they_leave_out),
      cmocka_unit_test(array_resolution_goes_with_the_baseline_alone),    cmocka_unit_test(preferred_criteria_stand_first),
      cmocka_unit_test(mirror_factors_belong_to_the_diffraction_pattern), cmocka_unit_test(bandwidth_field_ends_at_the_coherence_length),
      cmocka_unit_test(lengths_and_angles_are_each_others_inverse),       cmocka_unit_test(orders_of_magnitude_are_those_of_the_trade),
  };
  return cmocka_run_group_tests_name("resolution", tests, NULL, NULL);
}
