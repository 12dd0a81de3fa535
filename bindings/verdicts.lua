-- SPDX-License-Identifier: GPL-3.0-or-later
-- What a study answers, in plain words: for each verdict which targets are resolved in most of the draws, in some, in hardly any; and what
-- another recipe would make of it. The page and the text of a report are made from it.
--
--   of(study)           a list of { column, number = its place, words = "the rim is resolved by the array", whole = without draws, yes, between, no, missing =
--                       lists of { name, cell }, of_points = whether it goes along a sweep, reasons,
--                       recipes = { { words, asked, names = of targets whose verdict changes, low, high = shares } } }
--   count(some, all)    "Marrow 3", "both targets", "all 12 targets", "3 of the 12 targets (A, B and C)", "11 of the 12 targets"
--   percent(share)      "89.6 %" of what is less than 90 %
--   recipe_name(name, by)   "Kanagawa et al. 2016" of a recipe that is called after its paper, else "half fringe"
--   recipe_words(words) "gap_width by kanagawa_2016 instead of ..." as it is said in a sentence
--   reason_words(words) "rim_elements_by_array < elements_required 1" likewise
local core = ...
local bibliography = core.part "lacuna.bibliography"
local changes = core.part "lacuna.changes"
local english = core.part "lacuna.english"
local ordered = core.part "lacuna.ordered"
local format = core.part "lacuna.format"

local verdicts = {}

local MOSTLY, HARDLY = 0.9, 0.1 -- shares of draws from which, and up to which, one word will do
verdicts.MOSTLY, verdicts.HARDLY = MOSTLY, HARDLY
local MOST_NAMES = 9 -- of targets that are told one by one; beyond, the table will do

-- A share in per cent; between the two with as many digits as it takes to tell it from them.
function verdicts.percent(share)
  local text, places = format.percent(share), 0
  local function is_an_end()
    local number = tonumber(text:match "[%d.]+")
    return number == 100 * HARDLY or number == 100 * MOSTLY
  end
  while share > HARDLY and share < MOSTLY and is_an_end() and places < 9 do
    places = places + 1
    text = ("%%.%df %%%%"):format(places):format(100 * share)
  end
  return text
end

local function names_of(rows)
  local names = {}
  for i, row in ipairs(rows) do names[i] = row.name end
  return names
end
verdicts.names_of = names_of

function verdicts.count(some, all)
  if #some == 0 then return all == 1 and "no target" or "none of the " .. all .. " targets" end
  if #some == 1 then return some[1].name end
  if #some == all then return all == 2 and "both targets" or "all " .. all .. " targets" end
  local share = ("%d of the %d targets"):format(#some, all)
  return #some <= MOST_NAMES and ("%s (%s)"):format(share, english.list(names_of(some))) or share
end

function verdicts.recipe_name(name, by)
  if by:find "_%d%d%d%d" then
    for _, number in ipairs(core.entry(name).rows) do
      local row = core.row(number)
      if row.by == by and bibliography.short(row) then return bibliography.short(row) end
    end
  end
  return english.words_of(by)
end

function verdicts.recipe_words(words)
  local name, by, instead = words:match "^([%w_]+) by ([%w_]+) instead of ([%w_]+)$"
  if not name then return english.words_of(words) end
  return ("the %s by %s instead of %s"):format(english.words_of(name), verdicts.recipe_name(name, by), verdicts.recipe_name(name, instead))
end

-- The conditions of being resolved, by what a structure is compared with.
local reasons_by_limit = {
  elements_required = function(structure, limit) return ("fewer than %s resolution element%s across the %s"):format(limit, limit == "1" and " lies" or "s lie", structure) end,
  recoverable_scale = function(structure, limit) return ("the %s is larger than the recoverable scale of %s"):format(structure, limit) end,
  array_field = function(structure, limit) return ("the %s reaches beyond the array's field of %s"):format(structure, limit) end,
  inner_working_angle = function(structure, limit) return ("the %s lies inside the inner working angle of %s"):format(structure, limit) end,
}

function verdicts.reason_words(words)
  local structure, limit, value = words:match "(%l+)_[%l_]+ [<>] ([%l_]+) (.*)$"
  if structure and reasons_by_limit[limit] then return reasons_by_limit[limit](structure, value) end
  return english.words_of(words)
end

-- "the rim is resolved by the array"
local function sentence_of(column)
  local structure, instrument = column.name:match "^(%l+)_resolved_by_(%l+)$"
  if structure then return ("the %s is resolved by the %s"):format(structure, instrument) end
  return english.words_of(column.name) .. " holds"
end
verdicts.sentence_of = sentence_of

-- The conditions that fail where a verdict mostly is no, the one that fails for most targets first: { words, count }.
local function reasons(study, number)
  local found = ordered.new()
  for _, row in ipairs(study.rows) do
    for _, failing in ipairs(row.cells[number].failing or {}) do
      local reason = ordered.at(found, failing.words, function() return { words = failing.words, count = 0, order = #found.keys } end)
      reason.count = reason.count + 1
    end
  end
  local list = {}
  for i, words in ipairs(found.keys) do list[i] = found.values[words] end
  table.sort(list, function(a, b) return a.count > b.count or a.count == b.count and a.order < b.order end)
  return list
end

-- Whether a study has draws at all: an error bar, or a share that is neither none nor all.
function verdicts.has_draws(study)
  for _, row in ipairs(study.rows) do
    for _, cell in ipairs(row.cells) do
      if cell.upper or cell.uppers or cell.share and not cell.axes and cell.share > 0 and cell.share < 1 then return true end
    end
  end
  return false
end

-- Between which points of its one sweep a verdict's share crosses one half: the value there, on the line between them, in the sweep's unit; and
-- whether it holds from there on.
function verdicts.turns_at(cell, sweep)
  for i = 2, #cell.shares do
    local before, after = cell.shares[i - 1] - 0.5, cell.shares[i] - 0.5
    if (before < 0) ~= (after < 0) then
      return sweep.values[i - 1] + (sweep.values[i] - sweep.values[i - 1]) * before / (before - after), after >= 0
    end
  end
end

-- Where along the study's one sweep a verdict holds in half of the draws or more: { sweep, from, up_to, everywhere, nowhere = lists of { name, cell,
-- value, at = in words } }; nil where it doesn't go along one.
function verdicts.along(study, one)
  local sweep = study.sweeps and #study.sweeps == 1 and study.sweeps[1]
  if not sweep or not one.of_points then return nil end
  local along = { sweep = sweep, from = {}, up_to = {}, everywhere = {}, nowhere = {} }
  for _, row in ipairs(study.rows) do
    local cell = row.cells[one.number]
    local value, up
    if cell.shares then value, up = verdicts.turns_at(cell, sweep) end
    local list = value and (up and along.from or along.up_to) or not cell.missing and ((cell.shares and cell.shares[1] or cell.share) >= 0.5 and along.everywhere or along.nowhere)
    if list then list[#list + 1] = { name = row.name, cell = cell, value = value, at = value and format.with_unit(format.number(value, 3), sweep.unit_text) } end
  end
  return along
end

function verdicts.of(study)
  local found = {}
  for number, column in ipairs(study.columns) do
    if column.verdict then
      local one = { column = column, number = number, words = sentence_of(column), yes = {}, between = {}, no = {}, missing = {},
        recipes = changes.of(study, number), reasons = reasons(study, number) }
      for _, row in ipairs(study.rows) do
        local cell = row.cells[number]
        local kind = cell.missing and "missing" or cell.share >= MOSTLY and "yes" or cell.share <= HARDLY and "no" or "between"
        table.insert(one[kind], { name = row.name, cell = cell })
        one.of_points = one.of_points or cell.shares ~= nil
      end
      found[#found + 1] = one
    end
  end
  return found
end

return verdicts
