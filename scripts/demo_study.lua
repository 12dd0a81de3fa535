-- SPDX-License-Identifier: GPL-3.0-or-later
-- Which sublimation rims, and which gaps of a given planet at 1, 5 and 30 au, can be resolved, with an array or with a mirror?
-- A study to start from: put your own stars into the CSV file and your own instruments here. Run it with: lacuna demo_study.lua
-- The stars, the array and the mirror are invented.

local gap = { "gap_size_angle", "gap_resolved_by_array", "gap_resolved_by_mirror" }

study {
  title = "Sublimation rims and planet-opened gaps in the H band (stars and instruments are invented)",

  -- One line a star: values, errors and units are named in the file's header. Blank means not known.
  targets = "demo_stars.csv",

  -- What holds for all of them. An error bar is a spread: "2 ± 0.5 Mjup".
  given = {
    band = "H", wavelength = "1.65 um", spectral_resolving_power = 300, -- one channel of the band: its own wavelength goes before the band's
    projected_baseline = "200 m", shortest_baseline = "15 m", element_diameter = "1.8 m", -- an invented array of six stations
    telescope_diameter = "8 m", inner_working_angle = "80 mas", -- an invented mirror
    planet_mass = "2 ± 0.5 Mjup",
    viscosity_alpha = spread.log_uniform(1e-4, 1e-2), -- nobody knows it better
  },

  -- What to ask for each star, and again for each variant. help() lists all names; help "gap_width" tells of one.
  ask = { "rim_radius", "rim_size_angle", "rim_resolved_by_array", "rim_resolved_by_mirror" },
  variants = {
    { name = "planet at 1 au", given = { planet_semi_major_axis = "1 au" }, ask = gap },
    { name = "planet at 5 au", given = { planet_semi_major_axis = "5 au" }, ask = gap },
    { name = "planet at 30 au", given = { planet_semi_major_axis = "30 au" }, ask = gap },
  },

  -- What to draw for the report. help "figure" tells what else can be drawn; a target is named by target = "Marrow 3", else it is the first.
  figures = {
    { show = "rim_size_angle", against = "stellar_luminosity", verdict = "rim_resolved_by_array", title = "Rims on the sky, and what two baselines resolve",
      lines = { { show = "array_resolution", label = "200 m" }, { show = "array_resolution", given = { projected_baseline = "100 m" }, label = "100 m" } } },
    { show = "rim_elements_by_array", along = { projected_baseline = sweep("20 m", "200 m", 40) }, title = "The rim of one star by baseline" },
    { variant = "planet at 5 au", show = "gap_resolved_by_array", title = "Which planets' gaps are resolved around one star",
      along = { planet_semi_major_axis = sweep.log("1 au", "40 au", 24), planet_mass = sweep.log("0.3 Mjup", "10 Mjup", 24) }, x = "planet_semi_major_axis" },
  },

  -- csv = "rims_and_gaps.csv",    -- the same as a file of numbers,
  -- latex = "rims_and_gaps.tex",  -- and as a table for the proposal
}
