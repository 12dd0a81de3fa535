-- SPDX-License-Identifier: GPL-3.0-or-later
-- The report: a folder with all that a proposal takes from a study. Every file is whole or absent; the page and the manifest are written last,
-- so a folder with a manifest is a whole report. The same study gives the same bytes: no times, no machine and no paths stand in it.
--
--   write(study, folder, facts)   facts = { study_file = path, inputs = { paths }, texts = { [path] = what was read }, command = { set, only,
--                                 arguments = lists of texts }, settings = { seed, draws }, version }: all may be left out
--   ask(study, folder, options, facts)   the same, where a script asks for it: a folder with files is refused but with { force = true }
--
-- Both return { folder, files = { names }, missing = { what could not be written, and why } }, which prints itself.
local core = ...
local bibliography = core.part "lacuna.bibliography"
local derivation = core.part "lacuna.derivation"
local document = core.part "lacuna.document"
local feasibility = core.part "lacuna.feasibility"
local manifest = core.part "lacuna.manifest"
local read_file = core.part "lacuna.read_file"
local table_files = core.part "lacuna.table_files"
local table_tex = core.part "lacuna.table_tex"

local report = {}

-- Files ------------------------------------------------------------------------------------------------------------------------------

local writer = {}
writer.__index = writer

local function new_writer(folder) return setmetatable({ folder = folder, files = {}, missing = {} }, writer) end

function writer.path(self, name) return self.folder .. "/" .. name end

-- Notes a file of the report for the manifest.
function writer.add(self, name, content) self.files[#self.files + 1] = { name = name, digest = core.sha256(content) } end

function writer.write(self, name, content)
  core.write_file(self:path(name), content)
  self:add(name, content)
end

local function read(path)
  local content, trouble = read_file(path)
  if not content then core.raise(trouble) end
  return content
end

-- Notes a file for the manifest that somebody else has put there.
function writer.add_present(self, name)
  local file = io.open(self:path(name), "rb")
  if not file then return end
  file:close()
  self:add(name, read(self:path(name)))
end

local function base_name(path) return path:match "[^/]*$" end

-- Inputs ------------------------------------------------------------------------------------------------------------------------------

-- Where an input stands in the report: as it stands beside the study's file, so that the copy of the study finds it.
local function place_of(path, study_file, taken)
  local folder = study_file and study_file:match "^(.*/)" or ""
  local inside = path:sub(1, #folder) == folder and path:sub(#folder + 1) or path
  if inside:find "^/" or inside:find "%.%./" or inside:find "^%./" then inside = base_name(path) end
  local place, number = inside, 1
  while taken[place] do
    number = number + 1
    place = number .. "_" .. inside
  end
  taken[place] = true
  return place
end

-- The study's file and what it reads: { name, content, is_study }.
local function read_inputs(facts)
  local inputs, taken = {}, {}
  local function take(path, is_study)
    local content = facts.texts and facts.texts[path] or read(path)
    inputs[#inputs + 1] = { name = "inputs/" .. place_of(path, facts.study_file, taken), content = content, is_study = is_study }
  end
  if facts.study_file then take(facts.study_file, true) end
  for _, path in ipairs(facts.inputs or {}) do take(path, false) end
  return inputs
end

local function write_inputs(out, inputs)
  if #inputs > 0 then core.make_folder(out:path "inputs") end
  for _, input in ipairs(inputs) do
    local folder = out.folder
    for part in input.name:gmatch "([^/]+)/" do
      folder = folder .. "/" .. part
      core.make_folder(folder)
    end
    out:write(input.name, input.content)
  end
end

-- Tables ------------------------------------------------------------------------------------------------------------------------------

-- Notes that belong below the table in print; the others stand with the derivations.
local below_table = { ["Not derived (—)"] = true, ["Shown"] = true, ["Failed"] = true, ["Undefined draws"] = true, ["How far this goes"] = true }

local function with_notes(study, wanted)
  local notes = {}
  for _, note in ipairs(study.notes) do if wanted(note.heading) then notes[#notes + 1] = note end end
  return setmetatable({ notes = notes }, { __index = study })
end

local function write_tables(out, study, facts)
  out:write("table.csv", table_files.csv(study))
  out:write("table.md", table_files.markdown(study))
  out:write("table.tex", table_tex.latex(with_notes(study, function(heading) return below_table[heading] end)))
  local bytes, trouble = core.part "lacuna.fits_table".of(study, facts)
  facts.has_fits = bytes ~= nil
  if bytes then out:write("table.fits", bytes) else out.missing[#out.missing + 1] = "table.fits: " .. trouble end
end

-- Figures -----------------------------------------------------------------------------------------------------------------------------

-- The figures as objects: a study may have them described only. Those that can't be made are left out.
local function figures_of(study, missing)
  local list = study.figures or {}
  if #list == 0 or (getmetatable(list[1]) or {}).__name == "figure" then return list end
  return core.part "lacuna.figure".of_study(study, missing)
end

-- The figures' files, and for the page and the document what each is: { svg, caption, alternative, file }. Where they can't be drawn, the report
-- goes on with their data alone.
local function write_figures(out, study)
  local list, wanted, drawn = figures_of(study, out.missing), {}, {}
  if #list == 0 then return drawn end
  core.make_folder(out:path "figures")
  for i, figure in ipairs(list) do wanted[i] = { figure, out:path("figures/" .. figure.name) } end
  local files, why = core.part "lacuna.figure".write(wanted)
  for _, file in ipairs(files) do out:add_present(file:sub(#out.folder + 2)) end
  if why then out.missing[#out.missing + 1] = "figures: " .. why end
  for _, figure in ipairs(list) do
    if not why then
      drawn[#drawn + 1] = { svg = figure:svg(), caption = figure:caption(), caption_tex = document.caption(figure), alternative = figure:alternative(), file = "figures/" .. figure.name }
    end
  end
  return drawn
end

-- The whole -----------------------------------------------------------------------------------------------------------------------------

-- Takes away what a report that stood here before had, as its manifest says; that first, so that the folder doesn't pass for a whole one. The
-- records are the new run's already.
local function remove_former(out)
  local text = read_file(out:path "manifest.txt")
  if not text then return end
  os.remove(out:path "manifest.txt")
  for name in text:gmatch "\n%x+  ([^\n]+)" do
    if name ~= "records" and not name:find "^/" and not name:find("..", 1, true) then
      os.remove(out:path(name))
      local folder = name:match "^(.*)/"
      if folder then os.remove(out:path(folder)) end -- once it is empty
    end
  end
end

-- In each folder that has files of the report.
local function remove_leftovers(out)
  local seen = {}
  for _, file in ipairs(out.files) do
    local folder = out:path(file.name):match "^(.*)/"
    if not seen[folder] then core.part "lacuna.leftovers".remove(folder) end
    seen[folder] = true
  end
end

local function complete(facts)
  local settings, inputs = facts.settings or core.settings(), read_inputs(facts)
  local date, fixed = manifest.date()
  local whole = { date = date, date_fixed = fixed, seed = settings.seed, draws = settings.draws, version = facts.version or core.version, inputs = inputs }
  for _, input in ipairs(inputs) do if input.is_study then whole.script = input.name end end
  whole.command = manifest.command(facts.command or {}, whole.script, settings)
  return whole
end

local function write_all(out, study, facts)
  local row, chains = derivation.of_study(study)
  local cited, composed = bibliography.new(), feasibility.of(study, facts)
  core.make_folder(out.folder)
  remove_former(out)
  write_inputs(out, facts.inputs)
  write_tables(out, study, facts)
  local drawn = write_figures(out, study)
  out:write("feasibility.txt", feasibility.plain(composed))
  out:write("feasibility.tex", feasibility.tex(composed, cited))
  out:write("derivations.tex", document.derivations(with_notes(study, function(heading) return not below_table[heading] end), row, chains, cited))
  out:write("references.bib", cited:bibtex())
  out:write("report.tex", document.whole(study.title or "Report of a study", drawn, facts.date, next(cited.entries) ~= nil))
  local page = core.part "lacuna.page".of(study, { facts = facts, row = row, chains = chains, composed = composed, figures = drawn, missing = out.missing })
  out:add_present "records"
  out:write("index.html", page)
  remove_leftovers(out)
  core.write_file(out:path "manifest.txt", manifest.text(facts, out.files))
end

local written_metatable = { __name = "report" }
function written_metatable.__tostring(written)
  local lines = { ("report in %s: %d files; open %s/index.html"):format(written.folder, #written.files, written.folder) }
  for _, missing in ipairs(written.missing) do lines[#lines + 1] = "  left out: " .. missing end
  return table.concat(lines, "\n")
end

function report.ask(study, folder, options, facts)
  if type(folder) ~= "string" or folder == "" then core.raise("report wants a folder's name, like s:report(\"report\"); got " .. core.shown(folder)) end
  core.make_folder(folder)
  if not (options and options.force) and #core.folder_entries(folder) > 0 then
    core.raise(("%s exists and is not empty; s:report(%q, {force = true}) writes into it"):format(folder, folder))
  end
  return report.write(study, folder, facts)
end

function report.write(study, folder, facts)
  local out = new_writer((folder:gsub("(.)/+$", "%1")))
  write_all(out, study, complete(facts or {}))
  local names = {}
  for i, file in ipairs(out.files) do names[i] = file.name end
  names[#names + 1] = "manifest.txt"
  return setmetatable({ folder = out.folder, files = names, missing = out.missing }, written_metatable)
end

return report
