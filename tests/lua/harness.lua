-- SPDX-License-Identifier: GPL-3.0-or-later
-- A small harness for tests in Lua, printing TAP (the Test Anything Protocol). Run from the repository's top directory.
--
--   package.path = "tests/lua/?.lua;bindings/?.lua;" .. package.path
--   local t = require "harness"
--   t.test("two and two", function()
--     t.equal(2 + 2, 4, "sum")                          -- what was got, what is wanted, a label (may be left out)
--     t.close(got, 0.1, 1e-12)                          -- within a relative tolerance; NaN and non-numbers fail
--     t.raises(function() error "no" end, "no")         -- raises an error that matches the Lua pattern; returns the message
--   end)
--   t.finish()                                          -- prints the plan; exits with status 1 if a test failed
--
-- A test ends at its first failed check, and fails on any error; the next one runs all the same. Tables are equal when
-- their keys and values are, however deep.

local harness = {}
local count, failed = 0, 0

local function shown(value)
  if type(value) == "string" then return ("%q"):format(value) end
  if math.type(value) == "float" then return ("%.17g"):format(value) end
  if type(value) ~= "table" then return tostring(value) end
  local parts = {}
  for key, inner in pairs(value) do parts[#parts + 1] = ("[%s] = %s"):format(shown(key), shown(inner)) end
  table.sort(parts)
  return "{" .. table.concat(parts, ", ") .. "}"
end

local function same(a, b)
  if type(a) ~= "table" or type(b) ~= "table" or rawequal(a, b) then return a == b end
  for key, value in pairs(a) do
    if not same(value, b[key]) then return false end
  end
  for key in pairs(b) do
    if a[key] == nil then return false end
  end
  return true
end

local function complain(label, format, ...)
  error((label and label .. ": " or "") .. format:format(...), 3)
end

function harness.equal(got, want, label)
  if not same(got, want) then complain(label, "want %s, got %s", shown(want), shown(got)) end
end

function harness.close(got, want, tolerance, label)
  local within = type(got) == "number" and math.abs(got - want) <= tolerance * math.abs(want)
  if not within then complain(label, "want %s within %g, got %s", shown(want), tolerance, shown(got)) end
end

function harness.raises(action, pattern, label)
  local ok, message = pcall(action)
  if ok then complain(label, "no error, want one that matches %q", pattern) end
  message = tostring(message)
  if not message:find(pattern) then complain(label, "want an error that matches %q, got %q", pattern, message) end
  return message
end

function harness.test(name, action)
  count = count + 1
  local ok, message = xpcall(action, function(raised) return type(raised) == "string" and raised or debug.traceback(shown(raised)) end)
  if ok then
    print(("ok %d - %s"):format(count, name))
  else
    failed = failed + 1
    print(("not ok %d - %s"):format(count, name))
    print("# " .. message:gsub("\n", "\n# "))
  end
end

function harness.finish()
  print("1.." .. count)
  io.stdout:flush()
  os.exit(failed == 0, true)
end

return harness
