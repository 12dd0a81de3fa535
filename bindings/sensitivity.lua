-- SPDX-License-Identifier: GPL-3.0-or-later
-- c:sensitivity(name): what the answer hangs on. Of an answer with an error bar, the share of its variance that each given carries by itself;
-- of every answer, how it follows each given; of a verdict, which single given, assumption or recipe would turn it, and at what value.
local core = ...
local case = core.part "lacuna.case"
local format = core.part "lacuna.format"
local show = core.part "lacuna.show"
local solve = core.part "lacuna.solve"
local tables = core.part "lacuna.table"
local text = core.part "lacuna.text"

local HARDLY = 0.005                -- a share or a slope below it is left out of the table
local ROUGH = 200                   -- draws of a verdict that differ from the others: the shares are rough where there are fewer
local STEP, MORE = 1e-3, 0.1        -- relative: of the differences for a slope; of "10 % more"
local FACTOR = 10                   -- to either side of a value: how far a turn is looked for

-- The median case: every given at its median -----------------------------------------------------------------------------------------

local function has_draws(quantity) return select(2, text.axes(quantity)) ~= nil end

-- Of a spread the median that was given, not that of its draws.
local function median_of(quantity)
  local distribution = case.distribution(quantity)
  if distribution then return core.like(quantity, distribution.median) end
  return has_draws(quantity) and core.median(quantity) or quantity
end

local function number_of(quantity) return quantity and core.elements(quantity)[1] end

-- The case with some givens (SI numbers by name) in place of its own, or besides them.
local function at(self, numbers)
  local givens = {}
  for name, quantity in pairs(core.info(self).givens) do givens[name] = quantity end
  for name, number in pairs(numbers) do givens[name] = core.like(core.given_like(name), number) end
  return solve.with_givens(self, givens)
end

local function median_case(self)
  local givens = {}
  for name, quantity in pairs(core.info(self).givens) do givens[name] = median_of(quantity) end
  return solve.with_givens(self, givens)
end

-- Shares of the variance -------------------------------------------------------------------------------------------------------------

-- A given's draws such that their distribution is a standard one, and which; else the draws as they are.
local function standard(quantity)
  local d = case.distribution(quantity)
  if not d or d.kind == "samples" then return quantity, "any" end
  local function like(number) return core.like(quantity, number) end
  local function ratio(name) return quantity / core.like(quantity, d[name]) end
  if d.kind == "normal" then return (quantity - like(d.a)) / like(d.b), "normal" end
  if d.kind == "uniform" then return (quantity - like(d.a)) / like(d.b - d.a), "uniform" end
  if d.kind == "log_uniform" then return core.log(ratio "a") / math.log(d.b / d.a), "uniform" end
  if d.kind == "log_normal" then return core.log(ratio "a") / d.b, "normal" end
  if d.b == 0 or d.c == 0 then return quantity, "any" end -- lopsided, with half the draws at its median
  local deviation = quantity - like(d.a)
  local is_above = core.above(deviation, like(0))
  return deviation / like(d.b) * is_above + deviation / like(d.c) * (1 - is_above), "normal"
end

-- Whether a given has an error bar above zero.
local function varies(quantity)
  return has_draws(quantity) and number_of(core.lowest(quantity)) < number_of(core.highest(quantity))
end

-- Fills in share and error of the entries whose givens have an error bar; returns what is left for interactions and the defined draws.
local function share_out(answer, entries)
  local varying, inputs, kinds = {}, {}, {}
  for _, entry in ipairs(entries) do
    if entry.varies then
      local i = #varying + 1
      varying[i] = entry
      inputs[i], kinds[i] = standard(entry.value)
    end
  end
  local shares, errors, defined = core.first_order_shares(answer, inputs, kinds)
  if not shares then return nil end
  local left = 1
  for i, entry in ipairs(varying) do
    entry.share, entry.error = shares[i], errors[i]
    left = left - shares[i]
  end
  return left, defined
end

-- Slopes -----------------------------------------------------------------------------------------------------------------------------

local function is_magnitude(name) return core.entry(name).unit == "mag" end

-- d ln y / d ln x at the median case, and y at 10 % more x: its relative change, or the difference of magnitudes. nil where there is none.
local function follow(self, name, given, x, y)
  if x == 0 or is_magnitude(given) then return nil end
  local function answer_at(factor) return number_of(core.raw(at(self, { [given] = x * factor }), name)) end
  local more = answer_at(1 + MORE)
  if is_magnitude(name) then return nil, more - y end
  if y == 0 then return nil end
  local up, down = answer_at(1 + STEP), answer_at(1 - STEP)
  local slope = math.log(up / down) / math.log((1 + STEP) / (1 - STEP))
  return slope == slope and slope or nil, more == more and more / y - 1 or nil
end

-- What would turn a verdict ----------------------------------------------------------------------------------------------------------

-- Where a turn is looked for: a factor to either side, and all that an error bar covers.
local function search(given, value, x)
  local low, high = core.bounds(given)
  if low < 0 or x <= 0 then return solve.bounds(given, core.like(value, x)) end
  local least, most = x / FACTOR, x * FACTOR
  if has_draws(value) then least, most = math.min(least, number_of(core.lowest(value))), math.max(most, number_of(core.highest(value))) end
  return math.max(low, least), math.min(high, most), true
end

-- The value (SI) of a given nearest to the present one at which the median case's verdict turns, and where it was looked for.
local function turn(self, name, given, value)
  local x = number_of(median_of(value))
  local low, high, logarithmic = search(given, value, x)
  local found = core.solve(self, given, name, core.quantity(0.5, "1"), low, high, logarithmic and low > 0, x)
  local place = number_of(found)
  return { name = given, now = x, low = low, high = high, at = place == place and place or nil }
end

-- How far a turn is: in equal ratios where there are any.
local function distance(t)
  if t.at / t.now > 0 then return math.abs(math.log(t.at / t.now)) end
  return math.abs(t.at - t.now) / math.max(math.abs(t.now), math.abs(t.at))
end

local function nearest_first(a, b) return distance(a) < distance(b) end

-- Turns of all givens and assumed values along a verdict's chain: those that are found, the nearest first, and those that are not.
local function turns_of(self, median, name, entries)
  local found, not_found = {}, {}
  local function take(t, kind)
    t.kind = kind
    local list = t.at and found or not_found
    list[#list + 1] = t
  end
  for _, entry in ipairs(entries) do take(turn(median, name, entry.name, entry.value), "given") end
  for _, row in ipairs(case.assumptions(self, name)) do
    local value = core.raw(median, row.gives)
    take(turn(at(median, { [row.gives] = number_of(value) }), name, row.gives, value), "assumed")
  end
  table.sort(found, nearest_first)
  return found, not_found
end

-- The other recipes along the chain: a list of {name, by, instead_of, turns = true, false, or nil where undefined}.
local function recipes_of(median, name, yes)
  local list = {}
  for i, other in ipairs(case.over_recipes(median, name)) do
    local verdict = number_of(other.value)
    list[i] = { name = other.name, by = other.by, instead_of = other.instead_of }
    if verdict == verdict then list[i].turns = (verdict == 1) ~= yes end
  end
  return list
end

-- Words ------------------------------------------------------------------------------------------------------------------------------

local function share_text(entry)
  if not entry.share then return entry.varies and "—" or "no error bar" end
  local value, error_bar = ("%.1f"):format(100 * entry.share), ("%.1f"):format(100 * entry.error)
  return error_bar == "0.0" and value .. " %" or value .. " ± " .. error_bar .. " %" -- no bar: below 0.05 %
end

local function signed(pattern, value)
  local written = pattern:format(math.abs(value))
  return (not written:find "[1-9]" and "" or value < 0 and "−" or "+") .. written
end

local function change_text(entry, name)
  if not entry.more then return "—" end
  if is_magnitude(name) then return signed("%.2f", entry.more) .. " mag" end
  return signed("%.1f", 100 * entry.more) .. " %"
end

local function short(written) return (written:gsub("^from (.-) to (.-), l?o?g?%-?uniform$", "%1 … %2")) end

local function hardly_matters(entry)
  return (entry.share or 0) < HARDLY and (not entry.slope or math.abs(entry.slope) < HARDLY) and math.abs(entry.more or 0) < HARDLY
end

local function by_weight(a, b)
  if (a.share or -1) ~= (b.share or -1) then return (a.share or -1) > (b.share or -1) end
  local x, y = math.abs(a.slope or 0), math.abs(b.slope or 0)
  if x ~= y then return x > y end
  return a.name < b.name
end

local function list_or_count(names)
  if #names <= 6 then return table.concat(names, ", ") end
  return table.concat(names, ", ", 1, 5) .. (" and %d more"):format(#names - 5)
end

-- The table of shares and slopes.
local function shares_table(s)
  local verdict = core.entry(s.name).kind == "verdict"
  local rows, left_out, lines, whole = {}, {}, {}, { columns = {}, rows = {}, notes = {} }
  for _, entry in ipairs(s.givens) do
    if verdict and not entry.varies then -- its turn says what it does
    elseif hardly_matters(entry) then left_out[#left_out + 1] = entry.name
    elseif s.defined or not verdict then rows[#rows + 1] = entry end
  end
  local function column(heading, text_of, left)
    local at_column = #whole.columns + 1
    whole.columns[at_column] = { heading = heading, left = left }
    for i, entry in ipairs(rows) do
      whole.rows[i] = whole.rows[i] or { name = entry.name, cells = {} }
      whole.rows[i].cells[at_column] = { text = text_of(entry) }
    end
  end
  if s.defined then column("share of variance", share_text) end
  local with_slope = not verdict and not is_magnitude(s.name)
  if with_slope then column("slope", function(entry) return entry.slope and signed("%.2f", entry.slope) or "—" end) end
  if not verdict then column("10\u{a0}%\u{a0}more makes\u{a0}it", function(entry) return change_text(entry, s.name) end) end
  column("given", function(entry) return entry.assumed and text.quantity(entry.value) .. ", assumed" or short(text.given(s.case, entry.name)) end, true)
  local _, _, _, _, size = core.facts(s.answer)
  if s.defined then
    lines[#lines + 1] = ("What several givens do only together carries %.1f %% of the variance; estimated from %d draws%s."):format(100 * math.max(0, s.interactions),
      s.defined, s.defined < size and (", %s being undefined"):format(format.percent(1 - s.defined / size)) or "")
  end
  if s.defined and verdict then
    local rarer = math.floor(size * math.min(number_of(core.chance(s.answer)), 1 - number_of(core.chance(s.answer))) + 0.5)
    if rarer < ROUGH then lines[#lines + 1] = ("Only %d draw%s otherwise than the others: the shares are rough."):format(rarer, rarer == 1 and " is" or "s are") end
  end
  if with_slope then lines[#lines + 1] = "The slope is d ln " .. s.name .. " / d ln of the given, with every given at its median." end
  if #left_out > 0 and (s.defined or not verdict) then lines[#lines + 1] = (verdict and "Less than 0.5 % each: " or "Hardly matters: ") .. list_or_count(left_out) .. "." end
  return whole, lines
end

-- "above 1.683 um": the side of a turn on which the verdict is the other one.
local function turn_text(t, yes)
  local value = solve.write(t.name, t.at)
  if yes then return (t.at >= t.now and "above " or "below ") .. value end
  return value .. (t.at >= t.now and " or more" or " or less")
end

local function by_text(t)
  local ratio = t.at / t.now
  if not (ratio > 0) then return "—" end
  if ratio >= 2 then return "× " .. format.number(ratio, 2) end
  if ratio <= 0.5 then return "÷ " .. format.number(1 / ratio, 2) end
  return (ratio < 1 and "−" or "+") .. format.percent(math.abs(ratio - 1))
end

local function recipe_text(other) return ("%s by %s instead of %s"):format(other.name, other.by, other.instead_of) end

local function turns_table(s)
  local to = s.yes and "no" or "yes"
  local whole = { columns = {}, rows = {}, notes = {} }
  if #s.turns > 0 then whole.columns = { { heading = "now" }, { heading = "turns", left = true }, { heading = "by" }, { heading = "", left = true } } end
  for i, t in ipairs(s.turns) do
    local cells = { solve.write(t.name, t.now), turn_text(t, s.yes), by_text(t), t.kind == "assumed" and "assumed" or "" }
    for j, cell in ipairs(cells) do cells[j] = { text = cell } end
    whole.rows[i] = { name = t.name, cells = cells }
  end
  local turning, others, undefined = {}, {}, {}
  for _, other in ipairs(s.recipes) do
    local list = other.turns and turning or other.turns == false and others or undefined
    list[#list + 1] = recipe_text(other)
  end
  for _, t in ipairs(s.not_turning) do
    others[#others + 1] = ("%s between %s and %s%s"):format(t.name, solve.write(t.name, t.low), solve.write(t.name, t.high), t.kind == "assumed" and " (assumed)" or "")
  end
  local function note(heading, lines) if #lines > 0 then whole.notes[#whole.notes + 1] = { heading = heading, lines = lines } end end
  note(("A recipe that turns it to %s"):format(to), turning)
  note("Doesn't turn it", others)
  note("Leaves it undefined", undefined)
  return whole
end

local function answer_lines(s)
  local lines = { ("%s: %s"):format(s.name, text.quantity(s.case[s.name])) }
  if s.constant then lines[2] = "All draws are the same: no error bar makes a difference to it."
  elseif not s.defined then
    local _, _, _, _, size = core.facts(s.answer)
    lines[2] = size == 1 and "One number without an error bar: there is no spread to share out."
      or "There are too few draws for so many givens to share its spread out; settings{draws = 10000} makes more."
  end
  return lines
end

local metatable = { __name = "sensitivity" }
function metatable.__tostring(s)
  local pages = { show.page(answer_lines(s)) }
  local shares, lines = shares_table(s)
  if #shares.rows > 0 then pages[#pages + 1] = tables.text(shares) end
  if #lines > 0 then pages[#pages + 1] = show.page(lines) end
  if s.turns then
    local yes = s.yes and "yes" or "no"
    local whole = turns_table(s)
    whole.title = ("With every given at its median it is %s."):format(yes)
    if #s.turns > 0 then whole.title = whole.title .. (" What alone would make it %s, the nearest first:"):format(s.yes and "no" or "yes") end
    pages[#pages + 1] = tables.text(whole)
  end
  return table.concat(pages, "\n\n")
end

-- c:sensitivity(name) ----------------------------------------------------------------------------------------------------------------

local function check_axes(name, answer)
  local axis = text.axes(answer)[1]
  if axis then core.raise(("sensitivity wants one case; %s runs along %s here: give one value, like c:with{%s = ...}"):format(name, axis.name, axis.name)) end
end

-- The givens along the chain of a name, each with its value. (Assumed values join them where they have a slope.)
local function entries_of(self, name)
  local entries = {}
  for _, step in ipairs(core.steps(self, name)) do
    local value = not step.row and core.info(self).givens[step.name] -- nil for objects
    if value then entries[#entries + 1] = { name = step.name, value = value, varies = varies(value) } end
  end
  return entries
end

function core.case_methods.sensitivity(self, word)
  local name = case.name_of(word, "sensitivity: ")
  local taken = core.row_of(self, name)
  if taken == nil then core.raise(core.part "lacuna.missing".not_had(self, name)) end
  if core.entry(name).kind == "object" then core.raise(("sensitivity: %s is an object; ask for a quantity"):format(name)) end
  if taken == false then core.raise(("sensitivity: %s is given; ask for a name that follows from the givens"):format(name)) end
  local answer = core.raw(self, name)
  check_axes(name, answer)
  local _, _, _, _, size = core.facts(answer)
  if number_of(core.undefined(answer)) == size then
    core.raise(size == 1 and core.part "lacuna.why".undefined(self, name) or ("sensitivity: %s is undefined in all draws"):format(name))
  end
  local s = { name = name, case = self, answer = answer, givens = entries_of(self, name) }
  local median = median_case(self)
  local y = number_of(core.raw(median, name))
  local verdict = core.entry(name).kind == "verdict"
  if has_draws(answer) then
    if number_of(core.lowest(answer)) == number_of(core.highest(answer)) then s.constant = true
    else s.interactions, s.defined = share_out(answer, s.givens) end
  end
  if not verdict then
    for _, row in ipairs(case.assumptions(self, name)) do
      s.givens[#s.givens + 1] = { name = row.gives, value = core.raw(median, row.gives), varies = false, assumed = true }
    end
    for _, entry in ipairs(s.givens) do entry.slope, entry.more = follow(median, name, entry.name, number_of(median_of(entry.value)), y) end
  elseif y == y then
    s.yes = y == 1
    s.turns, s.not_turning = turns_of(self, median, name, s.givens)
    s.recipes = recipes_of(median, name, s.yes)
  end
  table.sort(s.givens, by_weight)
  return setmetatable(s, metatable)
end

return {}
