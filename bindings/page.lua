-- SPDX-License-Identifier: GPL-3.0-or-later
-- The page of a report: one HTML file that needs neither network nor script. The verdicts come first, then table, figures, derivations that
-- unfold, inputs, and what all rests on.
--
--   of(study, parts)   parts = { facts, row, chains, composed, figures, missing } as report.lua has them
local core = ...
local derivation = core.part "lacuna.derivation"
local english = core.part "lacuna.english"
local feasibility = core.part "lacuna.feasibility"
local format = core.part "lacuna.format"
local notes = core.part "lacuna.notes"
local style = core.part "lacuna.page_style"
local tables = core.part "lacuna.table"
local relations = core.part "lacuna.relations"
local text = core.part "lacuna.text"
local verdicts = core.part "lacuna.verdicts"

local page = {}
local words_of = english.words_of
local LONGEST_SHOWN = 200000 -- bytes of an input that is shown in the page itself

-- HTML -------------------------------------------------------------------------------------------------------------------------------

local entities = { ["&"] = "&amp;", ["<"] = "&lt;", [">"] = "&gt;", ['"'] = "&quot;" }
local function html(words) return (tostring(words):gsub('[&<>"]', entities)) end

local function element(tag, content) return ("<%s>%s</%s>"):format(tag, content, tag:match "^%w+") end

local function item_list(items)
  local lines = {}
  for i, item in ipairs(items) do lines[i] = element("li", item) end
  return "<ul>\n" .. table.concat(lines, "\n") .. "\n</ul>"
end

-- A table that scrolls inside its own box. head and rows: lists of cells in HTML; the first cell of a row heads it.
local function plain_table(label, head, rows, class)
  local lines = { ('<div class="scroll" tabindex="0" role="region" aria-label="%s">\n<table class="%s">\n<thead><tr>'):format(html(label), class or "words") }
  for _, cell in ipairs(head) do lines[#lines + 1] = element('th scope="col"', cell) end
  lines[#lines + 1] = "</tr></thead>\n<tbody>"
  for _, row in ipairs(rows) do
    local cells = { element('th scope="row"', row[1]) }
    for i = 2, #head do cells[i] = element("td", row[i] or "") end
    lines[#lines + 1] = "<tr>" .. table.concat(cells) .. "</tr>"
  end
  lines[#lines + 1] = "</tbody>\n</table>\n</div>"
  return table.concat(lines, "\n")
end

local function section(id, heading, content) return ('<section id="%s">\n<h2>%s</h2>\n%s\n</section>'):format(id, heading, content) end

-- The groups of a study with something for each: { name or nil, things }.
local function by_group(list, group_of)
  local groups = {}
  for _, thing in ipairs(list) do
    local name = group_of(thing) or ""
    local group = groups[name]
    if not group then
      group = { name = name ~= "" and name or nil }
      groups[#groups + 1], groups[name] = group, group
    end
    group[#group + 1] = thing
  end
  return groups
end

-- Answers ----------------------------------------------------------------------------------------------------------------------------

local MOST_NAMES = 40 -- of one answer; the table has all

local function names_with_shares(rows, plain)
  local parts = {}
  for i = 1, math.min(#rows, MOST_NAMES) do parts[i] = html(rows[i].name) .. (plain and "" or " (" .. verdicts.percent(rows[i].cell.share) .. ")") end
  return table.concat(parts, ", ") .. (#rows > MOST_NAMES and (" and %d others: see the table"):format(#rows - MOST_NAMES) or "")
end

-- "Quillon A (from 49 m)"
local function names_with_turns(along)
  local parts, all = {}, {}
  for word, list in pairs { from = along.from, ["up to"] = along.up_to } do
    for _, one in ipairs(list) do all[#all + 1] = { value = one.value, words = ("%s (%s %s)"):format(html(one.name), word, html(one.at)) } end
  end
  table.sort(all, function(a, b) return a.value < b.value or a.value == b.value and a.words < b.words end)
  for i = 1, math.min(#all, MOST_NAMES) do parts[i] = all[i].words end
  return table.concat(parts, ", ") .. (#all > MOST_NAMES and (" and %d others: see the table"):format(#all - MOST_NAMES) or ""), all
end

-- A bar of the targets by their answer; what it shows stands in words below it.
local function bar(one, all)
  local parts = {}
  for _, kind in ipairs { "yes", "between", "no", "missing" } do
    if #one[kind] > 0 then parts[#parts + 1] = ('<span class="%s" style="flex-grow:%d"></span>'):format(kind, #one[kind]) end
  end
  return all > 1 and '<div class="bar" aria-hidden="true">' .. table.concat(parts) .. "</div>" or ""
end

-- "Is the rim resolved by the array?"
local function question(words)
  local subject, rest = words:match "^(.-) is (.*)$"
  return subject and ("Is %s %s?"):format(subject, rest) or english.capital(words) .. "?"
end

-- The targets by their answer: lists for the bar, and what each is called.
local function by_answer(one, draws, study)
  local along = verdicts.along(study, one)
  if along then
    local turning, between = names_with_turns(along)
    local half, values = draws and ", in half of draws or more" or "", " of the " .. words_of(along.sweep.name)
    return { yes = along.everywhere, between = between, no = along.nowhere, missing = one.missing },
      { yes = "Yes" .. half .. ", at all values" .. values, between = "Yes" .. half .. ", from or up to a value" .. values, no = "No, at no value" .. values }, turning
  end
  local of = (draws and " of draws" or "") .. (one.of_points and (draws and " and points" or " of points") or "")
  local high, low = format.percent(verdicts.MOSTLY), format.percent(verdicts.HARDLY)
  return one, { yes = of ~= "" and "Yes, in at least " .. high .. of or "Yes", between = "Open", no = of ~= "" and "No, in at most " .. low .. of or "No" }, names_with_shares(one.between)
end

local function answer(one, draws, study)
  local lists, called, open = by_answer(one, draws, study)
  local lines, all = {}, #study.rows
  local function add(kind, words, names)
    if #lists[kind] == 0 then return end
    lines[#lines + 1] = ('<dt><span class="key %s" aria-hidden="true"></span>%s: %d of %d</dt><dd>%s</dd>'):format(kind, html(words), #lists[kind], all, names)
  end
  add("yes", called.yes, names_with_shares(lists.yes, true))
  add("between", called.between, open)
  add("no", called.no, names_with_shares(lists.no, true))
  add("missing", "Not derived", names_with_shares(lists.missing, true))
  local changed = {}
  for _, recipe in ipairs(one.recipes) do
    if #recipe.names > 0 then changed[#changed + 1] = html(("%s changes it for %s"):format(verdicts.recipe_words(recipe.words), english.list(recipe.names))) end
  end
  local recipes = #one.yes + #one.between + #one.no == 0 and "" or #changed > 0 and "Another recipe: " .. table.concat(changed, "; ") .. "."
    or #one.recipes > 0 and "No other recipe changes it." or "No other recipe can be had from what is given."
  return ('<div class="answer">\n<p class="question">%s</p>\n%s\n<dl>%s</dl>\n<p class="small">%s</p>\n</div>')
    :format(html(question(one.words)), bar(lists, all), table.concat(lines), recipes)
end

local function answers(study)
  local of_verdicts, draws = verdicts.of(study), verdicts.has_draws(study)
  if #of_verdicts == 0 then return "<p>No verdict was asked: the table below has the quantities.</p>" end
  local parts = {}
  for _, group in ipairs(by_group(of_verdicts, function(one) return one.column.group end)) do
    if group.name then parts[#parts + 1] = element("h3", html(group.name)) end
    local cards = {}
    for i, one in ipairs(group) do cards[i] = answer(one, draws, study) end
    parts[#parts + 1] = '<div class="answers">\n' .. table.concat(cards, "\n") .. "\n</div>"
  end
  parts[#parts + 1] = '<p class="small">Resolved means geometrically resolved; whether a structure is detected is not assessed. ' ..
    html(english.WHO_DECIDES) .. "</p>"
  return table.concat(parts, "\n")
end

-- The table of results ---------------------------------------------------------------------------------------------------------------

local function group_row(study)
  local cells, i, grouped = { "<td></td>" }, 1, false
  while i <= #study.columns do
    local last, group = i, study.columns[i].group
    while last < #study.columns and study.columns[last + 1].group == group do last = last + 1 end
    grouped = grouped or group ~= nil
    local span = last - i + 1
    cells[#cells + 1] = group and ('<th scope="colgroup" colspan="%d" class="group">%s</th>'):format(span, html(group)) or ('<td colspan="%d"></td>'):format(span)
    i = last + 1
  end
  if #study.texts > 0 then cells[#cells + 1] = ('<td colspan="%d"></td>'):format(#study.texts) end
  return grouped and "<tr>" .. table.concat(cells) .. "</tr>\n" or ""
end

local function result_cell(column, cell)
  local shade = ""
  if column.verdict and not cell.missing then
    local low, high = tables.lowest_and_highest(cell.shares or { cell.share })
    shade = low >= verdicts.MOSTLY and " yes" or high <= verdicts.HARDLY and " no" or " between"
  end
  return ('<td class="number%s">%s</td>'):format(shade, html(tables.cell_text(cell)))
end

local function results(study)
  local heads = { '<th scope="col">Star</th>' }
  for _, column in ipairs(study.columns) do
    local unit = column.unit_text ~= "" and '<br><span class="unit">' .. html(column.unit_text) .. "</span>" or ""
    heads[#heads + 1] = ('<th scope="col" class="number">%s%s</th>'):format(html(words_of(column.name)), unit)
  end
  for _, name in ipairs(study.texts) do heads[#heads + 1] = element('th scope="col"', html(name)) end
  local lines = { '<div class="scroll" tabindex="0" role="region" aria-label="Results">\n<table class="results">\n<thead>' .. group_row(study) ..
    "<tr>" .. table.concat(heads) .. "</tr></thead>\n<tbody>" }
  for _, row in ipairs(study.rows) do
    local cells = { element('th scope="row"', html(row.name)) }
    for i, column in ipairs(study.columns) do cells[#cells + 1] = result_cell(column, row.cells[i]) end
    for _, name in ipairs(study.texts) do cells[#cells + 1] = element('td class="text"', html(row.texts[name] or "")) end
    lines[#lines + 1] = "<tr>" .. table.concat(cells) .. "</tr>"
  end
  lines[#lines + 1] = "</tbody>\n</table>\n</div>\n<p class=\"small\">— is what could not be derived; the notes say why. A percentage is a share of all draws.</p>"
  return table.concat(lines, "\n")
end

-- Derivations ------------------------------------------------------------------------------------------------------------------------

local function source_of(row) return row.source == "definition" and "by definition" or html(words_of(row.by)) .. ": " .. html(relations.source(row)) end

local function step_html(step)
  local lines = { ("<p><strong>%s</strong> = %s"):format(html(words_of(step.name)), html(step.value)) }
  local function add(form, ...) lines[#lines + 1] = form:format(...) end
  if step.kind == "given" then add(", given%s</p>", step.source and " (" .. html(step.source) .. ")" or "")
  elseif step.kind == "assumed" then
    add(", assumed (%s)%s</p>", html(relations.source(step.row)), step.row.supposes and ": " .. html(step.row.supposes) or "")
  else
    add("</p>")
    if step.equation then add('<div class="equation">%s</div>', derivation.equation_mathml(step)) end
    local numbers = derivation.numbers_mathml(step)
    if numbers then add('<div class="equation">%s</div>', (numbers:gsub("^(<math[^>]*>)", "%1<mo>=</mo>"))) end
    add('<p class="small">%s%s</p>', source_of(step.row), step.row.supposes and "; supposes " .. html(step.row.supposes) or "")
    for _, warning in ipairs(step.warnings) do add('<p class="small"><strong>Beware:</strong> %s</p>', html(english.in_words(warning))) end
  end
  return table.concat(lines)
end

-- "gap width by Kanagawa et al. 2016 instead of ..."
local function with_other(other)
  local name = other.name
  return ("%s by %s instead of %s"):format(words_of(name), verdicts.recipe_name(name, other.row.by), verdicts.recipe_name(name, other.instead_of))
end

local function chain_html(one)
  local chain, parts = one.chain, {}
  local function add(part) parts[#parts + 1] = part end
  add(("<p>%s%s.</p>"):format(html(english.capital(chain.meaning)), chain.numbers and "; " .. html(chain.numbers) or ""))
  local steps = {}
  for i, step in ipairs(chain.steps) do steps[i] = element("li", step_html(step)) end
  add("<ol class=\"steps\">\n" .. table.concat(steps, "\n") .. "\n</ol>")
  if #chain.conditions > 0 then
    local conditions = {}
    for i, condition in ipairs(chain.conditions) do conditions[i] = html(english.in_words(condition)) end
    if chain.unchecked then conditions[#conditions + 1] = "not checked: " .. html(english.in_words(chain.unchecked)) end
    add("<p>Its conditions:</p>\n" .. item_list(conditions))
  end
  if #chain.others > 0 then
    local others = {}
    for i, other in ipairs(chain.others) do
      others[i] = html(("%s: %s"):format(with_other(other), other.value))
    end
    add("<p>With another recipe:</p>\n" .. item_list(others))
  end
  return ("<details>\n<summary>%s: %s</summary>\n%s\n</details>"):format(html(words_of(chain.name)), html(chain.value:match "^[^:]*"), table.concat(parts, "\n"))
end

local function derivations(parts)
  local lines = { ("<p>The chains of relations for %s; the other targets go the same ways, but where the notes say otherwise.</p>"):format(html(parts.row.name)) }
  for _, group in ipairs(by_group(parts.chains, function(one) return one.column.group end)) do
    if group.name then lines[#lines + 1] = element("h3", html(group.name)) end
    for _, one in ipairs(group) do lines[#lines + 1] = chain_html(one) end
  end
  return table.concat(lines, "\n")
end

-- Inputs -----------------------------------------------------------------------------------------------------------------------------

-- The names that targets give themselves, and each target's text for them.
local function own_givens(study)
  local named, texts = {}, {}
  for i, row in ipairs(study.rows) do
    local ok, self = pcall(function() return row.case end)
    texts[i] = {}
    for name in pairs(ok and self and core.info(self).givens or {}) do
      if not study.groups[1].givens[name] then named[name], texts[i][name] = true, text.given(self, name) end
    end
  end
  local names = {}
  for _, name in ipairs(core.names()) do if named[name] then names[#names + 1] = name end end
  return names, texts
end

local function givens_table(study)
  local names, texts = own_givens(study)
  local head, rows = { "Star" }, {}
  for i, name in ipairs(names) do head[i + 1] = html(words_of(name)) end
  for i, row in ipairs(study.rows) do
    rows[i] = { html(row.name) }
    for j, name in ipairs(names) do rows[i][j + 1] = texts[i][name] and html(texts[i][name]) or "—" end
  end
  return plain_table("Givens of the targets", head, rows, "values")
end

local function common_givens(study)
  local items = {}
  for _, group in ipairs(study.groups) do
    local given = feasibility.givens_of(group, study)
    if #given > 0 then items[#items + 1] = html((group.name and group.name .. ": " or "") .. table.concat(given, ", ")) end
  end
  return #items > 0 and "<p>Given for all targets:</p>\n" .. item_list(items) or ""
end

local function input_file(input)
  local link = ('<a href="%s">%s</a>'):format(html(input.name:gsub("[^%w%-_./]", function(byte) return ("%%%02X"):format(byte:byte()) end)), html(input.name))
  if #input.content > LONGEST_SHOWN or not utf8.len(input.content) then return "<p>" .. link .. "</p>" end
  return ('<details>\n<summary>%s</summary>\n<p>%s</p>\n<pre tabindex="0"><code>%s</code></pre>\n</details>')
    :format(input.is_study and "The study" or "File " .. html(input.name), link, html(input.content))
end

local function inputs(study, facts)
  local parts = { givens_table(study), common_givens(study) }
  for _, input in ipairs(facts.inputs) do parts[#parts + 1] = input_file(input) end
  return table.concat(parts, "\n")
end

-- What it rests on -------------------------------------------------------------------------------------------------------------------

-- Rows of all targets' relations that `wanted` lets pass, each as cells.
local function relation_rows(study, wanted, cells)
  local used, rows = notes.relations_used(study), {}
  for _, name in ipairs(used.keys) do
    for _, by in ipairs(used.values[name].keys) do
      local row = used.values[name].values[by].relation
      if row and wanted(row) then rows[#rows + 1] = cells(name, row) end
    end
  end
  return rows
end

local function assumptions(study)
  local rows = relation_rows(study, function(row) return row.kind == "assumed" end,
    function(name, row) return { html(words_of(name)), html(row.assumes), html(relations.source(row)), html(row.supposes or "") } end)
  if #rows == 0 then return "<p>Nothing is assumed.</p>" end
  return plain_table("Assumptions", { "Quantity", "Assumed", "Source", "Which supposes" }, rows)
end

local function recipes(study, parts)
  local rows = relation_rows(study, function(row) return row.kind ~= "assumed" and row.kind ~= "definition" and row.source ~= "definition" end,
    function(name, row) return { html(words_of(name)), element("code", html(row.by)), html(relations.source(row)), html(row.supposes or "") } end)
  local lines = { #rows > 0 and plain_table("Recipes", { "Quantity", "Recipe", "Source", "Supposes" }, rows) or "<p>All follows by definition.</p>" }
  local others = {}
  for i, found in ipairs(derivation.others(parts.chains)) do
    others[i] = { html((found.column.group and found.column.group .. ": " or "") .. words_of(found.chain.name)), html(found.chain.value:match "^[^:]*"),
      html(with_other(found.other)), html(found.other.value),
      html(relations.source(found.other.row)) }
  end
  if #others > 0 then
    lines[#lines + 1] = element("h3", "What other recipes would have given for " .. html(parts.row.name))
    lines[#lines + 1] = plain_table("What other recipes would have given", { "Asked", "Here", "With", "Would be", "Source" }, others)
  end
  return table.concat(lines, "\n")
end

local shown_elsewhere = { ["Given for all targets"] = true, Assumed = true, Recipes = true }

local function notes_html(study)
  local parts = {}
  for _, note in ipairs(study.notes) do
    if not shown_elsewhere[note.heading] then
      local items = {}
      for i, line in ipairs(note.lines) do
        if type(line) == "string" then items[i] = html(english.in_words(line))
        else
          local inner = {}
          for j = 2, #line do inner[j - 1] = html(english.in_words(line[j])) end
          items[i] = html(english.in_words(line[1])) .. item_list(inner)
        end
      end
      parts[#parts + 1] = element("h3", html(note.heading)) .. "\n" .. item_list(items)
    end
  end
  return table.concat(parts, "\n")
end

-- The rest ---------------------------------------------------------------------------------------------------------------------------

local function figures(list)
  local parts = {}
  for i, figure in ipairs(list) do
    local svg = figure.svg:gsub("^<%?xml.-%?>%s*", ""):gsub("^<!DOCTYPE.->%s*", "")
    parts[i] = ('<figure>\n<div class="scroll" tabindex="0" role="region" aria-label="Figure %d">%s</div>\n<figcaption>%s</figcaption>\n</figure>')
      :format(i, svg, html(figure.caption))
  end
  return table.concat(parts, "\n")
end

local function draft(composed)
  local parts = { "<p>A draft, to be edited; <a href=\"feasibility.txt\">feasibility.txt</a> and <a href=\"feasibility.tex\">feasibility.tex</a> have the same.</p>" }
  for _, paragraph in ipairs(feasibility.paragraphs(composed)) do parts[#parts + 1] = element("p", html(paragraph)) end
  return '<div class="draft">\n' .. table.concat(parts, "\n") .. "\n</div>"
end

local function about(facts, missing)
  local items = {
    "Lacuna " .. facts.version .. ", " .. facts.date,
    ("%d draws, seed %d; a share is one of all draws, undefined ones among them; an error bar is the central 68 %% of draws."):format(facts.draws, facts.seed),
    'The table as <a href="table.csv">CSV</a>, <a href="table.md">Markdown</a>, <a href="table.tex">LaTeX</a>' .. (facts.has_fits and ', <a href="table.fits">FITS</a>' or "") ..
      '; a document in LaTeX: <a href="report.tex">report.tex</a> with <a href="references.bib">references.bib</a>.',
  }
  if facts.command then items[#items + 1] = "To make this again, in its folder: <code>" .. html(facts.command) .. "</code>" end
  items[#items + 1] = "<code>manifest.txt</code> has the hashes of all files."
  for _, words in ipairs(missing) do items[#items + 1] = "Left out: " .. html(words) end
  return item_list(items)
end

function page.of(study, parts)
  local title = html(study.title or "Report of a study")
  local sections = { { "answers", "What can be resolved", answers(study) }, { "table", "Table", results(study) } }
  local function add(id, heading, content) sections[#sections + 1] = { id, heading, content } end
  if #parts.figures > 0 then add("figures", "Figures", figures(parts.figures)) end
  add("derivations", "Derivations", derivations(parts))
  add("inputs", "Inputs", inputs(study, parts.facts))
  add("assumptions", "Assumptions", assumptions(study))
  add("recipes", "Recipes", recipes(study, parts))
  add("notes", "Notes", notes_html(study))
  add("text", "Text for the proposal", draft(parts.composed))
  add("about", "About this report", about(parts.facts, parts.missing))
  local links, contents = {}, {}
  for i, one in ipairs(sections) do
    links[i] = ('<li><a href="#%s">%s</a></li>'):format(one[1], one[2])
    contents[i] = section(one[1], one[2], one[3])
  end
  return ('<!DOCTYPE html>\n<html lang="en">\n<head>\n<meta charset="utf-8">\n<meta name="viewport" content="width=device-width, initial-scale=1">\n' ..
    '<meta name="color-scheme" content="light dark">\n<title>%s</title>\n<link rel="icon" href="data:,">\n<style>\n%s</style>\n</head>\n<body>\n<header>\n<h1>%s</h1>\n' ..
    '<nav aria-label="Contents"><ul>%s</ul></nav>\n</header>\n<main>\n%s\n</main>\n</body>\n</html>\n'):format(title, style, title, table.concat(links), table.concat(contents, "\n"))
end

return page
