/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Times the opacity table of 200 wavelengths by 200 sizes from 0.005 um to 1 mm on one thread and on two, the making of a dust with all its
   tables, and a Planck mean. Prints a name and the best time of several on each line, in s or us as the name says. */
#include <gsl/gsl_errno.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

#include "grains.h"

enum { WAVELENGTHS = 200, ROUNDS = 5, MEANS = 200 };

static double seconds(void) {
  struct timespec now;
  clock_gettime(CLOCK_MONOTONIC, &now);
  return (double)now.tv_sec + 1e-9 * (double)now.tv_nsec;
}

static double time_table(const lac_dust *dust, const lac_sizes *sizes, int threads) {
  lac_work work;
  double wavelength[WAVELENGTHS], best = INFINITY;
  static lac_opacity opacity[WAVELENGTHS];
  lac_work_start(&work, threads, (size_t)1 << 30);
  for (int i = 0; i < WAVELENGTHS; i++) wavelength[i] = 1e-7 * pow(1e5, (double)i / (WAVELENGTHS - 1));
  for (int round = 0; round < ROUNDS; round++) {
    const double start = seconds();
    if (lac_grains_opacities(&work, dust, sizes, WAVELENGTHS, wavelength, opacity) != LAC_OK) exit(1);
    best = fmin(best, seconds() - start);
  }
  lac_work_end(&work);
  return best;
}

static double time_mean(const lac_dust *dust) {
  double mean, error, best = INFINITY;
  for (int round = 0; round < ROUNDS; round++) {
    const double start = seconds();
    for (int i = 0; i < MEANS; i++)
      if (lac_dust_planck_mean(dust, 100 + 7 * i, &mean, &error) == LAC_OUT_OF_RANGE) exit(1);
    best = fmin(best, (seconds() - start) / MEANS);
  }
  return best;
}

int main(void) {
  gsl_set_error_handler_off();
  lac_dust_recipe recipe = {.components = 1,
                            .material = {lac_material_named("model_silicate")},
                            .mass_fraction = {1},
                            .sizes = LAC_POWER_LAW,
                            .smallest = 5e-9,
                            .largest = 1e-3,
                            .index = 3.5,
                            .temperature = (double)NAN};
  lac_work work;
  lac_dust *dust;
  lac_sizes sizes;
  lac_work_start(&work, 2, (size_t)1 << 30);
  const double start = seconds();
  if (lac_dust_new(&work, &recipe, &dust, NULL, 0) != LAC_OK || lac_sizes_new(dust, 16, &sizes) != LAC_OK) return 1;
  const double made = seconds() - start;
  printf("opacity_table_one %.4f\n", time_table(dust, &sizes, 1));
  printf("opacity_table_two %.4f\n", time_table(dust, &sizes, 2));
  printf("opacity_table_spheres %zu\n", WAVELENGTHS * sizes.count);
  printf("dust_made_two %.4f\n", made);
  printf("planck_mean %.2f\n", 1e6 * time_mean(dust));
  lac_sizes_free(&sizes);
  lac_dust_drop(dust);
  lac_work_end(&work);
  return 0;
}
