-- SPDX-License-Identifier: GPL-3.0-or-later
-- keep "file.lua": what a conversation did, as a script that runs alone and gives the same numbers. again "file.lua": a script's statements
-- as inputs of the conversation; so are read the personal start-up file and --start FILE.
local core = ...
local read_file = core.part "lacuna.read_file"
local statements = core.part "lacuna.statements"
local session = core.part "lacuna.session"
local kept_script = core.part "lacuna.kept_script"

local notebook = {}
local pcall, print, load, io, os = pcall, print, load, io, os -- the user may give these names away

-- Reading scripts -----------------------------------------------------------------------------------------------------------------

local may_begin = {}
for word in ("if for while repeat do function local return break goto ::"):gmatch "%S+" do may_begin[word] = true end

-- Whether statements after the token may stand on lines of their own: what goes on after a line's end begins with something else.
local function may_begin_statement(token) return token.depth == 0 and (token.kind == "name" or may_begin[token.text]) end

-- Where the line of a place ends, with its comment; the place itself if a long comment starts there.
local function line_end(text, place)
  if text:find("^[ \t]*%-%-%[=*%[", place + 1) then return place end
  return text:find("\n", place + 1, true) or #text
end

-- The script's statements with the comments before them, and the lines they start on: {text =, line =}. The parser judges where one may
-- end. Lines that belong together by a label or a return from a block are one.
local function statements_of(text)
  local list = statements.read(text)
  local _, inside = statements.returns(list)
  local whole = inside or statements.needs_block(list)
  local found, from, line = {}, 1, 1
  local function cut(last)
    local piece = text:sub(from, last)
    if piece:find "%S" then found[#found + 1] = { text = piece:match "^(.-)%s*$", line = line } end
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
  local text, trouble = read_file(path)
  if not text then core.raise(("%s: cannot read %s: %s"):format(what, shown_path(path), (trouble:gsub("^.*: ", "")))) end
  return (text:gsub("\r\n", "\n"):gsub("^#[^\n]*", ""))
end

-- Runs one statement as an input, and raises its error as it is. It counts as failed also where a Ctrl-C passes by.
local function run(statement, name)
  local chunk, message = session.compile(("\n"):rep(statement.line - 1) .. statement.text, "@" .. name, true)
  if not chunk then error(message, 0) end
  local ok = false
  local _ <close> = setmetatable({}, { __close = function() session.ran(statement.text, ok, 0, statement.from) end })
  ok, message = pcall(chunk)
  if not ok then error(message, 0) end
end

-- What this session has run of a start-up file isn't run again where a script brings it: quantities and relations can't be made twice.
local start_mark = "start-up file "
local function ran_already(statement)
  for _, input in ipairs(statement.from:sub(1, #start_mark) == start_mark and session.inputs or {}) do
    if input.from == statement.from and input.text:match "^%s*(.*)$" == statement.text:match "^%s*(.*)$" then return true end
  end
  return false
end

-- Runs the script's statements one after the other, up to the first error.
local function replay(path, what, is_start)
  local text, name = text_of(path, what), shown_path(path)
  local whole, message = load(text, "@" .. name, "t")
  if not whole then error(message, 0) end
  local statements, origin = statements_of(kept_script.without_frame(text)), is_start and start_mark .. name or name
  if kept_script.is_one(text) then kept_script.find_origins(statements, origin) end
  for _, statement in ipairs(statements) do
    statement.from = statement.from or origin
    if not ran_already(statement) then run(statement, name) end
  end
end

-- The words -----------------------------------------------------------------------------------------------------------------------

local kept = {} -- what was written to each path

-- A file that this session hasn't written, or that was changed since, is not replaced unasked.
local function check_replaced(path)
  local present = read_file(path) -- nil also for a folder, which write_file refuses
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

function notebook.keep(path, replace)
  check_call("keep", path)
  if replace ~= true then check_replaced(path) end
  local text, notes = kept_script.text()
  local whole, defect = load(text, "=script", "t")
  if not whole then core.raise("keep: this session makes no script: " .. defect) end
  core.write_file(path, text)
  kept[path] = text
  local count = 0
  for _, input in ipairs(session.inputs) do count = count + (input.failed and 0 or 1) end
  print(("kept %d input%s in %s"):format(count, count == 1 and "" or "s", path))
  for _, note in ipairs(notes) do print("  " .. note) end
end

function notebook.again(path)
  check_call("again", path)
  replay(path, "again")
end

-- start(path): --start FILE.
function notebook.start(path) replay(path, "--start", true) end

-- start_up(): the personal start-up file, if there is one.
function notebook.start_up()
  local folder, home = os.getenv "XDG_CONFIG_HOME", os.getenv "HOME"
  if not (folder and folder:find "^/") then folder = home and home:find "^/" and home .. "/.config" end
  local path = folder and folder .. "/lacuna/start.lua"
  local file = path and io.open(path, "rb")
  if not file then return end
  file:close()
  print("reading " .. shown_path(path))
  replay(path, "start.lua", true)
end

return notebook
