# SPDX-License-Identifier: GPL-3.0-or-later
"""Checks HTML pages in headless Chromium, and prints TAP: python3 tests/page/check_page.py [--name NAME] [--no-script] PAGE.html...

What is checked: the page asks for nothing but itself; links and anchors lead somewhere (files beside it included); pictures have
alternatives; headings are in order; ids are there once; tables have headers with scope; language and title are there; text has a contrast of
4.5 to what is behind it (WCAG 2.2, success criterion 1.4.3), in light and in dark; nothing is wider than a phone of 390 px or a desktop of
1280 px; with --no-script, that there is none.

The page is served from its folder on the loopback interface, inside frames of these widths, and measured by a script in the frames'
parent, whose result Chromium prints as text. Python's standard library and Debian's chromium are all it takes.
"""
import argparse
import functools
import html
import http.server
import json
import os
import re
import subprocess
import sys
import tempfile
import threading
import urllib.parse

WIDTHS = {"phone": 390, "desktop": 1280}
SCHEMES = {"light": 1, "dark": 0}  # of Chromium's setting preferredColorScheme
CONTRAST = 4.5
MEASURE = os.path.join(os.path.dirname(os.path.abspath(__file__)), "measure.js")

PARENT = """<!DOCTYPE html><html style="color-scheme:%s"><head><meta charset="utf-8"><link rel="icon" href="data:,"></head><body style="margin:0">
%s<pre id="found"></pre><script>const LEAST = %g;\n%s</script></body></html>"""
FRAME = '<iframe id="%s" style="border:0;width:%dpx;height:900px" src="%s"></iframe>\n'


class Handler(http.server.SimpleHTTPRequestHandler):
    """Serves the page's folder and the measuring page, and remembers what was asked for."""

    asked, measuring = [], ""

    def do_GET(self):
        path = urllib.parse.urlsplit(self.path).path
        if path == "/measuring-page":
            body = self.measuring.encode()
            self.send_response(200)
            self.send_header("Content-Type", "text/html; charset=utf-8")
            self.send_header("Content-Length", str(len(body)))
            self.end_headers()
            self.wfile.write(body)
            return
        self.asked.append(path)
        super().do_GET()

    def log_message(self, *_):
        pass


def parent_page(page, scheme):
    source = html.escape("/" + urllib.parse.quote(page))
    with open(MEASURE, encoding="utf-8") as script:
        return PARENT % (scheme, "".join(FRAME % (device, width, source) for device, width in WIDTHS.items()), CONTRAST, script.read())


def run_chromium(port, scheme):
    with tempfile.TemporaryDirectory() as profile:
        return subprocess.run(
            ["chromium", "--headless", "--no-sandbox", "--disable-gpu", "--disable-dev-shm-usage", "--no-first-run", "--virtual-time-budget=20000",
             f"--user-data-dir={profile}", f"--blink-settings=preferredColorScheme={SCHEMES[scheme]}", f"--window-size={max(WIDTHS.values())},1900",
             "--host-resolver-rules=MAP * ~NOTFOUND, EXCLUDE 127.0.0.1", "--dump-dom", f"http://127.0.0.1:{port}/measuring-page"],
            capture_output=True, text=True, timeout=200, check=False)


def measured(folder, page, scheme):
    """What the script found in the page in a colour scheme, by device; and what was asked of the server besides the page."""
    handler = type("PageHandler", (Handler,), {"asked": [], "measuring": parent_page(page, scheme)})
    server = http.server.ThreadingHTTPServer(("127.0.0.1", 0), functools.partial(handler, directory=folder))
    threading.Thread(target=server.serve_forever, daemon=True).start()
    try:
        dump = run_chromium(server.server_port, scheme)
    finally:
        server.shutdown()
        server.server_close()
    found = re.search(r'<pre id="found">(.*?)</pre>', dump.stdout, re.S)
    result = json.loads(html.unescape(found.group(1))) if found and found.group(1) else {}
    if set(result) != set(WIDTHS):
        raise RuntimeError("Chromium did not measure the page: " + dump.stderr[-500:])
    for one in result.values():
        if one["dark"] != (scheme == "dark"):
            raise RuntimeError("Chromium did not show the page in the colour scheme asked for")
    return result, [path for path in handler.asked if path.lstrip("/") != urllib.parse.quote(page)]


def broken_links(folder, page, links, ids):
    """Links within the page without their anchor, and links to files that aren't there."""
    for link in links:
        parts = urllib.parse.urlsplit(link)
        if parts.scheme:
            if parts.scheme not in ("http", "https", "mailto"):
                yield link
            continue
        name, anchor = urllib.parse.unquote(parts.path), urllib.parse.unquote(parts.fragment)
        path = os.path.join(folder, os.path.dirname(page), name) if name else os.path.join(folder, page)
        if not os.path.exists(path):
            yield link
        elif anchor and name:
            with open(path, encoding="utf-8", errors="replace") as other:
                if not re.search(r'\bid="%s"' % re.escape(html.escape(anchor)), other.read()):
                    yield link
        elif anchor and anchor not in ids:
            yield link


def check(path, no_script=False):
    """All checks of a page: a list of (what, list of defects)."""
    folder, page = os.path.split(os.path.abspath(path))
    first, results = None, []
    for scheme in SCHEMES:
        devices, asked = measured(folder, page, scheme)
        for device, found in devices.items():
            first = first or found
            results.append((f"contrast of {CONTRAST}, {scheme}, {device}", found["contrast"] + ([] if found["texts"] else ["no text at all"])))
            results.append((f"not wider than {WIDTHS[device]} px, {scheme}", found["wide"]))
            asked += found["asked"]
        results.append((f"asks for nothing else, {scheme}", sorted(set(asked))))
    results.append(("links and anchors", list(broken_links(folder, page, first["links"], set(first["ids"])))))
    results += [(what, first[key]) for key, what in (
        ("alternatives", "pictures have alternatives"), ("headings", "headings in order"), ("twice", "no id twice"),
        ("tables", "tables have headers with scope"), ("document", "language, title and viewport"))]
    if no_script:
        results.append(("no script", first["scripts"]))
    return results


def report(results, name, count=0):
    """Prints results as TAP, numbered on from count. Returned: the number of the last, and how many failed."""
    failed = 0
    for what, defects in results:
        count += 1
        failed += bool(defects)
        print(f"{'not ok' if defects else 'ok'} {count} - {name}: {what}")
        for defect in defects[:10]:
            print("# " + str(defect).replace("\n", " "))
        if len(defects) > 10:
            print(f"# and {len(defects) - 10} more")
    return count, failed


def main():
    parser = argparse.ArgumentParser(description=__doc__.split("\n", 1)[0])
    parser.add_argument("--name", help="what the pages are called in the results")
    parser.add_argument("pages", nargs="+")
    parser.add_argument("--no-script", action="store_true", help="a script in a page is a defect")
    arguments = parser.parse_args()
    count = failed = 0
    for path in arguments.pages:
        count, more = report(check(path, arguments.no_script), arguments.name or os.path.basename(path), count)
        failed += more
    print(f"1..{count}")
    return failed > 0


if __name__ == "__main__":
    sys.exit(main())
