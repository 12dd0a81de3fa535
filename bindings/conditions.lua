-- SPDX-License-Identifier: GPL-3.0-or-later
-- The conditions of verdicts: "[a] >= [b]" or "2 [a] <= [b]" in a relation's row.
--
--   of_row(row)               a list of { left, right = names, factor of the left side, greater = whether that must be the greater, sign = "≥" or "≤" }
--   of(case, name)            the same with values: left_value, right_value, failed = share of the elements for which it doesn't hold (undefined
--                             ones are in it), holds, parts = what these elements are, margin = ratio of the sides; and what is not checked
--   words(c, sign)            "gap_elements_by_array < elements_required"
--   text(c)                   the same with the numbers, and how often it fails
--   with_reason(words, q, name)   a verdict's words and, where the case it was asked from is known, the margin or the condition that fails
local core = ...
local format = core.part "lacuna.format"
local text = core.part "lacuna.text"

local conditions = {}

local function parse(condition)
  local factor, left, sign, right = condition:match "^(%d*)%s*%[([%w_]+)%]%s*([<>]=)%s*%[([%w_]+)%]$"
  return { left = left, right = right, factor = tonumber(factor) or 1, greater = sign == ">=", sign = sign == ">=" and "≥" or "≤" }
end

function conditions.of_row(row)
  local found = {}
  for i, condition in ipairs(row and row.conditions or {}) do found[i] = parse(condition) end
  return found
end

local function add_values(self, c)
  c.left_value, c.right_value = core.raw(self, c.left), core.raw(self, c.right)
  local left = c.left_value * c.factor
  local fails = c.greater and core.below(left, c.right_value) or core.above(left, c.right_value)
  c.failed = 1 - text.share(1 - fails)
  c.holds = c.failed == 0
  local over, draws = text.axes(fails)
  c.parts = not draws and "points" or #over == 0 and "draws" or "draws and points"
  c.margin = left / c.right_value
end

function conditions.of(self, name)
  local number = core.row_of(self, name)
  local row = number and core.row(number)
  local found = conditions.of_row(row)
  for _, c in ipairs(found) do add_values(self, c) end
  return found, row and row.unchecked
end

local function left_side(c) return (c.factor == 1 and "" or c.factor .. " × ") .. c.left end

function conditions.words(c, sign) return ("%s %s %s"):format(left_side(c), sign, c.right) end

function conditions.text(c)
  local sign, state = c.sign, ""
  if c.failed == 1 then sign = c.greater and "<" or ">"
  elseif c.failed > 0 then state = (", not in %s of %s"):format(format.percent(c.failed), c.parts) end
  local limit = c.right == "elements_required" and "" or c.right .. " "
  return ("%s %s %s %s%s%s"):format(left_side(c), text.brief(c.left_value), sign, limit, text.brief(c.right_value), state)
end

function conditions.with_reason(words, verdict, name)
  local self = core.case_of(verdict)
  if not self then return words end
  local found, told = conditions.of(self, name), nil
  for _, c in ipairs(found) do if not c.holds and (not told or c.failed > told.failed) then told = c end end
  told = told or found[1]
  return told and words .. ": " .. conditions.text(told) or words
end

return conditions
