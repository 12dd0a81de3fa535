-- SPDX-License-Identifier: GPL-3.0-or-later
-- Which rows of a study are shown, and in which order:
--   sort = "name" | "rim_size_angle" | { "gap_resolved_by_array", variant = "planet at 5 au", descending = true }
--   where = { "rim_size_angle", above = "1 mas" } | a list of such, all of which must hold; of a verdict: the share of draws.
-- A name that isn't asked is worked out besides. A row whose value is missing passes no condition, and comes last in any order; a target that
-- failed is shown all the same, since its row says why.
local core = ...
local case = core.part "lacuna.case"

local selection = {}

local function complain(form, ...) error("study: " .. form:format(...), 0) end

local function check_keys(one, allowed, what)
  for _, key in ipairs(case.sorted_keys(one)) do
    if key ~= 1 and not allowed[key] then complain("%s: there is no '%s' here; there are %s", what, tostring(key), table.concat(case.sorted_keys(allowed), ", ")) end
  end
end

-- The name and the group that {name, variant = ...} means. It joins what the group works out besides, if it isn't asked there.
local function find_column(plan, one, what)
  local word = one[1]
  if type(word) ~= "string" then complain("%s: a name is wanted first; got %s", what, core.shown(word)) end
  local name, synonym = core.find(word)
  if not name or synonym then complain("%s", case.unknown_name(word, what .. ": ")) end
  if core.entry(name).kind == "object" then complain("%s: %s is an object", what, name) end
  local number = one.variant == nil and 1 or plan.numbers[one.variant]
  if not number then complain('%s: there is no variant "%s"', what, tostring(one.variant)) end
  local group = plan.groups[number]
  for _, list in ipairs { group.ask, group.also } do
    for _, asked in ipairs(list) do if asked == name then return name, group.name end end
  end
  group.also[#group.also + 1] = name
  return name, group.name
end

local function read_sort(plan, sort)
  if sort == nil then return nil end
  local one = type(sort) == "string" and { sort } or sort
  if type(one) ~= "table" then complain('sort wants a name, or a table like {"rim_size_angle", descending = true}; got %s', core.shown(sort)) end
  check_keys(one, { variant = true, descending = true }, "sort")
  if one[1] == "name" then return { by_name = true, descending = one.descending } end
  local name, group = find_column(plan, one, "sort")
  return { name = name, group = group, descending = one.descending }
end

-- A bound as the cells have it: in the glossary's unit, or the share of a verdict.
local function read_bound(name, value)
  if value == nil then return nil end
  local entry = core.entry(name)
  if entry.kind == "verdict" then
    if type(value) ~= "number" or value < 0 or value > 1 then complain("where: of %s a share of draws is wanted, from 0 to 1; got %s", name, core.shown(value)) end
    return value
  end
  local ok, quantity = pcall(core.given, name, value)
  if not ok then complain("where: %s", core.part "lacuna.record".bare(quantity)) end
  local _, _, factor, number, size = core.facts(quantity)
  if size ~= 1 then complain("where: one value is wanted for %s; got %s", name, core.shown(value)) end
  return number / factor
end

local function read_where(plan, where)
  if where == nil then return {} end
  local conditions = {}
  for i, one in ipairs(type(where[1]) == "string" and { where } or where) do
    if type(one) ~= "table" then complain('where wants conditions like {"rim_size_angle", above = "1 mas"}; got %s', core.shown(one)) end
    check_keys(one, { variant = true, above = true, below = true }, "where")
    local name, group = find_column(plan, one, "where")
    if one.above == nil and one.below == nil then complain("where: %s wants above = ... or below = ...", name) end
    conditions[i] = { name = name, group = group, above = read_bound(name, one.above), below = read_bound(name, one.below), words = {} }
    for _, side in ipairs { "above", "below" } do
      if one[side] ~= nil then table.insert(conditions[i].words, ("%s %s"):format(side, tostring(one[side]))) end
    end
    conditions[i].words = ("%s%s %s%s"):format(name, group and " (" .. group .. ")" or "", table.concat(conditions[i].words, " and "),
      core.entry(name).kind == "verdict" and " of the draws" or "")
  end
  if #conditions == 0 then complain 'where wants conditions like {"rim_size_angle", above = "1 mas"}; it is empty' end
  return conditions
end

-- Checks sort and where, into plan.sort and plan.where.
function selection.read(plan, sort, where)
  plan.sort, plan.where = read_sort(plan, sort), read_where(plan, where)
end

-- The number of a row in the column of a name: the median, the share; along a sweep the mean of all points.
local function number_of(plan, row, name, group)
  for i, column in ipairs(plan.all) do
    if column.name == name and column.group == group then
      local cell = i <= #plan.columns and row.cells[i] or row.hidden[i - #plan.columns]
      local number = cell.share or cell.value
      if cell.values then
        number = 0
        for _, value in ipairs(cell.values) do number = number + value / #cell.values end
      end
      return number == number and number or nil
    end
  end
end

local function passes(plan, row)
  for _, condition in ipairs(plan.where) do
    local number = number_of(plan, row, condition.name, condition.group)
    if not number or condition.above and not (number > condition.above) or condition.below and not (number < condition.below) then return false end
  end
  return true
end

-- The conditions in words, all together; nil without any.
local function in_words(plan)
  local words = {}
  for i, condition in ipairs(plan.where) do words[i] = condition.words end
  return #words > 0 and table.concat(words, " and ") or nil
end

-- The rows that pass, in order, equal ones as they came; and { of = how many there were, words = the conditions } where any are left out. None that
-- passes is an error: there would be no table.
function selection.apply(plan, rows)
  local kept, places, keys, passed = {}, {}, {}, 0
  for i, row in ipairs(rows) do
    local passing = passes(plan, row)
    passed = passed + (passing and 1 or 0)
    if passing or row.failed then
      kept[#kept + 1], places[row] = row, i
      if plan.sort then keys[row] = plan.sort.by_name and row.name or number_of(plan, row, plan.sort.name, plan.sort.group) end
    end
  end
  if passed == 0 and #rows > 0 then complain("no target passes the filter, %s; %d %s worked out", in_words(plan), #rows, #rows == 1 and "was" or "were") end
  if plan.sort then
    table.sort(kept, function(a, b)
      local one, other = keys[a], keys[b]
      if one == nil or other == nil or one == other then return (one ~= nil and other == nil) or ((one == nil) == (other == nil) and places[a] < places[b]) end
      if plan.sort.descending then one, other = other, one end
      return one < other
    end)
  end
  return kept, #kept < #rows and { of = #rows, words = in_words(plan) } or nil
end

return selection
