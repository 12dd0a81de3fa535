/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The yardstick for the chain of eight relations: the same by one loop over ten million fluxes, fused by hand, into memory that was touched
   before. Prints ns an element, the best of several rounds. */
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

#include "clones.h"
#include "lacuna/constants.h"

enum { COUNT = 10000000, ROUNDS = 7 };

LAC_CLONES static void fused(size_t n, double *restrict out, const double *restrict flux, double distance, double temperature, double resolution) {
  const double pi = 3.14159265358979323846;
  const double square = temperature * temperature, dilution = 16 * pi * LAC_STEFAN_BOLTZMANN * square * square;
  for (size_t i = 0; i < n; i++) {
    const double luminosity = 4 * pi * distance * distance * flux[i], radius = sqrt(luminosity / dilution), size = 2 * (radius / distance);
    out[i] = size / resolution >= 1 ? 1.0 : 0.0;
  }
}

static double seconds(void) {
  struct timespec now;
  clock_gettime(CLOCK_MONOTONIC, &now);
  return (double)now.tv_sec + 1e-9 * (double)now.tv_nsec;
}

int main(void) {
  double *flux = malloc(COUNT * sizeof *flux), *out = calloc(COUNT, sizeof *out), best = 1e9;
  if (flux == NULL || out == NULL) return 1;
  for (size_t i = 0; i < COUNT; i++) flux[i] = 1e-11 + 8e-11 * (double)i / COUNT;
  for (int round = 0; round < ROUNDS; round++) {
    const double start = seconds();
    fused(COUNT, out, flux, 156 * LAC_PC, 1500, 1.65e-6 / 260);
    best = fmin(best, seconds() - start);
  }
  printf("%.3f\n", best * 1e9 / COUNT);
  free(flux), free(out);
  return 0;
}
