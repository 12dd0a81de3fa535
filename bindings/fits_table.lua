-- SPDX-License-Identifier: GPL-3.0-or-later
-- A study's table as a FITS binary table: the columns of its CSV with units and descriptions, NaN for what is undefined.
local core = ...
local table_files = core.part "lacuna.table_files"

local fits_table = {}
local LONGEST_NAME = 68 -- of a text in one card

-- Texts in a FITS file are printable ASCII.
local function ascii(text)
  text = text:gsub("%s+", " "):gsub("±", "+-"):gsub("µ", "u")
  return (text:gsub(utf8.charpattern, function(character) return #character > 1 and "?" or nil end):gsub("[^\x20-\x7e]", "?"))
end

-- A column's name: letters, digits and underscores, as the standard advises, unlike the others whatever their case.
local function column_name(field, taken)
  local words = (field.group and field.group .. " " or "") .. field.name .. (field.part and " " .. field.part or "")
  local stem = ascii(words):gsub("[^%w]+", "_"):gsub("^_+", ""):gsub("_+$", ""):sub(-LONGEST_NAME + 4)
  local name, number = stem, 1
  while taken[name:lower()] do
    number = number + 1
    name = stem .. "_" .. number
  end
  taken[name:lower()] = true
  return name
end

local parts = {
  verdict = "the verdict in words: ", share = "the share of the draws in which it holds: ",
  ["upper error"] = "upper error (central 68 %) of ", ["lower error"] = "lower error (central 68 %) of ",
}

local function description(field)
  if not field.entry then return field.name == "name" and "the target" or "as the study's file has it" end
  return ascii((field.group and field.group .. ": " or "") .. (parts[field.part] or "") .. field.entry.meaning)
end

-- FITS writes the astronomical unit in capitals.
local function fits_unit(unit) return unit and (unit:gsub("%f[%a]au%f[%A]", "AU")) end

local function column_of(field, taken)
  local column = { name = column_name(field, taken), unit = fits_unit(field.unit), description = description(field), texts = field.texts }
  for i, text in ipairs(field) do column[i] = field.texts and ascii(text) or tonumber(text) or 0 / 0 end
  return column
end

-- The file's bytes; or nil and why not.
function fits_table.of(study, facts)
  local about = { extname = "STUDY", date = facts.date_fixed and facts.date or nil }
  if study.title then about[1] = ascii(study.title) end
  about[#about + 1] = ("Made by Lacuna %s, %d draws, seed %d."):format(facts.version, facts.draws, facts.seed)
  about[#about + 1] = "It estimates geometric feasibility. " .. core.part "lacuna.english".WHO_DECIDES
  local columns, taken = {}, {}
  for i, field in ipairs(table_files.fields(study)) do columns[i] = column_of(field, taken) end
  return core.fits_table(about, columns, #columns[1])
end

return fits_table
