-- SPDX-License-Identifier: GPL-3.0-or-later
-- What a figure shows, as plain numbers in the glossary's units: from a case or a study, nothing of how it is drawn.
--
--   axis     { name, words, unit (VOUnits), unit_text, factor, verdict (nil, "share" of the draws, or "yes or no" where there are none), log }
--   curve    { x, y, values = {x ...}, series = { { name, label, values, low68, high68, low95, high95 } }, levels = { { name, values, constant } }, marks }
--   map      { x, y, z, x_values, y_values, values = { a list of z along x for each y }, contours = { { level, dashed, lines } } }
--   plane    { x, y, points = { { name, x, x_upper, x_lower, y, y_upper, y_lower, share } }, lines = { { label, words, x = {...}, y = {...} } } }
local core = ...
local case = core.part "lacuna.case"
local conditions = core.part "lacuna.conditions"
local text = core.part "lacuna.text"
local format = core.part "lacuna.format"
local contour = core.part "lacuna.contour"

local data = {}
local WIDE = 30 -- results that span more than this factor get a logarithmic axis; a sweep gets one where it goes in equal ratios
local HALF, LIKELY = 0.5, { 0.16, 0.84 } -- where a verdict turns, and the ends of the central 68 %

local function complain(form, ...) core.raise("figure: " .. form:format(...)) end

-- Axes ----------------------------------------------------------------------------------------------------------------------------

local english = core.part "lacuna.english"
local words_of = english.words_of

function data.axis(name)
  if core.find(name) ~= name then return { name = name, words = words_of(name), unit = "1", unit_text = "", factor = 1 } end -- a sweep that no given has named
  local entry = core.entry(name)
  return {
    name = name, words = words_of(name), unit = entry.unit, unit_text = text.unit_of(name), factor = entry.factor,
    verdict = entry.kind == "verdict" and "share" or nil,
  }
end

local function in_equal_ratios(values)
  local ratio = #values > 2 and values[2] / values[1]
  if not ratio or values[1] <= 0 or math.abs(ratio - 1) < 1e-9 then return false end
  for i = 2, #values do
    if math.abs(values[i] / values[i - 1] / ratio - 1) > 1e-6 then return false end
  end
  return true
end

-- Least and greatest of lists of numbers; NaN is passed over. Nothing where there are none.
function data.range(...)
  local low, high
  for _, values in ipairs { ... } do
    for i = 1, #values do
      local value = values[i]
      if value == value then low, high = math.min(low or value, value), math.max(high or value, value) end
    end
  end
  return low, high
end

local function is_wide(values)
  local low, high = data.range(values)
  return low ~= nil and low > 0 and high > WIDE * low
end

-- Whether an axis is logarithmic: as asked, else by its numbers.
local function is_log(asked, letter, by_itself)
  if asked then return asked:find(letter, 1, true) ~= nil end
  return by_itself
end

-- Sweeps --------------------------------------------------------------------------------------------------------------------------

-- The sweeps among a case's givens, in the glossary's order.
local function sweeps_of(self)
  local found, seen, givens = {}, {}, core.info(self).givens
  for _, name in ipairs(core.names()) do
    for _, axis in ipairs(givens[name] and text.axes(givens[name]) or {}) do
      if not seen[axis.name] then found[#found + 1], seen[axis.name] = axis, true end
    end
  end
  return found
end
data.sweeps_of = sweeps_of

-- The points of a sweep in rising order: its values in the axis's unit, and where each stands in the sweep.
local function rising(sweep, axis)
  local order, values = {}, {}
  for i = 1, sweep.length do order[i] = i end
  local coordinates = sweep.values or order
  table.sort(order, function(a, b) return coordinates[a] < coordinates[b] end)
  for i, place in ipairs(order) do values[i] = coordinates[place] / axis.factor end
  return values, order
end

-- A function of the points (one an axis, by its name) that gives a quantity's element there; it may lack axes.
local function reader(quantity, factor)
  local axes, elements = core.axes(quantity), core.elements(quantity)
  return function(points)
    local place = 0
    for _, axis in ipairs(axes) do place = place * axis.length + points[axis.name] - 1 end
    return elements[place + 1] / factor
  end
end

local function along(quantity, factor, sweep, order)
  local read, values = reader(quantity, factor), {}
  for i, place in ipairs(order) do values[i] = read { [sweep.name] = place } end
  return values
end

-- Curves --------------------------------------------------------------------------------------------------------------------------

local function draws_of(quantity) return (select(2, text.axes(quantity))) end

-- The share of a quantity's elements that are undefined: quantiles pass them over, so that it has to be said.
local function undefined_share(quantity, draws)
  local count, sum = draws and core.undefined(quantity) or quantity, 0
  local elements = core.elements(count)
  for _, value in ipairs(elements) do sum = sum + (draws and value / draws or value ~= value and 1 or 0) end
  return sum / #elements
end

-- A quantity of a case, its elements kept where there is room, since quantiles are found in several passes.
local function kept(self, name)
  local quantity = self[name]
  local _, _, _, _, size = core.facts(quantity)
  return size * 8 <= core.settings().memory * 1048576 / 8 and core.store(quantity) or quantity
end

-- One name along the sweep: a verdict's share, or the median and its bands.
local function series_of(self, name, axis, sweep, order)
  local quantity = kept(self, name)
  local draws = draws_of(quantity)
  if axis.verdict then
    local shares = draws and core.chance(quantity) or quantity
    return { name = name, draws = draws, values = along(shares, 1, sweep, order) }
  end
  local lists = {}
  for i, part in ipairs(draws and { core.five_of(quantity) } or { quantity }) do lists[i] = along(part, axis.factor, sweep, order) end
  if not draws then return { name = name, values = lists[1], undefined = undefined_share(quantity) } end
  return {
    name = name, draws = draws, undefined = undefined_share(quantity, draws),
    low95 = lists[1], low68 = lists[2], values = lists[3], high68 = lists[4], high95 = lists[5],
  }
end

local verdicts -- all names of verdicts, found once

-- What the verdicts that a case can have want of a quantity: a list of { name, factor, verdict }: the quantity is compared with name / factor.
local function wanted_by_verdicts(self, name)
  if not verdicts then
    verdicts = {}
    for _, other in ipairs(core.names()) do if core.entry(other).kind == "verdict" then verdicts[#verdicts + 1] = other end end
  end
  local found, seen = {}, {}
  for _, verdict in ipairs(verdicts) do
    local row = core.row_of(self, verdict)
    for _, c in ipairs(conditions.of_row(row and core.row(row))) do
      if c.left == name and not seen[c.right] then
        seen[c.right] = true
        found[#found + 1] = { name = c.right, factor = c.factor, verdict = verdict }
      end
    end
  end
  return found
end

local function constant(values)
  for i = 2, #values do if values[i] ~= values[1] then return nil end end
  return values[1]
end

local function level_of(quantity, name, axis, sweep, order, factor)
  if draws_of(quantity) then quantity = core.median(quantity) end
  local values = along(quantity, axis.factor * factor, sweep, order)
  return { name = name, factor = factor, values = values, constant = constant(values) }
end

-- The levels to draw: what the user says, else what the verdicts want.
local function levels_of(f, self, names, axis, sweep, order)
  if f.level == false then return {} end
  if f.level ~= nil then
    local name = type(f.level) == "string" and core.find(f.level)
    local value = name and self[name] or axis.verdict and core.quantity(f.level) or core.given(names[1], f.level)
    local _, wanted = core.dimension(core.unit(axis.unit))
    local _, got = core.dimension(value)
    if wanted ~= got then
      local kind = axis.unit == "1" and "a plain number" or "a quantity in " .. axis.unit_text
      complain("level wants %s, as %s is; got %s", kind, names[1], core.shown(f.level))
    end
    return { level_of(value, name or nil, axis, sweep, order, 1) }
  end
  local levels = {}
  if #names == 1 and not axis.verdict then
    for i, wanted in ipairs(wanted_by_verdicts(self, names[1])) do levels[i] = level_of(self[wanted.name], wanted.name, axis, sweep, order, wanted.factor) end
  end
  return levels
end

-- Words that all names begin or end with, and what is left of each: "flux density", { "stellar", "rim" }.
local function common_words(names)
  local lists, first = {}, {}
  for i, name in ipairs(names) do
    lists[i] = {}
    for word in name:gmatch "[^_]+" do table.insert(lists[i], word) end
  end
  local function all_have(at)
    for _, list in ipairs(lists) do
      if #list < 2 or at(list) ~= at(lists[1]) then return false end
    end
    return true
  end
  while all_have(function(list) return list[#list] end) do
    table.insert(first, 1, lists[1][#lists[1]])
    for _, list in ipairs(lists) do list[#list] = nil end
  end
  local rest = {}
  for i, list in ipairs(lists) do rest[i] = table.concat(list, " ") end
  return table.concat(first, " "), rest
end

-- One axis for all names shown; they must be of one dimension.
local function shared_axis(names)
  local axis = data.axis(names[1])
  if #names == 1 then return axis, { axis.words } end
  local common, rest = common_words(names)
  local _, wanted = core.dimension(core.unit(axis.unit))
  for i = 2, #names do
    local other = data.axis(names[i])
    local _, got = core.dimension(core.unit(other.unit))
    if got ~= wanted or other.verdict ~= axis.verdict then complain("show: %s and %s can't stand on one axis", names[1], names[i]) end
  end
  local shared = common:gsub(" ", "_")
  axis.name, axis.words = core.find(shared) == shared and shared or nil, common ~= "" and common or (core.dimension(core.unit(axis.unit)))
  return axis, rest
end

-- The cases of which a curve each is drawn: { case, label of the one given that differs }.
local function cases_of(f)
  if not f.each then return { { case = f.case } } end
  local name, list = next(f.each)
  local cases = {}
  for i, value in ipairs(list) do
    local one = f.case:with { [name] = value }
    local given = core.info(one).givens[name] or core.info(one).objects[name]
    cases[i] = { case = one, name = name, value = text.given(one, name), given = given }
  end
  return cases
end

-- Where spectral bands lie on an axis of wavelength: { label, at, low, high }.
local function marks_of(bands, axis)
  local marks = {}
  for i, named in ipairs(bands or {}) do
    local band = core.band(named)
    local at = core.value(band.wavelength, axis.unit)
    local half = band.width and core.value(band.width, axis.unit) / 2
    marks[i] = { label = type(named) == "string" and named or band.name or "", at = at, low = half and at - half or at, high = half and at + half or at }
  end
  return marks
end

function data.curve(f, sweep)
  local x = data.axis(sweep.name)
  local values, order = rising(sweep, x)
  local y, labels = shared_axis(f.show)
  local series, all = {}, {}
  for _, one in ipairs(cases_of(f)) do
    for i, name in ipairs(f.show) do
      local s = series_of(one.case, name, y, sweep, order)
      s.label, s.each = labels[i], one.name and { name = one.name, value = one.value } or nil
      series[#series + 1] = s
      table.move(s.values, 1, #s.values, #all + 1, all)
    end
  end
  if y.verdict and not series[1].draws then y.verdict = "yes or no" end
  if not data.range(all) then complain("%s is undefined all along %s", f.show[1], sweep.name) end
  x.log, y.log = is_log(f.log, "x", in_equal_ratios(values)), not y.verdict and is_log(f.log, "y", is_wide(all))
  if f.bands and x.name ~= "wavelength" then complain("bands are marked along wavelength; this goes along %s", sweep.name) end
  return { x = x, y = y, values = values, series = series, levels = levels_of(f, f.case, f.show, y, sweep, order), marks = marks_of(f.bands, x), draws = series[1].draws }
end

-- Maps ----------------------------------------------------------------------------------------------------------------------------

-- By how much a verdict without draws is reached: the least ratio of its conditions' sides, at least 1 where it says yes.
local function ratio_of(self, verdict)
  local least
  for _, c in ipairs((conditions.of(self, verdict))) do
    local ratio = c.greater and c.margin or 1 / c.margin
    least = least and core.least(least, ratio) or ratio
  end
  return least
end

local function grid(quantity, factor, across, x_order, up, y_order)
  local read, rows = reader(quantity, factor), {}
  for j, y_place in ipairs(y_order) do
    rows[j] = {}
    for i, x_place in ipairs(x_order) do rows[j][i] = read { [across.name] = x_place, [up.name] = y_place } end
  end
  return rows
end

-- Where the verdict turns: half of the draws, or, without draws, where its last condition is just met.
local function turning(f, verdict, d, on_grid)
  local quantity = f.case[verdict]
  local draws = draws_of(quantity)
  local turns_by = draws and core.chance(quantity) or ratio_of(f.case, verdict) or quantity
  local rows, contours = on_grid(turns_by, 1), {}
  local function add(level, dashed)
    local lines = contour.lines(d.x_values, d.y_values, rows, level, d.x.log, d.y.log)
    contours[#contours + 1] = { level = level, dashed = dashed, lines = lines, share = draws ~= nil }
  end
  add(draws and HALF or 1, false)
  for _, level in ipairs(draws and LIKELY or {}) do add(level, true) end
  return contours
end

function data.map(f, sweeps)
  local name = f.show[1]
  if #f.show > 1 then complain("a map shows one name; got %s", table.concat(f.show, ", ")) end
  if f.each then complain "a map has no room for each" end
  local across, up = sweeps[1], sweeps[2]
  if f.x and f.x ~= across.name then across, up = up, across end
  if f.x and f.x ~= across.name then complain("x wants one of the sweeps, %s or %s; got %s", across.name, up.name, f.x) end
  local d = { x = data.axis(across.name), y = data.axis(up.name), z = data.axis(name) }
  local x_order, y_order
  d.x_values, x_order = rising(across, d.x)
  d.y_values, y_order = rising(up, d.y)
  if #d.x_values < 2 or #d.y_values < 2 then complain "a map wants two points or more along each sweep" end
  d.x.log, d.y.log = is_log(f.log, "x", in_equal_ratios(d.x_values)), is_log(f.log, "y", in_equal_ratios(d.y_values))
  local function on_grid(quantity, factor) return grid(quantity, factor, across, x_order, up, y_order) end
  local quantity = f.case[name]
  d.draws = draws_of(quantity)
  if d.z.verdict and not d.draws then d.z.verdict = "yes or no" end
  local shown = d.draws and (d.z.verdict and core.chance(quantity) or core.median(quantity)) or quantity
  d.values, d.undefined = on_grid(shown, d.z.factor), not d.z.verdict and undefined_share(quantity, d.draws) or nil
  d.z.low, d.z.high = data.range(table.unpack(d.values))
  if not d.z.low then complain("%s is undefined all over the map", name) end
  d.z.log = not d.z.verdict and d.z.low > 0 and d.z.high > WIDE * d.z.low
  local wanted = wanted_by_verdicts(f.case, name)[1]
  d.verdict = d.z.verdict and name or f.verdict or wanted and wanted.verdict
  d.contours = d.verdict and turning(f, d.verdict, d, on_grid) or {}
  return d
end

-- Planes --------------------------------------------------------------------------------------------------------------------------

local function case_of(row, variant) return variant and row.variants[variant] or row.case end

function data.case_of_target(study, target, variant)
  for _, row in ipairs(study.rows) do
    if target == nil or row.name == target then
      if variant and not row.variants[variant] then complain('no variant "%s" in the study', variant) end
      return case_of(row, variant), row.name
    end
  end
  local names = {}
  for i, row in ipairs(study.rows) do names[i] = row.name end
  complain('no target "%s" in the study; there %s %s', tostring(target), #names == 1 and "is" or "are", english.list(names))
end

-- Common givens as they were written: "2 ± 0.5 Mjup".
function data.written(study, variant)
  local all = {}
  for _, group in ipairs(study.groups) do
    if group.name == nil or group.name == variant then
      for name, words in pairs(group.written or {}) do all[name] = words end
    end
  end
  return all
end

-- What all targets share: the case of the study's own givens and those of the variant; what was set from outside goes before.
local function common_case(study, variant, changes)
  for _, group in ipairs(study.groups) do
    if group.name == variant then
      local givens = {}
      for name, quantity in pairs(group.givens) do givens[name] = quantity end
      for name, quantity in pairs(study.set and study.set.givens or {}) do givens[name] = quantity end
      return case.make({}, givens, group.using, { objects = group.objects }):with(changes)
    end
  end
end

local function points_of(f, study)
  local xs, ys = study:values(f.against, f.variant), study:values(f.show[1], f.variant)
  local verdicts = f.verdict and study:values(f.verdict, f.variant)
  local points, left_out = {}, {}
  for i, row in ipairs(study.rows) do
    local x, y = xs[i], ys[i]
    if not (x.value and y.value) then left_out[#left_out + 1] = row.name
    else
      points[#points + 1] = {
        name = row.name, x = x.value, x_upper = x.upper or 0, x_lower = x.lower or 0, y = y.value, y_upper = y.upper or 0, y_lower = y.lower or 0,
        share = verdicts and verdicts[i].share,
      }
    end
  end
  return points, left_out
end

-- The ends of the points' error bars; on a logarithmic axis those that reach zero are left out.
local function ends_of(points, letter, log)
  local ends = {}
  for _, p in ipairs(points) do
    local value, low, high = p[letter], p[letter] - p[letter .. "_lower"], p[letter] + p[letter .. "_upper"]
    ends[#ends + 1], ends[#ends + 2] = log and low <= 0 and value or low, high
  end
  return ends
end

-- The span of an axis of the plane, with some room around what lies on it.
local function span(ends, log)
  local low, high = data.range(ends)
  if log then
    local room = math.max((high / low) ^ 0.08, 1.15)
    return low / room, high * room
  end
  local room = math.max(0.08 * (high - low), 0.02 * math.max(math.abs(low), math.abs(high)))
  return (low >= 0 and low - room < 0) and 0 or low - room, high + room
end

local POINTS_OF_A_LINE = 60

local function swept(axis)
  local values = {}
  for i = 0, POINTS_OF_A_LINE - 1 do
    local share = i / (POINTS_OF_A_LINE - 1)
    values[i + 1] = core.quantity(axis.log and axis.low * (axis.high / axis.low) ^ share or axis.low + (axis.high - axis.low) * share, axis.unit)
  end
  if axis.low == 0 then values[1] = values[2] * 1e-3 end
  return core.sweep(values)
end

-- A line: what a case that is swept along x makes of a name (or of a function of the case); level where it doesn't hang on x.
local function line_of(f, study, x, y, line, number)
  local self = line.of
  if not self then self = common_case(study, f.variant, line.given or {}):with { [x.name] = swept(x) }
  elseif line.given then self = self:with(line.given) end
  local quantity = type(line.show) == "function" and line.show(self) or self[line.show]
  local _, wanted = core.dimension(core.unit(y.unit))
  local _, got = core.dimension(quantity)
  if got ~= wanted then complain("line %d is of another dimension than %s", number, y.name) end
  if draws_of(quantity) then quantity = core.median(quantity) end
  local words = type(line.show) == "string" and words_of(line.show) or nil
  local sweeps, made = {}, { label = line.label or words, words = words }
  for _, axis in ipairs(core.axes(quantity)) do sweeps[#sweeps + 1] = axis end
  if #sweeps > 1 or sweeps[1] and sweeps[1].name ~= x.name then complain("line %d goes along %s; a line wants %s", number, sweeps[#sweeps].name, x.name) end
  if sweeps[1] then
    local order
    made.x, order = rising(sweeps[1], x)
    made.y = along(quantity, y.factor, sweeps[1], order)
  else made.x, made.y = { x.low, x.high }, along(quantity, y.factor, { name = x.name }, { 1, 1 }) end
  return made
end

function data.plane(f, study)
  if #f.show > 1 then complain("targets are shown against one name at a time; got %s", table.concat(f.show, ", ")) end
  local d = { x = data.axis(f.against), y = data.axis(f.show[1]), verdict = f.verdict }
  for _, axis in ipairs { d.x, d.y } do
    if axis.verdict then complain("targets lie on a plane of two quantities; %s is a verdict", axis.name) end
  end
  d.points, d.left_out = points_of(f, study)
  if #d.points == 0 then complain("no target has both %s and %s", f.against, f.show[1]) end
  for letter, axis in pairs { x = d.x, y = d.y } do
    local values = {}
    for i, p in ipairs(d.points) do values[i] = p[letter] end
    axis.log = is_log(f.log, letter, is_wide(values))
    axis.ends = ends_of(d.points, letter, axis.log)
    axis.low, axis.high = span(axis.ends, axis.log)
  end
  d.lines = {}
  for i, line in ipairs(f.lines or {}) do
    d.lines[i] = line_of(f, study, d.x, d.y, line, i)
    for _, y in ipairs(d.lines[i].y) do if not d.y.log or y > 0 then table.insert(d.y.ends, y) end end
  end
  d.y.low, d.y.high = span(d.y.ends, d.y.log)
  d.draws = core.settings().draws
  return d
end

return data
