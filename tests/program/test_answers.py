# SPDX-License-Identifier: GPL-3.0-or-later
"""Answers at a terminal: colour only there and only where it is wanted, plain characters where others may not be shown, a screenful at
once; and none of it in a pipe."""
import os
import re
import shutil
import subprocess
import tempfile

from tap import check, plan
from terminal import LACUNA, PROMPT, Session

CASE = 'c = case { distance = "156 ± 3 pc", bolometric_flux = "2.4e-11 ± 0.2e-11 W.m**-2", wavelength = "1.65 um", projected_baseline = "92 m" }'


class Coloured(Session):
    """A session whose answers keep their colours. The star is invented."""

    def __init__(self, folder, **changes):
        super().__init__(folder, **{"LC_ALL": "C.UTF-8", **changes})
        self.wait(PROMPT)

    def ask(self, line):
        """The answer's lines."""
        self.raw = ""
        self.type(line + "\r")
        self.wait(PROMPT)
        return re.sub(r"\x1b\[\?[0-9;]*[a-zA-Z]|\r", "", self.raw).split("\n")[1:-1]


def colour_in(folder, **changes):
    session = Coloured(folder, **changes)
    session.ask(CASE)
    answer = session.ask("c.rim_radius")
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

session = Coloured(folder)
session.ask(CASE)
first = session.ask("help()")
more = re.search(r"… (\d+) more lines: more\(\)", first[-1])
check(more and len(first) == 23, "a long answer is a screenful", first)
lines, rest = len(first) - 1, None
while more:
    rest = session.ask("more()")
    more = re.search(r"… (\d+) more lines: more\(\)", rest[-1])
    lines += len(rest) - (1 if more else 0)
whole = session.ask("print(help())")
check(rest and rest[-1] == whole[-1] and lines == len(whole), "more() shows the rest, and no line is lost", (lines, len(whole)))
check("there is no more to show" in session.ask("more()")[0], "then there is no more")
answer = session.ask('c:with { projected_baseline = sweep("20 m", "330 m", 30) }.rim_elements_by_array')
check(len(answer) <= 22 and "more()" not in answer[-1] and max(map(len, answer)) <= 80, "a plot fits on the screen", answer)
check(len(session.ask("c.rim_radius:value 'au'")) == 1, "many numbers are a line")
session.leave()

session = Coloured(folder, rows=12, columns=50)
session.ask(CASE)
answer = session.ask('c:with { projected_baseline = sweep("20 m", "330 m", 30) }.rim_elements_by_array')
check(len(answer) <= 11 and max(map(len, answer)) <= 50, "nor is a small screen left", answer)
session.leave()

session = Session(folder, "-e", "help()")
session.wait(r"(?!)")  # until it has left
check(len(session.screen.split("\n")) > 50, "one line of code writes the whole", session.screen)

piped = subprocess.run([LACUNA, "-e", CASE.replace("c = ", "") + ".rim_radius"], capture_output=True, text=True, env=dict(os.environ, TERM="dumb")).stdout
check("\x1b" not in piped and "█" in piped, "in a pipe no colour, and the same characters everywhere", piped)
shutil.rmtree(folder)
plan()
