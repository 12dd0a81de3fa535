# SPDX-License-Identifier: GPL-3.0-or-later
"""Black-body relations evaluated with 40 digits from Planck's law; writes evaluated_planck.csv. Points of planck.csv's corners and more. Inputs are
rounded to doubles first, for exp(h c/(lambda k T)) would multiply that rounding by its exponent."""
from mpmath import exp, expm1, findroot, log1p, mp, mpf, pi

from evaluation import write

mp.dps = 40
H, C, K = mpf("6.62607015e-34"), mpf(299792458), mpf("1.380649e-23")  # SI 2019, exact
UNITS = {
    "wavelength": "m", "frequency": "Hz", "body_temperature": "K", "planck_nu": "W.m**-2.Hz**-1.sr**-1",
    "planck_lambda": "W.m**-3.sr**-1", "photon_radiance_nu": "ph.s**-1.m**-2.Hz**-1.sr**-1",
    "photon_radiance_lambda": "ph.s**-1.m**-3.sr**-1", "peak_wavelength": "m", "peak_frequency": "Hz", "peak_wavelength_power": "m",
    "blackbody_fraction": "1", "specific_intensity": "W.m**-2.Hz**-1.sr**-1", "brightness_temperature": "K", "blackbody_exitance": "W.m**-2",
}
FEW = "relative 1e-15"  # nine units of 2^-53: the functions promise at most 8


def rounded(formula):
    return lambda *values: formula(*(mpf(float(value)) for value in values))


def exponent(wavelength, t):
    return H * C / (wavelength * K * t)


def planck(numerator, power):
    return rounded(lambda wavelength, t: numerator / wavelength**power / expm1(exponent(wavelength, t)))


def fraction(wavelength, t):
    """The integral of Planck's law by quadrature over x^3/(e^x - 1); exp(-x) is taken out, for the quadrature's tolerance is absolute."""
    x = exponent(wavelength, t)
    if x < 1:
        return 1 - 15 / pi**4 * mp.quad(lambda s: s**3 / expm1(s), [0, x])
    return 15 / pi**4 * exp(-x) * mp.quad(lambda s: s**3 * exp(x - s) / (1 - exp(-s)), [x + step for step in (0, 5, 15, 30, 60, 120)])


def peak(power):
    """The x at which x^power/(e^x - 1) is greatest: d/dx = 0 gives x = power (1 - exp(-x))."""
    return findroot(lambda x: x - power * (1 - exp(-x)), power)


BODIES = [("1e-7", "280"), ("5.5e-7", "5772"), ("1.65e-6", "1500"), ("2.2e-6", "9750"), ("1e-5", "150"), ("1.3e-3", "20"), ("3e-3", "2.725"), ("1e-2", "1e6")]
PEAKED = [("2.725",), ("300",), ("1500",), ("9750",)]
BODY = ["wavelength", "body_temperature"]

write("planck", UNITS, [
    ("wavelength", "definition", ["frequency"], rounded(lambda nu: C / nu), FEW, [("2.3e11",), ("1.8e14",)]),
    ("frequency", "definition", ["wavelength"], rounded(lambda wavelength: C / wavelength), FEW, [("1.3e-3",), ("1.65e-6",)]),
    ("planck_nu", "planck", BODY, planck(2 * H * C, 3), FEW, BODIES),
    ("planck_lambda", "planck", BODY, planck(2 * H * C**2, 5), FEW, BODIES),
    ("photon_radiance_nu", "planck", BODY, planck(2, 2), FEW, BODIES),
    ("photon_radiance_lambda", "planck", BODY, planck(2 * C, 4), FEW, BODIES),
    ("peak_wavelength", "wien", ["body_temperature"], rounded(lambda t: H * C / (K * peak(5) * t)), FEW, PEAKED),
    ("peak_frequency", "wien", ["body_temperature"], rounded(lambda t: peak(3) * K * t / H), FEW, PEAKED),
    ("peak_wavelength_power", "wien", ["body_temperature"], rounded(lambda t: H * C / (K * peak(4) * t)), FEW, PEAKED),
    ("blackbody_fraction", "planck", BODY, rounded(fraction), FEW, BODIES),
    ("brightness_temperature", "inverse_planck", ["specific_intensity", "wavelength"],
     rounded(lambda intensity, wavelength: H * C / (wavelength * K) / log1p(2 * H * C / (wavelength**3 * intensity))), FEW,
     [("2.5e-14", "1.3e-3"), ("1e-20", "1.65e-6"), ("3e-250", "5.5e-7"), ("4e-8", "2.2e-6"), ("1e-3", "1e-2")]),
    ("blackbody_exitance", "stefan_boltzmann", ["body_temperature"],
     rounded(lambda t: 2 * pi**5 * K**4 / (15 * H**3 * C**2) * t**4), FEW, PEAKED),
])
