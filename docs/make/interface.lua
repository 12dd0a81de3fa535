-- SPDX-License-Identifier: GPL-3.0-or-later
-- The C interface, from the headers' own comments and, for functions that are documented by their row, from the table of relations: as a
-- page and as the manual page lacuna(3).
local headers = require "headers"
local html = require "html"

local interface = {}

local function recipe_of(key)
  local gives, by = key:match "^(.-)/(.*)$"
  local known, name = pcall(glossary.name, gives)
  if not known then return nil end
  for _, recipe in ipairs(name.recipes) do
    if recipe.by == by then return name, recipe end
  end
end

-- What a row says of its function: lines of text.
local function about_row(key)
  local name, recipe = recipe_of(key)
  if not name then return nil end
  local lines = { ("%s: %s (%s)"):format(key, name.meaning, name.unit_si) }
  for _, input in ipairs(recipe.from) do
    local argument = glossary.name(input)
    lines[#lines + 1] = ("  %s (%s%s): %s"):format(input, argument.unit_si, argument.range ~= "any" and ", " .. argument.range or "", argument.meaning)
  end
  if recipe.equation then lines[#lines + 1] = "  " .. recipe.equation end
  lines[#lines + 1] = "  " .. recipe.source_text
  if recipe.supposes then lines[#lines + 1] = "  supposes " .. recipe.supposes end
  if recipe.inverse_of then lines[#lines + 1] = "  the inverse of " .. recipe.inverse_of end
  return lines
end

-- The comment of an item, where it is more than keys that stand for rows; and what the rows say.
local function comments(item)
  local lines = {}
  for _, key in ipairs(headers.keys(item)) do
    for _, line in ipairs(about_row(key) or {}) do lines[#lines + 1] = line end
  end
  local in_words = item.comment and (#lines == 0 or item.comment:find "%.%s" or item.comment:find "%.$")
  return in_words and item.comment or "", table.concat(lines, "\n")
end

-- A verbatim line in roff.
local function roff(line)
  line = line:gsub("\\", "\\e"):gsub("%-", "\\-")
  return line:find "^[.']" and "\\&" .. line or line
end

local WIDTH = 74 -- of a manual page, less its margins

-- A line folded where the pattern finds a place, what follows set in by some more.
local function folded(line, place, indent)
  local lines, further = {}, line:match "^ *" .. (" "):rep(indent)
  while utf8.len(line) > WIDTH do
    local start = line:sub(1, WIDTH)
    local at = start:match(place) or start:match "^.*%(()"
    if not at or at <= #further then break end
    lines[#lines + 1] = line:sub(1, at - 1)
    line = further .. line:sub(at):match "^ *(.*)$"
  end
  lines[#lines + 1] = line
  return lines
end
local after_word, after_comma = "^.*%S()%s+%S*$", "^.*,() %S*.*$"

-- The lines of a text, those that went on in the next one joined to it.
local function joined(text, goes_on)
  local lines = {}
  for line in (text .. "\n"):gmatch "(.-)\n" do
    local last = lines[#lines]
    if last and goes_on(last.piece, line) then last.whole = last.whole .. " " .. line:match "^%s*(.*)$"
    else lines[#lines + 1] = { whole = line } end
    lines[#lines].piece = line
  end
  return lines
end

-- A comment's line is full when it is wrapped; a declaration's goes on after its comma.
local function comment_goes_on(line, next_line) return #line > 100 and next_line:find "%S" and not next_line:find "^%s*%u%l+:" end
local function code_goes_on(line, next_line) return line:find ",$" and next_line:find "^%s%s%s%s" end
local function stands_alone() return false end

local function verbatim(text, goes_on, place, indent)
  local lines = {}
  for _, line in ipairs(joined(text, goes_on)) do
    for _, piece in ipairs(folded(line.whole, place, indent)) do lines[#lines + 1] = roff(piece) end
  end
  return table.concat(lines, "\n")
end

local function man_comment(text) return verbatim(text, comment_goes_on, after_word, text:find "%u%l+:" and 2 or 0) end
local function man_code(code)
  code = code:gsub("(%S)  +", "%1 "):gsub("%s*/%* [%w_]+/[%w_]+[%w_/, ]* %*/", "") -- keys: what the rows say follows
  return verbatim(code, code_goes_on, code:find "/%*" and after_word or after_comma, 4)
end

function interface.man(files, version, date)
  local out = {
    '.\\" SPDX-License-Identifier: GPL-3.0-or-later', (".TH LACUNA 3 %s \"Lacuna %s\""):format(date, version), ".SH NAME",
    "liblacuna \\- what can be resolved around young stars: the C interface", ".SH SYNOPSIS", ".nf", "#include <lacuna.h>", "",
    "cc example.c $(pkg\\-config \\-\\-cflags \\-\\-libs lacuna)", ".fi", ".SH DESCRIPTION",
    "Arguments and results are in SI units, angles in radians. A relation's function gives NaN outside its range; what can fail otherwise returns a",
    ".B lac_status", "and leaves NaN. No function prints, exits or keeps a state of its own. All names begin with", ".BR lac_ \" or \" LAC_ .",
  }
  local function add(...) out[#out + 1] = table.concat { ... } end
  for _, file in ipairs(files) do
    add(".SH <", file.name, ">")
    add(".nf\n", man_comment(file.about), "\n.fi")
    for _, item in ipairs(file.items) do
      add ".PP\n.nf"
      if item.code ~= "" then add("\\fB", man_code(item.code), "\\fR") end
      local comment, rows = comments(item)
      if comment ~= "" then add(".RS 2\n", man_comment(comment), "\n.RE") end
      if rows ~= "" then add(".RS 2\n", verbatim(rows, stands_alone, after_word, 2), "\n.RE") end
      add ".fi"
    end
  end
  add(".SH SEE ALSO\n.BR lacuna (1)")
  return table.concat(out, "\n") .. "\n"
end

function interface.html(files)
  local out = {
    "<h1>The C interface</h1>",
    "<p><code>#include &lt;lacuna.h&gt;</code>, and compile with <code>$(pkg-config --cflags --libs lacuna)</code>. Arguments and results are in SI units, angles in radians. " ..
      "A relation's function gives NaN outside its range; what can fail otherwise returns a <code>lac_status</code> and leaves NaN.</p>",
  }
  local function add(...) out[#out + 1] = table.concat { ... } end
  for _, file in ipairs(files) do
    add("<h2><code>", html.escape(file.name), "</code></h2>")
    add("<p>", html.escape(file.about), "</p>")
    for _, item in ipairs(file.items) do
      if item.code ~= "" then add("<pre>", html.escape(item.code), "</pre>") end
      for _, said in ipairs { comments(item) } do
        if said ~= "" then add('<pre class="small">', html.escape(said), "</pre>") end
      end
    end
  end
  return table.concat(out, "\n")
end

return interface
