/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Which relations lead from the givens to each name. The choice depends on the given names, on
   restrictions, and on the tables; never on values, nor on what is asked first. */
#ifndef LACUNA_CHAIN_H
#define LACUNA_CHAIN_H

#include <stdbool.h>

#include "lacuna/catalogue.h"

#ifdef __cplusplus
extern "C" {
#endif

enum { LAC_GIVEN = -1, LAC_NO_ROW = -2 };

typedef struct lac_chain lac_chain;

/* Settles the chain for all names, by this rule:
   1. A given has no rows. A name with only[id] >= 0 has that row alone.
   2. Had is the Horn closure of the givens under the rows. A row is live if all its inputs are had.
   3. Every had name takes its first live row. If closure under these rows alone reaches all that is had, that is the chain.
   4. Otherwise the names reached in 3 keep their rows; the rest, in glossary order, each take the first live row with which
      closure (settled names restricted to their row, others free) still reaches all that is had.
   Given: given[id] for each name; only[id] a row or -1 (only may be NULL).
   Returned: LAC_OK and *chain, freed by lac_chain_free; LAC_NOT_HAD if a name with only[id] >= 0 can't be had by that row (*culprit
   its id) or is itself given (LAC_DUPLICATE); LAC_NO_MEMORY.
   Linear in the table where step 3 suffices. The chain has no circle. It keeps a pointer to the catalogue. */
lac_status lac_chain_settle(const lac_catalogue *catalogue, const bool *given, const int *only, lac_chain **chain, int *culprit);
void lac_chain_free(lac_chain *chain);

/* The row that gives a name: a row number, LAC_GIVEN, or LAC_NO_ROW where it can't be had, or where the id is none. */
int lac_chain_row(const lac_chain *chain, int id);
/* Whether step 3 sufficed. */
bool lac_chain_settled_at_once(const lac_chain *chain);
/* The catalogue it was settled on. */
const lac_catalogue *lac_chain_catalogue(const lac_chain *chain);

/* The names a name rests on, itself last, each after all it follows from; ids must hold as many as there are names.
   Returned: how many; 0 if it can't be had. */
int lac_chain_steps(const lac_chain *chain, int id, int *ids);

/* All single values of a chain at once: values[id] of the givens in, of all had names out (SI, NaN outside ranges, or of users' rows). */
void lac_chain_values(const lac_chain *chain, double *values);

/* What would have to be given to have a name: need(had) = nothing, need(a name without forward rows) = the name itself, else the smallest
   union over its forward rows, ties by order. Rows that stand aside are not looked at. One set for each of its rows that could give it, smallest first.
   Given: room for max * names bytes in needed[set * names + id]; names: how many the catalogue has.
   Returned: how many sets, at most max, and in rows[set] the row, LAC_NO_ROW for the name itself; 0 if it is had, -1 without memory. */
int lac_chain_missing(const lac_chain *chain, int id, bool *needed, int max, int *rows);

#ifdef __cplusplus
}
#endif

#endif
