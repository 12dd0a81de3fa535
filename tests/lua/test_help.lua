-- SPDX-License-Identifier: GPL-3.0-or-later
-- help(): the map, pages of names, words, methods, units and built-in objects, and what is told of words that aren't known. The examples
-- on the pages are run by test_words.lua and test_examples.lua, the search by test_search.lua. Stars and instruments are invented.
package.path = "tests/lua/?.lua;" .. package.path
local t = require "harness"
local lac = require "lacuna"
local core = require "private"
local words = core.part "lacuna.words"

local function page(word) return tostring(lac.help(word)) end

local function has(text, ...)
  for _, part in ipairs { ... } do
    if not text:find(part, 1, true) then error(("no %q in\n%s"):format(part, text), 2) end
  end
end

t.test("the map has every name but those that stand for another, and every word, by subject", function()
  local map, listed = tostring(lac.help()), {}
  for name in map:gmatch "[%w_]+" do listed[name] = true end
  for _, name in ipairs(core.names()) do
    local at_a_place, on_sky = name:match "^planet_(.+)$" or name:match "^ring_(.+)$" or "", name:match "^(.+)_angle$" or ""
    if not listed[name] and not core.find(at_a_place) and not core.find(on_sky) then error("no " .. name) end
  end
  for _, record in ipairs(words.list()) do
    if not record.of and not listed[record.name] then error("no " .. record.name) end
  end
  has(map, "\nrim and cavity\n", "\nwords: cases\n  case  :with  :using", "case:sensitivity", "help \"name\"")
end)

t.test("a name: meaning, symbol, unit, range, synonyms, on the sky, recipes, an example", function()
  has(page "gap_width", "gap_width  Δ_gap\n", "full width of the gap in the gas", "in au, > 0", "also called width_of_gap", "on the sky: gap_width_angle",
    "kanagawa_2016, from planet_semi_major_axis, planet_star_mass_ratio, planet_aspect_ratio, viscosity_alpha", "Δ_gap = 0.41 a_p q¹ᐟ² h_p^(-3/4) α^(-1/4)",
    "Kanagawa, K. D., et al. 2016, PASJ 68, 43, Eq. 4", "supposes one planet on a circular orbit", "\n  example\n    > case{")
  has(page "sublimation_radius", "holds for heating_luminosity from 1 to 1000 Lsun")
  has(page "viscosity_alpha", "It must be given", "spread.log_uniform(1e-4, 1e-2)")
  has(page "a_p", "planet_semi_major_axis  a_p")
  has(page "H", "scale_height  H\n", "H  a built-in band")
end)

t.test("a word: forms, what it does, arguments, result, errors, examples with their answers", function()
  has(page "sweep", "sweep(from, to, count)\n", "A quantity that takes a range of values", "count      how many points", "result: a sweep", "errors: ends of different dimensions",
    "> case{wavelength = \"1.65 um\", projected_baseline = sweep(\"20 m\", \"330 m\", 4)}.array_resolution\n    projected_baseline     20 ", "sweep.log  A sweep in equal ratios", "see also along")
end)

t.test("a method is found by its name, with what has it, and as it is typed", function()
  for _, word in ipairs { "solve", "case:solve", "c:solve", "case.solve" } do has(page(word), "c:solve(\"given\", {name = value})\n", "For which value of a given") end
  has(page "spread.normal", "spread.normal(median, deviation)\n")
  has(page "quantity:mean", "q:mean()")
  has(page "log", "log(x)\n", "\nsweep.log(from, to, count)\n")
end)

t.test("a value is told of by what it is", function()
  has(tostring(lac.help(lac.sweep)), "sweep(from, to, count)\n")
  has(tostring(lac.help(lac.case { distance = "140 pc" })), "case{name = value, ...}\n")
  has(tostring(lac.help(lac.band "H")), "band{wavelength = ...")
  has(tostring(lac.help(lac.case { parallax = "7 mas" }.distance)), "distance  d\n")
  has(tostring(lac.help(3 * lac.au)), "quantity(5, \"au\")\n")
end)

t.test("a unit and a built-in object", function()
  has(page "mas", "mas  a unit: ", " rad")
  has(page "soot", "soot  a built-in material", "holds for 0.2 um to 3 mm", "Dalzell")
  has(page "Ks", "Ks  a built-in band", "2.159 um", "Cohen")
end)

t.test("what isn't known: the nearest names, or what is spelt like it, or that there is nothing", function()
  has(page "gap_wdith", "there is no 'gap_wdith'; nearest are gap_width", "\n  gap_width ")
  has(page "evaporaton", "evaporaton", "\n  sublimation_temperature ")
  t.equal(page "xyzzyq", "nothing about 'xyzzyq'; help() lists what there is")
  t.equal(page "  ", "nothing about '  '; help() lists what there is")
  t.raises(function() lac.help {} end, "help wants a name, a word or a unit as a text")
end)

t.test("a search lists the best first, and says how many more there are", function()
  local lines = {}
  for line in page "gap width":gmatch "[^\n]+" do lines[#lines + 1] = line end
  t.equal(lines[1], "about 'gap width':")
  t.equal(lines[2]:find "^  gap_width  +full width of the gap in the gas" ~= nil, true, lines[2])
  t.equal(#lines, 14)
  t.equal(lines[14]:find "^  and %d+ more$" ~= nil, true, lines[14])
end)

t.test("on a terminal pages are folded, code only after commas", function()
  local format = core.part "lacuna.format"
  local run = io.popen(("COLUMNS=50 %s -e '%s' 2>&1"):format(os.getenv "INTERPRETER" or arg[-1],
    [[local l = require "lacuna"; for _, w in ipairs { "gap_width", "planet_toomre_q", "case", "gap width" } do print(l.help(w)) end]]))
  local count, code = 0, nil
  for line in run:lines() do
    count = count + 1
    local goes_on = code and line:find "^      "
    if goes_on then
      if code:sub(-1) ~= "," then error("broken: " .. code) end
      code = code .. line:sub(7)
    elseif code then
      if select(2, code:gsub('"', "")) % 2 ~= 0 then error("broken: " .. code) end
      code = nil
    end
    if line:find "^    > " then
      code = line:sub(7)
    elseif not goes_on and format.width(line) > 50 then error("not folded: " .. line) end
  end
  t.equal(run:close(), true)
  t.equal(count > 60, true)
end)
t.finish()
