#!/usr/bin/python3
# SPDX-License-Identifier: GPL-3.0-or-later
"""Evaluates the relations and the closed forms of brightness with mpmath, 40 digits, and writes evaluated_brightness.csv and
evaluated_closed_forms.csv.

Run from the repository's top directory. The ring's visibility is J0(2 pi q rho) (Berger & Segransan 2007, New Astronomy Reviews
51, 576), star and halo as in Lazareff et al. 2017, A&A 599, A85, at one wavelength; q by rotating the baseline's east and north
components onto the projected major and minor axes and shortening the latter by cos(inclination). Closed forms: Hanbury Brown et
al. 1974, MNRAS 167, 475 (uniform, linear limb darkening); Hestroffer 1997, A&A 327, 199 (power law); Berger & Segransan (ring,
Gaussian); the annulus is the difference of two discs.
Constants: 1 mas = pi/648000000 rad."""
from mpmath import mp, mpf, pi, sin, cos, exp, log, sqrt, hypot, besselj, gamma, radians

mp.dps = 40
UM = mpf(10) ** -6
MAS = pi / 648000000
SOURCE = "tests/reference/evaluate_brightness.py, mpmath, 40 digits"
# Visibilities may be near zero, hence absolute: 16 units of 2^-53 of the argument's roundings (up to 10) and of J0's.
VISIBILITY_TOLERANCE = "absolute 2e-15"
TOLERANCE = "relative 5e-16"

rows = []


def row(gives, by, inputs, expected, tolerance):
    number = expected if isinstance(expected, str) else mp.nstr(expected, 25)
    rows.append(f"{gives},{by},{inputs},{number},{tolerance},evaluation,\"{SOURCE}\"")


def rim_visibility(star, halo, radius, inclination, disc_pa, baseline, baseline_pa, wavelength):
    star, halo, radius, inclination, disc_pa, baseline, baseline_pa, wavelength = map(
        mpf, (star, halo, radius, inclination, disc_pa, baseline, baseline_pa, wavelength))
    u, v = (baseline / (wavelength * UM) * f(radians(baseline_pa)) for f in (sin, cos))
    along = u * sin(radians(disc_pa)) + v * cos(radians(disc_pa))
    across = (u * cos(radians(disc_pa)) - v * sin(radians(disc_pa))) * cos(radians(inclination))
    return star + (1 - star - halo) * besselj(0, 2 * pi * hypot(along, across) * radius * MAS)


# star, halo, radius (mas), inclination (deg), disc PA (deg), baseline (m), baseline PA (deg), wavelength (um)
CASES = (
    ("0.4", "0.05", "2.3", "0", "0", "100", "0", "1.65"),
    ("0.4", "0.05", "2.3", "52", "115", "130", "25", "1.65"),
    ("0.35", "0", "1.1", "48", "-30", "280", "140", "1.65"),
    ("0.9", "0.1", "1.1", "20", "60", "330", "200", "2.2"),
    ("0", "0", "4.5", "90", "75", "46.5", "165", "3.5"),
    ("0", "0.25", "4.5", "90", "75", "46.5", "75", "3.5"),
    ("0.6", "0.02", "0.25", "33", "500", "15", "-35", "10.5"),
    ("1", "0", "2.3", "33", "10", "130", "35", "2.2"),
    ("0", "1", "2.3", "33", "10", "130", "35", "2.2"),
)

for star, halo, radius, inclination, disc_pa, baseline, baseline_pa, wavelength in CASES:
    place = (f"rim_radius_angle={radius} mas; inclination={inclination} deg; disc_position_angle={disc_pa} deg; "
             f"projected_baseline={baseline} m; baseline_position_angle={baseline_pa} deg; wavelength={wavelength} um")
    rest = (radius, inclination, disc_pa, baseline, baseline_pa, wavelength)
    row("rim_visibility", "with_halo", f"stellar_flux_fraction={star}; halo_flux_fraction={halo}; {place}",
        rim_visibility(star, halo, *rest), VISIBILITY_TOLERANCE)
    row("rim_visibility", "without_halo", f"stellar_flux_fraction={star}; {place}", rim_visibility(star, 0, *rest), VISIBILITY_TOLERANCE)

for visibility in ("0.83", "-0.2", "1", "0"):
    row("rim_squared_visibility", "definition", f"rim_visibility={visibility}", mpf(visibility) ** 2, TOLERANCE)
for squared in ("0.83", "0.04", "1", "0"):
    # One rounding of the given number, which is up to 1.
    row("rim_visibility_drop", "definition", f"rim_squared_visibility={squared}", 1 - mpf(squared), "absolute 1.2e-16")
row("rim_drop_significance", "definition", "rim_visibility_drop=0.17; visibility_error=0.02", mpf("0.17") / mpf("0.02"), TOLERANCE)

with open("tests/reference/evaluated_brightness.csv", "w") as file:
    file.write("# SPDX-License-Identifier: GPL-3.0-or-later\n")
    file.write("# Written by tests/reference/evaluate_brightness.py, which gives the reasons for the tolerances.\n")
    file.write("gives,by,inputs,expected,tolerance,kind,source\n")
    file.write("\n".join(rows) + "\n")


def uniform(z):
    return 2 * besselj(1, z) / z


def linear(z, c):
    return ((1 - c) * besselj(1, z) / z + c * sqrt(pi / 2) * besselj(mpf("1.5"), z) / z ** mpf("1.5")) / ((1 - c) / 2 + c / 3)


def power_law(z, a):
    return gamma(a / 2 + 2) * besselj(a / 2 + 1, z) / (z / 2) ** (a / 2 + 1)


def annulus(z, inner):
    """inner is the inner diameter over the outer one."""
    return (uniform(z) - inner**2 * uniform(z * inner)) / (1 - inner**2)


FREQUENCIES = [mpf(q) for q in ("1e-9", "1e-4", "0.01", "0.2", "0.3125", "0.35", "0.8", "1.2", "2.5", "5", "11", "31")]
FORMS = (
    [("uniform", "0", lambda z, _: uniform(z)), ("ring", "0", lambda z, _: besselj(0, z)),
     ("gaussian", "0", lambda z, _: exp(-(z**2) / (4 * log(mpf(2)))))]
    + [("linear", c, linear) for c in ("0", "0.25", "1")]
    + [("power_law", a, power_law) for a in ("0", "0.5", "1", "5", "20")]
    + [("annulus", inner, annulus) for inner in ("0.125", "0.75", "0.9375", "0.9990234375")]
)
with open("tests/reference/evaluated_closed_forms.csv", "w") as file:
    file.write("# SPDX-License-Identifier: GPL-3.0-or-later\n")
    file.write("# Written by tests/reference/evaluate_brightness.py, mpmath, 40 digits: visibility of models of diameter (Gaussian: full width\n")
    file.write("# at half maximum) 1 rad. The parameter is the limb darkening's, or the annulus' inner diameter.\n")
    file.write("model,parameter,spatial_frequency,visibility\n")
    for model, parameter, form in FORMS:
        for q in FREQUENCIES:
            file.write(f"{model},{parameter},{mp.nstr(q, 17)},{mp.nstr(form(pi * q, mpf(parameter)), 25)}\n")
