-- SPDX-License-Identifier: GPL-3.0-or-later
-- Tables that keep the order in which their keys came: { keys = list, values = by key }.
--
--   new()                 an empty one
--   at(t, key, make)      the value of a key; what is not there yet is made, where nothing else is said as one more such table
--   note(t, key)          the key stands there, once
--   each(t)               for key, value in order
local ordered = {}

function ordered.new() return { keys = {}, values = {} } end

function ordered.at(t, key, make)
  if t.values[key] == nil then
    t.keys[#t.keys + 1] = key
    t.values[key] = (make or ordered.new)()
  end
  return t.values[key]
end

local function yes() return true end
function ordered.note(t, key) ordered.at(t, key, yes) end

function ordered.each(t)
  local i = 0
  return function()
    i = i + 1
    return t.keys[i], t.values[t.keys[i]]
  end
end

return ordered
