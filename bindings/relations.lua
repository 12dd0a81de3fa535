-- SPDX-License-Identifier: GPL-3.0-or-later
-- How relations and the names in them are written: sources, symbols, equations, ranges of validity.
--
--   source(row)              "Kanagawa et al. 2016, PASJ 68, 43, Eq. 5"
--   recipe(row)              "by definition", "kanagawa_2016: Kanagawa et al. ..."
--   symbol(name), symbol_tex(name)   in plain text, and in the TeX that equations are written in
--   right_side(row)          the side of its equation that numbers can be put into, or nil
--   outside(case, row), warnings(case, row)   where its inputs lie outside its range of validity
local core = ...
local equation = core.part "lacuna.equation"
local format = core.part "lacuna.format"
local text = core.part "lacuna.text"

local relations = {}

function relations.source(row)
  local source = core.source(row.source)
  if not source then return row.source .. (row.place and ", " .. row.place or "") end
  if not source.year then return source.authors .. (row.place and ", " .. row.place or "") end
  local parts = { source.authors .. " " .. source.year }
  if source.journal then parts[#parts + 1] = source.journal .. (source.volume and " " .. source.volume or "") end
  if source.page then parts[#parts + 1] = source.page end
  if row.place then parts[#parts + 1] = row.place end
  return table.concat(parts, ", ") .. (row.from_memory and " (formula from memory)" or "")
end

function relations.recipe(row)
  if row.source == "definition" then return "by definition" .. (row.by == "definition" and "" or " (" .. row.by .. ")") end
  return row.by .. ": " .. relations.source(row)
end

-- The length that an angle is the angle of, or nil.
local function length_of(name)
  local length = name:match "^(.+)_angle$"
  return length and core.find(length) == length and core.entry(length).on_sky and length or nil
end

-- The symbol of a name in plain text; that of an angle is θ of the length.
function relations.symbol(name)
  local length = length_of(name)
  if length then return "θ(" .. relations.symbol(length) .. ")" end
  return equation.plain_symbol(core.entry(name).symbol)
end

-- The same in the TeX that equations are written in.
function relations.symbol_tex(name)
  local length = length_of(name)
  return length and "\\theta(" .. relations.symbol_tex(length) .. ")" or core.entry(name).symbol
end

-- The side of a row's equation that numbers can be put into; conditions are listed with their numbers by themselves.
function relations.right_side(row)
  if not row.equation or #row.from == 0 or #row.conditions > 0 then return nil end
  return row.equation:match "^.-=(.*)$"
end

-- Where a row's inputs lie outside its range of validity: a list of { words = the range, name, value, share }.
function relations.outside(self, row)
  local found = {}
  for _, bound in ipairs(row.holds) do
    local value = core.raw(self, bound.name)
    if value then
      local outside = core.either(core.below(value, core.like(value, bound.low)), core.above(value, core.like(value, bound.high)))
      local outside_in = text.share(outside)
      if outside_in > 0 then
        found[#found + 1] = { name = bound.name, value = value, share = outside_in, single = #core.axes(outside) == 0,
          words = ("%s holds for %s %s"):format(row.by, bound.name, text.range(bound.name, bound.low, bound.high)) }
      end
    end
  end
  return found
end

-- The same as sentences.
function relations.warnings(self, row)
  local warnings = {}
  for i, outside in ipairs(relations.outside(self, row)) do
    warnings[i] = ("%s; %s here%s"):format(outside.words, text.brief(outside.value),
      outside.single and "" or ", outside in " .. format.percent(outside.share))
  end
  if row.from[1] == "dust" and row.from[2] == "wavelength" then
    warnings[#warnings + 1] = core.part "lacuna.dust".warning(core.raw(self, "dust"), core.raw(self, "wavelength"))
  end
  return warnings
end

return relations
