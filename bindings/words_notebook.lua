-- SPDX-License-Identifier: GPL-3.0-or-later
-- The words of the session as a notebook, as help and the manual tell of them. Their examples would write and read files: none here.
return {
  {
    name = "keep",
    subject = "session",
    forms = { 'keep "file.lua"', 'keep("file.lua", true)' },
    does = "Writes what the session did as a script that runs alone and gives the same numbers. Inputs that failed or were interrupted are left "
      .. "out; where one had set a variable before it failed, keep says so, here and in the script. So are calls of help, keep and again: what "
      .. "again and the start-up files ran stands in the script itself. Expressions are printed as the session showed them. The first lines are "
      .. "the version, the date, and seed and draws as the session began with them. Files that the script reads are looked for where it is run.",
    arguments = {
      { "file", "where to; a file of that name is replaced only if this session has written it as it stands" },
      { "true", "replace any" },
    },
    result = "nothing; how many inputs were kept is printed",
    errors = "a file that exists already; one that can't be written; a script, or another input around it, instead of an input of its own",
    examples = {},
    answers = {},
  },
  {
    name = "again",
    subject = "session",
    forms = { 'again "file.lua"' },
    does = "Runs a script's statements in the session, each as if it were typed. Its locals become the session's, and what it prints is shown. "
      .. "An error names the file's line and stops there; what ran before stays. lacuna --start FILE does the same before the first input, and "
      .. "so does the personal start-up file, lacuna/start.lua in the XDG configuration folder (~/.config), for stars, arrays, quantities and "
      .. "relations of your own.",
    arguments = { { "file", "a script of keep's or any other" } },
    result = "nothing",
    errors = "a file that can't be read; one that is no Lua; an error of one of its statements; a script, or another input around it, instead of an input of its own",
    examples = {},
    answers = {},
  },
}
