-- SPDX-License-Identifier: GPL-3.0-or-later
-- compare: what its columns and rows hold, what is marked, how it is laid out at several widths, bad input. Expected numbers are those of
-- the cases themselves, or closed forms (1 au at 1 pc is 1 arcsec); the star is invented.
local t = require "harness"
local lac = require "lacuna"

local c = lac.case { distance = "150 pc", rim_radius = "0.3 au", wavelength = "1.65 um", projected_baseline = "100 m" }
local uncertain = c:with { distance = "150 ± 3 pc" }

local function cell(result, name, column)
  for _, row in ipairs(result.rows) do
    if row.name == name then return row.cells[column].text .. (row.cells[column].tail or ""), row.cells[column].mark, row.differs end
  end
end

t.test("givens first, then what is asked; what differs is marked", function()
  local result = lac.compare(c, { longer = { projected_baseline = "200 m" }, nearer = { distance = "75 pc" } }, { "rim_radius_angle", "rim_radius" })
  local names = {}
  for i, row in ipairs(result.rows) do names[i] = row.name end
  t.equal(names, { "distance", "projected_baseline", "rim_radius_angle", "rim_radius" }, "givens in the glossary's order, asks in the order given")
  t.equal({ cell(result, "distance", 1) }, { "150", nil, true })
  t.equal({ cell(result, "distance", 2) }, { "150", nil, true })
  t.equal({ cell(result, "distance", 3) }, { "75", "*", true })
  t.equal({ cell(result, "rim_radius_angle", 1) }, { "2", nil, true }) -- 0.3 au at 150 pc
  t.equal({ cell(result, "rim_radius_angle", 2) }, { "2", nil, true })
  t.equal({ cell(result, "rim_radius_angle", 3) }, { "4", "*", true }) -- at 75 pc
  t.equal({ cell(result, "rim_radius", 3) }, { "0.3", nil, false })
end)

t.test("the result's numbers", function()
  local result = lac.compare(c, { longer = { projected_baseline = "200 m" } }, { "rim_elements_by_array" })
  t.close(result.longer.rim_elements_by_array:value(), 2 * c.rim_elements_by_array:value(), 1e-14)
  local row = result.rows[2]
  t.equal({ row.name, row.kind }, { "rim_elements_by_array", "answer" })
  t.close(row.values.longer:value(), 2 * row.values["as it is"]:value(), 1e-14)
end)

t.test("the columns' order: by name, or as in a list", function()
  local changes = { projected_baseline = "200 m" }
  local page = tostring(lac.compare(c, { b = changes, a = changes }, "rim_radius"))
  t.equal(page:match "^%s+as it is%s+(%a)%s+(%a)", "a")
  page = tostring(lac.compare(c, { { name = "b", projected_baseline = "200 m" }, { name = "a", projected_baseline = "300 m" } }, "rim_radius"))
  t.equal(page:match "^%s+as it is%s+(%a)%s+(%a)", "b")
end)

t.test("a verdict: its share, and below what fails", function()
  local result = lac.compare(uncertain, { short = { projected_baseline = "42 m" }, blind = { projected_baseline = "10 m" }, scale = { shortest_baseline = "90 m" } }, "rim_resolved_by_array")
  t.equal((cell(result, "rim_resolved_by_array", 1)), "yes")
  t.equal({ cell(result, "rim_resolved_by_array", 2) }, { "no", "*", true })
  t.equal((cell(result, "rim_resolved_by_array", 4)):find "^%d+ %%$" ~= nil, true, "a share of the draws")
  local page = tostring(result)
  t.equal(page:find "\n    blind: rim_elements_by_array 0%.2%d* ± [%d.]+ < 1\n" ~= nil, true, page)
  t.equal(page:find "\n    short: rim_elements_by_array [%d.]+ ± [%d.]+ ≥ 1, not in %d+ %% of draws" ~= nil, true, page)
  t.equal(page:find "\n    scale: rim_size_angle [%d.]+ ± [%d.]+ mas .* recoverable_scale 3%.782 mas" ~= nil, true, page)
end)

t.test("recipes: asked for by name, and those that change with the givens", function()
  local star = lac.case { stellar_luminosity = "20 Lsun" }
  local result = lac.compare(star, { { name = "fine", cooling_efficiency = 0.4, backwarming_factor = 2 },
    { name = "grey", cooling_efficiency = 0.4, using = { sublimation_radius = "grey_grains" } } }, { "rim_radius" })
  t.equal({ cell(result, "sublimation_radius", 1) }, { "grey_grains", nil, true })
  t.equal({ cell(result, "sublimation_radius", 2) }, { "kama_2009", "*", true })
  t.equal({ cell(result, "sublimation_radius", 3) }, { "grey_grains", nil, true })
  t.equal({ cell(result, "rim_radius", 3) }, { (cell(result, "rim_radius", 1)), nil, true })
  t.equal(tostring(result):find("\nRecipes that change with the givens\n  fine: sublimation_radius now by kama_2009, before by grey_grains", 1, true) ~= nil, true)
end)

t.test("what is assumed, not given, taken away, not derived", function()
  local star = lac.case { distance = "150 pc", stellar_luminosity = "20 Lsun" }
  local result = lac.compare(star, { hot = { sublimation_temperature = "1800 K" }, bare = { stellar_luminosity = false }, band = { wavelength = "2.2 um" } }, { "rim_radius" })
  t.equal((cell(result, "sublimation_temperature", 1)), "1500 assumed")
  t.equal((cell(result, "sublimation_temperature", 4)), "1800")
  t.equal((cell(result, "wavelength", 1)), "not given")
  t.equal((cell(result, "stellar_luminosity", 3)), "not given")
  t.equal((cell(result, "rim_radius", 3)), "—")
  t.equal(tostring(result):find("\nNot derived (—)\n  bare: rim_radius, for want of", 1, true) ~= nil, true, tostring(result))
end)

t.test("a sweep or an object among the changes", function()
  local result = lac.compare(c, { swept = { projected_baseline = lac.sweep("50 m", "150 m", 3) }, by_name = { wavelength = false, band = "H" } }, { "rim_elements_by_array" })
  t.equal((cell(result, "projected_baseline", 3)), "from 50 to 150")
  t.equal((cell(result, "band", 1)), "not given")
  t.equal((cell(result, "wavelength", 2)):find " derived$" ~= nil, true)
end)

t.test("no line is wider than asked for, down to what a column takes", function()
  local many = {}
  for i = 1, 7 do many["variant_" .. i] = { projected_baseline = 100 + 20 * i .. " m" } end
  local page = tostring(lac.compare(uncertain, many, { "rim_elements_by_array", "rim_resolved_by_array" }))
  for line in page:gmatch "[^\n]+" do t.equal(utf8.len(line) <= 100, true, line) end
  for i = 1, 7 do t.equal(select(2, page:gsub("variant_" .. i, "")) >= 1, true, "variant " .. i) end
  t.equal(select(2, page:gsub("\n%* projected_baseline", "")) >= 2, true, "on two pages, each with the names")
end)

t.test("bad input", function()
  local ask = { "rim_radius" }
  local one = { longer = { projected_baseline = "200 m" } }
  t.raises(function() lac.compare() end, "compare wants a case first, like compare%(c, .*; got nothing")
  t.raises(function() lac.compare(c) end, "compare wants the variants in a table, like .*; got nothing")
  t.raises(function() lac.compare(c, {}, ask) end, "compare wants at least one variant")
  t.raises(function() lac.compare(c, one) end, "compare wants a list of the names to ask, like .*; got nothing")
  t.raises(function() lac.compare(c, one, {}) end, "compare wants at least one name to ask")
  t.raises(function() lac.compare(c, one, { "rim_radus" }) end, "compare: unknown name 'rim_radus'; did you mean rim_radius")
  t.raises(function() lac.compare(c, one, { "dust" }) end, "compare: dust is an object; there is nothing to derive")
  t.raises(function() lac.compare(c, { a = 3 }, ask) end, 'compare: variant "a" wants a table of changes, like .*; got 3')
  t.raises(function() lac.compare(c, { a = { projected_basline = "9 m" } }, ask) end, 'compare: variant "a": unknown name \'projected_basline\'; did you mean projected_baseline')
  t.raises(function() lac.compare(c, { a = { projected_baseline = "9 K" } }, ask) end, 'compare: variant "a": projected_baseline wants a length')
  t.raises(function() lac.compare(c, { a = { using = "fringe" } }, ask) end, 'compare: variant "a": using wants a table')
  t.raises(function() lac.compare(c, { a = { using = { array_resolution = "fring" } } }, ask) end, 'compare: variant "a": using: array_resolution has no recipe \'fring\'; it has half_fringe, fringe')
  t.raises(function() lac.compare(c, { { projected_baseline = "9 m" } }, ask) end, "compare: a variant in a list wants name = a text; variant 1 has nothing")
  t.raises(function() lac.compare(c, { { name = "a" }, { name = "a" } }, ask) end, 'compare: there are two variants "a"')
  t.raises(function() lac.compare(c, { rows = {} }, ask) end, 'compare: a variant can\'t be called "rows"')
end)

t.finish()
