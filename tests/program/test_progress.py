# SPDX-License-Identifier: GPL-3.0-or-later
"""How far a study is, as a terminal and a pipe see it on standard error."""
import os
import pty
import re
import subprocess
import sys
import tempfile

LACUNA = os.environ["LACUNA"]
STUDY = """
local targets = {}
for i = 1, 12 do targets[i] = { name = "star " .. i, distance = 100 + i .. " pc" } end
quantity { name = "patience", unit = "pc", meaning = "what a slow relation gives" }
relation { gives = "patience", by = "waiting", from = { "distance" }, source = "definition", function(distance)
  os.execute "sleep 0.15"
  return distance
end }
study { targets = targets, ask = { "patience" } }
"""
count = 0


def result(good, name):
    global count
    count += 1
    print(f"{'ok' if good else 'not ok'} {count} - {name}", flush=True)


def on_terminal(arguments, kind):
    """What a terminal of that kind on standard error is sent; standard output is a pipe."""
    master, slave = pty.openpty()
    environment = dict(os.environ, TERM=kind)
    child = subprocess.Popen([LACUNA] + arguments, stdin=subprocess.DEVNULL, stdout=subprocess.DEVNULL, stderr=slave, env=environment)
    os.close(slave)
    sent = b""
    while True:
        try:
            piece = os.read(master, 4096)
        except OSError:  # the other end is closed
            break
        if not piece:
            break
        sent += piece
    os.close(master)
    result(child.wait() == 0, f"the study runs, TERM={kind}")
    return sent.decode()


with tempfile.TemporaryDirectory() as folder:
    os.chdir(folder)
    with open("slow.lua", "w") as file:
        file.write(STUDY)
    for threads in "1", "2":
        sent = on_terminal(["--threads", threads, "slow.lua"], "xterm")
        drawn = re.findall(r"(\d+) of 12 targets, \d+ s left", sent)
        result(len(drawn) >= 2 and drawn == sorted(drawn, key=int), f"a bar that grows, with the time left, --threads {threads}")
        result(sent.endswith("\r\x1b[K") and "\n" not in sent, "it is taken away in the end")
    sent = on_terminal(["--threads", "2", "slow.lua", "--out", "dumb"], "dumb")
    result("\x1b" not in sent and re.search(r"^12 targets in [\d.]+ s, \d+ MB\r$", sent, re.M), "plain lines where a line can't be redrawn")
    quiet = subprocess.run([LACUNA, "--threads", "2", "slow.lua"], capture_output=True)
    result(quiet.returncode == 0 and quiet.stderr == b"" and b"star 12" in quiet.stdout, "a pipe gets nothing from a short run")
print(f"1..{count}")
sys.exit(0)
