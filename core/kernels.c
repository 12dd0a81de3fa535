/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Elementary functions over blocks: the bodies of kernels_inline.h in loops that gcc vectorises.
   out may be x, so the pointers are not restrict; but an element depends on none other, which ivdep tells. */
#include "lacuna/kernels.h"

#include "kernels_inline.h"

LAC_CLONES void lac_kernel_exp(size_t n, double *out, const double *x) {
#pragma GCC ivdep
  for (size_t i = 0; i < n; i++) out[i] = lac_exp_inline(x[i]);
}

LAC_CLONES void lac_kernel_expm1(size_t n, double *out, const double *x) {
#pragma GCC ivdep
  for (size_t i = 0; i < n; i++) out[i] = lac_expm1_inline(x[i]);
}

LAC_CLONES void lac_kernel_log(size_t n, double *out, const double *x) {
#pragma GCC ivdep
  for (size_t i = 0; i < n; i++) out[i] = lac_log_inline(x[i]);
}

LAC_CLONES void lac_kernel_sincos2pi(size_t n, double *sine, double *cosine, const double *turns) {
#pragma GCC ivdep
  for (size_t i = 0; i < n; i++) {
    double s, c;
    int inside = fabs(turns[i]) <= 1;
    lac_sincos2pi_inline(turns[i], &s, &c);
    sine[i] = lac_choose(inside, s, (double)NAN);
    cosine[i] = lac_choose(inside, c, (double)NAN);
  }
}

/* Most blocks lie wholly on one side of 8, where one of the two expressions is enough. */
LAC_INLINE void j0_piece(size_t n, double *out, const double *x) {
  uint64_t above = 0, beyond = 0;
  for (size_t i = 0; i < n; i++) {
    above += (uint64_t)(fabs(x[i]) > 8);
    beyond += (uint64_t) !(fabs(x[i]) < 1e8);
  }
  if (above == 0 && beyond == 0) {
#pragma GCC ivdep
    for (size_t i = 0; i < n; i++) out[i] = lac_j0_low(fabs(x[i]));
  } else if (above == n && beyond == 0) {
#pragma GCC ivdep
    for (size_t i = 0; i < n; i++) out[i] = lac_j0_high(fabs(x[i]));
  } else {
#pragma GCC ivdep
    for (size_t i = 0; i < n; i++) out[i] = lac_j0_inline(x[i]);
  }
}

LAC_CLONES void lac_kernel_j0(size_t n, double *out, const double *x) {
  enum { PIECE = 128 };
  for (size_t i = 0; i < n; i += PIECE) j0_piece(n - i < PIECE ? n - i : PIECE, out + i, x + i);
}

LAC_CLONES double lac_j0(double x) { return lac_j0_inline(x); }
