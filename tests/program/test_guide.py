# SPDX-License-Identifier: GPL-3.0-or-later
"""The programs printed in the guide: each block of C or Lua that an ```output block follows is run, and its output compared."""
import glob
import os
import re
import subprocess
import tempfile

from tap import check, plan, skip

BUILD = os.environ["LACUNA_BUILD"]
BLOCKS = re.compile(r"```(c|lua)\n(.*?)```\n+```output\n(.*?)```", re.S)
SANITIZED = not os.path.exists(f"{BUILD}/lacuna.so")  # the sanitised build has the program alone


def run_c(source, folder):
    with open(f"{folder}/example.c", "w") as file:
        file.write(source)
    compiler = os.environ.get("CC", "gcc")
    warnings = ["-std=c11", "-Wall", "-Wextra", "-Wpedantic", "-Werror"]
    libraries = [f"{BUILD}/liblacuna.a", "-lgsl", "-lgslcblas", "-fopenmp", "-lm"]
    built = subprocess.run([compiler, *warnings, "-Iinclude", f"{folder}/example.c", "-o", f"{folder}/example", *libraries], capture_output=True, text=True)
    if built.returncode:
        return built.stderr
    return subprocess.run([f"{folder}/example"], capture_output=True, text=True).stdout


def run_lua(source):
    return subprocess.run([os.environ["LUA"], "-"], input=source, capture_output=True, text=True, env=dict(os.environ, LUA_CPATH=f"{BUILD}/?.so")).stdout


programs = [(path, *block) for path in sorted(glob.glob("docs/guide/*.md")) for block in BLOCKS.findall(open(path, encoding="utf-8").read())]
check(len(programs) >= 2, "the guide has programs")
with tempfile.TemporaryDirectory() as scratch:
    for number, (path, language, source, wanted) in enumerate(programs, 1):
        name = f"{path}, program {number} in {language}"
        if SANITIZED:
            skip(name, "the sanitised build has no library to link without sanitizers")
            continue
        seen = run_c(source, scratch) if language == "c" else run_lua(source)
        check(seen == wanted, name, seen)
plan()
