# SPDX-License-Identifier: GPL-3.0-or-later
# The scripts that users start from: each runs, says nothing on standard error, and prints no broken number.
. tests/program/tap.sh
lacuna=${LACUNA:?}

for script in scripts/*.lua; do
  try "$lacuna" "$script"
  want "$script" 0 "*" ""
  ! printf '%s' "$out" | grep -qiE '\bnan\b|\binf\b|table: 0x|userdata: 0x'
  result $? "$script prints no broken number"
done
# What those that write a file of numbers write: a header, and one line for each wavelength, size or star.
written() { # script, lines
  "$lacuna" "scripts/$1.lua" "$scratch/$1.csv" >/dev/null && test "$(wc -l <"$scratch/$1.csv")" = "$2"
  result $? "$1 writes a file of $2 lines"
}
written sed_with_gap 14
written rim_and_grains 10
written bright_enough 13
finish
