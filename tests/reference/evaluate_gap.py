#!/usr/bin/python3
# SPDX-License-Identifier: GPL-3.0-or-later
"""Evaluates the relations of gaps from their cited equations with mpmath, 40 digits, and writes evaluated_gap.csv.

Run from the repository's top directory. Constants, units and tolerances are those of evaluate_disc.py."""
from mpmath import log, mpf, pi, root, sqrt

from evaluate_disc import M_EARTH, M_SUN, PLAIN, POWER, evaluate


def crida(planet_aspect_ratio, planet_star_mass_ratio, viscosity_alpha):
    height_over_hill_radius = planet_aspect_ratio / root(planet_star_mass_ratio / 3, 3)
    reynolds_number = 1 / (viscosity_alpha * planet_aspect_ratio**2)
    return mpf(3) / 4 * height_over_hill_radius + 50 / (planet_star_mass_ratio * reynolds_number)


def width(planet_semi_major_axis, planet_star_mass_ratio, planet_aspect_ratio, viscosity_alpha):
    powers = planet_star_mass_ratio ** mpf("0.5") * planet_aspect_ratio ** mpf("-0.75") * viscosity_alpha ** mpf("-0.25")
    return mpf("0.41") * powers * planet_semi_major_axis


def depth(coefficient):
    return lambda planet_star_mass_ratio, planet_aspect_ratio, viscosity_alpha: 1 / (
        1 + coefficient * planet_star_mass_ratio**2 * planet_aspect_ratio**-5 / viscosity_alpha)


def fung(planet_star_mass_ratio, planet_aspect_ratio, viscosity_alpha):
    q, alpha, h = planet_star_mass_ratio, viscosity_alpha / mpf("1e-2"), planet_aspect_ratio / mpf("0.05")
    if q <= mpf("5e-3"):
        return mpf("0.14") * (q / mpf("1e-3")) ** mpf("-2.16") * alpha ** mpf("1.41") * h ** mpf("6.61")
    return mpf("4.7e-3") * (q / mpf("5e-3")) ** -1 * alpha ** mpf("1.26") * h ** mpf("6.12")


def mass_from_width(observed_gap_width, planet_semi_major_axis, planet_aspect_ratio, viscosity_alpha, stellar_mass):
    scaled_width = observed_gap_width / planet_semi_major_axis / mpf("0.41")
    return (scaled_width * planet_aspect_ratio ** mpf("0.75") * root(viscosity_alpha, 4)) ** 2 * stellar_mass


def mass_from_depth(observed_gap_depth, planet_aspect_ratio, viscosity_alpha, stellar_mass):
    """As printed, with 5e-4 in front: equal to the inverse with 0.04."""
    return (mpf("5e-4") * sqrt(1 / observed_gap_depth - 1) * (planet_aspect_ratio / mpf("0.1")) ** mpf("2.5")
            * sqrt(viscosity_alpha / mpf("1e-3")) * stellar_mass)


def isolation(planet_aspect_ratio, viscosity_alpha, planet_pressure_slope, stellar_mass):
    turbulence = mpf("0.34") * (log(mpf("1e-3")) / log(viscosity_alpha)) ** 4 + mpf("0.66")
    slope = 1 - (planet_pressure_slope + mpf("2.5")) / 6
    return 25 * M_EARTH * (planet_aspect_ratio / mpf("0.05")) ** 3 * turbulence * slope * stellar_mass / M_SUN


K_320 = "planet_star_mass_ratio=1e-3; planet_aspect_ratio=0.05; viscosity_alpha=0.01"
DEEP = "planet_star_mass_ratio=2.3e-3; planet_aspect_ratio=0.043; viscosity_alpha=2e-4"
SHALLOW = "planet_star_mass_ratio=3.1e-5; planet_aspect_ratio=0.062; viscosity_alpha=3e-3"

FORMULAS = (
    ("thermal_gap_mass", "lin_papaloizou_1993", "Mjup", PLAIN,
     lambda planet_aspect_ratio, stellar_mass: 3 * planet_aspect_ratio**3 * stellar_mass,
     "planet_aspect_ratio=0.05; stellar_mass=1 Msun",
     "planet_aspect_ratio=0.11; stellar_mass=2.1 Msun"),
    ("viscous_gap_mass", "lin_papaloizou_1993", "Mjup", PLAIN,
     lambda planet_aspect_ratio, viscosity_alpha, stellar_mass: 40 * viscosity_alpha * planet_aspect_ratio**2 * stellar_mass,
     "planet_aspect_ratio=0.05; viscosity_alpha=1e-3; stellar_mass=1 Msun",
     "planet_aspect_ratio=0.033; viscosity_alpha=2e-4; stellar_mass=0.3 Msun"),
    ("crida_parameter", "crida_2006", "", PLAIN, crida,
     "planet_aspect_ratio=0.05; planet_star_mass_ratio=1e-3; viscosity_alpha=4e-3",
     "planet_aspect_ratio=0.09; planet_star_mass_ratio=5e-5; viscosity_alpha=1e-4"),
    ("gap_width", "kanagawa_2016", "au", PLAIN, width,
     "planet_semi_major_axis=5 au; planet_star_mass_ratio=1e-3; planet_aspect_ratio=0.05; viscosity_alpha=1e-3",
     "planet_semi_major_axis=80 au; planet_star_mass_ratio=5.2e-4; planet_aspect_ratio=0.1; viscosity_alpha=3e-4",
     "planet_semi_major_axis=0.9 au; planet_star_mass_ratio=2.1e-5; planet_aspect_ratio=0.031; viscosity_alpha=1e-2"),
    ("gap_depth", "kanagawa_2015", "", PLAIN, depth(mpf("0.04")), K_320, DEEP, SHALLOW),
    ("gap_depth", "yun_2019", "", PLAIN, depth(mpf("0.046")), K_320, DEEP, SHALLOW),
    ("gap_depth", "fung_2014", "", POWER, fung, K_320, DEEP,
     "planet_star_mass_ratio=5e-3; planet_aspect_ratio=0.05; viscosity_alpha=0.01",
     "planet_star_mass_ratio=8.3e-3; planet_aspect_ratio=0.071; viscosity_alpha=2e-3"),
    ("gap_depth", "duffell_2013", "", PLAIN, depth(mpf("0.45") / (3 * pi)), K_320, DEEP, SHALLOW),
    ("gap_inner_radius", "definition", "au", PLAIN, lambda planet_semi_major_axis, gap_width: planet_semi_major_axis - gap_width / 2,
     "planet_semi_major_axis=5 au; gap_width=2.1 au"),
    ("gap_outer_radius", "definition", "au", PLAIN, lambda planet_semi_major_axis, gap_width: planet_semi_major_axis + gap_width / 2,
     "planet_semi_major_axis=5 au; gap_width=2.1 au"),
    ("ring_planet_separation", "hill_multiple", "au", PLAIN,
     lambda hill_radius, hill_separation_factor: hill_separation_factor * hill_radius,
     "hill_radius=0.35 au; hill_separation_factor=5.5"),
    ("inferred_planet_mass", "kanagawa_2016", "Mjup", PLAIN, mass_from_width,
     "observed_gap_width=1 au; planet_semi_major_axis=1 au; planet_aspect_ratio=0.05; viscosity_alpha=1e-3; stellar_mass=1 Msun",
     "observed_gap_width=7 au; planet_semi_major_axis=31 au; planet_aspect_ratio=0.072; viscosity_alpha=2e-4; stellar_mass=0.6 Msun"),
    ("inferred_planet_mass", "kanagawa_2015", "Mjup", POWER, mass_from_depth,
     "observed_gap_depth=0.5; planet_aspect_ratio=0.1; viscosity_alpha=1e-3; stellar_mass=1 Msun",
     "observed_gap_depth=0.013; planet_aspect_ratio=0.063; viscosity_alpha=2e-4; stellar_mass=1.6 Msun"),
    ("pebble_isolation_mass", "bitsch_2018", "Mearth", POWER, isolation,
     "planet_aspect_ratio=0.05; viscosity_alpha=1e-3; planet_pressure_slope=-2.5; stellar_mass=1 Msun",
     "planet_aspect_ratio=0.05; viscosity_alpha=1e-4; planet_pressure_slope=-2.5; stellar_mass=1 Msun",
     "planet_aspect_ratio=0.05; viscosity_alpha=1e-2; planet_pressure_slope=-2.5; stellar_mass=1 Msun",
     "planet_aspect_ratio=0.03; viscosity_alpha=1e-3; planet_pressure_slope=-2.75; stellar_mass=1 Msun",
     "planet_aspect_ratio=0.08; viscosity_alpha=3e-4; planet_pressure_slope=-3.25; stellar_mass=0.4 Msun"),
    ("pebble_isolation_mass", "lambrechts_2014", "Mearth", PLAIN,
     lambda planet_aspect_ratio: 20 * M_EARTH * (planet_aspect_ratio / mpf("0.05")) ** 3,
     "planet_aspect_ratio=0.04",
     "planet_aspect_ratio=0.09"),
)

if __name__ == "__main__":
    evaluate("gap", FORMULAS)
