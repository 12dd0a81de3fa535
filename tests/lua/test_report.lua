-- SPDX-License-Identifier: GPL-3.0-or-later
-- Reports from Lua: what stands in the folder and in each file. Stars and instruments are invented; hashes are compared with published test
-- vectors, files of numbers with what the study itself says.
package.path = "tests/lua/?.lua"
local t = require "harness"
local scratch = require "scratch"
local lacuna = require "lacuna"
lacuna.settings { seed = 7, draws = 2000 }

local folder, read = scratch.folder, scratch.read
local function quietly(fields) return (scratch.quietly(lacuna.study, fields)) end

local stars = {
  { name = "Marrow 3", distance = "156 ± 3 pc", bolometric_flux = "2.4e-11 ± 0.2e-11 W.m**-2", stellar_mass = "1.9 ± 0.1 Msun" },
  { name = "Tarn <12> & co", distance = "60.1 ± 0.2 pc", bolometric_flux = "3.1e-12 ± 0.2e-12 W.m**-2", stellar_mass = "0.58 Msun", remarks = "100 % “odd”_$x$" },
  { name = "Drumlin 30", distance = "446 +21 -17 pc" },
}
local array = { wavelength = "1.65 um", projected_baseline = "92 m" }

local reports = 0
local function report_of(fields, options)
  local study = quietly { title = fields.title or "Rims & gaps", targets = fields.targets or stars, given = fields.given or array, ask = fields.ask or { "rim_size_angle", "rim_resolved_by_array" },
    variants = fields.variants, figures = fields.figures, using = fields.using, derive = fields.derive }
  reports = reports + 1
  local name = "report_" .. reports
  return name, study:report(folder .. "/" .. name, options), study
end

local function has(text, words) t.equal(text:find(words, 1, true) ~= nil, true, ("%q in:\n%s"):format(words, text)) end
local function lacks(text, words) t.equal(text:find(words, 1, true), nil, words) end

t.test("the folder: all files, the manifest last, and a word of what was written", function()
  local name, written = report_of {}
  for _, file in ipairs { "index.html", "table.csv", "table.md", "table.tex", "table.fits", "feasibility.txt", "feasibility.tex", "derivations.tex", "references.bib", "report.tex", "manifest.txt" } do
    t.equal(read(name .. "/" .. file) ~= nil, true, file)
  end
  t.equal(written.files[#written.files], "manifest.txt")
  t.equal(written.files[#written.files - 1], "index.html")
  t.equal(#written.missing, 0)
  t.equal(tostring(written), ("report in %s/%s: %d files; open %s/%s/index.html"):format(folder, name, #written.files, folder, name))
end)

t.test("the same bytes again; the date of SOURCE_DATE_EPOCH or today's", function()
  local first, second = report_of {}, (report_of {})
  for _, file in ipairs { "index.html", "table.fits", "manifest.txt", "derivations.tex", "feasibility.txt" } do t.equal(read(first .. "/" .. file), read(second .. "/" .. file), file) end
  has(read(first .. "/manifest.txt"), "# date: " .. os.date "!%Y-%m-%d")
end)

t.test("no path, no thread count, no time of the run in any file", function()
  local name, written = report_of {}
  for _, file in ipairs(written.files) do
    local content = read(name .. "/" .. file)
    -- in parts, since in the program this file is the study's own and stands in the report
    for _, trace in ipairs { folder, "/" .. "home/", "/" .. "tmp/", "threads" .. " =", os.date "%H:%M" } do lacks(content, trace) end
  end
end)

t.test("a folder with files is refused, and taken with force", function()
  local name, _, study = report_of {}
  t.raises(function() study:report(folder .. "/" .. name) end, "exists and is not empty; s:report%(.*{force = true}%)")
  local manifest = read(name .. "/manifest.txt")
  local extra = assert(io.open(folder .. "/" .. name .. "/old.csv", "w"))
  extra:close()
  extra = assert(io.open(folder .. "/" .. name .. "/manifest.txt", "w"))
  extra:write(manifest, ("0"):rep(64), "  old.csv\n", ("0"):rep(64), "  ../kept\n")
  extra:close()
  assert(io.open(folder .. "/kept", "w")):close()
  study:report(folder .. "/" .. name, { force = true })
  t.equal(read(name .. "/old.csv"), nil, "what the former report had is gone")
  t.equal(read "kept", "", "nothing outside the folder is")
  t.equal(read(name .. "/manifest.txt"), manifest)
  t.raises(function() study:report(7) end, "report wants a folder's name")
  t.raises(function() study:report(folder .. "/no/such") end, "cannot make the folder .*: No such file or directory")
end)

t.test("Markdown: one line a target, special characters as they are", function()
  local name = report_of {}
  local lines = {}
  for line in read(name .. "/table.md"):gmatch "[^\n]+" do if line:find "^| " then lines[#lines + 1] = line end end
  t.equal(#lines, 2 + #stars)
  has(lines[4], "| Tarn \\<12\\> & co |")
  for _, line in ipairs(lines) do t.equal(select(2, line:gsub(" |", "")), 4, line) end
end)

t.test("units in the header of the CSV are VOUnits, and the numbers are in them", function()
  local name, _, study = report_of { ask = { "stellar_luminosity", "planet_mass" }, given = { planet_mass = "2 ± 0.5 Mjup" } }
  local header, first = read(name .. "/table.csv"):match "^([^\n]*)\n([^\n]*)\n"
  has(header, "stellar_luminosity [solLum],stellar_luminosity upper error [solLum]")
  has(header, "planet_mass [solMass]")
  local fields = {}
  for field in (first .. ","):gmatch "([^,]*)," do fields[#fields + 1] = field end
  -- Jupiter's mass is 1/1047.35 of the Sun's (IAU 2009 system of constants, Luzum et al. 2011, Celest. Mech. Dyn. Astr. 110, 293, from memory)
  t.close(tonumber(fields[#fields - 2]), study.rows[1].cells[2].value / 1047.35, 5e-3)
end)

t.test("the page escapes what targets are called, and has derivations for the target asked for", function()
  local name = report_of { derive = "Tarn <12> & co" }
  local page = read(name .. "/index.html")
  has(page, "Tarn &lt;12&gt; &amp; co")
  lacks(page, "Tarn <12>")
  has(page, "The chains of relations for Tarn &lt;12&gt; &amp; co")
  has(page, "<math xmlns=")
  has(read(name .. "/derivations.tex"), "\\section*{Derivations for Tarn $<$12$>$ \\& co}")
  t.raises(function() report_of { derive = "Tarn 13" } end, 'derive: there is no target "Tarn 13"')
end)

t.test("equations with numbers put in: products of numbers have a sign between them", function()
  local name = report_of { derive = "Marrow 3" }
  local page, tex = read(name .. "/index.html"), read(name .. "/derivations.tex")
  has(page, "<mn>2</mn><mo>·</mo><mrow><mn>92</mn>") -- 2 B of the array's resolution
  has(tex, "2 \\cdot 92\\,\\mathrm{m}")
end)

t.test("BibTeX has exactly what is cited, each author apart", function()
  local name = report_of {}
  local bib, cited = read(name .. "/references.bib"), {}
  for _, file in ipairs { "feasibility.tex", "derivations.tex" } do
    for key in read(name .. "/" .. file):gsub("\\cite%b[]", "\\cite"):gmatch "\\cite{([^}]*)}" do cited[key] = true end
  end
  local listed = 0
  for key in bib:gmatch "@%a+{([^,]*)," do
    listed = listed + 1
    t.equal(cited[key], true, key)
    cited[key] = nil
  end
  t.equal(next(cited), nil)
  t.equal(listed > 0, true)
  has(bib, "@misc{monnier_millan_gabet_2002,\n  author       = {Monnier, J. D. and Millan-Gabet, R.},\n  howpublished = {ApJ 579, 694},\n  year         = {2002},\n}")
  for entry in bib:gmatch "(@article{.-\n})" do has(entry, "  title  ") end -- BibTeX warns of articles without one
end)

t.test("the draft: one target, several, all, none; verdicts with recipes and assumptions, and none without", function()
  local one = read(report_of { targets = { stars[1] } } .. "/feasibility.txt"):gsub("\n", " ")
  has(one, "Draft, to be edited")
  has(one, "The target is Marrow 3.")
  t.equal(one:find "The rim is resolved by the array in [%d.]+ %% of the draws%." ~= nil, true, one)
  has(one, "Over the recipes: with the array resolution by fringe instead of half fringe, whether the rim is resolved by the array changes for Marrow 3, to no")
  has(one, "sublimation radius by grey grains after Monnier & Millan-Gabet 2002")
  has(one, "Assumed, as not measured for the target: sublimation temperature = 1500 K")
  has(one, "detected is not assessed")
  local several = read(report_of {} .. "/feasibility.txt"):gsub("\n", " ")
  has(several, "The sample has 3 targets: Marrow 3, Tarn <12> & co and Drumlin 30.")
  has(several, "For Drumlin 30 nothing could be derived (for want of")
  local none = read(report_of { ask = { "parallax" } } .. "/feasibility.txt"):gsub("\n", " ")
  has(none, "No verdict was asked")
  has(none, "All of these numbers follow by definition from what is given.")
  lacks(none, "is resolved by")
end)

t.test("the draft: the recipes that a variant chooses, and the range over recipes once", function()
  local given = { wavelength = "1.65 um", projected_baseline = "92 m", planet_mass = "2 Mjup", viscosity_alpha = 1e-3 }
  local variants = {}
  for i, place in ipairs { "5 au", "10 au" } do variants[i] = { name = "at " .. place, given = { planet_semi_major_axis = place }, ask = { "gap_size_angle", "gap_resolved_by_array" } } end
  local hot = { name = "Hot", effective_temperature = "9000 K" }
  for word, value in pairs(stars[1]) do hot[word] = hot[word] or value end
  variants[3] = { name = "cautious", given = { planet_semi_major_axis = "5 au" }, using = { array_resolution = "fringe" }, ask = { "gap_resolved_by_array" } }
  local name, _, study = report_of { targets = { hot, stars[3] }, given = given, ask = { "rim_size_angle" }, variants = variants }
  local words = read(name .. "/feasibility.txt"):gsub("\n", " ")
  has(words, "Cautious (planet semi-major axis 5 au and array resolution by fringe): The gap is resolved by the array")
  t.equal(select(2, words:gsub("Over the recipes: ", "")), 1)
  t.equal(words:find "with the planet midplane temperature by Chiang & Goldreich 1997 instead of Dullemond et al%. 2018, the gap size angle would be 0%.%d+ to 0%.%d+ times as large" ~= nil, true, words)
  has(words, "Resolved means geometrically resolved, by the array where elements by array ≥ elements required; the array resolution λ / (2 B) (half fringe)")
  for _, note in ipairs(study.notes) do t.equal(note.heading ~= "Not all targets use the same recipes", true) end
end)

t.test("the draft: a target that lacks some of what is asked", function()
  local name = report_of { ask = { "distance", "rim_size_angle", "rim_resolved_by_array" } }
  has(read(name .. "/feasibility.txt"):gsub("\n", " "), "For Drumlin 30 the rim size angle and whether the rim is resolved by the array could not be derived (for want of bolometric flux).")
end)

t.test("a share is told from the bounds beside which it stands", function()
  local percent = require "parts" "lacuna.verdicts".percent
  t.equal(percent(0.896), "89.6 %")
  t.equal(percent(0.89996), "89.996 %")
  t.equal(percent(0.1004), "10.04 %")
  t.equal(percent(0.45), "45 %")
  t.equal(percent(0.9), "90 %")
  t.equal(percent(1), "100 %")
end)

t.test("the draft without error bars doesn't speak of draws", function()
  local single = { { name = "A", distance = "100 pc", rim_radius = "0.2 au" }, { name = "B", distance = "300 pc", rim_radius = "0.1 au" } }
  local words = read(report_of { targets = single } .. "/feasibility.txt"):gsub("\n", " ")
  has(words, "No given has an error bar")
  has(words, "The rim is resolved by the array for A, and not for B.")
  lacks(words, "draws for")
end)

t.test("the draft says what is not checked, extrapolated or undefined", function()
  local odd = { { name = "A", distance = lacuna.spread.normal("100 pc", "60 pc"), stellar_luminosity = "0.2 Lsun" }, { name = "B", distance = "100 pc", stellar_luminosity = "20 Lsun" } }
  local words = read(report_of { targets = odd } .. "/feasibility.txt"):gsub("\n", " ")
  has(words, "Not checked for the answer to whether the rim is resolved by the array: size within the recoverable scale: shortest baseline not given")
  has(words, "The recipe grey grains holds for heating luminosity from 1 to 1000 Lsun (outside for A)")
  has(words, "Some draws are undefined for A; they count as draws that say no.")
end)

t.test("detection: assessed for the rim alone where its significance is asked", function()
  local given = { wavelength = "1.65 um", projected_baseline = "92 m", baseline_position_angle = "20 deg", disc_position_angle = "40 deg", inclination = "30 deg",
    stellar_flux_fraction = 0.4, halo_flux_fraction = 0, visibility_error = 0.02 }
  local words = read(report_of { targets = { stars[1] }, given = given, ask = { "rim_resolved_by_array", "rim_drop_significance" } } .. "/feasibility.txt"):gsub("\n", " ")
  has(words, "Detection is assessed for the rim alone")
end)

t.test("a figure that can't be made is left out, and the line says why", function()
  local name, written = report_of { title = "Odd figures", figures = {
    { show = "rim_size_angle", against = "distance", title = "shown" },
    { show = "rim_size_angle", against = "distance", title = "off", lines = { { show = "planet_mass" } } },
    { show = "rim_size_angle", against = "distance", name = "s hown" }, { show = "rim_size_angle", against = "distance", name = "s_hown" },
    { show = "rim_size_angle", against = "distance", title = ("long "):rep(100) },
  } }
  has(tostring(written), '\n  left out: figure 2 "off": planet_mass must be given')
  t.equal(read(name .. "/figures/shown.csv") ~= nil, true)
  t.equal(read(name .. "/figures/off.csv"), nil)
  t.equal(read(name .. "/figures/" .. ("long_"):rep(16) .. ".csv") ~= nil, true)
  local page, seen = read(name .. "/index.html"), {}
  for id in page:gmatch '%sid="([^"]*)"' do
    t.equal(seen[id], nil, id)
    seen[id] = true
  end
end)

t.test("no figure of a former report is left", function()
  local name = report_of { figures = { { show = "rim_size_angle", against = "distance", name = "former" } } }
  t.equal(read(name .. "/figures/former.csv") ~= nil, true)
  local study = quietly { targets = stars, given = array, ask = { "rim_size_angle" } }
  study:report(folder .. "/" .. name, { force = true })
  t.equal(read(name .. "/figures/former.csv"), nil)
  t.equal(os.rename(folder .. "/" .. name .. "/figures", folder .. "/there"), nil, "nor their folder")
end)

t.test("slips in figures are found before anything is worked out", function()
  local shown = { show = "rim_size_angle", against = "distance" }
  for field, wrong in pairs { target = "Elm", variant = "at noon" } do
    t.raises(function() report_of { figures = { shown, { show = "rim_size_angle", along = { projected_baseline = lacuna.sweep("20 m", "90 m", 3) }, [field] = wrong } } } end, "no " .. field .. ' "' .. wrong .. '" in the study')
  end
  t.raises(function() report_of { figures = { { shw = "rim_size_angle" } } } end, "figure: there is no 'shw' here")
  t.raises(function() report_of { figures = { "rim_size_angle" } } end, "study: figure 1 wants a table")
end)

t.test("what a killed run left half written goes, and nothing else", function()
  local name, _, study = report_of {}
  for _, extra in ipairs { "table.csv.unfinished-4711-0", "table.csv.backup" } do assert(io.open(folder .. "/" .. name .. "/" .. extra, "w")):close() end
  study:report(folder .. "/" .. name, { force = true })
  t.equal(read(name .. "/table.csv.unfinished-4711-0"), nil)
  t.equal(read(name .. "/table.csv.backup"), "")
end)

t.test("a user's own recipe is cited in its own words", function()
  lacuna.relation { gives = "rim_height_ratio", by = "thumb", from = { "stellar_mass" }, function(mass) return 0.1 * mass / lacuna.Msun end, source = "A & B, private note (2031)",
    equation = "[rim_height_ratio] = 0.1 [stellar_mass]", supposes = "a rule of thumb" }
  local name = report_of { targets = { stars[1] }, ask = { "rim_height_ratio" } }
  has(read(name .. "/references.bib"), "@misc{a_b_private_note_2031,")
  has(read(name .. "/derivations.tex"), "\\cite{a_b_private_note_2031}")
end)

t.test("many targets, in the draft and in tables that fit on pages", function()
  local many = {}
  for i = 1, 120 do many[i] = { name = "Star " .. i, distance = 50 + i .. " pc", rim_radius = "0.1 au" } end
  local name = report_of { targets = many, ask = { "rim_resolved_by_array" } }
  has(read(name .. "/feasibility.txt"), "and 108 others")
  t.equal(select(2, read(name .. "/table.tex"):gsub("\\begin{table%*}", "")), 3)
  has(read(name .. "/table.tex"), "of them. This estimates geometric feasibility") -- sentences stay sentences
  local rims = {} -- 0.2 au are half a fringe spacing, 1.65 um / (2 92 m), at 108 pc: seven are nearer
  for i = 1, 60 do rims[i] = { name = "Star " .. i, distance = 50 + 8 * i .. " pc", rim_radius = "0.1 au" } end
  local _, _, study = report_of { targets = rims, ask = { "rim_resolved_by_array" } }
  t.equal(study.notes[1].lines[1][2]:find "^rim_elements_by_array < elements_required 1: 0%.%d+ to 0%.%d+ for 53 of the 60 targets$" ~= nil, true, study.notes[1].lines[1][2])
end)

scratch.remove()
t.finish()
