-- SPDX-License-Identifier: GPL-3.0-or-later
-- Every line of the README's tour is run, and its answer compared with what the README shows. With REWRITE=1 in the environment the answers
-- are written into the README instead: for a change that is meant, to be read before it is kept.
package.path = "tests/lua/?.lua;" .. package.path
local harness = require "harness"
local lacuna = require "lacuna"

-- What the prompt prints for a line: the results written out, or the error.
local function answer(line, environment)
  local chunk, complaint = load("return " .. line, "=prompt", "t", environment)
  if not chunk then chunk, complaint = load(line, "=prompt", "t", environment) end
  if not chunk then return complaint end
  local results = table.pack(pcall(chunk))
  if not results[1] then return (tostring(results[2]):gsub("^[^:]+:%d+: ", "")) end
  if results.n == 1 then return "" end
  return lacuna.show(table.unpack(results, 2, results.n))
end

-- The blocks of a document that are fenced as ```lacuna: a list of lists of {line =, shown =}, and the document with answers put in.
local function run(document, environment)
  local out, entries, inside = {}, {}, false
  for line in document:gmatch "([^\n]*)\n" do
    local fence = line:match "^```(%w*)"
    if fence then
      inside = fence == "lacuna"
      out[#out + 1] = line
    elseif inside and line:find "^> " then
      local got = answer(line:sub(3), environment)
      entries[#entries + 1] = { line = line:sub(3), got = got, shown = {} }
      out[#out + 1] = line
      if got ~= "" then out[#out + 1] = got end
    elseif inside then
      local shown = entries[#entries].shown
      shown[#shown + 1] = line
    else
      out[#out + 1] = line
    end
  end
  return entries, table.concat(out, "\n") .. "\n"
end

local file = assert(io.open "README.md")
local document = file:read "a"
file:close()
lacuna.settings { seed = 0, draws = 10000 }
local entries, rewritten = run(document, lacuna.globals(setmetatable({}, nil)))

if os.getenv "REWRITE" then
  local out = assert(io.open("README.md.new", "w"))
  out:write(rewritten)
  out:close()
  assert(os.rename("README.md.new", "README.md"))
end
for _, entry in ipairs(entries) do
  harness.test(entry.line, function() harness.equal(entry.got, table.concat(entry.shown, "\n"), "the answer shown") end)
end
harness.test("the tour has lines", function() harness.equal(#entries > 15, true, "more than 15 lines") end)
harness.finish()
