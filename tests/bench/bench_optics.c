/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Times the table of Mie efficiencies that an opacity takes: 200 wavelengths by 200 sizes, on one core, against a plain loop in double
   complex that starts its downward recurrence where it must. Prints what is required and what was measured, and fails where it falls short.
   Rounds alternate, the best counts. */
#include <complex.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

#include "lacuna/optics.h"

enum { WAVELENGTHS = 200, SIZES = 200, SPHERES = WAVELENGTHS * SIZES, ROUNDS = 3 };
#define PI 3.14159265358979323846
#define REQUIRED 10

static double seconds(void) {
  struct timespec now;
  clock_gettime(CLOCK_MONOTONIC, &now);
  return (double)now.tv_sec + 1e-9 * (double)now.tv_nsec;
}

/* 0.1 um to 3 mm, 0.005 um to 1 mm, and an invented index that behaves like a silicate's: one band at 0.1 um, one at 10 um. */
static void fill(double *x, double *n, double *k) {
  for (int i = 0; i < WAVELENGTHS; i++) {
    double um = 0.1 * pow(3e4, i / (WAVELENGTHS - 1.0)), frequency = 1 / um;
    double complex square =
        1 + 1.7 / (1 - cpow(0.09 * frequency, 2) - I * 0.02 * frequency) + 1.2 / (1 - cpow(10 * frequency, 2) - I * 3 * frequency);
    double complex index = csqrt(square);
    for (int j = 0; j < SIZES; j++) {
      double radius = 0.005 * pow(2e5, j / (SIZES - 1.0));
      x[i * SIZES + j] = 2 * PI * radius / um;
      n[i * SIZES + j] = creal(index);
      k[i * SIZES + j] = cimag(index);
    }
  }
}

/* Bohren & Huffman 1983, Eqs. 4.61, 4.62, 4.88, as they stand there, with the logarithmic derivative from far enough above. */
static double plain_extinction(double x, double complex m, double complex *derivative) {
  double complex z = m * x;
  int terms = (int)(x + 6 * cbrt(x) + 6);
  double size = cabs(z);
  int start = (int)(fmax(terms, size) + 8 * cbrt(size) + 16);
  derivative[start] = 0;
  for (int n = start; n > 0; n--) derivative[n - 1] = n / z - 1 / (derivative[n] + n / z);
  double psi_before = cos(x), psi = sin(x), chi_before = -sin(x), chi = cos(x), sum = 0;
  for (int n = 1; n <= terms; n++) {
    double psi_here = (2 * n - 1) / x * psi - psi_before, chi_here = (2 * n - 1) / x * chi - chi_before;
    double complex xi = psi_here - I * chi_here, xi_before = psi - I * chi;
    double complex electric = derivative[n] / m + n / x, magnetic = derivative[n] * m + n / x;
    double complex a = (electric * psi_here - psi) / (electric * xi - xi_before),
                   b = (magnetic * psi_here - psi) / (magnetic * xi - xi_before);
    sum += (2 * n + 1) * creal(a + b);
    psi_before = psi, psi = psi_here, chi_before = chi, chi = chi_here;
  }
  return 2 * sum / (x * x);
}

int main(void) {
  static double x[SPHERES], n[SPHERES], k[SPHERES];
  static lac_efficiencies ours[SPHERES];
  double complex *derivative = malloc(1000000 * sizeof *derivative);
  double best = (double)INFINITY, plain = (double)INFINITY, worst = 0;
  if (!derivative) return 1;
  fill(x, n, k);
  for (int round = 0; round < ROUNDS; round++) {
    double start = seconds();
    if (lac_mie(SPHERES, x, n, k, ours) != LAC_OK) return 1;
    double middle = seconds();
    for (int i = 0; i < SPHERES; i++)
      if (x[i] > 0.1) worst = fmax(worst, fabs(plain_extinction(x[i], CMPLX(n[i], k[i]), derivative) / ours[i].extinction - 1));
    double end = seconds();
    best = fmin(best, middle - start);
    plain = fmin(plain, end - middle);
  }
  free(derivative);
  int good = plain / best >= REQUIRED && worst < 1e-6;
  printf("mie_table %.4f\n", best);
  printf("mie_table_complex %.4f\n", plain);
  printf("ns a sphere: %.0f, plain loop in double complex %.0f; greatest difference in extinction %.1e\n", best / SPHERES * 1e9,
         plain / SPHERES * 1e9, worst);
  printf("%-66s at least %6.2f times  %7.2f %s\n", "Mie table, one core, against a loop in double complex", (double)REQUIRED, plain / best,
         good ? "good" : "FALLS SHORT");
  return !good;
}
