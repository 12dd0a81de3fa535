/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The random draws: the generator against Random123 (Salmon et al. 2011) and its published answers, the draws against the formulas they are
   defined by, their statistics, and that a draw depends on its key and number alone. Seeds are fixed, so that a test passes always or
   never. */
#include <stdlib.h>
#include <string.h>

#include <Random123/philox.h>
#include <gsl/gsl_cdf.h>

#include "check.h"
#include "lacuna/draws.h"

enum { MANY = 200000 };

/* What a Kolmogorov-Smirnov distance, times the root of the number, passes once in a thousand: Smirnov 1948, Ann. Math. Stat. 19, 279. */
#define SMIRNOV_ONE_IN_THOUSAND 1.95
/* How far a normal deviate strays once in a thousand, both sides. */
#define THREE_POINT_THREE_SIGMA 3.29

/* The answers printed with Random123 (its known-answer tests, philox4x32, 10 rounds; from memory, and confirmed by its header below). */
static void published_answers(void **state) {
  (void)state;
  static const uint32_t cases[3][10] = {
      {0, 0, 0, 0, 0, 0, 0x6627e8d5, 0xe169c58d, 0xbc57ac4c, 0x9b00dbd8},
      {~0u, ~0u, ~0u, ~0u, ~0u, ~0u, 0x408f276d, 0x41c83b0e, 0xa20bc7c6, 0x6d5451fd},
      {0x243f6a88, 0x85a308d3, 0x13198a2e, 0x03707344, 0xa4093822, 0x299f31d0, 0xd16cfe09, 0x94fdcceb, 0x5001e420, 0x24126ea1},
  };
  for (int i = 0; i < 3; i++) {
    uint32_t got[4];
    lac_philox(cases[i], cases[i] + 4, got);
    assert_memory_equal(got, cases[i] + 6, sizeof got);
  }
}

static philox4x32_ctr_t oracle(uint64_t counter, uint64_t key) {
  philox4x32_ctr_t words = {{(uint32_t)counter, (uint32_t)(counter >> 32), 0, 0}};
  philox4x32_key_t keys = {{(uint32_t)key, (uint32_t)(key >> 32)}};
  return philox4x32(words, keys);
}

static uint64_t any_bits(uint64_t *seed) {
  uint64_t high = (uint64_t)check_uniform(seed, 0, 0x1p32);
  return high << 32 | (uint64_t)check_uniform(seed, 0, 0x1p32);
}

static void against_random123(void **state) {
  (void)state;
  uint64_t seed = 1;
  for (int i = 0; i < 1000; i++) {
    uint64_t counter = any_bits(&seed), key = any_bits(&seed);
    uint32_t in[4] = {(uint32_t)counter, (uint32_t)(counter >> 32), 0, 0}, keys[2] = {(uint32_t)key, (uint32_t)(key >> 32)}, got[4];
    lac_philox(in, keys, got);
    philox4x32_ctr_t want = oracle(counter, key);
    assert_memory_equal(got, want.v, sizeof got);
  }
}

/* The uniform of two words: 52 bits and a half. */
static double uniform_of(uint32_t low, uint32_t high) { return ((double)((uint64_t)high << 20 | low >> 12) + 0.5) * 0x1p-52; }

/* Uniforms and normals by their definition from Random123's words; counters near 2^32 and 2^63 too, where carries happen. */
static void by_definition(void **state) {
  (void)state;
  static const uint64_t firsts[] = {0, 1, 2 * UINT64_C(0xffffff80) + 1, UINT64_MAX - 2000};
  enum { N = 1500 };
  double uniform[N], normal[N];
  for (size_t f = 0; f < sizeof firsts / sizeof firsts[0]; f++) {
    uint64_t key = lac_draws_key(f, "an invented star", "distance");
    lac_spread u = {.kind = LAC_UNIFORM, .a = 0, .b = 1, .key = key}, z = {.kind = LAC_NORMAL, .a = 0, .b = 1, .key = key};
    lac_draws(&u, firsts[f], N, uniform);
    lac_draws(&z, firsts[f], N, normal);
    for (size_t i = 0; i < N; i++) {
      uint64_t number = firsts[f] + i;
      philox4x32_ctr_t w = oracle(number >> 1, key);
      double first = uniform_of(w.v[0], w.v[1]), second = uniform_of(w.v[2], w.v[3]);
      assert_true(uniform[i] == (number & 1 ? second : first));
      double radius = sqrt(-2 * log(first)), turn = 2 * M_PI * second;
      check_near(radius * (number & 1 ? sin(turn) : cos(turn)), normal[i], 16 * DBL_EPSILON, "Box-Muller"); /* 2 pi is rounded here */
    }
  }
}

static const double samples[] = {3, 1, 4, 1.5, 9, 2.6, 5};
static const lac_spread spreads[] = {
    {.kind = LAC_NORMAL, .a = 156, .b = 3},        {.kind = LAC_LOPSIDED, .a = 156, .b = 4, .c = 2},
    {.kind = LAC_UNIFORM, .a = -1, .b = 3},        {.kind = LAC_LOG_UNIFORM, .a = 1e-4, .b = 1e-2},
    {.kind = LAC_LOG_NORMAL, .a = 0.01, .b = 0.5}, {.kind = LAC_SAMPLES, .samples = samples, .count = 7},
};
enum { KINDS = sizeof spreads / sizeof spreads[0] };

static lac_spread keyed(int kind, uint64_t seed) {
  lac_spread spread = spreads[kind];
  spread.key = lac_draws_key(seed, NULL, "given");
  return spread;
}

/* The i-th draw is the same however the draws are asked for. */
static void any_piece_alike(void **state) {
  (void)state;
  enum { N = 5000 };
  static double whole[N], piece[N];
  uint64_t seed = 2;
  for (int kind = 0; kind < KINDS; kind++) {
    lac_spread spread = keyed(kind, 7);
    lac_draws(&spread, 0, N, whole);
    for (int trial = 0; trial < 60; trial++) {
      size_t first = (size_t)check_uniform(&seed, 0, N), n = (size_t)check_uniform(&seed, 0, (double)(N - first) + 1);
      if (trial % 3 == 0) n = n < 5 ? n : 5;
      lac_draws(&spread, first, n, piece);
      assert_memory_equal(piece, whole + first, n * sizeof *piece);
    }
  }
}

static int ascending(const void *a, const void *b) {
  double x = *(const double *)a, y = *(const double *)b;
  return (x > y) - (x < y);
}

/* The greatest distance between the draws' distribution and the one they should have. */
static double smirnov_distance(size_t n, double *draws, double (*cumulative)(const lac_spread *, double), const lac_spread *spread) {
  double greatest = 0;
  qsort(draws, n, sizeof *draws, ascending);
  for (size_t i = 0; i < n; i++) {
    double want = cumulative(spread, draws[i]);
    greatest = fmax(greatest, fmax(want - (double)i / (double)n, (double)(i + 1) / (double)n - want));
  }
  return greatest;
}

static double cumulative(const lac_spread *s, double x) {
  switch (s->kind) {
  case LAC_NORMAL: return gsl_cdf_gaussian_P(x - s->a, s->b);
  case LAC_LOPSIDED: return gsl_cdf_gaussian_P(x - s->a, x > s->a ? s->b : s->c);
  case LAC_UNIFORM: return (x - s->a) / (s->b - s->a);
  case LAC_LOG_UNIFORM: return log(x / s->a) / log(s->b / s->a);
  case LAC_LOG_NORMAL: return gsl_cdf_gaussian_P(log(x / s->a), s->b);
  default: return (double)NAN;
  }
}

static void distributions(void **state) {
  (void)state;
  double *draws = malloc(MANY * sizeof *draws);
  assert_non_null(draws);
  for (int kind = 0; kind < KINDS; kind++) {
    if (spreads[kind].kind == LAC_SAMPLES) continue;
    for (uint64_t seed = 1; seed <= 3; seed++) {
      lac_spread spread = keyed(kind, seed);
      lac_draws(&spread, 0, MANY, draws);
      double distance = smirnov_distance(MANY, draws, cumulative, &spread);
      check_near(0, distance * sqrt(MANY), SMIRNOV_ONE_IN_THOUSAND, "Kolmogorov-Smirnov distance");
    }
  }
  free(draws);
}

/* Mean, variance, skewness and kurtosis of normals, each within what chance allows once in a thousand. */
static void moments(void **state) {
  (void)state;
  double *draws = malloc(MANY * sizeof *draws), sum[5] = {0}, n = MANY;
  assert_non_null(draws);
  lac_spread spread = {.kind = LAC_NORMAL, .a = 0, .b = 1, .key = lac_draws_key(3, "", "moments")};
  lac_draws(&spread, 0, MANY, draws);
  for (int i = 0; i < MANY; i++)
    for (int power = 1; power <= 4; power++) sum[power] += pow(draws[i], power);
  check_near(0, sum[1] / n, THREE_POINT_THREE_SIGMA * sqrt(1 / n), "mean");
  check_near(1, sum[2] / n, THREE_POINT_THREE_SIGMA * sqrt(2 / n), "variance");
  check_near(0, sum[3] / n, THREE_POINT_THREE_SIGMA * sqrt(15 / n), "third moment");
  check_near(3, sum[4] / n, THREE_POINT_THREE_SIGMA * sqrt(96 / n), "fourth moment");
  free(draws);
}

static void lopsided_halves(void **state) {
  (void)state;
  double *draws = malloc(MANY * sizeof *draws), above = 0;
  assert_non_null(draws);
  lac_spread spread = keyed(1, 5);
  lac_draws(&spread, 0, MANY, draws);
  for (int i = 0; i < MANY; i++) above += draws[i] > spread.a;
  check_near(MANY / 2.0, above, THREE_POINT_THREE_SIGMA * sqrt(MANY) / 2, "lopsided draws above the median");
  free(draws);
}

static void samples_alike(void **state) {
  (void)state;
  double *draws = malloc(MANY * sizeof *draws), chi_squared = 0;
  assert_non_null(draws);
  lac_spread spread = keyed(5, 6);
  lac_draws(&spread, 0, MANY, draws);
  int found = 0;
  for (int s = 0; s < 7; s++) {
    int count = 0;
    for (int i = 0; i < MANY; i++) count += draws[i] == samples[s];
    chi_squared += pow(count - MANY / 7.0, 2) / (MANY / 7.0);
    found += count;
  }
  assert_int_equal(found, MANY);
  check_near(0, chi_squared, gsl_cdf_chisq_Pinv(0.999, 6), "chi squared of seven samples");
  free(draws);
}

/* Draws of two keys, and neighbouring draws of one key, have nothing to do with each other. */
static void no_correlation(void **state) {
  (void)state;
  double *x = malloc(MANY * sizeof *x), *y = malloc(MANY * sizeof *y), across = 0, along = 0;
  assert_non_null(x);
  assert_non_null(y);
  lac_spread one = {.kind = LAC_NORMAL, .a = 0, .b = 1, .key = lac_draws_key(1, "a", "distance")}, other = one;
  other.key = lac_draws_key(1, "b", "distance");
  lac_draws(&one, 0, MANY, x);
  lac_draws(&other, 0, MANY, y);
  for (int i = 0; i < MANY; i++) across += x[i] * y[i] / MANY;
  for (int i = 1; i < MANY; i++) along += x[i] * x[i - 1] / MANY;
  check_near(0, across, THREE_POINT_THREE_SIGMA / sqrt(MANY), "correlation between keys");
  check_near(0, along, THREE_POINT_THREE_SIGMA / sqrt(MANY), "correlation of neighbours");
  free(x);
  free(y);
}

static void within_bounds(void **state) {
  (void)state;
  static const double bounds[][2] = {{-1e308, 1e308}, {0.1, 0.1}, {1, 1.0000000000000002}, {1e-300, 1e300}, {-5e-324, 5e-324}};
  double draws[3000];
  for (size_t b = 0; b < sizeof bounds / sizeof bounds[0]; b++)
    for (int logarithmic = 0; logarithmic <= (bounds[b][0] > 0); logarithmic++) {
      lac_spread spread = {.kind = logarithmic ? LAC_LOG_UNIFORM : LAC_UNIFORM, .a = bounds[b][0], .b = bounds[b][1], .key = b};
      lac_draws(&spread, 0, 3000, draws);
      for (int i = 0; i < 3000; i++) assert_true(draws[i] >= spread.a && draws[i] <= spread.b);
    }
  lac_spread sure = {.kind = LAC_NORMAL, .a = 1.7, .b = 0};
  lac_draws(&sure, 0, 3000, draws);
  for (int i = 0; i < 3000; i++) assert_true(draws[i] == 1.7);
}

static void medians(void **state) {
  (void)state;
  static const double even[] = {4, -2, 1, 8};
  lac_spread s = {.kind = LAC_SAMPLES, .samples = even, .count = 4}, same = {.kind = LAC_LOG_UNIFORM, .a = 0.1, .b = 0.1},
             wide = {.kind = LAC_LOG_UNIFORM, .a = 1e-300, .b = 1e300};
  assert_true(lac_spread_median(&spreads[0]) == 156);
  assert_true(lac_spread_median(&spreads[1]) == 156);
  assert_true(lac_spread_median(&spreads[2]) == 1);
  check_within(1e-3, lac_spread_median(&spreads[3]), 2 * DBL_EPSILON, "median of a log-uniform spread");
  assert_true(lac_spread_median(&spreads[4]) == 0.01);
  assert_true(lac_spread_median(&spreads[5]) == 3);
  assert_true(lac_spread_median(&s) == 2.5);
  assert_true(lac_spread_median(&same) == 0.1);
  check_within(1, lac_spread_median(&wide), 4 * DBL_EPSILON, "median of a wide log-uniform spread");
}

static void refusals(void **state) {
  (void)state;
  double nan = (double)NAN, infinity = (double)INFINITY, holed[] = {1, nan}, draws[3];
  const lac_spread bad[] = {
      {.kind = LAC_NORMAL, .a = 1, .b = -1},
      {.kind = LAC_NORMAL, .a = nan, .b = 1},
      {.kind = LAC_NORMAL, .a = 1, .b = infinity},
      {.kind = LAC_LOPSIDED, .a = 1, .b = 1, .c = -1},
      {.kind = LAC_LOPSIDED, .a = 1, .b = 1, .c = nan},
      {.kind = LAC_UNIFORM, .a = 2, .b = 1},
      {.kind = LAC_UNIFORM, .a = -infinity, .b = 1},
      {.kind = LAC_LOG_UNIFORM, .a = 0, .b = 1},
      {.kind = LAC_LOG_UNIFORM, .a = 2, .b = 1},
      {.kind = LAC_LOG_NORMAL, .a = 0, .b = 1},
      {.kind = LAC_LOG_NORMAL, .a = 1, .b = -0.1},
      {.kind = LAC_SAMPLES, .samples = holed, .count = 0},
      {.kind = LAC_SAMPLES, .count = 2},
  };
  for (size_t i = 0; i < sizeof bad / sizeof bad[0]; i++) {
    assert_int_equal(lac_spread_check(&bad[i]), LAC_OUT_OF_RANGE);
    check_undefined(lac_spread_median(&bad[i]), "median of a bad spread");
    lac_draws(&bad[i], 0, 3, draws);
    for (int k = 0; k < 3; k++) check_undefined(draws[k], "draw of a bad spread");
  }
  lac_spread with_hole = {.kind = LAC_SAMPLES, .samples = holed, .count = 2};
  assert_int_equal(lac_spread_check(&with_hole), LAC_OUT_OF_RANGE);
  for (int kind = 0; kind < KINDS; kind++) assert_int_equal(lac_spread_check(&spreads[kind]), LAC_OK);
}

static void keys(void **state) {
  (void)state;
  assert_true(lac_draws_key(1, NULL, "distance") == lac_draws_key(1, "", "distance"));
  assert_true(lac_draws_key(1, "ab", "c") != lac_draws_key(1, "a", "bc"));
  assert_true(lac_draws_key(1, "a", "b") != lac_draws_key(1, "b", "a"));
  assert_true(lac_draws_key(1, "a", "b") != lac_draws_key(2, "a", "b"));
  assert_true(lac_draws_key(0, "", "") != lac_draws_key(UINT64_C(1) << 32, "", ""));
}

/* A hash of draws (FNV-1a over their bits) that builds for SSE2, AVX2 and AVX-512 gave alike: a processor with another breaks the promise.
 */
#define DRAW_BITS UINT64_C(0x89a529c209c3dc41)

static void same_bits_on_every_processor(void **state) {
  (void)state;
  uint64_t hash = UINT64_C(0xcbf29ce484222325), bits;
  double draws[4000];
  for (int kind = 0; kind < KINDS; kind++) {
    lac_spread spread = keyed(kind, 11);
    lac_draws(&spread, 3, 4000, draws);
    for (int i = 0; i < 4000; i++) {
      memcpy(&bits, &draws[i], sizeof bits);
      hash = (hash ^ bits) * UINT64_C(0x100000001b3);
    }
  }
  assert_int_equal(hash, DRAW_BITS);
}

int main(void) {
  cmocka_set_message_output(CM_OUTPUT_TAP);
  const struct CMUnitTest tests[] = {
      cmocka_unit_test(published_answers),
      cmocka_unit_test(against_random123),
      cmocka_unit_test(by_definition),
      cmocka_unit_test(any_piece_alike),
      cmocka_unit_test(distributions),
      cmocka_unit_test(moments),
      cmocka_unit_test(lopsided_halves),
      cmocka_unit_test(samples_alike),
      cmocka_unit_test(no_correlation),
      cmocka_unit_test(within_bounds),
      cmocka_unit_test(medians),
      cmocka_unit_test(refusals),
      cmocka_unit_test(keys),
      cmocka_unit_test(same_bits_on_every_processor),
  };
  return cmocka_run_group_tests_name("draws", tests, NULL, NULL);
}
