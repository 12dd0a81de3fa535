/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The elementary kernels: last digits against tests/reference/kernel_*.csv (mpmath, 40 digits, by evaluate_kernels.py) and against GSL,
   identities, ends of the range, and the same bits wherever in a block an element stands. */
#include <stdlib.h>
#include <string.h>

#include <gsl/gsl_errno.h>
#include <gsl/gsl_sf_bessel.h>

#include "check_table.h"
#include "lacuna/kernels.h"

typedef void kernel(size_t n, double *out, const double *x);

/* Runs a kernel over a whole table and returns what it gives; sine and cosine through the two below. */
static void sine_of_turns(size_t n, double *out, const double *x) {
  double *cosine = malloc((n + 1) * sizeof *cosine);
  assert_non_null(cosine);
  lac_kernel_sincos2pi(n, out, cosine, x);
  free(cosine);
}

static void cosine_of_turns(size_t n, double *out, const double *x) {
  double *sine = malloc((n + 1) * sizeof *sine);
  assert_non_null(sine);
  lac_kernel_sincos2pi(n, sine, out, x);
  free(sine);
}

/* A size of 0 measures the error by the result itself. */
static void against_table(const char *path, int column, kernel *function, double units, double size, const char *label) {
  check_table *table = check_read_table(path);
  double x[TABLE_ROWS], got[TABLE_ROWS];
  for (size_t i = 0; i < table->rows; i++) x[i] = (double)table->cell[i][0];
  function(table->rows, got, x);
  for (size_t i = 0; i < table->rows; i++) check_units(table->cell[i][column], got[i], units, size, label);
  free(table);
}

static void last_digits(void **state) {
  (void)state;
  against_table("tests/reference/kernel_exp.csv", 1, lac_kernel_exp, 2, 0, "exp");
  against_table("tests/reference/kernel_expm1.csv", 1, lac_kernel_expm1, 3, 0, "expm1");
  against_table("tests/reference/kernel_log.csv", 1, lac_kernel_log, 2, 0, "log");
  against_table("tests/reference/kernel_sincos2pi.csv", 1, sine_of_turns, 2, 0, "sine");
  against_table("tests/reference/kernel_sincos2pi.csv", 2, cosine_of_turns, 2, 0, "cosine");
  against_table("tests/reference/kernel_j0.csv", 1, lac_kernel_j0, 4, 1, "J0");
}

/* Beside the first two zeros J0 is as good as its own digits. */
static void j0_near_first_zeros(void **state) {
  (void)state;
  check_table *table = check_read_table("tests/reference/kernel_j0.csv");
  int found = 0;
  for (size_t i = 0; i < table->rows; i++) {
    double x = (double)table->cell[i][0];
    if (!(fabsl(table->cell[i][1]) < 1e-12L && x < 8)) continue;
    check_units(table->cell[i][1], lac_j0(x), 4, 0, "J0 near a zero");
    found++;
  }
  free(table);
  assert_true(found >= 6);
}

/* GSL states the error of its own result, a few units of 2^-52 of the amplitude. */
static void j0_against_gsl(void **state) {
  (void)state;
  uint64_t seed = 1;
  for (int i = 0; i < 20000; i++) {
    double x = i % 2 ? check_uniform(&seed, 0, 50) : check_log_uniform(&seed, 1e-3, 1e5);
    gsl_sf_result want;
    assert_int_equal(gsl_sf_bessel_J0_e(x, &want), GSL_SUCCESS);
    check_near(want.val, lac_j0(x), 4 * 0x1p-53 + want.err, "J0 against GSL");
  }
}

/* What the library's functions, good to one unit, give at seeded arguments. */
static void against_the_library(void **state) {
  (void)state;
  uint64_t seed = 2;
  for (int i = 0; i < 20000; i++) {
    double x = check_uniform(&seed, -700, 709), small = check_uniform(&seed, -1, 1), positive = exp(check_uniform(&seed, -700, 700)), y;
    lac_kernel_exp(1, &y, &x);
    check_within(exp(x), y, 4 * 0x1p-53, "exp");
    lac_kernel_expm1(1, &y, &small);
    check_within(expm1(small), y, 5 * 0x1p-53, "expm1");
    lac_kernel_log(1, &y, &positive);
    check_within(log(positive), y, 4 * 0x1p-53, "log");
  }
}

static void identities(void **state) {
  (void)state;
  uint64_t seed = 3;
  for (int i = 0; i < 5000; i++) {
    double x = check_uniform(&seed, -1, 1), s, c, minus = -x, ms, mc, e, l;
    lac_kernel_sincos2pi(1, &s, &c, &x);
    lac_kernel_sincos2pi(1, &ms, &mc, &minus);
    check_within(1, s * s + c * c, 8 * 0x1p-53, "sin^2 + cos^2");
    assert_true(ms == -s && mc == c);
    assert_true(lac_j0(50 * minus) == lac_j0(50 * x));
    x *= 300;
    lac_kernel_exp(1, &e, &x);
    lac_kernel_log(1, &l, &e);
    check_near(x, l, 2 * 0x1p-53 * (1 + fabs(x)), "log of exp");
  }
}

static double value(kernel *function, double x) {
  double y;
  function(1, &y, &x);
  return y;
}

static void exact_values(void **state) {
  (void)state;
  assert_true(value(lac_kernel_exp, 0) == 1);
  assert_true(value(lac_kernel_expm1, 0) == 0);
  assert_true(signbit(value(lac_kernel_expm1, -0.0)));
  assert_true(value(lac_kernel_expm1, 5e-324) == 5e-324);
  assert_true(value(lac_kernel_log, 1) == 0);
  assert_true(lac_j0(0) == 1);
  for (int quarter = -4; quarter <= 4; quarter++) { /* whole quarters of a turn are exact */
    static const double sines[4] = {0, 1, 0, -1};
    assert_true(value(sine_of_turns, quarter / 4.0) == sines[quarter & 3]);
    assert_true(value(cosine_of_turns, quarter / 4.0) == sines[(quarter + 1) & 3]);
  }
}

static void ends_of_the_range(void **state) {
  (void)state;
  double infinity = (double)INFINITY, nan = (double)NAN;
  assert_true(value(lac_kernel_exp, infinity) == infinity && value(lac_kernel_exp, 709.79) == infinity);
  assert_true(value(lac_kernel_exp, -infinity) == 0 && value(lac_kernel_exp, -746) == 0);
  check_near(exp(-740), value(lac_kernel_exp, -740), 5e-324, "exp, subnormal");
  assert_true(value(lac_kernel_expm1, infinity) == infinity && value(lac_kernel_expm1, 709.79) == infinity);
  assert_true(value(lac_kernel_expm1, -infinity) == -1);
  assert_true(value(lac_kernel_log, infinity) == infinity);
  check_undefined(value(lac_kernel_log, 0), "log 0");
  check_undefined(value(lac_kernel_log, -1), "log -1");
  check_undefined(value(sine_of_turns, 1.0000000000000002), "more than a turn");
  check_undefined(value(cosine_of_turns, -infinity), "infinitely many turns");
  check_undefined(lac_j0(1e8), "J0 beyond its range");
  check_undefined(lac_j0(-infinity), "J0 beyond its range");
  kernel *const all[] = {lac_kernel_exp, lac_kernel_expm1, lac_kernel_log, lac_kernel_j0, sine_of_turns, cosine_of_turns};
  for (size_t k = 0; k < sizeof all / sizeof all[0]; k++) check_undefined(value(all[k], nan), "NaN");
}

/* One element alone gives the same bits as inside blocks of any length, in place too: vectors, their tails and scalars do the same. */
static void same_bits_anywhere(void **state) {
  (void)state;
  enum { N = 1000 };
  kernel *const all[] = {lac_kernel_exp, lac_kernel_expm1, lac_kernel_log, lac_kernel_j0, sine_of_turns, cosine_of_turns};
  static const double lows[] = {-745, -40, 1e-3, -30, -1, -1}, highs[] = {709, 709, 1e3, 30, 1, 1};
  uint64_t seed = 4;
  for (size_t k = 0; k < sizeof all / sizeof all[0]; k++) {
    double x[N], whole[N], piece[N];
    for (int i = 0; i < N; i++) x[i] = check_uniform(&seed, lows[k], highs[k]);
    all[k](N, whole, x);
    for (size_t length = 1; length < 70; length++) {
      size_t start = (size_t)check_uniform(&seed, 0, N - 70);
      memcpy(piece, x + start, length * sizeof *x);
      all[k](length, piece, piece);
      assert_memory_equal(piece, whole + start, length * sizeof *piece);
    }
  }
}

/* A hash of results (FNV-1a over their bits) that builds for SSE2, AVX2 and AVX-512 gave alike: a processor with another breaks the
 * promise. */
#define KERNEL_BITS UINT64_C(0x9d546c017db5bb64)

static void same_bits_on_every_processor(void **state) {
  (void)state;
  kernel *const all[] = {lac_kernel_exp, lac_kernel_expm1, lac_kernel_log, lac_kernel_j0, sine_of_turns, cosine_of_turns};
  uint64_t hash = UINT64_C(0xcbf29ce484222325);
  for (size_t k = 0; k < sizeof all / sizeof all[0]; k++)
    for (int i = 1; i <= 4096; i++) {
      double x = i / 4096.0, y = value(all[k], k == 3 ? 40 * x : x);
      uint64_t bits;
      memcpy(&bits, &y, sizeof bits);
      hash = (hash ^ bits) * UINT64_C(0x100000001b3);
    }
  assert_int_equal(hash, KERNEL_BITS);
}

int main(void) {
  cmocka_set_message_output(CM_OUTPUT_TAP);
  gsl_set_error_handler_off();
  const struct CMUnitTest tests[] = {
      cmocka_unit_test(last_digits),         cmocka_unit_test(j0_near_first_zeros), cmocka_unit_test(j0_against_gsl),
      cmocka_unit_test(against_the_library), cmocka_unit_test(identities),          cmocka_unit_test(exact_values),
      cmocka_unit_test(ends_of_the_range),   cmocka_unit_test(same_bits_anywhere),  cmocka_unit_test(same_bits_on_every_processor),
  };
  return cmocka_run_group_tests_name("kernels", tests, NULL, NULL);
}
