-- SPDX-License-Identifier: GPL-3.0-or-later
-- An example of each name for help, made from the tables: a case of one plausible set of givens of its first recipe, and what comes out.
-- Only the values of what is given for most targets are written down here: of an invented star, its disc, planet and instruments, so that an
-- example has a sensible size. They are no recommendation. At the planet and the ring the plain name's value serves.
local core = ...
local case = core.part "lacuna.case"
local example = {}

local plausible = {
  parallax = "7.1 mas", distance = "140 pc", stellar_mass = "2 Msun", stellar_radius = "1.9 Rsun", effective_temperature = "8500 K",
  stellar_luminosity = "18 Lsun", catalogue_luminosity = "16 Lsun", catalogue_distance = "132 pc", mass_accretion_rate = "1e-8 Msun/yr",
  magnetospheric_radius = "9 Rsun", rotation_period = "3 d", heating_luminosity = "18 Lsun", accretion_luminosity = "0.3 Lsun",
  visual_extinction = "0.5 mag", total_to_selective_extinction = 3.1, b_magnitude = "8.3 mag", v_magnitude = "8.1 mag", j_magnitude = "7.5 mag",
  h_magnitude = "7 mag", k_magnitude = "6.4 mag", l_magnitude = "5.4 mag", magnitude = "7 mag", flux_density = "1.6 Jy",
  zero_point_flux = "1024 Jy", wavelength = "1.65 um", bandwidth = "0.3 um", body_temperature = "1500 K", specific_intensity = "0.2 Jy.arcsec**-2",
  radius = "10 au", disc_mass = "0.02 Msun", characteristic_radius = "80 au", surface_density_index = 1, surface_density = "100 g.cm**-2",
  aspect_ratio = 0.05, midplane_temperature = "60 K", flaring_angle = 0.05, mean_molecular_weight = 2.3, snow_temperature = "170 K",
  inclination = "40 deg", disc_position_angle = "20 deg", grain_size = "1 mm", grain_density = "1.5 g.cm**-3", gas_to_dust_ratio = 100,
  dust_temperature = "30 K", dust_mass = "30 Mearth", dust_opacity = "10 cm**2.g**-1", dust_albedo = 0.6, dust_asymmetry = 0.4,
  rim_gas_density = "1e-9 g.cm**-3", cooling_efficiency = 0.4, backwarming_factor = 2, backwarming_term = 2, rim_height_ratio = 0.1,
  sublimation_temperature = "1500 K", rim_radius = "0.4 au", cavity_radius = "20 au", planet_mass = "2 Mjup", planet_semi_major_axis = "10 au",
  second_planet_mass = "1 Mjup", second_planet_semi_major_axis = "18 au", companion_mass = "0.5 Msun", companion_separation = "300 au",
  companion_eccentricity = 0.2, viscosity_alpha = 0.001, hill_separation_factor = 5, gap_width = "4 au", observed_gap_width = "4 au",
  observed_gap_depth = 0.1, ring_radius = "60 au", ring_width = "8 au", projected_baseline = "100 m", shortest_baseline = "30 m",
  baseline_position_angle = "60 deg", element_diameter = "8 m", telescope_diameter = "8 m", inner_working_angle = "50 mas", elements_required = 2,
  spectral_resolving_power = 30, stellar_flux_fraction = 0.6, halo_flux_fraction = 0.05, visibility_error = 0.02, disc_inner_radius = "0.4 au",
  disc_outer_radius = "100 au", temperature_at_one_au = "280 K", temperature_index = 0.5, dust_surface_density_at_one_au = "10 g.cm**-2",
  dust_surface_density_index = 1, band = "H", dust = { materials = "model_silicate", sizes = "1 mm" },
}

-- What suits a subject better: millimetre waves and grains for dust masses, micrometre ones for the rim.
local in_subject = {
  dust = { wavelength = "1.3 mm", dust_opacity = "2.3 cm**2.g**-1" },
  rim = { grain_size = "1 um", dust = { materials = "model_silicate", sizes = "1 um" } },
  emission = { wavelength = "2.2 um", zero_point_flux = "667 Jy", dust_opacity = "1000 cm**2.g**-1" },
}

local function value_of(name, subject)
  local of_subject = in_subject[subject] and in_subject[subject][name]
  return of_subject or plausible[name] or plausible[name:match "^planet_(.+)$" or name:match "^ring_(.+)$" or ""]
end

-- The recipes of a name that start from something, those that turn another around last.
local function recipes_of(name)
  local forward, inverse = {}, {}
  for _, number in ipairs(core.entry(name).rows) do
    local row = core.row(number)
    if #row.from > 0 then table.insert(row.inverse_of and inverse or forward, row) end
  end
  for _, row in ipairs(inverse) do forward[#forward + 1] = row end
  return forward
end

local function has_assumed_value(name)
  for _, number in ipairs(core.entry(name).rows) do
    if core.row(number).kind == "assumed" then return true end
  end
  return false
end

-- Adds to the givens what a recipe starts from: values where there are some, else what these follow from in turn; what has an assumed value
-- is left out. `asked` are the names on the way here. False where no values lead to the recipe.
local function add_givens(givens, row, asked, subject)
  for _, input in ipairs(row.from) do
    if asked[input] then return false end
    if givens[input] == nil and not has_assumed_value(input) then
      local first = recipes_of(input)[1]
      givens[input] = value_of(input, subject)
      asked[input] = true
      if givens[input] == nil and not (first and add_givens(givens, first, asked, subject)) then return false end
      asked[input] = nil
    end
  end
  return true
end

-- A given as it is typed; an object's fields are what its word takes.
local function typed(name, value)
  if type(value) == "number" then return ("%s = %g"):format(name, value) end
  if type(value) == "string" then return ("%s = %q"):format(name, value) end
  local fields = {}
  for _, key in ipairs(case.sorted_keys(value)) do fields[#fields + 1] = typed(key, value[key]) end
  return ("%s = %s{%s}"):format(name, name, table.concat(fields, ", "))
end

-- Objects made once, as dust takes its time: by their fields.
local made = {}
local function object_of(name, fields)
  made[fields] = made[fields] or core.part("lacuna." .. name)[name](fields)
  return made[fields]
end

local function case_of(givens)
  local values = {}
  for given, value in pairs(givens) do values[given] = type(value) == "table" and object_of(given, value) or value end
  return case.new(values)
end

-- An example that asks for a name: line, as typed at the prompt, and answer(), what the prompt prints.
local function example_from(name, givens)
  local parts = {}
  for _, given in ipairs(core.names()) do
    if givens[given] then parts[#parts + 1] = typed(given, givens[given]) end
  end
  local function answer() return core.part "lacuna.show".show(case_of(givens)[name]) end
  return { line = ("case{%s}.%s"):format(table.concat(parts, ", "), name), answer = answer }
end

-- An example that asks for what a recipe gives, from these givens and what else it starts from.
local function example_by(row, givens)
  if add_givens(givens, row, { [row.gives] = true }, core.entry(row.gives).subject) then return example_from(row.gives, givens) end
end

-- An example in which a name is given: of the first name that follows from it.
local function example_with(name)
  for _, other in ipairs(core.names()) do
    for _, row in ipairs(recipes_of(other)) do
      for _, input in ipairs(row.from) do
        local found = input == name and example_by(row, { [name] = value_of(name, core.entry(other).subject) })
        if found then return found end
      end
    end
  end
  return example_from(name, { [name] = value_of(name) })
end

-- An example of a name, { line =, answer = function }; nil where no plausible values lead there (to a user's own name, say).
function example.of(name)
  for _, row in ipairs(recipes_of(name)) do
    local found = example_by(row, {})
    if found then return found end
  end
  return value_of(name) and example_with(name)
end

-- The invented star with all that the recipes of a name start from, as a case; nil where no values lead to any, or they contradict each other.
function example.case_for(name)
  local givens = {}
  for _, row in ipairs(recipes_of(name)) do
    local more = {}
    for given, value in pairs(givens) do more[given] = value end
    if not row.inverse_of and add_givens(more, row, { [name] = true }, core.entry(name).subject) then givens = more end
  end
  local good, made = pcall(case_of, givens)
  return next(givens) and good and made or nil
end

return example
