/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The elementary functions as bodies for one element, to be inlined into loops over blocks, which gcc then vectorises.
   No branches (both sides are computed, then one is chosen), no tables, no library calls but fma, fabs and sqrt, which are exact or
   correctly rounded: so the bits are the same on every processor, in every lane, and in a scalar call. Without FMA instructions the
   library's fma gives these bits too, only more slowly.
   Range reductions follow Cody & Waite 1980, Software Manual for the Elementary Functions; polynomials are fitted by
   tests/reference/fit_kernels.py. */
#ifndef LACUNA_CORE_KERNELS_INLINE_H
#define LACUNA_CORE_KERNELS_INLINE_H

#include <math.h>
#include <stdint.h>
#include <string.h>

#include "clones.h"
#include "kernels_polynomials.h"

/* Adding it rounds to an integer, which is then found in the low bits. Good for |x| < 2^51. */
#define LAC_ROUNDER 0x1.8p52

LAC_INLINE uint64_t lac_bits(double x) {
  uint64_t bits;
  memcpy(&bits, &x, sizeof bits);
  return bits;
}

LAC_INLINE double lac_from_bits(uint64_t bits) {
  double x;
  memcpy(&x, &bits, sizeof x);
  return x;
}

LAC_INLINE double lac_choose(int condition, double yes, double no) { return condition ? yes : no; }

/* 2^k for an integer k that was rounded by adding LAC_ROUNDER; -1022 <= k <= 1023. */
LAC_INLINE double lac_power_of_two(double rounder_plus_k) { return lac_from_bits((lac_bits(rounder_plus_k) + 1023) << 52); }

/* x 2^k in two steps, so that k may pass the exponent's range by as much again; results below the normal range are rounded twice. */
LAC_INLINE double lac_scale(double x, double k) {
  double half = k * 0.5 + LAC_ROUNDER;
  double rest = k - (half - LAC_ROUNDER) + LAC_ROUNDER;
  return x * lac_power_of_two(half) * lac_power_of_two(rest);
}

/* exp(x + low) = 2^k (1 + q), with |q| < 0.42; low is what x lost to rounding. Returned: q. |x| < 2000. */
LAC_INLINE double lac_exp_reduced(double x, double low, double *k) {
  double whole = fma(x, LAC_LOG2_E, LAC_ROUNDER) - LAC_ROUNDER;
  double high = fma(-whole, LAC_LN2_HIGH, x), rest = fma(-whole, LAC_LN2_LOW, low);
  double r = high + rest, lost = (high - r) + rest;
  *k = whole;
  return r + fma(r * r, lac_exp_tail(r), fma(lost, r, lost));
}

LAC_INLINE double lac_clamp(double x, double low, double high) {
  x = lac_choose(x < low, low, x);
  return lac_choose(x > high, high, x);
}

LAC_INLINE double lac_exp_inline(double x) {
  double k, q = lac_exp_reduced(lac_clamp(x, -746, 710), 0, &k);
  return lac_scale(1 + q, k);
}

/* Below -50 the result is -1 to the last bit. Computed at half scale, for 2^1024 is no double; tiny x, which that would rob of a bit, is
   its own result. */
LAC_INLINE double lac_expm1_inline(double x) {
  double k, q = lac_exp_reduced(lac_clamp(x, -50, 710), 0, &k);
  double half = lac_power_of_two(k - 1 + LAC_ROUNDER);
  return lac_choose(fabs(x) < 0x1p-54, x, 2 * fma(half, q, half - 0.5));
}

/* x = 2^k (1 + f), with 1 + f from sqrt(1/2) to sqrt(2), for normal x > 0. Returned: f. biased is k + 1023. */
LAC_INLINE double lac_log_reduced(double x, uint64_t *biased) {
  uint64_t bits = lac_bits(x);
  *biased = (bits - 0x3fe6a09e667f3bcd + (UINT64_C(1023) << 52)) >> 52;
  return lac_from_bits(bits - ((*biased - 1023) << 52)) - 1;
}

/* ln(2^k (1 + f)): with s = f/(2 + f), ln(1 + f) = 2 s + ... is written as f less a correction, so that the leading term is exact. */
LAC_INLINE double lac_log_joined(double k, double f) {
  double s = f / (2 + f), z = s * s, half_square = 0.5 * f * f;
  double small = fma(k, LAC_LN2_LOW, s * fma(z, lac_log_tail(z), half_square));
  return fma(k, LAC_LN2_HIGH, f - (half_square - small));
}

/* A whole number below 2^52 as a double, by its bits. */
LAC_INLINE double lac_exponent(uint64_t biased) { return lac_from_bits(biased | 0x4330000000000000) - (0x1p52 + 1023); }

LAC_INLINE double lac_log_inline(double x) {
  int subnormal = x < 0x1p-1022;
  uint64_t biased;
  double f = lac_log_reduced(x * lac_choose(subnormal, 0x1p54, 1), &biased);
  double result = lac_log_joined(lac_exponent(biased) - lac_choose(subnormal, 54, 0), f);
  return lac_choose(x > 0, lac_choose(x < (double)INFINITY, result, x), (double)NAN);
}

/* ln(1 + x), x > -1; what 1 + x lost to rounding is put back into f (of no account for large x, where 2^-k would leave the range). */
LAC_INLINE double lac_log1p_inline(double x) {
  double sum = 1 + x, back = sum - 1, lost = (1 - (sum - back)) + (x - back);
  uint64_t biased;
  double f = lac_log_reduced(sum, &biased);
  f += lac_choose(sum < 0x1p60, lost * lac_from_bits((2046 - biased) << 52), 0);
  double result = lac_log_joined(lac_exponent(biased), f);
  return lac_choose(sum > 0, lac_choose(sum < (double)INFINITY, result, sum), (double)NAN);
}

/* sin(2 pi x) and cos(2 pi x) for |x| < 2^50, else NaN or nonsense: the callers see to it. */
LAC_INLINE void lac_sincos2pi_inline(double turns, double *sine, double *cosine) {
  double rounded = fma(turns, 4, LAC_ROUNDER);
  uint64_t quarter = lac_bits(rounded);
  double r = fma(rounded - LAC_ROUNDER, -0.25, turns), z = r * r;
  double s = fma(r, LAC_TWO_PI_HIGH, r * fma(z, lac_sine_turns_tail(z), LAC_TWO_PI_LOW));
  double c = fma(z, lac_cosine_turns_tail(z), 1);
  uint64_t s_bits = lac_bits(s), c_bits = lac_bits(c), swap = -(quarter & 1);
  uint64_t s_sign = (quarter >> 1) << 63, c_sign = ((quarter + 1) >> 1) << 63;
  uint64_t difference = (s_bits ^ c_bits) & swap;
  *sine = lac_from_bits((s_bits ^ difference) ^ s_sign);
  *cosine = lac_from_bits((c_bits ^ difference) ^ c_sign);
}

/* J0 for 0 <= x <= 8: a polynomial with the first two zeros taken out exactly, so that it is good beside them too. */
LAC_INLINE double lac_j0_low(double x) {
  double square = x * x;
  double first = fma(x, x, -LAC_J0_ZERO_1_SQUARED_HIGH), second = fma(x, x, -LAC_J0_ZERO_2_SQUARED_HIGH);
  double roots = first * second, roots_low = fma(LAC_J0_ZERO_1_SQUARED_LOW, second, LAC_J0_ZERO_2_SQUARED_LOW * first);
  double roots_lost = fma(first, second, -roots) - roots_low;
  double outer = fma(square, square - LAC_J0_QUADRATIC_TOTAL, LAC_J0_QUADRATIC_PRODUCT);
  double shape = lac_j0_shape(fma(square, 0x1p-5, -0.5)), rest = outer * shape;
  return fma(roots, rest, fma(roots, fma(outer, shape, -rest), roots_lost * rest));
}

/* J0 for 8 <= x < 1e8: modulus times the cosine of the phase, taken as the sine of x + pi/4 + ...; m pi/4 is subtracted in two parts,
   the first without rounding error that matters. Abramowitz & Stegun 1964, Eq. 9.2.17. */
LAC_INLINE double lac_j0_high(double x) {
  double w = 1 / x, y = w * w;
  double rounded = fma(x, LAC_ONE_OVER_PI, 0.25) + LAC_ROUNDER;
  double m = fma(rounded - LAC_ROUNDER, 4, -1);
  double correction = fma(-m, LAC_QUARTER_PI_LOW, w * lac_j0_phase(y));
  double r = fma(-m, LAC_QUARTER_PI_HIGH, x) + correction, z = r * r;
  double sine = fma(r * z, lac_sine_tail(z), r);
  double value = sqrt(LAC_TWO_OVER_PI * w) * lac_j0_modulus(y) * sine;
  return lac_from_bits(lac_bits(value) ^ (lac_bits(rounded) << 63));
}

LAC_INLINE double lac_j0_inline(double x) {
  double size = fabs(x);
  double value = lac_choose(size <= 8, lac_j0_low(size), lac_j0_high(size));
  return lac_choose(size < 1e8, value, (double)NAN);
}

#endif
