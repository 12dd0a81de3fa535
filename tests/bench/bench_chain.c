/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Times the catalogue (built at the first use of a name) and the chain (settled for all names at once) on one core: random givens,
   each set timed in several rounds and its best taken. Fails where the chain of any set takes longer than is required. */
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

#include "lacuna/chain.h"

enum { SETS = 2000, ROUNDS = 5 };

static const double required = 5e-3;

static double seconds(void) {
  struct timespec now;
  clock_gettime(CLOCK_MONOTONIC, &now);
  return (double)now.tv_sec + 1e-9 * (double)now.tv_nsec;
}

static lac_catalogue *new_catalogue(double *took) {
  lac_catalogue *catalogue;
  const double start = seconds();
  if (lac_catalogue_new(&catalogue, NULL, 0) != LAC_OK) exit(1);
  *took = seconds() - start;
  return catalogue;
}

static double best_of_settling(const lac_catalogue *catalogue, const bool *given, bool *at_once) {
  double best = INFINITY;
  for (int round = 0; round < ROUNDS; round++) {
    lac_chain *chain;
    int culprit;
    const double start = seconds();
    if (lac_chain_settle(catalogue, given, NULL, &chain, &culprit) != LAC_OK) exit(1);
    best = fmin(best, seconds() - start);
    *at_once = lac_chain_settled_at_once(chain);
    lac_chain_free(chain);
  }
  return best;
}

int main(void) {
  double first, best = INFINITY, longest[2] = {0, 0}, sum = 0;
  lac_catalogue *catalogue = new_catalogue(&first);
  for (int round = 0; round < ROUNDS * ROUNDS; round++) {
    double took;
    lac_catalogue_free(new_catalogue(&took));
    best = fmin(best, took);
  }
  const int names = lac_catalogue_names(catalogue);
  bool *given = malloc((size_t)names * sizeof *given);
  if (!given) return 1;
  srand(1);
  for (int set = 0; set < SETS; set++) {
    const int share = rand() % 100;
    for (int id = 0; id < names; id++) given[id] = rand() % 200 < share;
    bool at_once;
    const double took = best_of_settling(catalogue, given, &at_once);
    longest[at_once] = fmax(longest[at_once], took);
    sum += took;
  }
  printf("catalogue of %d names and %d rows: first built in %.0f us, again in %.0f us\n", names, lac_catalogue_rows(catalogue), 1e6 * first,
         1e6 * best);
  printf("chain of all names: %.1f us on average, at most %.1f us (step 3 sufficed), %.1f us (step 4); required: below %.0f us\n",
         1e6 * sum / SETS, 1e6 * longest[1], 1e6 * longest[0], 1e6 * required);
  free(given);
  lac_catalogue_free(catalogue);
  return longest[0] < required && longest[1] < required ? 0 : 1;
}
