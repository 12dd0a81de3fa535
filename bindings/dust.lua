-- SPDX-License-Identifier: GPL-3.0-or-later
-- dust{...} and material{...}: what a user writes, read into what the core takes, with complaints in the user's words; and their methods.
local core = ...
local format = core.part "lacuna.format"

local dust = {}

local builtin, builtin_names = {}, {}
for i = 1, math.huge do
  local made = core.material_at(i)
  if not made then break end
  local name = core.material_facts(made).name
  builtin[name], builtin_names[i] = made, name
end
dust.materials = builtin_names

local function named(name)
  if builtin[name] then return builtin[name] end
  local best
  for _, known in ipairs(builtin_names) do
    if not best or core.edits(name, known) < core.edits(name, best) then best = known end
  end
  local near = (core.edits(name, best) <= #best // 2) and ("did you mean %s? "):format(best) or ""
  core.raise(("unknown material '%s'; %sthere are %s, and material{...} for your own"):format(name, near, table.concat(builtin_names, ", ")))
end

local function as_material(value)
  if type(value) == "string" then return named(value) end
  if core.object_type(value) == "material" then return value end
  core.raise("dust: a material is a name or made by material{...}; got " .. core.shown(value))
end

local function check_fields(what, given, known)
  for key in pairs(given) do
    local found
    for _, name in ipairs(known) do found = found or key == name end
    if not found then core.raise(("%s: unknown field '%s'; it has %s"):format(what, tostring(key), table.concat(known, ", "))) end
  end
end

local function number(value, like, what) return core.dust_number(value, like, what) end
local function optional(value, like, what) return value ~= nil and number(value, like, what) or nil end

-- material{name =, density =, wavelength_unit =, table = {{wavelength, n, k}, ...}}, or material "soot".
local units = { um = 1e-6, nm = 1e-9, mm = 1e-3, cm = 1e-2, m = 1 }

local function column_of(rows, i, column, label)
  local value = type(rows[i]) == "table" and rows[i][column]
  if math.type(value) and value == value then return value + 0.0 end
  core.raise(("material %s: row %d has no %s: a hole in the table"):format(label, i, ({ "wavelength", "n", "k" })[column]))
end

local function check_rows(label, wavelengths, n, k)
  for i = 1, #wavelengths do
    local where = ("material %s: row %d: "):format(label, i)
    if not (wavelengths[i] > 0) then core.raise(("%swavelength %g must be > 0"):format(where, wavelengths[i])) end
    if i > 1 and not (wavelengths[i] > wavelengths[i - 1]) then
      core.raise(("%swavelength %g follows %g; they must rise"):format(where, wavelengths[i], wavelengths[i - 1]))
    end
    if not (n[i] > 0) then core.raise(("%sn = %g must be > 0"):format(where, n[i])) end
    if not (k[i] >= 0) then core.raise(("%sk = %g must be >= 0"):format(where, k[i])) end
  end
end

function dust.material(given)
  if type(given) == "string" then return named(given) end
  if type(given) ~= "table" then core.raise("material wants a name or a table; got " .. core.shown(given)) end
  check_fields("material", given, { "name", "density", "wavelength_unit", "table" })
  local label, rows = given.name, given.table
  if type(label) ~= "string" then core.raise("material wants a name, a text; got " .. core.shown(label)) end
  if given.density == nil then core.raise(("material %s wants its density, like \"3.3 g.cm**-3\""):format(label)) end
  local density = number(given.density, "grain_density", ("material %s: density"):format(label))
  if not (density > 0) then core.raise(("material %s: density must be > 0"):format(label)) end
  local unit = units[given.wavelength_unit]
  if not unit then core.raise(("material %s: wavelength_unit must be one of um, nm, mm, cm, m; got %s"):format(label, core.shown(given.wavelength_unit))) end
  if type(rows) ~= "table" or #rows < 2 then core.raise(("material %s wants a table of two or more rows {wavelength, n, k}"):format(label)) end
  local last = 0
  for key in pairs(rows) do if math.type(key) == "integer" and key > last then last = key end end
  local wavelengths, n, k = {}, {}, {}
  for i = 1, last do wavelengths[i], n[i], k[i] = column_of(rows, i, 1, label), column_of(rows, i, 2, label), column_of(rows, i, 3, label) end
  check_rows(label, wavelengths, n, k)
  if wavelengths[last] * unit < 1e-7 or wavelengths[1] * unit > 1e-2 then
    core.raise(("material %s: its wavelengths, %g to %g %s, lie outside 0.1 um to 1 cm; is the unit right?"):format(label,
      wavelengths[1], wavelengths[last], given.wavelength_unit))
  end
  for i = 1, last do wavelengths[i] = wavelengths[i] * unit end
  local made = core.material_table(label, density, wavelengths, n, k)
  if math.type(made) then core.raise(("material %s: row %d can't be taken"):format(label, made)) end
  return made
end

-- Materials in a given order: of {name = fraction} alphabetically, of {{material, fraction}, ...} as they stand. The first is the matrix
-- of Maxwell Garnett's rule, for which the order must be given.
local function read_materials(given, mixing)
  local list = given
  if type(list) == "string" or core.object_type(list) == "material" then return { as_material(list) }, { 1 } end
  if type(list) ~= "table" then core.raise("dust wants materials, like {model_silicate = 0.7, soot = 0.3}; got " .. core.shown(list)) end
  local materials, fractions = {}, {}
  if #list == 0 then
    if mixing == "maxwell_garnett" and next(list, next(list)) then
      core.raise "dust: maxwell_garnett takes the first material as the matrix: give them in order, {{\"water_ice\", 0.8}, {\"soot\", 0.2}}"
    end
    local names = {}
    for name in pairs(list) do names[#names + 1] = name end
    table.sort(names, function(a, b) return tostring(a) < tostring(b) end)
    list = {}
    for i, name in ipairs(names) do list[i] = { name, given[name] } end
  end
  for i, pair in ipairs(list) do
    if type(pair) ~= "table" then core.raise("dust: materials are {name = fraction} or {{material, fraction}, ...}; got " .. core.shown(pair)) end
    materials[i] = as_material(pair[1])
    if not math.type(pair[2]) then core.raise(("dust: the mass fraction of %s must be a number; got %s"):format(tostring(materials[i]), core.shown(pair[2]))) end
    fractions[i] = pair[2]
  end
  return materials, fractions
end

local function read_sizes(given, recipe)
  if type(given) ~= "table" then
    if given == nil then core.raise "dust wants sizes, like {smallest = \"0.005 um\", largest = \"1 mm\", index = 3.5}, or one size \"1 um\"" end
    recipe.sizes, recipe.median = "single", number(given, "grain_size", "dust: sizes")
    return
  end
  check_fields("dust: sizes", given, { "smallest", "largest", "index", "median", "width" })
  local smallest, largest = optional(given.smallest, "grain_size", "dust: sizes: smallest"), optional(given.largest, "grain_size", "dust: sizes: largest")
  if smallest and largest and smallest >= largest then
    core.raise(("dust: sizes: the smallest, %s, must be below the largest, %s"):format(tostring(given.smallest), tostring(given.largest)))
  end
  if given.median ~= nil then
    if given.width == nil or given.index ~= nil then core.raise "dust: sizes by a median want a width (the standard deviation of ln a), and no index" end
    local median, width = number(given.median, "grain_size", "dust: sizes: median"), number(given.width, "dust_albedo", "dust: sizes: width")
    recipe.sizes, recipe.median, recipe.width = "log_normal", median, width
    recipe.smallest = smallest or median * math.exp(-6 * width)
    recipe.largest = largest or median * math.exp(6 * width + 6 * width * width) -- scattering in Rayleigh's limit goes by the sixth power
  else
    if not smallest or not largest or given.index == nil then core.raise "dust: sizes want smallest, largest and index; or median and width; or are one size" end
    recipe.sizes, recipe.smallest, recipe.largest = "power", smallest, largest
    recipe.index = number(given.index, "dust_albedo", "dust: sizes: index")
  end
end

local info = setmetatable({}, { __mode = "k" }) -- what each dust was made of, for its text

function dust.dust(given)
  if core.object_type(given) == "dust" then return given end
  if type(given) ~= "table" then core.raise("dust wants a table; got " .. core.shown(given)) end
  check_fields("dust", given, { "materials", "mixing", "porosity", "sizes", "temperature", "extrapolate" })
  local mixing = given.mixing or "bruggeman"
  if mixing ~= "bruggeman" and mixing ~= "maxwell_garnett" then core.raise("dust: mixing is \"bruggeman\" or \"maxwell_garnett\"; got " .. core.shown(mixing)) end
  local recipe = { mixing = mixing, extrapolate = given.extrapolate == true, temperature = optional(given.temperature, "effective_temperature", "dust: temperature") }
  recipe.porosity = given.porosity == nil and 0 or number(given.porosity, "dust_albedo", "dust: porosity")
  recipe.materials, recipe.fractions = read_materials(given.materials, mixing)
  read_sizes(given.sizes, recipe)
  local made = core.dust_new(recipe)
  if type(made) == "string" then core.raise("dust: " .. made) end
  info[made] = recipe
  return made
end

-- Methods -------------------------------------------------------------------------------------------------------------------------

local methods = {}
for _, word in ipairs { "absorption", "scattering", "extinction", "asymmetry", "albedo", "effective_albedo" } do
  methods[word] = function(self, wavelength) return core.dust_at(self, word, wavelength) end
end

local function mean(kind)
  return function(self, temperature)
    local kelvin = number(temperature, "effective_temperature", ("dust:%s_mean"):format(kind))
    local value, err = core.dust_mean(self, kind, kelvin)
    if not value then core.raise(("dust:%s_mean is undefined at %s: a black body shines outside 0.1 um to 1 cm then"):format(kind, tostring(temperature))) end
    return value, err
  end
end
methods.planck_mean, methods.rosseland_mean = mean "planck", mean "rosseland"

-- d:grain_temperature{grain_size =, heating_luminosity =, effective_temperature =, radius =}
function methods.grain_temperature(self, given)
  local fields = { "grain_size", "heating_luminosity", "effective_temperature", "radius" }
  if type(given) ~= "table" then core.raise("dust:grain_temperature wants a table of " .. table.concat(fields, ", ")) end
  check_fields("dust:grain_temperature", given, fields)
  local values = {}
  for i, name in ipairs(fields) do
    if given[name] == nil then core.raise("dust:grain_temperature wants " .. name) end
    values[i] = number(given[name], name, "dust:grain_temperature: " .. name)
  end
  return core.dust_grain_temperature(self, table.unpack(values)) or
    core.raise "dust:grain_temperature: grains from 0.001 um to 1 cm, temperatures from 1 to 1e5 K"
end

function methods.density(self) return core.quantity((core.dust_facts(self)) / 1000, "g.cm**-3") end

-- Where wavelengths lie outside what the materials hold for: what they hold for; nothing if all lie inside.
local function outside_of(self, wavelength)
  local _, shortest, longest = core.dust_facts(self)
  local outside = core.either(core.below(wavelength, core.like(wavelength, shortest)), core.above(wavelength, core.like(wavelength, longest)))
  for _, axis in ipairs(core.axes(outside)) do outside = core.highest(outside, axis.name) end
  if core.elements(outside)[1] == 1 then
    return ("the dust's materials hold for wavelengths from %s to %s um"):format(format.number(shortest * 1e6), format.number(longest * 1e6))
  end
end

-- The same as a warning of a derivation, and as the reason of an error.
function dust.warning(self, wavelength)
  local words = outside_of(self, wavelength)
  return words and (info[self].extrapolate and "extrapolated: " or "undefined there: ") .. words
end
function dust.beyond(self, wavelength)
  local words = outside_of(self, wavelength)
  return words and ("; %s, extrapolate = true goes from 0.1 um to 1 cm"):format(words)
end

local function text_of_sizes(recipe)
  local function um(size) return format.number(size * 1e6) end
  if recipe.sizes == "single" then return um(recipe.median) .. " um" end
  if recipe.sizes == "power" then return ("%s to %s um, a^-%s"):format(um(recipe.smallest), um(recipe.largest), format.number(recipe.index)) end
  return ("about %s um, width %s in ln a"):format(um(recipe.median), format.number(recipe.width))
end

local function text_of_dust(self)
  local recipe, parts = info[self], {}
  for i, material in ipairs(recipe.materials) do
    parts[i] = (#recipe.materials > 1 and format.number(100 * recipe.fractions[i]) .. " % " or "") .. tostring(material)
  end
  local lines = { table.concat(parts, ", ") }
  if recipe.porosity > 0 then lines[#lines + 1] = ("porosity %s"):format(format.number(recipe.porosity)) end
  if recipe.temperature then lines[#lines + 1] = format.number(recipe.temperature) .. " K" end
  lines[#lines + 1] = text_of_sizes(recipe)
  if recipe.extrapolate then lines[#lines + 1] = "extrapolated" end
  return "dust of " .. table.concat(lines, "; ")
end

local function finish(metatable, kind, words, tostring_)
  local names = {}
  for name in pairs(words) do names[#names + 1] = name end
  table.sort(names)
  metatable.__index = function(_, word)
    return words[word] or core.raise(("%s has no '%s'; it has %s"):format(kind, tostring(word), table.concat(names, ", ")))
  end
  metatable.__tostring = tostring_
  metatable.__metatable = kind
end
finish(core.dust_metatable, "dust", methods, text_of_dust)
finish(core.material_metatable, "material", {
  about = function(self)
    local facts = core.material_facts(self)
    return ("%s: %s; %s; %s"):format(facts.name, facts.what, facts.validity, facts.source)
  end,
}, function(self) return core.material_facts(self).name end)

return dust
