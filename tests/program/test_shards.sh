# SPDX-License-Identifier: GPL-3.0-or-later
# A study in parts: what shards, an interrupted and resumed run, and any number of processes leave is the same, byte for byte, as one run.
# Stars and instruments are invented.
. tests/program/tap.sh
lacuna=${LACUNA:?}
scripts=$PWD/scripts
cd "$scratch" || exit 1
unset COLUMNS

same() { # name, folder, folder, and what they printed
  diff -r "$2" "$3" >/dev/null && cmp -s "$4" "$5"
  result $? "$1"
}

"$lacuna" "$scripts/demo_study.lua" --out whole >whole.txt 2>whole.err
result $? "one run"
grep -qx '12 targets in [0-9.]* s, [0-9]* MB' whole.err
result $? "it says how many targets, how long it took, and its memory"
"$lacuna" --threads 1 "$scripts/demo_study.lua" --out alone >alone.txt 2>/dev/null
same "in one process" whole alone whole.txt alone.txt

if command -v parallel >/dev/null; then
  mkdir -p home # where it keeps what it remembers
  HOME=$PWD/home parallel "$lacuna" "$scripts/demo_study.lua" --out part{} --shard {}/4 ::: 1 2 3 4 >parts.txt 2>/dev/null </dev/null
  result $? "four shards by GNU parallel"
  test ! -s parts.txt && test "$(ls part3)" = records
  result $? "a part holds its records, and prints no table"
  "$lacuna" merge part1 part2 part3 part4 --out merged >merged.txt 2>/dev/null
  same "merged" whole merged whole.txt merged.txt
  try "$lacuna" merge part4 part1 part2 --out lacking
  want "a part is missing" 1 "" 'lacuna: part4: there is no record of "Quillon A" and 2 more; run the part that is to hold it again, with --resume'
  test ! -e lacking
  result $? "and no folder is begun"
  try "$lacuna" merge part1 part2 part1 --out twice
  want "a part twice" 1 "" 'lacuna: merge: both part1 and part1 hold "Marrow 3"'
  "$lacuna" --seed 2 "$scripts/demo_study.lua" --out other --shard 1/4 2>/dev/null
  try "$lacuna" merge part2 other --out mixed
  want "parts of different runs" 1 "" "lacuna: merge: part2 and other don't belong together: seed was 0 in the first, is 2 in the other"
else
  for what in "four shards by GNU parallel" "merged"; do result 0 "$what # SKIP there is no parallel"; done
fi

try "$lacuna" merge --out nothing
want "merge without folders" 1 "" "lacuna: merge wants the parts' folders: lacuna merge DIR... --out DIR"
try "$lacuna" merge whole
want "merge without --out" 1 "" "lacuna: merge wants --out DIR, a folder for the whole"
mkdir empty
try "$lacuna" merge empty --out nothing
want "merge of a folder that is none" 1 "" "lacuna: merge: empty/records: No such file or directory"

# A study that stops in the middle until there is a file `go`, so that it can be interrupted there.
cat >slow.lua <<'END'
local targets = {}
for i = 1, 60 do targets[i] = { name = "star " .. i, distance = 100 + i .. " pc", stellar_mass = "1.2 Msun", stellar_luminosity = "2 ± 0.2 Lsun" } end
quantity { name = "patience", unit = "pc", meaning = "what a slow relation gives" }
local function is_there(path)
  local file = io.open(path)
  return file and file:close()
end
relation { gives = "patience", by = "waiting", from = { "distance" }, source = "definition", function(distance)
  while highest(distance):value "pc" > 120.5 and not is_there "go" do os.execute "sleep 0.1" end
  return distance
end }
study { targets = targets, ask = { "patience", "sublimation_radius" } }
END
touch go
"$lacuna" slow.lua --draws 100 --out once >once.txt 2>once.err
result $? "a study of sixty targets"
rm go
for signal in INT TERM; do
  rm -rf stopped
  "$lacuna" slow.lua --draws 100 --out stopped >/dev/null 2>stopped.err &
  program=$!
  tries=0 # until twenty records are there, for half a minute at most
  while ! grep -qs 'star 20' stopped/records && test $tries -lt 300; do sleep 0.1; tries=$((tries + 1)); done
  kill -$signal $program
  wait $program
  test $? != 0 && ! grep -q 'star 60' stopped/records && test ! -e stopped/table.csv
  result $? "stopped by SIG$signal in the middle"
  # The last record may be cut anywhere.
  size=$(wc -c <stopped/records)
  head -c $((size - 40)) stopped/records >cut && cp cut stopped/records
  try "$lacuna" slow.lua --draws 100 --out stopped
  want "an existing folder is kept, after SIG$signal" 1 "" "lacuna: stopped exists and is not empty; --resume goes on with a run that was stopped, --force starts anew"
  cmp -s cut stopped/records
  result $? "nothing in it has changed"
  touch go
  "$lacuna" slow.lua --draws 100 --out stopped --resume >stopped.txt 2>/dev/null
  same "resumed after SIG$signal" once stopped once.txt stopped.txt
  rm go
done
touch go

# A number that was changed on the disk gets into no table: that record, and those behind it, are worked out anew.
LC_ALL=C sed 's/n0x1\.9/n0x1.8/' once/records >damaged && cp damaged stopped/records
! cmp -s damaged once/records && "$lacuna" slow.lua --draws 100 --out stopped --resume >stopped.txt 2>/dev/null
same "resumed from damaged records" once stopped once.txt stopped.txt
printf 'lacuna records 1\n17 0123456789abcdef\nno record, surely\n' >stopped/records
try "$lacuna" slow.lua --draws 100 --out stopped --resume
want "a damaged head" 1 "" "lacuna: --resume finds nothing to go on with: stopped/records: it is cut or damaged before its first record"
cp once/records stopped/records

try "$lacuna" slow.lua --draws 200 --out stopped --resume
want "resumed with other settings" 1 "" "lacuna: stopped was made otherwise: draws was 100 there, is 200 here"
try "$lacuna" slow.lua --draws 100 --set 'stellar_mass=2 Msun' --out stopped --resume
want "resumed with other givens" 1 "" "lacuna: stopped was made otherwise: set was none there, is 'stellar_mass=2 Msun' here"
echo '-- changed' >>slow.lua
try "$lacuna" slow.lua --draws 100 --out stopped --resume
want "resumed with another study" 1 "" "lacuna: stopped was made otherwise: the study file isn't the same"
try "$lacuna" slow.lua --draws 100 --out stopped --force
want "--force starts anew" 0 "*star 60*" "60 targets in *"
mkdir new && touch new/notes
try "$lacuna" slow.lua --out new --resume
want "nothing to go on with" 1 "" "lacuna: --resume finds nothing to go on with: new/records: No such file or directory"

finish
