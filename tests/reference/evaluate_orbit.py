# SPDX-License-Identifier: GPL-3.0-or-later
"""Orbit relations evaluated with 40 digits from the cited papers, and Roche lobes from the potential itself, by quadrature;
writes evaluated_orbit.csv."""
import math

from mpmath import mp, mpf

from evaluation import check, write

mp.dps = 40
UNITS = {
    "planet_mass": "kg", "second_planet_mass": "kg", "companion_mass": "kg", "stellar_mass": "kg", "planet_star_mass_ratio": "1",
    "planet_semi_major_axis": "m", "second_planet_semi_major_axis": "m", "hill_radius": "m", "mutual_hill_radius": "m",
    "companion_mass_ratio": "1", "companion_mass_fraction": "1", "companion_separation": "m", "companion_eccentricity": "1",
    "roche_lobe_radius": "m", "truncation_radius": "m",
}

FEW = "relative 2e-15"  # nine units of 2^-52: rounded inputs, a few operations
DIFFERENCE = "relative 1e-14"  # a difference that is down to a tenth of its terms


def eggleton(a, ratio):
    q = 1 / ratio  # of the star over the companion
    return a * mpf("0.49") * q ** (mpf(2) / 3) / (mpf("0.6") * q ** (mpf(2) / 3) + mp.log(1 + q ** (mpf(1) / 3)))


# Manara et al. (2019), Table C.1, circumprimary: mu, then b and c.
TABLE = {
    "re1e4": [("0.1", "-0.66", "0.84"), ("0.2", "-0.72", "0.88"), ("0.3", "-0.76", "0.92"), ("0.4", "-0.77", "0.95"), ("0.5", "-0.78", "0.94")],
    "re1e5": [("0.1", "-0.75", "0.68"), ("0.2", "-0.78", "0.72"), ("0.3", "-0.80", "0.75"), ("0.4", "-0.81", "0.78"), ("0.5", "-0.81", "0.78")],
    "re1e6": [("0.1", "-0.78", "0.56"), ("0.2", "-0.80", "0.60"), ("0.3", "-0.81", "0.63"), ("0.4", "-0.82", "0.66"), ("0.5", "-0.82", "0.66")],
}


def linear(table, column, mu):
    for low, high in zip(table, table[1:]):
        if mpf(low[0]) <= mu <= mpf(high[0]):
            part = (mu - mpf(low[0])) / (mpf(high[0]) - mpf(low[0]))
            return mpf(low[column]) + part * (mpf(high[column]) - mpf(low[column]))
    raise ValueError(f"mu = {mu} is outside the table")


def manara(reynolds):
    def radius(lobe, mu, e):
        table = TABLE[reynolds]
        eccentric = linear(table, 1, mu) * e ** linear(table, 2, mu) if e > 0 else 0
        return lobe * (eccentric + mpf("0.88") * mu ** mpf("0.01"))

    return radius


def lobe_by_quadrature(q, polar=640, azimuths=16):
    """Volume radius of the lobe of the mass q in units of the separation, the other mass being 1: the surface r(theta, phi) round the
    star on which the potential is that of the inner Lagrangian point; midpoint rule, five digits."""
    one, two = q / (1 + q), 1 / (1 + q)

    def potential(x, rho2, y2):
        return -one / math.sqrt(x * x + rho2) - two / math.sqrt((1 - x) ** 2 + rho2) - ((x - two) ** 2 + y2) / 2

    def bisect(sign, low, high):
        for _ in range(60):
            middle = (low + high) / 2
            low, high = (middle, high) if sign(middle) else (low, middle)
        return low

    point = bisect(lambda x: one / x**2 - two / (1 - x) ** 2 - (x - two) > 0, 1e-9, 1 - 1e-9)
    surface = potential(point, 0, 0)
    volume = 0
    for k in range(polar):
        theta = (k + 0.5) * math.pi / polar
        x, rho = math.cos(theta), math.sin(theta)
        for j in range(azimuths):
            y = rho * math.cos((j + 0.5) * math.pi / 2 / azimuths)
            r = bisect(lambda r: potential(r * x, (r * rho) ** 2, (r * y) ** 2) < surface, 0, point)
            volume += r**3 / 3 * rho * (math.pi / polar) * (2 * math.pi / azimuths)
    return (3 * volume / (4 * math.pi)) ** (1 / 3)


MASSES = [("1.898e27", "1.989e30"), ("5.97e24", "3.1e29")]
TRUNCATIONS = [("1.2e12", "0.5", "0"), ("1.2e12", "0.1", "0"), ("1.2e12", "0.03", "0"), ("1.2e12", "0.5", "0.2"), ("1.2e12", "0.5", "0.5"),
               ("8.1e12", "0.1", "0.3"), ("8.1e12", "0.3", "0.05"), ("8.1e12", "0.2", "0.61"), ("8.1e12", "0.37", "0.8"), ("1", "0.125", "1e-4")]
ROWS = [
    ("planet_star_mass_ratio", "definition", ["planet_mass", "stellar_mass"], lambda p, s: p / s, FEW, MASSES),
    ("planet_mass", "definition", ["planet_star_mass_ratio", "stellar_mass"], lambda q, s: q * s, FEW, [("9.5e-4", "1.989e30"), ("3e-6", "3.1e29")]),
    ("hill_radius", "hill", ["planet_semi_major_axis", "planet_star_mass_ratio"], lambda a, q: a * mp.cbrt(q / 3), FEW,
     [("7.8e11", "9.5e-4"), ("1.5e11", "3e-6")]),
    ("mutual_hill_radius", "gladman_1993",
     ["planet_mass", "second_planet_mass", "stellar_mass", "planet_semi_major_axis", "second_planet_semi_major_axis"],
     lambda p, s, m, a, b: mp.cbrt((p + s) / (3 * m)) * (a + b) / 2, FEW,
     [("1.898e27", "5.68e26", "1.989e30", "7.8e11", "1.43e12"), ("5.97e24", "6.4e23", "3.1e29", "3.1e10", "2.2e10")]),
    ("companion_mass_ratio", "definition", ["companion_mass", "stellar_mass"], lambda c, s: c / s, FEW, [("7.1e29", "1.989e30"), ("4e30", "3.1e29")]),
    ("companion_mass_fraction", "definition", ["companion_mass", "stellar_mass"], lambda c, s: c / (c + s), FEW,
     [("7.1e29", "1.989e30"), ("4e30", "3.1e29")]),
    ("companion_mass", "definition", ["companion_mass_ratio", "stellar_mass"], lambda q, s: q * s, FEW, [("0.36", "1.989e30"), ("12.9", "3.1e29")]),
    ("roche_lobe_radius", "eggleton_1983", ["companion_separation", "companion_mass_ratio"], eggleton, FEW,
     [("1", "10"), ("1", "2"), ("1", "1"), ("1", "0.5"), ("1", "0.1"), ("4.4e12", "1e-5"), ("4.4e12", "3e4")]),
] + [
    ("truncation_radius", f"manara_2019_{reynolds}", ["roche_lobe_radius", "companion_mass_fraction", "companion_eccentricity"],
     manara(reynolds), DIFFERENCE, TRUNCATIONS) for reynolds in ("re1e5", "re1e4", "re1e6")
]

# The fit is stated to be good to 1 %.
LOBES = [
    check("roche_lobe_radius", "eggleton_1983", [("companion_separation", "1"), ("companion_mass_ratio", ratio)],
          mpf(f"{lobe_by_quadrature(1 / float(ratio)):.5f}"), "relative 0.01", "outside",
          "volume of the Roche lobe from its potential, by quadrature in tests/reference/evaluate_orbit.py, 5 digits", UNITS)
    for ratio in ("10", "2", "1", "0.5", "0.1")
]

if __name__ == "__main__":
    write("orbit", UNITS, ROWS, LOBES)
