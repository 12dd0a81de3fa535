/* SPDX-License-Identifier: GPL-3.0-or-later */
/* What the tests share: comparators that fail unless within, so that NaN fails, and a seeded source of inputs. */
#ifndef LACUNA_TESTS_CHECK_H
#define LACUNA_TESTS_CHECK_H

#include <float.h>
#include <math.h>
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

static inline void check_fail_unless(int within, double want, double got, double tolerance, const char *label) {
  if (within) return;
  print_error("# %s: want %.17g, got %.17g, relative error %.3g, tolerance %.3g\n", label, want, got, (got - want) / fabs(want), tolerance);
  fail();
}

/* Within a relative tolerance. */
static inline void check_within(double want, double got, double tolerance, const char *label) {
  check_fail_unless(fabs(got - want) <= tolerance * fabs(want), want, got, tolerance, label);
}

/* Within an absolute tolerance, for what may be zero. */
static inline void check_near(double want, double got, double tolerance, const char *label) {
  check_fail_unless(fabs(got - want) <= tolerance, want, got, tolerance, label);
}

static inline void check_undefined(double got, const char *label) { check_fail_unless(isnan(got), (double)NAN, got, 0, label); }

/* Evenly between low and high (excluded), and evenly in the logarithm, by the splitmix64 generator (Steele, Lea & Flood 2014,
   OOPSLA, p. 453). Given: the state, which starts at any seed. */
static inline double check_uniform(uint64_t *state, double low, double high) {
  uint64_t z = (*state += UINT64_C(0x9e3779b97f4a7c15));
  z = (z ^ (z >> 30)) * UINT64_C(0xbf58476d1ce4e5b9);
  z = (z ^ (z >> 27)) * UINT64_C(0x94d049bb133111eb);
  return low + (high - low) * (double)((z ^ (z >> 31)) >> 11) * 0x1p-53;
}

static inline double check_log_uniform(uint64_t *state, double low, double high) {
  return low * exp(check_uniform(state, 0, log(high / low)));
}

#endif
