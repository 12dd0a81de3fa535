-- SPDX-License-Identifier: GPL-3.0-or-later
-- Completion: what can stand at the cursor. The text before it is read as tokens, never run: which brackets are open, and whose, tells
-- what is expected there. Variables are looked up raw, so no code of the user's is called.
--
--   at(input, cursor, environment) -> start, candidates, files
--     cursor       how many bytes of the input stand before it
--     environment  a list of plain tables in which variables are looked up, the first before the second; the session's if left out
--     start        where the word begins, from 1
--     candidates   a list of {text =, meaning =, group =}; one alone has append = what may be put behind it;
--                  common = what all that begin like the word have in common
--     files        true where the word is the name of a file, which others know better
--   find(...): the same, but it may raise
--   listing(candidates, from, columns, lines) -> text, last: a page of them, and the number of the last that is on it
--   environment    the session's list
local core = ...
local lists = core.part "lacuna.complete_lists"
local values = core.part "lacuna.complete_values"
local tokens = core.part "lacuna.tokens"
local format = core.part "lacuna.format"
local string = string
local find, match, gmatch, sub, rep, lower, byte = string.find, string.match, string.gmatch, string.sub, string.rep, string.lower, string.byte
local ipairs, math, next, pcall, select, table, type = ipairs, math, next, pcall, select, table, type

local complete = { environment = core.part "lacuna.session".environment }

-- What is expected ------------------------------------------------------------------------------------------------------------------
--
-- An expectation tells what may stand in a place: text(content, object, unit) -> candidates, word's start in the content: of what a string
-- there may hold, as an argument of a method of that object (a case, or nil) or of a quantity in that unit (or nil); and of a table there:
-- keys(already there) -> candidates; value(key), element: the expectation of a field, of an item.

-- Several lists in one; of equal words the first counts.
local function join(...)
  local all, seen = {}, {}
  for i = 1, select("#", ...) do
    for _, candidate in ipairs((select(i, ...))) do
      if not seen[candidate.text] then all[#all + 1], seen[candidate.text] = candidate, true end
    end
  end
  return all
end

-- A string that is one word of a list.
local function word_of(make)
  return { text = function(_, object) return make(object), 1 end }
end

-- The unit at the end of a string that has a number before it; alone: the string is a unit. like: the unit to be like.
local function unit_in(content, like, alone)
  local start = match(content, "()[%a\x80-\xff]*$")
  local before = sub(content, 1, start - 1)
  if not alone and not find(before, "%d") then return nil end
  if find(before, "%d$") and lower(sub(content, start, start)) == "e" then return nil end -- 2e-11
  return lists.units(not find(before, "[%a][^%d]*[.*/]%*?%s*$") and like or nil), start
end

local name_text = word_of(function() return lists.names() end)
local name_to_explain = word_of(function(case) return lists.members(case) end)
local name_to_reach = word_of(function(case) return lists.members(case, true) end)
local name_list = { element = name_text }
local unit_text = { text = function(content, _, unit) return unit_in(content, unit, true) end }
local band_text, material_text = word_of(lists.bands), word_of(lists.materials)
local help_text = word_of(function()
  return join(lists.words(), lists.names(), lists.units())
end)

-- A number with a unit like this one.
local function number_in(unit)
  return { text = function(content) return unit_in(content, unit) or {}, match(content, "()[%a\x80-\xff]*$") end }
end

-- The value of a given: a number with a unit of its dimension, or the name of an object.
local function value_of(name)
  local found = core.find(name)
  if not found then return {} end
  local entry = lists.entry_of(found)
  if found == "band" then return band_text end
  if entry.kind == "object" then return {} end
  local expected = number_in(entry.unit)
  expected.element = expected -- of a list of them
  return expected
end

local function names_as_keys(there) return lists.names(" = ", there) end
local givens = { keys = names_as_keys, value = value_of }
local choices = {
  keys = function(there) return lists.names_with_choice(" = \"", there) end,
  value = function(name) return word_of(function() return lists.recipes(name) end) end,
}

-- Keys of a table by the form of the word that takes it: "band{wavelength = ..., width = ...}" has wavelength and width.
local function keys_of_form(word)
  local keys, seen = {}, {}
  for _, form in ipairs(lists.forms_of(word)) do
    for key in gmatch(match(form, word .. "(%b{})") or "", "[{,] *([%l_]+) =") do
      if not seen[key] then keys[#keys + 1], seen[key] = key, true end
    end
  end
  return keys
end

-- Those of the function `of`, or of a table inside its own.
local function fields(keys, of, expected)
  return {
    keys = function(there)
      local list = {}
      for _, key in ipairs(keys()) do
        if not there[key] then list[#list + 1] = { text = key, meaning = lists.meaning_of_field(of, key), append = " = " } end
      end
      return list
    end,
    value = function(key) return expected[key] or {} end,
  }
end

-- One word of a table {word = meaning}.
local function choice_of(make)
  return word_of(function()
    local list = {}
    for word, meaning in next, make() do list[#list + 1] = { text = word, meaning = meaning, append = "" } end
    table.sort(list, function(a, b) return a.text < b.text end)
    return list
  end)
end

local function sorted_keys(t)
  local keys = {}
  for key in next, t do keys[#keys + 1] = key end
  table.sort(keys)
  return keys
end

local of_group = { given = givens, using = choices, ask = name_list }
local variant = fields(function() return sorted_keys(core.part "lacuna.study".variant_fields) end, "study", of_group)
local function figure_part() return core.part "lacuna.figure" end
local name_or_list = { text = name_text.text, element = name_text }
local line = fields(function() return sorted_keys(figure_part().line_fields) end, "figure", { show = name_text, given = givens })
local of_figure = fields(function() return sorted_keys(figure_part().fields) end, "figure", {
  show = name_or_list, along = givens, each = givens, against = name_text, level = name_text, verdict = name_text, x = name_text, lines = { element = line },
  bands = { element = band_text }, kind = choice_of(function() return figure_part().kinds end), width = choice_of(function() return figure_part().widths end),
})
local of_study = {
  given = givens, using = choices, ask = name_list, also = name_list, derive = {}, variants = { element = variant }, targets = { element = givens },
  figures = { element = of_figure },
}
-- A variant of compare's: givens, and recipes in using = {...}.
local changes = {
  keys = function(there)
    local list = lists.names(" = ", there)
    if not there.using then list[#list + 1] = { text = "using", meaning = lists.meaning_of_field("study", "using"), append = " = " } end
    return list
  end,
  value = function(key) return key == "using" and choices or value_of(key) end,
}
local variants_by_name = { value = function() return changes end, element = changes }
local function of_form(word, expected) return fields(function() return keys_of_form(word) end, word, expected or {}) end
local fractions = { keys = function(there)
  local list = {}
  for _, candidate in ipairs(lists.materials(" = ")) do if not there[candidate.text] then list[#list + 1] = candidate end end
  return list
end, element = { element = material_text } }
local size = number_in "um"
local sizes = fields(function() return { "smallest", "largest", "index", "median", "width" } end, "dust", { smallest = size, largest = size, median = size })

-- What functions and methods take, argument by argument.
local arguments = {
  case = { givens }, with = { givens }, using = { choices }, why = { name_to_explain }, missing = { name_to_reach }, sensitivity = { name_to_explain },
  solve = { name_text, givens }, compare = { {}, variants_by_name, name_list }, figure = { of_figure }, recipes = { name_text }, help = { help_text },
  study = { fields(function() return sorted_keys(core.part "lacuna.study".fields) end, "study", of_study) },
  band = { { text = band_text.text, keys = of_form("band").keys } }, material = { { text = material_text.text, keys = of_form("material").keys } },
  dust = { of_form("dust", { materials = { text = material_text.text, keys = fractions.keys, element = fractions.element }, sizes = { text = size.text, keys = sizes.keys, value = sizes.value } }) },
  quantity = { of_form("quantity", { unit = unit_text }), unit_text }, as = { unit_text }, value = { unit_text },
  relation = { of_form("relation", { gives = name_text, from = name_list }) },
  settings = { fields(function() return sorted_keys(core.settings()) end, "settings", {}) },
}

local function expected_of_call(callee, argument)
  local name = callee.method or callee.word
  if not name then return nil end
  if arguments[name] then return arguments[name][argument], callee end
  if argument == 1 and core.find(name) == name then return givens end -- hill_radius{...}
end

-- The expectation of the present item of an open bracket; and that of a table, whose bracket is number n of the stack.
local expected_of_table

local function expected_of_item(reading, n)
  local frame = reading.stack[n]
  if not frame or frame.open == "[" then return nil end
  if frame.open == "(" then
    if not values.ends_prefix(reading.tokens[frame.at - 1]) then return nil end
    return expected_of_call(values.find(reading.tokens, reading.partner, frame.at - 1, reading.environment), frame.argument)
  end
  local expected = expected_of_table(reading, n)
  if not expected then return nil end
  if frame.key then return expected.value and expected.value(frame.key) end
  return expected.element
end

-- Whether the token numbered i is what an item of the stack's bracket n begins with.
local function begins_item(reading, i, n)
  local frame, before = reading.stack[n], reading.tokens[i - 1]
  return frame and (frame.start == i - 1 or frame.key and before.text == "=")
end

function expected_of_table(reading, n)
  local frame = reading.stack[n]
  if values.ends_prefix(reading.tokens[frame.at - 1]) then
    return expected_of_call(values.find(reading.tokens, reading.partner, frame.at - 1, reading.environment), 1)
  end
  return begins_item(reading, frame.at, n - 1) and expected_of_item(reading, n - 1) or nil
end

-- What stands at the cursor ---------------------------------------------------------------------------------------------------------

-- Members of what ends in token i.
local function members(reading, i)
  local found = values.find(reading.tokens, reading.partner, i, reading.environment)
  if found.kind == "case" then return lists.members(found.value) end
  local known = lists.fields_of(found.kind or found.word or "")
  if #known > 0 then return known end
  return type(found.value) == "table" and lists.fields(found.value) or {}
end

local function in_string(reading, open)
  local expected, callee
  local i = #reading.tokens + 1 -- the string's own number
  if values.ends_prefix(reading.tokens[i - 1]) then
    expected, callee = expected_of_call(values.find(reading.tokens, reading.partner, i - 1, reading.environment), 1)
  elseif begins_item(reading, i, #reading.stack) then expected, callee = expected_of_item(reading, #reading.stack) end
  local frame = reading.stack[#reading.stack]
  if frame and frame.open == "[" and frame.at == i - 1 and values.ends_prefix(reading.tokens[i - 2]) then
    return members(reading, i - 2), open.first, false, true -- c["rim_radius"]
  end
  if expected and expected.text then
    local object = callee and callee.object
    local candidates, start = expected.text(open.text, core.is_case(object) and object or nil, callee and callee.unit)
    return candidates or {}, open.first + (start or 1) - 1, false, true
  end
  local candidates, start = unit_in(open.text)
  if candidates then return candidates, open.first + start - 1, false, true end
  return {}, open.first, open.quote ~= ""
end

local function after_colon(reading)
  local found = values.find(reading.tokens, reading.partner, #reading.tokens - 1, reading.environment)
  if type(found.value) == "string" then return lists.fields(string, true) end
  local methods = found.kind and lists.methods(found.kind) or {}
  if #methods > 0 then return methods end
  return type(found.value) == "table" and lists.fields(found.value, true) or found.value == nil and lists.all_methods() or {}
end

-- A word by itself: a key where a table wants some, else whatever has a value. Where nothing is typed yet, what is likely.
local function alone(reading, word)
  local frame = reading.stack[#reading.stack]
  if frame and frame.open == "{" and frame.start == #reading.tokens then
    local expected = expected_of_table(reading, #reading.stack)
    if expected and expected.keys then return expected.keys(frame.keys) end
  end
  local last = reading.tokens[#reading.tokens]
  local variables, units = lists.variables(reading.environment, false), lists.units()
  if last and last.kind == "symbol" and (last.text == "*" or last.text == "/") then
    return word == "" and join(units, variables) or join(units, variables, lists.words(), lists.names("{"))
  end
  if word == "" then return join(variables, lists.words()) end
  return join(variables, lists.words(), lists.names("{"), units, lists.keywords(), lists.variables(reading.environment, true))
end

-- Which candidates are meant -----------------------------------------------------------------------------------------------------------

local function selected(candidates, test)
  local list = {}
  for _, candidate in ipairs(candidates) do if test(candidate) then list[#list + 1] = candidate end end
  return list
end

local function begins(whole, part) return sub(whole, 1, #part) == part end

-- What begins like the word; else, by and by, what is also called so, what begins so in other letters, what has the word inside.
local function meant_by(candidates, word)
  local small = lower(word)
  local tests = {
    function(candidate) return begins(candidate.text, word) end,
    function(candidate) return candidate.synonyms and find(" " .. candidate.synonyms .. " ", " " .. word .. " ", 1, true) end,
    function(candidate) return begins(lower(candidate.text), small) end,
    function(candidate) return candidate.synonyms and find(lower(" " .. candidate.synonyms), " " .. small, 1, true) end,
    function(candidate) return #word >= 3 and find(lower(candidate.text), small, 1, true) end,
  }
  for i = 1, #tests do
    local list = selected(candidates, tests[i])
    if #list > 0 then return list end
  end
  return {}
end

-- The beginning that all candidates share, if the word is part of it; else the word, which stays.
local function common_part(candidates, word)
  local common = candidates[1] and candidates[1].text or word
  for i = 2, #candidates do
    local other, length = candidates[i].text, 0
    while length < #common and byte(common, length + 1) == byte(other, length + 1) do length = length + 1 end
    common = sub(common, 1, length)
  end
  return begins(lower(common), lower(word)) and common or word
end

-- What is put behind a word: not what stands there already.
local function append_to(candidate, after, quote)
  local append = candidate.append
  if quote then return begins(after, quote) and "" or quote end
  local first = match(append, "%S")
  if first and match(after, "^%s*(%S)") == first or find(after, "^[%w_]") then return "" end
  return append
end

function complete.find(input, cursor, environment)
  local before, after = sub(input, 1, cursor), sub(input, cursor + 1)
  local list, word, open = tokens.read(before)
  local stack, partner = tokens.brackets(list)
  local reading = { tokens = list, stack = stack, partner = partner, environment = environment or complete.environment }
  local candidates, start, files, closes = {}, word.first
  local last = list[#list]
  if open then
    if open.kind == "comment" then return start, { common = "" } end
    candidates, start, files, closes = in_string(reading, open)
    if files then return start, { common = "" }, true end
  elseif last and last.kind == "symbol" and last.text == "." then candidates = members(reading, #list - 1)
  elseif last and last.kind == "symbol" and last.text == ":" then candidates = after_colon(reading)
  elseif not (last and last.kind == "number" and last.last == start - 1) then candidates = alone(reading, word.text) end
  local written = sub(before, start)
  local meant = meant_by(candidates, written)
  if #meant == 1 then
    local one = meant[1]
    meant[1] = { text = one.text, meaning = one.meaning, group = one.group, append = append_to(one, after, closes and open.quote) }
  end
  meant.common = common_part(meant, written)
  return start, meant
end

-- What goes wrong here must not disturb who types: then there is nothing to offer.
function complete.at(input, cursor, environment)
  local good, start, candidates, files = pcall(complete.find, input, cursor, environment)
  if good then return start, candidates, files end
  return cursor + 1, { common = "" }
end

-- Listing ------------------------------------------------------------------------------------------------------------------------------

local WIDEST = 36 -- of the column of words

-- The lines of one candidate, its word in a column of so many.
local function lines_of(candidate, widest, columns)
  local lines = format.wrapped(candidate.meaning, math.max(columns - widest - 5, 20))
  local head, indent = "  " .. format.pad_right(candidate.text, widest) .. "  ", rep(" ", widest + 4)
  if #lines == 0 or format.width(head) > widest + 4 then table.insert(lines, 1, "") end
  for i = 1, #lines do lines[i] = match((i == 1 and head or indent) .. lines[i], "^(.-)%s*$") end
  return lines
end

function complete.listing(candidates, from, columns, lines)
  if from > #candidates then from = 1 end
  local room, widest = math.max(lines - 2, 2), 0 -- the prompt, and how many more there are
  for i = from, math.min(#candidates, from + room) do widest = math.max(widest, format.width(candidates[i].text)) end
  widest = math.min(widest, WIDEST, columns // 2)
  local page, i, group = {}, from, nil
  while i <= #candidates do
    local more = lines_of(candidates[i], widest, columns)
    if candidates[i].group ~= group then group = candidates[i].group; table.insert(more, 1, group .. ":") end
    if #page > 0 and #page + #more > room then break end
    table.move(more, 1, #more, #page + 1, page)
    i = i + 1
  end
  if i <= #candidates then page[#page + 1] = ("  and %d more: Tab again"):format(#candidates - i + 1)
  elseif from > 1 then page[#page + 1] = "  these were all" end
  return table.concat(page, "\n") .. "\n", i - 1
end

return complete
