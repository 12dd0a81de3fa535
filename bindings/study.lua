-- SPDX-License-Identifier: GPL-3.0-or-later
-- study{}: a list of targets, what is common to them, variants, and what to ask: a table with error bars, and below it the reasons,
-- recipes and assumptions. Each target makes one case, and one more for each variant; a column is a name asked of one of these.
local core = ...
local case = core.part "lacuna.case"
local tables = core.part "lacuna.table"
local targets = core.part "lacuna.targets"
local text = core.part "lacuna.text"

-- Ensembles up to this length are kept once computed, as the table, the reasons and the comparisons all read them; in all no more
-- than so many numbers (200 MB), so that a list of a thousand stars passes too.
local LONGEST_KEPT, MOST_KEPT = 100000, 25000000
local COLLECT_AFTER = 50 -- stars: the core's memory behind dead cases is not seen by Lua's collector
local WIDTH = 100 -- of the output where no terminal says otherwise

-- What is asked --------------------------------------------------------------------------------------------------------------------

local study_fields = { title = "string", targets = "any", given = "table", ask = "table", variants = "table", using = "table", csv = "string", latex = "string", derive = "string" }
local variant_fields = { name = "string", given = "table", ask = "table", using = "table" }

local function check_fields(fields, allowed, what)
  for _, word in ipairs(case.sorted_keys(fields)) do
    local kind = allowed[word]
    if not kind then
      error(("%s: there is no '%s' here; there are %s"):format(what, tostring(word), table.concat(case.sorted_keys(allowed), ", ")), 0)
    end
    if kind ~= "any" and type(fields[word]) ~= kind then
      error(("%s: %s wants a %s; got %s"):format(what, word, kind == "string" and "text" or kind, type(fields[word])), 0)
    end
  end
end

-- The glossary's name for a word, or an error.
local function name_for(word, what)
  if type(word) ~= "string" then error(("%s: a name is wanted; got %s"):format(what, tostring(word)), 0) end
  local name, synonym = core.find(word)
  if not name or synonym then error(case.unknown_name(word, what .. ": "), 0) end
  return name
end

-- Common givens: checked, without a target, so that their draws are the same for all.
local function read_givens(given, what)
  local givens, objects, written = {}, {}, {}
  for _, word in ipairs(case.sorted_keys(given or {})) do
    local name = name_for(word, what)
    if core.entry(name).kind == "object" then objects[name] = core.part "lacuna.objects".take(name, given[word])
    else
      local as_written = text.as_written(name, given[word])
      local ok, value = pcall(core.given, name, given[word])
      if not ok then error(what .. ": " .. targets.bare(value), 0) end
      for _, axis in ipairs(core.axes(value)) do
        if axis.name ~= "draw" then error(("%s: %s wants one value or an error bar in a study, not one along %s; make it variants"):format(what, name, axis.name), 0) end
      end
      givens[name], written[name] = value, as_written or text.quantity(value)
    end
  end
  return givens, objects, written
end

local function read_ask(ask, what)
  local names, seen = {}, {}
  for i, word in ipairs(ask or {}) do
    local name = name_for(word, what .. ": ask")
    if core.entry(name).kind == "object" then error(("%s: ask: %s is an object; there is nothing to derive"):format(what, name), 0) end
    if seen[name] then error(("%s: ask: %s is asked twice"):format(what, name), 0) end
    seen[name] = true
    names[i] = name
  end
  return names
end

local function read_using(using, what)
  local recipes = {}
  for word, by in pairs(using or {}) do
    if type(by) ~= "string" then error(("%s: using: %s wants the name of a recipe; got %s"):format(what, tostring(word), type(by)), 0) end
    recipes[name_for(word, what .. ": using")] = by
  end
  return recipes
end

local function both(a, b)
  local all = {}
  for key, value in pairs(a) do all[key] = value end
  for key, value in pairs(b) do all[key] = value end
  return all
end

local function refuse_twice(givens, others, where)
  for _, name in ipairs(case.sorted_keys(givens)) do
    if others[name] then error(("%s: %s is given twice, here and %s"):format(type(where) == "table" and where[name] or where, name, others.called), 0) end
  end
end

-- One group: what is given in it besides the targets' own, and what is asked. The first has no name; the others are the variants.
local function read_group(fields, common, what)
  local givens, objects, written = read_givens(fields.given, what)
  if common then refuse_twice(givens, setmetatable({ called = "in the study's given" }, { __index = common.givens }), what) end
  return {
    name = common and fields.name or nil,
    givens = both(common and common.givens or {}, givens), own = givens, written = written, objects = both(common and common.objects or {}, objects),
    using = both(common and common.using or {}, read_using(fields.using, what)), ask = read_ask(fields.ask, what),
  }
end

local function read_groups(fields)
  local groups, names = { read_group(fields, nil, "study") }, {}
  for i, variant in ipairs(fields.variants or {}) do
    if type(variant) ~= "table" then error(("study: variant %d wants a table {name = ..., given = ..., ask = ...}; got %s"):format(i, type(variant)), 0) end
    local what = ('study: variant "%s"'):format(tostring(variant.name or i))
    check_fields(variant, variant_fields, what)
    if not variant.name or variant.name == "" then error(("study: variant %d wants name = a text"):format(i), 0) end
    if names[variant.name] then error(what .. ": there is a variant of that name already", 0) end
    names[variant.name] = true
    groups[i + 1] = read_group(variant, groups[1], what)
    if #groups[i + 1].ask == 0 then error(what .. ': wants ask = {names}, like ask = {"gap_resolved_by_array"}', 0) end
  end
  if #groups == 1 and #groups[1].ask == 0 then error('study wants ask = {names}, like ask = {"rim_radius", "rim_resolved_by_array"}', 0) end
  return groups
end

-- What one target gives may not be given for all as well.
local function refuse_givens_of_targets(list, groups)
  for i, group in ipairs(groups) do
    local called = i == 1 and "in the study's given" or ('in variant "%s"'):format(group.name)
    local own = i == 1 and group.givens or group.own
    refuse_twice(list.places, setmetatable({ called = called }, { __index = own }), list.places)
  end
end

-- Cases and cells -----------------------------------------------------------------------------------------------------------------

-- A keeper of one study's ensembles: a function that keeps a quantity while there is room, and returns it.
local function new_keeper()
  local room = math.min(MOST_KEPT, core.settings().memory * 1048576 / 8 / 4) -- a quarter of what is allowed at most
  return function(quantity)
    local _, _, _, _, size = core.facts(quantity)
    if size > LONGEST_KEPT or size > room then return quantity end
    room = room - size
    return core.store(quantity)
  end
end

local function keep_all(givens, keep)
  for _, quantity in pairs(givens) do keep(quantity) end
end

local function make_case(target, group)
  local info = { target = target.name, objects = both(group.objects, target.objects) }
  local ok, made = pcall(case.make, {}, both(group.givens, target.givens), group.using, info)
  if not ok then error(("%s: %s%s"):format(target.where, group.name and ('in variant "%s": '):format(group.name) or "", targets.bare(made)), 0) end
  return made
end

local function contains(names, others)
  local has = {}
  for _, name in ipairs(names) do has[name] = true end
  for _, name in ipairs(others) do if not has[name] then return false end end
  return true
end

-- "for want of stellar_mass, or of planet_star_mass_ratio"
local function what_is_missing(self, name)
  local sets = core.missing_sets(self, name)
  if #sets == 0 then return "must be given: no relation gives it" end
  local ways = {}
  for i, set in ipairs(sets) do
    local more = false
    for j = 1, i - 1 do more = more or contains(set.names, sets[j].names) end
    if not more and #ways < 3 then ways[#ways + 1] = table.concat(set.names, " and ") end
  end
  return "for want of " .. table.concat(ways, ", or of ")
end

local function cell_of(self, name, keep)
  if core.row_of(self, name) == nil then return { missing = true, reason = what_is_missing(self, name) } end
  local quantity = keep(core.raw(self, name))
  local _, _, factor, number, size = core.facts(quantity)
  local undefined = core.elements(core.undefined(quantity))[1]
  if undefined == size then return { missing = true, reason = size == 1 and text.undefined(self, name) or "undefined in all draws" } end
  local cell = { quantity = quantity, undefined = undefined / size }
  if core.entry(name).kind == "verdict" then cell.share = core.elements(core.chance(quantity))[1]
  elseif size == 1 then cell.value = number / factor
  else cell.value, cell.upper, cell.lower = text.median_and_errors(quantity, factor) end
  return cell
end

local function make_columns(groups)
  local columns = {}
  for number, group in ipairs(groups) do
    for _, name in ipairs(group.ask) do
      local entry = core.entry(name)
      local _, tex, plain = core.unit_facts(entry.unit)
      columns[#columns + 1] = {
        name = name, entry = entry, verdict = entry.kind == "verdict", group = group.name, group_number = number, unit = entry.unit,
        unit_text = entry.unit == "1" and "" or plain, unit_tex = tex, label = (group.name and group.name .. ": " or "") .. name,
      }
    end
  end
  return columns
end

local function make_row(target, groups, columns, keep)
  keep_all(target.givens, keep)
  local row = { name = target.name, texts = target.texts, target = target, made = {}, variants = {}, cells = {} }
  for number, group in ipairs(groups) do
    row.made[number] = make_case(target, group)
    if group.name then row.variants[group.name] = row.made[number] end
  end
  row.case = row.made[1]
  for i, column in ipairs(columns) do row.cells[i] = cell_of(row.made[column.group_number], column.name, keep) end
  return row
end

local function refuse_emptiness(columns, rows)
  for _, row in ipairs(rows) do
    for _, cell in ipairs(row.cells) do if not cell.missing then return end end
  end
  error(("study: nothing that is asked can be derived for any target: %s of %s, %s"):format(columns[1].label, rows[1].name, rows[1].cells[1].reason), 0)
end

-- Files and the study itself ------------------------------------------------------------------------------------------------------

-- The folder of the script that runs: of the nearest function on the stack that comes from a file.
local function script_folder()
  if not debug then return "" end
  for level = 3, 60 do
    local info = debug.getinfo(level, "S")
    if not info then return "" end
    if info.source:sub(1, 1) == "@" then return info.source:match "^@(.*/)" or "" end
  end
  return ""
end

local function find_file(name)
  if name:sub(1, 1) == "/" then return name end
  local beside_script = script_folder() .. name
  local file = io.open(beside_script, "rb")
  if not file then return name end
  file:close()
  return beside_script
end

local study_metatable = { __name = "study", __index = {} }
function study_metatable.__tostring(study) return ("study of %d target%s, %d column%s"):format(#study.rows, #study.rows == 1 and "" or "s", #study.columns, #study.columns == 1 and "" or "s") end

-- s:table(columns): the table and its notes as text, at most so many columns wide.
function study_metatable.__index.table(study, columns) return tables.text(study, columns or core.terminal_width() or WIDTH) end
function study_metatable.__index.csv(study) return tables.csv(study) end
function study_metatable.__index.latex(study) return tables.latex(study) end
-- s:report(folder): writes the report and returns what was written, which prints itself.
function study_metatable.__index.report(study, folder, facts) return core.part "lacuna.report".write(study, folder, facts or study.facts) end

local function run(fields)
  check_fields(fields, study_fields, "study")
  if fields.targets == nil then error("study wants targets = the name of a CSV file, or a list of tables", 0) end
  local groups = read_groups(fields)
  local list = targets.read(fields.targets, find_file)
  refuse_givens_of_targets(list, groups)
  local keep = new_keeper()
  for _, group in ipairs(groups) do keep_all(group.own, keep) end
  local columns, rows = make_columns(groups), {}
  for i, target in ipairs(list) do
    rows[i] = make_row(target, groups, columns, keep)
    if i % COLLECT_AFTER == 0 then collectgarbage() end
  end
  refuse_emptiness(columns, rows)
  local study = { facts = { inputs = type(fields.targets) == "string" and { find_file(fields.targets) } or {} }, derive = fields.derive, title = fields.title, texts = list.texts, groups = groups, columns = columns, rows = rows, collect_after = COLLECT_AFTER }
  study.notes = core.part "lacuna.notes".of(study)
  return setmetatable(study, study_metatable)
end

-- Calls f(fields) as pcall does. Thousands of short computations are quicker without the threads meeting after each; the bits are the same.
local function on_one_thread(f, fields)
  local settings = core.settings()
  if settings.draws > LONGEST_KEPT then return pcall(f, fields) end
  core.settings { threads = 1 }
  local ok, result = pcall(f, fields)
  core.settings { threads = settings.threads }
  return ok, result
end

-- study{title =, targets =, given =, ask =, variants =, using =, csv =, latex =}: prints the table; returns an object with rows
-- (name, case, variants[name] = case) and the methods table(), csv(), latex(). Files are whole or absent.
local function new_study(fields)
  if type(fields) ~= "table" then core.raise("study wants a table {targets = ..., ask = ...}; got " .. type(fields)) end
  local ok, study = on_one_thread(run, fields)
  if not ok and type(study) == "string" and study:find "^study[: ]" then core.raise(study) end
  if not ok then error(study, 0) end
  for _, output in ipairs { "csv", "latex" } do
    if fields[output] then
      local written, trouble = pcall(core.write_file, fields[output], study[output](study))
      if not written then core.raise(targets.bare(trouble)) end
    end
  end
  print(study:table())
  return study
end

return { study = new_study }
