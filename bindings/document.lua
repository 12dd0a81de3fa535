-- SPDX-License-Identifier: GPL-3.0-or-later
-- The LaTeX of a report besides its table: the derivations for one target, with equations and numbers, assumptions and recipes; and the
-- document that takes all parts in. It asks for booktabs and nothing beyond LaTeX's recommended packages.
local core = ...
local derivation = core.part "lacuna.derivation"
local table_tex = core.part "lacuna.table_tex"
local english = core.part "lacuna.english"
local relations = core.part "lacuna.relations"
local verdicts = core.part "lacuna.verdicts"

local document = {}
local escaped = table_tex.escaped

local function words(name) return escaped(english.words_of(name)) end

-- "by grey grains, \cite[Eq. 1]{monnier_2002}", or in words where nothing is cited.
local function recipe_tex(row, cited)
  if row.source == "definition" then return "by definition" end
  local key, place = cited:key(row), row.place and "[" .. escaped(row.place):gsub("[%[%]]", "{%0}") .. "]" or ""
  local source = key and ("\\cite%s{%s}"):format(place, key) .. (row.from_memory and " (formula from memory)" or "") or escaped(relations.source(row))
  return row.kind == "assumed" and source or ("%s, %s"):format(words(row.by), source)
end

-- Left and right side of an equation, at its first sign of equality; nil where it has none.
local function sides(equation)
  local left, right = equation:match "^(.-) = (.*)$"
  return left, right
end

-- An equation with the numbers put in and the result below it, aligned at the signs of equality.
local function display(step)
  local equation, numbers = step.equation and derivation.equation_tex(step), derivation.numbers_tex(step)
  local left, right = sides(equation or "")
  if not left then return equation and "\\[ " .. equation .. " \\]" or nil end
  local lines = { left .. " &=& \\displaystyle " .. right }
  if numbers then lines[#lines + 1] = " &=& \\displaystyle " .. numbers end
  return "\\[ \\begin{array}{rcl}\n" .. table.concat(lines, " \\\\[3ex]\n") .. "\n\\end{array} \\]"
end

-- What is given on the way, in one item.
local function add_givens(lines, steps, cited)
  local parts = {}
  for _, step in ipairs(steps) do
    if step.kind == "given" then
      local key = step.source_id and cited:key { source = step.source_id }
      parts[#parts + 1] = ("%s %s%s"):format(words(step.name), escaped(step.value), key and " (zero point: \\cite{" .. key .. "})" or "")
    end
  end
  if #parts > 0 then lines[#lines + 1] = "\\item Given: " .. table.concat(parts, "; ") .. "." end
end

local function add_step(lines, step, cited)
  local function add(line) lines[#lines + 1] = line end
  if step.kind == "assumed" then
    return add(("\\item %s: %s, assumed (%s)%s."):format(words(step.name), escaped(step.value), recipe_tex(step.row, cited),
      step.row.supposes and "; " .. escaped(step.row.supposes) or ""))
  end
  add(("\\item %s: %s, %s%s."):format(words(step.name), escaped(step.value), recipe_tex(step.row, cited),
    step.row.supposes and "; supposes " .. escaped(step.row.supposes) or ""))
  local shown = display(step)
  if shown then add(shown) end
  for _, warning in ipairs(step.warnings) do add("Beware: " .. escaped(english.in_words(warning)) .. ".") end
end

-- The steps of a chain that did not stand in one before.
local function new_steps(chain, seen)
  local steps = {}
  for _, step in ipairs(chain.steps) do
    local key = step.name .. "\0" .. step.value .. "\0" .. (step.row and step.row.by or "")
    if not seen[key] then
      seen[key] = true
      steps[#steps + 1] = step
    end
  end
  return steps
end

local function add_chain(lines, one, seen, cited)
  local chain, column = one.chain, one.column
  local function add(line) lines[#lines + 1] = line end
  add(("\\subsection*{%s}"):format((column.group and escaped(column.group) .. ": " or "") .. words(chain.name)))
  local function sentence(words) return english.capital(escaped(words)) end
  add(("%s: %s.%s"):format(sentence(chain.meaning), escaped(chain.value), chain.numbers and " " .. sentence(chain.numbers) .. "." or ""))
  local steps = new_steps(chain, seen)
  if #steps < #chain.steps then add "What leads there besides stands above." end
  if #steps > 0 then
    add "\\begin{itemize}"
    add_givens(lines, steps, cited)
    for _, step in ipairs(steps) do if step.kind ~= "given" then add_step(lines, step, cited) end end
    add "\\end{itemize}"
  end
  if #chain.conditions > 0 then
    add "Its conditions:\n\\begin{itemize}"
    for _, condition in ipairs(chain.conditions) do add("\\item " .. escaped(english.in_words(condition)) .. ".") end
    if chain.unchecked then add("\\item Not checked: " .. escaped(english.in_words(chain.unchecked)) .. ".") end
    add "\\end{itemize}"
  end
  add ""
end

local function add_list(lines, heading, items, nothing)
  lines[#lines + 1] = "\\section*{" .. heading .. "}"
  if #items == 0 then
    lines[#lines + 1] = nothing
    return
  end
  lines[#lines + 1] = "\\begin{itemize}"
  for _, item in ipairs(items) do lines[#lines + 1] = "\\item " .. item end
  lines[#lines + 1] = "\\end{itemize}"
end

local function mapped(list, f)
  local items = {}
  for i, one in ipairs(list) do items[i] = f(one) end
  return items
end

-- Notes on all targets, but those that stand here with their citations.
local shown_otherwise = { Assumed = true, Recipes = true }

local function add_notes(lines, notes)
  for _, note in ipairs(notes) do
    if not shown_otherwise[note.heading] then
      add_list(lines, escaped(note.heading), mapped(note.lines, function(line)
        if type(line) == "string" then return escaped(english.in_words(line)) end
        return escaped(english.in_words(line[1] .. ": " .. table.concat(line, "; ", 2)))
      end))
    end
  end
end

-- The derivations for one target, what they assume, the recipes, what others would have given; and the study's notes on all targets.
function document.derivations(study, row, chains, cited)
  local lines, seen = { "\\section*{Derivations for " .. escaped(row.name) .. "}" }, {}
  for _, one in ipairs(chains) do add_chain(lines, one, seen, cited) end
  add_list(lines, "Assumptions", mapped(derivation.assumptions(chains), function(step)
    return ("%s: %s (%s)%s."):format(words(step.name), escaped(step.value), recipe_tex(step.row, cited), step.row.supposes and "; " .. escaped(step.row.supposes) or "")
  end), "Nothing is assumed.")
  add_list(lines, "Recipes chosen", mapped(derivation.recipes(chains), function(step) return ("%s by %s."):format(words(step.name), recipe_tex(step.row, cited)) end),
    "All follows by definition.")
  add_list(lines, "What other recipes would have given", mapped(derivation.others(chains), function(found)
    local other = found.other
    return ("%s%s with %s by %s instead of %s: %s."):format(found.column.group and escaped(found.column.group) .. ": " or "", words(found.chain.name),
      words(other.name), recipe_tex(other.row, cited), escaped(verdicts.recipe_name(other.name, other.instead_of)), escaped(other.value))
  end), "What is given allows no other recipe.")
  add_notes(lines, study.notes)
  return table.concat(lines, "\n") .. "\n"
end

-- A figure's caption, its symbols as in equations.
function document.caption(figure)
  local caption = figure:caption(function(name) return "\1" .. name .. "\2" end)
  return (caption:gsub("([^\1]*)\1?([^\2]*)\2?", function(words, name)
    return escaped(words) .. (name ~= "" and "$" .. core.entry(name).symbol .. "$" or "")
  end))
end

-- The document that takes the parts in.
function document.whole(title, figures, date, has_sources)
  local lines = {
    "\\documentclass[10pt,a4paper]{article}", "\\usepackage[utf8]{inputenc}", "\\usepackage{booktabs}",
  }
  if #figures > 0 then lines[#lines + 1] = "\\usepackage{graphicx}" end
  local function add(line) lines[#lines + 1] = line end
  add "\\setlength{\\oddsidemargin}{-9mm} \\setlength{\\textwidth}{178mm} \\setlength{\\topmargin}{-15mm} \\setlength{\\textheight}{245mm}"
  add "\\sloppy"
  add("\\title{" .. escaped(title) .. "}")
  add("\\date{" .. date .. "}")
  add "\\begin{document}\n\\maketitle\n\\section*{Technical feasibility}\n\\input{feasibility}\n\\input{table}"
  for _, figure in ipairs(figures) do
    add("\\begin{figure}\n\\centering\\includegraphics{" .. figure.file .. "}\n\\caption{" .. figure.caption_tex .. "}\n\\end{figure}")
  end
  add "\\input{derivations}"
  if has_sources then add "\\bibliographystyle{unsrt}\n\\bibliography{references}" end
  add "\\end{document}"
  return table.concat(lines, "\n") .. "\n"
end

return document
