/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Counter-based random draws: the i-th draw of a spread depends on its key and on i alone, so the
   same numbers come on any number of threads, in any order, and on any processor. */
#ifndef LACUNA_DRAWS_H
#define LACUNA_DRAWS_H

#include <stddef.h>
#include <stdint.h>

#include "lacuna/status.h"

#ifdef __cplusplus
extern "C" {
#endif

typedef enum {
  LAC_NORMAL,      /* a median, b standard deviation */
  LAC_LOPSIDED,    /* a median, b upper and c lower deviation: two half-normals, half the draws on each side */
  LAC_UNIFORM,     /* from a to b */
  LAC_LOG_UNIFORM, /* from a to b, both > 0 */
  LAC_LOG_NORMAL,  /* a median > 0, b the standard deviation of the natural logarithm */
  LAC_SAMPLES      /* one of count samples, each as likely */
} lac_spread_kind;

typedef struct {
  lac_spread_kind kind;
  double a, b, c;
  const double *samples; /* not owned */
  size_t count;
  uint64_t key;
} lac_spread;

/* The key of a spread, from the seed, the target (NULL or "": none) and the name of the given. */
uint64_t lac_draws_key(uint64_t seed, const char *target, const char *name);

/* The median of a spread (exact). NaN where its parameters are out of range. */
double lac_spread_median(const lac_spread *spread);
/* LAC_OK, or LAC_OUT_OF_RANGE: a deviation < 0, bounds reversed or not positive where they must be, no samples, anything not finite. */
lac_status lac_spread_check(const lac_spread *spread);

/* Draws number first ... first + n - 1 into out. Source: Salmon et al. 2011, SC11, Philox 4x32-10; Box & Muller 1958.
   Bit-identical whatever n, first, threads and processor. */
void lac_draws(const lac_spread *spread, uint64_t first, size_t n, double *out);

/* The bare generator, for checks: four words from counter and key. Philox 4x32-10. */
void lac_philox(const uint32_t counter[4], const uint32_t key[2], uint32_t out[4]);

#ifdef __cplusplus
}
#endif

#endif
