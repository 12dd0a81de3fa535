-- SPDX-License-Identifier: GPL-3.0-or-later
-- The tables as plain Lua data, for documents and programs of one's own: names with their recipes and equations, words, sources.
local core = ...
local equation = core.part "lacuna.equation"
local relations = core.part "lacuna.relations"
local text = core.part "lacuna.text"
local case = core.part "lacuna.case"

local glossary = {}

local function bound(range)
  local entry = core.entry(range.name)
  return { name = range.name, low = range.low / entry.factor, high = range.high / entry.factor, unit = entry.unit, unit_plain = text.unit_of(range.name) }
end

local function recipe(row)
  local holds = {}
  for i, range in ipairs(row.holds) do holds[i] = bound(range) end
  local with_equation = row.equation and row.equation ~= ""
  return {
    gives = row.gives, by = row.by, kind = row.kind, from = row.from, source = row.source, source_text = row.source == "definition" and "definition" or relations.source(row),
    from_memory = row.from_memory, supposes = row.supposes, unchecked = row.unchecked, inverse_of = row.inverse_of, assumes = row.assumes, holds = holds,
    equation = with_equation and equation.plain(row.equation, relations.symbol) or nil,
    equation_tex = with_equation and equation.tex(row.equation, relations.symbol_tex) or nil,
    equation_mathml = with_equation and equation.mathml(row.equation, relations.symbol_tex) or nil,
  }
end

local function facts(name)
  local entry = core.entry(name)
  local recipes = {}
  for i, number in ipairs(entry.rows) do recipes[i] = recipe(core.row(number)) end
  local synonyms = {}
  for word in (entry.synonyms or ""):gmatch "%S+" do synonyms[#synonyms + 1] = word end
  local _, _, _, si = core.unit_facts(entry.unit)
  return {
    name = name, kind = entry.kind, subject = entry.subject, meaning = entry.meaning, unit = entry.unit, unit_plain = text.unit_of(name), unit_si = si, range = entry.range,
    symbol = relations.symbol(name), symbol_tex = relations.symbol_tex(name), symbol_mathml = equation.mathml(relations.symbol_tex(name), function(other) return other end),
    synonyms = synonyms, on_sky = entry.on_sky, hint = entry.hint, recipes = recipes,
  }
end

function glossary.name(word) return facts(case.name_of(word, "glossary.name: ")) end

function glossary.names()
  local list = {}
  for i, name in ipairs(core.names()) do list[i] = facts(name) end
  return list
end

function glossary.words() return core.part "lacuna.words".list() end

-- How help orders them: lists of { title =, names = {...} } and { title =, words = {...} }.
function glossary.subjects()
  local of_words = {}
  for i, subject in ipairs(core.part "lacuna.words".by_subject()) do of_words[i] = { title = subject.title, words = subject.records } end
  return core.part "lacuna.help".by_subject(), of_words
end

-- The program's options; a module in another host has none.
function glossary.options()
  local command = core.part "lacuna.command"
  return command.options and command.options() or {}
end

return { glossary = glossary }
