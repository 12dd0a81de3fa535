-- SPDX-License-Identifier: GPL-3.0-or-later
-- Numbers in print. Two digits of the error, a value rounded at the same place and one exponent for both are common practice
-- (no source). Widths: Unicode Standard Annex 11 and the general category of combining marks.
package.path = "tests/lua/?.lua;bindings/?.lua;" .. package.path
local t = require "harness"
local format = require "format"

local nan, infinity = 0 / 0, math.huge

t.test("single numbers", function()
  local rows = {
    { 0.34567, "0.3457" }, { 0.346, "0.346" }, { 1500, "1500" }, { 1500.0, "1500" }, { 12345.6, "12346" }, { 999999, "999999" },
    { 999999.7, "1e6" }, { 1e6, "1e6" }, { 2e30, "2e30" }, { 1.23456e-11, "1.235e-11" }, { 2.4e-11, "2.4e-11" }, { 1e-4, "0.0001" },
    { 9.9999e-5, "9.9999e-5", 5 }, { 0, "0" }, { -0.0, "0" }, { -3.14159, "-3.142" }, { 5, "5" }, { 280, "280" }, { 0.99999, "1" },
    { 99.996, "100" }, { 1.65, "1.65" }, { 3.14159265, "3.141593", 7 }, { 1234567, "1.235e6" }, { 5e-324, "4.941e-324" }, { 1.7e308, "1.7e308" },
    { nan, "undefined" }, { infinity, "infinite" }, { -infinity, "-infinite" }, { 0.1 + 0.2, "0.3" }, { 100.04, "100" }, { 1000.5, "1000" },
  }
  for _, row in ipairs(rows) do t.equal(format.number(row[1], row[3]), row[2], row[2]) end
end)

t.test("values with an error bar", function()
  local rows = { -- value, upper, lower, plain, TeX
    { 0.46, 0.03, 0.03, "0.46 ± 0.03", "$0.46 \\pm 0.03$" },
    { 0.46, 0.05, 0.02, "0.46 +0.05 -0.02", "$0.46^{+0.05}_{-0.02}$" },
    { 0.4613, 0.0312, 0.0308, "0.461 ± 0.031", "$0.461 \\pm 0.031$" },
    { 156, 3, 3, "156 ± 3", "$156 \\pm 3$" },
    { 156, 4, 2, "156 +4 -2", "$156^{+4}_{-2}$" },
    { 2.4e-11, 0.2e-11, 0.2e-11, "(2.4 ± 0.2)e-11", "$(2.4 \\pm 0.2)\\times10^{-11}$" },
    { 2.43e-11, 0.31e-11, 0.24e-11, "(2.43 +0.31 -0.24)e-11", "$2.43^{+0.31}_{-0.24}\\times10^{-11}$" },
    { 12345, 1234, 1234, "12300 ± 1200", "$12300 \\pm 1200$" },
    { 0.5, 0.0996, 0.0996, "0.5 ± 0.1", "$0.5 \\pm 0.1$" },
    { 0.46, 0.52, 0.021, "0.460 +0.520 -0.021", nil },
    { 1, 1, 1e-9, "1 +1 -0", nil },
    { -1.234, 0.056, 0.056, "-1.234 ± 0.056", "$-1.234 \\pm 0.056$" },
    { 0, 3e-7, 3e-7, "(0 ± 3)e-7", "$(0 \\pm 3)\\times10^{-7}$" },
    { 1e-9, 0.12, 0.12, "0.00 ± 0.12", nil },
    { 5, 0, 0, "5 ± 0", "$5 \\pm 0$" },
    { 5, 3, 0, "5 +3 -0", nil },
    { 3e30, 2e29, 2e29, "(3.0 ± 0.2)e30", nil },
    { 9.99e5, 5e4, 5e4, "999000 ± 50000", nil },
    { 0.1, 0.031, 0.030, "0.10 ± 0.03", nil },
    { 4e11, 5e-10, 4e-10, "4e11 ± 5e-10", "$4\\times10^{11}$ $\\pm$ $5\\times10^{-10}$" },
    { 1, 1e-9, 1e-9, "1.000000000 ± 0.000000001", nil },
    { nan, 1, 1, "undefined", "undefined" },
    { 0.46, nan, 1, "0.46 ± undefined", "$0.46$ $\\pm$ undefined" },
    { infinity, 1, 1, "infinite ± undefined", nil },
  }
  for _, row in ipairs(rows) do
    t.equal(format.with_error(row[1], row[2], row[3]), row[4], row[4])
    if row[5] then t.equal(format.with_error_tex(row[1], row[2], row[3]), row[5], row[5]) end
  end
end)

t.test("TeX of single numbers", function()
  t.equal(format.number_tex(2.4e-11), "$2.4\\times10^{-11}$")
  t.equal(format.number_tex(0.34567), "$0.3457$")
  t.equal(format.number_tex(nan), "undefined")
  t.equal(format.number_tex(infinity), "$\\infty$")
end)

t.test("percentages", function()
  local rows = {
    [0.83] = "83 %", [0.004] = "0.4 %", [0.9996] = "> 99.9 %", [1] = "100 %", [0] = "0 %", [0.0001] = "< 0.1 %", [0.012] = "1.2 %",
    [0.994] = "99.4 %", [0.99949] = "99.9 %", [0.0996] = "10 %", [0.5] = "50 %", [1 - 2 ^ -53] = "> 99.9 %", [5e-324] = "< 0.1 %", [0.02] = "2 %",
  }
  for fraction, want in pairs(rows) do t.equal(format.percent(fraction), want, want) end
  t.equal(format.percent(nan), "undefined")
  t.equal(format.percent_tex(0.83), "$83\\,\\%$")
  t.equal(format.percent_tex(0.9999), "$>99.9\\,\\%$")
end)

t.test("units", function()
  t.equal(format.with_unit("0.46 ± 0.03", "au"), "0.46 ± 0.03 au")
  t.equal(format.with_unit("0.46", "1"), "0.46")
  t.equal(format.with_unit("undefined", "au"), "undefined")
  t.equal(format.with_unit_tex("$0.46 \\pm 0.03$", "\\mathrm{au}"), "$0.46 \\pm 0.03\\,\\mathrm{au}$")
  t.equal(format.with_unit_tex("$5$", nil), "$5$")
end)

-- What is printed, read again, is the number within half a unit of the last digit asked for, whatever the number.
t.test("what is printed is the number", function()
  math.randomseed(20250102, 0)
  for round = 1, 20000 do
    local value = (math.random() - 0.5) * 10.0 ^ math.random(-300, 300)
    local got = tonumber(format.number(value))
    if not (math.abs(got - value) <= 0.5000001e-3 * math.abs(value)) then error(("round %d: %.17g as %s"):format(round, value, format.number(value))) end
    local digits = format.number(value):gsub("e.*", ""):gsub("[-.]", ""):gsub("^0+", "")
    if #digits > 6 then error(("round %d: %.17g as %s"):format(round, value, format.number(value))) end
  end
  for round = 1, 20000 do
    local value, size = (math.random() - 0.5) * 10.0 ^ math.random(-12, 12), 10.0 ^ math.random(-12, 12)
    local upper, lower = size * math.random(), size * math.random()
    local shown = format.with_error(value, upper, lower)
    local inside, exponent = shown:match("^%((.*)%)e(.*)$")
    local scale = 10.0 ^ (tonumber(exponent) or 0)
    inside = inside or shown
    local a, above, below = inside:match("^(%S+) %+(%S+) %-(%S+)$")
    if not a then
      a, above = inside:match("^(%S+) ± (%S+)$")
      below = above
    end
    a, above, below = a * scale, above * scale, below * scale
    local larger = math.max(upper, lower)
    if larger < 1e-13 * math.abs(value) and not shown:find(" +", 1, true) then upper, lower = larger, larger end -- one error alone, in its own notation
    -- Half a unit of the second digit is at most 1/20 of the error; the sides of a symmetric bar differ by one unit at most.
    if not (math.abs(a - value) <= 0.0501 * larger + 5e-15 * math.abs(value) and math.abs(above - upper) <= 0.1001 * larger and math.abs(below - lower) <= 0.1001 * larger) then
      error(("round %d: %.17g +%.17g -%.17g as %s"):format(round, value, upper, lower, shown))
    end
  end
end)

t.test("columns", function()
  local rows = {
    ["0.46 ± 0.03"] = 11, ["M☉"] = 2, ["cm⁻²"] = 4, ["Ṁ"] = 1, ["M\u{307}"] = 1, ["q\u{307} x"] = 3, [""] = 0, ["θ_gap"] = 5, ["恒星"] = 4,
    ["a\u{200b}b"] = 2, ["\xff\xfe"] = 2, ["±\xff±"] = 3, ["\xe2\x81"] = 2, ["√(d/2)"] = 6, ["q⁻¹ᐟ²"] = 5,
  }
  for text, want in pairs(rows) do t.equal(format.width(text), want, text) end
  t.equal(format.pad_left("±", 3), "  ±")
  t.equal(format.pad_right("M☉", 4), "M☉  ")
  t.equal(format.pad_right("too long", 4), "too long")
end)

t.test("rounded: the digits of with_error as three fields for files of numbers", function()
  local function fields(...) return { format.rounded(...) } end
  t.equal(fields(0.4612, 0.0314, 0.0314), { "0.461", "0.031", "0.031" })
  t.equal(fields(0.4612, 0.0514, 0.0214), { "0.461", "0.051", "0.021" })
  t.equal(fields(2.3999e-11, 0.2e-11, 0.2e-11), { "2.4e-11", "0.2e-11", "0.2e-11" })
  t.equal(fields(1523.4, 120, 120), { "1520", "120", "120" })
  t.equal(fields(0 / 0, 1, 1), { "", "", "" })
  t.equal(fields(2, math.huge, 1), { "2", "", "" })
  math.randomseed(20261201)
  for _ = 1, 1000 do -- what is read back is within half a unit of the error's second digit
    local value, upper, lower = (math.random() - 0.5) * 10 ^ math.random(-12, 12), 10 ^ (math.random() * 6 - 6), 10 ^ (math.random() * 6 - 6)
    upper, lower = upper * math.abs(value), lower * math.abs(value)
    local texts = fields(value, upper, lower)
    local smaller = math.min(upper, lower)
    local step = 10 ^ (math.floor(math.log(math.max(smaller, math.max(upper, lower) / 100), 10)) - 1)
    t.equal(math.abs(tonumber(texts[1]) - value) <= 6 * step, true, ("%.17g %.17g %.17g: %s"):format(value, upper, lower, table.concat(texts, " ")))
  end
end)

t.test("wrapped: at spaces, but never before a per cent sign; a longer word stands alone", function()
  t.equal(format.wrapped("the central 68 % of them", 14), { "the central", "68 % of them" })
  t.equal(format.wrapped("short", 14), { "short" })
  t.equal(format.wrapped("a_word_longer_than_all is here", 10), { "a_word_longer_than_all", "is here" })
end)

t.finish()
