/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Polynomials and constants of the kernels. Written by tests/reference/fit_kernels.py: change that, not this. */
#ifndef LACUNA_CORE_KERNELS_POLYNOMIALS_H
#define LACUNA_CORE_KERNELS_POLYNOMIALS_H

#define LAC_LN2_HIGH 0x1.62e42fefa3800p-1
#define LAC_LN2_LOW 0x1.ef35793c76730p-45
#define LAC_LOG2_E 0x1.71547652b82fep+0
#define LAC_TWO_PI_HIGH 0x1.921fb54442d18p+2
#define LAC_TWO_PI_LOW 0x1.1a62633145c07p-52
#define LAC_QUARTER_PI_HIGH 0x1.921fb54442d18p-1
#define LAC_QUARTER_PI_LOW 0x1.1a62633145c07p-55
#define LAC_J0_ZERO_1_SQUARED_HIGH 0x1.721fb80462bbbp+2
#define LAC_J0_ZERO_1_SQUARED_LOW 0x1.db60c816c15d3p-52
#define LAC_J0_ZERO_2_SQUARED_HIGH 0x1.e78a4a621dd6fp+4
#define LAC_J0_ZERO_2_SQUARED_LOW -0x1.10d7c5048826bp-52
#define LAC_J0_QUADRATIC_TOTAL 0x1.abdac5ea17191p+7
#define LAC_J0_QUADRATIC_PRODUCT 0x1.45627c5ce09a1p+13
#define LAC_TWO_OVER_PI 0x1.45f306dc9c883p-1
#define LAC_ONE_OVER_PI 0x1.45f306dc9c883p-2

/* (exp(t) - 1 - t)/t^2, |t| <= ln(2)/2; |error| < 1.4e-18. */
LAC_INLINE double lac_exp_tail(double t) {
  double sum = 0x1.1f73102ceab2bp-29;
  sum = fma(sum, t, 0x1.af4e000e84be8p-26);
  sum = fma(sum, t, 0x1.27e4db5e398e9p-22);
  sum = fma(sum, t, 0x1.71de0226bd07ap-19);
  sum = fma(sum, t, 0x1.a01a01a6da7dbp-16);
  sum = fma(sum, t, 0x1.a01a01abeb69fp-13);
  sum = fma(sum, t, 0x1.6c16c16c162d1p-10);
  sum = fma(sum, t, 0x1.11111111100d5p-7);
  sum = fma(sum, t, 0x1.5555555555556p-5);
  sum = fma(sum, t, 0x1.5555555555557p-3);
  sum = fma(sum, t, 0x1.0000000000000p-1);
  return sum;
}

/* (ln((1 + s)/(1 - s)) - 2 s)/s^3 in t = s^2, for (1 + s)/(1 - s) from sqrt(1/2) to sqrt(2); |error| < 3.1e-16. */
LAC_INLINE double lac_log_tail(double t) {
  double sum = 0x1.2b5ab596dbfb2p-3;
  sum = fma(sum, t, 0x1.39fe2e50bda34p-3);
  sum = fma(sum, t, 0x1.7462b62cf2291p-3);
  sum = fma(sum, t, 0x1.c71c62e03460bp-3);
  sum = fma(sum, t, 0x1.2492492df5700p-2);
  sum = fma(sum, t, 0x1.99999999952bcp-2);
  sum = fma(sum, t, 0x1.5555555555558p-1);
  return sum;
}

/* (sin(2 pi r) - 2 pi r)/r^3 in t = r^2, |r| <= 1/8; |error| < 5.1e-15. */
LAC_INLINE double lac_sine_turns_tail(double t) {
  double sum = 0x1.e4a9d9166f052p+1;
  sum = fma(sum, t, -0x1.e3027dea82bd7p+3);
  sum = fma(sum, t, 0x1.50783208843ebp+5);
  sum = fma(sum, t, -0x1.32d2cce500387p+6);
  sum = fma(sum, t, 0x1.466bc6775a476p+6);
  sum = fma(sum, t, -0x1.4abbce625be52p+5);
  return sum;
}

/* (cos(2 pi r) - 1)/r^2 in t = r^2, |r| <= 1/8; |error| < 7.8e-18. */
LAC_INLINE double lac_cosine_turns_tail(double t) {
  double sum = -0x1.b2f3eb054afcdp+0;
  sum = fma(sum, t, 0x1.f9ce245cada0bp+2);
  sum = fma(sum, t, -0x1.a6d1eef479be1p+4);
  sum = fma(sum, t, 0x1.e1f5068688d5bp+5);
  sum = fma(sum, t, -0x1.55d3c7e3cb241p+6);
  sum = fma(sum, t, 0x1.03c1f081b5ac0p+6);
  sum = fma(sum, t, -0x1.3bd3cc9be45dep+4);
  return sum;
}

/* (sin(r) - r)/r^3 in t = r^2, |r| <= 1.6; |error| < 4.5e-19. */
LAC_INLINE double lac_sine_tail(double t) {
  double sum = 0x1.893756b8e64d3p-49;
  sum = fma(sum, t, -0x1.ae4dbca740e32p-41);
  sum = fma(sum, t, 0x1.6123f63c74d81p-33);
  sum = fma(sum, t, -0x1.ae64557ee2409p-26);
  sum = fma(sum, t, 0x1.71de3a541e7f2p-19);
  sum = fma(sum, t, -0x1.a01a01a018566p-13);
  sum = fma(sum, t, 0x1.1111111111104p-7);
  sum = fma(sum, t, -0x1.5555555555555p-3);
  return sum;
}

/* J0(x)/((u - j1^2)(u - j2^2)(u^2 - total u + product)) in t = u/32 - 1/2, u = x^2 <= 64, j1 and j2 zeros of J0; |error| < 2.5e-24. */
LAC_INLINE double lac_j0_shape(double t) {
  double sum = 0x1.95be481545c63p-62;
  sum = fma(sum, t, -0x1.d09460cf8630ep-57);
  sum = fma(sum, t, 0x1.8cc635e43914ep-52);
  sum = fma(sum, t, -0x1.215845019bf27p-47);
  sum = fma(sum, t, 0x1.6802e0788695ep-43);
  sum = fma(sum, t, -0x1.78948b08319e3p-39);
  sum = fma(sum, t, 0x1.45049c1e7c5a5p-35);
  sum = fma(sum, t, -0x1.c3fa149b9ac1ep-32);
  sum = fma(sum, t, 0x1.ea8362d05a408p-29);
  sum = fma(sum, t, -0x1.8d3d3d6b0a817p-26);
  sum = fma(sum, t, 0x1.c0239fa78c9b7p-24);
  sum = fma(sum, t, -0x1.377df48e0aeaap-22);
  sum = fma(sum, t, 0x1.8e13580ecf12bp-22);
  return sum;
}

/* sqrt(pi x/2) |J0(x) + i Y0(x)| in t = 1/x^2, x >= 8; |error| < 1.3e-16. */
LAC_INLINE double lac_j0_modulus(double t) {
  double sum = 0x1.74aa1479938eap+28;
  sum = fma(sum, t, -0x1.426016ff35453p+25);
  sum = fma(sum, t, 0x1.10087212c74c5p+21);
  sum = fma(sum, t, -0x1.418deee38bfa6p+16);
  sum = fma(sum, t, 0x1.56d4a6d051388p+11);
  sum = fma(sum, t, -0x1.a760202ea528bp+6);
  sum = fma(sum, t, 0x1.761d2cbe2abe0p+2);
  sum = fma(sum, t, -0x1.15ef3d142fe12p-1);
  sum = fma(sum, t, 0x1.a7fffe7fb364ap-4);
  sum = fma(sum, t, -0x1.ffffffffb4bc3p-5);
  sum = fma(sum, t, 0x1.fffffffffffffp-1);
  return sum;
}

/* x (arg(J0(x) + i Y0(x)) - x + pi/4) in t = 1/x^2, x >= 8; |error| < 1.1e-15. */
LAC_INLINE double lac_j0_phase(double t) {
  double sum = -0x1.4f9f1d1830ac7p+31;
  sum = fma(sum, t, 0x1.1cd01bcd8419bp+28);
  sum = fma(sum, t, -0x1.d13055da644b5p+23);
  sum = fma(sum, t, 0x1.0369456d43a2ep+19);
  sum = fma(sum, t, -0x1.f3f9fa39f7801p+13);
  sum = fma(sum, t, 0x1.07a1158a953d9p+9);
  sum = fma(sum, t, -0x1.7732b7e708b3ap+4);
  sum = fma(sum, t, 0x1.a355450687e0bp+0);
  sum = fma(sum, t, -0x1.ad332d461d447p-3);
  sum = fma(sum, t, 0x1.0aaaaaa982144p-4);
  sum = fma(sum, t, -0x1.fffffffffffb2p-4);
  return sum;
}

#endif
