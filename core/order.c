/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Selection among keys, and the definition of quantiles. */
#include "order.h"

#include <math.h>
#include <stdlib.h>

size_t lac_keys_from(double *elements, size_t n) {
  size_t kept = 0;
  for (size_t i = 0; i < n; i++) {
    if (isnan(elements[i])) continue;
    const uint64_t key = lac_key(elements[i]);
    memcpy(&elements[kept++], &key, sizeof key);
  }
  return kept;
}

static int compare_keys(const void *a, const void *b) {
  const uint64_t x = *(const uint64_t *)a, y = *(const uint64_t *)b;
  return (x > y) - (x < y);
}

static uint64_t median_of_three(uint64_t a, uint64_t b, uint64_t c) {
  if (a > b) {
    const uint64_t t = a;
    a = b;
    b = t;
  }
  return c < a ? a : c > b ? b : c;
}

/* Swaps the least key to the start, without a branch on what is compared. */
static uint64_t least_first(uint64_t *keys, size_t start, size_t n) {
  uint64_t least = keys[start];
  size_t place = start;
  for (size_t i = start; i < n; i++) least = keys[i] < least ? keys[i] : least;
  while (keys[place] != least) place++;
  keys[place] = keys[start];
  return keys[start] = least;
}

/* Hoare's selection (1961, Communications of the ACM 4, 321). Where pivots turn out badly, what is left is sorted. */
uint64_t lac_select(uint64_t *keys, size_t start, size_t n, size_t rank) {
  if (rank == start) return least_first(keys, start, n);
  ptrdiff_t left = (ptrdiff_t)start, right = (ptrdiff_t)n - 1;
  const ptrdiff_t wanted = (ptrdiff_t)rank;
  for (int rounds = 0; left < right; rounds++) {
    if (rounds == 96) {
      qsort(keys + left, (size_t)(right - left + 1), sizeof *keys, compare_keys);
      break;
    }
    const uint64_t pivot = median_of_three(keys[left], keys[left + (right - left) / 2], keys[right]);
    ptrdiff_t i = left, j = right;
    while (i <= j) {
      while (keys[i] < pivot) i++;
      while (keys[j] > pivot) j--;
      if (i > j) break;
      const uint64_t key = keys[i];
      keys[i++] = keys[j];
      keys[j--] = key;
    }
    if (wanted <= j) right = j;
    else if (wanted >= i) left = i;
    else break;
  }
  return keys[rank];
}

lac_between lac_quantile_between(size_t n, double p) {
  const double place = (double)(n - 1) * p;
  size_t lower = (size_t)place;
  if (lower > n - 1) lower = n - 1;
  return (lac_between){lower, lower + 1 < n ? lower + 1 : lower, place - (double)lower};
}

/* Where the difference is infinite the two are weighted, so that finite ends of any size and one infinite end come out right. */
double lac_quantile_value(lac_between between, double lower, double upper) {
  if (lower == upper || between.weight == 0) return lower;
  if (isfinite(upper - lower)) return lower + between.weight * (upper - lower);
  return (1 - between.weight) * lower + between.weight * upper;
}
