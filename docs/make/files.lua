-- SPDX-License-Identifier: GPL-3.0-or-later
-- Reading, writing and listing of files, for the makers of documents.
local files = {}

function files.read(path)
  local file = assert(io.open(path, "rb"))
  local text = file:read "a"
  file:close()
  return text
end

function files.write(path, text)
  local file = assert(io.open(path, "wb"))
  assert(file:write(text))
  assert(file:close())
end

-- What a command of the shell prints.
function files.output_of(command)
  local pipe = assert(io.popen(command))
  local text = pipe:read "a"
  assert(pipe:close(), command .. " failed")
  return text
end

function files.listed(pattern)
  local list = {}
  for path in files.output_of("ls " .. pattern):gmatch "[^\n]+" do list[#list + 1] = path end
  return list
end

return files
