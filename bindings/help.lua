-- SPDX-License-Identifier: GPL-3.0-or-later
-- help(): a map by subject. help "gap_width": one name. help "word": one word of the language, a unit, or a search. All from the tables.
local core = ...
local relations = core.part "lacuna.relations"
local text = core.part "lacuna.text"
local format = core.part "lacuna.format"
local words = core.part "lacuna.words"
local recipes = core.part "lacuna.recipes"
local search = core.part "lacuna.search"

local help = {}

-- Prints itself at the prompt, and under print.
local page = { __name = "help", __tostring = core.part "lacuna.show".page }
local function new_page(...) return setmetatable({ ... }, page) end

-- Names in as many lines as they take.
local function add_names(lines, names, width)
  for _, line in ipairs(format.wrapped(table.concat(names, " "), width - 2, "  ")) do lines[#lines + 1] = "  " .. line end
end

local subjects = {
  { "star", "the star" }, { "photometry", "photometry" }, { "radiation", "radiation" }, { "disc", "the disc, at radius (also as planet_..., ring_...)" },
  { "dust", "dust" }, { "rim", "rim and cavity" },
  { "orbit", "orbits, planets, companions" }, { "gap", "gaps and rings" }, { "instrument", "instruments" },
  { "structure", "structures: rim, cavity, gap, ring" }, { "visibility", "visibilities" }, { "emission", "the disc's own light" }, { "yours", "your own" },
}

-- The names by subject, as the map shows them: a list of { title =, names = {...} }.
function help.by_subject()
  local found, by_subject = {}, {}
  for _, name in ipairs(core.names()) do
    local list = by_subject[core.entry(name).subject] or {}
    by_subject[core.entry(name).subject] = list
    list[#list + 1] = name
  end
  for _, subject in ipairs(subjects) do
    if by_subject[subject[1]] then found[#found + 1] = { title = subject[2], names = by_subject[subject[1]] } end
  end
  return found
end

-- The words of a subject with what they have: "case", ":with", ":using"; in full where another word stands before.
local function names_of_words(records)
  local names, latest = {}, nil
  for i, record in ipairs(records) do
    local full = words.full_name(record)
    names[i] = record.of and record.of == latest and full:sub(#record.of + 1) or full
    latest = record.of or record.name
  end
  return names
end

local function map()
  local width = math.min(core.terminal_width() or 118, 118)
  local lines = new_page("help \"name\" explains a name, a word or a unit; help \"some words\" searches.",
    "Lengths on the sky have <name>_angle besides. help \"case:why\" is of a method.", "")
  for _, subject in ipairs(words.by_subject()) do
    lines[#lines + 1] = "words: " .. subject.title
    add_names(lines, names_of_words(subject.records), width)
  end
  for _, subject in ipairs(help.by_subject()) do
    local names = {}
    for _, name in ipairs(subject.names) do
      if not search.is_derived(name) then names[#names + 1] = name end
    end
    lines[#lines + 1] = subject.title
    add_names(lines, names, width)
  end
  return lines
end

local function unit_text(entry)
  local unit = text.unit_of(entry.name)
  return unit == "" and "a plain number" or "in " .. unit
end

local function about_name(name)
  local entry = core.entry(name)
  local lines = new_page(("%s  %s"):format(name, relations.symbol(name)), "  " .. entry.meaning)
  if entry.kind == "verdict" then lines[#lines + 1] = "  a verdict: yes, no, or in so many per cent of the draws"
  elseif entry.kind == "object" then lines[#lines + 1] = "  an object"
  else lines[#lines + 1] = ("  %s%s"):format(unit_text(entry), entry.range ~= "any" and ", " .. entry.range or "") end
  if entry.synonyms then lines[#lines + 1] = "  also called " .. entry.synonyms:gsub(" ", ", ") end
  if entry.on_sky then lines[#lines + 1] = ("  on the sky: %s_angle"):format(name) end
  lines[#lines + 1] = ""
  if #entry.rows == 0 then lines[#lines + 1] = "  It must be given: no relation gives it." end
  for _, number in ipairs(entry.rows) do recipes.add_row(lines, core.row(number)) end
  if entry.hint then lines[#lines + 1] = "  " .. entry.hint end
  local example = core.part "lacuna.example".of(name)
  local computed, answer = pcall(example and example.answer) -- a relation of the user's may fail
  if computed then
    for _, line in ipairs { "", "  example", "    > " .. example.line, "    " .. answer:gsub("\n", "\n    ") } do lines[#lines + 1] = line end
  end
  return lines
end

local function about_unit(word)
  local factor, _, written, si = core.unit_facts(word)
  local _, _, si_written = core.unit_facts(si)
  return new_page(("%s  a unit: %s"):format(written, format.with_unit(format.number(factor, 10), si_written)))
end

-- Words of the language ------------------------------------------------------------------------------------------------------------

local function add_methods(lines, record)
  local listed, longest = {}, 0
  for i, name in ipairs(words.methods(record.name)) do
    local of_it = words.find(record.name .. ":" .. name)
    local full = of_it.of and words.full_name(of_it) or record.name .. ":" .. name
    listed[i] = { full, words.one_line(full) }
    longest = math.max(longest, #full)
  end
  if #listed > 0 then lines[#lines + 1] = ('  it has (help "%s" tells more of one)'):format(listed[1][1]) end
  for _, pair in ipairs(listed) do lines[#lines + 1] = ("    %s\t%s"):format(format.pad_right(pair[1], longest), pair[2]) end
end

local function add_examples(lines, record)
  for i, example in ipairs(record.examples or {}) do
    if i == 1 then lines[#lines + 1] = "  example" .. (#record.examples > 1 and "s" or "") end
    for _, line in ipairs(type(example) == "table" and example or { example }) do lines[#lines + 1] = "    > " .. line end
    for line in (record.answers[i] .. "\n"):gmatch "(.-)\n" do lines[#lines + 1] = line == "" and "" or "    " .. line end
  end
end

-- One word: its forms, what it does, arguments, result, errors, what it has, examples.
local function add_word(lines, record)
  for _, form in ipairs(record.forms) do lines[#lines + 1] = form end
  lines[#lines + 1] = "  " .. record.does
  local longest = 0
  for _, argument in ipairs(record.arguments or {}) do longest = math.max(longest, format.width(argument[1])) end
  for _, argument in ipairs(record.arguments or {}) do
    lines[#lines + 1] = ("    %s\t%s"):format(format.pad_right(argument[1], math.min(longest, 24)), argument[2])
  end
  if record.result then lines[#lines + 1] = "  result: " .. record.result end
  if record.errors then lines[#lines + 1] = "  errors: " .. record.errors end
  if not record.of then add_methods(lines, record) end
  add_examples(lines, record)
  if record.built_in then
    lines[#lines + 1] = "  built in"
    for _, line in ipairs(record.built_in()) do lines[#lines + 1] = "    " .. line end
  end
  if record.see then lines[#lines + 1] = "  see also " .. table.concat(record.see, ", ") end
end

-- A built-in object, by its name.
local function about_built_in(name)
  for _, record in ipairs(words.list()) do
    local lines = record.built_in and record.built_in(name)
    if lines then return new_page(("%s  a built-in %s"):format(name, record.name), table.unpack(lines)) end
  end
end

-- And the built-in object that goes by the same name: H is a band too.
local function with_built_in(name, lines)
  local others = about_built_in(name)
  if not others then return lines end
  lines[#lines + 1] = ""
  return table.move(others, 1, #others, #lines + 1, lines)
end

local function about_words(records, lines)
  for _, record in ipairs(records) do
    if #lines > 0 then lines[#lines + 1] = "" end
    add_word(lines, record)
  end
  return lines
end

-- Search --------------------------------------------------------------------------------------------------------------------------

local MOST_FOUND = 12

-- What stands before the list of what was found.
local function found_or_not(query, found, all_known)
  if #found > 0 and all_known then return ("about '%s':"):format(query) end
  local near = core.nearest((query:gsub("%s+", "_")))
  if #near > 0 then return ("there is no '%s'; nearest are %s"):format(query, table.concat(near, ", ")) end
  return (#found > 0 and "not all of '%s' is known; about what is spelt like it:" or "nothing about '%s'; help() lists what there is"):format(query)
end

local function about_words_searched(query)
  local found, all_known = search.find(query)
  local lines, longest = new_page(found_or_not(query, found, all_known)), 0
  for i = 1, math.min(#found, MOST_FOUND) do longest = math.max(longest, #found[i].title) end
  for i = 1, math.min(#found, MOST_FOUND) do lines[#lines + 1] = ("  %s\t%s"):format(format.pad_right(found[i].title, longest), found[i].meaning) end
  if #found > MOST_FOUND then lines[#lines + 1] = ("  and %d more"):format(#found - MOST_FOUND) end
  return lines
end

-- What help is wanted on where it is asked with a value: a word itself, an object, a quantity.
local function name_of_value(value)
  local module = core.part "lacuna.lacuna"
  for _, record in ipairs(words.list()) do
    if not record.of and module[record.name] == value then return record.name end
  end
  if type(value) ~= "userdata" then core.raise("help wants a name, a word or a unit as a text, like help \"gap_width\"; got " .. core.shown(value)) end
  return core.is_case(value) and "case" or core.object_type(value) or (core.facts(value)) or "quantity"
end

function help.help(word)
  if word == nil then return map() end
  if type(word) ~= "string" then word = name_of_value(word) end
  local name = core.find(word)
  local records = words.all(word)
  if name then return with_built_in(word, about_words(records, about_name(name))) end
  if #records > 0 then return about_words(records, new_page()) end
  return core.unit_facts(word) and about_unit(word) or about_built_in(word) or about_words_searched(word)
end

return help
