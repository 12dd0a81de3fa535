-- SPDX-License-Identifier: GPL-3.0-or-later
-- What the prompt prints, and how long lines of a page (a derivation, a page of help) are folded on a terminal.
local core = ...
local format = core.part "lacuna.format"

local show = {}

-- Where a line may be folded: at its spaces; code, which stands after "> ", where a comma is before them.
local function may_fold(line, before) return before:find "%S" and (not line:find "^ *> " or before:sub(-1) == ",") end

-- A line folded, what follows set in by two more, or under what stands after a tab; longer words stand alone.
local function fold(line, columns)
  local folded, first = {}, line:match "^(.-)\t"
  local further = first and format.width(first) <= columns / 2 and (" "):rep(format.width(first) + 2) or line:match "^ *" .. "  "
  line = line:gsub("\t", "  ")
  while format.width(line) > columns do
    local at
    for space in line:gmatch "()%f[ ] +" do
      local before = line:sub(1, space - 1)
      if #before >= #further and may_fold(line, before) and (not at or format.width(before) <= columns) then at = space end
    end
    if not at then break end
    folded[#folded + 1] = line:sub(1, at - 1)
    line = further .. line:sub(at):match "^ *(.*)$"
  end
  folded[#folded + 1] = line
  return table.concat(folded, "\n")
end

-- The text of a page's lines: folded on a terminal, as they are in a file. A tab (two spaces when written) says under what to go on.
function show.page(lines)
  local columns = core.terminal_width()
  local text = table.concat(lines, "\n")
  if not columns then return (text:gsub("\t", "  ")) end
  return (text:gsub("[^\n]+", function(line) return fold(line, math.max(columns, 40)) end))
end

local function shown(value)
  if value == core.part "lacuna.help".help then return tostring(value()) end
  if type(value) == "function" or type(value) == "table" and not getmetatable(value) then return "a " .. type(value) end
  return tostring(value)
end

-- What the prompt prints of results, a line each; of nothing found, why (as functions return nil and a message), of an answer its note.
function show.show(...)
  local results, lines = table.pack(...), {}
  if results.n == 2 and results[1] == nil and type(results[2]) == "string" then return results[2] end
  for i = 1, results.n do
    local value = results[i]
    if type(value) == "string" and i == 1 then value = ("%q"):format(value) end
    if value ~= nil or results.n == 1 then lines[#lines + 1] = shown(value) end
  end
  return table.concat(lines, "\n")
end

return show
