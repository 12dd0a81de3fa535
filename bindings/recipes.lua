-- SPDX-License-Identifier: GPL-3.0-or-later
-- recipes "gap_width": all recipes of a name, with equations, sources and ranges of validity, and what each gives side by side, whether it is in
-- its range or what it would need: in a case, recipes("gap_width", c), or else for an invented star.
local core = ...
local relations = core.part "lacuna.relations"
local text = core.part "lacuna.text"
local case = core.part "lacuna.case"
local equation = core.part "lacuna.equation"
local format = core.part "lacuna.format"

local recipes = {}

local page = { __name = "recipes", __tostring = core.part "lacuna.show".page }

-- What a row of the tables says: its equation, its source, what it supposes, where it holds. Lines set in by six.
function recipes.describe(lines, row)
  local function add(line) lines[#lines + 1] = "      " .. line end
  if row.kind ~= "assumed" then
    if row.equation and row.equation ~= "" then add(equation.plain(row.equation, relations.symbol)) end
    add(row.source == "definition" and "definition" or relations.source(row))
  end
  if row.supposes then add("supposes " .. row.supposes) end
  if row.unchecked then add("not checked: " .. row.unchecked) end
  for _, bound in ipairs(row.holds) do add(("holds for %s %s"):format(bound.name, text.range(bound.name, bound.low, bound.high))) end
  if row.inverse_of then add("the inverse of " .. row.inverse_of:gsub("/", " by ")) end
end

-- A row with its heading.
function recipes.add_row(lines, row)
  if row.kind == "assumed" then lines[#lines + 1] = ("  assumed %s: %s"):format(row.assumes, relations.source(row))
  else lines[#lines + 1] = ("  %s, from %s"):format(row.by, table.concat(row.from, ", ")) end
  recipes.describe(lines, row)
end

-- Side by side --------------------------------------------------------------------------------------------------------------------

-- The case without the name itself, if it is given: else no recipe of it is asked.
local function without(self, name)
  if not core.info(self).givens[name] then return self end
  return self:with { [name] = false }
end

local function follows_from(self, name, other)
  for _, step in ipairs(core.steps(self, name)) do
    if step.name == other then return true end
  end
  return false
end

-- What would have to be given for a recipe, in words: of inputs that can't be had, and of those that are had from the name itself. Of an
-- inverse recipe it is the name that it goes back from: whatever would lead to that leads through the name asked.
local function what_is_missing(self, row)
  local missing, seen, inverted = {}, {}, row.inverse_of and row.inverse_of:match "^[%w_]+"
  local function add(name)
    if not seen[name] then missing[#missing + 1] = name end
    seen[name] = true
  end
  for _, input in ipairs(row.from) do
    local is_object = core.info(self).objects[input] ~= nil
    if core.row_of(self, input) == nil and not is_object then
      local sets = input ~= inverted and core.missing_sets(self, input) or {}
      for _, name in ipairs(sets[1] and sets[1].names or { input }) do add(name) end
    elseif not is_object and follows_from(self, input, row.gives) then add(input .. " (here it follows from " .. row.gives .. ")") end
  end
  return #missing > 0 and "missing: " .. table.concat(missing, ", ") or "not to be had with the recipes chosen"
end

local function is_undefined(quantity)
  local _, _, _, number, size = core.facts(quantity)
  return size == 1 and number ~= number
end

-- Whether a case lies in the range for which a recipe holds, in words.
local function in_range(self, row)
  local outside = {}
  for _, found in ipairs(relations.outside(self, row)) do
    local entry = core.entry(found.name)
    for _, bound in ipairs(row.holds) do
      if bound.name == found.name then
        outside[#outside + 1] = ("%s %s, holds %s%s"):format(found.name, text.brief(found.value), text.range(bound.name, bound.low, bound.high),
          found.single and "" or " (outside in " .. format.percent(found.share) .. ")")
      end
    end
  end
  if #outside > 0 then return "outside its range: " .. table.concat(outside, "; ") end
  return #row.holds > 0 and "in its range" or "no range stated"
end

-- One line of the comparison: recipe, value, remark.
local function compared(self, name, row)
  local mark = core.row_of(self, name) == row.number and "taken here, " or ""
  local other = case.by_recipe(self, name, row.by)
  local value = other and core.raw(other, name)
  if not value then return { row.by, "-", what_is_missing(self, row) } end
  if is_undefined(value) then return { row.by, "undefined", core.part "lacuna.why".undefined(other, name) } end
  if row.kind == "assumed" then return { row.by, text.brief(value), mark .. "assumed" } end
  return { row.by, text.brief(value), mark .. in_range(other, row) }
end

local function add_aligned(lines, cells)
  local widths = { 0, 0 }
  for _, row in ipairs(cells) do
    for i = 1, 2 do widths[i] = math.max(widths[i], format.width(row[i])) end
  end
  for _, row in ipairs(cells) do
    lines[#lines + 1] = ("  %s  %s\t%s"):format(format.pad_right(row[1], widths[1]), format.pad_right(row[2], widths[2]), row[3]):gsub("%s+$", "")
  end
end

local function side_by_side(lines, self, name, rows)
  local cells = { { "recipe", "value", "" } }
  local given = core.info(self).givens[name]
  if given then cells[2] = { "given", text.given(self, name), "taken here" } end
  local free = without(self, name)
  for _, row in ipairs(rows) do
    local line = compared(free, name, row)
    if given then line[3] = line[3]:gsub("^taken here, ", "") end
    cells[#cells + 1] = line
  end
  lines[#lines + 1] = ""
  add_aligned(lines, cells)
  lines[#lines + 1] = ""
end

local function givens_in_words(self)
  local parts = {}
  for i, name in ipairs(self:givens()) do parts[i] = name .. " = " .. text.given(self, name) end
  local objects = core.info(self).objects
  for _, name in ipairs(case.sorted_keys(objects)) do parts[#parts + 1] = name .. " = " .. tostring(objects[name]) end
  return table.concat(parts, ", ")
end

function recipes.recipes(word, self)
  if type(word) ~= "string" then core.raise("recipes wants a name, like recipes \"gap_width\"; got " .. core.shown(word)) end
  if self ~= nil and not core.is_case(self) then core.raise("recipes wants a case after the name; got " .. core.shown(self)) end
  local name = core.find(word)
  if not name then core.raise(case.unknown_name(word, "recipes: ")) end
  local entry, rows = core.entry(name), {}
  for i, number in ipairs(entry.rows) do rows[i] = core.row(number) end
  if #rows == 0 then return setmetatable({ name .. " has no recipe: it must be given" }, page) end
  local lines = setmetatable({ ("%s  %s: %s"):format(name, relations.symbol(name), entry.meaning) }, page)
  local invented = not self and core.part "lacuna.example".case_for(name)
  if self or invented then side_by_side(lines, self or invented, name, rows) end
  if invented then
    lines[#lines + 1] = ("  for an invented star: %s; recipes(\"%s\", c) takes yours"):format(givens_in_words(invented), name)
    lines[#lines + 1] = ""
  end
  for _, row in ipairs(rows) do recipes.add_row(lines, row) end
  return lines
end

return recipes
