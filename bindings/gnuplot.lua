-- SPDX-License-Identifier: GPL-3.0-or-later
-- gnuplot run on figures: one process for a list of them, which writes their pictures to its standard output one after another. It gets no more
-- of the environment than it needs to find fonts, and reads nobody's settings; so the pictures hang on the figure, on the versions of gnuplot and
-- its libraries (cairo, pango) and on the installed fonts, and on nothing else.
local core = ...
local svg = core.part "lacuna.svg"
local script = core.part "lacuna.figure_script"
local drawing = core.part "lacuna.figure_drawing"

local gnuplot = {}
local FONT = "DejaVu Sans" -- Debian's gnuplot always brings it along; elsewhere the nearest that fontconfig knows
local POINT = 25.4 / 72 -- mm
local LETTERS, SMALL = script.LETTERS, script.SMALL

-- Widths of one and of two columns of a journal, and heights, in mm.
local sizes = {
  single = { curve = { 86, 64 }, map = { 86, 70 }, plane = { 86, 72 } },
  double = { curve = { 178, 95 }, map = { 178, 110 }, plane = { 178, 110 } },
}

-- Whole scripts -------------------------------------------------------------------------------------------------------------------

local formats = { "pdf", "svg", "png" }
local PIXELS = 300 / 25.4 -- a mm of a PNG

-- Their letters of 8 points are 8/72 of an inch high in print: gnuplot takes points for 1/96 inch in PDF and PNG.
local terminals = {
  pdf = function(width, height)
    return ("pdfcairo enhanced color size %.2fcm,%.2fcm font '%s,%d' fontscale 0.75 linewidth 1 rounded"):format(width / 10, height / 10, FONT, LETTERS)
  end,
  svg = function(width, height)
    return ("svg enhanced size %.1f,%.1f fixed font '%s,%d' background '#ffffff' linewidth 0.5 dashlength 1.2 rounded"):format(width / POINT, height / POINT, FONT, LETTERS)
  end,
  png = function(width, height)
    return ("pngcairo enhanced color size %d,%d font '%s,%d' fontscale %.3f linewidth 2 dashlength 2 pointscale 3.5 background '#ffffff' rounded"):format(
      math.floor(width * PIXELS + 0.5), math.floor(height * PIXELS + 0.5), FONT, LETTERS, 300 / 96)
  end,
}

local function terminal(figure, kind)
  local size = sizes[figure.width][figure.kind]
  return "set terminal " .. terminals[kind](size[1], size[2])
end

local function body(figure)
  local size, s = sizes[figure.width][figure.kind], script.new()
  s:add "reset"
  s:add "set encoding utf8"
  s:add "set border linewidth 0.8"
  s:add("set tics front scale 0.7,0.4 font ',%d'", SMALL)
  s:add "set style fill solid noborder"
  s:add "unset key"
  local finish = drawing[figure.kind](s, figure.data)
  local room = s:lay_out(figure.data, size[1] / POINT, size[2] / POINT)
  if finish then finish(room) end
  return s:text()
end

-- A script that draws the figure as NAME.pdf.
function gnuplot.script(figure, name)
  return ("# Made by Lacuna, for gnuplot.\n%s\nset output %s\n%s"):format(terminal(figure, "pdf"), script.quoted(name .. ".pdf"), body(figure))
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
  if not output then return nil, "gnuplot can't be run: " .. status end
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
