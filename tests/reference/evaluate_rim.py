# SPDX-License-Identifier: GPL-3.0-or-later
"""Rim relations evaluated with 40 digits from the cited papers; writes evaluated_rim.csv.

The radii are evaluated in the form in which they were published, with the star's radius and temperature: a star of any radius and
the temperature that the luminosity then demands, so that this is independent of the luminosity form in the relations."""
from mpmath import mp, mpf, pi

from evaluation import write

mp.dps = 40
K, H, C = mpf("1.380649e-23"), mpf("6.62607015e-34"), mpf(299792458)  # SI 2019
SIGMA = 2 * pi**5 * K**4 / (15 * H**3 * C**2)
STAR = mpf("1.7e9")  # m, any

UNITS = {
    "rim_gas_density": "kg.m**-3", "sublimation_temperature": "K", "cooling_efficiency": "1", "absorption_efficiency_ratio": "1",
    "backwarming_factor": "1", "backwarming_term": "1", "rim_height_ratio": "1", "heating_luminosity": "W", "sublimation_radius": "m",
    "rim_radius": "m",
}

FEW = "relative 2e-15"  # nine units of 2^-52: rounded inputs, a few operations, the temperature squared
DENSITIES = [("1e-7",), ("4.1e-10",), ("3e-15",)]


def squared_temperature_ratio(l, t):
    return mp.sqrt(l / (4 * pi * STAR**2 * SIGMA)) / t**2


def density_law(a, b):
    return lambda rho: 1 / (mpf(a) - mpf(b) * mp.log10(rho / 1000))


ROWS = [
    ("sublimation_temperature", "isella_natta_2005", ["rim_gas_density"], lambda rho: 2000 * (rho / 1000) ** mpf("0.0195"), FEW, DENSITIES),
    ("sublimation_temperature", "pollack_1994_olivine", ["rim_gas_density"], density_law("4.171910e-4", "3.660674e-5"), FEW, DENSITIES),
    ("sublimation_temperature", "pollack_1994_orthopyroxene", ["rim_gas_density"], density_law("4.822242e-4", "3.363444e-5"), FEW, DENSITIES),
    ("sublimation_temperature", "pollack_1994_iron", ["rim_gas_density"], density_law("3.318018e-4", "4.811307e-5"), FEW, DENSITIES),
    ("cooling_efficiency", "definition", ["absorption_efficiency_ratio"], lambda q: 1 / q, FEW, [("12.5",), ("0.7",)]),
    ("absorption_efficiency_ratio", "definition", ["cooling_efficiency"], lambda eps: 1 / eps, FEW, [("0.08",), ("1.3",)]),
    ("sublimation_radius", "kama_2009", ["heating_luminosity", "sublimation_temperature", "cooling_efficiency", "backwarming_factor"],
     lambda l, t, eps, c: mp.sqrt(c / eps) * squared_temperature_ratio(l, t) * STAR / 2, FEW,
     [("1.8e28", "1500", "0.08", "4"), ("6.1e26", "1277", "1", "1"), ("3.3e25", "1350", "0.61", "2.7")]),
    ("sublimation_radius", "isella_natta_2005", ["heating_luminosity", "sublimation_temperature", "cooling_efficiency", "backwarming_term"],
     lambda l, t, eps, b: mp.sqrt(b + 1 / eps) * squared_temperature_ratio(l, t) * STAR / 2, FEW,
     [("1.8e28", "1500", "0.08", "2"), ("6.1e26", "1277", "1", "0"), ("3.3e25", "1350", "0.61", "1.9")]),
    ("sublimation_radius", "dullemond_2001", ["heating_luminosity", "sublimation_temperature", "rim_height_ratio"],
     lambda l, t, f: mp.sqrt(1 + f) * squared_temperature_ratio(l, t) * STAR, FEW,
     [("1.8e28", "1500", "0.1"), ("6.1e26", "1277", "0"), ("3.3e25", "1350", "0.25")]),
    ("sublimation_radius", "monnier_2002", ["heating_luminosity", "sublimation_temperature", "absorption_efficiency_ratio"],
     lambda l, t, q: mp.sqrt(q) * squared_temperature_ratio(l, t) * STAR / 2, FEW,
     [("1.8e28", "1500", "12.5"), ("6.1e26", "1277", "1"), ("3.3e25", "1350", "1.64")]),
    ("sublimation_radius", "grey_grains", ["heating_luminosity", "sublimation_temperature"],
     lambda l, t: squared_temperature_ratio(l, t) * STAR / 2, FEW, [("1.8e28", "1500"), ("6.1e26", "1277"), ("3.3e25", "1350")]),
    ("rim_radius", "at_sublimation_radius", ["sublimation_radius"], lambda r: r, FEW, [("7e10",), ("3.3e9",)]),
]

if __name__ == "__main__":
    write("rim", UNITS, ROWS)
