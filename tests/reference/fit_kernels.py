#!/usr/bin/python3
# SPDX-License-Identifier: GPL-3.0-or-later
"""Fits the polynomials of the elementary kernels and writes core/kernels_polynomials.h.

Run from the top directory: python3 tests/reference/fit_kernels.py > core/kernels_polynomials.h
Each function is interpolated at Chebyshev nodes with 90 digits (near the best polynomial of its degree), turned into powers and
rounded to doubles. The relative or absolute error of each fit is written beside it. Needs python3-mpmath.

J0 and its modulus and phase: Abramowitz & Stegun 1964, Eqs. 9.2.17 and 9.2.19 for the definitions; zeros from mpmath.
"""
from fractions import Fraction

from mpmath import atan2, besselj, besseljzero, bessely, chebyfit, cos, fabs, log, mp, mpf, nstr, pi, sin, sqrt

mp.dps = 90


def near_zero(function, x):
    """A quotient with a removable singularity at 0: taken beside it, where the working precision still suffices."""
    return function(x) if fabs(x) > mpf(10) ** -24 else function(mpf(10) ** -24)


def fit(function, low, high, count):
    """Coefficients, constant first, as doubles, and the largest error before rounding them."""
    coefficients, error = chebyfit(function, [mpf(low), mpf(high)], count, error=True)
    return [float(c) for c in reversed(coefficients)], error


def write(name, comment, coefficients, error):
    print(f"\n/* {comment}; |error| < {nstr(error, 2)}. */")
    print(f"LAC_INLINE double {name}(double t) {{")
    print(f"  double sum = {coefficients[-1].hex()};")
    for c in reversed(coefficients[:-1]):
        print(f"  sum = fma(sum, t, {c.hex()});")
    print("  return sum;\n}")


def two_doubles(value):
    high = float(value)
    return high, float(value - mpf(high))


def constant(name, value):
    print(f"#define {name} {value.hex()}")


def fma(a, b, c):
    return float(Fraction(a) * Fraction(b) + Fraction(c))


zeros = [besseljzero(0, k) for k in range(1, 5)]


def j0_shape(t, total, product):
    """J0 over its first two zeros' factors and a quadratic that makes it flat, with u = x^2 = 32 t + 16: expanded
    about 16, so that the constant term dominates where J0 is large."""
    u = 32 * t + 16
    divisor = (u - zeros[0] ** 2) * (u - zeros[1] ** 2) * (u * (u - total) + product)
    return besselj(0, sqrt(u)) / divisor if fabs(divisor) > mpf(10) ** -20 else j0_shape(t + mpf(10) ** -25, total, product)


def value_at_zero(coefficients, product):
    """J0(0) by the kernel's own operations."""
    first, second = (two_doubles(z**2) for z in zeros[:2])
    roots = first[0] * second[0]
    roots_lost = fma(first[0], second[0], -roots) + fma(first[1], second[0], second[1] * first[0])
    shape = coefficients[-1]
    for c in reversed(coefficients[:-1]):
        shape = fma(shape, -0.5, c)
    rest = product * shape
    return fma(roots, rest, fma(roots, fma(product, shape, -rest), roots_lost * rest))


def fit_j0_shape():
    """The quadratic need not vanish at zeros of J0 to the last digit: its constant is moved until J0(0) = 1 exactly."""
    total = float(zeros[2] ** 2 + zeros[3] ** 2)
    for step in range(200):
        product = float(zeros[2] ** 2 * zeros[3] ** 2) + step * 2.0**-39
        coefficients, error = fit(lambda t: j0_shape(t, total, product), -0.5, 1.5, 13)
        if value_at_zero(coefficients, product) == 1.0:
            return total, product, coefficients, error
    raise SystemExit("no quadratic gives J0(0) = 1")


def modulus(y):
    """sqrt(pi x / 2) times the modulus of J0 + i Y0, for y = 1/x^2."""
    if y < mpf(10) ** -12:
        return 1 - y / 16
    x = 1 / sqrt(y)
    return sqrt((besselj(0, x) ** 2 + bessely(0, x) ** 2) * pi * x / 2)


def phase(y):
    """x times what the phase of J0 + i Y0 exceeds x - pi/4 by."""
    if y < mpf(10) ** -12:
        return -mpf(1) / 8 + 25 * y / 384
    x = 1 / sqrt(y)
    j, n, c, s = besselj(0, x), bessely(0, x), cos(x - pi / 4), sin(x - pi / 4)
    return atan2(n * c - j * s, j * c + n * s) * x


def main():
    print("/* SPDX-License-Identifier: GPL-3.0-or-later */")
    print("/* Polynomials and constants of the kernels. Written by tests/reference/fit_kernels.py: change that, not this. */")
    print("#ifndef LACUNA_CORE_KERNELS_POLYNOMIALS_H\n#define LACUNA_CORE_KERNELS_POLYNOMIALS_H\n")

    ln2_high = float(mp.floor(log(2) * 2**42)) / 2**42
    constant("LAC_LN2_HIGH", ln2_high)
    constant("LAC_LN2_LOW", float(log(2) - mpf(ln2_high)))
    constant("LAC_LOG2_E", float(1 / log(2)))
    for name, value in (("LAC_TWO_PI", 2 * pi), ("LAC_QUARTER_PI", pi / 4), ("LAC_J0_ZERO_1_SQUARED", zeros[0] ** 2),
                        ("LAC_J0_ZERO_2_SQUARED", zeros[1] ** 2)):
        high, low = two_doubles(value)
        constant(name + "_HIGH", high)
        constant(name + "_LOW", low)
    total, product, shape, shape_error = fit_j0_shape()
    constant("LAC_J0_QUADRATIC_TOTAL", total)
    constant("LAC_J0_QUADRATIC_PRODUCT", product)
    constant("LAC_TWO_OVER_PI", float(2 / pi))
    constant("LAC_ONE_OVER_PI", float(1 / pi))

    half = log(2) / 2 + mpf("1e-4")
    write("lac_exp_tail", "(exp(t) - 1 - t)/t^2, |t| <= ln(2)/2",
          *fit(lambda t: near_zero(lambda r: (mp.expm1(r) - r) / r**2, t), -half, half, 11))
    edge = ((sqrt(2) - 1) / (sqrt(2) + 1)) ** 2 + mpf("1e-5")
    write("lac_log_tail", "(ln((1 + s)/(1 - s)) - 2 s)/s^3 in t = s^2, for (1 + s)/(1 - s) from sqrt(1/2) to sqrt(2)",
          *fit(lambda t: near_zero(lambda z: (log((1 + sqrt(z)) / (1 - sqrt(z))) / sqrt(z) - 2) / z, t), 0, edge, 7))
    write("lac_sine_turns_tail", "(sin(2 pi r) - 2 pi r)/r^3 in t = r^2, |r| <= 1/8",
          *fit(lambda t: near_zero(lambda z: (sin(2 * pi * sqrt(z)) / sqrt(z) - 2 * pi) / z, t), 0, mpf(1) / 64, 6))
    write("lac_cosine_turns_tail", "(cos(2 pi r) - 1)/r^2 in t = r^2, |r| <= 1/8",
          *fit(lambda t: near_zero(lambda z: (cos(2 * pi * sqrt(z)) - 1) / z, t), 0, mpf(1) / 64, 7))
    write("lac_sine_tail", "(sin(r) - r)/r^3 in t = r^2, |r| <= 1.6",
          *fit(lambda t: near_zero(lambda z: (sin(sqrt(z)) / sqrt(z) - 1) / z, t), 0, mpf("2.56"), 8))
    write("lac_j0_shape", "J0(x)/((u - j1^2)(u - j2^2)(u^2 - total u + product)) in t = u/32 - 1/2, u = x^2 <= 64, j1 and j2 zeros of J0",
          shape, shape_error)
    write("lac_j0_modulus", "sqrt(pi x/2) |J0(x) + i Y0(x)| in t = 1/x^2, x >= 8", *fit(modulus, 0, mpf(1) / 64, 11))
    write("lac_j0_phase", "x (arg(J0(x) + i Y0(x)) - x + pi/4) in t = 1/x^2, x >= 8", *fit(phase, 0, mpf(1) / 64, 11))
    print("\n#endif")


if __name__ == "__main__":
    main()
