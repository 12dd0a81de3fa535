-- SPDX-License-Identifier: GPL-3.0-or-later
-- The full answers of the prompt: a length with its angle, an ensemble with a histogram, a case in its parts, plain tables and functions in
-- short; sweeps are drawn in sweeps.lua. Each maker returns a list of lines; what is aside in them is marked by show.aside.
local core = ...
local format = core.part "lacuna.format"
local show = core.part "lacuna.show"
local sweeps = core.part "lacuna.sweeps"
local relations = core.part "lacuna.relations"
local text = core.part "lacuna.text"
local textplot = core.part "lacuna.textplot"

local answers = {}

local function add(lines, line) lines[#lines + 1] = line end

-- Ensembles -----------------------------------------------------------------------------------------------------------------------

local MOST_BINS, SAMPLE, MOST, LARGE = 30, 4000, 100000, 10000000

-- The elements of an ensemble, or of a large one that is not stored some thousands spread evenly over it: draws don't depend on each other,
-- so any of them are a fair sample, and each is evaluated by itself without the rest.
local function sample(quantity, size, factor)
  local values = {}
  if size <= MOST then
    values = core.elements(quantity)
    for i, value in ipairs(values) do values[i] = value / factor end
    return values
  end
  for i = 1, SAMPLE do values[i] = core.elements(core.at(quantity, { draw = 1 + (i - 1) * (size - 1) // (SAMPLE - 1) }))[1] / factor end
  return values
end

local function finite(value) return value == value and math.abs(value) < math.huge end

-- Between what the central 99 % of the sampled values lie, or all where these are the same, and their median; nothing where there is no
-- range to show.
local function middle(values)
  local sorted = {}
  for i = 1, #values, math.max(1, #values // 2500) do if values[i] == values[i] then sorted[#sorted + 1] = values[i] end end
  table.sort(sorted)
  local beyond = #sorted // 200
  local low, high = sorted[1 + beyond], sorted[#sorted - beyond]
  if low == high then low, high = sorted[1], sorted[#sorted] end
  if low and finite(low) and finite(high) and high - low > 1e-12 * math.max(math.abs(low), math.abs(high)) then
    return low, high, sorted[(#sorted + 1) // 2]
  end
end

-- So many digits that both ends are told apart well.
local function digits_for(low, high)
  return math.max(3, math.ceil(math.log(math.max(math.abs(low), math.abs(high)) / (high - low), 10)) + 2)
end

-- Whether a histogram is better on a logarithmic scale: over more than a decade and a half, the median nearer to the middle of that one.
local function is_logarithmic(low, high, median)
  if not (low > 0 and high / low > 30) then return false end
  return math.abs(math.log(median / low) / math.log(high / low) - 0.5) < math.abs((median - low) / (high - low) - 0.5)
end

-- "0.129 ▁▂▅█▆▃▁ 0.167 au" over the central 99 % of the draws.
local function histogram_line(quantity)
  local _, _, _, _, size = core.facts(quantity)
  local _, factor, unit = text.display_unit(quantity)
  local values = sample(quantity, size, factor)
  local low, high, median = middle(values)
  if not low then return nil end
  local log = is_logarithmic(low, high, median)
  local bars = textplot.histogram(values, math.min(MOST_BINS, math.ceil(2 * (#values) ^ 0.5)), { low = low, high = high, log = log })
  local digits = digits_for(low, high)
  return ("  %s %s %s"):format(format.number(low, digits), bars, format.with_unit(format.number(high, digits), unit)) ..
    show.aside(("   99 %% of the %sdraws%s"):format(text.undefined_note(quantity) ~= "" and "defined " or "", log and ", logarithmic" or ""))
end

-- The angle beside a length that was asked of a case: what it is on the sky, where the distance is known. Of a very large ensemble it is left
-- out: it would take as long again.
local function on_the_sky(quantity)
  local self, name = core.case_of(quantity), core.facts(quantity)
  if not self or not name or not core.entry(name).on_sky or core.row_of(self, name .. "_angle") == nil then return "" end
  local angle = core.raw(self, name .. "_angle")
  local _, _, _, number, size = core.facts(angle)
  if size > LARGE then return "" end
  if #core.axes(angle) == 0 and number ~= number then return "" end
  local written, note = text.quantity(angle), text.undefined_note(angle) -- as of the length
  return "   " .. written:sub(1, #written - #note) .. " on the sky"
end

local function ensemble(quantity, verdict)
  local written = text.quantity(quantity)
  if verdict or written:find "^in " then return { written } end -- a yes or no of the user's own is no number either
  return { written .. on_the_sky(quantity), histogram_line(quantity) }
end

-- Quantities ----------------------------------------------------------------------------------------------------------------------

-- The recipes on the way to a quantity that with or using has changed in its case; each is said with the first answer that goes by it.
local function changed_lines(quantity, name)
  local self, lines = name and core.case_of(quantity), {}
  local changed = self and core.info(self).changed or {}
  if #changed == 0 then return lines end
  local on_the_way = {}
  for _, step in ipairs(core.steps(self, name)) do on_the_way[step.name] = true end
  for _, change in ipairs(changed) do
    if on_the_way[change.name] and not change.said then
      change.said = true
      add(lines, show.aside(("  %s now by %s, before by %s"):format(change.name, change.after, change.before)))
    end
  end
  return lines
end

-- Where a recipe on the way is used outside the range it holds for. Of a very large ensemble that is left to why: it would take as long again.
local function warning_lines(quantity, name)
  local self, lines = name and core.case_of(quantity), {}
  if not self or select(5, core.facts(quantity)) > LARGE then return lines end
  for _, step in ipairs(core.steps(self, name)) do
    for _, warning in ipairs(step.row and relations.warnings(self, core.row(step.row)) or {}) do add(lines, ("  %s %s"):format(show.marked "beware:", warning)) end
  end
  return lines
end

local function quantity_lines(quantity)
  local name, _, _, _, _, unbound = core.facts(quantity)
  if unbound then return { text.quantity(quantity) } end
  local over, draws = text.axes(quantity)
  local verdict = name and core.entry(name).kind == "verdict"
  if #over == 0 and not draws then return { text.quantity(quantity) .. on_the_sky(quantity) } end
  if #over == 0 then return ensemble(quantity, verdict) end
  if #over == 1 then return sweeps.one(quantity, verdict, over[1]) end
  if #over == 2 then return sweeps.two(quantity, verdict, over) end
  return { text.quantity(quantity), show.aside "  q:at{axis = i} takes one point of an axis" }
end

-- The lines of a quantity.
function answers.quantity(quantity)
  local lines, name = quantity_lines(quantity), (core.facts(quantity))
  for _, more in ipairs { changed_lines, warning_lines } do
    for _, line in ipairs(more(quantity, name)) do add(lines, line) end
  end
  return lines
end

-- Cases ---------------------------------------------------------------------------------------------------------------------------

-- Sentences, wrapped and set in.
local function add_sentences(lines, sentences)
  for _, sentence in ipairs(sentences) do
    for i, part in ipairs(format.wrapped(sentence, show.columns() - 6)) do add(lines, (i == 1 and "    " or "      ") .. part) end
  end
end

-- Pairs of texts as two columns, set in; the second is wrapped where it is too wide.
local function add_pairs(lines, pairs_)
  local widest = 0
  for _, pair in ipairs(pairs_) do widest = math.max(widest, format.width(pair[1])) end
  for _, pair in ipairs(pairs_) do
    for i, part in ipairs(format.wrapped(pair[2], math.max(show.columns() - widest - 6, 24))) do
      add(lines, "    " .. format.pad_right(i == 1 and pair[1] or "", widest) .. "  " .. part)
    end
  end
end

-- What the derived names rest on, as sentences: assumed values, then what recipes suppose, and recipes that the user chose.
local function assumptions(self, asked)
  local used, assumed, supposed, using = {}, {}, {}, core.info(self).using
  for _, name in ipairs(asked) do
    for _, step in ipairs(core.steps(self, name)) do if step.row then used[step.name] = core.row(step.row) end end
  end
  for _, name in ipairs(core.names()) do
    local row = used[name]
    local supposes = row and row.supposes and "supposes " .. row.supposes
    if row and row.kind == "assumed" then
      add(assumed, ("%s = %s %s"):format(show.marked(name), text.brief(core.raw(self, name)),
        show.aside("(" .. relations.source(row) .. (supposes and "; " .. supposes or "") .. ")")))
    elseif using[name] then add(supposed, ("%s by %s, chosen by using %s"):format(show.marked(name), using[name], show.aside(supposes or "")))
    elseif supposes then add(supposed, ("%s by %s %s"):format(name, row.by, show.aside(supposes))) end
  end
  return table.move(supposed, 1, #supposed, #assumed + 1, assumed)
end

-- In a list of many nothing is folded that takes seconds.
local function derived_text(quantity)
  local _, _, _, _, size = core.facts(quantity)
  return size > LARGE and format.number(size) .. " elements, not summed up here" or text.brief(quantity)
end

-- A case: what is given, what was asked of it so far, what rests on assumptions; and the recipes that with or using has changed.
function answers.case(self)
  local info, asked = core.info(self), core.asked(self)
  local lines, changed, derived = { info.target and "case of " .. info.target or "case" }, {}, {}
  local function part(title, put, entries, none)
    add(lines, "  " .. title .. (#entries == 0 and show.aside(": " .. none) or ""))
    put(lines, entries)
  end
  part("given", add_pairs, text.givens(self), "nothing")
  for _, change in ipairs(info.changed or {}) do add(changed, ("%s now by %s, before by %s"):format(change.name, change.after, change.before)) end
  if #changed > 0 then part("recipes that changed", add_sentences, changed) end
  for _, name in ipairs(asked) do add(derived, { name, derived_text(core.raw(self, name)) }) end
  part("derived so far", add_pairs, derived, "nothing yet; any name of the glossary can be asked")
  local rests_on = assumptions(self, asked)
  if #asked > 0 or #rests_on > 0 then part("rests on assumptions", add_sentences, rests_on, "none") end
  return lines
end

-- Plain tables and functions ------------------------------------------------------------------------------------------------------

-- A value in a few characters.
local function short(value, depth)
  if type(value) == "string" then return format.width(value) <= 40 and ("%q"):format(value) or ("%q"):format(value:sub(1, (utf8.offset(value, 37) or 37) - 1)) .. "…" end
  if math.type(value) == "float" then return ("%.6g"):format(value) end
  if type(value) == "table" and not getmetatable(value) then return depth < 2 and answers.table(value, depth + 1) or "{…}" end
  if select("#", core.facts(value)) > 0 then return text.brief(value) end
  if type(value) == "table" or type(value) == "userdata" then return (tostring(value):gsub("\n.*", " …")) end
  return type(value) == "function" and "a function" or tostring(value)
end

-- What a list of one kind holds: "100 numbers".
local function counted(list)
  local kind = type(list[1])
  for _, value in ipairs(list) do if type(value) ~= kind then kind = "value" end end
  return ("%d %ss"):format(#list, kind == "userdata" and "value" or kind)
end

-- A plain table in one line: the beginning, and how much there is.
function answers.table(whole, depth)
  depth = depth or 0
  local parts, wide, room = {}, 0, depth == 0 and show.columns() - 24 or 24
  local function put(part)
    if #parts > 0 and wide + format.width(part) + 2 > room then return false end
    wide = wide + format.width(part) + 2
    parts[#parts + 1] = part
    return true
  end
  for i = 1, #whole do
    if not put(short(whole[i], depth)) then return ("{%s, … %s}"):format(table.concat(parts, ", "), counted(whole)) end
  end
  local keys = {}
  for key in next, whole do if not (math.type(key) == "integer" and key >= 1 and key <= #whole) then keys[#keys + 1] = key end end
  table.sort(keys, function(a, b) return tostring(a) < tostring(b) end)
  for i, key in ipairs(keys) do
    local word = type(key) == "string" and key:find "^[%a_][%w_]*$" and key or "[" .. short(key, 2) .. "]"
    if not put(word .. " = " .. short(whole[key], depth)) then return ("{%s, … %d more}"):format(table.concat(parts, ", "), #keys - i + 1) end
  end
  return "{" .. table.concat(parts, ", ") .. "}"
end

-- A function of ours by its name, with what help says first.
function answers.of_function(value)
  local function named_in(words)
    for name, other in next, words do if other == value and type(name) == "string" then return name end end
  end
  local name, method = named_in(core.part "lacuna.lacuna"), named_in(core.case_methods)
  if name and core.find(name) == name then return ("a function: %s{givens}, %s"):format(name, core.entry(name).meaning) end
  if name then return "a function: " .. tostring(core.part "lacuna.help".help(name)):match "^[^\n]*" end
  return method and ('a function of cases: help "%s" tells more'):format(method) or "a function"
end

return answers
