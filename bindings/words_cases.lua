-- SPDX-License-Identifier: GPL-3.0-or-later
-- The words for cases: what is given, what can be asked, rows of the user's own. words.lua says what the fields are.
local star = 'c = case{distance = "140 ± 5 pc", stellar_luminosity = "18 Lsun", wavelength = "1.65 um", projected_baseline = "92 m"}'

return {
  {
    name = "case", subject = "cases", forms = { "case{name = value, ...}" },
    does = "What is known of one target, in any order, from which any other name can be asked: c.rim_radius. A case doesn't change; c:with{...} makes another.",
    arguments = { { "name = value", 'a name of the glossary, and a number (of plain numbers), a text "156 pc" or "156 ± 3 pc", a quantity, a spread, a sweep or an object' } },
    result = "a case; c.name is a quantity",
    errors = "an unknown name, a wrong dimension, a value out of range, givens that contradict a definition; on asking, what is missing",
    examples = { 'case{distance = "140 pc", rim_radius = "0.3 au"}.rim_radius_angle', { star, "c" } },
    answers = { "2.143 mas", [[
case
  given
    distance            140 ± 5 pc
    stellar_luminosity  18 Lsun
    wavelength          1.65 µm
    projected_baseline  92 m
  derived so far: nothing yet; any name of the glossary can be asked]] },
    see = { "study", "missing", "why" },
  },
  {
    name = "with", of = "case", subject = "cases", forms = { "c:with{name = value, ...}" },
    does = "The case with other givens. Printed, it tells which recipes changed because a given came or went.",
    arguments = { { "name = value", "a given instead of what was given, or besides; false takes one away" } },
    result = "another case",
    errors = "as of case",
    examples = { { star, 'c:with{projected_baseline = "330 m"}.array_resolution' } },
    answers = { "0.5157 mas" },
  },
  {
    name = "using", of = "case", subject = "cases", forms = { 'c:using{name = "recipe", ...}' },
    does = "The case with these recipes. Which there are is told by recipes.",
    arguments = { { 'name = "recipe"', "a name, and which of its recipes gives it" } },
    result = "another case",
    errors = "an unknown name or recipe, a recipe that can't be had from what is given",
    examples = { { star, 'c:using{array_resolution = "fringe"}.array_resolution' } },
    answers = { [[
3.699 mas
  array_resolution now by fringe, before by half_fringe]] },
    see = { "recipes" },
  },
  {
    name = "why", of = "case", subject = "cases", forms = { 'c:why "name"' },
    does = "The derivation of a quantity: equations with the numbers put in, papers, assumptions. Of a verdict also its conditions; and what " ..
      "other recipes give.",
    arguments = { { "name", "what is to be derived" } },
    result = "a derivation, which prints itself; where the name can't be had, what is missing",
    errors = "an unknown name",
    examples = { { star, 'c:why "array_resolution"' } },
    answers = { [[
array_resolution = 1.85 mas
  smallest angle that the array tells apart, by the named criterion

  wavelength = 1.65 µm   given
  projected_baseline = 92 m   given
  array_resolution = 1.85 mas
      θ_arr = λ / (2 B)
      = 1.65 µm / (2 · 92 m)
      half_fringe: common practice, no source
      supposes the criterion of half a fringe spacing
  with other recipes
      array_resolution by fringe: 3.699 mas (instead of half_fringe)]] },
    see = { "missing", "recipes" },
  },
  {
    name = "missing", of = "case", subject = "cases", forms = { 'c:missing "name"' },
    does = "What would have to be given for a name, by each way that leads there.",
    arguments = { { "name", "what is wanted" } },
    result = "a list that prints itself",
    errors = "an unknown name",
    examples = { { star, 'c:missing "gap_width"' } },
    answers = { [[
gap_width can't be derived from what is given; give stellar_mass, planet_mass, planet_semi_major_axis, viscosity_alpha (by kanagawa_2016)

  stellar_mass [Msun]: mass of the star
  planet_mass [Mjup]: mass of the planet
  planet_semi_major_axis [au]: semi-major axis of the planet's orbit
  viscosity_alpha: Shakura and Sunyaev's viscosity parameter of the gas, the strength of its turbulence
    published values run from 1e-4 to 1e-2: give a number, or viscosity_alpha = spread.log_uniform(1e-4, 1e-2)]] },
  },
  {
    name = "check", of = "case", subject = "cases", forms = { "c:check()" },
    does = "What the other givens make of each given, to find givens that don't fit each other. Single numbers disagree beyond 1 %, error bars where zero lies " ..
      "outside the 95 % interval of the difference.",
    result = "a table that prints itself; its agree is false where something disagrees",
    examples = { 'case{stellar_luminosity = "2 ± 0.1 Lsun", stellar_radius = "1.7 ± 0.1 Rsun", effective_temperature = "5000 ± 100 K"}:check()' },
    answers = { "effective_temperature: given 5000 ± 100 K, by luminosity_and_radius 5270 ± 170 K: agree" },
  },
  {
    name = "solve", of = "case", subject = "cases", forms = { 'c:solve("given", {name = value})', 'c:solve("given", {name = value}, {between = {low, high}})' },
    does = "For which value of a given a name reaches a goal. The chain of relations stays as it is. Of a verdict over draws the goal is its chance: {name = 0.9}.",
    arguments = {
      { "given", "what may change; it must be given in the case, and its present value says where the search starts" },
      { "name = value", "the goal: a name and its value with unit, or a verdict and true, a share or \"90 %\"" },
      { "between", "bounds of the search; four decades to both sides if left out" },
    },
    result = "a quantity; of several solutions the nearest, and a second result that says so; nil and the reason where there is none",
    errors = "a name that isn't given, a goal that doesn't depend on it, an unknown name",
    examples = { { star, 'c:solve("projected_baseline", {array_resolution = "1 mas"})' }, { star, 'c:solve("projected_baseline", {rim_resolved_by_array = 0.9})' } },
    answers = { "170.2 m", [[
85.21 m
rim_resolved_by_array in at least 90 % of draws from there up]] },
  },
  {
    name = "recipes", of = "case", subject = "cases", forms = { 'c:recipes "name"' },
    does = "What each recipe of a name gives in the case, side by side. Beside each stands whether the case lies in its range, or what is missing; below, sources and ranges.",
    arguments = { { "name", "a name of the glossary" } },
    result = "a page that prints itself",
    errors = "an unknown name",
    examples = { { star, 'c:with{cooling_efficiency = 0.4}:recipes "sublimation_radius"' } },
    answers = { [[
sublimation_radius  R_sub: distance from the star at which dust sublimates

  recipe             value
  from_angle         -          missing: sublimation_radius_angle (here it follows from sublimation_radius)
  kama_2009          -          missing: backwarming_factor
  isella_natta_2005  -          missing: backwarming_term
  dullemond_2001     -          missing: rim_height_ratio
  monnier_2002       0.231 au   taken here, in its range
  grey_grains        0.1461 au  in its range

  from_angle, from sublimation_radius_angle, distance
      R_sub = θ(R_sub) d
      definition
      the inverse of sublimation_radius_angle by definition
  kama_2009, from heating_luminosity, sublimation_temperature, cooling_efficiency, backwarming_factor
      R_sub = √((C_bw/ε) · (L / (16 π σ_SB T_sub⁴)))
      Kama, M., Min, M., Dominik, C. 2009, A&A 506, 1199, analytic rim radius, written with the luminosity (formula from memory)
      supposes grains of one size, optically thin gas inside the rim
      holds for heating_luminosity from 1 to 1000 Lsun
  isella_natta_2005, from heating_luminosity, sublimation_temperature, cooling_efficiency, backwarming_term
      R_sub = √((B_w + 1/ε) · (L / (16 π σ_SB T_sub⁴)))
      Isella, A., Natta, A. 2005, A&A 438, 899, rim radius, written with the luminosity
      supposes grains of one size, optically thin gas inside the rim
      holds for heating_luminosity from 1 to 1000 Lsun
  dullemond_2001, from heating_luminosity, sublimation_temperature, rim_height_ratio
      R_sub = √(4 (1 + f_rim) · (L / (16 π σ_SB T_sub⁴)))
      Dullemond, C. P., Dominik, C., Natta, A. 2001, ApJ 560, 957, Sect. 2, written with the luminosity (formula from memory)
      supposes a black, vertical dust wall that lights itself, optically thin gas inside the rim
      holds for heating_luminosity from 1 to 1000 Lsun
      holds for rim_height_ratio from 0 to 0.2
  monnier_2002, from heating_luminosity, sublimation_temperature, absorption_efficiency_ratio
      R_sub = √(Q_R · (L / (16 π σ_SB T_sub⁴)))
      Monnier, J. D., Millan-Gabet, R. 2002, ApJ 579, 694, Eq. 1, written with the luminosity
      supposes grains of one size, optically thin gas inside the rim, no back-warming
      holds for heating_luminosity from 1 to 1000 Lsun
  grey_grains, from heating_luminosity, sublimation_temperature
      R_sub = √(L / (16 π σ_SB T_sub⁴))
      Monnier, J. D., Millan-Gabet, R. 2002, ApJ 579, 694, Eq. 1 with an absorption efficiency ratio of 1
      supposes large grey grains, optically thin gas inside the rim, no back-warming
      holds for heating_luminosity from 1 to 1000 Lsun]] },
    see = { "using", "recipes" },
  },
  {
    name = "givens", of = "case", subject = "cases", forms = { "c:givens()" },
    does = "The names that are given, in the order of the glossary.",
    result = "a list of texts",
    examples = { { star, 'table.concat(c:givens(), ", ")' } },
    answers = { "\"distance, stellar_luminosity, wavelength, projected_baseline\"" },
  },
  {
    name = "relation", subject = "cases",
    forms = { "relation{gives = name, by = recipe, from = {names}, function(a, b) ... end, source = ..., equation = ..., supposes = ...}" },
    does = "A row of your own: how one name follows from others. It joins the chain after the built-in recipes; using takes it first.",
    arguments = {
      { "gives, from", "names of the glossary; make new ones known with quantity{...}" },
      { "by", "what the recipe is called, \"yours\" if left out" },
      { "function", "gets the inputs as quantities in the order of from, single or along an axis (so: no < or >), and returns a quantity of the dimension of gives" },
      { "source, supposes", "texts, shown with every derivation" },
      { "equation", "in TeX, names in brackets: \"[rim_radius] = 2 [stellar_radius]\"" },
    },
    result = "nothing: the row is there from now on",
    errors = "an unknown name, a recipe that exists, a circle, an equation that can't be read",
    examples = { { 'relation{gives = "cavity_radius", by = "tenth", from = {"characteristic_radius"}, function(r) return 0.1 * r end, source = "invented"}',
      'case{characteristic_radius = "50 au"}.cavity_radius' } },
    answers = { "5 au" },
    see = { "quantity" },
  },
}
