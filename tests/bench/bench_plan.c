/* SPDX-License-Identifier: GPL-3.0-or-later */
/* How fast plans are: nanoseconds an element, best of several runs, and what they are compared with in the same run. Memory of streamed
   folds over 1e8 draws. Ends with status 1 where a bound is not kept. Usage: bench_plan [THREADS] */
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/resource.h>
#include <time.h>

#include "clones.h"
#include "lacuna/plan.h"
#include "relation.h"

static double now(void) {
  struct timespec t;
  clock_gettime(CLOCK_MONOTONIC, &t);
  return (double)t.tv_sec + 1e-9 * (double)t.tv_nsec;
}

static void must(lac_status status) {
  if (status == LAC_OK) return;
  fprintf(stderr, "bench_plan: %s\n", lac_status_words(status));
  exit(1);
}

static int missed;

static void row(const char *what, double measured, const char *unit, double bound) {
  const int kept = measured <= bound;
  missed += !kept;
  printf("%-66s %9.3f %-10s required <= %7.3f  %s\n", what, measured, unit, bound, kept ? "ok" : "MISSED");
}

static lac_axis *axis(const char *name, size_t length) {
  lac_axis *made;
  must(lac_axis_new(name, length, NULL, &made));
  return made;
}

/* A positive sweep. */
static lac_value *sweep(lac_axis *along, double low, double high) {
  lac_value *made;
  double *data = malloc(along->length * sizeof *data);
  if (!data) must(LAC_NO_MEMORY);
  for (size_t i = 0; i < along->length; i++) data[i] = low + (high - low) * (double)i / (double)along->length;
  must(lac_value_array(1, &along, data, &made));
  free(data);
  return made;
}

static lac_value *number(double x) {
  lac_value *made;
  must(lac_value_number(x, &made));
  return made;
}

/* Gives its arguments away. */
static lac_value *apply(lac_block_function *block, lac_value *a, lac_value *b) {
  lac_value *made;
  must(lac_value_computed(block, b ? 2 : 1, (lac_value *[]){a, b}, &made));
  lac_value_drop(a);
  lac_value_drop(b);
  return made;
}

/* ---- a chain of eight relations over one long axis ---- */

/* Cheap relations as they are written for the tables: each checks its domain. */
double lac_quotient(double a, double b), lac_product(double a, double b), lac_root(double a, double b);
LAC_RELATION(quotient, a, b) { return lac_where((a > 0) & (b > 0), a / b); }
LAC_RELATION(product, a, b) { return lac_where((a > 0) & (b > 0), a * b); }
LAC_RELATION(root, a, b) { return lac_where((a > 0) & (b > 0), sqrt(a / b)); }

static lac_value *chain_of_eight(lac_value *x) {
  lac_value *y = apply(quotient_block, lac_value_keep(x), number(1.25));
  y = apply(product_block, y, lac_value_keep(x));
  y = apply(root_block, y, number(3));
  y = apply(product_block, y, number(0.7));
  y = apply(quotient_block, y, lac_value_keep(x));
  y = apply(root_block, y, number(2));
  y = apply(product_block, y, lac_value_keep(x));
  return apply(quotient_block, y, number(1.1));
}

LAC_CLONES static void fused(size_t n, double *restrict out, const double *restrict x) {
  for (size_t i = 0; i < n; i++) {
    double y = quotient_body(x[i], 1.25);
    y = product_body(y, x[i]);
    y = root_body(y, 3);
    y = product_body(y, 0.7);
    y = quotient_body(y, x[i]);
    y = root_body(y, 2);
    y = product_body(y, x[i]);
    out[i] = quotient_body(y, 1.1);
  }
}

static void chain(lac_work *work) {
  const size_t n = 10000000;
  lac_axis *a = axis("sweep", n);
  lac_value *x = sweep(a, 1, 2);
  double plan = INFINITY, hand = INFINITY;
  double *out = malloc(n * sizeof *out);
  if (!out) must(LAC_NO_MEMORY);
  for (int k = 0; k < 7; k++) {
    lac_value *y = chain_of_eight(x);
    double start = now();
    must(lac_plan_store(work, y));
    plan = fmin(plan, now() - start);
    start = now();
    fused(n, out, lac_value_data(x));
    hand = fmin(hand, now() - start);
    if (memcmp(out, lac_value_data(y), n * sizeof *out) != 0) must(LAC_OUT_OF_RANGE);
    lac_value_drop(y);
  }
  printf("eight relations over 1e7 elements: plan %.2f, hand-fused on one thread %.2f ns an element\n", plan / (double)n * 1e9,
         hand / (double)n * 1e9);
  row("eight relations, plan over hand-fused", plan / hand, "", 2);
  free(out);
  lac_value_drop(x);
  lac_axis_drop(a);
}

/* ---- Hill radii on a grid ---- */

static const lac_relation *hill(void) {
  const lac_relation *relation = lac_orbit_relations;
  while (strcmp(relation->gives, "hill_radius") != 0) relation++;
  return relation;
}

LAC_CLONES static void hill_by_hand(size_t n, double *restrict out, const double *a, const double *q, double *restrict factor) {
  for (size_t j = 0; j < n; j++) factor[j] = cbrt(q[j] / 3);
  for (size_t i = 0; i < n; i++)
    for (size_t j = 0; j < n; j++) out[i * n + j] = a[i] * factor[j];
}

static void grid(lac_work *work) {
  const size_t n = 1000;
  lac_axis *x = axis("planet_mass", n), *y = axis("planet_semi_major_axis", n);
  lac_value *mass = sweep(x, 1e-5, 1e-2), *radius = sweep(y, 1e11, 1e13);
  double *out = malloc((n + 1) * n * sizeof *out), plan = INFINITY, hand = INFINITY;
  if (!out) must(LAC_NO_MEMORY);
  for (int k = 0; k < 200; k++) {
    lac_value *result;
    double start = now();
    must(lac_value_scaled(hill()->shape, 2, (lac_value *[]){radius, mass}, &result));
    must(lac_plan_store(work, result));
    plan = fmin(plan, now() - start);
    lac_value_drop(result);
    start = now();
    hill_by_hand(n, out, lac_value_data(radius), lac_value_data(mass), out + n * n);
    hand = fmin(hand, now() - start);
  }
  printf("Hill radii, 1000 x 1000: plan %.3f, by hand on one thread %.3f ns an element\n", plan / (double)(n * n) * 1e9,
         hand / (double)(n * n) * 1e9);
  row("Hill grid, plan over two loops by hand", plan / hand, "", 2);
  free(out);
  lac_value_drop(mass), lac_value_drop(radius), lac_axis_drop(x), lac_axis_drop(y);
}

/* ---- tiny axes ---- */

static void tiny(lac_work *work) {
  lac_axis *x[] = {axis("a", 10), axis("b", 10), axis("c", 10)};
  lac_value *value[3];
  for (int i = 0; i < 3; i++) value[i] = sweep(x[i], 1, 2);
  double best = INFINITY;
  for (int k = 0; k < 2000; k++) {
    const double start = now();
    lac_value *sum = lac_value_keep(value[0]);
    for (int i = 1; i < 9; i++) sum = apply(i % 2 ? lac_block_add : lac_block_multiply, sum, lac_value_keep(value[i % 3]));
    must(lac_plan_store(work, sum));
    best = fmin(best, now() - start);
    lac_value_drop(sum);
  }
  row("eight steps over 10 x 10 x 10, making included", best * 1e6, "us", 50);
  for (int i = 0; i < 3; i++) lac_value_drop(value[i]), lac_axis_drop(x[i]);
}

/* ---- six spreads to a verdict ---- */

static lac_value *normal(lac_axis *draw, double median, double deviation, uint64_t key) {
  const lac_spread spread = {.kind = LAC_NORMAL, .a = median, .b = deviation, .key = key};
  lac_value *made;
  must(lac_value_drawn(draw, &spread, &made));
  return made;
}

/* A rim's radius from flux, distance and temperature, its angle, and whether it passes half a fringe: as costly as the true chain. */
static lac_value *angle(lac_axis *draw) {
  lac_value *flux = normal(draw, 2.4, 0.2, 1), *distance = normal(draw, 156, 3, 2), *temperature = normal(draw, 1500, 50, 3);
  lac_value *luminosity = apply(lac_block_multiply, flux, apply(lac_block_multiply, lac_value_keep(distance), lac_value_keep(distance)));
  lac_value *square = apply(lac_block_multiply, temperature, lac_value_keep(temperature));
  lac_value *radius = apply(lac_block_divide, apply(lac_block_root, luminosity, NULL), square);
  radius = apply(lac_block_multiply, radius, normal(draw, 1, 0.1, 4));
  return apply(lac_block_divide, radius, distance);
}

static lac_value *verdict(lac_axis *draw) {
  lac_value *resolution = apply(lac_block_divide, normal(draw, 1.65, 0.01, 5), normal(draw, 2.4e6, 1e4, 6));
  return apply(lac_block_above, angle(draw), resolution);
}

static void share(lac_work *work) {
  const size_t n = 1000000;
  lac_axis *draw = axis("draw", n);
  const lac_spread spread = {.kind = LAC_NORMAL, .a = 1, .b = 1, .key = 1};
  double *block = malloc(LAC_BLOCK * sizeof *block), plan = INFINITY, bare = INFINITY;
  if (!block) must(LAC_NO_MEMORY);
  for (int k = 0; k < 7; k++) {
    lac_value *resolved = verdict(draw), *chance;
    double start = now();
    must(lac_plan_fold(work, resolved, "draw", LAC_FOLD_SHARE, &chance));
    plan = fmin(plan, now() - start);
    lac_value_drop(resolved), lac_value_drop(chance);
    start = now();
    for (size_t i = 0; i < 6 * n; i += LAC_BLOCK) lac_draws(&spread, i, LAC_BLOCK, block);
    bare = fmin(bare, now() - start);
  }
  printf("six normals to a share, 1e6 draws: plan %.1f, the draws alone on one thread %.1f ns a draw\n", plan / (double)n * 1e9,
         bare / (double)n * 1e9);
  row("share of a verdict, plan over bare draws", plan / bare, "", 1.4);
  free(block);
  lac_axis_drop(draw);
}

static void streamed(lac_work *work) {
  lac_axis *draw = axis("draw", 100000000);
  const double levels[] = {0.16, 0.5, 0.84};
  lac_value *resolved = verdict(draw), *size = angle(draw), *result[4];
  double start = now();
  must(lac_plan_fold(work, resolved, "draw", LAC_FOLD_SHARE, &result[3]));
  printf("chance over 1e8 draws: %.2f s; ", now() - start);
  start = now();
  must(lac_plan_quantiles(work, size, "draw", 3, levels, result));
  printf("interval: %.2f s\n", now() - start);
  struct rusage usage;
  getrusage(RUSAGE_SELF, &usage);
  row("largest memory of both", (double)usage.ru_maxrss / 1e3, "MB", 100);
  for (int i = 0; i < 4; i++) lac_value_drop(result[i]);
  lac_value_drop(resolved), lac_value_drop(size), lac_axis_drop(draw);
}

int main(int count, char **arguments) {
  lac_work work;
  lac_work_start(&work, count > 1 ? atoi(arguments[1]) : 1, (size_t)2 << 30);
  printf("%d thread(s)\n", work.threads);
  streamed(&work); /* first: the largest memory is that of all before */
  tiny(&work);
  chain(&work);
  grid(&work);
  share(&work);
  lac_work_end(&work);
  return missed > 0;
}
