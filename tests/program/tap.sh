# SPDX-License-Identifier: GPL-3.0-or-later
# For program tests: results in TAP, and what a command printed. To be sourced.
results=0
scratch=$(mktemp -d)
trap 'rm -rf "$scratch"' EXIT

result() { # status, name
  results=$((results + 1))
  if test "$1" = 0; then echo "ok $results - $2"; else echo "not ok $results - $2"; fi
}

# Runs a command; leaves $status, $out and $err.
try() {
  "$@" >"$scratch/out" 2>"$scratch/err"
  status=$?
  out=$(cat "$scratch/out") err=$(cat "$scratch/err")
}

# Compares what `try` left with what is wanted; a * in the texts stands for anything.
want() { # name, status, standard output, standard error
  matches=0
  test "$status" = "$2" || matches=1
  case $out in $3) ;; *) matches=1 ;; esac
  case $err in $4) ;; *) matches=1 ;; esac
  result $matches "$1"
  test $matches = 0 || printf 'wanted %s [%s] [%s]\ngot %s [%s] [%s]\n' "$2" "$3" "$4" "$status" "$out" "$err" | sed 's/^/# /'
}

finish() { echo "1..$results"; }
