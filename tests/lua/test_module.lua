-- SPDX-License-Identifier: GPL-3.0-or-later
-- The module in its host: no globals, coroutines, errors through computations, garbage, and the table that require gives.
local globals = {}
for key in pairs(_G) do globals[key] = true end
local t = require "harness"
local lac = require "lacuna"

t.test("require writes no global", function()
  local _ = lac.case { distance = "156 ± 3 pc", rim_radius = "0.3 au" }.rim_radius_angle, lac.help(), lac.au, lac.hill_radius
  for key in pairs(_G) do t.equal(globals[key], true, key) end
  t.equal(rawget(_G, "lacuna"), nil)
end)

t.test("it stands in package.loaded, once", function()
  t.equal(package.loaded.lacuna == lac, true)
  t.equal(require "lacuna" == lac, true)
end)

t.test("names, units and words are fields", function()
  t.equal(type(lac.case), "function")
  t.equal(type(lac.hill_radius), "function")
  t.equal(type(lac.au), "userdata")
  t.equal(lac.a_p, nil, "a synonym is no field")
  t.equal(lac[5], nil)
  t.equal(lac.nothing_such, nil)
end)

t.test("globals on demand, in an environment of one's own", function()
  local environment = lac.globals { print = print }
  local chunk = load("x = 5*au return case{distance = \"10 pc\", rim_radius = x}.rim_radius_angle:value \"mas\"", "=chunk", "t", environment)
  t.close(chunk(), 500, 1e-14)
  t.equal(rawget(environment, "x"):value "au", 5.0)
  t.raises(load("au = 3", "=chunk", "t", environment), "^chunk:1: au is a unit: its global can't be assigned to")
end)

t.test("coroutines", function()
  local c = lac.case { distance = "156 ± 3 pc", rim_radius = "0.3 au" }
  local function walk()
    for i = 1, 3 do coroutine.yield(lac.mean(c:with { rim_radius = i * lac.au }.rim_radius_angle):value "mas") end
  end
  local a, b = coroutine.wrap(walk), coroutine.wrap(walk)
  for _ = 1, 3 do t.equal(a(), b()) end
  t.raises(function()
    coroutine.wrap(function() return lac.case { distnace = 3 } end)()
  end, "unknown name 'distnace'")
end)

t.test("a user's row can't yield from within a computation, and says so", function()
  lac.quantity { name = "yielding", unit = "au", meaning = "invented" }
  lac.relation { gives = "yielding", by = "pause", from = { "rim_radius" }, function(r) coroutine.yield(r) return r end }
  local walk = coroutine.create(function() return lac.case { rim_radius = "0.3 ± 0.1 au" }.yielding:mean() end)
  local ok, message = coroutine.resume(walk)
  t.equal(ok, false)
  t.equal(message:find "yield" ~= nil, true, message)
end)

t.test("an error in a row goes through a parallel computation whole", function()
  lac.quantity { name = "failing", unit = "au", meaning = "invented" }
  local count, thrown = 0, { "an invented error object" }
  lac.relation { gives = "failing", by = "third", from = { "rim_radius" }, function(r)
    count = count + 1
    if count >= 3 then error(thrown) end
    return r
  end }
  local threads = lac.settings().threads
  lac.settings { draws = 1000000, threads = 4 }
  local c = lac.case { rim_radius = "0.3 ± 0.01 au", distance = "156 ± 3 pc" }
  local ok, message = pcall(function() return lac.mean(c.failing * c.rim_radius_angle) end)
  t.equal(ok, false)
  t.equal(message == thrown, true, "the very object that was thrown")
  count = -1000
  t.equal(lac.mean(c.failing / c.rim_radius):value(), 1.0, "the same value once more, with a row that works")
  lac.settings { draws = 10000, threads = threads }
end)

t.test("garbage is collected while rows run", function()
  lac.quantity { name = "littering", unit = "au", meaning = "invented" }
  lac.relation { gives = "littering", by = "rubbish", from = { "rim_radius", "distance" }, function(r, d)
    for _ = 1, 20 do local _ = r / d * lac.along("x", { 1, 2 }) end
    collectgarbage()
    return r
  end }
  lac.settings { draws = 200000 }
  local q = lac.case { rim_radius = "0.3 ± 0.01 au", distance = "156 ± 3 pc" }.littering
  t.close(q:median():value "au", 0.3, 1e-3)
  lac.settings { draws = 10000 }
end)

t.test("memory that Lua doesn't see is given back without a full collection by hand", function()
  local memory = lac.settings().memory
  collectgarbage()
  lac.settings { memory = 64 }
  local shape = lac.along("a", lac.sweep(1, 2, 1000):value()) * lac.along("b", lac.sweep(1, 2, 1000):value()) -- 8 MB
  for i = 1, 100 do t.equal((shape * i):at { a = 1, b = 1 } ~= nil, true) end
  for i = 1, 30 do t.equal(#(shape * i):value(), 1000) end
  lac.settings { memory = memory }
end)

t.test("the tables can't grow under a computation", function()
  lac.quantity { name = "growing", unit = "au", meaning = "invented" }
  lac.relation { gives = "growing", by = "more", from = { "rim_radius" }, function(r)
    for i = 1, 100 do lac.quantity { name = "grown_" .. i, unit = "au", meaning = "invented" } end
    return r
  end }
  for _, radius in ipairs { "1 au", "1 ± 0.1 au" } do
    t.raises(function() return lac.case { rim_radius = radius }.growing:mean() end, "quantity: nothing can be added while a relation of yours is computed")
  end
  lac.quantity { name = "grown", unit = "au", meaning = "invented" }
end)

t.test("a row that asks a case, its own even", function()
  lac.quantity { name = "asking", unit = "au", meaning = "invented" }
  local c
  lac.relation { gives = "asking", by = "back", from = { "rim_radius" }, function(r) return r + 0 * c.hill_radius end }
  lac.quantity { name = "endless", unit = "au", meaning = "invented" }
  lac.relation { gives = "endless", by = "round", from = { "rim_radius" }, function(r) return r + 0 * c.endless end }
  c = lac.case { rim_radius = "1 au", planet_semi_major_axis = "5 au", planet_star_mass_ratio = 1e-3 }
  t.equal(c.asking:value "au", 1.0)
  t.raises(function() return c.endless end, "overflow")
end)

t.test("the module opened once more", function()
  if not package.searchpath("lacuna", package.cpath) then return end -- the program has it built in
  local old = lac.case { distance = "156 ± 3 pc", rim_radius = "0.3 au" }
  package.loaded.lacuna = nil
  local new = require "lacuna"
  t.close(new.median(old.rim_radius_angle):value "mas", 300 / 156, 1e-3)
  t.equal((2 * lac.au + 1 * new.au):value(new.au), 3.0)
  t.close(new.case { distance = old.distance, rim_radius = "0.3 au" }.rim_radius_angle:median():value "mas", 300 / 156, 1e-3)
end)

t.test("closing a quantity by hand", function()
  local kept
  do
    local q <close> = lac.quantity "1 ± 0.1" * 2
    kept = q
    t.equal(#q:value(), 10000)
  end
  t.equal(pcall(tostring, kept), true, "used after it was closed: no crash")
end)

t.finish()
