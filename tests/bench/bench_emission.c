/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Spectral energy distributions of star, rim and disc behind some extinction, through the chain: 300 wavelengths, and the same with
   10 000 draws of seven givens, on two threads; best of several runs. Ends with status 1 where one takes longer than is required.
   Usage: bench_emission [THREADS] */
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

#include "lacuna/constants.h"
#include "lacuna/draws.h"
#include "lacuna/plan.h"

enum { WAVELENGTHS = 300, DRAWS = 10000, ROUNDS = 3 };

static const double sed_allowed = 5e-3, draws_allowed = 2;

static int missed;

static void must(lac_status status) {
  if (status == LAC_OK) return;
  fprintf(stderr, "bench_emission: %s\n", lac_status_words(status));
  exit(1);
}

static double now(void) {
  struct timespec t;
  clock_gettime(CLOCK_MONOTONIC, &t);
  return (double)t.tv_sec + 1e-9 * (double)t.tv_nsec;
}

/* An invented star and disc: value, and relative error where it is drawn. */
static const struct {
  const char *name;
  double value, error;
} givens[] = {
    {"stellar_radius", 1.7 * 6.957e8, 0.05},
    {"effective_temperature", 8200, 0.02},
    {"distance", 152 * 3.0856775814913673e16, 0.02},
    {"sublimation_temperature", 1500, 0.05},
    {"rim_radius", 0.42 * 149597870700.0, 0.1},
    {"rim_height_ratio", 0.15, 0},
    {"inclination", 0.6, 0.1},
    {"disc_outer_radius", 120 * 149597870700.0, 0},
    {"temperature_at_one_au", 210, 0.1},
    {"temperature_index", 0.5, 0},
    {"dust_surface_density_at_one_au", 20, 0},
    {"dust_surface_density_index", 1, 0},
    {"extinction", 0.4, 0},
};
static const struct {
  const char *name;
  double value;
} gap[] = {{"gap_inner_radius", 8 * 149597870700.0}, {"gap_outer_radius", 14 * 149597870700.0}};

enum { GIVENS = sizeof givens / sizeof givens[0], GAP = sizeof gap / sizeof gap[0] };

typedef struct {
  const lac_catalogue *catalogue;
  const lac_chain *chain;
  bool *given;
  lac_axis *wavelength, *draw;
} bench;

static int find(const lac_catalogue *catalogue, const char *name) {
  const int id = lac_catalogue_find(catalogue, name);
  if (id < 0) must(LAC_UNKNOWN_NAME);
  return id;
}

static lac_value *given_value(const bench *b, size_t i, bool drawn) {
  lac_value *value;
  const lac_spread spread = {.kind = LAC_NORMAL, .a = givens[i].value, .b = givens[i].value * givens[i].error, .key = i + 1};
  must(drawn && spread.b > 0 ? lac_value_drawn(b->draw, &spread, &value) : lac_value_number(givens[i].value, &value));
  return value;
}

/* An opacity of 10 cm^2 per gram at 1 mm that grows with the frequency. */
static lac_value *opacity(const bench *b) {
  double data[WAVELENGTHS];
  lac_value *value;
  for (size_t i = 0; i < WAVELENGTHS; i++) data[i] = 1e-3 / b->wavelength->coordinates[i];
  must(lac_value_array(1, (lac_axis *[]){b->wavelength}, data, &value));
  return value;
}

static double run(const bench *b, lac_work *work, bool drawn) {
  const int names = lac_catalogue_names(b->catalogue), asked = find(b->catalogue, "observed_flux_density");
  double best = INFINITY;
  for (int round = 0; round < ROUNDS; round++) {
    lac_value **values = calloc((size_t)names, sizeof *values);
    if (!values) must(LAC_NO_MEMORY);
    must(lac_value_swept(b->wavelength, &values[find(b->catalogue, "wavelength")]));
    values[find(b->catalogue, "dust_opacity")] = opacity(b);
    for (size_t i = 0; i < GIVENS; i++) values[find(b->catalogue, givens[i].name)] = given_value(b, i, drawn);
    for (size_t i = 0; i < GAP; i++)
      if (b->given[find(b->catalogue, gap[i].name)]) must(lac_value_number(gap[i].value, &values[find(b->catalogue, gap[i].name)]));
    const double start = now();
    must(lac_plan_ask(b->chain, values, asked));
    must(lac_plan_store(work, values[asked]));
    best = fmin(best, now() - start);
    if (!(lac_value_data(values[asked])[0] > 0)) must(LAC_OUT_OF_RANGE);
    for (int id = 0; id < names; id++) lac_value_drop(values[id]);
    free(values);
  }
  return best;
}

static void row(const char *what, const char *by, double measured, const char *unit, double allowed) {
  missed += !(measured <= allowed);
  printf("%-14s %-32s %8.3f %-3s required <= %.3f  %s\n", what, by, measured, unit, allowed, measured <= allowed ? "ok" : "MISSED");
}

static void recipe(bench *b, lac_work *work, const char *by) {
  const int names = lac_catalogue_names(b->catalogue);
  int *only = malloc((size_t)names * sizeof *only), culprit;
  if (!only) must(LAC_NO_MEMORY);
  for (int id = 0; id < names; id++) only[id] = -1;
  const int disc = find(b->catalogue, "disc_flux_density");
  only[disc] = lac_catalogue_find_row(b->catalogue, disc, by);
  for (size_t i = 0; i < GAP; i++) b->given[find(b->catalogue, gap[i].name)] = strstr(by, "_with_gap") != NULL;
  lac_chain *chain;
  must(lac_chain_settle(b->catalogue, b->given, only, &chain, &culprit));
  b->chain = chain;
  row("sed_300", by, run(b, work, false) * 1e3, "ms", sed_allowed * 1e3);
  row("sed_300_draws", by, run(b, work, true), "s", draws_allowed);
  lac_chain_free(chain);
  free(only);
}

int main(int count, char **arguments) {
  lac_catalogue *catalogue;
  lac_work work;
  double wavelengths[WAVELENGTHS];
  for (size_t i = 0; i < WAVELENGTHS; i++) wavelengths[i] = 0.4e-6 * pow(3e-3 / 0.4e-6, (double)i / (WAVELENGTHS - 1));
  must(lac_catalogue_new(&catalogue, NULL, 0));
  bench b = {.catalogue = catalogue, .given = calloc((size_t)lac_catalogue_names(catalogue), sizeof(bool))};
  if (!b.given) must(LAC_NO_MEMORY);
  must(lac_axis_new("wavelength", WAVELENGTHS, wavelengths, &b.wavelength));
  must(lac_axis_new("draw", DRAWS, NULL, &b.draw));
  b.given[find(catalogue, "wavelength")] = b.given[find(catalogue, "dust_opacity")] = true;
  for (size_t i = 0; i < GIVENS; i++) b.given[find(catalogue, givens[i].name)] = true;
  lac_work_start(&work, count > 1 ? atoi(arguments[1]) : 2, (size_t)1 << 30);
  static const char *const recipes[] = {"beckwith_1990", "beckwith_1990_with_gap", "chiang_goldreich_1997",
                                        "chiang_goldreich_1997_with_gap"};
  for (size_t i = 0; i < sizeof recipes / sizeof recipes[0]; i++) recipe(&b, &work, recipes[i]);
  lac_work_end(&work);
  lac_axis_drop(b.wavelength), lac_axis_drop(b.draw);
  free(b.given);
  lac_catalogue_free(catalogue);
  return missed > 0;
}
