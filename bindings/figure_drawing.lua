-- SPDX-License-Identifier: GPL-3.0-or-later
-- How each kind of figure is drawn: what goes into the script, in which order and in which look.
--
-- Colours: of curves those of Okabe, M., Ito, K. 2008, Color Universal Design (as in Wong, B. 2011, Nature Methods 8, 441), which colour-blind
-- readers tell apart, with dashes and point shapes for grey print besides; of maps the helix through the colour cube by Green, D. A. 2011,
-- Bulletin of the Astronomical Society of India 39, 289, Eq. 2, whose brightness rises evenly.
--
--   drawing.curve(s, d) .map .plane   puts the data d of a figure into the script s, and its ranges into s.ranges; returns nothing, or what is
--                                     to be done when the room of the axes is known
local core = ...
local english = core.part "lacuna.english"
local format = core.part "lacuna.format"
local data = core.part "lacuna.figure_data"
local script = core.part "lacuna.figure_script"
local literal, number, width_of = script.literal, script.number, script.width_of
local marked_symbol, marked_unit, given_label = script.marked_symbol, script.marked_unit, script.given_label

local drawing = {}
local SMALL, SMALLEST = script.SMALL, script.SMALLEST
local BLACK, GREY = "#000000", "#6e6e6e"
local colours = { "#0072b2", "#d55e00", "#009e73", "#cc79a7", "#e69f00", "#56b4e9", "#000000" }
local dashes = { "solid", "(14,5)", "(5,4)", "(14,4,3,4)", "(2,3)", "(22,6)", "(14,4,3,4,3,4)" }

-- Curves --------------------------------------------------------------------------------------------------------------------------

-- A colour mixed with white.
local function tint(colour, share)
  local mixed = {}
  for part in colour:gmatch "%x%x" do mixed[#mixed + 1] = ("%02x"):format(math.floor(255 - share * (255 - tonumber(part, 16)) + 0.5)) end
  return "#" .. table.concat(mixed)
end

-- The range of the y axis: all that is drawn, and zero where it is near. A logarithmic one is left downwards by bands that go far.
local FAR, DEEPEST = 10, 1e8
local function linear_range(d)
  local lists = {}
  for _, s in ipairs(d.series) do
    for _, name in ipairs { "values", "low95", "high95" } do lists[#lists + 1] = s[name] end
  end
  for _, level in ipairs(d.levels) do lists[#lists + 1] = level.values end
  local low, high = data.range(table.unpack(lists))
  if high == low then low, high = low - math.abs(low) / 2 - 1e-300, high + math.abs(high) / 2 + 1e-300 end
  local room = 0.05 * (high - low)
  return { low >= 0 and low < 0.3 * high and 0 or low - room, high + room * (#d.marks > 0 and 3 or 1) }
end

local function log_range(d)
  local low, high = math.huge, 0
  local function take(value, least)
    if value and value > least then low, high = math.min(low, value), math.max(high, value) end
  end
  for _, s in ipairs(d.series) do
    for i, value in ipairs(s.values) do
      take(value, 0)
      take(s.high95 and s.high95[i], 0)
      take(s.low95 and s.low95[i], math.max(value / FAR, 0))
    end
  end
  for _, level in ipairs(d.levels) do
    for _, value in ipairs(level.values) do take(value, 0) end
  end
  low = math.max(low, high / DEEPEST)
  local room = (high / low) ^ 0.04
  return { low / room, high * room * (#d.marks > 0 and (high / low) ^ 0.12 or 1) } -- for the marks' names
end

local function y_range(d)
  if d.y.verdict then return { -0.02, 1.02 } end
  return d.y.log and log_range(d) or linear_range(d)
end

local function add_bands(s, d, series, block, colour, alone)
  local shades = alone and { tint(colour, 0.22), tint(colour, 0.48) } or { "#d8" .. colour:sub(2), "#b8" .. colour:sub(2) }
  if not series.low68 then return end
  local function below(column) return d.y.log and ("($%d > 0 ? $%d : 1e-300)"):format(column, column) or tostring(column) end
  s:plot("%s using 1:%s:6 with filledcurves fillcolor rgb '%s'", block, below(5), shades[1])
  s:plot("%s using 1:%s:4 with filledcurves fillcolor rgb '%s'", block, below(3), shades[2])
  if alone then
    s:explain("95 %", { band = shades[1] })
    s:explain("68 %", { band = shades[2] })
  end
end

-- On which side of the plot a level's label stands: where the curve keeps further away from it.
local function side_of(level, d)
  local values, count = d.series[1].values, #d.values
  local function measured(value, log) return log and math.log(math.max(value, 1e-300)) or value end
  local function place(i)
    local first, last = measured(d.values[1], d.x.log), measured(d.values[count], d.x.log)
    return (measured(d.values[i], d.x.log) - first) / (last - first)
  end
  local least = { left = math.huge, right = math.huge }
  for i, value in ipairs(values) do
    local side = place(i) < 0.4 and "left" or place(i) > 0.6 and "right"
    local distance = math.abs(measured(value, d.y.log) - measured(level.values[i], d.y.log))
    if side and distance == distance then least[side] = math.min(least[side], distance) end
  end
  return least.left > least.right and "left" or "right"
end

local function add_level(s, level, d)
  local block = s:block(d.values, level.values)
  s:plot("%s using 1:2 with lines linecolor rgb '%s' linewidth 1.3 dashtype (10,6)", block, BLACK)
  local side, last = side_of(level, d), #d.values
  local label = level.name and ((level.factor == 1 and "" or "½ ") .. marked_symbol(level.name)) or ""
  if level.name and level.constant then label = label .. " = " end
  if level.constant then label = label .. format.number(level.constant, 3) .. (d.y.unit_text ~= "" and " " .. marked_unit(d.y.unit_text) or "") end
  s:label(label, "%s, first %s %s offset 0,0.8 font ',%d'", side == "left" and "graph 0.02" or "graph 0.98", number(level.values[side == "left" and 1 or last]), side, SMALL)
end

local function add_marks(s, d, width)
  local low, high = d.values[1], d.values[#d.values]
  local room, last, row = 7 * 0.6, -math.huge, 0
  for i, mark in ipairs(d.marks) do
    if mark.high > low and mark.low < high then
      -- Names that would run into the one before stand a line lower.
      local at = (d.x.log and math.log(mark.at / low) / math.log(high / low) or (mark.at - low) / (high - low)) * width
      row = at - last < room * (#mark.label + 1) and 1 - row or 0
      last = at
      s:add("set object %d rectangle from %s, graph 0 to %s, graph 1 behind fillcolor rgb '#e4e4e4' fillstyle solid noborder", 100 + i, number(mark.low), number(mark.high))
      s:label(literal(mark.label), "%s, graph %.2f center font ',%d'", number(mark.at), 0.96 - 0.06 * row, SMALL)
    end
  end
end

local function series_label(series, d)
  local own = series.each and given_label(series.each.name, series.each.value)
  local several = false
  for _, other in ipairs(d.series) do several = several or other.name ~= series.name end
  if own then return several and literal(series.label) .. ", " .. own or own end
  return (#d.series > 1 or d.y.verdict) and literal(series.label) or "median"
end

-- Of several curves each has its own colour and dash; sums, which run along their greatest part, are thin and black above it.
local sums = { total_flux_density = { BLACK, "solid", 1.1 }, observed_flux_density = { GREY, "(10,4)", 1.1 } }

local function style_of(series, i, alone)
  if not alone and sums[series.name] then return table.unpack(sums[series.name]) end
  return colours[(i - 1) % #colours + 1], dashes[(i - 1) % #dashes + 1], 2
end

function drawing.curve(s, d)
  local alone, blocks = #d.series == 1, {}
  s.ranges = { x = { d.values[1], d.values[#d.values] }, y = y_range(d) }
  for i, series in ipairs(d.series) do
    blocks[i] = series.low68 and s:block(d.values, series.values, series.low68, series.high68, series.low95, series.high95) or s:block(d.values, series.values)
    add_bands(s, d, series, blocks[i], (style_of(series, i, alone)), alone)
  end
  for _, level in ipairs(d.levels) do add_level(s, level, d) end
  for i, series in ipairs(d.series) do
    local colour, dash, width = style_of(series, i, alone)
    local title = (not alone or series.low68 or d.y.verdict) and series_label(series, d) or nil
    s:plot("%s using 1:2 with lines linecolor rgb '%s' linewidth %g dashtype %s", blocks[i], colour, width, dash)
    if title then s:explain(title, { line = dash, colour = colour, width = width }) end
  end
  return function(room) add_marks(s, d, room[1]) end
end

-- Maps ----------------------------------------------------------------------------------------------------------------------------

-- Colours from light to dark along the helix; black lines can be seen on all of them.
local STOPS, LIGHTEST, DARKEST = 24, 0.97, 0.30
local function helix()
  local start, rotations, hue = 0.5, -0.9, 1.0
  local stops = {}
  for i = 0, STOPS - 1 do
    local light = LIGHTEST + (DARKEST - LIGHTEST) * i / (STOPS - 1)
    local angle, amplitude = 2 * math.pi * (start / 3 + 1 + rotations * light), hue * light * (1 - light) / 2
    local cos, sin = math.cos(angle), math.sin(angle)
    local rgb = { -0.14861 * cos + 1.78277 * sin, -0.29227 * cos - 0.90649 * sin, 1.97294 * cos }
    for part = 1, 3 do rgb[part] = math.floor(255 * math.min(1, math.max(0, light + amplitude * rgb[part])) + 0.5) end
    stops[i + 1] = ("#%02x%02x%02x"):format(table.unpack(rgb))
  end
  return stops
end

local function palette()
  local stops = helix()
  for i, colour in ipairs(stops) do stops[i] = ("%d '%s'"):format(i - 1, colour) end
  return "set palette defined (" .. table.concat(stops, ", ") .. ")"
end

-- The borders between the points of an axis, one more than points, in the axis's own measure; and whether they are evenly apart.
local function borders(values, log)
  local at, middle = {}, {}
  for i, value in ipairs(values) do at[i] = log and math.log(value, 10) or value end
  for i = 2, #at do middle[i] = (at[i - 1] + at[i]) / 2 end
  middle[1], middle[#at + 1] = at[1] - (middle[2] - at[1]), at[#at] + (at[#at] - middle[#at])
  local step, even = (at[#at] - at[1]) / (#at - 1), true
  for i = 2, #at do even = even and math.abs(at[i] - at[i - 1] - step) < 1e-6 * step end
  return at, middle, even
end

local function add_cells(s, d)
  local xs, x_borders, x_even = borders(d.x_values, d.x.log)
  local ys, y_borders, y_even = borders(d.y_values, d.y.log)
  local columns = { {}, {}, {}, {}, {}, {}, {} }
  for j, row in ipairs(d.values) do
    for i, z in ipairs(row) do
      for c, value in ipairs { xs[i], ys[j], z, x_borders[i], x_borders[i + 1], y_borders[j], y_borders[j + 1] } do table.insert(columns[c], value) end
    end
  end
  local even = x_even and y_even
  local block = s:block(table.unpack(columns, 1, even and 3 or 7))
  -- The cells lie in the axes' own measure, on axes of their own, since images know no logarithm.
  if even then s:plot("%s using 1:2:3 axes x2y2 with image", block)
  else s:plot("%s using 1:2:4:5:6:7:3 axes x2y2 with boxxyerror fillstyle solid noborder linecolor palette", block) end
  local function back(value, log) return log and 10 ^ value or value end
  s:add("set x2range [%s:%s]", number(xs[1]), number(xs[#xs]))
  s:add("set y2range [%s:%s]", number(ys[1]), number(ys[#ys]))
  return { back(xs[1], d.x.log), back(xs[#xs], d.x.log) }, { back(ys[1], d.y.log), back(ys[#ys], d.y.log) }
end

local function add_contours(s, d)
  local explained = {}
  for _, contour in ipairs(d.contours) do
    if #contour.lines > 0 then
      local block = s:lines_block(contour.lines)
      local dash, width = contour.dashed and "(8,5)" or "solid", contour.dashed and 1.6 or 1.7 -- the SVG terminal only sees a change of both
      s:plot("%s using 1:2 with lines linecolor rgb '#ffffff' linewidth 3.5", block)
      s:plot("%s using 1:2 with lines linecolor rgb '%s' linewidth %g dashtype %s", block, BLACK, width, dash)
      if not explained[dash] then
        explained[dash] = true
        local first = next(explained, next(explained)) == nil and english.words_of(d.verdict) .. " in " or "" -- said once
        local title = literal(not contour.share and "where " .. english.words_of(d.verdict) .. " turns" or first .. (contour.dashed and "16 and 84 %" or "50 % of draws"))
        s:explain(title, { line = dash, colour = BLACK, width = width })
      end
    end
  end
end

function drawing.map(s, d)
  local low, high = d.z.low, d.z.high
  if d.z.verdict then low, high = 0, 1
  elseif low == high then low, high = low - math.abs(low) / 2 - 1e-9, high + math.abs(high) / 2 + 1e-9 end
  local x, y = add_cells(s, d)
  s.ranges = { x = x, y = y, cb = { low, high } }
  s:add(palette())
  add_contours(s, d)
end

-- Planes --------------------------------------------------------------------------------------------------------------------------

-- Where a point of the plane stands in the plot, in points from its lower left corner.
local function place_of(axis, value, length)
  local low, high = axis.low, axis.high
  if axis.log then value, low, high = math.log(math.max(value, 1e-300)), math.log(low), math.log(high) end
  return (value - low) / (high - low) * length
end

-- A line's name stands at its right end, on the side that the line doesn't come from. Returns the box it takes.
local function add_line_label(s, d, line, room)
  local last
  for i, y in ipairs(line.y) do if y == y and y >= d.y.low and y <= d.y.high and line.x[i] >= d.x.low and line.x[i] <= d.x.high * (1 + 1e-9) then last = i end end
  if not last or not line.label then return nil end
  local x, y = math.min(place_of(d.x, line.x[last], room[1]), room[1]) - 5, place_of(d.y, line.y[last], room[2])
  local falls = last > 1 and line.y[last - 1] > line.y[last]
  local middle, width = y + (falls and -6 or 6), width_of(line.label, SMALLEST)
  if middle + SMALLEST / 2 > room[2] then middle = y - 6 end
  s:label(literal(line.label), "graph %.4f, graph %.4f right font ',%d'", x / room[1], middle / room[2], SMALLEST)
  return { x - width, middle - SMALLEST / 2, x, middle + SMALLEST / 2 }
end

-- Boxes along a line, so that no name stands on it.
local function keep_clear_of(line, d, room, taken)
  for i = 2, #line.x do
    local x, y = place_of(d.x, line.x[i - 1], room[1]), place_of(d.y, line.y[i - 1], room[2])
    local steps_x, steps_y = (place_of(d.x, line.x[i], room[1]) - x) / 20, (place_of(d.y, line.y[i], room[2]) - y) / 20
    for k = 0, 19 do
      local left, right = x + k * steps_x, x + (k + 1) * steps_x
      local low, high = y + k * steps_y, y + (k + 1) * steps_y
      taken[#taken + 1] = { left, math.min(low, high) - 0.5, right, math.max(low, high) + 0.5 }
    end
  end
end

-- Where the names of the points go: beside them, where no point, error bar or name is; one that fits nowhere is left out.
local function placed_names(d, room, taken)
  local placed, spots = {}, {}
  for i, p in ipairs(d.points) do
    local x, y = place_of(d.x, p.x, room[1]), place_of(d.y, p.y, room[2])
    local left, right = place_of(d.x, p.x - p.x_lower, room[1]), place_of(d.x, p.x + p.x_upper, room[1])
    local low, high = place_of(d.y, p.y - p.y_lower, room[2]), place_of(d.y, p.y + p.y_upper, room[2])
    spots[i] = { x, y }
    for _, box in ipairs { { x - 2.5, y - 2.5, x + 2.5, y + 2.5 }, { left, y - 1, right, y + 1 }, { x - 1, low, x + 1, high } } do taken[#taken + 1] = box end
  end
  local function free(box)
    if box[1] < 0 or box[3] > room[1] or box[2] < 0 or box[4] > room[2] then return false end
    for _, other in ipairs(taken) do
      if box[1] < other[3] and box[3] > other[1] and box[2] < other[4] and box[4] > other[2] then return false end
    end
    return true
  end
  for i, p in ipairs(d.points) do
    local x, y, width = spots[i][1], spots[i][2], width_of(p.name, SMALLEST)
    for _, try in ipairs { { 4, 5, 0 }, { 4, -5, 0 }, { -4, 5, 1 }, { -4, -5, 1 }, { 0, 7, 0.5 }, { 0, -7, 0.5 }, { 7, 0, 0 }, { -7, 0, 1 } } do
      local left, middle = x + try[1] - try[3] * width, y + try[2]
      local box = { left, middle - SMALLEST / 2, left + width, middle + SMALLEST / 2 }
      if free(box) then
        taken[#taken + 1] = box
        placed[#placed + 1] = { name = p.name, x = (left + width / 2) / room[1], y = middle / room[2] }
        break
      end
    end
  end
  return placed
end

local function add_points(s, d)
  local groups = { { points = {}, shape = 7, title = d.verdict and english.words_of(d.verdict) .. " in ≥ 50 % of draws" }, { points = {}, shape = 6, title = "< 50 %" } }
  for _, p in ipairs(d.points) do table.insert(groups[d.verdict and not (p.share and p.share >= 0.5) and 2 or 1].points, p) end
  for _, group in ipairs(groups) do
    if #group.points > 0 then
      local columns = { {}, {}, {}, {}, {}, {} }
      for i, p in ipairs(group.points) do
        local low_x, low_y = p.x - p.x_lower, p.y - p.y_lower
        for c, value in ipairs { p.x, p.y, low_x, p.x + p.x_upper, low_y, p.y + p.y_upper } do columns[c][i] = value end
      end
      local block = s:block(table.unpack(columns))
      s:plot("%s using 1:2:3:4:5:6 with xyerrorbars linecolor rgb '%s' linewidth 0.8 pointtype 0", block, GREY)
      s:plot("%s using 1:2 with points linecolor rgb '#ffffff' pointtype 7 pointsize 0.5", block)
      s:plot("%s using 1:2 with points linecolor rgb '%s' pointtype %d pointsize 0.5", block, BLACK, group.shape)
      if group.title then s:explain(group.title, { point = group.shape }) end
    end
  end
end

function drawing.plane(s, d)
  s.ranges = { x = { d.x.low, d.x.high }, y = { d.y.low, d.y.high } }
  for i, line in ipairs(d.lines) do
    local block = s:block(line.x, line.y)
    s:plot("%s using 1:2 with lines linecolor rgb '%s' linewidth 1.6 dashtype %s", block, colours[(i - 1) % #colours + 1], dashes[i % #dashes + 1])
  end
  add_points(s, d)
  return function(room)
    local taken = {}
    for _, line in ipairs(d.lines) do
      taken[#taken + 1] = add_line_label(s, d, line, room)
      keep_clear_of(line, d, room, taken)
    end
    for _, placed in ipairs(placed_names(d, room, taken)) do
      s:label(literal(placed.name), "graph %.4f, graph %.4f center font ',%d'", placed.x, placed.y, SMALLEST)
    end
  end
end

return drawing
