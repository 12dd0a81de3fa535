-- SPDX-License-Identifier: GPL-3.0-or-later
-- How quantities and cases are written out: the words on the screen.
--
--   quantity(q), brief(q)         in full, and within a line
--   axes(q)                       its axes besides the draws, and how many draws it has (nil: none)
--   display_unit(q)               the unit it is shown in: VOUnits, factor, plain text
--   unit_of(name)                 the unit of the glossary's name in plain text, "" for a plain number
--   range(name, low, high)        "from 0.01 to 0.2 au", SI values in the name's unit
--   share(q)                      of its elements that are neither 0 nor undefined
--   undefined_note(q)             " (1.2 % of draws undefined)", or nothing
--   errors_of(low, median, high)  a median and its upper and lower error
--   median_and_errors(q, factor)  the same of an ensemble
--   representative(q)             one number, for equations
--   as_written(name, value), given(case, name)   how a given was written
--   case(case)
local core = ...
local format = core.part "lacuna.format"
local show = core.part "lacuna.show"

local text = {}

-- Units ---------------------------------------------------------------------------------------------------------------------------

local preferred = { length = "au", mass = "Msun", angle = "mas", time = "yr" } -- of results of arithmetic, by dimension in words

-- The display unit of a quantity: its string, its factor, its plain text ("" for a plain number).
local function display_unit(quantity)
  local _, unit, factor = core.facts(quantity)
  if not unit then
    local words, si, plain = core.dimension(quantity)
    if plain then return nil, 1, "" end
    unit = preferred[words] or si
    factor = core.unit_facts(unit)
  end
  local _, _, written = core.unit_facts(unit)
  return unit, factor, unit == "1" and "" or written or unit
end
text.display_unit = display_unit

function text.unit_of(name)
  local unit = core.entry(name).unit
  return unit and unit ~= "1" and select(3, core.unit_facts(unit)) or ""
end

function text.range(name, low, high)
  local factor = core.entry(name).factor
  return format.with_unit(("from %s to %s"):format(format.number(low / factor), format.number(high / factor)), text.unit_of(name))
end

-- Quantities ----------------------------------------------------------------------------------------------------------------------

local function is_verdict(name) return name and core.entry(name).kind == "verdict" end

local function axes_of(quantity)
  local over, draws = {}, nil
  for _, axis in ipairs(core.axes(quantity)) do
    if axis.name == "draw" then draws = axis.length else over[#over + 1] = axis end
  end
  return over, draws
end
text.axes = axes_of

-- Nothing is stored for it.
local function share(quantity)
  for i, axis in ipairs(core.axes(quantity)) do
    quantity = i == 1 and core.chance(quantity, axis.name) or core.mean(quantity, axis.name)
  end
  return core.elements(quantity)[1] ~= 0 and core.elements(quantity)[1] or 0
end
text.share = share

local function undefined_note(quantity)
  local axes, count = core.axes(quantity), quantity
  for i, axis in ipairs(axes) do
    count = i == 1 and core.undefined(quantity, axis.name) or core.mean(count, axis.name) * axis.length
  end
  count = math.floor(core.elements(count)[1] + 0.5)
  if count == 0 then return "" end
  local _, _, _, _, size = core.facts(quantity)
  if select(2, axes_of(quantity)) then return (" (%s of draws undefined)"):format(format.percent(count / size)) end
  return (" (%d of %d points undefined)"):format(count, size)
end
text.undefined_note = undefined_note

-- Median, upper and lower error from the ends of the central 68 %. Sides that differ by less than a tenth are taken as equal: with some
-- thousands of draws each is known to a few per cent only.
function text.errors_of(low, median, high)
  local upper, lower = high - median, median - low
  if math.abs(upper - lower) < 0.1 * math.max(upper, lower) then upper, lower = (upper + lower) / 2, (upper + lower) / 2 end
  return median, upper, lower
end

-- The same of an ensemble in its display unit.
function text.median_and_errors(quantity, factor)
  local low, median, high = core.spread_of(quantity)
  return text.errors_of(core.elements(low)[1] / factor, core.elements(median)[1] / factor, core.elements(high)[1] / factor)
end

-- An ensemble along the axis draw alone: "0.46 ± 0.03". With infinite draws among the central 68 % there is no error bar to write.
local function ensemble(quantity, factor)
  local median, upper, lower = text.median_and_errors(quantity, factor)
  if not (upper < math.huge and lower < math.huge) and median == median then
    local low, high = core.interval(quantity)
    low, high = core.elements(low)[1] / factor, core.elements(high)[1] / factor
    return low == high and format.number(median) or ("%s, 68 %% from %s to %s"):format(format.number(median), format.number(low), format.number(high))
  end
  if math.max(upper, lower) <= 1e-12 * math.abs(median) then return format.number(median) end -- it doesn't depend on what is uncertain
  return format.with_error(median, upper, lower)
end

-- Whether all draws of a nameless plain number are 0 or 1: what above, below, both and either give.
local function is_yes_or_no(quantity, unit)
  if unit ~= "" or core.elements(core.lowest(quantity))[1] ~= 0 or core.elements(core.highest(quantity))[1] ~= 1 then return false end
  return core.elements(core.highest(quantity * (1 - quantity)))[1] == 0
end

local function verdict_ensemble(quantity)
  local share = core.elements(core.chance(quantity))[1]
  return "in " .. format.percent(share) .. " of draws" .. undefined_note(quantity)
end

-- The points of an axis as text: "20 … 330 m, 100 points".
local function axis_text(axis)
  local name = core.find(axis.name)
  if not axis.values or not name then return ("%s, %d points"):format(axis.name, axis.length) end
  local first, last = axis.values[1], axis.values[#axis.values]
  local factor = core.entry(name).factor
  local points = format.with_unit(("%s … %s"):format(format.number(first / factor), format.number(last / factor)), text.unit_of(name))
  return ("%s %s, %d points"):format(axis.name, points, axis.length)
end

-- Some points along the one axis of a quantity: all where they are few, else nine evenly from end to end.
local function along_one(quantity, axis, factor, verdict)
  local function at(i)
    local value = core.elements(core.at(quantity, { [axis.name] = i }))[1] / factor
    if verdict then return value ~= value and "undefined" or value == 0 and "no" or value == 1 and "yes" or format.percent(value) end
    return format.number(value)
  end
  local shown, count = {}, axis.length
  if count <= 9 then
    for i = 1, count do shown[i] = at(i) end
    return table.concat(shown, "  ")
  end
  for i = 0, 8 do shown[i + 1] = at(1 + math.floor(i * (count - 1) / 8 + 0.5)) end
  return table.concat(shown, "  ", 1, 8) .. "  …  " .. shown[9]
end

-- A quantity with axes besides draw: along each point its median or chance.
local function grid(quantity, verdict, factor, unit)
  local over, draws = axes_of(quantity)
  local reduced = quantity
  if draws then reduced = verdict and core.chance(quantity) or core.median(quantity) end
  if #over > 1 then
    local names = {}
    for i, axis in ipairs(over) do names[i] = axis_text(axis) end
    local low, high = reduced, reduced
    for _, axis in ipairs(over) do low, high = core.lowest(low, axis.name), core.highest(high, axis.name) end
    low, high = core.elements(low)[1] / factor, core.elements(high)[1] / factor
    local write = verdict and format.percent or format.number
    return format.with_unit(("from %s to %s"):format(write(low), write(high)), unit) .. (draws and (verdict and " of draws" or " (medians)") or "") .. " over " ..
      table.concat(names, " and ") .. undefined_note(quantity)
  end
  return format.with_unit(along_one(reduced, over[1], factor, verdict), unit) .. "\n  " ..
    (draws and (verdict and "of draws, " or "medians, ") or "") .. "along " .. axis_text(over[1]) .. undefined_note(quantity)
end

-- A verdict's words and, where the case it was asked from is known, the margin or the condition that fails.
local function with_reason(words, verdict, name) return core.part "lacuna.conditions".with_reason(words, verdict, name) end

-- The text of a quantity: "156 ± 3 pc", "no", "in 83 % of draws".
function text.quantity(quantity)
  if core.object_type(quantity) then return tostring(quantity) end
  local name, _, _, number, _, unbound = core.facts(quantity)
  local verdict = is_verdict(name)
  local _, factor, unit = display_unit(quantity)
  if unbound then return text.unbound(quantity, factor, unit) end
  local axes = core.axes(quantity)
  if #axes == 0 then
    if verdict then return with_reason(number ~= number and "undefined" or number == 0 and "no" or "yes", quantity, name) end
    return format.with_unit(format.number(number / factor), unit)
  end
  if #axes == 1 and axes[1].name == "draw" then
    if verdict then return with_reason(verdict_ensemble(quantity), quantity, name) end
    if not name and is_yes_or_no(quantity, unit) then return verdict_ensemble(quantity) end
    local written = ensemble(quantity, factor)
    return format.with_unit(written, unit) .. undefined_note(quantity)
  end
  return grid(quantity, verdict, factor, unit)
end

-- The same within a line: of a grid, its range or the share of it.
function text.brief(quantity)
  if core.object_type(quantity) then return tostring(quantity) end
  local over, draws = axes_of(quantity)
  if #over == 0 then return text.quantity(quantity) end
  for i, axis in ipairs(over) do over[i] = axis.name end
  local along = over[1] == core.facts(quantity) and "" or " along " .. table.concat(over, " and ")
  local _, factor, unit = display_unit(quantity)
  if is_verdict((core.facts(quantity))) then
    return ("in %s of %s"):format(format.percent(share(quantity)), draws and "draws and points" or "points") .. along .. undefined_note(quantity)
  end
  local low = draws and core.median(quantity) or quantity
  local high = low
  for _, axis in ipairs(over) do low, high = core.lowest(low, axis), core.highest(high, axis) end
  local range = ("from %s to %s"):format(format.number(core.elements(low)[1] / factor), format.number(core.elements(high)[1] / factor))
  return format.with_unit(range, unit) .. (draws and " (medians)" or "") .. along .. undefined_note(quantity)
end

function text.unbound(quantity, factor, unit)
  if not factor then
    local _
    _, factor, unit = display_unit(quantity)
  end
  local kind, a, b, c, d = core.unbound_facts(quantity)
  if kind == "sweep" then
    return format.with_unit(("%s … %s"):format(format.number(b / factor), format.number(c / factor)), unit) .. (", a sweep of %d points"):format(a)
  end
  if kind == "normal" or kind == "lopsided" then return format.with_unit(format.with_error(b / factor, c / factor, (kind == "normal" and c or d) / factor), unit) end
  if kind == "uniform" or kind == "log_uniform" then
    return format.with_unit(("from %s to %s"):format(format.number(b / factor), format.number(c / factor)), unit) .. (kind == "uniform" and ", uniform" or ", log-uniform")
  end
  local about = format.with_unit(format.number(a / factor), unit)
  if kind == "log_normal" then return ("log-normal about %s, standard deviation of its logarithm %s"):format(about, format.number(c)) end
  return "samples about " .. about
end

-- How a spread was given, before it is bound to draws: "156 ± 3 pc", and its distribution; nil for what is no spread.
function text.as_written(name, value)
  if type(value) == "string" then value = core.reading(value, name) end
  local kind, median, a, b, c = core.unbound_facts(value)
  if kind and kind ~= "sweep" then return text.quantity(value), { kind = kind, median = median, a = a, b = b, c = c } end
end

-- A given as it was given: what its draws make of an error bar is no news.
function text.given(self, name)
  local info = core.info(self)
  return info.written[name] or text.brief(info.givens[name] or info.objects[name])
end

-- One representative number of a quantity in its display unit, and that unit's plain text and TeX: what is put into an equation.
function text.representative(quantity)
  local name, factor, unit = display_unit(quantity)
  local reduced = quantity
  for _, axis in ipairs(core.axes(quantity)) do reduced = axis.name == "draw" and core.median(reduced) or core.at(reduced, { [axis.name] = 1 }) end
  return core.elements(reduced)[1] / factor, unit, unit ~= "" and select(2, core.unit_facts(name)) or nil
end

-- Cases ---------------------------------------------------------------------------------------------------------------------------

-- The givens and objects of a case in the glossary's order: { name, text }.
function text.givens(self)
  local info, found = core.info(self), {}
  for _, name in ipairs(core.names()) do
    if info.givens[name] then found[#found + 1] = { name, text.given(self, name) } end
    if info.objects[name] then found[#found + 1] = { name, tostring(info.objects[name]) } end
  end
  return found
end

function text.case(self)
  local info = core.info(self)
  local lines = { info.target and "case of " .. info.target or "case" }
  local function add(line) lines[#lines + 1] = "  " .. line end
  for _, given in ipairs(text.givens(self)) do add(("%s = %s"):format(given[1], given[2])) end
  local using = {}
  for name, by in pairs(info.using) do using[#using + 1] = ("using %s by %s"):format(name, by) end
  table.sort(using)
  for _, line in ipairs(using) do add(line) end
  for i, change in ipairs(info.changed or {}) do
    if i > 6 then
      add(("and %d more recipes changed"):format(#info.changed - 6))
      break
    end
    add(("%s now by %s, before by %s"):format(change.name, change.after, change.before))
  end
  return show.page(lines)
end

return text

