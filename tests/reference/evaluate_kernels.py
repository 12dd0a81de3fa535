# SPDX-License-Identifier: GPL-3.0-or-later
"""Points that are hard for the kernels and for the Planck function, evaluated with 40 digits by mpmath; writes kernel_exp.csv, kernel_expm1.csv,
kernel_log.csv, kernel_sincos2pi.csv, kernel_j0.csv and planck_fine.csv beside the script. Every argument is a double, printed so that it is read
back exactly, and the function is evaluated for that double. Seeded: a second run writes the same files."""
import math
import os
import random

from mpmath import besselj, besseljzero, cospi, exp, expm1, log, mp, mpf, nstr, pi, sinpi

mp.dps = 40
HERE = os.path.dirname(os.path.abspath(__file__))
H, C, K = mpf("6.62607015e-34"), mpf(299792458), mpf("1.380649e-23")  # SI 2019, exact
draw = random.Random(20190520)


def write(name, columns, points, *functions):
    with open(os.path.join(HERE, name + ".csv"), "w", encoding="utf-8") as file:
        file.write("# SPDX-License-Identifier: GPL-3.0-or-later\n# Written by evaluate_kernels.py, mpmath, 40 digits, 25 printed.\n" + columns + "\n")
        for point in points:
            arguments = point if isinstance(point, tuple) else (point,)
            values = [nstr(f(*map(mpf, arguments)), 25, min_fixed=0, max_fixed=0) for f in functions]
            file.write(",".join([repr(a) for a in arguments] + values) + "\n")


def beside(centre, steps=2):
    """A double and its nearest neighbours."""
    points = [float(centre)]
    for direction in (math.inf, -math.inf):
        x = float(centre)
        for _ in range(steps):
            x = math.nextafter(x, direction)
            points.append(x)
    return points


def spread(low, high, count):
    return [draw.uniform(low, high) for _ in range(count)]


def log_spread(low, high, count, sign=1):
    return [sign * math.exp(draw.uniform(math.log(low), math.log(high))) for _ in range(count)]


edges = [x for k in (-1000, -53, -2, -1, 0, 1, 2, 53, 1000) for x in beside((k + mpf("0.5")) * log(2), 1)]
write("kernel_exp", "x,exp", spread(-708, 709.7, 120) + spread(-1, 1, 80) + log_spread(1e-18, 1e-2, 20) + edges + [0.0, 709.75], exp)
write("kernel_expm1", "x,expm1",
      spread(-50, 709.7, 80) + spread(-1, 1, 120) + log_spread(1e-300, 1e-2, 40) + log_spread(1e-300, 1e-2, 40, -1) +
      [x for x in edges if abs(x) < 700] + [-800.0, 709.75], expm1)
write("kernel_log", "x,log",
      log_spread(1e-307, 1e307, 100) + log_spread(5e-324, 1e-308, 10) + spread(0.5, 2, 100) + beside(1.0, 4) + beside(mp.sqrt(2)) +
      beside(mp.sqrt(2) / 2) + [1 + s * 2.0**-k for k in range(2, 50, 3) for s in (1, -1)] + [2.0**1023 * 1.9, 5e-324, 2.0**-1022], log)
write("kernel_sincos2pi", "turns,sine,cosine",
      spread(-1, 1, 160) + log_spread(1e-300, 1e-2, 20) + [x for k in range(-8, 9) if k % 4 for x in beside(mpf(k) / 8, 1)] +
      [x for k in (-2, 2) for x in beside(mpf(k) / 4, 1)],
      lambda x: sinpi(2 * x), lambda x: cospi(2 * x))
zeros = [x for k in (1, 2, 3, 4, 10, 100, 10000) for x in beside(besseljzero(0, k), 1)]
write("kernel_j0", "x,j0",
      spread(0, 8, 120) + spread(-1.5, 1.5, 40) + spread(8, 50, 80) + log_spread(50, 9.9e7, 60) + zeros + beside(8.0) +
      [0.0, 1e-300, 1e-9, math.nextafter(1e8, 0)], lambda x: besselj(0, x))


def planck_point(low, high):
    """A wavelength of 0.1 um to 10 mm and a temperature that give h c/(lambda k T) in the range."""
    wavelength = log_spread(1e-7, 1e-2, 1)[0]
    x = log_spread(low, high, 1)[0]
    return wavelength, float(H * C / (K * wavelength * x))


def planck(power, numerator):
    return lambda wavelength, t: numerator / wavelength**power / expm1(H * C / (wavelength * K * t))


def slope(wavelength, t):
    x = H * C / (wavelength * K * t)
    return 2 * H * C / wavelength**3 / expm1(x) * x / t * exp(x) / expm1(x)


def fraction(wavelength, t):
    x = H * C / (wavelength * K * t)
    if x < mpf("0.2"):  # the sum converges slowly there; 1 less the Bernoulli series
        terms = (mp.bernoulli(n) * x ** (n + 3) / ((n + 3) * mp.factorial(n)) for n in range(40))
        return 1 - 15 / pi**4 * sum(terms)
    total, n = mpf(0), 1
    while True:
        term = exp(-n * x) * (x**3 / n + 3 * x**2 / n**2 + 6 * x / n**3 + mpf(6) / n**4)
        total += term
        if term < total * mpf(10) ** -35:
            return 15 / pi**4 * total
        n += 1


def normal_range(point):
    return all(f(*map(mpf, point)) > mpf(10) ** -300 for f in (planck(3, 2 * H * C), planck(5, 2 * H * C**2)))


points = [planck_point(*limits) for limits in ((1e-6, 700), (0.3, 3), (1, 50), (300, 700)) for _ in range(100)]
write("planck_fine", "wavelength,temperature,planck_nu,planck_lambda,photon_radiance_nu,photon_radiance_lambda,slope,fraction",
      filter(normal_range, points), planck(3, 2 * H * C), planck(5, 2 * H * C**2), planck(2, 2), planck(4, 2 * C), slope, fraction)
