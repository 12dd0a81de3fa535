# SPDX-License-Identifier: GPL-3.0-or-later
"""A program on a pseudo-terminal, driven as a person would: for the tests of the conversation."""
import codecs
import fcntl
import os
import pty
import re
import select
import signal
import struct
import termios
import time

from tap import check

LACUNA = os.environ["LACUNA"]
PATIENCE = 30  # seconds for an answer; sanitised builds are slow
CONTROL_C, CONTROL_D, CONTROL_Z, UP, LEFT, TAB, META_ENTER = "\x03", "\x04", "\x1a", "\x1b[A", "\x1b[D", "\t", "\x1b\r"
PASTE_BEGINS, PASTE_ENDS = "\x1b[200~", "\x1b[201~"
PROMPT = re.compile(r"(^|\n)> $")


class Session:
    """One program, or another command, on a terminal of its own, started in `folder` if one is named. screen: what was seen since the last
    typing, without terminal control; coloured: the same with colours; raw: all of it as it came."""

    def __init__(self, state_folder, *options, rows=24, columns=80, command=None, folder=None, **settings):
        environment = {**os.environ, "XDG_STATE_HOME": state_folder, "XDG_CONFIG_HOME": state_folder, "TERM": "xterm", "INPUTRC": "/dev/null", **settings}
        for name in {"NO_COLOR", "COLUMNS", "LINES"} - set(settings):
            environment.pop(name, None)
        self.pid, self.terminal = pty.fork()
        if self.pid == 0:
            self.terminal = 0
            if folder:
                os.chdir(folder)
            self.resize(rows, columns)
            command = command or [LACUNA, *options]
            os.execvpe(command[0], command, environment)
        self.screen = self.coloured = self.raw = ""
        self.decoder = codecs.getincrementaldecoder("utf-8")(errors="replace")  # a character may come in two pieces

    def resize(self, rows, columns):
        """As a window does whose size is changed: the kernel tells the program by a signal."""
        fcntl.ioctl(self.terminal, termios.TIOCSWINSZ, struct.pack("HHHH", rows, columns, 0, 0))

    def type(self, text):
        self.screen = self.coloured = ""
        os.write(self.terminal, text.encode())

    def read(self, patience):
        """Takes in what comes within that time. Returned: whether something did."""
        if not select.select([self.terminal], [], [], max(0, patience))[0]:
            return False
        try:
            piece = self.decoder.decode(os.read(self.terminal, 65536))
        except OSError:  # the program has left
            return False
        self.raw += piece
        self.coloured = re.sub(r"\x1b\[\?[0-9;]*[a-zA-Z]|\r", "", self.coloured + piece)
        self.screen = re.sub(r"\x1b\[[0-9;?]*[@-~]|[\r\a]", "", self.screen + piece)
        return True

    def wait(self, pattern, patience=PATIENCE):
        """Reads until what was seen since the last typing matches."""
        pattern, end = re.compile(pattern) if isinstance(pattern, str) else pattern, time.monotonic() + patience
        while not pattern.search(self.screen):
            if not self.read(end - time.monotonic()):
                return bool(pattern.search(self.screen))
        return True

    def settle(self, quiet=0.3):
        """Reads until nothing has come for a while."""
        while self.read(quiet):
            pass
        return self.screen

    def answer(self, *lines):
        """Types the lines of one input. Returned: what is shown before the next prompt; None if that doesn't come."""
        for line in lines[:-1]:
            self.type(line + "\r")
            self.wait(r"\n>> $")
        self.type(lines[-1] + "\r")
        return self.screen[self.screen.index("\n") + 1 : -len("> ")] if self.wait(PROMPT) else None

    def ask(self, line, answer, name):
        """Types a line and wants this answer before the next prompt."""
        self.type(line + "\r")
        good = self.wait(PROMPT) and re.search(r"\n" + answer + r"\n> $", self.screen)
        check(bool(good), name, self.screen)

    def interrupt(self, line, name):
        """Types a line that never ends, then Ctrl-C, and wants the prompt back."""
        self.type(line + "\r")
        self.wait(r"\n")
        time.sleep(0.5)
        check(not PROMPT.search(self.screen), name + " runs", self.screen)
        self.type(CONTROL_C)
        check(self.wait(PROMPT) and "\ninterrupted\n" in self.screen, name + " ends by Ctrl-C", self.screen)

    def leave(self):
        """Types Ctrl-D. Returned: the exit status; None if the program stays."""
        self.type(CONTROL_D)
        end = time.monotonic() + PATIENCE
        while time.monotonic() < end:
            self.read(0.05)
            pid, status = os.waitpid(self.pid, os.WNOHANG)
            if pid:
                os.close(self.terminal)
                return os.waitstatus_to_exitcode(status)
        os.kill(self.pid, signal.SIGKILL)
        os.waitpid(self.pid, 0)
        return None
