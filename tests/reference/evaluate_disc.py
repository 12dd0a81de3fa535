#!/usr/bin/python3
# SPDX-License-Identifier: GPL-3.0-or-later
"""Evaluates the relations of the disc from their cited equations with mpmath, 40 digits, and writes evaluated_disc.csv.

Run from the repository's top directory. Each formula takes SI values under the names of the inputs. Constants: SI 2019, CODATA
2018 (G, m_p), IAU 2012 B2 (au), IAU 2015 B3 (nominal Sun, Jupiter, Earth)."""
from mpmath import diff, exp, log, mp, mpf, nstr, pi, root, sqrt

mp.dps = 40
C = mpf(299792458)
H = mpf("6.62607015e-34")
K_B = mpf("1.380649e-23")
SIGMA_SB = 2 * pi**5 * K_B**4 / (15 * H**3 * C**2)
G = mpf("6.67430e-11")
M_P = mpf("1.67262192369e-27")
AU = mpf(149597870700)
M_SUN = mpf("1.3271244e20") / G
M_JUP = mpf("1.2668653e17") / G
M_EARTH = mpf("3.986004e14") / G
UNITS = {
    "": mpf(1), "au": AU, "Rsun": mpf("6.957e8"), "Msun": M_SUN, "Mjup": M_JUP, "Mearth": M_EARTH, "Lsun": mpf("3.828e26"),
    "K": mpf(1), "yr": mpf(31557600), "Msun/yr": M_SUN / 31557600, "m.s**-1": mpf(1), "km.s**-1": mpf(1000), "s**-1": mpf(1),
    "g.cm**-2": mpf(10), "g.cm**-3": mpf(1000), "cm": mpf("0.01"), "um": mpf("1e-6"),
}

# Roundings of 1.1e-16 each: the inputs' conversion to SI, at most ten operations, the conversion back.
PLAIN = "relative 2e-15"
# A power or logarithm of an argument that carries such errors, and its own rounding.
POWER = "relative 1e-14"
# exp(-x) turns a relative error of x, for x up to 30, into 30 times that; 1 - sqrt(R/r) near the edge likewise.
AMPLIFIED = "relative 1e-13"


def si(text):
    number, _, unit = text.partition(" ")
    return mpf(number) * UNITS[unit]


def evaluate(subject, formulas):
    """Writes the table: for each (gives, by, unit, tolerance, formula, inputs...) one row for each of the inputs."""
    source = f"tests/reference/evaluate_{subject}.py, mpmath, 40 digits"
    with open(f"tests/reference/evaluated_{subject}.csv", "w", encoding="ascii") as table:
        print("# SPDX-License-Identifier: GPL-3.0-or-later", file=table)
        print(f"# Written by tests/reference/evaluate_{subject}.py, which gives the reasons for the tolerances.", file=table)
        print("gives,by,inputs,expected,tolerance,kind,source", file=table)
        for gives, by, unit, tolerance, formula, *cases in formulas:
            for inputs in cases:
                values = {name: si(value) for name, value in (part.split("=") for part in inputs.split("; "))}
                expected = f"{nstr(formula(**values) / UNITS[unit], 25)} {unit}".rstrip()
                print(f'{gives},{by},{inputs},{expected},{tolerance},evaluation,"{source}"', file=table)


def midplane_temperature(flaring_angle, heating_luminosity, radius):
    """Half of what the grazing surface takes in is sent inwards."""
    flux_inwards = flaring_angle / 2 * heating_luminosity / (4 * pi * radius**2)
    return root(flux_inwards / SIGMA_SB, 4)


def interior_temperature(stellar_radius, effective_temperature, radius):
    a = radius / AU
    alpha = mpf("0.005") / a + mpf("0.05") * a ** (mpf(2) / 7)
    return root(alpha / 4, 4) * sqrt(stellar_radius / radius) * effective_temperature


def viscous_temperature(stellar_mass, mass_accretion_rate, magnetospheric_radius, radius):
    flux = 3 * G * stellar_mass * mass_accretion_rate / (8 * pi * radius**3) * (1 - sqrt(magnetospheric_radius / radius))
    return root(flux / SIGMA_SB, 4)


def self_similar(disc_mass, characteristic_radius, surface_density_index, radius):
    x, index = radius / characteristic_radius, surface_density_index
    return (2 - index) * disc_mass / (2 * pi * characteristic_radius**2) * x**-index * exp(-(x ** (2 - index)))


def nebula(radius):
    return 17000 * (radius / AU) ** mpf("-1.5")


def pressure_slope(surface_density, radius):
    """d ln P/d ln r by differentiation: P = rho c_s^2, rho = Sigma/(sqrt(2 pi) c_s/Omega), with T = r^(-1/2), Omega = r^(-3/2)."""
    def log_pressure(log_radius):
        r = exp(log_radius)
        sound_speed, frequency = sqrt(r ** mpf("-0.5")), r ** mpf("-1.5")
        return log(surface_density(r) / (sqrt(2 * pi) * sound_speed / frequency) * sound_speed**2)
    return diff(log_pressure, log(radius))


FORMULAS = (
    ("midplane_temperature", "dullemond_2018", "K", PLAIN, midplane_temperature,
     "flaring_angle=0.02; heating_luminosity=1.413 Lsun; radius=74.1 au",
     "flaring_angle=0.05; heating_luminosity=0.013 Lsun; radius=0.031 au",
     "flaring_angle=0.3; heating_luminosity=870 Lsun; radius=410 au"),
    ("midplane_temperature", "chiang_goldreich_1997", "K", POWER, interior_temperature,
     "stellar_radius=2.5 Rsun; effective_temperature=4000 K; radius=1 au",
     "stellar_radius=1.7 Rsun; effective_temperature=9200 K; radius=0.12 au",
     "stellar_radius=2.1 Rsun; effective_temperature=4350 K; radius=83 au"),
    ("blackbody_grain_temperature", "wyatt_2008", "K", PLAIN,
     lambda heating_luminosity, radius: root(heating_luminosity / (4 * pi * radius**2) / 4 / SIGMA_SB, 4),
     "heating_luminosity=1 Lsun; radius=1 au",
     "heating_luminosity=47 Lsun; radius=0.37 au",
     "heating_luminosity=0.02 Lsun; radius=155 au"),
    ("viscous_effective_temperature", "lynden_bell_pringle_1974", "K", AMPLIFIED, viscous_temperature,
     "stellar_mass=1 Msun; mass_accretion_rate=1e-7 Msun/yr; magnetospheric_radius=1e-20 Rsun; radius=1 au",
     "stellar_mass=1 Msun; mass_accretion_rate=1e-8 Msun/yr; magnetospheric_radius=1e-20 Rsun; radius=1 au",
     "stellar_mass=0.5 Msun; mass_accretion_rate=3e-8 Msun/yr; magnetospheric_radius=10.5 Rsun; radius=0.3 au",
     "stellar_mass=2.3 Msun; mass_accretion_rate=1e-6 Msun/yr; magnetospheric_radius=9.9 Rsun; radius=0.0465 au"),
    ("sound_speed", "definition", "km.s**-1", PLAIN,
     lambda midplane_temperature, mean_molecular_weight: sqrt(K_B * midplane_temperature / (mean_molecular_weight * M_P)),
     "midplane_temperature=10 K; mean_molecular_weight=2.3",
     "midplane_temperature=1450 K; mean_molecular_weight=2.34"),
    ("keplerian_frequency", "definition", "s**-1", PLAIN, lambda stellar_mass, radius: sqrt(G * stellar_mass / radius**3),
     "stellar_mass=1 Msun; radius=1 au",
     "stellar_mass=0.457 Msun; radius=85.1 au"),
    ("keplerian_speed", "definition", "km.s**-1", PLAIN, lambda stellar_mass, radius: sqrt(G * stellar_mass / radius),
     "stellar_mass=1 Msun; radius=1 au",
     "stellar_mass=2.04 Msun; radius=0.067 au"),
    ("orbital_period", "definition", "yr", PLAIN, lambda keplerian_frequency: 2 * pi / keplerian_frequency,
     "keplerian_frequency=1.99e-7 s**-1",
     "keplerian_frequency=3.3e-11 s**-1"),
    ("scale_height", "from_aspect_ratio", "au", PLAIN, lambda aspect_ratio, radius: aspect_ratio * radius,
     "aspect_ratio=0.033; radius=1 au",
     "aspect_ratio=0.12; radius=213 au"),
    ("scale_height", "definition", "au", PLAIN, lambda sound_speed, keplerian_frequency: sound_speed / keplerian_frequency,
     "sound_speed=0.99 km.s**-1; keplerian_frequency=1.99e-7 s**-1",
     "sound_speed=0.19 km.s**-1; keplerian_frequency=3.3e-11 s**-1"),
    ("aspect_ratio", "definition", "", PLAIN, lambda scale_height, radius: scale_height / radius,
     "scale_height=5.59 au; radius=74.1 au",
     "scale_height=0.0011 au; radius=0.047 au"),
    ("surface_density", "self_similar", "g.cm**-2", AMPLIFIED, self_similar,
     "disc_mass=0.05 Msun; characteristic_radius=100 au; surface_density_index=1; radius=100 au",
     "disc_mass=0.003 Msun; characteristic_radius=25 au; surface_density_index=0.8; radius=0.4 au",
     "disc_mass=0.02 Msun; characteristic_radius=45 au; surface_density_index=1.5; radius=410 au",
     "disc_mass=0.02 Msun; characteristic_radius=60 au; surface_density_index=-0.5; radius=230 au",
     "disc_mass=0.02 Msun; characteristic_radius=60 au; surface_density_index=0; radius=30 au"),
    ("surface_density", "hayashi_1981", "g.cm**-2", PLAIN, nebula,
     "radius=1 au", "radius=0.35 au", "radius=36 au"),
    ("gas_density", "definition", "g.cm**-3", PLAIN, lambda surface_density, scale_height: surface_density / (sqrt(2 * pi) * scale_height),
     "surface_density=1700 g.cm**-2; scale_height=0.03336 au",
     "surface_density=0.21 g.cm**-2; scale_height=10.25 au"),
    ("toomre_q", "toomre_1964", "", PLAIN,
     lambda sound_speed, keplerian_frequency, surface_density: sound_speed * keplerian_frequency / (pi * G * surface_density),
     "sound_speed=0.19 km.s**-1; keplerian_frequency=2.9e-10 s**-1; surface_density=16 g.cm**-2",
     "sound_speed=0.99 km.s**-1; keplerian_frequency=1.99e-7 s**-1; surface_density=1700 g.cm**-2"),
    ("critical_surface_density", "toomre_1964", "g.cm**-2", PLAIN,
     lambda sound_speed, keplerian_frequency: sound_speed * keplerian_frequency / (pi * G),
     "sound_speed=0.19 km.s**-1; keplerian_frequency=2.9e-10 s**-1",
     "sound_speed=0.99 km.s**-1; keplerian_frequency=1.99e-7 s**-1"),
    ("stokes_number", "dullemond_2018", "", PLAIN,
     lambda grain_size, grain_density, surface_density: pi / 2 * grain_density * grain_size / surface_density,
     "grain_size=0.02 cm; grain_density=2 g.cm**-3; surface_density=16.1 g.cm**-2",
     "grain_size=0.3 um; grain_density=1.68 g.cm**-3; surface_density=1700 g.cm**-2"),
    ("pressure_slope", "self_similar", "", POWER,
     lambda radius, characteristic_radius, surface_density_index: pressure_slope(
         lambda r: self_similar(1, characteristic_radius, surface_density_index, r), radius),
     "radius=30 au; characteristic_radius=100 au; surface_density_index=1",
     "radius=150 au; characteristic_radius=60 au; surface_density_index=0.4",
     "radius=0.3 au; characteristic_radius=60 au; surface_density_index=1.7",
     "radius=70 au; characteristic_radius=60 au; surface_density_index=-0.5"),
    ("pressure_slope", "hayashi_1981", "", PLAIN, lambda radius: pressure_slope(nebula, radius),
     "radius=1 au", "radius=30 au"),
    ("headwind_speed", "nakagawa_1986", "m.s**-1", PLAIN,
     lambda aspect_ratio, pressure_slope, keplerian_speed: -aspect_ratio**2 / 2 * pressure_slope * keplerian_speed,
     "aspect_ratio=0.03336; pressure_slope=-3.25; keplerian_speed=29.785 km.s**-1",
     "aspect_ratio=0.08; pressure_slope=1.2; keplerian_speed=3.1 km.s**-1"),
    ("radial_drift_speed", "weidenschilling_1977", "m.s**-1", PLAIN,
     lambda stokes_number, headwind_speed: -2 * stokes_number / (1 + stokes_number**2) * headwind_speed,
     "stokes_number=1; headwind_speed=53.86 m.s**-1",
     "stokes_number=0.0039; headwind_speed=31 m.s**-1",
     "stokes_number=210; headwind_speed=-12 m.s**-1"),
    ("snow_line_radius", "dullemond_2018", "au", PLAIN,
     lambda flaring_angle, heating_luminosity, snow_temperature:
         sqrt(flaring_angle / 2 * heating_luminosity / (4 * pi * SIGMA_SB * snow_temperature**4)),
     "flaring_angle=0.02; heating_luminosity=1 Lsun; snow_temperature=170 K",
     "flaring_angle=0.05; heating_luminosity=38 Lsun; snow_temperature=150 K"),
)

if __name__ == "__main__":
    evaluate("disc", FORMULAS)
