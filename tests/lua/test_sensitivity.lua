-- SPDX-License-Identifier: GPL-3.0-or-later
-- c:sensitivity: first-order variance shares against closed forms, whatever the seed; slopes and turns against closed forms; what it prints;
-- bad input. The closed forms: for a sum of independent terms the share of each is its variance over the sum of all (Sobol' 1993,
-- Mathematical Modelling and Computational Experiment 1, 407, from memory); for a product of independent factors of relative variance v_i
-- it is v_i / (prod(1 + v_j) - 1), which follows from E[y | x_i] = x_i prod of the other means.
local t = require "harness"
local lac = require "lacuna"

local WITHIN, SEEDS = 0.02, { 0, 1, 2, 3, 4, 5, 6, 7 }

for _, name in ipairs { "first", "second", "third" } do
  lac.quantity { name = "term_" .. name, unit = "m", meaning = "an invented length" }
  lac.quantity { name = "factor_" .. name, unit = "m", meaning = "an invented length", range = "> 0" }
  lac.quantity { name = "angle_" .. name, unit = "rad", meaning = "an invented angle" }
end
lac.quantity { name = "sum_of_terms", unit = "m", meaning = "an invented sum" }
lac.quantity { name = "product_of_factors", unit = "m3", meaning = "an invented product" }
lac.quantity { name = "ishigami", unit = "1", meaning = "Ishigami's function" }
lac.relation { gives = "sum_of_terms", from = { "term_first", "term_second", "term_third" }, function(a, b, c) return a + 2 * b + 0.5 * c end }
lac.relation { gives = "product_of_factors", from = { "factor_first", "factor_second", "factor_third" }, function(a, b, c) return a * b * c end }
lac.relation { gives = "ishigami", from = { "angle_first", "angle_second", "angle_third" }, function(a, b, c)
  local z = c / lac.rad
  return lac.sin(a) + 7 * lac.sin(b) ^ 2 + 0.1 * z * z * z * z * lac.sin(a)
end }

local function by_name(sensitivity)
  local found = {}
  for _, given in ipairs(sensitivity.givens) do found[given.name] = given end
  return found
end

-- All shares within 0.02 of the known ones, for all seeds; what is left is what interactions carry.
local function shares_are(make_case, name, known)
  local left = 1
  for _, share in pairs(known) do left = left - share end
  for _, seed in ipairs(SEEDS) do
    lac.settings { seed = seed }
    local s = make_case():sensitivity(name)
    local found = by_name(s)
    for given, share in pairs(known) do
      local off = math.abs(found[given].share - share)
      if not (off <= WITHIN) then error(("seed %d: the share of %s: want %g within %g, got %g"):format(seed, given, share, WITHIN, found[given].share), 2) end
      if not (off <= 5 * found[given].error + 0.002) then
        error(("seed %d: %s is off by %g, its error is said to be %g"):format(seed, given, off, found[given].error), 2)
      end
    end
    if not (math.abs(s.interactions - left) <= 1.5 * WITHIN) then error(("seed %d: interactions: want %g, got %g"):format(seed, left, s.interactions), 2) end
  end
  lac.settings { seed = 0 }
end

local function product_shares(relative_variances)
  local whole, shares = 1, {}
  for _, v in pairs(relative_variances) do whole = whole * (1 + v) end
  for name, v in pairs(relative_variances) do shares[name] = v / (whole - 1) end
  return shares
end

t.test("a sum", function()
  -- variances 1, 4 (2 b), 1 (c / 2)
  local known = { term_first = 1 / 6, term_second = 4 / 6, term_third = 1 / 6 }
  shares_are(function() return lac.case { term_first = "3 ± 1 m", term_second = "-2 ± 1 m", term_third = "1 ± 2 m" } end, "sum_of_terms", known)
  -- the same from draws whose distribution isn't known: their ranks are used
  local function drawn(median, deviation) return lac.spread.normal(median, deviation) + 0 * lac.m end
  shares_are(function() return lac.case { term_first = drawn("3 m", "1 m"), term_second = drawn("-2 m", "1 m"), term_third = drawn("1 m", "2 m") } end,
    "sum_of_terms", known)
end)

t.test("a product of log-normal factors", function()
  -- relative variance exp(s²) - 1
  local function v(s) return math.exp(s * s) - 1 end
  shares_are(function()
    local function factor(s) return lac.spread.log_normal("2 m", s) end
    return lac.case { factor_first = factor(0.3), factor_second = factor(0.2), factor_third = factor(0.4) }
  end, "product_of_factors", product_shares { factor_first = v(0.3), factor_second = v(0.2), factor_third = v(0.4) })
end)

t.test("a product of log-uniform, uniform and lopsided factors", function()
  local width = math.log(5) -- log-uniform from 1 to 5: moments (b^k - a^k) / (k ln(b/a))
  local log_uniform = (25 - 1) / (2 * width) / ((5 - 1) / width) ^ 2 - 1
  local uniform = 2 ^ 2 / 12 / 2 ^ 2 -- from 1 to 3
  local half = math.sqrt(2 / math.pi) -- mean of a half-normal
  local shift = half * (1 - 0.5) / 2 -- median 5, deviations +1 -0.5, half the draws on each side
  local lopsided = ((1 + 0.25) / 2 - shift ^ 2) / (5 + shift) ^ 2
  shares_are(function()
    return lac.case { factor_first = lac.spread.log_uniform("1 m", "5 m"), factor_second = lac.spread.uniform("1 m", "3 m"),
      factor_third = lac.spread.lopsided("5 m", "1 m", "0.5 m") }
  end, "product_of_factors", product_shares { factor_first = log_uniform, factor_second = uniform, factor_third = lopsided })
end)

t.test("an error bar to one side alone", function()
  local half = math.sqrt(2 / math.pi) -- median 3 m, half the draws there, the others half-normal: variance 1/2 - (half/2)²
  local one_sided = 0.5 - (half / 2) ^ 2
  shares_are(function() return lac.case { term_first = "3 +1 -0 m", term_second = "2 ± 1 m", term_third = "1 m" } end, "sum_of_terms",
    { term_first = one_sided / (one_sided + 4), term_second = 4 / (one_sided + 4) })
end)

t.test("Ishigami's function", function()
  -- Ishigami & Homma 1990, Proc. ISUMA '90, 398; with a = 7, b = 0.1 the indices are 0.3139, 0.4424, 0 (Saltelli et al. 2008, Global
  -- Sensitivity Analysis: The Primer; both from memory), by V = a²/8 + b π⁴/5 + b² π⁸/18 + 1/2, V1 = (1 + b π⁴/5)²/2, V2 = a²/8
  local a, b, pi = 7, 0.1, math.pi
  local whole = a ^ 2 / 8 + b * pi ^ 4 / 5 + b ^ 2 * pi ^ 8 / 18 + 0.5
  local first, second = (1 + b * pi ^ 4 / 5) ^ 2 / 2 / whole, a ^ 2 / 8 / whole
  t.close(first, 0.3139, 2e-4)
  t.close(second, 0.4424, 2e-4)
  shares_are(function()
    local function angle() return lac.spread.uniform(-pi * lac.rad, pi * lac.rad) end
    return lac.case { angle_first = angle(), angle_second = angle(), angle_third = angle() }
  end, "ishigami", { angle_first = first, angle_second = second, angle_third = 0 })
end)

t.test("undefined draws are left out and said", function()
  -- a factor must be > 0: about one in six of its draws, 1 ± 1 m, is not; of the rest the mean is 1 + q, the variance 1 - q - q² with
  -- q = φ(1) / Φ(1) (a normal distribution cut at zero)
  local q = math.exp(-0.5) / math.sqrt(2 * math.pi) / 0.841344746068543
  local v = (1 - q - q * q) / (1 + q) ^ 2
  local c = lac.case { factor_first = "1 ± 1 m", factor_second = lac.spread.uniform("1 m", "3 m"), factor_third = "1 m" }
  local s = c:sensitivity "product_of_factors"
  local known = product_shares { factor_first = v, factor_second = 1 / 12 }
  t.equal(math.abs(by_name(s).factor_first.share - known.factor_first) <= WITHIN, true)
  t.equal(s.defined < 8600 and s.defined > 8200, true)
  t.equal(tostring(s):find("estimated from " .. s.defined .. " draws, 1[56] %% being undefined") ~= nil, true, tostring(s))
end)

local rim = { distance = "156 ± 3 pc", bolometric_flux = "2.4e-11 ± 0.2e-11 W.m**-2", wavelength = "1.65 um", projected_baseline = "92 m" }

local median_rim = { distance = "156 pc", bolometric_flux = "2.4e-11 W.m**-2", wavelength = "1.65 um", projected_baseline = "92 m" }

t.test("slopes and ten per cent more", function()
  -- R_sub goes as d, as the root of F, as T^-2
  local s = lac.case(rim):with { sublimation_temperature = "1500 K" }:sensitivity "rim_radius"
  local found = by_name(s)
  t.close(found.distance.slope, 1, 1e-5)
  t.close(found.bolometric_flux.slope, 0.5, 1e-5)
  t.close(found.sublimation_temperature.slope, -2, 1e-5)
  t.close(found.distance.more, 0.1, 1e-9)
  t.close(found.sublimation_temperature.more, 1.1 ^ -2 - 1, 1e-9)
  t.equal(found.sublimation_temperature.share, nil, "it has no error bar")
  t.equal(s.givens[1].name, "bolometric_flux", "the largest share first")
  local assumed = by_name(lac.case(rim):sensitivity "rim_radius").sublimation_temperature
  t.equal({ assumed.assumed, assumed.share }, { true, nil })
  t.close(assumed.slope, -2, 1e-5)
  local page = tostring(s)
  t.equal(page:find("\nbolometric_flux +8%d%.%d ± 0%.%d %% +%+0%.50 +%+4%.9 %%") ~= nil or page:find("\nbolometric_flux +8%d%.%d %% +%+0%.50 +%+4%.9 %%") ~= nil, true, page)
  t.equal(page:find("\nsublimation_temperature +no error bar +−2%.00 +−17%.4 %%") ~= nil, true, page)
end)

t.test("one number has no spread, but slopes", function()
  local s = lac.case { distance = "156 pc", bolometric_flux = "2.4e-11 W.m**-2" }:sensitivity "rim_radius"
  t.equal(s.defined, nil)
  t.close(by_name(s).distance.slope, 1, 1e-5)
  t.equal(tostring(s):find("One number without an error bar: there is no spread to share out.", 1, true) ~= nil, true)
end)

t.test("what would turn a verdict", function()
  -- n = 2 (r/d) / (λ/2B) ∝ √F B / (λ T²) is 1 at the turn; all follows from its value in the median case
  local n = lac.case(median_rim).rim_elements_by_array:value()
  local c = lac.case(rim)
  local s = c:sensitivity "rim_resolved_by_array"
  t.equal(s.yes, true)
  local turns = {}
  for _, turn in ipairs(s.turns) do turns[turn.name] = turn end
  t.close(turns.projected_baseline.at, 92 / n, 1e-9)
  t.close(turns.wavelength.at, 1.65e-6 * n, 1e-9)
  t.close(turns.elements_required.at, n, 1e-9)
  t.close(turns.sublimation_temperature.at, 1500 * math.sqrt(n), 1e-9)
  t.close(turns.bolometric_flux.at, 2.4e-11 / n ^ 2, 1e-9)
  t.equal(turns.sublimation_temperature.kind, "assumed")
  t.equal(turns.distance, nil, "the angle doesn't hang on it")
  t.equal(s.not_turning[1].name, "distance")
  t.equal(s.turns[1].name, "sublimation_temperature", "the nearest first")
  t.equal(s.turns[#s.turns].name, "bolometric_flux")
  -- half a fringe suffices, a whole one doesn't
  t.equal({ s.recipes[1].name, s.recipes[1].by, s.recipes[1].turns }, { "array_resolution", "fringe", true })
  local page = tostring(s)
  for _, wanted in ipairs { "With every given at its median it is yes. What alone would make it no, the nearest first:", "below 90.23 m", "−1.9 %", "above 1.682 µm",
    "array_resolution by fringe instead of half_fringe", "distance between 15.6 pc and 1560 pc" } do
    t.equal(page:find(wanted, 1, true) ~= nil, true, wanted)
  end
end)

t.test("what would turn a no, with single numbers", function()
  local s = lac.case { distance = "156 pc", rim_radius = "0.1 au", wavelength = "1.65 um", projected_baseline = "92 m" }:sensitivity "rim_resolved_by_array"
  t.equal({ s.yes, s.defined }, { false, nil })
  local page = tostring(s)
  -- 0.2 au at 156 pc is 1.2821 mas: λ/2B is that at 132.7 m
  t.equal(page:find("132.7 m or more", 1, true) ~= nil, true, page)
  t.equal(page:find("1.144 µm or less", 1, true) ~= nil, true, page)
end)

t.test("the chance of a verdict: a step in one given", function()
  -- n ∝ √F alone varies: all of the variance of the verdict is carried by the flux
  local found = by_name(lac.case(rim):sensitivity "rim_resolved_by_array")
  t.equal(math.abs(found.bolometric_flux.share - 1) <= WITHIN, true)
  t.equal(found.distance.share <= WITHIN, true)
  local rare = tostring(lac.case(rim):with { projected_baseline = "80 m" }:sensitivity "rim_resolved_by_array")
  t.equal(rare:find "Only %d+ draws are otherwise than the others: the shares are rough%." ~= nil, true, rare)
end)

t.test("with dust and a band", function()
  local grains = lac.dust { materials = { model_silicate = 0.7, soot = 0.3 }, sizes = { smallest = "0.01 um", largest = "10 um", index = 3.5 } }
  local c = lac.case(rim):with { dust = grains, effective_temperature = "8800 ± 200 K", grain_size = "1 um", wavelength = false, band = "H" }
  local s = c:sensitivity "rim_resolved_by_array"
  t.equal(s.yes, false)
  local turn
  for _, found in ipairs(s.turns) do if found.name == "projected_baseline" then turn = found end end
  local n = lac.case(median_rim):with { dust = grains, effective_temperature = "8800 K", grain_size = "1 um", wavelength = false, band = "H" }.rim_elements_by_array:value()
  t.close(turn.at, 92 / n, 1e-9)
  for _, given in ipairs(s.givens) do t.equal(given.name == "dust" or given.name == "band", false) end
end)

t.test("bad input", function()
  local c = lac.case(rim)
  t.raises(function() c:sensitivity() end, "sensitivity: a name is wanted; got nil")
  t.raises(function() c:sensitivity "rim_radus" end, "sensitivity: unknown name 'rim_radus'; did you mean rim_radius")
  t.raises(function() c:sensitivity "gap_width" end, "gap_width can't be derived from what is given; give ")
  t.raises(function() c:sensitivity "distance" end, "sensitivity: distance is given; ask for a name that follows from the givens")
  t.raises(function() c:with { dust = lac.dust { materials = "soot", sizes = "1 um" } }:sensitivity "dust" end, "sensitivity: dust is an object; ask for a quantity")
  t.raises(function() c:with { projected_baseline = lac.sweep("20 m", "90 m", 3) }:sensitivity "rim_resolved_by_array" end,
    "sensitivity wants one case; rim_resolved_by_array runs along projected_baseline here: give one value, like c:with{projected_baseline = ...}")
  lac.settings { draws = 15 }
  local few = lac.case(rim):sensitivity "rim_radius"
  t.equal(tostring(few):find("There are too few draws for so many givens", 1, true) ~= nil, true)
  lac.settings { draws = 10000 }
end)

t.finish()
