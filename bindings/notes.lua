-- SPDX-License-Identifier: GPL-3.0-or-later
-- What stands below a study's table: what could not be derived, why a verdict is no, what other recipes would change, the recipes
-- with their sources, what is assumed and supposed, and how far the answer goes. Each note is { heading, lines }.
local core = ...
local case = core.part "lacuna.case"
local equation = core.part "lacuna.equation"
local format = core.part "lacuna.format"
local text = core.part "lacuna.text"

local notes = {}

-- Lists that keep the order in which their keys came ---------------------------------------------------------------------------------

local function ordered() return { keys = {}, values = {} } end

local function at(list, key, make)
  if list.values[key] == nil then
    list.keys[#list.keys + 1] = key
    list.values[key] = make and make() or ordered()
  end
  return list.values[key]
end

local function each(list)
  local i = 0
  return function()
    i = i + 1
    return list.keys[i], list.values[list.keys[i]]
  end
end

-- "Marrow 3, Quillon A"; "all targets"; "all targets but Marrow 3".
local function named(names, study)
  local missing, has = {}, {}
  for _, name in ipairs(names) do has[name] = true end
  for _, row in ipairs(study.rows) do if not has[row.name] then missing[#missing + 1] = row.name end end
  if #study.rows > 1 and #missing == 0 then return "all targets" end
  if #study.rows > 4 and #missing <= 2 then return "all targets but " .. table.concat(missing, " and ") end
  return table.concat(names, ", ")
end

-- "1 au, 5 au: gap_size_angle, gap_resolved_by_array" of the columns that share something.
local function labelled(columns)
  local by_names = ordered()
  local names_of = ordered()
  for _, column in ipairs(columns) do
    local group = column.group or ""
    local names = at(names_of, group)
    at(names, column.name, function() return true end)
  end
  for group, names in each(names_of) do
    local groups = at(by_names, table.concat(names.keys, ", "))
    at(groups, group, function() return true end)
  end
  local said = {}
  for names, groups in each(by_names) do
    local which = table.concat(groups.keys, ", ")
    said[#said + 1] = (which ~= "" and which .. ": " or "") .. names
  end
  return table.concat(said, "; ")
end

-- The cases of a study share few chains. ---------------------------------------------------------------------------------------------

-- The steps to a name in a case, each with its row as a table; found once for all cases with the same given names and recipes.
local function steps_of(study, self, group, name)
  local key = group .. " " .. name .. " " .. table.concat(case.sorted_keys(core.info(self).givens), " ")
  study.steps = study.steps or {}
  local steps = study.steps[key]
  if not steps then
    steps = core.steps(self, name)
    for _, step in ipairs(steps) do step.relation = step.row and core.row(step.row) end
    study.steps[key] = steps
  end
  return steps
end

-- Calls visit(column, row, cell, case) for each cell that has a value.
local function for_cells(study, visit)
  for i, column in ipairs(study.columns) do
    for _, row in ipairs(study.rows) do
      if not row.cells[i].missing then visit(column, row, row.cells[i], row.made[column.group_number]) end
    end
  end
end

-- The relations used: name -> recipe -> { relation, targets }, in the order of the glossary.
local function relations_used(study)
  local used = {}
  for_cells(study, function(column, row, _, self)
    for _, step in ipairs(steps_of(study, self, column.group_number, column.name)) do
      used[step.name] = used[step.name] or ordered()
      local by = at(used[step.name], step.relation and step.relation.by or "given")
      by.relation = step.relation
      at(by, row.name, function() return true end)
    end
  end)
  local in_order = ordered()
  for _, name in ipairs(core.names()) do
    if used[name] then in_order.keys[#in_order.keys + 1], in_order.values[name] = name, used[name] end
  end
  return in_order
end

notes.relations_used = relations_used

-- The notes ---------------------------------------------------------------------------------------------------------------------------

local function not_derived(study)
  local reasons = ordered()
  for i, column in ipairs(study.columns) do
    for _, row in ipairs(study.rows) do
      local cell = row.cells[i]
      if cell.missing then
        local key = cell.reason .. "\0" .. row.name
        local entry = at(reasons, key)
        entry.reason, entry.name = cell.reason, row.name
        entry[#entry + 1] = column
      end
    end
  end
  local lines = ordered() -- the same reason of the same columns for several targets: once
  for _, entry in each(reasons) do
    local line = at(lines, entry.reason .. ": " .. labelled(entry))
    line[#line + 1] = entry.name
  end
  local said = {}
  for line, names in each(lines) do said[#said + 1] = named(names, study) .. ", " .. line end
  return said
end

-- A condition in words: "gap_elements_by_array below elements_required", or as it should be.
local function condition_words(c, sign)
  return ("%s%s %s %s"):format(c.factor == 1 and "" or c.factor .. " × ", c.left, sign, c.right)
end

local function representative(quantity)
  local _, factor, unit = text.display_unit(quantity)
  return format.number(core.elements(core.median(quantity))[1] / factor, 2), unit
end

-- Of a verdict that mostly is no: the conditions that fail in half of the draws or more, or else the one that fails most often.
local function failing(self, name)
  local conditions, found, worst = text.conditions(self, name), {}, nil
  for _, c in ipairs(conditions) do
    if c.failed >= 0.5 then found[#found + 1] = c end
    if not worst or c.failed > worst.failed then worst = c end
  end
  return #found > 0 and found or { worst }
end

-- "Marrow 3 (0.18), Veyra 77 (0.4)"; where there are many, the range and their names.
local function who_fails(list, study)
  local names, each_value, low, high = {}, {}, math.huge, -math.huge
  for i, one in ipairs(list) do
    names[i], each_value[i] = one.name, ("%s (%s)"):format(one.name, one.value)
    low, high = math.min(low, tonumber(one.value)), math.max(high, tonumber(one.value))
  end
  if #list <= 3 then return table.concat(each_value, ", ") end
  return ("%s to %s for %s"):format(format.number(low), format.number(high), named(names, study))
end

local function why_not(study)
  local columns = ordered()
  for_cells(study, function(column, row, cell, self)
    if not column.verdict or cell.share >= 0.5 then return end
    for _, c in ipairs(failing(self, column.name)) do
      local right, unit = representative(c.right_value)
      local words = condition_words(c, c.greater and "<" or ">") .. " " .. format.with_unit(right, unit)
      local left = representative(c.left_value * c.factor)
      local reason = at(at(columns, column.label), words)
      reason[#reason + 1] = { name = row.name, value = left }
    end
  end)
  local said = {}
  for label, reasons in each(columns) do
    local lines = { label }
    for words, list in each(reasons) do lines[#lines + 1] = words .. ": " .. who_fails(list, study) end
    said[#said + 1] = lines
  end
  return said
end

local function unlike_recipes(study, used)
  local said = {}
  for name, recipes in each(used) do
    if #recipes.keys > 1 then
      local parts = {}
      for by, targets in each(recipes) do
        parts[#parts + 1] = (by == "given" and "given for " or by:gsub("_", " ") .. " for ") .. named(targets.keys, study)
      end
      said[#said + 1] = name .. ": " .. table.concat(parts, "; ")
    end
  end
  return said
end

-- Whether a recipe merely leaves out what is known: its inputs are some of the other's.
local function leaves_out(row, taken)
  if #row.from >= #taken.from then return false end
  local has = {}
  for _, name in ipairs(taken.from) do has[name] = true end
  for _, name in ipairs(row.from) do if not has[name] then return false end end
  return true
end

-- Recipes that stand beside those taken on the way to a name.
local function alternatives(study, self, column)
  local steps = steps_of(study, self, column.group_number, column.name)
  if not steps.alternatives then
    steps.alternatives = {}
    for _, step in ipairs(steps) do
      if step.relation and core.entry(step.name).kind ~= "verdict" then
        for i, row in ipairs(case.live_rows(self, step.name)) do
          if i > 1 and row.kind ~= "definition" and row.kind ~= "assumed" and not leaves_out(row, step.relation) then
            table.insert(steps.alternatives, { name = step.name, by = row.by, instead_of = step.relation.by })
          end
        end
      end
    end
  end
  return steps.alternatives
end

local function by_recipe(self, other, made)
  local key = other.name .. " " .. other.by
  if made[key] == nil then made[key] = case.by_recipe(self, other.name, other.by) or false end
  return made[key]
end

local function is_magnitude(column) return core.entry(column.name).unit == "mag" end

-- What changes for one cell: the median's factor (of a magnitude: its difference), or whether the verdict crosses one half.
local function add_change(change, column, row, cell, value)
  if column.verdict then
    change.asked = change.asked + 1
    if (core.elements(core.chance(value))[1] >= 0.5) ~= (cell.share >= 0.5) then change.names[#change.names + 1] = row.name end
  else
    local before, after = core.elements(core.median(cell.quantity))[1], core.elements(core.median(value))[1]
    local by = is_magnitude(column) and after - before or after / before
    if by == by and math.abs(by) < math.huge then change.low, change.high = math.min(change.low, by), math.max(change.high, by) end
  end
end

local function change_words(column, change, study)
  if column.verdict then
    if #change.names == 0 then return nil end
    return ("%s changes for %d of %d (%s)"):format(column.label, #change.names, change.asked, named(change.names, study))
  end
  if change.high < change.low then return nil end
  local low, high = format.number(change.low, 2), format.number(change.high, 2)
  if is_magnitude(column) then
    low, high = ("%+.2f"):format(change.low), ("%+.2f"):format(change.high)
    if low:find "^.0.00$" and high:find "^.0.00$" then return nil end
    return ("%s %s mag"):format(column.label, low == high and low or low .. " to " .. high)
  end
  if low == "1" and high == "1" then return nil end
  return ("%s × %s"):format(column.label, low == high and low or low .. " to " .. high)
end

local function over_recipes(study)
  local others = ordered()
  for number, row in ipairs(study.rows) do -- star by star, so that the cases made on the way can go
    local made = {}
    for i, column in ipairs(study.columns) do
      local cell, self = row.cells[i], row.made[column.group_number]
      made[self] = made[self] or {}
      for _, other in ipairs(cell.missing and {} or alternatives(study, self, column)) do
        local changed = by_recipe(self, other, made[self])
        local value = changed and core.raw(changed, column.name)
        if value then
          local of_recipe = at(others, ("%s by %s instead of %s"):format(other.name, other.by, other.instead_of))
          local change = at(of_recipe, column, function() return { asked = 0, names = {}, low = math.huge, high = -math.huge } end)
          add_change(change, column, row, cell, value)
        end
      end
    end
    if number % study.collect_after == 0 then collectgarbage() end
  end
  local said, nothing = {}, {}
  for recipe, changes in each(others) do
    local words = {}
    for column, change in each(changes) do words[#words + 1] = change_words(column, change, study) end
    if #words == 0 then nothing[#nothing + 1] = recipe else said[#said + 1] = recipe .. ": " .. table.concat(words, "; ") end
  end
  if #nothing > 0 then said[#said + 1] = table.concat(nothing, "; ") .. ": no change" end
  return said
end

-- Recipes with their sources; those that templates make for several names stand once.
local function recipes(used)
  local by_source = ordered()
  for name, by in each(used) do
    for _, entry in each(by) do
      local row = entry.relation
      if row and row.kind ~= "definition" and row.kind ~= "assumed" and row.source ~= "definition" then
        local names = at(by_source, text.recipe(row) .. (row.supposes and "; supposes " .. row.supposes or ""))
        at(names, name, function() return true end)
      end
    end
  end
  local said = {}
  for recipe, names in each(by_source) do said[#said + 1] = table.concat(names.keys, ", ") .. " by " .. recipe end
  return said
end

local function assumed(study, used)
  local said = {}
  for name, by in each(used) do
    for _, entry in each(by) do
      local row = entry.relation
      if row and row.kind == "assumed" then
        said[#said + 1] = ("%s = %s (%s)%s"):format(name, row.assumes, text.source(row), row.supposes and ": " .. row.supposes or "")
      end
    end
  end
  return said
end

-- What stands in a verdict's conditions for the structure's name, so that those of rims and gaps are told once.
local function generic(words, name)
  local structure = name:match "^(.-)_resolved_by"
  return structure and words:gsub("%f[%w_]" .. structure .. "_", "…_") or words
end

local function add_criteria(said, used)
  for _, name in ipairs { "array_resolution", "mirror_resolution" } do
    for by, entry in each(used.values[name] or ordered()) do
      if entry.relation then
        local words = equation.plain(entry.relation.equation, function(word) return equation.plain_symbol(core.entry(word).symbol) end)
        at(said, ("%s: %s (%s)"):format(name, words:gsub("%d+%.%d%d%d%d+", function(digits) return format.number(tonumber(digits), 4) end), by))
      end
    end
  end
end

local function meaning_of_verdicts(study, used)
  local said = ordered()
  for _, column in ipairs(study.columns) do
    if column.verdict and used.values[column.name] then
      for _, entry in each(used.values[column.name]) do
        local words = {}
        for i, condition in ipairs(entry.relation and entry.relation.conditions or {}) do
          local c = text.parse_condition(condition)
          words[i] = condition_words(c, c.sign)
        end
        local line = generic(column.name .. ": " .. table.concat(words, ", and "), column.name)
        if entry.relation and entry.relation.unchecked then line = line .. "; not checked: " .. generic(entry.relation.unchecked, column.name) end
        if #words > 0 then at(said, line) end
      end
    end
  end
  if #said.keys > 0 then add_criteria(said, used) end
  return said.keys
end

local function outside_validity(study)
  local found = ordered()
  for_cells(study, function(column, row, _, self)
    for _, step in ipairs(steps_of(study, self, column.group_number, column.name)) do
      for _, outside in ipairs(step.relation and text.outside(self, step.relation) or {}) do
        at(at(found, outside.words), row.name, function() return true end)
      end
    end
  end)
  local said = {}
  for words, names in each(found) do said[#said + 1] = words .. "; outside for " .. named(names.keys, study) end
  return said
end

local function undefined_draws(study)
  local found, asked = ordered(), {}
  for_cells(study, function(column, row, cell)
    asked[row] = (asked[row] or 0) + 1
    if cell.undefined > 0 then
      local columns = at(found, ("%s: %s of draws"):format(row.name, format.percent(cell.undefined)))
      columns.row = row
      columns[#columns + 1] = column
    end
  end)
  local said = {}
  for words, columns in each(found) do
    said[#said + 1] = words .. ", in " .. (#columns == asked[columns.row] and "all that is asked" or labelled(columns))
  end
  return said
end

local function givens_for_all(study)
  local said = {}
  for _, group in ipairs(study.groups) do
    local parts = {}
    for _, name in ipairs(core.names()) do
      if group.own[name] then parts[#parts + 1] = name .. (group.written[name]:find "^from " and " " or " = ") .. group.written[name] end
      if group.objects[name] and not (group.name and study.groups[1].objects[name]) then parts[#parts + 1] = name .. " = " .. tostring(group.objects[name]) end
    end
    if #parts > 0 then said[#said + 1] = (group.name and group.name .. ": " or "") .. table.concat(parts, ", ") end
  end
  return said
end

local function how_far(study)
  local settings = core.settings()
  return {
    ("%d draws, seed %d; shares are of all draws; an error bar is the central 68 %% of them."):format(settings.draws, settings.seed),
    "This estimates geometric feasibility; whether a structure is detected is not assessed. The observatory's own documents and staff decide.",
  }
end

-- The notes of a study, empty ones left out.
function notes.of(study)
  local used = relations_used(study)
  local list = {
    { heading = "Not derived (—)", lines = not_derived(study) },
    { heading = "Why not (yes in less than half of the draws; medians)", lines = why_not(study) },
    { heading = "With another recipe", lines = over_recipes(study) },
    { heading = "Not all targets use the same recipes", lines = unlike_recipes(study, used) },
    { heading = "Outside a recipe's range of validity", lines = outside_validity(study) },
    { heading = "Undefined draws", lines = undefined_draws(study) },
    { heading = "Resolved means", lines = meaning_of_verdicts(study, used) },
    { heading = "Given for all targets", lines = givens_for_all(study) },
    { heading = "Assumed", lines = assumed(study, used) },
    { heading = "Recipes", lines = recipes(used) },
    { heading = "How far this goes", lines = how_far(study) },
  }
  local kept = {}
  for _, note in ipairs(list) do if #note.lines > 0 then kept[#kept + 1] = note end end
  return kept
end

return notes
