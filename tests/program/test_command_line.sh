# SPDX-License-Identifier: GPL-3.0-or-later
# What the command line asks of a study: --set, --only, --out, and what is said where that can't be. Stars and instruments are invented.
. tests/program/tap.sh
lacuna=${LACUNA:?}
scripts=$PWD/scripts
cd "$scratch" || exit 1
unset COLUMNS

cat >study.lua <<'END'
study {
  targets = { { name = "Marrow 3", distance = "100 pc" }, { name = "Tarn 12", distance = "50 ± 1 pc" }, { name = "Ostrel 5", parallax = "2 mas" } },
  given = { wavelength = "1.65 um", projected_baseline = "100 m", rim_radius = "0.2 au" },
  ask = { "rim_size_angle", "rim_resolved_by_array" },
  variants = { { name = "fringe", using = { array_resolution = "fringe" }, ask = { "array_resolution" } } },
  csv = "out.csv",
}
END

# By the parsec's definition 0.4 au at 120 pc are 3.333 mas; what is set goes before targets, givens and variants.
try "$lacuna" study.lua --set 'rim_radius=0.1 au' --set 'wavelength = 2.2 um' --only 'Marrow 3' --set baseline='200 m'
want "--set and --only" 0 "*
Marrow 3 *2 *yes *2.269*Set on the command line
  wavelength = 2.2 µm, rim_radius = 0.1 au, projected_baseline = 200 m; before what the study says*" ""
case $out in *Tarn* | *Ostrel* | *"100 m"* | *1.65*) false ;; esac
result $? "no other target, and nothing that was replaced"
try "$lacuna" --set 'distance=120 ± 2 pc' study.lua --only "Tarn 12"
want "an error bar" 0 "*Tarn 12 *3.33* ± 0.05* *distance = 120 ± 2 pc;*" ""

"$lacuna" study.lua --set 'baseline=50 m:250 m:3' --only 'Marrow 3' >swept
cmp -s out.csv - <<'END'
name,projected_baseline [m],rim_size_angle [mas],rim_size_angle upper error [mas],rim_size_angle lower error [mas],rim_resolved_by_array verdict,rim_resolved_by_array share,fringe array_resolution [mas],fringe array_resolution upper error [mas],fringe array_resolution lower error [mas]
Marrow 3,50,4,,,yes,1,6.806739,,
Marrow 3,150,4,,,yes,1,2.268913,,
Marrow 3,250,4,,,yes,1,1.361348,,
END
result $? "a sweep: a line for each point" # 1.65 um over the baseline, 206264806.247 mas a radian
grep -q '^Marrow 3 .* 1.361 … 6.807$' swept && grep -q 'projected_baseline from 50 to 250 m, 3 points' swept
result $? "the table has the range"

bad() { # name, status, error, options...
  name=$1 wanted=$2 message=$3
  shift 3
  try "$lacuna" study.lua "$@"
  want "$name" "$wanted" "" "$message"
}
bad "a name misspelt" 1 "lacuna: --set: unknown name 'distnace'; did you mean distance*" --set 'distnace=5 pc'
bad "a wrong dimension" 1 "lacuna: --set: distance wants a length (in pc); got 5 K" --set 'distance=5 K'
bad "a value that can't be read" 1 "lacuna: --set: *" --set 'distance=far'
bad "set twice" 1 "lacuna: --set: projected_baseline is set twice" --set baseline='5 m' --set projected_baseline='6 m'
bad "no value" 2 'lacuna: --set wants NAME=VALUE, like --set "distance=120 pc"; got "distance"' --set distance
bad "no such target" 1 "lacuna: --only: there is no target 'Tarn'; the nearest are Tarn 12, *" --only Tarn
bad "not a share" 2 'lacuna: --shard wants K/N with K from 1 to N, like 3/16; got "5/4"' --out o --shard 5/4
bad "a share of nothing" 2 "lacuna: --shard goes with --out DIR" --shard 1/4
bad "resume what?" 2 "lacuna: --resume goes with --out DIR" --resume
bad "both at once" 2 "lacuna: --resume goes on with what is there, --force starts anew: one of them" --out o --resume --force
for option in set only out; do
  try "$lacuna" --$option a=b -e 'print(1)'
  want "--$option without a study" 1 1 "lacuna: no study read --$option"
done
cat study.lua study.lua >two.lua
try "$lacuna" two.lua --out two
want "two studies and one folder" 1 "*" "*lacuna: two.lua:8: study: --out holds one study, and this is a second one"
try sh -c 'cat study.lua | "$0" --out o -' "$lacuna"
want "a study that is nowhere" 1 "" "lacuna: --out wants a study in a file; its text is kept with the results"

# Folders. (As root every folder is writable: one in a folder that is none stands for it.)
touch file
bad "a file in its place" 1 "lacuna: cannot make the folder file: File exists" --out file
bad "a folder in no folder" 1 "lacuna: cannot make the folder file/inside: Not a directory" --out file/inside
mkdir full && touch full/own
bad "a folder that isn't empty" 1 "lacuna: full exists and is not empty; *" --out full
test "$(ls full)" = own
result $? "it is as it was"
try "$lacuna" study.lua --out full --force
want "but with --force" 0 "*" "3 targets in *"
test -f full/own && test -f full/records
result $? "what else is there stays"

# A disk that is full while the targets are worked on: a limit of one block for a file stands for it.
cat >many.lua <<'END'
local targets = {}
for i = 1, 80 do targets[i] = { name = "star " .. i, distance = "100 pc" } end
study { targets = targets, ask = { "parallax" } }
END
try sh -c 'trap "" XFSZ; ulimit -f 8; exec "$0" many.lua --out small' "$lacuna"
want "a disk that is full" 1 "" "lacuna: cannot write small/records: File too large; what is done is kept there, and --resume goes on"
try "$lacuna" many.lua --out small --resume
want "goes on when there is room" 0 "*star 80*" "80 targets in *"
"$lacuna" many.lua --out roomy >/dev/null 2>&1
diff -r small roomy >/dev/null
result $? "to the same"

# Targets that fail.
printf 'name,distance [pc],parallax [mas]\nTarn 12,100,10\nMarrow 3,100,11\n' >stars.csv
echo 'study { targets = "stars.csv", ask = { "stellar_angular_diameter", "distance" } }' >fails.lua
try "$lacuna" fails.lua --out failed
want "a target that fails" 1 "*Tarn 12 *100*Failed
  Marrow 3: stars.csv:3: contradictory givens: *" "2 targets in *
lacuna: 1 target failed; the table says why"
test -f failed/table.csv
result $? "its report is there"
try "$lacuna" fails.lua --only "Marrow 3" --out all_failed
want "all that fail" 1 "" "lacuna: stars.csv:3: contradictory givens: *"

finish
