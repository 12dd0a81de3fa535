-- SPDX-License-Identifier: GPL-3.0-or-later
-- What other recipes would change in a study, from its records.
--
--   of(study, number)       of one column: a list of { words = "gap_width by ... instead of ...", asked = of how many targets, names = of those whose
--                           verdict changes, low, high = factors of the medians, of magnitudes differences, of verdicts shares }
--   span(column, change)    of a quantity: "1.2 to 1.4", "+0.31 mag"; nil where nothing changes
local core = ...
local english = core.part "lacuna.english"
local format = core.part "lacuna.format"
local ordered = core.part "lacuna.ordered"

local changes = {}

function changes.of(study, number)
  local found = ordered.new()
  for _, row in ipairs(study.rows) do
    for _, other in ipairs(row.cells[number].others or {}) do
      local change = ordered.at(found, other.recipe, function()
        return { words = other.recipe, asked = 0, names = {}, low = math.huge, high = -math.huge }
      end)
      change.asked = change.asked + 1
      if other.flips then change.names[#change.names + 1] = row.name end
      local low, high = other.share or other.low, other.share or other.high
      if low then change.low, change.high = math.min(change.low, low), math.max(change.high, high) end
    end
  end
  local list = {}
  for i, recipe in ipairs(found.keys) do list[i] = found.values[recipe] end
  return list
end

function changes.span(column, change)
  if change.high < change.low then return nil end
  if column.unit == "mag" then
    local low, high = ("%+.2f"):format(change.low), ("%+.2f"):format(change.high)
    if low:find "^.0.00$" and high:find "^.0.00$" then return nil end
    return english.span(low, high) .. " mag"
  end
  local span = english.span(format.number(change.low, 2), format.number(change.high, 2))
  return span ~= "1" and span or nil
end

return changes
