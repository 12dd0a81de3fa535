# SPDX-License-Identifier: GPL-3.0-or-later
"""The conversation at a terminal, driven through a pseudo-terminal as a person would."""
import os
import pty
import re
import select
import shutil
import signal
import stat
import subprocess
import tempfile
import time

LACUNA = os.environ["LACUNA"]
PATIENCE = 30  # seconds for an answer; sanitised builds are slow
CONTROL_C, CONTROL_D, UP = "\x03", "\x04", "\x1b[A"
PROMPT = re.compile(r"(^|\n)> $")
MANY_DRAWS = "--draws=10000000000"  # a minute of work
results = 0


def check(good, name, seen=""):
    global results
    results += 1
    print(f"{'ok' if good else 'not ok'} {results} - {name}", flush=True)
    if not good:
        print("# saw " + repr(seen), flush=True)


class Session:
    """One program on a terminal of its own."""

    def __init__(self, state_folder, *options):
        environment = dict(os.environ, XDG_STATE_HOME=state_folder, XDG_CONFIG_HOME=state_folder, TERM="xterm", INPUTRC="/dev/null")
        self.pid, self.terminal = pty.fork()
        if self.pid == 0:
            os.execve(LACUNA, [LACUNA, *options], environment)
        self.screen = ""

    def type(self, text):
        self.screen = ""
        os.write(self.terminal, text.encode())

    def wait(self, pattern, patience=PATIENCE):
        """Reads until what was seen since the last typing matches; terminal control is left out."""
        pattern, end = re.compile(pattern) if isinstance(pattern, str) else pattern, time.monotonic() + patience
        while not pattern.search(self.screen):
            if not select.select([self.terminal], [], [], max(0, end - time.monotonic()))[0]:
                return False
            try:
                piece = os.read(self.terminal, 65536)
            except OSError:  # the program has left
                return bool(pattern.search(self.screen))
            self.screen = re.sub(r"\x1b\[[0-9;?]*[a-zA-Z]|\r", "", self.screen + piece.decode(errors="replace"))
        return True

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
        self.type(CONTROL_D)
        end = time.monotonic() + PATIENCE
        while time.monotonic() < end:
            if select.select([self.terminal], [], [], 0.05)[0]:
                try:
                    os.read(self.terminal, 65536)
                except OSError:
                    pass
            pid, status = os.waitpid(self.pid, os.WNOHANG)
            if pid:
                os.close(self.terminal)
                return os.waitstatus_to_exitcode(status)
        os.kill(self.pid, signal.SIGKILL)
        os.waitpid(self.pid, 0)
        return None


def talk(folder):
    session = Session(folder, MANY_DRAWS)
    check(session.wait(PROMPT) and "help()" in session.screen and "staff decide" in session.screen, "the banner, then the prompt", session.screen)
    session.ask("1 + 1", "2", "an expression's value is shown")
    session.type("x = 20\r")
    check(session.wait(r"x = 20\n> $"), "a statement shows nothing", session.screen)
    session.ask("x + 1, true", "21\ntrue", "several values stand one after the other")
    session.type("for i = 1, 2 do\r")
    check(session.wait(r"\n>> $"), "half a statement asks for the rest", session.screen)
    session.type("print(i * 10)\r")
    session.wait(r"\n>> $")
    session.ask("end", "10\n20", "the whole statement is run")
    session.type("1 +\r")
    session.wait(r"\n>> $")
    session.ask("2", "3", "an expression of two lines")
    session.ask("error('bad')", "bad", "an error is one line")
    session.ask("x = = 1", "unexpected symbol near '='", "so is a syntax error")
    session.ask("x", "20", "the session lives on")
    session.type("\x1b[200~first = 1\nsecond = 2\nprint(first + second)\x1b[201~\r")
    check(session.wait(r"\n3\n> $"), "several pasted lines are one input", session.screen)
    return session


def stop_things(session):
    session.interrupt("while true do end", "a loop")
    session.interrupt("coroutine.wrap(function() while true do end end)()", "a loop in a coroutine")
    session.interrupt("coroutine.resume(coroutine.create(function() while true do end end))", "a loop in a resumed coroutine")
    session.interrupt("while true do pcall(function() while true do end end) end", "a loop around pcall")
    session.interrupt("mean(quantity '156 +- 3 pc')", "a computation of the core")
    session.ask("x", "20", "the session lives on after all that")
    session.type("half a li")
    session.wait("half a li")
    session.type(CONTROL_C)
    check(session.wait(r"\n> $"), "Ctrl-C cancels the line", session.screen)
    session.ask("print 'later'", "later", "what is typed after it is kept")
    session.type("function f()\r")
    session.wait(r"\n>> $")
    session.type(CONTROL_C)
    check(session.wait(r"\n> $"), "Ctrl-C cancels an input of several lines", session.screen)
    session.type(CONTROL_C + "40 + 2\r")
    check(session.wait(r"\n42\n> $"), "Ctrl-C and a line in one go", session.screen)


def remember(folder):
    history = os.path.join(folder, "lacuna", "history")
    check(stat.S_IMODE(os.stat(history).st_mode) == 0o600, "the history is the user's alone")
    check(stat.S_IMODE(os.stat(os.path.dirname(history)).st_mode) == 0o700, "and so is its folder")
    session = Session(folder)
    session.wait(PROMPT)
    other = Session(folder)
    other.wait(PROMPT)
    session.ask("print 'first session'", "first session", "one session")
    other.ask("print 'second session'", "second session", "and another")
    check(session.leave() == 0 and other.leave() == 0, "Ctrl-D leaves, exit status 0")
    text = open(history).read()
    check("'first session'\n" in text and "'second session'\n" in text and "for i = 1, 2 do\n" in text, "both are remembered", text)
    session = Session(folder)
    session.wait(PROMPT)
    session.type(UP)
    check(session.wait("'second session'"), "the last line comes back", session.screen)
    steps = text[text.index("for i = 1, 2 do"):].count("\n#")
    session.type(UP * steps)
    session.wait("print.i . 10.\nend")
    session.ask("", "10\n20", "an input of several lines comes back whole")
    session.leave()


def without_terminal(folder):
    done = subprocess.run([LACUNA], input="print(5)", capture_output=True, text=True, env=dict(os.environ, XDG_STATE_HOME=folder + "/none"))
    check(done.stdout == "5\n" and done.stderr == "" and not os.path.exists(folder + "/none"), "no terminal, no banner, no history", done.stdout)
    session = Session("/dev/null/nowhere")
    session.wait(PROMPT)
    session.ask("6", "6", "a state folder that can't be made is no obstacle")
    session.leave()


folder = tempfile.mkdtemp()
try:
    session = talk(folder)
    stop_things(session)
    check(session.leave() == 0, "Ctrl-D leaves")
    remember(folder)
    without_terminal(folder)
finally:
    shutil.rmtree(folder)
print(f"1..{results}")
