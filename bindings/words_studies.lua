-- SPDX-License-Identifier: GPL-3.0-or-later
-- The words for studies and their reports. words.lua says what the fields are.
local two_stars = 'stars = study{targets = {{name = "Alder", distance = "140 pc"}, {name = "Birch", distance = "160 ± 4 pc"}}, given = {rim_radius = "0.3 au"}, ask = {"rim_radius_angle"}}'

return {
  {
    name = "study", subject = "studies", forms = { "study{targets = ..., given = {...}, ask = {...}, variants = {...}, ...}" },
    does = "Asks the same of a list of targets. Prints a table with error bars, reasons, recipes and assumptions.",
    arguments = {
      { "targets", "the name of a CSV file whose headers are names with units, like distance [pc] and distance error [pc]; or a list of {name = ..., distance = ...}" },
      { "given", "what is common to all targets, as in case{...}" },
      { "ask", "names, a column each" },
      { "variants", "a list of {name = ..., given = {...}, ask = {...}, using = {...}}: further columns with other givens" },
      { "using", "recipes, as in c:using{...}" },
      { "also", "names that are worked out besides, for sort, where and figures, without a column" },
      { "sort", "a name, or {\"gap_resolved_by_array\", variant = ..., descending = true}; \"name\" is the target's" },
      { "where", "which targets the table shows: {\"rim_size_angle\", above = \"1 mas\"}, of a verdict its share of draws; or a list of such, all of which must hold" },
      { "figures", "a list of tables as figure{...} takes them, with target = ... instead of a case" },
      { "derive", "the target whose derivations the report shows" },
      { "title", "stands above the table" },
      { "csv, latex", "names of files to write" },
    },
    result = "a study: stars.rows, stars:table(), stars:csv(), stars:latex(), stars:values(name), stars:report(folder)",
    errors = "an unknown field or name, a target without a name or with one that exists, a cell that can't be read (with file and line), sweeps, nothing that can be derived",
    examples = { two_stars },
    answers = { [[
          rim radius
               angle
                 mas
────────────────────
Alder  2.143
Birch  1.875 ± 0.047

Given for all targets
  rim_radius = 0.3 au

How far this goes
  10000 draws, seed 0; shares are of all draws; an error bar is the central 68 % of them.
  This estimates geometric feasibility; whether a structure is detected is not assessed. The
    observatory's own documents and staff decide.]] },
  },
  {
    name = "rows", of = "study", field = true, subject = "studies", forms = { "stars.rows" },
    does = "The rows of a study, one a target, for more questions. A row has row.name, row.case, row.variants[name] and row.texts.",
    result = "a list of tables",
    examples = { { two_stars, "stars.rows[2].name, stars.rows[2].case.rim_radius_angle" } },
    answers = { [[
"Birch"
1.875 ± 0.047 mas
  1.77 ▁▁▁▂▂▃▄▅▅▆▇████▇█▇▆▅▅▄▃▃▂▁▁▁▁▁ 2 mas   99 % of the draws]] },
  },
  {
    name = "table", of = "study", subject = "studies", forms = { "stars:table()", "stars:table(columns)" },
    does = "The table and its notes as text.",
    arguments = { { "columns", "how wide it may be; the terminal's width, or 100, if left out" } },
    result = "a text",
    errors = "what is no number of columns",
    examples = { { two_stars, '#stars:table(60) > 0' } },
    answers = { "true" },
  },
  {
    name = "csv", of = "study", subject = "studies", forms = { "stars:csv()" },
    does = "The table as CSV, with units in the headers and errors in columns of their own.",
    result = "a text",
    examples = { { two_stars, "stars:csv()" } },
    answers = { [[
name,rim_radius_angle [mas],rim_radius_angle upper error [mas],rim_radius_angle lower error [mas]
Alder,2.142857,,
Birch,1.875,0.047,0.047
]] },
  },
  {
    name = "latex", of = "study", subject = "studies", forms = { "stars:latex()" },
    does = "The table as LaTeX, with its notes.",
    result = "a text",
    examples = { { two_stars, 'stars:latex():match "begin{(%w+)}"' } },
    answers = { "\"tabular\"" },
  },
  {
    name = "values", of = "study", subject = "studies", forms = { "stars:values(name)", "stars:values(name, variant)" },
    does = "What each row of a study has for a name, whether the table shows it or not. What was not asked is worked out now.",
    arguments = { { "name", "a name of the glossary" }, { "variant", "the variant's name; the study's own givens if left out" } },
    result = "a list with a table for each row: {value =, upper =, lower =} in the glossary's unit, {share =} of a verdict, or {missing = true, reason =}",
    errors = "an unknown name or variant",
    examples = { { two_stars, 'stars:values("rim_radius_angle")[2].value' } },
    answers = { "1.8751422069989" },
  },
  {
    name = "report", of = "study", subject = "report",
    forms = { 'stars:report "DIR"', 'stars:report("DIR", {force = true})' },
    does = "Writes a study's report into a folder. It holds index.html (one page that needs neither network nor script), the table as CSV, Markdown, LaTeX and FITS, the figures, the derivations for one target in LaTeX with a bibliography, a draft of the text on technical feasibility, the study's own file and its inputs, and a manifest with the SHA-256 of each file. The command line does the same with --out DIR. The same study gives the same bytes; SOURCE_DATE_EPOCH sets the date. Derivations are shown for the study's field derive = \"NAME\", or else for the first target of which most is known.",
    arguments = { { "DIR", "the folder's name; it is made where it isn't there" }, { "force", "true: also into a folder that has files already" } },
    result = "a table { folder, files = { names }, missing = { what could not be written, and why } }, which prints itself",
    errors = "a folder that has files already, without force; a folder or file that can't be written: one line, and no manifest",
    examples = { { two_stars, 'stars:report("proposal").folder' } },
    answers = { '"proposal"' },
  },
}
