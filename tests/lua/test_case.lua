-- SPDX-License-Identifier: GPL-3.0-or-later
-- Cases: asking, what-if, recipes, derivations, what is missing, checks, solving, rows of the user's own. Expected numbers follow from
-- definitions (1 au at 1 pc is 1 arcsec; n = size over lambda/2B), worked in the test; the star is invented.
local t = require "harness"
local lac = require "lacuna"
local eps = 2 ^ -52

local star = {
  distance = "156 ± 3 pc", bolometric_flux = "2.4e-11 ± 0.2e-11 W.m**-2", stellar_mass = "1.9 Msun", planet_mass = "2 Mjup",
  planet_semi_major_axis = "5 au", viscosity_alpha = 1e-3, wavelength = "1.65 um", projected_baseline = "280 m", shortest_baseline = "30 m",
}
local single = { distance = "150 pc", rim_radius = "0.3 au", wavelength = "1.65 um", projected_baseline = "100 m" }

-- Elements of a rim of 0.3 au at 150 pc, 4 mas across, on a baseline in metres.
local function elements(baseline) return 4e-3 / 3600 / 180 * math.pi / (1.65e-6 / (2 * baseline)) end

t.test("asking", function()
  local c = lac.case(single)
  t.close(c.rim_radius_angle:value "mas", 2, 4 * eps)
  t.close(c.rim_size_angle:value "mas", 4, 4 * eps)
  t.close(c.rim_elements_by_array:value(), elements(100), 20 * eps)
  t.equal(c.distance:value "pc", 150.0, "a given")
  t.equal(tostring(c.distance), "150 pc")
  t.close(lac.rim_radius_angle { rim_radius = 1 * lac.au, distance = "1 pc" }:value "arcsec", 1, 4 * eps, "a name as a function")
  t.close(lac.case { parallax = "10 mas" }.distance:value "pc", 100, 4 * eps)
end)

t.test("a closed case", function()
  local kept
  do
    local c <close> = lac.case(single)
    kept = c
  end
  t.raises(function() return kept.rim_radius_angle end, "this case is closed")
  t.raises(function() return kept:with { distance = "90 pc" } end, "this case is closed")
  local seen
  do -- a finaliser sees the case that was finalised before it
    local holder = setmetatable({}, { __gc = function(holder) seen = select(2, pcall(function() return holder.case.distance end)) end })
    holder.case = lac.case(single)
  end
  collectgarbage()
  t.equal(seen:find "this case is closed" ~= nil, true)
end)

t.test("an ensemble's errors", function()
  local c = lac.case(star)
  t.equal(tostring(c.distance):match "^156", "156")
  t.equal(tostring(c.gap_width_angle):find "^%d+%.?%d* ± %d+%.%d+ mas$" ~= nil, true)
  -- distance and flux: L ~ d² F, rim ~ sqrt(L), so that the angle does not depend on the distance (closed form)
  t.close(c.rim_radius_angle:deviation():value "mas" / c.rim_radius_angle:mean():value "mas", 0.5 * 0.2 / 2.4, 0.05)
end)

t.test("a case doesn't change; with makes another", function()
  local c = lac.case(single)
  local d = c:with { projected_baseline = "200 m" }
  t.close(d.rim_elements_by_array:value(), elements(200), 20 * eps)
  t.close(c.rim_elements_by_array:value(), elements(100), 20 * eps)
  t.raises(function() c.distance = 3 end, "a case doesn't change; c:with{name = value} makes another")
  t.raises(function() return c:with { distance = false }.rim_radius_angle end, "rim_radius_angle can't be derived from what is given; give distance")
  t.raises(function() c:with(5) end, "with wants a table of givens; got number")
  t.equal(tostring(c:with { array_resolution = "1 mas" }):find "projected_baseline = 100 m" ~= nil, true)
  local q = c:with { rim_radius = lac.sweep("0.1 au", "1 au", 5) }
  t.equal(q.rim_radius_angle:axes()[1].name, "rim_radius")
end)

t.test("recipes that change are told", function()
  local c = lac.case { heating_luminosity = "20 Lsun" }
  local d = c:with { absorption_efficiency_ratio = 2 }
  t.equal(tostring(d):find("sublimation_radius now by monnier_2002, before by grey_grains", 1, true) ~= nil, true)
  t.close((d.sublimation_radius / c.sublimation_radius):value(), math.sqrt(2), 10 * eps)
  local now = "sublimation_radius now by monnier_2002, before by grey_grains"
  t.equal(tostring(d:with { distance = "150 pc" }):find(now, 1, true) ~= nil, true, "further on in a chain of with{}")
  local back = d:with { absorption_efficiency_ratio = false }
  t.equal(tostring(back):find("sublimation_radius now by grey_grains, before by monnier_2002", 1, true) ~= nil, true)
  t.equal(tostring(back:with { distance = "150 pc" }):find("now by", 1, true), nil, "as at the start")
  t.equal(tostring(c:with { heating_luminosity = "30 Lsun" }):find "now by", nil)
end)

t.test("using a recipe", function()
  local c = lac.case(single)
  t.close((c:using { array_resolution = "fringe" }.array_resolution / c.array_resolution):value(), 2, 4 * eps)
  t.close((c:using { array_resolution = "fringe" }:with { projected_baseline = "50 m" }.array_resolution / c.array_resolution):value(), 4, 4 * eps)
  t.raises(function() c:using { array_resolution = "fringes" } end, "using: array_resolution has no recipe 'fringes'; it has half_fringe, fringe")
  t.raises(function() c:using { array_resolutoin = "fringe" } end, "using: unknown name 'array_resolutoin'; did you mean array_resolution")
  t.raises(function() c:using { rim_radius = "at_sublimation_radius" } end, "rim_radius is given: it can't come by a recipe too")
  t.raises(function() c:using { sublimation_radius = "kama_2009" } end, "sublimation_radius can't be had by 'kama_2009' from what is given; that recipe wants heating_luminosity, sublimation_temperature")
  t.raises(function() c:using { array_resolution = 3 } end, "array_resolution wants the name of a recipe; got number")
  t.raises(function() c:using "fringe" end, "using wants a table")
end)

t.test("verdicts", function()
  local c = lac.case(single)
  t.equal(c.rim_resolved_by_array:value(), 1.0)
  t.equal(tostring(c.rim_resolved_by_array):find "^yes: rim_elements_by_array [%d.]+ ≥ 1$" ~= nil, true)
  t.equal(tostring(c:with { projected_baseline = "10 m" }.rim_resolved_by_array):find "^no: rim_elements_by_array [%d.]+ < 1$" ~= nil, true)
  t.equal(tostring(c:with { shortest_baseline = "90 m" }.rim_resolved_by_array), "no: rim_size_angle 4 mas > recoverable_scale 3.782 mas")
  t.equal(c:with { elements_required = 4 }.rim_resolved_by_array:value(), 0.0)
  local d = c:with { rim_radius = "0.13 ± 0.02 au" }
  local share = lac.chance(d.rim_resolved_by_array):value()
  -- resolved where 2 r/d >= lambda/2B: r above 0.1276 au at 100 m
  local z = (0.13 - 0.3 / elements(100)) / 0.02
  t.close(share, 0.5 + z / math.sqrt(2 * math.pi), 0.04, "normal distribution, linear about its middle")
  t.equal(tostring(d.rim_resolved_by_array):find "^in %d+ %% of draws.*: rim_elements_by_array .*≥ 1, not in %d+ %% of draws$" ~= nil, true)
  t.equal(lac.mean(d.rim_resolved_by_array):value() > 0, true)
  t.equal(tostring(lac.mean(d.rim_resolved_by_array)):find "yes", nil, "the mean of a verdict is a number")
  t.equal(tostring(c:with { projected_baseline = lac.sweep("10 m", "100 m", 3) }.rim_resolved_by_array), "no  yes  yes\n  along projected_baseline 10 … 100 m, 3 points")
end)

t.test("why: every equation with numbers, what was given, assumed and supposed, conditions, other recipes", function()
  local c = lac.case(star)
  local why = tostring(c:why "gap_resolved_by_array")
  local function has(words) if not why:find(words, 1, true) then error("no \"" .. words .. "\" in\n" .. why, 2) end end
  has "gap_resolved_by_array = in 0 % of draws"
  has "numbers put in: medians of the draws"
  for name in pairs(star) do has("  " .. name .. " = ") end
  has "distance = 156 ± 3 pc   given"
  has "= 4 · π · (156 pc)² · "
  has "Δ_gap = 0.41 a_p q¹ᐟ² h_p^(-3/4) α^(-1/4)"
  has "= 0.41 · 5 au · 0.001005¹ᐟ² · "
  has "kanagawa_2016: Kanagawa, K. D., et al. 2016, PASJ 68, 43"
  has "elements_required = 1   assumed"
  has "supposes no accretion luminosity"
  has "half_fringe: common practice, no source"
  has "gap_size_angle"
  has "> recoverable_scale 11.34 mas"
  has "not checked: radius within half the field"
  has "geometrically resolved only"
  has "array_resolution by fringe: in 0 % of draws (instead of half_fringe)"
  t.equal(tostring(c:why "distance"):find "given" ~= nil, true)
  t.equal(tostring(lac.case {}:why "gap_width"):find "^gap_width can't be derived from what is given; give " ~= nil, true)
  t.raises(function() c:why "gap_wdith" end, "why: unknown name 'gap_wdith'; did you mean gap_width")
  t.raises(function() c:why() end, "why: a name is wanted; got nil")
  why = tostring(lac.case { heating_luminosity = "5000 Lsun", absorption_efficiency_ratio = 2 }:why "sublimation_radius")
  has "beware: monnier_2002 holds for heating_luminosity from 1 to 1000 Lsun; 5000 Lsun here"
  why = tostring(c:with { projected_baseline = lac.sweep("20 m", "330 m", 7) }:why "rim_elements_by_array")
  has "numbers put in: the first point of projected_baseline, medians of the draws"
  for line in why:gmatch "[^\n]+" do t.equal(line:find "\n", nil) end
end)

t.test("every name that can be had can be explained", function()
  local c = lac.case(star):with { inclination = "40 deg", disc_position_angle = "20 deg", baseline_position_angle = "60 deg", stellar_flux_fraction = 0.6,
    radius = "10 au", disc_mass = "0.01 Msun", characteristic_radius = "80 au", surface_density_index = 1, grain_size = "1 mm", grain_density = "1.5 g/cm3",
    telescope_diameter = "8 m", effective_temperature = "8000 K", mass_accretion_rate = "1e-8 Msun/yr" }
  local had = 0
  for _, name in ipairs(c:givens()) do t.equal(tostring(c:why(name)):find "given" ~= nil, true, name) end
  for name in tostring(lac.help()):gmatch "%f[%w_][%l_]+%f[^%w_]" do
    local ok, value = pcall(function() return c[name] end)
    if ok and type(value) == "userdata" then
      had = had + 1
      local why = tostring(c:why(name))
      if #why < 40 or why:find "function: 0x" or why:find "%[[%l_]+%]" then error(name .. ": " .. why) end
    end
  end
  if had < 60 then error(("only %d names"):format(had)) end
end)

t.test("missing", function()
  local c = lac.case(star)
  t.equal(tostring(c:missing "rim_squared_visibility"):find "give inclination, disc_position_angle, baseline_position_angle, stellar_flux_fraction" ~= nil, true)
  t.equal(tostring(c:missing "gap_width"), "gap_width can be had from what is given")
  t.equal(tostring(c:missing "element_diameter"), "element_diameter must be given: no relation gives it")
  t.equal(tostring(lac.case {}:missing "distance"), "distance must be given, or follow from parallax (by parallax)")
  t.equal(tostring(lac.case {}:missing "array_resolution"):find "; give wavelength, projected_baseline %(by half_fringe or fringe%)" ~= nil, true)
  t.equal(tostring(c:missing "distance"), "distance is given")
  local several = tostring(lac.case {}:missing "rim_resolved_by_array")
  t.equal(several:find("\n  or, besides, shortest_baseline, element_diameter (by all_conditions)\n", 1, true) ~= nil, true, several)
  t.equal(several:find("\n  distance [pc]: distance of the star from the observer\n", 1, true) ~= nil, true, several)
  -- the error says the smallest way alone
  t.raises(function() return lac.case {}.rim_resolved_by_array end, "give distance, bolometric_flux, wavelength, projected_baseline %(for rim_elements_by_array")
  t.equal(tostring(c:with { viscosity_alpha = false }:missing "gap_width"):find "viscosity_alpha: .*\n    published values run from 1e%-4 to 1e%-2" ~= nil, true)
  t.equal(c:missing "gap_width".had, true)
  t.raises(function() c:missing "gap" end, "missing: unknown name 'gap'")
  -- what is missing, once given, suffices
  local empty = lac.case {}
  for _, name in ipairs { "gap_width", "rim_resolved_by_array", "toomre_q", "radial_drift_speed", "rim_squared_visibility" } do
    local set = empty:missing(name).sets[1]
    local givens = {}
    for _, word in ipairs(set.names) do givens[word] = true end
    local without = empty:missing(name)
    t.equal(without.had, false, name)
    t.equal(#set.names > 0, true, name)
  end
end)

t.test("check: what the other givens make of each", function()
  local good = lac.case { distance = "156 ± 3 pc", bolometric_flux = "2.4e-11 ± 0.2e-11 W.m**-2", stellar_luminosity = "18 ± 2 Lsun" }:check()
  t.equal(good.agree, true)
  t.equal(tostring(good):find "agree" ~= nil, true)
  local bad = lac.case { distance = "156 ± 3 pc", bolometric_flux = "2.4e-11 ± 0.2e-11 W.m**-2", stellar_luminosity = "5 ± 1 Lsun" }:check()
  t.equal(bad.agree, false)
  t.equal(tostring(bad):find "DISAGREE" ~= nil, true)
  t.equal(#bad.entries, 1, "each equation once")
  local swept = lac.case { rim_radius = lac.sweep("0.1 au", "0.3 au", 3), sublimation_radius = "0.1 au" }:check()
  t.equal(swept.agree, false)
  swept = lac.case { rim_radius = lac.along("a", { "0.1 au", "0.2 au" }), sublimation_radius = lac.along("a", { "0.1005 au", "0.1995 au" }) }:check()
  t.equal(swept.agree, true, "within a per cent")
  t.equal(tostring(lac.case { distance = "3 pc" }:check()), "no given follows from the others: nothing to compare")
end)

t.test("solve: a single number", function()
  local c = lac.case(single)
  local found, note = c:solve("projected_baseline", { rim_elements_by_array = 2 })
  t.close(found:value "m", 100 * 2 / elements(100), 1e-13)
  t.equal(note, nil)
  t.close(c:with { projected_baseline = found }.rim_elements_by_array:value(), 2, 1e-13)
  found = c:solve("distance", { rim_radius_angle = "3 mas" })
  t.close(found:value "pc", 100, 1e-13)
  found, note = c:solve("distance", { rim_radius_angle = "2 mas" })
  t.close(found:value "pc", 150, 1e-13, "where it stands already")
  t.equal(note, nil, "one solution")
end)

t.test("solve: along a sweep, over draws, over both", function()
  local c = lac.case(single):with { rim_radius = lac.sweep("0.1 au", "0.4 au", 4) }
  local found = c:solve("projected_baseline", { rim_elements_by_array = 2 }):value "m"
  for i = 1, 4 do t.close(found[i], 100 * 2 / elements(100) * 3 / i, 1e-13) end
  c = lac.case(single):with { rim_radius = "0.3 ± 0.03 au" }
  local baseline, radius = c:solve("projected_baseline", { rim_elements_by_array = 2 }):value "m", c.rim_radius:value "au"
  for i = 1, #baseline, 501 do t.close(baseline[i], 100 * 2 / elements(100) * 0.3 / radius[i], 1e-13) end
  lac.settings { draws = 50 }
  c = lac.case(single):with { rim_radius = "0.3 ± 0.03 au", wavelength = lac.sweep("1.65 um", "3.3 um", 2) }
  local grid = c:solve("projected_baseline", { rim_elements_by_array = 2 })
  lac.settings { draws = 10000 }
  t.close((grid:at { wavelength = 2, draw = 7 } / grid:at { wavelength = 1, draw = 7 }):value(), 2, 1e-13)
  t.equal(grid:at { wavelength = 1 }:axes()[1].name, "draw")
  c = lac.case(single)
  local goals = c:solve("distance", { rim_radius_angle = lac.along("a", { "3 mas", "6 mas" }) }):value "pc"
  t.close(goals[2], 50, 1e-13, "a goal with an axis")
end)

t.test("solve: the chance of a verdict", function()
  local c = lac.case(single):with { rim_radius = "0.06 ± 0.01 au", distance = "150 ± 5 pc" }
  local found = c:solve("projected_baseline", { rim_resolved_by_array = 0.9 })
  local function chance(x) return lac.chance(c:with { projected_baseline = x }.rim_resolved_by_array):value() end
  t.equal(chance(found) >= 0.9, true, "at the baseline found")
  t.equal(chance(found) <= 0.9 + 1e-4 + 1e-12, true, "no more draws than need be")
  t.equal(chance(found * (1 - 1e-9)) < 0.9, true, "just below it")
  t.close(c:solve("projected_baseline", { rim_resolved_by_array = "90 %" }):value "m", found:value "m", 1e-12)
  local by_wavelength = c:with { wavelength = lac.sweep("1.65 um", "3.3 um", 2) }:solve("projected_baseline", { rim_resolved_by_array = 0.9 }):value "m"
  t.close(by_wavelength[1], found:value "m", 1e-9)
  t.close(by_wavelength[2], 2 * found:value "m", 1e-9)
  local none, why = c:with { wavelength = lac.sweep("1.65 um", "3.3 um", 2) }:solve("projected_baseline", { rim_resolved_by_array = 0.9 }, { between = { "1 m", "10 m" } })
  t.equal({ none, why:find "the share is 0 %% throughout$" ~= nil }, { nil, true })
  none, why = c:solve("projected_baseline", { rim_resolved_by_array = 0.9 }, { between = { "1 m", "10 m" } })
  t.equal(none, nil)
  t.equal(why, "no projected_baseline between 1 m and 10 m gives rim_resolved_by_array in 90 % of draws: the share is 0 % throughout")
  local _, way = c:solve("projected_baseline", { rim_resolved_by_array = 0.9 })
  t.equal(way, "rim_resolved_by_array in at least 90 % of draws from there up")
  t.raises(function() c:solve("projected_baseline", { rim_resolved_by_array = 90 }) end, "a share above 0 and up to 1; got 90")
  t.raises(function() c:solve("projected_baseline", { rim_resolved_by_array = "often" }) end, "a share above 0 and up to 1; got often")
end)

t.test("solve: where a single verdict turns to yes", function()
  local c = lac.case(single)
  local found = c:solve("projected_baseline", { rim_resolved_by_array = true })
  t.close(found:value "m", 100 / elements(100), 1e-12)
  t.equal(c:with { projected_baseline = found }.rim_resolved_by_array:value(), 1.0)
  local _, way = c:solve("projected_baseline", { rim_resolved_by_array = true })
  t.equal(way, "rim_resolved_by_array is yes from there up")
  local distance, other_way = c:solve("distance", { rim_resolved_by_array = true })
  t.close(distance:value "pc", 150 * elements(100), 1e-12, "the farthest at which it is resolved")
  t.equal(other_way, "rim_resolved_by_array is yes from there down")
  local none, why = c:solve("projected_baseline", { rim_resolved_by_array = true }, { between = { "1 m", "2 m" } })
  t.equal({ none, why }, { nil, "no projected_baseline between 1 m and 2 m turns rim_resolved_by_array: it is no throughout" })
end)

t.test("solve: what is assumed, and where some draws have no solution", function()
  -- R_sub = sqrt(L / (16 pi sigma)) / T^2 (see test_rim): the temperature goes as the root of the radius
  local c = lac.case { stellar_luminosity = "20 Lsun" }
  local ratio = (c.rim_radius / lac.quantity "0.2 au"):value()
  t.close(c:solve("sublimation_temperature", { rim_radius = "0.2 au" }):value "K", 1500 * math.sqrt(ratio), 1e-12)
  local d = lac.case(single):with { rim_radius = "0.3 ± 0.05 au" }
  local _, note = d:solve("projected_baseline", { rim_elements_by_array = 2 }, { between = { "1 m", tostring(100 * 2 / elements(100)) .. " m" } })
  t.equal(note:find "^where undefined, no projected_baseline between 1 m and [%d.]+ m gives rim_elements_by_array = 2$" ~= nil, true, note)end)

t.test("solve: several solutions, none, and a search of one's own", function()
  -- the gap's depth and the like are monotonous: an own row with a parabola has two solutions, by its closed form
  lac.quantity { name = "arch", unit = "1", meaning = "an invented parabola" }
  lac.relation { gives = "arch", by = "parabola", from = { "grain_size" }, function(s)
    local x = s / lac.quantity "1 mm"
    return (x - 1) * (x - 3)
  end }
  local c = lac.case { grain_size = "1.2 mm" }
  local found, note = c:solve("grain_size", { arch = 0 })
  t.close(found:value "mm", 1, 1e-12)
  t.equal(note:find "^the nearest of 2 solutions between " ~= nil, true)
  found, note = c:solve("grain_size", { arch = 0 }, { between = { "2 mm", "9 mm" } })
  t.close(found:value "mm", 3, 1e-12)
  t.equal(note, nil)
  local none, why = c:solve("grain_size", { arch = -2 })
  t.equal(none, nil)
  t.equal(why:find "^no grain_size between .* and .* gives arch = %-2: it runs from %-0.9.* to .* there$" ~= nil, true, why)
  local swept, note2 = c:solve("grain_size", { arch = lac.along("a", { 0, -2 }) })
  t.equal(swept:value "mm"[2] ~= swept:value "mm"[2], true, "undefined where there is none")
  t.equal(note2 == nil or type(note2) == "string", true)
end)

t.test("solve: a pole is no solution", function()
  lac.quantity { name = "pole", unit = "1", meaning = "invented: one over what is left to 2 mm" }
  lac.relation { gives = "pole", by = "hyperbola", from = { "grain_size" }, function(s) return 1 / (s / lac.quantity "1 mm" - 2) end }
  local none, why = lac.case { grain_size = "1 mm" }:solve("grain_size", { pole = 0 }, { between = { "1 mm", "3 mm" } })
  t.equal(none, nil)
  t.equal(type(why), "string")
end)

t.test("solve: refusals", function()
  local c = lac.case(single)
  t.raises(function() c:solve("projected_baseline") end, "solve wants one goal, like {gap_elements_by_array = 2}")
  t.raises(function() c:solve("projected_baseline", { rim_radius_angle = 1, rim_elements_by_array = 2 }) end, "solve wants one goal")
  t.raises(function() c:solve("telescope_diameter", { rim_elements_by_array = 2 }) end, "telescope_diameter is not given in this case; only what is given or assumed")
  t.raises(function() c:solve("projected_baseline", { rim_radius_angle = "2 mas" }) end, "rim_radius_angle doesn't depend on projected_baseline in this case")
  t.raises(function() c:solve("projected_basline", { rim_elements_by_array = 2 }) end, "unknown name 'projected_basline'; did you mean projected_baseline")
  t.raises(function() c:solve("projected_baseline", { gap_elements_by_array = 2 }) end, "gap_elements_by_array can't be derived from what is given")
  t.raises(function() c:solve("projected_baseline", { rim_elements_by_array = "2 K" }) end, "rim_elements_by_array wants a plain number")
  t.raises(function() c:solve("projected_baseline", { rim_elements_by_array = 2 }, { betwen = { 1, 2 } }) end, "solve: unknown option 'betwen'")
  t.raises(function() c:solve("projected_baseline", { rim_elements_by_array = 2 }, { between = "1 m" }) end, "between wants two bounds")
  t.raises(function() c:solve("projected_baseline", { rim_elements_by_array = 2 }, { between = { "9 m", "1 m" } }) end, "between wants a lower and a higher bound")
  t.raises(function() c:solve("projected_baseline", { rim_elements_by_array = 2 }, { between = { "1 K", "9 K" } }) end, "projected_baseline wants a length")
end)

t.test("names and rows of the user's own", function()
  local before = lac.case { rim_radius = "0.3 ± 0.03 au" }
  lac.quantity { name = "dust_wall_height", unit = "au", meaning = "height of an invented wall", range = "> 0", symbol = "H_w", on_sky = true }
  lac.relation { gives = "dust_wall_height", by = "tenth", from = { "rim_radius" }, function(r) return 0.1 * r end,
    source = "invented", equation = "[dust_wall_height] = [rim_radius] / 10", supposes = "that walls scale" }
  t.close(lac.case { rim_radius = "0.3 au" }.dust_wall_height:value "au", 0.03, 4 * eps)
  t.close(lac.case { rim_radius = "0.3 au", distance = "100 pc" }.dust_wall_height_angle:value "mas", 0.3, 4 * eps)
  t.close(before.dust_wall_height:median():value "au", 0.03, 0.01, "a case made before")
  local grid = lac.case { rim_radius = lac.sweep("0.1 au", "0.3 au", 3), distance = "100 ± 3 pc" }.dust_wall_height_angle
  local d = lac.case { distance = "100 ± 3 pc" }.distance:value "pc"
  t.close(grid:at { rim_radius = 3, draw = 5 }:value "mas", 30 / d[5], 1e-14)
  local why = tostring(lac.case { rim_radius = "0.3 au" }:why "dust_wall_height")
  t.equal(why:find("H_w = R_rim/10", 1, true) ~= nil and why:find("tenth: invented", 1, true) ~= nil and why:find("supposes that walls scale", 1, true) ~= nil, true, why)
  t.equal(tostring(lac.help "dust_wall_height"):find "height of an invented wall" ~= nil, true)
  t.raises(function() return lac.case { dust_wall_height = "-1 au" } end, "dust_wall_height must be > 0; got %-1 au")
  lac.relation { gives = "dust_wall_height", by = "downwards", from = { "ring_radius" }, function(r) return 10 * lac.au - r end }
  t.raises(function() return lac.case { ring_radius = "11 au" }.dust_wall_height end,
    "dust_wall_height is undefined: by downwards, ring_radius = 11 au gives no value that is > 0")
  t.equal(lac.undefined(lac.case { ring_radius = lac.sweep("9 au", "11 au", 3) }.dust_wall_height, "ring_radius"):value(), 2.0)
  -- an own recipe for a known name stands behind the built-in ones, and can be asked for
  lac.relation { gives = "gap_width", by = "five_hill", from = { "hill_radius" }, function(r) return 5 * r end }
  local c = lac.case(star):with { distance = "156 pc", bolometric_flux = "2.4e-11 W/m2" }
  t.close((c:using { gap_width = "five_hill" }.gap_width / c.hill_radius):value(), 5, 4 * eps)
  t.equal(tostring(c:why "gap_width"):find("gap_width by five_hill", 1, true) ~= nil, true)
end)

t.test("an own row is called with more elements than a piece", function()
  lac.settings { draws = 150000 }
  local q = lac.case { rim_radius = "0.3 ± 0.03 au" }.dust_wall_height / lac.case { rim_radius = "0.3 ± 0.03 au" }.rim_radius
  t.close(q:mean():value(), 0.1, 1e-12)
  t.close(lac.highest(q, "draw"):value(), 0.1, 1e-12)
  lac.settings { draws = 10000 }
end)

t.test("own rows that raise or return nonsense", function()
  local function row(by, f)
    lac.quantity { name = by, unit = "au", meaning = "invented" }
    lac.relation { gives = by, by = "row_" .. by, from = { "rim_radius" }, f }
    return function(radius) return function() return lac.case { rim_radius = radius }[by]:value "au" end end
  end
  local cases = {
    { "raising", function() error "the invented row failed" end, "the invented row failed" },
    { "raising_table", function() error { 1 } end, "table" },
    { "nothing", function() end, "the relation for nothing by 'row_nothing' returned nothing; wanted is a length" },
    { "a_text", function() return "soup" end, "by 'row_a_text' returned \"soup\"; wanted is a length" },
    { "a_table", function() return {} end, "by 'row_a_table' returned a table; wanted is a length" },
    { "wrong_dimension", function() return 3 * lac.K end, "by 'row_wrong_dimension' returned 3 K; wanted is a length" },
    { "plain_number", function() return 3 end, "by 'row_plain_number' returned 3; wanted is a length" },
    { "comparing", function(r) return r < 1 * lac.au and r or 2 * r end, nil, "above" },
    { "another_axis", function() return lac.along("x", { 1, 2, 3 }) * lac.au end, "returned another axis" },
    { "its_own_draws", function(r) return r * lac.quantity "1 ± 0.1" end, "returned another axis" },
  }
  for _, one in ipairs(cases) do
    local ask = row(one[1], one[2])
    for _, radius in ipairs { "0.3 au", "0.3 ± 0.03 au", lac.sweep("0.1 au", "0.3 au", 3) } do
      local along = radius ~= "0.3 au"
      local wanted = one[3] or (along and one[4])
      if wanted then
        local message = t.raises(ask(radius), wanted, one[1])
        t.equal(message:find "\n", nil, "one line")
      end
    end
    collectgarbage()
  end
  t.equal(lac.case { rim_radius = "0.3 au" }.comparing:value "au", 0.3 * 149597870700.0 / 149597870700.0)
  row("not_a_number", function(r) return r * (0 / 0) end)
  t.raises(function() return lac.case { rim_radius = "0.3 au" }.not_a_number end, "not_a_number is undefined: by row_not_a_number, rim_radius = 0.3 au gives no value")
  t.equal(tostring(lac.case { rim_radius = "0.3 ± 0.03 au" }.not_a_number), "undefined (100 % of draws undefined)")
end)

t.test("names and rows that can't be added", function()
  t.raises(function() lac.quantity { name = "gap_width", unit = "au", meaning = "again" } end, "quantity: there is a quantity 'gap_width' already")
  t.raises(function() lac.quantity { unit = "au", meaning = "again" } end, "quantity wants name")
  t.raises(function() lac.quantity { name = "one_more", unit = "parsecks", meaning = "invented" } end, "quantity 'one_more': unknown unit 'parsecks'")
  t.raises(function() lac.quantity { name = "one_more", unit = "au", meaning = "invented", range = "large" } end, "can't read the range \"large\"")
  t.raises(function() lac.quantity { name = "one more", unit = "au", meaning = "invented" } end, "a name is made of letters")
  t.raises(function() lac.quantity { name = ("k"):rep(64), unit = "au", meaning = "invented" } end, "at most 63 in all")
  t.raises(function() lac.quantity { name = "one_more", unit = "kg", meaning = "invented", on_sky = true } end, "only a length is seen on the sky; kg is none")
  t.raises(function() lac.quantity { name = 5, unit = "au", meaning = "invented" } end, "quantity: name wants a text; got number")
  t.raises(function() lac.quantity { name = "au", unit = "au", meaning = "invented" } end, "quantity: au is a unit already")
  t.raises(function() lac.quantity { name = "help", unit = "au", meaning = "invented" } end, "quantity: help is a word of the language already")
  t.raises(function() lac.quantity { name = "one_more", unit = "au", meaning = "invented", symbl = "x" } end, "quantity: unknown field 'symbl'")
  t.raises(function() lac.relation { gives = "gap_wdith", from = { "rim_radius" }, function() end } end, "unknown name 'gap_wdith'; did you mean gap_width")
  t.raises(function() lac.relation { gives = "gap_width", from = { "rim_raduis" }, function() end } end, "unknown name 'rim_raduis'; did you mean rim_radius")
  t.raises(function() lac.relation { gives = "gap_width", from = {}, function() end } end, "1 to 12 names in from; got 0")
  t.raises(function() lac.relation { gives = "gap_width", function() end } end, "relation for gap_width wants from = {names}")
  t.raises(function() lac.relation { gives = "gap_width", from = { "rim_radius" } } end, "relation for gap_width wants a function of its inputs; got nothing")
  t.raises(function() lac.relation { gives = "gap_width", by = "kanagawa_2016", from = { "rim_radius" }, function() end } end, "relation: gap_width has a recipe 'kanagawa_2016' already")
  t.raises(function() lac.relation { gives = "rim_radius", by = "back", from = { "rim_size_angle", "distance" }, function(a) return a end } end, "relations would form a circle")
  t.raises(function() lac.relation { gives = "gap_width", by = "odd", from = { "rim_radius" }, function(r) return r end, sorce = "x" } end, "relation: unknown field 'sorce'")
  t.raises(function() lac.relation { gives = "gap_width", by = "odd", from = { "rim_radius" }, function(r) return r end, equation = "[gap_width] = {" } end, "relation: equation '%[gap_width%] = {', position %d+")
  t.raises(function() lac.relation { gives = "gap_width", by = "odd", from = { "rim_radius" }, function(r) return r end, equation = "[gap_wdith] = 2" } end,
    "relation: its equation has the unknown name 'gap_wdith'; did you mean gap_width")
  t.raises(function() lac.relation "gap_width" end, "relation wants a table; got string")
end)

t.test("objects are carried along", function()
  local c = lac.case { distance = "150 pc", band = "H" }
  t.equal(tostring(c.band), "2MASS H (1.662 um)")
  t.equal(rawequal(c:with { distance = "160 pc" }.band, c.band), true)
  t.equal(tostring(c:with { band = "K" }.band), "2MASS Ks (2.159 um)")
  t.equal(tostring(c):find("band = 2MASS H (1.662 um)", 1, true) ~= nil, true)
  t.raises(function() return c:with { band = false }.band end, "band is not given; give band = \"...\"")
end)

t.test("help reaches every name and every word", function()
  local words = 0
  for line in tostring(lac.help()):gmatch "\n  ([^\n]+)" do
    for word in line:gmatch "%S+" do
      local name = word:match "^[%w_]+$" -- not a method
      if name and not tostring(lac.help(name)):find("^" .. name) then error("no help on " .. name) end
      words = words + 1
    end
  end
  t.equal(words > 150, true, words .. " words in the map")
  for word in pairs(lac) do
    if tostring(lac.help(word)):find "^nothing about" then error("no help on " .. word) end
  end
  t.equal(tostring(lac.help "au"):find("1.495978707e11 m", 1, true) ~= nil, true)
  t.equal(tostring(lac.help "a_p"):find "planet_semi_major_axis" ~= nil, true, "a synonym")
  t.equal(tostring(lac.help "hill_radius_angle"):find "on the sky" ~= nil, true)
  t.equal(tostring(lac.help "sublimation temperature"):find "\n  sublimation_temperature " ~= nil, true)
  t.equal(tostring(lac.help "gap_wdith"):find "nearest are gap_width" ~= nil, true)
  t.equal(tostring(lac.help(lac.case(single).rim_radius)):find "^rim_radius" ~= nil, true)
  t.raises(function() lac.help {} end, "help wants a name, a word or a unit as a text")
end)

t.finish()
