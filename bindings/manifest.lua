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

-- Options that change what is computed; the others (threads, shards, where the report goes) don't, and are left out.
local kept = { ["--set"] = true, ["--only"] = true, ["--seed"] = true, ["--draws"] = true }

local function quoted(word)
  if word:find "^[%w%._/=:+-]+$" then return word end
  return "'" .. word:gsub("'", "'\\''") .. "'"
end

-- The command that makes the report again from its own folder of inputs.
function manifest.command(command, script)
  if not script then return nil end
  local words, i = { "lacuna", quoted(script) }, 1
  while command and i <= #command do
    local name, value = command[i]:match "^(%-%-[%w-]+)=(.*)$"
    name = name or command[i]
    if kept[name] then
      if not value then
        i = i + 1
        value = command[i] or ""
      end
      words[#words + 1] = name .. " " .. quoted(value)
    end
    i = i + 1
  end
  words[#words + 1] = "--out report"
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
