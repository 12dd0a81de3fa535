-- SPDX-License-Identifier: GPL-3.0-or-later
-- What the prompt prints: how answers are put together, how long lines of a page (a derivation, a page of help) are folded on a terminal,
-- where there is colour, and how much is shown at once. What an answer consists of is written in answers.lua.
local core = ...
local format = core.part "lacuna.format"

local show = {}

-- Colour --------------------------------------------------------------------------------------------------------------------------

-- Texts aside and texts marked stand between these until they are printed, where they become colour or nothing. Control characters have
-- no width, so that nothing is misaligned by them.
local ASIDE, MARKED, PLAIN = "\1", "\2", "\3"
local escapes = { [ASIDE] = "\27[2m", [MARKED] = "\27[33m", [PLAIN] = "\27[0m" }

function show.aside(text) return ASIDE .. text .. PLAIN end
function show.marked(text) return MARKED .. text .. PLAIN end

-- Whether there is colour: only on a terminal, never with NO_COLOR or on a dumb one.
function show.colour() return core.terminal().colour end

local function finished(text, colour) return (text:gsub("[\1\2\3]", colour and escapes or "")) end

-- Pages ---------------------------------------------------------------------------------------------------------------------------

-- Where a line may be folded: at its spaces, but neither before a per cent sign, at an error bar nor between quotes; code where a comma is before them.
local function may_fold(line, before, is_code)
  if not before:find "%S" or is_code and before:sub(-1) ~= "," or before:find "±$" or line:find("^ +%%", #before + 1) or line:find("^ +±", #before + 1) then return false end
  return select(2, before:gsub('"', "")) % 2 == 0
end

-- A line folded, what follows set in by two more, or under what stands after a tab; longer words stand alone. Code stands after "> ".
local function fold(line, columns)
  local is_code = line:find "^ *> "
  local folded, first = {}, line:match "^(.-)\t"
  local further = first and format.width(first) <= columns / 2 and (" "):rep(format.width(first) + 2) or line:match "^ *" .. "  "
  line = line:gsub("\t", "  ")
  while format.width(line) > columns do
    local at
    for space in line:gmatch "()%f[ ] +" do
      local before = line:sub(1, space - 1)
      if #before >= #further and may_fold(line, before, is_code) and (not at or format.width(before) <= columns) then at = space end
    end
    if not at then break end
    folded[#folded + 1] = line:sub(1, at - 1)
    line = further .. line:sub(at):match "^ *(.*)$"
  end
  folded[#folded + 1] = line
  return table.concat(folded, "\n")
end

-- How wide answers may be, where no terminal says otherwise too.
function show.columns() return math.max(core.terminal_width() or 80, 40) end

-- The text of a page's lines: folded on a terminal, as they are in a file. A tab (two spaces when written) says under what to go on.
function show.page(lines)
  local text = table.concat(lines, "\n")
  if not core.terminal_width() then return (text:gsub("\t", "  ")) end
  return (text:gsub("[^\n]+", function(line) return fold(line, show.columns()) end))
end

-- Answers -------------------------------------------------------------------------------------------------------------------------

local function shown(value)
  if value == core.part "lacuna.help".help then return tostring(value()) end
  local answers = core.part "lacuna.answers"
  if select("#", core.facts(value)) > 0 then return show.page(answers.quantity(value)) end
  if core.is_case(value) then return show.page(answers.case(value)) end
  if type(value) == "function" then return answers.of_function(value) end
  if type(value) == "table" and not getmetatable(value) then return answers.table(value) end
  return tostring(value)
end

-- Whether a text is one of several lines that can be printed as they are, as tables and answers are: quoted they would be a riddle.
local function is_page(text) return text:find("\n", 1, true) and not text:find "[^\n\t\32-\126\128-\255]" end

-- Results as the prompt prints them, colour still marked: a line each or several; of nothing found, why (as functions return nil and a
-- message), of an answer its note.
local function written(...)
  local results, lines = table.pack(...), {}
  if results.n == 2 and results[1] == nil and type(results[2]) == "string" then return results[2] end
  for i = 1, results.n do
    local value = results[i]
    if type(value) == "string" and i == 1 and not is_page(value) then value = ("%q"):format(value) end
    if value ~= nil or results.n == 1 then lines[#lines + 1] = shown(value) end
  end
  return table.concat(lines, "\n")
end

-- show(value, ...): the text of values as the prompt writes them.
function show.show(...) return finished(written(...), false) end

-- What the program prints. In a conversation at a terminal no more than a screenful at once: the rest waits for more(). What a word has
-- printed by itself is not forgotten for its answer.
local waiting, printed
local function screenful(text)
  local rows = core.terminal().rows
  local _, breaks = text:gsub("\n", "")
  if not rows or breaks + 1 <= math.max(rows - 1, 10) then return text end
  local keep, at = math.max(rows - 2, 9), 0
  for _ = 1, keep do at = text:find("\n", at + 1, true) end
  waiting = text:sub(at + 1)
  return text:sub(1, at) .. show.aside(("… %d more lines: more()"):format(breaks + 1 - keep))
end

-- Prints a text that is no answer: a study's table.
function show.print(text)
  printed = core.part "lacuna.session".current() ~= nil
  print(finished(printed and screenful(text) or text, show.colour()))
end

function show.answer(conversation, ...)
  local first, input = ..., core.part "lacuna.session".current()
  if input and type(first) == "table" and (getmetatable(first) or {}).__name == "figure" then input.as_text = true end
  if not printed then waiting = nil end
  printed = false
  local text = written(...)
  return finished(conversation and screenful(text) or text, show.colour())
end

-- more(): what did not fit on the screen.
function show.more()
  if not waiting then core.raise "there is no more to show" end
  local rest = waiting
  waiting, printed = nil, false
  return setmetatable({}, { __name = "rest", __tostring = function() return rest end })
end

return show
