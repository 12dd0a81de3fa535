/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Folds along an axis. Each block along it gives a partial result, in fixed lanes; the partial results of a cell are joined in the
   order of the blocks. So the bits depend neither on the number of threads nor on whether the value was stored. */
#include <math.h>
#include <stdlib.h>

#include "clones.h"
#include "steps.h"

enum { LANES = 8 };

/* Of the moments: elements, their mean, their squared deviations from it. Of a count: that. Of an extreme: elements, and it. */
typedef struct {
  double count, mean, deviations;
} partial;

static double joined(const double *lane) {
  return ((lane[0] + lane[1]) + (lane[2] + lane[3])) + ((lane[4] + lane[5]) + (lane[6] + lane[7]));
}

/* An expression added up over the elements x[i], in lanes. */
#define SUM(total, expression)                                                                                                             \
  double total;                                                                                                                            \
  do {                                                                                                                                     \
    double lane_[LANES] = {0};                                                                                                             \
    size_t i = 0;                                                                                                                          \
    for (; i + LANES <= n; i += LANES)                                                                                                     \
      for (size_t j = 0; j < LANES; j++) {                                                                                                 \
        const double e = x[i + j];                                                                                                         \
        lane_[j] += (expression);                                                                                                          \
      }                                                                                                                                    \
    for (size_t j = 0; i + j < n; j++) {                                                                                                   \
      const double e = x[i + j];                                                                                                           \
      lane_[j] += (expression);                                                                                                            \
    }                                                                                                                                      \
    total = joined(lane_);                                                                                                                 \
  } while (0)

LAC_CLONES static partial moments(size_t n, const double *x) {
  SUM(count, e == e ? 1.0 : 0.0);
  SUM(sum, e == e ? e : 0.0);
  const double mean = sum / count;
  SUM(deviations, e == e ? (e - mean) * (e - mean) : 0.0);
  return (partial){count, mean, deviations};
}

LAC_CLONES static partial shared(size_t n, const double *x) {
  SUM(count, (e != 0) & (e == e) ? 1.0 : 0.0);
  return (partial){.count = count};
}

LAC_CLONES static partial undefined(size_t n, const double *x) {
  SUM(count, e == e ? 0.0 : 1.0);
  return (partial){.count = count};
}

static partial extreme(size_t n, const double *x, int greatest) {
  partial found = {0};
  for (size_t i = 0; i < n; i++) {
    if (isnan(x[i])) continue;
    if (found.count == 0 || (greatest ? x[i] > found.mean : x[i] < found.mean)) found.mean = x[i];
    found.count++;
  }
  return found;
}

typedef struct {
  lac_fold fold;
  size_t cells;
  partial *partials; /* of each block in turn, those of all cells: threads write apart */
} fold_state;

static void take_partial(void *context, int share, size_t cell, size_t block, size_t n, const double *elements) {
  (void)share;
  const fold_state *folding = context;
  partial *to = &folding->partials[block * folding->cells + cell];
  switch (folding->fold) {
  case LAC_FOLD_MEAN:
  case LAC_FOLD_DEVIATION: *to = moments(n, elements); break;
  case LAC_FOLD_SHARE: *to = shared(n, elements); break;
  case LAC_FOLD_UNDEFINED: *to = undefined(n, elements); break;
  case LAC_FOLD_LEAST: *to = extreme(n, elements, 0); break;
  case LAC_FOLD_GREATEST: *to = extreme(n, elements, 1); break;
  }
}

/* Chan, Golub & LeVeque 1983, The American Statistician 37, 242, Eq. 1.5, for any number of parts: the squared deviations within the
   parts, and those of the parts' means from the mean of all. */
static double join_moments(const partial *part, size_t parts, size_t stride, int deviation) {
  double count = 0, sum = 0, deviations = 0;
  for (size_t i = 0; i < parts; i++) {
    const partial p = part[i * stride];
    count += p.count;
    if (p.count > 0) sum += p.count * p.mean;
  }
  const double mean = sum / count; /* NaN where nothing is defined */
  if (!deviation) return mean;
  for (size_t i = 0; i < parts; i++) {
    const partial p = part[i * stride];
    if (p.count > 0) deviations += p.deviations + p.count * (p.mean - mean) * (p.mean - mean);
  }
  return count > 1 ? sqrt(deviations / (count - 1)) : (double)NAN;
}

static double join_counts(const partial *part, size_t parts, size_t stride) {
  double count = 0;
  for (size_t i = 0; i < parts; i++) count += part[i * stride].count;
  return count;
}

static double join_extremes(const partial *part, size_t parts, size_t stride, int greatest) {
  double found = NAN;
  for (size_t i = 0; i < parts; i++) {
    const partial p = part[i * stride];
    if (p.count > 0 && (isnan(found) || (greatest ? p.mean > found : p.mean < found))) found = p.mean;
  }
  return found;
}

static double join(const fold_state *folding, size_t cell, size_t blocks, size_t inner) {
  const partial *part = folding->partials + cell;
  switch (folding->fold) {
  case LAC_FOLD_MEAN: return join_moments(part, blocks, folding->cells, 0);
  case LAC_FOLD_DEVIATION: return join_moments(part, blocks, folding->cells, 1);
  case LAC_FOLD_SHARE: return join_counts(part, blocks, folding->cells) / (double)inner;
  case LAC_FOLD_UNDEFINED: return join_counts(part, blocks, folding->cells);
  case LAC_FOLD_LEAST: return join_extremes(part, blocks, folding->cells, 0);
  case LAC_FOLD_GREATEST: return join_extremes(part, blocks, folding->cells, 1);
  }
  return NAN;
}

static lac_status fold_into(lac_work *work, const lac_steps *steps, lac_fold fold, double *results) {
  enum { DOUBLES = sizeof(partial) / sizeof(double) }; /* the partial results count towards the cap */
  lac_buffer room;
  if (steps->blocks > SIZE_MAX / DOUBLES / steps->cells) return LAC_NO_MEMORY;
  lac_status status = lac_buffer_take(work, DOUBLES * steps->blocks * steps->cells, &room);
  if (status != LAC_OK) return status;
  fold_state folding = {.fold = fold, .cells = steps->cells, .partials = (partial *)room.data};
  const lac_run run = {
      .cells = steps->cells, .shares = lac_steps_shares(work, steps, steps->cells), .take = take_partial, .context = &folding};
  status = lac_steps_run(work, steps, &run);
  for (size_t cell = 0; cell < steps->cells && status == LAC_OK; cell++) results[cell] = join(&folding, cell, steps->blocks, steps->inner);
  lac_buffer_give(&room);
  return status;
}

lac_status lac_plan_fold(lac_work *work, lac_value *value, const char *axis, lac_fold fold, lac_value **result) {
  *result = NULL;
  size_t along;
  lac_steps steps;
  lac_value *made = NULL;
  lac_status status = lac_settle_for_fold(work, value, axis, &along);
  if (status == LAC_OK) status = lac_value_without(work, value, along, &made);
  if (status != LAC_OK) return status;
  status = lac_steps_make(value, along, &steps);
  if (status == LAC_OK) {
    status = fold_into(work, &steps, fold, lac_value_elements(made));
    lac_steps_free(&steps);
  }
  if (status == LAC_OK) *result = made;
  else lac_value_drop(made);
  return status;
}
