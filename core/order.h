/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Order statistics on keys: unsigned integers in the order of the doubles they stand for, -0 before +0, so that ties and
   infinities need no care and equal data give equal bits. */
#ifndef LACUNA_CORE_ORDER_H
#define LACUNA_CORE_ORDER_H

#include <stddef.h>
#include <stdint.h>
#include <string.h>

static inline uint64_t lac_key(double x) {
  uint64_t bits;
  memcpy(&bits, &x, sizeof bits);
  return bits >> 63 ? ~bits : bits | UINT64_C(1) << 63;
}

static inline double lac_key_value(uint64_t key) {
  const uint64_t bits = key >> 63 ? key & ~(UINT64_C(1) << 63) : ~key;
  double x;
  memcpy(&x, &bits, sizeof x);
  return x;
}

/* The keys of the elements that are not NaN, in place of the elements. Returned: how many. */
size_t lac_keys_from(double *elements, size_t n);

/* Puts the key that would stand at `rank` of the sorted keys [start, n) there; smaller or equal ones come before, the others after. */
uint64_t lac_select(uint64_t *keys, size_t start, size_t n, size_t rank);

/* The two order statistics (ranks from 0) that the quantile at p of n elements lies between, and the weight of the upper one:
   Hyndman & Fan 1996, The American Statistician 50, 361, definition 7. */
typedef struct {
  size_t lower, upper;
  double weight;
} lac_between;
lac_between lac_quantile_between(size_t n, double p);
double lac_quantile_value(lac_between between, double lower, double upper);

/* The quantiles of the elements that are not NaN, at p[0 .. count-1] each; NaN where there is none. The elements change their places. */
void lac_quantiles_of(double *elements, size_t n, size_t count, const double *p, double *results);

#endif
