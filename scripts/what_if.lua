-- SPDX-License-Identifier: GPL-3.0-or-later
-- One star, one planet: is its gap resolved, why, and what would change that? A what-if to start from. Run it with: lacuna what_if.lua
-- The star and the array are invented.

local star = case {
  distance = "156 ± 3 pc", bolometric_flux = "2.4e-11 ± 0.2e-11 W.m**-2", stellar_mass = "1.9 ± 0.1 Msun",
  planet_mass = "2 ± 0.5 Mjup", planet_semi_major_axis = "5 au", viscosity_alpha = spread.log_uniform(1e-4, 1e-2),
  wavelength = "1.65 um", spectral_resolving_power = 300,
  projected_baseline = "200 m", shortest_baseline = "15 m", element_diameter = "1.8 m",
}

local function say(what, answer) print(("%-38s %s"):format(what, tostring(answer))) end

say("rim radius", star.rim_radius)
say("rim diameter on the sky", star.rim_size_angle)
say("gap width", star.gap_width)
say("gap width on the sky", star.gap_size_angle)
say("rim resolved by the array?", star.rim_resolved_by_array)
say("gap resolved by the array?", star.gap_resolved_by_array)

-- A what-if is the same case with other givens; several stand side by side, what differs from the case as it is marked.
print ""
print(compare(star, {
  { name = "8 m shortest", shortest_baseline = "8 m" },
  { name = "planet at 2 au", planet_semi_major_axis = "2 au" },
  { name = "two elements", elements_required = 2 },
}, { "gap_size_angle", "gap_resolved_by_array", "rim_resolved_by_array" }))

-- What carries the error bar, how the answer follows each given, and what alone would turn the verdict.
print ""
print(star:sensitivity "gap_size_angle")
print ""
print(star:sensitivity "gap_resolved_by_array")

-- A sweep asks for many values at once.
print "\nRim diameter in elements of the array, by projected baseline:"
print(star:with { projected_baseline = sweep("50 m", "300 m", 6) }.rim_elements_by_array)

-- Which baseline puts two elements across the rim (in the median), and which resolves it in 90 % of the draws?
print ""
say("two elements across the rim from", median(star:solve("projected_baseline", { rim_elements_by_array = 2 })))
say("rim resolved in 90 % of draws from", star:solve("projected_baseline", { rim_resolved_by_array = 0.9 }))

-- What can't be had is said with what is missing.
print ""
print(star:missing "rim_squared_visibility")

-- The derivation, with papers and assumptions, is one word away.
print ""
print(star:why "rim_size_angle")
