# SPDX-License-Identifier: GPL-3.0-or-later
# The program from outside: what it prints, where, and with which exit status.
. tests/program/tap.sh
lacuna=${LACUNA:?}
cd "$scratch" || exit 1

cat >script.lua <<'END'
print(arg[0], arg[1], #arg, ...)
END
try "$lacuna" script.lua one two
want "a script gets its arguments" 0 "script.lua	one	2	one	two" ""

try "$lacuna" script.lua --mine x --help -e
want "options after the script that are none of the program's are the script's" 0 "script.lua	--mine	4	--mine	x	--help	-e" ""
try "$lacuna" script.lua a --seed 5 b --draws=100
want "the program's options may stand after the script" 0 "script.lua	a	2	a	b" ""
try "$lacuna" script.lua -- --seed 5
want "what follows -- is left to the script" 0 "script.lua	--seed	2	--seed	5" ""

printf '#!/usr/bin/env lacuna\nprint(6)' >first_line.lua
try "$lacuna" first_line.lua
want "a script's first line may name the program" 0 6 ""

try "$lacuna" -e ''
want "no code does nothing" 0 "" ""

try "$lacuna" -e '1 + 1'
want "-e prints an expression's value" 0 2 ""

try "$lacuna" -e 'x = 3 print(x, ...)' four
want "-e runs statements, with arguments" 0 "3	four" ""

try "$lacuna" -e 'for'
want "-e with half a statement" 1 "" "lacuna: -e:1: * near <eof>"

try "$lacuna" -e
want "-e without code" 2 "" "lacuna: -e wants code after it; got nothing"

echo 'print("in", ...)' >in.lua
try "$lacuna" - a <in.lua
want "- reads the script from standard input" 0 "in	a" ""
try "$lacuna" <in.lua
want "alone, without a terminal, standard input is the script" 0 in ""

try "$lacuna" nowhere.lua
want "a missing file" 1 "" "lacuna: cannot open nowhere.lua: No such file or directory"
try "$lacuna" .
want "a directory" 1 "" "lacuna: cannot read .: Is a directory"

printf 'print("before")\n\nlocal t = nil\nprint(t.x)\n' >fails.lua
try "$lacuna" fails.lua
want "a script's error is one line, with file and line" 1 before "lacuna: fails.lua:4: attempt to index a nil value (local 't')"
try env LACUNA_TRACEBACK=1 "$lacuna" fails.lua
want "the traceback is there for who asks" 1 before "lacuna: fails.lua:4: *
stack traceback:*fails.lua:4: in main chunk*"

echo 'x = = 1' >wrong.lua
try "$lacuna" wrong.lua
want "a syntax error is one line" 1 "" "lacuna: wrong.lua:1: unexpected symbol near '='"
try "$lacuna" -e 'error(setmetatable({}, {__tostring = function() return "own words" end}))'
want "an error that is no text" 1 "" "lacuna: own words"
try "$lacuna" -e 'error()'
want "an error without words" 1 "" "lacuna: the script failed with a nil as its error, which says nothing"
try "$lacuna" -e 'os.exit(7)'
want "a script's own exit status" 7 "" ""

try "$lacuna" --version
want "--version" 0 "lacuna [0-9]*.[0-9]*.[0-9]*" ""
try "$lacuna" --help
want "--help" 0 "Usage: lacuna *--threads N*Exit status*" ""

try "$lacuna" --drwas 5 script.lua
want "an option misspelt" 2 "" "lacuna: unknown option '--drwas'; the nearest known one is --draws"
try "$lacuna" --sed=5 script.lua
want "an option misspelt, with its value" 2 "" "lacuna: unknown option '--sed'; the nearest known one is --seed"
try "$lacuna" --colourful
want "an option like no other" 2 "" "lacuna: unknown option '--colourful'; lacuna --help lists them"
for option in --draws=x --draws=0 --draws=-1 --draws=1.5 --draws= --draws=99999999999999999999; do
  try "$lacuna" "$option" script.lua
  want "$option" 2 "" "lacuna: --draws wants a whole number from 1 to [0-9]*; got \"${option#*=}\""
done
try "$lacuna" --threads 0 script.lua
want "--threads 0" 2 "" "lacuna: --threads wants a whole number from 1 to [0-9]*; got \"0\""
try "$lacuna" --seed
want "--seed without a number" 2 "" "lacuna: --seed wants a whole number after it; got nothing"
try "$lacuna" --seed 5 --draws=100 --threads 1 -- script.lua a
want "options, then --" 0 "script.lua	a	1	a" ""

try sh -c '"$0" -e "print(1)" >/dev/full' "$lacuna"
want "output that can't be written" 1 "" "lacuna: cannot write to standard output: No space left on device"
try sh -c '"$0" --help >/dev/full' "$lacuna"
want "help that can't be written" 1 "" "lacuna: cannot write to standard output: No space left on device"

# --foreground: one signal, to the program alone, as a second one would end it at once.
# Ctrl-C ends a script by the signal, so that a shell's loop around it ends too; pcall does not swallow it.
echo 'while true do pcall(function() while true do end end) end' >endless.lua
try timeout --foreground -s INT 1 "$lacuna" endless.lua
want "Ctrl-C ends a script" 124 "" "lacuna: interrupted"
echo 'local t = setmetatable({}, {__close = function() print("closed") end}); local a <close> = t; while true do end' >closing.lua
try timeout --foreground -s INT 1 "$lacuna" closing.lua
want "what a script has to close is closed" 124 closed "lacuna: interrupted"

finish
