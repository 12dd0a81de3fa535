-- SPDX-License-Identifier: GPL-3.0-or-later
-- What the prompt prints, and how long lines of a page (a derivation, a page of help) are folded on a terminal.
local core = ...
local format = core.part "lacuna.format"

local show = {}

-- A line folded at its spaces, what follows set in by two more; longer words stand alone.
local function fold(line, columns)
  local folded, further = {}, line:match "^ *" .. "  "
  while format.width(line) > columns do
    local at
    for space in line:gmatch "()%f[ ] +" do
      local before = line:sub(1, space - 1)
      if before:find "%S" and (not at or format.width(before) <= columns) then at = space end
    end
    if not at then break end
    folded[#folded + 1] = line:sub(1, at - 1)
    line = further .. line:sub(at):match "^ *(.*)$"
  end
  folded[#folded + 1] = line
  return table.concat(folded, "\n")
end

-- The text of a page's lines: folded on a terminal, as they are in a file.
function show.page(lines)
  local columns = core.terminal_width()
  local text = table.concat(lines, "\n")
  return columns and text:gsub("[^\n]+", function(line) return fold(line, math.max(columns, 40)) end) or text
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
