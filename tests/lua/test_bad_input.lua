-- SPDX-License-Identifier: GPL-3.0-or-later
-- Bad input: each is answered by one line with the position of the user's own line, that says what, which value, what would be right.
-- Stars and instruments are invented.
local t = require "harness"
local lac = require "lacuna"

-- The line of this file on which the function is defined is where the mistake stands: the message must begin with it.
local function refused(action, wanted)
  local info = debug.getinfo(action, "S")
  local ok, message = pcall(action)
  if ok then error("nothing was refused; wanted: " .. wanted, 2) end
  if type(message) ~= "string" then error("the error is no text", 2) end
  local position = ("%s:%d: "):format(info.short_src, info.linedefined)
  if message:sub(1, #position) ~= position then error(("wrong position in %q; it stands at %s"):format(message, position), 2) end
  if message:find "\n" then error(("more than one line: %q"):format(message), 2) end
  if not message:find(wanted, 1, true) then error(("want %q in %q"):format(wanted, message), 2) end
end

local case = lac.case
local c = case { distance = "156 pc", rim_radius = "0.3 au", wavelength = "1.65 um", projected_baseline = "100 m" }
local nan, infinity = 0 / 0, math.huge

t.test("unknown names, with the nearest", function()
  refused(function() local _ = case { distnace = "156 pc" } end, "unknown name 'distnace'; did you mean distance?")
  refused(function() local _ = c.rim_radus end, "unknown name 'rim_radus'; did you mean rim_radius")
  refused(function() local _ = c.gap end, "unknown name 'gap'")
  refused(function() local _ = c.xqzzy end, "unknown name 'xqzzy'; help() lists the names")
  refused(function() local _ = c[5] end, "unknown name '5'")
  refused(function() local _ = case { "156 pc" } end, "a case wants name = value; got the value 156 pc without a name")
  refused(function() local _ = case { [true] = 1 } end, "a case wants name = value")
  refused(function() local _ = c:with { distanc = 3 } end, "unknown name 'distanc'; did you mean distance")
  refused(function() local _ = lac.rim_radius_angle { distnace = "3 pc" } end, "unknown name 'distnace'; did you mean distance")
  refused(function() local _ = case { a_p = "5 au" } end, "unknown name 'a_p'; it is called planet_semi_major_axis here")
end)

t.test("wrong dimensions", function()
  refused(function() local _ = case { gap_width = "3 K" } end, "gap_width wants a length (in au); got 3 K")
  refused(function() local _ = case { gap_width = 3 } end, "gap_width wants a length (in au); got 3")
  refused(function() local _ = case { viscosity_alpha = "3 K" } end, "viscosity_alpha wants a plain number; got 3 K")
  refused(function() local _ = case { distance = "3 ± 1 K" } end, "distance wants a length (in pc); got 3 ± 1 K")
  refused(function() local _ = case { distance = lac.sweep("1 K", "2 K", 3) } end, "distance wants a length (in pc); got 1 … 2 K, a sweep of 3 points")
  refused(function() local _ = lac.hill_radius { planet_semi_major_axis = 5 * lac.Msun, planet_mass = "1 Mjup", stellar_mass = "1 Msun" } end,
    "planet_semi_major_axis wants a length (in au); got 5 Msun")
  refused(function() local _ = 5 * lac.au + 3 * lac.K end, "can't add a length (5 au) and a temperature (3 K)")
end)

t.test("out of range", function()
  refused(function() local _ = case { distance = "-3 pc" } end, "distance must be > 0; got -3 pc")
  refused(function() local _ = case { distance = "0 pc" } end, "distance must be > 0; got 0 pc")
  refused(function() local _ = case { inclination = "95 deg" } end, "inclination must be 0 deg .. 90 deg; got 95 deg")
  refused(function() local _ = case { companion_eccentricity = 1.2 } end, "companion_eccentricity must be 0 .. < 1; got 1.2")
  refused(function() local _ = case { distance = "-3 ± 1 pc" } end, "distance must be > 0; got -3 ± 1 pc")
  refused(function() local _ = case { gap_width = "10 au", planet_semi_major_axis = "4 au" }.gap_inner_radius end,
    "gap_inner_radius is undefined: by definition, planet_semi_major_axis = 4 au and gap_width = 10 au give no value that is > 0")
end)

t.test("NaN and infinity", function()
  refused(function() local _ = case { viscosity_alpha = nan } end, "viscosity_alpha wants a finite number; got undefined")
  refused(function() local _ = case { viscosity_alpha = infinity } end, "viscosity_alpha wants a finite number; got infinite")
  refused(function() local _ = case { distance = infinity * lac.pc } end, "distance wants a finite number; got infinite pc")
  refused(function() local _ = case { distance = "nan pc" } end, "distance: \"nan pc\" wants finite numbers")
  refused(function() local _ = case { distance = "inf pc" } end, "distance: \"inf pc\" wants finite numbers")
  refused(function() local _ = case { distance = "1e999 pc" } end, "distance: \"1e999 pc\" wants finite numbers")
  refused(function() local _ = lac.spread.normal(nan, 1) end, "spread.normal wants finite numbers; got undefined")
  refused(function() local _ = lac.sweep(1, infinity, 3) end, "sweep wants finite numbers; got infinite")
  refused(function() local _ = lac.along("a", { 1, nan }) end, "along wants finite numbers; got undefined")
end)

t.test("malformed units and numbers", function()
  refused(function() local _ = case { distance = "3 parsecks" } end, "distance: unknown unit 'parsecks' in \"3 parsecks\"")
  refused(function() local _ = case { distance = "3 pc.." } end, "distance: ")
  refused(function() local _ = case { distance = "3..2 pc" } end, "distance: can't read \"3..2 pc\"")
  refused(function() local _ = case { distance = "three pc" } end, "distance: can't read \"three pc\"")
  refused(function() local _ = case { distance = "3 ± pc" } end, "distance: can't read \"3 ± pc\"")
  refused(function() local _ = case { distance = "3 ± -1 pc" } end, "distance: ")
  refused(function() local _ = case { distance = "" } end, "distance: can't read \"\"")
  refused(function() local _ = case { distance = "3\npc x" } end, "distance: ")
  refused(function() local _ = case { distance = ("9"):rep(5000) } end, "distance: ")
  refused(function() local _ = case { distance = {} } end, "distance wants a quantity; got a table")
  refused(function() local _ = case { distance = print } end, "distance wants a quantity; got a function")
  refused(function() local _ = case { distance = c } end, "distance wants a quantity; got ")
  refused(function() local _ = (5 * lac.au):value "parsecks" end, "value: unknown unit 'parsecks'")
  refused(function() local _ = lac.quantity(5, "kg.m**") end, "quantity: unknown unit 'kg.m**'")
  refused(function() local _ = case(5) end, "case wants a table of givens, like case{distance = \"156 pc\"}; got number")
  refused(function() local _ = lac.rim_radius(5) end, "rim_radius wants a table of givens; got number")
end)

t.test("contradictory givens", function()
  refused(function() local _ = case { wavelength = "1 um", frequency = "1e14 Hz" } end, "contradictory givens: ")
  refused(function() local _ = case { parallax = "10 mas", distance = "150 pc" } end, "contradictory givens: ")
  refused(function() local _ = c:with { rim_radius_angle = "5 mas" } end, "contradictory givens: ")
  local fine = case { parallax = "10 mas", distance = "100.3 pc" } -- within a per cent
  t.equal(fine.distance:value "pc", 100.3)
end)

t.test("nothing derivable", function()
  refused(function() local _ = case {}.rim_radius_angle end, "rim_radius_angle can't be derived from what is given; give ")
  refused(function() local _ = case { stellar_mass = "1 Msun" }.viscosity_alpha end, "viscosity_alpha must be given: no relation gives it")
  refused(function() local _ = lac.gap_width { planet_mass = "1 Mjup" } end, "gap_width can't be derived from what is given; give distance, stellar_mass, bolometric_flux, planet_semi_major_axis, viscosity_alpha (by kanagawa_2016)")
  refused(function() local _ = c:solve("distance", { gap_width = "3 au" }) end, "gap_width can't be derived from what is given")
end)

t.test("misused words", function()
  refused(function() local _ = c.rim_radius_angle < 3 end, "can't compare 1.923 mas with 3")
  refused(function() local _ = lac.quantity "3 ± 1 pc" < 3 * lac.pc end, "for ensembles and sweeps write above(a, b) or below(a, b)")
  refused(function() local _ = lac.settings { drows = 3 } end, "settings: unknown setting 'drows'")
  refused(function() c.distance = 3 end, "a case doesn't change")
  refused(function() local _ = (5 * lac.au).valeu end, "a quantity has no 'valeu'")
  refused(function() local environment = lac.globals {}; environment.au = 3 end, "au is a unit: its global can't be assigned to; choose another name, or write local au = ...")
end)

t.test("any nonsense at any door is an error, not a crash", function()
  math.randomseed(20151013)
  local nonsense = { nil, true, false, 0, -1, 1e308, nan, infinity, "", "x", "3 pc", "3 ± 1 pc", {}, { 1 }, { "x" }, { distance = 1 }, print, c, 5 * lac.au,
    lac.sweep { 1, 2 }, lac.quantity "1 ± 0.1", coroutine.create(print), io.stdout, c:missing "gap_width" }
  local count = 24
  local doors = { lac.case, lac.quantity, lac.relation, lac.mean, lac.median, lac.interval, lac.quantile, lac.chance, lac.undefined, lac.above, lac.both,
    lac.sqrt, lac.sin, lac.along, lac.sweep, lac.sweep.log, lac.spread.normal, lac.spread.samples, lac.spread.log_normal, lac.help, lac.recipes, lac.rim_radius,
    lac.least, c.with, c.using, c.why, c.missing, c.check, c.solve, c.sensitivity, lac.compare, (5 * lac.au).as, (5 * lac.au).value, (5 * lac.au).at, (5 * lac.au).axes, lac.show }
  local binary = { function(a, b) return a + b end, function(a, b) return a * b end, function(a, b) return a ^ b end, function(a, b) return a < b end,
    function(a, b) return a == b end, function(a, b) return a .. b end, function(a, b) return a[b] end, function(a, b) return c[a] end }
  for _, door in ipairs(binary) do doors[#doors + 1] = door end
  for _ = 1, 6000 do
    local door = doors[math.random(#doors)]
    local arguments = {}
    for i = 1, 3 do arguments[i] = nonsense[math.random(count)] end
    if math.random() < 0.4 then arguments[1] = math.random() < 0.5 and c or 5 * lac.au end
    local ok, message = pcall(door, arguments[1], arguments[2], arguments[3])
    if not ok and (type(message) ~= "string" or message:find "^lacuna%.%l+:%d+:") then
      local shown = {}
      for i = 1, 3 do shown[i] = tostring(arguments[i]) end
      local number = 0
      for i, one in ipairs(doors) do if one == door then number = i end end
      error(("an error of the binding's own: %s (door %d, arguments %s)"):format(tostring(message), number, table.concat(shown, ", ")))
    end
    if ok then pcall(tostring, message) end
  end
end)

t.finish()
