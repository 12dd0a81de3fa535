-- SPDX-License-Identifier: GPL-3.0-or-later
-- Tables of texts and numbers as CSV (RFC 4180, with line feeds alone between the lines); csv.c reads it.
--
--   of(header, rows)    the file's text
--   digits(number)      seven significant digits; nothing of what is undefined or nil
local csv = {}

function csv.digits(number) return number and number == number and ("%.7g"):format(number) or "" end

local function field(value)
  if type(value) == "number" then return csv.digits(value) end
  if value:find '[",\r\n]' or value:find "^%s" or value:find "%s$" then return '"' .. value:gsub('"', '""') .. '"' end
  return value
end

local function line(values)
  local fields = {}
  for i, value in ipairs(values) do fields[i] = field(value) end
  return table.concat(fields, ",") .. "\n"
end

function csv.of(header, rows)
  local lines = { line(header) }
  for i, row in ipairs(rows) do lines[i + 1] = line(row) end
  return table.concat(lines)
end

return csv
