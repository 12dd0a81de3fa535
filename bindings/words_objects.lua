-- SPDX-License-Identifier: GPL-3.0-or-later
-- The words for objects: bands, materials, dust; and the lists of what is built in. words.lua says what the fields are.
local core = ...

local function shown(quantity, unit) return ("%g %s"):format(core.value(quantity, unit), unit) end

-- All that `at(i)` counts up, from 1.
local function each(at)
  return function(_, i)
    local made = at(i + 1)
    if made then return i + 1, made end
  end, nil, 0
end

local function zero_points_from(source) return "zero points: " .. core.part "lacuna.relations".source { source = source } end

local function band_line(band)
  return ("  %-18s %-9s %9s %9s %9s"):format(band.name, (core.band_facts(band)) or "", shown(band.wavelength, "um"), shown(band.width, "um"), shown(band.zero_point, "Jy"))
end

-- The built-in band of a name, or all, by the source of their zero points.
local function built_in_bands(name)
  local by_source, sources, lines = {}, {}, { "with wavelength, width and zero point:" }
  if name then
    local known, band = pcall(core.band_named, name)
    return known and { lines[1], band_line(band), zero_points_from((select(2, core.band_facts(band)))) } or nil
  end
  for _, band in each(core.band_at) do
    local _, source = core.band_facts(band)
    if not by_source[source] then by_source[source], sources[#sources + 1] = {}, source end
    table.insert(by_source[source], band_line(band))
  end
  for _, source in ipairs(sources) do
    for _, line in ipairs(by_source[source]) do lines[#lines + 1] = line end
    lines[#lines + 1] = "    " .. zero_points_from(source)
  end
  lines[#lines + 1] = "    widths from memory"
  return lines
end

-- The built-in material of a name, or all.
local function built_in_materials(name)
  local lines = {}
  for _, material in each(core.material_at) do
    local facts = core.material_facts(material)
    if not name or name == facts.name then
      lines[#lines + 1] = ("%s (%g g/cm3): %s"):format(facts.name, facts.density / 1000, facts.what)
      lines[#lines + 1] = "  holds for " .. facts.validity
      lines[#lines + 1] = "  " .. facts.source
    end
  end
  return #lines > 0 and lines or nil
end

local grains = 'grains = dust{materials = "soot", sizes = "1 um"}'
local h_band = 'b = band "H"'

-- A method of dust that takes a wavelength.
local function of_wavelength(record)
  record.of, record.subject, record.forms = "dust", "objects", { ("grains:%s(wavelength)"):format(record.name) }
  record.arguments = { { "wavelength", 'like "2.2 um"; also a spread or a sweep' } }
  record.errors = "a wavelength outside what the materials hold for, what is no length"
  record.examples = { { grains, ('grains:%s "2.2 um"'):format(record.name) } }
  return record
end

local function mean(record)
  record.of, record.subject, record.forms = "dust", "objects", { ("grains:%s(temperature)"):format(record.name) }
  record.arguments = { { "temperature", 'of the black body, like "1500 K"' } }
  record.result = "the opacity in cm² per gram of dust, and as a second result its relative error"
  record.errors = "a temperature whose black body shines outside 0.1 um to 1 cm"
  record.examples = { { grains, ('(grains:%s "1500 K")'):format(record.name) } }
  return record
end

local function band_field(record)
  record.of, record.field, record.subject, record.forms = "band", true, "objects", { "b." .. record.name }
  record.examples = { { h_band, "b." .. record.name } }
  return record
end

return {
  {
    name = "band", subject = "objects", forms = { 'band "H"', "band{wavelength = ..., zero_point = ..., width = ..., system = ..., name = ...}" },
    does = 'A spectral band: a built-in one by its name, or your own by its numbers. In a case the name does: band = "H".',
    arguments = {
      { "wavelength", 'effective wavelength, like "2.2 um"' }, { "width", "in wavelength; may be left out where no bandwidth is asked for" },
      { "zero_point", 'flux density of magnitude zero, like "640 Jy"; left out with system = "AB", where it is known' },
      { "system, name", "texts" },
    },
    result = "a band",
    errors = "an unknown band, a field that is missing, of another dimension, or no single number > 0",
    examples = { 'band("H"):flux("7 mag")', 'band{wavelength = "2.2 um", system = "AB"}' },
    answers = { "1.623 Jy", "AB (2.2 um)" },
    built_in = built_in_bands,
  },
  {
    name = "flux", of = "band", subject = "objects", forms = { "b:flux(magnitude)" }, does = "The flux density of a magnitude in the band.",
    arguments = { { "magnitude", 'like "7 mag"; also a spread or a sweep' } }, result = "a flux density", errors = "what is no magnitude",
    examples = { { h_band, 'b:flux "7 mag"' } },
    answers = { "1.623 Jy" },
  },
  {
    name = "magnitude", of = "band", subject = "objects", forms = { "b:magnitude(flux)" }, does = "The magnitude of a flux density in the band.",
    arguments = { { "flux", 'like "1.6 Jy"; also a spread or a sweep' } }, result = "a magnitude", errors = "what is no flux density, one that isn't > 0",
    examples = { { h_band, 'b:magnitude "1.6 Jy"' } },
    answers = { "7.015 mag" },
  },
  band_field { name = "name", does = "What the band is called.", result = "a text",
    answers = { "\"2MASS H\"" } },
  band_field { name = "system", does = "The system of the band's zero point.", result = "a text",
    answers = { "\"2MASS\"" } },
  band_field { name = "wavelength", does = "The band's effective wavelength.", result = "a length",
    answers = { "1.662 µm" } },
  band_field { name = "width", does = "The band's width in wavelength.", result = "a length, or nil where it isn't known",
    answers = { "0.251 µm" } },
  band_field { name = "zero_point", does = "The flux density of magnitude zero.", result = "a flux density",
    answers = { "1024 Jy" } },
  {
    name = "material", subject = "objects",
    forms = { 'material "soot"', 'material{name = ..., density = "3.3 g.cm**-3", wavelength_unit = "um", table = {{wavelength, n, k}, ...}}' },
    does = "A material of grains: a built-in analytic model by its name, or a table of your own. Between the rows n is linear and k geometric in the logarithm of the wavelength.",
    arguments = {
      { "name", "a text" }, { "density", "with unit" }, { "wavelength_unit", "um, nm, mm, cm or m" },
      { "table", "rows of wavelength, and the refractive index n + ik, two or more, rising in wavelength" },
    },
    result = "a material, for dust{...}",
    errors = "an unknown name, wavelengths that don't rise, a hole, n <= 0, k < 0, another unit",
    examples = { 'material{name = "glass", density = "2.5 g.cm**-3", wavelength_unit = "um", table = {{0.1, 1.5, 0}, {1e4, 1.5, 0}}}' },
    answers = { "glass" },
    built_in = built_in_materials,
  },
  {
    name = "about", of = "material", subject = "objects", forms = { "stuff:about()" }, does = "What a material is, what it holds for, and its source.",
    result = "a text",
    examples = { { 'stuff = material "soot"', "stuff:about()" } },
    answers = { "\"soot: propane soot, for amorphous carbon; 0.2 um to 3 mm; n and k to 12 % from 0.44 to 10 um (n at 5 um to 24 %), k to 30 % below; beyond 10 um an extrapolation, to a factor of 2, and 5 against other carbons; fitted to Dalzell & Sarofim 1969, J. Heat Transfer 91, 100\"" },
  },
  {
    name = "dust", subject = "objects", forms = { "dust{materials = ..., sizes = ..., mixing = ..., porosity = ..., temperature = ..., extrapolate = ...}" },
    does = 'A population of grains, to be given in a case. Then case{dust = grains, wavelength = "1.3 mm"}.dust_opacity is known. Opacities are per gram of dust, and interpolated to 0.3 %; a part of ' ..
      "the extinction below 0.1 % is not known that well, nor the resonances of transparent grains of one size.",
    arguments = {
      { "materials", "one material, or several by mass fraction: {name = fraction} or {{material, fraction}, ...}" },
      { "sizes", "radii: {smallest, largest, index} with n(a) as a^-index; {median, width} log-normal, width in ln a; or one size \"1 um\"" },
      { "mixing", '"bruggeman" if left out, or "maxwell_garnett", whose matrix is the first material' },
      { "porosity", "volume fraction of vacuum, 0 if left out" },
      { "temperature", "of the ice in it, for its far infrared" },
      { "extrapolate", "true: also where the materials don't hold, from 0.1 um to 1 cm, with a warning in why" },
    },
    result = "a dust",
    errors = "fractions that don't sum to 1, sizes reversed, an unknown material or field",
    examples = { 'dust{materials = {model_silicate = 0.7, soot = 0.3}, sizes = {smallest = "0.1 um", largest = "10 um", index = 3.5}}',
      { grains, 'case{dust = grains, wavelength = "10 um"}.dust_opacity' } },
    answers = { "dust of 70 % model_silicate, 30 % soot; 0.1 to 10 um, a^-3.5", "4468 cm² g⁻¹" },
    see = { "material" },
  },
  of_wavelength { name = "absorption", does = "The absorption opacity of the grains.", result = "an opacity in cm² per gram of dust",
    answers = { "6020 cm² g⁻¹" } },
  of_wavelength { name = "scattering", does = "The scattering opacity of the grains.", result = "an opacity in cm² per gram of dust",
    answers = { "5848 cm² g⁻¹" } },
  of_wavelength { name = "extinction", does = "The extinction opacity of the grains, absorption and scattering.", result = "an opacity in cm² per gram of dust",
    answers = { "11868 cm² g⁻¹" } },
  of_wavelength { name = "asymmetry", does = "The mean cosine of the scattering angle.", result = "a plain number",
    answers = { "0.7051" } },
  of_wavelength { name = "albedo", does = "The scattering opacity over the extinction opacity.", result = "a plain number",
    answers = { "0.4928" } },
  of_wavelength { name = "effective_albedo", does = "The albedo without what is scattered forwards.", result = "a plain number",
    answers = { "0.2227" } },
  mean { name = "planck_mean", does = "The Planck mean of the absorption opacity.",
    answers = { "6033 cm² g⁻¹" } },
  mean { name = "rosseland_mean", does = "The Rosseland mean of the opacity.",
    answers = { "10892 cm² g⁻¹" } },
  {
    name = "grain_temperature", of = "dust", subject = "objects",
    forms = { "grains:grain_temperature{grain_size = ..., heating_luminosity = ..., effective_temperature = ..., radius = ...}" },
    does = "The temperature of a grain of one size in the open. It follows from the balance of what the grain absorbs and sends out.",
    arguments = { { "grain_size, heating_luminosity, effective_temperature, radius", "with units, as in a case" } },
    result = "a temperature", errors = "a field that is missing or unknown; grains outside 0.001 um to 1 cm, temperatures outside 1 to 1e5 K",
    examples = { { grains, 'grains:grain_temperature{grain_size = "1 um", heating_luminosity = "18 Lsun", effective_temperature = "8800 K", radius = "1 au"}' } },
    answers = { "558.9 K" },
  },
  {
    name = "density", of = "dust", subject = "objects", forms = { "grains:density()" }, does = "The density of the grains, vacuum in them included.",
    result = "a density",
    examples = { { grains, "grains:density()" } },
    answers = { "1.8 g cm⁻³" },
  },
}
