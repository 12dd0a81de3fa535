# SPDX-License-Identifier: GPL-3.0-or-later
"""The session as a notebook, at a terminal: what keep writes runs alone and prints what the session showed. All stars are invented."""
import os
import re
import shutil
import subprocess
import tempfile
import time

import terminal
from tap import check, plan
from terminal import CONTROL_C, LACUNA, PROMPT


class Session(terminal.Session):
    """A conversation in a folder whose XDG folders are in there too; on a terminal so wide that each message is a line."""

    def __init__(self, folder, *options):
        super().__init__(folder + "/state", *options, columns=200, folder=folder, XDG_CONFIG_HOME=folder + "/config")
        self.folder = folder
        self.shown = ""  # all that was shown of inputs that went well
        self.greeting = self.screen if self.wait(PROMPT) else None

    def go(self, *lines):
        """An input that goes well: what it shows is what the script has to print."""
        shown = self.answer(*lines)
        self.shown += "nothing in time" if shown is None else shown

    def fail(self, line, message):
        shown = self.answer(line) or ""
        check(shown.startswith(message) and shown.count("\n") == 1, f"fails in one line: {line}", shown)


def write(folder, name, text):
    path = os.path.join(folder, name)
    os.makedirs(os.path.dirname(path), exist_ok=True)
    with open(path, "w") as file:
        file.write(text)


def read(folder, name):
    with open(os.path.join(folder, name)) as file:
        return file.read()


def run(folder, *arguments):
    environment = dict(os.environ, XDG_STATE_HOME=folder + "/state", XDG_CONFIG_HOME=folder + "/none")
    return subprocess.run([LACUNA, *arguments], capture_output=True, text=True, cwd=folder, env=environment, stdin=subprocess.DEVNULL)


def runs_the_same(session, name, label):
    done = run(session.folder, name)
    check(done.returncode == 0 and done.stderr == "" and done.stdout == session.shown and done.stdout != "", label,
          f"{done.stdout!r} {done.stderr!r}, wanted {session.shown!r}, from {read(session.folder, name)!r}")


def keep_what_went_well(folder):
    session = Session(folder, "--seed", "5", "--draws=500")
    session.go('local c = case { distance = "156 ± 3 pc", rim_radius = "0.3 au" }')
    session.go("c.rim_radius_angle -- on the sky")
    session.fail("c.rim_raduis", "unknown name 'rim_raduis'")
    session.go("local star = spread.normal(2, 0.1)")
    session.fail("local lost = spread.normal(2*K, 1*K) + 3*au", "can't add a temperature")
    session.fail("star + 3*K", "can't add")
    session.fail("local d = case { cavity_radius = star*au, x = 1 }", "unknown name 'x'")
    session.go("local width = spread.normal(2*au, 0.1*au)")
    session.fail("width + 3*K", "can't add a length")
    session.go("mean(case { cavity_radius = width }.cavity_radius)")
    session.go("local nobody")
    session.fail("nobody.name", "attempt to index a nil value (local 'nobody')")
    session.go("local many = sweep { 1*au, 2*au }")
    session.fail("many + 3*K", "can't add a length")
    session.go("c:with { rim_radius = many }.rim_radius_angle")
    session.go("local planet = spread.log_uniform(1e-4, 1e-2)")
    session.go("star * planet, mean(star * 1), mean(planet * 1)")
    session.go("local au = 3", )
    session.go("au, star + au")
    session.go("for i = 1, 2 do", "  print(i, i * au)", "end")
    session.go("local function twice(x)", "  return 2 * x * au -- au is the session's", "end")
    session.go("local au <const> = 10")
    session.fail("au = 11", "attempt to assign to const variable 'au'")
    session.go("twice(1), au")
    session.go("bits = {}")
    session.go("bits.one = twice(2)")
    session.go("return bits.one")
    session.go("(print)('said')")
    session.go("'text', nil, 5")
    session.go("figure { of = c, show = 'rim_radius_angle', along = { rim_radius = sweep('0.1 au', '1 au', 5) } }")
    session.type("while true do end\r")
    session.wait(r"\n")
    time.sleep(0.3)
    session.type(CONTROL_C)
    check(session.wait(PROMPT) and "interrupted" in session.screen, "an interrupted input", session.screen)
    session.answer('help "distance"')
    session.answer("help()")
    session.answer("more()")
    shown = session.answer('keep "kept.lua"')
    check(shown == "kept 22 inputs in kept.lua\n", "keep says what it wrote", shown)
    text = read(folder, "kept.lua")
    check(re.match(r"-- A session of Lacuna [0-9.]+, kept on \d{4}-\d\d-\d\d\nsettings \{ seed = 5, draws = 500 \}\n\nlocal c = case", text),
          "the script begins with version, date, seed and draws", text)
    check(not re.search("raduis|lost|while|help|more|keep \"|au = 11", text), "failed and interrupted inputs, help, more and keep are left out", text)
    check("print(show(c.rim_radius_angle)) -- on the sky\n" in text, "a comment stays behind its line", text)
    check("  return 2 * x * au -- au is the session's\nend\n" in text, "an input of several lines keeps them", text)
    runs_the_same(session, "kept.lua", "the script prints what the session showed, free spreads included")
    return session


def keep_again(session):
    folder = session.folder
    session.go("spread.normal(0, 1) * 1")
    check(session.answer('keep "kept.lua"') == "kept 23 inputs in kept.lua\n", "the session's own file is replaced", session.screen)
    runs_the_same(session, "kept.lua", "and has what came since")
    write(folder, "mine.lua", "-- mine\n")
    refusal = 'keep: mine.lua exists, and not as this session has written it; keep("mine.lua", true) replaces it'
    session.fail('keep "mine.lua"', refusal)
    check(read(folder, "mine.lua") == "-- mine\n", "and is left as it was")
    check(session.answer('keep("mine.lua", true)') == "kept 23 inputs in mine.lua\n", "unless that is asked for", session.screen)
    session.fail("keep()", 'keep wants a file\'s name, like keep "file.lua"; got nothing')
    session.fail('keep "none/x.lua"', "cannot write none/x.lua: No such file or directory")
    session.fail('do keep "x.lua" end', 'keep is an input of its own: type keep "file.lua" alone')
    check(session.leave() == 0, "Ctrl-D leaves")


def keep_what_failed_late(folder):
    session = Session(folder)
    session.fail("first = 1; local second = spread.normal(1, 1); error 'late'", "late")
    session.go("local third = spread.normal(1, 1)")
    session.go("third * 1, mean(third * 1)")
    left_out = "left out: failed after it had set first, second: first = 1; local second = spread.normal(1, 1); error 'late'"
    shown = session.answer('keep "late.lua"')
    check(shown == "kept 2 inputs in late.lua\n  " + left_out + "\n", "keep tells of variables set by an input that failed", shown)
    check("-- " + left_out in read(folder, "late.lua"), "and so does the script", read(folder, "late.lua"))
    runs_the_same(session, "late.lua", "the draws of what follows are the same")
    for start in range(0, 200, 5):
        session.go("local " + ", ".join(f"v{i}" for i in range(start, start + 5)) + f" = {start}")
    session.go("v0 + v100 + v195")
    session.answer('keep "many.lua"')
    runs_the_same(session, "many.lua", "a session of more than 200 locals")
    session.leave()
    session = Session(folder)
    shown = session.answer('again "many.lua"')
    check("295\n" in shown and session.answer("v100") == "100\n", "and it is read again with all of them", shown)
    session.leave()


PERSONAL = """-- invented
quantity { name = "shadow_length", unit = "au", meaning = "how far a shadow reaches" }

local near = case { distance = "100 pc" }
function near_star(givens)
  return near:with(givens)
end
"""
STARS = """#!/usr/bin/env lacuna
-- invented stars
local stars = {
  "A", "B",

  "C", }
local first = near_star { shadow_length = "1 au" }
  :with { rim_radius = "0.5 au" }

print(#stars, first.rim_radius_angle)
stars[#stars + 1] = "D"
"""
BROKEN = "local ran = 7\n\n-- then\nlocal never = nothing.more\nprint 'not reached'\n"


def start_files(folder):
    write(folder, "config/lacuna/start.lua", PERSONAL)
    write(folder, "stars.lua", STARS)
    write(folder, "broken.lua", BROKEN)
    session = Session(folder, "--start", "stars.lua")
    check(session.greeting and re.search(r"\nreading \S+/config/lacuna/start.lua\n3\s+5 mas\n> $", session.greeting), "both start-up files are run", session.greeting)
    session.shown = "3\t5 mas\n"
    session.go("#stars, near.distance, first.shadow_length")
    broken = r"broken.lua:4: attempt to index a nil value (global 'nothing')"
    session.fail('again "broken.lua"', broken)
    session.go("ran, never")
    session.go("local ran = ran + 1")
    session.go("ran")
    session.fail('again "absent.lua"', "again: cannot read absent.lua: No such file or directory")
    session.answer('keep "all.lua"')
    text = read(folder, "all.lua")
    check(re.search(r"-- from start-up file \S*/config/lacuna/start.lua\n-- invented\nquantity ", text) and "\n-- from start-up file stars.lua\n-- invented stars\n" in text and "\n-- from broken.lua\nlocal ran = 7\n" in text,
          "start-up files and what was read again stand in the script", text)
    check("again" not in text and "never = " not in text, "and again doesn't", text)
    runs_the_same(session, "all.lua", "the script runs without them")
    session.leave()
    session = Session(folder, "--draws=300", "--start=stars.lua")
    shown = session.answer('again "all.lua"')
    check(shown == "4\n100 pc\n1 au\n7\n8\n", "in a session with the same start-up files only the rest is run again", shown)
    session.fail("settings { seed = 7, nothing = 1 }", "settings: unknown setting")
    check("draws 10000" not in session.answer("settings()") and "seed 0, 10000 draws" in session.screen, "settings are made all or none", session.screen)
    session.fail("settings { draws = 50 } error 'late'", "late")
    session.shown = session.answer("spread.normal(0, 1) * 1")
    session.answer('keep "drawn.lua"')
    check(run(folder, "drawn.lua").stdout.endswith(session.shown), "settings made before a failure stay in the script", read(folder, "drawn.lua"))
    session.leave()


def other_starts(folder):
    write(folder, "config/lacuna/start.lua", "mine = 1\nerror 'no good'\nmine = 2\n")
    session = Session(folder)
    check(re.search(r"\nreading \S+\n\S+start.lua:2: no good\n> $", session.greeting), "an error in the start-up file is one line", session.greeting)
    check(session.answer("mine") == "1\n", "what ran before it stays", session.screen)
    session.leave()
    session = Session(folder, "--start", "nowhere.lua")
    check("\n--start: cannot read nowhere.lua: No such file or directory\n> " in session.greeting, "a start file that isn't there", session.greeting)
    session.leave()
    write(folder, "config/lacuna/start.lua", "half = {\n")
    session = Session(folder)
    check(re.search(r"start.lua:\d: .* near <eof>\n> $", session.greeting), "half a file", session.greeting)
    check(session.answer("1 + 1") == "2\n", "is no obstacle", session.screen)
    session.leave()


def without_terminal(folder):
    write(folder, "config/lacuna/start.lua", "print 'personal'\n")
    write(folder, "first.lua", "local one = 1\ntwo = 2\nprint 'first'\n")
    write(folder, "script.lua", "print(one, two)\n")
    environment = dict(os.environ, XDG_CONFIG_HOME=folder + "/config")
    done = subprocess.run([LACUNA, "-e", "3"], capture_output=True, text=True, env=environment)
    check(done.stdout == "3\n" and done.stderr == "", "no script depends on the personal start-up file", done.stdout)
    done = run(folder, "--start", "first.lua", "script.lua")
    check(done.stdout == "first\nnil\t2\n" and done.returncode == 0, "--start before a script, which sees its globals", done)
    done = run(folder, "--start=first.lua", "-e", "one + two")
    check(done.stdout == "first\n3\n" and done.returncode == 0, "--start before -e, which sees its locals too", done)
    done = run(folder, "--start", "broken.lua", "script.lua")
    check(done.stderr == "lacuna: broken.lua:4: attempt to index a nil value (global 'nothing')\n" and done.returncode == 1, "a start that fails is a failure", done)
    done = run(folder, "--start")
    check(done.stderr == "lacuna: --start wants a file after it; got nothing\n" and done.returncode == 2, "--start without a file", done)
    write(folder, "script.lua", "keep 'x.lua'\n")
    done = run(folder, "script.lua")
    check(done.returncode == 1 and "script.lua:1: keep is for a conversation" in done.stderr, "keep in a script", done)


def interrupt_again(folder):
    write(folder, "config/lacuna/start.lua", "")
    write(folder, "slow.lua", "local a = 1\nwhile true do a = a + 1 end\n")
    session = Session(folder)
    session.type('again "slow.lua"\r')
    session.wait(r"\n")
    time.sleep(0.5)
    session.type(CONTROL_C)
    check(session.wait(PROMPT) and "interrupted" in session.screen, "Ctrl-C stops again", session.screen)
    check(session.answer("a > 1") == "true\n", "what ran before stays", session.screen)
    shown = session.answer('keep "slow_kept.lua"')
    check("left out: failed after it had set a: while true" in shown and "\nlocal a = 1\n" in read(folder, "slow_kept.lua"), "and is kept", shown)
    session.leave()


folder = tempfile.mkdtemp()
try:
    keep_again(keep_what_went_well(folder))
    keep_what_failed_late(folder)
    start_files(folder)
    other_starts(folder)
    without_terminal(folder)
    interrupt_again(folder)
finally:
    shutil.rmtree(folder)
plan()
