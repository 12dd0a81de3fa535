# SPDX-License-Identifier: GPL-3.0-or-later
"""The conversation at a terminal, driven through a pseudo-terminal as a person would."""
import os
import re
import shutil
import signal
import stat
import subprocess
import tempfile
import termios

from tap import check, plan
from terminal import CONTROL_C, CONTROL_Z, LACUNA, LEFT, META_ENTER, PASTE_BEGINS, PASTE_ENDS, PROMPT, TAB, UP, Session

MANY_DRAWS = "--draws=10000000000"  # a minute of work
INVENTED_STAR = 'c = case{distance = "150 pc", bolometric_flux = "2e-11 W.m**-2"}'


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
    session.type("y = {\r1,\rnil + 1}\r")
    check(session.wait(r"\nprompt:3: attempt to perform arithmetic on a nil value\n> $"), "of several lines, an error says which", session.screen)
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


def paste(session):
    """Several lines at once, as a terminal hands over what is pasted: one input, one entry of the history."""
    session.type(PASTE_BEGINS + "first = 1\nsecond = 2\n\nprint(first + second)" + PASTE_ENDS)
    session.settle()
    check("\n3\n" not in session.screen, "what is pasted waits for Enter", session.screen)
    session.type("\r")
    check(session.wait(r"\n3\n> $"), "several pasted lines are one input", session.screen)
    session.type(UP)
    check(session.wait(r"first = 1\nsecond = 2\n\nprint\(first \+ second\)$"), "which comes back whole", session.screen)
    session.type(LEFT + " * 10\r")
    check(session.wait(r"\n21\n> $"), "and can be edited", session.screen)
    session.type(UP)
    session.settle()
    session.type(UP + LEFT + UP + UP + "0\r")
    check(session.wait(r"\n21\n> $"), "arrow after arrow walks through the history; after another key, from line to line", session.screen)
    session.type(UP + LEFT + UP + META_ENTER + "second = 300\r")
    check(session.wait(r"\n301\n> $"), "Meta-Enter begins a new line", session.screen)
    session.type(PASTE_BEGINS + "for i = 1, 2 do\n\tprint(i)\n" + PASTE_ENDS + "\r")
    check(session.wait(r">> $"), "half a statement can be pasted, tabs in it", session.screen)
    session.ask("end", "1\n2", "and the rest typed")


def survive(session):
    """What ends a computation in C or in Lua doesn't end the session."""
    session.ask("settings{memory = 16}", ".*16 MiB of memory", "little memory")
    session.ask("case{distance = sweep('1 pc', '2 pc', 1e7)}.parallax:stored()", ".*MiB allowed.*(\n.*)*", "over the memory cap")
    session.ask("settings{memory = 2000}", ".*2000 MiB of memory", "enough memory")
    session.ask("s = ('x'):rep(1 << 60)", "resulting string too large", "a string too large")
    session.ask("function f() return f() + 1 end f()", ".*stack overflow.*(\n.*)*", "a stack overflow")
    session.ask("dust{materials = 'soot', sizes = '1 um'}:planck_mean('1e9 K')", ".*is undefined at 1e9 K.*(\n.*)*", "an integral that is not to be had")
    session.type("quantity{name = 'trial', unit = '1', meaning = 'of a test'} relation{gives = 'trial', from = {'distance'}, function() error 'mine' end}\r")
    session.wait(PROMPT)
    session.ask("case{distance = sweep('1 pc', '2 pc', 10)}.trial", "mine", "a relation of the user's that fails below a computation")
    session.ask("error()", ".*nil.*", "an error without a value")
    session.ask("error({})", ".*table.*", "an error that is a table")
    session.ask("error(setmetatable({}, {__tostring = function() error 'again' end}))", ".+", "an error that fails to be told")
    session.ask("return " + "(" * 300 + "1" + ")" * 300, ".*(levels|overflow).*", "too deep for the parser")
    session.ask("x", "20", "the session lives on")


def complete(session):
    def completed(typed, shown, name):
        session.type(typed + TAB)
        check(session.wait(shown + "$"), name, session.screen)
        session.type(CONTROL_C)
        session.wait(r"\^C\n> $")

    session.ask(INVENTED_STAR + " print 'made'", "made", "a star")
    completed("c.rim_ra", "c.rim_radius", "a member of a case")
    completed('case{distance = "150 pc", bolom', "bolometric_flux = ", "a name as a key, with what follows it")
    completed("c:wh", 'c:why "', "a method, with what follows it")
    completed('c:why "heating_l', 'heating_luminosity"', "a name in a string, which is closed")
    completed('q = "150 k', "150 k", "several units")
    completed("string.fo", r"string\.format\(", "a function of Lua's")
    completed('dofile "scripts/what_', r'"scripts/what_if\.lua"', "a file")
    completed('dofile "script', '"scripts/', "a folder")
    completed("a_p", "planet_semi_major_axis{", "a synonym leads to the name")
    completed('c:using{sublimation_radius = "gr', 'grey_grains"', "a recipe of that name")
    session.type("case{\r")
    session.wait(r">> $")
    completed('distance = "150 p', '150 pc"', "in a later line of an input")
    session.type("for i = 1, 2 do\r")
    session.wait(r">> $")
    session.type(TAB + "print(i)\r")
    check(session.wait(r"^  print\(i\)\n>> $"), "Tab before the first word of a later line sets it in", session.screen)
    session.type(CONTROL_C)
    session.wait(r"\^C\n> $")


def list_candidates(session):
    session.type("c:w" + TAB)
    session.settle()
    check("\n" not in session.screen, "the first Tab lists nothing", session.screen)
    session.type(TAB)
    check(session.wait(r"\n  with +The case .*\n  why +The derivation.*(\n +.*)*\n> c:w$"), "the second Tab lists all, with what they mean", session.screen)
    session.type(CONTROL_C)
    session.wait(PROMPT)
    session.type("c." + TAB + TAB)
    check(session.wait(r"given:\n  distance +distance of the star.*(\n.*)*and \d+ more: Tab again\n> c\.$"), "a long list is cut, with a count", session.screen)
    shown = session.screen.count("\n")
    check(shown <= 24, "to what the terminal holds", session.screen)
    session.type(TAB)
    check(session.wait(r"and \d+ more: Tab again\n> c\.$") and not session.screen.startswith("\ngiven:"), "a third Tab shows more", session.screen)
    session.type(CONTROL_C)
    session.wait(PROMPT)


def resize(session):
    def widest_listed(columns, name):
        session.settle()
        session.type("c.rim_" + TAB + TAB)
        session.wait(r"\n> c\.rim_$")
        widest = max(len(line) for line in session.screen.split("\n"))
        check(columns - 15 <= widest <= columns, name, session.screen)
        session.type(CONTROL_C)
        session.wait(PROMPT)

    widest_listed(80, "the list is as wide as the terminal")
    session.resize(24, 50)
    widest_listed(50, "also when that has become narrower")
    session.type("x = 'long " + "o" * 45)
    session.settle()
    session.resize(30, 120)
    session.settle()
    session.type("' print(#x)\r")
    check(session.wait(r"\n50\n> $"), "a line goes on where the size changes in the middle of it", session.screen)
    session.type("while true do end\r")
    session.settle()
    session.resize(24, 60)
    session.type(CONTROL_C)
    check(session.wait("interrupted\n> $"), "a resize during a computation does not disturb it", session.screen)
    widest_listed(60, "and is seen after it")
    session.resize(24, 80)
    session.settle()


def stop_and_go_on(folder):
    """Ctrl-Z and fg, in a shell with job control."""
    session = Session(folder, command=["sh", "-mc", '"$LACUNA"; echo stopped; fg'])
    session.wait(PROMPT)
    session.type("40 +")
    session.wait(r"40 \+$")
    session.type(CONTROL_Z)
    check(session.wait("stopped"), "Ctrl-Z stops the program", session.screen)
    session.settle()
    session.type(" 2\r")
    check(session.wait(r"\n42\n> $"), "and after fg the line goes on", session.screen)
    session.leave()


def interrupt_study(folder):
    """A study whose relation never ends, in several processes."""
    session = Session(folder, "--threads", "3")
    session.wait(PROMPT)
    session.ask('quantity{name = "patience", unit = "pc", meaning = "invented"}'
                ' relation{gives = "patience", by = "waiting", from = {"distance"}, source = "definition", function(d) while true do end end}'
                ' targets = {} for i = 1, 8 do targets[i] = {name = "star " .. i, distance = 100 + i .. " pc"} end print "ready"', "ready", "eight targets")
    children = f"/proc/{session.pid}/task/{session.pid}/children"
    for time in ("once", "twice"):
        session.type('study{targets = targets, ask = {"patience"}}\r')
        for _ in range(100):
            if len(open(children).read().split()) == 3:
                break
            session.read(0.1)
        else:
            check(False, f"the study takes three processes, {time}", open(children).read())
        session.type(CONTROL_C)
        check(session.wait(PROMPT) and "\ninterrupted\n" in session.screen, f"Ctrl-C ends the study, {time}", session.screen)
        check(open(children).read() == "", "and its processes", open(children).read())
    session.ask("print(settings().threads)", "3", "settings are as they were")
    session.leave()


def end_by_signal(folder):
    """A signal that ends the program finds the terminal as it was before."""
    for number in (signal.SIGTERM, signal.SIGHUP, signal.SIGQUIT):
        session = Session(folder)
        session.wait(PROMPT)
        before = termios.tcgetattr(session.terminal)[3]
        os.kill(session.pid, number)
        _, status = os.waitpid(session.pid, 0)
        after = termios.tcgetattr(session.terminal)[3]
        check(os.waitstatus_to_exitcode(status) == -number, number.name + " ends it", status)
        check(not before & termios.ECHO and after & termios.ECHO and after & termios.ICANON, "and the terminal echoes lines again", (before, after))
        os.close(session.terminal)


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
    session.type("text = [[\r")
    session.wait(r">> $")
    session.type("\r#12\r]] print(text)\r")
    check(session.wait(r"\n\n#12\n\n> $"), "an input with a blank line, and one like a line of the history's own", session.screen)
    check(session.leave() == 0 and other.leave() == 0, "Ctrl-D leaves, exit status 0")
    text = open(history).read()
    check("'first session'\n" in text and "'second session'\n" in text and "for i = 1, 2 do\n" in text, "both are remembered", text)
    session = Session(folder)
    session.wait(PROMPT)
    session.type(UP)
    check(session.wait(r"text = \[\[\n\n#12 ?\n\]\] print\(text\)$"), "an input of several lines comes back whole", session.screen)
    session.type(UP)
    check(session.wait("'second session'"), "before it the other session's", session.screen)
    steps = len(re.findall(r"^#\d+$", text[text.index("first = 1\nsecond = 2"):], re.M)) - 1
    session.type(UP * steps)
    session.settle()
    session.ask("", "3", "what was pasted in a session before, too")
    session.leave()


def without_terminal(folder):
    def run(text, *arguments):
        return subprocess.run([LACUNA, *arguments], input=text, capture_output=True, text=True, env=dict(os.environ, XDG_STATE_HOME=folder + "/none", TERM="xterm"))

    done = run("print(5)")
    check(done.stdout == "5\n" and done.stderr == "" and not os.path.exists(folder + "/none"), "no terminal, no banner, no history", done.stdout)
    check(done.returncode == 0, "exit status 0")
    done = run("print(5)\nerror 'bad'\nprint(6)")
    check((done.returncode, done.stdout, done.stderr) == (1, "5\n", "lacuna: stdin:2: bad\n"), "a failed one: 1, and where", done)
    done = run("print(5")
    check((done.returncode, done.stdout) == (1, "") and done.stderr.startswith("lacuna: stdin:1: "), "half a script: 1", done)
    done = run("", "-e", "help()")
    check(done.returncode == 0 and "\x1b" not in done.stdout, "no colour in a pipe", done)
    session = Session("/dev/null/nowhere")
    session.wait(PROMPT)
    session.ask("6", "6", "a state folder that can't be made is no obstacle")
    session.leave()


def plain_terminals(folder):
    session = Session(folder, TERM="dumb")
    session.wait(PROMPT)
    session.ask("help 'gap_width'", "(.*\n)+.*", "help on a dumb terminal")
    session.ask(INVENTED_STAR + " print 'made'", "made", "a star")
    session.type("c:w" + TAB + TAB)
    check(session.wait(r"\n  why .*(\n +.*)*\n> c:w$"), "completion on one", session.screen)
    session.type(CONTROL_C)
    session.wait(r"\^C\n> $")
    session.ask("error 'bad'", "bad", "an error on one")
    session.resize(24, 60)
    session.settle()
    session.leave()
    check("\x1b" not in session.raw, "no escape sequence is sent there", session.raw)
    session = Session(folder, NO_COLOR="1")
    session.wait(PROMPT)
    session.ask("help 'gap_width'", "(.*\n)+.*", "help without colour")
    paste(session)
    session.leave()
    colours = re.findall(r"\x1b\[(?:\d+;)*(?:3\d|4\d|9\d|10\d)(?:;\d+)*m", session.raw)
    check(not colours, "NO_COLOR is honoured", colours)


folder = tempfile.mkdtemp()
try:
    session = talk(folder)
    paste(session)
    stop_things(session)
    survive(session)
    complete(session)
    list_candidates(session)
    resize(session)
    check(session.leave() == 0, "Ctrl-D leaves")
    remember(folder)
    stop_and_go_on(folder)
    interrupt_study(folder)
    end_by_signal(folder)
    without_terminal(folder)
    plain_terminals(folder)
finally:
    shutil.rmtree(folder)
plan()
