-- SPDX-License-Identifier: GPL-3.0-or-later
-- The "technical feasibility" of a proposal as a draft: paragraphs in plain English, composed from what a study found, with the numbers, the
-- recipes, what they suppose and the range over recipes. No verdict stands in it without these.
--
--   of(study, chains, facts)    a text: { paragraphs = { { sentences } }, cited = rows }; chains as derivation.of_study gives them
--   givens_of(group, study)     what is given for all targets in a group, as a list of texts
--   paragraphs(text)            as plain text, one line a paragraph
--   plain(text)                 the whole as plain text, lines of at most 100 columns
--   tex(text, cited)            as LaTeX that cites a bibliography's keys
local core = ...
local bibliography = core.part "lacuna.bibliography"
local changes = core.part "lacuna.changes"
local english = core.part "lacuna.english"
local format = core.part "lacuna.format"
local notes = core.part "lacuna.notes"
local tables = core.part "lacuna.table"
local table_tex = core.part "lacuna.table_tex"
local ordered = core.part "lacuna.ordered"
local relations = core.part "lacuna.relations"
local verdicts = core.part "lacuna.verdicts"

local feasibility = {}
local words_of, capital, plural = english.words_of, english.capital, english.plural

-- Sentences may cite: a mark stands for the row whose source is meant until the text is written out.
local function citing(cited)
  return function(row)
    cited[#cited + 1] = row
    return "\1" .. #cited .. "\2"
  end
end

-- The sentences that there are.
local function present(...)
  local sentences = {}
  for i = 1, select("#", ...) do
    local sentence = select(i, ...)
    if sentence then sentences[#sentences + 1] = sentence end
  end
  return sentences
end

-- Targets and instruments ------------------------------------------------------------------------------------------------------------

local function targets_sentence(study)
  local names, selected = verdicts.names_of(study.rows), study.selected
  local words = #names == 1 and "The target is " .. names[1] or ("The sample has %d targets: %s"):format(#names, english.list(names, 12))
  return words .. (selected and (", chosen out of %d by %s"):format(selected.of, english.in_words(selected.words)) or "") .. "."
end

-- "20 m:330 m:6" of the command line in words.
local function swept(written) return (written:gsub("^%s*(.-)%s*:%s*(.-)%s*:%s*(%d+)%s*$", "from %1 to %2 (%3 values)")) end

-- What is given for all targets of a group, "wavelength 1.65 um" and so on. What the command line sets goes before it, and stands with the first.
local function givens_of(group, study)
  local parts, first, set = {}, study.groups[1], study.set
  for _, name in ipairs(core.names()) do
    local own = set.givens[name] or set.objects[name]
    local written = group.own[name] and group.written[name]
    local object = group.objects[name]
    if object and (group == first or first.objects[name] ~= object) then written = tostring(object) end
    if own then written = group == first and swept(set.written[name] or tostring(own)) end
    if written then parts[#parts + 1] = words_of(name) .. " " .. written end
    if group.chosen[name] then parts[#parts + 1] = words_of(name) .. " by " .. verdicts.recipe_name(name, group.chosen[name]) end
  end
  return parts
end

feasibility.givens_of = givens_of

local function givens_sentence(study)
  local parts = givens_of(study.groups[1], study)
  if #parts == 0 then return nil end
  return ("For all of them we take %s."):format(english.list(parts, #parts)):gsub("^For all of them we", #study.rows == 1 and "We" or "%0")
end

local function draws_sentence(study, facts)
  if not verdicts.has_draws(study) then return "No given has an error bar; all numbers are single ones." end
  return ("The error bars are carried through all relations by %d draws (seed %d): errors span the central 68 %% of them, and a share is one of all draws.")
    :format(facts.draws, facts.seed)
end

-- Quantities -------------------------------------------------------------------------------------------------------------------------

local function value_text(cell, column)
  return format.with_unit(tables.cell_text(cell), column.unit_text)
end

local function middle(cell)
  if cell.value then return cell.value end
  for _, value in ipairs(cell.values or {}) do if value == value then return value end end
end

-- The rows with the least and the greatest value of a column, and how many have one.
local function ends_of(study, number)
  local low, high, count = nil, nil, 0
  for _, row in ipairs(study.rows) do
    local value = middle(row.cells[number])
    if value and value == value then
      count = count + 1
      if not low or value < middle(low.cells[number]) then low = row end
      if not high or value > middle(high.cells[number]) then high = row end
    end
  end
  return low, high, count
end

local function quantity_sentence(study, number, column, known)
  local low, high, count = ends_of(study, number)
  if count == 0 then return nil end
  local name = words_of(column.name)
  local said = known and "" or (" (%s)"):format(english.in_words(column.entry.meaning))
  if count == 1 or low == high then
    return ("The %s%s%s is %s."):format(name, said, #study.rows > 1 and " of " .. low.name or "", value_text(low.cells[number], column))
  end
  return ("The %s%s runs from %s (%s) to %s (%s)."):format(name, said, value_text(low.cells[number], column), low.name, value_text(high.cells[number], column), high.name)
end

-- Verdicts ---------------------------------------------------------------------------------------------------------------------------

local function what_shares_are_of(one) return one.of_points and " of the draws and points" or " of the draws" end

local function percent_words(share) return (format.percent(share):gsub("^> ", "more than "):gsub("^< ", "less than ")) end

local MOST_SHARES = 5 -- told one by one

-- "12 to 87 %"
local function span_of(rows)
  local low, high = math.huge, -math.huge
  for _, row in ipairs(rows) do low, high = math.min(low, row.cell.share), math.max(high, row.cell.share) end
  return (verdicts.percent(low):gsub(" %%$", "")) .. " to " .. verdicts.percent(high)
end

-- "in at least 90 % of the draws for 3 of the 12 targets (A, B and C), in 45 % for Lumbric 2 and in at most 10 % for the others"
local function by_share(one, all, draws)
  local parts, open = {}, {}
  local function add(words, who)
    parts[#parts + 1] = words .. draws .. " for " .. who
    draws = ""
  end
  if #one.yes > 0 then add("in at least " .. format.percent(verdicts.MOSTLY), verdicts.count(one.yes, all)) end
  if #one.between > MOST_SHARES then add("in " .. span_of(one.between), verdicts.count(one.between, all))
  else
    for i, row in ipairs(one.between) do open[i] = ("%s%s for %s"):format(verdicts.percent(row.cell.share), #parts == 0 and i == 1 and draws or "", row.name) end
    if #open > 0 then parts[#parts + 1], draws = "in " .. english.list(open), "" end
  end
  if #one.no > 0 then add("in at most " .. format.percent(verdicts.HARDLY), verdicts.count(one.no, all)) end
  return table.concat(parts, "; ")
end

local function without_draws(one, all)
  local subject, verb = one.words:match "^(.-) is (.*)$"
  if not subject then subject, verb = one.words, "so" end
  if #one.no == 0 then return ("%s is %s for %s"):format(subject, verb, verdicts.count(one.yes, all)) end
  if #one.yes == 0 then return ("%s is not %s for %s"):format(subject, verb, #one.no == all and all > 1 and "any of the targets" or verdicts.count(one.no, all)) end
  return ("%s is %s for %s, and not for %s"):format(subject, verb, verdicts.count(one.yes, all), verdicts.count(one.no, all))
end

local function single_share(row, one)
  local share = row.cell.share
  return (share == 0 and "in none" or share == 1 and "in all" or "in " .. percent_words(share)) .. what_shares_are_of(one)
end

local function reason_sentence(one)
  if #one.reasons == 0 then return nil end
  local parts = {}
  for i = 1, math.min(2, #one.reasons) do
    local reason = one.reasons[i]
    parts[i] = verdicts.reason_words(reason.words) .. (#one.no + #one.between > 1 and (" (%d %s)"):format(reason.count, plural(reason.count, "target")) or "")
  end
  return ("Where it is not resolved, %s."):format(english.list(parts))
end

-- "from 43 m (Quillon A) to 290 m (Marrow 8) for 9 of the 12 targets"; few are told one by one.
local function turning_words(list, word, all)
  if #list == 0 then return nil end
  if #list > MOST_SHARES then
    table.sort(list, function(a, b) return a.value < b.value end)
    return ("%s %s (%s) to %s (%s) for %s"):format(word, list[1].at, list[1].name, list[#list].at, list[#list].name, verdicts.count(list, all))
  end
  local parts = {}
  for i, one in ipairs(list) do parts[i] = one.at .. " for " .. one.name end
  return word .. " " .. english.list(parts)
end

-- Where along a sweep a verdict says yes; nil where it isn't along one.
local function along_sweep(study, one)
  local along, all = verdicts.along(study, one), #study.rows
  if not along then return nil end
  local parts = present(turning_words(along.from, "from", all), turning_words(along.up_to, "up to", all),
    #along.everywhere > 0 and "at all values for " .. verdicts.count(along.everywhere, all), #along.nowhere > 0 and "at no value for " .. verdicts.count(along.nowhere, all))
  return ("Along the %s, %s in half of the draws or more %s."):format(words_of(along.sweep.name), one.words, table.concat(parts, "; "))
end

local function verdict_sentences(study, one, draws)
  local known, all = #one.yes + #one.between + #one.no, #study.rows
  if known == 0 then return {} end
  local along = along_sweep(study, one)
  if along then return present(along, reason_sentence(one)) end
  local answer
  if not draws then answer = without_draws(one, all)
  elseif all == 1 then answer = ("%s %s"):format(one.words, single_share(one.yes[1] or one.between[1] or one.no[1], one))
  else answer = one.words .. " " .. by_share(one, all, what_shares_are_of(one)) end
  return present(capital(answer) .. ".", reason_sentence(one))
end

local function share_words(share) return share == 1 and "yes" or share == 0 and "no" or percent_words(share) .. " of the draws" end

local MOST_NAMES = 9 -- of targets that a recipe changes; beyond, their number will do
local function share_words(share) return share == 1 and "yes" or share == 0 and "no" or percent_words(share) .. " of the draws" end

-- The range over recipes --------------------------------------------------------------------------------------------------------------

-- What each other recipe does in the whole study: { words, quantities = list of { name, low, high, magnitude }, changes = texts, of_verdict }.
local function other_recipes(study, of_verdicts)
  local found = {}
  local function entry_of(words)
    if not found[words] then
      found[words] = { words = words, quantities = {}, changes = {} }
      found[#found + 1] = found[words]
    end
    return found[words]
  end
  for number, column in ipairs(study.columns) do
    for _, recipe in ipairs(column.verdict and {} or changes.of(study, number)) do
      local quantities = entry_of(recipe.words).quantities
      local range = quantities[column.name]
      if not range then
        range = { name = column.name, low = math.huge, high = -math.huge, magnitude = column.unit == "mag" }
        quantities[column.name], quantities[#quantities + 1] = range, range
      end
      range.low, range.high = math.min(range.low, recipe.low), math.max(range.high, recipe.high)
    end
  end
  for _, one in ipairs(of_verdicts) do
    for _, recipe in ipairs(one.recipes) do
      local entry = entry_of(recipe.words)
      entry.of_verdict = true
      if #recipe.names > 0 then
        local who = recipe.asked == 1 and recipe.names[1] .. ", to " .. share_words(recipe.low)
          or #recipe.names > MOST_NAMES and ("%d of %d targets"):format(#recipe.names, recipe.asked)
          or ("%d of %d targets (%s)"):format(#recipe.names, recipe.asked, english.list(recipe.names))
        table.insert(entry.changes, ("whether %s%s changes for %s"):format(one.words, one.column.group and " (" .. one.column.group .. ")" or "", who))
      end
    end
  end
  return found
end

-- "the gap size angle would be 0.89 to 1 times as large"; nil where nothing is changed.
local function range_words(range)
  if range.low > range.high then return nil end
  local low, high = format.number(range.low, 2), format.number(range.high, 2)
  if range.magnitude then low, high = ("%+.2f"):format(range.low), ("%+.2f"):format(range.high) end
  if low == high and (low == "1" or range.magnitude and low:find "^.0.00$") then return nil end
  return ("the %s would be %s %s"):format(words_of(range.name), low == high and low or low .. " to " .. high, range.magnitude and "mag different" or "times as large")
end

-- No verdict is said without this.
local function recipes_sentence(study, of_verdicts, draws)
  local parts, unchanged = {}, {}
  for _, entry in ipairs(other_recipes(study, of_verdicts)) do
    local does = {}
    for _, range in ipairs(entry.quantities) do does[#does + 1] = range_words(range) end
    if #does > 0 and entry.of_verdict and #entry.changes == 0 then does[#does + 1] = draws and "no answer would move across one half of the draws" or "no answer would change" end
    table.move(entry.changes, 1, #entry.changes, #does + 1, does)
    if #does > 0 then parts[#parts + 1] = ("with %s, %s"):format(verdicts.recipe_words(entry.words), english.list(does, #does))
    else unchanged[#unchanged + 1] = verdicts.recipe_words(entry.words) end
  end
  if #unchanged > 0 then
    parts[#parts + 1] = ("%s would %s"):format(english.list(unchanged, #unchanged), #of_verdicts == 0 and "change nothing" or draws and "move no answer across one half of the draws" or "change no answer")
  end
  if #parts == 0 then return "What is given allows no other published recipe on the way to these answers." end
  return "Over the recipes: " .. table.concat(parts, "; ") .. "."
end

-- What could not be derived ----------------------------------------------------------------------------------------------------------

-- In how many groups a name is asked.
local function times_asked(study, name)
  local count = 0
  for _, column in ipairs(study.columns) do if column.name == name then count = count + 1 end end
  return count
end

-- "the gap size angle", "whether the gap is resolved by the array (planet at 1 au)"
local function column_words(column, groups, study)
  local words = column.verdict and "whether " .. verdicts.sentence_of(column) or "the " .. words_of(column.name)
  return #groups < times_asked(study, column.name) and ("%s (%s)"):format(words, english.list(groups)) or words
end

-- What a target lacks for one reason, in words.
local function lacking_words(columns, study)
  if #columns == #study.columns then return "nothing" end
  local groups, order = {}, {}
  for _, column in ipairs(columns) do
    if not groups[column.name] then groups[column.name], order[#order + 1] = {}, column end
    table.insert(groups[column.name], column.group or "without a variant")
  end
  for i, column in ipairs(order) do order[i] = column_words(column, groups[column.name], study) end
  return english.list(order)
end

-- Which targets lack what and why: those that lack the same for the same reason at once.
local function missing_sentences(study)
  local sentences, by_key = {}, {}
  for _, row in ipairs(study.rows) do
    local reasons, order = {}, {}
    for number, column in ipairs(study.columns) do
      local cell = row.cells[number]
      if cell.missing then
        if not reasons[cell.reason] then reasons[cell.reason], order[#order + 1] = {}, cell.reason end
        table.insert(reasons[cell.reason], column)
      end
    end
    for _, reason in ipairs(order) do
      local words = lacking_words(reasons[reason], study)
      local key = words .. "\0" .. reason
      if not by_key[key] then
        by_key[key] = { names = {}, words = words, reason = reason }
        sentences[#sentences + 1] = by_key[key]
      end
      table.insert(by_key[key].names, row.name)
    end
  end
  for i, one in ipairs(sentences) do
    sentences[i] = ("For %s %s could%s be derived (%s)."):format(english.list(one.names), one.words, one.words == "nothing" and "" or " not", english.in_words(one.reason))
  end
  return sentences
end

-- Everything asked of one group of columns, quantities before verdicts.
local function group_paragraph(study, group, of_verdicts, draws, said)
  local sentences = {}
  local function add(sentence) if sentence then sentences[#sentences + 1] = sentence end end
  for number, column in ipairs(study.columns) do
    if column.group == group.name and not column.verdict then
      add(quantity_sentence(study, number, column, said[column.name]))
      said[column.name] = true
    end
  end
  for _, one in ipairs(of_verdicts) do
    for _, sentence in ipairs(one.column.group == group.name and verdict_sentences(study, one, draws) or {}) do add(sentence) end
  end
  local parts = group.name and #sentences > 0 and givens_of(group, study)
  if parts then table.insert(sentences, 1, ("%s%s:"):format(capital(group.name), #parts > 0 and " (" .. english.list(parts, #parts) .. ")" or "")) end
  return sentences
end

-- What it rests on -------------------------------------------------------------------------------------------------------------------

-- "gap width after Kanagawa et al. 2016", each recipe once with all the names it gives: those that are published, and common practice.
local function recipe_parts(used, cite)
  local by_recipe = ordered.new()
  for name, recipes in ordered.each(used) do
    for _, entry in ordered.each(recipes) do
      local row = entry.relation
      if row and row.kind ~= "definition" and row.kind ~= "assumed" and row.source ~= "definition" then
        local names = ordered.at(by_recipe, row.by .. "\0" .. row.source, function() return { row = row } end)
        names[#names + 1] = words_of(name)
      end
    end
  end
  local published, practice = {}, {}
  for _, entry in ordered.each(by_recipe) do
    local what, by = english.list(entry, 3), words_of(entry.row.by)
    if not bibliography.short(entry.row) then practice[#practice + 1] = what .. " (" .. by .. ")"
    elseif entry.row.by:find "_%d%d%d%d" then published[#published + 1] = what .. " after " .. cite(entry.row)
    else published[#published + 1] = what .. " by " .. by .. " after " .. cite(entry.row) end
  end
  return published, practice
end

local function assumption_parts(used, cite)
  local parts = {}
  for name, recipes in ordered.each(used) do
    for _, entry in ordered.each(recipes) do
      local row = entry.relation
      if row and row.kind == "assumed" then parts[#parts + 1] = ("%s = %s (%s)"):format(words_of(name), row.assumes, cite(row)) end
    end
  end
  return parts
end

-- What a verdict could not look at, for want of a given: each once.
local function unchecked_sentence(study, used)
  local parts, seen = {}, {}
  for _, column in ipairs(study.columns) do
    for _, entry in ordered.each(column.verdict and used.values[column.name] or ordered.new()) do
      local row = entry.relation
      local words = row and row.unchecked and english.in_words(row.unchecked)
      if words and not seen[words] then
        seen[words] = true
        parts[#parts + 1] = ("whether %s: %s"):format(verdicts.sentence_of(column), words)
      end
    end
  end
  if #parts > 0 then return "Not checked for the answer to " .. table.concat(parts, "; nor for that to ") .. "." end
end

-- The targets' names by what is to be said of them, in the order of the rows.
local function by_words(study, words_of_cell)
  local found = ordered.new()
  for _, row in ipairs(study.rows) do
    for _, cell in ipairs(row.cells) do
      for _, words in ipairs(words_of_cell(cell)) do ordered.note(ordered.at(found, words), row.name) end
    end
  end
  return found
end

local function validity_sentence(study)
  local parts = {}
  for words, names in ordered.each(by_words(study, function(cell) return cell.outside or {} end)) do
    parts[#parts + 1] = ("the recipe %s (outside for %s)"):format(english.in_words(words), english.list(names.keys))
  end
  if #parts > 0 then return capital(table.concat(parts, "; ")) .. ": there the numbers are extrapolated." end
end

local function undefined_sentence(study)
  local found = by_words(study, function(cell) return cell.undefined and cell.undefined > 0 and { "undefined" } or {} end).values.undefined
  if found then return ("Some draws are undefined for %s; they count as draws that say no."):format(english.list(found.keys)) end
end

local function basis_paragraph(study, cite)
  local used = notes.relations_used(study)
  local published, practice = recipe_parts(used, cite)
  local assumed = assumption_parts(used, cite)
  return present(
    #published > 0 and ("These numbers rest on the %s %s."):format(plural(#published, "recipe"), table.concat(published, "; ")),
    #practice > 0 and ("Common practice, without a published source, %s %s."):format(plural(#practice, "is", "are"), table.concat(practice, "; ")),
    #published + #practice == 0 and "All of these numbers follow by definition from what is given." or "What each supposes stands with the derivations.",
    #assumed > 0 and ("Assumed, as not measured for %s: %s."):format(#study.rows == 1 and "the target" or "these targets",
      english.list(assumed, #assumed)) or "Nothing is assumed.",
    validity_sentence(study), undefined_sentence(study), unchecked_sentence(study, used))
end

-- What a yes means; what is not checked has a sentence of its own.
local function criteria_sentence(study)
  local parts = {}
  for i, line in ipairs(notes.criteria(study)) do
    parts[i] = english.in_words(line):gsub("; not checked: .*", ""):gsub("…%s*", ""):gsub("^resolved by (%a+): ", "by the %1 where "):gsub(", and ", " and "):gsub(": %S+ = ", " "):gsub("^%a+ resolution ", "the %0")
  end
  return #parts > 0 and ("Resolved means geometrically resolved, %s."):format(table.concat(parts, "; ")) or "Resolved means geometrically resolved."
end

local function detection_paragraph(study, has_verdicts)
  local asked
  for number, column in ipairs(study.columns) do
    if column.name == "rim_drop_significance" and select(3, ends_of(study, number)) > 0 then asked = true end
  end
  return present(has_verdicts and criteria_sentence(study),
    asked and "Detection is assessed for the rim alone, by the drop of its squared visibility in standard errors; whether any other structure is detected is not assessed."
      or ("Whether a structure is %sdetected is not assessed here."):format(has_verdicts and "also " or ""),
    "These are estimates of feasibility; the observatory's own documents and staff decide.")
end

function feasibility.of(study, facts)
  local cited, said = {}, {}
  local cite = citing(cited)
  local of_verdicts, draws = verdicts.of(study), verdicts.has_draws(study)
  local paragraphs = { present(targets_sentence(study), givens_sentence(study), draws_sentence(study, facts)) }
  for _, group in ipairs(study.groups) do
    local sentences = group_paragraph(study, group, of_verdicts, draws, said)
    if #sentences > 0 then paragraphs[#paragraphs + 1] = sentences end
  end
  local range = present(recipes_sentence(study, of_verdicts, draws), table.unpack(missing_sentences(study)))
  if #of_verdicts == 0 then range[#range + 1] = "No verdict was asked: whether anything is resolved is left open." end
  paragraphs[#paragraphs + 1] = range
  paragraphs[#paragraphs + 1] = basis_paragraph(study, cite)
  paragraphs[#paragraphs + 1] = detection_paragraph(study, #of_verdicts > 0)
  return { paragraphs = paragraphs, cited = cited, by = facts.version }
end

-- Written out ------------------------------------------------------------------------------------------------------------------------

local DRAFT = "Draft, to be edited: composed from the results"

local function short_or_words(row) return bibliography.short(row) or relations.source(row) end

-- The paragraphs as plain text, each one line.
function feasibility.paragraphs(composed)
  local paragraphs = {}
  for i, sentences in ipairs(composed.paragraphs) do
    paragraphs[i] = table.concat(sentences, " "):gsub("\1(%d+)\2", function(number) return short_or_words(composed.cited[tonumber(number)]) end)
  end
  return paragraphs
end

function feasibility.plain(composed)
  local paragraphs = { DRAFT .. "." }
  for _, words in ipairs(feasibility.paragraphs(composed)) do paragraphs[#paragraphs + 1] = table.concat(format.wrapped(words, tables.WIDTH), "\n") end
  return table.concat(paragraphs, "\n\n") .. "\n"
end

function feasibility.tex(composed, cited)
  local paragraphs = { "% " .. DRAFT, "\\emph{" .. DRAFT .. ".}" }
  for _, sentences in ipairs(composed.paragraphs) do
    local words = table_tex.escaped(table.concat(sentences, " "))
    paragraphs[#paragraphs + 1] = words:gsub("\1(%d+)\2", function(number)
      local row = composed.cited[tonumber(number)]
      local key = cited:key(row)
      return key and "\\cite{" .. key .. "}" or table_tex.escaped(relations.source(row))
    end)
  end
  return table.concat(paragraphs, "\n\n") .. "\n"
end

return feasibility
