# SPDX-License-Identifier: GPL-3.0-or-later
"""The page checker's own test: a sound page passes every check; in a copy with seeded defects each is found by the check it belongs to."""
import os
import sys
import tempfile

sys.path.insert(0, os.path.dirname(os.path.abspath(__file__)))
import check_page  # noqa: E402

SOUND = """<!DOCTYPE html>
<html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width, initial-scale=1">
<meta name="color-scheme" content="light dark"><title>A sound page</title><link rel="icon" href="data:,">
<style>body { background: #fff; color: #222; } .soft { color: #666; } @media (prefers-color-scheme: dark) { body { background: #111; color: #eee; }
.soft { color: #aaa; } a { color: #9cf; } }</style></head>
<body><h1>A page</h1><p class="soft">Soft text, <a href="#below">a link below</a>, <a href="beside.html#there">one beside</a>.</p>
<h2 id="below">Below</h2><img alt="a dot" src="data:image/gif;base64,R0lGODlhAQABAAAAACwAAAAAAQABAAA=">
<svg width="10" height="10" aria-label="a square"><rect width="9" height="9"/></svg>
<svg width="90" height="30" aria-label="words on white"><rect width="90" height="30" fill="#fff"/><text x="5" y="20" fill="#333">Drawn</text></svg>
<div style="overflow-x:auto"><table style="width:60rem"><tr><th scope="col">Head</th></tr><tr><td>Cell</td></tr></table></div>
</body></html>
"""

# Each defect: what is replaced, by what, which check finds it, and a word that stands in what the check says.
DEFECTS = [
    ('<html lang="en">', "<html>", "language, title and viewport", "no lang"),
    ("<title>A sound page</title>", "<title></title>", "language, title and viewport", "no title"),
    (".soft { color: #666; }", ".soft { color: #999; }", "contrast of 4.5, light, phone", "Soft text"),
    (".soft { color: #aaa; }", ".soft { color: #555; }", "contrast of 4.5, dark, desktop", "Soft text"),
    ('href="#below"', 'href="#nowhere"', "links and anchors", "#nowhere"),
    ('href="beside.html#there"', 'href="gone.html"', "links and anchors", "gone.html"),
    ("</h1>", '</h1><a href="beside.html#elsewhere">one more</a>', "links and anchors", "#elsewhere"),
    ('alt="a dot" ', "", "pictures have alternatives", "no alt"),
    (' aria-label="a square"', "", "pictures have alternatives", "no title or aria-label"),
    ("<h2 id=\"below\">Below</h2>", '<h3 id="below">Below</h3>', "headings in order", "skips a level"),
    ("<svg ", '<p id="twice">A</p><p id="twice">B</p><svg ', "no id twice", "twice"),
    ('<th scope="col">', "<th>", "tables have headers with scope", "without scope"),
    ('fill="#333">Drawn', 'fill="#aaa">Drawn', "contrast of 4.5, dark, phone", "Drawn"),
    ("</body>", "<table><tr><td>bare</td></tr></table></body>", "tables have headers with scope", "no header"),
    ('<div style="overflow-x:auto">', "<div>", "not wider than 390 px, light", "table"),
    ("</body>", '<img alt="far" src="http://example.invalid/far.png"></body>', "asks for nothing else, dark", "example.invalid"),
    ("</body>", '<p style="width:1400px">wide</p></body>', "not wider than 1280 px, dark", "wide"),
    ("</body>", "<script>1</script></body>", "no script", "script"),
]


def main():
    with tempfile.TemporaryDirectory() as folder:
        path = os.path.join(folder, "page.html")
        with open(os.path.join(folder, "beside.html"), "w", encoding="utf-8") as beside:
            beside.write('<p id="there">There.</p>')
        with open(path, "w", encoding="utf-8") as page:
            page.write(SOUND)
        count, failed = check_page.report(check_page.check(path, no_script=True), "a sound page")
        spoilt = SOUND
        for before, after, _, _ in DEFECTS:
            assert before in spoilt, before
            spoilt = spoilt.replace(before, after, 1)
        with open(path, "w", encoding="utf-8") as page:
            page.write(spoilt)
        found = dict(check_page.check(path, no_script=True))
        for _, after, what, word in DEFECTS:
            seen = any(word in defect for defect in found[what])
            count, more = check_page.report([(f"{what}: {word}", [] if seen else [f"not found: {after}", *found[what]])], "a seeded defect", count)
            failed += more
    print(f"1..{count}")
    return failed > 0


if __name__ == "__main__":
    sys.exit(main())
