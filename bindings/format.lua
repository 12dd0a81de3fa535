-- SPDX-License-Identifier: GPL-3.0-or-later
-- Numbers as people print them: rounded to what is known, an exponent only where it helps, in plain text and in TeX; and the
-- width of text in columns, for tables.
--
--   number(value, digits)               "0.346", "1500", "2.4e-11"; 4 significant digits where none are asked for
--   with_error(value, upper, lower)     "0.46 ± 0.03", "0.46 +0.05 -0.02", "(2.4 ± 0.2)e-11"
--   rounded(value, upper, lower)        "0.46", "0.05", "0.02": the same digits as separate fields, for files of numbers
--   shortened(text)                     long decimal fractions in it to four digits: 1.0289939699622 is 1.029
--   percent(fraction)                   "83 %", "0.4 %", "> 99.9 %"; 100 % is said of all, 0 % of none
--   number_tex, with_error_tex, percent_tex   the same in TeX
--   with_unit(text, unit)               "0.46 ± 0.03 au"
--   with_unit_tex(tex, unit)            "$0.46 \pm 0.03\,\mathrm{au}$"
--   wrapped(text, columns, gap)         its lines, broken at spaces; longer words stand alone; between words a space, or what gap says
--   width(text)                         columns on a terminal
--   pad_left(text, columns), pad_right(text, columns)

local format = {}

-- Fixed notation from here up to there; outside, an exponent.
local SMALLEST_FIXED, LARGEST_FIXED = 1e-4, 1e6
local UNDEFINED = "undefined"

local function undefined(value) return value ~= value end
local function infinite(value) return value == math.huge or value == -math.huge end

-- The decimal exponent of a number rounded to so many significant digits: 0.0999 to two digits is 0.10, of exponent -1.
local function exponent_of(value, digits)
  if value == 0 then return 0 end
  return tonumber(("%%.%de"):format(digits - 1):format(math.abs(value)):match("e([-+]%d+)$"))
end

-- Rounded to 10^-places; places may be negative (to hundreds, say). Through decimal digits, so that halves go where printf sends them.
local function fixed(value, places)
  local text
  if places >= 0 then
    text = ("%%.%df"):format(math.min(places, 99)):format(value)
  else
    local scale = 10.0 ^ -places
    text = ("%.0f"):format(tonumber(("%.0f"):format(value / scale)) * scale)
  end
  return text:find("[1-9]") and text or (text:gsub("^-", ""))
end

local function without_zeros(text) return text:find(".", 1, true) and (text:gsub("%.?0+$", "")) or text end

-- The zeros that all texts end in, after the point, cut from each: 0.460 and 0.030 are 0.46 and 0.03.
local function without_common_zeros(texts)
  local function all(pattern)
    for _, text in ipairs(texts) do
      if not text:find(pattern) then return false end
    end
    return true
  end
  while all("%..*0$") do
    for i, text in ipairs(texts) do texts[i] = text:sub(1, -2) end
  end
  if all("%.$") then
    for i, text in ipairs(texts) do texts[i] = text:sub(1, -2) end
  end
  return texts
end

-- The power of ten to take out, or nil where fixed notation does.
local function exponent_taken(largest, digits)
  if largest == 0 then return nil end
  local exponent = exponent_of(largest, digits)
  if largest >= SMALLEST_FIXED and 10.0 ^ exponent < LARGEST_FIXED then return nil end
  return exponent
end

-- value / 10^exponent in two steps, since 10^-exponent overflows for the smallest doubles.
local function scaled(value, exponent)
  local half = exponent // 2
  return value / 10.0 ^ half / 10.0 ^ (exponent - half)
end

-- A single number in parts: its digits, and the exponent or nil.
local function number_parts(value, digits)
  digits = digits or 4
  if value == math.floor(value) and math.abs(value) < LARGEST_FIXED then return fixed(value, 0) end
  local exponent = exponent_taken(math.abs(value), digits)
  if exponent then
    local text = ("%%.%de"):format(digits - 1):format(value) -- printf rounds right where a division would not
    return without_zeros(text:match("^(.*)e")), exponent
  end
  return without_zeros(fixed(value, math.max(0, digits - 1 - exponent_of(value, digits))))
end

-- Value and error, in parts: the digits of the value, of the upper and of the lower error (nil: the same), and the exponent or nil.
local function error_parts(value, upper, lower)
  local exponent = exponent_taken(math.max(math.abs(value), upper, lower), 15)
  if exponent then value, upper, lower = scaled(value, exponent), scaled(upper, exponent), scaled(lower, exponent) end
  local larger, smaller = math.max(upper, lower), math.min(upper, lower)
  if larger == 0 then return number_parts(value), "0", nil, exponent end
  local second_digit = 1 - exponent_of(larger, 2)
  if larger - smaller <= 10.0 ^ -second_digit * (1 + 1e-9) then -- they differ by no more than two digits show
    local middle = upper / 2 + lower / 2
    local texts = without_common_zeros { fixed(value, 1 - exponent_of(middle, 2)), fixed(middle, 1 - exponent_of(middle, 2)) }
    return texts[1], texts[2], nil, exponent
  end
  -- Two digits of the smaller error, but no more than three of the larger.
  local places = smaller == 0 and second_digit or math.min(1 - exponent_of(smaller, 2), second_digit + 1)
  local texts = without_common_zeros { fixed(value, places), fixed(upper, places), fixed(lower, places) }
  return texts[1], texts[2], texts[3], exponent
end

function format.number(value, digits)
  if undefined(value) then return UNDEFINED end
  if infinite(value) then return value > 0 and "infinite" or "-infinite" end
  local text, exponent = number_parts(value, digits)
  return exponent and text .. "e" .. exponent or text
end

function format.number_tex(value, digits)
  if undefined(value) then return UNDEFINED end
  if infinite(value) then return value > 0 and "$\\infty$" or "$-\\infty$" end
  local text, exponent = number_parts(value, digits)
  if not exponent then return "$" .. text .. "$" end
  return "$" .. text .. "\\times10^{" .. exponent .. "}$"
end

local function no_error_bar(value, upper, lower)
  return undefined(value) or infinite(value) or undefined(upper) or undefined(lower) or infinite(upper) or infinite(lower)
end

-- An error below the 15 digits that a double holds can't share a notation with its value.
local function far_apart(value, upper, lower)
  local larger = math.max(upper, lower)
  return value ~= 0 and larger > 0 and exponent_of(value, 2) - exponent_of(larger, 2) > 13
end

function format.with_error(value, upper, lower)
  if undefined(value) then return UNDEFINED end
  if no_error_bar(value, upper, lower) then return format.number(value) .. " ± " .. UNDEFINED end
  if far_apart(value, upper, lower) then return format.number(value, 15) .. " ± " .. format.number(math.max(upper, lower), 2) end
  local text, above, below, exponent = error_parts(value, upper, lower)
  text = below and text .. " +" .. above .. " -" .. below or text .. " ± " .. above
  return exponent and "(" .. text .. ")e" .. exponent or text
end

-- Value, upper and lower error as three fields that a program can read; "" for what is undefined.
function format.rounded(value, upper, lower)
  if undefined(value) then return "", "", "" end
  if no_error_bar(value, upper, lower) then return ("%.7g"):format(value), "", "" end
  if far_apart(value, upper, lower) then return ("%.15g"):format(value), ("%.2g"):format(upper), ("%.2g"):format(lower) end
  local text, above, below, exponent = error_parts(value, upper, lower)
  local power = exponent and "e" .. exponent or ""
  return text .. power, above .. power, (below or above) .. power
end

function format.with_error_tex(value, upper, lower)
  if undefined(value) then return UNDEFINED end
  if no_error_bar(value, upper, lower) then return format.number_tex(value) .. " $\\pm$ " .. UNDEFINED end
  if far_apart(value, upper, lower) then
    return format.number_tex(value, 15) .. " $\\pm$ " .. format.number_tex(math.max(upper, lower), 2)
  end
  local text, above, below, exponent = error_parts(value, upper, lower)
  local power = exponent and "\\times10^{" .. exponent .. "}" or ""
  if below then return "$" .. text .. "^{+" .. above .. "}_{-" .. below .. "}" .. power .. "$" end
  text = text .. " \\pm " .. above
  return "$" .. (exponent and "(" .. text .. ")" or text) .. power .. "$"
end

-- One digit after the point below 10 % and above 99 %. The mark says where the last step can't be told from none or all.
local function percent_parts(fraction)
  local value = 100 * fraction
  if fraction > 0 and value < 0.05 then return "0.1", "<" end
  if fraction < 1 and value >= 99.95 then return "99.9", ">" end
  local one_place = value < 9.95 or value > 99 and fraction < 1
  return without_zeros(("%%.%df"):format(one_place and 1 or 0):format(value)), nil
end

function format.percent(fraction)
  if undefined(fraction) then return UNDEFINED end
  local text, mark = percent_parts(fraction)
  return (mark and mark .. " " or "") .. text .. " %"
end

function format.percent_tex(fraction)
  if undefined(fraction) then return UNDEFINED end
  local text, mark = percent_parts(fraction)
  return "$" .. (mark or "") .. text .. "\\,\\%$"
end

local function has_unit(text, unit) return unit and unit ~= "" and unit ~= "1" and text ~= UNDEFINED end

function format.with_unit(text, unit) return has_unit(text, unit) and text .. " " .. unit or text end

-- The unit in TeX, for math mode.
function format.with_unit_tex(text, unit)
  if not has_unit(text, unit) then return text end
  if text:sub(-1) ~= "$" then return text .. " $" .. unit .. "$" end
  return text:sub(1, -2) .. "\\," .. unit .. "$"
end

-- Code points of no width (combining marks, joiners) and of two columns, after Unicode Standard Annex 11 and its general
-- categories Mn, Me, Cf; only whole blocks, which is all that symbols and names of stars need.
local no_width = {
  { 0x300, 0x36f }, { 0x483, 0x489 }, { 0x1ab0, 0x1aff }, { 0x1dc0, 0x1dff }, { 0x200b, 0x200f }, { 0x2028, 0x202e }, { 0x2060, 0x2064 },
  { 0x20d0, 0x20ff }, { 0xfe00, 0xfe0f }, { 0xfe20, 0xfe2f }, { 0xfeff, 0xfeff }, { 0xe0100, 0xe01ef },
}
local two_columns = {
  { 0x1100, 0x115f }, { 0x2e80, 0x303e }, { 0x3041, 0xa4cf }, { 0xa960, 0xa97c }, { 0xac00, 0xd7a3 }, { 0xf900, 0xfaff },
  { 0xfe30, 0xfe6f }, { 0xff01, 0xff60 }, { 0xffe0, 0xffe6 }, { 0x1f300, 0x1f64f }, { 0x1f900, 0x1f9ff }, { 0x20000, 0x3fffd },
}

local function stands_in(ranges, code)
  for _, range in ipairs(ranges) do
    if code >= range[1] and code <= range[2] then return true end
  end
  return false
end

local function columns_of(code)
  if code < 0x20 or code >= 0x7f and code < 0xa0 then return 0 end
  if code < no_width[1][1] then return 1 end
  if stands_in(no_width, code) then return 0 end
  return stands_in(two_columns, code) and 2 or 1
end

-- Bytes that are no UTF-8 count as one column each.
function format.width(text)
  if not text:find "[^ -~]" then return #text end
  if not text:find "[%c\xCC-\xFF]" and not text:find "\xC2[\x80-\x9F]" and utf8.len(text) then return utf8.len(text) end -- all of one column
  local columns, at = 0, 1
  while at <= #text do
    local _, bad = utf8.len(text, at)
    for _, code in utf8.codes(text:sub(at, bad and bad - 1 or -1)) do columns = columns + columns_of(code) end
    if not bad then break end
    columns = columns + 1
    at = bad + 1
  end
  return columns
end

function format.pad_left(text, columns) return (" "):rep(columns - format.width(text)) .. text end

function format.pad_right(text, columns) return text .. (" "):rep(columns - format.width(text)) end

function format.shortened(text)
  return (text:gsub("%d+%.%d%d%d%d+", function(digits) return format.number(tonumber(digits), 4) end))
end

-- A per cent sign stays with its number.
function format.wrapped(text, columns, gap)
  gap = gap or " "
  local lines, line, width = {}, nil, 0
  for word in text:gsub(" %%", "\u{a0}%%"):gmatch "%S+" do
    local more = format.width(word)
    if line and width + #gap + more <= columns then line, width = line .. gap .. word, width + #gap + more
    else
      lines[#lines + 1] = line
      line, width = word, more
    end
  end
  lines[#lines + 1] = line
  for i = 1, #lines do lines[i] = lines[i]:gsub("\u{a0}%%", " %%") end
  return lines
end

return format
