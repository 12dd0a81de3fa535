-- SPDX-License-Identifier: GPL-3.0-or-later
-- One target of a study worked out whole, into a record of plain data: texts, numbers, booleans and tables of them. It holds all that the
-- table and its notes need, so that a target's ensembles can go as soon as its record is made, and a record can wait in a file.
--
--   { name, texts, cells, failed = message or nil }
--
-- A cell, one for each column, is { missing, reason }, or
--   { value, upper, lower, low95, high95 } in the column's unit (a single number: value alone), or { share } of a verdict,
--   along a sweep { axes = names, values, uppers, lowers } or { axes, shares, share = of all } instead, lists in the order of the axes;
-- and with each: undefined = share of draws, steps = "distance given, stellar_luminosity flux_and_distance, ..." on the way to it, and where
-- there is something to say: failing = { { words, left } } (of a verdict that mostly is no), outside = { words } (of a recipe's range),
-- others = { { recipe, low, high } or { recipe, flips, share } } (what another recipe would change).
local core = ...
local case = core.part "lacuna.case"
local conditions = core.part "lacuna.conditions"
local format = core.part "lacuna.format"
local relations = core.part "lacuna.relations"
local text = core.part "lacuna.text"

local records = {}

-- Ensembles up to this length are kept while a target is worked on, as table, reasons and comparisons all read them.
local LONGEST_KEPT = 100000
records.LONGEST_KEPT = LONGEST_KEPT

local function keep(quantity)
  local _, _, _, _, size = core.facts(quantity)
  return size <= LONGEST_KEPT and core.store(quantity) or quantity
end
records.keep = keep

local function both(a, b)
  local all = {}
  for key, value in pairs(a) do all[key] = value end
  for key, value in pairs(b) do all[key] = value end
  return all
end
records.both = both

-- An error's text without the script's line, where it begins with that.
function records.bare(message)
  message = tostring(message)
  local _, here = pcall(core.raise, "")
  return message:sub(1, #here) == here and message:sub(#here + 1) or message
end

-- Cases ---------------------------------------------------------------------------------------------------------------------------

-- A target's givens as copies, so that what is computed of them goes with the cases made of them.
local function own_givens(plan, target)
  local givens = {}
  for name, quantity in pairs(target.givens) do
    if not plan.set.givens[name] then givens[name] = core.detached(quantity) end
  end
  return givens
end

-- The case of a target in one group: what is set on the command line goes before the target's own, that before the group's.
local function make_case(plan, target, number, givens)
  local group, set = plan.groups[number], plan.set
  local written = both(both(both(plan.groups[1].written, group.written), target.written), set.written)
  local info = { target = target.name, objects = both(both(group.objects, target.objects), set.objects), written = written }
  local ok, made = pcall(case.make, {}, both(both(group.givens, givens), set.givens), group.using, info)
  if not ok then error(("%s: %s%s"):format(target.where, group.name and ('in variant "%s": '):format(group.name) or "", records.bare(made)), 0) end
  return made
end

function records.case_in(plan, target, number) return make_case(plan, target, number, own_givens(plan, target)) end

-- The target's cases in all groups.
local function make_cases(plan, target)
  local givens, cases = own_givens(plan, target), {}
  for _, quantity in pairs(givens) do keep(quantity) end
  for number in ipairs(plan.groups) do cases[number] = make_case(plan, target, number, givens) end
  return cases
end

-- Values --------------------------------------------------------------------------------------------------------------------------

-- The names of the axes besides the draws, and how many draws.
local function axes_of(quantity)
  local names, draws = text.axes(quantity)
  for i, axis in ipairs(names) do names[i] = axis.name end
  return names, draws
end

local function sum(list)
  local total = 0
  for _, value in ipairs(list) do total = total + value end
  return total
end

local function in_unit(quantity, factor)
  local list = core.elements(quantity)
  for i, value in ipairs(list) do list[i] = value / factor end
  return list
end

-- How many elements are undefined.
local function undefined_of(quantity, names, draws)
  if draws then return sum(core.elements(core.undefined(quantity))) end
  if #names > 0 then return sum(core.elements(core.undefined(quantity, names[1]))) end
  local _, _, _, number = core.facts(quantity)
  return number ~= number and 1 or 0
end

local function add_values(cell, quantity, factor, names, draws)
  local _, _, _, number = core.facts(quantity)
  if #names == 0 and not draws then cell.value = number / factor
  elseif #names == 0 then
    local bounds = { core.five_of(quantity) }
    for i, bound in ipairs(bounds) do bounds[i] = core.elements(bound)[1] / factor end
    cell.value, cell.upper, cell.lower = text.errors_of(bounds[2], bounds[3], bounds[4])
    cell.low95, cell.high95 = bounds[1], bounds[5]
  else
    cell.axes, cell.values = names, in_unit(draws and core.median(quantity) or quantity, factor)
    if not draws then return end
    local low, _, high = core.spread_of(quantity)
    cell.uppers, cell.lowers = in_unit(high, factor), in_unit(low, factor)
    for i, value in ipairs(cell.values) do
      cell.values[i], cell.uppers[i], cell.lowers[i] = text.errors_of(cell.lowers[i], value, cell.uppers[i])
    end
  end
end

local function add_shares(cell, quantity, names, draws)
  if #names == 0 then
    cell.share = core.elements(core.chance(quantity))[1]
    return
  end
  cell.axes, cell.shares = names, core.elements(draws and core.chance(quantity) or quantity)
  local total = 0
  for i, share in ipairs(cell.shares) do
    if share ~= share then cell.shares[i] = 0 end -- without draws: undefined is not yes
    total = total + cell.shares[i]
  end
  cell.share = total / #cell.shares
end

-- What a case says of a name, as a cell.
local function cell_of(self, name, verdict)
  if core.row_of(self, name) == nil then return { missing = true, reason = core.part "lacuna.missing".in_short(self, name) } end
  local quantity = keep(core.raw(self, name))
  local names, draws = axes_of(quantity)
  local _, _, factor, _, size = core.facts(quantity)
  local undefined = undefined_of(quantity, names, draws)
  if undefined == size then
    return { missing = true, reason = size == 1 and core.part "lacuna.why".undefined(self, name) or draws and "undefined in all draws" or "undefined at all points" }
  end
  local cell = { undefined = undefined / size }
  if verdict then add_shares(cell, quantity, names, draws) else add_values(cell, quantity, factor, names, draws) end
  return cell
end
records.cell_of = cell_of

-- The way to a value ----------------------------------------------------------------------------------------------------------------

-- The steps to a name in a case, each with its row as a table; found once for all cases with the same given names and recipes.
local function steps_of(plan, self, number, name, of_case)
  local info = core.info(self)
  of_case.given = of_case.given or number .. " " .. table.concat(case.sorted_keys(info.givens), " ") .. " " .. table.concat(case.sorted_keys(info.objects), " ")
  local key = name .. " " .. of_case.given
  local steps = plan.steps[key]
  if not steps then
    steps = core.steps(self, name)
    local said = {}
    for i, step in ipairs(steps) do
      step.relation = step.row and core.row(step.row)
      said[i] = step.name .. " " .. (step.relation and step.relation.by or "given")
    end
    steps.words = table.concat(said, ", ")
    plan.steps[key] = steps
  end
  return steps
end

-- The median of a condition's side in its display unit, to two digits, and the unit. `medians` has those that a case's cells know already, by name.
local function rounded(name, quantity, factor, medians)
  local _, in_unit, unit = text.display_unit(quantity)
  local median = medians[name] or core.elements(core.median(quantity))[1]
  medians[name] = median
  return format.number(factor * median / in_unit, 2), unit
end

-- Of a verdict that mostly is no: the conditions that fail in half of the draws or more, or else the one that fails most often.
local function failing(self, name, medians)
  local found, worst = {}, nil
  for _, c in ipairs((conditions.of(self, name))) do
    if c.failed >= 0.5 then found[#found + 1] = c end
    if not worst or c.failed > worst.failed then worst = c end
  end
  if #found == 0 then found[1] = worst end
  for i, c in ipairs(found) do
    local right, unit = rounded(c.right, c.right_value, 1, medians)
    local words = conditions.words(c, c.greater and "<" or ">") .. " " .. format.with_unit(right, unit)
    found[i] = { words = words, left = rounded(c.left, c.left_value, c.factor, medians) }
  end
  return found
end

local function outside_validity(self, steps, made)
  local found
  for _, step in ipairs(steps) do
    if step.relation and #step.relation.holds > 0 then
      made[step.row] = made[step.row] or relations.outside(self, step.relation)
      for _, outside in ipairs(made[step.row]) do
        found = found or {}
        found[#found + 1] = outside.words
      end
    end
  end
  return found
end

-- Other recipes ---------------------------------------------------------------------------------------------------------------------

-- Recipes that stand beside those taken on the way to a name.
local function alternatives(self, steps)
  if not steps.alternatives then
    steps.alternatives = { inputs = {} }
    for _, step in ipairs(steps) do
      if step.relation and core.entry(step.name).kind ~= "verdict" then
        for i, row in ipairs(case.live_rows(self, step.name)) do
          if i > 1 and row.kind ~= "definition" and row.kind ~= "assumed" and not case.leaves_out(row, step.relation) then
            steps.alternatives.inputs[step.relation] = true
            table.insert(steps.alternatives, { name = step.name, by = row.by, words = ("%s by %s instead of %s"):format(step.name, row.by, step.relation.by) })
          end
        end
      end
    end
  end
  return steps.alternatives
end

-- Derived inputs of a recipe that others stand beside are read by those too: kept first.
local function keep_inputs(self, relations)
  for relation in pairs(relations) do
    for _, name in ipairs(relation.from) do
      if core.row_of(self, name) and core.entry(name).kind ~= "object" then keep(core.raw(self, name)) end
    end
  end
end

local function by_recipe(self, other, made)
  if made[other.words] == nil then made[other.words] = case.by_recipe(self, other.name, other.by) or false end
  return made[other.words]
end

local function share_of(quantity)
  local names, draws = axes_of(quantity)
  local cell = {}
  add_shares(cell, quantity, names, draws)
  return cell.share
end

-- What changes: the medians' factors (of a magnitude: their differences), from the lowest to the highest; or whether a verdict crosses one half.
local function change_of(column, cell, value)
  if column.verdict then
    local share = share_of(value)
    return { flips = (share >= 0.5) ~= (cell.share >= 0.5), share = share }
  end
  local before, after = cell.values or { cell.value }, in_unit(core.median(value), column.entry.factor)
  local low, high = math.huge, -math.huge
  for i = 1, #after do
    local was = before[#before == 1 and 1 or i]
    local by = column.unit == "mag" and after[i] - was or after[i] / was
    if by == by and math.abs(by) < math.huge then low, high = math.min(low, by), math.max(high, by) end
  end
  return low <= high and { low = low, high = high } or {}
end

local function over_recipes(column, self, others, cell, made)
  local found
  for _, other in ipairs(others) do
    local changed = by_recipe(self, other, made)
    local value = changed and core.raw(changed, column.name)
    if value then
      local change = change_of(column, cell, value)
      change.recipe = other.words
      found = found or {}
      found[#found + 1] = change
    end
  end
  return found
end

-- Records ---------------------------------------------------------------------------------------------------------------------------

-- The sides of a verdict's conditions are read by the verdict, by its reasons and by what other recipes make of it: kept first.
local function keep_sides(self, name)
  for _, c in ipairs(conditions.of_row(core.row(core.row_of(self, name)))) do
    keep(core.raw(self, c.left))
    keep(core.raw(self, c.right))
  end
end

-- `hidden` columns are for figures: they have a value and no reasons.
local function fill(plan, column, cases, made)
  local number = column.group_number
  local self = cases[number]
  if column.hidden or core.row_of(self, column.name) == nil then return cell_of(self, column.name, column.verdict) end
  made[number] = made[number] or { outside = {}, cases = {}, medians = {} }
  local steps = steps_of(plan, self, number, column.name, made[number])
  local others = alternatives(self, steps)
  keep_inputs(self, others.inputs)
  if column.verdict then keep_sides(self, column.name) end
  local cell = cell_of(self, column.name, column.verdict)
  if cell.missing then return cell end
  cell.steps = steps.words
  if column.verdict and not cell.axes and cell.share < 0.5 then cell.failing = failing(self, column.name, made[number].medians) end
  if cell.value and cell.upper then made[number].medians[column.name] = cell.value * column.entry.factor end
  cell.outside = outside_validity(self, steps, made[number].outside)
  cell.others = over_recipes(column, self, others, cell, made[number].cases)
  return cell
end

local function work_out(plan, target)
  local cases, made, cells = make_cases(plan, target), {}, {}
  for i, column in ipairs(plan.all) do cells[i] = fill(plan, column, cases, made) end
  return cells
end

-- The record of a target: where it can't be worked out, what went wrong. An interruption is no such thing, and goes on.
function records.of(plan, target)
  local record = { name = target.name, texts = target.texts }
  local ok, cells = pcall(work_out, plan, target)
  if ok then record.cells = cells
  else
    if type(cells) == "string" and cells:find "interrupted!?$" then error(cells, 0) end
    record.failed, record.cells = records.bare(cells), {}
    for i in ipairs(plan.all) do record.cells[i] = { missing = true, failed = true, reason = "failed: " .. record.failed } end
  end
  return record
end

-- The columns of all groups; `field` says which of a group's lists of names.
function records.columns(groups, field)
  local columns = {}
  for number, group in ipairs(groups) do
    for _, name in ipairs(group[field]) do
      local entry = core.entry(name)
      local _, tex = core.unit_facts(entry.unit)
      columns[#columns + 1] = {
        name = name, entry = entry, verdict = entry.kind == "verdict", group = group.name, group_number = number, unit = entry.unit,
        unit_text = text.unit_of(name), unit_tex = tex, label = (group.name and group.name .. ": " or "") .. name,
        hidden = field == "also" or nil,
      }
    end
  end
  return columns
end

return records
