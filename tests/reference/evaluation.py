# SPDX-License-Identifier: GPL-3.0-or-later
"""What the evaluate_*.py scripts share: evaluates rows with mpmath and writes them as checks, beside the script.

A row is (gives, by, names of the inputs, formula, tolerance, list of inputs as decimal strings in SI units). The C functions see each
decimal rounded to a double, the formula sees it exactly."""
import csv
import os

from mpmath import mp, mpf, nstr


def check(gives, by, inputs, expected, tolerance, kind, source, units):
    named = "; ".join(f"{name}={value}" + ("" if units[name] == "1" else " " + units[name]) for name, value in inputs)
    unit = "" if units[gives] == "1" else " " + units[gives]
    return [gives, by, named, nstr(expected, 20, min_fixed=0, max_fixed=0) + unit, tolerance, kind, source]


def write(subject, units, rows, more=()):
    here = os.path.dirname(os.path.abspath(__file__))
    source = f"tests/reference/evaluate_{subject}.py, mpmath, {mp.dps} digits"
    with open(os.path.join(here, f"evaluated_{subject}.csv"), "w", newline="", encoding="utf-8") as file:
        file.write(f"# SPDX-License-Identifier: GPL-3.0-or-later\n# Written by evaluate_{subject}.py; tolerances are explained there.\n")
        out = csv.writer(file, lineterminator="\n")
        out.writerow("gives by inputs expected tolerance kind source".split())
        for gives, by, names, formula, tolerance, points in rows:
            for point in points:
                expected = formula(*(mpf(value) for value in point))
                out.writerow(check(gives, by, zip(names, point), expected, tolerance, "evaluation", source, units))
        for row in more:
            out.writerow(row)
