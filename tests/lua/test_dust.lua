-- SPDX-License-Identifier: GPL-3.0-or-later
-- Dust in Lua: what can be made, asked and chained, and what is refused.
local t = require "harness"
local lac = require "lacuna"
local dust, material, case = lac.dust, lac.material, lac.case

local function refused(action, wanted)
  local ok, message = pcall(action)
  if ok then error("nothing was refused; wanted: " .. wanted, 2) end
  message = tostring(message)
  if message:find "\n" then error(("more than one line: %q"):format(message), 2) end
  if not message:find("test_dust.lua", 1, true) then error(("no position in %q"):format(message), 2) end
  if not message:find(wanted, 1, true) then error(("want %q in %q"):format(wanted, message), 2) end
end

local small = { smallest = "0.005 um", largest = "0.25 um", index = 3.5 }
local silicate = dust { materials = "model_silicate", sizes = small }
local grains = dust { materials = "model_silicate", sizes = "1.3 um" }

-- tests/reference/opacity_check.csv: an independent Mie code; the table's 0.3 %.
t.test("opacities", function()
  t.close(silicate:absorption("9.7 um"):value "cm**2.g**-1", 2770.84721, 3e-3)
  t.close(silicate:scattering("1.65 um"):value "cm**2.g**-1", 511.687369, 3e-3)
  t.close(silicate:asymmetry("1.65 um"):value(), 0.124986, 3e-2)
  t.close(silicate:extinction("1.65 um"):value "cm**2.g**-1", 511.687369 + 520.654452, 3e-3)
  t.close(silicate:albedo("1.65 um"):value(), 511.687369 / (511.687369 + 520.654452), 3e-3)
  local swept = silicate:absorption(lac.sweep { "0.55 um", "1.65 um" }):value "cm**2.g**-1"
  t.close(swept[1], 2514.74927, 3e-3)
  t.close(swept[2], 520.654452, 3e-3)
  t.equal(#silicate:absorption("9.7 ± 0.1 um"):axes(), 1)
end)

t.test("in a case", function()
  t.close(case { dust = silicate, wavelength = "9.7 um" }.dust_opacity:value "cm**2.g**-1", 2770.84721, 3e-3)
  local c = case { dust = silicate, wavelength = lac.sweep.log("1 um", "100 um", 7) }
  t.equal(#c.dust_opacity:value "cm**2.g**-1", 7)
  t.equal(tostring(silicate), "dust of model_silicate; 0.005 to 0.25 um, a^-3.5")
end)

-- opacity_check.csv, part 1, of the same Mie code; the table's 0.3 %.
t.test("the rim follows from the grains", function()
  local c = case { dust = grains, grain_size = "1.3 um", heating_luminosity = "20 Lsun", effective_temperature = "8000 K" }
  t.close(c.cooling_efficiency:value(), 0.548712, 3e-3)
  local why = tostring(c:why "sublimation_radius")
  for _, wanted in ipairs { "of_grains", "monnier_2002", "absorption_efficiency_ratio" } do
    if not why:find(wanted, 1, true) then error(("no %s in %s"):format(wanted, why)) end
  end
  local swept = c:with { grain_size = lac.sweep { "0.1 um", "10 um" } }.cooling_efficiency:value()
  t.close(swept[1], 0.09943629, 3e-3) -- eps_clip there: below 0.2 um of wavelength the index is held
  t.close(swept[2], 1.063113, 3e-3)
end)

t.test("the density at the rim is solved together with its temperature and radius", function()
  local c = case { dust = grains, grain_size = "1.3 um", heating_luminosity = "20 Lsun", effective_temperature = "8000 K", stellar_mass = "2 Msun",
    disc_mass = "0.05 Msun", characteristic_radius = "60 au", surface_density_index = 1 }
  local why = tostring(c:why "sublimation_radius")
  for _, wanted in ipairs { "solved_at_the_rim", "isella_natta_2005" } do
    if not why:find(wanted, 1, true) then error(("no %s in %s"):format(wanted, why)) end
  end
  -- The self-similar disc at the radius that the chain gives, with a scale height for the chain's temperature, has the chain's density.
  local temperature = c.sublimation_temperature
  local d = c:with { radius = c.sublimation_radius, midplane_temperature = temperature }
  t.close(d.gas_density:value "g.cm**-3", c.rim_gas_density:value "g.cm**-3", 1e-9)
end)

t.test("means and a grain in the open", function()
  local mean, err = silicate:planck_mean "300 K"
  local opacities = silicate:absorption(lac.sweep.log("1 um", "1000 um", 100)):value "cm**2.g**-1"
  t.equal(mean:value "cm**2.g**-1" < math.max(table.unpack(opacities)) and mean:value "cm**2.g**-1" > math.min(table.unpack(opacities)), true, "a mean")
  t.equal(err < 0.01, true)
  local rosseland = silicate:rosseland_mean "300 K"
  t.equal(rosseland:value "cm**2.g**-1" < mean:value "cm**2.g**-1", true, "a harmonic mean is the lesser")
  -- A large sphere of an index near 1 that absorbs is black: 278.3 K at 1 au from the Sun (textbook value), up to diffraction at its edge.
  local black = material { name = "black", density = "1 g.cm**-3", wavelength_unit = "um", table = { { 0.1, 1.05, 0.05 }, { 10000, 1.05, 0.05 } } }
  local warm = dust { materials = black, sizes = "1 mm" }:grain_temperature { grain_size = "1 mm", heating_luminosity = "1 Lsun",
    effective_temperature = "5772 K", radius = "1 au" }
  t.close(warm:value "K", 278.3, 1e-2)
end)

t.test("beyond the materials' wavelengths", function()
  refused(function() local _ = silicate:absorption "0.15 um" end, "extrapolate = true")
  refused(function() local _ = case { dust = silicate, wavelength = "5 mm" }.dust_opacity end, "hold for wavelengths from 0.2 to 3000 um")
  local far = dust { materials = "model_silicate", sizes = small, extrapolate = true }
  local c = case { dust = far, wavelength = "5 mm" }
  t.equal(c.dust_opacity:value "cm**2.g**-1" > 0, true)
  if not tostring(c:why "dust_opacity"):find("beware: extrapolated: the dust's materials hold", 1, true) then error "no warning in why" end
end)

t.test("materials of a user's", function()
  local mine = material { name = "mine", density = "3 g.cm**-3", wavelength_unit = "um", table = { { 0.1, 1.7, 0.03 }, { 10000, 1.7, 0.03 } } }
  local d = dust { materials = { { mine, 0.5 }, { "soot", 0.5 } }, sizes = "0.1 um", mixing = "maxwell_garnett" }
  t.equal(d:absorption("2 um"):value "cm**2.g**-1" > 0, true)
  t.equal(tostring(mine), "mine")
  local function with(rows, unit) return function() material { name = "bad", density = "3 g.cm**-3", wavelength_unit = unit or "um", table = rows } end end
  refused(with { { 1, 1.7, 0.1 }, { 2, 1.7 } }, "row 2 has no k: a hole in the table")
  refused(with { { 1, 1.7, 0.1 }, [3] = { 2, 1.7, 0.1 } }, "wants a table of two or more rows")
  refused(with { { 1, 1.7, 0.1 }, { 2, 1.7, 0.1 }, nil, { 3, 1.7, 0.1 } }, "row 3 has no wavelength: a hole in the table")
  refused(with { { 2, 1.7, 0.1 }, { 1, 1.7, 0.1 } }, "row 2: wavelength 1 follows 2; they must rise")
  refused(with { { 1, 1.7, -0.1 }, { 2, 1.7, 0.1 } }, "row 1: k = -0.1 must be >= 0")
  refused(with { { 1, 0, 0.1 }, { 2, 1.7, 0.1 } }, "row 1: n = 0 must be > 0")
  refused(with({ { 1, 1.7, 0.1 }, { 2, 1.7, 0.1 } }, "parsec"), "wavelength_unit must be one of um, nm, mm, cm, m")
  refused(with({ { 0.3, 1.7, 0.1 }, { 20, 1.7, 0.1 } }, "m"), "is the unit right?")
  refused(function() material { name = "bad", density = "3 um", wavelength_unit = "um", table = {} } end, "density wants")
end)

t.test("bad dust", function()
  local sizes = small
  refused(function() dust { materials = { model_silicate = 0.5, soot = 0.4 }, sizes = sizes } end, "mass fractions must sum to 1; they sum to 0.9")
  refused(function() dust { materials = { model_silicat = 1 }, sizes = sizes } end, "unknown material 'model_silicat'; did you mean model_silicate?")
  refused(function() dust { materials = "soot", sizes = { smallest = "1 mm", largest = "1 um", index = 3.5 } } end, "the smallest, 1 mm, must be below the largest, 1 um")
  refused(function() dust { materials = "soot", sizes = { smallest = "1 um", largest = "1 mm" } } end, "smallest, largest and index")
  refused(function() dust { materials = "soot", sizes = "1 K" } end, "dust: sizes wants a length")
  refused(function() dust { materials = "soot" } end, "dust wants sizes")
  refused(function() dust { materials = "soot", sizes = sizes, porosity = 1 } end, "porosity must be from 0 to below 1")
  refused(function() dust { materials = "soot", sizes = sizes, mixing = "linear" } end, "mixing is \"bruggeman\" or \"maxwell_garnett\"")
  refused(function() dust { materials = { soot = 0.5, iron = 0.5 }, sizes = sizes, mixing = "maxwell_garnett" } end, "give them in order")
  refused(function() dust { materials = "soot", sizes = sizes, colour = 1 } end, "unknown field 'colour'")
  refused(function() dust { materials = "water_ice", sizes = sizes, temperature = "400 K" } end, "from 20 to 273 K")
  refused(function() local _ = silicate.opacty end, "dust has no 'opacty'; it has absorption")
  refused(function() silicate:absorption "3 K" end, "wants a wavelength")
  refused(function() case { dust = "soot" } end, "dust wants what dust{...} makes")
end)

t.test("help tells of materials", function()
  for _, word in ipairs { "dust", "material", "model_silicate", "water_ice", "iron", "soot", "silica_glass" } do
    if #tostring(lac.help(word)) < 100 then error("no help for " .. word) end
  end
end)

t.finish()
