-- SPDX-License-Identifier: GPL-3.0-or-later
-- Lines as typed at the prompt, and what the prompt answers. A fresh process runs them, so that each list of lines starts anew: draws, axes
-- and the user's own names are as in a new session. It works in a folder of its own that holds scripts/ alone; what it writes goes with it.
--
--   session.answers(lines)   runs them here, in this process: a list of answers
--   session.fresh(lines)     the same in a new process

local session = {}
local separator = "\1"

-- What the prompt prints for a line: what the line itself prints, then its results or its error.
local function answer(lacuna, line, environment)
  local printed = {}
  function print(...)
    local words = table.pack(...)
    for i = 1, words.n do words[i] = tostring(words[i]) end
    printed[#printed + 1] = table.concat(words, "\t")
  end
  local chunk, complaint = load("return " .. line, "=prompt", "t", environment)
  if not chunk then chunk, complaint = load(line, "=prompt", "t", environment) end
  if not chunk then return complaint end
  local results = table.pack(pcall(chunk))
  if not results[1] then printed[#printed + 1] = (tostring(results[2]):gsub("^[^:]+:%d+: ", ""))
  elseif results.n > 1 then printed[#printed + 1] = lacuna.show(table.unpack(results, 2, results.n)) end
  return table.concat(printed, "\n")
end

function session.answers(lines)
  local lacuna = require "lacuna"
  lacuna.settings { seed = 0, draws = 10000 }
  local environment, answers = {}, {}
  for name, value in pairs(_G) do environment[name] = value end
  environment.print = function(...) return print(...) end
  lacuna.globals(environment)
  for i, line in ipairs(lines) do answers[i] = answer(lacuna, line, environment) end
  return answers
end

-- What runs this test: stock Lua or the program.
local interpreter = os.getenv "INTERPRETER" or arg[-1]

-- Goes to a new folder, makes the paths to what runs absolute, and runs the lines that stand in $1 there; the folder goes afterwards.
local in_a_folder = [[
root=$PWD folder=$(mktemp -d) && trap 'rm -rf "$folder"' EXIT && ln -s "$root/scripts" "$folder/scripts" && cd "$folder" || exit
case $INTERPRETER in */*) INTERPRETER=$root/${INTERPRETER#$root/} ;; esac
case $LUA_CPATH in /*) ;; *) LUA_CPATH=$root/$LUA_CPATH ;; esac
export LUA_CPATH LUA_PATH="$root/tests/lua/?.lua;;"
"$INTERPRETER" "$root/tests/lua/session.lua" "$1"
]]

local function quoted(text) return "'" .. text:gsub("'", "'\\''") .. "'" end

function session.fresh(lines)
  local name = os.tmpname()
  local file = assert(io.open(name, "w"))
  file:write(table.concat(lines, separator))
  file:close()
  local process = assert(io.popen(("INTERPRETER=%s sh -c %s sh %s"):format(quoted(interpreter), quoted(in_a_folder), quoted(name))))
  local output = process:read "a"
  local ok = process:close()
  os.remove(name)
  if not ok then error("a fresh session failed: " .. output) end
  local answers = {}
  for text in output:gmatch("(.-)" .. separator) do answers[#answers + 1] = text end
  return answers
end

if arg and arg[0] and arg[0]:find "session%.lua$" then
  local file = assert(io.open(arg[1]))
  local lines = {}
  for line in (file:read "a" .. separator):gmatch("(.-)" .. separator) do lines[#lines + 1] = line end
  file:close()
  for _, text in ipairs(session.answers(lines)) do io.write(text, separator) end
end

return session
