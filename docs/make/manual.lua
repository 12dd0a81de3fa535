-- SPDX-License-Identifier: GPL-3.0-or-later
-- The reference manual: every word of the language, every name with its recipes, from the program's own tables.
local html = require "html"
local escape = html.escape

local manual = {}

local function word_id(word) return "word-" .. (word.of and word.of .. "-" or "") .. word.name:gsub("[^%w_]", "-") end
local function title_of(word) return word.of and word.of .. (word.field and "." or ":") .. word.name or word.name end

local function add_word(out, word)
  local function add(...) out[#out + 1] = table.concat { ... } end
  add('<section id="', word_id(word), '">\n<h4>', escape(title_of(word)), "</h4>")
  add("<pre>", escape(table.concat(word.forms, "\n")), "</pre>")
  add("<p>", escape(word.does), "</p>")
  if word.arguments and #word.arguments > 0 then
    add "<dl>"
    for _, argument in ipairs(word.arguments) do add("<dt><code>", escape(argument[1]), "</code></dt><dd>", escape(argument[2]), "</dd>") end
    add "</dl>"
  end
  if word.result then add("<p>Result: ", escape(word.result), ".</p>") end
  if word.errors then add("<p>Errors: ", escape(word.errors), ".</p>") end
  for i, example in ipairs(word.examples or {}) do
    local lines = {}
    for _, line in ipairs(type(example) == "table" and example or { example }) do lines[#lines + 1] = "> " .. line end
    lines[#lines + 1] = word.answers and word.answers[i] ~= "" and word.answers[i] or nil
    add("<pre>", html.conversation(escape(table.concat(lines, "\n"))), "</pre>")
  end
  add "</section>"
end

local function link_to(name) return ('<a href="#name-%s"><code>%s</code></a>'):format(name, name) end

local function add_recipe(out, recipe)
  local function add(...) out[#out + 1] = table.concat { ... } end
  local from = {}
  for i, name in ipairs(recipe.from) do from[i] = link_to(name) end
  add("<li><strong>", escape(recipe.by), "</strong>", recipe.kind == "assumed" and ": " .. escape(recipe.assumes) .. ", assumed" or "",
    #from > 0 and ", from " .. table.concat(from, ", ") or "")
  if recipe.equation_mathml then add('<div class="equation">', recipe.equation_mathml, "</div>") end
  add('<p class="small">', escape(recipe.source_text), "</p>")
  if recipe.supposes then add("<p>Supposes ", escape(recipe.supposes), ".</p>") end
  if recipe.unchecked then add("<p>Not checked: ", escape(recipe.unchecked), ".</p>") end
  for _, range in ipairs(recipe.holds) do
    add("<p>Holds for ", link_to(range.name), (" from %g to %g %s.</p>"):format(range.low, range.high, escape(range.unit_plain)))
  end
  if recipe.inverse_of then add('<p class="small">The inverse of ', escape(recipe.inverse_of), ".</p>") end
  add "</li>"
end

local function add_name(out, name)
  local function add(...) out[#out + 1] = table.concat { ... } end
  add('<section id="name-', name.name, '">\n<h4><code>', name.name, "</code> ", name.symbol_mathml, "</h4>")
  local kind = name.kind == "verdict" and "A verdict: yes, no, or in so many per cent of the draws." or name.kind == "object" and "An object."
    or (name.unit_plain == "" and "A plain number" or "In " .. escape(name.unit_plain)) .. (name.range ~= "any" and ", " .. escape(name.range) or "") .. "."
  add("<p>", escape(name.meaning), ". ", kind, "</p>")
  if #name.synonyms > 0 then add('<p class="small">Also called ', escape(table.concat(name.synonyms, ", ")), ".</p>") end
  if name.on_sky then add('<p class="small">On the sky: ', link_to(name.name .. "_angle"), ".</p>") end
  if #name.recipes == 0 then add "<p>It must be given: no relation gives it.</p>" end
  if name.hint then add("<p>", escape(name.hint), ".</p>") end
  if #name.recipes > 0 then
    add "<ol>"
    for _, recipe in ipairs(name.recipes) do add_recipe(out, recipe) end
    add "</ol>"
  end
  add "</section>"
end

local function capital(title) return (title:gsub("^%l", string.upper)) end

-- The subjects in order, each a list of records with a title: of words and of names.
local function subjects()
  local of_names, of_words = glossary.subjects()
  local words, names = {}, {}
  for i, subject in ipairs(of_words) do
    words[i] = table.move(subject.words, 1, #subject.words, 1, { title = capital(subject.title) })
  end
  for i, subject in ipairs(of_names) do
    names[i] = { title = capital(subject.title) }
    for j, name in ipairs(subject.names) do names[i][j] = glossary.name(name) end
  end
  return words, names
end

local function add_contents(out, groups, id_of, title)
  for _, group in ipairs(groups) do
    local links = {}
    for i, item in ipairs(group) do links[i] = ('<a href="#%s">%s</a>'):format(id_of(item), escape(title(item))) end
    out[#out + 1] = ('<h3>%s</h3>\n<nav class="names" aria-label="%s">%s</nav>'):format(escape(group.title), escape(group.title), table.concat(links, " "))
  end
end

function manual.html()
  local words, names = subjects()
  local out = {
    "<h1>Reference manual</h1>",
    "<p>All words of the language, and all names with their recipes, in the order in which a case tries them. " .. html.WHO_DECIDES ..
      " Stars and instruments in the examples are invented.</p>",
    '<h2 id="contents">Contents</h2>',
  }
  add_contents(out, words, word_id, title_of)
  add_contents(out, names, function(name) return "name-" .. name.name end, function(name) return name.name end)
  for _, part in ipairs { { "The language", words, add_word }, { "Names and recipes", names, add_name } } do
    out[#out + 1] = "<h2>" .. part[1] .. "</h2>"
    for _, group in ipairs(part[2]) do
      out[#out + 1] = "<h3>" .. escape(group.title) .. "</h3>"
      for _, item in ipairs(group) do part[3](out, item) end
    end
  end
  return table.concat(out, "\n")
end

return manual
