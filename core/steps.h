/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The distinct steps below a pending value, and their evaluation in units: a unit is a block along one axis, at one
   combination of indices (a cell) of the other axes.

   Blocks are the outer loop and cells the inner one, so that a step that depends on the block's axis alone is computed once a
   block. A step that doesn't depend on that axis is computed as a single element, and spread over a block where a consumer needs
   one. A step none of whose indices has changed since the last unit is left as it is.

   Block functions always get a multiple of LAC_LANES elements: no vectorised loop has a scalar rest, whose library functions may
   differ in the last bit. So an element's bits depend on its arguments alone, not on its place, the axis of the blocks or the threads. */
#ifndef LACUNA_CORE_STEPS_H
#define LACUNA_CORE_STEPS_H

#include <stdbool.h>
#include <stddef.h>

#include "value.h"

enum { LAC_LANES = 8, LAC_SMALL = 1 << 20 /* elements that are stored, or copied, without a second thought */ };

typedef struct {
  lac_value *value;
  unsigned axes;                      /* loop axes that its value depends on, as bits; and the two bits of steps.c */
  bool wide;                          /* depends on the axis of the blocks */
  bool spread_out;                    /* doesn't, but is read by a step that does */
  size_t buffer, last_use;            /* where its block stands; the last step that reads it */
  size_t stride[LAC_MAX_AXES];        /* of stored data and of draws, along the loop axes */
  size_t argument[LAC_MAX_ARGUMENTS]; /* steps */
} lac_step;

typedef struct {
  size_t count; /* the last step is the root */
  lac_step *step;
  size_t axes, length[LAC_MAX_AXES]; /* in loop order, the axis of the blocks last */
  size_t cell_axes;                  /* all but that one */
  size_t cells, inner, blocks;       /* combinations of the others; elements and blocks along it */
  size_t width, buffers;             /* elements of a buffer, and how many a thread needs */
  size_t weight;                     /* rough work for an element */
} lac_steps;

/* The steps of a value. along: the axis of the blocks, an index into the value's axes, or LAC_NO_AXIS: every element is a cell.
   LAC_NO_MEMORY. Freed by lac_steps_free. */
#define LAC_NO_AXIS ((size_t)-1)
lac_status lac_steps_make(lac_value *root, size_t along, lac_steps *steps);
void lac_steps_free(lac_steps *steps);

/* Takes the n elements of a unit. Called from several threads, with each its own share, 0 <= share < run.shares. */
typedef void lac_unit_taker(void *context, int share, size_t cell, size_t block, size_t n, const double *elements);

/* Which cells to evaluate, and where to: straight into memory (cells in order, each contiguous) or to a taker. */
typedef struct {
  size_t first_cell, cells;
  int shares; /* from lac_steps_shares */
  double *into;
  lac_unit_taker *take;
  void *context;
} lac_run;

/* Over how many threads the work on so many cells is worth sharing. */
int lac_steps_shares(const lac_work *work, const lac_steps *steps, size_t cells);
/* LAC_INTERRUPTED, LAC_NO_MEMORY, LAC_CALLBACK_FAILED (called steps are evaluated in cells of one element alone). */
lac_status lac_steps_run(lac_work *work, const lac_steps *steps, const lac_run *run);

/* Runs task(context, share, calling) for each share, on as many threads; calling says whether it is the calling thread.
   One share: no parallel region. */
typedef void lac_share_task(void *context, int share, bool calling);
void lac_in_shares(int shares, lac_share_task *task, void *context);

/* Where share number share of count things begins. */
static inline size_t lac_share_start(size_t count, int share, int shares) {
  return count / (size_t)shares * (size_t)share + count % (size_t)shares * (size_t)share / (size_t)shares;
}

/* Distinct values below a root, itself last, each after its arguments. */
typedef struct {
  size_t count, room;
  lac_value **value;
} lac_value_list;
lac_status lac_values_below(lac_value *root, lac_value_list *list);

/* Stores what can't be evaluated in blocks: the arguments and results of called steps below a value (plan.c). */
lac_status lac_settle_calls(lac_work *work, lac_value *value);
/* Makes a value ready to be folded: calls settled, stored if it is small and the cap allows it. */
lac_status lac_settle_for_fold(lac_work *work, lac_value *value, const char *axis, size_t *along);
/* An array value over a value's other axes. */
lac_status lac_value_without(lac_work *work, const lac_value *value, size_t along, lac_value **result);

#endif
