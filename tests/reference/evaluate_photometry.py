# SPDX-License-Identifier: GPL-3.0-or-later
"""Relations of photometry evaluated with 40 digits from the definitions and the cited papers; writes evaluated_photometry.csv."""
from mpmath import mp, mpf, pi

from evaluation import write

mp.dps = 40
K, H, C = mpf("1.380649e-23"), mpf("6.62607015e-34"), mpf(299792458)  # SI 2019
SIGMA = 2 * pi**5 * K**4 / (15 * H**3 * C**2)
MAS = pi / 648000000
JY = mpf("1e-26")

UNITS = {
    "magnitude": "mag", "zero_point_flux": "W.m**-2.Hz**-1", "flux_density": "W.m**-2.Hz**-1", "wavelength": "m", "bandwidth": "m",
    "photon_flux": "s**-1.m**-2", "visual_extinction": "mag", "total_to_selective_extinction": "1", "extinction": "mag",
    "stellar_radius": "m", "effective_temperature": "K", "distance": "m", "stellar_flux_density": "W.m**-2.Hz**-1", "stellar_magnitude": "mag",
    "b_magnitude": "mag", "v_magnitude": "mag", "j_magnitude": "mag", "h_magnitude": "mag", "k_magnitude": "mag", "l_magnitude": "mag",
    "stellar_angular_diameter": "rad", "bolometric_flux": "W.m**-2",
}

# Bands: wavelength in um, flux density of magnitude 0 in Jy (Bessell, Castelli & Plez 1998; Cohen, Wheaton & Megeath 2003).
BANDS = {"V": ("0.545", "3636"), "J": ("1.235", "1594"), "H": ("1.662", "1024"), "K": ("2.159", "666.7")}


def curve(wavelength, rv):
    """A/A_V by Cardelli, Clayton & Mathis 1989, Eqs. 1, 2a, 2b, 3a, 3b; from memory."""
    x = mpf("1e-6") / wavelength
    if x <= mpf("1.1"):
        return mpf("0.574") * x ** mpf("1.61") - mpf("0.527") * x ** mpf("1.61") / rv
    y = x - mpf("1.82")
    a = ["1", "0.17699", "-0.50447", "-0.02427", "0.72085", "0.01979", "-0.77530", "0.32999"]
    b = ["0", "1.41338", "2.28305", "1.07233", "-5.38434", "-0.62251", "5.30260", "-2.09002"]
    return sum(mpf(c) * y**i for i, c in enumerate(a)) + sum(mpf(c) * y**i for i, c in enumerate(b)) / rv


def planck(wavelength, temperature):
    return 2 * H * C / wavelength**3 / mp.expm1(H * C / (wavelength * K * temperature))


def extinction(band, av, rv):
    """The extinction in V is A_V by definition."""
    return av if band == "V" else av * curve(mpf(BANDS[band][0]) * mpf("1e-6"), rv)


def bolometric(bands):
    """The mean, over the bands, of the logarithm of the dereddened flux density over the Planck function scales sigma T^4/pi."""
    def flux(*arguments):
        magnitudes, (temperature, av, rv) = arguments[: len(bands)], arguments[len(bands):]
        mean = mpf(0)
        for band, magnitude in zip(bands, magnitudes):
            wavelength, zero = mpf(BANDS[band][0]) * mpf("1e-6"), mpf(BANDS[band][1]) * JY
            bare = zero * mpf(10) ** (-(magnitude - extinction(band, av, rv)) * mpf("0.4"))
            mean += mp.log(bare / planck(wavelength, temperature)) / len(bands)
        return SIGMA * temperature**4 / pi * mp.exp(mean)
    return flux


def diameter(slope, zero, blue, red):
    return MAS * mpf(10) ** (mpf(slope) * (blue - red) + mpf(zero) - mpf("0.2") * red)


def diameter_v_k(v, k, av, rv):
    return diameter("0.0755", "0.5170", v - av, k - extinction("K", av, rv))


def diameter_b_l(b, l, av, rv):
    return diameter("0.0502", "0.5133", b - av * curve(mpf("0.438e-6"), rv), l - av * curve(mpf("3.4e-6"), rv))


def names(*bands):
    return [f"{band.lower()}_magnitude" for band in bands] + ["effective_temperature", "visual_extinction", "total_to_selective_extinction"]


FEW = "relative 2e-15"  # nine units of 2^-52: rounded inputs, a few operations
POWER = "relative 2e-14"  # 10^(-0.4 m) of m up to 20 multiplies the exponent's rounding by 0.9 m
LOGARITHM = "absolute 1e-14 mag"  # 2.5 log10 of a quotient with a rounding or two; magnitudes up to 20 have units of 4e-15
CURVE = "relative 1e-14"  # polynomials in y of alternating terms of up to ten times their sum

DISTANT = "4.6e18"
ROWS = [
    ("flux_density", "from_magnitude", ["magnitude", "zero_point_flux"], lambda m, f: f * mpf(10) ** (-m * mpf("0.4")), POWER,
     [("7.3", "1.024e-23"), ("-1.46", "3.636e-23"), ("19.8", "6.667e-24")]),
    ("magnitude", "from_flux_density", ["flux_density", "zero_point_flux"], lambda s, f: mpf("-2.5") * mp.log10(s / f), LOGARITHM,
     [("1.23e-26", "1.024e-23"), ("1.4e-22", "3.636e-23")]),
    ("stellar_magnitude", "of_flux_density", ["stellar_flux_density", "zero_point_flux"], lambda s, f: mpf("-2.5") * mp.log10(s / f), LOGARITHM,
     [("3.21e-26", "1.024e-23"), ("7.7e-30", "6.667e-24")]),
    ("photon_flux", "of_flux_density", ["flux_density", "wavelength", "bandwidth"],
     lambda f, w, b: f / w / (H / b), FEW, [("1.3e-26", "1.662e-6", "2.51e-7"), ("4.4e-24", "1.01e-5", "3e-8")]),
    ("extinction", "cardelli_1989", ["wavelength", "visual_extinction", "total_to_selective_extinction"],
     lambda w, av, rv: av * curve(w, rv), CURVE,
     [("3.1e-7", "1.7", "3.1"), ("3.6e-7", "1.7", "5.5"), ("5.49e-7", "2.4", "3.1"), ("8.8e-7", "0.7", "4.4"), ("9.2e-7", "0.7", "4.4"),
      ("2.159e-6", "3.3", "3.1"), ("1.01e-5", "12", "2.1"), ("1.2e-6", "0", "3.1")]),
    ("stellar_flux_density", "black_body", ["stellar_radius", "effective_temperature", "distance", "wavelength"],
     lambda r, t, d, w: pi * planck(w, t) * (r / d) ** 2, FEW,
     [("1.5e9", "9600", DISTANT, "1.65e-6"), ("8.2e8", "4000", "1.9e18", "5.5e-7"), ("8.2e8", "4000", "1.9e18", "1.3e-3")]),
    ("stellar_angular_diameter", "kervella_2004_v_k", ["v_magnitude", "k_magnitude", "visual_extinction", "total_to_selective_extinction"],
     diameter_v_k, POWER, [("7.9", "6.1", "0.8", "3.1"), ("12.4", "8.3", "2.9", "5"), ("0.03", "0.02", "0", "3.1")]),
    ("stellar_angular_diameter", "kervella_2004_b_l", ["b_magnitude", "l_magnitude", "visual_extinction", "total_to_selective_extinction"],
     diameter_b_l, POWER, [("8.3", "6.0", "0.8", "3.1"), ("13.9", "7.7", "2.9", "5"), ("0.03", "0.02", "0", "3.1")]),
    ("stellar_angular_diameter", "kervella_2004_v_k_no_extinction", ["v_magnitude", "k_magnitude"],
     lambda v, k: diameter("0.0755", "0.5170", v, k), POWER, [("7.9", "6.1"), ("12.4", "8.3")]),
    ("stellar_angular_diameter", "kervella_2004_b_l_no_extinction", ["b_magnitude", "l_magnitude"],
     lambda b, l: diameter("0.0502", "0.5133", b, l), POWER, [("8.3", "6.0"), ("13.9", "7.7")]),
    ("bolometric_flux", "v_j_h_k", names("V", "J", "H", "K"), bolometric("VJHK"), POWER,
     [("7.9", "7.1", "6.6", "6.1", "9600", "0.8", "3.1"), ("12.4", "9.9", "9.0", "8.3", "4000", "2.9", "5"), ("4.1", "4", "4.2", "3.9", "15000", "0", "3.1")]),
    ("bolometric_flux", "j_h_k", names("J", "H", "K"), bolometric("JHK"), POWER,
     [("7.1", "6.6", "6.1", "9600", "0.8", "3.1"), ("9.9", "9.0", "8.3", "4000", "2.9", "5")]),
    ("bolometric_flux", "h_k", names("H", "K"), bolometric("HK"), POWER,
     [("6.6", "6.1", "9600", "0.8", "3.1"), ("9.0", "8.3", "4000", "2.9", "5")]),
    ("bolometric_flux", "k", names("K"), bolometric("K"), POWER, [("6.1", "9600", "0.8", "3.1"), ("8.3", "4000", "2.9", "5")]),
]

if __name__ == "__main__":
    write("photometry", UNITS, ROWS)
