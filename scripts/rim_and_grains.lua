-- SPDX-License-Identifier: GPL-3.0-or-later
-- How the rim's radius depends on the grains: small grains heat more than they cool and sublimate further out, large ones are grey.
-- The star is invented. Run it with: lacuna rim_and_grains.lua [FILE.csv]

local star = case { distance = "150 pc", stellar_luminosity = "30 Lsun", effective_temperature = "9000 K" }
local sizes = { 0.1, 0.2, 0.5, 1, 2, 5, 10, 20, 50 } -- um

-- Three materials; help "dust" lists them with their ranges of validity. The range of sizes is that of the sweep.
local grains = {}
for i, material in ipairs { "model_silicate", "soot", "iron" } do
  grains[i] = { name = material, dust = dust { materials = { [material] = 1 }, sizes = { smallest = "0.05 um", largest = "60 um", index = 3.5 } } }
end

local swept = {}
for i, size in ipairs(sizes) do swept[i] = size * um end
for _, one in ipairs(grains) do
  local c = star:with { dust = one.dust, grain_size = sweep(swept) }
  one.radius, one.efficiency = c.rim_radius:value "au", c.cooling_efficiency:value "1"
end

print "Rim radius in au, and cooling efficiency, against grain size (invented star of 30 Lsun, 9000 K)\n"
print(("%-10s"):format "size um" .. ("%24s%24s%24s"):format(grains[1].name, grains[2].name, grains[3].name))
for i, size in ipairs(sizes) do
  local line = ("%-10g"):format(size)
  for _, one in ipairs(grains) do line = line .. ("%14.3f (eps %.2f)"):format(one.radius[i], one.efficiency[i]) end
  print(line)
end
print("\nlarge grey grains: " .. tostring(star.rim_radius))
if arg and arg[1] then -- the same as a file of numbers
  local file = assert(io.open(arg[1], "w"))
  file:write "grain_size [um]"
  for _, one in ipairs(grains) do file:write((",%s rim_radius [au],%s cooling_efficiency"):format(one.name, one.name)) end
  file:write "\n"
  for i, size in ipairs(sizes) do
    file:write(size)
    for _, one in ipairs(grains) do file:write((",%.6g,%.6g"):format(one.radius[i], one.efficiency[i])) end
    file:write "\n"
  end
  file:close()
end

print("\nWhere the first row comes from:\n")
print(star:with { dust = grains[1].dust, grain_size = "0.1 um" }:why "rim_radius")
