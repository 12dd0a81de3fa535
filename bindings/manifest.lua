-- SPDX-License-Identifier: GPL-3.0-or-later
-- A report's manifest: what made it, how to make it again, and the SHA-256 of each file, in the form that `sha256sum -c` checks. It is
-- the last file to be written: a folder that has one is whole.
local core = ...

local manifest = {}

-- Today's date, or that of SOURCE_DATE_EPOCH, which lets a build be made again to the same bytes (reproducible-builds.org).
function manifest.date()
  local epoch = tonumber(os.getenv "SOURCE_DATE_EPOCH")
  return os.date("!%Y-%m-%d", epoch and math.tointeger(epoch) or nil), epoch ~= nil
end

local function quoted(word)
  if word:find "^[%w%._/=:+-]+$" then return word end
  return "'" .. word:gsub("'", "'\\''") .. "'"
end

-- The command that makes the report again from the folder's inputs: only what changes the results stands in it, not how they were made
-- (threads, parts of a shared job). nil where the study came from no file.
function manifest.command(given, script, settings)
  if not script then return nil end
  local words = { "lacuna", ("--seed %d --draws %d"):format(settings.seed, settings.draws), quoted(script) }
  for _, option in ipairs { "set", "only" } do
    for _, value in ipairs(given[option] or {}) do words[#words + 1] = "--" .. option .. " " .. quoted(value) end
  end
  words[#words + 1] = "--out ../again"
  for i, argument in ipairs(given.arguments or {}) do words[#words + 1] = (i == 1 and "-- " or "") .. quoted(argument) end
  return table.concat(words, " ")
end

-- The manifest's text. facts: { date, seed, draws, command }; files: { { name, text } }.
function manifest.text(facts, files)
  local lines = {
    "# Manifest of a report by Lacuna",
    "# version: " .. core.version,
    "# date: " .. facts.date,
    "# seed: " .. facts.seed,
    "# draws: " .. facts.draws,
  }
  if facts.command then lines[#lines + 1] = "# to make it again, in this folder: " .. facts.command end
  lines[#lines + 1] = "# to check the files, in this folder: sha256sum -c manifest.txt"
  for _, file in ipairs(files) do lines[#lines + 1] = file.digest .. "  " .. file.name end
  return table.concat(lines, "\n") .. "\n"
end

return manifest
