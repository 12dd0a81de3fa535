-- SPDX-License-Identifier: GPL-3.0-or-later
-- Figures in words and numbers: the data as CSV, a caption, a sentence for those who don't see the picture, and a picture in block characters.
local core = ...
local csv_file = core.part "lacuna.csv"
local english = core.part "lacuna.english"
local figure_data = core.part "lacuna.figure_data"
local format = core.part "lacuna.format"
local relations = core.part "lacuna.relations"
local text = core.part "lacuna.text"

local words = {}
local words_of = english.words_of
local function textplot() return core.part "lacuna.textplot" end -- loaded when a picture is asked for

local function unit_in_header(axis) return axis.unit ~= "1" and " [" .. axis.unit .. "]" or "" end
local function header_of(axis) return axis.name .. unit_in_header(axis) .. (axis.verdict and " share" or "") end
local function with_unit(value, axis) return format.with_unit(format.number(value, 3), axis.unit_text) end
local function in_words(value, axis) return axis.verdict and format.percent(value) or with_unit(value, axis) end

-- "flux density for distance = 100 pc"
local function series_words(s)
  return words_of(s.name) .. (s.each and (" for %s = %s"):format(words_of(s.each.name), s.each.value) or "")
end

-- "half of array resolution = 1.85 mas"
local function level_words(level, axis)
  return (level.factor ~= 1 and "half of " or "") .. (level.name and words_of(level.name) or "the level") ..
    (level.constant and " = " .. in_words(level.constant, axis) or "")
end

-- CSV -----------------------------------------------------------------------------------------------------------------------------

local bands = { { "low95", "lower 95 %" }, { "low68", "lower 68 %" }, { "high68", "upper 68 %" }, { "high95", "upper 95 %" } }

local csv = {}

function csv.curve(d)
  local header, rows = { header_of(d.x) }, {}
  for i, x in ipairs(d.values) do rows[i] = { x } end
  local function add(title, values)
    header[#header + 1] = title
    for i, value in ipairs(values) do table.insert(rows[i], value) end
  end
  for _, s in ipairs(d.series) do
    local of = s.each and (" at %s = %s"):format(s.each.name, s.each.value) or ""
    local unit = unit_in_header(d.y)
    add(s.name .. of .. (d.y.verdict and " share" or "") .. unit, s.values)
    for _, band in ipairs(s.low68 and bands or {}) do add(s.name .. of .. " " .. band[2] .. unit, s[band[1]]) end
  end
  for _, level in ipairs(d.levels) do add((level.factor ~= 1 and "half of " or "") .. (level.name or "level") .. unit_in_header(d.y), level.values) end
  return csv_file.of(header, rows)
end

function csv.map(d)
  local rows = {}
  for j, y in ipairs(d.y_values) do
    for i, x in ipairs(d.x_values) do rows[#rows + 1] = { x, y, d.values[j][i] } end
  end
  return csv_file.of({ header_of(d.x), header_of(d.y), header_of(d.z) }, rows)
end

-- The points, then the lines' points; the first column says whose.
function csv.plane(d)
  local header, rows = { "name" }, {}
  for _, axis in ipairs { d.x, d.y } do
    for _, what in ipairs { "", " upper error", " lower error" } do header[#header + 1] = axis.name .. what .. unit_in_header(axis) end
  end
  if d.verdict then header[#header + 1] = d.verdict .. " share" end
  for i, p in ipairs(d.points) do rows[i] = { p.name, p.x, p.x_upper, p.x_lower, p.y, p.y_upper, p.y_lower, d.verdict and (p.share or "") or nil } end
  for number, line in ipairs(d.lines) do
    for i = 1, #line.x do rows[#rows + 1] = { line.label or "line " .. number, line.x[i], "", "", line.y[i], "", "", d.verdict and "" or nil } end
  end
  return csv_file.of(header, rows)
end

function words.csv(figure) return csv[figure.kind](figure.data) end

-- Where curves cross ------------------------------------------------------------------------------------------------------------

-- Where a list of values along x passes those of a level: interpolated, in the order of x.
function words.crossings(d, values, level)
  local found = {}
  for i = 2, #values do
    local a, b = values[i - 1] - level[i - 1], values[i] - level[i]
    if a == a and b == b and (a >= 0) ~= (b >= 0) then
      local low, high, share = d.values[i - 1], d.values[i], a / (a - b)
      found[#found + 1] = d.x.log and low * (high / low) ^ share or low + (high - low) * share
    end
  end
  return found
end

-- The sentence for those who don't see it ------------------------------------------------------------------------------------------

local function last_defined(values, from, step)
  local i = from
  while values[i] and values[i] ~= values[i] do i = i + step end
  return values[i] and i
end

-- "passes 1 at 43.2 m", of a share "passes 50 % at ...".
local function passing(d, s, level, called)
  local places = {}
  for i, at in ipairs(words.crossings(d, s.values, level)) do if i <= 3 then places[i] = with_unit(at, d.x) end end
  return #places > 0 and ("passes %s at %s"):format(called, english.list(places)) or ("does not pass %s"):format(called)
end

-- What one curve does: "from 0.4 at 20 m to 8 at 330 m".
local function course(d, s)
  local first, last = last_defined(s.values, 1, 1), last_defined(s.values, #s.values, -1)
  local a, b = s.values[first], s.values[last]
  local verb = a < b and "rises" or a > b and "falls" or "goes"
  local low, high = figure_data.range(s.values)
  if low == high then return ("stays at %s from %s to %s"):format(in_words(a, d.y), with_unit(d.values[first], d.x), with_unit(d.values[last], d.x)) end
  local beyond = {}
  if high > math.max(a, b) then beyond[#beyond + 1] = "at most " .. in_words(high, d.y) end
  if low < math.min(a, b) then beyond[#beyond + 1] = "at least " .. in_words(low, d.y) end
  return ("%s from %s at %s to %s at %s"):format(verb, in_words(a, d.y), with_unit(d.values[first], d.x), in_words(b, d.y), with_unit(d.values[last], d.x)) ..
    (#beyond > 0 and " (in between " .. table.concat(beyond, ", ") .. ")" or "")
end

local function name_of_series(d, s)
  local before = d.y.verdict == "share" and "the share of draws with " or d.y.verdict and "whether " or s.low68 and "the median " or "the "
  return before .. series_words(s)
end

-- The lines on a plane: "array resolution (200 m) and array resolution (100 m)".
local function lines_in_words(d)
  local names = {}
  for i, line in ipairs(d.lines) do
    names[i] = line.words and line.label ~= line.words and ("%s (%s)"):format(line.words, line.label) or line.label or "line " .. i
  end
  return #names > 0 and english.list(names, #names) or nil
end

-- "projected baseline from 20 m to 330 m"
local function extent(axis, low, high) return ("%s from %s to %s"):format(axis.words, with_unit(low, axis), with_unit(high, axis)) end

local alternative = {}

function alternative.curve(d)
  local parts = {}
  for i, s in ipairs(d.series) do
    local said = name_of_series(d, s) .. " " .. course(d, s)
    for _, level in ipairs(d.levels) do
      local called = level_words(level, d.y)
      said = said .. ", " .. passing(d, s, level.values, called)
    end
    if d.y.verdict then
      local half = {}
      for k = 1, #s.values do half[k] = 0.5 end
      said = said .. ", " .. passing(d, s, half, "50 %")
    end
    parts[i] = said
  end
  return ("Curve%s along %s: %s."):format(#d.series > 1 and "s" or "", d.x.words, table.concat(parts, "; "))
end

function alternative.map(d)
  local said = ("Map of %s over %s and %s: from %s to %s"):format((d.z.verdict == "share" and "the share of draws with " or "") .. d.z.words,
    extent(d.x, d.x_values[1], d.x_values[#d.x_values]), extent(d.y, d.y_values[1], d.y_values[#d.y_values]),
    in_words(d.z.low, d.z), in_words(d.z.high, d.z))
  local turn = d.contours[1]
  if not turn then return said .. "." end
  local verdict, xs, ys = words_of(d.verdict), {}, {}
  for _, line in ipairs(turn.lines) do
    table.move(line.x, 1, #line.x, #xs + 1, xs)
    table.move(line.y, 1, #line.y, #ys + 1, ys)
  end
  if #xs == 0 then return ("%s; %s does not turn on it."):format(said, verdict) end
  local x_low, x_high = figure_data.range(xs)
  local y_low, y_high = figure_data.range(ys)
  return ("%s; %s turns%s along a line between %s and %s of %s and %s and %s of %s."):format(said, verdict, turn.share and " (half of the draws)" or "",
    with_unit(x_low, d.x), with_unit(x_high, d.x), d.x.words, with_unit(y_low, d.y), with_unit(y_high, d.y), d.y.words)
end

function alternative.plane(d)
  local xs, ys, resolved = {}, {}, 0
  for i, p in ipairs(d.points) do
    xs[i], ys[i] = p.x, p.y
    if p.share and p.share >= 0.5 then resolved = resolved + 1 end
  end
  local lines = lines_in_words(d)
  return ("%d %s: %s, %s%s%s."):format(#d.points, english.plural(#d.points, "target"), extent(d.x, figure_data.range(xs)),
    extent(d.y, figure_data.range(ys)), d.verdict and ("; %s in half of the draws or more for %d"):format(words_of(d.verdict), resolved) or "",
    lines and "; with lines of " .. lines or "")
end

-- f:alternative(): one sentence, from the data.
function words.alternative(figure) return alternative[figure.kind](figure.data) end

-- Captions ------------------------------------------------------------------------------------------------------------------------

local function symbol_of(axis, write) return axis.name and not axis.verdict and core.find(axis.name) == axis.name and (write or relations.symbol)(axis.name) or nil end
local function named(axis, write)
  local symbol = symbol_of(axis, write)
  return (axis.verdict == "share" and "share of draws: " or "") .. axis.words .. (symbol and " " .. symbol or "")
end

local function draws_in_words(figure) return ("%d draws, seed %d"):format(figure.data.draws, figure.seed) end

-- What is given and matters for what is shown, but for what the axes and the curves vary.
local function given_in_words(figure)
  local d, skip, parts = figure.data, {}, {}
  for _, axis in ipairs { d.x, figure.kind == "map" and d.y or nil } do skip[axis.name] = true end
  for _, s in ipairs(d.series or {}) do if s.each then skip[s.each.name] = true end end
  local names = { d.verdict, table.unpack(figure.shown) }
  if not d.verdict then names = figure.shown end
  for _, shown in ipairs(names) do
    for _, step in ipairs(core.steps(figure.case, shown)) do
      if not step.row and not skip[step.name] then
        skip[step.name] = true
        local written = figure.written[step.name] or text.given(figure.case, step.name)
        parts[#parts + 1] = words_of(step.name) .. (written:find "^from " and " " or " = ") .. written
      end
    end
  end
  return #parts > 0 and "Given: " .. table.concat(parts, ", ") .. "." or nil
end

local function say_undefined(add, share, of, draws)
  if share and share > 0 then add(("%s: %s of %s undefined, and passed over"):format(of, format.percent(share), draws and "draws" or "points")) end
end

local caption = {}

function caption.curve(figure, add, write)
  local d = figure.data
  local bars = false
  for _, s in ipairs(d.series) do bars = bars or s.low68 end
  add(("%s along %s"):format(named(d.y, write), named(d.x, write)))
  if bars then add(("Lines: medians; bands: the central 68 and 95 %% of %s"):format(draws_in_words(figure)))
  elseif d.draws then add("Of " .. draws_in_words(figure)) end
  for _, level in ipairs(d.levels) do
    add("Dashed: " .. level_words(level, d.y))
  end
  for _, s in ipairs(d.series) do say_undefined(add, s.undefined, series_words(s), s.draws) end
  if #d.marks > 0 then add "Grey: spectral bands" end
end

function caption.map(figure, add, write)
  local d = figure.data
  add(("%s over %s and %s"):format(named(d.z, write), named(d.x, write), named(d.y, write)))
  if d.draws then add((d.z.verdict and "Shares of " or "Medians of ") .. draws_in_words(figure)) end
  say_undefined(add, not d.z.verdict and d.undefined, d.z.words, d.draws)
  local turn, drawn = d.contours[1], 0
  for _, one in ipairs(d.contours) do drawn = drawn + #one.lines end
  if turn and drawn == 0 then add(("%s turns nowhere on it"):format(words_of(d.verdict)))
  elseif turn and turn.share then add(("Solid line: %s in half of the draws; dashed: in 16 and 84 %%"):format(words_of(d.verdict)))
  elseif turn then add(("Line: %s turns"):format(words_of(d.verdict))) end
end

function caption.plane(figure, add, write)
  local d = figure.data
  add(("%s against %s of %d %s"):format(named(d.y, write), named(d.x, write), #d.points, english.plural(#d.points, "target")))
  add("Medians and central 68 % of " .. draws_in_words(figure))
  if d.verdict then add(("Filled: %s in half of the draws or more"):format(words_of(d.verdict))) end
  local lines = lines_in_words(d)
  if lines then add("Lines: " .. lines) end
  if #d.left_out > 0 then add("Not shown, as not both can be derived: " .. english.list(d.left_out, #d.left_out)) end
end

-- f:caption(): what is shown, of how many draws, and what is given; symbols as `write` has them, or as plain text.
function words.caption(figure, write)
  local sentences = {}
  caption[figure.kind](figure, function(sentence) sentences[#sentences + 1] = english.capital(sentence) .. "." end, write)
  if figure.target then sentences[1] = sentences[1]:gsub("%.$", "") .. (", %s%s."):format(figure.target, figure.variant and " (" .. figure.variant .. ")" or "") end
  if figure.case then sentences[#sentences + 1] = given_in_words(figure) end
  return table.concat(sentences, " ")
end

-- Block characters ----------------------------------------------------------------------------------------------------------------

local function plain_label(axis)
  local symbol = symbol_of(axis)
  local words_and_symbol = (axis.verdict == "share" and "share of draws" or axis.words) .. (symbol and " " .. symbol or "")
  return format.with_unit(words_and_symbol, axis.unit_text ~= "" and "[" .. axis.unit_text .. "]" or "")
end

local picture = {}
local DEEPEST = 1e8

-- Values far below the others would take all of a logarithmic axis.
local function not_too_deep(values, deepest)
  if not values or not deepest then return values end
  local raised = {}
  for i, value in ipairs(values) do raised[i] = value < deepest and deepest or value end
  return raised
end

-- Several curves stand below each other, each with what it is.
function picture.curve(d, columns, lines)
  local all, each = {}, math.max(lines // #d.series, 9)
  for _, s in ipairs(d.series) do
    if #d.series > 1 then all[#all + 1] = series_words(s) end
    local given = { x = d.values, level = d.levels[1] and d.levels[1].constant, x_log = d.x.log, y_log = d.y.log, width = columns, height = each,
      x_label = plain_label(d.x), y_label = plain_label(d.y) }
    local _, highest = figure_data.range(s.values)
    for to, from in pairs { y = "values", low = "low68", high = "high68", low95 = "low95", high95 = "high95" } do
      given[to] = not_too_deep(s[from], d.y.log and highest and highest / DEEPEST)
    end
    for _, line in ipairs(textplot().curve(given)) do all[#all + 1] = line end
  end
  return all
end

function picture.map(d, columns, lines)
  local z = {}
  for i = 1, #d.x_values do
    z[i] = {}
    for j = 1, #d.y_values do z[i][j] = d.values[j][i] end
  end
  return textplot().map { x = d.x_values, y = d.y_values, z = z, contour = d.z.verdict and 0.5 or nil, x_log = d.x.log, y_log = d.y.log, z_log = d.z.log,
    width = columns, height = lines, x_label = plain_label(d.x), y_label = plain_label(d.y), z_label = plain_label(d.z) }
end

function picture.plane(d, columns, lines)
  local given = { x = {}, y = {}, x_error = {}, y_error = {}, names = {} }
  for i, p in ipairs(d.points) do
    given.x[i], given.y[i], given.names[i] = p.x, p.y, p.name
    given.x_error[i], given.y_error[i] = { p.x_upper, p.x_lower }, { p.y_upper, p.y_lower }
  end
  given.x_log, given.y_log, given.width, given.height = d.x.log, d.y.log, columns, lines
  given.x_label, given.y_label = plain_label(d.x), plain_label(d.y)
  return textplot().points(given)
end

-- The title, the picture, and a line of what is drawn.
function words.picture(figure, columns, lines)
  local d, all = figure.data, { figure.title }
  for _, line in ipairs(picture[figure.kind](d, columns, lines - 1)) do all[#all + 1] = line end
  return table.concat(all, "\n")
end

return words
