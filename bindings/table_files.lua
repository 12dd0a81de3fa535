-- SPDX-License-Identifier: GPL-3.0-or-later
-- Tables of results as files: CSV, and Markdown; and their columns as fields, from which CSV and FITS are written. table.lua says what a table is.
local core = ...
local csv = core.part "lacuna.csv"
local english = core.part "lacuna.english"
local format = core.part "lacuna.format"
local tables = core.part "lacuna.table"

local files = {}
local cell_text, digits, on_one_line = tables.cell_text, csv.digits, tables.on_one_line

-- Fields ----------------------------------------------------------------------------------------------------------------------------

-- What VOUnits and the FITS standard have no unit for, in the nearest that they have.
local standard_units = { Msun = { "solMass" }, Rsun = { "solRad" }, Lsun = { "solLum" }, Mjup = { "solMass" }, Mearth = { "solMass" }, Rjup = { "solRad" }, Rearth = { "solRad" } }

-- A unit as VOUnits has it, and how many of these one of it is: 1 Msun/yr is 1 solMass/yr. nil for plain numbers.
local function standard_unit(unit)
  if unit == "1" then return nil, 1 end
  local written = unit:gsub("%a+", function(word) return standard_units[word] and standard_units[word][1] end)
  return written, core.unit_facts(unit) / core.unit_facts(written)
end

-- A cell's value, upper and lower error as texts.
local function number_fields(cell, scale)
  if not cell.value then return "", "", "" end
  if not cell.upper then return digits(cell.value * scale), "", "" end
  return format.rounded(cell.value * scale, cell.upper * scale, cell.lower * scale)
end

-- The points of a grid over sweeps, the last running fastest: each a list of places, one a sweep.
local function grid_of(sweeps)
  local points = { {} }
  for _, sweep in ipairs(sweeps) do
    local longer = {}
    for _, point in ipairs(points) do
      for place = 1, #sweep.values do longer[#longer + 1] = table.move(point, 1, #point, 1, {}) longer[#longer][#point + 1] = place end
    end
    points = longer
  end
  return points
end

-- A cell at one point of the grid: along each of its own axes, in their order, the sweep's place.
function files.at_point(cell, sweeps, point)
  if not cell.axes then return cell end
  local index = 0
  for _, name in ipairs(cell.axes) do
    for i, sweep in ipairs(sweeps) do
      if sweep.name == name then index = index * #sweep.values + point[i] - 1 end
    end
  end
  index = index + 1
  if cell.shares then return { share = cell.shares[index] } end
  return { value = cell.values[index], upper = cell.uppers and cell.uppers[index], lower = cell.lowers and cell.lowers[index] }
end

-- The columns of a file of numbers, one line a target, along sweeps one a target and point: each { name, group, part = what it is of the column
-- (nil for its value), unit in VOUnits or nil, texts = true of texts, entry of the glossary (none of names and texts), and one text a line }.
-- A verdict has its words and its share of the draws.
function files.fields(whole)
  local fields, sweeps, lines = {}, whole.sweeps or {}, {}
  for _, row in ipairs(whole.rows) do
    for _, point in ipairs(grid_of(sweeps)) do lines[#lines + 1] = { row = row, point = point } end
  end
  local function add(field, text_of)
    for i, line in ipairs(lines) do field[i] = text_of(line.row, line.point) end
    fields[#fields + 1] = field
  end
  add({ name = "name", texts = true }, function(row) return row.name end)
  for _, text in ipairs(whole.texts) do add({ name = text, texts = true }, function(row) return row.texts[text] or "" end) end
  for i, sweep in ipairs(sweeps) do
    local unit, scale = standard_unit(sweep.unit)
    add({ name = sweep.name, unit = unit, entry = core.entry(sweep.name) }, function(_, point) return digits(sweep.values[point[i]] * scale) end)
  end
  for number, column in ipairs(whole.columns) do
    local unit, scale = standard_unit(column.unit)
    local function part(what, texts, text_of)
      add({ name = column.name, group = column.group, part = what, unit = unit, texts = texts, entry = column.entry }, function(row, point)
        return text_of(files.at_point(row.cells[number], sweeps, point))
      end)
    end
    if column.verdict then
      part("verdict", true, function(cell) return cell.missing and "" or cell_text(cell) end)
      part("share", false, function(cell) return digits(cell.share) end)
    else
      part(nil, false, function(cell) return (number_fields(cell, scale)) end)
      part("upper error", false, function(cell) return (select(2, number_fields(cell, scale))) end)
      part("lower error", false, function(cell) return (select(3, number_fields(cell, scale))) end)
    end
  end
  return fields
end

-- One line a target and point: its texts, then a value, an upper and a lower error a column, or the words and the share of a verdict.
function files.csv(whole)
  local fields, header, lines = files.fields(whole), {}, {}
  for i, field in ipairs(fields) do
    header[i] = (field.group and field.group .. " " or "") .. field.name .. (field.part and " " .. field.part or "") .. (field.unit and " [" .. field.unit .. "]" or "")
    for line, text in ipairs(field) do
      lines[line] = lines[line] or {}
      lines[line][i] = text
    end
  end
  return csv.of(header, lines)
end

-- Markdown --------------------------------------------------------------------------------------------------------------------------

local function markdown_cell(text) return (on_one_line(text):gsub("[\\|`*_<>%[%]]", "\\%0")) end

-- A pipe table, as most readers of Markdown show it; group and unit stand in the headings.
function files.markdown(whole)
  local function line(cells) return "| " .. table.concat(cells, " | ") .. " |" end
  local headings, rules, lines = { "Star" }, { "---" }, {}
  for _, text in ipairs(whole.texts) do headings[#headings + 1], rules[#rules + 1] = markdown_cell(text), "---" end
  for _, column in ipairs(whole.columns) do
    local words = (column.group and column.group .. ": " or "") .. english.words_of(column.name) .. (column.unit_text ~= "" and " (" .. column.unit_text .. ")" or "")
    headings[#headings + 1], rules[#rules + 1] = markdown_cell(words), "---:"
  end
  if whole.title then lines[1] = "**" .. markdown_cell(whole.title) .. "**\n" end
  lines[#lines + 1] = line(headings)
  lines[#lines + 1] = line(rules)
  for _, row in ipairs(whole.rows) do
    local cells = { markdown_cell(row.name) }
    for _, text in ipairs(whole.texts) do cells[#cells + 1] = markdown_cell(row.texts[text] or "") end
    for _, cell in ipairs(row.cells) do cells[#cells + 1] = cell_text(cell) end
    lines[#lines + 1] = line(cells)
  end
  for _, note in ipairs(whole.notes) do
    lines[#lines + 1] = "\n**" .. markdown_cell(note.heading) .. "**\n"
    for _, one in ipairs(note.lines) do
      lines[#lines + 1] = "- " .. markdown_cell(type(one) == "string" and one or one[1])
      for i = 2, type(one) == "table" and #one or 0 do lines[#lines + 1] = "  - " .. markdown_cell(one[i]) end
    end
  end
  return table.concat(lines, "\n") .. "\n"
end

return files
