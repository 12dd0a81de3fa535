# SPDX-License-Identifier: GPL-3.0-or-later
"""Answers at a terminal: colour only there and only where it is wanted, plain characters where others may not be shown, a screenful at
once; and none of it in a pipe."""
import os
import re
import shutil
import subprocess
import tempfile

import terminal
from tap import check, plan
from terminal import LACUNA, PROMPT

CASE = 'c = case { distance = "156 ± 3 pc", bolometric_flux = "2.4e-11 ± 0.2e-11 W.m**-2", wavelength = "1.65 um", projected_baseline = "92 m" }'
STUDY = 'stars = study { targets = { { name = "invented", distance = "140 pc", rim_radius = "0.3 au" } }, given = { wavelength = "1.65 um", projected_baseline = "100 m" }, ask = { "rim_resolved_by_array" } }'


class Session(terminal.Session):
    def __init__(self, folder, **settings):
        super().__init__(folder, **{"LC_ALL": "C.UTF-8", **settings})
        self.wait(PROMPT)

    def lines(self, line):
        """The answer's lines, with their colours."""
        self.answer(line)
        return self.coloured.split("\n")[1:-1]


def colour_in(folder, **changes):
    session = Session(folder, **changes)
    session.lines(CASE)
    answer = session.lines("c.rim_radius")
    session.leave()
    return "\n".join(answer)


folder = tempfile.mkdtemp()
answer = colour_in(folder)
check("\x1b[2m" in answer and "█" in answer, "colour and blocks on a terminal", answer)
for name, changes in {"NO_COLOR": {"NO_COLOR": "1"}, "TERM=dumb": {"TERM": "dumb"}}.items():
    answer = colour_in(folder, **changes)
    check("\x1b" not in answer and "99 % of the draws" in answer, "no colour with " + name, answer)
check("█" not in answer and "@" in answer, "plain characters on a dumb terminal", answer)
answer = colour_in(folder, LC_ALL="C")
check("█" not in answer and "@" in answer, "plain characters where the locale isn't UTF-8", answer)

session = Session(folder)
session.lines(CASE)
first = session.lines("help()")
more = re.search(r"… (\d+) more lines: more\(\)", first[-1])
check(more and len(first) == 23, "a long answer is a screenful", first)
lines, rest = len(first) - 1, None
while more:
    rest = session.lines("more()")
    more = re.search(r"… (\d+) more lines: more\(\)", rest[-1])
    lines += len(rest) - (1 if more else 0)
whole = session.lines("print(help())")
check(rest and rest[-1] == whole[-1] and lines == len(whole), "more() shows the rest, and no line is lost", (lines, len(whole)))
check("there is no more to show" in session.lines("more()")[0], "then there is no more")
answer = session.lines('c:with { projected_baseline = sweep("20 m", "330 m", 30) }.rim_elements_by_array')
check(len(answer) <= 22 and "more()" not in answer[-1] and max(map(len, answer)) <= 80, "a plot fits on the screen", answer)
check(len(session.lines("c.rim_radius:value 'au'")) == 1, "many numbers are a line")
answer = session.lines("c.gap_width_angle")
check(len(answer) == 3 and max(map(len, answer)) <= 80 and "give stellar_mass, planet_mass, planet_semi_major_axis, viscosity_alpha (for gap_width by kanagawa_2016)" in " ".join(map(str.strip, answer)), "a long message is folded between words", answer)
answer = session.lines(STUDY)
check(len(answer) == 23 and "more()" in answer[-1], "a study prints a screenful", answer)
rest = session.lines("more()")
check("estimates geometric feasibility" in "\n".join(rest) and len(rest) <= 23, "and more() the rest", rest)
check("more to show" in session.lines("more()")[0] and "study of 1 target" in session.lines("stars")[0], "once", session.screen)
session.leave()

session = Session(folder, rows=12, columns=50)
session.lines(CASE)
answer = session.lines('c:with { projected_baseline = sweep("20 m", "330 m", 30) }.rim_elements_by_array')
check(len(answer) <= 11 and max(map(len, answer)) <= 50, "nor is a small screen left", answer)
session.leave()

session = terminal.Session(folder, "-e", "help()")
session.settle(10)
check(session.screen.count("\n") > 50, "one line of code writes the whole", session.screen)
session.leave()

piped = subprocess.run([LACUNA, "-e", CASE.replace("c = ", "") + ".rim_radius"], capture_output=True, text=True, env=dict(os.environ, TERM="dumb")).stdout
check("\x1b" not in piped and "█" in piped, "in a pipe no colour, and the same characters everywhere", piped)
shutil.rmtree(folder)
plan()
