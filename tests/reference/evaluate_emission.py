#!/usr/bin/python3
# SPDX-License-Identifier: GPL-3.0-or-later
"""Evaluates the relations of the disc's own light from their cited equations with mpmath, 40 digits, integrals by adaptive quadrature, and
writes evaluated_emission.csv. Each formula takes SI values under the names of the inputs. Constants: SI 2019, CODATA 2018 (G), IAU 2012 B2
(au), IAU 2015 B3 (nominal Sun and Earth), IAU 2015 B2 (pc)."""
import os

from mpmath import asin, cos, ellipe, exp, expm1, log, log10, mp, mpf, nstr, pi, polylog, quad, root, sin, sqrt, tan

mp.dps = 40
C = mpf(299792458)
H = mpf("6.62607015e-34")
K_B = mpf("1.380649e-23")
SIGMA_SB = 2 * pi**5 * K_B**4 / (15 * H**3 * C**2)
AU = mpf(149597870700)
M_SUN = mpf("1.3271244e20") / mpf("6.67430e-11")
M_EARTH = mpf("3.986004e14") / mpf("6.67430e-11")
UNITS = {
    "": mpf(1), "au": AU, "Rsun": mpf("6.957e8"), "Lsun": mpf("3.828e26"), "Msun": M_SUN, "Mearth": M_EARTH, "K": mpf(1), "um": mpf("1e-6"),
    "deg": pi / 180, "pc": AU * 648000 / pi, "Jy": mpf("1e-26"), "mJy": mpf("1e-29"), "g.cm**-2": mpf(10), "cm**2.g**-1": mpf("0.1"),
    "mag": mpf(1),
}

# Roundings of 1.1e-16 each: the inputs' conversion to SI, some ten operations, the conversion back.
PLAIN = "relative 4e-15"
# exp(-x) turns a relative error of x, for x up to 30, into 30 times that; powers of numbers far from 1 likewise.
AMPLIFIED = "relative 1e-13"
# What the C functions promise for integrals over the radius is 5e-5; for these discs, of less than three decades in radius and with
# columns no steeper than r^-1.5, the rule is far better.
INTEGRAL = "relative 1e-7"
# Beyond: four decades, or a steep column.
LONG_INTEGRAL = "relative 5e-5"


def si(text):
    number, _, unit = text.partition(" ")
    return mpf(number) * UNITS[unit]


def planck(wavelength, temperature):
    """B_nu."""
    return 2 * H * C / wavelength**3 / expm1(H * C / (wavelength * K_B * temperature))


def integral(f, inner, outer):
    """Over the radius, by panels in its logarithm; 20 digits are more than enough."""
    with mp.workdps(22):
        low, high = log(inner), log(outer)
        panels = [low + (high - low) * k / 24 for k in range(25)]
        return quad(lambda u: f(exp(u)) * exp(u), panels)


def rings(f, inner, outer, gap_inner=None, gap_outer=None):
    if gap_inner is None or gap_inner >= outer or gap_outer <= inner:
        return integral(f, inner, outer)
    inside = integral(f, inner, gap_inner) if gap_inner > inner else 0
    return inside + (integral(f, gap_outer, outer) if gap_outer < outer else 0)


def vertical_wall(sublimation_temperature, rim_radius, rim_height_ratio, inclination, distance, wavelength):
    """The wall behind the ellipse of the near opening, not behind that of the far one."""
    c = min(mpf(1), rim_height_ratio * tan(inclination))
    area = 2 * rim_radius**2 * cos(inclination) * (asin(c) + c * sqrt(1 - c**2))
    return area / distance**2 * planck(wavelength, sublimation_temperature)


def rounded_rim(sublimation_temperature, rim_radius, rim_height_ratio, inclination, distance, wavelength):
    """mpmath's ellipe takes the parameter, the square of the modulus."""
    area = 4 * rim_height_ratio * rim_radius**2 * ellipe(sin(inclination)**2)
    return area / distance**2 * planck(wavelength, sublimation_temperature)


def fraction_below(wavelength, temperature):
    x = H * C / (wavelength * K_B * temperature)
    y = exp(-x)
    return 15 / pi**4 * (x**3 * polylog(1, y) + 3 * x**2 * polylog(2, y) + 6 * x * polylog(3, y) + 6 * polylog(4, y))


def near_infrared_excess(sublimation_temperature, rim_radius, rim_height_ratio, stellar_luminosity):
    """Two equal coaxial circles of radius R, 2 f R apart: view factor 1 + 2 f^2 - 2 f sqrt(1 + f^2)."""
    view_factor = 1 + 2 * rim_height_ratio**2 - 2 * rim_height_ratio * sqrt(1 + rim_height_ratio**2)
    leaves = 2 * pi * rim_radius**2 * (1 - view_factor) * SIGMA_SB * sublimation_temperature**4
    share = fraction_below(mpf("5e-6"), sublimation_temperature) - fraction_below(mpf("1e-6"), sublimation_temperature)
    return leaves * share / stellar_luminosity


def beckwith(temperature_at_one_au, temperature_index, dust_surface_density_at_one_au, dust_surface_density_index, disc_inner_radius,
             disc_outer_radius, dust_opacity, inclination, distance, wavelength, gap_inner_radius=None, gap_outer_radius=None):
    def ring(r):
        temperature = temperature_at_one_au * (r / AU)**-temperature_index
        tau = dust_opacity * dust_surface_density_at_one_au * (r / AU)**-dust_surface_density_index / cos(inclination)
        return planck(wavelength, temperature) * (1 - exp(-tau)) * 2 * pi * r
    return cos(inclination) / distance**2 * rings(ring, disc_inner_radius, disc_outer_radius, gap_inner_radius, gap_outer_radius)


def chiang_goldreich(stellar_radius, effective_temperature, dust_surface_density_at_one_au, dust_surface_density_index, disc_inner_radius,
                     disc_outer_radius, dust_opacity, inclination, distance, wavelength, gap_inner_radius=None, gap_outer_radius=None):
    grain = mpf("1e-7")

    def ring(r):
        alpha = mpf("0.005") * AU / r + mpf("0.05") * (r / AU)**(mpf(2) / 7)
        interior = root(alpha / 4, 4) * sqrt(stellar_radius / r) * effective_temperature
        # a grain's balance: eps_s T_s^4 = (R/2r)^2 T^4 with eps_s = 8 pi s k T_s/(h c)
        surface = root(effective_temperature**4 * (stellar_radius / (2 * r))**2 * H * C / (8 * pi * grain * K_B), 5)
        tau = dust_opacity * dust_surface_density_at_one_au * (r / AU)**-dust_surface_density_index / cos(inclination)
        layer = 1 - exp(-alpha * min(mpf(1), 2 * pi * grain / wavelength) / cos(inclination))
        return 2 * pi * r * (planck(wavelength, interior) * (1 - exp(-tau)) + planck(wavelength, surface) * layer * (1 + exp(-tau)))
    return cos(inclination) / distance**2 * rings(ring, disc_inner_radius, disc_outer_radius, gap_inner_radius, gap_outer_radius)


def surface_density(dust_mass, dust_surface_density_index, disc_inner_radius, disc_outer_radius):
    with mp.workdps(30):
        column = integral(lambda r: 2 * pi * r * (r / AU)**-dust_surface_density_index, disc_inner_radius, disc_outer_radius)
    return dust_mass / column


def same(**values):
    value, = values.values()
    return value


def temperature_at_one_au(flaring_angle, heating_luminosity):
    return root(flaring_angle / 2 * heating_luminosity / (4 * pi * AU**2 * SIGMA_SB), 4)


def dust_mass(dust_flux_density, distance, dust_opacity, dust_temperature, wavelength):
    return dust_flux_density * distance**2 / (dust_opacity * planck(wavelength, dust_temperature))


def dust_flux(dust_mass, distance, dust_opacity, dust_temperature, wavelength):
    return dust_mass * dust_opacity * planck(wavelength, dust_temperature) / distance**2


RIM = "sublimation_temperature={}; rim_radius={}; rim_height_ratio={}; inclination={}; distance={}; wavelength={}"
RIMS = [RIM.format(*line.split(", ")) for line in (
    "1500 K, 0.5 au, 0.2, 45 deg, 140 pc, 2.2 um",
    "1300 K, 0.071 au, 0.1, 12 deg, 160.5 pc, 1.65 um",
    "1800 K, 2.3 au, 0.13, 75 deg, 410 pc, 10.5 um",
    "1500 K, 0.3 au, 0.3, 88 deg, 101 pc, 3.5 um",
    "950 K, 0.3 au, 0, 30 deg, 101 pc, 0.7 um",
    "1500 K, 0.3 au, 0.2, 0 deg, 101 pc, 2.2 um")]
COLUMN = ("dust_surface_density_at_one_au={}; dust_surface_density_index={}; disc_inner_radius={}; disc_outer_radius={}; dust_opacity={}; "
          "inclination={}; distance={}; wavelength={}")
POWER_LAW = "temperature_at_one_au={}; temperature_index={}; " + COLUMN
TWO_LAYERS = "stellar_radius={}; effective_temperature={}; " + COLUMN
GAP = "; gap_inner_radius={}; gap_outer_radius={}"
POWER_LAWS = [POWER_LAW.format(*line.split(", ")) for line in (
    "150 K, 0.5, 3.1 g.cm**-2, 1, 0.4 au, 130 au, 3.4 cm**2.g**-1, 38 deg, 156 pc, 890 um",
    "280 K, 0.5, 20 g.cm**-2, 1.5, 0.5 au, 40 au, 400 cm**2.g**-1, 0 deg, 140 pc, 10.5 um",
    "120 K, 0.43, 0.02 g.cm**-2, 0.5, 30 au, 300 au, 2.2 cm**2.g**-1, 71 deg, 101 pc, 1300 um",
    "150 K, 0.75, 10 g.cm**-2, -0.5, 0.2 au, 20 au, 60 cm**2.g**-1, 20 deg, 140 pc, 100 um",
    "60 K, 0, 1 g.cm**-2, 1, 1 au, 100 au, 3 cm**2.g**-1, 30 deg, 140 pc, 870 um",
    "150 K, 0.5, 3 g.cm**-2, 1, 0.1 au, 100 au, 900 cm**2.g**-1, 45 deg, 140 pc, 1.65 um",
    "150 K, 0.5, 3 g.cm**-2, 1, 5 au, 100 au, 3 cm**2.g**-1, 85 deg, 140 pc, 890 um")]
LONG_POWER_LAWS = [POWER_LAW.format(*line.split(", ")) for line in (
    "150 K, 0.5, 30 g.cm**-2, 2.4, 0.01 au, 100 au, 30 cm**2.g**-1, 30 deg, 140 pc, 60 um",
    "150 K, 0.6, 300 g.cm**-2, 2, 0.03 au, 300 au, 60 cm**2.g**-1, 60 deg, 140 pc, 200 um")]
TWO_LAYER_DISCS = [TWO_LAYERS.format(*line.split(", ")) for line in (
    "2.5 Rsun, 4000 K, 10 g.cm**-2, 1.5, 0.1 au, 80 au, 400 cm**2.g**-1, 0 deg, 140 pc, 10.5 um",
    "2.5 Rsun, 4000 K, 10 g.cm**-2, 1.5, 0.1 au, 80 au, 60 cm**2.g**-1, 45 deg, 140 pc, 60 um",
    "1.7 Rsun, 9200 K, 3 g.cm**-2, 1, 0.5 au, 200 au, 3 cm**2.g**-1, 30 deg, 156 pc, 890 um",
    "1.7 Rsun, 9200 K, 3 g.cm**-2, 1, 0.5 au, 200 au, 1500 cm**2.g**-1, 55 deg, 156 pc, 2.2 um",
    "2.1 Rsun, 4700 K, 0.1 g.cm**-2, 0.7, 25 au, 150 au, 1000 cm**2.g**-1, 20 deg, 120 pc, 0.5 um")]


def gapped(discs, *edges):
    return [disc + GAP.format(*edge) for disc in discs for edge in edges]


FORMULAS = [
    ("rim_flux_density", "vertical_wall", "Jy", AMPLIFIED, vertical_wall, RIMS),
    ("rim_flux_density", "rounded_rim", "Jy", AMPLIFIED, rounded_rim, RIMS),
    ("near_infrared_excess", "vertical_wall", "", AMPLIFIED, near_infrared_excess, [
        "sublimation_temperature=1500 K; rim_radius=0.5171 au; rim_height_ratio=0.2; stellar_luminosity=47 Lsun",
        "sublimation_temperature=1250 K; rim_radius=0.07 au; rim_height_ratio=0.1; stellar_luminosity=0.9 Lsun",
        "sublimation_temperature=1800 K; rim_radius=0.3 au; rim_height_ratio=0; stellar_luminosity=20 Lsun"]),
    ("disc_flux_density", "beckwith_1990", "mJy", INTEGRAL, beckwith, POWER_LAWS),
    ("disc_flux_density", "beckwith_1990", "mJy", LONG_INTEGRAL, beckwith, LONG_POWER_LAWS),
    ("disc_flux_density", "beckwith_1990_with_gap", "mJy", INTEGRAL, beckwith,
     gapped(POWER_LAWS[:3], ("8 au", "13 au")) + gapped(POWER_LAWS[:1], ("0.1 au", "2 au"), ("70 au", "400 au"), ("200 au", "210 au"))),
    ("disc_flux_density", "chiang_goldreich_1997", "mJy", INTEGRAL, chiang_goldreich, TWO_LAYER_DISCS),
    ("disc_flux_density", "chiang_goldreich_1997_with_gap", "mJy", INTEGRAL, chiang_goldreich,
     gapped(TWO_LAYER_DISCS[:3], ("8 au", "13 au")) + gapped(TWO_LAYER_DISCS[2:3], ("0.1 au", "2 au"))),
    ("disc_inner_radius", "cavity", "au", PLAIN, same, ["cavity_radius=24 au"]),
    ("disc_inner_radius", "rim", "au", PLAIN, same, ["rim_radius=0.31 au"]),
    ("temperature_at_one_au", "dullemond_2018", "K", PLAIN, temperature_at_one_au, [
        "flaring_angle=0.02; heating_luminosity=17 Lsun", "flaring_angle=0.05; heating_luminosity=0.3 Lsun"]),
    ("temperature_index", "dullemond_2018", "", PLAIN, lambda flaring_angle: mpf(1) / 2, ["flaring_angle=0.02"]),
    ("dust_surface_density_at_one_au", "power_law", "g.cm**-2", AMPLIFIED, surface_density, [
        "dust_mass=33 Mearth; dust_surface_density_index=1.5; disc_inner_radius=0.01 au; disc_outer_radius=100 au",
        "dust_mass=60 Mearth; dust_surface_density_index=2; disc_inner_radius=0.3 au; disc_outer_radius=60 au",
        "dust_mass=60 Mearth; dust_surface_density_index=2.6; disc_inner_radius=0.3 au; disc_outer_radius=60 au",
        "dust_mass=5 Mearth; dust_surface_density_index=-1; disc_inner_radius=20 au; disc_outer_radius=25 au"]),
    ("dust_mass", "hildebrand_1983", "Mearth", AMPLIFIED, dust_mass, [
        "dust_flux_density=1 mJy; distance=150 pc; dust_opacity=3.368 cm**2.g**-1; dust_temperature=20 K; wavelength=890 um",
        "dust_flux_density=215 mJy; distance=101 pc; dust_opacity=2.3 cm**2.g**-1; dust_temperature=31.5 K; wavelength=1300 um"]),
    ("dust_flux_density", "hildebrand_1983", "mJy", AMPLIFIED, dust_flux, [
        "dust_mass=1 Mearth; distance=150 pc; dust_opacity=3.368 cm**2.g**-1; dust_temperature=20 K; wavelength=890 um",
        "dust_mass=75 Mearth; distance=101 pc; dust_opacity=2.3 cm**2.g**-1; dust_temperature=31.5 K; wavelength=1300 um"]),
    ("dust_mass", "gas_to_dust_ratio", "Mearth", PLAIN, lambda disc_mass, gas_to_dust_ratio: disc_mass / gas_to_dust_ratio, [
        "disc_mass=0.013 Msun; gas_to_dust_ratio=100"]),
    ("disc_mass", "gas_to_dust_ratio", "Msun", PLAIN, lambda dust_mass, gas_to_dust_ratio: dust_mass * gas_to_dust_ratio, [
        "dust_mass=43 Mearth; gas_to_dust_ratio=80"]),
    ("total_flux_density", "star_rim_disc", "Jy", PLAIN, lambda **fluxes: sum(fluxes.values()), [
        "stellar_flux_density=3.1 Jy; rim_flux_density=1.7 Jy; disc_flux_density=0.004 Jy"]),
    ("total_flux_density", "star_and_rim", "Jy", PLAIN, lambda **fluxes: sum(fluxes.values()), [
        "stellar_flux_density=3.1 Jy; rim_flux_density=1.7 Jy"]),
    ("total_flux_density", "star_and_disc", "Jy", PLAIN, lambda **fluxes: sum(fluxes.values()), [
        "stellar_flux_density=3.1 Jy; disc_flux_density=0 Jy"]),
    ("stellar_flux_fraction", "of_sed", "", PLAIN, lambda stellar_flux_density, total_flux_density: stellar_flux_density / total_flux_density,
     ["stellar_flux_density=3.1 Jy; total_flux_density=4.8 Jy"]),
    ("observed_flux_density", "extincted", "Jy", PLAIN, lambda total_flux_density, extinction: total_flux_density * 10**(-extinction / mpf("2.5")),
     ["total_flux_density=4.8 Jy; extinction=1.37 mag", "total_flux_density=4.8 Jy; extinction=0 mag"]),
    ("observed_flux_density", "unextincted", "Jy", PLAIN, same, ["total_flux_density=4.8 Jy"]),
    ("observed_magnitude", "definition", "mag", PLAIN,
     lambda observed_flux_density, zero_point_flux: -mpf("2.5") * log10(observed_flux_density / zero_point_flux),
     ["observed_flux_density=4.8 Jy; zero_point_flux=1024 Jy"]),
    ("correlated_magnitude", "definition", "mag", PLAIN,
     lambda observed_magnitude, rim_visibility: observed_magnitude - mpf("2.5") * log10(abs(rim_visibility)),
     ["observed_magnitude=7.2 mag; rim_visibility=0.4", "observed_magnitude=7.2 mag; rim_visibility=-0.03"]),
]


def main():
    path = os.path.join(os.path.dirname(os.path.abspath(__file__)), "evaluated_emission.csv")
    source = "tests/reference/evaluate_emission.py, mpmath, 40 digits, integrals 20"
    with open(path, "w", encoding="ascii") as table:
        print("# SPDX-License-Identifier: GPL-3.0-or-later", file=table)
        print("# Written by tests/reference/evaluate_emission.py, which gives the reasons for the tolerances.", file=table)
        print("gives,by,inputs,expected,tolerance,kind,source", file=table)
        for gives, by, unit, tolerance, formula, cases in FORMULAS:
            for inputs in cases:
                values = {name: si(value) for name, value in (part.split("=") for part in inputs.split("; "))}
                expected = f"{nstr(formula(**values) / UNITS[unit], 20)} {unit}".rstrip()
                print(f'{gives},{by},{inputs},{expected},{tolerance},evaluation,"{source}"', file=table)


main()
