-- SPDX-License-Identifier: GPL-3.0-or-later
-- Pictures in block characters. The pictures of simple data were checked by eye; what must hold of any picture (its width, the extremes on
-- its first and last row, every hole marked, round ticks) is checked with random data. Ticks at 1, 2 and 5 times a power of ten: common
-- practice, no source.
package.path = "tests/lua/?.lua;bindings/?.lua;" .. package.path
local t = require "harness"
local format = require "format"
local core = { part = function() return format end, raise = function(message) error(message, 0) end, terminal = function() return { ascii = false } end }
local textplot = assert(loadfile "bindings/textplot.lua")(core)

local nan, infinity = 0 / 0, math.huge

local function picture(lines)
  local trimmed = {}
  for i, line in ipairs(lines) do trimmed[i] = line:gsub("%s+$", "") end
  return table.concat(trimmed, "\n")
end

t.test("a histogram: a character a count, the highest full, none empty that isn't", function()
  t.equal(textplot.histogram { 0, 1, 2, 3, 4, 5, 6, 7, 8 }, " ▁▂▃▄▅▆▇█")
  t.equal(textplot.histogram { 1, 1000 }, "▁█")
  t.equal(textplot.histogram({ 0, 4, 8 }, nil, { ascii = true }), " =@")
  t.equal(textplot.histogram {}, "")
end)

t.test("a histogram of values", function()
  t.equal(textplot.histogram({ 1, 1, 2, 3, 3, 3, 3 }, 3), "▄▂█")
  t.equal(textplot.histogram({ 1, 10, 100, nan, infinity, -1 }, 3, { log = true }), "███", "holes are left out")
  t.equal(textplot.histogram({ 5, 5, 5 }, 5), "  █  ", "all equal: in the middle")
  t.equal(textplot.histogram({ -1, 0, 1, 9 }, 2, { low = 0, high = 2 }), "██", "what lies outside is left out")
  t.equal(textplot.histogram({ nan }, 4), "    ")
end)

t.test("a straight line, in both looks", function()
  t.equal(picture(textplot.curve { x = { 0, 1, 2 }, y = { 0, 1, 2 }, width = 24, height = 8, x_label = "time (s)", y_label = "length (m)", ascii = true }),
    [[
length (m)
2 +               ******
  |          ******
1 +    *******
0 +****
  ++---------+---------+
   0         1         2
                time (s)]])
  t.equal(picture(textplot.curve { x = { 0, 1, 2 }, y = { 0, 1, 2 }, width = 24, height = 7 }), [[
2 ┤                ▗▄▞▀▀
  │            ▗▄▞▀▘
1 ┤        ▄▄▟▀▘
  │   ▄▄▞▀▀
0 ┤▞▀▀
  └┬─────────┬─────────┬
   0         1         2]])
end)

t.test("a hole is left open and marked on the axis", function()
  t.equal(picture(textplot.curve { x = { 0, 1, 2, 3, 4 }, y = { 0, 1, nan, 3, 4 }, width = 26, height = 8 }), [[
× 1 of 5 undefined
4 ┤                  ▗▄▞▀▀
  │                 ▀▘
2 ┤
  │    ▄▄
0 ┤▞▀▀▀▘
  └┬───────×××××××───────┬
   0          2          4]])
end)

t.test("logarithmic axes have their decades as ticks", function()
  t.equal(picture(textplot.curve { x = { 1, 10, 100, 1000 }, y = { 1, 100, 1e4, 1e6 }, x_log = true, y_log = true, width = 26, height = 9 }), [[
  1e6 ┤                ▄▞▀
      │             ▗▞▀
10000 ┤           ▄▞▘
      │        ▄▞▀
  100 ┤     ▄▞▀
      │  ▄▄▀
    1 ┤▞▀
      └┬───────────┬──────
       1          100]])
end)

t.test("bands lie behind the curve, a level between", function()
  t.equal(picture(textplot.curve { x = { 0, 1 }, y = { 2, 2 }, low = { 1, 1 }, high = { 3, 3 }, low95 = { 0, 0 }, high95 = { 4, 4 }, level = 2.5,
    width = 26, height = 12 }), [[
4 ┤░░░░░░░░░░░░░░░░░░░░░░░
  │░░░░░░░░░░░░░░░░░░░░░░░
3 ┤▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒
  │╌╌╌╌╌╌╌╌╌╌╌╌╌╌╌╌╌╌╌╌╌╌╌
  │▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒
2 ┤▀▀▀▀▀▀▀▀▀▀▀▀▀▀▀▀▀▀▀▀▀▀▀
  │▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒
1 ┤▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒
  │░░░░░░░░░░░░░░░░░░░░░░░
0 ┤░░░░░░░░░░░░░░░░░░░░░░░
  └┬──────────┬──────────┬
   0.0       0.5       1.0]])
end)

t.test("a map: a cell a point, undefined ones marked, the contour between", function()
  t.equal(picture(textplot.map { x = { 1, 2, 3 }, y = { 1, 2 }, z = { { 0, 1 }, { 0.5, nan }, { 1, 0 } }, contour = 0.4, width = 48, height = 9 }), [[
0 [ ░▒▓█] 1   • across 0.4   × 1 of 6 undefined
2.5 ┤██████████████×××××××××××××××
2.0 ┤██████████████×××××××××××××××
    │••••••••••••••×××××××××××××××••••••••••••••
1.5 ┤             •▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒██████████████
1.0 ┤             •▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒██████████████
0.5 ┤             •▒▒▒▒▒▒▒▒▒▒▒▒▒▒▒██████████████
    └───────┬─────────────┬─────────────┬───────
            1             2             3]])
end)

t.test("points with error bars and their names", function()
  t.equal(picture(textplot.points { x = { 0, 5, 10 }, y = { 0, 5, 10 }, x_error = { 0, 2, 0 }, y_error = { 0, { 3, 1 }, 0 }, names = { "Aa", "Bb", "Cc" },
    width = 30, height = 10 }), [[
10 ┤                         c
 8 ┤             │
 6 ┤             │
   │       ──────b─────
 4 ┤             │
 2 ┤
 0 ┤a
   └┬────────────┬───────────┬
    0            5          10
a Aa   b Bb   c Cc]])
end)

t.test("nothing to draw is an empty picture, one point a dot", function()
  local function marks(options)
    options.ascii, options.width, options.height = true, 30, 6
    return select(2, table.concat(textplot.curve(options)):gsub("%*", ""))
  end
  t.equal(marks { x = {}, y = {} }, 0)
  t.equal(marks { x = { 1 }, y = { nan } }, 0)
  t.equal(marks { x = { 1 }, y = { 3 } }, 1)
  t.equal(textplot.curve { x = { 1 }, y = { nan } }[1]:find "undefined" ~= nil, true)
  t.equal(#textplot.curve { x = { 1 }, y = { 3 }, width = 30, height = 6 }, 6)
  t.raises(function() textplot.curve { x = { 1 }, y = { 3, 4 } } end, "curve: y has 2 values, x has 1")
  t.raises(function() textplot.curve { y = { 3, 4 } } end, "curve wants a list x")
  t.raises(function() textplot.map { x = { 1 }, y = { 3, 4 }, z = {} } end, "map: z has 0 lists, x has 1 values")
end)

-- Random pictures, the seed told where one fails.
local function random_curve(seed)
  math.randomseed(seed)
  local count, log = math.random(2, 300), math.random() < 0.5
  local scale, offset = 10 ^ math.random(-30, 30), log and 0 or (math.random() - 0.5) * 10
  local options = { x = {}, y = {}, low = {}, high = {}, width = math.random(24, 150), height = math.random(8, 40), x_log = log, y_log = log, ascii = true }
  for i = 1, count do
    options.x[i] = scale * i
    options.y[i] = math.random() < 0.05 and ({ nan, infinity, -infinity })[math.random(3)] or scale * (log and math.exp(8 * math.random()) or math.random() + offset)
    options.low[i], options.high[i] = options.y[i], options.y[i]
  end
  return options
end

t.test("every line is as wide as asked, and there are as many as asked", function()
  for seed = 1, 100 do
    local options = random_curve(seed)
    local lines = textplot.curve(options)
    t.equal(#lines, options.height, "lines, seed " .. seed)
    for _, line in ipairs(lines) do t.equal(format.width(line), options.width, "seed " .. seed) end
  end
end)

t.test("the extremes lie on the first and the last row, and every hole is marked", function()
  for seed = 1, 100 do
    local options = random_curve(seed)
    local finite, holes = {}, 0
    for _, y in ipairs(options.y) do
      if y == y and math.abs(y) < infinity then finite[#finite + 1] = y else holes = holes + 1 end
    end
    local lines = textplot.curve(options)
    local first = holes > 0 and 2 or 1
    if #finite > 1 then
      t.equal(lines[first]:find("*", 1, true) ~= nil, true, "the highest, seed " .. seed)
      t.equal(lines[#lines - 2]:find("*", 1, true) ~= nil, true, "the lowest, seed " .. seed)
    end
    t.equal(lines[#lines - 1]:find("x", 1, true) ~= nil, holes > 0, "holes, seed " .. seed)
  end
end)

t.test("ticks are 1, 2 or 5 times a power of ten apart, or decades", function()
  for seed = 1, 100 do
    local options = random_curve(seed)
    local lines, ticks = textplot.curve(options), {}
    for _, line in ipairs(lines) do
      local label = line:match "^%s*(%S+) [+][^-+]*$" or line:match "^%s*(%S+) [+].*%*"
      if label and tonumber(label) then ticks[#ticks + 1] = tonumber(label) end
    end
    for i = 2, #ticks - 1 do -- rounded steps and rounded values differ in the last digit printed at most
      local one, two = ticks[i - 1] - ticks[i], ticks[i] - ticks[i + 1]
      if not options.y_log then t.close(one, two, 1e-6, "equal steps, seed " .. seed) end
    end
    if options.y_log then
      for _, tick in ipairs(ticks) do
        local mantissa = ("%.6e"):format(tick):match "^%d"
        t.equal(mantissa == "1" or mantissa == "2" or mantissa == "5" or #ticks < 4, true, ("tick %g, seed %d"):format(tick, seed))
      end
    elseif #ticks > 1 then
      local mantissa = ("%.3e"):format(ticks[1] - ticks[2]):match "^%d%.%d%d%d"
      t.equal(mantissa == "1.000" or mantissa == "2.000" or mantissa == "5.000", true, ("step %s, seed %d"):format(mantissa, seed))
    end
  end
end)

t.test("a map has its width and its lines too", function()
  for seed = 1, 100 do
    math.randomseed(seed)
    local options = { x = {}, y = {}, z = {}, width = math.random(24, 120), height = math.random(8, 40), contour = math.random() < 0.5 and 0.5 or nil, z_label = ("z"):rep(90) }
    for j = 1, math.random(1, 30) do options.y[j] = j ^ 2 end
    for i = 1, math.random(1, 30) do
      options.x[i], options.z[i] = i, {}
      for j = 1, #options.y do options.z[i][j] = math.random() < 0.1 and nan or math.random() end
    end
    local lines = textplot.map(options)
    t.equal(#lines, options.height, "lines, seed " .. seed)
    for _, line in ipairs(lines) do t.equal(format.width(line), options.width, "seed " .. seed) end
  end
end)

t.finish()
