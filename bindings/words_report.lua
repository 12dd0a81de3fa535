-- SPDX-License-Identifier: GPL-3.0-or-later
-- The words of reports, for help, completion and manual.
local two_stars = 'stars = study{targets = {{name = "Alder", distance = "140 pc"}, {name = "Birch", distance = "160 ± 4 pc"}}, given = {rim_radius = "0.3 au"}, ask = {"rim_radius_angle"}}'
local printed = "          rim radius\n               angle\n                 mas\n────────────────────\nAlder  2.143\nBirch  1.875 ± 0.047\n\nGiven for all targets\n  rim_radius = 0.3 au\n\nHow far this goes\n  10000 draws, seed 0; shares are of all draws; an error bar is the central 68 % of them.\n  This estimates geometric feasibility; whether a structure is detected is not assessed. The\n    observatory's own documents and staff decide.\n"

return {
  {
    name = "report", of = "study", subject = "report",
    forms = { 'stars:report "DIR"', 'stars:report("DIR", {force = true})' },
    does = "Writes a study's report into a folder. It holds index.html (one page that needs neither network nor script), the table as CSV, Markdown, LaTeX and FITS, the figures, the derivations for one target in LaTeX with a bibliography, a draft of the text on technical feasibility, the study's own file and its inputs, and a manifest with the SHA-256 of each file. The command line does the same with --out DIR. The same study gives the same bytes; SOURCE_DATE_EPOCH sets the date. Derivations are shown for the study's field derive = \"NAME\", or else for the first target of which most is known.",
    arguments = { { "DIR", "the folder's name; it is made where it isn't there" }, { "force", "true: also into a folder that has files already" } },
    result = "a table { folder, files = { names }, missing = { what could not be written, and why } }, which prints itself",
    errors = "a folder that has files already, without force; a folder or file that can't be written: one line, and no manifest",
    examples = { { two_stars, 'stars:report("proposal").folder' } },
    answers = { "          rim radius\n               angle\n                 mas\n────────────────────\nAlder  2.143\nBirch  1.875 ± 0.047\n\nGiven for all targets\n  rim_radius = 0.3 au\n\nHow far this goes\n  10000 draws, seed 0; shares are of all draws; an error bar is the central 68 % of them.\n  This estimates geometric feasibility; whether a structure is detected is not assessed. The\n    observatory's own documents and staff decide.\n\"proposal\"" },
  },
}
