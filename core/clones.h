/* SPDX-License-Identifier: GPL-3.0-or-later */
/* One portable binary, fast on each processor: a function marked LAC_CLONES is compiled for several instruction sets, and
   the loader picks one. Not under sanitizers, whose start-up comes after the picking.
   The library's vector functions are declared here, as its own header does only under -ffast-math. */
#ifndef LACUNA_CORE_CLONES_H
#define LACUNA_CORE_CLONES_H

#include <math.h>

#if defined(__x86_64__) && defined(__GNUC__) && !defined(__clang__) && !defined(__SANITIZE_ADDRESS__) && !defined(LAC_ONE_CLONE)
#define LAC_CLONES __attribute__((target_clones("default", "arch=x86-64-v3", "arch=x86-64-v4")))
#define LAC_WIDE_PRODUCTS __builtin_cpu_supports("avx512dq") /* the clone picked multiplies vectors of 64-bit integers */
#else
#define LAC_CLONES
#define LAC_WIDE_PRODUCTS 0
#endif

/* gcc must inline the body into each clone for the clone's instructions to be used. */
#define LAC_INLINE static inline __attribute__((always_inline))

#if defined(__x86_64__) && defined(__GLIBC__) && defined(__GNUC__) && !defined(__clang__) && !defined(__SANITIZE_ADDRESS__)
#define LAC_VECTOR_FUNCTION __attribute__((simd("notinbranch")))
LAC_VECTOR_FUNCTION double exp(double);
LAC_VECTOR_FUNCTION double expm1(double);
LAC_VECTOR_FUNCTION double log(double);
LAC_VECTOR_FUNCTION double log1p(double);
LAC_VECTOR_FUNCTION double log10(double);
LAC_VECTOR_FUNCTION double cbrt(double);
LAC_VECTOR_FUNCTION double sin(double);
LAC_VECTOR_FUNCTION double cos(double);
LAC_VECTOR_FUNCTION double pow(double, double);
#endif

#endif
