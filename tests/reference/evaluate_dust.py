# SPDX-License-Identifier: GPL-3.0-or-later
"""Published opacity laws evaluated with 40 digits, and the gas density at a grey rim; writes evaluated_dust.csv.

Laws in cgs as published: Beckwith et al. 1990 per gram of gas and dust, times the mass of gas and dust per mass of dust. The rim's density is
found by bisection of ln rho, with the star's and disc's quantities in the order of the row."""
from mpmath import exp, findroot, log, mp, mpf, pi, sqrt

from evaluation import write

mp.dps = 40
K, H, C = mpf("1.380649e-23"), mpf("6.62607015e-34"), mpf(299792458)  # SI 2019
SIGMA = 2 * pi**5 * K**4 / (15 * H**3 * C**2)
G, PROTON = mpf("6.67430e-11"), mpf("1.67262192369e-27")  # CODATA 2018

UNITS = {
    "wavelength": "m", "gas_to_dust_ratio": "1", "dust_opacity": "m**2.kg**-1", "rim_gas_density": "kg.m**-3", "heating_luminosity": "W",
    "stellar_mass": "kg", "disc_mass": "kg", "characteristic_radius": "m", "surface_density_index": "1", "mean_molecular_weight": "1",
}

FEW = "relative 4e-15"  # a power and a few operations
SOLVED = "relative 2e-11"  # the root is found to 1e-13 of the greater end of the bracket in ln rho, which is 92


def li_draine(l):
    um = l * 10**6
    return (mpf("2.92e5") / um**2 if um < 700 else mpf("3.58e4") * um ** mpf("-1.68")) / 10


def hildebrand(l):
    ratio = l / mpf("125e-6")
    return mpf("18.75") / ratio / 10 if ratio <= 2 else mpf("18.75") / 2 * (2 / ratio) ** 2 / 10


def beckwith(l, ratio):
    return mpf("0.1") * (C / l / mpf(10) ** 12) * (1 + ratio) / 10


def rim_density(luminosity, mass, disc, edge, index, weight):
    def surplus(ln_rho):
        t = 2000 * (exp(ln_rho) / 1000) ** mpf("0.0195")
        r = sqrt(luminosity / (16 * pi * SIGMA)) / t**2
        surface = (2 - index) * disc / (2 * pi * edge**2) * (r / edge) ** -index * exp(-((r / edge) ** (2 - index)))
        height = sqrt(K * t / (weight * PROTON)) / sqrt(G * mass / r**3)
        return log(surface / (sqrt(2 * pi) * height)) - ln_rho
    return exp(findroot(surplus, (mpf(-30), mpf(0)), solver="anderson", tol=mpf(10) ** -60))


ROWS = [
    ("dust_opacity", "li_draine_2001", ["wavelength"], li_draine, FEW, [("35e-6",), ("4.5e-4",), ("1.35e-3",), ("3e-3",)]),
    ("dust_opacity", "hildebrand_1983", ["wavelength"], hildebrand, FEW, [("6e-5",), ("2.4e-4",), ("8.5e-4",)]),
    ("dust_opacity", "beckwith_1990", ["wavelength", "gas_to_dust_ratio"], beckwith, FEW, [("8.7e-4", "100"), ("1.3e-3", "30")]),
    ("rim_gas_density", "solved_at_the_rim_grey",
     ["heating_luminosity", "stellar_mass", "disc_mass", "characteristic_radius", "surface_density_index", "mean_molecular_weight"], rim_density, SOLVED,
     [("3.8e27", "4e30", "1e29", "9e12", "1", "2.3"), ("2e26", "1.4e30", "2e27", "3e12", "0.6", "2.34")]),
]

if __name__ == "__main__":
    write("dust", UNITS, ROWS)
