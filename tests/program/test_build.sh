# SPDX-License-Identifier: GPL-3.0-or-later
# The build rebuilds what it must, and nothing else. Asked of a copy, and with -n where what would be done is answer enough.
. tests/program/tap.sh
case $LACUNA_BUILD in *san) echo "1..0 # SKIP one build is enough"; exit ;; esac

unset MAKEFLAGS MAKELEVEL MFLAGS
copy=$scratch/copy
mkdir "$copy"
cp -a Makefile core bindings include tests "$copy"
mkdir "$copy/build"
cp -a "$LACUNA_BUILD"/* "$copy/build"
cd "$copy" || exit 1

compiled() { make -n "$@" 2>&1 | grep -o -e '-c [a-z/_]*\.c' | sed 's/-c //' | sort; }

try make -q
want "a second make does nothing" 0 "" ""

touch bindings/program.h
try compiled
want "a changed header rebuilds what uses it" 0 "bindings/interrupt.c
bindings/program.c
bindings/repl.c
bindings/workers.c" ""
make -t >/dev/null

touch core/status.c
try compiled
want "a changed file is compiled alone" 0 core/status.c ""
try sh -c 'make -n | grep -c -e "-o build/lacuna " -e "-o build/lacuna.so " -e "ar rcs" -e "-o build/liblacuna.so"'
want "and all that holds it is linked" 0 4 ""
make -t >/dev/null

touch bindings/*.lua
try sh -c 'make -n | grep -c embed.lua'
want "a changed Lua file is embedded again" 0 1 ""
make -t >/dev/null

all=$(ls core/*.c bindings/*.c | wc -l)
try sh -c 'make -n CFLAGS="-g -Og" | grep -c -e " -c [cb].*\.c"'
want "changed flags rebuild all" 0 "$((all + 1))" "" # and the embedded modules

finish
