-- SPDX-License-Identifier: GPL-3.0-or-later
-- What completion can offer, by kind: names, units, recipes, bands, words, variables. Each list holds candidates
-- {text =, meaning =, append =, group =}, append being what is put behind a word that is the only one, group a heading over several (or
-- nil). Who gets a list doesn't change it. All from the tables; nothing here runs code of the user's.
local core = ...
local relations = core.part "lacuna.relations"
local format = core.part "lacuna.format"
local words = core.part "lacuna.words"
local kind_of = core.part "lacuna.complete_values".kind_of
local keywords = core.part "lacuna.tokens".keywords
local find, match, gmatch, sub = string.find, string.match, string.gmatch, string.sub
local getmetatable, ipairs, math, next, rawget, select, string, table, tostring, type = getmetatable, ipairs, math, next, rawget, select, string, table, tostring, type

local lists = {}

local function add(list, word, meaning, append) list[#list + 1] = { text = word, meaning = meaning or "", append = append or "" } end

-- Words of the language and methods -------------------------------------------------------------------------------------------------

-- How a word is written, in all its forms.
local function forms_of(word)
  local record = words.find(word)
  return record and record.forms or {}
end
lists.forms_of = forms_of

-- What help says of a field of the table that a word takes.
function lists.meaning_of_field(word, field)
  local record = words.find(word)
  for _, argument in ipairs(record and record.arguments or {}) do
    for name in gmatch(argument[1], "[%a_][%w_]*") do if name == field then return argument[2] end end
  end
  return "a field of " .. word
end

-- What a kind of object or a word has behind a colon, or, as fields, behind a dot: a list of {name, meaning, what follows it in its form}.
local function methods_of(kind, as_fields)
  local found = {}
  for _, name in ipairs(words.methods(kind)) do
    local record = words.find(kind .. ":" .. name)
    if (record.field or false) == (as_fields or false) then
      found[#found + 1] = { name, words.one_line(kind .. ":" .. name), match(record.forms[1], "[:.]" .. name .. "(.*)$") or "" }
    end
  end
  return found
end

-- What comes first after a word: "{", "(", "()", ' "', "."; or nothing.
local function first_mark(rest) return match(rest, "^%(%)") or match(rest, "^[{(.]") or match(rest, "^ \"") or "" end

-- The same of a word in all its forms; nothing where they differ.
local function what_follows(word, forms)
  local all
  for i = 1, #forms do
    local _, last = find(forms[i], word, 1, true)
    local this = first_mark(last and sub(forms[i], last + 1) or "")
    if all and all ~= this then return "" end
    all = this
  end
  return all or ""
end

local all_words -- made when first wanted, as are units and keywords below: they are always the same
function lists.words()
  if all_words then return all_words end
  all_words = {}
  for _, record in ipairs(words.list()) do
    if not record.of then add(all_words, record.name, words.one_line(record.name), what_follows(record.name, record.forms)) end
  end
  return all_words
end

function lists.methods(kind, as_fields)
  local list = {}
  for _, method in ipairs(methods_of(kind, as_fields)) do add(list, method[1], method[2], first_mark(method[3])) end
  return list
end

-- What a word or a kind of object has behind a dot, by its records: spread.normal.
function lists.fields_of(word) return lists.methods(word, true) end

-- Methods of whatever has any, where it isn't known what stands before the colon.
function lists.all_methods()
  local list, seen = {}, {}
  for _, kind in ipairs({ "case", "quantity", "dust", "band" }) do
    for _, candidate in ipairs(lists.methods(kind)) do
      if not seen[candidate.text] then list[#list + 1], seen[candidate.text] = candidate, true end
    end
  end
  return list
end

-- Names of the glossary ---------------------------------------------------------------------------------------------------------------

local entries = {} -- by name; a name, once there, doesn't change (its recipes may)
local function entry_of(name)
  local known = entries[name]
  if known then return known end
  local entry = core.entry(name)
  local _, _, written = core.unit_facts(entry.unit)
  known = { kind = entry.kind, unit = entry.unit, synonyms = entry.synonyms, meaning = entry.meaning .. (entry.unit ~= "1" and written and ", in " .. written or "") }
  if entry.kind == "verdict" then known.meaning = entry.meaning .. "; yes or no" end
  entries[name] = known
  return known
end
lists.entry_of = entry_of

-- All names but those in `without`, with the same append.
function lists.names(append, without)
  local list = {}
  for _, name in ipairs(core.names()) do
    if not (without and without[name]) then
      local entry = entry_of(name)
      add(list, name, entry.meaning, append)
      list[#list].synonyms = entry.synonyms
    end
  end
  return list
end

-- The names that have several recipes.
function lists.names_with_choice(append, without)
  local list = {}
  for _, candidate in ipairs(lists.names(append, without)) do
    if #core.entry(candidate.text).rows > 1 then list[#list + 1] = candidate end
  end
  return list
end

-- Names as members of a case (nil: not known): those that it has, the given ones first, then those for which more would have to be given;
-- or these first.
function lists.members(case, wanting_first)
  local given, had, others = {}, {}, {}
  for _, candidate in ipairs(lists.names()) do
    local row = case and core.row_of(case, candidate.text)
    local list, group = had, case and "to be had"
    if row == false then list, group = given, "given"
    elseif case and not row then list, group = others, "not to be had from what is given" end
    candidate.group = group
    if entry_of(candidate.text).kind ~= "object" or row == false then list[#list + 1] = candidate end
  end
  local all = {}
  for _, list in ipairs(wanting_first and { others, given, had } or { given, had, others }) do table.move(list, 1, #list, #all + 1, all) end
  return all
end

function lists.recipes(name)
  local list = {}
  if not core.find(name) then return list end
  for _, number in ipairs(core.entry(core.find(name)).rows) do
    local row = core.row(number)
    local source = row.kind == "assumed" and "assumed " .. row.assumes or row.source == "definition" and "by definition" or relations.source(row)
    add(list, row.by, source .. (row.supposes and "; supposes " .. row.supposes or ""))
  end
  return list
end

-- Units, bands, materials -----------------------------------------------------------------------------------------------------------

local units
local function all_units()
  if units then return units end
  units = {}
  for _, symbol in ipairs(core.unit_symbols()) do
    local factor, _, _, si = core.unit_facts(symbol)
    local _, _, si_written = core.unit_facts(si)
    add(units, symbol, format.with_unit(format.number(factor, 6), si == "1" and "" or si_written))
    units[#units].si = si
  end
  return units
end

-- Units of the dimension of `like` (a unit; nil: all), itself first.
function lists.units(like)
  local _, _, _, si = core.unit_facts(like or "")
  local list = {}
  for _, unit in ipairs(all_units()) do
    local candidate = { text = unit.text, meaning = unit.meaning, append = "" }
    if unit.text == like then table.insert(list, 1, candidate)
    elseif not si or unit.si == si then list[#list + 1] = candidate end
  end
  return list
end

function lists.bands()
  local list = {}
  for i = 1, math.huge do
    local band = core.band_at(i)
    if not band then return list end
    local aliases = core.band_facts(band)
    add(list, band.name, ("%.4g um, zero point %.4g Jy%s"):format(core.value(band.wavelength, "um"), core.value(band.zero_point, "Jy"),
      aliases and aliases ~= "" and ", also " .. aliases or ""))
    list[#list].synonyms = aliases
  end
end

function lists.materials(append)
  local list = {}
  for i = 1, math.huge do
    local material = core.material_at(i)
    if not material then return list end
    local facts = core.material_facts(material)
    add(list, facts.name, facts.what, append)
  end
end

-- Variables and Lua's own -----------------------------------------------------------------------------------------------------------

local standard = {}
for word in gmatch("assert collectgarbage dofile error getmetatable ipairs load loadfile next pairs pcall print rawequal rawget rawlen rawset require " ..
  "select setmetatable tonumber tostring type warn xpcall", "%a+") do standard[word] = "a function of Lua's" end
for word in gmatch("coroutine debug io math os package string table utf8", "%w+") do standard[word] = "a library of Lua's" end
standard._G, standard._VERSION, standard.arg = "the table of globals", "Lua's version", "the arguments of the program"
lists.standard = standard

-- What a value is, in one line. Nothing is computed for it, and no metamethod called.
local function about(value)
  local kind = type(value)
  if kind == "string" then return ("%q"):format(#value > 40 and sub(value, 1, 40) .. "..." or value):gsub("\\\n", "\\n") .. "" end
  if math.type(value) or kind == "boolean" then return tostring(value) end
  local name = kind == "table" and kind_of(value)
  if type(name) == "string" then return name end
  if kind ~= "userdata" then return "a " .. kind end
  if core.is_case(value) then return "a case" end
  if select("#", core.facts(value)) > 0 then return "a quantity, " .. (core.dimension(value)) end
  return core.object_type(value) or "a userdata"
end

local function appended(value, in_library)
  if type(value) == "function" then return "(" end
  return in_library and type(value) == "table" and "." or ""
end

local function is_identifier(key) return type(key) == "string" and find(key, "^[%a_][%w_]*$") and not keywords[key] end

local function sorted(list)
  table.sort(list, function(a, b) return a.text < b.text end)
  return list
end

-- The fields of a plain table, and of the plain tables behind it; of functions alone where they are to be called as methods.
function lists.fields(value, methods_only)
  local list, seen = {}, {}
  for _ = 1, 5 do
    if type(value) ~= "table" then break end
    for key, field in next, value do
      if is_identifier(key) and not seen[key] and (not methods_only or type(field) == "function") then
        seen[key] = true
        add(list, key, about(field), appended(field))
      end
    end
    local metatable = getmetatable(value)
    value = type(metatable) == "table" and rawget(metatable, "__index") or nil
  end
  return sorted(list)
end

-- The user's variables in the environment, a list of plain tables; or, with `standard_ones`, those that Lua has by itself.
function lists.variables(environment, standard_ones)
  local list, seen = {}, {}
  for _, scope in ipairs(environment) do
    for key, value in next, scope do
      if is_identifier(key) and not seen[key] and (standard[key] ~= nil) == standard_ones then
        seen[key] = true
        add(list, key, standard[key] or about(value), appended(value, standard_ones))
      end
    end
  end
  return sorted(list)
end

local takes_nothing = { ["break"] = true, ["end"] = true, ["false"] = true, ["nil"] = true, ["true"] = true, ["else"] = true, ["repeat"] = true }
local all_keywords
function lists.keywords()
  if all_keywords then return all_keywords end
  all_keywords = {}
  for word in next, keywords do add(all_keywords, word, "a keyword of Lua's", takes_nothing[word] and "" or " ") end
  return sorted(all_keywords)
end

return lists
