# SPDX-License-Identifier: GPL-3.0-or-later
"""The demo's report as its readers see it: the page passes every check, and the LaTeX compiles with Debian's texlive-latex-base and
texlive-latex-recommended, without errors, undefined citations or lines that run out of the page. Stars and instruments are invented."""
import os
import re
import subprocess
import sys
import tempfile

sys.path.insert(0, os.path.dirname(os.path.abspath(__file__)))
import check_page  # noqa: E402

# A document that a proposal might be: the table alone, in a class with two columns.
TABLE_ALONE = r"\documentclass[twocolumn]{article}\usepackage[utf8]{inputenc}\usepackage{booktabs}\begin{document}\input{table}\end{document}"


def run(folder, *command):
    return subprocess.run(command, cwd=folder, capture_output=True, text=True, errors="replace", timeout=200, check=False)


def latex(folder, name):
    """Compiles name.tex with its bibliography; returns what is wrong."""
    defects = []
    with open(os.path.join(folder, name + ".tex"), encoding="utf-8") as file:
        cites = "\\bibliography{" in file.read()
    steps = [("pdflatex", "-interaction=nonstopmode", "-halt-on-error", name), ("bibtex", name)] if cites else []
    steps += [("pdflatex", "-interaction=nonstopmode", "-halt-on-error", name)] * 2
    for step in steps:
        done = run(folder, *step)
        if done.returncode != 0:
            return [f"{step[0]} ended with status {done.returncode}"] + re.findall(r"^(?:!|I |Repeated|error).*", done.stdout, re.M)
    with open(os.path.join(folder, name + ".log"), encoding="utf-8", errors="replace") as file:
        log = file.read()
    defects += re.findall(r"^.*(?:undefined|multiply defined|Missing character).*$", log, re.M)
    defects += [f"a line {width} pt too wide" for width in re.findall(r"^Overfull \\hbox \(([\d.]+)pt", log, re.M) if float(width) > 5]
    if not os.path.getsize(os.path.join(folder, name + ".pdf")):
        defects.append("an empty PDF")
    return defects


def odd_names(scratch):
    """A study whose texts have every Latin letter, Greek ones, signs and letters that no font of LaTeX's has: it compiles all the same."""
    letters = "".join(chr(code) for code in [*range(0xA1, 0x180), *range(0x391, 0x3CA), *range(0x2010, 0x2040)] if chr(code).isprintable())
    with open(os.path.join(scratch, "odd.lua"), "w", encoding="utf-8") as file:
        file.write('study { title = "Odd: \\\\ { } $ & # % _ ~ ^ < > 名", targets = {{ name = "[a] LETTERS", distance = "100 pc", note = "* 星 %" }}, ask = { "parallax" } }'
                   .replace("LETTERS", letters))
    done = run(scratch, os.environ["LACUNA"], "odd.lua", "--out", "odd")
    return latex(os.path.join(scratch, "odd"), "report") if done.returncode == 0 else [done.stderr]


def cited_and_listed(folder):
    """Keys that are cited without an entry, and entries that nothing cites."""
    text = ""
    for name in ("feasibility.tex", "derivations.tex", "table.tex", "report.tex"):
        with open(os.path.join(folder, name), encoding="utf-8") as file:
            text += file.read()
    cited = {key for keys in re.findall(r"\\cite(?:\[(?:[^\]{}]|\{[^}]*\})*\])?\{([^}]*)\}", text) for key in keys.split(",")}
    with open(os.path.join(folder, "references.bib"), encoding="utf-8") as file:
        listed = set(re.findall(r"^@\w+\{([^,]+),", file.read(), re.M))
    return sorted(cited ^ listed) if cited else ["nothing is cited"]


def main():
    with tempfile.TemporaryDirectory() as scratch:
        folder = os.path.join(scratch, "report")
        done = run(os.getcwd(), os.environ["LACUNA"], "scripts/demo_study.lua", "--out", folder)
        results = [("it is written", [] if done.returncode == 0 else [done.stderr])]
        results += check_page.check(os.path.join(folder, "index.html"), no_script=True)
        with open(os.path.join(folder, "alone.tex"), "w", encoding="utf-8") as file:
            file.write(TABLE_ALONE)
        results.append(("report.tex compiles", latex(folder, "report")))
        results.append(("table.tex alone compiles", latex(folder, "alone")))
        results.append(("a report with odd names compiles", [one for one in odd_names(scratch) if "too wide" not in one]))
        results.append(("what is cited is listed, and nothing else", cited_and_listed(folder)))
    count, failed = check_page.report(results, "the demo's report")
    print(f"1..{count}")
    return failed > 0


if __name__ == "__main__":
    sys.exit(main())
