# SPDX-License-Identifier: GPL-3.0-or-later
# Reports from outside: the folder is whole and the same again, its hashes and its FITS file are read by other means, and what goes wrong is one
# clear line. Stars and instruments are invented.
. tests/program/tap.sh
lacuna=${LACUNA:?}
scripts=$PWD/scripts tests=$PWD/tests sources=$PWD/bindings
cd "$scratch" || exit 1
export SOURCE_DATE_EPOCH=1893456000 # 2030-01-01

try "$lacuna" "$scripts/demo_study.lua" --out demo
want "the demo's report" 0 "*" "*"
try sh -c 'cd demo && sha256sum --strict --quiet -c manifest.txt'
want "sha256sum finds every file of the manifest as it says" 0 "" ""
(cd demo && find . -type f ! -name manifest.txt | sed 's,^\./,,' | sort) >there
sed -n 's/^[0-9a-f]\{64\}  //p' demo/manifest.txt | sort >listed
cmp -s there listed
result $? "and the folder has no other file"
grep -q '^# date: 2030-01-01$' demo/manifest.txt && grep -q 'Lacuna [0-9.]*, 2030-01-01' demo/index.html
result $? "the date is that of SOURCE_DATE_EPOCH"
cmp -s demo/inputs/demo_study.lua "$scripts/demo_study.lua" && cmp -s demo/inputs/demo_stars.csv "$scripts/demo_stars.csv"
result $? "the study and its targets are in it"
host=$(uname -n)
grep -rqwIF -e "$host" "$sources" && host=$scratch # a host called by a word of ours tells nothing
! grep -rqwIF -e "$scratch" -e "$scripts" -e "$host" demo
result $? "no path of the machine and no host's name is"

for threads in 1 2; do
  try "$lacuna" --threads $threads "$scripts/demo_study.lua" --out again --force
  diff -r demo again >differs
  result $? "the same bytes again, on $threads threads"
done
rm -r again
command=$(sed -n 's/^# to make it again, in this folder: lacuna //p' demo/manifest.txt)
(cd demo && eval "'$lacuna' $command" >../said 2>&1) && diff -r demo again >differs
result $? "the manifest's command makes it again"
echo 'study { targets = { { name = "A", distance = arg[1] } }, ask = { "parallax" } }' >arguments.lua
"$lacuna" arguments.lua --out with '50 ± 2 pc' >/dev/null 2>&1
command=$(sed -n 's/^# to make it again, in this folder: lacuna //p' with/manifest.txt)
rm -r again
(cd with && eval "'$lacuna' $command" >../said 2>&1) && diff -r with again >differs
result $? "with the script's own arguments"
for part in 1 2 3; do "$lacuna" "$scripts/demo_study.lua" --shard $part/3 --out part$part >/dev/null 2>&1; done
"$lacuna" merge part1 part2 part3 --out merged >/dev/null 2>&1
diff -r demo merged >differs
result $? "parts put together make the same bytes"

try python3 "$tests/program/read_fits.py" demo/table.fits demo/table.csv
want "the FITS file, read after the standard" 0 "*ok 9*" ""
printf '%s\n' "$out" | sed -n '/^not ok/s/^/# /p'
mkdir without && echo none >without/libcfitsio.so.10
try env LD_LIBRARY_PATH="$PWD/without" "$lacuna" "$scripts/demo_study.lua" --out plain
want "without CFITSIO all else is written" 0 "*" "*"
test ! -e plain/table.fits && grep -q 'Left out: table.fits: libcfitsio.so.10 is missing' plain/index.html && (cd plain && sha256sum --quiet -c manifest.txt)
result $? "and it says so"

# A sweep from the command line. The demo's star Quillon A has a rim of 3.48 mas in the table: half a fringe spacing, lambda / 2 B, is as much at 49 m.
try "$lacuna" "$scripts/demo_study.lua" --out swept --only 'Quillon A' --set baseline='20 m:330 m:100'
want "a baseline that goes from 20 m to 330 m" 0 "*" "*left out: figure 1 *left out: figure 3 *"
tr '\n' ' ' <swept/feasibility.txt | grep -q 'Along the projected baseline, the rim is resolved by the array in half of the draws or more from 49 m for Quillon A[.]'
result $? "the draft says from where the rim is resolved"
grep -q 'Yes, in half of draws or more, from or up to a value of the projected baseline: 1 of 1</dt><dd>Quillon A (from 49 m)' swept/index.html
result $? "and so does the page"

sed 's/title = "The rim of one star/target = "Tarn 12", &/' "$scripts/demo_study.lua" >named.lua
cp "$scripts/demo_stars.csv" .
try "$lacuna" named.lua --out only --only 'Quillon A'
want "a figure of a target that --only leaves out" 0 "*" '*left out: figure 2 "The rim of one star by baseline": no target "Tarn 12" in the study; there is Quillon A'
test "$(ls only/figures/*.csv | wc -l)" = 2 && grep -q 'Left out: figure 2' only/index.html && (cd only && sha256sum --quiet -c manifest.txt)
result $? "costs that figure alone"
sed 's/title = "The rim of one star/target = "Tarn 13", &/' "$scripts/demo_study.lua" >named.lua
try "$lacuna" named.lua --out never
want "a figure of a target that there is not" 1 "" 'lacuna: named.lua:*: figure: no target "Tarn 13" in the study'
test ! -e never
result $? "is found before anything is worked out"

cat >own.lua <<'END'
local s = study { targets = { { name = "a", distance = "100 pc" } }, ask = { "parallax" } }
print(s:report(arg[1]))
END
try "$lacuna" own.lua folder
want "a script asks for a report" 0 "*report in folder: * files; open folder/index.html" ""
try "$lacuna" own.lua folder
want "into a folder that has one already" 1 "*" "lacuna: own.lua:2: folder exists and is not empty; s:report(\"folder\", {force = true}) writes into it"

# What can't be written is one line, and leaves no manifest. (A limit of some blocks stands for a full disk; Linux's /sys for a folder that refuses.)
try sh -c 'trap "" XFSZ; ulimit -f 4; exec "$0" own.lua full' "$lacuna"
want "a disk that is full" 1 "*" "lacuna: own.lua:2: cannot write full/*: File too large"
test ! -e full/manifest.txt && test ! -e full/index.html && test -z "$(ls full | grep unfinished)"
result $? "leaves nothing under a final name that isn't whole"
try "$lacuna" own.lua no/such/folder
want "no such folder" 1 "*" "lacuna: own.lua:2: cannot make the folder no/such/folder: No such file or directory"
echo text >file
try "$lacuna" own.lua file
want "a file in the folder's place" 1 "*" "lacuna: own.lua:2: cannot make the folder file: *"

finish
