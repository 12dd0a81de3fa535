-- SPDX-License-Identifier: GPL-3.0-or-later
-- The script that a conversation's inputs make: each stands as it was typed, in a frame that makes a script of them, and what the session
-- showed is printed. The frame can be taken off again.
local core = ...
local statements = core.part "lacuna.statements"
local session = core.part "lacuna.session"
local load, print, os, type = load, print, os, type -- the user may give these names away

local kept_script = {}

-- The frame -----------------------------------------------------------------------------------------------------------------------

local head = "-- A session of Lacuna "

-- A function holds at most 200 locals: after so many the script opens another one, inside.
local most_locals = 150
local nested_head = ";(function() -- one function holds no more than 200 locals: what follows stands in another"
local nested_tail = "end)() -- of what was too many for one function"

-- A script of keep's without what makes a script of it: its statements as they were typed, on the same lines.
function kept_script.is_one(text) return text:sub(1, #head) == head end
function kept_script.without_frame(text)
  if not kept_script.is_one(text) then return text end
  return (text:gsub("^[^\n]*", ""):gsub("\n;%(function%(%) %-%- one function[^\n]*", "\n"):gsub("\nend%)%(%) %-%- of what was[^\n]*", "\n"))
end

-- Where an input came from, as a line between those of other origins says it.
local function mark(from) return from and "-- from " .. from or "-- typed" end

-- The statements of a script of keep's, each with its origin, where the marks say so, else the one given; the marks are taken off.
function kept_script.find_origins(statements, origin)
  local from = origin
  for _, statement in ipairs(statements) do
    local blank, line, rest = statement.text:match "^(%s*)(%-%- %l+[^\n]*)\n?(.*)$"
    local file = line and line:match "^%-%- from (.+)$"
    if file or line == mark(nil) then
      from, statement.text, statement.line = file or origin, rest, statement.line + select(2, blank:gsub("\n", "")) + 1
    end
    statement.from = from
  end
end

-- One input -----------------------------------------------------------------------------------------------------------------------

local function compiles(text) return load(text, "", "t") ~= nil end

-- The call that prints values as the prompt does. Where the session has given its words away, one made before that.
local usual_printer = "print(show(%s))"
local function printer()
  local latest, globals = session.environment[1], session.environment[2]
  if latest.print == nil and latest.show == nil and globals.print == print and rawget(globals, "show") == nil then return usual_printer end
  return "print_shown(%s)"
end
local own_printer = "local print_shown = (function(print, show) return function(...) print(show(...)) end end)(print, show)"

-- The line of an expression that starts at a token, put after `before`: printed if the session showed a value. Comments after it stay behind.
local function printing(input, list, first, before, shown)
  local last = list[#list].text == ";" and #list - 1 or #list
  local expression, after = input.text:sub(list[first].first, list[last].last), input.text:sub(list[#list].last + 1)
  if input.results > 0 then return before .. (input.as_text and "print(%s)" or shown):format(expression) .. after end
  if compiles(expression) then return before .. (list[first].text == "(" and ";" or "") .. expression .. after end
  return before .. "do local _ = " .. expression .. " end" .. after
end

-- What must end with the text: in a function, which hands the locals on.
local function in_a_function(input, list, shown)
  if input.results > 0 then return shown:format("(function()\n" .. input.text .. "\nend)()") end
  local names = {}
  for _, statement in ipairs(statements.locals(list)) do
    for _, entry in ipairs(statement.names) do names[#names + 1] = entry.name end
  end
  if #names == 0 then return ";(function()\n" .. input.text .. "\nend)()" end
  local all = table.concat(names, ", ")
  return ("local %s = (function()\n%s\nreturn %s\nend)()"):format(all, input.text, all)
end

-- The input's lines in the script.
local function written(input, shown)
  local list = statements.read(input.text)
  if #list == 0 then return input.text end
  if input.expression then return printing(input, list, 1, input.text:sub(1, list[1].first - 1), shown) end
  local last, inside = statements.returns(list)
  if inside or statements.needs_block(list) then return in_a_function(input, list, shown) end
  if not last then return (list[1].text == "(" and ";" or "") .. input.text end
  local before = input.text:sub(1, list[last].first - 1)
  if last == #list or list[last + 1].text == ";" then return before end
  return printing(input, list, last + 1, before, shown)
end

-- An input's beginning, as a message or a comment quotes it.
local function quoted(text)
  local line = text:match("[^\n]*", statements.read(text)[1].first)
  return #line > 60 and line:sub(1, 57):gsub("[\128-\255]+$", "") .. "..." or line
end

local function count_locals(text)
  local count = 0
  for _, statement in ipairs(statements.locals(statements.read(text))) do count = count + #statement.names end
  return count
end

-- The whole -----------------------------------------------------------------------------------------------------------------------

-- A script that is being written: {lines =, notes = what the user is to know, shown = the call that prints, from = of the last input,
-- locals = so far in the innermost function, nested = functions that are open, skips = numbers of free spreads to be skipped}.
local function add(script, line) script.lines[#script.lines + 1] = line end

local function add_left_out(script, input, why)
  local note = ("left out: %s: %s"):format(why, quoted(input.text))
  script.notes[#script.notes + 1] = note
  add(script, "-- " .. note)
end

local function add_failed(script, input)
  script.skips = script.skips + input.skips
  if #input.failed > 0 then add_left_out(script, input, "failed after it had set " .. table.concat(input.failed, ", ")) end
  for key, value in pairs(input.settings) do add(script, ("settings { %s = %d }"):format(key, value)) end
end

-- Another function where one would hold too many locals.
local function make_room(script, count)
  if script.locals + count > most_locals then
    add(script, nested_head)
    script.locals, script.nested = 0, script.nested + 1
  end
  script.locals = script.locals + count
end

local function add_input(script, input)
  local text = written(input, script.shown):match "^(.-)%s*$"
  if input.from ~= script.from then
    if script.lines[#script.lines] ~= "" then add(script, "") end
    add(script, mark(input.from))
    text, script.from = text:gsub("^\n+", ""), input.from
  end
  if script.skips > 0 then add(script, ("for _ = 1, %d do spread.uniform(0, 1) end -- as many as what is left out had made"):format(script.skips)) end
  script.skips = 0
  if not compiles(text) then return add_left_out(script, input, "jumps in a way that a script can't") end
  make_room(script, count_locals(text))
  if text ~= "" then add(script, text) end
end

-- The script of all inputs of the session, and notes on what had to be left out.
function kept_script.text()
  local script = { lines = {}, notes = {}, shown = printer(), locals = 0, nested = 0, skips = 0 }
  add(script, ("%s%s, kept on %s"):format(head, core.version, os.date "%Y-%m-%d"))
  add(script, ("settings { seed = %d, draws = %d }"):format(session.began.seed, session.began.draws))
  if script.shown ~= usual_printer then add(script, own_printer) end
  add(script, "")
  for _, input in ipairs(session.inputs) do
    if input.failed then add_failed(script, input) else add_input(script, input) end
  end
  for _ = 1, script.nested do add(script, nested_tail) end
  return table.concat(script.lines, "\n") .. "\n", script.notes
end

return kept_script
