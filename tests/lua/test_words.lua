-- SPDX-License-Identifier: GPL-3.0-or-later
-- The records of the language's words: every word and every method has one, none is without its word, and every example prints what the
-- record says. With REWRITE=1 in the environment the answers are put into bindings/words_*.lua, to be read before they are kept.
-- Stars and instruments are invented.
package.path = "tests/lua/?.lua;" .. package.path
local t = require "harness"
local session = require "session"
local lacuna = require "lacuna"
local core = require "private"
local words = core.part "lacuna.words"

local function lines_of(example) return type(example) == "table" and example or { example } end

-- What is printed for an example: the answer to its last line; the lines before prepare it.
local function answer_of(example)
  local answers = session.fresh(lines_of(example))
  return answers[#answers]
end

-- Rewriting -----------------------------------------------------------------------------------------------------------------------

-- A text as it is written in a record: what has several lines in long brackets, so that it can be read there.
local function as_source(text)
  if not text:find "\n" then return ("%q"):format(text) end
  local level = ""
  while text:find("]" .. level .. "]", 1, true) or text:find("]" .. level .. "$") do level = level .. "=" end
  return ("[%s[\n%s]%s]"):format(level, text, level)
end

local function written(record)
  local texts = {}
  for i, example in ipairs(record.examples) do texts[i] = as_source(answer_of(example)) end
  return #texts == 0 and "{}" or "{ " .. table.concat(texts, ", ") .. " }"
end

-- Where a table that begins there ends: at the first brace with which it is one in Lua.
local function end_of_table(source, start)
  for at in source:gmatch "()}" do
    if at > start and load("return " .. source:sub(start, at)) then return at end
  end
end

-- The n-th place in a file that sets answers belongs to the n-th of its records that has examples.
local function rewrite(file)
  local handle = assert(io.open(file))
  local source, pieces, from = handle:read "a", {}, 1
  handle:close()
  for _, record in ipairs(core.part("lacuna." .. file:match "([%w_]+)%.lua$")) do
    if record.examples then
      local _, start = source:find("%f[%w_]answers = {", from)
      pieces[#pieces + 1] = source:sub(from, start - 1)
      pieces[#pieces + 1] = written(record)
      from = end_of_table(source, start) + 1
    end
  end
  local out = assert(io.open(file .. ".new", "w"))
  out:write(table.concat(pieces), source:sub(from))
  out:close()
  assert(os.rename(file .. ".new", file))
end

if os.getenv "REWRITE" then
  for file in io.popen("ls bindings/words_*.lua"):lines() do rewrite(file) end
  print "1..0 # rewritten: build again, then read the differences"
  os.exit(true)
end

-- Checks --------------------------------------------------------------------------------------------------------------------------

-- What an object says it has, in the error for a word that it hasn't.
local function told_by(object)
  local ok, message = pcall(function() return object.no_such_word end)
  if ok then error "an object answers any word" end
  local names = {}
  for name in message:match "it has (.*)$":gsub("%b()", ""):gmatch "[%w_]+" do names[#names + 1] = name end
  return names
end

local function keys_of(...)
  local names = {}
  for _, list in ipairs { ... } do
    for name in pairs(list) do names[#names + 1] = name end
  end
  return names
end

local quiet_print = print
print = function() end
local study = lacuna.study { targets = { { name = "Alder", distance = "140 pc" } }, given = { rim_radius = "0.3 au" }, ask = { "rim_radius_angle" } }
print = quiet_print
local one_case = lacuna.case { distance = "140 pc" }
local _ = pcall(one_case.solve, one_case) -- loads what is loaded on demand

local has = {
  case = keys_of(core.case_methods), quantity = told_by(lacuna.au), study = keys_of(getmetatable(study).__index),
  dust = told_by(lacuna.dust { materials = "soot", sizes = "1 um" }), material = told_by(lacuna.material "soot"), band = told_by(lacuna.band "H"),
  spread = keys_of(lacuna.spread), sweep = keys_of(lacuna.sweep),
}
local module = {}
for name, value in pairs(lacuna) do
  if not core.unit(name) and not core.find(name) then module[#module + 1] = name end
end
for _, name in ipairs(keys_of(getmetatable(lacuna).later, { dust = true, band = true })) do module[#module + 1] = name end

t.test("every word has a record", function()
  for _, name in ipairs(module) do
    local record = words.find(name)
    if not record or record.of then error("no record of the word " .. name) end
  end
end)

t.test("every method has a record", function()
  for of, names in pairs(has) do
    if #names == 0 then error(of .. " has nothing") end
    for _, name in ipairs(names) do
      if #words.all(of .. ":" .. name) == 0 and #words.all(of .. "." .. name) == 0 then error(("no record of %s's %s"):format(of, name)) end
    end
  end
end)

t.test("no record is without its word", function()
  local known = {}
  for _, name in ipairs(module) do known[name] = true end
  for of, names in pairs(has) do
    for _, name in ipairs(names) do known[of .. " " .. name] = true end
  end
  known["study rows"] = study.rows ~= nil
  for _, record in ipairs(words.list()) do
    local name = words.full_name(record)
    if not record.of and not known[record.name] then error("no word " .. name) end
    if record.of and has[record.of] and not known[record.of .. " " .. record.name] then error("no " .. name) end
    if record.also_of and not known[record.also_of .. " " .. record.name] then error(name .. " is no method of " .. record.also_of) end
  end
end)

local function defects_of(record, seen)
  local name, defects = words.full_name(record), {}
  local function want(holds, what) if not holds then defects[#defects + 1] = name .. ": " .. what end end
  want(not seen[name], "another record of it")
  seen[name] = true
  want(#record.forms > 0, "no forms")
  want(#words.one_line(name) <= 95, "its first sentence is long: " .. words.one_line(name))
  want(record.examples, "no examples; an empty list where they would want the prompt or leave files")
  want(record.result, "no result")
  local takes_something = table.concat(record.forms, "\n"):find '[({"][^)}]'
  want(not takes_something or record.arguments, "no arguments")
  want(not takes_something or record.errors or name == "show", "no errors") -- show takes anything
  want(#(record.examples or {}) == #(record.answers or {}), "as many answers as examples are wanted")
  for _, other in ipairs(record.see or {}) do want(words.find(other), "see " .. other .. ", which has no record") end
  return defects
end

t.test("a record says what is wanted of it", function()
  local seen, defects = {}, {}
  for _, record in ipairs(words.list()) do
    for _, defect in ipairs(defects_of(record, seen)) do defects[#defects + 1] = defect end
  end
  t.equal(table.concat(defects, "\n"), "")
end)

for _, record in ipairs(words.list()) do
  for i, example in ipairs(record.examples or {}) do
    t.test(words.full_name(record) .. ": " .. table.concat(lines_of(example), "; "), function() t.equal(answer_of(example), record.answers[i]) end)
  end
end
t.finish()
