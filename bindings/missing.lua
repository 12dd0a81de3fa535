-- SPDX-License-Identifier: GPL-3.0-or-later
-- c:missing(name): what would have to be given for a name, printed; and the same in one line.
local core = ...
local case = core.part "lacuna.case"
local show = core.part "lacuna.show"
local text = core.part "lacuna.text"

local missing = {}

local function add(lines, indent, s) lines[#lines + 1] = (" "):rep(indent) .. s end

local function contains(names, others)
  local has = {}
  for _, name in ipairs(names) do has[name] = true end
  for _, name in ipairs(others) do if not has[name] then return false end end
  return true
end

-- The sets of names without those that want more than one before them.
local function smallest(sets)
  local found = {}
  for i, set in ipairs(sets) do
    local more = false
    for j = 1, i - 1 do more = more or contains(set.names, sets[j].names) end
    if not more then found[#found + 1] = set end
  end
  return found
end

-- Where on the way to a name the givens of one set are lacking: the name, its row, and which of the row's inputs can't be had. From the asked
-- name downwards, as long as a single input is what fails.
local function failed_branch(self, name, set)
  local wanted = {}
  for _, given in ipairs(set.names) do wanted[given] = true end
  local number = set.row
  while true do
    local row, lacking = core.row(number), {}
    for _, input in ipairs(row.from) do if core.row_of(self, input) == nil then lacking[#lacking + 1] = input end end
    local further = #lacking == 1 and not wanted[lacking[1]] and core.missing_sets(self, lacking[1])[1]
    if not further or not further.row or #further.names ~= #set.names then return name, row, lacking, wanted end
    name, number = lacking[1], further.row
  end
end

-- "gap_width by kanagawa_2016", where the set's givens are lacking; of the asked name itself without the name.
local function branch_text(self, asked, set)
  local name, row, lacking, wanted = failed_branch(self, asked, set)
  local direct = false
  for _, input in ipairs(lacking) do direct = direct or wanted[input] end
  return (name ~= asked and "for " .. name .. " " or "") .. "by " .. row.by .. (direct and "" or " from " .. table.concat(lacking, ", "))
end

-- The sets of names that would do, as { names, by = recipes }: those that more than one recipe takes once.
local function ways_of(asked)
  local ways = {}
  for _, set in ipairs(asked.sets) do
    local by, same = set.row and core.row(set.row).by, nil
    for _, way in ipairs(ways) do
      if #way.names == #set.names and contains(way.names, set.names) then same = way end
    end
    if not same then
      same = { names = set.names, by = {}, set = set }
      ways[#ways + 1] = same
    end
    same.by[#same.by + 1] = by
  end
  return ways
end

-- The names of a way, and by which recipes; a definition alone is no news. `branch`: where on the way they are lacking, if that is known.
local function way_text(way, names, branch)
  local by = table.concat(way.by, " or ")
  if by == "" or by == "definition" and (not branch or branch:find "^by") then return names end
  return names .. " (" .. (#way.by == 1 and branch or "by " .. by:gsub("^definition or ", "definition, or ")) .. ")"
end

-- What is missing in one line, as an error says it. Ways that want more than another one are left to missing.
local function in_one_line(asked)
  local parts = {}
  if #asked.sets == 0 or asked.sets[1].names[1] == asked.name then
    for i, number in ipairs(core.entry(asked.name).rows) do
      local row = core.row(number)
      parts[i] = way_text({ by = { row.by } }, table.concat(row.from, ", "))
    end
    return asked.name .. " must be given" .. (#parts == 0 and ": no relation gives it" or ", or follow from " .. table.concat(parts, ", or "))
  end
  for _, way in ipairs(smallest(ways_of(asked))) do
    local branch = way.set.row and branch_text(asked.case, asked.name, way.set)
    parts[#parts + 1] = way_text(way, table.concat(way.names, ", "), branch)
  end
  return asked.name .. " can't be derived from what is given; give " .. table.concat(parts, ", or ")
end

-- A further way: what it wants besides all that the first one wants, or all of it.
local function further_way(way, first)
  if not contains(way.names, first.names) then return way_text(way, "or " .. table.concat(way.names, ", ")) end
  local besides = {}
  for _, name in ipairs(way.names) do
    if not contains(first.names, { name }) then besides[#besides + 1] = name end
  end
  return way_text(way, "or, besides, " .. table.concat(besides, ", "))
end

-- Each name that some way wants once: its unit, its meaning, a hint.
local function explained(lines, ways)
  local seen = {}
  for _, way in ipairs(ways) do
    for _, name in ipairs(way.names) do
      if not seen[name] then
        local entry, unit = core.entry(name), text.unit_of(name)
        add(lines, 2, ("%s%s: %s"):format(name, unit ~= "" and " [" .. unit .. "]" or "", entry.meaning))
        if entry.hint then add(lines, 4, entry.hint) end
      end
      seen[name] = true
    end
  end
end

local metatable = {
  __name = "what is missing",
  __tostring = function(asked)
    if asked.given then return asked.name .. " is given" end
    if asked.had then return asked.name .. " can be had from what is given" end
    local ways = ways_of(asked)
    if #ways == 0 or ways[1].names[1] == asked.name then return show.page { in_one_line(asked) } end
    local lines = { asked.name .. " can't be derived from what is given; give " .. way_text(ways[1], table.concat(ways[1].names, ", ")) }
    for i = 2, #ways do add(lines, 2, further_way(ways[i], ways[1])) end
    lines[#lines + 1] = ""
    explained(lines, ways)
    return show.page(lines)
  end,
}

local function ask(self, name)
  local number = core.row_of(self, name)
  return { case = self, name = name, sets = core.missing_sets(self, name), had = number ~= nil, given = number == false }
end

function core.case_methods.missing(self, word) return setmetatable(ask(self, case.name_of(word, "missing: ")), metatable) end

-- As an error says it: "gap_width can't be derived from what is given; give ..."
function missing.not_had(self, name) return in_one_line(ask(self, name)) end

-- As a table's note says it: "for want of stellar_mass, or of planet_star_mass_ratio"
function missing.in_short(self, name)
  local sets = smallest(core.missing_sets(self, name))
  if #sets == 0 then return "must be given: no relation gives it" end
  local ways = {}
  for i = 1, math.min(3, #sets) do ways[i] = table.concat(sets[i].names, " and ") end
  return "for want of " .. table.concat(ways, ", or of ")
end

return missing
