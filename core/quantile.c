/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Quantiles along an axis: exact order statistics. Where an axis is short enough, its elements are copied, several cells at a time, and
   selected. Along a long one they are evaluated anew in a few passes: extremes; counts in bins between them, which are narrowed
   to those that hold the wanted ones; at last the few elements in these are collected. No pass stores the elements. */
#include <math.h>
#include <stdatomic.h>
#include <stdlib.h>
#include <string.h>

#include "order.h"
#include "steps.h"

/* ---- short axes: copied and selected ---- */

typedef struct {
  double *elements; /* of the cells of a batch, one after the other */
  size_t inner, first_cell, cells, count;
  const double *p;
  double **results; /* of each p, over all cells */
  int shares;
} cell_batch;

enum { AT_ONCE = 8 };

static void select_cell(const cell_batch *batch, size_t cell) {
  double values[AT_ONCE];
  for (size_t first = 0, some; first < batch->count; first += some) {
    some = batch->count - first < AT_ONCE ? batch->count - first : AT_ONCE;
    lac_quantiles_of(batch->elements + cell * batch->inner, batch->inner, some, batch->p + first, values);
    for (size_t i = 0; i < some; i++) batch->results[first + i][batch->first_cell + cell] = values[i];
  }
}

static void select_share(void *context, int share, bool calling) {
  (void)calling;
  const cell_batch *batch = context;
  const size_t end = lac_share_start(batch->cells, share + 1, batch->shares);
  for (size_t cell = lac_share_start(batch->cells, share, batch->shares); cell < end; cell++) select_cell(batch, cell);
}

static lac_status by_selection(lac_work *work, const lac_steps *steps, cell_batch *batch) {
  const size_t most = LAC_SMALL / steps->inner < steps->cells ? LAC_SMALL / steps->inner : steps->cells;
  batch->inner = steps->inner;
  batch->elements = malloc(most * steps->inner * sizeof(double));
  lac_status status = batch->elements ? LAC_OK : LAC_NO_MEMORY;
  for (size_t first = 0; first < steps->cells && status == LAC_OK; first += most) {
    batch->first_cell = first;
    batch->cells = steps->cells - first < most ? steps->cells - first : most;
    const lac_run run = {
        .first_cell = first, .cells = batch->cells, .shares = lac_steps_shares(work, steps, batch->cells), .into = batch->elements};
    status = lac_steps_run(work, steps, &run);
    batch->shares = (size_t)run.shares < batch->cells ? run.shares : (int)batch->cells;
    if (status == LAC_OK) lac_in_shares(batch->shares, select_share, batch);
  }
  free(batch->elements);
  return status;
}

/* ---- long axes: searched in passes ---- */

enum { GROUP = 8, INTERVALS = 2 * GROUP, BINS = 1 << 13 };

/* Keys low ... low + span; how many elements lie below them, and among them. */
typedef struct {
  uint64_t low, span;
  size_t below, inside, start; /* start: of its collected keys */
  int shift;                   /* from a key's offset to its bin */
} interval;

typedef struct {
  uint64_t least, greatest;
  size_t count;
  char apart[64 - 2 * sizeof(uint64_t) - sizeof(size_t)]; /* a cache line each */
} extremes;

typedef struct {
  size_t rank, in; /* in: its interval */
} wanted;

typedef struct {
  lac_work *work;
  const lac_steps *steps;
  size_t cell, intervals, wants;
  int shares;
  interval interval[INTERVALS];
  wanted want[INTERVALS];
  extremes *extremes; /* of each share */
  size_t *bins;       /* of each share, of each interval */
  uint64_t *keys;     /* collected */
  atomic_size_t filled[INTERVALS];
} rank_search;

static lac_status pass(rank_search *search, lac_unit_taker *take) {
  const lac_run run = {.first_cell = search->cell, .cells = 1, .shares = search->shares, .take = take, .context = search};
  return lac_steps_run(search->work, search->steps, &run);
}

static void take_extremes(void *context, int share, size_t cell, size_t block, size_t n, const double *elements) {
  (void)cell, (void)block;
  extremes *found = &((rank_search *)context)->extremes[share];
  extremes e = *found;
  for (size_t i = 0; i < n; i++) {
    const uint64_t key = lac_key(elements[i]);
    const int defined = elements[i] == elements[i];
    e.least = defined & (key < e.least) ? key : e.least;
    e.greatest = defined & (key > e.greatest) ? key : e.greatest;
    e.count += (size_t)defined;
  }
  *found = e;
}

/* NaN has keys outside of any interval. */
static void take_counts(void *context, int share, size_t cell, size_t block, size_t n, const double *elements) {
  (void)cell, (void)block;
  const rank_search *search = context;
  for (size_t k = 0; k < search->intervals; k++) {
    const interval in = search->interval[k];
    size_t *bins = search->bins + ((size_t)share * search->intervals + k) * BINS;
    if (in.span == 0) continue;
    for (size_t i = 0; i < n; i++) {
      const uint64_t offset = lac_key(elements[i]) - in.low;
      if (offset <= in.span) bins[offset >> in.shift]++;
    }
  }
}

/* The order in which threads add their keys doesn't matter: they are selected from. */
static void take_keys(void *context, int share, size_t cell, size_t block, size_t n, const double *elements) {
  (void)share, (void)cell, (void)block;
  rank_search *search = context;
  uint64_t found[LAC_BLOCK];
  for (size_t k = 0; k < search->intervals; k++) {
    const interval in = search->interval[k];
    size_t count = 0;
    if (in.span == 0) continue;
    for (size_t i = 0; i < n; i++) {
      found[count] = lac_key(elements[i]);
      count += found[count] - in.low <= in.span;
    }
    if (count == 0) continue;
    const size_t at = atomic_fetch_add(&search->filled[k], count);
    memcpy(search->keys + in.start + at, found, count * sizeof *found);
  }
}

/* First pass. Returned: how many elements are defined, in *n; one interval holds them all then. */
static lac_status find_extremes(rank_search *search, size_t *n) {
  for (int i = 0; i < search->shares; i++) search->extremes[i] = (extremes){.least = UINT64_MAX};
  lac_status status = pass(search, take_extremes);
  extremes all = {.least = UINT64_MAX};
  for (int i = 0; i < search->shares; i++) {
    const extremes e = search->extremes[i];
    if (e.least < all.least) all.least = e.least;
    if (e.greatest > all.greatest) all.greatest = e.greatest;
    all.count += e.count;
  }
  search->intervals = 1;
  search->interval[0] = (interval){.low = all.least, .span = all.greatest - all.least, .inside = all.count};
  *n = all.count;
  return status;
}

static size_t unsettled(const rank_search *search) {
  size_t elements = 0;
  for (size_t k = 0; k < search->intervals; k++)
    if (search->interval[k].span > 0) elements += search->interval[k].inside;
  return elements;
}

/* The part of an interval that holds a rank, by the counts in its bins. */
static interval narrowed(const interval *in, const size_t *bins, size_t rank) {
  size_t below = in->below;
  uint64_t bin = 0;
  while (below + bins[bin] <= rank) below += bins[bin++];
  const uint64_t offset = bin << in->shift, width = (UINT64_C(1) << in->shift) - 1, rest = in->span - offset;
  return (interval){.low = in->low + offset, .span = width < rest ? width : rest, .below = below, .inside = bins[bin]};
}

static void narrow(rank_search *search) {
  interval next[INTERVALS];
  size_t count = 0;
  for (size_t i = 0; i < search->wants; i++) {
    wanted *want = &search->want[i];
    const interval *old = &search->interval[want->in];
    const interval part = old->span > 0 ? narrowed(old, search->bins + want->in * BINS, want->rank) : *old;
    for (want->in = 0; want->in < count && next[want->in].low != part.low; want->in++) {
    }
    if (want->in == count) next[count++] = part;
  }
  search->intervals = count;
  memcpy(search->interval, next, count * sizeof *next);
}

static lac_status narrow_in_a_pass(rank_search *search) {
  const size_t bins = search->intervals * BINS;
  search->bins = calloc((size_t)search->shares * bins, sizeof *search->bins);
  if (!search->bins) return LAC_NO_MEMORY;
  for (size_t k = 0; k < search->intervals; k++)
    for (interval *in = &search->interval[k]; in->span >> in->shift >= BINS;) in->shift++;
  lac_status status = pass(search, take_counts);
  if (status == LAC_OK) {
    for (size_t i = 0; i < bins; i++)
      for (int share = 1; share < search->shares; share++) search->bins[i] += search->bins[(size_t)share * bins + i];
    narrow(search);
  }
  free(search->bins);
  return status;
}

static lac_status collect(rank_search *search) {
  size_t total = 0;
  for (size_t k = 0; k < search->intervals; k++) {
    interval *in = &search->interval[k];
    in->start = total;
    atomic_init(&search->filled[k], 0);
    if (in->span > 0) total += in->inside;
  }
  if (total == 0) return LAC_OK;
  search->keys = malloc(total * sizeof *search->keys);
  return search->keys ? pass(search, take_keys) : LAC_NO_MEMORY;
}

static double found_value(const rank_search *search, const wanted *want) {
  const interval *in = &search->interval[want->in];
  if (in->span == 0) return lac_key_value(in->low);
  return lac_key_value(lac_select(search->keys + in->start, 0, in->inside, want->rank - in->below));
}

/* At most GROUP quantiles of one cell. */
static lac_status search_group(rank_search *search, size_t count, const double *p, double **results) {
  size_t n;
  lac_status status = find_extremes(search, &n);
  for (size_t i = 0; i < count; i++) results[i][search->cell] = NAN;
  if (status != LAC_OK || n == 0) return status;
  search->wants = 2 * count;
  for (size_t i = 0; i < count; i++) {
    const lac_between between = lac_quantile_between(n, p[i]);
    search->want[2 * i] = (wanted){.rank = between.lower};
    search->want[2 * i + 1] = (wanted){.rank = between.upper};
  }
  while (status == LAC_OK && unsettled(search) > LAC_SMALL) status = narrow_in_a_pass(search);
  search->keys = NULL;
  if (status == LAC_OK) status = collect(search);
  for (size_t i = 0; i < count && status == LAC_OK; i++) {
    const double lower = found_value(search, &search->want[2 * i]), upper = found_value(search, &search->want[2 * i + 1]);
    results[i][search->cell] = lac_quantile_value(lac_quantile_between(n, p[i]), lower, upper);
  }
  free(search->keys);
  return status;
}

static lac_status by_search(lac_work *work, const lac_steps *steps, size_t count, const double *p, double **results) {
  rank_search search = {.work = work, .steps = steps, .shares = lac_steps_shares(work, steps, 1)};
  search.extremes = calloc((size_t)search.shares, sizeof(extremes));
  lac_status status = search.extremes ? LAC_OK : LAC_NO_MEMORY;
  for (search.cell = 0; search.cell < steps->cells; search.cell++)
    for (size_t i = 0; i < count && status == LAC_OK; i += GROUP)
      status = search_group(&search, count - i < GROUP ? count - i : GROUP, p + i, results + i);
  free(search.extremes);
  return status;
}

/* ---- both ---- */

static lac_status quantiles_into(lac_work *work, lac_value *value, size_t along, size_t count, const double *p, lac_value *const *made) {
  lac_steps steps;
  double **results = malloc((count + 1) * sizeof *results);
  if (!results) return LAC_NO_MEMORY;
  for (size_t i = 0; i < count; i++) results[i] = lac_value_elements(made[i]);
  lac_status status = lac_steps_make(value, along, &steps);
  if (status == LAC_OK) {
    cell_batch batch = {.count = count, .p = p, .results = results};
    status = steps.inner <= LAC_SMALL ? by_selection(work, &steps, &batch) : by_search(work, &steps, count, p, results);
    lac_steps_free(&steps);
  }
  free(results);
  return status;
}

lac_status lac_plan_quantiles(lac_work *work, lac_value *value, const char *axis, size_t count, const double *p, lac_value **results) {
  size_t along;
  for (size_t i = 0; i < count; i++) results[i] = NULL;
  for (size_t i = 0; i < count; i++)
    if (!(p[i] >= 0 && p[i] <= 1)) return LAC_OUT_OF_RANGE;
  lac_status status = lac_settle_for_fold(work, value, axis, &along);
  for (size_t i = 0; i < count && status == LAC_OK; i++) status = lac_value_without(work, value, along, &results[i]);
  if (status == LAC_OK) status = quantiles_into(work, value, along, count, p, results);
  for (size_t i = 0; i < count && status != LAC_OK; i++) {
    lac_value_drop(results[i]);
    results[i] = NULL;
  }
  return status;
}
