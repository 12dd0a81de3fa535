-- SPDX-License-Identifier: GPL-3.0-or-later
-- The words for quantities: making them, error bars and sweeps, what is asked of them. words.lua says what the fields are.
local three_baselines = 'b = case{wavelength = "1.65 um", projected_baseline = sweep("20 m", "330 m", 3)}.array_resolution'
local uncertain_radius = 'r = case{distance = "156 ± 3 pc", rim_radius = "0.3 ± 0.02 au"}.rim_radius_angle'
local along_axis = { "axis", 'the axis to go along, "draw" if left out; the other axes stay' }

-- A summary over the draws, a word and a method.
local function summary(fields)
  fields.subject, fields.also_of = "quantities", "quantity"
  fields.result = fields.result or "a quantity of the same dimension without that axis; one that hasn't got the axis stays as it is"
  fields.errors = fields.errors or "what is no quantity"
  return fields
end

-- A function of one quantity, point by point.
local function of_one(fields)
  fields.subject = "quantities"
  fields.result = fields.result or "a plain number"
  return fields
end

local function of_two(fields)
  fields.subject = "quantities"
  fields.arguments = fields.arguments or { { "a, b", "quantities of one dimension" } }
  return fields
end

return {
  {
    name = "quantity", subject = "quantities",
    forms = { 'quantity "156 ± 3 pc"', 'quantity(5, "au")', 'quantity{name = ..., unit = ..., meaning = ..., range = ..., symbol = ..., on_sky = true}' },
    does = "A quantity from a text, or from a number and a unit; from a table, a new name for the glossary. A unit's name is a quantity too: 5*au. " ..
      'A text may carry an error bar, "156 ± 3 pc", "156 +- 3 pc" or "156 +4 -2 pc", and is a spread then.',
    arguments = {
      { "text", "a number with its unit, in VOUnits or the trade's short forms (Msun, Lsun, Mjup)" },
      { "number, text", "a number, and its unit as a text" },
      { "name", "of a new name: how it is called" },
      { "unit", 'of a new name: what it is shown in; "1" for a plain number' },
      { "meaning", "of a new name: what exactly it is, in one line" },
      { "range", 'of a new name, "any" if left out: "> 0", ">= 0", "0 .. 1"' },
      { "symbol", "of a new name, in TeX, for equations; its words if left out" },
      { "on_sky", "true for a length that is seen on the sky: <name>_angle exists then" },
    },
    result = "a quantity; of a table, nothing: the name can be given, asked and used in relations from now on",
    errors = "an unknown unit, a text that is no number with a unit, a name that exists already or is a unit or a word",
    examples = { 'quantity(5, "au"):as "km"', 'quantity "156 +4 -2 pc"',
      { 'quantity{name = "wall_height", unit = "au", meaning = "height of an invented wall", on_sky = true}', 'case{wall_height = "2 au", distance = "140 pc"}.wall_height_angle' } },
    answers = { "7.48e8 km", "156 +4 -2 pc", "14.29 mas" },
    see = { "relation", "spread", "sweep" },
  },
  {
    name = "as", of = "quantity", subject = "quantities", forms = { 'q:as "km"', "q:as(km)" },
    does = "The same quantity with another display unit.",
    arguments = { { "unit", "a text or a unit's name, of the quantity's dimension" } },
    result = "a quantity",
    errors = "an unknown unit, one of another dimension, a quantity that is no unit with a name",
    examples = { '(5*au):as "km"' },
    answers = { "7.48e8 km" },
  },
  {
    name = "value", of = "quantity", subject = "quantities", forms = { 'q:value "km"', "q:value()" },
    does = "The plain number of a quantity, or lists of them, one level an axis in the order of q:axes().",
    arguments = { { "unit", "which unit to count in; may be left out of a plain number" } },
    result = "a number, or a table of numbers",
    errors = "no unit where one is wanted, a unit of another dimension",
    examples = { '(5*au):value "km"', { three_baselines, '#b:value "mas"' } },
    answers = { "747989353.5", "3" },
  },
  {
    name = "axes", of = "quantity", subject = "quantities", forms = { "q:axes()" },
    does = "The axes of a quantity: those of its sweeps, and draw where it has an error bar.",
    result = "a list of {name = ..., length = ..., values = numbers in SI, or nil}",
    examples = { { three_baselines, "b:axes()[1].name, b:axes()[1].length" } },
    answers = { [[
"projected_baseline"
3]] },
  },
  {
    name = "at", of = "quantity", subject = "quantities", forms = { "q:at{axis = point, ...}" },
    does = "The quantity at one point of an axis; axes that aren't named stay.",
    arguments = { { "axis = point", "the name of an axis, and which of its points, counted from 1" } },
    result = "a quantity without those axes",
    errors = "an axis that the quantity hasn't got, a point outside it",
    examples = { { three_baselines, "b:at{projected_baseline = 2}" } },
    answers = { "0.9724 mas" },
  },
  {
    name = "stored", of = "quantity", subject = "quantities", forms = { "q:stored()" },
    does = "The quantity itself, with its elements computed now and kept. Otherwise they are computed when they are needed, and anew each time.",
    result = "the quantity",
    errors = "more memory than settings{memory = ...} allows",
    examples = { { uncertain_radius, "r:stored()" } },
    answers = { [[
1.92 ± 0.13 mas
  1.59 ▁▁▁▁▂▂▃▃▅▅▇▇██▇█▇▇▆▆▅▄▃▂▂▁▁▁▁▁ 2.28 mas   99 % of the draws]] },
  },
  {
    name = "normal", of = "spread", field = true, subject = "quantities", forms = { "spread.normal(median, deviation)" },
    does = "A quantity with a normal error bar, as \"156 ± 3 pc\" makes.",
    arguments = { { "median, deviation", "of one dimension, the standard deviation >= 0" } },
    result = "a spread", errors = "arguments of different dimensions, a deviation below 0",
    examples = { "spread.normal(156*pc, 3*pc)" },
    answers = { "156 ± 3 pc" },
  },
  {
    name = "lopsided", of = "spread", field = true, subject = "quantities", forms = { "spread.lopsided(median, upper, lower)" },
    does = "A quantity with unequal error bars, as \"156 +4 -2 pc\" makes. They are two half-normals, half the draws on each side.",
    arguments = { { "median", "where half the draws lie above" }, { "upper, lower", "the deviations to both sides, >= 0" } },
    result = "a spread", errors = "arguments of different dimensions, a deviation below 0",
    examples = { "spread.lopsided(156*pc, 4*pc, 2*pc)" },
    answers = { "156 +4 -2 pc" },
  },
  {
    name = "uniform", of = "spread", field = true, subject = "quantities", forms = { "spread.uniform(low, high)" },
    does = "A quantity that lies anywhere between two bounds, equally likely.",
    arguments = { { "low, high", "the bounds, of one dimension" } },
    result = "a spread", errors = "bounds of different dimensions or in the wrong order",
    examples = { "spread.uniform(4, 8)" },
    answers = { "from 4 to 8, uniform" },
  },
  {
    name = "log_uniform", of = "spread", field = true, subject = "quantities", forms = { "spread.log_uniform(low, high)" },
    does = "A quantity between two bounds, each decade equally likely. For what is known to an order of magnitude.",
    arguments = { { "low, high", "the bounds, of one dimension, > 0" } },
    result = "a spread", errors = "bounds of different dimensions, in the wrong order, or not > 0",
    examples = { "case{viscosity_alpha = spread.log_uniform(1e-4, 1e-2)}" },
    answers = { [[
case
  given
    viscosity_alpha  from 0.0001 to 0.01, log-uniform
  derived so far: nothing yet; any name of the glossary can be asked]] },
  },
  {
    name = "log_normal", of = "spread", field = true, subject = "quantities", forms = { "spread.log_normal(median, width)" },
    does = "A quantity whose logarithm is normally distributed.",
    arguments = { { "median", "where half the draws lie above, > 0" }, { "width", "the standard deviation of the natural logarithm, a plain number >= 0" } },
    result = "a spread", errors = "a median that isn't > 0, a width that is no plain number",
    examples = { "spread.log_normal(0.3*au, 0.5)" },
    answers = { "log-normal about 0.3 au, standard deviation of its logarithm 0.5" },
  },
  {
    name = "samples", of = "spread", field = true, subject = "quantities", forms = { "spread.samples{a, b, ...}" },
    does = "A quantity known by samples, each equally likely: of a posterior distribution, say.",
    arguments = { { "a, b, ...", "numbers, texts or quantities of one dimension" } },
    result = "a spread", errors = "an empty list, samples of different dimensions",
    examples = { "spread.samples{150*pc, 156*pc, 157*pc}" },
    answers = { "samples about 156 pc" },
  },
  {
    name = "spread", subject = "quantities",
    forms = { "spread.normal(...)", "spread.lopsided(...)", "spread.uniform(...)", "spread.log_uniform(...)", "spread.log_normal(...)", "spread.samples{...}" },
    does = "Quantities known with an error bar: an ensemble along the axis draw. The same seed, target and name give the same draws; how many there are and from " ..
      "which seed is said by settings.",
    arguments = { { "...", "what each of them wants: help \"spread.normal\"" } },
    result = "a spread: given in a case it becomes an ensemble, bound to the case's target and the given's name",
    errors = "arguments of different dimensions or out of range",
    examples = { 'case{distance = "140 pc", rim_radius = spread.uniform(0.2*au, 0.4*au)}.rim_radius_angle' },
    answers = { [[
2.14 ± 0.49 mas
  1.43 ▇▇▇▇▇▇▇▇▇▇▇▇▇▇▇█▇▇▇▇█▆▆▇▇█▆█▇▆ 2.85 mas   99 % of the draws]] },
    see = { "settings", "chance", "interval" },
  },
  {
    name = "sweep", subject = "quantities", forms = { "sweep(from, to, count)", "sweep{a, b, ...}", "sweep.log(from, to, count)" },
    does = "A quantity that takes a range of values, along an axis of its own. The axis is named after the given that takes it.",
    arguments = { { "from, to", "the ends, with units" }, { "count", "how many points, evenly spaced, 2 or more" }, { "a, b, ...", "the values one by one, with units" } },
    result = "a sweep, to be given in a case or computed with",
    errors = "ends of different dimensions, a count below 2, an empty list",
    examples = { 'case{wavelength = "1.65 um", projected_baseline = sweep("20 m", "330 m", 4)}.array_resolution',
      'case{wavelength = sweep{"1.65 um", "2.2 um"}, projected_baseline = "100 m"}.array_resolution' },
    answers = { [[
projected_baseline     20  123.3   226.7     330  m
array_resolution    8.508   1.38  0.7507  0.5157  mas]], [[
wavelength         1.65    2.2  µm
array_resolution  1.702  2.269  mas]] },
    see = { "along", "at" },
  },
  {
    name = "log", of = "sweep", field = true, subject = "quantities", forms = { "sweep.log(from, to, count)" },
    does = "A sweep in equal ratios.",
    arguments = { { "from, to", "the ends, with units, > 0" }, { "count", "how many points, 2 or more" } },
    result = "a sweep", errors = "ends of different dimensions or not > 0, a count below 2",
    examples = { 'case{wavelength = "1.65 um", projected_baseline = sweep.log("10 m", "1000 m", 3)}.array_resolution' },
    answers = { [[
projected_baseline     10    100    1000  m
array_resolution    17.02  1.702  0.1702  mas]] },
  },
  {
    name = "along", subject = "quantities", forms = { "along(axis, {a, b, ...})" },
    does = "Values along a named axis, to go point by point with others along the same axis. (Two sweeps make a grid instead.)",
    arguments = { { "axis", "its name, a text" }, { "a, b, ...", "numbers, texts or quantities of one dimension" } },
    result = "a quantity with that axis",
    errors = "an empty list, values of different dimensions; two lists along one axis that differ in length, when they meet",
    examples = { 'case{distance = along("star", {"140 pc", "160 pc"}), rim_radius = along("star", {"0.2 au", "0.4 au"})}.rim_radius_angle' },
    answers = { [[
1.429  2.5 mas
  along star, 2 points]] },
  },
  summary { name = "mean", forms = { "mean(q)", "q:mean()", "mean(q, axis)" }, does = "The mean over the draws.",
    arguments = { { "q", "a quantity" }, along_axis }, examples = { { uncertain_radius, "mean(r)" } },
    answers = { "1.923 mas" } },
  summary { name = "median", forms = { "median(q)", "q:median()", "median(q, axis)" }, does = "The median over the draws.",
    arguments = { { "q", "a quantity" }, along_axis }, examples = { { uncertain_radius, "r:median()" } },
    answers = { "1.921 mas" } },
  summary { name = "deviation", forms = { "deviation(q)", "q:deviation()", "deviation(q, axis)" }, does = "The standard deviation over the draws.",
    arguments = { { "q", "a quantity" }, along_axis }, examples = { { uncertain_radius, "r:deviation()" } },
    answers = { "0.1346 mas" } },
  summary { name = "interval", forms = { "interval(q)", "q:interval()", "interval(q, share, axis)" }, does = "The ends of the central 68 % of the draws, or of another share.",
    arguments = { { "q", "a quantity" }, { "share", "between 0 and 1; as of one standard deviation of a normal distribution if left out" }, along_axis },
    result = "two quantities, the lower and the upper end", errors = "a share that isn't between 0 and 1", examples = { { uncertain_radius, "r:interval(0.95)" } },
    answers = { [[
1.66 mas
2.191 mas]] } },
  summary { name = "quantile", forms = { "quantile(q, p)", "q:quantile(p)", "quantile(q, p, axis)" }, does = "The value below which a share of the draws lies.",
    arguments = { { "q", "a quantity" }, { "p", "the share, from 0 to 1" }, along_axis }, errors = "a share outside 0 to 1", examples = { { uncertain_radius, "r:quantile(0.9)" } },
    answers = { "2.094 mas" } },
  summary { name = "chance", see = { "above", "below" }, forms = { "chance(v)", "v:chance()", "chance(v, axis)" },
    does = "The share of draws for which a verdict holds. Undefined draws count in the denominator, as not holding.",
    arguments = { { "v", "a verdict, like c.rim_resolved_by_array or above(a, b)" }, along_axis }, result = "a plain number from 0 to 1",
    errors = "a quantity with a unit, or with axes but not this one", examples = { { uncertain_radius, 'chance(above(r, "2 mas"))' } },
    answers = { "0.2815" } },
  summary { name = "undefined", forms = { "undefined(q)", "q:undefined()", "undefined(q, axis)" }, does = "How many draws are undefined: those that left a relation's domain.",
    arguments = { { "q", "a quantity" }, along_axis }, result = "a plain number", errors = "a quantity with axes but not this one",
    examples = { 'undefined(case{planet_semi_major_axis = "3 ± 1 au", gap_width = "4 au"}.gap_inner_radius)' },
    answers = { "1651" } },
  summary { name = "lowest", forms = { "lowest(q)", "q:lowest()", "lowest(q, axis)" }, does = "The lowest value along an axis.",
    arguments = { { "q", "a quantity" }, along_axis }, examples = { { three_baselines, 'lowest(b, "projected_baseline")' } },
    answers = { "0.5157 mas" } },
  summary { name = "highest", forms = { "highest(q)", "q:highest()", "highest(q, axis)" }, does = "The highest value along an axis.",
    arguments = { { "q", "a quantity" }, along_axis }, examples = { { three_baselines, 'b:highest "projected_baseline"' } },
    answers = { "8.508 mas" } },
  of_two { name = "above", see = { "chance", "both" }, forms = { "above(a, b)" }, does = "The verdict that one quantity is greater than another, point by point. Undefined where one of the two is.",
    result = "a verdict: 1 or 0, at each point", errors = "quantities of different dimensions", examples = { 'above("2 au", "1 au")' },
    answers = { "1" } },
  of_two { name = "below", see = { "chance", "either" }, forms = { "below(a, b)" }, does = "The verdict that one quantity is less than another, point by point. Undefined where one of the two is.",
    result = "a verdict: 1 or 0, at each point", errors = "quantities of different dimensions", examples = { { uncertain_radius, 'below(r, "2 mas")' } },
    answers = { "in 72 % of draws" } },
  of_two { name = "both", forms = { "both(v, w)" }, does = "The verdict that two verdicts hold, point by point.", arguments = { { "v, w", "verdicts" } },
    result = "a verdict", errors = "quantities with units", examples = { { uncertain_radius, 'both(above(r, "1.8 mas"), below(r, "2 mas"))' } },
    answers = { "in 54 % of draws" } },
  of_two { name = "either", forms = { "either(v, w)" }, does = "The verdict that one of two verdicts holds, or both, point by point.", arguments = { { "v, w", "verdicts" } },
    result = "a verdict", errors = "quantities with units", examples = { { uncertain_radius, 'either(below(r, "1.8 mas"), above(r, "2 mas"))' } },
    answers = { "in 46 % of draws" } },
  of_two { name = "least", forms = { "least(a, b)" }, does = "The lesser of two quantities, point by point.", result = "a quantity",
    errors = "quantities of different dimensions", examples = { 'least("2 au", "400e6 km")' },
    answers = { "2 au" } },
  of_two { name = "greatest", forms = { "greatest(a, b)" }, does = "The greater of two quantities, point by point.", result = "a quantity",
    errors = "quantities of different dimensions", examples = { 'greatest("2 au", "400e6 km")' },
    answers = { "2.674 au" } },
  of_one { name = "sqrt", also_of = "quantity", arguments = { { "q", "a quantity of any dimension" } }, errors = "what is no quantity", forms = { "sqrt(q)", "q:sqrt()" }, does = "The square root of a quantity, point by point, of any dimension.",
    result = "a quantity of half the dimension", examples = { "sqrt(4*au*au)" },
    answers = { "2 au" } },
  of_one { name = "abs", also_of = "quantity", arguments = { { "q", "a quantity of any dimension" } }, errors = "what is no quantity", forms = { "abs(q)", "q:abs()" }, does = "A quantity without its sign, point by point.",
    result = "a quantity", examples = { "abs(-3*K)" },
    answers = { "3 K" } },
  of_one { name = "exp", arguments = { { "x", "a plain number, a spread or sweep of such" } }, forms = { "exp(x)" }, does = "e to the power of a plain number, point by point.",
    errors = "a quantity with a unit", examples = { "exp(-0.5)" },
    answers = { "0.6065" } },
  of_one { name = "log", arguments = { { "x", "a plain number, a spread or sweep of such" } }, forms = { "log(x)" }, does = "The natural logarithm of a plain number, point by point.",
    errors = "a quantity with a unit", examples = { "log(2)" },
    answers = { "0.6931" } },
  of_one { name = "log10", arguments = { { "x", "a plain number, a spread or sweep of such" } }, forms = { "log10(x)" }, does = "The decimal logarithm of a plain number, point by point.",
    errors = "a quantity with a unit", examples = { "log10(2)" },
    answers = { "0.301" } },
  of_one { name = "sin", arguments = { { "angle", "an angle with its unit, like \"30 deg\"" } }, forms = { "sin(angle)" }, does = "The sine of an angle, point by point.",
    errors = "a quantity that is no angle", examples = { 'sin "30 deg"' },
    answers = { "0.5" } },
  of_one { name = "cos", arguments = { { "angle", "an angle with its unit, like \"30 deg\"" } }, forms = { "cos(angle)" }, does = "The cosine of an angle, point by point.",
    errors = "a quantity that is no angle", examples = { 'cos "30 deg"' },
    answers = { "0.866" } },
  of_one { name = "tan", arguments = { { "angle", "an angle with its unit, like \"30 deg\"" } }, forms = { "tan(angle)" }, does = "The tangent of an angle, point by point.",
    errors = "a quantity that is no angle", examples = { 'tan "30 deg"' },
    answers = { "0.5774" } },
}
