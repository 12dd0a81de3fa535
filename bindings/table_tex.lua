-- SPDX-License-Identifier: GPL-3.0-or-later
-- Tables of results as LaTeX, for documents that load booktabs and nothing else; and texts with their special characters as TeX has them.
-- table.lua says what a table is.
local core = ...
local english = core.part "lacuna.english"
local format = core.part "lacuna.format"
local tables = core.part "lacuna.table"

local tex = {}
local on_one_line, GAP = tables.on_one_line, 2 -- between columns, in characters

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

for command, character in pairs(core.part "lacuna.equation_tree".greek) do beyond_ascii[character] = beyond_ascii[character] or "$\\" .. command .. "$" end

-- Latin letters and quotation marks that LaTeX's standard fonts (encoding OT1) lack, by the nearest that they have.
for character, nearest in pairs {
  ["Ą"] = "A", ["ą"] = "a", ["Ę"] = "E", ["ę"] = "e", ["Į"] = "I", ["į"] = "i", ["Ų"] = "U", ["ų"] = "u", ["Đ"] = "D", ["đ"] = "d", ["Ð"] = "D",
  ["ð"] = "d", ["Þ"] = "Th", ["þ"] = "th", ["Ħ"] = "H", ["ħ"] = "h", ["Ŋ"] = "Ng", ["ŋ"] = "ng", ["Ŧ"] = "T", ["ŧ"] = "t", ["Ŀ"] = "L", ["ŀ"] = "l",
  ["ĸ"] = "k", ["ŉ"] = "'n", ["ſ"] = "s", ["«"] = "``", ["»"] = "''", ["„"] = "``", ["‚"] = "`", ["‛"] = "`", ["‗"] = "\\_",
} do beyond_ascii[character] = nearest end

-- The others it knows of itself, with their accents.
local function is_known(character)
  local code = utf8.codepoint(character)
  return code >= 0xa1 and code <= 0x17f or code >= 0x2013 and code <= 0x201e
end

-- "[" and "*" at the start of a row would be taken for an argument of the \\ before.
local function escaped(text)
  text = on_one_line(text):gsub("[\\{}$&#%%_~^<>]", special):gsub("^[%[*]", "{%0}")
  return (text:gsub(utf8.charpattern, function(character)
    if #character > 1 and not is_known(character) or beyond_ascii[character] then return beyond_ascii[character] or "?" end
  end))
end

tex.escaped = escaped

local cell_tex
function cell_tex(cell)
  if cell.missing then return "---" end
  if cell.axes then return tables.range_of(cell, cell_tex, " to ") end
  if cell.share then return cell.share == 1 and "yes" or cell.share == 0 and "no" or format.percent_tex(cell.share) end
  return cell.upper and format.with_error_tex(cell.value, cell.upper, cell.lower) or format.number_tex(cell.value)
end

local function heading_tex(column)
  if not column.verdict then return "$" .. column.entry.symbol .. "$" end
  return "\\shortstack{" .. escaped((english.words_of(column.name):gsub(" by ", "\0by "))):gsub("\0", "\\\\") .. "}"
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
    list[#list + 1] = { column = column, number = i, group = column.group, width = tables.laid_out(column, cells).width }
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
      width = width + GAP + list[i].width
      i = i + 1
    until not list[i] or not group or list[i].group ~= group
    return width
  end
  for i, part in ipairs(list) do
    local starts = i == 1 or part.group ~= list[i - 1].group or not part.group
    local wanted = starts and math.min(width_from(i), WIDEST - names_width) or GAP + part.width
    if #found == 0 or wanted > room then
      found[#found + 1] = {}
      room = WIDEST - names_width
    end
    table.insert(found[#found], part)
    room = room - GAP - part.width
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
      local words = escaped(type(line) == "string" and line or line[1] .. ": " .. table.concat(line, "; ", 2))
      sentences[i] = words:find "%.$" and words or words .. (i < #note.lines and ";" or ".")
    end
    lines[#lines + 1] = ("\\par\\textit{%s:} %s"):format(escaped(note.heading), table.concat(sentences, " "))
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
function tex.latex(whole)
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

return tex
