-- SPDX-License-Identifier: GPL-3.0-or-later
-- Answers along axes: a sweep as a plot with some of its numbers, a verdict's stretches of yes and no, a grid over two sweeps as a map.
--
--   one(quantity, verdict, axis)    the lines of a quantity with one axis besides the draws; verdict: whether it is one
--   two(quantity, verdict, axes)    of one with two
local core = ...
local format = core.part "lacuna.format"
local show = core.part "lacuna.show"
local text = core.part "lacuna.text"
local textplot = core.part "lacuna.textplot"

local sweeps = {}

local WIDEST = 100 -- a wider plot isn't easier to read
local FEW = 5 -- from so many points on there is a plot
local ALL, LINE, MAP = 20000, 2001, 60 -- an axis is read whole up to so many points; so many of a longer one, alone and in a map

-- So high that a plot and what stands with it fit on the screen.
local function height() return math.max(8, math.min(14, (core.terminal().rows or 24) - 6)) end

local function trimmed(lines)
  for i, line in ipairs(lines) do lines[i] = line:gsub("%s+$", "") end
  return lines
end

-- Reading -------------------------------------------------------------------------------------------------------------------------

-- The points of an axis that are read: all, or so many evenly from end to end.
local function chosen(length, all, most)
  local points, count = {}, length <= all and length or most
  for i = 1, count do points[i] = count == length and i or 1 + math.floor((i - 1) * (length - 1) / (count - 1) + 0.5) end
  return points
end

-- An axis as numbers at its chosen points: in the unit of the given it is named after; where there is none their unit isn't known: 1, 2, 3 ...
local function axis_facts(axis, points)
  local values, name = {}, core.find(axis.name)
  local entry = axis.values and name and core.entry(name)
  for i, point in ipairs(points) do values[i] = entry and axis.values[point] / entry.factor or point end
  local unit = entry and text.unit_of(name) or ""
  local drawn = #points < axis.length and (", %d of them drawn"):format(#points) or ""
  return { values = values, points = points, length = axis.length, known = entry and true, name = axis.name, unit = unit,
    label = ("%s%s, %d points%s"):format(axis.name, unit ~= "" and " (" .. unit .. ")" or "", axis.length, drawn) }
end

-- The elements of a quantity with these axes alone, at their chosen points: one flat list in the order of the axes.
local function read(quantity, axes)
  local whole = true
  for _, axis in ipairs(axes) do whole = whole and #axis.points == axis.length end
  if whole then return core.elements(quantity) end
  local list = {}
  local function at(place, index)
    if index > #axes then
      list[#list + 1] = core.elements(core.at(quantity, place))[1]
      return
    end
    for _, point in ipairs(axes[index].points) do
      place[axes[index].name] = point
      at(place, index + 1)
    end
  end
  at({}, 1)
  return list
end

-- What is drawn of a quantity: middle = list, low and high = the 68 % band of its draws. Of a verdict the share, in per cent.
local function reduced(quantity, verdict, factor, axes)
  local function plain(q)
    local list = read(q, axes)
    for i, value in ipairs(list) do list[i] = verdict and 100 * value or value / factor end
    return list
  end
  if not select(2, text.axes(quantity)) then return { middle = plain(quantity) } end
  if verdict then return { middle = plain(core.chance(quantity)), share = true } end
  local low, median, high = core.spread_of(quantity)
  return { low = plain(low), middle = plain(median), high = plain(high) }
end

-- Whether values are spaced more evenly in their logarithm.
local function is_logarithmic(values)
  local function unevenness(to)
    local least, most = math.huge, 0
    for i = 2, #values do
      local step = math.abs(to(values[i]) - to(values[i - 1]))
      least, most = math.min(least, step), math.max(most, step)
    end
    return most / least
  end
  for _, value in ipairs(values) do if not (value > 0 and value < math.huge) then return false end end
  return #values > 2 and unevenness(math.log) < unevenness(function(value) return value end)
end

-- Of values that can be drawn, the lowest and the highest; nothing where there is none.
local function extremes(values)
  local low, high = math.huge, -math.huge
  for _, value in ipairs(values) do
    if value == value and math.abs(value) < math.huge then low, high = math.min(low, value), math.max(high, value) end
  end
  if low <= high then return low, high end
end

-- Whether values above zero reach over more than two decades.
local function spans_decades(low, high) return low > 0 and high / low > 100 end

-- Numbers -------------------------------------------------------------------------------------------------------------------------

local function title_of(quantity) return (core.facts(quantity)) or "value" end

local function number_text(value, verdict)
  if not verdict then return format.number(value) end
  return value ~= value and "undefined" or value == 0 and "no" or value == 100 and "yes" or format.percent(value / 100)
end

-- Some points as two lines of numbers below each other, as many as fit: all where they are few, else evenly from end to end.
local function number_lines(axis, y, name, unit, verdict)
  for shown = math.min(#y, 9), 1, -1 do
    local above, below = { axis.name }, { name }
    for _, i in ipairs(chosen(#y, shown, shown)) do
      above[#above + 1], below[#below + 1] = format.number(axis.values[i]), number_text(y[i], verdict)
    end
    above[#above + 1], below[#below + 1] = axis.unit, unit
    for k = 1, #above do
      local wide = math.max(format.width(above[k]), format.width(below[k]))
      local pad = (k == 1 or k == #above) and format.pad_right or format.pad_left
      above[k], below[k] = pad(above[k], wide), pad(below[k], wide)
    end
    local lines = { table.concat(above, "  "), table.concat(below, "  ") }
    if format.width(lines[1]) <= show.columns() or shown <= 2 then return trimmed(lines) end
  end
end

-- Where a verdict without draws turns: "no  20 … 91.4 m" a stretch, of the points as they are swept; nil where it turns too often.
local function stretches(axis, y)
  local lines, from = {}, 1
  for i = 1, #y do
    if i == #y or number_text(y[i], true) ~= number_text(y[i + 1], true) then
      local range = format.number(axis.values[from]) .. (i > from and " … " .. format.number(axis.values[i]) or "")
      lines[#lines + 1] = number_text(y[i], true) .. "  " .. format.with_unit(range, axis.unit)
      from = i + 1
    end
  end
  return #lines <= 6 and lines or nil
end

-- One axis ------------------------------------------------------------------------------------------------------------------------

local function curve_lines(quantity, verdict, along, drawn, unit)
  local label, draws = title_of(quantity), drawn.low or drawn.share
  if drawn.share then label = label .. ", share of draws (%)"
  elseif verdict then label = label .. ", yes 100, no 0"
  else label = label .. (unit ~= "" and " (" .. unit .. ")" or "") .. (drawn.low and ", median and 68 % of the draws" or "") end
  return trimmed(textplot.curve {
    x = along.values, y = drawn.middle, low = drawn.low, high = drawn.high, x_log = is_logarithmic(along.values),
    y_log = not verdict and spans_decades((extremes(drawn.low or drawn.middle)), select(2, extremes(drawn.middle))),
    width = math.min(show.columns(), WIDEST), height = height(), x_label = along.label,
    y_label = label .. (draws and text.undefined_note(quantity) or ""), -- without draws the plot counts its holes
  })
end

function sweeps.one(quantity, verdict, axis)
  if core.facts(quantity) == axis.name then return { (text.brief(quantity):gsub("^from (.-) to ", "%1 … ")) .. (", %d points"):format(axis.length) } end
  local _, factor, unit = text.display_unit(quantity)
  local along = axis_facts(axis, chosen(axis.length, ALL, LINE))
  local drawn = reduced(quantity, verdict, factor, { along })
  local turns = verdict and not drawn.share and stretches(along, drawn.middle)
  if turns then
    table.insert(turns, 1, title_of(quantity) .. show.aside(("   along %s, %d points%s"):format(along.name, axis.length, text.undefined_note(quantity))))
    return turns
  end
  local low, high = extremes(drawn.middle)
  local plot = axis.length >= FEW and low and low ~= high and curve_lines(quantity, verdict, along, drawn, unit) or {}
  if not along.known then
    plot[#plot + 1] = text.quantity(quantity)
    return plot
  end
  for _, line in ipairs(number_lines(along, drawn.middle, title_of(quantity), drawn.share and "of draws" or unit, verdict)) do plot[#plot + 1] = line end
  local note = (drawn.low and " (medians)" or "") .. text.undefined_note(quantity)
  if #plot == 2 and note ~= "" then plot[3] = show.aside(" " .. note) end
  return plot
end

-- Two axes ------------------------------------------------------------------------------------------------------------------------

-- The values as z[i][j] at x[i], y[j]: the longer axis lies along the lines.
local function laid_out(values, axes)
  local first_along = axes[1].length >= axes[2].length
  local x, y, z = axes[first_along and 1 or 2], axes[first_along and 2 or 1], {}
  for i = 1, #x.values do
    z[i] = {}
    for j = 1, #y.values do z[i][j] = values[first_along and (i - 1) * #y.values + j or (j - 1) * #x.values + i] end
  end
  return x, y, z
end

-- The legend of the map says the range.
function sweeps.two(quantity, verdict, over)
  local _, factor, unit = text.display_unit(quantity)
  local all = over[1].length * over[2].length <= 50 * ALL and math.huge or MAP
  local axes = { axis_facts(over[1], chosen(over[1].length, all, MAP)), axis_facts(over[2], chosen(over[2].length, all, MAP)) }
  local drawn = reduced(quantity, verdict, factor, axes)
  local low, high = extremes(drawn.middle)
  if not low or low == high then return { text.quantity(quantity) } end
  local x, y, z = laid_out(drawn.middle, axes)
  local label, yes_or_no = title_of(quantity), verdict and not drawn.share
  if drawn.share then label = label .. " (% of draws)"
  elseif verdict then label = label .. "   filled yes, empty no"
  else label = label .. (unit ~= "" and " (" .. unit .. ")" or "") .. (drawn.low and ", medians" or "") end
  return trimmed(textplot.map {
    x = x.values, y = y.values, z = z, x_log = is_logarithmic(x.values), y_log = is_logarithmic(y.values),
    z_log = not verdict and spans_decades(low, high), contour = drawn.share and low < 50 and high >= 50 and 50 or nil,
    width = math.min(show.columns(), WIDEST), height = height() + 2, x_label = x.label, z_label = label, legend = not yes_or_no,
    y_label = y.label .. ((drawn.low or drawn.share) and text.undefined_note(quantity) or ""),
  })
end

return sweeps
