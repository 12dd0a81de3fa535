-- SPDX-License-Identifier: GPL-3.0-or-later
-- How many targets a second a study works out, beside the same put to one case after the other in a plain loop. Both run as a user runs them,
-- on all cores, with the same targets and draws, and both print medians, errors and shares, and what the other recipes would give of them. The
-- loop that leaves the other recipes out is measured too, for comparison: it answers less. Runs alternate, and the best of each counts: the rest
-- is noise. The stars are invented.
local TARGETS, ROUNDS = 300, 5
local LEAST_RATIO = 1.5   -- targets a second of the study, times those of the loop
local MOST_MEMORY = 100   -- MB for 500 targets by 10 000 draws by ten questions, of all processes together
local lacuna = assert(os.getenv "LACUNA", "LACUNA = the program")

local common = [[
local asks = { "rim_radius", "rim_size_angle", "rim_resolved_by_array", "rim_resolved_by_mirror", "gap_width", "gap_size_angle",
  "gap_resolved_by_array", "gap_resolved_by_mirror", "hill_radius", "gap_depth" }
local given = {
  wavelength = "1.65 um", spectral_resolving_power = 300, projected_baseline = "200 m", shortest_baseline = "15 m", element_diameter = "1.8 m",
  telescope_diameter = "8 m", planet_mass = "2 ± 0.5 Mjup", planet_semi_major_axis = "5 au", viscosity_alpha = spread.log_uniform(1e-4, 1e-2),
}
local targets = {}
for i = 1, tonumber(arg[1]) do
  targets[i] = { name = "star " .. i, distance = 100 + i % 200 .. " ± 3 pc", bolometric_flux = 1e-12 * (1 + i % 7) .. " ± 1e-13 W.m**-2", stellar_mass = "1.5 ± 0.1 Msun" }
end
]]
local study = common .. "study { targets = targets, given = given, ask = asks }\n"
local loop = common .. [==[
local with_recipes = arg[2] == "recipes"
local other_recipes = {
  { "gap_depth", "yun_2019", { "gap_depth" } }, { "gap_depth", "fung_2014", { "gap_depth" } }, { "gap_depth", "duffell_2013", { "gap_depth" } },
  { "array_resolution", "fringe", { "rim_resolved_by_array", "gap_resolved_by_array" } },
  { "mirror_resolution", "rayleigh", { "rim_resolved_by_mirror", "gap_resolved_by_mirror" } },
}
local function answer(c, name)
  local value = c[name]
  if name:find "resolved" then return ("%.3g"):format(chance(value):value()) end
  local unit = name:find "angle" and mas or name:find "depth" and 1 or au
  local low, high = interval(value)
  local middle = median(value)
  return ("%.4g +%.2g -%.2g"):format((middle / unit):value(), ((high - middle) / unit):value(), ((middle - low) / unit):value())
end
for _, target in ipairs(targets) do
  local givens = {}
  for name, value in pairs(given) do givens[name] = value end
  for name, value in pairs(target) do if name ~= "name" then givens[name] = value end end
  local c, line = case(givens), { target.name }
  for _, name in ipairs(asks) do line[#line + 1] = answer(c, name) end
  for _, other in ipairs(with_recipes and other_recipes or {}) do
    local changed = c:using { [other[1]] = other[2] }
    for _, name in ipairs(other[3]) do line[#line + 1] = answer(changed, name) end
  end
  print(table.concat(line, "  "))
end
]==]

local function write(content)
  local path = os.tmpname()
  local file = assert(io.open(path, "w"))
  file:write(content)
  file:close()
  return path
end

-- One run: its seconds by the clock.
local function timed(command)
  local pipe = io.popen(("date +%%s.%%N; %s >/dev/null || echo failed; date +%%s.%%N"):format(command))
  local before, after = pipe:read("l", "l")
  pipe:close()
  return assert(tonumber(after), command .. " failed") - tonumber(before)
end

local short = false
local function row(what, sense, required, measured, unit)
  local good = sense == "at least" and measured >= required or sense == "at most" and measured <= required
  print(("%-66s %8s %6.1f %-6s %7.2f %s"):format(what, sense, required, unit, measured, good and "good" or "FALLS SHORT"))
  short = short or not good
end

local study_file, loop_file, folder = write(study), write(loop), os.tmpname()
local best = { study = math.huge, loop = math.huge, asks = math.huge }
for _ = 1, ROUNDS do
  for what, command in pairs { study = study_file .. " %d", loop = loop_file .. " %d recipes", asks = loop_file .. " %d" } do
    best[what] = math.min(best[what], timed(lacuna .. " " .. command:format(TARGETS)))
  end
end
os.remove(folder)
local pipe = io.popen(("%s --out %s %s 500 2>&1 >/dev/null"):format(lacuna, folder, study_file))
local memory = tonumber(pipe:read("a"):match ", (%d+) MB\n")
pipe:close()
os.execute("rm -r " .. folder)
os.remove(study_file)
os.remove(loop_file)
print(("%d targets, 10000 draws, ten questions: study %.0f targets a second, loop %.0f, loop without other recipes %.0f (%.2f times)"):format(TARGETS,
  TARGETS / best.study, TARGETS / best.loop, TARGETS / best.asks, best.asks / best.study))
row("targets a second, times a loop of case calls", "at least", LEAST_RATIO, best.loop / best.study, "times")
row("500 targets, 10000 draws, ten questions: memory, all processes", "at most", MOST_MEMORY, memory or math.huge, "MB")
os.exit(not short)
