-- SPDX-License-Identifier: GPL-3.0-or-later
-- Derivations as data, for c:why and for the page and the document of a report: the chain that leads to a quantity, with the numbers to put into
-- the equations; for each quantity that a study asks of one target; and what all chains rest on.
--
--   of(case, name)          { name, meaning, value, numbers = which stand in the equations, steps, conditions, unchecked, others }
--   of_study(study)         the target's row, and a list of { column, case, chain }: one for each column that could be derived
--   assumptions(chains), recipes(chains), others(chains)   each once, in the order of the chains
--
-- A step is { name, kind = "given", "assumed" or "derived", value (text), row (the relation; none of a given), equation, right_side,
-- inputs = { [name] = { number, unit, unit_tex } to put in }, objects = { [name] = words }, warnings, source = words on a given object, source_id }.
local core = ...
local case = core.part "lacuna.case"
local conditions = core.part "lacuna.conditions"
local equation = core.part "lacuna.equation"
local format = core.part "lacuna.format"
local relations = core.part "lacuna.relations"
local text = core.part "lacuna.text"

local derivation = {}

-- What is put in for the names in a row's right side: numbers, and the words of objects, which have none.
local function inputs_of(self, right_side)
  local numbers, objects = {}, {}
  for _, name in ipairs(equation.names(right_side)) do
    local value = core.raw(self, name)
    if core.object_type(value) then objects[name] = tostring(value)
    elseif value then
      local number, unit, unit_tex = text.representative(value)
      numbers[name] = { number = number, unit = unit, unit_tex = unit_tex }
    end
  end
  return numbers, objects
end

local function step_of(self, step)
  local value = core.raw(self, step.name)
  if not step.row then
    local given = { name = step.name, kind = "given", value = text.given(self, step.name) }
    if core.object_type(value) then given.source, given.source_id = core.part "lacuna.objects".source(value) end
    return given
  end
  local row = core.row(step.row)
  if row.kind == "assumed" then return { name = step.name, kind = "assumed", value = text.quantity(value), row = row } end
  local right_side = relations.right_side(row)
  local derived = {
    name = step.name, kind = "derived", value = text.brief(value), row = row, warnings = relations.warnings(self, row),
    equation = row.equation ~= "" and format.shortened(row.equation) or nil,
    right_side = right_side and format.shortened(right_side),
  }
  if right_side then derived.inputs, derived.objects = inputs_of(self, right_side) end
  return derived
end

-- Whether it is a choice, and not the same with less known: a verdict with fewer conditions, say.
local function is_another_recipe(self, other)
  return core.entry(other.name).kind ~= "verdict" and not case.leaves_out(other.row, core.row(core.row_of(self, other.name)))
end

-- Which numbers stand in the equations, where a quantity has more than one.
local function which_numbers(value)
  local which = {}
  for _, axis in ipairs(core.axes(value)) do
    which[#which + 1] = axis.name == "draw" and "medians of the draws" or "the first point of " .. axis.name
  end
  return #which > 0 and "numbers put in: " .. table.concat(which, ", ") or nil
end

function derivation.of(self, name)
  local value, entry = core.raw(self, name), core.entry(name)
  local chain = { name = name, meaning = entry.meaning, value = text.brief(value), numbers = which_numbers(value), steps = {}, conditions = {}, others = {} }
  for i, step in ipairs(core.steps(self, name)) do chain.steps[i] = step_of(self, step) end
  if entry.kind == "verdict" then
    chain.conditions, chain.unchecked = conditions.of(self, name)
    for i, c in ipairs(chain.conditions) do chain.conditions[i] = conditions.text(c) end
  end
  for _, other in ipairs(case.over_recipes(self, name)) do
    if is_another_recipe(self, other) then
      table.insert(chain.others, { name = other.name, row = other.row, instead_of = other.instead_of, value = text.brief(other.value) })
    end
  end
  return chain
end

-- The case that a column asks, of one target.
function derivation.case_of(row, column) return column.group and row.variants[column.group] or row.case end

-- The target that derivations are shown for: the one that the study names, else the first for which most is known.
local function target_shown(study)
  local best, most
  for _, row in ipairs(study.rows) do
    if row.name == study.derive then return row end
    local known = 0
    for _, cell in ipairs(row.cells) do if not cell.missing then known = known + 1 end end
    if not best or known > most then best, most = row, known end
  end
  return best
end

function derivation.of_study(study)
  local row, chains = target_shown(study), {}
  for i, column in ipairs(study.columns) do
    if not row.cells[i].missing then
      chains[#chains + 1] = { column = column, chain = derivation.of(derivation.case_of(row, column), column.name) }
    end
  end
  return row, chains
end

-- Calls visit(thing, column) for each thing of the chains that key(thing) has not been seen of.
local function each_once(chains, things, key)
  local seen, found = {}, {}
  for _, one in ipairs(chains) do
    for _, thing in ipairs(things(one.chain)) do
      local of_thing = key(thing)
      if of_thing and not seen[of_thing] then
        seen[of_thing] = true
        found[#found + 1] = thing
      end
    end
  end
  return found
end

local function steps(chain) return chain.steps end

function derivation.assumptions(chains)
  return each_once(chains, steps, function(step) return step.kind == "assumed" and step.name end)
end

-- The steps by recipes that someone chose; definitions are no choice.
function derivation.recipes(chains)
  return each_once(chains, steps, function(step)
    return step.kind == "derived" and step.row.kind ~= "definition" and step.row.source ~= "definition" and step.name .. "/" .. step.row.by
  end)
end

-- What the other recipes would have given: { label, other = {...}, value } for each column in which they differ.
function derivation.others(chains)
  local found = {}
  for _, one in ipairs(chains) do
    for _, other in ipairs(one.chain.others) do found[#found + 1] = { column = one.column, chain = one.chain, other = other } end
  end
  return found
end

-- Numbers in an equation -----------------------------------------------------------------------------------------------------------------

-- A value for putting in, as TeX.
local function value_tex(input)
  return (format.with_unit_tex(format.number_tex(input.number), input.unit_tex):gsub("%$", ""))
end

-- The same as MathML: "2.4e-11" is 2.4 × 10^-11.
local function value_mathml(input)
  local digits, exponent = format.number(input.number):match "^([^e]*)e?(.*)$"
  local number = "<mn>" .. digits:gsub("^-", "−") .. "</mn>"
  if exponent ~= "" then number = number .. "<mo>×</mo><msup><mn>10</mn><mn>" .. exponent:gsub("^-", "−") .. "</mn></msup>" end
  if input.unit == "" then return exponent == "" and number or "<mrow>" .. number .. "</mrow>" end
  return "<mrow>" .. number .. '<mspace width="0.167em"/><mtext>' .. input.unit .. "</mtext></mrow>"
end

-- Renderings of a step's equation, and of its right side with the numbers put in (nil where there is nothing to put in).
function derivation.equation_mathml(step) return equation.mathml(step.equation, relations.symbol_tex) end
function derivation.equation_plain(step) return equation.plain(step.equation, relations.symbol) end
function derivation.equation_tex(step) return equation.tex(step.equation, relations.symbol_tex) end

local function has_numbers(step) return step.right_side and next(step.inputs) end

function derivation.numbers_mathml(step)
  if not has_numbers(step) then return nil end
  return equation.mathml(step.right_side, function(name)
    local input = step.inputs[name]
    if input then return nil, value_mathml(input) end
    return relations.symbol_tex(name)
  end)
end

function derivation.numbers_tex(step)
  if not has_numbers(step) then return nil end
  return equation.tex(step.right_side, function(name)
    local input = step.inputs[name]
    return input and value_tex(input) or relations.symbol_tex(name)
  end)
end

-- In plain text objects stand by their names.
function derivation.numbers_plain(step)
  if not has_numbers(step) and not (step.right_side and next(step.objects)) then return nil end
  return equation.plain(step.right_side, function(name)
    local input = step.inputs[name]
    return input and format.with_unit(format.number(input.number), input.unit) or step.objects[name] or relations.symbol(name)
  end)
end

return derivation
