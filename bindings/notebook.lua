-- SPDX-License-Identifier: GPL-3.0-or-later
-- keep "file.lua": what a conversation did, as a script that runs alone and gives the same numbers. again "file.lua": a script's statements
-- as inputs of the conversation; so are read the personal start-up file and --start FILE.
local core = ...
local tokens = core.part "lacuna.tokens"
local session = core.part "lacuna.session"

local notebook = {}
local pcall, print, load, io, os = pcall, print, load, io, os -- the user may give these names away

local head = "-- A session of Lacuna "

-- A function holds at most 200 locals: after so many the script opens another one, inside.
local most_locals = 150
local nested_head = ";(function() -- one function holds no more than 200 locals: what follows stands in another"
local nested_tail = "end)() -- of what was too many for one function"

-- A script of keep's without what makes a script of it: its statements as they were typed, on the same lines.
local function without_frame(text)
  if text:sub(1, #head) ~= head then return text end
  return (text:gsub("^[^\n]*", ""):gsub("\n;%(function%(%) %-%- one function[^\n]*", "\n"):gsub("\nend%)%(%) %-%- of what was[^\n]*", "\n"))
end

-- Reading scripts -----------------------------------------------------------------------------------------------------------------

local may_begin = {}
for word in ("if for while repeat do function local return break goto ::"):gmatch "%S+" do may_begin[word] = true end

-- Whether statements after the token may stand on lines of their own: what goes on after a line's end begins with something else.
local function may_begin_statement(token) return token.depth == 0 and (token.kind == "name" or may_begin[token.text] and token.kind ~= "string") end

-- Where the line of a place ends, with its comment; the place itself if a long comment starts there.
local function line_end(text, place)
  if text:find("^[ \t]*%-%-%[=*%[", place + 1) then return place end
  return text:find("\n", place + 1, true) or #text
end

-- The script's statements with the comments before them, and the lines they start on: {text =, line =}. The parser judges where one may
-- end. Lines that belong together by a label or a return from a block are one.
local function statements_of(text)
  local list = tokens.read(text)
  local _, inside = tokens.returns(list)
  local whole = inside or tokens.needs_block(list)
  local found, from, line = {}, 1, 1
  local function cut(last)
    local piece = text:sub(from, last)
    found[#found + 1] = { text = piece:match "^(.-)%s*$", line = line }
    from, line = last + 1, line + select(2, piece:gsub("\n", ""))
  end
  for i = 2, whole and 0 or #list do
    local before = list[i - 1]
    local last = line_end(text, before.last)
    local new_line = text:sub(before.last + 1, list[i].first):find "\n"
    if new_line and may_begin_statement(list[i]) and before.text ~= "return" and load(text:sub(from, last), "", "t") then cut(last) end
  end
  cut(#text)
  return found
end

-- A path as messages and comments show it.
local function shown_path(path)
  local home = os.getenv "HOME"
  return home and #home > 1 and path:sub(1, #home + 1) == home .. "/" and "~" .. path:sub(#home + 1) or path
end

local function text_of(path, what)
  local file, trouble = io.open(path, "rb")
  local text
  if file then
    text, trouble = file:read "a"
    file:close()
  end
  if not text then core.raise(("%s: cannot read %s: %s"):format(what, shown_path(path), (tostring(trouble):gsub("^.*: ", "")))) end
  return (text:gsub("\r\n", "\n"):gsub("^#[^\n]*", ""))
end

-- Runs one statement as an input, and raises its error as it is. It counts as failed also where a Ctrl-C passes by.
local function run(statement, name)
  local chunk, message = session.compile(("\n"):rep(statement.line - 1) .. statement.text, "@" .. name, true)
  if not chunk then error(message, 0) end
  local ok = false
  local _ <close> = setmetatable({}, { __close = function() session.ran(statement.text, ok, 0, name) end })
  ok, message = pcall(chunk)
  if not ok then error(message, 0) end
end

-- Runs the script's statements one after the other, up to the first error.
local function replay(path, what)
  local text, name = text_of(path, what), shown_path(path)
  local whole, message = load(text, "@" .. name, "t")
  if not whole then error(message, 0) end
  for _, statement in ipairs(statements_of(without_frame(text))) do run(statement, name) end
end

-- Writing the session -------------------------------------------------------------------------------------------------------------

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
  if input.results > 0 then return before .. shown:format(expression) .. after end
  if compiles(expression) then return before .. (list[first].text == "(" and ";" or "") .. expression .. after end
  return before .. "do local _ = " .. expression .. " end" .. after
end

-- What must end with the text: in a function, which hands the locals on.
local function in_a_function(input, list, shown)
  if input.results > 0 then return shown:format("(function()\n" .. input.text .. "\nend)()") end
  local names = {}
  for _, statement in ipairs(tokens.locals(list)) do
    for _, entry in ipairs(statement.names) do names[#names + 1] = entry.name end
  end
  if #names == 0 then return ";(function()\n" .. input.text .. "\nend)()" end
  local all = table.concat(names, ", ")
  return ("local %s = (function()\n%s\nreturn %s\nend)()"):format(all, input.text, all)
end

-- The input's lines in the script.
local function written(input, shown)
  local list = tokens.read(input.text)
  if #list == 0 then return input.text end
  if input.expression then return printing(input, list, 1, input.text:sub(1, list[1].first - 1), shown) end
  local last, inside = tokens.returns(list)
  if inside or tokens.needs_block(list) then return in_a_function(input, list, shown) end
  if not last then return (list[1].text == "(" and ";" or "") .. input.text end
  local before = input.text:sub(1, list[last].first - 1)
  if last == #list or list[last + 1].text == ";" then return before end
  return printing(input, list, last + 1, before, shown)
end

-- An input's beginning, as a message or a comment quotes it.
local function quoted(text)
  local line = text:match("[^\n]*", tokens.read(text)[1].first)
  return #line > 60 and line:sub(1, 57):gsub("[\128-\255]+$", "") .. "..." or line
end

local function left_out(input)
  return ("left out: failed after it had set %s: %s"):format(table.concat(input.failed, ", "), quoted(input.text))
end

local function count_locals(text)
  local count = 0
  for _, statement in ipairs(tokens.locals(tokens.read(text))) do count = count + #statement.names end
  return count
end

-- The whole script.
local function script()
  local shown = printer()
  local lines = { ("%s%s, kept on %s"):format(head, core.version, os.date "%Y-%m-%d"), ("settings { seed = %d, draws = %d }"):format(session.began.seed, session.began.draws), "" }
  local from, locals, nested, skips = nil, 0, 0, 0
  local function add(line) lines[#lines + 1] = line end
  if shown ~= usual_printer then add(own_printer) end
  for _, input in ipairs(session.inputs) do
    skips = skips + (input.skips or 0)
    if input.failed then
      if #input.failed > 0 then add("-- " .. left_out(input)) end
    else
      if input.from ~= from then
        if lines[#lines] ~= "" then add "" end
        add(input.from and "-- from " .. input.from or "-- typed")
      end
      from = input.from
      if skips > 0 then add(("for _ = 1, %d do spread.uniform(0, 1) end -- as many as what is left out had made"):format(skips)) end
      skips = 0
      local text = written(input, shown)
      local more = count_locals(text)
      if locals + more > most_locals then
        add(nested_head)
        locals, nested = 0, nested + 1
      end
      locals = locals + more
      if text ~= "" then add(text) end
    end
  end
  for _ = 1, nested do add(nested_tail) end
  return table.concat(lines, "\n") .. "\n"
end

local kept = {} -- what was written to each path

-- A file that this session hasn't written, or that was changed since, is not replaced unasked.
local function check_replaced(path)
  local file = io.open(path, "rb")
  local present = file and file:read "a" -- nil also for a folder, which write_file refuses
  if file then file:close() end
  if present and present ~= kept[path] then
    core.raise(('keep: %s exists, and not as this session has written it; keep("%s", true) replaces it'):format(path, path))
  end
end

local function check_call(word, path)
  local input = session.current()
  if not input then core.raise(word .. " is for a conversation; in a script there is nothing to keep, and dofile runs another") end
  if not input.apart then core.raise(('%s is an input of its own: type %s "file.lua" alone'):format(word, word)) end
  if type(path) ~= "string" or path == "" then core.raise(('%s wants a file\'s name, like %s "file.lua"; got %s'):format(word, word, core.shown(path))) end
end

local function plural(count, what) return ("%d %s%s"):format(count, what, count == 1 and "" or "s") end

function notebook.keep(path, replace)
  check_call("keep", path)
  if replace ~= true then check_replaced(path) end
  local text, count = script(), 0
  local whole, defect = load(text, "=script", "t")
  if not whole then core.raise("keep: this session makes no script: " .. defect) end
  core.write_file(path, text)
  kept[path] = text
  for _, input in ipairs(session.inputs) do count = count + (input.failed and 0 or 1) end
  print(("kept %s in %s"):format(plural(count, "input"), path))
  for _, input in ipairs(session.inputs) do
    if input.failed and #input.failed > 0 then print("  " .. left_out(input)) end
  end
end

function notebook.again(path)
  check_call("again", path)
  replay(path, "again")
end

-- start(path): --start FILE.
function notebook.start(path) replay(path, "--start") end

-- start_up(): the personal start-up file, if there is one. Returned: its path as it is shown, or nil.
function notebook.start_up()
  local folder, home = os.getenv "XDG_CONFIG_HOME", os.getenv "HOME"
  if not (folder and folder:find "^/") then folder = home and home:find "^/" and home .. "/.config" end
  local path = folder and folder .. "/lacuna/start.lua"
  local file = path and io.open(path, "rb")
  if not file then return nil end
  file:close()
  print("reading " .. shown_path(path))
  replay(path, "start.lua")
end

return notebook
