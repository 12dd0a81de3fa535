# SPDX-License-Identifier: GPL-3.0-or-later
# A worker process of a study that ends before its work is done: one line says so, the status is 1, and what was done is kept.
. tests/program/tap.sh
lacuna=${LACUNA:?}
cd "$scratch" || exit 1

# From the sixth target on, the process that works one out leaves, in the way that the argument says, until there is a file `go`.
cat >leaving.lua <<'END'
local function text_of(path)
  local file <close> = io.open(path)
  return file and file:read "a"
end
local function kill_by(signal)
  return function() os.execute(("kill -%s %d 2>/dev/null"):format(signal, io.open "/proc/self/stat":read "n")) end
end
local leave = {
  well = function() os.exit(0) end, badly = function() os.exit(3) end, closing = function() os.exit(true, true) end,
  killed = kill_by "KILL", broken = kill_by "SEGV",
}
local targets = {}
for i = 1, 12 do targets[i] = { name = "star " .. i, distance = 100 + i .. " pc" } end
quantity { name = "patience", unit = "pc", meaning = "what comes of a relation that leaves" }
relation { gives = "patience", by = "leaving", from = { "distance" }, source = "definition", function(distance)
  if distance:value "pc" > 105.5 and not text_of "go" then
    while not text_of(arg[1] .. "/records"):find "star 5" do os.execute "sleep 0.05" end
    leave[arg[1]]()
    while true do end
  end
  return distance
end }
study { targets = targets, ask = { "patience" } }
END

touch go
"$lacuna" --threads 3 leaving.lua well --out whole >whole.txt 2>/dev/null
result $? "nobody leaves"
for way in well:"ended early" badly:"ended early" closing:"ended early" killed:"was stopped by signal 9 (Killed)" broken:"was stopped by signal 11 (Segmentation fault)"; do
  how=${way%%:*} words=${way#*:}
  rm -f go
  try timeout 60 "$lacuna" --threads 3 leaving.lua "$how" --out "$how"
  want "a worker $how: it $words" 1 "" "lacuna: a worker process $words"
  test ! -e "$how/table.csv" && grep -qa 'star 5' "$how/records"
  result $? "$how: no report, and the records are kept"
  touch go
  "$lacuna" --threads 3 leaving.lua "$how" --out "$how" --resume >resumed.txt 2>/dev/null
  diff -rq -x records -x manifest.txt -x index.html whole "$how" && cmp -s whole.txt resumed.txt
  result $? "$how: --resume goes on"
done

finish
