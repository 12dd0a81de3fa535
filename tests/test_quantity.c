/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Values: how axes are ordered and matched, what is evaluated at once, what is refused, and the elementary block functions against C's. */
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

#include "check.h"
#include "lacuna/plan.h"
#include "lacuna/quantity.h"

static lac_axis *axis(const char *name, size_t length) {
  lac_axis *made;
  assert_int_equal(lac_axis_new(name, length, NULL, &made), LAC_OK);
  return made;
}

static lac_value *along(lac_axis *a) {
  lac_value *made;
  double *data = calloc(a->length, sizeof *data);
  assert_int_equal(lac_value_array(1, &a, data, &made), LAC_OK);
  free(data);
  return made;
}

static lac_value *number(double x) {
  lac_value *made;
  assert_int_equal(lac_value_number(x, &made), LAC_OK);
  return made;
}

static void refuses_bad_axes(void **state) {
  (void)state;
  lac_axis *made;
  char name[65];
  memset(name, 'a', 64);
  name[64] = 0;
  assert_int_equal(lac_axis_new("a", 0, NULL, &made), LAC_OUT_OF_RANGE);
  assert_null(made);
  assert_int_equal(lac_axis_new(name, 3, NULL, &made), LAC_OUT_OF_RANGE);
  name[63] = 0;
  assert_int_equal(lac_axis_new(name, 3, NULL, &made), LAC_OK);
  lac_axis_drop(made);
}

static void axes_are_the_same_by_content(void **state) {
  (void)state;
  const double x[] = {1, 2, 3}, y[] = {1, 2, 4};
  lac_axis *a, *b, *c, *d, *e;
  assert_int_equal(lac_axis_new("a", 3, x, &a), LAC_OK);
  assert_int_equal(lac_axis_new("a", 3, x, &b), LAC_OK);
  assert_int_equal(lac_axis_new("a", 3, y, &c), LAC_OK);
  assert_int_equal(lac_axis_new("a", 2, x, &d), LAC_OK);
  assert_int_equal(lac_axis_new("a", 3, NULL, &e), LAC_OK);
  assert_true(lac_axis_same(a, a) && lac_axis_same(a, b));
  assert_false(lac_axis_same(a, c) || lac_axis_same(a, d) || lac_axis_same(a, e) || lac_axis_same(e, a));
  lac_value *left = along(a), *right = along(c), *same = along(b), *made;
  assert_int_equal(lac_value_computed(lac_block_add, 2, (lac_value *[]){left, right}, &made), LAC_AXES_DIFFER);
  assert_null(made);
  assert_int_equal(lac_value_computed(lac_block_add, 2, (lac_value *[]){left, same}, &made), LAC_OK);
  assert_int_equal(lac_value_axes(made), 1);
  lac_value_drop(made), lac_value_drop(left), lac_value_drop(right), lac_value_drop(same);
  lac_axis_drop(a), lac_axis_drop(b), lac_axis_drop(c), lac_axis_drop(d), lac_axis_drop(e);
}

static void the_longest_axis_is_last_and_draw_among_equals(void **state) {
  (void)state;
  lac_axis *x[] = {axis("long", 9), axis("draw", 5), axis("zeta", 5), axis("beta", 5), axis("short", 2)};
  const char *order[] = {"short", "beta", "zeta", "draw", "long"};
  lac_value *sum = number(0);
  for (size_t i = 0; i < 5; i++) {
    lac_value *term = along(x[i]), *next;
    assert_int_equal(lac_value_computed(lac_block_add, 2, (lac_value *[]){sum, term}, &next), LAC_OK);
    lac_value_drop(sum), lac_value_drop(term);
    sum = next;
  }
  assert_int_equal(lac_value_axes(sum), 5);
  for (size_t i = 0; i < 5; i++) assert_string_equal(lac_value_axis(sum, i)->name, order[i]);
  assert_null(lac_value_axis(sum, 5));
  assert_int_equal(lac_value_size(sum), 9 * 5 * 5 * 5 * 2);
  assert_null(lac_value_data(sum));
  check_undefined(lac_value_as_number(sum), "a value with axes is no number");
  lac_value_drop(sum);
  for (size_t i = 0; i < 5; i++) lac_axis_drop(x[i]);
}

static void arrays_are_kept_in_storage_order(void **state) {
  (void)state;
  lac_axis *given[] = {axis("c", 4), axis("a", 2), axis("b", 3)};
  double data[24];
  for (int i = 0; i < 24; i++) data[i] = i;
  lac_value *made;
  assert_int_equal(lac_value_array(3, given, data, &made), LAC_OK);
  const double *stored = lac_value_data(made);
  for (size_t a = 0; a < 2; a++)
    for (size_t b = 0; b < 3; b++)
      for (size_t c = 0; c < 4; c++) assert_true(stored[(a * 3 + b) * 4 + c] == data[(c * 2 + a) * 3 + b]);
  lac_value_drop(made);
  lac_axis *twice[] = {given[2], given[2]};
  assert_int_equal(lac_value_array(2, twice, data, &made), LAC_DUPLICATE);
  for (size_t i = 0; i < 3; i++) lac_axis_drop(given[i]);
}

static int doubled(void *context, size_t n, double *out, const double *const *in) {
  ++*(int *)context;
  for (size_t i = 0; i < n; i++) out[i] = 2 * in[0][i];
  return in[0][0] < 0;
}

static void an_axis_lends_its_coordinates(void **state) {
  (void)state;
  const double coordinates[] = {1, 2, 4};
  lac_axis *axis, *bare;
  lac_value *swept, *none;
  assert_int_equal(lac_axis_new("a", 3, coordinates, &axis), LAC_OK);
  assert_int_equal(lac_axis_new("b", 3, NULL, &bare), LAC_OK);
  assert_int_equal(lac_value_swept(axis, &swept), LAC_OK);
  assert_int_equal(lac_value_swept(bare, &none), LAC_OUT_OF_RANGE);
  assert_null(none);
  lac_axis_drop(axis);
  lac_axis_drop(bare);
  assert_int_equal(lac_value_size(swept), 3);
  assert_memory_equal(lac_value_data(swept), coordinates, sizeof coordinates);
  lac_value_drop(swept);
}

static void single_numbers_are_evaluated_at_once(void **state) {
  (void)state;
  int calls = 0;
  lac_value *three = number(3), *minus = number(-1), *four = number(4), *made;
  assert_int_equal(lac_value_computed(lac_block_multiply, 2, (lac_value *[]){three, four}, &made), LAC_OK);
  assert_true(lac_value_as_number(made) == 12 && lac_value_depth(made) == 0 && lac_value_size(made) == 1);
  lac_value_drop(made);
  assert_int_equal(lac_value_scaled(lac_block_root, 2, (lac_value *[]){three, four}, &made), LAC_OK);
  assert_true(lac_value_as_number(made) == 6);
  lac_value_drop(made);
  assert_int_equal(lac_value_scaled(lac_block_root, 2, (lac_value *[]){minus, four}, &made), LAC_OK);
  check_undefined(lac_value_as_number(made), "a scale that is not > 0");
  lac_value_drop(made);
  assert_int_equal(lac_value_called(doubled, &calls, 1, &three, &made), LAC_OK);
  assert_true(lac_value_as_number(made) == 6 && calls == 1);
  lac_value_drop(made);
  assert_int_equal(lac_value_called(doubled, &calls, 1, &minus, &made), LAC_CALLBACK_FAILED);
  assert_null(made);
  assert_int_equal(lac_value_clipped(three, (lac_range){0, 3, false, true}, &made), LAC_OK);
  assert_true(lac_value_as_number(made) == 3);
  lac_value_drop(made);
  assert_int_equal(lac_value_clipped(three, (lac_range){0, 3, false, false}, &made), LAC_OK);
  check_undefined(lac_value_as_number(made), "a bound that is not included");
  lac_value_drop(made), lac_value_drop(three), lac_value_drop(four), lac_value_drop(minus);
}

static void depth_is_bounded_and_storing_resets_it(void **state) {
  (void)state;
  lac_work work;
  lac_work_start(&work, 1, 1 << 20);
  lac_axis *a = axis("a", 3);
  lac_value *chain = along(a), *one = number(1), *next;
  int stores = 0;
  for (int i = 0; i < 1000; i++) {
    lac_status status = lac_value_computed(lac_block_add, 2, (lac_value *[]){chain, one}, &next);
    if (status == LAC_TOO_MANY) {
      assert_int_equal(lac_value_depth(chain), LAC_MAX_DEPTH);
      assert_int_equal(lac_plan_store(&work, chain), LAC_OK);
      assert_int_equal(lac_value_depth(chain), 0);
      stores++;
      status = lac_value_computed(lac_block_add, 2, (lac_value *[]){chain, one}, &next);
    }
    assert_int_equal(status, LAC_OK);
    lac_value_drop(chain);
    chain = next;
  }
  assert_int_equal(stores, 1000 / LAC_MAX_DEPTH);
  assert_int_equal(lac_plan_store(&work, chain), LAC_OK);
  assert_true(lac_value_data(chain)[2] == 1000);
  lac_value_drop(chain), lac_value_drop(one), lac_axis_drop(a);
  assert_int_equal(work.used, 0);
  lac_work_end(&work);
}

static void bounds_are_kept(void **state) {
  (void)state;
  const char *names[] = {"a", "b", "c", "d", "e", "f", "g"};
  lac_axis *x[LAC_MAX_AXES + 1];
  lac_value *value[LAC_MAX_ARGUMENTS + 1], *made;
  for (size_t i = 0; i <= LAC_MAX_AXES; i++) value[i] = along(x[i] = axis(names[i], 2));
  assert_int_equal(lac_value_computed(lac_block_add, LAC_MAX_AXES + 1, value, &made), LAC_TOO_MANY);
  assert_null(made);
  assert_int_equal(lac_value_computed(lac_block_add, LAC_MAX_AXES, value, &made), LAC_OK);
  lac_value_drop(made);
  for (size_t i = 1; i <= LAC_MAX_AXES; i++) lac_value_drop(value[i]);
  for (size_t i = 1; i <= LAC_MAX_ARGUMENTS; i++) value[i] = value[0];
  assert_int_equal(lac_value_computed(lac_block_add, LAC_MAX_ARGUMENTS + 1, value, &made), LAC_TOO_MANY);
  lac_value_drop(value[0]);
  for (size_t i = 0; i <= LAC_MAX_AXES; i++) lac_axis_drop(x[i]);
}

static void sizes_that_overflow_say_so(void **state) {
  (void)state;
  lac_work work;
  lac_work_start(&work, 1, SIZE_MAX);
  const lac_spread spread = {.kind = LAC_UNIFORM, .a = 0, .b = 1, .key = 1};
  lac_axis *a = axis("draw", (size_t)1 << 40), *b = axis("other", (size_t)1 << 40);
  lac_value *left, *right, *made;
  assert_int_equal(lac_value_drawn(a, &spread, &left), LAC_OK);
  assert_int_equal(lac_value_drawn(b, &spread, &right), LAC_OK);
  assert_int_equal(lac_value_computed(lac_block_add, 2, (lac_value *[]){left, right}, &made), LAC_OK);
  assert_true(lac_value_size(made) == SIZE_MAX);
  assert_int_equal(lac_plan_store(&work, made), LAC_NO_MEMORY);
  work.cap = 1 << 20;
  assert_int_equal(lac_plan_store(&work, made), LAC_OVER_CAP);
  assert_true(work.wanted == SIZE_MAX && work.used == 0);
  assert_int_equal(lac_plan_store(&work, left), LAC_OVER_CAP);
  assert_true(work.wanted == (size_t)8 << 40);
  lac_value_drop(left), lac_value_drop(right), lac_value_drop(made), lac_axis_drop(a), lac_axis_drop(b);
  lac_work_end(&work);
}

static void bad_spreads_are_refused_and_samples_copied(void **state) {
  (void)state;
  lac_work work;
  lac_work_start(&work, 1, 1 << 20);
  lac_axis *draw = axis("draw", 500);
  lac_value *made;
  double samples[] = {4, 5};
  const lac_spread bad = {.kind = LAC_NORMAL, .a = 1, .b = -1};
  const lac_spread good = {.kind = LAC_SAMPLES, .samples = samples, .count = 2, .key = 3};
  assert_int_equal(lac_value_drawn(draw, &bad, &made), LAC_OUT_OF_RANGE);
  assert_null(made);
  assert_int_equal(lac_value_drawn(draw, &good, &made), LAC_OK);
  samples[0] = samples[1] = 99;
  assert_int_equal(lac_plan_store(&work, made), LAC_OK);
  int fours = 0;
  for (size_t i = 0; i < 500; i++) {
    const double x = lac_value_data(made)[i];
    assert_true(x == 4 || x == 5);
    fours += x == 4;
  }
  assert_in_range(fours, 250 - 67, 250 + 67); /* six standard deviations of a binomial count */
  lac_value_drop(made), lac_axis_drop(draw);
  lac_work_end(&work);
}

/* ---- elementary block functions ---- */

static double of_two(lac_block_function *block, double a, double b) {
  const double *in[] = {&a, &b};
  double out;
  block(1, &out, in);
  return out;
}

static void comparisons_and_logic(void **state) {
  (void)state;
  const double edge[] = {-INFINITY, -1, -0.0, 0.0, 0x1p-1074, 1, 2, INFINITY};
  for (size_t i = 0; i < 8; i++)
    for (size_t j = 0; j < 8; j++) {
      const double a = edge[i], b = edge[j];
      assert_true(of_two(lac_block_above, a, b) == (a > b) && of_two(lac_block_below, a, b) == (a < b));
      assert_true(of_two(lac_block_and, a, b) == (a && b) && of_two(lac_block_or, a, b) == (a || b));
      assert_true(of_two(lac_block_minimum, a, b) == fmin(a, b) && of_two(lac_block_maximum, a, b) == fmax(a, b));
      assert_true(of_two(lac_block_not, a, 0) == !a);
    }
  lac_block_function *const two[] = {lac_block_above,   lac_block_below,   lac_block_and, lac_block_or,
                                     lac_block_minimum, lac_block_maximum, lac_block_add, lac_block_multiply};
  for (size_t i = 0; i < sizeof two / sizeof *two; i++)
    for (size_t j = 0; j < 8; j++) {
      check_undefined(of_two(two[i], NAN, edge[j]), "undefined on the left");
      check_undefined(of_two(two[i], edge[j], NAN), "undefined on the right");
    }
  check_undefined(of_two(lac_block_not, NAN, 0), "not undefined");
}

static void agree_with_the_c_library(void **state) {
  (void)state;
  /* glibc's vector functions are documented with errors of at most 4 units (manual, "Errors in Math Functions"); C's with 1. */
  const double tolerance = 5 * DBL_EPSILON;
  uint64_t seed = 11;
  struct {
    lac_block_function *block;
    double (*function)(double);
    double low, high;
  } const one[] = {{lac_block_root, sqrt, 0, 1e9},   {lac_block_exp, exp, -600, 600},  {lac_block_log, log, 2, 1e9},
                   {lac_block_log10, log10, 2, 1e9}, {lac_block_sin, sin, 0.1, 3},     {lac_block_cos, cos, -1.5, 1.5},
                   {lac_block_tan, tan, 0.1, 1.5},   {lac_block_absolute, fabs, -5, 5}};
  for (size_t f = 0; f < sizeof one / sizeof *one; f++) {
    double x[67], out[67];
    for (size_t i = 0; i < 67; i++) x[i] = check_uniform(&seed, one[f].low, one[f].high);
    one[f].block(67, out, (const double *[]){x});
    for (size_t i = 0; i < 67; i++) check_within(one[f].function(x[i]), out[i], tolerance, "elementary function");
  }
  for (int i = 0; i < 1000; i++) {
    const double a = check_log_uniform(&seed, 1e-3, 1e3), b = check_uniform(&seed, -20, 20);
    check_within(pow(a, b), of_two(lac_block_power, a, b), tolerance, "power");
    assert_true(of_two(lac_block_add, a, b) == a + b && of_two(lac_block_subtract, a, b) == a - b);
    assert_true(of_two(lac_block_multiply, a, b) == a * b && of_two(lac_block_divide, a, b) == a / b);
    assert_true(of_two(lac_block_negate, b, 0) == -b);
  }
  check_undefined(of_two(lac_block_log, 0, 0), "logarithm of 0");
  check_undefined(of_two(lac_block_log10, -1, 0), "logarithm of -1");
  check_undefined(of_two(lac_block_root, -1, 0), "root of -1");
}

int main(void) {
  cmocka_set_message_output(CM_OUTPUT_TAP);
  const struct CMUnitTest tests[] = {
      cmocka_unit_test(refuses_bad_axes),
      cmocka_unit_test(axes_are_the_same_by_content),
      cmocka_unit_test(the_longest_axis_is_last_and_draw_among_equals),
      cmocka_unit_test(arrays_are_kept_in_storage_order),
      cmocka_unit_test(an_axis_lends_its_coordinates),
      cmocka_unit_test(single_numbers_are_evaluated_at_once),
      cmocka_unit_test(depth_is_bounded_and_storing_resets_it),
      cmocka_unit_test(bounds_are_kept),
      cmocka_unit_test(sizes_that_overflow_say_so),
      cmocka_unit_test(bad_spreads_are_refused_and_samples_copied),
      cmocka_unit_test(comparisons_and_logic),
      cmocka_unit_test(agree_with_the_c_library),
  };
  return cmocka_run_group_tests(tests, NULL, NULL);
}
