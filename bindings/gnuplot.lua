-- SPDX-License-Identifier: GPL-3.0-or-later
-- Figures as scripts for gnuplot, and gnuplot run on them: one process for a list of figures, which writes their pictures to its standard
-- output one after another. It gets no more of the environment than it needs to find fonts, and reads nobody's settings; so the pictures hang on
-- the figure, on the versions of gnuplot and its libraries and on the installed fonts, and on nothing else.
--
-- Colours: of curves those of Okabe, M., Ito, K. 2008, Color Universal Design (as in Wong, B. 2011, Nature Methods 8, 441), which colour-blind
-- readers tell apart, with dashes and point shapes for grey print besides; of maps the helix through the colour cube by Green, D. A. 2011,
-- Bulletin of the Astronomical Society of India 39, 289, Eq. 2, whose brightness rises evenly.
local core = ...
local equation = core.part "lacuna.equation"
local format = core.part "lacuna.format"
local svg = core.part "lacuna.svg"

local gnuplot = {}
local FONT = "DejaVu Sans" -- Debian's gnuplot always brings it along; elsewhere the nearest that fontconfig knows
local POINT = 25.4 / 72 -- mm
local BLACK, GREY = "#000000", "#6e6e6e"
local colours = { "#0072b2", "#d55e00", "#009e73", "#cc79a7", "#e69f00", "#56b4e9", "#000000" }
local dashes = { "solid", "(14,5)", "(5,4)", "(14,4,3,4)", "(2,3)", "(22,6)", "(14,4,3,4,3,4)" }
gnuplot.colours = colours

-- Widths of one and of two columns of a journal, and heights, in mm.
local sizes = {
  single = { curve = { 86, 64 }, map = { 86, 70 }, plane = { 86, 72 } },
  double = { curve = { 178, 95 }, map = { 178, 110 }, plane = { 178, 110 } },
}

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

-- How wide a marked text is, in points: letters of the font are about 0.6 em wide.
local function width_of(marked, points)
  local bare = marked:gsub("{/:Italic (.-)}", "%1"):gsub("[{}@_^\\]", "")
  return 0.6 * points * format.width(bare)
end

-- "projected baseline B (m)"; the symbol alone where that is too long for the axis.
local function axis_label(axis, room)
  local words = literal(axis.words_of_share or axis.words or "")
  local unit = axis.unit_text ~= "" and " (" .. marked_unit(axis.unit_text) .. ")" or ""
  local symbol = axis.name and not axis.verdict and core.find(axis.name) and marked_symbol(axis.name) or nil
  local whole = words .. (symbol and " " .. symbol or "") .. unit
  if symbol and width_of(whole, 8) > room then return symbol .. unit end
  return whole
end

local function number(value) return value == value and ("%.9g"):format(value) or "NaN" end

-- What is given, as "λ = 1.65 µm".
local function given_label(name, value) return marked_symbol(name) .. " = " .. literal(value):gsub("%f[%a]u(%a)", "µ%1") end

-- The script's lines -------------------------------------------------------------------------------------------------------------------

local script = {}
script.__index = script

local function new_script() return setmetatable({ lines = {}, plots = {}, blocks = 0 }, script) end

function script:add(form, ...) self.lines[#self.lines + 1] = select("#", ...) > 0 and form:format(...) or form end

-- A block of data, of lists of equal length; returns its name.
function script:block(...)
  self.blocks = self.blocks + 1
  local name, columns = "$data" .. self.blocks, { ... }
  self:add(name .. " << END")
  for i = 1, #columns[1] do
    local fields = {}
    for j, column in ipairs(columns) do fields[j] = number(column[i]) end
    self:add((table.concat(fields, " ")))
  end
  self:add "END"
  return name
end

function script:plot(form, ...) self.plots[#self.plots + 1] = form:format(...) end

function script:text()
  return table.concat(self.lines, "\n") .. "\nplot " .. table.concat(self.plots, ", \\\n  ") .. "\n"
end

-- Axes ----------------------------------------------------------------------------------------------------------------------------

-- Ticks of a logarithmic axis: powers of ten where there are many, else also the 2 and 5 of each, written out.
local function log_ticks(low, high)
  local decades, ticks = math.log(high / low, 10), {}
  for exponent = math.floor(math.log(low, 10)), math.ceil(math.log(high, 10)) do
    for digit = 1, 9 do
      local value = tonumber(("%de%d"):format(digit, exponent))
      if value >= low * (1 - 1e-9) and value <= high * (1 + 1e-9) then
        local major = digit == 1 and (decades < 8 or exponent % 2 == 0) or decades < 2 and (digit == 2 or digit == 5) or decades < 0.6
        local label = major and (decades < 5 and value >= 1e-4 and value < 1e6 and ("%g"):format(value) or ("10^{%d}"):format(exponent))
        if decades >= 5 and digit > 1 then label = nil end
        if label or decades < 8 then ticks[#ticks + 1] = label and ("'%s' %g"):format(label, value) or ("'' %g 1"):format(value) end
      end
    end
  end
  return table.concat(ticks, ", ")
end

-- The range of an axis and, where it is logarithmic, its ticks. Without a range gnuplot chooses.
function script:axis(letter, axis, low, high, room)
  self:add("set %slabel %s", letter, quoted(axis_label(axis, room)))
  if low then self:add("set %srange [%s:%s]", letter, number(low), number(high)) end
  if axis.log then
    self:add("set logscale %s", letter)
    self:add("set %stics (%s)", letter, log_ticks(low, high))
  end
end

-- Curves --------------------------------------------------------------------------------------------------------------------------

-- A colour mixed with white.
local function tint(colour, share)
  local mixed = {}
  for part in colour:gmatch "%x%x" do mixed[#mixed + 1] = ("%02x"):format(math.floor(255 - share * (255 - tonumber(part, 16)) + 0.5)) end
  return "#" .. table.concat(mixed)
end

local function positive(value, log) return not log or value > 0 end

-- The range of the y axis, where gnuplot would not choose well: of shares, and of logarithmic axes (which bands may leave downwards).
local function y_range(d)
  if d.y.verdict then return -0.02, 1.02 end
  if not d.y.log then return nil end
  local low, high
  for _, s in ipairs(d.series) do
    for i, value in ipairs(s.values) do
      if value > 0 then
        low, high = math.min(low or value, value), math.max(high or value, s.high68 and s.high68[i] or value)
        local below = s.low68 and s.low68[i] or value
        if below > value / 10 then low = math.min(low, below) end
      end
    end
  end
  for _, level in ipairs(d.levels) do
    if level.constant and level.constant > 0 then low, high = math.min(low, level.constant), math.max(high, level.constant) end
  end
  low = math.max(low, high * 1e-8)
  local room = (high / low) ^ 0.04
  return low / room, high * room
end

local function add_bands(s, d, series, block, colour, alone)
  local shades = alone and { tint(colour, 0.22), tint(colour, 0.48) } or { "#d8" .. colour:sub(2), "#b8" .. colour:sub(2) }
  if not series.low68 then return end
  local function below(column) return d.y.log and ("($%d > 0 ? $%d : 1e-300)"):format(column, column) or tostring(column) end
  s:plot("%s using 1:%s:6 with filledcurves fillcolor rgb '%s' %s", block, below(5), shades[1], alone and "title '95 %'" or "notitle")
  s:plot("%s using 1:%s:4 with filledcurves fillcolor rgb '%s' %s", block, below(3), shades[2], alone and "title '68 %'" or "notitle")
end

-- On which side of the plot a level's label stands: where the curve is further from it.
local function side_of(level, d)
  local function distance(i)
    local value, at = d.series[1].values[i], level.values[i]
    if value ~= value then return math.huge end
    return d.y.log and math.abs(math.log(math.max(value, 1e-300) / at)) or math.abs(value - at)
  end
  local last = #d.values
  return distance(1) > distance(last) and "left" or "right"
end

local function add_level(s, level, d, count)
  local block = s:block(d.values, level.values)
  s:plot("%s using 1:2 with lines linecolor rgb '%s' linewidth 1 dashtype (6,3) notitle", block, BLACK)
  local side, last = side_of(level, d), #d.values
  local label = level.name and ((level.factor == 1 and "" or "½ ") .. marked_symbol(level.name)) or ""
  if level.name and level.constant then label = label .. " = " end
  if level.constant then label = label .. format.number(level.constant, 3) .. (d.y.unit_text ~= "" and " " .. marked_unit(d.y.unit_text) or "") end
  s:add("set label %d %s at %s, first %s %s offset %s,0.55 front", count, quoted(label), side == "left" and "graph 0.02" or "graph 0.98",
    number(level.values[side == "left" and 1 or last]), side, "0")
end

local function add_marks(s, d)
  local low, high = d.values[1], d.values[#d.values]
  for i, mark in ipairs(d.marks) do
    if mark.high > low and mark.low < high then
      s:add("set object %d rectangle from %s, graph 0 to %s, graph 1 behind fillcolor rgb '#e4e4e4' fillstyle solid noborder", i, number(mark.low), number(mark.high))
      s:add("set label %d %s at %s, graph 0.96 center font ',7' front", 100 + i, quoted(literal(mark.label)), number(mark.at))
    end
  end
end

local function series_label(series, d)
  local own = series.each and given_label(series.each.name, series.each.value)
  local several = false
  for _, other in ipairs(d.series) do several = several or other.name ~= series.name end
  if own then return several and literal(series.label) .. ", " .. own or own end
  if #d.series > 1 then return literal(series.label) end
  return d.y.verdict and "share" or "median"
end

local draw = {}

function draw.curve(s, d, room)
  local alone = #d.series == 1
  s:axis("x", d.x, d.values[1], d.values[#d.values], room[1])
  local low, high = y_range(d)
  s:axis("y", d.y, low, high, room[2])
  add_marks(s, d)
  local blocks = {}
  for i, series in ipairs(d.series) do
    blocks[i] = series.low68 and s:block(d.values, series.values, series.low68, series.high68, series.low95, series.high95) or s:block(d.values, series.values)
    add_bands(s, d, series, blocks[i], colours[(i - 1) % #colours + 1], alone)
  end
  for i, level in ipairs(d.levels) do add_level(s, level, d, i) end
  for i, series in ipairs(d.series) do
    local titled = alone and not series.low68 and "notitle" or "title " .. quoted(series_label(series, d))
    s:plot("%s using 1:2 with lines linecolor rgb '%s' linewidth 2 dashtype %s %s", blocks[i], colours[(i - 1) % #colours + 1], dashes[(i - 1) % #dashes + 1], titled)
  end
end

-- Maps ----------------------------------------------------------------------------------------------------------------------------

-- Colours from light to dark along the helix; black lines can be seen on all of them.
local STOPS, LIGHTEST, DARKEST = 24, 0.97, 0.30
function gnuplot.helix()
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
  local stops = gnuplot.helix()
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
  if even then s:plot("%s using 1:2:3 axes x2y2 with image notitle", block)
  else s:plot("%s using 1:2:4:5:6:7:3 axes x2y2 with boxxyerror fillstyle solid noborder linecolor palette notitle", block) end
  local function back(value, log) return log and 10 ^ value or value end
  s:add("set x2range [%s:%s]", number(xs[1]), number(xs[#xs]))
  s:add("set y2range [%s:%s]", number(ys[1]), number(ys[#ys]))
  return back(xs[1], d.x.log), back(xs[#xs], d.x.log), back(ys[1], d.y.log), back(ys[#ys], d.y.log)
end

-- Lines with blank lines between them, in one block.
function script:lines_block(lines)
  self.blocks = self.blocks + 1
  local name = "$data" .. self.blocks
  self:add(name .. " << END")
  for _, line in ipairs(lines) do
    for i = 1, #line.x do self:add(number(line.x[i]) .. " " .. number(line.y[i])) end
    self:add ""
  end
  self:add "END"
  return name
end

local function add_contours(s, d)
  local dashed_title
  for _, contour in ipairs(d.contours) do
    if #contour.lines > 0 then
      local block = s:lines_block(contour.lines)
      local title = "notitle"
      if not contour.dashed then title = "title " .. quoted(contour.share and "half of the draws" or "just resolved")
      elseif not dashed_title then title, dashed_title = "title '16 and 84 %'", true end
      s:plot("%s using 1:2 with lines linecolor rgb '#ffffff' linewidth 3.5 notitle", block)
      s:plot("%s using 1:2 with lines linecolor rgb '%s' linewidth 1.7 dashtype %s %s", block, BLACK, contour.dashed and "(5,3)" or "solid", title)
    end
  end
end

function draw.map(s, d, room)
  local x_low, x_high, y_low, y_high = add_cells(s, d)
  s:axis("x", d.x, x_low, x_high, room[1])
  s:axis("y", d.y, y_low, y_high, room[2])
  s:add(palette())
  s:add("set cblabel %s", quoted(axis_label(d.z, room[2])))
  local low, high = d.z.low, d.z.high
  if d.z.verdict then low, high = 0, 1
  elseif low == high then low, high = low - math.abs(low) / 2 - 1e-9, high + math.abs(high) / 2 + 1e-9 end
  s:add("set cbrange [%s:%s]", number(low), number(high))
  if d.z.log then
    s:add "set logscale cb"
    s:add("set cbtics (%s)", log_ticks(low, high))
  end
  s:add "set tics front"
  add_contours(s, d)
end

-- Planes --------------------------------------------------------------------------------------------------------------------------

local LABEL = 6 -- points high

-- Where the names of the points go: beside them, where no other point or name is; a name that fits nowhere is left out. In points of the plot.
local function placed_names(d, room)
  local function place(axis, value, length)
    local low, high = axis.low, axis.high
    if axis.log then value, low, high = math.log(value), math.log(low), math.log(high) end
    return (value - low) / (high - low) * length
  end
  local taken, placed = {}, {}
  for i, p in ipairs(d.points) do
    local x, y = place(d.x, p.x, room[1]), place(d.y, p.y, room[2])
    taken[i] = { x - 3, y - 3, x + 3, y + 3, x, y }
  end
  local function free(box, own)
    if box[1] < 0 or box[3] > room[1] or box[2] < 0 or box[4] > room[2] then return false end
    for i, other in ipairs(taken) do
      if i ~= own and box[1] < other[3] and box[3] > other[1] and box[2] < other[4] and box[4] > other[2] then return false end
    end
    return true
  end
  for i, p in ipairs(d.points) do
    local x, y, width = taken[i][5], taken[i][6], width_of(p.name, LABEL)
    for _, try in ipairs { { 4, 5, 0 }, { 4, -5, 0 }, { -4, 5, 1 }, { -4, -5, 1 }, { 0, 8, 0.5 }, { 0, -8, 0.5 } } do
      local left, middle = x + try[1] - try[3] * width, y + try[2]
      local box = { left, middle - LABEL / 2, left + width, middle + LABEL / 2 }
      if free(box, i) then
        taken[#taken + 1] = box
        placed[#placed + 1] = { name = p.name, x = (left + width / 2) / room[1], y = middle / room[2] }
        break
      end
    end
  end
  return placed
end

local function add_points(s, d)
  local groups = { { points = {}, shape = 7, title = d.verdict and "resolved in half of the draws or more" }, { points = {}, shape = 6, title = "in fewer" } }
  for _, p in ipairs(d.points) do table.insert(groups[d.verdict and not (p.share and p.share >= 0.5) and 2 or 1].points, p) end
  for _, group in ipairs(groups) do
    if #group.points > 0 then
      local columns = { {}, {}, {}, {}, {}, {} }
      for i, p in ipairs(group.points) do
        local low_x, low_y = p.x - p.x_lower, p.y - p.y_lower
        for c, value in ipairs { p.x, p.y, low_x, p.x + p.x_upper, low_y, p.y + p.y_upper } do columns[c][i] = value end
      end
      local block = s:block(table.unpack(columns))
      s:plot("%s using 1:2:3:4:5:6 with xyerrorbars linecolor rgb '%s' linewidth 0.8 pointtype 0 notitle", block, GREY)
      s:plot("%s using 1:2 with points linecolor rgb '#ffffff' pointtype 7 pointsize 0.5 notitle", block)
      s:plot("%s using 1:2 with points linecolor rgb '%s' pointtype %d pointsize 0.5 %s", block, BLACK, group.shape, group.title and "title " .. quoted(group.title) or "notitle")
    end
  end
end

function draw.plane(s, d, room)
  s:axis("x", d.x, d.x.low, d.x.high, room[1])
  s:axis("y", d.y, d.y.low, d.y.high, room[2])
  for i, line in ipairs(d.lines) do
    local block = s:block(line.x, line.y)
    s:plot("%s using 1:2 with lines linecolor rgb '%s' linewidth 1.6 dashtype %s %s", block, colours[(i - 1) % #colours + 1], dashes[i % #dashes + 1],
      line.label and "title " .. quoted(literal(line.label)) or "notitle")
  end
  add_points(s, d)
  for i, placed in ipairs(placed_names(d, room)) do
    s:add("set label %d %s at graph %.4f, graph %.4f center font ',%d' front", i, quoted(literal(placed.name)), placed.x, placed.y, LABEL)
  end
end

-- Whole scripts -------------------------------------------------------------------------------------------------------------------

local formats = { "pdf", "svg", "png" }
gnuplot.formats = formats
local PIXELS = 300 / 25.4 -- a mm of a PNG

local terminals = {
  pdf = function(width, height) return ("pdfcairo enhanced color size %.2fcm,%.2fcm font '%s,8' fontscale 1 linewidth 1 rounded"):format(width / 10, height / 10, FONT) end,
  svg = function(width, height)
    return ("svg enhanced size %.1f,%.1f fixed font '%s,8' background '#ffffff' linewidth 0.5 dashlength 0.5 rounded"):format(width / POINT, height / POINT, FONT)
  end,
  png = function(width, height)
    return ("pngcairo enhanced color size %d,%d font '%s,8' fontscale %.3f linewidth 2 pointscale 2 background '#ffffff' rounded"):format(
      math.floor(width * PIXELS + 0.5), math.floor(height * PIXELS + 0.5), FONT, 300 / 72)
  end,
}

local function terminal(figure, kind)
  local size = sizes[figure.width][figure.kind]
  return "set terminal " .. terminals[kind](size[1], size[2])
end

local function body(figure)
  local size, s = sizes[figure.width][figure.kind], new_script()
  s:add "reset"
  s:add "set encoding utf8"
  s:add "set border linewidth 0.8"
  s:add "set tics scale 0.7,0.4 font ',7'"
  s:add "set key tmargin center horizontal samplen 2 height 0.2 font ',7'"
  s:add "set style fill solid noborder"
  s:add "set datafile missing '?'"
  -- What is left for axes, in points: some 14 mm at the left and 12 below, the legend's line above; the colours of a map at the right.
  local room = { (size[1] - 17 - (figure.kind == "map" and 16 or 0)) / POINT, (size[2] - 18) / POINT }
  draw[figure.kind](s, figure.data, room)
  return s:text()
end

-- A script that draws the figure as NAME.pdf.
function gnuplot.script(figure)
  return ("# Made by Lacuna; gnuplot draws it as %s.pdf.\n%s\nset output %s\n%s"):format(figure.name, terminal(figure, "pdf"), quoted(figure.name .. ".pdf"), body(figure))
end

-- The end of a picture in gnuplot's output: a line that stands in none.
local function mark(number, kind) return ("\n===== figure %d as %s ends here =====\n"):format(number, kind) end

local function script_of_all(figures)
  local lines = { "set print '-'" }
  for i, figure in ipairs(figures) do
    local whole = body(figure):gsub("^reset\n", "")
    lines[#lines + 1] = "reset"
    for j, kind in ipairs(formats) do
      lines[#lines + 1] = terminal(figure, kind)
      lines[#lines + 1] = "set output"
      lines[#lines + 1] = j == 1 and whole or "replot"
      lines[#lines + 1] = "set output"
      lines[#lines + 1] = ('print "%s"'):format(mark(i, kind):gsub("\n$", ""):gsub("\n", "\\n"))
    end
  end
  return table.concat(lines, "\n") .. "\n"
end

-- The date of making is the one that SOURCE_DATE_EPOCH says; else there is none, so that the same figure gives the same file. Of the same length,
-- so that the offsets in the file hold.
local function settled_pdf(pdf)
  local epoch = tonumber(os.getenv "SOURCE_DATE_EPOCH" or "", 10)
  return (pdf:gsub("/CreationDate %(D:[^)]*%)", function(date)
    local wanted = epoch and os.date("!/CreationDate (D:%Y%m%d%H%M%SZ)", epoch) or ""
    return #wanted <= #date and wanted .. (" "):rep(#date - #wanted) or nil
  end, 1))
end

local inherited = { "PATH", "HOME", "TMPDIR", "LD_LIBRARY_PATH", "SOURCE_DATE_EPOCH", "XDG_CACHE_HOME", "XDG_CONFIG_HOME", "XDG_DATA_HOME", "FONTCONFIG_FILE", "FONTCONFIG_PATH" }

local function environment()
  local list = { "LC_ALL=C.UTF-8" }
  for _, name in ipairs(inherited) do
    local value = os.getenv(name)
    if value then list[#list + 1] = name .. "=" .. value end
  end
  return list
end

-- Draws figures that have no pictures yet: figure.pictures = { pdf =, svg =, png = }. Returns true, or nil and why there are none, in one line.
function gnuplot.render(figures)
  local wanted = {}
  for _, figure in ipairs(figures) do if not figure.pictures then wanted[#wanted + 1] = figure end end
  if #wanted == 0 then return true end
  local output, status, complaint = core.run_program({ "gnuplot", "-d" }, script_of_all(wanted), environment())
  if not output then return nil, "gnuplot can't be run (" .. status .. ")" end
  local at = 1
  for i, figure in ipairs(wanted) do
    local pictures = {}
    for _, kind in ipairs(formats) do
      local first, last = output:find(mark(i, kind), at, true)
      if not first then return nil, "gnuplot failed: " .. (complaint:match "([^\n]*%a[^\n]*)\n*$" or "status " .. status) end
      pictures[kind] = output:sub(at, first - 1)
      at = last + 1
    end
    pictures.pdf = settled_pdf(pictures.pdf)
    pictures.svg = svg.settled(pictures.svg, figure, sizes[figure.width][figure.kind])
    figure.pictures = pictures
  end
  return true
end

return gnuplot
