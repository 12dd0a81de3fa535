-- SPDX-License-Identifier: GPL-3.0-or-later
-- The "technical feasibility" of a proposal as a draft: paragraphs in plain English, composed from what a study found, with the numbers, the
-- recipes, what they suppose and the range over recipes. No verdict stands in it without these.
--
--   of(study, chains, facts)    a text: { paragraphs = { { sentences } }, cited = rows }; chains as derivation.of_study gives them
--   givens_of(group, first)     what is given for all targets in a group, as a list of texts
--   paragraphs(text)            as plain text, one line a paragraph
--   plain(text)                 the whole as plain text, lines of at most 100 columns
--   tex(text, cited)            as LaTeX that cites a bibliography's keys
local core = ...
local bibliography = core.part "lacuna.bibliography"
local format = core.part "lacuna.format"
local notes = core.part "lacuna.notes"
local tables = core.part "lacuna.table"
local text = core.part "lacuna.text"
local verdicts = core.part "lacuna.verdicts"

local feasibility = {}
local WIDTH = 100
local words_of = verdicts.words_of

-- Sentences may cite: a mark stands for the row whose source is meant until the text is written out.
local function citing(cited)
  return function(row)
    cited[#cited + 1] = row
    return "\1" .. #cited .. "\2"
  end
end

local function capital(words) return (words:gsub("^%l", string.upper)) end

-- The sentences that there are.
local function present(...)
  local sentences = {}
  for i = 1, select("#", ...) do
    local sentence = select(i, ...)
    if sentence then sentences[#sentences + 1] = sentence end
  end
  return sentences
end

local function plural(count, one, many) return count == 1 and one or many or one .. "s" end

-- Targets and instruments ------------------------------------------------------------------------------------------------------------

local function targets_sentence(study)
  local names = verdicts.names_of(study.rows)
  if #names == 1 then return ("The target is %s."):format(names[1]) end
  return ("The sample has %d targets: %s."):format(#names, verdicts.list(names, 12))
end

-- What is given for all targets of a group, "wavelength 1.65 um, ...".
local function givens_of(group, first)
  local parts = {}
  for _, name in ipairs(core.names()) do
    local written = group.own[name] and group.written[name]
    local object = group.objects[name]
    if object and not (first and first.objects[name] == object) then written = tostring(object) end
    if written then parts[#parts + 1] = words_of(name) .. " " .. written end
  end
  return parts
end

feasibility.givens_of = givens_of

local function givens_sentence(study)
  local parts = givens_of(study.groups[1])
  if #parts == 0 then return nil end
  return ("For all of them we take %s."):format(verdicts.list(parts, #parts)):gsub("^For all of them we", #study.rows == 1 and "We" or "%0")
end

local function draws_sentence(study, facts)
  if not verdicts.has_draws(study) then return "No given has an error bar; all numbers are single ones." end
  return ("The error bars are carried through all relations by %d draws (seed %d): an error is half the central 68 %% of them or one side of it, and a fraction is one of all draws.")
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

-- By how much other recipes would change a quantity: "(over the recipes, ... )".
local function recipes_of_quantity(study, number, column)
  local parts = {}
  for _, recipe in ipairs(verdicts.recipes(study, number)) do
    local magnitude = column.unit == "mag"
    local low, high = format.number(recipe.low, 2), format.number(recipe.high, 2)
    if magnitude then low, high = ("%+.2f"):format(recipe.low), ("%+.2f"):format(recipe.high) end
    if recipe.low <= recipe.high and not (low == high and (low == "1" or magnitude and low:find "^.0.00$")) then
      parts[#parts + 1] = ("with %s it would be %s"):format(verdicts.recipe_words(recipe.words),
        magnitude and (low == high and low or low .. " to " .. high) .. " mag different" or (low == high and low or low .. " to " .. high) .. " times that")
    end
  end
  return #parts > 0 and "; " .. table.concat(parts, ", ") or ""
end

local function quantity_sentence(study, number, column)
  local low, high, count = ends_of(study, number)
  if count == 0 then return nil end
  local name = words_of(column.name)
  local said = column.meaning_said and "" or (" (%s)"):format(words_of(column.entry.meaning))
  local others = recipes_of_quantity(study, number, column)
  if count == 1 or low == high then
    return ("The %s%s of %s is %s%s."):format(name, said, low.name, value_text(low.cells[number], column), others)
  end
  return ("The %s%s runs from %s (%s) to %s (%s)%s%s."):format(name, said, value_text(low.cells[number], column), low.name,
    value_text(high.cells[number], column), high.name, count < #study.rows and (" among the %d targets for which it can be derived"):format(count) or "", others)
end

-- Verdicts ---------------------------------------------------------------------------------------------------------------------------

local function with_shares(rows)
  local parts = {}
  for i, row in ipairs(rows) do parts[i] = ("%s (%s)"):format(row.name, format.percent(row.cell.share)) end
  return parts
end

-- "in at least 90 % of the draws for all 12 targets; in 45 % for Lumbric 2; in at most 10 % for ..."
local function by_share(one, all)
  local parts = {}
  if #one.yes > 0 then parts[#parts + 1] = ("in at least %s of the draws for %s"):format(format.percent(verdicts.MOSTLY), verdicts.count(one.yes, all)) end
  if #one.between > 0 then
    parts[#parts + 1] = ("in a fraction of the draws that leaves it open for %s"):format(verdicts.list(with_shares(one.between)))
  end
  if #one.no > 0 then parts[#parts + 1] = ("in at most %s of the draws for %s"):format(format.percent(verdicts.HARDLY), verdicts.count(one.no, all)) end
  return table.concat(parts, "; ")
end

local function without_draws(one, all)
  local subject, verb = one.words:match "^(.-) is (.*)$"
  if not subject then subject, verb = one.words, "so" end
  if #one.no == 0 then return ("%s is %s for %s"):format(subject, verb, verdicts.count(one.yes, all)) end
  if #one.yes == 0 then return ("%s is not %s for %s"):format(subject, verb, #one.no == all and all > 1 and "any of the targets" or verdicts.count(one.no, all)) end
  return ("%s is %s for %s, and not for %s"):format(subject, verb, verdicts.count(one.yes, all), verdicts.count(one.no, all))
end

local function single_share(row)
  if row.cell.share == 0 then return "in none of the draws" end
  return row.cell.share == 1 and "in all of the draws" or ("in %s of the draws"):format(format.percent(row.cell.share))
end

-- What other recipes would make of a verdict.
local function recipes_of_verdict(one)
  local changed, unchanged = {}, {}
  for _, recipe in ipairs(one.recipes) do
    if #recipe.names == 0 then unchanged[#unchanged + 1] = verdicts.recipe_words(recipe.words)
    else
      changed[#changed + 1] = ("with %s the answer changes for %s"):format(verdicts.recipe_words(recipe.words),
        recipe.asked == 1 and recipe.names[1] or ("%d of %d (%s)"):format(#recipe.names, recipe.asked, verdicts.list(recipe.names)))
    end
  end
  local parts = {}
  if #changed > 0 then parts[1] = table.concat(changed, ", ") end
  if #unchanged > 0 then
    parts[#parts + 1] = ("%s %s no answer across one half"):format(verdicts.list(unchanged), plural(#unchanged, "moves", "move"))
  end
  if #parts == 0 then return "Over the recipes: what is given allows no other published recipe on the way to this." end
  return "Over the recipes: " .. table.concat(parts, "; ") .. "."
end

local function reason_sentence(one)
  if #one.reasons == 0 then return nil end
  local parts = {}
  for i = 1, math.min(2, #one.reasons) do
    local reason = one.reasons[i]
    parts[i] = words_of(reason.words) .. (#one.no + #one.between > 1 and (" (%d %s)"):format(reason.count, plural(reason.count, "target")) or "")
  end
  return ("Where it is not resolved, %s."):format(verdicts.list(parts))
end

local function missing_sentence(one)
  if #one.missing == 0 then return nil end
  local reasons = {}
  for _, row in ipairs(one.missing) do reasons[row.cell.reason] = true end
  local reason = next(reasons)
  return ("It could not be derived for %s%s."):format(verdicts.list(verdicts.names_of(one.missing)), next(reasons, reason) and "" or " (" .. words_of(reason) .. ")")
end

-- A verdict is never said without its range over recipes.
local function verdict_sentences(study, one, draws)
  local known, all = #one.yes + #one.between + #one.no, #study.rows
  if known == 0 then return { capital(one.words) .. ": this could not be derived for any target." } end
  local answer
  if not draws then answer = without_draws(one, all)
  elseif all == 1 then answer = ("%s %s"):format(one.words, single_share(one.yes[1] or one.between[1] or one.no[1]))
  else answer = one.words .. " " .. by_share(one, all) end
  return present(capital(answer) .. ".", reason_sentence(one), missing_sentence(one), recipes_of_verdict(one))
end

-- Everything asked of one group of columns, quantities before verdicts.
local function group_paragraph(study, group, of_verdicts, draws, said)
  local sentences = {}
  local function add(sentence) if sentence then sentences[#sentences + 1] = sentence end end
  if group.name then
    local parts = givens_of(group, study.groups[1])
    add(("%s%s:"):format(capital(group.name), #parts > 0 and " (" .. verdicts.list(parts, #parts) .. ")" or ""))
  end
  for number, column in ipairs(study.columns) do
    if column.group == group.name and not column.verdict then
      add(quantity_sentence(study, number, setmetatable({ meaning_said = said[column.name] }, { __index = column })))
      said[column.name] = true
    end
  end
  for _, one in ipairs(of_verdicts) do
    if one.column.group == group.name then
      for _, sentence in ipairs(verdict_sentences(study, one, draws)) do add(sentence) end
    end
  end
  return sentences
end

-- What it rests on -------------------------------------------------------------------------------------------------------------------

-- "sublimation radius by grey grains (Monnier & Millan-Gabet 2002)", each recipe once with all the names it gives.
local function recipe_parts(used, cite)
  local order, by_recipe = {}, {}
  for _, name in ipairs(used.keys) do
    for _, by in ipairs(used.values[name].keys) do
      local row = used.values[name].values[by].relation
      if row and row.kind ~= "definition" and row.kind ~= "assumed" and row.source ~= "definition" then
        local key = row.by .. "\0" .. row.source
        if not by_recipe[key] then order[#order + 1], by_recipe[key] = key, { row = row } end
        table.insert(by_recipe[key], words_of(name))
      end
    end
  end
  local parts = {}
  for i, key in ipairs(order) do
    local entry = by_recipe[key]
    parts[i] = ("%s by %s%s"):format(verdicts.list(entry, 3), words_of(entry.row.by), " (" .. cite(entry.row) .. ")")
  end
  return parts
end

local function assumption_parts(used, cite)
  local parts = {}
  for _, name in ipairs(used.keys) do
    for _, by in ipairs(used.values[name].keys) do
      local row = used.values[name].values[by].relation
      if row and row.kind == "assumed" then parts[#parts + 1] = ("%s = %s (%s)"):format(words_of(name), row.assumes, cite(row)) end
    end
  end
  return parts
end

local function basis_paragraph(study, cite)
  local used = notes.relations_used(study)
  local recipes, assumed = recipe_parts(used, cite), assumption_parts(used, cite)
  return {
    #recipes > 0 and ("These numbers rest on the %s %s; what each supposes stands with the derivations."):format(plural(#recipes, "recipe"), table.concat(recipes, "; ")) or
      "All of these numbers follow by definition from what is given.",
    #assumed > 0 and ("Assumed, as not measured for these targets: %s."):format(verdicts.list(assumed, #assumed)) or "Nothing is assumed besides.",
  }
end

local function detection_paragraph(study)
  local asked
  for number, column in ipairs(study.columns) do
    if column.name == "rim_drop_significance" and select(3, ends_of(study, number)) > 0 then asked = true end
  end
  return {
    asked and "Detection is assessed for the rim alone, by the drop of its squared visibility in standard errors; whether any other structure is detected is not assessed."
      or "Resolved means geometrically resolved. Whether a structure is also detected is not assessed here.",
    "These are estimates of feasibility; the observatory's own documents and staff decide.",
  }
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
  if #of_verdicts == 0 then paragraphs[#paragraphs][#paragraphs[#paragraphs] + 1] = "No verdict was asked: whether anything is resolved is left open." end
  paragraphs[#paragraphs + 1] = basis_paragraph(study, cite)
  paragraphs[#paragraphs + 1] = detection_paragraph(study)
  return { paragraphs = paragraphs, cited = cited, by = facts.version }
end

-- Written out ------------------------------------------------------------------------------------------------------------------------

local DRAFT = "Draft, to be edited: composed from the results"

local function short_or_words(row) return bibliography.short(row) or text.source(row) end

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
  for _, words in ipairs(feasibility.paragraphs(composed)) do paragraphs[#paragraphs + 1] = table.concat(tables.wrapped(words, WIDTH), "\n") end
  return table.concat(paragraphs, "\n\n") .. "\n"
end

function feasibility.tex(composed, cited)
  local paragraphs = { "% " .. DRAFT, "\\emph{" .. DRAFT .. ".}" }
  for _, sentences in ipairs(composed.paragraphs) do
    local words = tables.escaped_tex(table.concat(sentences, " "))
    paragraphs[#paragraphs + 1] = words:gsub("\1(%d+)\2", function(number)
      local row = composed.cited[tonumber(number)]
      local key = cited:key(row)
      return key and "\\cite{" .. key .. "}" or tables.escaped_tex(text.source(row))
    end)
  end
  return table.concat(paragraphs, "\n\n") .. "\n"
end

return feasibility
