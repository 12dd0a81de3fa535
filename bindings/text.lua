-- SPDX-License-Identifier: GPL-3.0-or-later
-- How quantities, cases and derivations are written out: the words on the screen.
local core = ...
local format = core.part "lacuna.format"
local equation = core.part "lacuna.equation"
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

-- Quantities ----------------------------------------------------------------------------------------------------------------------

local function is_verdict(name) return name and core.entry(name).kind == "verdict" end

local function has_draws(axes)
  for _, axis in ipairs(axes) do if axis.name == "draw" then return true end end
  return false
end
text.has_draws = has_draws

-- The share of all elements of a quantity that are neither 0 nor undefined; nothing is stored for it.
local function share(quantity)
  for i, axis in ipairs(core.axes(quantity)) do
    quantity = i == 1 and core.chance(quantity, axis.name) or core.mean(quantity, axis.name)
  end
  return core.elements(quantity)[1] ~= 0 and core.elements(quantity)[1] or 0
end

-- " (1.2 % of draws undefined)", or nothing.
local function undefined_note(quantity)
  local axes, count = core.axes(quantity), quantity
  for i, axis in ipairs(axes) do
    count = i == 1 and core.undefined(quantity, axis.name) or core.mean(count, axis.name) * axis.length
  end
  count = math.floor(core.elements(count)[1] + 0.5)
  if count == 0 then return "" end
  local _, _, _, _, size = core.facts(quantity)
  if has_draws(axes) then return (" (%s of draws undefined)"):format(format.percent(count / size)) end
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
  local entry = core.entry(name)
  local _, _, unit = core.unit_facts(entry.unit)
  return ("%s %s … %s%s, %d points"):format(axis.name, format.number(first / entry.factor), format.number(last / entry.factor),
    entry.unit == "1" and "" or " " .. unit, axis.length)
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
local function grid(quantity, axes, verdict, factor, unit)
  local over = {}
  for _, axis in ipairs(axes) do if axis.name ~= "draw" then over[#over + 1] = axis end end
  local reduced = quantity
  if has_draws(axes) then reduced = verdict and core.chance(quantity) or core.median(quantity) end
  if #over > 1 then
    local names = {}
    for i, axis in ipairs(over) do names[i] = axis_text(axis) end
    local low, high = reduced, reduced
    for _, axis in ipairs(over) do low, high = core.lowest(low, axis.name), core.highest(high, axis.name) end
    low, high = core.elements(low)[1] / factor, core.elements(high)[1] / factor
    local range = ("from %s to %s"):format(verdict and format.percent(low) or format.number(low), verdict and format.percent(high) or format.number(high))
    return format.with_unit(range, unit) .. (has_draws(axes) and (verdict and " of draws" or " (medians)") or "") .. " over " ..
      table.concat(names, " and ") .. undefined_note(quantity)
  end
  return format.with_unit(along_one(reduced, over[1], factor, verdict), unit) .. "\n  " ..
    (has_draws(axes) and (verdict and "of draws, " or "medians, ") or "") .. "along " .. axis_text(over[1]) .. undefined_note(quantity)
end

local verdict_reason -- defined with the derivations

-- The text of a quantity: "156 ± 3 pc", "no", "in 83 % of draws".
function text.quantity(quantity)
  if core.object_type(quantity) then return tostring(quantity) end
  local name, _, _, number, _, unbound = core.facts(quantity)
  local verdict = is_verdict(name)
  local _, factor, unit = display_unit(quantity)
  if unbound then return text.unbound(quantity, factor, unit) end
  local axes = core.axes(quantity)
  if #axes == 0 then
    if verdict then return text.with_reason(number ~= number and "undefined" or number == 0 and "no" or "yes", quantity, name) end
    return format.with_unit(format.number(number / factor), unit)
  end
  if #axes == 1 and axes[1].name == "draw" then
    if verdict then return text.with_reason(verdict_ensemble(quantity), quantity, name) end
    if not name and is_yes_or_no(quantity, unit) then return verdict_ensemble(quantity) end
    local written = ensemble(quantity, factor)
    return format.with_unit(written, unit) .. undefined_note(quantity)
  end
  return grid(quantity, axes, verdict, factor, unit)
end

-- The same within a line: of a grid, its range or the share of it.
function text.brief(quantity)
  if core.object_type(quantity) then return tostring(quantity) end
  local axes, over = core.axes(quantity), {}
  for _, axis in ipairs(axes) do if axis.name ~= "draw" then over[#over + 1] = axis.name end end
  if #over == 0 then return text.quantity(quantity) end
  local draws, along = has_draws(axes), over[1] == core.facts(quantity) and "" or " along " .. table.concat(over, " and ")
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

-- Sources -------------------------------------------------------------------------------------------------------------------------

-- "Kanagawa et al. 2016, PASJ 68, 43, Eq. 5"
function text.source(row)
  local source = core.source(row.source)
  if not source then return row.source .. (row.place and ", " .. row.place or "") end
  if not source.year then return source.authors .. (row.place and ", " .. row.place or "") end
  local parts = { source.authors .. " " .. source.year }
  if source.journal then parts[#parts + 1] = source.journal .. (source.volume and " " .. source.volume or "") end
  if source.page then parts[#parts + 1] = source.page end
  if row.place then parts[#parts + 1] = row.place end
  return table.concat(parts, ", ") .. (row.from_memory and " (formula from memory)" or "")
end

-- "by definition", "assumed", "kanagawa_2016: Kanagawa et al. ..."
function text.recipe(row)
  if row.source == "definition" then return "by definition" .. (row.by == "definition" and "" or " (" .. row.by .. ")") end
  return row.by .. ": " .. text.source(row)
end

-- Equations -----------------------------------------------------------------------------------------------------------------------

-- The length that an angle is the angle of, or nil.
local function length_of(name)
  local length = name:match "^(.+)_angle$"
  return length and core.find(length) == length and core.entry(length).on_sky and length or nil
end

-- The symbol of a name in plain text; that of an angle is θ of the length.
function text.symbol(name)
  local length = length_of(name)
  if length then return "θ(" .. text.symbol(length) .. ")" end
  return equation.plain_symbol(core.entry(name).symbol)
end

-- The same in the TeX that equations are written in.
function text.symbol_tex(name)
  local length = length_of(name)
  return length and "\\theta(" .. text.symbol_tex(length) .. ")" or core.entry(name).symbol
end
local symbol_of = text.symbol

-- One representative number of a quantity in its display unit, and that unit's plain text and TeX: what is put into an equation.
function text.representative(quantity)
  local name, factor, unit = display_unit(quantity)
  local reduced = quantity
  for _, axis in ipairs(core.axes(quantity)) do reduced = axis.name == "draw" and core.median(reduced) or core.at(reduced, { [axis.name] = 1 }) end
  return core.elements(reduced)[1] / factor, unit, unit ~= "" and select(2, core.unit_facts(name)) or nil
end

local function representative(quantity)
  if core.object_type(quantity) then return tostring(quantity) end
  local number, unit = text.representative(quantity)
  return format.with_unit(format.number(number), unit)
end

-- The side of a row's equation that numbers can be put into; conditions are listed with their numbers by themselves.
function text.right_side(row)
  if not row.equation or #row.from == 0 or #row.conditions > 0 then return nil end
  return row.equation:match "^.-=(.*)$"
end

-- The equation of a row, and again with the case's numbers in it.
local function equation_lines(self, row)
  if not row.equation or row.equation == "" then return {} end
  local lines = { equation.plain(row.equation, symbol_of) }
  local with_numbers = text.right_side(row)
  if with_numbers then
    lines[2] = "= " .. equation.plain(with_numbers, function(name)
      local value = core.raw(self, name)
      return value and representative(value) or symbol_of(name)
    end)
  end
  return lines
end

-- Derivations ---------------------------------------------------------------------------------------------------------------------

-- Where a row's inputs lie outside its range of validity: a list of { words = the range, name, value, share }.
function text.outside(self, row)
  local found = {}
  for _, bound in ipairs(row.holds) do
    local value = core.raw(self, bound.name)
    if value then
      local outside = core.either(core.below(value, core.like(value, bound.low)), core.above(value, core.like(value, bound.high)))
      local outside_in = share(outside)
      if outside_in > 0 then
        local entry = core.entry(bound.name)
        local _, _, unit = core.unit_facts(entry.unit)
        local low, high = format.number(bound.low / entry.factor), format.number(bound.high / entry.factor)
        found[#found + 1] = { name = bound.name, value = value, share = outside_in, single = #core.axes(outside) == 0,
          words = ("%s holds for %s from %s to %s%s"):format(row.by, bound.name, low, high, entry.unit == "1" and "" or " " .. unit) }
      end
    end
  end
  return found
end

-- The same as sentences.
function text.warnings(self, row)
  local warnings = {}
  for i, outside in ipairs(text.outside(self, row)) do
    warnings[i] = ("%s; %s here%s"):format(outside.words, text.brief(outside.value),
      outside.single and "" or ", outside in " .. format.percent(outside.share))
  end
  if row.from[1] == "dust" and row.from[2] == "wavelength" then
    warnings[#warnings + 1] = core.part "lacuna.dust".warning(core.raw(self, "dust"), core.raw(self, "wavelength"))
  end
  return warnings
end

-- One condition of a verdict, "[a] >= [b]" or "2 [a] <= [b]": its sides' names, the factor, whether the left side must be the greater.
local function parse_condition(condition)
  local factor, left, sign, right = condition:match "^(%d*)%s*%[([%w_]+)%]%s*([<>]=)%s*%[([%w_]+)%]$"
  return { left = left, right = right, factor = tonumber(factor) or 1, greater = sign == ">=", sign = sign == ">=" and "≥" or "≤" }
end

text.parse_condition = parse_condition

-- A verdict's conditions in a case: each with its sides' values, and the share of elements for which it holds.
function text.conditions(self, name)
  local number = core.row_of(self, name)
  local conditions = {}
  for _, condition in ipairs(number and core.row(number).conditions or {}) do
    local c = parse_condition(condition)
    c.left_value, c.right_value = core.raw(self, c.left), core.raw(self, c.right)
    local left = c.left_value * c.factor
    local fails = c.greater and core.below(left, c.right_value) or core.above(left, c.right_value)
    c.failed = 1 - share(1 - fails) -- the share; undefined ones are in it
    c.holds = c.failed == 0
    local axes = core.axes(fails)
    c.parts = not has_draws(axes) and "points" or #axes == 1 and "draws" or "draws and points"
    c.margin = left / c.right_value
    conditions[#conditions + 1] = c
  end
  return conditions, number and core.row(number).unchecked
end

local function condition_text(c)
  local factor = c.factor == 1 and "" or c.factor .. " × "
  local sign, state = c.sign, ""
  if c.failed == 1 then sign = c.greater and "<" or ">"
  elseif c.failed > 0 then state = (", not in %s of %s"):format(format.percent(c.failed), c.parts) end
  return ("%s%s %s %s %s%s"):format(factor, c.left, text.brief(c.left_value), sign, c.right == "elements_required" and text.brief(c.right_value)
    or c.right .. " " .. text.brief(c.right_value), state)
end
text.condition = condition_text

-- Why a verdict is no, in a few words, from the first condition that fails.
function verdict_reason(self, name)
  for _, c in ipairs((text.conditions(self, name))) do
    if not c.holds then
      local factor = c.factor == 1 and "" or c.factor .. " × "
      return ("%s%s %s, %s %s"):format(factor, c.left, text.brief(c.left_value), c.greater and "below" or "above", text.brief(c.right_value))
    end
  end
end
text.verdict_reason = verdict_reason

-- A verdict's words and, where the case it was asked from is known, the margin or the condition that fails.
function text.with_reason(words, verdict, name)
  local self = core.case_of(verdict)
  if not self then return words end
  local conditions = text.conditions(self, name)
  local failing
  for _, c in ipairs(conditions) do if not c.holds and (not failing or c.failed > failing.failed) then failing = c end end
  if not failing then return #conditions > 0 and words .. ": " .. condition_text(conditions[1]) or words end
  return words .. ": " .. condition_text(failing)
end

local function add(lines, indent, s) lines[#lines + 1] = (" "):rep(indent) .. s end

local function add_step(lines, self, step)
  local value = core.raw(self, step.name)
  if not step.row then
    add(lines, 2, ("%s = %s   given"):format(step.name, text.given(self, step.name)))
    local source = core.object_type(value) and core.part "lacuna.objects".source(value)
    if source then add(lines, 6, source) end
    return
  end
  local row = core.row(step.row)
  if row.kind == "assumed" then
    add(lines, 2, ("%s = %s   assumed (%s)%s"):format(step.name, text.quantity(value), text.source(row), row.supposes and ": " .. row.supposes or ""))
    return
  end
  add(lines, 2, ("%s = %s"):format(step.name, text.brief(value)))
  for _, line in ipairs(equation_lines(self, row)) do add(lines, 6, line) end
  add(lines, 6, text.recipe(row))
  if row.supposes then add(lines, 6, "supposes " .. row.supposes) end
  for _, warning in ipairs(text.warnings(self, row)) do add(lines, 6, "beware: " .. warning) end
end

local function add_verdict(lines, self, name)
  local conditions, unchecked = text.conditions(self, name)
  add(lines, 2, "conditions")
  for _, c in ipairs(conditions) do add(lines, 6, condition_text(c)) end
  if unchecked then add(lines, 6, "not checked: " .. unchecked) end
  add(lines, 6, "geometrically resolved only: whether it is detected is not assessed here")
end

local function add_alternatives(lines, self, name)
  local others = core.part "lacuna.case".over_recipes(self, name)
  if #others == 0 then return end
  add(lines, 2, "with other recipes")
  for _, other in ipairs(others) do
    add(lines, 6, ("%s by %s: %s (instead of %s)"):format(other.name, other.by, text.brief(other.value), other.instead_of))
  end
end

-- Which numbers stand in the equations, where a quantity has more than one.
function text.put_in(value)
  local which = {}
  for _, axis in ipairs(core.axes(value)) do
    which[#which + 1] = axis.name == "draw" and "medians of the draws" or "the first point of " .. axis.name
  end
  return #which > 0 and "numbers put in: " .. table.concat(which, ", ") or nil
end

text.why_metatable = {
  __name = "derivation",
  __tostring = function(why)
    local self, name = why.case, why.name
    local value, entry = core.raw(self, name), core.entry(name)
    local lines = { ("%s = %s"):format(name, text.quantity(value)), "  " .. entry.meaning }
    local numbers = text.put_in(value)
    lines[3] = numbers and "  " .. numbers
    lines[#lines + 1] = ""
    for _, step in ipairs(core.steps(self, name)) do add_step(lines, self, step) end
    if entry.kind == "verdict" then add_verdict(lines, self, name) end
    add_alternatives(lines, self, name)
    return show.page(lines)
  end,
}

-- Why a single number is undefined: the first step that has none, with what it came from. Where the name asked for lies further on, it
-- goes before: "gap_width_angle: gap_width is undefined: ...".
function text.undefined(self, name)
  for _, step in ipairs(core.steps(self, name)) do
    local value = core.raw(self, step.name)
    local _, _, _, number = core.facts(value)
    if number ~= number and step.row then
      local row, inputs, outside = core.row(step.row), {}, {}
      for _, input in ipairs(row.from) do inputs[#inputs + 1] = input .. " = " .. text.brief(core.raw(self, input)) end
      for i, bound in ipairs(text.outside(self, row)) do outside[i] = "; " .. bound.words end
      local range = core.entry(step.name).range
      local beyond = row.from[1] == "dust" and row.from[2] == "wavelength" and core.part "lacuna.dust".beyond(core.raw(self, "dust"), core.raw(self, "wavelength"))
      return ("%s%s is undefined: by %s, %s give%s no value%s%s"):format(step.name ~= name and name .. ": " or "", step.name, row.by,
        table.concat(inputs, " and "), #inputs == 1 and "s" or "", beyond or #outside == 0 and range ~= "any" and " that is " .. range or "", table.concat(outside))
    end
  end
  return name .. " is undefined"
end

-- What is missing -----------------------------------------------------------------------------------------------------------------

local function contains(names, others)
  local has = {}
  for _, name in ipairs(names) do has[name] = true end
  for _, name in ipairs(others) do if not has[name] then return false end end
  return true
end

-- Where on the way to a name the givens of one set are lacking: the name, its row, and which of the row's inputs can't be had. From the asked
-- name downwards, as long as a single input is what fails.
local function failed_branch(self, name, set)
  local wanted = {}
  for _, given in ipairs(set.names) do wanted[given] = true end
  local number = set.row
  while true do
    local row, lacking = core.row(number), {}
    for _, input in ipairs(row.from) do if core.row_of(self, input) == nil then lacking[#lacking + 1] = input end end
    local further = #lacking == 1 and not wanted[lacking[1]] and core.missing_sets(self, lacking[1])[1]
    if not further or not further.row or #further.names ~= #set.names then return name, row, lacking, wanted end
    name, number = lacking[1], further.row
  end
end

-- "gap_width by kanagawa_2016", where the set's givens are lacking; of the asked name itself without the name.
local function branch_text(self, asked, set)
  local name, row, lacking, wanted = failed_branch(self, asked, set)
  local direct = false
  for _, input in ipairs(lacking) do direct = direct or wanted[input] end
  return (name ~= asked and "for " .. name .. " " or "") .. "by " .. row.by .. (direct and "" or " from " .. table.concat(lacking, ", "))
end

-- The sets of names that would do, as { names, by = recipes }: those that more than one recipe takes once.
local function ways_of(missing)
  local ways = {}
  for _, set in ipairs(missing.sets) do
    local by, same = set.row and core.row(set.row).by, nil
    for _, way in ipairs(ways) do
      if #way.names == #set.names and contains(way.names, set.names) then same = way end
    end
    if not same then
      same = { names = set.names, by = {}, set = set }
      ways[#ways + 1] = same
    end
    same.by[#same.by + 1] = by
  end
  return ways
end

-- The names of a way, and by which recipes; a definition alone is no news. `branch`: where on the way they are lacking, if that is known.
local function way_text(way, names, branch)
  local by = table.concat(way.by, " or ")
  if by == "" or by == "definition" and (not branch or branch:find "^by") then return names end
  return names .. " (" .. (#way.by == 1 and branch or "by " .. by:gsub("^definition or ", "definition, or ")) .. ")"
end

-- What is missing in one line, as an error says it. Ways that want more than another one are left to missing.
function text.not_had(missing)
  local parts = {}
  if #missing.sets == 0 or missing.sets[1].names[1] == missing.name then
    for i, number in ipairs(core.entry(missing.name).rows) do
      local row = core.row(number)
      parts[i] = way_text({ by = { row.by } }, table.concat(row.from, ", "))
    end
    return missing.name .. " must be given" .. (#parts == 0 and ": no relation gives it" or ", or follow from " .. table.concat(parts, ", or "))
  end
  local ways = ways_of(missing)
  for i, way in ipairs(ways) do
    local more = false
    for j = 1, i - 1 do more = more or contains(way.names, ways[j].names) end
    local branch = way.set.row and branch_text(missing.case, missing.name, way.set)
    if not more then parts[#parts + 1] = way_text(way, table.concat(way.names, ", "), branch) end
  end
  return missing.name .. " can't be derived from what is given; give " .. table.concat(parts, ", or ")
end

-- A further way: what it wants besides all that the first one wants, or all of it.
local function further_way(way, first)
  if not contains(way.names, first.names) then return way_text(way, "or " .. table.concat(way.names, ", ")) end
  local besides = {}
  for _, name in ipairs(way.names) do
    if not contains(first.names, { name }) then besides[#besides + 1] = name end
  end
  return way_text(way, "or, besides, " .. table.concat(besides, ", "))
end

-- Each name that some way wants once: its unit, its meaning, a hint.
local function explained(lines, ways)
  local seen = {}
  for _, way in ipairs(ways) do
    for _, name in ipairs(way.names) do
      if not seen[name] then
        local entry = core.entry(name)
        local unit = entry.unit and entry.unit ~= "1" and select(3, core.unit_facts(entry.unit))
        add(lines, 2, ("%s%s: %s"):format(name, unit and " [" .. unit .. "]" or "", entry.meaning))
        if entry.hint then add(lines, 4, entry.hint) end
      end
      seen[name] = true
    end
  end
end

text.missing_metatable = {
  __name = "what is missing",
  __tostring = function(missing)
    if missing.given then return missing.name .. " is given" end
    if missing.had then return missing.name .. " can be had from what is given" end
    local ways = ways_of(missing)
    if #ways == 0 or ways[1].names[1] == missing.name then return show.page { text.not_had(missing) } end
    local lines = { missing.name .. " can't be derived from what is given; give " .. way_text(ways[1], table.concat(ways[1].names, ", ")) }
    for i = 2, #ways do add(lines, 2, further_way(ways[i], ways[1])) end
    lines[#lines + 1] = ""
    explained(lines, ways)
    return show.page(lines)
  end,
}

text.check_metatable = {
  __name = "check",
  __tostring = function(check)
    if #check.entries == 0 then return "no given follows from the others: nothing to compare" end
    local lines = {}
    for _, entry in ipairs(check.entries) do
      lines[#lines + 1] = ("%s: given %s, by %s %s: %s"):format(entry.name, entry.written, entry.by, text.brief(entry.derived),
        entry.agrees and "agree" or "DISAGREE")
    end
    return show.page(lines)
  end,
}

-- Cases ---------------------------------------------------------------------------------------------------------------------------

function text.case(self)
  local info = core.info(self)
  local lines = { info.target and "case of " .. info.target or "case" }
  for _, name in ipairs(core.names()) do
    if info.givens[name] then add(lines, 2, ("%s = %s"):format(name, text.given(self, name))) end
    if info.objects[name] then add(lines, 2, ("%s = %s"):format(name, tostring(info.objects[name]))) end
  end
  local using = {}
  for name, by in pairs(info.using) do using[#using + 1] = ("using %s by %s"):format(name, by) end
  table.sort(using)
  for _, line in ipairs(using) do add(lines, 2, line) end
  for i, change in ipairs(info.changed or {}) do
    if i > 6 then
      add(lines, 2, ("and %d more recipes changed"):format(#info.changed - 6))
      break
    end
    add(lines, 2, ("%s now by %s, before by %s"):format(change.name, change.after, change.before))
  end
  return show.page(lines)
end

return text
