/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The block functions that arithmetic between values is made of. Undefined stays undefined: a comparison, a minimum or a
   logical word of NaN is NaN, where C would answer "no" or take the other one. */
#include "clones.h"
#include "lacuna/quantity.h"
#include "relation.h"
#include "value.h"

#define ONE(name, expression)                                                                                                              \
  LAC_CLONES void lac_block_##name(size_t n, double *restrict out, const double *const *in) {                                              \
    for (size_t i = 0; i < n; i++) {                                                                                                       \
      const double a = in[0][i];                                                                                                           \
      out[i] = (expression);                                                                                                               \
    }                                                                                                                                      \
  }
#define TWO(name, expression)                                                                                                              \
  LAC_CLONES void lac_block_##name(size_t n, double *restrict out, const double *const *in) {                                              \
    for (size_t i = 0; i < n; i++) {                                                                                                       \
      const double a = in[0][i], b = in[1][i];                                                                                             \
      out[i] = (expression);                                                                                                               \
    }                                                                                                                                      \
  }
#define DEFINED(value) ((value) == (value))
#define BOTH(value) lac_where(DEFINED(a) & DEFINED(b), (value))

TWO(add, a + b)
TWO(subtract, a - b)
TWO(multiply, a *b)
TWO(divide, a / b)
TWO(power, pow(a, b))
TWO(above, BOTH(a > b ? 1.0 : 0.0))
TWO(below, BOTH(a < b ? 1.0 : 0.0))
TWO(and, BOTH((a != 0) & (b != 0) ? 1.0 : 0.0))
TWO(or, BOTH((a != 0) | (b != 0) ? 1.0 : 0.0))
TWO(minimum, BOTH(a < b ? a : b))
TWO(maximum, BOTH(a > b ? a : b))
TWO(scaled, lac_where(a > 0, a *b))
ONE(not, lac_where(DEFINED(a), a != 0 ? 0.0 : 1.0))
ONE(negate, -a)
ONE(absolute, fabs(a))
ONE(root, sqrt(a))
ONE(exp, exp(a))
ONE(log, lac_where(a > 0, log(a)))
ONE(log10, lac_where(a > 0, log10(a)))
ONE(sin, sin(a))
ONE(cos, cos(a))
ONE(tan, tan(a))
