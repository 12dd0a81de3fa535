-- SPDX-License-Identifier: GPL-3.0-or-later
-- help "search words": which names and words of the language some words are about. Each entry has fields of unequal worth: its name, its
-- synonyms and symbol, its meaning, the sources and names of its recipes, what they suppose and start from. Words are compared by their
-- stems, and a word that occurs nowhere by the nearest spelling that does. A word counts by the worth of the field it is found in and by how
-- rare it is (inverse document frequency: Spärck Jones 1972, Journal of Documentation 28, 11); an entry by its words together, by how many
-- of them it has, and by how much of its name they make up.
local core = ...
local relations = core.part "lacuna.relations"
local words = core.part "lacuna.words"

local search = {}

-- Words ---------------------------------------------------------------------------------------------------------------------------

local carry_nothing = {}
for word in ("a an and are as at be by can do does for from how i in is it its me my of on or over per than that the their there this to what which with"):gmatch "%a+" do
  carry_nothing[word] = true
end

-- Other spellings, Greek letters, and adjectives whose nouns have another stem.
local spellings = {
  disk = "disc", gray = "grey", deep = "depth", high = "height", long = "length",
  ["α"] = "alpha", ["β"] = "beta", ["γ"] = "gamma", ["ε"] = "epsilon", ["θ"] = "theta", ["κ"] = "kappa", ["λ"] = "lambda", ["μ"] = "mu",
  ["ν"] = "nu", ["ρ"] = "rho", ["σ"] = "sigma", ["Σ"] = "sigma", ["ω"] = "omega", ["Ω"] = "omega", ["Δ"] = "delta",
}

-- Endings of plurals, verbs and derived words, the first that fits; what remains has three letters at least.
local endings = {
  { "ations?$", "" }, { "ating$", "" }, { "ates?d?$", "" }, { "[iy]ties$", "" }, { "ities$", "" }, { "ity$", "" }, { "ii$", "ius" }, { "ies$", "y" }, { "sses$", "ss" },
  { "ions?$", "" }, { "ings?$", "" }, { "als?$", "" }, { "ular$", "l" }, { "ths?$", "" }, { "ed$", "" }, { "es$", "" }, { "([^us])s$", "%1" }, { "e$", "" },
}

local function stem(word)
  word = spellings[word] or word:gsub("meter$", "metre"):gsub("meters$", "metres")
  for _, ending in ipairs(endings) do
    local stripped, count = word:gsub(ending[1], ending[2])
    if count > 0 and #stripped >= 3 then return stripped end
  end
  return word
end

-- The words of a text that carry something, in order.
local function words_of(text_)
  local found = {}
  for word in text_:lower():gmatch "[%w\128-\255]+" do
    if not carry_nothing[word] then found[#found + 1] = word end
  end
  return found
end

-- Entries -------------------------------------------------------------------------------------------------------------------------

local worth = { name = 6, synonyms = 5, meaning = 3, recipes = 3, more = 2, inputs = 1, supposes = 1 }

-- worth: of each stem the worth of the best field that has it; spelt: the stems' words as they stand; name: the stems of its name in order.
local function new_entry(title, name, meaning)
  local entry = { title = title, meaning = meaning, worth = {}, spelt = {}, name = {}, share = 1 }
  for i, word in ipairs(words_of(name)) do entry.name[i] = stem(word) end
  return entry
end

local function add(entry, field, text_)
  for _, word in ipairs(words_of(text_ or "")) do
    local its_stem = stem(word)
    entry.worth[its_stem] = math.max(entry.worth[its_stem] or 0, worth[field])
    entry.spelt[word] = its_stem
  end
end

-- Whether a name is the plain one's on the sky, or at the planet or the ring: it follows the plain one.
function search.is_derived(name)
  local on_sky = name:match "^(.+)_angle$"
  local at_a_place = core.entry(name).subject == "disc" and (name:match "^planet_(.+)$" or name:match "^ring_(.+)$")
  local plain = on_sky or at_a_place
  return plain and core.find(plain) == plain
end

local function add_recipes(entry, rows)
  for _, number in ipairs(rows) do
    local row = core.row(number)
    add(entry, "recipes", row.by:gsub("_", " "))
    local source = core.source(row.source)
    if row.source ~= "definition" then add(entry, "recipes", relations.source(row) .. " " .. (source and source.title or "")) end
    add(entry, "supposes", row.supposes)
    for _, input in ipairs(row.from) do
      add(entry, "inputs", input:gsub("_", " "))
      add(entry, "inputs", core.entry(input).synonyms)
      add(entry, "inputs", relations.symbol(input))
    end
  end
end

local function entry_of_name(name)
  local row, spaced = core.entry(name), name:gsub("_", " ")
  local entry = new_entry(name, spaced, row.meaning)
  if search.is_derived(name) then entry.share = 0.8 end
  add(entry, "name", spaced)
  add(entry, "synonyms", row.synonyms and row.synonyms:gsub("_", " "))
  add(entry, "synonyms", relations.symbol(name))
  add(entry, "meaning", row.meaning)
  add(entry, "supposes", row.hint)
  add(entry, "supposes", row.subject)
  add_recipes(entry, row.rows)
  return entry
end

local function entry_of_word(record)
  local title = words.full_name(record)
  local entry = new_entry(title, record.name, words.one_line(title))
  if record.of then entry.share = 0.8 end
  add(entry, "name", record.name:gsub("_", " "))
  add(entry, "meaning", entry.meaning)
  add(entry, "more", record.does)
  add(entry, "inputs", table.concat(record.forms, " "))
  for _, argument in ipairs(record.arguments or {}) do add(entry, "inputs", argument[1] .. " " .. argument[2]) end
  return entry
end

-- All entries, in how many of them each stem occurs, and the stem of each word. Made anew for each search: a user may have added names.
local function all_entries()
  local entries, occurs, stem_of = {}, {}, {}
  for _, name in ipairs(core.names()) do entries[#entries + 1] = entry_of_name(name) end
  for _, record in ipairs(words.list()) do entries[#entries + 1] = entry_of_word(record) end
  for order, entry in ipairs(entries) do
    entry.order = order
    for its_stem in pairs(entry.worth) do occurs[its_stem] = (occurs[its_stem] or 0) + 1 end
    for word, its_stem in pairs(entry.spelt) do stem_of[word] = its_stem end
  end
  return entries, occurs, stem_of
end

-- Queries -------------------------------------------------------------------------------------------------------------------------

-- The stem of the word that is spelt most like one that occurs nowhere: one slip up to seven letters, two from eight on. Nil where none is.
local function nearest_stem(word, occurs, stem_of)
  local best, least = nil, #word < 4 and 0 or #word < 8 and 1 or 2
  for other, its_stem in pairs(stem_of) do
    local slips = math.abs(#other - #word) <= least and core.edits(word, other) or math.huge
    local likelier = best and slips == least and (occurs[its_stem] > occurs[best] or occurs[its_stem] == occurs[best] and its_stem < best)
    if slips < least or slips == least and not best or likelier then best, least = its_stem, slips end
  end
  return best
end

local function share_of_name(entry, wanted)
  local found = 0
  for _, word in ipairs(entry.name) do
    for _, other in ipairs(wanted) do
      if word == other then
        found = found + 1
        break
      end
    end
  end
  return #entry.name > 0 and found / #entry.name or 0
end

-- How many neighbours of the query are neighbours in the name.
local function pairs_in_order(entry, wanted)
  local count = 0
  for i = 1, #wanted - 1 do
    for j = 1, #entry.name - 1 do
      if entry.name[j] == wanted[i] and entry.name[j + 1] == wanted[i + 1] then count = count + 1 end
    end
  end
  return count
end

local function score(entry, wanted, rarity)
  local total, found = 0, 0
  for _, word in ipairs(wanted) do
    local value = entry.worth[word]
    if value then
      total, found = total + value * rarity[word], found + 1
    end
  end
  if found == 0 then return 0 end
  local coverage = found / #wanted
  return total * coverage * coverage * entry.share * (1 + share_of_name(entry, wanted)) * (1 + 0.2 * pairs_in_order(entry, wanted))
end

-- What some words are about: a list of { title =, meaning = }, the best first; and whether all words occur as they are spelt.
function search.find(query)
  local entries, occurs, stem_of = all_entries()
  local wanted, rarity, found, all_known = {}, {}, {}, true
  for i, word in ipairs(words_of(query)) do
    local known, certain = stem(word), 1
    if not occurs[known] then known, certain, all_known = nearest_stem(word, occurs, stem_of) or known, 0.5, false end
    wanted[i] = known
    rarity[known] = certain * math.log(1 + #entries / (occurs[known] or 1))
  end
  for _, entry in ipairs(entries) do
    entry.score = score(entry, wanted, rarity)
    if entry.score > 0 then found[#found + 1] = entry end
  end
  table.sort(found, function(a, b) return a.score > b.score or a.score == b.score and a.order < b.order end)
  return found, all_known
end

return search
