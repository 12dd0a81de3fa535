-- SPDX-License-Identifier: GPL-3.0-or-later
-- The targets of a study, from a CSV file or a list of tables, checked: each with its name, its givens (bound to the target, so that
-- adding a star changes no other's draws), its objects and its texts.
--
-- A column's header names a quantity of the glossary with its unit, `distance [pc]`; `distance error [pc]`, or `distance upper error [pc]`
-- and `distance lower error [pc]`, make an error bar of it. A cell may carry its own unit and error bar instead, "156 ± 3 pc"; blank means
-- not given. A column without a unit whose header is far from every name of the glossary is a text, carried along; where it holds a
-- number with a unit, list.doubtful[header] keeps it: it may be a name written otherwise.
local core = ...
local case = core.part "lacuna.case"
local text = core.part "lacuna.text"
local bare = core.part "lacuna.record".bare

local targets = {}

-- Errors start with their place in the file, or with "study:", which study puts the script's line before.
local function complain(form, ...) error(form:format(...), 0) end

-- Calls f; an error of its becomes one at `where`.
local function at(where, f, ...)
  local ok, result = pcall(f, ...)
  if not ok then complain("%s: %s", where, bare(tostring(result))) end
  return result
end

-- Notes a text that reads like a quantity, the first under each header.
local function note_doubt(list, header, cell)
  if list.doubtful[header] or not cell:find "^[%d.].*%a" then return end
  local ok, quantity = pcall(core.reading, cell, header)
  if ok and select(2, core.facts(quantity)) then list.doubtful[header] = cell end
end

-- Headers -------------------------------------------------------------------------------------------------------------------------

local function one_edit_apart(a, b)
  if #a > #b then a, b = b, a end
  if #b - #a > 1 or #b < 4 then return false end
  local i = 1
  while i <= #a and a:byte(i) == b:byte(i) do i = i + 1 end
  if #a < #b then return a:sub(i) == b:sub(i + 1) end
  local swapped = a:sub(i, i) == b:sub(i + 1, i + 1) and a:sub(i + 1, i + 1) == b:sub(i, i)
  return a:sub(i + 1) == b:sub(i + 1) or swapped and a:sub(i + 2) == b:sub(i + 2)
end

-- The name that a word is nearly: written otherwise, a synonym, or with one slip of the finger. ("declination" is not "inclination".)
local function nearly_a_name(word)
  local plain = word:lower():gsub("[%s-]+", "_")
  local name = core.find(word) or core.find(plain)
  if name then return name end
  for _, near in ipairs(core.nearest(plain)) do
    if one_edit_apart(plain, near) then return near end
  end
end

-- "distance upper error [pc]" in parts: "distance", "upper error", "pc".
local function split_header(header)
  local rest, unit = header:match "^(.-)%s*%[%s*(.-)%s*%]$"
  rest = rest or header
  for _, kind in ipairs { "upper error", "lower error", "error" } do
    local name = rest:match("^(.-)%s+" .. kind .. "$")
    if name then return name, kind, unit end
  end
  return rest, "value", unit
end

local function check_unit(column, where)
  local entry = core.entry(column.name)
  if not column.unit then
    if column.kind ~= "value" and entry.unit ~= "1" then complain('%s: an error wants its unit in the header, like "%s [%s]"', where, column.header, entry.unit) end
    return
  end
  local unit = core.unit(column.unit)
  if not unit then complain("%s: unknown unit '%s'", where, column.unit) end
  local _, dimension = core.dimension(unit)
  local _, wanted = core.dimension(core.unit(entry.unit))
  if dimension ~= wanted then at(where, core.given, column.name, unit) end -- which says what is wanted
end

-- What a header stands for: {header, name, kind = "name", "text", "object", "value", "error", "upper error", "lower error", unit}.
local function read_header(header, where)
  if header == "" then complain("%s: a column wants a header", where) end
  if header == "name" then return { header = header, kind = "name" } end
  local word, kind, unit = split_header(header)
  if not unit and header:find "[%[%]]" then complain('%s: a unit stands in brackets at the end, like "distance [pc]"', where) end
  local name, synonym = core.find(word)
  if name and not synonym then
    if core.entry(name).kind == "object" then return { header = header, name = name, kind = "object" } end
    local column = { header = header, name = name, kind = kind, unit = unit }
    check_unit(column, where)
    return column
  end
  if unit or nearly_a_name(word) then complain("%s: %s", where, case.unknown_name(word, "")) end
  return { header = header, kind = "text" }
end

local function column_place(file, line, header) return ('%s:%d: column "%s"'):format(file, line, header) end

local function read_headers(row, file)
  local columns, seen = {}, {}
  for i, header in ipairs(row) do
    local where = column_place(file, row.line, header)
    if not utf8.len(header) then complain("%s:%d: column %d: the header is not UTF-8", file, row.line, i) end
    local column = read_header(header, where)
    local key = column.name and column.name .. " " .. column.kind or header
    if seen[key] then complain("%s: there is a column of that name already", where) end
    seen[key] = column
    columns[i] = column
  end
  if not seen.name then complain('%s:%d: no column "name"; each target wants one', file, row.line) end
  for _, column in ipairs(columns) do
    local function sibling(kind) return seen[column.name .. " " .. kind] end
    local where = column_place(file, row.line, column.header)
    if column.kind:find "error" and not sibling "value" then complain('%s: an error without its value; there is no column "%s"', where, column.name) end
    if column.kind == "error" and (sibling "upper error" or sibling "lower error") then complain("%s: both one error and two-sided errors", where) end
    if column.kind == "upper error" and not sibling "lower error" then complain("%s: an upper error without the lower one", where) end
    if column.kind == "lower error" and not sibling "upper error" then complain("%s: a lower error without the upper one", where) end
  end
  return columns
end

-- Cells ---------------------------------------------------------------------------------------------------------------------------

local function is_number(cell) return cell:find "^[+-]?%d*%.?%d*$" and cell:find "%d" or cell:find "^[+-]?%d*%.?%d*[eE][+-]?%d+$" and cell:find "^[+-]?%.?%d" end

local function in_unit(cell, column) return core.reading(column.unit and column.unit ~= "1" and cell .. " " .. column.unit or cell, column.name) end

-- A cell's value: a number in the header's unit, or a text with its own unit, its own error bar, or both.
local function read_value(cell, column, where)
  if is_number(cell) then return at(where, in_unit, cell, column), false end
  local ok, own = pcall(core.reading, cell, column.name)
  if not ok then
    complain('%s: can\'t read "%s"; write a number%s', where, cell,
      column.unit and (', or one with its error and unit, like "156 ± 3 %s"'):format(column.unit) or " with its unit")
  end
  local _, unit, _, _, _, has_error = core.facts(own)
  if not unit and column.unit then own = at(where, in_unit, cell, column) end
  return own, has_error
end

local function read_error(cell, column, where)
  if not is_number(cell) then complain('%s: can\'t read "%s"; an error is a number in the header\'s unit', where, cell) end
  if tonumber(cell) < 0 then complain("%s: an error can't be negative; got %s", where, cell) end
  return at(where, in_unit, cell, column)
end

-- The value with what stands in its error columns.
local function with_errors(value, upper, lower)
  local function zero(quantity) return select(4, core.facts(quantity)) == 0 end
  if not upper or zero(upper) and zero(lower) then return value end
  if upper == lower then return core.spread_normal(value, upper) end
  return core.spread_lopsided(value, upper, lower)
end

-- One quantity of a row: its value and error cells, by kind, as {cell, column}.
local function read_quantity(cells, place)
  local value, bar = read_value(cells.value.cell, cells.value.column, place(cells.value.column))
  local upper, lower = cells.error or cells["upper error"], cells.error or cells["lower error"]
  if not upper and not lower then return value end
  local one = upper or lower
  if bar then complain("%s: the value has an error bar already, %s", place(one.column), cells.value.cell) end
  if not (upper and lower) then complain("%s: one side of a two-sided error is blank, the other is not", place(one.column)) end
  upper = read_error(upper.cell, upper.column, place(upper.column))
  lower = lower == one and upper or read_error(lower.cell, lower.column, place(lower.column))
  return at(place(one.column), with_errors, value, upper, lower)
end

-- The cells of a row that are not blank: quantities by name and kind; objects and texts go to the target.
local function sort_cells(row, columns, target, place, list)
  local quantities, order = {}, {}
  for i, column in ipairs(columns) do
    local cell = row[i]
    if not utf8.len(cell) or cell:find "\0" then complain("%s: the cell is not UTF-8 text", place(column)) end
    if column.kind == "name" then target.name = cell
    elseif column.kind == "text" then
      target.texts[column.header] = cell
      note_doubt(list, column.header, cell)
    elseif column.kind == "object" then target.objects[column.name] = cell ~= "" and core.part "lacuna.objects".take(column.name, cell) or nil
    elseif cell ~= "" then
      if not quantities[column.name] then order[#order + 1] = column.name end
      quantities[column.name] = quantities[column.name] or {}
      quantities[column.name][column.kind] = { cell = cell, column = column }
    end
  end
  return quantities, order
end

local function read_row(row, columns, file, list)
  local target = { where = ("%s:%d"):format(file, row.line), givens = {}, written = {}, objects = {}, texts = {} }
  local function place(column) return column_place(file, row.line, column.header) end
  local quantities, order = sort_cells(row, columns, target, place, list)
  if target.name == "" then complain('%s:%d: column "name": a target wants a name', file, row.line) end
  for _, name in ipairs(order) do
    local cells = quantities[name]
    if not cells.value then
      local one = cells.error or cells["upper error"] or cells["lower error"]
      complain("%s: an error without its value; got %s", place(one.column), one.cell)
    end
    local value = read_quantity(cells, place)
    target.written[name] = text.as_written(name, value)
    target.givens[name] = at(place(cells.value.column), core.given, name, value, target.name)
  end
  return target
end

local function check_fields(row, columns, file)
  if #row < #columns then
    complain('%s:%d: column "%s": the row has %d field%s, the header %d', file, row.line, columns[#row + 1].header, #row, #row == 1 and "" or "s", #columns)
  end
  if #row > #columns then complain("%s:%d: column %d: the row has %d fields, the header %d", file, row.line, #columns + 1, #row, #columns) end
end

-- Spreadsheets write such rows below the last one.
local function is_blank(row)
  for _, cell in ipairs(row) do
    if cell ~= "" then return false end
  end
  return true
end

local function from_file(file, path, text)
  local ok, rows = pcall(core.read_csv, path, file, text)
  if not ok then complain("%s", bare(rows)) end
  if #rows == 0 then complain("%s: the file is empty; its first line names the columns", file) end
  local list, names = { texts = {}, places = {}, doubtful = {} }, {}
  local columns = read_headers(rows[1], file)
  for _, column in ipairs(columns) do
    if column.kind == "text" then list.texts[#list.texts + 1] = column.header end
    if column.name then list.places[column.name] = list.places[column.name] or column_place(file, rows[1].line, column.header) end
  end
  for i = 2, #rows do
    if not is_blank(rows[i]) then
      check_fields(rows[i], columns, file)
      local target = read_row(rows[i], columns, file, list)
      if names[target.name] then complain('%s:%d: column "name": there is a target "%s" already, in line %d', file, rows[i].line, target.name, names[target.name]) end
      names[target.name] = rows[i].line
      list[#list + 1] = target
    end
  end
  list.input = { name = file, path = path, text = text }
  if #list == 0 then complain("%s: no targets; the file has a header line alone", file) end
  return list
end

-- Lists of tables -----------------------------------------------------------------------------------------------------------------

local function take_field(target, word, value, list)
  local name, synonym = core.find(word)
  if name and not synonym then
    if core.entry(name).kind == "object" then target.objects[name] = core.part "lacuna.objects".take(name, value)
    else
      target.givens[name] = at(target.where, core.given, name, value, target.name)
      target.written[name] = text.as_written(name, value)
      list.places[name] = list.places[name] or target.where
    end
  elseif type(value) == "string" and not nearly_a_name(word) then
    if not list.has_text[word] then
      list.has_text[word] = true
      list.texts[#list.texts + 1] = word
    end
    target.texts[word] = value
    note_doubt(list, word, value)
  else
    complain("%s: %s", target.where, case.unknown_name(word, ""))
  end
end

local function from_list(given)
  local list, names = { texts = {}, places = {}, has_text = {}, doubtful = {} }, {}
  for i, fields in ipairs(given) do
    if type(fields) ~= "table" then error(("study: target %d wants a table {name = ..., distance = ...}; got %s"):format(i, type(fields)), 0) end
    local name = fields.name
    if type(name) ~= "string" or name == "" then error(("study: target %d wants name = a text; got %s"):format(i, tostring(name)), 0) end
    if names[name] then error(('study: there are two targets "%s", %d and %d'):format(name, names[name], i), 0) end
    names[name] = i
    local target = { name = name, where = ('study: target "%s"'):format(name), givens = {}, written = {}, objects = {}, texts = {} }
    for _, word in ipairs(case.sorted_keys(fields)) do
      if type(word) ~= "string" then error(("%s: wants name = value; got the value %s without a name"):format(target.where, tostring(fields[word])), 0) end
      if word ~= "name" then take_field(target, word, fields[word], list) end
    end
    list[i] = target
  end
  table.sort(list.texts)
  if #list == 0 then error("study: the list of targets is empty", 0) end
  return list
end

-- The targets of a study. `find_file` says where a file of that name stands.
function targets.read(given, find_file)
  if type(given) == "string" then return from_file(given, find_file(given)) end
  if type(given) == "table" then return from_list(given) end
  error("study wants targets = the name of a CSV file, or a list of tables; got " .. type(given), 0)
end

return targets
