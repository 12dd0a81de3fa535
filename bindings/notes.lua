-- SPDX-License-Identifier: GPL-3.0-or-later
-- What stands below a study's table: what could not be derived, why a verdict is no, what other recipes would change, the recipes
-- with their sources, what is assumed and supposed, and how far the answer goes. Each note is { heading, lines }. All comes from the
-- targets' records: no case is needed.
local core = ...
local changes = core.part "lacuna.changes"
local conditions = core.part "lacuna.conditions"
local english = core.part "lacuna.english"
local equation = core.part "lacuna.equation"
local format = core.part "lacuna.format"
local ordered = core.part "lacuna.ordered"
local relations = core.part "lacuna.relations"
local verdicts = core.part "lacuna.verdicts"

local notes = {}
local at, each, note = ordered.at, ordered.each, ordered.note

local MOST_NAMES = 20 -- beyond, the table says which

-- "Marrow 3, Quillon A"; "all targets"; "all targets but Marrow 3"; "44 of the 60 targets".
local function named(names, study)
  local missing, has = {}, {}
  for _, name in ipairs(names) do has[name] = true end
  for _, row in ipairs(study.rows) do if not has[row.name] then missing[#missing + 1] = row.name end end
  if #study.rows > 1 and #missing == 0 then return "all targets" end
  if #study.rows > 4 and #missing <= 2 then return "all targets but " .. table.concat(missing, " and ") end
  if #names > MOST_NAMES then return ("%d of the %d targets"):format(#names, #study.rows) end
  return table.concat(names, ", ")
end

-- "1 au, 5 au: gap_size_angle, gap_resolved_by_array" of the columns that share something.
local function labelled(columns)
  local by_names = ordered.new()
  local names_of = ordered.new()
  for _, column in ipairs(columns) do
    local group = column.group or ""
    local names = at(names_of, group)
    note(names, column.name)
  end
  for group, names in each(names_of) do
    local groups = at(by_names, table.concat(names.keys, ", "))
    note(groups, group)
  end
  local said = {}
  for names, groups in each(by_names) do
    local which = table.concat(groups.keys, ", ")
    said[#said + 1] = (which ~= "" and which .. ": " or "") .. names
  end
  return table.concat(said, "; ")
end

-- What the records say ----------------------------------------------------------------------------------------------------------------

-- Calls visit(column, row, cell) for each cell that has a value.
local function for_cells(study, visit)
  for i, column in ipairs(study.columns) do
    for _, row in ipairs(study.rows) do
      if not row.cells[i].missing then visit(column, row, row.cells[i]) end
    end
  end
end

local function relation_by(name, by)
  for _, number in ipairs(core.entry(name).rows) do
    local row = core.row(number)
    if row.by == by then return row end
  end
end

-- The steps that a cell's text tells, as { name, by } in turn: read once for all cells with the same.
local function steps_of(texts, text)
  if not texts[text] then
    local steps = {}
    for name, by in text:gmatch "([%w_]+) ([%w_]+)" do steps[#steps + 1] = { name = name, by = by } end
    texts[text] = steps
  end
  return texts[text]
end

-- The relations used: name -> recipe ("given" without one) -> { relation, targets }, in the order of the glossary; in one group alone, if that is said.
function notes.relations_used(study, group)
  local used, texts = {}, {}
  for_cells(study, function(column, row, cell)
    if group and column.group ~= group.name then return end
    for _, step in ipairs(steps_of(texts, cell.steps)) do
      local recipes = used[step.name] or ordered.new()
      used[step.name] = recipes
      local entry = recipes.values[step.by]
      if not entry then
        entry = at(recipes, step.by)
        entry.relation = step.by ~= "given" and relation_by(step.name, step.by) or nil
      end
      if not entry.values[row.name] then note(entry, row.name) end
    end
  end)
  local in_order = ordered.new()
  for _, name in ipairs(core.names()) do
    if used[name] then in_order.keys[#in_order.keys + 1], in_order.values[name] = name, used[name] end
  end
  return in_order
end

-- The notes ---------------------------------------------------------------------------------------------------------------------------

local function not_derived(study)
  local reasons = ordered.new()
  for i, column in ipairs(study.columns) do
    for _, row in ipairs(study.rows) do
      local cell = row.cells[i]
      if cell.missing and not cell.failed then
        local key = cell.reason .. "\0" .. row.name
        local entry = at(reasons, key)
        entry.reason, entry.name = cell.reason, row.name
        entry[#entry + 1] = column
      end
    end
  end
  local lines = ordered.new() -- the same reason of the same columns for several targets: once
  for _, entry in each(reasons) do
    local line = at(lines, entry.reason .. ": " .. labelled(entry))
    line[#line + 1] = entry.name
  end
  local said = {}
  for line, names in each(lines) do said[#said + 1] = named(names, study) .. ", " .. line end
  return said
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

local function failed_targets(study)
  local said = {}
  for _, row in ipairs(study.rows) do
    if row.failed then said[#said + 1] = ("%s: %s"):format(row.name, row.failed) end
  end
  return said
end

local function why_not(study)
  local columns = ordered.new()
  for_cells(study, function(column, row, cell)
    for _, c in ipairs(cell.failing or {}) do
      local reason = at(at(columns, column.label), c.words)
      reason[#reason + 1] = { name = row.name, value = c.left }
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

-- Where targets differ within a group; what its `using` or its givens change for all of them is no such difference.
local function unlike_recipes(study)
  local mixed = ordered.new()
  for _, group in ipairs(study.groups) do
    for name, recipes in each(notes.relations_used(study, group)) do
      for by, targets in each(#recipes.keys > 1 and recipes or ordered.new()) do
        local all = at(at(mixed, name), by)
        for _, target in ipairs(targets.keys) do note(all, target) end
      end
    end
  end
  local said = {}
  for name, recipes in each(mixed) do
    local parts = {}
    for by, targets in each(recipes) do
      parts[#parts + 1] = (by == "given" and "given for " or by:gsub("_", " ") .. " for ") .. named(targets.keys, study)
    end
    said[#said + 1] = name .. ": " .. table.concat(parts, "; ")
  end
  return said
end

local function change_words(column, change, study)
  if column.verdict then
    if #change.names == 0 then return nil end
    return ("%s changes for %d of %d (%s)"):format(column.label, #change.names, change.asked, named(change.names, study))
  end
  local span = changes.span(column, change)
  return span and ("%s %s%s"):format(column.label, column.unit == "mag" and "" or "× ", span)
end

local function over_recipes(study)
  local others = ordered.new()
  for i, column in ipairs(study.columns) do
    for _, change in ipairs(changes.of(study, i)) do
      local words = at(others, change.words)
      words[#words + 1] = change_words(column, change, study)
    end
  end
  local said, nothing = {}, {}
  for recipe, words in each(others) do
    if #words == 0 then nothing[#nothing + 1] = recipe else said[#said + 1] = recipe .. ": " .. table.concat(words, "; ") end
  end
  if #nothing > 0 then said[#said + 1] = table.concat(nothing, "; ") .. ": no change" end
  return said
end

-- Recipes with their sources; those that templates make for several names stand once.
local function recipes(used)
  local by_source = ordered.new()
  for name, by in each(used) do
    for _, entry in each(by) do
      local row = entry.relation
      if row and row.kind ~= "definition" and row.kind ~= "assumed" and row.source ~= "definition" then
        local names = at(by_source, relations.recipe(row) .. (row.supposes and "; supposes " .. row.supposes or ""))
        note(names, name)
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
        said[#said + 1] = ("%s = %s (%s)%s"):format(name, row.assumes, relations.source(row), row.supposes and ": " .. row.supposes or "")
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
    for by, entry in each(used.values[name] or ordered.new()) do
      if entry.relation then
        local words = equation.plain(entry.relation.equation, relations.symbol)
        note(said, ("%s: %s (%s)"):format(name, format.shortened(words), by))
      end
    end
  end
end

local function meaning_of_verdicts(study, used)
  local said = ordered.new()
  for _, column in ipairs(study.columns) do
    if column.verdict and used.values[column.name] then
      for _, entry in each(used.values[column.name]) do
        local words = {}
        for i, c in ipairs(conditions.of_row(entry.relation)) do words[i] = conditions.words(c, c.sign) end
        local line = generic(column.name .. ": " .. table.concat(words, ", and "), column.name)
        if entry.relation and entry.relation.unchecked then line = line .. "; not checked: " .. generic(entry.relation.unchecked, column.name) end
        if #words > 0 then note(said, line) end
      end
    end
  end
  if #said.keys > 0 then add_criteria(said, used) end
  return said.keys
end

local function outside_validity(study)
  local found = ordered.new()
  for_cells(study, function(_, row, cell)
    for _, words in ipairs(cell.outside or {}) do note(at(found, words), row.name) end
  end)
  local said = {}
  for words, names in each(found) do said[#said + 1] = words .. "; outside for " .. named(names.keys, study) end
  return said
end

local function undefined_draws(study)
  local found, asked = ordered.new(), {}
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

-- Texts that may have been meant as givens.
local function doubtful_texts(study)
  local said = {}
  for _, header in ipairs(study.texts) do
    local cell = study.doubtful and study.doubtful[header]
    if cell then
      local near = core.nearest((header:lower():gsub("[%s-]+", "_")))
      said[#said + 1] = ('%s: "%s" reads like a quantity, but no name of the glossary is called so%s'):format(header, cell,
        #near > 0 and "; near it are " .. table.concat(near, ", ") or "")
    end
  end
  return said
end

-- "distance = 120 pc, band = H"; what is set on the command line stands in a note of its own.
local function givens_in_words(givens, written, objects, set)
  local parts = {}
  for _, name in ipairs(core.names()) do
    if not (set.givens[name] or set.objects[name]) then
      if givens[name] then parts[#parts + 1] = name .. (written[name]:find "^from " and " " or " = ") .. written[name] end
      if objects[name] then parts[#parts + 1] = name .. " = " .. tostring(objects[name]) end
    end
  end
  return table.concat(parts, ", ")
end

local nothing_set = { givens = {}, objects = {} }

local function set_on_command_line(study)
  local words = givens_in_words(study.set.givens, study.set.written, study.set.objects, nothing_set)
  return words ~= "" and { words .. "; before what the study says" } or {}
end

-- "rim_resolved_by_array: from 95 m up for Marrow 3, ..." for a study along one sweep.
local function where_verdicts_turn(study)
  local sweep = study.sweeps and #study.sweeps == 1 and study.sweeps[1]
  if not sweep then return {} end
  local columns = ordered.new()
  for_cells(study, function(column, row, cell)
    if not cell.shares then return end
    local value, up = verdicts.turns_at(cell, sweep)
    local words = value and ("%s %s"):format(up and "from" or "up to", format.with_unit(format.number(value, 3), sweep.unit_text))
      or cell.shares[1] >= 0.5 and "all along" or "nowhere"
    table.insert(at(at(columns, column.label), words), row.name)
  end)
  local said = {}
  for label, words in each(columns) do
    local parts = { label }
    for where, names in each(words) do parts[#parts + 1] = where .. " for " .. named(names, study) end
    said[#said + 1] = #parts > 3 and { label, table.concat(parts, ", ", 2) } or parts
  end
  return said
end

local function along_sweeps(study)
  local said = {}
  for _, sweep in ipairs(study.sweeps or {}) do
    said[#said + 1] = ("%s from %s to %s, %d points"):format(sweep.name, format.number(sweep.values[1]),
      format.with_unit(format.number(sweep.values[#sweep.values]), sweep.unit_text), #sweep.values)
  end
  return #said > 0 and { table.concat(said, " and ") .. "; the table shows the lowest … the highest value along it, the CSV file each point" } or {}
end

local function givens_for_all(study)
  local said = {}
  for _, group in ipairs(study.groups) do
    local objects = {}
    for name, object in pairs(group.objects) do
      if not (group.name and study.groups[1].objects[name]) then objects[name] = object end
    end
    local words = givens_in_words(group.own, group.written, objects, study.set)
    local parts = words ~= "" and { words } or {}
    for _, name in ipairs(core.names()) do if group.chosen[name] then parts[#parts + 1] = name .. " by " .. group.chosen[name] end end
    if #parts > 0 then said[#said + 1] = (group.name and group.name .. ": " or "") .. table.concat(parts, ", ") end
  end
  return said
end

local function how_far(study)
  local settings = core.settings()
  return {
    ("%d draws, seed %d; shares are of all draws; an error bar is the central 68 %% of them."):format(settings.draws, settings.seed),
    "This estimates geometric feasibility; whether a structure is detected is not assessed. " .. english.WHO_DECIDES,
  }
end

-- What a verdict's yes means in a study.
function notes.criteria(study) return meaning_of_verdicts(study, notes.relations_used(study)) end

-- The notes of a study, empty ones left out.
function notes.of(study)
  local used = notes.relations_used(study)
  local list = {
    { heading = "Shown", lines = study.selected and { ("%d of %d targets: %s"):format(#study.rows, study.selected.of, study.selected.words) } or {} },
    { heading = "Failed", lines = failed_targets(study) },
    { heading = "Carried along as texts, not used", lines = doubtful_texts(study) },
    { heading = "Not derived (—)", lines = not_derived(study) },
    { heading = "Why not (yes in less than half of the draws; medians)", lines = why_not(study) },
    { heading = "Along a sweep", lines = along_sweeps(study) },
    { heading = "Yes in half of the draws and more", lines = where_verdicts_turn(study) },
    { heading = "With another recipe", lines = over_recipes(study) },
    { heading = "Not all targets use the same recipes", lines = unlike_recipes(study) },
    { heading = "Outside a recipe's range of validity", lines = outside_validity(study) },
    { heading = "Undefined draws", lines = undefined_draws(study) },
    { heading = "Resolved means", lines = meaning_of_verdicts(study, used) },
    { heading = "Set on the command line", lines = set_on_command_line(study) },
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
