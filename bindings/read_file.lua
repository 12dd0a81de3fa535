-- SPDX-License-Identifier: GPL-3.0-or-later
-- A file's whole text; or nil and what went wrong, like "cannot open PATH: No such file or directory". A folder opens, but can't be read.
return function(path)
  local file, trouble = io.open(path, "rb")
  if not file then return nil, "cannot open " .. trouble end
  local text
  text, trouble = file:read "a"
  file:close()
  if not text then return nil, ("cannot read %s: %s"):format(path, trouble) end
  return text
end
