# SPDX-License-Identifier: GPL-3.0-or-later
# The module in stock lua5.4 (in the program where the build has sanitizers, and so no module): it ends without a crash after parallel
# work, answers Ctrl-C between blocks, writes no global.
. tests/program/tap.sh
build=$PWD/${LACUNA_BUILD:?}
if test -e "$build/lacuna.so"; then host=${LUA:-lua5.4} stopped='*interrupted!*'; else host=${LACUNA:?} stopped='*interrupted*'; fi
export LUA_PATH=';;' LUA_CPATH="$build/?.so;;"
cd "$scratch" || exit 1

cat >parallel.lua <<'END'
local lac = require "lacuna"
lac.settings { draws = 1000000, threads = 4 }
local c = lac.case { distance = "156 ± 3 pc", rim_radius = "0.3 ± 0.05 au" }
local mean = lac.mean(c.rim_radius_angle):value "mas"
if arg[1] == "exit" then os.exit(0) elseif arg[1] == "close" then os.exit(0, true) elseif arg[1] == "error" then error("an invented error", 0) end
c.rim_radius_angle:value "mas"
END
for way in end exit close; do
  failures=0
  for _ in 1 2 3 4 5 6; do "$host" parallel.lua $way >out 2>&1 || failures=$((failures + 1)); done
  result $failures "no crash at exit after parallel work ($way)"
done
try "$host" parallel.lua error
want "an uncaught error ends with status 1" 1 "" "*an invented error*"

# Ctrl-C after a second, while 1e10 draws are folded: it has to end in a few seconds more, with the host's own words.
interrupted() { # name, code
  printf 'local lac = require "lacuna"\nlac.settings{draws = 10000000000}\n%s\n' "$2" >long.lua
  # A job in the background of a shell ignores Ctrl-C from its start: python sets it back.
  try timeout -k 1 20 python3 -c '
import signal, subprocess, sys, time
child = subprocess.Popen(sys.argv[1:], preexec_fn=lambda: signal.signal(signal.SIGINT, signal.SIG_DFL))
time.sleep(1)
begun = time.monotonic()
child.send_signal(signal.SIGINT)
status = child.wait()
print("ended in time" if time.monotonic() - begun < 3 else "late")
sys.exit(0 if status in (1, -signal.SIGINT) else 9)' "$host" long.lua
  want "$1" 0 "ended in time" "$stopped"
}
interrupted "Ctrl-C ends a fold" 'return lac.mean(lac.sqrt(lac.quantity "1 ± 0.1"))'
interrupted "Ctrl-C ends quantiles" 'return lac.median(lac.quantity "1 ± 0.1")'
interrupted "Ctrl-C ends a computation in a coroutine" 'return coroutine.wrap(function() return lac.mean(lac.quantity "1 ± 0.1") end)()'
interrupted "Ctrl-C ends a computation of a row in Lua" '
lac.settings { draws = 40000000 }
lac.quantity { name = "slow", unit = "au", meaning = "invented" }
lac.relation { gives = "slow", by = "loop", from = { "rim_radius" }, function(r) local x for i = 1, 3e6 do x = i end return r end }
return lac.mean(lac.case { rim_radius = "1 ± 0.1 au" }.slow)'

# A host may have set a locale in which a half is written 0,5: texts are read all the same, and no file gets a comma.
printf 'local lac = require "lacuna"\nassert(os.setlocale "de_DE.UTF-8")\nprint(4 * lac.quantity "0.5 au" == lac.quantity "2 au")
lac.study{targets = {{name = "a", distance = "156.5 pc"}}, ask = {"parallax"}, csv = "comma.csv"}' >comma.lua
if localedef -i de_DE -f UTF-8 "$scratch/de_DE.UTF-8" >/dev/null 2>&1 && LOCPATH=$scratch "$host" -e 'assert(os.setlocale "de_DE.UTF-8")' 2>/dev/null; then
  try env LOCPATH="$scratch" "$host" comma.lua
  want "a locale with a decimal comma" 1 "true" '*comma.lua:4: comma.csv: the locale that is set would write numbers with "," for the decimal point; os.setlocale("C", "numeric") sets the point*'
  test ! -e comma.csv
  result $? "no file with decimal commas"
  try env LOCPATH="$scratch" LC_ALL=de_DE.UTF-8 "$build/lacuna" -e '0.5 * quantity "3.5 au"'
  want "the program takes no decimal comma from its environment" 0 "1.75 au" ""
else
  for what in "a locale with a decimal comma" "no file with decimal commas" "the program with one"; do result 0 "$what # SKIP there is none"; done
fi

if test -e "$build/lacuna.so"; then
  try "$host" -e 'local before = {} for k in pairs(_G) do before[k] = true end require "lacuna" for k in pairs(_G) do if not before[k] then print(k) end end'
  want "require writes no global" 0 "" ""
fi

finish
