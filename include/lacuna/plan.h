/* SPDX-License-Identifier: GPL-3.0-or-later */
/* A pending value evaluated over its axes, block by block, all steps on one block before the next,
   every step at its own broadcast rank, on all cores; stored, or folded along an axis without being stored. */
#ifndef LACUNA_PLAN_H
#define LACUNA_PLAN_H

#include <signal.h>
#include <stddef.h>

#include "lacuna/chain.h"
#include "lacuna/quantity.h"

#ifdef __cplusplus
extern "C" {
#endif

enum { LAC_BLOCK = 1024, LAC_PIECE = 65536 };

/* What a computation runs with, in place of globals: threads, memory and the ways to stop it.
   One lac_work for each host state; not for two threads at once; it stays where it is while values stored with it live.
   threads == 1: no parallel region is entered. stop stays set until the caller clears it. */
typedef struct {
  int threads;                       /* >= 1 */
  size_t cap;                        /* bytes that stored values and the parts of folds may take together */
  size_t used;                       /* bytes they take */
  volatile sig_atomic_t stop;        /* set by anyone: the computation ends with LAC_INTERRUPTED */
  int (*poll)(void *context);        /* called on the calling thread between blocks; non-zero ends it; may be NULL */
  void (*collect)(void *context);    /* asked to drop dead values before a request over the cap is refused; may be NULL */
  void *context;
  size_t wanted;                     /* after LAC_OVER_CAP: the bytes that were asked for */
  struct lac_pool *pool;             /* blocks kept for reuse */
} lac_work;

void lac_work_start(lac_work *work, int threads, size_t cap);
void lac_work_end(lac_work *work); /* values stored with it must be gone */

/* Stores a pending value's elements (nothing to do for numbers and stored ones). Bit-identical on any number of threads.
   LAC_OVER_CAP before anything is allocated; LAC_INTERRUPTED; LAC_CALLBACK_FAILED; LAC_NO_MEMORY. The value is as before then. */
lac_status lac_plan_store(lac_work *work, lac_value *value);

/* The element at one point only: index[i] along axis i, in storage order. */
lac_status lac_plan_element(lac_work *work, lac_value *value, const size_t *index, double *element);

/* Folds along an axis (by name; the others stay): each result is an array value over the others, or a number.
   count, undefined: how many; mean, standard deviation (n - 1); share: of the elements that are not 0, over all, undefined
   ones included in the denominator; quantiles at p[0 .. count-1], between order statistics linearly (Hyndman & Fan 1996, type 7),
   of the defined ones, NaN where there is none. Exact and the same, stored or not; small values are stored on the way.
   LAC_UNKNOWN_NAME: the value has no such axis. LAC_OUT_OF_RANGE: a p outside 0 to 1. Else as lac_plan_store. Results are NULL then. */
typedef enum { LAC_FOLD_MEAN, LAC_FOLD_DEVIATION, LAC_FOLD_SHARE, LAC_FOLD_UNDEFINED, LAC_FOLD_LEAST, LAC_FOLD_GREATEST } lac_fold;
lac_status lac_plan_fold(lac_work *work, lac_value *value, const char *axis, lac_fold fold, lac_value **result);
lac_status lac_plan_quantiles(lac_work *work, lac_value *value, const char *axis, size_t count, const double *p, lac_value **results);

/* A name's value by a chain: values[id] holds the givens' values (kept by the caller) and NULL elsewhere; those made on the way are
   put there, so that the next ask finds them (the caller drops them). Single numbers are evaluated at once. LAC_NOT_HAD; LAC_TOO_MANY: a given is too deep an expression, store
   it (lac_plan_store) and ask again; else as the makers of values. */
lac_status lac_plan_ask(const lac_chain *chain, lac_value **values, int id);

#ifdef __cplusplus
}
#endif

#endif
