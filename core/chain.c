/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The chain: which row gives each name. The closure of the givens is found in time linear in the table, by counting for each
   row the inputs still wanted (Dowling & Gallier 1984, Journal of Logic Programming 1, 267). The order in which a closure
   reaches the names is an order in which they can be evaluated, and the rank of a name in it shows at once that a row whose
   inputs all come earlier closes no circle. Where ranks don't show it, one closure without the name does: a row may be taken
   exactly if its inputs are reached without the name it gives. */
#include "chain_fields.h"

#include <limits.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

/* A row that takes no part: no closure counts it down to zero. */
enum { IDLE = INT_MAX / 2, NOT_REACHED = INT_MAX };

typedef struct {
  const lac_catalogue *catalogue;
  int names, rows;
  int *wanted;     /* for each row: its inputs that are not had from the start; IDLE */
  int *left;       /* for each row: its inputs not yet reached in this closure */
  int *users;      /* rows that use a name, one after the other, */
  int *users_from; /* and where those of each name start */
  int *rank;       /* of each name: -1 had from the start, then as reached; NOT_REACHED */
  int *base;       /* the ranks at the start of a closure */
  int *queue;      /* the names in the order in which they are reached */
  int reached, done;
  void *memory;
} settling;

static bool start_settling(settling *s, const lac_catalogue *catalogue) {
  *s = (settling){.catalogue = catalogue, .names = lac_catalogue_names(catalogue), .rows = lac_catalogue_rows(catalogue)};
  size_t uses = 0;
  for (int row = 0; row < s->rows; row++) {
    int count;
    lac_catalogue_from(catalogue, row, &count);
    uses += (size_t)count;
  }
  const size_t names = (size_t)s->names, rows = (size_t)s->rows;
  int *at = s->memory = malloc((2 * rows + uses + 4 * names + 1) * sizeof *at);
  if (!at) return false;
  s->wanted = at, at += rows;
  s->left = at, at += rows;
  s->users = at, at += uses;
  s->users_from = at, at += names + 1;
  s->rank = at, at += names;
  s->base = at, at += names;
  s->queue = at;
  return true;
}

/* Which rows use each name: counted, then filled from the end of each name's share downwards. */
static void find_users(settling *s) {
  int count;
  memset(s->users_from, 0, ((size_t)s->names + 1) * sizeof *s->users_from);
  for (int row = 0; row < s->rows; row++) {
    const int *from = lac_catalogue_from(s->catalogue, row, &count);
    for (int i = 0; i < count; i++) s->users_from[from[i]]++;
  }
  for (int id = 1; id <= s->names; id++) s->users_from[id] += s->users_from[id - 1];
  for (int row = s->rows - 1; row >= 0; row--) {
    const int *from = lac_catalogue_from(s->catalogue, row, &count);
    for (int i = count - 1; i >= 0; i--) s->users[--s->users_from[from[i]]] = row;
  }
}

/* Counts a row's inputs that are not had from the start. */
static void count_wanted(settling *s, int row) {
  int count, wanted = 0;
  const int *from = lac_catalogue_from(s->catalogue, row, &count);
  for (int i = 0; i < count; i++) wanted += s->base[from[i]] == NOT_REACHED;
  s->wanted[row] = wanted;
}

static void reach(settling *s, int id) {
  s->rank[id] = s->reached;
  s->queue[s->reached++] = id;
}

static void run_closure(settling *s) {
  while (s->done < s->reached) {
    const int id = s->queue[s->done++];
    for (int i = s->users_from[id]; i < s->users_from[id + 1]; i++) {
      const int row = s->users[i];
      if (--s->left[row] != 0) continue;
      const int gives = lac_catalogue_gives(s->catalogue, row);
      if (s->rank[gives] == NOT_REACHED) reach(s, gives);
    }
  }
}

/* The closure of what is had from the start under the rows that aren't idle; not giving the barred name (-1 for none), whose rank
   is then s->names. */
static void closure(settling *s, int barred) {
  memcpy(s->left, s->wanted, (size_t)s->rows * sizeof *s->left);
  memcpy(s->rank, s->base, (size_t)s->names * sizeof *s->rank);
  s->reached = s->done = 0;
  if (barred >= 0) s->rank[barred] = s->names;
  for (int row = 0; row < s->rows; row++) {
    const int gives = lac_catalogue_gives(s->catalogue, row);
    if (s->left[row] == 0 && s->rank[gives] == NOT_REACHED) reach(s, gives);
  }
  run_closure(s);
}

/* Whether all inputs of a row have a rank below this one. */
static bool inputs_before(const settling *s, int row, int rank) {
  int count;
  const int *from = lac_catalogue_from(s->catalogue, row, &count);
  for (int i = 0; i < count; i++)
    if (s->rank[from[i]] >= rank) return false;
  return true;
}

/* The first row of a name that isn't idle and whose inputs all have a rank below this one. */
static int first_row(const settling *s, int id, int rank) {
  int count;
  const int *rows = lac_catalogue_rows_of(s->catalogue, id, &count);
  for (int i = 0; i < count; i++)
    if (s->wanted[rows[i]] != IDLE && inputs_before(s, rows[i], rank)) return rows[i];
  return LAC_NO_ROW;
}

/* Leaves a name one row alone. */
static void restrict_to(settling *s, int id, int only) {
  int count;
  const int *rows = lac_catalogue_rows_of(s->catalogue, id, &count);
  for (int i = 0; i < count; i++)
    if (rows[i] != only) s->wanted[rows[i]] = IDLE;
}

/* Step 1. */
static lac_status begin(settling *s, const bool *given, const int *only, int *culprit) {
  for (int id = 0; id < s->names; id++) s->base[id] = given[id] ? -1 : NOT_REACHED;
  for (int row = 0; row < s->rows; row++) count_wanted(s, row);
  for (int id = 0; id < s->names; id++) {
    const bool restricted = only && only[id] >= 0;
    if (restricted && given[id]) {
      *culprit = id;
      return LAC_DUPLICATE;
    }
    if (given[id]) restrict_to(s, id, LAC_NO_ROW);
    if (restricted) restrict_to(s, id, only[id]);
  }
  return LAC_OK;
}

/* Step 2, and each had name's first live row; rows that are not live fall idle. */
static lac_status take_first_rows(settling *s, const int *only, lac_chain *chain, int *culprit) {
  closure(s, -1);
  chain->had = s->reached;
  for (int id = 0; id < s->names; id++) {
    chain->row[id] = s->base[id] < 0 ? LAC_GIVEN : s->rank[id] == NOT_REACHED ? LAC_NO_ROW : first_row(s, id, NOT_REACHED);
    if (!only || only[id] < 0 || chain->row[id] >= 0) continue;
    *culprit = id;
    return LAC_NOT_HAD;
  }
  for (int row = 0; row < s->rows; row++)
    if (!inputs_before(s, row, NOT_REACHED)) s->wanted[row] = IDLE;
  return LAC_OK;
}

/* Step 3: the closure under the first live rows. Returned: whether it reaches all. */
static bool close_first_rows(settling *s, lac_chain *chain, int *kept) {
  memcpy(kept, s->wanted, (size_t)s->rows * sizeof *kept);
  for (int id = 0; id < s->names; id++)
    if (chain->row[id] >= 0) restrict_to(s, id, chain->row[id]);
  closure(s, -1);
  return s->reached == chain->had;
}

/* The names reached in step 3 are had from the start of every later closure: their rows rest on each other alone. */
static void keep_reached(settling *s, const int *kept) {
  memcpy(s->base, s->rank, (size_t)s->names * sizeof *s->base);
  for (int id = 0; id < s->names; id++)
    if (s->base[id] != NOT_REACHED) s->base[id] = -1;
  for (int row = 0; row < s->rows; row++) {
    const bool idle = kept[row] == IDLE || s->base[lac_catalogue_gives(s->catalogue, row)] < 0;
    if (idle) s->wanted[row] = IDLE;
    else count_wanted(s, row);
  }
}

/* Step 4. Before each choice the closure under the rows that are left reaches all that is had, and s->rank is its order. */
static void settle_rest(settling *s, lac_chain *chain) {
  closure(s, -1);
  for (int id = 0; id < s->names; id++) {
    if (chain->row[id] < 0 || s->base[id] < 0) continue;
    if (inputs_before(s, chain->row[id], s->rank[id])) {
      restrict_to(s, id, chain->row[id]);
      continue;
    }
    closure(s, id);
    chain->row[id] = first_row(s, id, s->names);
    restrict_to(s, id, chain->row[id]);
    reach(s, id);
    run_closure(s);
  }
}

static lac_chain *chain_new(const lac_catalogue *catalogue) {
  const size_t names = (size_t)lac_catalogue_names(catalogue);
  lac_chain *chain = malloc(sizeof *chain + 3 * names * sizeof(int));
  if (!chain) return NULL;
  *chain = (lac_chain){.catalogue = catalogue, .names = (int)names, .row = (int *)(chain + 1)};
  chain->order = chain->row + names;
  chain->position = chain->order + names;
  return chain;
}

/* The order of evaluation: the givens, the names reached in step 3, the rest. */
static void append_reached(lac_chain *chain, const settling *s) {
  for (int i = 0; i < s->reached; i++) chain->order[chain->had++] = s->queue[i];
}

static lac_status settle(settling *s, const bool *given, const int *only, lac_chain *chain, int *culprit) {
  int *kept = malloc(((size_t)s->rows + 1) * sizeof *kept);
  if (!kept) return LAC_NO_MEMORY;
  find_users(s);
  lac_status status = begin(s, given, only, culprit);
  if (status == LAC_OK) status = take_first_rows(s, only, chain, culprit);
  if (status == LAC_OK) {
    chain->at_once = close_first_rows(s, chain, kept);
    chain->had = 0;
    for (int id = 0; id < s->names; id++)
      if (given[id]) chain->order[chain->had++] = id;
    append_reached(chain, s);
    if (!chain->at_once) {
      keep_reached(s, kept);
      settle_rest(s, chain);
      append_reached(chain, s);
    }
    for (int id = 0; id < s->names; id++) chain->position[id] = chain->had;
    for (int i = 0; i < chain->had; i++) chain->position[chain->order[i]] = i;
  }
  free(kept);
  return status;
}

lac_status lac_chain_settle(const lac_catalogue *catalogue, const bool *given, const int *only, lac_chain **result, int *culprit) {
  int nobody;
  *result = NULL;
  lac_chain *chain = chain_new(catalogue);
  settling s;
  lac_status status = LAC_NO_MEMORY;
  if (start_settling(&s, catalogue)) {
    if (chain) status = settle(&s, given, only, chain, culprit ? culprit : &nobody);
    free(s.memory);
  }
  if (status == LAC_OK) *result = chain;
  else free(chain);
  return status;
}

void lac_chain_free(lac_chain *chain) { free(chain); }

int lac_chain_row(const lac_chain *chain, int id) { return id >= 0 && id < chain->names ? chain->row[id] : LAC_NO_ROW; }

bool lac_chain_settled_at_once(const lac_chain *chain) { return chain->at_once; }

const lac_catalogue *lac_chain_catalogue(const lac_chain *chain) { return chain->catalogue; }

/* ids first holds, for each position in the order, whether its name is needed; the steps are then written over what is read. */
int lac_chain_steps(const lac_chain *chain, int id, int *ids) {
  if (lac_chain_row(chain, id) == LAC_NO_ROW) return 0;
  const int last = chain->position[id];
  for (int i = 0; i < last; i++) ids[i] = 0;
  ids[last] = 1;
  for (int i = last; i >= 0; i--) {
    const int row = chain->row[chain->order[i]];
    if (!ids[i] || row < 0) continue;
    int count;
    const int *from = lac_catalogue_from(chain->catalogue, row, &count);
    for (int k = 0; k < count; k++) ids[chain->position[from[k]]] = 1;
  }
  int steps = 0;
  for (int i = 0; i <= last; i++)
    if (ids[i]) ids[steps++] = chain->order[i];
  return steps;
}

void lac_chain_values(const lac_chain *chain, double *values) {
  for (int id = 0; id < chain->names; id++)
    if (chain->row[id] == LAC_NO_ROW) values[id] = (double)NAN;
  for (int i = 0; i < chain->had; i++) {
    const int id = chain->order[i], row = chain->row[id];
    if (row < 0) continue;
    double arguments[LAC_MAX_ARGUMENTS];
    int count;
    const int *from = lac_catalogue_from(chain->catalogue, row, &count);
    for (int k = 0; k < count; k++) arguments[k] = values[from[k]];
    values[id] = lac_relation_value(lac_catalogue_row(chain->catalogue, row), arguments);
  }
}
