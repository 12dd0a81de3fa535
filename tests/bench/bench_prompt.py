# SPDX-License-Identifier: GPL-3.0-or-later
"""How soon the prompt answers: from a key to its echo, from Tab to what it adds or lists, from Ctrl-C to the prompt. Through a
pseudo-terminal, as a person has it: the time from the write of the key to the read of the answer. Each row prints what is required and
what was measured; of many keys, the time within which 95 % were answered. Exit status 1 where a row falls short. Stars and instruments are invented."""
import os
import re
import sys
import tempfile
import time

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "program"))
from terminal import CONTROL_C, PROMPT, TAB, Session

KEYS, TABS, STOPS = 200, 50, 8
STAR = 'c = case{distance = "156 ± 3 pc", bolometric_flux = "2.4e-11 ± 0.2e-11 W.m**-2", wavelength = "1.65 um", projected_baseline = "92 m"}'
short = []


def row(what, most, times, share):
    """times in seconds; share: of them which must be within what is required."""
    ordered = sorted(times)
    measured = 1e3 * ordered[max(0, round(share * len(ordered)) - 1)]
    good = measured <= most
    print(f"{what:<66} at most {most:6.1f} ms {measured:7.2f} {'good' if good else 'FALLS SHORT'}   (median {1e3 * ordered[len(ordered) // 2]:.2f}, longest {1e3 * ordered[-1]:.2f})", flush=True)
    if not good:
        short.append(what)


def answer_time(session, keys, pattern):
    session.raw = ""  # what was seen long ago only slows the reading
    start = time.perf_counter()
    session.type(keys)
    if not session.wait(pattern, 10):
        sys.exit(f"no answer to {keys!r}: {session.screen!r}")
    return time.perf_counter() - start


def cancel(session):
    session.type(CONTROL_C)
    session.wait(PROMPT)


def echo_times(session):
    times = []
    for i in range(KEYS):
        times.append(answer_time(session, "abcdefghij"[i % 10], "[a-j]"))
        if i % 50 == 49:
            cancel(session)
    return times


def tab_times(session, typed, pattern, tabs=1):
    """The last Tab's time. The first round, which loads what is needed, counts too."""
    times = []
    for _ in range(TABS):
        session.type(typed)
        session.wait(re.escape(typed) + "$")
        for _ in range(tabs - 1):
            session.type(TAB)
            session.wait("$")
            time.sleep(0.02)
        times.append(answer_time(session, TAB, pattern))
        cancel(session)
    return times


def stop_times(session, code):
    """Ctrl-C at several moments of a computation."""
    times = []
    for i in range(STOPS):
        session.type(code + "\r")
        session.wait(r"\n")
        time.sleep(0.03 + 0.015 * i)
        if PROMPT.search(session.screen):
            sys.exit(f"{code} was over before Ctrl-C")
        times.append(answer_time(session, CONTROL_C, r"interrupted\n> $"))
    return times


folder = tempfile.mkdtemp()
session = Session(folder, "--draws=100000000", rows=50, columns=100)
session.wait(PROMPT)
session.type(STAR + "\r")
session.wait(PROMPT)
row("a key to its echo", 5, echo_times(session), 0.95)
row("Tab to a member of a case: c.rim_ra", 5, tab_times(session, "c.rim_ra", "dius"), 0.95)
row("Tab to a name among all that can stand alone: toomre", 5, tab_times(session, "toomre", "_q"), 0.95)
row("Tab to a key of a case: case{ stellar_mas", 5, tab_times(session, "case{ stellar_mas", "s = "), 0.95)
row("second Tab to a page of all members: c.", 5, tab_times(session, "c.", r"Tab again\n> c\.$", tabs=2), 0.95)
for code in ("mean(c.rim_radius)", "median(c.rim_radius)", "c.rim_resolved_by_array", "quantity('1 +- 0.1 pc'):stored()"):
    row(f"Ctrl-C to the prompt, 1e8 draws: {code}", 100, stop_times(session, code), 1)
session.leave()
os.remove(os.path.join(folder, "lacuna", "history"))
os.removedirs(os.path.join(folder, "lacuna"))
sys.exit(bool(short))
