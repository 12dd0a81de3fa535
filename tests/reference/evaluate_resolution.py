#!/usr/bin/python3
# SPDX-License-Identifier: GPL-3.0-or-later
"""Evaluates the relations of resolution from their cited equations with mpmath, 40 digits, and writes evaluated_resolution.csv.

Run from the repository's top directory. Constants: 1 mas = pi/648000000 rad; 1 au = 149597870700 m (IAU 2012 B2);
1 pc = 648000/pi au (IAU 2015 B2)."""
from mpmath import mp, mpf, pi, sqrt, besselj, besseljzero, findroot

mp.dps = 40
UM = mpf(10) ** -6
MAS = pi / 648000000
AU = mpf(149597870700)
PC = 648000 / pi * AU
SOURCE = "tests/reference/evaluate_resolution.py, mpmath, 40 digits"
# A handful of roundings: the inputs' conversion to SI, one to three operations, the conversion back; each 1.1e-16.
TOLERANCE = "relative 1e-15"

# Airy's pattern [2 J1(v)/v]^2, v = pi theta D/lambda: full width at half maximum, first dark ring.
FWHM = 2 / pi * findroot(lambda v: 2 * besselj(1, v) / v - 1 / sqrt(mpf(2)), mpf("1.6"))
DARK_RING = besseljzero(1, 1) / pi

rows = []


def row(gives, by, inputs, expected, unit=""):
    number = expected if isinstance(expected, str) else mp.nstr(expected, 25)
    rows.append(f"{gives},{by},{inputs},{number + ' ' + unit if unit else number},{TOLERANCE},evaluation,\"{SOURCE}\"")


def verdict(gives, by, inputs, holds):
    row(gives, by, inputs, "1" if holds else "0")


def wavelength_rows():
    for wavelength, metres in (("1.65", "100"), ("2.2", "130"), ("10.5", "7.5"), ("3.5", "330")):
        angle = mpf(wavelength) * UM / mpf(metres) / MAS
        array = f"wavelength={wavelength} um; projected_baseline={metres} m"
        mirror = f"wavelength={wavelength} um; telescope_diameter={metres} m"
        row("array_resolution", "half_fringe", array, angle / 2, "mas")
        row("array_resolution", "fringe", array, angle, "mas")
        row("bandwidth_field", "first_null", f"wavelength={wavelength} um; spectral_resolving_power=22.5; projected_baseline={metres} m",
            mpf("22.5") * angle, "mas")
        row("beam_field", "diffraction", f"wavelength={wavelength} um; element_diameter={metres} m", angle, "mas")
        row("recoverable_scale", "shortest_fringe", f"wavelength={wavelength} um; shortest_baseline={metres} m", angle, "mas")
        row("mirror_resolution", "fwhm", mirror, FWHM * angle, "mas")
        row("mirror_resolution", "rayleigh", mirror, DARK_RING * angle, "mas")


def channel_rows():
    row("spectral_resolving_power", "definition", "wavelength=1.65 um; bandwidth=0.055 um", mpf("1.65") / mpf("0.055"))
    row("bandwidth", "definition", "wavelength=2.2 um; spectral_resolving_power=35", mpf("2.2") / 35, "um")


def field_rows():
    row("array_field", "both_fields", "bandwidth_field=136 mas; beam_field=252.5 mas", "136", "mas")
    row("array_field", "both_fields", "bandwidth_field=300 mas; beam_field=252.5 mas", "252.5", "mas")
    row("array_field", "bandwidth_alone", "bandwidth_field=136 mas", "136", "mas")
    row("array_field", "beam_alone", "beam_field=252.5 mas", "252.5", "mas")


def sky_rows():
    for instrument in ("array", "mirror"):
        row(f"spatial_resolution_of_{instrument}", "definition", f"{instrument}_resolution=1.7 mas; distance=140 pc",
            mpf("1.7") * MAS * 140 * PC / AU, "au")
        row(f"rim_elements_by_{instrument}", "definition", f"rim_size_angle=3.1 mas; {instrument}_resolution=1.7 mas",
            mpf("3.1") / mpf("1.7"))
    row("rim_radius_angle", "definition", "rim_radius=0.3 au; distance=156 pc", mpf("0.3") * AU / (156 * PC) / MAS, "mas")
    row("rim_radius", "from_angle", "rim_radius_angle=2.25 mas; distance=156 pc", mpf("2.25") * MAS * 156 * PC / AU, "au")
    row("rim_size_angle", "definition", "rim_radius_angle=1.55 mas", "3.1", "mas")
    row("cavity_size_angle", "definition", "cavity_radius_angle=7.5 mas", "15", "mas")
    row("gap_size_angle", "definition", "gap_width_angle=12.25 mas", "12.25", "mas")
    row("gap_radius_angle", "definition", "planet_semi_major_axis_angle=35.5 mas", "35.5", "mas")
    row("ring_size_angle", "definition", "ring_width_angle=40 mas", "40", "mas")


def verdict_rows():
    """One row for each way in which the conditions can come out, limits included (they count as resolved)."""
    for elements, required in ((1.5, 1), (1.5, 2), (2, 2)):
        enough = elements >= required
        start = f"elements_required={required}"
        for by in ("array", "mirror"):
            verdict(f"rim_resolved_by_{by}", "elements_alone", f"rim_elements_by_{by}={elements}; {start}", enough)
        start = f"rim_elements_by_array={elements}; {start}"
        for size in (8, 10, 12):
            scale = f"rim_size_angle={size} mas; recoverable_scale=10 mas"
            verdict("rim_resolved_by_array", "field_unlimited", f"{start}; {scale}", enough and size <= 10)
            for radius in (40, 50, 60):
                field = f"rim_radius_angle={radius} mas; array_field=100 mas"
                verdict("rim_resolved_by_array", "all_conditions", f"{start}; {scale}; {field}", enough and size <= 10 and 2 * radius <= 100)
        for radius in (40, 50, 60):
            verdict("rim_resolved_by_array", "scale_unlimited", f"{start}; rim_radius_angle={radius} mas; array_field=100 mas",
                    enough and 2 * radius <= 100)
            verdict("rim_resolved_by_mirror", "outside_working_angle",
                    f"rim_elements_by_mirror={elements}; elements_required={required}; rim_radius_angle={radius} mas; inner_working_angle=50 mas",
                    enough and radius >= 50)


for part in (channel_rows, wavelength_rows, field_rows, sky_rows, verdict_rows):
    part()
with open("tests/reference/evaluated_resolution.csv", "w") as file:
    file.write("# SPDX-License-Identifier: GPL-3.0-or-later\n")
    file.write("# Written by tests/reference/evaluate_resolution.py, which gives the reason for the tolerances.\n")
    file.write("gives,by,inputs,expected,tolerance,kind,source\n")
    file.write("\n".join(rows) + "\n")
