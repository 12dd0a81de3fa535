-- SPDX-License-Identifier: GPL-3.0-or-later
-- The spectral energy distribution of an invented star with a disc from which a planet has taken out a gap: star, rim and disc apart,
-- with error bars from the star's, and magnitudes in some bands. Run it with: lacuna sed_with_gap.lua [FILE.csv]

local grains = dust { materials = { model_silicate = 0.7, soot = 0.3 }, mixing = "bruggeman", porosity = 0.25,
  sizes = { smallest = "0.01 um", largest = "1 mm", index = 3.5 } }

local c = case {
  distance = "150 ± 4 pc", stellar_luminosity = "20 ± 3 Lsun", effective_temperature = "8800 ± 200 K", stellar_mass = "2 Msun",
  inclination = "35 deg", rim_height_ratio = 0.1, visual_extinction = "0.4 mag",
  dust = grains, dust_surface_density_at_one_au = "0.3 g.cm**-2", dust_surface_density_index = 1, disc_outer_radius = "120 au",
  planet_mass = "3 Mjup", planet_semi_major_axis = "20 au", viscosity_alpha = 1e-3,
}

local wavelengths = { 0.55, 1.25, 1.65, 2.2, 3.5, 4.8, 10, 20, 60, 100, 350, 870, 1300 } -- um
local swept = {}
for i, l in ipairs(wavelengths) do swept[i] = l * um end
local sed = c:with { wavelength = sweep(swept) }:using { disc_flux_density = "chiang_goldreich_1997_with_gap" }

local asked = { "stellar_flux_density", "rim_flux_density", "disc_flux_density", "observed_flux_density" }
local medians, low, high = {}, {}, {}
for _, name in ipairs(asked) do
  medians[name] = sed[name]:median():value "Jy"
  local a, b = interval(sed[name])
  low[name], high[name] = a:value "Jy", b:value "Jy"
end

print "Flux densities in Jy of an invented star with a gapped disc (medians; the last with its central 68 %)\n"
print(("%10s %12s %12s %12s %12s"):format("um", "star", "rim", "disc", "as observed"))
for i, l in ipairs(wavelengths) do
  local line = ("%10g"):format(l)
  for _, name in ipairs(asked) do line = line .. (" %12.3g"):format(medians[name][i]) end
  print(line .. ("   %.3g to %.3g"):format(low.observed_flux_density[i], high.observed_flux_density[i]))
end

print "\nMagnitudes as observed, and the star's share of the light\n"
for _, name in ipairs { "J", "H", "Ks", "L'", "N" } do
  local b = c:with { band = name }:using { disc_flux_density = "chiang_goldreich_1997_with_gap" }
  print(("%-4s %-22s %s"):format(name, tostring(b.observed_magnitude), tostring(b.stellar_flux_fraction)))
end
print("\nnear-infrared excess: " .. tostring(c.near_infrared_excess))

if arg and arg[1] then -- the same as a file of numbers
  local file = assert(io.open(arg[1], "w"))
  file:write("wavelength [um]," .. table.concat(asked, " [Jy],") .. " [Jy]\n")
  for i, l in ipairs(wavelengths) do
    local cells = { l }
    for _, name in ipairs(asked) do cells[#cells + 1] = medians[name][i] end
    file:write(table.concat(cells, ","), "\n")
  end
  file:close()
end
