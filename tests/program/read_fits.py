# SPDX-License-Identifier: GPL-3.0-or-later
"""Reads the binary table of a FITS file after the FITS standard 4.0 (Pence et al. 2010, A&A 524, A42, and its edition of 2018), with nothing but
Python's standard library, and compares it with the CSV file of the same table: python3 tests/program/read_fits.py TABLE.fits TABLE.csv
Prints TAP."""
import csv
import math
import re
import struct
import sys

BLOCK, CARD = 2880, 80


def value_of(text):
    """The value in a card behind "= ": a text (its quotes doubled inside, blanks at its end without meaning), a logical or a number."""
    text = text.strip()
    quoted = re.match(r"'((?:[^']|'')*)'", text)
    if quoted:
        return quoted.group(1).replace("''", "'").rstrip(" ")
    text = text.split("/", 1)[0].strip()
    if text in ("T", "F"):
        return text == "T"
    return float(text) if re.search(r"[.EeD]", text) else int(text)


def read_header(data, at):
    """Cards up to END: (keywords, where the data begin). A text that ends in & goes on in CONTINUE cards (sect. 4.2.1.2)."""
    keys, order, last = {}, [], None
    while True:
        card = data[at:at + CARD].decode("ascii")
        assert len(card) == CARD and all(32 <= ord(c) < 127 for c in card), "a card of printable ASCII"
        at += CARD
        name = card[:8].rstrip(" ")
        if name == "END":
            assert not card[3:].strip()
            break
        if name == "CONTINUE" and last and isinstance(keys[last], str) and keys[last].endswith("&"):
            keys[last] = keys[last][:-1] + value_of(card[8:])
        elif card[8:10] == "= ":
            assert name not in keys, name + " twice"
            keys[name] = value_of(card[10:])
            order.append(name)
            last = name
        else:
            assert name in ("COMMENT", "HISTORY", ""), "an unknown card " + card
    return keys, order, -(-at // BLOCK) * BLOCK


def ones_complement_sum(data):
    total = sum(struct.unpack(f">{len(data) // 4}I", data))
    while total >> 32:
        total = (total & 0xFFFFFFFF) + (total >> 32)
    return total


def read_table(data, keys, begin):
    """The columns by name: lists of texts or numbers."""
    width, rows, columns, offset = keys["NAXIS1"], keys["NAXIS2"], {}, 0
    for i in range(1, keys["TFIELDS"] + 1):
        count, kind = re.fullmatch(r"(\d*)([AD])", keys[f"TFORM{i}"]).groups()
        size = int(count or 1) * {"A": 1, "D": 8}[kind]
        cells = [data[begin + row * width + offset:][:size] for row in range(rows)]
        columns[keys[f"TTYPE{i}"]] = [cell.split(b"\0")[0].decode("ascii").rstrip(" ") if kind == "A" else struct.unpack(">d", cell)[0] for cell in cells]
        offset += size
    assert offset == width, "the columns' widths make the row's"
    return columns


def column_name(header):
    return re.sub(r"[^0-9A-Za-z]+", "_", re.sub(r" \[[^\]]*\]$", "", header)).strip("_")


def compare(columns, keys, path):
    """What differs from the CSV file: columns, units, texts, numbers, NaN for what is blank."""
    with open(path, encoding="utf-8", newline="") as file:
        header, *lines = list(csv.reader(file))
    if [column_name(one) for one in header] != list(columns):
        return [f"columns {list(columns)}"]
    defects = []
    for i, (one, cells) in enumerate(zip(header, columns.values())):
        unit = re.search(r" \[([^\]]*)\]$", one)
        wanted = re.sub(r"\bau\b", "AU", unit.group(1)) if unit else None  # as the FITS standard's table of further units has it (from memory)
        if keys.get(f"TUNIT{i + 1}") != wanted:
            defects.append(f"unit of {one}: {keys.get(f'TUNIT{i + 1}')}")
        for line, cell in zip(lines, cells):
            text = line[i]
            same = text == cell if isinstance(cell, str) else math.isnan(cell) if text == "" else float(text) == cell
            if not same:
                defects.append(f"{line[0]}, {one}: {text} in CSV, {cell} in FITS")
        if len(lines) != len(cells):
            defects.append(f"{len(cells)} rows")
    return defects


def main():
    with open(sys.argv[1], "rb") as file:
        data = file.read()
    primary, order, at = read_header(data, 0)
    keys, table_order, begin = read_header(data, at)
    end = begin + -(-keys["NAXIS1"] * keys["NAXIS2"] // BLOCK) * BLOCK
    columns = read_table(data, keys, begin)
    checks = [
        ("whole blocks", len(data) == end),
        ("a primary header without data", order[:3] == ["SIMPLE", "BITPIX", "NAXIS"] and primary["SIMPLE"] is True and primary["NAXIS"] == 0),
        ("the mandatory keywords of a binary table, in order", table_order[:8] == ["XTENSION", "BITPIX", "NAXIS", "NAXIS1", "NAXIS2", "PCOUNT", "GCOUNT", "TFIELDS"]
         and keys["XTENSION"] == "BINTABLE" and (keys["BITPIX"], keys["NAXIS"], keys["PCOUNT"], keys["GCOUNT"]) == (8, 2, 0, 1)),
        ("its name", keys["EXTNAME"] == "STUDY"),
        ("column names of letters, digits and underscores, unlike whatever their case", len({name.lower() for name in columns}) == keys["TFIELDS"]
         and all(re.fullmatch(r"\w+", name, re.A) for name in columns)),
        ("a description of each column", all(len(keys.get(f"TCOMM{i}", "")) > 3 for i in range(1, keys["TFIELDS"] + 1))),
        ("DATASUM (appendix J)", int(keys["DATASUM"]) == ones_complement_sum(data[begin:end])),
        ("CHECKSUM: the extension sums to minus zero", ones_complement_sum(data[at:end]) == 0xFFFFFFFF),
    ]
    defects = compare(columns, keys, sys.argv[2])
    checks.append(("the CSV file's columns, units and numbers; NaN for what is blank", not defects and any(
        isinstance(cell, float) and math.isnan(cell) for cells in columns.values() for cell in cells)))
    for number, (what, good) in enumerate(checks, 1):
        print(f"{'ok' if good else 'not ok'} {number} - {what}")
    for defect in defects[:5]:
        print("# " + defect)
    return not all(good for _, good in checks)


if __name__ == "__main__":
    sys.exit(main())
