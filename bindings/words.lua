-- SPDX-License-Identifier: GPL-3.0-or-later
-- The words of the language as help tells of them: what each does, its arguments with units, its errors, its result, an example.
-- The examples stand alone and are run by the tests.
local core = ...
local text = core.part "lacuna.text"
local words = { names = {}, about = {} }

local function word(name, lines)
  words.names[#words.names + 1] = name
  words.about[name] = lines
end

word("case", {
  "case{name = value, ...}",
  "  What is known of one target, in any order; any other name can then be asked: c.rim_radius. A case doesn't change.",
  "  A value is a number (of plain numbers), a text \"156 pc\", \"156 ± 3 pc\", \"156 +4 -2 pc\", a quantity, a spread or a sweep.",
  "  Errors: an unknown name, a wrong dimension, a value out of range, givens that contradict a definition.",
  "  c:with{name = value}     the case with other givens; false takes one away",
  "  c:using{name = \"recipe\"} the case with these recipes",
  "  c:why \"name\"             the derivation: equations with the numbers in them, sources, assumptions",
  "  c:missing \"name\"         what would have to be given",
  "  c:check()                what the other givens make of each given",
  "  c:solve(\"given\", {name = value})  for which value of a given a name reaches a goal; of a verdict over draws: {name = 0.9}, its chance",
  "  example: case{distance = \"140 pc\", rim_radius = \"0.3 au\"}.rim_radius_angle",
})
word("quantity", {
  "quantity \"156 ± 3 pc\"   quantity(5, \"au\")",
  "  A quantity from a text, or from a number and a unit. A unit's name is a quantity too: 5*au.",
  "  q:as \"km\"               the same with another display unit",
  "  q:value \"km\"            the plain number, or lists of them, one level an axis",
  "  q:mean() q:median() q:interval() q:deviation() q:quantile(p)   over the draws",
  "  q:at{axis = i}          at one point of an axis",
  "  q:stored()              its elements computed now and kept; else they are computed when they are needed",
  "quantity{name = ..., unit = ..., meaning = ..., range = \"> 0\", symbol = TeX, on_sky = true}",
  "  A name of your own for the glossary.",
  "  example: quantity(5, \"au\"):as \"km\"",
})
word("relation", {
  "relation{gives = name, by = recipe, from = {names}, function(a, b) ... end, source = ..., equation = ..., supposes = ...}",
  "  A row of your own. Its function gets the inputs as quantities in the order of from, single or along an axis (so: no < or >), and",
  "  returns a quantity of the dimension of the name it gives.",
  "  Errors: an unknown name, a recipe that exists, a circle.",
})
word("spread", {
  "spread.normal(median, deviation)   spread.lopsided(median, upper, lower)   spread.uniform(low, high)",
  "spread.log_uniform(low, high)   spread.log_normal(median, deviation of the natural logarithm)   spread.samples{...}",
  "  A quantity known with an error bar: an ensemble along the axis draw. The same seed, target and name give the same draws.",
  "  example: case{viscosity_alpha = spread.log_uniform(1e-4, 1e-2)}",
})
word("sweep", {
  "sweep(from, to, count)   sweep.log(from, to, count)   sweep{a, b, ...}",
  "  A quantity that takes a range of values, along an axis of its own, named after the given that takes it.",
  "  example: case{wavelength = \"1.65 um\", projected_baseline = sweep(\"20 m\", \"330 m\", 5)}.array_resolution",
})
word("along", {
  "along(axis, {a, b, ...})",
  "  A list of values along a named axis, to go point by point with others along the same axis.",
})
local summaries = {
  { "mean", "the mean over the draws" }, { "median", "the median over the draws" },
  { "interval", "two results: the ends of the central 68 % of the draws; interval(q, 0.95) for another share" },
  { "deviation", "the standard deviation over the draws" }, { "quantile", "quantile(q, p): the value below which the share p of the draws lies" },
  { "chance", "the share of draws for which a verdict holds; undefined draws count in the denominator" },
  { "undefined", "how many draws are undefined" }, { "lowest", "the lowest along an axis" }, { "highest", "the highest along an axis" },
}
for _, summary in ipairs(summaries) do
  word(summary[1], { summary[1] .. "(q)", "  " .. summary[2] .. ". Along another axis: its name as the last argument. The other axes stay." })
end
for _, pair in ipairs { { "above", "1 where a > b, 0 where not" }, { "below", "1 where a < b, 0 where not" }, { "both", "1 where both verdicts hold" },
  { "either", "1 where one verdict holds" }, { "least", "the lesser of two, point by point" }, { "greatest", "the greater of two, point by point" } } do
  word(pair[1], { pair[1] .. "(a, b)", "  " .. pair[2] .. "; undefined where a or b is. Both of one dimension." })
end
for _, name in ipairs { "sqrt", "abs", "exp", "log", "log10", "sin", "cos", "tan" } do
  word(name, { name .. "(q)", "  Of a quantity, point by point. sqrt and abs take any dimension; sin, cos and tan an angle; the others a plain number." })
end
word("study", {
  "study{targets = file or list, given = {...}, ask = {...}, variants = {...}, csv = file, latex = file}",
  "  A list of targets, variants and questions: prints a table with error bars, reasons, recipes and assumptions.",
})
word("recipes", { "recipes \"name\"   recipes(\"name\", case)", "  All recipes of a name with their sources; with a case also what each gives in it." })
local about_bands = {
  "band{wavelength = ..., width = ..., zero_point = ..., system = ..., name = ...}   band \"H\"",
  "  A spectral band: of your own by its numbers, or a built-in one. In a case its name does: band = \"H\". Of system = \"AB\" the zero point",
  "  is known; width may be left out where no bandwidth is asked for.",
  "  Errors: an unknown band, a field that is missing, of another dimension, or no single number > 0.",
  "  b:flux(magnitude)       the flux density of a magnitude, also of spreads and sweeps",
  "  b:magnitude(flux)       the magnitude of a flux density",
  "  b.name b.system b.wavelength b.width b.zero_point",
  "  example: band(\"H\"):flux(\"7 mag\")",
  "  built in, with wavelength, width and zero point:",
}
local by_source, sources = {}, {}
local function shown(quantity, unit) return ("%g %s"):format(core.value(quantity, unit), unit) end
for i = 1, math.huge do
  local band = core.band_at(i)
  if not band then break end
  local aliases, source = core.band_facts(band)
  if not by_source[source] then by_source[source], sources[#sources + 1] = {}, source end
  local line = ("    %-18s %-9s %9s %9s %9s"):format(band.name, aliases, shown(band.wavelength, "um"), shown(band.width, "um"), shown(band.zero_point, "Jy"))
  table.insert(by_source[source], line)
end
for _, source in ipairs(sources) do
  for _, line in ipairs(by_source[source]) do about_bands[#about_bands + 1] = line end
  about_bands[#about_bands + 1] = "      zero points: " .. text.source { source = source }
end
about_bands[#about_bands + 1] = "      widths from memory"
word("band", about_bands)
local about_materials = {
  "material{name = ..., density = \"3.3 g.cm**-3\", wavelength_unit = \"um\", table = {{wavelength, n, k}, ...}}   material \"soot\"",
  "  A material of grains: a table of your own (n linear and k geometric in the logarithm of the wavelength), or a built-in analytic model.",
  "  Errors: wavelengths that don't rise, a hole, n <= 0, k < 0, a unit that isn't um, nm, mm, cm or m.",
  "  built in:",
}
for i = 1, math.huge do
  local made = core.material_at(i)
  if not made then break end
  local facts = core.material_facts(made)
  about_materials[#about_materials + 1] = ("    %s (%g g/cm3): %s"):format(facts.name, facts.density / 1000, facts.what)
  about_materials[#about_materials + 1] = "      holds for " .. facts.validity
  about_materials[#about_materials + 1] = "      " .. facts.source
  word(facts.name, { facts.name .. "  a material of grains: " .. facts.what, "  holds for " .. facts.validity, "  " .. facts.source })
end
word("dust", {
  "dust{materials = {model_silicate = 0.7, soot = 0.3}, sizes = {smallest = \"0.005 um\", largest = \"1 mm\", index = 3.5}}",
  "  A population of grains, to be given in a case: case{dust = d, wavelength = \"1.3 mm\"}.dust_opacity. Opacities are per gram of dust.",
  "  materials     by mass fraction, {name = fraction} or {{material, fraction}, ...}",
  "  mixing        \"bruggeman\" (as it is if left out) or \"maxwell_garnett\", whose matrix is the first material",
  "  porosity      volume fraction of vacuum, 0 if left out",
  "  sizes         radii: {smallest, largest, index} with n(a) as a^-index; {median, width} log-normal, width in ln a; or one size \"1 um\"",
  "  temperature   of the ice in it, for its far infrared",
  "  extrapolate   true: also where the materials don't hold, from 0.1 um to 1 cm, with a warning in why",
  "  Opacities are interpolated, to 0.3 %; a part of the extinction below 0.1 % is not known that well, nor the resonances of transparent grains of one size.",
  "  d:absorption(wavelength) d:scattering d:extinction d:asymmetry d:albedo d:effective_albedo    also of sweeps and spreads",
  "  d:planck_mean(temperature) d:rosseland_mean(temperature)   the mean and its relative error",
  "  d:grain_temperature{grain_size =, heating_luminosity =, effective_temperature =, radius =}   in the open",
  "  Errors: fractions that don't sum to 1, sizes reversed, an unknown material, a wavelength outside.",
  "  example: dust{materials = \"model_silicate\", sizes = \"1 um\"}:albedo(\"2.2 um\")",
})
word("material", about_materials)
word("settings", {
  "settings{seed = 0, draws = 10000, threads = n, memory = MiB}",
  "  Sets those named, and returns all. They hold for what is made afterwards.",
})
word("show", { "show(value, ...)", "  The text of values as the prompt writes them." })
word("more", { "more()", "  At a terminal the prompt prints a screenful at once: more() prints what did not fit. Errors: nothing is left to show." })
word("globals", { "globals(environment)", "  For the module in Lua: makes all words, units and names readable as globals there, like globals(_ENV)." })
word("help", { "help()   help \"name\"   help \"some words\"", "  A map; one name, word or unit; a search." })

-- Methods are told of with what has them.
for method in ("with using why missing check solve"):gmatch "%a+" do words.about[method] = words.about.case end
for method in ("as value at stored"):gmatch "%a+" do words.about[method] = words.about.quantity end

return words
