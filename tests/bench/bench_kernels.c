/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Times the kernels, the draws and the Planck function on one core. Prints a name and the best time in ns an element on each line.
   Every function is timed in several rounds, all functions alternating in each round, so that a slow spell of the machine meets all alike.
 */
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

#include "lacuna/catalogue.h"
#include "lacuna/constants.h"
#include "lacuna/draws.h"
#include "lacuna/kernels.h"
#include "lacuna/planck.h"
#include "relation.h"

enum { LONG = 10000000, MILLION = 1000000, BLOCK = 1024, ROUNDS = 9 };

/* What the timed functions work on: filled once, so that no first touch of memory is timed. */
typedef struct {
  double *wavelength, *temperature, *out;       /* LONG */
  double *argument, *small_argument, *positive; /* MILLION */
  lac_block_function *planck_nu;
} bench;

static double seconds(void) {
  struct timespec now;
  clock_gettime(CLOCK_MONOTONIC, &now);
  return (double)now.tv_sec + 1e-9 * (double)now.tv_nsec;
}

static void planck_nu(const bench *b) {
  const double *in[] = {b->wavelength, b->temperature};
  b->planck_nu(LONG, b->out, in);
}

static void planck_nu_spectrum(const bench *b) { lac_planck_nu_block(LONG, b->out, b->wavelength, 1500); }

static void planck_nu_scalar(const bench *b) {
  for (size_t i = 0; i < MILLION; i++) b->out[i] = lac_planck_nu(b->wavelength[i], b->temperature[i]);
}

static void j0_to_50(const bench *b) { lac_kernel_j0(MILLION, b->out, b->argument); }
static void j0_to_8(const bench *b) { lac_kernel_j0(MILLION, b->out, b->small_argument); }
static void exponential(const bench *b) { lac_kernel_exp(MILLION, b->out, b->small_argument); }
static void exponential_less_one(const bench *b) { lac_kernel_expm1(MILLION, b->out, b->small_argument); }
static void logarithm(const bench *b) { lac_kernel_log(MILLION, b->out, b->positive); }

static void draw(const bench *b, lac_spread spread) {
  spread.key = lac_draws_key(1, NULL, "bench");
  for (size_t i = 0; i < MILLION; i += BLOCK) lac_draws(&spread, i, BLOCK < MILLION - i ? BLOCK : MILLION - i, b->out);
}

static void normal(const bench *b) { draw(b, (lac_spread){.kind = LAC_NORMAL, .a = 156, .b = 3}); }
static void lopsided(const bench *b) { draw(b, (lac_spread){.kind = LAC_LOPSIDED, .a = 156, .b = 4, .c = 2}); }
static void uniform(const bench *b) { draw(b, (lac_spread){.kind = LAC_UNIFORM, .a = 1, .b = 2}); }
static void log_normal(const bench *b) { draw(b, (lac_spread){.kind = LAC_LOG_NORMAL, .a = 156, .b = 0.1}); }

/* Six normals into a rim radius and its angle, compared with a resolution: ns a draw. */
static void rim_of_six_normals(const bench *b) {
  static const char *const names[6] = {"flux", "distance", "temperature", "efficiency", "baseline", "wavelength"};
  static const double medians[6] = {2.4e-11, 4.8e18, 1500, 0.4, 280, 1.65e-6};
  double given[6][BLOCK];
  lac_spread spreads[6];
  for (int g = 0; g < 6; g++)
    spreads[g] = (lac_spread){.kind = LAC_NORMAL, .a = medians[g], .b = 0.02 * medians[g], .key = lac_draws_key(1, "invented", names[g])};
  for (size_t i = 0; i < MILLION; i += BLOCK) {
    size_t n = BLOCK < MILLION - i ? BLOCK : MILLION - i;
    for (int g = 0; g < 6; g++) lac_draws(&spreads[g], i, n, given[g]);
    for (size_t k = 0; k < n; k++) {
      double luminosity = 4 * 3.141592653589793 * given[1][k] * given[1][k] * given[0][k], square = given[2][k] * given[2][k];
      double radius = sqrt(luminosity / (16 * 3.141592653589793 * LAC_STEFAN_BOLTZMANN * square * square * given[3][k]));
      b->out[i + k] = radius / given[1][k] * 2 * given[4][k] / given[5][k];
    }
  }
}

typedef struct {
  const char *name;
  void (*run)(const bench *);
  double count;
} timed;

static const timed list[] = {{"planck_nu", planck_nu, LONG},
                             {"planck_nu_one_temperature", planck_nu_spectrum, LONG},
                             {"planck_nu_scalar", planck_nu_scalar, MILLION},
                             {"j0", j0_to_50, MILLION},
                             {"j0_below_8", j0_to_8, MILLION},
                             {"exp", exponential, MILLION},
                             {"expm1", exponential_less_one, MILLION},
                             {"log", logarithm, MILLION},
                             {"normal", normal, MILLION},
                             {"lopsided", lopsided, MILLION},
                             {"uniform", uniform, MILLION},
                             {"log_normal", log_normal, MILLION},
                             {"rim_of_six_normals", rim_of_six_normals, MILLION}};
enum { LISTED = sizeof list / sizeof list[0] };

static double *filled(size_t n, double low, double high) {
  double *x = malloc(n * sizeof *x);
  if (!x) exit(1);
  lac_spread spread = {.kind = LAC_UNIFORM, .a = low, .b = high, .key = n};
  lac_draws(&spread, 0, n, x);
  return x;
}

int main(void) {
  bench b = {filled(LONG, 1e-6, 20e-6),
             filled(LONG, 300, 3000),
             filled(LONG, 0, 1),
             filled(MILLION, 0, 50),
             filled(MILLION, 0, 8),
             filled(MILLION, 1e-9, 1),
             NULL};
  for (const lac_relation *row = lac_planck_relations; row->gives; row++)
    if (row->function == (void (*)(void))lac_planck_nu) b.planck_nu = row->block;
  double best[LISTED];
  for (int t = 0; t < LISTED; t++) best[t] = (double)INFINITY;
  for (int round = 0; round < ROUNDS; round++)
    for (int t = 0; t < LISTED; t++) {
      double start = seconds();
      list[t].run(&b);
      best[t] = fmin(best[t], seconds() - start);
    }
  for (int t = 0; t < LISTED; t++) printf("%s %.2f\n", list[t].name, best[t] * 1e9 / list[t].count);
  free(b.wavelength), free(b.temperature), free(b.out), free(b.argument), free(b.small_argument), free(b.positive);
  return 0;
}
