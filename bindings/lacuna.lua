-- SPDX-License-Identifier: GPL-3.0-or-later
-- The module's table: the words of the language. Units (lacuna.au) and the glossary's names as functions (lacuna.hill_radius{...})
-- are made when they are first asked for.
local core = ...
local text = core.part "lacuna.text"
local case = core.part "lacuna.case"

-- Rows of the tables don't change once they are there; a name's entry does with each row that gives it. Both are asked for often.
do
  local row, entry, rows, entries = core.row, core.entry, {}, {}
  function core.row(number)
    rows[number] = rows[number] or row(number)
    return rows[number]
  end
  function core.entry(name)
    entries[name] = entries[name] or entry(name)
    return entries[name]
  end
  for _, word in ipairs { "add_name", "add_relation" } do
    local add = core[word]
    core[word] = function(...)
      entries = {}
      return add(...)
    end
  end
end

local settings_shown = { __tostring = function(s)
  return ("seed %d, %d draws, %d threads, %.0f MiB of memory"):format(s.seed, s.draws, s.threads, s.memory)
end }

local lacuna = {
  settings = function(changes) return setmetatable(core.settings(changes), settings_shown) end,
  mean = core.mean, deviation = core.deviation, median = core.median, interval = core.interval, quantile = core.quantile,
  chance = core.chance, undefined = core.undefined, lowest = core.lowest, highest = core.highest,
  above = core.above, below = core.below, both = core.both, either = core.either, least = core.least, greatest = core.greatest,
  sqrt = core.sqrt, abs = core.abs, exp = core.exp, log = core.log, log10 = core.log10, sin = core.sin, cos = core.cos, tan = core.tan,
  along = core.along, more = core.part "lacuna.show".more, band = core.band,
}

-- show(value, ...): the text of values as the prompt writes them. show(figure) draws it.
function lacuna.show(...)
  local first = ...
  if type(first) == "table" and (getmetatable(first) or {}).__name == "figure" then return core.part "lacuna.figure".show(first) end
  return core.part "lacuna.show".show(...)
end

-- Methods of quantities, with every summary among them.
local methods = {
  as = core.as, value = core.value, axes = core.axes, stored = core.stored, mean = core.mean, deviation = core.deviation, median = core.median,
  interval = core.interval, quantile = core.quantile, chance = core.chance, undefined = core.undefined, lowest = core.lowest,
  highest = core.highest, sqrt = core.sqrt, abs = core.abs,
}
-- q:at{axis = point}; core.at lets axes pass that the quantity doesn't have.
function methods.at(quantity, points)
  if type(points) ~= "table" then core.raise("at wants a table like {draw = 1}; got " .. core.shown(points)) end
  local known = {}
  for i, axis in ipairs(core.axes(quantity)) do known[i], known[axis.name] = axis.name, true end
  for axis in pairs(points) do
    if not known[axis] then core.raise(("at: the quantity has no axis '%s'; it has %s"):format(tostring(axis), #known > 0 and table.concat(known, ", ") or "none")) end
  end
  return core.at(quantity, points)
end

for _, metatable in ipairs { core.number_metatable, core.value_metatable } do
  metatable.__index = function(quantity, word)
    local method = methods[word]
    if method == nil then core.raise(("a quantity has no '%s'; it has %s"):format(tostring(word), table.concat(case.sorted_keys(methods), ", "))) end
    return method
  end
  metatable.__tostring = text.quantity
  metatable.__metatable = "quantity" -- its finaliser is not to be called by hand
  metatable.__concat = function(a, b) return tostring(a) .. tostring(b) end
end
core.case_metatable.__tostring = text.case
core.case_metatable.__metatable = "case"
core.case_metatable.__newindex = function() core.raise("a case doesn't change; c:with{name = value} makes another") end

function lacuna.case(givens) return case.new(givens) end

local later -- parts that are loaded when they are first asked for

local function check_name(name)
  if core.unit(name) then core.raise(("quantity: %s is a unit already"):format(name)) end
  if later[name] or rawget(lacuna, name) ~= nil and not core.find(name) then core.raise(("quantity: %s is a word of the language already"):format(name)) end
end

-- A new name; where it brings no symbol of its own, its words are one. A symbol that can't be read is an error now, not in help later.
local function new_name(entry)
  local copy = {}
  for key, value in pairs(entry) do copy[key] = value end
  if type(copy.name) == "string" then check_name(copy.name) end
  if copy.symbol == nil and type(copy.name) == "string" then copy.symbol = "\\mathrm{" .. copy.name:gsub("_", " ") .. "}" end
  if type(copy.symbol) == "string" then
    local ok, defect = pcall(core.part "lacuna.equation".plain_symbol, copy.symbol)
    if not ok and entry.symbol == nil then copy.symbol = nil
    elseif not ok then core.raise("quantity: its symbol: " .. tostring(defect)) end
  end
  return core.add_name(copy)
end

-- quantity "156 ± 3 pc", quantity(5, "au"): a quantity. quantity{name =, unit =, meaning =, ...}: a new name for the glossary.
function lacuna.quantity(first, unit)
  if type(first) == "table" then return new_name(first) end
  if unit ~= nil then return core.quantity(first, unit) end
  return core.quantity(first)
end

-- relation{gives =, by =, from = {...}, function(a, b) ... end, source =, equation =, supposes =}: a row of the user's.
function lacuna.relation(row)
  if type(row) ~= "table" then core.raise("relation wants a table; got " .. type(row)) end
  local copy = {}
  for key, value in pairs(row) do copy[key] = value end
  copy.call, copy[1] = row[1] or row.call, nil
  if type(row.equation) == "string" and row.equation ~= "" then
    for name in row.equation:gmatch "%[([%w_]+)%]" do case.name_of(name, "relation: its equation has the ") end
    local ok, defect = pcall(core.part "lacuna.equation".plain, row.equation, core.part "lacuna.relations".symbol)
    if not ok then core.raise("relation: " .. tostring(defect)) end
  end
  return core.add_relation(copy)
end

-- A table of words that answers a slip with what there is.
local function words_of(name, words, call)
  local list = table.concat(case.sorted_keys(words), ", ")
  return setmetatable(words, {
    __call = call, __tostring = function() return ('%s has %s; help "%s" tells more'):format(name, list, name) end,
    __index = function(_, word) core.raise(("%s has no '%s'; it has %s"):format(name, tostring(word), list)) end,
  })
end

lacuna.spread = words_of("spread", {
  normal = core.spread_normal, lopsided = core.spread_lopsided, uniform = core.spread_uniform, log_uniform = core.spread_log_uniform,
  log_normal = core.spread_log_normal, samples = core.spread_samples,
})
lacuna.sweep = words_of("sweep", { log = core.sweep_log }, function(_, ...) return core.sweep(...) end)

-- Parts that many runs don't need are loaded when they are first asked for.
later = {
  again = "lacuna.notebook", compare = "lacuna.compare", dust = "lacuna.dust", figure = "lacuna.figure", glossary = "lacuna.glossary", help = "lacuna.help",
  keep = "lacuna.notebook", material = "lacuna.dust", recipes = "lacuna.recipes", study = "lacuna.study",
}

local function look_up(_, word)
  if type(word) ~= "string" then return nil end
  if later[word] then
    local value = core.part(later[word])[word]
    rawset(lacuna, word, value)
    return value
  end
  local unit = word:find "^%a+$" and core.unit(word)
  if unit then
    rawset(lacuna, word, unit)
    return unit
  end
  local name, synonym = core.find(word)
  if not name or synonym then return nil end
  local function derive(givens)
    if type(givens) ~= "table" then core.raise(("%s wants a table of givens; got %s"):format(word, type(givens))) end
    return case.new(givens)[name]
  end
  rawset(lacuna, word, derive)
  return derive
end
setmetatable(lacuna, { __index = look_up, later = later })

-- globals(environment): makes the words, units and names readable as globals there. A unit's global can't be assigned to.
function lacuna.globals(environment)
  if type(environment) ~= "table" then core.raise("globals wants a table, like globals(_ENV); got " .. core.shown(environment)) end
  return setmetatable(environment, {
    __index = lacuna,
    __newindex = function(t, word, value)
      if type(word) == "string" and word:find "^%a+$" and core.unit(word) then
        core.raise(("%s is a unit: its global can't be assigned to; choose another name, or write local %s = ..."):format(word, word))
      end
      rawset(t, word, value)
    end,
  })
end

return lacuna
