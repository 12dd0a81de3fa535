-- SPDX-License-Identifier: GPL-3.0-or-later
-- The sources that a report cites: each gets a BibTeX entry once it is cited, so that the file holds exactly those used.
--
--   local cited = bibliography.new()
--   cited:key(row)        the key for \cite, or nil for what has no source; row = { source, place } as relations have them, or { source = id }
--   cited:bibtex()        the entries, by key
--   bibliography.short(row)    "Monnier & Millan-Gabet 2002", for text; nil for what has no source
local core = ...
local table_tex = core.part "lacuna.table_tex"

local bibliography = {}
local methods = {}
local metatable = { __index = methods }

function bibliography.new() return setmetatable({ entries = {} }, metatable) end

-- "Monnier, J. D., Millan-Gabet, R." as a list of { surname, initials }; "et al." is { others = true }.
local function authors_of(words)
  local list, parts = {}, {}
  for part in (words .. ", "):gmatch "(.-), " do parts[#parts + 1] = part end
  local i = 1
  while i <= #parts do
    if parts[i] == "et al." then
      list[#list + 1] = { others = true }
      i = i + 1
    else
      list[#list + 1] = { surname = parts[i], initials = parts[i + 1] ~= "et al." and parts[i + 1] or nil }
      i = i + (list[#list].initials and 2 or 1)
    end
  end
  return list
end

-- A published source, or nil for definitions and common practice.
local function published(row)
  local source = core.source(row.source)
  return source and source.year and source or nil
end

-- Words of a user's own in place of a source.
local function own_words(row) return not core.source(row.source) and row.source ~= "" and row.source or nil end

function bibliography.short(row)
  local source = published(row)
  if not source then return own_words(row) end
  local list = authors_of(source.authors)
  local first, second = list[1].surname, list[2]
  if #list > 2 or second and second.others then first = first .. " et al."
  elseif second then first = first .. " & " .. second.surname end
  return first .. " " .. source.year
end

-- A key for words: letters and digits, and a number where two come out the same.
local function key_for(entries, words)
  local stem = words:lower():gsub("[^%w]+", "_"):gsub("^_+", ""):gsub("_+$", ""):sub(1, 40)
  if stem == "" then stem = "source" end
  local key, number = stem, 1
  while entries[key] and entries[key].words ~= words do
    number = number + 1
    key = stem .. "_" .. number
  end
  return key
end

function methods.key(self, row)
  local source = published(row)
  if source then
    self.entries[source.id] = { source = source }
    return source.id
  end
  local words = own_words(row)
  if not words then return nil end
  local key = key_for(self.entries, words)
  self.entries[key] = { words = words }
  return key
end

local function names_bibtex(words)
  local names = {}
  for i, one in ipairs(authors_of(words)) do
    names[i] = one.others and "others" or one.surname .. (one.initials and ", " .. one.initials or "")
  end
  return table.concat(names, " and ")
end

-- An article has a title and a volume or a page in its journal; a book its publisher in the journal's place. What has no title here is told by its
-- place alone, as papers in astronomy cite: BibTeX wants titles of articles, and none is made up.
local function kind_of(source)
  if source.title and (source.volume or source.page) then return "article", "journal" end
  if source.title and source.journal then return "book", "publisher" end
  return "misc", "howpublished"
end

-- "ApJ 579, 694"
local function place_of(source)
  local place = source.journal and source.volume and source.journal .. " " .. source.volume or source.journal or source.volume
  return place and source.page and place .. ", " .. source.page or place or source.page
end

local function entry_bibtex(key, entry)
  local lines = {}
  local function field(name, text)
    if text then lines[#lines + 1] = ("  %-12s = {%s},"):format(name, table_tex.escaped(text)) end
  end
  if entry.words then
    field("key", key)
    field("title", entry.words)
    return "@misc{" .. key .. ",\n" .. table.concat(lines, "\n") .. "\n}\n"
  end
  local source = entry.source
  local kind, journal = kind_of(source)
  field("author", names_bibtex(source.authors))
  field("title", source.title)
  field(journal, kind == "misc" and place_of(source) or source.journal)
  field("year", source.year)
  if kind ~= "misc" then
    field("volume", source.volume)
    field("pages", source.page)
  end
  return "@" .. kind .. "{" .. key .. ",\n" .. table.concat(lines, "\n") .. "\n}\n"
end

function methods.bibtex(self)
  local keys, entries = {}, {}
  for key in pairs(self.entries) do keys[#keys + 1] = key end
  table.sort(keys)
  for i, key in ipairs(keys) do entries[i] = entry_bibtex(key, self.entries[key]) end
  return table.concat(entries, "\n")
end

return bibliography
