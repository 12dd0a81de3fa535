-- SPDX-License-Identifier: GPL-3.0-or-later
-- A script for gnuplot in the making: texts in its markup, blocks of data, axes with their ticks, the legend, and margins that fit what stands in
-- them. All of this is worked out here in points, from the font's widths, so that it is the same in PDF, SVG and PNG and the room that is left is
-- known; what gnuplot is left to do is to draw.
--
--   new()                       s:add(line) s:block(columns) s:lines_block(lines) s:plot(...) s:explain(title, sample) s:label(words, place)
--   s:lay_out(d, width, height) margins, axes and legend, once s.ranges is set; returns the room of the axes
--   s:text()                    the script
local core = ...
local equation = core.part "lacuna.equation"
local format = core.part "lacuna.format"

local script = { LETTERS = 8, SMALL = 7, SMALLEST = 6 } -- points: of axes; of ticks and legends; of points' names
script.__index = script
local LETTERS, SMALL = script.LETTERS, script.SMALL

-- Text ----------------------------------------------------------------------------------------------------------------------------

-- In single quotes nothing is special but the quote itself; line breaks are none here.
local function quoted(words) return "'" .. words:gsub("%s+", " "):gsub("'", "''") .. "'" end

-- A text that is not to be read as marked up.
local function literal(words) return (words:gsub("[{}^_@&~\\]", "\\%0")) end

local function marked_symbol(name)
  local length = name:match "^(.+)_angle$"
  if length and core.find(length) == length and core.entry(length).on_sky then return "{/:Italic θ}(" .. marked_symbol(length) .. ")" end
  return equation.marked_symbol(core.entry(name).symbol)
end

-- "g cm⁻²", "µm", and those that bear the name of the Sun or a planet with its sign.
local bodies = { sun = "{/:Italic %s}_☉", jup = "{/:Italic %s}_{Jup}", earth = "{/:Italic %s}_⊕" }
local function marked_unit(unit_text)
  local marked = unit_text:gsub("%f[%a]u(%a)", "µ%1"):gsub("%f[%a]([LMR])(%a+)%f[%A]", function(letter, body) return bodies[body] and bodies[body]:format(letter) end)
  return marked
end

-- How wide a marked text is, in points: letters and digits of the font are about 0.62 em wide, taken together.
local function width_of(marked, points)
  local bare = marked:gsub("{/:Italic (.-)}", "%1"):gsub("[{}@_^\\]", "")
  return 0.62 * points * format.width(bare)
end

-- "projected baseline B (m)", in two lines where one is too long for the axis. What a share is of stands in the legend.
local function axis_label(axis, room)
  if axis.verdict then return { axis.verdict == "share" and "share of draws" or "no (0), yes (1)" } end
  local unit = axis.unit_text ~= "" and "(" .. marked_unit(axis.unit_text) .. ")" or ""
  local symbol = axis.name and core.find(axis.name) and marked_symbol(axis.name) or ""
  local after = symbol .. (symbol ~= "" and unit ~= "" and " " or "") .. unit
  local words = literal(axis.words or "")
  local whole = words .. (words ~= "" and after ~= "" and " " or "") .. after
  if after == "" or width_of(whole, LETTERS) <= room then return { whole } end
  return { words, after }
end

local function number(value) return value == value and ("%.9g"):format(value) or "NaN" end

-- What is given, as "λ = 1.65 µm".
local function given_label(name, value) return marked_symbol(name) .. " = " .. marked_unit(literal(value)) end

-- The script's lines -------------------------------------------------------------------------------------------------------------------

function script.new() return setmetatable({ lines = {}, plots = {}, legend = {}, blocks = 0, labels = 0 }, script) end

function script:add(form, ...) self.lines[#self.lines + 1] = select("#", ...) > 0 and form:format(...) or form end

function script:new_block()
  self.blocks = self.blocks + 1
  self:add("$data%d << END", self.blocks)
  return "$data" .. self.blocks
end

function script:add_rows(columns)
  for i = 1, #columns[1] do
    local fields = {}
    for j, column in ipairs(columns) do fields[j] = number(column[i]) end
    self:add((table.concat(fields, " ")))
  end
end

-- A block of data, of lists of equal length; returns its name.
function script:block(...)
  local name = self:new_block()
  self:add_rows { ... }
  self:add "END"
  return name
end

-- Lines with blank lines between them, in one block.
function script:lines_block(lines)
  local name = self:new_block()
  for _, line in ipairs(lines) do
    self:add_rows { line.x, line.y }
    self:add ""
  end
  self:add "END"
  return name
end

function script:plot(form, ...) self.plots[#self.plots + 1] = form:format(...) .. " notitle" end

-- An entry of the legend: a marked text after a sample, { line = dash, colour, width }, { band = colour } or { point = shape }.
function script:explain(title, sample) self.legend[#self.legend + 1] = { title = title, sample = sample } end

-- A marked text; the place and the rest as gnuplot has them.
function script:label(words, form, ...)
  self.labels = self.labels + 1
  self:add("set label %d %s at %s front", self.labels, quoted(words), form:format(...))
end

function script:text()
  return table.concat(self.lines, "\n") .. "\nplot " .. table.concat(self.plots, ", \\\n  ") .. "\n"
end

-- Axes ----------------------------------------------------------------------------------------------------------------------------

-- Ticks of a logarithmic axis: powers of ten where there are many, else also the 2 and 5 of each, written out. Also the labels.
local function log_ticks(low, high)
  local decades, ticks, labels = math.log(high / low, 10), {}, {}
  for exponent = math.floor(math.log(low, 10)), math.ceil(math.log(high, 10)) do
    for digit = 1, 9 do
      local value = tonumber(("%de%d"):format(digit, exponent))
      if value >= low * (1 - 1e-9) and value <= high * (1 + 1e-9) then
        local major = digit == 1 and (decades < 8 or exponent % 2 == 0) or decades < 2 and (digit == 2 or digit == 5) or decades < 0.6
        local label = major and (decades < 5 and value >= 1e-4 and value < 1e6 and ("%g"):format(value) or ("10^{%d}"):format(exponent))
        if decades >= 5 and digit > 1 then label = nil end
        labels[#labels + 1] = label or nil
        if label or decades < 8 then ticks[#ticks + 1] = label and ("'%s' %g"):format(label, value) or ("'' %g 1"):format(value) end
      end
    end
  end
  return "(" .. table.concat(ticks, ", ") .. ")", labels
end

-- Ticks of a linear axis: multiples of 1, 2 or 5 of a power of ten, so far apart that the labels have room. Also the labels.
local function linear_ticks(low, high, room, across)
  local power = 10 ^ math.floor(math.log(high - low, 10) - 2)
  for _, factor in ipairs { 1, 2, 5, 10, 20, 50, 100, 200, 500, 1000 } do
    local step, labels, widest = power * factor, {}, 0
    for k = math.ceil(low / step - 1e-9), math.floor(high / step + 1e-9) do
      labels[#labels + 1] = ("%g"):format(k * step)
      widest = math.max(widest, width_of(labels[#labels], SMALL))
    end
    if #labels * (across and widest + 8 or 20) <= room or factor == 1000 then return number(step), labels end
  end
end

-- A logarithmic axis that is too short for two powers or their 2 and 5 has the ticks of a linear one.
local function ticks_of(axis, range, room, across)
  local ticks, labels
  if axis.log then ticks, labels = log_ticks(range[1], range[2]) end
  if labels and #labels > 1 then return ticks, labels end
  ticks, labels = linear_ticks(range[1], range[2], room, across)
  return axis.log and "(" .. table.concat(labels, ", ") .. ")" or ticks, labels
end

local function widest_of(labels, points)
  local widest = 0
  for _, label in ipairs(labels) do widest = math.max(widest, width_of(label, points)) end
  return widest
end

function script:axis(letter, axis, range, ticks)
  self:add("set %srange [%s:%s]", letter, number(range[1]), number(range[2]))
  if axis.log then self:add("set logscale %s", letter) end
  self:add("set %stics %s", letter, ticks)
end

-- The legend's rows: entries side by side while they fit; each row with its width.
local SAMPLE, LINE = 22, 10 -- the width of a sample with its gaps, the height of a line of text
local function rows_of(legend, width)
  local rows = {}
  for _, entry in ipairs(legend) do
    entry.width = SAMPLE + width_of(entry.title, SMALL)
    local row = rows[#rows]
    if not row or row.width + 8 + entry.width > width then
      row = { width = -8 }
      rows[#rows + 1] = row
    end
    row[#row + 1], row.width = entry, row.width + 8 + entry.width
  end
  return rows
end

-- Draws the legend over the plot, in points of the whole figure.
function script:add_legend(rows, middle, width, height)
  local count = 0
  for i, row in ipairs(rows) do
    local x, y = math.max(4, math.min(middle - row.width / 2, width - 2 - row.width)), height - 1 - LINE * (i - 0.5)
    for _, entry in ipairs(row) do
      local sample = entry.sample
      local function across(form, from, to, ...)
        count = count + 1
        self:add(form, count, (x + from) / width, (y - (sample.band and 3 or 0)) / height, (x + to) / width, (y + (sample.band and 3 or 0)) / height, ...)
      end
      if sample.line then across("set arrow %d from screen %.4f, screen %.4f to screen %.4f, screen %.4f nohead linecolor rgb '%s' linewidth %g dashtype %s front", 0, 18, sample.colour, sample.width, sample.line)
      elseif sample.band then across("set object %d rectangle from screen %.4f, screen %.4f to screen %.4f, screen %.4f fillcolor rgb '%s' fillstyle solid noborder", 2, 18, sample.band)
      else self:label("", "screen %.4f, screen %.4f point linecolor rgb '#000000' pointtype %d pointsize 0.5", (x + 14) / width, y / height, sample.point) end
      self:label(entry.title, "screen %.4f, screen %.4f left font ',%d'", (x + SAMPLE) / width, y / height, SMALL)
      x = x + entry.width + 8
    end
  end
end

-- Margins are set from what stands in them, all in points, so that the room that is left is known: for names beside points, say.
-- self.ranges = { x, y, cb (the colours' or nil) }, each { low, high }. Returns the room of the axes { width, height }.
local COLOURS = 9 -- the width of the bar of colours
function script:lay_out(d, width, height)
  local rows = rows_of(self.legend, width - 8)
  local top, bottom = #rows > 0 and 4 + #rows * LINE or 8, 29
  local tall = height - top - bottom
  local y_ticks, y_labels = ticks_of(d.y, self.ranges.y, tall, false)
  local y_label = axis_label(d.y, tall)
  local left, right = 10 + 11 * #y_label + widest_of(y_labels, SMALL), 10
  local cb_ticks, cb_labels, cb_label
  if self.ranges.cb then
    cb_ticks, cb_labels = ticks_of(d.z, self.ranges.cb, tall, false)
    cb_label = axis_label(d.z, tall)
    right = COLOURS + 18 + widest_of(cb_labels, SMALL) + 11 * #cb_label
  end
  local wide = width - left - right
  self:add("set lmargin at screen %.4f", left / width)
  self:add("set rmargin at screen %.4f", 1 - right / width)
  self:add("set bmargin at screen %.4f", bottom / height)
  self:add("set tmargin at screen %.4f", 1 - top / height)
  self:axis("x", d.x, self.ranges.x, (ticks_of(d.x, self.ranges.x, wide, true)))
  self:axis("y", d.y, self.ranges.y, y_ticks)
  local middle, half_way = (left + wide / 2) / width, (bottom + tall / 2) / height
  self:label(table.concat(axis_label(d.x, wide), " "), "screen %.4f, screen %.4f center", middle, 8 / height) -- a subscript reaches 7 points below
  for i, line in ipairs(y_label) do self:label(line, "screen %.4f, screen %.4f center rotate by 90", (11 * i - 4) / width, half_way) end
  if self.ranges.cb then
    self:axis("cb", d.z, self.ranges.cb, cb_ticks)
    self:add("set colorbox user origin screen %.4f, screen %.4f size screen %.4f, screen %.4f", (left + wide + 6) / width, bottom / height, COLOURS / width, tall / height)
    for i, line in ipairs(cb_label) do self:label(line, "screen %.4f, screen %.4f center rotate by 90", 1 - (11 * (#cb_label - i) + 7) / width, half_way) end
  end
  self:add_legend(rows, left + wide / 2, width, height)
  return { wide, tall }
end

script.literal, script.width_of, script.marked_unit, script.marked_symbol, script.given_label = literal, width_of, marked_unit, marked_symbol, given_label
script.quoted, script.number = quoted, number

return script
