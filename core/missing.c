/* SPDX-License-Identifier: GPL-3.0-or-later */
/* What would have to be given to have a name: the smallest union of what its forward rows need, found once for each name; through
   rows that stand aside nothing is sought. Rows other than inverse ones form no circle, so that the search ends; what inverse rows could do in their place is not looked at, so
   that a set may be larger than it had to be, but always suffices. */
#include <limits.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

#include "chain_fields.h"

/* For each name a set, as bits. */
typedef struct {
  const lac_chain *chain;
  size_t words;    /* of a set */
  uint64_t *sets;  /* of each name */
  bool *found;     /* whether a name's set is there */
  uint64_t *trial; /* a set for each depth of the search */
} needs;

static int set_size(const needs *n, const uint64_t *set) {
  int size = 0;
  for (size_t i = 0; i < n->words; i++)
    for (uint64_t rest = set[i]; rest; rest &= rest - 1) size++;
  return size;
}

static bool is_forward(const lac_catalogue *catalogue, int row) {
  const lac_relation *relation = lac_catalogue_row(catalogue, row);
  return !relation->inverse_of && !relation->aside;
}

static const uint64_t *need_of_name(needs *n, int id, int depth);

/* The union of the needs of a row's inputs. */
static void need_of_row(needs *n, int row, uint64_t *set, int depth) {
  int count;
  const int *from = lac_catalogue_from(n->chain->catalogue, row, &count);
  memset(set, 0, n->words * sizeof *set);
  for (int i = 0; i < count; i++) {
    const uint64_t *input = need_of_name(n, from[i], depth + 1);
    for (size_t k = 0; k < n->words; k++) set[k] |= input[k];
  }
}

/* Forward rows form no circle: the search is no deeper than there are names. */
static const uint64_t *need_of_name(needs *n, int id, int depth) {
  uint64_t *best = n->sets + (size_t)id * n->words, *trial = n->trial + (size_t)depth * n->words;
  if (n->found[id]) return best;
  n->found[id] = true;
  if (lac_chain_row(n->chain, id) != LAC_NO_ROW) return best;
  int count, least = INT_MAX;
  const int *rows = lac_catalogue_rows_of(n->chain->catalogue, id, &count);
  for (int i = 0; i < count; i++) {
    if (!is_forward(n->chain->catalogue, rows[i])) continue;
    need_of_row(n, rows[i], trial, depth);
    const int size = set_size(n, trial);
    if (size >= least) continue;
    least = size;
    memcpy(best, trial, n->words * sizeof *best);
  }
  if (least == INT_MAX) best[id / 64] |= UINT64_C(1) << (id % 64);
  return best;
}

/* The sets that are answered, by size. */
typedef struct {
  bool *needed; /* names of them for each set */
  int *rows;
  int names, count, max;
} listing;

static int listed_size(const listing *l, int at) {
  int size = 0;
  for (int id = 0; id < l->names; id++) size += l->needed[at * l->names + id];
  return size;
}

/* Puts a set after those that are no larger; the largest falls out where there is no room. */
static void list_set(listing *l, const needs *n, const uint64_t *set, int row) {
  const int size = set_size(n, set);
  const size_t bytes = (size_t)l->names * sizeof *l->needed;
  int at = l->count;
  while (at > 0 && listed_size(l, at - 1) > size) at--;
  if (at == l->max) return;
  if (l->count < l->max) l->count++;
  bool *place = l->needed + at * l->names;
  memmove(place + l->names, place, (size_t)(l->count - 1 - at) * bytes);
  memmove(l->rows + at + 1, l->rows + at, (size_t)(l->count - 1 - at) * sizeof *l->rows);
  for (int id = 0; id < l->names; id++) place[id] = set[id / 64] >> (id % 64) & 1;
  l->rows[at] = row;
}

/* One set for each forward row of a name; where there is none the name would have to be given itself. */
static void list_needs(needs *n, int id, listing *l) {
  int count;
  const int *rows = lac_catalogue_rows_of(n->chain->catalogue, id, &count);
  for (int i = 0; i < count; i++) {
    if (!is_forward(n->chain->catalogue, rows[i])) continue;
    need_of_row(n, rows[i], n->trial, 0);
    list_set(l, n, n->trial, rows[i]);
  }
  if (l->count == 0) list_set(l, n, need_of_name(n, id, 0), LAC_NO_ROW);
}

int lac_chain_missing(const lac_chain *chain, int id, bool *needed, int max, int *rows) {
  if (max <= 0 || lac_chain_row(chain, id) != LAC_NO_ROW) return 0;
  const size_t names = (size_t)lac_catalogue_names(chain->catalogue);
  needs n = {.chain = chain, .words = (names + 63) / 64};
  listing l = {.needed = needed, .rows = rows, .names = (int)names, .max = max};
  n.sets = calloc((2 * names + 1) * n.words, sizeof *n.sets);
  n.found = calloc(names, sizeof *n.found);
  n.trial = n.sets ? n.sets + names * n.words : NULL;
  if (n.sets && n.found) list_needs(&n, id, &l);
  else l.count = -1;
  free(n.sets);
  free(n.found);
  return l.count;
}
