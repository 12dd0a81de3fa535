/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Series of the black-body fraction. Written by tests/reference/fit_planck.py: change that, not this. */
#ifndef LACUNA_CORE_PLANCK_POLYNOMIALS_H
#define LACUNA_CORE_PLANCK_POLYNOMIALS_H

/* (integral from 0 to x of t^3/(e^t - 1), over x^3, less 1/3 - x/8)/x^2 in t = x^2, x <= 2; |error| < 2.8e-19. */
LAC_INLINE double lac_bernoulli_tail(double t) {
  double sum = -0x1.bcf3a1c7a40bap-58;
  sum = fma(sum, t, 0x1.b8af9de26cbaap-52);
  sum = fma(sum, t, -0x1.3f399f350adc2p-46);
  sum = fma(sum, t, 0x1.baf8c0e1b7b80p-41);
  sum = fma(sum, t, -0x1.35dcf5d76d0b0p-35);
  sum = fma(sum, t, 0x1.b96d6e8ccd21ap-30);
  sum = fma(sum, t, -0x1.42cb40c4a570cp-24);
  sum = fma(sum, t, 0x1.ed284dc6f8708p-19);
  sum = fma(sum, t, -0x1.a01a01a019e15p-13);
  sum = fma(sum, t, 0x1.1111111111111p-6);
  return sum;
}

/* the polylogarithm of order 1 over its argument t, t <= exp(-2); |error| < 8.8e-19. */
LAC_INLINE double lac_polylogarithm_1(double t) {
  double sum = 0x1.77df1cd7f96a4p-3;
  sum = fma(sum, t, 0x1.9a770fff1a925p-5);
  sum = fma(sum, t, 0x1.be10fe090b984p-4);
  sum = fma(sum, t, 0x1.c23377119ca31p-4);
  sum = fma(sum, t, 0x1.0037213c7eee4p-3);
  sum = fma(sum, t, 0x1.248f15f0996e3p-3);
  sum = fma(sum, t, 0x1.5555747883c7ap-3);
  sum = fma(sum, t, 0x1.999998da3ea26p-3);
  sum = fma(sum, t, 0x1.0000000159f10p-2);
  sum = fma(sum, t, 0x1.5555555552d0ap-2);
  sum = fma(sum, t, 0x1.000000000000fp-1);
  sum = fma(sum, t, 0x1.0000000000000p+0);
  return sum;
}

/* the polylogarithm of order 2 over its argument t, t <= exp(-2); |error| < 6.3e-20. */
LAC_INLINE double lac_polylogarithm_2(double t) {
  double sum = 0x1.d7150621abec9p-7;
  sum = fma(sum, t, 0x1.5914b5d5b2a34p-8);
  sum = fma(sum, t, 0x1.5d06d7e0ec821p-7);
  sum = fma(sum, t, 0x1.91ad2fbbf737dp-7);
  sum = fma(sum, t, 0x1.0020219a15392p-6);
  sum = fma(sum, t, 0x1.4e5c2d91839bep-6);
  sum = fma(sum, t, 0x1.c71c83e35ecb5p-6);
  sum = fma(sum, t, 0x1.47ae144343f4ap-5);
  sum = fma(sum, t, 0x1.00000000647fep-4);
  sum = fma(sum, t, 0x1.c71c71c71bb68p-4);
  sum = fma(sum, t, 0x1.0000000000002p-2);
  sum = fma(sum, t, 0x1.0000000000000p+0);
  return sum;
}

/* the polylogarithm of order 3 over its argument t, t <= exp(-2); |error| < 4.6e-21. */
LAC_INLINE double lac_polylogarithm_3(double t) {
  double sum = 0x1.28a13e069b1a4p-10;
  sum = fma(sum, t, 0x1.15f16234922d9p-11);
  sum = fma(sum, t, 0x1.12afc841c69aep-10);
  sum = fma(sum, t, 0x1.65e9ec023b0a4p-10);
  sum = fma(sum, t, 0x1.0012cd4475678p-9);
  sum = fma(sum, t, 0x1.7e213e59a61f9p-9);
  sum = fma(sum, t, 0x1.2f685123eabecp-8);
  sum = fma(sum, t, 0x1.0624dd1edf8e3p-7);
  sum = fma(sum, t, 0x1.000000001d518p-6);
  sum = fma(sum, t, 0x1.2f684bda12db3p-5);
  sum = fma(sum, t, 0x1.0000000000000p-3);
  sum = fma(sum, t, 0x1.0000000000000p+0);
  return sum;
}

/* the polylogarithm of order 4 over its argument t, t <= exp(-2); |error| < 3.3e-22. */
LAC_INLINE double lac_polylogarithm_4(double t) {
  double sum = 0x1.773add391a5a9p-14;
  sum = fma(sum, t, 0x1.b3ac59eb5c15ap-15);
  sum = fma(sum, t, 0x1.b2387de681c93p-14);
  sum = fma(sum, t, 0x1.3ea696c673d7ep-13);
  sum = fma(sum, t, 0x1.000b0af4d1be0p-12);
  sum = fma(sum, t, 0x1.b4b8e246da012p-12);
  sum = fma(sum, t, 0x1.948b12e7226d3p-11);
  sum = fma(sum, t, 0x1.a36e2ea841922p-10);
  sum = fma(sum, t, 0x1.0000000008961p-8);
  sum = fma(sum, t, 0x1.948b0fcd6e960p-7);
  sum = fma(sum, t, 0x1.0000000000000p-4);
  sum = fma(sum, t, 0x1.0000000000000p+0);
  return sum;
}

#endif
