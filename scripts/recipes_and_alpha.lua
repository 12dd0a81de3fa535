-- SPDX-License-Identifier: GPL-3.0-or-later
-- How much does the answer depend on the recipe, and how much on alpha, which nobody knows? To start from.
-- Run it with: lacuna recipes_and_alpha.lua. The star and the instruments are invented.

local star = case {
  distance = "140 ± 2 pc", bolometric_flux = "3.9e-12 ± 0.3e-12 W.m**-2", effective_temperature = "4700 ± 120 K", stellar_mass = "1.3 ± 0.1 Msun",
  planet_mass = "1 Mjup", planet_semi_major_axis = "10 au", viscosity_alpha = spread.log_uniform(1e-4, 1e-2),
  wavelength = "1.65 um", telescope_diameter = "8 m", inner_working_angle = "60 mas",
}

local function share(verdict) return ("%.0f %%"):format(100 * chance(verdict):value()) end

-- The gap over the published range of alpha. The error bars of the star stay in.
print "alpha    gap width          on the sky          resolved by the mirror"
for _, alpha in ipairs { 1e-4, 3e-4, 1e-3, 3e-3, 1e-2 } do
  local c = star:with { viscosity_alpha = alpha }
  print(("%-7g  %-18s  %-19s  %s of draws"):format(alpha, tostring(c.gap_width), tostring(c.gap_size_angle), share(c.gap_resolved_by_mirror)))
end
print("all of the range, log-uniform:                 " .. share(star.gap_resolved_by_mirror) .. " of draws")

-- The same as one sweep: a quantity with an axis of its own, with the draws beside it.
print "\nDepth of the gap (surface density left) along alpha:"
print(star:with { viscosity_alpha = sweep.log(1e-4, 1e-2, 5) }.gap_depth)

-- The recipes for one quantity stand side by side.
print "\nGap depth by recipe, alpha = 1e-3:"
local at_one_alpha = star:with { viscosity_alpha = 1e-3 }
for _, by in ipairs { "kanagawa_2015", "yun_2019", "fung_2014", "duffell_2013" } do
  print(("  %-14s"):format(by), at_one_alpha:using { gap_depth = by }.gap_depth)
end

print "\nThe verdict by criterion of resolution and by recipe for the temperature, alpha = 1e-3:"
for _, resolution in ipairs { "fwhm", "rayleigh" } do
  for _, temperature in ipairs { "dullemond_2018", "chiang_goldreich_1997" } do
    local c = at_one_alpha:using { mirror_resolution = resolution, planet_midplane_temperature = temperature }
    print(("  %-9s %-22s %s of draws"):format(resolution, temperature, share(c.gap_resolved_by_mirror)))
  end
end
