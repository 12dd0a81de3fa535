# SPDX-License-Identifier: GPL-3.0-or-later
# What `make install` puts in place works from there: program, Lua module, both libraries, headers, pkg-config file, man page.
. tests/program/tap.sh
case $LACUNA_BUILD in *san) echo "1..0 # SKIP sanitised builds are not installed"; exit ;; esac

prefix=$scratch/prefix
unset MAKEFLAGS MAKELEVEL MFLAGS
try make build="$LACUNA_BUILD" PREFIX="$prefix" install
want "make install" 0 "*" ""

try "$prefix/bin/lacuna" -e '1 + 1'
want "the program runs" 0 2 ""

cd "$scratch" || exit 1
export LUA_CPATH="$prefix/lib/lua/5.4/?.so" LUA_PATH=
cat >module.lua <<'END'
local before = {}
for name in pairs(_G) do before[name] = true end
local lacuna = require "lacuna"
for name in pairs(_G) do if not before[name] then print("new global " .. name) end end
print(type(lacuna), getmetatable(_G))
END
try "${LUA:-lua5.4}" module.lua
want "stock Lua loads the module, which writes no global" 0 "table	nil" ""

cat >small.c <<'END'
#include <lacuna.h>
#include <stdio.h>
#include <string.h>
int main(void) { return puts(lac_status_words(LAC_OK)) < 0 || lac_constant_at(0) == NULL; }
END
export PKG_CONFIG_PATH="$prefix/lib/pkgconfig"
try sh -c '${CC:-gcc} -std=c11 -Wall -Wextra -Wpedantic -Werror small.c -o shared $(pkg-config --cflags --libs lacuna)'
want "a C program compiles against the shared library" 0 "" ""
try env LD_LIBRARY_PATH="$prefix/lib" ./shared
want "and runs" 0 done ""
try sh -c '${CC:-gcc} small.c -o static $(pkg-config --cflags lacuna) "$0/lib/liblacuna.a" $(pkg-config --static --libs-only-l lacuna | sed s/-llacuna//)' "$prefix"
want "a C program compiles against the static library" 0 "" ""
try ./static
want "and runs too" 0 done ""

for header in "$prefix"/include/lacuna/*.h; do
  try sh -c 'echo "#include <lacuna/$0>" | ${CC:-gcc} -std=c11 -Wall -Wpedantic -Werror -I"$1" -x c -fsyntax-only -' "${header##*/}" "$prefix/include"
  want "${header##*/} stands alone" 0 "" ""
  if command -v "${CXX:-g++}" >/dev/null; then
    try sh -c 'echo "#include <lacuna/$0>" | ${CXX:-g++} -std=c++11 -Wall -Werror -I"$1" -x c++ -fsyntax-only -' "${header##*/}" "$prefix/include"
    want "in C++ too" 0 "" ""
  fi
  grep -q 'extern "C"' "$header"
  result $? "with C linkage"
done

# Jupiter's Hill radius of 0.355 au (textbook, from memory) is 3.55 mas at 100 pc. The error of a median of 10 000 draws is 0.6 % of the 5 % of the distance.
try sh -c '${CC:-gcc} -std=c11 -Wall -Wextra -Wpedantic -Werror "$0" -o example $(pkg-config --cflags --libs lacuna)' "$OLDPWD/docs/example.c"
want "docs/example.c compiles" 0 "" ""
try env LD_LIBRARY_PATH="$prefix/lib" ./example
want "and gives what is right" 0 "*hill_radius = 0.355?? au, hill*hill_radius_angle = 3.55?? mas, definition
median of 10000 draws: 3.5[56] mas" ""

visible() { nm "$@" | awk 'NF == 3 && $2 ~ /[A-Z]/ && $2 != "U" { print $3 }' | sort -u; }
declared() { cat "$prefix"/include/lacuna/*.h | grep -o '\blac_[a-z0-9_]*\b' | sort -u; }
shared=$(visible -D --defined-only "$prefix/lib/liblacuna.so")
try sh -c 'echo "$0" | grep -v "^lac_"' "$shared"
want "the shared library shows lac_* alone" 1 "" ""
declared >declared
try sh -c 'echo "$0" | comm -23 - declared' "$shared"
want "and of these only what the headers declare" 0 "" ""
try sh -c 'echo "$0" | grep -v "^lac_"' "$(visible -g --defined-only "$prefix/lib/liblacuna.a")"
want "so does the static one" 1 "" ""
try visible -D --defined-only "$prefix/lib/lua/5.4/lacuna.so"
want "the Lua module shows its entrance alone" 0 luaopen_lacuna ""
try sh -c 'readelf -d "$0" | grep NEEDED | grep lua' "$prefix/lib/lua/5.4/lacuna.so"
want "the Lua module leaves Lua to its host" 1 "" ""
try sh -c 'readelf -d "$0" | grep -e NEEDED -e SONAME' "$prefix/lib/liblacuna.so"
want "the shared library has its soname" 0 "*liblacuna.so.0]*" ""
try sh -c 'readelf -d "$0" | grep NEEDED | grep -e lua -e readline' "$prefix/lib/liblacuna.so"
want "the shared library needs neither Lua nor readline" 1 "" ""

test -s "$prefix/share/man/man1/lacuna.1"
result $? "the man page is there"

cd "$OLDPWD" || exit 1
try make build="$LACUNA_BUILD" PREFIX="$prefix" uninstall
want "make uninstall" 0 "*" ""
try find "$prefix" ! -type d
want "leaves no file" 0 "" ""
test ! -e "$prefix/include/lacuna"
result $? "nor its folder of headers"

try make build="$LACUNA_BUILD" PREFIX=/opt/there DESTDIR="$prefix" install
want "make install with DESTDIR" 0 "*" ""
test -x "$prefix/opt/there/bin/lacuna" && grep -qx 'prefix=/opt/there' "$prefix/opt/there/lib/pkgconfig/lacuna.pc"
result $? "packagers get the final paths"

try make build="$LACUNA_BUILD" PREFIX="/opt/two words" DESTDIR="$prefix" install uninstall
want "make install and uninstall where names have spaces" 0 "*" ""
test -d "$prefix/opt/two words/bin" && test -z "$(find "$prefix/opt/two words" ! -type d)"
result $? "stay inside"

finish
