-- SPDX-License-Identifier: GPL-3.0-or-later
-- study{}: a list of targets, what is common to them, variants, and what to ask: a table with error bars, and below it the reasons,
-- recipes and assumptions. Each target makes one case, and one more for each variant; a column is a name asked of one of these.
-- Here are its fields and the object it returns; record.lua works out one target, run.lua all of them.
local core = ...
local case = core.part "lacuna.case"
local command = core.part "lacuna.command"
local english = core.part "lacuna.english"
local records = core.part "lacuna.record"
local run = core.part "lacuna.run"
local selection = core.part "lacuna.selection"
local tables = core.part "lacuna.table"
local targets = core.part "lacuna.targets"
local text = core.part "lacuna.text"

-- What is asked --------------------------------------------------------------------------------------------------------------------

local study_fields = {
  title = "string", targets = "any", given = "table", ask = "table", also = "table", variants = "table", using = "table", sort = "any", where = "table",
  figures = "table", csv = "string", latex = "string", derive = "string",
}
local variant_fields = { name = "string", given = "table", ask = "table", also = "table", using = "table" }

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
      if not ok then error(what .. ": " .. records.bare(value), 0) end
      local axis = text.axes(value)[1]
      if axis then error(("%s: %s wants one value or an error bar in a study, not one along %s; make it variants"):format(what, name, axis.name), 0) end
      givens[name], written[name] = value, as_written or text.quantity(value)
    end
  end
  return givens, objects, written
end

local function read_ask(ask, what, field)
  local names, seen = {}, {}
  for i, word in ipairs(ask or {}) do
    local name = name_for(word, ("%s: %s"):format(what, field))
    if core.entry(name).kind == "object" then error(("%s: %s: %s is an object; there is nothing to derive"):format(what, field, name), 0) end
    if seen[name] then error(("%s: %s: %s is asked twice"):format(what, field, name), 0) end
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

local both = records.both

local function refuse_twice(givens, others, where)
  for _, name in ipairs(case.sorted_keys(givens)) do
    if others[name] then error(("%s: %s is given twice, here and %s"):format(type(where) == "table" and where[name] or where, name, others.called), 0) end
  end
end

-- One group: what is given in it besides the targets' own, and what is asked. The first has no name; the others are the variants.
local function read_group(fields, common, what)
  local givens, objects, written = read_givens(fields.given, what)
  local chosen = read_using(fields.using, what)
  if common then refuse_twice(givens, setmetatable({ called = "in the study's given" }, { __index = common.givens }), what) end
  return {
    name = common and fields.name or nil,
    givens = both(common and common.givens or {}, givens), own = givens, written = written, objects = both(common and common.objects or {}, objects),
    using = both(common and common.using or {}, chosen), chosen = chosen,
    ask = read_ask(fields.ask, what, "ask"), also = read_ask(fields.also, what, "also"),
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

-- With nothing at all to show there is something wrong with the whole: one line says what.
local function refuse_emptiness(columns, rows)
  local failed
  for _, row in ipairs(rows) do
    for _, cell in ipairs(row.cells) do if not cell.missing then return end end
    failed = failed or row.failed
  end
  if failed then error(failed, 0) end
  error(("study: nothing that is asked can be derived for any target: %s of %s, %s"):format(columns[1].label, rows[1].name, rows[1].cells[1].reason), 0)
end

local function refuse_unknown_target(name, list)
  if name == nil then return end
  for _, target in ipairs(list) do if target.name == name then return end end
  error(('study: derive: there is no target "%s"'):format(name), 0)
end

-- Before the targets are worked out: a slip in a figure is not to be found only after hours.
local function check_figures(figures, list, plan)
  local names = {}
  for _, target in ipairs(list) do names[target.name] = true end
  core.part "lacuna.figure".check(figures or {}, function(name) return names[name] end, function(name) return plan.numbers[name] end)
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

-- Where a file of that name stands: its path, and its text where a run that is put together has brought it along.
local function find_file(name)
  if command.inputs[name] then return name, command.inputs[name] end
  if name:sub(1, 1) == "/" then return name end
  local beside_script = script_folder() .. name
  local file = io.open(beside_script, "rb")
  if not file then return name end
  file:close()
  return beside_script
end

-- Rows ------------------------------------------------------------------------------------------------------------------------------

-- row.case, row.variants[name] and row.made[number] are made anew whenever they are asked for, and kept only as long as somebody has them.
local function lazy_cases(plan, target)
  local cases = setmetatable({}, { __mode = "v" })
  local function case_in(number)
    local made = cases[number] or records.case_in(plan, target, number)
    cases[number] = made
    return made
  end
  local variants = setmetatable({}, {
    __index = function(_, name) return plan.numbers[name] and case_in(plan.numbers[name]) end,
    __pairs = function()
      local number = 1
      return function()
        number = number + 1
        if plan.groups[number] then return plan.groups[number].name, case_in(number) end
      end
    end,
  })
  local made = setmetatable({}, { __index = function(_, number) return plan.groups[number] and case_in(number) end, __len = function() return #plan.groups end })
  return { __index = function(_, word)
    if word == "case" then return case_in(1) end
    return word == "variants" and variants or word == "made" and made or nil
  end }
end

local function new_row(plan, target, record)
  local row = { name = record.name, texts = record.texts, target = target, failed = record.failed, cells = {}, hidden = {} }
  for i, cell in ipairs(record.cells) do
    local list = i <= #plan.columns and row.cells or row.hidden
    list[#list + 1] = cell
  end
  return setmetatable(row, lazy_cases(plan, target))
end

-- The study object --------------------------------------------------------------------------------------------------------------------

local methods = {}
local study_metatable = { __name = "study", __index = methods }
function study_metatable.__tostring(study)
  return ("study of %d %s, %d %s; help \"study\" tells what it can be asked"):format(#study.rows, english.plural(#study.rows, "target"), #study.columns,
    english.plural(#study.columns, "column"))
end

-- s:table(columns): the table and its notes as text, at most so many columns wide.
function methods.table(study, columns) return tables.text(study, columns) end
function methods.csv(study) return core.part "lacuna.table_files".csv(study) end
function methods.latex(study) return core.part "lacuna.table_tex".latex(study) end

-- s:report(folder, {force = true}): writes the whole report; force: into a folder that has files already. Returns what was written.
function methods.report(study, folder, options) return core.part "lacuna.report".ask(study, folder, options, run.facts(study.result)) end

local function listed(study, name, variant)
  for field, columns in pairs { cells = study.columns, hidden = study.hidden } do
    for i, column in ipairs(columns) do
      if column.name == name and column.group == variant then return field, i end
    end
  end
end

-- s:values(name, variant): the cells of a name, one for each row, whether the table shows it or not; what was not asked is worked out now.
function methods.values(study, word, variant)
  local name = case.name_of(word, "values: ")
  local number = variant == nil and 1 or study.plan.numbers[variant]
  if not number then core.raise(('values: the study has no variant "%s"'):format(tostring(variant))) end
  local field, place = listed(study, name, variant)
  local cells = {}
  for i, row in ipairs(study.rows) do
    if field then cells[i] = row[field][place]
    elseif row.failed then cells[i] = row.cells[1]
    else cells[i] = records.cell_of(row.made[number], name, core.entry(name).kind == "verdict") end
  end
  return cells
end

-- Making one ------------------------------------------------------------------------------------------------------------------------

local function new_plan(fields)
  check_fields(fields, study_fields, "study")
  if fields.targets == nil then error("study wants targets = the name of a CSV file, or a list of tables", 0) end
  local plan = { title = fields.title, groups = read_groups(fields), numbers = {}, steps = {} }
  for number, group in ipairs(plan.groups) do if group.name then plan.numbers[group.name] = number end end
  selection.read(plan, fields.sort, fields.where)
  plan.set = command.overrides()
  plan.columns, plan.hidden = records.columns(plan.groups, "ask"), records.columns(plan.groups, "also")
  plan.all = table.move(plan.hidden, 1, #plan.hidden, #plan.columns + 1, { table.unpack(plan.columns) })
  return plan
end

local function make(fields)
  local plan = new_plan(fields)
  local list = targets.read(fields.targets, find_file)
  refuse_givens_of_targets(list, plan.groups)
  refuse_unknown_target(fields.derive, list)
  check_figures(fields.figures, list, plan)
  for _, givens in ipairs { plan.groups[1].own, plan.set.givens } do
    for _, quantity in pairs(givens) do records.keep(quantity) end
  end
  local result = run.all(plan, list)
  local rows = {}
  for i, record in ipairs(result.records) do rows[i] = new_row(plan, result.targets[i], record) end
  if not command.shard then refuse_emptiness(plan.columns, rows) end
  local shown, selected = rows, nil
  if not command.shard then shown, selected = selection.apply(plan, rows) end
  local study = setmetatable({
    title = plan.title, texts = list.texts, doubtful = list.doubtful, groups = plan.groups, columns = plan.columns, hidden = plan.hidden, set = plan.set, sweeps = plan.set.sweeps,
    rows = shown, selected = selected, plan = plan, result = result, derive = fields.derive,
    figures = fields.figures,
  }, study_metatable)
  study.notes = core.part "lacuna.notes".of(study)
  return study, result
end

-- Calls f(fields) as pcall does. Thousands of short computations are quicker without the threads meeting after each; the bits are the same.
local function on_one_thread(f, fields)
  local settings = core.settings()
  local long = settings.draws > records.LONGEST_KEPT
  command.threads = long and 1 or settings.threads -- processes; many draws keep all cores busy by themselves
  if long then return pcall(f, fields) end
  local back <close> = setmetatable({}, { __close = function() core.settings { threads = settings.threads } end }) -- Ctrl-C passes pcall
  core.settings { threads = 1 }
  return pcall(f, fields)
end

-- study{title =, targets =, given =, ask =, also =, variants =, using =, sort =, where =, csv =, latex =, derive =}: prints the table; returns an
-- object with rows (name, cells, case, variants[name] = case) and the methods table(), csv(), latex(), report(), values(). Files are whole or absent.
local function new_study(fields)
  if type(fields) ~= "table" then core.raise("study wants a table {targets = ..., ask = ...}; got " .. type(fields)) end
  local ok, study, result = on_one_thread(make, fields)
  if not ok and type(study) == "string" and study:find "^study[: ]" then core.raise(study) end
  if not ok then error(study, 0) end
  for _, output in ipairs { "csv", "latex" } do
    if fields[output] and not command.shard then
      local written, trouble = pcall(core.write_file, fields[output], study[output](study))
      if not written then core.raise(records.bare(trouble)) end
    end
  end
  run.close(study, result)
  return study
end

return { study = new_study, fields = study_fields, variant_fields = variant_fields }
