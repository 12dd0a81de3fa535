-- SPDX-License-Identifier: GPL-3.0-or-later
-- c:sensitivity with ten givens and ten thousand draws, of a number and of a verdict, its page included: required beside measured.
-- Stars and instruments are invented.
local lac = require "lacuna"

local REQUIRED, TIMES = 0.3, 3 -- seconds of processor time; the best of so many

local function givens()
  return { distance = "156 ± 3 pc", bolometric_flux = "2.4e-11 ± 0.2e-11 W.m**-2", stellar_mass = "1.9 ± 0.1 Msun", wavelength = "1.65 ± 0.01 um",
    projected_baseline = "92 ± 1 m", planet_mass = "2 ± 0.5 Mjup", planet_semi_major_axis = "5 ± 0.5 au",
    viscosity_alpha = lac.spread.log_uniform(1e-4, 1e-2), shortest_baseline = "10 ± 0.1 m", mean_molecular_weight = "2.3 ± 0.1" }
end

local short = false
for _, name in ipairs { "gap_width_angle", "gap_resolved_by_array" } do
  local best = math.huge
  for _ = 1, TIMES do
    local c = lac.case(givens())
    local start = os.clock()
    local page = tostring(c:sensitivity(name))
    best = math.min(best, os.clock() - start)
    assert(#page > 0)
  end
  short = short or not (best <= REQUIRED)
  print(("%-24s required %.2f s, measured %.3f s%s"):format(name, REQUIRED, best, best <= REQUIRED and "" or "  SHORT"))
end
os.exit(not short, true)
