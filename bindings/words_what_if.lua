-- SPDX-License-Identifier: GPL-3.0-or-later
-- Documentation of what-if: one record for each word.
return {
  {
    name = "compare",
    subject = "what-if",
    forms = { "compare(case, {name = {changes}, ...}, {names})", "compare(case, {{name = ..., changes}, ...}, {names})" },
    does = "Variants of a case side by side, with what differs from the case as it is marked. First stand the givens and recipes that the variants change, "
      .. "then the names asked: medians with error bars, of a verdict the share of draws. Below: recipes that change with the givens, and which condition a verdict fails at. "
      .. "It prints itself at the terminal's width. Changes are givens, false to take one away, and using = {name = \"recipe\"}.",
    arguments = {
      { "case", "the case that is varied; it stands in the first column" },
      { "variants", "a table by name (columns in alphabetical order), or a list of tables with name = ... (in that order)" },
      { "names", "what to ask, a list or one name" },
    },
    result = "a comparison r: r[\"name of a variant\"] is its case; r.rows lists {name, kind = \"given\", \"recipe\" or \"answer\", differs, values = {[column] = quantity}}",
    errors = "no case, no variant, no name to ask; a variant of unknown names, wrong units or a recipe that can't be had; two variants of one name, or one called rows",
    examples = {
      'compare(case { distance = "150 pc", rim_radius = "0.3 au" }, { near = { distance = "75 pc" }, far = { distance = "300 pc" } }, { "rim_size_angle" })',
    },
    answers = { [[
                        as it is    far  near
─────────────────────────────────────────────
* distance [pc]              150  300 *  75 *
─────────────────────────────────────────────
* rim_size_angle [mas]         4    2 *   8 *]] },
  },
  {
    name = "sensitivity",
    of = "case",
    subject = "what-if",
    forms = { "c:sensitivity \"name\"" },
    does = "Which givens carry an answer's error bar, how it follows each, what would turn a verdict. "
      .. "Share of variance: Var(E[answer | given]) / Var(answer) (Sobol' 1993, Mathematical Modelling and Computational Experiment 1, 407), estimated from the case's draws, with its standard error; what is left is what givens do only together. "
      .. "Slope: d ln answer / d ln given with every given at its median, and beside it what 10 % more of the given makes of the answer. "
      .. "Of a verdict, with every given at its median: the value at which each given or assumed value alone turns it, the nearest first, looked for "
      .. "up to a factor of ten to either side and as far as its error bar goes; and which other recipes turn it.",
    arguments = { { "name", "what is asked: anything that follows from the givens" } },
    result = "s: s.givens lists {name, share, error, slope, more, assumed}, assumed values among them for their slopes; s.interactions; s.defined (draws used); of a verdict s.yes (of the median case), "
      .. "s.turns and s.not_turning list {name, kind = \"given\" or \"assumed\", now, at, low, high} (SI), s.recipes {name, by, instead_of, turns}",
    errors = "a name that can't be derived, is given itself, is undefined in all draws, or runs along a sweep",
    examples = { 'case { distance = "150 ± 3 pc", rim_radius = "0.3 ± 0.01 au" }:sensitivity "rim_size_angle"' },
    answers = { [[
rim_size_angle: 4.00 ± 0.15 mas

            share of         10 % more
            variance  slope   makes it  given
──────────────────────────────────────────────────────
rim_radius    73.5 %  +1.00    +10.0 %  0.30 ± 0.01 au
distance      26.5 %  −1.00     −9.1 %  150 ± 3 pc

What several givens do only together carries 0.0 % of the variance; estimated from 10000 draws.
The slope is d ln rim_size_angle / d ln of the given, with every given at its median.]] },
  },
}
