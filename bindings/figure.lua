-- SPDX-License-Identifier: GPL-3.0-or-later
-- figure{}: a description of a figure, read once into plain data; drawn by gnuplot as PDF, SVG and PNG, in a terminal in block characters, and
-- written out as CSV, as a caption and as a sentence for those who don't see it.
--
--   figure{ of = case, show = name, along = { name = sweep } }               a curve with its bands, or with two sweeps a map
--   figure{ of = study, show = name, against = name, lines = {...} }         the targets on a plane
--   figure{ kind = "spectrum", of = case, bands = { "H", "N" } }             curves with what is usual filled in
--   figure{ kind = "visibility", of = case, each = { wavelength = {...} } }
local core = ...
local case = core.part "lacuna.case"
local data = core.part "lacuna.figure_data"

local figures = {}
local methods = {}
local metatable = { __name = "figure", __index = methods }

-- What is wanted ------------------------------------------------------------------------------------------------------------------

local fields = {
  kind = "string", of = "any", show = "any", along = "table", against = "string", each = "table", lines = "table", level = "any", bands = "table", verdict = "string",
  x = "string", log = "string", title = "string", name = "string", width = "string", target = "string", variant = "string",
}
local kinds = {
  curve = "along one sweep", map = "over two sweeps", plane = "the targets of a study", spectrum = "star, rim, disc and their sum along wavelength",
  visibility = "of the rim, along the baseline",
}
local widths = { single = "86 mm", double = "178 mm" }
local line_fields = { of = "any", show = "any", given = "table", label = "string" }

local function complain(form, ...) core.raise("figure: " .. form:format(...)) end

local function check_fields(wanted, allowed, what)
  for _, word in ipairs(case.sorted_keys(wanted)) do
    local kind = allowed[word]
    if not kind then core.raise(("%s: there is no '%s' here; there are %s"):format(what, tostring(word), table.concat(case.sorted_keys(allowed), ", "))) end
    if kind ~= "any" and type(wanted[word]) ~= kind then
      core.raise(("%s: %s wants a %s; got %s"):format(what, word, kind == "string" and "text" or kind, core.shown(wanted[word])))
    end
  end
end

local function check_choice(word, value, choices)
  if value and not choices[value] then complain('%s wants one of "%s"; got %s', word, table.concat(case.sorted_keys(choices), '", "'), core.shown(value)) end
end

local function name_for(word, what)
  local name = case.name_of(word, "figure: " .. what .. ": ")
  if core.entry(name).kind == "object" then complain("%s: %s is an object; there is nothing to draw", what, name) end
  return name
end

local function is_study(value) return type(value) == "table" and (getmetatable(value) or {}).__name == "study" end

local function read_show(show)
  if show == nil then return nil end
  local list = type(show) == "table" and show or { show }
  local names = {}
  for i, word in ipairs(list) do names[i] = name_for(word, "show") end
  if #names == 0 then complain "show wants a name, or a list of names" end
  return names
end

-- each = { wavelength = { "1.65 um", "2.2 um" } }: a curve for each.
local function check_each(each)
  local name, list = next(each or {})
  if not each then return end
  if name == nil or next(each, name) ~= nil then complain 'each wants one name with a list, like each = { wavelength = { "1.65 um", "2.2 um" } }' end
  case.name_of(name, "figure: each: ")
  if type(list) ~= "table" or #list == 0 then complain("each: %s wants a list of values; got %s", name, core.shown(list)) end
end

local function check_lines(lines)
  for i, line in ipairs(lines or {}) do
    if type(line) ~= "table" then complain("line %d wants a table like {show = \"spatial_resolution_of_array\"}; got %s", i, core.shown(line)) end
    check_fields(line, line_fields, "figure: line " .. i)
    if type(line.show) ~= "function" then name_for(line.show, "line " .. i .. ": show") end
    if line.of ~= nil and not core.is_case(line.of) then complain("line %d: of wants a case; got %s", i, core.shown(line.of)) end
  end
end

local function read_fields(wanted, study_to_come)
  if type(wanted) ~= "table" then core.raise("figure wants a table like {of = case, show = name}; got " .. core.shown(wanted)) end
  check_fields(wanted, fields, "figure")
  check_choice("kind", wanted.kind, kinds)
  check_choice("width", wanted.width, widths)
  if wanted.name and (wanted.name == "" or wanted.name:find "[/%c]") then complain("name wants a file's name without folder and ending; got %s", core.shown(wanted.name)) end
  if wanted.log and wanted.log:find "[^xy]" then complain('log wants "x", "y", "xy" or ""; got "%s"', wanted.log) end
  if not study_to_come and not is_study(wanted.of) and not core.is_case(wanted.of) then complain("of wants a case or a study; got %s", core.shown(wanted.of)) end
  check_each(wanted.each)
  check_lines(wanted.lines)
  local f = setmetatable({}, { __index = wanted })
  f.show = read_show(wanted.show)
  f.against = wanted.against and name_for(wanted.against, "against")
  f.verdict = wanted.verdict and name_for(wanted.verdict, "verdict")
  if f.verdict and core.entry(f.verdict).kind ~= "verdict" then complain("verdict: %s is none", f.verdict) end
  f.width = wanted.width or "single"
  return f
end

-- Kinds with what is usual filled in ----------------------------------------------------------------------------------------------

local SPECTRUM = { "stellar_flux_density", "rim_flux_density", "disc_flux_density", "total_flux_density" }

local function spectrum(f)
  f.along = f.along or { wavelength = core.sweep_log("0.3 um", "2 mm", 60) }
  f.case = f.case:with(f.along)
  if not f.show then
    local names = {}
    for _, name in ipairs(SPECTRUM) do if core.row_of(f.case, name) ~= nil then names[#names + 1] = name end end
    if #names == 0 then return f.case[SPECTRUM[4]] end -- which says what is missing
    f.show = names
  end
  f.log = f.log or "xy"
end

local function visibility(f)
  f.show = f.show or { "rim_squared_visibility" }
  if not f.along then
    local given = core.info(f.case).givens.projected_baseline
    local longest = given and core.elements(core.highest(given))[1] or 100
    f.along = { projected_baseline = core.sweep("1 m", core.quantity(1.5 * longest, "m"), 100) }
  end
  f.case = f.case:with(f.along)
  f.log = f.log or ""
end

local function settle_case(f)
  if is_study(f.of) then f.case, f.target_name = data.case_of_target(f.of, f.target, f.variant)
  else
    if f.target or f.variant then complain "target and variant are of a study's; this is a case" end
    f.case = f.of
    f.target_name = core.info(f.case).target
  end
  if f.kind == "spectrum" then spectrum(f)
  elseif f.kind == "visibility" then visibility(f)
  elseif f.along then f.case = f.case:with(f.along) end
  if not f.show then complain "wants show = a name, like show = \"rim_radius\"" end
end

-- What is to be drawn, as plain data: the kind follows from what is asked.
local function read_data(f)
  if f.against or f.kind == "plane" then
    if not f.against then complain "a plane wants against = a name, which goes to the right" end
    if not f.show then complain "wants show = a name, like show = \"rim_radius\"" end
    if not is_study(f.of) then complain "against is for the targets of a study; of is a case here" end
    if f.along or f.each then complain "targets on a plane go along nothing; leave out along and each" end
    return "plane", data.plane(f, f.of)
  end
  settle_case(f)
  local sweeps, names = data.sweeps_of(f.case), {}
  for i, sweep in ipairs(sweeps) do names[i] = sweep.name end
  if #sweeps == 0 then complain("%s goes along nothing here: give along = { projected_baseline = sweep(\"20 m\", \"330 m\", 100) }, say", f.show[1]) end
  if #sweeps > 2 then complain("no more than two sweeps can be drawn; there are %s", table.concat(names, ", ")) end
  if f.kind == "map" and #sweeps == 1 then complain("a map wants two sweeps; there is one, along %s", names[1]) end
  if f.kind and f.kind ~= "map" and #sweeps == 2 then complain("a %s goes along one sweep; there are %s", f.kind, table.concat(names, ", ")) end
  if #sweeps == 2 then return "map", data.map(f, sweeps) end
  return "curve", data.curve(f, sweeps[1])
end

local function usual_title(f, d)
  local of = f.target_name and " of " .. f.target_name or ""
  local what = d.y.words
  if f.kind_drawn == "map" then return ("%s over %s and %s%s"):format(d.z.words, d.x.words, d.y.words, of) end
  if f.kind == "spectrum" then return "spectral energy distribution" .. of end
  return ("%s %s %s%s"):format(what, f.kind_drawn == "plane" and "against" or "along", d.x.words, of)
end

local LONGEST_NAME = 80 -- of a file, made of a title

local function as_file_name(title)
  local name = title:gsub("[^%w]+", "_"):gsub("^_+", ""):gsub("_+$", ""):lower()
  return name ~= "" and name:sub(1, LONGEST_NAME) or "figure"
end

-- figure{...}: the object. figure(study): the list of those that the study asks for.
function figures.figure(wanted)
  if is_study(wanted) then return figures.of_study(wanted) end
  local f = read_fields(wanted)
  local kind, d = read_data(f)
  f.kind_drawn = kind
  local title = wanted.title or usual_title(f, d)
  local made = { kind = kind, title = title, name = wanted.name or as_file_name(title), width = f.width, data = d, target = f.target_name, variant = f.variant,
    shown = f.show, seed = core.settings().seed, written = is_study(f.of) and data.written(f.of, f.variant) or {}, case = kind ~= "plane" and f.case or nil }
  return setmetatable(made, metatable)
end

local function check_wanted(wanted, number)
  if type(wanted) ~= "table" then core.raise(("study: figure %d wants a table like {show = name, along = {...}}; got %s"):format(number, core.shown(wanted))) end
end

-- What can be said against a study's figures before it is run: has_target and has_variant tell whether it knows a name.
function figures.check(list, has_target, has_variant)
  for i, wanted in ipairs(list) do
    check_wanted(wanted, i)
    read_fields(wanted, true)
    if wanted.target and not has_target(wanted.target) then complain('no target "%s" in the study', tostring(wanted.target)) end
    if wanted.variant and not has_variant(wanted.variant) then complain('no variant "%s" in the study', tostring(wanted.variant)) end
  end
end

-- The figures that a study asks for, with names that differ. One that can't be made is an error, or stands in left_out: a list of why.
function figures.of_study(study, left_out)
  local list, taken = {}, {}
  for i, wanted in ipairs(study.figures or {}) do
    check_wanted(wanted, i)
    local spec = { of = study }
    for word, value in pairs(wanted) do spec[word] = value end
    local ok, made = pcall(figures.figure, spec)
    if not ok then
      local why = core.part "lacuna.record".bare(made)
      if not left_out or why:find "interrupted!?$" then error(made, 0) end
      left_out[#left_out + 1] = ("figure %d%s: %s"):format(i, wanted.title and (' "%s"'):format(wanted.title) or "", (why:gsub("^figure: ", "")))
    else
      local name, number = made.name, 1
      while taken[made.name:lower()] do
        number = number + 1
        made.name = name .. "_" .. number
      end
      taken[made.name:lower()] = true
      made.number = i
      list[#list + 1] = made
    end
  end
  return list
end

-- What is made of it --------------------------------------------------------------------------------------------------------------

local function part(name) return core.part("lacuna." .. name) end

function methods.csv(figure) return part "figure_text".csv(figure) end
function methods.caption(figure, write) return part "figure_text".caption(figure, write) end
function methods.alternative(figure) return part "figure_text".alternative(figure) end
function methods.script(figure, name) return part "gnuplot".script(figure, name or figure.name) end

-- f:svg(): the picture for a page; nil and why where gnuplot can't be run.
function methods.svg(figure)
  local drawn, why = part "gnuplot".render { figure }
  if not drawn then return nil, why end
  return figure.pictures.svg
end

-- Writes figures, each { figure, path without its ending }: the script and the data always, the pictures where gnuplot can be run.
-- Returns the files' names, and in one line why there are no pictures.
function figures.write(list)
  local drawn, files, only = {}, {}, {}
  for i, one in ipairs(list) do drawn[i] = one[1] end
  local rendered, why = part "gnuplot".render(drawn)
  for _, one in ipairs(list) do
    local figure, path = one[1], one[2]
    local contents = { csv = figure:csv(), gp = figure:script(path:match "[^/]*$") }
    for kind, picture in pairs(rendered and figure.pictures or {}) do contents[kind] = picture end
    for _, ending in ipairs(case.sorted_keys(contents)) do
      files[#files + 1] = path .. "." .. ending
      core.write_file(files[#files], contents[ending])
    end
  end
  return files, why and why .. "; no pictures, only data (.csv) and scripts (.gp) are written" or nil
end

-- f:write("folder/name"): folder/name.pdf, .svg, .png, .csv and .gp. Returns their names.
function methods.write(figure, path)
  if type(path) ~= "string" or path == "" then core.raise("f:write wants a file's name without its ending, like \"figures/rim\"; got " .. core.shown(path)) end
  local files, why = figures.write { { figure, path } }
  if why then io.stderr:write("lacuna: ", why, "\n") end
  return files
end

-- f:text(columns, lines): the figure in block characters.
function methods.text(figure, columns, lines)
  return part "figure_text".picture(figure, columns or core.terminal_width() or 80, lines or 18)
end

-- show(f): on a terminal in block characters; else as a file, and where, in one line.
function figures.show(figure)
  local columns = core.terminal_width()
  if columns then
    print(figure:text(math.min(columns, 100), math.min(math.max((core.terminal().rows or 24) - 4, 12), 24)))
    return
  end
  local drawn, why = part "gnuplot".render { figure }
  local file = figure.name .. (drawn and ".png" or ".csv")
  core.write_file(file, drawn and figure.pictures.png or figure:csv())
  print(("figure: %s: written to %s%s"):format(figure.title, file, drawn and "" or " as data, since " .. why))
end

function metatable.__tostring(figure) return ("figure: %s; show(f) draws it, f:write(\"name\") writes it"):format(figure.title) end

figures.fields, figures.line_fields, figures.kinds, figures.widths = fields, line_fields, kinds, widths -- for completion

return figures
