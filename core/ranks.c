/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Several order statistics of one set of elements. The elements are counted in bins between the least and the greatest; those in the few
   bins that hold a wanted rank are collected and selected among. Bins are of equal width; where all elements are positive, and may range
   over decades, of equal width in their bits, which is nearly that in their logarithms. The bin of an element never falls as the element
   grows, so that the result is exact whatever the rounding. Where too many share a bin, or one is infinite, all are selected among. */
#include <math.h>
#include <stdbool.h>
#include <stdlib.h>
#include <string.h>

#include "clones.h"
#include "order.h"

enum { BINS = 1 << 11, FEW = 1 << 10, LANES = 16, MOST_RANKS = 16 };

/* The elements that are not NaN, moved to the front. Returned: how many. */
static size_t defined_first(double *elements, size_t n) {
  size_t kept = 0;
  for (size_t i = 0; i < n; i++) {
    elements[kept] = elements[i];
    kept += isnan(elements[i]) ? 0 : 1;
  }
  return kept;
}

typedef struct {
  bool by_bits;
  double least, scale; /* from an element's distance to the least, to its bin */
  int64_t least_bits;
} binning;

static inline int64_t bits_of(double x) {
  int64_t bits;
  memcpy(&bits, &x, sizeof bits);
  return bits;
}

static inline size_t bin_of(binning by, double x) {
  const double distance = by.by_bits ? (double)(bits_of(x) - by.least_bits) : x - by.least;
  const size_t bin = (size_t)(distance * by.scale);
  return bin < BINS ? bin : BINS - 1;
}

/* False where there is no such binning: zeros, nearly the same, or infinite ones among the elements. */
static bool make_binning(binning *by, double least, double greatest) {
  *by = (binning){.by_bits = least > 0, .least = least, .least_bits = bits_of(least)};
  const double width = by->by_bits ? (double)(bits_of(greatest) - by->least_bits) : greatest - least;
  by->scale = BINS / width;
  return isfinite(greatest - least) && by->scale < HUGE_VAL;
}

/* Least and greatest of at least LANES elements. In lanes, or each comparison would wait for the one before. */
LAC_CLONES static void extremes(const double *x, size_t n, double *least, double *greatest) {
  double low[LANES], high[LANES];
  for (size_t k = 0; k < LANES; k++) low[k] = high[k] = x[k];
  for (size_t i = LANES; i + LANES <= n; i += LANES)
    for (size_t k = 0; k < LANES; k++) {
      low[k] = x[i + k] < low[k] ? x[i + k] : low[k];
      high[k] = x[i + k] > high[k] ? x[i + k] : high[k];
    }
  for (size_t i = n - n % LANES; i < n; i++) {
    low[0] = x[i] < low[0] ? x[i] : low[0];
    high[0] = x[i] > high[0] ? x[i] : high[0];
  }
  *least = low[0], *greatest = high[0];
  for (size_t k = 1; k < LANES; k++) {
    *least = low[k] < *least ? low[k] : *least;
    *greatest = high[k] > *greatest ? high[k] : *greatest;
  }
}

/* A wanted bin: which elements are in it, counted and then collected. */
typedef struct {
  size_t below, start, inside; /* elements in bins below; where its keys start; how many there are */
} wanted_bin;

/* The wanted bins of ascending ranks, from the counts of all; mark[bin] is then the number of the wanted one from 1 on, else 0.
   in[i]: the wanted bin of rank i. Returned: how many elements they hold together. */
static size_t find_bins(const uint32_t *counts, const size_t *ranks, size_t count, wanted_bin *bins, unsigned char *mark, size_t *in) {
  size_t found = 0, below = 0, collected = 0, next = 0;
  for (size_t bin = 0; bin < BINS && next < count; below += counts[bin++]) {
    if (ranks[next] >= below + counts[bin]) continue;
    bins[found] = (wanted_bin){.below = below, .start = collected, .inside = 0};
    mark[bin] = (unsigned char)(found + 1);
    while (next < count && ranks[next] < below + counts[bin]) in[next++] = found;
    collected += counts[bin];
    found++;
  }
  return collected;
}

static bool by_bins(const double *elements, size_t n, const size_t *ranks, size_t count, double *values) {
  double least, greatest;
  binning by;
  extremes(elements, n, &least, &greatest);
  if (greatest == least && greatest != 0) { /* zeros have a sign */
    for (size_t i = 0; i < count; i++) values[i] = greatest;
    return true;
  }
  if (!make_binning(&by, least, greatest)) return false;
  uint32_t counts[BINS] = {0};
  for (size_t i = 0; i < n; i++) counts[bin_of(by, elements[i])]++;
  wanted_bin bins[MOST_RANKS];
  unsigned char mark[BINS] = {0};
  size_t in[MOST_RANKS];
  const size_t collected = find_bins(counts, ranks, count, bins, mark, in);
  uint64_t *keys = collected > n / 2 ? NULL : malloc(collected * sizeof *keys);
  if (keys == NULL) return false;
  for (size_t i = 0; i < n; i++) {
    const unsigned char wanted = mark[bin_of(by, elements[i])];
    if (wanted != 0) keys[bins[wanted - 1].start + bins[wanted - 1].inside++] = lac_key(elements[i]);
  }
  for (size_t i = 0; i < count; i++) {
    const wanted_bin *bin = &bins[in[i]];
    values[i] = lac_key_value(lac_select(keys + bin->start, 0, bin->inside, ranks[i] - bin->below));
  }
  free(keys);
  return true;
}

/* Puts the keys of ascending ranks at their places: the middle one first, then those on either side among the keys on that side alone. */
static void select_ranks(uint64_t *keys, size_t start, size_t end, const size_t *ranks, size_t count) {
  if (count == 0) return;
  const size_t middle = count / 2, rank = ranks[middle];
  lac_select(keys, start, end, rank);
  select_ranks(keys, start, rank, ranks, middle);
  select_ranks(keys, rank + 1, end, ranks + middle + 1, count - middle - 1);
}

static void among_all(double *elements, size_t n, const size_t *ranks, size_t count, double *values) {
  uint64_t *keys = (uint64_t *)(void *)elements;
  lac_keys_from(elements, n);
  select_ranks(keys, 0, n, ranks, count);
  for (size_t i = 0; i < count; i++) values[i] = lac_key_value(keys[ranks[i]]);
  for (size_t i = 0; i < n; i++) {
    const double element = lac_key_value(keys[i]);
    memcpy(&elements[i], &element, sizeof element);
  }
}

/* Adds a rank to an ascending list where it isn't there. */
static void add_rank(size_t *ranks, size_t *count, size_t rank) {
  size_t place = *count;
  while (place > 0 && ranks[place - 1] > rank) place--;
  if (place > 0 && ranks[place - 1] == rank) return;
  memmove(ranks + place + 1, ranks + place, (*count - place) * sizeof *ranks);
  ranks[place] = rank;
  ++*count;
}

static double value_at(const size_t *ranks, const double *values, size_t rank) {
  while (*ranks != rank) ranks++, values++;
  return *values;
}

/* Quantiles whose ranks have room together. */
static void some_quantiles(double *elements, size_t n, size_t count, const double *p, double *results) {
  lac_between between[MOST_RANKS / 2];
  size_t ranks[MOST_RANKS], wanted = 0;
  double values[MOST_RANKS];
  for (size_t i = 0; i < count; i++) {
    between[i] = lac_quantile_between(n, p[i]);
    add_rank(ranks, &wanted, between[i].lower);
    add_rank(ranks, &wanted, between[i].upper);
  }
  if (n < FEW || !by_bins(elements, n, ranks, wanted, values)) among_all(elements, n, ranks, wanted, values);
  for (size_t i = 0; i < count; i++)
    results[i] = lac_quantile_value(between[i], value_at(ranks, values, between[i].lower), value_at(ranks, values, between[i].upper));
}

void lac_quantiles_of(double *elements, size_t n, size_t count, const double *p, double *results) {
  n = defined_first(elements, n);
  for (size_t first = 0, some; first < count; first += some) {
    some = count - first < MOST_RANKS / 2 ? count - first : MOST_RANKS / 2;
    if (n > 0) some_quantiles(elements, n, some, p + first, results + first);
    else
      for (size_t i = 0; i < some; i++) results[first + i] = NAN;
  }
}
