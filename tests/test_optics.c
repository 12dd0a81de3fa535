/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Scattering by a sphere: against tests/reference/mie.csv and random points of evaluated_mie.csv (both mpmath), printed tables, limits in
   closed form, and identities. Mixing rules: emt.csv, evaluated_bruggeman.csv, closed forms, identities. */
#include <complex.h>
#include <stdbool.h>
#include <sys/resource.h>

#include <gsl/gsl_errno.h>
#include <gsl/gsl_integration.h>

#include "check_table.h"
#include "lacuna/optics.h"

#define PI 3.14159265358979323846
#define UNIT 0x1p-53
enum { TRIALS = 400, NODES = 1024 };

static lac_efficiencies mie(double x, double n, double k) {
  lac_efficiencies e;
  assert_int_equal(lac_mie(1, &x, &n, &k, &e), LAC_OK);
  return e;
}

/* ---- Reference values ---- */

/* For extinction, scattering and absorption, at any size and however weak the absorption; no row of the tables needs it relaxed, for their
   conditions |d ln Q/d ln x| are below 130, and some 20 roundings of the weight of that of x stay below 3e-13. */
#define PROMISED 1e-12

/* The backward amplitude's terms are of order n and of either sign. Its condition says what rounding x does; and where it is small against
   its own terms (soft spheres, large black ones), 1e-15 of the greatest of them, 2x/x, is left in what is then squared. */
static double backscatter_allowed(double x, double backscatter, double condition) {
  const double roundings = 20;
  return fmax(PROMISED, roundings * 1e-16 * condition) * backscatter + 1e-15 * fmax(x, 1) * sqrt(backscatter);
}

/* A ratio of sums, of the order of x^2 for small x, which may pass through zero. In nearly transparent spheres the coefficients are of
   order m - 1, as differences of numbers of order 1. */
static double asymmetry_allowed(double x, double n, double k) { return (x < 1 ? 1e-15 : 1e-14) + UNIT / hypot(n - 1, k); }

/* Columns n, k, x, Qext, Qsca, Qabs, Qback, g, and the conditions of Qext, Qsca, Qback, g. */
static void check_row(const long double *row) {
  double x = (double)row[3];
  lac_efficiencies e = mie(x, (double)row[1], (double)row[2]);
  check_within((double)row[4], e.extinction, PROMISED, "extinction");
  check_within((double)row[5], e.scattering, PROMISED, "scattering");
  check_within((double)row[6], e.absorption, PROMISED, "absorption");
  check_near((double)row[7], e.backscatter, backscatter_allowed(x, (double)row[7], (double)row[11]), "backscatter");
  check_near((double)row[8], e.asymmetry, asymmetry_allowed(x, (double)row[1], (double)row[2]), "asymmetry");
  assert_true(row[9] < 130 && row[10] < 130);
}

static void reference_table(void **state) {
  (void)state;
  check_table *table = check_read_table("tests/reference/mie.csv");
  for (size_t i = 0; i < table->rows; i++) check_row(table->cell[i]);
  assert_int_equal(table->rows, 112);
  free(table);
}

/* Columns x, n, k, Qext, Qsca, Qabs, Qback, g, condition of Qback, cosine, phase, polarisation. */
static void random_points(void **state) {
  (void)state;
  check_table *table = check_read_table("tests/reference/evaluated_mie.csv");
  for (size_t i = 0; i < table->rows; i++) {
    const long double *row = table->cell[i];
    double x = (double)row[0], n = (double)row[1], k = (double)row[2], cosine = (double)row[9], phase, polarisation;
    lac_efficiencies e = mie(x, n, k);
    check_within((double)row[3], e.extinction, PROMISED, "extinction");
    check_within((double)row[4], e.scattering, PROMISED, "scattering");
    check_within((double)row[5], e.absorption, PROMISED, "absorption");
    check_near((double)row[6], e.backscatter, backscatter_allowed(x, (double)row[6], (double)row[8]), "backscatter");
    check_near((double)row[7], e.asymmetry, asymmetry_allowed(x, n, k), "asymmetry");
    assert_int_equal(lac_mie_scattering(x, n, k, 1, &cosine, &phase, &polarisation), LAC_OK);
    double lost = fmax(x, 1) * (1e-15 + UNIT / hypot(n - 1, k)), amplitude = sqrt((double)row[10]); /* of the forward amplitude, about x */
    check_near((double)row[10], phase, 1e-13 * (double)row[10] + 2 * lost * amplitude, "phase function");
    check_near((double)row[11], polarisation, 1e-13 + 2 * lost / amplitude, "polarisation");
  }
  assert_int_equal(table->rows, 60);
  free(table);
}

/* Wiscombe 1979, NCAR Technical Note TN-140+STR, tables of test cases; Bohren & Huffman 1983, Appendix A: from memory. Half a unit of the
   last digit printed. */
static void printed_tables(void **state) {
  (void)state;
  static const struct {
    double x, n, k, extinction, scattering, asymmetry, digit, asymmetry_digit;
  } printed[] = {
      {10, 1.5, 0, 2.881999, 2.881999, 0.742913, 1e-6, 1e-6},
      {100, 1.5, 0, 2.094388, 2.094388, 0.818246, 1e-6, 1e-6},
      {1000, 1.5, 0, 2.013945, 2.013945, 0.827882, 1e-6, 1e-6},
      {1, 1.33, 1e-5, 0.093952, 0.093923, 0.184517, 1e-6, 1e-6},
      {100, 1.33, 1e-5, 2.101321, 2.096594, 0.868959, 1e-6, 1e-6},
      {1e4, 1.33, 1e-5, 2.004089, 1.723857, 0.907840, 1e-6, 1e-6},
      {0.055, 1.5, 1, 0.101491, 0.000011, 0.000491, 1e-6, 1e-6},
      {0.056, 1.5, 1, 0.103347, 0.000012, 0.000509, 1e-6, 1e-6},
      {1, 1.5, 1, 2.336321, 0.663454, 0.192136, 1e-6, 1e-6},
      {100, 1.5, 1, 2.097502, 1.283697, 0.850252, 1e-6, 1e-6},
      {1e4, 1.5, 1, 2.004368, 1.236574, 0.846310, 1e-6, 1e-6},
      {1, 10, 10, 2.532993, 2.049405, -0.110664, 1e-6, 1e-6},
      {100, 10, 10, 2.071124, 1.836785, 0.556215, 1e-6, 1e-6},
      {1e4, 10, 10, 2.005914, 1.795393, 0.548194, 1e-6, 1e-6},
      {0.099, 0.75, 0, 7.417859e-6, 7.417859e-6, 0.001448, 1e-12, 1e-6},
      {10, 0.75, 0, 2.232265, 2.232265, 0.896473, 1e-6, 1e-6},
      {1000, 0.75, 0, 1.997908, 1.997908, 0.844944, 1e-6, 1e-6},
  };
  for (size_t i = 0; i < sizeof printed / sizeof printed[0]; i++) {
    lac_efficiencies e = mie(printed[i].x, printed[i].n, printed[i].k);
    check_near(printed[i].extinction, e.extinction, 0.5001 * printed[i].digit, "printed extinction");
    check_near(printed[i].scattering, e.scattering, 0.5001 * printed[i].digit, "printed scattering");
    check_near(printed[i].asymmetry, e.asymmetry, 0.5001 * printed[i].asymmetry_digit, "printed asymmetry");
  }
  lac_efficiencies e = mie(2 * PI * 0.525 / 0.6328, 1.55, 0);
  check_near(3.10543, e.extinction, 0.5001e-5, "Bohren & Huffman, extinction");
  check_near(2.92534, e.backscatter, 0.5001e-5, "Bohren & Huffman, backscatter");
}

/* ---- Limits ---- */

/* Rayleigh 1871, in Bohren & Huffman 1983, Eqs. 5.8, 5.9; what is left out is of order |m|^2 x^2. */
static void small_spheres(void **state) {
  (void)state;
  uint64_t seed = 1;
  for (int i = 0; i < TRIALS; i++) {
    double x = check_log_uniform(&seed, 1e-6, 1e-4), n = check_uniform(&seed, 0.3, 4), k = check_log_uniform(&seed, 1e-8, 3);
    double complex square = CMPLX((n - k) * (n + k), 2 * n * k), contrast = (square - 1) / (square + 2);
    double polarised = cabs(contrast), next = 200 * x * x, resonance = 1 / cabs(square + 2);
    if (resonance > 1 || polarised < 0.01) continue;
    lac_efficiencies e = mie(x, n, k);
    /* Absorption's next term has scattering's imaginary part taken away, which weak absorption feels: compared only where that is small. */
    double imaginary = 6 * n * k / (cabs(square + 2) * cabs(square + 2));
    check_within(8.0 / 3 * x * x * x * x * polarised * polarised, e.scattering, next + 1e-13, "Rayleigh scattering");
    check_within(4 * x * imaginary, e.absorption, next + 1e-13, "Rayleigh absorption");
    assert_true(fabs(e.asymmetry) < 10 * x * x * (1 + n * n + k * k) / polarised);
  }
}

static double surface_reflection(double complex m, double mu) {
  double complex inside = csqrt(m * m - (1 - mu * mu));
  double complex across = (mu - inside) / (mu + inside), along = (m * m * mu - inside) / (m * m * mu + inside);
  return (creal(across * conj(across)) + creal(along * conj(along))) / 2;
}

/* Large and opaque: Qabs = 2 int (1 - R) mu dmu with Fresnel's reflection, Qback = |(m-1)/(m+1)|^2, Qext = 2 + 1.992386 x^(-2/3)
   (Nussenzveig & Wiscombe 1980, PRL 45, 1490, from memory). The curvature of the surface leaves x^(-2/3) in Qabs. */
static void large_opaque_spheres(void **state) {
  (void)state;
  gsl_integration_glfixed_table *rule = gsl_integration_glfixed_table_alloc(100);
  static const double indices[][2] = {{1.7, 0.03}, {1.5, 1}, {2.0, 0.6}, {11, 6}, {2.9, 3.4}};
  const double x = 1e5, edge = pow(x, -2.0 / 3);
  for (size_t i = 0; i < sizeof indices / sizeof indices[0]; i++) {
    double complex m = CMPLX(indices[i][0], indices[i][1]);
    double absorbed = 0;
    for (size_t j = 0; j < 100; j++) {
      double mu, weight;
      gsl_integration_glfixed_point(0, 1, j, &mu, &weight, rule);
      absorbed += 2 * weight * (1 - surface_reflection(m, mu)) * mu;
    }
    lac_efficiencies e = mie(x, creal(m), cimag(m));
    check_near(absorbed, e.absorption, edge, "Fresnel absorption");
    check_near(2 + 1.992386 * edge, e.extinction, 0.3 * edge, "edge term of the extinction");
    check_within(pow(cabs((m - 1) / (m + 1)), 2), e.backscatter, 1e-7, "normal reflection");
  }
  gsl_integration_glfixed_table_free(rule);
}

/* Nearly nothing there: van de Hulst 1957, section 11.21, with rho = 2 x (n - 1); and scattering as (n - 1)^2 for any x. */
static void nearly_transparent(void **state) {
  (void)state;
  const double x = 2000, n = 1.0005, rho = 2 * x * (n - 1);
  check_near(2 - 4 / rho * sin(rho) + 4 / (rho * rho) * (1 - cos(rho)), mie(x, n, 0).extinction, 4e-3, "anomalous diffraction");
  for (double at = 1e-3; at < 10; at *= 7) {
    double weak = mie(at, 1 + 0x1p-20, 0).scattering, weaker = mie(at, 1 + 0x1p-21, 0).scattering;
    check_within(4, weak / weaker, 1e-5, "scattering as the square of n - 1");
  }
  lac_efficiencies none = mie(3, 1, 0);
  assert_true(none.extinction == 0 && none.scattering == 0 && none.absorption == 0 && none.backscatter == 0 && none.asymmetry == 0);
}

/* ---- Identities ---- */

/* The phase function's mean is 1, its first moment the asymmetry, its value at 180 degrees the backscatter (4 |S|^2/x^2). */
static void phase_function(void **state) {
  (void)state;
  static const double spheres[][3] = {{1e-6, 1.7, 0.03}, {0.3, 1.2, 0.6},  {2, 4, 0},     {9, 1.55, 0.95},
                                      {40, 1.65, 1e-4},  {300, 1.7, 0.03}, {10, 150, 180}};
  gsl_integration_glfixed_table *rule = gsl_integration_glfixed_table_alloc(NODES);
  double cosine[NODES + 2], weight[NODES], phase[NODES + 2], polarisation[NODES + 2];
  for (size_t j = 0; j < NODES; j++) gsl_integration_glfixed_point(-1, 1, j, &cosine[j], &weight[j], rule);
  cosine[NODES] = -1;
  cosine[NODES + 1] = 1;
  for (size_t i = 0; i < sizeof spheres / sizeof spheres[0]; i++) {
    const double *s = spheres[i];
    lac_efficiencies e = mie(s[0], s[1], s[2]);
    assert_int_equal(lac_mie_scattering(s[0], s[1], s[2], NODES + 2, cosine, phase, polarisation), LAC_OK);
    double total = 0, moment = 0;
    for (size_t j = 0; j < NODES; j++) {
      total += weight[j] * phase[j] / 2;
      moment += weight[j] * phase[j] * cosine[j] / 2;
      assert_true(phase[j] > 0 && fabs(polarisation[j]) <= 1 + 4 * UNIT);
    }
    check_near(1, total, 1e-12, "mean of the phase function");
    check_near(e.asymmetry, moment, 1e-12, "first moment of the phase function");
    check_within(e.backscatter, phase[NODES] * e.scattering, 1e-11, "phase function at 180 degrees");
    check_near(0, polarisation[NODES], 1e-10, "polarisation at 180 degrees");
    check_near(0, polarisation[NODES + 1], 1e-10, "polarisation at 0 degrees");
  }
  gsl_integration_glfixed_table_free(rule);
}

/* Rayleigh: 3/4 (1 + mu^2), and (1 - mu^2)/(1 + mu^2). */
static void rayleigh_phase(void **state) {
  (void)state;
  double cosine[] = {-1, -0.5, 0, 0.3, 1}, phase[5], polarisation[5];
  assert_int_equal(lac_mie_scattering(1e-5, 1.5, 0.01, 5, cosine, phase, polarisation), LAC_OK);
  for (int i = 0; i < 5; i++) {
    double square = cosine[i] * cosine[i];
    check_within(0.75 * (1 + square), phase[i], 1e-9, "Rayleigh phase function");
    check_near((1 - square) / (1 + square), polarisation[i], 1e-9, "Rayleigh polarisation");
  }
}

enum { MANY = 1000 };

static void random_spheres(uint64_t seed, double *x, double *n, double *k) {
  for (int i = 0; i < MANY; i++) {
    x[i] = check_log_uniform(&seed, 1e-6, i % 50 == 0 ? 1e5 : 300);
    n[i] = check_log_uniform(&seed, 0.05, 30);
    k[i] = i % 3 == 0 ? 0 : check_log_uniform(&seed, 1e-12, 1000);
  }
}

/* The same bits alone, in company, and in the opposite order; a sphere outside the domain disturbs no other. Albedo and asymmetry stay in
 * range. */
static void company(void **state) {
  (void)state;
  static double x[MANY], n[MANY], k[MANY], back[3][MANY];
  static lac_efficiencies out[MANY], turned[MANY];
  random_spheres(7, x, n, k);
  x[500] = (double)NAN;
  assert_int_equal(lac_mie(MANY, x, n, k, out), LAC_OUT_OF_RANGE);
  for (int i = 0; i < MANY; i++) back[0][i] = x[MANY - 1 - i], back[1][i] = n[MANY - 1 - i], back[2][i] = k[MANY - 1 - i];
  assert_int_equal(lac_mie(MANY, back[0], back[1], back[2], turned), LAC_OUT_OF_RANGE);
  for (int i = 0; i < MANY; i++) {
    if (i == 500) {
      check_undefined(out[i].extinction, "a sphere outside the domain");
      continue;
    }
    lac_efficiencies alone = i % 10 == 0 ? mie(x[i], n[i], k[i]) : out[i];
    assert_memory_equal(&out[i], &alone, sizeof alone);
    assert_memory_equal(&out[i], &turned[MANY - 1 - i], sizeof alone);
    assert_true(out[i].scattering > 0 && out[i].absorption >= 0 && (out[i].absorption > 0 || k[i] == 0));
    assert_true(fabs(out[i].asymmetry) < 1 && out[i].backscatter >= 0);
    check_within(out[i].scattering + out[i].absorption, out[i].extinction, 4 * UNIT, "extinction is scattering and absorption");
  }
}

/* Neither more absorption in the index nor any switch of method within may let the result jump: the change is proportional to that of k. */
static void continuity(void **state) {
  (void)state;
  for (double x = 50; x < 2e4; x *= 3.7)
    for (double k = 1e-3; k < 3; k *= 1.13) {
      double here = mie(x, 2.1, k).absorption, there = mie(x, 2.1, k * (1 + 1e-10)).absorption;
      check_within(here, there, 1e-9, "absorption as k changes");
    }
}

static void bad_input(void **state) {
  (void)state;
  static const double bad[][3] = {{0.9e-6, 1.5, 0}, {1.1e5, 1.5, 0}, {1, 0, 1},          {1, -1.5, 0},     {1, 1.5, -1e-9}, {NAN, 1.5, 0},
                                  {1, NAN, 0},      {1, 1.5, NAN},   {INFINITY, 1.5, 0}, {1, INFINITY, 0}, {1e5, 1e6, 0}};
  double cosine = 0.5, phase, polarisation;
  for (size_t i = 0; i < sizeof bad / sizeof bad[0]; i++) {
    lac_efficiencies e = {0};
    assert_int_equal(lac_mie(1, &bad[i][0], &bad[i][1], &bad[i][2], &e), LAC_OUT_OF_RANGE);
    check_undefined(e.extinction, "extinction");
    check_undefined(e.asymmetry, "asymmetry");
    assert_int_equal(lac_mie_scattering(bad[i][0], bad[i][1], bad[i][2], 1, &cosine, &phase, &polarisation), LAC_OUT_OF_RANGE);
    check_undefined(phase, "phase function");
  }
  cosine = 1.0001;
  assert_int_equal(lac_mie_scattering(1, 1.5, 0, 1, &cosine, &phase, &polarisation), LAC_OUT_OF_RANGE);
  check_undefined(phase, "phase function");
  assert_int_equal(lac_mie(0, NULL, NULL, NULL, NULL), LAC_OK);
  assert_int_equal(lac_mie_scattering(1, 1.5, 0, 0, NULL, NULL, NULL), LAC_OK);
}

/* The corners of the domain give numbers. */
static void corners(void **state) {
  (void)state;
  static const double sizes[] = {1e-6, 1, 1e3}, indices[] = {1e-6, 1e-3, 0.999999, 1, 1e3, 1e6},
                      absorptions[] = {0, 1e-300, 1e-3, 1, 1e3, 1e6};
  for (int i = 0; i < 3; i++)
    for (int j = 0; j < 6; j++)
      for (int l = 0; l < 6; l++) {
        if (sizes[i] * indices[j] > 1e6 && absorptions[l] < 1e3) continue; /* more orders than it may take, or nearly */
        lac_efficiencies e = mie(sizes[i], indices[j], absorptions[l]);
        assert_true(isfinite(e.extinction) && isfinite(e.backscatter) && fabs(e.asymmetry) <= 1);
      }
}

/* ---- Mixtures ---- */

/* Numbers after one field of text: label, then real:imaginary:fraction of each component split by |, then the results. */
static void published_mixtures(void **state) {
  (void)state;
  FILE *file = fopen("tests/reference/emt.csv", "r");
  char line[1024];
  int rows = 0;
  assert_non_null(file);
  while (fgets(line, sizeof line, file)) {
    char *field = strchr(line, ',');
    if (line[0] == '#' || strncmp(line, "case", 4) == 0 || !field) continue;
    double fraction[5], n[5], k[5], want[6], re, im, mixed_n, mixed_k;
    size_t count = 0;
    do {
      assert_true(count < 5);
      re = strtod(field + 1, &field), im = strtod(field + 1, &field), fraction[count] = strtod(field + 1, &field);
      double complex m = csqrt(CMPLX(re, im));
      n[count] = creal(m), k[count++] = cimag(m);
    } while (*field == '|');
    for (int i = 0; i < 6; i++) want[i] = strtod(field + 1, &field);
    assert_int_equal(lac_mix_bruggeman(count, fraction, n, k, &mixed_n, &mixed_k), LAC_OK);
    check_within(want[2], mixed_n, 1e-14, "Bruggeman, n");
    check_within(want[3], mixed_k, 1e-14, "Bruggeman, k");
    assert_int_equal(lac_mix_maxwell_garnett(count, count - 1, fraction, n, k, &mixed_n, &mixed_k), LAC_OK);
    double complex m = csqrt(CMPLX(want[4], want[5]));
    check_within(creal(m), mixed_n, 1e-14, "Maxwell Garnett, n");
    check_within(cimag(m), mixed_k, 1e-14, "Maxwell Garnett, k");
    rows++;
  }
  fclose(file);
  assert_int_equal(rows, 12);
}

static void random_mixtures(void **state) {
  (void)state;
  check_table *table = check_read_table("tests/reference/evaluated_bruggeman.csv");
  for (size_t i = 0; i < table->rows; i++) {
    double fraction[5], n[5], k[5], mixed_n, mixed_k;
    for (int j = 0; j < 5; j++) {
      const long double *component = table->cell[i] + 2 + 3 * j;
      fraction[j] = (double)component[0], n[j] = (double)component[1], k[j] = (double)component[2];
    }
    assert_int_equal(lac_mix_bruggeman(5, fraction, n, k, &mixed_n, &mixed_k), LAC_OK);
    check_within((double)table->cell[i][0], mixed_n, 2e-14, "Bruggeman, n");
    check_within((double)table->cell[i][1], mixed_k, 1e-13, "Bruggeman, k");
  }
  assert_int_equal(table->rows, 40);
  free(table);
}

enum { MOST_COMPONENTS = 8 };

typedef struct {
  size_t count;
  double fraction[MOST_COMPONENTS], n[MOST_COMPONENTS], k[MOST_COMPONENTS];
} mixture;

/* Up to eight components, |permittivity| from 0.01 to 1e6, half the mixtures without absorption. */
static mixture random_mixture(uint64_t *seed) {
  mixture mix = {.count = (size_t)check_uniform(seed, 1, MOST_COMPONENTS + 1)};
  bool absorbing = check_uniform(seed, 0, 1) > 0.5;
  double total = 0;
  for (size_t i = 0; i < mix.count; i++) {
    total += mix.fraction[i] = check_log_uniform(seed, 1e-3, 1);
    mix.n[i] = check_log_uniform(seed, 0.1, 700);
    mix.k[i] = absorbing && i % 2 == 0 ? check_log_uniform(seed, 1e-8, 700) : 0;
  }
  for (size_t i = 0; i < mix.count; i++) mix.fraction[i] /= total;
  return mix;
}

/* Any mixture has an answer, which solves the equation, is a medium that absorbs and does not amplify, and does not depend on the order. */
static void any_mixture(void **state) {
  (void)state;
  uint64_t seed = 11;
  for (int i = 0; i < 50 * TRIALS; i++) {
    mixture mix = random_mixture(&seed), turned = mix;
    double n, k, turned_n, turned_k;
    assert_int_equal(lac_mix_bruggeman(mix.count, mix.fraction, mix.n, mix.k, &n, &k), LAC_OK);
    double complex e = CMPLX((n - k) * (n + k), 2 * n * k), residual = 0;
    double largest = 0;
    for (size_t j = 0; j < mix.count; j++) {
      double complex own = CMPLX((mix.n[j] - mix.k[j]) * (mix.n[j] + mix.k[j]), 2 * mix.n[j] * mix.k[j]);
      residual += mix.fraction[j] * (own - e) / (own + 2 * e);
      largest = fmax(largest, cabs(e / (own + 2 * e)));
      size_t other = mix.count - 1 - j;
      turned.fraction[j] = mix.fraction[other], turned.n[j] = mix.n[other], turned.k[j] = mix.k[other];
    }
    check_near(0, cabs(residual), 1e-13 * largest * largest, "Bruggeman's equation");
    assert_true(n > 0 && k >= 0);
    assert_int_equal(lac_mix_bruggeman(mix.count, turned.fraction, turned.n, turned.k, &turned_n, &turned_k), LAC_OK);
    check_near(0, hypot(turned_n - n, turned_k - k), 1e-11 * hypot(n, k), "order of components");
  }
}

/* One component, equal components, components not there; two without absorption in closed form: e = [b + sqrt(b^2 + 8 e1 e2)]/4. */
static void mixing_identities(void **state) {
  (void)state;
  uint64_t seed = 3;
  for (int i = 0; i < TRIALS; i++) {
    double n = check_log_uniform(&seed, 0.1, 300), k = i % 2 ? 0 : check_log_uniform(&seed, 1e-9, 300), share = check_uniform(&seed, 0, 1),
           mixed_n, mixed_k;
    double ns[3] = {n, n, 3}, ks[3] = {k, k, 2}, fractions[3] = {share, 1 - share, 0}, whole = 1;
    assert_int_equal(lac_mix_bruggeman(1, &whole, &n, &k, &mixed_n, &mixed_k), LAC_OK);
    check_within(n, mixed_n, 8 * UNIT, "one component, n");
    check_within(k, mixed_k, 16 * UNIT, "one component, k");
    assert_int_equal(lac_mix_bruggeman(3, fractions, ns, ks, &mixed_n, &mixed_k), LAC_OK);
    check_within(n, mixed_n, 16 * UNIT, "equal components, n");
    check_within(k, mixed_k, 32 * UNIT, "equal components, k");
    assert_int_equal(lac_mix_maxwell_garnett(3, 1, fractions, ns, ks, &mixed_n, &mixed_k), LAC_OK);
    check_within(n, mixed_n, 16 * UNIT, "equal components, n");
    check_within(k, mixed_k, 32 * UNIT, "equal components, k");
    double two[2] = {n, check_log_uniform(&seed, 0.1, 300)}, none[2] = {0, 0}, first = n * n, second = two[1] * two[1];
    double b = (3 * share - 1) * first + (2 - 3 * share) * second, root = sqrt(b * b + 8 * first * second);
    assert_int_equal(lac_mix_bruggeman(2, fractions, two, none, &mixed_n, &mixed_k), LAC_OK);
    double closed = b > 0 ? (b + root) / 4 : 2 * first * second / (root - b);
    check_within(closed, mixed_n * mixed_n, 1e-13, "two components in closed form");
    assert_true(mixed_k == 0);
  }
}

/* A few inclusions: both rules say e_m + 3 f e_m (e - e_m)/(e + 2 e_m), up to f^2. */
static void dilute(void **state) {
  (void)state;
  const double f = 1e-7, fraction[2] = {f, 1 - f}, n[2] = {2, 1.3}, k[2] = {0.5, 1e-3};
  double bruggeman_n, bruggeman_k, garnett_n, garnett_k;
  assert_int_equal(lac_mix_bruggeman(2, fraction, n, k, &bruggeman_n, &bruggeman_k), LAC_OK);
  assert_int_equal(lac_mix_maxwell_garnett(2, 1, fraction, n, k, &garnett_n, &garnett_k), LAC_OK);
  double complex e = cpow(CMPLX(n[0], k[0]), 2), matrix = cpow(CMPLX(n[1], k[1]), 2);
  double complex m = csqrt(matrix + 3 * f * matrix * (e - matrix) / (e + 2 * matrix));
  check_near(0, cabs(CMPLX(bruggeman_n, bruggeman_k) - m), 10 * f * f, "dilute, Bruggeman");
  check_near(0, cabs(CMPLX(garnett_n, garnett_k) - m), 10 * f * f, "dilute, Maxwell Garnett");
}

static void bad_mixtures(void **state) {
  (void)state;
  const double good[2] = {0.5, 0.5}, n[2] = {1.5, 2}, k[2] = {0, 1}, bad_n[2] = {1.5, 0}, bad_k[2] = {0, -1};
  const double short_sum[2] = {0.5, 0.4}, negative[2] = {1.5, -0.5}, undefined[2] = {0.5, (double)NAN};
  double mixed_n = 0, mixed_k = 0;
  const double *fractions[] = {short_sum, negative, undefined};
  for (int i = 0; i < 3; i++) {
    assert_int_equal(lac_mix_bruggeman(2, fractions[i], n, k, &mixed_n, &mixed_k), LAC_OUT_OF_RANGE);
    assert_int_equal(lac_mix_maxwell_garnett(2, 0, fractions[i], n, k, &mixed_n, &mixed_k), LAC_OUT_OF_RANGE);
    check_undefined(mixed_n, "mixed n");
    check_undefined(mixed_k, "mixed k");
  }
  assert_int_equal(lac_mix_bruggeman(2, good, bad_n, k, &mixed_n, &mixed_k), LAC_OUT_OF_RANGE);
  assert_int_equal(lac_mix_bruggeman(2, good, n, bad_k, &mixed_n, &mixed_k), LAC_OUT_OF_RANGE);
  assert_int_equal(lac_mix_bruggeman(0, NULL, NULL, NULL, &mixed_n, &mixed_k), LAC_OUT_OF_RANGE);
  assert_int_equal(lac_mix_maxwell_garnett(2, 2, good, n, k, &mixed_n, &mixed_k), LAC_OUT_OF_RANGE);
}

/* ---- Memory ---- */

#ifndef __SANITIZE_ADDRESS__
/* With ever less address space left, each refusal is clean, and the call works again afterwards. */
static void no_memory(void **state) {
  (void)state;
  double x = 1e5, n = 1.5, k = 0.1, cosine = 0, phase, polarisation;
  struct rlimit before, tight;
  assert_int_equal(getrlimit(RLIMIT_AS, &before), 0);
  tight = before;
  tight.rlim_cur = 1 << 20;
  assert_int_equal(setrlimit(RLIMIT_AS, &tight), 0);
  lac_efficiencies e;
  lac_status sums = lac_mie(1, &x, &n, &k, &e), matrix = lac_mie_scattering(x, n, k, 1, &cosine, &phase, &polarisation);
  assert_int_equal(setrlimit(RLIMIT_AS, &before), 0);
  assert_int_equal(sums, LAC_NO_MEMORY);
  assert_int_equal(matrix, LAC_NO_MEMORY);
  check_undefined(e.extinction, "extinction");
  check_undefined(phase, "phase function");
  assert_true(mie(x, n, k).extinction > 2);
}
#endif

int main(void) {
  cmocka_set_message_output(CM_OUTPUT_TAP);
  gsl_set_error_handler_off();
  const struct CMUnitTest tests[] = {
      cmocka_unit_test(reference_table),
      cmocka_unit_test(random_points),
      cmocka_unit_test(printed_tables),
      cmocka_unit_test(small_spheres),
      cmocka_unit_test(large_opaque_spheres),
      cmocka_unit_test(nearly_transparent),
      cmocka_unit_test(phase_function),
      cmocka_unit_test(rayleigh_phase),
      cmocka_unit_test(company),
      cmocka_unit_test(continuity),
      cmocka_unit_test(bad_input),
      cmocka_unit_test(corners),
      cmocka_unit_test(published_mixtures),
      cmocka_unit_test(random_mixtures),
      cmocka_unit_test(any_mixture),
      cmocka_unit_test(mixing_identities),
      cmocka_unit_test(dilute),
      cmocka_unit_test(bad_mixtures),
#ifndef __SANITIZE_ADDRESS__
      cmocka_unit_test(no_memory),
#endif
  };
  return cmocka_run_group_tests(tests, NULL, NULL);
}
