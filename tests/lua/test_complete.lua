-- SPDX-License-Identifier: GPL-3.0-or-later
-- Completion without a terminal: what is offered in each context, and that no code of the user's is called for it. A "|" in a line is
-- the cursor. What is expected was read off the glossary and the language's own rules; nothing here is physics.
package.path = "tests/lua/?.lua;" .. package.path
local t = require "harness"
local lac = require "lacuna"
local complete = require "parts" "lacuna.complete"
local tokens = require "parts" "lacuna.tokens"

local variables = { -- of an invented star
  c = lac.case { distance = "156 pc", bolometric_flux = "2.4e-11 W.m**-2", wavelength = "1.65 um", band = "H" },
  mine = { alpha = 1, ["not an identifier"] = 2, beta = function() end, nested = { deep = true } }, width = 5 * lac.au, note = "text",
  d = lac.dust { materials = "soot", sizes = "1 um" }, stars = setmetatable({ plan = {}, title = "invented" }, { __name = "study" }),
}
local environment = { variables, _G }

-- The candidates at the cursor, by text; in order; the list itself; and where the word starts.
local function at(line)
  local cursor = (line:find("|", 1, true) or #line + 1) - 1
  local start, list, files = complete.at(line:gsub("|", "", 1), cursor, environment)
  local by_text, order = {}, {}
  for i, candidate in ipairs(list) do
    by_text[candidate.text], order[i] = candidate, candidate.text
    assert(type(candidate.meaning) == "string" and type(candidate.append) == "string", candidate.text)
  end
  return by_text, order, list, start, files
end

-- The only candidate must be this, followed by that.
local function only(line, text, append)
  local _, order, list = at(line)
  t.equal(table.concat(order, " "), text, line)
  t.equal(list[1].append, append, line .. ": what follows")
end

local function offers(line, wanted, unwanted)
  local by_text = at(line)
  for word in (wanted or ""):gmatch "%S+" do if not by_text[word] then error(("%s: does not offer %s"):format(line, word), 2) end end
  for word in (unwanted or ""):gmatch "%S+" do if by_text[word] then error(("%s: offers %s"):format(line, word), 2) end end
end

local function nothing(line)
  local _, order, _, _, files = at(line)
  t.equal(table.concat(order, " "), "", line)
  t.equal(files or false, false, line)
end

local function a_file(line, start)
  local _, order, _, from, files = at(line)
  t.equal({ #order, files, from }, { 0, true, start }, line)
end

t.test("members of a case, those that can be had first", function()
  local by_text, order = at "c."
  t.equal(order[1], "distance", "the given ones first")
  t.equal(by_text.distance.group, "given")
  t.equal(by_text.parallax.group, "to be had")
  t.equal(by_text.gap_width.group, "not to be had from what is given")
  local groups = {}
  for _, word in ipairs(order) do if groups[#groups] ~= by_text[word].group then groups[#groups + 1] = by_text[word].group end end
  t.equal(groups, { "given", "to be had", "not to be had from what is given" })
  offers("c.", "band rim_radius", "dust why")
  t.equal(by_text.rim_radius.meaning, "where the dust starts, in au")
  only("c.sublimation_t", "sublimation_temperature", "")
  only("c:with { projected_baseline = '30 m' }.array_res", "array_resolution", "")
  only("x = c . array_res", "array_resolution", "")
  only("lacuna_case = case { distance = '1 pc' } . array_res", "array_resolution", "")
  only("(c).array_res", "array_resolution", "")
  only("c['array_res", "array_resolution", "'")
  only("mine['al", "alpha", "'")
end)

t.test("methods, by the kind of the object", function()
  offers("c:", "with using why missing check solve", "as mean flux")
  offers("width:", "as value mean quantile", "with why flux")
  offers("c.distance:", "as value", "with")
  offers("(5 * au):", "as", "with")
  offers("c:solve('distance', {}):", "as", "with")
  offers("quantity '5 au':", "as", "with")
  offers("hill_radius { planet_mass = '1 Mjup' }:", "as", "with")
  offers("d:", "absorption albedo", "with as")
  offers("band 'H':", "flux magnitude", "with as")
  offers("note:", "format rep upper", "with")
  offers("mine:", "beta", "alpha nested with")
  offers("unheard_of:", "with as flux absorption")
  only("c:wi", "with", "{")
  only("c:wh", "why", ' "')
  only("c:che", "check", "()")
end)

t.test("names as keys of a table of givens", function()
  only("case { distan", "distance", " = ")
  only("case { distance = '1 pc', stellar_mass = '1 Msun', planet_ma", "planet_mass", " = ")
  only("case{\n  distance = '1 pc',\n  stellar_mas", "stellar_mass", " = ")
  only("c:with { projected_b", "projected_baseline", " = ")
  only("c:solve('distance', { rim_radius_a", "rim_radius_angle", " = ")
  only("hill_radius { planet_mas", "planet_mass", " = ")
  only("study { given = { projected_b", "projected_baseline", " = ")
  only("study { variants = { { name = 'a', given = { projected_b", "projected_baseline", " = ")
  only("study { targets = { { name = 'a', distan", "distance", " = ")
  offers("case { distance = '1 pc', ", "parallax", "distance")
  only("case { distan|ce = ", "distance", "")
  only("case { distan| = '1 pc' }", "distance", "")
  only("case { band = 'H', wavelength = 5 * kp", "kpc", "")
end)

t.test("names in strings", function()
  for _, start in ipairs { "c:why '", "c:missing('", "c:solve('", "help '", "recipes('", "study { ask = { '", "study { variants = { { ask = { 'gap_width', '",
    "relation { gives = '", "relation { from = { '", "nobody_knows:why '" } do only(start .. "sublimation_t", "sublimation_temperature", "'") end
  only('c:why "sublimation_t|"', "sublimation_temperature", "")
  offers("help '", "case gap_width au")
  local _, order = at "c:missing '"
  t.equal(order[1], "stellar_mass", "what is missing first, where it's asked for")
end)

t.test("synonyms, other letters, and parts lead to the names", function()
  only("a_p", "planet_semi_major_axis", "{")
  only("c.a_p", "planet_semi_major_axis", "")
  only("case { M_star", "stellar_mass", " = ")
  only("5 * msun", "Msun", "")
  only("c.Rim_Radius_A", "rim_radius_angle", "")
  only("c.height_ratio", "rim_height_ratio", "")
  nothing("c.zzz")
end)

t.test("units", function()
  local _, order = at "5*"
  t.equal(order[1], "m", "after a number and a star")
  offers("5*", "au pc Msun um", "case distance")
  only("5 * Mea", "Mearth", "")
  only("x = '5 Mea", "Mearth", "'")
  only("case { distance = '156 p", "pc", "'")
  only("case { distance = '156 ± 3 p", "pc", "'")
  only("case { distance = '156 kp", "kpc", "'")
  offers("case { planet_mass = '1 ", "Mjup Msun kg", "pc au um mas")
  _, order = at "case { planet_mass = '1 "
  t.equal(order[1], "Mjup", "the glossary's unit is the first")
  offers("case { bolometric_flux = '1 W.", "m cm", "")
  offers("width:as '", "km au")
  offers("quantity(5, '", "km au")
  offers("width:as '", "au km", "kg mas")
  _, order = at "c.rim_radius_angle:as '"
  t.equal({ order[1], (at "c.rim_radius_angle:as '").km }, { "mas", nil }, "the unit that it is shown in first, and no other dimension")
  offers("hill_radius { planet_mass = '1 Mjup' }:value '", "au km", "kg mas")
  offers("dust { sizes = { smallest = '0.1 u", "um", "uJy us")
  offers("quantity { name = 'x', unit = '", "km au")
  t.equal((at "5 * kp").kpc.meaning, "3.08568e19 m") -- IAU 2015 Resolution B2: 648000/pi au
  nothing("case { bolometric_flux = '2e")
  nothing("case { distance = '")
end)

t.test("recipes, bands, materials, options", function()
  offers("c:using { sublimation_radius = '", "grey_grains monnier_2002", "kanagawa_2016")
  only("c:using { gap_width = 'kana", "kanagawa_2016", "'")
  only("study { using = { gap_width = 'kana", "kanagawa_2016", "'")
  t.equal((at "c:using { gap_width = 'kana").kanagawa_2016.meaning:find "PASJ" ~= nil, true)
  only("c:using { gap_wid|", "gap_width", ' = "') -- and not its angle: that has but one recipe
  only("case { band = 'Johnson-Cousins V", "Johnson-Cousins V", "'")
  only("band 'Ks", "2MASS Ks", "'")
  only("dust { mat", "materials", " = ")
  only("dust { materials = { wat", "water_ice", " = ")
  only("dust { materials = { { 'wat", "water_ice", "'")
  only("material 'wat", "water_ice", "'")
  t.equal((at "dust { mat").materials.meaning:find "mass fraction" ~= nil, true)
  only("dust { sizes = { sma", "smallest", " = ")
  only("study { varia", "variants", " = ")
  only("study { variants = { { as", "ask", " = ")
  only("settings { thr", "threads", " = ")
  only("band { zero", "zero_point", " = ")
  only("quantity { on", "on_sky", " = ")
end)

t.test("the variants of compare, the fields of figures", function()
  only("compare(c, { long = { projected_b", "projected_baseline", " = ")
  only("compare(c, { long = { usin", "using", " = ")
  only("compare(c, { long = { using = { gap_width = 'kana", "kanagawa_2016", "'")
  only("compare(c, { { name = 'long', distance = '5 kp", "kpc", "'")
  only("compare(c, {}, { 'sublimation_t", "sublimation_temperature", "'")
  offers("figure { ", "of show along kind")
  only("figure { agai", "against", " = ")
  only("figure { show = 'sublimation_t", "sublimation_temperature", "'")
  only("figure { along = { projected_b", "projected_baseline", " = ")
  only("figure { kind = 'spec", "spectrum", "'")
  only("figure { lines = { { labe", "label", " = ")
  only("study { figures = { { kin", "kind", " = ")
end)

t.test("Lua's own words and the user's", function()
  only("string.fo", "format", "(")
  only("loca", "local", " ")
  only("for i = 1, 2 do prin", "print", "(")
  only("corout", "coroutine", ".")
  offers("mine.", "alpha beta nested", "not")
  t.equal(#select(2, at "mine."), 3)
  only("mine.nested.de", "deep", "")
  only("mine|", "mine", "")
  offers("", "c mine width note case study", "distance print local")
  offers("spread.", "normal log_uniform samples")
  t.equal((at "spread.").normal.meaning, require "parts" "lacuna.words".one_line "spread.normal")
  offers("glossary.", "name names words")
  offers("band 'H'.", "wavelength zero_point", "flux")
  offers("stars.", "rows", "plan title csv")
  t.equal((at "star").stars.meaning, "study")
  nothing("mine.alpha.")
  nothing("5.")
end)

t.test("file names elsewhere in strings, nothing in comments", function()
  a_file('dofile "scr', 9)
  a_file("study { targets = 'my", 20)
  a_file("x = 'data/", 6)
  nothing("-- c.rim_ra")
  nothing("--[[ c.rim_ra\n c.")
  nothing("x = [[ c.rim_ra")
  only("--[[ a comment ]] c.array_res", "array_resolution", "")
  only("x = 'it\\'s' .. c.array_res", "array_resolution", "")
end)

t.test("what all have in common, and where the word starts", function()
  local _, _, list, start = at "c.sublim"
  t.equal({ list.common, start }, { "sublimation_", 3 })
  _, _, list, start = at "c.height"
  t.equal({ list.common, start }, { "height", 3 }, "parts of words have nothing to add")
  _, _, list, start = at 'c:why "'
  t.equal({ list.common, start }, { "", 8 })
end)

t.test("no code of the user's is called, and nothing raises", function()
  local function trap(...) error("called: " .. select("#", ...)) end
  local metatable = { __name = trap }
  for _, event in ipairs { "index", "newindex", "call", "pairs", "len", "tostring", "eq", "lt", "concat", "gc", "close", "add", "mul" } do metatable["__" .. event] = trap end
  local trapped = setmetatable({ field = 1, inner = setmetatable({ x = 1 }, metatable) }, metatable)
  local own = { trapped = trapped, hidden = setmetatable({}, { __index = trap, __metatable = trap }), class = setmetatable({}, { __index = { behind = 1 } }), c = variables.c }
  local scope = { setmetatable(own, metatable), _G }
  local function texts(line)
    local start, list = complete.at(line, #line, scope)
    local words = {}
    for i, candidate in ipairs(list) do words[i] = candidate.text end
    return table.concat(words, " "), start
  end
  t.equal(texts "trapped.fi", "field")
  t.equal(texts "trapped.inner.", "x")
  t.equal(texts "class.", "behind")
  t.equal(texts "tra", "trapped")
  for _, line in ipairs { "trapped:", "trapped(", "trapped{", "trapped 'x", "trapped.x.y.z", "trapped.inner:foo{ ", "hidden.", "hidden:", "hidden", "c[trapped].", "c.distance[trapped]:",
    "trapped + ", "#trapped", "(trapped * 5):", "mean(trapped):" } do texts(line) end
  lac.quantity { name = "tested_length", unit = "au", meaning = "an invented length" }
  lac.relation { gives = "tested_length", from = { "distance" }, trap }
  t.equal(texts "c.tested_l", "tested_length")
  t.equal(texts("c.tested_length:a"):match "%a+", "as")
end)

t.test("any beginning of any text is survived", function()
  local text = 'c = case { distance = "156 ± 3 pc", [f(1)] = [==[ x ]] ]==], }:with{ a = { "b", c.d["e"](1), -- no\n } } function x(...) return ... // 2 end --[[ z ]] goto \'\\'
  for cursor = 0, #text do
    local start, list = complete.at(text, cursor, environment)
    if not (start >= 1 and start <= cursor + 1 and type(list.common) == "string") then error("at " .. cursor) end
  end
  math.randomseed(20240607)
  local pieces = { "c", ".", ":", "{", "}", "(", ")", "[", "]", "'", '"', ",", "=", "5", " ", "case", "with", "study", "variants", "ask", "--", "\n", "°", "\\", "[[", "]]", "x", "and" }
  for _ = 1, 1000 do
    local parts = {}
    for i = 1, math.random(12) do parts[i] = pieces[math.random(#pieces)] end
    local line = table.concat(parts)
    local good, trouble = pcall(complete.find, line, #line, environment)
    if not good then error(("%q: %s"):format(line, trouble)) end
  end
end)

t.test("a list on the screen: folded, cut, paged", function()
  local _, _, list = at "c."
  local from, pages, lines_seen = 1, 0, 0
  repeat
    local text, last = complete.listing(list, from, 60, 20)
    for line in text:gmatch "[^\n]+" do
      lines_seen = lines_seen + 1
      if utf8.len(line) > 60 then error("too wide: " .. line) end
    end
    if select(2, text:gsub("\n", "")) > 19 then error("too long: " .. text) end
    t.equal(text:find "Tab again" ~= nil, last < #list)
    from, pages = last + 1, pages + 1
  until last == #list
  t.equal(pages > 5 and lines_seen > #list, true)
  t.equal(complete.listing({ { text = "km", meaning = "1000 m", append = "" } }, 1, 80, 24), "  km  1000 m\n")
  t.equal(select(2, complete.listing(list, #list + 1, 60, 20)) < #list, true, "past the last it begins again")
end)

t.test("tokens", function()
  local list, word = tokens.read "a.b = 'c\\'d' .. 5e-3 >= x"
  local kinds = {}
  for i, token in ipairs(list) do kinds[i] = token.kind .. " " .. token.text end
  t.equal(kinds, { "name a", "symbol .", "name b", "symbol =", "string 'c\\'d'", "symbol ..", "number 5e-3", "symbol >=" })
  t.equal({ word.text, word.first }, { "x", 25 })
end)

t.finish()
