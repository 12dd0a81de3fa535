#!/bin/sh
# SPDX-License-Identifier: GPL-3.0-or-later
# Figures as files: what gnuplot draws is valid, the same bytes come again, nothing in a name is run, and without gnuplot the data is still there.
# Stars and instruments are invented.
. tests/program/tap.sh
for program in gnuplot pdfinfo; do
  command -v $program >/dev/null || { echo "1..0 # SKIP there is no $program"; exit; }
done
lacuna=${LACUNA:?}
scripts=$PWD/scripts
cd "$scratch" || exit 1
unset COLUMNS SOURCE_DATE_EPOCH

cat >figures.lua <<'END'
local star = case {
  distance = "150 ± 5 pc", stellar_luminosity = "20 ± 3 Lsun", effective_temperature = "9000 K", inclination = "30 ± 5 deg", rim_height_ratio = 0.1,
  disc_position_angle = "40 deg", baseline_position_angle = "60 deg", stellar_flux_fraction = 0.4, halo_flux_fraction = 0, wavelength = "1.65 um", projected_baseline = "130 m",
}
local stars = study { targets = { { name = "Al'der `touch ran`", distance = "140 ± 4 pc", stellar_luminosity = "3 +1 -0.5 Lsun" },
  { name = 'Birch "$(touch ran)" <&> \\', distance = "160 pc", stellar_luminosity = "20 ± 3 Lsun" } }, given = { wavelength = "1.65 um", projected_baseline = "130 m" }, ask = { "rim_radius" } }
local folder = arg[1]
local list = {
  curve = figure { of = star, show = "rim_elements_by_array", along = { projected_baseline = sweep("20 m", "200 m", 30) } },
  share = figure { of = star, show = "rim_resolved_by_array", along = { projected_baseline = sweep.log("20 m", "200 m", 30) }, title = "it's `touch ran` <b>&amp;" },
  map = figure { of = star, show = "rim_resolved_by_array", along = { projected_baseline = sweep("60 m", "160 m", 15), wavelength = sweep("1.2 um", "2.4 um", 15) } },
  uneven = figure { of = star, show = "rim_elements_by_array", along = { projected_baseline = sweep { "60 m", "70 m", "160 m" }, wavelength = sweep("1.2 um", "2.4 um", 15) } },
  plane = figure { of = stars, show = "rim_radius", against = "stellar_luminosity", lines = { { show = function(c) return 0.5 * au end, label = "half an 'au'" } } },
  spectrum = figure { kind = "spectrum", of = star, bands = { "J", "H", "N" }, width = "double" },
  visibility = figure { kind = "visibility", of = star, each = { wavelength = { "1.65 um", "2.2 um" } } },
}
for name, f in pairs(list) do f:write(folder .. "/" .. name) end
END
kinds='curve share map uneven plane spectrum visibility'

mkdir one two
try "$lacuna" --draws 500 figures.lua one
want "figures of all kinds" 0 "*" ""
test "$(ls one | wc -l)" = 35 && test ! -e ran && test ! -e one/ran
result $? "five files each, and nothing in a name was run"

sleep 1
try env LC_ALL=de_DE.UTF-8 TERM=dumb GNUTERM=dumb "$lacuna" --draws 500 --threads 1 figures.lua two
diff -r one two >differences
result $? "the same bytes again, later, with another locale and terminal"
SOURCE_DATE_EPOCH=86400 "$lacuna" --draws 500 figures.lua two >/dev/null
case $(LC_ALL=C grep -a -o 'CreationDate[^)]*' two/curve.pdf) in *19700102000000*) ;; *) false ;; esac
result $? "SOURCE_DATE_EPOCH dates a PDF"

bad=''
for kind in $kinds; do pdfinfo one/$kind.pdf >info 2>&1 && grep -q '^Pages: *1$' info || bad="$bad $kind"; done
test -z "$bad"
result $? "PDF files of one page$bad"
# 86 mm is 243.8 points; 1016 pixels at 300 to the inch.
pdfinfo one/curve.pdf | grep -q 'Page size: *24[34]\(\.[0-9]*\)\? x 181'
result $? "a PDF is as wide as a column"
pdfinfo one/spectrum.pdf | grep -q 'Page size: *50[45]'
result $? "or as two"

python3 - $kinds >python.out 2>&1 <<'END'
import re, struct, sys, xml.etree.ElementTree as tree
seen = set()
for kind in sys.argv[1:]:
    text = open(f"one/{kind}.svg", encoding="utf-8").read()
    root = tree.fromstring(text)
    name = "{http://www.w3.org/2000/svg}"
    assert root.tag == name + "svg" and root.get("role") == "img", kind
    assert float(root.get("viewBox").split()[2]) > 0 and root.get("width").endswith("mm"), kind
    label = root.get("aria-labelledby").split()
    texts = {element.get("id"): element.text for element in root if element.get("id")}
    assert all(texts[i].strip() for i in label), kind
    ids = [element.get("id") for element in root.iter() if element.get("id")]
    assert len(ids) == len(set(ids)) and not seen & set(ids), (kind, "ids")
    seen |= set(ids)
    used = set(re.findall(r"""(?:href=['"]#|url\(#)([^'")]+)""", text))
    assert used <= set(ids), (kind, used - set(ids))
    assert "http" not in re.sub(r'xmlns(:\w+)?="[^"]*"', "", text), (kind, "refers to the network")
    with open(f"one/{kind}.png", "rb") as file:
        head = file.read(24)
    assert head[:8] == b"\x89PNG\r\n\x1a\n", kind
    width, height = struct.unpack(">II", head[16:24])
    assert width == (2102 if kind == "spectrum" else 1016) and 700 < height < 1400, (kind, width, height)
END
result $? "SVG files are well formed, with ids and names of their own; PNG files have 300 pixels to the inch"
sed 's/^/# /' python.out

head -n 1 one/map.csv | grep -qx 'wavelength \[um\],projected_baseline \[m\],rim_resolved_by_array share' && test "$(wc -l <one/map.csv)" = 226
result $? "a CSV file has units in its header and a line a point"
mkdir gp && cp one/curve.gp gp && (cd gp && gnuplot -d curve.gp) && test -s gp/curve.pdf
result $? "the script draws the figure by itself"

cat >show.lua <<'END'
local f = figure { of = case { rim_radius = "0.3 au", distance = "140 pc", wavelength = "1.65 um" }, show = "rim_elements_by_array", along = { projected_baseline = sweep("20 m", "200 m", 30) }, name = "shown" }
show(f)
END
try "$lacuna" show.lua
want "show of a figure without a terminal writes a file and says where" 0 "figure: rim elements by array along projected baseline: written to shown.png" ""
test -s shown.png
result $? "and the file is there"
try env COLUMNS=60 "$lacuna" show.lua
want "in columns it draws in block characters" 0 "rim elements by array along projected baseline
rim elements by array n_rim,arr*┤*projected baseline B*" ""

# Without gnuplot.
rm shown.png
mkdir three
try env PATH=/nonexistent "$lacuna" --draws 500 figures.lua three
want "without gnuplot" 0 "*" "lacuna: gnuplot can't be run: No such file or directory; no pictures, only data (.csv) and scripts (.gp) are written*"
test "$(ls three | wc -l)" = 14 && cmp -s one/map.csv three/map.csv && cmp -s one/map.gp three/map.gp
result $? "data and scripts are written all the same"
try env PATH=/nonexistent "$lacuna" show.lua
want "and show writes the data" 0 "figure: *: written to shown.csv as data, since gnuplot can't be run: No such file or directory" ""

# A gnuplot that fails, and one that hangs.
mkdir bin
printf '#!/bin/sh\ncat >/dev/null\necho "line 3: unknown terminal type" >&2\nexit 1\n' >bin/gnuplot
chmod +x bin/gnuplot
try env PATH="$PWD/bin:$PATH" "$lacuna" show.lua
want "a gnuplot that fails is quoted in one line" 0 "*since gnuplot failed: line 3: unknown terminal type" ""
printf '#!/bin/sh\nexit 0\n' >bin/gnuplot
try env PATH="$PWD/bin:$PATH" "$lacuna" show.lua
want "one that reads nothing does no harm" 0 "*since gnuplot failed: status 0" ""
printf '#!/bin/sh\necho $$ >pid\nexec sleep 1000\n' >bin/gnuplot
env PATH="$PWD/bin:$PATH" "$lacuna" show.lua >/dev/null 2>err &
process=$!
while ! test -s pid; do sleep 0.1; done
kill -INT $process
wait $process
status=$?
test $status != 0 && ! kill -0 "$(cat pid)" 2>/dev/null
result $? "an interrupt ends one that hangs, status $status"

try "$lacuna" -e 'figure{of = case{distance = "140 pc", rim_radius = "1 au"}, show = "rim_radius_angle", along = {distance = sweep("100 pc", "200 pc", 3)}}:write "nowhere/name"'
want "a folder that isn't there" 1 "" "lacuna: *cannot write nowhere/name.csv: No such file or directory"

finish
