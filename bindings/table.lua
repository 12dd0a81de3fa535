-- SPDX-License-Identifier: GPL-3.0-or-later
-- Tables of results as aligned text, CSV and LaTeX (booktabs). A table is
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

local function digits(value) return value and value == value and ("%.7g"):format(value) or "" end
tables.csv_line, tables.digits = csv_line, digits -- for figures too

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

local function csv_fields(whole, row, sweeps, point)
  local fields = { row.name }
  for _, text in ipairs(whole.texts) do fields[#fields + 1] = row.texts[text] or "" end
  for i, sweep in ipairs(sweeps) do fields[#fields + 1] = digits(sweep.values[point[i]]) end
  for i, column in ipairs(whole.columns) do
    local cell = tables.at_point(row.cells[i], sweeps, point)
    for _, part in ipairs(column.verdict and { "share" } or { "value", "upper", "lower" }) do fields[#fields + 1] = digits(cell[part]) end
  end
  return fields
end

-- One line a target, along sweeps one a target and point: its texts, then a value, an upper and a lower error a column, or the share of a verdict.
function tables.csv(whole)
  local header, sweeps = { "name", table.unpack(whole.texts) }, whole.sweeps or {}
  for _, sweep in ipairs(sweeps) do header[#header + 1] = sweep.name .. (sweep.unit == "1" and "" or " [" .. sweep.unit .. "]") end
  for _, column in ipairs(whole.columns) do
    local name = (column.group and column.group .. " " or "") .. column.name
    local unit = column.unit == "1" and "" or " [" .. column.unit .. "]"
    if column.verdict then header[#header + 1] = name .. " share"
    else
      for _, what in ipairs { "", " upper error", " lower error" } do header[#header + 1] = name .. what .. unit end
    end
  end
  local lines, points = { csv_line(header) }, grid_of(sweeps)
  for _, row in ipairs(whole.rows) do
    for _, point in ipairs(points) do lines[#lines + 1] = csv_line(csv_fields(whole, row, sweeps, point)) end
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

-- The row of group headings over the columns, with its rules; nil where there is no group.
local function groups_tex(whole, before)
  local cells, rules, i = {}, {}, 1
  while i <= #whole.columns do
    local last = i
    while last < #whole.columns and whole.columns[last + 1].group == whole.columns[i].group do last = last + 1 end
    local group = whole.columns[i].group
    cells[#cells + 1] = ("\\multicolumn{%d}{c}{%s}"):format(last - i + 1, group and escaped(group) or "")
    if group then rules[#rules + 1] = ("\\cmidrule(lr){%d-%d}"):format(before + i, before + last) end
    i = last + 1
  end
  if #rules == 0 then return nil end
  return ("& "):rep(before) .. table.concat(cells, " & ") .. " \\\\ " .. table.concat(rules, " ")
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

-- A table environment, for a document that loads booktabs.
function tables.latex(whole)
  local texts = whole.texts
  local before = 1 + #texts
  local lines = {
    "% needs \\usepackage{booktabs}", "\\begin{table*}", "\\centering\\small",
    whole.title and "\\caption{" .. escaped(whole.title) .. "}" or "% \\caption{...}",
    "\\begin{tabular}{" .. ("l"):rep(before) .. ("r"):rep(#whole.columns) .. "}", "\\toprule",
  }
  local function add(line) lines[#lines + 1] = line end
  local function add_row(fields) add(table.concat(fields, " & ") .. " \\\\") end
  local groups = groups_tex(whole, before)
  if groups then add(groups) end
  local headings, units = { "Star" }, { "" }
  for _, text in ipairs(texts) do headings[#headings + 1], units[#units + 1] = escaped(text), "" end
  for _, column in ipairs(whole.columns) do
    headings[#headings + 1] = heading_tex(column)
    units[#units + 1] = column.unit == "1" and "" or "($" .. column.unit_tex .. "$)"
  end
  add_row(headings)
  add_row(units)
  add "\\midrule"
  for _, row in ipairs(whole.rows) do
    local fields = { escaped(row.name) }
    for _, text in ipairs(texts) do fields[#fields + 1] = escaped(row.texts[text] or "") end
    for _, cell in ipairs(row.cells) do fields[#fields + 1] = cell_tex(cell) end
    add_row(fields)
  end
  add "\\bottomrule"
  add "\\end{tabular}"
  add "\\par\\medskip\\begin{minipage}{\\textwidth}\\footnotesize"
  for _, line in ipairs(notes_tex(whole.notes)) do add(line) end
  add "\\end{minipage}"
  add "\\end{table*}"
  return table.concat(lines, "\n") .. "\n"
end

return tables
