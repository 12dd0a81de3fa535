-- SPDX-License-Identifier: GPL-3.0-or-later
-- c:why(name): the derivation of a quantity, printed; and why a single number is undefined.
local core = ...
local case = core.part "lacuna.case"
local derivation = core.part "lacuna.derivation"
local relations = core.part "lacuna.relations"
local show = core.part "lacuna.show"
local text = core.part "lacuna.text"

local why = {}

local function add(lines, indent, s) lines[#lines + 1] = (" "):rep(indent) .. s end

local function add_step(lines, step)
  if step.kind == "given" then
    add(lines, 2, ("%s = %s   given"):format(step.name, step.value))
    if step.source then add(lines, 6, step.source) end
    return
  end
  local row = step.row
  if step.kind == "assumed" then
    add(lines, 2, ("%s = %s   assumed (%s)%s"):format(step.name, step.value, relations.source(row), row.supposes and ": " .. row.supposes or ""))
    return
  end
  add(lines, 2, ("%s = %s"):format(step.name, step.value))
  if step.equation then add(lines, 6, derivation.equation_plain(step)) end
  local numbers = derivation.numbers_plain(step)
  if numbers then add(lines, 6, "= " .. numbers) end
  add(lines, 6, relations.recipe(row))
  if row.supposes then add(lines, 6, "supposes " .. row.supposes) end
  for _, warning in ipairs(step.warnings) do add(lines, 6, "beware: " .. warning) end
end

local function add_conditions(lines, chain)
  add(lines, 2, "conditions")
  for _, condition in ipairs(chain.conditions) do add(lines, 6, condition) end
  if chain.unchecked then add(lines, 6, "not checked: " .. chain.unchecked) end
  add(lines, 6, "geometrically resolved only: whether it is detected is not assessed here")
end

local function add_others(lines, others)
  if #others > 0 then add(lines, 2, "with other recipes") end
  for _, other in ipairs(others) do
    add(lines, 6, ("%s by %s: %s (instead of %s)"):format(other.name, other.row.by, other.value, other.instead_of))
  end
end

local metatable = {
  __name = "derivation",
  __tostring = function(asked)
    local self, name = asked.case, asked.name
    local chain = derivation.of(self, name)
    local lines = { ("%s = %s"):format(name, text.quantity(core.raw(self, name))) }
    add(lines, 2, chain.meaning)
    if chain.numbers then add(lines, 2, chain.numbers) end
    add(lines, 0, "")
    for _, step in ipairs(chain.steps) do add_step(lines, step) end
    if core.entry(name).kind == "verdict" then add_conditions(lines, chain) end
    add_others(lines, chain.others)
    return show.page(lines)
  end,
}

function core.case_methods.why(self, word)
  local name = case.name_of(word, "why: ")
  if core.row_of(self, name) == nil then return core.case_methods.missing(self, name) end
  return setmetatable({ case = self, name = name }, metatable)
end

-- What is said where a row gave no value for its inputs.
local function undefined_step(self, step)
  local row, inputs, outside = core.row(step.row), {}, {}
  for _, input in ipairs(row.from) do inputs[#inputs + 1] = input .. " = " .. text.brief(core.raw(self, input)) end
  for i, bound in ipairs(relations.outside(self, row)) do outside[i] = "; " .. bound.words end
  local range = core.entry(step.name).range
  local beyond = row.from[1] == "dust" and row.from[2] == "wavelength" and
    core.part "lacuna.dust".beyond(core.raw(self, "dust"), core.raw(self, "wavelength"))
  return ("%s is undefined: by %s, %s give%s no value%s%s"):format(step.name, row.by, table.concat(inputs, " and "), #inputs == 1 and "s" or "",
    beyond or #outside == 0 and range ~= "any" and " that is " .. range or "", table.concat(outside))
end

-- Why a single number is undefined: the first step that has none, with what it came from. Where the name asked for lies further on, it
-- goes before: "gap_width_angle: gap_width is undefined: ...".
function why.undefined(self, name)
  for _, step in ipairs(core.steps(self, name)) do
    local _, _, _, number = core.facts(core.raw(self, step.name))
    if number ~= number and step.row then return (step.name ~= name and name .. ": " or "") .. undefined_step(self, step) end
  end
  return name .. " is undefined"
end

return why
