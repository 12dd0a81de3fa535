-- SPDX-License-Identifier: GPL-3.0-or-later
-- Tables of results as aligned text, CSV, Markdown and LaTeX (booktabs). A table is
--
--   { title = text or nil, texts = { headers of the texts carried along }, columns = {...}, rows = {...}, notes = {...} }
--
-- with columns { name (or heading = a text as it stands), entry = row of the glossary, verdict, group = heading over it or nil, unit (VOUnits), unit_text, unit_tex,
-- left = true for texts that begin below each other },
-- rows { name, texts, cells, rule = true for a rule above it }, cells { share } of a verdict or { value, upper, lower } in the column's unit (no errors: a single
-- number) or { missing = true } or { text }, or along sweeps as in record.lua (then the table has sweeps = { { name, unit, values } }), word = true where a text has no place below
-- the numbers, tail = a word behind a number, mark = "*" where one is to stand behind all, and notes { heading, lines (texts, or lists whose first text heads the others) }. A column belongs to the group of its left neighbour where the name is the same.
local core = ...
local format = core.part "lacuna.format"

local tables = { WIDTH = 100 } -- of a table where no terminal says otherwise
local GAP, MISSING = "  ", "—"
local NO_BREAK = "\u{a0}"

-- Lines of text -------------------------------------------------------------------------------------------------------------------

-- Breaks a text at its spaces into lines of at most so many columns (longer words stand alone).
local function wrapped(text, columns)
  local lines, line = {}, nil
  for word in text:gmatch "%S+" do
    if line and format.width(line) + 1 + format.width(word) <= columns then line = line .. " " .. word
    else
      lines[#lines + 1] = line
      line = word
    end
  end
  lines[#lines + 1] = line
  return lines
end
tables.wrapped = wrapped

tables.wrapped = wrapped

-- A name or text from a file may have line breaks.
local function on_one_line(text) return (text:gsub("%s*[\n\r\t\v\f]%s*", " ")) end

local function lowest_and_highest(list)
  local low, high = math.huge, -math.huge
  for _, value in ipairs(list) do
    if value == value then low, high = math.min(low, value), math.max(high, value) end
  end
  return low, high
end

-- Along a sweep a cell is written from its lowest to its highest value, each by `write` as a cell of its own.
local function range_of(cell, write, between)
  local what = cell.shares and "share" or "value"
  local low, high = lowest_and_highest(cell.shares or cell.values)
  low, high = write { [what] = low }, write { [what] = high }
  return low == high and low or low .. between .. high
end

local cell_text
function cell_text(cell)
  if cell.text then return cell.text end
  if cell.missing then return MISSING end
  if cell.axes then return range_of(cell, cell_text, " … ") end
  if cell.share then return cell.share == 1 and "yes" or cell.share == 0 and "no" or format.percent(cell.share) end
  return cell.upper and format.with_error(cell.value, cell.upper, cell.lower) or format.number(cell.value)
end
tables.cell_text = cell_text

-- A cell's text in two parts, which meet where the error bar begins: so the values of a column stand below each other.
local function parts(text)
  local at = text:find " [±+]"
  if at then return text:sub(1, at - 1), text:sub(at) end
  return text, ""
end

-- The texts of a column's cells, all of one width; words flush right, or all flush left where asked for.
local function aligned(cells, flush_left)
  local left, right, words, marks, lefts, rights = 0, 0, 0, 0, {}, {}
  for i, cell in ipairs(cells) do
    lefts[i], rights[i] = cell_text(cell), ""
    if flush_left or cell.word then words = math.max(words, format.width(lefts[i]))
    else
      lefts[i], rights[i] = parts(lefts[i])
      rights[i] = rights[i] .. (cell.tail or "")
      left, right = math.max(left, format.width(lefts[i])), math.max(right, format.width(rights[i]))
    end
    if cell.mark then marks = math.max(marks, 1 + format.width(cell.mark)) end
  end
  local width, texts = math.max(left + right, words), {}
  for i, cell in ipairs(cells) do
    if not flush_left then lefts[i] = format.pad_left(lefts[i], cell.word and width or width - right) end
    texts[i] = format.pad_right(lefts[i] .. rights[i] .. (cell.mark and " " .. cell.mark or ""), width + marks)
  end
  return texts, width + marks
end

-- A column laid out: its heading's lines, its cells' texts, its width.
local function laid_out(column, cells)
  local texts, width = aligned(cells, column.left)
  local name = column.heading or column.name:gsub("_", " "):gsub(" by ", " by" .. NO_BREAK)
  for word in name:gmatch "%S+" do width = math.max(width, format.width(word)) end
  width = math.max(width, format.width(column.unit_text or ""))
  local heading = wrapped(name, width)
  for i, line in ipairs(heading) do heading[i] = line:gsub(NO_BREAK, " ") end
  return { heading = heading, unit = column.unit_text or "", texts = texts, width = width, left = column.left }
end

-- Neighbouring columns of one group, each laid out.
local function blocks_of(whole)
  local blocks = {}
  for i, column in ipairs(whole.columns) do
    local block = blocks[#blocks]
    if not block or block.group ~= column.group then
      block = { group = column.group, width = 0 }
      blocks[#blocks + 1] = block
    end
    local cells = {}
    for j, row in ipairs(whole.rows) do cells[j] = row.cells[i] end
    local column_laid_out = laid_out(column, cells)
    block[#block + 1] = column_laid_out
    block.width = block.width + #GAP + column_laid_out.width
  end
  return blocks
end

-- Blocks side by side while they fit; a block too wide for one table is cut between its columns.
local function pages_of(blocks, names_width, columns)
  local pages, page, room = {}, nil, 0
  local function put(block)
    if not page or block.width > room then
      page, room = {}, columns - names_width
      pages[#pages + 1] = page
    end
    page[#page + 1] = block
    room = room - block.width
  end
  for _, block in ipairs(blocks) do
    if block.width <= columns - names_width then put(block)
    else
      local piece
      for _, column in ipairs(block) do
        if piece and piece.width + #GAP + column.width > columns - names_width then
          put(piece)
          piece = nil
        end
        piece = piece or { group = block.group, width = 0 }
        piece[#piece + 1] = column
        piece.width = piece.width + #GAP + column.width
      end
      put(piece)
    end
  end
  return pages
end

-- "─── 5 au ───" over a block's columns.
local function ruled(text, columns)
  local space = columns - format.width(text) - 2
  if space < 2 then return format.pad_right(text, columns) end
  return ("─"):rep(space // 2) .. " " .. text .. " " .. ("─"):rep(space - space // 2)
end

local function trimmed(line) return (line:gsub("%s+$", "")) end

local function add_page(lines, page, rows, names_width)
  local deepest, grouped, in_units = 0, false, false
  for _, block in ipairs(page) do
    grouped = grouped or block.group
    for _, column in ipairs(block) do deepest, in_units = math.max(deepest, #column.heading), in_units or column.unit ~= "" end
  end
  local blank = (" "):rep(names_width)
  if grouped then
    local line = blank
    for _, block in ipairs(page) do
      local columns = block.width - #GAP
      line = line .. GAP .. (block.group and ruled(block.group, columns) or (" "):rep(columns))
    end
    lines[#lines + 1] = trimmed(line)
  end
  local function add(first, text_of)
    local line = format.pad_right(first, names_width)
    for _, block in ipairs(page) do
      for _, column in ipairs(block) do line = line .. GAP .. (column.left and format.pad_right or format.pad_left)(text_of(column), column.width) end
    end
    lines[#lines + 1] = trimmed(line)
    return format.width(line)
  end
  local width = 0
  for i = 1, deepest do width = math.max(width, add("", function(column) return column.heading[i - deepest + #column.heading] or "" end)) end
  if in_units then width = math.max(width, add("", function(column) return column.unit end)) end
  lines[#lines + 1] = ("─"):rep(width)
  for i, row in ipairs(rows) do
    if row.rule then lines[#lines + 1] = ("─"):rep(width) end
    add(on_one_line(row.name), function(column) return column.texts[i] end)
  end
end

-- Notes: each with its heading, wrapped, the lines' further parts set in. A line may be a list: what its first text heads.
local function add_notes(lines, notes, columns)
  local function add(text, indent)
    for i, line in ipairs(wrapped(text, columns - indent - 2)) do lines[#lines + 1] = (" "):rep(i == 1 and indent or indent + 2) .. line end
  end
  for _, note in ipairs(notes) do
    lines[#lines + 1] = ""
    add(note.heading, 0)
    for _, text in ipairs(note.lines) do
      if type(text) == "string" then add(text, 2)
      else
        for i, part in ipairs(text) do add(part, i == 1 and 2 or 4) end
      end
    end
  end
end

-- The table as text, no wider than so many columns where that can be.
function tables.text(whole, columns)
  local names_width, lines = 0, {}
  for _, row in ipairs(whole.rows) do names_width = math.max(names_width, format.width(on_one_line(row.name))) end
  if whole.title then lines = wrapped(whole.title, columns) end
  for _, page in ipairs(pages_of(blocks_of(whole), names_width, columns)) do
    if #lines > 0 then lines[#lines + 1] = "" end
    add_page(lines, page, whole.rows, names_width)
  end
  add_notes(lines, whole.notes, columns)
  return table.concat(lines, "\n")
end

-- CSV -----------------------------------------------------------------------------------------------------------------------------

local function quoted(field)
  if field:find '[",\r\n]' or field:find "^%s" or field:find "%s$" then return '"' .. field:gsub('"', '""') .. '"' end
  return field
end

local function csv_line(fields)
  for i, field in ipairs(fields) do fields[i] = quoted(field) end
  return table.concat(fields, ",")
end

-- What VOUnits and the FITS standard have no unit for, in the nearest that they have.
local standard_units = { Msun = { "solMass" }, Rsun = { "solRad" }, Lsun = { "solLum" }, Mjup = { "solMass" }, Mearth = { "solMass" }, Rjup = { "solRad" }, Rearth = { "solRad" } }

-- A unit as VOUnits has it, and how many of these one of it is: 1 Msun/yr is 1 solMass/yr. nil for plain numbers.
local function standard_unit(unit)
  if unit == "1" then return nil, 1 end
  local written = unit:gsub("%a+", function(word) return standard_units[word] and standard_units[word][1] end)
  return written, core.unit_facts(unit) / core.unit_facts(written)
end

local function digits(value) return value and value == value and ("%.7g"):format(value) or "" end
tables.csv_line, tables.digits = csv_line, digits -- for figures too

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
function tables.at_point(cell, sweeps, point)
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
function tables.fields(whole)
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
        return text_of(tables.at_point(row.cells[number], sweeps, point))
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
function tables.csv(whole)
  local fields, lines, header = tables.fields(whole), {}, {}
  for i, field in ipairs(fields) do
    header[i] = (field.group and field.group .. " " or "") .. field.name .. (field.part and " " .. field.part or "") .. (field.unit and " [" .. field.unit .. "]" or "")
  end
  lines[1] = csv_line(header)
  for line = 1, #fields[1] do
    local cells = {}
    for i, field in ipairs(fields) do cells[i] = field[line] end
    lines[line + 1] = csv_line(cells)
  end
  return table.concat(lines, "\n") .. "\n"
end

-- Markdown --------------------------------------------------------------------------------------------------------------------------

local function markdown_cell(text) return (on_one_line(text):gsub("[\\|`*_<>%[%]]", "\\%0")) end

-- A pipe table, as most readers of Markdown show it; group and unit stand in the headings.
function tables.markdown(whole)
  local function line(cells) return "| " .. table.concat(cells, " | ") .. " |" end
  local headings, rules, lines = { "Star" }, { "---" }, {}
  for _, text in ipairs(whole.texts) do headings[#headings + 1], rules[#rules + 1] = markdown_cell(text), "---" end
  for _, column in ipairs(whole.columns) do
    local words = (column.group and column.group .. ": " or "") .. column.name:gsub("_", " ") .. (column.unit_text ~= "" and " (" .. column.unit_text .. ")" or "")
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

-- LaTeX ---------------------------------------------------------------------------------------------------------------------------

local special = {
  ["\\"] = "\\textbackslash{}", ["{"] = "\\{", ["}"] = "\\}", ["$"] = "\\$", ["&"] = "\\&", ["#"] = "\\#", ["%"] = "\\%", ["_"] = "\\_",
  ["~"] = "\\textasciitilde{}", ["^"] = "\\textasciicircum{}", ["<"] = "$<$", [">"] = "$>$",
}
-- What stands in symbols, equations and units; letters with accents are understood as they are.
local beyond_ascii = {
  ["±"] = "$\\pm$", ["≥"] = "$\\ge$", ["≤"] = "$\\le$", ["×"] = "$\\times$", ["·"] = "$\\cdot$", ["—"] = "---", ["–"] = "--", ["…"] = "\\dots{}",
  ["√"] = "$\\sqrt{\\ }$", ["≈"] = "$\\approx$", ["∝"] = "$\\propto$", ["−"] = "$-$", ["⊙"] = "$\\odot$", ["☉"] = "$\\odot$", ["°"] = "$^\\circ$", ["µ"] = "$\\mu$",
  ["α"] = "$\\alpha$", ["β"] = "$\\beta$", ["γ"] = "$\\gamma$", ["δ"] = "$\\delta$", ["ϵ"] = "$\\epsilon$", ["ε"] = "$\\varepsilon$",
  ["θ"] = "$\\theta$", ["κ"] = "$\\kappa$", ["λ"] = "$\\lambda$", ["μ"] = "$\\mu$", ["ν"] = "$\\nu$", ["π"] = "$\\pi$", ["ρ"] = "$\\rho$",
  ["σ"] = "$\\sigma$", ["τ"] = "$\\tau$", ["ϕ"] = "$\\phi$", ["Δ"] = "$\\Delta$", ["Σ"] = "$\\Sigma$", ["Ω"] = "$\\Omega$", ["ϖ"] = "$\\varpi$",
  ["ω"] = "$\\omega$", ["ℓ"] = "$\\ell$", ["⁻"] = "$^{-}$", ["⁰"] = "$^{0}$", ["¹"] = "$^{1}$", ["²"] = "$^{2}$", ["³"] = "$^{3}$", ["⁴"] = "$^{4}$",
  ["⁵"] = "$^{5}$", ["⁶"] = "$^{6}$", ["⁷"] = "$^{7}$", ["⁸"] = "$^{8}$", ["⁹"] = "$^{9}$",
}

-- "[" and "*" at the start of a row would be taken for an argument of the \\ before.
local function escaped(text)
  text = on_one_line(text):gsub("[\\{}$&#%%_~^<>]", special):gsub("^[%[*]", "{%0}")
  return (text:gsub(utf8.charpattern, function(character) return #character > 1 and beyond_ascii[character] or nil end))
end

tables.escaped_tex = escaped

local cell_tex
function cell_tex(cell)
  if cell.missing then return "---" end
  if cell.axes then return range_of(cell, cell_tex, " to ") end
  if cell.share then return cell.share == 1 and "yes" or cell.share == 0 and "no" or format.percent_tex(cell.share) end
  return cell.upper and format.with_error_tex(cell.value, cell.upper, cell.lower) or format.number_tex(cell.value)
end

local function heading_tex(column)
  if not column.verdict then return "$" .. column.entry.symbol .. "$" end
  return "\\shortstack{" .. escaped((column.name:gsub("_", " "):gsub(" by ", "\0by "))):gsub("\0", "\\\\") .. "}"
end

-- A table environment takes so many rows, and columns up to a width that text of \small has on a page.
local MOST_ROWS, WIDEST, MOST_FLOATS = 45, 100, 10

-- What stands beside the names: texts and columns, each with its width in characters.
local function parts_of(whole)
  local list = {}
  for _, text in ipairs(whole.texts) do
    local width = format.width(text)
    for _, row in ipairs(whole.rows) do width = math.max(width, format.width(on_one_line(row.texts[text] or ""))) end
    list[#list + 1] = { text = text, width = width }
  end
  for i, column in ipairs(whole.columns) do
    local cells = {}
    for j, row in ipairs(whole.rows) do cells[j] = row.cells[i] end
    list[#list + 1] = { column = column, number = i, group = column.group, width = laid_out(column, cells).width }
  end
  return list
end

-- The parts in tables side by side: a group that fits into one table is not cut.
local function tables_of(whole)
  local names_width, list, found, room = 0, parts_of(whole), {}, 0
  for _, row in ipairs(whole.rows) do names_width = math.max(names_width, format.width(on_one_line(row.name))) end
  local function width_from(i)
    local width, group = 0, list[i].group
    repeat
      width = width + #GAP + list[i].width
      i = i + 1
    until not list[i] or not group or list[i].group ~= group
    return width
  end
  for i, part in ipairs(list) do
    local starts = i == 1 or part.group ~= list[i - 1].group or not part.group
    local wanted = starts and math.min(width_from(i), WIDEST - names_width) or #GAP + part.width
    if #found == 0 or wanted > room then
      found[#found + 1] = {}
      room = WIDEST - names_width
    end
    table.insert(found[#found], part)
    room = room - #GAP - part.width
  end
  return found
end

-- The row of group headings over the columns, with its rules; nil where there is no group.
local function groups_tex(parts)
  local cells, rules, i = { "" }, {}, 1
  while i <= #parts do
    local last, group = i, parts[i].group
    while last < #parts and parts[last + 1].group == group do last = last + 1 end
    cells[#cells + 1] = ("\\multicolumn{%d}{c}{%s}"):format(last - i + 1, group and escaped(group) or "")
    if group then rules[#rules + 1] = ("\\cmidrule(lr){%d-%d}"):format(i + 1, last + 1) end
    i = last + 1
  end
  if #rules == 0 then return nil end
  return table.concat(cells, " & ") .. " \\\\ " .. table.concat(rules, " ")
end

local function notes_tex(notes)
  local lines = {}
  for _, note in ipairs(notes) do
    local sentences = {}
    for i, line in ipairs(note.lines) do
      sentences[i] = escaped(type(line) == "string" and line or line[1] .. ": " .. table.concat(line, "; ", 2)):gsub("%.$", "")
    end
    lines[#lines + 1] = ("\\par\\textit{%s:} %s."):format(escaped(note.heading), table.concat(sentences, "; "))
  end
  return lines
end

-- The tabular with some parts of some rows.
local function add_tabular(add, whole, parts, first, last)
  local function add_row(fields) add(table.concat(fields, " & ") .. " \\\\") end
  local form, headings, units = "l", { "Star" }, { "" }
  for i, part in ipairs(parts) do
    form = form .. (part.text and "l" or "r")
    headings[i + 1] = part.text and escaped(part.text) or heading_tex(part.column)
    units[i + 1] = (part.text or part.column.unit == "1") and "" or "($" .. part.column.unit_tex .. "$)"
  end
  add("\\begin{tabular}{" .. form .. "}\n\\toprule")
  local groups = groups_tex(parts)
  if groups then add(groups) end
  add_row(headings)
  if table.concat(units) ~= "" then add_row(units) end
  add "\\midrule"
  for i = first, last do
    local row, fields = whole.rows[i], { escaped(whole.rows[i].name) }
    for j, part in ipairs(parts) do fields[j + 1] = part.text and escaped(row.texts[part.text] or "") or cell_tex(row.cells[part.number]) end
    add_row(fields)
  end
  add "\\bottomrule\n\\end{tabular}"
end

-- Table environments, for a document that loads booktabs: one, or several where one would be too wide or too long; the notes stand below the last.
function tables.latex(whole)
  local lines, all, count = { "% needs \\usepackage{booktabs}" }, tables_of(whole), 0
  local function add(line) lines[#lines + 1] = line end
  for first = 1, #whole.rows, MOST_ROWS do
    local last = math.min(first + MOST_ROWS - 1, #whole.rows)
    for number, parts in ipairs(all) do
      count = count + 1
      local continued = count > 1 and " (continued)" or ""
      add "\\begin{table*}\n\\centering\\small"
      add(whole.title and "\\caption{" .. escaped(whole.title) .. continued .. "}" or "% \\caption{...}")
      add_tabular(add, whole, parts, first, last)
      if last == #whole.rows and number == #all and #whole.notes > 0 then
        add "\\par\\medskip\\begin{minipage}{\\textwidth}\\footnotesize"
        for _, line in ipairs(notes_tex(whole.notes)) do add(line) end
        add "\\end{minipage}"
      end
      add "\\end{table*}"
      if count % MOST_FLOATS == 0 then add "\\clearpage" end
    end
  end
  return table.concat(lines, "\n") .. "\n"
end

return tables
