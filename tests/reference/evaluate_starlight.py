# SPDX-License-Identifier: GPL-3.0-or-later
"""Starlight relations evaluated with 40 digits from the definitions and the cited papers; writes evaluated_starlight.csv."""
from mpmath import mp, mpf, pi

from evaluation import write

mp.dps = 40
G = mpf("6.67430e-11")  # CODATA 2018
AU = mpf(149597870700)  # IAU 2012 B2
K, H, C = mpf("1.380649e-23"), mpf("6.62607015e-34"), mpf(299792458)  # SI 2019
SIGMA = 2 * pi**5 * K**4 / (15 * H**3 * C**2)

UNITS = {
    "parallax": "rad", "distance": "m", "catalogue_distance": "m", "stellar_mass": "kg", "stellar_radius": "m",
    "effective_temperature": "K", "bolometric_flux": "W.m**-2", "catalogue_luminosity": "W", "stellar_luminosity": "W",
    "mass_accretion_rate": "kg/s", "magnetospheric_radius": "m", "accretion_luminosity": "W", "heating_luminosity": "W",
    "rotation_period": "s", "corotation_radius": "m", "stellar_angular_diameter": "rad",
}

FEW = "relative 2e-15"  # nine units of 2^-52: rounded inputs, a few operations

ROWS = [
    ("distance", "parallax", ["parallax"], lambda p: AU / p, FEW, [("3.1e-8",), ("4.8481368110953599e-6",)]),
    ("parallax", "distance", ["distance"], lambda d: AU / d, FEW, [("4.8e18",), ("3.0856775814913673e16",)]),
    ("stellar_radius", "angular_diameter", ["stellar_angular_diameter", "distance"], lambda t, d: t * d / 2, FEW,
     [("7.3e-10", "4.32e18"), ("3.1e-8", "4.1e16")]),
    ("stellar_radius", "luminosity_and_temperature", ["stellar_luminosity", "effective_temperature"],
     lambda l, t: mp.sqrt(l / (4 * pi * SIGMA * t**4)), FEW, [("1.8e28", "9600"), ("2.2e25", "3300")]),
    ("effective_temperature", "luminosity_and_radius", ["stellar_luminosity", "stellar_radius"],
     lambda l, r: (l / (4 * pi * SIGMA * r**2)) ** mpf("0.25"), FEW, [("1.8e28", "1.5e9"), ("2.2e25", "5.1e8")]),
    ("bolometric_flux", "luminosity_and_distance", ["stellar_luminosity", "distance"], lambda l, d: l / (4 * pi * d**2), FEW,
     [("1.8e28", "4.8e18"), ("2.2e25", "3.9e17")]),
    ("stellar_luminosity", "flux_and_distance", ["bolometric_flux", "distance"], lambda f, d: 4 * pi * d**2 * f, FEW,
     [("2.4e-11", "4.8e18"), ("3.3e-13", "9.9e18")]),
    ("stellar_luminosity", "catalogue", ["catalogue_luminosity", "catalogue_distance", "distance"],
     lambda l, dc, d: l * (d / dc) ** 2, FEW, [("1.8e28", "4.3e18", "4.8e18"), ("6.1e26", "5.0e18", "3.1e18")]),
    ("stellar_luminosity", "radius_and_temperature", ["stellar_radius", "effective_temperature"],
     lambda r, t: 4 * pi * r**2 * SIGMA * t**4, FEW, [("1.5e9", "9600"), ("5.1e8", "3300")]),
    ("magnetospheric_radius", "gullbring_1998", ["stellar_radius"], lambda r: 5 * r, FEW, [("1.5e9",), ("5.1e8",)]),
    ("accretion_luminosity", "gullbring_1998", ["mass_accretion_rate", "stellar_mass", "stellar_radius", "magnetospheric_radius"],
     lambda mdot, m, r, rin: G * m * mdot / r * (1 - r / rin), FEW,
     [("6.3e17", "1.4e30", "1.5e9", "7.5e9"), ("3.1e15", "3.7e29", "5.1e8", "1.6e9"), ("0", "1.4e30", "1.5e9", "7.5e9")]),
    ("mass_accretion_rate", "gullbring_1998", ["accretion_luminosity", "stellar_mass", "stellar_radius", "magnetospheric_radius"],
     lambda l, m, r, rin: l * r / (G * m) / (1 - r / rin), FEW,
     [("3.1e25", "1.4e30", "1.5e9", "7.5e9"), ("8.2e23", "3.7e29", "5.1e8", "1.6e9"), ("0", "1.4e30", "1.5e9", "7.5e9")]),
    ("heating_luminosity", "star_plus_accretion", ["stellar_luminosity", "accretion_luminosity"], lambda l, a: l + a, FEW,
     [("1.8e28", "3.1e25"), ("2.2e25", "0")]),
    ("heating_luminosity", "star_alone", ["stellar_luminosity"], lambda l: l, FEW, [("1.8e28",), ("2.2e25",)]),
    ("rotation_period", "kepler", ["stellar_mass", "corotation_radius"], lambda m, r: mp.sqrt(4 * pi**2 * r**3 / (G * m)), FEW,
     [("1.4e30", "1.1e10"), ("3.7e29", "5.3e9")]),
    ("corotation_radius", "kepler", ["stellar_mass", "rotation_period"], lambda m, p: mp.cbrt(G * m * p**2 / (4 * pi**2)), FEW,
     [("1.4e30", "710000"), ("3.7e29", "120000")]),
    ("stellar_angular_diameter", "definition", ["stellar_radius", "distance"], lambda r, d: 2 * r / d, FEW,
     [("1.5e9", "4.8e18"), ("5.1e8", "3.9e17")]),
]

if __name__ == "__main__":
    write("starlight", UNITS, ROWS)
