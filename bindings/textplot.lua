-- SPDX-License-Identifier: GPL-3.0-or-later
-- Pictures in block characters: a histogram in one line; curves with bands, maps and points with error bars between axes.
--
--   histogram(counts)                 one line, a character a count
--   histogram(values, columns, { low =, high =, log = true })    the same of values sorted into so many bins from low to high
--   curve{ x =, y =, low =, high =, low95 =, high95 =, level = }  a curve, its 68 % and 95 % bands, a level line
--   map{ x =, y =, z = { [i] = { [j] = z at x[i], y[j] } }, contour =, z_label =, z_log = true,
--       legend = false }
--   points{ x =, y =, x_error =, y_error =, names = }             an error is a number, or { upper, lower }
--
-- Those with axes also take x_label, y_label, x_log, y_log, width and height (of the whole picture, 80 and 14 where left out) and
-- return the list of its lines, each exactly that wide. `ascii = true` or false chooses the characters; else the terminal does. What is
-- undefined, infinite or, on a logarithmic axis, not positive leaves a hole, marked with a × on the axis or in the map.
local core = ...
local format = core.part "lacuna.format"

local textplot = {}

local block = {
  bars = { [0] = " ", "▁", "▂", "▃", "▄", "▅", "▆", "▇", "█" }, shades = { [0] = " ", "░", "▒", "▓", "█" },
  -- By the quarters that are filled: 1 upper left, 2 upper right, 4 lower left, 8 lower right.
  quarters = { "▘", "▝", "▀", "▖", "▌", "▞", "▛", "▗", "▚", "▐", "▜", "▄", "▙", "▟", "█" },
  band = "▒", band95 = "░", level = "╌", contour = "•", hole = "×", across = "─", up = "│", tick = "┤", corner = "└", below = "┬", cut = "…",
}
local ascii = {
  bars = { [0] = " ", ".", ":", "-", "=", "+", "*", "#", "@" }, shades = { [0] = " ", ".", ":", "+", "#" },
  quarters = setmetatable({}, { __index = function() return "*" end }),
  band = ":", band95 = ".", level = "-", contour = "o", hole = "x", across = "-", up = "|", tick = "+", corner = "+", below = "+", cut = "~",
}

local function look(wanted)
  if wanted == nil then wanted = core.terminal().ascii end
  return wanted and ascii or block
end

local function clipped(value, low, high) return math.max(low, math.min(high, value)) end

-- Scales --------------------------------------------------------------------------------------------------------------------------

local function drawable(value, log) return value == value and math.abs(value) < math.huge and (not log or value > 0) end

-- A scale from 0 to 1 between two values, equal ones apart by a little of their own size.
local function scale_between(low, high, log)
  local to = log and math.log or function(value) return value end
  if low == high then
    local apart = log and 1 or low == 0 and 1 or math.abs(low) * 0.1
    low, high = log and low / 2 or low - apart, log and high * 2 or high + apart
  end
  local first, last = to(low), to(high)
  return { low = low, high = high, log = log, at = function(value) return (to(value) - first) / (last - first) end }
end

-- The scale of some lists of values together; from 0 to 1 where none can be drawn.
local function scale_of(lists, log)
  local low, high = math.huge, -math.huge
  for _, list in ipairs(lists) do
    for _, value in ipairs(list) do
      if drawable(value, log) then low, high = math.min(low, value), math.max(high, value) end
    end
  end
  if low > high then low, high = log and 1 or 0, log and 10 or 1 end
  return scale_between(low, high, log)
end

-- The step of 1, 2 or 5 times a power of ten that comes nearest above.
local function round_step(least)
  local power = 10.0 ^ math.floor(math.log(least, 10) + 1e-9)
  for _, factor in ipairs { 1, 2, 5 } do if factor * power >= least * (1 - 1e-9) then return factor * power end end
  return 10 * power
end

-- A tick's text, with the digits that tell it from the next.
local function tick_text(value, step)
  local exponent = math.floor(math.log(step, 10) + 1e-9)
  local largest = math.abs(value)
  if largest > 0 and (largest >= 1e6 or step < 1e-5) then
    local text = ("%%.%de"):format(clipped(math.floor(math.log(largest, 10) + 1e-9) - exponent, 0, 15)):format(value)
    return (text:gsub("e([-+])0*", function(sign) return sign == "-" and "e-" or "e" end))
  end
  return ("%%.%df"):format(clipped(-exponent, 0, 15)):format(value)
end

local function linear_ticks(scale, most)
  local span, ticks = scale.high - scale.low, {}
  if not (span < math.huge) then return ticks end
  local step = round_step(span / math.max(most, 1))
  for i = math.ceil(scale.low / step - 1e-6), math.floor(scale.high / step + 1e-6) do
    ticks[#ticks + 1] = { value = i * step, text = tick_text(i * step, step) }
  end
  return ticks
end

-- Multiples of the decades within a scale.
local function decade_ticks(scale, factors, every)
  local ticks = {}
  for power = math.floor(math.log(scale.low, 10)), math.ceil(math.log(scale.high, 10)) do
    for _, factor in ipairs(factors) do
      local value = tonumber(("%de%d"):format(factor, power))
      if power % every == 0 and value >= scale.low * (1 - 1e-9) and value <= scale.high * (1 + 1e-9) then
        ticks[#ticks + 1] = { value = value, text = format.number(value) }
      end
    end
  end
  return ticks
end

-- Round ticks on a scale, at most about so many: decades on a logarithmic one, with their 2 and 5 where these are few.
local function ticks_of(scale, most)
  if not scale.log then return linear_ticks(scale, most) end
  local fine = decade_ticks(scale, { 1, 2, 5 }, 1)
  if #fine < 2 then return linear_ticks(scale, most) end
  if #fine <= most then return fine end
  local decades = decade_ticks(scale, { 1 }, 1)
  if #decades < 2 then return fine end
  if #decades <= most then return decades end
  return decade_ticks(scale, { 1 }, math.ceil(#decades / math.max(most, 1)))
end

-- Frames --------------------------------------------------------------------------------------------------------------------------

-- A text in exactly so many columns.
local function fitted(text, columns, glyphs)
  if format.width(text) > columns then
    local kept = {}
    for _, code in utf8.codes(text) do
      kept[#kept + 1] = utf8.char(code)
      if format.width(table.concat(kept)) >= columns then break end
    end
    kept[#kept] = glyphs.cut
    text = table.concat(kept)
  end
  return format.pad_right(text, columns)
end

-- The empty picture between two scales. `heads`: lines above it, to which the y label comes, and `note` beside it where there is room.
local function new_frame(options, x, y, heads, note)
  local glyphs = look(options.ascii)
  local frame = { glyphs = glyphs, x = x, y = y, options = options, heads = heads, holes = {} }
  frame.width = math.max(math.floor(options.width or 80), 24)
  heads[#heads + 1] = options.y_label
  local beside = note and options.y_label and options.y_label .. "   " .. note
  if beside and format.width(beside) <= frame.width then heads[#heads] = beside
  else heads[#heads + 1] = note end
  local around = 2 + #heads + (options.x_label and 1 or 0)
  frame.rows = math.max(math.floor(options.height or 14) - around, 3)
  frame.y_ticks = ticks_of(y, math.max(2, math.ceil(frame.rows * 0.6)))
  frame.margin = 0
  for _, tick in ipairs(frame.y_ticks) do frame.margin = math.max(frame.margin, format.width(tick.text)) end
  frame.columns = frame.width - frame.margin - 2
  frame.x_ticks = ticks_of(x, math.max(2, frame.columns // 10))
  for row = 1, frame.rows do
    frame[row] = {}
    for column = 1, frame.columns do frame[row][column] = " " end
  end
  return frame
end

local function column_of(frame, value) return clipped(math.floor(frame.x.at(value) * frame.columns) + 1, 1, frame.columns) end
local function row_of(frame, value) return clipped(math.floor((1 - frame.y.at(value)) * frame.rows) + 1, 1, frame.rows) end

-- Labels below the x axis, each under its tick, where there is room.
local function tick_line(frame)
  local line, at = "", 0
  for _, tick in ipairs(frame.x_ticks) do
    local wide = format.width(tick.text)
    local start = clipped(column_of(frame, tick.value) - 1 - (wide - 1) // 2, 0, frame.columns - wide)
    if start >= at + (at > 0 and 2 or 0) then
      line = line .. (" "):rep(start - at) .. tick.text
      at = start + wide
    end
  end
  return line
end

local function axis_line(frame)
  local axis = {}
  for column = 1, frame.columns do axis[column] = frame.glyphs.across end
  for _, tick in ipairs(frame.x_ticks) do axis[column_of(frame, tick.value)] = frame.glyphs.below end
  for column in pairs(frame.holes) do axis[column] = frame.glyphs.hole end
  return table.concat(axis)
end

-- The lines of the picture.
local function finished(frame)
  local options, glyphs, lines, labels = frame.options, frame.glyphs, {}, {}
  local function add(text) lines[#lines + 1] = fitted(text, frame.width, glyphs) end
  for _, head in ipairs(frame.heads) do add(head) end
  for _, tick in ipairs(frame.y_ticks) do labels[row_of(frame, tick.value)] = tick.text end
  for row = 1, frame.rows do
    add(format.pad_left(labels[row] or "", frame.margin) .. " " .. (labels[row] and glyphs.tick or glyphs.up) .. table.concat(frame[row]))
  end
  local before = (" "):rep(frame.margin + 1)
  add(before .. glyphs.corner .. axis_line(frame))
  add(before .. " " .. tick_line(frame))
  if options.x_label then add(format.pad_left(options.x_label, frame.width)) end
  return lines
end

-- One list of the options, checked.
local function list(options, key, what, length)
  local values = options[key]
  if values == nil and length then return nil end
  if type(values) ~= "table" then core.raise(("%s wants a list %s"):format(what, key)) end
  if length and #values ~= length then core.raise(("%s: %s has %d values, x has %d"):format(what, key, #values, length)) end
  return values
end

-- Curves --------------------------------------------------------------------------------------------------------------------------

-- The curve's points as positions from 0 to 1; false where there is a hole.
local function positions(frame, x, y)
  local found = {}
  for i = 1, #x do
    found[i] = drawable(x[i], frame.x.log) and drawable(y[i], frame.y.log) and { frame.x.at(x[i]), frame.y.at(y[i]) }
  end
  return found
end

-- Fills the cells between two edges, from each point to the next.
local function draw_band(frame, x, low, high, glyph)
  local lower, upper = positions(frame, x, low), positions(frame, x, high)
  local function row(position) return clipped(math.floor((1 - position) * frame.rows) + 1, 1, frame.rows) end
  for i = 1, #x do
    local a, b, c, d = lower[i], lower[i + 1], upper[i], upper[i + 1]
    if a and c then
      if not (b and d) then b, d = a, c end
      local first, last = a[1] * (frame.columns - 1), b[1] * (frame.columns - 1)
      if first > last then first, last, a, b, c, d = last, first, b, a, d, c end
      for column = math.ceil(first - 0.5), math.floor(last + 0.5) do
        local part = last > first and clipped((column - first) / (last - first), 0, 1) or 0
        for at = row(c[2] + part * (d[2] - c[2])), row(a[2] + part * (b[2] - a[2])) do frame[at][column + 1] = glyph end
      end
    end
  end
end

-- Draws the curve in quarters of cells: between neighbouring points a straight line without a step left open.
local function draw_curve(frame, x, y)
  local columns, rows, masks = 2 * frame.columns, 2 * frame.rows, {}
  local function fill(column, row)
    column, row = clipped(math.floor(column), 0, columns - 1), clipped(math.floor(row), 0, rows - 1)
    local cell = (row // 2) * frame.columns + column // 2
    masks[cell] = (masks[cell] or 0) | 1 << 2 * (row % 2) + column % 2
  end
  local function pixel(position) return position[1] * (columns - 1), math.min((1 - position[2]) * rows, rows - 1) end
  local points = positions(frame, x, y)
  for i = 1, #x do
    if points[i] then
      local x1, y1 = pixel(points[i])
      fill(x1 + 0.5, y1)
      if points[i + 1] then
        local x2, y2 = pixel(points[i + 1])
        local steps = math.ceil(math.max(math.abs(x2 - x1), math.abs(y2 - y1)))
        for k = 1, steps do fill(x1 + (x2 - x1) * k / steps + 0.5, y1 + (y2 - y1) * k / steps) end
      end
    end
  end
  for cell, mask in pairs(masks) do frame[cell // frame.columns + 1][cell % frame.columns + 1] = frame.glyphs.quarters[mask] end
end

-- Marks the columns on the axis that belong to points with no value: halfway to the neighbours.
local function mark_holes(frame, x, y)
  for i = 1, #x do
    if drawable(x[i], frame.x.log) and not drawable(y[i], frame.y.log) then
      local here = column_of(frame, x[i])
      local function halfway(other) return other and drawable(other, frame.x.log) and (here + column_of(frame, other)) // 2 or here end
      local one, two = halfway(x[i - 1]), halfway(x[i + 1])
      for column = math.min(one, two), math.max(one, two) do frame.holes[column] = true end
    end
  end
end

-- "× 3 of 20 undefined" of the values of some lists; nil where all can be drawn.
local function hole_note(options, lists, log)
  local holes, all = 0, 0
  for _, values in ipairs(lists) do
    for _, value in ipairs(values) do holes = holes + (drawable(value, log) and 0 or 1) end
    all = all + #values
  end
  return holes > 0 and ("%s %d of %d undefined"):format(look(options.ascii).hole, holes, all) or nil
end

function textplot.curve(options)
  local x = list(options, "x", "curve")
  local y = list(options, "y", "curve", #x) or core.raise "curve wants a list y"
  local low, high, low95, high95 = list(options, "low", "curve", #x), list(options, "high", "curve", #x), list(options, "low95", "curve", #x), list(options, "high95", "curve", #x)
  local lists = { y, { options.level } }
  for _, edge in pairs { low or {}, high or {}, low95 or {}, high95 or {} } do lists[#lists + 1] = edge end
  local frame = new_frame(options, scale_of({ x }, options.x_log), scale_of(lists, options.y_log), {}, hole_note(options, { y }, options.y_log))
  if low95 and high95 then draw_band(frame, x, low95, high95, frame.glyphs.band95) end
  if low and high then draw_band(frame, x, low, high, frame.glyphs.band) end
  if options.level and drawable(options.level, options.y_log) then
    local row = frame[row_of(frame, options.level)]
    for column = 1, frame.columns do row[column] = frame.glyphs.level end
  end
  draw_curve(frame, x, y)
  mark_holes(frame, x, y)
  return finished(frame)
end

-- Maps ----------------------------------------------------------------------------------------------------------------------------

-- The scale over which each of some coordinates has a cell of its own: half a step beyond the first and the last.
local function scale_of_cells(values, log)
  local low, high, count = math.huge, -math.huge, #values
  for _, value in ipairs(values) do if drawable(value, log) then low, high = math.min(low, value), math.max(high, value) end end
  if low >= high then return scale_of({ values }, log) end
  if log then
    local half = (high / low) ^ (0.5 / (count - 1))
    return scale_between(low / half, high * half, true)
  end
  local half = (high - low) / (count - 1) / 2
  return scale_between(low - half, high + half, false)
end

-- For each of so many cells along a scale, which coordinate is nearest to its middle.
local function nearest(values, scale, cells)
  local found = {}
  for cell = 1, cells do
    local best = math.huge
    for i, value in ipairs(values) do
      local distance = drawable(value, scale.log) and math.abs(scale.at(value) - (cell - 0.5) / cells) or math.huge
      if distance < best then best, found[cell] = distance, i end
    end
  end
  return found
end

-- Shade by shade from the lowest to the highest value.
local function shade_of(value, scale, glyphs)
  if not drawable(value, scale.log) then return glyphs.hole end
  return glyphs.shades[clipped(math.floor(scale.at(value) * 5), 0, 4)]
end

local function map_heads(options, z)
  local glyphs, parts = look(options.ascii), {}
  if options.z_label then parts[1] = options.z_label end
  if options.legend ~= false then
    parts[#parts + 1] = ("%s [%s] %s"):format(format.number(z.low), table.concat(glyphs.shades, "", 0, 4), format.number(z.high))
  end
  if options.contour then parts[#parts + 1] = glyphs.contour .. " across " .. format.number(options.contour) end
  parts[#parts + 1] = hole_note(options, options.z, options.z_log)
  return { table.concat(parts, "   ") }
end

function textplot.map(options)
  local x, y, z = list(options, "x", "map"), list(options, "y", "map"), list(options, "z", "map")
  if #z ~= #x then core.raise(("map: z has %d lists, x has %d values"):format(#z, #x)) end
  local z_scale = scale_of(z, options.z_log)
  local frame = new_frame(options, scale_of_cells(x, options.x_log), scale_of_cells(y, options.y_log), map_heads(options, z_scale))
  local at_column, at_row = nearest(x, frame.x, frame.columns), nearest(y, frame.y, frame.rows)
  local function value(row, column)
    local i, j = at_column[column], at_row[frame.rows + 1 - row]
    return i and j and z[i][j]
  end
  for row = 1, frame.rows do
    for column = 1, frame.columns do
      local here = value(row, column) or 0 / 0
      frame[row][column] = shade_of(here, z_scale, frame.glyphs)
      for _, other in ipairs { value(row, column + 1) or here, value(row + 1, column) or here } do
        if options.contour and here == here and other == other and (here >= options.contour) ~= (other >= options.contour) then
          frame[row][column] = frame.glyphs.contour
        end
      end
    end
  end
  return finished(frame)
end

-- Points --------------------------------------------------------------------------------------------------------------------------

-- Both ends of each error bar.
local function ends(values, errors)
  local low, high = {}, {}
  for i, value in ipairs(values) do
    local this = errors and errors[i] or 0
    low[i], high[i] = value - (type(this) == "table" and this[2] or this), value + (type(this) == "table" and this[1] or this)
  end
  return low, high
end

local letters = "abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRSTUVWXYZ"

-- The names with their letters, some to a line.
local function name_lines(names, columns, glyphs)
  local lines = {}
  for i = 1, math.min(#names, #letters) do
    local entry = letters:sub(i, i) .. " " .. names[i]
    local last = lines[#lines]
    if last and format.width(last) + 3 + format.width(entry) <= columns then lines[#lines] = last .. "   " .. entry
    else lines[#lines + 1] = entry end
  end
  for i, line in ipairs(lines) do lines[i] = fitted(line, columns, glyphs) end
  return lines
end

-- An error bar along a row or a column; an end that can't be drawn (on a logarithmic axis, below zero) reaches the edge.
local function draw_bar(low, high, scale, position, edge, put)
  local first = drawable(low, scale.log) and position(low) or edge
  local last = drawable(high, scale.log) and position(high) or first
  for at = math.min(first, last), math.max(first, last) do put(at) end
end

function textplot.points(options)
  local x = list(options, "x", "points")
  local y = list(options, "y", "points", #x) or core.raise "points wants a list y"
  local x_low, x_high = ends(x, list(options, "x_error", "points", #x))
  local y_low, y_high = ends(y, list(options, "y_error", "points", #x))
  local names, width = options.names or {}, math.max(math.floor(options.width or 80), 24)
  local legend = name_lines(names, width, look(options.ascii))
  local inner = setmetatable({ height = (options.height or 14) - #legend }, { __index = options })
  local frame = new_frame(inner, scale_of({ x_low, x, x_high }, options.x_log), scale_of({ y_low, y, y_high }, options.y_log),
    {}, hole_note(options, { y }, options.y_log))
  local shown = {}
  for i = 1, #x do shown[i] = drawable(x[i], options.x_log) and drawable(y[i], options.y_log) end
  for i = 1, #x do
    if shown[i] then
      local column, row = column_of(frame, x[i]), row_of(frame, y[i])
      if x_high[i] > x_low[i] then
        draw_bar(x_low[i], x_high[i], frame.x, function(v) return column_of(frame, v) end, 1, function(at) frame[row][at] = frame.glyphs.across end)
      end
      if y_high[i] > y_low[i] then
        draw_bar(y_low[i], y_high[i], frame.y, function(v) return row_of(frame, v) end, frame.rows, function(at) frame[at][column] = frame.glyphs.up end)
      end
    end
  end
  for i = 1, #x do -- the points themselves over all bars
    if shown[i] then frame[row_of(frame, y[i])][column_of(frame, x[i])] = names[i] and i <= #letters and letters:sub(i, i) or frame.glyphs.contour end
  end
  mark_holes(frame, x, y)
  local lines = finished(frame)
  for _, line in ipairs(legend) do lines[#lines + 1] = line end
  return lines
end

-- Histograms ----------------------------------------------------------------------------------------------------------------------

-- How many of the values fall into each of so many equal bins (equal in the logarithm: log); those outside are left out.
local function counted(values, columns, range)
  local scale = range.low and scale_between(range.low, range.high, range.log) or scale_of({ values }, range.log)
  local counts = {}
  for i = 1, columns do counts[i] = 0 end
  for _, value in ipairs(values) do
    local at = drawable(value, range.log) and scale.at(value) or -1
    if at >= 0 and at <= 1 then
      local bin = math.min(math.floor(at * columns) + 1, columns)
      counts[bin] = counts[bin] + 1
    end
  end
  return counts
end

-- One line: the highest bin is a full block, and one that isn't empty is seen.
function textplot.histogram(counts, columns, range)
  range = range or {}
  if columns then counts = counted(counts, columns, range) end
  local bars, most = look(range.ascii).bars, 0
  for _, count in ipairs(counts) do most = math.max(most, count) end
  local cells = {}
  for i, count in ipairs(counts) do cells[i] = bars[count > 0 and math.max(1, math.floor(8 * count / most + 0.5)) or 0] end
  return table.concat(cells)
end

return textplot
