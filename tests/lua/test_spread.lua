-- SPDX-License-Identifier: GPL-3.0-or-later
-- Spreads and sweeps: each kind against its closed form within what so many draws allow, keys, undefined draws, grids against plain
-- loops, the memory cap. Quantiles of the normal distribution: Abramowitz & Stegun 1964, Table 26.5 (0.841345 at one deviation).
local t = require "harness"
local lac = require "lacuna"
local N = 10000

-- The share of draws of q below x lies within five binomial deviations of p.
local function share_below(q, x, p, label)
  local share = lac.chance(lac.below(q, x)):value()
  local allowed = 5 * math.sqrt(p * (1 - p) / N)
  if not (math.abs(share - p) <= allowed) then error(("%s: %g of draws below %s, want %g within %g"):format(label, share, tostring(x), p, allowed), 2) end
end

local P1 = 0.841345 -- below one deviation

t.test("10 000 draws unless told otherwise", function()
  t.equal(lac.quantity "1 ± 0.1":axes(), { { name = "draw", length = N } })
  t.equal(lac.settings().draws, N)
end)

t.test("normal", function()
  local q = lac.spread.normal("10 pc", "2 pc")
  share_below(q, "10 pc", 0.5, "median")
  share_below(q, "12 pc", P1, "one deviation above")
  share_below(q, "8 pc", 1 - P1, "one deviation below")
  t.close(q:mean():value "pc", 10, 5 * 0.2 / math.sqrt(N), "mean")
  t.close(q:deviation():value "pc", 2, 5 / math.sqrt(2 * N), "deviation")
  local low, high = q:interval()
  t.close(low:value "pc", 8, 0.02)
  t.close(high:value "pc", 12, 0.015)
  low, high = q:interval(0.95)
  t.close(low:value "pc", 10 - 2 * 1.959964, 0.03)
  t.close(high:value "pc", 10 + 2 * 1.959964, 0.01)
end)

t.test("lopsided: half the draws on each side", function()
  local q = lac.spread.lopsided("10 pc", "4 pc", "1 pc")
  share_below(q, "10 pc", 0.5, "median")
  share_below(q, "14 pc", P1, "one upper deviation")
  share_below(q, "9 pc", 1 - P1, "one lower deviation")
  t.close(lac.quantity "10 +4 -1 pc":median():value "pc", 10, 0.01)
end)

t.test("uniform, log-uniform, log-normal, samples", function()
  local q = lac.spread.uniform("2 au", "6 au")
  share_below(q, "3 au", 0.25, "uniform")
  t.equal(lac.lowest(q, "draw") >= lac.quantity "2 au" and lac.highest(q, "draw") <= lac.quantity "6 au", true)
  q = lac.spread.log_uniform(1e-4, 1e-2)
  share_below(q, 1e-3, 0.5, "log-uniform")
  share_below(q, 10 ^ -3.5, 0.25, "log-uniform")
  q = lac.spread.log_normal("3 au", 0.5)
  share_below(q, "3 au", 0.5, "log-normal median")
  share_below(q, 3 * math.exp(0.5) * lac.au, P1, "log-normal")
  q = lac.spread.samples { "1 pc", "2 pc", "5 pc", "9 pc" }
  share_below(q, "1.5 pc", 0.25, "samples")
  share_below(q, "4 pc", 0.5, "samples")
  local seen = {}
  for _, x in ipairs(q:value "pc") do seen[x] = true end
  t.equal(seen, { [1.0] = true, [2.0] = true, [5.0] = true, [9.0] = true })
end)

t.test("spreads that can't be are refused", function()
  t.raises(function() return lac.spread.normal("1 pc", "-1 pc") end, "spread.normal wants a median and a standard deviation >= 0")
  t.raises(function() return lac.spread.normal("1 pc") end, "spread.normal wants a quantity; got nothing")
  t.raises(function() return lac.spread.normal("1 pc", "1 K") end, "spread.normal wants a length throughout; got 1 K")
  t.raises(function() return lac.spread.uniform(2, 1) end, "spread.uniform wants a lower and a higher bound")
  t.raises(function() return lac.spread.log_uniform(0, 1) end, "both > 0")
  t.raises(function() return lac.spread.log_normal(1, "1 pc") end, "spread.log_normal wants a plain number throughout; got 1 pc")
  t.raises(function() return lac.spread.normal(0 / 0, 1) end, "spread.normal wants finite numbers")
  t.raises(function() return lac.spread.normal(1, math.huge) end, "spread.normal wants finite numbers; got infinite")
  t.raises(function() return lac.spread.samples {} end, "spread.samples wants a list that is not empty")
  t.raises(function() return lac.spread.samples { 1, "2 pc" } end, "spread.samples wants a plain number throughout; got 2 pc")
  t.raises(function() return lac.spread.normal(lac.sweep { 1, 2 }, 1) end, "spread.normal wants single numbers; got 1 … 2, a sweep of 2 points")
  t.raises(function() return lac.spread.gaussian(1, 2) end, "gaussian")
end)

local function draws_of(givens, name)
  return lac.case(givens)[name]:value(name == "distance" and "pc" or "au")
end

t.test("draws are keyed by seed and name: neither order nor neighbours change them", function()
  local alone = draws_of({ distance = "156 ± 3 pc" }, "distance")
  t.equal(draws_of({ distance = "156 ± 3 pc", rim_radius = "0.3 ± 0.1 au", stellar_mass = "1 ± 0.1 Msun" }, "distance"), alone)
  local c = lac.case { distance = "156 ± 3 pc", rim_radius = "0.3 ± 0.1 au" }
  local _ = c.rim_radius_angle:mean(), c.rim_radius:mean()
  t.equal(c.distance:value "pc", alone, "asked last")
  t.equal(c:with { stellar_mass = "2 Msun" }.distance:value "pc", alone, "with")
  t.equal(draws_of({ rim_radius = "156 ± 3 pc" }, "rim_radius")[1] == alone[1], false, "another name, other draws")
  lac.settings { seed = 1 }
  local other = draws_of({ distance = "156 ± 3 pc" }, "distance")
  lac.settings { seed = 0 }
  t.equal(other[1] == alone[1], false, "another seed, other draws")
  t.equal(draws_of({ distance = "156 ± 3 pc" }, "distance"), alone, "the first seed again")
end)

t.test("in a study, draws are keyed by the target too; what is common to all targets has none", function()
  local printing = print
  local function draws(names)
    local targets = {}
    for i, name in ipairs(names) do targets[i] = { name = name, distance = "150 ± 5 pc" } end
    print = function() end
    local ok, study = pcall(lac.study, { targets = targets, given = { rim_radius = "0.3 ± 0.05 au" }, ask = { "rim_radius_angle" } })
    print = printing
    assert(ok, study)
    local of = {}
    for i, name in ipairs(names) do
      of[name] = { distance = study.rows[i].made[1].distance:value "pc", rim_radius = study.rows[i].made[1].rim_radius:value "au" }
    end
    return of
  end
  local two, three = draws { "Marrow 1", "Marrow 2" }, draws { "Marrow 2", "Marrow 0", "Marrow 1" } -- invented stars
  t.equal(two["Marrow 1"].distance[1] == two["Marrow 2"].distance[1], false)
  t.equal(three["Marrow 1"], two["Marrow 1"], "whatever other targets there are")
  t.equal(two["Marrow 1"].rim_radius, two["Marrow 2"].rim_radius)
  t.equal(two["Marrow 1"].rim_radius, draws_of({ rim_radius = "0.3 ± 0.05 au" }, "rim_radius"))
end)

t.test("the same bits on any number of threads, folded or stored", function()
  local threads = lac.settings().threads
  local results = {}
  for i, count in ipairs { 1, 2, 5 } do
    lac.settings { threads = count, draws = 2000003 }
    local q = lac.case { distance = "156 ± 3 pc", rim_radius = "0.3 ± 0.05 au" }.rim_radius_angle
    local low, high = q:interval()
    results[i] = { q:mean():value "mas", q:deviation():value "mas", q:median():value "mas", low:value "mas", high:value "mas",
      lac.chance(lac.above(q, "2 mas")):value() }
  end
  lac.settings { threads = threads, draws = N }
  t.equal(results[2], results[1])
  t.equal(results[3], results[1])
end)

t.test("a spread means the same draws wherever it goes", function()
  local q = lac.spread.normal("10 pc", "2 pc")
  t.equal((q - q):deviation():value "pc", 0.0)
  local c = lac.case { distance = q }
  t.equal((c.distance - q):deviation():value "pc", 0.0)
end)

t.test("free spreads made one after the other are independent", function()
  local a, b = lac.spread.normal(0, 1), lac.spread.normal(0, 1)
  t.equal(math.abs((a * b):mean():value()) < 5 / math.sqrt(N), true, "correlation")
  t.close((a + b):deviation():value(), math.sqrt(2), 5 / math.sqrt(N))
end)

t.test("a median out of range is an error; draws out of range are undefined and counted", function()
  t.raises(function() return lac.case { distance = "-3 ± 1 pc" } end, "distance must be > 0; got %-3 ± 1 pc")
  t.raises(function() return lac.case { inclination = lac.spread.uniform("80 deg", "170 deg") } end, "inclination must be 0 deg .. 90 deg; got from 80 to 170 deg, uniform")
  t.raises(function() return lac.case { distance = lac.quantity "-3 ± 1 pc" * 1 } end, "distance must be > 0; got %-3")
  local c = lac.case { distance = "10 ± 10 pc", rim_radius = "1 au" }
  local count, share = lac.undefined(c.rim_radius_angle):value(), 1 - P1
  t.equal(math.abs(count / N - share) <= 5 * math.sqrt(share * (1 - share) / N), true, "draws below zero")
  t.equal(tostring(c.rim_radius_angle):match "%(.*%)", ("(%.0f %% of draws undefined)"):format(100 * count / N))
  local chance = lac.chance(lac.above(c.rim_radius_angle, "0 mas")):value()
  t.equal(chance, 1 - count / N, "undefined draws stand in the denominator")
  t.equal(tostring(lac.case { distance = "156 ± 3 pc" }.distance):find "undefined", nil)
end)

t.test("summaries of single numbers and of other axes", function()
  t.equal((3 * lac.au):mean():value "au", 3.0)
  t.equal((3 * lac.au):median():value "au", 3.0)
  t.equal((3 * lac.au):deviation():value "au", 0.0)
  t.equal(lac.chance(lac.above(3, 2)):value(), 1.0)
  local q = lac.along("night", { 3, 1, 2 })
  t.equal(lac.mean(q, "night"):value(), 2.0)
  t.equal(lac.median(q, "night"):value(), 2.0)
  t.equal(lac.lowest(q, "night"):value(), 1.0)
  t.equal(lac.highest(q, "night"):value(), 3.0)
  t.equal(lac.quantile(q, 0.75, "night"):value(), 2.5)
  t.raises(function() return lac.chance(3 * lac.au) end, "chance wants a verdict")
  t.raises(function() return lac.interval(q, 2) end, "interval wants a share between 0 and 1; got 2")
  t.raises(function() return lac.quantile(q, -1) end, "quantile wants a share between 0 and 1; got %-1")
  t.raises(function() return lac.chance(q, "draw") end, "chance wants a quantity with the axis draw")
end)

t.test("sweeps", function()
  t.equal(lac.sweep("20 m", "330 m", 3):value "m", { 20.0, 175.0, 330.0 })
  local logarithmic = lac.sweep.log(1, 100, 3):value()
  t.close(logarithmic[2], 10, 4 * 2 ^ -52, "exp of a mean of logarithms")
  t.equal({ logarithmic[1], logarithmic[3] }, { 1.0, 100.0 }, "the ends are exact")
  t.equal(lac.sweep { "1 au", "3 au", "2 au" }:value "au", { 1.0, 3.0, 2.0 })
  local q = lac.case { rim_radius = lac.sweep("1 au", "2 au", 5) }.rim_radius
  t.equal(q:axes()[1].name, "rim_radius")
  t.raises(function() return lac.sweep(1, 2) end, "sweep wants how many points as its third argument, a whole number from 2 to 2147483648; got nothing")
  t.raises(function() return lac.sweep(1, 2, 1) end, "from 2 to 2147483648; got 1")
  t.raises(function() return lac.sweep(1, 2, 2.5) end, "from 2 to 2147483648; got 2.5")
  t.raises(function() return lac.sweep("1 au", "2 K", 3) end, "sweep wants a length throughout; got 2 K")
  t.raises(function() return lac.sweep.log(0, 1, 3) end, "sweep.log wants bounds > 0")
  t.raises(function() return lac.case { distance = lac.sweep("-1 pc", "2 pc", 4) } end, "distance must be > 0; got %-1 pc")
end)

t.test("a sweep and an ensemble give a grid, element by element as plain loops do", function()
  local radii = { 0.1, 0.25, 0.7 }
  local c = lac.case { distance = "156 ± 3 pc", rim_radius = lac.sweep { "0.1 au", "0.25 au", "0.7 au" } }
  local grid, d = c.rim_radius_angle:value "mas", c.distance:value "pc"
  t.equal(#grid, 3)
  for i, radius in ipairs(radii) do
    t.equal(#grid[i], N)
    for k = 1, N, 97 do t.close(grid[i][k], radius / d[k] * 1000, 1e-14, "radius over distance") end -- 1 au at 1 pc is 1 arcsec by definition
  end
  local medians = lac.median(c.rim_radius_angle):value "mas"
  t.close(medians[2], 250 / 156, 0.005)
end)

t.test("two sweeps give a grid, sums along each stay apart", function()
  local a, b = lac.sweep("1 au", "4 au", 4), lac.sweep("1 pc", "3 pc", 3)
  local c = lac.case { rim_radius = a, distance = b }
  local q = c.rim_radius_angle
  for i = 1, 4 do
    for k = 1, 3 do t.close(q:at { rim_radius = i, distance = k }:value "arcsec", i / k, 1e-14) end
  end
  t.equal(q:axes()[1].name, "distance", "the longest axis last")
  t.close(lac.mean(q, "rim_radius"):value "arcsec"[2], 2.5 / 2, 1e-14)
end)

t.test("three axes against plain loops", function()
  local x, y, z = { 1, 2, 3 }, { 2, 5 }, { 1, -1, 4, 7 }
  local q = lac.along("x", x) * lac.along("y", y) - lac.along("z", z) / lac.along("x", x)
  for i = 1, 3 do
    for j = 1, 2 do
      for k = 1, 4 do t.equal(q:at { x = i, y = j, z = k }:value(), x[i] * y[j] - z[k] / x[i]) end
    end
  end
end)

t.test("axes of one name must be the same", function()
  local three, four = lac.along("a", { 1, 2, 3 }), lac.along("a", { 1, 2, 3, 4 })
  t.raises(function() return three + four end, "the axis a has 3 points in one quantity and 4 in the other")
  local one = lac.case { rim_radius = lac.sweep("1 au", "2 au", 3) }.rim_radius
  local other = lac.case { rim_radius = lac.sweep("1 au", "3 au", 3) }.rim_radius
  t.raises(function() return one + other end, "the axis rim_radius has other values in one quantity than in the other")
  local q = lac.quantity "1 ± 0.1" * 1
  lac.settings { draws = 100 }
  local fewer = lac.quantity "1 ± 0.1" * 1
  lac.settings { draws = N }
  t.raises(function() return q + fewer end, "the axis draw has 10000 points in one quantity and 100 in the other")
  t.raises(function() return lac.case { distance = three * lac.pc, rim_radius = four * lac.au }.rim_radius_angle end,
    "distance and rim_radius both have the axis a, but not the same one %(3 and 4 points%)")
  t.raises(function()
    local q = lac.quantity(1, "1")
    for i = 1, 7 do q = q * lac.along("axis" .. i, { 1, 2 }) end
  end, "the result would have more than 6 axes")
end)

t.test("expressions of any depth", function()
  local q = lac.along("a", { 1, 2 })
  for _ = 1, 1000 do q = q + 1 end
  t.equal(q:value(), { 1001.0, 1002.0 })
end)

t.test("a grid over the memory cap is an error before it is made; dead results make room", function()
  local memory = lac.settings().memory
  collectgarbage()
  lac.settings { memory = 40 }
  local function grid(i) return lac.along("a", lac.sweep(1, 2, 2000):value()) * lac.sweep(1, 2, 2000) * i end -- 32 MB
  t.raises(function()
    local huge = lac.sweep(1, 2, 100000) * lac.spread.normal(0, 1)
    return huge:at { draw = 1 }:value(), lac.sqrt(huge):at { sweep_1 = 1 }, huge:value()
  end, "MiB")
  t.raises(function() return lac.sweep(1, 2, 2000000000) end, "would take 15259 MiB, .* of the 40 MiB allowed")
  for i = 1, 5 do t.equal(lac.mean(lac.mean(grid(i), "a")):axes()[1].length, 2000) end
  for i = 1, 5 do t.equal(#grid(i):value(), 2000) end -- each leaves 32 MB of rubbish
  lac.settings { memory = memory }
end)

t.test("folds over ten million draws store nothing", function()
  local memory = lac.settings().memory
  collectgarbage()
  lac.settings { draws = 10000000, memory = 8 }
  local c = lac.case { distance = "156 ± 3 pc", rim_radius = "0.3 ± 0.05 au", wavelength = "1.65 um", projected_baseline = "100 m" }
  local q = c.rim_radius_angle
  t.close(q:mean():value "mas", 300 / 156, 1e-3)
  t.close(q:median():value "mas", 300 / 156, 1e-3)
  local low, high = q:interval()
  t.equal(low < high, true)
  t.equal(lac.chance(c.rim_resolved_by_array):value() > 0.5, true)
  t.equal(tostring(c.rim_resolved_by_array):find "^in > 99.9 %% of draws: rim_elements_by_array" ~= nil, true)
  t.raises(function() return q:value "mas" end, "this would take 78 MiB, .* of the 8 MiB allowed")
  lac.settings { draws = N, memory = memory }
end)

t.test("settings that can't be are refused", function()
  t.raises(function() lac.settings { draws = 0 } end, "settings: draws wants a whole number from 1 to %d+; got 0")
  t.raises(function() lac.settings { draws = "many" } end, "got \"many\"")
  t.raises(function() lac.settings { threads = 1.5 } end, "settings: threads wants a whole number from 1 to 256; got 1.5")
  t.raises(function() lac.settings { seed = -1 } end, "settings: seed wants a whole number from 0 to")
  t.raises(function() lac.settings { memory = 0 } end, "settings: memory wants a number of MiB of at least 1; got 0")
  t.raises(function() lac.settings { draw = 5 } end, "settings: unknown setting 'draw'; there are seed, draws, threads, memory")
  t.equal(lac.settings().draws, N)
end)

t.test("how spreads and grids are written", function()
  t.equal(tostring(lac.quantity "156 ± 3 pc"), "156 ± 3 pc")
  t.equal(tostring(lac.spread.log_uniform(1e-4, 1e-2)), "from 0.0001 to 0.01, log-uniform")
  t.equal(tostring(lac.spread.uniform("1 au", "2 au")), "from 1 to 2 au, uniform")
  t.equal(tostring(lac.spread.log_normal("1 au", 0.2)), "log-normal about 1 au, standard deviation of its logarithm 0.2")
  t.equal(tostring(lac.spread.samples { "1 au", "2 au" }), "samples about 1.5 au")
  t.equal(tostring(lac.above(lac.along("draw", { 1, 2, 3, 4 }), 3)), "in 25 % of draws")
  t.equal(tostring(lac.spread), 'spread has log_normal, log_uniform, lopsided, normal, samples, uniform; help "spread" tells more')
  t.raises(function() return lac.spread.gaussian(1, 2) end, "spread has no 'gaussian'; it has log_normal, log_uniform")
  t.raises(function() return lac.spread.samples({ 1, 2 }, "au") end, "spread.samples wants one list; its samples have their units themselves")
  t.equal(tostring(lac.sweep("0 au", "1 au", 2) + lac.sweep("0 au", "1 au", 2)):find "^from 0 to 2 au over sweep_%d+, 2 points and sweep_%d+, 2 points$" ~= nil, true)
  t.equal(tostring(lac.sweep("1 au", "2 au", 5)), "1 … 2 au, a sweep of 5 points")
  t.equal(tostring(lac.case { rim_radius = lac.sweep("1 au", "2 au", 5) }.rim_radius), "1  1.25  1.5  1.75  2 au\n  along rim_radius 1 … 2 au, 5 points")
  local q = lac.case { rim_radius = lac.sweep("1 au", "2 au", 5), distance = lac.sweep("1 pc", "2 pc", 3) }.rim_radius_angle
  t.equal(tostring(q), "from 500 to 2000 mas over distance 1 … 2 pc, 3 points and rim_radius 1 … 2 au, 5 points")
  t.equal(tostring(lac.log(lac.along("a", { 1, -1, 0 }))), "0  undefined  undefined\n  along a, 3 points (2 of 3 points undefined)")
end)

t.finish()
