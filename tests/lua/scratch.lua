-- SPDX-License-Identifier: GPL-3.0-or-later
-- A folder of a test's own, and a study without its printing.
--
--   scratch.folder, scratch.path(name), scratch.write(name, content), scratch.read(name)   nil of a file that isn't there
--   scratch.quietly(f, ...)   what f returns, and what it printed last
--   scratch.remove()
local scratch = { folder = os.tmpname() }
os.remove(scratch.folder)
assert(os.execute("mkdir " .. scratch.folder))

function scratch.path(name) return scratch.folder .. "/" .. name end

function scratch.write(name, content)
  local file = assert(io.open(scratch.path(name), "wb"))
  file:write(content)
  file:close()
  return scratch.path(name)
end

function scratch.read(name)
  local file = io.open(scratch.path(name), "rb")
  if not file then return nil end
  local content = file:read "a"
  file:close()
  return content
end

function scratch.quietly(f, ...)
  local printed
  local print_before = print
  print = function(line) printed = tostring(line) end
  local ok, result = pcall(f, ...)
  print = print_before
  if not ok then error(result, 0) end
  return result, printed
end

function scratch.remove() os.execute("rm -r " .. scratch.folder) end

return scratch
