# SPDX-License-Identifier: GPL-3.0-or-later
"""Answers at a terminal: colour only there and only where it is wanted, plain characters where others may not be shown, a screenful at
once; and none of it in a pipe."""
import fcntl
import os
import pty
import re
import select
import struct
import subprocess
import tempfile
import termios
import time

LACUNA = os.environ["LACUNA"]
PATIENCE = 60  # seconds for an answer; sanitised builds are slow
CASE = 'c = case { distance = "156 ± 3 pc", bolometric_flux = "2.4e-11 ± 0.2e-11 W.m**-2", wavelength = "1.65 um", projected_baseline = "92 m" }'
results = 0


def check(good, name, seen=""):
    global results
    results += 1
    print(f"{'ok' if good else 'not ok'} {results} - {name}", flush=True)
    if not good:
        print("# saw " + repr(seen), flush=True)


class Terminal:
    """The program on a terminal of so many rows and columns."""

    def __init__(self, folder, options=(), rows=24, columns=80, **changes):
        environment = dict(os.environ, XDG_STATE_HOME=folder, XDG_CONFIG_HOME=folder, INPUTRC="/dev/null", TERM="xterm", LC_ALL="C.UTF-8")
        for name in ("NO_COLOR", "COLUMNS", "LINES"):
            environment.pop(name, None)
        environment.update(changes)
        self.pid, self.terminal = pty.fork()
        if self.pid == 0:
            fcntl.ioctl(0, termios.TIOCSWINSZ, struct.pack("HHHH", rows, columns, 0, 0))
            os.execve(LACUNA, [LACUNA, *options], environment)
        self.bytes = b""
        if not options:
            self.wait()

    def wait(self):
        """Until the prompt stands there, or the program has left."""
        end = time.monotonic() + PATIENCE
        while not re.search(rb"(^|\n)> $", re.sub(rb"\x1b\[\?[0-9;]*[a-zA-Z]|\r", b"", self.bytes)):
            if not select.select([self.terminal], [], [], max(0, end - time.monotonic()))[0]:
                break
            try:
                self.bytes += os.read(self.terminal, 65536)
            except OSError:
                break
        return self.bytes.decode(errors="replace").replace("\r", "")

    def ask(self, line):
        """The answer's lines, with their colours."""
        self.bytes = b""
        os.write(self.terminal, (line + "\r").encode())
        return re.sub(r"\x1b\[\?[0-9;]*[a-zA-Z]", "", self.wait()).split("\n")[1:-1]

    def leave(self):
        os.write(self.terminal, b"\x04")
        os.waitpid(self.pid, 0)
        os.close(self.terminal)


def colour_in(folder, **changes):
    session = Terminal(folder, **changes)
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

session = Terminal(folder)
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

session = Terminal(folder, rows=12, columns=50)
session.ask(CASE)
answer = session.ask('c:with { projected_baseline = sweep("20 m", "330 m", 30) }.rim_elements_by_array')
check(len(answer) <= 11 and max(map(len, answer)) <= 50, "nor is a small screen left", answer)
session.leave()

session = Terminal(folder, ("-e", "help()"))
check(len(session.wait().split("\n")) > 50, "one line of code writes the whole")
os.close(session.terminal)

piped = subprocess.run([LACUNA, "-e", CASE.replace("c = ", "") + ".rim_radius"], capture_output=True, text=True, env=dict(os.environ, TERM="dumb")).stdout
check("\x1b" not in piped and "█" in piped, "in a pipe no colour, and the same characters everywhere", piped)
for path in os.listdir(folder):
    subprocess.run(["rm", "-r", os.path.join(folder, path)], check=True)
os.rmdir(folder)
print(f"1..{results}")
