# SPDX-License-Identifier: GPL-3.0-or-later
# Studies from outside: the demo and the short scripts run, bad input is one line and status 1, output files are whole or absent, and
# the same seed gives the same output on any number of threads.
. tests/program/tap.sh
lacuna=${LACUNA:?}
scripts=$PWD/scripts
cd "$scratch" || exit 1
unset COLUMNS

try "$lacuna" "$scripts/demo_study.lua"
want "the demo study runs" 0 "Sublimation rims*planet at 30 au*Why not*Recipes*kanagawa_2016: Kanagawa*detected is not assessed*" ""
printf '%s\n' "$out" >first
sed '/^Not derived/,$d' first >tables
lines=0 shown=0
IFS='
'
for star in $(sed '1d; s/,.*//' "$scripts/demo_stars.csv"); do
  lines=$((lines + 1))
  grep -c "^$star  " tables | grep -qx '[23]' && shown=$((shown + 1))
done
unset IFS
test "$lines $shown" = "12 12"
result $? "it shows each of the twelve stars, one line a table"
! LC_ALL=C.UTF-8 grep -qE '^.{101}' first
result $? "no line is wider than 100 columns where no terminal says otherwise"

COLUMNS=70 "$lacuna" "$scripts/demo_study.lua" >narrow
! LC_ALL=C.UTF-8 grep -qE '^.{71}' narrow && test "$(grep -c '^Tarn 12  ' narrow)" = 4
result $? "a narrower terminal gets more tables, not broken lines"

for threads in 1 2; do
  "$lacuna" --threads $threads "$scripts/demo_study.lua" >again 2>&1
  cmp -s first again
  result $? "the same output again, with --threads $threads"
done
"$lacuna" --seed 1 "$scripts/demo_study.lua" >again 2>&1
! cmp -s first again
result $? "another seed, other draws"

for script in what_if recipes_and_alpha; do
  try "$lacuna" "$scripts/$script.lua"
  want "$script.lua runs" 0 "*of draws*" ""
done

# One line, status 1, and no output file.
bad() { # name, script, error
  printf '%s\n' "$2" >bad.lua
  rm -f out.csv out.tex
  try "$lacuna" bad.lua
  want "$1" 1 "" "$3"
  test "$(wc -l <"$scratch/err")" = 1 && test ! -e out.csv && test ! -e out.tex
  result $? "$1: one line, no file"
}
file() { # name, text of the file, error
  printf "$2" >stars.csv
  bad "$1" 'study { targets = "stars.csv", ask = { "parallax" }, csv = "out.csv", latex = "out.tex" }' "$3"
}

bad "a missing file" 'study { targets = "nowhere.csv", ask = { "parallax" }, csv = "out.csv" }' "lacuna: cannot open nowhere.csv: No such file or directory"
bad "a folder" 'study { targets = ".", ask = { "parallax" }, csv = "out.csv" }' "lacuna: cannot read .: Is a directory"
bad "an empty list" 'study { targets = {}, ask = { "parallax" }, csv = "out.csv" }' "lacuna: bad.lua:1: study: the list of targets is empty"
bad "an unknown name" 'study { targets = {{ name = "a" }}, ask = { "rim_radios" }, csv = "out.csv" }' "lacuna: bad.lua:1: study: ask: unknown name 'rim_radios'; did you mean rim_radius*"
bad "nothing derivable" 'study { targets = {{ name = "a", distance = "15 pc" }}, ask = { "rim_radius" }, csv = "out.csv" }' \
  "lacuna: bad.lua:1: study: nothing that is asked can be derived for any target: rim_radius of a, for want of *"
file "no targets" 'name,distance [pc]\n' 'lacuna: stars.csv: no targets; the file has a header line alone'
file "malformed CSV" 'name,distance [pc]\nMarrow 3,1"5\n' 'lacuna: stars.csv:2:11: malformed CSV: a quotation mark out of place*'
file "a malformed number" 'name,distance [pc]\nMarrow 3,1o5\n' 'lacuna: stars.csv:2: column "distance \[pc\]": can'"'"'t read "1o5"; write a number*'
file "a wrong dimension" 'name,distance [K]\nMarrow 3,15\n' 'lacuna: stars.csv:1: column "distance \[K\]": distance wants a length*'
file "out of range" 'name,distance [pc]\nMarrow 3,0\n' 'lacuna: stars.csv:2: column "distance \[pc\]": distance must be > 0; got 0 pc'
file "a target twice" 'name,distance [pc]\na,15\na,16\n' 'lacuna: stars.csv:3: column "name": there is a target "a" already, in line 2'
file "contradictory givens" 'name,distance [pc],parallax [mas]\na,100,11\n' 'lacuna: stars.csv:2: contradictory givens: *'

# A list of targets beside the script is found from any folder.
mkdir elsewhere && printf 'name,distance [pc]\nMarrow 3,100\n' >elsewhere/stars.csv
printf 'study { targets = "stars.csv", ask = { "parallax" }, csv = "parallax.csv" }\n' >elsewhere/study.lua
rm -f stars.csv
try "$lacuna" elsewhere/study.lua
want "a file beside the script" 0 "*Marrow 3*10*" ""
try cat parallax.csv
want "the CSV file stands in the current folder" 0 "name,parallax \[mas\],parallax upper error \[mas\],parallax lower error \[mas\]
Marrow 3,10,," ""

# A file that can't be written to its end leaves the old one whole, and no other. (A limit of 512 bytes stands for a full disk.)
mkdir small && printf 'old' >small/out.csv
printf 'local t = {} for i = 1, 400 do t[i] = { name = "star " .. i, distance = "100 pc" } end\nstudy { targets = t, ask = { "parallax" }, csv = "small/out.csv" }\n' >full.lua
try sh -c 'trap "" XFSZ; ulimit -f 1; exec "$0" full.lua' "$lacuna"
want "a disk that is full" 1 "" "lacuna: full.lua:2: cannot write small/out.csv: File too large"
test "$(cat small/out.csv)" = old && test "$(ls small | wc -l)" = 1
result $? "the old file stays whole"

# A device is written to, never replaced; nor is a link.
ln -s small/out.csv link.csv
for name in /dev/stdout /dev/full link.csv; do
  printf 'study { targets = {{ name = "a", distance = "100 pc" }}, ask = { "parallax" }, csv = "%s" }\n' "$name" >odd.lua
  try "$lacuna" odd.lua
  case $name in
    /dev/stdout) want "a CSV file on standard output" 0 "name,parallax \[mas\]*" "" ;;
    /dev/full) want "a device that is full" 1 "" "lacuna: odd.lua:1: cannot write /dev/full: No space left on device" ;;
    link.csv) want "a link" 0 "*" "" ;;
  esac
done
test -c /dev/full && test -L link.csv && grep -q '^a,10' small/out.csv
result $? "devices and links stay what they are"

# What was for one's own eyes stays so; a new file has the rights that the shell's mask leaves, and nothing is left beside it.
chmod 640 small/out.csv && printf 'study { targets = {{ name = "a", distance = "100 pc" }}, ask = { "parallax" }, csv = arg[1] }\n' >written.lua
for name in small/out.csv small/new.csv; do try sh -c 'umask 027; "$0" written.lua "$1"; umask 077; "$0" written.lua "$1".own' "$lacuna" "$name"; done
test "$(stat -c '%a %n' small/* | tr '\n' ' ')" = "640 small/new.csv 600 small/new.csv.own 640 small/out.csv 600 small/out.csv.own "
result $? "rights of a file that was there, and of a new one"
chmod 600 small/new.csv
try sh -c 'umask 022; "$0" written.lua small/new.csv' "$lacuna"
test "$(stat -c %a small/new.csv)" = 600
result $? "a private file stays private"

finish
