-- SPDX-License-Identifier: GPL-3.0-or-later
-- recipes: all rows of a name, and what each gives in a case, side by side. Expected values come from asking the case for one recipe at a time.
-- Stars and instruments are invented.
package.path = "tests/lua/?.lua;" .. package.path
local t = require "harness"
local lac = require "lacuna"

local star = lac.case { distance = "150 pc", stellar_luminosity = "20 ± 2 Lsun", cooling_efficiency = 0.4, stellar_mass = "2 Msun", wavelength = "1.65 um", projected_baseline = "100 m" }
local planet = star:with { planet_mass = "1 Mjup", planet_semi_major_axis = "5 au", viscosity_alpha = 1e-3 }

-- The line of a recipe in the comparison: its value and what is said of it.
local function compared(page, by)
  for line in tostring(page):match("\n\n(.-\n)\n"):gmatch "[^\n]+" do
    local value, remark = line:match("^  " .. by .. "  +(.-)  +(%S.*)$")
    if value then return value, remark end
  end
  error(("no %s in\n%s"):format(by, tostring(page)))
end

t.test("without a case each recipe is worked out for an invented star", function()
  local page = tostring(lac.recipes "sublimation_radius")
  local star = { heating_luminosity = "18 Lsun", cooling_efficiency = 0.4, backwarming_factor = 2 }
  t.equal(page:find("for an invented star: heating_luminosity = 18 Lsun", 1, true) ~= nil, true, page)
  t.equal(page:match "\n  grey_grains +(%S+ au)", tostring(lac.case { heating_luminosity = "18 Lsun" }.sublimation_radius))
  t.equal(page:match "\n  kama_2009 +(%S+ au)", tostring(lac.case(star):using { sublimation_radius = "kama_2009" }.sublimation_radius))
end)

t.test("without a case: equations, sources, ranges, what is supposed", function()
  local page = tostring(lac.recipes "gap_depth")
  for _, words in ipairs { "yun_2019, from planet_star_mass_ratio, planet_aspect_ratio, viscosity_alpha", "Σ_min/Σ_0 = 1 / (1 + 0.04 (q² / (h_p⁵ α)))",
    "Kanagawa, K. D., et al. 2015, ApJL 806, L15, Eq. 1", "holds for planet_star_mass_ratio from 0.0001 to 0.01", "supposes one planet on a circular orbit" } do
    t.equal(page:find(words, 1, true) ~= nil, true, words)
  end
  t.equal(tostring(lac.recipes "viscosity_alpha"), "viscosity_alpha has no recipe: it must be given")
end)

t.test("in a case, each recipe gives what the case gives using it", function()
  local page = planet:recipes "gap_depth"
  for _, by in ipairs { "kanagawa_2015", "yun_2019", "fung_2014", "duffell_2013" } do
    t.equal(compared(page, by), tostring(planet:using { gap_depth = by }.gap_depth), by)
  end
  t.equal(tostring(page), tostring(lac.recipes("gap_depth", planet)))
end)

t.test("the recipe taken is marked, with or without its range", function()
  local function remark(by) return (select(2, compared(planet:recipes "gap_depth", by))) end
  t.equal(remark "kanagawa_2015", "taken here, in its range")
  t.equal(remark "yun_2019", "no range stated")
  t.equal(remark "fung_2014", "in its range")
  t.equal(select(2, compared(planet:using { gap_depth = "yun_2019" }:recipes "gap_depth", "yun_2019")), "taken here, no range stated")
  t.equal({ compared(star:recipes "sublimation_temperature", "common_practice") }, { "1500 K", "taken here, assumed" })
end)

t.test("outside its range a recipe says so", function()
  local bright = star:with { stellar_luminosity = "5000 Lsun" }
  t.equal(select(2, compared(bright:recipes "sublimation_radius", "grey_grains")), "outside its range: heating_luminosity 5000 Lsun, holds from 1 to 1000 Lsun")
  local partly = star:with { stellar_luminosity = lac.spread.uniform(500 * lac.Lsun, 1500 * lac.Lsun) }
  local _, remark = compared(partly:recipes "sublimation_radius", "grey_grains")
  local share = remark:match "holds from 1 to 1000 Lsun %(outside in (%d+) %%%)$" -- half of the draws, within a few standard errors of 0.5 %
  t.close(tonumber(share), 50, 0.04)
end)

t.test("what can't be had says what is missing", function()
  t.equal({ compared(star:recipes "sublimation_radius", "kama_2009") }, { "-", "missing: backwarming_factor" })
  t.equal({ compared(star:recipes "sublimation_radius", "from_angle") }, { "-", "missing: sublimation_radius_angle (here it follows from sublimation_radius)" })
  t.equal({ compared(star:recipes "gap_width", "from_angle") }, { "-", "missing: gap_width_angle" }, "an inverse recipe is not told to be had by what gives the name itself")
  t.equal({ compared(star:recipes "rim_resolved_by_array", "field_unlimited") }, { "-", "missing: shortest_baseline" })
  t.equal({ compared(lac.case { distance = "150 pc" }:recipes "gap_width", "kanagawa_2016") },
    { "-", "missing: planet_semi_major_axis, stellar_mass, planet_mass, bolometric_flux, viscosity_alpha" })
end)

t.test("a name that is given stands beside its recipes", function()
  local page = star:with { rim_radius = "1 ± 0.1 au" }:recipes "rim_radius"
  t.equal({ compared(page, "given") }, { "1.0 ± 0.1 au", "taken here" })
  t.equal({ compared(page, "at_sublimation_radius") }, { tostring(star.rim_radius), "no range stated" })
end)

t.test("an undefined result gives its reason", function()
  local shallow = planet:with { viscosity_alpha = 1, planet_mass = "0.01 Mjup", stellar_luminosity = "20 Lsun" }
  local value, remark = compared(shallow:recipes "gap_depth", "fung_2014")
  t.equal(value, "undefined")
  t.equal(remark:find "^gap_depth is undefined: by fung_2014" ~= nil, true, remark)
end)

t.test("sweeps, objects and verdicts are compared in one line each", function()
  local swept = planet:with { planet_mass = lac.sweep("0.5 Mjup", "2 Mjup", 3) }
  t.equal(compared(swept:recipes "gap_depth", "yun_2019"):find "^from 0.%d+ to 0.%d+ %(medians%) along planet_mass$" ~= nil, true)
  t.equal({ compared(lac.case { band = "H" }:recipes "wavelength", "of_band") }, { "1.662 µm", "taken here, no range stated" })
  t.equal(compared(star:recipes "rim_resolved_by_array", "elements_alone"):find "^in 100 %% of draws" ~= nil, true)
end)

t.test("bad input gets one clear line", function()
  t.raises(function() lac.recipes "gap_wdith" end, "recipes: unknown name 'gap_wdith'; did you mean gap_width")
  t.raises(function() lac.recipes() end, "recipes wants a name, like recipes \"gap_width\"; got nothing")
  t.raises(function() lac.recipes("gap_width", {}) end, "recipes wants a case after the name; got a table")
  t.raises(function() star:recipes(3) end, "recipes wants a name, like recipes \"gap_width\"; got 3")
end)
t.finish()
