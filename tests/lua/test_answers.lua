-- SPDX-License-Identifier: GPL-3.0-or-later
-- What the prompt prints: each kind of answer says what it is to say, nothing is wider than 80 columns, nothing is a screenful of numbers.
-- Numbers shown are compared with the numbers that they stand for. The star is invented.
package.path = "tests/lua/?.lua;" .. package.path
local t = require "harness"
local lac = require "lacuna"
local format = dofile "bindings/format.lua"

lac.settings { seed = 0, draws = 10000 }
local star = { distance = "156 ± 3 pc", bolometric_flux = "2.4e-11 ± 0.2e-11 W.m**-2", stellar_mass = "1.9 Msun", wavelength = "1.65 um", projected_baseline = "92 m" }
local sharp = { distance = "156 pc", bolometric_flux = "2.4e-11 W.m**-2", wavelength = "1.65 um" }

local function has(text, part, label) t.equal(text:find(part, 1, true) ~= nil, true, (label or part) .. " in\n" .. text) end
local function has_no(text, part) t.equal(text:find(part, 1, true), nil, part .. " in\n" .. text) end

-- An answer's lines; none has control characters in it, nor blanks at its end.
local function lines_of(...)
  local text, lines = lac.show(...), {}
  t.equal(text:find "[\0-\9\11-\31]", nil, "control characters")
  for line in (text .. "\n"):gmatch "([^\n]*)\n" do
    lines[#lines + 1] = line
    t.equal(line:find "%s$", nil, "blanks at the end of '" .. line .. "'")
  end
  return lines, text
end

local function with(changes, of)
  local givens = {}
  for name, value in pairs(of or sharp) do givens[name] = value end
  for name, value in pairs(changes) do givens[name] = value end
  return lac.case(givens)
end

t.test("a length has its angle beside it, where the distance is known", function()
  local c = with { rim_radius = "0.3 au" }
  t.equal(lac.show(c.rim_radius), "0.3 au   1.923 mas on the sky") -- 0.3 au over 156 pc
  t.equal(lac.show(c.rim_radius:as "km"), "4.488e7 km")
  t.equal(tostring(c.rim_radius), "0.3 au", "in text it is one thing")
  t.equal(lac.show(lac.case { rim_radius = "0.3 au" }.rim_radius), "0.3 au")
  t.equal(lac.show(lac.case { rim_radius = "0.3 au" }.rim_radius + 1 * lac.au), "1.3 au")
end)

t.test("an ensemble has its interval and a histogram", function()
  local c = lac.case(star)
  local lines = lines_of(c.rim_radius)
  t.equal(#lines, 2)
  t.equal(lines[1], tostring(c.rim_radius) .. "   " .. tostring(c.rim_radius_angle) .. " on the sky")
  local low, bars, high, words = lines[2]:match "^  ([%d.]+) (.-) ([%d.]+) au   (.*)$"
  t.equal(format.width(bars), 30, "bins")
  t.equal(words, "99 % of the draws")
  t.close(tonumber(low), c.rim_radius:quantile(0.005):value "au", 0.01, "the lower end")
  t.close(tonumber(high), c.rim_radius:quantile(0.995):value "au", 0.01, "the upper end")
  has(lines_of(with { viscosity_alpha = lac.spread.log_uniform(1e-4, 1e-2) }.viscosity_alpha)[2], "logarithmic")
end)

t.test("ensembles with little in them", function()
  lac.settings { draws = 1 }
  t.equal(#lines_of(lac.case { gap_depth = lac.spread.uniform(0.1, 0.9) }.gap_depth), 1, "one draw has no histogram")
  lac.settings { draws = 10000 }
  local q = lac.case { gap_depth = lac.spread.uniform(0.1, 0.9) }.gap_depth
  t.equal(lac.show(0 * q), "0", "all equal")
  t.equal(lac.show(q / 0), "infinite", "all infinite")
  t.equal(lac.show(lac.log(-q)), "undefined (100 % of draws undefined)")
  has(lac.show(lac.log(q - 0.5)), "50 % of draws undefined")
  local two = 1 + lac.above(q, 0.5)
  local lines = lines_of(two)
  local bars = lines[2]:match "^  1 (.-) 2   99 %% of the draws$"
  t.equal(bars:find "^[▁▂▃▄▅▆▇█]+ +[▁▂▃▄▅▆▇█]+$" ~= nil, true, "two values, two bars")
  has(lac.show(1 / (q - q * lac.below(q, 0.4))), "infinite", "some infinite")
  t.equal(lac.show(lac.above(q, 0.5)):find "^in %d+ %% of draws$" ~= nil, true, "a yes or no has no histogram")
  lac.settings { draws = 4 }
  local few = lines_of(lac.case { gap_depth = lac.spread.uniform(0.1, 0.9) }.gap_depth)
  lac.settings { draws = 10000 }
  t.equal(#few, 2)
  t.equal(format.width(few[2]:match "^  %S+ (.*) %S+   99"), 4, "few draws, few bins")
end)

t.test("undefined draws are told once, with what the histogram leaves out", function()
  local lines = lines_of(with { gap_width = lac.spread.uniform("6 au", "12 au"), planet_semi_major_axis = "5 au" }.gap_inner_radius)
  t.equal(lines[1]:find "^0.%d+ ± 0.%d+ au %(3%d %% of draws undefined%)   [%d.]+ ± [%d.]+ mas on the sky$" ~= nil, true, lines[1]) -- a third: 10 to 12 au of 6 to 12
  t.equal(lines[2]:find "99 %% of the defined draws$" ~= nil, true, lines[2])
end)

t.test("a histogram of very many draws stores none of them", function()
  local before = lac.settings().memory
  lac.settings { draws = 4000000, memory = 24 } -- they would take 32 MB
  local q = lac.case(star).rim_radius
  t.raises(function() return q:stored() end, "memory")
  local lines = lines_of(q)
  lac.settings { draws = 10000, memory = before }
  local small = lac.case(star).rim_radius
  t.close(tonumber(lines[2]:match "^  ([%d.]+)"), small:quantile(0.005):value "au", 0.03)
end)

t.test("a sweep is a plot, and some of its numbers", function()
  local c = with { projected_baseline = lac.sweep("20 m", "330 m", 100) }
  local lines, text = lines_of(c.rim_elements_by_array)
  t.equal(lines[1], "rim_elements_by_array")
  has(text, "projected_baseline (m), 100 points")
  t.equal(#lines, 16, "lines")
  for _, line in ipairs(lines) do t.equal(format.width(line) <= 80, true, "80 columns: " .. line) end
  local baselines, elements = {}, {}
  for number in lines[15]:gmatch " ([%d.]+)" do baselines[#baselines + 1] = tonumber(number) end
  for number in lines[16]:gmatch " ([%d.]+)" do elements[#elements + 1] = tonumber(number) end
  t.equal(#baselines == #elements and #elements > 4, true)
  for i, baseline in ipairs(baselines) do
    t.close(elements[i], with { projected_baseline = lac.quantity(baseline, "m") }.rim_elements_by_array:value(), 2e-3)
  end
  t.equal({ baselines[1], baselines[#baselines] }, { 20, 330 }, "from end to end")
  t.equal(lac.show(c.projected_baseline), "20 … 330 m, 100 points", "what is swept itself")
end)

t.test("a sweep of few points: all its numbers, no plot of two", function()
  t.equal(lac.show(with { projected_baseline = lac.sweep { "50 m", "100 m" } }.array_resolution), [[
projected_baseline     50    100  m
array_resolution    3.403  1.702  mas]]) -- 1.65 um / (2 · 50 m) = 3.403 mas
  local c = with { gap_width = "3 au", planet_semi_major_axis = lac.sweep("1 au", "5 au", 20) }
  local text = lac.show(c.gap_inner_radius)
  t.equal(text:match "^[^\n]*", "gap_inner_radius (au)   × 3 of 20 undefined")
  has(text, "undefined", "among the numbers too")
  local few = with { gap_width = "3 au", planet_semi_major_axis = lac.sweep { "1 au", "2 au" } }
  t.equal(lac.show(few.gap_inner_radius), [[
planet_semi_major_axis          1    2  au
gap_inner_radius        undefined  0.5  au
  (1 of 2 points undefined)]])
end)

t.test("with draws the median and its band; nothing is hidden", function()
  local text = lac.show(with({ projected_baseline = lac.sweep("20 m", "330 m", 5) }, star).rim_elements_by_array)
  has(text, "rim_elements_by_array, median and 68 % of the draws")
  has(text, "▒")
  has(lac.show(2 * lac.case { wavelength = lac.sweep("1 um", "2 um", 5) }.wavelength), "value (µm)")
  has(lac.show(with({ projected_baseline = lac.sweep("20 m", "330 m", 3) }, star).rim_elements_by_array), "\n  (medians)")
end)

t.test("a verdict over a sweep: its share, or where it turns", function()
  local text = lac.show(with({ projected_baseline = lac.sweep("20 m", "330 m", 30) }, star).rim_resolved_by_array)
  has(text, "rim_resolved_by_array, share of draws (%)")
  has(text, " m\nrim_resolved_by_array  no ")
  local c = with { projected_baseline = lac.sweep("20 m", "330 m", 100) }
  local lines = lines_of(c.rim_resolved_by_array)
  t.equal(lines[1], "rim_resolved_by_array   along projected_baseline, 100 points")
  local last_no, first_yes = tonumber(lines[2]:match "^no  20 … ([%d.]+) m$"), tonumber(lines[3]:match "^yes  ([%d.]+) … 330 m$")
  local turn = with { projected_baseline = "100 m" }:solve("projected_baseline", { rim_elements_by_array = 1 }):value "m"
  t.equal(last_no < turn and turn < first_yes and first_yes - last_no < 4, true, "it turns where one element is reached")
end)

t.test("a grid is a map", function()
  local c = with { projected_baseline = lac.sweep("20 m", "330 m", 30), wavelength = lac.sweep("1 um", "4 um", 10) }
  local lines, text = lines_of(c.rim_elements_by_array)
  has(lines[1], "rim_elements_by_array")
  t.equal(lines[2], "wavelength (µm), 10 points")
  has(text, "projected_baseline (m), 30 points")
  local low, high = lines[1]:match "([%d.]+) %[ ░▒▓█%] ([%d.]+)"
  t.close(tonumber(low), c.rim_elements_by_array:at { projected_baseline = 1, wavelength = 10 }:value(), 1e-3, "longest waves, shortest baseline")
  t.close(tonumber(high), c.rim_elements_by_array:at { projected_baseline = 30, wavelength = 1 }:value(), 1e-3)
  has(lac.show(c.rim_resolved_by_array), "filled yes, empty no")
  local both = with({ projected_baseline = lac.sweep("20 m", "330 m", 8), wavelength = lac.sweep("1 um", "4 um", 4) }, star)
  has(lac.show(both.rim_resolved_by_array), "(% of draws)")
  has(lac.show(both.rim_elements_by_array), "medians")
end)

t.test("a case: what is given, what was derived so far, what rests on assumptions", function()
  local c = lac.case(star)
  local fresh = lac.show(c)
  has(fresh, "  given\n    distance            156 ± 3 pc\n")
  has(fresh, "derived so far: nothing yet")
  has_no(fresh, "assumptions")
  local _ = c.rim_radius, c.rim_size_angle
  c:why "array_resolution" -- a derivation that is looked at is no answer
  local _, text = lines_of(c)
  has(text, "  derived so far\n    rim_radius      0.1471 ± 0.0069 au\n    rim_size_angle  1.886 ± 0.079 mas\n")
  has(text, "    sublimation_temperature = 1500 K (common practice, no source)\n")
  has(text, "    heating_luminosity by star_alone supposes no accretion luminosity\n")
  has_no(text, "array_resolution")
  has_no(text, "elements_required")
  has_no(lac.show(c:with { projected_baseline = "330 m" }), "rim_radius", "another case has its own answers")
  for line in text:gmatch "[^\n]+" do t.equal(format.width(line) <= 80, true, "80 columns: " .. line) end
end)

t.test("recipes that with and using change are said, in the case and with its answers", function()
  local c = lac.case(star)
  local other = c:with { cooling_efficiency = 0.4, backwarming_factor = 2 }
  has(lac.show(other), "  recipes that changed\n    sublimation_radius now by kama_2009, before by grey_grains\n")
  has(lac.show(other.rim_size_angle), "\n  sublimation_radius now by kama_2009, before by grey_grains")
  has_no(lac.show(other.rim_size_angle), "beware")
  local bright = other:with { bolometric_flux = "2.4e-9 W.m**-2" } -- a hundred times as much: beyond the range that the recipe's row states
  has(lac.show(bright.rim_size_angle), "\n  beware: kama_2009 holds for heating_luminosity from 1 to 1000 Lsun; 1826 ± 69 Lsun here, outside in 100 %")
  has_no(lac.show(bright.array_resolution), "beware")
  has_no(lac.show(other.array_resolution), "kama_2009")
  has_no(lac.show(c:with { projected_baseline = "330 m" }), "changed")
  local chosen = c:using { array_resolution = "fringe" }
  local _ = chosen.array_resolution
  has(lac.show(chosen), "array_resolution by fringe, chosen by using")
end)

t.test("plain tables are shortened, functions are named", function()
  t.equal(lac.show { 1, 2, 3 }, "{1, 2, 3}")
  t.equal(lac.show { "x", a = 1, b = { 2, { 3, { 4 } } }, [true] = 0.1 }, '{"x", a = 1, b = {2, {3, {…}}}, [true] = 0.1}')
  t.equal(lac.show {}, "{}")
  local numbers, round = {}, {}
  for i = 1, 1000 do numbers[i] = i end
  local text = lac.show(numbers)
  t.equal(text:find "^{1, 2, 3, .*, … 1000 numbers}$" ~= nil and format.width(text) <= 80, true, text)
  round.itself = round
  t.equal(lac.show(round), "{itself = {itself = {itself = {…}}}}")
  t.equal(lac.show { lac.quantity "3 K", false }, "{3 K, false}")
  t.equal(lac.show(setmetatable({}, { __index = function() error "asked" end })):find "^table: " ~= nil, true, "a table with a metatable is its owner's affair")
  has(lac.show(lac.hill_radius), "hill_radius")
  has(lac.show(lac.sqrt), "sqrt(q)")
  has(lac.show(lac.case {}.with), 'help "with"')
  t.equal(lac.show(function() end), "a function")
  t.equal(lac.show(nil, "why not"), "why not")
  t.equal(lac.show "a line", '"a line"')
  t.equal(lac.show "two\nlines", "two\nlines", "a page is not quoted")
  t.equal(lac.show "two\n\27lines", '"two\\\n\\27lines"', "but for what a terminal would obey")
end)

t.test("a failed derivation names the branch that failed", function()
  local c = lac.case(star)
  t.raises(function() return c.gap_width_angle end,
    "gap_width_angle can't be derived from what is given; give planet_mass, planet_semi_major_axis, viscosity_alpha %(for gap_width by kanagawa_2016%)$")
  t.raises(function() return c.gap_width end, "give planet_mass, planet_semi_major_axis, viscosity_alpha %(by kanagawa_2016%)$")
  t.raises(function() return c.gap_resolved_by_array end, "viscosity_alpha %(for gap_width by kanagawa_2016%)$", "the smallest set alone")
  t.raises(function() return lac.case {}.rim_radius end, "give distance, bolometric_flux %(for stellar_luminosity by flux_and_distance%)$")
  t.raises(function() return c.toomre_q end, "give radius %(by toomre_1964 from sound_speed, keplerian_frequency, surface_density%)$")
  local wide = with { gap_width = "20 au", planet_semi_major_axis = "5 au" }
  t.raises(function() return wide.gap_inner_radius_angle end,
    "gap_inner_radius_angle: gap_inner_radius is undefined: by definition, planet_semi_major_axis = 5 au and gap_width = 20 au give no value that is > 0$")
  t.raises(function() return lac.case { wavelength = "0.2 um", visual_extinction = "1 mag" }.extinction end,
    "give no value; cardelli_1989 holds for wavelength from 0.303 to 3.5 µm$")
end)

t.test("more is refused where nothing is left", function()
  t.raises(lac.more, "there is no more to show")
end)

t.finish()
