/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Quantiles of one set of elements against the whole set sorted by the C library, and the definition applied to that:
   Hyndman & Fan 1996, The American Statistician 50, 361, definition 7. Shapes that bins suit well, badly and not at all. */
#include <stdlib.h>
#include <string.h>

#include "check.h"
#include "order.h"

enum { MOST = 20000, LEVELS = 11 };
static const double levels[LEVELS] = {0.5, 0, 0.025, 0.1587, 0.3, 0.8413, 0.975, 1, 0.999, 0.5, 0.51};
static uint64_t state = 20261201;

static double uniform(void) { return check_uniform(&state, 0, 1); }

static double even(void) { return uniform() - 0.5; }
static double positive(void) { return 1 + uniform(); }
static double negative(void) { return -1 - uniform(); }
static double decades(void) { return check_log_uniform(&state, 1e-20, 1e20); }
static double both_signs(void) { return even() * decades(); }
static double one_far(void) { return uniform() < 1e-3 ? 1e300 : uniform(); }
static double same(void) { return 42; }
static double few(void) { return floor(3 * uniform()); }
static double zeros(void) { return uniform() < 0.5 ? -0.0 : 0.0; }
static double with_infinite(void) { return uniform() < 0.01 ? INFINITY : uniform() < 0.01 ? -INFINITY : uniform(); }
static double undefined_too(void) { return uniform() < 0.3 ? NAN : decades(); }
static double mostly_one(void) { return uniform() < 0.9 ? 1 : decades(); }
static double tiny(void) { return 5e-324 * floor(1000 * uniform()); }
static double nearly_same(void) { return 1 + 0x1p-52 * floor(4 * uniform()); }
static double huge(void) { return 3.4 * even() * 1e308; }

typedef double shape(void);
static const struct {
  const char *name;
  shape *draw;
} shapes[] = {{"even", even},
              {"positive", positive},
              {"negative", negative},
              {"decades", decades},
              {"both signs", both_signs},
              {"one far", one_far},
              {"same", same},
              {"few", few},
              {"zeros", zeros},
              {"infinite", with_infinite},
              {"undefined", undefined_too},
              {"mostly one", mostly_one},
              {"tiny", tiny},
              {"nearly same", nearly_same},
              {"huge", huge}};

/* By value, and -0 before +0. */
static int compare(const void *a, const void *b) {
  double x, y;
  memcpy(&x, a, sizeof x);
  memcpy(&y, b, sizeof y);
  if (x != y) return x < y ? -1 : 1;
  return !signbit(x) - !signbit(y);
}

static double by_sorting(const double *sorted, size_t n, double p) {
  if (n == 0) return NAN;
  const double place = (double)(n - 1) * p;
  const size_t lower = (size_t)place, upper = lower + 1 < n ? lower + 1 : lower;
  return lac_quantile_value((lac_between){lower, upper, place - (double)lower}, sorted[lower], sorted[upper]);
}

static void check_shape(const char *name, shape *draw, size_t n) {
  static double elements[MOST], sorted[MOST], results[LEVELS];
  size_t defined = 0;
  for (size_t i = 0; i < n; i++) {
    elements[i] = draw();
    if (!isnan(elements[i])) sorted[defined++] = elements[i];
  }
  qsort(sorted, defined, sizeof *sorted, compare);
  lac_quantiles_of(elements, n, LEVELS, levels, results);
  for (int i = 0; i < LEVELS; i++) {
    const double want = by_sorting(sorted, defined, levels[i]);
    if (memcmp(&want, &results[i], sizeof want) == 0 || (isnan(want) && isnan(results[i]))) continue;
    fail_msg("%s, %zu elements, at %g: want %.17g, got %.17g", name, n, levels[i], want, results[i]);
  }
}

static void shapes_and_sizes(void **unused) {
  (void)unused;
  static const size_t sizes[] = {0, 1, 2, 3, 10, 1023, 1024, 1025, 4999, 10000, MOST};
  for (size_t s = 0; s < sizeof shapes / sizeof *shapes; s++)
    for (size_t i = 0; i < sizeof sizes / sizeof *sizes; i++) check_shape(shapes[s].name, shapes[s].draw, sizes[i]);
}

int main(void) {
  const struct CMUnitTest tests[] = {cmocka_unit_test(shapes_and_sizes)};
  cmocka_set_message_output(CM_OUTPUT_TAP);
  return cmocka_run_group_tests(tests, NULL, NULL);
}
