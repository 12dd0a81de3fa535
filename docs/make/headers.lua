-- SPDX-License-Identifier: GPL-3.0-or-later
-- The public C headers as data: for each file { name, about, items = { { comment, code } } }, comments without their marks. A function that is
-- documented by its row of the table of relations has the row's key (`gap_width/kanagawa_2016`) as its comment, before it or beside it.

local files = require "files"

local headers = {}

-- A comment's text: the marks and the left margin taken off.
local function bare(comment)
  local text = comment:gsub("^/%*+%s?", ""):gsub("%s*%*/%s*$", "")
  return (text:gsub("\n   ", "\n"))
end

local function without_plumbing(source)
  source = source:gsub("#ifdef __cplusplus\n.-#endif\n", "")
  source = source:gsub("\n#ifndef LACUNA_%w*_H\n#define LACUNA_%w*_H\n", "\n"):gsub("\n#endif\n*$", "\n"):gsub("\n#include [^\n]*", "")
  return source
end

-- Pieces between blank lines that belong together: a comment that code follows, or code alone.
local function items_of(source)
  local items, at = {}, 1
  while true do
    at = source:find("%S", at)
    if not at then return items end
    local comment
    if source:sub(at, at + 1) == "/*" then
      local _, last = source:find("*/", at, true)
      local next_code = source:match("^\n([^\n]+)", last + 1)
      comment = bare(source:sub(at, last))
      at = last + 1
      if not next_code then
        items[#items + 1] = { comment = comment, code = "" }
        goto continue
      end
      at = at + 1
    end
    do
      -- Code goes on to a blank line outside braces, or to the next comment that starts a line.
      local from, depth = at, 0
      local lines = {}
      for line in (source:sub(from) .. "\n"):gmatch "(.-)\n" do
        if depth == 0 and #lines > 0 and (line == "" or line:find "^/%*") then break end
        lines[#lines + 1] = line
        at = at + #line + 1
        local stripped = line:gsub("/%*.-%*/", "")
        depth = depth + select(2, stripped:gsub("{", "")) - select(2, stripped:gsub("}", ""))
      end
      items[#items + 1] = { comment = comment, code = table.concat(lines, "\n") }
    end
    ::continue::
  end
end

function headers.read(path)
  local source = files.read(path):gsub("^/%* SPDX[^\n]*\n", "")
  local about, rest = source:match "^(/%*.-%*/)\n(.*)$"
  return { name = path:match "include/(.*)$", about = bare(about), items = items_of("\n" .. without_plumbing("\n" .. rest)) }
end

function headers.all()
  local list = {}
  for i, path in ipairs(files.listed "include/lacuna/*.h") do list[i] = headers.read(path) end
  return list
end

-- The keys of rows named in an item, in order: { "gap_width/kanagawa_2016", ... }
function headers.keys(item)
  local keys = {}
  for key in ((item.comment or "") .. "\n" .. item.code):gmatch "[%w_]+/[%w_]+" do keys[#keys + 1] = key end
  return keys
end

return headers
