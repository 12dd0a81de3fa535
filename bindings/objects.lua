-- SPDX-License-Identifier: GPL-3.0-or-later
-- Objects as givens of a case: which value a name of that kind takes, and what it may be written as.
local core = ...

local objects = {}

-- What a text stands for, by kind: the band of that name.
local named = { band = core.band_named }

-- The object that a given stands for; an error says what would be right.
function objects.take(name, value)
  if type(value) == "string" and named[name] then return named[name](value) end
  local kind = core.object_type(value)
  if kind == name then return value end
  core.raise(("%s wants what %s{...} makes%s; got %s"):format(name, name, named[name] and ", or the name of one" or "",
    kind or (type(value) == "table" and "a table" or tostring(value))))
end

-- Where an object's numbers come from, if it says: in words, and the source's id. Of a built-in band: the zero point.
local sources = {}
function sources.band(band)
  local _, id = core.band_facts(band)
  if id then return "zero point: " .. core.part "lacuna.relations".source { source = id }, id end
end

function objects.source(object)
  local of_kind = sources[core.object_type(object)]
  if of_kind then return of_kind(object) end
end

return objects
