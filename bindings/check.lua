-- SPDX-License-Identifier: GPL-3.0-or-later
-- c:check(): for each given, what the other givens make of it; prints itself. Its field `agree` is false where something disagrees.
local core = ...
local case = core.part "lacuna.case"
local show = core.part "lacuna.show"
local text = core.part "lacuna.text"

-- Single numbers agree within a share; ensembles where zero lies inside the 95 % interval of the difference.
local function agree(given, derived)
  local a, b = case.single(given), case.single(derived)
  if a and b then return not case.differ(a, b) end
  local difference = given - derived
  local low, high = core.interval(difference, 0.95)
  if not select(2, text.axes(difference)) then
    local allowed = case.AGREE * core.greatest(core.abs(given), core.abs(derived))
    low, high = difference - allowed, difference + allowed
  end
  low, high = core.elements(low), core.elements(high)
  for i = 1, #low do if low[i] > 0 or high[i] < 0 then return false end end
  return true
end

local metatable = {
  __name = "check",
  __tostring = function(check)
    if #check.entries == 0 then return "no given follows from the others: nothing to compare" end
    local lines = {}
    for _, entry in ipairs(check.entries) do
      lines[#lines + 1] = ("%s: given %s, by %s %s: %s"):format(entry.name, entry.written, entry.by, text.brief(entry.derived),
        entry.agrees and "agree" or "DISAGREE")
    end
    return show.page(lines)
  end,
}

function core.case_methods.check(self)
  local info, found, seen = core.info(self), {}, {}
  local all_agree = true
  for _, name in ipairs(case.sorted_keys(info.givens)) do
    local others = {}
    for other, quantity in pairs(info.givens) do if other ~= name then others[other] = quantity end end
    for _, number in ipairs(core.entry(name).rows) do
      local row = core.row(number)
      local equation = row.inverse_of or (row.gives .. "/" .. row.by)
      if row.kind ~= "assumed" and not seen[equation] then
        local using = { [name] = row.by }
        for other, by in pairs(info.using) do using[other] = using[other] or by end
        local without = core.new_case(others, using, info, true)
        local value = without and core.raw(without, name)
        if value then
          seen[equation] = true
          local entry = { name = name, by = row.by, given = info.givens[name], written = text.given(self, name), derived = value }
          entry.agrees = agree(entry.given, value)
          all_agree = all_agree and entry.agrees
          found[#found + 1] = entry
        end
      end
    end
  end
  return setmetatable({ entries = found, agree = all_agree }, metatable)
end

return {}
