/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Folds and quantiles along an axis: against GSL's statistics and sorted data; the same bits stored or streamed, on any number of
   threads, whatever the axis; nasty data: ties, infinities, undefined elements. And plans under failing memory. */
#include <gsl/gsl_sort.h>
#include <gsl/gsl_statistics_double.h>
#include <stdbool.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

#include "check.h"
#include "lacuna/plan.h"
#include "steps.h"

/* Sanitizers make everything some twenty times slower: the large cases are thinned out then. */
#ifdef __SANITIZE_ADDRESS__
#define SLOW 1
#else
#define SLOW 0
#endif

static const size_t plenty = (size_t)1 << 30;

enum { FOLDS = LAC_FOLD_GREATEST + 1 };

static lac_axis *axis(const char *name, size_t length) {
  lac_axis *made;
  assert_int_equal(lac_axis_new(name, length, NULL, &made), LAC_OK);
  return made;
}

static lac_value *array(lac_axis *along, const double *data) {
  lac_value *made;
  assert_int_equal(lac_value_array(1, &along, data, &made), LAC_OK);
  return made;
}

static double folded(lac_work *work, lac_value *value, lac_fold fold) {
  lac_value *result;
  assert_int_equal(lac_plan_fold(work, value, "draw", fold, &result), LAC_OK);
  const double number = lac_value_as_number(result);
  lac_value_drop(result);
  return number;
}

/* ---- against GSL ---- */

static void moments_are_those_of_gsl(void **state) {
  (void)state;
  uint64_t seed = 5;
  const size_t lengths[] = {2, 7, 1000, 1024, 1025, 5000};
  lac_work work;
  lac_work_start(&work, 2, plenty);
  for (size_t k = 0; k < 6; k++) {
    const size_t n = lengths[k];
    double *x = malloc(n * sizeof *x);
    for (size_t i = 0; i < n; i++) x[i] = check_uniform(&seed, 155, 157);
    lac_axis *draw = axis("draw", n);
    lac_value *value = array(draw, x);
    check_within(gsl_stats_mean(x, 1, n), folded(&work, value, LAC_FOLD_MEAN), 8 * DBL_EPSILON, "mean");
    check_within(gsl_stats_sd(x, 1, n), folded(&work, value, LAC_FOLD_DEVIATION), 1e-13, "deviation, two places lost to the mean");
    assert_true(folded(&work, value, LAC_FOLD_LEAST) == gsl_stats_min(x, 1, n));
    assert_true(folded(&work, value, LAC_FOLD_GREATEST) == gsl_stats_max(x, 1, n));
    assert_true(folded(&work, value, LAC_FOLD_SHARE) == 1 && folded(&work, value, LAC_FOLD_UNDEFINED) == 0);
    lac_value_drop(value), lac_axis_drop(draw), free(x);
  }
  lac_work_end(&work);
}

/* NIST, Statistical Reference Datasets, univariate: NumAcc3 (1000000.2; 1000000.1 and 1000000.3 alternate, 1001 values; mean
   1000000.2, deviation 0.1, exact) and NumAcc4 (10000000.2 alike), from memory. The data's own rounding, 2^-33 and 2^-30, is their
   accuracy. */
static void moments_of_numbers_that_cancel(void **state) {
  (void)state;
  const double base[] = {1000000, 10000000}, digits[] = {1e-8, 1e-7};
  lac_work work;
  lac_work_start(&work, 1, plenty);
  for (int k = 0; k < 2; k++) {
    double x[1001];
    x[0] = base[k] + 0.2;
    for (int i = 1; i < 1001; i++) x[i] = base[k] + (i % 2 ? 0.1 : 0.3);
    lac_axis *draw = axis("draw", 1001);
    lac_value *value = array(draw, x);
    check_within(base[k] + 0.2, folded(&work, value, LAC_FOLD_MEAN), 1e-14, "mean");
    check_within(0.1, folded(&work, value, LAC_FOLD_DEVIATION), digits[k], "deviation");
    lac_value_drop(value), lac_axis_drop(draw);
  }
  lac_work_end(&work);
}

static void undefined_elements_count_in_the_share_alone(void **state) {
  (void)state;
  const double x[] = {1, NAN, 0, 3, NAN, 0, 5, -0.0}, nothing[] = {NAN, NAN}, one[] = {4}, infinite[] = {1, INFINITY, 2};
  const double half = 0.5;
  lac_work work;
  lac_work_start(&work, 1, plenty);
  lac_axis *eight = axis("draw", 8), *two = axis("draw", 2), *single = axis("draw", 1), *three = axis("draw", 3);
  lac_value *some = array(eight, x), *none = array(two, nothing), *alone = array(single, one), *far = array(three, infinite), *result;
  assert_true(folded(&work, some, LAC_FOLD_MEAN) == 1.5 && folded(&work, some, LAC_FOLD_SHARE) == 3.0 / 8);
  assert_true(folded(&work, some, LAC_FOLD_UNDEFINED) == 2);
  assert_true(folded(&work, some, LAC_FOLD_LEAST) == 0 && folded(&work, some, LAC_FOLD_GREATEST) == 5);
  assert_true(folded(&work, none, LAC_FOLD_SHARE) == 0 && folded(&work, none, LAC_FOLD_UNDEFINED) == 2);
  const lac_fold folds[] = {LAC_FOLD_MEAN, LAC_FOLD_DEVIATION, LAC_FOLD_LEAST, LAC_FOLD_GREATEST};
  for (int i = 0; i < 4; i++) check_undefined(folded(&work, none, folds[i]), "a fold of nothing");
  assert_true(folded(&work, alone, LAC_FOLD_MEAN) == 4);
  check_undefined(folded(&work, alone, LAC_FOLD_DEVIATION), "deviation of one");
  assert_true(folded(&work, far, LAC_FOLD_MEAN) == INFINITY && folded(&work, far, LAC_FOLD_GREATEST) == INFINITY);
  assert_int_equal(lac_plan_quantiles(&work, none, "draw", 1, &half, &result), LAC_OK);
  check_undefined(lac_value_as_number(result), "median of nothing");
  lac_value_drop(result);
  assert_int_equal(lac_plan_fold(&work, some, "other", LAC_FOLD_MEAN, &result), LAC_UNKNOWN_NAME);
  assert_null(result);
  const double bad[] = {-0.1, 1.1, NAN};
  for (int i = 0; i < 3; i++) assert_int_equal(lac_plan_quantiles(&work, some, "draw", 1, &bad[i], &result), LAC_OUT_OF_RANGE);
  lac_value_drop(some), lac_value_drop(none), lac_value_drop(alone), lac_value_drop(far);
  lac_axis_drop(eight), lac_axis_drop(two), lac_axis_drop(single), lac_axis_drop(three);
  lac_work_end(&work);
}

/* ---- quantiles ---- */

static const double levels[] = {0.5, 0, 1, 0.16, 0.84, 0.025, 0.975, 0.333, 1e-6, 0.999999};
enum { LEVELS = sizeof levels / sizeof *levels };

/* Nasty data of a kind: smooth, few values, two values and undefined ones, infinities, one value, all scales and signs, zeros. */
static double nasty(int kind, uint64_t *seed, size_t i) {
  const double u = check_uniform(seed, -1, 1);
  switch (kind) {
  case 0: return u;
  case 1: return floor(5 * u);
  case 2: return i % 7 == 3 ? (double)NAN : u > 0.3;
  case 3: return u > 0.9 ? INFINITY : u < -0.9 ? -INFINITY : u;
  case 4: return 42;
  case 5: return ldexp(u, (int)check_uniform(seed, -1060, 1020));
  case 6: return u > 0.5 ? 0.0 : u < -0.5 ? -0.0 : 1e-300 * u;
  default: return i % 2 ? (double)i : -(double)i;
  }
}
enum { KINDS = 8 };

static void check_quantiles(const double *x, size_t n, const double *got, const char *label) {
  double *sorted = malloc(n * sizeof *sorted);
  size_t defined = 0;
  for (size_t i = 0; i < n; i++)
    if (!isnan(x[i])) sorted[defined++] = x[i];
  gsl_sort(sorted, 1, defined);
  for (size_t i = 0; i < LEVELS; i++) {
    const double place = levels[i] * (double)(defined - 1);
    const size_t lower = (size_t)place, upper = lower + 1 < defined ? lower + 1 : lower;
    if (sorted[lower] == sorted[upper] || place == (double)lower) assert_true(got[i] == sorted[lower]);
    else if (isinf(sorted[lower]) || isinf(sorted[upper])) assert_true(isinf(got[i]));
    else
      check_near(gsl_stats_quantile_from_sorted_data(sorted, 1, defined, levels[i]), got[i],
                 4 * DBL_EPSILON * fmax(fabs(sorted[lower]), fabs(sorted[upper])), label);
  }
  free(sorted);
}

static void quantiles_of(lac_work *work, lac_value *value, double *got) {
  lac_value *results[LEVELS];
  assert_int_equal(lac_plan_quantiles(work, value, "draw", LEVELS, levels, results), LAC_OK);
  for (size_t i = 0; i < LEVELS; i++) {
    got[i] = lac_value_as_number(results[i]);
    lac_value_drop(results[i]);
  }
}

/* Short ones are copied and selected, long ones are searched in passes; both stored and streamed, on one thread and more. */
static void quantiles_are_those_of_sorted_data(void **state) {
  (void)state;
  const size_t lengths[] = {1, 2, 3, 10, 1000, 4097, LAC_SMALL + 4099};
  for (int kind = 0; kind < KINDS; kind++)
    for (size_t k = 0; k < sizeof lengths / sizeof *lengths; k++) {
      const size_t n = lengths[k];
      if (n > LAC_SMALL && (SLOW ? kind != 2 : kind % 2 == 0 && kind != 2)) continue; /* for the test's speed */
      uint64_t seed = 77;
      double *x = malloc(n * sizeof *x), got[4][LEVELS];
      for (size_t i = 0; i < n; i++) x[i] = nasty(kind, &seed, i);
      lac_axis *draw = axis("draw", n);
      lac_value *stored = array(draw, x), *streamed;
      assert_int_equal(lac_value_clipped(stored, (lac_range){-INFINITY, INFINITY, true, true}, &streamed), LAC_OK);
      for (int way = 0; way<4; way += n> LAC_SMALL ? 3 : 1) {
        lac_work work;
        lac_work_start(&work, way % 2 ? 3 : 1, way < 2 ? plenty : 0); /* nothing may be stored under a cap of 0 */
        quantiles_of(&work, way < 2 ? stored : streamed, got[way]);
        assert_int_equal(work.used, 0);
        lac_work_end(&work);
        assert_memory_equal(got[0], got[way], sizeof got[0]);
      }
      assert_null(lac_value_data(streamed));
      check_quantiles(x, n, got[0], "quantile");
      lac_value_drop(stored), lac_value_drop(streamed), lac_axis_drop(draw), free(x);
    }
}

/* ---- stored or streamed, any axis, any number of threads ---- */

static lac_value *drawn(lac_axis *along, uint64_t key) {
  const lac_spread spread = {.kind = LAC_LOG_NORMAL, .a = 2, .b = 0.3, .key = key};
  lac_value *made;
  assert_int_equal(lac_value_drawn(along, &spread, &made), LAC_OK);
  return made;
}

static lac_value *apply(lac_block_function *block, lac_value *a, lac_value *b) {
  lac_value *made, *arguments[] = {a, b};
  assert_int_equal(lac_value_computed(block, b ? 2 : 1, arguments, &made), LAC_OK);
  lac_value_drop(a), lac_value_drop(b);
  return made;
}

/* exp(log-normal over b) * log(sweep over a) where above 3.5, else undefined; with library functions on both axes. */
static lac_value *grid(lac_axis *a, lac_axis *b) {
  lac_value *product = apply(lac_block_multiply, apply(lac_block_exp, drawn(b, 1), NULL), apply(lac_block_log, drawn(a, 2), NULL)),
            *clipped;
  assert_int_equal(lac_value_clipped(product, (lac_range){3.5, INFINITY, false, true}, &clipped), LAC_OK);
  lac_value_drop(product);
  return clipped;
}

static void fold_all(lac_work *work, lac_value *value, const char *along, double *results, size_t others) {
  for (int fold = 0; fold < FOLDS; fold++) {
    lac_value *result;
    assert_int_equal(lac_plan_fold(work, value, along, (lac_fold)fold, &result), LAC_OK);
    assert_int_equal(lac_value_size(result), others);
    memcpy(results + (size_t)fold * others, lac_value_data(result), others * sizeof(double));
    lac_value_drop(result);
  }
  const double p[] = {0.1, 0.5, 0.9};
  lac_value *quantile[3];
  assert_int_equal(lac_plan_quantiles(work, value, along, 3, p, quantile), LAC_OK);
  for (size_t i = 0; i < 3; i++) {
    memcpy(results + (FOLDS + i) * others, lac_value_data(quantile[i]), others * sizeof(double));
    lac_value_drop(quantile[i]);
  }
}

static void check_cells(const double *data, size_t others, size_t along, size_t cell_step, size_t along_step, const double *results) {
  for (size_t cell = 0; cell < others; cell++) {
    size_t defined = 0;
    double sum = 0, least = INFINITY;
    for (size_t i = 0; i < along; i++) {
      const double x = data[cell * cell_step + i * along_step];
      if (isnan(x)) continue;
      defined++, sum += x, least = fmin(least, x);
    }
    if (defined == 0) {
      check_undefined(results[LAC_FOLD_MEAN * others + cell], "mean of nothing");
      continue;
    }
    /* the naive sum loses up to a unit for each term */
    check_within(sum / (double)defined, results[LAC_FOLD_MEAN * others + cell], (double)along * DBL_EPSILON, "mean");
    assert_true(results[LAC_FOLD_UNDEFINED * others + cell] == (double)(along - defined));
    assert_true(results[LAC_FOLD_SHARE * others + cell] == (double)defined / (double)along);
    assert_true(results[LAC_FOLD_LEAST * others + cell] == least);
    assert_true(results[(FOLDS + 1) * others + cell] >= least);
  }
}

static void stored_or_streamed_along_any_axis(void **state) {
  (void)state;
  const size_t lengths[][2] = {{390, 2700}, {2, 525001}, {30, 50}}; /* a, b: the longer is last */
  for (size_t k = 0; k < 3; k++)
    for (int which = 0; which < 2; which++) {
      lac_axis *a = axis("a", lengths[k][0]), *b = axis("b", lengths[k][1]);
      const size_t along = lengths[k][which], others = lengths[k][1 - which], bytes = (FOLDS + 3) * others * sizeof(double);
      double *first = malloc(bytes), *next = malloc(bytes);
      for (int way = 0; way < 6; way += k == 2 ? 1 : SLOW ? 5 : k == 1 ? 4 : 1) {
        lac_work work;
        const int threads[] = {1, 2, 7};
        lac_work_start(&work, threads[way % 3], plenty);
        lac_value *value = grid(a, b);
        if (way < 3) assert_int_equal(lac_plan_store(&work, value), LAC_OK);
        else if (k == 2) work.cap = 4 * 50 * sizeof(double); /* room for a result and its parts; the others are too large to be stored first */
        fold_all(&work, value, which ? "b" : "a", way == 0 ? first : next, others);
        assert_true(way < 3 || lac_value_data(value) == NULL);
        if (way == 0) check_cells(lac_value_data(value), others, along, which ? b->length : 1, which ? 1 : b->length, first);
        else assert_memory_equal(first, next, bytes);
        lac_value_drop(value);
        assert_int_equal(work.used, 0);
        lac_work_end(&work);
      }
      free(first), free(next), lac_axis_drop(a), lac_axis_drop(b);
    }
}

/* A chance over draws: undefined draws in the denominator. Expected: the normal distribution, six standard deviations of a binomial share.
 */
static void a_chance_is_the_normal_distributions(void **state) {
  (void)state;
  lac_work work;
  lac_work_start(&work, 2, plenty);
  const size_t n = 2000000;
  lac_axis *draw = axis("draw", n);
  const lac_spread spread = {.kind = LAC_NORMAL, .a = 1, .b = 2, .key = 99};
  lac_value *x, *limit, *verdict, *chance;
  assert_int_equal(lac_value_drawn(draw, &spread, &x), LAC_OK);
  assert_int_equal(lac_value_number(2, &limit), LAC_OK);
  verdict = apply(lac_block_above, x, limit);
  assert_int_equal(lac_plan_fold(&work, verdict, "draw", LAC_FOLD_SHARE, &chance), LAC_OK);
  const double want = erfc(0.5 / sqrt(2)) / 2;
  check_near(want, lac_value_as_number(chance), 6 * sqrt(want * (1 - want) / (double)n), "chance");
  assert_null(lac_value_data(verdict));
  lac_value_drop(verdict), lac_value_drop(chance), lac_axis_drop(draw);
  lac_work_end(&work);
}

/* ---- failing memory: every request fails once ---- */

/* A sanitizer brings its own allocator; there this test is left out. */
#if defined(__GLIBC__) && !defined(__SANITIZE_ADDRESS__)
#define REQUESTS_CAN_BE_REFUSED
extern void *__libc_malloc(size_t), *__libc_calloc(size_t, size_t), *__libc_realloc(void *, size_t), *__libc_memalign(size_t, size_t);
extern void __libc_free(void *);
static long countdown = -1, live;

static bool refused(void) { return countdown >= 0 && countdown-- == 0; }
static void *counted(void *memory) {
  live += memory != NULL;
  return memory;
}
void *malloc(size_t size) { return refused() ? NULL : counted(__libc_malloc(size)); }
void *calloc(size_t count, size_t size) { return refused() ? NULL : counted(__libc_calloc(count, size)); }
void *aligned_alloc(size_t alignment, size_t size) { return refused() ? NULL : counted(__libc_memalign(alignment, size)); }
void *realloc(void *old, size_t size) {
  if (refused()) return NULL;
  live += old == NULL;
  return __libc_realloc(old, size);
}
void free(void *memory) {
  live -= memory != NULL;
  __libc_free(memory);
}

/* Everything once: making, asking for elements, calls, storing, folding, both ways to quantiles. */
static int plain_sum(void *context, size_t n, double *out, const double *const *in) {
  (void)context;
  for (size_t i = 0; i < n; i++) out[i] = in[0][i] + in[1][i];
  return 0;
}

typedef struct {
  lac_axis *a, *draw;
  lac_value *made[8], *result[2];
} attempt;

static lac_status attempted(lac_work *work, attempt *t) {
  const double levels_[] = {0.25, 0.5}, x[] = {1, 2, 3}, samples[] = {1, 2};
  const lac_spread spread = {.kind = LAC_SAMPLES, .samples = samples, .count = 2, .key = 1};
  lac_status status;
  double element;
  if ((status = lac_axis_new("a", 3, x, &t->a)) || (status = lac_axis_new("draw", LAC_SMALL + 5, NULL, &t->draw))) return status;
  if ((status = lac_value_array(1, &t->a, x, &t->made[0])) || (status = lac_value_drawn(t->draw, &spread, &t->made[1]))) return status;
  if ((status = lac_value_number(2, &t->made[2]))) return status;
  if ((status = lac_value_called(plain_sum, NULL, 2, (lac_value *[]){t->made[0], t->made[2]}, &t->made[3]))) return status;
  if ((status = lac_value_scaled(lac_block_root, 2, (lac_value *[]){t->made[3], t->made[1]}, &t->made[4]))) return status;
  if ((status = lac_value_clipped(t->made[1], (lac_range){0, 9, true, true}, &t->made[5]))) return status;
  if ((status = lac_plan_element(work, t->made[4], (size_t[]){0, 0}, &element))) return status;
  if ((status = lac_plan_quantiles(work, t->made[5], "draw", 2, levels_, t->result))) return status;
  if ((status = lac_plan_fold(work, t->made[4], "draw", LAC_FOLD_SHARE, &t->made[6]))) return status;
  if ((status = lac_plan_store(work, t->made[5]))) return status;
  return lac_plan_fold(work, t->made[3], "a", LAC_FOLD_MEAN, &t->made[7]);
}

static void every_refused_request_is_answered_cleanly(void **state) {
  (void)state;
  lac_status status = LAC_NO_MEMORY;
  long refusals = 0;
  for (; status != LAC_OK && refusals < 500; refusals++) {
    lac_work work;
    attempt t = {0};
    const long before = live;
    lac_work_start(&work, 1, plenty);
    countdown = refusals;
    status = attempted(&work, &t);
    const bool reached = countdown < 0;
    countdown = -1;
    for (size_t i = 0; i < 8; i++) lac_value_drop(t.made[i]);
    for (size_t i = 0; i < 2; i++) lac_value_drop(t.result[i]);
    lac_axis_drop(t.a), lac_axis_drop(t.draw);
    const size_t used = work.used;
    lac_work_end(&work);
    assert_int_equal(used, 0);
    assert_int_equal(live, before);
    if (reached && status != LAC_OK) assert_int_equal(status, LAC_NO_MEMORY);
  }
  assert_int_equal(status, LAC_OK);
  assert_in_range(refusals, 25, 499);
}
#endif

int main(void) {
  cmocka_set_message_output(CM_OUTPUT_TAP);
  const struct CMUnitTest tests[] = {
      cmocka_unit_test(moments_are_those_of_gsl),
      cmocka_unit_test(moments_of_numbers_that_cancel),
      cmocka_unit_test(undefined_elements_count_in_the_share_alone),
      cmocka_unit_test(quantiles_are_those_of_sorted_data),
      cmocka_unit_test(stored_or_streamed_along_any_axis),
      cmocka_unit_test(a_chance_is_the_normal_distributions),
#ifdef REQUESTS_CAN_BE_REFUSED
      cmocka_unit_test(every_refused_request_is_answered_cleanly),
#endif
  };
  return cmocka_run_group_tests(tests, NULL, NULL);
}
