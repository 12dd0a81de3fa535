/* SPDX-License-Identifier: GPL-3.0-or-later */
/* A root within a bracket: false position, with the weight of an end halved that stays (the Illinois form: Dowell & Jarratt 1971, BIT 11,
   168), which converges faster than linearly and never leaves the bracket. The same steps on every machine that rounds alike. */
#include "root.h"

#include <math.h>

enum { MOST_STEPS = 200 };

double lac_root_between(lac_root_function *f, void *context, double low, double high) {
  double a = low, b = high, fa = f(context, a), fb = f(context, b);
  const double close = 1e-13 * fmax(fabs(low), fabs(high));
  if (fa == 0) return a;
  if (fb == 0) return b;
  if (!(fa * fb < 0)) return (double)NAN;
  for (int step = 0, side = 0; step < MOST_STEPS && fabs(b - a) > close; step++) {
    const double c = (a * fb - b * fa) / (fb - fa), fc = f(context, c);
    if (fc == 0) return c;
    if (isnan(fc)) return (double)NAN;
    const int now = fc * fb > 0 ? 1 : -1;
    if (now > 0) {
      if (fabs(c - b) <= close) return c;
      b = c, fb = fc;
      if (side == now) fa /= 2;
    } else {
      if (fabs(c - a) <= close) return c;
      a = c, fa = fc;
      if (side == now) fb /= 2;
    }
    side = now;
  }
  return (a * fb - b * fa) / (fb - fa);
}
