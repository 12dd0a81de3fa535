/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The refractive index of mixtures. Both rules are one: with q_i = 1/(e_i + 2 h) for a host of permittivity h and means <> by volume,
     e = <e q>/<q> = 1/<q> - 2 h.
   Maxwell Garnett takes the matrix for the host. Bruggeman takes the mixture itself: 1/<q> = 3 e, with e = h.

   Which root of Bruggeman's equation? h -> 1/(3 <q>) maps the upper half plane into itself, so by Schwarz and Pick it brings any two
   points nearer to each other in the hyperbolic metric, and has one fixed point there: the only root with Im e > 0. Without absorption
   the same holds on the positive axis. So steps of this map end at the physical root from anywhere; Newton's steps end faster, and
   one is taken wherever it leads to a smaller residual in the upper half plane (on the axis: at positive e). */
#include <complex.h>
#include <math.h>
#include <stdbool.h>
#include <stddef.h>

#include "lacuna/optics.h"

enum { MOST_STEPS = 20000 };

/* Components as they were given. */
typedef struct {
  size_t count;
  const double *fraction, *n, *k;
} mixture;

/* Real and imaginary parts of m^2; the real one without loss where n and k are close. */
static double complex permittivity(double n, double k) { return CMPLX((n - k) * (n + k), 2 * n * k); }

static double complex component(const mixture *mix, size_t i) { return permittivity(mix->n[i], mix->k[i]); }

static bool in_domain(const mixture *mix) {
  double total = 0;
  for (size_t i = 0; i < mix->count; i++) {
    total += mix->fraction[i];
    if (!(mix->fraction[i] >= 0 && mix->n[i] > 0 && mix->k[i] >= 0 && isfinite(mix->n[i]) && isfinite(mix->k[i]))) return false;
  }
  return fabs(total - 1) <= 1e-9;
}

/* <q> and <q^2>. */
static double complex mean_q(const mixture *mix, double complex host, double complex *square) {
  double complex first = 0, second = 0;
  for (size_t i = 0; i < mix->count; i++) {
    if (mix->fraction[i] == 0) continue;
    double complex q = 1 / (component(mix, i) + 2 * host);
    first += mix->fraction[i] * q;
    second += mix->fraction[i] * q * q;
  }
  if (square) *square = second;
  return first;
}

/* How far the map moves, over the distance to the real axis (or to zero, on it), which is what the hyperbolic metric measures. */
static double moved(double complex from, double complex to) {
  double height = cimag(from) > 0 ? sqrt(cimag(from) * fmax(cimag(to), 0)) : creal(from);
  return cabs(to - from) / height;
}

/* The next h, and how far it is. Newton's for h - 1/(3 <q>), whose slope is 1 - 2 <q^2>/(3 <q>^2). */
static double complex step(const mixture *mix, double complex host, bool absorbing, double *length) {
  double complex square, q = mean_q(mix, host, &square), mapped = 1 / (3 * q);
  double complex newton = host + (mapped - host) / (1 - 2 * square / (3 * q * q));
  *length = moved(host, mapped);
  bool inside = absorbing ? cimag(newton) > 0 : creal(newton) > 0;
  if (!inside || !isfinite(creal(newton))) return mapped;
  return moved(newton, 1 / (3 * mean_q(mix, newton, NULL))) < *length ? newton : mapped;
}

/* e = <e q>/<q> for a host h, its imaginary part without cancellation: with Y = <q> it is
   (<Im e_i |q_i|^2> + 2 Im h <|q_i - Y|^2>)/|Y|^2, all terms positive, so that weak absorption keeps its digits. */
static double complex mixed_in(const mixture *mix, double complex host) {
  double complex q_mean = mean_q(mix, host, NULL), eq_mean = 0;
  double absorbed = 0, varied = 0;
  for (size_t i = 0; i < mix->count; i++) {
    double complex e = component(mix, i), q = 1 / (e + 2 * host), rest = q - q_mean;
    eq_mean += mix->fraction[i] * e * q;
    absorbed += mix->fraction[i] * cimag(e) * (creal(q) * creal(q) + cimag(q) * cimag(q));
    varied += mix->fraction[i] * (creal(rest) * creal(rest) + cimag(rest) * cimag(rest));
  }
  double size = creal(q_mean) * creal(q_mean) + cimag(q_mean) * cimag(q_mean);
  return CMPLX(creal(eq_mean / q_mean), (absorbed + 2 * cimag(host) * varied) / size);
}

/* m = sqrt(e): the larger part by the root, the other from 2 n k = Im e. */
static void index_of(double complex e, double *n, double *k) {
  double larger = sqrt((cabs(e) + fabs(creal(e))) / 2), smaller = cimag(e) / (2 * larger);
  *n = creal(e) >= 0 ? larger : smaller;
  *k = creal(e) >= 0 ? smaller : larger;
}

static double complex mean_permittivity(const mixture *mix, bool *absorbing) {
  double complex mean = 0;
  *absorbing = false;
  for (size_t i = 0; i < mix->count; i++) {
    mean += mix->fraction[i] * component(mix, i);
    *absorbing = *absorbing || (mix->fraction[i] > 0 && mix->k[i] > 0);
  }
  return mean;
}

/* Where the map moves no more than by rounding. The imaginary part, which may be smaller than that, then follows from the fixed point
   of mixed_in: s = Im e solves s (|Y|^2 - 2 <|q_i - Y|^2>) = <Im e_i |q_i|^2>. */
static double complex sharpened(const mixture *mix, double complex host) {
  double complex y = mean_q(mix, host, NULL);
  double absorbed = 0, left = creal(y) * creal(y) + cimag(y) * cimag(y);
  const double size = left;
  for (size_t i = 0; i < mix->count; i++) {
    double complex e = component(mix, i), q = 1 / (e + 2 * host), rest = q - y;
    absorbed += mix->fraction[i] * cimag(e) * (creal(q) * creal(q) + cimag(q) * cimag(q));
    left -= 2 * mix->fraction[i] * (creal(rest) * creal(rest) + cimag(rest) * cimag(rest));
  }
  bool sharper = cimag(host) * size < left * fabs(creal(host)); /* else what is left has lost more digits than the root has */
  return sharper ? CMPLX(creal(host), absorbed / left) : host;
}

static lac_status bruggeman(const mixture *mix, double complex *root) {
  bool absorbing;
  double complex host = mean_permittivity(mix, &absorbing);
  for (int i = 0; i < MOST_STEPS; i++) {
    double length;
    double complex next = step(mix, host, absorbing, &length);
    bool still = cabs(next - host) <= 0x1p-51 * cabs(host);
    host = next;
    if (!still) continue;
    *root = absorbing ? sharpened(mix, host) : host;
    return LAC_OK;
  }
  return LAC_NO_SOLUTION;
}

lac_status lac_mix_bruggeman(size_t count, const double *fraction, const double *n, const double *k, double *mixed_n, double *mixed_k) {
  const mixture mix = {count, fraction, n, k};
  *mixed_n = *mixed_k = (double)NAN;
  if (!in_domain(&mix)) return LAC_OUT_OF_RANGE;
  double complex root;
  lac_status status = bruggeman(&mix, &root);
  if (status == LAC_OK) index_of(root, mixed_n, mixed_k);
  return status;
}

lac_status lac_mix_maxwell_garnett(size_t count, size_t matrix, const double *fraction, const double *n, const double *k, double *mixed_n,
                                   double *mixed_k) {
  const mixture mix = {count, fraction, n, k};
  *mixed_n = *mixed_k = (double)NAN;
  if (matrix >= count || !in_domain(&mix)) return LAC_OUT_OF_RANGE;
  index_of(mixed_in(&mix, component(&mix, matrix)), mixed_n, mixed_k);
  return LAC_OK;
}
