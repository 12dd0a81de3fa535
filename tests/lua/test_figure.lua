-- SPDX-License-Identifier: GPL-3.0-or-later
-- Figures from Lua: the numbers behind them against the quantiles and shares of the quantities themselves and against curves known by hand,
-- what is said about them, colours, and every kind of bad input with its message. Stars and instruments are invented.
package.path = "tests/lua/?.lua"
local t = require "harness"
local lacuna = require "lacuna"
package.path = "bindings/?.lua"
local contour = require "contour"
lacuna.globals(_ENV)
settings { seed = 11, draws = 1000 }

local star = case {
  distance = "150 ± 5 pc", stellar_luminosity = "20 ± 3 Lsun", stellar_mass = "2 Msun", effective_temperature = "9000 K",
  wavelength = "1.65 um", projected_baseline = "130 m", planet_mass = "2 ± 0.5 Mjup", planet_semi_major_axis = "5 au", viscosity_alpha = 1e-3,
}
local baselines = sweep("20 m", "200 m", 10)

local printed
local function quietly(fields)
  local print_before = print
  print = function(text) printed = text end
  local study = study(fields)
  print = print_before
  return study
end

-- The samples along the sweep in rising order, and their empirical quantile by linear interpolation (Hyndman, R. J., Fan, Y. 1996, American
-- Statistician 50, 361, definition 7).
local function quantile_of(samples, p)
  table.sort(samples)
  local place = p * (#samples - 1) + 1
  local below = math.floor(place)
  return samples[below] + (place - below) * ((samples[below + 1] or samples[below]) - samples[below])
end

t.test("a curve's bands are the quantiles of its draws", function()
  local f = figure { of = star, show = "rim_elements_by_array", along = { projected_baseline = baselines } }
  t.equal(f.kind, "curve")
  local d, s = f.data, f.data.series[1]
  t.equal(#d.values, 10)
  t.close(d.values[1], 20, 1e-12)
  t.close(d.values[10], 200, 1e-12)
  -- 0.1587 and 0.8413 are those of one standard deviation of a normal distribution, from a table of it.
  for point, baseline in ipairs { "20 m", "40 m", "60 m" } do
    local samples = star:with { projected_baseline = baseline }.rim_elements_by_array:value()
    t.equal(#samples, 1000)
    for name, p in pairs { low95 = 0.025, low68 = 0.1587, values = 0.5, high68 = 0.8413, high95 = 0.975 } do
      t.close(s[name][point], quantile_of(samples, p), 2e-4, name)
    end
  end
  t.equal(#d.levels, 1)
  t.equal(d.levels[1].name, "elements_required")
  t.equal(d.levels[1].constant, 1)
end)

t.test("a verdict's curve is its share", function()
  local f = figure { of = star, show = "rim_resolved_by_array", along = { projected_baseline = sweep { "90 m", "100 m", "110 m", "120 m" } } }
  for point, baseline in ipairs { "90 m", "100 m", "110 m", "120 m" } do
    t.close(f.data.series[1].values[point], chance(star:with { projected_baseline = baseline }.rim_resolved_by_array):value(), 1e-12)
  end
  t.equal(f.data.series[1].low68, nil)
  t.equal(f.data.y.verdict, "share")
end)

t.test("points of a sweep are drawn in rising order", function()
  local f = figure { of = star, show = "array_resolution", along = { projected_baseline = sweep { "200 m", "50 m", "100 m" } } }
  t.equal(f.data.values, { 50, 100, 200 })
  -- half a fringe: λ / 2B = 1.65e-6 / 100 rad = 3.4033 mas at 50 m, with 1 rad = 206264.806 arcsec
  t.close(f.data.series[1].values[1], 1.65e-6 / 100 * 206264806.247, 1e-9)
  t.close(f.data.series[1].values[3], 1.65e-6 / 400 * 206264806.247, 1e-9)
end)

t.test("axes are logarithmic where a sweep goes in equal ratios or results span more than 30", function()
  local function logs(show, values, log)
    local f = figure { of = star, show = show, along = { projected_baseline = values }, log = log }
    return (f.data.x.log and "x" or "") .. (f.data.y.log and "y" or "")
  end
  t.equal(logs("array_resolution", sweep("20 m", "200 m", 10)), "")
  t.equal(logs("array_resolution", sweep.log("20 m", "200 m", 10)), "x")
  t.equal(logs("array_resolution", sweep("10 m", "330 m", 10)), "y") -- λ/2B falls by 33
  t.equal(logs("array_resolution", sweep.log("10 m", "330 m", 10)), "xy")
  t.equal(logs("array_resolution", sweep.log("10 m", "330 m", 10), ""), "")
  t.equal(logs("rim_resolved_by_array", sweep.log("10 m", "330 m", 10)), "x")
end)

t.test("several curves: each, and several names on one axis", function()
  local f = figure { of = star, show = "array_resolution", along = { projected_baseline = baselines }, each = { wavelength = { "1.65 um", "3.3 um" } } }
  t.equal(#f.data.series, 2)
  for i = 1, 10 do t.close(f.data.series[2].values[i], 2 * f.data.series[1].values[i], 1e-12) end
  t.equal(f.data.series[2].each.value, "3.3 µm")
  f = figure { of = star, show = { "rim_size_angle", "array_resolution" }, along = { projected_baseline = baselines } }
  t.equal(#f.data.series, 2)
  t.equal(f.data.y.unit, "mas")
  t.equal(f.data.series[1].values[1], f.data.series[1].values[10], "constant along the sweep")
end)

t.test("contours of a cone are circles", function()
  local xs, ys, rows = {}, {}, {}
  for i = 1, 41 do xs[i], ys[i] = (i - 21) / 10, (i - 21) / 10 end
  for j = 1, 41 do
    rows[j] = {}
    for i = 1, 41 do rows[j][i] = math.sqrt(xs[i] ^ 2 + ys[j] ^ 2) end
  end
  local lines = contour.lines(xs, ys, rows, 1.23)
  t.equal(#lines, 1, "one ring")
  local line = lines[1]
  t.equal({ line.x[1], line.y[1] }, { line.x[#line.x], line.y[#line.y] }, "closed")
  for k = 1, #line.x do t.close(math.sqrt(line.x[k] ^ 2 + line.y[k] ^ 2), 1.23, 2e-3) end
  rows[21][33] = 0 / 0 -- a hole opens the ring
  lines = contour.lines(xs, ys, rows, 1.23)
  t.equal(#lines, 1)
  t.equal(lines[1].x[1] == lines[1].x[#lines[1].x] and lines[1].y[1] == lines[1].y[#lines[1].y], false, "open")
end)

t.test("contours along logarithmic axes are exact for powers", function()
  local xs, ys, rows = { 1, 10, 100 }, { 1, 100 }, { {}, {} }
  for j = 1, 2 do for i = 1, 3 do rows[j][i] = math.log(xs[i], 10) + math.log(ys[j], 10) end end -- log10(xy) = 1.5
  local lines = contour.lines(xs, ys, rows, 1.5, true, true)
  t.equal(#lines, 1)
  for k = 1, #lines[1].x do t.close(lines[1].x[k] * lines[1].y[k], 10 ^ 1.5, 1e-12) end
  -- A saddle has two lines, whose ends don't cross.
  t.equal(#contour.lines({ 0, 1 }, { 0, 1 }, { { 1, 0 }, { 0, 1 } }, 0.6), 2)
end)

t.test("a map's contour lies where half of the draws are resolved", function()
  local f = figure { of = star, show = "rim_resolved_by_array", along = { projected_baseline = sweep("60 m", "160 m", 41), wavelength = sweep("1.2 um", "2.4 um", 7) }, x = "projected_baseline" }
  t.equal(f.kind, "map")
  t.equal({ f.data.x.name, f.data.y.name }, { "projected_baseline", "wavelength" })
  t.equal({ #f.data.values, #f.data.values[1] }, { 7, 41 })
  t.close(f.data.values[3][20], chance(star:with { projected_baseline = f.data.x_values[20] * m, wavelength = f.data.y_values[3] * um }.rim_resolved_by_array):value(), 1e-12)
  local half = f.data.contours[1]
  t.equal({ half.level, half.dashed, #f.data.contours }, { 0.5, false, 3 })
  local checked = 0
  for _, line in ipairs(half.lines) do
    for k = 1, #line.x do
      -- By hand: as elements go with B / λ, half of the draws are resolved where the median has one element.
      local elements = median(star:with { projected_baseline = line.x[k] * m, wavelength = line.y[k] * um }.rim_elements_by_array):value()
      t.close(elements, 1, 0.01)
      checked = checked + 1
    end
  end
  t.equal(checked >= 7, true)
end)

t.test("without draws the contour lies where the condition is just met", function()
  local sharp = star:with { distance = "150 pc", stellar_luminosity = "20 Lsun" }
  local f = figure { of = sharp, show = "rim_resolved_by_array", along = { projected_baseline = sweep("60 m", "160 m", 21), wavelength = sweep("1.2 um", "2.4 um", 41) } }
  local line = f.data.contours[1].lines[1]
  for k = 1, #line.x do
    t.close(sharp:with { [f.data.x.name] = line.x[k] * (f.data.x.name == "wavelength" and um or m), [f.data.y.name] = line.y[k] * (f.data.y.name == "wavelength" and um or m) }
      .rim_elements_by_array:value(), 1, 2e-3)
  end
end)

t.test("a map shows a quantity with the contour of the verdict that wants it", function()
  local f = figure { of = star, show = "gap_elements_by_array", along = { projected_baseline = sweep.log("5 m", "200 m", 6), planet_semi_major_axis = sweep.log("1 au", "30 au", 5) } }
  t.equal(f.data.verdict, "gap_resolved_by_array")
  t.equal(f.data.z.log, true)
  t.equal({ f.data.x.log, f.data.y.log }, { true, true })
end)

local stars = quietly {
  targets = {
    { name = "Alder", distance = "140 ± 4 pc", stellar_luminosity = "3 +1 -0.5 Lsun" },
    { name = "Birch's \"B\"", distance = "160 pc", stellar_luminosity = "20 ± 3 Lsun" },
    { name = "Cedar", distance = "300 ± 9 pc" },
  },
  given = { wavelength = "1.65 um", projected_baseline = "130 m" }, ask = { "rim_radius", "rim_resolved_by_array" },
  variants = { { name = "short", given = { element_diameter = "2 m" }, ask = { "rim_size_angle" } } },
  figures = {
    { show = "rim_size_angle", against = "stellar_luminosity", lines = { { show = "array_resolution" } } },
    { target = "Alder", show = "rim_elements_by_array", along = { wavelength = sweep("1 um", "3 um", 5) }, title = "same" },
    { target = "Birch's \"B\"", show = "rim_elements_by_array", along = { wavelength = sweep("1 um", "3 um", 5) }, title = "same" },
  },
}

t.test("targets lie on a plane with their errors; who lacks something is left out and named", function()
  local f = figure { of = stars, show = "rim_radius", against = "stellar_luminosity", verdict = "rim_resolved_by_array" }
  t.equal(f.kind, "plane")
  t.equal(#f.data.points, 2)
  t.equal(f.data.left_out, { "Cedar" })
  local alder, cell = f.data.points[1], stars.rows[1].cells[1]
  t.equal({ alder.name, alder.y, alder.y_upper, alder.y_lower }, { "Alder", cell.value, cell.upper, cell.lower })
  t.close(alder.x, 3, 0.05)
  t.equal(alder.x_upper > 1.5 * alder.x_lower, true, "lopsided as given")
  t.equal(alder.share, stars.rows[1].cells[2].share)
end)

t.test("lines on a plane come from the study's common givens, swept along it", function()
  local f = figure { of = stars, show = "rim_size_angle", against = "distance", lines = {
    { show = "array_resolution" }, { show = function(c) return 1 * c.array_resolution end, given = { projected_baseline = "65 m" }, label = "65 m" },
  } }
  local resolution = 1.65e-6 / 260 * 206264806.247 -- λ / 2B in mas
  for _, y in ipairs(f.data.lines[1].y) do t.close(y, resolution, 1e-9) end
  for _, y in ipairs(f.data.lines[2].y) do t.close(y, 2 * resolution, 1e-9) end
  t.equal(f.data.lines[2].label, "65 m")
  f = figure { of = stars, show = "rim_radius", against = "distance", lines = { { show = "spatial_resolution_of_array" } } }
  local line = f.data.lines[1]
  t.equal(#line.x > 10, true)
  for k = 1, #line.x do t.close(line.y[k], line.x[k] * resolution / 1000, 1e-9) end -- 1 mas at 1 pc is 1e-3 au, by definition of the parsec
end)

t.test("a study's figures: specs on the object, made with names that differ", function()
  local list = figure(stars)
  t.equal(#list, 3)
  t.equal({ list[1].kind, list[2].kind }, { "plane", "curve" })
  t.equal({ list[2].name, list[3].name }, { "same", "same_2" })
  t.equal({ list[2].target, list[3].target }, { "Alder", "Birch's \"B\"" })
end)

t.test("spectra and visibilities come with what is usual filled in", function()
  local lit = star:with { inclination = "30 deg", rim_height_ratio = 0.1 }
  local f = figure { kind = "spectrum", of = lit, bands = { "H", "N" } }
  t.equal(f.data.series[1].name, "stellar_flux_density")
  t.equal({ f.data.x.log, f.data.y.log, #f.data.marks, f.data.y.unit }, { true, true, 2, "Jy" })
  t.close(f.data.values[1], 0.3, 1e-9)
  f = figure { kind = "visibility", of = lit:with { disc_position_angle = "0 deg", baseline_position_angle = "0 deg", stellar_flux_fraction = 0.4, halo_flux_fraction = 0 } }
  t.equal(f.data.series[1].name, "rim_squared_visibility")
  t.close(f.data.series[1].values[1], 1, 0.01) -- a point-like source's, by definition, at a short baseline
  t.equal(f.data.y.log, false)
end)

t.test("what is said: caption, alternative, CSV", function()
  local f = figure { of = star, show = "rim_elements_by_array", along = { projected_baseline = sweep("20 m", "200 m", 10) }, title = "a title" }
  t.equal(f.title, "a title")
  local said = f:alternative()
  t.equal(said:find "rises from 0%.%d+ at 20 m to %d.%d+ at 200 m, passes elements required = 1 at %d+%.?%d* m%.$" ~= nil, true, said)
  local at = tonumber(said:match "passes elements required = 1 at (%S+) m")
  t.close(median(star:with { projected_baseline = at * m }.rim_elements_by_array):value(), 1, 5e-3)
  local caption = f:caption()
  for _, wanted in ipairs { "Rim elements by array n_rim,arr along projected baseline B", "68 and 95 %% of 1000 draws, seed 11", "elements required = 1", "distance = 150 ± 5 pc", "wavelength = 1.65 µm" } do
    t.equal(caption:find(wanted) ~= nil, true, wanted .. " in " .. caption)
  end
  t.equal(caption:find "planet mass", nil, "what doesn't matter isn't there")
  t.equal(caption:find "projected baseline =", nil)
  local lines = {}
  for line in f:csv():gmatch "[^\n]+" do lines[#lines + 1] = line end
  t.equal(#lines, 11)
  t.equal(lines[1], "projected_baseline [m],rim_elements_by_array,rim_elements_by_array lower 95 %,rim_elements_by_array lower 68 %,rim_elements_by_array upper 68 %,rim_elements_by_array upper 95 %,elements_required")
  local first = {}
  for field in lines[2]:gmatch "[^,]+" do first[#first + 1] = tonumber(field) end
  t.close(first[2], f.data.series[1].values[1], 1e-6)
  t.close(first[6], f.data.series[1].high95[1], 1e-6)
  t.equal(figure { of = star, show = "rim_size_angle", along = { stellar_luminosity = sweep("1 Lsun", "9 Lsun", 3) }, level = false }:csv():match "^[^\n]*",
    "stellar_luminosity [Lsun],rim_size_angle [mas],rim_size_angle lower 95 % [mas],rim_size_angle lower 68 % [mas],rim_size_angle upper 68 % [mas],rim_size_angle upper 95 % [mas]")
end)

t.test("undefined draws are said in the caption", function()
  local f = figure { of = star, show = "gap_inner_radius", along = { planet_mass = sweep { "1 Mjup", "60 Mjup" } } }
  t.equal(f.data.series[1].values[2] ~= f.data.series[1].values[2], true, "a gap as wide as that has no inner edge")
  t.equal(f:caption():find("Gap inner radius: 50 %% of draws undefined") ~= nil or f:caption():find("Gap inner radius: 50 %% of points undefined") ~= nil, true, f:caption())
end)

t.test("axis labels have symbol and unit from the glossary; names are no markup", function()
  local script = figure { of = star, show = "rim_size_angle", along = { stellar_luminosity = sweep("1 Lsun", "9 Lsun", 3) } }:script()
  t.equal(script:find("stellar luminosity {/:Italic L}_{*} ({/:Italic L}_☉)", 1, true) ~= nil, true)
  t.equal(script:find("rim size angle {/:Italic θ}_{rim} (mas)", 1, true) ~= nil, true)
  script = figure { of = stars, show = "rim_radius", against = "stellar_luminosity" }:script()
  t.equal(script:find("'Birch''s \"B\"'", 1, true) ~= nil, true, "quotes in names are kept")
  local odd = quietly { targets = { { name = "a_b {x} `touch /tmp/never` $(id) \\", rim_radius = "1 au", distance = "100 pc" } }, ask = { "rim_radius" } }
  script = figure { of = odd, show = "rim_radius", against = "distance" }:script()
  t.equal(script:find("a\\_b \\{x\\} `touch /tmp/never` $(id) \\\\'", 1, true) ~= nil, true, "in single quotes, where nothing is run")
end)

t.test("levels: a name, a value, none", function()
  local function levels(level) return figure { of = star, show = "rim_size_angle", along = { projected_baseline = baselines }, level = level }.data.levels end
  t.close(levels "array_resolution"[1].values[10], 1.65e-6 / 400 * 206264806.247, 1e-9)
  t.equal(levels "2 mas"[1].constant, 2)
  t.equal(#levels(false), 0)
  t.equal(figure { of = star, show = "rim_resolved_by_array", along = { projected_baseline = baselines }, level = 0.9 }.data.levels[1].constant, 0.9)
end)

-- Lightness L* of CIE 1976 from sRGB (IEC 61966-2-1, white D65).
local function lightness(colour)
  local y = 0
  for i, weight in ipairs { 0.2126, 0.7152, 0.0722 } do
    local c = tonumber(colour:sub(2 * i, 2 * i + 1), 16) / 255
    y = y + weight * (c <= 0.04045 and c / 12.92 or ((c + 0.055) / 1.055) ^ 2.4)
  end
  return y > 0.008856 and 116 * y ^ (1 / 3) - 16 or 903.3 * y
end

t.test("the colours of maps darken evenly, so that grey print keeps their order", function()
  local script = figure { of = star, show = "rim_resolved_by_array", along = { projected_baseline = sweep("60 m", "160 m", 3), wavelength = sweep("1.2 um", "2.4 um", 3) } }:script()
  local stops = {}
  for colour in script:match "set palette defined (%b())":gmatch "#%x+" do stops[#stops + 1] = lightness(colour) end
  t.equal(#stops > 10, true)
  local steps = {}
  for i = 2, #stops do
    steps[#steps + 1] = stops[i - 1] - stops[i]
    t.equal(steps[#steps] > 0.5, true, "step " .. i)
  end
  t.equal(stops[1] - stops[#stops] > 50, true, "the whole range")
  t.equal(stops[#stops] > 25, true, "black lines are seen on the darkest")
end)

t.test("in block characters", function()
  local f = figure { of = star, show = "rim_resolved_by_array", along = { projected_baseline = sweep("60 m", "160 m", 11) } }
  local lines = {}
  for line in (f:text(60, 12) .. "\n"):gmatch "([^\n]*)\n" do lines[#lines + 1] = line end
  t.equal(lines[1], "rim resolved by array along projected baseline")
  t.equal(#lines, 12)
  for i = 2, 12 do t.equal(utf8.len(lines[i]) <= 60, true) end
end)

-- Bad input: one line each.
local function bad(name, fields, wanted)
  t.test(name, function()
    local message = t.raises(function() figure(fields) end, wanted)
    t.equal(message:find "\n", nil, "one line")
    t.equal(message:find "^tests/lua/test_figure.lua:%d+: " ~= nil, true, "names the user's line: " .. message)
  end)
end
local along = { projected_baseline = baselines }
bad("not a table", 3, "figure wants a table like {of = case, show = name}; got 3")
bad("no case", { show = "rim_radius", along = along }, "figure: of wants a case or a study; got nothing")
bad("an unknown field", { of = star, shown = "rim_radius" }, "figure: there is no 'shown' here; there are against, along,")
bad("a field of another type", { of = star, show = "rim_radius", along = "20 m" }, 'figure: along wants a table; got "20 m"')
bad("nothing to show", { of = star, along = along }, "figure: wants show = a name")
bad("an unknown name", { of = star, show = "rim_radus", along = along }, "figure: show: unknown name 'rim_radus'; did you mean rim_radius")
bad("an unknown name along", { of = star, show = "rim_radius", along = { basline = baselines } }, "unknown name 'basline'")
bad("no sweep", { of = star, show = "rim_radius" }, "figure: rim_radius goes along nothing here: give along = ")
bad("no sweep in along", { of = star, show = "rim_radius", along = { projected_baseline = "20 m" } }, "figure: rim_radius goes along nothing here")
bad("an axis too many", { of = star, show = "rim_radius", along = { projected_baseline = baselines, distance = sweep("100 pc", "200 pc", 2), wavelength = sweep("1 um", "2 um", 2) } },
  "figure: no more than two sweeps can be drawn; there are distance, wavelength, projected_baseline")
bad("a map of one sweep", { kind = "map", of = star, show = "rim_radius", along = along }, "figure: a map wants two sweeps; there is one, along projected_baseline")
bad("what can't be derived", { of = star, show = "cavity_radius", along = along }, "cavity_radius must be given")
bad("two dimensions on one axis", { of = star, show = { "rim_radius", "rim_size_angle" }, along = along }, "figure: show: rim_radius and rim_size_angle can't stand on one axis")
bad("a level of another dimension", { of = star, show = "rim_size_angle", along = along, level = "distance" }, "figure: level wants a quantity in mas, as rim_size_angle is")
bad("an unknown kind", { kind = "pie", of = star, show = "rim_radius", along = along }, 'figure: kind wants one of "curve", "map", "plane", "spectrum", "visibility"; got "pie"')
bad("an unknown width", { width = "broad", of = star, show = "rim_radius", along = along }, 'figure: width wants one of "double", "single"; got "broad"')
bad("an unknown log", { log = "both", of = star, show = "rim_radius", along = along }, 'figure: log wants "x", "y", "xy" or ""; got "both"')
bad("a name with a folder", { name = "a/b", of = star, show = "rim_radius", along = along }, 'figure: name wants a file\'s name without folder and ending; got "a/b"')
bad("each without values", { of = star, show = "rim_radius", along = along, each = { wavelength = "2 um" } }, 'figure: each: wavelength wants a list of values; got "2 um"')
bad("bands along a baseline", { of = star, show = "rim_radius", along = along, bands = { "H" } }, "figure: bands are marked along wavelength; this goes along projected_baseline")
bad("a target of a case", { of = star, target = "Alder", show = "rim_radius", along = along }, "figure: target and variant are of a study's; this is a case")
bad("no target of that name", { of = stars, target = "Elm", show = "rim_radius", along = along }, 'figure: no target "Elm" in the study; there are Alder, Birch\'s "B" and Cedar')
bad("no variant of that name", { of = stars, variant = "long", show = "rim_radius", along = along }, 'figure: no variant "long" in the study')
bad("against of a case", { of = star, show = "rim_radius", against = "distance" }, "figure: against is for the targets of a study; of is a case here")
bad("a plane along something", { of = stars, show = "rim_radius", against = "distance", along = along }, "figure: targets on a plane go along nothing")
bad("a verdict on a plane", { of = stars, show = "rim_resolved_by_array", against = "distance" }, "figure: targets lie on a plane of two quantities; rim_resolved_by_array is a verdict")
bad("no target has both", { of = stars, show = "cavity_radius", against = "distance" }, "figure: no target has both distance and cavity_radius")
bad("a line of another dimension", { of = stars, show = "rim_radius", against = "distance", lines = { { show = "array_resolution" } } }, "figure: line 1 is of another dimension than rim_radius")
bad("a line that is no table", { of = stars, show = "rim_radius", against = "distance", lines = { "array_resolution" } }, "figure: line 1 wants a table")
bad("not a verdict", { of = stars, show = "rim_radius", against = "distance", verdict = "distance" }, "figure: verdict: distance is none")

t.finish()
