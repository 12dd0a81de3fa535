/* SPDX-License-Identifier: GPL-3.0-or-later */
/* How much of an answer's spread each uncertain input carries: first-order shares of its variance, from the draws that are there. */
#ifndef LACUNA_SENSITIVITY_H
#define LACUNA_SENSITIVITY_H

#include <stddef.h>

#include "lacuna/plan.h"
#include "lacuna/status.h"

#ifdef __cplusplus
extern "C" {
#endif

/* How an input's draws are distributed, so that functions of it can be integrated over its distribution and not over the sample. */
typedef enum {
  LAC_STANDARD_NORMAL,  /* mean 0, standard deviation 1 */
  LAC_STANDARD_UNIFORM, /* from 0 to 1 */
  LAC_ANY_DISTRIBUTION  /* not known: its ranks are used */
} lac_distribution;

typedef struct {
  const double *draws; /* scaled to the distribution that is named */
  lac_distribution distribution;
} lac_share_input;

typedef struct {
  double share; /* Var(E[y | x]) / Var(y) */
  double error; /* its standard error from the finite number of draws */
} lac_share;

/* First-order variance shares of y[0 .. n-1] in its independent inputs, NaN elements (with all inputs' elements beside them) left out.
   Given: y in any unit; 1 or more inputs; n draws of each; shares: room for as many; work: whose stop flag and poll are looked at.
   Returned: LAC_OK with the shares, and in *defined how many draws were used; the shares are NaN where y doesn't vary among them.
   LAC_TOO_MANY: more inputs than the defined draws tell apart (10 draws an input are wanted). LAC_INTERRUPTED, LAC_NO_MEMORY.
   Notes: y is fitted by a sum of one polynomial for each input, and products of two inputs, all at once, in polynomials orthonormal over
   the input's distribution; what is left is averaged in bins of each input, which catches steps. Both are freed of the bias that a finite
   number of draws gives them. For a sum of smooth functions of the inputs the sampling error nearly vanishes; what remains is that of their
   interaction. What the shares lack of 1 is interaction. One thread computes them: they are the same on any number of threads.
   Source: the shares, Sobol' 1993, Mathematical Modelling and Computational Experiment 1, 407 (from memory); orthonormal polynomials for
   them, Sudret 2008, Reliability Engineering and System Safety 93, 964 (from memory). */
lac_status lac_first_order_shares(lac_work *work, size_t n, const double *y, size_t inputs, const lac_share_input *x, lac_share *shares,
                                  size_t *defined);

#ifdef __cplusplus
}
#endif

#endif
