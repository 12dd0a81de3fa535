# SPDX-License-Identifier: GPL-3.0-or-later
"""Results in TAP, for tests in Python."""
results = 0


def check(good, name, seen=""):
    """One result; where it isn't good, what was seen."""
    global results
    results += 1
    print(f"{'ok' if good else 'not ok'} {results} - {name}", flush=True)
    if not good:
        print("# saw " + repr(seen), flush=True)


def skip(name, reason):
    global results
    results += 1
    print(f"ok {results} - {name} # SKIP {reason}", flush=True)


def plan():
    print(f"1..{results}")
