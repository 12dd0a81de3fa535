-- SPDX-License-Identifier: GPL-3.0-or-later
-- Cases as Lua sees them: making them, what-if, and what can be asked about them besides their quantities.
local core = ...
local text = core.part "lacuna.text"

local case = {} -- what the module offers
local methods = core.case_methods

local function by_text(a, b) return tostring(a) < tostring(b) end
local function sorted_keys(t)
  local keys, texts = {}, true
  for key in pairs(t) do
    keys[#keys + 1] = key
    texts = texts and type(key) == "string"
  end
  table.sort(keys, not texts and by_text or nil)
  return keys
end
case.sorted_keys = sorted_keys

-- The error for a word that is no name, with what it may have meant.
local function unknown_name(word, where)
  local name, synonym = core.find(word)
  if synonym then return ("%sunknown name '%s'; it is called %s here"):format(where, word, name) end
  local near = core.nearest(word)
  if #near == 0 then return ("%sunknown name '%s'; help() lists the names"):format(where, word) end
  return ("%sunknown name '%s'; did you mean %s?"):format(where, word, table.concat(near, ", ", 1, math.min(3, #near)))
end
case.unknown_name = unknown_name

-- The name behind a word, or an error.
local function name_of(word, where)
  if type(word) ~= "string" then core.raise(("%sa name is wanted; got %s"):format(where, type(word))) end
  local name, synonym = core.find(word)
  if name and not synonym then return name end
  core.raise(unknown_name(word, where))
end
case.name_of = name_of

-- Definitions by which a given could be had from the other givens, for one set of given names: where both are given they must agree.
local pairs_by_names = {}
local function definitions_to_check(givens)
  local names = sorted_keys(givens)
  local key = table.concat(names, " ")
  local known = pairs_by_names[key]
  if known then return known end
  known = {}
  for _, name in ipairs(names) do
    for _, number in ipairs(core.entry(name).rows) do
      local row = core.row(number)
      local all_given = row.kind == "definition" and #row.from > 0
      for _, input in ipairs(row.from) do all_given = all_given and givens[input] ~= nil end
      if all_given then known[#known + 1] = row end
    end
  end
  pairs_by_names[key] = known
  return known
end

-- A single number, or nil of what has more.
local function single(quantity)
  local _, _, _, number, size = core.facts(quantity)
  return size == 1 and number or nil
end
case.single = single

local AGREE = 0.01 -- single numbers that differ by a larger share contradict each other
case.AGREE = AGREE
local function differ(a, b) return math.abs(a - b) > AGREE * math.max(math.abs(a), math.abs(b)) end
case.differ = differ

-- Definitions are exact: givens that contradict one are an error. (What recipes give instead is for check.)
local function refuse_contradictions(givens)
  for _, row in ipairs(definitions_to_check(givens)) do
    local others = {}
    for _, input in ipairs(row.from) do others[input] = givens[input] end
    local by_definition = core.raw(core.new_case(others, { [row.gives] = row.by }, {}), row.gives)
    local given, derived = single(givens[row.gives]), by_definition and single(by_definition)
    if given and derived and differ(given, derived) then
      local inputs = {}
      for _, input in ipairs(row.from) do inputs[#inputs + 1] = input .. " = " .. text.quantity(givens[input]) end
      core.raise(("contradictory givens: %s = %s, but %s gives %s (by %s)"):format(row.gives, text.quantity(givens[row.gives]),
        table.concat(inputs, " and "), text.quantity(by_definition), row.by:gsub("_", " ")), 0)
    end
  end
end

-- The distribution of each given that was a spread, {kind, median, a, b, c} in SI, as long as the given lives: its draws alone don't tell it.
local distributions = setmetatable({}, { __mode = "k" })
function case.distribution(given) return distributions[given] end

-- Makes a case of raw givens. `checked`: those that are checked already.
local function make(givens, checked, using, info)
  local all, objects, written = {}, {}, {}
  for name, quantity in pairs(checked) do all[name] = quantity end
  for name, words in pairs(info.written or {}) do written[name] = words end
  for _, word in ipairs(sorted_keys(givens)) do
    local value = givens[word]
    local name = type(word) == "string" and core.find(word)
    if not name or select(2, core.find(word)) then core.raise(type(word) == "string" and unknown_name(word, "") or
      ("a case wants name = value; got the value %s without a name"):format(tostring(value)), 0) end
    if core.entry(name).kind == "object" then objects[name] = value and core.part "lacuna.objects".take(name, value)
    elseif value == false then all[name], written[name] = nil, nil
    else
      local distribution
      written[name], distribution = text.as_written(name, value)
      all[name] = core.given(name, value, info.target)
      distributions[all[name]] = distribution
    end
  end
  for name, object in pairs(info.objects or {}) do if objects[name] == nil then objects[name] = object end end
  for name, object in pairs(objects) do if not object then objects[name] = nil end end
  refuse_contradictions(all)
  return core.new_case(all, using, { givens = all, using = using, target = info.target, objects = objects, written = written, changed = info.changed })
end

case.make = make -- for studies, which check their givens themselves

function case.new(givens, options)
  if type(givens) ~= "table" then core.raise("case wants a table of givens, like case{distance = \"156 pc\"}; got " .. type(givens)) end
  return make(givens, {}, {}, options or {})
end

-- The recipes of b that differ from a's, for names that both have.
local function changed_recipes(a, b)
  local changed = {}
  if core.same_chain(a, b) then return changed end
  for _, name in ipairs(core.names()) do
    local before, after = core.row_of(a, name), core.row_of(b, name)
    if before and after and before ~= after then
      changed[#changed + 1] = { name = name, before = core.row(before).by, after = core.row(after).by }
    end
  end
  return changed
end
case.changed_recipes = changed_recipes

-- The recipes that this step changed, and those that earlier steps of a chain of with{} and using{} changed for good.
local function changed_so_far(first, before, now)
  local changed, listed = changed_recipes(before, now), {}
  for _, change in ipairs(changed) do listed[change.name] = true end
  for _, change in ipairs(first == before and {} or changed_recipes(first, now)) do
    if not listed[change.name] then changed[#changed + 1] = change end
  end
  return changed
end

local function derive(self, changes, using)
  local info = core.info(self)
  local other = make(changes, info.givens, using, info)
  local about = core.info(other)
  about.first = info.first or self
  about.changed = changed_so_far(about.first, self, other)
  if #about.changed > 0 then core.remember_answers(other) end -- so that they can say which recipes are not those of before
  return other
end

-- c:with{name = value, ...}: the case with these givens instead; false takes one away.
function methods.with(self, changes)
  if type(changes) ~= "table" then core.raise("with wants a table of givens; got " .. type(changes)) end
  return derive(self, changes, core.info(self).using)
end

-- c:using{name = "recipe", ...}: the case with these recipes.
function methods.using(self, recipes)
  if type(recipes) ~= "table" then core.raise("using wants a table like {array_resolution = \"fringe\"}; got " .. type(recipes)) end
  local using = {}
  for name, by in pairs(core.info(self).using) do using[name] = by end
  for word, by in pairs(recipes) do
    if type(by) ~= "string" then core.raise(("using: %s wants the name of a recipe; got %s"):format(tostring(word), type(by))) end
    using[name_of(word, "using: ")] = by
  end
  return derive(self, {}, using)
end

-- The rows by which this case could have a name, the one it takes first.
local function live_rows(self, name)
  local taken, rows = core.row_of(self, name), {}
  if taken then rows[1] = core.row(taken) end
  for _, number in ipairs(core.entry(name).rows) do
    local row = core.row(number)
    local live = number ~= taken
    for _, input in ipairs(row.from) do live = live and core.row_of(self, input) ~= nil end
    if live and core.row_of(self, name) ~= false then rows[#rows + 1] = row end
  end
  return rows
end
case.live_rows = live_rows

-- The case with one name by another recipe, or nil where that can't be had.
local function by_recipe(self, name, by)
  local using = {}
  for other, recipe in pairs(core.info(self).using) do using[other] = recipe end
  using[name] = by
  local info = {}
  for key, value in pairs(core.info(self)) do info[key] = value end
  info.using = using
  local other = core.new_case(info.givens, using, info, true)
  if other then core.share(other, self) end
  return other
end
case.by_recipe = by_recipe

-- Whether a recipe merely leaves out what is known: its inputs are some of the other's.
local function leaves_out(row, taken)
  if #row.from >= #taken.from then return false end
  local has = {}
  for _, name in ipairs(taken.from) do has[name] = true end
  for _, name in ipairs(row.from) do if not has[name] then return false end end
  return true
end
case.leaves_out = leaves_out

-- What other recipes along the chain of a name would give: a list of {name, by, row, value, instead_of}, one recipe changed at a time.
function case.over_recipes(self, name)
  local others = {}
  for _, step in ipairs(core.steps(self, name)) do
    if step.row then
      local rows = live_rows(self, step.name)
      for i = 2, #rows do
        local row = rows[i]
        if row.kind ~= "definition" and row.kind ~= "assumed" then
          local other = by_recipe(self, step.name, row.by)
          local value = other and core.raw(other, name)
          if value then others[#others + 1] = { name = step.name, by = row.by, row = row, value = value, instead_of = rows[1].by } end
        end
      end
    end
  end
  return others
end

-- Assumptions on which a name rests: rows of assumed values.
function case.assumptions(self, name)
  local assumed = {}
  for _, step in ipairs(core.steps(self, name)) do
    local row = step.row and core.row(step.row)
    if row and row.kind == "assumed" then assumed[#assumed + 1] = row end
  end
  return assumed
end

-- c:givens(): the givens' names in glossary order.
function methods.givens(self)
  local names, givens = {}, core.info(self).givens
  for _, name in ipairs(core.names()) do if givens[name] then names[#names + 1] = name end end
  return names
end

-- c:recipes(name): what each recipe of a name gives in this case; prints itself.
function methods.recipes(self, word) return core.part "lacuna.recipes".recipes(word, self) end

-- Parts that are loaded when they are first asked for; what they bring takes these methods' places.
for _, method in ipairs { "check", "missing", "why", "solve", "sensitivity" } do
  methods[method] = function(...)
    core.part("lacuna." .. method)
    return methods[method](...)
  end
end

core.set_handlers {
  not_had = function(self, name)
    core.raise(core.part "lacuna.missing".not_had(self, name))
  end,
  undefined = function(self, name)
    core.raise(core.part "lacuna.why".undefined(self, name))
  end,
  unknown = function(self, word)
    local object = core.info(self).objects[word]
    if object then return object end
    if type(word) == "string" and core.find(word) == word then core.raise(("%s is not given; give %s = \"...\""):format(word, word)) end
    core.raise(unknown_name(tostring(word), ""))
  end,
}

return case
