-- SPDX-License-Identifier: GPL-3.0-or-later
-- Which stars are bright enough in the H band for an instrument with a stated limit, without and with extinction? Star and rim are counted;
-- a star counts as bright enough where 90 % of the draws are. The stars and the limit are invented. Run it with: lacuna bright_enough.lua [FILE.csv]
local limit, band_name = quantity "7.5 mag", "H"

local answer = study {
  title = "Brightness in the " .. band_name .. " band (stars and limit are invented)",
  targets = "demo_stars.csv",
  given = { band = band_name, inclination = "45 deg", rim_height_ratio = 0.1 },
  variants = {
    { name = "no extinction", given = { visual_extinction = "0 mag" }, ask = { "observed_magnitude", "stellar_flux_fraction" } },
    { name = "A_V = 3 mag", given = { visual_extinction = "3 mag" }, ask = { "observed_magnitude" } },
  },
  csv = arg and arg[1], -- the same as a file of numbers
}

print("\nBrighter than " .. tostring(limit) .. "?\n")
print(("%-12s %16s %16s"):format("", "no extinction", "A_V = 3 mag"))
for _, row in ipairs(answer.rows) do
  local shown = {}
  for i, name in ipairs { "no extinction", "A_V = 3 mag" } do
    local star = row.variants[name]
    local known, magnitude = pcall(function() return star.observed_magnitude end)
    if known then
      local share = chance(below(magnitude, limit)):value "1"
      shown[i] = (share >= 0.9 and "yes" or share <= 0.1 and "no" or "perhaps") .. (" (%.0f %%)"):format(100 * share)
    else
      shown[i] = "not known"
    end
  end
  print(("%-12s %16s %16s"):format(row.name, shown[1], shown[2]))
end
