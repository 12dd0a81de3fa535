-- SPDX-License-Identifier: GPL-3.0-or-later
-- The words of the language: one record for each function or method that a user can call. Help, completion and the manual come from
-- them. The records stand in bindings/words_<subject>.lua, each a file that returns a list of tables:
--
--   name      "sweep"; of a method "solve" with of = "case"
--   of        the word or kind of object it belongs to; field = true where a dot, not a colon, leads there: spread.normal
--   also_of   the kind that has the word as a method too: mean(q) is q:mean()
--   subject   one of the subjects below
--   forms     how it is written, a text for each way
--   does      what it does; the first sentence is its meaning in one line
--   arguments list of { what, meaning with unit }; result; errors: texts
--   examples  lines as typed at the prompt, or lists of such lines; each stands alone, its stars are invented (an empty list where one would want the prompt itself)
--   answers   what the prompt prints for the (last) line of each example; REWRITE=1 in tests/lua/test_words.lua puts them in
--   built_in  of kinds with built-in objects: a function that returns lines about the one of a name (nil where there is none), or about all
--   see       names of other words
local core = ...
local words = {}

local subjects = {
  { "quantities", "quantities" }, { "cases", "cases" }, { "what-if", "what if" }, { "studies", "studies" }, { "report", "figures and reports" },
  { "objects", "objects" }, { "session", "the session" }, { "help", "help" },
}

local parts = {
  "words_quantities", "words_cases", "words_what_if", "words_studies", "words_figures", "words_objects", "words_session",
  "words_notebook", "words_answers",
}

-- "case:solve", "spread.normal", "sweep".
local function full_name(record)
  return record.of and record.of .. (record.field and "." or ":") .. record.name or record.name
end
words.full_name = full_name

local ordered -- all records, by subject and then as they stand in their files
local by_name -- lists of records by name and by full name; words before methods

local function add_under(name, record)
  by_name[name] = by_name[name] or {}
  table.insert(by_name[name], record)
end

local function load_all()
  local of_subject = {}
  for _, subject in ipairs(subjects) do of_subject[subject[1]] = {} end
  for _, part in ipairs(parts) do
    local name = "lacuna." .. part
    for _, record in ipairs(core.part(name)) do
      table.insert(of_subject[record.subject] or error(("%s: %s is of no known subject"):format(part, record.name)), record)
    end
  end
  ordered, by_name = {}, {}
  for _, subject in ipairs(subjects) do
    for _, record in ipairs(of_subject[subject[1]]) do ordered[#ordered + 1] = record end
  end
  for _, record in ipairs(ordered) do
    if not record.of then add_under(record.name, record) end
  end
  for _, record in ipairs(ordered) do
    if record.of then
      add_under(record.name, record)
      add_under(record.of .. ":" .. record.name, record)
      add_under(record.of .. "." .. record.name, record)
    elseif record.also_of then add_under(record.also_of .. ":" .. record.name, record) end
  end
end

-- All records in order by subject.
function words.list()
  if not ordered then load_all() end
  return ordered
end

-- The subjects in order: a list of { title =, records = {...} }, without those that have no words.
function words.by_subject()
  local found = {}
  for _, subject in ipairs(subjects) do
    local records = {}
    for _, record in ipairs(words.list()) do
      if record.subject == subject[1] then records[#records + 1] = record end
    end
    if #records > 0 then found[#found + 1] = { title = subject[2], records = records } end
  end
  return found
end

-- The records of a name: "sweep", "solve", "case:solve", "spread.normal", or as it is typed, "c:solve". An empty list where there is none.
function words.all(name)
  words.list()
  return by_name[name] or by_name[name:match "^[%a_][%w_]*[:.]([%a_][%w_]*)$"] or {}
end

-- The first of them, or nil.
function words.find(name) return words.all(name)[1] end

-- What a word does in one line, or nil: the first sentence.
function words.one_line(name)
  local record = words.find(name)
  return record and (record.does:match "^(.-%.)%s" or record.does):gsub("%.$", "") or nil
end

-- The names of what a kind of object or a word has: of "case", "quantity", "spread".
function words.methods(of)
  local names = {}
  for _, record in ipairs(words.list()) do
    if record.of == of or record.also_of == of then names[#names + 1] = record.name end
  end
  return names
end

return words
