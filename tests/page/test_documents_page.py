# SPDX-License-Identifier: GPL-3.0-or-later
"""The guide and the manuals as their readers see them: every page passes every check, and the manual pages are right roff."""
import glob
import os
import shutil
import subprocess
import sys

sys.path.insert(0, os.path.dirname(os.path.abspath(__file__)))
import check_page  # noqa: E402

FOLDER = os.path.join(os.environ["LACUNA_BUILD"], "docs")
LEAST = {"manual.html": 400, "interface.html": 200}  # sections or blocks that a whole page has


def empty_sections(path):
    with open(path, encoding="utf-8") as file:
        text = file.read()
    count = text.count("<section") + text.count("<pre")
    return [] if count >= LEAST[os.path.basename(path)] else [f"{count} sections"]


def defects_of_roff(path):
    """What the formatter complains of."""
    if not shutil.which("groff"):
        return ["groff is missing"]
    done = subprocess.run(["groff", "-Tutf8", "-Kutf8", "-mandoc", "-ww", "-z", path], capture_output=True, text=True, check=False)
    return done.stderr.splitlines()


def main():
    count = failed = 0
    pages = sorted(glob.glob(f"{FOLDER}/*.html"))
    groups = [(os.path.basename(page), check_page.check(page, no_script=True)) for page in pages]
    groups.append(("documents", [("all pages are there", [] if len(pages) >= 9 else pages)]))
    groups += [(name, [("nothing is left out", empty_sections(f"{FOLDER}/{name}"))]) for name in LEAST]
    for page in ("lacuna.1", "lacuna.3"):
        groups.append((page, [("the formatter has no complaint", defects_of_roff(f"{FOLDER}/{page}"))]))
    for name, results in groups:
        count, more = check_page.report(results, name, count)
        failed += more
    print(f"1..{count}")
    return failed > 0


if __name__ == "__main__":
    sys.exit(main())
