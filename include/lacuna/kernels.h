/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Elementary functions over blocks, written so that compilers vectorise them, with the same bits on
   every processor: same operations in the same order, fused multiply-adds only where they are written. */
#ifndef LACUNA_KERNELS_H
#define LACUNA_KERNELS_H

#include <stddef.h>

#ifdef __cplusplus
extern "C" {
#endif

/* Each: out[i] = f(x[i]) for n elements; out may be x. Accuracy is stated in units of 2^-53 of the result (absolute where it says so).
   Outside the domain: NaN. The scalar forms give the same bits. */
void lac_kernel_exp(size_t n, double *out, const double *x);   /* |error| <= 2 units; overflow gives infinity, underflow 0 */
void lac_kernel_expm1(size_t n, double *out, const double *x); /* <= 3 units */
void lac_kernel_log(size_t n, double *out, const double *x);   /* x > 0; <= 2 units */
void lac_kernel_sincos2pi(size_t n, double *sine, double *cosine, const double *turns); /* sin and cos of 2 pi x, |x| <= 1 */
void lac_kernel_j0(size_t n, double *out, const double *x);    /* Bessel J0, |x| < 1e8; absolute error <= 4 units, relative near the first zeros for |x| <= 8 */
double lac_j0(double x);

#ifdef __cplusplus
}
#endif

#endif
