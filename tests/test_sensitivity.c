/* SPDX-License-Identifier: GPL-3.0-or-later */
/* First-order variance shares: of sums and products against closed forms, by distribution and by rank; draws that are missing, few or all
   the same; interruption. For a sum of independent terms the share of each is its variance over the sum's (Sobol' 1993,
   Mathematical Modelling and Computational Experiment 1, 407, from memory). */
#include <math.h>
#include <stdlib.h>

#include "check.h"
#include "lacuna/draws.h"
#include "lacuna/sensitivity.h"

enum { N = 10000 };
static double a[N], b[N], y[N];
static lac_work work;

static int set_up(void **state) {
  (void)state;
  lac_work_start(&work, 1, (size_t)1 << 30);
  return 0;
}

static int tear_down(void **state) {
  (void)state;
  lac_work_end(&work);
  return 0;
}

/* Standard normal and uniform draws. */
static void draw(uint64_t seed) {
  const lac_spread normal = {.kind = LAC_NORMAL, .a = 0, .b = 1, .key = lac_draws_key(seed, NULL, "a")};
  const lac_spread uniform = {.kind = LAC_UNIFORM, .a = 0, .b = 1, .key = lac_draws_key(seed, NULL, "b")};
  lac_draws(&normal, 0, N, a);
  lac_draws(&uniform, 0, N, b);
}

static lac_status shares_of(size_t n, lac_distribution of_a, lac_distribution of_b, lac_share *shares, size_t *defined) {
  const lac_share_input inputs[] = {{a, of_a}, {b, of_b}};
  return lac_first_order_shares(&work, n, y, 2, inputs, shares, defined);
}

/* y = a + 6 b: variances 1 and 36 / 12. */
static void draw_sum(uint64_t seed) {
  draw(seed);
  for (size_t i = 0; i < N; i++) y[i] = a[i] + 6 * b[i];
}

static void a_sum_of_known_distributions_is_exact(void **state) {
  (void)state;
  for (uint64_t seed = 0; seed < 10; seed++) {
    draw_sum(seed);
    lac_share shares[2];
    size_t defined;
    assert_int_equal(shares_of(N, LAC_STANDARD_NORMAL, LAC_STANDARD_UNIFORM, shares, &defined), LAC_OK);
    assert_int_equal(defined, N);
    check_within(0.25, shares[0].share, 1e-9, "normal");
    check_within(0.75, shares[1].share, 1e-9, "uniform");
    check_near(0, shares[0].error, 1e-9, "nothing scatters");
  }
}

static void by_ranks_the_error_covers_what_the_sample_lacks(void **state) {
  (void)state;
  for (uint64_t seed = 0; seed < 10; seed++) {
    draw_sum(seed);
    lac_share shares[2];
    size_t defined;
    assert_int_equal(shares_of(N, LAC_ANY_DISTRIBUTION, LAC_ANY_DISTRIBUTION, shares, &defined), LAC_OK);
    assert_true(fabs(shares[0].share - 0.25) < 0.02);
    assert_true(fabs(shares[0].share - 0.25) < 4.5 * shares[0].error);
    assert_true(shares[0].error > 0.001 && shares[0].error < 0.01);
  }
}

/* y = (1 + a) (1 + b): E[y | a] = 1.5 (1 + a), E[y | b] = 1 + b; variances 2.25, 1/12, and 1/12 of both together. */
static void a_product(void **state) {
  (void)state;
  draw(3);
  for (size_t i = 0; i < N; i++) y[i] = (1 + a[i]) * (1 + b[i]);
  lac_share shares[2];
  size_t defined;
  assert_int_equal(shares_of(N, LAC_STANDARD_NORMAL, LAC_STANDARD_UNIFORM, shares, &defined), LAC_OK);
  check_within(2.25 / (2.25 + 1.0 / 6), shares[0].share, 1e-9, "normal");
  check_within(1.0 / 12 / (2.25 + 1.0 / 6), shares[1].share, 1e-9, "uniform");
}

/* y = 1 where b > 0.3: all is b's, though no polynomial follows a step. */
static void a_step(void **state) {
  (void)state;
  draw(4);
  for (size_t i = 0; i < N; i++) y[i] = b[i] > 0.3;
  lac_share shares[2];
  size_t defined;
  assert_int_equal(shares_of(N, LAC_STANDARD_NORMAL, LAC_STANDARD_UNIFORM, shares, &defined), LAC_OK);
  assert_true(fabs(shares[1].share - 1) < 0.02);
  assert_true(fabs(shares[0].share) < 0.02);
}

static void undefined_draws_are_left_out(void **state) {
  (void)state;
  draw(5);
  for (size_t i = 0; i < N; i++) y[i] = a[i] + 6 * b[i];
  for (size_t i = 0; i < N; i += 4) y[i] = (double)NAN; /* whatever a and b are: the shares stay */
  for (size_t i = 1; i < N; i += 100) a[i] = (double)INFINITY;
  lac_share shares[2];
  size_t defined;
  assert_int_equal(shares_of(N, LAC_STANDARD_NORMAL, LAC_STANDARD_UNIFORM, shares, &defined), LAC_OK);
  assert_int_equal(defined, N - N / 4 - N / 100);
  assert_true(fabs(shares[0].share - 0.25) < 0.02);
  assert_true(fabs(shares[1].share - 0.75) < 0.02);
}

/* Shares have no unit: they don't hang on y's, not even in their last bit where the factor is a power of two. */
static void any_unit_will_do(void **state) {
  (void)state;
  static const int exponents[] = {0, 1, -600, 600, -900, 900};
  lac_share shares[sizeof exponents / sizeof *exponents][2];
  for (size_t k = 0; k < sizeof exponents / sizeof *exponents; k++) {
    size_t defined;
    draw(8);
    for (size_t i = 0; i < N; i++) y[i] = ldexp(a[i] * a[i] + b[i] + a[i] * b[i], exponents[k]);
    assert_int_equal(shares_of(N, LAC_STANDARD_NORMAL, LAC_STANDARD_UNIFORM, shares[k], &defined), LAC_OK);
    assert_true(!isnan(shares[k][0].share));
    assert_memory_equal(shares[k], shares[0], sizeof shares[0]);
  }
}

static void few_draws_ties_and_constants(void **state) {
  (void)state;
  draw(6);
  for (size_t i = 0; i < N; i++) y[i] = a[i] + 6 * b[i];
  lac_share shares[2];
  size_t defined;
  assert_int_equal(shares_of(19, LAC_STANDARD_NORMAL, LAC_STANDARD_UNIFORM, shares, &defined), LAC_TOO_MANY);
  assert_int_equal(shares_of(0, LAC_STANDARD_NORMAL, LAC_STANDARD_UNIFORM, shares, &defined), LAC_TOO_MANY);
  assert_int_equal(shares_of(20, LAC_STANDARD_NORMAL, LAC_STANDARD_UNIFORM, shares, &defined), LAC_OK);
  check_within(0.25, shares[0].share, 1e-9, "of 20 draws, linear");
  for (size_t i = 0; i < N; i++) b[i] = (double)(i % 2), y[i] = a[i] + 2 * b[i]; /* two values, as ranks: variance 1 */
  assert_int_equal(shares_of(N, LAC_STANDARD_NORMAL, LAC_ANY_DISTRIBUTION, shares, &defined), LAC_OK);
  assert_true(fabs(shares[1].share - 0.5) < 0.02);
  for (size_t i = 0; i < N; i++) y[i] = 3;
  assert_int_equal(shares_of(N, LAC_STANDARD_NORMAL, LAC_ANY_DISTRIBUTION, shares, &defined), LAC_OK);
  assert_true(isnan(shares[0].share) && isnan(shares[1].share));
}

static void it_can_be_stopped(void **state) {
  (void)state;
  draw(7);
  for (size_t i = 0; i < N; i++) y[i] = a[i];
  lac_share shares[2];
  size_t defined;
  work.stop = 1;
  assert_int_equal(shares_of(N, LAC_STANDARD_NORMAL, LAC_STANDARD_UNIFORM, shares, &defined), LAC_INTERRUPTED);
  work.stop = 0;
}

int main(void) {
  cmocka_set_message_output(CM_OUTPUT_TAP);
  const struct CMUnitTest tests[] = {
      cmocka_unit_test(a_sum_of_known_distributions_is_exact),
      cmocka_unit_test(by_ranks_the_error_covers_what_the_sample_lacks),
      cmocka_unit_test(a_product),
      cmocka_unit_test(a_step),
      cmocka_unit_test(undefined_draws_are_left_out),
      cmocka_unit_test(any_unit_will_do),
      cmocka_unit_test(few_draws_ties_and_constants),
      cmocka_unit_test(it_can_be_stopped),
  };
  return cmocka_run_group_tests(tests, set_up, tear_down);
}
