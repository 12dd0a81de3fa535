-- SPDX-License-Identifier: GPL-3.0-or-later
-- The manual page lacuna(1): docs/make/lacuna.1 with the table of options and the words of the language put in.
local files = require "files"

local program = {}

local function escaped(text) return (text:gsub("\\", "\\e"):gsub("%-", "\\-"):gsub("^[.']", "\\&%0")) end

local function options()
  local lines = {}
  for _, option in ipairs(glossary.options()) do
    lines[#lines + 1] = ".It Fl " .. escaped(option.name:sub(2)) .. (option.argument and " Ar " .. escaped(option.argument:lower()) or "")
    lines[#lines + 1] = escaped(option.meaning:gsub("^%l", string.upper)) .. "."
  end
  return table.concat(lines, "\n")
end

local function words()
  local lines = {}
  for _, word in ipairs(glossary.words()) do
    if not word.of then
      lines[#lines + 1] = ".It Li " .. escaped(word.name)
      lines[#lines + 1] = escaped(word.does:match "^(.-%.)%s" or word.does)
    end
  end
  return table.concat(lines, "\n")
end

function program.man(version, date)
  local page = files.read "docs/make/lacuna.1"
  local year, month, day = date:match "(%d+)-(%d+)-(%d+)"
  local months = { "January", "February", "March", "April", "May", "June", "July", "August", "September", "October", "November", "December" }
  local marks = { DATE = ("%s %d, %s"):format(months[tonumber(month)], tonumber(day), year), VERSION = version, OPTIONS = options(), WORDS = words() }
  return (page:gsub("@(%u+)@", marks))
end

return program
