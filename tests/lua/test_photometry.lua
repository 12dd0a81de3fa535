-- SPDX-License-Identifier: GPL-3.0-or-later
-- Bands in Lua: by name and of one's own, in cases and by themselves, with error bars and sweeps; and what is said of bad input. Values
-- are checked by tests/test_photometry.c and the reference tables.
package.path = "tests/lua/?.lua;" .. package.path
local t = require "harness"
local lac = require "lacuna"

-- An error is one line, names this file's line, and says what would be right.
local function complains(action, message)
  local got = t.raises(action, message)
  t.equal(got:find "\n", nil, "one line")
  t.equal(got:find "test_photometry.lua:%d+: " ~= nil, true, got)
end

t.test("a band has its numbers", function()
  local h = lac.band "H"
  t.equal(tostring(h), "2MASS H (1.662 um)")
  t.equal(h.name, "2MASS H")
  t.equal(h.system, "2MASS")
  t.close(h.wavelength:value "um", 1.662, 1e-15)
  t.close(h.zero_point:value "Jy", 1024, 1e-15)
  t.close(h.width:value "um", 0.251, 1e-15)
  t.equal(tostring(lac.band "2MASS Ks"), tostring(lac.band "K"))
  t.equal(tostring(lac.band(h)), tostring(h))
  local own = lac.band { name = "narrow", wavelength = "2.166 um", width = "20 nm", zero_point = "650 Jy" }
  t.equal(tostring(own), "narrow (2.166 um)")
  t.close(own.width:value "um", 0.02, 1e-15)
  local ab = lac.band { wavelength = "0.9 um", system = "AB" }
  t.equal(tostring(ab), "AB (0.9 um)")
  t.equal(ab.width, nil)
  t.close(ab:magnitude("1 Jy"):value "mag", 8.9, 1e-14) -- Oke & Gunn 1983: -48.60 in erg s^-1 cm^-2 Hz^-1
  t.raises(function() h.name = "J" end, "index")
end)

t.test("magnitudes and flux densities, single, swept and with error bars", function()
  local k = lac.band "K"
  t.close(k:flux("5 mag"):value "Jy", 6.667, 1e-14)
  t.close(k:magnitude("1 Jy"):value "mag", 7.05982613781, 1e-12) -- 2.5 log10(666.7)
  local swept = k:flux(lac.sweep("0 mag", "10 mag", 3)):value "Jy"
  t.close(swept[1], 666.7, 1e-14)
  t.close(swept[3], 0.06667, 1e-13)
  local uncertain = k:flux "5 ± 0.1 mag"
  t.close(uncertain:median():value "Jy", 6.667, 0.01)
  t.close(k:magnitude(uncertain):deviation():value "mag", 0.1, 0.05)
  t.close(k:magnitude(k:flux "7.3 mag"):value "mag", 7.3, 1e-14)
end)

t.test("a band in a case gives its wavelength, bandwidth and zero point", function()
  local c = lac.case { band = "H", magnitude = "7 ± 0.05 mag", distance = "150 pc", stellar_radius = "2 Rsun", effective_temperature = "9000 K" }
  t.close(c.wavelength:value "um", 1.662, 1e-15)
  t.close(c.photon_flux:median():value "ph.s**-1.m**-2", c.flux_density:median():value "Jy" * 1.50919018e7 * 0.251 / 1.662, 1e-6)
  t.close(c.stellar_magnitude:value "mag", c.band:magnitude(c.stellar_flux_density):value "mag", 1e-15)
  local why = tostring(c:why "photon_flux")
  t.equal(why:find("band = 2MASS H (1.662 um)   given\n      zero point: Cohen, M., Wheaton, W. A., Megeath, S. T. 2003, AJ 126, 1090", 1, true) ~= nil, true)
  t.equal(why:find("= λ_b, b = 2MASS H (1.662 um)", 1, true) ~= nil, true)
  local own = c:with { band = lac.band { wavelength = "2.2 um", width = "0.1 um", zero_point = "640 Jy" } }
  t.close(own.zero_point_flux:value "Jy", 640, 1e-15)
  local swept = c:with { wavelength = lac.sweep("1 um", "2 um", 5) }
  t.equal(#swept.stellar_flux_density:value "Jy", 5)
  t.close(swept.zero_point_flux:value "Jy", 1024, 1e-15)
end)

t.test("a given wavelength goes before the band's, and does not contradict it", function()
  local c = lac.case { band = "H", wavelength = "1.65 um" }
  t.close(c.wavelength:value "um", 1.65, 1e-15)
  t.equal(c:check().agree, true)
  t.equal(lac.case { band = "H", wavelength = "2.2 um" }:check().agree, false)
  t.close(lac.case { band = "H", frequency = "1e14 Hz" }.wavelength:value "um", 2.99792458, 1e-14)
end)

-- The radius follows from luminosity and temperature where these are known; colours are another recipe, and don't go before.
t.test("colours give the diameter independently", function()
  local star = { distance = "100 pc", v_magnitude = "7.2 mag", k_magnitude = "6.9 mag", visual_extinction = "0.2 mag" }
  local bare = lac.case(star)
  t.close(bare.stellar_radius:value "Rsun", (bare.stellar_angular_diameter * bare.distance / 2 / lac.rad):value "Rsun", 1e-14)
  star.effective_temperature, star.bolometric_flux = "8000 K", "4e-11 W.m**-2"
  local both = lac.case(star)
  t.close(both.stellar_radius:value "Rsun", lac.stellar_radius { distance = "100 pc", effective_temperature = "8000 K", bolometric_flux = "4e-11 W.m**-2" }:value "Rsun", 1e-15)
  t.equal(tostring(lac.recipes("stellar_angular_diameter", both)):find("kervella_2004_v_k", 1, true) ~= nil, true)
  star.bolometric_flux = nil
  t.equal(tostring(lac.case(star):why "stellar_luminosity"):find("near-infrared excess of a disc", 1, true) ~= nil, true)
end)

t.test("beyond its range the extinction is flagged", function()
  local why = tostring(lac.case { band = "L'", visual_extinction = "2 mag" }:why "extinction")
  t.equal(why:find("beware: cardelli_1989 holds for wavelength from 0.303 to 3.5 µm; 3.754 µm here", 1, true) ~= nil, true)
  t.equal(why:find("total_to_selective_extinction = 3.1   assumed", 1, true) ~= nil, true)
  t.equal(tostring(lac.case { band = "K", visual_extinction = "2 mag" }:why "extinction"):find "beware", nil)
end)

t.test("help lists the bands with their sources", function()
  local help = tostring(lac.help "band")
  for _, part in ipairs { "2MASS Ks", "MKO L'", "Johnson%-Cousins V", "CIT N", "Tokunaga, A. T., Vacca, W. D. 2005", "1024 Jy", "spectral band of observation" } do
    t.equal(help:find(part) ~= nil, true, part)
  end
end)

t.test("bad input gets one clear line", function()
  local case, band = lac.case, lac.band
  complains(function() local _ = case { magnitude = "7 mag" }.flux_density end, "flux_density can't be derived from what is given; give band")
  complains(function() local _ = case { band = "Hs" } end, 'unknown band "Hs"; nearest are "2MASS H", .*; help "band" lists them')
  complains(function() local _ = band "2mass h" end, 'unknown band "2mass h"; nearest are "2MASS H"')
  complains(function() local _ = case { band = "AB" } end, 'AB is a system of many bands: write band{wavelength = ..., system = "AB"}')
  complains(function() local _ = case { band = 7 } end, "band wants what band{...} makes, or the name of one; got 7")
  complains(function() local _ = case { visual_extinction = "-1 mag" } end, "visual_extinction must be >= 0; got %-1 mag")
  complains(function() local _ = case { visual_extinction = 1 } end, "visual_extinction wants a magnitude %(in mag%); got 1")
  complains(function() local _ = case { zero_point_flux = "640 W" } end, "zero_point_flux wants a flux density")
  complains(function() local _ = case { wavelength = "0.2 um", visual_extinction = "1 mag" }.extinction end, "extinction is undefined: by cardelli_1989, wavelength = 0.2 µm")
  complains(function() local _ = case { band = band { wavelength = "0.9 um", system = "AB" } }.bandwidth end, "bandwidth is undefined: by of_band, band = AB %(0.9 um%) gives no value")
  complains(function() local _ = band "H":flux(7) end, "band:flux wants a magnitude; got 7")
  complains(function() local _ = band "H":magnitude "7 mag" end, "band:magnitude wants a flux density; got 7 mag")
  complains(function() local _ = band "H":magnitude "-1 Jy" end, "band:magnitude is undefined for %-1 Jy")
  complains(function() local _ = band "H".widht end, 'a band has no "widht"; it has name')
  complains(function() local _ = band {} end, "band wants its wavelength")
  complains(function() local _ = band { wavelength = "2 um" } end, 'band wants its zero_point, like "640 Jy", or system = "AB"')
  complains(function() local _ = band { wavelength = "2 um", system = "AB", zero_point = "600 Jy" } end, "the system AB has its own zero point")
  complains(function() local _ = band { wavelength = "2 Jy" } end, "band: wavelength wants a length; got 2 Jy")
  complains(function() local _ = band { wavelength = "-2 um" } end, "band: wavelength wants a number > 0; got %-2 µm")
  complains(function() local _ = band { wavelength = lac.sweep("1 um", "2 um", 3) } end, "band: wavelength wants one number, no spread and no sweep")
  complains(function() local _ = band { wavelength = "2 ± 0.1 um" } end, "band: wavelength wants one number")
  complains(function() local _ = band { wavelength = "2 um", zeropoint = "600 Jy" } end, 'band: unknown field "zeropoint"; it has name')
  complains(function() local _ = band { wavelength = "2 um", name = 5, zero_point = "600 Jy" } end, "band: name wants a text; got 5")
  complains(function() local _ = band(7) end, "band wants a name like")
end)

t.finish()
