# SPDX-License-Identifier: GPL-3.0-or-later
"""How long the demo's whole report takes, figures included where the demo asks for some: required is less than 3 s. The best of five runs."""
import os
import subprocess
import sys
import tempfile
import time

MOST_SECONDS, ROUNDS = 3.0, 5


def seconds(folder, number):
    start = time.monotonic()
    subprocess.run([os.environ["LACUNA"], "scripts/demo_study.lua", "--out", os.path.join(folder, str(number))], check=True, capture_output=True)
    return time.monotonic() - start


with tempfile.TemporaryDirectory() as scratch:
    best = min(seconds(scratch, number) for number in range(ROUNDS))
print(f"the demo's report: {best:.2f} s; required: below {MOST_SECONDS:g} s")
sys.exit(not best < MOST_SECONDS)
