/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Tables of a smooth function, found by halving, and cubics through them. Each round samples the middles of all open intervals at once, so
   that they can be computed in parallel; the result does not depend on how. */
#include "adaptive.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

size_t lac_cubic_weights(size_t count, const double *place, double at, double *weight) {
  size_t low = 0, high = count - 1;
  while (high - low > 1) {
    const size_t middle = (low + high) / 2;
    if (place[middle] <= at) low = middle;
    else high = middle;
  }
  const size_t first = low == 0 ? 0 : low + 2 == count ? count - 4 : low - 1; /* as near the ends as four places allow */
  const double *p = place + first;
  const double a = at - p[0], b = at - p[1], c = at - p[2], d = at - p[3];
  const double ab = p[1] - p[0], ac = p[2] - p[0], ad = p[3] - p[0], bc = p[2] - p[1], bd = p[3] - p[1], cd = p[3] - p[2];
  weight[0] = -b * c * d / (ab * ac * ad);
  weight[1] = a * c * d / (ab * bc * bd);
  weight[2] = -a * b * d / (ac * bc * cd);
  weight[3] = a * b * c / (ad * bd * cd);
  return first;
}

void lac_table_free(lac_table *table) {
  free(table->place);
  free(table->value);
  *table = (lac_table){0};
}

/* A table with an interval after each place that is open, or isn't. */
typedef struct {
  lac_table table;
  bool *open;
} draft;

static void draft_free(draft *d) {
  lac_table_free(&d->table);
  free(d->open);
  d->open = NULL;
}

static lac_status draft_new(size_t count, size_t width, draft *d) {
  *d = (draft){.table = {.count = count, .width = width}};
  d->table.place = calloc(count, sizeof(double));
  d->table.value = calloc(count * width, sizeof(double));
  d->open = calloc(count, sizeof(bool));
  if (d->table.place && d->table.value && d->open) return LAC_OK;
  draft_free(d);
  return LAC_NO_MEMORY;
}

static bool is_met(const lac_table *table, double place, const double *exact, lac_agreement *agrees, double *guess) {
  double weight[4];
  const size_t first = lac_cubic_weights(table->count, table->place, place, weight), width = table->width;
  const double *v = table->value + first * width;
  for (size_t i = 0; i < width; i++)
    guess[i] = weight[0] * v[i] + weight[1] * v[width + i] + weight[2] * v[2 * width + i] + weight[3] * v[3 * width + i];
  return agrees(width, guess, exact);
}

static void copy_place(lac_table *to, size_t at, const lac_table *from, size_t i) {
  to->place[at] = from->place[i];
  memcpy(to->value + at * to->width, from->value + i * to->width, to->width * sizeof(double));
}

/* The table with its middles put in; the halves around a middle that was not met are open. */
static lac_status with_middles(const draft *before, const lac_table *middles, double finest, lac_agreement *agrees, draft *after) {
  const size_t width = before->table.width;
  double *guess = calloc(width, sizeof *guess);
  lac_status status = guess ? draft_new(before->table.count + middles->count, width, after) : LAC_NO_MEMORY;
  for (size_t i = 0, m = 0, at = 0; i < before->table.count && status == LAC_OK; i++) {
    copy_place(&after->table, at++, &before->table, i);
    if (!before->open[i]) continue;
    copy_place(&after->table, at, middles, m);
    const bool met = is_met(&before->table, middles->place[m], middles->value + m * width, agrees, guess);
    after->open[at - 1] = after->open[at] = !met && middles->place[m] - before->table.place[i] > finest;
    m++;
    at++;
  }
  free(guess);
  return status;
}

/* One round. */
static lac_status halve(draft *d, size_t open, double finest, lac_sampler *sample, lac_agreement *agrees, void *context) {
  draft middles, after = {0};
  lac_status status = draft_new(open, d->table.width, &middles);
  if (status != LAC_OK) return status;
  for (size_t i = 0, m = 0; i + 1 < d->table.count; i++)
    if (d->open[i]) middles.table.place[m++] = 0.5 * (d->table.place[i] + d->table.place[i + 1]);
  status = sample(context, open, middles.table.place, middles.table.value);
  if (status == LAC_OK) status = with_middles(d, &middles.table, finest, agrees, &after);
  draft_free(&middles);
  if (status != LAC_OK) return status;
  draft_free(d);
  *d = after;
  return LAC_OK;
}

static size_t count_open(const draft *d) {
  size_t open = 0;
  for (size_t i = 0; i < d->table.count; i++) open += d->open[i];
  return open;
}

lac_status lac_table_fill(double low, double high, size_t intervals, double finest, lac_sampler *sample, lac_agreement *agrees,
                          void *context, lac_table *table) {
  const size_t width = table->width;
  *table = (lac_table){0};
  draft d;
  lac_status status = draft_new(intervals + 1, width, &d);
  if (status != LAC_OK) return status;
  for (size_t i = 0; i <= intervals; i++) {
    d.table.place[i] = low + (high - low) * ((double)i / (double)intervals);
    d.open[i] = i < intervals;
  }
  status = sample(context, d.table.count, d.table.place, d.table.value);
  for (size_t open = intervals; open > 0 && status == LAC_OK; open = count_open(&d))
    status = halve(&d, open, finest, sample, agrees, context);
  free(d.open);
  if (status == LAC_OK) *table = d.table;
  else lac_table_free(&d.table);
  table->width = width;
  return status;
}
