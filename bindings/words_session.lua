-- SPDX-License-Identifier: GPL-3.0-or-later
-- The words for the session and for help. words.lua says what the fields are.
return {
  {
    name = "settings", subject = "session", forms = { "settings()", "settings{seed = 0, draws = 10000, threads = n, memory = MiB}" },
    does = "Sets those named, and returns all. They hold for what is made afterwards.",
    arguments = {
      { "seed", "key of the random draws; the same seed gives the same draws, on any number of threads" },
      { "draws", "how many draws stand for an error bar" },
      { "threads", "how many processor cores to use" },
      { "memory", "how much memory arrays may take, in MiB" },
    },
    result = "a table of all settings",
    errors = "an unknown setting, a number out of range",
    examples = { "settings{seed = 7, draws = 1000}.draws" },
    answers = { "1000" },
  },
  {
    name = "show", subject = "session", forms = { "show(value, ...)" },
    does = "The text of values as the prompt writes them.",
    arguments = { { "value", "anything" } },
    result = "a text",
    examples = { { "text = show(5*au)", "text" } },
    answers = { "\"5 au\"" },
  },
  {
    name = "globals", subject = "session", forms = { "globals(environment)" },
    does = "Makes all words, units and names readable as globals, for scripts that load the module. They write lacuna.globals(_ENV). A unit's global can't be assigned to then.",
    arguments = { { "environment", "a table, _ENV mostly" } },
    result = "the environment",
    errors = "what is no table; on assigning to a unit's global later, that it is a unit",
    examples = { "globals{}.au" },
    answers = { "1 au" },
  },
  {
    name = "help", subject = "help", forms = { "help()", 'help "name"', 'help "some words"' },
    does = "A map by subject; one name, word, method or unit; or a search. The search goes through names, synonyms, meanings, recipes and their sources, and the words of the language.",
    arguments = { { "name", 'a name of the glossary or a synonym, a word, a method ("solve", "case:solve"), a unit, a material, a band; or a quantity' } },
    result = "a page that prints itself",
    errors = "what is neither a text nor a quantity with a name",
    examples = { 'help "parallax"' },
    answers = { [[
parallax  ϖ
  annual parallax of the star
  in mas, > 0
  also called plx

  distance, from distance
      ϖ = 1 arcsec (1 pc / d)
      definition

  example
    > case{distance = "140 pc"}.parallax
    7.143 mas]] },
  },
  {
    name = "recipes", subject = "help", forms = { 'recipes "name"', 'recipes("name", c)' },
    does = "All recipes of a name side by side, with equations, sources and ranges of validity. What each gives is worked out in the case, or without one for an invented star whose numbers are told.",
    arguments = { { "name", "a name of the glossary" }, { "c", "a case" } },
    result = "a page that prints itself",
    errors = "an unknown name, a second argument that is no case",
    examples = { 'recipes("array_resolution", case{wavelength = "1.65 um", projected_baseline = "92 m"})' },
    answers = { [[
array_resolution  θ_arr: smallest angle that the array tells apart, by the named criterion

  recipe       value
  half_fringe  1.85 mas   taken here, no range stated
  fringe       3.699 mas  no range stated

  half_fringe, from wavelength, projected_baseline
      θ_arr = λ / (2 B)
      common practice, no source
      supposes the criterion of half a fringe spacing
  fringe, from wavelength, projected_baseline
      θ_arr = λ/B
      common practice, no source
      supposes the criterion of one fringe spacing]] },
    see = { "using", "why" },
  },
  {
    name = "glossary", subject = "help", forms = { "glossary.names()", "glossary.words()", "glossary.subjects()", "glossary.options()" },
    does = "The tables as plain Lua data, for documents and programs of your own.",
    result = "a table, or a list of such",
    examples = { "#glossary.names() > 0" },
    answers = { "true" },
  },
  {
    name = "name", of = "glossary", field = true, subject = "help", forms = { 'glossary.name "gap_width"' },
    does = "All that is known of one name: unit, range, symbol, synonyms, recipes. Equations come as plain text, TeX and MathML.",
    arguments = { { "gap_width", "a name of the glossary" } },
    result = "a table",
    errors = "an unknown name",
    examples = { 'glossary.name("gap_width").recipes[2].equation_tex' },
    answers = { "\"\\\\Delta_{gap} = 0.41 a_p q^{1/2} h_p^{-3/4} \\\\alpha^{-1/4}\"" },
  },
  {
    name = "names", of = "glossary", field = true, subject = "help", forms = { "glossary.names()" },
    does = "The same of all names, in the order of help().",
    result = "a list of tables",
    examples = { "glossary.names()[1].name" },
    answers = { "\"parallax\"" },
  },
  {
    name = "words", of = "glossary", field = true, subject = "help", forms = { "glossary.words()" },
    does = "The words of the language and the methods, with what help tells of each.",
    result = "a list of tables",
    examples = { "glossary.words()[1].name" },
    answers = { "\"quantity\"" },
  },
  {
    name = "subjects", of = "glossary", field = true, subject = "help", forms = { "glossary.subjects()" },
    does = "How help() orders the names; and the words, as a second result.",
    result = "two lists of tables {title =, names =} and {title =, words =}",
    examples = { "glossary.subjects()[1].title" },
    answers = { "\"the star\"" },
  },
  {
    name = "options", of = "glossary", field = true, subject = "help", forms = { "glossary.options()" },
    does = "The program's options with their meanings; none where another program has loaded the module.",
    result = "a list of tables",
    examples = { "type(glossary.options())" },
    answers = { "\"table\"" },
  },
}
