-- SPDX-License-Identifier: GPL-3.0-or-later
-- Studies from Lua: reading targets, every kind of bad input with its message, the outputs. Stars and instruments are invented; what is
-- derived is compared with the same asked of a case, or with what follows from the definitions by hand.
package.path = "tests/lua/?.lua"
local t = require "harness"
local scratch = require "scratch"
local lacuna = require "lacuna"
lacuna.settings { seed = 7, draws = 2000 }

local folder, path, write, read = scratch.folder, scratch.path, scratch.write, scratch.read

-- A study without its printing.
local printed
local function quietly(fields)
  local study
  study, printed = scratch.quietly(lacuna.study, fields)
  return study
end

local function of_file(content, more)
  local fields = { targets = write("stars.csv", content), ask = { "parallax" } }
  for key, value in pairs(more or {}) do fields[key] = value end
  return quietly(fields)
end

-- What the file's error must say after the folder's name, as plain text.
local function refuses(content, message, more)
  local ok, trouble = pcall(of_file, content, more)
  t.equal(ok, false, "an error is wanted: " .. message)
  t.equal(trouble, path("stars.csv") .. message)
end

local function median(quantity, unit) return lacuna.median(quantity):value(unit) end
local given_of = function(study, i) return study.rows[i].target.givens end

t.test("values, errors, blanks, texts and objects of a file", function()
  local study = of_file('\xEF\xBB\xBFname,distance [kpc],distance error [pc],stellar_mass [solMass],stellar_mass upper error [solMass],stellar_mass lower error [solMass],right ascension,band\r\n'
    .. '"Marrow ""3"", north",0.156,3,1.9,0.2,0.1,"04 12 08,1",H\r\n\r\nQuillon A,101 ± 2 pc,,,,,15 02 27,\r\n"two\nlines", 99 pc ,,.5,0,0,,K')
  t.equal(#study.rows, 3)
  t.equal(study.rows[1].name, 'Marrow "3", north')
  t.equal(study.rows[3].name, "two\nlines")
  t.equal(study.texts, { "right ascension" })
  t.equal(study.rows[1].texts["right ascension"], "04 12 08,1")
  t.equal(tostring(study.rows[1].case.band), "2MASS H (1.662 um)")
  t.close(median(study.rows[1].case.distance, "pc"), 156, 3 * 4 * 1.25 / 156 / math.sqrt(2000)) -- 4 standard errors of a median
  t.close(lacuna.deviation(study.rows[1].case.distance):value "pc", 3, 4 / math.sqrt(2 * 2000))
  local low, high = lacuna.interval(study.rows[1].case.stellar_mass)
  t.close((high:value "Msun" - 1.9) / (1.9 - low:value "Msun"), 2, 0.3) -- two-sided: twice as far up as down
  t.close(lacuna.deviation(study.rows[2].case.distance):value "pc", 2, 4 / math.sqrt(2 * 2000))
  t.equal(given_of(study, 2).stellar_mass, nil)
  t.close(study.rows[3].case.stellar_mass:value "Msun", 0.5, 1e-15) -- an error of zero is none
  t.close(study.rows[3].case.distance:value "pc", 99, 1e-15)
end)

t.test("rows without a filled cell, as spreadsheets write them, are no targets", function()
  t.equal(#of_file("name,distance [pc],remarks\n,,\nMarrow 3,15,\n , ,\n,,\n").rows, 1)
end)

t.test("a cell with an error bar but no unit takes the header's", function()
  local c = of_file("name,distance [kpc]\nMarrow 3,0.156 ± 0.003\n").rows[1].case
  t.close(lacuna.deviation(c.distance):value "pc", 3, 4 / math.sqrt(2 * 2000))
end)

t.test("malformed files", function()
  refuses("", ": the file is empty; its first line names the columns")
  refuses("name,distance [pc]\n", ": no targets; the file has a header line alone")
  refuses('name,distance [pc]\nMarrow 3,1"5\n', ":2:11: malformed CSV: a quotation mark out of place; a quoted field stands in \" \" as a whole, with \"\" for each inside it")
  refuses('name,distance [pc]\n"é" x,15\n', ":2:5: malformed CSV: a quotation mark out of place; a quoted field stands in \" \" as a whole, with \"\" for each inside it")
  refuses('name,distance [pc]\nQuillon A,101\n"Marrow 3,15\nTarn,60', ":3: malformed CSV: a quoted field of the row that starts here is never closed")
  refuses("name,distance [pc]\nMarrow 3\n", ':2: column "distance [pc]": the row has 1 field, the header 2')
  refuses('name,distance [pc]\n"two\nlines",1\nMarrow 3,15,8\n', ":4: column 3: the row has 3 fields, the header 2")
  refuses("name,distance [pc]\nMarrow \xff,15\n", ':2: column "name": the cell is not UTF-8 text')
  refuses("name,distance [pc]\nMarrow\0 3,15\n", ':2: column "name": the cell is not UTF-8 text')
  refuses("name,dist\xff\nMarrow,15\n", ":1: column 2: the header is not UTF-8")
  local ok, trouble = pcall(quietly, { targets = path "nowhere.csv", ask = { "parallax" } })
  t.equal(ok, false)
  t.equal(trouble, "cannot open " .. path "nowhere.csv" .. ": No such file or directory")
end)

t.test("wrong headers", function()
  refuses("distance [pc]\n15\n", ':1: no column "name"; each target wants one')
  refuses("name,\nMarrow 3,1\n", ':1: column "": a column wants a header')
  refuses("name,distance [pc],distance [kpc]\nMarrow 3,15,1\n", ':1: column "distance [kpc]": there is a column of that name already')
  refuses("name,remarks,remarks\nMarrow 3,a,b\n", ':1: column "remarks": there is a column of that name already')
  refuses("name,distance [pc\nMarrow 3,15\n", ':1: column "distance [pc": a unit stands in brackets at the end, like "distance [pc]"')
  refuses("name,distence [pc]\nMarrow 3,15\n", ":1: column \"distence [pc]\": unknown name 'distence'; did you mean distance?")
  refuses("name,distanse\nMarrow 3,15\n", ":1: column \"distanse\": unknown name 'distanse'; did you mean distance?")
  refuses("name,plx [mas]\nMarrow 3,15\n", ":1: column \"plx [mas]\": unknown name 'plx'; it is called parallax here")
  refuses("name,distance [parsecs]\nMarrow 3,15\n", ":1: column \"distance [parsecs]\": unknown unit 'parsecs'")
  refuses("name,distance [K]\nMarrow 3,15\n", ':1: column "distance [K]": distance wants a length (in pc); got 1 K')
  refuses("name,distance error [pc]\nMarrow 3,3\n", ':1: column "distance error [pc]": an error without its value; there is no column "distance"')
  refuses("name,distance [pc],distance error\nMarrow 3,15,3\n", ':1: column "distance error": an error wants its unit in the header, like "distance error [pc]"')
  refuses("name,distance [pc],distance upper error [pc]\nMarrow 3,15,3\n", ':1: column "distance upper error [pc]": an upper error without the lower one')
  refuses("name,distance [pc],distance lower error [pc]\nMarrow 3,15,3\n", ':1: column "distance lower error [pc]": a lower error without the upper one')
  t.equal(of_file("name,declination,distance [pc],spectral type\nMarrow 3,-33 18 04,15,A5\n").texts, { "declination", "spectral type" }) -- not inclination
end)

t.test("wrong cells", function()
  local head = "name,distance [pc],distance error [pc]\n"
  refuses(head .. "Marrow 3,15x,\n", ':2: column "distance [pc]": can\'t read "15x"; write a number, or one with its error and unit, like "156 ± 3 pc"')
  refuses(head .. "Marrow 3,nan,\n", ':2: column "distance [pc]": can\'t read "nan"; write a number, or one with its error and unit, like "156 ± 3 pc"')
  refuses(head .. "Marrow 3,1e999,\n", ':2: column "distance [pc]": distance: "1e999 pc" wants finite numbers and errors that are not negative')
  refuses(head .. "Marrow 3,15 K,\n", ':2: column "distance [pc]": distance wants a length (in pc); got 15 K')
  refuses(head .. "Marrow 3,-15,\n", ':2: column "distance [pc]": distance must be > 0; got -15 pc')
  refuses(head .. "Marrow 3,15,x\n", ':2: column "distance error [pc]": can\'t read "x"; an error is a number in the header\'s unit')
  refuses(head .. "Marrow 3,15,-3\n", ':2: column "distance error [pc]": an error can\'t be negative; got -3')
  refuses(head .. "Marrow 3,,3\n", ':2: column "distance error [pc]": an error without its value; got 3')
  refuses(head .. "Marrow 3,15 ± 1,3\n", ':2: column "distance error [pc]": the value has an error bar already, 15 ± 1')
  refuses("name,distance [pc],distance upper error [pc],distance lower error [pc]\nMarrow 3,15,3,\n",
    ':2: column "distance upper error [pc]": one side of a two-sided error is blank, the other is not')
  refuses("name,distance\nMarrow 3,15\n", ':2: column "distance": distance wants a length (in pc); got 15')
  refuses(head .. ",15,\n", ':2: column "name": a target wants a name')
  refuses(head .. "Marrow 3,15,\nTarn,60,\nMarrow 3,16,\n", ':4: column "name": there is a target "Marrow 3" already, in line 2')
end)

t.test("given twice, and contradictory givens", function()
  local head = "name,distance [pc]\nMarrow 3,15\n"
  refuses(head, ':1: column "distance [pc]": distance is given twice, here and in the study\'s given', { given = { distance = "15 pc" } })
  refuses(head, ':1: column "distance [pc]": distance is given twice, here and in variant "near"', { variants = { { name = "near", given = { distance = "15 pc" }, ask = { "parallax" } } } })
  refuses("name,distance [pc],parallax [mas]\nMarrow 3,100,11\n", ":2: contradictory givens: distance = 100 pc, but parallax = 11 mas gives 90.91 pc (by parallax)", { ask = { "distance" } })
end)

t.test("a target that fails is told in its row, and the others stand", function()
  local study = of_file("name,distance [pc],parallax [mas]\nTarn,100,10\nMarrow 3,100,11\nTarn 2,,10\n", { ask = { "distance" } })
  t.close(study.rows[1].cells[1].value, 100, 1e-15)
  t.close(study.rows[3].cells[1].value, 100, 1e-15)
  t.equal(study.rows[2].failed:find(path "stars.csv" .. ":3: contradictory givens: ", 1, true), 1, study.rows[2].failed)
  t.equal(study.rows[2].cells[1].missing, true)
  t.equal(printed:find("Failed\n  Marrow 3: " .. path "stars.csv" .. ":3:", 1, true) ~= nil, true, printed)
  t.raises(function() return study.rows[2].case end, "contradictory givens")
  local filtered = of_file("name,distance [pc],parallax [mas]\nTarn,100,10\nMarrow 3,100,11\nTarn 2,40,25\n", { ask = { "distance" }, where = { "distance", above = "50 pc" } })
  t.equal({ filtered.rows[1].name, filtered.rows[2].name, #filtered.rows }, { "Tarn", "Marrow 3", 2 }, "shown whatever the filter says")
end)

-- What a study with these fields raises, with the script's line before it.
local function complains(fields, message)
  local text = t.raises(function() quietly(fields) end, "study")
  t.equal(text:match "^[^:]*scratch.lua:%d+: (.*)", message)
end

t.test("a study that is not one", function()
  local one = { { name = "Marrow 3", distance = "15 pc" } }
  complains(5, "study wants a table {targets = ..., ask = ...}; got number")
  complains({ ask = { "parallax" } }, "study wants targets = the name of a CSV file, or a list of tables")
  complains({ targets = 5, ask = { "parallax" } }, "study wants targets = the name of a CSV file, or a list of tables; got number")
  complains({ targets = {}, ask = { "parallax" } }, "study: the list of targets is empty")
  complains({ targets = one }, 'study wants ask = {names}, like ask = {"rim_radius", "rim_resolved_by_array"}')
  complains({ targets = one, ask = "parallax" }, "study: ask wants a table; got string")
  complains({ targets = one, ask = { 5 } }, "study: ask: a name is wanted; got 5")
  complains({ targets = one, ask = { "paralax" } }, "study: ask: unknown name 'paralax'; did you mean parallax?")
  complains({ targets = one, ask = { "plx" } }, "study: ask: unknown name 'plx'; it is called parallax here")
  complains({ targets = one, ask = { "parallax", "parallax" } }, "study: ask: parallax is asked twice")
  complains({ targets = one, ask = { "band" } }, "study: ask: band is an object; there is nothing to derive")
  complains({ targets = one, ask = { "parallax" }, variant = {} }, "study: there is no 'variant' here; there are also, ask, csv, derive, figures, given, latex, sort, targets, title, using, variants, where")
  complains({ targets = one, ask = { "parallax" }, given = { stellar_mass = "3 pc" } }, "study: stellar_mass wants a mass (in Msun); got 3 pc")
  complains({ targets = one, ask = { "parallax" }, given = { stellar_mass = lacuna.sweep("1 Msun", "2 Msun", 3) } },
    "study: stellar_mass wants one value or an error bar in a study, not one along stellar_mass; make it variants")
  complains({ targets = one, ask = { "parallax" }, using = { array_resolution = "finge" }, given = { wavelength = "1.65 um", projected_baseline = "100 m" } },
    'study: target "Marrow 3": using: array_resolution has no recipe \'finge\'; it has half_fringe, fringe')
  complains({ targets = one, variants = { { ask = { "parallax" } } } }, "study: variant 1 wants name = a text")
  complains({ targets = one, variants = { { name = "a" } } }, 'study: variant "a": wants ask = {names}, like ask = {"gap_resolved_by_array"}')
  complains({ targets = one, variants = { { name = "a", ask = { "parallax" } }, { name = "a", ask = { "parallax" } } } }, 'study: variant "a": there is a variant of that name already')
  complains({ targets = { { name = "a", distanse = "3 pc" } }, ask = { "parallax" } }, "study: target \"a\": unknown name 'distanse'; did you mean distance?")
  complains({ targets = { { name = "a", distance = "3 K" } }, ask = { "parallax" } }, 'study: target "a": distance wants a length (in pc); got 3 K')
  complains({ targets = { { distance = "3 pc" } }, ask = { "parallax" } }, "study: target 1 wants name = a text; got nil")
  complains({ targets = { { name = "a" }, { name = "a" } }, ask = { "parallax" } }, 'study: there are two targets "a", 1 and 2')
  complains({ targets = { { name = "Marrow 3", distance = "15 pc" } }, ask = { "hill_radius" }, given = { planet_mass = "1 Mjup", stellar_mass = "1 Msun" } },
    "study: nothing that is asked can be derived for any target: hill_radius of Marrow 3, for want of planet_semi_major_axis")
end)

local instrument = { wavelength = "1.65 um", projected_baseline = "200 m", planet_mass = "2 ± 0.5 Mjup" }
local stars = {
  { name = "Marrow 3", distance = "156 ± 3 pc", rim_radius = "0.15 ± 0.01 au", remarks = "50 % & more_" },
  { name = "Tarn, 12", distance = "60 pc", rim_radius = "0.02 au" },
  { name = "Drumlin 30", distance = "446 +21 -17 pc" },
}
local asked = { "rim_size_angle", "rim_resolved_by_array" }
local function study_of_stars(more)
  local fields = { title = "Rims", targets = stars, given = instrument, ask = asked }
  for key, value in pairs(more or {}) do fields[key] = value end
  return quietly(fields)
end

t.test("cells are what a case says", function()
  local study = study_of_stars()
  t.close(study.rows[2].cells[1].value, 2 * 0.02 / 60 * 1000, 1e-12) -- 1 au at 1 pc is 1 arcsec, by the parsec's definition
  t.equal(study.rows[2].cells[2].share, 0) -- 0.67 mas is below half a fringe of 200 m, 0.85 mas
  t.equal(study.rows[1].cells[2].share, 1) -- 1.92 mas is not
  t.close(study.rows[1].cells[1].value, median(study.rows[1].case.rim_size_angle, "mas"), 1e-15)
  t.equal(study.rows[3].cells[1].missing, true)
  for _, words in ipairs { "Drumlin 30, for want of", "\nTarn, 12 +0.6667 +no\n", "rim_elements_by_array < elements_required 1: Tarn, 12 %(0.78%)", "detected is not assessed",
    "seed 7", "2000 draws", "half_fringe", "assumed", "\nMarrow 3 .* yes\n" } do
    t.equal(printed:lower():find(words:lower()) ~= nil, true, words .. " in " .. printed)
  end
end)

t.test("draws: common givens are the same for all targets, a target's own are its own, and no other target changes them", function()
  local study = study_of_stars { targets = { { name = "a", distance = "156 ± 3 pc" }, { name = "b", distance = "156 ± 3 pc" } }, ask = { "parallax" } }
  local a, b = study.rows[1].case, study.rows[2].case
  t.equal(a.planet_mass:value "Mjup", b.planet_mass:value "Mjup")
  t.equal(a.distance:value "pc" == b.distance:value "pc", false)
  local alone = study_of_stars { targets = { { name = "b", distance = "156 ± 3 pc", stellar_mass = "1 ± 0.1 Msun" } }, ask = { "parallax" } }
  t.equal(alone.rows[1].case.distance:value "pc", b.distance:value "pc")
end)

t.test("variants have their own columns, recipes and cases", function()
  local study = study_of_stars { variants = {
    { name = "long", given = { shortest_baseline = "15 m" }, ask = { "rim_resolved_by_array" } },
    { name = "by fringe", using = { array_resolution = "fringe" }, ask = { "array_resolution" } },
  } }
  t.equal(#study.columns, 4)
  t.equal(study.columns[4].group, "by fringe")
  t.close(study.rows[1].cells[4].value, 2 * study.rows[1].case.array_resolution:value "mas", 1e-14)
  t.close(study.rows[1].variants.long.shortest_baseline:value "m", 15, 1e-15)
  t.raises(function() return study.rows[1].case.shortest_baseline end, "shortest_baseline")
end)

t.test("targets that don't use the same recipes are named", function()
  quietly { targets = { { name = "a", distance = "100 pc", bolometric_flux = "1e-11 W.m**-2" }, { name = "b", stellar_radius = "1 Rsun", effective_temperature = "5000 K" } },
    ask = { "stellar_luminosity" } }
  t.equal(printed:find "Not all targets use the same recipes\n  stellar_luminosity: flux and distance for a; " ~= nil, true, printed)
end)

t.test("a table too wide is split between its groups, never wrapped", function()
  local variants = {}
  for i = 1, 6 do variants[i] = { name = "variant " .. i, given = { shortest_baseline = i .. " m" }, ask = asked } end
  local study = study_of_stars { variants = variants }
  for columns = 50, 130, 20 do
    for line in study:table(columns):gmatch "[^\n]+" do t.equal(utf8.len(line) <= columns, true, line) end
  end
  t.equal(select(2, study:table(50):gsub("\nMarrow 3 ", "")) > select(2, study:table(130):gsub("\nMarrow 3 ", "")), true)
end)

t.test("CSV: written, and read again as targets", function()
  local study = study_of_stars { csv = path "out.csv" }
  local content = read "out.csv"
  t.equal(content, study:csv())
  t.equal(content:match "^[^\n]*", "name,remarks,rim_size_angle [mas],rim_size_angle upper error [mas],rim_size_angle lower error [mas],rim_resolved_by_array verdict,rim_resolved_by_array share")
  t.equal(content:find('\n"Tarn, 12",,0.6666667,,,no,0\n', 1, true) ~= nil, true, content)
  t.equal(content:find("\nDrumlin 30,,,,,,\n", 1, true) ~= nil, true, content)
  local again = quietly { targets = path "out.csv", ask = { "rim_size_angle" } }
  for i = 1, 2 do t.close(again.rows[i].cells[1].value, study.rows[i].cells[1].value, 5e-3) end -- rounded to two digits of the error, and a new ensemble's median
  t.equal(again.rows[1].texts.remarks, stars[1].remarks)
  t.close(tonumber(again.rows[1].texts["rim_resolved_by_array share"]), 1, 1e-15)
end)

t.test("LaTeX: one booktabs table, its special characters escaped, its braces and environments closed", function()
  local odd = { stars[1], stars[2], stars[3], { name = "[Marrow] 4", remarks = "* north\n", distance = "10 pc" } }
  local content = study_of_stars { latex = path "out.tex", targets = odd, variants = { { name = "a_b & c", ask = asked } } } and read "out.tex"
  local _, opened = content:gsub("\\begin{", "")
  local _, closed = content:gsub("\\end{", "")
  t.equal(opened, closed)
  local depth = 0
  for mark in content:gsub("\\[{}]", ""):gmatch "[{}]" do
    depth = depth + (mark == "{" and 1 or -1)
    t.equal(depth >= 0, true, "braces")
  end
  t.equal(depth, 0, "braces")
  for _, rule in ipairs { "\\toprule", "\\midrule", "\\bottomrule", "\\cmidrule(lr){5-6}", "\\caption{Rims}", "50 \\% \\& more\\_", "a\\_b \\& c", "half\\_fringe", "\\mathrm{mas}", "Assumed" } do
    t.equal(content:find(rule, 1, true) ~= nil, true, rule .. " in " .. content)
  end
  t.equal(content:find("\n{[}Marrow] 4 & {*} north", 1, true) ~= nil, true, content) -- no argument of the line break before
  local columns = #content:match "\\begin{tabular}{([lr]+)}"
  for line in content:match("\\midrule\n(.-)\\bottomrule"):gmatch "[^\n]+" do
    t.equal(select(2, line:gsub("\\&", ""):gsub("&", "")), columns - 1, line)
  end
  t.equal(content:find "[^\\]%%[^ ]" == nil, true, "no bare percent sign")
end)

local function names_of(study)
  local names = {}
  for i, row in ipairs(study.rows) do names[i] = row.name end
  return names
end

t.test("sorted as the study says; what is missing comes last", function()
  t.equal(names_of(study_of_stars { sort = "name" }), { "Drumlin 30", "Marrow 3", "Tarn, 12" })
  t.equal(names_of(study_of_stars { sort = { "name", descending = true } }), { "Tarn, 12", "Marrow 3", "Drumlin 30" })
  t.equal(names_of(study_of_stars { sort = "rim_size_angle" }), { "Tarn, 12", "Marrow 3", "Drumlin 30" })
  t.equal(names_of(study_of_stars { sort = { "rim_size_angle", descending = true } }), { "Marrow 3", "Tarn, 12", "Drumlin 30" })
  local study = study_of_stars { sort = { "distance", descending = true } } -- not asked: worked out, and not shown
  t.equal(names_of(study), { "Drumlin 30", "Marrow 3", "Tarn, 12" })
  t.equal(#study.columns, 2)
  t.equal(study.hidden[1].name, "distance")
end)

t.test("filtered as the study says", function()
  t.equal(names_of(study_of_stars { where = { "rim_size_angle", above = "1 mas" } }), { "Marrow 3" })
  t.equal(names_of(study_of_stars { where = { { "rim_size_angle", below = "1 mas" }, { "distance", below = "0.1 kpc" } } }), { "Tarn, 12" })
  t.equal(names_of(study_of_stars { where = { "rim_resolved_by_array", below = 0.5 } }), { "Tarn, 12" })
  local variants = { { name = "short", given = { shortest_baseline = "15 m" }, ask = { "recoverable_scale" } } }
  t.equal(#study_of_stars { variants = variants, where = { "recoverable_scale", variant = "short", above = "1 mas" } }.rows, 3)
  local few = study_of_stars { where = { "rim_size_angle", above = "1 mas" } }
  t.equal(few.notes[1], { heading = "Shown", lines = { "1 of 3 targets: rim_size_angle above 1 mas" } })
  t.equal(study_of_stars { where = { "distance", above = "1 pc" } }.notes[1].heading ~= "Shown", true, "all are shown: nothing to say")
  complains({ targets = stars, ask = asked, given = instrument, where = { "rim_size_angle", above = "1 arcsec" } }, "study: no target passes the filter, rim_size_angle above 1 arcsec; 3 were worked out")
  complains({ targets = stars, ask = asked, where = { "rim_size_angle", over = "1 mas" } }, "study: where: there is no 'over' here; there are above, below, variant")
  complains({ targets = stars, ask = asked, where = { "rim_size_angle" } }, "study: where: rim_size_angle wants above = ... or below = ...")
  complains({ targets = stars, ask = asked, where = { "rim_size_angle", above = "1 au" } }, "study: where: rim_size_angle wants an angle (in mas); got 1 au")
  complains({ targets = stars, ask = asked, where = { "rim_resolved_by_array", above = "1" } }, 'study: where: of rim_resolved_by_array a share of draws is wanted, from 0 to 1; got "1"')
  complains({ targets = stars, ask = asked, sort = { "rim_size_angel" } }, "study: sort: unknown name 'rim_size_angel'; did you mean rim_size_angle, ring_size_angle, gap_size_angle?")
  complains({ targets = stars, ask = asked, sort = { "rim_size_angle", variant = "far" } }, 'study: sort: there is no variant "far"')
end)

t.test("values of a name for all targets: shown, worked out besides, or now", function()
  local study = study_of_stars { also = { "rim_radius" } }
  t.equal(study:values "rim_size_angle"[1], study.rows[1].cells[1])
  t.close(study:values "rim_radius"[2].value, 0.02, 1e-15)
  t.close(study:values "distance"[2].value, 60, 1e-15)
  local far = study:values "distance"[3]
  t.close(far.value, median(study.rows[3].case.distance, "pc"), 1e-14)
  t.equal(far.low95 < far.value - far.lower and far.high95 > far.value + far.upper, true)
  t.raises(function() study:values "distanse" end, "values: unknown name 'distanse'; did you mean distance")
  t.raises(function() study:values("distance", "far") end, 'the study has no variant "far"')
end)

t.test("cases are made anew when they are asked for, and let go", function()
  local study = study_of_stars { variants = { { name = "long", given = { shortest_baseline = "15 m" }, ask = asked } } }
  local first = study.rows[1].case.distance:value "pc"
  collectgarbage()
  t.equal(study.rows[1].case.distance:value "pc", first)
  local kept = setmetatable({ study.rows[1].case }, { __mode = "v" })
  collectgarbage()
  t.equal(kept[1], nil)
  local names = {}
  for name, c in pairs(study.rows[1].variants) do names[name] = c.shortest_baseline:value "m" end
  t.equal(names, { long = 15 })
  t.equal(study.rows[1].variants.short, nil)
end)

t.test("a text that reads like a quantity is noted", function()
  local function note_of(fields)
    for _, note in ipairs(quietly { targets = { fields }, given = { distance = "100 pc" }, ask = { "distance" } }.notes) do
      if note.heading == "Carried along as texts, not used" then return note.lines end
    end
  end
  local lines = note_of { name = "A", star_temperature_of_mine = "9000 K", catalogue = "HQ 12", declination = "-14 07 55", remarks = "5 nights" }
  t.equal(#lines, 1)
  t.equal(lines[1]:find '^star_temperature_of_mine: "9000 K" reads like a quantity, but no name of the glossary is called so' ~= nil, true, lines[1])
  t.equal(note_of { name = "A", remarks = "bright" }, nil)
end)

t.test("files are whole or absent", function()
  write("kept.csv", "before")
  t.raises(function() quietly { targets = {}, ask = asked, csv = path "kept.csv" } end, "empty")
  t.equal(read "kept.csv", "before")
  t.raises(function() study_of_stars { csv = path "no/such/folder.csv" } end, "cannot write .*folder.csv: No such file or directory")
  assert(os.execute("mkdir " .. path "folder"))
  t.raises(function() study_of_stars { csv = path "folder" } end, "cannot write .*folder: Is a directory")
  local pipe = io.popen("ls -a " .. folder)
  t.equal(pipe:read("a"):find "folder%.%w" == nil, true, "no temporary file is left")
  pipe:close()
end)

scratch.remove()
t.finish()
