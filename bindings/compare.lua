-- SPDX-License-Identifier: GPL-3.0-or-later
-- compare(case, {name = {changes}, ...}, {asks}): variants of a case side by side. A column is the case as it is or a variant; the first rows
-- are the givens and recipes that the variants change, then what is asked; what differs from the case as it is has a mark.
local core = ...
local case = core.part "lacuna.case"
local conditions = core.part "lacuna.conditions"
local format = core.part "lacuna.format"
local records = core.part "lacuna.record"
local tables = core.part "lacuna.table"
local text = core.part "lacuna.text"

local MARK, NO_BREAK = "*", "\u{a0}"
local AS_IT_IS = "as it is" -- the first column

-- What is wanted ---------------------------------------------------------------------------------------------------------------------

local function refuse(pattern, ...) core.raise("compare" .. pattern:format(...)) end

-- The variants as a list of {name, changes}: in the order of a list {{name = ..., ...}, ...}, or of a table {name = {...}} by name.
local function read_variants(variants)
  local wanted = " wants the variants in a table, like {longer = {projected_baseline = \"300 m\"}}; got %s"
  if type(variants) ~= "table" then refuse(wanted, core.shown(variants)) end
  local list, seen = {}, {}
  for _, key in ipairs(variants[1] ~= nil and variants or case.sorted_keys(variants)) do
    local name, changes = key, variants[key]
    if type(key) == "table" then
      name, changes = key.name, {}
      for word, value in pairs(key) do if word ~= "name" then changes[word] = value end end
      if type(name) ~= "string" then refuse(": a variant in a list wants name = a text; variant %d has %s", #list + 1, core.shown(name)) end
    end
    if type(name) ~= "string" or name == "" then refuse(wanted, core.shown(name)) end
    if type(changes) ~= "table" then refuse(': variant "%s" wants a table of changes, like {projected_baseline = "300 m"}; got %s', name, core.shown(changes)) end
    if name == "rows" or name == AS_IT_IS then refuse(': a variant can\'t be called "%s", which the result has already', name) end
    if seen[name] then refuse(': there are two variants "%s"', name) end
    seen[name] = true
    list[#list + 1] = { name = name, changes = changes }
  end
  if #list == 0 then refuse " wants at least one variant, like {longer = {projected_baseline = \"300 m\"}}" end
  return list
end

local function read_asks(asks)
  local example = "like {\"gap_width_angle\", \"gap_resolved_by_array\"}"
  if type(asks) == "string" then asks = { asks } end
  if type(asks) ~= "table" then refuse(" wants a list of the names to ask, %s; got %s", example, core.shown(asks)) end
  local names, seen = {}, {}
  for _, word in ipairs(asks) do
    local name = case.name_of(word, "compare: ")
    if core.entry(name).kind == "object" then refuse(": %s is an object; there is nothing to derive", name) end
    if not seen[name] then names[#names + 1], seen[name] = name, true end
  end
  if #names == 0 then refuse(" wants at least one name to ask, %s", example) end
  return names
end

-- The case with a variant's changes: givens, and recipes in using = {...}.
local function changed_case(self, variant)
  local givens, using = {}, variant.changes.using
  for word, value in pairs(variant.changes) do if word ~= "using" then givens[word] = value end end
  if using ~= nil and type(using) ~= "table" then refuse(': variant "%s": using wants a table like {array_resolution = "fringe"}; got %s', variant.name, core.shown(using)) end
  local ok, made = pcall(function()
    local with = next(givens) == nil and self or self:with(givens)
    return using and with:using(using) or with
  end)
  if ok then return made end
  if type(made) ~= "string" then error(made, 0) end
  refuse(': variant "%s": %s', variant.name, records.bare(made))
end

-- Rows -------------------------------------------------------------------------------------------------------------------------------

-- The text less the unit that the row's label tells; undefined draws stay said.
local function without_unit(written, unit)
  if unit ~= "" and written:sub(-#unit - 1) == " " .. unit then return written:sub(1, -#unit - 2) end
  return written
end

local function given_cell(made, name)
  local info = core.info(made)
  local value = info.givens[name] or info.objects[name]
  local row = not value and core.row_of(made, name)
  if not value and not row then return { text = "not given", word = true } end
  if not value then
    value = core.raw(made, name)
    return { text = without_unit(text.brief(value), text.unit_of(name)), tail = core.row(row).kind == "assumed" and " assumed" or " derived", value = value }
  end
  return { text = without_unit(info.written[name] or text.brief(value), text.unit_of(name)), value = value }
end

local function recipe_cell(made, name)
  local row = core.row_of(made, name)
  return { text = row and core.row(row).by or row == false and "given" or "—", word = true }
end

local function answer_cell(made, name)
  local quantity = core.raw(made, name)
  if quantity and #text.axes(quantity) > 0 then return { text = without_unit(text.brief(quantity), text.unit_of(name)), value = quantity } end
  local cell = records.cell_of(made, name, core.entry(name).kind == "verdict")
  cell.text = tables.cell_text(cell)
  if (cell.undefined or 0) > 0 then cell.text = cell.text .. (" (%s undefined)"):format(format.percent(cell.undefined)) end
  return { text = cell.text, value = quantity, missing = cell.reason }
end

-- Makes one row: a cell for each column, marked where it differs from the first's as printed.
local function new_row(kind, name, columns, cell_of)
  local row = { kind = kind, name = name, unit = kind ~= "recipe" and text.unit_of(name) or "", cells = {}, values = {}, differs = false }
  for i, column in ipairs(columns) do
    local cell = cell_of(column.case, name)
    if i > 1 and (cell.text ~= row.cells[1].text or cell.tail ~= row.cells[1].tail) then cell.mark, row.differs = MARK, true end
    row.cells[i], row.values[column.name] = cell, cell.value
  end
  return row
end

-- What the variants change, in glossary order: names of givens, names in using.
local function changed_names(variants)
  local givens, recipes = {}, {}
  for _, variant in ipairs(variants) do
    for word, value in pairs(variant.changes) do
      if word ~= "using" then givens[word] = true
      else
        for name in pairs(value) do recipes[name] = true end
      end
    end
  end
  local lists = { {}, {} }
  for _, name in ipairs(core.names()) do
    if givens[name] then table.insert(lists[1], name) end
    if recipes[name] then table.insert(lists[2], name) end
  end
  return lists[1], lists[2]
end

-- Notes ------------------------------------------------------------------------------------------------------------------------------

-- The conditions of a verdict that fail, all or some of the draws, in one text; nil where none does.
local function failing_in(made, name)
  local parts = {}
  for _, c in ipairs((conditions.of(made, name))) do
    if not c.holds then parts[#parts + 1] = conditions.text(c) end
  end
  return #parts > 0 and table.concat(parts, "; ") or nil
end

-- Verdicts that are not yes in all draws, each with the conditions that fail, columns of the same ones together.
local function failing(columns, asks)
  local lines = {}
  for _, name in ipairs(asks) do
    local line, at = { name }, {}
    for _, column in ipairs(core.entry(name).kind == "verdict" and columns or {}) do
      local reason = core.row_of(column.case, name) and failing_in(column.case, name)
      if reason and at[reason] then line[at[reason]][1] = line[at[reason]][1] .. ", " .. column.name
      elseif reason then
        at[reason] = #line + 1
        line[at[reason]] = { column.name, reason }
      end
    end
    for i = 2, #line do line[i] = line[i][1] .. ": " .. line[i][2] end
    if #line > 1 then lines[#lines + 1] = line end
  end
  return lines
end

local function not_derived(columns, rows)
  local lines = {}
  for _, row in ipairs(rows) do
    for i, column in ipairs(columns) do
      if row.cells[i].missing then lines[#lines + 1] = ("%s: %s, %s"):format(column.name, row.name, row.cells[i].missing) end
    end
  end
  return lines
end

-- Recipes along the chains of what is asked that a variant changes without being told to by name.
local function other_recipes(columns, variants, asks)
  local lines = {}
  for i, variant in ipairs(variants) do
    local made, along = columns[i + 1].case, {}
    for _, name in ipairs(asks) do
      for _, step in ipairs(core.steps(made, name)) do along[step.name] = true end
    end
    for _, change in ipairs(case.changed_recipes(columns[1].case, made)) do
      if along[change.name] and not (variant.changes.using or {})[change.name] then
        lines[#lines + 1] = ("%s: %s now by %s, before by %s"):format(variant.name, change.name, change.after, change.before)
      end
    end
  end
  return lines
end

-- The whole --------------------------------------------------------------------------------------------------------------------------

local function label(row)
  local name = row.kind == "recipe" and row.name .. " by" or row.name
  return (row.differs and MARK or " ") .. " " .. name .. (row.unit ~= "" and " [" .. row.unit .. "]" or "")
end

local function as_text(columns, rows, notes)
  local whole = { columns = {}, rows = {}, notes = notes }
  for i, column in ipairs(columns) do whole.columns[i] = { heading = i == 1 and column.name:gsub(" ", NO_BREAK) or column.name } end
  local last
  for i, row in ipairs(rows) do
    whole.rows[i] = { name = label(row), cells = row.cells, rule = row.kind == "answer" and last ~= "answer" and i > 1 }
    last = row.kind
  end
  return tables.text(whole)
end

local function compare(self, variants, asks)
  if not core.is_case(self) then
    refuse(' wants a case first, like compare(c, {longer = {projected_baseline = "300 m"}}, {"rim_elements_by_array"}); got %s', core.shown(self))
  end
  variants, asks = read_variants(variants), read_asks(asks)
  local columns, result, rows = { { name = AS_IT_IS, case = self } }, {}, {}
  for i, variant in ipairs(variants) do
    columns[i + 1] = { name = variant.name, case = changed_case(self, variant) }
    result[variant.name] = columns[i + 1].case
  end
  local givens, recipes = changed_names(variants)
  for _, name in ipairs(givens) do rows[#rows + 1] = new_row("given", name, columns, given_cell) end
  for _, name in ipairs(recipes) do rows[#rows + 1] = new_row("recipe", name, columns, recipe_cell) end
  local answers = {}
  for i, name in ipairs(asks) do
    answers[i] = new_row("answer", name, columns, answer_cell)
    rows[#rows + 1] = answers[i]
  end
  local notes = {}
  local function note(heading, lines) if #lines > 0 then notes[#notes + 1] = { heading = heading, lines = lines } end end
  note("Recipes that change with the givens", other_recipes(columns, variants, asks))
  note("Why not", failing(columns, asks))
  note("Not derived (—)", not_derived(columns, answers))
  result.rows = rows
  return setmetatable(result, { __name = "comparison", __tostring = function() return as_text(columns, rows, notes) end })
end

return { compare = compare }
