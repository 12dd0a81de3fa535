#!/usr/bin/python3
# SPDX-License-Identifier: GPL-3.0-or-later
"""Fits the series of the black-body fraction and writes core/planck_polynomials.h.

Run from the top directory: python3 tests/reference/fit_planck.py > core/planck_polynomials.h
Interpolation at Chebyshev nodes with 90 digits, as in fit_kernels.py. Needs python3-mpmath.

With y = exp(-x): integral of t^3/(e^t - 1) from x to infinity = x^3 L1(y) + 3 x^2 L2(y) + 6 x L3(y) + 6 L4(y), L the polylogarithm
(Chang & Rhee 1984, International Communications in Heat and Mass Transfer 11, 451); from 0 to x, the Bernoulli series.
"""
from mpmath import bernoulli, exp, factorial, mp, mpf

from fit_kernels import fit, write

mp.dps = 90


def bernoulli_tail(u):
    """(integral of t^3/(e^t - 1) from 0 to x, over x^3, less 1/3 - x/8)/x^2 in u = x^2."""
    return sum(bernoulli(2 * n) * u ** (n - 1) / ((2 * n + 3) * factorial(2 * n)) for n in range(1, 100))


def polylogarithm(order):
    return lambda y: sum(y ** (n - 1) / mpf(n) ** order for n in range(1, 110))


print("/* SPDX-License-Identifier: GPL-3.0-or-later */")
print("/* Series of the black-body fraction. Written by tests/reference/fit_planck.py: change that, not this. */")
print("#ifndef LACUNA_CORE_PLANCK_POLYNOMIALS_H\n#define LACUNA_CORE_PLANCK_POLYNOMIALS_H")
write("lac_bernoulli_tail", "(integral from 0 to x of t^3/(e^t - 1), over x^3, less 1/3 - x/8)/x^2 in t = x^2, x <= 2",
      *fit(bernoulli_tail, 0, 4, 10))
for order in (1, 2, 3, 4):
    write(f"lac_polylogarithm_{order}", f"the polylogarithm of order {order} over its argument t, t <= exp(-2)",
          *fit(polylogarithm(order), 0, exp(mpf(-2)) + mpf("1e-6"), 12))
print("\n#endif")
