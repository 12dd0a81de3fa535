-- SPDX-License-Identifier: GPL-3.0-or-later
-- What a process that was killed while it wrote leaves behind: files of a name that only core.write_file gives, and then always takes away.
local core = ...

-- leftovers.remove(folder): takes them out of a folder, and of none inside it.
local function remove(folder)
  for _, entry in ipairs(core.folder_entries(folder)) do
    if entry:find "%.unfinished%-%d+%-%d+$" then os.remove(folder .. "/" .. entry) end
  end
end

return { remove = remove }
